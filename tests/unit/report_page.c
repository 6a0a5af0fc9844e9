/* SPDX-License-Identifier: BSD-2-Clause */
/* What the tests of reports share. */
#include <stdlib.h>
#include <string.h>

#include "report_page.h"

int keep(void *user, const char *bytes, size_t length)
{
    page *p = user;

    p->calls++;
    if (p->calls == p->fail_at) {
        return 1;
    }
    if (p->length + length + 1 > p->capacity) {
        p->capacity = 2 * (p->length + length + 1);
        p->text = realloc(p->text, p->capacity);
        ck_assert_ptr_nonnull(p->text);
    }
    memcpy(p->text + p->length, bytes, length);
    p->length += length;
    p->text[p->length] = '\0';
    return 0;
}

page open_page(const char *title)
{
    page p = {.ctx = test_ctx()};

    TEST_OK(p.ctx, ids_report_create(p.ctx, title, &p.report));
    return p;
}

void close_page(page *p)
{
    free(p->text);
    ids_report_free(p->report);
    test_ctx_free(p->ctx);
}

void write_page(page *p, ids_report_form form)
{
    p->length = 0;
    TEST_OK(p->ctx, ids_report_write(p->report, form, keep, p));
    check_xml(p->text);
    check_xmllint(p->text, p->length);
}

ids_report_row total_row(uint32_t degree, uint64_t consequences, uint64_t quotient)
{
    return (ids_report_row){.struct_size = sizeof(ids_report_row),
                            .numbers = {.degree = degree,
                                        .total = true,
                                        .free = consequences + quotient,
                                        .consequences = consequences,
                                        .quotient = quotient}};
}

ids_report_row part_row(ids_ctx *ctx, const char *partition, ids_report_state state)
{
    ids_report_row row = {.struct_size = sizeof row, .state = state};

    TEST_OK(ctx, ids_partition_parse(ctx, partition, &row.numbers.partition));
    row.numbers.degree = row.numbers.partition.degree;
    return row;
}

ids_partition_table *compute(ids_ctx *ctx, const char *text, uint32_t to)
{
    ids_partition_options options = {.struct_size = sizeof options};
    ids_presentation *pres = NULL;
    ids_partition_table *table = NULL;

    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), "test", &pres));
    TEST_OK(ctx, ids_partition_table_create(ctx, pres, 1, to, &options, &table));
    ids_presentation_free(pres);
    return table;
}

void add_table(page *p, const ids_partition_table *table)
{
    for (size_t i = ids_partition_table_count(table); i-- > 0;) {
        ids_report_row row = {.struct_size = sizeof row, .milliseconds = 1 + i, .bytes = 5000 * i};
        TEST_OK(p->ctx, ids_partition_table_row(table, i, &row.numbers));
        TEST_OK(p->ctx, ids_report_add(p->report, &row));
    }
}
