/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Every product kernel that this processor can run, and the blocked product around the chosen
 * one, against FLINT's nmod_mat_mul.
 */
#include <stdlib.h>
#include <string.h>

#include "field/dense_private.h"
#include "field/kernels.h"
#include "field_matrix.h"

/* A as kernels.h describes: row by row, IDSI_KERNEL_DEPTH entries each. */
static int32_t *pack_a(const field_matrix *matrix, size_t from, size_t steps, size_t height)
{
    size_t rows = (matrix->rows + height - 1) / height * height;
    int32_t *packed = calloc(rows * IDSI_KERNEL_DEPTH, sizeof *packed);

    ck_assert_ptr_nonnull(packed);
    for (size_t i = 0; i < matrix->rows; i++) {
        for (size_t k = 0; k < steps && from + k < matrix->columns; k++) {
            packed[i * IDSI_KERNEL_DEPTH + k] =
                idsi_kernel_centred(field_matrix_row(matrix, i)[from + k], matrix->p);
        }
    }
    return packed;
}

/* B in strips: step by step, `width` columns each. */
static int32_t *pack_b(const field_matrix *matrix, size_t from, size_t steps, size_t width)
{
    size_t strips = (matrix->columns + width - 1) / width;
    int32_t *packed = calloc(strips * width * steps, sizeof *packed);

    ck_assert_ptr_nonnull(packed);
    for (size_t k = 0; k < steps && from + k < matrix->rows; k++) {
        for (size_t j = 0; j < matrix->columns; j++) {
            packed[(j / width * steps + k) * width + j % width] =
                idsi_kernel_centred(field_matrix_row(matrix, from + k)[j], matrix->p);
        }
    }
    return packed;
}

static void check_pack(const idsi_kernel *kernel, const field_matrix *b, size_t from, size_t depth,
                       const int32_t *wanted)
{
    size_t steps = idsi_kernel_whole_steps(depth);
    size_t strips = (b->columns + kernel->columns - 1) / kernel->columns;
    size_t count = strips * kernel->columns * steps;
    int32_t *packed = malloc(count * sizeof *packed);

    ck_assert_ptr_nonnull(packed);
    kernel->pack(b->p, depth, b->columns, field_matrix_row(b, from), b->columns, kernel->columns,
                 packed);
    ck_assert_mem_eq(packed, wanted, count * sizeof *packed);
    free(packed);
}

static void run_kernel(const idsi_kernel *kernel, const field_matrix *a, const field_matrix *b,
                       field_matrix *c)
{
    for (size_t from = 0; from < a->columns; from += IDSI_KERNEL_DEPTH) {
        size_t left = a->columns - from;
        size_t depth = left < IDSI_KERNEL_DEPTH ? left : IDSI_KERNEL_DEPTH;
        size_t steps = (depth + IDSI_KERNEL_STEPS - 1) / IDSI_KERNEL_STEPS * IDSI_KERNEL_STEPS;
        int32_t *left_strips = pack_a(a, from, depth, kernel->rows);
        int32_t *right_strips = pack_b(b, from, steps, kernel->columns);
        check_pack(kernel, b, from, depth, right_strips);

        for (size_t i = 0; i < c->rows; i += kernel->rows) {
            for (size_t j = 0; j < c->columns; j += kernel->columns) {
                size_t m = c->rows - i < kernel->rows ? c->rows - i : kernel->rows;
                size_t n = c->columns - j < kernel->columns ? c->columns - j : kernel->columns;
                kernel->strip(c->p, steps, left_strips + i * IDSI_KERNEL_DEPTH,
                              right_strips + j * steps, field_matrix_row(c, i) + j, c->columns, m,
                              n);
            }
        }
        free(left_strips);
        free(right_strips);
    }
}

/* kernel == NULL: the blocked product. */
static void try_product(const idsi_kernel *kernel, uint32_t p, const size_t size[3],
                        field_kind kind, idsi_random *random)
{
    field_matrix a;
    field_matrix b;
    field_matrix c;
    field_matrix wanted;
    ids_ctx *ctx = test_ctx();
    idsi_workspace work;

    field_matrix_init(&a, p, size[0], size[2]);
    field_matrix_init(&b, p, size[2], size[1]);
    field_matrix_init(&c, p, size[0], size[1]);
    field_matrix_init(&wanted, p, size[0], size[1]);
    field_matrix_random(&a, kind, random);
    field_matrix_random(&b, kind, random);
    field_matrix_random(&c, FIELD_EXTREME, random);
    memcpy(wanted.entries, c.entries, c.rows * c.columns * sizeof *c.entries);
    field_matrix_expect(&a, &b, &wanted);
    if (kernel != NULL) {
        run_kernel(kernel, &a, &b, &c);
    } else {
        TEST_OK(ctx, idsi_workspace_init(&work, ctx));
        idsi_dense_mul_sub(&work, p, size[0], size[1], size[2], a.entries, a.columns, b.entries,
                           b.columns, c.entries, c.columns);
        idsi_workspace_clear(&work);
    }
    field_matrix_compare(kernel == NULL ? "blocked" : kernel->name, &c, &wanted);
    field_matrix_clear(&a);
    field_matrix_clear(&b);
    field_matrix_clear(&c);
    field_matrix_clear(&wanted);
    test_ctx_free(ctx);
}

