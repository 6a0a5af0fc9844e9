/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * One partition table for each presentation, to the largest degree among its rows; each row is
 * then compared, source beside it. Ranks modulo a random prime of word size: good enough to
 * compare, since a wrong one is too small.
 */
#include "cocharacters.h"

#include <stdlib.h>
#include <string.h>

#include <idspan/gmp.h>

#include "published.h"

#define RANKS_HEADER "id,file,degree,quotient,status,reach,source"
enum { RANK_ID, RANK_FILE, RANK_DEGREE, RANK_QUOTIENT, RANK_STATUS, RANK_REACH, RANK_SOURCE };
#define CHARACTERS_HEADER "id,file,space,degree,partition,multiplicity,status,source"
enum {
    CHAR_ID,
    CHAR_FILE,
    CHAR_SPACE,
    CHAR_DEGREE,
    CHAR_PARTITION,
    CHAR_MULTIPLICITY,
    CHAR_STATUS,
    CHAR_SOURCE
};

static published_table ranks;
static published_table characters;
static const char *first_reach;
static const char *second_reach;
static bool with_multiplicities;
static const char **files;
static size_t file_count;

static bool is_wanted_rank(size_t row)
{
    return published_is(&ranks, row, RANK_REACH, first_reach) ||
           published_is(&ranks, row, RANK_REACH, second_reach);
}

static bool is_multiplicity(size_t row)
{
    return with_multiplicities && (published_is(&characters, row, CHAR_SPACE, "quotient") ||
                                   published_is(&characters, row, CHAR_SPACE, "free"));
}

static uint32_t largest_degree(const char *file)
{
    uint64_t largest = 0;

    for (size_t row = 0; row < ranks.rows; row++) {
        if (is_wanted_rank(row) && published_is(&ranks, row, RANK_FILE, file)) {
            uint64_t degree = published_number(&ranks, row, RANK_DEGREE);
            largest = degree > largest ? degree : largest;
        }
    }
    for (size_t row = 0; row < characters.rows; row++) {
        if (is_multiplicity(row) && published_is(&characters, row, CHAR_FILE, file)) {
            uint64_t degree = published_number(&characters, row, CHAR_DEGREE);
            largest = degree > largest ? degree : largest;
        }
    }
    return (uint32_t)largest;
}

/* The row of a partition, or with NULL the total, of a degree that the table has. */
static ids_partition_row find_row(ids_ctx *ctx, const ids_partition_table *table, uint64_t degree,
                                  const char *text)
{
    ids_partition partition = {0};

    if (text != NULL) {
        TEST_OK(ctx, ids_partition_parse(ctx, text, &partition));
    }
    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ids_partition_row row = {0};
        ck_assert_int_eq(ids_partition_table_row(table, i, &row), IDS_OK);
        ck_assert_uint_eq(row.free, row.consequences + row.quotient);
        if (row.degree == degree && row.total == (text == NULL) &&
            memcmp(&row.partition, &partition, sizeof partition) == 0) {
            return row;
        }
    }
    ck_abort_msg("degree %" PRIu64 " lacks %s", degree, text != NULL ? text : "its total");
    return (ids_partition_row){0};
}

static void compare_rank(ids_ctx *ctx, const ids_partition_table *table, size_t row)
{
    const uint64_t degree = published_number(&ranks, row, RANK_DEGREE);
    const uint64_t expected = published_number(&ranks, row, RANK_QUOTIENT);
    const ids_partition_row got = find_row(ctx, table, degree, NULL);

    ck_assert_msg(got.quotient == expected,
                  "%s, %s, degree %" PRIu64 ": quotient of dimension %" PRIu64 ", but %" PRIu64
                  " (%s) is stated by %s",
                  published_cell(&ranks, row, RANK_ID), published_cell(&ranks, row, RANK_FILE),
                  degree, got.quotient, expected, published_cell(&ranks, row, RANK_STATUS),
                  published_cell(&ranks, row, RANK_SOURCE));
}

static void compare_multiplicity(ids_ctx *ctx, const ids_partition_table *table, size_t row)
{
    const char *partition = published_cell(&characters, row, CHAR_PARTITION);
    const char *space = published_cell(&characters, row, CHAR_SPACE);
    const uint64_t degree = published_number(&characters, row, CHAR_DEGREE);
    const uint64_t expected = published_number(&characters, row, CHAR_MULTIPLICITY);
    const ids_partition_row found = find_row(ctx, table, degree, partition);
    const bool free = strcmp(space, "free") == 0;
    const uint64_t got = free ? found.free : found.quotient;

    ck_assert_msg(got == expected,
                  "%s, %s, %s: multiplicity %" PRIu64 " (%s), but %" PRIu64
                  " (%s) is stated by %s",
                  published_cell(&characters, row, CHAR_ID),
                  published_cell(&characters, row, CHAR_FILE), partition, got, space, expected,
                  published_cell(&characters, row, CHAR_STATUS),
                  published_cell(&characters, row, CHAR_SOURCE));
    /* The files with rows of the free algebra have no identities: the engine's own count too. */
    ck_assert(!free || found.quotient == expected);
}

