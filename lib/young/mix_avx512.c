/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The seminormal exchange for AVX-512: 16 places at once, the last ones by a mask.
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

AVX512 static inline __mmask16 mask_of(size_t left)
{
    return (__mmask16)(left >= 16 ? 0xffffu : (1u << left) - 1u);
}

AVX512 static inline void mix_rows(const idsi_mix *mix, uint32_t *x, uint32_t *y, size_t width)
{
    __m512i p = _mm512_set1_epi32((int)mix->p);
    __m512i twice = _mm512_add_epi32(p, p);
    __m512i a = _mm512_set1_epi32((int)mix->a);
    __m512i shoup = _mm512_set1_epi32((int)mix->shoup);

    for (size_t j = 0; j < width; j += 16) {
        __mmask16 mask = mask_of(width - j);
        __m512i u = _mm512_maskz_loadu_epi32(mask, x + j);
        __m512i v = _mm512_maskz_loadu_epi32(mask, y + j);
        __m512i s = _mm512_add_epi32(times(u, a, shoup, p), v);
        __m512i t = _mm512_sub_epi32(_mm512_add_epi32(u, twice), times(s, a, shoup, p));
        _mm512_mask_storeu_epi32(x + j, mask, reduce(reduce(s, twice), p));
        _mm512_mask_storeu_epi32(y + j, mask, reduce(reduce(t, twice), p));
    }
}

AVX512 static inline void negate_row(uint32_t p, uint32_t *x, size_t width)
{
    __m512i prime = _mm512_set1_epi32((int)p);

    for (size_t j = 0; j < width; j += 16) {
        __mmask16 mask = mask_of(width - j);
        __m512i u = _mm512_maskz_loadu_epi32(mask, x + j);
        _mm512_mask_storeu_epi32(x + j, mask, reduce(_mm512_sub_epi32(prime, u), prime));
    }
}

AVX512 void idsi_exchange_avx512(const idsi_exchange *exchange, uint32_t *block, size_t stride,
                                 size_t width)
{
    for (size_t t = 0; t < exchange->count; t++) {
        size_t partner = exchange->partner[t];
        if (partner > t) {
            mix_rows(&exchange->mix[exchange->distance[t] + exchange->centre], block + t * stride,
                     block + partner * stride, width);
        } else if (partner == t && exchange->distance[t] < 0) {
            negate_row(exchange->p, block + t * stride, width);
        }
    }
}

#endif
