/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Skew shapes and their standard tableaux.
 *
 * A standard tableau of outer/inner is a path from inner to outer that adds a cell a step. It is
 * kept as the sequence of rows of these cells. The paths are numbered in lexicographic order, so
 * all paths that begin alike stand together: cutting a path after `at` steps at a shape `middle`
 * gives a path S of middle/inner and a path T of outer/middle, and the number of the whole path is
 * start[S] + T. Restricting a representation to S_at x S_(n-at) is then a matter of addresses.
 *
 * Shapes are moved up and left before they are compared, because only differences of contents
 * enter the representation; rows and columns without cells in the middle keep their place.
 */
#include <string.h>

#include "skew_private.h"

void idsi_skews_init(idsi_skews *skews, ids_ctx *ctx)
{
    memset(skews, 0, sizeof *skews);
    skews->ctx = ctx;
}

static void free_skew(ids_ctx *ctx, idsi_skew *skew)
{
    if (skew == NULL) {
        return;
    }
    for (uint32_t at = 0; at <= IDSI_SHAPE_MAX; at++) {
        for (size_t k = 0; k < skew->cut_count[at]; k++) {
            idsi_free(ctx, skew->cut[at][k].start);
        }
        idsi_free(ctx, skew->cut[at]);
    }
    idsi_free(ctx, skew->row);
    idsi_free(ctx, skew->swap);
    idsi_free(ctx, skew->distance);
    idsi_free(ctx, skew);
}

void idsi_skews_clear(idsi_skews *skews)
{
    for (size_t i = 0; i < skews->count; i++) {
        free_skew(skews->ctx, skews->list[i]);
    }
    idsi_free(skews->ctx, skews->list);
    idsi_free(skews->ctx, skews->slot);
    memset(skews, 0, sizeof *skews);
}

/* Moves a shape up and left; unused places are zero, so that shapes compare byte by byte. */
static void normalize(const uint8_t *outer, const uint8_t *inner, uint32_t rows, idsi_shape *shape)
{
    uint32_t first = 0;
    uint8_t left = UINT8_MAX;

    memset(shape, 0, sizeof *shape);
    while (first < rows && outer[first] == inner[first]) {
        first++;
    }
    while (rows > first && outer[rows - 1] == inner[rows - 1]) {
        rows--;
    }
    for (uint32_t i = first; i < rows; i++) {
        left = inner[i] < left ? inner[i] : left;
    }
    for (uint32_t i = first; i < rows; i++) {
        shape->outer[i - first] = (uint8_t)(outer[i] - left);
        shape->inner[i - first] = (uint8_t)(inner[i] - left);
        shape->cells = (uint8_t)(shape->cells + outer[i] - inner[i]);
    }
    shape->rows = (uint8_t)(rows - first);
}

static size_t hash_shape(const idsi_shape *shape)
{
    const uint8_t *bytes = (const uint8_t *)shape;
    uint64_t hash = UINT64_C(0xcbf29ce484222325); /* FNV-1a */
    for (size_t i = 0; i < sizeof *shape; i++) {
        hash = (hash ^ bytes[i]) * UINT64_C(0x100000001b3);
    }
    return (size_t)hash;
}

/* Slot of a shape, or the free slot where it would go. */
static size_t find_slot(const idsi_skews *skews, const idsi_shape *shape)
{
    size_t at = hash_shape(shape) & (skews->slot_count - 1);
    while (skews->slot[at] != 0 &&
           memcmp(&skews->list[skews->slot[at] - 1]->shape, shape, sizeof *shape) != 0) {
        at = (at + 1) & (skews->slot_count - 1);
    }
    return at;
}

static ids_status grow_slots(idsi_skews *skews)
{
    ids_status st = IDS_OK;
    size_t count = skews->slot_count == 0 ? 64 : 2 * skews->slot_count;
    uint32_t *slot = NULL;

    IDSI_TRY(idsi_alloc_array(skews->ctx, count, sizeof *slot, &slot));
    idsi_free(skews->ctx, skews->slot);
    skews->slot = slot;
    skews->slot_count = count;
    for (size_t i = 0; i < skews->count; i++) {
        skews->slot[find_slot(skews, &skews->list[i]->shape)] = (uint32_t)i + 1;
    }
done:
    return st;
}

