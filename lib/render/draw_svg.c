/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Sheets as SVG 1.1.
 *
 *     heading                                       All lengths are CSS pixels, whole numbers
 *     summary                                       but for the corners of the marks.
 *     legend
 *     [tree ][tree ][tree ]   <- a row: roots on one line, captions on one line below the
 *     caption caption caption    deepest tree
 *
 * The sheet brings its own background, so that it can be read on any page; where the reader
 * prefers dark pages a media query changes the colours. Notation is set in a monospaced face, whose
 * width is known well enough without the font.
 */
#include <inttypes.h>
#include <string.h>

#include "draw_private.h"

#define MARGIN 32
#define LEVEL 27        /* from one depth to the next */
#define CELL_GAP 26     /* between columns */
#define ROW_GAP 34      /* between rows */
#define CAPTION_SKIP 28 /* from the deepest node to the first caption line */
#define LINE 16         /* from one caption line to the next */
#define NODE_WIDTH 17   /* of leaves too, so that equal neighbours stand at equal distances */
#define NODE_GAP 6
#define LONGEST_LINE 36u /* characters of notation in one caption line */
#define CODE_CHAR 73     /* width of a character of notation, tenths of a pixel */
#define WORD_CHAR 59     /* width of a character of other captions, likewise */
#define TITLE_CHAR 105
#define LEGEND_STEP 24
#define PAGE_TENTHS 14    /* height of a page, in tenths of its width */
#define WIDEST_SHEET 1800 /* pixels, when the width is chosen here */

/* What the first pass finds, by tree. */
typedef struct cell {
    uint8_t deepest;
    uint8_t lines; /* caption lines of notation */
} cell;

typedef struct svg {
    idsi_sheet *sheet;
    cell *cells;
    int32_t cell_width;
    int32_t sheet_width;
    uint64_t columns;
    uint64_t height;
    int32_t below_heading; /* y where the trees begin */
} svg;

static const char style[] =
    "<style>\n"
    ".paper,.open{fill:#fff}\n"
    ".edge{fill:none;stroke:#6e7781;stroke-width:1.3;stroke-linecap:round}\n"
    ".open{stroke:#1f2328;stroke-width:1.5;stroke-linejoin:round}\n"
    ".solid{fill:#1f2328;stroke:#1f2328;stroke-width:1.5;stroke-linejoin:round}\n"
    ".ink{fill:#1f2328}.quiet{fill:#57606a}\n"
    "text{font:11px system-ui,-apple-system,'Segoe UI','DejaVu Sans',Helvetica,Arial,sans-serif}\n"
    ".title{font-size:19px;font-weight:600}.summary{font-size:13px}\n"
    ".code{font:12px ui-monospace,'DejaVu Sans Mono',Menlo,Consolas,monospace}\n"
    ".label{font-size:13px}.number{font-size:9px}\n"
    ".middle{text-anchor:middle}\n"
    "@media (prefers-color-scheme:dark){\n"
    ".paper,.open{fill:#0d1117}.edge{stroke:#8b949e}.open{stroke:#e6edf3}\n"
    ".solid{fill:#e6edf3;stroke:#e6edf3}.ink{fill:#e6edf3}.quiet{fill:#9ea7b3}\n"
    "}\n"
    "</style>\n";

static int32_t text_width(const char *text, int32_t tenths)
{
    return ((int32_t)idsi_utf8_width(text) * tenths + 9) / 10;
}

static int32_t larger(int32_t a, int32_t b)
{
    return a > b ? a : b;
}

/* ---- measuring ---------------------------------------------------------------------------- */

static void arrange(idsi_sheet *sheet)
{
    const idsi_tree_picture *tree = &sheet->tree;
    idsi_layout *layout = sheet->layout;
    char name[16] = "";

    layout->gap = NODE_GAP;
    layout->ruled = false;
    for (uint32_t i = 0; i < tree->length; i++) {
        idsi_token token = tree->tokens[i];
        layout->width[i] = NODE_WIDTH;
        if (idsi_is_node(token) && idsi_mark_of(idsi_node_op(token)).number > 0) {
            layout->width[i] = NODE_WIDTH + 4;
        }
        if (!idsi_is_node(token) && token > 0) {
            idsi_label_name(sheet->sig, token, name);
            layout->width[i] = larger(NODE_WIDTH, 5 + text_width(name, 80));
        }
    }
    idsi_layout_tree(sheet->sig, tree->tokens, tree->length, layout);
}

