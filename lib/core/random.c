/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Random numbers that are the same on every machine: xoshiro256** with its state filled by
 * splitmix64, which never gives the forbidden state of four zeros.
 *
 * Source: D. Blackman, S. Vigna, "Scrambled linear pseudorandom number generators", ACM
 * Transactions on Mathematical Software 47 (2021); splitmix64: G. Steele, D. Lea, C. Flood,
 * "Fast splittable pseudorandom number generators", OOPSLA 2014.
 */
#include "core_private.h"

static uint64_t rotate_left(uint64_t word, unsigned bits)
{
    return (word << bits) | (word >> (64 - bits));
}

static uint64_t splitmix64(uint64_t *state)
{
    uint64_t word = *state += UINT64_C(0x9E3779B97F4A7C15);

    word = (word ^ (word >> 30)) * UINT64_C(0xBF58476D1CE4E5B9);
    word = (word ^ (word >> 27)) * UINT64_C(0x94D049BB133111EB);
    return word ^ (word >> 31);
}

void idsi_random_seed(idsi_random *random, uint64_t seed)
{
    for (size_t i = 0; i < 4; i++) {
        random->state[i] = splitmix64(&seed);
    }
}

uint64_t idsi_random_next(idsi_random *random)
{
    uint64_t *state = random->state;
    uint64_t result = rotate_left(state[1] * 5, 7) * 9;
    uint64_t shifted = state[1] << 17;

    state[2] ^= state[0];
    state[3] ^= state[1];
    state[1] ^= state[2];
    state[0] ^= state[3];
    state[2] ^= shifted;
    state[3] = rotate_left(state[3], 45);
    return result;
}

uint64_t idsi_random_below(idsi_random *random, uint64_t bound)
{
    uint64_t word = 0;
    uint64_t uneven = 0;

    IDSI_ASSERT(bound > 0);
    if (bound <= 1) {
        return 0;
    }
    /* Leaving out the first 2^64 mod bound words makes every rest equally likely. */
    uneven = (0 - bound) % bound;
    do {
        word = idsi_random_next(random);
    } while (word < uneven);
    return word % bound;
}
