/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Prime fields with primes below 2^30, sparse echelon forms, and the border to FLINT.
 */
#ifndef IDSI_FIELD_PRIVATE_H
#define IDSI_FIELD_PRIVATE_H

#include <gmp.h>
#include <limits.h>

#include "../core/core_private.h"

/* GMP's calls with an unsigned long are given 64 bits here and in the rooms below. */
_Static_assert(ULONG_MAX == UINT64_MAX, "a system with 64-bit unsigned long");

/*
 * Primes are drawn from (2^29, 2^30): IDSI_PRIME_COUNT of them, pi(2^30) - pi(2^29). Below 2^30 a
 * sum of 16 products of centred residues fits 62 bits, which the dense kernels live on.
 */
#define IDSI_PRIME_LOW (UINT32_C(1) << 29)
#define IDSI_PRIME_HIGH (UINT32_C(1) << 30)
#define IDSI_PRIME_COUNT 26207278u

/* ---- arithmetic mod a prime p < 2^30 -------------------------------------------------------- */

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

/* ---- primes ---------------------------------------------------------------------------------- */

/* A prime drawn uniformly from (2^29, 2^30), none of those in known[0..count-1]. */
uint32_t idsi_prime_draw(idsi_random *random, const uint32_t *known, size_t count);
bool idsi_is_prime(uint32_t n);
/* IDS_ERR_ARG with a message unless p is a prime below 2^30. */
ids_status idsi_prime_check(ids_ctx *ctx, uint32_t p);
/*
 * Error probability, and the k of 2^-k for it: of the primes in (2^29, 2^30), at most
 * minor_bits / 29 divide one nonzero integer of minor_bits bits, so a random one does with
 * probability at most that over IDSI_PRIME_COUNT; random_error is added for what random rows can
 * miss with each prime; `primes` independent draws multiply. 0 when the bound is void.
 */
double idsi_prime_error(double minor_bits, double random_error, uint32_t primes);
/* The k of 2^-k >= error; 0 when the error is no bound, 1000 for no error. */
uint32_t idsi_error_bits(double error);
uint32_t idsi_prime_error_bits(double minor_bits, double random_error, uint32_t primes);
/* log2 of the absolute value, -INFINITY for 0, of however large a number. */
double idsi_mpz_bits(mpz_srcptr z);
double idsi_mpq_bits(mpq_srcptr q);
/* log2(2^a + 2^b). */
double idsi_bits_add(double a, double b);
/* log2 of the sum of the absolute values; log2 of the least common denominator. */
double idsi_sum_bits(const mpq_t *numbers, size_t count);
double idsi_denominator_bits(const mpq_t *numbers, size_t count);

/* ---- sparse echelon form (lib/field/sparse.c) ------------------------------------------------ */

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
/* Adds factor * row to the row at work. Columns in any order, may repeat; values < prime. */
void idsi_echelon_load(idsi_echelon *echelon, const idsi_entry *row, size_t count, uint32_t factor);
typedef enum idsi_verdict {
    IDSI_DEPENDENT,   /* the row adds nothing */
    IDSI_INDEPENDENT, /* it has become a rule */
    IDSI_DEFERRED     /* it would take more work than allowed: dropped, nothing changed */
} idsi_verdict;
/* Turns the row at work into a rule, applying at most `work` entries of rules. */
ids_status idsi_echelon_settle(idsi_echelon *echelon, uint64_t work, idsi_verdict *verdict);
/* Stores a row that is already free of pivots, largest column first, as a rule. */
ids_status idsi_echelon_store(idsi_echelon *echelon, const idsi_entry *row, size_t count);
uint32_t idsi_echelon_rank(const idsi_echelon *echelon);
/* Rewrites all rules so that only columns that are no pivots stand on their right sides. */
ids_status idsi_echelon_complete(idsi_echelon *echelon);
bool idsi_echelon_is_pivot(const idsi_echelon *echelon, uint32_t column);
/* The rule of a pivot column; false when the column is none. Borrowed until the next add. */
bool idsi_echelon_rule(const idsi_echelon *echelon, uint32_t column, const idsi_entry **entries,
                       uint32_t *count);
/* Entries in all rules. */
uint64_t idsi_echelon_fill(const idsi_echelon *echelon);
/* Entries of rules that were applied to rows so far. */
uint64_t idsi_echelon_work(const idsi_echelon *echelon);

/* ---- elimination (lib/field/eliminate.c) ----------------------------------------------------- */

/* Receives one row: entries in any order, columns may repeat. */
typedef ids_status (*idsi_row_fn)(void *user, const idsi_entry *row, size_t count);
/* Makes all rows, the same ones in the same order at every call. */
typedef ids_status (*idsi_source_fn)(void *user, idsi_row_fn row, void *row_user);
/*
 * Makes the rows of one piece of the whole, in any thread. The rows are those of piece 0, 1, ..
 * in turn.
 */
typedef ids_status (*idsi_piece_fn)(void *user, size_t piece, idsi_row_fn row, void *row_user);

typedef struct idsi_matrix {
    ids_ctx *ctx;
    uint32_t prime;
    uint32_t columns;
    bool tables;           /* the complete echelon form is wanted, not only the rank */
    idsi_source_fn source; /* unless there are pieces */
    size_t pieces;         /* > 0: rows come from `piece` */
    idsi_piece_fn piece;
    void *source_user;
} idsi_matrix;

typedef struct idsi_result {
    idsi_echelon *echelon; /* with tables: complete, owned; else NULL */
    uint64_t rank;
    double error;      /* probability that the rank is too small, whatever the matrix; 0: none */
    uint64_t rows;     /* that the source made */
    uint64_t deferred; /* rows that were left to the dense finish */
    uint64_t fill;     /* entries in sparse rules */
    uint64_t dense_rank;
    uint64_t dense_columns; /* columns that the dense finish started from */
    uint64_t dense_width;   /* columns that its rows had, folded */
    uint64_t dense_rows;    /* rows that went into it */
} idsi_result;

/* Rank, and with tables the echelon form, of a matrix whose rows are streamed. */
ids_status idsi_eliminate(const idsi_matrix *matrix, idsi_random *random, idsi_result *result);

/* ---- border: FLINT (lib/field/flint_border.c) ------------------------------------------------ */

/* Deterministic primality of a 64-bit number. */
bool idsi_border_is_prime(uint64_t n);
/* Version of FLINT that is at work. */
const char *idsi_border_version(void);
/*
 * The fraction num/den = residue mod modulus with 2 * |num| * den < modulus, both below the
 * square root of modulus/2; false when there is none.
 */
bool idsi_border_reconstruct(mpq_ptr fraction, mpz_srcptr residue, mpz_srcptr modulus);
/*
 * Makes a basis of a lattice short (LLL): count x columns integers, the rows independent. Limits:
 * 512 rows, 65536 columns, entries of 4096 bits; IDS_ERR_LIMIT beyond, or when the budget does not
 * hold what FLINT needs, the rows unchanged.
 */
ids_status idsi_border_shorten(ids_ctx *ctx, mpz_t *rows, size_t count, size_t columns);

#endif
