/* SPDX-License-Identifier: BSD-2-Clause */
/* The context: options, last error, progress and cancel. */
#include "support.h"

#include <inttypes.h>
#include <pthread.h>
#include <sched.h>
#include <signal.h>
#include <stdatomic.h>
#include <stdio.h>
#include <string.h>
#include <time.h>

static uint64_t milliseconds(void)
{
    struct timespec now = {0};

    clock_gettime(CLOCK_MONOTONIC, &now);
    return (uint64_t)now.tv_sec * 1000 + (uint64_t)now.tv_nsec / 1000000;
}

START_TEST(test_create_arguments)
{
    ids_ctx_options options = {0};
    ids_ctx *ctx = NULL;

    ck_assert_int_eq(ids_ctx_create(NULL, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_ERR_ARG);
    options.struct_size = sizeof options + 1;
    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_ERR_ARG);
    ck_assert_ptr_null(ctx);
    options.struct_size = sizeof options;
    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    ids_ctx_free(ctx);
}
END_TEST

START_TEST(test_null_context)
{
    ids_ctx_free(NULL);
    ids_ctx_cancel(NULL);
    ids_ctx_set_threads(NULL, 3);
    ck_assert_str_eq(ids_ctx_message(NULL), "");
    ck_assert_int_eq(ids_ctx_last_status(NULL), IDS_ERR_ARG);
    ck_assert_uint_eq(ids_ctx_last_place(NULL).line, 0);
    ck_assert_uint_eq(ids_ctx_memory(NULL).live, 0);
    ck_assert_int_eq(idsi_fail(NULL, IDS_ERR_IO, "%d", 1), IDS_ERR_IO);
    ck_assert_int_eq(idsi_poll(NULL, NULL), IDS_OK);
    ck_assert_uint_eq(idsi_threads(NULL), 1);
}
END_TEST

START_TEST(test_last_error)
{
    ids_ctx *ctx = test_ctx();
    ids_place place = {3, 14};

    ck_assert_str_eq(ids_ctx_message(ctx), "");
    ck_assert_int_eq(ids_ctx_last_status(ctx), IDS_OK);
    ck_assert_int_eq(idsi_fail_at(ctx, IDS_ERR_PARSE, place, "expected %s", "')'"), IDS_ERR_PARSE);
    ck_assert_str_eq(ids_ctx_message(ctx), "expected ')'");
    ck_assert_int_eq(ids_ctx_last_status(ctx), IDS_ERR_PARSE);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).line, 3);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).column, 14);
    /* a message can be built on the one before */
    ck_assert_int_eq(idsi_fail(ctx, IDS_ERR_IO, "in a.pres: %s", ids_ctx_message(ctx)), IDS_ERR_IO);
    ck_assert_str_eq(ids_ctx_message(ctx), "in a.pres: expected ')'");
    ck_assert_uint_eq(ids_ctx_last_place(ctx).line, 0);
    ck_assert_int_eq(idsi_fail_arg(ctx, "degree"), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "degree"));
    test_ctx_free(ctx);
}
END_TEST

/* A long message of two-byte characters, begun at an even and at an odd place, is cut between
 * characters and says that it was cut. */
START_TEST(test_long_message)
{
    ids_ctx *ctx = test_ctx();
    char text[6002] = "";
    const char *message = NULL;
    size_t length = 0;

    for (size_t i = 0; i + 2 < sizeof text; i += 2) {
        memcpy(text + i, "\xC3\xA9", 3);
    }
    ck_assert_int_eq(idsi_fail(ctx, IDS_ERR_ARG, "%s%s", _i == 0 ? "" : "x", text), IDS_ERR_ARG);
    message = ids_ctx_message(ctx);
    length = strlen(message);
    ck_assert_uint_gt(length, 4000);
    ck_assert_uint_lt(length, 4096);
    ck_assert_str_eq(message + length - 3, "...");
    ck_assert_uint_eq((length - 3) % 2, (size_t)_i);
    ck_assert_int_eq((unsigned char)message[length - 4], 0xA9);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_threads_option)
{
    ids_ctx *ctx = test_ctx();

    ck_assert_uint_eq(idsi_threads(ctx), 1);
    ids_ctx_set_threads(ctx, 5);
    ck_assert_uint_eq(idsi_threads(ctx), 5);
    ids_ctx_set_threads(ctx, 0);
    ck_assert_uint_eq(idsi_threads(ctx), 1);
    test_ctx_free(ctx);
}
END_TEST

