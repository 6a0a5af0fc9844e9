/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * All memory of the library. Each block carries a head, so that freeing it needs neither its
 * size nor the right context:
 *
 *     | owner, total | bytes handed out ... |
 *     ^ from resize  ^ aligned as malloc's
 *
 * Invariant: `live` of a context is the sum of `total` over its blocks, heads included. Bytes are
 * charged before the allocator is asked and given back when it refuses, so that `live` never
 * passes the budget, whatever the number of threads.
 */
#include "context_layout.h"

#include <inttypes.h>
#include <stdalign.h>
#include <string.h>

typedef struct block {
    alignas(max_align_t) ids_ctx *owner;
    size_t total; /* with this head */
} block;

static void *bytes_of(block *head)
{
    return head + 1;
}

static block *head_of(void *bytes)
{
    return (block *)bytes - 1;
}

/* ---- accounting -------------------------------------------------------------------------- */

static bool charge(ids_ctx *ctx, uint64_t bytes)
{
    uint64_t live = atomic_load(&ctx->live);
    uint64_t peak = 0;

    do {
        if (ctx->budget != 0 && (live > ctx->budget || bytes > ctx->budget - live)) {
            return false;
        }
    } while (!atomic_compare_exchange_weak(&ctx->live, &live, live + bytes));
    live += bytes;
    peak = atomic_load(&ctx->peak);
    while (peak < live && !atomic_compare_exchange_weak(&ctx->peak, &peak, live)) {
        /* peak was read again */
    }
    return true;
}

static void give_back(ids_ctx *ctx, uint64_t bytes)
{
    atomic_fetch_sub(&ctx->live, bytes);
}

static ids_status fail_budget(ids_ctx *ctx, uint64_t bytes, const char *what)
{
    return idsi_fail(ctx, IDS_ERR_LIMIT,
                     "%s would take %" PRIu64 " bytes; %" PRIu64
                     " are in use and the budget is %" PRIu64,
                     what, bytes, atomic_load(&ctx->live), ctx->budget);
}

static ids_status fail_refused(ids_ctx *ctx, uint64_t bytes)
{
    return idsi_fail(ctx, IDS_ERR_NOMEM,
                     "the allocator refused %" PRIu64 " bytes; %" PRIu64 " are in use", bytes,
                     atomic_load(&ctx->live));
}

ids_memory ids_ctx_memory(const ids_ctx *ctx)
{
    ids_memory memory = {0};

    if (ctx != NULL) {
        memory.live = atomic_load(&ctx->live);
        memory.peak = atomic_load(&ctx->peak);
        memory.budget = ctx->budget;
    }
    return memory;
}

ids_status idsi_budget_check(ids_ctx *ctx, uint64_t bytes, const char *what)
{
    uint64_t live = 0;

    if (ctx == NULL || ctx->budget == 0) {
        return IDS_OK;
    }
    live = atomic_load(&ctx->live);
    if (live > ctx->budget || bytes > ctx->budget - live) {
        return fail_budget(ctx, bytes, what);
    }
    return IDS_OK;
}

/* ---- blocks ------------------------------------------------------------------------------ */

/* Makes (old == NULL) or resizes a block that has room for `bytes` after its head. */
static ids_status resize_block(ids_ctx *ctx, block *old, size_t bytes, block **out)
{
    size_t old_total = old == NULL ? 0 : old->total;
    size_t total = 0;
    uint64_t more = 0;
    block *head = NULL;

    if (ctx == NULL) {
        return IDS_ERR_ARG;
    }
    if (bytes > SIZE_MAX - sizeof *head) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "a block of %zu bytes cannot be addressed", bytes);
    }
    total = bytes + sizeof *head;
    more = total > old_total ? total - old_total : 0;
    if (!charge(ctx, more)) {
        return fail_budget(ctx, more, "a block of memory");
    }
    head = ctx->resize(ctx->resize_user, old, old_total, total);
    if (head == NULL) {
        give_back(ctx, more);
        return fail_refused(ctx, total);
    }
    if (total < old_total) {
        give_back(ctx, old_total - total);
    }
    head->owner = ctx;
    head->total = total;
    *out = head;
    return IDS_OK;
}

