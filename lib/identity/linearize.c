/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Complete linearisation.
 *
 * A variable of multiplicity m gets m labels, and the linearisation of a term is the sum over
 * all ways to put the labels on its leaves. Two ways that differ by an automorphism of the term
 * (which permutes equal subtrees) give the same monomial with the same sign, since a term with
 * an automorphism of sign -1 is zero. So labels are dealt from the root down, and at every node
 * only one of the deals that its stabiliser H interchanges is followed: the one whose tuple of
 * least labels comes first. H moves deals freely, hence each term of the result is met once,
 * and its coefficient is the product of the orders of all H.
 *
 *     (x*x)*(x*x), labels {1,2,3,4} at the root: |H| = 2, deals {1,2}{3,4} {1,3}{2,4} {1,4}{2,3}
 *
 * The first tuple is the one where argument i has a smaller least label than all others that
 * the elements of H which fix the arguments 0 .. i-1 can bring to place i.
 *
 * Source: polarisation of homogeneous polynomials; orbit representatives by a stabiliser chain
 * (Sims).
 */
#include <string.h>

#include "identity_private.h"

/* A node whose labels are dealt to its arguments. */
typedef struct node {
    uint32_t arity;
    const idsi_group *group;
    size_t child[IDS_MAX_ARITY];
    uint32_t kind[IDS_MAX_ARITY];   /* first argument with the same subtree */
    uint32_t before[IDS_MAX_ARITY]; /* bit i: argument i has the smaller least label */
} node;

typedef struct dealer {
    idsi_poly *out;
    const ids_signature *sig;
    uint32_t variables;
    uint64_t block[IDS_MAX_DEGREE]; /* labels of each variable, bit l-1 = label l */

    const idsi_token *tree; /* the term */
    size_t length;
    mpq_ptr coefficient;                           /* of every monomial from this term */
    node nodes[IDSI_MAX_TOKENS];                   /* one at each token that is a node */
    size_t size[IDSI_MAX_TOKENS];                  /* tokens of the subtree at each token */
    uint8_t need[IDSI_MAX_TOKENS][IDS_MAX_DEGREE]; /* its leaves of each variable */
    uint64_t mask[IDSI_MAX_TOKENS];                /* labels dealt to it */
    idsi_token built[IDSI_MAX_TOKENS];
} dealer;

static bool fixes_kinds(const node *n, const ids_signed_order *element)
{
    for (uint32_t i = 0; i < n->arity; i++) {
        if (n->kind[i] != n->kind[element->image[i]]) {
            return false;
        }
    }
    return true;
}

/* Fills `before` from the elements of a generated group; returns the order of H. */
static uint64_t chain_generated(node *n)
{
    uint64_t order = 0;
    for (uint64_t e = 0; e < n->group->order; e++) {
        const ids_signed_order *element = &n->group->elements[e];
        if (!fixes_kinds(n, element)) {
            continue;
        }
        order++;
        uint32_t i = 0;
        while (i < n->arity && element->image[i] == i) {
            i++;
        }
        if (i < n->arity) {
            n->before[element->image[i]] |= 1u << i;
        }
    }
    return order;
}

/* The same for full symmetric groups: equal arguments in ascending order. */
static uint64_t chain_symmetric(node *n)
{
    uint64_t order = 1;
    for (uint32_t i = 0; i < n->arity; i++) {
        uint64_t same = 1;
        for (uint32_t j = 0; j < i; j++) {
            if (n->kind[j] == n->kind[i]) {
                same++;
                n->before[i] |= 1u << j;
            }
        }
        order *= same;
    }
    return order;
}

/* Prepares the node at a token whose subtrees have their sizes; returns the order of H. */
static uint64_t node_init(dealer *d, size_t at)
{
    const idsi_op *op = &d->sig->ops[idsi_node_op(d->tree[at])];
    node *n = &d->nodes[at];
    size_t child = at + 1;
    *n = (node){.arity = op->arity, .group = &op->group};
    for (uint32_t i = 0; i < n->arity; i++) {
        n->child[i] = child;
        n->kind[i] = i;
        for (uint32_t j = 0; j < i; j++) {
            if (d->size[n->child[j]] == d->size[child] &&
                memcmp(d->tree + n->child[j], d->tree + child, d->size[child] * sizeof *d->tree) ==
                    0) {
                n->kind[i] = j;
                break;
            }
        }
        child += d->size[child];
    }
    switch (op->group.symmetry) {
    case IDS_SYMMETRY_COMMUTATIVE:
    case IDS_SYMMETRY_ALTERNATING:
        return chain_symmetric(n);
    case IDS_SYMMETRY_GENERATED:
        return chain_generated(n);
    case IDS_SYMMETRY_NONE:
        break;
    }
    return 1;
}

