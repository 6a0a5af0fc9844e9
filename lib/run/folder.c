/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Files in a run folder.
 *
 * A file is written under a temporary name, synced, and renamed to its own name: until then the old
 * file is there, if there was one. After the folder is synced too, it survives a crash of the
 * system. A temporary file belongs to whoever made it, which the system decides (O_EXCL): threads
 * have one process number, and so may processes in two containers. Those of processes that died are
 * swept away by whoever has the folder alone.
 */
#include <dirent.h>
#include <errno.h>
#include <fcntl.h>
#include <stdio.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "run_private.h"

#define TEMPORARY "idspan-tmp-" /* what begins so is ours to remove */
#define TEMPORARY_NAME (sizeof TEMPORARY + IDS_RUN_NAME + 32)

static ids_status fail_io(ids_ctx *ctx, const char *verb, const char *folder, const char *name)
{
    int error = errno;
    char reason[128] = "";

    if (strerror_r(error, reason, sizeof reason) != 0) {
        snprintf(reason, sizeof reason, "error %d", error);
    }
    return idsi_fail(ctx, IDS_ERR_IO, "cannot %s \"%s%s%s\": %s", verb, folder,
                     name != NULL ? "/" : "", name != NULL ? name : "", reason);
}

/* What cannot be synced at all, as folders in some file systems, is as safe as it can be. */
static bool sync_all(int fd)
{
    int failed = 0;

    do {
        failed = fsync(fd);
    } while (failed != 0 && errno == EINTR);
    return failed == 0 || errno == EINVAL;
}

/* Syncs the entry of an open folder in the folder above, unless that is closed to us. */
static bool sync_entry(int folder)
{
    int above = openat(folder, "..", O_RDONLY | O_DIRECTORY | O_CLOEXEC);
    bool synced = false;
    int error = 0;

    if (above < 0) {
        return errno == EACCES;
    }
    synced = sync_all(above);
    error = errno;
    close(above);
    errno = error;
    return synced;
}

ids_status idsi_folder_open(ids_ctx *ctx, const char *folder, bool make, int *fd)
{
    ids_status st = IDS_OK;
    int opened = -1;

    if (make && mkdir(folder, 0777) != 0 && errno != EEXIST) {
        return fail_io(ctx, "make the folder", folder, NULL);
    }
    opened = open(folder, O_RDONLY | O_DIRECTORY | O_CLOEXEC);
    if (opened < 0) {
        return fail_io(ctx, "open the folder", folder, NULL);
    }
    if (make && !sync_entry(opened)) {
        st = fail_io(ctx, "make the folder", folder, NULL);
        close(opened);
        return st;
    }
    *fd = opened;
    return IDS_OK;
}

/* ---- reading ----------------------------------------------------------------------------- */

/* All of an open file, with a NUL after it. */
static ids_status read_all(ids_ctx *ctx, int file, char **bytes, size_t *length)
{
    ids_status st = IDS_OK;
    idsi_text text;
    char piece[4096];

    idsi_text_init(&text, ctx);
    for (;;) {
        ssize_t got = read(file, piece, sizeof piece);
        if (got < 0 && errno == EINTR) {
            continue;
        }
        if (got < 0) {
            st = IDS_ERR_IO;
            goto done;
        }
        if (got == 0) {
            break;
        }
        IDSI_TRY(idsi_text_append(&text, piece, (size_t)got));
        if (text.length > IDSI_FILE_MAX) {
            break; /* too long to be ours: the checksum will not fit */
        }
    }
    *length = text.length;
    IDSI_TRY(idsi_text_take(&text, bytes));
done:
    idsi_text_clear(&text);
    return st;
}

