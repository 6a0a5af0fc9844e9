/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Solving one shape of the partition engine.
 *
 * Every equation of the shape's degree says that an element z of the free algebra is sent to zero,
 * which is one linear equation for every covector r on the Specht module; they are taken with
 * random covectors, a block at a time. When a block of B covectors adds B-2 or fewer independent
 * equations, z is used up: if z still had something to add, so low a yield would have probability
 * at most 2/p^2 (two of B random vectors would lie in a space that the others do not fill).
 * The rows of a wide block are eliminated few by few, and what follows such few is left out.
 *
 * Cheap equations come first and are used up before the next ones are touched. Rows that add
 * nothing cost as much as those that do, so a block should be as wide as what z has to add. That
 * is nearly the same share of the tableaux for all shapes of a degree; a shape of middle size is
 * solved first to learn the shares.
 *
 * An equation that may well add nothing is tested before it is used: two random maps that
 * satisfy all equations so far are evaluated on z, against a few covectors. If z still had
 * something to add, all values would vanish with probability at most 1/p^2 + 1/p^PROBE, about. A
 * test is much cheaper than a block, because two maps are evaluated and not a basis. All tests of a
 * shape use the same covectors: up to the first test that errs, what is tested does not depend on
 * them, so the probabilities add up all the same.
 *
 * The random vectors of a shape come from a seed of its own, and the solution space's basis is
 * that of the reduced echelon form; neither depends on the order in which threads take the shapes.
 */
#include <string.h>

#include "partition_private.h"

#define PROBE 16u
/* Equations that should add fewer rows are tested first. */
#define TESTED_ROWS 8u
#define BATCH 96u
/* Covectors come in multiples of so many, for the sake of the cache; BATCH is a multiple. */
#define LINE 16u
/* Rows that are eliminated at a time: two strips of the kernels. */
#define FEED 12u
/* Rows beyond what is expected: a few, and a share. */
#define SPARE_ROWS 4u
#define SPARE_SHARE 0.06

typedef struct solver {
    idsi_scratch *s;
    idsi_partition_engine *engine;
    uint32_t shape;
    idsi_random random;
    idsi_dense_echelon *echelon;
    idsi_covectors covectors; /* for the equations that are used */
    idsi_covectors probes;    /* for tests */
    uint32_t *gathered;       /* tableaux x width: covectors of several terms, added up */
    uint32_t *product;        /* unknowns x width: of one term, zeros in between */
    uint32_t *sum;            /* unknowns x width: of the terms so far */
    uint32_t *rows;           /* BATCH x unknowns: equations to be eliminated */
    const atomic_bool *stop;  /* set when another thread failed */
    const double *share;      /* expected; NULL: nothing is known */
    double *shown;            /* the share that each equation had here; NULL: not wanted */
} solver;

static void clear_solver(solver *v)
{
    idsi_dense_echelon_free(v->echelon);
    idsi_covectors_clear(&v->covectors);
    idsi_covectors_clear(&v->probes);
    idsi_free(v->s->ctx, v->gathered);
    idsi_free(v->s->ctx, v->product);
    idsi_free(v->s->ctx, v->sum);
    idsi_free(v->s->ctx, v->rows);
}

/* The sums of the terms become rows: rows[b][u] = sum[u][b]. */
static void turn_sums(const solver *v, size_t width)
{
    size_t unknowns = v->engine->spaces[v->shape].unknowns;

    for (size_t from = 0; from < unknowns; from += 16) {
        size_t to = from + 16 < unknowns ? from + 16 : unknowns;
        for (size_t b = 0; b < width; b++) {
            for (size_t u = from; u < to; u++) {
                v->rows[b * unknowns + u] = v->sum[u * width + b];
            }
        }
    }
}

/*
 * The covectors for the terms of an equation from number *t on that have one expression, added up,
 * since values are linear in the covectors. They are to be multiplied by *coefficient. *t goes to
 * the next expression.
 */
static ids_status gather_terms(solver *v, idsi_covectors *covectors, const idsi_equation *equation,
                               size_t *t, const uint32_t **block, uint32_t *coefficient)
{
    ids_status st = IDS_OK;
    size_t entries = (size_t)covectors->skew->count * covectors->width;
    uint32_t p = v->engine->prime;
    size_t first = *t;
    size_t end = first;

    while (end < equation->count && equation->terms[end].expr == equation->terms[first].expr) {
        end++;
    }
    *t = end;
    *coefficient = 1;
    if (end == first + 1) {
        *coefficient = equation->terms[first].coefficient;
        return idsi_covectors_get(covectors, &equation->terms[first], block);
    }
    for (size_t i = first; i < end; i++) {
        const uint32_t *moved = NULL;
        if ((i & 0xffu) == 0xffu) {
            IDSI_TRY(idsi_poll(v->engine->ctx, NULL));
        }
        IDSI_TRY(idsi_covectors_get(covectors, &equation->terms[i], &moved));
        if (i == first) {
            memcpy(v->gathered, moved, entries * sizeof *moved);
            idsi_dense_combine(p, v->gathered, equation->terms[i].coefficient, moved, 0, entries);
        } else {
            idsi_dense_combine(p, v->gathered, 1, moved, equation->terms[i].coefficient, entries);
        }
    }
    *block = v->gathered;
done:
    return st;
}

