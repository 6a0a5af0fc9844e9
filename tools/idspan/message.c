/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Input, output and messages.
 *
 * Results go to one place, messages to standard error. A write that fails (full disk, closed
 * pipe) is remembered with its reason and reported once, when the output is closed; until then
 * the sink refuses everything, which ends the task with IDS_ERR_IO.
 */
#include <errno.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
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

/* ---- output -------------------------------------------------------------------------- */

static bool same_file(const char *a, const char *b)
{
    struct stat first = {0};
    struct stat second = {0};

    return stat(a, &first) == 0 && stat(b, &second) == 0 && S_ISREG(first.st_mode) &&
           first.st_dev == second.st_dev && first.st_ino == second.st_ino;
}

bool output_open(output *out, const char *name, const char *source)
{
    out->error = 0;
    if (name == NULL || strcmp(name, "-") == 0) {
        out->file = stdout;
        out->name = "standard output";
        return true;
    }
    if (source != NULL && same_file(name, source)) {
        complain("--output would overwrite \"%s\", the file that is read", source);
        return false;
    }
    out->name = name;
    out->file = fopen(name, "wb");
    if (out->file == NULL) {
        complain("cannot write \"%s\": %s", name, strerror(errno));
        return false;
    }
    return true;
}

static void note_error(output *out)
{
    if (out->error == 0) {
        out->error = errno != 0 ? errno : EIO;
    }
}

int output_sink(void *user, const char *bytes, size_t length)
{
    output *out = user;

    progress_clear();
    if (out->error == 0) {
        errno = 0;
        if (fwrite(bytes, 1, length, out->file) != length) {
            note_error(out);
        }
    }
    return out->error;
}

ids_status output_printf(output *out, const char *format, ...)
{
    va_list args;
    int written = 0;

    progress_clear();
    if (out->error == 0) {
        errno = 0;
        va_start(args, format);
        written = vfprintf(out->file, format, args);
        va_end(args);
        if (written < 0) {
            note_error(out);
        }
    }
    return out->error == 0 ? IDS_OK : IDS_ERR_IO;
}

bool output_close(output *out)
{
    if (out->file == NULL) {
        return true;
    }
    errno = 0;
    if (fflush(out->file) != 0 || ferror(out->file)) {
        note_error(out);
    }
    errno = 0;
    if (out->file != stdout && fclose(out->file) != 0) {
        note_error(out);
    }
    out->file = NULL;
    if (out->error != 0) {
        complain("cannot write %s: %s", out->name, strerror(out->error));
        return false;
    }
    return true;
}
