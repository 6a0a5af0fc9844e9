/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Normal forms and their products, mod a prime and over the rational numbers: laws that hold for
 * products of normal forms, consequences that reduce to zero, polynomials that reduce to
 * themselves.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "engine/engine_private.h"
#include "engine_support.h"

/* ---- an element as a vector, by the public calls only -------------------------------------- */

/* Numbers in a field: residues mod p, or (p == 0) fractions whose denominators divide SCALE. */
#define SCALE 5040

typedef struct element {
    uint32_t degree;
    uint32_t labels[16]; /* ascending */
    uint64_t size;
    int64_t *value; /* of each normal form: residues, or SCALE times the coefficient */
} element;

typedef struct algebra {
    ids_ctx *ctx;
    ids_presentation *pres;
    ids_normal_forms *forms;
    int64_t p;
} algebra;

static void open_algebra(algebra *a, ids_presentation *pres, ids_ctx *ctx, uint32_t degree,
                         bool exact)
{
    ids_normal_options options = {.struct_size = sizeof options, .exact = exact};

    *a = (algebra){.ctx = ctx, .pres = pres};
    TEST_OK(ctx, ids_normal_forms_create(ctx, pres, degree, &options, &a->forms));
    a->p = ids_normal_forms_prime(a->forms);
    ck_assert_int_eq(a->p == 0, exact);
}

static void close_algebra(algebra *a)
{
    ids_normal_forms_free(a->forms);
    ids_presentation_free(a->pres);
    test_ctx_free(a->ctx);
}

static int64_t settle(const algebra *a, int64_t value)
{
    return a->p > 0 ? value % a->p : value;
}

static element element_new(const algebra *a, uint32_t degree, const uint32_t *labels)
{
    element e = {.degree = degree, .size = ids_normal_forms_count(a->forms, degree)};

    e.value = calloc(e.size + 1, sizeof *e.value);
    ck_assert_ptr_nonnull(e.value);
    memcpy(e.labels, labels, degree * sizeof *labels);
    for (uint32_t i = 1; i < degree; i++) { /* insertion sort */
        for (uint32_t j = i; j > 0 && e.labels[j] < e.labels[j - 1]; j--) {
            uint32_t t = e.labels[j];
            e.labels[j] = e.labels[j - 1];
            e.labels[j - 1] = t;
        }
    }
    return e;
}

/* Adds factor * a combination (factor as in element.value, scaled). */
static void element_add(const algebra *a, element *e, const ids_combination *c, int64_t factor)
{
    for (size_t t = 0; t < ids_combination_count(c); t++) {
        uint64_t index = 0;
        int64_t num = 0;
        int64_t den = 0;
        ck_assert_int_eq(ids_combination_term(c, t, &index, &num, &den), IDS_OK);
        ck_assert_uint_lt(index, e->size);
        ck_assert(a->p == 0 || den == 1);
        ck_assert_int_eq(factor * num % den, 0);
        e->value[index] = settle(a, e->value[index] + settle(a, factor * num / den));
    }
}

/*
 * The product of two elements, on labels that need not be 1 .. n: the labels are renamed in their
 * order, which is what the normal forms of a set of labels mean.
 */
static element element_product(const algebra *a, size_t op, const element *x, const element *y)
{
    uint32_t labels[32];
    uint32_t local[2][16];
    ids_factor factors[2] = {{.degree = x->degree, .labels = local[0]},
                             {.degree = y->degree, .labels = local[1]}};

    memcpy(labels, x->labels, x->degree * sizeof *labels);
    memcpy(labels + x->degree, y->labels, y->degree * sizeof *labels);
    element e = element_new(a, x->degree + y->degree, labels);
    for (uint32_t i = 0; i < e.degree; i++) {
        for (uint32_t j = 0; j < e.degree; j++) {
            if (j < x->degree && x->labels[j] == e.labels[i]) {
                local[0][j] = i + 1;
            } else if (j < y->degree && y->labels[j] == e.labels[i]) {
                local[1][j] = i + 1;
            }
        }
    }
    for (uint64_t i = 0; i < x->size; i++) {
        for (uint64_t j = 0; j < y->size; j++) {
            ids_combination *c = NULL;
            int64_t factor = x->value[i] * y->value[j];
            if (x->value[i] == 0 || y->value[j] == 0) {
                continue;
            }
            ck_assert(a->p > 0 || factor % SCALE == 0);
            factor = a->p > 0 ? factor : factor / SCALE;
            factors[0].index = i;
            factors[1].index = j;
            TEST_OK(a->ctx, ids_normal_forms_product(a->ctx, a->forms, op, factors, 2, &c));
            ck_assert_uint_eq(ids_combination_degree(c), e.degree);
            element_add(a, &e, c, settle(a, factor));
            ids_combination_free(c);
        }
    }
    return e;
}

