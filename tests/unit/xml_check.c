/* SPDX-License-Identifier: BSD-2-Clause */
/* Whether a text is well-formed XML, by a few lines of our own and by xmllint. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "xml_check.h"

void check_xml(const char *at)
{
    const char *open[16] = {0};
    size_t lengths[16] = {0};
    size_t depth = 0;

    ck_assert_msg(strncmp(at, "<?xml ", 6) == 0 || strncmp(at, "<!DOCTYPE html>", 15) == 0,
                  "the beginning is: %.40s", at);
    at = strchr(at, '>') + 1;
    for (; *at != '\0'; at++) {
        if (*at == '>') {
            ck_abort_msg("a loose > at: %.40s", at);
        }
        if (*at == '&') {
            ck_assert_msg(strncmp(at, "&lt;", 4) == 0 || strncmp(at, "&gt;", 4) == 0 ||
                              strncmp(at, "&amp;", 5) == 0 || strncmp(at, "&quot;", 6) == 0 ||
                              strncmp(at, "&#39;", 5) == 0,
                          "a loose & at: %.40s", at);
        }
        if (*at != '<') {
            continue;
        }
        const char *end = strchr(at, '>');
        ck_assert_ptr_nonnull(end);
        size_t length = strcspn(at + 1, " />");
        if (at[1] == '/') {
            length = strcspn(at + 2, ">");
            ck_assert_uint_gt(depth, 0);
            depth--;
            ck_assert_msg(lengths[depth] == length && memcmp(open[depth], at + 2, length) == 0,
                          "%.20s closes %.20s", at, open[depth]);
        } else if (end[-1] != '/') {
            ck_assert_uint_lt(depth, 16);
            open[depth] = at + 1;
            lengths[depth++] = length;
        }
        at = end;
    }
    ck_assert_uint_eq(depth, 0);
}

void check_xmllint(const char *text, size_t length)
{
    char name[] = "/tmp/idspan_draw_XXXXXX";
    char command[128] = "";
    int file = mkstemp(name);

    ck_assert_int_ge(file, 0);
    ck_assert_int_eq(write(file, text, length), (ssize_t)length);
    close(file);
    snprintf(command, sizeof command, "command -v xmllint >/dev/null && xmllint --noout %s", name);
    if (system("command -v xmllint >/dev/null") == 0) {
        ck_assert_int_eq(system(command), 0);
    }
    unlink(name);
}
