/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Numbers of association types and of multilinear monomials, and automorphism orders, against
 * data/reference/counting.csv and automorphisms.csv. A monomial count is compared on two routes:
 * the size of the basis, and the sum over the types of n! / automorphism order.
 */
#include "published.h"

#include <stdlib.h>

#define COUNTING_HEADER "id,signature,file,counted,place,degree,value,status,reach,source"
enum {
    COUNT_ID,
    COUNT_SIGNATURE,
    COUNT_FILE,
    COUNT_COUNTED,
    COUNT_PLACE,
    COUNT_DEGREE,
    COUNT_VALUE,
    COUNT_STATUS,
    COUNT_REACH,
    COUNT_SOURCE
};

#define ORDERS_HEADER "signature,file,degree,order,types,monomials,labelled,status,source"
enum {
    ORDER_SIGNATURE,
    ORDER_FILE,
    ORDER_DEGREE,
    ORDER_ORDER,
    ORDER_TYPES,
    ORDER_MONOMIALS,
    ORDER_LABELLED,
    ORDER_STATUS,
    ORDER_SOURCE
};

static published_table counting;
static published_table orders;
static size_t *first_rows; /* rows of counting.csv, one for each file */
static size_t first_count;

static uint64_t sum_of_monomials(const ids_types *types, uint32_t degree)
{
    uint64_t sum = 0;

    for (uint64_t i = 0; i < ids_types_count(types, degree); i++) {
        ids_type_info info = {0};
        ck_assert_int_eq(ids_types_info(types, degree, i, &info), IDS_OK);
        ck_assert_msg(info.monomials != 0 && info.monomials <= UINT64_MAX - sum,
                      "degree %" PRIu32 ": the monomials pass 64 bits", degree);
        sum += info.monomials;
    }
    return sum;
}

static void compare(size_t row, const char *route, uint64_t got)
{
    const uint64_t expected = published_number(&counting, row, COUNT_VALUE);

    ck_assert_msg(
        got == expected,
        "%s, %s, degree %s: %" PRIu64 " %s by %s, but %" PRIu64 " (%s) is stated by %s",
        published_cell(&counting, row, COUNT_ID), published_cell(&counting, row, COUNT_SIGNATURE),
        published_cell(&counting, row, COUNT_DEGREE), got,
        published_cell(&counting, row, COUNT_COUNTED), route, expected,
        published_cell(&counting, row, COUNT_STATUS), published_cell(&counting, row, COUNT_SOURCE));
}

static void check_count(ids_ctx *ctx, const ids_types *types, size_t row)
{
    const uint32_t degree = (uint32_t)published_number(&counting, row, COUNT_DEGREE);
    ids_basis *basis = NULL;

    if (published_is(&counting, row, COUNT_COUNTED, "types")) {
        compare(row, "listing", ids_types_count(types, degree));
        return;
    }
    TEST_OK(ctx, ids_basis_create(ctx, types, degree, &basis));
    compare(row, "the size of the basis", ids_basis_size(basis));
    compare(row, "the sum over the types", sum_of_monomials(types, degree));
    ids_basis_free(basis);
}

/* All rows of one file that a list of types can reach; it is made once, to the largest degree. */
START_TEST(test_counts)
{
    const size_t first = first_rows[_i];
    const char *file = published_cell(&counting, first, COUNT_FILE);
    ids_ctx *ctx = test_ctx();
    ids_presentation *presentation = published_presentation(ctx, file);
    ids_types *types = NULL;
    uint32_t largest = 0;

    for (size_t row = first; row < counting.rows; row++) {
        if (published_is(&counting, row, COUNT_FILE, file) &&
            published_is(&counting, row, COUNT_REACH, "normal")) {
            const uint32_t degree = (uint32_t)published_number(&counting, row, COUNT_DEGREE);
            largest = degree > largest ? degree : largest;
        }
    }
    TEST_OK(ctx, ids_types_create(ctx, ids_presentation_signature(presentation), largest, &types));
    for (size_t row = first; row < counting.rows; row++) {
        if (published_is(&counting, row, COUNT_FILE, file) &&
            published_is(&counting, row, COUNT_REACH, "normal")) {
            check_count(ctx, types, row);
        }
    }
    ids_types_free(types);
    ids_presentation_free(presentation);
    test_ctx_free(ctx);
}
END_TEST

/* Types of a degree that have the given automorphism order, and the largest order of all. */
static uint64_t types_of_order(const ids_types *types, uint32_t degree, uint64_t order,
                               uint64_t *monomials, uint64_t *largest)
{
    uint64_t count = 0;

    for (uint64_t i = 0; i < ids_types_count(types, degree); i++) {
        ids_type_info info = {0};
        ck_assert_int_eq(ids_types_info(types, degree, i, &info), IDS_OK);
        *largest = info.automorphisms > *largest ? info.automorphisms : *largest;
        if (info.automorphisms == order) {
            count++;
            *monomials = info.monomials;
        }
    }
    return count;
}

