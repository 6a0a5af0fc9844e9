/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Products whose left factor is prepared once. In the partition engine the left factors are bases
 * of solutions and stored values; they meet many narrow right factors, for which to pack them
 * again and again would cost as much as the products.
 *
 *     values   group 0 (rows 0 .. 11):  step 0: 12 entries, step 1: 12 entries, ...
 *              group 1 (rows 12 .. 23): ...
 *
 * Rows and steps are padded with zeros.
 */
#include <string.h>

#include "dense_private.h"
#include "kernels.h"

#define GROUP IDSI_LEFT_ROWS
#define KC IDSI_KERNEL_DEPTH
#define NC IDSI_KERNEL_WIDTH
#define NARROW 16u

static size_t group_count(size_t m)
{
    return (m + GROUP - 1) / GROUP;
}

static const int32_t *group_of(const idsi_left *left, size_t group)
{
    return left->values + group * GROUP * idsi_kernel_whole_steps(left->k);
}

ids_status idsi_left_init(ids_ctx *ctx, uint32_t p, size_t m, size_t k, const uint32_t *a,
                          size_t lda, idsi_left *left)
{
    ids_status st = IDS_OK;
    int32_t *values = NULL;
    size_t steps = idsi_kernel_whole_steps(k);

    IDSI_TRY(idsi_alloc_array(ctx, group_count(m) * GROUP * steps, sizeof *values, &values));
    for (size_t i = 0; i < m; i++) {
        int32_t *to = values + i / GROUP * GROUP * steps + i % GROUP;
        for (size_t j = 0; j < k; j++) {
            to[j * GROUP] = idsi_kernel_centred(a[i * lda + j], p);
        }
    }
    *left = (idsi_left){.m = m, .k = k, .values = values};
done:
    return st;
}

void idsi_left_clear(ids_ctx *ctx, idsi_left *left)
{
    idsi_free(ctx, left->values);
    memset(left, 0, sizeof *left);
}

uint64_t idsi_left_bytes(uint64_t m, uint64_t k)
{
    return (m + GROUP) * (k + IDSI_KERNEL_STEPS) * sizeof(int32_t);
}

void idsi_left_row(const idsi_left *left, uint32_t p, size_t i, uint32_t *row)
{
    const int32_t *from = group_of(left, i / GROUP) + i % GROUP;

    for (size_t j = 0; j < left->k; j++) {
        int32_t value = from[j * GROUP];
        row[j] = value < 0 ? (uint32_t)(value + (int32_t)p) : (uint32_t)value;
    }
}

/* One packed block of B against all groups. */
static void multiply_block(const idsi_kernel *kernel, bool narrow, uint32_t p,
                           const idsi_left *left, size_t from, size_t steps, const int32_t *packed,
                           size_t n, uint32_t *c, size_t ldc)
{
    size_t columns = narrow ? NARROW : kernel->columns;
    size_t rows = narrow ? GROUP : kernel->rows;

    for (size_t j = 0; j < n; j += columns) {
        size_t wide = n - j < columns ? n - j : columns;
        for (size_t i = 0; i < left->m; i += rows) {
            const int32_t *a = group_of(left, i / GROUP) + from * GROUP + i % GROUP;
            size_t high = left->m - i < rows ? left->m - i : rows;
            (narrow ? kernel->narrow_strip : kernel->left_strip)(p, steps, a, packed + j * steps,
                                                                 c + i * ldc + j, ldc, high, wide);
        }
    }
}

void idsi_left_mul_sub(idsi_workspace *work, uint32_t p, const idsi_left *left, size_t n,
                       const uint32_t *b, size_t ldb, uint32_t *c, size_t ldc)
{
    const idsi_kernel *kernel = idsi_kernel_choose();
    bool narrow = n <= NARROW && kernel->narrow_strip != NULL;
    int32_t *packed = idsi_kernel_align(work->packed_b);

    for (size_t jc = 0; jc < n; jc += NC) {
        size_t nc = n - jc < NC ? n - jc : NC;
        for (size_t pc = 0; pc < left->k; pc += KC) {
            size_t kc = left->k - pc < KC ? left->k - pc : KC;
            kernel->pack(p, kc, nc, b + pc * ldb + jc, ldb, narrow ? NARROW : kernel->columns,
                         packed);
            multiply_block(kernel, narrow, p, left, pc, idsi_kernel_whole_steps(kc), packed, nc,
                           c + jc, ldc);
        }
    }
}
