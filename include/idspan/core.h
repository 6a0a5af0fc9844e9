/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file core.h
 * Status codes and the context: allocator, byte budget, progress, cancel, last error.
 *
 * Every call that can fail returns an ids_status, and those that allocate or run long take
 * an ids_ctx first. The library never aborts, exits, prints, or keeps process-wide state.
 */
#ifndef IDSPAN_CORE_H
#define IDSPAN_CORE_H

#include <stddef.h>
#include <stdint.h>

#include <idspan/export.h>
#include <idspan/version.h>

#ifdef __cplusplus
extern "C" {
#endif

#if defined(__GNUC__) || defined(__clang__)
#define IDS_MUST_USE __attribute__((warn_unused_result))
#else
#define IDS_MUST_USE
#endif

/**
 * Version of the library that runs, such as "1.2.3".
 *
 * IDS_VERSION_STRING is that of the headers a program was compiled with; the two differ when
 * another shared library was installed since.
 *
 * @return a static string, never NULL.
 * Cost: constant. Threads: any. Since: 0.1
 */
IDS_API const char *ids_version(void);

/**
 * The list of status codes: name, value, one-line text. Values are frozen.
 */
#define IDS_STATUS_LIST(X)                                                            \
    X(IDS_OK, 0, "done")                                                              \
    X(IDS_ERR_NOMEM, 1, "the allocator refused memory")                               \
    X(IDS_ERR_LIMIT, 2, "a size limit, 64 bits, or the byte budget would be exceeded") \
    X(IDS_ERR_ARG, 3, "an argument is not acceptable")                                \
    X(IDS_ERR_PARSE, 4, "the text is not well formed")                                \
    X(IDS_ERR_DOMAIN, 5, "the result is not defined for this input")                  \
    X(IDS_ERR_UNABLE, 6, "the method does not cover this input")                      \
    X(IDS_ERR_NOT_CANONICAL, 7, "well formed, but not the chosen one of its class")   \
    X(IDS_ERR_CANCELLED, 8, "cancelled by the caller")                                \
    X(IDS_ERR_IO, 9, "reading or writing failed")                                     \
    X(IDS_ERR_INTERNAL, 10, "internal error: please report it")

/** What a call came to. */
typedef enum ids_status {
#define IDS_STATUS_ENUM(name, value, text) name = value,
    IDS_STATUS_LIST(IDS_STATUS_ENUM)
#undef IDS_STATUS_ENUM
} ids_status;

/**
 * Name of a status code, such as "IDS_ERR_PARSE".
 *
 * @param status  any value; an unknown one gives "IDS_ERR_UNKNOWN".
 * @return a static string, never NULL.
 * Cost: constant. Threads: any. Since: 0.1
 */
IDS_API const char *ids_status_name(ids_status status);

/**
 * One-line English text of a status code.
 *
 * @param status  any value; an unknown one gives a text that says so.
 * @return a static string, never NULL.
 * Cost: constant. Threads: any. Since: 0.1
 */
IDS_API const char *ids_status_text(ids_status status);

/**
 * The context: one thread at a time may pass it to calls; see ids_ctx_create().
 *
 * Objects keep the context that they were made with. Immutable ones use it only to be freed. Those
 * that change (ids_iter, ids_writer, ids_report, ids_run) serve one thread; writers, reports and
 * runs also allocate and record failures with it, so they are used by the thread that has it at the
 * time. Every call that frees an object may come from any thread, whatever the context does
 * meanwhile, when nobody uses the object any more.
 *
 * Structs that a caller fills in for the library begin with struct_size, which must be exactly the
 * sizeof of the struct, so that the library knows what the program was compiled with. Such a struct
 * may grow at its end in a later version. That version then also accepts the sizes that the struct
 * had before, with 0 for what is new, so programs need not be compiled again. A size that no
 * version had is IDS_ERR_ARG.
 */
typedef struct ids_ctx ids_ctx;

/**
 * The one allocator function of a context.
 *
 * `ptr == NULL` allocates `new_size` bytes; `new_size == 0` frees; otherwise resizes.
 * Memory is aligned as malloc's. Returns NULL when it refuses; the old block is then intact.
 *
 * It is called from the threads that make calls with the context or free its objects and, with
 * more than one thread allowed, from those that the library starts; from several at once. So it
 * must be thread-safe then, as malloc is. With one thread allowed and everything on one thread it
 * need not be. It must not call the library with this context.
 */
typedef void *(*ids_resize_fn)(void *user, void *ptr, size_t old_size, size_t new_size);

/** What a progress hook is told. */
typedef struct ids_progress {
    const char *stage; /**< what is being done, borrowed until the hook returns */
    uint32_t degree;   /**< degree that is being worked on, 0 when there is none */
    uint64_t done;     /**< units of work done in this stage */
    uint64_t total;    /**< units of work in this stage; 0 when unknown */
    double share;      /**< share of the estimated cost of the whole call, 0 .. 1 */
} ids_progress;

/**
 * Progress hook, called about ten times a second; non-zero cancels the call.
 *
 * With one thread allowed it runs on the thread that made the call, else perhaps on one that the
 * library started for it; never twice at once for one context. Work that is not counted calls it
 * too, less often, with an empty stage and all else 0: a hook that shows progress passes over these
 * calls, one that cancels answers them as well. It must not call the library with
 * this context, but for ids_ctx_cancel() and ids_ctx_memory().
 */
typedef int (*ids_progress_fn)(void *user, const ids_progress *progress);

/** Most threads that a call ever uses, the calling one among them. */
#define IDS_MAX_THREADS 1024u

/** Options of ids_ctx_create(); set struct_size to sizeof(ids_ctx_options), the rest to 0. */
typedef struct ids_ctx_options {
    size_t struct_size;           /**< sizeof(ids_ctx_options) */
    ids_resize_fn resize;         /**< NULL: malloc, realloc, free */
    void *resize_user;            /**< passed to resize; kept */
    uint64_t byte_budget;         /**< most bytes that may be live at once, see ids_memory;
                                       0: no limit */
    ids_progress_fn progress;     /**< NULL: none */
    void *progress_user;          /**< passed to progress; kept */
    uint32_t threads;             /**< most threads a call may use; 0 counts as 1, more than
                                       IDS_MAX_THREADS as so many */
} ids_ctx_options;

/**
 * Makes a context.
 *
 * @param options  borrowed; NULL for the defaults (malloc, no budget, no progress, one thread).
 * @param ctx      out, owned: free with ids_ctx_free() after every object made with it; written
 *                 only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    `ctx` is NULL, struct_size is unknown
 *         IDS_ERR_NOMEM  the allocator refused
 * Cost: one allocation. Threads: any; one context serves one thread at a time. Cancel: not polled.
 * Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_ctx_create(const ids_ctx_options *options, ids_ctx **ctx);

/**
 * Frees a context. Objects made with it must have been freed before.
 *
 * @param ctx  owned; NULL is fine.
 * Cost: the memory goes back to the allocator.
 * Threads: one, after all calls with `ctx` have returned. Since: 0.1
 */
IDS_API void ids_ctx_free(ids_ctx *ctx);

/**
 * Asks the call that runs with this context to stop with IDS_ERR_CANCELLED.
 *
 * Sets an atomic flag and nothing else. The flag is cleared when a call has answered it. When it
 * comes too late for one call it stops the next: ids_ctx_cancel_clear() withdraws it.
 *
 * @param ctx  borrowed; NULL is fine.
 * Cost: one atomic store, no allocation. Threads: any, and signal handlers. Since: 0.1
 */
IDS_API void ids_ctx_cancel(ids_ctx *ctx);

/**
 * Withdraws ids_ctx_cancel() where no call has answered it yet.
 *
 * To be called between two calls when the request was meant for the first one, and nobody makes
 * requests any more.
 *
 * @param ctx  borrowed; NULL is fine.
 * Cost: one atomic store, no allocation. Threads: any, and signal handlers. Since: 0.1
 */
IDS_API void ids_ctx_cancel_clear(ids_ctx *ctx);

/**
 * Explanation of the last failure in this context, "" when there was none.
 *
 * Success does not clear it: look at it only after a call with `ctx`, or with a writer, report or
 * run that keeps it, has failed. Calls that take neither leave it alone, so what they refuse has no
 * message.
 *
 * @param ctx  borrowed; NULL gives "".
 * @return a string that lives until the next call with ctx. UTF-8, without a final newline; it can
 *         have several lines (a parse error shows the source line with a caret).
 * Cost: constant, no allocation. Threads: the one that uses `ctx`. Since: 0.1
 */
IDS_API const char *ids_ctx_message(const ids_ctx *ctx);

/**
 * Status of the last failure in this context, IDS_OK when there was none; as long as the message
 * of ids_ctx_message().
 *
 * @param ctx  borrowed; NULL gives IDS_ERR_ARG.
 * @return that status.
 * Cost: constant, no allocation. Threads: the one that uses `ctx`. Since: 0.1
 */
IDS_API ids_status ids_ctx_last_status(const ids_ctx *ctx);

/**
 * Where in an input the last failure stands. IDS_ERR_PARSE always has a place, IDS_ERR_DOMAIN and
 * IDS_ERR_LIMIT often have one where text is read.
 */
typedef struct ids_place {
    uint32_t line;   /**< from 1; 0: no place is known */
    uint32_t column; /**< from 1, in characters (not bytes) */
} ids_place;

/**
 * Place in the input of the last failure, {0, 0} when it has none.
 *
 * @param ctx  borrowed; NULL gives {0, 0}.
 * @return line and column, both 0 when there is none.
 * Cost: constant, no allocation. Threads: the one that uses `ctx`. Since: 0.1
 */
IDS_API ids_place ids_ctx_last_place(const ids_ctx *ctx);

/**
 * Memory that a context accounts for: all blocks that its allocator gave, with the few bytes that
 * the library keeps in front of each. The context's own block is not counted, nor is what GMP and
 * FLINT allocate, nor the stacks of threads. Where a call can foresee GMP's memory it counts it in
 * before it begins (gmp.h).
 */
typedef struct ids_memory {
    uint64_t live;   /**< bytes allocated now */
    uint64_t peak;   /**< most bytes that were live at once */
    uint64_t budget; /**< the byte budget, 0: none */
} ids_memory;

/**
 * Memory in use through this context. Memory inside GMP and FLINT is not in it.
 *
 * @param ctx  borrowed; NULL gives zeros.
 * @return bytes live and at most live, and the budget.
 * Cost: constant, no allocation. Threads: any. Since: 0.1
 */
IDS_API ids_memory ids_ctx_memory(const ids_ctx *ctx);

/**
 * Sets the most threads that later calls may use: a limit, not a number. A call uses no more than
 * it has work for, and fewer when the system refuses threads. Results do not depend on it.
 *
 * @param ctx      borrowed; NULL is fine.
 * @param threads  with the calling one; 0 counts as 1, more than IDS_MAX_THREADS as so many.
 * Cost: constant, no allocation. Threads: the one that uses `ctx`. Since: 0.1
 */
IDS_API void ids_ctx_set_threads(ids_ctx *ctx, uint32_t threads);

/** Receives output; returns 0, or non-zero to stop with IDS_ERR_IO. `bytes` is borrowed. */
typedef int (*ids_sink_fn)(void *user, const char *bytes, size_t length);

/**
 * Frees a string that the library handed out as owned.
 *
 * @param ctx     borrowed: the context that made the string; NULL only with a NULL string.
 * @param string  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: the one that uses `ctx`. Since: 0.1
 */
IDS_API void ids_string_free(ids_ctx *ctx, char *string);

#ifdef __cplusplus
}
#endif

#endif
