/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Times of repeated runs, and the lines that the bench programs print: name, least and median
 * time in seconds, number of runs, compiler, commit, with tabs between.
 */
#ifndef IDSPAN_BENCH_TIMING_H
#define IDSPAN_BENCH_TIMING_H

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "bench_commit.h"

#define TIMING_MOST 1000u

#if defined(__clang__)
#define TIMING_COMPILER "clang " __clang_version__
#elif defined(__GNUC__)
#define TIMING_COMPILER "gcc " __VERSION__
#else
#define TIMING_COMPILER "unknown"
#endif

typedef struct timing {
    double times[TIMING_MOST];
    size_t runs;
} timing;

static inline double timing_now(clockid_t clock)
{
    struct timespec time = {0};

    clock_gettime(clock, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

static inline int timing_compare(const void *a, const void *b)
{
    double x = *(const double *)a;
    double y = *(const double *)b;

    return x < y ? -1 : x > y;
}

static inline void timing_add(timing *t, double time)
{
    if (t->runs < TIMING_MOST) {
        t->times[t->runs] = time;
        t->runs++;
    }
}

/* Whether 1.96 standard errors are within 1 % of the mean. */
static inline int timing_is_narrow(const timing *t)
{
    double mean = 0;
    double square = 0;

    for (size_t i = 0; i < t->runs; i++) {
        mean += t->times[i] / (double)t->runs;
    }
    for (size_t i = 0; i < t->runs; i++) {
        square += (t->times[i] - mean) * (t->times[i] - mean);
    }
    return t->runs >= 5 &&
           1.96 * sqrt(square / ((double)(t->runs - 1) * (double)t->runs)) <= 0.01 * mean;
}

/* Whether to run again: at least once, then until times are narrow or `end` has come. */
static inline int timing_goes_on(const timing *t, double end)
{
    return t->runs == 0 ||
           (t->runs < TIMING_MOST && timing_now(CLOCK_MONOTONIC) < end && !timing_is_narrow(t));
}

static inline double timing_print(const char *name, timing *t)
{
    qsort(t->times, t->runs, sizeof *t->times, timing_compare);
    printf("%s\t%.6f\t%.6f\t%zu\t%s\t%s\n", name, t->times[0], t->times[t->runs / 2], t->runs,
           TIMING_COMPILER, BENCH_COMMIT);
    return t->times[0];
}

#endif
