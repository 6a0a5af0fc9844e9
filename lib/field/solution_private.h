/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Solutions of the equations in a dense echelon form.
 */
#ifndef IDSI_SOLUTION_PRIVATE_H
#define IDSI_SOLUTION_PRIVATE_H

#include "dense_private.h"

/*
 * A random solution (columns residues) for a form that is not complete: the free unknowns are
 * drawn, the pivots follow. As many multiplications as the form has entries.
 */
void idsi_dense_echelon_solution(idsi_dense_echelon *echelon, idsi_random *random,
                                 uint32_t *solution);

/*
 * The basis of solutions of a complete form, negated, a row for each column without pivot:
 * (columns - rank) x columns residues, zeros on entry.
 */
void idsi_dense_echelon_solutions(const idsi_dense_echelon *echelon, uint32_t *solutions);

#endif
