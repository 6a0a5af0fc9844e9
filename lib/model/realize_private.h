/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Models that are open, and what the answers ask of them.
 */
#ifndef IDSI_REALIZE_PRIVATE_H
#define IDSI_REALIZE_PRIVATE_H

#include <idspan/model.h>

#include "../engine/partition_private.h"
#include "../young/young_private.h"
#include "model_private.h"

struct ids_model {
    ids_ctx *ctx;
    const ids_presentation *pres;
    const idsi_model *decl;
    ids_algebra *algebra;                   /* of an algebra: owned */
    uint32_t operation[IDS_MAX_OPERATIONS]; /* index of each operation there */
    ids_presentation *base;                 /* over another presentation: owned */
    idsi_poly *value; /* each operation as a polynomial there, label i being argument i */
    double doubt;     /* probability that one of these lacks the symmetry it is to have */
};

/* A multilinear tree as a polynomial over the other presentation; `value` has no terms. (over.c) */
ids_status idsi_over_tree(const ids_model *model, const idsi_token *tree, idsi_poly *value);
/* Reads the polynomials; the other presentation is there. */
ids_status idsi_over_open(ids_model *model);

/* ---- sums of words (words.c) ------------------------------------------------------------------
 * A word is a number with five bits a letter, the first letter lowest: the letter, from 0, and
 * above it a bit for the involution. Letters can be odd: then a word with a letter c times stands
 * for the alternating sum over all ways to put c different letters in its places.
 */
__extension__ typedef unsigned __int128 idsi_key;

#define IDSI_KEY_BITS 5u
#define IDSI_KEY_STAR 16u
#define IDSI_KEY_LETTERS 16u

/* Sorted by word, residues that are not 0. */
typedef struct idsi_wordsum {
    size_t count;
    idsi_key *keys;
    uint32_t *values;
} idsi_wordsum;

/* The words of all operations, with coefficients mod a prime. */
typedef struct idsi_word_operations {
    ids_ctx *ctx;
    const ids_model *model;
    uint32_t prime;
    bool odd;
    uint32_t *coefficient[IDS_MAX_OPERATIONS];
} idsi_word_operations;

/* *good is false, and nothing is made, when the prime divides a denominator. */
ids_status idsi_words_init(idsi_word_operations *words, ids_ctx *ctx, const ids_model *model,
                           uint32_t prime, bool odd, bool *good);
void idsi_words_clear(idsi_word_operations *words);
void idsi_wordsum_clear(ids_ctx *ctx, idsi_wordsum *sum);
ids_status idsi_wordsum_letter(ids_ctx *ctx, uint32_t letter, idsi_wordsum *sum);
/* How often each letter stands in a word of so many. */
void idsi_key_content(idsi_key key, uint32_t length, uint8_t content[IDSI_KEY_LETTERS]);
/* An operation on sums; length[i] is that of the words of argument i. `sum` must be new. */
ids_status idsi_words_product(const idsi_word_operations *words, uint32_t op,
                              const idsi_wordsum *const *arguments, const uint32_t *length,
                              idsi_wordsum *sum);
/* A tree with labels from 1, multiplied out. */
ids_status idsi_words_tree(const idsi_word_operations *words, const idsi_token *tree,
                           idsi_wordsum *sum);
/*
 * Bits of an integer that a sum of trees with integer coefficients is, up to sign, in any one word
 * after multiplying out all denominators of the model. terms: log2 of the sum of the absolute
 * values of the coefficients.
 */
double idsi_words_bits(const ids_model *model, uint32_t degree, double terms);

/* ---- images (image.c) -------------------------------------------------------------------------
 * How often the module of a partition occurs in the image of F(n) in a model, which is F(n) without
 * what holds there. All S_n-maps from the image to the module are known by their values on
 * generators of F(n)/I(n): products of the generators of lower degrees that the partition engine
 * has chosen. For each kind of model there is a way to draw maps at random.
 */
/* Another presentation, solved mod a prime. */
typedef struct idsi_base {
    ids_ctx *ctx;
    idsi_laws *laws;
    idsi_partition_engine *engine;
    ids_cocharacter *free;
} idsi_base;

/*
 * A multiplicity in its quotient, and how it can be too large: bits of a minor that the prime may
 * divide, and what random covectors can miss. Both are 0 where it is certain.
 */
typedef struct idsi_base_value {
    uint32_t multiplicity;
    double bits;
    double error;
} idsi_base_value;

