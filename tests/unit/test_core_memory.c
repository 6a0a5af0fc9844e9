/* SPDX-License-Identifier: BSD-2-Clause */
/* Blocks, arrays, accounting and the byte budget. */
#include "support.h"

#include <inttypes.h>
#include <pthread.h>
#include <stdalign.h>
#include <stdio.h>
#include <string.h>

static ids_ctx *ctx_with_budget(uint64_t budget)
{
    ids_ctx_options options = {0};
    ids_ctx *ctx = NULL;

    options.struct_size = sizeof options;
    options.byte_budget = budget;
    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    return ctx;
}

START_TEST(test_blocks)
{
    ids_ctx *ctx = test_ctx();
    void *blocks[70] = {0};

    for (size_t bytes = 0; bytes < 70; bytes++) {
        TEST_OK(ctx, idsi_alloc_zero(ctx, bytes, &blocks[bytes]));
        ck_assert_uint_eq((uintptr_t)blocks[bytes] % alignof(max_align_t), 0);
        for (size_t i = 0; i < bytes; i++) {
            ck_assert_int_eq(((unsigned char *)blocks[bytes])[i], 0);
        }
        memset(blocks[bytes], 0xA5, bytes);
    }
    ck_assert_ptr_ne(blocks[0], blocks[1]);
    for (size_t bytes = 0; bytes < 70; bytes++) {
        /* without its context too: a block knows its owner */
        idsi_free(bytes % 2 == 0 ? ctx : NULL, blocks[bytes]);
    }
    idsi_free(ctx, NULL);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_live_and_peak)
{
    ids_ctx *ctx = test_ctx();
    void *first = NULL;
    void *second = NULL;
    ids_memory memory = ids_ctx_memory(ctx);

    ck_assert_uint_eq(memory.live, 0);
    ck_assert_uint_eq(memory.peak, 0);
    ck_assert_uint_eq(memory.budget, 0);
    TEST_OK(ctx, idsi_alloc(ctx, 1000, &first));
    TEST_OK(ctx, idsi_alloc(ctx, 500, &second));
    memory = ids_ctx_memory(ctx);
    ck_assert_uint_ge(memory.live, 1500);
    ck_assert_uint_eq(memory.peak, memory.live);
    idsi_free(ctx, first);
    ck_assert_uint_lt(ids_ctx_memory(ctx).live, 1000);
    ck_assert_uint_eq(ids_ctx_memory(ctx).peak, memory.peak);
    idsi_free(ctx, second);
    ck_assert_uint_eq(ids_ctx_memory(ctx).live, 0);
    ck_assert_uint_eq(ids_ctx_memory(NULL).peak, 0);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_arrays)
{
    ids_ctx *ctx = test_ctx();
    uint32_t *numbers = NULL;
    uint32_t *none = NULL;

    TEST_OK(ctx, idsi_alloc_array(ctx, 10, sizeof *numbers, &numbers));
    for (uint32_t i = 0; i < 10; i++) {
        ck_assert_uint_eq(numbers[i], 0);
        numbers[i] = i;
    }
    TEST_OK(ctx, idsi_resize_array(ctx, 1000, sizeof *numbers, &numbers));
    ck_assert_uint_eq(numbers[9], 9);
    TEST_OK(ctx, idsi_resize_array(ctx, 5, sizeof *numbers, &numbers));
    ck_assert_uint_eq(numbers[4], 4);
    ck_assert_uint_lt(ids_ctx_memory(ctx).live, 1000);
    TEST_OK(ctx, idsi_resize_array(ctx, 0, sizeof *numbers, &numbers));
    ck_assert_ptr_nonnull(numbers);
    TEST_OK(ctx, idsi_alloc_array(ctx, 0, sizeof *none, &none));
    ck_assert_ptr_nonnull(none);
    idsi_free(ctx, numbers);
    idsi_free(ctx, none);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_sizes_that_overflow)
{
    ids_ctx *ctx = test_ctx();
    uint64_t *numbers = NULL;
    void *block = NULL;
    size_t capacity = SIZE_MAX / 2 + 1;

    TEST_STATUS(ctx, idsi_alloc_array(ctx, SIZE_MAX / 8 + 1, 8, &numbers), IDS_ERR_LIMIT);
    TEST_STATUS(ctx, idsi_alloc_array(ctx, SIZE_MAX, SIZE_MAX, &numbers), IDS_ERR_LIMIT);
    TEST_STATUS(ctx, idsi_resize_array(ctx, SIZE_MAX / 8 + 1, 8, &numbers), IDS_ERR_LIMIT);
    TEST_STATUS(ctx, idsi_alloc(ctx, SIZE_MAX, &block), IDS_ERR_LIMIT);
    TEST_STATUS(ctx, idsi_grow(ctx, capacity, &capacity, 1, &numbers), IDS_ERR_LIMIT);
    ck_assert_ptr_null(numbers);
    ck_assert_ptr_null(block);
    ck_assert_uint_eq(capacity, SIZE_MAX / 2 + 1);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_grow)
{
    ids_ctx *ctx = test_ctx();
    uint64_t *numbers = NULL;
    size_t capacity = 0;

    for (size_t count = 0; count < 1000; count++) {
        size_t before = capacity;

        TEST_OK(ctx, idsi_grow(ctx, count, &capacity, sizeof *numbers, &numbers));
        ck_assert_uint_gt(capacity, count);
        ck_assert(capacity == before || before == 0 || capacity == 2 * before);
        numbers[count] = count;
    }
    for (size_t count = 0; count < 1000; count++) {
        ck_assert_uint_eq(numbers[count], count);
    }
    idsi_free(ctx, numbers);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_budget)
{
    ids_ctx *ctx = ctx_with_budget(10000);
    void *first = NULL;
    void *second = NULL;
    char live[32] = "";

    ck_assert_uint_eq(ids_ctx_memory(ctx).budget, 10000);
    TEST_OK(ctx, idsi_alloc(ctx, 6000, &first));
    TEST_STATUS(ctx, idsi_alloc(ctx, 6000, &second), IDS_ERR_LIMIT);
    ck_assert_ptr_null(second);
    /* asked, live and budget stand in the message */
    snprintf(live, sizeof live, "%" PRIu64, ids_ctx_memory(ctx).live);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "60"));
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), live));
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "10000"));
    TEST_OK(ctx, idsi_alloc(ctx, 3000, &second));
    /* growing counts the growth only; a block that may not grow is intact */
    ((char *)second)[2999] = 'z';
    TEST_STATUS(ctx, idsi_resize_array(ctx, 5000, 1, &second), IDS_ERR_LIMIT);
    ck_assert_int_eq(((char *)second)[2999], 'z');
    TEST_OK(ctx, idsi_resize_array(ctx, 3500, 1, &second));
    idsi_free(ctx, first);
    idsi_free(ctx, second);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_budget_to_the_byte)
{
    ids_ctx *ctx = test_ctx();
    void *block = NULL;
    uint64_t total = 0;

    TEST_OK(ctx, idsi_alloc(ctx, 100, &block));
    total = ids_ctx_memory(ctx).live;
    idsi_free(ctx, block);
    test_ctx_free(ctx);

    ctx = ctx_with_budget(total);
    block = NULL;
    TEST_STATUS(ctx, idsi_alloc(ctx, 101, &block), IDS_ERR_LIMIT);
    TEST_OK(ctx, idsi_alloc(ctx, 100, &block));
    idsi_free(ctx, block);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_budget_check)
{
    ids_ctx *ctx = ctx_with_budget(10000);
    ids_ctx *free_ctx = test_ctx();

    TEST_OK(ctx, idsi_budget_check(ctx, 10000, "the matrix"));
    TEST_STATUS(ctx, idsi_budget_check(ctx, 10001, "the matrix"), IDS_ERR_LIMIT);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "the matrix"));
    TEST_STATUS(ctx, idsi_budget_check(ctx, UINT64_MAX, "the matrix"), IDS_ERR_LIMIT);
    TEST_OK(free_ctx, idsi_budget_check(free_ctx, UINT64_MAX, "the matrix"));
    test_ctx_free(ctx);
    test_ctx_free(free_ctx);
}
END_TEST

