/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * From characters to lexemes.
 *
 * Names, numbers and symbols are the longest runs of their characters; marks (fences, comma,
 * colon, signs, equals) are single characters and never part of a symbol, so that "x*-y" and
 * "[a,b].c" fall apart in one way only, whatever operations are declared. Columns count
 * characters. The whole text is lexed before anything is understood, so a character that
 * cannot stand in a file is reported wherever it is.
 */
#include <string.h>

#include "notation_private.h"

typedef struct scanner {
    idsi_reader *reader;
    size_t offset;
    uint32_t line;
    uint32_t column;
    bool glued;
    bool first;
} scanner;

static ids_status fail(const scanner *s, ids_status status, const char *format, ...)
    IDSI_PRINTF(3, 4);

static ids_status fail(const scanner *s, ids_status status, const char *format, ...)
{
    va_list args;
    va_start(args, format);
    const ids_place place = {s->line, s->column};
    ids_status st = idsi_reader_fail_place(s->reader, status, place, s->offset, format, args);
    va_end(args);
    return st;
}

/* The character at the cursor; *bytes 0 at the end of the text. */
static ids_status peek(const scanner *s, uint32_t *code, size_t *bytes)
{
    const idsi_reader *reader = s->reader;
    *code = 0;
    *bytes = 0;
    if (s->offset == reader->length) {
        return IDS_OK;
    }
    *bytes = idsi_utf8_decode(reader->text + s->offset, reader->length - s->offset, code);
    if (*bytes == 0) {
        return fail(s, IDS_ERR_PARSE, "the byte 0x%02X is not UTF-8 here; expected UTF-8 text",
                    (unsigned)(uint8_t)reader->text[s->offset]);
    }
    return IDS_OK;
}

static void step(scanner *s, size_t bytes)
{
    s->offset += bytes;
    s->column++;
}

static ids_status push(scanner *s, idsi_lexeme_kind kind, const scanner *begin)
{
    idsi_reader *reader = s->reader;
    ids_status st = idsi_grow(reader->ctx, reader->lexeme_count, &reader->lexeme_capacity,
                              sizeof(idsi_lexeme), &reader->lexemes);
    if (st != IDS_OK) {
        return st;
    }
    idsi_lexeme *lexeme = &reader->lexemes[reader->lexeme_count++];
    *lexeme =
        (idsi_lexeme){kind,        (uint32_t)begin->offset, (uint32_t)(s->offset - begin->offset),
                      begin->line, begin->column,           begin->glued,
                      begin->first};
    s->glued = true;
    s->first = false;
    return IDS_OK;
}

static ids_status scan_comment(scanner *s)
{
    uint32_t code = 0;
    size_t bytes = 0;
    for (;;) {
        ids_status st = peek(s, &code, &bytes);
        if (st != IDS_OK || bytes == 0 || code == '\n' || code == '\r') {
            return st;
        }
        if (code < ' ' && code != '\t') {
            return fail(s, IDS_ERR_PARSE, "control character U+%04X in a comment", (unsigned)code);
        }
        step(s, bytes);
    }
}

static ids_status scan_line_end(scanner *s)
{
    const idsi_reader *reader = s->reader;
    const scanner begin = *s;
    if (reader->text[s->offset] == '\r') {
        if (s->offset + 1 == reader->length || reader->text[s->offset + 1] != '\n') {
            return fail(s, IDS_ERR_PARSE, "carriage return (U+000D) without a line feed after it");
        }
        step(s, 1);
    }
    ids_status st = push(s, IDSI_LEX_END, &begin);
    step(s, 1);
    s->line++;
    s->column = 1;
    s->glued = false;
    s->first = true;
    return st;
}

static bool goes_on(idsi_lexeme_kind kind, idsi_char_class class)
{
    switch (kind) {
    case IDSI_LEX_NAME:
        return class == IDSI_CHAR_LETTER || class == IDSI_CHAR_DIGIT || class == IDSI_CHAR_CONTINUE;
    case IDSI_LEX_NUMBER:
        return class == IDSI_CHAR_DIGIT;
    default:
        return class == IDSI_CHAR_SYMBOL;
    }
}

/* Superscript digits would look like powers in a name, and are none. */
static bool is_superscript(uint32_t code)
{
    return code == 0xB2 || code == 0xB3 || code == 0xB9 || code == 0x2070 ||
           (code >= 0x2074 && code <= 0x2079);
}

