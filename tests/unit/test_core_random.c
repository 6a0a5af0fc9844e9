/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The random numbers must be the same on every machine, because primes and seeds printed by one
 * run are used again by another.
 */
#include "support.h"

START_TEST(test_xoshiro_outputs)
{
    /* Outputs of the authors' reference program for the state 1, 2, 3, 4, as many
     * implementations quote them in their tests: from memory. The first can be done by hand:
     * rotate(2*5, 7)*9 = 11520. */
    static const uint64_t expected[] = {
        UINT64_C(11520),
        UINT64_C(0),
        UINT64_C(1509978240),
        UINT64_C(1215971899390074240),
        UINT64_C(1216172134540287360),
        UINT64_C(607988272756665600),
        UINT64_C(16172922978634559625),
        UINT64_C(8476171486693032832),
        UINT64_C(10595114339597558777),
        UINT64_C(2904607092377533576),
    };
    idsi_random random = {{1, 2, 3, 4}};

    for (size_t i = 0; i < sizeof expected / sizeof expected[0]; i++) {
        ck_assert_uint_eq(idsi_random_next(&random), expected[i]);
    }
}
END_TEST

START_TEST(test_splitmix_fills_the_state)
{
    /* First outputs of splitmix64 for seed 1234567, as widely quoted: from memory. */
    idsi_random random = {{0}};

    idsi_random_seed(&random, 1234567);
    ck_assert_uint_eq(random.state[0], UINT64_C(6457827717110365317));
    ck_assert_uint_eq(random.state[1], UINT64_C(3203168211198807973));
    ck_assert_uint_eq(random.state[2], UINT64_C(9817491932198370423));
    ck_assert_uint_eq(random.state[3], UINT64_C(4593380528125082431));
}
END_TEST

START_TEST(test_below)
{
    static const uint64_t bounds[] = {
        1, 2, 3, 10, 64, 1000, UINT64_C(1) << 63, (UINT64_C(1) << 63) + 1, UINT64_MAX};
    idsi_random random = {{0}};

    test_random(&random, 1);
    for (size_t i = 0; i < sizeof bounds / sizeof bounds[0]; i++) {
        for (uint64_t round = 0; round < 1000 * test_scale(); round++) {
            ck_assert_uint_lt(idsi_random_below(&random, bounds[i]), bounds[i]);
        }
    }
}
END_TEST

START_TEST(test_below_is_even)
{
    /* Chi-square with 9 degrees of freedom passes 45 once in about a million seeds. */
    enum { CELLS = 10, ROUNDS = 100000 };
    uint64_t count[CELLS] = {0};
    double chi_square = 0;
    idsi_random random = {{0}};

    test_random(&random, 2);
    for (int round = 0; round < ROUNDS; round++) {
        count[idsi_random_below(&random, CELLS)]++;
    }
    for (int cell = 0; cell < CELLS; cell++) {
        double off = (double)count[cell] - (double)ROUNDS / CELLS;

        chi_square += off * off / ((double)ROUNDS / CELLS);
    }
    ck_assert_double_lt(chi_square, 45.0);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("core: random");
    TCase *tcase = tcase_create("random");

    tcase_add_test(tcase, test_xoshiro_outputs);
    tcase_add_test(tcase, test_splitmix_fills_the_state);
    tcase_add_test(tcase, test_below);
    tcase_add_test(tcase, test_below_is_even);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