/* One block of covectors for one equation, into the rows. */
static ids_status use_equation(solver *v, const idsi_equation *equation, size_t width)
{
    ids_status st = IDS_OK;
    const idsi_partition_engine *engine = v->engine;
    const idsi_space *space = &engine->spaces[v->shape];

    memset(v->sum, 0, width * space->unknowns * sizeof *v->sum);
    idsi_covectors_draw(&v->covectors, &v->random, width);
    for (size_t t = 0; t < equation->count;) {
        uint32_t expr = equation->terms[t].expr;
        uint32_t coefficient = 0;
        const uint32_t *block = NULL;
        uint32_t form = idsi_form_find(engine, &engine->exprs[expr]);
        if (form == UINT32_MAX || space->offset[form] == space->offset[form + 1]) {
            t++;
            continue;
        }
        IDSI_TRY(gather_terms(v, &v->covectors, equation, &t, &block, &coefficient));
        IDSI_TRY(idsi_contract_product(v->s, v->shape, expr, block, width, v->product));
        size_t from = space->offset[form] * width;
        size_t count = space->offset[form + 1] * width - from;
        idsi_dense_combine(engine->prime, v->sum + from, 1, v->product + from, coefficient, count);
        memset(v->product + from, 0, count * sizeof *v->product);
    }
    turn_sums(v, width);
    IDSI_TRY(idsi_poll(engine->ctx, NULL));
done:
    return st;
}

static bool is_done(const solver *v)
{
    return idsi_dense_echelon_rank(v->echelon) == v->engine->spaces[v->shape].unknowns ||
           atomic_load(v->stop);
}

/*
 * Adds the rows to the echelon form, some after the others, until some add nothing to speak of:
 * then *more is false.
 */
static ids_status add_rows(solver *v, size_t width, bool *more)
{
    ids_status st = IDS_OK;
    size_t unknowns = v->engine->spaces[v->shape].unknowns;

    *more = true;
    for (size_t from = 0; *more && from < width; from += FEED) {
        size_t count = width - from < FEED ? width - from : FEED;
        size_t before = idsi_dense_echelon_rank(v->echelon);
        IDSI_TRY(idsi_dense_echelon_add(v->echelon, v->rows + from * unknowns, count, NULL));
        *more = idsi_dense_echelon_rank(v->echelon) - before + 2 > count;
    }
done:
    return st;
}

