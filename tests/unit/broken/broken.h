/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Broken presentations and algebra files: each one with the status, the place and a part of the
 * message that the reader must answer. The places were counted by hand in the texts, in characters.
 */
#ifndef IDSPAN_TEST_BROKEN_H
#define IDSPAN_TEST_BROKEN_H

#include <idspan/core.h>

typedef struct broken {
    const char *text;
    size_t length; /* 0: up to the NUL */
    ids_status status;
    uint32_t line;
    uint32_t column;
    const char *part;
} broken;

extern const broken broken_table[];
extern const size_t broken_count;
extern const broken broken_algebras[];
extern const size_t broken_algebra_count;

#endif
