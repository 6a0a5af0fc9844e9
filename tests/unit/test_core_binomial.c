/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Binomial coefficients against Pascal's rule, which fixes all of them, and a few published
 * values beside it.
 */
#include "support.h"

START_TEST(test_pascal)
{
    /* C(67, 33) is the largest entry of row 67 and still below 2^64; row 68 passes it. */
    for (uint32_t n = 1; n <= 67; n++) {
        ck_assert_uint_eq(idsi_binomial(n, 0), 1);
        ck_assert_uint_eq(idsi_binomial(n, n), 1);
        for (uint32_t k = 1; k < n; k++) {
            ck_assert_uint_eq(idsi_binomial(n, k),
                              idsi_binomial(n - 1, k - 1) + idsi_binomial(n - 1, k));
        }
    }
}
END_TEST

START_TEST(test_published)
{
    /* hands of 5 cards out of 52: common knowledge */
    ck_assert_uint_eq(idsi_binomial(52, 5), 2598960);
    /* OEIS A000984, central binomial coefficients, terms 10 and 32: from memory */
    ck_assert_uint_eq(idsi_binomial(20, 10), 184756);
    ck_assert_uint_eq(idsi_binomial(64, 32), UINT64_C(1832624140942590534));
}
END_TEST

START_TEST(test_borders)
{
    ck_assert_uint_eq(idsi_binomial(0, 0), 1);
    ck_assert_uint_eq(idsi_binomial(0, 1), 0);
    ck_assert_uint_eq(idsi_binomial(64, 65), 0);
    ck_assert_uint_eq(idsi_binomial(5, UINT32_MAX), 0);
    ck_assert_uint_eq(idsi_binomial(UINT32_MAX, 0), 1);
    ck_assert_uint_eq(idsi_binomial(UINT32_MAX, UINT32_MAX - 1), UINT32_MAX);
    /* n(n-1)/2 */
    ck_assert_uint_eq(idsi_binomial(UINT32_MAX, 2),
                      (uint64_t)UINT32_MAX * ((UINT32_MAX - UINT64_C(1)) / 2));
}
END_TEST

START_TEST(test_beyond_64_bits)
{
    ck_assert_uint_eq(idsi_binomial(68, 34), UINT64_MAX);
    ck_assert_uint_eq(idsi_binomial(UINT32_MAX, 3), UINT64_MAX);
    ck_assert_uint_eq(idsi_binomial(1000, 500), UINT64_MAX);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("core: binomial");
    TCase *tcase = tcase_create("binomial");

    tcase_add_test(tcase, test_pascal);
    tcase_add_test(tcase, test_published);
    tcase_add_test(tcase, test_borders);
    tcase_add_test(tcase, test_beyond_64_bits);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
