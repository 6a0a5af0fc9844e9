/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * bench_count [DEGREE [SECONDS]]
 *
 * Counts the types and the monomials of a commutative binary and a commutative ternary operation
 * up to DEGREE (1000), again and again until the 95 % interval of the mean is within 1 % of it,
 * or SECONDS (10) are over, at least once. Prints one line with tabs: name, least and median time
 * in seconds, number of runs.
 */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include <idspan/gmp.h>

#define MOST_RUNS 10000u

static double now(void)
{
    struct timespec time = {0};

    clock_gettime(CLOCK_MONOTONIC, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

static int compare(const void *a, const void *b)
{
    double x = *(const double *)a;
    double y = *(const double *)b;

    return x < y ? -1 : x > y;
}

/* Whether 1.96 standard errors are within 1 % of the mean. */
static int is_narrow(const double *times, size_t runs)
{
    double mean = 0;
    double square = 0;

    for (size_t i = 0; i < runs; i++) {
        mean += times[i] / (double)runs;
    }
    for (size_t i = 0; i < runs; i++) {
        square += (times[i] - mean) * (times[i] - mean);
    }
    return runs >= 5 && 1.96 * sqrt(square / ((double)(runs - 1) * (double)runs)) <= 0.01 * mean;
}

/* One run: all counts, and both numbers of the last degree. */
static ids_status run(ids_ctx *ctx, const ids_signature *signature, uint32_t degree, double *time)
{
    double start = now();
    ids_counts *counts = NULL;
    ids_status st = ids_counts_create(ctx, signature, degree, &counts);
    mpz_t number;

    mpz_init(number);
    if (st == IDS_OK) {
        st = ids_counts_types(counts, degree, number);
    }
    if (st == IDS_OK) {
        st = ids_counts_monomials(counts, degree, number);
    }
    mpz_clear(number);
    ids_counts_free(counts);
    *time = now() - start;
    return st;
}

int main(int argc, char **argv)
{
    static double times[MOST_RUNS];
    const ids_operation operations[2] = {
        {.notation = IDS_NOTATION_PREFIX,
         .open = "f",
         .arity = 2,
         .symmetry = IDS_SYMMETRY_COMMUTATIVE},
        {.notation = IDS_NOTATION_PREFIX,
         .open = "g",
         .arity = 3,
         .symmetry = IDS_SYMMETRY_COMMUTATIVE},
    };
    uint32_t degree = argc > 1 ? (uint32_t)strtoul(argv[1], NULL, 10) : 1000;
    double seconds = argc > 2 ? strtod(argv[2], NULL) : 10;
    double end = now() + seconds;
    ids_ctx *ctx = NULL;
    ids_signature *signature = NULL;
    size_t runs = 0;
    ids_status st = ids_ctx_create(NULL, &ctx);

    if (st == IDS_OK) {
        st = ids_signature_create(ctx, operations, 2, &signature);
    }
    while (st == IDS_OK && runs < MOST_RUNS &&
           (runs == 0 || (now() < end && !is_narrow(times, runs)))) {
        st = run(ctx, signature, degree, &times[runs++]);
    }
    if (st == IDS_OK) {
        qsort(times, runs, sizeof *times, compare);
        printf("count_degree_%u\t%.6f\t%.6f\t%zu\n", (unsigned)degree, times[0], times[runs / 2],
               runs);
    } else {
        fprintf(stderr, "bench_count: %s\n", ids_ctx_message(ctx));
    }
    ids_signature_free(signature);
    ids_ctx_free(ctx);
    return st == IDS_OK ? EXIT_SUCCESS : EXIT_FAILURE;
}