static element element_unit(const algebra *a, uint32_t degree, uint64_t index,
                            const uint32_t *labels)
{
    element e = element_new(a, degree, labels);
    e.value[index] = a->p > 0 ? 1 : SCALE;
    return e;
}

/* x + sign * y = 0 after settling, both on the same labels. */
static void check_sum(const algebra *a, const element *x, const element *y, int64_t sign)
{
    ck_assert_uint_eq(x->degree, y->degree);
    ck_assert_int_eq(memcmp(x->labels, y->labels, x->degree * sizeof *x->labels), 0);
    for (uint64_t i = 0; i < x->size; i++) {
        ck_assert_int_eq(settle(a, x->value[i] + sign * y->value[i]), 0);
    }
}

/* ---- three factors at random --------------------------------------------------------------- */

/* Random normal forms u, v, w on a random partition of 1 .. n. False where there are none. */
static bool random_factors(const algebra *a, uint32_t n, idsi_random *random, element out[3])
{
    uint32_t labels[16];
    uint32_t first = 1 + (uint32_t)idsi_random_below(random, n - 2);
    uint32_t second = 1 + (uint32_t)idsi_random_below(random, n - first - 1);
    uint32_t degree[3] = {first, second, n - first - second};
    uint32_t at = 0;

    for (uint32_t i = 0; i < n; i++) {
        labels[i] = i + 1;
    }
    for (uint32_t i = n; i > 1; i--) {
        uint32_t j = (uint32_t)idsi_random_below(random, i);
        uint32_t t = labels[i - 1];
        labels[i - 1] = labels[j];
        labels[j] = t;
    }
    for (int f = 0; f < 3; f++) {
        if (ids_normal_forms_count(a->forms, degree[f]) == 0) {
            return false;
        }
    }
    for (int f = 0; f < 3; f++) {
        uint64_t count = ids_normal_forms_count(a->forms, degree[f]);
        out[f] = element_unit(a, degree[f], idsi_random_below(random, count), labels + at);
        at += degree[f];
    }
    return true;
}

/* (x y) z as one element; frees what is between. */
static element left_product(const algebra *a, const element *x, const element *y, const element *z)
{
    element xy = element_product(a, 0, x, y);
    element e = element_product(a, 0, &xy, z);
    free(xy.value);
    return e;
}

START_TEST(test_lie)
{
    ids_ctx *ctx = test_ctx();
    algebra a;
    idsi_random random;

    test_random(&random, 1000);
    open_algebra(&a, engine_variety(ctx, "lie.pres"), ctx, 6, _i == 1);
    /* (n-1)!: Witt, http://mathoverflow.net/feeds/question/23782 */
    uint64_t factorial = 1;
    for (uint32_t n = 1; n <= 6; n++) {
        factorial *= n > 1 ? n - 1 : 1;
        ck_assert_uint_eq(ids_normal_forms_count(a.forms, n), factorial);
    }
    ck_assert_uint_eq(ids_normal_forms_count(a.forms, 0), 0);
    ck_assert_uint_eq(ids_normal_forms_count(a.forms, 7), 0);
    for (int round = 0; round < 60; round++) {
        element f[3];
        if (!random_factors(&a, 3 + (uint32_t)round % 4, &random, f)) {
            continue;
        }
        element one = left_product(&a, &f[0], &f[1], &f[2]);
        element two = left_product(&a, &f[1], &f[2], &f[0]);
        element three = left_product(&a, &f[2], &f[0], &f[1]);
        for (uint64_t i = 0; i < one.size; i++) {
            two.value[i] += three.value[i];
        }
        check_sum(&a, &one, &two, 1);
        /* [u,v] = -[v,u] */
        element uv = element_product(&a, 0, &f[0], &f[1]);
        element vu = element_product(&a, 0, &f[1], &f[0]);
        check_sum(&a, &uv, &vu, 1);
        element *all[] = {&one, &two, &three, &uv, &vu, &f[0], &f[1], &f[2]};
        for (size_t i = 0; i < sizeof all / sizeof *all; i++) {
            free(all[i]->value);
        }
    }
    close_algebra(&a);
}
END_TEST

