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
 *
 * The entries at a pivot, or those of CHUNK rules at a dense column, make a list, ascending; the
 * number of the rule stands in place of the column. So the factors that the lists of a chunk need
 * stay in the second cache.
 */
#include <assert.h>
#include <string.h>

#include "kernels.h"
#include "rewrite_private.h"

static const uint64_t zeros[IDSI_LANES] = {0};

/* Rules of a chunk: their factors take 256 KiB. */
#define CHUNK 4096u

/* Lists, one after the other. */
typedef struct lists {
    size_t count;
    size_t *start; /* count + 1 */
    idsi_entry *entries;
} lists;

struct idsi_rewriter {
    ids_ctx *ctx;
    uint32_t prime;
    uint32_t rank;
    uint32_t chunk_count;
    const idsi_kernel *kernel;
    const idsi_fold *fold;
    uint32_t *number; /* of a column that is a pivot */
    uint32_t *pivot;  /* the inverse */
    lists at_pivots;
    lists *at_columns; /* dense columns, of each chunk */
};

struct idsi_lanes {
    ids_ctx *ctx;
    const idsi_rewriter *rewriter;
    void *room;
    uint64_t *sums;    /* in room, from a line of the cache on */
    uint32_t *factors; /* likewise */
};

/* ---- the rules by columns -------------------------------------------------------------------- */

uint64_t idsi_rewriter_bytes(uint64_t columns, uint64_t rank, uint64_t fill)
{
    uint64_t width = columns - rank;
    return columns * sizeof(uint32_t) + rank * (sizeof(uint32_t) + sizeof(size_t)) +
           (rank / CHUNK + 1) * width * sizeof(size_t) + fill * sizeof(idsi_entry);
}

static void free_lists(ids_ctx *ctx, lists *old)
{
    idsi_free(ctx, old->start);
    idsi_free(ctx, old->entries);
}

void idsi_rewriter_free(idsi_rewriter *rewriter)
{
    if (rewriter == NULL) {
        return;
    }
    ids_ctx *ctx = rewriter->ctx;
    free_lists(ctx, &rewriter->at_pivots);
    for (uint32_t k = 0; rewriter->at_columns != NULL && k < rewriter->chunk_count; k++) {
        free_lists(ctx, &rewriter->at_columns[k]);
    }
    idsi_free(ctx, rewriter->at_columns);
    idsi_free(ctx, rewriter->number);
    idsi_free(ctx, rewriter->pivot);
    idsi_free(ctx, rewriter);
}

typedef struct arranging {
    const idsi_rewriter *rewriter;
    const idsi_echelon *echelon;
    lists *at_pivots;
    ids_status *status; /* of each task: the chunks, then the pivots */
} arranging;

static bool list_of(const idsi_rewriter *r, uint32_t column, bool at_pivots, size_t *list)
{
    uint32_t place = r->fold->place[column];
    *list = at_pivots ? r->number[column] : place;
    return at_pivots == (place == UINT32_MAX);
}

/* Puts the rules first .. end-1 into lists: at pivots, or at dense columns. */
static ids_status arrange(const arranging *a, uint32_t first, uint32_t end, bool at_pivots,
                          lists *out)
{
    ids_status st = IDS_OK;
    const idsi_rewriter *r = a->rewriter;
    const idsi_entry *rule = NULL;
    uint32_t count = 0;
    size_t list = 0;

    out->count = at_pivots ? r->rank : r->fold->width;
    IDSI_TRY(idsi_alloc_array(r->ctx, out->count + 2, sizeof *out->start, &out->start));
    for (uint32_t k = first; k < end; k++) {
        (void)idsi_echelon_rule(a->echelon, r->pivot[k], &rule, &count);
        for (uint32_t i = 0; i < count; i++) {
            if (list_of(r, rule[i].column, at_pivots, &list)) {
                out->start[list + 2]++;
            }
        }
    }
    for (size_t t = 2; t < out->count + 2; t++) {
        out->start[t] += out->start[t - 1];
    }
    IDSI_TRY(
        idsi_alloc_array(r->ctx, out->start[out->count + 1], sizeof *out->entries, &out->entries));
    /* start[list + 1] moves from the begin to the end of the list. */
    for (uint32_t k = first; k < end; k++) {
        (void)idsi_echelon_rule(a->echelon, r->pivot[k], &rule, &count);
        for (uint32_t i = 0; i < count; i++) {
            if (list_of(r, rule[i].column, at_pivots, &list)) {
                out->entries[out->start[list + 1]++] = (idsi_entry){k, rule[i].value};
            }
        }
    }
done:
    return st;
}

