/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Which identities hold in which algebras. Sources, from memory:
 *   octonions: alternative, flexible, Moufang; not associative (Schafer, An Introduction to
 *     Nonassociative Algebras, III)
 *   commutator of the octonions: Malcev, not Lie (Sagle, Trans. Amer. Math. Soc. 101 (1961))
 *   2x2 matrices: the standard identity of degree 4, not that of degree 3 (Amitsur and Levitzki,
 *     Proc. Amer. Math. Soc. 1 (1950))
 *   sl_2, Heisenberg, symmetric matrices, Filippov's algebra, Burde's, Mendel's law: textbook and
 *     the sources in the files
 * The second route is an evaluation with fractions, tree by tree, on random small algebras.
 */
#include <stdio.h>
#include <string.h>

#include "model/model_private.h"
#include "support.h"

#define PLAIN "operation a*b\ndefine ass(a,b,c) = (a*b)*c - a*(b*c)\n"
#define BRACKET "operation [a,b] alternating\n"
#define JACOBI "[[x,y],z] + [[y,z],x] + [[z,x],y] = 0\n"
#define CENTRAL "define com(a,b) = a*b - b*a\n"
#define S3 "(a*b)*c - (b*a)*c + (b*c)*a - (c*b)*a + (c*a)*b - (a*c)*b"

static const struct {
    const char *file;
    const char *text; /* presentation with one candidate */
    bool holds;
} list[] = {
    {"algebras/octonions", PLAIN "candidate ass(x,x,y) = 0\n", true},
    {"algebras/octonions", PLAIN "candidate ass(x,y,y) = 0\n", true},
    {"algebras/octonions", PLAIN "candidate (a*x)*(y*a) = (a*(x*y))*a\n", true},
    {"algebras/octonions", PLAIN "candidate ass(x,y,z) = 0\n", false},
    {"algebras/octonions", PLAIN "candidate x*y = y*x\n", false},
    {"algebras/octonions", PLAIN "candidate 0*x = 0\n", true},
    {"algebras/octonions", PLAIN "candidate 2*x = 0\n", false},
    {"algebras/quaternions", PLAIN "candidate ass(x,y,z) = 0\n", true},
    {"algebras/malcev-7", BRACKET "candidate [[x,y],[x,z]] = [[[x,y],z],x] + [[[y,z],x],x]"
                                  " + [[[z,x],x],y]\n", true},
    {"algebras/malcev-7", BRACKET "candidate " JACOBI, false},
    {"algebras/sl-2", BRACKET "candidate " JACOBI, true},
    {"algebras/sl-2", BRACKET "candidate [[x,y],[z,t]] = 0\n", false},
    {"algebras/heisenberg", BRACKET "candidate [[x,y],z] = 0\n", true},
    {"algebras/heisenberg", BRACKET "candidate [x,y] = 0\n", false},
    {"algebras/matrices-2", PLAIN "candidate ass(x,y,z) = 0\n", true},
    {"algebras/matrices-2", PLAIN CENTRAL "candidate com(com(x,y)*com(x,y),z) = 0\n", true},
    {"algebras/matrices-2",
     PLAIN "define s(a,b,c) = " S3 "\n"
           "candidate s(b,c,d)*a - s(a,c,d)*b + s(a,b,d)*c - s(a,b,c)*d = 0\n", true},
    {"algebras/matrices-2", PLAIN "candidate " S3 " = 0\n", false},
    {"algebras/symmetric-2", "operation a*b commutative\n"
                             "candidate ((x*x)*y)*x = (x*x)*(y*x)\n", true},
    {"algebras/symmetric-3", "operation a*b commutative\n"
                             "candidate ((x*x)*y)*x = (x*x)*(y*x)\n", true},
    {"algebras/symmetric-3", "operation a*b commutative\n"
                             "candidate (x*y)*z = x*(y*z)\n", false},
    {"algebras/triple-so-3", "operation (a,b,c) = -(b,a,c)\n"
                             "candidate (a,b,c) + (b,c,a) + (c,a,b) = 0\n", true},
    {"algebras/triple-so-3", "operation (a,b,c) = -(b,a,c)\n"
                             "candidate (a,b,(c,d,e)) = ((a,b,c),d,e) + (c,(a,b,d),e)"
                             " + (c,d,(a,b,e))\n", true},
    {"algebras/filippov-4", "operation [a,b,c] alternating\n"
                            "candidate [[a,b,c],d,e] = [[a,d,e],b,c] + [a,[b,d,e],c]"
                            " + [a,b,[c,d,e]]\n", true},
    {"algebras/pre-lie-2", PLAIN "candidate ass(x,y,z) = ass(y,x,z)\n", true},
    {"algebras/pre-lie-2", PLAIN "candidate ass(x,y,z) = ass(x,z,y)\n", false},
    {"crosses/gametes", "operation a*b commutative\n"
                        "candidate ((x*x)*y)*x = (x*x)*(y*x)\n", true},
    {"crosses/gametes", "operation a*b commutative\ncandidate (x*y)*z = x*(y*z)\n", false},
};

