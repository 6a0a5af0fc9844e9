/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The numbering of the canonical monomials: every index of small degrees for many signatures,
 * random ones of large degrees, GMP numbers, and what is refused.
 */
#include <idspan/gmp.h>

#include "tree_samples.h"

typedef struct fixture {
    ids_ctx *ctx;
    sample_ops ops;
    ids_signature *sig;
    ids_types *types;
    ids_basis *basis;
} fixture;

static void open_fixture(fixture *f, const char *text, uint32_t degree)
{
    memset(f, 0, sizeof *f);
    f->ctx = test_ctx();
    sample_read(text, &f->ops);
    f->sig = sample_make(f->ctx, &f->ops);
    TEST_OK(f->ctx, ids_types_create(f->ctx, f->sig, degree, &f->types));
    TEST_OK(f->ctx, ids_basis_create_exact(f->ctx, f->types, degree, &f->basis));
}

static void close_fixture(fixture *f)
{
    ids_basis_free(f->basis);
    ids_types_free(f->types);
    ids_signature_free(f->sig);
    test_ctx_free(f->ctx);
}

/* Both routes, as object and as code, there and back; returns the number of the type. */
static uint32_t check_index(const fixture *f, uint64_t index)
{
    int32_t code[IDSI_MAX_TOKENS];
    int32_t form[IDSI_MAX_TOKENS];
    idsi_token tokens[IDSI_MAX_TOKENS];
    size_t length = 0;
    size_t same = 0;
    uint64_t again = UINT64_MAX;
    ids_mono *mono = NULL;
    ids_mono *canonical = NULL;
    int sign = 0;

    SURE(ids_basis_unrank(f->ctx, f->basis, index, &mono) == IDS_OK);
    SURE(ids_basis_rank(f->basis, mono, &again) == IDS_OK && again == index);
    SURE(ids_basis_unrank_code(f->basis, index, code, IDSI_MAX_TOKENS, &length) == IDS_OK);
    again = UINT64_MAX;
    SURE(ids_basis_rank_code(f->basis, code, length, &again) == IDS_OK && again == index);
    SURE(ids_mono_code(mono, form, IDSI_MAX_TOKENS, &same) == IDS_OK);
    SURE(same == length && memcmp(form, code, length * sizeof *code) == 0);
    SURE(ids_mono_canonicalize(f->ctx, mono, &canonical, &sign) == IDS_OK && sign == 1);
    SURE(ids_mono_code(canonical, form, IDSI_MAX_TOKENS, &same) == IDS_OK);
    SURE(same == length && memcmp(form, code, length * sizeof *code) == 0);
    for (size_t i = 0; i < length; i++) {
        tokens[i] = code[i] < 0 ? idsi_node((uint32_t)~code[i]) : (idsi_token)code[i];
    }
    ids_mono_free(mono);
    ids_mono_free(canonical);
    return idsi_types_find(f->types, tokens);
}

START_TEST(test_all_indices)
{
    uint32_t last = 0;

    for (uint32_t degree = 1; degree <= 7; degree++) {
        fixture f;

        open_fixture(&f, sample_signatures[_i].text, degree);
        uint64_t size = ids_basis_size(f.basis);
        if (size > 12000 * test_scale()) {
            close_fixture(&f);
            break;
        }
        uint32_t type = 0;
        for (uint64_t index = 0; index < size; index++) {
            uint32_t found = check_index(&f, index);
            uint64_t begin = 0;
            uint64_t end = 0;

            SURE(index == 0 || found >= type); /* type by type, in their order */
            SURE(ids_basis_type_range(f.basis, found - f.types->first[degree], &begin, &end) ==
                 IDS_OK);
            SURE(begin <= index && index < end);
            type = found;
        }
        last = degree;
        close_fixture(&f);
    }
    ck_assert_uint_ge(last, 4);
}
END_TEST

/* Commutative binary of degree 4, from the rule of the order. */
START_TEST(test_order_by_hand)
{
    /* first the sets of the larger argument in lexicographic order, for each set its monomials;
     * then the type with two pairs, where the first pair holds the label 1 */
    static const char *const expected[] = {
        "fffabcd", "fffacbd", "fffbcad", "fffabdc", "fffadbc", "fffbdac", "fffacdb", "fffadcb",
        "fffcdab", "fffbcda", "fffbdca", "fffcdba", "ffabfcd", "ffacfbd", "ffadfbc",
    };
    fixture f;
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;
    char text[IDSI_MAX_TOKENS + 1];

    open_fixture(&f, "c2", 4);
    ck_assert_uint_eq(ids_basis_size(f.basis), 15);
    for (uint64_t index = 0; index < 15; index++) {
        TEST_OK(f.ctx, ids_basis_unrank_code(f.basis, index, code, IDSI_MAX_TOKENS, &length));
        for (size_t i = 0; i < length; i++) {
            text[i] = code[i] < 0 ? 'f' : (char)('a' + code[i] - 1);
        }
        text[length] = '\0';
        ck_assert_str_eq(text, expected[index]);
    }
    close_fixture(&f);
}
END_TEST

