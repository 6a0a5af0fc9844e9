/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The partition engine's plan: which shapes have to be solved, in which degree, and where the
 * unknowns of a shape stand.
 *
 * A shape needs the pieces of all its chains, for all forms of its degree. Only partitions of the
 * degrees that are asked for, and of all lower degrees for the generators, are put in from
 * outside; the skew shapes are those that these need.
 *
 * Degrees are planned upwards, so that the plan for a degree begins like that for any lower one:
 * what comes out for a degree does not depend on how far the table goes.
 */
#include <string.h>

#include "partition_private.h"

/* ---- forms ------------------------------------------------------------------------------- */

typedef struct form_list {
    idsi_partition_engine *engine;
    idsi_degree *degree;
    size_t capacity;
    uint32_t op;
} form_list;

static ids_status add_form(void *user, const uint8_t *degree)
{
    ids_status st = IDS_OK;
    form_list *list = user;
    idsi_degree *entry = list->degree;
    idsi_form form = {.op = list->op, .arity = list->engine->sig->ops[list->op].group.arity};

    for (uint32_t i = 0; i < form.arity; i++) {
        form.degree[i] = degree[i];
        if (degree[i] > form.degree[form.core]) {
            form.core = i;
        }
        if (degree[i] > 1 && list->engine->degree[degree[i]].form_count == 0) {
            return IDS_OK; /* there is no monomial of this degree */
        }
    }
    IDSI_TRY(idsi_grow(list->engine->ctx, entry->form_count, &list->capacity,
                       sizeof *entry->forms, &entry->forms));
    entry->forms[entry->form_count] = form;
    entry->form_count++;
done:
    return st;
}

ids_status idsi_plan_forms(idsi_partition_engine *engine)
{
    ids_status st = IDS_OK;

    for (uint32_t d = 2; d <= engine->top; d++) {
        form_list list = {.engine = engine, .degree = &engine->degree[d]};
        for (list.op = 0; list.op < engine->sig->count; list.op++) {
            IDSI_TRY(idsi_degrees_each(&engine->sig->ops[list.op].group, d, add_form, &list));
        }
    }
done:
    return st;
}

/* ---- shapes ------------------------------------------------------------------------------ */

typedef struct planner {
    idsi_partition_engine *engine;
    uint8_t asked; /* the degree whose partitions are put in */
    size_t since_capacity;
    size_t list_capacity[IDSI_SHAPE_MAX + 1];
} planner;

static ids_status need_shape(planner *plan, uint32_t shape);

static ids_status need_chains(planner *plan, const idsi_form *form, uint32_t shape, uint32_t first,
                              uint32_t last)
{
    ids_status st = IDS_OK;
    idsi_skews *skews = &plan->engine->skews;

    if (first == last) {
        return need_shape(plan, shape);
    }
    bool upper = last > form->core;
    uint32_t at = upper ? (uint32_t)skews->list[shape]->shape.cells - form->degree[last]
                        : form->degree[first];
    IDSI_TRY(idsi_skews_cut(skews, shape, at));
    for (size_t k = 0; k < skews->list[shape]->cut_count[at]; k++) {
        const idsi_cut *cut = &skews->list[shape]->cut[at][k];
        uint32_t piece = upper ? cut->high : cut->low;
        uint32_t rest = upper ? cut->low : cut->high;
        IDSI_TRY(need_shape(plan, piece));
        IDSI_TRY(need_chains(plan, form, rest, upper ? first : first + 1,
                             upper ? last - 1 : last));
    }
done:
    return st;
}

static ids_status need_shape(planner *plan, uint32_t shape)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = plan->engine;

    if (shape >= plan->since_capacity) {
        size_t capacity = 2 * (size_t)shape + 64;
        IDSI_TRY(idsi_resize_array(engine->ctx, capacity, sizeof *engine->since, &engine->since));
        memset(engine->since + plan->since_capacity, 0, capacity - plan->since_capacity);
        plan->since_capacity = capacity;
    }
    if (engine->since[shape] > 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_poll(engine->ctx, NULL));
    engine->since[shape] = plan->asked;
    uint32_t cells = engine->skews.list[shape]->shape.cells;
    idsi_degree *degree = &engine->degree[cells];
    IDSI_TRY(idsi_grow(engine->ctx, degree->shape_count, &plan->list_capacity[cells],
                       sizeof *degree->shapes, &degree->shapes));
    degree->shapes[degree->shape_count] = shape;
    degree->shape_count++;
    for (size_t k = 0; k < degree->form_count; k++) {
        IDSI_TRY(need_chains(plan, &degree->forms[k], shape, 0, degree->forms[k].arity - 1));
    }
