/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Full enumeration as in test_tree_enumerate.c, with index(unrank(i)) = i for every monomial, and
 * a million random monomials of degree 12.
 */
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

int main(void)
{
    Suite *suite = suite_create("tree: every index of a full enumeration");
    TCase *tcase = tcase_create("enumerate");

    tcase_set_timeout(tcase, 500);
    tcase_add_loop_test(tcase, test_every_index, 0, 2);
    tcase_add_test(tcase, test_degree_12);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
