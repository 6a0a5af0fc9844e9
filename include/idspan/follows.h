/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file follows.h
 * Whether a candidate follows from the identities of a presentation; derivations that prove it,
 * witnesses that refute it, and the checker of both.
 */
#ifndef IDSPAN_FOLLOWS_H
#define IDSPAN_FOLLOWS_H

#include <idspan/answer.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Options of the calls below; set struct_size, the rest to 0 for the defaults. */
typedef struct ids_follows_options {
    size_t struct_size; /**< sizeof(ids_follows_options) */
    uint32_t primes;    /**< number of random primes to decide with; 0: one */
    uint64_t seed;      /**< seed that primes and orders are drawn from */
} ids_follows_options;

/* ---- the answer ------------------------------------------------------------------------------ */

/** The answer for one candidate. Immutable, shareable. */
typedef struct ids_follows ids_follows;

/**
 * Decides whether a candidate follows from the identities, over the rational numbers.
 *
 * For every partition of the candidate's degree the multiplicity in the consequences is computed
 * by ids_partition_table_create() twice, without and with the candidate as a further identity. The
 * candidate follows when they agree. A rank mod p can only be too small; so a wrong "follows"
 * needs ranks with the candidate that are too small, a wrong "does not follow" ranks without it
 * that are too small, and the probability of either is bounded by the bound of that table.
 *
 * A candidate that cancels to 0 follows, and that is exact.
 * @param ctx           borrowed now, kept.
 * @param presentation  borrowed.
 * @param index         0 .. ids_presentation_count(presentation, IDS_ROLE_CANDIDATE)-1.
 * @param options       borrowed; NULL for the defaults.
 * @param follows       out, owned: ids_follows_free(); written only on IDS_OK.
 * @return IDS_OK, IDS_ERR_ARG (NULL, index, struct_size), IDS_ERR_NOMEM, IDS_ERR_LIMIT,
 *         IDS_ERR_CANCELLED
 * Cost: as two tables by partition in the degree of the candidate. Threads: up to the context's
 * number. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_follows_decide(ids_ctx *ctx,
                                                   const ids_presentation *presentation,
                                                   size_t index, const ids_follows_options *options,
                                                   ids_follows **follows);

/** Frees an answer; NULL is fine. Since: 0.1 */
IDS_API void ids_follows_free(ids_follows *follows);

/** Whether the candidate follows; false for NULL. Since: 0.1 */
IDS_API bool ids_follows_answer(const ids_follows *follows);

/** Degree of the candidate; 0 for NULL. Since: 0.1 */
IDS_API uint32_t ids_follows_degree(const ids_follows *follows);

/** What the answer claims; *bits (may be NULL) as in ids_partition_row. Since: 0.1 */
IDS_API ids_certainty ids_follows_certainty(const ids_follows *follows, uint32_t *bits);

/** Number of partitions for which the candidate fails: 0 when it follows. Since: 0.1 */
IDS_API size_t ids_follows_count(const ids_follows *follows);

/**
 * One partition for which the candidate fails.
 *
 * @param partition     out.
 * @param multiplicity  out: how much larger the multiplicity in the consequences becomes when the
 *                      candidate is imposed too, at least 1.
 * @return IDS_OK, IDS_ERR_ARG (NULL, index out of range). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_follows_partition(const ids_follows *follows, size_t index,
                                                      ids_partition *partition,
                                                      uint64_t *multiplicity);

/* ---- derivations ----------------------------------------------------------------------------- */

/**
 * A derivation: the candidate, in its own variables, as a sum of rational multiples of
 * consequences. A consequence is the complete linearisation of an identity with monomials in the
 * place of its variables, put into a context: a monomial with one leaf left open. Immutable.
 */
typedef struct ids_derivation ids_derivation;

/**
 * Finds a derivation of a candidate and makes it short.
 *
 * The search is among the consequences with the variables of the candidate as written, each as
 * often as there; over the rational numbers that is as good as the linearised candidate, and
 * smaller. The result has been added up exactly.
 * @param ctx           borrowed now, kept.
 * @param presentation  kept: must outlive the derivation.
 * @param index         of the candidate.
 * @param options       borrowed; NULL for the defaults.
 * @param derivation    out, owned: ids_derivation_free(); written only on IDS_OK.
 * @return IDS_OK; IDS_ERR_DOMAIN (there is none: the candidate does not follow, modulo the prime
 *         that was drawn); IDS_ERR_UNABLE (coefficients too large); IDS_ERR_ARG, IDS_ERR_NOMEM,
 *         IDS_ERR_LIMIT, IDS_ERR_CANCELLED
 * Cost: one elimination with a row a monomial and a column a consequence, then up to some hundred
 * to shorten, less when they are large. Border: GMP, FLINT (the coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_derivation_find(ids_ctx *ctx,
                                                    const ids_presentation *presentation,
                                                    size_t index,
                                                    const ids_follows_options *options,
                                                    ids_derivation **derivation);

/** Frees a derivation; NULL is fine. Since: 0.1 */
IDS_API void ids_derivation_free(ids_derivation *derivation);

