/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Images over another presentation.
 *
 * The partition engine has all S_n-maps from the quotient of that presentation to the module of a
 * partition. A generator is a polynomial there, and its values under all maps, against random
 * covectors, are columns of a matrix whose rank is the multiplicity in the image. The same values
 * tell whether a polynomial is 0 modulo the identities.
 */
#include <string.h>

#include "realize_private.h"

ids_status idsi_base_open(ids_ctx *ctx, const ids_presentation *pres, uint32_t prime,
                          uint32_t degree, idsi_base *base)
{
    ids_status st = IDS_OK;

    base->ctx = ctx;
    IDSI_TRY(idsi_laws_create(ctx, pres, &base->laws));
    IDSI_TRY(ids_cocharacter_create(ctx, pres->sig, degree, &base->free));
    IDSI_TRY(idsi_partition_create(ctx, base->laws, prime, degree, &base->engine));
    base->engine->top_basis = true;
    IDSI_TRY(idsi_partition_solve(base->engine, degree));
done:
    return st;
}

void idsi_base_close(idsi_base *base)
{
    idsi_partition_free(base->engine);
    ids_cocharacter_free(base->free);
    idsi_laws_free(base->laws);
    *base = (idsi_base){0};
}

/* ---- monomials as expressions ---------------------------------------------------------------- */

/* The expression of a tree with its arguments by degree, the sign of that, and its labels, from 0,
 * from left to right. */
static ids_status rewrite(idsi_partition_engine *engine, const idsi_token **at, uint32_t *expr,
                          int *sign, uint8_t *label, uint32_t *count)
{
    ids_status st = IDS_OK;
    const idsi_token token = *(*at)++;
    uint32_t args[IDS_MAX_ARITY] = {0};
    uint32_t sorted[IDS_MAX_ARITY] = {0};
    uint64_t key[IDS_MAX_ARITY] = {0};
    uint8_t image[IDS_MAX_ARITY] = {0};
    uint8_t part[IDS_MAX_ARITY][IDSI_SHAPE_MAX];
    uint32_t part_count[IDS_MAX_ARITY] = {0};

    if (!idsi_is_node(token)) {
        label[(*count)++] = (uint8_t)(token - 1);
        return idsi_expr_intern(engine, UINT32_MAX, NULL, expr);
    }
    const uint32_t op = idsi_node_op(token);
    const uint32_t arity = engine->sig->ops[op].arity;
    for (uint32_t i = 0; i < arity; i++) {
        IDSI_TRY(rewrite(engine, at, &args[i], sign, part[i], &part_count[i]));
        key[i] = part_count[i];
    }
    *sign *= idsi_group_canonical(&engine->sig->ops[op].group, key, NULL, image);
    for (uint32_t i = 0; i < arity; i++) {
        sorted[i] = args[image[i]];
        memcpy(label + *count, part[image[i]], part_count[image[i]]);
        *count += part_count[image[i]];
    }
    IDSI_TRY(idsi_expr_intern(engine, op, sorted, expr));
done:
    return st;
}

typedef struct reader {
    idsi_scratch scratch;
    uint32_t shape;
    size_t tableaux;
    size_t dimension;
    size_t width;
    uint32_t *block;
    uint32_t *moved;
    uint32_t *values;
    uint32_t *sum; /* dimension x width */
} reader;

static void reader_clear(reader *r)
{
    idsi_free(r->scratch.ctx, r->block);
    idsi_free(r->scratch.ctx, r->moved);
    idsi_free(r->scratch.ctx, r->values);
    idsi_free(r->scratch.ctx, r->sum);
    idsi_scratch_clear(&r->scratch);
}

static ids_status reader_open(reader *r, ids_ctx *ctx, idsi_partition_engine *engine,
                              uint32_t shape, size_t width)
{
    ids_status st = IDS_OK;

    *r = (reader){.shape = shape, .width = width};
    r->tableaux = engine->skews.list[shape]->count;
    r->dimension = engine->spaces[shape].dimension;
    IDSI_TRY(idsi_scratch_init(&r->scratch, engine));
    IDSI_TRY(idsi_alloc_array(ctx, r->tableaux * width, sizeof *r->block, &r->block));
    IDSI_TRY(idsi_alloc_array(ctx, r->tableaux * width, sizeof *r->moved, &r->moved));
    IDSI_TRY(idsi_alloc_array(ctx, r->dimension * width, sizeof *r->values, &r->values));
    IDSI_TRY(idsi_alloc_array(ctx, r->dimension * width, sizeof *r->sum, &r->sum));
done:
    return st;
}

