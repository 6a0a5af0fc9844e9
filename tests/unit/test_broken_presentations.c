/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the reader says of broken presentations: status, place, message, and a caret below the
 * right character. The table is in broken/broken_table.c.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/identity.h>

#include "broken/broken.h"
#include "support.h"

/* Characters, not bytes. */
static size_t characters(const char *text)
{
    size_t n = 0;
    for (; *text != '\0'; text++) {
        n += ((unsigned char)*text & 0xC0u) != 0x80u;
    }
    return n;
}

static ids_status read_broken(ids_ctx *ctx, const char *text, size_t length)
{
    /* An exact copy, so that a sanitizer sees a read beyond the end. */
    char *copy = malloc(length == 0 ? 1 : length);
    ids_presentation *pres = NULL;
    ck_assert_ptr_nonnull(copy);
    memcpy(copy, text, length);
    ids_status st = ids_presentation_read(ctx, copy, length, "t.pres", &pres);
    free(copy);
    ck_assert_ptr_null(pres);
    return st;
}

START_TEST(test_table)
{
    const broken *b = &broken_table[_i];
    const size_t length = b->length != 0 ? b->length : strlen(b->text);
    ids_ctx *ctx = test_ctx();
    char begin[64];
    const ids_status st = read_broken(ctx, b->text, length);
    const char *message = ids_ctx_message(ctx);
    const ids_place place = ids_ctx_last_place(ctx);
    ck_assert_msg(st == b->status, "entry %d: %s: %s", _i, ids_status_name(st), message);
    ck_assert_msg(place.line == b->line && place.column == b->column,
                  "entry %d: %u:%u, not %u:%u: %s", _i, place.line, place.column, b->line,
                  b->column, message);
    ck_assert_msg(strstr(message, b->part) != NULL, "entry %d: '%s' is not in: %s", _i, b->part,
                  message);
    (void)snprintf(begin, sizeof begin, "t.pres:%u:%u: ", b->line, b->column);
    ck_assert_msg(strncmp(message, begin, strlen(begin)) == 0, "entry %d: %s", _i, message);
    const char *caret = strrchr(message, '\n');
    if (length == 0) {
        ck_assert_ptr_null(caret); /* there is no line to point at */
        test_ctx_free(ctx);
        return;
    }
    ck_assert_msg(caret != NULL && caret[strlen(caret) - 1] == '^', "entry %d: %s", _i, message);
    ck_assert_msg(characters(caret + 1) == b->column, "entry %d: caret: %s", _i, message);
    test_ctx_free(ctx);
}
END_TEST

/* The same with a byte order mark and with CRLF line ends: nothing moves. */
START_TEST(test_windows_text)
{
    const broken *b = &broken_table[_i];
    ids_ctx *ctx = test_ctx();
    char text[1024] = "\xEF\xBB\xBF";
    size_t n = 3;
    const size_t length = b->length != 0 ? b->length : strlen(b->text);
    ck_assert_uint_lt(2 * length + 3, sizeof text);
    for (size_t i = 0; i < length; i++) {
        if (b->text[i] == '\n') {
            text[n++] = '\r';
        }
        text[n++] = b->text[i];
    }
    const ids_status st = read_broken(ctx, text, n);
    const ids_place place = ids_ctx_last_place(ctx);
    ck_assert_msg(st == b->status && place.line == b->line && place.column == b->column,
                  "entry %d: %s", _i, ids_ctx_message(ctx));
    test_ctx_free(ctx);
}
END_TEST

