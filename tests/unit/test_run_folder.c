/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * lib/run/folder.c and lock.c: what they do when the system interrupts them, cannot sync, or when
 * others write at the same time. fsync() and flock() are this file's own; a sync that is to work
 * is left to fdatasync(), or left out.
 */
#include <errno.h>
#include <pthread.h>
#include <stdatomic.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/file.h>
#include <sys/stat.h>
#include <unistd.h>

#include "run/run_private.h"
#include "support.h"

static const char jordan[] = "operation a*b commutative\nidentity ((x*x)*y)*x = (x*x)*(y*x)\n";

/* ---- the system ------------------------------------------------------------------------------ */

static struct {
    int interrupts;      /* calls that a signal interrupts first, of each kind */
    int lock_calls;      /* so far */
    atomic_int syncs;    /* so far */
    bool no_folder_sync; /* folders cannot be synced: the disk is broken */
    bool no_sync;        /* nothing is really synced */
    ino_t watched;       /* a folder */
    int watched_syncs;   /* how often it was synced, in one thread */
} fake;

int fsync(int fd)
{
    struct stat about;

    if (atomic_fetch_add(&fake.syncs, 1) < fake.interrupts) {
        errno = EINTR;
        return -1;
    }
    ck_assert_int_eq(fstat(fd, &about), 0);
    if (S_ISDIR(about.st_mode)) {
        if (fake.no_folder_sync) {
            errno = EIO;
            return -1;
        }
        if (about.st_ino == fake.watched) {
            fake.watched_syncs++;
        }
    }
    return fake.no_sync ? 0 : fdatasync(fd);
}

int flock(int fd, int how)
{
    (void)fd;
    (void)how;
    if (fake.lock_calls++ < fake.interrupts) {
        errno = EINTR;
        return -1;
    }
    return 0;
}

/* ---- a run ----------------------------------------------------------------------------------- */

static char place[32]; /* a folder; the run is in place/run */
static char folder[64];

static void make_place(void)
{
    memset(&fake, 0, sizeof fake);
    snprintf(place, sizeof place, "folder-XXXXXX");
    ck_assert_ptr_nonnull(mkdtemp(place));
    snprintf(folder, sizeof folder, "%s/run", place);
}

static void remove_place(void)
{
    char command[64];
    snprintf(command, sizeof command, "rm -rf '%s'", place);
    ck_assert_int_eq(system(command), 0);
}

static ids_status start(ids_ctx *ctx, ids_run_access access, ids_run **run)
{
    ids_run_options options = {
        .struct_size = sizeof options, .from = 1, .to = 3, .by_partition = true};

    return ids_run_create(ctx, folder, jordan, strlen(jordan), NULL, &options, access, run);
}

static void check_state(ids_run *run, size_t index, ids_cell_state expected)
{
    ids_cell cell;

    ck_assert_int_eq(ids_run_cell(run, index, &cell), IDS_OK);
    ck_assert_int_eq(cell.state, expected);
}

static const ids_cell_result result = {.free = 1, .quotient = 1};

/* Signals while the folder is locked and files are synced. */
START_TEST(test_interrupted)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;

    make_place();
    fake.interrupts = 3;
    TEST_OK(ctx, start(ctx, IDS_RUN_ALONE, &run));
    ck_assert_int_gt(fake.lock_calls, fake.interrupts);
    ck_assert_int_gt(fake.syncs, fake.interrupts);
    fake.syncs = 0;
    TEST_OK(ctx, ids_run_store(run, 0, &result));
    ck_assert_int_gt(fake.syncs, fake.interrupts);
    ids_run_free(run);
    remove_place();
    test_ctx_free(ctx);
}
END_TEST

/* A run whose folder is new is not lost with the entry of the folder. */
START_TEST(test_new_folder)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    struct stat above;

    make_place();
    ck_assert_int_eq(stat(place, &above), 0);
    fake.watched = above.st_ino;
    TEST_OK(ctx, start(ctx, IDS_RUN_ALONE, &run));
    ck_assert_int_ge(fake.watched_syncs, 1);
    ids_run_free(run);
    fake.no_folder_sync = true;
    TEST_STATUS(ctx, start(ctx, IDS_RUN_ALONE, &run), IDS_ERR_IO);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), folder));
    remove_place();
    test_ctx_free(ctx);
}
END_TEST

