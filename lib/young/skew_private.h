/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Skew shapes, their standard tableaux, and Young's seminormal form mod a prime.
 */
#ifndef IDSI_SKEW_PRIVATE_H
#define IDSI_SKEW_PRIVATE_H

#include "../core/core_private.h"
#include "mix.h"

/* Most rows and cells of a shape. */
#define IDSI_SHAPE_MAX 16u
/* No two contents differ by more. */
#define IDSI_DISTANCE_MAX (2 * (int)IDSI_SHAPE_MAX - 1)

/* A shape outer/inner, moved as far up and left as it goes; rows without cells between remain. */
typedef struct idsi_shape {
    uint8_t rows;
    uint8_t cells;
    uint8_t outer[IDSI_SHAPE_MAX];
    uint8_t inner[IDSI_SHAPE_MAX];
} idsi_shape;

/*
 * One way to cut a skew shape at a number of cells: the first `at` cells of a tableau fill
 * middle/inner, the others outer/middle. Tableau (S, T) has the number start[S] + T.
 */
typedef struct idsi_cut {
    uint32_t low;       /* number of the shape middle/inner in the store */
    uint32_t high;      /* number of the shape outer/middle */
    uint32_t low_count; /* tableaux of low */
    uint32_t high_count;
    uint32_t *start; /* low_count entries */
} idsi_cut;

/*
 * Standard tableaux of a shape, numbered so that those with equal beginnings stand together: a
 * tableau is the sequence of rows that its cells 1, 2, .. go to, in lexicographic order.
 */
typedef struct idsi_skew {
    idsi_shape shape;
    uint32_t count; /* tableaux, f */
    uint8_t *row;   /* count x cells */
    uint32_t *swap; /* (cells-1) x count: tableau with i+1, i+2 exchanged; itself if not standard */
    int8_t *distance; /* (cells-1) x count: content of cell i+2 minus content of cell i+1 */
    size_t cut_count[IDSI_SHAPE_MAX + 1];
    idsi_cut *cut[IDSI_SHAPE_MAX + 1]; /* by number of cells below; filled by idsi_skew_cut() */
} idsi_skew;

/* All shapes that were asked for, each once. Not for several threads while it grows. */
typedef struct idsi_skews {
    ids_ctx *ctx;
    size_t count;
    size_t capacity;
    idsi_skew **list;
    uint32_t *slot; /* open addressing: 1 + number, 0 free */
    size_t slot_count;
} idsi_skews;

void idsi_skews_init(idsi_skews *skews, ids_ctx *ctx);
void idsi_skews_clear(idsi_skews *skews);
/* Number of the shape outer/inner (rows <= IDSI_SHAPE_MAX, inner inside outer), adding it. */
ids_status idsi_skews_get(idsi_skews *skews, const uint8_t *outer, const uint8_t *inner,
                          uint32_t rows, uint32_t *number);
/* Fills the cuts of a shape at `at` cells, 0 < at < cells. Their order is that of the middles. */
ids_status idsi_skews_cut(idsi_skews *skews, uint32_t number, uint32_t at);

/* Constants of the seminormal form mod p. */
typedef struct idsi_seminormal {
    uint32_t p;
    idsi_mix mix[2 * IDSI_DISTANCE_MAX + 1]; /* by distance + IDSI_DISTANCE_MAX; 0 is unused */
} idsi_seminormal;

/* inverse[d] is the inverse of d mod p, for 0 < d <= IDSI_DISTANCE_MAX below p. */
void idsi_seminormal_init(idsi_seminormal *seminormal, uint32_t p, const uint32_t *inverse);

/*
 * Transposed action on covectors of the exchanges of i+1 and i+2, 0 <= i < cells-1, for the i of a
 * word, from left to right: block has `count` rows of `width` residues. All distances of contents
 * in the shape must be less than p.
 */
void idsi_seminormal_apply(const idsi_seminormal *seminormal, const idsi_skew *skew,
                           const uint8_t *word, size_t length, uint32_t *block, size_t width);
/*
 * Exchanges, to be applied to covectors in turn, for the permutation place j -> label[j]; label is
 * sorted by that. `word` has room for n * n; returns how many there are.
 */
size_t idsi_seminormal_word(uint8_t *label, uint32_t n, uint8_t *word);

#endif