static ids_algebra *read_file(ids_ctx *ctx, const char *name)
{
    char path[4096];
    static char text[1u << 16];
    ids_algebra *algebra = NULL;

    (void)snprintf(path, sizeof path, IDSPAN_DATA_DIR "/%s.alg", name);
    FILE *file = fopen(path, "rb");
    ck_assert_ptr_nonnull(file);
    const size_t length = fread(text, 1, sizeof text, file);
    fclose(file);
    TEST_OK(ctx, ids_algebra_read(ctx, text, length, path, &algebra));
    return algebra;
}

/* ---- the second route ------------------------------------------------------------------------ */

enum { MOST = 8 };

/* value = a tree on basis elements: by multiplication of fractions. */
static void evaluate(const ids_algebra *algebra, const idsi_token **at, const uint32_t *tuple,
                     mpq_t value[MOST])
{
    const idsi_token token = *(*at)++;
    const uint32_t n = algebra->dimension;
    mpq_t argument[IDS_MAX_ARITY][MOST];
    mpq_t term;

    for (uint32_t r = 0; r < n; r++) {
        mpq_set_ui(value[r], !idsi_is_node(token) && tuple[token - 1] == r, 1);
    }
    if (!idsi_is_node(token)) {
        return;
    }
    const uint32_t op = idsi_node_op(token);
    const uint32_t arity = algebra->sig->ops[op].arity;
    mpq_init(term);
    for (uint32_t k = 0; k < arity; k++) {
        for (uint32_t r = 0; r < n; r++) {
            mpq_init(argument[k][r]);
        }
        evaluate(algebra, at, tuple, argument[k]);
    }
    for (size_t i = 0; i < ids_algebra_count(algebra, op); i++) {
        ids_constant c = {0};
        ck_assert_int_eq(ids_algebra_constant(algebra, op, i, &c), IDS_OK);
        mpq_set_si(term, (mp_limb_signed_t)c.numerator, (mp_limb_t)c.denominator);
        for (uint32_t k = 0; k < arity; k++) {
            mpq_mul(term, term, argument[k][c.argument[k]]);
        }
        mpq_add(value[c.result], value[c.result], term);
    }
    for (uint32_t k = 0; k < arity; k++) {
        for (uint32_t r = 0; r < n; r++) {
            mpq_clear(argument[k][r]);
        }
    }
    mpq_clear(term);
}

static bool is_zero_on(const ids_algebra *algebra, const idsi_poly *poly, const uint32_t *tuple)
{
    mpq_t value[MOST];
    mpq_t sum[MOST];
    bool zero = true;

    for (uint32_t r = 0; r < MOST; r++) {
        mpq_init(value[r]);
        mpq_init(sum[r]);
    }
    for (size_t t = 0; t < poly->count; t++) {
        const idsi_token *at = poly->tokens + poly->start[t];
        evaluate(algebra, &at, tuple, value);
        for (uint32_t r = 0; r < algebra->dimension; r++) {
            mpq_mul(value[r], value[r], poly->coefficients[t]);
            mpq_add(sum[r], sum[r], value[r]);
        }
    }
    for (uint32_t r = 0; r < MOST; r++) {
        zero = zero && mpq_sgn(sum[r]) == 0;
        mpq_clear(value[r]);
        mpq_clear(sum[r]);
    }
    return zero;
}

