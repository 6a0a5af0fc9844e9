/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file young.h
 * Partitions, which name the irreducible modules of the symmetric groups, and the cocharacter of
 * the free algebra of a signature.
 *
 * The partitions of a degree stand in the order of published tables: reverse lexicographic, so
 * 4, 3+1, 2+2, 2+1+1, 1+1+1+1. Indices count from 0. 4 stands for the trivial module of S_4 and
 * 1+1+1+1 for the one on which a permutation acts by its sign.
 */
#ifndef IDSPAN_YOUNG_H
#define IDSPAN_YOUNG_H

#include <idspan/tree.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Largest degree of a partition. */
#define IDS_MAX_PARTITION_DEGREE 40u

/**
 * A partition: plain data, to be copied and assigned. Well formed when part[0] >= part[1] >= ...
 * >= part[length-1] >= 1, the sum is the degree, and the parts after them are 0; the calls below
 * answer IDS_ERR_ARG when it is not. Two partitions are equal when all their bytes are.
 */
typedef struct ids_partition {
    uint32_t degree;                        /**< 0 .. IDS_MAX_PARTITION_DEGREE */
    uint32_t length;                        /**< number of parts */
    uint8_t part[IDS_MAX_PARTITION_DEGREE]; /**< largest first, then zeros */
} ids_partition;

/**
 * Reads a partition written as 4+3+1: largest part first, no blanks, no zeros in front; "0" is the
 * partition of 0. So each partition has one text, that of ids_partition_print().
 *
 * @param ctx        borrowed.
 * @param text       borrowed.
 * @param partition  out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_PARSE  not such a text, a part 0 beside others, a part larger than the one
 *                        before it, degree over IDS_MAX_PARTITION_DEGREE; the message says which,
 *                        ids_ctx_last_place() where
 * Cost: O(length of text), no allocation. Threads: one a ctx. Cancel: not polled. Border: none.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_partition_parse(ids_ctx *ctx, const char *text,
                                                    ids_partition *partition);

/**
 * Writes a partition in the form that ids_partition_parse() reads; degree 0 gives "0".
 *
 * @param ctx        borrowed.
 * @param partition  borrowed.
 * @param text       out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, not well formed
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: one a ctx. Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_partition_print(ids_ctx *ctx, const ids_partition *partition,
                                                    char **text);

/**
 * Number of partitions of a degree.
 *
 * @param degree  any.
 * @return how many; 0 when it is over IDS_MAX_PARTITION_DEGREE.
 * Cost: O(IDS_MAX_PARTITION_DEGREE^2) additions, no allocation. Threads: any. Since: 0.1
 */
IDS_API uint64_t ids_partition_count(uint32_t degree);

/**
 * Index of a partition among those of its degree; inverse of ids_partition_unrank().
 *
 * @param partition  borrowed.
 * @param index      out: 0 .. ids_partition_count(degree)-1, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, not well formed
 * Cost: as ids_partition_count(). Threads: any number may share `partition`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_partition_rank(const ids_partition *partition, uint64_t *index);

/**
 * Partition of a degree with a given index.
 *
 * @param degree     0 .. IDS_MAX_PARTITION_DEGREE.
 * @param index      0 .. ids_partition_count(degree)-1.
 * @param partition  out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, out of range
 * Cost: as ids_partition_count(). Threads: any. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_partition_unrank(uint32_t degree, uint64_t index,
                                                     ids_partition *partition);

/**
 * The conjugate partition: rows and columns of the diagram exchanged. Its module is that of
 * `partition` with every permutation multiplied by its sign.
 *
 * @param partition  borrowed.
 * @param conjugate  out, written only on IDS_OK; it may be `partition` itself.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, not well formed
 * Cost: O(degree), no allocation. Threads: any number may share `partition`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_partition_conjugate(const ids_partition *partition,
                                                        ids_partition *conjugate);

/**
 * Dimension of the irreducible module of a partition: the number of its standard tableaux.
 *
 * @param partition  borrowed.
 * @param dimension  out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, not well formed
 *         IDS_ERR_LIMIT  it passes 64 bits, which can happen from degree 36 on
 * Cost: O(degree^2) greatest common divisors, no allocation. Threads: any.
 * Source: degree! / product of the hook lengths (Frame, Robinson, Thrall, Canad. J. Math. 6
 * (1954)).
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_partition_dimension(const ids_partition *partition,
                                                        uint64_t *dimension);

/**
 * The cocharacter of a free algebra: for each degree up to a largest one, and each partition, how
 * often its irreducible module occurs in the space of multilinear monomials. Immutable, shareable.
 */
typedef struct ids_cocharacter ids_cocharacter;

/**
 * Computes the cocharacter of the free algebra of a signature.
 *
 * The signs of the operations count. The result is exact: characters of the symmetric groups, no
 * monomial is looked at.
 *
 * @param ctx          borrowed now, kept by the cocharacter.
 * @param signature    borrowed.
 * @param max_degree   1 .. IDS_MAX_PARTITION_DEGREE.
 * @param cocharacter  out, owned: ids_cocharacter_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, max_degree out of range
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_CANCELLED  cancelled
 *         IDS_ERR_INTERNAL   a division left a remainder: never, please report it
 * Cost: grows with the square of the number of partitions. One binary operation takes milliseconds
 * and less than a megabyte to degree 20, seconds and 100 MB to degree 40; an operation of arity k
 * up to k times that.
 * Threads: one a ctx. Cancel: polled.
 * Border: none (GMP's functions on limbs, which take no memory).
 * Source: M = h1 + sum of Z[M] over the operations, Z the cycle index of the symmetry with signs
 * and [ ] plethysm (Macdonald, Symmetric Functions and Hall Polynomials, I.7, I.8).
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_cocharacter_create(ids_ctx *ctx, const ids_signature *signature,
                                                       uint32_t max_degree,
                                                       ids_cocharacter **cocharacter);

/**
 * Frees a cocharacter.
 *
 * @param cocharacter  owned; NULL is fine.
 * Cost: the memory goes back to the allocator.
 * Threads: one; nobody may use `cocharacter` any more. Since: 0.1
 */
IDS_API void ids_cocharacter_free(ids_cocharacter *cocharacter);

/**
 * The max_degree of a cocharacter.
 *
 * @param cocharacter  borrowed; NULL gives 0.
 * @return the max_degree that it was made with.
 * Cost: constant, no allocation. Threads: any number may share `cocharacter`. Since: 0.1
 */
IDS_API uint32_t ids_cocharacter_max_degree(const ids_cocharacter *cocharacter);

/**
 * How often the module of a partition occurs.
 *
 * @param cocharacter   borrowed.
 * @param degree        1 .. ids_cocharacter_max_degree().
 * @param index         0 .. ids_partition_count(degree)-1, as ids_partition_rank() gives it.
 * @param multiplicity  out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, out of range
 *         IDS_ERR_LIMIT  it passes 64 bits
 * Cost: constant, no allocation. Threads: any number may share `cocharacter`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_cocharacter_multiplicity(const ids_cocharacter *cocharacter,
                                                             uint32_t degree, uint64_t index,
                                                             uint64_t *multiplicity);

#ifdef __cplusplus
}
#endif

#endif
