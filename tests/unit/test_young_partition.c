/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Partitions: order, index, text, conjugate, dimension, beads. Dimensions are compared with the
 * branching rule, which determines them; published values are in test_published_young.c.
 */
#include <string.h>

#include "support.h"
#include "young/young_private.h"

static const ids_partition four_three_one = {.degree = 8, .length = 3, .part = {4, 3, 1}};

static ids_partition read_partition(ids_ctx *ctx, const char *text)
{
    ids_partition partition = {0};

    TEST_OK(ctx, ids_partition_parse(ctx, text, &partition));
    return partition;
}

/* ---- order ----------------------------------------------------------------------------------- */

START_TEST(test_order)
{
    /* The order of tables in print: common practice, no source. */
    static const char *const four[] = {"4", "3+1", "2+2", "2+1+1", "1+1+1+1"};
    static const char *const six[] = {"6",       "5+1",       "4+2",        "4+1+1",
                                      "3+3",     "3+2+1",     "3+1+1+1",    "2+2+2",
                                      "2+2+1+1", "2+1+1+1+1", "1+1+1+1+1+1"};
    ids_ctx *ctx = test_ctx();

    for (uint64_t i = 0; i < 16; i++) {
        const char *expected = i < 5 ? four[i] : six[i - 5];
        ids_partition partition = {0};
        char *text = NULL;

        TEST_OK(ctx, ids_partition_unrank(i < 5 ? 4 : 6, i < 5 ? i : i - 5, &partition));
        TEST_OK(ctx, ids_partition_print(ctx, &partition, &text));
        ck_assert_str_eq(text, expected);
        ids_string_free(ctx, text);
    }
    ck_assert_uint_eq(ids_partition_count(4), 5);
    ck_assert_uint_eq(ids_partition_count(6), 11);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_numbers)
{
    /* OEIS A000041, from memory */
    ck_assert_uint_eq(ids_partition_count(0), 1);
    ck_assert_uint_eq(ids_partition_count(16), 231);
    ck_assert_uint_eq(ids_partition_count(20), 627);
    ck_assert_uint_eq(ids_partition_count(30), 5604);
    ck_assert_uint_eq(ids_partition_count(40), 37338);
    ck_assert_uint_eq(ids_partition_count(41), 0);
    ck_assert_uint_eq(ids_partition_count(UINT32_MAX), 0);
}
END_TEST

/* Whether b comes later than a in reverse lexicographic order. */
static bool is_later(const ids_partition *a, const ids_partition *b)
{
    return memcmp(a->part, b->part, sizeof a->part) > 0;
}

/* All partitions of a degree: index and back, conjugate twice, beads. */
START_TEST(test_list)
{
    const uint32_t degree = (uint32_t)_i;
    idsi_partition_counts counts;
    ids_partition partition;
    ids_partition before = {0};
    uint32_t index = 0;
    bool good = true;

    idsi_partition_counts_fill(&counts);
    idsi_partition_first(degree, &partition);
    do {
        ids_partition back = {0};
        ids_partition conjugate = {0};

        good = good && idsi_partition_is_valid(&partition);
        good = good && (index == 0 || is_later(&before, &partition));
        good = good && idsi_partition_index(&counts, &partition) == index;
        idsi_partition_at(&counts, degree, index, &back);
        good = good && memcmp(&back, &partition, sizeof back) == 0;
        good = good && ids_partition_conjugate(&partition, &conjugate) == IDS_OK;
        good = good && idsi_partition_is_valid(&conjugate);
        good = good && ids_partition_conjugate(&conjugate, &conjugate) == IDS_OK;
        good = good && memcmp(&conjugate, &partition, sizeof back) == 0;
        for (uint32_t zeros = 0; zeros < 4; zeros++) {
            uint64_t beads = idsi_partition_beads(&partition, partition.length + zeros);

            idsi_partition_from_beads(beads, &back);
            good = good && memcmp(&back, &partition, sizeof back) == 0;
        }
        if (!good) {
            ck_abort_msg("degree %u, partition %u", degree, index);
        }
        before = partition;
        index++;
    } while (idsi_partition_next(&partition));
    ck_assert_mem_eq(&partition, &before, sizeof partition);
    ck_assert_uint_eq(index, ids_partition_count(degree));
}
END_TEST