/* Width of the notation, or of its longest line. */
static int32_t notation_width(const idsi_sheet *sheet, uint8_t *lines)
{
    const char *text = sheet->tree.notation.data;
    size_t columns = idsi_utf8_width(text);

    *lines = 0;
    for (; *text != '\0'; text += idsi_line_break(text, LONGEST_LINE)) {
        *lines = (uint8_t)(*lines + 1);
    }
    columns = columns < LONGEST_LINE ? columns : LONGEST_LINE;
    return ((int32_t)columns * CODE_CHAR + 9) / 10;
}

static ids_status measure_trees(svg *s)
{
    ids_status st = IDS_OK;
    idsi_sheet *sheet = s->sheet;
    idsi_text line;

    idsi_text_init(&line, sheet->ctx);
    s->cell_width = 110;
    IDSI_TRY(idsi_alloc_array(sheet->ctx, sheet->count, sizeof *s->cells, &s->cells));
    for (uint64_t i = 0; i < sheet->count; i++) {
        IDSI_TRY(idsi_sheet_fetch(sheet, i));
        arrange(sheet);
        s->cell_width = larger(s->cell_width, sheet->layout->total);
        s->cell_width = larger(s->cell_width, notation_width(sheet, &s->cells[i].lines));
        s->cells[i].deepest = (uint8_t)sheet->layout->deepest;
        if (sheet->types != NULL) {
            line.length = 0;
            IDSI_TRY(idsi_sheet_group_line(sheet, &line));
            s->cell_width = larger(s->cell_width, text_width(line.data, WORD_CHAR));
        }
    }
done:
    idsi_text_clear(&line);
    return st;
}

static int32_t row_depth(const svg *s, uint64_t first)
{
    int32_t deepest = 0;
    for (uint64_t i = first; i < first + s->columns && i < s->sheet->count; i++) {
        deepest = larger(deepest, s->cells[i].deepest);
    }
    return deepest;
}

static int32_t row_height(const svg *s, uint64_t first)
{
    int32_t lines = 0;
    for (uint64_t i = first; i < first + s->columns && i < s->sheet->count; i++) {
        lines = larger(lines, s->cells[i].lines);
    }
    lines += s->sheet->types != NULL ? 2 : 0;
    return row_depth(s, first) * LEVEL + CAPTION_SKIP + lines * LINE + ROW_GAP;
}

static uint64_t rows_height(const svg *s)
{
    uint64_t height = 0;
    for (uint64_t i = 0; i < s->sheet->count; i += s->columns) {
        height += (uint64_t)row_height(s, i);
    }
    return height;
}

/*
 * Chooses the columns. With a width given: as many as fit, then as few as need the same number of
 * rows. Otherwise as few as make the sheet no taller than a page, if that is not too wide.
 */
static void choose_columns(svg *s)
{
    int32_t step = s->cell_width + CELL_GAP;
    uint64_t count = s->sheet->count > 0 ? s->sheet->count : 1;

    if (s->sheet->width > 0) {
        int32_t fit = ((int32_t)(s->sheet->width & 0xffffff) - 2 * MARGIN + CELL_GAP) / step;
        uint64_t most = fit > 1 ? (uint64_t)fit : 1;
        uint64_t rows = (count + most - 1) / most;
        s->columns = (count + rows - 1) / rows;
    } else {
        s->columns = 1;
        while (s->columns < count && (int32_t)(s->columns + 1) * step < WIDEST_SHEET &&
               rows_height(s) * 10 > (uint64_t)(PAGE_TENTHS * step) * s->columns) {
            s->columns++;
        }
    }
    s->sheet_width = 2 * MARGIN + (int32_t)s->columns * step - CELL_GAP;
}

/* ---- marks and trees ---------------------------------------------------------------------- */

