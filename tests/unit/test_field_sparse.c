/* SPDX-License-Identifier: BSD-2-Clause */
/* Sparse echelon forms and rows rewritten side by side, against FLINT's nmod_mat_rref. */
#include <stdlib.h>
#include <string.h>

#include "field/rewrite_private.h"
#include "field_matrix.h"

/* A row as entries; some entries are cut in two, since columns may repeat. */
static size_t entries_of(const field_matrix *matrix, size_t row, idsi_random *random,
                         idsi_entry *entries)
{
    const uint32_t *values = field_matrix_row(matrix, row);
    size_t count = 0;

    for (size_t j = 0; j < matrix->columns; j++) {
        uint32_t value = values[j];
        if (value == 0) {
            continue;
        }
        if (idsi_random_below(random, 4) == 0) {
            uint32_t part = (uint32_t)idsi_random_below(random, matrix->p);
            entries[count++] = (idsi_entry){(uint32_t)j, part};
            value = (uint32_t)((value + (uint64_t)matrix->p - part) % matrix->p);
        }
        entries[count++] = (idsi_entry){(uint32_t)j, value};
    }
    for (size_t i = count; i > 1; i--) {
        size_t other = idsi_random_below(random, i);
        idsi_entry t = entries[i - 1];
        entries[i - 1] = entries[other];
        entries[other] = t;
    }
    return count;
}

static idsi_echelon *make_form(ids_ctx *ctx, const field_matrix *matrix, size_t rows,
                               idsi_random *random)
{
    idsi_echelon *echelon = NULL;
    idsi_entry *entries = malloc((2 * matrix->columns + 1) * sizeof *entries);
    uint32_t independent = 0;

    ck_assert_ptr_nonnull(entries);
    TEST_OK(ctx, idsi_echelon_create(ctx, matrix->p, (uint32_t)matrix->columns, &echelon));
    for (size_t i = 0; i < rows; i++) {
        idsi_verdict verdict = IDSI_DEFERRED;
        size_t count = entries_of(matrix, i, random, entries);
        uint32_t factor = 1 + (uint32_t)idsi_random_below(random, matrix->p - 1);
        idsi_echelon_load(echelon, entries, count, factor);
        TEST_OK(ctx, idsi_echelon_settle(echelon, UINT64_MAX, &verdict));
        ck_assert_int_ne(verdict, IDSI_DEFERRED);
        independent += verdict == IDSI_INDEPENDENT;
    }
    ck_assert_uint_eq(idsi_echelon_rank(echelon), independent);
    free(entries);
    return echelon;
}

/* The rules of a completed form are the rows of the reduced one. */
static void compare(const idsi_echelon *echelon, const field_reduced *wanted, uint32_t p)
{
    uint64_t fill = 0;

    ck_assert_uint_eq(idsi_echelon_rank(echelon), wanted->rank);
    for (uint32_t c = 0; c < wanted->columns; c++) {
        const idsi_entry *rule = NULL;
        uint32_t count = 0;
        ck_assert_int_eq(idsi_echelon_is_pivot(echelon, c), wanted->is_pivot[c]);
        ck_assert_int_eq(idsi_echelon_rule(echelon, c, &rule, &count), wanted->is_pivot[c]);
        if (!wanted->is_pivot[c]) {
            continue;
        }
        const uint32_t *row = wanted->entries + field_reduced_find(wanted, c) * wanted->columns;
        uint32_t nonzero = 0;
        for (size_t j = 0; j < c; j++) {
            nonzero += row[j] != 0;
        }
        ck_assert_uint_eq(count, nonzero);
        for (uint32_t i = 0; i < count; i++) {
            ck_assert_uint_eq(rule[i].value, idsi_mod_neg(row[rule[i].column], p));
            ck_assert(i == 0 || rule[i].column < rule[i - 1].column);
        }
        fill += count;
    }
    ck_assert_uint_eq(idsi_echelon_fill(echelon), fill);
}

