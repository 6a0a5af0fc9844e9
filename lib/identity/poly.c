/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Polynomials: sums of trees with rational coefficients.
 *
 *     coefficients  c0      c1      c2            `count` of them
 *     start         0       5       10      15    `count` + 1
 *     tokens        t0 .... t1 .... t2 ....       tree i is tokens[start[i] .. start[i+1])
 *
 * A normalised polynomial has canonical trees in strictly ascending idsi_tree_compare() order
 * and no coefficient 0. Sorting is a bottom-up merge sort of term numbers: O(n log n) whatever
 * the input, and needs no context argument for a comparison callback.
 *
 * GMP takes memory that a context cannot refuse, so the size of coefficients is bounded here:
 * one by one, and in all.
 */
#include <string.h>

#include "identity_private.h"

/* Most limbs of all coefficients of a polynomial together. */
#define MAX_ALL_LIMBS (64u * 1024u * 1024u)

void idsi_poly_init(idsi_poly *poly, ids_ctx *ctx, const ids_signature *sig)
{
    *poly = (idsi_poly){.ctx = ctx, .sig = sig};
}

void idsi_poly_clear(idsi_poly *poly)
{
    for (size_t i = 0; i < poly->count; i++) {
        mpq_clear(poly->coefficients[i]);
    }
    idsi_free(poly->ctx, poly->coefficients);
    idsi_free(poly->ctx, poly->start);
    idsi_free(poly->ctx, poly->tokens);
    idsi_poly_init(poly, poly->ctx, poly->sig);
}

static size_t limbs(mpq_srcptr q)
{
    return mpz_size(mpq_numref(q)) + mpz_size(mpq_denref(q));
}

static ids_status check_size(idsi_poly *poly, mpq_srcptr coefficient)
{
    const size_t size = limbs(coefficient);
    if (size <= 2) {
        return IDS_OK;
    }
    if (size > IDSI_MAX_LIMBS) {
        return idsi_fail(poly->ctx, IDS_ERR_LIMIT, "a coefficient with more than %u bits",
                         IDSI_MAX_LIMBS * 64u);
    }
    poly->big_limbs += size;
    if (poly->big_limbs > MAX_ALL_LIMBS) {
        return idsi_fail(poly->ctx, IDS_ERR_LIMIT,
                         "coefficients that need more than %u MiB together",
                         MAX_ALL_LIMBS / (1024u * 1024u) * 8u);
    }
    return IDS_OK;
}

static ids_status reserve_term(idsi_poly *poly)
{
    ids_status st = IDS_OK;
    if (poly->count < poly->term_capacity) {
        return IDS_OK;
    }
    const size_t capacity = poly->term_capacity == 0 ? 4 : 2 * poly->term_capacity;
    IDSI_TRY(idsi_resize_array(poly->ctx, capacity, sizeof(mpq_t), &poly->coefficients));
    IDSI_TRY(idsi_resize_array(poly->ctx, capacity + 1, sizeof(size_t), &poly->start));
    if (poly->term_capacity == 0) {
        poly->start[0] = 0;
    }
    poly->term_capacity = capacity;
done:
    return st;
}

static ids_status reserve_tokens(idsi_poly *poly, size_t need)
{
    if (need <= poly->token_capacity) {
        return IDS_OK;
    }
    size_t capacity = poly->token_capacity < 8 ? 16 : 2 * poly->token_capacity;
    if (capacity < need) {
        capacity = need;
    }
    ids_status st = idsi_resize_array(poly->ctx, capacity, sizeof(idsi_token), &poly->tokens);
    if (st == IDS_OK) {
        poly->token_capacity = capacity;
    }
    return st;
}

ids_status idsi_poly_append(idsi_poly *poly, mpq_srcptr coefficient, const idsi_token *tree,
                            size_t length)
{
    ids_status st = IDS_OK;
    if (poly->count >= IDSI_MAX_TERMS) {
        return idsi_fail(poly->ctx, IDS_ERR_LIMIT, "a polynomial with more than %u terms",
                         IDSI_MAX_TERMS);
    }
    IDSI_TRY(check_size(poly, coefficient));
    IDSI_TRY(reserve_term(poly));
    const size_t begin = poly->start[poly->count];
    IDSI_TRY(reserve_tokens(poly, begin + length));
    memcpy(poly->tokens + begin, tree, length * sizeof(idsi_token));
    mpq_init(poly->coefficients[poly->count]);
    mpq_set(poly->coefficients[poly->count], coefficient);
    poly->count++;
    poly->start[poly->count] = begin + length;
done:
    return st;
}

