/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file algebra.h
 * Finite-dimensional algebras over the rational numbers, given by structure constants.
 *
 * An algebra has a basis and any number of operations; the value of an operation on basis
 * elements is a combination of basis elements, all others follow by linearity. It can be made
 * from an array of constants or read from text, see idspan(5) and README.md, "The algebra file":
 *
 *     basis e1 e2 e3
 *     operation a*b commutative
 *     e1*e1 = e1
 *     e1*e2 = 1/2 e2 + e3
 *
 * Only one of the products that the symmetry of an operation relates needs to be given; products
 * that are not given are 0.
 */
#ifndef IDSPAN_ALGEBRA_H
#define IDSPAN_ALGEBRA_H

#include <idspan/identity.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Largest dimension of an algebra. */
#define IDS_MAX_DIMENSION 255u

/** An algebra. Immutable once built, shareable. */
typedef struct ids_algebra ids_algebra;

/**
 * One structure constant: numerator / denominator is the coefficient of basis element `result` in
 * the value of operation `operation` on the basis elements argument[0], argument[1], ...
 */
typedef struct ids_constant {
    uint32_t operation;               /**< index in the signature */
    uint32_t argument[IDS_MAX_ARITY]; /**< basis elements, from 0; the first `arity` count */
    uint32_t result;                  /**< basis element, from 0 */
    int64_t numerator;                /**< of the coefficient */
    int64_t denominator;              /**< not 0 */
} ids_constant;

/**
 * Makes an algebra from structure constants. What they do not say is filled in by the symmetry of
 * the operations, or is 0.
 *
 * @param ctx        borrowed now, kept.
 * @param signature  borrowed: its operations are copied.
 * @param dimension  1 .. IDS_MAX_DIMENSION.
 * @param names      borrowed: `dimension` names, which must be different, consist of letters and
 *                   digits of the notation and not name an operation; NULL: e1, e2, ... (or another
 *                   letter where e and a number name an operation).
 * @param constants  borrowed, `count` of them, in any order; coefficients need not be in lowest
 *                   terms and may be 0.
 * @param algebra    out, owned: ids_algebra_free(); written only on IDS_OK.
 * @return IDS_OK; IDS_ERR_ARG (NULL, index out of range, denominator 0, a name that cannot be one);
 *         IDS_ERR_DOMAIN (two constants contradict each other, or one is not 0 though the symmetry
 *         makes the product 0); IDS_ERR_LIMIT (64 bits, more than 4,000,000 constants after filling
 *         in, byte budget); IDS_ERR_NOMEM
 * Cost: sorting what is filled in. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_create(ids_ctx *ctx, const ids_signature *signature,
                                                   uint32_t dimension, const char *const *names,
                                                   const ids_constant *constants, size_t count,
                                                   ids_algebra **algebra);

/**
 * Reads an algebra from text.
 *
 * @param ctx      borrowed now, kept.
 * @param text     borrowed; UTF-8; need not end in NUL.
 * @param length   bytes of text.
 * @param source   borrowed: name of the text for messages (a file name); NULL: "input".
 * @param algebra  out, owned: ids_algebra_free(); written only on IDS_OK.
 * @return IDS_OK; IDS_ERR_PARSE (ids_ctx_message() names source, line and column, shows the line
 *         with a caret and says what was expected); IDS_ERR_DOMAIN (the signs of a symmetry make
 *         the operation zero; with place); IDS_ERR_LIMIT (dimension, 64 bits, 4,000,000 constants,
 *         byte budget; with place where there is one); IDS_ERR_CANCELLED; IDS_ERR_ARG;
 *         IDS_ERR_NOMEM
 * Cost: as ids_algebra_create(). Cancel: polled. Border: numbers are read by GMP. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_read(ids_ctx *ctx, const char *text, size_t length,
                                                 const char *source, ids_algebra **algebra);

/** Frees an algebra; NULL is fine. Since: 0.1 */
IDS_API void ids_algebra_free(ids_algebra *algebra);

