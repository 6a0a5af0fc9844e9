/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Rank tables as text, CSV, JSON and LaTeX, wherever they come from: by degree, by partition,
 * finished or not.
 */
#include <string.h>

#include "tool.h"

const char *const rank_formats[] = {"text", "csv", "json", "latex", "svg", "html", NULL};

enum { DEGREE, PARTITION, DIMENSION, FREE, CONSEQUENCES, QUOTIENT, CERTAINTY, COLUMNS };

static const ids_column columns[COLUMNS] = {
    [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
    [PARTITION] = {"partition", IDS_COLUMN_TEXT, 0},
    [DIMENSION] = {"dimension", IDS_COLUMN_NUMBER, 0},
    [FREE] = {"free", IDS_COLUMN_NUMBER, 0},
    [CONSEQUENCES] = {"consequences", IDS_COLUMN_NUMBER, 0},
    [QUOTIENT] = {"quotient", IDS_COLUMN_NUMBER, 0},
    [CERTAINTY] = {"certainty", IDS_COLUMN_MATH, 0},
};

/* ---- rows ---------------------------------------------------------------------------- */

/* Without --by partition there are no columns for partition and dimension. */
static bool is_shown(const rank_view *view, size_t column)
{
    return view->by_partition || (column != PARTITION && column != DIMENSION);
}

static const char *missing_of(const rank_view *view, size_t index)
{
    return view->missing == NULL ? NULL : view->missing[index];
}

static ids_status write_row(session *s, const rank_view *view, size_t index, ids_writer *writer)
{
    ids_status st = IDS_OK;
    const ids_partition_row *row = &view->rows[index];
    const char *missing = missing_of(view, index);
    digits numbers[COLUMNS] = {{{0}}};
    char certainty[24] = "exact";
    char *partition = NULL;
    const char *cells[COLUMNS] = {0};
    size_t count = 0;

    numbers[DEGREE] = digits_of(row->degree);
    if (!row->total) {
        numbers[DIMENSION] = digits_of(row->dimension);
        TRY(ids_partition_print(s->ctx, &row->partition, &partition));
    }
    if (missing == NULL) {
        numbers[FREE] = digits_of(row->free);
        numbers[CONSEQUENCES] = digits_of(row->consequences);
        numbers[QUOTIENT] = digits_of(row->quotient);
    }
    if (row->certainty == IDS_CERTAINTY_MODULAR) {
        snprintf(certainty, sizeof certainty, "2^-%u", (unsigned)row->bits);
    }
    for (size_t i = 0; i < COLUMNS; i++) {
        if (is_shown(view, i)) {
            cells[count] = numbers[i].text;
            cells[count] = i == PARTITION ? (row->total ? "total" : partition) : cells[count];
            cells[count] = i == CERTAINTY ? (missing != NULL ? missing : certainty) : cells[count];
            count++;
        }
    }
    TRY(ids_writer_row(writer, cells));
done:
    ids_string_free(s->ctx, partition);
    return st;
}

static ids_status write_notes(const rank_view *view, ids_writer *writer)
{
    ids_status st = IDS_OK;

    if (view->field > 0) {
        TRY(ids_writer_note(writer, "field", digits_of(view->field).text));
    } else if (view->primes[0] != '\0') {
        TRY(ids_writer_note(writer, "primes", view->primes));
        TRY(ids_writer_note(writer, "seed", digits_of(view->seed).text));
    }
    if (view->weakened) {
        TRY(ids_writer_note(writer, "warning", WEAKENED_WARNING));
    }
    if (view->cross_checked) {
        TRY(ids_writer_note(writer, "cross-check", "the monomial engine gives the same totals"));
    }
    if (view->stopped != NULL) {
        TRY(ids_writer_note(writer, "stopped", view->stopped));
    }
done:
    return st;
}

/* ---- verdict ------------------------------------------------------------------------- */

/* How sure the numbers of the verdict are: the totals, or the one partition. */
static ids_status write_certainty(session *s, const rank_view *view, size_t numbers)
{
    uint32_t bits = UINT32_MAX;

    for (size_t i = 0; i < view->count; i++) {
        const ids_partition_row *row = &view->rows[i];
        if ((row->total || view->count == 1) && row->certainty == IDS_CERTAINTY_MODULAR) {
            bits = row->bits < bits ? row->bits : bits;
        }
    }
    if (bits == UINT32_MAX) {
        return output_printf(&s->out, " (proved).\n");
    }
    return output_printf(&s->out, " (%stoo large with probability at most 2^-%u).\n",
                         numbers == 1 ? "" : "each ", (unsigned)bits);
}

static ids_status write_multiplicity(session *s, const rank_view *view)
{
    ids_status st = IDS_OK;
    const ids_partition_row *row = &view->rows[0];

    TRY(output_printf(&s->out,
                      "\nPartition %s of degree %u: multiplicity %s in the quotient, %s in the "
                      "free algebra",
                      s->set->partition_text, (unsigned)row->degree, digits_of(row->quotient).text,
                      digits_of(row->free).text));
    TRY(write_certainty(s, view, 1));
done:
    return st;
}

static ids_status write_verdict(session *s, const rank_view *view)
{
    ids_status st = IDS_OK;
    const ids_partition_row *first = &view->rows[0];
    const ids_partition_row *last = &view->rows[view->count - 1];
    size_t numbers = 0;
    char over[32] = "";

    if (view->count == 1 && !first->total) {
        return write_multiplicity(s, view);
    }
    if (view->field > 0) {
        snprintf(over, sizeof over, " over GF(%u)", (unsigned)view->field);
    }
    if (first->degree == last->degree) {
        TRY(output_printf(&s->out, "\nDegree %u%s: a quotient of dimension ",
                          (unsigned)last->degree, over));
    } else {
        TRY(output_printf(&s->out, "\nDegrees %u to %u%s: quotients of dimension ",
                          (unsigned)first->degree, (unsigned)last->degree, over));
    }
    for (size_t i = 0; i < view->count; i++) {
        if (view->rows[i].total) {
            TRY(output_printf(&s->out, "%s%s", numbers > 0 ? ", " : "",
                              digits_of(view->rows[i].quotient).text));
            numbers++;
        }
    }
    TRY(write_certainty(s, view, numbers));
done:
    return st;
}

/* ---- table --------------------------------------------------------------------------- */

ids_status rank_write(session *s, const rank_view *view)
{
    ids_status st = IDS_OK;
    bool text = s->set->format == IDS_FORMAT_TEXT;
    ids_column shown[COLUMNS] = {{0}};
    size_t count = 0;
    ids_writer *writer = NULL;

    if (is_report_format(s->set)) {
        return report_view(s, view);
    }
    if (text && view->count == 0) {
        return IDS_OK;
    }
    for (size_t i = 0; i < COLUMNS; i++) {
        if (is_shown(view, i)) {
            shown[count++] = columns[i];
        }
    }
    TRY(ids_writer_create(s->ctx, s->set->format, "rank", shown, count, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < view->count; i++) {
        TRY(write_row(s, view, i, writer));
    }
    TRY(write_notes(view, writer));
    TRY(ids_writer_end(writer));
    if (text && view->verdict) {
        TRY(write_verdict(s, view));
    }
    /* The finished degrees of work that was stopped are a result, a table without any is not. */
    s->keep = view->count > 0;
done:
    ids_writer_free(writer);
    return st;
}

void primes_append(char *text, uint64_t prime)
{
    size_t used = strlen(text);
    digits next = digits_of(prime);

    if (used > 0 && text[used - 1] == '.') {
        return;
    }
    if (used + strlen(next.text) + 6 > PRIMES_CHARS) {
        snprintf(text + used, PRIMES_CHARS - used, " ...");
    } else {
        snprintf(text + used, PRIMES_CHARS - used, "%s%s", used > 0 ? " " : "", next.text);
    }
}
