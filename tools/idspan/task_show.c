/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan show: what the program makes of a presentation.
 *
 * People get a page, programs one table (CSV, JSON) with a row for each operation, identity and
 * candidate, and LaTeX two tabulars, in which a long polynomial takes several rows. A polynomial
 * is broken only before a sign that has blanks around it, so between terms.
 */
#include <stdlib.h>
#include <string.h>

#include "tool.h"

#define PAGE_WIDTH 74u  /* columns of a line of a polynomial on the page */
#define LATEX_WIDTH 56u /* characters of one in a tabular */
#define PAGE_TERMS 120u /* longer linearisations are cut on the page */
#define PAGE_LINES 12u  /* to as many lines */

enum { KIND, INDEX, NAME, LINE, DEGREE, ORDER, TERMS, WRITTEN, LINEAR_TERMS, LINEAR, COLUMNS };

static const char *const role_names[] = {"identity", "candidate"};

/* ---- polynomials in pieces ----------------------------------------------------------- */

/*
 * Length of the first piece of a polynomial: as many terms as fit into `width` bytes, at least
 * one. A byte is a character but for rare symbols, which makes such lines a little shorter.
 */
static size_t first_piece(const char *text, size_t width)
{
    size_t length = 0;

    for (size_t i = 1; text[i] != '\0'; i++) {
        bool sign =
            text[i] == ' ' && (text[i + 1] == '+' || text[i + 1] == '-') && text[i + 2] == ' ';
        if (sign && length > 0 && i > width) {
            return length;
        }
        if (sign) {
            length = i;
        }
    }
    return length > 0 && strlen(text) > width ? length : strlen(text);
}

static const char *skip_blank(const char *text)
{
    return text[0] == ' ' ? text + 1 : text;
}

/* ---- the page ------------------------------------------------------------------------ */

static ids_status page_polynomial(session *s, const char *text, uint64_t terms)
{
    ids_status st = IDS_OK;
    size_t lines = 0;

    while (text[0] != '\0') {
        size_t length = first_piece(text, PAGE_WIDTH);
        if (terms > PAGE_TERMS && lines >= PAGE_LINES) {
            return output_printf(&s->out, "      ... (--format csv writes all %s terms)\n",
                                 digits_of(terms).text);
        }
        TRY(output_printf(&s->out, "      %.*s\n", (int)length, text));
        text = skip_blank(text + length);
        lines++;
    }
done:
    return st;
}

static ids_status page_operations(session *s)
{
    const ids_signature *sig = ids_presentation_signature(s->pres);
    ids_status st = IDS_OK;
    char *text = NULL;

    TRY(output_printf(&s->out, "Operations\n"));
    for (size_t i = 0; i < ids_signature_count(sig); i++) {
        ids_operation op = {0};
        TRY(ids_signature_operation(sig, i, &op));
        TRY(ids_signature_print_operation(s->ctx, sig, i, &text));
        TRY(output_printf(&s->out, "  %s\n      %u arguments, ", text, (unsigned)op.arity));
        if (op.symmetry == IDS_SYMMETRY_NONE) {
            TRY(output_printf(&s->out, "no symmetry\n"));
        } else {
            TRY(output_printf(&s->out, "symmetry group of order %s\n",
                              digits_of(op.group_order).text));
        }
        ids_string_free(s->ctx, text);
        text = NULL;
    }
done:
    ids_string_free(s->ctx, text);
    return st;
}

