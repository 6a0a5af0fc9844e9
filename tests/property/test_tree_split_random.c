/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Label distributions for random groups on 2 to 6 places and random arguments, against all
 * distributions by brute force.
 */
#include "tree_splits.h"

/* Keys with repetitions; equal keys have equal sizes. At most `labels` labels in all. */
static void random_arguments(idsi_random *random, uint32_t arity, uint32_t labels, uint64_t *key,
                             uint8_t *size)
{
    uint32_t total = 0;
    uint8_t size_of[3];

    do {
        total = 0;
        for (int k = 0; k < 3; k++) {
            size_of[k] = (uint8_t)(1 + idsi_random_below(random, 3));
        }
        for (uint32_t i = 0; i < arity; i++) {
            uint64_t k = idsi_random_below(random, 3);

            key[i] = ((uint64_t)size_of[k] << 32) + k;
            size[i] = size_of[k];
            total += size[i];
        }
    } while (total > labels);
}

START_TEST(test_random_splits)
{
    static const uint32_t most_labels[] = {0, 0, 6, 8, 8, 8, 7};
    uint32_t arity = (uint32_t)_i;
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    uint64_t checked = 0;

    test_random(&random, 100 + arity);
    while (checked < 25 * test_scale()) {
        sample_ops ops;
        ids_signature *sig = NULL;
        uint64_t key[IDS_MAX_ARITY];
        uint8_t size[IDS_MAX_ARITY];
        uint64_t sorted_key[IDS_MAX_ARITY];
        uint8_t sorted_size[IDS_MAX_ARITY];
        uint8_t image[IDS_MAX_ARITY];
        idsi_split split;

        sample_random_group(&random, arity, &ops);
        ids_status st = ids_signature_create(ctx, ops.op, 1, &sig);
        if (st != IDS_OK) {
            ck_assert_int_eq(st, IDS_ERR_DOMAIN);
            continue;
        }
        random_arguments(&random, arity, most_labels[arity], key, size);
        (void)idsi_group_canonical(&sig->ops[0].group, key, NULL, image);
        for (uint32_t i = 0; i < arity; i++) {
            sorted_key[i] = key[image[i]];
            sorted_size[i] = size[image[i]];
        }
        idsi_split_for_group(&sig->ops[0].group, sorted_key, sorted_size, &split);
        split_check(&ops.op[0], sorted_key, &split);
        ids_signature_free(sig);
        checked++;
    }
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: random splits");
    TCase *tcase = tcase_create("split");

    tcase_add_loop_test(tcase, test_random_splits, 2, 7);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
