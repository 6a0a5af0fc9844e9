/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Polynomials and presentations as the engines see them.
 */
#ifndef IDSI_IDENTITY_PRIVATE_H
#define IDSI_IDENTITY_PRIVATE_H

#include <gmp.h>

#include <idspan/identity.h>

#include "../tree/tree_private.h"

/* Most terms a polynomial may have, written or linearised; over it: IDS_ERR_LIMIT. */
#define IDSI_MAX_TERMS 4000000u
/* Most limbs of a coefficient, numerator and denominator together (16 KiB: 39,000 digits). */
#define IDSI_MAX_LIMBS 2048u
/* Largest degree of an identity or candidate. */
#define IDSI_MAX_IDENTITY_DEGREE 16u

/*
 * A polynomial: terms in idsi_tree_compare() order, no two with the same tree, no coefficient 0,
 * every tree canonical. All trees have the same degree, so term i's tree is
 * tokens[start[i] .. start[i+1]).
 */
typedef struct idsi_poly {
    ids_ctx *ctx;
    const ids_signature *sig;
    uint32_t degree;    /* 0 when there are no terms */
    uint32_t variables; /* labels are 1 .. variables */
    size_t count;
    mpq_t *coefficients;
    size_t *start; /* count + 1 entries */
    idsi_token *tokens;
    size_t term_capacity;
    size_t token_capacity;
    size_t big_limbs; /* GMP limbs of the coefficients of more than a word, an upper bound */
} idsi_poly;

void idsi_poly_init(idsi_poly *poly, ids_ctx *ctx, const ids_signature *sig);
void idsi_poly_clear(idsi_poly *poly);
/* Appends a term as it stands (no sorting, no canonical form); coefficient may be 0. */
ids_status idsi_poly_append(idsi_poly *poly, mpq_srcptr coefficient, const idsi_token *tree,
                            size_t length);
/* Makes all trees canonical, sorts, collects equal trees, drops zeros, sets degree. On failure
 * the terms still have the same sum. */
ids_status idsi_poly_normalize(idsi_poly *poly);
/* Multiplies by a rational so that coefficients are integers with content 1, the first positive.
 * IDS_ERR_LIMIT, the polynomial unchanged, when the common denominator is enormous. */
ids_status idsi_poly_primitive(idsi_poly *poly);
/* out, without terms, becomes body with label i replaced by arguments[i-1], expanded. */
ids_status idsi_poly_substitute(idsi_poly *out, const idsi_poly *body, uint32_t count,
                                const idsi_poly *arguments);
bool idsi_poly_equal(const idsi_poly *a, const idsi_poly *b);
/* names as in idsi_tree_print(). Writes "0" for no terms. */
ids_status idsi_poly_print(const idsi_poly *poly, const char *const *names, idsi_text *text);

/*
 * Complete linearisation, into an initialised polynomial without terms: a variable of
 * multiplicity m becomes m variables, summed over all m! ways to place them; primitive. Variables
 * keep their order: x x y z z -> x1 x2 y z1 z2. The polynomial must be normalised and have every
 * variable equally often in each term (else IDS_ERR_ARG).
 * Cost: O(degree^2) for each term of the result before equal ones are collected; for a generated
 * group, its order for each node of a written term.
 */
ids_status idsi_poly_linearize(const idsi_poly *poly, idsi_poly *linear);
/*
 * What is left of the complete linearisation mod a prime, before it is made primitive. order 1:
 * nothing, all coefficients are multiples of p; -1: p divides a denominator; 0: it is a multiple of
 * the primitive one by a number that p does not divide. Cost: as idsi_poly_linearize().
 */
ids_status idsi_poly_linear_mod(ids_ctx *ctx, const idsi_poly *poly, uint32_t p, int *order);

typedef struct idsi_identity {
    ids_role role;
    char *name;     /* "" when it has none */
    char **letters; /* variable names as written, written.variables of them */
    uint32_t line;
    uint32_t degree; /* also of a trivial identity, which has no terms */
    bool multilinear;
    idsi_poly written; /* normalised; labels 1.. number the variables in the order of their names */
    idsi_poly linear;  /* primitive, multilinear; no terms when the identity is trivial */
    idsi_token trivial[2u * IDSI_MAX_IDENTITY_DEGREE]; /* a tree that was written, if trivial */
} idsi_identity;