/* Whether row r can take a cell when the rows are filled up to `filled`. */
static bool can_add(const idsi_shape *shape, const uint8_t *filled, uint32_t r)
{
    return filled[r] < shape->outer[r] && (r == 0 || filled[r - 1] > filled[r]);
}

/* Visits all paths in order; with row == NULL it only counts them. */
static void walk_paths(const idsi_shape *shape, uint8_t *filled, uint8_t *path, uint32_t step,
                       uint8_t *row, uint32_t *count)
{
    if (step == shape->cells) {
        if (row != NULL) {
            memcpy(row + (size_t)*count * shape->cells, path, shape->cells);
        }
        (*count)++;
        return;
    }
    for (uint32_t r = 0; r < shape->rows; r++) {
        if (can_add(shape, filled, r)) {
            filled[r]++;
            path[step] = (uint8_t)r;
            walk_paths(shape, filled, path, step + 1, row, count);
            filled[r]--;
        }
    }
}

/* Number of a path among all (they are sorted); UINT32_MAX when it is not one of them. */
static uint32_t find_path(const idsi_skew *skew, const uint8_t *path)
{
    uint32_t low = 0;
    uint32_t high = skew->count;
    while (low < high) {
        uint32_t middle = low + (high - low) / 2;
        int order = memcmp(skew->row + (size_t)middle * skew->shape.cells, path, skew->shape.cells);
        if (order == 0) {
            return middle;
        }
        if (order < 0) {
            low = middle + 1;
        } else {
            high = middle;
        }
    }
    return UINT32_MAX;
}

static void fill_exchanges(idsi_skew *skew)
{
    uint32_t n = skew->shape.cells;
    uint8_t path[IDSI_SHAPE_MAX];

    for (uint32_t t = 0; t < skew->count; t++) {
        uint8_t filled[IDSI_SHAPE_MAX];
        int content[IDSI_SHAPE_MAX];
        const uint8_t *row = skew->row + (size_t)t * n;
        memcpy(filled, skew->shape.inner, sizeof filled);
        for (uint32_t i = 0; i < n; i++) {
            content[i] = (int)filled[row[i]] - (int)row[i];
            filled[row[i]]++;
        }
        memcpy(path, row, n);
        for (uint32_t i = 0; i + 1 < n; i++) {
            int distance = content[i + 1] - content[i];
            size_t at = (size_t)i * skew->count + t;
            skew->distance[at] = (int8_t)distance;
            skew->swap[at] = t;
            if (distance != 1 && distance != -1) {
                path[i] = row[i + 1];
                path[i + 1] = row[i];
                skew->swap[at] = find_path(skew, path);
                path[i] = row[i];
                path[i + 1] = row[i + 1];
            }
        }
    }
}

static ids_status make_skew(ids_ctx *ctx, const idsi_shape *shape, idsi_skew **skew)
{
    ids_status st = IDS_OK;
    idsi_skew *made = NULL;
    uint8_t filled[IDSI_SHAPE_MAX];
    uint8_t path[IDSI_SHAPE_MAX];
    uint32_t count = 0;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->shape = *shape;
    memcpy(filled, shape->inner, sizeof filled);
    walk_paths(shape, filled, path, 0, NULL, &count);
    made->count = count;
    size_t steps = shape->cells > 0 ? shape->cells - 1u : 0;
    IDSI_TRY(idsi_alloc_array(ctx, (size_t)count * shape->cells, 1, &made->row));
    IDSI_TRY(idsi_alloc_array(ctx, steps * count, sizeof *made->swap, &made->swap));
    IDSI_TRY(idsi_alloc_array(ctx, steps * count, sizeof *made->distance, &made->distance));
    count = 0;
    walk_paths(shape, filled, path, 0, made->row, &count);
    fill_exchanges(made);
    *skew = made;
    made = NULL;
done:
    free_skew(ctx, made);
    return st;
}

