/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files of this room share about algebras, and nobody else needs.
 */
#ifndef IDSI_ALGEBRA_PRIVATE_H
#define IDSI_ALGEBRA_PRIVATE_H

#include <stdio.h>

#include "../identity/notation_private.h"
#include "model_private.h"

/* A constant as it was given, its arguments canonical. */
typedef struct idsi_given {
    uint32_t op;
    idsi_constant constant; /* numerator may be 0 */
} idsi_given;

/* Order of idsi_constant by arguments, then result, for qsort() and bsearch(). */
int idsi_constant_compare(const void *a, const void *b);

/* (algebra_symmetry.c) The canonical arguments of a product of basis elements, 0 behind the arity:
 * product = sign * canonical product; sign 0 where the symmetry makes it 0. */
int idsi_arguments_canonical(const ids_signature *sig, uint32_t op, const uint8_t *argument,
                             uint8_t canonical[IDS_MAX_ARITY]);
/* Adds a constant with canonical arguments and all that the symmetry makes of it to the table of
 * its operation. */
ids_status idsi_orbit_add(ids_algebra *algebra, uint32_t op, const idsi_constant *constant,
                          size_t *capacity);

/* (algebra_print.c) Appends a product of basis elements as it is written. */
ids_status idsi_product_print(const ids_algebra *algebra, uint32_t op, const uint8_t *argument,
                              idsi_text *text);

/* ---- reading ------------------------------------------------------------------------------- */

/* A line `product = sum`: its constants are list[begin .. end) of the draft. */
typedef struct idsi_given_product {
    uint32_t op;
    int sign;
    size_t lexeme;
    size_t begin;
    size_t end;
    uint8_t argument[IDS_MAX_ARITY]; /* canonical */
} idsi_given_product;

/* What has been read of an algebra file. */
typedef struct idsi_draft {
    idsi_reader reader;
    ids_signature *sig;
    size_t basis; /* lexeme of the word `basis`; SIZE_MAX: not yet */
    uint32_t dimension;
    size_t element[IDS_MAX_DIMENSION]; /* lexeme of the name of each basis element */
    char *name[IDS_MAX_DIMENSION];
    size_t count;
    size_t capacity;
    ids_constant *list;
    size_t product_count;
    size_t product_capacity;
    idsi_given_product *products;
    size_t ready; /* sums that are initialised */
    mpq_t sum[IDS_MAX_DIMENSION];
} idsi_draft;

/* (algebra_product.c) Fails at the cursor: expected what, found the lexeme there. */
ids_status idsi_draft_expected(idsi_draft *d, const char *what);
/* Reads a line that gives a product. */
ids_status idsi_draft_product(idsi_draft *d);

#endif
