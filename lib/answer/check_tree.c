/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Monomials in the notation of a signature, as the checker reads them.
 *
 *     product = factor, or factor SYMBOL factor
 *     factor  = NAME, or NAME ( product, ... ), or OPEN product, ... CLOSE, or ( product )
 *
 * Blanks are allowed around symbols only, where the printer of monomials writes them. Nothing is
 * made canonical here.
 */
#include <string.h>

#include "certificate_private.h"

#define MOST_TOKENS (2u * IDSI_MAX_IDENTITY_DEGREE - 1u)
#define MOST_DEPTH (2u * IDSI_MAX_IDENTITY_DEGREE)

typedef struct parser {
    idsi_cursor *in;
    const idsi_spelling *spelling;
    idsi_token *out;
    size_t used;
    uint32_t depth;
} parser;

static ids_status read_product(parser *p);

static ids_status put(parser *p, size_t at, idsi_token token)
{
    if (p->used >= MOST_TOKENS) {
        return idsi_cursor_fail(p->in, IDS_ERR_PARSE, "a monomial of degree over %u",
                                IDSI_MAX_IDENTITY_DEGREE);
    }
    memmove(p->out + at + 1, p->out + at, (p->used - at) * sizeof *p->out);
    p->out[at] = token;
    p->used++;
    return IDS_OK;
}

static bool is_name_byte(char c)
{
    return (uint8_t)c >= 0x80 || (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') ||
           (c >= '0' && c <= '9') || c == '_' || c == '\'';
}

/* Bytes of the name at the cursor. */
static size_t name_length(const idsi_cursor *in)
{
    size_t length = 0;
    while (in->at + length < in->line_end && is_name_byte(in->at[length])) {
        length++;
    }
    return length;
}

static bool same(const idsi_cursor *in, size_t length, const char *text)
{
    return strlen(text) == length && memcmp(in->at, text, length) == 0;
}

/* Products between commas; *count of them. */
static ids_status read_list(parser *p, uint32_t *count)
{
    ids_status st = IDS_OK;

    for (*count = 0;;) {
        IDSI_TRY(read_product(p));
        (*count)++;
        if (p->in->at == p->in->line_end || *p->in->at != ',' || *count == IDS_MAX_ARITY) {
            return IDS_OK;
        }
        p->in->at++;
    }
done:
    return st;
}

/* A list in fences that begin with `open`; for a prefix operation, its name. */
static ids_status read_fenced(parser *p, ids_notation notation, const char *name, size_t length)
{
    ids_status st = IDS_OK;
    const ids_signature *sig = p->spelling->sig;
    size_t begin = p->used;
    uint32_t count = 0;

    IDSI_TRY(read_list(p, &count));
    if (notation == IDS_NOTATION_FENCE && count == 1 && *name == '(') {
        return idsi_cursor_expect(p->in, ")");
    }
    for (uint32_t op = 0; op < sig->count; op++) {
        const idsi_op *known = &sig->ops[op];
        const char *close = notation == IDS_NOTATION_FENCE ? known->close : ")";
        if (known->notation == notation && known->arity == count && strlen(known->open) == length &&
            memcmp(known->open, name, length) == 0 && p->in->at < p->in->line_end &&
            *close == *p->in->at) {
            p->in->at++;
            return put(p, begin, idsi_node(op));
        }
    }
    st = idsi_cursor_fail(p->in, IDS_ERR_PARSE, "there is no operation with %u arguments here",
                          count);
done:
    return st;
}

static ids_status read_factor(parser *p)
{
    idsi_cursor *in = p->in;
    size_t length = name_length(in);
    const char *name = in->at;

    if (length == 0) {
        if (in->at == in->line_end || strchr("([{<", *in->at) == NULL) {
            return idsi_cursor_fail(in, IDS_ERR_PARSE, "expected a monomial");
        }
        in->at++;
        return read_fenced(p, IDS_NOTATION_FENCE, name, 1);
    }
    if (in->at + length < in->line_end && in->at[length] == '(') {
        in->at += length + 1;
        return read_fenced(p, IDS_NOTATION_PREFIX, name, length);
    }
    for (uint32_t i = 0; i < p->spelling->count; i++) {
        if (same(in, length, p->spelling->names[i])) {
            in->at += length;
            return put(p, p->used, i + 1);
        }
    }
    return idsi_cursor_fail(in, IDS_ERR_PARSE, "\"%.*s\" is no variable of the claim",
                            (int)(length < 63 ? length : 63), name);
}

/* The infix operation at the cursor, with its blanks; the longest that fits. */
static bool read_symbol(parser *p, uint32_t *op)
{
    const ids_signature *sig = p->spelling->sig;
    const char *at = p->in->at;
    size_t longest = 0;

    while (at < p->in->line_end && *at == ' ') {
        at++;
    }
    for (uint32_t i = 0; i < sig->count; i++) {
        size_t length = strlen(sig->ops[i].open);
        if (sig->ops[i].notation == IDS_NOTATION_INFIX && length > longest &&
            (size_t)(p->in->line_end - at) >= length && memcmp(at, sig->ops[i].open, length) == 0) {
            longest = length;
            *op = i;
        }
    }
    if (longest == 0) {
        return false;
    }
    p->in->at = at + longest;
    while (p->in->at < p->in->line_end && *p->in->at == ' ') {
        p->in->at++;
    }
    return true;
}

static ids_status read_product(parser *p)
{
    ids_status st = IDS_OK;
    size_t begin = p->used;
    uint32_t op = 0;

    if (p->depth == MOST_DEPTH) {
        return idsi_cursor_fail(p->in, IDS_ERR_PARSE, "parentheses nested too deep");
    }
    p->depth++;
    IDSI_TRY(read_factor(p));
    if (read_symbol(p, &op)) {
        IDSI_TRY(read_factor(p));
        IDSI_TRY(put(p, begin, idsi_node(op)));
    }
    p->depth--;
done:
    return st;
}

ids_status idsi_cursor_tree(idsi_cursor *cursor, const idsi_spelling *spelling, idsi_token *tree,
                            size_t *length)
{
    parser p = {.in = cursor, .spelling = spelling, .out = tree};
    ids_status st = read_product(&p);

    *length = p.used;
    return st;
}
