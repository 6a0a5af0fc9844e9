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

#define COLUMNS 32u

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
    uint32_t a = d > 0 ? inverse[d] : p - inverse[-d];

    return (idsi_mix){.p = p, .a = a, .shoup = (uint32_t)(((uint64_t)a << 32) / p)};
}

void idsi_seminormal_init(idsi_seminormal *seminormal, uint32_t p, const uint32_t *inverse)
{
    seminormal->p = p;
    for (int d = 1; d <= IDSI_DISTANCE_MAX; d++) {
        seminormal->mix[IDSI_DISTANCE_MAX + d] = constants(d, p, inverse);
        seminormal->mix[IDSI_DISTANCE_MAX - d] = constants(-d, p, inverse);
    }
}

void idsi_seminormal_apply(const idsi_seminormal *seminormal, const idsi_skew *skew,
                           const uint8_t *word, size_t length, uint32_t *block, size_t width)
{
    idsi_exchange_fn run = choose_exchange();

    /* Some columns after the others, so that they stay in the cache for the whole word. */
    for (size_t from = 0; from < width; from += COLUMNS) {
        size_t columns = width - from < COLUMNS ? width - from : COLUMNS;
        for (size_t i = 0; i < length; i++) {
            /* The tableau that comes first of a pair has the label in a higher row. */
            idsi_exchange exchange = {.p = seminormal->p,
                                      .count = skew->count,
                                      .partner = skew->swap + (size_t)word[i] * skew->count,
                                      .distance = skew->distance + (size_t)word[i] * skew->count,
                                      .mix = seminormal->mix,
                                      .centre = IDSI_DISTANCE_MAX};
            run(&exchange, block + from, width, columns);
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
