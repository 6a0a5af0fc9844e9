/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Elimination of matrices whose rows are streamed, in three stages.
 *
 * 1. Sparse. Every row is rewritten by the rules there are until its largest column is no pivot,
 *    and becomes a rule itself; but a row that would take more than a certain work is deferred.
 *    Most rows are taken as they come: their largest column was free.
 * 2. Dense. The deferred rows, made again, are rewritten completely and go, as dense rows of the
 *    columns that are no pivots yet, into a dense echelon form, a block at a time. Where blocks
 *    add little, each dense row is a random combination of several rows, so that rows that add
 *    nothing cost next to nothing.
 * 3. Check. If rows were combined, all deferred rows are combined into a few random rows until
 *    these add nothing.
 *
 * A check passes wrongly with probability at most 1/p: if a deferred row is independent, the slot
 * that holds it is so but for one value of its random factor.
 */
#include <string.h>

#include "dense_private.h"

#define FIRST_WORK 4096u
#define BLOCK 192u
/* Below this, random numbers mod p are too few to rely on. */
#define LEAST_RANDOM_PRIME (UINT32_C(1) << 20)

typedef struct elimination {
    const idsi_matrix *matrix;
    idsi_random *random;
    ids_ctx *ctx;
    uint32_t prime;
    uint32_t columns;
    idsi_echelon *echelon;
    uint64_t work;
    uint64_t number;    /* of the row that is handled */
    uint64_t rows;      /* that the source makes */
    uint64_t *deferred; /* bit set of row numbers */
    size_t deferred_capacity;
    uint64_t deferred_count;
    idsi_dense_echelon *dense;
    uint32_t *dense_column; /* of a column that is no pivot */
    uint32_t *sparse_column; /* the inverse */
    size_t dense_columns;
    uint32_t *block; /* BLOCK x dense_columns */
    size_t block_rows;
    idsi_lanes *lanes;
    uint32_t lane;      /* at work */
    uint64_t together;  /* rows combined into one */
    uint64_t combined;  /* rows in the lane at work */
    bool adapt;         /* together follows the yield */
    bool was_combined;  /* some slot held several rows */
    uint64_t added;     /* in this pass over the rows */
} elimination;

/* ---- stage 1 --------------------------------------------------------------------------------- */

static ids_status defer(elimination *e)
{
    ids_status st = IDS_OK;
    size_t word = e->number / 64;

    if (word >= e->deferred_capacity) {
        size_t capacity = 2 * word + 64;
        IDSI_TRY(idsi_resize_array(e->ctx, capacity, sizeof *e->deferred, &e->deferred));
        memset(e->deferred + e->deferred_capacity, 0,
               (capacity - e->deferred_capacity) * sizeof *e->deferred);
        e->deferred_capacity = capacity;
    }
    e->deferred[word] |= UINT64_C(1) << (e->number % 64);
    e->deferred_count++;
done:
    return st;
}

static bool is_deferred(const elimination *e, uint64_t number)
{
    size_t word = number / 64;
    return word < e->deferred_capacity && ((e->deferred[word] >> (number % 64)) & 1u) != 0;
}

static uint64_t total_rank(const elimination *e)
{
    uint64_t rank = idsi_echelon_rank(e->echelon);
    return e->dense != NULL ? rank + idsi_dense_echelon_rank(e->dense) : rank;
}

/* First pass (rows == 0): every row; later passes: the deferred ones again, with more work. */
static ids_status sparse_row(void *user, const idsi_entry *row, size_t count)
{
    ids_status st = IDS_OK;
    elimination *e = user;
    idsi_verdict verdict = IDSI_DEPENDENT;
    bool again = e->rows > 0;

    if (total_rank(e) < e->columns && (!again || is_deferred(e, e->number))) {
        idsi_echelon_load(e->echelon, row, count, 1);
        IDSI_TRY(idsi_echelon_settle(e->echelon, e->work, &verdict));
        if (again && verdict != IDSI_DEFERRED) {
            e->deferred[e->number / 64] &= ~(UINT64_C(1) << (e->number % 64));
            e->deferred_count--;
        } else if (!again && verdict == IDSI_DEFERRED) {
            IDSI_TRY(defer(e));
        }
    }
    e->number++;
done:
    return st;
}

