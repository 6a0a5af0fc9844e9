/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file answer.h
 * Rank tables: how many monomials of each degree the identities leave independent.
 */
#ifndef IDSPAN_ANSWER_H
#define IDSPAN_ANSWER_H

#include <idspan/identity.h>
#include <idspan/young.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Most primes that ranks can be computed modulo. */
#define IDS_MAX_PRIMES 1000u

/** Options of ids_rank_table_create(); set struct_size, the rest to 0 for the defaults. */
typedef struct ids_rank_options {
    size_t struct_size;   /**< sizeof(ids_rank_options) */
    bool exact;           /**< prove the ranks over the rational numbers */
    uint32_t primes;      /**< number of random primes to try, at most IDS_MAX_PRIMES; 0: one */
    uint64_t seed;        /**< seed that the primes are drawn from; 0 is a seed like any other */
    uint32_t field;       /**< a prime p < 2^30: ranks over GF(p), without `exact` and `primes`;
                               0: over the rational numbers */
} ids_rank_options;

/** A finished rank table, one row a degree. Immutable, shareable. */
typedef struct ids_rank_table ids_rank_table;

/** What a rank claims to be. */
typedef enum ids_certainty {
    IDS_CERTAINTY_EXACT = 0,   /**< proved, over the rational numbers or the field asked for */
    IDS_CERTAINTY_MODULAR = 1  /**< `consequences` is a lower bound, and too small with probability
                                    at most 2^-bits; see ids_rank_table_create() */
} ids_certainty;

/** One row: dimensions of the multilinear components of degree n. */
typedef struct ids_rank_row {
    uint32_t degree;         /**< n */
    uint64_t free;           /**< dim F(n): canonical multilinear monomials */
    uint64_t consequences;   /**< dim I(n): rank of all consequences of the identities */
    uint64_t quotient;       /**< dim F(n)/I(n) = free - consequences */
    ids_certainty certainty; /**< what the numbers claim */
    uint32_t bits;           /**< for MODULAR: error probability at most 2^-bits; else 0 */
} ids_rank_row;

/**
 * Ranks of the identities of a presentation in degrees from .. to, by the monomial engine.
 *
 * Over the rational numbers the ranks are computed mod `primes` primes p, drawn at random from the
 * N = 26207278 primes between 2^29 and 2^30. A rank mod p never exceeds the rank over Q, so the
 * largest one is a lower bound. It is too small only if every p divides some minor M != 0 of full
 * rank of the matrix of all consequences, in the monomials of degree n. By Hadamard's inequality M
 * has at most free * b bits, where 2^b bounds the Euclidean norm of the coefficients of each
 * linearised identity; so at most B = free * b / 29 of the N primes divide it, and
 *
 *     2^-bits = (B / (N - primes) + r)^primes
 *
 * where r bounds the probability that combining rows at random has missed one (0 where no rows
 * were combined). The derivation is in lib/field/prime.c. `exact` proves the ranks instead; in
 * degrees below that of every identity, and where the quotient is 0, they are proved anyway.
 *
 * With `field` the ranks are those over GF(p), of the identities as completely linearised; one of
 * which nothing is left mod p, as of x*x for a commutative product mod 2, says nothing there. Where
 * p is at most the number of times that a variable occurs in a term, the linearisation can say less
 * than the identity; ids_rank_table_weakened() tells. For p < 2^20 rows are not combined and the
 * ranks are exact; above, they are exact or have the bound 2^-bits = r.
 *
 * @param ctx           borrowed now, kept.
 * @param presentation  borrowed.
 * @param from, to      1 <= from <= to <= IDS_MAX_DEGREE. Lower degrees are computed as needed.
 * @param options       borrowed; NULL for the defaults.
 * @param table         out, owned: ids_rank_table_free(). On IDS_ERR_LIMIT, IDS_ERR_UNABLE and
 *                      IDS_ERR_CANCELLED it holds the degrees that were finished (maybe none) and
 *                      must be freed too, or is NULL. Not written on other failures but
 *                      IDS_ERR_NOMEM.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degrees out of range, unknown struct_size, too many primes, a
 *                            `field` that is no prime below 2^30, or together with `exact` or
 *                            `primes` > 1
 *         IDS_ERR_DOMAIN     `field` divides a denominator of an identity
 *         IDS_ERR_NOMEM      the allocator refused; *table is then NULL
 *         IDS_ERR_LIMIT      byte budget, 64 bits of monomials, 32 bits of columns; the message
 *                            says how many monomials and columns a degree has, what they need and
 *                            what the budget is
 *         IDS_ERR_UNABLE     `exact`: the coefficients of a degree do not fit the proof, or five
 *                            primes in a row are exceptional
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: see DEVELOPERS.md, "Monomial engine".
 * Threads: up to the context's number; results do not depend on it. Cancel: polled.
 * Border: FLINT, GMP (`exact`: rational reconstruction; before, coefficients of the identities).
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_rank_table_create(ids_ctx *ctx,
                                                      const ids_presentation *presentation,
                                                      uint32_t from, uint32_t to,
                                                      const ids_rank_options *options,
                                                      ids_rank_table **table);

/**
 * Frees a rank table.
 *
 * @param table  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `table` any more.
 * Since: 0.1
 */
