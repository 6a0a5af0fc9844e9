/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The context: options, the last error, progress and cancel.
 *
 * Invariants: `message` is NUL-terminated UTF-8 and belongs to `last_status`; `threads` >= 1;
 * the context's own block is not in its byte counters, so that 0 live bytes means that every
 * object made with it is gone.
 */
#include "context_layout.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#define HOOK_INTERVAL_NS UINT64_C(100000000)

/* ids_ctx_cancel() is promised to signal handlers. */
static_assert(ATOMIC_INT_LOCK_FREE == 2, "the cancel flag must be lock-free");

static void *resize_by_malloc(void *user, void *ptr, size_t old_size, size_t new_size)
{
    (void)user;
    (void)old_size;
    if (new_size == 0) {
        free(ptr);
        return NULL;
    }
    return realloc(ptr, new_size);
}

ids_status ids_ctx_create(const ids_ctx_options *options, ids_ctx **ctx)
{
    ids_ctx_options chosen = {0};
    ids_ctx *made = NULL;

    if (ctx == NULL || (options != NULL && options->struct_size != sizeof chosen)) {
        return IDS_ERR_ARG;
    }
    if (options != NULL) {
        chosen = *options;
    }
    if (chosen.resize == NULL) {
        chosen.resize = resize_by_malloc;
    }
    made = chosen.resize(chosen.resize_user, NULL, 0, sizeof *made);
    if (made == NULL) {
        return IDS_ERR_NOMEM;
    }
    memset(made, 0, sizeof *made);
    made->resize = chosen.resize;
    made->resize_user = chosen.resize_user;
    made->budget = chosen.byte_budget;
    made->progress = chosen.progress;
    made->progress_user = chosen.progress_user;
    atomic_init(&made->live, 0);
    atomic_init(&made->peak, 0);
    atomic_init(&made->cancel, 0);
    atomic_init(&made->hook_due, 0);
    atomic_init(&made->threads, chosen.threads == 0 ? 1 : chosen.threads);
    atomic_flag_clear(&made->hook_is_busy);
    atomic_flag_clear(&made->error_is_busy);
    *ctx = made;
    return IDS_OK;
}

void ids_ctx_free(ids_ctx *ctx)
{
    if (ctx != NULL) {
        IDSI_ASSERT(atomic_load(&ctx->live) == 0);
        (void)ctx->resize(ctx->resize_user, ctx, sizeof *ctx, 0);
    }
}

void ids_ctx_cancel(ids_ctx *ctx)
{
    if (ctx != NULL) {
        atomic_store(&ctx->cancel, 1);
    }
}

void ids_ctx_cancel_clear(ids_ctx *ctx)
{
    if (ctx != NULL) {
        atomic_store(&ctx->cancel, 0);
    }
}

const char *ids_ctx_message(const ids_ctx *ctx)
{
    return ctx == NULL ? "" : ctx->message;
}

ids_status ids_ctx_last_status(const ids_ctx *ctx)
{
    return ctx == NULL ? IDS_ERR_ARG : ctx->last_status;
}

ids_place ids_ctx_last_place(const ids_ctx *ctx)
{
    ids_place nowhere = {0, 0};

    return ctx == NULL ? nowhere : ctx->last_place;
}

void ids_ctx_set_threads(ids_ctx *ctx, uint32_t threads)
{
    if (ctx != NULL) {
        atomic_store(&ctx->threads, threads == 0 ? 1 : threads);
    }
}

uint32_t idsi_threads(const ids_ctx *ctx)
{
    return ctx == NULL ? 1 : atomic_load(&ctx->threads);
}

/* ---- the last error ---------------------------------------------------------------------- */

/* Ends a message that did not fit: "..." after the last whole character. */
static void mark_cut(char *message)
{
    size_t end = IDSI_MESSAGE_SIZE - 4;

    while (end > 0 && ((unsigned char)message[end] & 0xC0u) == 0x80u) {
        end--;
    }
    memcpy(message + end, "...", 4);
}

