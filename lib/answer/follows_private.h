/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files behind follows.h share: one multihomogeneous component of the free algebra with
 * its consequences, derivations and witnesses. The checker (check*.c) does not include it.
 */
#ifndef IDSI_FOLLOWS_PRIVATE_H
#define IDSI_FOLLOWS_PRIVATE_H

#include <gmp.h>

#include <idspan/follows.h>

#include "../engine/engine_private.h"

/* (follows.c) Checks the arguments that the calls have in common. Options may be NULL. */
ids_status idsi_candidate_check(ids_ctx *ctx, const ids_presentation *pres, size_t index,
                                const void *result);
ids_status idsi_follows_check(ids_ctx *ctx, const ids_follows_options *options);

/* ---- one component (component.c) --------------------------------------------------------------
 * A content says how often each label occurs, as a number in mixed radix; the hole of a context
 * is one more label, behind the variables.
 */

/* A list of trees, end to end: tree i is tokens[start[i] .. start[i] + length[i]). */
typedef struct idsi_planted {
    size_t start;
    size_t length;
} idsi_planted;

typedef struct idsi_forest {
    size_t count;
    size_t capacity;
    idsi_planted *list;
    size_t used; /* tokens */
    size_t token_capacity;
    idsi_token *tokens;
} idsi_forest;

typedef struct idsi_component {
    ids_ctx *ctx;
    const ids_presentation *pres;
    const ids_signature *sig;
    const idsi_identity *claim;
    const idsi_poly *goal; /* the candidate as written; without terms when there is none */
    idsi_poly none;
    bool odd; /* a letter that occurs c times stands for the alternating sum over c letters */
    uint32_t degree;
    uint32_t variables;
    uint32_t power[IDSI_MAX_IDENTITY_DEGREE];
    uint32_t stride[IDSI_MAX_IDENTITY_DEGREE + 1]; /* of each variable, then of the hole */
    uint32_t contents;                             /* without the hole */
    uint32_t top;                                  /* content of the candidate */
    idsi_forest *trees; /* canonical monomials by content, 2 * contents lists; the second half
                           has the hole once */
    size_t slot_mask;   /* hash table of the candidate's content: 1 + index, 0: empty */
    uint32_t *slots;
    idsi_laws *laws;
} idsi_component;

/* One consequence: law `law` with tree number argument[i] of content content[i] for variable i,
 * in context number `context` of the contexts around `hole`. */
typedef struct idsi_instance {
    uint32_t law;
    uint32_t hole; /* content of what stands in the context's hole */
    uint32_t context;
    uint32_t content[IDSI_MAX_IDENTITY_DEGREE];
    uint32_t argument[IDSI_MAX_IDENTITY_DEGREE];
} idsi_instance;

ids_status idsi_component_create(ids_ctx *ctx, const ids_presentation *pres, size_t index,
                                 idsi_component **component);
/*
 * The component in which letter i occurs power[i] times, without a candidate. With odd letters it
 * is the space of multilinear polynomials that are alternating in as many groups of variables: a
 * tree stands for the one with the variables of each group from left to right, alternated.
 */
ids_status idsi_component_create_content(ids_ctx *ctx, const ids_presentation *pres,
                                         const uint8_t *power, uint32_t variables, bool odd,
                                         idsi_component **component);
void idsi_component_free(idsi_component *component);
/* Whether each label occurs in `part` at most as often as in `whole`; labels of a content. */
bool idsi_content_within(const idsi_component *c, uint32_t part, uint32_t whole);
uint32_t idsi_content_degree(const idsi_component *c, uint32_t content);
/* The monomials of the candidate's content. */
const idsi_forest *idsi_component_monomials(const idsi_component *component);
/* Makes a tree canonical; the sign, 0 when it is zero. */
int idsi_component_canonicalize(const idsi_component *component, idsi_token *tree, size_t length);
/* (component_odd.c) The same where letters are odd, but for those over `variables`. */
int idsi_odd_canonicalize(const ids_signature *sig, uint32_t variables, idsi_token *tree);
/* Sign of bringing pieces into an order: piece order[i] comes to place i. content[k] has the
 * letters of piece k. */
