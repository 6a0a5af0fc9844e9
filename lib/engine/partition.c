/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The partition engine: solving one shape, generators, and the order of the work.
 *
 * A shape is solved by linear equations for its unknowns. Every equation of its degree says that an
 * element z of the free algebra is sent to zero, which is one linear equation for every covector r
 * on the Specht module; they are taken with random covectors, a block at a time, in turn, and
 * eliminated in batches. When a block of B covectors adds B-2 or fewer independent equations, z is
 * used up: if z still had something to add, so low a yield would have probability at most 2/p^2
 * (two of B random vectors would lie in a space that the others do not fill). Equations that have
 * nothing to add cost one small block.
 *
 * The degrees follow each other; within a degree the shapes are independent, and threads take them
 * one by one. The random vectors of a shape come from a seed of its own, and the solution space's
 * basis is that of the reduced echelon form, so nothing depends on the number of threads.
 */
#include <stdatomic.h>
#include <string.h>

#include "partition_private.h"

#define FIRST_BLOCK 16u
#define BATCH 192u

/* ---- one shape --------------------------------------------------------------------------------- */

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
    uint32_t owner[BATCH]; /* whose rows they are */
    bool independent[BATCH];
    uint32_t *width; /* of each equation's next block; 0: it is used up */
    size_t left;     /* equations that are not */
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
    idsi_free(v->s->ctx, v->width);
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

/* Eliminates the batch; each equation's yield decides whether it goes on. */
static ids_status flush_batch(solver *v)
{
    ids_status st = IDS_OK;
    size_t from = 0;

    IDSI_TRY(idsi_dense_echelon_add(v->echelon, v->rows, v->row_count, v->independent));
    while (from < v->row_count) {
        uint32_t owner = v->owner[from];
        uint32_t width = v->width[owner];
        uint32_t yield = 0;
        for (size_t i = from; i < from + width; i++) {
            yield += v->independent[i];
        }
        from += width;
        if (yield + 2 <= width) {
            v->width[owner] = 0;
            v->left--;
        } else if (yield == width && 2 * width <= BATCH) {
            v->width[owner] = 2 * width;
        }
    }
    memset(v->rows, 0,
           v->row_count * v->engine->spaces[v->shape].unknowns * sizeof *v->rows);
    v->row_count = 0;
done:
    return st;
}

/* One block of covectors for one equation, into the batch. */
static ids_status use_equation(solver *v, uint32_t number)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = v->engine;
    const idsi_space *space = &engine->spaces[v->shape];
    uint32_t tableaux = engine->skews.list[v->shape]->count;
    const idsi_equation *equation =
        &engine->degree[engine->skews.list[v->shape]->shape.cells].equations[number];
    uint32_t width = v->width[number];
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
    for (uint32_t b = 0; b < width; b++) {
        v->owner[v->row_count + b] = number;
    }
    v->row_count += width;
    v->blocks++;
done:
    return st;
}

/*
 * All equations in turn, until each is used up. An equation that has rows in the batch waits for
 * them to be eliminated before it is asked again.
 */
static ids_status use_equations(solver *v)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = v->engine;
    const idsi_degree *degree = &engine->degree[engine->skews.list[v->shape]->shape.cells];
    uint32_t unknowns = engine->spaces[v->shape].unknowns;

    v->left = degree->equation_count;
    for (size_t i = 0; i < degree->equation_count; i++) {
        v->width[i] = FIRST_BLOCK;
    }
    while (v->left > 0) {
        for (uint32_t i = 0; i < degree->equation_count; i++) {
            if (idsi_dense_echelon_rank(v->echelon) == unknowns || atomic_load(v->stop)) {
                return IDS_OK;
            }
            IDSI_TRY(idsi_poll(engine->ctx, NULL));
            if (v->width[i] > 0) {
                if (v->row_count + v->width[i] > BATCH) {
                    IDSI_TRY(flush_batch(v));
                }
                if (v->width[i] > 0) {
                    IDSI_TRY(use_equation(v, i));
                }
            }
        }
        IDSI_TRY(flush_batch(v));
    }
done:
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

