/* SPDX-License-Identifier: BSD-2-Clause */
/* What the rank tables tell the rooms below. */
#ifndef IDSI_RANK_PRIVATE_H
#define IDSI_RANK_PRIVATE_H

#include <idspan/answer.h>

#include "../engine/engine_private.h"

/* (rank_table.c) IDS_ERR_ARG when an option asks for more primes than IDS_MAX_PRIMES. */
ids_status idsi_check_primes(ids_ctx *ctx, uint32_t primes);
/* (rank_table.c) The same, and that `field` is 0 or a prime that goes with the others. */
ids_status idsi_check_field(ids_ctx *ctx, uint32_t field, bool exact, uint32_t primes);

/*
 * Whether over the field of `field` elements (0: the rational numbers) some identity of at most
 * that degree can differ from its linearisation.
 */
bool idsi_rank_weakened(const ids_presentation *pres, uint32_t field, uint32_t degree);

/*
 * What a row by partition claims, from its degree, partition, free and quotient, when `primes`
 * primes gave that quotient and at most `blocks` blocks of random covectors were used mod one of
 * them: consequences, certainty, bits, and the error probability.
 */
void idsi_partition_certify(const idsi_laws *laws, uint64_t blocks, uint32_t primes,
                            ids_partition_row *row, double *error);

#endif
