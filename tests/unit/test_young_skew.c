/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * lib/young/skew.c: standard tableaux of skew shapes, their numbering, and cuts.
 *
 * The numbers of tableaux are compared with the hook length formula, with Aitken's determinant
 * (A. C. Aitken, "The monomial expansion of determinantal symmetric functions", 1943; also
 * Stanley, Enumerative Combinatorics 2, Corollary 7.16.3) and with a recursion that takes cells
 * off. What a tableau is, is checked on its filling.
 */
#include <string.h>

#include "support.h"
#include "young/skew_private.h"
#include "young/young_private.h"

#define ROWS IDSI_SHAPE_MAX

typedef void (*shape_fn)(void *user, const uint8_t *outer, const uint8_t *inner, uint32_t rows);

/* All partitions inside `outer`, as inner shapes, with at most `cells` cells left over. */
static void each_inner(const uint8_t *outer, uint32_t rows, uint32_t cells, uint32_t row,
                       uint8_t *inner, shape_fn fn, void *user)
{
    uint32_t left = 0;

    if (row == rows) {
        for (uint32_t i = 0; i < rows; i++) {
            left += (uint32_t)(outer[i] - inner[i]);
        }
        if (left > 0 && left <= cells) {
            fn(user, outer, inner, rows);
        }
        return;
    }
    uint32_t most = row > 0 && inner[row - 1] < outer[row] ? inner[row - 1] : outer[row];
    for (uint32_t part = 0; part <= most; part++) {
        inner[row] = (uint8_t)part;
        each_inner(outer, rows, cells, row + 1, inner, fn, user);
    }
    inner[row] = 0;
}

/* All skew shapes of at most `cells` cells inside partitions of `size`. */
static void each_skew(uint32_t size, uint32_t cells, shape_fn fn, void *user)
{
    for (uint64_t i = 0; i < ids_partition_count(size); i++) {
        ids_partition partition = {0};
        uint8_t outer[ROWS] = {0};
        uint8_t inner[ROWS] = {0};
        ck_assert_int_eq(ids_partition_unrank(size, i, &partition), IDS_OK);
        memcpy(outer, partition.part, partition.length);
        each_inner(outer, partition.length, cells, 0, inner, fn, user);
    }
}

/* ---- numbers of tableaux ---------------------------------------------------------------- */

START_TEST(test_hook_lengths)
{
    static const uint8_t empty[ROWS] = {0};
    const uint32_t degree = (uint32_t)_i;
    ids_ctx *ctx = test_ctx();
    idsi_skews skews;
    uint64_t squares = 0;
    uint64_t factorial = 1;

    idsi_skews_init(&skews, ctx);
    for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
        ids_partition partition = {0};
        uint32_t number = 0;
        uint64_t dimension = 0;
        ck_assert_int_eq(ids_partition_unrank(degree, i, &partition), IDS_OK);
        ck_assert_int_eq(ids_partition_dimension(&partition, &dimension), IDS_OK);
        TEST_OK(ctx, idsi_skews_get(&skews, partition.part, empty, partition.length, &number));
        ck_assert_uint_eq(number, i);
        ck_assert_uint_eq(skews.list[number]->count, dimension);
        squares += dimension * dimension;
    }
    for (uint32_t k = 2; k <= degree; k++) {
        factorial *= k;
    }
    ck_assert_uint_eq(squares, factorial);
    idsi_skews_clear(&skews);
    test_ctx_free(ctx);
}
END_TEST

/* The cell of the largest entry is a corner: take it off in every way. */
static uint64_t count_down(uint8_t *outer, const uint8_t *inner, uint32_t rows)
{
    uint64_t count = 0;
    bool empty = true;

    for (uint32_t i = 0; i < rows; i++) {
        if (outer[i] > inner[i]) {
            empty = false;
            if (i + 1 == rows || outer[i + 1] < outer[i]) {
                outer[i]--;
                count += count_down(outer, inner, rows);
                outer[i]++;
            }
        }
    }
    return empty ? 1 : count;
}

#define PRIME UINT64_C(1000003) /* larger than the factorials below */

static uint64_t power(uint64_t base, uint64_t exponent)
{
    uint64_t result = 1;
    for (; exponent > 0; exponent /= 2, base = base * base % PRIME) {
        result = exponent % 2 == 1 ? result * base % PRIME : result;
    }
    return result;
}

