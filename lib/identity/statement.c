/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The statements define, identity and candidate.
 *
 *     define     NAME ( NAME , ... ) = sum
 *     identity   [LABEL ":"] sum [ "=" sum ] { alternating NAME , ... }     candidate likewise
 *
 * While an identity is read, labels number its variables in the order of first use. In the end
 * they number the variables that are left after cancellation, in the order of their names, with
 * numbers inside names compared as numbers (x2 before x10). That order does not depend on how
 * the terms are arranged, so an identity that is printed and read again is the same one.
 */
#include <string.h>

#include "notation_private.h"

static ids_status expected(idsi_reader *reader, const char *what)
{
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at, "expected %s, found %s", what,
                            found.text);
}

/* ---- define ---------------------------------------------------------------------------------- */

static ids_status read_defined_name(idsi_reader *reader)
{
    const size_t name = reader->at;
    const idsi_lexeme *at = &reader->lexemes[name];
    if (at->kind != IDSI_LEX_NAME) {
        return expected(reader, "the name that is defined");
    }
    const idsi_shown shown = idsi_reader_show(reader, name);
    const size_t definition = idsi_reader_definition(reader, name);
    if (definition != SIZE_MAX) {
        return idsi_reader_fail(
            reader, IDS_ERR_PARSE, name, "%s is defined already, in line %u; expected another name",
            shown.text, reader->lexemes[reader->definitions[definition].lexeme].line);
    }
    size_t op = idsi_reader_operation(reader, IDS_NOTATION_PREFIX, name, 0);
    if (op == SIZE_MAX) {
        op = idsi_reader_operation(reader, IDS_NOTATION_INFIX, name, 0);
    }
    if (op != SIZE_MAX) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, name,
                                "%s names the operation of line %u; expected another name for "
                                "the definition",
                                shown.text, reader->lexemes[reader->operations[op].lexeme].line);
    }
    if (idsi_lexeme_is_reserved(reader, name)) {
        return idsi_reader_check_variable(reader, name);
    }
    reader->defining = name;
    reader->at++;
    if (!idsi_lexeme_is(reader, reader->at, "(") || !reader->lexemes[reader->at].glued) {
        return expected(reader, "'(' directly after the name that is defined");
    }
    return IDS_OK;
}

static ids_status read_parameters(idsi_reader *reader)
{
    ids_status st = IDS_OK;
    do {
        reader->at++;
        if (reader->lexemes[reader->at].kind != IDSI_LEX_NAME) {
            return expected(reader, "the name of an argument");
        }
        IDSI_TRY(idsi_reader_check_variable(reader, reader->at));
        for (uint32_t i = 0; i <= reader->variable_count; i++) {
            const size_t other = i == 0 ? reader->defining : reader->variables[i - 1];
            if (idsi_lexeme_same(reader, other, reader->at)) {
                return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                        "the name stands twice; expected arguments with "
                                        "different names");
            }
        }
        if (reader->variable_count == IDSI_MAX_VARIABLES) {
            return idsi_reader_fail(reader, IDS_ERR_LIMIT, reader->at,
                                    "a definition with more than %u arguments", IDSI_MAX_VARIABLES);
        }
        reader->variables[reader->variable_count++] = reader->at++;
    } while (reader->lexemes[reader->at].kind == IDSI_LEX_COMMA);
    if (!idsi_lexeme_is(reader, reader->at, ")")) {
        return expected(reader, "',' or ')'");
    }
    reader->at++;
    if (reader->lexemes[reader->at].kind != IDSI_LEX_EQUAL) {
        return expected(reader, "'=' and the polynomial that is abbreviated");
    }
    reader->at++;
done:
    return st;
}

static ids_status read_define(idsi_reader *reader)
{
    idsi_definition definition = {0};
    ids_status st = IDS_OK;
    idsi_value_init(&definition.body, reader->ctx, reader->presentation->sig);
    IDSI_TRY(read_defined_name(reader));
    definition.lexeme = reader->defining;
    IDSI_TRY(read_parameters(reader));
    definition.arity = reader->variable_count;
    IDSI_TRY(idsi_reader_sum(reader, &definition.body));
    IDSI_TRY(idsi_reader_end(reader, "an operation or the end of the definition"));
    IDSI_TRY(idsi_grow(reader->ctx, reader->definition_count, &reader->definition_capacity,
                       sizeof definition, &reader->definitions));
    reader->definitions[reader->definition_count++] = definition;
    idsi_value_init(&definition.body, reader->ctx, reader->presentation->sig);
done:
    idsi_value_clear(&definition.body);
    reader->defining = SIZE_MAX;
    return st;
}

/* ---- names of identities --------------------------------------------------------------------- */

