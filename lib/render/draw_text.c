/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Sheets as text.
 *
 *        ┌──*──┐      A node stands in the middle of a rule that reaches over its arguments,
 *      ┌─*─┐ ┌─*─┐    which stand below its ends and branches. An operation is shown by its
 *      x   x x   x    symbol, its fences or its name.
 *
 * The trees of a row are drawn on one canvas of characters, line by line, with their captions
 * below; then the canvas is poured and used again.
 */
#include <inttypes.h>
#include <stdio.h>
#include <string.h>

#include "draw_private.h"

#define USUAL_WIDTH 80
#define CELL_GAP 4
#define NODE_CHARS 64 /* bytes of the sign of a node */

typedef struct canvas {
    idsi_sheet *sheet;
    bool ascii;
    int32_t cell_width;
    uint64_t columns;
    int32_t width;       /* of the canvas */
    int32_t capacity;    /* lines that it has */
    int32_t lines;       /* lines in use */
    uint32_t *character; /* 0: nothing; CONTINUED: the right half of a wide one */
    uint8_t *deepest;    /* by tree */
} canvas;

#define CONTINUED 0xFFFFFFFFu

enum { RULE, LEFT_END, RIGHT_END, BRANCH };

static const uint32_t box_lines[2][4] = {
    {0x2500, 0x250C, 0x2510, 0x252C},
    {'-', '.', '.', '.'},
};

static int32_t larger(int32_t a, int32_t b)
{
    return a > b ? a : b;
}

/* ---- what stands at a node ---------------------------------------------------------------- */

/* Symbol, fences or name of an operation; with its number when an other one looks the same. */
static void node_sign(const ids_signature *sig, uint32_t op, char sign[NODE_CHARS])
{
    const idsi_op *shown = &sig->ops[op];
    bool fence = shown->notation == IDS_NOTATION_FENCE;

    snprintf(sign, NODE_CHARS, "%.28s%.28s", shown->open, fence ? shown->close : "");
    for (uint32_t i = 0; i < sig->count; i++) {
        const idsi_op *other = &sig->ops[i];
        if (i != op && other->arity == shown->arity && other->notation != IDS_NOTATION_FENCE &&
            !fence && strcmp(other->open, shown->open) == 0) {
            snprintf(sign, NODE_CHARS, "%.28s%u", shown->open, op + 1);
        }
    }
}

static void token_sign(const idsi_sheet *sheet, idsi_token token, char sign[NODE_CHARS])
{
    if (idsi_is_node(token)) {
        node_sign(sheet->sig, idsi_node_op(token), sign);
    } else {
        char name[16] = "";
        idsi_label_name(sheet->sig, token, name);
        snprintf(sign, NODE_CHARS, "%s", name);
    }
}

static void arrange(idsi_sheet *sheet)
{
    char sign[NODE_CHARS] = "";

    sheet->layout->gap = 4;
    sheet->layout->ruled = true;
    for (uint32_t i = 0; i < sheet->tree.length; i++) {
        token_sign(sheet, sheet->tree.tokens[i], sign);
        sheet->layout->width[i] = larger(1, (int32_t)idsi_utf8_width(sign));
    }
    idsi_layout_tree(sheet->sig, sheet->tree.tokens, sheet->tree.length, sheet->layout);
}

/* ---- the canvas --------------------------------------------------------------------------- */

static ids_status reserve_lines(canvas *c, int32_t lines)
{
    ids_status st = IDS_OK;

    if (lines > c->capacity) {
        IDSI_TRY(idsi_resize_array(c->sheet->ctx, (size_t)lines * (size_t)c->width,
                                   sizeof *c->character, &c->character));
        memset(c->character + (size_t)c->capacity * (size_t)c->width, 0,
               (size_t)(lines - c->capacity) * (size_t)c->width * sizeof *c->character);
        c->capacity = lines;
    }
    c->lines = larger(c->lines, lines);
done:
    return st;
}

/* Puts a character; what is beyond the edge is not shown. */
static void put(canvas *c, int32_t x, int32_t y, uint32_t character)
{
    if (x >= 0 && x < c->width && y < c->lines) {
        c->character[(size_t)y * (size_t)c->width + (size_t)x] = character;
    }
}

