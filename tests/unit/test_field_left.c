/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Products with a factor that is prepared once, against FLINT's nmod_mat_mul; sums of products
 * along strips, against sums term by term; and solutions of a dense echelon form.
 */
#include <stdlib.h>
#include <string.h>

#include "field/dense_private.h"
#include "field/solution_private.h"
#include "field_matrix.h"

static const size_t sizes[][3] = {{1, 1, 1},     {12, 16, 16}, {13, 17, 15},   {5, 31, 300},
                                  {25, 16, 257}, {7, 515, 33}, {40, 600, 520}, {24, 3, 1}};
#define SIZES (sizeof sizes / sizeof *sizes)

typedef struct problem {
    field_matrix a;
    field_matrix b;
    field_matrix c;
    field_matrix wanted;
} problem;

static void open_problem(problem *w, uint32_t p, const size_t size[3], idsi_random *random)
{
    field_matrix_init(&w->a, p, size[0], size[2]);
    field_matrix_init(&w->b, p, size[2], size[1]);
    field_matrix_init(&w->c, p, size[0], size[1]);
    field_matrix_init(&w->wanted, p, size[0], size[1]);
    field_matrix_random(&w->a, FIELD_EXTREME, random);
    field_matrix_random(&w->b, FIELD_DENSE, random);
    field_matrix_random(&w->c, FIELD_EXTREME, random);
    memcpy(w->wanted.entries, w->c.entries, size[0] * size[1] * sizeof *w->c.entries);
    field_matrix_expect(&w->a, &w->b, &w->wanted);
}

static void close_problem(problem *w)
{
    field_matrix_clear(&w->a);
    field_matrix_clear(&w->b);
    field_matrix_clear(&w->c);
    field_matrix_clear(&w->wanted);
}

/* ---- left factors ---------------------------------------------------------------------------- */

START_TEST(test_left)
{
    const uint32_t p = field_primes[_i];
    ids_ctx *ctx = test_ctx();
    idsi_workspace work;
    idsi_random random;

    test_random(&random, 300 + (uint64_t)_i);
    TEST_OK(ctx, idsi_workspace_init(&work, ctx));
    for (size_t i = 0; i < SIZES; i++) {
        problem w;
        idsi_left left = {0};
        uint32_t row[600];
        open_problem(&w, p, sizes[i], &random);
        TEST_OK(ctx,
                idsi_left_init(ctx, p, w.a.rows, w.a.columns, w.a.entries, w.a.columns, &left));
        idsi_left_mul_sub(&work, p, &left, w.b.columns, w.b.entries, w.b.columns, w.c.entries,
                          w.c.columns);
        field_matrix_compare("prepared", &w.c, &w.wanted);
        for (size_t r = 0; r < w.a.rows; r++) {
            idsi_left_row(&left, p, r, row);
            ck_assert_mem_eq(row, field_matrix_row(&w.a, r), w.a.columns * sizeof *row);
        }
        idsi_left_clear(ctx, &left);
        close_problem(&w);
    }
    idsi_workspace_clear(&work);
    test_ctx_free(ctx);
}
END_TEST

/* One group of rows, at most IDSI_KERNEL_DEPTH steps, by each kernel's routines for it. */
START_TEST(test_strips)
{
    static const size_t small[][3] = {{12, 16, 16}, {11, 9, 48}, {12, 16, 256}, {1, 1, 1}};
    const uint32_t p = field_primes[_i];
    ids_ctx *ctx = test_ctx();
    idsi_random random;

    test_random(&random, 310 + (uint64_t)_i);
    for (size_t k = 0; k < 2 * FIELD_KERNELS * 4; k++) {
        const idsi_kernel *kernel = field_kernel(k / 8);
        const size_t *size = small[k % 4];
        bool narrow = k / 4 % 2 == 1;
        if (kernel == NULL || (narrow && kernel->narrow_strip == NULL)) {
            continue;
        }
        problem w;
        idsi_left left = {0};
        size_t steps = idsi_kernel_whole_steps(size[2]);
        size_t width = narrow ? 16 : kernel->columns;
        size_t height = narrow ? IDSI_LEFT_ROWS : kernel->rows;
        int32_t *packed = calloc(64 * 256, sizeof *packed);
        ck_assert_ptr_nonnull(packed);
        open_problem(&w, p, size, &random);
        TEST_OK(ctx, idsi_left_init(ctx, p, size[0], size[2], w.a.entries, size[2], &left));
        kernel->pack(p, size[2], size[1], w.b.entries, size[1], width, packed);
        for (size_t i = 0; i < size[0]; i += height) {
            for (size_t j = 0; j < size[1]; j += width) {
                size_t m = size[0] - i < height ? size[0] - i : height;
                size_t n = size[1] - j < width ? size[1] - j : width;
                (narrow ? kernel->narrow_strip
                        : kernel->left_strip)(p, steps, left.values + i, packed + j * steps,
                                              field_matrix_row(&w.c, i) + j, size[1], m, n);
            }
        }
        field_matrix_compare(kernel->name, &w.c, &w.wanted);
        free(packed);
        idsi_left_clear(ctx, &left);
        close_problem(&w);
    }
    test_ctx_free(ctx);
}
END_TEST

