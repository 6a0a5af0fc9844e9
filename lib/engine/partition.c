/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The partition engine: the order of the work.
 *
 * The degrees follow each other; within a degree the shapes are independent, and threads take them
 * one by one, the largest first. Nothing that a shape's solution depends on depends on the threads.
 * The values that are stored on the way may be computed twice, by two threads, and are the same.
 */
#include <string.h>
#include <time.h>

#include "../core/team_private.h"
#include "partition_private.h"

/* The shape that is solved first has so many tableaux at least, and this part of the most. */
#define PILOT_LEAST 40u
#define PILOT_RATIO 3u

/* ---- one degree -------------------------------------------------------------------------- */

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
    bool basis;               /* solutions are wanted, not only their number */
    _Atomic double cost_done; /* in this degree */
    atomic_size_t next;
    const double *share;
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

/* That of all shapes below a degree. */
static double lower_cost(const idsi_partition_engine *engine, uint32_t degree)
{
    double cost = 0;
    for (uint32_t d = 1; d < degree; d++) {
        for (size_t k = 0; k < engine->degree[d].shape_count; k++) {
            cost += shape_cost(engine, engine->degree[d].shapes[k]);
        }
    }
    return cost;
}

static void add_cost(crew *c, double cost)
{
    double done = atomic_load(&c->cost_done);
    while (!atomic_compare_exchange_weak(&c->cost_done, &done, done + cost)) {
    }
}

static ids_status report_crew(crew *c)
{
    const idsi_partition_engine *engine = c->engine;
    double done = engine->cost_done + atomic_load(&c->cost_done);
    double share = done < engine->cost ? done / engine->cost : 1;
    ids_progress progress = {.stage = "partitions",
                             .degree = c->degree,
                             .done = atomic_load(&c->next),
                             .total = c->count,
                             .share = engine->share_from + engine->share_part * share};
    progress.done = progress.done < progress.total ? progress.done : progress.total;
    return idsi_poll(c->engine->ctx, &progress);
}

/* Processor time of the thread that asks; 0 where the system does not tell. */
static double thread_seconds(void)
{
    struct timespec now = {0};

    if (clock_gettime(CLOCK_THREAD_CPUTIME_ID, &now) != 0) {
        return 0;
    }
    return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static void work(worker *w, bool first)
{
    crew *c = w->crew;
    while (w->st == IDS_OK && !atomic_load(&c->stop)) {
        size_t k = atomic_fetch_add(&c->next, 1);
        if (k >= c->count) {
            return;
        }
        idsi_space *space = &c->engine->spaces[c->shapes[k]];
        double start = thread_seconds();
        w->st = idsi_shape_solve(&w->scratch, c->shapes[k], c->basis, &c->stop, c->share, NULL);
        space->seconds += thread_seconds() - start;
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
    uint32_t count = idsi_team_members(ctx, c->count);
    worker *workers = NULL;
    pthread_t *threads = NULL;
    uint32_t started = 0;

    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *workers, &workers));
    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *threads, &threads));
    for (uint32_t i = 0; i < count; i++) {
        workers[i].crew = c;
        IDSI_TRY(idsi_scratch_init(&workers[i].scratch, c->engine));
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
        idsi_scratch_clear(&workers[i].scratch);
    }
    idsi_free(ctx, workers);
    idsi_free(ctx, threads);
    return st;
}

static ids_status make_equations(idsi_partition_engine *engine, uint32_t degree)
{
    ids_status st = IDS_OK;
    idsi_scratch scratch = {0};

    if (engine->degree[degree].equations_made) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_scratch_init(&scratch, engine));
    uint32_t largest = largest_argument(engine, degree);
    for (uint32_t d = 1; d <= largest && d < degree; d++) {
        IDSI_TRY(idsi_generators_choose(&scratch, d));
    }
    IDSI_TRY(idsi_equations_make(engine, degree));
done:
    idsi_scratch_clear(&scratch);
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

/*
 * Solves a shape of middle size, so that the others know what to expect. It should be so large that
 * the shares are not chance, and so small that nobody has to wait for it.
 */
static ids_status learn_shares(idsi_partition_engine *engine, uint32_t degree, bool basis,
                               const uint32_t *shapes, size_t count)
{
    ids_status st = IDS_OK;
    idsi_degree *entry = &engine->degree[degree];
    idsi_scratch scratch = {0};
    double *share = NULL;
    atomic_bool stop = false;
    size_t at = 0;

    while (at + 1 < count && PILOT_RATIO * (uint64_t)engine->skews.list[shapes[at + 1]]->count >=
                                 engine->skews.list[shapes[0]]->count) {
        at++;
    }
    idsi_space *pilot = count > 0 ? &engine->spaces[shapes[at]] : NULL;
    if (count < 2 || entry->share != NULL || pilot->solved ||
        engine->skews.list[shapes[at]]->count < PILOT_LEAST) {
        return IDS_OK;
    }
    double start = thread_seconds();
    IDSI_TRY(idsi_scratch_init(&scratch, engine));
    IDSI_TRY(idsi_alloc_array(engine->ctx, entry->equation_count, sizeof *share, &share));
    IDSI_TRY(idsi_shape_solve(&scratch, shapes[at], basis, &stop, NULL, share));
    pilot->seconds += thread_seconds() - start;
    entry->share = share;
    share = NULL;
done:
    idsi_scratch_clear(&scratch);
    idsi_free(engine->ctx, share);
    return st;
}

