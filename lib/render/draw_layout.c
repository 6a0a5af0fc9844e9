/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Tidy layout of a tree: subtrees of equal shape look alike, a node stands over the middle of its
 * arguments, the picture is narrow, and nothing crosses or touches.
 *
 * Bottom-up each subtree has its contours: by depth the left and the right end of what is there.
 * For two arguments of a node the contours give the least distance d(i,j) of their roots.
 * Places p_j = max over i < j of p_i + d(i,j) push everything to the left; fixing the last and
 * pushing to the right gives q_j; halfway between p and q all distances hold too, and a mirrored
 * tree gets the mirrored picture. (Contours: Reingold and Tilford, IEEE Trans. Software Eng. 7
 * (1981).) Trees have at most 127 nodes, so all pairs of arguments can be compared depth by depth.
 *
 * Edges join neighbouring depths, on each of which the order is the one of the tree, so that
 * straight edges cannot cross.
 */
#include "draw_private.h"

static int32_t larger(int32_t a, int32_t b)
{
    return a > b ? a : b;
}

/* Least distance of the roots of two subtrees side by side. */
static int32_t least_distance(const idsi_layout *l, size_t a, size_t b)
{
    uint32_t common = l->height[a] < l->height[b] ? l->height[a] : l->height[b];
    int32_t distance = 0;

    for (uint32_t d = 0; d <= common; d++) {
        distance = larger(distance, l->right[a][d] - l->left[b][d] + l->gap);
    }
    return distance;
}

/* Places the arguments child[0..count-1] of a node relative to it. */
static void place_children(idsi_layout *l, size_t node, const size_t *child, uint32_t count)
{
    int32_t least[IDS_MAX_ARITY] = {0};
    int32_t most[IDS_MAX_ARITY] = {0};
    uint32_t last = count - 1;

    for (uint32_t j = 1; j < count; j++) {
        for (uint32_t i = 0; i < j; i++) {
            least[j] = larger(least[j], least[i] + least_distance(l, child[i], child[j]));
        }
    }
    if (l->ruled) {
        least[last] = larger(least[last], l->width[node] + 1);
        least[last] += (least[last] + l->width[node] + 1) % 2;
    }
    for (uint32_t i = last + 1; i-- > 0;) {
        most[i] = least[last];
        for (uint32_t j = i + 1; j < count; j++) {
            int32_t limit = most[j] - least_distance(l, child[i], child[j]);
            most[i] = limit < most[i] ? limit : most[i];
        }
    }
    for (uint32_t i = 0; i < count; i++) {
        /* The outer two stay at the ends of the span. */
        int32_t place = i == 0 ? 0 : i == last ? least[last] : (least[i] + most[i]) / 2;
        l->offset[child[i]] = place - least[last] / 2;
    }
}

static void find_contours(idsi_layout *l, size_t node, const size_t *child, uint32_t count)
{
    l->left[node][0] = -((l->width[node] - 1) / 2);
    l->right[node][0] = l->width[node] / 2;
    l->height[node] = 0;
    for (uint32_t i = 0; i < count; i++) {
        uint8_t height = (uint8_t)(l->height[child[i]] + 1);
        l->height[node] = height > l->height[node] ? height : l->height[node];
    }
    for (uint32_t d = 1; d <= l->height[node]; d++) {
        bool first = true;
        for (uint32_t i = 0; i < count; i++) {
            int32_t at = l->offset[child[i]];
            if (l->height[child[i]] + 1u < d) {
                continue;
            }
            if (first || at + l->left[child[i]][d - 1] < l->left[node][d]) {
                l->left[node][d] = at + l->left[child[i]][d - 1];
            }
            if (first || at + l->right[child[i]][d - 1] > l->right[node][d]) {
                l->right[node][d] = at + l->right[child[i]][d - 1];
            }
            first = false;
        }
    }
    if (l->ruled && count > 0) {
        int32_t left = l->offset[child[0]];
        int32_t right = l->offset[child[count - 1]];
        l->left[node][0] = left < l->left[node][0] ? left : l->left[node][0];
        l->right[node][0] = larger(l->right[node][0], right);
    }
}

/* Turns offsets into places, once all subtrees are arranged. */
static void settle(idsi_layout *l, size_t length)
{
    int32_t leftmost = 0;
    int32_t rightmost = 0;

    for (uint32_t d = 0; d <= l->height[0]; d++) {
        leftmost = l->left[0][d] < leftmost ? l->left[0][d] : leftmost;
        rightmost = larger(rightmost, l->right[0][d]);
    }
    l->total = rightmost - leftmost + 1;
    l->deepest = l->height[0];
    l->x[0] = -leftmost;
    l->depth[0] = 0;
    l->parent[0] = 0;
    for (size_t i = 1; i < length; i++) {
        l->x[i] = l->x[l->parent[i]] + l->offset[i];
        l->depth[i] = (uint8_t)(l->depth[l->parent[i]] + 1);
    }
}

void idsi_layout_tree(const ids_signature *sig, const idsi_token *tokens, size_t length,
                      idsi_layout *layout)
{
    size_t stack[IDSI_MAX_TOKENS] = {0}; /* subtrees without a parent so far, leftmost on top */
    size_t height = 0;

    IDSI_ASSERT(length > 0 && length <= IDSI_MAX_TOKENS);
    for (size_t node = length; node-- > 0;) {
        size_t child[IDS_MAX_ARITY] = {0};
        uint32_t count = 0;
        if (idsi_is_node(tokens[node])) {
            count = sig->ops[idsi_node_op(tokens[node])].arity;
            for (uint32_t i = 0; i < count; i++) {
                child[i] = stack[--height];
                layout->parent[child[i]] = (uint8_t)node;
            }
            place_children(layout, node, child, count);
        }
        find_contours(layout, node, child, count);
        stack[height++] = node;
    }
    settle(layout, length);
}