/* Labels of a set are compared by the least of them, which is its lowest bit. */
static uint64_t least(uint64_t set)
{
    return set & (~set + 1);
}

static bool is_first(const dealer *d, const node *n, uint32_t child)
{
    for (uint32_t i = 0; i < child; i++) {
        if ((n->before[child] >> i & 1u) != 0 &&
            least(d->mask[n->child[i]]) > least(d->mask[n->child[child]])) {
            return false;
        }
    }
    return true;
}

/* Spreads the low bits of `bits` over the set bits of `over`. */
static uint64_t spread(uint64_t bits, uint64_t over)
{
    uint64_t set = 0;
    while (bits != 0) {
        if ((bits & 1u) != 0) {
            set |= least(over);
        }
        bits >>= 1;
        over &= over - 1;
    }
    return set;
}

static ids_status place(dealer *d, size_t at);

/* The next larger number with as many one bits (Gosper). */
static uint64_t next_subset(uint64_t set)
{
    const uint64_t low = least(set);
    const uint64_t ripple = set + low;
    return ripple | (((set ^ ripple) >> 2) / low);
}

/* Deals `rest` to the arguments from `child` on; that one has got `taken`, and of the variables
 * from `variable` on nothing yet. */
static ids_status deal(dealer *d, size_t at, uint32_t child, uint32_t variable, uint64_t taken,
                       uint64_t rest)
{
    const node *n = &d->nodes[at];
    if (child == n->arity) {
        return place(d, at + 1);
    }
    const uint8_t *need = d->need[n->child[child]];
    while (variable < d->variables && need[variable] == 0) {
        variable++;
    }
    if (variable == d->variables) {
        d->mask[n->child[child]] = taken;
        ids_status st = idsi_poll(d->out->ctx, NULL);
        if (st != IDS_OK || !is_first(d, n, child)) {
            return st;
        }
        return deal(d, at, child + 1, 0, 0, rest);
    }
    const uint64_t from = rest & d->block[variable];
    const uint64_t ways = idsi_binomial((uint32_t)__builtin_popcountll(from), need[variable]);
    uint64_t subset = need[variable] == 64 ? UINT64_MAX : ((uint64_t)1 << need[variable]) - 1;
    for (uint64_t way = 0; way < ways; way++) {
        if (way > 0) {
            subset = next_subset(subset);
        }
        const uint64_t set = spread(subset, from);
        ids_status st = deal(d, at, child, variable + 1, taken | set, rest & ~set);
        if (st != IDS_OK) {
            return st;
        }
    }
    return IDS_OK;
}

/* Deals to everything from a token on; the labels of the subtree there are in its mask. */
static ids_status place(dealer *d, size_t at)
{
    while (at < d->length && !idsi_is_node(d->tree[at])) {
        d->built[at] = (idsi_token)__builtin_ctzll(d->mask[at]) + 1;
        at++;
    }
    if (at == d->length) {
        return idsi_poly_append(d->out, d->coefficient, d->built, d->length);
    }
    d->built[at] = d->tree[at];
    return deal(d, at, 0, 0, 0, d->mask[at]);
}

static void multiply_u64(mpq_ptr value, uint64_t factor)
{
    mpq_t number;
    mpq_init(number);
    mpz_import(mpq_numref(number), 1, -1, sizeof factor, 0, 0, &factor);
    mpq_mul(value, value, number);
    mpq_clear(number);
}

