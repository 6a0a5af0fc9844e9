/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan draw: association types or monomials as trees.
 *
 * The library draws; here the part of the list is chosen, and a sheet that is too large is
 * refused with what to do about it.
 */
#include <idspan/draw.h>

#include "tool.h"

/* In the order of ids_picture. */
static const char *const formats[] = {"text", "ascii", "svg", "tikz", NULL};

/* Which trees of `all`: --index, or --from and --count. */
static ids_status choose_part(session *s, uint64_t all, const char *things, uint64_t *first,
                              uint64_t *count)
{
    const settings *set = s->set;
    bool one = (set->seen & BIT(OPTION_INDEX)) != 0;

    *first = one ? set->index : set->from;
    *count = one ? 1 : set->count;
    if (one && (set->seen & (BIT(OPTION_FROM) | BIT(OPTION_COUNT))) != 0) {
        return session_fail(s, IDS_ERR_ARG,
                            "--index draws one tree; --from and --count have no "
                            "place beside it");
    }
    if (*first > 0 && *first >= all) {
        return session_fail(s, IDS_ERR_ARG, "--%s %s: degree %u has %s %s; indices count from 0",
                            one ? "index" : "from", digits_of(*first).text,
                            (unsigned)set->last_degree, digits_of(all).text, things);
    }
    if (all - *first < *count) {
        *count = all - *first;
    }
    if (*count > IDS_MAX_PICTURES) {
        return session_fail(s, IDS_ERR_LIMIT,
                            "degree %u has %s %s, and a sheet holds at most %u; choose some with "
                            "--index or with --from and --count",
                            (unsigned)set->last_degree, digits_of(all).text, things,
                            IDS_MAX_PICTURES);
    }
    return IDS_OK;
}

static ids_status run(session *s)
{
    const settings *set = s->set;
    ids_draw_options options = {.struct_size = sizeof options, .picture = (ids_picture)set->format};
    bool monomials = (set->seen & BIT(OPTION_MONOMIALS)) != 0;
    ids_status st = IDS_OK;
    ids_types *types = NULL;
    ids_basis *basis = NULL;
    uint64_t first = 0;
    uint64_t count = 0;

    TRY(ids_types_create(s->ctx, ids_presentation_signature(s->pres), set->last_degree, &types));
    if (monomials) {
        TRY(ids_basis_create(s->ctx, types, set->last_degree, &basis));
        TRY(choose_part(s, ids_basis_size(basis), "monomials", &first, &count));
        st = ids_basis_draw(s->ctx, basis, first, count, &options, output_sink, &s->out);
    } else {
        TRY(choose_part(s, ids_types_count(types, set->last_degree), "types", &first, &count));
        st = ids_types_draw(s->ctx, types, set->last_degree, first, count, &options, output_sink,
                            &s->out);
    }
done:
    ids_basis_free(basis);
    ids_types_free(types);
    return st;
}

const task task_draw = {
    .name = "draw",
    .usage = " --degree N [--monomials]\n"
             "          [--index I | [--from I] [--count K]]",
    .summary = "draw association types or monomials as trees",
    .details =
        "Draws the association types of a degree as trees, on one sheet, each with its index,\n"
        "its notation, the structure and order of its group of automorphisms, and the number of\n"
        "its multilinear monomials. The structure is written with S3 for all permutations of\n"
        "three arguments, x for direct and wr for wreath products: S2 wr S3. With --monomials\n"
        "the multilinear monomials are drawn, with their labels.\n"
        "\n"
        "Formats: text (the default) for a terminal, ascii for one without line characters,\n"
        "svg for a browser, light or dark, tikz for \\input into a LaTeX document that uses the\n"
        "package tikz. Operations differ by the shape of their nodes, in text by their symbols.",
    .examples = "  idspan draw pair.pres --degree 6\n"
                "  idspan draw pair.pres --degree 6 --format svg --output types.svg\n"
                "  idspan draw pair.pres --degree 4 --monomials --index 7 --format tikz",
    .options = BIT(OPTION_DEGREE) | BIT(OPTION_INDEX) | BIT(OPTION_MONOMIALS) | BIT(OPTION_FROM) |
               BIT(OPTION_COUNT),
    .wanted = BIT(OPTION_DEGREE),
    .formats = formats,
    .run = run,
};