/* Appends a length given in tenths, without a useless ".0". */
static ids_status put_tenths(idsi_text *out, int32_t tenths)
{
    int32_t whole = tenths / 10;
    int32_t rest = tenths % 10;

    if (rest == 0) {
        return idsi_text_printf(out, "%d", (int)whole);
    }
    return idsi_text_printf(out, "%s%d.%d", tenths < 0 ? "-" : "",
                            (int)(whole < 0 ? -whole : whole), (int)(rest < 0 ? -rest : rest));
}

static ids_status put_mark(idsi_text *out, uint32_t op, int32_t x, int32_t y)
{
    ids_status st = IDS_OK;
    idsi_mark mark = idsi_mark_of(op);
    const char *kind = mark.fill == IDSI_FILL_SOLID ? "solid" : "open";

    if (mark.corners == 0) {
        IDSI_TRY(idsi_text_printf(out, "<circle class=\"%s\" cx=\"%d\" cy=\"%d\" r=\"", kind,
                                  (int)x, (int)y));
        IDSI_TRY(put_tenths(out, mark.radius));
    } else {
        IDSI_TRY(idsi_text_printf(out, "<path class=\"%s\" d=\"", kind));
        for (uint32_t i = 0; i < mark.corners; i++) {
            IDSI_TRY(idsi_text_puts(out, i == 0 ? "M" : "L"));
            IDSI_TRY(put_tenths(out, 10 * x + mark.corner[i][0]));
            IDSI_TRY(idsi_text_puts(out, " "));
            IDSI_TRY(put_tenths(out, 10 * y + mark.corner[i][1]));
        }
        IDSI_TRY(idsi_text_puts(out, "z"));
    }
    IDSI_TRY(idsi_text_puts(out, "\"/>"));
    if (mark.fill == IDSI_FILL_DOTTED) {
        IDSI_TRY(idsi_text_printf(out, "<circle class=\"ink\" cx=\"%d\" cy=\"%d\" r=\"1.8\"/>",
                                  (int)x, (int)y));
    }
    if (mark.number > 0) {
        IDSI_TRY(idsi_text_printf(out,
                                  "<text class=\"ink middle number\" x=\"%d\" y=\"%d\">%u</text>",
                                  (int)x, (int)y + 3, mark.number));
    }
done:
    return st;
}

static ids_status put_leaf(idsi_sheet *sheet, idsi_token label, int32_t x, int32_t y)
{
    char name[16] = "";

    if (label == 0) {
        return idsi_text_printf(&sheet->out, "<circle class=\"ink\" cx=\"%d\" cy=\"%d\" r=\"2\"/>",
                                (int)x, (int)y);
    }
    idsi_label_name(sheet->sig, label, name);
    return idsi_text_printf(&sheet->out,
                            "<text class=\"ink code middle label\" x=\"%d\" y=\"%d\">%s</text>",
                            (int)x, (int)y + 7, name);
}

/* Draws the tree that was fetched and arranged, its root level at y, its middle at x. */
static ids_status put_tree(idsi_sheet *sheet, int32_t x, int32_t y)
{
    ids_status st = IDS_OK;
    const idsi_tree_picture *tree = &sheet->tree;
    const idsi_layout *layout = sheet->layout;
    idsi_text *out = &sheet->out;
    int32_t left = x - layout->total / 2;

    if (tree->length > 1) {
        IDSI_TRY(idsi_text_puts(out, "<path class=\"edge\" d=\""));
        for (uint32_t i = 1; i < tree->length; i++) {
            uint32_t parent = layout->parent[i];
            bool labelled = !idsi_is_node(tree->tokens[i]) && tree->tokens[i] > 0;
            int32_t end = y + layout->depth[i] * LEVEL - (labelled ? 5 : 0);
            IDSI_TRY(idsi_text_printf(out, "M%d %dL%d %d", (int)(left + layout->x[parent]),
                                      (int)(y + layout->depth[parent] * LEVEL),
                                      (int)(left + layout->x[i]), (int)end));
        }
        IDSI_TRY(idsi_text_puts(out, "\"/>\n"));
    }
    for (uint32_t i = 0; i < tree->length; i++) {
        int32_t at = left + layout->x[i];
        int32_t level = y + layout->depth[i] * LEVEL;
        if (idsi_is_node(tree->tokens[i])) {
            IDSI_TRY(put_mark(out, idsi_node_op(tree->tokens[i]), at, level));
        } else {
            IDSI_TRY(put_leaf(sheet, tree->tokens[i], at, level));
        }
    }
    IDSI_TRY(idsi_text_puts(out, "\n"));
done:
    return st;
}