START_TEST(test_associative)
{
    static const char *const files[] = {"associative.pres", "grassmann.pres", "perm.pres",
                                        "dual-alternative.pres"};
    idsi_random random;

    test_random(&random, 1100);
    for (size_t i = 0; i < 4; i++) {
        ids_ctx *ctx = test_ctx();
        algebra a;
        open_algebra(&a, engine_variety(ctx, files[i]), ctx, 5, _i == 1);
        for (int round = 0; round < 60; round++) {
            element f[3];
            if (!random_factors(&a, 3 + (uint32_t)round % 3, &random, f)) {
                continue;
            }
            element left = left_product(&a, &f[0], &f[1], &f[2]);
            element yz = element_product(&a, 0, &f[1], &f[2]);
            element right = element_product(&a, 0, &f[0], &yz);
            check_sum(&a, &left, &right, -1);
            element *all[] = {&left, &yz, &right, &f[0], &f[1], &f[2]};
            for (size_t k = 0; k < sizeof all / sizeof *all; k++) {
                free(all[k]->value);
            }
        }
        close_algebra(&a);
    }
}
END_TEST

/* ---- reduction --------------------------------------------------------------------------- */

/* Every row of the plain matrix, as a polynomial, reduces to 0. */
static void check_consequences(const algebra *a, uint32_t degree)
{
    ids_matrix_options options = {.struct_size = sizeof options, .plain = true};
    engine_matrix matrix;
    ids_types *types = NULL;
    ids_basis *basis = NULL;

    if (!engine_matrix_read(a->ctx, a->pres, degree, &options, 130, &matrix)) {
        return;
    }
    TEST_OK(a->ctx, ids_types_create(a->ctx, ids_presentation_signature(a->pres), degree, &types));
    TEST_OK(a->ctx, ids_basis_create(a->ctx, types, degree, &basis));
    ids_mono **monos = calloc(matrix.columns + 1, sizeof *monos);
    const ids_mono **row = calloc(matrix.columns + 1, sizeof *row);
    int64_t *values = calloc(matrix.columns + 1, sizeof *values);
    ck_assert(monos != NULL && row != NULL && values != NULL);
    for (uint64_t c = 0; c < matrix.columns; c++) {
        TEST_OK(a->ctx, ids_basis_unrank(a->ctx, basis, c, &monos[c]));
    }
    for (size_t i = 0; i < matrix.count;) {
        ids_combination *c = NULL;
        uint64_t number = matrix.entries[i].row;
        size_t count = 0;
        for (; i < matrix.count && matrix.entries[i].row == number; i++) {
            row[count] = monos[matrix.entries[i].column];
            values[count++] = matrix.entries[i].value;
        }
        TEST_OK(a->ctx, ids_normal_forms_reduce(a->ctx, a->forms, row, values, count, &c));
        ck_assert_uint_eq(ids_combination_count(c), 0);
        ids_combination_free(c);
    }
    for (uint64_t c = 0; c < matrix.columns; c++) {
        ids_mono_free(monos[c]);
    }
    free(monos);
    free(row);
    free(values);
    ids_basis_free(basis);
    ids_types_free(types);
    engine_matrix_clear(&matrix);
}

/* Normal forms reduce to themselves, as monomials and as text. */
static void check_forms(const algebra *a, uint32_t degree)
{
    for (uint64_t i = 0; i < ids_normal_forms_count(a->forms, degree); i++) {
        ids_mono *mono = NULL;
        char *text = NULL;
        char *printed = NULL;
        ids_combination *c[2] = {NULL, NULL};

        TEST_OK(a->ctx, ids_normal_forms_mono(a->ctx, a->forms, degree, i, &mono));
        TEST_OK(a->ctx, ids_normal_forms_print(a->ctx, a->forms, degree, i, &text));
        TEST_OK(a->ctx, ids_mono_print(a->ctx, mono, &printed));
        ck_assert_str_eq(text, printed);
        TEST_OK(a->ctx, ids_normal_forms_reduce(a->ctx, a->forms, (const ids_mono *const *)&mono,
                                                NULL, 1, &c[0]));
        TEST_OK(a->ctx,
                ids_normal_forms_reduce_text(a->ctx, a->forms, text, strlen(text), NULL, &c[1]));
        for (int k = 0; k < 2; k++) {
            uint64_t index = UINT64_MAX;
            int64_t num = 0;
            int64_t den = 0;
            ck_assert_uint_eq(ids_combination_count(c[k]), 1);
            ck_assert_int_eq(ids_combination_term(c[k], 0, &index, &num, &den), IDS_OK);
            ck_assert_uint_eq(index, i);
            ck_assert_int_eq(num, 1);
            ck_assert_int_eq(den, 1);
            ids_combination_free(c[k]);
        }
        ids_string_free(a->ctx, text);
        ids_string_free(a->ctx, printed);
        ids_mono_free(mono);
    }
}

