/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The kernels for AVX-512 (F and DQ). Products: strips of 6 rows and 32 columns, or 12 rows and 16
 * columns, so that 24 accumulators, the vectors of columns and a broadcast fit the registers. A
 * step is 24 products of 8 pairs and 24 sums.
 *
 * Sums of at most 4 p^2 are reduced with a quotient by p in double precision. It is at most 4 p, so
 * rounded to an integer it is off by less than 1/2 + 4 p * 2^-51 < 1: the remainder lies in
 * (-p, p), and one correction brings it to [0, p).
 */
#include <string.h>

#include "kernels.h"

#if defined(__x86_64__)

#include <immintrin.h>

#define ROWS 6u
#define VECTORS 4u
#define COLUMNS 32u

#define AVX512 __attribute__((target("avx512f,avx512dq")))

/* sum mod p for 8 sums, |sum| <= 4 p^2. */
AVX512 static inline __m512i residues_of(__m512i sum, __m512i prime, __m512d inverse)
{
    __m512d quotient = _mm512_mul_pd(_mm512_cvtepi64_pd(sum), inverse);
    __m512i rest = _mm512_sub_epi64(sum, _mm512_mullo_epi64(_mm512_cvtpd_epi64(quotient), prime));
    return _mm512_min_epu64(rest, _mm512_add_epi64(rest, prime));
}

/* c - sum mod p. */
AVX512 static inline __m512i settle(__m512i c, __m512i sum, __m512i prime, __m512d inverse)
{
    __m512i value = _mm512_sub_epi64(c, residues_of(sum, prime, inverse));
    return _mm512_min_epu64(value, _mm512_add_epi64(value, prime));
}

/* Stores the sums of m rows, each of `vectors` registers at sum[i * vectors]. */
AVX512 static inline __attribute__((always_inline)) void store(uint32_t p, const __m512i *sum,
                                                               size_t vectors, uint32_t *c,
                                                               size_t ldc, size_t m, size_t n)
{
    __m512i prime = _mm512_set1_epi64((int64_t)p);
    __m512i low = _mm512_set1_epi64(UINT32_MAX);
    __m512d inverse = _mm512_set1_pd(1.0 / (double)p);

    for (size_t i = 0; i < m; i++) {
        const __m512i *row = sum + i * vectors;
        for (size_t v = 0; v < vectors / 2 && 16 * v < n; v++) {
            uint32_t *at = c + i * ldc + 16 * v;
            size_t left = n - 16 * v;
            __mmask16 mask = (__mmask16)(left >= 16 ? 0xffffu : (1u << left) - 1u);
            __m512i old = _mm512_maskz_loadu_epi32(mask, at);
            __m512i even = settle(_mm512_and_si512(old, low), row[2 * v], prime, inverse);
            __m512i odd = settle(_mm512_srli_epi64(old, 32), row[2 * v + 1], prime, inverse);
            _mm512_mask_storeu_epi32(at, mask, _mm512_or_si512(even, _mm512_slli_epi64(odd, 32)));
        }
    }
}

/*
 * A strip of rows x (8 vectors) columns; all sizes but `steps` are constants where this is used.
 * Entry k of row i of A is a[i * row_step + k * k_step].
 */
AVX512 static inline __attribute__((always_inline)) void multiply(uint32_t p, size_t steps,
                                                                  const int32_t *a, size_t row_step,
                                                                  size_t k_step, const int32_t *b,
                                                                  __m512i *sum, size_t rows,
                                                                  size_t vectors)
{
    __m512i back = _mm512_set1_epi64((int64_t)(4 * (uint64_t)p * p));
    __m512i twice = _mm512_add_epi64(back, back);

#pragma GCC unroll 24
    for (size_t i = 0; i < rows * vectors; i++) {
        sum[i] = _mm512_setzero_si512();
    }
    for (size_t s = 0; s < steps; s += IDSI_KERNEL_STEPS) {
        for (size_t k = 0; k < IDSI_KERNEL_STEPS; k++) {
            __m512i column[VECTORS];
#pragma GCC unroll 2
            for (size_t v = 0; v < vectors; v += 2) {
                column[v] = _mm512_loadu_si512(b + 8 * v);
                column[v + 1] = _mm512_srli_epi64(column[v], 32);
            }
#pragma GCC unroll 12
            for (size_t i = 0; i < rows; i++) {
                __m512i x = _mm512_set1_epi32(a[i * row_step]);
#pragma GCC unroll 4
                for (size_t v = 0; v < vectors; v++) {
                    sum[i * vectors + v] =
                        _mm512_add_epi64(sum[i * vectors + v], _mm512_mul_epi32(x, column[v]));
                }
            }
            a += k_step;
            b += 8 * vectors;
        }
#pragma GCC unroll 24
        for (size_t i = 0; i < rows * vectors; i++) {
            __mmask8 negative = _mm512_movepi64_mask(sum[i]);
            __m512i less = _mm512_sub_epi64(sum[i], back);
            sum[i] = _mm512_mask_add_epi64(less, negative, less, twice);
        }
    }
}