ids_status idsi_alloc(ids_ctx *ctx, size_t bytes, void **out)
{
    block *head = NULL;
    ids_status st = resize_block(ctx, NULL, bytes, &head);

    if (st == IDS_OK) {
        *out = bytes_of(head);
    }
    return st;
}

ids_status idsi_alloc_zero(ids_ctx *ctx, size_t bytes, void **out)
{
    void *made = NULL;
    ids_status st = idsi_alloc(ctx, bytes, &made);

    if (st == IDS_OK) {
        memset(made, 0, bytes);
        *out = made;
    }
    return st;
}

void idsi_free(ids_ctx *ctx, void *ptr)
{
    block *head = NULL;
    ids_ctx *owner = NULL;

    if (ptr == NULL) {
        return;
    }
    head = head_of(ptr);
    owner = head->owner;
    IDSI_ASSERT(ctx == NULL || ctx == owner);
    (void)ctx;
    give_back(owner, head->total);
    (void)owner->resize(owner->resize_user, head, head->total, 0);
}

void ids_string_free(ids_ctx *ctx, char *string)
{
    idsi_free(ctx, string);
}

/* ---- arrays ------------------------------------------------------------------------------ */

static ids_status array_bytes(ids_ctx *ctx, size_t n, size_t size, size_t *bytes)
{
    if (__builtin_mul_overflow(n, size, bytes)) {
        return idsi_fail(ctx, IDS_ERR_LIMIT,
                         "an array of %zu elements of %zu bytes cannot be addressed", n, size);
    }
    return IDS_OK;
}

/* The address of a typed pointer comes as `void *`: memcpy reads and writes the pointer without
 * breaking the aliasing rules. */

ids_status idsi_alloc_array(ids_ctx *ctx, size_t n, size_t size, void *out_pointer)
{
    size_t bytes = 0;
    void *made = NULL;
    ids_status st = array_bytes(ctx, n, size, &bytes);

    if (st == IDS_OK) {
        st = idsi_alloc_zero(ctx, bytes, &made);
    }
    if (st == IDS_OK) {
        memcpy(out_pointer, &made, sizeof made);
    }
    return st;
}

ids_status idsi_resize_array(ids_ctx *ctx, size_t n, size_t size, void *pointer)
{
    size_t bytes = 0;
    void *old = NULL;
    block *head = NULL;
    ids_status st = array_bytes(ctx, n, size, &bytes);

    memcpy(&old, pointer, sizeof old);
    if (st == IDS_OK) {
        st = resize_block(ctx, old == NULL ? NULL : head_of(old), bytes, &head);
    }
    if (st == IDS_OK) {
        old = bytes_of(head);
        memcpy(pointer, &old, sizeof old);
    }
    return st;
}

ids_status idsi_grow(ids_ctx *ctx, size_t count, size_t *capacity, size_t size, void *pointer)
{
    size_t wanted = 8;
    ids_status st = IDS_OK;

    if (count < *capacity) {
        return IDS_OK;
    }
    if (*capacity > 0 && __builtin_mul_overflow(*capacity, (size_t)2, &wanted)) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "an array of %zu elements cannot grow", *capacity);
    }
    st = idsi_resize_array(ctx, wanted, size, pointer);
    if (st == IDS_OK) {
        *capacity = wanted;
    }
    return st;
}

ids_status idsi_strdup(ids_ctx *ctx, const char *text, char **out)
{
    size_t bytes = strlen(text) + 1;
    void *made = NULL;
    ids_status st = idsi_alloc(ctx, bytes, &made);

    if (st == IDS_OK) {
        memcpy(made, text, bytes);
        *out = made;
    }
    return st;
}