/**
 * Writes an algebra as text that reads back to the same algebra. Of the products that a symmetry
 * relates, the one with its arguments in canonical order is written; those that are 0 are not.
 *
 * @param text  out, owned: ids_string_free().
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_NOMEM, IDS_ERR_LIMIT. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_print(ids_ctx *ctx, const ids_algebra *algebra,
                                                  char **text);

/** Whether two algebras have the same operations and the same basis, names included, with the same
 * constants. Since: 0.1 */
IDS_API bool ids_algebra_equal(const ids_algebra *a, const ids_algebra *b);

/** Signature of an algebra, borrowed from it; NULL for NULL. Since: 0.1 */
IDS_API const ids_signature *ids_algebra_signature(const ids_algebra *algebra);

/** Dimension; 0 for NULL. Since: 0.1 */
IDS_API uint32_t ids_algebra_dimension(const ids_algebra *algebra);

/** Name of a basis element, borrowed; NULL when there is none. Since: 0.1 */
IDS_API const char *ids_algebra_basis_name(const ids_algebra *algebra, uint32_t index);

/** Number of structure constants of an operation that are not 0, those that the symmetry gives
 * included; 0 when there is no such operation. Since: 0.1 */
IDS_API size_t ids_algebra_count(const ids_algebra *algebra, size_t operation);

/**
 * One of the structure constants of an operation that are not 0, in lowest terms, the denominator
 * positive. They are ordered by arguments, then by result.
 *
 * @param index     0 .. ids_algebra_count()-1.
 * @param constant  out.
 * @return IDS_OK, IDS_ERR_ARG (NULL, index out of range). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_constant(const ids_algebra *algebra, size_t operation,
                                                     size_t index, ids_constant *constant);

/**
 * Finds the operations of a signature in an algebra, by the way they are written.
 *
 * The algebra may have more operations, and may declare another symmetry, as long as its products
 * have the symmetry that the signature declares.
 * @param ctx        borrowed.
 * @param signature  borrowed.
 * @param operation  out: for each operation of the signature its index in the algebra.
 * @return IDS_OK; IDS_ERR_DOMAIN (an operation is missing, or its products lack the symmetry; the
 *         message says which); IDS_ERR_ARG (NULL); IDS_ERR_NOMEM, IDS_ERR_LIMIT. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_match(ids_ctx *ctx, const ids_algebra *algebra,
                                                  const ids_signature *signature,
                                                  uint32_t *operation);

/**
 * Whether an identity or candidate of a presentation holds in an algebra, exactly.
 *
 * The complete linearisation is evaluated on all tuples of basis elements, modulo as many primes as
 * the size of the constants asks for: a value that is 0 modulo all of them is 0.
 * @param ctx           borrowed.
 * @param presentation  borrowed; its operations are found with ids_algebra_match().
 * @param role          whether `index` counts identities or candidates.
 * @param holds         out.
 * @param tuple         out, may be NULL: when it does not hold, basis elements on which the
 *                      linearisation is not 0, one for each variable of
 *                      IDS_FORM_LINEAR (`degree` of them).
 * @param capacity      entries of tuple, at least the degree unless tuple is NULL.
 * @return IDS_OK; IDS_ERR_DOMAIN (ids_algebra_match()); IDS_ERR_ARG; IDS_ERR_CANCELLED;
 *         IDS_ERR_NOMEM; IDS_ERR_LIMIT
 * Cost: dimension^degree products at most; less where the identity is symmetric in its variables
 * and where products are 0. Cancel: polled. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_holds(ids_ctx *ctx, const ids_algebra *algebra,
                                                  const ids_presentation *presentation,
                                                  ids_role role, size_t index, bool *holds,
                                                  uint32_t *tuple, size_t capacity);

#ifdef __cplusplus
}
#endif

#endif
