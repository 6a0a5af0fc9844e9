/* SPDX-License-Identifier: BSD-2-Clause */
/* Polynomials below the notation: normal form, content, limits, linearisation of what has none. */
#include <string.h>

#include "identity/identity_private.h"
#include "support.h"

/* One commutative product, number 0, and one product without symmetry, number 1. */
static ids_signature *two_products(ids_ctx *ctx)
{
    const ids_operation ops[2] = {
        {.notation = IDS_NOTATION_INFIX,
         .open = "*",
         .arity = 2,
         .symmetry = IDS_SYMMETRY_COMMUTATIVE},
        {.notation = IDS_NOTATION_INFIX, .open = ".", .arity = 2},
    };
    ids_signature *sig = NULL;
    TEST_OK(ctx, ids_signature_create(ctx, ops, 2, &sig));
    return sig;
}

static void append(idsi_poly *poly, int64_t numerator, uint32_t denominator, uint32_t op,
                   uint32_t a, uint32_t b)
{
    const idsi_token tree[3] = {idsi_node(op), a, b};
    mpq_t q;
    mpq_init(q);
    mpz_set_si(mpq_numref(q), (signed int)numerator);
    mpz_set_ui(mpq_denref(q), denominator);
    mpq_canonicalize(q);
    TEST_OK(poly->ctx, idsi_poly_append(poly, q, tree, 3));
    mpq_clear(q);
}

static void expect(const idsi_poly *poly, const char *expected)
{
    idsi_text text;
    idsi_text_init(&text, poly->ctx);
    TEST_OK(poly->ctx, idsi_poly_print(poly, NULL, &text));
    ck_assert_str_eq(text.data, expected);
    idsi_text_clear(&text);
}

START_TEST(test_normalize)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *sig = two_products(ctx);
    idsi_poly poly;
    idsi_poly_init(&poly, ctx, sig);
    TEST_OK(ctx, idsi_poly_normalize(&poly));
    expect(&poly, "0");
    append(&poly, 1, 2, 1, 2, 1);
    append(&poly, 3, 1, 0, 2, 1);
    append(&poly, 5, 1, 1, 1, 2);
    append(&poly, -1, 2, 1, 2, 1);
    append(&poly, -1, 1, 0, 1, 2);
    append(&poly, 0, 1, 0, 1, 1);
    TEST_OK(ctx, idsi_poly_normalize(&poly));
    expect(&poly, "2*a*b + 5*a.b");
    ck_assert_uint_eq(poly.degree, 2);
    TEST_OK(ctx, idsi_poly_normalize(&poly));
    expect(&poly, "2*a*b + 5*a.b");
    append(&poly, -2, 1, 0, 2, 1);
    append(&poly, -5, 1, 1, 1, 2);
    TEST_OK(ctx, idsi_poly_normalize(&poly));
    expect(&poly, "0");
    ck_assert_uint_eq(poly.degree, 0);
    idsi_poly_clear(&poly);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_primitive)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *sig = two_products(ctx);
    idsi_poly poly;
    idsi_poly_init(&poly, ctx, sig);
    TEST_OK(ctx, idsi_poly_primitive(&poly));
    append(&poly, -4, 3, 1, 1, 2);
    append(&poly, 10, 9, 1, 2, 1);
    append(&poly, 2, 1, 1, 2, 2);
    TEST_OK(ctx, idsi_poly_primitive(&poly));
    expect(&poly, "6*a.b - 5*b.a - 9*b.b");
    idsi_poly_clear(&poly);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* 2^100000 / 3^60000 is read, but no polynomial is brought to a common denominator of many such. */
START_TEST(test_primitive_limit)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *sig = two_products(ctx);
    idsi_poly poly;
    idsi_poly before;
    mpq_t q;
    static const uint32_t bases[3] = {3, 5, 7};
    idsi_poly_init(&poly, ctx, sig);
    idsi_poly_init(&before, ctx, sig);
    mpq_init(q);
    for (uint32_t i = 0; i < 3; i++) {
        const idsi_token tree[3] = {idsi_node(1), i + 1, i + 1};
        mpz_set_ui(mpq_numref(q), 1);
        mpz_ui_pow_ui(mpq_denref(q), bases[i], 30000);
        TEST_OK(ctx, idsi_poly_append(&poly, q, tree, 3));
        TEST_OK(ctx, idsi_poly_append(&before, q, tree, 3));
    }
    TEST_STATUS(ctx, idsi_poly_primitive(&poly), IDS_ERR_LIMIT);
    ck_assert(idsi_poly_equal(&poly, &before));
    mpz_ui_pow_ui(mpq_denref(q), 3, 100000);
    const idsi_token leaf = 1;
    TEST_STATUS(ctx, idsi_poly_append(&poly, q, &leaf, 1), IDS_ERR_LIMIT);
    ck_assert(idsi_poly_equal(&poly, &before));
    mpq_clear(q);
    idsi_poly_clear(&poly);
    idsi_poly_clear(&before);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_linearize_refuses)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *sig = two_products(ctx);
    idsi_poly poly;
    idsi_poly linear;
    idsi_poly_init(&poly, ctx, sig);
    idsi_poly_init(&linear, ctx, sig);
    TEST_OK(ctx, idsi_poly_linearize(&poly, &linear));
    ck_assert_uint_eq(linear.count, 0);
    append(&poly, 1, 1, 0, 1, 2);
    append(&poly, 1, 1, 1, 1, 1);
    TEST_OK(ctx, idsi_poly_normalize(&poly));
    poly.variables = 2;
    TEST_STATUS(ctx, idsi_poly_linearize(&poly, &linear), IDS_ERR_ARG);
    poly.variables = 1; /* label 2 is out of range */
    TEST_STATUS(ctx, idsi_poly_linearize(&poly, &linear), IDS_ERR_ARG);
    idsi_poly_clear(&poly);
    idsi_poly_clear(&linear);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* Sorting many terms is O(n log n): 100,000 terms in descending order, each twice. */
START_TEST(test_many_terms)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *sig = two_products(ctx);
    idsi_poly poly;
    idsi_poly_init(&poly, ctx, sig);
    for (uint32_t i = 100000; i > 0; i--) {
        append(&poly, 1, 1, 1, i, 1);
        append(&poly, (int64_t)i - 1, 1, 1, i, 1);
    }
    TEST_OK(ctx, idsi_poly_normalize(&poly));
    ck_assert_uint_eq(poly.count, 100000);
    for (uint32_t i = 0; i < 100000; i++) {
        ck_assert_uint_eq(poly.tokens[poly.start[i] + 1], i + 1);
        ck_assert_int_eq(mpq_cmp_ui(poly.coefficients[i], i + 1, 1), 0);
    }
    idsi_poly_clear(&poly);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("identity_poly");
    TCase *tc = tcase_create("poly");
    tcase_set_timeout(tc, 20);
    tcase_add_test(tc, test_normalize);
    tcase_add_test(tc, test_primitive);
    tcase_add_test(tc, test_primitive_limit);
    tcase_add_test(tc, test_linearize_refuses);
    tcase_add_test(tc, test_many_terms);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
