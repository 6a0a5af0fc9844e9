/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The rows of a quotient step: all values f(m1, .., md) of the laws on normal forms m1, .., md
 * whose labels together are 1 .. n.
 *
 * Three loops, from slow to fast:
 *
 *     degrees   a tuple of degrees for the variables, descending within a symmetry class.
 *               Fixes for each product of the law its degree, its block, and its strides.
 *     split     a distribution of the labels, equal degrees of a class by least labels.
 *               Fixes the argument order, its sign, and the label part of the column number.
 *     normal    a tuple q of normal forms.
 *               Only products with a changed variable below are multiplied again.
 *
 * A value is factor * (sparse vector of normal forms). A product of single normal forms is one
 * column, and its value is that column's reduction in the lower degree, in place.
 */
#include <string.h>

#include "engine_private.h"

/* A value below the root: factor times sum of entries (column = number of a normal form). */
typedef struct value {
    const idsi_entry *entries;
    uint32_t count;
    uint32_t factor;
} value;

/* A product of the law with everything that degrees and split fix. */
typedef struct product {
    const idsi_law_node *node;
    bool is_root;
    const idsi_level *level;
    const idsi_block *block; /* NULL: the product is zero */
    uint32_t degree;
    uint64_t arg_degree[IDS_MAX_ARITY];
    uint64_t base;
    uint32_t sign; /* 1 or p-1 */
    uint32_t stride[IDS_MAX_ARITY];
    value result;
    uint64_t *sum; /* accumulator, level->dimension entries, for results of several products */
    idsi_entry *gathered;
} product;

typedef struct evaluator {
    ids_ctx *ctx;
    const idsi_tower *tower;
    const idsi_level *level; /* that the rows belong to */
    const idsi_law *law;
    uint32_t prime;
    idsi_row_fn row_fn;
    void *row_user;
    uint32_t *coefficient; /* of each term, mod p */
    product *products;     /* one a node */
    idsi_split split;
    uint64_t sets[IDSI_SPLIT_MAX];
    idsi_entry variable[IDSI_SPLIT_MAX]; /* the normal form of each variable */
    idsi_entry *row;
    size_t row_count;
    size_t row_capacity;
    bool count_only;
    uint64_t rows;
    uint64_t total;
} evaluator;

static ids_status emit(evaluator *ev, uint64_t column, uint32_t coefficient)
{
    ids_status st = IDS_OK;
    IDSI_TRY(idsi_grow(ev->ctx, ev->row_count, &ev->row_capacity, sizeof *ev->row, &ev->row));
    ev->row[ev->row_count] = (idsi_entry){(uint32_t)column, coefficient};
    ev->row_count++;
done:
    return st;
}

static value argument_value(const evaluator *ev, int32_t arg)
{
    if (arg < 0) {
        return ev->products[-1 - arg].result;
    }
    return (value){&ev->variable[arg], 1, 1};
}

/* Adds coefficient * (reduction of a column) to a product's accumulator. */
static void add_reduction(const evaluator *ev, product *pr, uint64_t column, uint32_t coefficient)
{
    const idsi_level *level = pr->level;
    uint64_t square = (uint64_t)ev->prime * ev->prime;
    for (size_t i = level->start[column]; i < level->start[column + 1]; i++) {
        uint64_t *sum = &pr->sum[level->entries[i].column];
        *sum += (uint64_t)coefficient * level->entries[i].value;
        *sum = *sum >= square ? *sum - square : *sum;
    }
}

/* Multiplies out the arguments from `place` on. */
static ids_status multiply(evaluator *ev, product *pr, const value *args, uint32_t place,
                           uint64_t column, uint32_t coefficient)
{
    ids_status st = IDS_OK;
    if (place == pr->node->arity) {
        if (pr->is_root) {
            return emit(ev, column, coefficient);
        }
        add_reduction(ev, pr, column, coefficient);
        return IDS_OK;
    }
    const value *arg = &args[place];
    for (uint32_t i = 0; i < arg->count; i++) {
        const idsi_entry *entry = &arg->entries[i];
        uint32_t c = entry->value == 1 ? coefficient
                                       : idsi_mod_mul(coefficient, entry->value, ev->prime);
        IDSI_TRY(multiply(ev, pr, args, place + 1,
                          column + (uint64_t)pr->stride[place] * entry->column, c));
    }
done:
    return st;
}