static ids_ctx *cancelled_by_signal;

static void on_signal(int number)
{
    (void)number;
    ids_ctx_cancel(cancelled_by_signal);
}

START_TEST(test_cancel)
{
    ids_ctx *ctx = test_ctx();
    struct sigaction action = {0};

    TEST_OK(ctx, idsi_poll(ctx, NULL));
    ids_ctx_cancel(ctx);
    TEST_STATUS(ctx, idsi_poll(ctx, NULL), IDS_ERR_CANCELLED);
    ck_assert_int_eq(ids_ctx_last_status(ctx), IDS_ERR_CANCELLED);
    /* answered: the context is usable again */
    TEST_OK(ctx, idsi_poll(ctx, NULL));
    ids_ctx_cancel(ctx);
    ids_ctx_cancel_clear(ctx);
    TEST_OK(ctx, idsi_poll(ctx, NULL));
    ids_ctx_cancel_clear(NULL);

    cancelled_by_signal = ctx;
    action.sa_handler = on_signal;
    ck_assert_int_eq(sigaction(SIGUSR1, &action, NULL), 0);
    ck_assert_int_eq(raise(SIGUSR1), 0);
    TEST_STATUS(ctx, idsi_poll(ctx, NULL), IDS_ERR_CANCELLED);
    test_ctx_free(ctx);
}
END_TEST

/* ---- several threads, one cancel ------------------------------------------------------------- */

typedef struct poll_race {
    ids_ctx *ctx;
    atomic_bool over;
    atomic_uint told; /* how often a poll said that it is cancelled */
} poll_race;

static void poll_race_once(poll_race *race)
{
    if (idsi_poll(race->ctx, NULL) == IDS_ERR_CANCELLED) {
        atomic_fetch_add(&race->told, 1);
    }
}

static void *poll_on(void *data)
{
    poll_race *race = data;

    while (!atomic_load(&race->over)) {
        poll_race_once(race);
    }
    return NULL;
}

/* Of two threads that poll at the same time exactly one answers a cancel. */
START_TEST(test_cancel_is_told_once)
{
    poll_race race = {.ctx = test_ctx()};
    pthread_t other;
    uint64_t end = milliseconds() + 500;
    unsigned cancels = 0;

    ck_assert_int_eq(pthread_create(&other, NULL, poll_on, &race), 0);
    while (atomic_load(&race.told) == cancels && milliseconds() < end) {
        cancels++;
        ids_ctx_cancel(race.ctx);
        poll_race_once(&race);
        while (atomic_load(&race.told) < cancels) {
            sched_yield();
        }
        for (int i = 0; i < 100; i++) {
            poll_race_once(&race); /* time for a second answer to arrive */
        }
    }
    atomic_store(&race.over, true);
    ck_assert_int_eq(pthread_join(other, NULL), 0);
    ck_assert_uint_eq(atomic_load(&race.told), cancels);
    test_ctx_free(race.ctx);
}
END_TEST

/* ---- the hook -------------------------------------------------------------------------------- */

typedef struct hook_log {
    unsigned calls;
    int answer;
    ids_progress last;
} hook_log;

static int log_progress(void *user, const ids_progress *progress)
{
    hook_log *log = user;

    log->calls++;
    log->last = *progress;
    return log->answer;
}

static ids_ctx *ctx_with_hook(hook_log *log)
{
    ids_ctx_options options = {0};
    ids_ctx *ctx = NULL;

    options.struct_size = sizeof options;
    options.progress = log_progress;
    options.progress_user = log;
    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    return ctx;
}

