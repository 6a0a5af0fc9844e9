/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Reports: takes the rows in, keeps them in order, and passes them to one of the two forms.
 *
 * Knows nothing of how a report looks. Invariants: the rows are sorted by degree and index without
 * two alike; `free` of a finished row is the sum of the other two; the presentation has no NUL
 * byte, so that all texts end where they should.
 */
#include <string.h>

#include "../young/young_private.h"
#include "report_private.h"

ids_status ids_report_create(ids_ctx *ctx, const char *title, ids_report **report)
{
    ids_status st = IDS_OK;
    ids_report *made = NULL;

    if (ctx == NULL || title == NULL || report == NULL) {
        return idsi_fail_arg(ctx, "context, title or report");
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    idsi_text_init(&made->notes, ctx);
    IDSI_TRY(idsi_strdup(ctx, title, &made->title));
    *report = made;
    made = NULL;
done:
    ids_report_free(made);
    return st;
}

void ids_report_free(ids_report *report)
{
    if (report == NULL) {
        return;
    }
    for (size_t i = 0; i < report->count; i++) {
        ids_string_free(report->ctx, report->rows[i].reason);
    }
    idsi_free(report->ctx, report->rows);
    idsi_free(report->ctx, report->title);
    idsi_free(report->ctx, report->presentation);
    idsi_text_clear(&report->notes);
    idsi_free(report->ctx, report);
}

ids_status ids_report_set_presentation(ids_report *report, const char *text, size_t length)
{
    ids_status st = IDS_OK;
    idsi_text copy;
    char *taken = NULL;

    if (report == NULL) {
        return IDS_ERR_ARG;
    }
    if (text == NULL) {
        return idsi_fail_arg(report->ctx, "text");
    }
    idsi_text_init(&copy, report->ctx);
    for (size_t i = 0; i < length; i++) {
        IDSI_TRY(text[i] == '\0' ? idsi_utf8_append(&copy, IDSI_BAD_CHARACTER)
                                 : idsi_text_append(&copy, text + i, 1));
    }
    IDSI_TRY(idsi_text_take(&copy, &taken));
    idsi_free(report->ctx, report->presentation);
    report->presentation = taken;
done:
    idsi_text_clear(&copy);
    return st;
}

/* ---- rows -------------------------------------------------------------------------------- */

static ids_status check_numbers(ids_ctx *ctx, const ids_partition_row *numbers)
{
    uint64_t sum = 0;

    if (!idsi_add_u64(numbers->consequences, numbers->quotient, &sum) || sum != numbers->free) {
        return idsi_fail(ctx, IDS_ERR_ARG,
                         "a row of degree %u has consequences and quotient that do not add up to "
                         "what is free",
                         (unsigned)numbers->degree);
    }
    return IDS_OK;
}

/* Checks a row and finds its index, which stands for its place within the degree. */
static ids_status check_row(ids_ctx *ctx, const ids_report_row *row, uint64_t *index)
{
    const ids_partition_row *numbers = &row->numbers;

    ids_status st = idsi_check_struct(ctx, "ids_report_row", row->struct_size, sizeof *row);
    if (st != IDS_OK) {
        return st;
    }
    if ((unsigned)row->state > IDS_REPORT_FAILED) {
        return idsi_fail(ctx, IDS_ERR_ARG, "a row has no state number %u", (unsigned)row->state);
    }
    if (numbers->degree == 0 || numbers->degree > IDS_MAX_DEGREE) {
        return idsi_fail(ctx, IDS_ERR_ARG, "degrees go from 1 to %u, not to %u", IDS_MAX_DEGREE,
                         (unsigned)numbers->degree);
    }
    *index = UINT64_MAX;
    if (!numbers->total && (ids_partition_rank(&numbers->partition, index) != IDS_OK ||
                            numbers->partition.degree != numbers->degree)) {
        return idsi_fail(ctx, IDS_ERR_ARG, "a row of degree %u has no partition of it",
                         (unsigned)numbers->degree);
    }
    return row->state == IDS_REPORT_DONE ? check_numbers(ctx, numbers) : IDS_OK;
}

/* -1, 0 or 1: where a row with these keys stands beside `row`. */
static int compare(uint32_t degree, uint64_t index, const idsi_report_row *row)
{
    uint32_t other = row->given.numbers.degree;

    if (degree != other) {
        return degree < other ? -1 : 1;
    }
    return index == row->index ? 0 : index < row->index ? -1 : 1;
}

/* Of a row without numbers: which it is, what is free, and the dimension, which needs no work. */
static ids_partition_row what_is_known(const ids_partition_row *row)
{
    ids_partition_row known = {
        .degree = row->degree, .total = row->total, .partition = row->partition, .free = row->free};

    if (row->total || ids_partition_dimension(&row->partition, &known.dimension) != IDS_OK) {
        known.dimension = 0;
    }
    return known;
}

ids_status ids_report_add(ids_report *report, const ids_report_row *row)
{
    ids_status st = IDS_OK;
    uint64_t index = 0;
    size_t at = 0;
    int side = 1;
    char *reason = NULL;

    if (report == NULL) {
        return IDS_ERR_ARG;
    }
    if (row == NULL) {
        return idsi_fail_arg(report->ctx, "row");
    }
    IDSI_TRY(check_row(report->ctx, row, &index));
    /* Mostly rows come in order, so the place is looked for from the end. */
    for (at = report->count; at > 0; at--) {
        side = compare(row->numbers.degree, index, &report->rows[at - 1]);
        if (side >= 0) {
            break;
        }
    }
    if (at > 0 && side == 0) {
        return idsi_fail(report->ctx, IDS_ERR_ARG, "a row of degree %u is there already",
                         (unsigned)row->numbers.degree);
    }
    if (row->reason != NULL) {
        IDSI_TRY(idsi_strdup(report->ctx, row->reason, &reason));
    }
    IDSI_TRY(idsi_grow(report->ctx, report->count, &report->capacity, sizeof *report->rows,
                       &report->rows));
    memmove(report->rows + at + 1, report->rows + at, (report->count - at) * sizeof *report->rows);
    report->rows[at] = (idsi_report_row){.given = *row, .reason = reason, .index = index};
    report->rows[at].given.reason = reason;
    if (row->state != IDS_REPORT_DONE) {
        report->rows[at].given.numbers = what_is_known(&row->numbers);
    }
    report->count++;
    reason = NULL;
done:
    ids_string_free(report->ctx, reason);
    return st;
}

ids_status ids_report_note(ids_report *report, const char *name, const char *value)
{
    ids_status st = IDS_OK;
    size_t before = 0;

    if (report == NULL) {
        return IDS_ERR_ARG;
    }
    if (name == NULL || name[0] == '\0' || value == NULL) {
        return idsi_fail_arg(report->ctx, "name or value of a note");
    }
    before = report->notes.length;
    IDSI_TRY(idsi_text_append(&report->notes, name, strlen(name) + 1));
    IDSI_TRY(idsi_text_append(&report->notes, value, strlen(value) + 1));
done:
    if (st != IDS_OK) {
        report->notes.length = before;
    }
    return st;
}

/* ---- reading it back --------------------------------------------------------------------- */

bool idsi_report_is_done(const idsi_report_row *row)
{
    return row != NULL && row->given.state == IDS_REPORT_DONE;
}

bool idsi_report_next_degree(const ids_report *report, size_t *at, idsi_degree *degree)
{
    size_t first = *at;

    if (first >= report->count) {
        return false;
    }
    *degree = (idsi_degree){.degree = report->rows[first].given.numbers.degree,
                            .rows = report->rows + first};
    while (*at < report->count && report->rows[*at].given.numbers.degree == degree->degree) {
        const idsi_report_row *row = &report->rows[*at];
        if (row->given.numbers.total) {
            degree->total = row;
        } else {
            degree->partitions++;
            degree->done += idsi_report_is_done(row) ? 1 : 0;
        }
        *at += 1;
    }
    return true;
}

bool idsi_report_by_partition(const ids_report *report)
{
    for (size_t i = 0; i < report->count; i++) {
        if (!report->rows[i].given.numbers.total) {
            return true;
        }
    }
    return false;
}

bool idsi_report_next_note(const ids_report *report, size_t *at, const char **name,
                           const char **value)
{
    if (*at >= report->notes.length) {
        return false;
    }
    *name = report->notes.data + *at;
    *value = *name + strlen(*name) + 1;
    *at += strlen(*name) + strlen(*value) + 2;
    return true;
}

/* ---- writing ----------------------------------------------------------------------------- */

ids_status idsi_press_pour(idsi_press *press)
{
    size_t length = press->out.length;

    press->out.length = 0;
    if (length > 0 && press->sink(press->sink_user, press->out.data, length) != 0) {
        return idsi_fail(press->report->ctx, IDS_ERR_IO, "the report could not be written");
    }
    return IDS_OK;
}

ids_status ids_report_write(ids_report *report, ids_report_form form, ids_sink_fn sink,
                            void *sink_user)
{
    ids_status st = IDS_OK;
    idsi_press press = {.report = report, .sink = sink, .sink_user = sink_user};

    if (report == NULL) {
        return IDS_ERR_ARG;
    }
    if (sink == NULL) {
        return idsi_fail_arg(report->ctx, "sink");
    }
    if ((unsigned)form > IDS_REPORT_SVG) {
        return idsi_fail(report->ctx, IDS_ERR_ARG, "there is no form of reports number %u",
                         (unsigned)form);
    }
    idsi_text_init(&press.out, report->ctx);
    IDSI_TRY(form == IDS_REPORT_SVG ? idsi_report_svg(&press) : idsi_report_html(&press));
    IDSI_TRY(idsi_press_pour(&press));
done:
    idsi_text_clear(&press.out);
    return st;
}
