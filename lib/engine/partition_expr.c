/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The equations of a degree: what every S_n-map on products must send to zero.
 *
 *     symmetry   op(g1, .., gk) - sign * op(g permuted), for orders that keep the degrees
 *     identity   f(g1, .., gd)
 *
 * where g1, g2, .. run over expressions that generate F/I of their degree as a module of the
 * symmetric group: a map that is equivariant and kills these kills the rest. A term is an
 * expression with its labels permuted, and the permutation is kept as a word in exchanges of
 * neighbours. Terms of an identity are rewritten so that every product has its arguments in
 * canonical order of degrees, because the unknowns know only these.
 */
#include <stdlib.h>
#include <string.h>

#include "partition_private.h"

/* ---- expressions ------------------------------------------------------------------------- */

static size_t find_expr(const idsi_partition_engine *engine, const idsi_expr *expr)
{
    const uint32_t *words = (const uint32_t *)expr;
    uint64_t hash = 0;
    for (size_t i = 0; i < sizeof *expr / sizeof *words; i++) {
        hash = idsi_hash_add(hash, words[i]);
    }
    size_t at = (size_t)hash & (engine->expr_slots - 1);
    while (engine->expr_slot[at] != 0 &&
           memcmp(&engine->exprs[engine->expr_slot[at] - 1], expr, sizeof *expr) != 0) {
        at = (at + 1) & (engine->expr_slots - 1);
    }
    return at;
}

static ids_status grow_expr_slots(idsi_partition_engine *engine)
{
    ids_status st = IDS_OK;
    size_t count = engine->expr_slots == 0 ? 256 : 2 * engine->expr_slots;
    uint32_t *slot = NULL;

    IDSI_TRY(idsi_alloc_array(engine->ctx, count, sizeof *slot, &slot));
    idsi_free(engine->ctx, engine->expr_slot);
    engine->expr_slot = slot;
    engine->expr_slots = count;
    for (size_t i = 0; i < engine->expr_count; i++) {
        engine->expr_slot[find_expr(engine, &engine->exprs[i])] = (uint32_t)i + 1;
    }
done:
    return st;
}

ids_status idsi_expr_intern(idsi_partition_engine *engine, uint32_t op, const uint32_t *args,
                            uint32_t *number)
{
    ids_status st = IDS_OK;
    idsi_expr expr;

    memset(&expr, 0, sizeof expr);
    expr.op = op;
    expr.degree = 1;
    if (op != UINT32_MAX) {
        expr.degree = 0;
        for (uint32_t i = 0; i < engine->sig->ops[op].group.arity; i++) {
            expr.arg[i] = args[i];
            expr.degree += engine->exprs[args[i]].degree;
        }
    }
    if (2 * (engine->expr_count + 1) > engine->expr_slots) {
        IDSI_TRY(grow_expr_slots(engine));
    }
    size_t at = find_expr(engine, &expr);
    if (engine->expr_slot[at] == 0) {
        IDSI_TRY(idsi_grow(engine->ctx, engine->expr_count, &engine->expr_capacity,
                           sizeof *engine->exprs, &engine->exprs));
        engine->exprs[engine->expr_count] = expr;
        engine->expr_count++;
        engine->expr_slot[at] = (uint32_t)engine->expr_count;
    }
    *number = engine->expr_slot[at] - 1;
done:
    return st;
}

uint32_t idsi_form_find(const idsi_partition_engine *engine, const idsi_expr *expr)
{
    const idsi_degree *degree = &engine->degree[expr->degree];
    for (size_t k = 0; k < degree->form_count; k++) {
        const idsi_form *form = &degree->forms[k];
        bool same = form->op == expr->op;
        for (uint32_t i = 0; same && i < form->arity; i++) {
            same = form->degree[i] == engine->exprs[expr->arg[i]].degree;
        }
        if (same) {
            return (uint32_t)k;
        }
    }
    return UINT32_MAX;
}

/* ---- making equations -------------------------------------------------------------------- */

typedef struct maker {
    idsi_partition_engine *engine;
    ids_ctx *ctx;
    uint32_t degree;
    size_t equation_capacity;
    /* arguments at hand */
    uint32_t count;
    uint8_t arg_degree[IDSI_MAX_IDENTITY_DEGREE];
    uint32_t arg[IDSI_MAX_IDENTITY_DEGREE];
    /* the equation at work */
    idsi_equation equation;
    size_t term_capacity;
    /* what it is made for */
    const idsi_form *form;
    const uint8_t *image; /* of a symmetry */
    int sign;
    const idsi_law *law;
    ids_status (*finish)(struct maker *m);
} maker;