static uint64_t factorial_of(int n)
{
    uint64_t result = 1;
    for (int k = 2; k <= n; k++) {
        result *= (uint64_t)k;
    }
    return result;
}

/* Determinant mod PRIME. */
static uint64_t determinant(uint64_t (*a)[ROWS], uint32_t n)
{
    uint64_t result = 1;

    for (uint32_t k = 0; k < n; k++) {
        uint32_t pivot = k;
        while (pivot < n && a[pivot][k] == 0) {
            pivot++;
        }
        if (pivot == n) {
            return 0;
        }
        for (uint32_t j = 0; pivot != k && j < n; j++) {
            uint64_t other = a[k][j];
            a[k][j] = a[pivot][j];
            a[pivot][j] = other;
        }
        result = result * (pivot == k ? a[k][k] : PRIME - a[k][k]) % PRIME;
        for (uint32_t i = k + 1; i < n; i++) {
            uint64_t factor = a[i][k] * power(a[k][k], PRIME - 2) % PRIME;
            for (uint32_t j = k; j < n; j++) {
                a[i][j] = (a[i][j] + (PRIME - factor) * a[k][j]) % PRIME;
            }
        }
    }
    return result;
}

/* n! det(1 / (outer[i] - inner[j] - i + j)!) */
static uint64_t aitken(const uint8_t *outer, const uint8_t *inner, uint32_t rows, uint32_t cells)
{
    uint64_t matrix[ROWS][ROWS] = {{0}};

    for (uint32_t i = 0; i < rows; i++) {
        for (uint32_t j = 0; j < rows; j++) {
            int k = (int)outer[i] - (int)inner[j] - (int)i + (int)j;
            matrix[i][j] = k < 0 ? 0 : power(factorial_of(k) % PRIME, PRIME - 2);
        }
    }
    return factorial_of((int)cells) % PRIME * determinant(matrix, rows) % PRIME;
}

static void check_count(void *user, const uint8_t *outer, const uint8_t *inner, uint32_t rows)
{
    idsi_skews *skews = user;
    uint8_t top[ROWS] = {0};
    uint32_t number = 0;

    memcpy(top, outer, rows);
    TEST_OK(skews->ctx, idsi_skews_get(skews, outer, inner, rows, &number));
    const idsi_skew *skew = skews->list[number];
    ck_assert_uint_eq(skew->count, aitken(outer, inner, rows, skew->shape.cells));
    ck_assert_uint_eq(skew->count, count_down(top, inner, rows));
}

START_TEST(test_aitken)
{
    ids_ctx *ctx = test_ctx();
    idsi_skews skews;

    idsi_skews_init(&skews, ctx);
    each_skew((uint32_t)_i, 8, check_count, &skews);
    idsi_skews_clear(&skews);
    test_ctx_free(ctx);
}
END_TEST

/* Cells that do not touch: all orders. A row, a column: one. */
START_TEST(test_borders)
{
    static const uint8_t steps[] = {7, 6, 5, 4, 3, 2, 1};
    static const uint8_t below[] = {6, 5, 4, 3, 2, 1, 0};
    static const uint8_t row[] = {16};
    static const uint8_t column[] = {1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1};
    static const uint8_t none[16] = {0};
    ids_ctx *ctx = test_ctx();
    idsi_skews skews;
    uint32_t number = 0;

    idsi_skews_init(&skews, ctx);
    TEST_OK(ctx, idsi_skews_get(&skews, steps, below, 7, &number));
    ck_assert_uint_eq(skews.list[number]->count, 5040);
    TEST_OK(ctx, idsi_skews_get(&skews, row, none, 1, &number));
    ck_assert_uint_eq(skews.list[number]->count, 1);
    ck_assert_uint_eq(skews.list[number]->shape.cells, 16);
    TEST_OK(ctx, idsi_skews_get(&skews, column, none, 16, &number));
    ck_assert_uint_eq(skews.list[number]->count, 1);
    ck_assert_uint_eq(skews.list[number]->shape.rows, 16);
    TEST_OK(ctx, idsi_skews_get(&skews, row, none, 1, &number));
    ck_assert_uint_eq(number, 1);
    ck_assert_uint_eq(skews.count, 3);
    idsi_skews_clear(&skews);
    test_ctx_free(ctx);
}
END_TEST

