/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The lines of an algebra file that give products; the grammar is in algebra_read.c.
 *
 * Values are summed up as GMP numbers, so that only what is left in the end must fit 64 bits.
 */
#include <string.h>

#include "algebra_private.h"

static ids_status read_sum(idsi_draft *d, mpq_srcptr factor);

ids_status idsi_draft_expected(idsi_draft *d, const char *what)
{
    idsi_reader *reader = &d->reader;
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at, "expected %s, found %s", what,
                            found.text);
}

/* The basis element at the cursor. */
static ids_status read_element(idsi_draft *d, uint32_t *element)
{
    idsi_reader *reader = &d->reader;
    const char *near = NULL;

    if (reader->lexemes[reader->at].kind != IDSI_LEX_NAME) {
        return idsi_draft_expected(d, "the name of a basis element");
    }
    for (uint32_t i = 0; i < d->dimension; i++) {
        if (idsi_lexeme_same(reader, d->element[i], reader->at)) {
            *element = i;
            reader->at++;
            return IDS_OK;
        }
    }
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    near = idsi_reader_nearest(reader, reader->at, (const char *const *)d->name, d->dimension);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                            "unknown basis element %s; expected one of line %u%s%s%s", found.text,
                            reader->lexemes[d->basis].line, near == NULL ? "" : " (did you mean '",
                            near == NULL ? "" : near, near == NULL ? "" : "'?)");
}

/* ---- the left side --------------------------------------------------------------------------- */

/* Arguments between fences, the opening one at the cursor. */
static ids_status read_arguments(idsi_draft *d, uint32_t *argument, uint32_t *count)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;
    const size_t open = reader->at;

    do {
        reader->at++;
        if (*count == IDS_MAX_ARITY) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, open,
                                    "wrong number of arguments: more than %u", IDS_MAX_ARITY);
        }
        IDSI_TRY(read_element(d, &argument[*count]));
        (*count)++;
    } while (reader->lexemes[reader->at].kind == IDSI_LEX_COMMA);
    if (reader->lexemes[reader->at].kind != IDSI_LEX_CLOSE) {
        st = idsi_draft_expected(d, "',' or the closing fence");
        goto done;
    }
    reader->at++;
done:
    return st;
}

static ids_status fail_operation(idsi_draft *d, ids_notation notation, size_t begin, uint32_t count)
{
    idsi_reader *reader = &d->reader;
    const idsi_shown shown = idsi_reader_show(reader, begin);
    const size_t other = idsi_reader_operation(reader, notation, begin, 0);

    if (other != SIZE_MAX) {
        const idsi_declared *declared = &reader->operations[other];
        return idsi_reader_fail(reader, IDS_ERR_PARSE, begin,
                                "wrong number of arguments: the operation of line %u takes %u, "
                                "found %u",
                                reader->lexemes[declared->lexeme].line, declared->operation.arity,
                                count);
    }
    return idsi_reader_fail(reader, IDS_ERR_PARSE, begin,
                            "unknown operation %s with %u arguments; expected a declaration, as "
                            "in: operation a*b",
                            shown.text, count);
}

/* A line that is no product at all. */
static ids_status fail_line(idsi_draft *d)
{
    static const char *const words[2] = {"basis", "operation"};
    idsi_reader *reader = &d->reader;
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    const char *near = idsi_reader_nearest(reader, reader->at, words, 2);

    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                            "expected basis, operation, or a product of basis elements such as "
                            "e1*e2 = e3, found %s%s%s%s",
                            found.text, near == NULL ? "" : " (did you mean '",
                            near == NULL ? "" : near, near == NULL ? "" : "'?)");
}

