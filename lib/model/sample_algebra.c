/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Samples in an algebra: the coordinates of the values at random points.
 *
 * With even letters a point is an element for each letter. With odd ones it is an element for each
 * of the variables that a letter stands for, and a tree is alternated in these: the values of a
 * subtree are tabulated for all sets of variables that its letters can be,
 *
 *     value(op(A, B), U) = sum over U = V + W of  sign(V, W) op(value(A, V), value(B, W))
 *
 * where the sign counts the pairs, v in V and w in W of the same letter, with v behind w. That is
 * 2^degree values at most, not degree! terms. Even letters are the case of one set.
 */
#include <string.h>

#include "realize_private.h"

#define MOST_DEGREE 12u

typedef struct table {
    uint32_t content; /* code of the letters below */
    uint32_t *values; /* by set, `dimension` each */
} table;

typedef struct sampler {
    const idsi_sample *s;
    const idsi_residues *residues;
    size_t dimension;
    size_t sets; /* 2^degree, or 1 */
    uint32_t letter_of[MOST_DEGREE];
    uint32_t first_of[MOST_DEGREE + 1]; /* first variable of each letter */
    uint32_t stride[MOST_DEGREE];
    uint32_t *code;  /* content of each set */
    uint32_t *point; /* degree x dimension: of each variable, or of each letter */
    uint32_t *room;  /* tables, 2 * degree of them */
    size_t used;
    uint32_t *product; /* one value */
} sampler;

/* Pairs of equal letters in the wrong order. */
static bool is_odd_merge(const sampler *t, size_t first, size_t second)
{
    uint32_t parity = 0;
    for (uint32_t i = 0; i < t->s->degree; i++) {
        for (uint32_t j = 0; (first >> i & 1u) != 0 && j < i; j++) {
            parity += (second >> j & 1u) != 0 && t->letter_of[i] == t->letter_of[j];
        }
    }
    return parity % 2 == 1;
}

static uint32_t *take_table(sampler *t)
{
    uint32_t *values = t->room + t->sets * t->dimension * t->used++;
    memset(values, 0, t->sets * t->dimension * sizeof *values);
    return values;
}

static void evaluate_leaf(sampler *t, idsi_token token, table *out)
{
    const uint32_t letter = token - 1;
    const size_t bytes = t->dimension * sizeof *out->values;

    out->values = take_table(t);
    out->content = t->s->odd ? t->stride[letter] : 0;
    if (!t->s->odd) {
        memcpy(out->values, t->point + letter * t->dimension, bytes);
        return;
    }
    for (uint32_t i = t->first_of[letter]; i < t->first_of[letter + 1]; i++) {
        memcpy(out->values + ((size_t)1 << i) * t->dimension, t->point + i * t->dimension, bytes);
    }
}

/* All ways to give sets to the arguments from `place` on. */
static void join(sampler *t, uint32_t op, const table *args, uint32_t arity, uint32_t place,
                 size_t taken, bool negative, const uint32_t **values, uint32_t *out)
{
    if (place == arity) {
        uint32_t *sum = out + taken * t->dimension;
        if (idsi_residues_product(t->residues, t->s->model->operation[op], values, t->product)) {
            for (size_t k = 0; k < t->dimension; k++) {
                const uint32_t more =
                    negative ? idsi_mod_neg(t->product[k], t->s->prime) : t->product[k];
                sum[k] = (uint32_t)(((uint64_t)sum[k] + more) % t->s->prime);
            }
        }
        return;
    }
    for (size_t set = 0; set < t->sets; set++) {
        if (t->code[set] == args[place].content && (set & taken) == 0) {
            values[place] = args[place].values + set * t->dimension;
            join(t, op, args, arity, place + 1, taken | set,
                 negative != is_odd_merge(t, taken, set), values, out);
        }
    }
}

