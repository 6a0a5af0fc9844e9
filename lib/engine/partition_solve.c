/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Solving one shape of the partition engine.
 *
 * Every equation of the shape's degree says that an element z of the free algebra is sent to zero,
 * which is one linear equation for every covector r on the Specht module; they are taken with
 * random covectors, a block at a time. When a block of B covectors adds B-2 or fewer independent
 * equations, z is used up: if z still had something to add, so low a yield would have probability
 * at most 2/p^2 (two of B random vectors would lie in a space that the others do not fill).
 *
 * Cheap equations come first and are used up before the next ones are touched. After one that had
 * nothing to add, the next one is tested before it is used: two random maps that satisfy all
 * equations so far are evaluated on z, against a few covectors. If z still had something to add,
 * all values would vanish with probability at most 1/p^2 + 1/p^PROBE, about. A test is much
 * cheaper than a block, because two maps are evaluated and not a basis.
 *
 * The random vectors of a shape come from a seed of its own, and the solution space's basis is
 * that of the reduced echelon form.
 */
#include <string.h>

#include "partition_private.h"

#define PROBE 16u
#define BATCH 192u

typedef struct solver {
    idsi_scratch *s;
    idsi_partition_engine *engine;
    uint32_t shape;
    idsi_random random;
    idsi_dense_echelon *echelon;
    uint32_t *start;   /* tableaux x width: random covectors */
    uint32_t *moved;   /* the same with a word applied */
    uint32_t *product; /* unknowns x width */
    uint32_t *rows;    /* BATCH x unknowns: equations to be eliminated */
    size_t row_count;
    bool independent[BATCH];
    const atomic_bool *stop; /* set when another thread failed */
    uint64_t blocks;
} solver;

static void clear_solver(solver *v)
{
    idsi_dense_echelon_free(v->echelon);
    idsi_free(v->s->ctx, v->start);
    idsi_free(v->s->ctx, v->moved);
    idsi_free(v->s->ctx, v->product);
    idsi_free(v->s->ctx, v->rows);
}

static void apply_word(const solver *v, const idsi_term *term, size_t width)
{
    const idsi_skew *skew = v->engine->skews.list[v->shape];
    memcpy(v->moved, v->start, (size_t)skew->count * width * sizeof *v->moved);
    for (size_t i = 0; i < term->word_length; i++) {
        idsi_seminormal_exchange(skew, term->word[i], v->engine->prime, v->engine->inverse,
                                 v->moved, width);
    }
}

static bool same_word(const idsi_term *a, const idsi_term *b)
{
    return a->word_length == b->word_length && memcmp(a->word, b->word, a->word_length) == 0;
}

/* rows[b][u] += coefficient * product[u][b] for the unknowns of one form. */
static void add_product(const solver *v, uint32_t coefficient, uint32_t from, uint32_t to,
                        size_t width)
{
    uint32_t p = v->engine->prime;
    uint32_t unknowns = v->engine->spaces[v->shape].unknowns;

    for (uint32_t u = from; u < to; u++) {
        uint32_t *product = v->product + (size_t)u * width;
        for (size_t b = 0; b < width; b++) {
            uint32_t *row = &v->rows[(v->row_count + b) * unknowns + u];
            *row = (uint32_t)((*row + (uint64_t)coefficient * product[b]) % p);
            product[b] = 0;
        }
    }
}

static ids_status flush_batch(solver *v)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_dense_echelon_add(v->echelon, v->rows, v->row_count, v->independent));
    memset(v->rows, 0,
           v->row_count * v->engine->spaces[v->shape].unknowns * sizeof *v->rows);
    v->row_count = 0;
done:
    return st;
}

/* One block of covectors for one equation, into the batch. */
static ids_status use_equation(solver *v, const idsi_equation *equation, uint32_t width)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = v->engine;
    const idsi_space *space = &engine->spaces[v->shape];
    uint32_t tableaux = engine->skews.list[v->shape]->count;
    const idsi_term *applied = NULL; /* whose word `moved` has */

    for (size_t i = 0; i < (size_t)tableaux * width; i++) {
        v->start[i] = idsi_random_residue(&v->random, engine->prime);
    }
    for (size_t t = 0; t < equation->count; t++) {
        const idsi_term *term = &equation->terms[t];
        uint32_t form = idsi_form_find(engine, &engine->exprs[term->expr]);
        if (form == UINT32_MAX || space->offset[form] == space->offset[form + 1]) {
            continue;
        }
        if (applied == NULL || !same_word(term, applied)) {
            apply_word(v, term, width);
            applied = term;
        }
        IDSI_TRY(idsi_contract_product(v->s, v->shape, term->expr, v->moved, width, v->product));
        add_product(v, term->coefficient, space->offset[form], space->offset[form + 1], width);
    }
    v->row_count += width;
    v->blocks++;
    IDSI_TRY(idsi_poll(engine->ctx, NULL));
