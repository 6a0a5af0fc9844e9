/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Images of the free algebra in models: generators, and what all kinds share.
 *
 * F(n)/I(n) is generated, as a module of S_n, by the products of generators of lower degrees, since
 * the identities hold in the model and so nothing is lost by leaving out what they express.
 */
#include <string.h>

#include "realize_private.h"

/* ---- generators ------------------------------------------------------------------------------ */

/* Writes an expression as a tree with labels from left to right. */
static void write_expr(const idsi_partition_engine *engine, uint32_t expr, idsi_token *tree,
                       size_t *length, uint32_t *label)
{
    const idsi_expr *entry = &engine->exprs[expr];
    if (entry->op == UINT32_MAX) {
        tree[(*length)++] = ++*label;
        return;
    }
    tree[(*length)++] = idsi_node(entry->op);
    for (uint32_t i = 0; i < engine->sig->ops[entry->op].arity; i++) {
        write_expr(engine, entry->arg[i], tree, length, label);
    }
}

/* All products of a form, of generators from argument `place` on. */
static ids_status list_products(idsi_image *image, const idsi_form *form, uint32_t place,
                                uint32_t *arg)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = image->engine;
    const ids_symmetry symmetry = engine->sig->ops[form->op].group.symmetry;
    const bool ordered = place > 0 && form->degree[place] == form->degree[place - 1] &&
                         (symmetry == IDS_SYMMETRY_COMMUTATIVE ||
                          symmetry == IDS_SYMMETRY_ALTERNATING);

    if (place == form->arity) {
        size_t length = 1;
        uint32_t label = 0;
        IDSI_TRY(idsi_grow(image->ctx, image->count, &image->capacity, sizeof *image->trees,
                           &image->trees));
        idsi_token *tree = image->trees[image->count++];
        tree[0] = idsi_node(form->op);
        for (uint32_t i = 0; i < form->arity; i++) {
            write_expr(engine, arg[i], tree, &length, &label);
        }
        return IDS_OK;
    }
    const idsi_degree *degree = &engine->degree[form->degree[place]];
    for (size_t g = 0; g < degree->generator_count; g++) {
        arg[place] = degree->generators[g];
        if (!ordered || arg[place - 1] <= arg[place]) {
            IDSI_TRY(list_products(image, form, place + 1, arg));
        }
    }
done:
    return st;
}

static ids_status list_generators(idsi_image *image)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = image->engine;
    const idsi_degree *degree = &engine->degree[image->degree];
    idsi_scratch scratch = {.ctx = image->ctx, .engine = engine};
    uint32_t arg[IDS_MAX_ARITY] = {0};

    IDSI_TRY(idsi_workspace_init(&scratch.work, image->ctx));
    for (uint32_t d = 1; d < image->degree; d++) {
        IDSI_TRY(idsi_generators_choose(&scratch, d));
    }
    for (size_t k = 0; k < degree->form_count; k++) {
        IDSI_TRY(list_products(image, &degree->forms[k], 0, arg));
    }
done:
    if (scratch.work.ctx != NULL) {
        idsi_workspace_clear(&scratch.work);
    }
    return st;
}

/* ---- the image ------------------------------------------------------------------------------- */

ids_status idsi_image_create(ids_ctx *ctx, const ids_model *model, idsi_partition_engine *engine,
                             uint32_t degree, bool *good, idsi_image **image)
{
    ids_status st = IDS_OK;
    idsi_image *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->model = model;
    made->engine = engine;
    made->prime = engine->prime;
    made->degree = degree;
    idsi_random_seed(&made->random, engine->prime + degree);
    IDSI_TRY(idsi_workspace_init(&made->work, ctx));
    IDSI_TRY(idsi_words_init(&made->words, ctx, model, engine->prime, false, good));
    if (!*good) {
        goto done;
    }
    IDSI_TRY(list_generators(made));
    *image = made;
    made = NULL;
done:
    idsi_image_free(made);
    return st;
}

void idsi_image_free(idsi_image *image)
{
    if (image != NULL) {
        if (image->words.ctx != NULL) {
            idsi_words_clear(&image->words);
        }
        if (image->work.ctx != NULL) {
            idsi_workspace_clear(&image->work);
        }
        idsi_free(image->ctx, image->trees);
        idsi_free(image->ctx, image);
    }
}

ids_status idsi_image_eliminate(idsi_image *image, uint32_t *rows, size_t count, size_t columns,
                                uint32_t *rank)
{
    ids_status st = IDS_OK;
    idsi_dense_echelon *echelon = NULL;

    IDSI_TRY(idsi_dense_echelon_create(image->ctx, image->prime, columns, &echelon));
    IDSI_TRY(idsi_dense_echelon_add(echelon, rows, count, NULL));
    *rank = (uint32_t)idsi_dense_echelon_rank(echelon);
done:
    idsi_dense_echelon_free(echelon);
    return st;
}

ids_status idsi_image_rank(idsi_image *image, const ids_partition *partition, uint32_t bound,
                           uint32_t *rank)
{
    ids_status st = IDS_OK;
    static const uint8_t empty[IDSI_SHAPE_MAX] = {0};
    uint32_t shape = 0;

    *rank = 0;
    image->error = 0;
    if (bound == 0) {
        return IDS_OK;
    }
    if (image->degree == 1) {
        *rank = 1;
        return IDS_OK;
    }
    IDSI_TRY(idsi_skews_get(&image->engine->skews, partition->part, empty, partition->length,
                            &shape));
    IDSI_TRY(idsi_image_words(image, image->engine->skews.list[shape], bound, rank));
    if (*rank > bound) {
        st = idsi_fail(image->ctx, IDS_ERR_INTERNAL,
                       "degree %u: a multiplicity is %u in the model, %u without it",
                       image->degree, *rank, bound);
    }
done:
    return st;
}

double idsi_image_bits(const idsi_image *image)
{
    return idsi_words_bits(image->model, image->degree, 0);
}
