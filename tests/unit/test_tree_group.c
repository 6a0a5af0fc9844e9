/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Groups of signed argument orders: closure of known groups and of random generators against a
 * closure by brute force, contradictory signs, and the choice of the canonical argument order.
 */
#include "tree_samples.h"

typedef struct known_group {
    const char *name;
    const char *text;
    uint64_t order;
    ids_symmetry symmetry; /* what it is kept as */
} known_group;

/* Orders: n! of the symmetric, n!/2 of the alternating, n of the cyclic, 2n of the dihedral
 * group, elementary; the others are noted. */
static const known_group known[] = {
    {"no generators", "g3:", 1, IDS_SYMMETRY_NONE},
    {"identity", "g3:012+", 1, IDS_SYMMETRY_NONE},
    {"S2", "g2:10+", 2, IDS_SYMMETRY_COMMUTATIVE},
    {"S2 alternating", "g2:10-", 2, IDS_SYMMETRY_ALTERNATING},
    {"S3", "g3:102+,120+", 6, IDS_SYMMETRY_COMMUTATIVE},
    {"S3 alternating", "g3:102-,120+", 6, IDS_SYMMETRY_ALTERNATING},
    {"S4", "g4:1023+,1230+", 24, IDS_SYMMETRY_COMMUTATIVE},
    {"S4 alternating", "g4:1023-,1230-", 24, IDS_SYMMETRY_ALTERNATING},
    {"S5", "g5:10234+,12340+", 120, IDS_SYMMETRY_COMMUTATIVE},
    {"S6", "g6:102345+,123450+", 720, IDS_SYMMETRY_COMMUTATIVE},
    {"S7 alternating", "g7:1023456-,1234560+", 5040, IDS_SYMMETRY_ALTERNATING},
    {"S8", "g8:10234567+,12345670+", 40320, IDS_SYMMETRY_COMMUTATIVE},
    {"S8 alternating", "g8:10234567-,12345670-", 40320, IDS_SYMMETRY_ALTERNATING},
    {"A3", "g3:120+", 3, IDS_SYMMETRY_GENERATED},
    {"A4", "g4:1203+,1032+", 12, IDS_SYMMETRY_GENERATED},
    {"A5", "g5:12034+,12340+", 60, IDS_SYMMETRY_GENERATED},
    {"A6", "g6:120345+,023451+", 360, IDS_SYMMETRY_GENERATED},
    {"A7", "g7:1203456+,1234560+", 2520, IDS_SYMMETRY_GENERATED},
    {"A8", "g8:12034567+,02345671+", 20160, IDS_SYMMETRY_GENERATED},
    {"C4", "g4:1230+", 4, IDS_SYMMETRY_GENERATED},
    {"C4 with sign", "g4:1230-", 4, IDS_SYMMETRY_GENERATED},
    {"C6 with sign", "g6:123450-", 6, IDS_SYMMETRY_GENERATED},
    {"C8", "g8:12345670+", 8, IDS_SYMMETRY_GENERATED},
    {"C6 as (3)(2)", "g5:12043+", 6, IDS_SYMMETRY_GENERATED},
    {"D4", "g4:1230+,0321-", 8, IDS_SYMMETRY_GENERATED},
    {"D5", "g5:12340+,04321+", 10, IDS_SYMMETRY_GENERATED},
    {"D8 with signs", "g8:12345670-,07654321-", 16, IDS_SYMMETRY_GENERATED},
    {"Klein's four-group", "g4:1032+,2301+", 4, IDS_SYMMETRY_GENERATED},
    {"Klein's four-group with signs", "g4:1032-,2301+", 4, IDS_SYMMETRY_GENERATED},
    {"first two arguments", "g4:1023-", 2, IDS_SYMMETRY_GENERATED},
    {"S3 on itself", "g6:120453+,354021+", 6, IDS_SYMMETRY_GENERATED},
    /* both keep the lines {0,1,3} + i of the Fano plane; its group has order 168: from memory */
    {"PSL(3,2)", "g7:1234560+,0216453+", 168, IDS_SYMMETRY_GENERATED},
    /* affine group of the field of 5 elements, x -> x+1, x -> 2x; 2 is no square */
    {"F20 with sign", "g5:12340+,02413-", 20, IDS_SYMMETRY_GENERATED},
};

static ids_status close_text(ids_ctx *ctx, const char *text, idsi_group *group)
{
    sample_ops ops;

    sample_read(text[3] == '\0' ? "g3" : text, &ops);
    return idsi_group_close(ctx, ops.op[0].arity, ops.op[0].generators, ops.op[0].generator_count,
                            group);
}

