/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file draw.h
 * Association types and monomials as trees: SVG, TikZ, and text for a terminal.
 *
 * A sheet shows any number of trees in columns, each with its caption, below a heading and a
 * legend of the operations. The root is at the top and the arguments stand from left to right.
 * Operations are told apart by the shape of their nodes (by their symbols in text), so that
 * nothing depends on colour.
 */
#ifndef IDSPAN_DRAW_H
#define IDSPAN_DRAW_H

#include <idspan/render.h>
#include <idspan/basis.h>

#ifdef __cplusplus
extern "C" {
#endif

/** Most trees on one sheet. */
#define IDS_MAX_PICTURES 100000u

/** How a sheet is drawn. */
typedef enum ids_picture {
    IDS_PICTURE_TEXT = 0,  /**< UTF-8 with box drawing characters */
    IDS_PICTURE_ASCII = 1, /**< the same with ASCII characters for the lines */
    IDS_PICTURE_SVG = 2,   /**< SVG 1.1, for light and dark surroundings */
    IDS_PICTURE_TIKZ = 3   /**< LaTeX to be read with \\input; needs the package tikz only */
} ids_picture;

/** Options of a sheet; set struct_size to sizeof(ids_draw_options), the rest to 0. */
typedef struct ids_draw_options {
    size_t struct_size;  /**< sizeof(ids_draw_options) */
    ids_picture picture; /**< how it is drawn */
    uint32_t width;      /**< of the sheet: columns of text, 0 for 80; or CSS pixels of SVG, 0 for
                              the shape of a page. One wide tree can make it wider. TikZ fills
                              the lines of the document. */
} ids_draw_options;

/**
 * Draws association types, each captioned with index, notation, structure and order of its
 * automorphism group, and number of monomials.
 *
 * @param ctx        borrowed.
 * @param types      borrowed.
 * @param degree     1 .. max_degree of types; a degree without types gives a sheet that says so.
 * @param first      index of the first type to draw.
 * @param count      how many; fewer when the list ends before.
 * @param options    borrowed; NULL for text, 80 columns wide.
 * @param sink       receives the sheet tree by tree; called from this thread.
 * @param sink_user  passed to `sink`; borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degree or first out of range, unknown options
 *         IDS_ERR_LIMIT      more than IDS_MAX_PICTURES trees; byte budget
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_IO         the sink refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: two passes over the trees; a few bytes of memory for each, and the text of one (of one row
 * in text).
 * Threads: one a ctx. Cancel: polled at every tree. Border: none.
 * Source: tidy layout by contours, Reingold and Tilford, IEEE Trans. Software Eng. 7 (1981); inner
 * subtrees halfway between their two extreme places.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_types_draw(ids_ctx *ctx, const ids_types *types,
                                               uint32_t degree, uint64_t first, uint64_t count,
                                               const ids_draw_options *options, ids_sink_fn sink,
                                               void *sink_user);

/**
 * Draws multilinear monomials with their labels, each captioned with index and notation.
 *
 * @param ctx        borrowed.
 * @param basis      borrowed; an empty one gives a sheet that says so.
 * @param first      index of the first monomial to draw. Everything else is as for
 *                   ids_types_draw().
 * @param count      how many; fewer when the basis ends before.
 * @param options    borrowed; NULL for text, 80 columns wide.
 * @param sink       receives the sheet tree by tree; called from this thread.
 * @param sink_user  passed to `sink`; borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, first out of range, unknown options
 *         IDS_ERR_LIMIT      more than IDS_MAX_PICTURES trees; a basis of more than 2^64-1
 *                            monomials; byte budget
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_IO         the sink refused
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: as ids_types_draw(). Threads: one a ctx. Cancel: polled at every tree. Border: none.
 * Source: as ids_types_draw(). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_basis_draw(ids_ctx *ctx, const ids_basis *basis, uint64_t first,
                                               uint64_t count, const ids_draw_options *options,
                                               ids_sink_fn sink, void *sink_user);

#ifdef __cplusplus
}
#endif

#endif
