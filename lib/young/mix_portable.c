/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The seminormal exchange in plain C.
 */
#include "mix.h"

void idsi_exchange_portable(const idsi_exchange *exchange, uint32_t *block, size_t stride,
                            size_t width)
{
    for (size_t t = 0; t < exchange->count; t++) {
        size_t partner = exchange->partner[t];
        uint32_t *x = block + t * stride;
        uint32_t *y = block + partner * stride;
        const idsi_mix *mix = &exchange->mix[exchange->distance[t] + exchange->centre];

        for (size_t j = 0; partner > t && j < width; j++) {
            idsi_mix_one(mix, &x[j], &y[j]);
        }
        for (size_t j = 0; partner == t && exchange->distance[t] < 0 && j < width; j++) {
            x[j] = idsi_mix_negate(x[j], exchange->p);
        }
    }
}
