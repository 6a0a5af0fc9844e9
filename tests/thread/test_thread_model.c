/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Threads that share algebras and read one run folder, and what belongs to one thread each:
 * writers, reports, contexts, and the cancel flag that any thread may set.
 */
#include <pthread.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/idspan.h>

#include "thread_team.h"

static const char jordan[] = "operation a*b commutative\n"
                             "identity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n"
                             "candidate associative: (x*y)*z = x*(y*z)\n";
/* A Jordan algebra of a bilinear form: a unit and two vectors. */
static const char spin[] = "basis e u v\n"
                           "operation a*b commutative\n"
                           "e*e = e\ne*u = u\ne*v = v\nu*u = e\nv*v = e\n";

typedef struct world {
    ids_presentation *pres;
    ids_algebra *algebra;
    const char *folder; /* of a run with some cells done */
} world;

static void use_algebra(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    const ids_signature *sig = ids_algebra_signature(w->algebra);
    uint32_t dimension = ids_algebra_dimension(w->algebra);
    ids_algebra *again = NULL;
    ids_algebra *made = NULL;
    ids_constant list[16];
    size_t count = ids_algebra_count(w->algebra, 0);
    uint32_t operation = 7;
    bool holds[2] = {false, true};
    char *text = NULL;

    for (uint32_t i = 0; i < dimension; i++) {
        sum_text(sum, ids_algebra_basis_name(w->algebra, i));
    }
    for (size_t i = 0; i < count && i < 16; i++) {
        MUST(ids_algebra_constant(w->algebra, 0, i, &list[i]));
        sum_number(sum, list[i].result + (uint64_t)list[i].numerator);
    }
    MUST(ids_algebra_create(ctx, sig, dimension, NULL, list, count, &made));
    MUST(ids_algebra_print(ctx, w->algebra, &text));
    MUST(ids_algebra_read(ctx, text, strlen(text), NULL, &again));
    sum_number(sum, ids_algebra_equal(w->algebra, again) + 2u * ids_algebra_equal(made, again));
    sum_owned(sum, ctx, text);
    MUST(ids_algebra_match(ctx, w->algebra, ids_presentation_signature(w->pres), &operation));
    MUST(ids_algebra_holds(ctx, w->algebra, w->pres, IDS_ROLE_IDENTITY, 0, &holds[0], NULL, 0));
    MUST(ids_algebra_holds(ctx, w->algebra, w->pres, IDS_ROLE_CANDIDATE, 0, &holds[1], NULL, 0));
    sum_number(sum, operation + 2u * holds[0] + 4u * holds[1]);
    ids_algebra_free(made);
    ids_algebra_free(again);
}

static void use_writers(ids_ctx *ctx, uint64_t *sum)
{
    static const ids_column columns[] = {{"n", IDS_COLUMN_NUMBER, 0}, {"t", IDS_COLUMN_TEXT, 0}};
    static const char *const cells[] = {"12", "words"};
    ids_report_row row = {.struct_size = sizeof row,
                          .numbers = {.degree = 3, .total = true, .free = 3, .quotient = 3}};
    ids_report *report = NULL;

    for (ids_format format = IDS_FORMAT_TEXT; format <= IDS_FORMAT_LATEX; format++) {
        ids_writer *writer = NULL;
        MUST(ids_writer_create(ctx, format, "task", columns, 2, sum_sink, sum, &writer));
        MUST(ids_writer_note(writer, "name", "value"));
        MUST(ids_writer_note_list(writer, "names", cells, 2));
        MUST(ids_writer_row(writer, cells));
        MUST(ids_writer_end(writer));
        ids_writer_free(writer);
    }
    MUST(ids_report_create(ctx, "title", &report));
    MUST(ids_report_set_presentation(report, jordan, sizeof jordan - 1));
    MUST(ids_report_add(report, &row));
    MUST(ids_report_note(report, "name", "value"));
    MUST(ids_report_write(report, 0, sum_sink, sum));
    ids_report_free(report);
}

static void use_run(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    ids_run *run = NULL;
    ids_run_info info;
    ids_cell cell;
    size_t index = 0;

    MUST(ids_run_open(ctx, w->folder, IDS_RUN_READ, &run));
    MUST(ids_run_refresh(run));
    MUST(ids_run_plan(run));
    MUST(ids_run_describe(run, &info));
    sum_number(sum, info.done);
    for (size_t i = 0; i < ids_run_prime_count(run); i++) {
        sum_number(sum, ids_run_prime(run, i));
    }
    MUST(ids_run_cell_find(run, "3", &index));
    for (size_t i = 0; i < ids_run_cell_count(run); i++) {
        MUST(ids_run_cell(run, i, &cell));
        sum_text(sum, cell.id);
        sum_number(sum, cell.result.quotient);
    }
    for (size_t i = 0; i < ids_run_line_count(run); i++) {
        ids_run_line line;
        MUST(ids_run_line_get(run, i, &line));
        sum_number(sum, line.row.quotient + line.state);
    }
    sum_number(sum, index);
    ids_run_free(run);
}

