/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * One rank table for each presentation that data/reference/ranks.csv names, to the largest degree
 * among its rows of the wanted reach; each row is then compared, source beside it. Ranks modulo
 * a random prime of word size: good enough to compare, since a wrong one is too small.
 */
#include "ranks.h"

#include <stdlib.h>

#include "published.h"

#define RANKS_HEADER "id,file,degree,quotient,status,reach,source"
enum { RANK_ID, RANK_FILE, RANK_DEGREE, RANK_QUOTIENT, RANK_STATUS, RANK_REACH, RANK_SOURCE };

static published_table ranks;
static const char *wanted;
static size_t *first_rows;

static bool is_wanted(size_t row, const char *file)
{
    return published_is(&ranks, row, RANK_FILE, file) &&
           published_is(&ranks, row, RANK_REACH, wanted);
}

static void compare(const ids_rank_table *table, size_t row)
{
    const uint64_t degree = published_number(&ranks, row, RANK_DEGREE);
    const uint64_t expected = published_number(&ranks, row, RANK_QUOTIENT);
    ids_rank_row got = {0};

    ck_assert_int_eq(ids_rank_table_row(table, (size_t)degree - 1, &got), IDS_OK);
    ck_assert_uint_eq(got.degree, degree);
    ck_assert_uint_eq(got.free, got.consequences + got.quotient);
    ck_assert_msg(got.quotient == expected,
                  "%s, %s, degree %" PRIu64 ": quotient of dimension %" PRIu64 ", but %" PRIu64
                  " (%s) is stated by %s",
                  published_cell(&ranks, row, RANK_ID), published_cell(&ranks, row, RANK_FILE),
                  degree, got.quotient, expected, published_cell(&ranks, row, RANK_STATUS),
                  published_cell(&ranks, row, RANK_SOURCE));
}

START_TEST(test_ranks)
{
    const size_t first = first_rows[_i];
    const char *file = published_cell(&ranks, first, RANK_FILE);
    ids_ctx *ctx = test_ctx();
    ids_presentation *presentation = published_presentation(ctx, file);
    ids_rank_table *table = NULL;
    uint32_t largest = 0;

    for (size_t row = first; row < ranks.rows; row++) {
        if (is_wanted(row, file)) {
            const uint32_t degree = (uint32_t)published_number(&ranks, row, RANK_DEGREE);
            largest = degree > largest ? degree : largest;
        }
    }
    TEST_OK(ctx, ids_rank_table_create(ctx, presentation, 1, largest, NULL, &table));
    for (size_t row = first; row < ranks.rows; row++) {
        if (is_wanted(row, file)) {
            compare(table, row);
        }
    }
    ids_rank_table_free(table);
    ids_presentation_free(presentation);
    test_ctx_free(ctx);
}
END_TEST

int ranks_run(const char *reach, double seconds)
{
    Suite *suite = suite_create("published ranks");
    TCase *tcase = tcase_create(reach);
    int result = EXIT_FAILURE;

    wanted = reach;
    published_load("ranks.csv", RANKS_HEADER, &ranks);
    first_rows = calloc(ranks.rows, sizeof *first_rows);
    if (first_rows != NULL) {
        const size_t count = published_files(&ranks, RANK_FILE, RANK_REACH, reach, first_rows);
        tcase_set_timeout(tcase, seconds);
        tcase_add_loop_test(tcase, test_ranks, 0, (int)count);
        suite_add_tcase(suite, tcase);
        result = test_run(suite);
    }
    free(first_rows);
    published_free(&ranks);
    return result;
}
