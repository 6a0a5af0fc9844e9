/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dying, growing and integers that never overflow silently.
 */
#include "ref.h"

#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>

void ref_die(int status, const char *format, ...)
{
    va_list args;
    fputs("idspan-ref: ", stderr);
    va_start(args, format);
    vfprintf(stderr, format, args);
    va_end(args);
    fputc('\n', stderr);
    exit(status);
}

void *ref_grow(void *old, size_t count, size_t size)
{
    if (count > SIZE_MAX / size)
        ref_die(3, "too large");
    void *grown = realloc(old, count * size);
    if (grown == NULL && count * size != 0)
        ref_die(3, "no memory");
    return grown;
}

int64_t ref_add(int64_t a, int64_t b)
{
    int64_t sum = 0;
    if (__builtin_add_overflow(a, b, &sum) || sum == INT64_MIN)
        ref_die(3, "a coefficient is too large");
    return sum;
}

int64_t ref_mul(int64_t a, int64_t b)
{
    int64_t product = 0;
    if (__builtin_mul_overflow(a, b, &product) || product == INT64_MIN)
        ref_die(3, "a coefficient is too large");
    return product;
}

int64_t ref_gcd(int64_t a, int64_t b)
{
    while (b != 0) {
        int64_t rest = a % b;
        a = b;
        b = rest;
    }
    return a < 0 ? -a : a;
}
