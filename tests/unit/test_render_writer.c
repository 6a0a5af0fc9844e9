/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The writer itself: arguments, notes, sinks that fail, memory that is refused. What is expected
 * is what render.h says.
 */
#include "render_capture.h"

static const ids_column columns[] = {
    {"degree", IDS_COLUMN_NUMBER, 0},
    {"type", IDS_COLUMN_MATH, 0},
};

static const ids_format formats[] = {IDS_FORMAT_TEXT, IDS_FORMAT_CSV, IDS_FORMAT_JSON,
                                     IDS_FORMAT_LATEX};

START_TEST(test_create_arguments)
{
    static const ids_column nameless[] = {{NULL, IDS_COLUMN_TEXT, 0}};
    static const ids_column empty[] = {{"", IDS_COLUMN_TEXT, 0}};
    static const ids_column twins[] = {{"a", IDS_COLUMN_TEXT, 0}, {"a", IDS_COLUMN_TEXT, 0}};
    static const ids_column odd[] = {{"a", (ids_column_kind)9, 0}};
    static capture seen;
    ids_ctx *ctx = test_ctx();
    ids_writer *writer = NULL;

#define REFUSED(format, task, list, count, sink)                                              \
    TEST_STATUS(ctx, ids_writer_create(ctx, format, task, list, count, sink, &seen, &writer), \
                IDS_ERR_ARG)
    REFUSED((ids_format)4, "t", columns, 2, capture_sink);
    REFUSED(IDS_FORMAT_CSV, NULL, columns, 2, capture_sink);
    REFUSED(IDS_FORMAT_CSV, "t", NULL, 2, capture_sink);
    REFUSED(IDS_FORMAT_CSV, "t", columns, 0, capture_sink);
    REFUSED(IDS_FORMAT_CSV, "t", columns, 2, NULL);
    REFUSED(IDS_FORMAT_CSV, "t", nameless, 1, capture_sink);
    REFUSED(IDS_FORMAT_CSV, "t", empty, 1, capture_sink);
    REFUSED(IDS_FORMAT_CSV, "t", twins, 2, capture_sink);
    REFUSED(IDS_FORMAT_CSV, "t", odd, 1, capture_sink);
#undef REFUSED
    ck_assert_int_eq(
        ids_writer_create(NULL, IDS_FORMAT_CSV, "t", columns, 2, capture_sink, &seen, &writer),
        IDS_ERR_ARG);
    TEST_STATUS(ctx,
                ids_writer_create(ctx, IDS_FORMAT_CSV, "t", columns, 2, capture_sink, &seen, NULL),
                IDS_ERR_ARG);
    ck_assert_ptr_null(writer);
    ck_assert_uint_eq(seen.calls, 0);
    ck_assert_int_eq(ids_writer_row(NULL, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_writer_note(NULL, "a", "b"), IDS_ERR_ARG);
    ck_assert_int_eq(ids_writer_note_list(NULL, "a", NULL, 0), IDS_ERR_ARG);
    ck_assert_int_eq(ids_writer_end(NULL), IDS_ERR_ARG);
    ids_writer_free(NULL);
    test_ctx_free(ctx);
}
END_TEST

/* A number is an integer as RFC 8259 (section 6) writes it. */
START_TEST(test_numbers)
{
    static const char *const good[] = {"", "0", "7", "-7", "10", "18446744073709551616"};
    static const char *const bad[] = {"-", "01", "1.5", "1e3", " 1", "1 ", "+1", "x", "0x1"};
    ids_ctx *ctx = test_ctx();
    ids_writer *writer = NULL;
    static capture seen;

    TEST_OK(ctx,
            ids_writer_create(ctx, IDS_FORMAT_JSON, "t", columns, 2, capture_sink, &seen, &writer));
    for (size_t i = 0; i < sizeof good / sizeof good[0]; i++) {
        TEST_OK(ctx, ids_writer_row(writer, (const char *[]){good[i], ""}));
    }
    for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
        TEST_STATUS(ctx, ids_writer_row(writer, (const char *[]){bad[i], ""}), IDS_ERR_ARG);
    }
    TEST_STATUS(ctx, ids_writer_row(writer, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_row(writer, (const char *[]){"1", NULL}), IDS_ERR_ARG);
    /* Nothing of the refused rows is in the table, which goes on. */
    TEST_OK(ctx, ids_writer_row(writer, (const char *[]){"8", "x"}));
    TEST_OK(ctx, ids_writer_end(writer));
    ck_assert_ptr_nonnull(strstr(seen.text, "18446744073709551616, \"type\": \"\"},\n"
                                            "  {\"degree\": 8, \"type\": \"x\"}\n ]"));
    ids_writer_free(writer);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_after_the_end)
{
    ids_ctx *ctx = test_ctx();
    ids_writer *writer = NULL;
    static capture seen;
    size_t length = 0;

    TEST_OK(ctx,
            ids_writer_create(ctx, formats[_i], "t", columns, 2, capture_sink, &seen, &writer));
    TEST_OK(ctx, ids_writer_note(writer, "a", "1"));
    TEST_STATUS(ctx, ids_writer_note(writer, "a", "2"), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_note(writer, "", "2"), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_note(writer, NULL, "2"), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_note(writer, "b", NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_note_list(writer, "b", NULL, 1), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_note_list(writer, "b", (const char *[]){"1", NULL}, 2),
                IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_note_list(writer, "a", (const char *[]){"1"}, 1), IDS_ERR_ARG);
    TEST_OK(ctx, ids_writer_note_list(writer, "none", NULL, 0));
    TEST_OK(ctx, ids_writer_note_list(writer, "two", (const char *[]){"1", "x"}, 2));
    TEST_OK(ctx, ids_writer_end(writer));
    static const char *const lists[] = {
        [IDS_FORMAT_TEXT] = "none:\ntwo:  1, x\n",
        [IDS_FORMAT_CSV] = "",
        [IDS_FORMAT_JSON] = "\"none\": [], \"two\": [\"1\", \"x\"]}}\n",
        [IDS_FORMAT_LATEX] = "% none\n% two: 1, x\n",
    };
    const char *list = lists[formats[_i]];
    length = seen.length;
    ck_assert_uint_ge(length, strlen(list));
    ck_assert_int_eq(memcmp(seen.text + length - strlen(list), list, strlen(list)), 0);
    TEST_STATUS(ctx, ids_writer_end(writer), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_row(writer, (const char *[]){"1", "x"}), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_writer_note(writer, "b", "2"), IDS_ERR_ARG);
    ck_assert_uint_eq(seen.length, length);
    ids_writer_free(writer);
    test_ctx_free(ctx);
}
END_TEST

/* Writes a table that is long enough for text to flow; the first status that is not IDS_OK. */
static ids_status write_all(ids_ctx *ctx, ids_format format, capture *seen, ids_writer **writer)
{
    ids_status st = ids_writer_create(ctx, format, "types", columns, 2, capture_sink, seen, writer);

    int rows = format == IDS_FORMAT_TEXT ? 420 : 20;

    for (int i = 0; st == IDS_OK && i < rows; i++) {
        st = ids_writer_row(*writer, (const char *[]){"4", "{x,(x*x)}"});
    }
    if (st == IDS_OK) {
        st = ids_writer_note(*writer, "seed", "1");
    }
    if (st == IDS_OK) {
        st = ids_writer_note_list(*writer, "partitions", (const char *[]){"3", "2+1"}, 2);
    }
    return st == IDS_OK ? ids_writer_end(*writer) : st;
}

/* The sink fails at the first call, the second, ... until there are no more calls. */
START_TEST(test_sink_fails)
{
    static capture seen;
    bool failed = true;

    for (uint64_t at = 1; failed; at++) {
        ids_ctx *ctx = test_ctx();
        ids_writer *writer = NULL;
        memset(&seen, 0, sizeof seen);
        seen.fail_at = at;
        ids_status st = write_all(ctx, formats[_i], &seen, &writer);
        failed = seen.calls >= at;
        ck_assert_int_eq(st, failed ? IDS_ERR_IO : IDS_OK);
        if (failed && writer != NULL) {
            /* A table with a hole in it is never ended as if it were whole. */
            TEST_STATUS(ctx, ids_writer_row(writer, (const char *[]){"1", ""}), IDS_ERR_IO);
            TEST_STATUS(ctx, ids_writer_end(writer), IDS_ERR_IO);
            ck_assert_uint_eq(seen.calls, at);
        }
        ids_writer_free(writer);
        test_ctx_free(ctx);
    }
}
END_TEST

static ids_status write_and_free(ids_ctx *ctx, void *format)
{
    static capture seen;
    ids_writer *writer = NULL;

    memset(&seen, 0, sizeof seen);
    ids_status st = write_all(ctx, *(const ids_format *)format, &seen, &writer);
    ids_writer_free(writer);
    return st;
}

START_TEST(test_refused_memory)
{
    ids_format format = formats[_i];

    TEST_OOM(write_and_free, &format);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("render_writer");
    TCase *tcase = tcase_create("writer");

    tcase_add_test(tcase, test_create_arguments);
    tcase_add_test(tcase, test_numbers);
    tcase_add_loop_test(tcase, test_after_the_end, 0, 4);
    tcase_add_loop_test(tcase, test_sink_fails, 0, 4);
    tcase_add_loop_test(tcase, test_refused_memory, 0, 4);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