typedef struct large {
    const char *text;
    uint32_t degree;
} large;

static const large larges[] = {
    {"c2", 12},          {"c2", 18},
    {"a2", 15},          {"m2", 12},
    {"c3", 17},          {"c2 c3", 11},
    {"m3 c2", 9},        {"g3:120+", 15},
    {"g4:1230-", 16},    {"g4:1230+,0321-", 19},
    {"c8", 22},          {"m8", 15},
    {"c5", 21},          {"g5:12340+,04321+ c2", 11},
    {"g4:0132- c4", 16},
};

/* Another way to write the monomial, by one symmetry at one node, is well formed and has no
 * index. */
static void check_other_order(const fixture *f, idsi_random *random, uint64_t index)
{
    sample_tree tree = {0};
    sample_tree other;
    ids_signed_order order[IDS_MAX_ARITY];
    size_t length = 0;
    uint64_t found = 0;

    SURE(ids_basis_unrank_code(f->basis, index, tree.code, IDSI_MAX_TOKENS, &length) == IDS_OK);
    tree.length = (uint32_t)length;
    uint32_t node = (uint32_t)idsi_random_below(random, length);
    if (tree.code[node] > 0) {
        node = 0;
    }
    size_t count = sample_generators(&f->ops.op[~tree.code[node]], order);
    for (size_t g = 0; g < count; g++) {
        sample_reorder(&f->ops, &tree, node, order[g].image, &other);
        SURE(ids_basis_rank_code(f->basis, other.code, other.length, &found) ==
             IDS_ERR_NOT_CANONICAL);
    }
}

START_TEST(test_random_indices)
{
    idsi_random random;
    fixture f;

    test_random(&random, 400 + (uint64_t)_i);
    open_fixture(&f, larges[_i].text, larges[_i].degree);
    uint64_t size = ids_basis_size(f.basis);
    ck_assert_uint_gt(size, 0);
    (void)check_index(&f, 0);
    (void)check_index(&f, size - 1);
    for (uint64_t round = 0; round < 1000 * test_scale(); round++) {
        uint64_t index = idsi_random_below(&random, size);

        (void)check_index(&f, index);
        check_other_order(&f, &random, index);
    }
    close_fixture(&f);
}
END_TEST

/* ---- GMP numbers --------------------------------------------------------------------------- */

/* (2n-3)!!, OEIS A001147, for binary commutative */
static void double_factorial(uint32_t degree, mpz_t out)
{
    mpz_set_ui(out, 1);
    for (uint32_t i = 3; i + 3 <= 2 * degree; i += 2) {
        mpz_mul_ui(out, out, i);
    }
}

static void check_exact(const fixture *f, gmp_randstate_t state, uint64_t rounds)
{
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;
    mpz_t size, index, again;

    mpz_inits(size, index, again, NULL);
    TEST_OK(f->ctx, ids_basis_size_exact(f->basis, size));
    for (uint64_t round = 0; round < rounds; round++) {
        ids_mono *mono = NULL;

        mpz_urandomm(index, state, size);
        if (round < 2) {
            mpz_set_ui(index, 0);
            mpz_sub_ui(again, size, 1);
            mpz_set(index, round == 0 ? index : again);
        }
        TEST_OK(f->ctx,
                ids_basis_unrank_code_exact(f->basis, index, code, IDSI_MAX_TOKENS, &length));
        TEST_OK(f->ctx, ids_basis_rank_code_exact(f->basis, code, length, again));
        ck_assert_int_eq(mpz_cmp(index, again), 0);
        TEST_OK(f->ctx, ids_basis_unrank_exact(f->ctx, f->basis, index, &mono));
        mpz_set_ui(again, 0);
        TEST_OK(f->ctx, ids_basis_rank_exact(f->basis, mono, again));
        ck_assert_int_eq(mpz_cmp(index, again), 0);
        ids_mono_free(mono);
    }
    TEST_STATUS(f->ctx, ids_basis_unrank_code_exact(f->basis, size, code, IDSI_MAX_TOKENS, &length),
                IDS_ERR_ARG);
    mpz_set_si(index, -1);
    TEST_STATUS(f->ctx,
                ids_basis_unrank_code_exact(f->basis, index, code, IDSI_MAX_TOKENS, &length),
                IDS_ERR_ARG);
    mpz_ui_pow_ui(index, 2, 1000);
    TEST_STATUS(f->ctx,
                ids_basis_unrank_code_exact(f->basis, index, code, IDSI_MAX_TOKENS, &length),
                IDS_ERR_ARG);
    mpz_clears(size, index, again, NULL);
}

