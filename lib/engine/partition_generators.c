/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Generators: a few expressions whose images under the symmetric group span F/I of a degree.
 *
 * Products of generators of lower degrees are tried in turn. A set of expressions generates when no
 * map to an irreducible module, of those that occur, vanishes on all of them; so for every
 * partition the values of its maps on the expressions, against random covectors, are kept in
 * echelon form until their rank is the multiplicity. An expression that shows nothing new of any
 * partition is passed over. (Random covectors can only make a set look too small: then it is
 * larger than it need be.)
 */
#include "partition_private.h"

/* The partitions of a degree that occur in F/I, each with what the generators see of it. */
typedef struct sight {
    uint32_t shape;
    idsi_dense_echelon *echelon; /* rows: values against random covectors */
} sight;

typedef struct chooser {
    idsi_scratch *s;
    idsi_partition_engine *engine;
    uint32_t degree;
    const idsi_form *form;
    uint32_t arg[IDS_MAX_ARITY];
    sight *sights;
    size_t sight_count;
    size_t capacity;
    idsi_random random;
} chooser;

static bool is_straight(const idsi_shape *shape)
{
    return shape->inner[0] == 0;
}

/* Rank that an expression adds to the sight of one partition. */
static ids_status look(chooser *c, sight *seen, uint32_t expr, size_t *added)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = c->engine;
    size_t dimension = engine->spaces[seen->shape].dimension;
    size_t tableaux = engine->skews.list[seen->shape]->count;
    size_t width = dimension - idsi_dense_echelon_rank(seen->echelon) + 2;
    uint32_t *block = NULL;
    uint32_t *values = NULL;
    uint32_t *rows = NULL;

    *added = 0;
    if (width == 2) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_alloc_array(c->s->ctx, tableaux * width, sizeof *block, &block));
    IDSI_TRY(idsi_alloc_array(c->s->ctx, dimension * width, sizeof *values, &values));
    IDSI_TRY(idsi_alloc_array(c->s->ctx, dimension * width, sizeof *rows, &rows));
    for (size_t i = 0; i < tableaux * width; i++) {
        block[i] = idsi_random_residue(&c->random, engine->prime);
    }
    IDSI_TRY(idsi_contract_values(c->s, seen->shape, expr, block, width, values));
    for (size_t i = 0; i < dimension; i++) {
        for (size_t b = 0; b < width; b++) {
            rows[b * dimension + i] = values[i * width + b];
        }
    }
    size_t before = idsi_dense_echelon_rank(seen->echelon);
    IDSI_TRY(idsi_dense_echelon_add(seen->echelon, rows, width, NULL));
    *added = idsi_dense_echelon_rank(seen->echelon) - before;
done:
    idsi_free(c->s->ctx, block);
    idsi_free(c->s->ctx, values);
    idsi_free(c->s->ctx, rows);
    return st;
}

static bool all_seen(const chooser *c)
{
    for (size_t k = 0; k < c->sight_count; k++) {
        if (idsi_dense_echelon_rank(c->sights[k].echelon) <
            c->engine->spaces[c->sights[k].shape].dimension) {
            return false;
        }
    }
    return true;
}

/* Takes an expression as generator when it shows something new of some partition. */
static ids_status try_generator(chooser *c, uint32_t expr)
{
    ids_status st = IDS_OK;
    idsi_degree *degree = &c->engine->degree[c->degree];
    size_t total = 0;

    for (size_t k = 0; k < c->sight_count; k++) {
        size_t added = 0;
        IDSI_TRY(look(c, &c->sights[k], expr, &added));
        total += added;
    }
    if (total > 0) {
        IDSI_TRY(idsi_grow(c->engine->ctx, degree->generator_count, &c->capacity,
                           sizeof *degree->generators, &degree->generators));
        degree->generators[degree->generator_count] = expr;
        degree->generator_count++;
    }
done:
    return st;
}

static ids_status try_products(chooser *c, uint32_t place)
{
    ids_status st = IDS_OK;
    uint32_t expr = 0;

    if (all_seen(c)) {
        return IDS_OK;
    }
    if (place == c->form->arity) {
        IDSI_TRY(idsi_expr_intern(c->engine, c->form->op, c->arg, &expr));
        return try_generator(c, expr);
    }
    const idsi_degree *degree = &c->engine->degree[c->form->degree[place]];
    for (size_t g = 0; g < degree->generator_count; g++) {
        c->arg[place] = degree->generators[g];
        IDSI_TRY(try_products(c, place + 1));
    }
done:
    return st;
}

static ids_status open_sights(chooser *c)
{
    ids_status st = IDS_OK;
    const idsi_degree *degree = &c->engine->degree[c->degree];

    IDSI_TRY(idsi_alloc_array(c->s->ctx, degree->shape_count, sizeof *c->sights, &c->sights));
    for (size_t k = 0; k < degree->shape_count; k++) {
        uint32_t shape = degree->shapes[k];
        uint32_t dimension = c->engine->spaces[shape].dimension;
        if (dimension > 0 && is_straight(&c->engine->skews.list[shape]->shape)) {
            sight *fresh = &c->sights[c->sight_count];
            fresh->shape = shape;
            c->sight_count++;
            IDSI_TRY(idsi_dense_echelon_create(c->s->ctx, c->engine->prime, dimension,
                                               &fresh->echelon));
        }
    }
done:
    return st;
}

ids_status idsi_generators_choose(idsi_scratch *scratch, uint32_t degree)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = scratch->engine;
    idsi_degree *entry = &engine->degree[degree];
    chooser c = {.s = scratch, .engine = engine, .degree = degree};

    if (entry->generators_made) {
        return IDS_OK;
    }
    idsi_random_seed(&c.random, engine->prime + degree);
    if (degree == 1) {
        uint32_t letter = 0;
        IDSI_TRY(idsi_expr_intern(engine, UINT32_MAX, NULL, &letter));
        if (!idsi_laws_trivial(engine->laws)) {
            IDSI_TRY(idsi_alloc_array(engine->ctx, 1, sizeof *entry->generators,
                                      &entry->generators));
            entry->generators[0] = letter;
            entry->generator_count = 1;
        }
    } else {
        IDSI_TRY(open_sights(&c));
        for (size_t k = 0; k < entry->form_count; k++) {
            c.form = &entry->forms[k];
            IDSI_TRY(try_products(&c, 0));
        }
    }
    entry->generators_made = true;
done:
    for (size_t k = 0; k < c.sight_count; k++) {
        idsi_dense_echelon_free(c.sights[k].echelon);
    }
    idsi_free(scratch->ctx, c.sights);
    return st;
}
