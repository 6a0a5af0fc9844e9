/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The growth of the three dimensions with the degree, on a logarithmic scale.
 *
 *     10^3 |            o        o--o  free: thin line, open circles
 *          |        o   []       []--  consequences: dashed, open squares
 *     10   |   o    <>  <>       <>==  quotient: thick, solid diamonds
 *      0   |  []                       zeros have a line of their own below the scale
 *            2   3   4   5
 *
 * Only degrees whose total is known have points, and a line joins neighbouring degrees only.
 * Logarithms are computed with whole numbers, so that the picture is the same on every machine.
 */
#include <inttypes.h>

#include "report_private.h"

#define LEFT 48
#define RIGHT 112 /* room for the names of the lines */
#define TOP 14
#define PLOT 236
#define ZERO 26 /* from the value 1 down to the line of the zeros */
#define FOOT 40 /* below that line */
#define NAME_GAP 16
#define LOG_BITS 12
#define LOG_TEN 13607 /* log2(10) * 2^LOG_BITS */

enum { FREE, CONSEQUENCES, QUOTIENT, SERIES };

typedef struct scale {
    const ids_report *report;
    uint32_t first; /* degrees */
    uint32_t last;
    int32_t decades;
    bool zeros; /* some number is 0 */
} scale;

/* log2(number) * 2^LOG_BITS, rounded down, by repeated squaring; number >= 1. */
static int32_t logarithm(uint64_t number)
{
    int32_t whole = 63 - __builtin_clzll(number);
    int32_t part = 0;
    uint64_t mantissa = number << (63 - whole); /* 1 .. 2, times 2^63 */

    for (int32_t i = 0; i < LOG_BITS; i++) {
        __extension__ unsigned __int128 square = (unsigned __int128)mantissa * mantissa;
        part *= 2;
        if ((uint64_t)(square >> 127) != 0) {
            part++;
            square >>= 1;
        }
        mantissa = (uint64_t)(square >> 63);
    }
    return (whole << LOG_BITS) + part;
}

static uint64_t value_of(const idsi_report_row *total, uint32_t series)
{
    const ids_partition_row *numbers = &total->given.numbers;

    return series == FREE           ? numbers->free
           : series == CONSEQUENCES ? numbers->consequences
                                    : numbers->quotient;
}

/* The next degree whose total is known. */
static bool next_total(const ids_report *report, size_t *at, idsi_degree *degree)
{
    while (idsi_report_next_degree(report, at, degree)) {
        if (idsi_report_is_done(degree->total)) {
            return true;
        }
    }
    return false;
}

/* Returns the number of degrees. */
static size_t measure(scale *s)
{
    size_t count = 0;
    size_t at = 0;
    idsi_degree degree = {0};
    uint64_t most = 1;

    while (next_total(s->report, &at, &degree)) {
        s->first = count == 0 ? degree.degree : s->first;
        s->last = degree.degree;
        count++;
        for (uint32_t series = 0; series < SERIES; series++) {
            uint64_t value = value_of(degree.total, series);
            s->zeros = s->zeros || value == 0;
            most = value > most ? value : most;
        }
    }
    s->decades = 1;
    for (uint64_t rest = most; rest > 10; rest = rest / 10 + (rest % 10 > 0 ? 1 : 0)) {
        s->decades++;
    }
    return count;
}

bool idsi_growth_is_worth(const ids_report *report)
{
    scale s = {.report = report};
    return measure(&s) > 1;
}

int32_t idsi_growth_height(void)
{
    return TOP + PLOT + ZERO + FOOT;
}

static int32_t x_of(const scale *s, uint32_t degree)
{
    int32_t steps = s->last > s->first ? (int32_t)(s->last - s->first) : 1;
    return LEFT + 16 +
           (IDSI_CHART_WIDTH - LEFT - RIGHT - 32) * (int32_t)(degree - s->first) / steps;
}

static int32_t y_of(const scale *s, uint64_t value)
{
    int64_t height = s->decades * LOG_TEN;

    if (value == 0) {
        return TOP + PLOT + ZERO;
    }
    return TOP + PLOT - (int32_t)((PLOT * (int64_t)logarithm(value) + height / 2) / height);
}

/* ---- axes -------------------------------------------------------------------------------- */

static ids_status put_level(idsi_text *out, int32_t y, const char *class)
{
    return idsi_text_printf(out,
                            "<path class=\"%s\" d=\"M%d %dH%d\"/>"
                            "<text class=\"quiet num end\" x=\"%d\" y=\"%d\">",
                            class, LEFT, (int)y, IDSI_CHART_WIDTH - RIGHT, LEFT - 8, (int)(y + 4));
}

static ids_status put_levels(idsi_text *out, const scale *s)
{
    ids_status st = IDS_OK;
    int32_t step = s->decades > 9 ? 2 : 1;

    for (int32_t i = 0; i <= s->decades; i += step) {
        int32_t y = TOP + PLOT - PLOT * i / s->decades;
        IDSI_TRY(put_level(out, y, i == 0 && !s->zeros ? "rule" : "grid"));
        IDSI_TRY(idsi_text_puts(out, i == 0 ? "1" : "10"));
        if (i > 1) {
            IDSI_TRY(idsi_put_raised(out, (uint32_t)i));
        }
        IDSI_TRY(idsi_text_puts(out, "</text>\n"));
    }
    if (s->zeros) {
        IDSI_TRY(put_level(out, TOP + PLOT + ZERO, "rule"));
        IDSI_TRY(idsi_text_puts(out, "0</text>\n"));
    }
done:
    return st;
}

