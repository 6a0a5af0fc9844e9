/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Expressions, by recursive descent.
 *
 *     sum      [SIGN] product { SIGN product }
 *     product  factor [ INFIX factor ]
 *     factor   { coefficient } primary            | a coefficient 0
 *     primary  NAME  |  NAME ( sum , ... )  |  FENCE sum , ... FENCE  |  ( sum )
 *
 * Expressions are evaluated while they are read: what comes back is a polynomial. The recursion
 * is as deep as the fences are nested, and that has a limit (group.c). Lists of arguments are
 * on the heap to keep the frames small.
 */
#include <string.h>

#include "notation_private.h"

typedef struct arguments {
    idsi_value *value; /* room for IDSI_MAX_VARIABLES */
    uint32_t begun;    /* initialised */
    uint32_t count;    /* read */
} arguments;

static void arguments_clear(idsi_reader *reader, arguments *args)
{
    for (uint32_t i = 0; i < args->begun; i++) {
        idsi_value_clear(&args->value[i]);
    }
    idsi_free(reader->ctx, args->value);
}

/* Reads the sums between the fence at the cursor and its closing one. */
static ids_status read_arguments(idsi_reader *reader, arguments *args)
{
    const size_t open = reader->at;
    ids_status st = IDS_OK;
    void *room = NULL;
    IDSI_TRY(idsi_alloc(reader->ctx, IDSI_MAX_VARIABLES * sizeof *args->value, &room));
    args->value = room;
    do {
        reader->at++;
        if (args->count == IDSI_MAX_VARIABLES) {
            st = idsi_reader_fail(reader, IDS_ERR_PARSE, open,
                                  "wrong number of arguments: more than %u", IDSI_MAX_VARIABLES);
            goto done;
        }
        idsi_value_init(&args->value[args->begun++], reader->ctx, reader->presentation->sig);
        IDSI_TRY(idsi_reader_sum(reader, &args->value[args->count]));
        args->count++;
    } while (reader->lexemes[reader->at].kind == IDSI_LEX_COMMA);
    if (reader->lexemes[reader->at].kind != IDSI_LEX_CLOSE) {
        const idsi_shown found = idsi_reader_show(reader, reader->at);
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                              "expected an operation, ',' or the closing fence, found %s",
                              found.text);
        goto done;
    }
    reader->at++;
done:
    return st;
}

ids_status idsi_reader_check_declared(idsi_reader *reader, size_t op, size_t use)
{
    const size_t declared = reader->operations[op].lexeme;
    if (declared < use || reader->operations_follow) {
        return IDS_OK;
    }
    const idsi_shown shown = idsi_reader_show(reader, use);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, use,
                            "the operation %s is declared only in line %u; expected its "
                            "declaration before its first use",
                            shown.text, reader->lexemes[declared].line);
}

/* ---- fences ---------------------------------------------------------------------------------- */

static ids_status fail_fence(idsi_reader *reader, size_t open, uint32_t count)
{
    const idsi_lexeme *close = &reader->lexemes[reader->at - 1];
    const char *text = reader->text;
    const char a = text[reader->lexemes[open].offset];
    const char b = text[close->offset];
    const size_t other = idsi_reader_operation(reader, IDS_NOTATION_FENCE, open, 0);
    if (other != SIZE_MAX) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, open,
                                "wrong number of arguments: the operation %c%c of line %u takes "
                                "%u, found %u",
                                a, b, reader->lexemes[reader->operations[other].lexeme].line,
                                reader->operations[other].operation.arity, count);
    }
    if (count == 1) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, open,
                                "one expression in %c%c; expected ( ) for grouping", a, b);
    }
    if (reader->origin != NULL) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, open,
                                "unknown operation %c%c with %u arguments; expected an operation "
                                "that is declared in \"%.120s\"",
                                a, b, count, reader->origin->file);
    }
    return idsi_reader_fail(reader, IDS_ERR_PARSE, open,
                            "unknown operation %c%c with %u arguments; expected a declaration "
                            "above, as in: operation %ca,b%s%c",
                            a, b, count, a, count == 2 ? "" : ",...", b);
}

