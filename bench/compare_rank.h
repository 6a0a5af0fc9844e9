/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What compare_rank.c and compare_ours.c share. They are apart because PARI's header and ours
 * define the same short names.
 */
#ifndef IDSPAN_BENCH_COMPARE_RANK_H
#define IDSPAN_BENCH_COMPARE_RANK_H

#include <stddef.h>
#include <stdint.h>

#define COMPARE_PRIME 1073741789u

typedef struct compare_matrix {
    size_t rows;
    size_t columns;
    size_t count;
    size_t *start; /* rows + 1 */
    uint32_t *column;
    uint32_t *value;
} compare_matrix;

/* Ends the process when it fails. */
size_t compare_rank_ours(const compare_matrix *m);

#endif