IDS_API void ids_rank_table_free(ids_rank_table *table);

/**
 * Number of rows.
 *
 * @param table  borrowed; NULL gives 0.
 * @return one for each degree that was finished.
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API size_t ids_rank_table_count(const ids_rank_table *table);

/**
 * Copies row `index`.
 *
 * @param table  borrowed.
 * @param index  0 .. ids_rank_table_count()-1.
 * @param row    out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_rank_table_row(const ids_rank_table *table, size_t index,
                                                   ids_rank_row *row);

/**
 * Number of primes that were used.
 *
 * @param table  borrowed; NULL gives 0.
 * @return how many primes ids_rank_table_prime() knows; over GF(p): 1.
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API size_t ids_rank_table_prime_count(const ids_rank_table *table);

/**
 * The index-th prime that was used; 0 when out of range.
 *
 * @param table  borrowed; NULL gives 0.
 * @param index  0 .. ids_rank_table_prime_count()-1.
 * @return the prime; 0 when the index is out of range.
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API uint64_t ids_rank_table_prime(const ids_rank_table *table, size_t index);

/**
 * The prime p when the ranks are those over GF(p); 0 over the rational numbers.
 *
 * @param table  borrowed; NULL gives 0.
 * @return p, or 0.
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API uint32_t ids_rank_table_field(const ids_rank_table *table);

/**
 * Whether, over the field of the table, some identity of a degree in it can differ from its
 * linearisation: p is at most the number of times that a variable occurs in each of its terms.
 * False over the rational numbers and for NULL.
 *
 * @param table  borrowed; NULL gives false.
 * @return true when some row is about a linearisation that can be weaker.
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API bool ids_rank_table_weakened(const ids_rank_table *table);

/** Options of ids_partition_table_create(); set struct_size, the rest to 0 for the defaults. */
typedef struct ids_partition_options {
    size_t struct_size;             /**< sizeof(ids_partition_options) */
    uint32_t primes;                /**< number of random primes to try, at most IDS_MAX_PRIMES;
                                         0: one */
    uint64_t seed;                  /**< seed that the primes are drawn from */
    const ids_partition *partition; /**< only this partition, of degree from = to; NULL: all */
    bool cross_check;               /**< compute every degree by the monomial engine too */
} ids_partition_options;

/** A finished rank table by partition. Immutable, shareable. */
typedef struct ids_partition_table ids_partition_table;

/** One row: how often the irreducible module of a partition occurs; or the total of a degree. */
typedef struct ids_partition_row {
    uint32_t degree;         /**< n */
    bool total;              /**< the total: `partition` and `dimension` are empty, the others are
                                  dimensions, sums of multiplicity times dimension */
    ids_partition partition; /**< of n */
    uint64_t dimension;      /**< of its irreducible module */
    uint64_t free;           /**< multiplicity in F(n) */
    uint64_t consequences;   /**< multiplicity in I(n) */
    uint64_t quotient;       /**< multiplicity in F(n)/I(n) = free - consequences */
    ids_certainty certainty; /**< what the numbers claim; those of `free` are exact */
    uint32_t bits;           /**< for MODULAR: error probability at most 2^-bits; else 0 */
} ids_partition_row;

