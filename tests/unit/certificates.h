/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Theorems and refutations for the tests of follows.h, and files made from them.
 */
#ifndef IDSPAN_TEST_CERTIFICATES_H
#define IDSPAN_TEST_CERTIFICATES_H

#include <idspan/follows.h>

#include "support.h"

typedef struct theorem {
    const char *name;
    const char *text; /* presentation; its first candidate is the claim */
    bool follows;
} theorem;

extern const theorem theorem_list[];
extern const size_t theorem_count;

/*
 * Glennie's identity of degree 8, which special Jordan algebras satisfy and the free one does not:
 * the difference is one module of partition 3+3+2 (C. M. Glennie, Pacific J. Math. 16 (1966); in
 * the form of K. McCrimmon, A Taste of Jordan Algebras (2004), from memory). Not in the list:
 * it is large.
 */
extern const theorem theorem_glennie;

/* Text that a sink has received. */
typedef struct received {
    idsi_text text;
} received;

int receive(void *user, const char *bytes, size_t length);

/* Writes the derivation or witness of a theorem into `file`, which the caller clears. */
ids_status certificate_make(ids_ctx *ctx, const theorem *about, idsi_text *file);
/* Writes a counterexample to a theorem that does not hold, found within few steps. */
ids_status certificate_algebra(ids_ctx *ctx, const theorem *about, idsi_text *file);
/* Puts the right mark at the end of a file that was changed. */
void certificate_mark(idsi_text *file);
/* `rounds` random damages to each theorem's file: every one must be refused. */
void certificate_damage(uint64_t salt, uint64_t rounds);

#endif
