/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Sheets of trees: what is drawn, in words; the formats have their own files.
 *
 * A format fetches the trees one after the other, twice: once to measure, once to draw. Only a
 * few bytes of each tree are kept between the passes. All output is composed in `out` and poured
 * into the sink tree by tree, so memory does not grow with the drawing.
 */
#include <inttypes.h>
#include <string.h>

#include "draw_private.h"

/* ---- trees -------------------------------------------------------------------------------- */

/* Writes the prefix code of a type with label 0 for every leaf. */
static void spell_type(const ids_types *types, uint32_t root, idsi_tree_picture *tree)
{
    uint32_t stack[IDSI_MAX_TOKENS] = {root};
    size_t height = 1;

    tree->length = 0;
    while (height > 0) {
        uint32_t type = stack[--height];
        const idsi_type *entry = &types->list[type];
        if (type == 0) {
            tree->tokens[tree->length++] = 0;
            continue;
        }
        tree->tokens[tree->length++] = idsi_node(entry->op);
        for (uint32_t i = types->sig->ops[entry->op].arity; i-- > 0;) {
            stack[height++] = types->children[entry->children + i];
        }
    }
}

static ids_status fetch_type(idsi_sheet *sheet)
{
    ids_status st = IDS_OK;
    idsi_tree_picture *tree = &sheet->tree;
    ids_automorphisms *group = NULL;

    spell_type(sheet->types, sheet->types->first[sheet->degree] + (uint32_t)tree->index, tree);
    IDSI_TRY(
        ids_automorphisms_create(sheet->ctx, sheet->types, sheet->degree, tree->index, &group));
    idsi_automorphisms_digits(group, tree->order, tree->monomials);
    IDSI_TRY(idsi_text_puts(&tree->structure, ids_automorphisms_structure(group)));
done:
    ids_automorphisms_free(group);
    return st;
}

static ids_status fetch_monomial(idsi_sheet *sheet)
{
    ids_status st = IDS_OK;
    ids_mono *mono = NULL;

    IDSI_TRY(ids_basis_unrank(sheet->ctx, sheet->basis, sheet->tree.index, &mono));
    sheet->tree.length = mono->length;
    memcpy(sheet->tree.tokens, mono->tokens, mono->length * sizeof *mono->tokens);
done:
    ids_mono_free(mono);
    return st;
}

ids_status idsi_sheet_fetch(idsi_sheet *sheet, uint64_t number)
{
    ids_status st = IDS_OK;
    idsi_tree_picture *tree = &sheet->tree;

    IDSI_TRY(idsi_poll(sheet->ctx, NULL));
    tree->index = sheet->first + number;
    tree->notation.length = 0;
    tree->structure.length = 0;
    IDSI_TRY(sheet->types != NULL ? fetch_type(sheet) : fetch_monomial(sheet));
    IDSI_TRY(idsi_tree_print(sheet->sig, tree->tokens, NULL, &tree->notation));
done:
    return st;
}

/* ---- words -------------------------------------------------------------------------------- */

/* Number of monomials of all types of the degree; 0 when it is beyond 64 bits. */
static uint64_t total_monomials(const idsi_sheet *sheet)
{
    uint64_t total = 0;
    for (uint64_t i = 0; i < sheet->all; i++) {
        uint64_t of_type = sheet->types->list[sheet->types->first[sheet->degree] + i].monomials;
        if (of_type == 0 || !idsi_add_u64(total, of_type, &total)) {
            return 0;
        }
    }
    return total;
}

ids_status idsi_sheet_heading(idsi_sheet *sheet, idsi_text *title, idsi_text *summary)
{
    ids_status st = IDS_OK;
    bool types = sheet->types != NULL;
    const char *things = types ? "type" : "monomial";
    const char *plural = sheet->all == 1 ? "" : "s";

    IDSI_TRY(idsi_text_puts(title, types ? "Association types" : "Multilinear monomials"));
    if (sheet->degree > 0) {
        IDSI_TRY(idsi_text_printf(title, " of degree %u", sheet->degree));
    }
    if (sheet->all == 0) {
        return idsi_text_printf(summary, "no products have that many arguments");
    }
    if (sheet->count < sheet->all) {
        return idsi_text_printf(summary, "%" PRIu64 " of %" PRIu64 " %s%s", sheet->count,
                                sheet->all, things, plural);
    }
    IDSI_TRY(idsi_text_printf(summary, "%" PRIu64 " %s%s", sheet->all, things, plural));
    uint64_t monomials = types ? total_monomials(sheet) : 0;
    if (monomials > 0) {
        IDSI_TRY(idsi_text_printf(summary, ", %" PRIu64 " multilinear monomial%s", monomials,
                                  monomials == 1 ? "" : "s"));
    }
done:
    return st;
}

ids_status idsi_sheet_group_line(const idsi_sheet *sheet, idsi_text *line)
{
    const idsi_tree_picture *tree = &sheet->tree;
    if (strcmp(tree->order, "1") == 0) {
        return idsi_text_puts(line, "order 1");
    }
    return idsi_text_printf(line, "%s, order %s", tree->structure.data, tree->order);
}

const char *idsi_sheet_monomials_word(const idsi_sheet *sheet)
{
    return strcmp(sheet->tree.monomials, "1") == 0 ? "monomial" : "monomials";
}

