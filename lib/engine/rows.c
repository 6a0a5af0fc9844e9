/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The rows of a quotient step: all values f(m1, .., md) of the laws on normal forms m1, .., md
 * whose labels together are 1 .. n.
 *
 * A job is a law with a tuple of degrees for its variables, descending within a symmetry class.
 * The distributions of the labels (equal degrees of a class by least labels) and the tuples of
 * normal forms together number the rows of a job. Pieces are ranges of them: they can be made in
 * any order, in several threads.
 */
#include <stdatomic.h>
#include <string.h>

#include "rows_private.h"

/* Pieces have at least LEAST_PIECE rows, more if there would be more than PIECES pieces, but not
 * more than MOST_PIECE. */
#define LEAST_PIECE 64u
#define PIECES 1024u
#define MOST_PIECE 4096u

struct idsi_rows {
    ids_ctx *ctx;
    const idsi_tower *tower;
    const idsi_level *level;
    idsi_row_job *jobs;
    size_t job_count;
    size_t job_capacity;
    uint64_t total;
    uint64_t piece_rows;
    uint64_t pieces;
    _Atomic uint64_t done; /* rows made, over all passes */
};

/* Adds the job of a law with the degrees in split->size. */
static ids_status add_job(idsi_rows *rows, const idsi_law *law, const idsi_split *split)
{
    ids_status st = IDS_OK;
    idsi_row_job made = {.law = law, .split = *split, .tuples = 1};

    idsi_split_prepare(&made.split);
    bool fits = made.split.ways != 0;
    for (uint32_t v = 0; v < law->degree; v++) {
        fits = fits && idsi_mul_u64(made.tuples, rows->tower->level[split->size[v]].dimension,
                                    &made.tuples);
    }
    if (!fits || !idsi_mul_u64(made.tuples, made.split.ways, &made.rows) ||
        !idsi_add_u64(rows->total, made.rows, &rows->total)) {
        return idsi_fail(rows->ctx, IDS_ERR_LIMIT,
                         "degree %u has more consequences to go through than 64 bits can count",
                         rows->level->degree);
    }
    if (made.rows > 0) {
        IDSI_TRY(idsi_grow(rows->ctx, rows->job_count, &rows->job_capacity, sizeof *rows->jobs,
                           &rows->jobs));
        rows->jobs[rows->job_count] = made;
        rows->job_count++;
    }
done:
    return st;
}

/* Chooses the degrees of the variables from `place` on, descending within a class. */
static ids_status each_degrees(idsi_rows *rows, const idsi_law *law, idsi_split *split,
                               uint32_t place, uint32_t left)
{
    ids_status st = IDS_OK;
    uint32_t places = law->degree - place;
    int8_t before = -1; /* last variable of the same class */

    if (places == 0) {
        return add_job(rows, law, split);
    }
    for (uint32_t v = 0; v < place; v++) {
        if (law->class_of[v] == law->class_of[place]) {
            before = (int8_t)v;
        }
    }
    uint32_t most = left - (places - 1);
    uint32_t least = places == 1 ? left : 1;
    if (before >= 0 && split->size[before] < most) {
        most = split->size[before];
    }
    for (uint32_t degree = most; degree >= least && degree > 0; degree--) {
        bool tied = before >= 0 && split->size[before] == degree;
        split->size[place] = (uint8_t)degree;
        split->parent[place] = (int8_t)(tied ? before : -1);
        IDSI_TRY(each_degrees(rows, law, split, place + 1, left - degree));
    }
done:
    return st;
}

static void number_pieces(idsi_rows *rows)
{
    uint64_t size = rows->total / PIECES;

    size = size < LEAST_PIECE ? LEAST_PIECE : size > MOST_PIECE ? MOST_PIECE : size;
    rows->piece_rows = size;
    for (size_t i = 0; i < rows->job_count; i++) {
        idsi_row_job *j = &rows->jobs[i];
        j->first_piece = rows->pieces;
        rows->pieces += j->rows / size + (j->rows % size != 0);
    }
}

ids_status idsi_rows_create(const idsi_tower *tower, const idsi_level *level, idsi_rows **rows)
{
    ids_status st = IDS_OK;
    idsi_rows *made = NULL;
    const idsi_laws *laws = tower->laws;

    IDSI_TRY(idsi_alloc_array(tower->ctx, 1, sizeof *made, &made));
    made->ctx = tower->ctx;
    made->tower = tower;
    made->level = level;
    for (size_t i = 0; i < laws->count; i++) {
        const idsi_law *law = &laws->law[i];
        idsi_split split = {.count = law->degree};
        if (law->degree > 1 && law->degree <= level->degree) {
            IDSI_TRY(each_degrees(made, law, &split, 0, level->degree));
        }
    }
    number_pieces(made);
    *rows = made;
    made = NULL;
done:
    idsi_rows_free(made);
    return st;
}

void idsi_rows_free(idsi_rows *rows)
{
    if (rows != NULL) {
        idsi_free(rows->ctx, rows->jobs);
        idsi_free(rows->ctx, rows);
    }
}

size_t idsi_rows_pieces(const idsi_rows *rows)
{
    return (size_t)rows->pieces;
}

ids_status idsi_rows_piece(void *rows, size_t piece, idsi_row_fn row, void *user)
{
    ids_status st = IDS_OK;
    idsi_rows *all = rows;
    size_t low = 0;
    size_t high = all->job_count;

    while (high - low > 1) {
        size_t middle = low + (high - low) / 2;
        if (all->jobs[middle].first_piece <= piece) {
            low = middle;
        } else {
            high = middle;
        }
    }
    const idsi_row_job *j = &all->jobs[low];
    uint64_t first = (piece - j->first_piece) * all->piece_rows;
    uint64_t count = j->rows - first < all->piece_rows ? j->rows - first : all->piece_rows;
    uint64_t done = atomic_fetch_add(&all->done, count); /* in all passes */
    ids_progress progress = {.stage = "rows",
                             .degree = all->level->degree,
                             .done = done % all->total,
                             .total = all->total,
                             .share = idsi_tower_share(all->tower, done, all->total)};
    IDSI_TRY(idsi_poll(all->ctx, &progress));
    IDSI_TRY(idsi_rows_evaluate(all->tower, all->level, j, first, count, row, user));
done:
    return st;
}

ids_status idsi_rows_each(const idsi_tower *tower, const idsi_level *level, idsi_row_fn row,
                          void *user)
{
    ids_status st = IDS_OK;
    idsi_rows *rows = NULL;

    IDSI_TRY(idsi_rows_create(tower, level, &rows));
    for (size_t piece = 0; piece < rows->pieces; piece++) {
        IDSI_TRY(idsi_rows_piece(rows, piece, row, user));
    }
done:
    idsi_rows_free(rows);
    return st;
}