/* How many types the rows of one signature and degree speak of, and the largest order in them;
 * 0 types where a row says "some". */
static uint64_t types_stated(size_t row, uint64_t *largest)
{
    const char *file = published_cell(&orders, row, ORDER_FILE);
    const char *degree = published_cell(&orders, row, ORDER_DEGREE);
    bool some = false;
    uint64_t count = 0;

    for (size_t i = 0; i < orders.rows; i++) {
        if (!published_is(&orders, i, ORDER_FILE, file) ||
            !published_is(&orders, i, ORDER_DEGREE, degree)) {
            continue;
        }
        const uint64_t order = published_number(&orders, i, ORDER_ORDER);
        *largest = order > *largest ? order : *largest;
        some = some || published_is(&orders, i, ORDER_TYPES, "some");
        count += some ? 0 : published_number(&orders, i, ORDER_TYPES);
    }
    return some ? 0 : count;
}

START_TEST(test_automorphism_orders)
{
    const size_t row = (size_t)_i;
    const char *source = published_cell(&orders, row, ORDER_SOURCE);
    const uint32_t degree = (uint32_t)published_number(&orders, row, ORDER_DEGREE);
    const uint64_t order = published_number(&orders, row, ORDER_ORDER);
    ids_ctx *ctx = test_ctx();
    ids_presentation *presentation =
        published_presentation(ctx, published_cell(&orders, row, ORDER_FILE));
    ids_types *types = NULL;
    uint64_t largest_stated = 0;
    uint64_t largest = 0;
    uint64_t monomials = 0;

    TEST_OK(ctx, ids_types_create(ctx, ids_presentation_signature(presentation), degree, &types));
    const uint64_t count = types_of_order(types, degree, order, &monomials, &largest);
    const uint64_t stated = types_stated(row, &largest_stated);
    if (stated == 0) {
        ck_assert_msg(count > 0, "degree %" PRIu32 ": no type has %" PRIu64 " automorphisms (%s)",
                      degree, order, source);
    } else {
        ck_assert_msg(count == published_number(&orders, row, ORDER_TYPES),
                      "degree %" PRIu32 ": %" PRIu64 " types have %" PRIu64
                      " automorphisms, not %s (%s)",
                      degree, count, order, published_cell(&orders, row, ORDER_TYPES), source);
        ck_assert_msg(ids_types_count(types, degree) == stated,
                      "degree %" PRIu32 ": the orders of %" PRIu64 " types are stated (%s)", degree,
                      stated, source);
    }
    ck_assert_msg(monomials == published_number(&orders, row, ORDER_MONOMIALS),
                  "degree %" PRIu32 ", order %" PRIu64 ": %" PRIu64 " monomials a type (%s)",
                  degree, order, monomials, source);
    ck_assert_msg(largest == largest_stated,
                  "degree %" PRIu32 ": the largest order is %" PRIu64 ", not %" PRIu64 " (%s)",
                  degree, largest, largest_stated, source);
    ck_assert_msg(sum_of_monomials(types, degree) == published_number(&orders, row, ORDER_LABELLED),
                  "degree %" PRIu32 ": the monomials do not add up (%s)", degree, source);
    ids_types_free(types);
    ids_presentation_free(presentation);
    test_ctx_free(ctx);
}
END_TEST

static Suite *counts_suite(void)
{
    Suite *suite = suite_create("published counts");
    TCase *counts = tcase_create("counting.csv");
    TCase *automorphisms = tcase_create("automorphisms.csv");

    tcase_set_timeout(counts, 60);
    tcase_add_loop_test(counts, test_counts, 0, (int)first_count);
    suite_add_tcase(suite, counts);
    tcase_add_loop_test(automorphisms, test_automorphism_orders, 0, (int)orders.rows);
    suite_add_tcase(suite, automorphisms);
    return suite;
}

int main(void)
{
    int result = EXIT_FAILURE;

    published_load("counting.csv", COUNTING_HEADER, &counting);
    published_load("automorphisms.csv", ORDERS_HEADER, &orders);
    first_rows = calloc(counting.rows, sizeof *first_rows);
    if (first_rows != NULL) {
        first_count = published_files(&counting, COUNT_FILE, COUNT_REACH, "normal", first_rows);
        result = test_run(counts_suite());
    }
    free(first_rows);
    published_free(&orders);
    published_free(&counting);
    return result;
}
