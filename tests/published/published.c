/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Reads the tables of data/reference: comma-separated, a cell in double quotes when it holds a
 * comma, a doubled quote inside such a cell (RFC 4180), no line breaks in cells. The text is cut
 * in place: separators become NULs and the cells point into it.
 */
#include "published.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static void give_up(const char *path, const char *what)
{
    fprintf(stderr, "%s: %s\n", path, what);
    exit(EXIT_FAILURE);
}

char *published_read(const char *path, size_t *length)
{
    char name[1024];
    FILE *file = NULL;
    char *text = NULL;
    size_t capacity = 0;
    size_t used = 0;

    snprintf(name, sizeof name, "%s/%s", IDSPAN_DATA_DIR, path);
    file = fopen(name, "rb");
    if (file == NULL) {
        give_up(name, "cannot be opened");
    }
    do {
        capacity = 2 * capacity + 65536;
        text = realloc(text, capacity + 1);
        if (text == NULL) {
            give_up(name, "no memory");
        }
        used += fread(text + used, 1, capacity - used, file);
    } while (used == capacity);
    if (ferror(file)) {
        give_up(name, "cannot be read");
    }
    fclose(file);
    text[used] = '\0';
    *length = used;
    return text;
}

/* Cuts one cell; returns what stands after it: ',' (another cell follows), '\n' or '\0'. */
static char cut_cell(char **at, const char **cell)
{
    char *from = *at;
    char *to = *at;
    char after = '\0';

    *cell = to;
    if (*from == '"') {
        from++;
        while (*from != '\0' && (*from != '"' || from[1] == '"')) {
            from += *from == '"' ? 1 : 0;
            *to++ = *from++;
        }
        from += *from == '"' ? 1 : 0;
    } else {
        from += strcspn(from, ",\n");
        to = from;
    }
    after = *from;
    *at = after == '\0' ? from : from + 1;
    *to = '\0';
    return after;
}

static void cut_rows(const char *path, char *at, published_table *table)
{
    size_t lines = 1;
    size_t count = 0;

    for (const char *c = at; *c != '\0'; c++) {
        lines += *c == '\n' ? 1 : 0;
    }
    table->cells = calloc(lines * table->columns, sizeof *table->cells);
    if (table->cells == NULL) {
        give_up(path, "no memory");
    }
    while (*at != '\0') {
        char after = ',';
        for (size_t column = 0; column < table->columns; column++) {
            if (after != ',') {
                give_up(path, "a line has too few cells");
            }
            after = cut_cell(&at, &table->cells[count++]);
        }
        if (after != '\n' && after != '\0') {
            give_up(path, "a line has too many cells");
        }
        table->rows++;
    }
}

void published_load(const char *name, const char *header, published_table *table)
{
    const size_t header_length = strlen(header);
    char path[256];
    size_t length = 0;

    *table = (published_table){.name = name, .columns = 1};
    snprintf(path, sizeof path, "reference/%s", name);
    table->text = published_read(path, &length);
    if (strncmp(table->text, header, header_length) != 0 || table->text[header_length] != '\n') {
        give_up(path, "the first line is not the expected one");
    }
    for (const char *c = header; *c != '\0'; c++) {
        table->columns += *c == ',' ? 1 : 0;
    }
    cut_rows(path, table->text + header_length + 1, table);
}

void published_free(published_table *table)
{
    free(table->cells);
    free(table->text);
    *table = (published_table){0};
}

const char *published_cell(const published_table *table, size_t row, size_t column)
{
    ck_assert(row < table->rows && column < table->columns);
    return table->cells[row * table->columns + column];
}

uint64_t published_number(const published_table *table, size_t row, size_t column)
{
    const char *cell = published_cell(table, row, column);
    char *end = NULL;
    const unsigned long long value = strtoull(cell, &end, 10);

    ck_assert_msg(*cell >= '0' && *cell <= '9' && *end == '\0',
                  "%s, line %zu: \"%s\" is not a number", table->name, row + 2, cell);
    return value;
}

bool published_is(const published_table *table, size_t row, size_t column, const char *word)
{
    return strcmp(table->cells[row * table->columns + column], word) == 0;
}

size_t published_files(const published_table *table, size_t file, size_t reach, const char *word,
                       size_t *out)
{
    size_t count = 0;

    for (size_t row = 0; row < table->rows; row++) {
        const char *name = table->cells[row * table->columns + file];
        bool seen = *name == '\0' || !published_is(table, row, reach, word);
        for (size_t i = 0; i < count && !seen; i++) {
            seen = published_is(table, out[i], file, name);
        }
        if (!seen) {
            out[count++] = row;
        }
    }
    return count;
}

ids_presentation *published_presentation(ids_ctx *ctx, const char *path)
{
    ids_presentation *presentation = NULL;
    size_t length = 0;
    char *text = published_read(path, &length);

    TEST_OK(ctx, ids_presentation_read(ctx, text, length, path, &presentation));
    free(text);
    return presentation;
}
