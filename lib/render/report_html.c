/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * A report as one HTML page that is well-formed XML too.
 *
 *     heading, what came out, how far it is; contents
 *     Presentation    the text as it was given
 *     Dimensions      growth as a chart, table
 *     Multiplicities  degree by degree, as a chart and a table (by partition only)
 *     Not done        cells that are missing or failed, with reasons
 *     Certainty       what the column says
 *     Provenance      version, primes, seed, ...
 *
 * The page has no script and asks for nothing from elsewhere. All that comes from outside passes
 * idsi_xml_words().
 */
#include <inttypes.h>
#include <stdio.h>
#include <string.h>

#include "report_private.h"

/* What the heading and the sections need to know of the whole. */
typedef struct summary {
    size_t cells; /* rows that are computed on their own: a total beside partitions is not */
    size_t done;
    size_t failed;
    size_t totals;  /* degrees whose total is known */
    uint32_t first; /* the first of them, */
    uint32_t last;  /* the last, */
    bool gapless;   /* and whether all between are known */
    bool modular;   /* some row is not exact */
    uint32_t least; /* the smallest bits of those */
} summary;

static void count_cell(summary *sum, const idsi_report_row *row)
{
    sum->cells++;
    sum->done += idsi_report_is_done(row) ? 1 : 0;
    sum->failed += row->given.state == IDS_REPORT_FAILED ? 1 : 0;
}

static void count_certainty(summary *sum, const ids_partition_row *numbers)
{
    if (numbers->certainty == IDS_CERTAINTY_MODULAR) {
        sum->least = !sum->modular || numbers->bits < sum->least ? numbers->bits : sum->least;
        sum->modular = true;
    }
}

static summary sum_up(const ids_report *report)
{
    summary sum = {.gapless = true};
    idsi_degree degree = {0};

    for (size_t at = 0; idsi_report_next_degree(report, &at, &degree);) {
        for (size_t i = 0; i < degree.partitions; i++) {
            count_cell(&sum, &degree.rows[i]);
            if (idsi_report_is_done(&degree.rows[i])) {
                count_certainty(&sum, &degree.rows[i].given.numbers);
            }
        }
        if (degree.partitions == 0) {
            count_cell(&sum, degree.total);
        }
        if (idsi_report_is_done(degree.total)) {
            count_certainty(&sum, &degree.total->given.numbers);
            sum.gapless = sum.gapless && (sum.totals == 0 || sum.last + 1 == degree.degree);
            sum.first = sum.totals == 0 ? degree.degree : sum.first;
            sum.last = degree.degree;
            sum.totals++;
        }
    }
    return sum;
}

/* ---- heading ----------------------------------------------------------------------------- */

static ids_status put_head(idsi_press *press)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;

    IDSI_TRY(idsi_text_puts(out,
                            "<!DOCTYPE html>\n"
                            "<html xmlns=\"http://www.w3.org/1999/xhtml\" lang=\"en\">\n<head>\n"
                            "<meta charset=\"utf-8\"/>\n"
                            "<meta name=\"viewport\" content=\"width=device-width, "
                            "initial-scale=1\"/>\n"
                            "<meta name=\"generator\" content=\"idspan " IDS_VERSION_STRING
                            "\"/>\n<title>Rank table of "));
    IDSI_TRY(idsi_xml_string(out, press->report->title));
    IDSI_TRY(idsi_text_puts(out, "</title>\n<style>\n"));
    IDSI_TRY(idsi_text_puts(out, idsi_page_style));
    IDSI_TRY(idsi_text_puts(out, idsi_chart_style));
    IDSI_TRY(idsi_text_puts(out, "</style>\n</head>\n<body>\n<header>\n"
                                 "<p class=\"kind\">Rank table</p>\n<h1>"));
    IDSI_TRY(idsi_xml_string(out, press->report->title));
    IDSI_TRY(idsi_text_puts(out, "</h1>\n"));
done:
    return st;
}

