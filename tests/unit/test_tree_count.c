/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Numbers of association types and multilinear monomials against published sequences, closed
 * formulas and a published recurrence; arguments, limits and failures.
 */
#include <idspan/gmp.h>
#include <stdlib.h>
#include <string.h>

#include "support.h"

/* An operation of a test signature: "m3" none, "c3" commutative, "a3" alternating, arity 3. */
static ids_operation read_operation(const char *code, size_t index)
{
    static const char *const names[] = {"f", "g", "h", "k", "p", "q", "r", "s"};
    ids_operation operation = {.notation = IDS_NOTATION_PREFIX, .open = names[index]};

    operation.arity = (uint32_t)(code[1] - '0');
    operation.symmetry = code[0] == 'c'   ? IDS_SYMMETRY_COMMUTATIVE
                         : code[0] == 'a' ? IDS_SYMMETRY_ALTERNATING
                                          : IDS_SYMMETRY_NONE;
    return operation;
}

/* A signature from codes without blanks, such as "c2c3". */
static ids_signature *make_signature(ids_ctx *ctx, const char *codes)
{
    ids_operation operations[8];
    ids_signature *signature = NULL;
    size_t count = strlen(codes) / 2;

    for (size_t i = 0; i < count; i++) {
        operations[i] = read_operation(codes + 2 * i, i);
    }
    TEST_OK(ctx, ids_signature_create(ctx, operations, count, &signature));
    return signature;
}

static ids_counts *make_counts(ids_ctx *ctx, const char *codes, uint32_t max_degree)
{
    ids_signature *signature = make_signature(ctx, codes);
    ids_counts *counts = NULL;

    TEST_OK(ctx, ids_counts_create(ctx, signature, max_degree, &counts));
    ids_signature_free(signature);
    return counts;
}

static void get_types(const ids_counts *counts, uint32_t degree, mpz_t out)
{
    ck_assert_int_eq(ids_counts_types(counts, degree, out), IDS_OK);
}

static void get_monomials(const ids_counts *counts, uint32_t degree, mpz_t out)
{
    ck_assert_int_eq(ids_counts_monomials(counts, degree, out), IDS_OK);
}

/* ---- published sequences ------------------------------------------------------------------- */

typedef struct published {
    const char *source;
    const char *codes;
    bool labelled;
    uint32_t first; /* degree of the first value */
    uint32_t step;  /* degrees between values; those between have no tree */
    const char *values;
} published;

