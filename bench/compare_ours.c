/* SPDX-License-Identifier: BSD-2-Clause */
/* The rank of a matrix by the elimination of this library, one thread. */
#include <stdio.h>
#include <stdlib.h>

#include "compare_rank.h"
#include "field/field_private.h"

#define PIECE 64u

typedef struct source {
    const compare_matrix *m;
} source;

static ids_status make_piece(void *user, size_t piece, idsi_row_fn row, void *row_user)
{
    const compare_matrix *m = ((const source *)user)->m;
    ids_status st = IDS_OK;
    idsi_entry *entries = NULL;
    size_t capacity = 0;

    for (size_t r = piece * PIECE; st == IDS_OK && r < (piece + 1) * PIECE && r < m->rows; r++) {
        size_t count = m->start[r + 1] - m->start[r];
        if (count > capacity) {
            free(entries);
            capacity = count;
            entries = malloc(capacity * sizeof *entries);
            if (entries == NULL) {
                return IDS_ERR_NOMEM;
            }
        }
        for (size_t i = 0; i < count; i++) {
            entries[i] = (idsi_entry){m->column[m->start[r] + i], m->value[m->start[r] + i]};
        }
        st = count > 0 ? row(row_user, entries, count) : IDS_OK;
    }
    free(entries);
    return st;
}

size_t compare_rank_ours(const compare_matrix *m)
{
    source from = {m};
    ids_ctx *ctx = NULL;
    idsi_random random;
    idsi_result result = {0};
    ids_status st = ids_ctx_create(NULL, &ctx);

    if (st == IDS_OK) {
        idsi_matrix matrix = {.ctx = ctx,
                              .prime = COMPARE_PRIME,
                              .columns = (uint32_t)m->columns,
                              .pieces = (m->rows + PIECE - 1) / PIECE,
                              .piece = make_piece,
                              .source_user = &from};
        idsi_random_seed(&random, 1);
        st = idsi_eliminate(&matrix, &random, &result);
    }
    if (st != IDS_OK) {
        fprintf(stderr, "compare_rank: %s\n", ids_ctx_message(ctx));
        exit(EXIT_FAILURE);
    }
    ids_ctx_free(ctx);
    return (size_t)result.rank;
}