static ids_status read_fence(idsi_reader *reader, idsi_value *value)
{
    const size_t open = reader->at;
    arguments args = {0};
    ids_status st = IDS_OK;
    IDSI_TRY(read_arguments(reader, &args));
    if (args.count == 1 && idsi_lexeme_is(reader, open, "(")) {
        const idsi_value inner = args.value[0];
        args.value[0] = *value;
        *value = inner;
        goto done;
    }
    const size_t op = args.count == 1
                          ? SIZE_MAX
                          : idsi_reader_operation(reader, IDS_NOTATION_FENCE, open, args.count);
    if (op == SIZE_MAX) {
        st = fail_fence(reader, open, args.count);
        goto done;
    }
    IDSI_TRY(idsi_reader_check_declared(reader, op, open));
    st = idsi_value_product(value, (uint32_t)op, args.value);
    st = idsi_reader_place(reader, st, open);
done:
    arguments_clear(reader, &args);
    return st;
}

/* ---- names ----------------------------------------------------------------------------------- */

/* NAME ( where NAME is neither an operation nor, so far, a definition. */
static ids_status fail_unknown_name(idsi_reader *reader, size_t name)
{
    const idsi_shown shown = idsi_reader_show(reader, name);
    if (reader->defining != SIZE_MAX && idsi_lexeme_same(reader, reader->defining, name)) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, name,
                                "the definition of %s uses itself; expected operations and "
                                "earlier definitions",
                                shown.text);
    }
    for (size_t i = name + 1; i + 1 < reader->lexeme_count; i++) {
        if (reader->lexemes[i].first && idsi_lexeme_is(reader, i, "define") &&
            idsi_lexeme_same(reader, i + 1, name)) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, name,
                                    "%s is defined only in line %u; expected its definition "
                                    "before its first use",
                                    shown.text, reader->lexemes[i].line);
        }
    }
    if (reader->origin != NULL) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, name,
                                "unknown operation %s; expected an operation that is declared in "
                                "\"%.120s\"",
                                shown.text, reader->origin->file);
    }
    return idsi_reader_fail(reader, IDS_ERR_PARSE, name,
                            "unknown operation %s; expected the name of a declared operation or "
                            "definition before '('",
                            shown.text);
}

static ids_status fail_argument_count(idsi_reader *reader, size_t name, uint32_t takes,
                                      uint32_t found)
{
    const idsi_shown shown = idsi_reader_show(reader, name);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, name,
                            "wrong number of arguments: %s takes %u, found %u", shown.text, takes,
                            found);
}

static ids_status apply_definition(idsi_reader *reader, size_t name, size_t definition,
                                   const arguments *args, idsi_value *value)
{
    const idsi_definition *d = &reader->definitions[definition];
    if (args->count != d->arity) {
        return fail_argument_count(reader, name, d->arity, args->count);
    }
    ids_status st = idsi_value_substitute(value, &d->body, args->value);
    return idsi_reader_place(reader, st, name);
}

static ids_status read_application(idsi_reader *reader, idsi_value *value)
{
    const size_t name = reader->at;
    const size_t any = idsi_reader_operation(reader, IDS_NOTATION_PREFIX, name, 0);
    const size_t definition = idsi_reader_definition(reader, name);
    arguments args = {0};
    ids_status st = IDS_OK;
    if (any == SIZE_MAX && definition == SIZE_MAX) {
        return fail_unknown_name(reader, name);
    }
    reader->at++;
    IDSI_TRY(read_arguments(reader, &args));
    if (any == SIZE_MAX) {
        st = apply_definition(reader, name, definition, &args, value);
        goto done;
    }
    const size_t op = idsi_reader_operation(reader, IDS_NOTATION_PREFIX, name, args.count);
    if (op == SIZE_MAX || args.count == 0) {
        st = fail_argument_count(reader, name, reader->operations[any].operation.arity, args.count);
        goto done;
    }
    IDSI_TRY(idsi_reader_check_declared(reader, op, name));
    st = idsi_value_product(value, (uint32_t)op, args.value);
    st = idsi_reader_place(reader, st, name);
done:
    arguments_clear(reader, &args);
    return st;
}

