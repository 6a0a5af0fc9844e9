/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Prime fields with primes below 2^31, sparse echelon forms, and the border to FLINT.
 */
#ifndef IDSI_FIELD_PRIVATE_H
#define IDSI_FIELD_PRIVATE_H

#include <gmp.h>

#include "../core/core_private.h"

/* Primes are drawn from (2^30, 2^31): PRIME_COUNT of them, pi(2^31) - pi(2^30). */
#define IDSI_PRIME_LOW (UINT32_C(1) << 30)
#define IDSI_PRIME_HIGH (UINT32_C(1) << 31)
#define IDSI_PRIME_COUNT 50697537u

/* ---- arithmetic mod a prime p < 2^31 -------------------------------------------------------- */

static inline uint32_t idsi_mod_mul(uint32_t a, uint32_t b, uint32_t p)
{
    return (uint32_t)((uint64_t)a * b % p);
}

static inline uint32_t idsi_mod_neg(uint32_t a, uint32_t p)
{
    return a == 0 ? 0 : p - a;
}

uint32_t idsi_mod_pow(uint32_t base, uint64_t exponent, uint32_t p);
/* Inverse of a != 0 mod the prime p. */
uint32_t idsi_mod_inverse(uint32_t a, uint32_t p);
/* Residue of a rational number; false when p divides the denominator. */
bool idsi_mod_rational(mpq_srcptr number, uint32_t p, uint32_t *residue);

/* ---- primes --------------------------------------------------------------------------------------- */

/* A prime drawn uniformly from (2^30, 2^31), none of those in known[0..count-1]. */
uint32_t idsi_prime_draw(idsi_random *random, const uint32_t *known, size_t count);
bool idsi_is_prime(uint32_t n);
/*
 * The k of an error probability 2^-k: of the primes in (2^30, 2^31), at most minor_bits / 30
 * divide one nonzero integer of minor_bits bits, so a random one does with probability at most
 * that over IDSI_PRIME_COUNT; `primes` independent draws multiply. 0 when the bound is void.
 */
uint32_t idsi_prime_error_bits(double minor_bits, uint32_t primes);

/* ---- sparse echelon form (lib/field/sparse.c) -------------------------------------------------------- */

typedef struct idsi_entry {
    uint32_t column;
    uint32_t value;
} idsi_entry;

/*
 * Echelon form of rows that come one by one. It is kept as rewriting rules: a pivot column equals
 * a combination of smaller columns. The pivot of a row is its largest column, so which columns
 * become pivots depends on the row space alone, not on the order of the rows.
 */
typedef struct idsi_echelon idsi_echelon;

/* columns <= UINT32_MAX - 1 */
ids_status idsi_echelon_create(ids_ctx *ctx, uint32_t prime, uint32_t columns,
                               idsi_echelon **echelon);
void idsi_echelon_free(idsi_echelon *echelon);
/* Bytes that idsi_echelon_create() takes for so many columns. */
uint64_t idsi_echelon_base_bytes(uint64_t columns);
/* Columns in any order, may repeat; values < prime. *independent may be NULL. */
ids_status idsi_echelon_add(idsi_echelon *echelon, const idsi_entry *row, size_t count,
                            bool *independent);
uint32_t idsi_echelon_rank(const idsi_echelon *echelon);
/* Rewrites all rules so that only columns that are no pivots stand on their right sides. */
ids_status idsi_echelon_complete(idsi_echelon *echelon);
/* The rule of a pivot column; false when the column is none. Borrowed until the next add. */
bool idsi_echelon_rule(const idsi_echelon *echelon, uint32_t column, const idsi_entry **entries,
                       uint32_t *count);
/* Entries in all rules. */
uint64_t idsi_echelon_fill(const idsi_echelon *echelon);

/* ---- border: FLINT (lib/field/flint_border.c) ----------------------------------------------------------- */

/* Deterministic primality of a 64-bit number. */
bool idsi_border_is_prime(uint64_t n);
/*
 * The fraction num/den = residue mod modulus with 2 * |num| * den < modulus, both below the
 * square root of modulus/2; false when there is none.
 */
bool idsi_border_reconstruct(mpq_ptr fraction, mpz_srcptr residue, mpz_srcptr modulus);

#endif
