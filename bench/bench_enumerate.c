/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * bench_enumerate [SECONDS]
 *
 * How fast the monomials of a degree are gone through and found at random. Each line is measured
 * again and again for SECONDS (2), at least 5 times. Lines with tabs: name, monomials a run, wall
 * time a monomial in ns (least and median), processor time a monomial in ns (least; of all
 * threads together), runs.
 *
 *     walk      ids_iter_next(), and one entry of the code is read
 *     write     the same, and the code is copied into an array
 *     copy      a plain copy of the same bytes from one array to another
 *     unrank    prefix code of random indices
 *     rank      index of random prefix codes
 *
 * The arrays of write and copy take ARRAY_CODES codes, which fits the second-level cache of
 * common processors. A run of walk with several threads gives each of them an equal part.
 */
#include <pthread.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#include <idspan/idspan.h>

#define MOST_RUNS 100000u
#define LONGEST_CODE 32u
#define ARRAY_CODES 4096u
#define RANDOM_CODES 20000u
#define THREADS 2u

typedef struct sample {
    double wall;
    double processor;
} sample;

typedef struct work {
    const ids_basis *basis;
    uint64_t count; /* monomials a run */
    uint32_t threads;
    ids_iter *iter[THREADS];
    int32_t *source; /* ARRAY_CODES codes, or RANDOM_CODES of them */
    int32_t *target;
    size_t *length;
    uint64_t *index;
    uint64_t seed;
    uint64_t sink; /* what was read, so that nothing is optimised away */
} work;

typedef ids_status (*runner)(work *w);

