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

static inline uint32_t mul(uint32_t a, uint32_t b, uint32_t p)
{
    return (uint32_t)((uint64_t)a * b % p);
}

static uint32_t shoup(uint32_t f, uint32_t p)
{
    return (uint32_t)(((uint64_t)f << 32) / p);
}

static idsi_mix_fn choose_mix(void)
{
#if defined(__x86_64__)
    if (__builtin_cpu_supports("avx512f")) {
        return idsi_mix_avx512;
    }
    if (__builtin_cpu_supports("avx2")) {
        return idsi_mix_avx2;
    }
#endif
    return idsi_mix_portable;
}

static void negate(uint32_t *v, size_t width, uint32_t p)
{
    for (size_t j = 0; j < width; j++) {
        v[j] = v[j] == 0 ? 0 : p - v[j];
    }
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
    const uint32_t *swap = skew->swap + (size_t)i * skew->count;
    const int8_t *distance = skew->distance + (size_t)i * skew->count;
    uint32_t n = skew->shape.cells;
    idsi_mix_fn mix_pair = choose_mix();
    idsi_mix mix[4 * IDSI_SHAPE_MAX + 1];           /* by distance + 2 * IDSI_SHAPE_MAX */
    bool known[4 * IDSI_SHAPE_MAX + 1] = {false};

    for (uint32_t t = 0; t < skew->count; t++) {
        int d = distance[t];
        const uint8_t *row = skew->row + (size_t)t * n;
        if (swap[t] == t) {
            if (d < 0) {
                negate(block + (size_t)t * width, width, p);
            }
        } else if (row[i] < row[i + 1]) {
            size_t k = (size_t)(d + 2 * (int)IDSI_SHAPE_MAX);
            if (!known[k]) {
                mix[k] = constants(d, p, inverse);
                known[k] = true;
            }
            mix_pair(&mix[k], block + (size_t)t * width, block + (size_t)swap[t] * width, width);
        }
    }
}

/* Sorting by exchanges of neighbours gives the word last to first. */
size_t idsi_seminormal_word(uint8_t *label, uint32_t n, uint8_t *word)
{
    size_t length = 0;
    for (bool sorted = false; !sorted;) {
        sorted = true;
        for (uint32_t j = 0; j + 1 < n; j++) {
            if (label[j] > label[j + 1]) {
                uint8_t other = label[j];
                label[j] = label[j + 1];
                label[j + 1] = other;
                word[length++] = (uint8_t)j;
                sorted = false;
            }
        }
    }
    for (size_t i = 0; i < length / 2; i++) {
        uint8_t other = word[i];
        word[i] = word[length - 1 - i];
        word[length - 1 - i] = other;
    }
    return length;
}
