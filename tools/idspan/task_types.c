/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan types: the association types of one or more degrees.
 *
 * The library gives 0 for a number beyond 64 bits. The number of monomials is then worked out
 * here from the automorphism order; an order beyond 64 bits leaves both cells empty.
 */
#include <string.h>

#include "tool.h"

enum { DEGREE, INDEX, TYPE, AUTOMORPHISMS, MONOMIALS, COLUMNS };

typedef struct sums {
    uint64_t types;
    decimal monomials;
    bool complete; /* no number was missing */
} sums;

static ids_status write_type(session *s, const ids_types *types, uint32_t degree, uint64_t index,
                             ids_writer *writer, sums *total)
{
    ids_status st = IDS_OK;
    ids_type_info info = {0};
    char *text = NULL;
    char monomials[DECIMAL_CHARS] = "";
    const char *cells[COLUMNS] = {0};
    digits degree_cell = digits_of(degree);
    digits index_cell = digits_of(index);
    digits order_cell = {{0}};
    decimal number;

    TRY(ids_types_info(types, degree, index, &info));
    TRY(ids_types_print(s->ctx, types, degree, index, &text));
    if (info.automorphisms > 0) {
        order_cell = digits_of(info.automorphisms);
        decimal_factorial_over(&number, degree, info.automorphisms);
        decimal_print(&number, monomials);
        decimal_add(&total->monomials, &number);
    } else {
        total->complete = false;
    }
    total->types++;
    cells[DEGREE] = degree_cell.text;
    cells[INDEX] = index_cell.text;
    cells[TYPE] = text;
    cells[AUTOMORPHISMS] = order_cell.text;
    cells[MONOMIALS] = monomials;
    TRY(ids_writer_row(writer, cells));
done:
    ids_string_free(s->ctx, text);
    return st;
}

static ids_status write_verdict(session *s, const sums *total)
{
    const settings *set = s->set;
    char monomials[DECIMAL_CHARS] = "";
    char degrees[64] = "";

    if (set->first_degree == set->last_degree) {
        snprintf(degrees, sizeof degrees, "Degree %u", (unsigned)set->first_degree);
    } else {
        snprintf(degrees, sizeof degrees, "Degrees %u to %u", (unsigned)set->first_degree,
                 (unsigned)set->last_degree);
    }
    if (total->types == 0) {
        return output_printf(&s->out,
                             "%s: no product of these operations has that many "
                             "arguments.\n",
                             degrees);
    }
    decimal_print(&total->monomials, monomials);
    return output_printf(&s->out, "%s: %s association type%s, %s%s multilinear monomial%s.\n",
                         degrees, digits_of(total->types).text, total->types == 1 ? "" : "s",
                         total->complete ? "" : "more than ", monomials,
                         decimal_is_one(&total->monomials) ? "" : "s");
}

static ids_status run(session *s)
{
    const settings *set = s->set;
    ids_status st = IDS_OK;
    ids_types *types = NULL;
    ids_writer *writer = NULL;
    uint64_t most = 0;
    sums total = {.complete = true};
    ids_column columns[COLUMNS] = {
        [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
        [INDEX] = {"index", IDS_COLUMN_NUMBER, 0},
        [TYPE] = {"type", IDS_COLUMN_MATH, 0},
        [AUTOMORPHISMS] = {"automorphisms", IDS_COLUMN_NUMBER, 0},
        [MONOMIALS] = {"monomials", IDS_COLUMN_NUMBER, 0},
    };

    TRY(ids_types_create(s->ctx, ids_presentation_signature(s->pres), set->last_degree, &types));
    for (uint32_t degree = set->first_degree; degree <= set->last_degree; degree++) {
        uint64_t count = ids_types_count(types, degree);
        most = count > most ? count : most;
    }
    columns[INDEX].width = digits_count(most > 0 ? most - 1 : 0);
    if (set->format == IDS_FORMAT_TEXT && most == 0) {
        st = write_verdict(s, &total);
        goto done;
    }
    TRY(ids_writer_create(s->ctx, set->format, "types", columns, COLUMNS, output_sink, &s->out,
                          &writer));
    for (uint32_t degree = set->first_degree; degree <= set->last_degree; degree++) {
        uint64_t count = ids_types_count(types, degree);
        for (uint64_t index = 0; index < count; index++) {
            TRY(session_poll());
            TRY(write_type(s, types, degree, index, writer, &total));
        }
    }
    TRY(ids_writer_end(writer));
    if (set->format == IDS_FORMAT_TEXT) {
        TRY(output_printf(&s->out, "\n"));
        TRY(write_verdict(s, &total));
    }
done:
    ids_writer_free(writer);
    ids_types_free(types);
    return st;
}

const task task_types = {
    .name = "types",
    .usage = " --degree N | --degrees A..B",
    .summary = "list association types: how the arguments can be bracketed",
    .details =
        "Lists the association types: the monomials with their labels forgotten, up to the\n"
        "symmetries of the operations. For each, the order of its group of automorphisms and\n"
        "the number of multilinear monomials that have this type, degree! / automorphisms.\n"
        "Indices count from 0, as in the library. The two numbers are left empty when the\n"
        "order is beyond 64 bits. A degree without types has no rows.\n"
        "\n"
        "Columns: degree,index,type,automorphisms,monomials",
    .examples = "  idspan types pair.pres --degree 4\n"
                "  idspan types pair.pres --degrees 1..6 --format csv --output types.csv",
    .options = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES),
    .wanted = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES),
    .run = run,
};