static ids_status page_identity(session *s, ids_role role, size_t index)
{
    ids_status st = IDS_OK;
    ids_identity_info info = {0};
    char *written = NULL;
    char *linear = NULL;

    TRY(ids_presentation_info(s->pres, role, index, &info));
    TRY(ids_presentation_print_identity(s->ctx, s->pres, role, index, IDS_FORM_WRITTEN, &written));
    TRY(ids_presentation_print_identity(s->ctx, s->pres, role, index, IDS_FORM_LINEAR, &linear));
    TRY(output_printf(&s->out, "  %s (degree %u, line %u)\n",
                      info.name[0] != '\0' ? info.name : "unnamed", (unsigned)info.degree,
                      (unsigned)info.line));
    TRY(output_printf(&s->out, "    as written, %s term%s:\n", digits_of(info.terms).text,
                      info.terms == 1 ? "" : "s"));
    TRY(page_polynomial(s, written, info.terms));
    if (info.linear_terms == 0) {
        TRY(output_printf(&s->out, "    linearised: 0, so it says nothing\n"));
    } else if (strcmp(written, linear) == 0) {
        TRY(output_printf(&s->out, "    linearised: the same\n"));
    } else {
        TRY(output_printf(&s->out, "    linearised, %s term%s:\n",
                          digits_of(info.linear_terms).text, info.linear_terms == 1 ? "" : "s"));
        TRY(page_polynomial(s, linear, info.linear_terms));
    }
done:
    ids_string_free(s->ctx, written);
    ids_string_free(s->ctx, linear);
    return st;
}

static ids_status page_role(session *s, ids_role role, const char *heading)
{
    size_t count = ids_presentation_count(s->pres, role);
    ids_status st = IDS_OK;

    if (count > 0) {
        TRY(output_printf(&s->out, "\n%s\n", heading));
    }
    for (size_t i = 0; i < count; i++) {
        TRY(session_poll());
        TRY(page_identity(s, role, i));
    }
done:
    return st;
}

static ids_status write_page(session *s)
{
    ids_status st = IDS_OK;
    size_t operations = ids_signature_count(ids_presentation_signature(s->pres));
    size_t identities = ids_presentation_count(s->pres, IDS_ROLE_IDENTITY);
    size_t candidates = ids_presentation_count(s->pres, IDS_ROLE_CANDIDATE);

    TRY(page_operations(s));
    TRY(page_role(s, IDS_ROLE_IDENTITY, "Identities"));
    TRY(page_role(s, IDS_ROLE_CANDIDATE, "Candidates (not imposed)"));
    TRY(output_printf(&s->out, "\n%zu operation%s, %zu identit%s, %zu candidate%s.\n", operations,
                      operations == 1 ? "" : "s", identities, identities == 1 ? "y" : "ies",
                      candidates, candidates == 1 ? "" : "s"));
done:
    return st;
}

/* ---- the table ----------------------------------------------------------------------- */

static ids_status table_operation(session *s, size_t index, ids_writer *writer)
{
    const ids_signature *sig = ids_presentation_signature(s->pres);
    ids_status st = IDS_OK;
    ids_operation op = {0};
    char *text = NULL;
    digits index_cell = digits_of(index);
    digits arity = {{0}};
    digits order = {{0}};
    const char *cells[COLUMNS] = {
        [KIND] = "operation", [INDEX] = index_cell.text, [NAME] = "",   [LINE] = "",
        [TERMS] = "",         [LINEAR_TERMS] = "",       [LINEAR] = "",
    };

    TRY(ids_signature_operation(sig, index, &op));
    TRY(ids_signature_print_operation(s->ctx, sig, index, &text));
    arity = digits_of(op.arity);
    order = digits_of(op.group_order);
    cells[DEGREE] = arity.text;
    cells[ORDER] = order.text;
    cells[WRITTEN] = text;
    TRY(ids_writer_row(writer, cells));
done:
    ids_string_free(s->ctx, text);
    return st;
}

