/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the reader says of broken algebra files: status, place, message, and a caret below the right
 * character. The table is in broken/broken_algebras.c.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/algebra.h>

#include "broken/broken.h"
#include "support.h"

static size_t characters(const char *text)
{
    size_t n = 0;
    for (; *text != '\0'; text++) {
        n += ((unsigned char)*text & 0xC0u) != 0x80u;
    }
    return n;
}

START_TEST(test_table)
{
    const broken *b = &broken_algebras[_i];
    const size_t length = strlen(b->text);
    ids_ctx *ctx = test_ctx();
    ids_algebra *algebra = NULL;
    char *copy = malloc(length + 1);
    char begin[64];

    ck_assert_ptr_nonnull(copy);
    memcpy(copy, b->text, length + 1);
    const ids_status st = ids_algebra_read(ctx, copy, length, "t.alg", &algebra);
    const char *message = ids_ctx_message(ctx);
    const ids_place place = ids_ctx_last_place(ctx);
    free(copy);
    ck_assert_ptr_null(algebra);
    ck_assert_msg(st == b->status, "entry %d: %s: %s", _i, ids_status_name(st), message);
    ck_assert_msg(place.line == b->line && place.column == b->column,
                  "entry %d: %u:%u, not %u:%u: %s", _i, place.line, place.column, b->line,
                  b->column, message);
    ck_assert_msg(strstr(message, b->part) != NULL, "entry %d: '%s' is not in: %s", _i, b->part,
                  message);
    (void)snprintf(begin, sizeof begin, "t.alg:%u:%u: ", b->line, b->column);
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

/* The first 256 names of a basis. */
START_TEST(test_too_large)
{
    ids_ctx *ctx = test_ctx();
    ids_algebra *algebra = NULL;
    idsi_text text;

    idsi_text_init(&text, ctx);
    TEST_OK(ctx, idsi_text_puts(&text, "operation a*b\nbasis"));
    for (uint32_t i = 0; i < IDS_MAX_DIMENSION + 1; i++) {
        TEST_OK(ctx, idsi_text_printf(&text, " x%u", i));
    }
    TEST_STATUS(ctx, ids_algebra_read(ctx, text.data, text.length, NULL, &algebra), IDS_ERR_LIMIT);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).line, 2);
    text.length -= 5;
    TEST_OK(ctx, ids_algebra_read(ctx, text.data, text.length, NULL, &algebra));
    ck_assert_uint_eq(ids_algebra_dimension(algebra), IDS_MAX_DIMENSION);
    ids_algebra_free(algebra);
    idsi_text_clear(&text);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("broken algebras");
    TCase *tcase = tcase_create("broken");

    tcase_add_loop_test(tcase, test_table, 0, (int)broken_algebra_count);
    tcase_add_test(tcase, test_too_large);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