ids_status idsi_skews_get(idsi_skews *skews, const uint8_t *outer, const uint8_t *inner,
                          uint32_t rows, uint32_t *number)
{
    ids_status st = IDS_OK;
    idsi_shape shape;
    idsi_skew *made = NULL;

    normalize(outer, inner, rows, &shape);
    if (2 * (skews->count + 1) > skews->slot_count) {
        IDSI_TRY(grow_slots(skews));
    }
    size_t at = find_slot(skews, &shape);
    if (skews->slot[at] == 0) {
        IDSI_TRY(idsi_grow(skews->ctx, skews->count, &skews->capacity, sizeof *skews->list,
                           &skews->list));
        IDSI_TRY(make_skew(skews->ctx, &shape, &made));
        skews->list[skews->count] = made;
        skews->count++;
        skews->slot[at] = (uint32_t)skews->count;
    }
    *number = skews->slot[at] - 1;
done:
    return st;
}

/* The rows after the first `at` steps of tableau t. */
static void shape_after(const idsi_skew *skew, uint32_t t, uint32_t at, uint8_t *middle)
{
    const uint8_t *row = skew->row + (size_t)t * skew->shape.cells;
    memcpy(middle, skew->shape.inner, IDSI_SHAPE_MAX);
    for (uint32_t i = 0; i < at; i++) {
        middle[row[i]]++;
    }
}

/* The cut with the given middle, adding it. */
static ids_status get_cut(idsi_skews *skews, uint32_t number, uint32_t at, const uint8_t *middle,
                          size_t *capacity, idsi_cut **cut)
{
    ids_status st = IDS_OK;
    idsi_skew *skew = skews->list[number];
    const idsi_shape shape = skew->shape;
    uint32_t low = 0;
    uint32_t high = 0;

    IDSI_TRY(idsi_skews_get(skews, middle, shape.inner, shape.rows, &low));
    IDSI_TRY(idsi_skews_get(skews, shape.outer, middle, shape.rows, &high));
    IDSI_TRY(idsi_grow(skews->ctx, skew->cut_count[at], capacity, sizeof *skew->cut[at],
                       &skew->cut[at]));
    idsi_cut *made = &skew->cut[at][skew->cut_count[at]];
    *made = (idsi_cut){.low = low,
                       .high = high,
                       .low_count = skews->list[low]->count,
                       .high_count = skews->list[high]->count};
    IDSI_TRY(idsi_alloc_array(skews->ctx, made->low_count, sizeof *made->start, &made->start));
    skew->cut_count[at]++;
    *cut = made;
done:
    return st;
}

ids_status idsi_skews_cut(idsi_skews *skews, uint32_t number, uint32_t at)
{
    ids_status st = IDS_OK;
    idsi_skew *skew = skews->list[number];
    uint8_t(*middles)[IDSI_SHAPE_MAX] = NULL; /* of the cuts there are */
    uint32_t *used = NULL;                    /* beginnings met of each */
    size_t middle_capacity = 0;
    size_t used_capacity = 0;
    size_t capacity = 0;
    size_t cuts = 0;
    uint32_t t = 0;

    if (skew->cut_count[at] > 0) {
        return IDS_OK;
    }
    while (t < skew->count) {
        uint8_t middle[IDSI_SHAPE_MAX];
        idsi_cut *cut = NULL;
        size_t k = 0;
        shape_after(skew, t, at, middle);
        while (k < cuts && memcmp(middles[k], middle, sizeof middle) != 0) {
            k++;
        }
        if (k == cuts) {
            IDSI_TRY(idsi_grow(skews->ctx, k, &middle_capacity, sizeof *middles, &middles));
            IDSI_TRY(idsi_grow(skews->ctx, k, &used_capacity, sizeof *used, &used));
            IDSI_TRY(get_cut(skews, number, at, middle, &capacity, &cut));
            memcpy(middles[k], middle, sizeof middle);
            used[k] = 0;
            cuts++;
        }
        cut = &skew->cut[at][k];
        cut->start[used[k]] = t;
        used[k]++;
        t += cut->high_count;
    }
done:
    idsi_free(skews->ctx, middles);
    idsi_free(skews->ctx, used);
    return st;
}