static bool next_tuple(uint32_t *tuple, uint32_t degree, uint32_t dimension)
{
    for (uint32_t i = 0; i < degree; i++) {
        if (++tuple[i] < dimension) {
            return true;
        }
        tuple[i] = 0;
    }
    return false;
}

/* ---- tests ----------------------------------------------------------------------------------- */

START_TEST(test_known)
{
    ids_ctx *ctx = test_ctx();
    ids_algebra *algebra = read_file(ctx, list[_i].file);
    ids_presentation *pres = NULL;
    uint32_t tuple[IDSI_MAX_IDENTITY_DEGREE] = {0};
    bool holds = !list[_i].holds;

    TEST_OK(ctx, ids_presentation_read(ctx, list[_i].text, strlen(list[_i].text), "t", &pres));
    TEST_OK(ctx, ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_CANDIDATE, 0, &holds, tuple, 16));
    ck_assert_msg(holds == list[_i].holds, "%s: %s", list[_i].file, list[_i].text);
    if (!holds) {
        const idsi_identity *claim = idsi_presentation_get(pres, IDS_ROLE_CANDIDATE, 0);
        ck_assert(!is_zero_on(algebra, &claim->linear, tuple));
    }
    ids_presentation_free(pres);
    ids_algebra_free(algebra);
    test_ctx_free(ctx);
}
END_TEST

/* A random algebra of dimension 2 or 3 with a few constants, some of them fractions. */
static ids_algebra *random_algebra(ids_ctx *ctx, idsi_random *random, const ids_signature *sig)
{
    ids_algebra *algebra = NULL;
    const uint32_t n = 2 + (uint32_t)idsi_random_below(random, 2);

    while (algebra == NULL) {
        ids_constant some[6] = {0};
        const size_t count = idsi_random_below(random, 7);
        for (size_t i = 0; i < count; i++) {
            some[i].operation = (uint32_t)idsi_random_below(random, sig->count);
            for (uint32_t k = 0; k < 3; k++) {
                some[i].argument[k] = (uint32_t)idsi_random_below(random, n);
            }
            some[i].result = (uint32_t)idsi_random_below(random, n);
            some[i].numerator = (int64_t)idsi_random_below(random, 5) - 2;
            some[i].denominator = 1 + (int64_t)idsi_random_below(random, 3);
            if (idsi_random_below(random, 20) == 0) {
                some[i].numerator = INT64_C(1) << 40; /* more than one prime */
            }
        }
        ids_status st = ids_algebra_create(ctx, sig, n, NULL, some, count, &algebra);
        ck_assert(st == IDS_OK || st == IDS_ERR_DOMAIN);
    }
    return algebra;
}

START_TEST(test_two_routes)
{
    static const char text[] =
        "operation a*b\noperation [a,b] alternating\noperation (a,b,c) = (b,c,a)\n"
        "candidate (x*y)*x = x*(y*x)\ncandidate [[x,y],z] = 0\ncandidate (x*x)*x = 0\n"
        "candidate (x,y*y,z) = (x,y,z)*y\ncandidate [x*y,z] = [x,z]*y + x*[y,z]\n"
        "candidate (x,(x,y,x),y) = 0\ncandidate [x,x*x] = [x*x,x]\n"
        "candidate ((x*y)*z)*x = (x*(y*z))*x\n";
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    idsi_random random;
    unsigned answers[2] = {0};

    test_random(&random, 7100);
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), "t", &pres));
    for (uint64_t round = 0; round < 100 * test_scale(); round++) {
        ids_algebra *algebra = random_algebra(ctx, &random, pres->sig);
        for (size_t i = 0; i < pres->count; i++) {
            const idsi_poly *poly = &pres->list[i].linear;
            uint32_t tuple[IDSI_MAX_IDENTITY_DEGREE] = {0};
            uint32_t found[IDSI_MAX_IDENTITY_DEGREE] = {0};
            bool holds = false;
            bool expected = true;
            do {
                expected = is_zero_on(algebra, poly, tuple);
            } while (expected && next_tuple(tuple, poly->degree, algebra->dimension));
            TEST_OK(ctx, ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_CANDIDATE, i, &holds, found,
                                           16));
            ck_assert_int_eq(holds, expected);
            ck_assert(holds || !is_zero_on(algebra, poly, found));
            answers[holds]++;
        }
        ids_algebra_free(algebra);
    }
    ck_assert_uint_gt(answers[0], 50);
    ck_assert_uint_gt(answers[1], 50);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* A value that is a multiple of the first prime that is tried, 2^30 - 35, but not 0. */
