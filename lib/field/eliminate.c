/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Elimination of matrices whose rows are streamed, in three stages.
 *
 * 1. Sparse. Every row is rewritten by the rules there are until its largest column is no pivot,
 *    and becomes a rule itself; but a row that would take more than a certain work is deferred.
 *    Most rows are taken as they come: their largest column was free.
 * 2. Dense. The deferred rows, made again, are rewritten completely and go, as dense rows of the
 *    columns that are no pivots yet, into a dense echelon form, a block at a time (finish.c).
 * 3. Check, if rows were combined at random in stage 2.
 */
#include <string.h>

#include "eliminate_private.h"

/* Work that a row may take in the first pass. */
#define FIRST_WORK 1024u
/* With few columns a row may take more, as long as all rows together took less than SMALL_WORK:
 * small matrices need no dense stage. */
#define SMALL_COLUMNS 2048u
#define SMALL_WORK 4000000u
#define SMALL_ROW 16384u
/* Smaller matrices are not worth waking a team. */
#define LEAST_SHARED 256u
/* Columns for each member of a team, at least. */
#define MEMBER_COLUMNS 32u

static uint64_t total_rank(const idsi_elimination *e)
{
    uint64_t rank = idsi_echelon_rank(e->echelon);
    return e->dense != NULL ? rank + idsi_dense_echelon_rank(e->dense) : rank;
}

/* ---- stage 1 --------------------------------------------------------------------------------- */

typedef struct sparse_stage {
    idsi_elimination *e;
    uint64_t work;
} sparse_stage;

static ids_status defer(idsi_elimination *e, uint64_t number)
{
    ids_status st = IDS_OK;
    idsi_deferred *d = &e->deferred;
    size_t word = number / 64;

    if (word >= d->capacity) {
        size_t capacity = 2 * word + 64;
        IDSI_TRY(idsi_resize_array(e->ctx, capacity, sizeof *d->bits, &d->bits));
        memset(d->bits + d->capacity, 0, (capacity - d->capacity) * sizeof *d->bits);
        d->capacity = capacity;
    }
    d->bits[word] |= UINT64_C(1) << (number % 64);
    d->count++;
done:
    return st;
}

/* First pass (rows == 0): every row; later passes: the deferred ones again, with more work. */
static ids_status sparse_row(void *user, uint64_t number, const idsi_entry *row, size_t count)
{
    ids_status st = IDS_OK;
    sparse_stage *s = user;
    idsi_elimination *e = s->e;
    idsi_verdict verdict = IDSI_DEPENDENT;
    bool again = e->rows > 0;
    uint64_t work = s->work;

    if (total_rank(e) == e->columns) {
        return IDS_OK;
    }
    if (e->columns <= SMALL_COLUMNS && idsi_echelon_work(e->echelon) < SMALL_WORK) {
        work = work < SMALL_ROW ? SMALL_ROW : work;
    }
    idsi_echelon_load(e->echelon, row, count, 1);
    IDSI_TRY(idsi_echelon_settle(e->echelon, work, &verdict));
    if (again && verdict != IDSI_DEFERRED) {
        e->deferred.bits[number / 64] &= ~(UINT64_C(1) << (number % 64));
        e->deferred.count--;
    } else if (!again && verdict == IDSI_DEFERRED) {
        IDSI_TRY(defer(e, number));
    }
done:
    return st;
}

/*
 * Whether the dense stage has room: in what the budget leaves, less an eighth for rows at work, or
 * in half of it when the dense rows will become sparse rules; in 4 GiB without a budget.
 */
static bool dense_fits(const idsi_elimination *e)
{
    ids_memory memory = ids_ctx_memory(e->ctx);
    uint64_t room = UINT64_C(4) << 30;
    if (memory.budget > 0) {
        uint64_t left = memory.budget > memory.live ? memory.budget - memory.live : 0;
        room = e->matrix->tables ? left / 2 : left - left / 8;
    }
    return idsi_finish_bytes(e) <= room;
}

static ids_status sparse_pass(sparse_stage *s)
{
    ids_status st = IDS_OK;
    idsi_elimination *e = s->e;
    uint64_t rows = 0;

    IDSI_TRY(idsi_feed_run(e->feed, e->rows > 0 ? &e->deferred : NULL, sparse_row, NULL, s, &rows));
    e->rows = rows;
done:
    return st;
}

