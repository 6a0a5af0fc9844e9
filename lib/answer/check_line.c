/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The checker's view of a text: line by line, with the place of every failure.
 */
#include <stdio.h>
#include <string.h>

#include "certificate_private.h"

#define MOST_DIGITS 10000u

ids_status idsi_cursor_fail(const idsi_cursor *cursor, ids_status status, const char *format, ...)
{
    char what[512];
    ids_place place = {cursor->number, 1};
    va_list arguments;

    va_start(arguments, format);
    (void)vsnprintf(what, sizeof what, format, arguments);
    va_end(arguments);
    for (const char *at = cursor->line; at < cursor->at; at++) {
        place.column += ((uint8_t)*at & 0xC0u) != 0x80u;
    }
    return idsi_fail_at(cursor->ctx, status, place, "%s:%u:%u: %s", cursor->source, place.line,
                        place.column, what);
}

ids_status idsi_cursor_unify(idsi_cursor *cursor, char **copy)
{
    ids_status st = IDS_OK;
    const size_t length = (size_t)(cursor->end - cursor->text);
    size_t used = 0;

    if (length == 0 || memchr(cursor->text, '\r', length) == NULL) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_alloc_array(cursor->ctx, length, 1, copy));
    for (size_t i = 0; i < length; i++) {
        if (cursor->text[i] != '\r' || i + 1 == length || cursor->text[i + 1] != '\n') {
            (*copy)[used++] = cursor->text[i];
        }
    }
    cursor->text = *copy;
    cursor->end = *copy + used;
done:
    return st;
}

ids_status idsi_cursor_next(idsi_cursor *cursor)
{
    const char *begin = cursor->line == NULL ? cursor->text : cursor->line_end;

    if (cursor->line != NULL && begin < cursor->end) {
        begin++; /* the line feed */
    }
    cursor->line = begin;
    cursor->at = begin;
    cursor->number++;
    cursor->line_end = begin;
    if (begin == cursor->end) {
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE, "the file ends too early");
    }
    cursor->line_end = memchr(begin, '\n', (size_t)(cursor->end - begin));
    if (cursor->line_end == NULL) {
        cursor->line_end = cursor->end;
        cursor->at = cursor->end;
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE, "the line has no end");
    }
    return IDS_OK;
}

ids_status idsi_cursor_expect(idsi_cursor *cursor, const char *text)
{
    size_t length = strlen(text);

    if ((size_t)(cursor->line_end - cursor->at) < length || memcmp(cursor->at, text, length) != 0) {
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE, "expected \"%s\"", text);
    }
    cursor->at += length;
    return IDS_OK;
}

ids_status idsi_cursor_expect_end(const idsi_cursor *cursor)
{
    if (cursor->at != cursor->line_end) {
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE, "expected the end of the line");
    }
    return IDS_OK;
}

/* Number of decimal digits at the cursor, 0 where they begin with a 0 that is not all. */
static size_t count_digits(const idsi_cursor *cursor)
{
    size_t digits = 0;
    while (cursor->at + digits < cursor->line_end && cursor->at[digits] >= '0' &&
           cursor->at[digits] <= '9') {
        digits++;
    }
    return digits > 1 && cursor->at[0] == '0' ? 0 : digits;
}

ids_status idsi_cursor_count(idsi_cursor *cursor, uint64_t most, uint64_t *number)
{
    size_t digits = count_digits(cursor);
    uint64_t value = 0;

    for (size_t i = 0; i < digits; i++) {
        uint64_t digit = (uint64_t)(cursor->at[i] - '0');
        if (value > (most - digit) / 10 && digit <= most) {
            digits = 0;
        }
        value = 10 * value + digit;
    }
    if (digits == 0 || value > most) {
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE,
                                "expected a number of at most %llu, without zeros before it",
                                (unsigned long long)most);
    }
    cursor->at += digits;
    *number = value;
    return IDS_OK;
}

/* Digits into a number; with a NUL behind them for GMP. */
static ids_status read_integer(idsi_cursor *cursor, mpz_ptr number)
{
    ids_status st = IDS_OK;
    size_t digits = count_digits(cursor);
    char *copy = NULL;

    if (digits == 0 || digits > MOST_DIGITS) {
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE,
                                "expected a number of at most %u digits, without zeros before it",
                                MOST_DIGITS);
    }
    IDSI_TRY(idsi_alloc_array(cursor->ctx, digits + 1, 1, &copy));
    memcpy(copy, cursor->at, digits);
    if (mpz_set_str(number, copy, 10) != 0) {
        st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "expected a number");
    }
    cursor->at += digits;
done:
    idsi_free(cursor->ctx, copy);
    return st;
}

ids_status idsi_cursor_rational(idsi_cursor *cursor, bool fraction, mpq_ptr number)
{
    ids_status st = IDS_OK;
    bool negative = cursor->at < cursor->line_end && *cursor->at == '-';
    mpz_t common;

    mpz_init_set_ui(common, 1);
    mpq_set_ui(number, 0, 1);
    cursor->at += negative;
    IDSI_TRY(read_integer(cursor, mpq_numref(number)));
    if (fraction && cursor->at < cursor->line_end && *cursor->at == '/') {
        cursor->at++;
        IDSI_TRY(read_integer(cursor, mpq_denref(number)));
        mpz_gcd(common, mpq_numref(number), mpq_denref(number));
        if (mpz_cmp_ui(mpq_denref(number), 1) <= 0 || mpz_cmp_ui(common, 1) != 0) {
            st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "the fraction is not in lowest terms");
            mpq_set_ui(number, 0, 1);
            goto done;
        }
    }
    if (mpq_sgn(number) == 0) {
        st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "a coefficient of 0 has no place here");
    }
    if (negative) {
        mpq_neg(number, number);
    }
done:
    mpz_clear(common);
    return st;
}
