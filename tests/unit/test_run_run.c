/* SPDX-License-Identifier: BSD-2-Clause */
/* lib/run: folders, cells, tables. */
#include <fcntl.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include <idspan/idspan.h>

#include "run_support.h"
#include "support.h"

static const char jordan[] = "operation a*b commutative\n"
                             "identity jordan: ((x*x)*y)*x = (x*x)*(y*x) # a comment\n";
/* The same identity, written in another way and with another name. */
static const char renamed[] = "operation a*b commutative\n"
                              "identity j: x*(y*(x*x)) - (x*x)*(y*x)\ncandidate c: x*x\n";
static const char other[] = "operation a*b commutative\nidentity (x*x)*x = 0\n";

static void compute_all(ids_ctx *ctx, ids_run *run, uint32_t top)
{
    ids_run_work *work = NULL;

    TEST_OK(ctx, ids_run_work_create(run, top, &work));
    for (size_t i = 0; i < ids_run_cell_count(run); i++) {
        ids_cell cell;
        ids_cell_result result;
        TEST_OK(ctx, ids_run_cell(run, i, &cell));
        if (cell.state != IDS_CELL_DONE && cell.degree <= top) {
            TEST_OK(ctx, ids_run_work_cell(work, i, &result));
            TEST_OK(ctx, ids_run_store(run, i, &result));
        }
    }
    ids_run_work_free(work);
}

static void check_row(const ids_partition_row *a, const ids_partition_row *b)
{
    ck_assert_uint_eq(a->degree, b->degree);
    ck_assert_uint_eq(a->total, b->total);
    ck_assert_mem_eq(&a->partition, &b->partition, sizeof a->partition);
    ck_assert_uint_eq(a->dimension, b->dimension);
    ck_assert_uint_eq(a->free, b->free);
    ck_assert_uint_eq(a->consequences, b->consequences);
    ck_assert_uint_eq(a->quotient, b->quotient);
    ck_assert_int_eq(a->certainty, b->certainty);
    ck_assert_uint_eq(a->bits, b->bits);
}

/* The table in cells is the table in one piece, with one prime and with three. */
START_TEST(test_same_table)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_partition_table *table = NULL;
    ids_run *run = NULL;
    ids_run_options asked = run_question(2, 7);
    ids_partition_options options = {.struct_size = sizeof options, .seed = 3};

    run_make_folder();
    options.primes = asked.primes = _i == 0 ? 1 : 3;
    asked.seed = 3;
    TEST_OK(ctx, ids_presentation_read(ctx, jordan, strlen(jordan), "a", &pres));
    TEST_OK(ctx, ids_partition_table_create(ctx, pres, 2, 7, &options, &table));
    TEST_OK(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run));
    compute_all(ctx, run, 5); /* in two goes: nothing depends on where the first one ended */
    compute_all(ctx, run, 7);
    ids_run_free(run);
    TEST_OK(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run));
    ck_assert_uint_eq(ids_run_line_count(run), ids_partition_table_count(table));
    for (size_t i = 0; i < ids_run_line_count(run); i++) {
        ids_run_line line;
        ids_partition_row row;
        TEST_OK(ctx, ids_run_line_get(run, i, &line));
        TEST_OK(ctx, ids_partition_table_row(table, i, &row));
        ck_assert_int_eq(line.state, IDS_CELL_DONE);
        check_row(&line.row, &row);
    }
    ck_assert_uint_eq(ids_run_prime_count(run), ids_partition_table_prime_count(table));
    for (size_t i = 0; i < ids_run_prime_count(run); i++) {
        ck_assert_uint_eq(ids_run_prime(run, i), ids_partition_table_prime(table, i));
    }
    ids_run_free(run);
    ids_partition_table_free(table);
    ids_presentation_free(pres);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* The probability of a cell is the one that its bits round down, and 0 when there is no doubt. */
static void check_error(const ids_run *run, size_t index)
{
    ids_cell cell;

    ck_assert_int_eq(ids_run_cell(run, index, &cell), IDS_OK);
    double bound = ldexp(1, -(int)cell.result.bits);
    bool doubt = cell.result.certainty == IDS_CERTAINTY_MODULAR;
    ck_assert(cell.result.error <= bound);
    ck_assert(doubt ? cell.result.error > bound / 2 : cell.result.error == 0);
}

