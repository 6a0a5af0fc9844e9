/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Matrices of consequences in Matrix Market form, as the public calls write them.
 *
 * The rows are made twice: once to count rows and entries, which stand at the head of the file,
 * and once to write them. Nothing but the row at work is held. The matrix of the quotient step
 * takes the rows that the elimination takes; here the entries of a row are sorted, and equal
 * columns added up. Degree 1 has no quotient step; its matrix is the plain one.
 */
#include <stdlib.h>
#include <string.h>

#include "normal_private.h"

#define PIECE 32768u

struct ids_matrix {
    ids_ctx *ctx;
    const ids_presentation *pres;
    idsi_laws *laws;
    uint32_t degree;
    bool is_plain;
    idsi_plain plain;
    idsi_tower tower; /* of the quotient step: the degrees below */
    idsi_level level; /* and its columns */
    uint64_t rows;
    uint64_t columns;
    uint64_t entries;
};

/* ---- text ------------------------------------------------------------------------------------ */

void idsi_market_init(idsi_market *market, ids_ctx *ctx, ids_sink_fn sink, void *user)
{
    *market = (idsi_market){.ctx = ctx, .sink = sink, .user = user};
    idsi_text_init(&market->text, ctx);
}

void idsi_market_clear(idsi_market *market)
{
    idsi_text_clear(&market->text);
}

ids_status idsi_market_flush(idsi_market *market, bool all)
{
    idsi_text *text = &market->text;

    if (text->length >= PIECE || (all && text->length > 0)) {
        if (market->sink(market->user, text->data, text->length) != 0) {
            return idsi_fail(market->ctx, IDS_ERR_IO, "the matrix cannot be written");
        }
        text->length = 0;
    }
    return IDS_OK;
}

/* ---- rows of the quotient step --------------------------------------------------------------- */

typedef struct step {
    const ids_matrix *matrix;
    idsi_entry *row;
    size_t capacity;
    uint64_t rows;
    uint64_t entries;
    idsi_market *market; /* NULL: only count */
} step;

static int compare_columns(const void *a, const void *b)
{
    const idsi_entry *x = a;
    const idsi_entry *y = b;
    return (x->column > y->column) - (x->column < y->column);
}

/* Sorts entries and adds up equal columns; the number of entries that are not 0. */
static size_t collect(idsi_entry *row, size_t count, uint32_t prime)
{
    size_t kept = 0;

    qsort(row, count, sizeof *row, compare_columns);
    for (size_t i = 0; i < count;) {
        uint32_t column = row[i].column;
        uint64_t sum = 0;
        for (; i < count && row[i].column == column; i++) {
            sum += row[i].value;
        }
        if (sum % prime != 0) {
            row[kept] = (idsi_entry){column, (uint32_t)(sum % prime)};
            kept++;
        }
    }
    return kept;
}

static ids_status step_row(void *user, const idsi_entry *entries, size_t count)
{
    ids_status st = IDS_OK;
    step *s = user;
    uint32_t prime = s->matrix->tower.prime;

    if (count > s->capacity) {
        IDSI_TRY(idsi_resize_array(s->matrix->ctx, 2 * count, sizeof *s->row, &s->row));
        s->capacity = 2 * count;
    }
    memcpy(s->row, entries, count * sizeof *entries);
    size_t kept = collect(s->row, count, prime);
    s->rows += kept > 0;
    s->entries += kept;
    for (size_t i = 0; s->market != NULL && i < kept; i++) {
        int64_t value = s->row[i].value;
        value = value > prime / 2 ? value - (int64_t)prime : value;
        IDSI_TRY(idsi_text_printf(&s->market->text, "%llu %llu %lld\n", (unsigned long long)s->rows,
                                  (unsigned long long)s->row[i].column + 1, (long long)value));
        IDSI_TRY(idsi_market_flush(s->market, false));
    }
done:
    return st;
}

static ids_status each_step_row(const ids_matrix *matrix, step *s)
{
    ids_status st = idsi_rows_each(&matrix->tower, &matrix->level, step_row, s);
    idsi_free(matrix->ctx, s->row);
    return st;
}

/* ---- making ---------------------------------------------------------------------------------- */

