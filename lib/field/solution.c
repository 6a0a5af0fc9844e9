/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Random solutions of the equations that a dense echelon form holds.
 *
 * The free unknowns are drawn, and the pivots are solved for from the last row to the first: a row
 * has entries at the pivots of later rows only.
 */
#include "solution_private.h"

/* sum of a[j] b[j] mod p */
static uint32_t dot(uint32_t p, const uint32_t *a, const uint32_t *b, size_t count)
{
    uint64_t sum = 0;
    for (size_t j = 0; j < count;) {
        /* 8 products are below 2^63 */
        size_t end = j + 8 < count ? j + 8 : count;
        for (; j < end; j++) {
            sum += (uint64_t)a[j] * b[j];
        }
        sum %= p;
    }
    return (uint32_t)sum;
}

void idsi_dense_echelon_solution(const idsi_dense_echelon *echelon, uint32_t p, size_t columns,
                                 idsi_random *random, uint32_t *solution)
{
    for (size_t j = 0; j < columns; j++) {
        solution[j] = idsi_random_residue(random, p);
    }
    for (size_t i = idsi_dense_echelon_rank(echelon); i-- > 0;) {
        uint32_t pivot = idsi_dense_echelon_pivot(echelon, i);
        const uint32_t *row = idsi_dense_echelon_row(echelon, i);
        solution[pivot] = idsi_mod_neg(dot(p, row, solution, pivot), p);
    }
}
