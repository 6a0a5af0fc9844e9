/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan fresh: identities of a model that the presentation does not imply.
 */
#include <stdlib.h>
#include <string.h>

#include "tool.h"

/* The limit of ids_fresh_create(). */
#define MOST_DEGREE 16u

#define LINE_WIDTH 96u
#define LATEX_WIDTH 80u

enum { DEGREE, PARTITION, DIMENSION, FREE, HOLDING, CONSEQUENCES, FRESH, CERTAINTY, COLUMNS };

/* ---- the table ----------------------------------------------------------------------- */

static ids_status write_row(session *s, const ids_fresh_row *row, ids_writer *writer)
{
    ids_status st = IDS_OK;
    digits numbers[COLUMNS] = {{{0}}};
    char certainty[24] = "exact";
    char *partition = NULL;
    const char *cells[COLUMNS] = {0};

    if (row->certainty == IDS_CERTAINTY_MODULAR) {
        snprintf(certainty, sizeof certainty, "2^-%u", (unsigned)row->bits);
    }
    numbers[DEGREE] = digits_of(row->degree);
    numbers[FREE] = digits_of(row->free);
    numbers[HOLDING] = digits_of(row->holding);
    numbers[CONSEQUENCES] = digits_of(row->consequences);
    numbers[FRESH] = digits_of(row->fresh);
    if (!row->total) {
        numbers[DIMENSION] = digits_of(row->dimension);
        TRY(ids_partition_print(s->ctx, &row->partition, &partition));
    }
    for (size_t i = 0; i < COLUMNS; i++) {
        cells[i] = numbers[i].text;
    }
    cells[PARTITION] = row->total ? "total" : partition;
    cells[CERTAINTY] = certainty;
    TRY(ids_writer_row(writer, cells));
done:
    ids_string_free(s->ctx, partition);
    return st;
}

/* The identities as notes of the table, which JSON keeps. */
static ids_status note_identities(const ids_fresh *fresh, ids_writer *writer)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < ids_fresh_identity_count(fresh); i++) {
        ids_fresh_identity found = {0};
        TRY(ids_fresh_identity_get(fresh, i, &found));
        TRY(ids_writer_note(writer, found.name, found.statement));
    }
done:
    return st;
}