static ids_status sparse_pass(elimination *e)
{
    ids_status st = IDS_OK;
    e->number = 0;
    IDSI_TRY(e->matrix->source(e->matrix->source_user, sparse_row, e));
    e->rows = e->number;
done:
    return st;
}

/* Bytes that the dense stage would take. */
static uint64_t dense_bytes(const elimination *e)
{
    uint64_t columns = e->columns - idsi_echelon_rank(e->echelon);
    uint64_t rows = e->deferred_count < columns ? e->deferred_count : columns;
    return (rows + 2 * BLOCK) * columns * sizeof(uint32_t) +
           (uint64_t)e->columns * 2 * sizeof(uint32_t) + idsi_lanes_bytes(e->columns);
}

/* Whether the dense stage has room: half of what the budget leaves, or 4 GiB without a budget. */
static bool dense_fits(const elimination *e)
{
    ids_memory memory = ids_ctx_memory(e->ctx);
    uint64_t room = UINT64_C(4) << 30;
    if (memory.budget > 0) {
        room = memory.budget > memory.live ? (memory.budget - memory.live) / 2 : 0;
    }
    return dense_bytes(e) <= room;
}

static ids_status sparse_stage(elimination *e)
{
    ids_status st = IDS_OK;

    e->work = FIRST_WORK;
    IDSI_TRY(sparse_pass(e));
    while (e->deferred_count > 0 && total_rank(e) < e->columns && !dense_fits(e)) {
        e->work *= 16;
        IDSI_TRY(sparse_pass(e));
    }
done:
    return st;
}

/* ---- stages 2 and 3 -------------------------------------------------------------------------- */

static ids_status start_dense(elimination *e)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_alloc_array(e->ctx, e->columns, sizeof *e->dense_column, &e->dense_column));
    IDSI_TRY(idsi_alloc_array(e->ctx, e->columns, sizeof *e->sparse_column, &e->sparse_column));
    for (uint32_t c = 0; c < e->columns; c++) {
        if (!idsi_echelon_is_pivot(e->echelon, c)) {
            e->dense_column[c] = (uint32_t)e->dense_columns;
            e->sparse_column[e->dense_columns] = c;
            e->dense_columns++;
        }
    }
    IDSI_TRY(idsi_alloc_array(e->ctx, BLOCK * e->dense_columns, sizeof *e->block, &e->block));
    IDSI_TRY(idsi_lanes_create(e->ctx, e->prime, e->columns, &e->lanes));
    IDSI_TRY(idsi_dense_echelon_create(e->ctx, e->prime, e->dense_columns, &e->dense));
done:
    return st;
}

static ids_status flush_block(elimination *e)
{
    ids_status st = IDS_OK;
    size_t before = idsi_dense_echelon_rank(e->dense);

    if (e->block_rows == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_dense_echelon_add(e->dense, e->block, e->block_rows, NULL));
    size_t added = idsi_dense_echelon_rank(e->dense) - before;
    e->added += added;
    if (e->adapt && e->prime >= LEAST_RANDOM_PRIME) {
        if (4 * added < e->block_rows) {
            e->together *= 4;
        } else if (4 * added > 3 * e->block_rows && e->together > 1) {
            e->together /= 2;
        }
    }
    memset(e->block, 0, e->block_rows * e->dense_columns * sizeof *e->block);
    e->block_rows = 0;
done:
    return st;
}

/* The lanes become dense rows. */
static ids_status flush_lanes(elimination *e)
{
    ids_status st = IDS_OK;

    if (e->lane > 0) {
        idsi_lanes_rewrite(e->lanes, e->echelon, e->dense_column,
                           e->block + e->block_rows * e->dense_columns, e->dense_columns);
        e->block_rows += e->lane;
        e->lane = 0;
        if (e->block_rows + idsi_lanes_count() > BLOCK) {
            IDSI_TRY(flush_block(e));
        }
    }
done:
    return st;
}

/* The combination at work is complete. */
static ids_status next_lane(elimination *e)
{
    ids_status st = IDS_OK;

    if (e->combined > 0) {
        e->combined = 0;
        e->lane++;
        if (e->lane == idsi_lanes_count()) {
            IDSI_TRY(flush_lanes(e));
        }
    }
done:
    return st;
}

