/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file answer.h
 * Rank tables: how many monomials of each degree the identities leave independent.
 */
#ifndef IDSPAN_ANSWER_H
#define IDSPAN_ANSWER_H

#include <idspan/identity.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Options of ids_rank_table(); set struct_size, the rest to 0 for the defaults. */
typedef struct ids_rank_options {
    size_t struct_size;   /**< sizeof(ids_rank_options) */
    bool exact;           /**< prove the ranks over the rational numbers */
    uint32_t primes;      /**< number of random primes to try; 0: one */
    uint64_t seed;        /**< seed that the primes are drawn from; 0 is a seed like any other */
} ids_rank_options;

/** A finished rank table, one row a degree. Immutable, shareable. */
typedef struct ids_rank_table ids_rank_table;

/** What a rank claims to be. */
typedef enum ids_certainty {
    IDS_CERTAINTY_EXACT = 0,   /**< proved over the rational numbers */
    IDS_CERTAINTY_MODULAR = 1  /**< ranks mod random primes: `consequences` is a lower bound, and
                                    too small with probability at most 2^-bits */
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
 * @param ctx           borrowed now, kept.
 * @param presentation  borrowed.
 * @param from, to      1 <= from <= to <= IDS_MAX_DEGREE. Lower degrees are computed as needed.
 * @param options       borrowed; NULL for the defaults.
 * @param table         out, owned: ids_rank_table_free(). On IDS_ERR_LIMIT and IDS_ERR_CANCELLED
 *                      it holds the degrees that were finished (maybe none) and must be freed too.
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_NOMEM, IDS_ERR_LIMIT (the message says how many columns a
 *         degree would have and what the budget is), IDS_ERR_CANCELLED
 * Cost: see DEVELOPERS.md, "Monomial engine". Threads: up to the context's number; results do not
 * depend on it. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_rank_table_create(ids_ctx *ctx,
                                                      const ids_presentation *presentation,
                                                      uint32_t from, uint32_t to,
                                                      const ids_rank_options *options,
                                                      ids_rank_table **table);

/** Frees a rank table; NULL is fine. Since: 0.1 */
IDS_API void ids_rank_table_free(ids_rank_table *table);

/** Number of rows; 0 for NULL. Since: 0.1 */
IDS_API size_t ids_rank_table_count(const ids_rank_table *table);

/** Copies row `index`. @return IDS_OK, IDS_ERR_ARG. Since: 0.1 */
IDS_API IDS_MUST_USE ids_status ids_rank_table_row(const ids_rank_table *table, size_t index,
                                                   ids_rank_row *row);

/** Number of primes that were used. Since: 0.1 */
IDS_API size_t ids_rank_table_prime_count(const ids_rank_table *table);

/** The index-th prime that was used; 0 when out of range. Since: 0.1 */
IDS_API uint64_t ids_rank_table_prime(const ids_rank_table *table, size_t index);

#ifdef __cplusplus
}
#endif

#endif