/* Marks a letter of a word that the involution is applied to. */
#define IDSI_STARRED 0x80u

/* A word in the arguments of an operation: letter[i] is the number of one, from 0, or starred. */
typedef struct idsi_word {
    mpq_t coefficient;
    uint8_t letter[IDS_MAX_ARITY]; /* as many as the operation has arguments */
} idsi_word;

/* How a model realises one operation. */
typedef struct idsi_realization {
    uint32_t op;
    uint32_t arity;
    ids_place place; /* of the text on the right, */
    uint32_t begin;  /* and its bytes in the text of the presentation */
    uint32_t end;
    char *letters[IDS_MAX_ARITY]; /* names of the arguments */
    size_t count;                 /* associative: words, sorted, none twice, no coefficient 0 */
    size_t capacity;
    idsi_word *words;
    char *text; /* over: the polynomial as written, blanks and comments aside; else NULL */
} idsi_realization;

typedef struct idsi_model {
    char *name;
    ids_model_kind kind;
    char *file; /* as written; NULL for associative */
    uint32_t line;
    uint32_t column; /* of its name */
    size_t lexeme; /* of its name, while the text is read */
    size_t count;  /* algebra: none */
    size_t capacity;
    idsi_realization *list;
} idsi_model;

struct ids_presentation {
    ids_ctx *ctx;
    char *source; /* the name of the text, and the text, for messages about what it says */
    char *text;
    size_t length;
    ids_signature *sig;
    size_t model_count;
    idsi_model *models;
    size_t count; /* identities and candidates in the order of the text */
    idsi_identity *list;
};

/*
 * Reads as ids_presentation_read(); with operations_follow, operations may be declared behind their
 * use, so that those of another presentation can be added to a text whose lines keep their numbers.
 * The first `hidden` bytes, of line 1, are not shown nor counted in messages and places.
 */
ids_status idsi_presentation_read(ids_ctx *ctx, const char *text, size_t length, const char *source,
                                  bool operations_follow, size_t hidden,
                                  ids_presentation **presentation);
/*
 * A piece of the text of a presentation that is about the operations of another file. Messages are
 * given their places in `pres`: line `place.line` of what is read is `candidate ` and the piece,
 * which begins at `place`.
 */
typedef struct idsi_origin {
    const ids_presentation *pres;
    const char *file;
    ids_place place;
} idsi_origin;
#define IDSI_PIECE_PREFIX "candidate "
ids_status idsi_presentation_read_piece(ids_ctx *ctx, const char *text, size_t length,
                                        const idsi_origin *origin, ids_presentation **piece);
/* Fails at a place of the text: source, line, column, message, the line and a caret. */
ids_status idsi_presentation_fail(ids_ctx *ctx, const ids_presentation *pres, ids_status status,
                                  ids_place place, const char *format, ...) IDSI_PRINTF(5, 6);
/* Gives a failure without a place this one; passes IDS_OK on. */
ids_status idsi_presentation_place(ids_ctx *ctx, const ids_presentation *pres, ids_status status,
                                   ids_place place);
/* The same operations, written in the same way, with the same symmetries, in the same order. */
bool idsi_signature_equal(const ids_signature *a, const ids_signature *b);
void idsi_model_clear(ids_ctx *ctx, idsi_model *model);
bool idsi_model_equal(const idsi_model *a, const idsi_model *b);
/* The realisation of an operation, NULL when there is none. */
const idsi_realization *idsi_model_realization(const idsi_model *model, uint32_t op);
ids_status idsi_model_print(const ids_signature *sig, const idsi_model *model, idsi_text *text);
/* The absolute value of a coefficient and "*"; nothing for 1. */
ids_status idsi_coefficient_print(idsi_text *text, mpq_srcptr value);
/* The index-th identity of a role, NULL when out of range. */
const idsi_identity *idsi_presentation_get(const ids_presentation *pres, ids_role role,
                                           size_t index);

#endif