static ids_status write_table(session *s, const ids_fresh *fresh)
{
    static const ids_column columns[COLUMNS] = {
        [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
        [PARTITION] = {"partition", IDS_COLUMN_MATH, 0},
        [DIMENSION] = {"dimension", IDS_COLUMN_NUMBER, 0},
        [FREE] = {"free", IDS_COLUMN_NUMBER, 0},
        [HOLDING] = {"holding", IDS_COLUMN_NUMBER, 0},
        [CONSEQUENCES] = {"consequences", IDS_COLUMN_NUMBER, 0},
        [FRESH] = {"fresh", IDS_COLUMN_NUMBER, 0},
        [CERTAINTY] = {"certainty", IDS_COLUMN_MATH, 0},
    };
    ids_status st = IDS_OK;
    ids_writer *writer = NULL;
    char primes[PRIMES_CHARS] = "";

    TRY(ids_writer_create(s->ctx, s->set->format, "fresh", columns, COLUMNS, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < ids_fresh_count(fresh); i++) {
        ids_fresh_row row = {0};
        TRY(ids_fresh_row_get(fresh, i, &row));
        TRY(write_row(s, &row, writer));
    }
    for (size_t i = 0; i < ids_fresh_prime_count(fresh); i++) {
        primes_append(primes, ids_fresh_prime(fresh, i));
    }
    TRY(ids_writer_note(writer, "primes", primes));
    TRY(ids_writer_note(writer, "seed", digits_of(s->set->seed).text));
    if (s->set->format == IDS_FORMAT_JSON) {
        TRY(note_identities(fresh, writer));
    }
    TRY(ids_writer_end(writer));
done:
    ids_writer_free(writer);
    return st;
}

/* ---- the verdict --------------------------------------------------------------------- */

/* The partitions of one degree in which something is new; none: nothing is written. */
static ids_status write_degree(session *s, const ids_fresh *fresh, const char *model,
                               uint32_t degree, bool *any)
{
    ids_status st = IDS_OK;
    char *partition = NULL;
    bool first = true;

    for (size_t i = 0; i < ids_fresh_count(fresh); i++) {
        ids_fresh_row row = {0};
        TRY(ids_fresh_row_get(fresh, i, &row));
        if (row.total || row.fresh == 0 || row.degree != degree) {
            continue;
        }
        TRY(ids_partition_print(s->ctx, &row.partition, &partition));
        if (first) {
            TRY(output_printf(&s->out, "%sDegree %u: new in %s are", *any ? "" : "\n",
                              (unsigned)degree, model));
        }
        TRY(output_printf(&s->out, "%s %s", first ? "" : ",", partition));
        if (row.fresh > 1) {
            TRY(output_printf(&s->out, " (%s times)", digits_of(row.fresh).text));
        }
        ids_string_free(s->ctx, partition);
        partition = NULL;
        first = false;
        *any = true;
    }
    if (!first) {
        TRY(output_printf(&s->out, ".\n"));
    }
done:
    ids_string_free(s->ctx, partition);
    return st;
}

/* The least bits of a total, when not all are proved. */
static uint32_t least_bits(const ids_fresh *fresh, bool *proved)
{
    uint32_t least = UINT32_MAX;

    for (size_t i = 0; i < ids_fresh_count(fresh); i++) {
        ids_fresh_row row = {0};
        if (ids_fresh_row_get(fresh, i, &row) == IDS_OK && row.total &&
            row.certainty == IDS_CERTAINTY_MODULAR && row.bits < least) {
            least = row.bits;
        }
    }
    *proved = least == UINT32_MAX;
    return least;
}

static ids_status write_verdict(session *s, const ids_fresh *fresh, const char *model)
{
    ids_status st = IDS_OK;
    bool any = false;
    bool proved = true;

    for (uint32_t d = s->set->first_degree; d <= s->set->last_degree; d++) {
        TRY(write_degree(s, fresh, model, d, &any));
    }
    if (!any && ids_fresh_count(fresh) > 0) {
        const uint32_t bits = least_bits(fresh, &proved);
        TRY(output_printf(&s->out, "\nNothing new holds in %s", model));
        TRY(proved ? output_printf(&s->out, ".\n")
                   : output_printf(&s->out, " (%swrong with probability at most 2^-%u).\n",
                                   s->set->first_degree < s->set->last_degree ? "each degree " : "",
                                   (unsigned)bits));
    }
done:
    return st;
}

/* ---- identities ---------------------------------------------------------------------- */

/* Writes a statement on lines that end in an operator, so that it can be read again. */
static ids_status write_statement(session *s, const char *text)
{
    ids_status st = IDS_OK;

    while (strlen(text) > LINE_WIDTH) {
        size_t length = 0;
        for (size_t i = 1; text[i + 1] != '\0' && (length == 0 || i < LINE_WIDTH); i++) {
            if ((text[i] == '+' || text[i] == '-') && text[i - 1] == ' ' && text[i + 1] == ' ') {
                length = i + 1;
            }
        }
        if (length == 0) {
            break;
        }
        TRY(output_printf(&s->out, "%.*s\n   ", (int)length, text));
        text += length;
    }
    TRY(output_printf(&s->out, "%s\n", text));
done:
    return st;
}

static ids_status write_identity(session *s, size_t number, const ids_fresh_identity *found)
{
    ids_status st = IDS_OK;

    TRY(output_printf(&s->out, "\n# %s: degree %u, adds %s; %s term%s, coefficients to %s",
                      digits_of(number).text, (unsigned)found->degree, found->modules,
                      digits_of(found->terms).text, found->terms == 1 ? "" : "s", found->largest));
    if (found->first_terms != found->terms || strcmp(found->largest, found->first_largest) != 0) {
        TRY(output_printf(&s->out, " (at first %s, to %s)", digits_of(found->first_terms).text,
                          found->first_largest));
    }
    if (found->bits > 0) {
        TRY(output_printf(&s->out, "; holds, wrong with probability at most 2^-%u",
                          (unsigned)found->bits));
    }
    TRY(output_printf(&s->out, "\n"));
    TRY(write_statement(s, found->statement));
done:
    return st;
}

static ids_status write_identities(session *s, const ids_fresh *fresh)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < ids_fresh_identity_count(fresh); i++) {
        ids_fresh_identity found = {0};
        TRY(ids_fresh_identity_get(fresh, i, &found));
        TRY(write_identity(s, i + 1, &found));
    }
done:
    return st;
}

