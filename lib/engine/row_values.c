/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Values of laws on normal forms: the rows of one job (rows.c), from slow to fast loops:
 *
 *     degrees   fix for each product of the law its degree, its block, and its strides
 *     split     fixes the argument order, its sign, and the label part of the column number
 *     normal    a tuple of normal forms; only products with a changed variable below are multiplied
 *               again
 *
 * A value is factor * (sparse vector of normal forms). A product of single normal forms is one
 * column, and its value is that column's reduction in the lower degree, in place.
 */
#include <string.h>

#include "rows_private.h"

/* A value below the root: factor times sum of entries (column = number of a normal form). */
typedef struct value {
    const idsi_entry *entries;
    uint32_t count;
    uint32_t factor;
} value;

/* An argument of a product that is multiplied out. */
typedef struct argument {
    value value;
    uint32_t stride;
} argument;

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
    /* For results of several products: sums by normal form, and a bit for each that was met. */
    uint64_t *sum;
    uint64_t *met;
    idsi_entry *gathered;
} product;

typedef struct evaluator {
    ids_ctx *ctx;
    const idsi_tower *tower;
    const idsi_level *level; /* that the rows belong to */
    const idsi_law *law;
    const idsi_row_job *job;
    uint32_t prime;
    idsi_row_fn row_fn;
    void *row_user;
    uint32_t *coefficient; /* of each term, mod p */
    product *products;     /* one a node */
    uint64_t *node_set;    /* labels of each */
    uint64_t sets[IDSI_SPLIT_MAX];
    idsi_entry variable[IDSI_SPLIT_MAX]; /* the normal form of each variable */
    idsi_entry *row;
    size_t row_count;
    size_t row_capacity;
} evaluator;

/* ---- values ---------------------------------------------------------------------------------- */

static value argument_value(const evaluator *ev, int32_t arg)
{
    if (arg < 0) {
        return ev->products[-1 - arg].result;
    }
    return (value){&ev->variable[arg], 1, 1};
}

/*
 * Puts coefficient * last argument into the row, at columns column + stride * entry. The
 * multiplication by a fixed coefficient is V. Shoup's: a quotient from a precomputed fraction is
 * too small by 1 at most.
 */
static ids_status emit(evaluator *ev, const argument *last, uint64_t column, uint32_t coefficient)
{
    ids_status st = IDS_OK;
    const value *arg = &last->value;
    uint32_t p = ev->prime;
    uint64_t fraction = ((uint64_t)coefficient << 32) / p;

    if (arg->count > ev->row_capacity - ev->row_count) {
        size_t capacity = 2 * (ev->row_count + arg->count);
        IDSI_TRY(idsi_resize_array(ev->ctx, capacity, sizeof *ev->row, &ev->row));
        ev->row_capacity = capacity;
    }
    idsi_entry *out = ev->row + ev->row_count;
    for (uint32_t i = 0; i < arg->count; i++) {
        uint32_t v = arg->entries[i].value;
        uint32_t quotient = (uint32_t)((fraction * v) >> 32);
        uint32_t rest = coefficient * v - quotient * p;
        out[i].column = (uint32_t)column + last->stride * arg->entries[i].column;
        out[i].value = rest >= p ? rest - p : rest;
    }
    ev->row_count += arg->count;
done:
    return st;
}

/* Adds coefficient * (reduction of a column) to a product's accumulator. */
static void add_reduction(const evaluator *ev, product *pr, uint64_t column, uint32_t coefficient)
{
    const idsi_level *level = pr->level;
    uint64_t square = (uint64_t)ev->prime * ev->prime;
    for (size_t i = level->start[column]; i < level->start[column + 1]; i++) {
        uint32_t c = level->entries[i].column;
        uint64_t sum = pr->sum[c] + (uint64_t)coefficient * level->entries[i].value;
        pr->sum[c] = sum >= square ? sum - square : sum;
        pr->met[c >> 6] |= UINT64_C(1) << (c & 63);
    }
}