static const published sequences[] = {
    {"C1 OEIS A000108 (Catalan), from memory", "m2", false, 1, 1, "1 1 2 5 14 42 132 429"},
    {"C2 OEIS A001764 (Fuss-Catalan), from memory", "m3", false, 1, 2, "1 1 3 12 55 273"},
    {"C2 OEIS A002293 (Fuss-Catalan), from memory", "m4", false, 1, 3, "1 1 4 22 140"},
    {"C3 OEIS A001002 (Etherington 1940, Motzkin 1948)", "m2m3", false, 1, 1,
     "1 1 3 10 38 154 654 2871 12925 59345"},
    {"C4 OEIS A001003 (little Schroeder), from memory; arity <= 8, so up to degree 8",
     "m2m3m4m5m6m7m8", false, 1, 1, "1 1 3 11 45 197 903 4279"},
    {"C5 OEIS A001190 (Wedderburn-Etherington)", "c2", false, 1, 1,
     "1 1 1 2 3 6 11 23 46 98 207 451 983 2179 4850 10905"},
    {"C5 OEIS A001190, signs do not count", "a2", false, 1, 1, "1 1 1 2 3 6 11 23 46 98"},
    {"C6 OEIS A000598", "c3", false, 1, 2, "1 1 1 2 4 8 17 39 89 211 507 1238 3057"},
    {"C6 OEIS A000598, signs do not count", "a3", false, 1, 2, "1 1 1 2 4 8 17 39 89"},
    {"C7 OEIS A036718", "c4", false, 1, 3, "1 1 1 2 4 9 19 45 106 260 643 1624 4138"},
    {"C8 OEIS A036721", "c5", false, 1, 4, "1 1 1 2 4 9 20 47 112 277 693 1766 4547"},
    {"C9 OEIS A268172", "c2c3", false, 1, 1,
     "1 1 2 4 9 23 58 156 426 1194 3393 9802 28601 84347 250732 750908"},
    {"C9 OEIS A268172, signs do not count", "a3a2", false, 1, 1, "1 1 2 4 9 23 58 156 426 1194"},
    {"C10 OEIS A226909", "c2c2", false, 1, 1, "1 2 4 14 44 164 616 2450 9908 41116 173144 739884"},
    {"C12 OEIS A000669 (series-reduced trees); arity <= 8, so up to degree 8", "c2c3c4c5c6c7c8",
     false, 1, 1, "1 1 2 5 12 33 90 261"},
    {"C14 OEIS A001147 (double factorials)", "c2", true, 1, 1,
     "1 1 3 15 105 945 10395 135135 2027025"},
    {"C15 OEIS A025035", "c3", true, 1, 2, "1 1 10 280 15400 1401400"},
    {"C15 OEIS A025036", "c4", true, 1, 3, "1 1 35 5775 2627625"},
    {"C15 OEIS A060540, column 5", "c5", true, 1, 4, "1 1 126 126126"},
    {"C16 OEIS A268163", "c2c3", true, 1, 1,
     "1 1 4 25 220 2485 34300 559405 10525900 224449225 5348843500 140880765025"},
    {"C16 OEIS A268163, signs do not count", "a2c3", true, 1, 1, "1 1 4 25 220 2485 34300"},
    {"C17 OEIS A000311 (Schroeder's fourth problem); arity <= 8, so up to degree 8",
     "c2c3c4c5c6c7c8", true, 1, 1, "1 1 4 26 236 2752 39208 660032"},
};

START_TEST(test_published)
{
    const published *sequence = &sequences[_i];
    const char *at = sequence->values;
    ids_ctx *ctx = test_ctx();
    ids_counts *counts = make_counts(ctx, sequence->codes, 64);
    uint32_t degree = 1;
    mpz_t got;

    mpz_init(got);
    for (uint32_t next = sequence->first; *at != '\0'; next += sequence->step) {
        for (; degree <= next; degree++) {
            uint64_t want = 0;

            if (degree == next) {
                char *end = NULL;

                want = strtoull(at, &end, 10);
                at = end;
            }
            if (sequence->labelled) {
                get_monomials(counts, degree, got);
            } else {
                get_types(counts, degree, got);
            }
            ck_assert_msg(mpz_cmp_ui(got, want) == 0, "%s: degree %u gives %s", sequence->source,
                          degree, mpz_get_str(NULL, 10, got));
        }
    }
    mpz_clear(got);
    ids_counts_free(counts);
    test_ctx_free(ctx);
}
END_TEST

/* ---- closed formulas in high degrees ------------------------------------------------------- */

/* Plane trees with `nodes` k-ary nodes: binom(k nodes, nodes) / ((k-1) nodes + 1). Source: C1,
 * C2 (Catalan, Fuss-Catalan), from memory. Monomials: times degree!. */
START_TEST(test_fuss_catalan)
{
    static const char *const codes[] = {"m2", "m3", "m5", "m8"};
    uint32_t k = (uint32_t)(codes[_i][1] - '0');
    ids_ctx *ctx = test_ctx();
    ids_counts *counts = make_counts(ctx, codes[_i], 701);
    mpz_t want, got;

    mpz_inits(want, got, NULL);
    for (uint32_t nodes = 0; nodes * (k - 1) + 1 <= 701; nodes++) {
        uint32_t degree = nodes * (k - 1) + 1;

        mpz_bin_uiui(want, k * nodes, nodes);
        mpz_divexact_ui(want, want, degree);
        get_types(counts, degree, got);
        ck_assert(mpz_cmp(want, got) == 0);
        get_monomials(counts, degree, got);
        for (uint32_t i = 2; i <= degree; i++) {
            mpz_mul_ui(want, want, i);
        }
        ck_assert(mpz_cmp(want, got) == 0);
    }
    mpz_clears(want, got, NULL);
    ids_counts_free(counts);
    test_ctx_free(ctx);
}
END_TEST

