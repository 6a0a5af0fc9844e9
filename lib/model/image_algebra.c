/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Images in an algebra.
 *
 * Let a be n elements, x a coordinate, w a covector on the module of a partition. Then
 *
 *     g  ->  sum over s in S_n of  x(g(a_s(1), .., a_s(n))) * w s
 *
 * is an S_n-map, and all maps from the image are combinations of these. The values on the
 * generators are a row of a matrix; its rank is the multiplicity. Points a are drawn at random with
 * a covector for each coordinate, until two in a row add nothing: if something were missing, what a
 * point adds is the value of a nonzero polynomial of degree n + 1, so that both vanish has
 * probability at most ((n + 1) / p)^2.
 *
 * The permutations are gone through by exchanges of neighbours (Johnson and Trotter), so that the
 * covectors are moved by one exchange at a time. The values of the generators at a point do not
 * depend on the partition and are kept.
 *
 * When nothing is to be left to chance, the points are all tuples of basis elements, up to order.
 */
#include <string.h>

#include "realize_private.h"

/* n! evaluations: more are too many. */
#define MOST_DEGREE 9u
/* On all basis tuples: dimension (dimension + 1) .. (dimension + n - 1) evaluations. */
#define MOST_EVALUATIONS 2e5

/* ---- permutations ---------------------------------------------------------------------------- */

typedef struct walk {
    uint32_t n;
    uint8_t at[MOST_DEGREE]; /* a permutation of 0 .. n-1 */
    int8_t direction[MOST_DEGREE];
} walk;

static void walk_begin(walk *w, uint32_t n)
{
    w->n = n;
    for (uint32_t i = 0; i < n; i++) {
        w->at[i] = (uint8_t)i;
        w->direction[i] = -1;
    }
}

/* Exchanges two neighbours and returns the place of the first; n when all have been seen. */
static uint32_t walk_next(walk *w)
{
    uint32_t from = w->n;
    for (uint32_t i = 0; i < w->n; i++) {
        const int64_t to = (int64_t)i + w->direction[w->at[i]];
        if (to >= 0 && to < w->n && w->at[to] < w->at[i] &&
            (from == w->n || w->at[i] > w->at[from])) {
            from = i;
        }
    }
    if (from == w->n) {
        return w->n;
    }
    const uint8_t mover = w->at[from];
    const uint32_t to = w->direction[mover] < 0 ? from - 1 : from + 1;
    w->at[from] = w->at[to];
    w->at[to] = mover;
    for (uint32_t v = mover + 1u; v < w->n; v++) {
        w->direction[v] = (int8_t)-w->direction[v];
    }
    return from < to ? from : to;
}

/* ---- values at a point ----------------------------------------------------------------------- */

typedef struct evaluator {
    const idsi_image *image;
    size_t dimension;
    const uint32_t *point; /* degree x dimension */
    const uint8_t *order;  /* leaf i is element order[i] */
    uint32_t *stack;       /* values of subtrees, 2 * degree of them */
    size_t used;
} evaluator;

static const uint32_t *evaluate(evaluator *e, const idsi_token **at)
{
    const idsi_token token = *(*at)++;
    const uint32_t *arguments[IDS_MAX_ARITY] = {NULL};

    if (!idsi_is_node(token)) {
        return e->point + e->order[token - 1] * e->dimension;
    }
    const uint32_t op = idsi_node_op(token);
    uint32_t *value = e->stack + e->dimension * e->used++;
    for (uint32_t i = 0; i < e->image->model->pres->sig->ops[op].arity; i++) {
        arguments[i] = evaluate(e, at);
    }
    (void)idsi_residues_product(e->image->residues, e->image->model->operation[op], arguments,
                                value);
    return value;
}

/* A random point, or one of basis elements. */
static void choose_point(idsi_image *image, const uint8_t *tuple, uint32_t *point)
{
    const size_t dimension = image->model->algebra->dimension;

    for (size_t i = 0; i < image->degree * dimension; i++) {
        point[i] = tuple == NULL ? idsi_random_residue(&image->random, image->prime)
                                 : (uint32_t)(tuple[i / dimension] == i % dimension);
    }
}

