/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Sheets as LaTeX with TikZ, to be read with \input.
 *
 * Each tree is a tikzpicture above its captions in a minipage of its own; the minipages stand in
 * a ragged paragraph, so LaTeX breaks rows and pages itself, whatever the width of the text. The
 * lowest level of a tree is the base line of its minipage, so the captions of a row are level.
 * A unit of the layout is 0.75pt. Only LaTeX and TikZ itself are used, no TikZ library.
 */
#include <ctype.h>
#include <inttypes.h>
#include <string.h>

#include "draw_private.h"

#define LEVEL 27
#define NODE_WIDTH 17
#define NODE_GAP 6
#define LEAST_CELL 120 /* width of a minipage, at least, in units */
#define CODE_CHAR 6    /* width of a character of notation, about, in units */
#define WORD_CHAR 5
#define WIDEST_CELL 440

static const char preamble[] =
    "\\begingroup\n"
    "\\setlength{\\parindent}{0pt}\\raggedright\n"
    "\\tikzset{tree/.style={x=0.75pt,y=-0.75pt,line width=0.6pt,line join=round},\n"
    "  tree edge/.style={draw=black!65,line width=0.5pt},\n"
    "  tree solid/.style={draw,fill=black},tree open/.style={draw,fill=white}}\n";

static int32_t larger(int32_t a, int32_t b)
{
    return a > b ? a : b;
}

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
        } else if (!idsi_is_node(token) && token > 0) {
            idsi_label_name(sheet->sig, token, name);
            layout->width[i] = larger(NODE_WIDTH, 5 + 8 * (int32_t)strlen(name));
        }
    }
    idsi_layout_tree(sheet->sig, tree->tokens, tree->length, layout);
}

/* Structure of a group as a formula: S2 wr S3 -> S_{2}\wr S_{3}. */
static ids_status put_structure(idsi_text *out, const char *text)
{
    ids_status st = IDS_OK;

    while (*text != '\0') {
        size_t letters = strspn(text, "ABCDEFGHIJKLMNOPQRSTUVWXYZ");
        size_t digits = strspn(text + letters, "0123456789");
        if (strncmp(text, " wr ", 4) == 0) {
            IDSI_TRY(idsi_text_puts(out, "\\wr "));
            text += 4;
        } else if (strncmp(text, " x ", 3) == 0) {
            IDSI_TRY(idsi_text_puts(out, "\\times "));
            text += 3;
        } else if (strncmp(text, " : ", 3) == 0) {
            IDSI_TRY(idsi_text_puts(out, "\\mathbin{:}"));
            text += 3;
        } else if (letters > 0) {
            IDSI_TRY(
                idsi_text_printf(out, letters > 1 ? "\\mathrm{%.*s}" : "%.*s", (int)letters, text));
            if (digits > 0) {
                IDSI_TRY(idsi_text_printf(out, "_{%.*s}", (int)digits, text + letters));
            }
            text += letters + digits;
        } else {
            IDSI_TRY(idsi_text_append(out, text, 1));
            text++;
        }
    }
done:
    return st;
}

/* Appends a coordinate given in tenths of a unit. */
static ids_status put_corner(idsi_text *out, int32_t x, int32_t y)
{
    return idsi_text_printf(out, "(%s%d.%d,%s%d.%d)", x < 0 ? "-" : "",
                            (int)((x < 0 ? -x : x) / 10), (int)((x < 0 ? -x : x) % 10),
                            y < 0 ? "-" : "", (int)((y < 0 ? -y : y) / 10),
                            (int)((y < 0 ? -y : y) % 10));
}

static ids_status put_mark(idsi_text *out, uint32_t op, int32_t x, int32_t y)
{
    ids_status st = IDS_OK;
    idsi_mark mark = idsi_mark_of(op);

    IDSI_TRY(
        idsi_text_printf(out, "\\path[tree %s] ", mark.fill == IDSI_FILL_SOLID ? "solid" : "open"));
    if (mark.corners == 0) {
        /* Tenths of a unit of 0.75pt. */
        IDSI_TRY(idsi_text_printf(out, "(%d,%d) circle[radius=%d.%02dpt];\n", (int)x, (int)y,
                                  (int)(mark.radius * 75 / 1000),
                                  (int)(mark.radius * 75 % 1000 / 10)));
    }
    for (uint32_t i = 0; i < mark.corners; i++) {
        IDSI_TRY(put_corner(out, 10 * x + mark.corner[i][0], 10 * y + mark.corner[i][1]));
        IDSI_TRY(idsi_text_puts(out, i + 1 < mark.corners ? "--" : "--cycle;\n"));
    }
    if (mark.fill == IDSI_FILL_DOTTED) {
        IDSI_TRY(
            idsi_text_printf(out, "\\path[fill] (%d,%d) circle[radius=1.2pt];\n", (int)x, (int)y));
    }
    if (mark.number > 0) {
        IDSI_TRY(idsi_text_printf(out, "\\node[inner sep=0pt] at (%d,%d) {\\tiny %u};\n", (int)x,
                                  (int)y, mark.number));
    }
done:
    return st;
}