START_TEST(test_several_primes)
{
    static const char text[] = "basis x\noperation a*b\nx*x = 1073741789 x\n";
    static const char pres_text[] = "operation a*b\ncandidate a*b = 0\n";
    ids_ctx *ctx = test_ctx();
    ids_algebra *algebra = NULL;
    ids_presentation *pres = NULL;
    bool holds = true;

    TEST_OK(ctx, ids_algebra_read(ctx, text, strlen(text), NULL, &algebra));
    TEST_OK(ctx, ids_presentation_read(ctx, pres_text, strlen(pres_text), NULL, &pres));
    TEST_OK(ctx, ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_CANDIDATE, 0, &holds, NULL, 0));
    ck_assert(!holds);
    ids_algebra_free(algebra);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* A product of vectors mod a prime, by hand: in the octonions (e1 + 2 e2)(3 e2 + e4) is
 * 3 e4 + e1 e4 - 6 e0 + 2 e2 e4, and e1 e4 = -e2, e2 e4 = e1. */
START_TEST(test_residues)
{
    ids_ctx *ctx = test_ctx();
    ids_algebra *algebra = read_file(ctx, "algebras/octonions");
    idsi_residues *residues = NULL;
    bool good = false;
    const uint32_t a[8] = {0, 1, 2};
    const uint32_t b[8] = {0, 0, 3, 0, 1};
    const uint32_t zero[8] = {0};
    const uint32_t expected[8] = {101 - 6, 2, 101 - 1, 0, 3};
    const uint32_t *arguments[2] = {a, b};
    uint32_t value[8];

    TEST_OK(ctx, idsi_residues_create(ctx, algebra, 101, &good, &residues));
    ck_assert(good);
    ck_assert(idsi_residues_product(residues, 0, arguments, value));
    ck_assert_mem_eq(value, expected, sizeof value);
    arguments[1] = zero;
    ck_assert(!idsi_residues_product(residues, 0, arguments, value));
    idsi_residues_free(residues);
    ids_algebra_free(algebra);
    algebra = read_file(ctx, "algebras/symmetric-2");
    residues = NULL;
    TEST_OK(ctx, idsi_residues_create(ctx, algebra, 2, &good, &residues));
    ck_assert(!good);
    ck_assert_ptr_null(residues);
    ids_algebra_free(algebra);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_refuse)
{
    static const char text[] = "operation a.b\ncandidate a.b = 0\n";
    ids_ctx *ctx = test_ctx();
    ids_algebra *algebra = read_file(ctx, "algebras/sl-2");
    ids_presentation *pres = NULL;
    uint32_t tuple[2];
    bool holds = true;

    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    TEST_STATUS(ctx, ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_CANDIDATE, 0, &holds, NULL, 0),
                IDS_ERR_DOMAIN);
    TEST_STATUS(ctx, ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_CANDIDATE, 1, &holds, NULL, 0),
                IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_CANDIDATE, 0, &holds, tuple, 1),
                IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_holds(ctx, NULL, pres, IDS_ROLE_CANDIDATE, 0, &holds, NULL, 0),
                IDS_ERR_ARG);
    ids_algebra_free(algebra);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("identities of algebras");
    TCase *tcase = tcase_create("holds");

    tcase_add_loop_test(tcase, test_known, 0, (int)(sizeof list / sizeof *list));
    tcase_add_test(tcase, test_two_routes);
    tcase_add_test(tcase, test_several_primes);
    tcase_add_test(tcase, test_residues);
    tcase_add_test(tcase, test_refuse);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
