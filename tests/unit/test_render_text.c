/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Aligned text. Expected texts are drawn by hand from what render.h promises.
 */
#include <stdio.h>

#include "render_capture.h"

static const ids_column columns[] = {
    {"degree", IDS_COLUMN_NUMBER, 0},
    {"type", IDS_COLUMN_MATH, 0},
    {"n", IDS_COLUMN_NUMBER, 5},
};

START_TEST(test_aligned)
{
    static const char *const cells[] = {"1", "x", "1", "12", "(x*x)*x", "1234567"};
    static const char *const notes[] = {"seed", "0", "primes used", "7 11", NULL};

    expect_table(IDS_FORMAT_TEXT, columns, 3, cells, 2, notes,
                 "degree  type           n\n"
                 "------  -------  -------\n"
                 "     1  x              1\n"
                 "    12  (x*x)*x  1234567\n"
                 "\n"
                 "seed:        0\n"
                 "primes used: 7 11\n");
}
END_TEST

START_TEST(test_no_blanks_at_line_end)
{
    static const char *const cells[] = {"1", "x", "2", ""};

    expect_table(IDS_FORMAT_TEXT, columns, 2, cells, 2, NULL,
                 "degree  type\n"
                 "------  ----\n"
                 "     1  x\n"
                 "     2\n");
}
END_TEST

START_TEST(test_no_rows)
{
    expect_table(IDS_FORMAT_TEXT, columns, 3, NULL, 0, NULL,
                 "degree  type      n\n"
                 "------  ----  -----\n");
}
END_TEST

/* e acute is one column and two bytes, U+4E2D two columns, e with U+0301 one. */
START_TEST(test_width_of_characters)
{
    static const char *const cells[] = {"1",
                                        "\xc3\xa9\xc3\xa9\xc3\xa9\xc3\xa9\xc3\xa9",
                                        "1",
                                        "1",
                                        "\xe4\xb8\xad",
                                        "1",
                                        "1",
                                        "e\xcc\x81",
                                        "1"};

    expect_table(IDS_FORMAT_TEXT, columns, 3, cells, 3, NULL,
                 "degree  type       n\n"
                 "------  -----  -----\n"
                 "     1  \xc3\xa9\xc3\xa9\xc3\xa9\xc3\xa9\xc3\xa9      1\n"
                 "     1  \xe4\xb8\xad         1\n"
                 "     1  e\xcc\x81          1\n");
}
END_TEST

/* A control character must not move the cursor of a terminal. */
START_TEST(test_control_characters)
{
    static const char *const cells[] = {"1", "a\tb\x1b[1m", "1"};

    expect_table(IDS_FORMAT_TEXT, columns, 3, cells, 1, NULL,
                 "degree  type         n\n"
                 "------  -------  -----\n"
                 "     1  a b [1m      1\n");
}
END_TEST

/* Counts lines and bytes instead of keeping them. */
typedef struct tally {
    uint64_t lines;
    uint64_t bytes;
    char last[128];
} tally;

static int tally_sink(void *user, const char *bytes, size_t length)
{
    tally *seen = user;

    for (size_t i = 0; i < length; i++) {
        seen->lines += bytes[i] == '\n';
    }
    seen->bytes += length;
    if (length < sizeof seen->last) {
        memcpy(seen->last, bytes, length);
        seen->last[length] = '\0';
    }
    return 0;
}

START_TEST(test_stream_in_constant_memory)
{
    static const uint64_t rows = 300000;
    ids_ctx *ctx = test_ctx();
    ids_writer *writer = NULL;
    tally seen = {0};
    uint64_t early = 0;
    uint64_t refused = 0; /* an assertion for each row would take seconds */

    TEST_OK(ctx, ids_writer_create(ctx, IDS_FORMAT_TEXT, "basis", columns, 3, tally_sink, &seen,
                                   &writer));
    for (uint64_t i = 0; i < rows; i++) {
        char index[24];
        snprintf(index, sizeof index, "%u", (unsigned)i);
        refused += ids_writer_row(writer, (const char *[]){"9", "x*x", index}) != IDS_OK;
        if (i == 2000) {
            early = ids_ctx_memory(ctx).peak;
            ck_assert_uint_gt(seen.lines, 1000);
        }
    }
    ck_assert_uint_eq(refused, 0);
    TEST_OK(ctx, ids_writer_end(writer));
    ck_assert_uint_eq(seen.lines, rows + 2);
    ck_assert_uint_eq(ids_ctx_memory(ctx).peak, early);
    /* The last number has outgrown its column, which has grown with it. */
    ck_assert_str_eq(seen.last, "     9  x*x   299999\n");
    ids_writer_free(writer);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("render_text");
    TCase *tcase = tcase_create("text");

    tcase_add_test(tcase, test_aligned);
    tcase_add_test(tcase, test_no_blanks_at_line_end);
    tcase_add_test(tcase, test_no_rows);
    tcase_add_test(tcase, test_width_of_characters);
    tcase_add_test(tcase, test_control_characters);
    tcase_add_test(tcase, test_stream_in_constant_memory);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
