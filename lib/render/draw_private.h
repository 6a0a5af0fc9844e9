/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files that draw trees share: the trees of a sheet, their layout, the marks of the
 * operations, and the sheet that is being written.
 */
#ifndef IDSI_DRAW_PRIVATE_H
#define IDSI_DRAW_PRIVATE_H

#include <idspan/draw.h>
#include <idspan/identity.h>

#include "../tree/automorphism_private.h"
#include "../tree/tree_private.h"
#include "render_private.h"

/* ---- layout (draw_layout.c) --------------------------------------------------------------- */

/*
 * Places of the nodes of one tree, by token. A node is `width` units wide around x (the middle
 * one of them, the left middle one when there are two). Subtrees keep `gap` from the middle of
 * things: the right end of one and the left end of the next differ by at least `gap`.
 */
typedef struct idsi_layout {
    int32_t width[IDSI_MAX_TOKENS]; /* in */
    int32_t gap;                    /* in */
    bool ruled; /* in: a node's rule reaches over its arguments, so it needs their width; spans
                   are even, and wider than the node */
    int32_t x[IDSI_MAX_TOKENS];      /* out: from 0 for the leftmost unit */
    uint8_t depth[IDSI_MAX_TOKENS];  /* out: 0 for the root */
    uint8_t parent[IDSI_MAX_TOKENS]; /* out: token number; the root's is 0 */
    int32_t total;    /* out: units from the leftmost to the rightmost, both counted */
    uint32_t deepest; /* out */
    /* Ends of each subtree by depth below its root, relative to the root's x. */
    int32_t left[IDSI_MAX_TOKENS][IDS_MAX_DEGREE];
    int32_t right[IDSI_MAX_TOKENS][IDS_MAX_DEGREE];
    uint8_t height[IDSI_MAX_TOKENS];
    int32_t offset[IDSI_MAX_TOKENS]; /* x minus the parent's x */
} idsi_layout;

/* Fills the out members from the in members. */
void idsi_layout_tree(const ids_signature *sig, const idsi_token *tokens, size_t length,
                      idsi_layout *layout);

/* ---- the trees of a sheet (draw.c) -------------------------------------------------------- */

typedef struct idsi_tree_picture {
    uint64_t index;
    uint32_t length;
    idsi_token tokens[IDSI_MAX_TOKENS]; /* leaves of a type have label 0 */
    idsi_text notation;
    idsi_text structure;              /* empty for a monomial */
    char order[IDSI_ORDER_CHARS];     /* the same */
    char monomials[IDSI_ORDER_CHARS]; /* the same */
} idsi_tree_picture;

typedef struct idsi_sheet {
    ids_ctx *ctx;
    const ids_types *types;   /* NULL when monomials are drawn */
    const ids_basis *basis;   /* NULL when types are drawn */
    const ids_signature *sig; /* NULL for an empty basis */
    uint32_t degree;          /* 0 for an empty basis */
    uint64_t all;             /* trees of the degree */
    uint64_t first;
    uint64_t count;
    uint32_t width; /* 0: the usual one */
    ids_sink_fn sink;
    void *sink_user;
    idsi_tree_picture tree; /* the one that was fetched last */
    idsi_layout *layout;
    idsi_text out; /* what goes to the sink next */
} idsi_sheet;

/* Fetches tree number 0 .. count-1 into sheet->tree; polls for cancelling. */
ids_status idsi_sheet_fetch(idsi_sheet *sheet, uint64_t number);
/* Hands sheet->out to the sink and empties it. */
ids_status idsi_sheet_pour(idsi_sheet *sheet);
/* "Association types of degree 4", "2 types, 15 monomials". */
ids_status idsi_sheet_heading(idsi_sheet *sheet, idsi_text *title, idsi_text *summary);
/* "S2 wr S2, order 8" and "3 monomials" of the tree that was fetched. */
ids_status idsi_sheet_group_line(const idsi_sheet *sheet, idsi_text *line);
const char *idsi_sheet_monomials_word(const idsi_sheet *sheet);
/*
 * Where to break a text that is too long for `width` columns: the number of bytes for the next
 * line, if possible up to a comma or a closing fence.
 */
size_t idsi_line_break(const char *text, size_t width);

/* ---- marks of the operations (draw_mark.c) ------------------------------------------------ */

typedef enum idsi_fill { IDSI_FILL_SOLID = 0, IDSI_FILL_OPEN, IDSI_FILL_DOTTED } idsi_fill;

typedef struct idsi_mark {
    uint32_t corners;     /* 0: a circle of `radius` */
    int32_t corner[4][2]; /* tenths of a unit, from the middle, y downwards */
    int32_t radius;       /* tenths of a unit */
    idsi_fill fill;
    uint32_t number; /* 0, or a number to write inside */
} idsi_mark;

idsi_mark idsi_mark_of(uint32_t op);

/* ---- the formats -------------------------------------------------------------------------- */

ids_status idsi_draw_text(idsi_sheet *sheet, bool ascii);
ids_status idsi_draw_svg(idsi_sheet *sheet);
ids_status idsi_draw_tikz(idsi_sheet *sheet);

#endif
