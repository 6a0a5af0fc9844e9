/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The seminormal inner loop in plain C.
 */
#include "mix.h"

void idsi_mix_portable(const idsi_mix *mix, uint32_t *x, uint32_t *y, size_t width)
{
    for (size_t j = 0; j < width; j++) {
        idsi_mix_one(mix, &x[j], &y[j]);
    }
}