/* C10: r commutative binary operations have r^(n-1) (2n-3)!! monomials; r = 1 is C14. */
START_TEST(test_double_factorials)
{
    static const char *const codes[] = {"c2", "c2c2", "a2c2a2"};
    ids_ctx *ctx = test_ctx();
    ids_counts *counts = make_counts(ctx, codes[_i], 1000);
    mpz_t want, got;

    mpz_inits(want, got, NULL);
    mpz_set_ui(want, 1);
    for (uint32_t n = 1; n <= 1000; n++) {
        if (n >= 2) {
            mpz_mul_ui(want, want, (2 * n - 3) * ((uint32_t)_i + 1));
        }
        get_monomials(counts, n, got);
        ck_assert(mpz_cmp(want, got) == 0);
    }
    mpz_clears(want, got, NULL);
    ids_counts_free(counts);
    test_ctx_free(ctx);
}
END_TEST

/* C15, OEIS A060540: (kN)! / (N! k!^N) monomials of degree (k-1)N + 1. */
START_TEST(test_set_partitions)
{
    static const char *const codes[] = {"c3", "c4", "c6", "c8"};
    uint32_t k = (uint32_t)(codes[_i][1] - '0');
    ids_ctx *ctx = test_ctx();
    ids_counts *counts = make_counts(ctx, codes[_i], 500);
    mpz_t want, got, factor;

    mpz_inits(want, got, factor, NULL);
    for (uint32_t nodes = 0; nodes * (k - 1) + 1 <= 500; nodes++) {
        mpz_fac_ui(want, k * nodes);
        mpz_fac_ui(factor, nodes);
        mpz_divexact(want, want, factor);
        mpz_fac_ui(factor, k);
        mpz_pow_ui(factor, factor, nodes);
        mpz_divexact(want, want, factor);
        get_monomials(counts, nodes * (k - 1) + 1, got);
        ck_assert(mpz_cmp(want, got) == 0);
    }
    mpz_clears(want, got, factor, NULL);
    ids_counts_free(counts);
    test_ctx_free(ctx);
}
END_TEST

/* C16, OEIS A268163: 11 a(n) = (24n-36) a(n-1) + (3n-5)(3n-7) a(n-2) for n > 2. */
START_TEST(test_recurrence)
{
    ids_ctx *ctx = test_ctx();
    ids_counts *counts = make_counts(ctx, "c2c3", 1000);
    mpz_t before, last, got, want;

    mpz_inits(before, last, got, want, NULL);
    get_monomials(counts, 1, before);
    get_monomials(counts, 2, last);
    for (uint32_t n = 3; n <= 1000; n++) {
        mpz_mul_ui(want, last, 24 * n - 36);
        mpz_addmul_ui(want, before, (3 * n - 5) * (3 * n - 7));
        get_monomials(counts, n, got);
        mpz_swap(before, last);
        mpz_set(last, got);
        mpz_mul_ui(got, got, 11);
        ck_assert_msg(mpz_cmp(got, want) == 0, "degree %u", n);
    }
    mpz_clears(before, last, got, want, NULL);
    ids_counts_free(counts);
    test_ctx_free(ctx);
}
END_TEST

/* ---- split by operation -------------------------------------------------------------------- */

/*
 * Degree 4 of a commutative binary and a commutative ternary operation: [[ab]c]d and [ab][cd]
 * with three binary nodes, [[ab]cd] and [abc]d with one of each; automorphism orders 2, 8 and
 * 4, 6 give 12 + 3 and 6 + 4 monomials. Source: the list of 25 in OEIS A268163.
 */