/* A run of whole degrees is the rank table. */
START_TEST(test_same_degrees)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_rank_table *table = NULL;
    ids_run *run = NULL;
    ids_rank_options options = {.struct_size = sizeof options};
    ids_run_options asked = run_question(1, 6);

    run_make_folder();
    asked.by_partition = false;
    asked.exact = options.exact = _i == 1;
    asked.field = options.field = _i == 2 ? 3 : 0;
    TEST_OK(ctx, ids_presentation_read(ctx, jordan, strlen(jordan), "a", &pres));
    TEST_OK(ctx, ids_rank_table_create(ctx, pres, 1, 6, &options, &table));
    TEST_OK(ctx, run_start(ctx, jordan, asked, IDS_RUN_SHARED, &run));
    compute_all(ctx, run, 6);
    TEST_OK(ctx, ids_run_refresh(run));
    ck_assert_uint_eq(ids_run_line_count(run), 6);
    for (size_t i = 0; i < 6; i++) {
        ids_run_line line;
        ids_rank_row row;
        TEST_OK(ctx, ids_run_line_get(run, i, &line));
        TEST_OK(ctx, ids_rank_table_row(table, i, &row));
        ck_assert(line.row.total && line.state == IDS_CELL_DONE && line.cell == i);
        ck_assert_uint_eq(line.row.free, row.free);
        ck_assert_uint_eq(line.row.consequences, row.consequences);
        ck_assert_uint_eq(line.row.quotient, row.quotient);
        ck_assert_int_eq(line.row.certainty, row.certainty);
        ck_assert_uint_eq(line.row.bits, row.bits);
        check_error(run, i);
    }
    for (size_t i = 0; i < ids_run_prime_count(run); i++) {
        ck_assert_uint_eq(ids_run_prime(run, i), ids_rank_table_prime(table, i));
    }
    ids_run_free(run);
    ids_rank_table_free(table);
    ids_presentation_free(pres);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* What may go on in a run_folder, and what is another run. */