/* ---- normal form ----------------------------------------------------------------------------- */

static const idsi_token *tree_of(const idsi_poly *poly, size_t term)
{
    return poly->tokens + poly->start[term];
}

static void canonicalize_terms(idsi_poly *poly)
{
    for (size_t i = 0; i < poly->count; i++) {
        const int sign = idsi_tree_canonicalize(poly->sig, poly->tokens + poly->start[i],
                                                poly->start[i + 1] - poly->start[i]);
        if (sign < 0) {
            mpq_neg(poly->coefficients[i], poly->coefficients[i]);
        } else if (sign == 0) {
            mpq_set_ui(poly->coefficients[i], 0, 1);
        }
    }
}

static bool is_normal_order(const idsi_poly *poly)
{
    for (size_t i = 0; i < poly->count; i++) {
        if (mpq_sgn(poly->coefficients[i]) == 0 ||
            (i > 0 && idsi_tree_compare(poly->sig, tree_of(poly, i - 1), tree_of(poly, i)) >= 0)) {
            return false;
        }
    }
    return true;
}

static void merge(const idsi_poly *poly, const uint32_t *from, uint32_t *to, size_t begin,
                  size_t middle, size_t end)
{
    size_t a = begin;
    size_t b = middle;
    for (size_t k = begin; k < end; k++) {
        if (b == end || (a < middle && idsi_tree_compare(poly->sig, tree_of(poly, from[a]),
                                                         tree_of(poly, from[b])) <= 0)) {
            to[k] = from[a++];
        } else {
            to[k] = from[b++];
        }
    }
}

/* Sorts the numbers in order[0 .. count); order has room for twice as many. Returns where the
 * sorted numbers are: order or order + count. */
static uint32_t *sort_terms(const idsi_poly *poly, uint32_t *order)
{
    const size_t n = poly->count;
    uint32_t *from = order;
    uint32_t *to = order + n;
    for (size_t width = 1; width < n; width *= 2) {
        for (size_t begin = 0; begin < n; begin += 2 * width) {
            const size_t middle = begin + width < n ? begin + width : n;
            const size_t end = begin + 2 * width < n ? begin + 2 * width : n;
            merge(poly, from, to, begin, middle, end);
        }
        uint32_t *swap = from;
        from = to;
        to = swap;
    }
    return from;
}

/* Adds the coefficients of equal trees to the first of them and zeroes the others. */
static ids_status collect(idsi_poly *poly, const uint32_t *order)
{
    size_t leader = 0;
    for (size_t k = 1; k < poly->count; k++) {
        if (idsi_tree_compare(poly->sig, tree_of(poly, order[leader]), tree_of(poly, order[k])) !=
            0) {
            leader = k;
            continue;
        }
        mpq_ptr sum = poly->coefficients[order[leader]];
        mpq_add(sum, sum, poly->coefficients[order[k]]);
        mpq_set_ui(poly->coefficients[order[k]], 0, 1);
        ids_status st = check_size(poly, sum);
        if (st != IDS_OK) {
            return st;
        }
    }
    return IDS_OK;
}

/* Puts the terms with coefficients in the given order; the arrays of `sorted` are big enough. */
static void permute(idsi_poly *poly, const uint32_t *order, idsi_poly *sorted)
{
    sorted->start[0] = 0;
    for (size_t k = 0; k < poly->count; k++) {
        const size_t term = order[k];
        if (mpq_sgn(poly->coefficients[term]) == 0) {
            mpq_clear(poly->coefficients[term]);
            continue;
        }
        const size_t length = poly->start[term + 1] - poly->start[term];
        const size_t begin = sorted->start[sorted->count];
        memcpy(sorted->tokens + begin, tree_of(poly, term), length * sizeof(idsi_token));
        /* A GMP number may be moved as long as only one copy is used. */
        memcpy(&sorted->coefficients[sorted->count], &poly->coefficients[term], sizeof(mpq_t));
        sorted->count++;
        sorted->start[sorted->count] = begin + length;
        sorted->big_limbs += limbs(sorted->coefficients[sorted->count - 1]) > 2
                                 ? limbs(sorted->coefficients[sorted->count - 1])
                                 : 0;
    }
    poly->count = 0;
}

