/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the kernels for different processors have in common.
 *
 * A kernel multiplies packed operands: A in strips of `rows` rows, B in strips of `columns`
 * columns, both step by step of k, entries centred (|entry| <= (p-1)/2 < 2^29) in 64 bits. So a
 * product is below 2^58, and a sum is brought back by 4 p^2 after every 16 of them: with
 * |sum| <= 4 p^2 before, |sum| < 4 p^2 + 16 ((p-1)/2)^2 < 8 p^2 < 2^63 after 16 steps, and adding
 * or subtracting 4 p^2, whichever is towards zero, leaves |sum| <= 4 p^2.
 */
#ifndef IDSI_KERNELS_H
#define IDSI_KERNELS_H

#include "field_private.h"

#define IDSI_KERNEL_STEPS 16u
/* Rows that are rewritten side by side. */
#define IDSI_LANES 16u

typedef struct idsi_kernel {
    const char *name;
    size_t rows;    /* of a strip of A */
    size_t columns; /* of a strip of B */
    /*
     * C[0..rows) x [0..columns) -= A B mod p for one strip of each; steps a multiple of 16; only
     * the first m rows and n columns of C exist.
     */
    void (*strip)(uint32_t p, size_t steps, const int64_t *a, const int64_t *b, uint32_t *c,
                  size_t ldc, size_t m, size_t n);
    /*
     * Centres count residues into 64 bits: one row of a strip of B.
     */
    void (*centre)(uint32_t p, const uint32_t *values, size_t count, int64_t *out);
    /*
     * Adds factor[lane] * entry.value to sums[entry.column][lane] for every entry and lane; sums
     * < 4 p^2 before and after.
     */
    void (*lanes)(uint32_t p, const idsi_entry *entries, size_t count, const uint32_t *factor,
                  uint64_t *sums);
} idsi_kernel;

/* The kernel for this processor. */
const idsi_kernel *idsi_kernel_choose(void);

extern const idsi_kernel idsi_kernel_portable;
#if defined(__x86_64__)
extern const idsi_kernel idsi_kernel_avx2;
extern const idsi_kernel idsi_kernel_avx512;
#endif

static inline int64_t idsi_kernel_centred(uint32_t value, uint32_t p)
{
    return value > p / 2 ? (int64_t)value - (int64_t)p : (int64_t)value;
}

/* c - sum mod p for |sum| < 2^63, by the remainder of 64-bit integers. */
static inline uint32_t idsi_kernel_settle(uint32_t c, int64_t sum, uint32_t p)
{
    int64_t rest = ((int64_t)c - sum % (int64_t)p) % (int64_t)p;
    return (uint32_t)(rest < 0 ? rest + p : rest);
}

#endif