static ids_status check_options(ids_ctx *ctx, const ids_matrix_options *options,
                                ids_matrix_options *chosen)
{
    ids_status st = IDS_OK;

    memset(chosen, 0, sizeof *chosen);
    if (options != NULL) {
        IDSI_TRY(
            idsi_check_struct(ctx, "ids_matrix_options", options->struct_size, sizeof *options));
        *chosen = *options;
    }
    if (chosen->field != 0) {
        IDSI_TRY(idsi_prime_check(ctx, chosen->field));
        if (chosen->plain) {
            st = idsi_fail(ctx, IDS_ERR_ARG,
                           "the plain matrix has integers as entries, not those of a field");
        }
    }
done:
    return st;
}

static ids_status make_plain(ids_matrix *matrix)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_plain_init(&matrix->plain, matrix->ctx, matrix->laws, matrix->degree));
    matrix->rows = matrix->plain.rows;
    matrix->entries = matrix->plain.entries;
    matrix->columns = ids_basis_size(matrix->plain.basis[matrix->degree]);
done:
    return st;
}

static ids_status make_step(ids_matrix *matrix, const ids_matrix_options *options)
{
    ids_status st = IDS_OK;
    step s = {.matrix = matrix};
    idsi_random random;

    idsi_random_seed(&random, options->seed);
    idsi_tower_init(&matrix->tower, matrix->ctx, matrix->laws,
                    options->field != 0 ? options->field : idsi_prime_draw(&random, NULL, 0));
    for (uint32_t degree = 1; degree < matrix->degree; degree++) {
        IDSI_TRY(idsi_tower_grow(&matrix->tower, true));
    }
    IDSI_TRY(idsi_level_plan(&matrix->tower, &matrix->level));
    matrix->columns = matrix->level.columns;
    if (matrix->columns > 0) {
        IDSI_TRY(each_step_row(matrix, &s));
    }
    matrix->rows = s.rows;
    matrix->entries = s.entries;
done:
    return st;
}

ids_status ids_matrix_create(ids_ctx *ctx, const ids_presentation *presentation, uint32_t degree,
                             const ids_matrix_options *options, ids_matrix **matrix)
{
    ids_status st = IDS_OK;
    ids_matrix_options chosen = {0};
    ids_matrix *made = NULL;

    if (ctx == NULL || presentation == NULL || matrix == NULL) {
        return idsi_fail_arg(ctx, "context, presentation or result");
    }
    if (degree == 0 || degree > IDS_MAX_DEGREE) {
        return idsi_fail(ctx, IDS_ERR_ARG, "degree %u: possible are 1 to %u", degree,
                         IDS_MAX_DEGREE);
    }
    IDSI_TRY(check_options(ctx, options, &chosen));
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->pres = presentation;
    made->degree = degree;
    made->is_plain = chosen.plain || degree == 1;
    IDSI_TRY(idsi_laws_create_over(ctx, presentation, chosen.field, &made->laws));
    IDSI_TRY(made->is_plain ? make_plain(made) : make_step(made, &chosen));
    *matrix = made;
    made = NULL;
done:
    ids_matrix_free(made);
    return st;
}

void ids_matrix_free(ids_matrix *matrix)
{
    if (matrix != NULL) {
        idsi_plain_clear(&matrix->plain);
        idsi_level_clear(matrix->ctx, &matrix->level);
        idsi_tower_clear(&matrix->tower);
        idsi_laws_free(matrix->laws);
        idsi_free(matrix->ctx, matrix);
    }
}

uint64_t ids_matrix_rows(const ids_matrix *matrix)
{
    return matrix == NULL ? 0 : matrix->rows;
}

uint64_t ids_matrix_columns(const ids_matrix *matrix)
{
    return matrix == NULL ? 0 : matrix->columns;
}

uint64_t ids_matrix_entries(const ids_matrix *matrix)
{
    return matrix == NULL ? 0 : matrix->entries;
}

uint32_t ids_matrix_prime(const ids_matrix *matrix)
{
    return matrix == NULL ? 0 : matrix->tower.prime;
}

/* ---- writing --------------------------------------------------------------------------------- */

