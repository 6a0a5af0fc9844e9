/* SPDX-License-Identifier: BSD-2-Clause */
/* Dense echelon forms against FLINT's nmod_mat_rref, block sizes and orders of rows at random. */
#include <stdlib.h>
#include <string.h>

#include "field/dense_private.h"
#include "field_matrix.h"

/* Adds all rows in blocks of random sizes; the blocks are used up, so they are copies. */
static void add_rows(ids_ctx *ctx, idsi_dense_echelon *echelon, const field_matrix *matrix,
                     idsi_random *random)
{
    size_t at = 0;

    while (at < matrix->rows) {
        size_t left = matrix->rows - at;
        size_t count = 1 + idsi_random_below(random, left < 250 ? left : 250);
        size_t before = idsi_dense_echelon_rank(echelon);
        size_t added = 0;
        size_t bytes = count * matrix->columns * sizeof(uint32_t);
        uint32_t *block = malloc(bytes);
        bool *independent = calloc(count, sizeof *independent);

        ck_assert_ptr_nonnull(block);
        ck_assert_ptr_nonnull(independent);
        memcpy(block, field_matrix_row(matrix, at), bytes);
        TEST_OK(ctx, idsi_dense_echelon_add(echelon, block, count, independent));
        for (size_t i = 0; i < count; i++) {
            added += independent[i];
        }
        ck_assert_uint_eq(idsi_dense_echelon_rank(echelon), before + added);
        ck_assert_uint_le(added, count);
        free(block);
        free(independent);
        at += count;
    }
}

static void compare(ids_ctx *ctx, idsi_dense_echelon *echelon, const field_reduced *wanted)
{
    ck_assert_uint_eq(idsi_dense_echelon_rank(echelon), wanted->rank);
    for (size_t i = 0; i < wanted->rank; i++) {
        /* Before completion: a pivot and zeros above it. */
        uint32_t pivot = idsi_dense_echelon_pivot(echelon, i);
        const uint32_t *row = idsi_dense_echelon_row(echelon, i);
        ck_assert(wanted->is_pivot[pivot]);
        ck_assert_uint_eq(row[pivot], 1);
        for (size_t j = (size_t)pivot + 1; j < wanted->columns; j++) {
            ck_assert_uint_eq(row[j], 0);
        }
    }
    TEST_OK(ctx, idsi_dense_echelon_complete(echelon));
    for (size_t i = 0; i < wanted->rank; i++) {
        uint32_t pivot = idsi_dense_echelon_pivot(echelon, i);
        size_t number = field_reduced_find(wanted, pivot);
        ck_assert_int_eq(memcmp(idsi_dense_echelon_row(echelon, i),
                                wanted->entries + number * wanted->columns,
                                wanted->columns * sizeof(uint32_t)),
                         0);
    }
}

static void try_matrix(uint32_t p, size_t rows, size_t columns, field_kind kind,
                       idsi_random *random)
{
    field_matrix matrix;
    field_reduced wanted;
    ids_ctx *ctx = test_ctx();

    field_matrix_init(&matrix, p, rows, columns);
    field_matrix_random(&matrix, kind, random);
    field_reduce(&matrix, &wanted);
    for (int order = 0; order < 2; order++) {
        idsi_dense_echelon *echelon = NULL;
        TEST_OK(ctx, idsi_dense_echelon_create(ctx, p, columns, &echelon));
        add_rows(ctx, echelon, &matrix, random);
        compare(ctx, echelon, &wanted);
        idsi_dense_echelon_free(echelon);
        field_matrix_shuffle(&matrix, random);
    }
    field_reduced_clear(&wanted);
    field_matrix_clear(&matrix);
    test_ctx_free(ctx);
}

START_TEST(test_small)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 100 + (uint64_t)_i);
    for (uint64_t round = 0; round < 40 * test_scale(); round++) {
        size_t rows = 1 + idsi_random_below(&random, 70);
        size_t columns = 1 + idsi_random_below(&random, 70);
        try_matrix(p, rows, columns, (field_kind)(round % FIELD_KINDS), &random);
    }
}
END_TEST

/* Across the borders of panels (192 rows) and slices (16). */
START_TEST(test_panels)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 200 + (uint64_t)_i);
    try_matrix(p, 450, 400, FIELD_DENSE, &random);
    try_matrix(p, 193, 192, FIELD_DENSE, &random);
    try_matrix(p, 700, 220, FIELD_GAPS, &random);
    try_matrix(p, 400, 401, FIELD_EXTREME, &random);
}
END_TEST

START_TEST(test_nothing)
{
    ids_ctx *ctx = test_ctx();
    idsi_dense_echelon *echelon = NULL;

    idsi_dense_echelon_free(NULL);
    TEST_OK(ctx, idsi_dense_echelon_create(ctx, 101, 3, &echelon));
    ck_assert_uint_eq(idsi_dense_echelon_rank(echelon), 0);
    TEST_OK(ctx, idsi_dense_echelon_complete(echelon));
    idsi_dense_echelon_free(echelon);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("field: dense");
    TCase *tcase = tcase_create("dense");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_small, 0, (int)field_prime_count);
    tcase_add_loop_test(tcase, test_panels, 0, (int)field_prime_count);
    tcase_add_test(tcase, test_nothing);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
