/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The streamed elimination against FLINT: rank, pivots and complete tables, for matrices that stay
 * sparse, that need the dense finish, and that have far more rows than rank.
 */
#include <stdlib.h>
#include <string.h>

#include "field_matrix.h"

static ids_status each_row(void *user, idsi_row_fn row, void *row_user)
{
    const field_matrix *matrix = user;
    idsi_entry *entries = malloc((matrix->columns + 1) * sizeof *entries);
    ids_status st = entries == NULL ? IDS_ERR_NOMEM : IDS_OK;

    for (size_t i = 0; st == IDS_OK && i < matrix->rows; i++) {
        const uint32_t *values = field_matrix_row(matrix, i);
        size_t count = 0;
        for (size_t j = 0; j < matrix->columns; j++) {
            if (values[j] != 0) {
                entries[count++] = (idsi_entry){(uint32_t)j, values[j]};
            }
        }
        st = row(row_user, entries, count);
    }
    free(entries);
    return st;
}

static void compare_tables(const idsi_echelon *echelon, const field_reduced *wanted, uint32_t p)
{
    ck_assert_uint_eq(idsi_echelon_rank(echelon), wanted->rank);
    for (uint32_t c = 0; c < wanted->columns; c++) {
        const idsi_entry *rule = NULL;
        uint32_t count = 0;
        ck_assert_int_eq(idsi_echelon_rule(echelon, c, &rule, &count), wanted->is_pivot[c]);
        if (!wanted->is_pivot[c]) {
            continue;
        }
        const uint32_t *row = wanted->entries + field_reduced_find(wanted, c) * wanted->columns;
        for (uint32_t i = 0, j = c; j-- > 0;) {
            uint32_t value = 0;
            if (i < count && rule[i].column == j) {
                value = rule[i].value;
                i++;
            }
            if (value != idsi_mod_neg(row[j], p)) { /* an assertion each would take long */
                ck_abort_msg("column %u of the rule of %u mod %u", j, c, p);
            }
        }
    }
}

static void try_matrix(field_matrix *matrix, idsi_random *random)
{
    field_reduced wanted;
    ids_ctx *ctx = test_ctx();

    field_reduce(matrix, &wanted);
    for (int round = 0; round < 4; round++) {
        idsi_result result = {0};
        idsi_matrix job = {.ctx = ctx,
                           .prime = matrix->p,
                           .columns = (uint32_t)matrix->columns,
                           .tables = round % 2 == 1,
                           .source = each_row,
                           .source_user = matrix};
        TEST_OK(ctx, idsi_eliminate(&job, random, &result));
        ck_assert_msg(result.rank == wanted.rank, "rank %llu, not %zu, of a %zu x %zu mod %u",
                      (unsigned long long)result.rank, wanted.rank, matrix->rows, matrix->columns,
                      matrix->p);
        ck_assert_uint_eq(result.rows, matrix->rows);
        ck_assert(result.error >= 0 && result.error < 0x1p-10);
        /* Over small fields nothing is left to chance. */
        ck_assert(matrix->p > (UINT32_C(1) << 20) || result.error == 0);
        ck_assert_int_eq(result.echelon != NULL, job.tables);
        if (job.tables) {
            compare_tables(result.echelon, &wanted, matrix->p);
        }
        idsi_echelon_free(result.echelon);
        if (round == 1) {
            field_matrix_shuffle(matrix, random);
        }
    }
    field_reduced_clear(&wanted);
    test_ctx_free(ctx);
}

static void try_kind(uint32_t p, size_t rows, size_t columns, field_kind kind, idsi_random *random)
{
    field_matrix matrix;

    field_matrix_init(&matrix, p, rows, columns);
    field_matrix_random(&matrix, kind, random);
    try_matrix(&matrix, random);
    field_matrix_clear(&matrix);
}

START_TEST(test_small)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 500 + (uint64_t)_i);
    for (uint64_t round = 0; round < 30 * test_scale(); round++) {
        size_t rows = idsi_random_below(&random, 80);
        size_t columns = 1 + idsi_random_below(&random, 60);
        try_kind(p, rows, columns, (field_kind)(round % FIELD_KINDS), &random);
    }
}
END_TEST

/* Dense rows take more work than the sparse stage allows. */
START_TEST(test_dense_finish)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 600 + (uint64_t)_i);
    try_kind(p, 300, 260, FIELD_DENSE, &random);
    try_kind(p, 300, 300, FIELD_LOW, &random);
    try_kind(p, 500, 280, FIELD_EXTREME, &random);
}
END_TEST

/* Far more rows than rank, the last of which is independent: combined rows must not miss it. */
START_TEST(test_many_rows)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;
    field_matrix matrix;

    test_random(&random, 700 + (uint64_t)_i);
    field_matrix_init(&matrix, p, 4000, 210);
    field_matrix low = matrix;
    low.rows = 3999;
    field_matrix_random(&low, FIELD_LOW, &random);
    field_matrix last = {
        .p = p, .rows = 1, .columns = matrix.columns, .entries = field_matrix_row(&matrix, 3999)};
    field_matrix_random(&last, FIELD_DENSE, &random);
    try_matrix(&matrix, &random);
    field_matrix_clear(&matrix);
}
END_TEST

/* ---- pieces, threads, folding ---------------------------------------------------------------- */

#define PIECE 7u

static ids_status each_piece(void *user, size_t piece, idsi_row_fn row, void *row_user)
{
    const field_matrix *matrix = user;
    field_matrix part = *matrix;
    size_t first = piece * PIECE;

    part.rows = matrix->rows - first < PIECE ? matrix->rows - first : PIECE;
    part.entries = field_matrix_row(matrix, first);
    return each_row(&part, row, row_user);
}

