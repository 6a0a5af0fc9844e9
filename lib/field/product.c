/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dense products mod p: blocking and packing around the kernels.
 *
 *     for blocks of NC columns of B, KC steps of k:   pack B into strips, centred
 *         for blocks of MC rows of A:                 pack A into strips, centred
 *             for each strip of B, strip of A:        kernel
 *
 * The order of loops and the sizes follow Goto and van de Geijn, "Anatomy of high-performance
 * matrix multiplication" (ACM TOMS 34, 2008): a packed strip of B stays in the first cache, the
 * packed blocks in the second. The kernel is chosen by what the processor can do, at each call,
 * from constant tables. A team shares out the columns of large products; each entry of C is
 * computed in the same way whoever does it.
 */
#include <string.h>

#include "dense_private.h"
#include "kernels.h"

#define KC IDSI_KERNEL_DEPTH
#define MC 96u
#define NC IDSI_KERNEL_WIDTH
/* Multiplications below which a team is not worth waking. */
#define LEAST_SHARED 2000000u
/* Tasks for each member of a team, so that one who is held up is not waited for. */
#define SHARES 4u

const idsi_kernel *idsi_kernel_choose(void)
{
#if defined(__x86_64__)
    if (__builtin_cpu_supports("avx512f") && __builtin_cpu_supports("avx512dq")) {
        return &idsi_kernel_avx512;
    }
    if (__builtin_cpu_supports("avx2")) {
        return &idsi_kernel_avx2;
    }
#endif
    return &idsi_kernel_portable;
}

const char *idsi_dense_kernel_name(void)
{
    return idsi_kernel_choose()->name;
}

void idsi_dense_combine(uint32_t p, uint32_t *target, uint32_t scale, const uint32_t *source,
                        uint32_t factor, size_t count)
{
    idsi_kernel_choose()->combine(p, target, scale, source, factor, count);
}

/* ---- workspaces ------------------------------------------------------------------------------ */

ids_status idsi_workspace_init(idsi_workspace *work, ids_ctx *ctx)
{
    ids_status st = IDS_OK;
    void *room = NULL; /* not cleared: small products touch little of it */

    memset(work, 0, sizeof *work);
    work->ctx = ctx;
    IDSI_TRY(idsi_alloc(ctx, (KC * MC + 16u) * sizeof *work->packed_a, &room));
    work->packed_a = room;
    IDSI_TRY(idsi_alloc(ctx, (KC * NC + 16u) * sizeof *work->packed_b, &room));
    work->packed_b = room;
done:
    if (st != IDS_OK) {
        idsi_workspace_clear(work);
    }
    return st;
}

ids_status idsi_workspace_share(idsi_workspace *work, idsi_team *team)
{
    ids_status st = IDS_OK;
    uint32_t others = idsi_team_size(team) - 1;

    IDSI_TRY(idsi_alloc_array(work->ctx, others, sizeof *work->others, &work->others));
    while (work->other_count < others) {
        IDSI_TRY(idsi_workspace_init(&work->others[work->other_count], work->ctx));
        work->other_count++;
    }
    work->team = team;
done:
    return st;
}

void idsi_workspace_clear(idsi_workspace *work)
{
    for (uint32_t i = 0; i < work->other_count; i++) {
        idsi_workspace_clear(&work->others[i]);
    }
    idsi_free(work->ctx, work->others);
    idsi_free(work->ctx, work->packed_a);
    idsi_free(work->ctx, work->packed_b);
    memset(work, 0, sizeof *work);
}

/* ---- one thread's product -------------------------------------------------------------------- */

typedef struct product {
    idsi_workspace *work;
    const idsi_kernel *kernel;
    uint32_t p;
    size_t m;
    size_t n;
    size_t k;
    const uint32_t *a;
    size_t lda;
    const uint32_t *b;
    size_t ldb;
    const int32_t *packed; /* B, when it is packed; NULL otherwise */
    uint32_t *c;
    size_t ldc;
    size_t share; /* columns, or with by_rows rows, of one task */
    bool by_rows;
} product;

/* Packs m x k of A row by row, padded likewise. */
static void pack_a(const product *pr, size_t m, size_t k, size_t steps, const uint32_t *a,
                   int32_t *out)
{
    size_t padded = (m + pr->kernel->rows - 1) / pr->kernel->rows * pr->kernel->rows;

    for (size_t i = 0; i < padded; i++) {
        size_t from = i < m ? k : 0;
        if (from > 0) {
            pr->kernel->centre(pr->p, a + i * pr->lda, from, out);
        }
        memset(out + from, 0, (steps - from) * sizeof *out);
        out += KC;
    }
}

