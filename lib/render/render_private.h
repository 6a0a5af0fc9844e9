/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files of the render room share: the table that is being written, the four formats
 * behind it, and the reading of UTF-8.
 */
#ifndef IDSI_RENDER_PRIVATE_H
#define IDSI_RENDER_PRIVATE_H

#include <idspan/render.h>

#include "../core/core_private.h"

/* ---- UTF-8 --------------------------------------------------------------------------- */

#define IDSI_BAD_CHARACTER 0xFFFDu

/*
 * Reads one character at *text and moves *text past it. Bytes that are not UTF-8 are read one
 * by one as IDSI_BAD_CHARACTER. Must not be called at the final NUL.
 */
uint32_t idsi_utf8_next(const char **text);
/* Appends one character. */
ids_status idsi_utf8_append(idsi_text *text, uint32_t character);
/* Columns that a terminal uses for a text: 2 for wide characters, 0 for combining ones. */
size_t idsi_utf8_width(const char *text);

/* ---- XML ----------------------------------------------------------------------------- */

/* Appends text as character data; control characters are replaced but those of `kept`. */
ids_status idsi_xml_words(idsi_text *out, const char *text, size_t bytes, const char *kept);
ids_status idsi_xml_string(idsi_text *out, const char *text);

/* ---- the table ----------------------------------------------------------------------- */

typedef struct idsi_column {
    char *name;
    ids_column_kind kind;
    size_t width; /* text format: the width so far */
} idsi_column;

/*
 * What a format does at the start of the table, for a row, and at its end. Each appends to
 * `line`; the writer hands `line` to the sink afterwards. `end` gets the notes from the writer.
 */
typedef struct idsi_format {
    ids_status (*begin)(ids_writer *writer, idsi_text *line);
    ids_status (*row)(ids_writer *writer, const char *const *cells, idsi_text *line);
    ids_status (*end)(ids_writer *writer, idsi_text *line);
} idsi_format;

extern const idsi_format idsi_format_text;
extern const idsi_format idsi_format_csv;
extern const idsi_format idsi_format_json;
extern const idsi_format idsi_format_latex;

struct ids_writer {
    ids_ctx *ctx;
    const idsi_format *format;
    char *task;
    size_t count;
    idsi_column *columns;
    ids_sink_fn sink;
    void *sink_user;
    uint64_t rows;   /* rows taken so far */
    idsi_text notes; /* number of values (UINT32_MAX: one, no list) name NUL value NUL ... */
    idsi_text line;  /* what goes to the sink next */
    idsi_text held;  /* text format: cells of the rows held back, each with its NUL; LaTeX: the
                        first cell of a group of rows */
    size_t held_rows;
    bool flowing; /* text format: the heading is out, rows go straight through */
    bool ended;
    ids_status failed; /* once a row is lost the table is beyond repair */
};

/* A note, and its values one behind the other, each with a NUL. */
typedef struct idsi_note {
    const char *name;
    const char *value; /* the first one */
    uint32_t count;
    bool list;
} idsi_note;

/* Walks over the notes: *at = 0 before the first call; false after the last note. */
bool idsi_writer_next_note(const ids_writer *writer, size_t *at, idsi_note *note);
/* Walks over the values of a note; NULL behind the last one. */
const char *idsi_note_next_value(idsi_note *note);

/* ---- LaTeX --------------------------------------------------------------------------- */

/* Appends words for text mode: the characters that TeX reads as commands are escaped. */
ids_status idsi_latex_words(idsi_text *line, const char *text);
/* Appends a formula for math mode, without the dollar signs; see formula.c for the mapping. */
ids_status idsi_latex_formula(idsi_text *line, const char *text);

#endif
