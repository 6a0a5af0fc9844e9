/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dealing labels to the arguments of a node, with the node's symmetries divided out.
 *
 * Let H be the group of argument orders that keep the shapes of the arguments. H moves the label
 * sets freely, because their least labels differ, and the canonical distribution of an orbit is
 * the one whose tuple of least labels is lexicographically least. Let O(i) be the orbit of place i
 * under the elements of H that fix the places 0 .. i-1. Canonical then means: for every i, the
 * least label of all the sets in O(i) stands in place i. Two orbits O(i), O(j) are nested or
 * disjoint, so they form a forest: parent[j] is the largest i < j with j in O(i), and O(i) is i
 * with its descendants, its "family". (The number of orders of the least labels is
 * count! / product of |O(i)| = count! / |H|, the hook formula for forests.)
 *
 * So a canonical distribution is dealt by choices that are free of each other:
 *
 *     roots   take, in turn, any label set for their whole family from what is left;
 *     place i takes the least label of its family's set and any size[i]-1 others of it;
 *     its children take, in turn, any label set for their families from what is left of it.
 *
 * Each choice is a subset, numbered by the combinatorial number system (Knuth, TAOCP 4A,
 * 7.2.1.3) in lexicographic order; the rank of the distribution is the mixed-radix number of
 * these digits. For a commutative operation the families are chains, and this is the familiar
 * numbering of set partitions into equal blocks by least elements.
 */
#include <string.h>

#include "tree_private.h"

static uint32_t count_bits(uint64_t set)
{
    return (uint32_t)__builtin_popcountll(set);
}

uint64_t idsi_subset_rank(uint64_t pool, uint64_t subset)
{
    uint64_t rank = 0;
    uint32_t n = count_bits(pool);
    uint32_t k = count_bits(subset);
    while (k > 0 && k < n) {
        uint64_t least = pool & (~pool + 1);
        n--;
        if (subset & least) {
            k--;
        } else {
            rank += idsi_binomial(n, k - 1);
        }
        pool ^= least;
    }
    return rank;
}

uint64_t idsi_subset_unrank(uint64_t pool, uint32_t size, uint64_t rank)
{
    uint64_t subset = 0;
    uint32_t n = count_bits(pool);
    while (size > 0) {
        if (size == n) {
            return subset | pool;
        }
        uint64_t least = pool & (~pool + 1);
        n--;
        uint64_t with_least = idsi_binomial(n, size - 1);
        if (rank < with_least) {
            subset |= least;
            size--;
        } else {
            rank -= with_least;
        }
        pool ^= least;
    }
    return subset;
}

/* Labels and places of every family; the places give the order of H by the hook formula. */
static void gather_families(idsi_split *split)
{
    uint32_t places[IDSI_SPLIT_MAX];

    split->total = 0;
    split->stabilizer = 1;
    for (uint32_t i = 0; i < split->count; i++) {
        split->family[i] = split->size[i];
        split->total += split->size[i];
        places[i] = 1;
    }
    for (uint32_t i = split->count; i-- > 0;) {
        split->stabilizer *= places[i];
        if (split->parent[i] >= 0) {
            split->family[split->parent[i]] =
                (uint8_t)(split->family[split->parent[i]] + split->family[i]);
            places[split->parent[i]] += places[i];
        }
    }
}

void idsi_split_prepare(idsi_split *split)
{
    uint32_t count = split->count;
    uint32_t left[IDSI_SPLIT_MAX + 1] = {0}; /* labels still to deal: by place, last: to roots */

    gather_families(split);
    left[count] = split->total;
    split->ways = 1;
    for (uint32_t i = 0; i < count; i++) {
        uint32_t from = split->parent[i] < 0 ? count : (uint32_t)split->parent[i];
        uint32_t family = split->family[i];
        uint64_t ways = split->ways;

        if (!idsi_mul_u64(ways, idsi_binomial(left[from], family), &ways) ||
            !idsi_mul_u64(ways, idsi_binomial(family - 1, split->size[i] - 1u), &ways)) {
            split->ways = 0;
            return;
        }
        split->ways = ways;
        left[from] -= family;
        left[i] = family - split->size[i];
    }
}

/* Sets the parents for a group with listed elements. */
static void generated_parents(const idsi_group *group, const uint64_t *key, int8_t *parent)
{
    for (uint32_t i = 0; i < group->arity; i++) {
        uint32_t orbit = 0;
        for (uint64_t e = 0; e < group->order; e++) {
            const uint8_t *image = group->elements[e].image;
            bool keeps = true;
            for (uint32_t j = 0; keeps && j < group->arity; j++) {
                keeps = key[image[j]] == key[j] && (j >= i || image[j] == j);
            }
            if (keeps) {
                orbit |= 1u << image[i];
            }
        }
        for (uint32_t j = i + 1; j < group->arity; j++) {
            if ((orbit >> j) & 1u) {
                parent[j] = (int8_t)i;
            }
        }
    }
}

