/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Samples over another presentation.
 *
 * A tree becomes a polynomial in the operations there, with the same letters, and a combination is
 * 0 when it is a consequence of the identities there. So numbers are drawn for the monomials there
 * that are not rewritten by the consequences, extended to all others by the rewriting rules, and a
 * tree gets the sum of those of its monomials.
 */
#include <string.h>

#include "fresh_private.h"

/* A sum of trees, not canonical, equal ones apart. */
typedef struct terms {
    size_t count;
    size_t capacity;
    uint32_t *values;
    idsi_token (*trees)[2u * IDSI_MAX_IDENTITY_DEGREE];
    size_t room;
    uint8_t content[IDSI_MAX_IDENTITY_DEGREE];
} terms;

typedef struct expander {
    const idsi_sample *s;
    const idsi_component *base;
    uint32_t *coefficient[IDS_MAX_OPERATIONS];
} expander;

static void clear_terms(ids_ctx *ctx, terms *t)
{
    idsi_free(ctx, t->values);
    idsi_free(ctx, t->trees);
    *t = (terms){0};
}

static ids_status grow_terms(ids_ctx *ctx, terms *t)
{
    ids_status st = IDS_OK;
    IDSI_TRY(idsi_grow(ctx, t->count, &t->capacity, sizeof *t->values, &t->values));
    IDSI_TRY(idsi_grow(ctx, t->count, &t->room, sizeof *t->trees, &t->trees));
done:
    return st;
}

/* Adds the products of one term of an operation's polynomial, all choices for its leaves. */
static ids_status add_products(const expander *e, const idsi_token *tree, size_t length,
                               uint32_t value, const terms *args, uint32_t arity, terms *out)
{
    ids_status st = IDS_OK;
    size_t choice[IDS_MAX_ARITY] = {0};

    for (uint32_t i = 0; i < arity; i++) {
        if (args[i].count == 0) {
            return IDS_OK;
        }
    }
    for (bool more = true; more;) {
        uint32_t product = value;
        size_t used = 0;
        IDSI_TRY(grow_terms(e->s->ctx, out));
        for (size_t i = 0; i < length; i++) {
            if (idsi_is_node(tree[i])) {
                out->trees[out->count][used++] = tree[i];
                continue;
            }
            const terms *arg = &args[tree[i] - 1];
            const idsi_token *part = arg->trees[choice[tree[i] - 1]];
            const size_t part_length = idsi_tree_length(e->base->sig, part);
            memcpy(out->trees[out->count] + used, part, part_length * sizeof *part);
            used += part_length;
            product = idsi_mod_mul(product, arg->values[choice[tree[i] - 1]], e->s->prime);
        }
        out->values[out->count++] = product;
        more = false;
        for (uint32_t i = 0; !more && i < arity; i++) {
            more = ++choice[i] < args[i].count;
            choice[i] = more ? choice[i] : 0;
        }
    }
done:
    return st;
}

/* Sign of the order in which a term has the arguments. */
static int term_sign(const expander *e, const idsi_token *tree, size_t length, const terms *args)
{
    uint8_t content[IDS_MAX_ARITY][IDSI_MAX_IDENTITY_DEGREE];
    uint8_t order[IDS_MAX_ARITY];
    uint32_t count = 0;

    for (size_t i = 0; e->s->odd && i < length; i++) {
        if (!idsi_is_node(tree[i])) {
            memcpy(content[tree[i] - 1], args[tree[i] - 1].content, sizeof content[0]);
            order[count++] = (uint8_t)(tree[i] - 1);
        }
    }
    return idsi_odd_sign((const uint8_t(*)[IDSI_MAX_IDENTITY_DEGREE])content, order, count);
}

static ids_status expand(const expander *e, const idsi_token **at, terms *out)
{
    ids_status st = IDS_OK;
    const idsi_token token = *(*at)++;
    terms args[IDS_MAX_ARITY] = {{0}};

    if (!idsi_is_node(token)) {
        IDSI_TRY(grow_terms(e->s->ctx, out));
        out->trees[0][0] = token;
        out->values[0] = 1;
        out->count = 1;
        out->content[token - 1] = 1;
        return IDS_OK;
    }
    const uint32_t op = idsi_node_op(token);
    const idsi_poly *poly = &e->s->model->value[op];
    const uint32_t arity = e->s->model->pres->sig->ops[op].arity;
    for (uint32_t i = 0; i < arity; i++) {
        IDSI_TRY(expand(e, at, &args[i]));
        for (uint32_t k = 0; k < IDSI_MAX_IDENTITY_DEGREE; k++) {
            out->content[k] = (uint8_t)(out->content[k] + args[i].content[k]);
        }
    }
    for (size_t t = 0; t < poly->count; t++) {
        const idsi_token *tree = poly->tokens + poly->start[t];
        const size_t length = poly->start[t + 1] - poly->start[t];
        uint32_t value = e->coefficient[op][t];
        if (term_sign(e, tree, length, args) < 0) {
            value = idsi_mod_neg(value, e->s->prime);
        }
        IDSI_TRY(add_products(e, tree, length, value, args, arity, out));
    }
done:
    for (uint32_t i = 0; i < IDS_MAX_ARITY; i++) {
        clear_terms(e->s->ctx, &args[i]);
    }
    return st;
}

