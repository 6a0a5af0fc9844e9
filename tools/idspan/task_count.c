/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan count: exact numbers of association types and multilinear monomials, in any degree.
 *
 * With --split each degree has a row for each way to use the operations, and a column for each
 * operation, headed as the operation is written.
 */
#include <stdlib.h>
#include <string.h>

#include <idspan/gmp.h>

#include "tool.h"

/* Most digits that the closing sentence writes out. */
#define SENTENCE_DIGITS 60u

/* A number and room for its digits. */
typedef struct big {
    mpz_t value;
    char *text;
    size_t capacity;
} big;

typedef struct counting {
    session *s;
    ids_writer *writer;
    size_t operations; /* columns of operations: 0 without --split */
    big types;
    big monomials;
    mpz_t all_types;
    mpz_t all_monomials;
} counting;

static ids_status write_digits(big *number)
{
    size_t need = mpz_sizeinbase(number->value, 10) + 2;

    if (need > number->capacity) {
        char *text = realloc(number->text, need);

        if (text == NULL) {
            return IDS_ERR_NOMEM;
        }
        number->text = text;
        number->capacity = need;
    }
    (void)mpz_get_str(number->text, 10, number->value);
    return IDS_OK;
}

/* Writes a row with the numbers of c->types and c->monomials, and adds them up. */
static ids_status write_row(counting *c, uint32_t degree, const uint32_t *uses)
{
    ids_status st = IDS_OK;
    const char *cells[IDS_MAX_OPERATIONS + 3] = {0};
    digits use_cells[IDS_MAX_OPERATIONS];
    digits degree_cell = digits_of(degree);
    size_t at = 0;

    TRY(session_poll());
    TRY(write_digits(&c->types));
    TRY(write_digits(&c->monomials));
    cells[at++] = degree_cell.text;
    for (size_t i = 0; uses != NULL && i < c->operations; i++) {
        use_cells[i] = digits_of(uses[i]);
        cells[at++] = use_cells[i].text;
    }
    cells[at++] = c->types.text;
    cells[at] = c->monomials.text;
    TRY(ids_writer_row(c->writer, cells));
    mpz_add(c->all_types, c->all_types, c->types.value);
    mpz_add(c->all_monomials, c->all_monomials, c->monomials.value);
done:
    return st;
}

static ids_status write_degrees(counting *c, const ids_signature *signature)
{
    const settings *set = c->s->set;
    ids_counts *counts = NULL;
    ids_status st = IDS_OK;

    TRY(ids_counts_create(c->s->ctx, signature, set->last_degree, &counts));
    for (uint32_t degree = set->first_degree; degree <= set->last_degree; degree++) {
        TRY(ids_counts_types(counts, degree, c->types.value));
        TRY(ids_counts_monomials(counts, degree, c->monomials.value));
        TRY(write_row(c, degree, NULL));
    }
done:
    ids_counts_free(counts);
    return st;
}

static ids_status write_split(counting *c, const ids_signature *signature, uint32_t degree)
{
    uint32_t uses[IDS_MAX_OPERATIONS] = {0};
    ids_count_split *split = NULL;
    ids_status st = IDS_OK;

    TRY(ids_count_split_create(c->s->ctx, signature, degree, &split));
    for (uint64_t row = 0; row < ids_count_split_rows(split); row++) {
        TRY(ids_count_split_uses(split, row, uses, IDS_MAX_OPERATIONS));
        TRY(ids_count_split_types(split, row, c->types.value));
        TRY(ids_count_split_monomials(split, row, c->monomials.value));
        TRY(write_row(c, degree, uses));
    }
done:
    ids_count_split_free(split);
    return st;
}

/* The operation as it is written, its symmetry left away; ids_string_free(). */
static ids_status name_operation(session *s, size_t index, char **name)
{
    static const char *const symmetries[] = {" commutative", " alternating"};
    ids_status st =
        ids_signature_print_operation(s->ctx, ids_presentation_signature(s->pres), index, name);
    char *equation = st == IDS_OK ? strstr(*name, " = ") : NULL;

    if (equation != NULL) {
        *equation = '\0';
    }
    for (size_t i = 0; st == IDS_OK && i < 2; i++) {
        size_t length = strlen(*name);
        size_t tail = strlen(symmetries[i]);

        if (length > tail && strcmp(*name + length - tail, symmetries[i]) == 0) {
            (*name)[length - tail] = '\0';
        }
    }
    return st;
}

