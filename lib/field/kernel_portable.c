/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The kernels in plain C, for processors without their own, and for what vectors leave over.
 */
#include "kernels.h"

#define ROWS 4u
#define COLUMNS 8u

static void strip(uint32_t p, size_t steps, const int32_t *a, const int32_t *b, uint32_t *c,
                  size_t ldc, size_t m, size_t n)
{
    int64_t sum[ROWS][COLUMNS] = {{0}};
    int64_t back = (int64_t)(4 * (uint64_t)p * p);

    for (size_t s = 0; s < steps; s += IDSI_KERNEL_STEPS) {
        for (size_t k = 0; k < IDSI_KERNEL_STEPS; k++) {
            for (size_t i = 0; i < ROWS; i++) {
                for (size_t j = 0; j < COLUMNS; j++) {
                    sum[i][j] += (int64_t)a[i * IDSI_KERNEL_DEPTH + s + k] * b[j];
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

static void centre(uint32_t p, const uint32_t *values, size_t count, int32_t *out)
{
    for (size_t j = 0; j < count; j++) {
        out[j] = idsi_kernel_centred(values[j], p);
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

const idsi_kernel idsi_kernel_portable = {"portable", ROWS,    COLUMNS, strip,
                                          centre,     combine, gather};