/* Length of the first piece of a polynomial that fits a line of LaTeX. */
static size_t first_piece(const char *text)
{
    size_t length = 0;

    if (strlen(text) <= LATEX_WIDTH) {
        return strlen(text);
    }
    for (size_t i = 1; text[i] != '\0' && (length == 0 || i < LATEX_WIDTH); i++) {
        if (text[i] == ' ' && (text[i + 1] == '+' || text[i + 1] == '-') && text[i + 2] == ' ') {
            length = i;
        }
    }
    return length == 0 ? strlen(text) : length;
}

static ids_status latex_identity(session *s, const ids_fresh_identity *found, ids_writer *writer)
{
    ids_status st = IDS_OK;
    char *piece = NULL;
    const char *at = found->polynomial;
    digits degree = digits_of(found->degree);
    digits terms = digits_of(found->terms);

    piece = malloc(strlen(at) + 1);
    if (piece == NULL) {
        st = session_fail(s, IDS_ERR_NOMEM, "%s", ids_status_text(IDS_ERR_NOMEM));
        goto done;
    }
    for (bool first = true; *at != '\0'; first = false) {
        size_t length = first_piece(at);
        memcpy(piece, at, length);
        piece[length] = '\0';
        TRY(ids_writer_row(writer,
                           (const char *[]){first ? found->name : "", first ? degree.text : "",
                                            first ? found->modules : "", first ? terms.text : "",
                                            piece, first ? found->alternating : ""}));
        at += length;
        at += *at == ' ';
    }
done:
    free(piece);
    return st;
}