/* ---- packed right factors -------------------------------------------------------------------- */

START_TEST(test_packed)
{
    static const size_t some[][3] = {{1, 40, 16}, {13, 33, 128}, {100, 700, 256}, {6, 1, 64}};
    const uint32_t p = field_primes[_i];
    const idsi_kernel *kernel = idsi_kernel_choose();
    ids_ctx *ctx = test_ctx();
    idsi_workspace work;
    idsi_random random;

    test_random(&random, 320 + (uint64_t)_i);
    TEST_OK(ctx, idsi_workspace_init(&work, ctx));
    for (size_t i = 0; i < 4; i++) {
        const size_t *size = some[i];
        size_t whole = (size[1] + kernel->columns - 1) / kernel->columns * kernel->columns;
        problem w;
        int32_t *packed = malloc((whole * size[2]) * sizeof *packed);
        ck_assert_ptr_nonnull(packed);
        open_problem(&w, p, size, &random);
        kernel->pack(p, size[2], size[1], w.b.entries, size[1], kernel->columns, packed);
        idsi_dense_mul_sub_packed(&work, p, size[0], size[1], size[2], w.a.entries, size[2], packed,
                                  w.c.entries, size[1]);
        field_matrix_compare("packed", &w.c, &w.wanted);
        free(packed);
        close_problem(&w);
    }
    idsi_workspace_clear(&work);
    test_ctx_free(ctx);
}
END_TEST

/* ---- sums along strips ----------------------------------------------------------------------- */

#define LONGEST 700u

/* A stride as wide as a strip is a plain row; the wider one leaves gaps. Extremes are frequent. */
static void check_dot(const idsi_kernel *kernel, uint32_t p, size_t count, size_t stride,
                      bool centred, idsi_random *random)
{
    uint32_t *a = calloc((LONGEST / kernel->columns + 1) * stride, sizeof *a);
    int32_t *b = calloc(LONGEST, sizeof *b);
    int64_t expected = 0;

    ck_assert(a != NULL && b != NULL);
    for (size_t j = 0; j < count; j++) {
        uint64_t kind = idsi_random_below(random, 4);
        uint32_t x = kind == 0 ? p - 1 : kind == 1 ? p / 2 : (uint32_t)idsi_random_below(random, p);
        kind = idsi_random_below(random, 4);
        uint32_t y = kind == 0 ? p / 2 : (uint32_t)idsi_random_below(random, p);
        int32_t first = centred ? idsi_kernel_centred(x, p) : (int32_t)x;
        a[j / kernel->columns * stride + j % kernel->columns] = (uint32_t)first;
        b[j] = idsi_kernel_centred(y, p);
        expected = (expected + (int64_t)first * b[j]) % (int64_t)p;
    }
    expected = expected < 0 ? expected + (int64_t)p : expected;
    ck_assert_uint_eq(kernel->dot(p, a, stride, b, count), (uint32_t)expected);
    free(a);
    free(b);
}

START_TEST(test_dot)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 330 + (uint64_t)_i);
    for (size_t number = 0; number < FIELD_KERNELS; number++) {
        const idsi_kernel *kernel = field_kernel(number);
        for (size_t count = 0; kernel != NULL && count <= LONGEST; count += count < 70 ? 1 : 35) {
            check_dot(kernel, p, count, kernel->columns, false, &random);
            check_dot(kernel, p, count, 3 * kernel->columns, true, &random);
        }
    }
}
END_TEST

