/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The stabiliser at a root: which argument orders of the operation keep the types of the
 * arguments, and how that group H splits.
 *
 * The automorphisms of a type are those of its arguments, independently, and then H, which moves
 * equal arguments as a whole. If H is the direct product of its actions on sets of places (the
 * blocks), the whole group is the direct product over the blocks. A block that is one orbit of
 * places with arguments c gives Aut(c) wr (the action). A block of several orbits does so too
 * when only one of them has arguments with automorphisms and the action on that orbit is
 * faithful; otherwise it is (product of all Aut(c)) : (the action).
 *
 * For full symmetric groups H is the product of the symmetric groups on the runs of equal types,
 * and nothing is listed. For others the elements of H are listed and counted: H restricted to a
 * set of places has order |H| / (number of elements that fix each of them).
 */
#include <stdio.h>
#include <string.h>

#include "automorphism_private.h"

/* Places and group while the blocks are looked for. */
typedef struct places {
    ids_ctx *ctx;
    uint32_t arity;
    uint32_t stirring;   /* places whose arguments have automorphisms of their own */
    uint64_t order;      /* elements of H */
    ids_signed_order *h; /* identity first */
} places;

static ids_signed_order identity_order(uint32_t arity)
{
    ids_signed_order e = {.sign = 1};
    for (uint32_t i = 0; i < arity; i++) {
        e.image[i] = (uint8_t)i;
    }
    return e;
}

/* ---- full symmetric groups ---------------------------------------------------------------- */

static void symmetric_blocks(const idsi_group *group, const uint32_t *child, bool symmetric,
                             idsi_stabilizer *s)
{
    for (uint32_t i = 0, end = 0; i < group->arity; i = end) {
        idsi_block *block = &s->block[s->block_count++];
        end = i + 1;
        *block = (idsi_block){.order = 1, .orbit_count = 1, .orbit = {1u << i}};
        while (symmetric && end < group->arity && child[end] == child[i]) {
            ids_signed_order swap = identity_order(group->arity);
            swap.image[end - 1] = (uint8_t)end;
            swap.image[end] = (uint8_t)(end - 1);
            swap.sign = group->symmetry == IDS_SYMMETRY_ALTERNATING ? -1 : 1;
            s->generator[s->generator_count++] = swap;
            block->orbit[0] |= 1u << end;
            end++;
            block->order *= end - i;
        }
        if (end > i + 1) {
            block->kind = IDSI_BLOCK_WREATH;
            snprintf(block->name, sizeof block->name, "S%u", end - i);
        }
    }
}

/* ---- listed groups ------------------------------------------------------------------------ */

static ids_status list_stabilizer(const idsi_group *group, const uint32_t *child, places *p)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_alloc_array(p->ctx, group->order, sizeof *p->h, &p->h));
    for (uint64_t e = 0; e < group->order; e++) {
        const ids_signed_order *element = &group->elements[e];
        bool keeps = true;
        for (uint32_t i = 0; keeps && i < group->arity; i++) {
            keeps = child[element->image[i]] == child[i];
        }
        if (keeps) {
            p->h[p->order++] = *element;
        }
    }
done:
    return st;
}

/* Whether a subgroup that was closed before contains an argument order. */
static bool contains(const idsi_group *group, const ids_signed_order *e)
{
    if (group->symmetry == IDS_SYMMETRY_COMMUTATIVE ||
        group->symmetry == IDS_SYMMETRY_ALTERNATING) {
        return true;
    }
    for (uint64_t i = 0; group->elements != NULL && i < group->order; i++) {
        if (memcmp(group->elements[i].image, e->image, group->arity) == 0) {
            return true;
        }
    }
    return false;
}

/* Each element that the earlier ones do not generate; so at most log2 of the order. */
static ids_status choose_generators(const places *p, idsi_stabilizer *s)
{
    ids_status st = IDS_OK;
    idsi_group known = {.arity = p->arity, .order = 1, .symmetry = IDS_SYMMETRY_NONE};

    for (uint64_t e = 1; known.order < p->order && e < p->order; e++) {
        if (!contains(&known, &p->h[e])) {
            IDSI_ASSERT(s->generator_count < 2 * IDS_MAX_ARITY);
            s->generator[s->generator_count++] = p->h[e];
            idsi_group_clear(p->ctx, &known);
            IDSI_TRY(idsi_group_close(p->ctx, p->arity, s->generator, s->generator_count, &known));
        }
    }
done:
    idsi_group_clear(p->ctx, &known);
    return st;
}

static uint32_t orbit_of(const places *p, uint32_t place)
{
    uint32_t orbit = 0;
    for (uint64_t e = 0; e < p->order; e++) {
        orbit |= 1u << p->h[e].image[place];
    }
    return orbit;
}

/* Order of H restricted to a set of places that it keeps. */
static uint64_t restricted_order(const places *p, uint32_t set)
{
    uint64_t kernel = 0;
    for (uint64_t e = 0; e < p->order; e++) {
        bool fixes = true;
        for (uint32_t i = 0; fixes && i < p->arity; i++) {
            fixes = !((set >> i) & 1u) || p->h[e].image[i] == i;
        }
        kernel += fixes;
    }
    IDSI_ASSERT(kernel > 0); /* the identity is there */
    /* cppcheck-suppress zerodiv */
    return p->order / kernel;
}