static void clear_equation(ids_ctx *ctx, idsi_equation *equation)
{
    for (size_t i = 0; i < equation->count; i++) {
        idsi_free(ctx, equation->terms[i].word);
    }
    idsi_free(ctx, equation->terms);
    memset(equation, 0, sizeof *equation);
}

void idsi_equations_clear(ids_ctx *ctx, idsi_degree *degree)
{
    for (size_t i = 0; i < degree->equation_count; i++) {
        clear_equation(ctx, &degree->equations[i]);
    }
    idsi_free(ctx, degree->equations);
    degree->equations = NULL;
    degree->equation_count = 0;
}

/* Adds coefficient * expr with the arguments' blocks of labels in the given order. */
static ids_status add_term(maker *m, uint32_t coefficient, uint32_t expr, const uint8_t *order)
{
    ids_status st = IDS_OK;
    idsi_equation *equation = &m->equation;
    uint8_t label[IDSI_SHAPE_MAX];
    uint8_t word[IDSI_SHAPE_MAX * IDSI_SHAPE_MAX];
    uint8_t start[IDSI_MAX_IDENTITY_DEGREE] = {0};
    uint32_t n = 0;

    for (uint32_t v = 0; v < m->count; v++) {
        start[v] = (uint8_t)n;
        n += m->arg_degree[v];
    }
    n = 0;
    for (uint32_t i = 0; i < m->count; i++) {
        for (uint32_t k = 0; k < m->arg_degree[order[i]]; k++) {
            label[n++] = (uint8_t)(start[order[i]] + k);
        }
    }
    size_t length = idsi_seminormal_word(label, n, word);
    if ((equation->count & 0xfffu) == 0xfffu) {
        IDSI_TRY(idsi_poll(m->ctx, NULL));
    }
    IDSI_TRY(idsi_grow(m->ctx, equation->count, &m->term_capacity, sizeof *equation->terms,
                       &equation->terms));
    idsi_term *term = &equation->terms[equation->count];
    *term = (idsi_term){.coefficient = coefficient, .expr = expr, .word_length = (uint16_t)length};
    equation->count++;
    IDSI_TRY(idsi_alloc_array(m->ctx, length, 1, &term->word));
    memcpy(term->word, word, length);
done:
    return st;
}

/* By expression, then by word. */
static int compare_terms(const void *a, const void *b)
{
    const idsi_term *x = a;
    const idsi_term *y = b;
    if (x->expr != y->expr) {
        return x->expr < y->expr ? -1 : 1;
    }
    if (x->word_length != y->word_length) {
        return x->word_length < y->word_length ? -1 : 1;
    }
    return memcmp(x->word, y->word, x->word_length);
}

/* Sorts the terms of the equation at work and adds up those that are equal. */
static void collect_terms(maker *m)
{
    idsi_equation *equation = &m->equation;
    idsi_term *terms = equation->terms;
    size_t kept = 0;

    if (equation->count == 0) {
        return;
    }
    qsort(terms, equation->count, sizeof *terms, compare_terms);
    for (size_t i = 1; i < equation->count; i++) {
        if (compare_terms(&terms[kept], &terms[i]) == 0) {
            terms[kept].coefficient =
                (terms[kept].coefficient + terms[i].coefficient) % m->engine->prime;
            idsi_free(m->ctx, terms[i].word);
        } else {
            terms[++kept] = terms[i];
        }
    }
    equation->count = kept + 1;
}

/* Stores the equation at work, unless nothing is left of it. */
static ids_status store_equation(maker *m)
{
    ids_status st = IDS_OK;
    idsi_degree *degree = &m->engine->degree[m->degree];
    idsi_equation *equation = &m->equation;
    size_t kept = 0;

    collect_terms(m);
    for (size_t i = 0; i < equation->count; i++) {
        if (equation->terms[i].coefficient != 0) {
            equation->terms[kept++] = equation->terms[i];
        } else {
            idsi_free(m->ctx, equation->terms[i].word);
        }
    }
    equation->count = kept;
    if (kept > 0) {
        for (size_t i = 0; i < kept; i++) {
            const idsi_expr *expr = &m->engine->exprs[equation->terms[i].expr];
            uint32_t largest = 1;
            for (uint32_t k = 0; k < m->engine->sig->ops[expr->op].arity; k++) {
                uint32_t d = m->engine->exprs[expr->arg[k]].degree;
                largest = d > largest ? d : largest;
            }
            equation->cost += 1.0 + (double)(UINT64_C(1) << (2 * largest));
        }
        IDSI_TRY(idsi_grow(m->ctx, degree->equation_count, &m->equation_capacity,
                           sizeof *degree->equations, &degree->equations));
        degree->equations[degree->equation_count] = *equation;
        degree->equation_count++;
        memset(equation, 0, sizeof *equation);
    }
done:
    clear_equation(m->ctx, equation);
    m->term_capacity = 0;
    return st;
}