/* "Degrees 1 to 6: quotients of dimension 1, 1, 4, 15, 71, 242." */
static ids_status put_verdict(idsi_press *press, const summary *sum)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    idsi_degree degree = {0};
    size_t count = 0;

    if (sum->totals == 0 || !sum->gapless) {
        return IDS_OK;
    }
    if (sum->totals == 1) {
        IDSI_TRY(idsi_text_printf(out, "<p class=\"verdict\">Degree %u: a quotient of dimension ",
                                  (unsigned)sum->first));
    } else {
        IDSI_TRY(idsi_text_printf(out,
                                  "<p class=\"verdict\">Degrees %u to %u: quotients of "
                                  "dimension ",
                                  (unsigned)sum->first, (unsigned)sum->last));
    }
    for (size_t at = 0; idsi_report_next_degree(press->report, &at, &degree);) {
        if (idsi_report_is_done(degree.total)) {
            IDSI_TRY(idsi_text_printf(out, "%s%" PRIu64, count > 0 ? ", " : "",
                                      degree.total->given.numbers.quotient));
            count++;
        }
    }
    IDSI_TRY(idsi_text_puts(out, ".</p>\n"));
done:
    return st;
}

static ids_status put_state(idsi_text *out, const summary *sum)
{
    ids_status st = IDS_OK;

    if (sum->done == sum->cells) {
        return idsi_text_puts(out, sum->cells > 0 ? "<p class=\"state\">Complete.</p>\n"
                                                  : "<p class=\"state open\">Empty.</p>\n");
    }
    IDSI_TRY(idsi_text_printf(out,
                              "<p class=\"state open\"><strong>Not finished:</strong> %zu of %zu "
                              "cells are computed",
                              sum->done, sum->cells));
    if (sum->failed > 0) {
        IDSI_TRY(idsi_text_printf(out, ", %zu failed", sum->failed));
    }
    IDSI_TRY(idsi_text_puts(out, " (<a href=\"#gaps\">list</a>).</p>\n"));
done:
    return st;
}

static ids_status put_contents(idsi_press *press, const summary *sum)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    idsi_degree degree = {0};

    IDSI_TRY(idsi_text_puts(out, "</header>\n<nav aria-label=\"Contents\">\n<ul>\n"));
    if (press->report->presentation != NULL) {
        IDSI_TRY(idsi_text_puts(out, "<li><a href=\"#presentation\">Presentation</a></li>\n"));
    }
    IDSI_TRY(idsi_text_puts(out, "<li><a href=\"#dimensions\">Dimensions</a></li>\n"));
    if (idsi_report_by_partition(press->report)) {
        IDSI_TRY(idsi_text_puts(out, "<li><a href=\"#modules\">Multiplicities</a></li>\n"));
    }
    for (size_t at = 0; idsi_report_next_degree(press->report, &at, &degree);) {
        if (degree.partitions > 0) {
            IDSI_TRY(idsi_text_printf(out, "<li><a href=\"#degree-%u\">Degree %u</a></li>\n",
                                      (unsigned)degree.degree, (unsigned)degree.degree));
        }
    }
    if (sum->done < sum->cells) {
        IDSI_TRY(idsi_text_puts(out, "<li><a href=\"#gaps\">Not done</a></li>\n"));
    }
    IDSI_TRY(idsi_text_puts(out, "<li><a href=\"#certainty\">Certainty</a></li>\n"
                                 "<li><a href=\"#provenance\">Provenance</a></li>\n"
                                 "</ul>\n</nav>\n<main>\n"));
done:
    return st;
}

/* ---- sections ---------------------------------------------------------------------------- */

static ids_status put_presentation(idsi_press *press)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    const char *text = press->report->presentation;

    if (text == NULL) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_text_puts(out, "<section id=\"presentation\">\n<h2>Presentation</h2>\n"
                                 "<pre tabindex=\"0\"><code>"));
    IDSI_TRY(idsi_xml_words(out, text, strlen(text), "\t\n"));
    IDSI_TRY(idsi_text_puts(out, "</code></pre>\n</section>\n"));
    IDSI_TRY(idsi_press_pour(press));