START_TEST(test_varieties)
{
    for (int exact = 0; exact < 2; exact++) {
        ids_ctx *ctx = test_ctx();
        algebra a;
        uint32_t degree = 5;
        ids_types *types = NULL;
        ids_presentation *pres = engine_variety(ctx, engine_varieties[_i]);

        TEST_OK(ctx, ids_types_create(ctx, ids_presentation_signature(pres), 5, &types));
        for (uint32_t d = 5; d > 2; d--) { /* large free algebras to degree 3 only */
            degree = ids_types_count(types, d) > 14 ? d - 1 : degree;
        }
        ids_types_free(types);
        open_algebra(&a, pres, ctx, degree, exact == 1);
        for (uint32_t d = 1; d <= degree; d++) {
            check_consequences(&a, d);
            if (ids_normal_forms_count(a.forms, d) <= 150) {
                check_forms(&a, d);
            }
        }
        close_algebra(&a);
    }
}
END_TEST

/* A reduced polynomial is printed, read, and reduces to the same. */
START_TEST(test_idempotent)
{
    static const char text[] = "3*(((a*b)*c)*d)*e - 1/2*((a*b)*(c*d))*e + 7*(a*(b*c))*(d*e)";
    ids_ctx *ctx = test_ctx();
    algebra a;
    ids_combination *first = NULL;
    ids_combination *second = NULL;
    char *printed = NULL;
    char *again = NULL;

    open_algebra(&a, engine_variety(ctx, "jordan.pres"), ctx, 5, _i == 1);
    TEST_OK(ctx, ids_normal_forms_reduce_text(ctx, a.forms, text, sizeof text - 1, "text", &first));
    TEST_OK(ctx, ids_combination_print(ctx, first, &printed));
    TEST_OK(ctx, ids_normal_forms_reduce_text(ctx, a.forms, printed, strlen(printed), "printed",
                                              &second));
    TEST_OK(ctx, ids_combination_print(ctx, second, &again));
    ck_assert_str_eq(printed, again);
    ck_assert_uint_gt(ids_combination_count(first), 0);
    ck_assert_uint_eq(ids_combination_count(first), ids_combination_count(second));
    for (size_t i = 0; i < ids_combination_count(first); i++) {
        char *x = NULL;
        char *y = NULL;
        TEST_OK(ctx, ids_combination_coefficient(ctx, first, i, &x));
        TEST_OK(ctx, ids_combination_coefficient(ctx, second, i, &y));
        ck_assert_str_eq(x, y);
        ids_string_free(ctx, x);
        ids_string_free(ctx, y);
    }
    ids_string_free(ctx, printed);
    ids_string_free(ctx, again);
    ids_combination_free(first);
    ids_combination_free(second);
    close_algebra(&a);
}
END_TEST

/*
 * Commutative algebras, by hand. The identity
 * 2 (ab)c = (ac)b + (bc)a, with b and c exchanged, gives (ab)c = (ac)b = (bc)a. An equation and a
 * fraction: (ab)c = 1/2 (ac)b makes everything 0, since (ab)c = 1/2 (ac)b = 1/4 (ab)c.
 */
START_TEST(test_by_hand)
{
    static const char *const laws[] = {"2*(x*y)*z = (x*z)*y + (y*z)*x", "(x*y)*z = 1/2*(x*z)*y"};
    static const char *const printed[] = {"5*(a*b)*c", "0"};

    for (size_t i = 0; i < 2; i++) {
        ids_ctx *ctx = test_ctx();
        char text[256];
        char *result = NULL;
        algebra a;
        ids_combination *c = NULL;

        snprintf(text, sizeof text, "operation a*b commutative\nidentity %s\n", laws[i]);
        open_algebra(&a, engine_presentation(ctx, text), ctx, 3, _i == 1);
        TEST_OK(ctx,
                ids_normal_forms_reduce_text(ctx, a.forms, "7*(x*y)*w = 2*(w*x)*y", 21, NULL, &c));
        TEST_OK(ctx, ids_combination_print(ctx, c, &result));
        ck_assert_str_eq(result, printed[i]);
        ids_string_free(ctx, result);
        ids_combination_free(c);
        close_algebra(&a);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("engine: normal forms");
    TCase *tcase = tcase_create("normal forms");

    tcase_set_timeout(tcase, 30);
    tcase_add_loop_test(tcase, test_lie, 0, 2);
    tcase_add_loop_test(tcase, test_associative, 0, 2);
    tcase_add_loop_test(tcase, test_varieties, 0, (int)engine_variety_count);
    tcase_add_loop_test(tcase, test_idempotent, 0, 2);
    tcase_add_loop_test(tcase, test_by_hand, 0, 2);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