done:
    return st;
}

/* All partitions of `left` into parts of at most `most`, appended to parts[0..rows-1]. */
static ids_status need_partitions(planner *plan, uint8_t *parts, uint32_t rows, uint32_t left,
                                  uint32_t most)
{
    ids_status st = IDS_OK;
    static const uint8_t empty[IDSI_SHAPE_MAX] = {0};
    uint32_t shape = 0;

    if (left == 0) {
        IDSI_TRY(idsi_skews_get(&plan->engine->skews, parts, empty, rows, &shape));
        return need_shape(plan, shape);
    }
    for (uint32_t part = most < left ? most : left; part > 0; part--) {
        parts[rows] = (uint8_t)part;
        IDSI_TRY(need_partitions(plan, parts, rows + 1, left - part, part));
    }
done:
    return st;
}

ids_status idsi_plan_shapes(idsi_partition_engine *engine)
{
    ids_status st = IDS_OK;
    planner plan = {.engine = engine};
    uint8_t parts[IDSI_SHAPE_MAX] = {0};

    for (uint32_t d = 1; d <= engine->top; d++) {
        plan.asked = (uint8_t)d;
        if (d == 1 || engine->degree[d].form_count > 0) {
            IDSI_TRY(need_partitions(&plan, parts, 0, d, d));
        }
    }
    IDSI_TRY(idsi_alloc_array(engine->ctx, engine->skews.count, sizeof *engine->spaces,
                              &engine->spaces));
    engine->space_count = engine->skews.count;
    /* Shapes that planning came across without needing them are known, and have no place yet. */
    if (engine->space_count > plan.since_capacity) {
        IDSI_TRY(idsi_resize_array(engine->ctx, engine->space_count, sizeof *engine->since,
                                   &engine->since));
        memset(engine->since + plan.since_capacity, 0,
               engine->space_count - plan.since_capacity);
    }
done:
    return st;
}

/* ---- unknowns ---------------------------------------------------------------------------- */

static uint64_t count_chains(const idsi_partition_engine *engine, const idsi_form *form,
                             uint32_t shape, uint32_t first, uint32_t last)
{
    const idsi_skew *skew = engine->skews.list[shape];
    uint64_t count = 0;

    if (first == last) {
        return engine->spaces[shape].dimension;
    }
    bool upper = last > form->core;
    uint32_t at = upper ? (uint32_t)skew->shape.cells - form->degree[last] : form->degree[first];
    for (size_t k = 0; k < skew->cut_count[at]; k++) {
        const idsi_cut *cut = &skew->cut[at][k];
        uint64_t dimension = engine->spaces[upper ? cut->high : cut->low].dimension;
        if (dimension > 0) {
            count += dimension * count_chains(engine, form, upper ? cut->low : cut->high,
                                              upper ? first : first + 1,
                                              upper ? last - 1 : last);
        }
    }
    return count;
}

ids_status idsi_plan_unknowns(idsi_partition_engine *engine, uint32_t shape)
{
    ids_status st = IDS_OK;
    idsi_space *space = &engine->spaces[shape];
    const idsi_degree *degree = &engine->degree[engine->skews.list[shape]->shape.cells];
    uint64_t count = 0;

    if (space->offset != NULL) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_alloc_array(engine->ctx, degree->form_count + 1, sizeof *space->offset,
                              &space->offset));
    for (size_t k = 0; k < degree->form_count; k++) {
        space->offset[k] = (uint32_t)count;
        count += count_chains(engine, &degree->forms[k], shape, 0, degree->forms[k].arity - 1);
        if (count >= UINT32_MAX) {
            st = idsi_fail(engine->ctx, IDS_ERR_LIMIT,
                           "a partition of degree %u has more than 2^32 unknowns",
                           (unsigned)engine->skews.list[shape]->shape.cells);
            goto done;
        }
    }
    space->offset[degree->form_count] = (uint32_t)count;
    space->unknowns = (uint32_t)count;
done:
    return st;
}