/* Lexemes of the label at the cursor, which may have hyphens inside; 0 when there is none. */
static size_t label_length(const idsi_reader *reader)
{
    size_t n = 0;
    for (;; n++) {
        const idsi_lexeme *at = &reader->lexemes[reader->at + n];
        const bool part = at->kind == IDSI_LEX_NAME || at->kind == IDSI_LEX_NUMBER ||
                          (at->kind == IDSI_LEX_MINUS && n > 0);
        if (!part || (n > 0 && !at->glued)) {
            return at->kind == IDSI_LEX_COLON ? n : 0;
        }
    }
}

static ids_status read_label(idsi_reader *reader, idsi_identity *identity)
{
    const ids_presentation *pres = reader->presentation;
    const size_t n = label_length(reader);
    if (n == 0) {
        return idsi_strdup(reader->ctx, "", &identity->name);
    }
    const size_t first = reader->at;
    const idsi_lexeme *begin = &reader->lexemes[first];
    const idsi_lexeme *end = &reader->lexemes[first + n - 1];
    const size_t length = end->offset + end->length - begin->offset;
    if (length > IDSI_MAX_NAME) {
        return idsi_reader_fail(reader, IDS_ERR_LIMIT, first,
                                "a name of %zu bytes; at most %u are read", length, IDSI_MAX_NAME);
    }
    void *name = NULL;
    ids_status st = idsi_alloc_zero(reader->ctx, length + 1, &name);
    if (st != IDS_OK) {
        return st;
    }
    memcpy(name, reader->text + begin->offset, length);
    identity->name = name;
    for (size_t i = 0; i + 1 < pres->count; i++) {
        if (strcmp(pres->list[i].name, identity->name) == 0) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, first,
                                    "the name '%s' is in use, in line %u; expected another name",
                                    identity->name, pres->list[i].line);
        }
    }
    reader->at += n + 1;
    return IDS_OK;
}

/* ---- homogeneous ----------------------------------------------------------------------------- */

static void count_variables(const idsi_poly *poly, size_t term, uint32_t count[IDSI_MAX_VARIABLES])
{
    memset(count, 0, IDSI_MAX_VARIABLES * sizeof *count);
    for (size_t i = poly->start[term]; i < poly->start[term + 1]; i++) {
        if (!idsi_is_node(poly->tokens[i])) {
            count[poly->tokens[i] - 1]++;
        }
    }
}

/* The names of the variables as they are in the statement. */
static ids_status copy_names(idsi_reader *reader, char *names[IDSI_MAX_VARIABLES])
{
    for (uint32_t i = 0; i < reader->variable_count; i++) {
        ids_status st = idsi_lexeme_copy(reader, reader->variables[i], &names[i]);
        if (st != IDS_OK) {
            return st;
        }
    }
    return IDS_OK;
}

static ids_status fail_homogeneous(idsi_reader *reader, const idsi_poly *poly, size_t term,
                                   uint32_t variable, size_t begin)
{
    char *names[IDSI_MAX_VARIABLES] = {NULL};
    uint32_t a[IDSI_MAX_VARIABLES];
    uint32_t b[IDSI_MAX_VARIABLES];
    idsi_text first;
    idsi_text second;
    ids_status st = IDS_OK;
    idsi_text_init(&first, reader->ctx);
    idsi_text_init(&second, reader->ctx);
    IDSI_TRY(copy_names(reader, names));
    IDSI_TRY(idsi_tree_print(poly->sig, poly->tokens, (const char *const *)names, &first));
    IDSI_TRY(idsi_tree_print(poly->sig, poly->tokens + poly->start[term],
                             (const char *const *)names, &second));
    count_variables(poly, 0, a);
    count_variables(poly, term, b);
    st = idsi_reader_fail(reader, IDS_ERR_PARSE, begin,
                          "not homogeneous: '%.40s' stands %u time%s in %.120s but %u time%s in "
                          "%.120s; expected every variable equally often in each term",
                          names[variable], a[variable], a[variable] == 1 ? "" : "s", first.data,
                          b[variable], b[variable] == 1 ? "" : "s", second.data);
done:
    for (uint32_t i = 0; i < IDSI_MAX_VARIABLES; i++) {
        idsi_free(reader->ctx, names[i]);
    }
    idsi_text_clear(&first);
    idsi_text_clear(&second);
    return st;
}

static ids_status check_homogeneous(idsi_reader *reader, const idsi_poly *poly, size_t begin)
{
    uint32_t first[IDSI_MAX_VARIABLES];
    uint32_t other[IDSI_MAX_VARIABLES];
    for (size_t i = 0; i < poly->count; i++) {
        count_variables(poly, i, i == 0 ? first : other);
        for (uint32_t v = 0; i > 0 && v < IDSI_MAX_VARIABLES; v++) {
            if (first[v] != other[v]) {
                return fail_homogeneous(reader, poly, i, v, begin);
            }
        }
    }
    return IDS_OK;
}

