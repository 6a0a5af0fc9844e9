/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The dense finish: stages 2 and 3 of the elimination (see eliminate.c).
 *
 *     row after row  ->  lanes (round and round)  ->  block of dense rows  ->  dense echelon form
 *
 * A lane takes `together` rows, each times a random factor when they are several. When all lanes
 * are full, the team rewrites them, 16 at a time, and then the block is eliminated. How many rows
 * are taken together follows the yield, so that rows that add nothing cost next to nothing. When
 * blocks add less than half of their rows, or at the end, all deferred rows are combined into a few
 * random rows, once more, until these add nothing. One such pass is wrong with probability at most
 * 1/(p-1): if a deferred row is independent, the lane that holds it is so but for one value of its
 * factor, which is not 0.
 *
 * When only the rank is wanted, dense rows are folded (fold.c) into about a fifth of the columns;
 * if the rank turns out to be too large for that, the stage begins again with twice as many.
 */
#include <math.h>
#include <string.h>

#include "eliminate_private.h"

/* Dense rows that are eliminated at a time: a panel of the dense form. */
#define BLOCK 256u
/* Groups of lanes, and bytes that they may take. */
#define MOST_GROUPS 8u
#define LANES_BYTES (UINT64_C(32) << 20)
/* Fewer columns are not folded. */
#define LEAST_FOLDED 2048u
/* Most rows of a lane to begin with. */
#define MOST_TOGETHER 8u
/* Random rows of the first check: two groups of lanes, so that two threads load them. */
#define CHECK_ROWS 32u
/* Tasks that the columns are shared into. */
#define SHARES 16u

/* A row that is to be loaded into a lane. */
typedef struct load {
    const idsi_entry *row;
    size_t count;
    uint32_t lane;
    uint32_t factor;
} load;

typedef struct finish {
    idsi_elimination *e;
    idsi_rewriter *rewriter;
    idsi_lanes *groups[MOST_GROUPS];
    uint32_t group_count;
    uint32_t lane_count; /* of all groups */
    uint32_t in_use;     /* lanes that take rows */
    load *loads;
    size_t load_count;
    size_t load_capacity;
    uint64_t taken;    /* rows in the lanes */
    uint64_t together; /* rows for each lane */
    uint32_t *block;   /* BLOCK x width */
    size_t block_rows;
    size_t share;      /* columns of one task */
    bool adapt;        /* `together` follows the yield */
    bool is_at_end;    /* blocks add so little that the check is to tell what is left */
    uint32_t checks;   /* passes that tested whether anything was missed */
    bool was_combined; /* some lane held several rows, or some rows were left out */
    uint64_t added;    /* in this pass over the rows */
    uint32_t mixed_pivots;
} finish;

/* ---- sizes ----------------------------------------------------------------------------------- */

/* Width to begin with: 0 for no folding. */
static size_t first_width(const idsi_elimination *e)
{
    uint64_t columns = e->columns - idsi_echelon_rank(e->echelon);
    uint64_t width = columns / 5 + 512;
    uint64_t most = e->deferred.count + e->deferred.count / 8 + 64;

    if (e->matrix->tables || e->prime < IDSI_LEAST_RANDOM_PRIME || columns < LEAST_FOLDED) {
        return 0;
    }
    width = most < width ? most : width;
    return width <= columns / 2 ? (size_t)width + IDSI_FOLD_MIXED : 0;
}

static size_t wider(const idsi_elimination *e, size_t width)
{
    return 2 * width <= e->dense_columns / 2 ? 2 * width : 0;
}

/* Groups of lanes: as many as there are rows for and have room. */
static uint32_t groups_for(const idsi_elimination *e)
{
    uint64_t room = LANES_BYTES / (idsi_lanes_bytes(idsi_echelon_rank(e->echelon)) + 1);
    uint64_t count = e->deferred.count / idsi_lanes_count() + 1;

    count = count < room ? count : room;
    return count < 1 ? 1 : count > MOST_GROUPS ? MOST_GROUPS : (uint32_t)count;
}

uint64_t idsi_finish_bytes(const idsi_elimination *e)
{
    uint64_t rank = idsi_echelon_rank(e->echelon);
    uint64_t columns = e->columns - rank;
    uint64_t width = first_width(e);
    width = width == 0 ? columns : width;
    uint64_t rows = e->deferred.count < width ? e->deferred.count : width;
    return idsi_fold_bytes(e->columns) +
           idsi_rewriter_bytes(e->columns, rank, idsi_echelon_fill(e->echelon)) +
           groups_for(e) * idsi_lanes_bytes(rank) + BLOCK * width * sizeof(uint32_t) +
           idsi_dense_echelon_bytes(width, rows);
}

