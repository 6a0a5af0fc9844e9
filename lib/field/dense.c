/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dense echelon form mod a prime, for rows that come in blocks.
 *
 * Stored rows stand in panels of up to PANEL rows. A full panel's pivots are dropped from the
 * columns of everything that comes later, since nothing but zeros stands there:
 *
 *     panel 0   all columns               1 . . at its own pivots
 *     panel 1   less the pivots of 0      1 . . at its own pivots
 *     panel 2   less those of 0 and 1     ...
 *
 * A new block is cleared at the pivots of panel 0, 1, ... in turn, one product of matrices each
 * (the block's entries there, times the panel), and then loses these columns. What is left is
 * brought to reduced echelon form by itself: half by half, each half clearing the other by a
 * product, down to SLICE rows. Then it becomes part of the last panel. So all but a small share of
 * the work is products. Cost for as many rows as the rank r: r^2 c / 2 - r^3 / 6 multiplications.
 */
#include <stdlib.h>
#include <string.h>

#include "dense_form.h"

#define PANEL IDSI_PANEL
#define SLICE 16u

typedef idsi_panel panel;

/* Rows at work: from one block, with the columns of the panel that they will go to. */
typedef struct block {
    uint32_t *rows;
    size_t stride;
    size_t width;
    uint32_t pivot[PANEL];
    bool independent[PANEL];
} block;

ids_status idsi_dense_echelon_create(ids_ctx *ctx, uint32_t p, size_t columns,
                                     idsi_dense_echelon **echelon)
{
    ids_status st = IDS_OK;
    idsi_dense_echelon *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->kernel = idsi_kernel_choose();
    made->p = p;
    made->columns = columns;
    IDSI_TRY(idsi_alloc_array(ctx, columns, sizeof *made->whole, &made->whole));
    *echelon = made;
    made = NULL;
done:
    idsi_dense_echelon_free(made);
    return st;
}

static void free_panel(ids_ctx *ctx, panel *old)
{
    if (old != NULL) {
        idsi_free(ctx, old->rows);
        idsi_free(ctx, old->packed_room);
        idsi_free(ctx, old->column);
        idsi_free(ctx, old);
    }
}

void idsi_dense_echelon_free(idsi_dense_echelon *echelon)
{
    if (echelon == NULL) {
        return;
    }
    ids_ctx *ctx = echelon->ctx;
    for (size_t k = 0; k < echelon->count; k++) {
        free_panel(ctx, echelon->panels[k]);
    }
    if (echelon->work.ctx != NULL) {
        idsi_workspace_clear(&echelon->work);
    }
    idsi_free(ctx, echelon->panels);
    idsi_free(ctx, echelon->factor);
    idsi_free(ctx, echelon->column);
    idsi_free(ctx, echelon->whole);
    idsi_free(ctx, echelon);
}

ids_status idsi_dense_echelon_share(idsi_dense_echelon *echelon, idsi_team *team)
{
    echelon->team = team;
    return echelon->work.ctx == NULL ? IDS_OK : idsi_workspace_share(&echelon->work, team);
}

size_t idsi_dense_echelon_rank(const idsi_dense_echelon *echelon)
{
    const size_t count = echelon->count;
    return count == 0 ? 0 : (count - 1) * PANEL + echelon->panels[count - 1]->used;
}

uint64_t idsi_dense_echelon_bytes(uint64_t columns, uint64_t rank)
{
    uint64_t panels = rank / PANEL + 1;
    uint64_t dropped = panels * (panels - 1) / 2 * PANEL; /* columns, over all panels */
    uint64_t kept = panels * columns > dropped ? panels * columns - dropped : 0;
    /* and the last panel twice, while it is packed */
    return (kept * (PANEL + 1) + (PANEL + 1) * columns) * sizeof(uint32_t) + (UINT64_C(2) << 20);
}

uint32_t idsi_dense_echelon_pivot(const idsi_dense_echelon *echelon, size_t i)
{
    const panel *from = echelon->panels[i / PANEL];
    return from->column[from->pivot[i % PANEL]];
}

const uint32_t *idsi_dense_echelon_row(const idsi_dense_echelon *echelon, size_t i)
{
    const panel *from = echelon->panels[i / PANEL];
    const uint32_t *column = echelon->complete ? echelon->column : from->column;
    size_t width = echelon->complete ? echelon->width : from->width;

    memset(echelon->whole, 0, echelon->columns * sizeof *echelon->whole);
    for (size_t j = 0; j < width; j++) {
        echelon->whole[column[j]] = echelon->complete
                                        ? from->rows[(i % PANEL) * width + j]
                                        : idsi_panel_entry(echelon, from, i % PANEL, j);
    }
    echelon->whole[idsi_dense_echelon_pivot(echelon, i)] = 1;
    return echelon->whole;
}

/* ---- clearing -------------------------------------------------------------------------------- */

ids_status idsi_dense_prepare_products(idsi_dense_echelon *e)
{
    ids_status st = IDS_OK;
    void *room = NULL;

    if (e->factor == NULL) {
        if (e->work.ctx == NULL) {
            IDSI_TRY(idsi_workspace_init(&e->work, e->ctx));
            IDSI_TRY(idsi_workspace_share(&e->work, e->team));
        }
        IDSI_TRY(idsi_alloc(e->ctx, PANEL * PANEL * sizeof *e->factor, &room));
        e->factor = room;
    }
done:
    return st;
}

/*
 * Subtracts from m <= PANEL target rows the multiples of k <= PANEL source rows that clear the
 * sources' pivots.
 */
static ids_status clear_rows(idsi_dense_echelon *e, uint32_t *target, size_t target_stride,
                             size_t m, const uint32_t *source, size_t source_stride,
                             const uint32_t *pivot, size_t k, size_t width)
{
    ids_status st = IDS_OK;

    if (m == 0 || k == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_dense_prepare_products(e));
    for (size_t i = 0; i < m; i++) {
        for (size_t j = 0; j < k; j++) {
            e->factor[i * k + j] = target[i * target_stride + pivot[j]];
        }
    }
    idsi_dense_mul_sub(&e->work, e->p, m, width, k, e->factor, k, source, source_stride, target,
                       target_stride);
done:
    return st;
}

/* Clears m <= PANEL rows at the pivots of a panel. */
static ids_status clear_by_panel(idsi_dense_echelon *e, const panel *by, uint32_t *target,
                                 size_t stride, size_t m)
{
    ids_status st = IDS_OK;

    if (by->packed == NULL) {
        return clear_rows(e, target, stride, m, by->rows, by->width, by->pivot, by->used,
                          by->width);
    }
    IDSI_TRY(idsi_dense_prepare_products(e));
    for (size_t i = 0; i < m; i++) {
        for (size_t j = 0; j < PANEL; j++) {
            e->factor[i * PANEL + j] = target[i * stride + by->pivot[j]];
        }
    }
    idsi_dense_mul_sub_packed(&e->work, e->p, m, by->width, PANEL, e->factor, PANEL, by->packed,
                              target, stride);
done:
    return st;
}

/* Takes out of each row the entries at the pivots of a full panel. */
static void drop_columns(const panel *full, uint32_t *rows, size_t stride, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        uint32_t *row = rows + i * stride;
        size_t to = full->dropped[0];
        for (size_t k = 0; k < PANEL; k++) {
            size_t from = full->dropped[k] + 1u;
            size_t end = k + 1 < PANEL ? full->dropped[k + 1] : full->width;
            if (end > from) {
                memmove(row + to, row + from, (end - from) * sizeof *row);
                to += end - from;
            }
        }
    }
}

