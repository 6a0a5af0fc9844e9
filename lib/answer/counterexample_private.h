/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files share that look for an algebra in which the identities hold and the candidate
 * does not. The checker of such algebras (check_algebra.c) does not include it.
 */
#ifndef IDSI_COUNTEREXAMPLE_PRIVATE_H
#define IDSI_COUNTEREXAMPLE_PRIVATE_H

#include "../model/model_private.h"
#include "follows_private.h"

struct ids_counterexample {
    ids_ctx *ctx;
    const ids_presentation *pres;
    const idsi_identity *claim;
    ids_algebra *algebra;
    int64_t *values; /* coordinate i of variable v (from 0): values[v * dimension + i] */
};

/* The file, without its last line. (counterexample_write.c) */
ids_status idsi_counterexample_text(const ids_counterexample *made, idsi_text *out);

/* A search. The best algebra so far is `algebra`, NULL for none. */
typedef struct idsi_hunt {
    ids_ctx *ctx;
    const ids_presentation *pres;
    const idsi_identity *claim;
    idsi_laws *laws;
    uint32_t most_dimension; /* of what is still looked for; falls with every success */
    uint64_t most_entry;     /* largest numerator or denominator */
    uint64_t steps;          /* what is left of them */
    uint64_t seed;
    ids_algebra *algebra;
    int64_t *values; /* as above */
} idsi_hunt;

/* Takes steps; false when they are used up. */
static inline bool idsi_hunt_step(idsi_hunt *hunt, uint64_t steps)
{
    hunt->steps -= steps < hunt->steps ? steps : hunt->steps;
    return hunt->steps > 0;
}

/*
 * Takes over an algebra of dimension at most most_dimension if it is a counterexample, which is
 * tested exactly, with these values of the variables (both are owned by the hunt then, or freed).
 */
ids_status idsi_hunt_offer(idsi_hunt *hunt, ids_algebra *algebra, int64_t *values);
/* Whether a polynomial is 0 mod the prime when its labels have these coordinates. */
ids_status idsi_hunt_is_zero(const idsi_hunt *hunt, const idsi_residues *residues,
                             const idsi_poly *poly, const int64_t *values, bool *zero);

/* (counterexample_graded.c) Nilpotent algebras from functionals that vanish on all consequences. */
ids_status idsi_hunt_graded(idsi_hunt *hunt);
/*
 * (counterexample_quotient.c) The algebra that a functional on the monomials of a component, mod
 * a prime, makes of the free algebra; NULL when its dimension or an entry is too large.
 * generator[i] is the basis element of variable i. Takes steps of the hunt.
 */
ids_status idsi_hunt_quotient(idsi_hunt *hunt, const idsi_component *component, uint32_t prime,
                              const uint32_t *value, ids_algebra **algebra, uint32_t *generator);
/* (counterexample_direct.c) Algebras of small dimension, constant by constant. */
ids_status idsi_hunt_direct(idsi_hunt *hunt);

#endif