/* sum += the values of all maps on a polynomial, against the block. */
static ids_status add_values(reader *r, const idsi_poly *poly)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = r->scratch.engine;
    const uint32_t p = engine->prime;

    for (size_t t = 0; t < poly->count; t++) {
        const idsi_token *at = poly->tokens + poly->start[t];
        uint8_t label[IDSI_SHAPE_MAX] = {0};
        uint8_t word[IDSI_SHAPE_MAX * IDSI_SHAPE_MAX];
        uint32_t expr = 0;
        uint32_t count = 0;
        uint32_t value = 0;
        int sign = 1;
        if (!idsi_mod_rational(poly->coefficients[t], p, &value)) {
            return idsi_fail(r->scratch.ctx, IDS_ERR_UNABLE,
                             "the prime %u divides a denominator of the model; another seed gives "
                             "others",
                             p);
        }
        IDSI_TRY(rewrite(engine, &at, &expr, &sign, label, &count));
        const size_t length = idsi_seminormal_word(label, count, word);
        memcpy(r->moved, r->block, r->tableaux * r->width * sizeof *r->moved);
        idsi_seminormal_apply(&engine->seminormal, engine->skews.list[r->shape], word, length,
                              r->moved, r->width);
        IDSI_TRY(idsi_contract_values(&r->scratch, r->shape, expr, r->moved, r->width, r->values));
        value = sign < 0 ? idsi_mod_neg(value, p) : value;
        for (size_t i = 0; i < r->dimension * r->width; i++) {
            r->sum[i] = (uint32_t)((r->sum[i] + (uint64_t)value * r->values[i]) % p);
        }
    }
done:
    return st;
}

static void draw_block(reader *r, idsi_random *random)
{
    for (size_t i = 0; i < r->tableaux * r->width; i++) {
        r->block[i] = idsi_random_residue(random, r->scratch.engine->prime);
    }
}

/* ---- the image ------------------------------------------------------------------------------- */

/* A partition there: its shape, and its multiplicity with the doubts about it. */
static ids_status find_shape(const idsi_base *base, const ids_partition *partition, uint32_t *shape,
                             idsi_base_value *value)
{
    ids_status st = IDS_OK;
    static const uint8_t empty[IDSI_SHAPE_MAX] = {0};
    idsi_partition_engine *engine = base->engine;
    const double norm = idsi_laws_norm_bits(base->laws, partition->degree);
    idsi_account account = {0};
    uint64_t index = 0;
    uint64_t free = 0;

    *value = (idsi_base_value){0};
    IDSI_TRY(idsi_skews_get(&engine->skews, partition->part, empty, partition->length, shape));
    if (*shape < engine->space_count) {
        value->multiplicity = engine->spaces[*shape].dimension;
    }
    if (norm >= 0 && value->multiplicity > 0) {
        IDSI_TRY(ids_partition_rank(partition, &index));
        IDSI_TRY(ids_cocharacter_multiplicity(base->free, partition->degree, index, &free));
        IDSI_TRY(idsi_partition_account(engine, partition->part, partition->length, &account));
        value->bits = (double)free * (idsi_partition_group_bits(partition) + norm);
        value->error = idsi_blocks_error(account.blocks);
    }
done:
    return st;
}

ids_status idsi_image_over(idsi_image *image, const ids_partition *partition, uint32_t bound,
                           uint32_t *rank)
{
    ids_status st = IDS_OK;
    reader r = {.shape = 0};
    idsi_poly value;
    uint32_t shape = 0;

    idsi_poly_init(&value, image->ctx, image->model->base->sig);
    IDSI_TRY(find_shape(&image->base, partition, &shape, &image->base_value));
    if (image->base_value.multiplicity == 0) {
        goto done;
    }
    IDSI_TRY(reader_open(&r, image->ctx, image->base.engine, shape, (size_t)bound + 4));
    for (size_t g = 0; g < image->count; g++) {
        IDSI_TRY(idsi_over_tree(image->model, image->trees[g], &value));
        draw_block(&r, &image->random);
        IDSI_TRY(add_values(&r, &value));
        idsi_poly_clear(&value);
        IDSI_TRY(idsi_poll(image->ctx, NULL));
    }
    IDSI_TRY(idsi_image_eliminate(image, r.sum, r.dimension, r.width, rank));
    image->error = 4.0 / ((double)image->prime * image->prime);
done:
    idsi_poly_clear(&value);
    reader_clear(&r);
    return st;
}

/* ---- is it zero? ----------------------------------------------------------------------------- */

/*
 * A polynomial is 0 modulo the identities when all maps from the quotient are 0 on it. Mod a prime
 * there can be too many maps, when it divides a minor of the identities, and then the polynomial
 * looks as if it were not 0; or the right ones, but the prime divides the values, that is, a minor
 * of the identities and the polynomial together. So for each partition the primes with the fewest
 * maps count, and among these one where it is not 0. That is wrong only when every prime divides
 * one of the two minors.
 */
#define ZERO_PRIMES 2u

