/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files of the basis share: how the labels of one association type are dealt, as a short
 * list of independent choices (the plan of the type), and tables for the choices (the decks).
 */
#ifndef IDSI_BASIS_PRIVATE_H
#define IDSI_BASIS_PRIVATE_H

#include "tree_private.h"

/* No parent, no deck. */
#define IDSI_NO_CUT 0xffu
#define IDSI_NO_DECK 0xffffu

/*
 * A choice of `taken` out of `size` sorted labels; the least label is always taken when `least`
 * is set. Row r of the table is the r-th choice, in lexicographic order, as positions: first those
 * taken, then the others, both ascending. Row 0 is 0, 1, 2, ...
 */
typedef struct idsi_deck {
    uint64_t radix;   /* number of rows, at least 2 */
    uint64_t inverse; /* (2^64 - 1) / radix */
    size_t rows;      /* where the table begins in idsi_decks.rows; SIZE_MAX: it would be too big */
    uint8_t size;
    uint8_t taken;
    uint8_t least;
} idsi_deck;

typedef struct idsi_decks {
    uint32_t count;
    uint32_t degree;
    size_t capacity;
    idsi_deck *deck;
    uint16_t *number; /* by least, size, taken; IDSI_NO_DECK: not used */
    uint8_t *rows;
    uint64_t *choose; /* C(n, k-1) at [n * (degree + 2) + k], 0 for k = 0 */
} idsi_decks;

/* The sorted labels in the places at .. at+size-1 become those taken, then the others. */
typedef struct idsi_cut {
    uint16_t deck;
    uint8_t at;
    uint8_t within; /* the latest cut before this one whose places contain these; IDSI_NO_CUT */
} idsi_cut;

/* The label in place `at` is the least of those in the places at .. at+family-1. */
typedef struct idsi_check {
    uint8_t at;
    uint8_t family;
} idsi_check;

typedef struct idsi_plan {
    uint32_t cuts;
    uint32_t checks;
    uint32_t length; /* of the prefix code */
    const idsi_cut *cut;
    const idsi_check *check;
    const uint8_t *leaf; /* [degree]: where in the prefix code the label of a place stands */
    const int8_t *shape; /* [length]: the prefix code, leaves as 0 */
} idsi_plan;

/* Room for the plan of any type. */
typedef struct idsi_plan_room {
    idsi_cut cut[IDS_MAX_DEGREE];
    idsi_check check[IDS_MAX_DEGREE];
    uint8_t leaf[IDS_MAX_DEGREE];
    int8_t shape[IDSI_MAX_TOKENS];
} idsi_plan_room;

/* The shape of a prefix code, one byte a token as in idsi_plan.shape, zeros behind. */
#define IDSI_SHAPE_WORDS ((IDSI_MAX_TOKENS + 7u) / 8u)
typedef struct idsi_shape {
    uint64_t word[IDSI_SHAPE_WORDS];
} idsi_shape;

/* Plans of all types of a degree, packed: counts, cuts, checks, leaf, shape. */
typedef struct idsi_plans {
    uint32_t *start; /* by type; NULL: they would be too many bytes, plans are made when needed */
    uint8_t *bytes;
    size_t count;
    size_t capacity;
    uint32_t *slots; /* slot_mask + 1 entries by shape: type + 1, 0: empty */
    uint64_t slot_mask;
} idsi_plans;

struct ids_basis {
    ids_ctx *ctx;
    const ids_types *types;
    uint32_t degree;
    uint32_t type_count;
    idsi_decks decks;
    idsi_plans plans;
    uint64_t *offset; /* type_count + 1: monomials before each type; NULL: beyond 64 bits */
    size_t limbs;     /* of an entry of big, which takes the place of offset then */
    uint64_t *big;    /* the same, `limbs` words each, least significant first */
};

/* ---- basis_deck.c -------------------------------------------------------------------------- */

ids_status idsi_decks_init(ids_ctx *ctx, uint32_t degree, idsi_decks *decks);
void idsi_decks_clear(ids_ctx *ctx, idsi_decks *decks);
/* Number of the deck; it is made when it is new. */
ids_status idsi_decks_add(ids_ctx *ctx, idsi_decks *decks, uint32_t size, uint32_t taken,
                          bool least, uint16_t *deck);
