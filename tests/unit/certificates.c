/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Sources of the answers, from memory unless a number says otherwise:
 *   Schafer          R. D. Schafer, An Introduction to Nonassociative Algebras (1966), chapters III
 *                    (alternative: flexible, Moufang identities, Artin's theorem) and V (power
 *                    associativity)
 *   Jacobson         N. Jacobson, Structure and Representations of Jordan Algebras (1968), I
 *                    (powers associate; the linearised operator identity)
 *   Albert           A. A. Albert, Power-associative rings, Trans. Amer. Math. Soc. 64 (1948)
 *   Malcev           A. I. Mal'cev, Analytic loops, Mat. Sb. 36 (1955): the commutator of an
 *                    alternative algebra satisfies his identity
 *   Sagle            A. A. Sagle, Malcev algebras, Trans. Amer. Math. Soc. 101 (1961)
 *   Lister           W. G. Lister, A structure theory of Lie triple systems, Trans. Amer. Math.
 *                    Soc. 72 (1952)
 * Refutations: the octonions are alternative and not associative; a Lie algebra is flexible and,
 * where products of three elements do not all vanish, not alternative (textbook).
 */
#include <inttypes.h>
#include <stdio.h>
#include <string.h>

#include "certificates.h"

#include "answer/certificate_private.h"

#define COMMUTATIVE "operation a*b commutative\n"
#define JORDAN COMMUTATIVE "identity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n"
#define PLAIN "operation a*b\ndefine ass(a,b,c) = (a*b)*c - a*(b*c)\n"
#define ALTERNATIVE PLAIN "identity left: ass(a,a,b) = 0\nidentity right: ass(a,b,b) = 0\n"
#define LIE "operation [a,b] alternating\nidentity [[a,b],c] + [[b,c],a] + [[c,a],b] = 0\n"

