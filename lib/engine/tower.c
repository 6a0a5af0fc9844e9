/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The relatively free algebra mod a prime, degree by degree in the quotient.
 *
 * Degree n is spanned by the products of normal forms of lower degrees (the columns), modulo the
 * values of the identities on normal forms (the rows, made by rows.c). That is all: products with
 * a consequence of lower degree in one place vanish because that place holds a normal form, and an
 * identity's value depends on its arguments only modulo I. A commutative degree 8 modulo the
 * Jordan identity has 41,475 columns this way, where there are 135,135 monomials.
 *
 * The columns stand in blocks, one for each operation and canonical tuple of argument degrees,
 * which is where the type's arithmetic for labels is used again: the arguments' degrees take the
 * place of their shapes. Rows are streamed into an echelon form and never held.
 *
 * A pivot is the largest column of its row, so the normal forms prefer the blocks that come first:
 * those whose first argument has the largest degree.
 */
#include <string.h>

#include "engine_private.h"

void idsi_tower_init(idsi_tower *tower, ids_ctx *ctx, const idsi_laws *laws, uint32_t prime)
{
    memset(tower, 0, sizeof *tower);
    tower->ctx = ctx;
    tower->laws = laws;
    tower->sig = laws->pres->sig;
    tower->prime = prime;
    idsi_random_seed(&tower->random, prime);
}

double idsi_tower_share(const idsi_tower *tower, uint64_t done, uint64_t total)
{
    double left = 1;

    if (total == 0) {
        return tower->share_begin;
    }
    for (; done >= total && left > 1e-9; done -= total) {
        left /= 2;
    }
    left *= 1 - 0.5 * (double)(done % total) / (double)total;
    return tower->share_end - left * (tower->share_end - tower->share_begin);
}

void idsi_level_clear(ids_ctx *ctx, idsi_level *level)
{
    idsi_free(ctx, level->blocks);
    idsi_free(ctx, level->normal);
    idsi_free(ctx, level->start);
    idsi_free(ctx, level->entries);
    memset(level, 0, sizeof *level);
}

void idsi_tower_clear(idsi_tower *tower)
{
    for (uint32_t d = 1; d <= tower->height; d++) {
        idsi_level_clear(tower->ctx, &tower->level[d]);
    }
    tower->height = 0;
}

/* A level that is being planned. */
typedef struct planner {
    const idsi_tower *tower;
    idsi_level *level;
    size_t capacity;
    uint32_t op;
} planner;

static ids_status too_large(const planner *plan, const char *what)
{
    return idsi_fail(plan->tower->ctx, IDS_ERR_LIMIT, "degree %u has %s than 64 bits can count",
                     plan->level->degree, what);
}

/* Adds the block of the given degrees; blocks without columns are left out. */
static ids_status add_block(void *user, const uint8_t *degree)
{
    ids_status st = IDS_OK;
    planner *plan = user;
    ids_ctx *ctx = plan->tower->ctx;
    idsi_level *level = plan->level;
    const idsi_group *group = &plan->tower->sig->ops[plan->op].group;
    uint64_t key[IDS_MAX_ARITY];
    idsi_block block = {.op = plan->op, .inner = 1, .offset = level->columns};

    for (uint32_t i = 0; i < group->arity; i++) {
        key[i] = degree[i];
        block.degree[i] = degree[i];
    }
    idsi_split_for_group(group, key, degree, &block.split);
    uint64_t free_monomials = block.split.ways;
    uint64_t columns = block.split.ways;
    bool fits = columns > 0;
    for (uint32_t i = group->arity; i-- > 0;) {
        const idsi_level *lower = &plan->tower->level[degree[i]];
        block.stride[i] = (uint32_t)block.inner;
        fits = fits && idsi_mul_u64(block.inner, lower->dimension, &block.inner) &&
               idsi_mul_u64(free_monomials, lower->free, &free_monomials);
    }
    fits = fits && idsi_mul_u64(columns, block.inner, &columns) &&
           idsi_add_u64(level->columns, columns, &level->columns) &&
           idsi_add_u64(level->free, free_monomials, &level->free);
    if (!fits) {
        return too_large(plan, "more monomials");
    }
    if (columns == 0) {
        return IDS_OK;
    }
    IDSI_TRY(
        idsi_grow(ctx, level->block_count, &plan->capacity, sizeof *level->blocks, &level->blocks));
    level->blocks[level->block_count] = block;
    level->block_count++;
done:
    return st;
}

ids_status idsi_level_plan(const idsi_tower *tower, idsi_level *level)
{
    ids_status st = IDS_OK;
    planner plan = {.tower = tower, .level = level};
    const ids_signature *sig = tower->sig;

    memset(level, 0, sizeof *level);
    level->degree = tower->height + 1;
    if (level->degree == 1) {
        level->free = 1;
        level->dimension = idsi_laws_trivial(tower->laws) ? 0 : 1;
        return IDS_OK;
    }
    for (plan.op = 0; plan.op < sig->count; plan.op++) {
        IDSI_TRY(idsi_degrees_each(&sig->ops[plan.op].group, level->degree, add_block, &plan));
    }
    if (!tower->count_only && level->columns >= UINT32_MAX) {
        st = idsi_fail(tower->ctx, IDS_ERR_LIMIT,
                       "degree %u has %llu monomials; in the quotient by the consequences of "
                       "lower degrees it still has %llu columns, and 4294967294 are possible",
                       level->degree, (unsigned long long)level->free,
                       (unsigned long long)level->columns);
    }
done:
    if (st != IDS_OK) {
        idsi_level_clear(tower->ctx, level);
    }
    return st;
}