static ids_status table_identity(session *s, ids_role role, size_t index, ids_writer *writer)
{
    ids_status st = IDS_OK;
    ids_identity_info info = {0};
    char *written = NULL;
    char *linear = NULL;
    digits numbers[5] = {{{0}}};
    const char *cells[COLUMNS] = {[KIND] = role_names[role], [ORDER] = ""};

    TRY(ids_presentation_info(s->pres, role, index, &info));
    TRY(ids_presentation_print_identity(s->ctx, s->pres, role, index, IDS_FORM_WRITTEN, &written));
    TRY(ids_presentation_print_identity(s->ctx, s->pres, role, index, IDS_FORM_LINEAR, &linear));
    numbers[0] = digits_of(index);
    numbers[1] = digits_of(info.line);
    numbers[2] = digits_of(info.degree);
    numbers[3] = digits_of(info.terms);
    numbers[4] = digits_of(info.linear_terms);
    cells[INDEX] = numbers[0].text;
    cells[NAME] = info.name;
    cells[LINE] = numbers[1].text;
    cells[DEGREE] = numbers[2].text;
    cells[TERMS] = numbers[3].text;
    cells[WRITTEN] = written;
    cells[LINEAR_TERMS] = numbers[4].text;
    cells[LINEAR] = linear;
    TRY(ids_writer_row(writer, cells));
done:
    ids_string_free(s->ctx, written);
    ids_string_free(s->ctx, linear);
    return st;
}

