/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Rows rewritten side by side.
 *
 * Pivots are numbered from the largest down, 0 .. R-1. How often rule i is to be applied, its
 * factor f[i], is what the row has at its pivot, together with what the rules before it put there.
 * So with the rules' entries arranged by columns,
 *
 *     f[i] = row[pivot i] + sum of f[k] * entry of rule k at pivot i     (k < i)
 *     rest[c] = row[c]    + sum of f[k] * entry of rule k at column c    (c no pivot)
 *
 * and each is a sum that stays in registers, for all lanes at once:
 *
 *     sums[i * LANES + slot]    what rows have at pivot i, < 4 p^2
 *     factors[i * LANES + lane]
 *     start[t] .. start[t+1]    entries at pivot t, for t < R, or at dense column t - R; ascending
 *                               rules, whose number stands in place of the column
 */
#include <assert.h>
#include <string.h>

#include "kernels.h"
#include "rewrite_private.h"

static const uint64_t zeros[IDSI_LANES] = {0};

struct idsi_rewriter {
    ids_ctx *ctx;
    uint32_t prime;
    uint32_t rank;
    const idsi_kernel *kernel;
    const idsi_fold *fold;
    uint32_t *number; /* of a column that is a pivot */
    size_t *start;    /* rank + width + 1 */
    idsi_entry *entries;
};

struct idsi_lanes {
    ids_ctx *ctx;
    const idsi_rewriter *rewriter;
    uint64_t *sums;
    uint32_t *factors;
};

/* ---- the rules by columns -------------------------------------------------------------------- */

uint64_t idsi_rewriter_bytes(uint64_t columns, uint64_t rank, uint64_t fill)
{
    return columns * (sizeof(uint32_t) + sizeof(size_t)) + fill * sizeof(idsi_entry) +
           rank * sizeof(size_t);
}

void idsi_rewriter_free(idsi_rewriter *rewriter)
{
    if (rewriter != NULL) {
        idsi_free(rewriter->ctx, rewriter->number);
        idsi_free(rewriter->ctx, rewriter->start);
        idsi_free(rewriter->ctx, rewriter->entries);
        idsi_free(rewriter->ctx, rewriter);
    }
}

/* Where the entries at a column stand. */
static size_t list_of(const idsi_rewriter *r, uint32_t column)
{
    uint32_t place = r->fold->place[column];
    return place == UINT32_MAX ? r->number[column] : (size_t)r->rank + place;
}

/* Counts the entries of every list into start[list + 1]; a pivot's rule has its number then. */
static void count_entries(idsi_rewriter *r, const idsi_echelon *echelon, uint32_t columns)
{
    const idsi_entry *rule = NULL;
    uint32_t count = 0;
    uint32_t number = 0;

    for (uint32_t c = columns; c-- > 0;) {
        if (!idsi_echelon_rule(echelon, c, &rule, &count)) {
            continue;
        }
        r->number[c] = number++;
    }
    for (uint32_t c = columns; c-- > 0;) {
        if (!idsi_echelon_rule(echelon, c, &rule, &count)) {
            continue;
        }
        for (uint32_t i = 0; i < count; i++) {
            r->start[list_of(r, rule[i].column) + 1]++;
        }
    }
}

/* Puts the entries into the lists; start[list] moves to the end of the list. */
static void fill_lists(idsi_rewriter *r, const idsi_echelon *echelon, uint32_t columns)
{
    const idsi_entry *rule = NULL;
    uint32_t count = 0;
    uint32_t number = 0;

    for (uint32_t c = columns; c-- > 0;) {
        if (!idsi_echelon_rule(echelon, c, &rule, &count)) {
            continue;
        }
        for (uint32_t i = 0; i < count; i++) {
            size_t list = list_of(r, rule[i].column);
            r->entries[r->start[list]++] = (idsi_entry){number, rule[i].value};
        }
        number++;
    }
}

ids_status idsi_rewriter_create(ids_ctx *ctx, const idsi_echelon *echelon, uint32_t prime,
                                uint32_t columns, const idsi_fold *fold, idsi_rewriter **rewriter)
{
    ids_status st = IDS_OK;
    idsi_rewriter *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->prime = prime;
    made->rank = idsi_echelon_rank(echelon);
    made->kernel = idsi_kernel_choose();
    made->fold = fold;
    size_t lists = made->rank + fold->width;
    IDSI_TRY(idsi_alloc_array(ctx, columns, sizeof *made->number, &made->number));
    IDSI_TRY(idsi_alloc_array(ctx, lists + 2, sizeof *made->start, &made->start));
    IDSI_TRY(
        idsi_alloc_array(ctx, idsi_echelon_fill(echelon), sizeof *made->entries, &made->entries));
    count_entries(made, echelon, columns);
    for (size_t t = 0; t < lists; t++) {
        made->start[t + 1] += made->start[t];
    }
    fill_lists(made, echelon, columns);
    memmove(made->start + 1, made->start, lists * sizeof *made->start);
    made->start[0] = 0;
    *rewriter = made;
    made = NULL;
done:
    idsi_rewriter_free(made);
    return st;
}

