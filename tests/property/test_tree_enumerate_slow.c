/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Full enumeration as in test_tree_enumerate.c, with index(unrank(i)) = i for every monomial,
 * a million random monomials of degree 12; degree 20, where numbers pass 64 bits and the plans of
 * the types are too many to be stored.
 */
#include <idspan/gmp.h>

#include "tree_enumerate.h"

START_TEST(test_every_index)
{
    enumerate_check(&enumerate_cases[_i], 1);
}
END_TEST

START_TEST(test_degree_12)
{
    const enumerate_case which = {"c2", 12, UINT64_C(13749310575)}; /* OEIS A001147 */
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;
    uint64_t index = 0;
    idsi_random random;
    enumerate_world w;

    test_random(&random, 600);
    enumerate_open(&w, &which);
    for (uint64_t round = 0; round < 1000000 * test_scale(); round++) {
        uint64_t drawn = idsi_random_below(&random, which.size);

        SURE(ids_basis_unrank_code(w.basis, drawn, code, IDSI_MAX_TOKENS, &length) == IDS_OK);
        SURE(ids_basis_rank_code(w.basis, code, length, &index) == IDS_OK && index == drawn);
    }
    enumerate_close(&w);
}
END_TEST

START_TEST(test_degree_20)
{
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;
    gmp_randstate_t state;
    mpz_t size, index, again;
    sample_ops ops;
    ids_types *types = NULL;
    ids_basis *basis = NULL;
    ids_iter *iter = NULL;
    ids_ctx *ctx = test_ctx();

    gmp_randinit_default(state);
    gmp_randseed_ui(state, (unsigned int)test_seed());
    mpz_inits(size, index, again, NULL);
    sample_read("c2", &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    TEST_OK(ctx, ids_types_create(ctx, sig, 20, &types));
    ck_assert_uint_eq(ids_types_count(types, 20), 293547); /* OEIS A001190, from memory */
    TEST_OK(ctx, ids_basis_create_exact(ctx, types, 20, &basis));
    TEST_OK(ctx, ids_basis_size_exact(basis, size));
    mpz_2fac_ui(index, 37); /* OEIS A001147 */
    ck_assert_int_eq(mpz_cmp(size, index), 0);
    TEST_OK(ctx, ids_iter_create_exact(ctx, basis, size, 0, &iter));
    for (uint64_t round = 0; round < 2000 * test_scale(); round++) {
        mpz_urandomm(index, state, size);
        mpz_sub_ui(again, size, 100);
        uint64_t count = mpz_cmp(index, again) < 0 ? 100 : 1;
        SURE(ids_iter_seek_exact(iter, index, count) == IDS_OK);
        for (uint64_t i = 0; i < count; i++) {
            const ids_mono_view *view = ids_iter_next(iter);

            SURE(ids_basis_rank_code_exact(basis, view->code, view->length, again) == IDS_OK);
            SURE(mpz_cmp(index, again) == 0);
            SURE(ids_basis_unrank_code_exact(basis, index, code, IDSI_MAX_TOKENS, &length) ==
                 IDS_OK);
            SURE(length == view->length && memcmp(code, view->code, length * sizeof *code) == 0);
            mpz_add_ui(index, index, 1);
        }
    }
    mpz_clears(size, index, again, NULL);
    gmp_randclear(state);
    ids_iter_free(iter);
    ids_basis_free(basis);
    ids_types_free(types);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: every index of a full enumeration");
    TCase *tcase = tcase_create("enumerate");

    tcase_set_timeout(tcase, 500);
    tcase_add_loop_test(tcase, test_every_index, 0, 2);
    tcase_add_test(tcase, test_degree_12);
    tcase_add_test(tcase, test_degree_20);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
