/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Algebras given by structure constants, as the other rooms see them.
 */
#ifndef IDSI_MODEL_PRIVATE_H
#define IDSI_MODEL_PRIVATE_H

#include <idspan/algebra.h>

#include "../engine/engine_private.h"

/* Most structure constants of an algebra, filled in by symmetry. */
#define IDSI_MAX_CONSTANTS 4000000u

/* A structure constant that is not 0, in lowest terms; denominator > 0. */
typedef struct idsi_constant {
    int64_t numerator;
    int64_t denominator;
    uint8_t argument[IDS_MAX_ARITY]; /* 0 behind the arity */
    uint8_t result;
} idsi_constant;

/* The constants of one operation, by arguments (from left to right), then result. */
typedef struct idsi_table {
    size_t count;
    idsi_constant *list;
    size_t *first; /* dimension + 1: those with first argument i are first[i] .. first[i+1] */
} idsi_table;

struct ids_algebra {
    ids_ctx *ctx;
    ids_signature *sig; /* owned */
    uint32_t dimension;
    char **names;
    idsi_table *tables; /* sig->count of them */
};

/* ---- values mod a prime (algebra_residue.c) -------------------------------------------------- */

/* An algebra mod a prime; the algebra must outlive it. Immutable: any number of threads. */
typedef struct idsi_residues {
    ids_ctx *ctx;
    const ids_algebra *algebra;
    uint32_t prime;
    uint32_t **value; /* for each operation of the algebra, in step with its table */
} idsi_residues;

/* *good is false, and there is no result, when the prime (below 2^30) divides a denominator. */
ids_status idsi_residues_create(ids_ctx *ctx, const ids_algebra *algebra, uint32_t prime,
                                bool *good, idsi_residues **residues);
void idsi_residues_free(idsi_residues *residues);
/*
 * The value of operation `op` of the algebra on vectors of `dimension` residues; `result` is none
 * of the arguments. Returns whether it is other than 0. Cost: one multiplication for each constant
 * with a first argument that counts, and one more for each argument.
 */
bool idsi_residues_product(const idsi_residues *residues, uint32_t op,
                           const uint32_t *const *arguments, uint32_t *result);

/*
 * A basis tuple on which a linearised identity, compiled, is not 0 in an algebra; *holds: there is
 * none, exactly. operation[i] is operation i of the law in the algebra. (algebra_holds.c)
 */
ids_status idsi_algebra_test(ids_ctx *ctx, const ids_algebra *algebra, const uint32_t *operation,
                             const idsi_law *law, bool *holds, uint8_t *tuple);

#endif
