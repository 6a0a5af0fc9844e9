/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Partitions and characters of the symmetric groups, as the other rooms see them.
 */
#ifndef IDSI_YOUNG_PRIVATE_H
#define IDSI_YOUNG_PRIVATE_H

#include <idspan/young.h>

#include "../core/core_private.h"

/* ---- partitions (partition.c) ----------------------------------------------------------- */

/* at[n][k] = number of partitions of n with no part over k; at[n][n] is the number of all. */
typedef struct idsi_partition_counts {
    uint32_t at[IDS_MAX_PARTITION_DEGREE + 1][IDS_MAX_PARTITION_DEGREE + 1];
} idsi_partition_counts;

void idsi_partition_counts_fill(idsi_partition_counts *counts);
/* Number of the partitions of a degree. */
static inline uint32_t idsi_partition_number(const idsi_partition_counts *counts, uint32_t degree)
{
    return counts->at[degree][degree];
}

bool idsi_partition_is_valid(const ids_partition *partition);
/* Index in the list of the degree; the partition must be valid. At most `length` look-ups. */
uint32_t idsi_partition_index(const idsi_partition_counts *counts, const ids_partition *partition);
/* index < idsi_partition_number(). */
void idsi_partition_at(const idsi_partition_counts *counts, uint32_t degree, uint32_t index,
                       ids_partition *partition);
/* The first partition of a degree, the one with one part; then the next, false after the last
 * (the partition is then left as it was). */
void idsi_partition_first(uint32_t degree, ids_partition *partition);
bool idsi_partition_next(ids_partition *partition);

/* Order of the centraliser of a permutation of this cycle type, product of i^m_i m_i!, m_i = number
 * of parts i. IDS_ERR_LIMIT when it passes 64 bits (not up to degree 20). */
ids_status idsi_partition_centralizer(const ids_partition *partition, uint64_t *order);

/* "4+3+1" in a buffer that always suffices: no partition of 40 is longer than its digits. */
#define IDSI_PARTITION_TEXT (2u * IDS_MAX_PARTITION_DEGREE)
void idsi_partition_write(const ids_partition *partition, char text[IDSI_PARTITION_TEXT]);

/*
 * Beads: the diagram as a set of first-column hook lengths, bit part[i] + (count - 1 - i) for
 * i < count, parts after the last being 0; count >= length, part[0] + count <= 64. Moving a bead
 * down by k places to a free one takes a border strip of size k off, moving it up adds one, and
 * the strip covers one row more than there are beads that were jumped over.
 */
uint64_t idsi_partition_beads(const ids_partition *partition, uint32_t count);
void idsi_partition_from_beads(uint64_t beads, ids_partition *partition);

/* log2 of n!. */
double idsi_factorial_bits(uint32_t n);
/* log2 of the orders of the row and the column group of a partition, together. */
double idsi_partition_group_bits(const ids_partition *partition);

/* ---- characters (character.c) ------------------------------------------------------------- */

/*
 * The border strips that can be added: for all m + k <= max_degree, k > 0, and each partition of
 * m the partitions of m + k that it becomes with a strip of k cells. An entry is twice the index
 * of such a partition, plus one when the strip covers an even number of rows (sign -1). The
 * entries of partition i begin at entry[start[first[m][k] + i]] and end where the next ones begin.
 */
typedef struct idsi_strips {
    ids_ctx *ctx;
    uint32_t max_degree;
    idsi_partition_counts counts;
    size_t first[IDS_MAX_PARTITION_DEGREE + 1][IDS_MAX_PARTITION_DEGREE + 1];
    uint32_t *start;
    uint32_t *entry;
} idsi_strips;

/* max_degree <= IDS_MAX_PARTITION_DEGREE. Memory: 6 MB for degree 32, 34 MB for degree 40; the cost
 * is in proportion to it. */
ids_status idsi_strips_create(ids_ctx *ctx, uint32_t max_degree, idsi_strips *strips);
void idsi_strips_clear(idsi_strips *strips); /* all zeros is fine */

/* No character passes the square root of degree!, so up to here 64 bits hold all. */
#define IDSI_MAX_CHARACTER_DEGREE 33u

/* values[i] = character of partition i at the permutations of a cycle type, i over all partitions
 * of its degree, which is at most that of the strips and IDSI_MAX_CHARACTER_DEGREE. */
ids_status idsi_character_column(const idsi_strips *strips, const ids_partition *cycle_type,
                                 int64_t *values);

/* ---- free algebra (plethysm.c, cocharacter.c) -------------------------------------------- */

/* Multiplicities of the degrees 1 .. max_degree, one after the other; that of partition i of
 * degree d is multiplicity[first[d] + i], UINT64_MAX when it does not fit. */
struct ids_cocharacter {
    ids_ctx *ctx;
    uint32_t max_degree;
    size_t first[IDS_MAX_PARTITION_DEGREE + 2];
    uint64_t *multiplicity;
};

#endif