/* The cell is in place but may not survive a crash: that is said, and the run knows its cell. */
START_TEST(test_folder_cannot_sync)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    char note[128];

    make_place();
    TEST_OK(ctx, start(ctx, IDS_RUN_ALONE, &run));
    TEST_OK(ctx, ids_run_store_failure(run, 0, "no luck"));
    snprintf(note, sizeof note, "%s/failed-1.1.txt", folder);
    ck_assert_int_eq(access(note, F_OK), 0);
    fake.no_folder_sync = true;
    TEST_STATUS(ctx, ids_run_store(run, 0, &result), IDS_ERR_IO);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "cannot sync the folder"));
    check_state(run, 0, IDS_CELL_DONE);
    ck_assert_int_ne(access(note, F_OK), 0);
    TEST_OK(ctx, ids_run_refresh(run));
    check_state(run, 0, IDS_CELL_DONE);
    TEST_STATUS(ctx, ids_run_store_failure(run, 1, "no luck"), IDS_ERR_IO);
    check_state(run, 1, IDS_CELL_FAILED);
    ids_run_free(run);
    remove_place();
    test_ctx_free(ctx);
}
END_TEST

/* ---- others who write ------------------------------------------------------------------------ */

/* A temporary file that is there belongs to somebody else, who has our name and number. */
START_TEST(test_foreign_temporary)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    char host[IDS_RUN_NAME];
    char names[2][IDS_RUN_NAME + 128];
    struct stat about;

    make_place();
    TEST_OK(ctx, start(ctx, IDS_RUN_SHARED, &run));
    idsi_host(host);
    snprintf(names[0], sizeof names[0], "%s/idspan-tmp-%s-%d", folder, host, (int)getpid());
    snprintf(names[1], sizeof names[1], "%s/idspan-tmp-%s-%d-0", folder, host, (int)getpid());
    for (size_t i = 0; i < 2; i++) {
        FILE *file = fopen(names[i], "w");
        ck_assert_ptr_nonnull(file);
        ck_assert_int_gt(fputs("half of a cell", file), 0);
        ck_assert_int_eq(fclose(file), 0);
    }
    TEST_OK(ctx, ids_run_store(run, 0, &result));
    for (size_t i = 0; i < 2; i++) {
        ck_assert_int_eq(stat(names[i], &about), 0);
        ck_assert_int_eq(about.st_size, (off_t)strlen("half of a cell"));
    }
    TEST_OK(ctx, ids_run_refresh(run));
    check_state(run, 0, IDS_CELL_DONE);
    ids_run_free(run);
    remove_place();
    test_ctx_free(ctx);
}
END_TEST

/* What a killed writer has left is swept away by who has the folder alone; a user's file is not. */
START_TEST(test_sweep)
{
    static const char *const endings[] = {"idspan-tmp-host-1-0", "tmp-notes", "temporary"};
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    char names[3][PATH_MAX];
    struct stat about;

    make_place();
    TEST_OK(ctx, start(ctx, IDS_RUN_ALONE, &run));
    ids_run_free(run);
    for (size_t i = 0; i < 3; i++) {
        snprintf(names[i], sizeof names[i], "%s/%s", folder, endings[i]);
        FILE *file = fopen(names[i], "w");
        ck_assert_ptr_nonnull(file);
        ck_assert_int_eq(fclose(file), 0);
    }
    TEST_OK(ctx, start(ctx, IDS_RUN_ALONE, &run));
    for (size_t i = 0; i < 3; i++) {
        ck_assert_int_eq(stat(names[i], &about), i == 0 ? -1 : 0);
    }
    ids_run_free(run);
    remove_place();
    test_ctx_free(ctx);
}
END_TEST

static void *store_often(void *data)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    int *stored = data;

    if (ids_run_open(ctx, folder, IDS_RUN_SHARED, &run) == IDS_OK) {
        for (int k = 0; k < 300; k++) {
            *stored += ids_run_store(run, 0, &result) == IDS_OK;
        }
        ids_run_free(run);
    }
    test_ctx_free(ctx);
    return NULL;
}

START_TEST(test_threads_store)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    pthread_t threads[2];
    int stored[2] = {0};

    make_place();
    TEST_OK(ctx, start(ctx, IDS_RUN_ALONE, &run));
    fake.no_sync = true;
    for (size_t i = 0; i < 2; i++) {
        ck_assert_int_eq(pthread_create(&threads[i], NULL, store_often, &stored[i]), 0);
    }
    for (size_t i = 0; i < 2; i++) {
        ck_assert_int_eq(pthread_join(threads[i], NULL), 0);
    }
    ck_assert_int_eq(stored[0], 300);
    ck_assert_int_eq(stored[1], 300);
    TEST_OK(ctx, ids_run_refresh(run));
    check_state(run, 0, IDS_CELL_DONE);
    ids_run_free(run);
    remove_place();
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("run: folder");
    TCase *tcase = tcase_create("folder");

    tcase_add_test(tcase, test_interrupted);
    tcase_add_test(tcase, test_new_folder);
    tcase_add_test(tcase, test_folder_cannot_sync);
    tcase_add_test(tcase, test_foreign_temporary);
    tcase_add_test(tcase, test_sweep);
    tcase_add_test(tcase, test_threads_store);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
