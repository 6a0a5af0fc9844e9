/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * LaTeX: a tabular with the rules of the booktabs package, to be taken in with \input.
 *
 * Knows which characters TeX reads as commands. Formulas are formula.c's business. Characters
 * outside ASCII are kept in words, where LaTeX reads UTF-8. Notes become comments. Rows whose first
 * number is the same (a degree) form a group; some space sets off what follows a group.
 */
#include <string.h>

#include "render_private.h"

static const char *escape(uint32_t character)
{
    switch (character) {
    case '\\':
        return "\\textbackslash{}";
    case '{':
        return "\\{";
    case '}':
        return "\\}";
    case '$':
        return "\\$";
    case '&':
        return "\\&";
    case '%':
        return "\\%";
    case '#':
        return "\\#";
    case '_':
        return "\\_";
    case '^':
        return "\\textasciicircum{}";
    case '~':
        return "\\textasciitilde{}";
    case '<':
        return "\\textless{}";
    case '>':
        return "\\textgreater{}";
    case '|':
        return "\\textbar{}";
    case '[':
        /* After the \\ of the line before, a bare bracket or star would be read as its option. */
        return "{[}";
    case '*':
        return "{*}";
    default:
        return NULL;
    }
}

ids_status idsi_latex_words(idsi_text *line, const char *text)
{
    ids_status st = IDS_OK;

    while (*text != '\0') {
        uint32_t character = idsi_utf8_next(&text);
        const char *escaped = escape(character);
        if (escaped != NULL) {
            IDSI_TRY(idsi_text_puts(line, escaped));
        } else if (character < 0x20 || character == 0x7F) {
            IDSI_TRY(idsi_text_puts(line, " "));
        } else {
            IDSI_TRY(idsi_utf8_append(line, character));
        }
    }
done:
    return st;
}

/* A comment ends with its line, so line ends within it become blanks. */
static ids_status append_comment(idsi_text *line, const char *text)
{
    ids_status st = IDS_OK;

    while (*text != '\0') {
        uint32_t character = idsi_utf8_next(&text);
        IDSI_TRY(idsi_utf8_append(line, character < 0x20 ? ' ' : character));
    }
done:
    return st;
}

static ids_status latex_begin(ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(line, "% Table: "));
    IDSI_TRY(append_comment(line, writer->task));
    IDSI_TRY(idsi_text_puts(line, "; the preamble needs \\usepackage{booktabs}.\n"
                                  "\\begin{tabular}{"));
    for (size_t i = 0; i < writer->count; i++) {
        bool right = writer->columns[i].kind == IDS_COLUMN_NUMBER;
        IDSI_TRY(idsi_text_puts(line, right ? "r" : "l"));
    }
    IDSI_TRY(idsi_text_puts(line, "}\n\\toprule\n"));
    for (size_t i = 0; i < writer->count; i++) {
        IDSI_TRY(idsi_text_puts(line, i > 0 ? " & " : ""));
        IDSI_TRY(idsi_latex_words(line, writer->columns[i].name));
    }
    IDSI_TRY(idsi_text_puts(line, " \\\\\n\\midrule\n"));
done:
    return st;
}

static ids_status append_cell(const idsi_column *column, const char *cell, idsi_text *line)
{
    ids_status st = IDS_OK;

    if (cell[0] == '\0') {
        return IDS_OK;
    }
    if (column->kind == IDS_COLUMN_TEXT) {
        return idsi_latex_words(line, cell);
    }
    if (column->kind == IDS_COLUMN_NUMBER && cell[0] != '-') {
        return idsi_text_puts(line, cell);
    }
    IDSI_TRY(idsi_text_puts(line, "$"));
    IDSI_TRY(idsi_latex_formula(line, cell));
    IDSI_TRY(idsi_text_puts(line, "$"));
done:
    return st;
}

/* Keeps the first cell of the group in `held` and the number of its rows so far. */
static ids_status follow_groups(ids_writer *writer, const char *first, idsi_text *line)
{
    ids_status st = IDS_OK;

    if (writer->columns[0].kind != IDS_COLUMN_NUMBER) {
        return IDS_OK;
    }
    if (writer->held_rows > 0 && strcmp(writer->held.data, first) == 0) {
        writer->held_rows++;
        return IDS_OK;
    }
    if (writer->held_rows > 1) {
        IDSI_TRY(idsi_text_puts(line, "\\addlinespace\n"));
    }
    writer->held.length = 0;
    IDSI_TRY(idsi_text_append(&writer->held, first, strlen(first) + 1));
    writer->held_rows = 1;
done:
    return st;
}

static ids_status latex_row(ids_writer *writer, const char *const *cells, idsi_text *line)
{
    ids_status st = IDS_OK;

    IDSI_TRY(follow_groups(writer, cells[0], line));
    for (size_t i = 0; i < writer->count; i++) {
        IDSI_TRY(idsi_text_puts(line, i > 0 ? " & " : ""));
        IDSI_TRY(append_cell(&writer->columns[i], cells[i], line));
    }
    IDSI_TRY(idsi_text_puts(line, " \\\\\n"));
done:
    return st;
}

static ids_status latex_end(ids_writer *writer, idsi_text *line)
{
    ids_status st = IDS_OK;
    idsi_note note = {0};
    size_t at = 0;

    IDSI_TRY(idsi_text_puts(line, "\\bottomrule\n\\end{tabular}\n"));
    while (idsi_writer_next_note(writer, &at, &note)) {
        const char *between = ": ";
        const char *value = NULL;
        IDSI_TRY(idsi_text_puts(line, "% "));
        IDSI_TRY(append_comment(line, note.name));
        while ((value = idsi_note_next_value(&note)) != NULL) {
            IDSI_TRY(idsi_text_puts(line, between));
            IDSI_TRY(append_comment(line, value));
            between = ", ";
        }
        IDSI_TRY(idsi_text_puts(line, "\n"));
    }
done:
    return st;
}

const idsi_format idsi_format_latex = {latex_begin, latex_row, latex_end};