static ids_status latex_identities(session *s, const ids_fresh *fresh)
{
    static const ids_column columns[] = {
        {"name", IDS_COLUMN_TEXT, 0},       {"degree", IDS_COLUMN_NUMBER, 0},
        {"adds", IDS_COLUMN_MATH, 0},       {"terms", IDS_COLUMN_NUMBER, 0},
        {"polynomial", IDS_COLUMN_MATH, 0}, {"alternating in", IDS_COLUMN_MATH, 0},
    };
    ids_status st = IDS_OK;
    ids_writer *writer = NULL;

    if (ids_fresh_identity_count(fresh) == 0) {
        return IDS_OK;
    }
    TRY(output_printf(&s->out, "\n"));
    TRY(ids_writer_create(s->ctx, IDS_FORMAT_LATEX, "identities", columns, 6, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < ids_fresh_identity_count(fresh); i++) {
        ids_fresh_identity found = {0};
        TRY(ids_fresh_identity_get(fresh, i, &found));
        TRY(latex_identity(s, &found, writer));
    }
    TRY(ids_writer_end(writer));
done:
    ids_writer_free(writer);
    return st;
}

/* The presentation with what was found, into the file of --save. */
static ids_status save(session *s, const ids_fresh *fresh)
{
    ids_status st = IDS_OK;
    char *text = NULL;
    output out = {0};

    TRY(ids_fresh_presentation(s->ctx, fresh, &text));
    if (!output_open(&out, s->set->save)) {
        st = IDS_ERR_IO;
        goto done;
    }
    st = output_printf(&out, "%s", text);
    if (!output_close(&out, st == IDS_OK)) {
        st = IDS_ERR_IO;
    }
done:
    ids_string_free(s->ctx, text);
    return st;
}

/* ---- the task ------------------------------------------------------------------------ */

/* Keeps the reason why the work ended early: writing what there is leaves other messages. */
static void keep_reason(session *s, const ids_fresh *fresh, ids_status st)
{
    uint32_t next = s->set->first_degree;
    ids_fresh_row row = {0};

    for (size_t i = 0; fresh != NULL && i < ids_fresh_count(fresh); i++) {
        if (ids_fresh_row_get(fresh, i, &row) == IDS_OK && row.total) {
            next = row.degree + 1;
        }
    }
    if (st == IDS_ERR_CANCELLED) {
        session_fail(s, st, "interrupted before degree %u was finished", (unsigned)next);
    } else if (st != IDS_OK) {
        session_fail(s, st, "%s", ids_ctx_message(s->ctx));
    }
}

static ids_status run(session *s)
{
    ids_status st = IDS_OK;
    ids_fresh_options options = {.struct_size = sizeof options,
                                 .primes = s->set->primes,
                                 .seed = s->set->seed,
                                 .exact = (s->set->seen & BIT(OPTION_EXACT)) != 0,
                                 .table_only = (s->set->seen & BIT(OPTION_TABLE)) != 0};
    ids_model *model = NULL;
    ids_fresh *fresh = NULL;
    ids_status computed = IDS_OK;
    const char *name = NULL;

    TRY(fresh_model_open(s, &name, &model));
    computed = ids_fresh_create(s->ctx, model, s->set->first_degree, s->set->last_degree, &options,
                                &fresh);
    keep_reason(s, fresh, computed);
    if (fresh == NULL) {
        st = computed;
        goto done;
    }
    TRY(write_table(s, fresh));
    if (s->set->format == IDS_FORMAT_TEXT) {
        TRY(write_verdict(s, fresh, name));
        TRY(write_identities(s, fresh));
    } else if (s->set->format == IDS_FORMAT_LATEX) {
        TRY(latex_identities(s, fresh));
    }
    if (s->set->save != NULL) {
        TRY(save(s, fresh));
    }
    s->keep = ids_fresh_count(fresh) > 0;
    st = computed;
done:
    ids_fresh_free(fresh);
    ids_model_free(model);
    return st;
}

const task task_fresh = {
    .name = "fresh",
    .usage = " [--model NAME] --degree N | --degrees A..B\n"
             "          [--table | --save FILE] [--exact] [--primes K] [--seed S]",
    .summary = "find identities of a model that the presentation does not imply",
    .details =
        "A model is made by `model NAME ...` statements of the file. For each partition, what\n"
        "holds in the model is compared with what follows from the identities of the file,\n"
        "which must hold there. Then identities are written down that are new, as lines of a\n"
        "presentation: each holds, does not follow from the others, and with all of them nothing\n"
        "is new. They count as known in higher degrees. A comment tells which modules an identity\n"
        "adds.\n"
        "\n"
        "`free`, `holding`, `consequences` and `fresh` are multiplicities of irreducible modules,\n"
        "in the row `total` dimensions; `fresh` is holding - consequences. Where it is 0 that is\n"
        "exact, elsewhere `certainty` bounds the probability that it is wrong.\n"
        "Columns: degree,partition,dimension,free,holding,consequences,fresh,certainty",
    .examples = "  idspan fresh inheritance.pres --model gametes --degrees 3..4\n"
                "  idspan fresh inheritance.pres --degrees 3..4 --save known.pres",
    .options = BIT(OPTION_MODEL) | BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES) | BIT(OPTION_TABLE) |
               BIT(OPTION_SAVE) | BIT(OPTION_EXACT) | BIT(OPTION_PRIMES) | BIT(OPTION_SEED),
    .wanted = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES),
    .most_degree = MOST_DEGREE,
    .exact = "evaluate an algebra on all tuples of basis elements",
    .run = run,
};