/* Solves a shape; without `basis` only its dimension is wanted. */
static ids_status solve_shape(idsi_scratch *scratch, uint32_t shape, bool basis,
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
        size_t equations = engine->degree[engine->skews.list[shape]->shape.cells].equation_count;
        idsi_random_seed(&v.random, shape_seed(engine, shape));
        IDSI_TRY(idsi_dense_echelon_create(ctx, engine->prime, space->unknowns, &v.echelon));
        IDSI_TRY(idsi_resize_array(ctx, tableaux * BATCH, sizeof *v.start, &v.start));
        IDSI_TRY(idsi_resize_array(ctx, tableaux * BATCH, sizeof *v.moved, &v.moved));
        IDSI_TRY(idsi_alloc_array(ctx, space->unknowns * BATCH, sizeof *v.product, &v.product));
        IDSI_TRY(idsi_alloc_array(ctx, space->unknowns * BATCH, sizeof *v.rows, &v.rows));
        IDSI_TRY(idsi_alloc_array(ctx, equations, sizeof *v.width, &v.width));
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

/* ---- generators ---------------------------------------------------------------------------------- */

/* The partitions of a degree that occur in F/I, each with what the generators see of it. */
typedef struct sight {
    uint32_t shape;
    idsi_dense_echelon *echelon; /* rows: values against random covectors */
} sight;

typedef struct chooser {
    idsi_scratch *s;
    idsi_partition_engine *engine;
    uint32_t degree;
    const idsi_form *form;
    uint32_t arg[IDS_MAX_ARITY];
    sight *sights;
    size_t sight_count;
    size_t capacity;
    idsi_random random;
} chooser;

static bool is_straight(const idsi_shape *shape)
{
    return shape->inner[0] == 0;
}

/* Rank that an expression adds to the sight of one partition. */
static ids_status look(chooser *c, sight *seen, uint32_t expr, size_t *added)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = c->engine;
    size_t dimension = engine->spaces[seen->shape].dimension;
    size_t tableaux = engine->skews.list[seen->shape]->count;
    size_t width = dimension - idsi_dense_echelon_rank(seen->echelon) + 2;
    uint32_t *block = NULL;
    uint32_t *values = NULL;
    uint32_t *rows = NULL;

    *added = 0;
    if (width == 2) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_alloc_array(c->s->ctx, tableaux * width, sizeof *block, &block));
    IDSI_TRY(idsi_alloc_array(c->s->ctx, dimension * width, sizeof *values, &values));
    IDSI_TRY(idsi_alloc_array(c->s->ctx, dimension * width, sizeof *rows, &rows));
    for (size_t i = 0; i < tableaux * width; i++) {
        block[i] = idsi_random_residue(&c->random, engine->prime);
    }
    IDSI_TRY(idsi_contract_values(c->s, seen->shape, expr, block, width, values));
    for (size_t i = 0; i < dimension; i++) {
        for (size_t b = 0; b < width; b++) {
            rows[b * dimension + i] = values[i * width + b];
        }
    }
    size_t before = idsi_dense_echelon_rank(seen->echelon);
    IDSI_TRY(idsi_dense_echelon_add(seen->echelon, rows, width, NULL));
    *added = idsi_dense_echelon_rank(seen->echelon) - before;
done:
    idsi_free(c->s->ctx, block);
    idsi_free(c->s->ctx, values);
    idsi_free(c->s->ctx, rows);
    return st;
}

static bool all_seen(const chooser *c)
{
    for (size_t k = 0; k < c->sight_count; k++) {
        if (idsi_dense_echelon_rank(c->sights[k].echelon) <
            c->engine->spaces[c->sights[k].shape].dimension) {
            return false;
        }
    }
    return true;
}

/* Takes an expression as generator when it shows something new of some partition. */
static ids_status try_generator(chooser *c, uint32_t expr)
{
    ids_status st = IDS_OK;
    idsi_degree *degree = &c->engine->degree[c->degree];
    size_t total = 0;

    for (size_t k = 0; k < c->sight_count; k++) {
        size_t added = 0;
        IDSI_TRY(look(c, &c->sights[k], expr, &added));
        total += added;
    }
    if (total > 0) {
        IDSI_TRY(idsi_grow(c->engine->ctx, degree->generator_count, &c->capacity,
                           sizeof *degree->generators, &degree->generators));
        degree->generators[degree->generator_count] = expr;
        degree->generator_count++;
    }
done:
    return st;
}