/* Multiplies out the arguments from `place` on. */
static ids_status multiply(evaluator *ev, product *pr, const argument *args, uint32_t place,
                           uint64_t column, uint32_t coefficient)
{
    ids_status st = IDS_OK;
    const value *arg = &args[place].value;
    bool is_last = place + 1 == pr->node->arity;

    if (is_last && pr->is_root) {
        return emit(ev, &args[place], column, coefficient);
    }
    for (uint32_t i = 0; i < arg->count; i++) {
        const idsi_entry *entry = &arg->entries[i];
        uint64_t at = column + (uint64_t)args[place].stride * entry->column;
        uint32_t c =
            entry->value == 1 ? coefficient : idsi_mod_mul(coefficient, entry->value, ev->prime);
        if (is_last) {
            add_reduction(ev, pr, at, c);
        } else {
            IDSI_TRY(multiply(ev, pr, args, place + 1, at, c));
        }
    }
done:
    return st;
}

static void gather_sum(const evaluator *ev, product *pr)
{
    uint32_t count = 0;
    for (size_t word = 0; 64 * word < pr->level->dimension; word++) {
        uint64_t bits = pr->met[word];
        pr->met[word] = 0;
        while (bits != 0) {
            uint32_t j = (uint32_t)(64 * word) + (uint32_t)__builtin_ctzll(bits);
            uint32_t residue = (uint32_t)(pr->sum[j] % ev->prime);
            bits &= bits - 1;
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
    argument args[IDS_MAX_ARITY];
    uint32_t last = pr->node->arity - 1;
    uint32_t longest = 0;

    pr->result = (value){NULL, 0, 1};
    /* A lower degree of which nothing is left may have no table. */
    if (pr->block == NULL || (!pr->is_root && pr->level->dimension == 0)) {
        return IDS_OK;
    }
    for (uint32_t i = 0; i <= last; i++) {
        args[i] = (argument){argument_value(ev, pr->node->arg[i]), pr->stride[i]};
        if (args[i].value.count == 0) {
            return IDS_OK;
        }
        longest = args[i].value.count > args[longest].value.count ? i : longest;
        coefficient = idsi_mod_mul(coefficient, args[i].value.factor, ev->prime);
    }
    coefficient = idsi_mod_mul(coefficient, pr->sign, ev->prime);
    if (args[longest].value.count > 1 || pr->is_root) {
        /* The longest argument goes into the innermost loop. */
        argument swap = args[longest];
        args[longest] = args[last];
        args[last] = swap;
        IDSI_TRY(multiply(ev, pr, args, 0, pr->base, coefficient));
        if (!pr->is_root) {
            gather_sum(ev, pr);
        }
        return IDS_OK;
    }
    uint64_t column = pr->base;
    for (uint32_t i = 0; i < pr->node->arity; i++) {
        const idsi_entry *entry = args[i].value.entries;
        column += (uint64_t)args[i].stride * entry->column;
        coefficient = idsi_mod_mul(coefficient, entry->value, ev->prime);
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
static void place_labels(evaluator *ev)
{
    uint64_t *node_set = ev->node_set;

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

static void clear_products(evaluator *ev)
{
    for (size_t i = 0; i < ev->law->node_count; i++) {
        idsi_free(ev->ctx, ev->products[i].sum);
        idsi_free(ev->ctx, ev->products[i].met);
        idsi_free(ev->ctx, ev->products[i].gathered);
    }
}

/* Fixes what the degrees fix: level and block of every product, room for its value. */
static ids_status place_degrees(evaluator *ev)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < ev->law->node_count; i++) {
        product *pr = &ev->products[i];
        uint8_t canonical[IDS_MAX_ARITY];
        uint8_t image[IDS_MAX_ARITY];

        pr->degree = 0;
        for (uint32_t a = 0; a < pr->node->arity; a++) {
            int32_t arg = pr->node->arg[a];
            pr->arg_degree[a] = arg < 0 ? ev->products[-1 - arg].degree : ev->job->split.size[arg];
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
            IDSI_TRY(idsi_alloc_array(ev->ctx, dimension / 64 + 1, sizeof *pr->met, &pr->met));
            IDSI_TRY(idsi_alloc_array(ev->ctx, dimension, sizeof *pr->gathered, &pr->gathered));
        }
    }
done:
    return st;
}

/* ---- rows ------------------------------------------------------------------------------------ */

/* Begins at normal forms number `tuple` on distribution number `rank` of the labels. */
static void begin_split(evaluator *ev, uint64_t rank, uint64_t tuple)
{
    const idsi_row_job *j = ev->job;
    uint64_t all = idsi_labels_all(ev->level->degree);

    idsi_split_unrank(&j->split, all, rank, ev->sets);
    place_labels(ev);
    for (uint32_t v = ev->law->degree; v-- > 0;) {
        uint64_t dimension = ev->tower->level[j->split.size[v]].dimension;
        ev->variable[v] = (idsi_entry){(uint32_t)(tuple % dimension), 1};
        tuple /= dimension;
    }
}

/* The next tuple of normal forms: the set of the variables that have changed, 0 at the end. */
static uint32_t next_tuple(evaluator *ev)
{
    uint32_t changed = 0;

    for (uint32_t v = ev->law->degree; v-- > 0;) {
        changed |= UINT32_C(1) << v;
        ev->variable[v].column++;
        if (ev->variable[v].column < ev->tower->level[ev->job->split.size[v]].dimension) {
            return changed;
        }
        ev->variable[v].column = 0;
    }
    return 0;
}

static ids_status make_rows(evaluator *ev, uint64_t first, uint64_t count)
{
    ids_status st = IDS_OK;
    uint64_t rank = first / ev->job->tuples;
    uint32_t changed = 0;

    for (uint64_t i = 0; i < count; i++) {
        if (changed == 0) {
            begin_split(ev, rank, i == 0 ? first % ev->job->tuples : 0);
            changed = UINT32_MAX;
            rank++;
        }
        IDSI_TRY(make_row(ev, changed));
        changed = next_tuple(ev);
    }
done:
    return st;
}

static ids_status begin_job(evaluator *ev)
{
    ids_status st = IDS_OK;
    const idsi_law *law = ev->law;

    IDSI_TRY(
        idsi_alloc_array(ev->ctx, law->poly->count, sizeof *ev->coefficient, &ev->coefficient));
    IDSI_TRY(idsi_alloc_array(ev->ctx, law->node_count, sizeof *ev->products, &ev->products));
    IDSI_TRY(idsi_alloc_array(ev->ctx, law->node_count, sizeof *ev->node_set, &ev->node_set));
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
    IDSI_TRY(place_degrees(ev));
done:
    return st;
}

static void end_job(evaluator *ev)
{
    if (ev->products != NULL) {
        clear_products(ev);
    }
    idsi_free(ev->ctx, ev->products);
    idsi_free(ev->ctx, ev->coefficient);
    idsi_free(ev->ctx, ev->node_set);
    idsi_free(ev->ctx, ev->row);
}

ids_status idsi_rows_evaluate(const idsi_tower *tower, const idsi_level *level,
                              const idsi_row_job *job, uint64_t first, uint64_t count,
                              idsi_row_fn row, void *user)
{
    ids_status st = IDS_OK;
    evaluator ev = {.ctx = tower->ctx,
                    .tower = tower,
                    .level = level,
                    .law = job->law,
                    .job = job,
                    .prime = tower->prime,
                    .row_fn = row,
                    .row_user = user};

    IDSI_TRY(begin_job(&ev));
    IDSI_TRY(make_rows(&ev, first, count));
done:
    end_job(&ev);
    return st;
}
