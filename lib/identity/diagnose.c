/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Error messages of the reader.
 *
 *     file.pres:3:17: unknown operation '.'; declare it first, as in: operation a.b
 *     identity x*(y*z).x = 0
 *                     ^
 *
 * Of a long line only a window around the place is shown, and characters that would spoil a
 * terminal are shown as '?'. All pieces have fixed sizes that fit the message of a context.
 */
#include <stdio.h>
#include <string.h>

#include "notation_private.h"

enum {
    WINDOW = 75,       /* characters of a line that are shown */
    WINDOW_BEFORE = 40 /* of these, before the caret, when the line is cut on the left */
};

typedef struct excerpt {
    char line[4 * WINDOW + 8];
    char caret[WINDOW + 8];
} excerpt;

/* One character for the excerpt: its bytes are copied to `out` (at most 4); bytes read. */
static size_t excerpt_char(const char *text, size_t length, char *out, size_t *out_length)
{
    uint32_t code = 0;
    const size_t bytes = idsi_utf8_decode(text, length, &code);
    if (bytes == 0 || idsi_char_classify(code) == IDSI_CHAR_ODD) {
        *out = '?';
        *out_length = 1;
        return bytes == 0 ? 1 : bytes;
    }
    memcpy(out, text, bytes);
    *out_length = bytes;
    return bytes;
}

static size_t line_begin(const idsi_reader *reader, size_t offset)
{
    while (offset > reader->hidden && reader->text[offset - 1] != '\n') {
        offset--;
    }
    if (offset == 0 && reader->length >= 3 && memcmp(reader->text, "\xEF\xBB\xBF", 3) == 0) {
        offset = 3;
    }
    return offset;
}

static void make_excerpt(const idsi_reader *reader, size_t offset, uint32_t column, excerpt *out)
{
    const uint32_t first = column > WINDOW - 15 ? column - WINDOW_BEFORE : 1;
    size_t at = line_begin(reader, offset);
    size_t n = 0;
    size_t c = 0;
    if (first > 1) {
        memcpy(out->line, "...", 3);
        memcpy(out->caret, "   ", 3);
        n = c = 3;
    }
    for (uint32_t i = 1; at < reader->length; i++) {
        if (reader->text[at] == '\n' ||
            (reader->text[at] == '\r' && at + 1 < reader->length && reader->text[at + 1] == '\n')) {
            break;
        }
        if (i >= first + WINDOW - 6) {
            memcpy(out->line + n, "...", 3);
            n += 3;
            break;
        }
        char piece[4];
        size_t piece_length = 0;
        at += excerpt_char(reader->text + at, reader->length - at, piece, &piece_length);
        if (i >= first) {
            if (piece[0] == '\r') {
                piece[0] = '?';
            }
            memcpy(out->line + n, piece, piece_length);
            n += piece_length;
            if (i < column) {
                out->caret[c++] = piece[0] == '\t' ? '\t' : ' ';
            }
        }
    }
    out->line[n] = '\0';
    out->caret[c] = '^';
    out->caret[c + 1] = '\0';
}

/* Turns the reader to the text that its own one is a piece of. */
static idsi_reader at_origin(const idsi_reader *reader, ids_place *place, size_t *offset)
{
    const idsi_origin *origin = reader->origin;
    const char *text = origin->pres->text;
    size_t at = 0;
    if (place->line == origin->place.line) {
        const uint32_t prefix = sizeof IDSI_PIECE_PREFIX - 1;
        place->column -= place->column > prefix ? prefix : place->column - 1;
        place->column += origin->place.column - 1;
    }
    for (uint32_t line = 1; line < place->line && at < origin->pres->length; at++) {
        line += text[at] == '\n';
    }
    *offset = at;
    return (idsi_reader){.ctx = reader->ctx,
                         .source = origin->pres->source,
                         .text = text,
                         .length = origin->pres->length};
}

ids_status idsi_reader_fail_place(idsi_reader *reader, ids_status status, ids_place place,
                                  size_t offset, const char *format, va_list args)
{
    idsi_reader other;
    if (reader->origin != NULL) {
        other = at_origin(reader, &place, &offset);
        reader = &other;
    }
    char message[480];
    excerpt lines;
    const int n = vsnprintf(message, sizeof message, format, args);
    if (n < 0) {
        message[0] = '\0';
    }
    if (offset < reader->hidden) {
        offset = reader->hidden;
        place.column = 1;
    }
    make_excerpt(reader, offset, place.column, &lines);
    const bool empty = lines.line[0] == '\0'; /* nothing to point at */
    return idsi_fail_at(reader->ctx, status, place, "%.120s:%u:%u: %s%s%s%s%s", reader->source,
                        place.line, place.column, message, empty ? "" : "\n", lines.line,
                        empty ? "" : "\n", empty ? "" : lines.caret);
}

ids_status idsi_reader_fail(idsi_reader *reader, ids_status status, size_t lexeme,
                            const char *format, ...)
{
    const idsi_lexeme *at = &reader->lexemes[lexeme];
    const ids_place place = {at->line, at->column};
    va_list args;
    va_start(args, format);
    ids_status st = idsi_reader_fail_place(reader, status, place, at->offset, format, args);
    va_end(args);
    return st;
}

