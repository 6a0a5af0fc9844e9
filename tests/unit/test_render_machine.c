/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * CSV and JSON. Expected texts are written by hand from RFC 4180 (section 2, rules 5 to 7, with
 * the LF line ends that render.h names) and RFC 8259 (sections 4 to 7).
 */
#include "render_capture.h"

static const ids_column columns[] = {
    {"degree", IDS_COLUMN_NUMBER, 0},
    {"monomial", IDS_COLUMN_MATH, 0},
    {"remark", IDS_COLUMN_TEXT, 0},
};

START_TEST(test_csv_plain)
{
    static const char *const cells[] = {"3", "(a*b)*c", "left", "-4", "t(a,b)", ""};

    expect_table(IDS_FORMAT_CSV, columns, 3, cells, 2, NULL,
                 "degree,monomial,remark\n"
                 "3,(a*b)*c,left\n"
                 "-4,\"t(a,b)\",\n");
}
END_TEST

START_TEST(test_csv_quotes)
{
    static const char *const cells[] = {"", "\"", "a \"b\" c", "0", "x\ny", "x\ry"};
    static const char *const notes[] = {"seed", "1", NULL};

    expect_table(IDS_FORMAT_CSV, columns, 3, cells, 2, notes,
                 "degree,monomial,remark\n"
                 ",\"\"\"\",\"a \"\"b\"\" c\"\n"
                 "0,\"x\ny\",\"x\ry\"\n");
}
END_TEST

/* An empty line would be read as no row at all. */
START_TEST(test_csv_one_empty_field)
{
    static const char *const cells[] = {"", "a"};

    expect_table(IDS_FORMAT_CSV, columns + 2, 1, cells, 2, NULL, "remark\n\"\"\na\n");
}
END_TEST

/* e acute kept; stray bytes become U+FFFD, in quotes and without. */
START_TEST(test_csv_repairs)
{
    static const char *const cells[] = {"1", "caf\xc3\xa9", "\xff.", "2", "\xc3,\"", "\xc3\xa9,"};

    expect_table(IDS_FORMAT_CSV, columns, 3, cells, 2, NULL,
                 "degree,monomial,remark\n"
                 "1,caf\xc3\xa9,\xef\xbf\xbd.\n"
                 "2,\"\xef\xbf\xbd,\"\"\",\"\xc3\xa9,\"\n");
}
END_TEST

START_TEST(test_csv_no_rows)
{
    expect_table(IDS_FORMAT_CSV, columns, 3, NULL, 0, NULL, "degree,monomial,remark\n");
}
END_TEST

START_TEST(test_json_rows)
{
    /* 2^128, far beyond the numbers a double or a 64-bit integer holds exactly. */
    static const char *const cells[] = {
        "340282366920938463463374607431768211456", "a*b", "", "", "{a,b}", "x"};

    expect_table(IDS_FORMAT_JSON, columns, 3, cells, 2, NULL,
                 "{\"task\": \"rank\",\n"
                 " \"columns\": [\"degree\", \"monomial\", \"remark\"],\n"
                 " \"rows\": [\n"
                 "  {\"degree\": 340282366920938463463374607431768211456, "
                 "\"monomial\": \"a*b\", \"remark\": \"\"},\n"
                 "  {\"degree\": null, \"monomial\": \"{a,b}\", \"remark\": \"x\"}\n"
                 " ],\n"
                 " \"notes\": {}}\n");
}
END_TEST

START_TEST(test_json_strings)
{
    /* Quote, backslash, control characters; e acute kept; a stray byte becomes U+FFFD. */
    static const char *const cells[] = {"\"\\\b\n\t\x1f\x7f", "caf\xc3\xa9", "\xff."};
    static const ids_column texts[] = {
        {"a", IDS_COLUMN_TEXT, 0}, {"b\"", IDS_COLUMN_TEXT, 0}, {"c", IDS_COLUMN_MATH, 0}};
    static const char *const notes[] = {"seed", "7", "stopped", "line 1\nline 2", NULL};

    expect_table(IDS_FORMAT_JSON, texts, 3, cells, 1, notes,
                 "{\"task\": \"rank\",\n"
                 " \"columns\": [\"a\", \"b\\\"\", \"c\"],\n"
                 " \"rows\": [\n"
                 "  {\"a\": \"\\\"\\\\\\u0008\\n\\t\\u001f\\u007f\", \"b\\\"\": \"caf\xc3\xa9\", "
                 "\"c\": \"\xef\xbf\xbd.\"}\n"
                 " ],\n"
                 " \"notes\": {\"seed\": \"7\", \"stopped\": \"line 1\\nline 2\"}}\n");
}
END_TEST

START_TEST(test_json_no_rows)
{
    expect_table(IDS_FORMAT_JSON, columns, 1, NULL, 0, NULL,
                 "{\"task\": \"rank\",\n \"columns\": [\"degree\"],\n \"rows\": [\n ],\n"
                 " \"notes\": {}}\n");
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("render_machine");
    TCase *tcase = tcase_create("machine");

    tcase_add_test(tcase, test_csv_plain);
    tcase_add_test(tcase, test_csv_quotes);
    tcase_add_test(tcase, test_csv_one_empty_field);
    tcase_add_test(tcase, test_csv_repairs);
    tcase_add_test(tcase, test_csv_no_rows);
    tcase_add_test(tcase, test_json_rows);
    tcase_add_test(tcase, test_json_strings);
    tcase_add_test(tcase, test_json_no_rows);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
