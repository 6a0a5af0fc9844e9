/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Images of the free algebra in models: generators, and what all kinds share.
 *
 * F(n)/I(n) is generated, as a module of S_n, by the products of generators of lower degrees, since
 * the identities hold in the model and so nothing is lost by leaving out what they express.
 */
#include <math.h>
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
    const bool ordered =
        place > 0 && place < form->arity && form->degree[place] == form->degree[place - 1] &&
        (symmetry == IDS_SYMMETRY_COMMUTATIVE || symmetry == IDS_SYMMETRY_ALTERNATING);

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
    idsi_scratch scratch;
    uint32_t arg[IDS_MAX_ARITY] = {0};

    IDSI_TRY(idsi_scratch_init(&scratch, engine));
    for (uint32_t d = 1; d < image->degree; d++) {
        IDSI_TRY(idsi_generators_choose(&scratch, d));
    }
    for (size_t k = 0; k < degree->form_count; k++) {
        IDSI_TRY(list_products(image, &degree->forms[k], 0, arg));
    }
done:
    idsi_scratch_clear(&scratch);
    return st;
}

/* ---- the image ------------------------------------------------------------------------------- */

/* What the kind of the model needs. */
static ids_status open_kind(idsi_image *image, bool *good)
{
    const ids_model *model = image->model;
    switch (model->decl->kind) {
    case IDS_MODEL_ASSOCIATIVE:
        return idsi_words_init(&image->words, image->ctx, model, image->prime, false, good);
    case IDS_MODEL_ALGEBRA:
        return idsi_residues_create(image->ctx, model->algebra, image->prime, good,
                                    &image->residues);
    case IDS_MODEL_OVER:
        break;
    }
    return idsi_base_open(image->ctx, model->base, image->prime, image->degree, &image->base);
}

ids_status idsi_image_create(ids_ctx *ctx, const ids_model *model, idsi_partition_engine *engine,
                             uint32_t degree, bool *good, idsi_image **image)
{
    ids_status st = IDS_OK;
    idsi_image *made = NULL;

    *good = true;
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->model = model;
    made->engine = engine;
    made->prime = engine->prime;
    made->degree = degree;
    idsi_random_seed(&made->random, engine->prime + degree);
    IDSI_TRY(idsi_workspace_init(&made->work, ctx));
    IDSI_TRY(open_kind(made, good));
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
        for (size_t i = 0; i < image->point_count; i++) {
            idsi_free(image->ctx, image->points[i]);
        }
        idsi_free(image->ctx, image->points);
        idsi_residues_free(image->residues);
        idsi_base_close(&image->base);
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

static ids_status rank_of_kind(idsi_image *image, const ids_partition *partition, uint32_t bound,
                               uint32_t *rank)
{
    ids_status st = IDS_OK;
    static const uint8_t empty[IDSI_SHAPE_MAX] = {0};
    uint32_t shape = 0;

    if (image->model->decl->kind == IDS_MODEL_OVER) {
        return idsi_image_over(image, partition, bound, rank);
    }
    IDSI_TRY(
        idsi_skews_get(&image->engine->skews, partition->part, empty, partition->length, &shape));
    const idsi_skew *skew = image->engine->skews.list[shape];
    if (image->model->decl->kind == IDS_MODEL_ALGEBRA) {
        return idsi_image_algebra(image, skew, bound, rank);
    }
    st = idsi_image_words(image, skew, bound, rank);
done:
    return st;
}

ids_status idsi_image_rank(idsi_image *image, const ids_partition *partition, uint32_t bound,
                           uint32_t *rank)
{
    ids_status st = IDS_OK;

    *rank = 0;
    image->error = 0;
    image->base_value = (idsi_base_value){0};
    if (bound == 0) {
        return IDS_OK;
    }
    if (image->degree == 1) {
        *rank = 1;
        return IDS_OK;
    }
    IDSI_TRY(rank_of_kind(image, partition, bound, rank));
    if (*rank > bound) {
        st = idsi_fail(image->ctx, IDS_ERR_INTERNAL,
                       "degree %u: a multiplicity is %u in the model, %u without it", image->degree,
                       *rank, bound);
    }
done:
    return st;
}

/* ---- size of the numbers --------------------------------------------------------------------- */

/* The value of a product of basis elements, multiplied by the common denominators, has norm at most
 * `most`; a generator has values at dimension^degree tuples. */
static double algebra_bits(const ids_model *model, uint32_t degree)
{
    double most = 1;
    double denominators = 0;

    for (size_t op = 0; op < model->pres->sig->count; op++) {
        const idsi_table *table = &model->algebra->tables[model->operation[op]];
        double sum = 0;
        for (size_t i = 0; i < table->count; i++) {
            const bool same = i > 0 && memcmp(table->list[i].argument, table->list[i - 1].argument,
                                              sizeof table->list[i].argument) == 0;
            sum = same ? sum : 0;
            sum += fabs((double)table->list[i].numerator) / (double)table->list[i].denominator;
            most = fmax(most, sum);
            denominators += log2((double)table->list[i].denominator);
        }
    }
    return 0.5 * degree * log2(model->algebra->dimension) +
           (degree - 1.0) * (log2(most) + denominators) + 1e-6;
}

/* A polynomial over another presentation: the sum of its coefficients, as for words. */
static double over_bits(const ids_model *model, uint32_t degree)
{
    double bits = 0;

    for (size_t op = 0; op < model->pres->sig->count; op++) {
        const idsi_poly *poly = &model->value[op];
        bits += (degree - 1.0) * (idsi_denominator_bits(poly->coefficients, poly->count) +
                                  fmax(0, idsi_sum_bits(poly->coefficients, poly->count)) + 1e-6);
    }
    return bits;
}

double idsi_image_bits(const idsi_image *image)
{
    switch (image->model->decl->kind) {
    case IDS_MODEL_ALGEBRA:
        return algebra_bits(image->model, image->degree);
    case IDS_MODEL_OVER:
        return over_bits(image->model, image->degree);
    case IDS_MODEL_ASSOCIATIVE:
        break;
    }
    return idsi_words_bits(image->model, image->degree, 0);
}
