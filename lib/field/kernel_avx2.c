/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The kernels for AVX2. Products: strips of 4 rows and 8 columns, 8 accumulators of 4 sums.
 */
#include <string.h>

#include "kernels.h"

#if defined(__x86_64__)

#include <immintrin.h>

#define ROWS 4u
#define COLUMNS 8u

#define AVX2 __attribute__((target("avx2")))

/* The prime as vectors want it. */
typedef struct modulus {
    __m256i prime;
    __m256i square; /* p^2 */
    __m256i reciprocal;
    __m128i first_shift;
    __m128i second_shift;
} modulus;

AVX2 static inline modulus modulus_of(uint32_t p)
{
    int bits = (int)idsi_kernel_bits(p);
    modulus m;

    m.prime = _mm256_set1_epi64x((int64_t)p);
    m.square = _mm256_set1_epi64x((int64_t)((uint64_t)p * p));
    m.reciprocal = _mm256_set1_epi64x((int64_t)idsi_kernel_reciprocal(p));
    m.first_shift = _mm_cvtsi32_si128(bits - 1);
    m.second_shift = _mm_cvtsi32_si128(bits + 1);
    return m;
}

/* The smaller of x and x - y as unsigned numbers, both < 2^63. */
AVX2 static inline __m256i less_once(__m256i x, __m256i y)
{
    __m256i less = _mm256_sub_epi64(x, y); /* its sign tells which of the two */
    return _mm256_castpd_si256(_mm256_blendv_pd(_mm256_castsi256_pd(less), _mm256_castsi256_pd(x),
                                                _mm256_castsi256_pd(less)));
}

/* Remainder of x < 2^2b. */
AVX2 static inline __m256i remainder_of(__m256i x, const modulus *m)
{
    __m256i high = _mm256_srl_epi64(x, m->first_shift);
    __m256i quotient = _mm256_srl_epi64(_mm256_mul_epu32(high, m->reciprocal), m->second_shift);
    __m256i rest = _mm256_sub_epi64(x, _mm256_mul_epu32(quotient, m->prime));
    rest = _mm256_min_epu32(rest, _mm256_sub_epi64(rest, m->prime));
    return _mm256_min_epu32(rest, _mm256_sub_epi64(rest, m->prime));
}

/* Remainder of 0 <= x <= 8 p^2. */
AVX2 static inline __m256i residues_of(__m256i x, const modulus *m)
{
    x = less_once(x, _mm256_slli_epi64(m->square, 2));
    x = less_once(x, _mm256_slli_epi64(m->square, 1));
    x = less_once(x, m->square);
    return remainder_of(less_once(x, m->square), m);
}

/* Brings a sum between -8 p^2 and 8 p^2 between half of them; back = 4 p^2. */
AVX2 static inline __m256i bring_back(__m256i sum, __m256i back)
{
    __m256i negative = _mm256_cmpgt_epi64(_mm256_setzero_si256(), sum);
    __m256i up = _mm256_and_si256(negative, _mm256_slli_epi64(back, 1));
    return _mm256_add_epi64(_mm256_sub_epi64(sum, back), up);
}

AVX2 static void store(uint32_t p, __m256i sum[ROWS][2], uint32_t *c, size_t ldc, size_t m,
                       size_t n)
{
    modulus mod = modulus_of(p);
    __m256i up = _mm256_slli_epi64(mod.square, 2);
    __m256i prime = _mm256_set1_epi32((int32_t)p);
    uint32_t rest[COLUMNS];

    for (size_t i = 0; i < m; i++) {
        __m256i even = residues_of(_mm256_add_epi64(sum[i][0], up), &mod);
        __m256i odd = residues_of(_mm256_add_epi64(sum[i][1], up), &mod);
        __m256i both = _mm256_or_si256(even, _mm256_slli_epi64(odd, 32));
        if (n == COLUMNS) {
            __m256i *at = (__m256i *)(void *)(c + i * ldc);
            __m256i value = _mm256_sub_epi32(_mm256_loadu_si256(at), both);
            _mm256_storeu_si256(at, _mm256_min_epu32(value, _mm256_add_epi32(value, prime)));
            continue;
        }
        _mm256_storeu_si256((__m256i *)(void *)rest, both);
        for (size_t j = 0; j < n; j++) {
            uint32_t *at = c + i * ldc + j;
            *at = *at >= rest[j] ? *at - rest[j] : *at + p - rest[j];
        }
    }
}