done:
    return st;
}

/* Opens a chart; `name` tells its ids apart from those of the others. */
static ids_status open_chart(idsi_text *out, const char *name, int32_t height, const char *title,
                             const char *description)
{
    return idsi_text_printf(out,
                            "<figure>\n<div class=\"scroll\" tabindex=\"0\" role=\"region\" "
                            "aria-label=\"%s\">\n"
                            "<svg xmlns=\"http://www.w3.org/2000/svg\" class=\"chart\" "
                            "viewBox=\"0 0 %d %d\" role=\"img\" aria-labelledby=\"%s-title\" "
                            "aria-describedby=\"%s-desc\">\n<title id=\"%s-title\">%s</title>\n"
                            "<desc id=\"%s-desc\">%s</desc>\n",
                            title, IDSI_CHART_WIDTH, (int)height, name, name, name, title, name,
                            description);
}

static ids_status put_dimensions(idsi_press *press)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;

    IDSI_TRY(idsi_text_puts(out,
                            "<section id=\"dimensions\">\n<h2>Dimensions</h2>\n<p>Dimensions of "
                            "spaces of multilinear polynomials, degree by degree: <em>free</em> "
                            "without the identities, <em>consequences</em> of what follows from "
                            "the identities, and <em>quotient</em>, the difference.</p>\n"));
    if (idsi_growth_is_worth(press->report)) {
        IDSI_TRY(open_chart(out, "growth", idsi_growth_height(), "Growth of the dimensions",
                            "The three dimensions by degree, on a logarithmic scale. The table "
                            "below has the numbers."));
        IDSI_TRY(idsi_put_growth(out, press->report));
        IDSI_TRY(idsi_text_puts(out, "</svg>\n</div>\n<figcaption>Logarithmic scale."
                                     "</figcaption>\n</figure>\n"));
    }
    IDSI_TRY(idsi_put_dimensions_table(press));
    IDSI_TRY(idsi_text_puts(out, "</section>\n"));
    IDSI_TRY(idsi_press_pour(press));
done:
    return st;
}

static ids_status put_degree(idsi_press *press, const idsi_degree *degree)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    unsigned n = (unsigned)degree->degree;
    char name[24] = "";
    char title[64] = "";

    snprintf(name, sizeof name, "modules-%u", n);
    snprintf(title, sizeof title, "Multiplicities in degree %u", n);
    IDSI_TRY(idsi_text_printf(out, "<section id=\"degree-%u\">\n<h3>Degree %u</h3>\n", n, n));
    if (degree->done < degree->partitions) {
        IDSI_TRY(idsi_text_printf(out, "<p>%zu of %zu multiplicities are computed.</p>\n",
                                  degree->done, degree->partitions));
    }
    IDSI_TRY(open_chart(out, name, idsi_modules_height(degree), title,
                        "Bars of the multiplicities in the consequences and in the quotient, by "
                        "partition. The table below has the numbers."));
    IDSI_TRY(idsi_put_modules(out, degree));
    IDSI_TRY(idsi_text_puts(out, "</svg>\n</div>\n</figure>\n"));
    IDSI_TRY(idsi_put_modules_table(press, degree));
    IDSI_TRY(idsi_text_puts(out, "</section>\n"));
    IDSI_TRY(idsi_press_pour(press));
done:
    return st;
}