static void gather_sum(const evaluator *ev, product *pr)
{
    uint32_t count = 0;
    for (uint32_t j = 0; j < pr->level->dimension; j++) {
        if (pr->sum[j] != 0) {
            uint32_t residue = (uint32_t)(pr->sum[j] % ev->prime);
            pr->sum[j] = 0;
            if (residue != 0) {
                pr->gathered[count] = (idsi_entry){j, residue};
                count++;
            }
        }
    }
    pr->result = (value){pr->gathered, count, 1};
}

/* Value of a product below the root, or the entries of a root with the given coefficient. */
static ids_status evaluate(evaluator *ev, product *pr, uint32_t coefficient)
{
    ids_status st = IDS_OK;
    value args[IDS_MAX_ARITY];
    bool single = true;

    pr->result = (value){NULL, 0, 1};
    if (pr->block == NULL) {
        return IDS_OK;
    }
    for (uint32_t i = 0; i < pr->node->arity; i++) {
        args[i] = argument_value(ev, pr->node->arg[i]);
        if (args[i].count == 0) {
            return IDS_OK;
        }
        single = single && args[i].count == 1;
        coefficient = idsi_mod_mul(coefficient, args[i].factor, ev->prime);
    }
    coefficient = idsi_mod_mul(coefficient, pr->sign, ev->prime);
    if (!single || pr->is_root) {
        IDSI_TRY(multiply(ev, pr, args, 0, pr->base, coefficient));
        if (!pr->is_root) {
            gather_sum(ev, pr);
        }
        return IDS_OK;
    }
    uint64_t column = pr->base;
    for (uint32_t i = 0; i < pr->node->arity; i++) {
        column += (uint64_t)pr->stride[i] * args[i].entries->column;
        coefficient = idsi_mod_mul(coefficient, args[i].entries->value, ev->prime);
    }
    size_t start = pr->level->start[column];
    pr->result = (value){pr->level->entries + start,
                         (uint32_t)(pr->level->start[column + 1] - start), coefficient};
done:
    return st;
}

/* Makes one row: the products with a changed variable, then the terms. */
static ids_status make_row(evaluator *ev, uint32_t changed)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < ev->law->node_count; i++) {
        product *pr = &ev->products[i];
        if (!pr->is_root && (pr->node->variables & changed) != 0) {
            IDSI_TRY(evaluate(ev, pr, 1));
        }
    }
    ev->row_count = 0;
    for (size_t t = 0; t < ev->law->poly->count; t++) {
        if (ev->coefficient[t] != 0) {
            IDSI_TRY(evaluate(ev, &ev->products[ev->law->root[t]], ev->coefficient[t]));
        }
    }
    if (ev->row_count > 0) {
        IDSI_TRY(ev->row_fn(ev->row_user, ev->row, ev->row_count));
    }
done:
    return st;
}

/* Fixes what the label sets fix: argument order, sign, label part of the column. */
static void place_labels(evaluator *ev, uint64_t *node_set)
{
    for (size_t i = 0; i < ev->law->node_count; i++) {
        product *pr = &ev->products[i];
        uint64_t set[IDS_MAX_ARITY];
        uint64_t label[IDS_MAX_ARITY];
        uint64_t ordered[IDS_MAX_ARITY];
        uint8_t image[IDS_MAX_ARITY];

        node_set[i] = 0;
        for (uint32_t a = 0; a < pr->node->arity; a++) {
            int32_t arg = pr->node->arg[a];
            set[a] = arg < 0 ? node_set[-1 - arg] : ev->sets[arg];
            label[a] = (uint64_t)__builtin_ctzll(set[a]);
            node_set[i] |= set[a];
        }
        if (pr->block == NULL) {
            continue;
        }
        const idsi_group *group = &ev->tower->sig->ops[pr->node->op].group;
        int sign = idsi_group_canonical(group, pr->arg_degree, label, image);
        for (uint32_t a = 0; a < pr->node->arity; a++) {
            ordered[a] = set[image[a]];
            pr->stride[image[a]] = pr->block->stride[a];
        }
        pr->sign = sign < 0 ? ev->prime - 1 : 1;
        pr->base = pr->block->offset +
                   idsi_split_rank(&pr->block->split, node_set[i], ordered) * pr->block->inner;
    }
}