static double seconds_of(clockid_t clock)
{
    struct timespec time = {0};

    clock_gettime(clock, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

/* Marsaglia's xorshift, J. Stat. Software 8 (2003) */
static uint64_t draw(work *w, uint64_t bound)
{
    w->seed ^= w->seed << 13;
    w->seed ^= w->seed >> 7;
    w->seed ^= w->seed << 17;
    return w->seed % bound;
}

static int compare(const void *a, const void *b)
{
    double x = ((const sample *)a)->wall;
    double y = ((const sample *)b)->wall;

    return x < y ? -1 : x > y;
}

/* ---- what is measured ---------------------------------------------------------------------- */

typedef struct lane {
    ids_iter *iter;
    uint64_t sink;
} lane;

static void *walk_lane(void *data)
{
    lane *l = data;
    const ids_mono_view *view = NULL;

    while ((view = ids_iter_next(l->iter)) != NULL) {
        l->sink += (uint64_t)view->code[view->length - 1];
    }
    return NULL;
}

/* Stretches that begin anywhere, one a thread, side by side. */
static ids_status seek(work *w)
{
    uint64_t size = ids_basis_size(w->basis);
    uint64_t begin = size > w->count ? draw(w, size - w->count) : 0;
    ids_status st = IDS_OK;

    for (uint32_t t = 0; st == IDS_OK && t < w->threads; t++) {
        st = ids_iter_seek(w->iter[t], begin + w->count * t / w->threads,
                           begin + w->count * (t + 1) / w->threads);
    }
    return st;
}

static ids_status walk(work *w)
{
    lane lanes[THREADS] = {{0}};
    pthread_t thread[THREADS];
    uint32_t started = 1;

    for (uint32_t t = 0; t < w->threads; t++) {
        lanes[t].iter = w->iter[t];
    }
    while (started < w->threads &&
           pthread_create(&thread[started], NULL, walk_lane, &lanes[started]) == 0) {
        started++;
    }
    (void)walk_lane(&lanes[0]);
    for (uint32_t t = 1; t < started; t++) {
        (void)pthread_join(thread[t], NULL);
    }
    for (uint32_t t = 0; t < w->threads; t++) {
        w->sink += lanes[t].sink;
    }
    return started == w->threads ? IDS_OK : IDS_ERR_NOMEM;
}

static ids_status write_codes(work *w)
{
    const ids_mono_view *view = NULL;
    size_t at = 0;

    while ((view = ids_iter_next(w->iter[0])) != NULL) {
        memcpy(w->target + at, view->code, view->length * sizeof *view->code);
        at = (at + view->length) % ((ARRAY_CODES - 1) * LONGEST_CODE);
    }
    w->sink += (uint64_t)w->target[0];
    return IDS_OK;
}

static ids_status copy_codes(work *w)
{
    size_t entries = ARRAY_CODES * (size_t)w->length[0];

    for (uint64_t done = 0; done < w->count; done += ARRAY_CODES) {
        memcpy(w->target, w->source, entries * sizeof *w->target);
        w->sink += (uint64_t)w->target[done % entries];
    }
    return IDS_OK;
}

static ids_status draw_indices(work *w)
{
    for (uint64_t i = 0; i < w->count; i++) {
        w->index[i] = draw(w, ids_basis_size(w->basis));
    }
    return IDS_OK;
}

static ids_status unrank(work *w)
{
    ids_status st = IDS_OK;

    for (uint64_t i = 0; st == IDS_OK && i < w->count; i++) {
        st = ids_basis_unrank_code(w->basis, w->index[i], w->source + i * LONGEST_CODE,
                                   LONGEST_CODE, &w->length[i]);
    }
    return st;
}

static ids_status draw_codes(work *w)
{
    ids_status st = draw_indices(w);

    return st == IDS_OK ? unrank(w) : st;
}

static ids_status rank(work *w)
{
    ids_status st = IDS_OK;
    uint64_t index = 0;

    for (uint64_t i = 0; st == IDS_OK && i < w->count; i++) {
        st = ids_basis_rank_code(w->basis, w->source + i * LONGEST_CODE, w->length[i], &index);
        w->sink += index == w->index[i];
    }
    return st;
}

/* ---- measuring ----------------------------------------------------------------------------- */

/* Runs `prepare` (which is not timed) and `run` again and again; prints a line. */
static ids_status measure(work *w, const char *name, runner prepare, runner run, double seconds)
{
    static sample samples[MOST_RUNS];
    double end = seconds_of(CLOCK_MONOTONIC) + seconds;
    double least = 1e30;
    size_t runs = 0;
    ids_status st = IDS_OK;

    while (st == IDS_OK && runs < MOST_RUNS && (runs < 5 || seconds_of(CLOCK_MONOTONIC) < end)) {
        st = prepare == NULL ? IDS_OK : prepare(w);
        double wall = seconds_of(CLOCK_MONOTONIC);
        double processor = seconds_of(CLOCK_PROCESS_CPUTIME_ID);

        if (st == IDS_OK) {
            st = run(w);
        }
        samples[runs].processor = seconds_of(CLOCK_PROCESS_CPUTIME_ID) - processor;
        samples[runs].wall = seconds_of(CLOCK_MONOTONIC) - wall;
        least = samples[runs].processor < least ? samples[runs].processor : least;
        runs++;
    }
    if (st == IDS_OK) {
        double each = 1e9 / (double)w->count;

        qsort(samples, runs, sizeof *samples, compare);
        printf("%s\t%llu\t%.2f\t%.2f\t%.2f\t%zu\n", name, (unsigned long long)w->count,
               samples[0].wall * each, samples[runs / 2].wall * each, least * each, runs);
    }
    return st;
}

static ids_status measure_walks(work *w, const char *name, uint64_t count, double seconds)
{
    char text[64];
    ids_status st = IDS_OK;

    w->count = count;
    for (w->threads = 1; st == IDS_OK && w->threads <= THREADS; w->threads++) {
        snprintf(text, sizeof text, "walk_%s_%u_thread", name, (unsigned)w->threads);
        st = measure(w, text, seek, walk, seconds);
    }
    w->threads = 1;
    if (st == IDS_OK) {
        snprintf(text, sizeof text, "write_%s", name);
        st = measure(w, text, seek, write_codes, seconds);
    }
    if (st == IDS_OK) {
        st = ids_basis_unrank_code(w->basis, 0, w->source, LONGEST_CODE, &w->length[0]);
    }
    if (st == IDS_OK) {
        snprintf(text, sizeof text, "copy_%s", name);
        st = measure(w, text, NULL, copy_codes, seconds);
    }
    return st;
}

static ids_status measure_random(work *w, const char *name, double seconds)
{
    char text[64];
    ids_status st = IDS_OK;

    w->count = RANDOM_CODES;
    snprintf(text, sizeof text, "unrank_%s", name);
    st = measure(w, text, draw_indices, unrank, seconds);
    if (st == IDS_OK) {
        snprintf(text, sizeof text, "rank_%s", name);
        st = measure(w, text, draw_codes, rank, seconds);
    }
    return st;
}

/* All lines of one degree of the first `operations` operations. */
static ids_status bench(ids_ctx *ctx, work *w, size_t operations, uint32_t degree, const char *name,
                        bool walks, double seconds)
{
    const ids_operation list[2] = {
        {.notation = IDS_NOTATION_INFIX,
         .open = "*",
         .arity = 2,
         .symmetry = IDS_SYMMETRY_COMMUTATIVE},
        {.notation = IDS_NOTATION_FENCE,
         .open = "(",
         .close = ")",
         .arity = 3,
         .symmetry = IDS_SYMMETRY_COMMUTATIVE},
    };
    ids_signature *signature = NULL;
    ids_types *types = NULL;
    ids_basis *basis = NULL;
    ids_status st = ids_signature_create(ctx, list, operations, &signature);

    if (st == IDS_OK) {
        st = ids_types_create(ctx, signature, degree, &types);
    }
    if (st == IDS_OK) {
        st = ids_basis_create(ctx, types, degree, &basis);
    }
    for (uint32_t t = 0; st == IDS_OK && t < THREADS; t++) {
        st = ids_iter_create(ctx, basis, 0, 0, &w->iter[t]);
    }
    w->basis = basis;
    if (st == IDS_OK) {
        st = walks ? measure_walks(w, name, 1u << 21, seconds) : measure_random(w, name, seconds);
    }
    for (uint32_t t = 0; t < THREADS; t++) {
        ids_iter_free(w->iter[t]);
        w->iter[t] = NULL;
    }
    ids_basis_free(basis);
    ids_types_free(types);
    ids_signature_free(signature);
    return st;
}

int main(int argc, char **argv)
{
    double seconds = argc > 1 ? strtod(argv[1], NULL) : 2;
    work w = {.threads = 1, .seed = UINT64_C(88172645463325252)};
    ids_ctx *ctx = NULL;
    ids_status st = ids_ctx_create(NULL, &ctx);

    w.source = calloc(RANDOM_CODES * LONGEST_CODE, sizeof *w.source);
    w.target = calloc(ARRAY_CODES * LONGEST_CODE, sizeof *w.target);
    w.length = calloc(RANDOM_CODES, sizeof *w.length);
    w.index = calloc(RANDOM_CODES, sizeof *w.index);
    if (w.source == NULL || w.target == NULL || w.length == NULL || w.index == NULL) {
        st = IDS_ERR_NOMEM;
    }
    if (st == IDS_OK) {
        st = bench(ctx, &w, 1, 10, "binary_10", true, seconds);
    }
    if (st == IDS_OK) {
        st = bench(ctx, &w, 2, 9, "binary_ternary_9", true, seconds);
    }
    if (st == IDS_OK) {
        st = bench(ctx, &w, 1, 12, "binary_12", false, seconds);
    }
    if (st == IDS_OK) {
        st = bench(ctx, &w, 2, 12, "binary_ternary_12", false, seconds);
    }
    if (st != IDS_OK) {
        fprintf(stderr, "bench_enumerate: %s\n", ids_status_name(st));
    }
    free(w.source);
    free(w.target);
    free(w.length);
    free(w.index);
    ids_ctx_free(ctx);
    return st == IDS_OK ? EXIT_SUCCESS : EXIT_FAILURE;
}
