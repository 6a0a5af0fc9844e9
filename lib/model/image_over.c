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

ids_status idsi_image_over_open(ids_ctx *ctx, const ids_model *model, uint32_t prime,
                                uint32_t degree, idsi_laws **laws, idsi_partition_engine **base)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_laws_create(ctx, model->base, laws));
    IDSI_TRY(idsi_partition_create(ctx, *laws, prime, degree, base));
    (*base)->top_basis = true;
    IDSI_TRY(idsi_partition_solve(*base, degree));
done:
    return st;
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

/* ---- answers --------------------------------------------------------------------------------- */

static ids_status find_shape(idsi_partition_engine *base, const ids_partition *partition,
                             uint32_t *shape, uint32_t *dimension)
{
    ids_status st = IDS_OK;
    static const uint8_t empty[IDSI_SHAPE_MAX] = {0};

    IDSI_TRY(idsi_skews_get(&base->skews, partition->part, empty, partition->length, shape));
    *dimension = *shape < base->space_count ? base->spaces[*shape].dimension : 0;
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
    uint32_t dimension = 0;
    idsi_account account = {0};

    idsi_poly_init(&value, image->ctx, image->model->base->sig);
    IDSI_TRY(find_shape(image->base, partition, &shape, &dimension));
    if (dimension == 0) {
        goto done;
    }
    IDSI_TRY(reader_open(&r, image->ctx, image->base, shape, (size_t)bound + 4));
    for (size_t g = 0; g < image->count; g++) {
        IDSI_TRY(idsi_over_tree(image->model, image->trees[g], &value));
        draw_block(&r, &image->random);
        IDSI_TRY(add_values(&r, &value));
        idsi_poly_clear(&value);
        IDSI_TRY(idsi_poll(image->ctx, NULL));
    }
    IDSI_TRY(idsi_image_eliminate(image, r.sum, r.dimension, r.width, rank));
    IDSI_TRY(idsi_partition_account(image->base, partition->part, partition->length, &account));
    image->error = idsi_blocks_error(account.blocks) + 4.0 / ((double)image->prime * image->prime);
done:
    idsi_poly_clear(&value);
    reader_clear(&r);
    return st;
}

ids_status idsi_over_vanishes(ids_ctx *ctx, idsi_partition_engine *base, const idsi_poly *poly,
                              bool *zero)
{
    ids_status st = IDS_OK;
    ids_partition partition = {0};
    idsi_random random;

    *zero = true;
    idsi_random_seed(&random, base->prime);
    idsi_partition_first(poly->degree, &partition);
    do {
        reader r = {.shape = 0};
        uint32_t shape = 0;
        uint32_t dimension = 0;
        st = find_shape(base, &partition, &shape, &dimension);
        if (st == IDS_OK && dimension > 0) {
            st = reader_open(&r, ctx, base, shape, 4);
            if (st == IDS_OK) {
                draw_block(&r, &random);
                st = add_values(&r, poly);
            }
            for (size_t i = 0; st == IDS_OK && i < r.dimension * r.width; i++) {
                *zero = *zero && r.sum[i] == 0;
            }
            reader_clear(&r);
        }
    } while (st == IDS_OK && *zero && idsi_partition_next(&partition));
    return st;
}