ids_status idsi_reader_place(idsi_reader *reader, ids_status status, size_t lexeme)
{
    if (status != IDS_ERR_LIMIT && status != IDS_ERR_DOMAIN && status != IDS_ERR_ARG) {
        return status;
    }
    if (ids_ctx_last_place(reader->ctx).line != 0) {
        return status;
    }
    /* The message lives in the buffer that the new one is written to. */
    char message[400];
    (void)snprintf(message, sizeof message, "%s", ids_ctx_message(reader->ctx));
    return idsi_reader_fail(reader, status, lexeme, "%s", message);
}

ids_status idsi_presentation_fail(ids_ctx *ctx, const ids_presentation *pres, ids_status status,
                                  ids_place place, const char *format, ...)
{
    /* A text of which the whole of `pres` is a piece, so that only the offset is looked up. */
    const idsi_origin origin = {.pres = pres};
    idsi_reader reader = {.ctx = ctx, .origin = &origin};
    va_list args;
    va_start(args, format);
    ids_status st = idsi_reader_fail_place(&reader, status, place, 0, format, args);
    va_end(args);
    return st;
}

ids_status idsi_presentation_place(ids_ctx *ctx, const ids_presentation *pres, ids_status status,
                                   ids_place place)
{
    char message[400];
    if (status == IDS_OK || ids_ctx_last_place(ctx).line != 0) {
        return status;
    }
    (void)snprintf(message, sizeof message, "%s", ids_ctx_message(ctx));
    return idsi_presentation_fail(ctx, pres, status, place, "%s", message);
}

/* Copies at most `most` bytes, cut between characters, with "..." where something is missing. */
static void copy_cut(char *out, const char *text, size_t length, size_t most)
{
    size_t n = 0;
    if (length <= most) {
        memcpy(out, text, length);
        out[length] = '\0';
        return;
    }
    while (n < most - 3) {
        uint32_t code = 0;
        const size_t bytes = idsi_utf8_decode(text + n, length - n, &code);
        if (bytes == 0 || n + bytes > most - 3) {
            break;
        }
        n += bytes;
    }
    memcpy(out, text, n);
    memcpy(out + n, "...", 4);
}

idsi_shown idsi_reader_show(const idsi_reader *reader, size_t lexeme)
{
    idsi_shown shown = {{0}};
    const idsi_lexeme *at = &reader->lexemes[lexeme];
    if (at->kind == IDSI_LEX_END) {
        const char *what =
            at->offset == reader->length ? "the end of the text" : "the end of the line";
        memcpy(shown.text, what, strlen(what) + 1);
        return shown;
    }
    shown.text[0] = '\'';
    copy_cut(shown.text + 1, reader->text + at->offset, at->length, IDSI_MAX_NAME);
    const size_t n = strlen(shown.text);
    shown.text[n] = '\'';
    shown.text[n + 1] = '\0';
    return shown;
}

idsi_shown idsi_reader_slice(const idsi_reader *reader, size_t first, size_t last)
{
    idsi_shown shown = {{0}};
    const idsi_lexeme *a = &reader->lexemes[first];
    const idsi_lexeme *b = &reader->lexemes[last];
    const size_t length = b->offset + b->length - a->offset;
    if (a->line == b->line && length <= 40) {
        memcpy(shown.text, reader->text + a->offset, length);
    }
    return shown;
}

static int folded(int letter)
{
    return letter >= 'A' && letter <= 'Z' ? letter - 'A' + 'a' : letter;
}

/* Edit distance (Levenshtein) of two short words, by rows, capitals being no difference; SIZE_MAX
 * when one is long. */
static size_t distance(const char *a, size_t n, const char *b, size_t m)
{
    size_t row[IDSI_MAX_NAME + 1];
    if (m > IDSI_MAX_NAME) {
        return SIZE_MAX;
    }
    for (size_t j = 0; j <= m; j++) {
        row[j] = j;
    }
    for (size_t i = 1; i <= n; i++) {
        size_t diagonal = row[0];
        row[0] = i;
        for (size_t j = 1; j <= m; j++) {
            size_t best = diagonal + (folded(a[i - 1]) == folded(b[j - 1]) ? 0 : 1);
            diagonal = row[j];
            best = row[j] + 1 < best ? row[j] + 1 : best;
            row[j] = row[j - 1] + 1 < best ? row[j - 1] + 1 : best;
        }
    }
    return row[m];
}

const char *idsi_reader_nearest(const idsi_reader *reader, size_t lexeme, const char *const *words,
                                size_t count)
{
    const idsi_lexeme *at = &reader->lexemes[lexeme];
    const char *nearest = NULL;
    size_t best = 3;
    for (size_t i = 0; i < count; i++) {
        const size_t d =
            distance(reader->text + at->offset, at->length, words[i], strlen(words[i]));
        /* At most two letters are wrong, and of a short word one. */
        if (d < best && 5 * d <= 2 * (size_t)at->length) {
            best = d;
            nearest = words[i];
        }
    }
    return nearest;
}