const theorem theorem_list[] = {
    {"Jordan: fourth powers (Jacobson)", JORDAN "candidate c: ((x*x)*x)*x = (x*x)*(x*x)\n", true},
    {"Jordan: fifth powers (Jacobson)", JORDAN "candidate c: (((x*x)*x)*x)*x = ((x*x)*x)*(x*x)\n",
     true},
    {"Jordan: sixth powers (Jacobson)",
     JORDAN "candidate c: ((((x*x)*x)*x)*x)*x = ((x*x)*x)*((x*x)*x)\n", true},
    {"Jordan: operators of x^2 and x^3 commute (Jacobson)",
     JORDAN "candidate c: (x*x)*(((x*x)*x)*y) = ((x*x)*x)*((x*x)*y)\n", true},
    {"Jordan: the linearised operator identity (Jacobson)",
     JORDAN "candidate c: ((a*b)*d)*c + ((b*c)*d)*a + ((c*a)*d)*b"
            " = (a*b)*(d*c) + (b*c)*(d*a) + (c*a)*(d*b)\n",
     true},
    {"alternative: flexible (Schafer)", ALTERNATIVE "candidate c: ass(a,b,a) = 0\n", true},
    {"alternative: left Moufang (Schafer)", ALTERNATIVE "candidate c: ((a*x)*a)*y = a*(x*(a*y))\n",
     true},
    {"alternative: right Moufang (Schafer)", ALTERNATIVE "candidate c: ((y*a)*x)*a = y*(a*(x*a))\n",
     true},
    {"alternative: middle Moufang (Schafer)",
     ALTERNATIVE "candidate c: (a*x)*(y*a) = (a*(x*y))*a\n", true},
    {"alternative: two generators associate, a case (Artin; Schafer)",
     ALTERNATIVE "candidate c: ((a*b)*a)*b = (a*b)*(a*b)\n", true},
    {"alternative: the commutator is Malcev (Malcev)",
     ALTERNATIVE "define com(a,b) = a*b - b*a\n"
                 "candidate c: com(com(x,y),com(x,z)) = com(com(com(x,y),z),x)"
                 " + com(com(com(y,z),x),x) + com(com(com(z,x),x),y)\n",
     true},
    {"alternative: the symmetrised product is Jordan (Schafer)",
     ALTERNATIVE "define o(a,b) = a*b + b*a\n"
                 "candidate c: o(o(o(x,x),y),x) = o(o(x,x),o(y,x))\n",
     true},
    {"fourth powers: fifth powers (Albert)",
     COMMUTATIVE "identity p: ((x*x)*x)*x = (x*x)*(x*x)\n"
                 "candidate c: (((x*x)*x)*x)*x = ((x*x)*x)*(x*x)\n",
     true},
    {"Lie: the derivation law of triple products (Lister)",
     LIE "candidate c: [[a,b],[[c,d],e]] = [[[[a,b],c],d],e] + [[c,[[a,b],d]],e]"
         " + [[c,d],[[a,b],e]]\n",
     true},
    {"a candidate that is zero, by hand", JORDAN "candidate c: x*(y*x) - (x*y)*x = 0\n", true},
    {"Jordan: not associative (Jacobson)", JORDAN "candidate c: (a*b)*c = a*(b*c)\n", false},
    {"power-associative: not Jordan (Albert)",
     COMMUTATIVE "identity p: ((x*x)*x)*x = (x*x)*(x*x)\n"
                 "candidate c: ((x*x)*y)*x = (x*x)*(y*x)\n",
     false},
    {"alternative: not associative (octonions)", ALTERNATIVE "candidate c: ass(a,b,c) = 0\n",
     false},
    {"flexible: not alternative (Lie algebras)",
     PLAIN "identity f: ass(a,b,a) = 0\ncandidate c: ass(a,a,b) = 0\n", false},
    {"flexible: not power-associative (Schafer)",
     PLAIN "identity f: ass(a,b,a) = 0\ncandidate c: ((x*x)*x)*x = (x*x)*(x*x)\n", false},
    {"right alternative: not left alternative (Albert, right alternative algebras)",
     PLAIN "identity r: ass(a,b,b) = 0\ncandidate c: ass(a,a,b) = 0\n", false},
    {"Malcev: Jacobi's sum does not annihilate (imaginary octonions; Sagle)",
     "operation [a,b] alternating\n"
     "identity m: [[x,y],[x,z]] = [[[x,y],z],x] + [[[y,z],x],x] + [[[z,x],x],y]\n"
     "candidate c: [[[a,b],c],d] + [[[b,c],a],d] + [[[c,a],b],d] = 0\n",
     false},
    {"Lie: not nilpotent (textbook)", LIE "candidate c: [[a,b],[c,d]] = 0\n", false},
    {"no identities: not commutative, by hand", "operation a.b\ncandidate c: a.b = b.a\n", false},
};
const size_t theorem_count = sizeof theorem_list / sizeof *theorem_list;

const theorem theorem_glennie = {
    "Glennie",
    JORDAN "define tri(a,b,c) = 2*((a*b)*c) + 2*((b*c)*a) - 2*((a*c)*b)\n"
           "define u(a,b) = 2*(a*(a*b)) - (a*a)*b\n"
           "define h(x,y,z) = tri(u(x,u(y,z)),z,2*(x*y)) - u(x,u(y,u(z,2*(x*y))))\n"
           "candidate c: h(x,y,z) - h(y,x,z) = 0\n",
    false};

int receive(void *user, const char *bytes, size_t length)
{
    return idsi_text_append(user, bytes, length) != IDS_OK;
}

ids_status certificate_make(ids_ctx *ctx, const theorem *about, idsi_text *file)
{
    ids_status st = IDS_OK;
    ids_presentation *pres = NULL;
    ids_derivation *derivation = NULL;
    ids_witness *witness = NULL;

    IDSI_TRY(ids_presentation_read(ctx, about->text, strlen(about->text), about->name, &pres));
    if (about->follows) {
        IDSI_TRY(ids_derivation_find(ctx, pres, 0, NULL, &derivation));
        IDSI_TRY(ids_derivation_write(ctx, derivation, receive, file));
    } else {
        IDSI_TRY(ids_witness_find(ctx, pres, 0, NULL, &witness));
        IDSI_TRY(ids_witness_write(ctx, witness, receive, file));
    }
done:
    ids_derivation_free(derivation);
    ids_witness_free(witness);
    ids_presentation_free(pres);
    return st;
}

