/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Young's seminormal form mod a prime.
 *
 * Let d be the content of the cell of i+1 minus that of i in a tableau T, and a = 1/d. If i stands
 * in a higher row than i+1 and T' is T with both exchanged,
 *
 *     s_i T  = a T + T'
 *     s_i T' = (1 - a^2) T - a T'
 *
 * and s_i T = a T when the exchange is not standard (then a = 1 or -1). Only a and the rows of the
 * two cells enter, so the form of a skew shape restricts to that of its parts, basis vector by
 * basis vector. It needs p larger than all |d|. (Young 1931; for skew shapes Ram, "Skew shape
 * representations are irreducible", 1998.)
 */
#include "skew_private.h"

static inline uint32_t mul(uint32_t a, uint32_t b, uint32_t p)
{
    return (uint32_t)((uint64_t)a * b % p);
}

static void scale(uint32_t *v, uint32_t a, size_t width, uint32_t p)
{
    for (size_t j = 0; j < width; j++) {
        v[j] = mul(v[j], a, p);
    }
}

/* (x, y) -> (a x + y, (1 - a^2) x - a y): the transposed action on the pair T, T'. */
static void mix(uint32_t *x, uint32_t *y, uint32_t a, uint32_t b, size_t width, uint32_t p)
{
    uint32_t minus = a == 0 ? 0 : p - a;
    for (size_t j = 0; j < width; j++) {
        uint32_t u = x[j];
        uint32_t v = y[j];
        x[j] = (uint32_t)(((uint64_t)a * u + v) % p);
        y[j] = (uint32_t)(((uint64_t)b * u + (uint64_t)minus * v) % p);
    }
}

void idsi_seminormal_exchange(const idsi_skew *skew, uint32_t i, uint32_t p,
                              const uint32_t *inverse, uint32_t *block, size_t width)
{
    const uint32_t *swap = skew->swap + (size_t)i * skew->count;
    const int8_t *distance = skew->distance + (size_t)i * skew->count;
    uint32_t n = skew->shape.cells;

    for (uint32_t t = 0; t < skew->count; t++) {
        int d = distance[t];
        uint32_t a = d > 0 ? inverse[d] : p - inverse[-d];
        const uint8_t *row = skew->row + (size_t)t * n;
        if (swap[t] == t) {
            if (d < 0) {
                scale(block + (size_t)t * width, p - 1, width, p);
            }
        } else if (row[i] < row[i + 1]) {
            uint32_t b = (1 + p - mul(a, a, p)) % p;
            mix(block + (size_t)t * width, block + (size_t)swap[t] * width, a, b, width, p);
        }
    }
}
