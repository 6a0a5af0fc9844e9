/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the plan of the rows (rows.c) and their evaluation (row_values.c) share.
 */
#ifndef IDSI_ROWS_PRIVATE_H
#define IDSI_ROWS_PRIVATE_H

#include "engine_private.h"

/* A law with a tuple of degrees for its variables. */
typedef struct idsi_row_job {
    const idsi_law *law;
    idsi_split split;
    uint64_t tuples; /* of normal forms, for each split */
    uint64_t rows;
    uint64_t first_piece;
} idsi_row_job;

/* Makes rows first .. first+count-1 of a job. */
ids_status idsi_rows_evaluate(const idsi_tower *tower, const idsi_level *level,
                              const idsi_row_job *job, uint64_t first, uint64_t count,
                              idsi_row_fn row, void *user);

#endif