/* ---- begin and end --------------------------------------------------------------------------- */

static void clear(finish *f)
{
    for (uint32_t g = 0; g < f->group_count; g++) {
        idsi_lanes_free(f->groups[g]);
    }
    idsi_rewriter_free(f->rewriter);
    idsi_free(f->e->ctx, f->loads);
    idsi_free(f->e->ctx, f->block);
}

static ids_status begin(finish *f, size_t width)
{
    ids_status st = IDS_OK;
    idsi_elimination *e = f->e;
    uint32_t wanted = groups_for(e);

    IDSI_TRY(idsi_fold_init(&e->fold, e->ctx, e->echelon, e->prime, e->columns, width, e->random));
    IDSI_TRY(idsi_rewriter_create(e->ctx, e->echelon, e->prime, e->columns, &e->fold, e->team,
                                  &f->rewriter));
    while (f->group_count < wanted) {
        IDSI_TRY(idsi_lanes_create(e->ctx, f->rewriter, &f->groups[f->group_count]));
        f->group_count++;
    }
    f->lane_count = f->group_count * idsi_lanes_count();
    f->in_use = f->lane_count;
    f->together = 1;
    f->share = (e->fold.width / SHARES / 16 + 1) * 16;
    IDSI_TRY(idsi_alloc_array(e->ctx, BLOCK * e->fold.width, sizeof *f->block, &f->block));
    IDSI_TRY(idsi_dense_echelon_create(e->ctx, e->prime, e->fold.width, &e->dense));
    IDSI_TRY(idsi_dense_echelon_share(e->dense, e->team));
    if (e->prime >= IDSI_LEAST_RANDOM_PRIME && e->deferred.count > e->fold.width) {
        /* No more lanes than could be independent, and all the same in few passes. */
        f->together = e->deferred.count / e->fold.width;
        f->together = f->together < MOST_TOGETHER ? f->together : MOST_TOGETHER;
    }
done:
    return st;
}

/* Whether no row can add anything, or the fold has turned out to be too narrow. */
static bool is_over(const finish *f)
{
    const idsi_elimination *e = f->e;
    uint64_t rank = idsi_echelon_rank(e->echelon) + idsi_dense_echelon_rank(e->dense);
    return rank == e->columns || f->mixed_pivots + 1 >= IDSI_FOLD_MIXED;
}

/* ---- lanes and blocks ------------------------------------------------------------------------ */

static ids_status flush_block(finish *f)
{
    ids_status st = IDS_OK;
    idsi_elimination *e = f->e;
    size_t before = idsi_dense_echelon_rank(e->dense);

    if (f->block_rows == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_dense_echelon_add(e->dense, f->block, f->block_rows, NULL));
    size_t after = idsi_dense_echelon_rank(e->dense);
    size_t added = after - before;
    for (size_t i = before; i < after; i++) {
        f->mixed_pivots += idsi_dense_echelon_pivot(e->dense, i) < e->fold.mixed;
    }
    f->added += added;
    e->dense_rows += f->block_rows;
    if (f->adapt && 8 * added < 7 * f->block_rows) {
        f->together *= 2;
        f->is_at_end = 2 * added < f->block_rows;
        f->was_combined = true;
    }
    memset(f->block, 0, f->block_rows * e->fold.width * sizeof *f->block);
    f->block_rows = 0;
done:
    return st;
}

static uint32_t *rest_of(const finish *f, uint32_t lane)
{
    return f->block + (f->block_rows + lane) * f->e->fold.width;
}

static void load_group(void *user, uint32_t member, size_t group)
{
    finish *f = user;
    uint32_t each = idsi_lanes_count();

    (void)member;
    for (size_t i = 0; i < f->load_count; i++) {
        const load *l = &f->loads[i];
        if (l->lane / each == group) {
            idsi_lanes_load(f->groups[group], l->lane % each, l->row, l->count, l->factor,
                            rest_of(f, l->lane));
        }
    }
}

/* Groups of lanes that have rows. */
static size_t groups_used(const finish *f)
{
    uint64_t lanes = f->taken < f->in_use ? f->taken : f->in_use;
    return (lanes + idsi_lanes_count() - 1) / idsi_lanes_count();
}

/* The rows that were handed out go: load them. */
static ids_status load_rows(void *user)
{
    finish *f = user;

    if (f->load_count > 0) {
        idsi_team_run(f->e->team, groups_used(f), load_group, f);
        f->load_count = 0;
    }
    return idsi_poll(f->e->ctx, NULL);
}

static void solve_group(void *user, uint32_t member, size_t group)
{
    finish *f = user;

    (void)member;
    idsi_lanes_solve(f->groups[group]);
}