/* Entry k of row i of A is a[i * row_step + k * k_step]; both are constants where this is used. */
AVX2 static inline __attribute__((always_inline)) void multiply(uint32_t p, size_t steps,
                                                                const int32_t *a, size_t row_step,
                                                                size_t k_step, const int32_t *b,
                                                                uint32_t *c, size_t ldc, size_t m,
                                                                size_t n)
{
    __m256i sum[ROWS][2];
    __m256i zero = _mm256_setzero_si256();
    __m256i back = _mm256_set1_epi64x((int64_t)(4 * (uint64_t)p * p));

    for (size_t i = 0; i < ROWS; i++) {
        sum[i][0] = zero;
        sum[i][1] = zero;
    }
    for (size_t s = 0; s < steps; s += IDSI_KERNEL_STEPS) {
        for (size_t k = 0; k < IDSI_KERNEL_STEPS; k++) {
            __m256i even = _mm256_loadu_si256((const __m256i *)(const void *)b);
            __m256i odd = _mm256_srli_epi64(even, 32);
#pragma GCC unroll 4
            for (size_t i = 0; i < ROWS; i++) {
                __m256i x = _mm256_set1_epi32(a[i * row_step]);
                sum[i][0] = _mm256_add_epi64(sum[i][0], _mm256_mul_epi32(x, even));
                sum[i][1] = _mm256_add_epi64(sum[i][1], _mm256_mul_epi32(x, odd));
            }
            a += k_step;
            b += COLUMNS;
        }
#pragma GCC unroll 4
        for (size_t i = 0; i < ROWS; i++) {
            for (size_t j = 0; j < 2; j++) {
                sum[i][j] = bring_back(sum[i][j], back);
            }
        }
    }
    store(p, sum, c, ldc, m, n);
}

AVX2 static void strip(uint32_t p, size_t steps, const int32_t *a, const int32_t *b, uint32_t *c,
                       size_t ldc, size_t m, size_t n)
{
    multiply(p, steps, a, IDSI_KERNEL_DEPTH, 1, b, c, ldc, m, n);
}

AVX2 static void left_strip(uint32_t p, size_t steps, const int32_t *a, const int32_t *b,
                            uint32_t *c, size_t ldc, size_t m, size_t n)
{
    multiply(p, steps, a, 1, IDSI_LEFT_ROWS, b, c, ldc, m, n);
}

AVX2 static void centre(uint32_t p, const uint32_t *values, size_t count, int32_t *out)
{
    __m256i prime = _mm256_set1_epi32((int32_t)p);
    __m256i half = _mm256_set1_epi32((int32_t)(p / 2));
    size_t j = 0;

    for (; j + 8 <= count; j += 8) {
        __m256i v = _mm256_loadu_si256((const __m256i *)(const void *)(values + j));
        v = _mm256_sub_epi32(v, _mm256_and_si256(_mm256_cmpgt_epi32(v, half), prime));
        _mm256_storeu_si256((__m256i *)(void *)(out + j), v);
    }
    for (; j < count; j++) {
        out[j] = idsi_kernel_centred(values[j], p);
    }
}

AVX2 static void pack(uint32_t p, size_t k, size_t n, const uint32_t *b, size_t ldb, size_t width,
                      int32_t *out)
{
    size_t steps = idsi_kernel_whole_steps(k);

    for (size_t j = 0; j < n; j += width) {
        size_t real = n - j < width ? n - j : width;
        for (size_t s = 0; s < k; s++) {
            centre(p, b + s * ldb + j, real, out);
            for (size_t i = real; i < width; i++) {
                out[i] = 0;
            }
            out += width;
        }
        memset(out, 0, (steps - k) * width * sizeof *out);
        out += (steps - k) * width;
    }
}

AVX2 static void combine(uint32_t p, uint32_t *target, uint32_t scale, const uint32_t *source,
                         uint32_t factor, size_t count)
{
    modulus mod = modulus_of(p);
    __m256i s = _mm256_set1_epi64x((int64_t)scale);
    __m256i f = _mm256_set1_epi64x((int64_t)factor);
    size_t j = 0;

    for (; j + 8 <= count; j += 8) {
        __m256i *at = (__m256i *)(void *)(target + j);
        __m256i x = _mm256_loadu_si256(at);
        __m256i y = _mm256_loadu_si256((const __m256i *)(const void *)(source + j));
        __m256i even = _mm256_add_epi64(_mm256_mul_epu32(x, s), _mm256_mul_epu32(y, f));
        __m256i odd = _mm256_add_epi64(_mm256_mul_epu32(_mm256_srli_epi64(x, 32), s),
                                       _mm256_mul_epu32(_mm256_srli_epi64(y, 32), f));
        even = remainder_of(less_once(even, mod.square), &mod);
        odd = remainder_of(less_once(odd, mod.square), &mod);
        _mm256_storeu_si256(at, _mm256_or_si256(even, _mm256_slli_epi64(odd, 32)));
    }
    if (j < count) {
        idsi_kernel_portable.combine(p, target + j, scale, source + j, factor, count - j);
    }
}

