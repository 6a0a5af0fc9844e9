/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Reports: gaps are named, everything foreign is escaped, nothing is asked for from elsewhere, and
 * what report.h refuses is refused. The numbers are in test_render_report.c.
 */
#include <string.h>

#include "report_page.h"

START_TEST(gaps_are_named)
{
    page p = open_page("gaps");
    ids_report_row rows[] = {
        part_row(p.ctx, "3", IDS_REPORT_DONE), part_row(p.ctx, "2+1", IDS_REPORT_FAILED),
        part_row(p.ctx, "1+1+1", IDS_REPORT_MISSING), total_row(3, 0, 0), total_row(4, 2, 3)};

    rows[1].reason = "out of <memory> & time";
    rows[3].state = IDS_REPORT_MISSING;
    rows[3].reason = "a total is no cell";
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        TEST_OK(p.ctx, ids_report_add(p.report, &rows[i]));
    }
    write_page(&p, IDS_REPORT_HTML);
    ck_assert_ptr_nonnull(strstr(p.text, "2 of 4 cells are computed, 1 failed"));
    ck_assert_ptr_nonnull(strstr(p.text, "1 of 3 multiplicities are computed"));
    ck_assert_ptr_nonnull(strstr(p.text, "<td>2+1</td><td>failed</td><td class=\"w\">"
                                         "out of &lt;memory&gt; &amp; time</td>"));
    ck_assert_ptr_nonnull(strstr(p.text, "<td>1+1+1</td><td>not yet computed</td>"));
    /* dimension 2, nothing known of what is free */
    ck_assert_ptr_nonnull(strstr(p.text, "<th scope=\"row\">2+1</th><td class=\"n\">2</td>"
                                         "<td></td><td colspan=\"3\""));
    ck_assert_ptr_null(strstr(p.text, "a total is no cell"));
    ck_assert_ptr_null(strstr(p.text, "<tfoot>"));
    ck_assert_ptr_null(strstr(p.text, "Complete"));
    write_page(&p, IDS_REPORT_SVG);
    ck_assert_ptr_nonnull(strstr(p.text, ">not finished<"));
    ck_assert_ptr_nonnull(strstr(p.text, "1 of 3 are computed"));
    close_page(&p);
}
END_TEST

/* Cells of which there is nothing new to say are counted, one that is different is named. */
START_TEST(long_gaps_are_counted)
{
    page p = open_page("gaps");
    ids_report_row damaged = part_row(p.ctx, "4+1", IDS_REPORT_MISSING);

    damaged.reason = "its checksum is wrong";
    TEST_OK(p.ctx, ids_report_add(p.report, &damaged));
    for (uint64_t i = 0; i < ids_partition_count(5); i++) {
        ids_report_row row = {.struct_size = sizeof row, .state = IDS_REPORT_MISSING, .reason = ""};
        row.numbers.degree = 5;
        TEST_OK(p.ctx, ids_partition_unrank(5, i, &row.numbers.partition));
        if (i != 1) {
            TEST_OK(p.ctx, ids_report_add(p.report, &row));
        }
    }
    write_page(&p, IDS_REPORT_HTML);
    ck_assert_ptr_nonnull(strstr(p.text, "<td class=\"n\">5</td><td>6 partitions</td>"
                                         "<td>not yet computed</td>"));
    ck_assert_ptr_nonnull(strstr(p.text, "<td>4+1</td><td>not yet computed</td><td class=\"w\">"
                                         "its checksum is wrong</td>"));
    ck_assert_ptr_nonnull(strstr(p.text, "0 of 7 cells are computed (<a"));
    for (uint64_t i = 0; i < ids_partition_count(4); i++) {
        ids_report_row row = {
            .struct_size = sizeof row, .state = IDS_REPORT_FAILED, .reason = "no memory"};
        row.numbers.degree = 4;
        TEST_OK(p.ctx, ids_partition_unrank(4, i, &row.numbers.partition));
        TEST_OK(p.ctx, ids_report_add(p.report, &row));
    }
    write_page(&p, IDS_REPORT_HTML);
    ck_assert_ptr_nonnull(strstr(p.text, "<td class=\"n\">4</td><td>5 partitions</td>"
                                         "<td>failed</td><td class=\"w\">no memory</td>"));
    ck_assert_ptr_nonnull(strstr(p.text, "0 of 12 cells are computed, 5 failed (<a"));
    close_page(&p);
}
END_TEST

START_TEST(nothing_is_something_to_report)
{
    page p = open_page("");

    write_page(&p, IDS_REPORT_SVG);
    write_page(&p, IDS_REPORT_HTML);
    ck_assert_ptr_nonnull(strstr(p.text, "Empty."));
    ck_assert_ptr_null(strstr(p.text, "Presentation"));
    close_page(&p);
}
END_TEST

/* ---- foreign text, refusals -------------------------------------------------------------- */

START_TEST(everything_is_escaped)
{
    static const char evil[] = "</title><script>alert('1')</script>&\"]]>\x01\x7f\xff\xc3 \uFFFE";
    page p = open_page(evil);
    ids_report_row row = part_row(p.ctx, "1", IDS_REPORT_FAILED);

    row.reason = evil;
    TEST_OK(p.ctx, ids_report_add(p.report, &row));
    TEST_OK(p.ctx, ids_report_note(p.report, evil, evil));
    TEST_OK(p.ctx, ids_report_set_presentation(p.report, "old", 3));
    /* with the final NUL, which must not end the page early */
    TEST_OK(p.ctx, ids_report_set_presentation(p.report, evil, sizeof evil));
    write_page(&p, IDS_REPORT_SVG);
    ck_assert_ptr_null(strstr(p.text, "<script"));
    write_page(&p, IDS_REPORT_HTML);
    ck_assert_ptr_null(strstr(p.text, "<script"));
    ck_assert_ptr_null(strstr(p.text, "<code>old"));
    ck_assert_ptr_nonnull(strstr(p.text, "&lt;script&gt;alert(&#39;1&#39;)"));
    close_page(&p);
}
END_TEST

