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
 *                   digits of the notation and not name an operation; NULL: e1, e2, ... (or
 *                   another letter where e and a number name an operation).
 * @param constants  borrowed, `count` of them, in any order; coefficients need not be in lowest
 *                   terms and may be 0.
 * @param count      number of constants.
 * @param algebra    out, owned: ids_algebra_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG     NULL, index out of range, denominator 0, a name that cannot be one
 *         IDS_ERR_DOMAIN  two constants contradict each other, or one is not 0 though the symmetry
 *                         makes the product 0
 *         IDS_ERR_LIMIT   64 bits, more than 4,000,000 constants after filling in, byte budget
 *         IDS_ERR_NOMEM   the allocator refused
 * Cost: sorting what is filled in. Threads: one a ctx. Cancel: not polled. Border: none.
 * Since: 0.1
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
 * @return IDS_OK
 *         IDS_ERR_PARSE      ids_ctx_message() names source, line and column, shows the line with
 *                            a caret and says what was expected
 *         IDS_ERR_DOMAIN     the signs of a symmetry make the operation zero; with place
 *         IDS_ERR_LIMIT      dimension, 64 bits, 4,000,000 constants, byte budget; with place
 *                            where there is one
 *         IDS_ERR_CANCELLED  cancelled
 *         IDS_ERR_ARG        NULL
 *         IDS_ERR_NOMEM      the allocator refused
 * Cost: as ids_algebra_create(). Threads: one a ctx. Cancel: polled.
 * Border: GMP (numbers as they are read). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_read(ids_ctx *ctx, const char *text, size_t length,
                                                 const char *source, ids_algebra **algebra);

/**
 * Frees an algebra.
 *
 * @param algebra  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `algebra` any more.
 * Since: 0.1
 */
IDS_API void ids_algebra_free(ids_algebra *algebra);

/**
 * Writes an algebra as text that reads back to the same algebra. Of the products that a symmetry
 * relates, the one with its arguments in canonical order is written; those that are 0 are not.
 *
 * @param ctx      borrowed.
 * @param algebra  borrowed.
 * @param text     out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `algebra`, with a ctx each.
 * Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_print(ids_ctx *ctx, const ids_algebra *algebra,
                                                  char **text);

/**
 * Whether two algebras have the same operations and the same basis, names included, with the same
 * constants. NULL is equal to NULL and to nothing else.
 *
 * @param a  borrowed, or NULL.
 * @param b  borrowed, or NULL.
 * @return true when they are the same.
 * Cost: linear, no allocation. Threads: any number may share `a` and `b`. Since: 0.1
 */
IDS_API bool ids_algebra_equal(const ids_algebra *a, const ids_algebra *b);

/**
 * Signature of an algebra.
 *
 * @param algebra  borrowed; NULL gives NULL.
 * @return borrowed from the algebra, lives as long.
 * Cost: constant, no allocation. Threads: any number may share `algebra`. Since: 0.1
 */
IDS_API const ids_signature *ids_algebra_signature(const ids_algebra *algebra);

/**
 * Dimension of an algebra.
 *
 * @param algebra  borrowed; NULL gives 0.
 * @return number of basis elements.
 * Cost: constant, no allocation. Threads: any number may share `algebra`. Since: 0.1
 */
IDS_API uint32_t ids_algebra_dimension(const ids_algebra *algebra);

/**
 * Name of a basis element.
 *
 * @param algebra  borrowed; NULL gives NULL.
 * @param index    0 .. dimension-1.
 * @return borrowed from the algebra; NULL when there is no such element.
 * Cost: constant, no allocation. Threads: any number may share `algebra`. Since: 0.1
 */
IDS_API const char *ids_algebra_basis_name(const ids_algebra *algebra, uint32_t index);

/**
 * Number of structure constants of an operation that are not 0, those that the symmetry gives
 * included.
 *
 * @param algebra    borrowed; NULL gives 0.
 * @param operation  index of the operation.
 * @return their number; 0 when there is no such operation.
 * Cost: constant, no allocation. Threads: any number may share `algebra`. Since: 0.1
 */
IDS_API size_t ids_algebra_count(const ids_algebra *algebra, size_t operation);

/**
 * One of the structure constants of an operation that are not 0, in lowest terms, the denominator
 * positive. They are ordered by arguments, then by result.
 *
 * @param algebra    borrowed.
 * @param operation  index of the operation.
 * @param index      0 .. ids_algebra_count()-1.
 * @param constant   out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, out of range
 * Cost: constant, no allocation. Threads: any number may share `algebra`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_constant(const ids_algebra *algebra, size_t operation,
                                                     size_t index, ids_constant *constant);

/**
 * Finds the operations of a signature in an algebra, by the way they are written.
 *
 * The algebra may have more operations, and may declare another symmetry, as long as its products
 * have the symmetry that the signature declares.
 *
 * @param ctx        borrowed.
 * @param algebra    borrowed.
 * @param signature  borrowed.
 * @param operation  out: for each operation of the signature its index in the algebra, so
 *                   ids_signature_count(signature) entries, which must have room; never more than
 *                   IDS_MAX_OPERATIONS. Written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_DOMAIN  an operation is missing, or its products lack the symmetry; the message
 *                         says which
 *         IDS_ERR_ARG     NULL
 *         IDS_ERR_NOMEM   the allocator refused
 *         IDS_ERR_LIMIT   byte budget
 * Cost: proportional to the constants, times the generators of symmetries.
 * Threads: any number may share `algebra`, with a ctx each. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_match(ids_ctx *ctx, const ids_algebra *algebra,
                                                  const ids_signature *signature,
                                                  uint32_t *operation);

/**
 * Whether an identity or candidate of a presentation holds in an algebra, exactly.
 *
 * The complete linearisation is evaluated on all tuples of basis elements, modulo as many primes as
 * the size of the constants asks for: a value that is 0 modulo all of them is 0.
 *
 * @param ctx           borrowed.
 * @param algebra       borrowed.
 * @param presentation  borrowed; its operations are found with ids_algebra_match().
 * @param role          whether `index` counts identities or candidates.
 * @param index         0 .. ids_presentation_count()-1.
 * @param holds         out, written only on IDS_OK.
 * @param tuple         out, may be NULL; written only on IDS_OK and when it does not hold: basis
 *                      elements on which the linearisation is not 0, one for each variable of
 *                      IDS_FORM_LINEAR (`degree` of them).
 * @param capacity      entries of tuple, at least the degree unless tuple is NULL.
 * @return IDS_OK
 *         IDS_ERR_DOMAIN     an operation is missing, or its products lack the symmetry, as
 *                            ids_algebra_match() finds
 *         IDS_ERR_ARG        NULL, index out of range, capacity too small
 *         IDS_ERR_CANCELLED  cancelled
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget
 * Cost: dimension^degree products at most; less where the identity is symmetric in its variables
 * and where products are 0.
 * Threads: any number may share `algebra`, with a ctx each. Cancel: polled.
 * Border: GMP (coefficients of the identity). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_algebra_holds(ids_ctx *ctx, const ids_algebra *algebra,
                                                  const ids_presentation *presentation,
                                                  ids_role role, size_t index, bool *holds,
                                                  uint32_t *tuple, size_t capacity);

#ifdef __cplusplus
}
#endif

#endif
