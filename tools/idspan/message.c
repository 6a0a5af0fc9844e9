/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Messages, on standard error, and input.
 */
#include <errno.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "tool.h"

void complain(const char *format, ...)
{
    va_list args;

    progress_clear();
    fputs("idspan: ", stderr);
    va_start(args, format);
    vfprintf(stderr, format, args);
    va_end(args);
    fputs("\n", stderr);
}

/* ---- input --------------------------------------------------------------------------- */

/* Says why a file cannot be opened, and whether its name only lacks the usual ending. */
static void complain_of_input(const char *name, int error)
{
    char longer[4096];
    int used = snprintf(longer, sizeof longer, "%s.pres", name);

    if (error == ENOENT && used > 0 && (size_t)used < sizeof longer && access(longer, R_OK) == 0) {
        complain("there is no file \"%s\"; did you mean \"%s\"?", name, longer);
    } else if (error == ENOENT) {
        complain("there is no file \"%s\"", name);
    } else {
        complain("cannot read \"%s\": %s", name, strerror(error));
    }
}

static bool read_stream(FILE *file, char **text, size_t *length)
{
    size_t capacity = 0;
    size_t used = 0;
    char *all = NULL;

    for (;;) {
        if (used == capacity) {
            size_t larger = capacity > 0 ? 2 * capacity : 16384;
            char *grown = larger > capacity ? realloc(all, larger) : NULL;
            if (grown == NULL) {
                free(all);
                errno = ENOMEM;
                return false;
            }
            all = grown;
            capacity = larger;
        }
        size_t got = fread(all + used, 1, capacity - used, file);
        used += got;
        if (got == 0) {
            break;
        }
    }
    if (ferror(file)) {
        int error = errno;
        free(all);
        errno = error;
        return false;
    }
    *text = all;
    *length = used;
    return true;
}

bool input_read(const char *name, char **text, size_t *length)
{
    bool standard = strcmp(name, "-") == 0;
    FILE *file = standard ? stdin : fopen(name, "rb");
    bool read = false;

    if (file == NULL) {
        complain_of_input(name, errno);
        return false;
    }
    read = read_stream(file, text, length);
    if (!read) {
        complain("cannot read %s%s%s: %s", standard ? "standard input" : "\"", standard ? "" : name,
                 standard ? "" : "\"", strerror(errno));
    }
    if (!standard) {
        fclose(file);
    }
    return read;
}