static ids_status write_table(session *s)
{
    static const ids_column columns[COLUMNS] = {
        [KIND] = {"kind", IDS_COLUMN_TEXT, 0},
        [INDEX] = {"index", IDS_COLUMN_NUMBER, 0},
        [NAME] = {"name", IDS_COLUMN_TEXT, 0},
        [LINE] = {"line", IDS_COLUMN_NUMBER, 0},
        [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
        [ORDER] = {"order", IDS_COLUMN_NUMBER, 0},
        [TERMS] = {"terms", IDS_COLUMN_NUMBER, 0},
        [WRITTEN] = {"written", IDS_COLUMN_MATH, 0},
        [LINEAR_TERMS] = {"linear_terms", IDS_COLUMN_NUMBER, 0},
        [LINEAR] = {"linear", IDS_COLUMN_MATH, 0},
    };
    ids_status st = IDS_OK;
    ids_writer *writer = NULL;

    TRY(ids_writer_create(s->ctx, s->set->format, "show", columns, COLUMNS, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < ids_signature_count(ids_presentation_signature(s->pres)); i++) {
        TRY(table_operation(s, i, writer));
    }
    for (ids_role role = IDS_ROLE_IDENTITY; role <= IDS_ROLE_CANDIDATE; role++) {
        for (size_t i = 0; i < ids_presentation_count(s->pres, role); i++) {
            TRY(session_poll());
            TRY(table_identity(s, role, i, writer));
        }
    }
    TRY(ids_writer_end(writer));
done:
    ids_writer_free(writer);
    return st;
}

/* ---- LaTeX --------------------------------------------------------------------------- */

static ids_status latex_operations(session *s)
{
    static const ids_column columns[] = {
        {"operation", IDS_COLUMN_MATH, 0},
        {"symmetry", IDS_COLUMN_TEXT, 0},
        {"group order", IDS_COLUMN_NUMBER, 0},
    };
    static const char *const words[] = {"none", "commutative", "alternating", "as declared"};
    const ids_signature *sig = ids_presentation_signature(s->pres);
    ids_status st = IDS_OK;
    ids_writer *writer = NULL;
    char *text = NULL;

    TRY(ids_writer_create(s->ctx, IDS_FORMAT_LATEX, "operations", columns, 3, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < ids_signature_count(sig); i++) {
        ids_operation op = {0};
        digits order = {{0}};
        TRY(ids_signature_operation(sig, i, &op));
        TRY(ids_signature_print_operation(s->ctx, sig, i, &text));
        if (op.symmetry == IDS_SYMMETRY_COMMUTATIVE || op.symmetry == IDS_SYMMETRY_ALTERNATING) {
            char *word = strrchr(text, ' ');
            if (word != NULL) {
                *word = '\0'; /* it has a column of its own */
            }
        }
        order = digits_of(op.group_order);
        TRY(ids_writer_row(writer, (const char *[]){text, words[op.symmetry], order.text}));
        ids_string_free(s->ctx, text);
        text = NULL;
    }
    TRY(ids_writer_end(writer));
done:
    ids_string_free(s->ctx, text);
    ids_writer_free(writer);
    return st;
}

/* The rows of one form of an identity; only the first has its name and numbers. */
static ids_status latex_form(session *s, ids_role role, size_t index, ids_form form,
                             ids_writer *writer)
{
    ids_status st = IDS_OK;
    ids_identity_info info = {0};
    char *text = NULL;
    char *piece = NULL;
    const char *at = NULL;
    digits degree = {{0}};
    digits terms = {{0}};
    bool first = true;

    TRY(ids_presentation_info(s->pres, role, index, &info));
    TRY(ids_presentation_print_identity(s->ctx, s->pres, role, index, form, &text));
    degree = digits_of(info.degree);
    terms = digits_of(form == IDS_FORM_WRITTEN ? info.terms : info.linear_terms);
    piece = malloc(strlen(text) + 1);
    if (piece == NULL) {
        st = session_fail(s, IDS_ERR_NOMEM, "%s", ids_status_text(IDS_ERR_NOMEM));
        goto done;
    }
    at = text;
    do {
        size_t length = first_piece(at, LATEX_WIDTH);
        memcpy(piece, at, length);
        piece[length] = '\0';
        TRY(ids_writer_row(
            writer, (const char *[]){first ? info.name : "",
                                     first ? (form == IDS_FORM_WRITTEN ? "written" : "linear") : "",
                                     first ? degree.text : "", first ? terms.text : "", piece}));
        first = false;
        at = skip_blank(at + length);
    } while (at[0] != '\0');
done:
    free(piece);
    ids_string_free(s->ctx, text);
    return st;
}

static ids_status latex_role(session *s, ids_role role, const char *label)
{
    static const ids_column columns[] = {
        {"name", IDS_COLUMN_TEXT, 0},       {"form", IDS_COLUMN_TEXT, 0},
        {"degree", IDS_COLUMN_NUMBER, 0},   {"terms", IDS_COLUMN_NUMBER, 0},
        {"polynomial", IDS_COLUMN_MATH, 0},
    };
    ids_status st = IDS_OK;
    ids_writer *writer = NULL;
    size_t count = ids_presentation_count(s->pres, role);

    if (count == 0) {
        return IDS_OK;
    }
    TRY(output_printf(&s->out, "\n"));
    TRY(ids_writer_create(s->ctx, IDS_FORMAT_LATEX, label, columns, 5, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < count; i++) {
        TRY(session_poll());
        TRY(latex_form(s, role, i, IDS_FORM_WRITTEN, writer));
        TRY(latex_form(s, role, i, IDS_FORM_LINEAR, writer));
    }
    TRY(ids_writer_end(writer));
done:
    ids_writer_free(writer);
    return st;
}

/* ---- the task ------------------------------------------------------------------------ */

static ids_status run(session *s)
{
    ids_status st = IDS_OK;

    if (s->set->format == IDS_FORMAT_TEXT) {
        return write_page(s);
    }
    if (s->set->format != IDS_FORMAT_LATEX) {
        return write_table(s);
    }
    TRY(latex_operations(s));
    TRY(latex_role(s, IDS_ROLE_IDENTITY, "identities"));
    TRY(latex_role(s, IDS_ROLE_CANDIDATE, "candidates"));
done:
    return st;
}

const task task_show = {
    .name = "show",
    .usage = "",
    .summary = "show what the presentation says, with its identities linearised",
    .details =
        "Shows the operations with their symmetry groups, and each identity and candidate twice:\n"
        "as written, with abbreviations expanded and monomials in canonical form, and completely\n"
        "linearised, with integer coefficients without a common factor; it can differ by a factor\n"
        "from what is written.\n"
        "\n"
        "Columns: kind,index,name,line,degree,order,terms,written,linear_terms,linear\n"
        "`kind` is operation, identity or candidate; indices count from 0 within a kind; the\n"
        "degree of an operation is its number of arguments, and `order` that of its symmetry\n"
        "group. LaTeX gets a table of operations, one of identities and one of candidates.",
    .examples = "  idspan show pair.pres\n"
                "  idspan show pair.pres --format json",
    .options = 0,
    .wanted = 0,
    .run = run,
};
