/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Runs as pictures and pages, finished or not: every cell with its time and memory, those that are
 * missing or failed with the reason, and where all of it comes from.
 */
#include <inttypes.h>
#include <string.h>

#include "tool.h"

#define HOSTS_CHARS 512u

/* What the finished cells took, and where. */
typedef struct totals {
    size_t done;
    double seconds;
    uint64_t memory;         /* of the largest */
    char last[IDS_RUN_NAME]; /* when the last of them was finished */
    char hosts[HOSTS_CHARS]; /* each once, in the order of the cells; "" unless there are some */
} totals;

/* Whether a list with ", " between its words has the word. */
static bool is_listed(const char *list, const char *word)
{
    size_t length = strlen(word);

    for (const char *at = strstr(list, word); at != NULL; at = strstr(at + 1, word)) {
        bool begins = at == list || at[-1] == ' ';
        if (begins && (at[length] == ',' || at[length] == '\0')) {
            return true;
        }
    }
    return false;
}

static void add_host(totals *sum, const char *host)
{
    size_t used = strlen(sum->hosts);

    if (host[0] == '\0' || is_listed(sum->hosts, host)) {
        return;
    }
    if (used + strlen(host) + 3 <= sizeof sum->hosts) {
        snprintf(sum->hosts + used, sizeof sum->hosts - used, "%s%s", used > 0 ? ", " : "", host);
    }
}

static ids_status add_up(const ids_run *run, totals *sum)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < ids_run_cell_count(run); i++) {
        ids_cell cell = {0};
        TRY(ids_run_cell(run, i, &cell));
        if (cell.state == IDS_CELL_DONE) {
            sum->done++;
            sum->seconds += cell.result.seconds;
            sum->memory = cell.result.memory > sum->memory ? cell.result.memory : sum->memory;
            add_host(sum, cell.result.host);
            /* Times are written so that their order is that of their text. */
            if (strcmp(cell.result.finished, sum->last) > 0) {
                snprintf(sum->last, sizeof sum->last, "%s", cell.result.finished);
            }
        }
    }
done:
    return st;
}

/* ---- rows ---------------------------------------------------------------------------- */

/* A number of seconds that is not 0 is shown, so it must not become 0 milliseconds. */
static uint64_t milliseconds_of(double seconds)
{
    if (!(seconds > 0)) {
        return 0;
    }
    return seconds < 0.001 ? 1 : seconds < 1e12 ? (uint64_t)(seconds * 1000 + 0.5) : UINT64_MAX;
}

static ids_status add_line(const ids_run *run, size_t index, ids_report *report)
{
    ids_status st = IDS_OK;
    ids_run_line line = {0};
    ids_cell cell = {0};
    ids_report_row row = {.struct_size = sizeof row, .state = IDS_REPORT_MISSING};

    TRY(ids_run_line_get(run, index, &line));
    row.numbers = line.row;
    if (line.cell != SIZE_MAX) {
        TRY(ids_run_cell(run, line.cell, &cell));
        row.reason = cell.message;
    }
    if (line.state == IDS_CELL_DONE) {
        row.state = IDS_REPORT_DONE;
        row.milliseconds = milliseconds_of(cell.result.seconds);
        row.bytes = cell.result.memory;
    } else if (line.state == IDS_CELL_FAILED) {
        row.state = IDS_REPORT_FAILED;
    }
    TRY(ids_report_add(report, &row));
done:
    return st;
}

/* ---- provenance ---------------------------------------------------------------------- */

static ids_status note_question(const ids_run *run, const ids_run_info *info, ids_report *report)
{
    ids_status st = IDS_OK;
    char text[PRIMES_CHARS] = "";

    TRY(ids_report_note(report, "presentation", info->source));
    TRY(ids_report_note(report, "digest of its operations and identities", info->digest));
    snprintf(text, sizeof text, "idspan %s", info->version);
    TRY(ids_report_note(report, "computed by", text));
    TRY(ids_report_note(report, "libraries", info->libraries));
    snprintf(text, sizeof text, "%u to %u, %s", (unsigned)info->options.from,
             (unsigned)info->options.to,
             info->options.by_partition ? "by partition" : "each as a whole");
    TRY(ids_report_note(report, "degrees", text));
    if (info->options.field > 0) {
        TRY(ids_report_note(report, "field", digits_of(info->options.field).text));
        return info->weakened ? ids_report_note(report, "warning", WEAKENED_WARNING) : IDS_OK;
    }
    text[0] = '\0';
    for (size_t i = 0; i < ids_run_prime_count(run); i++) {
        primes_append(text, ids_run_prime(run, i));
    }
    TRY(ids_report_note(report, "primes", text));
    TRY(ids_report_note(report, "seed", digits_of(info->options.seed).text));
done:
    return st;
}

static ids_status note_work(const ids_run *run, const ids_run_info *info, ids_report *report)
{
    ids_status st = IDS_OK;
    totals sum = {0};
    char text[128] = "";

    TRY(add_up(run, &sum));
    snprintf(text, sizeof text, "%zu of %zu finished, %zu failed, %zu damaged", info->done,
             ids_run_cell_count(run), info->failed, info->damaged);
    TRY(ids_report_note(report, "cells", text));
    TRY(ids_report_note(report, "begun", info->created));
    if (sum.done > 0) {
        TRY(ids_report_note(report, "last cell finished", sum.last));
        TRY(ids_report_note(report, "machines", sum.hosts));
        snprintf(text, sizeof text, "%.1f s, without the lower degrees that cells are made from",
                 sum.seconds);
        TRY(ids_report_note(report, "processor time of the cells", text));
        snprintf(text, sizeof text, "%" PRIu64 " MiB", (sum.memory + (1u << 20) - 1) >> 20);
        TRY(ids_report_note(report, "most memory of a process", text));
    }
done:
    return st;
}

ids_status report_run(session *s, const ids_run *run)
{
    ids_run_info info = {0};
    ids_report *report = NULL;
    ids_status st = IDS_OK;

    TRY(ids_run_describe(run, &info));
    TRY(report_start(s, info.source, info.text, info.length, &report));
    for (size_t i = 0; i < ids_run_line_count(run); i++) {
        TRY(add_line(run, i, report));
    }
    TRY(note_question(run, &info, report));
    TRY(note_work(run, &info, report));
    TRY(report_finish(s, report));
done:
    ids_report_free(report);
    return st;
}
