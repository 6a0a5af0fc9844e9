/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files of a report share: its rows, and the pieces that the page and the picture are
 * made of.
 */
#ifndef IDSI_REPORT_PRIVATE_H
#define IDSI_REPORT_PRIVATE_H

#include <idspan/report.h>

#include "render_private.h"

/* A row; `given.reason` is `reason`. */
typedef struct idsi_report_row {
    ids_report_row given;
    char *reason;   /* owned; NULL: none */
    uint64_t index; /* of the partition; of a total, a number above all of them */
} idsi_report_row;

struct ids_report {
    ids_ctx *ctx;
    char *title;
    char *presentation;    /* NULL: none; without NUL bytes */
    idsi_report_row *rows; /* by degree, then by index */
    size_t count;
    size_t capacity;
    idsi_text notes; /* name NUL value NUL, note after note */
};

/* The rows of one degree: partitions, then maybe the total. */
typedef struct idsi_degree {
    uint32_t degree;
    const idsi_report_row *rows;
    size_t partitions;
    size_t done;                  /* of the partitions */
    const idsi_report_row *total; /* NULL: none */
} idsi_degree;

/* Walks over the degrees: *at = 0 before the first call; false after the last. */
bool idsi_report_next_degree(const ids_report *report, size_t *at, idsi_degree *degree);
bool idsi_report_next_note(const ids_report *report, size_t *at, const char **name,
                           const char **value);
/* Whether the row has its numbers; false for NULL. */
bool idsi_report_is_done(const idsi_report_row *row);
/* Whether some degree has rows by partition. */
bool idsi_report_by_partition(const ids_report *report);

/* ---- words (report_words.c) ------------------------------------------------------------- */

/* Digits in groups of three from five digits on. The groups are set apart by `before` each of
 * them and `after`, markup that moves and adds no character, so that a copied number is whole. */
typedef struct idsi_grouping {
    const char *before;
    const char *after;
} idsi_grouping;

extern const idsi_grouping idsi_grouping_html;
extern const idsi_grouping idsi_grouping_svg;

ids_status idsi_put_number(idsi_text *out, uint64_t number, const idsi_grouping *grouping);
/* Pixels of a number in a chart. */
int32_t idsi_number_width(uint64_t number);
/* 4+3+1+1+1, as in options. */
ids_status idsi_put_partition(idsi_text *out, const ids_partition *partition);
/* 4 3 1^3, with the exponents raised. */
ids_status idsi_put_exponents(idsi_text *out, const ids_partition *partition);
ids_status idsi_put_raised(idsi_text *out, uint32_t number);
/* "exact" or "2^-23". */
ids_status idsi_put_certainty(idsi_text *out, const ids_partition_row *numbers);
ids_status idsi_put_time(idsi_text *out, uint64_t milliseconds);
ids_status idsi_put_bytes(idsi_text *out, uint64_t bytes);

/* ---- charts ----------------------------------------------------------------------------- */

#define IDSI_CHART_WIDTH 696

/* Look of the charts, for the <style> of an SVG picture or of a page; the root has the class
 * "chart". */
extern const char idsi_chart_style[];
extern const char idsi_page_style[];

/* Multiplicities of a degree as bars; IDSI_CHART_WIDTH wide, its upper left corner at 0, 0. */
int32_t idsi_modules_height(const idsi_degree *degree);
ids_status idsi_put_modules(idsi_text *out, const idsi_degree *degree);

/* The three dimensions of every degree whose total is known; likewise. False: nothing to show,
 * fewer than two such degrees. */
bool idsi_growth_is_worth(const ids_report *report);
int32_t idsi_growth_height(void);
ids_status idsi_put_growth(idsi_text *out, const ids_report *report);

/* ---- the two forms ------------------------------------------------------------------------ */

/* A report on its way to the sink. */
typedef struct idsi_press {
    const ids_report *report;
    idsi_text out;
    ids_sink_fn sink;
    void *sink_user;
} idsi_press;

ids_status idsi_press_pour(idsi_press *press);
ids_status idsi_report_svg(idsi_press *press);
ids_status idsi_report_html(idsi_press *press);

/* Pieces of the page (report_table.c). */
ids_status idsi_put_dimensions_table(idsi_press *press);
ids_status idsi_put_modules_table(idsi_press *press, const idsi_degree *degree);
ids_status idsi_put_gaps_table(idsi_press *press);

#endif
