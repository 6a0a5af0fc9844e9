/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * bench_partition [DEGREE [SECONDS [SIZE]]]
 *
 * The whole cocharacter of Jordan algebras in the degrees 1 to DEGREE (10) by the partition engine,
 * against FLINT's nmod_mat_rank of one random dense matrix over a 31-bit prime, on one core; and
 * two threads against one. The matrices of the claim: 2000 x 2000 for degree 10, 4000 x 4000 for
 * 11, 12000 x 12000 for 12, where one of 6000 x 6000 is measured and its time is multiplied by 8,
 * the cube. SIZE measures another size and multiplies by nothing.
 *
 * Table, matrix and table on two threads take turns, so that whatever else the machine does meets
 * them alike, until the 95 % interval of each mean is within 1 % of it, or SECONDS (10) are over,
 * at least once. Lines with tabs: name, least and median time in seconds, number of runs, compiler,
 * commit. `cpu` is the time of the processor, `wall` that of the clock. Ratios are of least times:
 * against FLINT of processor times, two threads against one of clock times.
 */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#include <flint/nmod_mat.h>

#include <idspan/idspan.h>

#include "bench_commit.h"

#define MOST_RUNS 1000u
#define PRIME UINT64_C(2147483629) /* 31 bits */

#if defined(__clang__)
#define COMPILER "clang " __clang_version__
#elif defined(__GNUC__)
#define COMPILER "gcc " __VERSION__
#else
#define COMPILER "unknown"
#endif

static const char jordan[] = "operation a*b commutative\nidentity ((x*x)*y)*x = (x*x)*(y*x)\n";

/* ---- times ------------------------------------------------------------------------------- */

typedef struct series {
    double cpu[MOST_RUNS];
    double wall[MOST_RUNS];
    size_t runs;
} series;

static double now(clockid_t clock)
{
    struct timespec time = {0};

    clock_gettime(clock, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

static void begin(series *s)
{
    s->cpu[s->runs] = -now(CLOCK_PROCESS_CPUTIME_ID);
    s->wall[s->runs] = -now(CLOCK_MONOTONIC);
}

static void end(series *s)
{
    s->cpu[s->runs] += now(CLOCK_PROCESS_CPUTIME_ID);
    s->wall[s->runs] += now(CLOCK_MONOTONIC);
    s->runs++;
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

/* Sorts and prints; the least time. */
static double report(const char *name, const char *clock, double *times, size_t runs, double factor)
{
    qsort(times, runs, sizeof *times, compare);
    printf("%s_%s\t%.4f\t%.4f\t%zu\t%s\t%s\n", name, clock, factor * times[0],
           factor * times[runs / 2], runs, COMPILER, BENCH_COMMIT);
    return factor * times[0];
}

/* ---- what is measured ------------------------------------------------------------------------ */

static ids_status run_table(uint32_t degree, uint32_t threads, series *s)
{
    ids_ctx_options options = {.struct_size = sizeof options, .threads = threads};
    ids_ctx *ctx = NULL;
    ids_presentation *presentation = NULL;
    ids_partition_table *table = NULL;
    ids_status st = ids_ctx_create(&options, &ctx);

    begin(s);
    if (st == IDS_OK) {
        st = ids_presentation_read(ctx, jordan, strlen(jordan), "jordan", &presentation);
    }
    if (st == IDS_OK) {
        st = ids_partition_table_create(ctx, presentation, 1, degree, NULL, &table);
    }
    end(s);
    if (st != IDS_OK) {
        fprintf(stderr, "bench_partition: %s\n", ids_ctx_message(ctx));
    }
    ids_partition_table_free(table);
    ids_presentation_free(presentation);
    ids_ctx_free(ctx);
    return st;
}

/* The rank, which is `size` unless something is wrong or very unlikely. */
static slong run_matrix(slong size, uint64_t *state, series *s)
{
    nmod_mat_t matrix;
    slong rank = 0;

    nmod_mat_init(matrix, size, size, PRIME);
    for (slong i = 0; i < size; i++) {
        for (slong j = 0; j < size; j++) {
            /* xorshift64: Marsaglia, Journal of Statistical Software 8 (2003) */
            *state ^= *state << 13;
            *state ^= *state >> 7;
            *state ^= *state << 17;
            nmod_mat_entry(matrix, i, j) = (*state >> 16) % PRIME;
        }
    }
    begin(s);
    rank = nmod_mat_rank(matrix);
    end(s);
    nmod_mat_clear(matrix);
    return rank;
}

static void print(uint32_t degree, slong size, double factor, series *one, series *matrix,
                  series *two)
{
    char name[80];
    double least[4];

    snprintf(name, sizeof name, "jordan_%u", (unsigned)degree);
    least[0] = report(name, "cpu", one->cpu, one->runs, 1);
    snprintf(name, sizeof name, "flint_rank_%ld", (long)size);
    least[1] = report(name, "cpu", matrix->cpu, matrix->runs, 1);
    if (factor > 1) {
        snprintf(name, sizeof name, "flint_rank_%ld_from_%ld", 2 * (long)size, (long)size);
        least[1] = report(name, "cpu", matrix->cpu, matrix->runs, factor);
    }
    snprintf(name, sizeof name, "jordan_%u", (unsigned)degree);
    least[2] = report(name, "wall", one->wall, one->runs, 1);
    snprintf(name, sizeof name, "jordan_%u_threads_2", (unsigned)degree);
    least[3] = report(name, "wall", two->wall, two->runs, 1);
    printf("ratio_flint_to_jordan_%u\t%.2f\n", (unsigned)degree, least[1] / least[0]);
    printf("ratio_threads_1_to_2\t%.2f\n", least[2] / least[3]);
}

int main(int argc, char **argv)
{
    static series one;
    static series matrix;
    static series two;
    uint32_t degree = argc > 1 ? (uint32_t)strtoul(argv[1], NULL, 10) : 10;
    double seconds = argc > 2 ? strtod(argv[2], NULL) : 10;
    slong size = degree >= 12 ? 6000 : degree == 11 ? 4000 : 2000;
    double factor = argc > 3 || degree < 12 ? 1 : 8;
    uint64_t state = UINT64_C(88172645463325252);
    double stop = now(CLOCK_MONOTONIC) + seconds;
    ids_status st = IDS_OK;

    if (argc > 3) {
        size = (slong)strtoul(argv[3], NULL, 10);
    }
    while (st == IDS_OK && one.runs < MOST_RUNS &&
           (one.runs == 0 || (now(CLOCK_MONOTONIC) < stop &&
                              !(is_narrow(one.cpu, one.runs) && is_narrow(matrix.cpu, one.runs) &&
                                is_narrow(two.wall, one.runs))))) {
        st = run_table(degree, 1, &one);
        if (st == IDS_OK && run_matrix(size, &state, &matrix) != size) {
            fprintf(stderr, "bench_partition: the random matrix is singular\n");
            st = IDS_ERR_INTERNAL;
        }
        if (st == IDS_OK) {
            st = run_table(degree, 2, &two);
        }
    }
    if (st == IDS_OK) {
        print(degree, size, factor, &one, &matrix, &two);
    }
    flint_cleanup();
    return st == IDS_OK ? EXIT_SUCCESS : EXIT_FAILURE;
}
