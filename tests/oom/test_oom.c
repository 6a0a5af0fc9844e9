/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Refused memory in the core. Each function here makes what it needs, frees it whatever happens,
 * and answers the first status that was not IDS_OK; support.h tells what TEST_OOM does with it.
 * Every other room has its own test_oom_<room>.c.
 */
#include "support.h"

static ids_status nothing(ids_ctx *ctx, void *data)
{
    (void)ctx;
    (void)data;
    return IDS_OK;
}

static ids_status blocks(ids_ctx *ctx, void *data)
{
    void *plain = NULL;
    void *zeroed = NULL;
    ids_status st = IDS_OK;

    (void)data;
    IDSI_TRY(idsi_alloc(ctx, 100, &plain));
    IDSI_TRY(idsi_alloc_zero(ctx, 1000, &zeroed));
done:
    idsi_free(ctx, plain);
    idsi_free(ctx, zeroed);
    return st;
}

static ids_status arrays(ids_ctx *ctx, void *data)
{
    uint64_t *numbers = NULL;
    uint32_t *grown = NULL;
    size_t capacity = 0;
    ids_status st = IDS_OK;

    (void)data;
    IDSI_TRY(idsi_alloc_array(ctx, 10, sizeof *numbers, &numbers));
    numbers[9] = 9;
    st = idsi_resize_array(ctx, 1000, sizeof *numbers, &numbers);
    ck_assert_uint_eq(numbers[9], 9);
    IDSI_TRY(st);
    IDSI_TRY(idsi_resize_array(ctx, 5, sizeof *numbers, &numbers));
    for (uint32_t count = 0; count < 100; count++) {
        IDSI_TRY(idsi_grow(ctx, count, &capacity, sizeof *grown, &grown));
        grown[count] = count;
    }
done:
    idsi_free(ctx, numbers);
    idsi_free(ctx, grown);
    return st;
}

static ids_status texts(ids_ctx *ctx, void *data)
{
    idsi_text text;
    char *taken = NULL;
    char *empty = NULL;
    char *copy = NULL;
    ids_status st = IDS_OK;

    (void)data;
    idsi_text_init(&text, ctx);
    for (int i = 0; i < 100; i++) {
        IDSI_TRY(idsi_text_printf(&text, "%d*", i));
        IDSI_TRY(idsi_text_puts(&text, "x + "));
    }
    IDSI_TRY(idsi_text_take(&text, &taken));
    IDSI_TRY(idsi_text_take(&text, &empty));
    IDSI_TRY(idsi_strdup(ctx, taken, &copy));
done:
    idsi_text_clear(&text);
    ids_string_free(ctx, taken);
    ids_string_free(ctx, empty);
    ids_string_free(ctx, copy);
    return st;
}

START_TEST(test_context)
{
    TEST_OOM(nothing, NULL);
}
END_TEST

START_TEST(test_blocks)
{
    TEST_OOM(blocks, NULL);
}
END_TEST

START_TEST(test_arrays)
{
    TEST_OOM(arrays, NULL);
}
END_TEST

START_TEST(test_texts)
{
    TEST_OOM(texts, NULL);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("refused memory: core");
    TCase *tcase = tcase_create("core");

    tcase_add_test(tcase, test_context);
    tcase_add_test(tcase, test_blocks);
    tcase_add_test(tcase, test_arrays);
    tcase_add_test(tcase, test_texts);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