static ids_status read_variable(idsi_reader *reader, idsi_value *value)
{
    const size_t name = reader->at;
    ids_status st = idsi_reader_check_variable(reader, name);
    if (st != IDS_OK) {
        return st;
    }
    uint32_t label = 0;
    while (label < reader->variable_count &&
           !idsi_lexeme_same(reader, reader->variables[label], name)) {
        label++;
    }
    if (label == reader->variable_count) {
        const idsi_shown shown = idsi_reader_show(reader, name);
        if (reader->defining != SIZE_MAX) {
            const idsi_shown defined = idsi_reader_show(reader, reader->defining);
            return idsi_reader_fail(reader, IDS_ERR_PARSE, name,
                                    "%s is not an argument of the definition %s; expected one "
                                    "of its arguments",
                                    shown.text, defined.text);
        }
        if (label == IDSI_MAX_VARIABLES) {
            return idsi_reader_fail(reader, IDS_ERR_LIMIT, name,
                                    "more than %u different variables; the degree of an identity "
                                    "is at most %u",
                                    IDSI_MAX_VARIABLES, IDSI_MAX_IDENTITY_DEGREE);
        }
        reader->variables[reader->variable_count++] = name;
    }
    reader->at++;
    return idsi_value_leaf(value, label + 1);
}

static ids_status read_primary(idsi_reader *reader, idsi_value *value)
{
    const idsi_lexeme *at = &reader->lexemes[reader->at];
    if (at->kind == IDSI_LEX_OPEN) {
        return read_fence(reader, value);
    }
    if (at->kind == IDSI_LEX_NAME) {
        const bool applied = at[1].kind == IDSI_LEX_OPEN && at[1].glued &&
                             idsi_lexeme_is(reader, reader->at + 1, "(") &&
                             !idsi_lexeme_is_reserved(reader, reader->at);
        return applied ? read_application(reader, value) : read_variable(reader, value);
    }
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                            "missing operand: expected a variable, a number or an opening fence, "
                            "found %s",
                            found.text);
}

/* ---- products and sums ----------------------------------------------------------------------- */

static ids_status read_factor(idsi_reader *reader, idsi_value *value)
{
    const size_t begin = reader->at;
    bool number = false;
    ids_status st = IDS_OK;
    mpq_t coefficient;
    mpq_init(coefficient);
    IDSI_TRY(idsi_reader_coefficient(reader, coefficient, &number));
    const idsi_lexeme_kind next = reader->lexemes[reader->at].kind;
    const bool factor =
        next == IDSI_LEX_OPEN ||
        (next == IDSI_LEX_NAME && !idsi_lexeme_is_reserved(reader, reader->at));
    if (number && !factor) {
        if (mpq_sgn(coefficient) != 0) {
            const idsi_shown found = idsi_reader_show(reader, reader->at);
            st = idsi_reader_fail(reader, IDS_ERR_PARSE, begin,
                                  "a number alone (only 0 can stand alone); expected a factor "
                                  "after it, found %s",
                                  found.text);
        }
        goto done;
    }
    IDSI_TRY(read_primary(reader, value));
    if (number) {
        st = idsi_reader_place(reader, idsi_value_scale(value, coefficient), begin);
    }
done:
    mpq_clear(coefficient);
    return st;
}

/* Steps over the numbers before a factor. */
static size_t skip_coefficient(const idsi_reader *reader, size_t at)
{
    while (reader->lexemes[at].kind == IDSI_LEX_NUMBER) {
        at++;
        at += reader->lexemes[at].kind == IDSI_LEX_SYMBOL;
    }
    return at;
}

