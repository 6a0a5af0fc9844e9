/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Values of maps on products, against blocks of covectors.
 *
 * Let r be a covector on the Specht module of the shape t, and op(x1, .., xk) a product with labels
 * from left to right. In the basis of tableaux, r is a sum over chains of shapes of covectors on
 * the pieces' modules, found at the addresses that idsi_cut knows. So r(phi(op(x1, .., xk))) has,
 * for the unknown that belongs to a chain and basis maps m1 (x) .. (x) mk, the coefficient
 * r(m1(x1) (x) .. (x) mk(xk)).
 *
 * The arguments other than the core are peeled off one after the other: their values are known
 * matrices (rows: basis maps, columns: tableaux), one product each, and the results widen the block
 * of covectors on the rest. The core takes the widened block at once. Its own values come from a
 * stored matrix, or again from its product and the basis of solutions of its shape.
 *
 * When only the values of a few given maps are wanted, their unknowns take the place of the basis:
 * what they are on a core behind peeled letters is one vector of the core's own unknowns, so the
 * product with the core's basis of solutions is saved.
 *
 * Solutions and stored values are kept negated, because the products subtract.
 */
#include <string.h>

#include "partition_private.h"

/* A value matrix is stored when it has no more entries, and all together no more bytes. */
#define STORE_ENTRIES (UINT64_C(1) << 20)
#define STORE_BYTES (UINT64_C(1) << 30)

/* ---- stored values ----------------------------------------------------------------------- */

static size_t value_place(const idsi_partition_engine *engine, uint32_t shape, uint32_t expr)
{
    uint64_t hash = ((uint64_t)shape << 32 | expr) * UINT64_C(0x9E3779B97F4A7C15);
    /* the high bits, which the whole key enters */
    size_t at = (size_t)(hash >> 32) & (engine->value_slots - 1);
    while (engine->values[at].matrix != NULL &&
           (engine->values[at].shape != shape || engine->values[at].expr != expr)) {
        at = (at + 1) & (engine->value_slots - 1);
    }
    return at;
}

static ids_status grow_values(idsi_partition_engine *engine)
{
    ids_status st = IDS_OK;
    size_t count = engine->value_slots == 0 ? 1024 : 2 * engine->value_slots;
    idsi_value *old = engine->values;
    size_t old_count = engine->value_slots;
    idsi_value *values = NULL;

    IDSI_TRY(idsi_alloc_array(engine->ctx, count, sizeof *values, &values));
    engine->values = values;
    engine->value_slots = count;
    for (size_t i = 0; i < old_count; i++) {
        if (old[i].matrix != NULL) {
            values[value_place(engine, old[i].shape, old[i].expr)] = old[i];
        }
    }
    idsi_free(engine->ctx, old);
done:
    return st;
}

static const idsi_left *find_value(idsi_partition_engine *engine, uint32_t shape, uint32_t expr)
{
    const idsi_left *matrix = NULL;
    pthread_mutex_lock(&engine->lock);
    if (engine->value_slots > 0) {
        matrix = engine->values[value_place(engine, shape, expr)].matrix;
    }
    pthread_mutex_unlock(&engine->lock);
    return matrix;
}

static void free_value(ids_ctx *ctx, idsi_left *value)
{
    if (value != NULL) {
        idsi_left_clear(ctx, value);
        idsi_free(ctx, value);
    }
}

/* Stores a matrix, while there is room for more, unless another thread was first; *matrix is then
 * the stored one. *owned: the matrix when it was not stored. */
static ids_status store_value(idsi_partition_engine *engine, uint32_t shape, uint32_t expr,
                              idsi_left **matrix, idsi_left **owned)
{
    ids_status st = IDS_OK;

    pthread_mutex_lock(&engine->lock);
    if (engine->value_bytes >= STORE_BYTES) {
        *owned = *matrix;
        goto done;
    }
    if (2 * (engine->value_count + 1) > engine->value_slots) {
        IDSI_TRY(grow_values(engine));
    }
    idsi_value *value = &engine->values[value_place(engine, shape, expr)];
    if (value->matrix != NULL) {
        free_value(engine->ctx, *matrix);
        *matrix = value->matrix;
    } else {
        *value = (idsi_value){shape, expr, *matrix};
        engine->value_count++;
        engine->value_bytes += idsi_left_bytes((*matrix)->m, (*matrix)->k);
    }
done:
    pthread_mutex_unlock(&engine->lock);
    return st;
}

