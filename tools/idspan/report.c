/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Tables as pictures and pages: what `rank --format svg` and `html` write in place of a table.
 *
 * The library draws; here a table, or what there is of one, is handed to it row by row.
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
    bool picture = (unsigned)s->set->format == FORMAT_SVG;

    ids_status st = ids_report_write(report, picture ? IDS_REPORT_SVG : IDS_REPORT_HTML,
                                     output_sink, &s->out);

    s->keep = st == IDS_OK;
    return st;
}

/* The rows that the table has, then the degrees that it should have and has not. */
static ids_status add_rows(session *s, const rank_view *view, ids_report *report)
{
    ids_status st = IDS_OK;
    uint32_t next = s->set->first_degree;

    for (size_t i = 0; i < view->count; i++) {
        ids_report_row row = {.struct_size = sizeof row, .numbers = view->rows[i]};
        TRY(ids_report_add(report, &row));
        next = row.numbers.degree + 1;
    }
    for (; next <= s->set->last_degree; next++) {
        ids_report_row row = {.struct_size = sizeof row,
                              .state = IDS_REPORT_MISSING,
                              .numbers = {.degree = next, .total = true},
                              .reason = view->stopped};
        TRY(ids_report_add(report, &row));
    }
done:
    return st;
}

ids_status report_view(session *s, const rank_view *view)
{
    ids_report *report = NULL;
    ids_status st = IDS_OK;

    TRY(report_start(s, session_source(s), s->text, s->length, &report));
    TRY(add_rows(s, view, report));
    TRY(ids_report_note(report, "presentation", session_source(s)));
    if (view->field > 0) {
        TRY(ids_report_note(report, "field", digits_of(view->field).text));
    } else if (view->primes[0] != '\0') {
        TRY(ids_report_note(report, "primes", view->primes));
        TRY(ids_report_note(report, "seed", digits_of(view->seed).text));
    }
    if (view->cross_checked) {
        TRY(ids_report_note(report, "cross-check", "the monomial engine gives the same totals"));
    }
    if (view->weakened) {
        TRY(ids_report_note(report, "warning", WEAKENED_WARNING));
    }
    TRY(report_finish(s, report));
done:
    ids_report_free(report);
    return st;
}
