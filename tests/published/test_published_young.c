/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dimensions of the irreducible modules of symmetric groups and cocharacters of free algebras
 * against data/reference/young.csv and the rows of cocharacters.csv that speak of the whole free
 * algebra, each with its source there.
 */
#include "published.h"

#include <stdlib.h>
#include <string.h>

#define YOUNG_HEADER "what,degree,partition,value,status,source"
enum { YOUNG_WHAT, YOUNG_DEGREE, YOUNG_PARTITION, YOUNG_VALUE, YOUNG_STATUS, YOUNG_SOURCE };
#define COCHARACTER_HEADER "id,file,space,degree,partition,multiplicity,status,source"
enum {
    COCHARACTER_ID,
    COCHARACTER_FILE,
    COCHARACTER_SPACE,
    COCHARACTER_DEGREE,
    COCHARACTER_PARTITION,
    COCHARACTER_MULTIPLICITY,
    COCHARACTER_STATUS,
    COCHARACTER_SOURCE
};

static published_table young;
static published_table cocharacters;
static size_t *first_rows; /* where each file stands first in cocharacters.csv */
static size_t first_count;

/* ---- young.csv ------------------------------------------------------------------------------- */

/* What all partitions of a degree come to. */
typedef struct summary {
    uint64_t partitions;
    uint64_t sum;
    uint64_t squares;
    uint64_t largest;
} summary;

static summary summarize(uint32_t degree)
{
    summary all = {.partitions = ids_partition_count(degree)};

    for (uint64_t i = 0; i < all.partitions; i++) {
        ids_partition partition = {0};
        uint64_t dimension = 0;

        ck_assert_int_eq(ids_partition_unrank(degree, i, &partition), IDS_OK);
        ck_assert_int_eq(ids_partition_dimension(&partition, &dimension), IDS_OK);
        all.sum += dimension;
        all.squares += dimension * dimension;
        all.largest = dimension > all.largest ? dimension : all.largest;
    }
    return all;
}

static uint64_t dimension_of_row(ids_ctx *ctx, size_t row)
{
    ids_partition partition = {0};
    uint64_t dimension = 0;

    TEST_OK(ctx,
            ids_partition_parse(ctx, published_cell(&young, row, YOUNG_PARTITION), &partition));
    ck_assert_uint_eq(partition.degree, published_number(&young, row, YOUNG_DEGREE));
    ck_assert_int_eq(ids_partition_dimension(&partition, &dimension), IDS_OK);
    return dimension;
}

START_TEST(test_young)
{
    const size_t row = (size_t)_i;
    const summary all = summarize((uint32_t)published_number(&young, row, YOUNG_DEGREE));
    ids_ctx *ctx = test_ctx();
    uint64_t value = 0;

    if (published_is(&young, row, YOUNG_WHAT, "partitions")) {
        value = all.partitions;
    } else if (published_is(&young, row, YOUNG_WHAT, "sum of dimensions")) {
        value = all.sum;
    } else if (published_is(&young, row, YOUNG_WHAT, "sum of squares")) {
        value = all.squares;
    } else if (published_is(&young, row, YOUNG_WHAT, "largest dimension")) {
        value = all.largest;
    } else {
        ck_assert_str_eq(published_cell(&young, row, YOUNG_WHAT), "dimension");
        value = dimension_of_row(ctx, row);
    }
    ck_assert_msg(value == published_number(&young, row, YOUNG_VALUE),
                  "young.csv, line %zu: %" PRIu64 ", not %s (%s)", row + 2, value,
                  published_cell(&young, row, YOUNG_VALUE),
                  published_cell(&young, row, YOUNG_SOURCE));
    test_ctx_free(ctx);
}
END_TEST

/* ---- cocharacters.csv ------------------------------------------------------------------------ */

static ids_cocharacter *free_cocharacter(ids_ctx *ctx, const char *file, uint32_t max_degree)
{
    ids_presentation *presentation = published_presentation(ctx, file);
    ids_cocharacter *cocharacter = NULL;

    TEST_OK(ctx, ids_cocharacter_create(ctx, ids_presentation_signature(presentation), max_degree,
                                        &cocharacter));
    ids_presentation_free(presentation);
    return cocharacter;
}

static uint64_t multiplicity_of(const ids_cocharacter *cocharacter, const ids_partition *partition)
{
    uint64_t index = 0;
    uint64_t multiplicity = 0;

    ck_assert_int_eq(ids_partition_rank(partition, &index), IDS_OK);
    ck_assert_int_eq(
        ids_cocharacter_multiplicity(cocharacter, partition->degree, index, &multiplicity), IDS_OK);
    return multiplicity;
}

