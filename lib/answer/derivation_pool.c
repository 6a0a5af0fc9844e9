/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The consequences among which a derivation is looked for.
 *
 * They come in by their distance from the candidate, until there is a solution. Where there are so
 * many that the system of equations would fill the memory, only those come in that are independent
 * of the ones before: they span the same.
 */
#include <string.h>

#include "derivation_private.h"

/* Marks a distance while the pool is renewed. */
#define TAKEN 0x80000000u

/* Frees an array of the pool, which can be made anew. */
static void drop(ids_ctx *ctx, void *pointer)
{
    void *block = NULL;

    memcpy(&block, pointer, sizeof block);
    idsi_free(ctx, block);
    block = NULL;
    memcpy(pointer, &block, sizeof block);
}

void idsi_pool_clear(idsi_solver *s)
{
    drop(s->ctx, &s->row_start);
    drop(s->ctx, &s->row_item);
    drop(s->ctx, &s->row_cell);
    drop(s->ctx, &s->order);
    drop(s->ctx, &s->place);
    drop(s->ctx, &s->row);
    drop(s->ctx, &s->best);
    drop(s->ctx, &s->best_value);
    drop(s->ctx, &s->trial);
    drop(s->ctx, &s->trial_value);
    drop(s->ctx, &s->in_best);
    s->best_count = 0;
    s->trial_count = 0;
}

/*
 * How far each consequence is from the candidate: those that share a monomial with it are at
 * distance 1, those that share one with these at distance 2. The others are at 0: they are of no
 * use.
 */
static ids_status measure_distances(idsi_solver *s)
{
    ids_status st = IDS_OK;
    const idsi_system *system = s->system;
    uint32_t *near = NULL;
    bool more = true;

    IDSI_TRY(idsi_alloc_array(s->ctx, system->count, sizeof *s->distance, &s->distance));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *near, &near));
    for (size_t m = 0; m < s->monomials; m++) {
        near[m] = system->goal[m] != 0 ? 0 : UINT32_MAX;
    }
    for (s->farthest = 0; more; s->farthest += more) {
        more = false;
        for (size_t i = 0; i < system->count; i++) {
            bool touches = false;
            for (size_t k = system->start[i]; k < system->start[i + 1]; k++) {
                touches = touches || near[system->cells[k].monomial] <= s->farthest;
            }
            if (s->distance[i] != 0 || !touches) {
                continue;
            }
            s->distance[i] = s->farthest + 1;
            more = true;
            for (size_t k = system->start[i]; k < system->start[i + 1]; k++) {
                uint32_t *at = &near[system->cells[k].monomial];
                *at = *at == UINT32_MAX ? s->farthest + 1 : *at;
            }
        }
    }
done:
    idsi_free(s->ctx, near);
    return st;
}

/* Whether a consequence is independent of those before; then it counts among them. */
static ids_status is_new(idsi_solver *s, size_t i, bool *independent)
{
    ids_status st = IDS_OK;
    const idsi_system *system = s->system;
    idsi_verdict verdict = IDSI_DEPENDENT;
    size_t count = system->start[i + 1] - system->start[i];

    for (size_t k = 0; k < count; k++) {
        const idsi_cell *cell = &system->cells[system->start[i] + k];
        s->cells[k] = (idsi_entry){cell->monomial, idsi_system_value(system, i, cell)};
    }
    idsi_echelon_load(s->echelon, s->cells, count, 1);
    IDSI_TRY(idsi_echelon_settle(s->echelon, UINT64_MAX, &verdict));
    *independent = verdict != IDSI_DEPENDENT;
done:
    return st;
}

ids_status idsi_pool_extend(idsi_solver *s, uint32_t distance)
{
    ids_status st = IDS_OK;
    const idsi_system *system = s->system;
    for (size_t cells = 1; cells <= s->most; cells++) {
        for (size_t i = 0; i < system->count; i++) {
            bool wanted = true;
            if (s->distance[i] != distance || system->start[i + 1] - system->start[i] != cells) {
                continue;
            }
            IDSI_TRY(idsi_poll(s->ctx, NULL));
            if (system->count > s->spare) {
                IDSI_TRY(is_new(s, i, &wanted));
            }
            if (wanted) {
                s->pool[s->pool_count++] = (uint32_t)i;
            }
        }
    }
done:
    return st;
}