/* The name of a label as a formula: x12 -> x_{12}. */
static ids_status put_label(const idsi_sheet *sheet, idsi_text *out, idsi_token label)
{
    char name[16] = "";

    idsi_label_name(sheet->sig, label, name);
    return name[1] == '\0' ? idsi_text_puts(out, name)
                           : idsi_text_printf(out, "%c_{%s}", name[0], name + 1);
}

static ids_status put_tree(idsi_sheet *sheet)
{
    ids_status st = IDS_OK;
    const idsi_tree_picture *tree = &sheet->tree;
    const idsi_layout *layout = sheet->layout;
    idsi_text *out = &sheet->out;

    IDSI_TRY(idsi_text_puts(out, "\\begin{tikzpicture}[tree]\n"));
    for (uint32_t i = 1; i < tree->length; i++) {
        uint32_t parent = layout->parent[i];
        bool labelled = !idsi_is_node(tree->tokens[i]) && tree->tokens[i] > 0;
        IDSI_TRY(idsi_text_printf(out, "%s(%d,%d)--(%d,%d)", i == 1 ? "\\path[tree edge] " : " ",
                                  (int)layout->x[parent], layout->depth[parent] * LEVEL,
                                  (int)layout->x[i],
                                  layout->depth[i] * LEVEL - (labelled ? 6 : 0)));
    }
    IDSI_TRY(idsi_text_puts(out, tree->length > 1 ? ";\n" : ""));
    for (uint32_t i = 0; i < tree->length; i++) {
        int32_t y = layout->depth[i] * LEVEL;
        if (idsi_is_node(tree->tokens[i])) {
            IDSI_TRY(put_mark(out, idsi_node_op(tree->tokens[i]), layout->x[i], y));
        } else if (tree->tokens[i] == 0) {
            IDSI_TRY(idsi_text_printf(out, "\\path[fill] (%d,%d) circle[radius=1.3pt];\n",
                                      (int)layout->x[i], (int)y));
        } else {
            IDSI_TRY(idsi_text_printf(out, "\\node[inner sep=0pt,anchor=base] at (%d,%d) {$",
                                      (int)layout->x[i], (int)y + 6));
            IDSI_TRY(put_label(sheet, out, tree->tokens[i]));
            IDSI_TRY(idsi_text_puts(out, "$};\n"));
        }
    }
    IDSI_TRY(idsi_text_puts(out, "\\end{tikzpicture}"));
done:
    return st;
}

static ids_status put_cell(idsi_sheet *sheet, int32_t width)
{
    ids_status st = IDS_OK;
    const idsi_tree_picture *tree = &sheet->tree;
    idsi_text *out = &sheet->out;

    IDSI_TRY(idsi_text_printf(out, "%% %" PRIu64 "\n\\begin{minipage}[t]{%d.%02dpt}\\centering\n",
                              tree->index, (int)(width * 75 / 100), (int)(width * 75 % 100)));
    IDSI_TRY(
        idsi_text_puts(out, "\\setlength{\\lineskip}{1pt}\\setlength{\\lineskiplimit}{0pt}%\n"));
    IDSI_TRY(put_tree(sheet));
    IDSI_TRY(idsi_text_puts(out, "\\\\[3pt]\n{\\footnotesize $"));
    IDSI_TRY(idsi_latex_formula(out, tree->notation.data));
    IDSI_TRY(idsi_text_puts(out, "$}"));
    if (sheet->types != NULL) {
        IDSI_TRY(idsi_text_puts(out, "\\\\\n{\\scriptsize "));
        if (strcmp(tree->order, "1") != 0) {
            IDSI_TRY(idsi_text_puts(out, "$"));
            IDSI_TRY(put_structure(out, tree->structure.data));
            IDSI_TRY(idsi_text_puts(out, "$, "));
        }
        IDSI_TRY(idsi_text_printf(out, "order %s}\\\\\n{\\scriptsize %s %s}", tree->order,
                                  tree->monomials, idsi_sheet_monomials_word(sheet)));
    }
    IDSI_TRY(idsi_text_puts(out, "\n\\end{minipage}\\hskip 9pt plus 3pt\\relax\n"));
    IDSI_TRY(idsi_sheet_pour(sheet));
done:
    return st;
}