static void put_string(canvas *c, int32_t x, int32_t y, const char *text)
{
    while (*text != '\0') {
        char one[8] = "";
        const char *next = text;
        uint32_t character = idsi_utf8_next(&next);
        memcpy(one, text, (size_t)(next - text));
        int32_t wide = (int32_t)idsi_utf8_width(one);
        /* A combining character has no place of its own; signs are single letters mostly. */
        if (wide > 0) {
            put(c, x, y, character);
        }
        if (wide > 1) {
            put(c, x + 1, y, CONTINUED);
        }
        x += wide;
        text = next;
    }
}

static ids_status pour_canvas(canvas *c)
{
    ids_status st = IDS_OK;
    idsi_text *out = &c->sheet->out;

    for (int32_t y = 0; y < c->lines; y++) {
        const uint32_t *line = c->character + (size_t)y * (size_t)c->width;
        int32_t end = c->width;
        while (end > 0 && line[end - 1] == 0) {
            end--;
        }
        for (int32_t x = 0; x < end; x++) {
            if (line[x] != CONTINUED) {
                IDSI_TRY(idsi_utf8_append(out, line[x] != 0 ? line[x] : ' '));
            }
        }
        IDSI_TRY(idsi_text_puts(out, "\n"));
        IDSI_TRY(idsi_sheet_pour(c->sheet));
    }
    if (c->lines > 0) {
        memset(c->character, 0, (size_t)c->lines * (size_t)c->width * sizeof *c->character);
    }
    c->lines = 0;
done:
    return st;
}

/* ---- trees and captions ------------------------------------------------------------------- */

/* Draws the tree that was fetched and arranged, with its left edge at x. */
static void put_tree(canvas *c, int32_t x)
{
    const idsi_tree_picture *tree = &c->sheet->tree;
    const idsi_layout *layout = c->sheet->layout;
    const uint32_t *lines = box_lines[c->ascii];
    char sign[NODE_CHARS] = "";

    /* Branches by parent: the first and the last argument end the rule. */
    for (uint32_t node = 0; node < tree->length; node++) {
        int32_t y = layout->depth[node];
        int32_t from = -1;
        int32_t to = -1;
        for (uint32_t i = node + 1; i < tree->length; i++) {
            if (layout->parent[i] == node) {
                from = from < 0 ? layout->x[i] : from;
                to = layout->x[i];
            }
        }
        for (int32_t at = from; from >= 0 && at <= to; at++) {
            put(c, x + at, y, lines[at == from ? LEFT_END : at == to ? RIGHT_END : RULE]);
        }
        for (uint32_t i = node + 1; i < tree->length; i++) {
            if (layout->parent[i] == node && layout->x[i] != from && layout->x[i] != to) {
                put(c, x + layout->x[i], y, lines[BRANCH]);
            }
        }
        token_sign(c->sheet, tree->tokens[node], sign);
        put_string(c, x + layout->x[node] - (layout->width[node] - 1) / 2, y, sign);
    }
}

static ids_status put_captions(canvas *c, int32_t x, int32_t y)
{
    ids_status st = IDS_OK;
    idsi_sheet *sheet = c->sheet;
    idsi_text line;

    idsi_text_init(&line, sheet->ctx);
    IDSI_TRY(
        idsi_text_printf(&line, "%" PRIu64 "  %s", sheet->tree.index, sheet->tree.notation.data));
    IDSI_TRY(reserve_lines(c, y + (sheet->types != NULL ? 3 : 1)));
    put_string(c, x, y, line.data);
    if (sheet->types != NULL) {
        line.length = 0;
        IDSI_TRY(idsi_sheet_group_line(sheet, &line));
        put_string(c, x, y + 1, line.data);
        line.length = 0;
        IDSI_TRY(idsi_text_printf(&line, "%s %s", sheet->tree.monomials,
                                  idsi_sheet_monomials_word(sheet)));
        put_string(c, x, y + 2, line.data);
    }
done:
    idsi_text_clear(&line);
    return st;
}

/* ---- the sheet ---------------------------------------------------------------------------- */

