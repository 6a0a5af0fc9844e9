/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Matrices of consequences, written and read back. Their ranks are FLINT's, dense and without any
 * of the engine's elimination: of the plain matrix over the integers, of the quotient step mod p.
 * Both must give the numbers of the rank table; the plain matrix does so for --exact too.
 */
#include <flint/flint.h>
#include <flint/fmpz_mat.h>
#include <flint/nmod_mat.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/answer.h>

#include "engine_support.h"

#define MOST_COLUMNS 130u
#define MOST_DEGREE 6u

static uint64_t integer_rank(const engine_matrix *matrix)
{
    fmpz_mat_t dense;

    fmpz_mat_init(dense, (slong)matrix->rows, (slong)matrix->columns);
    for (size_t i = 0; i < matrix->count; i++) {
        const engine_entry *e = &matrix->entries[i];
        fmpz_set_si(fmpz_mat_entry(dense, (slong)e->row, (slong)e->column), e->value);
    }
    uint64_t rank = (uint64_t)fmpz_mat_rank(dense);
    fmpz_mat_clear(dense);
    return rank;
}

static uint64_t modular_rank(const engine_matrix *matrix, uint64_t prime)
{
    nmod_mat_t dense;

    nmod_mat_init(dense, (slong)matrix->rows, (slong)matrix->columns, prime);
    for (size_t i = 0; i < matrix->count; i++) {
        const engine_entry *e = &matrix->entries[i];
        int64_t rest = e->value % (int64_t)prime;
        nmod_mat_entry(dense, e->row, e->column) =
            (mp_limb_t)(rest < 0 ? rest + (int64_t)prime : rest);
    }
    uint64_t rank = (uint64_t)nmod_mat_rank(dense);
    nmod_mat_clear(dense);
    return rank;
}

static ids_rank_row exact_row(ids_ctx *ctx, const ids_presentation *pres, uint32_t degree,
                              uint32_t field)
{
    ids_rank_options options = {.struct_size = sizeof options, .exact = field == 0, .field = field};
    ids_rank_table *table = NULL;
    ids_rank_row row = {0};

    TEST_OK(ctx, ids_rank_table_create(ctx, pres, degree, degree, &options, &table));
    ck_assert_int_eq(ids_rank_table_row(table, 0, &row), IDS_OK);
    ck_assert_int_eq(row.certainty, IDS_CERTAINTY_EXACT);
    ids_rank_table_free(table);
    return row;
}

/* The column names of the plain matrix are the basis. */
static void check_names(ids_ctx *ctx, const ids_presentation *pres, uint32_t degree,
                        const engine_matrix *matrix)
{
    ids_types *types = NULL;
    ids_basis *basis = NULL;

    TEST_OK(ctx, ids_types_create(ctx, ids_presentation_signature(pres), degree, &types));
    TEST_OK(ctx, ids_basis_create(ctx, types, degree, &basis));
    ck_assert_uint_eq(ids_basis_size(basis), matrix->columns);
    for (uint64_t c = 0; c < matrix->columns; c++) {
        ids_mono *mono = NULL;
        char *name = NULL;
        TEST_OK(ctx, ids_basis_unrank(ctx, basis, c, &mono));
        TEST_OK(ctx, ids_mono_print(ctx, mono, &name));
        ck_assert_str_eq(name, matrix->names[c]);
        ids_string_free(ctx, name);
        ids_mono_free(mono);
    }
    ids_basis_free(basis);
    ids_types_free(types);
}