static ids_status put_degrees(idsi_text *out, const scale *s)
{
    ids_status st = IDS_OK;
    uint32_t step = (s->last - s->first) / 20 + 1;
    int32_t base = TOP + PLOT + (s->zeros ? ZERO : 0);

    for (uint32_t degree = s->first; degree <= s->last; degree += step) {
        IDSI_TRY(idsi_text_printf(out,
                                  "<text class=\"quiet num mid\" x=\"%d\" y=\"%d\">%u</text>\n",
                                  (int)x_of(s, degree), (int)(base + 18), (unsigned)degree));
    }
    IDSI_TRY(idsi_text_printf(out, "<text class=\"head\" x=\"%d\" y=\"%d\">degree</text>\n",
                              IDSI_CHART_WIDTH - RIGHT + 10, (int)(base + 18)));
done:
    return st;
}

/* ---- lines ------------------------------------------------------------------------------- */

static const char *const names[SERIES] = {"free", "consequences", "quotient"};
static const char *const classes[SERIES] = {"free", "cons", "quot"};

/* Joins what is there of neighbouring degrees; zeros have no place on the scale. */
static ids_status put_path(idsi_text *out, const scale *s, uint32_t series)
{
    ids_status st = IDS_OK;
    idsi_degree degree = {0};
    uint32_t before = 0;
    size_t at = 0;

    IDSI_TRY(idsi_text_printf(out, "<path class=\"line %s\" d=\"M", classes[series]));
    IDSI_TRY(idsi_text_printf(out, "%d %d", (int)x_of(s, s->first), TOP + PLOT));
    while (next_total(s->report, &at, &degree)) {
        uint64_t value = value_of(degree.total, series);
        if (value > 0) {
            IDSI_TRY(idsi_text_printf(out, "%s%d %d",
                                      before + 1 == degree.degree && before > 0 ? "L" : "M",
                                      (int)x_of(s, degree.degree), (int)y_of(s, value)));
        }
        before = value > 0 ? degree.degree : 0;
    }
    IDSI_TRY(idsi_text_puts(out, "\"/>\n"));
done:
    return st;
}

static ids_status put_mark(idsi_text *out, uint32_t series, int32_t x, int32_t y)
{
    switch (series) {
    case FREE:
        return idsi_text_printf(out, "<circle class=\"mark free\" cx=\"%d\" cy=\"%d\" r=\"6\"/>",
                                (int)x, (int)y);
    case CONSEQUENCES:
        return idsi_text_printf(out,
                                "<rect class=\"mark cons\" x=\"%d\" y=\"%d\" width=\"9\" "
                                "height=\"9\"/>",
                                (int)(x - 4), (int)(y - 4));
    default:
        return idsi_text_printf(out, "<path class=\"mark quot\" d=\"M%d %dl4 4l-4 4l-4 -4z\"/>",
                                (int)x, (int)(y - 4));
    }
}

static ids_status put_marks(idsi_text *out, const scale *s, uint32_t series)
{
    ids_status st = IDS_OK;
    idsi_degree degree = {0};
    size_t at = 0;

    while (next_total(s->report, &at, &degree)) {
        uint64_t value = value_of(degree.total, series);
        IDSI_TRY(idsi_text_printf(out,
                                  "<g class=\"point\"><title>degree %u: %s %" PRIu64 "</title>",
                                  (unsigned)degree.degree, names[series], value));
        IDSI_TRY(put_mark(out, series, x_of(s, degree.degree), y_of(s, value)));
        IDSI_TRY(idsi_text_puts(out, "</g>\n"));
    }
done:
    return st;
}

/* The names stand at the ends of the lines, moved apart where these meet. */
static ids_status put_names(idsi_text *out, const scale *s)
{
    static const uint32_t order[SERIES] = {FREE, CONSEQUENCES, QUOTIENT};
    ids_status st = IDS_OK;
    idsi_degree degree = {0};
    size_t at = 0;
    int32_t y[SERIES] = {0};
    uint32_t upper = CONSEQUENCES;
    uint32_t lower = QUOTIENT;

    while (next_total(s->report, &at, &degree)) {
        for (uint32_t series = 0; series < SERIES; series++) {
            y[series] = y_of(s, value_of(degree.total, series));
        }
    }
    if (y[CONSEQUENCES] > y[QUOTIENT]) {
        upper = QUOTIENT;
        lower = CONSEQUENCES;
    }
    /* free is never below the others */
    y[upper] = y[upper] < y[FREE] + NAME_GAP ? y[FREE] + NAME_GAP : y[upper];
    y[lower] = y[lower] < y[upper] + NAME_GAP ? y[upper] + NAME_GAP : y[lower];
    for (size_t i = 0; i < SERIES; i++) {
        uint32_t series = order[i];
        int32_t x = IDSI_CHART_WIDTH - RIGHT + 10;
        IDSI_TRY(put_mark(out, series, x, y[series]));
        IDSI_TRY(idsi_text_printf(out, "<text class=\"name\" x=\"%d\" y=\"%d\">%s</text>\n",
                                  (int)(x + 12), (int)(y[series] + 4), names[series]));
    }
done:
    return st;
}

ids_status idsi_put_growth(idsi_text *out, const ids_report *report)
{
    ids_status st = IDS_OK;
    scale s = {.report = report};

    (void)measure(&s);
    IDSI_TRY(put_levels(out, &s));
    IDSI_TRY(put_degrees(out, &s));
    for (uint32_t series = 0; series < SERIES; series++) {
        IDSI_TRY(put_path(out, &s, series));
    }
    for (uint32_t series = 0; series < SERIES; series++) {
        IDSI_TRY(put_marks(out, &s, series));
    }
    IDSI_TRY(put_names(out, &s));
done:
    return st;
}
