/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Questions about single lexemes: is this word reserved, which operation or definition has
 * this name, may this name be a variable.
 */
#include <string.h>

#include "notation_private.h"

bool idsi_lexeme_is(const idsi_reader *reader, size_t lexeme, const char *word)
{
    const idsi_lexeme *at = &reader->lexemes[lexeme];
    return at->kind != IDSI_LEX_END && at->length == strlen(word) &&
           memcmp(reader->text + at->offset, word, at->length) == 0;
}

bool idsi_lexeme_same(const idsi_reader *reader, size_t a, size_t b)
{
    const idsi_lexeme *x = &reader->lexemes[a];
    const idsi_lexeme *y = &reader->lexemes[b];
    return x->length == y->length &&
           memcmp(reader->text + x->offset, reader->text + y->offset, x->length) == 0;
}

ids_status idsi_lexeme_copy(idsi_reader *reader, size_t lexeme, char **out)
{
    const idsi_lexeme *at = &reader->lexemes[lexeme];
    void *copy = NULL;
    ids_status st = idsi_alloc(reader->ctx, (size_t)at->length + 1, &copy);
    if (st == IDS_OK) {
        memcpy(copy, reader->text + at->offset, at->length);
        ((char *)copy)[at->length] = '\0';
        *out = copy;
    }
    return st;
}

bool idsi_lexeme_is_statement(const idsi_reader *reader, size_t lexeme)
{
    for (size_t i = 0; i < IDSI_STATEMENT_WORDS; i++) {
        if (idsi_lexeme_is(reader, lexeme, idsi_statement_words[i])) {
            return true;
        }
    }
    return false;
}

bool idsi_lexeme_is_reserved(const idsi_reader *reader, size_t lexeme)
{
    const idsi_lexeme *at = &reader->lexemes[lexeme];
    return at->kind != IDSI_LEX_END && idsi_word_is_reserved(reader->text + at->offset, at->length);
}

size_t idsi_reader_operation(const idsi_reader *reader, ids_notation notation, size_t lexeme,
                             uint32_t arity)
{
    for (size_t i = 0; i < reader->operation_count; i++) {
        const ids_operation *op = &reader->operations[i].operation;
        if (op->notation == notation && (arity == 0 || op->arity == arity) &&
            idsi_lexeme_is(reader, lexeme, op->open)) {
            return i;
        }
    }
    return SIZE_MAX;
}

size_t idsi_reader_definition(const idsi_reader *reader, size_t lexeme)
{
    for (size_t i = 0; i < reader->definition_count; i++) {
        if (idsi_lexeme_same(reader, reader->definitions[i].lexeme, lexeme)) {
            return i;
        }
    }
    return SIZE_MAX;
}

ids_status idsi_reader_check_variable(idsi_reader *reader, size_t lexeme)
{
    const idsi_shown name = idsi_reader_show(reader, lexeme);
    if (idsi_lexeme_is_reserved(reader, lexeme)) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, lexeme,
                                "%s is a word of the notation; expected the name of a variable",
                                name.text);
    }
    size_t op = idsi_reader_operation(reader, IDS_NOTATION_PREFIX, lexeme, 0);
    if (op != SIZE_MAX) {
        const idsi_declared *declared = &reader->operations[op];
        return idsi_reader_fail(reader, IDS_ERR_PARSE, lexeme,
                                "%s names the operation of line %u and takes %u arguments in ( ) "
                                "directly after its name",
                                name.text, reader->lexemes[declared->lexeme].line,
                                declared->operation.arity);
    }
    op = idsi_reader_operation(reader, IDS_NOTATION_INFIX, lexeme, 0);
    if (op != SIZE_MAX) {
        const size_t declared = reader->operations[op].lexeme;
        return idsi_reader_fail(reader, IDS_ERR_PARSE, lexeme,
                                "%s names the operation of line %u; expected a variable or "
                                "another operand",
                                name.text, reader->lexemes[declared].line);
    }
    const size_t definition = idsi_reader_definition(reader, lexeme);
    if (definition != SIZE_MAX) {
        const size_t defined = reader->definitions[definition].lexeme;
        return idsi_reader_fail(reader, IDS_ERR_PARSE, lexeme,
                                "%s is defined in line %u and takes %u arguments in ( ) directly "
                                "after its name",
                                name.text, reader->lexemes[defined].line,
                                reader->definitions[definition].arity);
    }
    return IDS_OK;
}

ids_status idsi_reader_end(idsi_reader *reader, const char *expected)
{
    if (reader->lexemes[reader->at].kind != IDSI_LEX_END) {
        const idsi_shown found = idsi_reader_show(reader, reader->at);
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at, "expected %s, found %s",
                                expected, found.text);
    }
    reader->at++;
    return IDS_OK;
}