ids_status idsi_folder_read(ids_ctx *ctx, const idsi_folder *folder, const char *name,
                            char **bytes, size_t *length)
{
    ids_status st = IDS_OK;
    int file = openat(folder->fd, name, O_RDONLY | O_CLOEXEC);

    *bytes = NULL;
    *length = 0;
    if (file < 0 && errno == ENOENT) {
        return IDS_OK;
    }
    if (file < 0) {
        return fail_io(ctx, "read", folder->path, name);
    }
    st = read_all(ctx, file, bytes, length);
    if (st == IDS_ERR_IO) {
        fail_io(ctx, "read", folder->path, name);
    }
    close(file);
    return st;
}

/* ---- writing ----------------------------------------------------------------------------- */

static bool write_all(int file, const char *bytes, size_t length)
{
    while (length > 0) {
        ssize_t put = write(file, bytes, length);
        if (put < 0 && errno != EINTR) {
            return false;
        }
        if (put > 0) {
            bytes += put;
            length -= (size_t)put;
        }
    }
    return sync_all(file);
}

/* A new file that is nobody else's; its name is for people who find it. */
static int open_temporary(const idsi_folder *folder, char name[TEMPORARY_NAME])
{
    char host[IDS_RUN_NAME] = "";
    int file = -1;

    idsi_host(host);
    for (unsigned k = 0; file < 0 && (k == 0 || errno == EEXIST); k++) {
        snprintf(name, TEMPORARY_NAME, TEMPORARY "%s-%d-%u", host, (int)getpid(), k);
        file = openat(folder->fd, name, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
    }
    return file;
}

ids_status idsi_folder_write(ids_ctx *ctx, const idsi_folder *folder, const char *name,
                             const char *bytes, size_t length)
{
    char temporary[TEMPORARY_NAME] = "";
    int file = open_temporary(folder, temporary);

    if (file < 0) {
        return fail_io(ctx, "write", folder->path, name);
    }
    bool written = write_all(file, bytes, length);
    int error = errno;
    if (close(file) != 0 && written) {
        error = errno;
        written = false;
    }
    if (written && renameat(folder->fd, temporary, folder->fd, name) != 0) {
        error = errno;
        written = false;
    }
    if (!written) {
        unlinkat(folder->fd, temporary, 0);
        errno = error;
        return fail_io(ctx, "write", folder->path, name);
    }
    return IDS_OK;
}

ids_status idsi_folder_sync(ids_ctx *ctx, const idsi_folder *folder)
{
    return sync_all(folder->fd) ? IDS_OK : fail_io(ctx, "sync the folder", folder->path, NULL);
}

void idsi_folder_remove(const idsi_folder *folder, const char *name)
{
    (void)unlinkat(folder->fd, name, 0);
}

/* ---- the list of files ------------------------------------------------------------------- */

static DIR *open_list(const idsi_folder *folder)
{
    int copy = openat(folder->fd, ".", O_RDONLY | O_DIRECTORY | O_CLOEXEC);
    DIR *list = copy >= 0 ? fdopendir(copy) : NULL;

    if (list == NULL && copy >= 0) {
        close(copy);
    }
    return list;
}

/* The next name in the list that begins so; NULL: no more. */
static const char *next_name(DIR *list, const char *beginning)
{
    for (struct dirent *entry = readdir(list); entry != NULL; entry = readdir(list)) {
        if (strncmp(entry->d_name, beginning, strlen(beginning)) == 0) {
            return entry->d_name;
        }
    }
    return NULL;
}

ids_status idsi_folder_holds(ids_ctx *ctx, const idsi_folder *folder, const char *beginning,
                             bool *holds)
{
    DIR *list = open_list(folder);

    if (list == NULL) {
        return fail_io(ctx, "list the folder", folder->path, NULL);
    }
    *holds = next_name(list, beginning) != NULL;
    closedir(list);
    return IDS_OK;
}

/* Best effort: what cannot be listed or removed does no harm. */
void idsi_folder_sweep(const idsi_folder *folder)
{
    DIR *list = open_list(folder);
    const char *name = NULL;

    while (list != NULL && (name = next_name(list, TEMPORARY)) != NULL) {
        idsi_folder_remove(folder, name);
    }
    if (list != NULL) {
        closedir(list);
    }
}
