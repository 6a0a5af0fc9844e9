/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The exchange of two neighbouring labels on a block of vectors, for different processors.
 */
#ifndef IDSI_MIX_H
#define IDSI_MIX_H

#include <stddef.h>
#include <stdint.h>

/*
 * (x, y) -> (s, x - a s) with s = a x + y mod p, entry by entry; all residues below p < 2^30. It is
 * the matrix (a, 1; 1 - a^2, -a). shoup is floor(a 2^32 / p).
 */
typedef struct idsi_mix {
    uint32_t p;
    uint32_t a;
    uint32_t shoup;
} idsi_mix;

/*
 * What an exchange does to each of `count` tableaux: partner[t] == t keeps it, with its sign
 * changed when distance[t] < 0; partner[t] > t makes (t, partner[t]) a pair for
 * mix[distance[t] + centre]. The block has a row for each tableau, `stride` residues from the last;
 * the first `width` of them are changed.
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

/* a u mod p, plus 0 or p (Shoup's multiplication by a constant), for any u: below 2p. */
static inline uint32_t idsi_mix_times(const idsi_mix *mix, uint32_t u)
{
    return mix->a * u - (uint32_t)((uint64_t)mix->shoup * u >> 32) * mix->p;
}

static inline uint32_t idsi_mix_less(uint32_t u, uint32_t bound)
{
    return u >= bound ? u - bound : u;
}

/* The pair at one place. */
static inline void idsi_mix_one(const idsi_mix *mix, uint32_t *x, uint32_t *y)
{
    uint32_t p = mix->p;
    uint32_t s = idsi_mix_times(mix, *x) + *y;        /* < 3p < 2^32 */
    uint32_t t = *x + 2 * p - idsi_mix_times(mix, s); /* < 3p */

    *x = idsi_mix_less(idsi_mix_less(s, 2 * p), p);
    *y = idsi_mix_less(idsi_mix_less(t, 2 * p), p);
}

static inline uint32_t idsi_mix_negate(uint32_t u, uint32_t p)
{
    return u == 0 ? 0 : p - u;
}

#endif
