/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file report.h
 * Reports: a rank table with its charts, finished or not, as one SVG picture or one HTML page.
 *
 * A report is filled row by row, in any order, from whatever has the numbers: a table that was
 * just computed, or the cells of a run, some of which are still missing. It then writes itself,
 * as often as wanted. What it writes needs nothing beside it (no script, font or picture from
 * elsewhere), is well-formed XML, and follows the reader's preference for light or dark.
 */
#ifndef IDSPAN_REPORT_H
#define IDSPAN_REPORT_H

#include <idspan/answer.h>
#include <idspan/render.h>

#ifdef __cplusplus
extern "C" {
#endif

/** What a report is written as. */
typedef enum ids_report_form {
    IDS_REPORT_HTML = 0, /**< one page: presentation, tables, charts, gaps, provenance */
    IDS_REPORT_SVG = 1   /**< one picture: growth of the dimensions, multiplicities by partition */
} ids_report_form;

/** Whether a row of a report has its numbers. */
typedef enum ids_report_state {
    IDS_REPORT_DONE = 0,    /**< it has */
    IDS_REPORT_MISSING = 1, /**< not yet computed */
    IDS_REPORT_FAILED = 2   /**< given up */
} ids_report_state;

/** One row of a report; set struct_size, and to 0 what is not known. */
typedef struct ids_report_row {
    size_t struct_size;        /**< sizeof(ids_report_row) */
    ids_report_state state;    /**< MISSING and FAILED: of `numbers`, only `degree`, `total`,
                                    `partition` and (0 if not known) `free` are read */
    ids_partition_row numbers; /**< of a partition, or with `total` of a whole degree */
    uint64_t milliseconds;     /**< time it took; 0: not known */
    uint64_t bytes;            /**< most memory it took; 0: not known */
    const char *reason;        /**< borrowed: why it is not done, in a few words; NULL: not said */
} ids_report_row;

/** A report that is being filled. It uses the ctx it keeps, so it serves the thread that has it. */
typedef struct ids_report ids_report;

/**
 * Makes an empty report.
 *
 * @param ctx     borrowed now, kept.
 * @param title   borrowed: what the tables are of, such as the name of the presentation's file.
 * @param report  out, owned: ids_report_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: a copy of the title. Threads: one a ctx. Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_report_create(ids_ctx *ctx, const char *title,
                                                  ids_report **report);

/**
 * Frees a report.
 *
 * @param report  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `report` any more.
 * Since: 0.1
 */
IDS_API void ids_report_free(ids_report *report);

/**
 * Sets the text of the presentation, which the page shows as it is; a second call replaces it.
 *
 * @param report  borrowed.
 * @param text    borrowed, copied; bytes that are not UTF-8 are shown as U+FFFD.
 * @param length  bytes of text.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: a copy. Threads: the one that has the report's ctx. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_report_set_presentation(ids_report *report, const char *text,
                                                            size_t length);

/**
 * Adds a row. Rows can come in any order; they are shown by degree, partitions in the order of
 * ids_partition_rank() and the total last. A degree can have only its total, or only some of its
 * partitions: nothing is added up, and a degree without a total is shown as not finished.
 *
 * After a failure the report is as before.
 *
 * @param report  borrowed.
 * @param row     borrowed now, copied.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, struct_size, unknown state, a degree over IDS_MAX_DEGREE, a
 *                        partition that is not well formed or of another degree, numbers of which
 *                        `free` is not the sum of the others, a row that is there already
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: a copy, sometimes of the whole list. Threads: the one that has the report's ctx.
 * Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_report_add(ids_report *report, const ids_report_row *row);

/**
 * Adds a name and value to the provenance, shown in the order they come: version, primes, seed.
 *
 * @param report  borrowed.
 * @param name    borrowed, copied.
 * @param value   borrowed, copied.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, empty name
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: a copy. Threads: the one that has the report's ctx. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_report_note(ids_report *report, const char *name,
                                                const char *value);

/**
 * Writes the report. The bytes depend on nothing but what was put in.
 *
 * @param report     borrowed.
 * @param form       page or picture.
 * @param sink       receives the output in pieces; called from this thread.
 * @param sink_user  passed to `sink`; borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, unknown form
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 *         IDS_ERR_IO     the sink refused
 * Cost: linear in the rows. Threads: the one that has the report's ctx. Cancel: not polled; a sink
 * that refuses ends it. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_report_write(ids_report *report, ids_report_form form,
                                                 ids_sink_fn sink, void *sink_user);

#ifdef __cplusplus
}
#endif

#endif