START_TEST(test_strdup)
{
    ids_ctx *ctx = test_ctx();
    char *copy = NULL;

    TEST_OK(ctx, idsi_strdup(ctx, "a\xC3\xA9*b", &copy));
    ck_assert_str_eq(copy, "a\xC3\xA9*b");
    ids_string_free(ctx, copy);
    test_ctx_free(ctx);
}
END_TEST

static void *allocate_much(void *argument)
{
    ids_ctx *ctx = argument;

    for (int round = 0; round < 2000; round++) {
        void *block = NULL;

        if (idsi_alloc(ctx, 1000, &block) == IDS_OK) {
            idsi_free(ctx, block);
        }
    }
    return NULL;
}

/* Four threads under a budget for two of their blocks: never more, and nothing lost. */
START_TEST(test_threads)
{
    ids_ctx *ctx = ctx_with_budget(2500);
    pthread_t threads[4];

    for (int i = 0; i < 4; i++) {
        ck_assert_int_eq(pthread_create(&threads[i], NULL, allocate_much, ctx), 0);
    }
    for (int i = 0; i < 4; i++) {
        ck_assert_int_eq(pthread_join(threads[i], NULL), 0);
    }
    ck_assert_uint_le(ids_ctx_memory(ctx).peak, 2500);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("core: memory");
    TCase *tcase = tcase_create("memory");

    tcase_add_test(tcase, test_blocks);
    tcase_add_test(tcase, test_live_and_peak);
    tcase_add_test(tcase, test_arrays);
    tcase_add_test(tcase, test_sizes_that_overflow);
    tcase_add_test(tcase, test_grow);
    tcase_add_test(tcase, test_budget);
    tcase_add_test(tcase, test_budget_to_the_byte);
    tcase_add_test(tcase, test_budget_check);
    tcase_add_test(tcase, test_strdup);
    tcase_add_test(tcase, test_threads);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