/* ---- symmetries -------------------------------------------------------------------------- */

static ids_status finish_symmetry(maker *m)
{
    ids_status st = IDS_OK;
    uint32_t args[IDS_MAX_ARITY] = {0};
    uint8_t order[IDSI_MAX_IDENTITY_DEGREE];
    uint32_t expr = 0;
    uint32_t p = m->engine->prime;

    for (uint32_t i = 0; i < m->count; i++) {
        order[i] = (uint8_t)i;
    }
    IDSI_TRY(idsi_expr_intern(m->engine, m->form->op, m->arg, &expr));
    IDSI_TRY(add_term(m, 1, expr, order));
    for (uint32_t i = 0; i < m->count; i++) {
        args[i] = m->arg[m->image[i]];
    }
    IDSI_TRY(idsi_expr_intern(m->engine, m->form->op, args, &expr));
    IDSI_TRY(add_term(m, m->sign > 0 ? p - 1 : 1, expr, m->image));
    IDSI_TRY(store_equation(m));
done:
    return st;
}

/* All choices of generators for the arguments from `place` on; `tied[i]` bounds by an earlier. */
static ids_status choose_generators(maker *m, uint32_t place, const int8_t *tied)
{
    ids_status st = IDS_OK;

    if (place == m->count) {
        return m->finish(m);
    }
    const idsi_degree *degree = &m->engine->degree[m->arg_degree[place]];
    for (size_t g = 0; g < degree->generator_count; g++) {
        m->arg[place] = degree->generators[g];
        if (tied[place] < 0 || m->arg[tied[place]] <= m->arg[place]) {
            IDSI_TRY(choose_generators(m, place + 1, tied));
        }
    }
done:
    return st;
}

static ids_status impose_order(maker *m, const uint8_t *image, int sign)
{
    ids_status st = IDS_OK;
    int8_t tied[IDSI_MAX_IDENTITY_DEGREE];
    memset(tied, -1, sizeof tied);
    m->image = image;
    m->sign = sign;
    m->finish = finish_symmetry;
    st = choose_generators(m, 0, tied);
    m->image = NULL;
    return st;
}

static ids_status symmetry_equations(maker *m, const idsi_form *form)
{
    ids_status st = IDS_OK;
    const idsi_group *group = &m->engine->sig->ops[form->op].group;
    uint8_t image[IDS_MAX_ARITY];

    m->form = form;
    m->count = form->arity;
    memcpy(m->arg_degree, form->degree, form->arity);
    if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        for (uint64_t e = 1; e < group->order; e++) {
            const ids_signed_order *element = &group->elements[e];
            bool keeps = true;
            for (uint32_t i = 0; keeps && i < form->arity; i++) {
                keeps = form->degree[element->image[i]] == form->degree[i];
            }
            if (keeps) {
                IDSI_TRY(impose_order(m, element->image, element->sign));
            }
        }
    } else if (group->symmetry != IDS_SYMMETRY_NONE) {
        int sign = group->symmetry == IDS_SYMMETRY_ALTERNATING ? -1 : 1;
        for (uint32_t k = 0; k + 1 < form->arity; k++) {
            if (form->degree[k] == form->degree[k + 1]) {
                for (uint32_t i = 0; i < form->arity; i++) {
                    image[i] = (uint8_t)(i == k ? k + 1 : i == k + 1 ? k : i);
                }
                IDSI_TRY(impose_order(m, image, sign));
            }
        }
    }
done:
    return st;
}

/* ---- identities -------------------------------------------------------------------------- */