/* ---- a block by itself ----------------------------------------------------------------------- */

/* Place of the last nonzero entry; false for a zero row. */
static bool last_nonzero(const uint32_t *row, size_t width, size_t *last)
{
    for (size_t j = width; j-- > 0;) {
        if (row[j] != 0) {
            *last = j;
            return true;
        }
    }
    return false;
}

/* The rows from .. from+count-1 row by row; those that are left stand first. */
static size_t reduce_slice(const idsi_dense_echelon *e, block *b, size_t from, size_t count)
{
    uint32_t *rows = b->rows + from * b->stride;
    uint32_t *pivot = b->pivot + from;
    size_t kept = 0;

    for (size_t i = 0; i < count; i++) {
        uint32_t *row = rows + i * b->stride;
        size_t last = 0;
        for (size_t k = 0; k < kept; k++) {
            if (row[pivot[k]] != 0) {
                e->kernel->combine(e->p, row, 1, rows + k * b->stride, e->p - row[pivot[k]],
                                   pivot[k] + (size_t)1);
            }
        }
        b->independent[from + i] = last_nonzero(row, b->width, &last);
        if (!b->independent[from + i]) {
            continue;
        }
        e->kernel->combine(e->p, row, idsi_mod_inverse(row[last], e->p), row, 0, last + 1);
        for (size_t k = 0; k < kept; k++) {
            uint32_t *other = rows + k * b->stride;
            if (other[last] != 0) {
                e->kernel->combine(e->p, other, 1, row, e->p - other[last], last + 1);
            }
        }
        if (kept < i) {
            memcpy(rows + kept * b->stride, row, b->width * sizeof *row);
        }
        pivot[kept] = (uint32_t)last;
        kept++;
    }
    return kept;
}

