/* SPDX-License-Identifier: BSD-2-Clause */
/* 10,000 random damages to proof and witness files, all refused; a witness in degree 8. */
#include "certificates.h"

START_TEST(test_damage)
{
    certificate_damage(6200, test_scale() * 10000 / theorem_count);
}
END_TEST

START_TEST(test_glennie)
{
    ids_ctx *ctx = test_ctx();
    ids_check_report report = {0};
    idsi_text file;

    idsi_text_init(&file, ctx);
    TEST_OK(ctx, certificate_make(ctx, &theorem_glennie, &file));
    TEST_OK(ctx, ids_certificate_check(ctx, file.data, file.length, "file", &report));
    ck_assert(!report.follows);
    ck_assert_uint_eq(report.degree, 8);
    idsi_text_clear(&file);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("check, slow");
    TCase *tcase = tcase_create("check");

    tcase_set_timeout(tcase, 300);
    tcase_add_test(tcase, test_damage);
    tcase_add_test(tcase, test_glennie);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
