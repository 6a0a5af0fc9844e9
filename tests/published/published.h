/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the tests against published values share: the tables of data/reference, each value with
 * its source, and the presentations of data/.
 */
#ifndef IDSPAN_TEST_PUBLISHED_H
#define IDSPAN_TEST_PUBLISHED_H

#include <inttypes.h>

#include <idspan/idspan.h>

#include "support.h"

#define PUBLISHED_MAX_COLUMNS 12u

/* A table of data/reference. Cells are NUL-terminated and live in `text`. */
typedef struct published_table {
    const char *name;
    char *text;
    size_t columns;
    size_t rows;        /* without the header line */
    const char **cells; /* rows * columns */
} published_table;

/*
 * Reads data/reference/<name>; its first line must be `header`, which is where the tests take
 * their column numbers from. Ends the program with a message when it is not. For main(): the
 * loops over rows must know their number before Check starts.
 */
void published_load(const char *name, const char *header, published_table *table);
void published_free(published_table *table);

const char *published_cell(const published_table *table, size_t row, size_t column);
/* The cell as a number; fails the test when it is none. */
uint64_t published_number(const published_table *table, size_t row, size_t column);
bool published_is(const published_table *table, size_t row, size_t column, const char *word);

/*
 * The rows, one each, where a file stands for the first time in column `file` among the rows
 * that say `word` in column `reach`; rows without a file are passed over. `out` has room for
 * table->rows. Returns their number.
 */
size_t published_files(const published_table *table, size_t file, size_t reach, const char *word,
                       size_t *out);

/* The whole of data/<path>, to be freed with free(); ends the program when it cannot be read. */
char *published_read(const char *path, size_t *length);

/* Reads the presentation data/<path>; fails the test with the message of the library. */
ids_presentation *published_presentation(ids_ctx *ctx, const char *path);

#endif