START_TEST(test_split_degree_4)
{
    static const uint32_t want[2][4] = {{1, 1, 2, 10}, {3, 0, 2, 15}};
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = make_signature(ctx, "c2c3");
    ids_count_split *split = NULL;
    mpz_t types, monomials;

    mpz_inits(types, monomials, NULL);
    TEST_OK(ctx, ids_count_split_create(ctx, signature, 4, &split));
    ck_assert_uint_eq(ids_count_split_rows(split), 2);
    for (uint64_t row = 0; row < 2; row++) {
        uint32_t uses[2] = {0};

        TEST_OK(ctx, ids_count_split_uses(split, row, uses, 2));
        TEST_OK(ctx, ids_count_split_types(split, row, types));
        TEST_OK(ctx, ids_count_split_monomials(split, row, monomials));
        ck_assert_uint_eq(uses[0], want[row][0]);
        ck_assert_uint_eq(uses[1], want[row][1]);
        ck_assert(mpz_cmp_ui(types, want[row][2]) == 0);
        ck_assert(mpz_cmp_ui(monomials, want[row][3]) == 0);
    }
    mpz_clears(types, monomials, NULL);
    ids_count_split_free(split);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

/* Degree 1 has the leaf; an odd operation alone reaches no even degree. */
START_TEST(test_split_borders)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = make_signature(ctx, "m3c3");
    ids_count_split *split = NULL;
    uint32_t uses[2] = {9, 9};
    mpz_t got;

    mpz_init(got);
    TEST_OK(ctx, ids_count_split_create(ctx, signature, 1, &split));
    ck_assert_uint_eq(ids_count_split_rows(split), 1);
    TEST_OK(ctx, ids_count_split_uses(split, 0, uses, 2));
    ck_assert(uses[0] == 0 && uses[1] == 0);
    TEST_OK(ctx, ids_count_split_types(split, 0, got));
    ck_assert(mpz_cmp_ui(got, 1) == 0);
    TEST_OK(ctx, ids_count_split_monomials(split, 0, got));
    ck_assert(mpz_cmp_ui(got, 1) == 0);
    TEST_STATUS(ctx, ids_count_split_uses(split, 1, uses, 2), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_count_split_uses(split, 0, uses, 1), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_count_split_types(split, 1, got), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_count_split_monomials(split, 1, got), IDS_ERR_ARG);
    ids_count_split_free(split);
    TEST_OK(ctx, ids_count_split_create(ctx, signature, 8, &split));
    ck_assert_uint_eq(ids_count_split_rows(split), 0);
    ids_count_split_free(split);
    mpz_clear(got);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

/* ---- arguments, limits, failures ----------------------------------------------------------- */

START_TEST(test_arguments)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = make_signature(ctx, "c2");
    ids_counts *counts = NULL;
    ids_count_split *split = NULL;
    mpz_t got;

    mpz_init_set_ui(got, 7);
    TEST_STATUS(ctx, ids_counts_create(NULL, signature, 3, &counts), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_counts_create(ctx, NULL, 3, &counts), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_counts_create(ctx, signature, 3, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_counts_create(ctx, signature, IDS_MAX_COUNT_DEGREE + 1, &counts),
                IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_count_split_create(NULL, signature, 3, &split), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_count_split_create(ctx, NULL, 3, &split), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_count_split_create(ctx, signature, 3, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_count_split_create(ctx, signature, 0, &split), IDS_ERR_ARG);
    ck_assert_ptr_null(counts);
    ck_assert_ptr_null(split);
    for (uint32_t max_degree = 0; max_degree < 4; max_degree++) {
        TEST_OK(ctx, ids_counts_create(ctx, signature, max_degree, &counts));
        ck_assert_uint_eq(ids_counts_max_degree(counts), max_degree);
        TEST_STATUS(ctx, ids_counts_types(counts, max_degree + 1, got), IDS_ERR_ARG);
        TEST_STATUS(ctx, ids_counts_monomials(counts, max_degree + 1, got), IDS_ERR_ARG);
        ck_assert(mpz_cmp_ui(got, 7) == 0);
        TEST_OK(ctx, ids_counts_types(counts, 0, got));
        ck_assert(mpz_cmp_ui(got, 0) == 0);
        mpz_set_ui(got, 7);
        TEST_OK(ctx, ids_counts_monomials(counts, 0, got));
        ck_assert(mpz_cmp_ui(got, 0) == 0);
        mpz_set_ui(got, 7);
        ids_counts_free(counts);
    }
    ids_counts_free(NULL);
    ids_count_split_free(NULL);
    ck_assert_uint_eq(ids_counts_max_degree(NULL), 0);
    ck_assert_uint_eq(ids_count_split_rows(NULL), 0);
    TEST_STATUS(ctx, ids_counts_types(NULL, 0, got), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_count_split_types(NULL, 0, got), IDS_ERR_ARG);
    mpz_clear(got);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_cancel)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = make_signature(ctx, "c2c3");
    ids_counts *counts = NULL;
    ids_count_split *split = NULL;

    ids_ctx_cancel(ctx);
    TEST_STATUS(ctx, ids_counts_create(ctx, signature, 100, &counts), IDS_ERR_CANCELLED);
    ck_assert_ptr_null(counts);
    ids_ctx_cancel(ctx);
    TEST_STATUS(ctx, ids_count_split_create(ctx, signature, 20, &split), IDS_ERR_CANCELLED);
    ck_assert_ptr_null(split);
    TEST_OK(ctx, ids_counts_create(ctx, signature, 100, &counts));
    ids_counts_free(counts);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

/* The need is known before any work: a hopeless degree fails at once, and says the budget. */
START_TEST(test_budget)
{
    ids_ctx_options options = {.struct_size = sizeof options, .byte_budget = 1u << 20};
    ids_ctx *ctx = NULL;
    ids_signature *signature = NULL;
    ids_counts *counts = NULL;
    ids_count_split *split = NULL;

    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    signature = make_signature(ctx, "c2c3");
    TEST_STATUS(ctx, ids_counts_create(ctx, signature, 1000, &counts), IDS_ERR_LIMIT);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "1048576"));
    TEST_STATUS(ctx, ids_counts_create(ctx, signature, IDS_MAX_COUNT_DEGREE, &counts),
                IDS_ERR_LIMIT);
    TEST_STATUS(ctx, ids_count_split_create(ctx, signature, 200, &split), IDS_ERR_LIMIT);
    TEST_STATUS(ctx, ids_count_split_create(ctx, signature, IDS_MAX_COUNT_DEGREE, &split),
                IDS_ERR_LIMIT);
    TEST_OK(ctx, ids_counts_create(ctx, signature, 20, &counts));
    ids_counts_free(counts);
    ids_signature_free(signature);
    ck_assert_uint_eq(ids_ctx_memory(ctx).live, 0);
    ids_ctx_free(ctx);
}
END_TEST