/* Steps over a factor without understanding it; fences match. Returns its last lexeme. */
static size_t skip_factor(const idsi_reader *reader, size_t begin)
{
    const idsi_lexeme *lexemes = reader->lexemes;
    size_t at = skip_coefficient(reader, begin);
    uint32_t depth = 0;
    if (lexemes[at].kind == IDSI_LEX_NAME && lexemes[at + 1].kind == IDSI_LEX_OPEN &&
        lexemes[at + 1].glued) {
        at++;
    }
    while (lexemes[at].kind != IDSI_LEX_END) {
        depth += lexemes[at].kind == IDSI_LEX_OPEN;
        depth -= lexemes[at].kind == IDSI_LEX_CLOSE && depth > 0;
        if (depth == 0) {
            return at;
        }
        at++;
    }
    return at;
}

/* a*b*c at its second symbol: shows both ways to write it. */
static ids_status fail_chain(idsi_reader *reader, size_t begin, size_t first)
{
    const size_t second = reader->at;
    const size_t end = skip_factor(reader, second + 1);
    const idsi_shown a = idsi_reader_slice(reader, skip_coefficient(reader, begin), first - 1);
    const idsi_shown b = idsi_reader_slice(reader, first + 1, second - 1);
    const idsi_shown c = idsi_reader_slice(reader, second + 1, end);
    const idsi_shown s = idsi_reader_slice(reader, first, first);
    const idsi_shown t = idsi_reader_slice(reader, second, second);
    const char *blank = reader->lexemes[first].glued && reader->lexemes[second].glued ? "" : " ";
    const bool shown = reader->lexemes[end].kind != IDSI_LEX_END && a.text[0] != '\0' &&
                       b.text[0] != '\0' && c.text[0] != '\0';
    const char *x = shown ? a.text : "a";
    const char *y = shown ? b.text : "b";
    const char *z = shown ? c.text : "c";
    return idsi_reader_fail(reader, IDS_ERR_PARSE, second,
                            "a product of three without parentheses; write "
                            "(%s%s%s%s%s)%s%s%s%s or %s%s%s%s(%s%s%s%s%s)",
                            x, blank, s.text, blank, y, blank, t.text, blank, z, x, blank, s.text,
                            blank, y, blank, t.text, blank, z);
}

/* A symbol that is no operation, behind a factor that begins at `begin`. */
static ids_status fail_symbol(idsi_reader *reader, size_t begin)
{
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    if (idsi_lexeme_is(reader, reader->at, "/") &&
        reader->lexemes[reader->at + 1].kind == IDSI_LEX_NUMBER) {
        const idsi_shown number = idsi_reader_show(reader, reader->at + 1);
        const idsi_shown factor = idsi_reader_slice(reader, begin, reader->at - 1);
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "a division behind a factor; expected the coefficient before it: "
                                "write 1/%.*s %s",
                                (int)strlen(number.text) - 2, number.text + 1,
                                factor.text[0] != '\0' ? factor.text : "(...)");
    }
    if (reader->origin != NULL) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "unknown operation %s; expected an operation that is declared in "
                                "\"%.120s\"",
                                found.text, reader->origin->file);
    }
    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                            "unknown operation %s; expected a declaration above, as in: "
                            "operation a%.*sb",
                            found.text, (int)reader->lexemes[reader->at].length,
                            reader->text + reader->lexemes[reader->at].offset);
}

