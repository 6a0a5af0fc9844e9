/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Tables: checks what comes in, keeps the notes, and passes rows to one of the four formats.
 *
 * Knows nothing of how a format looks. A row is first composed in `line` and then handed to the
 * sink in one piece, so memory stays constant however many rows pass. Invariant: `failed` is
 * set once a row is lost, and every later call answers with it; an argument that is refused
 * loses nothing and leaves the table as it was.
 */
#include <string.h>

#include "render_private.h"

static const idsi_format *const formats[] = {
    [IDS_FORMAT_TEXT] = &idsi_format_text,
    [IDS_FORMAT_CSV] = &idsi_format_csv,
    [IDS_FORMAT_JSON] = &idsi_format_json,
    [IDS_FORMAT_LATEX] = &idsi_format_latex,
};

/* Hands the composed line to the sink. */
static ids_status pour(ids_writer *writer)
{
    size_t length = writer->line.length;

    writer->line.length = 0;
    if (length > 0 && writer->sink(writer->sink_user, writer->line.data, length) != 0) {
        return idsi_fail(writer->ctx, IDS_ERR_IO, "the output could not be written");
    }
    return IDS_OK;
}

static ids_status check_columns(ids_ctx *ctx, const ids_column *columns, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        if (columns[i].name == NULL || columns[i].name[0] == '\0') {
            return idsi_fail(ctx, IDS_ERR_ARG, "column %zu has no name", i);
        }
        if ((unsigned)columns[i].kind > IDS_COLUMN_MATH) {
            return idsi_fail(ctx, IDS_ERR_ARG, "column \"%s\" has an unknown kind",
                             columns[i].name);
        }
        for (size_t j = 0; j < i; j++) {
            if (strcmp(columns[i].name, columns[j].name) == 0) {
                return idsi_fail(ctx, IDS_ERR_ARG, "two columns are called \"%s\"",
                                 columns[i].name);
            }
        }
    }
    return IDS_OK;
}

static ids_status copy_columns(ids_writer *writer, const ids_column *columns, size_t count)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_alloc_array(writer->ctx, count, sizeof *writer->columns, &writer->columns));
    writer->count = count;
    for (size_t i = 0; i < count; i++) {
        IDSI_TRY(idsi_strdup(writer->ctx, columns[i].name, &writer->columns[i].name));
        writer->columns[i].kind = columns[i].kind;
        writer->columns[i].width = idsi_utf8_width(columns[i].name);
        if (columns[i].width > writer->columns[i].width) {
            writer->columns[i].width = columns[i].width;
        }
    }
done:
    return st;
}

ids_status ids_writer_create(ids_ctx *ctx, ids_format format, const char *task,
                             const ids_column *columns, size_t count, ids_sink_fn sink,
                             void *sink_user, ids_writer **writer)
{
    ids_status st = IDS_OK;
    ids_writer *made = NULL;

    if (ctx == NULL || writer == NULL || sink == NULL || columns == NULL || count == 0) {
        return idsi_fail_arg(ctx, "context, columns, sink or writer");
    }
    if (task == NULL) {
        return idsi_fail_arg(ctx, "task");
    }
    if ((unsigned)format > IDS_FORMAT_LATEX) {
        return idsi_fail(ctx, IDS_ERR_ARG, "there is no output format number %u", (unsigned)format);
    }
    IDSI_TRY(check_columns(ctx, columns, count));
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->format = formats[format];
    made->sink = sink;
    made->sink_user = sink_user;
    idsi_text_init(&made->notes, ctx);
    idsi_text_init(&made->line, ctx);
    idsi_text_init(&made->held, ctx);
    IDSI_TRY(idsi_strdup(ctx, task, &made->task));
    IDSI_TRY(copy_columns(made, columns, count));
    IDSI_TRY(made->format->begin(made, &made->line));
    IDSI_TRY(pour(made));
    *writer = made;
    made = NULL;
done:
    ids_writer_free(made);
    return st;
}

bool idsi_writer_next_note(const ids_writer *writer, size_t *at, idsi_note *note)
{
    const char *data = writer->notes.data;
    uint32_t count = 0;

    if (*at >= writer->notes.length) {
        return false;
    }
    memcpy(&count, data + *at, sizeof count);
    *at += sizeof count;
    note->list = count != UINT32_MAX;
    note->count = note->list ? count : 1;
    note->name = data + *at;
    *at += strlen(note->name) + 1;
    note->value = data + *at;
    for (uint32_t i = 0; i < note->count; i++) {
        *at += strlen(data + *at) + 1;
    }
    return true;
}

const char *idsi_note_next_value(idsi_note *note)
{
    const char *value = note->value;

    if (note->count == 0) {
        return NULL;
    }
    note->count--;
    note->value += strlen(value) + 1;
    return value;
}

