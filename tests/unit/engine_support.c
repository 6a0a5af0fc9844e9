/* SPDX-License-Identifier: BSD-2-Clause */
#include "engine_support.h"

#include <inttypes.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

const char *const engine_varieties[] = {
    "akivis.pres",
    "alternative.pres",
    "antiassociative.pres",
    "associative-commutative.pres",
    "associative.pres",
    "assosymmetric.pres",
    "bicommutative.pres",
    "bihamiltonian.pres",
    "binary-ternary-derivation.pres",
    "binary-ternary-free.pres",
    "compatible-lie.pres",
    "dendriform.pres",
    "diassociative.pres",
    "dual-alternative.pres",
    "filippov-3.pres",
    "filippov-4.pres",
    "flexible.pres",
    "grassmann.pres",
    "hanlon-wachs-4.pres",
    "jordan-triple.pres",
    "jordan.pres",
    "leibniz-left.pres",
    "leibniz.pres",
    "lie-admissible.pres",
    "lie-triple-laws.pres",
    "lie-triple.pres",
    "lie.pres",
    "malcev.pres",
    "metabelian-lie.pres",
    "mock-lie.pres",
    "nap.pres",
    "noncommutative-jordan.pres",
    "novikov.pres",
    "partial-associative-3.pres",
    "partial-associative-4-signs.pres",
    "partial-associative-4.pres",
    "perm.pres",
    "poisson.pres",
    "power-associative-commutative.pres",
    "pre-lie.pres",
    "right-alternative.pres",
    "shuffle-3-alternating.pres",
    "shuffle-3.pres",
    "square-zero-squares.pres",
    "ternary-cube-exchange.pres",
    "tortkara.pres",
    "total-associative-3.pres",
    "total-commutative-3.pres",
    "total-commutative-4.pres",
    "ut2.pres",
    "zinbiel.pres",
    NULL,
};
const size_t engine_variety_count = sizeof engine_varieties / sizeof *engine_varieties - 1;

ids_presentation *engine_presentation(ids_ctx *ctx, const char *text)
{
    ids_presentation *pres = NULL;
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), "test", &pres));
    return pres;
}

ids_presentation *engine_variety(ids_ctx *ctx, const char *name)
{
    char path[1024];
    char text[16384];
    FILE *file = NULL;

    snprintf(path, sizeof path, "%s/varieties/%s", IDSPAN_DATA_DIR, name);
    file = fopen(path, "rb");
    ck_assert_msg(file != NULL, "%s is missing", path);
    size_t length = fread(text, 1, sizeof text - 1, file);
    fclose(file);
    ck_assert_uint_lt(length, sizeof text - 1);
    text[length] = '\0';
    return engine_presentation(ctx, text);
}

/* ---- matrices ---------------------------------------------------------------------------- */

typedef struct buffer {
    char *text;
    size_t length;
} buffer;

static int keep(void *user, const char *bytes, size_t length)
{
    buffer *b = user;

    b->text = realloc(b->text, b->length + length + 1);
    ck_assert_ptr_nonnull(b->text);
    memcpy(b->text + b->length, bytes, length);
    b->length += length;
    b->text[b->length] = '\0';
    return 0;
}

/* Cuts off a line. */
static char *next_line(char **at)
{
    char *line = *at;
    char *end = strchr(line, '\n');

    ck_assert_ptr_nonnull(end);
    *end = '\0';
    *at = end + 1;
    return line;
}

static void read_entries(char *text, engine_matrix *matrix)
{
    char *line = next_line(&text);
    uint64_t count = 0;

    ck_assert_str_eq(line, "%%MatrixMarket matrix coordinate integer general");
    while (*(line = next_line(&text)) == '%') {
        const char *prime = strstr(line, "prime ");
        matrix->prime = prime != NULL ? strtoull(prime + 6, NULL, 10) : matrix->prime;
    }
    ck_assert_int_eq(
        sscanf(line, "%" SCNu64 " %" SCNu64 " %" SCNu64, &matrix->rows, &matrix->columns, &count),
        3);
    matrix->count = (size_t)count;
    matrix->entries = calloc(matrix->count + 1, sizeof *matrix->entries);
    ck_assert_ptr_nonnull(matrix->entries);
    for (size_t i = 0; i < matrix->count; i++) {
        engine_entry *e = &matrix->entries[i];
        const engine_entry *before = i > 0 ? e - 1 : NULL;
        line = next_line(&text);
        ck_assert_int_eq(
            sscanf(line, "%" SCNu64 " %" SCNu64 " %" SCNd64, &e->row, &e->column, &e->value), 3);
        ck_assert(e->row >= 1 && e->row <= matrix->rows);
        ck_assert(e->column >= 1 && e->column <= matrix->columns);
        ck_assert_int_ne(e->value, 0);
        e->row--;
        e->column--;
        /* Row by row, none left out, columns increasing. */
        ck_assert(before != NULL ? e->row == before->row + 1 ||
                                       (e->row == before->row && e->column > before->column)
                                 : e->row == 0);
    }
    ck_assert(matrix->count == 0 || matrix->entries[matrix->count - 1].row + 1 == matrix->rows);
    ck_assert_str_eq(text, "");
}

bool engine_matrix_read(ids_ctx *ctx, const ids_presentation *pres, uint32_t degree,
                        const ids_matrix_options *options, uint64_t most, engine_matrix *matrix)
{
    ids_matrix *made = NULL;
    buffer text = {0};
    buffer names = {0};

    memset(matrix, 0, sizeof *matrix);
    TEST_OK(ctx, ids_matrix_create(ctx, pres, degree, options, &made));
    if (ids_matrix_columns(made) > most) {
        ids_matrix_free(made);
        return false;
    }
    TEST_OK(ctx, ids_matrix_write(ctx, made, keep, &text));
    TEST_OK(ctx, ids_matrix_write_columns(ctx, made, keep, &names));
    read_entries(text.text, matrix);
    ck_assert_uint_eq(matrix->rows, ids_matrix_rows(made));
    ck_assert_uint_eq(matrix->columns, ids_matrix_columns(made));
    ck_assert_uint_eq(matrix->count, ids_matrix_entries(made));
    ck_assert_uint_eq(matrix->prime, ids_matrix_prime(made));
    matrix->names = calloc(matrix->columns + 1, sizeof *matrix->names);
    ck_assert_ptr_nonnull(matrix->names);
    char *at = names.text;
    for (uint64_t c = 0; c < matrix->columns; c++) {
        matrix->names[c] = strdup(next_line(&at));
    }
    ck_assert(at == NULL || *at == '\0');
    free(text.text);
    free(names.text);
    ids_matrix_free(made);
    return true;
}

void engine_matrix_clear(engine_matrix *matrix)
{
    for (uint64_t c = 0; c < matrix->columns; c++) {
        free(matrix->names[c]);
    }
    free(matrix->names);
    free(matrix->entries);
}