START_TEST(test_exact)
{
    static const large exact[] = {{"c2", 5},  {"c2", 19},       {"c8", 64}, {"c6", 61},
                                  {"m8", 36}, {"g4:1230-", 25}, {"a5", 45}};
    gmp_randstate_t state;
    mpz_t size, expected;
    fixture f;

    gmp_randinit_default(state);
    gmp_randseed_ui(state, (unsigned int)test_seed());
    mpz_inits(size, expected, NULL);
    open_fixture(&f, exact[_i].text, exact[_i].degree);
    check_exact(&f, state, 200 * test_scale());
    TEST_OK(f.ctx, ids_basis_size_exact(f.basis, size));
    if (strcmp(exact[_i].text, "c2") == 0) {
        double_factorial(exact[_i].degree, expected);
        ck_assert_int_eq(mpz_cmp(size, expected), 0);
    }
    if (strcmp(exact[_i].text, "c8") == 0) {
        /* (kN)! / (N! k!^N) with k = 8 and N = 9 nodes: OEIS A060540 */
        mpz_fac_ui(expected, 72);
        mpz_fac_ui(size, 9);
        mpz_divexact(expected, expected, size);
        for (int i = 0; i < 9; i++) {
            mpz_divexact_ui(expected, expected, 40320);
        }
        TEST_OK(f.ctx, ids_basis_size_exact(f.basis, size));
        ck_assert_int_eq(mpz_cmp(size, expected), 0);
    }
    mpz_clears(size, expected, NULL);
    gmp_randclear(state);
    close_fixture(&f);
}
END_TEST

/* A basis beyond 64 bits is refused with the number in the message, or has no 64-bit calls. */
START_TEST(test_beyond_64_bits)
{
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;
    uint64_t begin = 7;
    uint64_t end = 7;
    mpz_t zero;
    ids_basis *small = NULL;
    ids_iter *iter = NULL;
    ids_mono *mono = NULL;
    fixture f;

    mpz_init(zero);
    open_fixture(&f, "c2", 19);
    TEST_STATUS(f.ctx, ids_basis_create(f.ctx, f.types, 19, &small), IDS_ERR_LIMIT);
    ck_assert_ptr_null(small);
    /* 35!! = 221643095476699771875, OEIS A001147: from memory; the product is in test_exact */
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(f.ctx), "221643095476699771875"));
    TEST_OK(f.ctx, ids_basis_create(f.ctx, f.types, 18, &small));
    ids_basis_free(small);
    ck_assert_uint_eq(ids_basis_size(f.basis), 0);
    TEST_OK(f.ctx, ids_basis_unrank_code_exact(f.basis, zero, code, IDSI_MAX_TOKENS, &length));
    TEST_STATUS(f.ctx, ids_basis_rank_code(f.basis, code, length, &begin), IDS_ERR_LIMIT);
    TEST_STATUS(f.ctx, ids_basis_unrank_code(f.basis, 0, code, IDSI_MAX_TOKENS, &length),
                IDS_ERR_LIMIT);
    TEST_STATUS(f.ctx, ids_basis_unrank(f.ctx, f.basis, 0, &mono), IDS_ERR_LIMIT);
    TEST_STATUS(f.ctx, ids_basis_type_range(f.basis, 0, &begin, &end), IDS_ERR_LIMIT);
    TEST_STATUS(f.ctx, ids_basis_part(f.basis, 0, 1, &begin, &end), IDS_ERR_LIMIT);
    TEST_STATUS(f.ctx, ids_iter_create(f.ctx, f.basis, 0, 0, &iter), IDS_ERR_LIMIT);
    ck_assert_uint_eq(begin, 7);
    ck_assert_ptr_null(iter);
    mpz_clear(zero);
    close_fixture(&f);
}
END_TEST

