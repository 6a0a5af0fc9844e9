/* SPDX-License-Identifier: BSD-2-Clause */
/* Teams of threads: every task is done once, whatever the numbers of tasks and members. */
#include <stdatomic.h>
#include <stdlib.h>

#include "core/team_private.h"
#include "support.h"

#define MOST_TASKS 300u
#define MOST_MEMBERS 5u

typedef struct record {
    atomic_uint done[MOST_TASKS];
    atomic_uint strangers; /* members with a number that there is not */
    uint32_t members;
} record;

static void note(void *user, uint32_t member, size_t task)
{
    record *r = user;

    atomic_fetch_add(&r->done[task], 1);
    if (member >= r->members) {
        atomic_fetch_add(&r->strangers, 1);
    }
}

START_TEST(test_every_task_once)
{
    ids_ctx *ctx = test_ctx();

    for (uint32_t members = 0; members <= MOST_MEMBERS; members++) {
        idsi_team *team = NULL;
        TEST_OK(ctx, idsi_team_create(ctx, members, &team));
        ck_assert_uint_ge(idsi_team_size(team), 1);
        ck_assert_uint_le(idsi_team_size(team), members == 0 ? 1 : members);
        for (size_t tasks = 0; tasks <= MOST_TASKS; tasks += tasks < 10 ? 1 : 58) {
            record r = {.members = idsi_team_size(team)};
            unsigned wrong = 0;
            idsi_team_run(team, tasks, note, &r);
            for (size_t i = 0; i < MOST_TASKS; i++) {
                wrong += atomic_load(&r.done[i]) != (i < tasks ? 1u : 0u);
            }
            ck_assert_uint_eq(wrong, 0);
            ck_assert_uint_eq(atomic_load(&r.strangers), 0);
        }
        idsi_team_free(team);
    }
    test_ctx_free(ctx);
}
END_TEST

/* What a task has written is seen by the caller and by the tasks of the next round. */
static void add_up(void *user, uint32_t member, size_t task)
{
    uint64_t *sums = user;

    (void)member;
    sums[task] = sums[task] * 3 + task;
}

START_TEST(test_rounds)
{
    ids_ctx *ctx = test_ctx();
    idsi_team *team = NULL;
    uint64_t sums[16] = {0};
    uint64_t expected[16] = {0};

    TEST_OK(ctx, idsi_team_create(ctx, 3, &team));
    for (int round = 0; round < 2000; round++) {
        idsi_team_run(team, 16, add_up, sums);
        for (size_t i = 0; i < 16; i++) {
            add_up(expected, 0, i);
        }
    }
    for (size_t i = 0; i < 16; i++) {
        ck_assert_uint_eq(sums[i], expected[i]);
    }
    idsi_team_free(team);
    idsi_team_free(NULL);
    test_ctx_free(ctx);
}
END_TEST

/* The context's number is a limit, however large. */
START_TEST(test_members)
{
    ids_ctx *ctx = test_ctx();

    ck_assert_uint_eq(idsi_team_members(NULL, 7), 1);
    ck_assert_uint_eq(idsi_team_members(ctx, 7), 1);
    ids_ctx_set_threads(ctx, 5);
    ck_assert_uint_eq(idsi_team_members(ctx, 0), 1);
    ck_assert_uint_eq(idsi_team_members(ctx, 3), 3);
    ck_assert_uint_eq(idsi_team_members(ctx, UINT64_MAX), 5);
    ids_ctx_set_threads(ctx, UINT32_MAX);
    ck_assert_uint_eq(idsi_team_members(ctx, 3), 3);
    ck_assert_uint_eq(idsi_team_members(ctx, UINT64_MAX), IDS_MAX_THREADS);
    test_ctx_free(ctx);
}
END_TEST

static ids_status make_team(ids_ctx *ctx, void *data)
{
    idsi_team *team = NULL;
    ids_status st = idsi_team_create(ctx, 2, &team);

    (void)data;
    idsi_team_free(team);
    return st;
}

START_TEST(test_refused_memory)
{
    TEST_OOM(make_team, NULL);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("core: teams");
    TCase *tcase = tcase_create("teams");

    tcase_set_timeout(tcase, 20);
    tcase_add_test(tcase, test_every_task_once);
    tcase_add_test(tcase, test_rounds);
    tcase_add_test(tcase, test_members);
    tcase_add_test(tcase, test_refused_memory);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