/* One width for all cells, so that they stand in columns. */
static ids_status find_cell_width(idsi_sheet *sheet, int32_t *width)
{
    ids_status st = IDS_OK;
    idsi_text line;

    idsi_text_init(&line, sheet->ctx);
    *width = LEAST_CELL;
    for (uint64_t i = 0; i < sheet->count; i++) {
        IDSI_TRY(idsi_sheet_fetch(sheet, i));
        int32_t notation = CODE_CHAR * (int32_t)idsi_utf8_width(sheet->tree.notation.data);
        arrange(sheet);
        *width = larger(*width, notation < WIDEST_CELL ? notation : WIDEST_CELL);
        if (sheet->types != NULL) {
            line.length = 0;
            IDSI_TRY(idsi_sheet_group_line(sheet, &line));
            *width = larger(*width, WORD_CHAR * (int32_t)line.length);
        }
        *width = larger(*width, sheet->layout->total);
    }
done:
    idsi_text_clear(&line);
    return st;
}

/* How an operation is declared: the pattern as a formula, the kind of symmetry in words. */
static ids_status put_declaration(idsi_sheet *sheet, uint32_t op)
{
    ids_status st = IDS_OK;
    char *text = NULL;
    char *word = NULL;

    IDSI_TRY(ids_signature_print_operation(sheet->ctx, sheet->sig, op, &text));
    if (sheet->sig->ops[op].group.symmetry == IDS_SYMMETRY_COMMUTATIVE ||
        sheet->sig->ops[op].group.symmetry == IDS_SYMMETRY_ALTERNATING) {
        word = strrchr(text, ' ');
        *word = '\0';
    }
    IDSI_TRY(idsi_text_puts(&sheet->out, "$"));
    IDSI_TRY(idsi_latex_formula(&sheet->out, text));
    IDSI_TRY(idsi_text_printf(&sheet->out, "$%s%s", word != NULL ? " " : "",
                              word != NULL ? word + 1 : ""));
done:
    ids_string_free(sheet->ctx, text);
    return st;
}

static ids_status put_head(idsi_sheet *sheet)
{
    ids_status st = IDS_OK;
    idsi_text *out = &sheet->out;
    idsi_text title;
    idsi_text summary;

    idsi_text_init(&title, sheet->ctx);
    idsi_text_init(&summary, sheet->ctx);
    IDSI_TRY(idsi_sheet_heading(sheet, &title, &summary));
    IDSI_TRY(idsi_text_printf(out, "%% %s; in the preamble: \\usepackage{tikz}\n%s", title.data,
                              preamble));
    IDSI_TRY(idsi_text_printf(out, "{\\large\\bfseries %s}\\\\\n%s\\par\\smallskip\n", title.data,
                              summary.data));
    for (uint32_t op = 0; sheet->sig != NULL && op < sheet->sig->count; op++) {
        IDSI_TRY(idsi_text_printf(out, "%s\\begin{tikzpicture}[tree,baseline=-2.5pt]\n",
                                  op > 0 ? "\\qquad\n" : ""));
        IDSI_TRY(put_mark(out, op, 0, 0));
        IDSI_TRY(idsi_text_puts(out, "\\end{tikzpicture}~"));
        IDSI_TRY(put_declaration(sheet, op));
    }
    IDSI_TRY(idsi_text_puts(out,
                            "\\par\\bigskip\n"
                            "\\setlength{\\lineskip}{15pt}\\setlength{\\lineskiplimit}{15pt}%\n"));
    IDSI_TRY(idsi_sheet_pour(sheet));
done:
    idsi_text_clear(&title);
    idsi_text_clear(&summary);
    return st;
}

ids_status idsi_draw_tikz(idsi_sheet *sheet)
{
    ids_status st = IDS_OK;
    int32_t width = 0;

    IDSI_TRY(put_head(sheet));
    IDSI_TRY(find_cell_width(sheet, &width));
    for (uint64_t i = 0; i < sheet->count; i++) {
        IDSI_TRY(idsi_sheet_fetch(sheet, i));
        arrange(sheet);
        IDSI_TRY(put_cell(sheet, width));
    }
    IDSI_TRY(idsi_text_puts(&sheet->out, "\\par\\endgroup\\bigskip\n"));
    IDSI_TRY(idsi_sheet_pour(sheet));
done:
    return st;
}