/* ---- text ------------------------------------------------------------------------------------ */

START_TEST(test_text)
{
    const uint32_t degree = (uint32_t)_i;
    ids_ctx *ctx = test_ctx();

    for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
        ids_partition partition = {0};
        char *text = NULL;

        TEST_OK(ctx, ids_partition_unrank(degree, i, &partition));
        TEST_OK(ctx, ids_partition_print(ctx, &partition, &text));
        ids_partition read = read_partition(ctx, text);
        ck_assert_mem_eq(&read, &partition, sizeof read);
        ids_string_free(ctx, text);
    }
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_long_text)
{
    ids_ctx *ctx = test_ctx();
    const ids_partition nothing = {0};
    ids_partition ones = {.degree = 40, .length = 40};
    char *text = NULL;

    memset(ones.part, 1, 40);
    TEST_OK(ctx, ids_partition_print(ctx, &ones, &text));
    ck_assert_uint_eq(strlen(text), 79);
    ids_partition read = read_partition(ctx, text);
    ck_assert_mem_eq(&read, &ones, sizeof read);
    ids_string_free(ctx, text);
    TEST_OK(ctx, ids_partition_print(ctx, &nothing, &text));
    ck_assert_str_eq(text, "0");
    read = four_three_one;
    TEST_OK(ctx, ids_partition_parse(ctx, text, &read));
    ck_assert_mem_eq(&read, &nothing, sizeof read);
    ids_string_free(ctx, text);
    test_ctx_free(ctx);
}
END_TEST

typedef struct broken_text {
    const char *text;
    uint32_t column;
    const char *message; /* a piece of it */
} broken_text;

static const broken_text broken_texts[] = {
    {"", 1, "expected parts joined by +"},
    {"+", 1, "expected parts"},
    {"4+", 3, "expected parts"},
    {"4++1", 3, "expected parts"},
    {"4+3+1 ", 6, "expected parts"},
    {" 4", 1, "expected parts"},
    {"4,3,1", 2, "expected parts"},
    {"4-3", 2, "expected parts"},
    {"-4", 1, "expected parts"},
    {"0+1", 1, "a part is at least 1"},
    {"00", 1, "without zeros in front"},
    {"04", 1, "without zeros in front"},
    {"4+03", 3, "without zeros in front"},
    {"4+0", 3, "a part is at least 1"},
    {"1+2", 3, "write the largest part first"},
    {"4+1+3", 5, "write the largest part first"},
    {"41", 1, "passes the largest degree, 40"},
    {"20+20+1", 7, "passes the largest degree, 40"},
    {"99999999999999999999999", 1, "passes the largest degree, 40"},
    {"\xc3\xa4", 1, "expected parts"},
};

START_TEST(test_broken_text)
{
    const broken_text *broken = &broken_texts[_i];
    ids_ctx *ctx = test_ctx();
    ids_partition partition = four_three_one;

    TEST_STATUS(ctx, ids_partition_parse(ctx, broken->text, &partition), IDS_ERR_PARSE);
    ck_assert_msg(strstr(ids_ctx_message(ctx), broken->message) != NULL, "%s",
                  ids_ctx_message(ctx));
    ck_assert_msg(strstr(ids_ctx_message(ctx), broken->text) != NULL, "%s", ids_ctx_message(ctx));
    ck_assert_uint_eq(ids_ctx_last_place(ctx).line, 1);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).column, broken->column);
    ck_assert_mem_eq(&partition, &four_three_one, sizeof partition);
    test_ctx_free(ctx);
}
END_TEST

