/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What every room of the library shares: errors, allocation, growing arrays, text buffers,
 * random numbers. The lowest room: it includes nothing of the others.
 */
#ifndef IDSI_CORE_PRIVATE_H
#define IDSI_CORE_PRIVATE_H

#include <assert.h>
#include <stdarg.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

#include <idspan/core.h>

#ifdef NDEBUG
#define IDSI_ASSERT(condition) ((void)0)
#else
#define IDSI_ASSERT(condition) assert(condition)
#endif

#if defined(__GNUC__) || defined(__clang__)
#define IDSI_PRINTF(fmt, args) __attribute__((format(printf, fmt, args)))
#else
#define IDSI_PRINTF(fmt, args)
#endif

/* The one control macro: a call that fails sends the function to its `done:` label. */
#define IDSI_TRY(call)      \
    do {                    \
        st = (call);        \
        if (st != IDS_OK) { \
            goto done;      \
        }                   \
    } while (0)

/* ---- errors -------------------------------------------------------------------------- */

/* Records status and message (formatted, cut at the buffer) in ctx, which may be NULL; returns
 * status. */
ids_status idsi_fail(ids_ctx *ctx, ids_status status, const char *format, ...) IDSI_PRINTF(3, 4);
/* The same with a place in the input. */
ids_status idsi_fail_at(ids_ctx *ctx, ids_status status, ids_place place, const char *format, ...)
    IDSI_PRINTF(4, 5);
/* IDS_ERR_ARG, "<what> is NULL or out of range". */
ids_status idsi_fail_arg(ids_ctx *ctx, const char *what);
/* (options.c) IDS_ERR_ARG unless the struct_size of the struct `name` is that of this version. */
ids_status idsi_check_struct(ids_ctx *ctx, const char *name, size_t given, size_t size);
/* (options.c) IDS_ERR_ARG unless index < count; `what` names one of those counted. */
ids_status idsi_check_index(ids_ctx *ctx, const char *what, uint64_t index, uint64_t count);

/* ---- memory --------------------------------------------------------------------------- */

/* All memory comes from here; a block knows its size. On failure *out is untouched.
 * Sizes are checked for overflow and against the budget (IDS_ERR_LIMIT says need and budget). */
ids_status idsi_alloc(ids_ctx *ctx, size_t bytes, void **out);              /* not cleared */
ids_status idsi_alloc_zero(ids_ctx *ctx, size_t bytes, void **out);
/* n elements of `size` bytes, cleared. n == 0 gives a valid unique block. */
ids_status idsi_alloc_array(ids_ctx *ctx, size_t n, size_t size, void *out_pointer);
/* Resizes *(void **)pointer to n elements of `size`; new memory is not cleared; NULL is
 * allocated. */
ids_status idsi_resize_array(ids_ctx *ctx, size_t n, size_t size, void *pointer);
/* Makes room for one more element in a growing array: *capacity doubles when *count reaches it. */
ids_status idsi_grow(ids_ctx *ctx, size_t count, size_t *capacity, size_t size, void *pointer);
void idsi_free(ids_ctx *ctx, void *ptr); /* NULL is fine; any thread */
/* IDS_ERR_LIMIT now if `bytes` more would break the budget; `what` names the thing in the
 * message. */
ids_status idsi_budget_check(ids_ctx *ctx, uint64_t bytes, const char *what);
ids_status idsi_strdup(ids_ctx *ctx, const char *text, char **out);

/* ---- hashing ------------------------------------------------------------------------------ */

/* One more number of what is hashed; the low bits are good for a slot. */
static inline uint64_t idsi_hash_add(uint64_t hash, uint64_t number)
{
    hash = (hash ^ number) * UINT64_C(0x9E3779B97F4A7C15); /* 2^64 / golden ratio */
    return hash ^ (hash >> 32);
}

/* ---- progress and cancel ------------------------------------------------------------------ */

/* Cheap enough for inner loops: tests the cancel flag, calls the hook at most ten times a second.
 * progress is NULL where work is not counted. IDS_ERR_CANCELLED or IDS_OK. The flag is then
 * cleared, so of several threads one is told: it must stop the others. */
ids_status idsi_poll(ids_ctx *ctx, const ids_progress *progress);
uint32_t idsi_threads(const ids_ctx *ctx); /* >= 1 */

/* ---- text buffer --------------------------------------------------------------------------- */

typedef struct idsi_text {
    ids_ctx *ctx;
    char *data; /* NUL-terminated when length > 0 or after idsi_text_take() */
    size_t length;
    size_t capacity;
} idsi_text;

void idsi_text_init(idsi_text *text, ids_ctx *ctx);
void idsi_text_clear(idsi_text *text); /* frees */
ids_status idsi_text_append(idsi_text *text, const char *bytes, size_t n);
ids_status idsi_text_puts(idsi_text *text, const char *string);
ids_status idsi_text_printf(idsi_text *text, const char *format, ...) IDSI_PRINTF(2, 3);
/* Hands the string (never NULL) to the caller, who frees it with ids_string_free(). */
ids_status idsi_text_take(idsi_text *text, char **out);

/* ---- random numbers -------------------------------------------------------------------------- */

/* xoshiro256** seeded by splitmix64: small, good, and the same on every machine. */
typedef struct idsi_random {
    uint64_t state[4];
} idsi_random;

void idsi_random_seed(idsi_random *random, uint64_t seed);
uint64_t idsi_random_next(idsi_random *random);
uint64_t idsi_random_below(idsi_random *random, uint64_t bound); /* 0 .. bound-1, unbiased */
/* 0 .. bound-1 in one multiplication; a value's probability is off by at most 2^-64. */
static inline uint32_t idsi_random_residue(idsi_random *random, uint32_t bound)
{
    __extension__ unsigned __int128 product =
        (unsigned __int128)idsi_random_next(random) * bound;
    return (uint32_t)(product >> 64);
}

/* ---- exact arithmetic on 64 bits ----------------------------------------------------------- */

static inline bool idsi_mul_u64(uint64_t a, uint64_t b, uint64_t *out)
{
    return !__builtin_mul_overflow(a, b, out);
}

static inline bool idsi_add_u64(uint64_t a, uint64_t b, uint64_t *out)
{
    return !__builtin_add_overflow(a, b, out);
}

/* Binomial coefficient from a table, n <= 64; 0 where k > n; UINT64_MAX where it passes 64 bits. */
uint64_t idsi_binomial(uint32_t n, uint32_t k);

#endif