static ids_status read_infix(idsi_draft *d, uint32_t *argument, size_t *op)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;
    const size_t symbol = reader->at + 1;
    const idsi_lexeme_kind kind = reader->lexemes[symbol].kind;
    const idsi_shown shown = idsi_reader_show(reader, symbol);

    *op = idsi_reader_operation(reader, IDS_NOTATION_INFIX, symbol, 0);
    if (*op == SIZE_MAX && (kind == IDSI_LEX_NAME || kind == IDSI_LEX_OPEN)) {
        return fail_line(d);
    }
    IDSI_TRY(read_element(d, &argument[0]));
    if (*op == SIZE_MAX && kind == IDSI_LEX_SYMBOL) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, symbol,
                                "unknown operation %s; expected a declaration, as in: operation "
                                "a%.*sb",
                                shown.text, (int)reader->lexemes[symbol].length,
                                reader->text + reader->lexemes[symbol].offset);
    }
    if (*op == SIZE_MAX) {
        return idsi_draft_expected(d, "an operation and another basis element");
    }
    reader->at++;
    IDSI_TRY(read_element(d, &argument[1]));
done:
    return st;
}

static ids_status read_left(idsi_draft *d, uint32_t *argument, size_t *op)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;
    const size_t begin = reader->at;
    const idsi_lexeme *at = &reader->lexemes[begin];
    uint32_t count = 0;

    if (at->kind == IDSI_LEX_OPEN) {
        IDSI_TRY(read_arguments(d, argument, &count));
        *op =
            count < 2 ? SIZE_MAX : idsi_reader_operation(reader, IDS_NOTATION_FENCE, begin, count);
    } else if (at->kind == IDSI_LEX_NAME && at[1].kind == IDSI_LEX_OPEN && at[1].glued &&
               idsi_lexeme_is(reader, begin + 1, "(")) {
        reader->at++;
        IDSI_TRY(read_arguments(d, argument, &count));
        *op = idsi_reader_operation(reader, IDS_NOTATION_PREFIX, begin, count);
    } else if (at->kind == IDSI_LEX_NAME) {
        return read_infix(d, argument, op);
    } else {
        return fail_line(d);
    }
    if (*op == SIZE_MAX) {
        st = fail_operation(d, at->kind == IDSI_LEX_OPEN ? IDS_NOTATION_FENCE : IDS_NOTATION_PREFIX,
                            begin, count);
    }
done:
    return st;
}

/* ---- the right side -------------------------------------------------------------------------- */

static ids_status read_term(idsi_draft *d, mpq_srcptr factor)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;
    const size_t begin = reader->at;
    uint32_t element = 0;
    bool number = false;
    mpq_t coefficient;

    mpq_init(coefficient);
    IDSI_TRY(idsi_reader_coefficient(reader, coefficient, &number));
    const idsi_lexeme_kind next = reader->lexemes[reader->at].kind;
    if (number && next != IDSI_LEX_NAME && next != IDSI_LEX_OPEN) {
        if (mpq_sgn(coefficient) != 0) {
            st = idsi_reader_fail(reader, IDS_ERR_PARSE, begin,
                                  "a number alone (only 0 can stand alone); expected a basis "
                                  "element after it");
        }
        goto done;
    }
    mpq_mul(coefficient, coefficient, factor);
    if (mpz_sizeinbase(mpq_numref(coefficient), 2) + mpz_sizeinbase(mpq_denref(coefficient), 2) >
        64u * IDSI_MAX_LIMBS) {
        st = idsi_reader_fail(reader, IDS_ERR_LIMIT, begin, "a coefficient beyond 64 bits");
        goto done;
    }
    if (idsi_lexeme_is(reader, reader->at, "(")) {
        reader->at++;
        IDSI_TRY(read_sum(d, coefficient));
        if (!idsi_lexeme_is(reader, reader->at, ")")) {
            st = idsi_draft_expected(d, "'+', '-' or ')'");
            goto done;
        }
        reader->at++;
        goto done;
    }
    IDSI_TRY(read_element(d, &element));
    mpq_add(d->sum[element], d->sum[element], coefficient);
done:
    mpq_clear(coefficient);
    return st;
}