/* Values on an expression, computed from its product. */
static ids_status make_value(idsi_scratch *s, uint32_t shape, uint32_t expr, idsi_left **value)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = s->engine;
    uint32_t tableaux = engine->skews.list[shape]->count;
    uint32_t dimension = engine->spaces[shape].dimension;
    size_t entries = (size_t)dimension * tableaux;
    idsi_scratch_mark mark = s->top;
    uint32_t *identity = NULL;
    uint32_t *values = NULL;
    idsi_left *made = NULL;

    IDSI_TRY(idsi_scratch_take_zero(s, (size_t)tableaux * tableaux, &identity));
    IDSI_TRY(idsi_scratch_take(s, entries, &values));
    IDSI_TRY(idsi_alloc_array(s->ctx, 1, sizeof *made, &made));
    for (size_t i = 0; i < tableaux; i++) {
        identity[i * tableaux + i] = 1;
    }
    IDSI_TRY(idsi_contract_values(s, shape, expr, identity, tableaux, values));
    for (size_t i = 0; i < entries; i++) {
        values[i] = idsi_mod_neg(values[i], engine->prime);
    }
    IDSI_TRY(idsi_left_init(s->ctx, engine->prime, dimension, tableaux, values, tableaux, made));
    *value = made;
    made = NULL;
done:
    s->top = mark;
    idsi_free(s->ctx, made);
    return st;
}

/* Values on an expression as a matrix, computed when it is not stored; *owned: to be freed. */
static ids_status get_value(idsi_scratch *s, uint32_t shape, uint32_t expr,
                            const idsi_left **matrix, idsi_left **owned)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = s->engine;
    idsi_left *made = NULL;

    *owned = NULL;
    *matrix = find_value(engine, shape, expr);
    if (*matrix != NULL) {
        return IDS_OK;
    }
    IDSI_TRY(make_value(s, shape, expr, &made));
    if (made->m * made->k <= STORE_ENTRIES) {
        IDSI_TRY(store_value(engine, shape, expr, &made, owned));
    } else {
        *owned = made;
    }
    *matrix = made;
    made = NULL;
done:
    free_value(s->ctx, made);
    return st;
}

/* ---- peeling ----------------------------------------------------------------------------- */

/* What is being contracted: arguments first .. last of a product, core among them. */
typedef struct contraction {
    idsi_scratch *s;
    const idsi_form *form;
    const uint32_t *arg;
    uint32_t *out;   /* where the next unknown's coefficients go; NULL with maps */
    idsi_maps *maps; /* NULL: all coefficients are wanted */
    uint32_t at;     /* with maps: the next unknown */
    size_t width;    /* with maps: of the block at the beginning */
    uint32_t *sums;
} contraction;

static ids_status contract(contraction *c, uint32_t shape, uint32_t first, uint32_t last,
                           const uint32_t *block, size_t width);

static bool is_letter(const idsi_partition_engine *engine, uint32_t expr)
{
    return engine->exprs[expr].op == UINT32_MAX;
}

/* Moves rows: to[(i * b + j)] = from[(j * a + i)], each row `width` long, i < a, j < b. */
static void exchange_indices(const uint32_t *from, size_t a, size_t b, size_t width, uint32_t *to)
{
    for (size_t i = 0; i < a; i++) {
        for (size_t j = 0; j < b; j++) {
            memcpy(to + (i * b + j) * width, from + (j * a + i) * width, width * sizeof *to);
        }
    }
}

/*
 * Multiplies the peeled piece's values (dimension x count) into the gathered block
 * (count x rest x width) and turns the result into rest x dimension x width.
 */
static ids_status apply_value(contraction *c, uint32_t piece, uint32_t expr,
                              const uint32_t *gathered, size_t rest, size_t width, uint32_t *wide)
{
    ids_status st = IDS_OK;
    idsi_scratch *s = c->s;
    idsi_partition_engine *engine = s->engine;
    size_t dimension = engine->spaces[piece].dimension;
    const idsi_left *value = NULL;
    idsi_left *owned = NULL;
    idsi_scratch_mark mark = s->top;
    uint32_t *product = NULL;

    IDSI_TRY(get_value(s, piece, expr, &value, &owned));
    IDSI_TRY(idsi_scratch_take_zero(s, dimension * rest * width, &product));
    idsi_left_mul_sub(&s->work, engine->prime, value, rest * width, gathered, rest * width, product,
                      rest * width);
    exchange_indices(product, rest, dimension, width, wide);
done:
    s->top = mark;
    free_value(s->ctx, owned);
    return st;
}

