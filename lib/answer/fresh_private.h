/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files behind ids_fresh share.
 */
#ifndef IDSI_FRESH_PRIVATE_H
#define IDSI_FRESH_PRIVATE_H

#include <idspan/fresh.h>

#include "../model/realize_private.h"

struct ids_fresh {
    ids_ctx *ctx;
    const ids_model *model;
    size_t count;
    size_t capacity;
    ids_fresh_row *rows;
    size_t prime_count;
    uint32_t *primes;
};

/* log2 of the orders of the row and the column group of a partition, together. */
double idsi_partition_group_bits(const ids_partition *partition);

/* Adds the rows of one degree to a result. (fresh_table.c) */
ids_status idsi_fresh_degree(ids_fresh *fresh, const ids_presentation *known, uint32_t degree);

#endif