/* Some columns of all groups: the rules' entries there are read from memory once. */
static void apply_columns(void *user, uint32_t member, size_t task)
{
    finish *f = user;
    uint32_t each = idsi_lanes_count();
    size_t from = task * f->share;
    size_t width = f->e->fold.width;
    size_t to = width - from < f->share ? width : from + f->share;
    uint32_t used = (uint32_t)(f->taken < f->in_use ? f->taken : f->in_use);

    (void)member;
    for (uint32_t chunk = 0; chunk < idsi_rewriter_chunks(f->rewriter); chunk++) {
        for (uint32_t lane = 0; lane < used; lane += each) {
            uint32_t count = used - lane < each ? used - lane : each;
            idsi_lanes_apply(f->groups[lane / each], chunk, count, from, to, rest_of(f, lane),
                             width);
        }
    }
}

/* The lanes become dense rows. */
static ids_status flush_lanes(finish *f)
{
    ids_status st = IDS_OK;

    IDSI_TRY(load_rows(f));
    if (f->taken == 0) {
        return IDS_OK;
    }
    idsi_team_run(f->e->team, groups_used(f), solve_group, f);
    IDSI_TRY(idsi_poll(f->e->ctx, NULL));
    idsi_team_run(f->e->team, (f->e->fold.width + f->share - 1) / f->share, apply_columns, f);
    f->block_rows += f->taken < f->in_use ? f->taken : f->in_use;
    f->taken = 0;
    if (f->block_rows + f->lane_count > BLOCK) {
        IDSI_TRY(flush_block(f));
    }
done:
    return st;
}

static ids_status take_row(void *user, uint64_t number, const idsi_entry *row, size_t count)
{
    ids_status st = IDS_OK;
    finish *f = user;
    idsi_elimination *e = f->e;
    load next = {row, count, (uint32_t)(f->taken % f->in_use), 1};

    (void)number;
    if (f->is_at_end || is_over(f)) {
        idsi_feed_stop(e->feed);
        return IDS_OK;
    }
    if (f->together > 1) {
        next.factor = 1 + (uint32_t)idsi_random_below(e->random, e->prime - 1);
        f->was_combined = true;
    }
    IDSI_TRY(idsi_grow(e->ctx, f->load_count, &f->load_capacity, sizeof *f->loads, &f->loads));
    f->loads[f->load_count] = next;
    f->load_count++;
    f->taken++;
    if (f->taken == f->together * f->in_use) {
        IDSI_TRY(flush_lanes(f));
    }
done:
    return st;
}

/* ---- passes ---------------------------------------------------------------------------------- */

static ids_status pass(finish *f)
{
    ids_status st = IDS_OK;
    uint64_t rows = 0;

    f->added = 0;
    IDSI_TRY(idsi_feed_run(f->e->feed, &f->e->deferred, take_row, load_rows, f, &rows));
    IDSI_TRY(flush_lanes(f));
    IDSI_TRY(flush_block(f));
done:
    return st;
}

static ids_status all_passes(finish *f)
{
    ids_status st = IDS_OK;
    uint64_t slots = CHECK_ROWS;

    f->adapt = f->e->prime >= IDSI_LEAST_RANDOM_PRIME;
    IDSI_TRY(pass(f));
    f->adapt = false;
    f->is_at_end = false;
    while (f->was_combined && !is_over(f)) {
        f->together = (f->e->deferred.count + slots - 1) / slots;
        f->in_use = slots < f->lane_count ? (uint32_t)slots : f->lane_count;
        IDSI_TRY(pass(f));
        f->checks++;
        if (f->added == 0) {
            break;
        }
        slots = 4 * f->added > 3 * slots ? 4 * slots : CHECK_ROWS;
    }
done:
    return st;
}

ids_status idsi_finish(idsi_elimination *e)
{
    ids_status st = IDS_OK;
    size_t width = first_width(e);

    e->dense_columns = e->columns - idsi_echelon_rank(e->echelon);
    for (;;) {
        finish f = {.e = e};
        st = begin(&f, width);
        st = st == IDS_OK ? all_passes(&f) : st;
        clear(&f);
        if (st != IDS_OK || width == 0 || f.mixed_pivots + 1 < IDSI_FOLD_MIXED) {
            uint32_t random_columns = e->fold.mixed - f.mixed_pivots;
            e->error = (double)f.checks / ((double)e->prime - 1.0);
            e->error += e->fold.mixed > 0 ? 2.0 * pow(e->prime, -(double)random_columns) : 0.0;
            return st;
        }
        idsi_dense_echelon_free(e->dense);
        e->dense = NULL;
        idsi_fold_clear(&e->fold);
        width = wider(e, width);
    }
}
