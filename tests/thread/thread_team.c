/* SPDX-License-Identifier: BSD-2-Clause */
#include "thread_team.h"

#include <pthread.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define ROUNDS 2u

typedef struct member {
    pthread_t thread;
    uint32_t number;
    thread_use use;
    const void *world;
    uint64_t sum[ROUNDS];
} member;

void must(const char *what, ids_status st)
{
    /* Not an assertion: those of Check are for the first thread. */
    if (st != IDS_OK) {
        fprintf(stderr, "%s is %s\n", what, ids_status_name(st));
        abort();
    }
}

void sum_number(uint64_t *sum, uint64_t number)
{
    *sum = (*sum ^ number) * UINT64_C(0x9E3779B97F4A7C15);
    *sum ^= *sum >> 29;
}

int sum_sink(void *user, const char *bytes, size_t length)
{
    /* Pieces may be cut anywhere, so each byte counts for itself. */
    for (size_t i = 0; i < length; i++) {
        sum_number(user, (unsigned char)bytes[i]);
    }
    return 0;
}

void sum_text(uint64_t *sum, const char *text)
{
    sum_sink(sum, text, strlen(text) + 1);
}

void sum_owned(uint64_t *sum, ids_ctx *ctx, char *text)
{
    sum_text(sum, text);
    ids_string_free(ctx, text);
}

static uint64_t use_alone(thread_use use, const void *world, uint32_t threads)
{
    ids_ctx_options options = {.struct_size = sizeof options, .threads = threads};
    ids_ctx *ctx = NULL;
    uint64_t sum = 0;

    MUST(ids_ctx_create(&options, &ctx));
    sum = use(ctx, world);
    if (ids_ctx_memory(ctx).live != 0) {
        fprintf(stderr, "memory is left\n");
        abort();
    }
    ids_ctx_free(ctx);
    return sum;
}

static void *run_member(void *user)
{
    member *m = user;

    for (uint32_t round = 0; round < ROUNDS; round++) {
        m->sum[round] = use_alone(m->use, m->world, 1 + (m->number + round) % 3);
    }
    return NULL;
}

void thread_compare(thread_use use, const void *world)
{
    member members[THREADS] = {{0}};
    uint64_t expected = use_alone(use, world, 1);

    for (uint32_t i = 0; i < THREADS; i++) {
        members[i].number = i;
        members[i].use = use;
        members[i].world = world;
        ck_assert_int_eq(pthread_create(&members[i].thread, NULL, run_member, &members[i]), 0);
    }
    for (uint32_t i = 0; i < THREADS; i++) {
        ck_assert_int_eq(pthread_join(members[i].thread, NULL), 0);
    }
    for (uint32_t i = 0; i < THREADS; i++) {
        for (uint32_t round = 0; round < ROUNDS; round++) {
            ck_assert_msg(members[i].sum[round] == expected, "thread %u comes to another sum", i);
        }
    }
}
