/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dense matrices mod a prime p < 2^30: products and echelon forms.
 */
#ifndef IDSI_DENSE_PRIVATE_H
#define IDSI_DENSE_PRIVATE_H

#include "../core/team_private.h"
#include "field_private.h"

/* Room for the packed operands of products. One thread at a time, or one team, may use it. */
typedef struct idsi_workspace {
    ids_ctx *ctx;
    int32_t *packed_a;
    int32_t *packed_b;
    idsi_team *team;               /* that shares out large products; NULL: none */
    struct idsi_workspace *others; /* of the other members of the team */
    uint32_t other_count;
} idsi_workspace;

ids_status idsi_workspace_init(idsi_workspace *work, ids_ctx *ctx);
/* Lets a team share out the products. It must outlive the workspace's last product. */
ids_status idsi_workspace_share(idsi_workspace *work, idsi_team *team);
void idsi_workspace_clear(idsi_workspace *work);

/*
 * C -= A B mod p. A is m x k, B is k x n, C is m x n, row-major residues < p with row strides
 * lda, ldb, ldc in entries. C must not overlap A or B. p < 2^30.
 */
void idsi_dense_mul_sub(idsi_workspace *work, uint32_t p, size_t m, size_t n, size_t k,
                        const uint32_t *a, size_t lda, const uint32_t *b, size_t ldb, uint32_t *c,
                        size_t ldc);

/*
 * The same for a B that is packed as idsi_kernel says, in strips of the kernel's columns; k is a
 * multiple of 16, at most 256.
 */
void idsi_dense_mul_sub_packed(idsi_workspace *work, uint32_t p, size_t m, size_t n, size_t k,
                               const uint32_t *a, size_t lda, const int32_t *packed, uint32_t *c,
                               size_t ldc);

/* target = scale * target + factor * source mod p, entry by entry. */
void idsi_dense_combine(uint32_t p, uint32_t *target, uint32_t scale, const uint32_t *source,
                        uint32_t factor, size_t count);

/*
 * A left factor that is prepared once, for many products: m x k, centred, in the order in which the
 * kernels read it.
 */
typedef struct idsi_left {
    size_t m;
    size_t k;
    int32_t *values;
} idsi_left;

/* Copies residues mod p; idsi_left_clear() frees. A cleared one is 0 x 0. */
ids_status idsi_left_init(ids_ctx *ctx, uint32_t p, size_t m, size_t k, const uint32_t *a,
                          size_t lda, idsi_left *left);
void idsi_left_clear(ids_ctx *ctx, idsi_left *left);
/* Bytes of one. */
uint64_t idsi_left_bytes(uint64_t m, uint64_t k);
/* Row i as residues. */
void idsi_left_row(const idsi_left *left, uint32_t p, size_t i, uint32_t *row);
/* As idsi_dense_mul_sub() with a prepared A; never shared by a team. */
void idsi_left_mul_sub(idsi_workspace *work, uint32_t p, const idsi_left *left, size_t n,
                       const uint32_t *b, size_t ldb, uint32_t *c, size_t ldc);

/* Name of the kernel that this processor gets: "avx512", "avx2" or "portable". */
const char *idsi_dense_kernel_name(void);

/* ---- echelon form (lib/field/dense.c) -------------------------------------------------------- */

/*
 * Echelon form of rows that come in blocks. The pivot of a row is its largest column. Every
 * stored row has 1 at its pivot and 0 at all other pivots of its own and of earlier panels.
 */
typedef struct idsi_dense_echelon idsi_dense_echelon;

ids_status idsi_dense_echelon_create(ids_ctx *ctx, uint32_t p, size_t columns,
                                     idsi_dense_echelon **echelon);
void idsi_dense_echelon_free(idsi_dense_echelon *echelon);
/* Lets a team share out the work. It must outlive the last call that adds or completes. */
ids_status idsi_dense_echelon_share(idsi_dense_echelon *echelon, idsi_team *team);
/*
 * Rows (count x columns, stride columns) are used up. independent[i] tells whether row i was
 * independent of the form and of the rows before it; NULL when that is not wanted.
 */
ids_status idsi_dense_echelon_add(idsi_dense_echelon *echelon, uint32_t *rows, size_t count,
                                  bool *independent);
size_t idsi_dense_echelon_rank(const idsi_dense_echelon *echelon);
/* Bytes of a form with so many columns and such a rank, at most. */
uint64_t idsi_dense_echelon_bytes(uint64_t columns, uint64_t rank);
/* Clears every pivot column but for the pivot itself. No rows may be added afterwards. */
ids_status idsi_dense_echelon_complete(idsi_dense_echelon *echelon);
/* Pivot of row number i < rank. */
uint32_t idsi_dense_echelon_pivot(const idsi_dense_echelon *echelon, size_t i);
/* Row number i < rank, columns entries; lives until the next call for a row of this form. */
const uint32_t *idsi_dense_echelon_row(const idsi_dense_echelon *echelon, size_t i);

#endif
