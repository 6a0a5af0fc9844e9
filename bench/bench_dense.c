/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * bench_dense [SECONDS [PRODUCT [RANK ...]]]
 *
 * The modular product of two random PRODUCT x PRODUCT matrices (2000) and the rank of random
 * RANK x RANK matrices (2000, 4000, 8000) over a 30-bit prime on one core, against FLINT's
 * nmod_mat_mul and nmod_mat_rank, and on two threads. PRODUCT 0 leaves the product out. Ours and
 * FLINT's take turns until the times of each are narrow or SECONDS (10) are over, at least once.
 * Lines as in timing.h, `cpu` for the time of the processor, `wall` for that of the clock; then
 * ratios of least times: against FLINT of processor times, two threads against one of clock times.
 */
#include <stdint.h>
#include <string.h>

#include <flint/nmod_mat.h>

#include "field/dense_private.h"
#include "timing.h"

#define PRIME 1073741789u
#define BLOCK 256u

/* One size, all ways. */
typedef struct sample {
    size_t n;
    uint32_t *a;
    uint32_t *b;
    uint32_t *c;
    nmod_mat_t flint_a;
    nmod_mat_t flint_b;
    nmod_mat_t flint_c;
    timing ours;
    timing flint;
    timing one;
    timing two;
    size_t rank[2];
} sample;

static void fail(ids_ctx *ctx, const char *what)
{
    fprintf(stderr, "bench_dense: %s: %s\n", what, ids_ctx_message(ctx));
    exit(EXIT_FAILURE);
}

static void *take(size_t count, size_t size)
{
    void *block = calloc(count, size);

    if (block == NULL) {
        fprintf(stderr, "bench_dense: no memory\n");
        exit(EXIT_FAILURE);
    }
    return block;
}

static void begin_sample(sample *s, size_t n)
{
    idsi_random random;

    memset(s, 0, sizeof *s);
    idsi_random_seed(&random, n);
    s->n = n;
    s->a = take(n * n, sizeof *s->a);
    s->b = take(n * n, sizeof *s->b);
    s->c = take(n * n, sizeof *s->c);
    nmod_mat_init(s->flint_a, (slong)n, (slong)n, PRIME);
    nmod_mat_init(s->flint_b, (slong)n, (slong)n, PRIME);
    nmod_mat_init(s->flint_c, (slong)n, (slong)n, PRIME);
    for (size_t i = 0; i < n * n; i++) {
        s->a[i] = (uint32_t)idsi_random_below(&random, PRIME);
        s->b[i] = (uint32_t)idsi_random_below(&random, PRIME);
        nmod_mat_entry(s->flint_a, i / n, i % n) = s->a[i];
        nmod_mat_entry(s->flint_b, i / n, i % n) = s->b[i];
    }
}

static void end_sample(sample *s)
{
    free(s->a);
    free(s->b);
    free(s->c);
    nmod_mat_clear(s->flint_a);
    nmod_mat_clear(s->flint_b);
    nmod_mat_clear(s->flint_c);
}

/* ---- what is measured ------------------------------------------------------------------------ */

static void our_product(ids_ctx *ctx, sample *s, idsi_team *team)
{
    idsi_workspace work;

    memset(s->c, 0, s->n * s->n * sizeof *s->c);
    if (idsi_workspace_init(&work, ctx) != IDS_OK || idsi_workspace_share(&work, team) != IDS_OK) {
        fail(ctx, "product");
    }
    idsi_dense_mul_sub(&work, PRIME, s->n, s->n, s->n, s->a, s->n, s->b, s->n, s->c, s->n);
    idsi_workspace_clear(&work);
}

static void flint_product(ids_ctx *ctx, sample *s, idsi_team *team)
{
    (void)ctx;
    (void)team;
    nmod_mat_mul(s->flint_c, s->flint_a, s->flint_b);
}