START_TEST(test_refused)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_run *second = NULL;
    ids_run_options more = run_question(1, 5);
    ids_run_info info;

    run_make_folder();
    TEST_OK(ctx, run_start(ctx, jordan, run_question(2, 4), IDS_RUN_ALONE, &run));
    TEST_STATUS(ctx, run_start(ctx, jordan, run_question(2, 4), IDS_RUN_ALONE, &second),
                IDS_ERR_UNABLE);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "process "));
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_SHARED, &second), IDS_ERR_UNABLE);
    TEST_OK(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &second));
    ids_run_free(second);
    ids_run_free(run);

    TEST_STATUS(ctx, run_start(ctx, other, run_question(2, 4), IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "identities"));
    more.seed = 1;
    TEST_STATUS(ctx, run_start(ctx, jordan, more, IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    more.seed = 0;
    more.primes = 2;
    TEST_STATUS(ctx, run_start(ctx, jordan, more, IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    more.primes = 1;
    more.by_partition = false;
    TEST_STATUS(ctx, run_start(ctx, jordan, more, IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    more.by_partition = true;
    TEST_STATUS(ctx, run_start(ctx, jordan, run_question(2, 3), IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, run_start(ctx, jordan, more, IDS_RUN_SHARED, &run), IDS_ERR_ARG);
    TEST_OK(ctx, run_start(ctx, renamed, run_question(2, 4), IDS_RUN_SHARED, &run));
    TEST_OK(ctx, run_start(ctx, jordan, run_question(2, 4), IDS_RUN_SHARED, &second));
    ids_run_free(second);
    ids_run_free(run);
    TEST_OK(ctx, run_start(ctx, jordan, more, IDS_RUN_ALONE, &run));
    TEST_OK(ctx, ids_run_describe(run, &info));
    ck_assert_uint_eq(info.options.from, 1);
    ck_assert_uint_eq(info.options.to, 5);
    ck_assert_uint_eq(ids_run_cell_count(run), 1 + 2 + 3 + 5 + 7);
    ck_assert_str_eq(info.text, jordan);
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* Changes a byte of a file, or cuts it. */
static void damage(const char *name, uint64_t place, bool cut)
{
    char path[160];
    struct stat state;
    unsigned char byte = 0;

    snprintf(path, sizeof path, "%s/%s", run_folder, name);
    ck_assert_int_eq(stat(path, &state), 0);
    uint64_t bit = place % (8 * (uint64_t)state.st_size);
    if (cut) {
        ck_assert_int_eq(truncate(path, (off_t)(bit / 8)), 0);
        return;
    }
    int file = open(path, O_RDWR);
    ck_assert_int_ge(file, 0);
    ck_assert_int_eq(pread(file, &byte, 1, (off_t)(bit / 8)), 1);
    byte = (unsigned char)(byte ^ 1u << bit % 8);
    ck_assert_int_eq(pwrite(file, &byte, 1, (off_t)(bit / 8)), 1);
    close(file);
}

/* Damage in any place is found, and the cell is computed again. */
START_TEST(test_damage)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_run_info info;
    uint64_t seed = test_seed();
    idsi_random random;

    run_make_folder();
    test_random(&random, 8);
    TEST_OK(ctx, run_start(ctx, jordan, run_question(1, 4), IDS_RUN_ALONE, &run));
    compute_all(ctx, run, 4);
    for (int round = 0; round < 200; round++) {
        ids_cell cell;
        char name[128];
        size_t victim = idsi_random_below(&random, ids_run_cell_count(run));
        TEST_OK(ctx, ids_run_cell(run, victim, &cell));
        snprintf(name, sizeof name, "cell-%s.txt", cell.id);
        damage(name, idsi_random_next(&random), round % 4 == 3);
        TEST_OK(ctx, ids_run_refresh(run));
        TEST_OK(ctx, ids_run_cell(run, victim, &cell));
        ck_assert_msg(cell.state == IDS_CELL_DAMAGED && cell.message[0] != '\0', "seed %llu",
                      (unsigned long long)seed);
        TEST_OK(ctx, ids_run_describe(run, &info));
        ck_assert_uint_eq(info.damaged, 1);
        if (round % 10 == 0) {
            compute_all(ctx, run, 4);
            TEST_OK(ctx, ids_run_cell(run, victim, &cell));
            ck_assert_int_eq(cell.state, IDS_CELL_DONE);
        } else { /* put back */
            ids_run_work *work = NULL;
            ids_cell_result result;
            TEST_OK(ctx, ids_run_work_create(run, cell.degree, &work));
            TEST_OK(ctx, ids_run_work_cell(work, victim, &result));
            TEST_OK(ctx, ids_run_store(run, victim, &result));
            ids_run_work_free(work);
        }
    }
    ids_run_free(run);
    damage("run.txt", 300, false);
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    TEST_OK(ctx, run_start(ctx, jordan, run_question(1, 4), IDS_RUN_ALONE, &run));
    ids_run_free(run);
    damage("presentation.pres", 50, false);
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    TEST_OK(ctx, run_start(ctx, jordan, run_question(1, 4), IDS_RUN_ALONE, &run));
    TEST_OK(ctx, ids_run_describe(run, &info));
    ck_assert_uint_eq(info.done, ids_run_cell_count(run));
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* A failure is noted, and the note goes away with a result; another cell's file is not taken. */
START_TEST(test_failure)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_cell cell;
    ids_run_options asked = run_question(3, 4);
    char command[256];
    size_t index = 0;

    run_make_folder();
    TEST_OK(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run));
    TEST_OK(ctx, ids_run_cell_find(run, "4.2+2", &index));
    ck_assert_uint_eq(index, 5);
    TEST_STATUS(ctx, ids_run_cell_find(run, "4.4+2", &index), IDS_ERR_ARG);
    TEST_OK(ctx, ids_run_store_failure(run, index, "out of luck\nand more"));
    ids_run_free(run);
    TEST_OK(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run));
    TEST_OK(ctx, ids_run_cell(run, index, &cell));
    ck_assert_int_eq(cell.state, IDS_CELL_FAILED);
    ck_assert_str_eq(cell.message, "out of luck");
    compute_all(ctx, run, 4);
    TEST_OK(ctx, ids_run_refresh(run));
    TEST_OK(ctx, ids_run_cell(run, index, &cell));
    ck_assert_int_eq(cell.state, IDS_CELL_DONE);
    ids_run_free(run);
    snprintf(command, sizeof command, "cp %s/cell-4.4.txt %s/cell-4.3+1.txt", run_folder,
             run_folder);
    ck_assert_int_eq(system(command), 0);
    TEST_OK(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run));
    TEST_OK(ctx, ids_run_cell_find(run, "4.3+1", &index));
    TEST_OK(ctx, ids_run_cell(run, index, &cell));
    ck_assert_int_eq(cell.state, IDS_CELL_DAMAGED);
    ck_assert_ptr_nonnull(strstr(cell.message, "another cell"));
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* Estimates are there, and are exact for the memory of a cell whose lower degrees are. */
START_TEST(test_plan)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_run_work *work = NULL;
    ids_cell cell;
    double seconds = 0;
    uint64_t memory = 0;

    run_make_folder();
    TEST_OK(ctx, run_start(ctx, jordan, run_question(2, 8), IDS_RUN_ALONE, &run));
    TEST_OK(ctx, ids_run_plan(run));
    TEST_OK(ctx, ids_run_work_create(run, 8, &work));
    TEST_OK(ctx, ids_run_work_grow(work, 8));
    for (size_t i = 0; i < ids_run_cell_count(run); i++) {
        TEST_OK(ctx, ids_run_cell(run, i, &cell));
        ck_assert(cell.seconds >= 0 && cell.seconds < 100);
        TEST_OK(ctx, ids_run_work_estimate(work, i, &seconds, &memory));
        ck_assert(cell.degree < 5 || memory < 20 * cell.memory);
        ck_assert(cell.degree < 5 || cell.memory < 20 * memory);
    }
    ids_run_work_free(work);
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* Runs that cannot be opened or made. */
START_TEST(test_misuse_question)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_run_options asked = run_question(1, 3);

    snprintf(run_folder, sizeof run_folder, "no/such/folder");
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_IO);
    TEST_STATUS(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run), IDS_ERR_IO);
    run_make_folder();
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_IO);
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, (ids_run_access)7, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_run_open(ctx, NULL, IDS_RUN_READ, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, run_start(ctx, jordan, asked, IDS_RUN_READ, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, run_start(ctx, jordan, run_question(0, 3), IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, run_start(ctx, jordan, run_question(3, 2), IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, run_start(ctx, jordan, run_question(1, 17), IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, run_start(ctx, "nonsense", asked, IDS_RUN_ALONE, &run), IDS_ERR_PARSE);
    asked.primes = IDS_MAX_PRIMES + 1;
    TEST_STATUS(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    asked.primes = 1;
    asked.exact = true;
    TEST_STATUS(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    asked.by_partition = false;
    asked.field = 5;
    TEST_STATUS(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    asked.exact = false;
    asked.field = 6;
    TEST_STATUS(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    asked.struct_size = 1;
    TEST_STATUS(ctx, run_start(ctx, jordan, asked, IDS_RUN_ALONE, &run), IDS_ERR_ARG);
    ck_assert_ptr_null(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* Calls that a run refuses. */
START_TEST(test_misuse_cells)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_run_work *work = NULL;
    ids_cell cell;
    ids_cell_result result = {0};
    ids_run_line line;
    size_t index = 0;

    run_make_folder();
    TEST_OK(ctx, run_start(ctx, jordan, run_question(1, 3), IDS_RUN_ALONE, &run));
    TEST_STATUS(ctx, ids_run_work_create(run, 4, &work), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_run_work_create(NULL, 3, &work), IDS_ERR_ARG);
    TEST_OK(ctx, ids_run_work_create(run, 2, &work));
    TEST_STATUS(ctx, ids_run_work_grow(work, 3), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_run_work_cell(work, 5, &result), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_run_work_cell(work, 0, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_run_store(run, 6, &result), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_run_store(run, 0, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_run_store_failure(run, 0, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_run_cell(run, 6, &cell), IDS_ERR_ARG);
    ck_assert_int_eq(ids_run_line_get(run, 9, &line), IDS_ERR_ARG);
    ck_assert_int_eq(ids_run_line_get(run, 0, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_run_cell_find(run, NULL, &index), IDS_ERR_ARG);
    ck_assert_int_eq(ids_run_describe(run, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_run_refresh(NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_run_plan(NULL), IDS_ERR_ARG);
    ck_assert_uint_eq(ids_run_line_count(NULL) + ids_run_cell_count(NULL), 0);
    ck_assert_uint_eq(ids_run_prime_count(NULL) + ids_run_prime(run, 1), 0);
    ids_run_work_free(work);
    ids_run_work_free(NULL);
    ids_run_free(run);
    ids_run_free(NULL);
    TEST_OK(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run));
    TEST_STATUS(ctx, ids_run_store(run, 0, &result), IDS_ERR_ARG);
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("run");
    TCase *tcase = tcase_create("run");

    tcase_set_timeout(tcase, 30);
    tcase_add_loop_test(tcase, test_same_table, 0, 2);
    tcase_add_loop_test(tcase, test_same_degrees, 0, 3);
    tcase_add_test(tcase, test_refused);
    tcase_add_test(tcase, test_damage);
    tcase_add_test(tcase, test_failure);
    tcase_add_test(tcase, test_plan);
    tcase_add_test(tcase, test_misuse_question);
    tcase_add_test(tcase, test_misuse_cells);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