/* Evaluates all generators at a point, in all orders: values in the order of the walk, owned. */
static ids_status evaluate_point(idsi_image *image, const uint8_t *tuple, uint32_t **out)
{
    ids_status st = IDS_OK;
    const size_t dimension = image->model->algebra->dimension;
    evaluator e = {.image = image, .dimension = dimension};
    uint32_t *point = NULL;
    uint32_t *values = NULL;
    size_t orders = 1;
    size_t used = 0;
    walk w;

    for (uint32_t i = 2; i <= image->degree; i++) {
        orders *= i;
    }
    IDSI_TRY(idsi_alloc_array(image->ctx, image->degree * dimension, sizeof *point, &point));
    IDSI_TRY(
        idsi_alloc_array(image->ctx, 2 * image->degree * dimension, sizeof *e.stack, &e.stack));
    IDSI_TRY(
        idsi_alloc_array(image->ctx, orders * image->count * dimension, sizeof *values, &values));
    choose_point(image, tuple, point);
    e.point = point;
    walk_begin(&w, image->degree);
    e.order = w.at;
    do {
        for (size_t g = 0; g < image->count; g++) {
            const idsi_token *at = image->trees[g];
            e.used = 0;
            memcpy(values + used, evaluate(&e, &at), dimension * sizeof *values);
            used += dimension;
        }
        IDSI_TRY(idsi_poll(image->ctx, NULL));
    } while (walk_next(&w) < w.n);
    *out = values;
    values = NULL;
done:
    idsi_free(image->ctx, point);
    idsi_free(image->ctx, e.stack);
    idsi_free(image->ctx, values);
    return st;
}

/* One more random point, which is kept. */
static ids_status draw_point(idsi_image *image)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_grow(image->ctx, image->point_count, &image->point_capacity,
                       sizeof *image->points, &image->points));
    IDSI_TRY(evaluate_point(image, NULL, &image->points[image->point_count]));
    image->point_count++;
done:
    return st;
}

/* ---- maps ------------------------------------------------------------------------------------ */

typedef struct mapper {
    idsi_image *image;
    const idsi_skew *skew;
    size_t dimension;
    uint32_t *block; /* tableaux x dimension covectors */
    uint64_t *sum;   /* generators x tableaux x dimension */
    uint32_t *rows;  /* dimension x (generators x tableaux) */
} mapper;

/* sum += values at one order * covectors */
static void add_order(mapper *m, const uint32_t *values)
{
    const size_t d = m->dimension;
    const uint32_t p = m->image->prime;

    for (size_t g = 0; g < m->image->count; g++) {
        uint64_t *sum = m->sum + g * m->skew->count * d;
        const uint32_t *value = values + g * d;
        for (size_t t = 0; t < m->skew->count; t++) {
            for (size_t k = 0; k < d; k++) {
                sum[t * d + k] = (sum[t * d + k] + (uint64_t)value[k] * m->block[t * d + k]) % p;
            }
        }
    }
}

/* The rows of one point. */
static ids_status make_rows(mapper *m, const uint32_t *values)
{
    ids_status st = IDS_OK;
    const size_t d = m->dimension;
    const size_t columns = m->image->count * m->skew->count;
    uint32_t exchange = 0;
    walk w;

    for (size_t i = 0; i < m->skew->count * d; i++) {
        m->block[i] = idsi_random_residue(&m->image->random, m->image->prime);
    }
    memset(m->sum, 0, columns * d * sizeof *m->sum);
    walk_begin(&w, m->image->degree);
    do {
        add_order(m, values);
        values += m->image->count * d;
        exchange = walk_next(&w);
        if (exchange < w.n) {
            const uint8_t word = (uint8_t)exchange;
            idsi_seminormal_apply(&m->image->engine->seminormal, m->skew, &word, 1, m->block, d);
        }
        IDSI_TRY(idsi_poll(m->image->ctx, NULL));
    } while (exchange < w.n);
    for (size_t i = 0; i < columns; i++) {
        for (size_t k = 0; k < d; k++) {
            m->rows[k * columns + i] = (uint32_t)m->sum[i * d + k];
        }
    }
done:
    return st;
}

/* Random points, until two in a row add nothing. */
static ids_status use_random(mapper *m, idsi_dense_echelon *echelon, uint32_t bound)
{
    ids_status st = IDS_OK;
    idsi_image *image = m->image;
    const double miss = (image->degree + 1.0) / image->prime;
    uint32_t idle = 0;

    for (size_t i = 0; idle < 2 && idsi_dense_echelon_rank(echelon) < bound; i++) {
        const size_t before = idsi_dense_echelon_rank(echelon);
        if (i == image->point_count) {
            IDSI_TRY(draw_point(image));
        }
        IDSI_TRY(make_rows(m, image->points[i]));
        IDSI_TRY(idsi_dense_echelon_add(echelon, m->rows, m->dimension, NULL));
        idle = idsi_dense_echelon_rank(echelon) == before ? idle + 1 : 0;
    }
    image->error = miss * miss;
done:
    return st;
}

