/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Rows that are rewritten completely by the rules of a sparse echelon form, several side by side,
 * into dense rows.
 */
#ifndef IDSI_REWRITE_PRIVATE_H
#define IDSI_REWRITE_PRIVATE_H

#include "../core/team_private.h"
#include "field_private.h"

/* Random combinations of all columns that a folded row begins with. */
#define IDSI_FOLD_MIXED 16u

/*
 * How the columns that are no pivots become columns of dense rows. Without folding, each becomes
 * one, in their order. Folded, the rows lose columns and, almost surely, no rank: dense column
 *
 *     0 .. mixed-1       a random combination of all
 *     mixed .. width-1   the sum of a few; each column is in one of these
 */
typedef struct idsi_fold {
    ids_ctx *ctx;
    size_t width;
    uint32_t mixed;  /* 0 or IDSI_FOLD_MIXED */
    uint32_t *place; /* of a column; UINT32_MAX for a pivot */
    /* Its IDSI_FOLD_MIXED factors in the combinations of all; for a pivot, those of its rule. */
    uint32_t *mix; /* in mix_room */
    void *mix_room;
} idsi_fold;

/* width == 0: no folding. */
ids_status idsi_fold_init(idsi_fold *fold, ids_ctx *ctx, const idsi_echelon *echelon,
                          uint32_t prime, uint32_t columns, size_t width, idsi_random *random);
void idsi_fold_clear(idsi_fold *fold);
uint64_t idsi_fold_bytes(uint64_t columns);

/*
 * The rules of an echelon form, arranged by columns. The form and the fold must outlive it, and
 * the form must not get new rules meanwhile. Threads may share it.
 */
typedef struct idsi_rewriter idsi_rewriter;

ids_status idsi_rewriter_create(ids_ctx *ctx, const idsi_echelon *echelon, uint32_t prime,
                                uint32_t columns, const idsi_fold *fold, idsi_team *team,
                                idsi_rewriter **rewriter);
/* The rules are applied in so many chunks. */
uint32_t idsi_rewriter_chunks(const idsi_rewriter *rewriter);
void idsi_rewriter_free(idsi_rewriter *rewriter);
uint64_t idsi_rewriter_bytes(uint64_t columns, uint64_t rank, uint64_t fill);

/* Rows side by side. */
typedef struct idsi_lanes idsi_lanes;

ids_status idsi_lanes_create(ids_ctx *ctx, const idsi_rewriter *rewriter, idsi_lanes **lanes);
void idsi_lanes_free(idsi_lanes *lanes);
uint32_t idsi_lanes_count(void); /* rows side by side */
uint64_t idsi_lanes_bytes(uint64_t rank);
/*
 * Adds factor * row to the row in a lane; what stands at columns that are no pivots goes to the
 * dense row `rest` at once.
 */
void idsi_lanes_load(idsi_lanes *lanes, uint32_t lane, const idsi_entry *row, size_t count,
                     uint32_t factor, uint32_t *rest);
/* Finds how often each rule is to be applied to each lane, and clears the lanes. */
void idsi_lanes_solve(idsi_lanes *lanes);
/*
 * Then adds to dense columns from .. to-1 of the first `count` lanes' rows, rest + lane * stride,
 * what the rules of a chunk leave there. Threads may share the lanes for this.
 */
void idsi_lanes_apply(const idsi_lanes *lanes, uint32_t chunk, uint32_t count, size_t from,
                      size_t to, uint32_t *rest, size_t stride);

#endif