/* Uses an equation in blocks until it has nothing to add; `expected` rows are worth taking. */
static ids_status drain_equation(solver *v, const idsi_equation *equation, size_t expected)
{
    ids_status st = IDS_OK;
    size_t used = 0;
    bool more = true;

    while (more && !is_done(v)) {
        size_t width = expected > used ? expected - used : used / 2;
        width = width < PROBE ? PROBE : width;
        width = width > BATCH ? BATCH : width;
        width = (width + LINE - 1) / LINE * LINE;
        IDSI_TRY(use_equation(v, equation, width));
        IDSI_TRY(add_rows(v, width, &more));
        used += width;
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
        idsi_dense_echelon_solution(v->echelon, &v->random, maps->values + (size_t)k * unknowns);
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
    uint64_t total[IDSI_MAP_COUNT * PROBE] = {0};

    for (size_t t = 0; t < equation->count;) {
        uint32_t expr = equation->terms[t].expr;
        uint32_t coefficient = 0;
        uint32_t sums[IDSI_MAP_COUNT * PROBE] = {0};
        const uint32_t *block = NULL;
        IDSI_TRY(gather_terms(v, &v->probes, equation, &t, &block, &coefficient));
        IDSI_TRY(idsi_contract_maps(v->s, v->shape, expr, block, PROBE, maps, sums));
        for (size_t i = 0; i < IDSI_MAP_COUNT * PROBE; i++) {
            total[i] = (total[i] + (uint64_t)coefficient * sums[i]) % engine->prime;
        }
    }
    *more = false;
    for (size_t i = 0; i < IDSI_MAP_COUNT * PROBE; i++) {
        *more = *more || total[i] != 0;
    }
    IDSI_TRY(idsi_poll(engine->ctx, NULL));
done:
    return st;
}

/* Rows that an equation is expected to add, with some to spare; 0 when nothing is known. */
static size_t expected_rows(const solver *v, size_t equation)
{
    double rows =
        v->share == NULL ? 0 : v->share[equation] * v->engine->skews.list[v->shape]->count;
    return (size_t)(rows * (1 + SPARE_SHARE)) + (rows < 1 ? 0 : SPARE_ROWS);
}

static ids_status use_equations(solver *v)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = v->engine;
    const idsi_degree *degree = &engine->degree[engine->skews.list[v->shape]->shape.cells];
    double tableaux = engine->skews.list[v->shape]->count;
    idsi_maps maps = {0};
    bool testing = v->share != NULL;

    for (size_t i = 0; i < degree->equation_count && !is_done(v); i++) {
        const idsi_equation *equation = &degree->equations[i];
        size_t before = idsi_dense_echelon_rank(v->echelon);
        size_t expected = expected_rows(v, i);
        bool more = true;
        if (testing && expected < TESTED_ROWS) {
            if (maps.values == NULL) {
                IDSI_TRY(draw_maps(v, &maps));
            }
            IDSI_TRY(test_equation(v, equation, &maps, &more));
        }
        if (more) {
            IDSI_TRY(drain_equation(v, equation, expected));
            idsi_maps_clear(v->s->ctx, &maps);
        }
        size_t added = idsi_dense_echelon_rank(v->echelon) - before;
        testing = v->share != NULL || added < PROBE;
        if (v->shown != NULL) {
            v->shown[i] = (double)added / tableaux;
        }
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
    uint32_t *solutions = NULL;

    space->dimension = space->unknowns - (uint32_t)idsi_dense_echelon_rank(v->echelon);
    if (space->dimension == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_dense_echelon_complete(v->echelon));
    IDSI_TRY(idsi_alloc_array(v->s->ctx, (size_t)space->dimension * space->unknowns,
                              sizeof *solutions, &solutions));
    idsi_dense_echelon_solutions(v->echelon, solutions);
    IDSI_TRY(idsi_left_init(v->s->ctx, v->engine->prime, space->dimension, space->unknowns,
                            solutions, space->unknowns, &space->solution));
done:
    idsi_free(v->s->ctx, solutions);
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
    uint64_t blocks = BATCH * (3 * unknowns + 8 * tableaux);
    uint64_t need = sizeof(uint32_t) * (unknowns * unknowns + blocks);
    uint64_t left = memory.budget > memory.live ? memory.budget - memory.live : 0;

    if (memory.budget == 0 || need <= left) {
        return IDS_OK;
    }
    return idsi_fail(engine->ctx, IDS_ERR_LIMIT,
                     "a partition of degree %u with %llu tableaux has %llu unknowns; they need up "
                     "to %llu bytes, %llu of the budget of %llu bytes are left",
                     (unsigned)engine->skews.list[shape]->shape.cells, (unsigned long long)tableaux,
                     (unsigned long long)unknowns, (unsigned long long)need,
                     (unsigned long long)left, (unsigned long long)memory.budget);
}

/*
 * Every equation is given up once, and every block before that adds a row at least. (How many
 * blocks it was depends on what was learned from other shapes; a bound should not.)
 */
static uint64_t most_blocks(const idsi_partition_engine *engine, uint32_t shape)
{
    uint64_t equations = engine->degree[engine->skews.list[shape]->shape.cells].equation_count;

    return equations > 0 ? equations + engine->spaces[shape].unknowns : 0;
}

static ids_status solve_unknowns(solver *v, bool basis)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = v->s->ctx;
    idsi_space *space = &v->engine->spaces[v->shape];

    IDSI_TRY(check_budget(v->engine, v->shape));
    idsi_random_seed(&v->random, shape_seed(v->engine, v->shape));
    IDSI_TRY(idsi_dense_echelon_create(ctx, v->engine->prime, space->unknowns, &v->echelon));
    IDSI_TRY(idsi_covectors_init(&v->covectors, v->s, v->shape, BATCH));
    IDSI_TRY(idsi_covectors_init(&v->probes, v->s, v->shape, PROBE));
    idsi_covectors_draw(&v->probes, &v->random, PROBE);
    IDSI_TRY(idsi_resize_array(ctx, (size_t)v->covectors.skew->count * BATCH, sizeof *v->gathered,
                               &v->gathered));
    IDSI_TRY(
        idsi_alloc_array(ctx, (size_t)space->unknowns * BATCH, sizeof *v->product, &v->product));
    IDSI_TRY(idsi_resize_array(ctx, (size_t)space->unknowns * BATCH, sizeof *v->sum, &v->sum));
    IDSI_TRY(idsi_resize_array(ctx, (size_t)space->unknowns * BATCH, sizeof *v->rows, &v->rows));
    IDSI_TRY(use_equations(v));
    if (basis) {
        IDSI_TRY(make_solution(v));
    } else {
        space->dimension = space->unknowns - (uint32_t)idsi_dense_echelon_rank(v->echelon);
    }
done:
    return st;
}

ids_status idsi_shape_solve(idsi_scratch *scratch, uint32_t shape, bool basis,
                            const atomic_bool *stop, const double *share, double *shown)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = scratch->engine;
    idsi_space *space = &engine->spaces[shape];
    solver v = {.s = scratch,
                .engine = engine,
                .shape = shape,
                .stop = stop,
                .share = share,
                .shown = shown};

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
        IDSI_TRY(solve_unknowns(&v, basis));
        space->blocks = most_blocks(engine, shape);
    }
    space->solved = !atomic_load(stop);
done:
    clear_solver(&v);
    return st;
}
