/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The complete dense echelon form: no row has an entry at another row's pivot. Its panels are left
 * with the columns that are pivots of no panel at all, so the solutions of the equations can be
 * read off.
 */
#include "dense_form.h"

/* Finds the columns that are no pivots. */
static ids_status find_free_columns(idsi_dense_echelon *e)
{
    ids_status st = IDS_OK;
    size_t rank = idsi_dense_echelon_rank(e);
    bool *is_pivot = NULL;

    IDSI_TRY(idsi_alloc_array(e->ctx, e->columns, sizeof *is_pivot, &is_pivot));
    IDSI_TRY(idsi_alloc_array(e->ctx, e->columns - rank, sizeof *e->column, &e->column));
    for (size_t i = 0; i < rank; i++) {
        is_pivot[idsi_dense_echelon_pivot(e, i)] = true;
    }
    for (size_t j = 0; j < e->columns; j++) {
        if (!is_pivot[j]) {
            e->column[e->width++] = (uint32_t)j;
        }
    }
done:
    idsi_free(e->ctx, is_pivot);
    return st;
}

/* Completes panel k; later panels are complete and have shed their pivots. */
static ids_status complete_panel(idsi_dense_echelon *e, size_t k, uint32_t *place)
{
    ids_status st = IDS_OK;
    idsi_panel *at = e->panels[k];
    void *made = NULL;

    IDSI_TRY(idsi_dense_prepare_products(e));
    IDSI_TRY(idsi_alloc(e->ctx, (at->used * e->width + 1) * sizeof *at->rows, &made));
    uint32_t *rows = made;
    for (size_t j = 0; j < at->width; j++) {
        place[at->column[j]] = (uint32_t)j;
    }
    for (size_t i = 0; i < at->used; i++) {
        for (size_t j = 0; j < e->width; j++) {
            rows[i * e->width + j] = idsi_panel_entry(e, at, i, place[e->column[j]]);
        }
    }
    for (size_t later = k + 1; later < e->count; later++) {
        const idsi_panel *by = e->panels[later];
        for (size_t i = 0; i < at->used; i++) {
            for (size_t j = 0; j < by->used; j++) {
                uint32_t column = by->column[by->pivot[j]];
                e->factor[i * by->used + j] = idsi_panel_entry(e, at, i, place[column]);
            }
        }
        idsi_dense_mul_sub(&e->work, e->p, at->used, e->width, by->used, e->factor, by->used,
                           by->rows, e->width, rows, e->width);
        IDSI_TRY(idsi_poll(e->ctx, NULL));
    }
    idsi_free(e->ctx, at->rows);
    idsi_free(e->ctx, at->packed_room);
    at->packed_room = NULL;
    at->packed = NULL;
    at->rows = rows;
    made = NULL;
done:
    idsi_free(e->ctx, made);
    return st;
}

ids_status idsi_dense_echelon_complete(idsi_dense_echelon *echelon)
{
    ids_status st = IDS_OK;
    idsi_dense_echelon *e = echelon;
    uint32_t *place = NULL; /* of a column among those of a panel */

    IDSI_TRY(idsi_alloc_array(e->ctx, e->columns, sizeof *place, &place));
    IDSI_TRY(find_free_columns(e));
    for (size_t k = e->count; k-- > 0;) {
        IDSI_TRY(complete_panel(e, k, place));
    }
    e->complete = true;
done:
    idsi_free(e->ctx, place);
    return st;
}

void idsi_dense_echelon_solutions(const idsi_dense_echelon *echelon, uint32_t *solutions)
{
    const idsi_dense_echelon *e = echelon;

    for (size_t j = 0; j < e->width; j++) {
        solutions[j * e->columns + e->column[j]] = e->p - 1;
    }
    for (size_t k = 0; k < e->count; k++) {
        const idsi_panel *at = e->panels[k];
        for (size_t i = 0; i < at->used; i++) {
            const uint32_t *row = at->rows + i * e->width;
            uint32_t pivot = at->column[at->pivot[i]];
            for (size_t j = 0; j < e->width; j++) {
                solutions[j * e->columns + pivot] = row[j];
            }
        }
    }
}
