/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The statement `operation`.
 *
 *     operation  PATTERN [ commutative | alternating | none | { "=" [SIGN] PATTERN } ]
 *     PATTERN    NAME SYMBOL NAME   |   FENCE NAME , ... FENCE   |   NAME ( NAME , ... )
 *
 * Every further pattern is the first one with its arguments in another order; it gives one
 * generator of the symmetry group. Whether the signs of the group are well defined is for the
 * signature to say, so each operation is tried in a signature of its own, where a failure can
 * still be given its place.
 */
#include "notation_private.h"

void idsi_declared_clear(ids_ctx *ctx, idsi_declared *declared)
{
    idsi_free(ctx, declared->open);
    idsi_free(ctx, declared->close);
    idsi_free(ctx, declared->generators);
}

static ids_status expected(idsi_reader *reader, const char *what)
{
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at, "expected %s, found %s", what,
                            found.text);
}

/* Reads the name of an argument, which must be new in this pattern. */
static ids_status read_argument(idsi_reader *reader, idsi_pattern *p)
{
    if (reader->lexemes[reader->at].kind != IDSI_LEX_NAME) {
        return expected(reader, "the name of an argument");
    }
    const idsi_shown name = idsi_reader_show(reader, reader->at);
    ids_status st = idsi_reader_check_variable(reader, reader->at);
    if (st != IDS_OK) {
        return st;
    }
    for (uint32_t i = 0; i < p->count; i++) {
        if (idsi_lexeme_same(reader, p->argument[i], reader->at)) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                    "the argument %s stands twice; expected different names",
                                    name.text);
        }
    }
    if (p->count == IDS_MAX_ARITY) {
        return idsi_reader_fail(reader, IDS_ERR_LIMIT, reader->at,
                                "an operation has %u to %u arguments; found more", IDS_MIN_ARITY,
                                IDS_MAX_ARITY);
    }
    p->argument[p->count++] = reader->at++;
    return IDS_OK;
}

/* Reads the arguments from the opening to the closing fence. */
static ids_status read_fence(idsi_reader *reader, idsi_pattern *p)
{
    const size_t open = reader->at;
    ids_status st = IDS_OK;
    do {
        reader->at++;
        IDSI_TRY(read_argument(reader, p));
    } while (reader->lexemes[reader->at].kind == IDSI_LEX_COMMA);
    if (reader->lexemes[reader->at].kind != IDSI_LEX_CLOSE) {
        st = expected(reader, "',' or the closing fence");
        goto done;
    }
    if (p->count < IDS_MIN_ARITY) {
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, open,
                              "an operation has %u to %u arguments; found %u", IDS_MIN_ARITY,
                              IDS_MAX_ARITY, p->count);
        goto done;
    }
    p->close = reader->at++;
done:
    return st;
}

static ids_status read_infix(idsi_reader *reader, idsi_pattern *p)
{
    ids_status st = IDS_OK;
    IDSI_TRY(read_argument(reader, p));
    const idsi_lexeme *symbol = &reader->lexemes[reader->at];
    const idsi_shown shown = idsi_reader_show(reader, reader->at);
    if (symbol->kind == IDSI_LEX_PLUS || symbol->kind == IDSI_LEX_MINUS ||
        symbol->kind == IDSI_LEX_EQUAL || symbol->kind == IDSI_LEX_COLON) {
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                              "%s belongs to the notation and cannot name an operation; expected "
                              "another symbol",
                              shown.text);
        goto done;
    }
    if (symbol->kind == IDSI_LEX_END ||
        !idsi_word_is_infix(reader->text + symbol->offset, symbol->length)) {
        st = expected(reader, "the symbol of an infix operation");
        goto done;
    }
    p->open = reader->at++;
    if (reader->lexemes[reader->at].kind != IDSI_LEX_NAME) {
        const idsi_shown found = idsi_reader_show(reader, reader->at);
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                              "missing operand: expected the name of an argument after %s, "
                              "found %s",
                              shown.text, found.text);
        goto done;
    }
    IDSI_TRY(read_argument(reader, p));
    if (reader->lexemes[reader->at].kind == IDSI_LEX_SYMBOL) {
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                              "an infix operation has two arguments; for more of them use fences "
                              "or a name, as in: operation t(a,b,c)");
    }