static ids_status check_note(ids_writer *writer, const char *name)
{
    idsi_note old = {0};
    size_t at = 0;

    if (name == NULL || name[0] == '\0') {
        return idsi_fail_arg(writer->ctx, "name or value of a note");
    }
    if (writer->ended) {
        return idsi_fail(writer->ctx, IDS_ERR_ARG, "the table has been ended already");
    }
    while (idsi_writer_next_note(writer, &at, &old)) {
        if (strcmp(old.name, name) == 0) {
            return idsi_fail(writer->ctx, IDS_ERR_ARG, "there is a note \"%s\" already", name);
        }
    }
    return IDS_OK;
}

static ids_status add_note(ids_writer *writer, const char *name, const char *const *values,
                           size_t count, uint32_t kind)
{
    ids_status st = IDS_OK;
    const size_t before = writer->notes.length;

    for (size_t i = 0; i < count; i++) {
        if (values[i] == NULL) {
            return idsi_fail_arg(writer->ctx, "name or value of a note");
        }
    }
    IDSI_TRY(check_note(writer, name));
    IDSI_TRY(idsi_text_append(&writer->notes, (const char *)&kind, sizeof kind));
    IDSI_TRY(idsi_text_append(&writer->notes, name, strlen(name) + 1));
    for (size_t i = 0; i < count; i++) {
        IDSI_TRY(idsi_text_append(&writer->notes, values[i], strlen(values[i]) + 1));
    }
done:
    if (st != IDS_OK) {
        writer->notes.length = before;
    }
    return st;
}

ids_status ids_writer_note(ids_writer *writer, const char *name, const char *value)
{
    return writer == NULL ? IDS_ERR_ARG : add_note(writer, name, &value, 1, UINT32_MAX);
}

ids_status ids_writer_note_list(ids_writer *writer, const char *name, const char *const *values,
                                size_t count)
{
    if (writer == NULL) {
        return IDS_ERR_ARG;
    }
    if ((values == NULL && count > 0) || count >= UINT32_MAX) {
        return idsi_fail_arg(writer->ctx, "values of a note");
    }
    return add_note(writer, name, values, count, (uint32_t)count);
}

/* A number cell is an integer as JSON writes it, or empty where there is none. */
static bool is_number(const char *cell)
{
    if (cell[0] == '\0') {
        return true;
    }
    if (cell[0] == '-') {
        cell++;
    }
    if (cell[0] == '0') {
        return cell[1] == '\0';
    }
    return cell[0] != '\0' && cell[strspn(cell, "0123456789")] == '\0';
}

static ids_status check_cells(ids_writer *writer, const char *const *cells)
{
    if (cells == NULL) {
        return idsi_fail_arg(writer->ctx, "row of cells");
    }
    if (writer->ended) {
        return idsi_fail(writer->ctx, IDS_ERR_ARG, "the table has been ended already");
    }
    for (size_t i = 0; i < writer->count; i++) {
        if (cells[i] == NULL) {
            return idsi_fail(writer->ctx, IDS_ERR_ARG, "the cell of column \"%s\" is NULL",
                             writer->columns[i].name);
        }
        if (writer->columns[i].kind == IDS_COLUMN_NUMBER && !is_number(cells[i])) {
            return idsi_fail(writer->ctx, IDS_ERR_ARG,
                             "the cell \"%s\" of column \"%s\" is not an integer", cells[i],
                             writer->columns[i].name);
        }
    }
    return IDS_OK;
}

ids_status ids_writer_row(ids_writer *writer, const char *const *cells)
{
    ids_status st = IDS_OK;

    if (writer == NULL) {
        return IDS_ERR_ARG;
    }
    if (writer->failed != IDS_OK) {
        return idsi_fail(writer->ctx, writer->failed, "the table was broken off before this row");
    }
    st = check_cells(writer, cells);
    if (st != IDS_OK) {
        return st;
    }
    IDSI_TRY(writer->format->row(writer, cells, &writer->line));
    IDSI_TRY(pour(writer));
    writer->rows++;
done:
    writer->failed = st;
    return st;
}

ids_status ids_writer_end(ids_writer *writer)
{
    ids_status st = IDS_OK;

    if (writer == NULL) {
        return IDS_ERR_ARG;
    }
    if (writer->failed != IDS_OK) {
        return idsi_fail(writer->ctx, writer->failed, "the table was broken off before its end");
    }
    if (writer->ended) {
        return idsi_fail(writer->ctx, IDS_ERR_ARG, "the table has been ended already");
    }
    IDSI_TRY(writer->format->end(writer, &writer->line));
    IDSI_TRY(pour(writer));
    writer->ended = true;
done:
    writer->failed = st;
    return st;
}

void ids_writer_free(ids_writer *writer)
{
    if (writer == NULL) {
        return;
    }
    if (writer->columns != NULL) {
        for (size_t i = 0; i < writer->count; i++) {
            idsi_free(writer->ctx, writer->columns[i].name);
        }
    }
    idsi_free(writer->ctx, writer->columns);
    idsi_free(writer->ctx, writer->task);
    idsi_text_clear(&writer->notes);
    idsi_text_clear(&writer->line);
    idsi_text_clear(&writer->held);
    idsi_free(writer->ctx, writer);
}
