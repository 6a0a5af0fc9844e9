/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The seminormal exchange for AVX2: 8 places at once.
 */
#include "mix.h"

#if defined(__x86_64__)

#include <immintrin.h>

#define AVX2 __attribute__((target("avx2")))

AVX2 static inline __m256i times(__m256i u, __m256i f, __m256i shoup, __m256i p)
{
    __m256i even = _mm256_srli_epi64(_mm256_mul_epu32(u, shoup), 32);
    __m256i odd = _mm256_mul_epu32(_mm256_srli_epi64(u, 32), shoup);
    __m256i quotient = _mm256_blend_epi32(even, odd, 0xaa);
    return _mm256_sub_epi32(_mm256_mullo_epi32(u, f), _mm256_mullo_epi32(quotient, p));
}

AVX2 static inline __m256i reduce(__m256i x, __m256i bound)
{
    return _mm256_min_epu32(x, _mm256_sub_epi32(x, bound));
}

AVX2 static inline void mix_rows(const idsi_mix *mix, uint32_t *x, uint32_t *y, size_t width)
{
    __m256i p = _mm256_set1_epi32((int)mix->p);
    __m256i twice = _mm256_add_epi32(p, p);
    __m256i a = _mm256_set1_epi32((int)mix->a);
    __m256i shoup = _mm256_set1_epi32((int)mix->shoup);
    size_t j = 0;

    for (; j + 8 <= width; j += 8) {
        __m256i u = _mm256_loadu_si256((const __m256i *)(x + j));
        __m256i v = _mm256_loadu_si256((const __m256i *)(y + j));
        __m256i s = _mm256_add_epi32(times(u, a, shoup, p), v);
        __m256i t = _mm256_sub_epi32(_mm256_add_epi32(u, twice), times(s, a, shoup, p));
        _mm256_storeu_si256((__m256i *)(x + j), reduce(reduce(s, twice), p));
        _mm256_storeu_si256((__m256i *)(y + j), reduce(reduce(t, twice), p));
    }
    for (; j < width; j++) {
        idsi_mix_one(mix, &x[j], &y[j]);
    }
}

AVX2 void idsi_exchange_avx2(const idsi_exchange *exchange, uint32_t *block, size_t stride,
                             size_t width)
{
    for (size_t t = 0; t < exchange->count; t++) {
        size_t partner = exchange->partner[t];
        uint32_t *row = block + t * stride;
        if (partner > t) {
            mix_rows(&exchange->mix[exchange->distance[t] + exchange->centre], row,
                     block + partner * stride, width);
        } else if (partner == t && exchange->distance[t] < 0) {
            for (size_t j = 0; j < width; j++) {
                row[j] = idsi_mix_negate(row[j], exchange->p);
            }
        }
    }
}

#endif
