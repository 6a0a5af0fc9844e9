/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Reports: every number in a chart or table is that of the row that was put in, bars and points
 * are where the numbers belong.
 */
#include <inttypes.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "report_page.h"

#define MOST_CELLS 12

/* ---- reading what was written ------------------------------------------------------------ */

typedef struct cells {
    char text[MOST_CELLS][96];
    size_t count;
} cells;

/* The texts of the elements `name` from `at` to `end`, without the markup inside them. */
static cells read_cells(const char *at, const char *end, const char *name)
{
    cells found = {.count = 0};
    char open[16] = "";
    char close[16] = "";

    snprintf(open, sizeof open, "<%s", name);
    snprintf(close, sizeof close, "</%s>", name);
    for (at = strstr(at, open); at != NULL && at < end; at = strstr(at, open)) {
        const char *stop = strstr(at, close);
        size_t length = 0;
        ck_assert_uint_lt(found.count, MOST_CELLS);
        for (at = strchr(at, '>') + 1; at < stop; at++) {
            if (*at == '<') {
                at = strchr(at, '>');
            } else {
                ck_assert_uint_lt(length + 1, sizeof found.text[0]);
                found.text[found.count][length++] = *at;
            }
        }
        found.count++;
    }
    return found;
}

static int32_t attribute(const char *at, const char *name)
{
    char key[24] = "";
    const char *found = NULL;

    snprintf(key, sizeof key, " %s=\"", name);
    found = strstr(at, key);
    ck_assert_ptr_nonnull(found);
    return (int32_t)strtol(found + strlen(key), NULL, 10);
}

static void expect_number(const char *text, uint64_t number)
{
    char digits[24] = "";

    snprintf(digits, sizeof digits, "%" PRIu64, number);
    ck_assert_str_eq(text, digits);
}

/* Exponents written out: "3 1" with a raised 3 becomes "3+1+1+1". */
static void write_out(const char *text, char *out)
{
    static const char *const raised[] = {"\u2070", "\u00B9", "\u00B2", "\u00B3", "\u2074",
                                         "\u2075", "\u2076", "\u2077", "\u2078", "\u2079"};
    size_t used = 0;

    while (*text != '\0') {
        int part = (int)strtol(text, (char **)(uintptr_t)&text, 10);
        int times = 0;
        for (int digit = 0; digit < 10; digit++) {
            if (strncmp(text, raised[digit], strlen(raised[digit])) == 0) {
                times = 10 * times + digit;
                text += strlen(raised[digit]);
                digit = -1;
            }
        }
        for (times = times > 0 ? times : 1; times > 0; times--) {
            used += (size_t)sprintf(out + used, "%s%d", used > 0 ? "+" : "", part);
        }
        text += *text == ' ' ? 1 : 0;
    }
}

/* ---- a table as it is computed ----------------------------------------------------------- */

/* One line of the chart: texts are partition, free, dimension, consequences, quotient. */
static void check_line(page *p, const char *at, const ids_partition_row *row)
{
    const char *end = strstr(at, "</g>");
    cells found = read_cells(at, end, "text");
    char *partition = NULL;
    char written[96] = "";

    TEST_OK(p->ctx, ids_partition_print(p->ctx, &row->partition, &partition));
    ck_assert_uint_eq(found.count, 5);
    write_out(found.text[0], written);
    ck_assert_str_eq(written, partition);
    expect_number(found.text[1], row->free);
    expect_number(found.text[2], row->dimension);
    expect_number(found.text[3], row->consequences);
    expect_number(found.text[4], row->quotient);
    ids_string_free(p->ctx, partition);
}

static const char *bar_of(const char *line, const char *class)
{
    const char *bar = strstr(line, class);
    return bar != NULL && bar < strstr(line, "</g>") ? bar : NULL;
}

/* Within the chart that begins at `chart` and has `count` lines, lengths are as the numbers.
 * Returns the longest. */
static double check_bars(const char *chart, const ids_partition_table *table, size_t first,
                         size_t count, bool quotient)
{
    const char *class = quotient ? "<rect class=\"quot\"" : "<rect class=\"cons\"";
    double length[64] = {0};
    double value[64] = {0};
    size_t most = 0;

    for (size_t i = 0; i < count; i++) {
        ids_partition_row row = {0};
        chart = strstr(chart + 1, "<g class=\"module\"");
        ck_assert_int_eq(ids_partition_table_row(table, first + i, &row), IDS_OK);
        value[i] = (double)(quotient ? row.quotient : row.consequences);
        ck_assert_int_eq(bar_of(chart, class) != NULL, value[i] > 0);
        length[i] = value[i] > 0 ? attribute(bar_of(chart, class), "width") : 0;
        most = value[i] > value[most] ? i : most;
    }
    for (size_t i = 0; i < count; i++) {
        if (value[i] > 0) {
            ck_assert(fabs(length[i] - length[most] * value[i] / value[most]) < 1.01);
        }
    }
    return length[most];
}

START_TEST(chart_has_the_numbers_of_the_table)
{
    page p = open_page("jordan.pres");
    ids_partition_table *table = compute(p.ctx, JORDAN, 8);
    const char *at = NULL;
    size_t first = 0;

    add_table(&p, table);
    write_page(&p, _i == 0 ? IDS_REPORT_SVG : IDS_REPORT_HTML);
    at = p.text;
    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ids_partition_row row = {0};
        TEST_OK(p.ctx, ids_partition_table_row(table, i, &row));
        if (row.total) {
            first = i + 1;
            continue;
        }
        if (i == first) {
            size_t count = (size_t)ids_partition_count(row.degree);
            double hollow = check_bars(at, table, first, count, false);
            double solid = check_bars(at, table, first, count, true);
            /* Each kind has the whole of its panel. */
            ck_assert(solid > 40 && (hollow == 0 || hollow == solid));
        }
        at = strstr(at + 1, "<g class=\"module\"");
        ck_assert_ptr_nonnull(at);
        check_line(&p, at, &row);
    }
    ck_assert_ptr_null(strstr(at + 1, "<g class=\"module\""));
    ids_partition_table_free(table);
    close_page(&p);
}
END_TEST

