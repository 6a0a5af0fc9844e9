/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The product kernel for AVX-512 (F and DQ): strips of 6 rows and 32 columns, so that 24
 * accumulators, 4 columns vectors and a broadcast fill the registers. A step is 24 products of
 * 8 pairs and 24 sums.
 *
 * At the end the sums are reduced in the vector unit: the quotient by p is taken in double
 * precision, which is off by less than 2^62 * 2^-52 / p + 1/2 < 1, so that the remainder lies in
 * (-2p, 2p) and two corrections bring it to [0, p).
 */
#include "kernels.h"

#if defined(__x86_64__)

#include <immintrin.h>

#define ROWS 6u
#define VECTORS 4u
#define COLUMNS 32u

#define AVX512 __attribute__((target("avx512f,avx512dq")))

/* c - sum mod p for 8 entries. */
AVX512 static inline __m512i settle(__m512i c, __m512i sum, __m512i prime, __m512d inverse)
{
    __m512d quotient = _mm512_mul_pd(_mm512_cvtepi64_pd(sum), inverse);
    __m512i rest = _mm512_sub_epi64(
        sum, _mm512_mullo_epi64(_mm512_cvtpd_epi64(quotient), prime));
    __m512i value = _mm512_sub_epi64(c, rest); /* in (-2p, 3p) */
    value = _mm512_mask_add_epi64(value, _mm512_movepi64_mask(value), value, prime);
    value = _mm512_mask_add_epi64(value, _mm512_movepi64_mask(value), value, prime);
    value = _mm512_min_epu64(value, _mm512_sub_epi64(value, prime));
    return _mm512_min_epu64(value, _mm512_sub_epi64(value, prime));
}

AVX512 static void store(uint32_t p, __m512i sum[ROWS][VECTORS], uint32_t *c, size_t ldc, size_t m,
                         size_t n)
{
    __m512i prime = _mm512_set1_epi64((int64_t)p);
    __m512d inverse = _mm512_set1_pd(1.0 / (double)p);

    for (size_t i = 0; i < m; i++) {
        for (size_t v = 0; v < VECTORS && 8 * v < n; v++) {
            uint32_t *at = c + i * ldc + 8 * v;
            size_t left = n - 8 * v;
            __mmask16 mask = (__mmask16)(left >= 8 ? 0xffu : (1u << left) - 1u);
            __m512i old = _mm512_cvtepu32_epi64(
                _mm512_castsi512_si256(_mm512_maskz_loadu_epi32(mask, at)));
            __m256i now = _mm512_cvtepi64_epi32(settle(old, sum[i][v], prime, inverse));
            _mm512_mask_storeu_epi32(at, mask, _mm512_castsi256_si512(now));
        }
    }
}

AVX512 static void strip(uint32_t p, size_t steps, const int64_t *a, const int64_t *b, uint32_t *c,
                         size_t ldc, size_t m, size_t n)
{
    __m512i sum[ROWS][VECTORS];
    __m512i back = _mm512_set1_epi64((int64_t)(4 * (uint64_t)p * p));
    __m512i twice = _mm512_add_epi64(back, back);

#pragma GCC unroll 6
    for (size_t i = 0; i < ROWS; i++) {
#pragma GCC unroll 4
        for (size_t v = 0; v < VECTORS; v++) {
            sum[i][v] = _mm512_setzero_si512();
        }
    }
    for (size_t s = 0; s < steps; s += IDSI_KERNEL_STEPS) {
        for (size_t k = 0; k < IDSI_KERNEL_STEPS; k++) {
            __m512i column[VECTORS];
#pragma GCC unroll 4
            for (size_t v = 0; v < VECTORS; v++) {
                column[v] = _mm512_loadu_si512(b + 8 * v);
            }
#pragma GCC unroll 6
            for (size_t i = 0; i < ROWS; i++) {
                __m512i x = _mm512_set1_epi64(a[i]);
#pragma GCC unroll 4
                for (size_t v = 0; v < VECTORS; v++) {
                    sum[i][v] = _mm512_add_epi64(sum[i][v], _mm512_mul_epi32(x, column[v]));
                }
            }
            a += ROWS;
            b += COLUMNS;
        }
#pragma GCC unroll 6
        for (size_t i = 0; i < ROWS; i++) {
#pragma GCC unroll 4
            for (size_t v = 0; v < VECTORS; v++) {
                __mmask8 negative = _mm512_movepi64_mask(sum[i][v]);
                __m512i less = _mm512_sub_epi64(sum[i][v], back);
                sum[i][v] = _mm512_mask_add_epi64(less, negative, less, twice);
            }
        }
    }
    store(p, sum, c, ldc, m, n);
}

AVX512 static void centre(uint32_t p, const uint32_t *values, size_t count, int64_t *out)
{
    __m512i prime = _mm512_set1_epi64((int64_t)p);
    __m512i half = _mm512_set1_epi64((int64_t)(p / 2));
    size_t j = 0;

    for (; j + 8 <= count; j += 8) {
        __m512i v = _mm512_cvtepu32_epi64(_mm256_loadu_si256((const __m256i *)(values + j)));
        v = _mm512_mask_sub_epi64(v, _mm512_cmpgt_epi64_mask(v, half), v, prime);
        _mm512_storeu_si512(out + j, v);
    }
    for (; j < count; j++) {
        out[j] = idsi_kernel_centred(values[j], p);
    }
}

AVX512 static void lanes(uint32_t p, const idsi_entry *entries, size_t count,
                         const uint32_t *factor, uint64_t *sums)
{
    __m512i back = _mm512_set1_epi64((int64_t)(4 * (uint64_t)p * p));
    __m512i f0 = _mm512_cvtepu32_epi64(_mm256_loadu_si256((const __m256i *)factor));
    __m512i f1 = _mm512_cvtepu32_epi64(_mm256_loadu_si256((const __m256i *)(factor + 8)));

    for (size_t i = 0; i < count; i++) {
        uint64_t *sum = sums + (size_t)entries[i].column * IDSI_LANES;
        __m512i value = _mm512_set1_epi64((int64_t)entries[i].value);
        __m512i s0 = _mm512_add_epi64(_mm512_loadu_si512(sum), _mm512_mul_epu32(value, f0));
        __m512i s1 = _mm512_add_epi64(_mm512_loadu_si512(sum + 8), _mm512_mul_epu32(value, f1));
        s0 = _mm512_min_epu64(s0, _mm512_sub_epi64(s0, back));
        s1 = _mm512_min_epu64(s1, _mm512_sub_epi64(s1, back));
        _mm512_storeu_si512(sum, s0);
        _mm512_storeu_si512(sum + 8, s1);
    }
}

const idsi_kernel idsi_kernel_avx512 = {"avx512", ROWS, COLUMNS, strip, centre, lanes};

#endif
