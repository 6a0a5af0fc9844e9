/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the kernels for different processors have in common.
 *
 * Products of matrices. Operands are packed as centred residues (|entry| <= (p-1)/2 < 2^29) of 32
 * bits:
 *
 *     A   `rows` rows, each of IDSI_KERNEL_DEPTH entries, one after the other
 *     B   step by step of k, `columns` entries each
 *
 * and a left factor that is prepared once for many products (idsi_left) in groups of IDSI_LEFT_ROWS
 * rows, step by step of k, an entry of each row.
 *
 * So a product is below 2^58, and a sum is brought back by 4 p^2 after every 16 of them: with
 * |sum| <= 4 p^2 before, |sum| < 4 p^2 + 16 ((p-1)/2)^2 < 8 p^2 < 2^63 after 16 steps, and adding
 * or subtracting 4 p^2, whichever is towards zero, leaves |sum| <= 4 p^2.
 *
 * Sums of products of a residue and a centred one are brought back after every 8 of them.
 *
 * Vector units multiply the even 32-bit places of two registers. The odd places are shifted down,
 * so even and odd columns have sums of their own until they are stored side by side. The sums of
 * IDSI_LANES rows keep this order in memory: idsi_kernel_slot().
 *
 * Remainders of x < 2^2b, where b is the number of bits of p, follow Barrett (Menezes, van
 * Oorschot, Vanstone, Handbook of Applied Cryptography, 14.42): with mu = floor(2^2b / p), the
 * quotient ((x >> (b-1)) mu) >> (b+1) is too small by 2 at most. All factors fit 32 bits.
 */
#ifndef IDSI_KERNELS_H
#define IDSI_KERNELS_H

#include "field_private.h"

#define IDSI_KERNEL_STEPS 16u
#define IDSI_KERNEL_DEPTH 256u
/* Columns of B that are packed at a time. */
#define IDSI_KERNEL_WIDTH 512u
/* Rows of a prepared left factor that stand together; a multiple of every kernel's rows. */
#define IDSI_LEFT_ROWS 12u
/* Rows that are rewritten side by side. */
#define IDSI_LANES 16u

typedef struct idsi_kernel {
    const char *name;
    size_t rows;    /* of a strip of A */
    size_t columns; /* of a strip of B */
    /*
     * C[0..rows) x [0..columns) -= A B mod p for one strip of each; steps <= IDSI_KERNEL_DEPTH, a
     * multiple of 16; only the first m rows and n columns of C exist.
     */
    void (*strip)(uint32_t p, size_t steps, const int32_t *a, const int32_t *b, uint32_t *c,
                  size_t ldc, size_t m, size_t n);
    /* The same for rows of a prepared left factor. */
    void (*left_strip)(uint32_t p, size_t steps, const int32_t *a, const int32_t *b, uint32_t *c,
                       size_t ldc, size_t m, size_t n);
    /* The same for a whole group and at most 16 columns; NULL when it would be no faster. */
    void (*narrow_strip)(uint32_t p, size_t steps, const int32_t *a, const int32_t *b, uint32_t *c,
                         size_t ldc, size_t m, size_t n);
    /* Centres residues. */
    void (*centre)(uint32_t p, const uint32_t *values, size_t count, int32_t *out);
    /*
     * Packs k x n of B into strips of `width` columns, a multiple of 8, with zeros up to whole
     * strips and steps; k <= IDSI_KERNEL_DEPTH.
     */
    void (*pack)(uint32_t p, size_t k, size_t n, const uint32_t *b, size_t ldb, size_t width,
                 int32_t *out);
    /* target = scale * target + factor * source mod p, entry by entry; all residues. */
    void (*combine)(uint32_t p, uint32_t *target, uint32_t scale, const uint32_t *source,
                    uint32_t factor, size_t count);
    /*
     * residues[lane] = sums[slot of lane] + sum of entry.value * factors[entry.column][lane] mod
     * p; sums < 4 p^2. False when all residues are 0.
     */
    bool (*gather)(uint32_t p, const idsi_entry *entries, size_t count, const uint32_t *factors,
                   const uint64_t *sums, uint32_t *residues);
    /*
     * sum of a_j b_j mod p, j < count. The a_j are residues, or centred (as int32_t), in strips of
     * `columns` that begin `stride` entries apart; the b_j are centred.
     */
    uint32_t (*dot)(uint32_t p, const uint32_t *a, size_t stride, const int32_t *b, size_t count);
} idsi_kernel;

/* The kernel for this processor. */
const idsi_kernel *idsi_kernel_choose(void);

extern const idsi_kernel idsi_kernel_portable;
#if defined(__x86_64__)
extern const idsi_kernel idsi_kernel_avx2;
extern const idsi_kernel idsi_kernel_avx512;
#endif

static inline size_t idsi_kernel_whole_steps(size_t k)
{
    return (k + IDSI_KERNEL_STEPS - 1) / IDSI_KERNEL_STEPS * IDSI_KERNEL_STEPS;
}

/* The first line of the cache that begins at a pointer or after; 64 bytes of room are needed. */
static inline void *idsi_kernel_align(void *pointer)
{
    uintptr_t past = (uintptr_t)pointer & 63u;
    return (char *)pointer + (past == 0 ? 0 : 64u - past);
}

/* Place of a lane among the sums of a column: the even lanes first. */
static inline size_t idsi_kernel_slot(size_t lane)
{
    return (lane & 1u) * (IDSI_LANES / 2) + lane / 2;
}

static inline int32_t idsi_kernel_centred(uint32_t value, uint32_t p)
{
    return (int32_t)(value > p / 2 ? value - p : value);
}

/* Number of bits of p. */
static inline uint32_t idsi_kernel_bits(uint32_t p)
{
    return 32u - (uint32_t)__builtin_clz(p);
}

/* floor(2^2b / p) */
static inline uint64_t idsi_kernel_reciprocal(uint32_t p)
{
    return (UINT64_C(1) << (2 * idsi_kernel_bits(p))) / p;
}

#endif