int idsi_odd_sign(const uint8_t (*content)[IDSI_MAX_IDENTITY_DEGREE], const uint8_t *order,
                  uint32_t count);
/* Index of a canonical tree among them; SIZE_MAX when it is none. */
size_t idsi_component_find(const idsi_component *component, const idsi_token *tree);

typedef ids_status (*idsi_instance_fn)(void *user, const idsi_instance *instance);
/* All consequences of the component, up to exchange of arguments that a law is symmetric in. */
ids_status idsi_component_each(const idsi_component *component, idsi_instance_fn fn, void *user);

/* One monomial of a consequence: sign is 1 or -1. */
typedef struct idsi_part {
    size_t monomial;
    int sign;
    size_t term; /* of the law */
} idsi_part;
/* The monomials of a consequence, a part a term of the law, zero ones left out. `parts` has room
 * for all terms of the law. */
void idsi_component_expand(const idsi_component *component, const idsi_instance *instance,
                           idsi_part *parts, size_t *count);
/* Tree of an argument, and the context of an instance. */
const idsi_token *idsi_component_argument(const idsi_component *component,
                                          const idsi_instance *instance, uint32_t place);
const idsi_token *idsi_component_context(const idsi_component *component,
                                         const idsi_instance *instance);

/* ---- all consequences (system.c) ------------------------------------------------------------- */

/* An entry of a consequence: coefficient of the law's term |code| - 1, times the sign of code. */
typedef struct idsi_cell {
    uint32_t monomial;
    int32_t code;
} idsi_cell;

/* The consequences of a component and their entries: those of i are cells[start[i] ..
 * start[i+1]). Equal monomials stand apart. */
typedef struct idsi_system {
    ids_ctx *ctx;
    const idsi_component *component;
    size_t count;
    size_t instance_capacity;
    idsi_instance *instances;
    size_t start_capacity;
    size_t *start;
    size_t cell_capacity;
    idsi_cell *cells;
    idsi_part *parts;
    uint32_t prime;
    uint32_t **residue; /* of the coefficients of each law */
    uint32_t *goal;     /* of the candidate in each monomial */
} idsi_system;

ids_status idsi_system_create(const idsi_component *component, idsi_system **system);
void idsi_system_free(idsi_system *system);
/* Prepares residues; false in *ok when p divides a denominator. */
ids_status idsi_system_reduce(idsi_system *system, uint32_t prime, bool *ok);
/* Residue of a cell of instance i. */
uint32_t idsi_system_value(const idsi_system *system, size_t i, const idsi_cell *cell);
/* Its exact coefficient; sign of it in *sign. */
mpq_srcptr idsi_system_exact(const idsi_system *system, size_t i, const idsi_cell *cell, int *sign);
/* Joins a residue to those mod the product of earlier primes, which grows by p. */
void idsi_residue_join(mpz_ptr value, mpz_srcptr modulus, uint32_t residue, uint32_t p);

/*
 * (witness.c) The fractions of which the residues are, as integers with content 1; false when there
 * are none, or their common denominator has more bits.
 */
bool idsi_residues_to_integers(mpz_t *residues, size_t count, mpz_srcptr modulus, size_t most_bits,
                               mpz_t *values);

/* ---- results --------------------------------------------------------------------------------- */

struct ids_derivation {
    ids_ctx *ctx;
    idsi_component *component;
    size_t count;
    size_t first_count;
    idsi_instance *instances;
    mpq_t *coefficients;
};

struct ids_witness {
    ids_ctx *ctx;
    idsi_component *component;
    size_t count;  /* values that are not 0 */
    mpz_t *values; /* of all monomials */
};

/* ---- files (certificate.c) ------------------------------------------------------------------- */

/* The presentation of a file: the identities, and the claim as the only candidate. */
ids_status idsi_write_presentation(ids_ctx *ctx, const ids_presentation *pres,
                                   const idsi_identity *claim, char **text);
/* Adds the last line, with the mark, and hands the text to the sink. */
ids_status idsi_write_end(idsi_text *text, const char *prefix, ids_sink_fn sink, void *sink_user);

#endif
