/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Normal forms, their combinations, and matrices, as the files behind engine.h share them.
 */
#ifndef IDSI_NORMAL_PRIVATE_H
#define IDSI_NORMAL_PRIVATE_H

#include <idspan/engine.h>

#include "lift_private.h"

struct ids_normal_forms {
    ids_ctx *ctx;
    const ids_presentation *pres;
    uint32_t prime; /* 0: over the rational numbers */
    idsi_laws *laws;
    idsi_proof *proof; /* NULL unless over the rational numbers */
    idsi_tower tower;
};

/* Terms by increasing index; coefficients are not 0, and centred residues mod a prime. */
struct ids_combination {
    ids_ctx *ctx;
    const ids_normal_forms *forms;
    uint32_t degree;
    size_t count;
    uint32_t *index;
    mpq_t *coefficient;
};

/* ---- trees of columns (lib/engine/column.c) -------------------------------------------------- */

/*
 * The product that a column of a planned level stands for, on a set of labels, multiplied out; the
 * tree is not canonical but has the sign +1. `out` has room for 2 * degree - 1 tokens; returns how
 * many there are.
 */
size_t idsi_column_tree(const idsi_tower *tower, const idsi_level *level, uint64_t column,
                        uint64_t labels, idsi_token *out);
/* The same for a normal form of a degree of the tower. */
size_t idsi_normal_tree(const idsi_tower *tower, uint32_t degree, uint64_t index, uint64_t labels,
                        idsi_token *out);

/* ---- reduction (lib/engine/reduce.c) --------------------------------------------------------- */

/* Sum of terms of one degree, before it becomes a combination. */
typedef struct idsi_sum {
    const ids_normal_forms *forms;
    ids_ctx *ctx;
    uint32_t degree;
    uint64_t size;
    uint64_t *residue; /* mod a prime; each < p^2 */
    mpq_t *exact;      /* else */
} idsi_sum;

/* An element of the algebra on a set of labels. */
typedef struct idsi_element {
    uint64_t labels;
    uint32_t degree;
    ids_combination *value;
} idsi_element;

ids_status idsi_sum_init(idsi_sum *sum, ids_ctx *ctx, const ids_normal_forms *forms,
                         uint32_t degree);
void idsi_sum_clear(idsi_sum *sum);
/* Adds coefficient * op(arguments), reduced. */
ids_status idsi_sum_product(idsi_sum *sum, uint32_t op, const idsi_element *args,
                            mpq_srcptr coefficient);
/* Adds coefficient * tree, reduced; the tree is multilinear in the labels 1 .. degree. */
ids_status idsi_sum_tree(idsi_sum *sum, const idsi_token *tree, mpq_srcptr coefficient);
/* Makes a combination of the sum. */
ids_status idsi_sum_take(const idsi_sum *sum, ids_combination **combination);
/* The combination 1 * normal form. */
ids_status idsi_combination_unit(ids_ctx *ctx, const ids_normal_forms *forms, uint32_t degree,
                                 uint32_t index, ids_combination **combination);

/* ---- writing matrices (lib/engine/market.c) -------------------------------------------------- */

/* Text on its way to a sink. */
typedef struct idsi_market {
    ids_ctx *ctx;
    ids_sink_fn sink;
    void *user;
    idsi_text text;
} idsi_market;

void idsi_market_init(idsi_market *market, ids_ctx *ctx, ids_sink_fn sink, void *user);
void idsi_market_clear(idsi_market *market);
/* Hands the text on, when there is much of it or `all`. */
ids_status idsi_market_flush(idsi_market *market, bool all);

/* ---- all consequences (lib/engine/plain.c) --------------------------------------------------- */

/* What all consequences of a degree are made from. */
typedef struct idsi_plain {
    ids_ctx *ctx;
    const idsi_laws *laws;
    uint32_t degree;
    ids_types *types;
    ids_basis *basis[IDS_MAX_DEGREE + 1]; /* of the degrees 1 .. degree */
    uint64_t rows;
    uint64_t entries;
} idsi_plain;

ids_status idsi_plain_init(idsi_plain *plain, ids_ctx *ctx, const idsi_laws *laws, uint32_t degree);
void idsi_plain_clear(idsi_plain *plain);
/* Writes the lines "row column value" of all entries. */
ids_status idsi_plain_write(const idsi_plain *plain, idsi_market *market);

#endif
