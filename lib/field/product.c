/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dense products mod p: blocking and packing around the kernels.
 *
 *     for blocks of NC columns of B, KC steps of k:   pack B into strips, centred, 64 bits
 *         for blocks of MC rows of A:                 pack A into strips
 *             for each strip of B, strip of A:        kernel
 *
 * The order of loops and the sizes follow Goto and van de Geijn, "Anatomy of high-performance
 * matrix multiplication" (ACM TOMS 34, 2008): a packed strip of B stays in the first cache, the
 * packed block of A in the second. The kernel is chosen by what the processor can do, at each
 * call, from constant tables.
 */
#include <string.h>

#include "dense_private.h"
#include "kernels.h"

#define KC 256u
#define MC 96u
#define NC 1024u
#define PACK_ALIGN 64u

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

ids_status idsi_workspace_init(idsi_workspace *work, ids_ctx *ctx)
{
    ids_status st = IDS_OK;

    memset(work, 0, sizeof *work);
    work->ctx = ctx;
    IDSI_TRY(idsi_alloc_array(ctx, KC * (MC + 8u) + PACK_ALIGN, sizeof *work->packed_a,
                              &work->packed_a));
    IDSI_TRY(idsi_alloc_array(ctx, KC * (NC + 32u) + PACK_ALIGN, sizeof *work->packed_b,
                              &work->packed_b));
done:
    if (st != IDS_OK) {
        idsi_workspace_clear(work);
    }
    return st;
}

void idsi_workspace_clear(idsi_workspace *work)
{
    idsi_free(work->ctx, work->packed_a);
    idsi_free(work->ctx, work->packed_b);
    work->packed_a = NULL;
    work->packed_b = NULL;
}

static int64_t *aligned(int64_t *pointer)
{
    uintptr_t address = ((uintptr_t)pointer + PACK_ALIGN - 1) & ~(uintptr_t)(PACK_ALIGN - 1);
    return pointer + (address - (uintptr_t)pointer) / sizeof *pointer;
}

/* Packs k x n of B into strips; pads with zeros to whole strips and steps. */
static void pack_b(const idsi_kernel *kernel, uint32_t p, size_t k, size_t steps, size_t n,
                   const uint32_t *b, size_t ldb, int64_t *out)
{
    size_t width = kernel->columns;

    for (size_t j = 0; j < n; j += width) {
        size_t real = n - j < width ? n - j : width;
        for (size_t s = 0; s < steps; s++) {
            size_t from = s < k ? real : 0;
            if (from > 0) {
                kernel->centre(p, b + s * ldb + j, from, out);
            }
            if (from < width) {
                memset(out + from, 0, (width - from) * sizeof *out);
            }
            out += width;
        }
    }
}

/* Packs m x k of A into strips of `height` rows, padded likewise. */
static void pack_a(uint32_t p, size_t m, size_t k, size_t steps, size_t height, const uint32_t *a,
                   size_t lda, int64_t *out)
{
    for (size_t i = 0; i < m; i += height) {
        for (size_t s = 0; s < steps; s++) {
            for (size_t y = 0; y < height; y++) {
                bool real = i + y < m && s < k;
                out[y] = real ? idsi_kernel_centred(a[(i + y) * lda + s], p) : 0;
            }
            out += height;
        }
    }
}

static size_t least(size_t a, size_t b)
{
    return a < b ? a : b;
}

void idsi_dense_mul_sub(idsi_workspace *work, uint32_t p, size_t m, size_t n, size_t k,
                        const uint32_t *a, size_t lda, const uint32_t *b, size_t ldb, uint32_t *c,
                        size_t ldc)
{
    const idsi_kernel *kernel = idsi_kernel_choose();
    int64_t *packed_a = aligned(work->packed_a);
    int64_t *packed_b = aligned(work->packed_b);

    for (size_t jc = 0; jc < n; jc += NC) {
        size_t nc = least(n - jc, NC);
        for (size_t pc = 0; pc < k; pc += KC) {
            size_t kc = least(k - pc, KC);
            size_t steps = (kc + IDSI_KERNEL_STEPS - 1) / IDSI_KERNEL_STEPS * IDSI_KERNEL_STEPS;
            pack_b(kernel, p, kc, steps, nc, b + pc * ldb + jc, ldb, packed_b);
            for (size_t ic = 0; ic < m; ic += MC) {
                size_t mc = least(m - ic, MC);
                pack_a(p, mc, kc, steps, kernel->rows, a + ic * lda + pc, lda, packed_a);
                for (size_t j = 0; j < nc; j += kernel->columns) {
                    for (size_t i = 0; i < mc; i += kernel->rows) {
                        kernel->strip(p, steps, packed_a + i * steps, packed_b + j * steps,
                                      c + (ic + i) * ldc + jc + j, ldc,
                                      least(mc - i, kernel->rows),
                                      least(nc - j, kernel->columns));
                    }
                }
            }
        }
    }
}