/* A shape that is moved down and to the right is the same; one with a gap between is another. */
START_TEST(test_moved)
{
    static const uint8_t outer[] = {3, 2, 2};
    static const uint8_t inner[] = {1, 1, 0};
    static const uint8_t moved_outer[] = {9, 6, 5, 5, 3};
    static const uint8_t moved_inner[] = {9, 4, 4, 3, 3};
    static const uint8_t gap_outer[] = {4, 2, 2};
    static const uint8_t gap_inner[] = {2, 1, 0};
    ids_ctx *ctx = test_ctx();
    idsi_skews skews;
    uint32_t first = 0;
    uint32_t moved = 0;
    uint32_t gap = 0;

    idsi_skews_init(&skews, ctx);
    TEST_OK(ctx, idsi_skews_get(&skews, outer, inner, 3, &first));
    TEST_OK(ctx, idsi_skews_get(&skews, moved_outer, moved_inner, 5, &moved));
    TEST_OK(ctx, idsi_skews_get(&skews, gap_outer, gap_inner, 3, &gap));
    ck_assert_uint_eq(first, moved);
    ck_assert_uint_ne(first, gap);
    idsi_skews_clear(&skews);
    test_ctx_free(ctx);
}
END_TEST

/* ---- tableaux ------------------------------------------------------------------------------ */

/* Fills the shape as tableau t says; columns and entries count from 0, 99 is no cell. */
static void fill(const idsi_skew *skew, uint32_t t, uint8_t (*cell)[ROWS + 1], uint8_t *column)
{
    const uint8_t *row = skew->row + (size_t)t * skew->shape.cells;
    uint8_t filled[ROWS];

    memset(cell, 99, ROWS * sizeof *cell);
    memcpy(filled, skew->shape.inner, sizeof filled);
    for (uint32_t i = 0; i < skew->shape.cells; i++) {
        column[i] = filled[row[i]];
        cell[row[i]][filled[row[i]]] = (uint8_t)i;
        filled[row[i]]++;
    }
    ck_assert_mem_eq(filled, skew->shape.outer, sizeof filled);
}

static void check_standard(const idsi_skew *skew, uint8_t (*cell)[ROWS + 1])
{
    for (uint32_t r = 0; r < skew->shape.rows; r++) {
        for (uint32_t c = skew->shape.inner[r]; c < skew->shape.outer[r]; c++) {
            ck_assert(c == skew->shape.inner[r] || cell[r][c - 1] < cell[r][c]);
            ck_assert(r == 0 || cell[r - 1][c] == 99 || cell[r - 1][c] < cell[r][c]);
        }
    }
}

static void check_tableaux(void *user, const uint8_t *outer, const uint8_t *inner, uint32_t rows)
{
    idsi_skews *skews = user;
    uint32_t number = 0;

    TEST_OK(skews->ctx, idsi_skews_get(skews, outer, inner, rows, &number));
    const idsi_skew *skew = skews->list[number];
    uint32_t n = skew->shape.cells;
    for (uint32_t t = 0; t < skew->count; t++) {
        const uint8_t *row = skew->row + (size_t)t * n;
        uint8_t cell[ROWS][ROWS + 1];
        uint8_t column[ROWS];
        fill(skew, t, cell, column);
        check_standard(skew, cell);
        ck_assert(t == 0 || memcmp(row - n, row, n) < 0);
        for (uint32_t i = 0; i + 1 < n; i++) {
            size_t at = (size_t)i * skew->count + t;
            int distance = (column[i + 1] - row[i + 1]) - (column[i] - row[i]);
            ck_assert_int_eq(skew->distance[at], distance);
            if (distance == 1 || distance == -1) {
                ck_assert_uint_eq(skew->swap[at], t);
            } else {
                const uint8_t *other = skew->row + (size_t)skew->swap[at] * n;
                for (uint32_t k = 0; k < n; k++) {
                    uint32_t from = k == i ? i + 1 : k == i + 1 ? i : k;
                    ck_assert_uint_eq(other[k], row[from]);
                }
            }
        }
    }
}

