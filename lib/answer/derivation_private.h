/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The search for a derivation, as its two files share it.
 */
#ifndef IDSI_DERIVATION_PRIVATE_H
#define IDSI_DERIVATION_PRIVATE_H

#include "follows_private.h"

/* Entries that all trials together may read, roughly. */
#define IDSI_TRIAL_WORK 40000000u

typedef struct idsi_solver {
    ids_ctx *ctx;
    const idsi_component *c;
    idsi_system *system;
    idsi_random random;
    uint32_t prime;
    size_t monomials;
    size_t most;        /* entries of a consequence */
    uint32_t *distance; /* of each consequence from the candidate; 0: not connected */
    uint32_t farthest;
    idsi_entry *cells;
    idsi_echelon *echelon; /* of the pool, where not all can be in it */
    size_t spare;          /* most consequences that can all be in it */
    size_t pool_count;     /* consequences that take part */
    uint32_t *pool;
    size_t *row_start; /* by monomial: pool consequences */
    uint32_t *row_item;
    const idsi_cell **row_cell;
    uint32_t *order;  /* pool numbers from the first column to the last */
    uint32_t *place;  /* column of each pool number, 0: left out */
    uint32_t columns; /* in use, column 0 included */
    idsi_entry *row;
    size_t best_count;
    uint32_t *best; /* pool numbers of the best solution */
    uint32_t *best_value;
    size_t trial_count;
    uint32_t *trial;
    uint32_t *trial_value;
    bool *in_best;
} idsi_solver;

/* ---- which consequences take part (derivation_pool.c) ---------------------------------------- */

ids_status idsi_pool_prepare(idsi_solver *s);
/* Adds the consequences at a distance, the short ones first; where there are many in all, those
 * that are independent of the ones before. */
ids_status idsi_pool_extend(idsi_solver *s, uint32_t distance);
/* The pool's entries by monomial, and room for solutions; forgets the best one. */
ids_status idsi_pool_index(idsi_solver *s);
void idsi_pool_clear(idsi_solver *s);
/*
 * Makes the pool anew from the consequences of the best solution, and all others that have only
 * its monomials, or simply `all`; as long as they are not too many. The best solution stays.
 */
ids_status idsi_pool_renew(idsi_solver *s, bool all);

#endif