/* The text is made apart from the context, because an argument can be the old message. */
static ids_status record(ids_ctx *ctx, ids_status status, ids_place place, const char *format,
                         va_list arguments)
{
    char message[IDSI_MESSAGE_SIZE] = "";
    int length = 0;

    if (ctx == NULL) {
        return status;
    }
    length = vsnprintf(message, sizeof message, format, arguments);
    if (length < 0) {
        message[0] = '\0';
    } else if ((size_t)length >= sizeof message) {
        mark_cut(message);
    }
    while (atomic_flag_test_and_set(&ctx->error_is_busy)) {
        /* another thread of the same call copies its message: a few hundred cycles */
    }
    ctx->last_status = status;
    ctx->last_place = place;
    memcpy(ctx->message, message, strlen(message) + 1);
    atomic_flag_clear(&ctx->error_is_busy);
    return status;
}

ids_status idsi_fail(ids_ctx *ctx, ids_status status, const char *format, ...)
{
    ids_place nowhere = {0, 0};
    va_list arguments;

    va_start(arguments, format);
    (void)record(ctx, status, nowhere, format, arguments);
    va_end(arguments);
    return status;
}

ids_status idsi_fail_at(ids_ctx *ctx, ids_status status, ids_place place, const char *format, ...)
{
    va_list arguments;

    va_start(arguments, format);
    (void)record(ctx, status, place, format, arguments);
    va_end(arguments);
    return status;
}

ids_status idsi_fail_arg(ids_ctx *ctx, const char *what)
{
    return idsi_fail(ctx, IDS_ERR_ARG, "%s is NULL or out of range", what);
}

/* ---- progress and cancel ----------------------------------------------------------------- */

/* Nanoseconds of a clock that never runs backwards; 0 when the system has none. */
static uint64_t monotonic_ns(void)
{
    struct timespec now = {0};

    if (clock_gettime(CLOCK_MONOTONIC, &now) != 0) {
        return 0;
    }
    return (uint64_t)now.tv_sec * UINT64_C(1000000000) + (uint64_t)now.tv_nsec;
}

/*
 * Calls the hook when it is due; true when the hook wants to cancel. Work that does not count
 * itself (NULL) waits twice as long, so that it does not take the turn of work that does.
 */
static bool hook_cancels(ids_ctx *ctx, const ids_progress *progress)
{
    static const ids_progress uncounted = {.stage = ""};
    uint64_t now = monotonic_ns();
    uint64_t late = progress == NULL ? HOOK_INTERVAL_NS : 0;
    bool cancels = false;

    if (now < atomic_load_explicit(&ctx->hook_due, memory_order_relaxed) + late ||
        atomic_flag_test_and_set(&ctx->hook_is_busy)) {
        return false;
    }
    progress = progress == NULL ? &uncounted : progress;
    /* Two threads can pass the test above one after the other. */
    if (now >= atomic_load(&ctx->hook_due) + late) {
        cancels = ctx->progress(ctx->progress_user, progress) != 0;
        atomic_store(&ctx->hook_due, now + HOOK_INTERVAL_NS);
    }
    atomic_flag_clear(&ctx->hook_is_busy);
    return cancels;
}

ids_status idsi_poll(ids_ctx *ctx, const ids_progress *progress)
{
    if (ctx == NULL) {
        return IDS_OK;
    }
    /* The load is for speed; who takes the flag away, in one step, is the one to answer it. */
    if (atomic_load_explicit(&ctx->cancel, memory_order_relaxed) != 0 &&
        atomic_exchange(&ctx->cancel, 0) != 0) {
        return idsi_fail(ctx, IDS_ERR_CANCELLED, "cancelled by the caller");
    }
    if (ctx->progress != NULL && hook_cancels(ctx, progress)) {
        return idsi_fail(ctx, IDS_ERR_CANCELLED, "cancelled by the progress hook");
    }
    return IDS_OK;
}