static ids_status try_products(chooser *c, uint32_t place)
{
    ids_status st = IDS_OK;
    uint32_t expr = 0;

    if (all_seen(c)) {
        return IDS_OK;
    }
    if (place == c->form->arity) {
        IDSI_TRY(idsi_expr_intern(c->engine, c->form->op, c->arg, &expr));
        return try_generator(c, expr);
    }
    const idsi_degree *degree = &c->engine->degree[c->form->degree[place]];
    for (size_t g = 0; g < degree->generator_count; g++) {
        c->arg[place] = degree->generators[g];
        IDSI_TRY(try_products(c, place + 1));
    }
done:
    return st;
}

static ids_status open_sights(chooser *c)
{
    ids_status st = IDS_OK;
    const idsi_degree *degree = &c->engine->degree[c->degree];

    IDSI_TRY(idsi_alloc_array(c->s->ctx, degree->shape_count, sizeof *c->sights, &c->sights));
    for (size_t k = 0; k < degree->shape_count; k++) {
        uint32_t shape = degree->shapes[k];
        uint32_t dimension = c->engine->spaces[shape].dimension;
        if (dimension > 0 && is_straight(&c->engine->skews.list[shape]->shape)) {
            sight *fresh = &c->sights[c->sight_count];
            fresh->shape = shape;
            c->sight_count++;
            IDSI_TRY(idsi_dense_echelon_create(c->s->ctx, c->engine->prime, dimension,
                                               &fresh->echelon));
        }
    }
done:
    return st;
}

static ids_status choose_generators(idsi_scratch *scratch, uint32_t degree)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = scratch->engine;
    idsi_degree *entry = &engine->degree[degree];
    chooser c = {.s = scratch, .engine = engine, .degree = degree};

    if (entry->generators_made) {
        return IDS_OK;
    }
    idsi_random_seed(&c.random, engine->prime + degree);
    if (degree == 1) {
        uint32_t letter = 0;
        IDSI_TRY(idsi_expr_intern(engine, UINT32_MAX, NULL, &letter));
        if (!idsi_laws_trivial(engine->laws)) {
            IDSI_TRY(idsi_alloc_array(engine->ctx, 1, sizeof *entry->generators,
                                      &entry->generators));
            entry->generators[0] = letter;
            entry->generator_count = 1;
        }
    } else {
        IDSI_TRY(open_sights(&c));
        for (size_t k = 0; k < entry->form_count; k++) {
            c.form = &entry->forms[k];
            IDSI_TRY(try_products(&c, 0));
        }
    }
    entry->generators_made = true;
done:
    for (size_t k = 0; k < c.sight_count; k++) {
        idsi_dense_echelon_free(c.sights[k].echelon);
    }
    idsi_free(scratch->ctx, c.sights);
    return st;
}

/* ---- one degree ------------------------------------------------------------------------------------ */

/* Degrees that arguments of a law or equal arguments of an operation can have. */
static uint32_t largest_argument(const idsi_partition_engine *engine, uint32_t degree)
{
    uint32_t largest = 1;

    for (size_t i = 0; i < engine->laws->count; i++) {
        uint32_t law = engine->laws->law[i].degree;
        if (law > 1 && law <= degree && degree - law + 1 > largest) {
            largest = degree - law + 1;
        }
    }
    for (size_t k = 0; k < engine->degree[degree].form_count; k++) {
        const idsi_form *form = &engine->degree[degree].forms[k];
        if (engine->sig->ops[form->op].group.symmetry != IDS_SYMMETRY_NONE) {
            for (uint32_t i = 0; i < form->arity; i++) {
                for (uint32_t j = 0; j < i; j++) {
                    if (form->degree[i] == form->degree[j]) {
                        /* an equal pair brings in the generators of all the arguments */
                        uint32_t core = form->degree[form->core];
                        largest = core > largest ? core : largest;
                    }
                }
            }
        }
    }
    return largest;
}

/* Shapes of a degree, taken by threads one by one. */
typedef struct crew {
    idsi_partition_engine *engine;
    uint32_t degree;
    uint32_t *shapes; /* largest first */
    size_t count;
    bool basis; /* solutions are wanted, not only their number */
    double cost;
    _Atomic double cost_done;
    atomic_size_t next;
    atomic_uint_least64_t blocks;
    atomic_bool stop;
} crew;

typedef struct worker {
    struct crew *crew;
    idsi_scratch scratch;
    ids_status st;
} worker;

