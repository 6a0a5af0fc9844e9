/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The members of a context. Only context.c and memory.c look inside; every other file goes
 * through core_private.h.
 *
 * A call may use several threads, and all of them see the context of the call. What they can
 * touch at the same time is atomic (byte counters, cancel flag, time of the next hook) or taken
 * under a flag (last error, the hook itself). Everything else changes only between calls.
 */
#ifndef IDSI_CONTEXT_LAYOUT_H
#define IDSI_CONTEXT_LAYOUT_H

#include <stdatomic.h>

#include "core_private.h"

/* Room for a message with its final NUL. */
#define IDSI_MESSAGE_SIZE 4096u

struct ids_ctx {
    ids_resize_fn resize;
    void *resize_user;
    uint64_t budget; /* 0: none */
    _Atomic uint64_t live;
    _Atomic uint64_t peak;

    ids_progress_fn progress;
    void *progress_user;
    atomic_int cancel;         /* set by ids_ctx_cancel(), answered by idsi_poll() */
    _Atomic uint64_t hook_due; /* monotonic nanoseconds: no hook before this */
    atomic_flag hook_is_busy;  /* the hook runs in one thread at a time */
    _Atomic uint32_t threads;

    atomic_flag error_is_busy; /* guards the three below while a call runs */
    ids_status last_status;
    ids_place last_place;
    char message[IDSI_MESSAGE_SIZE];
};

#endif
