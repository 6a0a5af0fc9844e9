/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file render.h
 * Writers for tables: aligned text for people; CSV, JSON and LaTeX as stable contracts.
 */
#ifndef IDSPAN_RENDER_H
#define IDSPAN_RENDER_H

#include <idspan/core.h>

#ifdef __cplusplus
extern "C" {
#endif

/**
 * Output format. All of them are UTF-8 without a byte order mark, whatever the cells hold: a byte
 * that is not UTF-8 comes out as U+FFFD, the replacement character.
 */
typedef enum ids_format {
    IDS_FORMAT_TEXT = 0,  /**< aligned columns, for people; not a contract */
    IDS_FORMAT_CSV = 1,   /**< RFC 4180, header line, LF line ends */
    IDS_FORMAT_JSON = 2,  /**< RFC 8259: {"task", "columns": [...], "rows": [{...}], "notes": {}} */
    IDS_FORMAT_LATEX = 3  /**< a tabular with booktabs rules */
} ids_format;

/** What the cells of a column are. */
typedef enum ids_column_kind {
    IDS_COLUMN_NUMBER = 0, /**< an integer in decimal digits, of any size, or "" for none:
                                right-justified; bare in JSON, "" as null */
    IDS_COLUMN_TEXT = 1,   /**< words: left-justified, a string in JSON */
    IDS_COLUMN_MATH = 2    /**< a formula: as TEXT, but in math mode in LaTeX */
} ids_column_kind;

/** One column of a table. */
typedef struct ids_column {
    const char *name;     /**< heading; key in JSON */
    ids_column_kind kind; /**< kind of its cells */
    uint32_t width;       /**< least width in text format, in characters; 0: as wide as needed */
} ids_column;

/** A table that is being written. It uses the ctx it keeps, so it serves the thread that has it. */
typedef struct ids_writer ids_writer;

/**
 * Starts a table. Rows are written as they come; text format holds back some hundred rows to
 * align them. Memory does not grow with the number of rows.
 *
 * @param ctx        borrowed now, kept.
 * @param format     output format.
 * @param task       borrowed: name of the table in JSON, in a comment in LaTeX.
 * @param columns    borrowed now, names copied.
 * @param count      number of columns, at least 1, no two with one name.
 * @param sink       kept; receives the output; called from the thread that writes.
 * @param sink_user  kept; passed to `sink`.
 * @param writer     out, owned: ids_writer_free(), after ids_writer_end() for a complete table.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, unknown format or kind of column, no columns, no name, two of one
 *                        name
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 *         IDS_ERR_IO     the sink refused
 * Cost: proportional to the headings. Threads: one a ctx. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_writer_create(ids_ctx *ctx, ids_format format, const char *task,
                                                  const ids_column *columns, size_t count,
                                                  ids_sink_fn sink, void *sink_user,
                                                  ids_writer **writer);

/**
 * Adds a name and value that JSON keeps beside the rows and text shows as a line after them
 * (CSV leaves it out, LaTeX makes it a comment). Call it before ids_writer_end(), once a name.
 *
 * @param writer  borrowed.
 * @param name    borrowed, copied; no two notes of one name.
 * @param value   borrowed, copied.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, the name is taken, after ids_writer_end()
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: a copy. Threads: the one that has the writer's ctx. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_writer_note(ids_writer *writer, const char *name,
                                                const char *value);

/**
 * Adds a note of several values: a list of strings in JSON, in text and LaTeX with commas between.
 *
 * @param writer  borrowed.
 * @param name    borrowed, copied; no two notes of one name.
 * @param values  borrowed, copied, `count` of them; NULL only when there are none.
 * @param count   below 2^32-1.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, the name is taken, after ids_writer_end()
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: a copy. Threads: the one that has the writer's ctx. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_writer_note_list(ids_writer *writer, const char *name,
                                                     const char *const *values, size_t count);

/**
 * Writes one row; cells[i] is borrowed text for column i, as many as there are columns.
 *
 * A row that is refused with IDS_ERR_ARG leaves the table as it was. After any other failure the
 * table is broken off: later calls answer with the same status and nothing more is written.
 *
 * @param writer  borrowed.
 * @param cells   borrowed, none of them NULL.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, no number in a number column, after ids_writer_end()
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 *         IDS_ERR_IO     the sink refused
 * Cost: proportional to the row. Threads: the one that has the writer's ctx. Cancel: not polled; a
 * sink that refuses ends it. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_writer_row(ids_writer *writer, const char *const *cells);

/**
 * Writes what is held back, the notes and the end.
 *
 * @param writer  borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, called twice
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 *         IDS_ERR_IO     the sink refused
 * Cost: proportional to what is held back. Threads: the one that has the writer's ctx.
 * Cancel: not polled; a sink that refuses ends it. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_writer_end(ids_writer *writer);

/**
 * Frees a writer.
 *
 * @param writer  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `writer` any more.
 * Since: 0.1
 */
IDS_API void ids_writer_free(ids_writer *writer);

#ifdef __cplusplus
}
#endif

#endif