/* The elimination, which is most of the work, grows with the cube of the number of tableaux. */
static double shape_cost(const idsi_partition_engine *engine, uint32_t shape)
{
    double tableaux = engine->skews.list[shape]->count;
    return tableaux * tableaux * tableaux;
}

static void add_cost(crew *c, double cost)
{
    double done = atomic_load(&c->cost_done);
    while (!atomic_compare_exchange_weak(&c->cost_done, &done, done + cost)) {
    }
}

static ids_status report_crew(crew *c)
{
    ids_progress progress = {.stage = "partitions",
                             .degree = c->degree,
                             .done = atomic_load(&c->next),
                             .total = c->count,
                             .share = atomic_load(&c->cost_done) / c->cost};
    progress.done = progress.done < progress.total ? progress.done : progress.total;
    return idsi_poll(c->engine->ctx, &progress);
}

static void work(worker *w, bool first)
{
    crew *c = w->crew;
    while (w->st == IDS_OK && !atomic_load(&c->stop)) {
        size_t k = atomic_fetch_add(&c->next, 1);
        uint64_t blocks = 0;
        if (k >= c->count) {
            return;
        }
        w->st = solve_shape(&w->scratch, c->shapes[k], c->basis, &c->stop, &blocks);
        atomic_fetch_add(&c->blocks, blocks);
        add_cost(c, shape_cost(c->engine, c->shapes[k]));
        if (w->st == IDS_OK && first) {
            w->st = report_crew(c);
        }
    }
    if (w->st != IDS_OK) {
        atomic_store(&c->stop, true);
    }
}

static void *work_in_thread(void *user)
{
    work(user, false);
    return NULL;
}

static ids_status run_crew(crew *c)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = c->engine->ctx;
    uint32_t count = idsi_threads(ctx);
    worker *workers = NULL;
    pthread_t *threads = NULL;
    uint32_t started = 0;

    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *workers, &workers));
    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *threads, &threads));
    for (uint32_t i = 0; i < count; i++) {
        workers[i].crew = c;
        workers[i].scratch.ctx = ctx;
        workers[i].scratch.engine = c->engine;
        IDSI_TRY(idsi_workspace_init(&workers[i].scratch.work, ctx));
    }
    for (uint32_t i = 1; i < count; i++) {
        if (pthread_create(&threads[i], NULL, work_in_thread, &workers[i]) != 0) {
            break; /* fewer threads do the same work */
        }
        started++;
    }
    work(&workers[0], true);
    for (uint32_t i = 1; i <= started; i++) {
        pthread_join(threads[i], NULL);
    }
    for (uint32_t i = 0; i < count && st == IDS_OK; i++) {
        st = workers[i].st;
    }
done:
    for (uint32_t i = 0; workers != NULL && i < count; i++) {
        if (workers[i].scratch.work.ctx != NULL) {
            idsi_workspace_clear(&workers[i].scratch.work);
        }
    }
    idsi_free(ctx, workers);
    idsi_free(ctx, threads);
    return st;
}

static void note_error(idsi_partition_engine *engine, uint64_t blocks)
{
    double p = engine->prime;
    engine->error += 2.0 * (double)blocks / (p * p);
}

static ids_status make_equations(idsi_partition_engine *engine, uint32_t degree)
{
    ids_status st = IDS_OK;
    idsi_scratch scratch = {.ctx = engine->ctx, .engine = engine};

    if (engine->degree[degree].equations_made) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_workspace_init(&scratch.work, engine->ctx));
    uint32_t largest = largest_argument(engine, degree);
    for (uint32_t d = 1; d <= largest && d < degree; d++) {
        IDSI_TRY(choose_generators(&scratch, d));
    }
    IDSI_TRY(idsi_equations_make(engine, degree));
done:
    if (scratch.work.ctx != NULL) {
        idsi_workspace_clear(&scratch.work);
    }
    return st;
}

/* Largest shapes first, so that the threads end together; shapes of equal size stay in order. */
static void sort_shapes(const idsi_partition_engine *engine, uint32_t *shapes, size_t count)
{
    for (size_t i = 1; i < count; i++) {
        uint32_t shape = shapes[i];
        size_t at = i;
        while (at > 0 &&
               engine->skews.list[shapes[at - 1]]->count < engine->skews.list[shape]->count) {
            shapes[at] = shapes[at - 1];
            at--;
        }
        shapes[at] = shape;
    }
}