static ids_status eliminate_sparse(idsi_elimination *e)
{
    ids_status st = IDS_OK;
    sparse_stage s = {e, FIRST_WORK};

    IDSI_TRY(sparse_pass(&s));
    while (e->deferred.count > 0 && total_rank(e) < e->columns && !dense_fits(e)) {
        s.work *= 16;
        IDSI_TRY(sparse_pass(&s));
    }
done:
    return st;
}

/* ---- all of it ------------------------------------------------------------------------------- */

/* Turns the dense rows into sparse rules, so that one form holds everything. */
static ids_status merge_dense(idsi_elimination *e)
{
    ids_status st = IDS_OK;
    idsi_entry *entries = NULL;
    uint32_t *column = NULL; /* of each dense column */

    if (e->dense == NULL) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_dense_echelon_complete(e->dense));
    IDSI_TRY(idsi_alloc_array(e->ctx, e->fold.width, sizeof *entries, &entries));
    IDSI_TRY(idsi_alloc_array(e->ctx, e->fold.width, sizeof *column, &column));
    for (uint32_t c = 0; c < e->columns; c++) {
        if (e->fold.place[c] != UINT32_MAX) {
            column[e->fold.place[c]] = c;
        }
    }
    for (size_t i = 0; i < idsi_dense_echelon_rank(e->dense); i++) {
        const uint32_t *row = idsi_dense_echelon_row(e->dense, i);
        size_t count = 0;
        for (size_t j = (size_t)idsi_dense_echelon_pivot(e->dense, i) + 1; j-- > 0;) {
            if (row[j] != 0) {
                entries[count++] = (idsi_entry){column[j], row[j]};
            }
        }
        IDSI_TRY(idsi_echelon_store(e->echelon, entries, count));
    }
done:
    idsi_free(e->ctx, column);
    idsi_free(e->ctx, entries);
    return st;
}

static void clear_elimination(idsi_elimination *e)
{
    idsi_feed_free(e->feed);
    idsi_echelon_free(e->echelon);
    idsi_dense_echelon_free(e->dense);
    idsi_fold_clear(&e->fold);
    idsi_free(e->ctx, e->deferred.bits);
    idsi_team_free(e->team);
}

static void report(const idsi_elimination *e, idsi_result *result)
{
    *result = (idsi_result){.rank = total_rank(e),
                            .error = e->error,
                            .rows = e->rows,
                            .deferred = e->deferred.count,
                            .fill = idsi_echelon_fill(e->echelon)};
    if (e->dense != NULL) {
        result->dense_rank = idsi_dense_echelon_rank(e->dense);
        result->dense_columns = e->dense_columns;
        result->dense_width = e->fold.width;
        result->dense_rows = e->dense_rows;
    }
}

ids_status idsi_eliminate(const idsi_matrix *matrix, idsi_random *random, idsi_result *result)
{
    ids_status st = IDS_OK;
    idsi_elimination e = {.matrix = matrix,
                          .random = random,
                          .ctx = matrix->ctx,
                          .prime = matrix->prime,
                          .columns = matrix->columns};

    if (matrix->columns >= LEAST_SHARED) {
        IDSI_TRY(idsi_team_create(e.ctx, idsi_team_members(e.ctx, matrix->columns / MEMBER_COLUMNS),
                                  &e.team));
    }
    IDSI_TRY(idsi_feed_create(matrix, e.team, &e.feed));
    IDSI_TRY(idsi_echelon_create(e.ctx, e.prime, e.columns, &e.echelon));
    IDSI_TRY(eliminate_sparse(&e));
    if (e.deferred.count > 0 && total_rank(&e) < e.columns) {
        IDSI_TRY(idsi_finish(&e));
    }
    report(&e, result);
    if (matrix->tables) {
        IDSI_TRY(merge_dense(&e));
        IDSI_TRY(idsi_echelon_complete(e.echelon));
        result->echelon = e.echelon;
        e.echelon = NULL;
    }
done:
    clear_elimination(&e);
    return st;
}
