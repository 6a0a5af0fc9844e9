/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file tree.h
 * Signatures, association types, multilinear monomials and the arithmetic of their basis.
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

/** Fewest and most arguments of an operation. */
#define IDS_MIN_ARITY 2u
#define IDS_MAX_ARITY 8u
/** Most operations in a signature. */
#define IDS_MAX_OPERATIONS 64u
/** Largest degree of association types, monomials and ranks (counting goes further). */
#define IDS_MAX_DEGREE 64u

/** How an operation is written. */
typedef enum ids_notation {
    IDS_NOTATION_INFIX = 0, /**< a*b; arity 2; `open` is the symbol */
    IDS_NOTATION_FENCE = 1, /**< (a,b,c): `open` and `close` are one of ( ) [ ] { } < > */
    IDS_NOTATION_PREFIX = 2 /**< t(a,b,c,d): `open` is the name */
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
 * @param ctx         borrowed now, kept by the signature.
 * @param operations  borrowed; count entries; strings are copied.
 * @param count       1 .. IDS_MAX_OPERATIONS.
 * @param signature   out, owned: ids_signature_free() after all objects that keep it.
 * @return IDS_OK; IDS_ERR_ARG (NULL, bad arity, name or permutation, two operations written the
 *         same way); IDS_ERR_DOMAIN (the signs force an operation to be zero); IDS_ERR_NOMEM;
 *         IDS_ERR_LIMIT (byte budget)
 * Cost: O(arity * order) a group that is not the full symmetric one. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_signature_create(ids_ctx *ctx, const ids_operation *operations,
                                                     size_t count, ids_signature **signature);

/** Frees a signature; NULL is fine. Since: 0.1 */
IDS_API void ids_signature_free(ids_signature *signature);

/** Number of operations of a signature; 0 for NULL. Since: 0.1 */
IDS_API size_t ids_signature_count(const ids_signature *signature);

/**
 * Describes operation `index`; strings and generators are borrowed from the signature.
 *
 * @return IDS_OK, IDS_ERR_ARG (NULL, index out of range; then *operation is untouched). Since: 0.1
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
 * @param ctx        borrowed now, kept.
 * @param signature  kept: must outlive the types.
 * @param max_degree 1 .. IDS_MAX_DEGREE.
 * @param types      out, owned: ids_types_free().
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_NOMEM, IDS_ERR_LIMIT (byte budget), IDS_ERR_CANCELLED
 * Cost: proportional to the number of types for commutative, alternating and no symmetry; for
 * other groups, times the group order. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_types_create(ids_ctx *ctx, const ids_signature *signature,
                                                 uint32_t max_degree, ids_types **types);

/** Frees a list of types; NULL is fine. Since: 0.1 */
IDS_API void ids_types_free(ids_types *types);

/** Number of association types of a degree; 0 when the degree is not in the list. Since: 0.1 */
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
 * @param degree 1 .. max_degree; @param index 0 .. ids_types_count()-1; @param info out.
 * @return IDS_OK, IDS_ERR_ARG. Cost: constant. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_types_info(const ids_types *types, uint32_t degree,
                                               uint64_t index, ids_type_info *info);

/**
 * Writes a type in the notation of its signature, every leaf as the same letter.
 *
 * @param ctx   borrowed.
 * @param text  out, owned: ids_string_free().
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_NOMEM, IDS_ERR_LIMIT. Since: 0.1
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
 * @param ctx        borrowed now, kept.
 * @param signature  kept: must outlive the monomial.
 * @param code       borrowed, `length` entries.
 * @param mono       out, owned: ids_mono_free().
 * @return IDS_OK; IDS_ERR_ARG (not one whole tree, unknown operation, label 0 or over
 *         IDS_MAX_DEGREE, degree over IDS_MAX_DEGREE); IDS_ERR_NOMEM; IDS_ERR_LIMIT. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_mono_create(ids_ctx *ctx, const ids_signature *signature,
                                                const int32_t *code, size_t length,
                                                ids_mono **mono);

/** Frees a monomial; NULL is fine. Since: 0.1 */
IDS_API void ids_mono_free(ids_mono *mono);

/** Degree of a monomial, 0 for NULL. Since: 0.1 */
IDS_API uint32_t ids_mono_degree(const ids_mono *mono);

/**
 * Copies the prefix code (see ids_mono_create()) into `code`.
 *
 * @param capacity  entries that fit; 2 * degree - 1 is always enough.
 * @param length    out: entries written.
 * @return IDS_OK, IDS_ERR_ARG (NULL, capacity too small). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_mono_code(const ids_mono *mono, int32_t *code, size_t capacity,
                                              size_t *length);

/**
 * Canonical form of a monomial: mono = sign * canonical.
 *
 * With repeated labels an alternating (or other signed) operation can force the monomial to be
 * zero; then *sign is 0.
 * @param ctx        borrowed.
 * @param mono       borrowed; any labels.
 * @param canonical  out, owned: ids_mono_free().
 * @param sign       out: +1, -1, or 0 (the monomial is zero; *canonical is still given).
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_NOMEM, IDS_ERR_LIMIT
 * Cost: O(degree^2 * largest generated group). Source: canonical forms of trees, bottom-up.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_mono_canonicalize(ids_ctx *ctx, const ids_mono *mono,
                                                      ids_mono **canonical, int *sign);

/**
 * Writes a monomial in the notation of its signature; label i as the i-th letter.
 *
 * @param ctx   borrowed.
 * @param text  out, owned: ids_string_free().
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_NOMEM, IDS_ERR_LIMIT. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_mono_print(ids_ctx *ctx, const ids_mono *mono, char **text);

/** The canonical multilinear monomials of one degree, numbered. Immutable, shareable. */
typedef struct ids_basis ids_basis;

/**
 * Prepares the numbering of the canonical monomials of a degree.
 *
 * @param ctx     borrowed now, kept.
 * @param types   kept: must outlive the basis.
 * @param degree  1 .. max_degree of types.
 * @param basis   out, owned: ids_basis_free().
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_NOMEM, IDS_ERR_LIMIT (more than 2^64-1 monomials; the
 *         message gives the number)
 * Cost: O(number of types * degree). Memory: 8 bytes and up to 32 MB in all for the plans of the
 * types, and tables of choices of at most 16 kB each. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_create(ids_ctx *ctx, const ids_types *types,
                                                 uint32_t degree, ids_basis **basis);

/** Frees a basis; NULL is fine. Since: 0.1 */
IDS_API void ids_basis_free(ids_basis *basis);

/** Number of monomials of a basis; 0 for NULL. Since: 0.1 */
IDS_API uint64_t ids_basis_size(const ids_basis *basis);

/**
 * Index of a canonical monomial in its basis; inverse of ids_basis_unrank().
 *
 * @param basis  borrowed.
 * @param mono   borrowed; signature and degree of the basis, labels 1 .. n once each.
 * @param index  out, written only on IDS_OK; then *index < ids_basis_size(basis).
 * @return IDS_OK
 *         IDS_ERR_ARG            NULL, other signature, other degree, not multilinear
 *         IDS_ERR_NOT_CANONICAL  well formed, but not the chosen one of its class;
 *                                ids_mono_canonicalize() gives that one and the sign
 * Cost: O(degree^2) word operations and a look-up in a hash table for each node; no allocation.
 * Threads: any number may share `basis`. Border: none.
 * Source: label sets by the combinatorial number system (Knuth, TAOCP 4A, 7.2.1.3). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_rank(const ids_basis *basis, const ids_mono *mono,
                                               uint64_t *index);

/**
 * Canonical monomial with a given index.
 *
 * @param ctx    borrowed.
 * @param basis  borrowed.
 * @param index  0 .. ids_basis_size(basis)-1.
 * @param mono   out, owned: ids_mono_free().
 * @return IDS_OK, IDS_ERR_ARG (index out of range), IDS_ERR_NOMEM, IDS_ERR_LIMIT
 * Cost: O(degree^2) word operations and one allocation. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_unrank(ids_ctx *ctx, const ids_basis *basis,
                                                 uint64_t index, ids_mono **mono);

/**
 * Index of a canonical monomial, given as prefix code; see ids_basis_rank().
 *
 * @param basis   borrowed.
 * @param code    borrowed, `length` entries in the form of ids_mono_create(); any content is safe.
 * @param index   out, written only on IDS_OK.
 * @return IDS_OK, IDS_ERR_ARG (NULL, not one whole tree of the degree, labels not 1 .. n once
 *         each), IDS_ERR_NOT_CANONICAL, IDS_ERR_LIMIT (see ids_basis_create_exact() in gmp.h)
 * Cost: as ids_basis_rank(); no allocation. Threads: any number may share `basis`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_rank_code(const ids_basis *basis, const int32_t *code,
                                                    size_t length, uint64_t *index);

/**
 * Prefix code of the canonical monomial with a given index.
 *
 * @param basis     borrowed.
 * @param index     0 .. ids_basis_size(basis)-1.
 * @param code      out: the form of ids_mono_create().
 * @param capacity  entries that fit; 2 * degree - 1 is always enough.
 * @param length    out: entries written.
 * @return IDS_OK, IDS_ERR_ARG (NULL, index out of range, capacity too small)
 * Cost: O(degree^2) byte operations; no allocation. Threads: any number may share `basis`.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_unrank_code(const ids_basis *basis, uint64_t index,
                                                      int32_t *code, size_t capacity,
                                                      size_t *length);

/**
 * Where the monomials of one association type stand in the basis: from *begin up to *end - 1.
 *
 * @param basis  borrowed.
 * @param type   0 .. ids_types_count()-1 for the degree of the basis.
 * @return IDS_OK, IDS_ERR_ARG (NULL, type out of range). Cost: constant. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_type_range(const ids_basis *basis, uint64_t type,
                                                     uint64_t *begin, uint64_t *end);

/**
 * Cuts the basis into parts of equal size (up to one), for threads: part number `part` of `parts`
 * is *begin .. *end - 1. The parts follow each other; some are empty when there are too many.
 *
 * @param basis  borrowed.
 * @param part   0 .. parts-1.
 * @return IDS_OK, IDS_ERR_ARG (NULL, part >= parts). Cost: constant. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_part(const ids_basis *basis, uint64_t part,
                                               uint64_t parts, uint64_t *begin, uint64_t *end);

/**
 * A walk through the canonical monomials of a basis, or of a part of it, in their order.
 *
 *     ids_iter *iter = NULL;
 *     const ids_mono_view *mono = NULL;
 *     ids_status st = ids_iter_create(ctx, basis, 0, ids_basis_size(basis), &iter);
 *
 *     while ((mono = ids_iter_next(iter)) != NULL) {
 *         use(mono->code, mono->length);
 *     }
 *     ids_iter_free(iter);
 *
 * Several threads go through one basis with an iterator each: ids_basis_part() cuts the range.
 */
typedef struct ids_iter ids_iter;

/** The monomial that an iterator has reached: a look into its memory, nothing is copied. */
typedef struct ids_mono_view {
    uint64_t index;      /**< index in the basis (its low 64 bits where it has more) */
    uint64_t type;       /**< index of the association type in its degree */
    uint32_t degree;     /**< number of leaves */
    uint32_t length;     /**< entries of code */
    const int32_t *code; /**< prefix code in the form of ids_mono_create() */
    const uint8_t *leaf; /**< [degree] label i from the left is code[leaf[i]]; the same for all
                              monomials of a type */
} ids_mono_view;

/**
 * Makes an iterator over the monomials begin .. end-1.
 *
 * @param ctx    borrowed now, kept.
 * @param basis  kept: must outlive the iterator.
 * @param begin  0 .. end.
 * @param end    at most ids_basis_size(basis).
 * @param iter   out, owned: ids_iter_free().
 * @return IDS_OK, IDS_ERR_ARG (NULL, no such range), IDS_ERR_NOMEM, IDS_ERR_LIMIT
 * Cost: as ids_basis_unrank(); one allocation of about 13 kB, whatever the range. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_iter_create(ids_ctx *ctx, const ids_basis *basis,
                                                uint64_t begin, uint64_t end, ids_iter **iter);

/** Frees an iterator; NULL is fine. Since: 0.1 */
IDS_API void ids_iter_free(ids_iter *iter);

/**
 * The next monomial, NULL behind the last one.
 *
 * @param iter  borrowed; NULL gives NULL.
 * @return borrowed: the same address each time, with the content of the new monomial. Whoever
 *         needs it longer than to the next call copies `code`.
 * Cost: a handful of labels moved on average, at most O(degree^2); no allocation.
 * Threads: one an iterator; any number of iterators may share a basis. Cancel: not polled.
 * Source: mixed-radix odometer (Knuth, TAOCP 4A, 7.2.1.1). Since: 0.1
 */
IDS_API const ids_mono_view *ids_iter_next(ids_iter *iter);

/**
 * Moves an iterator to the range begin .. end-1: the next monomial is number `begin`.
 *
 * @param iter  borrowed.
 * @return IDS_OK, IDS_ERR_ARG (NULL, no such range; then nothing has changed)
 * Cost: as ids_basis_unrank_code(); no allocation. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_iter_seek(ids_iter *iter, uint64_t begin, uint64_t end);

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
 * @return IDS_OK, IDS_ERR_ARG, IDS_ERR_NOMEM, IDS_ERR_LIMIT (byte budget)
 * Cost: O(degree) nodes; at a node with a generated group a few passes over its elements.
 * Threads: one a ctx. Cancel: not polled. Border: none.
 * Source: the group is built from those of the arguments, bottom-up: Jordan, J. reine angew.
 * Math. 70 (1869). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_automorphisms_create(ids_ctx *ctx, const ids_types *types,
                                                         uint32_t degree, uint64_t index,
                                                         ids_automorphisms **automorphisms);

/** Frees an automorphism group; NULL is fine. Since: 0.1 */
IDS_API void ids_automorphisms_free(ids_automorphisms *automorphisms);

/**
 * Order of the group; 0 when it does not fit 64 bits, and for NULL.
 *
 * ids_automorphisms_exact() in gmp.h gives it at any size, with degree! / order, the number of
 * multilinear monomials of the type. Since: 0.1
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
 * @param automorphisms  borrowed; NULL gives "".
 * @return a string that lives as long as the group. Since: 0.1
 */
IDS_API const char *ids_automorphisms_structure(const ids_automorphisms *automorphisms);

/** Number of generators that ids_automorphisms_generator() gives; 0 for NULL. Since: 0.1 */
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
 * @param automorphisms  borrowed.
 * @param index          0 .. ids_automorphisms_count()-1.
 * @param image          out: `degree` entries, each of 1 .. degree once.
 * @param capacity       entries that fit.
 * @param sign           out: +1 or -1.
 * @return IDS_OK, IDS_ERR_ARG (NULL, index out of range, capacity too small). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_automorphisms_generator(const ids_automorphisms *automorphisms,
                                                            size_t index, uint32_t *image,
                                                            size_t capacity, int *sign);

#ifdef __cplusplus
}
#endif

#endif
