/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Random presentations. A text that is put together here term by term must read as the polynomial
 * that is put together from the same terms without any text; and what is printed must read as the
 * same presentation.
 */
#include <gmp.h>
#include <stdio.h>
#include <string.h>

#include "random_identity.h"

static const char *const names[] = {"v1", "v2", "v3", "v4", "v5", "v6", "v7", "v8", "v9", "v10"};

static bool flip(idsi_random *random)
{
    return idsi_random_below(random, 2) == 0;
}

/* A term as a person might write it: coefficient with or without "*", blanks here and there. */
static void write_term(idsi_random *random, const idsi_poly *poly, size_t i, bool negate,
                       idsi_text *text)
{
    char number[64];
    const bool negative = (mpq_sgn(poly->coefficients[i]) < 0) != negate;
    (void)gmp_snprintf(number, sizeof number, "%Qd", poly->coefficients[i]);
    const char *digits = number[0] == '-' ? number + 1 : number;
    TEST_OK(text->ctx, idsi_text_puts(text, negative ? "-" : "+"));
    TEST_OK(text->ctx, idsi_text_puts(text, flip(random) ? " " : ""));
    if (strcmp(digits, "1") != 0 || flip(random)) {
        TEST_OK(text->ctx, idsi_text_puts(text, digits));
        TEST_OK(text->ctx, idsi_text_puts(text, flip(random) ? "*" : " "));
    }
    const bool parentheses = flip(random);
    TEST_OK(text->ctx, idsi_text_puts(text, parentheses ? "(" : ""));
    TEST_OK(text->ctx, idsi_tree_print(poly->sig, poly->tokens + poly->start[i], names, text));
    TEST_OK(text->ctx, idsi_text_puts(text, parentheses ? " )" : ""));
    TEST_OK(text->ctx, idsi_text_puts(text, flip(random) ? " " : ""));
}

static void write_identity(idsi_random *random, const idsi_poly *poly, idsi_text *text)
{
    bool right = false;
    TEST_OK(text->ctx, idsi_text_puts(text, "identity "));
    for (size_t i = 0; i < poly->count; i++) {
        if (!right && i > 0 && flip(random)) {
            TEST_OK(text->ctx, idsi_text_puts(text, "= # and\n"));
            right = true;
        }
        write_term(random, poly, i, right, text);
    }
    TEST_OK(text->ctx, idsi_text_puts(text, "\n"));
}

static void write_signature(const ids_signature *sig, idsi_text *text)
{
    for (size_t i = 0; i < sig->count; i++) {
        char *line = NULL;
        TEST_OK(text->ctx, ids_signature_print_operation(text->ctx, sig, i, &line));
        TEST_OK(text->ctx, idsi_text_printf(text, "operation %s\n", line));
        ids_string_free(text->ctx, line);
    }
}

static void check_reread(ids_ctx *ctx, const ids_presentation *pres)
{
    ids_presentation *again = NULL;
    char *text = NULL;
    char *text_again = NULL;
    TEST_OK(ctx, ids_presentation_print(ctx, pres, &text));
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), "printed", &again));
    ck_assert_msg(ids_presentation_equal(pres, again), "read otherwise:\n%s", text);
    TEST_OK(ctx, ids_presentation_print(ctx, again, &text_again));
    ck_assert_str_eq(text, text_again);
    ids_string_free(ctx, text);
    ids_string_free(ctx, text_again);
    ids_presentation_free(again);
}

START_TEST(test_roundtrip)
{
    idsi_random random;
    test_random(&random, 11);
    for (uint64_t round = 0; round < 300 * test_scale(); round++) {
        ids_ctx *ctx = test_ctx();
        ids_signature *sig = random_signature(ctx, &random);
        ids_presentation *pres = NULL;
        idsi_poly poly;
        idsi_text text;
        idsi_poly_init(&poly, ctx, sig);
        idsi_text_init(&text, ctx);
        random_poly(&random, 7, &poly);
        write_signature(sig, &text);
        write_identity(&random, &poly, &text);
        TEST_OK(ctx, ids_presentation_read(ctx, text.data, text.length, NULL, &pres));
        TEST_OK(ctx, idsi_poly_normalize(&poly));
        const idsi_identity *identity = idsi_presentation_get(pres, IDS_ROLE_IDENTITY, 0);
        ck_assert_msg(idsi_poly_equal(&identity->written, &poly), "%s", text.data);
        check_reread(ctx, pres);
        idsi_text_clear(&text);
        idsi_poly_clear(&poly);
        ids_presentation_free(pres);
        ids_signature_free(sig);
        test_ctx_free(ctx);
    }
}
END_TEST

/* A linearised identity is a presentation, too: printed with standard letters it reads back. */
START_TEST(test_linear_form_reads)
{
    idsi_random random;
    test_random(&random, 12);
    for (uint64_t round = 0; round < 100 * test_scale(); round++) {
        ids_ctx *ctx = test_ctx();
        ids_signature *sig = random_signature(ctx, &random);
        ids_presentation *pres = NULL;
        idsi_poly poly;
        idsi_poly linear;
        idsi_text text;
        idsi_poly_init(&poly, ctx, sig);
        idsi_poly_init(&linear, ctx, sig);
        idsi_text_init(&text, ctx);
        random_poly(&random, 5, &poly);
        TEST_OK(ctx, idsi_poly_normalize(&poly));
        TEST_OK(ctx, idsi_poly_linearize(&poly, &linear));
        if (linear.count > 0) {
            write_signature(sig, &text);
            TEST_OK(ctx, idsi_text_puts(&text, "candidate "));
            TEST_OK(ctx, idsi_poly_print(&linear, NULL, &text));
            TEST_OK(ctx, ids_presentation_read(ctx, text.data, text.length, NULL, &pres));
            const idsi_identity *identity = idsi_presentation_get(pres, IDS_ROLE_CANDIDATE, 0);
            ck_assert_msg(identity->multilinear && idsi_poly_equal(&identity->written, &linear) &&
                              idsi_poly_equal(&identity->linear, &linear),
                          "%s", text.data);
        }
        idsi_text_clear(&text);
        idsi_poly_clear(&poly);
        idsi_poly_clear(&linear);
        ids_presentation_free(pres);
        ids_signature_free(sig);
        test_ctx_free(ctx);
    }
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("identity_roundtrip");
    TCase *tc = tcase_create("roundtrip");
    tcase_set_timeout(tc, 20);
    tcase_add_test(tc, test_roundtrip);
    tcase_add_test(tc, test_linear_form_reads);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