static void try_form(uint32_t p, size_t rows, size_t columns, field_kind kind, idsi_random *random)
{
    field_matrix matrix;
    field_reduced wanted;
    ids_ctx *ctx = test_ctx();

    field_matrix_init(&matrix, p, rows, columns);
    field_matrix_random(&matrix, kind, random);
    field_reduce(&matrix, &wanted);
    for (int order = 0; order < 2; order++) {
        idsi_echelon *echelon = make_form(ctx, &matrix, rows, random);
        TEST_OK(ctx, idsi_echelon_complete(echelon));
        compare(echelon, &wanted, p);
        idsi_echelon_free(echelon);
        field_matrix_shuffle(&matrix, random);
    }
    field_reduced_clear(&wanted);
    field_matrix_clear(&matrix);
    test_ctx_free(ctx);
}

START_TEST(test_forms)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 300 + (uint64_t)_i);
    for (uint64_t round = 0; round < 40 * test_scale(); round++) {
        size_t rows = 1 + idsi_random_below(&random, 60);
        size_t columns = 1 + idsi_random_below(&random, 90);
        try_form(p, rows, columns, (field_kind)(round % FIELD_KINDS), &random);
    }
    try_form(p, 300, 250, FIELD_SPARSE, &random);
    /* Summaries of marks above one word of words: 64 * 64 columns and more. */
    try_form(p, 30, 5000, FIELD_SPARSE, &random);
}
END_TEST

/* A row that is deferred changes nothing, and is taken with enough work. */
START_TEST(test_work)
{
    ids_ctx *ctx = test_ctx();
    idsi_echelon *echelon = NULL;
    idsi_verdict verdict = IDSI_DEPENDENT;
    const idsi_entry first[] = {{4, 1}, {3, 1}, {2, 1}, {1, 1}};
    const idsi_entry second[] = {{4, 1}, {0, 1}};

    TEST_OK(ctx, idsi_echelon_create(ctx, 101, 5, &echelon));
    idsi_echelon_load(echelon, first, 4, 1);
    TEST_OK(ctx, idsi_echelon_settle(echelon, 0, &verdict));
    ck_assert_int_eq(verdict, IDSI_INDEPENDENT);
    for (uint64_t work = 0; work < 3; work++) {
        idsi_echelon_load(echelon, second, 2, 1);
        TEST_OK(ctx, idsi_echelon_settle(echelon, work, &verdict));
        ck_assert_int_eq(verdict, IDSI_DEFERRED);
        ck_assert_uint_eq(idsi_echelon_rank(echelon), 1);
    }
    idsi_echelon_load(echelon, second, 2, 1);
    TEST_OK(ctx, idsi_echelon_settle(echelon, 3, &verdict));
    ck_assert_int_eq(verdict, IDSI_INDEPENDENT);
    ck_assert(idsi_echelon_is_pivot(echelon, 3));
    /* An empty row, and one that cancels. */
    TEST_OK(ctx, idsi_echelon_settle(echelon, 0, &verdict));
    ck_assert_int_eq(verdict, IDSI_DEPENDENT);
    idsi_echelon_load(echelon, second, 2, 1);
    idsi_echelon_load(echelon, second, 2, 100);
    TEST_OK(ctx, idsi_echelon_settle(echelon, 0, &verdict));
    ck_assert_int_eq(verdict, IDSI_DEPENDENT);
    idsi_echelon_free(echelon);
    test_ctx_free(ctx);
}
END_TEST

/* What a fold makes of the rest of a row, twice the row. */
static void fold_rest(const idsi_fold *fold, uint32_t p, size_t columns, const uint32_t *rest,
                      uint32_t *folded)
{
    memset(folded, 0, fold->width * sizeof *folded);
    for (size_t c = 0; c < columns; c++) {
        uint32_t value = (uint32_t)(2 * (uint64_t)rest[c] % p);
        if (fold->place[c] == UINT32_MAX) {
            continue;
        }
        for (uint32_t k = 0; k < fold->mixed; k++) {
            uint32_t mix = fold->mix[c * IDSI_FOLD_MIXED + k];
            folded[k] = (folded[k] + idsi_mod_mul(value, mix, p)) % p;
        }
        uint32_t *at = &folded[fold->place[c]];
        *at = (*at + value) % p;
    }
}