/* ---- identity and candidate ------------------------------------------------------------------ */

static ids_status read_equation(idsi_reader *reader, idsi_value *value)
{
    idsi_value right;
    ids_status st = IDS_OK;
    const size_t begin = reader->at;
    idsi_value_init(&right, reader->ctx, reader->presentation->sig);
    IDSI_TRY(idsi_reader_sum(reader, value));
    if (reader->lexemes[reader->at].kind == IDSI_LEX_EQUAL) {
        reader->at++;
        IDSI_TRY(idsi_reader_sum(reader, &right));
        IDSI_TRY(idsi_reader_place(reader, idsi_value_append(value, &right, -1), begin));
        IDSI_TRY(idsi_reader_place(reader, idsi_poly_normalize(&value->poly), begin));
    }
    if (reader->lexemes[reader->at].kind == IDSI_LEX_EQUAL) {
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                              "a second '='; expected one equation in a statement: write "
                              "P = Q = R as the two identities P = Q and Q = R");
        goto done;
    }
    IDSI_TRY(idsi_reader_alternate(reader, &value->poly));
    IDSI_TRY(idsi_reader_end(reader, "an operation, '=', 'alternating' or the end of the line"));
    if (value->nominal_length == 0) {
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, begin,
                              "no monomial in this identity; expected at least one");
        goto done;
    }
    st = check_homogeneous(reader, &value->poly, begin);
done:
    idsi_value_clear(&right);
    return st;
}

static ids_status read_identity(idsi_reader *reader, ids_role role)
{
    ids_presentation *pres = reader->presentation;
    idsi_value value;
    ids_status st = IDS_OK;
    const size_t word = reader->at - 1;
    idsi_value_init(&value, reader->ctx, pres->sig);
    IDSI_TRY(idsi_grow(reader->ctx, pres->count, &reader->identity_capacity, sizeof *pres->list,
                       &pres->list));
    idsi_identity *identity = &pres->list[pres->count];
    memset(identity, 0, sizeof *identity);
    identity->role = role;
    identity->line = reader->lexemes[word].line;
    idsi_poly_init(&identity->written, reader->ctx, pres->sig);
    idsi_poly_init(&identity->linear, reader->ctx, pres->sig);
    pres->count++;
    IDSI_TRY(read_label(reader, identity));
    IDSI_TRY(read_equation(reader, &value));
    st = idsi_reader_place(reader, idsi_identity_finish(reader, identity, &value), word);
done:
    idsi_value_clear(&value);
    return st;
}

static ids_status fail_word(idsi_reader *reader, size_t word)
{
    const idsi_shown found = idsi_reader_show(reader, word);
    if (reader->lexemes[word].kind != IDSI_LEX_NAME) {
        return idsi_reader_fail(
            reader, IDS_ERR_PARSE, word,
            "expected a statement word (operation, define, identity, "
            "candidate, model), found %s; to go on with the statement above, end "
            "its line in an operator",
            found.text);
    }
    const char *near =
        idsi_reader_nearest(reader, word, idsi_statement_words, IDSI_STATEMENT_WORDS);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, word,
                            "unknown statement %s; expected operation, define, identity, "
                            "candidate or model%s%s%s",
                            found.text, near == NULL ? "" : " (did you mean '",
                            near == NULL ? "" : near, near == NULL ? "" : "'?)");
}

static ids_status read_statement(idsi_reader *reader)
{
    const size_t word = reader->at++;
    reader->variable_count = 0;
    if (idsi_lexeme_is(reader, word, "operation")) {
        while (reader->lexemes[reader->at].kind != IDSI_LEX_END) {
            reader->at++;
        }
        reader->at++;
        return IDS_OK;
    }
    if (idsi_lexeme_is(reader, word, "define")) {
        return read_define(reader);
    }
    if (idsi_lexeme_is(reader, word, "identity")) {
        return read_identity(reader, IDS_ROLE_IDENTITY);
    }
    if (idsi_lexeme_is(reader, word, "candidate")) {
        return read_identity(reader, IDS_ROLE_CANDIDATE);
    }
    if (idsi_lexeme_is(reader, word, "model")) {
        return idsi_reader_model(reader);
    }
    return fail_word(reader, word);
}

ids_status idsi_reader_statements(idsi_reader *reader)
{
    ids_status st = IDS_OK;
    reader->at = 0;
    while (reader->at < reader->lexeme_count) {
        IDSI_TRY(read_statement(reader));
        IDSI_TRY(idsi_poll(reader->ctx, NULL));
    }
    IDSI_TRY(idsi_reader_check_models(reader));
done:
    return st;
}
