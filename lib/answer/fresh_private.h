/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files behind ids_fresh share.
 */
#ifndef IDSI_FRESH_PRIVATE_H
#define IDSI_FRESH_PRIVATE_H

#include <idspan/fresh.h>

#include "../model/realize_private.h"
#include "follows_private.h"

/* A new identity. */
typedef struct idsi_found {
    char *name;
    char *statement;
    char *polynomial;
    char *alternating;
    char *modules; /* what is lost without it */
    uint32_t degree;
    ids_partition partition;
    uint64_t terms;
    uint64_t first_terms; /* of the solution that was found first */
    char *largest;        /* absolute value of a coefficient */
    char *first_largest;
    uint32_t bits; /* of the claim that it holds; 0: proved */
} idsi_found;

struct ids_fresh {
    ids_ctx *ctx;
    const ids_model *model;
    size_t count;
    size_t capacity;
    ids_fresh_row *rows;
    size_t sure_capacity;
    double *sure; /* of each row the probability that the consequences are wrong */
    double doubt; /* probability that some identity that is known does not hold */
    bool exact;
    size_t prime_count;
    uint32_t *primes;
    uint64_t seed;
    size_t found_count;
    size_t found_capacity;
    idsi_found *found;
    ids_presentation *known; /* with all that is found; NULL while there is nothing */
};

/* (fresh_table.c) Adds the rows of one degree to a result. */
ids_status idsi_fresh_degree(ids_fresh *fresh, const ids_presentation *known, uint32_t degree);

/* (fresh_search.c) Finds identities for all that is new in the last degree of the table. */
ids_status idsi_fresh_search(ids_fresh *fresh, uint32_t degree);
/* The presentation with found identities but for number `without`; SIZE_MAX: with all. */
ids_status idsi_fresh_read(const ids_fresh *fresh, size_t without, ids_presentation **pres);

/* ---- one weight space (fresh_space.c) ---------------------------------------------------------
 * Monomials with the content of a partition, even letters for its rows or odd ones for its columns,
 * and the identities of the model in them. What is new there, when all is known of partitions that
 * are larger (smaller, with odd letters), belongs to this partition: one dimension for each module.
 */
typedef struct idsi_space_search {
    ids_ctx *ctx;
    const ids_model *model;
    bool odd;
    uint32_t degree;
    uint32_t variables;
    uint8_t power[IDSI_MAX_IDENTITY_DEGREE];
    idsi_component *component;
    idsi_system *system;
    size_t monomials;
    size_t quotient; /* monomials less rank of the consequences */
    size_t width;    /* of samples */
    uint32_t prime;
    uint32_t *sample; /* monomials x width, mod the prime */
    uint32_t *place;  /* column of each monomial */
    idsi_random random;
    size_t want;    /* dimension of what is new */
    uint32_t *rows; /* kernel vectors by monomial, mod the prime */
    size_t row_count;
    size_t row_capacity;
} idsi_space_search;

ids_status idsi_space_open(idsi_space_search *s, ids_ctx *ctx, const ids_model *model,
                           const ids_presentation *known, const ids_partition *partition, bool odd,
                           size_t want, uint64_t seed);
void idsi_space_close(idsi_space_search *s);
/* Echelon form of the consequences mod the system's prime; place NULL: monomials in their order. */
ids_status idsi_fresh_eliminate(const idsi_system *system, const uint32_t *place, uint64_t seed,
                                idsi_echelon **echelon);
/*
 * Kernel vectors mod the prime. `modulo`: of what is new, in monomials that the consequences do not
 * rewrite, in the order of `place`; else of all identities of the model. They are reduced, so the
 * same prime or not, the same places give residues of the same fractions.
 */
ids_status idsi_space_kernel(idsi_space_search *s, bool modulo);
/* Another prime, that divides no denominator, and its sample. */
ids_status idsi_space_draw(idsi_space_search *s);
/* The kernel over the integers: count rows of `monomials` entries, each with content 1. */
ids_status idsi_space_lift(idsi_space_search *s, bool modulo, mpz_t **rows, size_t *count);
void idsi_rows_clear(ids_ctx *ctx, mpz_t *rows, size_t count);

/* ---- texts (fresh_text.c) -------------------------------------------------------------------- */

/* Fills in the texts of an identity from its row, and its terms; it has its name. */
ids_status idsi_found_write(const idsi_space_search *s, mpz_t *row, idsi_found *found);
/* The statement anew, from the name and the other texts. */
ids_status idsi_found_state(ids_ctx *ctx, idsi_found *found);
void idsi_found_clear(ids_ctx *ctx, idsi_found *found);
/* The presentation with the identities found, but for number `without`. */
ids_status idsi_fresh_text(ids_ctx *ctx, const ids_fresh *fresh, size_t without, bool comments,
                           char **text);

/* ---- short ones (fresh_short.c) -------------------------------------------------------------- */

/* Rough length of a vector in print: its terms, and the bits of its coefficients. */
uint64_t idsi_short_length(mpz_t *row, size_t count);
/* `want` identities that are new and independent: want rows. Those found first have the terms and
 * largest coefficients in `first`. */
typedef struct idsi_first {
    uint64_t terms;
    mpz_t largest;
} idsi_first;

ids_status idsi_short_choose(idsi_space_search *s, mpz_t **rows, idsi_first *first);

/* (fresh_over.c) */
ids_status idsi_sample_over(const idsi_sample *sample, bool *good);

#endif