START_TEST(test_type_ranges_exact)
{
    mpz_t begin, end, before, size;
    fixture f;

    mpz_inits(begin, end, before, size, NULL);
    open_fixture(&f, "a5", 41);
    uint64_t count = ids_types_count(f.types, 41);
    for (uint64_t t = 0; t < count; t++) {
        TEST_OK(f.ctx, ids_basis_type_range_exact(f.basis, t, begin, end));
        ck_assert_int_eq(mpz_cmp(begin, before), 0);
        ck_assert_int_lt(mpz_cmp(begin, end), 0);
        mpz_set(before, end);
    }
    TEST_OK(f.ctx, ids_basis_size_exact(f.basis, size));
    ck_assert_int_eq(mpz_cmp(size, before), 0);
    TEST_STATUS(f.ctx, ids_basis_type_range_exact(f.basis, count, begin, end), IDS_ERR_ARG);
    mpz_clears(begin, end, before, size, NULL);
    close_fixture(&f);
}
END_TEST

/* ---- what is refused ----------------------------------------------------------------------- */

typedef struct refused {
    ids_status status;
    size_t length;
    int32_t code[10];
} refused;

/* for degree 4 of "c2 m3" */
static const refused refused_codes[] = {
    {IDS_OK, 7, {-1, -1, -1, 1, 2, 3, 4}},
    {IDS_OK, 6, {-2, -1, 3, 4, 2, 1}},
    {IDS_ERR_NOT_CANONICAL, 7, {-1, -1, -1, 2, 1, 3, 4}},
    {IDS_ERR_NOT_CANONICAL, 7, {-1, 4, -1, -1, 1, 2, 3}},
    {IDS_ERR_NOT_CANONICAL, 7, {-1, -1, 2, 3, -1, 1, 4}},
    {IDS_ERR_NOT_CANONICAL, 6, {-2, -1, 4, 3, 2, 1}},
    {IDS_ERR_ARG, 0, {0}},
    {IDS_ERR_ARG, 1, {1}},
    {IDS_ERR_ARG, 5, {-1, -1, 1, 2, 3}},               /* degree 3 */
    {IDS_ERR_ARG, 9, {-1, -1, -1, -1, 1, 2, 3, 4, 5}}, /* degree 5 */
    {IDS_ERR_ARG, 7, {-1, -1, -1, 1, 2, 3, 3}},        /* a label twice */
    {IDS_ERR_ARG, 7, {-1, -1, -1, 1, 2, 3, 5}},        /* a label that is too large */
    {IDS_ERR_ARG, 7, {-1, -1, -1, 1, 2, 3, 0}},
    {IDS_ERR_ARG, 7, {-1, -1, -1, 1, 2, 3, 68}}, /* 4 + 64 */
    {IDS_ERR_ARG, 7, {-1, -1, -1, 1, 2, 3, INT32_MAX}},
    {IDS_ERR_ARG, 7, {-1, -1, -3, 1, 2, 3, 4}},   /* no such operation */
    {IDS_ERR_ARG, 7, {-1, -1, -257, 1, 2, 3, 4}}, /* -1 - 256 */
    {IDS_ERR_ARG, 7, {-1, -1, INT32_MIN, 1, 2, 3, 4}},
    {IDS_ERR_ARG, 6, {-1, -1, -1, 1, 2, 3}},    /* a leaf is missing */
    {IDS_ERR_ARG, 7, {-1, -1, 1, 2, 3, 4, -1}}, /* goes on after the end */
    {IDS_ERR_ARG, 7, {-1, 1, 2, -1, -1, 3, 4}},
    {IDS_ERR_ARG, 7, {1, -1, 2, -1, 3, -1, 4}},
};

START_TEST(test_refused_codes)
{
    const refused *expected = &refused_codes[_i];
    uint64_t index = UINT64_MAX;
    mpz_t exact;
    fixture f;

    mpz_init_set_si(exact, -1);
    open_fixture(&f, "c2 m3", 4);
    TEST_STATUS(f.ctx, ids_basis_rank_code(f.basis, expected->code, expected->length, &index),
                expected->status);
    ck_assert_int_eq(index == UINT64_MAX, expected->status != IDS_OK);
    TEST_STATUS(f.ctx, ids_basis_rank_code_exact(f.basis, expected->code, expected->length, exact),
                expected->status);
    ck_assert_int_eq(mpz_sgn(exact) < 0, expected->status != IDS_OK);
    mpz_clear(exact);
    close_fixture(&f);
}
END_TEST

