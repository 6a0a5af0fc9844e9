/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The partition engine: multiplicities of irreducible modules in F(n)/I(n), a partition at a time.
 *
 * For a shape t of n cells let M(t) be the space of S_n-maps from F(n)/I(n) to the skew Specht
 * module of t. A map is given by its values on products, that is, by an element of
 *
 *     U(t) = sum over operations, degrees, chains of shapes   M(piece 1) (x) .. (x) M(piece k)
 *
 * (the unknowns), subject to linear equations: the operations' symmetries, and the identities.
 * M(t) is the solution space; `solution` is a basis of it.
 */
#ifndef IDSI_PARTITION_PRIVATE_H
#define IDSI_PARTITION_PRIVATE_H

#include <pthread.h>
#include <stdatomic.h>

#include "../field/solution_private.h"
#include "../young/skew_private.h"
#include "engine_private.h"

/* ---- expressions ---------------------------------------------------------------------------
 * Monomials whose labels run from left to right, built from the letter (number 0). Arguments are
 * in canonical order of degrees. Each expression is kept once.
 */
typedef struct idsi_expr {
    uint32_t op; /* UINT32_MAX for the letter */
    uint32_t degree;
    uint32_t arg[IDS_MAX_ARITY];
} idsi_expr;

/* ---- equations --------------------------------------------------------------------------- */

/* coefficient * (labels permuted by w) expr; w is a word in exchanges, applied left to right. */
typedef struct idsi_term {
    uint32_t coefficient;
    uint32_t expr;
    uint16_t word_length;
    uint8_t *word;
} idsi_term;

/*
 * A linear combination of monomials that every map must send to zero. Terms of one expression
 * adjoin.
 */
typedef struct idsi_equation {
    size_t count;
    idsi_term *terms;
    double cost; /* rough, for the order in which equations are used */
} idsi_equation;

/* ---- unknowns ---------------------------------------------------------------------------- */

/*
 * How an operation with given argument degrees is taken apart: the argument with the largest
 * degree is the core; the others are peeled, those behind the core from the end, those before it
 * from the start.
 */
typedef struct idsi_form {
    uint32_t op;
    uint32_t arity;
    uint8_t degree[IDS_MAX_ARITY];
    uint32_t core;
} idsi_form;

/* What is known for one shape. */
typedef struct idsi_space {
    bool solved;
    uint32_t dimension; /* of M(t) */
    uint32_t unknowns;  /* dim U(t) */
    idsi_left solution; /* dimension x unknowns, negated; empty for the single cell */
    uint32_t *offset;   /* first unknown of each form of the degree */
    uint64_t blocks;    /* of random covectors that solving it took, at most */
    double seconds;     /* and processor time */
} idsi_space;

typedef struct idsi_degree {
    size_t form_count;
    idsi_form *forms;
    size_t equation_count;
    idsi_equation *equations;
    bool equations_made;
    double *share; /* of each equation: rank it added / tableaux, in the shape solved first */
    size_t generator_count; /* expressions that generate F(d)/I(d) as S_d-module */
    uint32_t *generators;
    bool generators_made;
    size_t shape_count; /* shapes that must be solved */
    uint32_t *shapes;
} idsi_degree;

/* A stored evaluation matrix: values of M(t)'s basis on an expression, dimension x tableaux. */
typedef struct idsi_value {
    uint32_t shape;
    uint32_t expr;
    idsi_left *matrix; /* negated */
} idsi_value;

typedef struct idsi_partition_engine {
    ids_ctx *ctx;
    const idsi_laws *laws;
    const ids_signature *sig;
    uint32_t prime;
    uint32_t top;      /* largest degree */
    bool top_basis;    /* bases are wanted for the shapes of the largest degree too */
    uint32_t solved;   /* degrees of which all shapes are solved */
    double cost;       /* estimated, of all shapes that are wanted */
    double cost_done;  /* of them, in degrees that are finished */
    double share_from; /* progress is reported from here on, */
    double share_part; /* and this far: parts of a longer work; 0 and 1 unless set */
    idsi_random random;
    idsi_seminormal seminormal;
    idsi_skews skews;
    size_t space_count;
    idsi_space *spaces; /* one a shape that was known when planning ended */
    idsi_degree degree[IDSI_SHAPE_MAX + 1];
    size_t expr_count;
    size_t expr_capacity;
    idsi_expr *exprs;
    uint32_t *expr_slot; /* open addressing: 1 + number */
    size_t expr_slots;
    pthread_mutex_t lock; /* of the stored values */
    idsi_value *values;
    size_t value_slots;
    size_t value_count;
    _Atomic uint64_t value_bytes;
    uint8_t *since; /* of each planned shape: the lowest degree asked for that needs it; else 0 */
} idsi_partition_engine;

