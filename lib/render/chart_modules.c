/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The multiplicities of one degree as bars, one line a partition.
 *
 *     partition  dimension   free   consequences          quotient
 *     5                  1      9   [======] 5            [####] 4
 *     4+1                4     15   [============] 11     [####] 4
 *                                   hollow bars           solid bars
 *
 * Multiplicities of the two kinds can differ by orders of magnitude, and zeros are what one looks
 * for, so the kinds have panels with scales of their own rather than one logarithmic scale. Every
 * number stands beside its bar; nothing depends on colour. All lengths are whole pixels.
 */
#include <inttypes.h>

#include "report_private.h"

#define HEAD 30
#define LINE 18
#define BASE 13 /* from the top of a line to its baseline */
#define BAR 10
#define EDGE 8
#define PARTITION_WIDTH 92
#define COLUMN_GAP 22
#define HEADING_WIDTH 62 /* of the word "dimension" */
#define NUMBER_GAP 6     /* between a bar and its number */

/* Where things stand. */
typedef struct panels {
    int32_t dimension; /* right edge */
    int32_t free;      /* right edge */
    int32_t left[2];   /* left edges: consequences, quotient */
    int32_t longest;   /* length of the longest bar of a panel */
    uint64_t most[2];  /* what it stands for */
} panels;

int32_t idsi_modules_height(const idsi_degree *degree)
{
    return HEAD + LINE * (int32_t)degree->partitions + EDGE;
}

static uint64_t larger(uint64_t a, uint64_t b)
{
    return a > b ? a : b;
}

static panels measure(const idsi_degree *degree)
{
    panels p = {0};
    uint64_t dimension = 0;
    uint64_t free = 0;
    int32_t number = 0;

    for (size_t i = 0; i < degree->partitions; i++) {
        const ids_partition_row *row = &degree->rows[i].given.numbers;
        free = larger(free, row->free);
        dimension = larger(dimension, row->dimension);
        if (idsi_report_is_done(&degree->rows[i])) {
            p.most[0] = larger(p.most[0], row->consequences);
            p.most[1] = larger(p.most[1], row->quotient);
        }
    }
    number = idsi_number_width(dimension);
    p.dimension = EDGE + PARTITION_WIDTH + (number > HEADING_WIDTH ? number : HEADING_WIDTH);
    number = idsi_number_width(free);
    p.free = p.dimension + COLUMN_GAP + (number > COLUMN_GAP ? number : COLUMN_GAP);
    p.left[0] = p.free + COLUMN_GAP;
    p.longest = IDSI_CHART_WIDTH - EDGE - p.left[0] - COLUMN_GAP - 2 * NUMBER_GAP;
    p.longest -= idsi_number_width(p.most[0]) + idsi_number_width(p.most[1]);
    p.longest = p.longest > 40 ? p.longest / 2 : 20;
    p.left[1] = p.left[0] + p.longest + NUMBER_GAP + idsi_number_width(p.most[0]) + COLUMN_GAP;
    return p;
}

static ids_status put_heading(idsi_text *out, int32_t x, const char *anchor, const char *word)
{
    return idsi_text_printf(out, "<text class=\"head%s\" x=\"%d\" y=\"%d\">%s</text>\n", anchor,
                            (int)x, HEAD - 12, word);
}

static ids_status put_headings(idsi_text *out, const panels *p)
{
    ids_status st = IDS_OK;

    IDSI_TRY(put_heading(out, EDGE, "", "partition"));
    IDSI_TRY(put_heading(out, p->dimension, " end", "dimension"));
    IDSI_TRY(put_heading(out, p->free, " end", "free"));
    IDSI_TRY(put_heading(out, p->left[0], "", "consequences"));
    IDSI_TRY(put_heading(out, p->left[1], "", "quotient"));
    IDSI_TRY(idsi_text_printf(out, "<path class=\"rule\" d=\"M0 %dH%d\"/>\n", HEAD - 3,
                              IDSI_CHART_WIDTH));
done:
    return st;
}

static ids_status put_count(idsi_text *out, const char *class, int32_t x, int32_t y,
                            uint64_t number)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_printf(out, "<text class=\"%s\" x=\"%d\" y=\"%d\">", class, (int)x,
                              (int)(y + BASE)));
    IDSI_TRY(idsi_put_number(out, number, &idsi_grouping_svg));
    IDSI_TRY(idsi_text_puts(out, "</text>"));
done:
    return st;
}