AVX2 static bool gather(uint32_t p, const idsi_entry *entries, size_t count,
                        const uint32_t *factors, const uint64_t *sums, uint32_t *residues)
{
    modulus mod = modulus_of(p);
    __m256i back = _mm256_slli_epi64(mod.square, 2);
    __m256i sum[4]; /* even lanes, odd lanes */
    __m256i any = _mm256_setzero_si256();

    for (size_t v = 0; v < 4; v++) {
        sum[v] = _mm256_loadu_si256((const __m256i *)(const void *)(sums + 4 * v));
    }
    for (size_t i = 0; i < count; i++) {
        const uint32_t *factor = factors + (size_t)entries[i].column * IDSI_LANES;
        __m256i value = _mm256_set1_epi32((int32_t)entries[i].value);
        for (size_t v = 0; v < 2; v++) {
            __m256i f = _mm256_loadu_si256((const __m256i *)(const void *)(factor + 8 * v));
            sum[v] = _mm256_add_epi64(sum[v], _mm256_mul_epu32(f, value));
            f = _mm256_srli_epi64(f, 32);
            sum[v + 2] = _mm256_add_epi64(sum[v + 2], _mm256_mul_epu32(f, value));
        }
        if (i % 4 == 3 || i + 1 == count) {
            for (size_t v = 0; v < 4; v++) {
                sum[v] = less_once(sum[v], back);
            }
        }
    }
    for (size_t v = 0; v < 2; v++) {
        __m256i even = residues_of(sum[v], &mod);
        __m256i odd = residues_of(sum[v + 2], &mod);
        __m256i both = _mm256_or_si256(even, _mm256_slli_epi64(odd, 32));
        _mm256_storeu_si256((__m256i *)(void *)(residues + 8 * v), both);
        any = _mm256_or_si256(any, both);
    }
    return _mm256_testz_si256(any, any) == 0;
}

AVX2 static uint32_t dot(uint32_t p, const uint32_t *a, size_t stride, const int32_t *b,
                         size_t count)
{
    modulus mod = modulus_of(p);
    __m256i back = _mm256_slli_epi64(mod.square, 2);
    __m256i sum[2] = {_mm256_setzero_si256(), _mm256_setzero_si256()};
    uint64_t lanes[4];
    size_t j = 0;

    for (size_t steps = 1; j + COLUMNS <= count; j += COLUMNS, steps++) {
        const uint32_t *strip = a + j / COLUMNS * stride;
        __m256i x = _mm256_loadu_si256((const __m256i *)(const void *)strip);
        __m256i y = _mm256_loadu_si256((const __m256i *)(const void *)(b + j));
        sum[0] = _mm256_add_epi64(sum[0], _mm256_mul_epi32(x, y));
        x = _mm256_srli_epi64(x, 32);
        y = _mm256_srli_epi64(y, 32);
        sum[1] = _mm256_add_epi64(sum[1], _mm256_mul_epi32(x, y));
        for (size_t i = 0; steps % 8 == 0 && i < 2; i++) {
            sum[i] = bring_back(sum[i], back);
        }
    }
    for (size_t i = 0; i < 2; i++) {
        sum[i] = residues_of(_mm256_add_epi64(bring_back(sum[i], back), back), &mod);
    }
    _mm256_storeu_si256((__m256i *)(void *)lanes, _mm256_add_epi64(sum[0], sum[1]));
    uint64_t rest = idsi_kernel_portable.dot(p, a + j / COLUMNS * stride, 0, b + j, count - j);
    return (uint32_t)((lanes[0] + lanes[1] + lanes[2] + lanes[3] + rest) % p);
}

const idsi_kernel idsi_kernel_avx2 = {"avx2", ROWS, COLUMNS, strip,  left_strip, NULL,
                                      centre, pack, combine, gather, dot};

#endif
