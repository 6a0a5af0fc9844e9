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
#include "mix.h"
#include "skew_private.h"

/* Contents differ by no more. */
#define FARTHEST (2 * (int)IDSI_SHAPE_MAX)

static inline uint32_t mul(uint32_t a, uint32_t b, uint32_t p)
{
    return (uint32_t)((uint64_t)a * b % p);
}

static uint32_t shoup(uint32_t f, uint32_t p)
{
    return (uint32_t)(((uint64_t)f << 32) / p);
}

static idsi_exchange_fn choose_exchange(void)
{
#if defined(__x86_64__)
    if (__builtin_cpu_supports("avx512f")) {
        return idsi_exchange_avx512;
    }
    if (__builtin_cpu_supports("avx2")) {
        return idsi_exchange_avx2;
    }
#endif
    return idsi_exchange_portable;
}

/* The constants of the action for a distance d of contents. */
static idsi_mix constants(int d, uint32_t p, const uint32_t *inverse)
{
    idsi_mix mix = {.p = p, .a = d > 0 ? inverse[d] : p - inverse[-d]};
    mix.b = (1 + p - mul(mix.a, mix.a, p)) % p;
    mix.c = p - mix.a;
    mix.shoup_a = shoup(mix.a, p);
    mix.shoup_b = shoup(mix.b, p);
    mix.shoup_c = shoup(mix.c, p);
    return mix;
}

void idsi_seminormal_exchange(const idsi_skew *skew, uint32_t i, uint32_t p,
                              const uint32_t *inverse, uint32_t *block, size_t width)
{
    idsi_mix mix[2 * FARTHEST + 1]; /* by distance + FARTHEST */
    bool known[2 * FARTHEST + 1] = {false};
    idsi_exchange exchange = {.p = p,
                              .count = skew->count,
                              .partner = skew->swap + (size_t)i * skew->count,
                              .distance = skew->distance + (size_t)i * skew->count,
                              .mix = mix,
                              .centre = FARTHEST};

    /* The tableau that comes first of a pair has i in a higher row: they stand in this order. */
    for (uint32_t t = 0; t < skew->count; t++) {
        int d = exchange.distance[t];
        if (exchange.partner[t] > t && !known[d + FARTHEST]) {
            mix[d + FARTHEST] = constants(d, p, inverse);
            known[d + FARTHEST] = true;
        }
    }
    choose_exchange()(&exchange, block, width);
}
