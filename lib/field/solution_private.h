/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Solutions of the equations in a dense echelon form.
 */
#ifndef IDSI_SOLUTION_PRIVATE_H
#define IDSI_SOLUTION_PRIVATE_H

#include "dense_private.h"

/* A random solution (columns residues): the free unknowns are drawn, the pivots follow. */
void idsi_dense_echelon_solution(const idsi_dense_echelon *echelon, uint32_t p, size_t columns,
                                 idsi_random *random, uint32_t *solution);

#endif
