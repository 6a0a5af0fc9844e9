/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file follows.h
 * Whether a candidate follows from the identities of a presentation; derivations that prove it,
 * witnesses and counterexample algebras that refute it, and the checker of all of them.
 */
#ifndef IDSPAN_FOLLOWS_H
#define IDSPAN_FOLLOWS_H

#include <idspan/algebra.h>
#include <idspan/answer.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Options of the calls below; set struct_size, the rest to 0 for the defaults. */
typedef struct ids_follows_options {
    size_t struct_size; /**< sizeof(ids_follows_options) */
    uint32_t primes;    /**< number of random primes to decide with, at most IDS_MAX_PRIMES;
                             0: one. Derivations and witnesses need no number of them */
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
 *
 * @param ctx           borrowed now, kept.
 * @param presentation  borrowed.
 * @param index         0 .. ids_presentation_count(presentation, IDS_ROLE_CANDIDATE)-1.
 * @param options       borrowed; NULL for the defaults.
 * @param follows       out, owned: ids_follows_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, index out of range, unknown struct_size, too many primes
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget, a candidate of degree over 16
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: as two tables by partition in the degree of the candidate.
 * Threads: up to the context's number. Cancel: polled.
 * Border: GMP (coefficients of the identities). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_follows_decide(ids_ctx *ctx,
                                                   const ids_presentation *presentation,
                                                   size_t index, const ids_follows_options *options,
                                                   ids_follows **follows);

/**
 * Frees an answer.
 *
 * @param follows  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `follows` any more.
 * Since: 0.1
 */
IDS_API void ids_follows_free(ids_follows *follows);

/**
 * Whether the candidate follows.
 *
 * @param follows  borrowed; NULL gives false.
 * @return true: it follows.
 * Cost: constant, no allocation. Threads: any number may share `follows`. Since: 0.1
 */
IDS_API bool ids_follows_answer(const ids_follows *follows);

/**
 * Degree of the candidate.
 *
 * @param follows  borrowed; NULL gives 0.
 * @return the degree.
 * Cost: constant, no allocation. Threads: any number may share `follows`. Since: 0.1
 */
IDS_API uint32_t ids_follows_degree(const ids_follows *follows);

/**
 * What the answer claims.
 *
 * @param follows  borrowed; NULL gives IDS_CERTAINTY_MODULAR with 0 bits.
 * @param bits     out, may be NULL: as in ids_partition_row.
 * @return IDS_CERTAINTY_EXACT or IDS_CERTAINTY_MODULAR.
 * Cost: constant, no allocation. Threads: any number may share `follows`. Since: 0.1
 */
IDS_API ids_certainty ids_follows_certainty(const ids_follows *follows, uint32_t *bits);

/**
 * Number of partitions for which the candidate fails: 0 when it follows.
 *
 * @param follows  borrowed; NULL gives 0.
 * @return how many partitions ids_follows_partition() knows.
 * Cost: constant, no allocation. Threads: any number may share `follows`. Since: 0.1
 */
IDS_API size_t ids_follows_count(const ids_follows *follows);

/**
 * One partition for which the candidate fails.
 *
 * @param follows       borrowed.
 * @param index         0 .. ids_follows_count()-1.
 * @param partition     out, written only on IDS_OK.
 * @param multiplicity  out: how much larger the multiplicity in the consequences becomes when the
 *                      candidate is imposed too, at least 1.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range
 * Cost: constant, no allocation. Threads: any number may share `follows`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_follows_partition(const ids_follows *follows, size_t index,
                                                      ids_partition *partition,
                                                      uint64_t *multiplicity);

/* ---- derivations ----------------------------------------------------------------------------- */

/**
 * A derivation: the candidate, in its own variables, as a sum of rational multiples of
 * consequences. A consequence is the complete linearisation of an identity with monomials in the
 * place of its variables, put into a context: a monomial with one leaf left open. Immutable,
 * shareable.
 */
typedef struct ids_derivation ids_derivation;

/**
 * Finds a derivation of a candidate and makes it short.
 *
 * The search is among the consequences with the variables of the candidate as written, each as
 * often as there; over the rational numbers that is as good as the linearised candidate, and
 * smaller. The result has been added up exactly.
 *
 * @param ctx           borrowed now, kept.
 * @param presentation  kept: must outlive the derivation.
 * @param index         0 .. ids_presentation_count(presentation, IDS_ROLE_CANDIDATE)-1.
 * @param options       borrowed; NULL for the defaults.
 * @param derivation    out, owned: ids_derivation_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_DOMAIN     there is none: the candidate does not follow, modulo the prime that
 *                            was drawn
 *         IDS_ERR_UNABLE     coefficients too large
 *         IDS_ERR_ARG        NULL, index out of range, unknown struct_size, too many primes
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget, 2^32 consequences
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: one elimination with a row a monomial and a column a consequence, then up to some hundred
 * to shorten, less when they are large.
 * Threads: one a ctx. Cancel: polled. Border: GMP, FLINT (the coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_derivation_find(ids_ctx *ctx,
                                                    const ids_presentation *presentation,
                                                    size_t index,
                                                    const ids_follows_options *options,
                                                    ids_derivation **derivation);

/**
 * Frees a derivation.
 *
 * @param derivation  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `derivation` any more.
 * Since: 0.1
 */
IDS_API void ids_derivation_free(ids_derivation *derivation);

/**
 * Number of terms.
 *
 * @param derivation  borrowed; NULL gives 0.
 * @return the number of terms.
 * Cost: constant, no allocation. Threads: any number may share `derivation`. Since: 0.1
 */
IDS_API size_t ids_derivation_count(const ids_derivation *derivation);

/**
 * Number of terms of the solution that was found first, before it was made short.
 *
 * @param derivation  borrowed; NULL gives 0.
 * @return the number of terms; 0 for NULL.
 * Cost: constant, no allocation. Threads: any number may share `derivation`. Since: 0.1
 */
IDS_API size_t ids_derivation_first_count(const ids_derivation *derivation);

/**
 * Writes a derivation as a file that ids_certificate_check() reads.
 *
 * @param ctx         borrowed.
 * @param derivation  borrowed.
 * @param sink        receives the text piece by piece; called from this thread.
 * @param sink_user   passed to `sink`; borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_IO     the sink stopped
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `derivation`, with a ctx each.
 * Cancel: not polled. Border: GMP (digits of coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_derivation_write(ids_ctx *ctx, const ids_derivation *derivation,
                                                     ids_sink_fn sink, void *sink_user);

/**
 * Writes a derivation as LaTeX: the linearised identities that are used, then one formula, a line
 * a term, to be read with \\input into a document. No package is needed.
 *
 * @param ctx         borrowed.
 * @param derivation  borrowed.
 * @param sink        receives the text piece by piece; called from this thread.
 * @param sink_user   passed to `sink`; borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_IO     the sink stopped
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `derivation`, with a ctx each.
 * Cancel: not polled. Border: GMP (digits of coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_derivation_latex(ids_ctx *ctx, const ids_derivation *derivation,
                                                     ids_sink_fn sink, void *sink_user);

/* ---- witnesses ------------------------------------------------------------------------------- */

/**
 * A witness: an integer for each monomial in the variables of the candidate as written, each as
 * often as there. As a linear functional it vanishes on all consequences and not on the candidate.
 * Immutable, shareable.
 */
typedef struct ids_witness ids_witness;

/**
 * Finds a witness against a candidate, with few and small values.
 *
 * It has been evaluated on all consequences, with integers.
 *
 * @param ctx           borrowed now, kept.
 * @param presentation  kept: must outlive the witness.
 * @param index         0 .. ids_presentation_count(presentation, IDS_ROLE_CANDIDATE)-1.
 * @param options       borrowed; NULL for the defaults.
 * @param witness       out, owned: ids_witness_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_DOMAIN     there is none: the candidate follows, modulo the prime that was drawn
 *         IDS_ERR_UNABLE     values too large
 *         IDS_ERR_ARG        NULL, index out of range, unknown struct_size, too many primes
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget, 2^32 consequences
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: an elimination with a column a monomial and a row a consequence. Threads: one a ctx.
 * Cancel: polled. Border: GMP, FLINT (the values). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_witness_find(ids_ctx *ctx, const ids_presentation *presentation,
                                                 size_t index, const ids_follows_options *options,
                                                 ids_witness **witness);

/**
 * Frees a witness.
 *
 * @param witness  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `witness` any more.
 * Since: 0.1
 */
IDS_API void ids_witness_free(ids_witness *witness);

/**
 * Number of values that are not 0.
 *
 * @param witness  borrowed; NULL gives 0.
 * @return the number of values.
 * Cost: constant, no allocation. Threads: any number may share `witness`. Since: 0.1
 */
IDS_API size_t ids_witness_count(const ids_witness *witness);

/**
 * Writes a witness as a file that ids_certificate_check() reads.
 *
 * @param ctx        borrowed.
 * @param witness    borrowed.
 * @param sink       receives the text piece by piece; called from this thread.
 * @param sink_user  passed to `sink`; borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_IO     the sink stopped
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `witness`, with a ctx each.
 * Cancel: not polled. Border: GMP (digits of values). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_witness_write(ids_ctx *ctx, const ids_witness *witness,
                                                  ids_sink_fn sink, void *sink_user);

/* ---- counterexamples ------------------------------------------------------------------------- */

/** Limits of a search; set struct_size, the rest to 0 for the defaults. */
typedef struct ids_counterexample_options {
    size_t struct_size; /**< sizeof(ids_counterexample_options) */
    uint32_t dimension; /**< largest dimension; 0: 30 */
    uint64_t entries;   /**< largest numerator and denominator of a structure constant; 0: 100 */
    uint64_t steps;     /**< elementary steps, some 100,000 to 10,000,000 a second; 0: 10,000,000 */
    uint64_t seed;      /**< of what is chosen at random */
} ids_counterexample_options;

/**
 * A counterexample: a finite-dimensional algebra in which the identities hold and a candidate does
 * not, with values of the candidate's variables where it is not 0. Immutable,
 * shareable.
 */
typedef struct ids_counterexample ids_counterexample;

/**
 * Looks for a counterexample of small dimension with small structure constants.
 *
 * A candidate that does not follow fails in a nilpotent algebra; such algebras are made of
 * functionals as in ids_witness_find(), then smaller algebras are searched constant by constant.
 * The smallest that was found is returned; there can be smaller ones. It has been tested exactly,
 * as by ids_algebra_holds(). The same options give the same algebra, whatever the machine.
 *
 * @param ctx             borrowed now, kept.
 * @param presentation    kept: must outlive the counterexample.
 * @param index           0 .. ids_presentation_count(presentation, IDS_ROLE_CANDIDATE)-1.
 * @param options         borrowed; NULL for the defaults.
 * @param counterexample  out, owned: ids_counterexample_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_LIMIT      none was found within the limits, perhaps because the candidate
 *                            follows; byte budget
 *         IDS_ERR_DOMAIN     the candidate is 0
 *         IDS_ERR_ARG        NULL, index out of range, unknown struct_size, dimension over
 *                            IDS_MAX_DIMENSION
 *         IDS_ERR_UNABLE     a coefficient of the candidate has the denominator 2^30 - 35
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: the steps; at least a list of all consequences in the candidate's variables.
 * Threads: one a ctx. Cancel: polled.
 * Border: GMP and FLINT (coefficients of the identities and of trial algebras).
 * Source: the largest ideal in the kernel of a functional, as in F. S. Macaulay's inverse systems;
 * backtracking with watched conditions. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_counterexample_find(ids_ctx *ctx,
                                                        const ids_presentation *presentation,
                                                        size_t index,
                                                        const ids_counterexample_options *options,
                                                        ids_counterexample **counterexample);

/**
 * Frees a counterexample.
 *
 * @param counterexample  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use it any more.
 * Since: 0.1
 */
IDS_API void ids_counterexample_free(ids_counterexample *counterexample);

/**
 * The algebra of a counterexample. It has the operations of the presentation.
 *
 * @param counterexample  borrowed; NULL gives NULL.
 * @return borrowed: lives as long as the counterexample.
 * Cost: constant. Threads: any. Since: 0.1
 */
IDS_API const ids_algebra *ids_counterexample_algebra(const ids_counterexample *counterexample);

/**
 * Coordinates of the value of a variable of the candidate, which are integers.
 *
 * @param counterexample  borrowed.
 * @param variable        from 0, in the order of the names of the candidate's variables.
 * @param coordinates     out: as many as the dimension.
 * @param capacity        entries that fit.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, no such variable, capacity too small
 * Cost: the dimension. Threads: any. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_counterexample_value(const ids_counterexample *counterexample,
                                                         uint32_t variable, int64_t *coordinates,
                                                         size_t capacity);

/**
 * Writes a counterexample as an algebra file that ids_algebra_read() reads.
 *
 * Comments before the table say what it shows, so that ids_certificate_check() can verify it.
 *
 * @param ctx             borrowed.
 * @param counterexample  borrowed.
 * @param sink            borrowed: receives the text.
 * @param sink_user       borrowed: passed to sink; may be NULL.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_IO     the sink stopped
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: linear in the text. Threads: one a ctx. Cancel: not polled.
 * Border: GMP (coefficients of the identities). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_counterexample_write(ids_ctx *ctx,
                                                         const ids_counterexample *counterexample,
                                                         ids_sink_fn sink, void *sink_user);

/**
 * Writes the multiplication table of a counterexample as LaTeX, to be read with \\input into a
 * document. No package is needed.
 *
 * @param ctx             borrowed.
 * @param counterexample  borrowed.
 * @param sink            borrowed: receives the text.
 * @param sink_user       borrowed: passed to sink; may be NULL.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_IO     the sink stopped
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: linear in the text. Threads: one a ctx. Cancel: not polled.
 * Border: GMP (coefficients of the identities). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_counterexample_latex(ids_ctx *ctx,
                                                         const ids_counterexample *counterexample,
                                                         ids_sink_fn sink, void *sink_user);

/* ---- checking -------------------------------------------------------------------------------- */

/** What ids_certificate_check() has verified. */
typedef struct ids_check_report {
    bool follows;          /**< a derivation: the candidate follows; else it does not */
    char claim[64];        /**< name of the candidate, "" when it has none */
    uint32_t degree;       /**< its degree */
    uint64_t identities;   /**< identities in the file */
    uint64_t terms;        /**< terms of the derivation, values of the witness, constants of the
                                counterexample */
    uint64_t monomials;    /**< derivation: monomials that were added up */
    uint64_t consequences; /**< witness: consequences that it was evaluated on */
    uint32_t dimension;    /**< counterexample: dimension of the algebra; else 0 */
    uint64_t tuples;       /**< counterexample: tuples of basis elements for which the identities
                                hold */
} ids_check_report;

/**
 * Checks a derivation, witness or counterexample file, from the identities that the file itself
 * contains.
 *
 * A derivation is multiplied out and added up, exactly. A witness is evaluated on every identity
 * with all monomials for its variables in all contexts, and on the candidate. A counterexample is
 * multiplied out, with fractions: the complete linearisation of every identity on all tuples of
 * basis elements, the candidate at the values that the file names. The code shares the readers of
 * presentations and algebras and the canonical form of monomials with the solvers, nothing else.
 *
 * @param ctx     borrowed.
 * @param text    borrowed; any bytes are safe.
 * @param length  bytes of text.
 * @param source  borrowed: name of the text for messages; NULL: "input".
 * @param report  out, written only on IDS_OK: then all of it is verified.
 * @return IDS_OK
 *         IDS_ERR_PARSE      not such a file, or damaged; with place
 *         IDS_ERR_DOMAIN     the claim is not shown by what the file says
 *         IDS_ERR_LIMIT      byte budget, a limit of presentations
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_ARG        NULL
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: derivation: linear in the terms when multiplied out; witness: the number of consequences;
 * counterexample: dimension^degree, less where products are 0.
 * Threads: one a ctx. Cancel: polled.
 * Border: GMP (exact sums; numbers in the file have at most 10,000 digits). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_certificate_check(ids_ctx *ctx, const char *text, size_t length,
                                                      const char *source, ids_check_report *report);

#ifdef __cplusplus
}
#endif

#endif
