/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file basis.h
 * The canonical multilinear monomials of a degree: numbering and iteration.
 *
 * The index of a monomial is arithmetic: nothing here is a table of monomials, so bases of any
 * size can be used. DEVELOPERS.md, "Basis order", has the order.
 */
#ifndef IDSPAN_BASIS_H
#define IDSPAN_BASIS_H

#include <idspan/tree.h>

#ifdef __cplusplus
extern "C" {
#endif

/** The canonical multilinear monomials of one degree, numbered. Immutable, shareable. */
typedef struct ids_basis ids_basis;

/**
 * Prepares the numbering of the canonical monomials of a degree.
 *
 * @param ctx     borrowed now, kept.
 * @param types   kept: must outlive the basis.
 * @param degree  1 .. max_degree of types.
 * @param basis   out, owned: ids_basis_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degree out of range
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget; more than 2^64-1 monomials: the message gives the
 *                            number, ids_basis_create_exact() in gmp.h the basis
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: O(number of types * degree). Memory: 8 bytes and up to 32 MB in all for the plans of the
 * types, and tables of choices of at most 16 kB each.
 * Threads: one a ctx. Cancel: polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_create(ids_ctx *ctx, const ids_types *types,
                                                 uint32_t degree, ids_basis **basis);

/**
 * Frees a basis.
 *
 * @param basis  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `basis` any more.
 * Since: 0.1
 */
IDS_API void ids_basis_free(ids_basis *basis);

/**
 * Number of monomials of a basis.
 *
 * @param basis  borrowed; NULL gives 0.
 * @return their number; 0 also where there are more than 2^64-1, see ids_basis_create_exact().
 * Cost: constant, no allocation. Threads: any number may share `basis`. Since: 0.1
 */
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
 *         IDS_ERR_LIMIT          the basis has more than 2^64-1 monomials, see gmp.h
 * Cost: O(degree^2) word operations and a look-up in a hash table for each node; no allocation.
 * Threads: any number may share `basis`. Border: none.
 * Source: label sets by the combinatorial number system (Knuth, TAOCP 4A, 7.2.1.3). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_rank(const ids_basis *basis, const ids_mono *mono,
                                               uint64_t *index);

/**
 * Canonical monomial with a given index.
 *
 * @param ctx    borrowed now, kept by the monomial.
 * @param basis  borrowed; its signature is kept by the monomial.
 * @param index  0 .. ids_basis_size(basis)-1.
 * @param mono   out, owned: ids_mono_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, index out of range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget; the basis has more than 2^64-1 monomials, see gmp.h
 * Cost: O(degree^2) word operations and one allocation.
 * Threads: any number may share `basis`, with a ctx each. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_unrank(ids_ctx *ctx, const ids_basis *basis,
                                                 uint64_t index, ids_mono **mono);

/**
 * Index of a canonical monomial, given as prefix code; see ids_basis_rank().
 *
 * @param basis   borrowed.
 * @param code    borrowed; the form of ids_mono_create(); any content is safe.
 * @param length  entries of code.
 * @param index   out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG            NULL, not one whole tree of the degree, labels not 1 .. n once
 *                                each
 *         IDS_ERR_NOT_CANONICAL  well formed, but not the chosen one of its class
 *         IDS_ERR_LIMIT          the basis has more than 2^64-1 monomials, see gmp.h
 * Cost: as ids_basis_rank(); no allocation. Threads: any number may share `basis`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_rank_code(const ids_basis *basis, const int32_t *code,
                                                    size_t length, uint64_t *index);

/**
 * Prefix code of the canonical monomial with a given index.
 *
 * @param basis     borrowed.
 * @param index     0 .. ids_basis_size(basis)-1.
 * @param code      out, written only on IDS_OK: the form of ids_mono_create().
 * @param capacity  entries that fit; 2 * degree - 1 is always enough.
 * @param length    out, written only on IDS_OK: entries written.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, index out of range, capacity too small
 *         IDS_ERR_LIMIT  the basis has more than 2^64-1 monomials, see gmp.h
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
 * @param begin  out, written only on IDS_OK.
 * @param end    out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, type out of range
 *         IDS_ERR_LIMIT  the basis has more than 2^64-1 monomials, see gmp.h
 * Cost: constant, no allocation. Threads: any number may share `basis`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_type_range(const ids_basis *basis, uint64_t type,
                                                     uint64_t *begin, uint64_t *end);

/**
 * Cuts the basis into parts of equal size (up to one), for threads: part number `part` of `parts`
 * is *begin .. *end - 1. The parts follow each other; some are empty when there are too many.
 *
 * @param basis  borrowed.
 * @param part   0 .. parts-1.
 * @param parts  at least 1.
 * @param begin  out, written only on IDS_OK.
 * @param end    out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, part >= parts
 *         IDS_ERR_LIMIT  the basis has more than 2^64-1 monomials, see gmp.h
 * Cost: constant, no allocation. Threads: any number may share `basis`. Since: 0.1
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
 * @param iter   out, owned: ids_iter_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, no such range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget; the basis has more than 2^64-1 monomials, see gmp.h
 * Cost: as ids_basis_unrank(); one allocation of about 13 kB, whatever the range.
 * Threads: any number may share `basis`, with a ctx each. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_iter_create(ids_ctx *ctx, const ids_basis *basis,
                                                uint64_t begin, uint64_t end, ids_iter **iter);

/**
 * Frees an iterator.
 *
 * @param iter  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `iter` any more.
 * Since: 0.1
 */
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
 * @param iter   borrowed.
 * @param begin  0 .. end.
 * @param end    at most ids_basis_size(basis).
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, no such range; then nothing has changed
 *         IDS_ERR_LIMIT  the basis has more than 2^64-1 monomials, see gmp.h; nothing has changed
 * Cost: as ids_basis_unrank_code(); no allocation. Threads: one an iterator. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_iter_seek(ids_iter *iter, uint64_t begin, uint64_t end);

#ifdef __cplusplus
}
#endif

#endif