typedef struct idsi_image {
    ids_ctx *ctx;
    const ids_model *model;
    idsi_partition_engine *engine; /* borrowed; all shapes below `degree` are solved */
    uint32_t prime;
    uint32_t degree;
    size_t count; /* generators, their labels from left to right */
    size_t capacity;
    idsi_token (*trees)[2 * IDSI_SHAPE_MAX];
    idsi_random random;
    idsi_workspace work;
    double error; /* probability that random choices have missed a map, of the last rank */
    idsi_word_operations words; /* in words */
    bool exact;                 /* in an algebra: all basis tuples instead of random points */
    idsi_residues *residues;    /* in an algebra, */
    size_t point_count;         /* and the values at points that were drawn so far */
    size_t point_capacity;
    uint32_t **points;          /* degree! x generators x dimension residues */
    idsi_base base;             /* over a presentation, */
    idsi_base_value base_value; /* and that of the last rank: a wrong one makes the rank wrong,
                                 * in either direction */
} idsi_image;

/* *good is false, and there is no result, when the prime divides a denominator of the model. */
ids_status idsi_image_create(ids_ctx *ctx, const ids_model *model, idsi_partition_engine *engine,
                             uint32_t degree, bool *good, idsi_image **image);
void idsi_image_free(idsi_image *image);
/* The multiplicity in the image, which is at most `bound`. */
ids_status idsi_image_rank(idsi_image *image, const ids_partition *partition, uint32_t bound,
                           uint32_t *rank);
/* log2 of a bound for the norm of what a generator is in the model, as integers. */
double idsi_image_bits(const idsi_image *image);
/* Rank of a matrix, row-major; it is used up. */
ids_status idsi_image_eliminate(idsi_image *image, uint32_t *rows, size_t count, size_t columns,
                                uint32_t *rank);

/* (image_words.c) */
ids_status idsi_image_words(idsi_image *image, const idsi_skew *skew, uint32_t bound,
                            uint32_t *rank);

/* (image_algebra.c) */
ids_status idsi_image_algebra(idsi_image *image, const idsi_skew *skew, uint32_t bound,
                              uint32_t *rank);

/* (image_over.c) */
ids_status idsi_base_open(ids_ctx *ctx, const ids_presentation *pres, uint32_t prime,
                          uint32_t degree, idsi_base *base);
void idsi_base_close(idsi_base *base); /* a zeroed one is fine */
ids_status idsi_image_over(idsi_image *image, const ids_partition *partition, uint32_t bound,
                           uint32_t *rank);
/*
 * Whether a polynomial is 0 modulo the identities of a presentation, and the probability that this
 * is wrong, 0 when it is certain.
 */
ids_status idsi_base_is_zero(ids_ctx *ctx, const ids_presentation *pres, const idsi_poly *poly,
                             uint64_t seed, bool *zero, double *error);

/* (holds.c) ids_model_holds() with a seed, and the probability that the answer is wrong; the doubt
 * about the model itself is not in it. */
ids_status idsi_model_holds(ids_ctx *ctx, const ids_model *model, ids_role role, size_t index,
                            uint64_t seed, bool *holds, double *error);

/* ---- samples (sample_words.c, sample_algebra.c) ------------------------------------------------
 * Trees with repeated letters, evaluated: a row of `width` residues each, such that a combination
 * of trees is 0 in the model exactly when that of the rows is, but for bad luck with random
 * choices. Odd letters as in words.
 */
typedef struct idsi_sample {
    ids_ctx *ctx;
    const ids_model *model;
    uint32_t prime;
    bool odd;
    uint32_t degree;
    uint32_t variables;
    const uint8_t *power; /* how often each letter occurs */
    size_t count;
    const idsi_token *const *trees;
    size_t width;
    uint64_t seed;
    uint32_t *out; /* count x width */
} idsi_sample;

/* *good is false when the prime divides a denominator of the model. */
ids_status idsi_sample_words(const idsi_sample *sample, bool *good);
ids_status idsi_sample_algebra(const idsi_sample *sample, bool *good);

/* A residue that looks random, the same for the same numbers. */
static inline uint32_t idsi_sample_mix(uint64_t seed, uint64_t a, uint64_t b, uint32_t p)
{
    uint64_t z = seed ^ a * UINT64_C(0x9E3779B97F4A7C15) ^ b * UINT64_C(0xC2B2AE3D27D4EB4F);
    z = (z ^ z >> 30) * UINT64_C(0xBF58476D1CE4E5B9);
    z = (z ^ z >> 27) * UINT64_C(0x94D049BB133111EB);
    return (uint32_t)((z ^ z >> 31) % p);
}

#endif
