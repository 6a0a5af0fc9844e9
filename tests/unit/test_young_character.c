/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Characters of the symmetric groups: tables in print, both orthogonality relations, and what is
 * known of single rows and columns.
 */
#include <stdlib.h>
#include <string.h>

#include "support.h"
#include "young/young_private.h"

/* The table of a degree: character i at cycle type j is value[j * count + i]. */
typedef struct table {
    ids_ctx *ctx;
    idsi_strips strips;
    uint32_t degree;
    size_t count;
    int64_t *value;
} table;

static void open_table(table *t, uint32_t degree)
{
    ids_partition partition;
    size_t j = 0;

    t->ctx = test_ctx();
    t->degree = degree;
    TEST_OK(t->ctx, idsi_strips_create(t->ctx, degree, &t->strips));
    t->count = idsi_partition_number(&t->strips.counts, degree);
    t->value = calloc(t->count * t->count, sizeof *t->value);
    ck_assert_ptr_nonnull(t->value);
    idsi_partition_first(degree, &partition);
    do {
        TEST_OK(t->ctx, idsi_character_column(&t->strips, &partition, t->value + j * t->count));
        j++;
    } while (idsi_partition_next(&partition));
}

static void close_table(table *t)
{
    free(t->value);
    idsi_strips_clear(&t->strips);
    test_ctx_free(t->ctx);
}

static ids_partition at(const table *t, size_t index)
{
    ids_partition partition = {0};

    idsi_partition_at(&t->strips.counts, t->degree, (uint32_t)index, &partition);
    return partition;
}

/* Rows and columns in our order: 3, 21, 111; 4, 31, 22, 211, 1111; 5, 41, 32, 311, 221, 2111,
 * 11111. Classical (Frobenius 1900), from memory. Row: character; column: cycle type. */
static const int table_3[3][3] = {{1, 1, 1}, {-1, 0, 2}, {1, -1, 1}};
static const int table_4[5][5] = {
    {1, 1, 1, 1, 1}, {-1, 0, -1, 1, 3}, {0, -1, 2, 0, 2}, {1, 0, -1, -1, 3}, {-1, 1, 1, -1, 1}};
static const int table_5[7][7] = {{1, 1, 1, 1, 1, 1, 1},    {-1, 0, -1, 1, 0, 2, 4},
                                  {0, -1, 1, -1, 1, 1, 5},  {1, 0, 0, 0, -2, 0, 6},
                                  {0, 1, -1, -1, 1, -1, 5}, {-1, 0, 1, 1, 0, -2, 4},
                                  {1, -1, -1, 1, 1, -1, 1}};

START_TEST(test_tables)
{
    static const int *const tables[] = {table_3[0], table_4[0], table_5[0]};
    table t;

    open_table(&t, 3 + (uint32_t)_i);
    for (size_t i = 0; i < t.count; i++) {
        for (size_t j = 0; j < t.count; j++) {
            ck_assert_int_eq(t.value[j * t.count + i], tables[_i][i * t.count + j]);
        }
    }
    close_table(&t);
}
END_TEST

/* Sum over the cycle types of class size * chi_i * chi_k = n! if i = k, else 0. */
static bool rows_are_orthogonal(const table *t, const uint64_t *centralizer)
{
    uint64_t factorial = 1;

    for (uint32_t i = 2; i <= t->degree; i++) {
        factorial *= i;
    }
    for (size_t i = 0; i < t->count; i++) {
        for (size_t k = 0; k <= i; k++) {
            __int128 sum = 0;
            for (size_t j = 0; j < t->count; j++) {
                const int64_t *column = t->value + j * t->count;
                sum += (__int128)(factorial / centralizer[j]) * column[i] * column[k];
            }
            if (sum != (i == k ? (__int128)factorial : 0)) {
                return false;
            }
        }
    }
    return true;
}

/* Sum over the characters of chi(j) chi(k) = z_j if j = k, else 0. */
static bool columns_are_orthogonal(const table *t, const uint64_t *centralizer)
{
    for (size_t j = 0; j < t->count; j++) {
        for (size_t k = 0; k <= j; k++) {
            __int128 sum = 0;
            for (size_t i = 0; i < t->count; i++) {
                sum += (__int128)t->value[j * t->count + i] * t->value[k * t->count + i];
            }
            if (sum != (j == k ? (__int128)centralizer[j] : 0)) {
                return false;
            }
        }
    }
    return true;
}

