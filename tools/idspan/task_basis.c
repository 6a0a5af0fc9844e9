/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan basis: the canonical multilinear monomials of a degree, or a part of them.
 *
 * The library numbers them by arithmetic, so a part from the middle costs no more than one from
 * the beginning, and nothing is kept.
 */
#include "tool.h"

enum { DEGREE, INDEX, MONOMIAL, COLUMNS };

static ids_status write_monomial(session *s, const ids_basis *basis, uint64_t index,
                                 ids_writer *writer)
{
    ids_status st = IDS_OK;
    ids_mono *mono = NULL;
    char *text = NULL;
    const char *cells[COLUMNS] = {0};
    digits degree_cell = digits_of(s->set->first_degree);
    digits index_cell = digits_of(index);

    TRY(ids_basis_unrank(s->ctx, basis, index, &mono));
    TRY(ids_mono_print(s->ctx, mono, &text));
    cells[DEGREE] = degree_cell.text;
    cells[INDEX] = index_cell.text;
    cells[MONOMIAL] = text;
    TRY(ids_writer_row(writer, cells));
done:
    ids_string_free(s->ctx, text);
    ids_mono_free(mono);
    return st;
}

static void report_progress(const settings *set, uint64_t done, uint64_t total)
{
    ids_progress progress = {.stage = "monomials", .degree = set->first_degree};

    /* Showing a line costs more than a monomial. */
    if (done % 65536 == 65535) {
        progress.done = done;
        progress.total = total;
        progress.share = (double)done / (double)total;
        progress_hook(NULL, &progress);
    }
}

static ids_status write_verdict(session *s, uint64_t size, uint64_t count)
{
    unsigned degree = s->set->first_degree;

    if (size == 0) {
        return output_printf(&s->out,
                             "Degree %u has no monomials: no product of these "
                             "operations has %u arguments.\n",
                             degree, degree);
    }
    if (count == size) {
        return output_printf(&s->out, "Degree %u has %s multilinear monomial%s.\n", degree,
                             digits_of(size).text, size == 1 ? "" : "s");
    }
    return output_printf(&s->out, "%s of the %s multilinear monomials of degree %u.\n",
                         digits_of(count).text, digits_of(size).text, degree);
}

static ids_status run(session *s)
{
    const settings *set = s->set;
    ids_status st = IDS_OK;
    ids_types *types = NULL;
    ids_basis *basis = NULL;
    ids_writer *writer = NULL;
    uint64_t size = 0;
    uint64_t count = 0;
    ids_column columns[COLUMNS] = {
        [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
        [INDEX] = {"index", IDS_COLUMN_NUMBER, 0},
        [MONOMIAL] = {"monomial", IDS_COLUMN_MATH, 0},
    };

    TRY(ids_types_create(s->ctx, ids_presentation_signature(s->pres), set->last_degree, &types));
    TRY(ids_basis_create(s->ctx, types, set->last_degree, &basis));
    size = ids_basis_size(basis);
    if (set->from > 0 && set->from >= size) {
        st = session_fail(s, IDS_ERR_ARG,
                          "--from %s: degree %u has %s monomials; indices count "
                          "from 0",
                          digits_of(set->from).text, (unsigned)set->last_degree,
                          digits_of(size).text);
        goto done;
    }
    count = size - set->from < set->count ? size - set->from : set->count;
    columns[INDEX].width = digits_count(set->from + count);
    if (set->format == IDS_FORMAT_TEXT && count == 0) {
        st = write_verdict(s, size, count);
        goto done;
    }
    TRY(ids_writer_create(s->ctx, set->format, "basis", columns, COLUMNS, output_sink, &s->out,
                          &writer));
    for (uint64_t i = 0; i < count; i++) {
        TRY(session_poll());
        TRY(write_monomial(s, basis, set->from + i, writer));
        report_progress(set, i, count);
    }
    TRY(ids_writer_end(writer));
    if (set->format == IDS_FORMAT_TEXT) {
        TRY(output_printf(&s->out, "\n"));
        TRY(write_verdict(s, size, count));
    }
done:
    ids_writer_free(writer);
    ids_basis_free(basis);
    ids_types_free(types);
    return st;
}

const task task_basis = {
    .name = "basis",
    .usage = " --degree N [--from I] [--count K]",
    .summary = "list the multilinear monomials of a degree",
    .details =
        "Lists the canonical multilinear monomials of a degree: every label once, one monomial\n"
        "for each class under the symmetries of the operations. Indices count from 0, as in the\n"
        "library, and do not depend on the part that is listed; they go to 2^64 - 1. The\n"
        "identities of the presentation play no part here.\n"
        "\n"
        "Columns: degree,index,monomial",
    .examples = "  idspan basis pair.pres --degree 4\n"
                "  idspan basis pair.pres --degree 12 --from 1000000 --count 20",
    .options = BIT(OPTION_DEGREE) | BIT(OPTION_FROM) | BIT(OPTION_COUNT),
    .wanted = BIT(OPTION_DEGREE),
    .run = run,
};