/* Makes the tables. */
ids_status idsi_decks_fill(ids_ctx *ctx, idsi_decks *decks);
/* Row r < radix of a deck, for decks without table. */
void idsi_deck_row(const idsi_decks *decks, const idsi_deck *deck, uint64_t r, uint8_t *row);
/* Makes a row the next one; it must not be the last. */
void idsi_deck_next_row(const idsi_deck *deck, uint8_t *row);
/* The number of the row that takes `taken` out of the labels `all`; false: without the least. */
bool idsi_deck_find(const idsi_decks *decks, const idsi_deck *deck, uint64_t all, uint64_t taken,
                    uint64_t *r);

static inline uint32_t idsi_deck_key(uint32_t degree, uint32_t size, uint32_t taken, bool least)
{
    return ((least ? degree + 1 : 0) + size) * (degree + 1) + taken;
}

/* ---- basis_plan.c -------------------------------------------------------------------------- */

/* Makes the plan of a type of the basis; its decks must be there. */
void idsi_plan_make(const ids_basis *basis, uint32_t type, idsi_plan_room *room, idsi_plan *plan);
/* The stored plan of a type, or else one made in `room`. */
void idsi_plan_get(const ids_basis *basis, uint32_t type, idsi_plan_room *room, idsi_plan *plan);
/* The type with a shape, `length` tokens long, and its stored plan. */
bool idsi_plan_find(const ids_basis *basis, const idsi_shape *shape, size_t length, uint32_t *type,
                    idsi_plan *plan);
/* Finds the decks that the types of the degree use, and stores the plans. */
ids_status idsi_plans_create(ids_ctx *ctx, ids_basis *basis);
/* Puts the labels 1 .. degree in their places; digit[c] is the row of cut c. */
void idsi_plan_deal(const ids_basis *basis, const idsi_plan *plan, const uint64_t *digit,
                    uint8_t *label);
/* The inverse, from a prefix code of the plan's shape. IDS_ERR_ARG when the labels are not
 * 1 .. degree once each, IDS_ERR_NOT_CANONICAL when they are not canonical. */
ids_status idsi_plan_gather(const ids_basis *basis, const idsi_plan *plan, const int32_t *code,
                            uint64_t *digit);
/* Digits of a number below the product of the radices; the first is the most significant. */
void idsi_plan_digits(const ids_basis *basis, const idsi_plan *plan, uint64_t index,
                      uint64_t *digit);
/* Writes the prefix code in the form of ids_mono_create(). */
void idsi_plan_write(const ids_basis *basis, const idsi_plan *plan, const uint8_t *label,
                     int32_t *code);

/* ---- basis.c ------------------------------------------------------------------------------- */

/* The basis without plans, and without offsets when they pass 64 bits. */
ids_status idsi_basis_prepare(ids_ctx *ctx, const ids_types *types, uint32_t degree,
                              ids_basis **basis);
/* Type of a prefix code, and the rows of its cuts. IDS_ERR_ARG unless it is a multilinear tree
 * of the degree, IDS_ERR_NOT_CANONICAL. */
ids_status idsi_basis_read(const ids_basis *basis, const int32_t *code, size_t length,
                           uint32_t *type, uint64_t *digit, idsi_plan_room *room, idsi_plan *plan);
/* Type of the monomial with an index below the size, which fits 64 bits. */
uint32_t idsi_basis_type_of(const ids_basis *basis, uint64_t index);

/* ---- iterate.c ----------------------------------------------------------------------------- */

/* An iterator with nothing to give. */
ids_status idsi_iter_make(ids_ctx *ctx, const ids_basis *basis, ids_iter **iter);
/* NULL for NULL. */
const ids_basis *idsi_iter_basis(const ids_iter *iter);
/* Puts it before the monomial of a type with these digits; then it gives `count` monomials. */
void idsi_iter_place(ids_iter *iter, uint32_t type, const uint64_t *digit, uint64_t index,
                     uint64_t count);

/* ---- basis_big.c --------------------------------------------------------------------------- */

/* IDS_ERR_LIMIT with the exact number of monomials in the message. */
ids_status idsi_basis_fail_size(ids_ctx *ctx, const ids_basis *basis);

#endif