/* Brings rows to reduced echelon form by themselves; the *kept rows that are left stand first. */
static ids_status reduce_rows(idsi_dense_echelon *e, block *b, size_t from, size_t count,
                              size_t *kept)
{
    ids_status st = IDS_OK;
    size_t half = (count / 2 + SLICE - 1) / SLICE * SLICE;
    uint32_t *first = b->rows + from * b->stride;
    uint32_t *second = first + half * b->stride;
    size_t kept_first = 0;
    size_t kept_second = 0;

    if (count <= SLICE) {
        *kept = reduce_slice(e, b, from, count);
        return IDS_OK;
    }
    IDSI_TRY(reduce_rows(e, b, from, half, &kept_first));
    IDSI_TRY(clear_rows(e, second, b->stride, count - half, first, b->stride, b->pivot + from,
                        kept_first, b->width));
    IDSI_TRY(reduce_rows(e, b, from + half, count - half, &kept_second));
    IDSI_TRY(clear_rows(e, first, b->stride, kept_first, second, b->stride, b->pivot + from + half,
                        kept_second, b->width));
    if (kept_first < half) {
        for (size_t i = 0; i < kept_second; i++) {
            memcpy(first + (kept_first + i) * b->stride, second + i * b->stride,
                   b->width * sizeof *second);
        }
        memmove(b->pivot + from + kept_first, b->pivot + from + half,
                kept_second * sizeof *b->pivot);
    }
    *kept = kept_first + kept_second;
done:
    return st;
}

/* ---- panels ---------------------------------------------------------------------------------- */

static int compare_places(const void *a, const void *b)
{
    uint32_t x = *(const uint32_t *)a;
    uint32_t y = *(const uint32_t *)b;
    return x < y ? -1 : x > y;
}

/* A panel with the columns that are pivots of no panel so far. */
static ids_status add_panel(idsi_dense_echelon *e)
{
    ids_status st = IDS_OK;
    panel *made = NULL;
    void *rows = NULL;
    const panel *before = e->count > 0 ? e->panels[e->count - 1] : NULL;

    IDSI_TRY(idsi_grow(e->ctx, e->count, &e->capacity, sizeof *e->panels, &e->panels));
    IDSI_TRY(idsi_alloc_array(e->ctx, 1, sizeof *made, &made));
    made->width = before == NULL ? e->columns : before->width - PANEL;
    size_t all = before == NULL ? e->columns : before->width;
    IDSI_TRY(idsi_alloc_array(e->ctx, all, sizeof *made->column, &made->column));
    for (size_t j = 0; j < all; j++) {
        made->column[j] = before == NULL ? (uint32_t)j : before->column[j];
    }
    if (before != NULL) {
        drop_columns(before, made->column, 0, 1);
    }
    IDSI_TRY(idsi_alloc(e->ctx, (PANEL * made->width + 1) * sizeof *made->rows, &rows));
    made->rows = rows;
    e->panels[e->count] = made;
    e->count++;
    made = NULL;
done:
    free_panel(e->ctx, made);
    return st;
}