done:
    return st;
}

ids_status idsi_reader_pattern(idsi_reader *reader, idsi_pattern *p)
{
    ids_status st = IDS_OK;
    const idsi_lexeme *at = &reader->lexemes[reader->at];
    *p = (idsi_pattern){.first = reader->at, .open = reader->at};
    if (at->kind == IDSI_LEX_OPEN) {
        p->notation = IDS_NOTATION_FENCE;
        IDSI_TRY(read_fence(reader, p));
    } else if (at->kind == IDSI_LEX_NAME && at[1].kind == IDSI_LEX_OPEN && at[1].glued &&
               idsi_lexeme_is(reader, reader->at + 1, "(")) {
        if (idsi_lexeme_is_reserved(reader, reader->at)) {
            return idsi_reader_check_variable(reader, reader->at);
        }
        p->notation = IDS_NOTATION_PREFIX;
        reader->at++;
        IDSI_TRY(read_fence(reader, p));
    } else if (at->kind == IDSI_LEX_NAME) {
        p->notation = IDS_NOTATION_INFIX;
        IDSI_TRY(read_infix(reader, p));
    } else {
        return expected(reader, "an operation such as a*b, [a,b] or t(a,b,c), with one of the "
                                "fences ( ) [ ] { } < >");
    }
    for (uint32_t i = 0; i < p->count; i++) {
        if (p->notation != IDS_NOTATION_FENCE &&
            idsi_lexeme_same(reader, p->open, p->argument[i])) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, p->argument[i],
                                    "the argument has the name of the operation; expected "
                                    "another name");
        }
    }
done:
    return st;
}

/* Turns a pattern into a generator: position i of it holds argument image[i] of the first. */
static ids_status read_order(idsi_reader *reader, const idsi_pattern *base, ids_signed_order *order)
{
    idsi_pattern p = {0};
    const idsi_lexeme_kind kind = reader->lexemes[reader->at].kind;
    *order = (ids_signed_order){.sign = kind == IDSI_LEX_MINUS ? -1 : 1};
    if (kind == IDSI_LEX_MINUS || kind == IDSI_LEX_PLUS) {
        reader->at++;
    }
    ids_status st = idsi_reader_pattern(reader, &p);
    if (st != IDS_OK) {
        return st;
    }
    if (p.notation != base->notation || p.count != base->count ||
        !idsi_lexeme_same(reader, p.open, base->open)) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, p.first,
                                "a symmetry relates argument orders of one operation; expected "
                                "the same operation on both sides of '='");
    }
    for (uint32_t i = 0; i < p.count; i++) {
        uint32_t j = 0;
        while (j < base->count && !idsi_lexeme_same(reader, base->argument[j], p.argument[i])) {
            j++;
        }
        if (j == base->count) {
            const idsi_shown name = idsi_reader_show(reader, p.argument[i]);
            return idsi_reader_fail(reader, IDS_ERR_PARSE, p.argument[i],
                                    "%s is not among the arguments on the left; expected the "
                                    "same arguments in another order",
                                    name.text);
        }
        order->image[i] = (uint8_t)j;
    }
    return IDS_OK;
}

static ids_status read_equations(idsi_reader *reader, const idsi_pattern *base,
                                 idsi_declared *declared)
{
    ids_operation *op = &declared->operation;
    ids_status st = IDS_OK;
    op->symmetry = IDS_SYMMETRY_GENERATED;
    while (reader->lexemes[reader->at].kind == IDSI_LEX_EQUAL) {
        ids_signed_order order;
        reader->at++;
        IDSI_TRY(read_order(reader, base, &order));
        IDSI_TRY(idsi_grow(reader->ctx, op->generator_count, &declared->generator_capacity,
                           sizeof order, &declared->generators));
        declared->generators[op->generator_count++] = order;
        op->generators = declared->generators;
    }
done:
    return st;
}