/* A bar with its number. A number that is not zero has at least a pixel. */
static ids_status put_bar(idsi_text *out, const panels *p, int32_t panel, uint64_t number,
                          int32_t y)
{
    static const char *const classes[2] = {"cons", "quot"};
    ids_status st = IDS_OK;
    int32_t length = 0;

    if (number == 0) {
        return put_count(out, "quiet num", p->left[panel], y, number);
    }
    length = (int32_t)((double)p->longest * (double)number / (double)p->most[panel]);
    length = length > 0 ? length : 1;
    IDSI_TRY(idsi_text_printf(
        out, "<rect class=\"%s\" x=\"%d\" y=\"%d\" width=\"%d\" height=\"%d\"/>", classes[panel],
        (int)p->left[panel], (int)(y + (LINE - BAR) / 2), (int)length, BAR));
    IDSI_TRY(put_count(out, "num", p->left[panel] + length + NUMBER_GAP, y, number));
done:
    return st;
}

/* What a screen reader or a resting pointer is told of a line. */
static ids_status put_line_title(idsi_text *out, const idsi_report_row *row)
{
    const ids_partition_row *numbers = &row->given.numbers;
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(out, "<title>"));
    IDSI_TRY(idsi_put_partition(out, &numbers->partition));
    if (idsi_report_is_done(row)) {
        IDSI_TRY(idsi_text_printf(out,
                                  ": dimension %" PRIu64 ", free %" PRIu64 ", consequences %" PRIu64
                                  ", quotient %" PRIu64 ", ",
                                  numbers->dimension, numbers->free, numbers->consequences,
                                  numbers->quotient));
        IDSI_TRY(idsi_put_certainty(out, numbers));
    } else {
        bool failed = row->given.state == IDS_REPORT_FAILED;
        IDSI_TRY(idsi_text_puts(out, failed ? ": failed" : ": not yet computed"));
    }
    IDSI_TRY(idsi_text_puts(out, "</title>"));
done:
    return st;
}

static ids_status put_line(idsi_text *out, const panels *p, const idsi_report_row *row, int32_t y)
{
    const ids_partition_row *numbers = &row->given.numbers;
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(out, "<g class=\"module\">"));
    IDSI_TRY(put_line_title(out, row));
    /* The whole line answers the pointer. */
    IDSI_TRY(idsi_text_printf(out, "<rect class=\"%s\" y=\"%d\" width=\"%d\" height=\"%d\"/>",
                              (y - HEAD) / LINE % 2 == 1 ? "band" : "clear", (int)y,
                              IDSI_CHART_WIDTH, LINE));
    IDSI_TRY(
        idsi_text_printf(out, "<text class=\"num\" x=\"%d\" y=\"%d\">", EDGE, (int)(y + BASE)));
    IDSI_TRY(idsi_put_exponents(out, &numbers->partition));
    IDSI_TRY(idsi_text_puts(out, "</text>"));
    if (numbers->free > 0 || idsi_report_is_done(row)) {
        IDSI_TRY(put_count(out, "quiet num end", p->free, y, numbers->free));
    }
    IDSI_TRY(put_count(out, "quiet num end", p->dimension, y, numbers->dimension));
    if (idsi_report_is_done(row)) {
        IDSI_TRY(put_bar(out, p, 0, numbers->consequences, y));
        IDSI_TRY(put_bar(out, p, 1, numbers->quotient, y));
    } else {
        bool failed = row->given.state == IDS_REPORT_FAILED;
        IDSI_TRY(idsi_text_printf(out, "<text class=\"gap\" x=\"%d\" y=\"%d\">%s</text>",
                                  (int)p->left[0], (int)(y + BASE),
                                  failed ? "failed" : "not yet computed"));
    }
    IDSI_TRY(idsi_text_puts(out, "</g>\n"));
done:
    return st;
}

ids_status idsi_put_modules(idsi_text *out, const idsi_degree *degree)
{
    ids_status st = IDS_OK;
    panels p = measure(degree);

    IDSI_TRY(put_headings(out, &p));
    for (size_t i = 0; i < degree->partitions; i++) {
        IDSI_TRY(put_line(out, &p, &degree->rows[i], HEAD + LINE * (int32_t)i));
    }
done:
    return st;
}
