/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The table of a run as picture or page, with what each cell took and where it was computed.
 */
#include <string.h>

#include "tool.h"

static ids_status add_line(const ids_run *run, const ids_run_line *line, ids_report *report)
{
    ids_status st = IDS_OK;
    ids_report_row row = {.struct_size = sizeof row, .numbers = line->row};
    ids_cell cell = {.message = ""};

    if (line->cell != SIZE_MAX) {
        TRY(ids_run_cell(run, line->cell, &cell));
    }
    row.reason = cell.message[0] != '\0' ? cell.message : NULL;
    row.state = line->state == IDS_CELL_DONE     ? IDS_REPORT_DONE
                : line->state == IDS_CELL_FAILED ? IDS_REPORT_FAILED
                                                 : IDS_REPORT_MISSING;
    if (line->state == IDS_CELL_DONE) {
        row.milliseconds = (uint64_t)(cell.result.seconds * 1000 + 0.5);
        row.bytes = cell.result.memory;
    }
    TRY(ids_report_add(report, &row));
done:
    return st;
}

static ids_status add_notes(const ids_run *run, const ids_run_info *info, ids_report *report)
{
    ids_status st = IDS_OK;
    char primes[PRIMES_CHARS] = "";

    for (size_t i = 0; i < ids_run_prime_count(run); i++) {
        primes_append(primes, ids_run_prime(run, i));
    }
    TRY(ids_report_note(report, "presentation", info->source));
    TRY(ids_report_note(report, "SHA-256", info->digest));
    if (info->options.field > 0) {
        TRY(ids_report_note(report, "field", digits_of(info->options.field).text));
    } else {
        TRY(ids_report_note(report, "primes", primes));
        TRY(ids_report_note(report, "seed", digits_of(info->options.seed).text));
    }
    TRY(ids_report_note(report, "version", info->version));
    TRY(ids_report_note(report, "libraries", info->libraries));
    TRY(ids_report_note(report, "begun", info->created));
    if (info->weakened) {
        TRY(ids_report_note(report, "warning", WEAKENED_WARNING));
    }
done:
    return st;
}

ids_status report_run(session *s, const ids_run *run)
{
    ids_status st = IDS_OK;
    ids_run_info info = {0};
    ids_report *report = NULL;

    TRY(ids_run_describe(run, &info));
    TRY(report_start(s, info.source, info.text, info.length, &report));
    for (size_t i = 0; i < ids_run_line_count(run); i++) {
        ids_run_line line;
        TRY(ids_run_line_get(run, i, &line));
        TRY(add_line(run, &line, report));
    }
    TRY(add_notes(run, &info, report));
    TRY(report_finish(s, report));
done:
    ids_report_free(report);
    return st;
}
