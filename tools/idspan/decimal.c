/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Numbers beyond 64 bits, as far as the tables of the tool need them.
 *
 * A type of degree 64 can have 64!/order monomials; that is all the tool must add up and print,
 * so a fixed array of limbs to base 10^9 is enough and nothing is allocated.
 */
#include <inttypes.h>
#include <string.h>

#include "tool.h"

#define BASE 1000000000u

void decimal_set(decimal *number, uint64_t value)
{
    memset(number, 0, sizeof *number);
    for (size_t i = 0; value > 0; i++) {
        number->limb[i] = (uint32_t)(value % BASE);
        value /= BASE;
    }
}

void decimal_add(decimal *number, const decimal *more)
{
    uint32_t carry = 0;

    for (size_t i = 0; i < DECIMAL_LIMBS; i++) {
        uint32_t sum = number->limb[i] + more->limb[i] + carry;
        carry = sum >= BASE;
        number->limb[i] = carry > 0 ? sum - BASE : sum;
    }
}

void decimal_multiply(decimal *number, uint32_t factor)
{
    uint64_t carry = 0;

    for (size_t i = 0; i < DECIMAL_LIMBS; i++) {
        uint64_t product = (uint64_t)number->limb[i] * factor + carry;
        number->limb[i] = (uint32_t)(product % BASE);
        carry = product / BASE;
    }
}

static uint64_t greatest_divisor(uint64_t a, uint64_t b)
{
    while (b != 0) {
        uint64_t rest = a % b;
        a = b;
        b = rest;
    }
    return a;
}

/*
 * The divisor is taken out of the factors 2, 3, ..., n one after the other. Each prime of the
 * divisor is found in them often enough because the divisor divides n!.
 */
void decimal_factorial_over(decimal *number, uint32_t n, uint64_t divisor)
{
    decimal_set(number, 1);
    for (uint32_t factor = 2; factor <= n; factor++) {
        uint64_t common = greatest_divisor(factor, divisor);
        divisor /= common;
        decimal_multiply(number, factor / (uint32_t)common);
    }
}

bool decimal_is_one(const decimal *number)
{
    decimal one;

    decimal_set(&one, 1);
    return memcmp(number, &one, sizeof one) == 0;
}

void decimal_print(const decimal *number, char text[DECIMAL_CHARS])
{
    size_t top = DECIMAL_LIMBS;
    int used = 0;

    while (top > 1 && number->limb[top - 1] == 0) {
        top--;
    }
    used = snprintf(text, DECIMAL_CHARS, "%" PRIu32, number->limb[top - 1]);
    for (size_t i = top - 1; i > 0; i--) {
        used +=
            snprintf(text + used, DECIMAL_CHARS - (size_t)used, "%09" PRIu32, number->limb[i - 1]);
    }
}

digits digits_of(uint64_t number)
{
    digits made = {{0}};

    snprintf(made.text, sizeof made.text, "%" PRIu64, number);
    return made;
}

const char *plural(uint64_t number)
{
    return number == 1 ? "" : "s";
}

uint32_t digits_count(uint64_t number)
{
    uint32_t count = 1;

    while (number >= 10) {
        number /= 10;
        count++;
    }
    return count;
}
