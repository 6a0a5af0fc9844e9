/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The monomial engine: the relatively free algebra degree by degree, in the quotient.
 */
#ifndef IDSI_ENGINE_PRIVATE_H
#define IDSI_ENGINE_PRIVATE_H

#include "../field/field_private.h"
#include "../identity/identity_private.h"

/*
 * A block of columns of one degree: an operation with arguments of given degrees, in canonical
 * order (larger degrees first where the symmetry allows). Its columns are numbered
 *
 *     offset + (rank of the label distribution) * inner + sum of stride[i] * q[i]
 *
 * where q[i] < dim F(degree[i])/I(degree[i]) is the normal form in argument i.
 */
typedef struct idsi_block {
    uint32_t op;
    uint8_t degree[IDS_MAX_ARITY];
    idsi_split split;
    uint64_t inner;
    uint32_t stride[IDS_MAX_ARITY];
    uint64_t offset;
} idsi_block;

/*
 * One degree of the tower. Column c of the degree equals the combination
 * entries[start[c] .. start[c+1]) of normal forms (entry.column = number of a normal form);
 * degrees whose tables were not asked for have start == NULL.
 */
typedef struct idsi_level {
    uint32_t degree;
    uint64_t free;      /* dim F(n) */
    uint64_t columns;   /* of the quotient step; for degree 1, where there is none: 0 */
    uint64_t dimension; /* dim F(n)/I(n) */
    size_t block_count;
    idsi_block *blocks; /* by operation, then degrees descending */
    uint32_t *normal;   /* column of each normal form; NULL without tables and for degree 1 */
    size_t *start;      /* columns + 1 */
    idsi_entry *entries;
    double error; /* probability that random rows missed some consequence in this degree or below */
} idsi_level;

/* ---- laws (lib/engine/laws.c) ---------------------------------------------------------------- */

/* A product in a law: argument i is variable arg[i] when arg[i] >= 0, else node -1-arg[i]. */
typedef struct idsi_law_node {
    uint32_t op;
    uint32_t arity;
    int32_t arg[IDS_MAX_ARITY];
    uint32_t variables; /* set of the variables below */
} idsi_law_node;

/*
 * A linearised identity, ready to be evaluated. Equal products in several terms are one node;
 * nodes stand after the nodes they use. Term t is coefficient t of `poly` times node root[t].
 */
typedef struct idsi_law {
    const idsi_poly *poly;
    uint32_t degree;
    size_t node_count;
    idsi_law_node *nodes;
    uint32_t *root;
    /* Variables that the law is symmetric or antisymmetric in have the same class. */
    uint8_t class_of[IDSI_MAX_IDENTITY_DEGREE];
    double norm_bits; /* log2 of the Euclidean norm of the coefficients */
} idsi_law;

/* The identities of a presentation that are not trivial. */
typedef struct idsi_laws {
    ids_ctx *ctx;
    const ids_presentation *pres;
    size_t count;
    idsi_law *law;
} idsi_laws;

/* One law, from a linearised polynomial with terms, which it borrows; `law` is zeroed before and
 * cleared after, also on failure. */
ids_status idsi_law_compile(ids_ctx *ctx, const idsi_poly *poly, idsi_law *law);
void idsi_law_clear(ids_ctx *ctx, idsi_law *law);
ids_status idsi_laws_create(ids_ctx *ctx, const ids_presentation *pres, idsi_laws **laws);
/*
 * Over the field of `field` elements (0: the rational numbers). An identity that is 0 there is
 * left out; IDS_ERR_DOMAIN when one has a denominator that is.
 */
ids_status idsi_laws_create_over(ids_ctx *ctx, const ids_presentation *pres, uint32_t field,
                                 idsi_laws **laws);
void idsi_laws_free(idsi_laws *laws);
/* Whether some law says x = 0. */
bool idsi_laws_trivial(const idsi_laws *laws);
/* Largest norm_bits of the laws that reach a degree; negative when none does. */
double idsi_laws_norm_bits(const idsi_laws *laws, uint32_t degree);

/* ---- argument degrees (lib/engine/degrees.c) ------------------------------------------------- */