static ids_status dense_row(void *user, const idsi_entry *row, size_t count)
{
    ids_status st = IDS_OK;
    elimination *e = user;

    if (total_rank(e) < e->columns && is_deferred(e, e->number)) {
        uint32_t factor = 1;
        if (e->together > 1) {
            factor = 1 + (uint32_t)idsi_random_below(e->random, e->prime - 1);
            e->was_combined = true;
        }
        idsi_lanes_load(e->lanes, e->lane, row, count, factor);
        e->combined++;
        if (e->combined >= e->together) {
            IDSI_TRY(next_lane(e));
        }
    }
    e->number++;
done:
    return st;
}

static ids_status dense_pass(elimination *e)
{
    ids_status st = IDS_OK;

    e->number = 0;
    e->added = 0;
    IDSI_TRY(e->matrix->source(e->matrix->source_user, dense_row, e));
    IDSI_TRY(next_lane(e));
    IDSI_TRY(flush_lanes(e));
    IDSI_TRY(flush_block(e));
done:
    return st;
}

static ids_status dense_stage(elimination *e)
{
    ids_status st = IDS_OK;
    uint64_t slots = BLOCK;

    IDSI_TRY(start_dense(e));
    e->together = 1;
    e->adapt = true;
    IDSI_TRY(dense_pass(e));
    e->adapt = false;
    while (e->was_combined && total_rank(e) < e->columns) {
        e->together = (e->deferred_count + slots - 1) / slots;
        IDSI_TRY(dense_pass(e));
        if (e->added == 0) {
            break;
        }
        if (4 * e->added > 3 * slots) {
            slots *= 4;
        }
    }
done:
    return st;
}

/* Turns the dense rows into sparse rules, so that one form holds everything. */
static ids_status merge_dense(elimination *e)
{
    ids_status st = IDS_OK;
    idsi_entry *entries = NULL;

    if (e->dense == NULL) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_dense_echelon_complete(e->dense));
    IDSI_TRY(idsi_alloc_array(e->ctx, e->dense_columns, sizeof *entries, &entries));
    for (size_t i = 0; i < idsi_dense_echelon_rank(e->dense); i++) {
        const uint32_t *row = idsi_dense_echelon_row(e->dense, i);
        size_t count = 0;
        for (size_t j = (size_t)idsi_dense_echelon_pivot(e->dense, i) + 1; j-- > 0;) {
            if (row[j] != 0) {
                entries[count++] = (idsi_entry){e->sparse_column[j], row[j]};
            }
        }
        IDSI_TRY(idsi_echelon_store(e->echelon, entries, count));
    }
done:
    idsi_free(e->ctx, entries);
    return st;
}

/* ---- all of it ------------------------------------------------------------------------------- */

static void clear_elimination(elimination *e)
{
    idsi_echelon_free(e->echelon);
    idsi_dense_echelon_free(e->dense);
    idsi_lanes_free(e->lanes);
    idsi_free(e->ctx, e->deferred);
    idsi_free(e->ctx, e->dense_column);
    idsi_free(e->ctx, e->sparse_column);
    idsi_free(e->ctx, e->block);
}

static void report(const elimination *e, idsi_result *result)
{
    *result = (idsi_result){.rank = total_rank(e),
                            .rows = e->rows,
                            .deferred = e->deferred_count,
                            .fill = idsi_echelon_fill(e->echelon),
                            .error = e->was_combined ? 1.0 / (double)e->prime : 0.0};
    if (e->dense != NULL) {
        result->dense_rank = idsi_dense_echelon_rank(e->dense);
        result->dense_columns = e->dense_columns;
    }
}

ids_status idsi_eliminate(const idsi_matrix *matrix, idsi_random *random, idsi_result *result)
{
    ids_status st = IDS_OK;
    elimination e = {.matrix = matrix,
                     .random = random,
                     .ctx = matrix->ctx,
                     .prime = matrix->prime,
                     .columns = matrix->columns};

    IDSI_TRY(idsi_echelon_create(e.ctx, e.prime, e.columns, &e.echelon));
    IDSI_TRY(sparse_stage(&e));
    if (e.deferred_count > 0 && total_rank(&e) < e.columns) {
        IDSI_TRY(dense_stage(&e));
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