/* Names H as it acts on a set of places. */
static ids_status name_action(const places *p, uint32_t set, char name[IDSI_ACTION_NAME])
{
    ids_status st = IDS_OK;
    idsi_action action = {0};
    uint8_t number[IDS_MAX_ARITY] = {0};

    for (uint32_t i = 0; i < p->arity && i < IDS_MAX_ARITY; i++) {
        if ((set >> i) & 1u) {
            number[i] = (uint8_t)action.degree++;
        }
    }
    IDSI_TRY(idsi_alloc_array(p->ctx, p->order, sizeof *action.list, &action.list));
    for (uint64_t e = 0; e < p->order; e++) {
        for (uint32_t i = 0; i < p->arity; i++) {
            if ((set >> i) & 1u) {
                action.list[e].image[number[i]] = number[p->h[e].image[i]];
            }
        }
    }
    action.count = p->order;
    IDSI_TRY(idsi_action_name(p->ctx, &action, name));
done:
    idsi_free(p->ctx, action.list);
    return st;
}

/* Describes the block made of `count` orbits. */
static ids_status describe_block(const places *p, const uint32_t *orbit, uint32_t count,
                                 idsi_block *block)
{
    uint32_t all = 0;

    *block = (idsi_block){.kind = IDSI_BLOCK_WREATH};
    for (uint32_t i = 0; i < count; i++) {
        all |= orbit[i];
        if ((orbit[i] & p->stirring) != 0) {
            block->orbit[block->orbit_count++] = orbit[i];
        }
    }
    block->order = restricted_order(p, all);
    if (block->order == 1) {
        block->kind = IDSI_BLOCK_FIXED;
        return IDS_OK;
    }
    if (block->orbit_count == 1 && restricted_order(p, block->orbit[0]) == block->order) {
        return name_action(p, block->orbit[0], block->name);
    }
    if (block->orbit_count > 0) {
        block->kind = IDSI_BLOCK_SEMIDIRECT;
    }
    return name_action(p, all, block->name);
}

/*
 * Takes from the orbits `left` (a bit set of their numbers) the smallest set that holds the first
 * of them and of which H is the direct product with the rest.
 */
static uint32_t split_off(const places *p, const uint32_t *orbit, uint32_t left)
{
    uint32_t first = left & (~left + 1);
    uint32_t best = left;

    for (uint32_t set = left; set != 0; set = (set - 1) & left) {
        uint32_t inside = 0;
        uint32_t outside = 0;
        if ((set & first) == 0 || __builtin_popcount(set) >= __builtin_popcount(best)) {
            continue;
        }
        for (uint32_t i = 0; i < p->arity; i++) {
            inside |= (set >> i) & 1u ? orbit[i] : 0;
            outside |= (left & ~set) >> i & 1u ? orbit[i] : 0;
        }
        if (restricted_order(p, inside) * restricted_order(p, outside) ==
            restricted_order(p, inside | outside)) {
            best = set;
        }
    }
    return best;
}

static ids_status listed_blocks(const places *p, idsi_stabilizer *s)
{
    ids_status st = IDS_OK;
    uint32_t orbit[IDS_MAX_ARITY] = {0};
    uint32_t count = 0;
    uint32_t covered = 0;

    for (uint32_t i = 0; i < p->arity; i++) {
        if (!((covered >> i) & 1u)) {
            orbit[count] = orbit_of(p, i);
            covered |= orbit[count++];
        }
    }
    for (uint32_t left = (1u << count) - 1; left != 0;) {
        uint32_t chosen[IDS_MAX_ARITY] = {0};
        uint32_t number = 0;
        uint32_t set = split_off(p, orbit, left);
        for (uint32_t i = 0; i < count; i++) {
            if ((set >> i) & 1u) {
                chosen[number++] = orbit[i];
            }
        }
        IDSI_TRY(describe_block(p, chosen, number, &s->block[s->block_count]));
        s->block_count++;
        left &= ~set;
    }
done:
    return st;
}

ids_status idsi_stabilizer_find(ids_ctx *ctx, const ids_types *types, uint32_t type,
                                idsi_stabilizer *stabilizer)
{
    ids_status st = IDS_OK;
    const idsi_type *entry = &types->list[type];
    const idsi_group *group = &types->sig->ops[entry->op].group;
    const uint32_t *child = types->children + entry->children;
    places p = {.ctx = ctx, .arity = group->arity};

    memset(stabilizer, 0, sizeof *stabilizer);
    if (group->symmetry != IDS_SYMMETRY_GENERATED) {
        symmetric_blocks(group, child, group->symmetry != IDS_SYMMETRY_NONE, stabilizer);
        return IDS_OK;
    }
    for (uint32_t i = 0; i < group->arity; i++) {
        if (types->list[child[i]].automorphisms != 1) {
            p.stirring |= 1u << i;
        }
    }
    IDSI_TRY(list_stabilizer(group, child, &p));
    IDSI_TRY(choose_generators(&p, stabilizer));
    IDSI_TRY(listed_blocks(&p, stabilizer));
done:
    idsi_free(ctx, p.h);
    return st;
}