typedef ids_status (*idsi_degrees_fn)(void *user, const uint8_t *degree);
/* All canonical tuples of argument degrees with a given total, largest first. */
ids_status idsi_degrees_each(const idsi_group *group, uint32_t total, idsi_degrees_fn fn,
                             void *user);

/* ---- the tower (lib/engine/tower.c) ---------------------------------------------------------- */

/* F/I mod a prime, degrees 1 .. height. */
typedef struct idsi_tower {
    ids_ctx *ctx;
    const idsi_laws *laws;
    const ids_signature *sig;
    uint32_t prime;
    idsi_random random; /* for what elimination chooses at random */
    bool count_only; /* there are no laws and no tables are wanted: columns are only counted */
    uint32_t height;
    idsi_level level[IDS_MAX_DEGREE + 1]; /* level[1 .. height] */
    /* Shares of the whole work at the beginning and end of the next degree; 0, 0: unknown. */
    double share_begin;
    double share_end;
} idsi_tower;

void idsi_tower_init(idsi_tower *tower, ids_ctx *ctx, const idsi_laws *laws, uint32_t prime);
void idsi_tower_clear(idsi_tower *tower);
void idsi_level_clear(ids_ctx *ctx, idsi_level *level);

/*
 * Adds the next degree. `tables`: also the normal forms and the reduction of every column, which
 * higher degrees need. IDS_ERR_LIMIT names the degree, its columns, and the budget.
 */
ids_status idsi_tower_grow(idsi_tower *tower, bool tables);

/*
 * Share of the whole work when `done` of `total` rows are made, counted over all passes: each pass
 * is taken as half of what was left, since their number is not known.
 */
double idsi_tower_share(const idsi_tower *tower, uint64_t done, uint64_t total);
/* Blocks, free dimension and number of columns of the degree above the tower. */
ids_status idsi_level_plan(const idsi_tower *tower, idsi_level *level);
/* The block of an operation with canonical argument degrees. */
const idsi_block *idsi_level_block(const idsi_level *level, uint32_t op, const uint8_t *degree);

/* ---- rows (lib/engine/rows.c) ---------------------------------------------------------------- */

/*
 * All rows of degree `level->degree`, made from the tower's lower degrees: consequences
 * f(m1, .., md), as entries (column, value) of the quotient step. They come in pieces, in the same
 * order whenever they are made. Tower and level must outlive it.
 */
typedef struct idsi_rows idsi_rows;

ids_status idsi_rows_create(const idsi_tower *tower, const idsi_level *level, idsi_rows **rows);
void idsi_rows_free(idsi_rows *rows);
size_t idsi_rows_pieces(const idsi_rows *rows);
/* Makes the rows of a piece of an idsi_rows; several threads may. */
ids_status idsi_rows_piece(void *rows, size_t piece, idsi_row_fn row, void *user);
/* Makes all rows. */
ids_status idsi_rows_each(const idsi_tower *tower, const idsi_level *level, idsi_row_fn row,
                          void *user);

/* ---- proof over Q (lib/engine/exact.c) ------------------------------------------------------- */

/* Rational tables of the degrees that are proved so far. */
typedef struct idsi_proof idsi_proof;

ids_status idsi_proof_create(ids_ctx *ctx, const idsi_laws *laws, idsi_proof **proof);
void idsi_proof_free(idsi_proof *proof);
/*
 * Proves that the dimension of the tower's top degree is that over Q. To be called for every
 * degree 1, 2, ... in turn, with a tower that has tables in all of them. More primes are drawn
 * from `random` as needed. IDS_ERR_UNABLE when the coefficients of the normal forms do not fit.
 * *exceptional: the tower's prime is at fault. Nothing is proved; the caller starts again, with
 * another prime and a new proof, at most IDSI_PROOF_STARTS times in all.
 */
#define IDSI_PROOF_STARTS 5u
ids_status idsi_proof_degree(idsi_proof *proof, const idsi_tower *tower, idsi_random *random,
                             bool *exceptional);
/* What to say when these are used up. */
ids_status idsi_proof_give_up(ids_ctx *ctx);

#endif
