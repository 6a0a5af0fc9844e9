/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Iterators against the basis: each monomial they give is the one with its index.
 */
#include <idspan/gmp.h>

#include "tree/basis_private.h"
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

static void check_view(const fixture *f, const ids_mono_view *view, uint64_t index)
{
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;
    uint64_t begin = 0;
    uint64_t end = 0;
    uint32_t leaves = 0;

    SURE(view != NULL && view->index == index);
    SURE(ids_basis_unrank_code(f->basis, index, code, IDSI_MAX_TOKENS, &length) == IDS_OK);
    SURE(view->length == length && memcmp(view->code, code, length * sizeof *code) == 0);
    SURE(ids_basis_type_range(f->basis, view->type, &begin, &end) == IDS_OK);
    SURE(begin <= index && index < end);
    for (uint32_t i = 0; i < length; i++) {
        if (code[i] > 0) {
            SURE(view->leaf[leaves] == i);
            leaves++;
        }
    }
    SURE(view->degree == leaves);
}

/* All monomials of the degrees that have not too many. */
START_TEST(test_all)
{
    for (uint32_t degree = 1; degree <= 7; degree++) {
        ids_iter *iter = NULL;
        fixture f;

        open_fixture(&f, sample_signatures[_i].text, degree);
        uint64_t size = ids_basis_size(f.basis);
        if (size <= 20000 * test_scale()) {
            TEST_OK(f.ctx, ids_iter_create(f.ctx, f.basis, 0, size, &iter));
            for (uint64_t index = 0; index < size; index++) {
                check_view(&f, ids_iter_next(iter), index);
            }
            ck_assert_ptr_null(ids_iter_next(iter));
            ck_assert_ptr_null(ids_iter_next(iter));
            ids_iter_free(iter);
        }
        close_fixture(&f);
    }
}
END_TEST

typedef struct large {
    const char *text;
    uint32_t degree;
} large;

/* The last ones have choices that are too many for a table, also among the fastest. */
static const large larges[] = {
    {"c2", 10},
    {"c2 c3", 9},
    {"c2", 15},
    {"m2", 9},
    {"g3:120+", 15},
    {"g4:1230+,0321-", 16},
    {"g4:1203+,1032+", 16},
    {"g5:12340+,04321+ c2", 9},
    {"m8 c2", 13},
    {"c8", 22},
    {"m8", 15},
    {"m6 c6", 16},
    {"c7 c2", 13},
};

/* Ranges that begin anywhere, end anywhere, and pass from type to type. */
START_TEST(test_ranges)
{
    ids_iter *iter = NULL;
    idsi_random random;
    fixture f;

    test_random(&random, 500 + (uint64_t)_i);
    open_fixture(&f, larges[_i].text, larges[_i].degree);
    uint64_t size = ids_basis_size(f.basis);
    ck_assert_uint_gt(size, 0);
    TEST_OK(f.ctx, ids_iter_create(f.ctx, f.basis, size, size, &iter));
    ck_assert_ptr_null(ids_iter_next(iter));
    for (uint64_t round = 0; round < 60 * test_scale(); round++) {
        uint64_t begin = idsi_random_below(&random, size);
        uint64_t most = size - begin < 300 ? size - begin : 300;
        uint64_t end = begin + idsi_random_below(&random, most + 1);

        if (round % 2 == 0) { /* around the beginning of a type, or the end of all */
            uint64_t type = idsi_random_below(&random, ids_types_count(f.types, f.basis->degree));
            uint64_t first = 0;

            TEST_OK(f.ctx, ids_basis_type_range(f.basis, type, &first, &end));
            begin = end < 150 ? 0 : end - 150;
            end = size - end < 150 ? size : end + 150;
        }
        TEST_OK(f.ctx, ids_iter_seek(iter, begin, end));
        for (uint64_t index = begin; index < end; index++) {
            check_view(&f, ids_iter_next(iter), index);
        }
        ck_assert_ptr_null(ids_iter_next(iter));
    }
    ids_iter_free(iter);
    close_fixture(&f);
}
END_TEST

