/* SPDX-License-Identifier: BSD-2-Clause */
/* Random signatures of mixed notations and symmetries, and random homogeneous polynomials. */
#ifndef IDSPAN_TEST_RANDOM_IDENTITY_H
#define IDSPAN_TEST_RANDOM_IDENTITY_H

#include "identity/identity_private.h"
#include "support.h"

/* 1 to 4 operations. */
ids_signature *random_signature(ids_ctx *ctx, idsi_random *random);

/* A tree of the signature with at most `most` leaves, all of them labelled 1; its length. */
size_t random_tree(idsi_random *random, const ids_signature *sig, uint32_t most,
                   idsi_token tree[IDSI_MAX_TOKENS]);

/*
 * A polynomial of degree <= most with up to five terms as they were drawn: not canonical, not
 * collected, every variable equally often in each. `poly` must be initialised.
 */
void random_poly(idsi_random *random, uint32_t most, idsi_poly *poly);

#endif
