/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Arithmetic mod primes below 2^30, random primes, and what a random prime can miss.
 *
 * Error bound. Let A be an integer matrix of rank r over Q. Some r x r minor M is not zero, and
 * the rank of A mod p is less than r only if p divides M. By Hadamard |M| <= product of the
 * Euclidean norms of its rows, say 2^b, so at most b/29 primes above 2^29 divide it. A prime drawn
 * uniformly from the IDSI_PRIME_COUNT primes of (2^29, 2^30) is one of these with probability at
 * most (b/29) / IDSI_PRIME_COUNT, and independent draws multiply; a draw that must differ from the
 * ones before has no more than these primes less to choose from. (Count of primes: pi(2^30) =
 * 54400028, pi(2^29) = 28192750, OEIS A007053.)
 *
 * For a rank table A holds all consequences in the monomials of a degree. No quotient step is
 * formed over Q, so none needs a bound: the steps mod p, taken together, give the rank of A mod p,
 * because dim F(n)/I(n) over GF(p) is what they compute. The terms of a law stay different when
 * monomials are put in and when it becomes a part of a product, so a row has the norm of its law,
 * and r is at most dim F(n). Rows that random combinations miss in some step make the rank too
 * small as well; the probability of that is added, for each prime.
 */
#include <math.h>

#include "field_private.h"

uint32_t idsi_mod_pow(uint32_t base, uint64_t exponent, uint32_t p)
{
    uint32_t power = 1 % p;
    while (exponent > 0) {
        if (exponent & 1) {
            power = idsi_mod_mul(power, base, p);
        }
        base = idsi_mod_mul(base, base, p);
        exponent >>= 1;
    }
    return power;
}

uint32_t idsi_mod_inverse(uint32_t a, uint32_t p)
{
    int64_t r0 = p;
    int64_t r1 = a;
    int64_t t0 = 0;
    int64_t t1 = 1;
    while (r1 != 0) {
        int64_t q = r0 / r1;
        int64_t r2 = r0 - q * r1;
        int64_t t2 = t0 - q * t1;
        r0 = r1;
        r1 = r2;
        t0 = t1;
        t1 = t2;
    }
    return (uint32_t)(t0 < 0 ? t0 + p : t0);
}

bool idsi_mod_rational(mpq_srcptr number, uint32_t p, uint32_t *residue)
{
    uint32_t num = (uint32_t)mpz_fdiv_ui(mpq_numref(number), p);
    uint32_t den = (uint32_t)mpz_fdiv_ui(mpq_denref(number), p);
    if (den == 0) {
        return false;
    }
    *residue = idsi_mod_mul(num, idsi_mod_inverse(den, p), p);
    return true;
}

bool idsi_is_prime(uint32_t n)
{
    return idsi_border_is_prime(n);
}

ids_status idsi_prime_check(ids_ctx *ctx, uint32_t p)
{
    if (p >= IDSI_PRIME_HIGH || !idsi_is_prime(p)) {
        return idsi_fail(ctx, IDS_ERR_ARG,
                         "%u elements: a field has a prime number of elements here, below 2^30", p);
    }
    return IDS_OK;
}

static bool is_known(uint32_t prime, const uint32_t *known, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        if (known[i] == prime) {
            return true;
        }
    }
    return false;
}

uint32_t idsi_prime_draw(idsi_random *random, const uint32_t *known, size_t count)
{
    for (;;) {
        uint32_t n =
            IDSI_PRIME_LOW + (uint32_t)idsi_random_below(random, IDSI_PRIME_HIGH - IDSI_PRIME_LOW);
        if ((n & 1u) && idsi_is_prime(n) && !is_known(n, known, count)) {
            return n;
        }
    }
}

double idsi_prime_error(double minor_bits, double random_error, uint32_t primes)
{
    double bad = fmax(1.0, ceil(minor_bits / 29.0));
    double error = bad / (double)(IDSI_PRIME_COUNT - primes) + random_error;
    return pow(fmin(1.0, error), primes);
}

uint32_t idsi_error_bits(double error)
{
    double bits = error > 0 ? floor(-log2(error)) : 1000.0;
    return bits > 0 ? (uint32_t)bits : 0;
}

double idsi_mpz_bits(mpz_srcptr z)
{
    signed long exponent = 0; /* the type is GMP's */
    const double mantissa = mpz_get_d_2exp(&exponent, z);

    return mantissa == 0 ? -INFINITY : log2(fabs(mantissa)) + (double)exponent;
}

double idsi_mpq_bits(mpq_srcptr q)
{
    return idsi_mpz_bits(mpq_numref(q)) - idsi_mpz_bits(mpq_denref(q));
}

double idsi_bits_add(double a, double b)
{
    const double high = fmax(a, b);

    return isinf(high) ? high : high + log2(1 + exp2(fmin(a, b) - high));
}

double idsi_sum_bits(const mpq_t *numbers, size_t count)
{
    double bits = -INFINITY;

    for (size_t i = 0; i < count; i++) {
        bits = idsi_bits_add(bits, idsi_mpq_bits(numbers[i]));
    }
    return bits;
}

double idsi_denominator_bits(const mpq_t *numbers, size_t count)
{
    mpz_t common;

    mpz_init_set_ui(common, 1);
    for (size_t i = 0; i < count; i++) {
        mpz_lcm(common, common, mpq_denref(numbers[i]));
    }
    const double bits = idsi_mpz_bits(common);
    mpz_clear(common);
    return bits;
}

uint32_t idsi_prime_error_bits(double minor_bits, double random_error, uint32_t primes)
{
    return idsi_error_bits(idsi_prime_error(minor_bits, random_error, primes));
}