START_TEST(test_hook_is_told)
{
    hook_log log = {0};
    ids_ctx *ctx = ctx_with_hook(&log);
    ids_progress progress = {"rank", 7, 3, 10, 0.25};

    TEST_OK(ctx, idsi_poll(ctx, &progress));
    ck_assert_uint_eq(log.calls, 1);
    TEST_OK(ctx, idsi_poll(ctx, NULL));
    ck_assert_uint_eq(log.calls, 1);
    ck_assert_str_eq(log.last.stage, "rank");
    ck_assert_uint_eq(log.last.degree, 7);
    ck_assert_uint_eq(log.last.done, 3);
    ck_assert_uint_eq(log.last.total, 10);
    test_ctx_free(ctx);
}
END_TEST

/* Work that does not count itself calls the hook too, which may cancel it. */
START_TEST(test_hook_without_progress)
{
    hook_log log = {0};
    ids_ctx *ctx = ctx_with_hook(&log);
    uint64_t begin = milliseconds();

    TEST_OK(ctx, idsi_poll(ctx, NULL));
    ck_assert_uint_eq(log.calls, 1);
    ck_assert_str_eq(log.last.stage, "");
    ck_assert_uint_eq(log.last.total, 0);
    log.answer = 1;
    while (log.calls < 2 && milliseconds() - begin < 3000) {
        ids_status st = idsi_poll(ctx, NULL);
        ck_assert_int_eq(st, log.calls < 2 ? IDS_OK : IDS_ERR_CANCELLED);
    }
    ck_assert_uint_eq(log.calls, 2);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_hook_rate)
{
    hook_log log = {0};
    ids_ctx *ctx = ctx_with_hook(&log);
    ids_progress progress = {"rank", 7, 3, 10, 0.25};
    uint64_t begin = milliseconds();
    uint64_t elapsed = 0;

    while (elapsed < 350) {
        TEST_OK(ctx, idsi_poll(ctx, &progress));
        elapsed = milliseconds() - begin;
    }
    ck_assert_uint_ge(log.calls, 2);
    ck_assert_uint_le(log.calls, 1 + elapsed / 100);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_hook_cancels)
{
    hook_log log = {0};
    ids_ctx *ctx = NULL;
    ids_progress progress = {"rank", 7, 3, 10, 0.25};

    log.answer = 1;
    ctx = ctx_with_hook(&log);
    TEST_STATUS(ctx, idsi_poll(ctx, &progress), IDS_ERR_CANCELLED);
    ck_assert_uint_gt(strlen(ids_ctx_message(ctx)), 0);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_own_allocator)
{
    test_allocator allocator;
    ids_ctx_options options = {0};
    ids_ctx *ctx = NULL;
    void *block = NULL;

    test_allocator_init(&allocator);
    options.struct_size = sizeof options;
    options.resize = test_resize;
    options.resize_user = &allocator;
    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    TEST_OK(ctx, idsi_alloc(ctx, 100, &block));
    ck_assert_uint_eq(allocator.live_blocks, 2);
    idsi_free(ctx, block);
    ids_ctx_free(ctx);
    ck_assert_uint_eq(allocator.live_blocks, 0);
    ck_assert_uint_eq(allocator.live_bytes, 0);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("core: context");
    TCase *tcase = tcase_create("context");

    tcase_add_test(tcase, test_create_arguments);
    tcase_add_test(tcase, test_null_context);
    tcase_add_test(tcase, test_last_error);
    tcase_add_loop_test(tcase, test_long_message, 0, 2);
    tcase_add_test(tcase, test_threads_option);
    tcase_add_test(tcase, test_cancel);
    tcase_add_test(tcase, test_cancel_is_told_once);
    tcase_add_test(tcase, test_hook_is_told);
    tcase_add_test(tcase, test_hook_without_progress);
    tcase_add_test(tcase, test_hook_rate);
    tcase_add_test(tcase, test_hook_cancels);
    tcase_add_test(tcase, test_own_allocator);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