done:
    return st;
}

static uint32_t yield(const solver *v, size_t from, uint32_t width)
{
    uint32_t count = 0;
    for (size_t i = from; i < from + width; i++) {
        count += v->independent[i];
    }
    return count;
}

static bool is_done(const solver *v)
{
    return idsi_dense_echelon_rank(v->echelon) == v->engine->spaces[v->shape].unknowns ||
           atomic_load(v->stop);
}

/* Uses an equation in growing blocks until it has nothing to add. */
static ids_status drain_equation(solver *v, const idsi_equation *equation)
{
    ids_status st = IDS_OK;
    uint32_t width = PROBE;

    while (!is_done(v)) {
        IDSI_TRY(use_equation(v, equation, width));
        IDSI_TRY(flush_batch(v));
        uint32_t count = yield(v, 0, width);
        if (count + 2 <= width) {
            break;
        }
        width = 3 * width <= BATCH / 2 ? 3 * width : width;
    }
done:
    return st;
}

/* Random maps that satisfy the equations so far. */
static ids_status draw_maps(solver *v, idsi_maps *maps)
{
    ids_status st = IDS_OK;
    uint32_t unknowns = v->engine->spaces[v->shape].unknowns;

    idsi_maps_clear(v->s->ctx, maps);
    maps->unknowns = unknowns;
    IDSI_TRY(idsi_alloc_array(v->s->ctx, (size_t)IDSI_MAP_COUNT * unknowns, sizeof *maps->values,
                              &maps->values));
    for (uint32_t k = 0; k < IDSI_MAP_COUNT; k++) {
        idsi_dense_echelon_solution(v->echelon, v->engine->prime, unknowns, &v->random,
                                    maps->values + (size_t)k * unknowns);
    }
done:
    return st;
}

/* Whether the maps send an equation's element to something else than zero. */
static ids_status test_equation(solver *v, const idsi_equation *equation, idsi_maps *maps,
                                bool *more)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = v->engine;
    uint32_t tableaux = engine->skews.list[v->shape]->count;
    const idsi_term *applied = NULL;
    uint64_t total[IDSI_MAP_COUNT * PROBE] = {0};

    for (size_t i = 0; i < (size_t)tableaux * PROBE; i++) {
        v->start[i] = idsi_random_residue(&v->random, engine->prime);
    }
    for (size_t t = 0; t < equation->count; t++) {
        const idsi_term *term = &equation->terms[t];
        uint32_t sums[IDSI_MAP_COUNT * PROBE] = {0};
        if (applied == NULL || !same_word(term, applied)) {
            apply_word(v, term, PROBE);
            applied = term;
        }
        IDSI_TRY(idsi_contract_maps(v->s, v->shape, term->expr, v->moved, PROBE, maps, sums));
        for (size_t i = 0; i < IDSI_MAP_COUNT * PROBE; i++) {
            total[i] = (total[i] + (uint64_t)term->coefficient * sums[i]) % engine->prime;
        }
    }
    *more = false;
    for (size_t i = 0; i < IDSI_MAP_COUNT * PROBE; i++) {
        *more = *more || total[i] != 0;
    }
    v->blocks++;
    IDSI_TRY(idsi_poll(engine->ctx, NULL));
done:
    return st;
}

static ids_status use_equations(solver *v)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = v->engine;
    const idsi_degree *degree = &engine->degree[engine->skews.list[v->shape]->shape.cells];
    idsi_maps maps = {0};
    bool testing = false;

    for (size_t i = 0; i < degree->equation_count && !is_done(v); i++) {
        const idsi_equation *equation = &degree->equations[i];
        bool more = true;
        size_t before = idsi_dense_echelon_rank(v->echelon);
        if (testing) {
            if (maps.values == NULL) {
                IDSI_TRY(draw_maps(v, &maps));
            }
            IDSI_TRY(test_equation(v, equation, &maps, &more));
        }
        if (more) {
            IDSI_TRY(drain_equation(v, equation));
            idsi_maps_clear(v->s->ctx, &maps);
        }
        testing = idsi_dense_echelon_rank(v->echelon) < before + PROBE;
    }
done:
    idsi_maps_clear(v->s->ctx, &maps);
    return st;
}