const idsi_block *idsi_level_block(const idsi_level *level, uint32_t op, const uint8_t *degree)
{
    for (size_t i = 0; i < level->block_count; i++) {
        const idsi_block *block = &level->blocks[i];
        if (block->op == op && memcmp(block->degree, degree, block->split.count) == 0) {
            return block;
        }
    }
    return NULL;
}

/* Copies the complete echelon form into the level's tables. */
static ids_status make_tables(ids_ctx *ctx, const idsi_echelon *echelon, idsi_level *level)
{
    ids_status st = IDS_OK;
    uint32_t *number = NULL; /* of the normal form that a column is */
    const idsi_entry *rule = NULL;
    uint32_t count = 0;
    size_t at = 0;
    uint64_t normal = 0;

    IDSI_TRY(idsi_alloc_array(ctx, level->columns, sizeof *number, &number));
    IDSI_TRY(idsi_alloc_array(ctx, level->dimension, sizeof *level->normal, &level->normal));
    IDSI_TRY(idsi_alloc_array(ctx, level->columns + 1, sizeof *level->start, &level->start));
    IDSI_TRY(idsi_alloc_array(ctx, idsi_echelon_fill(echelon) + level->dimension,
                              sizeof *level->entries, &level->entries));
    for (uint32_t c = 0; c < level->columns; c++) {
        level->start[c] = at;
        if (idsi_echelon_rule(echelon, c, &rule, &count)) {
            for (uint32_t i = 0; i < count; i++) {
                level->entries[at++] = (idsi_entry){number[rule[i].column], rule[i].value};
            }
        } else {
            number[c] = (uint32_t)normal;
            level->normal[normal] = c;
            level->entries[at++] = (idsi_entry){(uint32_t)normal, 1};
            normal++;
        }
    }
    level->start[level->columns] = at;
done:
    idsi_free(ctx, number);
    return st;
}

static ids_status check_budget(const idsi_tower *tower, const idsi_level *level)
{
    ids_memory memory = ids_ctx_memory(tower->ctx);
    uint64_t need = idsi_echelon_base_bytes(level->columns);
    uint64_t left = memory.budget > memory.live ? memory.budget - memory.live : 0;

    if (memory.budget == 0 || need <= left) {
        return IDS_OK;
    }
    return idsi_fail(tower->ctx, IDS_ERR_LIMIT,
                     "degree %u has %llu monomials, %llu columns in the quotient by the "
                     "consequences of lower degrees; they need %llu bytes at least, %llu of the "
                     "budget of %llu bytes are left",
                     level->degree, (unsigned long long)level->free,
                     (unsigned long long)level->columns, (unsigned long long)need,
                     (unsigned long long)left, (unsigned long long)memory.budget);
}

/* Puts the size of the degree before the message of a limit that was hit on the way. */
static ids_status fail_size(const idsi_tower *tower, const idsi_level *level)
{
    return idsi_fail(tower->ctx, IDS_ERR_LIMIT,
                     "degree %u has %llu monomials, %llu columns in the quotient by the "
                     "consequences of lower degrees; %s",
                     level->degree, (unsigned long long)level->free,
                     (unsigned long long)level->columns, ids_ctx_message(tower->ctx));
}

static ids_status solve_level(idsi_tower *tower, idsi_level *level, bool tables)
{
    ids_status st = IDS_OK;
    idsi_rows *rows = NULL;
    idsi_result result = {0};
    idsi_matrix matrix = {.ctx = tower->ctx,
                          .prime = tower->prime,
                          .columns = (uint32_t)level->columns,
                          .tables = tables,
                          .piece = idsi_rows_piece};

    IDSI_TRY(check_budget(tower, level));
    IDSI_TRY(idsi_rows_create(tower, level, &rows));
    matrix.pieces = idsi_rows_pieces(rows);
    matrix.source_user = rows;
    st = idsi_eliminate(&matrix, &tower->random, &result);
    if (st == IDS_OK) {
        level->dimension = level->columns - result.rank;
        level->error += result.error;
        st = tables ? make_tables(tower->ctx, result.echelon, level) : IDS_OK;
    }
    if (st == IDS_ERR_LIMIT) {
        st = fail_size(tower, level);
    }
done:
    idsi_rows_free(rows);
    idsi_echelon_free(result.echelon);
    return st;
}

ids_status idsi_tower_grow(idsi_tower *tower, bool tables)
{
    ids_status st = IDS_OK;
    idsi_level *level = &tower->level[tower->height + 1];

    IDSI_TRY(idsi_level_plan(tower, level));
    /* What was missed in a lower degree can be missing in all above, those without columns too. */
    level->error = tower->height > 0 ? tower->level[tower->height].error : 0;
    if (tower->count_only) {
        level->dimension = level->degree > 1 ? level->columns : level->dimension;
    } else if (level->degree > 1 && level->columns > 0) {
        IDSI_TRY(solve_level(tower, level, tables));
    }
    tower->height++;
done:
    if (st != IDS_OK) {
        idsi_level_clear(tower->ctx, level);
    }
    return st;
}
