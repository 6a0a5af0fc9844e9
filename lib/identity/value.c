/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What expressions stand for, and how products and definitions expand.
 *
 * Both are one substitution: an operation is the body op(1, .., k), and a body is expanded term
 * by term. A term with leaves l1, .., lm gives one tree for each choice of a term of the
 * argument at each leaf; the choices are counted through as digits of a number in mixed radix.
 * The number of choices is known beforehand, so nothing is begun that must end at the limit.
 */
#include <string.h>

#include "notation_private.h"

void idsi_value_init(idsi_value *value, ids_ctx *ctx, const ids_signature *sig)
{
    idsi_poly_init(&value->poly, ctx, sig);
    value->nominal_degree = 0;
    value->nominal_length = 0;
}

void idsi_value_clear(idsi_value *value)
{
    idsi_poly_clear(&value->poly);
}

ids_status idsi_value_leaf(idsi_value *value, uint32_t label)
{
    mpq_t one;
    mpq_init(one);
    mpq_set_ui(one, 1, 1);
    ids_status st = idsi_poly_append(&value->poly, one, &label, 1);
    mpq_clear(one);
    value->poly.degree = 1;
    value->nominal[0] = label;
    value->nominal_length = 1;
    value->nominal_degree = 1;
    return st;
}

ids_status idsi_value_scale(idsi_value *value, mpq_srcptr factor)
{
    idsi_poly scaled;
    ids_status st = IDS_OK;
    if (mpq_cmp_ui(factor, 1, 1) == 0) {
        return IDS_OK;
    }
    mpq_t product;
    mpq_init(product);
    idsi_poly_init(&scaled, value->poly.ctx, value->poly.sig);
    for (size_t i = 0; i < value->poly.count && mpq_sgn(factor) != 0; i++) {
        const size_t begin = value->poly.start[i];
        mpq_mul(product, value->poly.coefficients[i], factor);
        IDSI_TRY(idsi_poly_append(&scaled, product, value->poly.tokens + begin,
                                  value->poly.start[i + 1] - begin));
    }
    scaled.degree = scaled.count == 0 ? 0 : value->poly.degree;
    const idsi_poly old = value->poly;
    value->poly = scaled;
    scaled = old;
done:
    idsi_poly_clear(&scaled);
    mpq_clear(product);
    return st;
}

ids_status idsi_value_append(idsi_value *value, const idsi_value *other, int sign)
{
    ids_status st = IDS_OK;
    mpq_t coefficient;
    mpq_init(coefficient);
    for (size_t i = 0; i < other->poly.count; i++) {
        const size_t begin = other->poly.start[i];
        mpq_set(coefficient, other->poly.coefficients[i]);
        if (sign < 0) {
            mpq_neg(coefficient, coefficient);
        }
        IDSI_TRY(idsi_poly_append(&value->poly, coefficient, other->poly.tokens + begin,
                                  other->poly.start[i + 1] - begin));
    }
    if (other->nominal_degree > value->nominal_degree) {
        value->nominal_degree = other->nominal_degree;
        value->nominal_length = other->nominal_length;
        memcpy(value->nominal, other->nominal, other->nominal_length * sizeof *value->nominal);
    }
done:
    mpq_clear(coefficient);
    return st;
}

/* ---- substitution ---------------------------------------------------------------------------- */

/* A tree that is being put together. */
typedef struct assembly {
    idsi_token tokens[IDSI_IDENTITY_TOKENS];
    size_t length;
    uint32_t degree;
} assembly;

static ids_status add_tokens(ids_ctx *ctx, assembly *tree, const idsi_token *tokens, size_t length)
{
    uint32_t leaves = 0;
    for (size_t i = 0; i < length; i++) {
        leaves += !idsi_is_node(tokens[i]);
    }
    /* Nodes come before their leaves, so tokens can run out although the leaves so far do not. */
    if (tree->degree + leaves > IDSI_MAX_IDENTITY_DEGREE ||
        tree->length + length > IDSI_IDENTITY_TOKENS) {
        return idsi_fail(ctx, IDS_ERR_LIMIT,
                         "a monomial of degree over %u; that is the largest degree of an identity",
                         IDSI_MAX_IDENTITY_DEGREE);
    }
    memcpy(tree->tokens + tree->length, tokens, length * sizeof *tokens);
    tree->length += length;
    tree->degree += leaves;
    return IDS_OK;
}

/* One term of a body: its leaves, and the choice of a term of the argument at each. */
typedef struct choice {
    uint32_t leaves;
    const idsi_poly *argument[IDSI_MAX_IDENTITY_DEGREE];
    size_t term[IDSI_MAX_IDENTITY_DEGREE];
} choice;

static ids_status choice_init(choice *c, ids_ctx *ctx, const idsi_token *tree, size_t length,
                              const idsi_value *arguments, bool *any)
{
    uint64_t count = 1;
    memset(c, 0, sizeof *c);
    for (size_t i = 0; i < length; i++) {
        if (!idsi_is_node(tree[i])) {
            const idsi_poly *argument = &arguments[tree[i] - 1].poly;
            c->argument[c->leaves++] = argument;
            if (!idsi_mul_u64(count, argument->count, &count)) {
                count = UINT64_MAX;
            }
        }
    }
    *any = true;
    for (uint32_t i = 0; i < c->leaves; i++) {
        *any = *any && c->argument[i]->count > 0;
    }
    if (*any && count > IDSI_MAX_TERMS) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "a product that expands to more than %u terms",
                         IDSI_MAX_TERMS);
    }
    return IDS_OK;
}

