/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Trees with odd letters.
 *
 * A tree in which a letter stands c times is short for a multilinear one: the letter becomes c
 * variables, from left to right, and the tree is alternated in them. So a letter that is moved past
 * an equal one changes the sign, and arguments A and B of an operation that are exchanged change it
 * once for each letter in A and equal letter in B, besides what the operation's symmetry says. A
 * tree is zero when some exchange of equal arguments has sign -1. Letters over `variables` are
 * even; they stand for holes.
 */
#include <string.h>

#include "follows_private.h"

typedef struct argument {
    idsi_token tokens[2u * IDSI_MAX_IDENTITY_DEGREE + 2u];
    size_t length;
    uint8_t content[IDSI_MAX_IDENTITY_DEGREE];
} argument;

int idsi_odd_sign(const uint8_t (*content)[IDSI_MAX_IDENTITY_DEGREE], const uint8_t *order,
                  uint32_t count)
{
    uint32_t parity = 0;

    for (uint32_t i = 0; i < count; i++) {
        for (uint32_t j = 0; j < i; j++) {
            for (uint32_t k = 0; order[j] > order[i] && k < IDSI_MAX_IDENTITY_DEGREE; k++) {
                parity += (uint32_t)content[order[i]][k] * content[order[j]][k];
            }
        }
    }
    return parity % 2 == 0 ? 1 : -1;
}

static int exchange_sign(const argument *a, const argument *b)
{
    uint32_t parity = 0;
    for (uint32_t k = 0; k < IDSI_MAX_IDENTITY_DEGREE; k++) {
        parity += (uint32_t)a->content[k] * b->content[k];
    }
    return parity % 2 == 0 ? 1 : -1;
}

/* All argument orders with one sign for an exchange: sorts. */
static int sort_arguments(const ids_signature *sig, int exchange, argument *list, uint32_t count,
                          uint8_t *order)
{
    int sign = 1;

    for (uint32_t i = 0; i < count; i++) {
        order[i] = (uint8_t)i;
        for (uint32_t at = i; at > 0; at--) {
            const argument *left = &list[order[at - 1]];
            const argument *right = &list[order[at]];
            const int way = idsi_tree_compare(sig, left->tokens, right->tokens);
            const int step = exchange * exchange_sign(left, right);
            if (way == 0 && step < 0) {
                return 0;
            }
            if (way <= 0) {
                break;
            }
            const uint8_t other = order[at];
            order[at] = order[at - 1];
            order[at - 1] = other;
            sign *= step;
        }
    }
    return sign;
}

/* Comparison of two argument orders, argument by argument. */
static int compare_orders(const ids_signature *sig, const argument *list, const uint8_t *a,
                          const uint8_t *b, uint32_t count)
{
    for (uint32_t i = 0; i < count; i++) {
        const int way = idsi_tree_compare(sig, list[a[i]].tokens, list[b[i]].tokens);
        if (way != 0) {
            return way;
        }
    }
    return 0;
}

/* A generated group: the first of all orders. */
static int choose_order(const ids_signature *sig, const idsi_group *group, argument *list,
                        uint8_t *order)
{
    uint8_t content[IDS_MAX_ARITY][IDSI_MAX_IDENTITY_DEGREE];
    int best = 0;
    bool zero = false;

    for (uint32_t i = 0; i < group->arity; i++) {
        memcpy(content[i], list[i].content, sizeof content[i]);
    }
    for (uint64_t e = 0; e < group->order; e++) {
        const ids_signed_order *element = &group->elements[e];
        const int sign =
            element->sign * idsi_odd_sign((const uint8_t(*)[IDSI_MAX_IDENTITY_DEGREE])content,
                                          element->image, group->arity);
        const int way =
            best == 0 ? -1 : compare_orders(sig, list, element->image, order, group->arity);
        if (way < 0) {
            memcpy(order, element->image, group->arity);
            best = sign;
            zero = false;
        } else if (way == 0 && sign != best) {
            zero = true;
        }
    }
    return zero ? 0 : best;
}

/* Reads one subtree and writes it canonically into `out`; the sign. */
static int canonicalize(const ids_signature *sig, uint32_t variables, const idsi_token **at,
                        argument *out)
{
    const idsi_token token = *(*at)++;
    argument list[IDS_MAX_ARITY];
    uint8_t order[IDS_MAX_ARITY] = {0, 1, 2, 3, 4, 5, 6, 7};
    int sign = 1;

    out->tokens[0] = token;
    out->length = 1;
    memset(out->content, 0, sizeof out->content);
    if (!idsi_is_node(token)) {
        if (token <= variables) {
            out->content[token - 1] = 1;
        }
        return 1;
    }
    const idsi_group *group = &sig->ops[idsi_node_op(token)].group;
    for (uint32_t i = 0; i < group->arity; i++) {
        sign = canonicalize(sig, variables, at, &list[i]) * sign;
        if (sign == 0) {
            return 0;
        }
    }
    if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        sign *= choose_order(sig, group, list, order);
    } else if (group->symmetry != IDS_SYMMETRY_NONE) {
        sign *= sort_arguments(sig, group->symmetry == IDS_SYMMETRY_ALTERNATING ? -1 : 1, list,
                               group->arity, order);
    }
    for (uint32_t i = 0; sign != 0 && i < group->arity; i++) {
        const argument *next = &list[order[i]];
        memcpy(out->tokens + out->length, next->tokens, next->length * sizeof *next->tokens);
        out->length += next->length;
        for (uint32_t k = 0; k < IDSI_MAX_IDENTITY_DEGREE; k++) {
            out->content[k] = (uint8_t)(out->content[k] + next->content[k]);
        }
    }
    return sign;
}

int idsi_odd_canonicalize(const ids_signature *sig, uint32_t variables, idsi_token *tree)
{
    const idsi_token *at = tree;
    argument whole;
    const int sign = canonicalize(sig, variables, &at, &whole);

    if (sign != 0) {
        memcpy(tree, whole.tokens, whole.length * sizeof *tree);
    }
    return sign;
}