/* One cut: peels its upper (or lower) piece and contracts the other. */
static ids_status peel(contraction *c, const idsi_cut *cut, bool upper, uint32_t first,
                       uint32_t last, const uint32_t *block, size_t width)
{
    ids_status st = IDS_OK;
    idsi_scratch *s = c->s;
    idsi_partition_engine *engine = s->engine;
    uint32_t piece = upper ? cut->high : cut->low;
    uint32_t rest_shape = upper ? cut->low : cut->high;
    uint32_t expr = c->arg[upper ? last : first];
    size_t count = upper ? cut->high_count : cut->low_count;
    size_t rest = upper ? cut->low_count : cut->high_count;
    size_t dimension = engine->spaces[piece].dimension;
    idsi_scratch_mark mark = s->top;
    uint32_t *gathered = NULL; /* count x rest x width */
    uint32_t *wide = NULL;     /* rest x dimension x width */

    if (dimension == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_scratch_take(s, count * rest * width, &gathered));
    for (size_t i = 0; i < cut->low_count; i++) {
        const uint32_t *from = block + (size_t)cut->start[i] * width;
        if (upper) {
            for (size_t j = 0; j < cut->high_count; j++) {
                memcpy(gathered + (j * rest + i) * width, from + j * width, width * sizeof *from);
            }
        } else {
            memcpy(gathered + i * rest * width, from, rest * width * sizeof *from);
        }
    }
    uint32_t next_first = upper ? first : first + 1;
    uint32_t next_last = upper ? last - 1 : last;
    if (is_letter(engine, expr)) {
        IDSI_TRY(contract(c, rest_shape, next_first, next_last, gathered, width));
    } else {
        IDSI_TRY(idsi_scratch_take(s, rest * dimension * width, &wide));
        IDSI_TRY(apply_value(c, piece, expr, gathered, rest, width, wide));
        IDSI_TRY(contract(c, rest_shape, next_first, next_last, wide, dimension * width));
    }
done:
    s->top = mark;
    return st;
}

/* The maps' restrictions to the core of the chain at hand, whose other arguments are letters. */
static ids_status map_image(contraction *c, uint32_t shape, const uint32_t **image)
{
    ids_status st = IDS_OK;
    idsi_scratch *s = c->s;
    const idsi_space *space = &s->engine->spaces[shape];
    idsi_maps *maps = c->maps;
    idsi_scratch_mark mark = s->top;
    uint32_t *solution = NULL;

    for (size_t i = 0; i < maps->image_count; i++) {
        if (maps->images[i].at == c->at) {
            *image = maps->images[i].values;
            return IDS_OK;
        }
    }
    IDSI_TRY(idsi_grow(s->ctx, maps->image_count, &maps->image_capacity, sizeof *maps->images,
                       &maps->images));
    idsi_map_image *made = &maps->images[maps->image_count];
    *made = (idsi_map_image){.at = c->at};
    maps->image_count++;
    IDSI_TRY(idsi_alloc_array(s->ctx, (size_t)IDSI_MAP_COUNT * space->unknowns,
                              sizeof *made->values, &made->values));
    IDSI_TRY(idsi_scratch_take(s, (size_t)space->dimension * space->unknowns, &solution));
    for (size_t i = 0; i < space->dimension; i++) {
        idsi_left_row(&space->solution, s->engine->prime, i, solution + i * space->unknowns);
    }
    idsi_dense_mul_sub(&s->work, s->engine->prime, IDSI_MAP_COUNT, space->unknowns,
                       space->dimension, maps->values + c->at, maps->unknowns, solution,
                       space->unknowns, made->values, space->unknowns);
    *image = made->values;
done:
    s->top = mark;
    return st;
}

/* Adds what a chain's core contributes to the sums, all peeled arguments being done. */
static ids_status core_maps(contraction *c, uint32_t shape, uint32_t expr, const uint32_t *block,
                            size_t width)
{
    ids_status st = IDS_OK;
    idsi_scratch *s = c->s;
    idsi_partition_engine *engine = s->engine;
    const idsi_space *space = &engine->spaces[shape];
    size_t peeled = width / c->width;
    size_t unknowns = space->dimension * peeled;
    idsi_scratch_mark mark = s->top;
    uint32_t *values = NULL;
    const uint32_t *image = NULL;

    if (peeled == 1 && !is_letter(engine, expr) && find_value(engine, shape, expr) == NULL) {
        IDSI_TRY(map_image(c, shape, &image));
        IDSI_TRY(idsi_scratch_take_zero(s, (size_t)space->unknowns * width, &values));
        IDSI_TRY(idsi_contract_product(s, shape, expr, block, width, values));
        idsi_dense_mul_sub(&s->work, engine->prime, IDSI_MAP_COUNT, width, space->unknowns, image,
                           space->unknowns, values, width, c->sums, width);
    } else {
        IDSI_TRY(idsi_scratch_take(s, unknowns * c->width, &values));
        IDSI_TRY(idsi_contract_values(s, shape, expr, block, width, values));
        idsi_dense_mul_sub(&s->work, engine->prime, IDSI_MAP_COUNT, c->width, unknowns,
                           c->maps->values + c->at, c->maps->unknowns, values, c->width, c->sums,
                           c->width);
    }
    c->at += (uint32_t)unknowns;
done:
    s->top = mark;
    return st;
}