static ids_status pack_panel(idsi_dense_echelon *e, panel *full)
{
    ids_status st = IDS_OK;
    size_t columns =
        (full->width + e->kernel->columns - 1) / e->kernel->columns * e->kernel->columns;
    void *room = NULL;

    IDSI_TRY(idsi_alloc(e->ctx, (PANEL * columns + 16u) * sizeof *full->packed, &room));
    full->packed_room = room;
    full->packed = idsi_kernel_align(room);
    e->kernel->pack(e->p, PANEL, full->width, full->rows, full->width, e->kernel->columns,
                    full->packed);
    idsi_free(e->ctx, full->rows);
    full->rows = NULL;
done:
    return st;
}

/* A panel has become full: the rest of the block, from row `from` on, loses its pivots. */
static ids_status close_panel(idsi_dense_echelon *e, panel *full, block *b, size_t from,
                              size_t count)
{
    memcpy(full->dropped, full->pivot, sizeof full->dropped);
    qsort(full->dropped, PANEL, sizeof *full->dropped, compare_places);
    drop_columns(full, b->rows + from * b->stride, b->stride, count);
    for (size_t i = from; i < from + count; i++) {
        uint32_t below = 0;
        for (size_t k = 0; k < PANEL; k++) {
            below += full->dropped[k] < b->pivot[i];
        }
        b->pivot[i] -= below;
    }
    b->width -= PANEL;
    return pack_panel(e, full);
}

/* Stores rows in reduced echelon form that are zero at all pivots; clears theirs in the panel. */
static ids_status store_rows(idsi_dense_echelon *e, block *b, size_t count)
{
    ids_status st = IDS_OK;
    size_t from = 0;

    while (from < count) {
        if (e->count == 0 || e->panels[e->count - 1]->used == PANEL) {
            IDSI_TRY(add_panel(e));
        }
        panel *last = e->panels[e->count - 1];
        size_t room = PANEL - last->used;
        size_t now = count - from < room ? count - from : room;
        const uint32_t *rows = b->rows + from * b->stride;
        IDSI_TRY(clear_rows(e, last->rows, last->width, last->used, rows, b->stride,
                            b->pivot + from, now, last->width));
        for (size_t i = 0; i < now; i++) {
            memcpy(last->rows + (last->used + i) * last->width, rows + i * b->stride,
                   last->width * sizeof *rows);
        }
        memcpy(last->pivot + last->used, b->pivot + from, now * sizeof *b->pivot);
        last->used += now;
        from += now;
        if (last->used == PANEL) {
            IDSI_TRY(close_panel(e, last, b, from, count - from));
        }
    }
done:
    return st;
}

ids_status idsi_dense_echelon_add(idsi_dense_echelon *echelon, uint32_t *rows, size_t count,
                                  bool *independent)
{
    ids_status st = IDS_OK;
    idsi_dense_echelon *e = echelon;
    block b = {.stride = e->columns};

    for (size_t from = 0; from < count; from += PANEL) {
        size_t now = count - from < PANEL ? count - from : PANEL;
        size_t kept = 0;
        b.rows = rows + from * e->columns;
        b.width = e->columns;
        for (size_t k = 0; k < e->count; k++) {
            const panel *by = e->panels[k];
            IDSI_TRY(clear_by_panel(e, by, b.rows, b.stride, now));
            if (by->used == PANEL) {
                drop_columns(by, b.rows, b.stride, now);
                b.width -= PANEL;
            }
            IDSI_TRY(idsi_poll(e->ctx, NULL));
        }
        IDSI_TRY(reduce_rows(e, &b, 0, now, &kept));
        if (independent != NULL) {
            memcpy(independent + from, b.independent, now * sizeof *independent);
        }
        IDSI_TRY(store_rows(e, &b, kept));
    }
done:
    return st;
}
