/* SPDX-License-Identifier: BSD-2-Clause */
/* Arithmetic mod p, primes and error bounds, against FLINT and against hand calculation. */
#include <math.h>

#include <flint/ulong_extras.h>

#include "field_matrix.h"

START_TEST(test_arithmetic)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 1 + (uint64_t)_i);
    for (uint64_t round = 0; round < 2000 * test_scale(); round++) {
        uint32_t a = (uint32_t)idsi_random_below(&random, p);
        uint32_t b = round == 0 ? p - 1 : (uint32_t)idsi_random_below(&random, p);
        uint64_t e = idsi_random_below(&random, UINT64_MAX);

        ck_assert_uint_eq(idsi_mod_mul(a, b, p), n_mulmod2(a, b, p));
        ck_assert_uint_eq(idsi_mod_neg(a, p), n_negmod(a, p));
        ck_assert_uint_eq(idsi_mod_pow(a, e, p), n_powmod2_ui_preinv(a, e, p, n_preinvert_limb(p)));
        if (b != 0) {
            ck_assert_uint_eq(idsi_mod_inverse(b, p), n_invmod(b, p));
        }
    }
    ck_assert_uint_eq(idsi_mod_pow(0, 0, p), 1);
}
END_TEST

START_TEST(test_rational)
{
    mpq_t q;
    uint32_t residue = 7;

    mpq_init(q);
    mpq_set_str(q, "-1/2", 10);
    ck_assert(idsi_mod_rational(q, 101, &residue));
    ck_assert_uint_eq(residue, 50); /* 2 * 50 = 100 = -1 mod 101 */
    mpq_set_str(q, "-123456789012345678901234567890", 10);
    ck_assert(idsi_mod_rational(q, 3, &residue));
    ck_assert_uint_eq(residue, 0); /* sum of digits 3 * 45 */
    residue = 7;
    mpq_set_str(q, "5/202", 10);
    ck_assert(!idsi_mod_rational(q, 101, &residue));
    ck_assert_uint_eq(residue, 7);
    mpq_clear(q);
}
END_TEST

START_TEST(test_primes)
{
    uint32_t known[50];
    idsi_random random;

    for (size_t i = 0; i < field_prime_count; i++) {
        ck_assert(idsi_is_prime(field_primes[i]));
    }
    ck_assert_uint_eq(n_nextprime(IDSI_PRIME_LOW, 1), 536870923);
    ck_assert_uint_eq(n_nextprime(1048573, 1), 1048583);
    ck_assert(!idsi_is_prime(0) && !idsi_is_prime(1));
    ck_assert(!idsi_is_prime(536870911)); /* 2^29 - 1 = 233 * 1103 * 2089 */
    test_random(&random, 2);
    for (size_t i = 0; i < 50; i++) {
        known[i] = idsi_prime_draw(&random, known, i);
        ck_assert(known[i] > IDSI_PRIME_LOW && known[i] < IDSI_PRIME_HIGH);
        ck_assert(n_is_prime(known[i]));
        for (size_t j = 0; j < i; j++) {
            ck_assert_uint_ne(known[i], known[j]);
        }
    }
}
END_TEST

START_TEST(test_same_seed)
{
    idsi_random a;
    idsi_random b;

    idsi_random_seed(&a, 17);
    idsi_random_seed(&b, 17);
    uint32_t first = idsi_prime_draw(&a, NULL, 0);
    ck_assert_uint_eq(first, idsi_prime_draw(&b, NULL, 0));
    idsi_random_seed(&b, 17);
    ck_assert_uint_ne(first, idsi_prime_draw(&b, &first, 1));
}
END_TEST

/*
 * log2 of IDSI_PRIME_COUNT = 26207278 is 24.6434..; the expected values are worked out from that
 * by hand: 24.64 - log2(bad primes), times the number of primes, rounded down.
 */
START_TEST(test_error_bits)
{
    ck_assert_uint_eq(idsi_prime_error_bits(0, 0, 1), 24);
    ck_assert_uint_eq(idsi_prime_error_bits(29, 0, 1), 24);
    ck_assert_uint_eq(idsi_prime_error_bits(30, 0, 1), 23);
    ck_assert_uint_eq(idsi_prime_error_bits(29 * 1024, 0, 1), 14);
    ck_assert_uint_eq(idsi_prime_error_bits(29 * 1024, 0, 2), 29); /* 2 * 14.64 = 29.28 */
    ck_assert_uint_eq(idsi_prime_error_bits(29 * 1024, 0, 3), 43); /* 3 * 14.64 = 43.9 */
    /* What random rows can miss is added: 2^-10 swamps the rest. */
    ck_assert_uint_eq(idsi_prime_error_bits(29, 0x1p-10, 1), 9);
    ck_assert_uint_eq(idsi_prime_error_bits(29, 0x1p-10, 2), 19);
    /* No bound at all. */
    ck_assert_uint_eq(idsi_prime_error_bits(29.0 * 26207278, 0, 1), 0);
    ck_assert_uint_eq(idsi_prime_error_bits(29.0 * 26207278, 0, 5), 0);
    ck_assert_uint_eq(idsi_prime_error_bits(1e300, 0, 5), 0);
    ck_assert_uint_eq(idsi_prime_error_bits(INFINITY, 0, 1), 0);
    ck_assert_uint_eq(idsi_prime_error_bits(29, 1, 1), 0);
}
END_TEST

START_TEST(test_reconstruct)
{
    mpq_t fraction;
    mpz_t residue;
    mpz_t modulus;
    idsi_random random;

    mpq_init(fraction);
    mpz_init(residue);
    mpz_init_set_str(modulus, "1152921504606846883", 10); /* the largest prime below 2^60 */
    test_random(&random, 3);
    for (int round = 0; round < 500; round++) {
        int64_t num = (int64_t)idsi_random_below(&random, 1000000001) - 500000000;
        uint64_t den = 1 + idsi_random_below(&random, 500000000);
        mpz_set_ui(residue, den);
        ck_assert(mpz_invert(residue, residue, modulus) != 0);
        mpz_mul_si(residue, residue, num);
        mpz_mod(residue, residue, modulus);
        ck_assert(idsi_border_reconstruct(fraction, residue, modulus));
        mpz_mul_si(residue, mpq_denref(fraction), num);
        mpz_submul_ui(residue, mpq_numref(fraction), den);
        ck_assert(mpz_sgn(residue) == 0); /* the same fraction */
    }
    mpz_set_ui(modulus, 1);
    mpz_set_ui(residue, 0);
    ck_assert(!idsi_border_reconstruct(fraction, residue, modulus));
    mpz_clear(modulus);
    mpz_clear(residue);
    mpq_clear(fraction);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("field: primes");
    TCase *tcase = tcase_create("primes");

    tcase_add_loop_test(tcase, test_arithmetic, 0, (int)field_prime_count);
    tcase_add_test(tcase, test_rational);
    tcase_add_test(tcase, test_primes);
    tcase_add_test(tcase, test_same_seed);
    tcase_add_test(tcase, test_error_bits);
    tcase_add_test(tcase, test_reconstruct);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