static size_t least(size_t a, size_t b)
{
    return a < b ? a : b;
}

static void multiply(const product *pr)
{
    const idsi_kernel *kernel = pr->kernel;
    int32_t *packed_a = idsi_kernel_align(pr->work->packed_a);
    int32_t *room = idsi_kernel_align(pr->work->packed_b);

    for (size_t jc = 0; jc < pr->n; jc += NC) {
        size_t nc = least(pr->n - jc, NC);
        for (size_t pc = 0; pc < pr->k; pc += KC) {
            size_t kc = least(pr->k - pc, KC);
            size_t steps = idsi_kernel_whole_steps(kc);
            const int32_t *packed_b = room;
            if (pr->packed != NULL) {
                packed_b = pr->packed + jc * steps;
            } else {
                kernel->pack(pr->p, kc, nc, pr->b + pc * pr->ldb + jc, pr->ldb, kernel->columns,
                             room);
            }
            for (size_t ic = 0; ic < pr->m; ic += MC) {
                size_t mc = least(pr->m - ic, MC);
                pack_a(pr, mc, kc, steps, pr->a + ic * pr->lda + pc, packed_a);
                for (size_t j = 0; j < nc; j += kernel->columns) {
                    for (size_t i = 0; i < mc; i += kernel->rows) {
                        kernel->strip(pr->p, steps, packed_a + i * KC, packed_b + j * steps,
                                      pr->c + (ic + i) * pr->ldc + jc + j, pr->ldc,
                                      least(mc - i, kernel->rows), least(nc - j, kernel->columns));
                    }
                }
            }
        }
    }
}

/* ---- shared products ------------------------------------------------------------------------- */

static void multiply_share(void *user, uint32_t member, size_t task)
{
    product pr = *(const product *)user;
    size_t from = task * pr.share;

    if (member > 0) {
        pr.work = &pr.work->others[member - 1];
    }
    if (pr.by_rows) {
        pr.m = least(pr.m - from, pr.share);
        pr.a += from * pr.lda;
        pr.c += from * pr.ldc;
    } else {
        pr.n = least(pr.n - from, pr.share);
        if (pr.packed != NULL) {
            pr.packed += from * pr.k;
        } else {
            pr.b += from;
        }
        pr.c += from;
    }
    multiply(&pr);
}

/* All but B. */
static product describe(idsi_workspace *work, uint32_t p, size_t m, size_t n, size_t k,
                        const uint32_t *a, size_t lda, uint32_t *c, size_t ldc)
{
    return (product){.work = work,
                     .kernel = idsi_kernel_choose(),
                     .p = p,
                     .m = m,
                     .n = n,
                     .k = k,
                     .a = a,
                     .lda = lda,
                     .c = c,
                     .ldc = ldc};
}

static void run(product *pr)
{
    uint32_t members = idsi_team_size(pr->work->team);

    if (members == 1 || (double)pr->m * (double)pr->n * (double)pr->k < LEAST_SHARED) {
        multiply(pr);
        return;
    }
    pr->by_rows = pr->m > 2 * pr->n;
    size_t length = pr->by_rows ? pr->m : pr->n;
    size_t unit = pr->by_rows ? MC : 64u;
    size_t units = (length + unit - 1) / unit;
    size_t tasks = least(units, members * SHARES);
    pr->share = (units + tasks - 1) / tasks * unit;
    idsi_team_run(pr->work->team, (length + pr->share - 1) / pr->share, multiply_share, pr);
}

void idsi_dense_mul_sub(idsi_workspace *work, uint32_t p, size_t m, size_t n, size_t k,
                        const uint32_t *a, size_t lda, const uint32_t *b, size_t ldb, uint32_t *c,
                        size_t ldc)
{
    product pr = describe(work, p, m, n, k, a, lda, c, ldc);

    pr.b = b;
    pr.ldb = ldb;
    run(&pr);
}

void idsi_dense_mul_sub_packed(idsi_workspace *work, uint32_t p, size_t m, size_t n, size_t k,
                               const uint32_t *a, size_t lda, const int32_t *packed, uint32_t *c,
                               size_t ldc)
{
    product pr = describe(work, p, m, n, k, a, lda, c, ldc);

    pr.packed = packed;
    run(&pr);
}