START_TEST(test_known)
{
    const known_group *expected = &known[_i];
    ids_ctx *ctx = test_ctx();
    idsi_group group = {0};

    TEST_OK(ctx, close_text(ctx, expected->text, &group));
    ck_assert_msg(group.order == expected->order, "%s has order %llu", expected->name,
                  (unsigned long long)group.order);
    ck_assert_msg(group.symmetry == expected->symmetry, "%s is kept as %d", expected->name,
                  (int)group.symmetry);
    ck_assert_int_eq(group.elements != NULL, expected->symmetry == IDS_SYMMETRY_GENERATED);
    idsi_group_clear(ctx, &group);
    ck_assert_ptr_null(group.elements);
    test_ctx_free(ctx);
}
END_TEST

static const char *const contradictory[] = {
    "g2:01-",  /* the identity with a sign */
    "g3:120-", /* an odd cycle: its cube is the identity, with -1 */
    "g5:12340-",
    "g4:1203-",
    "g3:102+,120-",
    "g3:102+,021-",           /* conjugate transpositions with different signs */
    "g4:1023-,0132+,2301+",   /* the same by a swap of the pairs */
    "g4:1230+,1032-,2301-",   /* 2301 is the square of 1230 */
    "g8:12345670-,23456701-", /* the second is the square of the first */
};

START_TEST(test_contradiction)
{
    ids_ctx *ctx = test_ctx();
    idsi_group group = {0};
    sample_ops ops;
    ids_signature *sig = NULL;

    TEST_STATUS(ctx, close_text(ctx, contradictory[_i], &group), IDS_ERR_DOMAIN);
    ck_assert_str_ne(ids_ctx_message(ctx), "");
    ck_assert_ptr_null(group.elements);
    sample_read(contradictory[_i], &ops);
    TEST_STATUS(ctx, ids_signature_create(ctx, ops.op, 1, &sig), IDS_ERR_DOMAIN);
    ck_assert_ptr_null(sig);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_arguments)
{
    ids_ctx *ctx = test_ctx();
    idsi_group group = {0};
    ids_signed_order order = {.image = {0, 1, 1}, .sign = 1};

    TEST_STATUS(ctx, idsi_group_close(ctx, 3, &order, 1, &group), IDS_ERR_ARG);
    order = (ids_signed_order){.image = {0, 1, 3}, .sign = 1};
    TEST_STATUS(ctx, idsi_group_close(ctx, 3, &order, 1, &group), IDS_ERR_ARG);
    order = (ids_signed_order){.image = {1, 0, 2}, .sign = 0};
    TEST_STATUS(ctx, idsi_group_close(ctx, 3, &order, 1, &group), IDS_ERR_ARG);
    order = (ids_signed_order){.image = {1, 0, 2}, .sign = 2};
    TEST_STATUS(ctx, idsi_group_close(ctx, 3, &order, 1, &group), IDS_ERR_ARG);
    /* what stands behind the arity does not matter */
    order = (ids_signed_order){.image = {1, 0, 77, 77, 77, 77, 77, 77}, .sign = -1};
    TEST_OK(ctx, idsi_group_close(ctx, 2, &order, 1, &group));
    ck_assert_uint_eq(group.order, 2);
    idsi_group_clear(ctx, &group);
    test_ctx_free(ctx);
}
END_TEST

/* ---- brute force --------------------------------------------------------------------------- */

/* All of S_arity with a mark: 0 not in the group, else the sign; 2: both signs. */
typedef struct slow_group {
    uint32_t arity;
    uint32_t count;
    ids_signed_order element[120];
    bool contradictory;
} slow_group;

static void slow_add(slow_group *group, const ids_signed_order *order)
{
    for (uint32_t e = 0; e < group->count; e++) {
        if (memcmp(group->element[e].image, order->image, group->arity) == 0) {
            group->contradictory = group->contradictory || group->element[e].sign != order->sign;
            return;
        }
    }
    group->element[group->count] = *order;
    group->count++;
}

/* Products of all pairs until nothing is new. */
static void slow_close(const sample_ops *ops, slow_group *group)
{
    ids_signed_order identity = {.image = {0, 1, 2, 3, 4}, .sign = 1};

    memset(group, 0, sizeof *group);
    group->arity = ops->op[0].arity;
    slow_add(group, &identity);
    for (size_t g = 0; g < ops->op[0].generator_count; g++) {
        slow_add(group, &ops->generator[0][g]);
    }
    for (uint32_t before = 0; before < group->count;) {
        before = group->count;
        for (uint32_t a = 0; a < before; a++) {
            for (uint32_t b = 0; b < before; b++) {
                ids_signed_order product = {0};

                for (uint32_t i = 0; i < group->arity; i++) {
                    product.image[i] = group->element[a].image[group->element[b].image[i]];
                }
                product.sign = (int8_t)(group->element[a].sign * group->element[b].sign);
                slow_add(group, &product);
            }
        }
    }
}