/* The cells of a row of the page, from the heading of the row to its end. */
static void check_row(const char *at, const ids_partition_row *row, uint64_t milliseconds)
{
    cells found = read_cells(at, strstr(at, "</tr>"), "td");
    char expected[32] = "exact";

    ck_assert_uint_eq(found.count, 7);
    if (row->total) {
        ck_assert_str_eq(found.text[0], "");
    } else {
        expect_number(found.text[0], row->dimension);
    }
    expect_number(found.text[1], row->free);
    expect_number(found.text[2], row->consequences);
    expect_number(found.text[3], row->quotient);
    if (row->certainty == IDS_CERTAINTY_MODULAR) {
        snprintf(expected, sizeof expected, "2-%u", (unsigned)row->bits);
    }
    ck_assert_str_eq(found.text[4], expected);
    snprintf(expected, sizeof expected, "%" PRIu64 " ms", milliseconds);
    ck_assert_str_eq(found.text[5], expected);
}

START_TEST(page_has_the_numbers_of_the_table)
{
    page p = open_page("jordan.pres");
    ids_partition_table *table = compute(p.ctx, JORDAN, 6);
    const char *at = NULL;

    add_table(&p, table);
    write_page(&p, IDS_REPORT_HTML);
    at = strstr(p.text, "id=\"modules\"");
    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ids_partition_row row = {0};
        char heading[128] = "<th scope=\"row\">total</th>";
        char *partition = NULL;
        TEST_OK(p.ctx, ids_partition_table_row(table, i, &row));
        if (!row.total) {
            TEST_OK(p.ctx, ids_partition_print(p.ctx, &row.partition, &partition));
            snprintf(heading, sizeof heading, "<th scope=\"row\">%s</th>", partition);
        }
        at = strstr(at, heading);
        ck_assert_msg(at != NULL, "%s is not there, or not in its place", heading);
        check_row(at, &row, 1 + i);
        ids_string_free(p.ctx, partition);
    }
    ck_assert_ptr_nonnull(strstr(p.text, "quotients of dimension 1, 1, 3, 11, 55, 330."));
    ck_assert_ptr_nonnull(strstr(p.text, ">Complete.<"));
    ids_partition_table_free(table);
    close_page(&p);
}
END_TEST

/* ---- growth ------------------------------------------------------------------------------ */

/* y of the middle of a point, which must be there. */
static int32_t point(const page *p, uint32_t degree, const char *series, uint64_t value)
{
    char title[96] = "";
    const char *at = NULL;

    snprintf(title, sizeof title, "<title>degree %u: %s %" PRIu64 "</title>", (unsigned)degree,
             series, value);
    at = strstr(p->text, title);
    ck_assert_msg(at != NULL, "%s is not there", title);
    at += strlen(title);
    if (strncmp(at, "<circle", 7) == 0) {
        return attribute(at, "cy");
    }
    if (strncmp(at, "<rect", 5) == 0) {
        return attribute(at, "y") + 4;
    }
    ck_assert_int_eq(strncmp(at, "<path", 5), 0);
    return (int32_t)strtol(strchr(strstr(at, "d=\"M"), ' ') + 1, NULL, 10) + 4;
}

/* Heights are as the logarithms; a zero stands below everything. */
START_TEST(points_stand_at_their_logarithms)
{
    static const uint64_t parts[][2] = {{0, 1},   {3, 7},     {60, 40},
                                        {999, 1}, {0, 10000}, {123456789012345, 678}};
    page p = open_page("growth");
    double one = 0;
    double decade = 0;

    for (uint32_t i = 0; i < sizeof parts / sizeof parts[0]; i++) {
        ids_report_row row = total_row(i + 1, parts[i][0], parts[i][1]);
        TEST_OK(p.ctx, ids_report_add(p.report, &row));
    }
    write_page(&p, _i == 0 ? IDS_REPORT_SVG : IDS_REPORT_HTML);
    one = point(&p, 1, "free", 1);
    decade = (one - point(&p, 6, "free", 123456789013023)) / log10(123456789013023.0);
    ck_assert(decade > 5);
    for (uint32_t i = 0; i < sizeof parts / sizeof parts[0]; i++) {
        uint64_t values[3] = {parts[i][0] + parts[i][1], parts[i][0], parts[i][1]};
        static const char *const series[3] = {"free", "consequences", "quotient"};
        for (size_t k = 0; k < 3; k++) {
            double y = point(&p, i + 1, series[k], values[k]);
            if (values[k] == 0) {
                ck_assert(y > one + 10);
            } else {
                ck_assert_msg(fabs(y - (one - decade * log10((double)values[k]))) < 1.5,
                              "%s %" PRIu64 " is at %.0f, 1 at %.0f, a decade is %.2f", series[k],
                              values[k], y, one, decade);
            }
        }
    }
    close_page(&p);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("render: report");
    TCase *tcase = tcase_create("report");

    tcase_add_loop_test(tcase, chart_has_the_numbers_of_the_table, 0, 2);
    tcase_add_test(tcase, page_has_the_numbers_of_the_table);
    tcase_add_loop_test(tcase, points_stand_at_their_logarithms, 0, 2);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
