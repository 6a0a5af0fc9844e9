/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dense matrices mod a prime p < 2^30: products and echelon forms.
 */
#ifndef IDSI_DENSE_PRIVATE_H
#define IDSI_DENSE_PRIVATE_H

#include "field_private.h"

/* Room for the packed operands of products; one a thread. */
typedef struct idsi_workspace {
    ids_ctx *ctx;
    int64_t *packed_a;
    int64_t *packed_b;
} idsi_workspace;

ids_status idsi_workspace_init(idsi_workspace *work, ids_ctx *ctx);
void idsi_workspace_clear(idsi_workspace *work);

/*
 * C -= A B mod p. A is m x k, B is k x n, C is m x n, row-major residues < p with row strides
 * lda, ldb, ldc in entries. C must not overlap A or B. p < 2^30.
 */
void idsi_dense_mul_sub(idsi_workspace *work, uint32_t p, size_t m, size_t n, size_t k,
                        const uint32_t *a, size_t lda, const uint32_t *b, size_t ldb, uint32_t *c,
                        size_t ldc);

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
/*
 * Rows (count x columns, stride columns) are used up. independent[i] tells whether row i was
 * independent of the form and of the rows before it; NULL when that is not wanted.
 */
ids_status idsi_dense_echelon_add(idsi_dense_echelon *echelon, uint32_t *rows, size_t count,
                                  bool *independent);
size_t idsi_dense_echelon_rank(const idsi_dense_echelon *echelon);
/* Clears every pivot column but for the pivot itself. */
ids_status idsi_dense_echelon_complete(idsi_dense_echelon *echelon);
/* Pivot and row (columns entries) number i < rank. */
uint32_t idsi_dense_echelon_pivot(const idsi_dense_echelon *echelon, size_t i);
const uint32_t *idsi_dense_echelon_row(const idsi_dense_echelon *echelon, size_t i);

#endif