START_TEST(test_file)
{
    const char *file = files[_i];
    const uint32_t largest = largest_degree(file);
    ids_ctx *ctx = test_ctx();
    ids_presentation *presentation = published_presentation(ctx, file);
    ids_partition_table *table = NULL;

    TEST_OK(ctx, ids_partition_table_create(ctx, presentation, 1, largest, NULL, &table));
    for (size_t row = 0; row < ranks.rows; row++) {
        if (published_is(&ranks, row, RANK_FILE, file) &&
            published_number(&ranks, row, RANK_DEGREE) <= largest) {
            compare_rank(ctx, table, row);
        }
    }
    for (size_t row = 0; row < characters.rows; row++) {
        if (published_is(&characters, row, CHAR_FILE, file) && is_multiplicity(row)) {
            compare_multiplicity(ctx, table, row);
        }
    }
    ids_partition_table_free(table);
    ids_presentation_free(presentation);
    test_ctx_free(ctx);
}
END_TEST

static void add_file(const char *file)
{
    for (size_t i = 0; i < file_count; i++) {
        if (strcmp(files[i], file) == 0) {
            return;
        }
    }
    if (*file != '\0') {
        files[file_count++] = file;
    }
}

void cocharacters_add(Suite *suite, const char *first, const char *second, bool multiplicities,
                      double seconds)
{
    TCase *tcase = tcase_create("published");

    first_reach = first;
    second_reach = second;
    with_multiplicities = multiplicities;
    published_load("ranks.csv", RANKS_HEADER, &ranks);
    published_load("cocharacters.csv", CHARACTERS_HEADER, &characters);
    files = calloc(ranks.rows + characters.rows, sizeof *files);
    if (files == NULL) {
        exit(EXIT_FAILURE);
    }
    for (size_t row = 0; row < ranks.rows; row++) {
        if (is_wanted_rank(row)) {
            add_file(ranks.cells[row * ranks.columns + RANK_FILE]);
        }
    }
    for (size_t row = 0; row < characters.rows; row++) {
        if (is_multiplicity(row)) {
            add_file(characters.cells[row * characters.columns + CHAR_FILE]);
        }
    }
    tcase_set_timeout(tcase, seconds);
    tcase_add_loop_test(tcase, test_file, 0, (int)file_count);
    suite_add_tcase(suite, tcase);
}

/* ---- far degrees ------------------------------------------------------------------------- */

#define MOST_FAR 8u

static struct {
    const char *file;
    uint32_t degree;
} far[MOST_FAR];
static size_t far_count;

static void check_free(ids_ctx *ctx, const ids_presentation *presentation,
                       const ids_partition_row *total)
{
    ids_counts *counts = NULL;
    mpz_t monomials;

    mpz_init(monomials);
    TEST_OK(ctx, ids_counts_create(ctx, ids_presentation_signature(presentation), total->degree,
                                   &counts));
    TEST_OK(ctx, ids_counts_monomials(counts, total->degree, monomials));
    ck_assert(mpz_fits_ulong_p(monomials) && mpz_get_ui(monomials) == total->free);
    mpz_clear(monomials);
    ids_counts_free(counts);
}

START_TEST(test_far)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *presentation = published_presentation(ctx, far[_i].file);
    ids_partition_table *table[2] = {NULL, NULL};

    for (size_t k = 0; k < 2; k++) {
        ids_partition_options options = {.struct_size = sizeof options, .seed = 2024 + k};
        TEST_OK(ctx, ids_partition_table_create(ctx, presentation, 1, far[_i].degree, &options,
                                                &table[k]));
    }
    ck_assert_uint_ne(ids_partition_table_prime(table[0], 0),
                      ids_partition_table_prime(table[1], 0));
    for (size_t i = 0; i < ids_partition_table_count(table[0]); i++) {
        ids_partition_row row[2] = {{0}};
        ck_assert_int_eq(ids_partition_table_row(table[0], i, &row[0]), IDS_OK);
        ck_assert_int_eq(ids_partition_table_row(table[1], i, &row[1]), IDS_OK);
        ck_assert_msg(row[0].quotient == row[1].quotient,
                      "%s, row %zu of degree %u: %" PRIu64 " mod one prime, %" PRIu64
                      " mod another",
                      far[_i].file, i, row[0].degree, row[0].quotient, row[1].quotient);
        if (row[0].total) {
            check_free(ctx, presentation, &row[0]);
        }
    }
    ids_partition_table_free(table[0]);
    ids_partition_table_free(table[1]);
    ids_presentation_free(presentation);
    test_ctx_free(ctx);
}
END_TEST

void cocharacters_add_far(Suite *suite, const char *file, uint32_t degree, double seconds)
{
    TCase *tcase = tcase_create("far");

    if (far_count == MOST_FAR) {
        exit(EXIT_FAILURE); /* before Check runs, which could tell more */
    }
    far[far_count].file = file;
    far[far_count].degree = degree;
    tcase_set_timeout(tcase, seconds);
    tcase_add_loop_test(tcase, test_far, (int)far_count, (int)far_count + 1);
    suite_add_tcase(suite, tcase);
    far_count++;
}

void cocharacters_free(void)
{
    free(files);
    published_free(&ranks);
    published_free(&characters);
}