static idsi_result eliminate_pieces(field_matrix *matrix, uint32_t threads, bool tables,
                                    ids_ctx *ctx)
{
    idsi_random random;
    idsi_result result = {0};
    idsi_matrix job = {.ctx = ctx,
                       .prime = matrix->p,
                       .columns = (uint32_t)matrix->columns,
                       .tables = tables,
                       .pieces = (matrix->rows + PIECE - 1) / PIECE,
                       .piece = each_piece,
                       .source_user = matrix};

    test_random(&random, 900);
    ids_ctx_set_threads(ctx, threads);
    TEST_OK(ctx, idsi_eliminate(&job, &random, &result));
    ck_assert_uint_eq(result.rows, matrix->rows);
    return result;
}

/* Whatever the number of threads: the same numbers and the same tables. */
START_TEST(test_threads)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;
    field_matrix matrix;
    field_reduced wanted;

    test_random(&random, 1000 + (uint64_t)_i);
    field_matrix_init(&matrix, p, 500, 290);
    for (int kind = 0; kind < FIELD_KINDS; kind++) {
        idsi_result alone = {0};
        field_matrix_random(&matrix, (field_kind)kind, &random);
        field_reduce(&matrix, &wanted);
        for (uint32_t threads = 1; threads <= 3; threads++) {
            ids_ctx *ctx = test_ctx();
            idsi_result result = eliminate_pieces(&matrix, threads, true, ctx);
            compare_tables(result.echelon, &wanted, p);
            idsi_echelon_free(result.echelon);
            result.echelon = NULL;
            result = threads == 1 ? result : eliminate_pieces(&matrix, threads, false, ctx);
            alone = threads == 1 ? eliminate_pieces(&matrix, 1, false, ctx) : alone;
            ck_assert_uint_eq(result.rank, wanted.rank);
            if (threads > 1) {
                ck_assert_int_eq(memcmp(&result, &alone, sizeof result), 0);
            }
            test_ctx_free(ctx);
        }
        field_reduced_clear(&wanted);
    }
    field_matrix_clear(&matrix);
}
END_TEST

/*
 * Rows of known rank: the first are (unit row | random row), the others are sums of multiples of
 * three of them.
 */
static void fill_known_rank(field_matrix *matrix, size_t rank, idsi_random *random)
{
    const uint32_t p = matrix->p;

    memset(matrix->entries, 0, matrix->rows * matrix->columns * sizeof *matrix->entries);
    for (size_t i = 0; i < matrix->rows; i++) {
        uint32_t *row = field_matrix_row(matrix, i);
        if (i < rank) {
            row[i] = 1;
            for (size_t j = rank; j < matrix->columns; j++) {
                row[j] = (uint32_t)idsi_random_below(random, p);
            }
            continue;
        }
        for (int k = 0; k < 3; k++) {
            const uint32_t *other = field_matrix_row(matrix, idsi_random_below(random, rank));
            uint32_t factor = (uint32_t)idsi_random_below(random, p);
            for (size_t j = 0; j < matrix->columns; j++) {
                row[j] = (row[j] + idsi_mod_mul(factor, other[j], p)) % p;
            }
        }
    }
}

/* Wide dense rows are folded; when the rank is too large for that, less or not at all. */
START_TEST(test_folding)
{
    static const size_t ranks[] = {0, 1, 300, 1020, 1060, 1400};
    idsi_random random;
    field_matrix matrix;

    test_random(&random, 1100);
    field_matrix_init(&matrix, field_primes[field_prime_count - 1], 1600, 2700);
    for (size_t i = 0; i < sizeof ranks / sizeof *ranks; i++) {
        ids_ctx *ctx = test_ctx();
        if (ranks[i] > 0) {
            fill_known_rank(&matrix, ranks[i], &random);
        }
        idsi_result result = eliminate_pieces(&matrix, 2, false, ctx);
        ck_assert_uint_eq(result.rank, ranks[i]);
        ck_assert(result.dense_width == 0 || result.dense_width < matrix.columns ||
                  ranks[i] > 1040);
        ck_assert(result.error < 0x1p-28);
        test_ctx_free(ctx);
    }
    field_matrix_clear(&matrix);
}
END_TEST

static ids_status stop_in_second_row(void *user, idsi_row_fn row, void *row_user)
{
    const idsi_entry entry = {0, 1};
    ids_status st = row(row_user, &entry, 1);

    return st == IDS_OK ? idsi_fail(user, IDS_ERR_CANCELLED, "stopped") : st;
}

START_TEST(test_source_fails)
{
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    idsi_result result = {0};
    idsi_matrix job = {.ctx = ctx,
                       .prime = 101,
                       .columns = 4,
                       .tables = true,
                       .source = stop_in_second_row,
                       .source_user = ctx};

    test_random(&random, 800);
    TEST_STATUS(ctx, idsi_eliminate(&job, &random, &result), IDS_ERR_CANCELLED);
    ck_assert_ptr_null(result.echelon);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("field: elimination");
    TCase *tcase = tcase_create("elimination");

    tcase_set_timeout(tcase, 30);
    tcase_add_loop_test(tcase, test_small, 0, (int)field_prime_count);
    tcase_add_loop_test(tcase, test_dense_finish, 0, (int)field_prime_count);
    tcase_add_loop_test(tcase, test_many_rows, 0, (int)field_prime_count);
    tcase_add_loop_test(tcase, test_threads, 0, (int)field_prime_count);
    tcase_add_test(tcase, test_folding);
    tcase_add_test(tcase, test_source_fails);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
