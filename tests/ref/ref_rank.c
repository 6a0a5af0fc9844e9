/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Ranks by FLINT: modulo a prime in blocks of rows, so that the memory does not grow with the
 * number of rows, or over the rational numbers in one matrix.
 */
#include "ref.h"

#include <flint/fmpz.h>
#include <flint/fmpz_mat.h>
#include <flint/nmod_mat.h>

static mp_limb_t residue(int64_t value, uint64_t prime)
{
    uint64_t size = (uint64_t)(value < 0 ? -value : value) % prime;
    return value < 0 && size != 0 ? prime - size : size;
}

/* The echelon form of the rows so far stands in the first `rank` rows; below it, the next block. */
static size_t rank_mod(const ref_rows *rows, size_t columns, uint64_t prime)
{
    nmod_mat_t matrix;
    size_t height = 2 * columns + 64;
    size_t rank = 0;
    size_t next = 0;
    if (height > rows->count)
        height = rows->count;
    nmod_mat_init(matrix, (slong)height, (slong)columns, prime);
    while (next < rows->count && rank < columns) {
        for (size_t i = rank; i < height; i++) {
            for (size_t j = 0; j < columns; j++)
                nmod_mat_entry(matrix, i, j) = 0;
            if (next == rows->count)
                continue;
            const ref_row *row = &rows->rows[next++];
            for (size_t k = 0; k < row->count; k++)
                nmod_mat_entry(matrix, i, row->entries[k].column) =
                    residue(row->entries[k].value, prime);
        }
        rank = (size_t)nmod_mat_rref(matrix);
    }
    nmod_mat_clear(matrix);
    return rank;
}

static size_t rank_exact(const ref_rows *rows, size_t columns)
{
    fmpz_mat_t matrix;
    fmpz_mat_init(matrix, (slong)rows->count, (slong)columns);
    for (size_t i = 0; i < rows->count; i++) {
        const ref_row *row = &rows->rows[i];
        for (size_t k = 0; k < row->count; k++)
            fmpz_set_si(fmpz_mat_entry(matrix, (slong)i, (slong)row->entries[k].column),
                        row->entries[k].value);
    }
    size_t rank = (size_t)fmpz_mat_rank(matrix);
    fmpz_mat_clear(matrix);
    return rank;
}

size_t ref_rank(const ref_rows *rows, size_t columns, uint64_t prime)
{
    if (rows->count == 0)
        return 0;
    return prime == 0 ? rank_exact(rows, columns) : rank_mod(rows, columns, prime);
}
