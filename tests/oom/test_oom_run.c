/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory while runs are made, read and computed; support.h tells what TEST_OOM does. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/run.h>

#include "support.h"

static const char text[] = "operation a*b commutative\noperation (a,b,c)\n"
                           "identity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n";

typedef struct job {
    char folder[32];
    ids_run_options options;
} job;

static job open_job(bool by_partition, uint32_t to)
{
    job j = {.folder = "oom-run-XXXXXX",
             .options = {.struct_size = sizeof j.options,
                         .from = 1,
                         .to = to,
                         .by_partition = by_partition,
                         .primes = 2}};
    ck_assert_ptr_nonnull(mkdtemp(j.folder));
    return j;
}

static void close_job(const job *j)
{
    char command[64];
    snprintf(command, sizeof command, "rm -rf %s", j->folder);
    ck_assert_int_eq(system(command), 0);
}

/* Makes a run or goes on with it, with more degrees every other time. */
static ids_status store(ids_ctx *ctx, void *data)
{
    job *j = data;
    ids_run *run = NULL;
    ids_run_line line;
    ids_run_info info;
    ids_cell_result result = {.free = 3, .quotient = 2};
    size_t index = 0;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_run_create(ctx, j->folder, text, sizeof text - 1, "text", &j->options,
                            IDS_RUN_ALONE, &run));
    IDSI_TRY(ids_run_cell_find(run, "2.1+1", &index));
    IDSI_TRY(ids_run_store_failure(run, index, "no luck"));
    IDSI_TRY(ids_run_store(run, index, &result));
    IDSI_TRY(ids_run_refresh(run));
    ck_assert_int_eq(ids_run_describe(run, &info), IDS_OK);
    ck_assert_uint_eq(info.done, 1);
    for (size_t i = 0; i < ids_run_line_count(run); i++) {
        IDSI_TRY(ids_run_line_get(run, i, &line));
    }
done:
    ids_run_free(run);
    return st;
}

START_TEST(test_store)
{
    job j = open_job(true, 2);
    TEST_OOM(store, &j);
    close_job(&j);
}
END_TEST

/* Computes all cells of a run that is there, and keeps nothing. */
static ids_status compute(ids_ctx *ctx, void *data)
{
    job *j = data;
    ids_run *run = NULL;
    ids_run_work *work = NULL;
    double seconds = 0;
    uint64_t memory = 0;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_run_open(ctx, j->folder, IDS_RUN_READ, &run));
    IDSI_TRY(ids_run_plan(run));
    IDSI_TRY(ids_run_work_create(run, j->options.to, &work));
    IDSI_TRY(ids_run_work_grow(work, j->options.to));
    for (size_t i = 0; i < ids_run_cell_count(run); i++) {
        ids_cell_result result = {0};
        IDSI_TRY(ids_run_work_estimate(work, i, &seconds, &memory));
        IDSI_TRY(ids_run_work_cell(work, i, &result));
        ck_assert_uint_le(result.quotient, result.free);
    }
done:
    ids_run_work_free(work);
    ids_run_free(run);
    return st;
}

START_TEST(test_compute)
{
    job j = open_job(_i == 0, 4);
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;

    TEST_OK(ctx, ids_run_create(ctx, j.folder, text, sizeof text - 1, "text", &j.options,
                                IDS_RUN_ALONE, &run));
    ids_run_free(run);
    test_ctx_free(ctx);
    TEST_OOM(compute, &j);
    close_job(&j);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("oom: runs");
    TCase *tcase = tcase_create("run");

    tcase_set_timeout(tcase, 100);
    tcase_add_test(tcase, test_store);
    tcase_add_loop_test(tcase, test_compute, 0, 2);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
