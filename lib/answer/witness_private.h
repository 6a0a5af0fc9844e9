/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * How functionals that vanish on all consequences are found (witness_seek.c): shared by the search
 * for witnesses and that for counterexample algebras.
 */
#ifndef IDSI_WITNESS_PRIVATE_H
#define IDSI_WITNESS_PRIVATE_H

#include "follows_private.h"

typedef struct idsi_seeker {
    ids_ctx *ctx;
    const idsi_component *c;
    idsi_system *system;
    idsi_random random;
    size_t monomials;
    size_t most;     /* cells of a consequence */
    uint32_t *place; /* column of each monomial: the order at hand */
    idsi_entry *row;
    uint32_t *rest; /* of the candidate, by column: functionals with 0 here do not serve */
    uint32_t *uses; /* values of the functional of each column */
} idsi_seeker;

/* All consequences, modulo a prime that is drawn. Cleared after, also on failure. */
ids_status idsi_seeker_init(idsi_seeker *s, const idsi_component *component, uint64_t seed);
void idsi_seeker_clear(idsi_seeker *s);
/* Another order of the monomials: any; or one with those first, so that they are rather not
 * pivots, where value[] is not 0. */
void idsi_seeker_shuffle(idsi_seeker *s);
void idsi_seeker_focus(idsi_seeker *s, const uint32_t *value);
/* Echelon form of the consequences in the order at hand, for the prime of the system. */
ids_status idsi_seeker_eliminate(idsi_seeker *s, idsi_echelon **echelon);
/* Fills rest[] and uses[]. */
void idsi_seeker_survey(idsi_seeker *s, const idsi_echelon *echelon);
/* The functional of a column that is no pivot, by monomial. */
void idsi_seeker_values(const idsi_seeker *s, const idsi_echelon *echelon, uint32_t column,
                        uint32_t *value);

#endif
