/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file fresh.h
 * The identities that hold in a model and do not follow from those of the presentation.
 */
#ifndef IDSPAN_FRESH_H
#define IDSPAN_FRESH_H

#include <idspan/answer.h>
#include <idspan/model.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Options of ids_fresh_create(); set struct_size, the rest to 0 for the defaults. */
typedef struct ids_fresh_options {
    size_t struct_size; /**< sizeof(ids_fresh_options) */
    uint32_t primes;    /**< random primes to compute with, at most IDS_MAX_PRIMES; 0: one */
    uint64_t seed;      /**< seed that primes and points are drawn from */
    bool exact;         /**< an algebra is evaluated on all tuples of basis elements, not at random
                             points; refused where these are too many */
    bool table_only;    /**< only count: no identities are written down, and none become known */
} ids_fresh_options;

/** One row of the table: a partition, or the whole degree. */
typedef struct ids_fresh_row {
    uint32_t degree;         /**< degree */
    bool total;              /**< the row of the whole degree: then numbers are dimensions */
    ids_partition partition; /**< partition, unless total */
    uint64_t dimension;      /**< of its irreducible module; 0 for a total */
    uint64_t free;           /**< multiplicity in the free algebra */
    uint64_t holding;        /**< in the identities that hold in the model */
    uint64_t consequences;   /**< in what follows from the identities that are known */
    uint64_t fresh;          /**< holding - consequences */
    ids_certainty certainty; /**< EXACT: `fresh` is proved */
    uint32_t bits;           /**< MODULAR: `fresh` is wrong with probability at most 2^-bits */
} ids_fresh_row;

/** The identities of a model that are new, degree by degree. Immutable, shareable. */
typedef struct ids_fresh ids_fresh;

/**
 * Finds what holds in a model and does not follow from what is known, in a range of degrees.
 *
 * In each degree and for each partition, `holding` and `consequences` are computed modulo random
 * primes. The identities of the presentation must hold in the model, which is verified first; so
 * where both numbers agree they are exact, except in a model over another presentation, whose
 * identities are used modulo the primes too. Where they do not agree, one identity is found for
 * each new irreducible module, unless only the table is wanted. It holds in the model and does not
 * follow from what was known, both of which has been verified; none is superfluous. In all higher
 * degrees it counts as known.
 *
 * @param ctx      borrowed now, kept.
 * @param model    kept: must outlive the result.
 * @param from     first degree, at least 1.
 * @param to       last degree, from .. 16.
 * @param options  borrowed; NULL for the defaults.
 * @param fresh    out, owned: ids_fresh_free(). Also written with IDS_ERR_LIMIT and
 *                 IDS_ERR_CANCELLED: then it has the degrees that were finished.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degrees out of range, unknown struct_size, too many primes
 *         IDS_ERR_DOMAIN     an identity of the presentation does not hold in the model; the
 *                            message names it
 *         IDS_ERR_UNABLE     every prime that was drawn divides a denominator of the model, or they
 *                            contradict each other; coefficients of an identity do not come out
 *                            of 40 primes
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget; a degree over 9 in an algebra, too many tuples
 *                            for `exact`
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: a table by partition for the consequences; for words about as much; for an algebra
 * degree! evaluations at some points.
 * Threads: up to the context's number, for the table by partition. Cancel: polled.
 * Border: GMP (coefficients), FLINT (lattices). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_fresh_create(ids_ctx *ctx, const ids_model *model,
                                                 uint32_t from, uint32_t to,
                                                 const ids_fresh_options *options,
                                                 ids_fresh **fresh);

/**
 * Frees a result.
 *
 * @param fresh  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `fresh` any more.
 * Since: 0.1
 */
IDS_API void ids_fresh_free(ids_fresh *fresh);

/**
 * Number of rows: in each degree one a partition, then the total.
 *
 * @param fresh  borrowed; NULL gives 0.
 * @return how many.
 * Cost: constant, no allocation. Threads: any number may share `fresh`. Since: 0.1
 */
IDS_API size_t ids_fresh_count(const ids_fresh *fresh);

/**
 * Copies a row.
 *
 * @param fresh  borrowed.
 * @param index  0 .. ids_fresh_count()-1.
 * @param row    out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range
 * Cost: constant, no allocation. Threads: any number may share `fresh`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_fresh_row_get(const ids_fresh *fresh, size_t index,
                                                  ids_fresh_row *row);

/**
 * Number of primes that were used.
 *
 * @param fresh  borrowed; NULL gives 0.
 * @return how many.
 * Cost: constant, no allocation. Threads: any number may share `fresh`. Since: 0.1
 */
IDS_API size_t ids_fresh_prime_count(const ids_fresh *fresh);

/**
 * A prime that was used.
 *
 * @param fresh  borrowed; NULL gives 0.
 * @param index  0 .. ids_fresh_prime_count()-1; 0 is given beyond.
 * @return the prime.
 * Cost: constant, no allocation. Threads: any number may share `fresh`. Since: 0.1
 */
IDS_API uint64_t ids_fresh_prime(const ids_fresh *fresh, size_t index);

/** A new identity. Without it some of what is new would be lost. */
typedef struct ids_fresh_identity {
    const char *name;          /**< borrowed; model, degree and number: special-8-1 */
    const char *statement;     /**< borrowed; as a line of a presentation */
    const char *polynomial;    /**< borrowed; integers with content 1 */
    const char *alternating;   /**< borrowed; variables to be alternated in, as in "a,b,c d,e" */
    uint32_t degree;           /**< degree */
    ids_partition partition;   /**< partition it was found for */
    const char *modules;       /**< borrowed; what is lost without it, as in "7, 6+1" */
    uint64_t terms;            /**< terms of the polynomial */
    uint64_t first_terms;      /**< of the solution that was found first */
    const char *largest;       /**< borrowed; largest absolute value of a coefficient, in digits */
    const char *first_largest; /**< borrowed; of the solution that was found first */
    uint32_t bits;             /**< 0: that it holds is proved; else wrong with 2^-bits at most */
} ids_fresh_identity;

/**
 * Number of identities that were found.
 *
 * @param fresh  borrowed; NULL gives 0.
 * @return how many.
 * Cost: constant, no allocation. Threads: any number may share `fresh`. Since: 0.1
 */
IDS_API size_t ids_fresh_identity_count(const ids_fresh *fresh);

/**
 * Describes an identity that was found, by degree.
 *
 * @param fresh     borrowed.
 * @param index     0 .. ids_fresh_identity_count()-1.
 * @param identity  out, written only on IDS_OK; its strings live as long as `fresh`.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range
 * Cost: constant, no allocation. Threads: any number may share `fresh`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_fresh_identity_get(const ids_fresh *fresh, size_t index,
                                                       ids_fresh_identity *identity);

/**
 * Writes the presentation with the identities that were found, each with a comment on its degree,
 * its partition, and where it comes from.
 *
 * @param ctx    borrowed.
 * @param fresh  borrowed.
 * @param text   out, owned: ids_string_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: linear in the text. Threads: any number may share `fresh`, each with a ctx of its own.
 * Cancel: not polled. Border: GMP (coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_fresh_presentation(ids_ctx *ctx, const ids_fresh *fresh,
                                                       char **text);

#ifdef __cplusplus
}
#endif

#endif