static void our_rank(ids_ctx *ctx, sample *s, idsi_team *team)
{
    idsi_dense_echelon *echelon = NULL;
    ids_status st = idsi_dense_echelon_create(ctx, PRIME, s->n, &echelon);

    memcpy(s->c, s->a, s->n * s->n * sizeof *s->c); /* rows are used up */
    if (st == IDS_OK) {
        st = idsi_dense_echelon_share(echelon, team);
    }
    for (size_t i = 0; st == IDS_OK && i < s->n; i += BLOCK) {
        size_t count = s->n - i < BLOCK ? s->n - i : BLOCK;
        st = idsi_dense_echelon_add(echelon, s->c + i * s->n, count, NULL);
    }
    if (st != IDS_OK) {
        fail(ctx, "rank");
    }
    s->rank[0] = idsi_dense_echelon_rank(echelon);
    idsi_dense_echelon_free(echelon);
}

static void flint_rank(ids_ctx *ctx, sample *s, idsi_team *team)
{
    (void)ctx;
    (void)team;
    s->rank[1] = (size_t)nmod_mat_rank(s->flint_a);
}

/* ---- measuring ------------------------------------------------------------------------------- */

typedef void (*work_fn)(ids_ctx *ctx, sample *s, idsi_team *team);

static void run(ids_ctx *ctx, sample *s, work_fn work, idsi_team *team, timing *cpu, timing *wall)
{
    double cpu_begin = timing_now(CLOCK_PROCESS_CPUTIME_ID);
    double wall_begin = timing_now(CLOCK_MONOTONIC);

    work(ctx, s, team);
    if (cpu != NULL) {
        timing_add(cpu, timing_now(CLOCK_PROCESS_CPUTIME_ID) - cpu_begin);
    }
    if (wall != NULL) {
        timing_add(wall, timing_now(CLOCK_MONOTONIC) - wall_begin);
    }
}

static void report(const char *what, sample *s)
{
    char name[64];
    const char *ways[] = {"ours_cpu", "flint_cpu", "one_thread_wall", "two_threads_wall"};
    timing *times[] = {&s->ours, &s->flint, &s->one, &s->two};
    double least[4];

    for (size_t i = 0; i < 4; i++) {
        (void)snprintf(name, sizeof name, "dense_%s_%zu_%s", what, s->n, ways[i]);
        least[i] = timing_print(name, times[i]);
    }
    printf("dense_%s_%zu_flint_to_ours\t%.2f\n", what, s->n, least[1] / least[0]);
    printf("dense_%s_%zu_one_to_two_threads\t%.2f\n", what, s->n, least[2] / least[3]);
}

static void measure(ids_ctx *ctx, const char *what, size_t n, double seconds, work_fn ours,
                    work_fn flint)
{
    static sample s;
    idsi_team *team = NULL;
    double end = timing_now(CLOCK_MONOTONIC) + seconds;

    if (idsi_team_create(ctx, 2, &team) != IDS_OK) {
        fail(ctx, "threads");
    }
    begin_sample(&s, n);
    while (timing_goes_on(&s.ours, end) || timing_goes_on(&s.flint, end)) {
        run(ctx, &s, ours, NULL, &s.ours, &s.one);
        run(ctx, &s, ours, team, NULL, &s.two);
        run(ctx, &s, flint, NULL, &s.flint, NULL);
    }
    report(what, &s);
    if (s.rank[0] != s.rank[1]) {
        fprintf(stderr, "bench_dense: ranks %zu and %zu differ\n", s.rank[0], s.rank[1]);
        exit(EXIT_FAILURE);
    }
    end_sample(&s);
    idsi_team_free(team);
}

int main(int argc, char **argv)
{
    static const char *defaults[] = {"2000", "4000", "8000"};
    const char *const *ranks = argc > 3 ? (const char *const *)(argv + 3) : defaults;
    size_t rank_count = argc > 3 ? (size_t)argc - 3 : 3;
    double seconds = argc > 1 ? strtod(argv[1], NULL) : 10;
    size_t product = argc > 2 ? strtoul(argv[2], NULL, 10) : 2000;
    ids_ctx *ctx = NULL;

    if (ids_ctx_create(NULL, &ctx) != IDS_OK) {
        return EXIT_FAILURE;
    }
    printf("kernel\t%s\n", idsi_dense_kernel_name());
    if (product > 0) {
        measure(ctx, "product", product, seconds, our_product, flint_product);
    }
    for (size_t i = 0; i < rank_count; i++) {
        measure(ctx, "rank", strtoul(ranks[i], NULL, 10), seconds, our_rank, flint_rank);
    }
    ids_ctx_free(ctx);
    flint_cleanup();
    return EXIT_SUCCESS;
}
