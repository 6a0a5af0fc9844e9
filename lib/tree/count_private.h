/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the counting files share: the equation that a counting series satisfies, and the series
 * as one big number. Apart from tree_private.h because it shows GMP's limbs, which no other
 * file of this room needs.
 */
#ifndef IDSI_COUNT_PRIVATE_H
#define IDSI_COUNT_PRIVATE_H

#include <gmp.h>

#include "tree_private.h"

/* Weights and divisors are single limbs, and a slot is a whole number of 64-bit limbs. */
_Static_assert(GMP_NUMB_BITS == 64, "counting needs 64-bit GMP limbs without nails");

/* weight * y^shift * product over j of p_j^cycles[j], where p_j = t(y^j); cycles[0] = 0 */
typedef struct idsi_count_term {
    uint8_t cycles[IDS_MAX_ARITY + 1];
    uint64_t weight;
    uint64_t shift;
} idsi_count_term;

/*
 * t(y) = 1 + (sum of the terms) / divisor, t with non-negative integer coefficients. Terms are in
 * the order of their cycles, without repetition, and have shift >= 1. Trees have degrees
 * 1, 1 + gap, 1 + 2 gap, ..: those of degree 1 + gap * m stand at the exponents
 * place * m .. place * (m + 1) - 1, where marks of operations (shifts modulo place) tell them
 * apart.
 */
typedef struct idsi_count_equation {
    idsi_count_term *terms;
    size_t count;
    size_t capacity;
    uint64_t divisor;
    uint32_t gap;
    uint64_t place;
    double log2_head; /* degree d has at most 2^(log2_head + d * log2_rate) trees */
    double log2_rate;
} idsi_count_equation;

/* Coefficients of y^0 .. y^last, each in `width` limbs, least significant first. */
typedef struct idsi_count_series {
    uint64_t last;
    size_t width;
    mp_limb_t *limbs;
} idsi_count_series;

/* ---- count_cycles.c ------------------------------------------------------------------------ */

/*
 * The equation of the association types. mark[i] < place is the exponent that marks a use of
 * operation i, or IDSI_COUNT_LEAVE_OUT; NULL for no marks, with place = 1.
 */
#define IDSI_COUNT_LEAVE_OUT UINT64_MAX
ids_status idsi_count_types_equation(ids_ctx *ctx, const ids_signature *sig, const uint64_t *mark,
                                     uint64_t place, idsi_count_equation *eq);
/* The equation of scale^m * (monomials of degree n) / n!, n = 1 + gap * m, which are integers. */
ids_status idsi_count_monomials_equation(ids_ctx *ctx, const ids_signature *sig,
                                         idsi_count_equation *eq, uint64_t *scale);
void idsi_count_equation_clear(ids_ctx *ctx, idsi_count_equation *eq);
/* The largest exponent that belongs to a degree <= `degree`; degree >= 1. */
uint64_t idsi_count_last(const idsi_count_equation *eq, uint32_t degree);

/* ---- count_bound.c ------------------------------------------------------------------------- */

/* Fills log2_head and log2_rate, which the solver needs. */
void idsi_count_bound(idsi_count_equation *eq);
/* Limbs that hold every coefficient that the solver meets up to a degree. */
size_t idsi_count_width(const idsi_count_equation *eq, double degree);

/* ---- count_series.c ------------------------------------------------------------------------ */

/* Bytes that idsi_count_solve() takes, GMP's scratch memory included; UINT64_MAX: too many. */
uint64_t idsi_count_bytes(const idsi_count_equation *eq, uint64_t last);
/* Solves up to y^last, last < 2^40; the series is cleared with idsi_count_series_clear(). Progress
 * is told as a share of the whole call that goes from `from` to `to`. */
ids_status idsi_count_solve(ids_ctx *ctx, const idsi_count_equation *eq, uint64_t last, double from,
                            double to, idsi_count_series *series);
void idsi_count_series_clear(ids_ctx *ctx, idsi_count_series *series);
/* Coefficient of y^index, index <= last. */
void idsi_count_series_get(const idsi_count_series *series, uint64_t index, mpz_t out);

#endif
