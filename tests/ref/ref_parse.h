/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The reader of the reference program: what its two halves share.
 */
#ifndef IDSPAN_TESTS_REF_PARSE_H
#define IDSPAN_TESTS_REF_PARSE_H

#include "ref.h"

#define REF_NAME 32

/* Reading one statement, whose lines have been joined. */
typedef struct ref_parser {
    const char *path;
    int line;
    const char *at; /* where reading stands in the statement */
    ref_pres *pres;
    char names[REF_DEGREE][REF_NAME]; /* variables, in the order of the letters 'a', 'b', ... */
    int name_count;
    bool names_fixed; /* no new variables: the body of a definition */
} ref_parser;

/* ref_expr.c */
_Noreturn void ref_fail(const ref_parser *parser, const char *expected);
void ref_blanks(ref_parser *parser);
bool ref_take(ref_parser *parser, char c);
bool ref_is_word(char c);
void ref_word(ref_parser *parser, char name[REF_NAME]);
char ref_closing(char open);
void ref_expression(ref_parser *parser, ref_poly *sum);
const ref_form *ref_find_form(const ref_pres *pres, ref_kind kind, const char *open, int arity);

#endif
