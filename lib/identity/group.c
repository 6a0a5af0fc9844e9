/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * From lines to statements.
 *
 * The END lexemes that the lexer put at the ends of lines are removed where the statement goes
 * on: inside an open fence and after an operator. What is left is one END a statement; empty
 * statements are dropped. The lexemes move down in their own array.
 *
 * A name is an operator only if a statement above has declared it, so the operations are read
 * on the way. It also means that all of them are known before any identity is read.
 *
 * Fences are matched here, once for all; their depth bounds the recursion of everything later.
 */
#include "notation_private.h"

typedef struct grouping {
    idsi_reader *reader;
    size_t kept;  /* lexemes of statements so far */
    size_t begin; /* first lexeme of the statement that is being joined */
    uint32_t depth;
    size_t open[IDSI_MAX_NESTING]; /* the fences that are open */
} grouping;

static char closing_of(const idsi_reader *reader, size_t open)
{
    return idsi_fence_close(reader->text[reader->lexemes[open].offset]);
}

static ids_status fail_open(const grouping *g)
{
    const size_t open = g->open[g->depth - 1];
    const idsi_shown shown = idsi_reader_show(g->reader, open);
    if (open == g->begin + 2 && idsi_lexeme_is(g->reader, g->begin, "operation") &&
        !g->reader->lexemes[open].glued) {
        return idsi_reader_fail(g->reader, IDS_ERR_PARSE, open,
                                "%s is a fence, not an infix sign; expected another sign, or an "
                                "operation such as %ca,b%c",
                                shown.text, shown.text[1], closing_of(g->reader, open));
    }
    return idsi_reader_fail(g->reader, IDS_ERR_PARSE, open,
                            "the fence %s is never closed; expected '%c'", shown.text,
                            closing_of(g->reader, open));
}

static ids_status close_fence(grouping *g, size_t lexeme)
{
    const idsi_shown found = idsi_reader_show(g->reader, lexeme);
    if (g->depth == 0) {
        return idsi_reader_fail(g->reader, IDS_ERR_PARSE, lexeme,
                                "%s closes nothing; no fence is open here", found.text);
    }
    const size_t open = g->open[g->depth - 1];
    if (g->reader->text[g->reader->lexemes[lexeme].offset] != closing_of(g->reader, open)) {
        const idsi_lexeme *at = &g->reader->lexemes[open];
        const idsi_shown shown = idsi_reader_show(g->reader, open);
        return idsi_reader_fail(g->reader, IDS_ERR_PARSE, lexeme,
                                "expected '%c' to close the %s of line %u, column %u, found %s",
                                closing_of(g->reader, open), shown.text, at->line, at->column,
                                found.text);
    }
    g->depth--;
    return IDS_OK;
}

static ids_status track_fence(grouping *g, size_t lexeme)
{
    idsi_reader *reader = g->reader;
    const idsi_lexeme *at = &reader->lexemes[lexeme];
    if (at->kind == IDSI_LEX_CLOSE) {
        return close_fence(g, lexeme);
    }
    if (at->kind == IDSI_LEX_OPEN) {
        if (g->depth == IDSI_MAX_NESTING) {
            return idsi_reader_fail(reader, IDS_ERR_LIMIT, lexeme, "fences nested deeper than %u",
                                    IDSI_MAX_NESTING);
        }
        g->open[g->depth++] = lexeme;
        return IDS_OK;
    }
    if (at->first && g->depth > 0 && idsi_lexeme_is_statement(reader, lexeme)) {
        return fail_open(g);
    }
    return IDS_OK;
}

/* Whether a line that ends in this lexeme goes on in the next one. */
static bool is_operator(const idsi_reader *reader, size_t lexeme)
{
    switch (reader->lexemes[lexeme].kind) {
    case IDSI_LEX_SYMBOL:
    case IDSI_LEX_COMMA:
    case IDSI_LEX_COLON:
    case IDSI_LEX_EQUAL:
    case IDSI_LEX_PLUS:
    case IDSI_LEX_MINUS:
        return true;
    case IDSI_LEX_NAME:
        return idsi_reader_operation(reader, IDS_NOTATION_INFIX, lexeme, 0) != SIZE_MAX;
    default:
        return false;
    }
}

static ids_status end_statement(grouping *g)
{
    idsi_reader *reader = g->reader;
    ids_status st = IDS_OK;
    if (idsi_lexeme_is(reader, g->begin, "operation")) {
        reader->at = g->begin + 1;
        st = idsi_reader_declare(reader);
    }
    g->begin = g->kept;
    return st;
}

/* Whether the END number i only ends a line, and the statement goes on or has not begun. */
static bool goes_on(const grouping *g, size_t i)
{
    const idsi_reader *reader = g->reader;
    if (g->kept == g->begin) {
        return true;
    }
    if (i + 1 == reader->lexeme_count) {
        return false;
    }
    const bool next_begins =
        reader->lexemes[i + 1].kind == IDSI_LEX_NAME && idsi_lexeme_is_statement(reader, i + 1);
    return g->depth > 0 || (is_operator(reader, g->kept - 1) && !next_begins);
}

ids_status idsi_reader_group(idsi_reader *reader)
{
    grouping g = {.reader = reader};
    idsi_lexeme first_end = {.kind = IDSI_LEX_NAME}; /* first END since the last other lexeme */
    ids_status st = IDS_OK;
    for (size_t i = 0; i < reader->lexeme_count; i++) {
        const idsi_lexeme lexeme = reader->lexemes[i];
        /* Nothing is written above i, so what is still to be read stays as it is. */
        if (lexeme.kind != IDSI_LEX_END) {
            first_end.kind = IDSI_LEX_NAME;
            reader->lexemes[g.kept++] = lexeme;
            IDSI_TRY(track_fence(&g, g.kept - 1));
            continue;
        }
        if (first_end.kind != IDSI_LEX_END) {
            first_end = lexeme;
        }
        if (goes_on(&g, i)) {
            continue;
        }
        if (g.depth > 0) {
            st = fail_open(&g);
            goto done;
        }
        reader->lexemes[g.kept++] = first_end;
        IDSI_TRY(end_statement(&g));
    }
    reader->lexeme_count = g.kept;
done:
    return st;
}
