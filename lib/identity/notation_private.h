/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The reader of presentation files, from characters to identities. Only the files of this
 * folder include it, and lib/model, whose algebra files have the same lexemes and operations.
 */
#ifndef IDSI_NOTATION_PRIVATE_H
#define IDSI_NOTATION_PRIVATE_H

#include "identity_private.h"

/* Deepest nesting of fences: far more than a degree of 16 needs, far less than any stack has. */
#define IDSI_MAX_NESTING 250u
/* Longest number, in decimal digits. */
#define IDSI_MAX_DIGITS 10000u
/* Most arguments of a definition, and most different variables of a statement. */
#define IDSI_MAX_VARIABLES IDSI_MAX_IDENTITY_DEGREE
/* Most tokens of a tree of an identity: 2 * degree - 1. */
#define IDSI_IDENTITY_TOKENS (2u * IDSI_MAX_IDENTITY_DEGREE - 1u)

/* ---- lexemes (lexer.c) ----------------------------------------------------------------------- */

typedef enum idsi_lexeme_kind {
    IDSI_LEX_END, /* end of a statement (while lexing: of a line) */
    IDSI_LEX_NAME,
    IDSI_LEX_NUMBER,
    IDSI_LEX_SYMBOL,
    IDSI_LEX_OPEN,
    IDSI_LEX_CLOSE,
    IDSI_LEX_COMMA,
    IDSI_LEX_COLON,
    IDSI_LEX_EQUAL,
    IDSI_LEX_PLUS,
    IDSI_LEX_MINUS,
    IDSI_LEX_QUOTE
} idsi_lexeme_kind;

typedef struct idsi_lexeme {
    idsi_lexeme_kind kind;
    uint32_t offset; /* bytes text[offset .. offset+length) */
    uint32_t length;
    uint32_t line;
    uint32_t column;
    bool glued; /* no blank before it */
    bool first; /* first of its line */
} idsi_lexeme;

/* ---- values ---------------------------------------------------------------------------------- */

/*
 * What an expression stands for: a normalised polynomial whose terms may differ in degree, and
 * one tree of the largest degree that was written, even if all of it cancels (so that a trivial
 * identity keeps its degree); nominal_length 0 when nothing but zeros was written.
 */
typedef struct idsi_value {
    idsi_poly poly;
    uint32_t nominal_degree;
    uint32_t nominal_length;
    idsi_token nominal[IDSI_IDENTITY_TOKENS];
} idsi_value;

/* (value.c) */
void idsi_value_init(idsi_value *value, ids_ctx *ctx, const ids_signature *sig);
void idsi_value_clear(idsi_value *value);
ids_status idsi_value_leaf(idsi_value *value, uint32_t label);
/* Multiplies by a rational. */
ids_status idsi_value_scale(idsi_value *value, mpq_srcptr factor);
/* Appends the terms of `other`, times sign, without collecting them. */
ids_status idsi_value_append(idsi_value *value, const idsi_value *other, int sign);
/* value = operation number `op` of the arguments, expanded; `value` must be new. */
ids_status idsi_value_product(idsi_value *value, uint32_t op, const idsi_value *arguments);
/* value = body with label i replaced by arguments[i-1], expanded; `value` must be new. */
ids_status idsi_value_substitute(idsi_value *value, const idsi_value *body,
                                 const idsi_value *arguments);

/* ---- the reader ------------------------------------------------------------------------------ */

/* An operation as it was declared. */
typedef struct idsi_declared {
    ids_operation operation; /* open, close and generators are owned */
    char *open;
    char *close;
    ids_signed_order *generators;
    size_t generator_capacity;
    size_t lexeme; /* index of its first lexeme after the word `operation` */
} idsi_declared;

/* An operation with names for its arguments; the numbers are those of lexemes. */
typedef struct idsi_pattern {
    ids_notation notation;
    size_t first;
    size_t open;
    size_t close;
    uint32_t count;
    size_t argument[IDS_MAX_ARITY];
} idsi_pattern;

typedef struct idsi_definition {
    size_t lexeme; /* index of its name */
    uint32_t arity;
    idsi_value body;
} idsi_definition;

typedef struct idsi_reader {
    ids_ctx *ctx;
    const char *text;
    size_t length;
    const char *source;
    bool operations_follow; /* an operation may be used before its declaration */
    size_t hidden;          /* bytes at the beginning that messages do not show nor count */
    const idsi_origin *origin; /* where the text stands for a piece of another one; else NULL */

    idsi_lexeme *lexemes;
    size_t lexeme_count;
    size_t lexeme_capacity;
    size_t at; /* the next lexeme */

    idsi_declared *operations;
    size_t operation_count;
    size_t operation_capacity;

    idsi_definition *definitions;
    size_t definition_count;
    size_t definition_capacity;

    size_t defining; /* lexeme of the definition that is being read; SIZE_MAX outside of one */
    size_t variables[IDSI_MAX_VARIABLES]; /* lexeme of the first use of each in this statement */
    uint32_t variable_count;

    ids_presentation *presentation; /* being built */
    size_t identity_capacity;
    size_t model_capacity;
} idsi_reader;

