/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file gmp.h
 * Exact numbers of association types and multilinear monomials, as GMP integers.
 *
 * The only header that shows mpz_t; idspan.h does not include it. A program that includes it
 * links with GMP. Signs of symmetries play no part here: a commutative and an alternating
 * operation give the same numbers.
 */
#ifndef IDSPAN_GMP_H
#define IDSPAN_GMP_H

#include <gmp.h>

#include <idspan/basis.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Largest degree of ids_counts_create() and ids_count_split_create(). */
#define IDS_MAX_COUNT_DEGREE 1000000u

/** Numbers of types and monomials in the degrees 0 .. N of a signature. Immutable, shareable. */
typedef struct ids_counts ids_counts;

/**
 * Counts the association types and the multilinear monomials of all degrees up to max_degree.
 *
 * @param ctx         borrowed now, kept by the counts.
 * @param signature   borrowed.
 * @param max_degree  0 .. IDS_MAX_COUNT_DEGREE.
 * @param counts      out, owned: ids_counts_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, max_degree out of range
 *         IDS_ERR_LIMIT      the bytes needed, GMP's included, pass the budget; checked before any
 *                            work, the message gives need and budget
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: O(k) products of integers of O(N^2) bits, k the number of cycle types of the groups: for a
 * commutative binary and a commutative ternary operation and N = 1000 a fraction of a second.
 * Memory: about 10 such integers for the work, 2 for the result.
 * Threads: one a ctx. Cancel: polled between products.
 * Border: GMP (the scratch memory of a product is GMP's own: it is counted against the budget in
 * advance, but when the system refuses it below the budget, GMP ends the process).
 * Source: Polya, Acta Math. 68 (1937), cycle index of the symmetry, and the exponential formula;
 * both equations are solved by Newton's iteration on power series.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_counts_create(ids_ctx *ctx, const ids_signature *signature,
                                                  uint32_t max_degree, ids_counts **counts);

/**
 * Frees counts.
 *
 * @param counts  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `counts` any more.
 * Since: 0.1
 */
IDS_API void ids_counts_free(ids_counts *counts);

/**
 * The max_degree of counts.
 *
 * @param counts  borrowed; NULL gives 0.
 * @return the max_degree that they were made with.
 * Cost: constant, no allocation. Threads: any number may share `counts`. Since: 0.1
 */
IDS_API uint32_t ids_counts_max_degree(const ids_counts *counts);

/**
 * Number of association types of a degree; 0 in degree 0.
 *
 * @param counts  borrowed.
 * @param degree  0 .. ids_counts_max_degree().
 * @param types   out, initialised by the caller; written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, degree out of range
 * Cost: a copy. Threads: any number may share `counts`. Cancel: not polled.
 * Border: GMP (the memory of `types`). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_counts_types(const ids_counts *counts, uint32_t degree,
                                                 mpz_t types);

/**
 * Number of multilinear monomials of a degree; 0 in degree 0.
 *
 * @param counts     borrowed.
 * @param degree     0 .. ids_counts_max_degree().
 * @param monomials  out, initialised by the caller; written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, degree out of range
 * Cost: a factorial, a product and an exact division, of O(degree log degree) bits.
 * Threads: any number may share `counts`. Cancel: not polled.
 * Border: GMP (`monomials` and temporaries of about its size). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_counts_monomials(const ids_counts *counts, uint32_t degree,
                                                     mpz_t monomials);

/**
 * The numbers of one degree, split by how often each operation is used. Immutable, shareable.
 *
 * A row is a list of uses u[0], u[1], ..., one for each operation, with
 * sum of u[i] * (arity[i] - 1) = degree - 1. All such lists are rows, in lexicographic order.
 */
typedef struct ids_count_split ids_count_split;