/* Rows of the second half, rewritten by the rules of the first; width 0: not folded. */
static void try_lanes(uint32_t p, size_t columns, size_t width, field_kind kind,
                      idsi_random *random)
{
    const uint32_t lanes_count = idsi_lanes_count();
    const size_t rules = columns / 2;
    field_matrix matrix;
    field_matrix half;
    field_reduced wanted;
    ids_ctx *ctx = test_ctx();
    idsi_fold fold;
    idsi_rewriter *rewriter = NULL;
    idsi_lanes *lanes = NULL;
    uint32_t *rest = calloc(columns, sizeof *rest);
    uint32_t *folded = calloc(columns, sizeof *folded);
    uint32_t *out = calloc(lanes_count * columns, sizeof *out);
    idsi_entry *entries = malloc((2 * columns + 1) * sizeof *entries);

    ck_assert(rest != NULL && folded != NULL && out != NULL && entries != NULL);
    field_matrix_init(&matrix, p, rules + lanes_count, columns);
    field_matrix_random(&matrix, kind, random);
    half = matrix;
    half.rows = rules;
    field_reduce(&half, &wanted);
    idsi_echelon *echelon = make_form(ctx, &matrix, rules, random);
    TEST_OK(ctx, idsi_fold_init(&fold, ctx, echelon, p, (uint32_t)columns, width, random));
    ck_assert_uint_eq(fold.width, width > 0 ? width : columns - wanted.rank);
    TEST_OK(ctx, idsi_rewriter_create(ctx, echelon, p, (uint32_t)columns, &fold, NULL, &rewriter));
    TEST_OK(ctx, idsi_lanes_create(ctx, rewriter, &lanes));
    for (int twice = 0; twice < 2; twice++) { /* the second time on the same, cleared lanes */
        uint32_t used = lanes_count - (uint32_t)twice;
        memset(out, 0, lanes_count * columns * sizeof *out);
        for (uint32_t lane = 0; lane < used; lane++) {
            size_t count = entries_of(&matrix, rules + lane, random, entries);
            idsi_lanes_load(lanes, lane, entries, count, 1, out + lane * fold.width);
            idsi_lanes_load(lanes, lane, entries, count, 1, out + lane * fold.width);
        }
        idsi_lanes_solve(lanes);
        for (uint32_t chunk = 0; chunk < idsi_rewriter_chunks(rewriter); chunk++) {
            idsi_lanes_apply(lanes, chunk, used, fold.width / 2, fold.width, out, fold.width);
            idsi_lanes_apply(lanes, chunk, used, 0, fold.width / 2, out, fold.width);
        }
        for (uint32_t lane = 0; lane < used; lane++) {
            field_reduced_rest(&wanted, p, field_matrix_row(&matrix, rules + lane), rest);
            fold_rest(&fold, p, columns, rest, folded);
            ck_assert_int_eq(memcmp(out + lane * fold.width, folded, fold.width * sizeof *folded),
                             0);
        }
    }
    idsi_lanes_free(lanes);
    idsi_rewriter_free(rewriter);
    idsi_fold_clear(&fold);
    idsi_echelon_free(echelon);
    field_reduced_clear(&wanted);
    field_matrix_clear(&matrix);
    free(entries);
    free(out);
    free(folded);
    free(rest);
    test_ctx_free(ctx);
}

START_TEST(test_lanes)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 400 + (uint64_t)_i);
    for (int kind = 0; kind < FIELD_KINDS; kind++) {
        try_lanes(p, 20, 0, (field_kind)kind, &random);
        try_lanes(p, 130, 0, (field_kind)kind, &random);
        try_lanes(p, 130, 30, (field_kind)kind, &random);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("field: sparse");
    TCase *tcase = tcase_create("sparse");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_forms, 0, (int)field_prime_count);
    tcase_add_test(tcase, test_work);
    tcase_add_loop_test(tcase, test_lanes, 0, (int)field_prime_count);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
