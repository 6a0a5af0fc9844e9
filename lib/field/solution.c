/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Random solutions of the equations that a dense echelon form holds.
 *
 * The free unknowns are drawn, and the pivots are solved for, panel by panel from the last to the
 * first: a row has entries at pivots of later panels, and at none of its own but its pivot.
 */
#include <string.h>

#include "dense_form.h"
#include "solution_private.h"

/* The unknowns that are pivots of one panel; `part` has room for its columns. */
static void solve_panel(const idsi_dense_echelon *e, const idsi_panel *at, int32_t *part,
                        uint32_t *solution)
{
    size_t strip = e->kernel->columns;

    for (size_t j = 0; j < at->width; j++) {
        part[j] = idsi_kernel_centred(solution[at->column[j]], e->p);
    }
    for (size_t i = 0; i < at->used; i++) {
        part[at->pivot[i]] = 0;
    }
    for (size_t i = 0; i < at->used; i++) {
        uint32_t pivot = at->pivot[i];
        uint32_t sum = at->packed == NULL
                           ? e->kernel->dot(e->p, at->rows + i * at->width, strip, part, pivot)
                           : e->kernel->dot(e->p, (const uint32_t *)at->packed + i * strip,
                                            IDSI_PANEL * strip, part, pivot);
        solution[at->column[pivot]] = idsi_mod_neg(sum, e->p);
    }
}

void idsi_dense_echelon_solution(idsi_dense_echelon *echelon, idsi_random *random,
                                 uint32_t *solution)
{
    for (size_t j = 0; j < echelon->columns; j++) {
        solution[j] = idsi_random_residue(random, echelon->p);
    }
    for (size_t k = echelon->count; k-- > 0;) {
        solve_panel(echelon, echelon->panels[k], (int32_t *)echelon->whole, solution);
    }
}
