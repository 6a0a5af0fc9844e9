/* SPDX-License-Identifier: BSD-2-Clause */
/* Text buffers: growth, printf at and beside the border of the buffer, handing out. */
#include "support.h"

#include <string.h>

START_TEST(test_empty)
{
    ids_ctx *ctx = test_ctx();
    idsi_text text;
    char *string = NULL;

    idsi_text_init(&text, ctx);
    idsi_text_clear(&text);
    TEST_OK(ctx, idsi_text_take(&text, &string));
    ck_assert_str_eq(string, "");
    ck_assert_ptr_null(text.data);
    ids_string_free(ctx, string);
    ids_string_free(ctx, NULL);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_appends)
{
    ids_ctx *ctx = test_ctx();
    idsi_text text;
    char *string = NULL;

    idsi_text_init(&text, ctx);
    TEST_OK(ctx, idsi_text_puts(&text, "a*b"));
    TEST_OK(ctx, idsi_text_append(&text, " = xyz", 3));
    TEST_OK(ctx, idsi_text_append(&text, "", 0));
    TEST_OK(ctx, idsi_text_printf(&text, "%d %s", -7, "c"));
    ck_assert_str_eq(text.data, "a*b = -7 c");
    ck_assert_uint_eq(text.length, strlen("a*b = -7 c"));
    TEST_OK(ctx, idsi_text_take(&text, &string));
    ck_assert_str_eq(string, "a*b = -7 c");
    ck_assert_uint_eq(text.length, 0);
    ids_string_free(ctx, string);
    test_ctx_free(ctx);
}
END_TEST

/* The buffer grows at powers of two: lengths on both sides of several of them. */
START_TEST(test_growth)
{
    static const size_t lengths[] = {62, 63, 64, 65, 127, 128, 129, 255, 256, 1023, 1024, 5000};
    ids_ctx *ctx = test_ctx();
    char filler[5001];

    memset(filler, 'x', sizeof filler);
    for (size_t i = 0; i < sizeof lengths / sizeof lengths[0]; i++) {
        idsi_text text;

        filler[lengths[i]] = '\0';
        idsi_text_init(&text, ctx);
        TEST_OK(ctx, idsi_text_printf(&text, "%s", filler));
        ck_assert_uint_eq(text.length, lengths[i]);
        ck_assert_str_eq(text.data, filler);
        TEST_OK(ctx, idsi_text_puts(&text, "y"));
        ck_assert_uint_eq(strlen(text.data), lengths[i] + 1);
        ck_assert_int_eq(text.data[lengths[i]], 'y');
        idsi_text_clear(&text);
        filler[lengths[i]] = 'x';
    }
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_too_long)
{
    ids_ctx *ctx = test_ctx();
    idsi_text text;

    idsi_text_init(&text, ctx);
    TEST_OK(ctx, idsi_text_puts(&text, "keep"));
    TEST_STATUS(ctx, idsi_text_append(&text, "", SIZE_MAX), IDS_ERR_LIMIT);
    TEST_STATUS(ctx, idsi_text_append(&text, "", SIZE_MAX - 5), IDS_ERR_LIMIT);
    ck_assert_str_eq(text.data, "keep");
    idsi_text_clear(&text);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("core: text");
    TCase *tcase = tcase_create("text");

    tcase_add_test(tcase, test_empty);
    tcase_add_test(tcase, test_appends);
    tcase_add_test(tcase, test_growth);
    tcase_add_test(tcase, test_too_long);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