static ids_status fail_superscript(const scanner *s)
{
    return fail(s, IDS_ERR_PARSE,
                "a superscript is not a power here; expected the product, as in x*x for the "
                "square of x");
}

static ids_status scan_run(scanner *s, idsi_lexeme_kind kind)
{
    const scanner begin = *s;
    uint32_t code = 0;
    size_t bytes = 0;
    ids_status st = IDS_OK;
    do {
        IDSI_TRY(peek(s, &code, &bytes));
        if (bytes == 0 || !goes_on(kind, idsi_char_classify(code))) {
            break;
        }
        if (is_superscript(code)) {
            st = fail_superscript(s);
            goto done;
        }
        step(s, bytes);
    } while (true);
    const size_t length = s->offset - begin.offset;
    if (kind == IDSI_LEX_NUMBER && length > IDSI_MAX_DIGITS) {
        st = fail(&begin, IDS_ERR_LIMIT, "a number with %zu digits; at most %u are read", length,
                  IDSI_MAX_DIGITS);
    } else if (kind != IDSI_LEX_NUMBER && length > IDSI_MAX_NAME) {
        st = fail(&begin, IDS_ERR_LIMIT, "a %s of %zu bytes; at most %u are read",
                  kind == IDSI_LEX_NAME ? "name" : "symbol", length, IDSI_MAX_NAME);
    } else {
        st = push(s, kind, &begin);
    }
done:
    return st;
}

static idsi_lexeme_kind mark_kind(uint32_t code)
{
    switch (code) {
    case ',':
        return IDSI_LEX_COMMA;
    case ':':
        return IDSI_LEX_COLON;
    case '=':
        return IDSI_LEX_EQUAL;
    case '+':
        return IDSI_LEX_PLUS;
    case '"':
        return IDSI_LEX_QUOTE;
    case '(':
    case '[':
    case '{':
    case '<':
        return IDSI_LEX_OPEN;
    case ')':
    case ']':
    case '}':
    case '>':
        return IDSI_LEX_CLOSE;
    default:
        return IDSI_LEX_MINUS;
    }
}

static ids_status scan_mark(scanner *s, uint32_t code, size_t bytes)
{
    const scanner begin = *s;
    if (code == '#') {
        s->glued = false;
        return scan_comment(s);
    }
    step(s, bytes);
    return push(s, mark_kind(code), &begin);
}

static ids_status scan_one(scanner *s, uint32_t code, size_t bytes)
{
    switch (idsi_char_classify(code)) {
    case IDSI_CHAR_BLANK:
        step(s, bytes);
        s->glued = false;
        return IDS_OK;
    case IDSI_CHAR_LINE_END:
        return scan_line_end(s);
    case IDSI_CHAR_LETTER:
        return scan_run(s, IDSI_LEX_NAME);
    case IDSI_CHAR_DIGIT:
        return scan_run(s, IDSI_LEX_NUMBER);
    case IDSI_CHAR_SYMBOL:
        return scan_run(s, IDSI_LEX_SYMBOL);
    case IDSI_CHAR_MARK:
        return scan_mark(s, code, bytes);
    case IDSI_CHAR_CONTINUE:
        if (is_superscript(code)) {
            return fail_superscript(s);
        }
        return fail(s, IDS_ERR_PARSE,
                    "the character U+%04X can only go on in a name; expected a letter before it",
                    (unsigned)code);
    case IDSI_CHAR_ODD:
        break;
    }
    return fail(s, IDS_ERR_PARSE,
                "control, invisible or unusual blank character U+%04X; expected a letter, "
                "a number, a symbol or a space",
                (unsigned)code);
}

ids_status idsi_reader_lex(idsi_reader *reader)
{
    /* Columns wrap around to 1 at the end of what is hidden. */
    scanner s = {
        .reader = reader, .line = 1, .column = 1u - (uint32_t)reader->hidden, .first = true};
    uint32_t code = 0;
    size_t bytes = 0;
    ids_status st = IDS_OK;
    if (reader->length >= 3 && memcmp(reader->text, "\xEF\xBB\xBF", 3) == 0) {
        s.offset = 3; /* byte order mark */
    }
    for (;;) {
        IDSI_TRY(peek(&s, &code, &bytes));
        if (bytes == 0) {
            break;
        }
        IDSI_TRY(scan_one(&s, code, bytes));
    }
    const scanner end = s;
    IDSI_TRY(push(&s, IDSI_LEX_END, &end));
done:
    return st;
}
