/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The formats that programs read: CSV and JSON.
 *
 * CSV: RFC 4180 with LF line ends. A field is quoted when it holds a comma, a quote or a line
 * end, and when it is the only field of its row and empty, since that row would be an empty line.
 * JSON: RFC 8259, one object: {"task", "columns", "rows", "notes"}, rows as objects, one a line.
 * Numbers are bare, in as many digits as they have; a reader that keeps doubles rounds them, not
 * the file. A number cell without a number is null.
 * Both: text that is not UTF-8 is repaired.
 */
#include <string.h>

#include "render_private.h"

/* ---- CSV ----------------------------------------------------------------------------- */

/* Most fields are copied as they are. */
static bool is_ascii(const char *field)
{
    while (*field != '\0' && ((unsigned char)*field & 0x80u) == 0) {
        field++;
    }
    return *field == '\0';
}

static ids_status append_field(idsi_text *line, const char *field, bool alone)
{
    ids_status st = IDS_OK;

    const bool quoted = field[strcspn(field, ",\"\r\n")] != '\0' || (alone && field[0] == '\0');
    if (!quoted && is_ascii(field)) {
        return idsi_text_puts(line, field);
    }
    IDSI_TRY(idsi_text_puts(line, quoted ? "\"" : ""));
    while (*field != '\0') {
        uint32_t character = idsi_utf8_next(&field);
        if (character == '"') {
            IDSI_TRY(idsi_text_puts(line, "\""));
        }
        IDSI_TRY(idsi_utf8_append(line, character));
    }
    IDSI_TRY(idsi_text_puts(line, quoted ? "\"" : ""));
done:
    return st;
}

static ids_status csv_begin(ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < writer->count; i++) {
        IDSI_TRY(idsi_text_puts(line, i > 0 ? "," : ""));
        IDSI_TRY(append_field(line, writer->columns[i].name, false));
    }
    IDSI_TRY(idsi_text_puts(line, "\n"));
done:
    return st;
}

static ids_status csv_row(ids_writer *writer, const char *const *cells, idsi_text *line)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < writer->count; i++) {
        IDSI_TRY(idsi_text_puts(line, i > 0 ? "," : ""));
        IDSI_TRY(append_field(line, cells[i], writer->count == 1));
    }
    IDSI_TRY(idsi_text_puts(line, "\n"));
done:
    return st;
}

static ids_status csv_end(ids_writer *writer, idsi_text *line)
{
    (void)writer;
    (void)line;
    return IDS_OK;
}

const idsi_format idsi_format_csv = {csv_begin, csv_row, csv_end};

/* ---- JSON ---------------------------------------------------------------------------- */

static ids_status append_string(idsi_text *line, const char *text)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(line, "\""));
    while (*text != '\0') {
        uint32_t character = idsi_utf8_next(&text);
        if (character == '"' || character == '\\') {
            IDSI_TRY(idsi_text_puts(line, "\\"));
            IDSI_TRY(idsi_utf8_append(line, character));
        } else if (character == '\n') {
            IDSI_TRY(idsi_text_puts(line, "\\n"));
        } else if (character == '\t') {
            IDSI_TRY(idsi_text_puts(line, "\\t"));
        } else if (character < 0x20 || character == 0x7F) {
            IDSI_TRY(idsi_text_printf(line, "\\u%04x", (unsigned)character));
        } else {
            IDSI_TRY(idsi_utf8_append(line, character));
        }
    }
    IDSI_TRY(idsi_text_puts(line, "\""));
done:
    return st;
}

static ids_status json_begin(ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(line, "{\"task\": "));
    IDSI_TRY(append_string(line, writer->task));
    IDSI_TRY(idsi_text_puts(line, ",\n \"columns\": ["));
    for (size_t i = 0; i < writer->count; i++) {
        IDSI_TRY(idsi_text_puts(line, i > 0 ? ", " : ""));
        IDSI_TRY(append_string(line, writer->columns[i].name));
    }
    IDSI_TRY(idsi_text_puts(line, "],\n \"rows\": ["));
done:
    return st;
}

static ids_status json_row(ids_writer *writer, const char *const *cells, idsi_text *line)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(line, writer->rows > 0 ? ",\n  {" : "\n  {"));
    for (size_t i = 0; i < writer->count; i++) {
        IDSI_TRY(idsi_text_puts(line, i > 0 ? ", " : ""));
        IDSI_TRY(append_string(line, writer->columns[i].name));
        IDSI_TRY(idsi_text_puts(line, ": "));
        if (writer->columns[i].kind != IDS_COLUMN_NUMBER) {
            IDSI_TRY(append_string(line, cells[i]));
        } else {
            IDSI_TRY(idsi_text_puts(line, cells[i][0] != '\0' ? cells[i] : "null"));
        }
    }
    IDSI_TRY(idsi_text_puts(line, "}"));
done:
    return st;
}

static ids_status json_end(ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;
    idsi_note note = {0};
    const char *between = "";
    size_t at = 0;

    IDSI_TRY(idsi_text_puts(line, "\n ],\n \"notes\": {"));
    while (idsi_writer_next_note(writer, &at, &note)) {
        const char *value = NULL;
        const char *comma = "";
        IDSI_TRY(idsi_text_puts(line, between));
        IDSI_TRY(append_string(line, note.name));
        IDSI_TRY(idsi_text_puts(line, note.list ? ": [" : ": "));
        while ((value = idsi_note_next_value(&note)) != NULL) {
            IDSI_TRY(idsi_text_puts(line, comma));
            IDSI_TRY(append_string(line, value));
            comma = ", ";
        }
        IDSI_TRY(idsi_text_puts(line, note.list ? "]" : ""));
        between = ", ";
    }
    IDSI_TRY(idsi_text_puts(line, "}}\n"));
done:
    return st;
}

const idsi_format idsi_format_json = {json_begin, json_row, json_end};
