/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory in normal forms and matrices; support.h tells what TEST_OOM does. */
#include <string.h>

#include <idspan/engine.h>

#include "support.h"

static const char jordan[] = "operation a*b commutative\nidentity ((x*x)*y)*x = (x*x)*(y*x)\n";

static ids_status use_forms(ids_ctx *ctx, const ids_normal_forms *forms)
{
    ids_combination *sum = NULL;
    ids_combination *product = NULL;
    ids_combination *again = NULL;
    ids_mono *mono = NULL;
    char *text = NULL;
    char *number = NULL;
    char *name = NULL;
    const uint32_t labels[] = {1, 3, 2, 4};
    const ids_factor factors[] = {{0, 2, labels}, {0, 2, labels + 2}};
    static const char polynomial[] = "3*((a*b)*c)*d - 1/2*(a*b)*(c*d)";
    ids_status st = IDS_OK;

    IDSI_TRY(
        ids_normal_forms_reduce_text(ctx, forms, polynomial, sizeof polynomial - 1, NULL, &sum));
    IDSI_TRY(ids_combination_print(ctx, sum, &text));
    IDSI_TRY(ids_combination_coefficient(ctx, sum, 0, &number));
    IDSI_TRY(ids_normal_forms_product(ctx, forms, 0, factors, 2, &product));
    IDSI_TRY(ids_normal_forms_mono(ctx, forms, 4, 2, &mono));
    IDSI_TRY(ids_normal_forms_print(ctx, forms, 4, 1, &name));
    IDSI_TRY(ids_normal_forms_reduce(ctx, forms, (const ids_mono *const *)&mono, NULL, 1, &again));
done:
    ids_string_free(ctx, text);
    ids_string_free(ctx, number);
    ids_string_free(ctx, name);
    ids_mono_free(mono);
    ids_combination_free(sum);
    ids_combination_free(product);
    ids_combination_free(again);
    return st;
}

static ids_status make_forms(ids_ctx *ctx, void *data)
{
    ids_presentation *pres = NULL;
    ids_normal_forms *forms = NULL;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_presentation_read(ctx, jordan, sizeof jordan - 1, "jordan", &pres));
    IDSI_TRY(ids_normal_forms_create(ctx, pres, 4, data, &forms));
    IDSI_TRY(use_forms(ctx, forms));
done:
    ids_normal_forms_free(forms);
    ids_presentation_free(pres);
    return st;
}

static int swallow(void *user, const char *bytes, size_t length)
{
    (void)user;
    (void)bytes;
    (void)length;
    return 0;
}

static ids_status make_matrix(ids_ctx *ctx, void *data)
{
    ids_presentation *pres = NULL;
    ids_matrix *matrix = NULL;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_presentation_read(ctx, jordan, sizeof jordan - 1, "jordan", &pres));
    IDSI_TRY(ids_matrix_create(ctx, pres, 5, data, &matrix));
    IDSI_TRY(ids_matrix_write(ctx, matrix, swallow, NULL));
    IDSI_TRY(ids_matrix_write_columns(ctx, matrix, swallow, NULL));
done:
    ids_matrix_free(matrix);
    ids_presentation_free(pres);
    return st;
}

START_TEST(test_forms)
{
    ids_normal_options options = {.struct_size = sizeof options, .exact = _i == 1};
    TEST_OOM(make_forms, &options);
}
END_TEST

START_TEST(test_matrix)
{
    ids_matrix_options options = {.struct_size = sizeof options, .plain = _i == 1};
    TEST_OOM(make_matrix, &options);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("oom: engine");
    TCase *tcase = tcase_create("engine");

    tcase_set_timeout(tcase, 60);
    tcase_add_loop_test(tcase, test_forms, 0, 2);
    tcase_add_loop_test(tcase, test_matrix, 0, 2);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