/* IDS_ERR_ARG unless `prime` is a prime below 2^30. */
ids_status idsi_partition_create(ids_ctx *ctx, const idsi_laws *laws, uint32_t prime, uint32_t top,
                                 idsi_partition_engine **engine);
void idsi_partition_free(idsi_partition_engine *engine);
/* Solves all shapes of the degrees up to `degree`, with the context's threads. */
ids_status idsi_partition_solve(idsi_partition_engine *engine, uint32_t degree);
/* Multiplicity of a partition in F/I; solves the lower degrees and this shape when needed. */
ids_status idsi_partition_multiplicity(idsi_partition_engine *engine, const uint8_t *parts,
                                       uint32_t rows, uint32_t *multiplicity);

/* Solves the lower degrees, and makes what all shapes of this one need. */
ids_status idsi_partition_prepare(idsi_partition_engine *engine, uint32_t degree);

/* What the work for a partition comes to; zeros where its degree has no monomial. */
typedef struct idsi_account {
    uint64_t tableaux;
    uint64_t unknowns; /* once the lower degrees are solved; else 0 */
    uint64_t blocks;   /* of random covectors, its own and those of all lower shapes that a table
                          which ends with its degree needs */
    double seconds;    /* its own */
} idsi_account;

ids_status idsi_partition_account(idsi_partition_engine *engine, const uint8_t *parts,
                                  uint32_t rows, idsi_account *account);
/*
 * Probability that random covectors have missed an equation: 2/p^2 for every block, where no prime
 * that is drawn is below 2^29.
 */
static inline double idsi_blocks_error(uint64_t blocks)
{
    return (double)blocks * 0x1p-57;
}

/* ---- partition_plan.c -------------------------------------------------------------------- */

ids_status idsi_plan_forms(idsi_partition_engine *engine);
ids_status idsi_plan_shapes(idsi_partition_engine *engine);
/* Number and places of the unknowns of a shape whose pieces are solved. */
ids_status idsi_plan_unknowns(idsi_partition_engine *engine, uint32_t shape);

/* ---- partition_expr.c -------------------------------------------------------------------- */

ids_status idsi_expr_intern(idsi_partition_engine *engine, uint32_t op, const uint32_t *args,
                            uint32_t *number);
ids_status idsi_equations_make(idsi_partition_engine *engine, uint32_t degree);
void idsi_equations_clear(ids_ctx *ctx, idsi_degree *degree);
/* Form of an expression among those of its degree; UINT32_MAX when it has none. */
uint32_t idsi_form_find(const idsi_partition_engine *engine, const idsi_expr *expr);

/* ---- partition_scratch.c ----------------------------------------------------------------- */

#define IDSI_SCRATCH_CHUNKS 32u

typedef struct idsi_scratch_chunk {
    void *room;
    char *start; /* of the room, aligned */
    size_t size;
} idsi_scratch_chunk;

/* Where a thread's working memory ends. */
typedef struct idsi_scratch_mark {
    uint32_t chunk;
    size_t used;
} idsi_scratch_mark;

/* What one thread works with. */
typedef struct idsi_scratch {
    ids_ctx *ctx;
    idsi_partition_engine *engine;
    idsi_workspace work;
    idsi_scratch_chunk chunks[IDSI_SCRATCH_CHUNKS];
    idsi_scratch_mark top;
} idsi_scratch;