/* Adds factor * the sum at the cursor to d->sum. */
static ids_status read_sum(idsi_draft *d, mpq_srcptr factor)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;
    bool first = true;
    mpq_t signed_factor;

    mpq_init(signed_factor);
    for (;; first = false) {
        const idsi_lexeme_kind kind = reader->lexemes[reader->at].kind;
        const bool sign = kind == IDSI_LEX_PLUS || kind == IDSI_LEX_MINUS;
        if (!sign && !first) {
            break;
        }
        mpq_set(signed_factor, factor);
        if (kind == IDSI_LEX_MINUS) {
            mpq_neg(signed_factor, factor);
        }
        reader->at += sign;
        IDSI_TRY(read_term(d, signed_factor));
        IDSI_TRY(idsi_poll(reader->ctx, NULL));
    }
done:
    mpq_clear(signed_factor);
    return st;
}

/* d->sum as constants; it is 0 again afterwards. */
static ids_status store_sum(idsi_draft *d, uint32_t op, const uint32_t *argument, size_t lexeme)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;

    for (uint32_t i = 0; i < d->dimension; i++) {
        mpz_srcptr top = mpq_numref(d->sum[i]);
        mpz_srcptr bottom = mpq_denref(d->sum[i]);
        if (mpz_sgn(top) == 0) {
            continue;
        }
        if (mpz_sizeinbase(top, 2) > 63 || mpz_sizeinbase(bottom, 2) > 63) {
            return idsi_reader_fail(reader, IDS_ERR_LIMIT, lexeme,
                                    "a structure constant beyond 64 bits");
        }
        IDSI_TRY(idsi_grow(reader->ctx, d->count, &d->capacity, sizeof *d->list, &d->list));
        ids_constant *next = &d->list[d->count++];
        *next = (ids_constant){.operation = op,
                               .result = i,
                               .numerator = (int64_t)mpz_get_si(top),
                               .denominator = (int64_t)mpz_get_si(bottom)};
        memcpy(next->argument, argument, sizeof next->argument);
        mpq_set_ui(d->sum[i], 0, 1);
        if (d->count > IDSI_MAX_CONSTANTS) {
            return idsi_reader_fail(reader, IDS_ERR_LIMIT, lexeme,
                                    "more than %u structure constants", IDSI_MAX_CONSTANTS);
        }
    }
done:
    return st;
}

ids_status idsi_draft_product(idsi_draft *d)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;
    uint32_t argument[IDS_MAX_ARITY] = {0};
    uint8_t small[IDS_MAX_ARITY] = {0};
    size_t op = 0;
    idsi_given_product next = {.lexeme = reader->at, .begin = d->count};
    mpq_t one;

    mpq_init(one);
    mpq_set_ui(one, 1, 1);
    IDSI_TRY(read_left(d, argument, &op));
    if (reader->lexemes[reader->at].kind != IDSI_LEX_EQUAL) {
        st = idsi_draft_expected(d, "'=' and the value of the product");
        goto done;
    }
    reader->at++;
    IDSI_TRY(read_sum(d, one));
    IDSI_TRY(idsi_reader_end(reader, "'+', '-' or the end of the line"));
    IDSI_TRY(store_sum(d, (uint32_t)op, argument, next.lexeme));
    for (uint32_t i = 0; i < IDS_MAX_ARITY; i++) {
        small[i] = (uint8_t)argument[i];
    }
    next.op = (uint32_t)op;
    next.sign = idsi_arguments_canonical(d->sig, next.op, small, next.argument);
    next.end = d->count;
    if (next.sign == 0 && next.end > next.begin) {
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, next.lexeme,
                              "the symmetry of the operation makes this product 0; expected 0");
        goto done;
    }
    IDSI_TRY(
        idsi_grow(reader->ctx, d->product_count, &d->product_capacity, sizeof next, &d->products));
    d->products[d->product_count++] = next;
done:
    mpq_clear(one);
    return st;
}
