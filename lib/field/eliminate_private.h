/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the stages of the elimination share.
 */
#ifndef IDSI_ELIMINATE_PRIVATE_H
#define IDSI_ELIMINATE_PRIVATE_H

#include "dense_private.h"
#include "rewrite_private.h"

/* Below this, random numbers mod p are too few to rely on. */
#define IDSI_LEAST_RANDOM_PRIME (UINT32_C(1) << 20)

/* Which rows are still to be dealt with: a bit a row. */
typedef struct idsi_deferred {
    uint64_t *bits;
    size_t capacity; /* words */
    uint64_t count;
} idsi_deferred;

bool idsi_is_deferred(const idsi_deferred *deferred, uint64_t number);

typedef struct idsi_feed idsi_feed;

typedef struct idsi_elimination {
    const idsi_matrix *matrix;
    idsi_random *random;
    ids_ctx *ctx;
    uint32_t prime;
    uint32_t columns;
    idsi_team *team;
    idsi_feed *feed;
    idsi_echelon *echelon;
    idsi_dense_echelon *dense;
    idsi_fold fold;
    idsi_deferred deferred;
    uint64_t rows; /* that the source makes; 0 before the first pass */
    uint64_t dense_columns;
    uint64_t dense_rows;
    double error;
} idsi_elimination;

/* ---- rows, a block at a time (lib/field/feed.c) ---------------------------------------------- */

/* Receives row `number`, which lives until the next call of the block function. */
typedef ids_status (*idsi_feed_fn)(void *user, uint64_t number, const idsi_entry *row,
                                   size_t count);
/* Is called when the rows handed out so far are about to go. */
typedef ids_status (*idsi_feed_block_fn)(void *user);

ids_status idsi_feed_create(const idsi_matrix *matrix, idsi_team *team, idsi_feed **feed);
void idsi_feed_free(idsi_feed *feed);
/*
 * Hands out all rows in their order, or, with `only`, those that are deferred. *rows is the number
 * of all rows. block may be NULL.
 */
ids_status idsi_feed_run(idsi_feed *feed, const idsi_deferred *only, idsi_feed_fn row,
                         idsi_feed_block_fn block, void *user, uint64_t *rows);
/* No more rows are wanted in a pass that is not the first. */
void idsi_feed_stop(idsi_feed *feed);

/* ---- stages 2 and 3 (lib/field/finish.c) ----------------------------------------------------- */

/* Bytes that the dense stage takes at most. */
uint64_t idsi_finish_bytes(const idsi_elimination *e);
/* Brings the deferred rows into e->dense. */
ids_status idsi_finish(idsi_elimination *e);

#endif