ids_status idsi_scratch_init(idsi_scratch *scratch, idsi_partition_engine *engine);
void idsi_scratch_clear(idsi_scratch *scratch); /* also one that is all zeros */
/*
 * A block of residues, not cleared. It lasts until `top` is set back to what it was before; who
 * takes blocks does so at the end.
 */
ids_status idsi_scratch_take(idsi_scratch *scratch, size_t entries, uint32_t **block);
ids_status idsi_scratch_take_zero(idsi_scratch *scratch, size_t entries, uint32_t **block);

/* ---- partition_contract.c -------------------------------------------------------------------
 * A block of covectors on a Specht module has `tableaux` rows of `width` residues.
 */

/*
 * A few maps from F/I to the Specht module of a shape that is being solved, by their unknowns:
 * count x unknowns. `image` keeps their restrictions to the cores of chains, as they are needed.
 */
#define IDSI_MAP_COUNT 2u

typedef struct idsi_map_image {
    uint32_t at;      /* first unknown of the chain */
    uint32_t *values; /* IDSI_MAP_COUNT x unknowns of the core's shape */
} idsi_map_image;

typedef struct idsi_maps {
    uint32_t unknowns;
    uint32_t *values; /* IDSI_MAP_COUNT x unknowns */
    size_t image_count;
    size_t image_capacity;
    idsi_map_image *images;
} idsi_maps;

void idsi_maps_clear(ids_ctx *ctx, idsi_maps *maps);
/*
 * Values of maps on a product, negated: sums (IDSI_MAP_COUNT x width, added to). Cheaper than
 * idsi_contract_product(), since no basis of solutions is gone through.
 */
ids_status idsi_contract_maps(idsi_scratch *scratch, uint32_t shape, uint32_t expr,
                              const uint32_t *block, size_t width, idsi_maps *maps, uint32_t *sums);
/* Coefficients of the unknowns of `shape`: out (unknowns x width, added to) for a product. */
ids_status idsi_contract_product(idsi_scratch *scratch, uint32_t shape, uint32_t expr,
                                 const uint32_t *block, size_t width, uint32_t *out);
/* Values of M(shape)'s basis on an expression: out (dimension x width, overwritten). */
ids_status idsi_contract_values(idsi_scratch *scratch, uint32_t shape, uint32_t expr,
                                const uint32_t *block, size_t width, uint32_t *out);

/* ---- partition_covectors.c ----------------------------------------------------------------- */

/* A block of covectors (`tableaux` x width), and what words make of it. */
typedef struct idsi_moved {
    const idsi_term *term; /* that has the word */
    uint32_t *block;
} idsi_moved;

typedef struct idsi_covectors {
    ids_ctx *ctx;
    const idsi_partition_engine *engine;
    const idsi_skew *skew;
    size_t most_width;
    size_t width;
    uint32_t *start;
    idsi_moved *moved;
    size_t limit; /* how many may be kept, */
    size_t made;  /* have memory, */
    size_t count; /* are valid */
    size_t next;  /* to be replaced */
} idsi_covectors;

ids_status idsi_covectors_init(idsi_covectors *covectors, idsi_scratch *scratch, uint32_t shape,
                               size_t most_width);
void idsi_covectors_clear(idsi_covectors *covectors);
/* Draws a new block of random covectors, width <= most_width. */
void idsi_covectors_draw(idsi_covectors *covectors, idsi_random *random, size_t width);
/* The block with a term's word applied; valid until the next call for the same covectors. */
ids_status idsi_covectors_get(idsi_covectors *covectors, const idsi_term *term,
                              const uint32_t **block);

/* ---- partition_solve.c, partition_generators.c ------------------------------------------- */

/*
 * Solves a shape whose pieces are solved; without `basis` only its dimension is wanted. Leaves the
 * shape unsolved when *stop is set. `share` is the degree's, or NULL; the shares that are seen go
 * to `shown` unless it is NULL.
 */
ids_status idsi_shape_solve(idsi_scratch *scratch, uint32_t shape, bool basis,
                            const atomic_bool *stop, const double *share, double *shown);

/* Chooses the generators of a degree whose partitions are solved; those of lower degrees exist. */
ids_status idsi_generators_choose(idsi_scratch *scratch, uint32_t degree);

#endif