/* (presentation.c) Frees everything that the reader has, the presentation included. */
void idsi_reader_clear(idsi_reader *reader);
/* The signature of the operations that were read; fails when there are none. */
ids_status idsi_reader_signature(idsi_reader *reader, ids_signature **sig);

/* (lexer.c) Splits the text into lexemes; a line ends in an END. */
ids_status idsi_reader_lex(idsi_reader *reader);

/* (diagnose.c) Fails at a lexeme: source, line, column, message, the line and a caret. */
ids_status idsi_reader_fail(idsi_reader *reader, ids_status status, size_t lexeme,
                            const char *format, ...) IDSI_PRINTF(4, 5);
/* The same at a place: `line_start` is the offset of its line. */
ids_status idsi_reader_fail_place(idsi_reader *reader, ids_status status, ids_place place,
                                  size_t offset, const char *format, va_list args);
/* Gives a failure of another room (a limit, say) the place of a lexeme; passes IDS_OK on. */
ids_status idsi_reader_place(idsi_reader *reader, ids_status status, size_t lexeme);
/* Text of a lexeme as a message shows it: cut when long, "end of the line" for an END. */
typedef struct idsi_shown {
    char text[2u * IDSI_MAX_NAME];
} idsi_shown;
idsi_shown idsi_reader_show(const idsi_reader *reader, size_t lexeme);
/* The lexemes first .. last (both included) as they stand in the text, "" when over 40 bytes. */
idsi_shown idsi_reader_slice(const idsi_reader *reader, size_t first, size_t last);
/* The word of the list nearest to a lexeme, NULL when none is near. */
const char *idsi_reader_nearest(const idsi_reader *reader, size_t lexeme, const char *const *words,
                                size_t count);

/* (words.c) Small questions about lexemes and names. */
bool idsi_lexeme_is(const idsi_reader *reader, size_t lexeme, const char *word);
bool idsi_lexeme_same(const idsi_reader *reader, size_t a, size_t b);
ids_status idsi_lexeme_copy(idsi_reader *reader, size_t lexeme, char **out);
/* Whether a NAME is kept for the grammar: a statement word or a symmetry word. */
bool idsi_lexeme_is_reserved(const idsi_reader *reader, size_t lexeme);
bool idsi_lexeme_is_statement(const idsi_reader *reader, size_t lexeme);
/* Index of the operation with this notation and opening text, SIZE_MAX when there is none; arity 0:
 * the first of any arity. */
size_t idsi_reader_operation(const idsi_reader *reader, ids_notation notation, size_t lexeme,
                             uint32_t arity);
/* Index of the definition with this name, SIZE_MAX when there is none. */
size_t idsi_reader_definition(const idsi_reader *reader, size_t lexeme);
/* Fails unless a NAME may be a variable or an argument: no reserved word, operation, definition. */
ids_status idsi_reader_check_variable(idsi_reader *reader, size_t lexeme);
/* Fails unless the statement is at its end; then steps over it. */
ids_status idsi_reader_end(idsi_reader *reader, const char *expected);

/* (group.c) Joins lines to statements, checks that fences match, reads the operations. */
ids_status idsi_reader_group(idsi_reader *reader);

/* (operation.c) Reads an operation with different names as arguments. */
ids_status idsi_reader_pattern(idsi_reader *reader, idsi_pattern *pattern);
/* Reads what follows the word `operation`. */
ids_status idsi_reader_declare(idsi_reader *reader);
void idsi_declared_clear(ids_ctx *ctx, idsi_declared *declared);

/* (coefficient.c) Reads numbers before a factor; *found tells if there was one. */
ids_status idsi_reader_coefficient(idsi_reader *reader, mpq_ptr coefficient, bool *found);

/* (expression.c) Reads a sum; `value` must be new. */
ids_status idsi_reader_sum(idsi_reader *reader, idsi_value *value);
/* An operation is used: fails unless it is declared above. */
ids_status idsi_reader_check_declared(idsi_reader *reader, size_t op, size_t use);

/* (alternate.c) Reads `alternating a,b,..` as often as it stands, and alternates the polynomial. */
ids_status idsi_reader_alternate(idsi_reader *reader, idsi_poly *poly);

/* (model.c) Reads what follows the word `model`. */
ids_status idsi_reader_model(idsi_reader *reader);
/* Fails when a model leaves an operation out. */
ids_status idsi_reader_check_models(idsi_reader *reader);

/* (identity.c) Fills in everything but role, name and line; takes the polynomial of `value`. */
ids_status idsi_identity_finish(idsi_reader *reader, idsi_identity *identity, idsi_value *value);

/* (statement.c) Reads everything but `operation`. */
ids_status idsi_reader_statements(idsi_reader *reader);

#endif