static void use_statuses(ids_ctx *ctx, uint64_t *sum)
{
    ids_presentation *none = NULL;
    ids_status st = ids_presentation_read(ctx, "?", 1, NULL, &none);

    sum_text(sum, ids_version());
    sum_text(sum, ids_status_name(st));
    sum_text(sum, ids_status_text(ids_ctx_last_status(ctx)));
    sum_text(sum, ids_ctx_message(ctx));
    sum_number(sum, ids_ctx_last_place(ctx).line);
}

static uint64_t use(ids_ctx *ctx, const void *data)
{
    uint64_t sum = 0;

    use_algebra(ctx, data, &sum);
    use_writers(ctx, &sum);
    use_run(ctx, data, &sum);
    use_statuses(ctx, &sum);
    return sum;
}

/* A run with two cells done, one failed and one left. */
static void make_run(ids_ctx *ctx, const char *folder)
{
    ids_run_options options = {.struct_size = sizeof options, .from = 1, .to = 4};
    ids_run *run = NULL;
    ids_run_work *work = NULL;

    MUST(ids_run_create(ctx, folder, jordan, sizeof jordan - 1, NULL, &options, IDS_RUN_ALONE,
                        &run));
    MUST(ids_run_work_create(run, 4, &work));
    MUST(ids_run_work_grow(work, 2));
    for (size_t i = 0; i < 2; i++) {
        ids_cell_result result;
        double seconds = 0;
        uint64_t memory = 0;
        MUST(ids_run_work_estimate(work, i, &seconds, &memory));
        MUST(ids_run_work_cell(work, i, &result));
        MUST(ids_run_store(run, i, &result));
    }
    MUST(ids_run_store_failure(run, 2, "tried in vain"));
    ids_run_work_free(work);
    ids_run_free(run);
}

static void remove_folder(const char *folder)
{
    char command[256] = "";

    snprintf(command, sizeof command, "rm -r '%s'", folder);
    ck_assert_int_eq(system(command), 0);
}

START_TEST(test_model)
{
    char folder[] = "/tmp/idspan-thread-XXXXXX";
    ids_ctx *ctx = test_ctx();
    world w = {.folder = folder};

    ck_assert_ptr_nonnull(mkdtemp(folder));
    make_run(ctx, folder);
    MUST(ids_presentation_read(ctx, jordan, sizeof jordan - 1, NULL, &w.pres));
    MUST(ids_algebra_read(ctx, spin, sizeof spin - 1, NULL, &w.algebra));
    thread_compare(use, &w);
    ids_algebra_free(w.algebra);
    ids_presentation_free(w.pres);
    test_ctx_free(ctx);
    remove_folder(folder);
}
END_TEST

static void *cancel(void *user)
{
    for (int i = 0; i < 1000; i++) {
        ids_ctx_cancel(user);
        (void)ids_ctx_memory(user);
    }
    return NULL;
}

/* One thread works, another one cancels; the context is as good as before. */
START_TEST(test_cancel)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_rank_table *table = NULL;
    pthread_t other;

    MUST(ids_presentation_read(ctx, jordan, sizeof jordan - 1, NULL, &pres));
    ids_ctx_set_threads(ctx, 3);
    ck_assert_int_eq(pthread_create(&other, NULL, cancel, ctx), 0);
    for (int i = 0; i < 20; i++) {
        ids_status st = ids_rank_table_create(ctx, pres, 1, 5, NULL, &table);
        ck_assert(st == IDS_OK || st == IDS_ERR_CANCELLED);
        ids_rank_table_free(table);
        table = NULL;
    }
    ck_assert_int_eq(pthread_join(other, NULL), 0);
    ids_ctx_cancel_clear(ctx); /* the last one may have come too late */
    TEST_OK(ctx, ids_rank_table_create(ctx, pres, 1, 5, NULL, &table));
    ids_rank_table_free(table);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("threads: model");
    TCase *tcase = tcase_create("model");

    tcase_set_timeout(tcase, 60);
    tcase_add_test(tcase, test_model);
    tcase_add_test(tcase, test_cancel);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