/* The solution space from the complete echelon form, negated. */
static ids_status make_solution(solver *v)
{
    ids_status st = IDS_OK;
    idsi_space *space = &v->engine->spaces[v->shape];
    size_t rank = idsi_dense_echelon_rank(v->echelon);
    uint32_t *free_of = NULL; /* 1 + number among the columns without pivot */
    uint32_t p = v->engine->prime;
    uint32_t count = 0;

    space->dimension = space->unknowns - (uint32_t)rank;
    if (space->dimension == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_dense_echelon_complete(v->echelon));
    IDSI_TRY(idsi_alloc_array(v->s->ctx, space->unknowns, sizeof *free_of, &free_of));
    IDSI_TRY(idsi_alloc_array(v->s->ctx, (size_t)space->dimension * space->unknowns,
                              sizeof *space->solution, &space->solution));
    for (size_t i = 0; i < rank; i++) {
        free_of[idsi_dense_echelon_pivot(v->echelon, i)] = UINT32_MAX;
    }
    for (uint32_t u = 0; u < space->unknowns; u++) {
        if (free_of[u] == 0) {
            space->solution[(size_t)count * space->unknowns + u] = p - 1;
            count++;
            free_of[u] = count;
        } else {
            free_of[u] = 0;
        }
    }
    for (size_t i = 0; i < rank; i++) {
        const uint32_t *row = idsi_dense_echelon_row(v->echelon, i);
        uint32_t pivot = idsi_dense_echelon_pivot(v->echelon, i);
        for (uint32_t u = 0; u < pivot; u++) {
            if (row[u] != 0 && free_of[u] != 0) {
                space->solution[(size_t)(free_of[u] - 1) * space->unknowns + pivot] = row[u];
            }
        }
    }
done:
    idsi_free(v->s->ctx, free_of);
    return st;
}

static uint64_t shape_seed(const idsi_partition_engine *engine, uint32_t shape)
{
    const idsi_shape *s = &engine->skews.list[shape]->shape;
    uint64_t seed = engine->prime;
    for (uint32_t i = 0; i < s->rows; i++) {
        seed = (seed * 31 + s->outer[i]) * 31 + s->inner[i];
    }
    return seed;
}

/* Memory for one shape: the echelon form at its largest, and the blocks. */
static ids_status check_budget(const idsi_partition_engine *engine, uint32_t shape)
{
    uint64_t unknowns = engine->spaces[shape].unknowns;
    uint64_t tableaux = engine->skews.list[shape]->count;
    ids_memory memory = ids_ctx_memory(engine->ctx);
    uint64_t need = sizeof(uint32_t) * (unknowns * unknowns + 2 * BATCH * (unknowns + tableaux));
    uint64_t left = memory.budget > memory.live ? memory.budget - memory.live : 0;

    if (memory.budget == 0 || need <= left) {
        return IDS_OK;
    }
    return idsi_fail(engine->ctx, IDS_ERR_LIMIT,
                     "a partition of degree %u with %llu tableaux has %llu unknowns; they need up "
                     "to %llu bytes, %llu of the budget of %llu bytes are left",
                     (unsigned)engine->skews.list[shape]->shape.cells,
                     (unsigned long long)tableaux, (unsigned long long)unknowns,
                     (unsigned long long)need, (unsigned long long)left,
                     (unsigned long long)memory.budget);
}

ids_status idsi_shape_solve(idsi_scratch *scratch, uint32_t shape, bool basis,
                            const atomic_bool *stop, uint64_t *blocks)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = scratch->engine;
    idsi_space *space = &engine->spaces[shape];
    solver v = {.s = scratch, .engine = engine, .shape = shape, .stop = stop};
    size_t tableaux = engine->skews.list[shape]->count;

    if (space->solved) {
        return IDS_OK;
    }
    if (engine->skews.list[shape]->shape.cells == 1) {
        space->dimension = idsi_laws_trivial(engine->laws) ? 0 : 1;
        space->solved = true;
        return IDS_OK;
    }
    IDSI_TRY(idsi_plan_unknowns(engine, shape));
    if (space->unknowns > 0) {
        ids_ctx *ctx = scratch->ctx;
        IDSI_TRY(check_budget(engine, shape));
        idsi_random_seed(&v.random, shape_seed(engine, shape));
        IDSI_TRY(idsi_dense_echelon_create(ctx, engine->prime, space->unknowns, &v.echelon));
        IDSI_TRY(idsi_resize_array(ctx, tableaux * BATCH, sizeof *v.start, &v.start));
        IDSI_TRY(idsi_resize_array(ctx, tableaux * BATCH, sizeof *v.moved, &v.moved));
        IDSI_TRY(idsi_alloc_array(ctx, space->unknowns * BATCH, sizeof *v.product, &v.product));
        IDSI_TRY(idsi_alloc_array(ctx, space->unknowns * BATCH, sizeof *v.rows, &v.rows));
        IDSI_TRY(use_equations(&v));
        if (basis) {
            IDSI_TRY(make_solution(&v));
        } else {
            space->dimension = space->unknowns - (uint32_t)idsi_dense_echelon_rank(v.echelon);
        }
        *blocks += v.blocks;
    }
    space->solved = !atomic_load(stop);
done:
    clear_solver(&v);
    return st;
}