static void arrange_task(void *user, uint32_t member, size_t task)
{
    arranging *a = user;
    const idsi_rewriter *r = a->rewriter;
    uint32_t first = (uint32_t)task * CHUNK;
    uint32_t end = task + 1 < r->chunk_count ? first + CHUNK : r->rank;

    (void)member;
    if (task == r->chunk_count) {
        a->status[task] = arrange(a, 0, r->rank, true, a->at_pivots);
        return;
    }
    a->status[task] = arrange(a, first, end, false, &r->at_columns[task]);
}

static ids_status arrange_all(idsi_rewriter *r, const idsi_echelon *echelon, idsi_team *team)
{
    ids_status st = IDS_OK;
    arranging a = {.rewriter = r, .echelon = echelon, .at_pivots = &r->at_pivots};
    size_t tasks = (size_t)r->chunk_count + 1;

    IDSI_TRY(idsi_alloc_array(r->ctx, tasks, sizeof *a.status, &a.status));
    idsi_team_run(team, tasks, arrange_task, &a);
    for (size_t k = 0; k < tasks; k++) {
        IDSI_TRY(a.status[k]);
    }
done:
    idsi_free(r->ctx, a.status);
    return st;
}

ids_status idsi_rewriter_create(ids_ctx *ctx, const idsi_echelon *echelon, uint32_t prime,
                                uint32_t columns, const idsi_fold *fold, idsi_team *team,
                                idsi_rewriter **rewriter)
{
    ids_status st = IDS_OK;
    idsi_rewriter *made = NULL;
    uint32_t number = 0;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->prime = prime;
    made->rank = idsi_echelon_rank(echelon);
    made->chunk_count = (made->rank + CHUNK - 1) / CHUNK;
    made->kernel = idsi_kernel_choose();
    made->fold = fold;
    IDSI_TRY(idsi_alloc_array(ctx, columns, sizeof *made->number, &made->number));
    IDSI_TRY(idsi_alloc_array(ctx, made->rank, sizeof *made->pivot, &made->pivot));
    IDSI_TRY(idsi_alloc_array(ctx, made->chunk_count, sizeof *made->at_columns, &made->at_columns));
    for (uint32_t c = columns; c-- > 0;) {
        if (idsi_echelon_is_pivot(echelon, c)) {
            made->number[c] = number;
            made->pivot[number] = c;
            number++;
        }
    }
    IDSI_TRY(arrange_all(made, echelon, team));
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
    IDSI_TRY(
        idsi_alloc_array(ctx, size + 8, sizeof *made->sums + sizeof *made->factors, &made->room));
    made->sums = idsi_kernel_align(made->room);
    made->factors = (uint32_t *)(made->sums + size);
    *lanes = made;
    made = NULL;
done:
    idsi_lanes_free(made);
    return st;
}

void idsi_lanes_free(idsi_lanes *lanes)
{
    if (lanes != NULL) {
        idsi_free(lanes->ctx, lanes->room);
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
    const lists *at = &r->at_pivots;

    for (size_t i = 0; i < r->rank; i++) {
        uint64_t *sums = lanes->sums + i * IDSI_LANES;
        (void)r->kernel->gather(r->prime, at->entries + at->start[i],
                                at->start[i + 1] - at->start[i], lanes->factors, sums,
                                lanes->factors + i * IDSI_LANES);
        memset(sums, 0, IDSI_LANES * sizeof *sums);
    }
}

uint32_t idsi_rewriter_chunks(const idsi_rewriter *rewriter)
{
    return rewriter->chunk_count;
}

void idsi_lanes_apply(const idsi_lanes *lanes, uint32_t chunk, uint32_t count, size_t from,
                      size_t to, uint32_t *rest, size_t stride)
{
    const idsi_rewriter *r = lanes->rewriter;
    const lists *at = &r->at_columns[chunk];
    uint32_t tile[IDSI_LANES][IDSI_LANES]; /* so that rows are written a line of the cache a time */

    while (from < to) {
        size_t width = to - from < IDSI_LANES ? to - from : IDSI_LANES;
        bool any = false;
        for (size_t j = 0; j < width; j++) {
            const size_t *start = at->start + from + j;
            any |= r->kernel->gather(r->prime, at->entries + start[0], start[1] - start[0],
                                     lanes->factors, zeros, tile[j]);
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