static void set_degree(idsi_poly *poly)
{
    poly->degree = poly->count == 0 ? 0 : idsi_tree_degree(poly->sig, tree_of(poly, 0));
}

ids_status idsi_poly_normalize(idsi_poly *poly)
{
    uint32_t *order = NULL;
    idsi_poly sorted = {0};
    ids_status st = IDS_OK;
    canonicalize_terms(poly);
    if (is_normal_order(poly)) {
        set_degree(poly);
        return IDS_OK;
    }
    const size_t n = poly->count;
    idsi_poly_init(&sorted, poly->ctx, poly->sig);
    sorted.variables = poly->variables;
    IDSI_TRY(idsi_alloc_array(poly->ctx, 2 * n, sizeof *order, &order));
    IDSI_TRY(idsi_resize_array(poly->ctx, n, sizeof(mpq_t), &sorted.coefficients));
    IDSI_TRY(idsi_resize_array(poly->ctx, n + 1, sizeof(size_t), &sorted.start));
    IDSI_TRY(idsi_resize_array(poly->ctx, poly->start[n], sizeof(idsi_token), &sorted.tokens));
    sorted.term_capacity = n;
    sorted.token_capacity = poly->start[n];
    for (size_t i = 0; i < n; i++) {
        order[i] = (uint32_t)i;
    }
    const uint32_t *in_order = sort_terms(poly, order);
    IDSI_TRY(collect(poly, in_order));
    permute(poly, in_order, &sorted);
    const idsi_poly old = *poly;
    *poly = sorted;
    sorted = old;
    set_degree(poly);
done:
    idsi_free(poly->ctx, order);
    idsi_poly_clear(&sorted);
    return st;
}

/* ---- other ----------------------------------------------------------------------------------- */

ids_status idsi_poly_primitive(idsi_poly *poly)
{
    ids_status st = IDS_OK;
    mpz_t content;
    mpz_t common;
    if (poly->count == 0) {
        return IDS_OK;
    }
    mpz_init(content);
    mpz_init_set_ui(common, 1);
    for (size_t i = 0; i < poly->count; i++) {
        mpz_gcd(content, content, mpq_numref(poly->coefficients[i]));
        mpz_lcm(common, common, mpq_denref(poly->coefficients[i]));
        if (mpz_size(common) > IDSI_MAX_LIMBS) {
            st = idsi_fail(poly->ctx, IDS_ERR_LIMIT, "a common denominator with more than %u bits",
                           IDSI_MAX_LIMBS * 64u);
            goto done;
        }
    }
    if (mpz_size(common) * poly->count > MAX_ALL_LIMBS) {
        st = idsi_fail(poly->ctx, IDS_ERR_LIMIT, "coefficients that need more than %u MiB together",
                       MAX_ALL_LIMBS / (1024u * 1024u) * 8u);
        goto done;
    }
    if (mpq_sgn(poly->coefficients[0]) < 0) {
        mpz_neg(content, content);
    }
    for (size_t i = 0; i < poly->count; i++) {
        mpz_ptr numerator = mpq_numref(poly->coefficients[i]);
        mpz_ptr denominator = mpq_denref(poly->coefficients[i]);
        mpz_divexact(numerator, numerator, content);
        mpz_divexact(denominator, common, denominator);
        mpz_mul(numerator, numerator, denominator);
        mpz_set_ui(denominator, 1);
    }
done:
    mpz_clear(content);
    mpz_clear(common);
    return st;
}

bool idsi_poly_equal(const idsi_poly *a, const idsi_poly *b)
{
    if (a->count != b->count) {
        return false;
    }
    for (size_t i = 0; i < a->count; i++) {
        const size_t length = a->start[i + 1] - a->start[i];
        if (length != b->start[i + 1] - b->start[i] ||
            memcmp(tree_of(a, i), tree_of(b, i), length * sizeof(idsi_token)) != 0 ||
            mpq_equal(a->coefficients[i], b->coefficients[i]) == 0) {
            return false;
        }
    }
    return true;
}
