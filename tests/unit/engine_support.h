/* SPDX-License-Identifier: BSD-2-Clause */
/* What the tests of lib/engine share: the varieties of the data folder, and a matrix reader. */
#ifndef IDSPAN_TEST_ENGINE_SUPPORT_H
#define IDSPAN_TEST_ENGINE_SUPPORT_H

#include <idspan/engine.h>

#include "support.h"

/* Names of the files in data/varieties, sorted; NULL at the end. */
extern const char *const engine_varieties[];
extern const size_t engine_variety_count;

ids_presentation *engine_presentation(ids_ctx *ctx, const char *text);
/* A file of data/varieties. */
ids_presentation *engine_variety(ids_ctx *ctx, const char *name);

/* A matrix that was written and read back. */
typedef struct engine_entry {
    uint64_t row; /* from 0 */
    uint64_t column;
    int64_t value;
} engine_entry;

typedef struct engine_matrix {
    uint64_t rows;
    uint64_t columns;
    size_t count;
    engine_entry *entries;
    char **names; /* of the columns */
    uint64_t prime;
} engine_matrix;

/*
 * Makes a matrix, writes it to memory and reads the text; checks that it is well formed. False
 * when it has more than `most` columns.
 */
bool engine_matrix_read(ids_ctx *ctx, const ids_presentation *pres, uint32_t degree,
                        const ids_matrix_options *options, uint64_t most, engine_matrix *matrix);
void engine_matrix_clear(engine_matrix *matrix);

#endif