START_TEST(test_tableaux)
{
    ids_ctx *ctx = test_ctx();
    idsi_skews skews;

    idsi_skews_init(&skews, ctx);
    each_skew((uint32_t)_i, 7, check_tableaux, &skews);
    idsi_skews_clear(&skews);
    test_ctx_free(ctx);
}
END_TEST

/* ---- cuts ------------------------------------------------------------------------------------ */

/* Number of a path among the tableaux of a shape that was moved up by `up` rows. */
static uint32_t find(const idsi_skew *skew, const uint8_t *path, uint32_t up)
{
    for (uint32_t t = 0; t < skew->count; t++) {
        const uint8_t *row = skew->row + (size_t)t * skew->shape.cells;
        uint32_t same = 0;
        while (same < skew->shape.cells && row[same] + up == path[same]) {
            same++;
        }
        if (same == skew->shape.cells) {
            return t;
        }
    }
    ck_abort_msg("a part of a tableau is none of its piece");
    return 0;
}

/* The cut where tableau t goes through `middle` has it at its address. */
static void check_address(idsi_skews *skews, const idsi_skew *skew, uint32_t t, uint32_t at)
{
    const uint8_t *path = skew->row + (size_t)t * skew->shape.cells;
    uint8_t middle[ROWS];
    uint32_t low = 0;
    uint32_t high = 0;
    uint32_t low_up = 0;
    uint32_t high_up = 0;
    uint32_t hits = 0;

    memcpy(middle, skew->shape.inner, sizeof middle);
    for (uint32_t i = 0; i < at; i++) {
        middle[path[i]]++;
    }
    TEST_OK(skews->ctx, idsi_skews_get(skews, middle, skew->shape.inner, ROWS, &low));
    TEST_OK(skews->ctx, idsi_skews_get(skews, skew->shape.outer, middle, ROWS, &high));
    while (middle[low_up] == skew->shape.inner[low_up]) {
        low_up++;
    }
    while (middle[high_up] == skew->shape.outer[high_up]) {
        high_up++;
    }
    uint32_t s = find(skews->list[low], path, low_up);
    uint32_t rest = find(skews->list[high], path + at, high_up);
    for (size_t k = 0; k < skew->cut_count[at]; k++) {
        const idsi_cut *cut = &skew->cut[at][k];
        if (cut->low == low && cut->high == high && cut->start[s] + rest == t) {
            ck_assert_uint_eq(cut->low_count, skews->list[low]->count);
            ck_assert_uint_eq(cut->high_count, skews->list[high]->count);
            hits++;
        }
    }
    ck_assert_uint_eq(hits, 1);
}

static void check_cuts(void *user, const uint8_t *outer, const uint8_t *inner, uint32_t rows)
{
    idsi_skews *skews = user;
    uint32_t number = 0;

    TEST_OK(skews->ctx, idsi_skews_get(skews, outer, inner, rows, &number));
    const idsi_skew *skew = skews->list[number];
    for (uint32_t at = 1; at < skew->shape.cells; at++) {
        size_t sum = 0;
        TEST_OK(skews->ctx, idsi_skews_cut(skews, number, at));
        size_t cuts = skew->cut_count[at];
        TEST_OK(skews->ctx, idsi_skews_cut(skews, number, at)); /* nothing more */
        ck_assert_uint_eq(skew->cut_count[at], cuts);
        for (size_t k = 0; k < cuts; k++) {
            sum += (size_t)skew->cut[at][k].low_count * skew->cut[at][k].high_count;
        }
        ck_assert_uint_eq(sum, skew->count);
        for (uint32_t t = 0; t < skew->count; t++) {
            check_address(skews, skew, t, at);
        }
    }
}

START_TEST(test_cuts)
{
    ids_ctx *ctx = test_ctx();
    idsi_skews skews;

    idsi_skews_init(&skews, ctx);
    each_skew((uint32_t)_i, 6, check_cuts, &skews);
    idsi_skews_clear(&skews);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("young: skew shapes");
    TCase *tcase = tcase_create("skew");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_hook_lengths, 1, 13);
    tcase_add_loop_test(tcase, test_aitken, 1, 11);
    tcase_add_test(tcase, test_borders);
    tcase_add_test(tcase, test_moved);
    tcase_add_loop_test(tcase, test_tableaux, 1, 9);
    tcase_add_loop_test(tcase, test_cuts, 1, 8);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
