/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The kernels in plain C, for processors without their own, and for what vectors leave over.
 */
#include <string.h>

#include "kernels.h"

#define ROWS 4u
#define COLUMNS 8u

/* Entry k of row i of A is a[i * row_step + k * k_step]. */
static void multiply(uint32_t p, size_t steps, const int32_t *a, size_t row_step, size_t k_step,
                     const int32_t *b, uint32_t *c, size_t ldc, size_t m, size_t n)
{
    int64_t sum[ROWS][COLUMNS] = {{0}};
    int64_t back = (int64_t)(4 * (uint64_t)p * p);

    for (size_t s = 0; s < steps; s += IDSI_KERNEL_STEPS) {
        for (size_t k = 0; k < IDSI_KERNEL_STEPS; k++) {
            for (size_t i = 0; i < ROWS; i++) {
                for (size_t j = 0; j < COLUMNS; j++) {
                    sum[i][j] += (int64_t)a[i * row_step + (s + k) * k_step] * b[j];
                }
            }
            b += COLUMNS;
        }
        for (size_t i = 0; i < ROWS; i++) {
            for (size_t j = 0; j < COLUMNS; j++) {
                sum[i][j] += sum[i][j] < 0 ? back : -back;
            }
        }
    }
    for (size_t i = 0; i < m; i++) {
        for (size_t j = 0; j < n; j++) {
            int64_t rest = ((int64_t)c[i * ldc + j] - sum[i][j] % (int64_t)p) % (int64_t)p;
            c[i * ldc + j] = (uint32_t)(rest < 0 ? rest + p : rest);
        }
    }
}

static void strip(uint32_t p, size_t steps, const int32_t *a, const int32_t *b, uint32_t *c,
                  size_t ldc, size_t m, size_t n)
{
    multiply(p, steps, a, IDSI_KERNEL_DEPTH, 1, b, c, ldc, m, n);
}

static void left_strip(uint32_t p, size_t steps, const int32_t *a, const int32_t *b, uint32_t *c,
                       size_t ldc, size_t m, size_t n)
{
    multiply(p, steps, a, 1, IDSI_LEFT_ROWS, b, c, ldc, m, n);
}

static void centre(uint32_t p, const uint32_t *values, size_t count, int32_t *out)
{
    for (size_t j = 0; j < count; j++) {
        out[j] = idsi_kernel_centred(values[j], p);
    }
}

static void pack(uint32_t p, size_t k, size_t n, const uint32_t *b, size_t ldb, size_t width,
                 int32_t *out)
{
    size_t steps = idsi_kernel_whole_steps(k);

    for (size_t j = 0; j < n; j += width) {
        size_t real = n - j < width ? n - j : width;
        for (size_t s = 0; s < k; s++) {
            centre(p, b + s * ldb + j, real, out);
            for (size_t i = real; i < width; i++) {
                out[i] = 0;
            }
            out += width;
        }
        memset(out, 0, (steps - k) * width * sizeof *out);
        out += (steps - k) * width;
    }
}

static void combine(uint32_t p, uint32_t *target, uint32_t scale, const uint32_t *source,
                    uint32_t factor, size_t count)
{
    for (size_t j = 0; j < count; j++) {
        target[j] = (uint32_t)(((uint64_t)scale * target[j] + (uint64_t)factor * source[j]) % p);
    }
}

static bool gather(uint32_t p, const idsi_entry *entries, size_t count, const uint32_t *factors,
                   const uint64_t *sums, uint32_t *residues)
{
    uint64_t back = 4 * (uint64_t)p * p;
    uint64_t sum[IDSI_LANES];
    uint32_t any = 0;

    for (size_t lane = 0; lane < IDSI_LANES; lane++) {
        sum[lane] = sums[idsi_kernel_slot(lane)];
    }
    for (size_t i = 0; i < count; i++) {
        const uint32_t *factor = factors + (size_t)entries[i].column * IDSI_LANES;
        for (size_t lane = 0; lane < IDSI_LANES; lane++) {
            uint64_t s = sum[lane] + (uint64_t)factor[lane] * entries[i].value;
            sum[lane] = s >= back ? s - back : s;
        }
    }
    for (size_t lane = 0; lane < IDSI_LANES; lane++) {
        residues[lane] = (uint32_t)(sum[lane] % p);
        any |= residues[lane];
    }
    return any != 0;
}

static uint32_t dot(uint32_t p, const uint32_t *a, size_t stride, const int32_t *b, size_t count)
{
    int64_t sum = 0;

    for (size_t j = 0; j < count; j += COLUMNS) {
        const uint32_t *strip = a + j / COLUMNS * stride;
        size_t end = count - j < COLUMNS ? count - j : COLUMNS;
        for (size_t i = 0; i < end; i++) {
            sum += (int64_t)(int32_t)strip[i] * b[j + i];
        }
        sum %= (int64_t)p;
    }
    return (uint32_t)(sum < 0 ? sum + (int64_t)p : sum);
}

const idsi_kernel idsi_kernel_portable = {"portable", ROWS, COLUMNS, strip,  left_strip, NULL,
                                          centre,     pack, combine, gather, dot};
