/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Trees in prefix code: length, degree, order, canonical form.
 *
 *     (x1*x2)*x3   is   [node *] [node *] [1] [2] [3]
 *
 * The canonical form is made bottom-up. Once the arguments of a node are canonical, the node's
 * argument order is chosen so that the tuple of shapes is the largest possible, and among those
 * so that the tuple of (least label, labels from left to right) is the least. For multilinear
 * trees the least labels decide alone. A tree is zero when an argument order with sign -1 leaves
 * it as it is.
 */
#include <string.h>

#include "tree_private.h"

size_t idsi_tree_length(const ids_signature *sig, const idsi_token *tree)
{
    size_t open = 1;
    size_t length = 0;
    while (open > 0) {
        idsi_token token = tree[length];
        open--;
        if (idsi_is_node(token)) {
            open += sig->ops[idsi_node_op(token)].arity;
        }
        length++;
    }
    return length;
}

uint32_t idsi_tree_degree(const ids_signature *sig, const idsi_token *tree)
{
    size_t open = 1;
    uint32_t leaves = 0;
    for (size_t i = 0; open > 0; i++) {
        open--;
        if (idsi_is_node(tree[i])) {
            open += sig->ops[idsi_node_op(tree[i])].arity;
        } else {
            leaves++;
        }
    }
    return leaves;
}

/* Whether two trees differ at most in their labels: one pass, where a comparison takes many. */
static bool same_shape(const ids_signature *sig, const idsi_token *a, const idsi_token *b)
{
    size_t open = 1;
    for (size_t i = 0; open > 0; i++) {
        open--;
        if (idsi_is_node(a[i]) || idsi_is_node(b[i])) {
            if (a[i] != b[i]) {
                return false;
            }
            open += sig->ops[idsi_node_op(a[i])].arity;
        }
    }
    return true;
}

int idsi_tree_compare_shape(const ids_signature *sig, const idsi_token *a, const idsi_token *b)
{
    if (same_shape(sig, a, b)) {
        return 0;
    }
    uint32_t degree_a = idsi_tree_degree(sig, a);
    uint32_t degree_b = idsi_tree_degree(sig, b);
    if (degree_a != degree_b) {
        return degree_a < degree_b ? -1 : 1;
    }
    if (degree_a == 1) {
        return 0;
    }
    if (*a != *b) {
        return *a > *b ? -1 : 1;
    }
    uint32_t arity = sig->ops[idsi_node_op(*a)].arity;
    a++;
    b++;
    for (uint32_t i = 0; i < arity; i++) {
        int order = idsi_tree_compare_shape(sig, a, b);
        if (order != 0) {
            return order;
        }
        a += idsi_tree_length(sig, a);
        b += idsi_tree_length(sig, b);
    }
    return 0;
}

static idsi_token least_label(const idsi_token *tree, size_t length)
{
    idsi_token least = UINT32_MAX;
    for (size_t i = 0; i < length; i++) {
        if (!idsi_is_node(tree[i]) && tree[i] < least) {
            least = tree[i];
        }
    }
    return least;
}

/* Order of the labels of two trees: least label, then leaf by leaf, then the shorter. */
static int compare_labels(const idsi_token *a, size_t length_a, const idsi_token *b,
                          size_t length_b)
{
    idsi_token least_a = least_label(a, length_a);
    idsi_token least_b = least_label(b, length_b);
    size_t i = 0;
    size_t j = 0;

    if (least_a != least_b) {
        return least_a < least_b ? -1 : 1;
    }
    for (;;) {
        while (i < length_a && idsi_is_node(a[i])) {
            i++;
        }
        while (j < length_b && idsi_is_node(b[j])) {
            j++;
        }
        if (i == length_a || j == length_b) {
            return (i < length_a) - (j < length_b);
        }
        if (a[i] != b[j]) {
            return a[i] < b[j] ? -1 : 1;
        }
        i++;
        j++;
    }
}

int idsi_tree_compare(const ids_signature *sig, const idsi_token *a, const idsi_token *b)
{
    int order = idsi_tree_compare_shape(sig, b, a);
    if (order != 0) {
        return order;
    }
    return compare_labels(a, idsi_tree_length(sig, a), b, idsi_tree_length(sig, b));
}

/* The arguments of a node while its canonical order is chosen. */
typedef struct arguments {
    uint32_t count;
    const idsi_token *tree[IDS_MAX_ARITY];
    size_t length[IDS_MAX_ARITY];
    uint64_t shape[IDS_MAX_ARITY]; /* number of arguments with a smaller shape */
    uint64_t label[IDS_MAX_ARITY]; /* number of arguments with smaller labels */
} arguments;

static void rank_arguments(const ids_signature *sig, arguments *args)
{
    for (uint32_t i = 0; i < args->count; i++) {
        args->shape[i] = 0;
        args->label[i] = 0;
        for (uint32_t j = 0; j < args->count; j++) {
            args->shape[i] += idsi_tree_compare_shape(sig, args->tree[j], args->tree[i]) < 0;
            args->label[i] += compare_labels(args->tree[j], args->length[j], args->tree[i],
                                             args->length[i]) < 0;
        }
    }
}

static bool same_argument(const arguments *args, uint32_t i, uint32_t j)
{
    return args->shape[i] == args->shape[j] && args->label[i] == args->label[j];
}

/* Whether some argument order with sign -1 leaves the arguments as they are. */
static bool forced_to_zero(const idsi_group *group, const arguments *args)
{
    if (group->symmetry == IDS_SYMMETRY_ALTERNATING) {
        for (uint32_t i = 0; i < args->count; i++) {
            for (uint32_t j = 0; j < i; j++) {
                if (same_argument(args, i, j)) {
                    return true;
                }
            }
        }
    }
    if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        for (uint64_t e = 0; e < group->order; e++) {
            const ids_signed_order *element = &group->elements[e];
            bool fixes = element->sign < 0;
            for (uint32_t i = 0; fixes && i < args->count; i++) {
                fixes = same_argument(args, i, element->image[i]);
            }
            if (fixes) {
                return true;
            }
        }
    }
    return false;
}

int idsi_tree_canonicalize(const ids_signature *sig, idsi_token *tree, size_t length)
{
    idsi_token sorted[IDSI_MAX_TOKENS];
    uint8_t image[IDS_MAX_ARITY];
    arguments args;
    int sign = 1;

    if (!idsi_is_node(tree[0])) {
        return 1;
    }
    const idsi_group *group = &sig->ops[idsi_node_op(tree[0])].group;
    size_t at = 1;
    args.count = group->arity;
    for (uint32_t i = 0; i < args.count; i++) {
        args.tree[i] = tree + at;
        args.length[i] = idsi_tree_length(sig, tree + at);
        sign *= idsi_tree_canonicalize(sig, tree + at, args.length[i]);
        at += args.length[i];
    }
    IDSI_ASSERT(at == length);
    if (group->symmetry == IDS_SYMMETRY_NONE) {
        return sign;
    }
    rank_arguments(sig, &args);
    if (forced_to_zero(group, &args)) {
        sign = 0;
    }
    int order_sign = idsi_group_canonical(group, args.shape, args.label, image);
    at = 0;
    for (uint32_t i = 0; i < args.count; i++) {
        memcpy(sorted + at, args.tree[image[i]], args.length[image[i]] * sizeof *sorted);
        at += args.length[image[i]];
    }
    memcpy(tree + 1, sorted, (length - 1) * sizeof *tree);
    return sign * order_sign;
}
