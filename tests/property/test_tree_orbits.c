/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Canonical forms against orbits by brute force: random trees of many signatures and of random
 * groups G <= S_4, S_5 with random sign characters, with different and with repeated labels.
 */
#include "tree_classes.h"

#define LARGEST_CLASS 20000u

/* Random trees of one signature: half of them multilinear. */
static void check_trees(ids_ctx *ctx, idsi_random *random, const sample_ops *ops,
                        const ids_signature *sig, uint32_t most, uint64_t rounds)
{
    ids_types *types = NULL;

    TEST_OK(ctx, ids_types_create(ctx, sig, most, &types));
    for (uint64_t round = 0; round < rounds; round++) {
        uint32_t degree = 1 + (uint32_t)idsi_random_below(random, most);
        uint32_t letters = (uint32_t)(round % 2 * (1 + idsi_random_below(random, 4)));
        ids_basis *basis = NULL;
        sample_tree tree;

        if (!sample_random_shape(random, ops, degree, &tree)) {
            continue;
        }
        sample_random_labels(random, &tree, letters);
        if (letters == 0) {
            TEST_OK(ctx, ids_basis_create(ctx, types, degree, &basis));
        }
        class_check(ctx, ops, sig, &tree, basis, LARGEST_CLASS);
        ids_basis_free(basis);
    }
    ids_types_free(types);
}

START_TEST(test_samples)
{
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    sample_ops ops;

    test_random(&random, 200 + (uint64_t)_i);
    sample_read(sample_signatures[_i].text, &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    check_trees(ctx, &random, &ops, sig, 7, 60 * test_scale());
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* Degrees 4 and 7 for G <= S_4, 5 and 9 for G <= S_5; larger groups only one operation deep. */
START_TEST(test_random_groups)
{
    uint32_t arity = (uint32_t)_i;
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    uint64_t checked = 0;

    test_random(&random, 300 + arity);
    while (checked < 150 * test_scale()) {
        sample_ops ops;
        ids_signature *sig = NULL;

        sample_random_group(&random, arity, &ops);
        ids_status st = ids_signature_create(ctx, ops.op, 1, &sig);
        if (st != IDS_OK) {
            ck_assert_int_eq(st, IDS_ERR_DOMAIN);
            continue;
        }
        bool small = sig->ops[0].group.order <= 24;
        check_trees(ctx, &random, &ops, sig, small ? 2 * arity - 1 : arity, 6);
        ids_signature_free(sig);
        checked++;
    }
    test_ctx_free(ctx);
}
END_TEST

/* The trees of degree `degree` with label 1 everywhere, one for each way to nest and order. */
typedef struct plane_list {
    size_t count;
    sample_tree tree[2000];
} plane_list;

static void plane_step(const sample_ops *ops, uint32_t degree, sample_tree *tree, uint32_t open,
                       uint32_t leaves, plane_list *list)
{
    if (open == 0) {
        if (leaves == degree) {
            ck_assert_uint_lt(list->count, 2000);
            list->tree[list->count++] = *tree;
        }
        return;
    }
    if (leaves + open > degree) {
        return;
    }
    tree->code[tree->length++] = 1;
    plane_step(ops, degree, tree, open - 1, leaves + 1, list);
    for (size_t o = 0; o < ops->count; o++) {
        tree->code[tree->length - 1] = -1 - (int32_t)o;
        plane_step(ops, degree, tree, open - 1 + ops->op[o].arity, leaves, list);
    }
    tree->length--;
    tree->code[tree->length] = 0;
}

/* Numbers of classes: the basis has one monomial for each class of multilinear trees. The class
 * of a multilinear tree has as many members as the product of the group orders, because different
 * labels are moved freely; so there are plane trees * degree! / that product classes. */
START_TEST(test_class_numbers)
{
    const sample_signature *sample = &sample_signatures[_i];
    ids_ctx *ctx = test_ctx();
    ids_types *types = NULL;
    sample_ops ops;
    static plane_list list;
    double factorial = 1;

    sample_read(sample->text, &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    TEST_OK(ctx, ids_types_create(ctx, sig, 6, &types));
    for (uint32_t degree = 1; degree <= 6; degree++) {
        ids_basis *basis = NULL;
        sample_tree tree = {0};
        double expected = 0;

        factorial *= degree;
        list.count = 0;
        plane_step(&ops, degree, &tree, 1, 0, &list);
        for (size_t i = 0; i < list.count; i++) {
            double product = 1;

            for (uint32_t j = 0; j < list.tree[i].length; j++) {
                int32_t token = list.tree[i].code[j];
                product *= token < 0 ? (double)sample->order[-1 - token] : 1;
            }
            expected += factorial / product;
        }
        TEST_OK(ctx, ids_basis_create(ctx, types, degree, &basis));
        ck_assert_uint_eq(ids_basis_size(basis), (uint64_t)(expected + 0.5));
        ids_basis_free(basis);
    }
    ids_types_free(types);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: orbits");
    TCase *tcase = tcase_create("orbits");

    tcase_add_loop_test(tcase, test_samples, 0, SAMPLE_COUNT);
    tcase_add_loop_test(tcase, test_random_groups, 3, 6);
    tcase_add_loop_test(tcase, test_class_numbers, 0, SAMPLE_COUNT);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
