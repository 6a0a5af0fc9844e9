/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Random matrices mod p for the tests of lib/field, and what FLINT makes of them.
 *
 * The echelon forms of lib/field choose the largest column of a row as its pivot, FLINT's the
 * smallest; so FLINT is given the columns in reverse. A reduced echelon form with given order of
 * the columns is unique, which makes the two comparable entry by entry.
 */
#ifndef IDSPAN_TEST_FIELD_MATRIX_H
#define IDSPAN_TEST_FIELD_MATRIX_H

#include <flint/flint.h>
#include <flint/nmod_mat.h>

#include "field/field_private.h"
#include "field/kernels.h"
#include "support.h"

typedef struct field_matrix {
    uint32_t p;
    size_t rows;
    size_t columns;
    uint32_t *entries; /* row-major */
} field_matrix;

/* Kinds of random matrices. */
typedef enum field_kind {
    FIELD_DENSE,   /* every entry random */
    FIELD_SPARSE,  /* a few entries a row */
    FIELD_LOW,     /* product of two matrices with a third of the rank */
    FIELD_GAPS,    /* low rank, with zero rows and repeated rows between */
    FIELD_EXTREME, /* entries 0, 1, p-1, (p-1)/2, (p+1)/2 */
    FIELD_ZERO,
    FIELD_KINDS
} field_kind;

/* 2, 3, 101, the largest below 2^20, the least above it, and the ends of (2^29, 2^30). */
extern const uint32_t field_primes[];
extern const size_t field_prime_count;

void field_matrix_init(field_matrix *matrix, uint32_t p, size_t rows, size_t columns);
void field_matrix_random(field_matrix *matrix, field_kind kind, idsi_random *random);
void field_matrix_shuffle(field_matrix *matrix, idsi_random *random);
void field_matrix_clear(field_matrix *matrix);
uint32_t *field_matrix_row(const field_matrix *matrix, size_t row);

/* Reduced echelon form with the largest columns as pivots. */
typedef struct field_reduced {
    size_t rank;
    size_t columns;
    uint32_t *pivot;   /* of each row, descending */
    uint32_t *entries; /* rank x columns */
    bool *is_pivot;    /* of each column */
} field_reduced;

void field_reduce(const field_matrix *matrix, field_reduced *reduced);
void field_reduced_clear(field_reduced *reduced);
/* Number of the row with a pivot; it must be one. */
size_t field_reduced_find(const field_reduced *reduced, uint32_t pivot);
/* What is left of a row when all pivots are rewritten: columns that are no pivots. */
void field_reduced_rest(const field_reduced *reduced, uint32_t p, const uint32_t *row,
                        uint32_t *rest);

/* Kernel number 0 .. FIELD_KERNELS-1; NULL when this processor can't run it. */
#define FIELD_KERNELS 3u
const idsi_kernel *field_kernel(size_t number);

/* C - A B by FLINT. */
void field_matrix_expect(const field_matrix *a, const field_matrix *b, field_matrix *c);
void field_matrix_compare(const char *name, const field_matrix *got, const field_matrix *wanted);

#endif
