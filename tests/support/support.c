/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Seeds, the refusing allocator and the loops over refused allocations; support.h says how to
 * use them. Blocks of the allocator carry their size in front, to check what they are freed with.
 */
#include "support.h"

#include <inttypes.h>
#include <stdalign.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* ---- random input ------------------------------------------------------------------------ */

static uint64_t number_from_environment(const char *name, uint64_t otherwise)
{
    const char *text = getenv(name);
    char *end = NULL;
    unsigned long long value = 0;

    if (text == NULL || *text == '\0') {
        return otherwise;
    }
    value = strtoull(text, &end, 10);
    if (*end != '\0') {
        fprintf(stderr, "%s=%s is not a number\n", name, text);
        exit(EXIT_FAILURE);
    }
    return value;
}

uint64_t test_seed(void)
{
    return number_from_environment("IDS_TEST_SEED", 20240229);
}

uint64_t test_scale(void)
{
    return number_from_environment("IDS_TEST_SCALE", 1);
}

void test_random(idsi_random *random, uint64_t salt)
{
    idsi_random_seed(random, test_seed() ^ (salt * UINT64_C(0x9E3779B97F4A7C15)));
}

int test_run(Suite *suite)
{
    SRunner *runner = srunner_create(suite);
    int failed = 0;

    srunner_run_all(runner, CK_ENV);
    failed = srunner_ntests_failed(runner);
    srunner_free(runner);
    if (failed > 0) {
        printf("run again with IDS_TEST_SEED=%" PRIu64 " IDS_TEST_SCALE=%" PRIu64 "\n", test_seed(),
               test_scale());
    }
    return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}

/* ---- allocator --------------------------------------------------------------------------- */

typedef struct sized_block {
    alignas(max_align_t) size_t size;
} sized_block;

void test_allocator_init(test_allocator *allocator)
{
    memset(allocator, 0, sizeof *allocator);
    allocator->refuse_at = UINT64_MAX;
}

static bool refuses(test_allocator *allocator)
{
    uint64_t number = allocator->requests++;

    if (number == allocator->refuse_at ||
        (allocator->refuse_later && number > allocator->refuse_at)) {
        allocator->refused++;
        return true;
    }
    return false;
}

void *test_resize(void *user, void *ptr, size_t old_size, size_t new_size)
{
    test_allocator *allocator = user;
    sized_block *old = ptr == NULL ? NULL : (sized_block *)ptr - 1;
    sized_block *made = NULL;

    if (old_size != (old == NULL ? 0 : old->size)) {
        fprintf(stderr, "resize was told %zu bytes for another size\n", old_size);
        abort();
    }
    if (new_size == 0) {
        if (old != NULL) {
            allocator->live_blocks--;
            allocator->live_bytes -= old_size;
        }
        free(old);
        return NULL;
    }
    if (refuses(allocator)) {
        return NULL;
    }
    /* A resized block always moves, so that a pointer that was kept to the old one is found. */
    made = malloc(sizeof *made + new_size);
    if (made == NULL) {
        return NULL;
    }
    made->size = new_size;
    if (old != NULL) {
        memcpy(made + 1, old + 1, old_size < new_size ? old_size : new_size);
        free(old);
    }
    allocator->live_blocks += old == NULL;
    allocator->live_bytes += new_size;
    allocator->live_bytes -= old_size;
    return made + 1;
}

/* ---- contexts ---------------------------------------------------------------------------- */

ids_ctx *test_ctx(void)
{
    ids_ctx *ctx = NULL;

    ck_assert_int_eq(ids_ctx_create(NULL, &ctx), IDS_OK);
    return ctx;
}

void test_ctx_free(ids_ctx *ctx)
{
    ck_assert_uint_eq(ids_ctx_memory(ctx).live, 0);
    ids_ctx_free(ctx);
}

/* ---- loops over refusals ----------------------------------------------------------------- */

/* One round: the call in a context on `allocator`. Returns its status; *peak may be NULL. */
static ids_status round_of(test_call call, const char *name, void *data, test_allocator *allocator,
                           uint64_t budget, uint64_t *peak)
{
    ids_ctx_options options = {0};
    ids_ctx *ctx = NULL;
    ids_status st = IDS_OK;

    options.struct_size = sizeof options;
    options.resize = test_resize;
    options.resize_user = allocator;
    options.byte_budget = budget;
    st = ids_ctx_create(&options, &ctx);
    if (st != IDS_OK) {
        ck_assert_msg(ctx == NULL, "ids_ctx_create wrote its output and failed");
        return st;
    }
    st = call(ctx, data);
    ck_assert_msg(ids_ctx_memory(ctx).live == 0, "%s left %" PRIu64 " bytes, request %" PRIu64,
                  name, ids_ctx_memory(ctx).live, allocator->refuse_at);
    if (st != IDS_OK) {
        ck_assert_msg(ids_ctx_message(ctx)[0] != '\0', "%s explained nothing", name);
        ck_assert_int_eq(ids_ctx_last_status(ctx), st);
    }
    if (peak != NULL) {
        *peak = ids_ctx_memory(ctx).peak;
    }
    ids_ctx_free(ctx);
    return st;
}

static void refuse_each(test_call call, const char *name, void *data, bool later)
{
    for (uint64_t k = 0;; k++) {
        test_allocator allocator;
        ids_status st = IDS_OK;

        test_allocator_init(&allocator);
        allocator.refuse_at = k;
        allocator.refuse_later = later;
        st = round_of(call, name, data, &allocator, 0, NULL);
        ck_assert_msg(allocator.live_blocks == 0, "%s left %" PRIu64 " blocks, request %" PRIu64,
                      name, allocator.live_blocks, k);
        if (allocator.refused == 0) {
            ck_assert_msg(st == IDS_OK, "%s is %s with all the memory it wants", name,
                          ids_status_name(st));
            return;
        }
        ck_assert_msg(st == IDS_ERR_NOMEM, "%s is %s when request %" PRIu64 " is refused", name,
                      ids_status_name(st), k);
    }
}

static void refuse_by_budget(test_call call, const char *name, void *data)
{
    test_allocator allocator;
    uint64_t peak = 0;

    test_allocator_init(&allocator);
    ck_assert_int_eq(round_of(call, name, data, &allocator, 0, &peak), IDS_OK);
    for (uint64_t sixteenth = 0; sixteenth < 16; sixteenth++) {
        /* 0 would mean no budget */
        uint64_t budget = 1 + (peak / 16) * sixteenth;
        ids_status st = IDS_OK;

        if (budget >= peak) {
            break;
        }
        st = round_of(call, name, data, &allocator, budget, NULL);
        ck_assert_msg(st == IDS_ERR_LIMIT, "%s is %s with budget %" PRIu64 " of %" PRIu64, name,
                      ids_status_name(st), budget, peak);
        ck_assert_uint_eq(allocator.live_blocks, 0);
    }
}

void test_oom_loop(test_call call, const char *name, void *data)
{
    refuse_each(call, name, data, false);
    refuse_each(call, name, data, true);
    refuse_by_budget(call, name, data);
}