static bool choice_next(choice *c)
{
    for (uint32_t i = c->leaves; i > 0; i--) {
        if (++c->term[i - 1] < c->argument[i - 1]->count) {
            return true;
        }
        c->term[i - 1] = 0;
    }
    return false;
}

/* Adds coefficient * tree, the leaves replaced by all choices of terms of the arguments. */
static ids_status expand_term(idsi_poly *out, mpq_srcptr coefficient, const idsi_token *tree,
                              size_t length, const idsi_value *arguments)
{
    choice c;
    bool any = false;
    mpq_t product;
    ids_status st = choice_init(&c, out->ctx, tree, length, arguments, &any);
    if (st != IDS_OK || !any) {
        return st;
    }
    mpq_init(product);
    do {
        assembly built = {.length = 0};
        uint32_t leaf = 0;
        mpq_set(product, coefficient);
        for (size_t i = 0; i < length; i++) {
            if (idsi_is_node(tree[i])) {
                IDSI_TRY(add_tokens(out->ctx, &built, &tree[i], 1));
                continue;
            }
            IDSI_ASSERT(leaf < c.leaves);
            const idsi_poly *argument = c.argument[leaf];
            const size_t term = c.term[leaf++];
            const size_t begin = argument->start[term];
            IDSI_TRY(add_tokens(out->ctx, &built, argument->tokens + begin,
                                argument->start[term + 1] - begin));
            mpq_mul(product, product, argument->coefficients[term]);
        }
        IDSI_TRY(idsi_poly_append(out, product, built.tokens, built.length));
        IDSI_TRY(idsi_poll(out->ctx, NULL));
    } while (choice_next(&c));
done:
    mpq_clear(product);
    return st;
}

static ids_status expand_nominal(idsi_value *value, const idsi_token *tree, size_t length,
                                 const idsi_value *arguments)
{
    assembly built = {.length = 0};
    for (size_t i = 0; i < length; i++) {
        ids_status st = IDS_OK;
        if (idsi_is_node(tree[i])) {
            st = add_tokens(value->poly.ctx, &built, &tree[i], 1);
        } else {
            const idsi_value *argument = &arguments[tree[i] - 1];
            if (argument->nominal_length == 0) {
                return IDS_OK;
            }
            st = add_tokens(value->poly.ctx, &built, argument->nominal, argument->nominal_length);
        }
        if (st != IDS_OK) {
            return st;
        }
    }
    value->nominal_degree = built.degree;
    value->nominal_length = (uint32_t)built.length;
    memcpy(value->nominal, built.tokens, built.length * sizeof *built.tokens);
    return IDS_OK;
}

ids_status idsi_value_product(idsi_value *value, uint32_t op, const idsi_value *arguments)
{
    idsi_token tree[IDS_MAX_ARITY + 1];
    const uint32_t arity = value->poly.sig->ops[op].arity;
    ids_status st = IDS_OK;
    mpq_t one;
    mpq_init(one);
    mpq_set_ui(one, 1, 1);
    tree[0] = idsi_node(op);
    for (uint32_t i = 1; i <= arity; i++) {
        tree[i] = i;
    }
    IDSI_TRY(expand_nominal(value, tree, arity + 1, arguments));
    IDSI_TRY(expand_term(&value->poly, one, tree, arity + 1, arguments));
    IDSI_TRY(idsi_poly_normalize(&value->poly));
done:
    mpq_clear(one);
    return st;
}

ids_status idsi_value_substitute(idsi_value *value, const idsi_value *body,
                                 const idsi_value *arguments)
{
    ids_status st = IDS_OK;
    if (body->nominal_length > 0) {
        IDSI_TRY(expand_nominal(value, body->nominal, body->nominal_length, arguments));
    }
    for (size_t i = 0; i < body->poly.count; i++) {
        const size_t begin = body->poly.start[i];
        IDSI_TRY(expand_term(&value->poly, body->poly.coefficients[i], body->poly.tokens + begin,
                             body->poly.start[i + 1] - begin, arguments));
    }
    IDSI_TRY(idsi_poly_normalize(&value->poly));
done:
    return st;
}

ids_status idsi_poly_substitute(idsi_poly *out, const idsi_poly *body, uint32_t count,
                                const idsi_poly *arguments)
{
    ids_status st = IDS_OK;
    void *room = NULL;
    /* Shallow copies, which are not cleared. */
    IDSI_TRY(idsi_alloc_zero(out->ctx, count * sizeof(idsi_value), &room));
    idsi_value *values = room;
    for (uint32_t i = 0; i < count; i++) {
        values[i].poly = arguments[i];
    }
    for (size_t i = 0; i < body->count; i++) {
        const size_t begin = body->start[i];
        IDSI_TRY(expand_term(out, body->coefficients[i], body->tokens + begin,
                             body->start[i + 1] - begin, values));
    }
    IDSI_TRY(idsi_poly_normalize(out));
done:
    idsi_free(out->ctx, room);
    return st;
}