AVX512 static void strip(uint32_t p, size_t steps, const int32_t *a, const int32_t *b, uint32_t *c,
                         size_t ldc, size_t m, size_t n)
{
    __m512i sum[ROWS * VECTORS];

    multiply(p, steps, a, IDSI_KERNEL_DEPTH, 1, b, sum, ROWS, VECTORS);
    store(p, sum, VECTORS, c, ldc, m, n);
}

AVX512 static void left_strip(uint32_t p, size_t steps, const int32_t *a, const int32_t *b,
                              uint32_t *c, size_t ldc, size_t m, size_t n)
{
    __m512i sum[ROWS * VECTORS];

    multiply(p, steps, a, 1, IDSI_LEFT_ROWS, b, sum, ROWS, VECTORS);
    store(p, sum, VECTORS, c, ldc, m, n);
}

AVX512 static void narrow_strip(uint32_t p, size_t steps, const int32_t *a, const int32_t *b,
                                uint32_t *c, size_t ldc, size_t m, size_t n)
{
    __m512i sum[IDSI_LEFT_ROWS * 2];

    multiply(p, steps, a, 1, IDSI_LEFT_ROWS, b, sum, IDSI_LEFT_ROWS, 2);
    store(p, sum, 2, c, ldc, m, n);
}

AVX512 static inline __m512i centred(__m512i v, uint32_t p)
{
    __mmask16 above = _mm512_cmpgt_epi32_mask(v, _mm512_set1_epi32((int32_t)(p / 2)));
    return _mm512_mask_sub_epi32(v, above, v, _mm512_set1_epi32((int32_t)p));
}

AVX512 static void centre(uint32_t p, const uint32_t *values, size_t count, int32_t *out)
{
    for (size_t j = 0; j < count; j += 16) {
        size_t left = count - j;
        __mmask16 mask = (__mmask16)(left >= 16 ? 0xffffu : (1u << left) - 1u);
        __m512i v = _mm512_maskz_loadu_epi32(mask, values + j);
        _mm512_mask_storeu_epi32(out + j, mask, centred(v, p));
    }
}

AVX512 static void pack(uint32_t p, size_t k, size_t n, const uint32_t *b, size_t ldb, size_t width,
                        int32_t *out)
{
    size_t steps = idsi_kernel_whole_steps(k);

    for (size_t j = 0; j < n; j += width) {
        for (size_t s = 0; s < k; s++) {
            for (size_t i = 0; i < width; i += 16) {
                size_t left = j + i < n ? n - j - i : 0;
                __mmask16 mask = (__mmask16)(left >= 16 ? 0xffffu : (1u << left) - 1u);
                __m512i v = _mm512_maskz_loadu_epi32(mask, b + s * ldb + j + i);
                _mm512_storeu_si512(out + i, centred(v, p));
            }
            out += width;
        }
        memset(out, 0, (steps - k) * width * sizeof *out);
        out += (steps - k) * width;
    }
}

AVX512 static void combine(uint32_t p, uint32_t *target, uint32_t scale, const uint32_t *source,
                           uint32_t factor, size_t count)
{
    __m512i prime = _mm512_set1_epi64((int64_t)p);
    __m512d inverse = _mm512_set1_pd(1.0 / (double)p);
    __m512i s = _mm512_set1_epi64((int64_t)scale);
    __m512i f = _mm512_set1_epi64((int64_t)factor);

    for (size_t j = 0; j < count; j += 16) {
        size_t left = count - j;
        __mmask16 mask = (__mmask16)(left >= 16 ? 0xffffu : (1u << left) - 1u);
        __m512i x = _mm512_maskz_loadu_epi32(mask, target + j);
        __m512i y = _mm512_maskz_loadu_epi32(mask, source + j);
        __m512i even = _mm512_add_epi64(_mm512_mul_epu32(x, s), _mm512_mul_epu32(y, f));
        __m512i odd = _mm512_add_epi64(_mm512_mul_epu32(_mm512_srli_epi64(x, 32), s),
                                       _mm512_mul_epu32(_mm512_srli_epi64(y, 32), f));
        even = residues_of(even, prime, inverse);
        odd = residues_of(odd, prime, inverse);
        _mm512_mask_storeu_epi32(target + j, mask,
                                 _mm512_or_si512(even, _mm512_slli_epi64(odd, 32)));
    }
}

