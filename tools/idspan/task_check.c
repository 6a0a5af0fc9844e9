/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan check: verifies a derivation, witness or counterexample that `follows` or anybody else has
 * written.
 */
#include <string.h>

#include "tool.h"

enum { CLAIM, DEGREE, FOLLOWS, IDENTITIES, TERMS, VERIFIED, COLUMNS };

static ids_status write_verdict(session *s, const ids_check_report *report)
{
    const char *blank = report->claim[0] != '\0' ? " " : "";

    if (report->follows) {
        return output_printf(&s->out,
                             "\nVerified: the candidate%s%s of degree %u follows. The derivation, "
                             "of %s term%s,\nwas multiplied out into %s monomial%s and adds up to "
                             "it, exactly.\n",
                             blank, report->claim, (unsigned)report->degree,
                             digits_of(report->terms).text, plural(report->terms),
                             digits_of(report->monomials).text, plural(report->monomials));
    }
    if (report->dimension > 0) {
        return output_printf(&s->out,
                             "\nVerified: the candidate%s%s of degree %u does not follow. The "
                             "identities hold in the\nalgebra of dimension %u, on all tuples of "
                             "basis elements (%s for all identities\ntogether), and the candidate "
                             "is not 0 at the values in the file.\n",
                             blank, report->claim, (unsigned)report->degree,
                             (unsigned)report->dimension, digits_of(report->tuples).text);
    }
    return output_printf(&s->out,
                         "\nVerified: the candidate%s%s of degree %u does not follow. The witness, "
                         "%s value%s,\nwas evaluated on %s consequence%s in its variables, all "
                         "there are, and is 0 on\nevery one, but not on the candidate.\n",
                         blank, report->claim, (unsigned)report->degree,
                         digits_of(report->terms).text, plural(report->terms),
                         digits_of(report->consequences).text, plural(report->consequences));
}

static ids_status run(session *s)
{
    static const ids_column columns[COLUMNS] = {
        [CLAIM] = {"candidate", IDS_COLUMN_TEXT, 0},
        [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
        [FOLLOWS] = {"follows", IDS_COLUMN_TEXT, 0},
        [IDENTITIES] = {"identities", IDS_COLUMN_NUMBER, 0},
        [TERMS] = {"terms", IDS_COLUMN_NUMBER, 0},
        [VERIFIED] = {"verified", IDS_COLUMN_NUMBER, 0},
    };
    ids_status st = IDS_OK;
    ids_check_report report = {0};
    ids_writer *writer = NULL;

    TRY(ids_certificate_check(s->ctx, s->text, s->length, session_source(s), &report));
    digits degree = digits_of(report.degree);
    digits identities = digits_of(report.identities);
    digits terms = digits_of(report.terms);
    digits verified = digits_of(report.follows         ? report.monomials
                                : report.dimension > 0 ? report.tuples
                                                       : report.consequences);
    const char *cells[COLUMNS] = {report.claim,    degree.text, report.follows ? "yes" : "no",
                                  identities.text, terms.text,  verified.text};
    TRY(ids_writer_create(s->ctx, s->set->format, "check", columns, COLUMNS, output_sink, &s->out,
                          &writer));
    TRY(ids_writer_row(writer, cells));
    TRY(ids_writer_end(writer));
    if (s->set->format == IDS_FORMAT_TEXT) {
        TRY(write_verdict(s, &report));
    }
done:
    ids_writer_free(writer);
    return st;
}

const task task_check = {
    .name = "check",
    .usage = "",
    .summary = "verify a proof, witness or algebra file",
    .details =
        "FILE is a derivation, a witness or an algebra, as \"follows\" writes them and idspan(5)\n"
        "describes them; it has the\n"
        "identities and the candidate in it. A derivation is multiplied out, and its terms must\n"
        "add up to the candidate. A witness must be 0 on every consequence of the identities in\n"
        "the variables of the candidate, and not on the candidate. In an algebra the identities\n"
        "must hold on all tuples of basis elements, and the candidate must not be 0 at the values\n"
        "given. All of it is recomputed exactly, by code of its own, which shares the reader and\n"
        "the normal form of monomials with the search and nothing else.\n"
        "\n"
        "A file that is damaged, or does not show what it claims, is refused with status 2.\n"
        "`verified` counts the monomials that were added up, the consequences, or the tuples.\n"
        "\n"
        "Columns: candidate,degree,follows,identities,terms,verified",
    .examples = "  idspan follows pair.pres --candidate exchange --proof exchange.proof\n"
                "  idspan check exchange.proof\n"
                "  idspan check - --format json < exchange.proof",
    .wants_text = true,
    .run = run,
};