/* ---- functionals ----------------------------------------------------------------------------- */

/* values (monomials x width): numbers of all monomials of the other presentation. */
static ids_status draw_functionals(const idsi_sample *s, const idsi_component *base,
                                   uint32_t *values)
{
    ids_status st = IDS_OK;
    const size_t monomials = idsi_component_monomials(base)->count;
    idsi_system *system = NULL;
    idsi_echelon *echelon = NULL;
    bool good = true;

    IDSI_TRY(idsi_system_create(base, &system));
    IDSI_TRY(idsi_system_reduce(system, s->prime, &good));
    IDSI_TRY(idsi_fresh_eliminate(system, NULL, s->seed, &echelon));
    for (size_t m = 0; m < monomials; m++) {
        const idsi_entry *entries = NULL;
        uint32_t count = 0;
        uint32_t *row = values + m * s->width;
        if (!idsi_echelon_rule(echelon, (uint32_t)m, &entries, &count)) {
            for (size_t j = 0; j < s->width; j++) {
                row[j] = idsi_sample_mix(s->seed, m, j, s->prime);
            }
            continue;
        }
        /* The right sides of rules have only monomials that are not rewritten. */
        for (uint32_t k = 0; k < count; k++) {
            for (size_t j = 0; j < s->width; j++) {
                const uint32_t value = idsi_sample_mix(s->seed, entries[k].column, j, s->prime);
                row[j] = (uint32_t)((row[j] + (uint64_t)entries[k].value * value) % s->prime);
            }
        }
    }
done:
    idsi_echelon_free(echelon);
    idsi_system_free(system);
    return st;
}

static ids_status add_tree(const expander *e, size_t i, const uint32_t *values)
{
    ids_status st = IDS_OK;
    const idsi_sample *s = e->s;
    const idsi_token *at = s->trees[i];
    uint32_t *row = s->out + i * s->width;
    terms sum = {0};

    IDSI_TRY(expand(e, &at, &sum));
    for (size_t t = 0; t < sum.count; t++) {
        const size_t length = idsi_tree_length(e->base->sig, sum.trees[t]);
        const int sign = idsi_component_canonicalize(e->base, sum.trees[t], length);
        if (sign == 0) {
            continue;
        }
        const size_t m = idsi_component_find(e->base, sum.trees[t]);
        const uint32_t value = sign < 0 ? idsi_mod_neg(sum.values[t], s->prime) : sum.values[t];
        for (size_t j = 0; j < s->width; j++) {
            row[j] = (uint32_t)((row[j] + (uint64_t)value * values[m * s->width + j]) % s->prime);
        }
    }
    st = idsi_poll(s->ctx, NULL);
done:
    clear_terms(s->ctx, &sum);
    return st;
}

static ids_status reduce_coefficients(expander *e, bool *good)
{
    ids_status st = IDS_OK;

    for (size_t op = 0; op < e->s->model->pres->sig->count; op++) {
        const idsi_poly *poly = &e->s->model->value[op];
        IDSI_TRY(idsi_alloc_array(e->s->ctx, poly->count, sizeof(uint32_t), &e->coefficient[op]));
        for (size_t t = 0; t < poly->count; t++) {
            *good = *good &&
                    idsi_mod_rational(poly->coefficients[t], e->s->prime, &e->coefficient[op][t]);
        }
    }
done:
    return st;
}

ids_status idsi_sample_over(const idsi_sample *s, bool *good)
{
    ids_status st = IDS_OK;
    expander e = {.s = s};
    idsi_component *base = NULL;
    uint32_t *values = NULL;

    *good = true;
    IDSI_TRY(reduce_coefficients(&e, good));
    if (!*good) {
        goto done;
    }
    IDSI_TRY(idsi_component_create_content(s->ctx, s->model->base, s->power, s->variables, s->odd,
                                           &base));
    e.base = base;
    IDSI_TRY(idsi_alloc_array(s->ctx, idsi_component_monomials(base)->count * s->width,
                              sizeof *values, &values));
    IDSI_TRY(draw_functionals(s, base, values));
    for (size_t i = 0; i < s->count; i++) {
        IDSI_TRY(add_tree(&e, i, values));
    }
done:
    for (size_t op = 0; op < IDS_MAX_OPERATIONS; op++) {
        idsi_free(s->ctx, e.coefficient[op]);
    }
    idsi_component_free(base);
    idsi_free(s->ctx, values);
    return st;
}