ids_status idsi_pool_prepare(idsi_solver *s)
{
    ids_status st = IDS_OK;
    const idsi_system *system = s->system;

    s->spare = IDSI_TRIAL_WORK / 40 / (s->monomials + 1);
    for (size_t i = 0; i < system->count; i++) {
        size_t cells = system->start[i + 1] - system->start[i];
        s->most = cells > s->most ? cells : s->most;
    }
    IDSI_TRY(measure_distances(s));
    IDSI_TRY(idsi_alloc_array(s->ctx, system->count, sizeof *s->pool, &s->pool));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->most + 1, sizeof *s->cells, &s->cells));
    IDSI_TRY(idsi_echelon_create(s->ctx, system->prime, (uint32_t)s->monomials, &s->echelon));
done:
    return st;
}

ids_status idsi_pool_index(idsi_solver *s)
{
    ids_status st = IDS_OK;
    const idsi_system *system = s->system;
    size_t total = 0;

    idsi_pool_clear(s);
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials + 2, sizeof *s->row_start, &s->row_start));
    for (size_t j = 0; j < s->pool_count; j++) {
        for (size_t k = system->start[s->pool[j]]; k < system->start[s->pool[j] + 1]; k++) {
            s->row_start[system->cells[k].monomial + 2]++;
            total++;
        }
    }
    for (size_t m = 0; m < s->monomials; m++) {
        s->row_start[m + 2] += s->row_start[m + 1];
    }
    IDSI_TRY(idsi_alloc_array(s->ctx, total, sizeof *s->row_item, &s->row_item));
    IDSI_TRY(idsi_alloc_array(s->ctx, total, sizeof *s->row_cell, &s->row_cell));
    for (size_t j = 0; j < s->pool_count; j++) {
        for (size_t k = system->start[s->pool[j]]; k < system->start[s->pool[j] + 1]; k++) {
            size_t at = s->row_start[system->cells[k].monomial + 1]++;
            s->row_item[at] = (uint32_t)j;
            s->row_cell[at] = &system->cells[k];
        }
    }
    IDSI_TRY(idsi_alloc_array(s->ctx, total + 1, sizeof *s->row, &s->row));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->pool_count, sizeof *s->order, &s->order));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->pool_count, sizeof *s->place, &s->place));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->pool_count, sizeof *s->best, &s->best));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->pool_count, sizeof *s->best_value, &s->best_value));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->pool_count, sizeof *s->trial, &s->trial));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->pool_count, sizeof *s->trial_value, &s->trial_value));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->pool_count, sizeof *s->in_best, &s->in_best));
done:
    return st;
}

ids_status idsi_pool_renew(idsi_solver *s, bool all)
{
    ids_status st = IDS_OK;
    const idsi_system *system = s->system;
    bool *touched = NULL;
    uint32_t *kept = NULL;
    size_t count = s->best_count;
    size_t room = IDSI_TRIAL_WORK / 400 / (s->most + 1) + count;

    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *touched, &touched));
    IDSI_TRY(idsi_alloc_array(s->ctx, count, sizeof *kept, &kept));
    for (size_t j = 0; j < count; j++) {
        kept[j] = s->pool[s->best[j]];
        for (size_t k = system->start[kept[j]]; k < system->start[kept[j] + 1]; k++) {
            touched[system->cells[k].monomial] = true;
        }
        s->distance[kept[j]] |= TAKEN;
    }
    s->pool_count = 0;
    for (size_t j = 0; j < count; j++) {
        s->pool[s->pool_count++] = kept[j];
    }
    for (size_t i = 0; i < system->count && s->pool_count < room; i++) {
        bool inside = s->distance[i] != 0 && s->distance[i] < TAKEN;
        for (size_t k = system->start[i]; !all && inside && k < system->start[i + 1]; k++) {
            inside = touched[system->cells[k].monomial];
        }
        if (inside) {
            s->pool[s->pool_count++] = (uint32_t)i;
        }
    }
    for (size_t j = 0; j < count; j++) {
        s->distance[kept[j]] &= ~TAKEN;
    }
    IDSI_TRY(idsi_pool_index(s));
    s->best_count = count;
    for (uint32_t j = 0; j < count; j++) {
        s->best[j] = j;
        s->in_best[j] = true;
    }
done:
    idsi_free(s->ctx, touched);
    idsi_free(s->ctx, kept);
    return st;
}