START_TEST(test_plain)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_variety(ctx, engine_varieties[_i]);
    ids_matrix_options options = {.struct_size = sizeof options, .plain = true};

    for (uint32_t degree = 1; degree <= MOST_DEGREE; degree++) {
        engine_matrix matrix;
        if (!engine_matrix_read(ctx, pres, degree, &options, MOST_COLUMNS, &matrix)) {
            break;
        }
        ids_rank_row row = exact_row(ctx, pres, degree, 0);
        ck_assert_uint_eq(matrix.prime, 0);
        ck_assert_uint_eq(matrix.columns, row.free);
        ck_assert_msg(integer_rank(&matrix) == row.consequences, "%s, degree %u",
                      engine_varieties[_i], degree);
        /* No variable stands five times in a term, so 5 divides no factor that is divided out. */
        row = exact_row(ctx, pres, degree, 5);
        ck_assert_uint_eq(modular_rank(&matrix, 5), row.consequences);
        check_names(ctx, pres, degree, &matrix);
        engine_matrix_clear(&matrix);
    }
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_step)
{
    static const uint32_t fields[] = {0, 2, 3, 101};
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_variety(ctx, engine_varieties[_i]);

    for (size_t f = 0; f < 4; f++) {
        ids_matrix_options options = {.struct_size = sizeof options, .field = fields[f]};
        for (uint32_t degree = 1; degree <= MOST_DEGREE; degree++) {
            engine_matrix matrix;
            if (!engine_matrix_read(ctx, pres, degree, &options, 400, &matrix)) {
                break;
            }
            ids_rank_row row = exact_row(ctx, pres, degree, fields[f]);
            ck_assert(matrix.prime > 0 || degree == 1);
            uint64_t prime = matrix.prime > 0 ? matrix.prime : 101;
            ck_assert_uint_eq(matrix.columns - modular_rank(&matrix, prime), row.quotient);
            for (size_t i = 0; i < matrix.count; i++) {
                int64_t half = (int64_t)(prime / 2);
                ck_assert(matrix.entries[i].value >= -half && matrix.entries[i].value <= half);
            }
            engine_matrix_clear(&matrix);
        }
    }
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* Degree 4 of the Jacobi identity by hand: 4 of it in a product with the fourth letter, and 6 with
 * one letter replaced by one of the 6 brackets of two letters; 3 terms each. */
START_TEST(test_jacobi)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_presentation(
        ctx, "operation [a,b] alternating\nidentity [[a,b],c] + [[b,c],a] + [[c,a],b]\n");
    ids_matrix_options options = {.struct_size = sizeof options, .plain = true};
    engine_matrix matrix;

    ck_assert(engine_matrix_read(ctx, pres, 4, &options, 1000, &matrix));
    ck_assert_uint_eq(matrix.rows, 10);
    ck_assert_uint_eq(matrix.columns, 15); /* 5!! */
    ck_assert_uint_eq(matrix.count, 30);
    ck_assert_uint_eq(integer_rank(&matrix), 15 - 6); /* 3! */
    engine_matrix_clear(&matrix);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* Coefficients beyond 64 bits go through as they are. */
static int find_number(void *user, const char *bytes, size_t length)
{
    bool *found = user;
    char text[512];

    ck_assert_uint_lt(length, sizeof text);
    memcpy(text, bytes, length);
    text[length] = '\0';
    *found = *found || strstr(text, " -123456789012345678901234567891\n") != NULL;
    return 0;
}

START_TEST(test_large_numbers)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_presentation(
        ctx, "operation a*b\nidentity 7*(a*b)*c = 123456789012345678901234567891*a*(b*c)\n");
    ids_matrix_options options = {.struct_size = sizeof options, .plain = true};
    ids_matrix *matrix = NULL;
    bool found = false;

    TEST_OK(ctx, ids_matrix_create(ctx, pres, 3, &options, &matrix));
    TEST_OK(ctx, ids_matrix_write(ctx, matrix, find_number, &found));
    ck_assert(found);
    ids_matrix_free(matrix);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

static int refuse(void *user, const char *bytes, size_t length)
{
    (void)user;
    (void)bytes;
    (void)length;
    return 1;
}

START_TEST(test_errors)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_variety(ctx, "jordan.pres");
    ids_matrix_options options = {.struct_size = sizeof options, .field = 4};
    ids_matrix *matrix = NULL;

    TEST_STATUS(ctx, ids_matrix_create(ctx, pres, 3, &options, &matrix), IDS_ERR_ARG);
    options = (ids_matrix_options){.struct_size = sizeof options, .field = 5, .plain = true};
    TEST_STATUS(ctx, ids_matrix_create(ctx, pres, 3, &options, &matrix), IDS_ERR_ARG);
    options = (ids_matrix_options){.struct_size = 2};
    TEST_STATUS(ctx, ids_matrix_create(ctx, pres, 3, &options, &matrix), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "must be sizeof(ids_matrix_options)"));
    TEST_STATUS(ctx, ids_matrix_create(ctx, pres, 0, NULL, &matrix), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_matrix_create(ctx, pres, 65, NULL, &matrix), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_matrix_create(ctx, NULL, 3, NULL, &matrix), IDS_ERR_ARG);
    ck_assert_ptr_null(matrix);
    ids_matrix_free(NULL);
    ck_assert_uint_eq(ids_matrix_rows(NULL) + ids_matrix_columns(NULL) + ids_matrix_entries(NULL) +
                          ids_matrix_prime(NULL),
                      0);
    TEST_OK(ctx, ids_matrix_create(ctx, pres, 5, NULL, &matrix));
    TEST_STATUS(ctx, ids_matrix_write(ctx, matrix, refuse, NULL), IDS_ERR_IO);
    TEST_STATUS(ctx, ids_matrix_write_columns(ctx, matrix, refuse, NULL), IDS_ERR_IO);
    TEST_STATUS(ctx, ids_matrix_write(ctx, matrix, NULL, NULL), IDS_ERR_ARG);
    ids_ctx *other = test_ctx();
    TEST_STATUS(other, ids_matrix_write(other, matrix, refuse, NULL), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(other), "another context"));
    TEST_STATUS(other, ids_matrix_write_columns(other, matrix, refuse, NULL), IDS_ERR_ARG);
    test_ctx_free(other);
    TEST_STATUS(ctx, ids_matrix_write_columns(ctx, NULL, refuse, NULL), IDS_ERR_ARG);
    ids_matrix_free(matrix);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("engine: matrices");
    TCase *tcase = tcase_create("matrices");

    tcase_set_timeout(tcase, 30);
    tcase_add_loop_test(tcase, test_plain, 0, (int)engine_variety_count);
    tcase_add_loop_test(tcase, test_step, 0, (int)engine_variety_count);
    tcase_add_test(tcase, test_jacobi);
    tcase_add_test(tcase, test_large_numbers);
    tcase_add_test(tcase, test_errors);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
