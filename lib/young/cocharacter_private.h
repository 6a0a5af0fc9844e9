/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files that compute the cocharacter of a free algebra share. Apart from
 * young_private.h because it shows GMP's limbs.
 */
#ifndef IDSI_COCHARACTER_PRIVATE_H
#define IDSI_COCHARACTER_PRIVATE_H

#include <gmp.h>

#include "../tree/tree_private.h"
#include "young_private.h"

_Static_assert(GMP_NUMB_BITS == 64, "wide numbers need 64-bit GMP limbs without nails");

/* ---- wide numbers ----------------------------------------------------------------------------
 * `width` limbs, least significant first, two's complement; sums and products are taken modulo
 * 2^(64 width). The width is chosen so that no value reaches 2^(64 width - 1).
 */
#define IDSI_MAX_WIDTH 16u

static inline bool idsi_wide_is_zero(const mp_limb_t *a, size_t width)
{
    mp_limb_t any = 0;

    for (size_t i = 0; i < width; i++) {
        any |= a[i];
    }
    return any == 0;
}

static inline bool idsi_wide_is_negative(const mp_limb_t *a, size_t width)
{
    return a[width - 1] >> 63 != 0;
}

/* Multiplies by a / b, where the result must be whole: false when it is not. b > 0. */
bool idsi_wide_scale(mp_limb_t *value, size_t width, mp_limb_t a, mp_limb_t b);

/* ---- signed cycle indices (cycle_index.c) -------------------------------------------------- */

#define IDSI_NO_PRODUCT UINT32_MAX

/*
 * A product p_a[M] p_b[M] ..., a <= b <= ..: that of `parent` and p_cycle[M]. Product 0 is
 * p_1[M] = M itself. Where parent is IDSI_NO_PRODUCT there is one factor only.
 */
typedef struct idsi_cycle_product {
    uint32_t parent;
    uint32_t cycle;
    int64_t weight;    /* of the product in the sum */
    mp_limb_t *values; /* of all degrees; see idsi_plethysm */
} idsi_cycle_product;

/* M = h1 + (sum of weight * product) / divisor. */
typedef struct idsi_cycle_sum {
    idsi_cycle_product *products;
    size_t count;
    size_t capacity;
    uint32_t single[IDS_MAX_ARITY + 1]; /* number of the product p_j[M] */
    uint64_t divisor;
} idsi_cycle_sum;

ids_status idsi_cycle_sum_create(ids_ctx *ctx, const ids_signature *sig, idsi_cycle_sum *sum);
/* Frees the values too. */
void idsi_cycle_sum_clear(ids_ctx *ctx, idsi_cycle_sum *sum);

/* ---- class functions (plethysm.c) ---------------------------------------------------------- */

/* A partition as its different parts, largest first, and how often each stands in it. 1 + .. + 9
 * is more than the largest degree, so there are at most 8. */
typedef struct idsi_runs {
    uint8_t count;
    uint8_t part[8];
    uint8_t times[8];
} idsi_runs;

/* The value of a product at the permutations of cycle type i of degree d stands at
 * values + (first[d] + i) * width. */
typedef struct idsi_plethysm {
    ids_ctx *ctx;
    uint32_t max_degree;
    size_t width;
    size_t first[IDS_MAX_PARTITION_DEGREE + 2];
    idsi_runs *runs; /* of all cycle types, in the same order */
    idsi_partition_counts counts;
    idsi_cycle_sum sum;
} idsi_plethysm;

ids_status idsi_plethysm_create(ids_ctx *ctx, const ids_signature *sig, uint32_t max_degree,
                                idsi_plethysm *plethysm);
void idsi_plethysm_clear(idsi_plethysm *plethysm); /* all zeros is fine */
/* Computes degree n; the smaller ones must be there. */
ids_status idsi_plethysm_extend(idsi_plethysm *plethysm, uint32_t n, const ids_progress *progress);

static inline const mp_limb_t *idsi_plethysm_values(const idsi_plethysm *plethysm, uint32_t degree)
{
    return plethysm->sum.products[0].values + plethysm->first[degree] * plethysm->width;
}

#endif
