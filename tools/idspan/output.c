/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Output.
 *
 * A write that fails (full disk, closed pipe) is remembered with its reason and reported once, when
 * the output is closed; until then the sink refuses everything, which ends the task with
 * IDS_ERR_IO.
 *
 * A file is written under a temporary name beside the one it is to have, and gets that name when it
 * is complete, so that work that fails leaves an older file as it was. Where the place must stay
 * the same one it is written to directly: pipes and devices, /dev/stdout, a file of somebody else,
 * one with several names, and one in a folder that takes no new files. A symbolic link is followed.
 */
#include <errno.h>
#include <fcntl.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "tool.h"

bool output_is_file(const char *name, const char *other)
{
    struct stat first = {0};
    struct stat second = {0};

    return stat(name, &first) == 0 && stat(other, &second) == 0 && S_ISREG(first.st_mode) &&
           first.st_dev == second.st_dev && first.st_ino == second.st_ino;
}

/* Opens a new file beside `target`, which is not there or is `old`; NULL when that cannot be. */
static FILE *open_beside(const char *target, const struct stat *old, char **temporary)
{
    const size_t length = strlen(target) + 32;
    char *name = malloc(length);
    FILE *file = NULL;
    int descriptor = -1;

    if (name == NULL) {
        return NULL;
    }
    snprintf(name, length, "%s.part-%jd", target, (intmax_t)getpid());
    descriptor = open(name, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
    if (descriptor >= 0 && (old == NULL || fchmod(descriptor, old->st_mode & 07777) == 0)) {
        file = fdopen(descriptor, "wb");
    }
    if (file == NULL) {
        if (descriptor >= 0) {
            close(descriptor);
            unlink(name);
        }
        free(name);
        return NULL;
    }
    interrupt_removes(name);
    *temporary = name;
    return file;
}

/* Whether a file can give its place to another one without anybody's surprise. */
static bool is_replaceable(const char *name, const struct stat *old)
{
    static const char *const open_already[] = {"/dev/std", "/dev/fd/", "/proc/"};

    for (size_t i = 0; i < sizeof open_already / sizeof *open_already; i++) {
        if (strncmp(name, open_already[i], strlen(open_already[i])) == 0) {
            return false;
        }
    }
    return S_ISREG(old->st_mode) && old->st_nlink == 1 && old->st_uid == geteuid() &&
           access(name, W_OK) == 0;
}

bool output_open(output *out, const char *name)
{
    struct stat old = {0};
    const bool exists = name != NULL && lstat(name, &old) == 0;

    *out = (output){.file = stdout, .name = "standard output"};
    if (name == NULL || strcmp(name, "-") == 0) {
        return true;
    }
    out->name = name;
    out->file = NULL;
    out->target = exists ? realpath(name, NULL) : strdup(name);
    if (out->target != NULL && exists && stat(name, &old) == 0 && is_replaceable(name, &old)) {
        out->file = open_beside(out->target, &old, &out->temporary);
    } else if (out->target != NULL && !exists) {
        out->file = open_beside(out->target, NULL, &out->temporary);
    }
    if (out->file == NULL) {
        out->file = fopen(name, "wb");
    }
    if (out->file == NULL) {
        complain("cannot write \"%s\": %s", name, strerror(errno));
        free(out->target);
        out->target = NULL;
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

/* Gives the file its name, or takes it away. */
static void settle(output *out, bool keep)
{
    if (out->temporary == NULL) {
        return;
    }
    interrupt_removes(NULL);
    if (keep && out->error == 0) {
        errno = 0;
        if (rename(out->temporary, out->target) != 0) {
            note_error(out);
        }
    }
    if (!keep || out->error != 0) {
        unlink(out->temporary);
    }
}

bool output_close(output *out, bool keep)
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
    settle(out, keep);
    free(out->temporary);
    free(out->target);
    out->temporary = NULL;
    out->target = NULL;
    if (out->error != 0) {
        complain("cannot write %s: %s", out->name, strerror(out->error));
        return false;
    }
    return true;
}
