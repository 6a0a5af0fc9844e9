/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The exchange of two neighbouring labels on a block of vectors, for different processors.
 */
#ifndef IDSI_MIX_H
#define IDSI_MIX_H

#include <stddef.h>
#include <stdint.h>

/*
 * (x, y) -> (a x + y, b x + c y) mod p, entry by entry; all residues below p < 2^30. shoup_f is
 * floor(f 2^32 / p) for f = a, b, c.
 */
typedef struct idsi_mix {
    uint32_t p;
    uint32_t a;
    uint32_t b;
    uint32_t c;
    uint32_t shoup_a;
    uint32_t shoup_b;
    uint32_t shoup_c;
} idsi_mix;

/*
 * What an exchange does to each of `count` tableaux: partner[t] == t keeps it, with its sign changed
 * when distance[t] < 0; partner[t] > t makes (t, partner[t]) a pair for mix[distance[t] + centre].
 * The block has a row for each tableau, `stride` residues from the last; the first `width` of them
 * are changed.
 */
typedef struct idsi_exchange {
    uint32_t p;
    uint32_t count;
    const uint32_t *partner;
    const int8_t *distance;
    const idsi_mix *mix;
    int centre;
} idsi_exchange;

typedef void (*idsi_exchange_fn)(const idsi_exchange *exchange, uint32_t *block, size_t stride,
                                 size_t width);

void idsi_exchange_portable(const idsi_exchange *exchange, uint32_t *block, size_t stride,
                             size_t width);
#if defined(__x86_64__)
void idsi_exchange_avx2(const idsi_exchange *exchange, uint32_t *block, size_t stride,
                         size_t width);
void idsi_exchange_avx512(const idsi_exchange *exchange, uint32_t *block, size_t stride,
                           size_t width);
#endif

/* f u mod p, plus 0 or p (Shoup's multiplication by a constant): below 2p. */
static inline uint32_t idsi_mix_times(uint32_t u, uint32_t f, uint32_t shoup, uint32_t p)
{
    return f * u - (uint32_t)((uint64_t)shoup * u >> 32) * p;
}

/* The pair at one place. */
static inline void idsi_mix_one(const idsi_mix *mix, uint32_t *x, uint32_t *y)
{
    uint32_t p = mix->p;
    uint32_t u = *x;
    uint32_t v = *y;
    uint32_t s = idsi_mix_times(u, mix->a, mix->shoup_a, p) + v; /* < 3p */
    uint32_t t = idsi_mix_times(u, mix->b, mix->shoup_b, p) +
                 idsi_mix_times(v, mix->c, mix->shoup_c, p); /* < 4p < 2^32 */
    s = s >= 2 * p ? s - 2 * p : s;
    t = t >= 2 * p ? t - 2 * p : t;
    *x = s >= p ? s - p : s;
    *y = t >= p ? t - p : t;
}

static inline uint32_t idsi_mix_negate(uint32_t u, uint32_t p)
{
    return u == 0 ? 0 : p - u;
}

#endif