/* Beyond 64 bits: against unranking with GMP numbers. */
START_TEST(test_exact)
{
    static const large exact[] = {{"c2", 19}, {"m8", 36}, {"c8", 64}, {"c2", 6}};
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;
    gmp_randstate_t state;
    ids_iter *iter = NULL;
    mpz_t size, begin, index;
    fixture f;

    gmp_randinit_default(state);
    gmp_randseed_ui(state, (unsigned int)test_seed());
    mpz_inits(size, begin, index, NULL);
    open_fixture(&f, exact[_i].text, exact[_i].degree);
    TEST_OK(f.ctx, ids_basis_size_exact(f.basis, size));
    TEST_OK(f.ctx, ids_iter_create_exact(f.ctx, f.basis, size, 0, &iter));
    for (uint64_t round = 0; round < 30 * test_scale(); round++) {
        mpz_urandomm(begin, state, size);
        mpz_sub(index, size, begin);
        uint64_t count = mpz_cmp_ui(index, 200) < 0 ? mpz_get_ui(index) : 200;
        TEST_OK(f.ctx, ids_iter_seek_exact(iter, begin, count));
        for (uint64_t i = 0; i < count; i++) {
            const ids_mono_view *view = ids_iter_next(iter);

            mpz_add_ui(index, begin, i);
            SURE(ids_basis_unrank_code_exact(f.basis, index, code, IDSI_MAX_TOKENS, &length) ==
                 IDS_OK);
            SURE(view != NULL && view->index == mpz_getlimbn(index, 0));
            SURE(view->length == length && memcmp(view->code, code, length * sizeof *code) == 0);
        }
        ck_assert_ptr_null(ids_iter_next(iter));
    }
    TEST_STATUS(f.ctx, ids_iter_seek_exact(iter, size, 1), IDS_ERR_ARG);
    mpz_sub_ui(begin, size, 3);
    TEST_STATUS(f.ctx, ids_iter_seek_exact(iter, begin, 4), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_iter_seek_exact(iter, begin, UINT64_MAX), IDS_ERR_ARG);
    TEST_OK(f.ctx, ids_iter_seek_exact(iter, begin, 3));
    mpz_set_si(begin, -1);
    TEST_STATUS(f.ctx, ids_iter_seek_exact(iter, begin, 1), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(ids_iter_next(iter)); /* the refused moves changed nothing */
    mpz_clears(size, begin, index, NULL);
    gmp_randclear(state);
    ids_iter_free(iter);
    close_fixture(&f);
}
END_TEST

/* Nothing is allocated after ids_iter_create(). */
START_TEST(test_no_allocation)
{
    test_allocator allocator;
    ids_ctx_options options = {
        .struct_size = sizeof options, .resize = test_resize, .resize_user = &allocator};
    ids_iter *iter = NULL;
    uint64_t given = 0;
    fixture f = {0};

    test_allocator_init(&allocator);
    ck_assert_int_eq(ids_ctx_create(&options, &f.ctx), IDS_OK);
    sample_read("c2 c3", &f.ops);
    f.sig = sample_make(f.ctx, &f.ops);
    TEST_OK(f.ctx, ids_types_create(f.ctx, f.sig, 8, &f.types));
    TEST_OK(f.ctx, ids_basis_create(f.ctx, f.types, 8, &f.basis));
    uint64_t before = allocator.requests;
    TEST_OK(f.ctx, ids_iter_create(f.ctx, f.basis, 0, ids_basis_size(f.basis), &iter));
    ck_assert_uint_eq(allocator.requests, before + 1);
    while (ids_iter_next(iter) != NULL) {
        given++;
    }
    TEST_OK(f.ctx, ids_iter_seek(iter, 5, 6));
    ck_assert_uint_eq(allocator.requests, before + 1);
    ck_assert_uint_eq(given, 559405); /* OEIS A268163 */
    ids_iter_free(iter);
    close_fixture(&f);
}
END_TEST

START_TEST(test_refused)
{
    ids_iter *iter = NULL;
    fixture f;

    open_fixture(&f, "c2", 4);
    TEST_STATUS(f.ctx, ids_iter_create(f.ctx, f.basis, 0, 16, &iter), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_iter_create(f.ctx, f.basis, 4, 3, &iter), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_iter_create(f.ctx, f.basis, 16, 16, &iter), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_iter_create(f.ctx, NULL, 0, 0, &iter), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_iter_create(f.ctx, f.basis, 0, 0, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_iter_create(NULL, f.basis, 0, 0, &iter), IDS_ERR_ARG);
    ck_assert_ptr_null(iter);
    TEST_OK(f.ctx, ids_iter_create(f.ctx, f.basis, 3, 5, &iter));
    TEST_STATUS(f.ctx, ids_iter_seek(iter, 0, 16), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_iter_seek(NULL, 0, 1), IDS_ERR_ARG);
    check_view(&f, ids_iter_next(iter), 3);
    check_view(&f, ids_iter_next(iter), 4);
    ck_assert_ptr_null(ids_iter_next(iter));
    ck_assert_ptr_null(ids_iter_next(NULL));
    ids_iter_free(iter);
    ids_iter_free(NULL);
    close_fixture(&f);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: iterate");
    TCase *tcase = tcase_create("iterate");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_all, 0, SAMPLE_COUNT);
    tcase_add_loop_test(tcase, test_ranges, 0, (int)(sizeof larges / sizeof larges[0]));
    tcase_add_loop_test(tcase, test_exact, 0, 4);
    tcase_add_test(tcase, test_no_allocation);
    tcase_add_test(tcase, test_refused);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
