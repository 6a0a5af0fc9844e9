/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * How operations may be written. A signature takes what the reader of presentations takes, and
 * nothing else: each notation is tried both ways.
 */
#include <idspan/idspan.h>
#include <stdio.h>
#include <string.h>

#include "support.h"

typedef struct sample {
    ids_notation notation;
    const char *open;
    const char *close;
    const char *message; /* a part of it; NULL: taken */
} sample;

#define LONG_NAME "a23456789_123456789_123456789_123456789_123456789_123456789_123"
#define SYMBOL "the symbol of an infix operation is"
#define NAME "a name is"
#define FENCES "the fences are"

static const sample samples[] = {
    {IDS_NOTATION_INFIX, "*", NULL, NULL},
    {IDS_NOTATION_INFIX, "**", NULL, NULL},
    {IDS_NOTATION_INFIX, "/", NULL, NULL},
    {IDS_NOTATION_INFIX, "o", NULL, NULL},
    {IDS_NOTATION_INFIX, "x1", NULL, NULL},
    {IDS_NOTATION_INFIX, "_", NULL, NULL},
    {IDS_NOTATION_INFIX, "\xE2\x88\x98", NULL, NULL}, /* U+2218, ring operator */
    {IDS_NOTATION_INFIX, LONG_NAME, NULL, NULL},
    {IDS_NOTATION_INFIX, LONG_NAME "4", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "", NULL, "no symbol"},
    {IDS_NOTATION_INFIX, "+", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "-", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "=", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, ":", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "#", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, ",", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "(", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "\"", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "->", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "1", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "2", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "*a", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "\xE2\x88\x92", NULL, SYMBOL}, /* U+2212, minus sign */
    {IDS_NOTATION_INFIX, " ", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "* *", NULL, SYMBOL},
    {IDS_NOTATION_INFIX, "*\x01", NULL, "no visible UTF-8"},
    {IDS_NOTATION_INFIX, "\xFF\xFE", NULL, "no visible UTF-8"},
    {IDS_NOTATION_INFIX, "none", NULL, SYMBOL},
    {IDS_NOTATION_PREFIX, "t", NULL, NULL},
    {IDS_NOTATION_PREFIX, "T_1'", NULL, NULL},
    {IDS_NOTATION_PREFIX, "\xCE\xB1", NULL, NULL}, /* U+03B1, alpha */
    {IDS_NOTATION_PREFIX, LONG_NAME "4", NULL, NAME},
    {IDS_NOTATION_PREFIX, "t u", NULL, NAME},
    {IDS_NOTATION_PREFIX, "t(", NULL, NAME},
    {IDS_NOTATION_PREFIX, "1", NULL, NAME},
    {IDS_NOTATION_PREFIX, "'t", NULL, NAME},
    {IDS_NOTATION_PREFIX, "+", NULL, NAME},
    {IDS_NOTATION_PREFIX, "*", NULL, NAME},
    {IDS_NOTATION_PREFIX, "model", NULL, NAME},
    {IDS_NOTATION_PREFIX, "t\xFF", NULL, "no visible UTF-8"},
    {IDS_NOTATION_FENCE, "(", ")", NULL},
    {IDS_NOTATION_FENCE, "[", "]", NULL},
    {IDS_NOTATION_FENCE, "{", "}", NULL},
    {IDS_NOTATION_FENCE, "<", ">", NULL},
    {IDS_NOTATION_FENCE, "(", "]", FENCES},
    {IDS_NOTATION_FENCE, "(", "(", FENCES},
    {IDS_NOTATION_FENCE, "((", "))", FENCES},
    {IDS_NOTATION_FENCE, ")", "(", FENCES},
    {IDS_NOTATION_FENCE, "a", "b", FENCES},
    {IDS_NOTATION_FENCE, "(", "", FENCES},
};

static ids_operation operation_of(const sample *s)
{
    return (ids_operation){.notation = s->notation, .open = s->open, .close = s->close, .arity = 2};
}

START_TEST(test_notation)
{
    const sample *s = &samples[_i];
    const ids_operation op = operation_of(s);
    ids_ctx *ctx = test_ctx();
    ids_signature *sig = NULL;

    ids_status st = ids_signature_create(ctx, &op, 1, &sig);
    ck_assert_msg(st == (s->message == NULL ? IDS_OK : IDS_ERR_ARG), "'%s' gives %s", s->open,
                  ids_status_name(st));
    if (s->message != NULL) {
        ck_assert_ptr_null(sig);
        ck_assert_msg(strstr(ids_ctx_message(ctx), s->message) != NULL, "%s", ids_ctx_message(ctx));
    }
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* The same operation in a presentation. */
START_TEST(test_reader_agrees)
{
    const sample *s = &samples[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    char text[200];

    if (s->notation == IDS_NOTATION_INFIX) {
        snprintf(text, sizeof text, "operation y %s z\n", s->open);
    } else {
        snprintf(text, sizeof text, "operation %s%sy,z%s\n", s->open,
                 s->notation == IDS_NOTATION_PREFIX ? "(" : "",
                 s->notation == IDS_NOTATION_PREFIX ? ")" : s->close);
    }
    ids_status st = ids_presentation_read(ctx, text, strlen(text), NULL, &pres);
    ck_assert_msg((st == IDS_OK) == (s->message == NULL), "%s: %s", text, ids_ctx_message(ctx));
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_closing)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *sig = NULL;
    ids_operation op = {.notation = IDS_NOTATION_FENCE, .open = "(", .arity = 2};

    TEST_STATUS(ctx, ids_signature_create(ctx, &op, 1, &sig), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "a fence needs a closing symbol"));
    op = (ids_operation){.open = "*", .close = ")", .arity = 2};
    TEST_STATUS(ctx, ids_signature_create(ctx, &op, 1, &sig), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "only a fence has a closing symbol"));
    op = (ids_operation){.notation = (ids_notation)9, .open = "*", .arity = 2};
    TEST_STATUS(ctx, ids_signature_create(ctx, &op, 1, &sig), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "no such notation"));
    ck_assert_ptr_null(sig);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    const int count = (int)(sizeof samples / sizeof samples[0]);
    Suite *s = suite_create("tree_signature");
    TCase *tcase = tcase_create("signature");

    tcase_add_loop_test(tcase, test_notation, 0, count);
    tcase_add_loop_test(tcase, test_reader_agrees, 0, count);
    tcase_add_test(tcase, test_closing);
    suite_add_tcase(s, tcase);
    return s;
}

int main(void)
{
    return test_run(suite());
}