/**
 * Splits the numbers of types and monomials of a degree by the uses of each operation.
 *
 * @param ctx        borrowed now, kept by the split.
 * @param signature  borrowed.
 * @param degree     1 .. IDS_MAX_COUNT_DEGREE; a degree without monomials gives no row.
 * @param split      out, owned: ids_count_split_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degree out of range
 *         IDS_ERR_LIMIT      the bytes needed, GMP's included, pass the budget or 64 bits
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: for each set of operations that a row can use, O(k) products of integers of O(degree^2 *
 * product of the largest uses of all its operations but one) bits: with two operations degree 100
 * in a fraction of a second; with many operations small degrees only.
 * Threads: one a ctx. Cancel: polled between products. Border: GMP (as ids_counts_create()).
 * Source: as ids_counts_create(), with a variable for each operation. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_count_split_create(ids_ctx *ctx, const ids_signature *signature,
                                                       uint32_t degree, ids_count_split **split);

/**
 * Frees a split.
 *
 * @param split  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `split` any more.
 * Since: 0.1
 */
IDS_API void ids_count_split_free(ids_count_split *split);

/**
 * Number of rows.
 *
 * @param split  borrowed; NULL gives 0.
 * @return number of rows.
 * Cost: constant, no allocation. Threads: any number may share `split`. Since: 0.1
 */
IDS_API uint64_t ids_count_split_rows(const ids_count_split *split);