/* All tuples of normal forms on the label sets at hand. */
static ids_status each_normal(evaluator *ev)
{
    ids_status st = IDS_OK;
    uint32_t degree = ev->law->degree;
    uint32_t changed = UINT32_MAX;

    for (uint32_t v = 0; v < degree; v++) {
        ev->variable[v] = (idsi_entry){0, 1};
    }
    for (;;) {
        IDSI_TRY(make_row(ev, changed));
        changed = 0;
        uint32_t v = degree;
        while (v > 0) {
            v--;
            changed |= UINT32_C(1) << v;
            ev->variable[v].column++;
            if (ev->variable[v].column < ev->tower->level[ev->split.size[v]].dimension) {
                break;
            }
            ev->variable[v].column = 0;
            if (v == 0) {
                return IDS_OK;
            }
        }
    }
done:
    return st;
}

static void clear_products(evaluator *ev)
{
    for (size_t i = 0; i < ev->law->node_count; i++) {
        idsi_free(ev->ctx, ev->products[i].sum);
        idsi_free(ev->ctx, ev->products[i].gathered);
        ev->products[i].sum = NULL;
        ev->products[i].gathered = NULL;
    }
}

/* Fixes what the degrees fix: level and block of every product, room for its value. */
static ids_status place_degrees(evaluator *ev)
{
    ids_status st = IDS_OK;

    clear_products(ev);
    for (size_t i = 0; i < ev->law->node_count; i++) {
        product *pr = &ev->products[i];
        uint8_t canonical[IDS_MAX_ARITY];
        uint8_t image[IDS_MAX_ARITY];

        pr->degree = 0;
        for (uint32_t a = 0; a < pr->node->arity; a++) {
            int32_t arg = pr->node->arg[a];
            pr->arg_degree[a] = arg < 0 ? ev->products[-1 - arg].degree : ev->split.size[arg];
            pr->degree += (uint32_t)pr->arg_degree[a];
        }
        const idsi_group *group = &ev->tower->sig->ops[pr->node->op].group;
        (void)idsi_group_canonical(group, pr->arg_degree, NULL, image);
        for (uint32_t a = 0; a < pr->node->arity; a++) {
            canonical[a] = (uint8_t)pr->arg_degree[image[a]];
        }
        pr->level = pr->is_root ? ev->level : &ev->tower->level[pr->degree];
        pr->block = idsi_level_block(pr->level, pr->node->op, canonical);
        if (!pr->is_root && pr->block != NULL) {
            uint64_t dimension = pr->level->dimension;
            IDSI_TRY(idsi_alloc_array(ev->ctx, dimension, sizeof *pr->sum, &pr->sum));
            IDSI_TRY(idsi_alloc_array(ev->ctx, dimension, sizeof *pr->gathered, &pr->gathered));
        }
    }
done:
    return st;
}

/* All label distributions for the degrees in ev->split. */
static ids_status each_split(evaluator *ev)
{
    ids_status st = IDS_OK;
    uint64_t *node_set = NULL;
    uint64_t all = UINT64_MAX >> (64 - ev->level->degree);
    uint64_t tuples = 1;

    idsi_split_prepare(&ev->split);
    bool fits = ev->split.ways != 0;
    for (uint32_t v = 0; v < ev->law->degree; v++) {
        fits = fits &&
               idsi_mul_u64(tuples, ev->tower->level[ev->split.size[v]].dimension, &tuples);
    }
    uint64_t rows = 0;
    if (!fits || !idsi_mul_u64(tuples, ev->split.ways, &rows) ||
        !idsi_add_u64(ev->rows, rows, &ev->rows)) {
        return idsi_fail(ev->ctx, IDS_ERR_LIMIT,
                         "degree %u has more consequences to go through than 64 bits can count",
                         ev->level->degree);
    }
    if (rows == 0 || ev->count_only) {
        return IDS_OK;
    }
    IDSI_TRY(place_degrees(ev));
    IDSI_TRY(idsi_alloc_array(ev->ctx, ev->law->node_count, sizeof *node_set, &node_set));
    for (uint64_t rank = 0; rank < ev->split.ways; rank++) {
        ids_progress progress = {.stage = "rows",
                                 .degree = ev->level->degree,
                                 .done = ev->rows - rows + rank * tuples,
                                 .total = ev->total};
        IDSI_TRY(idsi_poll(ev->ctx, &progress));
        idsi_split_unrank(&ev->split, all, rank, ev->sets);
        place_labels(ev, node_set);
        IDSI_TRY(each_normal(ev));
    }
done:
    idsi_free(ev->ctx, node_set);
    return st;
}