/* The best arrangement over all elements: largest keys, then smallest labels. */
static void check_canonical(idsi_random *random, const slow_group *slow, const idsi_group *group,
                            bool labelled)
{
    uint64_t key[IDS_MAX_ARITY];
    uint64_t label[IDS_MAX_ARITY];
    uint8_t image[IDS_MAX_ARITY];
    const ids_signed_order *best = NULL;
    bool reached = false;

    for (uint32_t i = 0; i < slow->arity; i++) {
        key[i] = idsi_random_below(random, 3);
        label[i] = labelled ? (i * 7 + 3 * idsi_random_below(random, 50)) : 0;
    }
    for (uint32_t e = 0; e < slow->count; e++) {
        int order = 0;

        for (uint32_t i = 0; best != NULL && order == 0 && i < slow->arity; i++) {
            uint64_t mine = key[slow->element[e].image[i]];
            uint64_t other = key[best->image[i]];

            order = (mine < other) - (mine > other);
        }
        for (uint32_t i = 0; best != NULL && order == 0 && i < slow->arity; i++) {
            uint64_t mine = label[slow->element[e].image[i]];
            uint64_t other = label[best->image[i]];

            order = (mine > other) - (mine < other);
        }
        best = best == NULL || order < 0 ? &slow->element[e] : best;
    }
    int sign = idsi_group_canonical(group, key, labelled ? label : NULL, image);
    for (uint32_t i = 0; i < slow->arity; i++) {
        ck_assert_uint_eq(key[image[i]], key[best->image[i]]);
        ck_assert_uint_eq(label[image[i]], label[best->image[i]]);
    }
    for (uint32_t e = 0; e < slow->count; e++) {
        if (memcmp(slow->element[e].image, image, slow->arity) == 0) {
            reached = true;
            ck_assert_int_eq(slow->element[e].sign, sign);
        }
    }
    ck_assert(reached);
}

START_TEST(test_random_groups)
{
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    uint64_t rounds = 400 * test_scale();
    uint64_t closed = 0;

    test_random(&random, 1);
    for (uint64_t round = 0; round < rounds; round++) {
        sample_ops ops;
        slow_group slow;
        idsi_group group = {0};

        sample_random_group(&random, 2 + (uint32_t)idsi_random_below(&random, 4), &ops);
        slow_close(&ops, &slow);
        ids_status st = idsi_group_close(ctx, slow.arity, ops.op[0].generators,
                                         ops.op[0].generator_count, &group);
        ck_assert_int_eq(st, slow.contradictory ? IDS_ERR_DOMAIN : IDS_OK);
        if (st != IDS_OK) {
            continue;
        }
        closed++;
        ck_assert_uint_eq(group.order, slow.count);
        for (uint64_t e = 0; group.elements != NULL && e < group.order; e++) {
            uint32_t before = slow.count;

            slow_add(&slow, &group.elements[e]);
            ck_assert_uint_eq(slow.count, before);
            ck_assert(!slow.contradictory);
        }
        for (int i = 0; i < 20; i++) {
            check_canonical(&random, &slow, &group, i % 2 == 0);
        }
        idsi_group_clear(ctx, &group);
    }
    ck_assert_uint_gt(closed, rounds / 5);
    test_ctx_free(ctx);
}
END_TEST

static ids_status close_and_clear(ids_ctx *ctx, void *data)
{
    idsi_group group = {0};
    ids_status st = close_text(ctx, data, &group);

    idsi_group_clear(ctx, &group);
    return st;
}

START_TEST(test_refused_memory)
{
    char four[] = "g4:1230+,0321-";
    char full[] = "g5:10234+,12340+";

    TEST_OOM(close_and_clear, four);
    TEST_OOM(close_and_clear, full);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: group");
    TCase *tcase = tcase_create("group");

    tcase_add_loop_test(tcase, test_known, 0, (int)(sizeof known / sizeof known[0]));
    tcase_add_loop_test(tcase, test_contradiction, 0,
                        (int)(sizeof contradictory / sizeof contradictory[0]));
    tcase_add_test(tcase, test_arguments);
    tcase_add_test(tcase, test_random_groups);
    tcase_add_test(tcase, test_refused_memory);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
