/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files on automorphism groups share: groups acting on a few places, the stabiliser of
 * the arguments at a root, and the finished group. Apart from tree_private.h because it shows
 * GMP's limbs.
 */
#ifndef IDSI_AUTOMORPHISM_PRIVATE_H
#define IDSI_AUTOMORPHISM_PRIVATE_H

#include <gmp.h>

#include "tree_private.h"

/* ---- exact orders ------------------------------------------------------------------------- */

_Static_assert(GMP_NUMB_BITS == 64, "orders need 64-bit GMP limbs without nails");

/* An order divides degree!, and 64! has 296 bits. */
#define IDSI_ORDER_LIMBS 5u
#define IDSI_ORDER_CHARS 92u /* 90 digits, one that mpn_get_str() may put before them, NUL */

typedef struct idsi_order {
    mp_limb_t limb[IDSI_ORDER_LIMBS]; /* the lowest first */
} idsi_order;

/* ---- actions on places (automorphism_name.c) ---------------------------------------------- */

/* A permutation of at most 8 points; point i goes to byte i. */
typedef struct idsi_perm {
    uint8_t image[IDS_MAX_ARITY];
} idsi_perm;

/* A group that acts on `degree` points. The list may repeat permutations, each equally often. */
typedef struct idsi_action {
    uint32_t degree;
    uint64_t count;
    idsi_perm *list;
} idsi_action;

#define IDSI_ACTION_NAME 64u

/* Order of the group of permutations: `count` without the repetitions. */
uint64_t idsi_action_order(const idsi_action *action);
/* Writes the name of the group; a transitive action is named as a permutation group,
 * another one as an abstract group. */
ids_status idsi_action_name(ids_ctx *ctx, const idsi_action *action, char name[IDSI_ACTION_NAME]);

/* ---- the stabiliser at a root (automorphism_place.c) -------------------------------------- */

typedef enum idsi_block_kind {
    IDSI_BLOCK_FIXED = 0, /* one place that nothing moves */
    IDSI_BLOCK_WREATH,    /* Aut(argument) wr the action on one orbit of places */
    IDSI_BLOCK_SEMIDIRECT /* several orbits that are moved together */
} idsi_block_kind;

/* A direct factor of the stabiliser: the places that it moves, as bit sets. */
typedef struct idsi_block {
    idsi_block_kind kind;
    uint64_t order;
    uint32_t orbit_count; /* orbits whose arguments have automorphisms of their own */
    uint32_t orbit[IDS_MAX_ARITY];
    char name[IDSI_ACTION_NAME]; /* of the acting group; "" when FIXED */
} idsi_block;

/* The argument orders that keep the types of the arguments of a root. */
typedef struct idsi_stabilizer {
    uint32_t block_count;
    idsi_block block[IDS_MAX_ARITY];
    uint32_t generator_count;
    ids_signed_order generator[2 * IDS_MAX_ARITY];
} idsi_stabilizer;

/* `type` is not the leaf. */
ids_status idsi_stabilizer_find(ids_ctx *ctx, const ids_types *types, uint32_t type,
                                idsi_stabilizer *stabilizer);

/* ---- the finished group (automorphism.c) -------------------------------------------------- */

typedef struct idsi_leaf_order {
    uint8_t image[IDS_MAX_DEGREE]; /* leaf i changes to image[i], from 0 */
    int8_t sign;
} idsi_leaf_order;

struct ids_automorphisms {
    ids_ctx *ctx;
    uint32_t degree;
    idsi_order order;
    char *structure;
    size_t count;
    idsi_leaf_order *generators;
};

/* The order in decimal digits, and degree! / order. */
void idsi_automorphisms_digits(const ids_automorphisms *group, char order[IDSI_ORDER_CHARS],
                               char monomials[IDSI_ORDER_CHARS]);

#endif