/* Makes everything and gives the first failure. */
static ids_status count_all(ids_ctx *ctx, void *data)
{
    ids_status st = IDS_OK;
    ids_operation operations[2] = {read_operation("c2", 0), read_operation("c3", 1)};
    ids_signature *signature = NULL;
    ids_counts *counts = NULL;
    ids_count_split *split = NULL;

    (void)data;
    IDSI_TRY(ids_signature_create(ctx, operations, 2, &signature));
    IDSI_TRY(ids_counts_create(ctx, signature, 9, &counts));
    IDSI_TRY(ids_count_split_create(ctx, signature, 5, &split));
done:
    ids_count_split_free(split);
    ids_counts_free(counts);
    ids_signature_free(signature);
    return st;
}

START_TEST(test_no_memory)
{
    TEST_OOM(count_all, NULL);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("tree_count");
    TCase *tables = tcase_create("published");
    TCase *formulas = tcase_create("formulas");
    TCase *failures = tcase_create("failures");

    tcase_add_loop_test(tables, test_published, 0, (int)(sizeof sequences / sizeof sequences[0]));
    tcase_add_loop_test(formulas, test_fuss_catalan, 0, 4);
    tcase_add_loop_test(formulas, test_double_factorials, 0, 3);
    tcase_add_loop_test(formulas, test_set_partitions, 0, 4);
    tcase_add_test(formulas, test_recurrence);
    tcase_add_test(formulas, test_split_degree_4);
    tcase_add_test(formulas, test_split_borders);
    tcase_add_test(failures, test_arguments);
    tcase_add_test(failures, test_cancel);
    tcase_add_test(failures, test_budget);
    tcase_add_test(failures, test_no_memory);
    tcase_set_timeout(formulas, 20);
    suite_add_tcase(s, tables);
    suite_add_tcase(s, formulas);
    suite_add_tcase(s, failures);
    return s;
}

int main(void)
{
    return test_run(suite());
}