static const size_t sizes[][3] = {{1, 1, 1},   {1, 32, 16}, {6, 32, 16},  {5, 31, 15}, {7, 33, 17},
                                  {13, 65, 1}, {4, 8, 48},  {9, 17, 100}, {3, 70, 257}};
#define SIZES (sizeof sizes / sizeof *sizes)

START_TEST(test_kernels)
{
    const idsi_kernel *kernel = field_kernel((size_t)_i % FIELD_KERNELS);
    const uint32_t p = field_primes[(size_t)_i / FIELD_KERNELS];
    idsi_random random;

    if (kernel == NULL) {
        return;
    }
    test_random(&random, 10 + (uint64_t)_i);
    for (size_t i = 0; i < SIZES; i++) {
        try_product(kernel, p, sizes[i], FIELD_DENSE, &random);
        try_product(kernel, p, sizes[i], FIELD_EXTREME, &random);
    }
}
END_TEST

/* All products are ((p-1)/2)^2 or its negative: the largest sums there can be. */
START_TEST(test_largest_sums)
{
    const uint32_t p = 1073741789;

    for (size_t number = 0; number < FIELD_KERNELS; number++) {
        const idsi_kernel *kernel = field_kernel(number);
        for (uint32_t sign = 0; kernel != NULL && sign < 2; sign++) {
            field_matrix a;
            field_matrix b;
            field_matrix c;
            field_matrix wanted;
            field_matrix_init(&a, p, 7, 1000);
            field_matrix_init(&b, p, 1000, 33);
            field_matrix_init(&c, p, 7, 33);
            field_matrix_init(&wanted, p, 7, 33);
            for (size_t i = 0; i < 1000; i++) {
                for (size_t j = 0; j < 33; j++) {
                    b.entries[i * 33 + j] = (p - 1) / 2;
                    a.entries[i * 7 + j % 7] = sign == 0 ? (p - 1) / 2 : (p + 1) / 2;
                }
            }
            field_matrix_expect(&a, &b, &wanted);
            run_kernel(kernel, &a, &b, &c);
            field_matrix_compare(kernel->name, &c, &wanted);
            field_matrix_clear(&a);
            field_matrix_clear(&b);
            field_matrix_clear(&c);
            field_matrix_clear(&wanted);
        }
    }
}
END_TEST

START_TEST(test_blocked)
{
    static const size_t large[][3] = {{97, 1025, 257}, {191, 300, 193}, {1, 2050, 513}};
    const uint32_t p = field_primes[_i];
    idsi_random random;

    test_random(&random, 40 + (uint64_t)_i);
    for (size_t i = 0; i < SIZES; i++) {
        try_product(NULL, p, sizes[i], FIELD_EXTREME, &random);
    }
    for (size_t i = 0; i < 3; i++) {
        try_product(NULL, p, large[i], i % 2 == 0 ? FIELD_DENSE : FIELD_EXTREME, &random);
    }
}
END_TEST

/* Rows side by side: residues[lane] = sum[lane] + sum of value * factor[column][lane]. */
START_TEST(test_gather)
{
    const uint32_t p = field_primes[_i];
    const uint64_t bound = 4 * (uint64_t)p * p;
    idsi_random random;
    enum { COLUMNS = 5, COUNT = 43 };

    test_random(&random, 70 + (uint64_t)_i);
    for (size_t number = 0; number < FIELD_KERNELS; number++) {
        const idsi_kernel *kernel = field_kernel(number);
        for (size_t count = 0; kernel != NULL && count <= COUNT; count++) {
            uint64_t sums[IDSI_LANES];
            uint32_t factors[COLUMNS * IDSI_LANES];
            uint32_t expected[IDSI_LANES];
            uint32_t residues[IDSI_LANES];
            idsi_entry entries[COUNT];
            bool any = false;

            for (size_t i = 0; i < COLUMNS * IDSI_LANES; i++) {
                factors[i] = i % 16 < 2 ? p - 1 : (uint32_t)idsi_random_below(&random, p);
            }
            for (size_t i = 0; i < count; i++) {
                entries[i].column = (uint32_t)idsi_random_below(&random, COLUMNS);
                entries[i].value = i % 2 == 0 ? p - 1 : (uint32_t)idsi_random_below(&random, p);
            }
            for (size_t lane = 0; lane < IDSI_LANES; lane++) {
                uint64_t sum = lane % 3 == 0 ? bound - 1 : idsi_random_below(&random, bound);
                sums[idsi_kernel_slot(lane)] = sum;
                expected[lane] = (uint32_t)(sum % p);
                for (size_t i = 0; i < count; i++) {
                    uint32_t factor = factors[entries[i].column * IDSI_LANES + lane];
                    expected[lane] =
                        (expected[lane] + idsi_mod_mul(factor, entries[i].value, p)) % p;
                }
                any = any || expected[lane] != 0;
            }
            ck_assert_int_eq(kernel->gather(p, entries, count, factors, sums, residues), any);
            ck_assert_msg(memcmp(residues, expected, sizeof residues) == 0,
                          "%s, %zu entries mod %u", kernel->name, count, p);
        }
    }
}
END_TEST