START_TEST(test_orthogonality)
{
    table t;

    open_table(&t, (uint32_t)_i);
    uint64_t *centralizer = calloc(t.count, sizeof *centralizer);
    ck_assert_ptr_nonnull(centralizer);
    for (size_t j = 0; j < t.count; j++) {
        ids_partition type = at(&t, j);
        ck_assert_int_eq(idsi_partition_centralizer(&type, &centralizer[j]), IDS_OK);
    }
    ck_assert(rows_are_orthogonal(&t, centralizer));
    ck_assert(columns_are_orthogonal(&t, centralizer));
    free(centralizer);
    close_table(&t);
}
END_TEST

/* The trivial character, the sign, the natural permutation character (one for each fixed point,
 * which is 1 + character n-1+1), dimensions, and conjugates. */
START_TEST(test_rows)
{
    table t;

    open_table(&t, 2 + (uint32_t)_i);
    for (size_t j = 0; j < t.count; j++) {
        const int64_t *column = t.value + j * t.count;
        ids_partition type = at(&t, j);
        int sign = (type.degree - type.length) % 2 == 0 ? 1 : -1;
        int fixed = 0;

        for (uint32_t i = 0; i < type.length; i++) {
            fixed += type.part[i] == 1;
        }
        ck_assert_int_eq(column[0], 1);
        ck_assert_int_eq(column[1], fixed - 1);
        ck_assert_int_eq(column[t.count - 1], sign);
        for (size_t i = 0; i < t.count; i++) {
            ids_partition partition = at(&t, i);
            uint64_t dimension = 0;

            ck_assert_int_eq(ids_partition_dimension(&partition, &dimension), IDS_OK);
            ck_assert_int_eq(ids_partition_conjugate(&partition, &partition), IDS_OK);
            ck_assert_int_eq(column[i],
                             sign * column[idsi_partition_index(&t.strips.counts, &partition)]);
            ck_assert(j + 1 < t.count || column[i] == (int64_t)dimension);
        }
    }
    close_table(&t);
}
END_TEST

/* Degree 33 holds the largest values; the strips reach degree 40, where the characters at one
 * cycle of all letters are (-1)^rows for hooks, else 0. */
START_TEST(test_large)
{
    ids_ctx *ctx = test_ctx();
    static idsi_strips strips;
    ids_partition ones = {.degree = 33, .length = 33};
    ids_partition partition;
    size_t i = 0;

    memset(ones.part, 1, 33);
    TEST_OK(ctx, idsi_strips_create(ctx, IDS_MAX_PARTITION_DEGREE, &strips));
    int64_t *column = calloc(idsi_partition_number(&strips.counts, 33), sizeof *column);
    ck_assert_ptr_nonnull(column);
    TEST_OK(ctx, idsi_character_column(&strips, &ones, column));
    idsi_partition_first(33, &partition);
    do {
        uint64_t dimension = 0;

        ck_assert(ids_partition_dimension(&partition, &dimension) == IDS_OK &&
                  column[i++] == (int64_t)dimension);
    } while (idsi_partition_next(&partition));
    free(column);

    const uint32_t *start = strips.start + strips.first[0][40];
    ck_assert_uint_eq(start[1] - start[0], 40);
    for (uint32_t e = start[0]; e < start[1]; e++) {
        idsi_partition_at(&strips.counts, 40, strips.entry[e] >> 1, &partition);
        ck_assert(partition.length == 1 || partition.part[1] == 1);
        ck_assert_uint_eq(strips.entry[e] & 1u, (partition.length - 1) % 2);
    }
    idsi_strips_clear(&strips);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("young: characters");
    TCase *tcase = tcase_create("characters");

    tcase_add_loop_test(tcase, test_tables, 0, 3);
    tcase_add_loop_test(tcase, test_orthogonality, 0, 17);
    tcase_add_loop_test(tcase, test_rows, 0, 11);
    tcase_add_test(tcase, test_large);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
