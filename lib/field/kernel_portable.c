/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The product kernel in plain C, for processors without one of their own.
 */
#include "kernels.h"

#define ROWS 4u
#define COLUMNS 8u

static void strip(uint32_t p, size_t steps, const int64_t *a, const int64_t *b, uint32_t *c,
                  size_t ldc, size_t m, size_t n)
{
    int64_t sum[ROWS][COLUMNS] = {{0}};
    int64_t back = (int64_t)(4 * (uint64_t)p * p);

    for (size_t s = 0; s < steps; s += IDSI_KERNEL_STEPS) {
        for (size_t k = 0; k < IDSI_KERNEL_STEPS; k++) {
            for (size_t i = 0; i < ROWS; i++) {
                for (size_t j = 0; j < COLUMNS; j++) {
                    sum[i][j] += a[i] * b[j];
                }
            }
            a += ROWS;
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
            c[i * ldc + j] = idsi_kernel_settle(c[i * ldc + j], sum[i][j], p);
        }
    }
}

static void centre(uint32_t p, const uint32_t *values, size_t count, int64_t *out)
{
    for (size_t j = 0; j < count; j++) {
        out[j] = idsi_kernel_centred(values[j], p);
    }
}

static void lanes(uint32_t p, const idsi_entry *entries, size_t count, const uint32_t *factor,
                  uint64_t *sums)
{
    uint64_t back = 4 * (uint64_t)p * p;

    for (size_t i = 0; i < count; i++) {
        uint64_t *sum = sums + (size_t)entries[i].column * IDSI_LANES;
        for (size_t lane = 0; lane < IDSI_LANES; lane++) {
            uint64_t s = sum[lane] + (uint64_t)factor[lane] * entries[i].value;
            sum[lane] = s >= back ? s - back : s;
        }
    }
}

const idsi_kernel idsi_kernel_portable = {"portable", ROWS, COLUMNS, strip, centre, lanes};