/* target = scale * target + factor * source, also when they are the same row. */
START_TEST(test_combine)
{
    const uint32_t p = field_primes[_i];
    idsi_random random;
    enum { COUNT = 37 };

    test_random(&random, 80 + (uint64_t)_i);
    for (size_t number = 0; number < FIELD_KERNELS; number++) {
        const idsi_kernel *kernel = field_kernel(number);
        for (size_t count = 0; kernel != NULL && count <= COUNT; count++) {
            uint32_t target[COUNT];
            uint32_t source[COUNT];
            uint32_t expected[COUNT];
            uint32_t scale = count % 2 == 0 ? p - 1 : (uint32_t)idsi_random_below(&random, p);
            uint32_t factor = count % 3 == 0 ? p - 1 : (uint32_t)idsi_random_below(&random, p);

            for (size_t i = 0; i < COUNT; i++) {
                target[i] = i % 4 == 0 ? p - 1 : (uint32_t)idsi_random_below(&random, p);
                source[i] = i % 5 == 0 ? p - 1 : (uint32_t)idsi_random_below(&random, p);
                expected[i] = target[i];
                if (i < count) {
                    expected[i] =
                        (idsi_mod_mul(scale, target[i], p) + idsi_mod_mul(factor, source[i], p)) %
                        p;
                }
            }
            kernel->combine(p, target, scale, source, factor, count);
            ck_assert_int_eq(memcmp(target, expected, sizeof target), 0);
            kernel->combine(p, source, scale, source, 0, count);
            kernel->combine(p, target, 0, source, 1, count);
            ck_assert_int_eq(memcmp(target, source, count * sizeof *source), 0);
        }
    }
}
END_TEST

/* Products that a team shares out are the same. */
START_TEST(test_team)
{
    static const size_t large[][3] = {{300, 700, 300}, {700, 90, 200}, {40, 3000, 31}};
    const uint32_t p = field_primes[_i];
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    idsi_team *team = NULL;

    test_random(&random, 90 + (uint64_t)_i);
    TEST_OK(ctx, idsi_team_create(ctx, 3, &team));
    for (size_t i = 0; i < 3; i++) {
        field_matrix a;
        field_matrix b;
        field_matrix c;
        field_matrix wanted;
        idsi_workspace work;
        field_matrix_init(&a, p, large[i][0], large[i][2]);
        field_matrix_init(&b, p, large[i][2], large[i][1]);
        field_matrix_init(&c, p, large[i][0], large[i][1]);
        field_matrix_init(&wanted, p, large[i][0], large[i][1]);
        field_matrix_random(&a, FIELD_DENSE, &random);
        field_matrix_random(&b, FIELD_DENSE, &random);
        field_matrix_expect(&a, &b, &wanted);
        TEST_OK(ctx, idsi_workspace_init(&work, ctx));
        TEST_OK(ctx, idsi_workspace_share(&work, team));
        idsi_dense_mul_sub(&work, p, a.rows, b.columns, a.columns, a.entries, a.columns, b.entries,
                           b.columns, c.entries, c.columns);
        idsi_workspace_clear(&work);
        field_matrix_compare("shared", &c, &wanted);
        field_matrix_clear(&a);
        field_matrix_clear(&b);
        field_matrix_clear(&c);
        field_matrix_clear(&wanted);
    }
    idsi_team_free(team);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_choice)
{
    const idsi_kernel *chosen = idsi_kernel_choose();
    bool known = false;

    ck_assert_str_eq(chosen->name, idsi_dense_kernel_name());
    for (size_t number = 0; number < FIELD_KERNELS; number++) {
        known = known || chosen == field_kernel(number);
    }
    ck_assert(known);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("field: products");
    TCase *tcase = tcase_create("products");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_kernels, 0, (int)(field_prime_count * FIELD_KERNELS));
    tcase_add_test(tcase, test_largest_sums);
    tcase_add_loop_test(tcase, test_blocked, 0, (int)field_prime_count);
    tcase_add_loop_test(tcase, test_gather, 0, (int)field_prime_count);
    tcase_add_loop_test(tcase, test_combine, 0, (int)field_prime_count);
    tcase_add_loop_test(tcase, test_team, 0, (int)field_prime_count);
    tcase_add_test(tcase, test_choice);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