static ids_status measure(canvas *c)
{
    ids_status st = IDS_OK;
    idsi_sheet *sheet = c->sheet;
    int32_t wanted = sheet->width > 0 ? (int32_t)(sheet->width & 0xffffff) : USUAL_WIDTH;
    idsi_text line;

    idsi_text_init(&line, sheet->ctx);
    IDSI_TRY(idsi_alloc_array(sheet->ctx, sheet->count, sizeof *c->deepest, &c->deepest));
    for (uint64_t i = 0; i < sheet->count; i++) {
        IDSI_TRY(idsi_sheet_fetch(sheet, i));
        arrange(sheet);
        c->deepest[i] = (uint8_t)sheet->layout->deepest;
        c->cell_width = larger(c->cell_width, sheet->layout->total);
        line.length = 0;
        IDSI_TRY(idsi_text_printf(&line, "%" PRIu64 "  %s", sheet->tree.index,
                                  sheet->tree.notation.data));
        c->cell_width = larger(c->cell_width, (int32_t)idsi_utf8_width(line.data));
        if (sheet->types != NULL) {
            line.length = 0;
            IDSI_TRY(idsi_sheet_group_line(sheet, &line));
            c->cell_width = larger(c->cell_width, (int32_t)line.length);
        }
    }
    int32_t fit = (wanted + CELL_GAP) / (c->cell_width + CELL_GAP);
    c->columns = fit > 1 ? (uint64_t)fit : 1;
    c->width = (int32_t)c->columns * (c->cell_width + CELL_GAP) - CELL_GAP;
done:
    idsi_text_clear(&line);
    return st;
}

static ids_status put_head(idsi_sheet *sheet)
{
    ids_status st = IDS_OK;
    idsi_text *out = &sheet->out;
    char sign[NODE_CHARS] = "";
    char *text = NULL;
    idsi_text summary;

    idsi_text_init(&summary, sheet->ctx);
    IDSI_TRY(idsi_sheet_heading(sheet, out, &summary));
    IDSI_TRY(idsi_text_printf(out, ": %s\n\n", summary.data));
    for (uint32_t op = 0; sheet->sig != NULL && op < sheet->sig->count; op++) {
        node_sign(sheet->sig, op, sign);
        IDSI_TRY(ids_signature_print_operation(sheet->ctx, sheet->sig, op, &text));
        IDSI_TRY(idsi_text_printf(out, "  %s  %s\n", sign, text));
        ids_string_free(sheet->ctx, text);
        text = NULL;
    }
    IDSI_TRY(idsi_sheet_pour(sheet));
done:
    ids_string_free(sheet->ctx, text);
    idsi_text_clear(&summary);
    return st;
}

static ids_status put_row(canvas *c, uint64_t first)
{
    ids_status st = IDS_OK;
    idsi_sheet *sheet = c->sheet;
    uint64_t end = sheet->count - first < c->columns ? sheet->count : first + c->columns;
    int32_t deepest = 0;

    for (uint64_t i = first; i < end; i++) {
        deepest = larger(deepest, c->deepest[i]);
    }
    IDSI_TRY(reserve_lines(c, deepest + 2));
    for (uint64_t i = first; i < end; i++) {
        int32_t x = (int32_t)(i - first) * (c->cell_width + CELL_GAP);
        IDSI_TRY(idsi_sheet_fetch(sheet, i));
        arrange(sheet);
        put_tree(c, x);
        IDSI_TRY(put_captions(c, x, deepest + 2));
    }
    IDSI_TRY(idsi_text_puts(&sheet->out, "\n"));
    IDSI_TRY(pour_canvas(c));
done:
    return st;
}

ids_status idsi_draw_text(idsi_sheet *sheet, bool ascii)
{
    ids_status st = IDS_OK;
    canvas c = {.sheet = sheet, .ascii = ascii};

    IDSI_TRY(put_head(sheet));
    IDSI_TRY(measure(&c));
    for (uint64_t i = 0; i < sheet->count; i += c.columns) {
        IDSI_TRY(put_row(&c, i));
    }
done:
    idsi_free(sheet->ctx, c.character);
    idsi_free(sheet->ctx, c.deepest);
    return st;
}