/* Captions below the tree, and its index in the upper left corner of its cell. */
static ids_status put_captions(idsi_sheet *sheet, int32_t left, int32_t top, int32_t x, int32_t y)
{
    ids_status st = IDS_OK;
    idsi_text *out = &sheet->out;
    idsi_text line;

    idsi_text_init(&line, sheet->ctx);
    IDSI_TRY(idsi_text_printf(out, "<text class=\"quiet\" x=\"%d\" y=\"%d\">%" PRIu64 "</text>\n",
                              (int)left, (int)top, sheet->tree.index));
    for (const char *text = sheet->tree.notation.data; *text != '\0'; y += LINE) {
        size_t bytes = idsi_line_break(text, LONGEST_LINE);
        IDSI_TRY(idsi_text_printf(out, "<text class=\"ink code middle\" x=\"%d\" y=\"%d\">", (int)x,
                                  (int)y));
        IDSI_TRY(idsi_xml_words(out, text, bytes, ""));
        IDSI_TRY(idsi_text_puts(out, "</text>\n"));
        text += bytes;
    }
    if (sheet->types != NULL) {
        IDSI_TRY(idsi_sheet_group_line(sheet, &line));
        IDSI_TRY(idsi_text_printf(out, "<text class=\"quiet middle\" x=\"%d\" y=\"%d\">", (int)x,
                                  (int)y));
        IDSI_TRY(idsi_xml_string(out, line.data));
        IDSI_TRY(idsi_text_printf(out,
                                  "</text>\n<text class=\"quiet middle\" x=\"%d\" y=\"%d\">%s "
                                  "%s</text>\n",
                                  (int)x, (int)y + LINE - 1, sheet->tree.monomials,
                                  idsi_sheet_monomials_word(sheet)));
    }
done:
    idsi_text_clear(&line);
    return st;
}

/* ---- heading ------------------------------------------------------------------------------ */

/* Places the entries of the legend, in lines; draws them too when `drawn`. */
static ids_status legend(svg *s, bool drawn)
{
    ids_status st = IDS_OK;
    idsi_sheet *sheet = s->sheet;
    char *text = NULL;
    int32_t x = MARGIN;
    int32_t y = 90;

    for (uint32_t op = 0; sheet->sig != NULL && op < sheet->sig->count; op++) {
        IDSI_TRY(ids_signature_print_operation(sheet->ctx, sheet->sig, op, &text));
        int32_t width = 18 + text_width(text, CODE_CHAR);
        if (!drawn) {
            s->sheet_width = larger(s->sheet_width, width + 2 * MARGIN);
        } else if (x > MARGIN && x + width > s->sheet_width - MARGIN) {
            x = MARGIN;
            y += LEGEND_STEP;
        }
        if (drawn) {
            IDSI_TRY(put_mark(&sheet->out, op, x + 6, y - 4));
            IDSI_TRY(idsi_text_printf(&sheet->out, "<text class=\"ink code\" x=\"%d\" y=\"%d\">",
                                      (int)x + 18, (int)y));
            IDSI_TRY(idsi_xml_string(&sheet->out, text));
            IDSI_TRY(idsi_text_puts(&sheet->out, "</text>\n"));
        }
        x += width + CELL_GAP;
        ids_string_free(sheet->ctx, text);
        text = NULL;
    }
    s->below_heading = y + 44;
done:
    ids_string_free(sheet->ctx, text);
    return st;
}

