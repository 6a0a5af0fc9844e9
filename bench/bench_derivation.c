/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * bench_derivation [COUNT]
 *
 * How long derivations are: for the first COUNT (10) of ten theorems, a line with tabs: name,
 * degree, terms of the solution that was found first, terms after it was made short, seconds. The
 * theorems are textbook ones; tests/unit/certificates.c names their sources.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#include <idspan/idspan.h>

#define JORDAN "operation a*b commutative\nidentity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n"
#define PLAIN "operation a*b\ndefine ass(a,b,c) = (a*b)*c - a*(b*c)\n"
#define ALTERNATIVE PLAIN "identity left: ass(a,a,b) = 0\nidentity right: ass(a,b,b) = 0\n"
#define LIE "operation [a,b] alternating\nidentity jacobi: [[a,b],c] + [[b,c],a] + [[c,a],b] = 0\n"

static const struct {
    const char *name;
    const char *text;
} theorems[] = {
    {"alternative_flexible", ALTERNATIVE "candidate ass(a,b,a) = 0\n"},
    {"alternative_moufang_middle", ALTERNATIVE "candidate (a*x)*(y*a) = (a*(x*y))*a\n"},
    {"alternative_moufang_left", ALTERNATIVE "candidate ((a*x)*a)*y = a*(x*(a*y))\n"},
    {"alternative_moufang_right", ALTERNATIVE "candidate ((y*a)*x)*a = y*(a*(x*a))\n"},
    {"alternative_commutator_malcev",
     ALTERNATIVE "define com(a,b) = a*b - b*a\n"
                 "candidate com(com(x,y),com(x,z)) = com(com(com(x,y),z),x)"
                 " + com(com(com(y,z),x),x) + com(com(com(z,x),x),y)\n"},
    {"lie_triple_derivation",
     LIE "candidate [[a,b],[[c,d],e]] = [[[[a,b],c],d],e] + [[c,[[a,b],d]],e]"
         " + [[c,d],[[a,b],e]]\n"},
    {"jordan_fourth_powers", JORDAN "candidate ((x*x)*x)*x = (x*x)*(x*x)\n"},
    {"jordan_fifth_powers", JORDAN "candidate (((x*x)*x)*x)*x = ((x*x)*x)*(x*x)\n"},
    {"jordan_sixth_powers", JORDAN "candidate ((((x*x)*x)*x)*x)*x = ((x*x)*x)*((x*x)*x)\n"},
    {"jordan_operators_commute", JORDAN "candidate (x*x)*(((x*x)*x)*y) = ((x*x)*x)*((x*x)*y)\n"},
};

static double now(void)
{
    struct timespec time = {0};

    clock_gettime(CLOCK_MONOTONIC, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

static ids_status measure(ids_ctx *ctx, size_t i)
{
    ids_presentation *presentation = NULL;
    ids_derivation *derivation = NULL;
    ids_identity_info info;
    const char *text = theorems[i].text;
    ids_status st = ids_presentation_read(ctx, text, strlen(text), NULL, &presentation);
    const double start = now();

    if (st == IDS_OK) {
        st = ids_presentation_info(presentation, IDS_ROLE_CANDIDATE, 0, &info);
    }
    if (st == IDS_OK) {
        st = ids_derivation_find(ctx, presentation, 0, NULL, &derivation);
    }
    if (st == IDS_OK) {
        printf("%s\t%u\t%zu\t%zu\t%.3f\n", theorems[i].name, (unsigned)info.degree,
               ids_derivation_first_count(derivation), ids_derivation_count(derivation),
               now() - start);
    }
    ids_derivation_free(derivation);
    ids_presentation_free(presentation);
    return st;
}

int main(int argc, char **argv)
{
    const size_t all = sizeof theorems / sizeof *theorems;
    size_t count = argc > 1 ? (size_t)strtoul(argv[1], NULL, 10) : all;
    ids_ctx *ctx = NULL;
    ids_status st = ids_ctx_create(NULL, &ctx);

    for (size_t i = 0; st == IDS_OK && i < count && i < all; i++) {
        st = measure(ctx, i);
    }
    if (st != IDS_OK) {
        fprintf(stderr, "bench_derivation: %s\n", ids_ctx_message(ctx));
    }
    ids_ctx_free(ctx);
    return st == IDS_OK ? EXIT_SUCCESS : EXIT_FAILURE;
}