/* Chooses the degrees of the variables from `place` on, descending within a class. */
static ids_status each_degrees(evaluator *ev, uint32_t place, uint32_t left)
{
    ids_status st = IDS_OK;
    const idsi_law *law = ev->law;
    uint32_t places = law->degree - place;
    int8_t before = -1; /* last variable of the same class */

    if (places == 0) {
        return each_split(ev);
    }
    for (uint32_t v = 0; v < place; v++) {
        if (law->class_of[v] == law->class_of[place]) {
            before = (int8_t)v;
        }
    }
    uint32_t most = left - (places - 1);
    uint32_t least = places == 1 ? left : 1;
    if (before >= 0 && ev->split.size[before] < most) {
        most = ev->split.size[before];
    }
    for (uint32_t degree = most; degree >= least && degree > 0; degree--) {
        bool tied = before >= 0 && ev->split.size[before] == degree;
        ev->split.size[place] = (uint8_t)degree;
        ev->split.parent[place] = (int8_t)(tied ? before : -1);
        IDSI_TRY(each_degrees(ev, place + 1, left - degree));
    }
done:
    return st;
}

static ids_status begin_law(evaluator *ev, const idsi_law *law)
{
    ids_status st = IDS_OK;

    ev->law = law;
    ev->split.count = law->degree;
    IDSI_TRY(idsi_alloc_array(ev->ctx, law->poly->count, sizeof *ev->coefficient,
                              &ev->coefficient));
    IDSI_TRY(idsi_alloc_array(ev->ctx, law->node_count, sizeof *ev->products, &ev->products));
    for (size_t i = 0; i < law->node_count; i++) {
        ev->products[i].node = &law->nodes[i];
    }
    for (size_t t = 0; t < law->poly->count; t++) {
        ev->products[law->root[t]].is_root = true;
        if (!idsi_mod_rational(law->poly->coefficients[t], ev->prime, &ev->coefficient[t])) {
            st = idsi_fail(ev->ctx, IDS_ERR_INTERNAL, "a law has a fraction as coefficient");
            goto done;
        }
    }
done:
    return st;
}

static void end_law(evaluator *ev)
{
    if (ev->products != NULL) {
        clear_products(ev);
    }
    idsi_free(ev->ctx, ev->products);
    idsi_free(ev->ctx, ev->coefficient);
    ev->products = NULL;
    ev->coefficient = NULL;
}

static ids_status each_law(evaluator *ev)
{
    ids_status st = IDS_OK;
    const idsi_laws *laws = ev->tower->laws;

    for (size_t i = 0; i < laws->count; i++) {
        if (laws->law[i].degree > 1 && laws->law[i].degree <= ev->level->degree) {
            IDSI_TRY(begin_law(ev, &laws->law[i]));
            IDSI_TRY(each_degrees(ev, 0, ev->level->degree));
            end_law(ev);
        }
    }
done:
    if (st != IDS_OK) {
        end_law(ev);
    }
    return st;
}

ids_status idsi_rows_count(const idsi_tower *tower, const idsi_level *level, uint64_t *count)
{
    evaluator ev = {.ctx = tower->ctx,
                    .tower = tower,
                    .level = level,
                    .prime = tower->prime,
                    .count_only = true};
    ids_status st = each_law(&ev);
    *count = ev.rows;
    return st;
}

ids_status idsi_rows_each(const idsi_tower *tower, const idsi_level *level, idsi_row_fn row,
                          void *user)
{
    ids_status st = IDS_OK;
    evaluator ev = {.ctx = tower->ctx,
                    .tower = tower,
                    .level = level,
                    .prime = tower->prime,
                    .row_fn = row,
                    .row_user = user};

    IDSI_TRY(idsi_rows_count(tower, level, &ev.total));
    IDSI_TRY(each_law(&ev));
done:
    idsi_free(tower->ctx, ev.row);
    return st;
}