static ids_status write_head(const ids_matrix *matrix, idsi_market *market)
{
    ids_status st = IDS_OK;
    idsi_text *text = &market->text;

    IDSI_TRY(idsi_text_puts(text, "%%MatrixMarket matrix coordinate integer general\n"));
    if (matrix->is_plain) {
        IDSI_TRY(idsi_text_printf(text,
                                  "%% degree %u: rows are the consequences of the identities, "
                                  "columns the monomials\n",
                                  matrix->degree));
    } else {
        IDSI_TRY(idsi_text_printf(
            text,
            "%% degree %u: rows are the identities in normal forms, columns the products of "
            "normal forms\n"
            "%% entries are residues of least absolute value modulo the prime %u\n",
            matrix->degree, matrix->tower.prime));
    }
    IDSI_TRY(idsi_text_printf(text, "%llu %llu %llu\n", (unsigned long long)matrix->rows,
                              (unsigned long long)matrix->columns,
                              (unsigned long long)matrix->entries));
done:
    return st;
}

static ids_status check_writing(ids_ctx *ctx, const ids_matrix *matrix, ids_sink_fn sink)
{
    if (ctx == NULL || matrix == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, matrix or sink");
    }
    if (ctx != matrix->ctx) {
        return idsi_fail(ctx, IDS_ERR_ARG, "the matrix was made with another context");
    }
    return IDS_OK;
}

ids_status ids_matrix_write(ids_ctx *ctx, const ids_matrix *matrix, ids_sink_fn sink,
                            void *sink_user)
{
    ids_status st = check_writing(ctx, matrix, sink);
    idsi_market market;
    step s = {.matrix = matrix, .market = &market};

    if (st != IDS_OK) {
        return st;
    }
    idsi_market_init(&market, ctx, sink, sink_user);
    IDSI_TRY(write_head(matrix, &market));
    if (matrix->is_plain) {
        IDSI_TRY(idsi_plain_write(&matrix->plain, &market));
    } else if (matrix->columns > 0) {
        IDSI_TRY(each_step_row(matrix, &s));
    }
    IDSI_TRY(idsi_market_flush(&market, true));
done:
    idsi_market_clear(&market);
    return st;
}

static ids_status write_name(const ids_matrix *matrix, uint64_t column, idsi_market *market)
{
    ids_status st = IDS_OK;
    const ids_signature *sig = matrix->pres->sig;
    idsi_token tree[IDSI_MAX_TOKENS];

    if (matrix->is_plain) {
        int32_t code[IDSI_MAX_TOKENS];
        size_t length = 0;
        IDSI_TRY(ids_basis_unrank_code(matrix->plain.basis[matrix->degree], column, code,
                                       IDSI_MAX_TOKENS, &length));
        for (size_t i = 0; i < length; i++) {
            tree[i] = code[i] < 0 ? idsi_node((uint32_t)(-1 - code[i])) : (idsi_token)code[i];
        }
    } else {
        (void)idsi_column_tree(&matrix->tower, &matrix->level, column,
                               idsi_labels_all(matrix->degree), tree);
    }
    IDSI_TRY(idsi_tree_print(sig, tree, NULL, &market->text));
    IDSI_TRY(idsi_text_puts(&market->text, "\n"));
    IDSI_TRY(idsi_market_flush(market, false));
done:
    return st;
}

ids_status ids_matrix_write_columns(ids_ctx *ctx, const ids_matrix *matrix, ids_sink_fn sink,
                                    void *sink_user)
{
    ids_status st = check_writing(ctx, matrix, sink);
    idsi_market market;

    if (st != IDS_OK) {
        return st;
    }
    idsi_market_init(&market, ctx, sink, sink_user);
    for (uint64_t column = 0; column < matrix->columns; column++) {
        ids_progress progress = {
            .stage = "columns", .degree = matrix->degree, .done = column, .total = matrix->columns};
        IDSI_TRY(idsi_poll(ctx, &progress));
        IDSI_TRY(write_name(matrix, column, &market));
    }
    IDSI_TRY(idsi_market_flush(&market, true));
done:
    idsi_market_clear(&market);
    return st;
}
