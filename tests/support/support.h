/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the tests share.
 *
 * Random input. Call test_random(&random, salt) and draw with idsi_random_below(). The seed is
 * fixed, so a test does the same every time; IDS_TEST_SEED=number in the environment gives
 * another one, IDS_TEST_SCALE=number (default 1) multiplies the number of rounds of tests that
 * ask test_scale(). End main() with `return test_run(suite());`: it prints the seed when a test
 * has failed.
 *
 * Allocation failures. Write a function that makes everything it needs with the given context,
 * frees it again whatever happens, and returns the status of the first call that failed:
 *
 *     static ids_status make_signature(ids_ctx *ctx, void *data)
 *     {
 *         ids_signature *signature = NULL;
 *         ids_status st = ids_signature_create(ctx, data, 1, &signature);
 *
 *         ids_signature_free(signature);
 *         return st;
 *     }
 *
 *     TEST_OOM(make_signature, &operation);
 *
 * TEST_OOM runs it with the k-th allocation refused, k = 0, 1, ..., until none was refused; once
 * with that one refused only, once with all later ones refused too. Each refusal must come back
 * as IDS_ERR_NOMEM with a message and 0 live bytes; the last round must be IDS_OK. Then it
 * runs it under byte budgets below its peak: IDS_ERR_LIMIT, 0 live bytes.
 *
 * A context of its own is made by test_ctx() and freed by test_ctx_free(), which fails the test
 * when something is still alive.
 */
#ifndef IDSPAN_TEST_SUPPORT_H
#define IDSPAN_TEST_SUPPORT_H

#include <check.h>

#include "core/core_private.h"

uint64_t test_seed(void);
uint64_t test_scale(void);
void test_random(idsi_random *random, uint64_t salt);

/* Runs the suite; the value for main() to return. */
int test_run(Suite *suite);

/* An allocator for ids_ctx_options.resize with the struct as resize_user. It checks the old
 * size it is told, so a wrong one ends the test. */
typedef struct test_allocator {
    uint64_t requests;    /* allocations and resizes so far, refused ones included */
    uint64_t refuse_at;   /* number of the request to refuse, from 0; UINT64_MAX: none */
    bool refuse_later;    /* refuse those after it too */
    uint64_t refused;     /* how many were refused */
    uint64_t live_blocks; /* blocks not yet freed */
    uint64_t live_bytes;  /* and their bytes */
} test_allocator;

void test_allocator_init(test_allocator *allocator);
void *test_resize(void *user, void *ptr, size_t old_size, size_t new_size);

/* A context on malloc, without a budget. */
ids_ctx *test_ctx(void);
void test_ctx_free(ids_ctx *ctx);

typedef ids_status (*test_call)(ids_ctx *ctx, void *data);

#define TEST_OOM(call, data) test_oom_loop((call), #call, (data))
void test_oom_loop(test_call call, const char *name, void *data);

/* ck_assert for a status, with the explanation of the context. */
#define TEST_STATUS(ctx, call, expected)                                            \
    do {                                                                            \
        ids_status test_status_got = (call);                                        \
        ck_assert_msg(test_status_got == (expected), "%s is %s, not %s: %s", #call, \
                      ids_status_name(test_status_got), ids_status_name(expected),  \
                      ids_ctx_message(ctx));                                        \
    } while (0)
#define TEST_OK(ctx, call) TEST_STATUS(ctx, call, IDS_OK)

#endif