static ids_status read_symmetry(idsi_reader *reader, const idsi_pattern *base,
                                idsi_declared *declared)
{
    static const char *const words[3] = {"none", "commutative", "alternating"};
    static const ids_symmetry kinds[3] = {IDS_SYMMETRY_NONE, IDS_SYMMETRY_COMMUTATIVE,
                                          IDS_SYMMETRY_ALTERNATING};
    const idsi_lexeme *at = &reader->lexemes[reader->at];
    if (at->kind == IDSI_LEX_EQUAL) {
        ids_status st = read_equations(reader, base, declared);
        return st != IDS_OK ? st
                            : idsi_reader_end(reader, "'=' and another argument order, or the "
                                                      "end of the line");
    }
    declared->operation.symmetry = IDS_SYMMETRY_NONE;
    for (size_t i = 0; i < 3; i++) {
        if (idsi_lexeme_is(reader, reader->at, words[i])) {
            declared->operation.symmetry = kinds[i];
            reader->at++;
            return idsi_reader_end(reader, "the end of the line");
        }
    }
    if (at->kind == IDSI_LEX_NAME) {
        const idsi_shown found = idsi_reader_show(reader, reader->at);
        const char *near = idsi_reader_nearest(reader, reader->at, words, 3);
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "unknown symmetry %s; expected commutative, alternating, none or "
                                "'='%s%s%s",
                                found.text, near == NULL ? "" : " (did you mean '",
                                near == NULL ? "" : near, near == NULL ? "" : "'?)");
    }
    return idsi_reader_end(reader, "commutative, alternating, none, '=' or the end of the line");
}

static ids_status check_new(idsi_reader *reader, const idsi_pattern *base)
{
    const size_t known = idsi_reader_operation(reader, base->notation, base->open, base->count);
    if (known != SIZE_MAX) {
        const idsi_lexeme *other = &reader->lexemes[reader->operations[known].lexeme];
        return idsi_reader_fail(reader, IDS_ERR_PARSE, base->open,
                                "this symbol is in use: line %u declares an operation that is "
                                "written the same way; expected another symbol or fence",
                                other->line);
    }
    if (reader->operation_count == IDS_MAX_OPERATIONS) {
        return idsi_reader_fail(reader, IDS_ERR_LIMIT, base->first, "more than %u operations",
                                IDS_MAX_OPERATIONS);
    }
    return IDS_OK;
}

ids_status idsi_reader_declare(idsi_reader *reader)
{
    idsi_declared declared = {0};
    ids_signature *trial = NULL;
    idsi_pattern base = {0};
    ids_status st = IDS_OK;
    IDSI_TRY(idsi_reader_pattern(reader, &base));
    IDSI_TRY(check_new(reader, &base));
    declared.lexeme = base.first;
    IDSI_TRY(idsi_lexeme_copy(reader, base.open, &declared.open));
    if (base.notation == IDS_NOTATION_FENCE) {
        IDSI_TRY(idsi_lexeme_copy(reader, base.close, &declared.close));
    }
    declared.operation = (ids_operation){.notation = base.notation,
                                         .open = declared.open,
                                         .close = declared.close,
                                         .arity = base.count};
    IDSI_TRY(read_symmetry(reader, &base, &declared));
    if (declared.operation.symmetry == IDS_SYMMETRY_GENERATED) {
        st = ids_signature_create(reader->ctx, &declared.operation, 1, &trial);
        IDSI_TRY(idsi_reader_place(reader, st, base.first));
    }
    IDSI_TRY(idsi_grow(reader->ctx, reader->operation_count, &reader->operation_capacity,
                       sizeof declared, &reader->operations));
    reader->operations[reader->operation_count++] = declared;
    declared = (idsi_declared){0};
done:
    ids_signature_free(trial);
    idsi_declared_clear(reader->ctx, &declared);
    return st;
}
