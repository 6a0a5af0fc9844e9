/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Characters of the symmetric groups by border strips (the rule of Murnaghan and Nakayama;
 * Macdonald, Symmetric Functions and Hall Polynomials, I.3, example 11):
 *
 *     p_k s_lambda = sum of (-1)^(rows - 1) s_mu, mu = lambda with a border strip of k cells added,
 *
 * and p_(k1) p_(k2) ... = sum of character(mu) s_mu. So one pass over the parts of a cycle type
 * gives the values of all characters there.
 *
 * A strip is a bead that moves up by k places (young_private.h): one of those for the parts, or
 * one of the k beads for parts 0 below them, since a strip adds at most k rows. The latter are
 * tried one by one, the lowest each time, so that no bead passes place m + k <= 40 of a word.
 *
 * Sums are taken modulo 2^64. The values fit, so what they pass through does not matter.
 */
#include "young_private.h"

#include <string.h>

/* The entry (young_private.h) for the bead at `from`, moved up by k places. */
static uint32_t move_bead(const idsi_partition_counts *counts, uint64_t beads, uint32_t from,
                          uint32_t k)
{
    const uint64_t bead = UINT64_C(1) << from;
    const uint64_t between = (bead << k) - 2 * bead;
    const uint32_t jumped = (uint32_t)__builtin_popcountll(beads & between);
    ids_partition grown;

    idsi_partition_from_beads((beads & ~bead) | bead << k, &grown);
    return 2 * idsi_partition_index(counts, &grown) + (jumped & 1u);
}

/* Adds the strips of k cells to one partition; returns how many there are, writes them unless
 * `entry` is NULL. */
static size_t add_strips(const idsi_partition_counts *counts, const ids_partition *partition,
                         uint32_t k, uint32_t *entry)
{
    uint64_t beads = idsi_partition_beads(partition, partition->length);
    size_t count = 0;

    for (uint64_t left = beads & ~(beads >> k); left != 0; left &= left - 1) {
        if (entry != NULL) {
            entry[count] = move_bead(counts, beads, (uint32_t)__builtin_ctzll(left), k);
        }
        count++;
    }
    for (uint32_t rows = 1; rows <= k; rows++) {
        beads = beads << 1 | 1u;
        if ((beads >> k & 1u) == 0) {
            if (entry != NULL) {
                entry[count] = move_bead(counts, beads, 0, k);
            }
            count++;
        }
    }
    return count;
}

/* Goes through all partitions in the order of `start`; fills `start` the first time (`entry`
 * NULL), `entry` the second time. Returns the number of entries. */
static size_t go_through(idsi_strips *strips, bool fill)
{
    size_t at = 0;
    size_t count = 0;

    for (uint32_t m = 0; m < strips->max_degree; m++) {
        for (uint32_t k = 1; k <= strips->max_degree - m; k++) {
            ids_partition partition;

            idsi_partition_first(m, &partition);
            strips->first[m][k] = at;
            do {
                strips->start[at++] = (uint32_t)count;
                count +=
                    add_strips(&strips->counts, &partition, k, fill ? strips->entry + count : NULL);
            } while (idsi_partition_next(&partition));
        }
    }
    strips->start[at] = (uint32_t)count;
    return count;
}

ids_status idsi_strips_create(ids_ctx *ctx, uint32_t max_degree, idsi_strips *strips)
{
    ids_status st = IDS_OK;
    size_t starts = 1;

    IDSI_ASSERT(max_degree <= IDS_MAX_PARTITION_DEGREE);
    *strips = (idsi_strips){.ctx = ctx, .max_degree = max_degree};
    idsi_partition_counts_fill(&strips->counts);
    for (uint32_t m = 0; m < max_degree; m++) {
        starts += (size_t)(max_degree - m) * idsi_partition_number(&strips->counts, m);
    }
    IDSI_TRY(idsi_alloc_array(ctx, starts, sizeof *strips->start, &strips->start));
    IDSI_TRY(
        idsi_alloc_array(ctx, go_through(strips, false), sizeof *strips->entry, &strips->entry));
    go_through(strips, true);
done:
    if (st != IDS_OK) {
        idsi_strips_clear(strips);
    }
    return st;
}

void idsi_strips_clear(idsi_strips *strips)
{
    idsi_free(strips->ctx, strips->start);
    idsi_free(strips->ctx, strips->entry);
    *strips = (idsi_strips){0};
}

/* to = p_k from; `from` is of degree m. */
static void multiply(const idsi_strips *strips, uint32_t m, uint32_t k, const uint64_t *from,
                     uint64_t *to)
{
    const uint32_t *start = strips->start + strips->first[m][k];

    memset(to, 0, idsi_partition_number(&strips->counts, m + k) * sizeof *to);
    for (uint32_t i = 0; i < idsi_partition_number(&strips->counts, m); i++) {
        for (uint32_t e = start[i]; e < start[i + 1]; e++) {
            const uint32_t entry = strips->entry[e];

            to[entry >> 1] += (entry & 1u) != 0 ? ~from[i] + 1 : from[i];
        }
    }
}

ids_status idsi_character_column(const idsi_strips *strips, const ids_partition *cycle_type,
                                 int64_t *values)
{
    const size_t count = idsi_partition_number(&strips->counts, cycle_type->degree);
    ids_status st = IDS_OK;
    uint64_t *now = NULL;
    uint64_t *next = NULL;
    uint32_t degree = 0;

    IDSI_ASSERT(cycle_type->degree <= strips->max_degree);
    IDSI_ASSERT(cycle_type->degree <= IDSI_MAX_CHARACTER_DEGREE);
    IDSI_TRY(idsi_alloc_array(strips->ctx, count, sizeof *now, &now));
    IDSI_TRY(idsi_alloc_array(strips->ctx, count, sizeof *next, &next));
    now[0] = 1;
    for (uint32_t i = 0; i < cycle_type->length; i++) {
        uint64_t *swap = now;

        multiply(strips, degree, cycle_type->part[i], now, next);
        degree += cycle_type->part[i];
        now = next;
        next = swap;
    }
    memcpy(values, now, count * sizeof *values);
done:
    idsi_free(strips->ctx, now);
    idsi_free(strips->ctx, next);
    return st;
}
