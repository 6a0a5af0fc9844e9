/* SPDX-License-Identifier: BSD-2-Clause */
/* 10,000 random damages to proof and witness files: all refused. */
#include "certificates.h"

START_TEST(test_damage)
{
    certificate_damage(6200, test_scale() * 10000 / theorem_count);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("check, slow");
    TCase *tcase = tcase_create("check");

    tcase_set_timeout(tcase, 300);
    tcase_add_test(tcase, test_damage);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