ids_status certificate_algebra(ids_ctx *ctx, const theorem *about, idsi_text *file)
{
    ids_status st = IDS_OK;
    ids_presentation *pres = NULL;
    ids_counterexample *found = NULL;
    const ids_counterexample_options limits = {.struct_size = sizeof limits, .steps = 300000};

    IDSI_TRY(ids_presentation_read(ctx, about->text, strlen(about->text), about->name, &pres));
    IDSI_TRY(ids_counterexample_find(ctx, pres, 0, &limits, &found));
    IDSI_TRY(ids_counterexample_write(ctx, found, receive, file));
done:
    ids_counterexample_free(found);
    ids_presentation_free(pres);
    return st;
}

void certificate_mark(idsi_text *file)
{
    const size_t length = file->length - strlen("end 0123456789abcdef\n");
    /* An algebra file has its mark in a comment. */
    const bool comment = length >= 2 && memcmp(file->data + length - 2, "# ", 2) == 0;

    (void)snprintf(file->data + length, file->length - length + 1, "end %016" PRIx64 "\n",
                   idsi_certificate_mark(file->data, length - (comment ? 2 : 0)));
}

/* Changes a byte, takes one away, doubles one, or cuts the file. */
static void damage(idsi_random *random, const idsi_text *file, idsi_text *out)
{
    size_t at = (size_t)idsi_random_below(random, file->length);
    char byte = file->data[at];
    bool digit = byte >= '0' && byte <= '9';
    bool ok = idsi_text_append(out, file->data, at) == IDS_OK;

    switch (idsi_random_below(random, 8)) {
    case 0: /* gone */
        break;
    case 1: /* twice */
        ok = ok && idsi_text_append(out, &byte, 1) == IDS_OK &&
             idsi_text_append(out, &byte, 1) == IDS_OK;
        break;
    case 2: /* cut */
        ck_assert(ok);
        return;
    default:
        byte = (char)(digit ? '0' + (byte - '0' + 1 + (int)idsi_random_below(random, 9)) % 10
                            : byte ^ (1 + (int)idsi_random_below(random, 127)));
        ok = ok && idsi_text_append(out, &byte, 1) == IDS_OK;
        break;
    }
    ok = ok && idsi_text_append(out, file->data + at + 1, file->length - at - 1) == IDS_OK;
    ck_assert(ok);
}

/* Damages a file in `rounds` ways. */
static void damage_file(ids_ctx *ctx, idsi_random *random, const char *name, const idsi_text *file,
                        uint64_t rounds)
{
    for (uint64_t k = 0; k < rounds; k++) {
        ids_check_report report = {0};
        idsi_text bad;
        idsi_text_init(&bad, ctx);
        damage(random, file, &bad);
        /* A cut can only be at a place before the last byte, so no damage leaves the file. */
        ids_status st = ids_certificate_check(ctx, bad.data == NULL ? "" : bad.data, bad.length,
                                              "bad", &report);
        ck_assert_msg(st == IDS_ERR_PARSE || st == IDS_ERR_DOMAIN, "%s: accepted\n%s", name,
                      bad.data);
        /* Under a right mark it may be right or wrong, but must be read safely. */
        if (bad.length > 64) {
            certificate_mark(&bad);
            st = ids_certificate_check(ctx, bad.data, bad.length, "bad", &report);
            ck_assert(st != IDS_ERR_INTERNAL && st != IDS_ERR_NOMEM && st != IDS_ERR_ARG);
        }
        idsi_text_clear(&bad);
    }
}

void certificate_damage(uint64_t salt, uint64_t rounds)
{
    ids_ctx *ctx = test_ctx();
    idsi_random random;

    test_random(&random, salt);
    for (size_t i = 0; i < theorem_count; i++) {
        const theorem *about = &theorem_list[i];
        idsi_text file;
        idsi_text_init(&file, ctx);
        TEST_OK(ctx, certificate_make(ctx, about, &file));
        damage_file(ctx, &random, about->name, &file, rounds);
        idsi_text_clear(&file);
        if (!about->follows) {
            TEST_OK(ctx, certificate_algebra(ctx, about, &file));
            damage_file(ctx, &random, about->name, &file, rounds);
            idsi_text_clear(&file);
        }
    }
    test_ctx_free(ctx);
}