/* "23 association types", or how many digits a huge number has. */
static ids_status write_amount(counting *c, mpz_t number, const char *noun)
{
    const char *plural = mpz_cmp_ui(number, 1) == 0 ? "" : "s";
    ids_status st = IDS_OK;

    mpz_set(c->types.value, number);
    TRY(write_digits(&c->types));
    if (strlen(c->types.text) > SENTENCE_DIGITS) {
        st = output_printf(&c->s->out, "%s%s (a number of %zu digits)", noun, plural,
                           strlen(c->types.text));
    } else {
        st = output_printf(&c->s->out, "%s %s%s", c->types.text, noun, plural);
    }
done:
    return st;
}

static ids_status write_verdict(counting *c)
{
    const settings *set = c->s->set;
    output *out = &c->s->out;
    ids_status st = IDS_OK;

    if (set->first_degree == set->last_degree) {
        TRY(output_printf(out, "\nDegree %u: ", (unsigned)set->first_degree));
    } else {
        TRY(output_printf(out, "\nDegrees %u to %u: ", (unsigned)set->first_degree,
                          (unsigned)set->last_degree));
    }
    TRY(write_amount(c, c->all_types, "association type"));
    TRY(output_printf(out, ", "));
    TRY(write_amount(c, c->all_monomials, "multilinear monomial"));
    TRY(output_printf(out, ".\n"));
done:
    return st;
}

static ids_status write_table(counting *c, char **names)
{
    session *s = c->s;
    const settings *set = s->set;
    const ids_signature *signature = ids_presentation_signature(s->pres);
    ids_column columns[IDS_MAX_OPERATIONS + 3] = {{"degree", IDS_COLUMN_NUMBER, 0}};
    size_t at = 1;
    ids_status st = IDS_OK;

    for (size_t i = 0; i < c->operations; i++) {
        TRY(name_operation(s, i, &names[i]));
        columns[at++] = (ids_column){names[i], IDS_COLUMN_NUMBER, 0};
    }
    columns[at++] = (ids_column){"types", IDS_COLUMN_NUMBER, 0};
    columns[at++] = (ids_column){"monomials", IDS_COLUMN_NUMBER, 0};
    TRY(ids_writer_create(s->ctx, set->format, "count", columns, at, output_sink, &s->out,
                          &c->writer));
    if (c->operations == 0) {
        TRY(write_degrees(c, signature));
    } else {
        for (uint32_t degree = set->first_degree; degree <= set->last_degree; degree++) {
            TRY(write_split(c, signature, degree));
        }
    }
    TRY(ids_writer_end(c->writer));
    if (set->format == IDS_FORMAT_TEXT) {
        TRY(write_verdict(c));
    }
done:
    return st;
}

static ids_status run(session *s)
{
    counting c = {.s = s};
    char *names[IDS_MAX_OPERATIONS] = {0};
    ids_status st = IDS_OK;

    if ((s->set->seen & BIT(OPTION_SPLIT)) != 0) {
        c.operations = ids_signature_count(ids_presentation_signature(s->pres));
    }
    mpz_inits(c.types.value, c.monomials.value, c.all_types, c.all_monomials, NULL);
    st = write_table(&c, names);
    mpz_clears(c.types.value, c.monomials.value, c.all_types, c.all_monomials, NULL);
    free(c.types.text);
    free(c.monomials.text);
    for (size_t i = 0; i < c.operations; i++) {
        ids_string_free(s->ctx, names[i]);
    }
    ids_writer_free(c.writer);
    return st;
}

const task task_count = {
    .name = "count",
    .usage = " --degree N | --degrees A..B [--split]",
    .summary = "count association types and monomials exactly, in any degree",
    .details =
        "For each degree, the number of association types and the number of multilinear\n"
        "monomials, without the identities. Nothing is listed, so degrees up to 1000000 are\n"
        "open, as far as the memory goes. A degree without monomials has a row of zeros.\n"
        "\n"
        "With --split a degree has a row for each way to use the operations: columns with the\n"
        "number of uses of each operation stand after the degree. A degree without monomials\n"
        "then has no rows.\n"
        "\n"
        "Columns: degree,types,monomials",
    .examples = "  idspan count pair.pres --degrees 1..20\n"
                "  idspan count programme.pres --degree 1000 --format csv\n"
                "  idspan count programme.pres --degrees 1..8 --split",
    .options = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES) | BIT(OPTION_SPLIT),
    .wanted = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES),
    .most_degree = IDS_MAX_COUNT_DEGREE,
    .run = run,
};