/* The next tuple that does not descend; false after the last. */
static bool next_tuple(uint8_t *tuple, uint32_t n, uint32_t dimension)
{
    uint32_t i = n;
    while (i > 0 && tuple[i - 1] + 1u == dimension) {
        i--;
    }
    if (i == 0) {
        return false;
    }
    const uint8_t value = (uint8_t)(tuple[i - 1] + 1);
    memset(tuple + i - 1, value, n - i + 1);
    return true;
}

/* All tuples of basis elements. A covector is drawn for each coordinate, as many times as there are
 * tableaux, so that nothing that a tuple can add is left out but for bad luck with covectors. */
static ids_status use_tuples(mapper *m, idsi_dense_echelon *echelon, uint32_t bound)
{
    ids_status st = IDS_OK;
    uint8_t tuple[MOST_DEGREE] = {0};
    uint32_t *values = NULL;
    bool more = true;

    while (more && idsi_dense_echelon_rank(echelon) < bound) {
        size_t before = 0;
        uint32_t idle = 0;
        IDSI_TRY(evaluate_point(m->image, tuple, &values));
        while (idle < 2 && idsi_dense_echelon_rank(echelon) < bound) {
            before = idsi_dense_echelon_rank(echelon);
            IDSI_TRY(make_rows(m, values));
            IDSI_TRY(idsi_dense_echelon_add(echelon, m->rows, m->dimension, NULL));
            idle = idsi_dense_echelon_rank(echelon) == before ? idle + 1 : 0;
        }
        idsi_free(m->image->ctx, values);
        values = NULL;
        more = next_tuple(tuple, m->image->degree, (uint32_t)m->dimension);
        m->image->error += 1.0 / ((double)m->image->prime * m->image->prime);
    }
done:
    idsi_free(m->image->ctx, values);
    return st;
}

static ids_status count_rank(mapper *m, uint32_t bound, uint32_t *rank)
{
    ids_status st = IDS_OK;
    const size_t columns = m->image->count * m->skew->count;
    idsi_dense_echelon *echelon = NULL;

    IDSI_TRY(idsi_dense_echelon_create(m->image->ctx, m->image->prime, columns, &echelon));
    if (m->image->exact) {
        IDSI_TRY(use_tuples(m, echelon, bound));
    } else {
        IDSI_TRY(use_random(m, echelon, bound));
    }
    *rank = (uint32_t)idsi_dense_echelon_rank(echelon);
done:
    idsi_dense_echelon_free(echelon);
    return st;
}

/* Tuples times orders, as far as that is not too much. */
static ids_status check_tuples(const idsi_image *image)
{
    double tuples = 1;

    for (uint32_t i = 0; i < image->degree; i++) {
        tuples *= image->model->algebra->dimension + (double)i;
    }
    if (image->exact && tuples > MOST_EVALUATIONS) {
        return idsi_fail(image->ctx, IDS_ERR_LIMIT,
                         "degree %u: %.0f evaluations on all basis tuples in all orders; up to "
                         "%.0f are made, and random points need far fewer",
                         image->degree, tuples, MOST_EVALUATIONS);
    }
    return IDS_OK;
}

ids_status idsi_image_algebra(idsi_image *image, const idsi_skew *skew, uint32_t bound,
                              uint32_t *rank)
{
    ids_status st = IDS_OK;
    mapper m = {.image = image, .skew = skew, .dimension = image->model->algebra->dimension};
    const size_t columns = image->count * skew->count;

    if (image->degree > MOST_DEGREE) {
        return idsi_fail(image->ctx, IDS_ERR_LIMIT,
                         "degree %u: an algebra is evaluated in all orders of its arguments, which "
                         "goes to degree %u",
                         image->degree, MOST_DEGREE);
    }
    IDSI_TRY(check_tuples(image));
    IDSI_TRY(idsi_alloc_array(image->ctx, skew->count * m.dimension, sizeof *m.block, &m.block));
    IDSI_TRY(idsi_alloc_array(image->ctx, columns * m.dimension, sizeof *m.sum, &m.sum));
    IDSI_TRY(idsi_alloc_array(image->ctx, columns * m.dimension, sizeof *m.rows, &m.rows));
    IDSI_TRY(count_rank(&m, bound, rank));
done:
    idsi_free(image->ctx, m.block);
    idsi_free(image->ctx, m.sum);
    idsi_free(image->ctx, m.rows);
    return st;
}
