/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The direct search for algebras of small dimension: its state, and the lists that it begins with.
 */
#ifndef IDSI_COUNTEREXAMPLE_DIRECT_H
#define IDSI_COUNTEREXAMPLE_DIRECT_H

#include "counterexample_private.h"

#define IDSI_DIRECT_DIMENSION 4u   /* largest dimension */
#define IDSI_DIRECT_PLACES 4096u   /* most products, symmetric ones counted apart */
#define IDSI_DIRECT_TUPLES 100000u /* most tuples of basis elements for a law */
#define IDSI_DIRECT_PRODUCTS 64u

typedef struct idsi_direct_check {
    uint32_t law;
    uint8_t tuple[IDSI_MAX_IDENTITY_DEGREE];
} idsi_direct_check;

/* Where a product of basis elements is found: sign * value of product `number`. */
typedef struct idsi_direct_place {
    uint32_t number;
    int sign;
} idsi_direct_place;

typedef struct idsi_direct_pending {
    size_t count;
    size_t capacity;
    uint32_t *list; /* checks */
} idsi_direct_pending;

typedef struct idsi_direct_product {
    uint32_t op;
    uint8_t argument[IDS_MAX_ARITY];
    uint32_t choice; /* index of its value */
} idsi_direct_product;

typedef struct idsi_direct {
    ids_ctx *ctx;
    idsi_hunt *hunt;
    idsi_random random;
    uint32_t prime;
    uint32_t n; /* dimension */
    uint32_t value_count;
    int8_t (*vectors)[IDSI_DIRECT_DIMENSION]; /* the possible values */
    idsi_direct_place
        *places[IDS_MAX_OPERATIONS]; /* by arguments as digits of a number in base n */
    uint32_t product_count;
    idsi_direct_product products[IDSI_DIRECT_PRODUCTS];
    uint32_t *order; /* of values: order[product * value_count + i] */
    size_t check_count;
    size_t check_capacity;
    idsi_direct_check *checks;
    idsi_direct_pending waiting[IDSI_DIRECT_PRODUCTS + 1]; /* on each product; the last: on none */
    uint32_t assigned;
    uint32_t missing; /* product that the last evaluation missed */
    uint32_t *value;  /* of the nodes of a law */
    uint64_t quota;   /* steps of this restart */
    bool found;
} idsi_direct;

/* (counterexample_lists.c) All vectors with entries of absolute value at most `most`, simple ones
 * first. */
ids_status idsi_direct_vectors(idsi_direct *s, int most);
/* Numbers the products of basis elements; *fits is false when there are too many. */
ids_status idsi_direct_products(idsi_direct *s, bool *fits);
/* All laws on all tuples, up to the symmetry of the law; *fits as above. */
ids_status idsi_direct_checks(idsi_direct *s, bool *fits);
/* Values in order, disturbed at random from the second start on: simple ones stay rather first. */
void idsi_direct_order(idsi_direct *s, uint32_t start);

#endif
