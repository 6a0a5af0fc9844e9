/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file tree.h
 * Signatures, association types and their automorphisms, monomials and their canonical form.
 * The numbering of monomials is in basis.h.
 *
 * An operation is a multilinear product of `arity` arguments with a symmetry: a subgroup G of
 * the permutations of its arguments and a sign character. A monomial is a rooted tree whose
 * inner nodes are operations; its degree is the number of leaves. An association type is a
 * monomial with its labels forgotten. Degrees and labels count from 1, indices from 0.
 */
#ifndef IDSPAN_TREE_H
#define IDSPAN_TREE_H

#include <stdbool.h>

#include <idspan/core.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Fewest arguments of an operation. */
#define IDS_MIN_ARITY 2u
/** Most arguments of an operation. */
#define IDS_MAX_ARITY 8u
/** Most operations in a signature. */
#define IDS_MAX_OPERATIONS 64u
/** Largest degree of association types, monomials and ranks (counting goes further). */
#define IDS_MAX_DEGREE 64u

/**
 * How an operation is written, by the rules of presentations.
 *
 * A name is a letter, then letters, digits, primes and the like, at most 63 bytes of UTF-8, and not
 * one of the words operation, define, identity, candidate, model, commutative, alternating, none.
 */
typedef enum ids_notation {
    IDS_NOTATION_INFIX = 0, /**< a*b; arity 2; `open` is a name or a symbol: marks of any kind but
                                 ( ) [ ] { } < > , : + - = # ", at most 63 bytes of UTF-8 */
    IDS_NOTATION_FENCE = 1, /**< (a,b,c): `open` and `close` are one of ( ) [ ] { } < > */
    IDS_NOTATION_PREFIX = 2 /**< t(a,b,c,d): `open` is a name */
} ids_notation;

/** Symmetry of an operation. */
typedef enum ids_symmetry {
    IDS_SYMMETRY_NONE = 0,        /**< the trivial group */
    IDS_SYMMETRY_COMMUTATIVE = 1, /**< all permutations, sign +1 */
    IDS_SYMMETRY_ALTERNATING = 2, /**< all permutations, the sign of the permutation */
    IDS_SYMMETRY_GENERATED = 3    /**< the group that signed permutations generate */
} ids_symmetry;

/** One signed argument order: op(a[0], a[1], ...) = sign * op(a[image[0]], a[image[1]], ...). */
typedef struct ids_signed_order {
    uint8_t image[IDS_MAX_ARITY]; /**< a permutation of 0 .. arity-1 in the first places */
    int8_t sign;                  /**< +1 or -1 */
} ids_signed_order;

/** One operation, for ids_signature_create() and ids_signature_operation(). */
typedef struct ids_operation {
    ids_notation notation;              /**< how it is written */
    const char *open;                   /**< symbol, opening fence, or name */
    const char *close;                  /**< closing fence; NULL unless a fence */
    uint32_t arity;                     /**< IDS_MIN_ARITY .. IDS_MAX_ARITY */
    ids_symmetry symmetry;              /**< kind of symmetry */
    const ids_signed_order *generators; /**< generator_count of them; used when GENERATED */
    size_t generator_count;             /**< 0 unless GENERATED */
    uint64_t group_order;               /**< out only: order of the symmetry group */
} ids_operation;

/** A list of operations. Immutable once built, so it can be shared between threads. */
typedef struct ids_signature ids_signature;

/**
 * Makes a signature.
 *
 * A generated group that turns out to be trivial, commutative or alternating is stored as such.
 *
 * @param ctx         borrowed now, kept by the signature.
 * @param operations  borrowed; `count` entries; strings are copied.
 * @param count       1 .. IDS_MAX_OPERATIONS.
 * @param signature   out, owned: ids_signature_free() after all objects that keep it; written only
 *                    on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG     NULL, bad notation (see ids_notation), arity, symmetry or permutation,
 *                         two operations written the same way
 *         IDS_ERR_DOMAIN  the signs force an operation to be zero
 *         IDS_ERR_NOMEM   the allocator refused
 *         IDS_ERR_LIMIT   byte budget
 * Cost: O(arity * order) a group that is not the full symmetric one. Threads: one a ctx.
 * Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_signature_create(ids_ctx *ctx, const ids_operation *operations,
                                                     size_t count, ids_signature **signature);

/**
 * Frees a signature.
 *
 * @param signature  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `signature` any more.
 * Since: 0.1
 */
IDS_API void ids_signature_free(ids_signature *signature);

/**
 * Number of operations of a signature.
 *
 * @param signature  borrowed; NULL gives 0.
 * @return number of operations.
 * Cost: constant, no allocation. Threads: any number may share `signature`. Since: 0.1
 */
IDS_API size_t ids_signature_count(const ids_signature *signature);

/**
 * Describes an operation.
 *
 * @param signature  borrowed.
 * @param index      0 .. ids_signature_count()-1.
 * @param operation  out, written only on IDS_OK; strings and generators are borrowed from the
 *                   signature.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range
 * Cost: constant, no allocation. Threads: any number may share `signature`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_signature_operation(const ids_signature *signature,
                                                        size_t index, ids_operation *operation);

/** The association types of the degrees 1 .. N of a signature. Immutable, shareable. */
typedef struct ids_types ids_types;