/* The core of a chain. */
static ids_status contract_core(contraction *c, uint32_t shape, uint32_t expr,
                                const uint32_t *block, size_t width)
{
    ids_status st = IDS_OK;
    size_t dimension = c->s->engine->spaces[shape].dimension;

    if (dimension == 0) {
        return IDS_OK;
    }
    if (c->maps != NULL) {
        return core_maps(c, shape, expr, block, width);
    }
    IDSI_ASSERT(c->out != NULL);
    IDSI_TRY(idsi_contract_values(c->s, shape, expr, block, width, c->out));
    c->out += dimension * width;
done:
    return st;
}

static ids_status contract(contraction *c, uint32_t shape, uint32_t first, uint32_t last,
                           const uint32_t *block, size_t width)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = c->s->engine;
    const idsi_skew *skew = engine->skews.list[shape];

    if (first == last) {
        return contract_core(c, shape, c->arg[first], block, width);
    }
    bool upper = last > c->form->core;
    uint32_t at =
        upper ? skew->shape.cells - (uint32_t)c->form->degree[last] : c->form->degree[first];
    for (size_t k = 0; k < skew->cut_count[at]; k++) {
        IDSI_TRY(peel(c, &skew->cut[at][k], upper, first, last, block, width));
    }
done:
    return st;
}

ids_status idsi_contract_product(idsi_scratch *scratch, uint32_t shape, uint32_t expr,
                                 const uint32_t *block, size_t width, uint32_t *out)
{
    idsi_partition_engine *engine = scratch->engine;
    const idsi_expr *entry = &engine->exprs[expr];
    uint32_t form = idsi_form_find(engine, entry);

    if (form == UINT32_MAX) {
        return IDS_OK;
    }
    contraction c = {.s = scratch,
                     .form = &engine->degree[entry->degree].forms[form],
                     .arg = entry->arg,
                     .out = out + (size_t)engine->spaces[shape].offset[form] * width};
    return contract(&c, shape, 0, c.form->arity - 1, block, width);
}

void idsi_maps_clear(ids_ctx *ctx, idsi_maps *maps)
{
    for (size_t i = 0; i < maps->image_count; i++) {
        idsi_free(ctx, maps->images[i].values);
    }
    idsi_free(ctx, maps->images);
    idsi_free(ctx, maps->values);
    memset(maps, 0, sizeof *maps);
}

ids_status idsi_contract_maps(idsi_scratch *scratch, uint32_t shape, uint32_t expr,
                              const uint32_t *block, size_t width, idsi_maps *maps, uint32_t *sums)
{
    idsi_partition_engine *engine = scratch->engine;
    const idsi_expr *entry = &engine->exprs[expr];
    uint32_t form = idsi_form_find(engine, entry);

    if (form == UINT32_MAX) {
        return IDS_OK;
    }
    contraction c = {.s = scratch,
                     .form = &engine->degree[entry->degree].forms[form],
                     .arg = entry->arg,
                     .maps = maps,
                     .at = engine->spaces[shape].offset[form],
                     .width = width,
                     .sums = sums};
    return contract(&c, shape, 0, c.form->arity - 1, block, width);
}

ids_status idsi_contract_values(idsi_scratch *scratch, uint32_t shape, uint32_t expr,
                                const uint32_t *block, size_t width, uint32_t *out)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = scratch->engine;
    const idsi_space *space = &engine->spaces[shape];
    idsi_scratch_mark mark = scratch->top;
    uint32_t *product = NULL;

    if (is_letter(engine, expr)) {
        memcpy(out, block, width * sizeof *out);
        return IDS_OK;
    }
    memset(out, 0, space->dimension * width * sizeof *out);
    const idsi_left *value = find_value(engine, shape, expr);
    if (value != NULL) {
        idsi_left_mul_sub(&scratch->work, engine->prime, value, width, block, width, out, width);
        return IDS_OK;
    }
    IDSI_TRY(idsi_scratch_take_zero(scratch, (size_t)space->unknowns * width, &product));
    IDSI_TRY(idsi_contract_product(scratch, shape, expr, block, width, product));
    idsi_left_mul_sub(&scratch->work, engine->prime, &space->solution, width, product, width, out,
                      width);
done:
    scratch->top = mark;
    return st;
}
