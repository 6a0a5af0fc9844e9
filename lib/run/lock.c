/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Who works in a run folder.
 *
 * The lock is an advisory lock of the system on the file `lock`, which ends with the processes that
 * hold it, however they end: it is never stale. What stands in the file is only for people. A
 * process that is copied, with fork(), holds the lock with its copies until the last one ends.
 */
#include <errno.h>
#include <fcntl.h>
#include <stdio.h>
#include <string.h>
#include <sys/file.h>
#include <time.h>
#include <unistd.h>

#include "run_private.h"

void idsi_host(char host[IDS_RUN_NAME])
{
    if (gethostname(host, IDS_RUN_NAME) != 0) {
        snprintf(host, IDS_RUN_NAME, "unknown");
    }
    host[IDS_RUN_NAME - 1] = '\0';
    for (char *at = host; *at != '\0'; at++) {
        bool plain = (*at >= '0' && *at <= '9') || (*at >= 'a' && *at <= 'z') ||
                     (*at >= 'A' && *at <= 'Z') || *at == '-' || *at == '.';
        if (!plain) {
            *at = '_';
        }
    }
}

void idsi_now(char text[IDS_RUN_NAME])
{
    time_t now = time(NULL);
    struct tm parts = {0};

    if (now == (time_t)-1 || gmtime_r(&now, &parts) == NULL ||
        strftime(text, IDS_RUN_NAME, "%Y-%m-%dT%H:%M:%SZ", &parts) == 0) {
        snprintf(text, IDS_RUN_NAME, "unknown");
    }
}

static ids_status fail_busy(ids_ctx *ctx, const idsi_folder *folder)
{
    char *bytes = NULL;
    size_t length = 0;
    ids_status st = idsi_folder_read(ctx, folder, IDSI_LOCK_FILE, &bytes, &length);

    if (st == IDS_OK) {
        if (bytes != NULL) {
            bytes[strcspn(bytes, "\n")] = '\0';
        }
        st = idsi_fail(ctx, IDS_ERR_UNABLE, "somebody else works in \"%s\": %s", folder->path,
                       bytes != NULL && bytes[0] != '\0' ? bytes : "who is not noted");
    }
    idsi_free(ctx, bytes);
    return st;
}

/* A note of who holds the lock; that it cannot be written (disk full) does not matter. */
static void sign(int file)
{
    char host[IDS_RUN_NAME] = "";
    char now[IDS_RUN_NAME] = "";
    char text[3 * IDS_RUN_NAME] = "";
    ssize_t written = 0;

    idsi_host(host);
    idsi_now(now);
    snprintf(text, sizeof text, "process %d on %s, since %s\n", (int)getpid(), host, now);
    if (ftruncate(file, 0) == 0) {
        written = pwrite(file, text, strlen(text), 0);
    }
    (void)written;
}

/* Processes that were killed need a moment to end, so it is tried for a second. */
static bool take_lock(int file, int how)
{
    const struct timespec pause = {0, 50000000};
    int tries = 0;

    while (flock(file, how) != 0) {
        if (errno == EINTR) {
            continue; /* a signal came while the system asked a file server */
        }
        if (errno != EWOULDBLOCK || tries == 20) {
            return false;
        }
        tries++;
        nanosleep(&pause, NULL);
    }
    return true;
}

ids_status idsi_folder_lock(ids_ctx *ctx, idsi_folder *folder, bool alone)
{
    int file = openat(folder->fd, IDSI_LOCK_FILE, O_RDWR | O_CREAT | O_CLOEXEC, 0666);

    if (file < 0) {
        char reason[128] = "";
        if (strerror_r(errno, reason, sizeof reason) != 0) {
            snprintf(reason, sizeof reason, "no reason is known");
        }
        return idsi_fail(ctx, IDS_ERR_IO, "cannot write in the folder \"%s\": %s", folder->path,
                         reason);
    }
    if (!take_lock(file, (alone ? LOCK_EX : LOCK_SH) | LOCK_NB)) {
        bool busy = errno == EWOULDBLOCK;
        ids_status st = busy ? fail_busy(ctx, folder)
                             : idsi_fail(ctx, IDS_ERR_IO,
                                         "the file system of \"%s\" has no locks", folder->path);
        close(file);
        return st;
    }
    sign(file);
    folder->lock = file;
    return IDS_OK;
}

void idsi_folder_close(idsi_folder *folder)
{
    if (folder->lock >= 0) {
        close(folder->lock);
    }
    if (folder->fd >= 0) {
        close(folder->fd);
    }
    folder->lock = -1;
    folder->fd = -1;
}