/**
 * Lists the association types of degrees 1 .. max_degree.
 *
 * The order within a degree is fixed (DEVELOPERS.md, "Basis order"): by operation as declared,
 * then by the arguments from left to right, larger types first.
 *
 * @param ctx         borrowed now, kept.
 * @param signature   kept: must outlive the types.
 * @param max_degree  1 .. IDS_MAX_DEGREE.
 * @param types       out, owned: ids_types_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, max_degree out of range
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: proportional to the number of types for commutative, alternating and no symmetry; for
 * other groups, times the group order.
 * Threads: one a ctx. Cancel: polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_types_create(ids_ctx *ctx, const ids_signature *signature,
                                                 uint32_t max_degree, ids_types **types);

/**
 * Frees a list of types.
 *
 * @param types  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `types` any more.
 * Since: 0.1
 */
IDS_API void ids_types_free(ids_types *types);

/**
 * Number of association types of a degree.
 *
 * @param types   borrowed; NULL gives 0.
 * @param degree  any.
 * @return how many; 0 when the degree is not in the list.
 * Cost: constant, no allocation. Threads: any number may share `types`. Since: 0.1
 */
IDS_API uint64_t ids_types_count(const ids_types *types, uint32_t degree);

/** What is known of one association type. */
typedef struct ids_type_info {
    uint32_t operation;     /**< index of the operation at the root; UINT32_MAX for the leaf */
    uint64_t automorphisms; /**< automorphism order; 0 when it does not fit 64 bits */
    uint64_t monomials;     /**< degree! / automorphisms; 0 when it does not fit 64 bits */
} ids_type_info;

/**
 * Automorphism order and number of multilinear monomials of a type.
 *
 * @param types   borrowed.
 * @param degree  1 .. max_degree.
 * @param index   0 .. ids_types_count()-1.
 * @param info    out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, out of range
 * Cost: constant, no allocation. Threads: any number may share `types`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_types_info(const ids_types *types, uint32_t degree,
                                               uint64_t index, ids_type_info *info);

/**
 * Writes a type in the notation of its signature, every leaf as the same letter.
 *
 * @param ctx     borrowed.
 * @param types   borrowed.
 * @param degree  1 .. max_degree.
 * @param index   0 .. ids_types_count()-1.
 * @param text    out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, out of range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `types`, with a ctx each.
 * Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_types_print(ids_ctx *ctx, const ids_types *types,
                                                uint32_t degree, uint64_t index, char **text);

/** A multilinear monomial or one with repeated labels: a tree with leaves labelled from 1. */
typedef struct ids_mono ids_mono;

/**
 * Makes a monomial from prefix code: an operation as -1-index, then its arguments; a leaf as its
 * label >= 1. For a commutative product number 0, {-1, -1, 1, 2, 3} is (x1*x2)*x3.
 *
 * The monomial is stored as given, not made canonical.
 *
 * @param ctx        borrowed now, kept.
 * @param signature  kept: must outlive the monomial.
 * @param code       borrowed.
 * @param length     entries of code.
 * @param mono       out, owned: ids_mono_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, not one whole tree, unknown operation, label 0 or over
 *                        IDS_MAX_DEGREE, degree over IDS_MAX_DEGREE
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: O(length) and one allocation. Threads: one a ctx. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_mono_create(ids_ctx *ctx, const ids_signature *signature,
                                                const int32_t *code, size_t length,
                                                ids_mono **mono);

/**
 * Frees a monomial.
 *
 * @param mono  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `mono` any more.
 * Since: 0.1
 */
IDS_API void ids_mono_free(ids_mono *mono);

/**
 * Degree of a monomial, 0 for NULL.
 *
 * @param mono  borrowed; NULL gives 0.
 * @return number of leaves.
 * Cost: constant, no allocation. Threads: any number may share `mono`. Since: 0.1
 */
IDS_API uint32_t ids_mono_degree(const ids_mono *mono);

/**
 * Copies the prefix code (see ids_mono_create()).
 *
 * @param mono      borrowed.
 * @param code      out.
 * @param capacity  entries that fit; 2 * degree - 1 is always enough.
 * @param length    out: entries written.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, capacity too small
 * Cost: a copy, no allocation. Threads: any number may share `mono`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_mono_code(const ids_mono *mono, int32_t *code, size_t capacity,
                                              size_t *length);

/**
 * Canonical form of a monomial: mono = sign * canonical.
 *
 * With repeated labels an alternating (or other signed) operation can force the monomial to be
 * zero; then *sign is 0.
 *
 * @param ctx        borrowed now, kept by the result.
 * @param mono       borrowed; any labels. The result does not keep it, but its signature.
 * @param canonical  out, owned: ids_mono_free(); written only on IDS_OK.
 * @param sign       out, written only on IDS_OK: +1, -1, or 0 (the monomial is zero; *canonical is
 *                   still given).
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: O(degree^2 * largest generated group).
 * Threads: any number may share `mono`, with a ctx each. Cancel: not polled. Border: none.
 * Source: canonical forms of trees, bottom-up. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_mono_canonicalize(ids_ctx *ctx, const ids_mono *mono,
                                                      ids_mono **canonical, int *sign);

/**
 * Writes a monomial in the notation of its signature; label i as the i-th letter.
 *
 * @param ctx   borrowed.
 * @param mono  borrowed.
 * @param text  out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `mono`, with a ctx each.
 * Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_mono_print(ids_ctx *ctx, const ids_mono *mono, char **text);

/** The automorphism group of an association type. Immutable, shareable. */
typedef struct ids_automorphisms ids_automorphisms;