/* The excerpt of a long line is a window around the place. */
START_TEST(test_long_line)
{
    ids_ctx *ctx = test_ctx();
    char text[4000] = "operation a*b\nidentity ";
    while (strlen(text) < 1500) {
        strcat(text, "x*x + ");
    }
    const size_t column = strlen(text) - strlen("operation a*b\n") + 2;
    strcat(text, "y;z + ");
    while (strlen(text) < 3000) {
        strcat(text, "x*x + ");
    }
    strcat(text, "x*x\n");
    ck_assert_int_eq(read_broken(ctx, text, strlen(text)), IDS_ERR_PARSE);
    const char *message = ids_ctx_message(ctx);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).column, column);
    const char *caret = strrchr(message, '\n');
    ck_assert_ptr_nonnull(caret);
    const char *line = caret - 1;
    while (line[-1] != '\n') {
        line--;
    }
    ck_assert_uint_le((size_t)(caret - line), 100);
    ck_assert_int_eq(line[strlen(caret + 1) - 1], ';');
    ck_assert_int_eq(strncmp(line, "...", 3), 0);
    ck_assert_int_eq(strncmp(caret - 3, "...", 3), 0);
    test_ctx_free(ctx);
}
END_TEST

/* The caret stands below its character in lines with tabs, because tabs are repeated. */
START_TEST(test_tabs)
{
    ids_ctx *ctx = test_ctx();
    const char *text = "operation a*b\nidentity\tx*\ty;z\n";
    ck_assert_int_eq(read_broken(ctx, text, strlen(text)), IDS_ERR_PARSE);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "\nidentity\tx*\ty;z\n        \t  \t ^"));
    test_ctx_free(ctx);
}
END_TEST

/* Sizes that would be long in the table. */
static void expect_limit(const char *text, uint32_t line, uint32_t column, const char *part)
{
    ids_ctx *ctx = test_ctx();
    TEST_STATUS(ctx, read_broken(ctx, text, strlen(text)), IDS_ERR_LIMIT);
    ck_assert_msg(ids_ctx_last_place(ctx).line == line &&
                      ids_ctx_last_place(ctx).column == column &&
                      strstr(ids_ctx_message(ctx), part) != NULL,
                  "%s", ids_ctx_message(ctx));
    test_ctx_free(ctx);
}

static void nest(char *text, size_t depth)
{
    strcpy(text, "operation a*b\nidentity ");
    const size_t n = strlen(text);
    memset(text + n, '(', depth);
    text[n + depth] = 'x';
    memset(text + n + depth + 1, ')', depth);
    text[n + 2 * depth + 1] = '\0';
}

START_TEST(test_nesting)
{
    static char text[400000];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    nest(text, 250);
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    ids_presentation_free(pres);
    nest(text, 251);
    expect_limit(text, 2, 10 + 250, "fences nested deeper than 250");
    nest(text, 100000);
    expect_limit(text, 2, 10 + 250, "fences nested deeper than 250");
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_long_numbers_and_names)
{
    static char text[30000];
    ids_ctx *ctx = test_ctx();
    strcpy(text, "operation a*b\nidentity 7");
    memset(text + strlen(text), '0', 9999);
    strcat(text, "*x\n");
    ids_presentation *pres = NULL;
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    ids_presentation_free(pres);

    memset(text, 0, sizeof text);
    strcpy(text, "operation a*b\nidentity 7");
    memset(text + strlen(text), '0', 10000);
    strcat(text, "*x\n");
    expect_limit(text, 2, 10, "a number with 10001 digits; at most 10000");

    memset(text, 0, sizeof text);
    strcpy(text, "operation a*b\nidentity x*");
    memset(text + strlen(text), 'y', 63);
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    ids_presentation_free(pres);
    strcat(text, "y");
    expect_limit(text, 2, 12, "a name of 64 bytes; at most 63");
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_big_expansions)
{
    /* 6^9 > 4,000,000 terms; said before any is made. */
    expect_limit("operation a*b\n"
                 "define s(a,b,c,d,e,f) = (a+b+c+d+e+f)*((a+b+c+d+e+f)*(a+b+c+d+e+f))\n"
                 "define p(x,y,z) = (x*y)*z\n"
                 "identity p(s(a,b,c,d,e,f),s(a,b,c,d,e,f),s(a,b,c,d,e,f))\n",
                 4, 10, "a product that expands to more than 4000000 terms");
    /* a4 multiplies by 2^65536, so two of them, counted from the inside, are too much. */
    expect_limit("operation a*b\n"
                 "define a1(x) = 340282366920938463463374607431768211456*x\n"
                 "define a2(x) = a1(a1(a1(a1(a1(a1(a1(a1(x))))))))\n"
                 "define a3(x) = a2(a2(a2(a2(a2(a2(a2(a2(x))))))))\n"
                 "define a4(x) = a3(a3(a3(a3(a3(a3(a3(a3(x))))))))\n"
                 "define a5(x) = a4(a4(a4(a4(a4(a4(a4(a4(x))))))))\n"
                 "identity a5(x)\n",
                 6, 34, "a coefficient with more than 131072 bits");
    /* 16!/2 different products of 16 factors. */
    ids_ctx *ctx = NULL;
    const ids_ctx_options options = {.struct_size = sizeof options, .byte_budget = 20000000};
    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    const char *text = "operation a*b commutative\n"
                       "define p(x,y) = (((y*x)*x)*x)*x\n"
                       "identity p(x,p(x,p(x,x*x)*x))\n";
    ids_presentation *pres = NULL;
    TEST_STATUS(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres), IDS_ERR_LIMIT);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).line, 3);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).column, 1);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_many_operations)
{
    static char text[8000];
    ids_ctx *ctx = test_ctx();
    for (int i = 1; i <= 64; i++) {
        char line[64];
        (void)snprintf(line, sizeof line, "operation t%d(a,b)\n", i);
        strcat(text, line);
    }
    ids_presentation *pres = NULL;
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    ck_assert_uint_eq(ids_signature_count(ids_presentation_signature(pres)), 64);
    ids_presentation_free(pres);
    strcat(text, "operation [a,b]\n");
    expect_limit(text, 65, 11, "more than 64 operations");
    test_ctx_free(ctx);
}
END_TEST

