/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Folding: fewer columns for dense rows of which only the rank is wanted.
 *
 * Let S be the matrix of all dense rows. H adds up its columns into fewer; Z has
 * t = IDSI_FOLD_MIXED columns of random numbers. Only [S Z | S H] is computed, with the columns of
 * S Z the last to become pivots; let k < t of them do so. Then rank S is the rank of [S Z | S H],
 * but for a probability of at most 2 p^-(t-k), whatever S and H are:
 *
 * Let K have as rows a basis of the combinations that kill S H, modulo those that kill S. It
 * depends on S and H only and has d = rank S - rank S H rows; K S has rank d, so that K S Z is a
 * uniformly random d x t matrix, and k is its rank. Of the p^(dt) such matrices at most
 * 2 p^(k(d+t-k)) have rank k (choose the space of the rows, then the rows in it). So rank k < d has
 * probability at most 2 p^-((d-k)(t-k)) <= 2 p^-(t-k).
 */
#include <string.h>

#include "kernels.h"
#include "rewrite_private.h"

uint64_t idsi_fold_bytes(uint64_t columns)
{
    return columns * (1 + IDSI_FOLD_MIXED) * sizeof(uint32_t);
}

void idsi_fold_clear(idsi_fold *fold)
{
    idsi_free(fold->ctx, fold->place);
    idsi_free(fold->ctx, fold->mix_room);
    memset(fold, 0, sizeof *fold);
}

/* Factors of the column in the combinations of all; rules' columns come before their pivot. */
static void mix_column(idsi_fold *fold, const idsi_echelon *echelon, uint32_t prime,
                       uint32_t column, idsi_random *random)
{
    static const uint64_t zeros[IDSI_LANES] = {0};
    uint32_t *mix = fold->mix + (size_t)column * IDSI_FOLD_MIXED;
    const idsi_entry *rule = NULL;
    uint32_t count = 0;

    if (idsi_echelon_rule(echelon, column, &rule, &count)) {
        (void)idsi_kernel_choose()->gather(prime, rule, count, fold->mix, zeros, mix);
        return;
    }
    for (uint32_t k = 0; k < IDSI_FOLD_MIXED; k++) {
        mix[k] = (uint32_t)idsi_random_below(random, prime);
    }
}

ids_status idsi_fold_init(idsi_fold *fold, ids_ctx *ctx, const idsi_echelon *echelon,
                          uint32_t prime, uint32_t columns, size_t width, idsi_random *random)
{
    ids_status st = IDS_OK;

    memset(fold, 0, sizeof *fold);
    fold->ctx = ctx;
    IDSI_TRY(idsi_alloc_array(ctx, columns, sizeof *fold->place, &fold->place));
    if (width > 0) {
        fold->mixed = IDSI_FOLD_MIXED;
        IDSI_TRY(idsi_alloc_array(ctx, ((size_t)columns + 1) * IDSI_FOLD_MIXED, sizeof *fold->mix,
                                  &fold->mix_room));
        fold->mix = idsi_kernel_align(fold->mix_room);
    }
    for (uint32_t c = 0; c < columns; c++) {
        if (idsi_echelon_is_pivot(echelon, c)) {
            fold->place[c] = UINT32_MAX;
        } else if (width == 0) {
            fold->place[c] = (uint32_t)fold->width;
            fold->width++;
        } else {
            fold->place[c] = fold->mixed + (uint32_t)idsi_random_below(random, width - fold->mixed);
        }
        if (width > 0) {
            mix_column(fold, echelon, prime, c, random);
        }
    }
    fold->width = width > 0 ? width : fold->width;
done:
    if (st != IDS_OK) {
        idsi_fold_clear(fold);
    }
    return st;
}