/** Number of terms; 0 for NULL. Since: 0.1 */
IDS_API size_t ids_derivation_count(const ids_derivation *derivation);

/** Number of terms of the solution that was found first, before it was made short. Since: 0.1 */
IDS_API size_t ids_derivation_first_count(const ids_derivation *derivation);

/**
 * Writes a derivation as a file that ids_certificate_check() reads.
 *
 * @param ctx         borrowed.
 * @param derivation  borrowed.
 * @param sink        receives the text; sink_user is passed to it.
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_IO (the sink stopped), IDS_ERR_NOMEM, IDS_ERR_LIMIT.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_derivation_write(ids_ctx *ctx, const ids_derivation *derivation,
                                                     ids_sink_fn sink, void *sink_user);

/**
 * Writes a derivation as LaTeX: the linearised identities that are used, then one formula, a line
 * a term, to be read with \input into a document. No package is needed.
 *
 * @return as ids_derivation_write(). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_derivation_latex(ids_ctx *ctx, const ids_derivation *derivation,
                                                     ids_sink_fn sink, void *sink_user);

/* ---- witnesses ------------------------------------------------------------------------------- */

/**
 * A witness: an integer for each monomial in the variables of the candidate as written, each as
 * often as there. As a linear functional it vanishes on all consequences and not on the candidate.
 * Immutable.
 */
typedef struct ids_witness ids_witness;

/**
 * Finds a witness against a candidate, with few and small values.
 *
 * It has been evaluated on all consequences, with integers.
 * @param presentation  kept: must outlive the witness.
 * @param witness       out, owned: ids_witness_free(); written only on IDS_OK.
 * @return as ids_derivation_find(); IDS_ERR_DOMAIN: the candidate follows.
 * Cost: an elimination with a column a monomial and a row a consequence. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_witness_find(ids_ctx *ctx, const ids_presentation *presentation,
                                                 size_t index, const ids_follows_options *options,
                                                 ids_witness **witness);

/** Frees a witness; NULL is fine. Since: 0.1 */
IDS_API void ids_witness_free(ids_witness *witness);

/** Number of values that are not 0; 0 for NULL. Since: 0.1 */
IDS_API size_t ids_witness_count(const ids_witness *witness);

/** Writes a witness as a file that ids_certificate_check() reads. @return as
 * ids_derivation_write(). Since: 0.1 */
IDS_API IDS_MUST_USE ids_status ids_witness_write(ids_ctx *ctx, const ids_witness *witness,
                                                  ids_sink_fn sink, void *sink_user);

/* ---- checking -------------------------------------------------------------------------------- */

/** What ids_certificate_check() has verified. */
typedef struct ids_check_report {
    bool follows;          /**< a derivation: the candidate follows; else a witness: it does not */
    char claim[64];        /**< name of the candidate, "" when it has none */
    uint32_t degree;       /**< its degree */
    uint64_t identities;   /**< identities in the file */
    uint64_t terms;        /**< terms of the derivation, values of the witness */
    uint64_t monomials;    /**< derivation: monomials that were added up */
    uint64_t consequences; /**< witness: consequences that it was evaluated on */
} ids_check_report;

/**
 * Checks a derivation or witness file, from the identities that the file itself contains.
 *
 * A derivation is multiplied out and added up, exactly. A witness is evaluated on every identity
 * with all monomials for its variables in all contexts, and on the candidate. The code shares the
 * reader of presentations and the canonical form of monomials with the solvers, nothing else.
 * @param ctx     borrowed.
 * @param text    borrowed; any bytes are safe.
 * @param length  bytes of text.
 * @param source  borrowed: name of the text for messages; NULL: "input".
 * @param report  out, written only on IDS_OK: then all of it is verified.
 * @return IDS_OK; IDS_ERR_PARSE (not such a file, or damaged; with place); IDS_ERR_DOMAIN (the
 *         claim is not shown by what the file says); IDS_ERR_LIMIT, IDS_ERR_NOMEM, IDS_ERR_ARG,
 *         IDS_ERR_CANCELLED
 * Cost: derivation: linear in the terms when multiplied out; witness: the number of consequences.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_certificate_check(ids_ctx *ctx, const char *text, size_t length,
                                                      const char *source, ids_check_report *report);

#ifdef __cplusplus
}
#endif

#endif