/**
 * Ranks of the identities of a presentation by partition, in degrees from .. to, by the partition
 * engine; for each degree one row a partition, in the order of ids_partition_rank(), then a total.
 *
 * `free` comes from characters and is exact. The multiplicities in the quotient are computed mod
 * `primes` primes p between 2^29 and 2^30 and never too small; one is too large only if every p
 * divides a certain nonzero integer M. Let e be the Young symmetriser of the partition, R and C
 * the orders of its row and column groups. The multiplicity in I(n) is the rank of the vectors
 * e z, z a consequence, in the monomials of degree n; it is at most `free`, and such a vector has
 * Euclidean norm at most R C 2^b, b as in ids_rank_table_create(). So M has at most
 * free * (log2(R C) + b) bits, which bounds the probability as there; what random test vectors
 * can miss, at most 2/p^2 for every block of them, is added.
 *
 * @param ctx           borrowed now, kept.
 * @param presentation  borrowed.
 * @param from, to      1 <= from <= to <= 16. Lower degrees are computed as needed.
 * @param options       borrowed; NULL for the defaults.
 * @param table         out, owned: ids_partition_table_free(). On IDS_ERR_LIMIT and
 *                      IDS_ERR_CANCELLED it holds the degrees that were finished with the first
 *                      prime (maybe none) and must be freed too, or is NULL. Not written on other
 *                      failures but IDS_ERR_NOMEM.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degrees out of range, unknown struct_size, too many primes, a
 *                            partition that is not well formed or of another degree, a
 *                            cross-check of one partition alone
 *         IDS_ERR_NOMEM      the allocator refused; *table is then NULL
 *         IDS_ERR_LIMIT      byte budget; the message says how many unknowns a partition has, what
 *                            they need and what the budget is
 *         IDS_ERR_CANCELLED  cancelled
 *         IDS_ERR_INTERNAL   the cross-check failed: the message gives both numbers
 * Cost: see DEVELOPERS.md, "Partition engine".
 * Threads: up to the context's number; results do not depend on it. Cancel: polled.
 * Border: GMP (coefficients of the identities; with `cross_check` as ids_rank_table_create()).
 * Source: Young's seminormal form; equivariant maps to skew Specht modules. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_partition_table_create(ids_ctx *ctx,
                                                           const ids_presentation *presentation,
                                                           uint32_t from, uint32_t to,
                                                           const ids_partition_options *options,
                                                           ids_partition_table **table);

/**
 * Frees a table.
 *
 * @param table  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `table` any more.
 * Since: 0.1
 */
IDS_API void ids_partition_table_free(ids_partition_table *table);

/**
 * Number of rows.
 *
 * @param table  borrowed; NULL gives 0.
 * @return number of rows, totals included.
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API size_t ids_partition_table_count(const ids_partition_table *table);

/**
 * Copies row `index`.
 *
 * @param table  borrowed.
 * @param index  0 .. ids_partition_table_count()-1.
 * @param row    out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_partition_table_row(const ids_partition_table *table,
                                                        size_t index, ids_partition_row *row);

/**
 * Number of primes that were used.
 *
 * @param table  borrowed; NULL gives 0.
 * @return how many primes ids_partition_table_prime() knows.
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API size_t ids_partition_table_prime_count(const ids_partition_table *table);

/**
 * The index-th prime that was used; 0 when out of range.
 *
 * @param table  borrowed; NULL gives 0.
 * @param index  0 .. ids_partition_table_prime_count()-1.
 * @return the prime; 0 when the index is out of range.
 * Cost: constant, no allocation. Threads: any number may share `table`. Since: 0.1
 */
IDS_API uint64_t ids_partition_table_prime(const ids_partition_table *table, size_t index);

#ifdef __cplusplus
}
#endif

#endif