size_t idsi_line_break(const char *text, size_t width)
{
    const char *at = text;
    size_t columns = 0;
    size_t hard = 0;
    size_t soft = 0;

    while (*at != '\0') {
        char before[8] = "";
        const char *next = at;
        (void)idsi_utf8_next(&next);
        memcpy(before, at, (size_t)(next - at));
        size_t wide = idsi_utf8_width(before);
        if (columns + wide > width && hard > 0) {
            break;
        }
        columns += wide;
        hard = (size_t)(next - text);
        if (strchr(",)]}>", *at) != NULL) {
            soft = hard;
        }
        at = next;
    }
    if (*at == '\0') {
        return hard;
    }
    /* A soft break that leaves most of the line empty is no gain. */
    return 2 * soft >= hard ? soft : hard;
}

ids_status idsi_sheet_pour(idsi_sheet *sheet)
{
    size_t length = sheet->out.length;

    sheet->out.length = 0;
    if (length > 0 && sheet->sink(sheet->sink_user, sheet->out.data, length) != 0) {
        return idsi_fail(sheet->ctx, IDS_ERR_IO, "the drawing could not be written");
    }
    return IDS_OK;
}

/* ---- the public calls --------------------------------------------------------------------- */

static ids_status draw(idsi_sheet *sheet, uint64_t count, const ids_draw_options *options)
{
    ids_status st = IDS_OK;
    ids_picture picture = options == NULL ? IDS_PICTURE_TEXT : options->picture;

    if (options != NULL) {
        st = idsi_check_struct(sheet->ctx, "ids_draw_options", options->struct_size,
                               sizeof *options);
        if (st != IDS_OK) {
            return st;
        }
    }
    if ((unsigned)picture > IDS_PICTURE_TIKZ) {
        return idsi_fail(sheet->ctx, IDS_ERR_ARG, "there is no kind of picture number %u",
                         (unsigned)picture);
    }
    if (sheet->first > sheet->all || (sheet->first == sheet->all && sheet->all > 0)) {
        return idsi_fail(sheet->ctx, IDS_ERR_ARG,
                         "there is no tree of index %" PRIu64 ": the indices go from 0 to %" PRIu64,
                         sheet->first, sheet->all > 0 ? sheet->all - 1 : 0);
    }
    sheet->count = sheet->all - sheet->first < count ? sheet->all - sheet->first : count;
    sheet->width = options == NULL ? 0 : options->width;
    if (sheet->count > IDS_MAX_PICTURES) {
        return idsi_fail(sheet->ctx, IDS_ERR_LIMIT,
                         "%" PRIu64
                         " trees do not fit on one sheet, at most %u; draw a part of them",
                         sheet->count, IDS_MAX_PICTURES);
    }
    idsi_text_init(&sheet->out, sheet->ctx);
    idsi_text_init(&sheet->tree.notation, sheet->ctx);
    idsi_text_init(&sheet->tree.structure, sheet->ctx);
    IDSI_TRY(idsi_alloc_array(sheet->ctx, 1, sizeof *sheet->layout, &sheet->layout));
    switch (picture) {
    case IDS_PICTURE_TEXT:
    case IDS_PICTURE_ASCII:
        IDSI_TRY(idsi_draw_text(sheet, picture == IDS_PICTURE_ASCII));
        break;
    case IDS_PICTURE_SVG:
        IDSI_TRY(idsi_draw_svg(sheet));
        break;
    case IDS_PICTURE_TIKZ:
        IDSI_TRY(idsi_draw_tikz(sheet));
        break;
    }
done:
    idsi_free(sheet->ctx, sheet->layout);
    idsi_text_clear(&sheet->tree.notation);
    idsi_text_clear(&sheet->tree.structure);
    idsi_text_clear(&sheet->out);
    return st;
}

ids_status ids_types_draw(ids_ctx *ctx, const ids_types *types, uint32_t degree, uint64_t first,
                          uint64_t count, const ids_draw_options *options, ids_sink_fn sink,
                          void *sink_user)
{
    idsi_sheet sheet = {.ctx = ctx,
                        .types = types,
                        .degree = degree,
                        .first = first,
                        .sink = sink,
                        .sink_user = sink_user};

    if (ctx == NULL || types == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, types or sink");
    }
    ids_status st = idsi_types_check_degree(ctx, types, degree);
    if (st != IDS_OK) {
        return st;
    }
    sheet.sig = types->sig;
    sheet.all = ids_types_count(types, degree);
    return draw(&sheet, count, options);
}

ids_status ids_basis_draw(ids_ctx *ctx, const ids_basis *basis, uint64_t first, uint64_t count,
                          const ids_draw_options *options, ids_sink_fn sink, void *sink_user)
{
    ids_status st = IDS_OK;
    ids_mono *mono = NULL;
    uint64_t begin = 0;
    idsi_sheet sheet = {
        .ctx = ctx, .basis = basis, .first = first, .sink = sink, .sink_user = sink_user};

    if (ctx == NULL || basis == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, basis or sink");
    }
    if (ids_basis_part(basis, 0, 1, &begin, &sheet.all) == IDS_ERR_LIMIT) {
        return idsi_fail(ctx, IDS_ERR_LIMIT,
                         "the monomials of this degree are too many for indices of 64 bits; their "
                         "association types can be drawn");
    }
    if (sheet.all > 0) {
        IDSI_TRY(ids_basis_unrank(ctx, basis, 0, &mono));
        sheet.sig = mono->sig;
        sheet.degree = mono->degree;
    }
    IDSI_TRY(draw(&sheet, count, options));
done:
    ids_mono_free(mono);
    return st;
}