/* After a complete product: a symbol or an operand here is an error worth explaining. */
static ids_status check_after_product(idsi_reader *reader, size_t begin, size_t symbol)
{
    const idsi_lexeme_kind kind = reader->lexemes[reader->at].kind;
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    const bool infix = idsi_reader_operation(reader, IDS_NOTATION_INFIX, reader->at, 0) != SIZE_MAX;
    if (kind == IDSI_LEX_SYMBOL && !infix) {
        return fail_symbol(reader, begin);
    }
    if (kind == IDSI_LEX_SYMBOL || (kind == IDSI_LEX_NAME && infix)) {
        return fail_chain(reader, begin, symbol);
    }
    if (idsi_lexeme_is(reader, reader->at, "alternating")) {
        return IDS_OK; /* it ends the expression */
    }
    if (kind == IDSI_LEX_NAME || kind == IDSI_LEX_OPEN || kind == IDSI_LEX_NUMBER) {
        const idsi_shown before = idsi_reader_show(reader, reader->at - 1);
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "missing operation: expected an operation, '+', '-' or the end "
                                "of the expression between %s and %s",
                                before.text, found.text);
    }
    return IDS_OK;
}

static ids_status read_second_factor(idsi_reader *reader, idsi_value *value)
{
    const idsi_lexeme_kind kind = reader->lexemes[reader->at].kind;
    if (kind == IDSI_LEX_MINUS || kind == IDSI_LEX_PLUS) {
        const idsi_shown sign = idsi_reader_show(reader, reader->at);
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "missing operand: expected a factor, found %s (a factor with a "
                                "sign needs parentheses)",
                                sign.text);
    }
    return read_factor(reader, value);
}

static ids_status read_product(idsi_reader *reader, idsi_value *value)
{
    const size_t begin = reader->at;
    idsi_value factors[2];
    ids_status st = IDS_OK;
    for (size_t i = 0; i < 2; i++) {
        idsi_value_init(&factors[i], reader->ctx, reader->presentation->sig);
    }
    IDSI_TRY(read_factor(reader, &factors[0]));
    const size_t symbol = reader->at;
    const idsi_lexeme_kind kind = reader->lexemes[symbol].kind;
    const size_t op = kind == IDSI_LEX_SYMBOL || kind == IDSI_LEX_NAME
                          ? idsi_reader_operation(reader, IDS_NOTATION_INFIX, symbol, 0)
                          : SIZE_MAX;
    if (op == SIZE_MAX) {
        *value = factors[0];
        idsi_value_init(&factors[0], reader->ctx, reader->presentation->sig);
    } else {
        IDSI_TRY(idsi_reader_check_declared(reader, op, symbol));
        reader->at++;
        IDSI_TRY(read_second_factor(reader, &factors[1]));
        st = idsi_value_product(value, (uint32_t)op, factors);
        IDSI_TRY(idsi_reader_place(reader, st, symbol));
    }
    IDSI_TRY(check_after_product(reader, begin, symbol));
done:
    idsi_value_clear(&factors[0]);
    idsi_value_clear(&factors[1]);
    return st;
}

/* Steps over a sign if there is one: +1, -1, or 0 for none. */
static int read_sign(idsi_reader *reader)
{
    const idsi_lexeme_kind kind = reader->lexemes[reader->at].kind;
    if (kind != IDSI_LEX_PLUS && kind != IDSI_LEX_MINUS) {
        return 0;
    }
    reader->at++;
    return kind == IDSI_LEX_MINUS ? -1 : 1;
}

ids_status idsi_reader_sum(idsi_reader *reader, idsi_value *value)
{
    const size_t begin = reader->at;
    int sign = read_sign(reader);
    bool appended = false;
    idsi_value term;
    ids_status st = IDS_OK;
    idsi_value_init(&term, reader->ctx, reader->presentation->sig);
    if (sign >= 0) {
        IDSI_TRY(read_product(reader, value));
        sign = read_sign(reader);
    }
    while (sign != 0) {
        IDSI_TRY(read_product(reader, &term));
        IDSI_TRY(idsi_reader_place(reader, idsi_value_append(value, &term, sign), begin));
        idsi_value_clear(&term);
        idsi_value_init(&term, reader->ctx, reader->presentation->sig);
        appended = true;
        sign = read_sign(reader);
    }
    if (appended) {
        st = idsi_reader_place(reader, idsi_poly_normalize(&value->poly), begin);
    }
done:
    idsi_value_clear(&term);
    return st;
}
