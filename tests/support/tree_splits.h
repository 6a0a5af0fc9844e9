/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Label distributions by brute force: all ways to deal the labels, all argument orders that keep
 * the arguments' keys, and among the distributions that these make of each other the one whose
 * tuple of least labels comes first.
 */
#ifndef IDSPAN_TEST_TREE_SPLITS_H
#define IDSPAN_TEST_TREE_SPLITS_H

#include "tree_samples.h"

#define SPLIT_MAX_ORDERS 720u /* 6! */

typedef struct split_orders {
    uint32_t count;
    uint8_t image[SPLIT_MAX_ORDERS][IDS_MAX_ARITY];
} split_orders;

static inline void split_add_order(split_orders *orders, const uint8_t *image, uint32_t arity)
{
    for (uint32_t e = 0; e < orders->count; e++) {
        if (memcmp(orders->image[e], image, arity) == 0) {
            return;
        }
    }
    ck_assert_uint_lt(orders->count, SPLIT_MAX_ORDERS);
    memcpy(orders->image[orders->count], image, arity);
    orders->count++;
}

/* The group of the operation, then only those orders that keep the keys. */
static inline void split_find_orders(const ids_operation *op, const uint64_t *key,
                                     split_orders *orders)
{
    ids_signed_order generator[IDS_MAX_ARITY];
    size_t count = sample_generators(op, generator);
    uint8_t image[IDS_MAX_ARITY] = {0, 1, 2, 3, 4, 5, 6, 7};
    uint32_t kept = 0;

    orders->count = 0;
    split_add_order(orders, image, op->arity);
    for (uint32_t e = 0; e < orders->count; e++) {
        for (size_t g = 0; g < count; g++) {
            for (uint32_t i = 0; i < op->arity; i++) {
                image[i] = orders->image[e][generator[g].image[i]];
            }
            split_add_order(orders, image, op->arity);
        }
    }
    for (uint32_t e = 0; e < orders->count; e++) {
        bool keeps = true;

        for (uint32_t i = 0; i < op->arity; i++) {
            keeps = keeps && key[orders->image[e][i]] == key[i];
        }
        if (keeps) {
            memmove(orders->image[kept], orders->image[e], op->arity);
            kept++;
        }
    }
    orders->count = kept;
}

/* Whether no order gives a tuple of least labels that comes before. */
static inline bool split_is_first(const split_orders *orders, uint32_t arity, const uint64_t *sets)
{
    for (uint32_t e = 0; e < orders->count; e++) {
        for (uint32_t i = 0; i < arity; i++) {
            uint64_t moved = sets[orders->image[e][i]];

            moved &= ~moved + 1;
            uint64_t mine = sets[i] & (~sets[i] + 1);
            if (moved < mine) {
                return false;
            }
            if (moved > mine) {
                break;
            }
        }
    }
    return true;
}

/* The order of the ranks: place by place first the labels of the whole family, then its own;
 * a set comes before another when the least label in which they differ is in it. */
static inline int split_compare(const idsi_split *split, const uint64_t *a, const uint64_t *b)
{
    for (uint32_t i = 0; i < split->count; i++) {
        uint64_t differ[2] = {0, a[i] ^ b[i]};
        uint64_t mine[2] = {0, a[i]};

        for (uint32_t j = i; j < split->count; j++) {
            int at = (int)j;

            while (at > (int)i) {
                at = split->parent[at];
            }
            if (at == (int)i) {
                mine[0] |= a[j];
                differ[0] |= b[j];
            }
        }
        differ[0] ^= mine[0];
        for (int step = 0; step < 2; step++) {
            if (differ[step] != 0) {
                return mine[step] & differ[step] & (~differ[step] + 1) ? -1 : 1;
            }
        }
    }
    return 0;
}

/* Goes through all distributions of the labels; `sets` holds what was dealt so far. */
static inline uint64_t split_count(const idsi_split *split, const split_orders *orders,
                                   uint32_t place, uint64_t left, uint64_t all, uint64_t *sets)
{
    uint64_t found = 0;

    if (place == split->count) {
        bool first = split_is_first(orders, split->count, sets);

        SURE(idsi_split_is_canonical(split, sets) == first);
        if (first) {
            uint64_t again[IDSI_SPLIT_MAX];
            uint64_t rank = idsi_split_rank(split, all, sets);

            SURE(rank < split->ways);
            idsi_split_unrank(split, all, rank, again);
            SURE(memcmp(again, sets, split->count * sizeof *sets) == 0);
        }
        return first;
    }
    for (uint64_t subset = left;; subset = (subset - 1) & left) {
        if ((uint32_t)__builtin_popcountll(subset) == split->size[place]) {
            sets[place] = subset;
            found += split_count(split, orders, place + 1, left & ~subset, all, sets);
        }
        if (subset == 0) {
            return found;
        }
    }
}

/* Everything about a split against the definition. */
static inline void split_check(const ids_operation *op, const uint64_t *key,
                               const idsi_split *split)
{
    static split_orders orders;
    uint64_t sets[IDSI_SPLIT_MAX];
    uint64_t before[IDSI_SPLIT_MAX];
    uint64_t all = 0;

    for (uint32_t i = 0; i < split->total; i++) {
        all |= UINT64_C(1) << (5 * i % 63); /* not just the first labels */
    }
    split_find_orders(op, key, &orders);
    ck_assert_uint_eq(split->stabilizer, orders.count);
    ck_assert_uint_eq(split_count(split, &orders, 0, all, all, sets), split->ways);
    for (uint64_t r = 0; r < split->ways; r++) {
        idsi_split_unrank(split, all, r, sets);
        SURE(idsi_split_is_canonical(split, sets));
        SURE(idsi_split_rank(split, all, sets) == r);
        SURE(r == 0 || split_compare(split, before, sets) < 0);
        memcpy(before, sets, sizeof before);
    }
}

#endif