/* Nothing is asked for from elsewhere: the only addresses are the names of the two languages. */
START_TEST(the_page_stands_alone)
{
    page p = open_page("alone");
    ids_partition_table *table = compute(p.ctx, JORDAN, 4);
    const char *at = NULL;

    add_table(&p, table);
    write_page(&p, _i == 0 ? IDS_REPORT_SVG : IDS_REPORT_HTML);
    for (at = strstr(p.text, "://"); at != NULL; at = strstr(at + 1, "://")) {
        ck_assert_int_eq(strncmp(at, "://www.w3.org/", 14), 0);
        ck_assert_int_eq(strncmp(at - 11, "xmlns=\"http", 11), 0);
    }
    ck_assert_ptr_null(strstr(p.text, "<script"));
    ck_assert_ptr_null(strstr(p.text, "url("));
    ck_assert_ptr_null(strstr(p.text, "@import"));
    ck_assert_ptr_null(strstr(p.text, " src="));
    ids_partition_table_free(table);
    close_page(&p);
}
END_TEST

START_TEST(rows_are_checked)
{
    page p = open_page("rows");
    ids_report_row good = part_row(p.ctx, "2+1", IDS_REPORT_DONE);
    ids_report_row row = good;

#define REFUSED(change) \
    row = good;         \
    change;             \
    TEST_STATUS(p.ctx, ids_report_add(p.report, &row), IDS_ERR_ARG)
    REFUSED(row.struct_size = 0);
    REFUSED(row.state = (ids_report_state)3);
    REFUSED(row.numbers.degree = 0);
    REFUSED(row.numbers.degree = 4);
    REFUSED(row.numbers.degree = 65; row.numbers.total = true);
    REFUSED(row.numbers.partition.part[1] = 3);
    REFUSED(row.numbers.free = 1);
    REFUSED(row.numbers.consequences = UINT64_MAX; row.numbers.quotient = 1);
    TEST_STATUS(p.ctx, ids_report_add(p.report, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_report_add(NULL, &good), IDS_ERR_ARG);
    TEST_OK(p.ctx, ids_report_add(p.report, &good));
    REFUSED(row.state = IDS_REPORT_MISSING);
#undef REFUSED
    write_page(&p, IDS_REPORT_HTML);
    close_page(&p);
}
END_TEST

START_TEST(arguments_are_checked)
{
    page p = open_page("arguments");
    ids_report *other = NULL;

    ck_assert_int_eq(ids_report_create(NULL, "x", &other), IDS_ERR_ARG);
    TEST_STATUS(p.ctx, ids_report_create(p.ctx, NULL, &other), IDS_ERR_ARG);
    TEST_STATUS(p.ctx, ids_report_create(p.ctx, "x", NULL), IDS_ERR_ARG);
    ck_assert_ptr_null(other);
    ck_assert_int_eq(ids_report_note(NULL, "a", "b"), IDS_ERR_ARG);
    TEST_STATUS(p.ctx, ids_report_note(p.report, "", "b"), IDS_ERR_ARG);
    TEST_STATUS(p.ctx, ids_report_note(p.report, NULL, "b"), IDS_ERR_ARG);
    TEST_STATUS(p.ctx, ids_report_note(p.report, "a", NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_report_set_presentation(NULL, "a", 1), IDS_ERR_ARG);
    TEST_STATUS(p.ctx, ids_report_set_presentation(p.report, NULL, 0), IDS_ERR_ARG);
    ck_assert_int_eq(ids_report_write(NULL, IDS_REPORT_SVG, keep, &p), IDS_ERR_ARG);
    TEST_STATUS(p.ctx, ids_report_write(p.report, IDS_REPORT_SVG, NULL, &p), IDS_ERR_ARG);
    TEST_STATUS(p.ctx, ids_report_write(p.report, (ids_report_form)2, keep, &p), IDS_ERR_ARG);
    ck_assert_uint_eq(p.calls, 0);
    ids_report_free(NULL);
    close_page(&p);
}
END_TEST

/* A sink that gives up at any time is told of, and the report can be written again. */
START_TEST(sinks_may_fail)
{
    page p = open_page("sink");
    ids_partition_table *table = compute(p.ctx, JORDAN, 5);
    ids_report_form form = _i == 0 ? IDS_REPORT_SVG : IDS_REPORT_HTML;
    uint64_t calls = 0;

    add_table(&p, table);
    write_page(&p, form);
    calls = p.calls;
    ck_assert_uint_gt(calls, 2);
    for (uint64_t i = 1; i <= calls; i++) {
        p.calls = 0;
        p.length = 0;
        p.fail_at = i;
        TEST_STATUS(p.ctx, ids_report_write(p.report, form, keep, &p), IDS_ERR_IO);
        ck_assert_uint_eq(p.calls, i);
    }
    p.fail_at = 0;
    write_page(&p, form);
    ids_partition_table_free(table);
    close_page(&p);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("render: pages");
    TCase *tcase = tcase_create("report");

    tcase_add_test(tcase, gaps_are_named);
    tcase_add_test(tcase, long_gaps_are_counted);
    tcase_add_test(tcase, nothing_is_something_to_report);
    tcase_add_test(tcase, everything_is_escaped);
    tcase_add_loop_test(tcase, the_page_stands_alone, 0, 2);
    tcase_add_test(tcase, rows_are_checked);
    tcase_add_test(tcase, arguments_are_checked);
    tcase_add_loop_test(tcase, sinks_may_fail, 0, 2);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
