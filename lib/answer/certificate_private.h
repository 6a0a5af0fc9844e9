/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The files that derivations and witnesses are written to. All that the writer and the checker
 * agree on is here; the checker knows nothing else of the solvers.
 *
 *     idspan proof 1                       or: idspan witness 1
 *     begin presentation
 *     ...                                  the identities, and one candidate: the claim
 *     end presentation
 *     claim NAME                           nothing behind `claim` when it has no name
 *     degree N
 *     terms K                              or: values K
 *     COEFFICIENT : LAW : M1, ..., Md : CONTEXT       K lines, or
 *     VALUE : MONOMIAL                                K lines, by increasing monomials
 *     end MARK
 *
 * LAW is the name of an identity, or # and its number from 1. M1, ..., Md stand for the variables
 * a, b, c, ... of its complete linearisation. The letters of monomials are the variables of the
 * candidate as written; in a context one leaf is the hole. MARK is a hash of all bytes before its
 * line, in 16 hexadecimal digits; it finds damage that the mathematics cannot see, such as
 * another name or a changed identity that is not used.
 *
 * A counterexample is an algebra file. What it shows stands in comments before and after the table:
 *
 *     # idspan counterexample 1
 *     # begin presentation
 *     # ...
 *     # end presentation
 *     # claim NAME
 *     # degree N
 *     # fails at x = SUM, y = SUM        the candidate's variables, by name; sums of basis elements
 *     ...                                lines of an algebra file without comments
 *     # end MARK
 */
#ifndef IDSI_CERTIFICATE_PRIVATE_H
#define IDSI_CERTIFICATE_PRIVATE_H

#include <idspan/follows.h>

#include "../identity/identity_private.h"

#define IDSI_PROOF_HEADER "idspan proof 1"
#define IDSI_WITNESS_HEADER "idspan witness 1"
#define IDSI_COUNTEREXAMPLE_HEADER "# idspan counterexample 1"
#define IDSI_COMMENT "# "
#define IDSI_FAILS_AT "fails at "
#define IDSI_BEGIN_PRESENTATION "begin presentation"
#define IDSI_END_PRESENTATION "end presentation"
#define IDSI_HOLE_CHARS 24u

/* Fowler, Noll and Vo's 64-bit hash (FNV-1a). */
static inline uint64_t idsi_certificate_mark(const char *text, size_t length)
{
    uint64_t hash = UINT64_C(0xCBF29CE484222325);
    for (size_t i = 0; i < length; i++) {
        hash = (hash ^ (uint8_t)text[i]) * UINT64_C(0x100000001B3);
    }
    return hash;
}

/*
 * Names of labels: the candidate's letters, then the hole, `_` or more of them where `_` means
 * something else. `names` has room for IDSI_MAX_IDENTITY_DEGREE + 1.
 */
void idsi_certificate_names(const ids_signature *sig, const idsi_identity *claim,
                            char hole[IDSI_HOLE_CHARS], const char **names);

/* (check_line.c) The text that is checked, line by line. */
typedef struct idsi_cursor {
    ids_ctx *ctx;
    const char *source;
    const char *text;
    const char *end;
    const char *line; /* the line at hand, without its end */
    const char *line_end;
    const char *at; /* what is read next in it */
    uint32_t number;
} idsi_cursor;

/* A failure at the cursor, with source, line and column. */
ids_status idsi_cursor_fail(const idsi_cursor *cursor, ids_status status, const char *format, ...)
    IDSI_PRINTF(3, 4);
/* Before the first line: makes line feeds of carriage return and line feed, in a copy that the
 * caller frees; NULL when there are none. */
ids_status idsi_cursor_unify(idsi_cursor *cursor, char **copy);
ids_status idsi_cursor_next(idsi_cursor *cursor);
/* Steps over a text; fails when something else is there. */
ids_status idsi_cursor_expect(idsi_cursor *cursor, const char *text);
ids_status idsi_cursor_expect_end(const idsi_cursor *cursor);
/* A number without leading zeros, at most `most`. */
ids_status idsi_cursor_count(idsi_cursor *cursor, uint64_t most, uint64_t *number);
/* An integer or, with `fraction`, a fraction in lowest terms; not 0. */
ids_status idsi_cursor_rational(idsi_cursor *cursor, bool fraction, mpq_ptr number);

/* How monomials are read: names[i] is label i + 1. */
typedef struct idsi_spelling {
    const ids_signature *sig;
    const char **names;
    uint32_t count;
} idsi_spelling;

/* (check_tree.c) A monomial of degree at most IDSI_MAX_IDENTITY_DEGREE. */
ids_status idsi_cursor_tree(idsi_cursor *cursor, const idsi_spelling *spelling, idsi_token *tree,
                            size_t *length);

/* What is checked. */
typedef struct idsi_certificate {
    ids_ctx *ctx;
    ids_presentation *pres;
    const idsi_identity *claim;
    uint64_t count; /* terms or values */
    uint32_t degree;
    idsi_spelling spelling;
    const char *names[IDSI_MAX_IDENTITY_DEGREE + 1];
    char hole[IDSI_HOLE_CHARS];
} idsi_certificate;

/* Puts `inside[label - 1]` for the labels of a tree, but copies those that have none (NULL).
 * Returns the tokens written. */
size_t idsi_check_substitute(const idsi_token *tree, size_t length, const idsi_token *const *inside,
                             const size_t *inside_length, size_t insides, idsi_token *out);

/* (check_witness.c) Evaluates values, sorted by monomial, on all consequences and the claim. */
typedef struct idsi_value_list {
    size_t count;
    idsi_token (*tree)[2u * IDSI_MAX_IDENTITY_DEGREE];
    mpz_t *value;
} idsi_value_list;

ids_status idsi_check_witness(const idsi_certificate *certificate, const idsi_value_list *values,
                              uint64_t *consequences);

/* (check_algebra.c) Reads what follows the claim's degree in a counterexample, and the table, and
 * multiplies everything out. */
ids_status idsi_check_algebra(idsi_cursor *cursor, const idsi_certificate *certificate,
                              ids_check_report *report);

#endif
