/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The seminormal inner loop for AVX-512: 16 places at once.
 */
#include "mix.h"

#if defined(__x86_64__)

#include <immintrin.h>

#define AVX512 __attribute__((target("avx512f")))

AVX512 static inline __m512i times(__m512i u, __m512i f, __m512i shoup, __m512i p)
{
    __m512i even = _mm512_srli_epi64(_mm512_mul_epu32(u, shoup), 32);
    __m512i odd = _mm512_mul_epu32(_mm512_srli_epi64(u, 32), shoup);
    __m512i quotient = _mm512_mask_blend_epi32(0xaaaa, even, odd);
    return _mm512_sub_epi32(_mm512_mullo_epi32(u, f), _mm512_mullo_epi32(quotient, p));
}

AVX512 static inline __m512i reduce(__m512i x, __m512i bound)
{
    return _mm512_min_epu32(x, _mm512_sub_epi32(x, bound));
}

AVX512 void idsi_mix_avx512(const idsi_mix *mix, uint32_t *x, uint32_t *y, size_t width)
{
    __m512i p = _mm512_set1_epi32((int)mix->p);
    __m512i twice = _mm512_add_epi32(p, p);
    __m512i a = _mm512_set1_epi32((int)mix->a);
    __m512i b = _mm512_set1_epi32((int)mix->b);
    __m512i c = _mm512_set1_epi32((int)mix->c);
    __m512i shoup_a = _mm512_set1_epi32((int)mix->shoup_a);
    __m512i shoup_b = _mm512_set1_epi32((int)mix->shoup_b);
    __m512i shoup_c = _mm512_set1_epi32((int)mix->shoup_c);
    size_t j = 0;

    for (; j + 16 <= width; j += 16) {
        __m512i u = _mm512_loadu_si512(x + j);
        __m512i v = _mm512_loadu_si512(y + j);
        __m512i s = _mm512_add_epi32(times(u, a, shoup_a, p), v);
        __m512i t = _mm512_add_epi32(times(u, b, shoup_b, p), times(v, c, shoup_c, p));
        _mm512_storeu_si512(x + j, reduce(reduce(s, twice), p));
        _mm512_storeu_si512(y + j, reduce(reduce(t, twice), p));
    }
    for (; j < width; j++) {
        idsi_mix_one(mix, &x[j], &y[j]);
    }
}

#endif
