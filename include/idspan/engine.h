/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file engine.h
 * What the monomial engine works with: normal forms, reduction to them, their products, and the
 * matrices of consequences.
 *
 * The multilinear polynomials of degree n, modulo the consequences of a presentation's identities,
 * have a basis of monomials, the normal forms of degree n. They are chosen degree by degree: a
 * normal form is a product of normal forms of lower degrees, on disjoint sets of labels. Any set
 * of n labels has "the same" normal forms: the i-th smallest label takes the place of label i.
 */
#ifndef IDSPAN_ENGINE_H
#define IDSPAN_ENGINE_H

#include <idspan/identity.h>

#ifdef __cplusplus
extern "C" {
#endif

/* ---- normal forms ---------------------------------------------------------------------------- */

/** Options of ids_normal_forms_create(); set struct_size, the rest to 0 for the defaults. */
typedef struct ids_normal_options {
    size_t struct_size; /**< sizeof(ids_normal_options) */
    bool exact;         /**< over the rational numbers, proved; else modulo a prime */
    uint32_t field;     /**< a prime below 2^30 to work modulo, without `exact`; 0: draw one */
    uint64_t seed;      /**< seed that the prime is drawn from */
} ids_normal_options;

/** The normal forms of the degrees 1 .. N and their products. Immutable, shareable. */
typedef struct ids_normal_forms ids_normal_forms;

/**
 * Computes the normal forms of the degrees 1 .. max_degree.
 *
 * Which monomials they are depends on the presentation alone, but for primes that divide one of
 * certain minors; ids_rank_table_create() says how unlikely that is for a prime that is drawn.
 * With `exact` the normal forms and all their products are proved over the rational numbers.
 *
 * @param ctx           borrowed now, kept.
 * @param presentation  kept: must outlive the normal forms. Candidates play no part.
 * @param max_degree    1 .. IDS_MAX_DEGREE.
 * @param options       borrowed; NULL for the defaults.
 * @param forms         out, owned: ids_normal_forms_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degree out of range, unknown struct_size, `field` no prime
 *                            below 2^30 or together with `exact`
 *         IDS_ERR_DOMAIN     `field` divides a denominator of an identity
 *         IDS_ERR_UNABLE     `exact`: some coefficient does not fit 62 bits above and below, or
 *                            five primes in a row are exceptional
 *         IDS_ERR_LIMIT      byte budget, 2^32 products of normal forms in a degree, 64 bits of
 *                            monomials
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: an elimination a degree; memory 8 bytes for each coefficient of each product (24 with
 * `exact`).
 * Threads: up to the context's number. Cancel: polled.
 * Border: FLINT, GMP (`exact`: rational reconstruction, a few numbers at a time). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_normal_forms_create(ids_ctx *ctx,
                                                        const ids_presentation *presentation,
                                                        uint32_t max_degree,
                                                        const ids_normal_options *options,
                                                        ids_normal_forms **forms);

/**
 * Frees normal forms, after all combinations of them.
 *
 * @param forms  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `forms` any more.
 * Since: 0.1
 */
IDS_API void ids_normal_forms_free(ids_normal_forms *forms);

/**
 * The max_degree of normal forms.
 *
 * @param forms  borrowed; NULL gives 0.
 * @return the max_degree that they were made with.
 * Cost: constant, no allocation. Threads: any number may share `forms`. Since: 0.1
 */
IDS_API uint32_t ids_normal_forms_max_degree(const ids_normal_forms *forms);

/**
 * The prime that coefficients are taken modulo; 0 over the rational numbers.
 *
 * @param forms  borrowed; NULL gives 0.
 * @return the prime, or 0.
 * Cost: constant, no allocation. Threads: any number may share `forms`. Since: 0.1
 */
IDS_API uint32_t ids_normal_forms_prime(const ids_normal_forms *forms);

/**
 * Number of normal forms of a degree; 0 where there is none or the degree is too large.
 *
 * @param forms   borrowed; NULL gives 0.
 * @param degree  any.
 * @return how many; 0 where there is none, in degree 0 and over max_degree.
 * Cost: constant, no allocation. Threads: any number may share `forms`. Since: 0.1
 */
IDS_API uint64_t ids_normal_forms_count(const ids_normal_forms *forms, uint32_t degree);

/**
 * A normal form as a monomial with the labels 1 .. degree.
 *
 * Its factors stand by degree, then by least labels, which is not always the canonical way to
 * write it; but its coefficient is then 1, without a sign.
 *
 * @param ctx     borrowed now, kept by the monomial.
 * @param forms   borrowed; its presentation is kept by the monomial.
 * @param degree  1 .. max_degree.
 * @param index   0 .. ids_normal_forms_count()-1.
 * @param mono    out, owned: ids_mono_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, no such normal form
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: O(degree^2) word operations and one allocation.
 * Threads: any number may share `forms`, with a ctx each. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_normal_forms_mono(ids_ctx *ctx, const ids_normal_forms *forms,
                                                      uint32_t degree, uint64_t index,
                                                      ids_mono **mono);

/**
 * A normal form in the notation of the presentation, label i as the i-th letter.
 *
 * @param ctx     borrowed.
 * @param forms   borrowed.
 * @param degree  1 .. max_degree.
 * @param index   0 .. ids_normal_forms_count()-1.
 * @param text    out, owned: ids_string_free(); otherwise as ids_normal_forms_mono().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, no such normal form
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: as ids_normal_forms_mono(), and the text.
 * Threads: any number may share `forms`, with a ctx each. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_normal_forms_print(ids_ctx *ctx, const ids_normal_forms *forms,
                                                       uint32_t degree, uint64_t index,
                                                       char **text);

/* ---- combinations of normal forms ------------------------------------------------------------ */

/** A linear combination of the normal forms of one degree. Immutable, shareable. */
typedef struct ids_combination ids_combination;

/**
 * Reduces a multilinear polynomial, given as text, to normal forms.
 *
 * The text is written as in a presentation file, with the same operations; abbreviations that the
 * file defines are not known. Its variables are numbered in the order of their names (x2 before
 * x10) and stand for the labels 1, 2, ...
 *
 * @param ctx          borrowed now, kept by the combination.
 * @param forms        kept: must outlive the combination.
 * @param text         borrowed; UTF-8; one polynomial or equation, which means left minus right.
 * @param length       bytes of text.
 * @param source       borrowed: name of the text for messages; NULL: "polynomial".
 * @param combination  out, owned: ids_combination_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degree over max_degree
 *         IDS_ERR_PARSE      as ids_presentation_read()
 *         IDS_ERR_DOMAIN     not multilinear; a coefficient has no residue modulo the prime
 *         IDS_ERR_LIMIT      byte budget, a limit of presentations
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: for each product in each term, the number of coefficients of the products of normal forms
 * that it takes.
 * Threads: any number may share `forms`, with a ctx each. Cancel: polled.
 * Border: GMP (the coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_normal_forms_reduce_text(ids_ctx *ctx,
                                                             const ids_normal_forms *forms,
                                                             const char *text, size_t length,
                                                             const char *source,
                                                             ids_combination **combination);

/**
 * Reduces the sum of coefficients[i] * monomials[i] to normal forms.
 *
 * @param ctx           borrowed now, kept by the combination.
 * @param forms         kept: must outlive the combination.
 * @param monomials     borrowed; count monomials of one degree over the presentation's signature,
 *                      each with the labels 1 .. degree once; they need not be canonical.
 * @param coefficients  borrowed; count integers; NULL: all 1.
 * @param count         at least 1.
 * @param combination   out, owned: ids_combination_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, no monomial, other signature, degrees that differ or exceed
 *                            max_degree, not multilinear
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: as ids_normal_forms_reduce_text(). Threads: any number may share `forms`, with a ctx each.
 * Cancel: polled. Border: GMP (the coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_normal_forms_reduce(ids_ctx *ctx,
                                                        const ids_normal_forms *forms,
                                                        const ids_mono *const *monomials,
                                                        const int64_t *coefficients, size_t count,
                                                        ids_combination **combination);

/** A normal form on a set of labels, as a factor of ids_normal_forms_product(). */
typedef struct ids_factor {
    uint64_t index;         /**< number of the normal form among those of its degree */
    uint32_t degree;        /**< its degree, and the number of labels */
    const uint32_t *labels; /**< borrowed; in any order: the set is what counts */
} ids_factor;

/**
 * The product of normal forms as a combination of normal forms: the multilinear structure
 * constants of the relatively free algebra.
 *
 * @param ctx          borrowed now, kept by the combination.
 * @param forms        kept: must outlive the combination.
 * @param operation    index of the operation in the signature.
 * @param factors      borrowed; as many as the operation has arguments, in their order. Their
 *                     labels together are 1 .. n, each once, n at most max_degree.
 * @param count        number of factors.
 * @param combination  out, owned: ids_combination_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, no such operation, number of factors, labels or normal form
 *         IDS_ERR_LIMIT  byte budget
 *         IDS_ERR_NOMEM  the allocator refused
 * Cost: proportional to the result; the product is looked up.
 * Threads: any number may share `forms`, with a ctx each. Cancel: not polled.
 * Border: GMP (the coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_normal_forms_product(ids_ctx *ctx,
                                                         const ids_normal_forms *forms,
                                                         size_t operation,
                                                         const ids_factor *factors, size_t count,
                                                         ids_combination **combination);

/**
 * Frees a combination.
 *
 * @param combination  owned; NULL is fine.
 * Cost: the memory goes back to the allocator.
 * Threads: one; nobody may use `combination` any more. Since: 0.1
 */
IDS_API void ids_combination_free(ids_combination *combination);

/**
 * Degree of the polynomial that was reduced.
 *
 * @param combination  borrowed; NULL gives 0.
 * @return the degree.
 * Cost: constant, no allocation. Threads: any number may share `combination`. Since: 0.1
 */
IDS_API uint32_t ids_combination_degree(const ids_combination *combination);

/**
 * Number of terms, all with coefficients that are not 0.
 *
 * @param combination  borrowed; NULL gives 0.
 * @return the number of terms; 0 when the polynomial is zero.
 * Cost: constant, no allocation. Threads: any number may share `combination`. Since: 0.1
 */
IDS_API size_t ids_combination_count(const ids_combination *combination);

/**
 * Term number `term`: normal form and coefficient numerator / denominator in lowest terms. The
 * terms stand by increasing index. Modulo a prime p the denominator is 1 and the numerator the
 * residue of least absolute value.
 *
 * @param combination  borrowed.
 * @param term         0 .. ids_combination_count()-1.
 * @param index        out, written only on IDS_OK: number of the normal form.
 * @param numerator    out, written only on IDS_OK.
 * @param denominator  out, written only on IDS_OK; positive.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, out of range
 *         IDS_ERR_LIMIT  a coefficient of more than 64 bits: ids_combination_coefficient() gives
 *                        it
 * Cost: constant, no allocation. Threads: any number may share `combination`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_combination_term(const ids_combination *combination,
                                                     size_t term, uint64_t *index,
                                                     int64_t *numerator, int64_t *denominator);

/**
 * Coefficient of term number `term` in decimal digits, such as "-3/2", at any size.
 *
 * @param ctx          borrowed.
 * @param combination  borrowed.
 * @param term         0 .. ids_combination_count()-1.
 * @param text         out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, out of range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `combination`, with a ctx each.
 * Cancel: not polled. Border: GMP (digits of the coefficient). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_combination_coefficient(ids_ctx *ctx,
                                                            const ids_combination *combination,
                                                            size_t term, char **text);

/**
 * A combination as a polynomial in the notation of the presentation, "0" when it has no terms.
 *
 * @param ctx          borrowed.
 * @param combination  borrowed.
 * @param text         out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `combination`, with a ctx each.
 * Cancel: not polled. Border: GMP (digits of the coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_combination_print(ids_ctx *ctx,
                                                      const ids_combination *combination,
                                                      char **text);

/* ---- matrices of consequences ---------------------------------------------------------------- */

/** Options of ids_matrix_create(); set struct_size, the rest to 0 for the defaults. */
typedef struct ids_matrix_options {
    size_t struct_size; /**< sizeof(ids_matrix_options) */
    bool plain;         /**< all consequences in all monomials; else the quotient step */
    uint32_t field;     /**< quotient step: a prime below 2^30 to work modulo; 0: draw one */
    uint64_t seed;      /**< quotient step: seed that the prime is drawn from */
} ids_matrix_options;

/** A matrix whose rows span the consequences of the identities in one degree. */
typedef struct ids_matrix ids_matrix;

/**
 * Prepares the matrix of consequences of a degree; its rows are made while it is written.
 *
 * The plain matrix has a column for each canonical monomial, in the order of ids_basis, and a row
 * for each consequence: an identity in monomials m1, ..., md, as a factor of a product of any depth
 * with further monomials. Arguments in which the identity is symmetric are exchanged in one way
 * only. Its entries are integers, its rank is that of ids_rank_table_create().
 *
 * The matrix of the quotient step has a column for each product of normal forms of lower degrees,
 * and a row for each identity in normal forms, where that is not 0. Its entries are the residues of
 * least absolute value modulo a prime; the number of columns less the rank modulo that prime is
 * the dimension of the quotient.
 *
 * @param ctx           borrowed now, kept.
 * @param presentation  kept: must outlive the matrix. Candidates play no part.
 * @param degree        1 .. IDS_MAX_DEGREE.
 * @param options       borrowed; NULL for the defaults.
 * @param matrix        out, owned: ids_matrix_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degree, unknown struct_size, `field` no prime below 2^30 or
 *                            together with `plain`
 *         IDS_ERR_DOMAIN     `field` divides a denominator of an identity
 *         IDS_ERR_LIMIT      byte budget, 64 bits
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: plain: the association types, then arithmetic only; quotient step: all lower degrees, and
 * once through the rows to count them. Memory does not grow with the number of rows.
 * Threads: up to the context's number (quotient step). Cancel: polled.
 * Border: GMP (coefficients of the identities). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_matrix_create(ids_ctx *ctx,
                                                  const ids_presentation *presentation,
                                                  uint32_t degree,
                                                  const ids_matrix_options *options,
                                                  ids_matrix **matrix);

/**
 * Frees a matrix.
 *
 * @param matrix  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `matrix` any more.
 * Since: 0.1
 */
IDS_API void ids_matrix_free(ids_matrix *matrix);

/**
 * Number of rows.
 *
 * @param matrix  borrowed; NULL gives 0.
 * @return number of rows.
 * Cost: constant, no allocation. Threads: any number may share `matrix`. Since: 0.1
 */
IDS_API uint64_t ids_matrix_rows(const ids_matrix *matrix);

/**
 * Number of columns.
 *
 * @param matrix  borrowed; NULL gives 0.
 * @return number of columns.
 * Cost: constant, no allocation. Threads: any number may share `matrix`. Since: 0.1
 */
IDS_API uint64_t ids_matrix_columns(const ids_matrix *matrix);

/**
 * Number of entries that are not 0.
 *
 * @param matrix  borrowed; NULL gives 0.
 * @return number of entries.
 * Cost: constant, no allocation. Threads: any number may share `matrix`. Since: 0.1
 */
IDS_API uint64_t ids_matrix_entries(const ids_matrix *matrix);

/**
 * The prime that entries are taken modulo; 0 for integers.
 *
 * @param matrix  borrowed; NULL gives 0.
 * @return the prime, or 0.
 * Cost: constant, no allocation. Threads: any number may share `matrix`. Since: 0.1
 */
IDS_API uint32_t ids_matrix_prime(const ids_matrix *matrix);

/**
 * Writes the matrix in Matrix Market coordinate form, field `integer`, symmetry `general`; comment
 * lines name what it is and, for the quotient step, the prime. Indices count from 1 there. Entries
 * stand row by row, by increasing column.
 *
 * @param ctx        borrowed: that of the matrix.
 * @param matrix     borrowed.
 * @param sink       receives the text piece by piece; called from this thread.
 * @param sink_user  passed to `sink`; borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, another context
 *         IDS_ERR_IO         the sink stopped
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: plain: O(degree^2) an entry; quotient step: as one pass of elimination over the rows.
 * Threads: one a ctx. Cancel: polled. Border: none.
 * Source: Boisvert, Pozo, Remington, The Matrix Market Exchange Formats, NISTIR 5935 (1996).
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_matrix_write(ids_ctx *ctx, const ids_matrix *matrix,
                                                 ids_sink_fn sink, void *sink_user);

/**
 * Writes the names of the columns, one a line: a monomial in the notation of the presentation; for
 * the quotient step the product of normal forms, multiplied out.
 *
 * @param ctx        borrowed: that of the matrix.
 * @param matrix     borrowed.
 * @param sink       receives the text piece by piece; called from this thread.
 * @param sink_user  passed to `sink`; borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, another context
 *         IDS_ERR_IO         the sink stopped
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: proportional to the text. Threads: one a ctx. Cancel: polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_matrix_write_columns(ids_ctx *ctx, const ids_matrix *matrix,
                                                         ids_sink_fn sink, void *sink_user);

#ifdef __cplusplus
}
#endif

#endif