/**
 * How often each operation is used in a row.
 *
 * @param split     borrowed.
 * @param row       0 .. ids_count_split_rows()-1.
 * @param uses      out: one entry for each operation of the signature; written only on IDS_OK.
 * @param capacity  entries that fit.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, row out of range, capacity too small
 * Cost: O(operations + total of the uses), no allocation. Threads: any number may share `split`.
 * Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_count_split_uses(const ids_count_split *split, uint64_t row,
                                                     uint32_t *uses, size_t capacity);

/**
 * Number of association types of a row.
 *
 * @param split  borrowed.
 * @param row    0 .. ids_count_split_rows()-1.
 * @param types  out, initialised by the caller; written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, row out of range
 * Cost: a copy. Threads: any number may share `split`. Border: GMP (the memory of `types`).
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_count_split_types(const ids_count_split *split, uint64_t row,
                                                      mpz_t types);

/**
 * Number of multilinear monomials of a row.
 *
 * @param split      borrowed.
 * @param row        0 .. ids_count_split_rows()-1.
 * @param monomials  out, initialised by the caller; written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, row out of range
 * Cost: O(operations) products and exact divisions, of O(degree log degree) bits.
 * Threads: any number may share `split`.
 * Border: GMP (`monomials` and temporaries of about its size).
 * Source: (degree + m - 1)! / product of (u[i]! * order[i]^u[i]), m the total of the uses: plane
 * trees with given numbers of nodes of each kind (Stanley, Enumerative Combinatorics 2, 5.3.10),
 * leaves labelled, symmetries divided out.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_count_split_monomials(const ids_count_split *split,
                                                          uint64_t row, mpz_t monomials);

/**
 * Order of the automorphism group of a type and number of its multilinear monomials, exactly.
 *
 * @param automorphisms  borrowed.
 * @param order          out, initialised by the caller; written only on IDS_OK.
 * @param monomials      out, initialised by the caller, another one; written only on IDS_OK:
 *                       degree! / order.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL
 * Cost: O(degree). Threads: any number may share `automorphisms`. Cancel: not polled.
 * Border: GMP (the memory of the results). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_automorphisms_exact(const ids_automorphisms *automorphisms,
                                                        mpz_t order, mpz_t monomials);

/**
 * Prepares the numbering of the canonical monomials of a degree, whatever its size.
 *
 * Where the numbers fit 64 bits this is ids_basis_create(). Beyond, ids_basis_size() is 0, the
 * calls of basis.h that take or give an index answer IDS_ERR_LIMIT, and those below take their
 * place; these work for every basis.
 *
 * @param ctx     borrowed now, kept.
 * @param types   kept: must outlive the basis.
 * @param degree  1 .. max_degree of types.
 * @param basis   out, owned: ids_basis_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degree out of range
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: O(number of types * degree). Threads: one a ctx. Cancel: polled.
 * Border: GMP (no memory of it). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_create_exact(ids_ctx *ctx, const ids_types *types,
                                                       uint32_t degree, ids_basis **basis);

/**
 * Number of monomials of a basis.
 *
 * @param basis  borrowed.
 * @param size   out, initialised by the caller.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL
 * Cost: constant, no allocation. Threads: any number may share `basis`.
 * Border: GMP (the memory of `size`). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_size_exact(const ids_basis *basis, mpz_t size);

/**
 * Where the monomials of one association type stand: from begin up to end - 1.
 *
 * @param basis  borrowed.
 * @param type   0 .. ids_types_count()-1 for the degree of the basis.
 * @param begin  out, initialised by the caller; written only on IDS_OK.
 * @param end    out, initialised by the caller, another one; written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, type out of range
 * Cost: constant but for the copies. Threads: any number may share `basis`.
 * Border: GMP (their memory). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_type_range_exact(const ids_basis *basis, uint64_t type,
                                                           mpz_t begin, mpz_t end);

/**
 * Index of a canonical monomial, at any size; otherwise as ids_basis_rank().
 *
 * @param basis  borrowed.
 * @param mono   borrowed; signature and degree of the basis, labels 1 .. n once each.
 * @param index  out, initialised by the caller; written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG            NULL, other signature, other degree, not multilinear
 *         IDS_ERR_NOT_CANONICAL  well formed, but not the chosen one of its class
 * Cost: O(degree^2) word operations. Threads: any number may share `basis`.
 * Border: GMP (the memory of `index`). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_rank_exact(const ids_basis *basis, const ids_mono *mono,
                                                     mpz_t index);

/**
 * Index of a monomial given as prefix code, at any size; otherwise as ids_basis_rank_code().
 *
 * @param basis   borrowed.
 * @param code    borrowed; the form of ids_mono_create(); any content is safe.
 * @param length  entries of code.
 * @param index   out, initialised by the caller; written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG            NULL, not one whole tree of the degree, labels not 1 .. n once
 *                                each
 *         IDS_ERR_NOT_CANONICAL  well formed, but not the chosen one of its class
 * Cost: O(degree^2) word operations. Threads: any number may share `basis`.
 * Border: GMP (the memory of `index`). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_rank_code_exact(const ids_basis *basis,
                                                          const int32_t *code, size_t length,
                                                          mpz_t index);

/**
 * Canonical monomial with a given index, at any size; otherwise as ids_basis_unrank().
 *
 * @param ctx    borrowed now, kept by the monomial.
 * @param basis  borrowed; the signature is kept by the monomial.
 * @param index  borrowed, 0 .. size-1.
 * @param mono   out, owned: ids_mono_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, index out of range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: O(degree^2) word operations. Threads: any number may share `basis`, with a ctx each.
 * Cancel: not polled. Border: GMP (no memory of it). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_unrank_exact(ids_ctx *ctx, const ids_basis *basis,
                                                       const mpz_t index, ids_mono **mono);

/**
 * Prefix code of the monomial with a given index, at any size; otherwise as
 * ids_basis_unrank_code().
 *
 * @param basis     borrowed.
 * @param index     borrowed, 0 .. size-1.
 * @param code      out, written only on IDS_OK: the form of ids_mono_create().
 * @param capacity  entries that fit; 2 * degree - 1 is always enough.
 * @param length    out, written only on IDS_OK: entries written.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range, capacity too small
 * Cost: O(degree^2) word operations. Threads: any number may share `basis`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_unrank_code_exact(const ids_basis *basis,
                                                            const mpz_t index, int32_t *code,
                                                            size_t capacity, size_t *length);

/**
 * Makes an iterator over `count` monomials from number `begin` on, at any size; otherwise as
 * ids_iter_create().
 *
 * @param ctx    borrowed now, kept.
 * @param basis  kept: must outlive the iterator.
 * @param begin  borrowed; begin + count must not pass the size of the basis.
 * @param count  how many.
 * @param iter   out, owned: ids_iter_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, no such range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: as ids_iter_create(). Threads: any number may share `basis`, with a ctx each.
 * Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_iter_create_exact(ids_ctx *ctx, const ids_basis *basis,
                                                      const mpz_t begin, uint64_t count,
                                                      ids_iter **iter);

/**
 * Moves an iterator to `count` monomials from `begin` on; otherwise as ids_iter_seek().
 *
 * @param iter   borrowed.
 * @param begin  borrowed; begin + count must not pass the size of the basis.
 * @param count  how many.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, no such range; then nothing has changed
 * Cost: as ids_iter_seek(); no allocation. Threads: one an iterator. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_iter_seek_exact(ids_iter *iter, const mpz_t begin,
                                                    uint64_t count);

#ifdef __cplusplus
}
#endif

#endif
