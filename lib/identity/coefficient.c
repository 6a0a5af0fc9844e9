/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Numbers before a factor.
 *
 *     coefficients:  { NUMBER [ "/" NUMBER ] [ "*" ] }
 *
 * A number is never an operand, so "2*x" and "1/2*x" mean the same whether or not * and / name
 * operations.
 */
#include <string.h>

#include "notation_private.h"

static ids_status read_integer(idsi_reader *reader, size_t lexeme, mpz_ptr out)
{
    char *digits = NULL;
    ids_status st = IDS_OK;
    IDSI_TRY(idsi_lexeme_copy(reader, lexeme, &digits));
    if (mpz_set_str(out, digits, 10) != 0) {
        st = idsi_reader_fail(reader, IDS_ERR_INTERNAL, lexeme, "a number was not understood");
    }
done:
    idsi_free(reader->ctx, digits);
    return st;
}

static ids_status read_rational(idsi_reader *reader, mpq_ptr out)
{
    ids_status st = IDS_OK;
    IDSI_TRY(read_integer(reader, reader->at, mpq_numref(out)));
    mpz_set_ui(mpq_denref(out), 1);
    reader->at++;
    if (!idsi_lexeme_is(reader, reader->at, "/")) {
        return IDS_OK;
    }
    reader->at++;
    if (reader->lexemes[reader->at].kind != IDSI_LEX_NUMBER) {
        const idsi_shown found = idsi_reader_show(reader, reader->at);
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                              "expected a number after '/' in a coefficient, found %s", found.text);
        goto done;
    }
    IDSI_TRY(read_integer(reader, reader->at, mpq_denref(out)));
    if (mpz_sgn(mpq_denref(out)) == 0) {
        mpz_set_ui(mpq_denref(out), 1);
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                              "a coefficient with denominator 0; expected a number other than 0");
        goto done;
    }
    mpq_canonicalize(out);
    reader->at++;
done:
    return st;
}

static bool begins_factor(idsi_lexeme_kind kind)
{
    return kind == IDSI_LEX_NAME || kind == IDSI_LEX_OPEN || kind == IDSI_LEX_NUMBER;
}

/* What stands after a number: steps over a "*", and explains what cannot stand there. */
static ids_status read_after_number(idsi_reader *reader)
{
    const idsi_lexeme *next = &reader->lexemes[reader->at];
    const size_t number = reader->at - 1;
    const idsi_shown shown = idsi_reader_show(reader, number);
    if (next->kind == IDSI_LEX_NUMBER) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "two numbers side by side; expected '*' or a factor after %s",
                                shown.text);
    }
    if (next->kind == IDSI_LEX_NAME &&
        idsi_reader_operation(reader, IDS_NOTATION_INFIX, reader->at, 0) != SIZE_MAX) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "the number %s is a coefficient, not an operand; expected a "
                                "factor after it",
                                shown.text);
    }
    if (next->kind != IDSI_LEX_SYMBOL) {
        return IDS_OK;
    }
    if (!idsi_lexeme_is(reader, reader->at, "*")) {
        const bool decimal = idsi_lexeme_is(reader, reader->at, ".") && next->glued &&
                             reader->lexemes[reader->at + 1].kind == IDSI_LEX_NUMBER;
        if (decimal) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                    "a decimal fraction; expected a fraction such as 3/2");
        }
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "the number %s is a coefficient, not an operand; expected '*' or "
                                "a factor after it",
                                shown.text);
    }
    reader->at++;
    if (!begins_factor(reader->lexemes[reader->at].kind)) {
        const idsi_shown found = idsi_reader_show(reader, reader->at);
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "missing operand: expected a factor after '*', found %s",
                                found.text);
    }
    return IDS_OK;
}

ids_status idsi_reader_coefficient(idsi_reader *reader, mpq_ptr coefficient, bool *found)
{
    ids_status st = IDS_OK;
    mpq_t next;
    mpq_init(next);
    mpq_set_ui(coefficient, 1, 1);
    *found = false;
    while (reader->lexemes[reader->at].kind == IDSI_LEX_NUMBER) {
        const size_t begin = reader->at;
        IDSI_TRY(read_rational(reader, next));
        mpq_mul(coefficient, coefficient, next);
        *found = true;
        if (mpz_size(mpq_numref(coefficient)) + mpz_size(mpq_denref(coefficient)) >
            IDSI_MAX_LIMBS) {
            st = idsi_reader_fail(reader, IDS_ERR_LIMIT, begin,
                                  "a coefficient with more than %u bits", IDSI_MAX_LIMBS * 64u);
            goto done;
        }
        IDSI_TRY(read_after_number(reader));
    }
done:
    mpq_clear(next);
    return st;
}
