/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dense echelon form mod a prime, for rows that come in blocks.
 *
 * Stored rows stand in panels of up to PANEL rows:
 *
 *     panel 0   1 . . at its own pivots
 *     panel 1   0 0 0 at the pivots of panel 0, 1 . . at its own
 *     panel 2   ...
 *
 * A new block is cleared at the pivots of panel 0, 1, ... in turn, one product of matrices each
 * (the block's entries there, times the panel); panels do not disturb the pivots of earlier ones.
 * What is left is brought to echelon form by itself, in slices of SLICE rows, and becomes part of
 * the last panel. So all but a small share of the work is products. Cost: rank * rank * columns / 2
 * multiplications for as many rows as the rank.
 */
#include <string.h>

#include "dense_private.h"

#define PANEL 192u
#define SLICE 16u

struct idsi_dense_echelon {
    ids_ctx *ctx;
    uint32_t p;
    size_t columns;
    size_t rank;
    size_t capacity;  /* panels */
    uint32_t **panel; /* PANEL x columns each */
    uint32_t *pivot;  /* capacity * PANEL */
    uint32_t *factor; /* entries of a block at a panel's pivots */
    size_t factor_capacity;
    idsi_workspace work;
};

ids_status idsi_dense_echelon_create(ids_ctx *ctx, uint32_t p, size_t columns,
                                     idsi_dense_echelon **echelon)
{
    ids_status st = IDS_OK;
    idsi_dense_echelon *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->p = p;
    made->columns = columns;
    IDSI_TRY(idsi_workspace_init(&made->work, ctx));
    *echelon = made;
    made = NULL;
done:
    idsi_dense_echelon_free(made);
    return st;
}

void idsi_dense_echelon_free(idsi_dense_echelon *echelon)
{
    if (echelon == NULL) {
        return;
    }
    ids_ctx *ctx = echelon->ctx;
    for (size_t k = 0; k < echelon->capacity; k++) {
        idsi_free(ctx, echelon->panel[k]);
    }
    if (echelon->work.ctx != NULL) {
        idsi_workspace_clear(&echelon->work);
    }
    idsi_free(ctx, echelon->factor);
    idsi_free(ctx, echelon->panel);
    idsi_free(ctx, echelon->pivot);
    idsi_free(ctx, echelon);
}

size_t idsi_dense_echelon_rank(const idsi_dense_echelon *echelon)
{
    return echelon->rank;
}

uint32_t idsi_dense_echelon_pivot(const idsi_dense_echelon *echelon, size_t i)
{
    return echelon->pivot[i];
}

const uint32_t *idsi_dense_echelon_row(const idsi_dense_echelon *echelon, size_t i)
{
    return echelon->panel[i / PANEL] + (i % PANEL) * echelon->columns;
}

static uint32_t *stored_row(idsi_dense_echelon *e, size_t i)
{
    return e->panel[i / PANEL] + (i % PANEL) * e->columns;
}

/* target -= factor * source on columns 0 .. last */
static void subtract_row(uint32_t p, uint32_t *target, const uint32_t *source, uint32_t factor,
                         size_t last)
{
    uint64_t minus = p - factor;
    for (size_t j = 0; j <= last; j++) {
        target[j] = (uint32_t)((target[j] + minus * source[j]) % p);
    }
}

static void scale_row(uint32_t p, uint32_t *row, uint32_t factor, size_t last)
{
    for (size_t j = 0; j <= last; j++) {
        row[j] = idsi_mod_mul(row[j], factor, p);
    }
}

/* Last column with a nonzero entry; false for a zero row. */
static bool last_nonzero(const uint32_t *row, size_t columns, size_t *last)
{
    for (size_t j = columns; j-- > 0;) {
        if (row[j] != 0) {
            *last = j;
            return true;
        }
    }
    return false;
}

/* Subtracts the multiples of stored rows from .. to-1 (of one panel) that clear their pivots. */
static ids_status clear_pivots(idsi_dense_echelon *e, uint32_t *rows, size_t count, size_t from,
                               size_t to)
{
    ids_status st = IDS_OK;
    size_t width = to - from;

    if (count * width > e->factor_capacity) {
        IDSI_TRY(idsi_resize_array(e->ctx, count * width, sizeof *e->factor, &e->factor));
        e->factor_capacity = count * width;
    }
    for (size_t i = 0; i < count; i++) {
        for (size_t k = 0; k < width; k++) {
            e->factor[i * width + k] = rows[i * e->columns + e->pivot[from + k]];
        }
    }
    idsi_dense_mul_sub(&e->work, e->p, count, e->columns, width, e->factor, width,
                       stored_row(e, from), e->columns, rows, e->columns);
done:
    return st;
}

static ids_status add_panel(idsi_dense_echelon *e)
{
    ids_status st = IDS_OK;
    size_t capacity = e->capacity + 1;

    IDSI_TRY(idsi_resize_array(e->ctx, capacity * PANEL, sizeof *e->pivot, &e->pivot));
    IDSI_TRY(idsi_resize_array(e->ctx, capacity, sizeof *e->panel, &e->panel));
    e->panel[e->capacity] = NULL;
    e->capacity = capacity;
    IDSI_TRY(idsi_alloc_array(e->ctx, PANEL * e->columns, sizeof **e->panel,
                              &e->panel[capacity - 1]));
done:
    return st;
}

/* Clears rows at the pivots of the stored rows from .. to-1, panel by panel. */
static ids_status clear_range(idsi_dense_echelon *e, uint32_t *rows, size_t count, size_t from,
                              size_t to)
{
    ids_status st = IDS_OK;
    while (from < to) {
        size_t end = from - from % PANEL + PANEL;
        end = end < to ? end : to;
        IDSI_TRY(clear_pivots(e, rows, count, from, end));
        IDSI_TRY(idsi_poll(e->ctx, NULL));
        from = end;
    }
done:
    return st;
}

/* Brings a few rows to reduced echelon form by themselves; those that are left stand first. */
static size_t reduce_slice(const idsi_dense_echelon *e, uint32_t *rows, size_t count,
                           uint32_t *pivot, bool *independent)
{
    size_t kept = 0;
    for (size_t i = 0; i < count; i++) {
        independent[i] = false;
        uint32_t *row = rows + i * e->columns;
        size_t last = 0;
        for (size_t k = 0; k < kept; k++) {
            if (row[pivot[k]] != 0) {
                subtract_row(e->p, row, rows + k * e->columns, row[pivot[k]], pivot[k]);
            }
        }
        if (!last_nonzero(row, e->columns, &last)) {
            continue;
        }
        scale_row(e->p, row, idsi_mod_inverse(row[last], e->p), last);
        for (size_t k = 0; k < kept; k++) {
            uint32_t *other = rows + k * e->columns;
            if (other[last] != 0) {
                subtract_row(e->p, other, row, other[last], last);
            }
        }
        if (kept < i) {
            memcpy(rows + kept * e->columns, row, e->columns * sizeof *row);
        }
        pivot[kept] = (uint32_t)last;
        independent[i] = true;
        kept++;
    }
    return kept;
}

/* Stores rows in reduced echelon form that are zero at all pivots; clears theirs in the panel. */
static ids_status store_slice(idsi_dense_echelon *e, const uint32_t *rows, size_t count,
                              const uint32_t *pivot)
{
    ids_status st = IDS_OK;

    while (count > 0) {
        if (e->rank == e->capacity * PANEL) {
            IDSI_TRY(add_panel(e));
        }
        size_t used = e->rank % PANEL;
        size_t first = e->rank;
        size_t now = count < PANEL - used ? count : PANEL - used;
        memcpy(stored_row(e, first), rows, now * e->columns * sizeof *rows);
        memcpy(e->pivot + first, pivot, now * sizeof *pivot);
        if (used > 0) {
            IDSI_TRY(clear_pivots(e, stored_row(e, first - used), used, first, first + now));
        }
        e->rank += now;
        rows += now * e->columns;
        pivot += now;
        count -= now;
    }
done:
    return st;
}

ids_status idsi_dense_echelon_add(idsi_dense_echelon *echelon, uint32_t *rows, size_t count,
                                  bool *independent)
{
    ids_status st = IDS_OK;
    idsi_dense_echelon *e = echelon;
    size_t before = e->rank;
    uint32_t pivot[SLICE];
    bool found[SLICE];

    IDSI_TRY(clear_range(e, rows, count, 0, before));
    for (size_t i = 0; i < count; i += SLICE) {
        uint32_t *slice = rows + i * e->columns;
        size_t height = count - i < SLICE ? count - i : SLICE;
        IDSI_TRY(clear_range(e, slice, height, before, e->rank));
        size_t kept = reduce_slice(e, slice, height, pivot, found);
        IDSI_TRY(store_slice(e, slice, kept, pivot));
        if (independent != NULL) {
            memcpy(independent + i, found, height * sizeof *found);
        }
    }
done:
    return st;
}

ids_status idsi_dense_echelon_complete(idsi_dense_echelon *echelon)
{
    ids_status st = IDS_OK;
    idsi_dense_echelon *e = echelon;

    /* Downwards: a panel is cleared at the pivots of later panels, which are complete by then. */
    for (size_t k = (e->rank + PANEL - 1) / PANEL; k-- > 0;) {
        size_t first = k * PANEL;
        size_t count = first + PANEL < e->rank ? PANEL : e->rank - first;
        IDSI_TRY(clear_range(e, stored_row(e, first), count, first + PANEL, e->rank));
    }
done:
    return st;
}
