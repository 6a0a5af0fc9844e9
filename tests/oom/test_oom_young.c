/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory in the young room; support.h tells what TEST_OOM does. */
#include "support.h"
#include "young/young_private.h"

static ids_status print_partition(ids_ctx *ctx, void *data)
{
    char *text = NULL;
    ids_status st = ids_partition_print(ctx, data, &text);

    ck_assert_int_eq(text != NULL, st == IDS_OK);
    ids_string_free(ctx, text);
    return st;
}

static ids_status make_strips(ids_ctx *ctx, void *data)
{
    const ids_partition *type = data;
    idsi_strips strips = {0};
    int64_t values[64] = {0};
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_strips_create(ctx, type->degree, &strips));
    IDSI_TRY(idsi_character_column(&strips, type, values));
done:
    idsi_strips_clear(&strips);
    return st;
}

/* A commutative, an alternating and a cyclic operation. */
static ids_status make_cocharacter(ids_ctx *ctx, void *data)
{
    const ids_signature *sig = data;
    ids_cocharacter *cocharacter = NULL;
    ids_status st = ids_cocharacter_create(ctx, sig, 7, &cocharacter);

    ck_assert_int_eq(cocharacter != NULL, st == IDS_OK);
    ids_cocharacter_free(cocharacter);
    return st;
}

START_TEST(test_partitions)
{
    ids_partition partition = {.degree = 8, .length = 3, .part = {4, 3, 1}};

    TEST_OOM(print_partition, &partition);
    TEST_OOM(make_strips, &partition);
}
END_TEST

START_TEST(test_cocharacters)
{
    const ids_signed_order turn = {.image = {1, 2, 0}, .sign = 1};
    const ids_operation operations[] = {
        {.notation = IDS_NOTATION_PREFIX,
         .open = "f",
         .arity = 2,
         .symmetry = IDS_SYMMETRY_COMMUTATIVE},
        {.notation = IDS_NOTATION_PREFIX,
         .open = "g",
         .arity = 4,
         .symmetry = IDS_SYMMETRY_ALTERNATING},
        {.notation = IDS_NOTATION_PREFIX,
         .open = "h",
         .arity = 3,
         .symmetry = IDS_SYMMETRY_GENERATED,
         .generators = &turn,
         .generator_count = 1},
    };
    ids_ctx *ctx = test_ctx();
    ids_signature *sig = NULL;

    TEST_OK(ctx, ids_signature_create(ctx, operations, 3, &sig));
    TEST_OOM(make_cocharacter, sig);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("refused memory: young");
    TCase *tcase = tcase_create("young");

    tcase_add_test(tcase, test_partitions);
    tcase_add_test(tcase, test_cocharacters);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