/**
 * Finds the automorphism group of a type: the permutations of its leaves that keep it.
 *
 * @param ctx            borrowed now, kept by the group.
 * @param types          borrowed; the group does not keep them.
 * @param degree         1 .. max_degree of types.
 * @param index          0 .. ids_types_count()-1.
 * @param automorphisms  out, owned: ids_automorphisms_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, out of range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: O(degree) nodes; at a node with a generated group a few passes over its elements.
 * Threads: one a ctx. Cancel: not polled. Border: none.
 * Source: the group is built from those of the arguments, bottom-up: Jordan, J. reine angew. Math.
 * 70 (1869).
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_automorphisms_create(ids_ctx *ctx, const ids_types *types,
                                                         uint32_t degree, uint64_t index,
                                                         ids_automorphisms **automorphisms);

/**
 * Frees an automorphism group.
 *
 * @param automorphisms  owned; NULL is fine.
 * Cost: the memory goes back to the allocator.
 * Threads: one; nobody may use `automorphisms` any more. Since: 0.1
 */
IDS_API void ids_automorphisms_free(ids_automorphisms *automorphisms);

/**
 * Order of the group.
 *
 * ids_automorphisms_exact() in gmp.h gives it at any size, with degree! / order, the number of
 * multilinear monomials of the type.
 *
 * @param automorphisms  borrowed; NULL gives 0.
 * @return the order; 0 when it does not fit 64 bits.
 * Cost: constant, no allocation. Threads: any number may share `automorphisms`. Since: 0.1
 */
IDS_API uint64_t ids_automorphisms_order(const ids_automorphisms *automorphisms);

/**
 * Structure of the group as products of named groups, such as "S3 x (S2 wr S2)".
 *
 *     1            the trivial group
 *     A x B        direct product; the factors stand by order, then by text
 *     A wr B       wreath product: B permutes copies of A. It binds tighter than x, and
 *                  A wr B wr C is the same group with either pair of parentheses
 *     (A) : B      semidirect product: B permutes the direct factors of A, in several orbits at
 *                  once that it cannot move independently
 *     Sn, An, Zn   all permutations of n points, the even ones, the cyclic group of order n
 *     Dn           the symmetries of the n-gon, of order 2n
 *     V4           the group of order 4 on 4 points that is not cyclic
 *     F20 F21 F42  affine groups of that order over the fields of 5 and 7 elements
 *     PSL(2,5), PGL(2,5) on 6 points, PSL(3,2) on 7 points
 *     Gk(n)        another group of order k on n points
 *
 * Groups other than Sn come from generated symmetries only. Signs play no part here.
 *
 * @param automorphisms  borrowed; NULL gives "".
 * @return a string that lives as long as the group.
 * Cost: constant, no allocation. Threads: any number may share `automorphisms`. Since: 0.1
 */
IDS_API const char *ids_automorphisms_structure(const ids_automorphisms *automorphisms);

/**
 * Number of generators that ids_automorphisms_generator() gives.
 *
 * @param automorphisms  borrowed; NULL gives 0.
 * @return their number; 0 for the trivial group.
 * Cost: constant, no allocation. Threads: any number may share `automorphisms`. Since: 0.1
 */
IDS_API size_t ids_automorphisms_count(const ids_automorphisms *automorphisms);

/**
 * One of the permutations that generate the group, with its sign.
 *
 * Number the leaves 1 .. degree from left to right and write T(x1, ..., xn) for the type with
 * these letters. Then T(x1, ..., xn) = sign * T(x(image[0]), ..., x(image[n-1])).
 *
 * The sign is that of the signed argument orders at the nodes; signs multiply, so those of the
 * generators give the sign character of the whole group. Multilinear monomials are not affected:
 * there are degree! / order of them, and an automorphism of sign -1 only says that two ways to
 * write one of them differ by the sign. But where letters repeat so that an automorphism of sign
 * -1 keeps them all in place, the monomial is zero.
 *
 * @param automorphisms  borrowed.
 * @param index          0 .. ids_automorphisms_count()-1.
 * @param image          out: `degree` entries, each of 1 .. degree once; written only on IDS_OK.
 * @param capacity       entries that fit.
 * @param sign           out, written only on IDS_OK: +1 or -1.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range, capacity too small
 * Cost: O(degree), no allocation. Threads: any number may share `automorphisms`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_automorphisms_generator(const ids_automorphisms *automorphisms,
                                                            size_t index, uint32_t *image,
                                                            size_t capacity, int *sign);

#ifdef __cplusplus
}
#endif

#endif
