/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Subsets and label distributions: numbering against the definition by brute force. The same for
 * random groups is in the property tests.
 */
#include "tree_splits.h"

START_TEST(test_subsets)
{
    /* every pool of the shape 1101..., with gaps and up to the last bit */
    const uint64_t pools[] = {
        0, 1, 0x16, 0x1ff, UINT64_C(0x8000000000000001), UINT64_C(0xf0f0000000000003)};
    const uint64_t pool = pools[_i];
    uint32_t n = (uint32_t)__builtin_popcountll(pool);

    for (uint32_t k = 0; k <= n; k++) {
        uint64_t before = 0;
        uint64_t ways = idsi_binomial(n, k);

        for (uint64_t r = 0; r < ways; r++) {
            uint64_t subset = idsi_subset_unrank(pool, k, r);

            ck_assert_uint_eq(subset & ~pool, 0);
            ck_assert_uint_eq((uint32_t)__builtin_popcountll(subset), k);
            ck_assert_uint_eq(idsi_subset_rank(pool, subset), r);
            /* lexicographic: the least label in which two differ is in the earlier one */
            if (r > 0) {
                uint64_t differ = before ^ subset;

                ck_assert_uint_ne(before & differ & (~differ + 1), 0);
            }
            before = subset;
        }
    }
}
END_TEST

START_TEST(test_large_subsets)
{
    idsi_random random;

    test_random(&random, 2);
    for (uint64_t round = 0; round < 2000 * test_scale(); round++) {
        uint64_t pool = idsi_random_next(&random) | idsi_random_next(&random);
        pool = round % 10 == 0 ? UINT64_MAX : pool;
        uint32_t n = (uint32_t)__builtin_popcountll(pool);
        uint32_t k = (uint32_t)idsi_random_below(&random, n + 1u);
        uint64_t rank = idsi_random_below(&random, idsi_binomial(n, k));
        uint64_t subset = idsi_subset_unrank(pool, k, rank);

        ck_assert_uint_eq((uint32_t)__builtin_popcountll(subset), k);
        ck_assert_uint_eq(subset & ~pool, 0);
        ck_assert_uint_eq(idsi_subset_rank(pool, subset), rank);
    }
}
END_TEST

typedef struct split_case {
    const char *text; /* one operation */
    const char *keys; /* a letter an argument, equal letters for equal arguments, larger first */
    uint8_t size[IDS_MAX_ARITY];
    uint64_t ways; /* multinomial / order of the stabiliser, by hand */
    uint64_t stabilizer;
} split_case;

static const split_case cases[] = {
    {"c2", "zz", {1, 1}, 1, 2},
    {"c2", "zz", {3, 3}, 10, 2}, /* 20/2 */
    {"c2", "zy", {3, 3}, 20, 1}, /* equal sizes, different types */
    {"a2", "zy", {4, 1}, 5, 1},
    {"m2", "zz", {2, 2}, 6, 1},
    {"c3", "zzz", {2, 2, 2}, 15, 6}, /* 90/6 */
    {"c3", "zyy", {3, 1, 1}, 10, 2}, /* 20/2 */
    {"c3", "zzy", {2, 2, 1}, 15, 2}, /* 30/2 */
    {"m3", "zzz", {1, 1, 1}, 6, 1},
    {"c4", "zzzz", {1, 1, 1, 1}, 1, 24},
    {"g3:120+", "zzz", {1, 1, 1}, 2, 3},  /* 6/3 */
    {"g3:120+", "zzz", {2, 2, 2}, 30, 3}, /* 90/3 */
    {"g3:120+", "zzy", {2, 2, 1}, 30, 1}, /* a rotation moves the odd one */
    {"g3:210-", "zyz", {1, 2, 1}, 6, 2},  /* 12/2 */
    {"g4:1230-", "zzzz", {1, 1, 1, 1}, 6, 4},
    {"g4:1230-", "zyzy", {2, 1, 2, 1}, 90, 2}, /* 180/2: half a turn */
    {"g4:1032+,2301+", "zzzz", {1, 1, 1, 1}, 6, 4},
    {"g4:1032+,2301+", "zzyy", {1, 1, 1, 1}, 12, 2},
    {"g4:1230+,0321-", "zzzz", {1, 1, 1, 1}, 3, 8},
    {"g4:1023-,2301+", "zzzz", {2, 2, 2, 2}, 315, 8}, /* 2520/8 */
    {"g4:1203+,1032+", "zzzz", {1, 1, 1, 1}, 2, 12},
    {"g4:0132-", "zzzz", {1, 1, 1, 1}, 12, 2},
    {"c6", "zzzyyy", {1, 1, 1, 1, 1, 1}, 20, 36},
};

START_TEST(test_known)
{
    const split_case *expected = &cases[_i];
    ids_ctx *ctx = test_ctx();
    sample_ops ops;
    uint64_t key[IDS_MAX_ARITY];
    idsi_split split;

    sample_read(expected->text, &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    for (uint32_t i = 0; i < ops.op[0].arity; i++) {
        key[i] = (uint64_t)expected->keys[i];
    }
    idsi_split_for_group(&sig->ops[0].group, key, expected->size, &split);
    ck_assert_uint_eq(split.ways, expected->ways);
    ck_assert_uint_eq(split.stabilizer, expected->stabilizer);
    split_check(&ops.op[0], key, &split);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* 16 places without symmetry, 4 labels each: 64!/(4!)^16 does not fit 64 bits. */
START_TEST(test_overflow)
{
    idsi_split split = {.count = 16};

    for (uint32_t i = 0; i < 16; i++) {
        split.size[i] = 4;
        split.parent[i] = -1;
    }
    idsi_split_prepare(&split);
    ck_assert_uint_eq(split.ways, 0);
    ck_assert_uint_eq(split.total, 64);
    ck_assert_uint_eq(split.stabilizer, 1);
    ck_assert_uint_eq(split.family[15], 4);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: split");
    TCase *tcase = tcase_create("split");

    tcase_add_loop_test(tcase, test_subsets, 0, 6);
    tcase_add_test(tcase, test_large_subsets);
    tcase_add_loop_test(tcase, test_known, 0, (int)(sizeof cases / sizeof cases[0]));
    tcase_add_test(tcase, test_overflow);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