/* All products have the same sign and are as large as can be. */
START_TEST(test_largest_dot)
{
    const uint32_t p = 1073741789;
    uint32_t a[LONGEST];
    int32_t b[LONGEST];

    for (size_t number = 0; number < 2 * FIELD_KERNELS; number++) {
        const idsi_kernel *kernel = field_kernel(number / 2);
        int32_t most = number % 2 == 0 ? (int32_t)(p / 2) : -(int32_t)(p / 2);
        int64_t expected = 0;
        for (size_t j = 0; j < LONGEST; j++) {
            a[j] = p - 1;
            b[j] = most;
            expected = (expected + (int64_t)(p - 1) * most) % (int64_t)p;
        }
        expected = expected < 0 ? expected + (int64_t)p : expected;
        if (kernel != NULL) {
            ck_assert_uint_eq(kernel->dot(p, a, kernel->columns, b, LONGEST), (uint32_t)expected);
        }
    }
}
END_TEST

/* ---- solutions ------------------------------------------------------------------------------- */

/* Rows times a vector. */
static void check_solution(const field_matrix *rows, const uint32_t *solution)
{
    for (size_t i = 0; i < rows->rows; i++) {
        uint64_t sum = 0;
        for (size_t j = 0; j < rows->columns; j++) {
            sum = (sum + (uint64_t)field_matrix_row(rows, i)[j] * solution[j]) % rows->p;
        }
        ck_assert_uint_eq(sum, 0);
    }
}

/* Ranks of less than a panel, a panel and more, several panels. */
START_TEST(test_solutions)
{
    static const size_t shapes[][2] = {{1, 1}, {3, 40}, {128, 200}, {129, 300}, {400, 500}};
    const uint32_t p = field_primes[_i];
    ids_ctx *ctx = test_ctx();
    idsi_random random;

    test_random(&random, 340 + (uint64_t)_i);
    for (size_t k = 0; k < 5; k++) {
        const size_t columns = shapes[k][1];
        field_matrix rows;
        field_matrix copy;
        idsi_dense_echelon *echelon = NULL;
        field_matrix_init(&rows, p, shapes[k][0], columns);
        field_matrix_init(&copy, p, shapes[k][0], columns);
        field_matrix_random(&rows, FIELD_DENSE, &random);
        memcpy(copy.entries, rows.entries, rows.rows * columns * sizeof *rows.entries);
        TEST_OK(ctx, idsi_dense_echelon_create(ctx, p, columns, &echelon));
        TEST_OK(ctx, idsi_dense_echelon_add(echelon, copy.entries, copy.rows, NULL));
        size_t free_columns = columns - idsi_dense_echelon_rank(echelon);
        uint32_t *solutions = calloc((free_columns + 1) * columns, sizeof *solutions);
        ck_assert_ptr_nonnull(solutions);
        for (size_t i = 0; i < 3; i++) {
            idsi_dense_echelon_solution(echelon, &random, solutions);
            check_solution(&rows, solutions);
        }
        memset(solutions, 0, columns * sizeof *solutions);
        TEST_OK(ctx, idsi_dense_echelon_complete(echelon));
        idsi_dense_echelon_solutions(echelon, solutions);
        for (size_t i = 0; i < free_columns; i++) {
            check_solution(&rows, solutions + i * columns);
        }
        free(solutions);
        idsi_dense_echelon_free(echelon);
        field_matrix_clear(&rows);
        field_matrix_clear(&copy);
    }
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("field left");
    TCase *tests = tcase_create("left");
    int primes = (int)field_prime_count;

    tcase_set_timeout(tests, 60);
    tcase_add_loop_test(tests, test_left, 0, primes);
    tcase_add_loop_test(tests, test_strips, 0, primes);
    tcase_add_loop_test(tests, test_packed, 0, primes);
    tcase_add_loop_test(tests, test_dot, 0, primes);
    tcase_add_test(tests, test_largest_dot);
    tcase_add_loop_test(tests, test_solutions, 0, primes);
    suite_add_tcase(suite, tests);
    return test_run(suite);
}
