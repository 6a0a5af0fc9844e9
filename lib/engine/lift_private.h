/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Tables of a tower over the rational numbers; only the proof (exact.c) and lift.c use them.
 */
#ifndef IDSI_LIFT_PRIVATE_H
#define IDSI_LIFT_PRIVATE_H

#include "engine_private.h"

/* Most primes that a table is lifted from: their product fits 120 bits. */
#define IDSI_LIFT_PRIMES 4u

/* The lifted table of one degree, in the shape of idsi_level.start and .entries. */
typedef struct idsi_lifted {
    size_t *start;
    uint32_t *normal; /* entry's normal form */
    int64_t *num;
    int64_t *den;
    double rho_bits;
    double den_bits; /* log2 of the common denominator */
} idsi_lifted;

/* The same level of the towers that are lifted from. */
typedef struct idsi_lift_sources {
    size_t count;
    const idsi_level *level[IDSI_LIFT_PRIMES];
    uint32_t prime[IDSI_LIFT_PRIMES];
} idsi_lift_sources;

void idsi_lifted_clear(ids_ctx *ctx, idsi_lifted *table);
/*
 * Lifts a table, by Chinese remaindering and rational reconstruction, and gives the common
 * denominator of its entries; *ok is false when some entry has no fraction with numerator and
 * denominator of at most 62 bits.
 */
ids_status idsi_lift_table(ids_ctx *ctx, const idsi_lift_sources *src, idsi_lifted *table,
                           mpz_ptr denominator, bool *ok);
/* (exact.c) The proved table of a degree; start is NULL where no column or normal form is. */
const idsi_lifted *idsi_proof_table(const idsi_proof *proof, uint32_t degree);

#endif
