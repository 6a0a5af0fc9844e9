/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The product kernel for AVX2: strips of 4 rows and 8 columns, 8 accumulators of 4 sums.
 */
#include "kernels.h"

#if defined(__x86_64__)

#include <immintrin.h>

#define ROWS 4u
#define COLUMNS 8u

__attribute__((target("avx2"))) static void strip(uint32_t p, size_t steps, const int64_t *a,
                                                  const int64_t *b, uint32_t *c, size_t ldc,
                                                  size_t m, size_t n)
{
    __m256i sum[ROWS][2];
    __m256i zero = _mm256_setzero_si256();
    __m256i back = _mm256_set1_epi64x((int64_t)(4 * (uint64_t)p * p));
    __m256i twice = _mm256_add_epi64(back, back);
    int64_t out[COLUMNS];

    for (size_t i = 0; i < ROWS; i++) {
        sum[i][0] = zero;
        sum[i][1] = zero;
    }
    for (size_t s = 0; s < steps; s += IDSI_KERNEL_STEPS) {
        for (size_t k = 0; k < IDSI_KERNEL_STEPS; k++) {
            __m256i b0 = _mm256_loadu_si256((const __m256i *)b);
            __m256i b1 = _mm256_loadu_si256((const __m256i *)(b + 4));
            for (size_t i = 0; i < ROWS; i++) {
                __m256i x = _mm256_set1_epi64x(a[i]);
                sum[i][0] = _mm256_add_epi64(sum[i][0], _mm256_mul_epi32(x, b0));
                sum[i][1] = _mm256_add_epi64(sum[i][1], _mm256_mul_epi32(x, b1));
            }
            a += ROWS;
            b += COLUMNS;
        }
        for (size_t i = 0; i < ROWS; i++) {
            for (size_t j = 0; j < 2; j++) {
                __m256i negative = _mm256_cmpgt_epi64(zero, sum[i][j]);
                __m256i up = _mm256_and_si256(negative, twice);
                sum[i][j] = _mm256_add_epi64(_mm256_sub_epi64(sum[i][j], back), up);
            }
        }
    }
    for (size_t i = 0; i < m; i++) {
        _mm256_storeu_si256((__m256i *)out, sum[i][0]);
        _mm256_storeu_si256((__m256i *)(out + 4), sum[i][1]);
        for (size_t j = 0; j < n; j++) {
            c[i * ldc + j] = idsi_kernel_settle(c[i * ldc + j], out[j], p);
        }
    }
}

__attribute__((target("avx2"))) static void centre(uint32_t p, const uint32_t *values, size_t count,
                                                   int64_t *out)
{
    __m256i prime = _mm256_set1_epi64x((int64_t)p);
    __m256i half = _mm256_set1_epi64x((int64_t)(p / 2));
    size_t j = 0;

    for (; j + 4 <= count; j += 4) {
        __m256i v = _mm256_cvtepu32_epi64(_mm_loadu_si128((const __m128i *)(values + j)));
        __m256i large = _mm256_cmpgt_epi64(v, half);
        v = _mm256_sub_epi64(v, _mm256_and_si256(large, prime));
        _mm256_storeu_si256((__m256i *)(out + j), v);
    }
    for (; j < count; j++) {
        out[j] = idsi_kernel_centred(values[j], p);
    }
}

__attribute__((target("avx2"))) static void lanes(uint32_t p, const idsi_entry *entries,
                                                  size_t count, const uint32_t *factor,
                                                  uint64_t *sums)
{
    __m256i back = _mm256_set1_epi64x((int64_t)(4 * (uint64_t)p * p));
    __m256i factors[4];

    for (size_t v = 0; v < 4; v++) {
        factors[v] = _mm256_cvtepu32_epi64(_mm_loadu_si128((const __m128i *)(factor + 4 * v)));
    }
    for (size_t i = 0; i < count; i++) {
        __m256i *sum = (__m256i *)(sums + (size_t)entries[i].column * IDSI_LANES);
        __m256i value = _mm256_set1_epi64x((int64_t)entries[i].value);
        for (size_t v = 0; v < 4; v++) {
            __m256i s = _mm256_add_epi64(_mm256_loadu_si256(sum + v),
                                         _mm256_mul_epu32(value, factors[v]));
            __m256i less = _mm256_sub_epi64(s, back); /* its sign tells which of the two */
            s = _mm256_castpd_si256(_mm256_blendv_pd(
                _mm256_castsi256_pd(less), _mm256_castsi256_pd(s), _mm256_castsi256_pd(less)));
            _mm256_storeu_si256(sum + v, s);
        }
    }
}

const idsi_kernel idsi_kernel_avx2 = {"avx2", ROWS, COLUMNS, strip, centre, lanes};

#endif