static ids_status solve_shapes(idsi_partition_engine *engine, uint32_t degree, uint32_t *shapes,
                               size_t count)
{
    ids_status st = IDS_OK;
    crew hands = {.engine = engine,
                  .degree = degree,
                  .shapes = shapes,
                  .count = count,
                  .basis = degree < engine->top || engine->top_basis};

    if (count == 0) {
        return IDS_OK;
    }
    IDSI_TRY(make_equations(engine, degree));
    sort_shapes(engine, shapes, count);
    IDSI_TRY(learn_shares(engine, degree, hands.basis, shapes, count));
    hands.share = engine->degree[degree].share;
    st = run_crew(&hands);
    engine->cost_done += atomic_load(&hands.cost_done);
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
    IDSI_TRY(idsi_skews_get(&engine->skews, parts, empty, rows, &shape));
    if (engine->solved < degree && shape < engine->space_count) {
        /* This one alone is wanted of its degree. */
        engine->cost = lower_cost(engine, degree) + shape_cost(engine, shape);
    }
    IDSI_TRY(idsi_partition_solve(engine, degree - 1));
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

ids_status idsi_partition_prepare(idsi_partition_engine *engine, uint32_t degree)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_partition_solve(engine, degree - 1));
    IDSI_TRY(make_equations(engine, degree));
    idsi_degree *entry = &engine->degree[degree];
    sort_shapes(engine, entry->shapes, entry->shape_count);
    IDSI_TRY(learn_shares(engine, degree, degree < engine->top || engine->top_basis, entry->shapes,
                          entry->shape_count));
done:
    return st;
}

/* Number of the straight shape of a partition; UINT32_MAX where its degree has no monomial. */
static ids_status straight_shape(idsi_partition_engine *engine, const uint8_t *parts, uint32_t rows,
                                 uint32_t *shape)
{
    ids_status st = IDS_OK;
    static const uint8_t empty[IDSI_SHAPE_MAX] = {0};

    IDSI_TRY(idsi_skews_get(&engine->skews, parts, empty, rows, shape));
    if (*shape >= engine->space_count) {
        *shape = UINT32_MAX;
    }
done:
    return st;
}

ids_status idsi_partition_account(idsi_partition_engine *engine, const uint8_t *parts,
                                  uint32_t rows, idsi_account *account)
{
    ids_status st = IDS_OK;
    uint32_t shape = 0;

    *account = (idsi_account){0};
    IDSI_TRY(straight_shape(engine, parts, rows, &shape));
    if (shape == UINT32_MAX) {
        return IDS_OK;
    }
    uint32_t degree = engine->skews.list[shape]->shape.cells;
    account->tableaux = engine->skews.list[shape]->count;
    account->seconds = engine->spaces[shape].seconds;
    account->blocks = engine->spaces[shape].blocks;
    for (size_t i = 0; i < engine->space_count; i++) {
        if (engine->skews.list[i]->shape.cells < degree && engine->since[i] > 0 &&
            engine->since[i] <= degree) {
            account->blocks += engine->spaces[i].blocks;
        }
    }
    if (degree > 1 && engine->solved + 1 >= degree) {
        IDSI_TRY(idsi_plan_unknowns(engine, shape));
        account->unknowns = engine->spaces[shape].unknowns;
    }
done:
    return st;
}

/* ---- the engine -------------------------------------------------------------------------- */

ids_status idsi_partition_create(ids_ctx *ctx, const idsi_laws *laws, uint32_t prime, uint32_t top,
                                 idsi_partition_engine **engine)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *made = NULL;
    uint32_t inverse[IDSI_DISTANCE_MAX + 1] = {0};

    IDSI_TRY(idsi_prime_check(ctx, prime));
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
    for (uint32_t d = 1; d <= (uint32_t)IDSI_DISTANCE_MAX; d++) {
        inverse[d] = idsi_mod_inverse(d, prime);
    }
    idsi_seminormal_init(&made->seminormal, prime, inverse);
    idsi_skews_init(&made->skews, ctx);
    IDSI_TRY(idsi_plan_forms(made));
    IDSI_TRY(idsi_plan_shapes(made));
    made->cost = lower_cost(made, top + 1);
    made->share_part = 1;
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
        if (engine->values[i].matrix != NULL) {
            idsi_left_clear(ctx, engine->values[i].matrix);
            idsi_free(ctx, engine->values[i].matrix);
        }
    }
    for (size_t i = 0; i < engine->space_count; i++) {
        idsi_left_clear(ctx, &engine->spaces[i].solution);
        idsi_free(ctx, engine->spaces[i].offset);
    }
    for (uint32_t d = 0; d <= IDSI_SHAPE_MAX; d++) {
        idsi_degree *degree = &engine->degree[d];
        idsi_equations_clear(ctx, degree);
        idsi_free(ctx, degree->share);
        idsi_free(ctx, degree->forms);
        idsi_free(ctx, degree->generators);
        idsi_free(ctx, degree->shapes);
    }
    idsi_free(ctx, engine->since);
    idsi_free(ctx, engine->values);
    idsi_free(ctx, engine->spaces);
    idsi_free(ctx, engine->exprs);
    idsi_free(ctx, engine->expr_slot);
    idsi_skews_clear(&engine->skews);
    pthread_mutex_destroy(&engine->lock);
    idsi_free(ctx, engine);
}