static void evaluate(sampler *t, const idsi_token **at, table *out)
{
    const idsi_token token = *(*at)++;
    table args[IDS_MAX_ARITY];
    const uint32_t *values[IDS_MAX_ARITY] = {NULL};

    if (!idsi_is_node(token)) {
        evaluate_leaf(t, token, out);
        return;
    }
    const uint32_t op = idsi_node_op(token);
    const uint32_t arity = t->s->model->pres->sig->ops[op].arity;
    out->content = 0;
    for (uint32_t i = 0; i < arity; i++) {
        evaluate(t, at, &args[i]);
        out->content += args[i].content;
    }
    out->values = take_table(t);
    join(t, op, args, arity, 0, 0, false, values, out->values);
}

static ids_status open_sampler(sampler *t)
{
    ids_status st = IDS_OK;
    const idsi_sample *s = t->s;
    uint32_t variable = 0;
    uint32_t stride = 1;

    t->dimension = s->model->algebra->dimension;
    t->sets = s->odd ? (size_t)1 << s->degree : 1;
    for (uint32_t k = 0; k < s->variables; k++) {
        t->first_of[k] = variable;
        t->stride[k] = stride;
        stride *= s->power[k] + 1u;
        for (uint32_t i = 0; i < s->power[k]; i++) {
            t->letter_of[variable++] = k;
        }
    }
    t->first_of[s->variables] = variable;
    IDSI_TRY(idsi_alloc_array(s->ctx, t->sets, sizeof *t->code, &t->code));
    for (size_t set = 0; set < t->sets; set++) {
        for (uint32_t i = 0; i < s->degree; i++) {
            t->code[set] += (set >> i & 1u) != 0 ? t->stride[t->letter_of[i]] : 0;
        }
    }
    IDSI_TRY(idsi_alloc_array(s->ctx, s->degree * t->dimension, sizeof *t->point, &t->point));
    IDSI_TRY(idsi_alloc_array(s->ctx, t->dimension, sizeof *t->product, &t->product));
    IDSI_TRY(idsi_alloc_array(s->ctx, 2 * s->degree * t->sets * t->dimension, sizeof *t->room,
                              &t->room));
done:
    return st;
}

/* All trees at one point, into columns from `column` on. */
static ids_status sample_point(sampler *t, size_t column)
{
    ids_status st = IDS_OK;
    const idsi_sample *s = t->s;
    const size_t whole = t->sets - 1;

    for (size_t i = 0; i < s->degree * t->dimension; i++) {
        t->point[i] = idsi_sample_mix(s->seed, column, i, s->prime);
    }
    for (size_t i = 0; i < s->count; i++) {
        const idsi_token *at = s->trees[i];
        table value = {0};
        t->used = 0;
        evaluate(t, &at, &value);
        for (size_t k = 0; k < t->dimension && column + k < s->width; k++) {
            s->out[i * s->width + column + k] = value.values[whole * t->dimension + k];
        }
        IDSI_TRY(idsi_poll(s->ctx, NULL));
    }
done:
    return st;
}

ids_status idsi_sample_algebra(const idsi_sample *s, bool *good)
{
    ids_status st = IDS_OK;
    sampler t = {.s = s};
    idsi_residues *residues = NULL;

    if (s->degree > MOST_DEGREE) {
        return idsi_fail(s->ctx, IDS_ERR_LIMIT, "degree %u: values in an algebra go to degree %u",
                         s->degree, MOST_DEGREE);
    }
    IDSI_TRY(idsi_residues_create(s->ctx, s->model->algebra, s->prime, good, &residues));
    if (!*good) {
        goto done;
    }
    t.residues = residues;
    IDSI_TRY(open_sampler(&t));
    for (size_t column = 0; column < s->width; column += t.dimension) {
        IDSI_TRY(sample_point(&t, column));
    }
done:
    idsi_free(s->ctx, t.code);
    idsi_free(s->ctx, t.point);
    idsi_free(s->ctx, t.product);
    idsi_free(s->ctx, t.room);
    idsi_residues_free(residues);
    return st;
}