/* All rows of one signature. A degree in the table is there with all its partitions. */
START_TEST(test_free)
{
    const char *file = published_cell(&cocharacters, first_rows[_i], COCHARACTER_FILE);
    ids_ctx *ctx = test_ctx();
    ids_cocharacter *cocharacter = free_cocharacter(ctx, file, 12);
    uint64_t rows[13] = {0};

    for (size_t row = first_rows[_i]; row < cocharacters.rows; row++) {
        ids_partition partition = {0};

        if (!published_is(&cocharacters, row, COCHARACTER_FILE, file) ||
            !published_is(&cocharacters, row, COCHARACTER_SPACE, "free")) {
            continue;
        }
        TEST_OK(ctx,
                ids_partition_parse(ctx, published_cell(&cocharacters, row, COCHARACTER_PARTITION),
                                    &partition));
        ck_assert_uint_eq(partition.degree,
                          published_number(&cocharacters, row, COCHARACTER_DEGREE));
        uint64_t value = multiplicity_of(cocharacter, &partition);
        ck_assert_msg(value == published_number(&cocharacters, row, COCHARACTER_MULTIPLICITY),
                      "cocharacters.csv, line %zu: %" PRIu64 ", not %s (%s)", row + 2, value,
                      published_cell(&cocharacters, row, COCHARACTER_MULTIPLICITY),
                      published_cell(&cocharacters, row, COCHARACTER_SOURCE));
        rows[partition.degree]++;
    }
    for (uint32_t degree = 1; degree <= 12; degree++) {
        ck_assert(rows[degree] == 0 || rows[degree] == ids_partition_count(degree));
    }
    ids_cocharacter_free(cocharacter);
    test_ctx_free(ctx);
}
END_TEST

/* Whether the alternating operation has the conjugate cocharacter of the commutative one in all
 * degrees up to max_degree. */
static bool is_conjugate(const char *commutative, const char *alternating, uint32_t max_degree)
{
    ids_ctx *ctx = test_ctx();
    ids_cocharacter *a = free_cocharacter(ctx, commutative, max_degree);
    ids_cocharacter *b = free_cocharacter(ctx, alternating, max_degree);
    bool same = true;

    for (uint32_t degree = 1; degree <= max_degree; degree++) {
        for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
            ids_partition partition = {0};
            ids_partition conjugate = {0};

            ck_assert_int_eq(ids_partition_unrank(degree, i, &partition), IDS_OK);
            ck_assert_int_eq(ids_partition_conjugate(&partition, &conjugate), IDS_OK);
            same = same && multiplicity_of(a, &partition) == multiplicity_of(b, &conjugate);
        }
    }
    ids_cocharacter_free(a);
    ids_cocharacter_free(b);
    test_ctx_free(ctx);
    return same;
}

/* Odd arity: every degree is odd, so a permutation of subtrees has the sign of the permutation of
 * their leaves, and the cocharacters are conjugate. Even arity: so only as long as no two equal
 * subtrees of even degree can stand side by side; two products of leaves first do in degree 4 for
 * two arguments, in degree 10 for four. */
START_TEST(test_conjugates)
{
    ck_assert(is_conjugate("signatures/commutative-3.pres", "signatures/alternating-3.pres", 17));
    ck_assert(is_conjugate("signatures/commutative-2.pres", "signatures/alternating-2.pres", 3));
    ck_assert(!is_conjugate("signatures/commutative-2.pres", "signatures/alternating-2.pres", 4));
    ck_assert(is_conjugate("signatures/commutative-4.pres", "signatures/alternating-4.pres", 9));
    ck_assert(!is_conjugate("signatures/commutative-4.pres", "signatures/alternating-4.pres", 10));
}
END_TEST

static Suite *young_suite(void)
{
    Suite *suite = suite_create("published: young");
    TCase *tcase = tcase_create("young.csv");
    TCase *free_algebras = tcase_create("cocharacters.csv");

    tcase_add_loop_test(tcase, test_young, 0, (int)young.rows);
    suite_add_tcase(suite, tcase);
    tcase_add_loop_test(free_algebras, test_free, 0, (int)first_count);
    tcase_add_test(free_algebras, test_conjugates);
    suite_add_tcase(suite, free_algebras);
    return suite;
}

int main(void)
{
    int result = EXIT_FAILURE;

    published_load("young.csv", YOUNG_HEADER, &young);
    published_load("cocharacters.csv", COCHARACTER_HEADER, &cocharacters);
    first_rows = calloc(cocharacters.rows, sizeof *first_rows);
    if (first_rows != NULL) {
        first_count =
            published_files(&cocharacters, COCHARACTER_FILE, COCHARACTER_SPACE, "free", first_rows);
        result = test_run(young_suite());
    }
    free(first_rows);
    published_free(&cocharacters);
    published_free(&young);
    return result;
}
