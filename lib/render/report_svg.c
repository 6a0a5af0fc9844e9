/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * A report as one SVG picture: heading, growth of the dimensions with their numbers, and for each
 * degree the multiplicities by partition, from top to bottom.
 *
 * The picture is written in one pass: heights are known from the number of rows. Its text is text,
 * so the root has no role that would hide it from a screen reader.
 */
#include "report_private.h"

#define MARGIN 32
#define HEADING 88 /* of the sheet, down to the first chart */
#define SECTION 46 /* of a degree, down to its chart */
#define BELOW 30   /* from a chart to the next heading */
#define LINE 18    /* of the table of dimensions */
#define TABLE_SKIP 26

/* Right edges of its columns. */
static const int32_t columns[] = {50, 220, 390, 560, 680};

static bool has_growth(const idsi_press *press)
{
    return idsi_growth_is_worth(press->report);
}

static size_t degree_count(const ids_report *report)
{
    idsi_degree degree = {0};
    size_t at = 0;
    size_t count = 0;

    while (idsi_report_next_degree(report, &at, &degree)) {
        count++;
    }
    return count;
}

static int32_t table_height(const ids_report *report)
{
    return TABLE_SKIP + LINE * (int32_t)degree_count(report) + BELOW;
}

static int32_t sheet_height(const idsi_press *press)
{
    int32_t height = HEADING + table_height(press->report);
    idsi_degree degree = {0};
    size_t at = 0;

    if (has_growth(press)) {
        height += idsi_growth_height() + BELOW;
    }
    while (idsi_report_next_degree(press->report, &at, &degree)) {
        if (degree.partitions > 0) {
            height += SECTION + idsi_modules_height(&degree) + BELOW;
        }
    }
    return height;
}

static ids_status put_head(idsi_press *press, int32_t height)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    int32_t width = IDSI_CHART_WIDTH + 2 * MARGIN;

    IDSI_TRY(idsi_text_printf(out,
                              "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n"
                              "<svg xmlns=\"http://www.w3.org/2000/svg\" version=\"1.1\" "
                              "class=\"chart\" width=\"%d\" height=\"%d\" viewBox=\"0 0 %d %d\" "
                              "aria-labelledby=\"title\" aria-describedby=\"desc\">\n"
                              "<title id=\"title\">Rank table of ",
                              (int)width, (int)height, (int)width, (int)height));
    IDSI_TRY(idsi_xml_string(out, press->report->title));
    IDSI_TRY(idsi_text_puts(out, "</title>\n<desc id=\"desc\">Dimensions of the multilinear "
                                 "components of the free algebra, of the consequences of the "
                                 "identities and of the quotient"));
    IDSI_TRY(idsi_text_puts(out, idsi_report_by_partition(press->report)
                                     ? ", and multiplicities of the irreducible modules of the "
                                       "symmetric groups in them.</desc>\n<style>\n"
                                     : ".</desc>\n<style>\n"));
    IDSI_TRY(idsi_text_puts(out, idsi_chart_style));
    IDSI_TRY(idsi_text_printf(out,
                              "</style>\n<rect class=\"paper\" width=\"%d\" height=\"%d\"/>\n"
                              "<text class=\"title\" x=\"%d\" y=\"44\">",
                              (int)width, (int)height, MARGIN));
    IDSI_TRY(idsi_xml_string(out, press->report->title));
    IDSI_TRY(idsi_text_printf(out,
                              "</text>\n<text class=\"quiet\" x=\"%d\" y=\"66\">Dimensions of the "
                              "multilinear components: free algebra, consequences of the "
                              "identities, quotient</text>\n",
                              MARGIN));
done:
    return st;
}

/* ---- the numbers of every degree --------------------------------------------------------- */

static ids_status put_cell(idsi_text *out, const char *class, size_t column, int32_t y)
{
    return idsi_text_printf(out, "<text class=\"%s end\" x=\"%d\" y=\"%d\">", class,
                            (int)columns[column], (int)y);
}