/* ---- diagram --------------------------------------------------------------------------------- */

START_TEST(test_conjugate)
{
    /* By transposing the diagrams on paper. */
    static const char *const pairs[][2] = {
        {"4+3+1", "3+2+2+1"}, {"4", "1+1+1+1"}, {"3+2+1", "3+2+1"}, {"5+1+1", "3+1+1+1+1"}};
    ids_ctx *ctx = test_ctx();

    for (size_t i = 0; i < 4; i++) {
        ids_partition partition = read_partition(ctx, pairs[i][0]);
        ids_partition expected = read_partition(ctx, pairs[i][1]);

        ck_assert_int_eq(ids_partition_conjugate(&partition, &partition), IDS_OK);
        ck_assert_mem_eq(&partition, &expected, sizeof partition);
    }
    test_ctx_free(ctx);
}
END_TEST

/* Branching: the sum of the dimensions with one corner less (from degree 1 on). */
static uint64_t branch(const ids_partition *partition)
{
    uint64_t sum = 0;

    for (uint32_t i = 0; i < partition->length; i++) {
        ids_partition less = *partition;
        uint64_t dimension = 0;

        if (i + 1 < less.length && less.part[i] == less.part[i + 1]) {
            continue;
        }
        less.part[i]--;
        less.degree--;
        less.length -= less.part[i] == 0;
        ck_assert_int_eq(ids_partition_dimension(&less, &dimension), IDS_OK);
        sum += dimension;
    }
    return sum;
}

START_TEST(test_dimensions)
{
    const uint32_t degree = (uint32_t)_i;
    uint64_t squares = 0;
    uint64_t factorial = 1;
    ids_partition partition;

    idsi_partition_first(degree, &partition);
    do {
        uint64_t dimension = 0;

        ck_assert_int_eq(ids_partition_dimension(&partition, &dimension), IDS_OK);
        if (dimension != (degree == 0 ? 1 : branch(&partition))) {
            ck_abort_msg("degree %u: dimension %llu", degree, (unsigned long long)dimension);
        }
        squares += dimension * dimension;
    } while (idsi_partition_next(&partition));
    for (uint32_t i = 2; i <= degree; i++) {
        factorial *= i;
    }
    /* Both modulo 2^64; n! in full to degree 20. */
    ck_assert_uint_eq(squares, factorial);
}
END_TEST

/* The partition of 36 with the largest dimension, 40971642983700000000 > 2^64, by an independent
 * computation over all partitions; the one of 35 just fits. */
START_TEST(test_large_dimensions)
{
    ids_ctx *ctx = test_ctx();
    ids_partition fits = read_partition(ctx, "9+7+6+4+3+2+2+1+1");
    ids_partition passes = read_partition(ctx, "9+7+6+4+3+3+2+1+1");
    ids_partition row = read_partition(ctx, "40");
    ids_partition hook = read_partition(ctx, "39+1");
    uint64_t dimension = 0;

    ck_assert_int_eq(ids_partition_dimension(&fits, &dimension), IDS_OK);
    ck_assert_uint_eq(dimension, UINT64_C(7821859115070000000));
    ck_assert_int_eq(ids_partition_dimension(&passes, &dimension), IDS_ERR_LIMIT);
    ck_assert_uint_eq(dimension, UINT64_C(7821859115070000000));
    ck_assert_int_eq(ids_partition_dimension(&row, &dimension), IDS_OK);
    ck_assert_uint_eq(dimension, 1);
    ck_assert_int_eq(ids_partition_dimension(&hook, &dimension), IDS_OK);
    ck_assert_uint_eq(dimension, 39);
    test_ctx_free(ctx);
}
END_TEST

