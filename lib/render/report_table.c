/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The tables of the page. Columns for time and memory are there when some row knows them; a row
 * without numbers says why in their place.
 */
#include <inttypes.h>
#include <string.h>

#include "report_private.h"

/* Which columns of a table there are beside the numbers. */
typedef struct extras {
    bool time;
    bool memory;
} extras;

static void look_for_extras(const idsi_report_row *row, extras *found)
{
    if (row != NULL) {
        found->time = found->time || row->given.milliseconds > 0;
        found->memory = found->memory || row->given.bytes > 0;
    }
}

static ids_status put_number_cell(idsi_text *out, uint64_t number)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(out, "<td class=\"n\">"));
    IDSI_TRY(idsi_put_number(out, number, &idsi_grouping_html));
    IDSI_TRY(idsi_text_puts(out, "</td>"));
done:
    return st;
}

static ids_status put_certainty_cell(idsi_text *out, const ids_partition_row *numbers)
{
    if (numbers->certainty == IDS_CERTAINTY_EXACT) {
        return idsi_text_puts(out, "<td>exact</td>");
    }
    return idsi_text_printf(out, "<td>2<sup>-%u</sup></td>", (unsigned)numbers->bits);
}

static ids_status put_extra_cells(idsi_text *out, const idsi_report_row *row, extras shown)
{
    ids_status st = IDS_OK;

    if (shown.time) {
        IDSI_TRY(idsi_text_puts(out, "<td class=\"n\">"));
        if (row->given.milliseconds > 0) {
            IDSI_TRY(idsi_put_time(out, row->given.milliseconds));
        }
        IDSI_TRY(idsi_text_puts(out, "</td>"));
    }
    if (shown.memory) {
        IDSI_TRY(idsi_text_puts(out, "<td class=\"n\">"));
        if (row->given.bytes > 0) {
            IDSI_TRY(idsi_put_bytes(out, row->given.bytes));
        }
        IDSI_TRY(idsi_text_puts(out, "</td>"));
    }
done:
    return st;
}

static ids_status put_extra_headings(idsi_text *out, extras shown)
{
    ids_status st = IDS_OK;

    if (shown.time) {
        IDSI_TRY(idsi_text_puts(out, "<th scope=\"col\" class=\"n\">time</th>"));
    }
    if (shown.memory) {
        IDSI_TRY(idsi_text_puts(out, "<th scope=\"col\" class=\"n\">memory</th>"));
    }
    IDSI_TRY(idsi_text_puts(out, "</tr></thead>\n<tbody>\n"));
done:
    return st;
}

/* free .. memory, or what is the matter. */
static ids_status put_values(idsi_text *out, const idsi_report_row *row, extras shown)
{
    const ids_partition_row *numbers = &row->given.numbers;
    ids_status st = IDS_OK;

    if (numbers->free > 0 || idsi_report_is_done(row)) {
        IDSI_TRY(put_number_cell(out, numbers->free));
    } else {
        IDSI_TRY(idsi_text_puts(out, "<td></td>"));
    }
    if (!idsi_report_is_done(row)) {
        bool failed = row->given.state == IDS_REPORT_FAILED;
        IDSI_TRY(idsi_text_printf(out, "<td colspan=\"3\" class=\"gap\">%s</td>",
                                  failed ? "failed" : "not yet computed"));
    } else {
        IDSI_TRY(put_number_cell(out, numbers->consequences));
        IDSI_TRY(put_number_cell(out, numbers->quotient));
        IDSI_TRY(put_certainty_cell(out, numbers));
    }
    IDSI_TRY(put_extra_cells(out, row, shown));
    IDSI_TRY(idsi_text_puts(out, "</tr>\n"));
done:
    return st;
}

/* ---- dimensions -------------------------------------------------------------------------- */

static ids_status put_dimensions_row(idsi_text *out, const idsi_degree *degree, extras shown)
{
    ids_status st = IDS_OK;
    idsi_report_row none = {.given.state = IDS_REPORT_MISSING};

    IDSI_TRY(idsi_text_puts(out, "<tr><th scope=\"row\" class=\"n\">"));
    if (degree->partitions > 0) {
        IDSI_TRY(idsi_text_printf(out, "<a href=\"#degree-%u\">%u</a></th>",
                                  (unsigned)degree->degree, (unsigned)degree->degree));
    } else {
        IDSI_TRY(idsi_text_printf(out, "%u</th>", (unsigned)degree->degree));
    }
    IDSI_TRY(put_values(out, degree->total != NULL ? degree->total : &none, shown));
done:
    return st;
}

ids_status idsi_put_dimensions_table(idsi_press *press)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    extras shown = {0};
    idsi_degree degree = {0};

    for (size_t at = 0; idsi_report_next_degree(press->report, &at, &degree);) {
        look_for_extras(degree.total, &shown);
    }
    IDSI_TRY(idsi_text_puts(out, "<div class=\"scroll table\" tabindex=\"0\" role=\"region\" "
                                 "aria-label=\"Table of the dimensions\">\n<table>\n<thead><tr>"
                                 "<th scope=\"col\" class=\"n\">degree</th>"
                                 "<th scope=\"col\" class=\"n\">free</th>"
                                 "<th scope=\"col\" class=\"n\">consequences</th>"
                                 "<th scope=\"col\" class=\"n\">quotient</th>"
                                 "<th scope=\"col\">certainty</th>"));
    IDSI_TRY(put_extra_headings(out, shown));
    for (size_t at = 0; idsi_report_next_degree(press->report, &at, &degree);) {
        IDSI_TRY(put_dimensions_row(out, &degree, shown));
    }
    IDSI_TRY(idsi_text_puts(out, "</tbody>\n</table>\n</div>\n"));