START_TEST(test_refused_calls)
{
    int32_t code[IDSI_MAX_TOKENS] = {-1, 1, 2};
    size_t length = 55;
    uint64_t index = 55;
    uint64_t end = 55;
    ids_mono *mono = NULL;
    ids_basis *basis = NULL;
    fixture f;
    fixture other;

    open_fixture(&f, "c2", 4);
    open_fixture(&other, "c2", 4);
    TEST_STATUS(f.ctx, ids_basis_create(f.ctx, f.types, 0, &basis), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_create(f.ctx, f.types, 5, &basis), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_create(f.ctx, NULL, 3, &basis), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_create(f.ctx, f.types, 3, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_basis_create(NULL, f.types, 3, &basis), IDS_ERR_ARG);
    ck_assert_ptr_null(basis);
    ck_assert_int_eq(ids_basis_unrank(NULL, f.basis, 0, &mono), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_unrank(f.ctx, NULL, 0, &mono), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_unrank(f.ctx, f.basis, 15, &mono), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_unrank(f.ctx, f.basis, UINT64_MAX, &mono), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_unrank_code(f.basis, 15, code, 7, &length), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_unrank_code(f.basis, 0, code, 6, &length), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_unrank_code(f.basis, 0, NULL, 7, &length), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_unrank_code(NULL, 0, code, 7, &length), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_type_range(f.basis, 2, &index, &end), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_part(f.basis, 1, 1, &index, &end), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_part(f.basis, 0, 0, &index, &end), IDS_ERR_ARG);
    TEST_OK(f.ctx, ids_basis_unrank(other.ctx, other.basis, 3, &mono));
    /* another signature object, though it reads the same */
    TEST_STATUS(f.ctx, ids_basis_rank(f.basis, mono, &index), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_rank(NULL, mono, &index), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_rank(other.basis, mono, NULL), IDS_ERR_ARG);
    ids_mono_free(mono);
    TEST_OK(f.ctx, ids_mono_create(f.ctx, f.sig, code, 3, &mono));
    TEST_STATUS(f.ctx, ids_basis_rank(f.basis, mono, &index), IDS_ERR_ARG); /* other degree */
    ids_mono_free(mono);
    ck_assert_uint_eq(index, 55);
    ck_assert_uint_eq(length, 55);
    ck_assert_uint_eq(ids_basis_size(NULL), 0);
    ids_basis_free(NULL);
    close_fixture(&other);
    close_fixture(&f);
}
END_TEST

START_TEST(test_parts)
{
    fixture f;

    open_fixture(&f, "c2", 5);
    for (uint64_t parts = 1; parts <= 120; parts++) {
        uint64_t expected = 0;

        for (uint64_t part = 0; part < parts; part++) {
            uint64_t begin = 0;
            uint64_t end = 0;

            TEST_OK(f.ctx, ids_basis_part(f.basis, part, parts, &begin, &end));
            ck_assert_uint_eq(begin, expected);
            ck_assert(end - begin == 105 / parts || end - begin == 105 / parts + 1);
            expected = end;
        }
        ck_assert_uint_eq(expected, 105);
    }
    close_fixture(&f);
}
END_TEST

/* An empty degree: a ternary operation has no monomials of even degree. */
START_TEST(test_empty)
{
    int32_t code[IDSI_MAX_TOKENS] = {-1, 1, 2, 3};
    uint64_t index = 0;
    uint64_t end = 9;
    size_t length = 0;
    ids_iter *iter = NULL;
    fixture f;

    open_fixture(&f, "c3", 4);
    ck_assert_uint_eq(ids_basis_size(f.basis), 0);
    TEST_STATUS(f.ctx, ids_basis_unrank_code(f.basis, 0, code, 8, &length), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_basis_rank_code(f.basis, code, 4, &index), IDS_ERR_ARG);
    TEST_OK(f.ctx, ids_basis_part(f.basis, 2, 3, &index, &end));
    ck_assert_uint_eq(end, 0);
    TEST_OK(f.ctx, ids_iter_create(f.ctx, f.basis, 0, 0, &iter));
    ck_assert_ptr_null(ids_iter_next(iter));
    ids_iter_free(iter);
    close_fixture(&f);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: basis");
    TCase *tcase = tcase_create("basis");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_all_indices, 0, SAMPLE_COUNT);
    tcase_add_test(tcase, test_order_by_hand);
    tcase_add_loop_test(tcase, test_random_indices, 0, (int)(sizeof larges / sizeof larges[0]));
    tcase_add_loop_test(tcase, test_exact, 0, 7);
    tcase_add_test(tcase, test_beyond_64_bits);
    tcase_add_test(tcase, test_type_ranges_exact);
    tcase_add_loop_test(tcase, test_refused_codes, 0,
                        (int)(sizeof refused_codes / sizeof refused_codes[0]));
    tcase_add_test(tcase, test_refused_calls);
    tcase_add_test(tcase, test_parts);
    tcase_add_test(tcase, test_empty);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