/* Expression of a node or variable, its sign, and the variables from left to right. */
static ids_status rewrite(maker *m, int32_t at, uint32_t *expr, int *sign, uint8_t *order,
                          uint32_t *count)
{
    ids_status st = IDS_OK;
    uint32_t args[IDS_MAX_ARITY] = {0};
    uint32_t sorted[IDS_MAX_ARITY] = {0};
    uint64_t key[IDS_MAX_ARITY];
    uint8_t image[IDS_MAX_ARITY];
    uint8_t part[IDS_MAX_ARITY][IDSI_MAX_IDENTITY_DEGREE];
    uint32_t part_count[IDS_MAX_ARITY] = {0};

    if (at >= 0) {
        *expr = m->arg[at];
        order[(*count)++] = (uint8_t)at;
        return IDS_OK;
    }
    const idsi_law_node *node = &m->law->nodes[-1 - at];
    for (uint32_t i = 0; i < node->arity; i++) {
        IDSI_TRY(rewrite(m, node->arg[i], &args[i], sign, part[i], &part_count[i]));
        key[i] = m->engine->exprs[args[i]].degree;
    }
    *sign *= idsi_group_canonical(&m->engine->sig->ops[node->op].group, key, NULL, image);
    for (uint32_t i = 0; i < node->arity; i++) {
        sorted[i] = args[image[i]];
        memcpy(order + *count, part[image[i]], part_count[image[i]]);
        *count += part_count[image[i]];
    }
    IDSI_TRY(idsi_expr_intern(m->engine, node->op, sorted, expr));
done:
    return st;
}

static ids_status finish_identity(maker *m)
{
    ids_status st = IDS_OK;
    uint32_t p = m->engine->prime;

    for (size_t t = 0; t < m->law->poly->count; t++) {
        uint8_t order[IDSI_MAX_IDENTITY_DEGREE] = {0};
        uint32_t coefficient = 0;
        uint32_t expr = 0;
        uint32_t count = 0;
        int sign = 1;
        if (!idsi_mod_rational(m->law->poly->coefficients[t], p, &coefficient)) {
            st = idsi_fail(m->ctx, IDS_ERR_INTERNAL, "a law has a fraction as coefficient");
            goto done;
        }
        IDSI_TRY(rewrite(m, -1 - (int32_t)m->law->root[t], &expr, &sign, order, &count));
        IDSI_TRY(add_term(m, sign > 0 ? coefficient : idsi_mod_neg(coefficient, p), expr, order));
    }
    IDSI_TRY(store_equation(m));
done:
    return st;
}

/* Degrees of the law's variables from `place` on, descending within a symmetry class. */
static ids_status choose_degrees(maker *m, uint32_t place, uint32_t left, int8_t *tied)
{
    ids_status st = IDS_OK;
    int before = -1;

    if (place == m->count) {
        return choose_generators(m, 0, tied);
    }
    uint32_t places = m->count - place;
    for (uint32_t v = 0; v < place; v++) {
        before = m->law->class_of[v] == m->law->class_of[place] ? (int)v : before;
    }
    uint32_t most = left - (places - 1);
    uint32_t least = places == 1 ? left : 1;
    if (before >= 0 && m->arg_degree[before] < most) {
        most = m->arg_degree[before];
    }
    for (uint32_t d = most; d >= least && d > 0; d--) {
        m->arg_degree[place] = (uint8_t)d;
        tied[place] = (int8_t)(before >= 0 && m->arg_degree[before] == d ? before : -1);
        IDSI_TRY(choose_degrees(m, place + 1, left - d, tied));
    }
done:
    return st;
}

static int compare_costs(const void *a, const void *b)
{
    const idsi_equation *x = a;
    const idsi_equation *y = b;
    return x->cost < y->cost ? -1 : x->cost > y->cost;
}

ids_status idsi_equations_make(idsi_partition_engine *engine, uint32_t degree)
{
    ids_status st = IDS_OK;
    maker m = {.engine = engine, .ctx = engine->ctx, .degree = degree};
    idsi_degree *entry = &engine->degree[degree];
    int8_t tied[IDSI_MAX_IDENTITY_DEGREE];

    for (size_t k = 0; k < entry->form_count; k++) {
        IDSI_TRY(symmetry_equations(&m, &entry->forms[k]));
    }
    for (size_t i = 0; i < engine->laws->count; i++) {
        m.law = &engine->laws->law[i];
        m.count = m.law->degree;
        m.finish = finish_identity;
        if (m.law->degree > 1 && m.law->degree <= degree) {
            IDSI_TRY(choose_degrees(&m, 0, degree, tied));
        }
    }
    if (entry->equation_count > 1) {
        qsort(entry->equations, entry->equation_count, sizeof *entry->equations, compare_costs);
    }
    entry->equations_made = true;
done:
    clear_equation(engine->ctx, &m.equation);
    return st;
}
