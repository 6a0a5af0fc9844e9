/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Ratios of consecutive counts near degree 1000 against the dominant singularity of the counting
 * series, which is found here in doubles, independently of the library. At a square root
 * singularity rho the coefficients are ~ C rho^-n n^(-3/2), so that rho times the ratio is
 * 1 - 3/(2n) + O(1/n^2). Source: Flajolet, Sedgewick, Analytic Combinatorics, VI.7 and VII.4,
 * from memory.
 */
#include <idspan/gmp.h>
#include <math.h>

#include "support.h"

/* Counts for the first `operations` of a commutative binary and a commutative ternary one. */
static ids_counts *make_counts(ids_ctx *ctx, size_t operations, uint32_t max_degree)
{
    const ids_operation list[2] = {
        {.notation = IDS_NOTATION_PREFIX,
         .open = "f",
         .arity = 2,
         .symmetry = IDS_SYMMETRY_COMMUTATIVE},
        {.notation = IDS_NOTATION_PREFIX,
         .open = "g",
         .arity = 3,
         .symmetry = IDS_SYMMETRY_COMMUTATIVE},
    };
    ids_signature *signature = NULL;
    ids_counts *counts = NULL;

    TEST_OK(ctx, ids_signature_create(ctx, list, operations, &signature));
    TEST_OK(ctx, ids_counts_create(ctx, signature, max_degree, &counts));
    ids_signature_free(signature);
    return counts;
}

static double ratio(const mpz_t above, const mpz_t below)
{
    double result = 0;
    mpz_t scaled;

    mpz_init(scaled);
    mpz_mul_2exp(scaled, above, 60);
    mpz_tdiv_q(scaled, scaled, below);
    result = ldexp(mpz_get_d(scaled), -60);
    mpz_clear(scaled);
    return result;
}

/*
 * a(n)/n! are the coefficients of the inverse of x - x^2/2 - x^3/6; rho is the value of that
 * polynomial where its derivative 1 - y - y^2/2 is zero.
 */
START_TEST(test_growth_monomials)
{
    double y = sqrt(3) - 1;
    double rho = y - y * y / 2 - y * y * y / 6;
    ids_ctx *ctx = test_ctx();
    ids_counts *counts = make_counts(ctx, 2, 1001);
    mpz_t below, above;

    mpz_inits(below, above, NULL);
    for (uint32_t n = 500; n <= 1000; n += 100) {
        double got = 0;

        TEST_OK(ctx, ids_counts_monomials(counts, n, below));
        TEST_OK(ctx, ids_counts_monomials(counts, n + 1, above));
        got = rho * ratio(above, below) / (n + 1);
        ck_assert_double_eq_tol(got, 1 - 1.5 / n, 4.0 / n / n);
    }
    mpz_clears(below, above, NULL);
    ids_counts_free(counts);
    test_ctx_free(ctx);
}
END_TEST

/*
 * For the types rho is where t = x + (t^2 + t(x^2))/2 + (t^3 + 3 t t(x^2) + 2 t(x^3))/6 stops to
 * have a solution t(x). The test bisects: it iterates the equation in doubles at x, x^2, x^3, ..
 * (below 1e-30 t(x) = x) and sees whether that converges.
 */
static double tree_value(double x, bool *fine)
{
    double p2 = 0;
    double p3 = 0;
    double t = 0;

    if (x < 1e-30) {
        return x;
    }
    p2 = tree_value(x * x, fine);
    p3 = tree_value(x * x * x, fine);
    for (int i = 0; i < 200000 && t < 1; i++) {
        double next = x + (t * t + p2) / 2 + (t * t * t + 3 * t * p2 + 2 * p3) / 6;

        if (next - t < 1e-15) {
            return next;
        }
        t = next;
    }
    *fine = false;
    return t;
}

START_TEST(test_growth_types)
{
    double low = 0.1;
    double high = 0.5;
    ids_ctx *ctx = test_ctx();
    ids_counts *counts = make_counts(ctx, 2, 1001);
    mpz_t below, above;

    for (int i = 0; i < 40; i++) {
        bool fine = true;
        double x = (low + high) / 2;

        (void)tree_value(x, &fine);
        *(fine ? &low : &high) = x;
    }
    mpz_inits(below, above, NULL);
    for (uint32_t n = 500; n <= 1000; n += 100) {
        TEST_OK(ctx, ids_counts_types(counts, n, below));
        TEST_OK(ctx, ids_counts_types(counts, n + 1, above));
        ck_assert_double_eq_tol(low * ratio(above, below), 1 - 1.5 / n, 5.0 / n / n);
    }
    mpz_clears(below, above, NULL);
    ids_counts_free(counts);
    test_ctx_free(ctx);
}
END_TEST

/* Wedderburn-Etherington numbers grow by 2.4832535... (OEIS A086317), from memory. */
START_TEST(test_growth_binary)
{
    ids_ctx *ctx = test_ctx();
    ids_counts *counts = make_counts(ctx, 1, 1001);
    mpz_t below, above;

    mpz_inits(below, above, NULL);
    TEST_OK(ctx, ids_counts_types(counts, 1000, below));
    TEST_OK(ctx, ids_counts_types(counts, 1001, above));
    ck_assert_double_eq_tol(ratio(above, below) * (1 + 1.5 / 1000), 2.4832535, 1e-5);
    mpz_clears(below, above, NULL);
    ids_counts_free(counts);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("count_growth");
    TCase *t = tcase_create("growth");

    tcase_add_test(t, test_growth_monomials);
    tcase_add_test(t, test_growth_types);
    tcase_add_test(t, test_growth_binary);
    tcase_set_timeout(t, 20);
    suite_add_tcase(s, t);
    return s;
}

int main(void)
{
    return test_run(suite());
}