static ids_status linearize_term(dealer *d, const idsi_poly *poly, size_t term)
{
    mpq_t coefficient;
    mpq_init(coefficient);
    mpq_set(coefficient, poly->coefficients[term]);
    d->tree = poly->tokens + poly->start[term];
    d->length = poly->start[term + 1] - poly->start[term];
    d->coefficient = coefficient;
    memset(d->need, 0, sizeof d->need);
    for (size_t at = d->length; at > 0; at--) {
        d->size[at - 1] = idsi_tree_length(d->sig, d->tree + at - 1);
        for (size_t i = at - 1; i < at - 1 + d->size[at - 1]; i++) {
            if (!idsi_is_node(d->tree[i])) {
                d->need[at - 1][d->tree[i] - 1]++;
            }
        }
        if (idsi_is_node(d->tree[at - 1])) {
            multiply_u64(coefficient, node_init(d, at - 1));
        }
    }
    d->mask[0] = 0;
    for (uint32_t v = 0; v < d->variables; v++) {
        d->mask[0] |= d->block[v];
    }
    ids_status st = place(d, 0);
    mpq_clear(coefficient);
    return st;
}

/* How often each variable stands in a term; false when a label is out of range. */
static bool multiplicities(const idsi_poly *poly, size_t term, uint8_t count[IDS_MAX_DEGREE])
{
    memset(count, 0, IDS_MAX_DEGREE);
    for (size_t i = poly->start[term]; i < poly->start[term + 1]; i++) {
        const idsi_token token = poly->tokens[i];
        if (idsi_is_node(token)) {
            continue;
        }
        if (token == 0 || token > poly->variables || token > IDS_MAX_DEGREE) {
            return false;
        }
        count[token - 1]++;
    }
    return true;
}

static ids_status check_terms(const idsi_poly *poly, uint8_t count[IDS_MAX_DEGREE])
{
    uint8_t other[IDS_MAX_DEGREE];
    for (size_t i = 0; i < poly->count; i++) {
        if (!multiplicities(poly, i, i == 0 ? count : other) ||
            (i > 0 && memcmp(count, other, IDS_MAX_DEGREE) != 0)) {
            return idsi_fail(poly->ctx, IDS_ERR_ARG,
                             "only a polynomial that has every variable equally often in each "
                             "term can be linearised");
        }
    }
    return IDS_OK;
}

/* The linearisation with the coefficients that come out; all memory is from linear->ctx. */
static ids_status linearize(const idsi_poly *poly, idsi_poly *linear)
{
    uint8_t count[IDS_MAX_DEGREE] = {0};
    dealer *d = NULL;
    ids_status st = IDS_OK;
    IDSI_ASSERT(linear->count == 0);
    if (poly->count == 0) {
        return IDS_OK;
    }
    if (poly->degree > IDS_MAX_DEGREE) {
        return idsi_fail(linear->ctx, IDS_ERR_LIMIT, "linearisation of degree over %u",
                         IDS_MAX_DEGREE);
    }
    IDSI_TRY(check_terms(poly, count));
    IDSI_TRY(idsi_alloc_array(linear->ctx, 1, sizeof *d, &d));
    d->out = linear;
    d->sig = poly->sig;
    d->variables = poly->variables < IDS_MAX_DEGREE ? poly->variables : IDS_MAX_DEGREE;
    uint32_t used = 0;
    for (uint32_t v = 0; v < d->variables; v++) {
        for (uint32_t i = 0; i < count[v]; i++) {
            d->block[v] |= (uint64_t)1 << used++;
        }
    }
    for (size_t i = 0; i < poly->count; i++) {
        IDSI_TRY(linearize_term(d, poly, i));
    }
    linear->variables = used;
    IDSI_TRY(idsi_poly_normalize(linear));
done:
    idsi_free(linear->ctx, d);
    return st;
}

ids_status idsi_poly_linearize(const idsi_poly *poly, idsi_poly *linear)
{
    ids_status st = linearize(poly, linear);

    return st == IDS_OK ? idsi_poly_primitive(linear) : st;
}

ids_status idsi_poly_linear_mod(ids_ctx *ctx, const idsi_poly *poly, uint32_t p, int *order)
{
    ids_status st = IDS_OK;
    idsi_poly linear;

    *order = 1;
    idsi_poly_init(&linear, ctx, poly->sig);
    IDSI_TRY(linearize(poly, &linear));
    for (size_t t = 0; *order >= 0 && t < linear.count; t++) {
        if (mpz_divisible_ui_p(mpq_denref(linear.coefficients[t]), p)) {
            *order = -1;
        } else if (!mpz_divisible_ui_p(mpq_numref(linear.coefficients[t]), p)) {
            *order = 0;
        }
    }
done:
    idsi_poly_clear(&linear);
    return st;
}
