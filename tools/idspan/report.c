/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Tables as pictures and pages: what `rank --format svg` and `html` write in place of a table.
 *
 * The library draws; here a finished table, or what there is of one, is handed to it row by row.
 */
#include <string.h>

#include "tool.h"

bool is_report_format(const settings *set)
{
    return (unsigned)set->format >= FORMAT_SVG;
}

ids_status report_start(session *s, const char *source, const char *text, size_t length,
                        ids_report **report)
{
    const char *slash = strrchr(source, '/');
    ids_status st = IDS_OK;

    TRY(ids_report_create(s->ctx, slash != NULL ? slash + 1 : source, report));
    if (text != NULL) {
        TRY(ids_report_set_presentation(*report, text, length));
    }
done:
    return st;
}

ids_status report_finish(session *s, ids_report *report)
{
    ids_report_form form =
        (unsigned)s->set->format == FORMAT_SVG ? IDS_REPORT_SVG : IDS_REPORT_HTML;

    return ids_report_write(report, form, output_sink, &s->out);
}

/* Degrees that the table should have and has not. */
static ids_status add_missing(session *s, ids_report *report, uint32_t first)
{
    ids_status st = IDS_OK;

    for (uint32_t degree = first; degree <= s->set->last_degree; degree++) {
        ids_report_row row = {.struct_size = sizeof row,
                              .state = IDS_REPORT_MISSING,
                              .numbers = {.degree = degree, .total = true},
                              .reason = s->failure};
        TRY(ids_report_add(report, &row));
    }
done:
    return st;
}

/* The notes of a table, except that pages have a place of their own for why it ends early. */
static ids_status add_notes(session *s, ids_report *report, const char *primes, uint32_t field,
                            const char *warning)
{
    ids_status st = IDS_OK;

    TRY(ids_report_note(report, "presentation", session_source(s)));
    if (field > 0) {
        TRY(ids_report_note(report, "field", digits_of(field).text));
    } else if (primes[0] != '\0') {
        TRY(ids_report_note(report, "primes", primes));
        TRY(ids_report_note(report, "seed", digits_of(s->set->seed).text));
    }
    if (warning != NULL) {
        TRY(ids_report_note(report, "warning", warning));
    }
done:
    return st;
}

ids_status report_ranks(session *s, const ids_rank_table *table)
{
    size_t count = ids_rank_table_count(table);
    ids_report *report = NULL;
    char primes[PRIMES_CHARS] = "";
    ids_status st = IDS_OK;

    TRY(report_start(s, session_source(s), s->text, s->length, &report));
    for (size_t i = 0; i < count; i++) {
        ids_rank_row rank = {0};
        ids_report_row row = {.struct_size = sizeof row};
        TRY(ids_rank_table_row(table, i, &rank));
        row.numbers = (ids_partition_row){.degree = rank.degree,
                                          .total = true,
                                          .free = rank.free,
                                          .consequences = rank.consequences,
                                          .quotient = rank.quotient,
                                          .certainty = rank.certainty,
                                          .bits = rank.bits};
        TRY(ids_report_add(report, &row));
    }
    TRY(add_missing(s, report, s->set->first_degree + (uint32_t)count));
    for (size_t i = 0; i < ids_rank_table_prime_count(table); i++) {
        primes_append(primes, ids_rank_table_prime(table, i));
    }
    TRY(add_notes(s, report, primes, ids_rank_table_field(table),
                  ids_rank_table_weakened(table) ? WEAKENED_WARNING : NULL));
    TRY(report_finish(s, report));
done:
    ids_report_free(report);
    return st;
}

ids_status report_partitions(session *s, const ids_partition_table *table)
{
    size_t count = ids_partition_table_count(table);
    uint32_t next = s->set->first_degree;
    ids_report *report = NULL;
    char primes[PRIMES_CHARS] = "";
    ids_status st = IDS_OK;

    TRY(report_start(s, session_source(s), s->text, s->length, &report));
    for (size_t i = 0; i < count; i++) {
        ids_report_row row = {.struct_size = sizeof row};
        TRY(ids_partition_table_row(table, i, &row.numbers));
        TRY(ids_report_add(report, &row));
        next = row.numbers.degree + 1;
    }
    TRY(add_missing(s, report, next));
    for (size_t i = 0; i < ids_partition_table_prime_count(table); i++) {
        primes_append(primes, ids_partition_table_prime(table, i));
    }
    TRY(add_notes(s, report, primes, 0, NULL));
    TRY(report_finish(s, report));
done:
    ids_report_free(report);
    return st;
}
