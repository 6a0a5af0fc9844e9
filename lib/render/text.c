/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Text for people: aligned columns under a heading, numbers to the right.
 *
 * The width of a column is known only when its cells are, and a table can have millions of rows.
 * So the first rows are held back, at most HELD_ROWS of them or HELD_BYTES of cells; then the
 * heading goes out with the widths found so far, and later rows go straight through. A later
 * cell that is wider than its column widens it from there on. Memory picture of the rows held
 * back, for two columns:
 *
 *     held: "1" NUL "a*b" NUL | "2" NUL "(a*b)*c" NUL | ...
 */
#include <string.h>

#include "render_private.h"

#define HELD_ROWS 400u
#define HELD_BYTES 262144u
#define GAP "  "

static ids_status append_blanks(idsi_text *line, size_t n, char blank)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < n; i++) {
        IDSI_TRY(idsi_text_append(line, &blank, 1));
    }
done:
    return st;
}

/* A cell as it may stand on a line: control characters would break the columns. */
static ids_status append_cell(idsi_text *line, const char *cell)
{
    ids_status st = IDS_OK;

    while (*cell != '\0') {
        uint32_t character = idsi_utf8_next(&cell);
        if (character < 0x20 || (character >= 0x7F && character < 0xA0)) {
            character = ' ';
        }
        IDSI_TRY(idsi_utf8_append(line, character));
    }
done:
    return st;
}

static void trim_end(idsi_text *line, size_t start)
{
    while (line->length > start && line->data[line->length - 1] == ' ') {
        line->length--;
    }
}

/* One line of the table; blanks at its end are left out. */
static ids_status append_row(const ids_writer *writer, const char *const *cells, idsi_text *line)
{
    ids_status st = IDS_OK;
    size_t start = line->length;

    for (size_t i = 0; i < writer->count; i++) {
        size_t fill = writer->columns[i].width - idsi_utf8_width(cells[i]);
        bool right = writer->columns[i].kind == IDS_COLUMN_NUMBER;
        if (i > 0) {
            IDSI_TRY(idsi_text_puts(line, GAP));
        }
        IDSI_TRY(append_blanks(line, right ? fill : 0, ' '));
        IDSI_TRY(append_cell(line, cells[i]));
        IDSI_TRY(append_blanks(line, right ? 0 : fill, ' '));
    }
    trim_end(line, start);
    IDSI_TRY(idsi_text_puts(line, "\n"));
done:
    return st;
}

static void widen(ids_writer *writer, size_t column, const char *cell)
{
    size_t width = idsi_utf8_width(cell);

    if (writer->columns[column].width < width) {
        writer->columns[column].width = width;
    }
}

/* The names of the columns and a rule under each. */
static ids_status append_heading(ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;
    const char **names = NULL;

    IDSI_TRY(idsi_alloc_array(writer->ctx, writer->count, sizeof *names, &names));
    for (size_t i = 0; i < writer->count; i++) {
        names[i] = writer->columns[i].name;
    }
    IDSI_TRY(append_row(writer, names, line));
    for (size_t i = 0; i < writer->count; i++) {
        if (i > 0) {
            IDSI_TRY(idsi_text_puts(line, GAP));
        }
        IDSI_TRY(append_blanks(line, writer->columns[i].width, '-'));
    }
    IDSI_TRY(idsi_text_puts(line, "\n"));
done:
    idsi_free(writer->ctx, names);
    return st;
}

/* Writes the heading and the rows held back; from here on rows flow. */
static ids_status release(ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;
    const char *at = writer->held.data;
    const char **cells = NULL;

    IDSI_TRY(idsi_alloc_array(writer->ctx, writer->count, sizeof *cells, &cells));
    IDSI_TRY(append_heading(writer, line));
    for (size_t row = 0; row < writer->held_rows; row++) {
        for (size_t i = 0; i < writer->count; i++) {
            cells[i] = at;
            at += strlen(at) + 1;
        }
        IDSI_TRY(append_row(writer, cells, line));
    }
    idsi_text_clear(&writer->held);
    writer->held_rows = 0;
    writer->flowing = true;
done:
    idsi_free(writer->ctx, cells);
    return st;
}

static ids_status text_begin(ids_writer *writer, idsi_text *line)
{
    (void)writer;
    (void)line;
    return IDS_OK;
}

static ids_status text_row(ids_writer *writer, const char *const *cells, idsi_text *line)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < writer->count; i++) {
        widen(writer, i, cells[i]);
    }
    if (writer->flowing) {
        return append_row(writer, cells, line);
    }
    for (size_t i = 0; i < writer->count; i++) {
        IDSI_TRY(idsi_text_append(&writer->held, cells[i], strlen(cells[i]) + 1));
    }
    writer->held_rows++;
    if (writer->held_rows >= HELD_ROWS || writer->held.length >= HELD_BYTES) {
        IDSI_TRY(release(writer, line));
    }
done:
    return st;
}

/* Notes, their values one under the other. */
static ids_status append_notes(const ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;
    idsi_note note = {0};
    size_t width = 0;
    size_t at = 0;

    while (idsi_writer_next_note(writer, &at, &note)) {
        size_t own = idsi_utf8_width(note.name);
        width = own > width ? own : width;
    }
    if (at > 0) {
        IDSI_TRY(idsi_text_puts(line, "\n"));
    }
    at = 0;
    while (idsi_writer_next_note(writer, &at, &note)) {
        size_t start = line->length;
        const char *between = "";
        const char *value = NULL;
        IDSI_TRY(append_cell(line, note.name));
        IDSI_TRY(idsi_text_puts(line, ":"));
        IDSI_TRY(append_blanks(line, width - idsi_utf8_width(note.name) + 1, ' '));
        while ((value = idsi_note_next_value(&note)) != NULL) {
            IDSI_TRY(idsi_text_puts(line, between));
            IDSI_TRY(append_cell(line, value));
            between = ", ";
        }
        trim_end(line, start);
        IDSI_TRY(idsi_text_puts(line, "\n"));
    }
done:
    return st;
}

static ids_status text_end(ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;

    if (!writer->flowing) {
        IDSI_TRY(release(writer, line));
    }
    IDSI_TRY(append_notes(writer, line));
done:
    return st;
}

const idsi_format idsi_format_text = {text_begin, text_row, text_end};
