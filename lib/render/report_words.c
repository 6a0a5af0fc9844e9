/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * How reports write numbers, partitions, certainty, times and sizes: without markup where one
 * spelling serves the picture and the page alike.
 */
#include <inttypes.h>
#include <stdio.h>
#include <string.h>

#include "report_private.h"

/* Fewer digits are read at a glance. */
#define FIRST_GROUPED 5u
#define DIGIT_WIDTH 7
#define GROUP_WIDTH 2

const idsi_grouping idsi_grouping_html = {"<span>", "</span>"};
const idsi_grouping idsi_grouping_svg = {"<tspan dx=\"2\">", "</tspan>"};

ids_status idsi_put_number(idsi_text *out, uint64_t number, const idsi_grouping *grouping)
{
    ids_status st = IDS_OK;
    char digits[24] = "";
    size_t length = (size_t)snprintf(digits, sizeof digits, "%" PRIu64, number);
    size_t head = (length + 2) % 3 + 1;

    if (length < FIRST_GROUPED) {
        return idsi_text_puts(out, digits);
    }
    IDSI_TRY(idsi_text_append(out, digits, head));
    for (size_t i = head; i < length; i += 3) {
        IDSI_TRY(idsi_text_puts(out, grouping->before));
        IDSI_TRY(idsi_text_append(out, digits + i, 3));
        IDSI_TRY(idsi_text_puts(out, grouping->after));
    }
done:
    return st;
}

int32_t idsi_number_width(uint64_t number)
{
    int32_t length = 1;

    for (; number >= 10; number /= 10) {
        length++;
    }
    return DIGIT_WIDTH * length + (length < (int32_t)FIRST_GROUPED ? 0 : (length - 1) / 3 * 2);
}

/* ---- partitions -------------------------------------------------------------------------- */

ids_status idsi_put_partition(idsi_text *out, const ids_partition *partition)
{
    ids_status st = IDS_OK;

    for (uint32_t i = 0; i < partition->length; i++) {
        IDSI_TRY(idsi_text_printf(out, "%s%u", i > 0 ? "+" : "", (unsigned)partition->part[i]));
    }
done:
    return st;
}

ids_status idsi_put_raised(idsi_text *out, uint32_t number)
{
    static const char *const raised[10] = {"\u2070", "\u00B9", "\u00B2", "\u00B3", "\u2074",
                                           "\u2075", "\u2076", "\u2077", "\u2078", "\u2079"};
    ids_status st = IDS_OK;
    char digits[16] = "";

    snprintf(digits, sizeof digits, "%u", (unsigned)number);
    for (const char *at = digits; *at != '\0'; at++) {
        IDSI_TRY(idsi_text_puts(out, raised[*at - '0']));
    }
done:
    return st;
}

ids_status idsi_put_exponents(idsi_text *out, const ids_partition *partition)
{
    ids_status st = IDS_OK;
    uint32_t next = 0;

    for (uint32_t i = 0; i < partition->length; i = next) {
        for (next = i; next < partition->length && partition->part[next] == partition->part[i];) {
            next++;
        }
        IDSI_TRY(idsi_text_printf(out, "%s%u", i > 0 ? " " : "", (unsigned)partition->part[i]));
        if (next > i + 1) {
            IDSI_TRY(idsi_put_raised(out, next - i));
        }
    }
done:
    return st;
}

/* ---- the rest ---------------------------------------------------------------------------- */

ids_status idsi_put_certainty(idsi_text *out, const ids_partition_row *numbers)
{
    if (numbers->certainty == IDS_CERTAINTY_EXACT) {
        return idsi_text_puts(out, "exact");
    }
    return idsi_text_printf(out, "2^-%u", (unsigned)numbers->bits);
}

/* Two units at most: nobody reads the seconds of a night. */
ids_status idsi_put_time(idsi_text *out, uint64_t milliseconds)
{
    uint64_t seconds = milliseconds / 1000;

    if (milliseconds < 1000) {
        return idsi_text_printf(out, "%" PRIu64 " ms", milliseconds);
    }
    if (seconds < 60) {
        return idsi_text_printf(out, "%" PRIu64 ".%" PRIu64 " s", seconds,
                                milliseconds % 1000 / 100);
    }
    if (seconds < 3600) {
        return idsi_text_printf(out, "%" PRIu64 " min %02" PRIu64 " s", seconds / 60, seconds % 60);
    }
    return idsi_text_printf(out, "%" PRIu64 " h %02" PRIu64 " min", seconds / 3600,
                            seconds / 60 % 60);
}

ids_status idsi_put_bytes(idsi_text *out, uint64_t bytes)
{
    static const char *const units[] = {"KiB", "MiB", "GiB", "TiB"};
    uint64_t tenths = bytes > UINT64_MAX / 10 ? UINT64_MAX / 1024 : bytes * 10 / 1024;
    size_t unit = 0;

    while (tenths >= 10240 && unit + 1 < sizeof units / sizeof *units) {
        tenths /= 1024;
        unit++;
    }
    if (tenths < 100) {
        return idsi_text_printf(out, "%" PRIu64 ".%" PRIu64 " %s", tenths / 10, tenths % 10,
                                units[unit]);
    }
    return idsi_text_printf(out, "%" PRIu64 " %s", tenths / 10, units[unit]);
}
