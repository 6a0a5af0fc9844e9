/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Threads that use the same objects at the same time.
 *
 * A use takes a context and objects that were built before, calls the library in every way that
 * the objects allow, and sums up in a number whatever it was told. thread_compare() lets one
 * thread do that, then 8 at once, several times, each with a context of its own and a number of
 * threads of its own for it; all must come to the same number. The thread sanitizer sees what the
 * numbers do not show.
 */
#ifndef IDSPAN_TEST_THREAD_TEAM_H
#define IDSPAN_TEST_THREAD_TEAM_H

#include "support.h"

#define THREADS 8u

typedef uint64_t (*thread_use)(ids_ctx *ctx, const void *world);

void thread_compare(thread_use use, const void *world);

/* Sums: of a number, a text, the status of a call that must be IDS_OK. */
void sum_number(uint64_t *sum, uint64_t number);
void sum_text(uint64_t *sum, const char *text);
void sum_owned(uint64_t *sum, ids_ctx *ctx, char *text);
/* An ids_sink_fn with a sum as user. */
int sum_sink(void *user, const char *bytes, size_t length);

void must(const char *what, ids_status st);
#define MUST(call) must(#call, (call))

#endif