static ids_status put_dimensions_line(idsi_text *out, const idsi_degree *degree, int32_t y)
{
    ids_status st = IDS_OK;
    const ids_partition_row *numbers = NULL;

    IDSI_TRY(put_cell(out, "num", 0, y));
    IDSI_TRY(idsi_text_printf(out, "%u</text>", (unsigned)degree->degree));
    if (!idsi_report_is_done(degree->total)) {
        IDSI_TRY(put_cell(out, "gap", 3, y));
        return idsi_text_puts(out, "not finished</text>\n");
    }
    numbers = &degree->total->given.numbers;
    IDSI_TRY(put_cell(out, "num", 1, y));
    IDSI_TRY(idsi_put_number(out, numbers->free, &idsi_grouping_svg));
    IDSI_TRY(idsi_text_puts(out, "</text>"));
    IDSI_TRY(put_cell(out, "num", 2, y));
    IDSI_TRY(idsi_put_number(out, numbers->consequences, &idsi_grouping_svg));
    IDSI_TRY(idsi_text_puts(out, "</text>"));
    IDSI_TRY(put_cell(out, "num", 3, y));
    IDSI_TRY(idsi_put_number(out, numbers->quotient, &idsi_grouping_svg));
    IDSI_TRY(idsi_text_puts(out, "</text>"));
    IDSI_TRY(put_cell(out, "quiet num", 4, y));
    IDSI_TRY(idsi_put_certainty(out, numbers));
    IDSI_TRY(idsi_text_puts(out, "</text>\n"));
done:
    return st;
}

static ids_status put_dimensions(idsi_press *press, int32_t y)
{
    static const char *const words[] = {"degree", "free", "consequences", "quotient", "certainty"};
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    idsi_degree degree = {0};
    size_t at = 0;

    IDSI_TRY(idsi_text_printf(out, "<g transform=\"translate(%d %d)\">\n", MARGIN, (int)y));
    for (size_t i = 0; i < sizeof words / sizeof *words; i++) {
        IDSI_TRY(put_cell(out, "head", i, 10));
        IDSI_TRY(idsi_text_printf(out, "%s</text>", words[i]));
    }
    IDSI_TRY(idsi_text_printf(out, "\n<path class=\"rule\" d=\"M0 18H%d\"/>\n", IDSI_CHART_WIDTH));
    for (int32_t line = TABLE_SKIP + 10; idsi_report_next_degree(press->report, &at, &degree);
         line += LINE) {
        IDSI_TRY(put_dimensions_line(out, &degree, line));
    }
    IDSI_TRY(idsi_text_puts(out, "</g>\n"));
done:
    return st;
}

/* ---- degrees ----------------------------------------------------------------------------- */

static ids_status put_degree(idsi_press *press, const idsi_degree *degree, int32_t y)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;

    IDSI_TRY(idsi_text_printf(out,
                              "<text class=\"degree\" x=\"%d\" y=\"%d\">Degree %u</text>\n"
                              "<text class=\"quiet\" x=\"%d\" y=\"%d\">",
                              MARGIN, (int)(y + 14), (unsigned)degree->degree, MARGIN,
                              (int)(y + 34)));
    IDSI_TRY(idsi_text_puts(out, "Multiplicities of the irreducible modules; each kind has a scale "
                                 "of its own"));
    if (degree->done < degree->partitions) {
        IDSI_TRY(
            idsi_text_printf(out, "; %zu of %zu are computed", degree->done, degree->partitions));
    }
    IDSI_TRY(idsi_text_printf(out, "</text>\n<g transform=\"translate(%d %d)\">\n", MARGIN,
                              (int)(y + SECTION)));
    IDSI_TRY(idsi_put_modules(out, degree));
    IDSI_TRY(idsi_text_puts(out, "</g>\n"));
done:
    return st;
}

ids_status idsi_report_svg(idsi_press *press)
{
    ids_status st = IDS_OK;
    idsi_text *out = &press->out;
    idsi_degree degree = {0};
    size_t at = 0;
    int32_t y = HEADING;

    IDSI_TRY(put_head(press, sheet_height(press)));
    if (has_growth(press)) {
        IDSI_TRY(idsi_text_printf(out, "<g transform=\"translate(%d %d)\">\n", MARGIN, (int)y));
        IDSI_TRY(idsi_put_growth(out, press->report));
        IDSI_TRY(idsi_text_puts(out, "</g>\n"));
        y += idsi_growth_height() + BELOW;
    }
    IDSI_TRY(put_dimensions(press, y));
    y += table_height(press->report);
    while (idsi_report_next_degree(press->report, &at, &degree)) {
        if (degree.partitions > 0) {
            IDSI_TRY(put_degree(press, &degree, y));
            IDSI_TRY(idsi_press_pour(press));
            y += SECTION + idsi_modules_height(&degree) + BELOW;
        }
    }
    IDSI_TRY(idsi_text_puts(out, "</svg>\n"));
done:
    return st;
}