static ids_status solve_shapes(idsi_partition_engine *engine, uint32_t degree, uint32_t *shapes,
                               size_t count)
{
    ids_status st = IDS_OK;
    crew hands = {.engine = engine,
                  .degree = degree,
                  .shapes = shapes,
                  .count = count,
                  .basis = degree < engine->top};

    IDSI_TRY(make_equations(engine, degree));
    sort_shapes(engine, shapes, count);
    for (size_t k = 0; k < count; k++) {
        hands.cost += shape_cost(engine, shapes[k]);
    }
    st = run_crew(&hands);
    note_error(engine, atomic_load(&hands.blocks));
done:
    return st;
}

ids_status idsi_partition_solve(idsi_partition_engine *engine, uint32_t degree)
{
    ids_status st = IDS_OK;

    for (uint32_t d = engine->solved + 1; d <= degree; d++) {
        IDSI_TRY(solve_shapes(engine, d, engine->degree[d].shapes, engine->degree[d].shape_count));
        engine->solved = d;
    }
done:
    return st;
}

ids_status idsi_partition_multiplicity(idsi_partition_engine *engine, const uint8_t *parts,
                                       uint32_t rows, uint32_t *multiplicity)
{
    ids_status st = IDS_OK;
    static const uint8_t empty[IDSI_SHAPE_MAX] = {0};
    uint32_t shape = 0;
    uint32_t degree = 0;

    for (uint32_t i = 0; i < rows; i++) {
        degree += parts[i];
    }
    IDSI_TRY(idsi_partition_solve(engine, degree - 1));
    IDSI_TRY(idsi_skews_get(&engine->skews, parts, empty, rows, &shape));
    if (shape >= engine->space_count) {
        *multiplicity = 0; /* there is no monomial of this degree */
        return IDS_OK;
    }
    if (!engine->spaces[shape].solved) {
        IDSI_TRY(solve_shapes(engine, degree, &shape, 1));
    }
    *multiplicity = engine->spaces[shape].dimension;
done:
    return st;
}

/* ---- the engine -------------------------------------------------------------------------------------- */

ids_status idsi_partition_create(ids_ctx *ctx, const idsi_laws *laws, uint32_t prime, uint32_t top,
                                 idsi_partition_engine **engine)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *made = NULL;

    if (top > IDSI_SHAPE_MAX || prime <= 2 * IDSI_SHAPE_MAX) {
        return idsi_fail(ctx, IDS_ERR_LIMIT,
                         "the partition engine goes to degree %u and needs a larger prime than %u",
                         IDSI_SHAPE_MAX, 2 * IDSI_SHAPE_MAX);
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->laws = laws;
    made->sig = laws->pres->sig;
    made->prime = prime;
    made->top = top;
    pthread_mutex_init(&made->lock, NULL);
    idsi_random_seed(&made->random, prime);
    for (uint32_t d = 1; d <= 2 * IDSI_SHAPE_MAX; d++) {
        made->inverse[d] = idsi_mod_inverse(d, prime);
    }
    idsi_skews_init(&made->skews, ctx);
    IDSI_TRY(idsi_plan_forms(made));
    IDSI_TRY(idsi_plan_shapes(made));
    *engine = made;
    made = NULL;
done:
    idsi_partition_free(made);
    return st;
}

void idsi_partition_free(idsi_partition_engine *engine)
{
    if (engine == NULL) {
        return;
    }
    ids_ctx *ctx = engine->ctx;
    for (size_t i = 0; i < engine->value_slots; i++) {
        idsi_free(ctx, engine->values[i].matrix);
    }
    for (size_t i = 0; i < engine->space_count; i++) {
        idsi_free(ctx, engine->spaces[i].solution);
        idsi_free(ctx, engine->spaces[i].offset);
    }
    for (uint32_t d = 0; d <= IDSI_SHAPE_MAX; d++) {
        idsi_degree *degree = &engine->degree[d];
        idsi_equations_clear(ctx, degree);
        idsi_free(ctx, degree->forms);
        idsi_free(ctx, degree->generators);
        idsi_free(ctx, degree->shapes);
    }
    idsi_free(ctx, engine->values);
    idsi_free(ctx, engine->spaces);
    idsi_free(ctx, engine->exprs);
    idsi_free(ctx, engine->expr_slot);
    idsi_skews_clear(&engine->skews);
    pthread_mutex_destroy(&engine->lock);
    idsi_free(ctx, engine);
}