static ids_status put_degrees(idsi_press *press)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    idsi_degree degree = {0};

    if (!idsi_report_by_partition(press->report)) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_text_puts(out,
                            "<section id=\"modules\">\n<h2>Multiplicities</h2>\n<p>How often "
                            "each irreducible module of the symmetric group, named by its "
                            "partition, occurs in the three spaces. The row <em>total</em> has "
                            "dimensions.</p>\n<p class=\"quiet\">In the charts a raised number "
                            "counts equal parts: 3 2 1\u00B3 is 3+2+1+1+1. Consequences and "
                            "quotient have scales of their own.</p>\n"));
    for (size_t at = 0; idsi_report_next_degree(press->report, &at, &degree);) {
        if (degree.partitions > 0) {
            IDSI_TRY(put_degree(press, &degree));
        }
    }
    IDSI_TRY(idsi_text_puts(out, "</section>\n"));
done:
    return st;
}

static ids_status put_gaps(idsi_press *press, const summary *sum)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;

    if (sum->done == sum->cells) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_text_puts(out, "<section id=\"gaps\">\n<h2>Not done</h2>\n<p>What is missing can "
                                 "still be computed; what failed can be tried again with other "
                                 "limits. All other numbers are final.</p>\n"));
    IDSI_TRY(idsi_put_gaps_table(press));
    IDSI_TRY(idsi_text_puts(out, "</section>\n"));
done:
    return st;
}

static ids_status put_certainty(idsi_press *press, const summary *sum)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;

    IDSI_TRY(idsi_text_puts(out, "<section id=\"certainty\">\n<h2>Certainty</h2>\n"));
    if (!sum->modular && sum->done > 0) {
        IDSI_TRY(idsi_text_puts(out, "<p>All numbers are <em>exact</em>: proved.</p>\n"));
    } else {
        IDSI_TRY(idsi_text_puts(out,
                                "<p><em>exact</em> stands where a number is proved. Elsewhere "
                                "<em>consequences</em> is a proved lower bound and "
                                "<em>quotient</em> a proved upper bound; a certainty of "
                                "2<sup>-k</sup> says that with probability at most 2<sup>-k</sup> "
                                "they are not the true numbers. The chance is in the primes and "
                                "test vectors, which are drawn at random from the seed. "
                                "<em>free</em> is always exact.</p>\n"));
    }
    if (sum->modular) {
        IDSI_TRY(idsi_text_printf(out,
                                  "<p>The least certain number here has 2<sup>-%u</sup>.</p>\n",
                                  (unsigned)sum->least));
    }
    IDSI_TRY(idsi_text_puts(out, "</section>\n"));
done:
    return st;
}

static ids_status put_provenance(idsi_press *press)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    const char *name = NULL;
    const char *value = NULL;
    size_t at = 0;

    IDSI_TRY(idsi_text_puts(out, "<section id=\"provenance\">\n<h2>Provenance</h2>\n<dl>\n"));
    IDSI_TRY(
        idsi_text_puts(out, "<dt>page written by</dt><dd>idspan " IDS_VERSION_STRING "</dd>\n"));
    while (idsi_report_next_note(press->report, &at, &name, &value)) {
        IDSI_TRY(idsi_text_puts(out, "<dt>"));
        IDSI_TRY(idsi_xml_string(out, name));
        IDSI_TRY(idsi_text_puts(out, "</dt><dd>"));
        IDSI_TRY(idsi_xml_string(out, value));
        IDSI_TRY(idsi_text_puts(out, "</dd>\n"));
    }
    IDSI_TRY(idsi_text_puts(out, "</dl>\n</section>\n</main>\n</body>\n</html>\n"));
done:
    return st;
}

ids_status idsi_report_html(idsi_press *press)
{
    ids_status st = IDS_OK;
    summary sum = sum_up(press->report);

    IDSI_TRY(put_head(press));
    IDSI_TRY(put_verdict(press, &sum));
    IDSI_TRY(put_state(&press->out, &sum));
    IDSI_TRY(put_contents(press, &sum));
    IDSI_TRY(put_presentation(press));
    IDSI_TRY(put_dimensions(press));
    IDSI_TRY(put_degrees(press));
    IDSI_TRY(put_gaps(press, &sum));
    IDSI_TRY(put_certainty(press, &sum));
    IDSI_TRY(put_provenance(press));
done:
    return st;
}
