/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * UTF-8. The bytes of the first and last character of each length, and the forms that are not
 * allowed, are those of RFC 3629, sections 3 and 4.
 */
#include "render_capture.h"

typedef struct sample {
    const char *bytes;
    uint32_t character;
} sample;

static const sample good[] = {
    {"\x01", 0x01},
    {"\x7f", 0x7F},
    {"\xc2\x80", 0x80},
    {"\xdf\xbf", 0x7FF},
    {"\xe0\xa0\x80", 0x800},
    {"\xed\x9f\xbf", 0xD7FF},
    {"\xee\x80\x80", 0xE000},
    {"\xef\xbf\xbf", 0xFFFF},
    {"\xf0\x90\x80\x80", 0x10000},
    {"\xf4\x8f\xbf\xbf", 0x10FFFF},
};

static const char *const bad[] = {
    "\x80",             /* continuation without a start */
    "\xc0\x80",         /* overlong */
    "\xc1\xbf",         /* overlong */
    "\xe0\x9f\xbf",     /* overlong */
    "\xf0\x8f\xbf\xbf", /* overlong */
    "\xed\xa0\x80",     /* surrogate */
    "\xf4\x90\x80\x80", /* beyond U+10FFFF */
    "\xf8\x88\x80\x80", /* five-byte form */
    "\xff",             /* never a start */
    "\xc3",             /* cut off */
    "\xe4\xb8",         /* cut off */
    "\xe4\x61",         /* broken by the letter a */
};

START_TEST(test_good)
{
    const char *at = good[_i].bytes;
    ids_ctx *ctx = test_ctx();
    idsi_text text;

    idsi_text_init(&text, ctx);
    ck_assert_uint_eq(idsi_utf8_next(&at), good[_i].character);
    ck_assert_int_eq(*at, '\0');
    TEST_OK(ctx, idsi_utf8_append(&text, good[_i].character));
    ck_assert_uint_eq(text.length, strlen(good[_i].bytes));
    ck_assert_mem_eq(text.data, good[_i].bytes, text.length);
    idsi_text_clear(&text);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_bad)
{
    const char *at = bad[_i];

    ck_assert_uint_eq(idsi_utf8_next(&at), IDSI_BAD_CHARACTER);
    ck_assert_ptr_eq(at, bad[_i] + 1);
}
END_TEST

/* Widths from Unicode Standard Annex 11, from memory. */
START_TEST(test_width)
{
    ck_assert_uint_eq(idsi_utf8_width(""), 0);
    ck_assert_uint_eq(idsi_utf8_width("abc"), 3);
    ck_assert_uint_eq(idsi_utf8_width("\xc3\xa9"), 1);
    ck_assert_uint_eq(idsi_utf8_width("e\xcc\x81"), 1);
    ck_assert_uint_eq(idsi_utf8_width("\xe4\xb8\xad\xe6\x96\x87"), 4);
    ck_assert_uint_eq(idsi_utf8_width("\xff\xff"), 2);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("render_utf8");
    TCase *tcase = tcase_create("utf8");

    tcase_add_loop_test(tcase, test_good, 0, (int)(sizeof good / sizeof good[0]));
    tcase_add_loop_test(tcase, test_bad, 0, (int)(sizeof bad / sizeof bad[0]));
    tcase_add_test(tcase, test_width);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