/* Brings a sum below 12 p^2 under 4 p^2. */
AVX512 static inline __m512i bring_back(__m512i sum, __m512i back)
{
    sum = _mm512_min_epu64(sum, _mm512_sub_epi64(sum, _mm512_add_epi64(back, back)));
    return _mm512_min_epu64(sum, _mm512_sub_epi64(sum, back));
}

AVX512 static bool gather(uint32_t p, const idsi_entry *entries, size_t count,
                          const uint32_t *factors, const uint64_t *sums, uint32_t *residues)
{
    __m512i prime = _mm512_set1_epi64((int64_t)p);
    __m512i back = _mm512_set1_epi64((int64_t)(4 * (uint64_t)p * p));
    __m512d inverse = _mm512_set1_pd(1.0 / (double)p);
    __m512i even = _mm512_loadu_si512(sums);
    __m512i odd = _mm512_loadu_si512(sums + 8);

    for (size_t i = 0; i < count; i += 8) {
        size_t end = i + 8 < count ? i + 8 : count;
        for (size_t k = i; k < end; k++) {
            __m512i f = _mm512_loadu_si512(factors + (size_t)entries[k].column * IDSI_LANES);
            __m512i value = _mm512_set1_epi32((int32_t)entries[k].value);
            even = _mm512_add_epi64(even, _mm512_mul_epu32(f, value));
            odd = _mm512_add_epi64(odd, _mm512_mul_epu32(_mm512_srli_epi64(f, 32), value));
        }
        even = bring_back(even, back);
        odd = bring_back(odd, back);
    }
    even = residues_of(even, prime, inverse);
    odd = residues_of(odd, prime, inverse);
    __m512i all = _mm512_or_si512(even, _mm512_slli_epi64(odd, 32));
    _mm512_storeu_si512(residues, all);
    return _mm512_test_epi64_mask(all, all) != 0;
}

AVX512 static uint32_t dot(uint32_t p, const uint32_t *a, size_t stride, const int32_t *b,
                           size_t count)
{
    __m512i prime = _mm512_set1_epi64((int64_t)p);
    __m512i back = _mm512_set1_epi64((int64_t)(4 * (uint64_t)p * p));
    __m512d inverse = _mm512_set1_pd(1.0 / (double)p);
    __m512i sum[2] = {_mm512_setzero_si512(), _mm512_setzero_si512()};

    for (size_t j = 0; j < count;) {
        /* 4 strips: 8 products in each place */
        size_t end = j + 4 * COLUMNS < count ? j + 4 * COLUMNS : count;
        for (; j < end; j += 16) {
            __mmask16 mask = (__mmask16)(end - j >= 16 ? 0xffffu : (1u << (end - j)) - 1u);
            __m512i x = _mm512_maskz_loadu_epi32(mask, a + j / COLUMNS * stride + j % COLUMNS);
            __m512i y = _mm512_maskz_loadu_epi32(mask, b + j);
            sum[0] = _mm512_add_epi64(sum[0], _mm512_mul_epi32(x, y));
            sum[1] = _mm512_add_epi64(
                sum[1], _mm512_mul_epi32(_mm512_srli_epi64(x, 32), _mm512_srli_epi64(y, 32)));
        }
        for (size_t i = 0; i < 2; i++) {
            __mmask8 negative = _mm512_movepi64_mask(sum[i]);
            __m512i less = _mm512_sub_epi64(sum[i], back);
            sum[i] = _mm512_mask_add_epi64(less, negative, sum[i], back);
        }
    }
    __m512i both =
        _mm512_add_epi64(residues_of(sum[0], prime, inverse), residues_of(sum[1], prime, inverse));
    return (uint32_t)((uint64_t)_mm512_reduce_add_epi64(both) % p);
}

const idsi_kernel idsi_kernel_avx512 = {"avx512", ROWS, COLUMNS, strip,  left_strip, narrow_strip,
                                        centre,   pack, combine, gather, dot};

#endif
