/* SPDX-License-Identifier: BSD-2-Clause */
/* What the calls for normal forms refuse, and how they say so. */
#include <stdio.h>
#include <string.h>

#include "engine_support.h"

static ids_status reduce(ids_ctx *ctx, const ids_normal_forms *forms, const char *text)
{
    ids_combination *c = NULL;
    ids_status st = ids_normal_forms_reduce_text(ctx, forms, text, strlen(text), "word", &c);

    ck_assert_int_eq(c != NULL, st == IDS_OK);
    ids_combination_free(c);
    return st;
}

START_TEST(test_text_errors)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_variety(ctx, "jordan.pres");
    ids_normal_forms *forms = NULL;

    TEST_OK(ctx, ids_normal_forms_create(ctx, pres, 4, NULL, &forms));
    TEST_STATUS(ctx, reduce(ctx, forms, "a*b - b*a"), IDS_OK); /* cancels: 0 */
    TEST_STATUS(ctx, reduce(ctx, forms, "a*(b*"), IDS_ERR_PARSE);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "word:1:"));
    ck_assert_ptr_null(strstr(ids_ctx_message(ctx), "candidate"));
    TEST_STATUS(ctx, reduce(ctx, forms, "a*b..c"), IDS_ERR_PARSE);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "word:1:4: "));
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "\na*b..c\n   ^"));
    ck_assert_uint_eq(ids_ctx_last_place(ctx).line, 1);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).column, 4);
    TEST_STATUS(ctx, reduce(ctx, forms, ""), IDS_ERR_PARSE);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).column, 1);
    ck_assert_ptr_null(strstr(ids_ctx_message(ctx), "candidate"));
    TEST_STATUS(ctx, reduce(ctx, forms, "a*b + a*c"), IDS_ERR_PARSE);
    TEST_STATUS(ctx, reduce(ctx, forms, "(a*b)*a"), IDS_ERR_DOMAIN);
    TEST_STATUS(ctx, reduce(ctx, forms, "((a*b)*c)*(d*e)"), IDS_ERR_ARG);
    TEST_STATUS(ctx, reduce(ctx, forms, "a*b\nidentity a*b"), IDS_ERR_PARSE);
    TEST_STATUS(ctx, reduce(ctx, forms, "a*b\noperation [a,b]"), IDS_ERR_PARSE);
    TEST_STATUS(ctx, reduce(ctx, forms, "a*b\noperation a*b"), IDS_ERR_PARSE);
    char over[64];
    snprintf(over, sizeof over, "1/%u*a*b", ids_normal_forms_prime(forms));
    TEST_STATUS(ctx, reduce(ctx, forms, over), IDS_ERR_DOMAIN);
    ids_normal_forms_free(forms);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_argument_errors)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_variety(ctx, "jordan.pres");
    ids_normal_options options = {.struct_size = sizeof options, .exact = true, .field = 3};
    ids_normal_forms *forms = NULL;
    ids_combination *c = NULL;
    char *text = NULL;
    const uint32_t labels[] = {1, 2, 3, 1, 9};
    ids_factor factors[] = {{0, 2, labels}, {0, 1, labels + 2}, {0, 1, labels}};

    TEST_STATUS(ctx, ids_normal_forms_create(ctx, pres, 3, &options, &forms), IDS_ERR_ARG);
    options.exact = false;
    options.field = 9;
    TEST_STATUS(ctx, ids_normal_forms_create(ctx, pres, 3, &options, &forms), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_normal_forms_create(ctx, pres, 0, NULL, &forms), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_normal_forms_create(ctx, NULL, 3, NULL, &forms), IDS_ERR_ARG);
    ck_assert_ptr_null(forms);
    TEST_OK(ctx, ids_normal_forms_create(ctx, pres, 4, NULL, &forms));
    TEST_STATUS(ctx, ids_normal_forms_print(ctx, forms, 4, 11, &text), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_normal_forms_print(ctx, forms, 5, 0, &text), IDS_ERR_ARG);
    TEST_OK(ctx, ids_normal_forms_product(ctx, forms, 0, factors, 2, &c));
    ids_combination_free(c);
    c = NULL;
    TEST_STATUS(ctx, ids_normal_forms_product(ctx, forms, 0, factors, 3, &c), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_normal_forms_product(ctx, forms, 1, factors, 2, &c), IDS_ERR_ARG);
    factors[1].labels = labels + 3; /* 1 twice */
    TEST_STATUS(ctx, ids_normal_forms_product(ctx, forms, 0, factors, 2, &c), IDS_ERR_ARG);
    factors[1].labels = labels + 4; /* a gap */
    TEST_STATUS(ctx, ids_normal_forms_product(ctx, forms, 0, factors, 2, &c), IDS_ERR_ARG);
    factors[1].labels = NULL;
    TEST_STATUS(ctx, ids_normal_forms_product(ctx, forms, 0, factors, 2, &c), IDS_ERR_ARG);
    factors[1] = (ids_factor){3, 3, labels};
    TEST_STATUS(ctx, ids_normal_forms_product(ctx, forms, 0, factors, 2, &c), IDS_ERR_ARG);
    ck_assert_ptr_null(c);
    ids_normal_forms_free(NULL);
    ids_combination_free(NULL);
    ck_assert_uint_eq(ids_combination_count(NULL), 0);
    ck_assert_uint_eq(ids_combination_degree(NULL), 0);
    ck_assert_uint_eq(ids_normal_forms_max_degree(NULL), 0);
    ck_assert_uint_eq(ids_normal_forms_prime(NULL), 0);
    ids_normal_forms_free(forms);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("engine: refused normal forms");
    TCase *tcase = tcase_create("refused");

    tcase_add_test(tcase, test_text_errors);
    tcase_add_test(tcase, test_argument_errors);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