/* Every prefix of a good file and every file with one byte changed: any answer, no accident. */
START_TEST(test_mutations)
{
    static const char text[] = "operation a*b = b*a # c\noperation {a,b,c} = -{c,b,a}\n"
                               "operation a o b\ndefine f(x,y) = 1/2*(x*y)*y - {x,y,y}\n"
                               "identity n: f(x,x o y) = 0*f(y,x)\ncandidate -{x,y,z} + {z,y,x}\n";
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    char copy[sizeof text];
    test_random(&random, 1);
    const size_t n = sizeof text - 1;
    for (uint64_t round = 0; round < n + 1000 * test_scale(); round++) {
        size_t length = n;
        memcpy(copy, text, sizeof text);
        if (round < n) {
            length = (size_t)round;
        } else {
            const uint64_t changes = 1 + idsi_random_below(&random, 3);
            for (uint64_t i = 0; i < changes; i++) {
                static const char bytes[] = "()[]{}<>,:+-=#*./ \n\t0129xyof\x80\xC3\xE2\"'\r";
                copy[idsi_random_below(&random, n)] =
                    bytes[idsi_random_below(&random, sizeof bytes - 1)];
            }
        }
        ids_presentation *pres = NULL;
        const ids_status st = ids_presentation_read(ctx, copy, length, NULL, &pres);
        ck_assert(st == IDS_OK || ids_ctx_last_place(ctx).line > 0);
        ck_assert(st == IDS_OK || st == IDS_ERR_PARSE || st == IDS_ERR_LIMIT ||
                  st == IDS_ERR_DOMAIN);
        ids_presentation_free(pres);
    }
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("broken_presentations");
    TCase *table = tcase_create("table");
    tcase_add_loop_test(table, test_table, 0, (int)broken_count);
    tcase_add_loop_test(table, test_windows_text, 0, (int)broken_count);
    suite_add_tcase(s, table);
    TCase *other = tcase_create("other");
    tcase_set_timeout(other, 20);
    tcase_add_test(other, test_long_line);
    tcase_add_test(other, test_tabs);
    tcase_add_test(other, test_nesting);
    tcase_add_test(other, test_long_numbers_and_names);
    tcase_add_test(other, test_big_expansions);
    tcase_add_test(other, test_many_operations);
    tcase_add_test(other, test_mutations);
    suite_add_tcase(s, other);
    return s;
}

int main(void)
{
    return test_run(suite());
}