done:
    return st;
}

/* ---- one degree -------------------------------------------------------------------------- */

static ids_status put_module_row(idsi_text *out, const idsi_report_row *row, extras shown)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(out, "<tr><th scope=\"row\">"));
    IDSI_TRY(idsi_put_partition(out, &row->given.numbers.partition));
    IDSI_TRY(idsi_text_puts(out, "</th>"));
    IDSI_TRY(put_number_cell(out, row->given.numbers.dimension));
    IDSI_TRY(put_values(out, row, shown));
done:
    return st;
}

ids_status idsi_put_modules_table(idsi_press *press, const idsi_degree *degree)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    extras shown = {0};

    look_for_extras(degree->total, &shown);
    for (size_t i = 0; i < degree->partitions; i++) {
        look_for_extras(&degree->rows[i], &shown);
    }
    IDSI_TRY(idsi_text_printf(out,
                              "<div class=\"scroll table\" tabindex=\"0\" role=\"region\" "
                              "aria-label=\"Table of the multiplicities of degree %u\">\n<table>\n"
                              "<thead><tr>"
                              "<th scope=\"col\">partition</th>"
                              "<th scope=\"col\" class=\"n\">dimension</th>"
                              "<th scope=\"col\" class=\"n\">free</th>"
                              "<th scope=\"col\" class=\"n\">consequences</th>"
                              "<th scope=\"col\" class=\"n\">quotient</th>"
                              "<th scope=\"col\">certainty</th>",
                              (unsigned)degree->degree));
    IDSI_TRY(put_extra_headings(out, shown));
    for (size_t i = 0; i < degree->partitions; i++) {
        IDSI_TRY(put_module_row(out, &degree->rows[i], shown));
    }
    IDSI_TRY(idsi_text_puts(out, "</tbody>\n"));
    if (idsi_report_is_done(degree->total)) {
        IDSI_TRY(idsi_text_puts(out, "<tfoot><tr><th scope=\"row\">total</th><td></td>"));
        IDSI_TRY(put_values(out, degree->total, shown));
        IDSI_TRY(idsi_text_puts(out, "</tfoot>\n"));
    }
    IDSI_TRY(idsi_text_puts(out, "</table>\n</div>\n"));
done:
    return st;
}

/* ---- what is not done -------------------------------------------------------------------- */

/* Whether two rows are not done in the same way, with the same words about it. */
static bool is_alike(const idsi_report_row *a, const idsi_report_row *b)
{
    const char *reason = a->given.reason != NULL ? a->given.reason : "";
    const char *other = b->given.reason != NULL ? b->given.reason : "";

    return a->given.state == b->given.state && strcmp(reason, other) == 0;
}

/* Rows from the first on that are like row `index`; 0 unless that is the first of its kind. */
static size_t count_alike(const idsi_report_row *rows, size_t count, size_t index)
{
    size_t alike = 0;

    for (size_t i = 0; i < count; i++) {
        if (is_alike(&rows[i], &rows[index])) {
            if (i < index) {
                return 0;
            }
            alike++;
        }
    }
    return alike;
}

static ids_status put_gap_row(idsi_text *out, const idsi_report_row *row, size_t alike)
{
    ids_status st = IDS_OK;
    bool failed = row->given.state == IDS_REPORT_FAILED;

    IDSI_TRY(idsi_text_printf(out, "<tr><td class=\"n\">%u</td><td>",
                              (unsigned)row->given.numbers.degree));
    if (alike > 1) {
        IDSI_TRY(idsi_text_printf(out, "%zu partitions", alike));
    } else if (row->given.numbers.total) {
        IDSI_TRY(idsi_text_puts(out, "all"));
    } else {
        IDSI_TRY(idsi_put_partition(out, &row->given.numbers.partition));
    }
    IDSI_TRY(idsi_text_printf(out, "</td><td>%s</td><td class=\"w\">",
                              failed ? "failed" : "not yet computed"));
    if (row->given.reason != NULL) {
        IDSI_TRY(idsi_xml_string(out, row->given.reason));
    }
    IDSI_TRY(idsi_text_puts(out, "</td></tr>\n"));
done:
    return st;
}

/* One row for all partitions of which the same is to be said. The total of a degree that is split
 * is no cell of its own. */
static ids_status put_degree_gaps(idsi_text *out, const idsi_degree *degree)
{
    ids_status st = IDS_OK;
    size_t count = degree->partitions > 0 ? degree->partitions : 1;

    for (size_t i = 0; i < count; i++) {
        const idsi_report_row *row = &degree->rows[i];
        size_t alike = idsi_report_is_done(row) ? 0 : count_alike(degree->rows, count, i);
        if (alike > 0) {
            IDSI_TRY(put_gap_row(out, row, alike));
        }
    }
done:
    return st;
}

ids_status idsi_put_gaps_table(idsi_press *press)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    idsi_degree degree = {0};

    IDSI_TRY(idsi_text_puts(out, "<div class=\"scroll table\" tabindex=\"0\" role=\"region\" "
                                 "aria-label=\"Table of the cells that are not done\">\n<table>\n"
                                 "<thead><tr><th scope=\"col\" class=\"n\">degree</th>"
                                 "<th scope=\"col\">partition</th><th scope=\"col\">state</th>"
                                 "<th scope=\"col\">reason</th></tr></thead>\n<tbody>\n"));
    for (size_t at = 0; idsi_report_next_degree(press->report, &at, &degree);) {
        IDSI_TRY(put_degree_gaps(out, &degree));
    }
    IDSI_TRY(idsi_text_puts(out, "</tbody>\n</table>\n</div>\n"));
done:
    return st;
}