/* Widens the sheet for heading and legend, then finds its height. */
static ids_status measure_sheet(svg *s, const char *title, const char *summary)
{
    ids_status st = IDS_OK;

    choose_columns(s);
    s->sheet_width = larger(s->sheet_width, text_width(title, TITLE_CHAR) + 2 * MARGIN);
    s->sheet_width = larger(s->sheet_width, text_width(summary, 70) + 2 * MARGIN);
    IDSI_TRY(legend(s, false));
    /* The lines of the legend depend on the final width, so they are set once more in vain. */
    IDSI_TRY(legend(s, true));
    s->sheet->out.length = 0;
    s->height = (uint64_t)s->below_heading;
    s->height += rows_height(s);
    s->height -= s->sheet->count > 0 ? ROW_GAP - MARGIN : 0;
done:
    return st;
}

static ids_status put_head(svg *s, const char *title, const char *summary)
{
    ids_status st = IDS_OK;
    idsi_text *out = &s->sheet->out;

    IDSI_TRY(idsi_text_printf(out,
                              "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n"
                              "<svg xmlns=\"http://www.w3.org/2000/svg\" version=\"1.1\" "
                              "width=\"%d\" height=\"%" PRIu64 "\" viewBox=\"0 0 %d %" PRIu64
                              "\" role=\"img\">\n<title>%s</title>\n",
                              (int)s->sheet_width, s->height, (int)s->sheet_width, s->height,
                              title));
    IDSI_TRY(idsi_text_puts(out, style));
    IDSI_TRY(idsi_text_printf(out,
                              "<rect class=\"paper\" width=\"%d\" height=\"%" PRIu64 "\"/>\n"
                              "<text class=\"ink title\" x=\"%d\" y=\"44\">%s</text>\n"
                              "<text class=\"quiet summary\" x=\"%d\" y=\"64\">%s</text>\n",
                              (int)s->sheet_width, s->height, MARGIN, title, MARGIN, summary));
    IDSI_TRY(legend(s, true));
    IDSI_TRY(idsi_sheet_pour(s->sheet));
done:
    return st;
}

static ids_status put_rows(svg *s)
{
    ids_status st = IDS_OK;
    idsi_sheet *sheet = s->sheet;
    int32_t y = s->below_heading;

    for (uint64_t i = 0; i < sheet->count; i++) {
        uint64_t column = i % s->columns;
        int32_t left = MARGIN + (int32_t)column * (s->cell_width + CELL_GAP);
        int32_t x = left + s->cell_width / 2;
        if (column == 0 && i > 0) {
            y += row_height(s, i - s->columns);
        }
        IDSI_TRY(idsi_sheet_fetch(sheet, i));
        arrange(sheet);
        IDSI_TRY(idsi_text_printf(&sheet->out, "<g class=\"tree\" id=\"tree%" PRIu64 "\">\n",
                                  sheet->tree.index));
        IDSI_TRY(put_tree(sheet, x, y));
        IDSI_TRY(put_captions(sheet, left, y + 4, x,
                              y + row_depth(s, i - column) * LEVEL + CAPTION_SKIP));
        IDSI_TRY(idsi_text_puts(&sheet->out, "</g>\n"));
        IDSI_TRY(idsi_sheet_pour(sheet));
    }
done:
    return st;
}

ids_status idsi_draw_svg(idsi_sheet *sheet)
{
    ids_status st = IDS_OK;
    svg s = {.sheet = sheet};
    idsi_text title;
    idsi_text summary;

    idsi_text_init(&title, sheet->ctx);
    idsi_text_init(&summary, sheet->ctx);
    IDSI_TRY(idsi_sheet_heading(sheet, &title, &summary));
    IDSI_TRY(measure_trees(&s));
    IDSI_TRY(measure_sheet(&s, title.data, summary.data));
    IDSI_TRY(put_head(&s, title.data, summary.data));
    IDSI_TRY(put_rows(&s));
    IDSI_TRY(idsi_text_puts(&sheet->out, "</svg>\n"));
    IDSI_TRY(idsi_sheet_pour(sheet));
done:
    idsi_free(sheet->ctx, s.cells);
    idsi_text_clear(&title);
    idsi_text_clear(&summary);
    return st;
}