void idsi_split_for_group(const idsi_group *group, const uint64_t *key, const uint8_t *size,
                          idsi_split *split)
{
    memset(split, 0, sizeof *split);
    split->count = group->arity;
    memcpy(split->size, size, group->arity);
    memset(split->parent, -1, sizeof split->parent);
    if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        generated_parents(group, key, split->parent);
    } else if (group->symmetry != IDS_SYMMETRY_NONE) {
        for (uint32_t i = 1; i < group->arity; i++) {
            split->parent[i] = (int8_t)(key[i] == key[i - 1] ? (int)i - 1 : -1);
        }
    }
    idsi_split_prepare(split);
}

uint64_t idsi_split_rank(const idsi_split *split, uint64_t all, const uint64_t *sets)
{
    uint64_t family[IDSI_SPLIT_MAX];
    uint64_t pool[IDSI_SPLIT_MAX + 1];
    uint64_t rank = 0;
    uint32_t count = split->count;

    for (uint32_t i = 0; i < count; i++) {
        family[i] = sets[i];
    }
    for (uint32_t i = count; i-- > 0;) {
        if (split->parent[i] >= 0) {
            family[split->parent[i]] |= family[i];
        }
    }
    pool[count] = all;
    for (uint32_t i = 0; i < count; i++) {
        uint64_t *from = &pool[split->parent[i] < 0 ? count : (uint32_t)split->parent[i]];
        uint32_t n = count_bits(*from);
        uint32_t f = split->family[i];
        if (f < n) {
            rank = rank * idsi_binomial(n, f) + idsi_subset_rank(*from, family[i]);
        }
        *from &= ~family[i];
        if (split->size[i] < f) {
            uint64_t rest = family[i] & (family[i] - 1);
            rank = rank * idsi_binomial(f - 1, split->size[i] - 1u) +
                   idsi_subset_rank(rest, sets[i] & rest);
        }
        pool[i] = family[i] & ~sets[i];
    }
    return rank;
}

/* The digits of a rank, least significant last: digit[2i] for the family of argument i,
 * digit[2i+1] for its own labels. */
static void rank_digits(const idsi_split *split, uint64_t rank, uint64_t *digit)
{
    uint64_t radix[2 * IDSI_SPLIT_MAX] = {0};
    uint32_t left[IDSI_SPLIT_MAX + 1] = {0};
    uint32_t count = split->count;

    left[count] = split->total;
    for (uint32_t i = 0; i < count; i++) {
        uint32_t from = split->parent[i] < 0 ? count : (uint32_t)split->parent[i];
        radix[2 * i] = idsi_binomial(left[from], split->family[i]);
        radix[2 * i + 1] = idsi_binomial(split->family[i] - 1u, split->size[i] - 1u);
        left[from] -= split->family[i];
        left[i] = (uint32_t)split->family[i] - split->size[i];
    }
    for (uint32_t i = 2 * count; i-- > 0;) {
        if (radix[i] == 1) {
            digit[i] = 0;
        } else {
            digit[i] = rank % radix[i];
            rank /= radix[i];
        }
    }
}

void idsi_split_unrank(const idsi_split *split, uint64_t all, uint64_t rank, uint64_t *sets)
{
    uint64_t digit[2 * IDSI_SPLIT_MAX];
    uint64_t pool[IDSI_SPLIT_MAX + 1];
    uint32_t count = split->count;

    rank_digits(split, rank, digit);
    pool[count] = all;
    for (uint32_t i = 0; i < count; i++) {
        uint64_t *from = &pool[split->parent[i] < 0 ? count : (uint32_t)split->parent[i]];
        uint64_t family = idsi_subset_unrank(*from, split->family[i], digit[2 * i]);
        uint64_t least = family & (~family + 1);
        *from &= ~family;
        sets[i] = least | idsi_subset_unrank(family ^ least, split->size[i] - 1u, digit[2 * i + 1]);
        pool[i] = family & ~sets[i];
    }
}

bool idsi_split_is_canonical(const idsi_split *split, const uint64_t *sets)
{
    for (uint32_t j = 0; j < split->count; j++) {
        if (split->parent[j] >= 0) {
            uint64_t above = sets[split->parent[j]];
            uint64_t below = sets[j];
            if ((above & (~above + 1)) > (below & (~below + 1))) {
                return false;
            }
        }
    }
    return true;
}