/* ---- lanes ----------------------------------------------------------------------------------- */

uint32_t idsi_lanes_count(void)
{
    return IDSI_LANES;
}

uint64_t idsi_lanes_bytes(uint64_t rank)
{
    return rank * IDSI_LANES * (sizeof(uint64_t) + sizeof(uint32_t));
}

ids_status idsi_lanes_create(ids_ctx *ctx, const idsi_rewriter *rewriter, idsi_lanes **lanes)
{
    ids_status st = IDS_OK;
    idsi_lanes *made = NULL;
    size_t size = (size_t)rewriter->rank * IDSI_LANES;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->rewriter = rewriter;
    IDSI_TRY(idsi_alloc_array(ctx, size, sizeof *made->sums, &made->sums));
    IDSI_TRY(idsi_alloc_array(ctx, size, sizeof *made->factors, &made->factors));
    *lanes = made;
    made = NULL;
done:
    idsi_lanes_free(made);
    return st;
}

void idsi_lanes_free(idsi_lanes *lanes)
{
    if (lanes != NULL) {
        idsi_free(lanes->ctx, lanes->sums);
        idsi_free(lanes->ctx, lanes->factors);
        idsi_free(lanes->ctx, lanes);
    }
}

/* The combinations of all columns: the rules have their part in the factors of their pivots. */
static void load_mixed(const idsi_rewriter *r, const idsi_entry *row, size_t count, uint32_t factor,
                       uint32_t *rest)
{
    uint32_t residues[IDSI_LANES];

    static_assert(IDSI_FOLD_MIXED == IDSI_LANES, "the kernel adds up so many at a time");
    (void)r->kernel->gather(r->prime, row, count, r->fold->mix, zeros, residues);
    r->kernel->combine(r->prime, rest, 1, residues, factor, IDSI_FOLD_MIXED);
}

void idsi_lanes_load(idsi_lanes *lanes, uint32_t lane, const idsi_entry *row, size_t count,
                     uint32_t factor, uint32_t *rest)
{
    const idsi_rewriter *r = lanes->rewriter;
    uint32_t p = r->prime;
    uint64_t back = 4 * (uint64_t)p * p;
    uint64_t fraction = ((uint64_t)factor << 32) / p; /* V. Shoup's way, as in rows.c */
    size_t slot = idsi_kernel_slot(lane);

    for (size_t i = 0; i < count; i++) {
        uint32_t column = row[i].column;
        uint32_t place = r->fold->place[column];
        uint32_t quotient = (uint32_t)((fraction * row[i].value) >> 32);
        uint32_t value = factor * row[i].value - quotient * p;
        value = value >= p ? value - p : value;
        if (place != UINT32_MAX) {
            uint32_t sum = rest[place] + value;
            rest[place] = sum >= p ? sum - p : sum;
        } else {
            uint64_t *sum = &lanes->sums[(size_t)r->number[column] * IDSI_LANES + slot];
            *sum = *sum + value >= back ? *sum + value - back : *sum + value;
        }
    }
    if (r->fold->mixed > 0) {
        load_mixed(r, row, count, factor, rest);
    }
}

void idsi_lanes_solve(idsi_lanes *lanes)
{
    const idsi_rewriter *r = lanes->rewriter;

    for (size_t i = 0; i < r->rank; i++) {
        uint64_t *sums = lanes->sums + i * IDSI_LANES;
        (void)r->kernel->gather(r->prime, r->entries + r->start[i], r->start[i + 1] - r->start[i],
                                lanes->factors, sums, lanes->factors + i * IDSI_LANES);
        memset(sums, 0, IDSI_LANES * sizeof *sums);
    }
}

void idsi_lanes_apply(const idsi_lanes *lanes, uint32_t count, size_t from, size_t to,
                      uint32_t *rest, size_t stride)
{
    const idsi_rewriter *r = lanes->rewriter;
    uint32_t tile[IDSI_LANES][IDSI_LANES]; /* so that rows are written a line of the cache a time */

    while (from < to) {
        size_t width = to - from < IDSI_LANES ? to - from : IDSI_LANES;
        bool any = false;
        for (size_t j = 0; j < width; j++) {
            size_t list = r->rank + from + j;
            any |= r->kernel->gather(r->prime, r->entries + r->start[list],
                                     r->start[list + 1] - r->start[list], lanes->factors, zeros,
                                     tile[j]);
        }
        for (uint32_t lane = 0; any && lane < count; lane++) {
            uint32_t *row = rest + lane * stride + from;
            for (size_t j = 0; j < width; j++) {
                uint32_t sum = row[j] + tile[j][lane];
                row[j] = sum >= r->prime ? sum - r->prime : sum;
            }
        }
        from += width;
    }
}
