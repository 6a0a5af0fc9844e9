/* SPDX-License-Identifier: BSD-2-Clause */
/* What the tests of reports share: a report with what it wrote, rows, a computed table. */
#ifndef IDSPAN_REPORT_PAGE_H
#define IDSPAN_REPORT_PAGE_H

#include <idspan/idspan.h>

#include "support.h"
#include "xml_check.h"

#define JORDAN "operation a*b commutative\nidentity ((x*x)*y)*x = (x*x)*(y*x)\n"

typedef struct page {
    ids_ctx *ctx;
    ids_report *report;
    char *text; /* what the sink got */
    size_t length;
    size_t capacity;
    uint64_t calls;
    uint64_t fail_at; /* number of the call of the sink that fails, from 1; 0: none */
} page;

/* A sink for a page. */
int keep(void *user, const char *bytes, size_t length);
page open_page(const char *title);
void close_page(page *p);
/* Writes the report into `text`, which must be well-formed. */
void write_page(page *p, ids_report_form form);

/* A finished total; a row of a partition without numbers. */
ids_report_row total_row(uint32_t degree, uint64_t consequences, uint64_t quotient);
ids_report_row part_row(ids_ctx *ctx, const char *partition, ids_report_state state);
/* The table of a presentation in degrees 1 .. to. */
ids_partition_table *compute(ids_ctx *ctx, const char *text, uint32_t to);
/* Puts its rows in, the last first, so that the order is the report's. */
void add_table(page *p, const ids_partition_table *table);

#endif