/* n! is the sum of the class sizes n!/z. */
START_TEST(test_centralizers)
{
    uint64_t factorial = 1;

    for (uint32_t degree = 1; degree <= 20; degree++) {
        ids_partition partition;
        uint64_t sum = 0;

        factorial *= degree;
        idsi_partition_first(degree, &partition);
        do {
            uint64_t order = 0;

            ck_assert_int_eq(idsi_partition_centralizer(&partition, &order), IDS_OK);
            ck_assert_uint_eq(factorial % order, 0);
            sum += factorial / order;
        } while (idsi_partition_next(&partition));
        ck_assert_uint_eq(sum, factorial);
    }
    ids_partition ones = {.degree = 21, .length = 21};
    uint64_t order = 7;
    memset(ones.part, 1, 21);
    ck_assert_int_eq(idsi_partition_centralizer(&ones, &order), IDS_ERR_LIMIT);
    ck_assert_uint_eq(order, 7);
}
END_TEST

/* ---- arguments ------------------------------------------------------------------------------- */

static const ids_partition malformed[] = {
    {.degree = 4, .length = 2, .part = {1, 3}},       /* not falling */
    {.degree = 5, .length = 2, .part = {3, 1}},       /* wrong sum */
    {.degree = 4, .length = 1, .part = {3, 1}},       /* a part after the last */
    {.degree = 4, .length = 3, .part = {3, 1}},       /* a part 0 */
    {.degree = 41, .length = 2, .part = {40, 1}},     /* degree too large */
    {.degree = 4, .length = UINT32_MAX, .part = {4}}, /* length too large */
    {.degree = 4, .length = 41, .part = {4}},
};

START_TEST(test_malformed)
{
    const ids_partition *partition = &malformed[_i];
    ids_ctx *ctx = test_ctx();
    ids_partition conjugate = four_three_one;
    uint64_t number = 7;
    char *text = NULL;

    ck_assert_int_eq(ids_partition_rank(partition, &number), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_dimension(partition, &number), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_conjugate(partition, &conjugate), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_partition_print(ctx, partition, &text), IDS_ERR_ARG);
    ck_assert_uint_eq(number, 7);
    ck_assert_mem_eq(&conjugate, &four_three_one, sizeof conjugate);
    ck_assert_ptr_null(text);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_arguments)
{
    ids_ctx *ctx = test_ctx();
    ids_partition partition = four_three_one;
    uint64_t number = 7;
    char *text = NULL;

    ck_assert_int_eq(ids_partition_rank(NULL, &number), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_rank(&partition, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_unrank(4, 5, &partition), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_unrank(4, UINT64_MAX, &partition), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_unrank(41, 0, &partition), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_unrank(4, 0, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_conjugate(NULL, &partition), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_conjugate(&partition, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_dimension(NULL, &number), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_dimension(&partition, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_partition_parse(ctx, NULL, &partition), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_partition_parse(ctx, "4", NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_partition_print(ctx, NULL, &text), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_partition_print(ctx, &partition, NULL), IDS_ERR_ARG);
    ck_assert_mem_eq(&partition, &four_three_one, sizeof partition);
    ck_assert_uint_eq(number, 7);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("young: partitions");
    TCase *tcase = tcase_create("partitions");

    tcase_add_test(tcase, test_order);
    tcase_add_test(tcase, test_numbers);
    tcase_add_loop_test(tcase, test_list, 0, (int)IDS_MAX_PARTITION_DEGREE + 1);
    tcase_add_loop_test(tcase, test_text, 1, 19);
    tcase_add_test(tcase, test_long_text);
    tcase_add_loop_test(tcase, test_broken_text, 0,
                        (int)(sizeof broken_texts / sizeof broken_texts[0]));
    tcase_add_test(tcase, test_conjugate);
    tcase_add_loop_test(tcase, test_dimensions, 0, 27);
    tcase_add_test(tcase, test_large_dimensions);
    tcase_add_test(tcase, test_centralizers);
    tcase_add_loop_test(tcase, test_malformed, 0, (int)(sizeof malformed / sizeof malformed[0]));
    tcase_add_test(tcase, test_arguments);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