typedef struct verdict {
    size_t count; /* partitions */
    idsi_base_value *values;
    bool *zero;
} verdict;

/* A prime that divides no denominator of the polynomial. */
static uint32_t draw_prime(idsi_random *random, const uint32_t *known, size_t count,
                           const idsi_poly *poly)
{
    for (;;) {
        const uint32_t prime = idsi_prime_draw(random, known, count);
        bool good = true;
        for (size_t t = 0; good && t < poly->count; t++) {
            uint32_t residue = 0;
            good = idsi_mod_rational(poly->coefficients[t], prime, &residue);
        }
        if (good) {
            return prime;
        }
    }
}

/* Whether all maps mod the prime of the base are 0 on a polynomial. */
static ids_status read_zero(const idsi_base *base, uint32_t shape, const idsi_poly *poly,
                            idsi_random *random, bool *zero)
{
    ids_status st = IDS_OK;
    reader r = {.shape = 0};

    *zero = true;
    IDSI_TRY(reader_open(&r, base->ctx, base->engine, shape, 4));
    draw_block(&r, random);
    IDSI_TRY(add_values(&r, poly));
    for (size_t i = 0; i < r.dimension * r.width; i++) {
        *zero = *zero && r.sum[i] == 0;
    }
done:
    reader_clear(&r);
    return st;
}

static ids_status ask_prime(const idsi_base *base, const idsi_poly *poly, idsi_random *random,
                            verdict *v)
{
    ids_status st = IDS_OK;
    ids_partition partition = {0};

    idsi_partition_first(poly->degree, &partition);
    for (size_t i = 0; i < v->count; i++) {
        uint32_t shape = 0;
        bool zero = true;
        idsi_base_value now = {0};
        IDSI_TRY(find_shape(base, &partition, &shape, &now));
        if (now.multiplicity > 0) {
            IDSI_TRY(read_zero(base, shape, poly, random, &zero));
            now.error += 0x1p-57; /* that the block misses a value */
        }
        if (now.multiplicity < v->values[i].multiplicity) {
            v->values[i] = now;
            v->zero[i] = zero;
        } else if (now.multiplicity == v->values[i].multiplicity) {
            v->zero[i] = v->zero[i] && zero;
        }
        (void)idsi_partition_next(&partition);
    }
done:
    return st;
}

/* The probability that for some partition no prime tells the truth. */
static double doubt(const verdict *v, const idsi_poly *poly)
{
    const double size = idsi_sum_bits(poly->coefficients, poly->count) +
                        idsi_denominator_bits(poly->coefficients, poly->count);
    double error = 0;
    ids_partition partition = {0};

    idsi_partition_first(poly->degree, &partition);
    for (size_t i = 0; i < v->count; i++) {
        if (v->values[i].multiplicity > 0) {
            error += idsi_prime_error(2 * v->values[i].bits +
                                          idsi_partition_group_bits(&partition) + size,
                                      v->values[i].error, ZERO_PRIMES);
        }
        (void)idsi_partition_next(&partition);
    }
    return error;
}

ids_status idsi_base_is_zero(ids_ctx *ctx, const ids_presentation *pres, const idsi_poly *poly,
                             uint64_t seed, bool *zero, double *error)
{
    ids_status st = IDS_OK;
    verdict v = {.count = (size_t)ids_partition_count(poly->degree)};
    uint32_t primes[ZERO_PRIMES] = {0};
    idsi_laws *laws = NULL;
    idsi_base base = {0};
    idsi_random random;

    *zero = poly->count == 0;
    *error = 0;
    IDSI_TRY(idsi_laws_create(ctx, pres, &laws));
    if (*zero || idsi_laws_norm_bits(laws, poly->degree) < 0) {
        goto done;
    }
    IDSI_TRY(idsi_alloc_array(ctx, v.count, sizeof *v.values, &v.values));
    IDSI_TRY(idsi_alloc_array(ctx, v.count, sizeof *v.zero, &v.zero));
    for (size_t i = 0; i < v.count; i++) {
        v.values[i].multiplicity = UINT32_MAX;
    }
    idsi_random_seed(&random, seed);
    for (uint32_t k = 0; k < ZERO_PRIMES; k++) {
        primes[k] = draw_prime(&random, primes, k, poly);
        IDSI_TRY(idsi_base_open(ctx, pres, primes[k], poly->degree, &base));
        IDSI_TRY(ask_prime(&base, poly, &random, &v));
        idsi_base_close(&base);
    }
    *zero = true;
    for (size_t i = 0; i < v.count; i++) {
        *zero = *zero && v.zero[i];
    }
    *error = doubt(&v, poly);
done:
    idsi_base_close(&base);
    idsi_laws_free(laws);
    idsi_free(ctx, v.values);
    idsi_free(ctx, v.zero);
    return st;
}
