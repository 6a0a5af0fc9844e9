/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The plan of an association type: how its labels are dealt, as a list of cuts.
 *
 * The labels stand in an array of `degree` places. Every subtree owns consecutive places, and so
 * does every family of arguments (split.c), because a node lays out its arguments in the preorder
 * of their forest. Each choice of split.c is then a cut of sorted labels in consecutive places
 * into a sorted front part and a sorted rest, in place:
 *
 *     ((a b)(c d)) e, all commutative       places  0 1 2 3 4
 *     cut 0: take 4 of 5, places 0..4               1 3 4 5|2
 *     cut 1: take 2 of 4 with the least, 0..3       1 4|3 5|2    = ((1 4)(3 5)) 2
 *
 * The cuts stand in the order of the nodes in the prefix code, so that the index of a monomial
 * within its type is the mixed-radix number of their rows, the first cut most significant. Cuts
 * with one row are left out; where they say that one place holds the least label of several, there
 * is a check. Every cut ends at a place where no other ends, so there are less than `degree`.
 *
 * The places of a cut are either inside a part of an earlier one or disjoint from it: `within` is
 * the latest that contains them, and what is sorted in them depends on that one and those before.
 */
#include <string.h>

#include "basis_private.h"

/* Plans of a degree are stored up to this size. */
#define STORED_BYTES ((size_t)32 << 20)

#define HEADER_BYTES 4u

typedef struct maker {
    const ids_basis *basis;
    idsi_decks *decks; /* to add decks to; NULL: they are all there */
    ids_status status; /* of adding them */
    idsi_plan_room *room;
    uint32_t cuts;
    uint32_t checks;
    uint32_t length;
} maker;

static void make_cut(maker *m, uint32_t at, uint32_t size, uint32_t taken, bool least)
{
    const idsi_decks *decks = &m->basis->decks;
    idsi_cut *cut = &m->room->cut[m->cuts];

    if (m->decks != NULL && m->status == IDS_OK) {
        uint16_t deck = 0;

        m->status = idsi_decks_add(m->basis->ctx, m->decks, size, taken, least, &deck);
    }
    if (m->status != IDS_OK) {
        return;
    }
    cut->deck = decks->number[idsi_deck_key(decks->degree, size, taken, least)];
    cut->at = (uint8_t)at;
    cut->within = IDSI_NO_CUT;
    for (uint32_t c = m->cuts; c-- > 0 && cut->within == IDSI_NO_CUT;) {
        const idsi_cut *other = &m->room->cut[c];

        if (other->at <= at && at + size <= (uint32_t)other->at + decks->deck[other->deck].size) {
            cut->within = (uint8_t)c;
        }
    }
    m->cuts++;
}

/* Lays out the type in the places from `at` on. */
static void make_subtree(maker *m, uint32_t type, uint32_t at)
{
    const ids_types *types = m->basis->types;
    const uint32_t *children = NULL;
    idsi_split split;
    uint32_t next[IDSI_SPLIT_MAX + 1]; /* first place of what is left to deal; last: to roots */
    uint32_t left[IDSI_SPLIT_MAX + 1]; /* how much that is */
    uint32_t start[IDSI_SPLIT_MAX];

    IDSI_ASSERT(m->room != NULL);
    if (type == 0) {
        m->room->leaf[at] = (uint8_t)m->length;
        m->room->shape[m->length] = 0;
        m->length++;
        return;
    }
    children = types->children + types->list[type].children;
    idsi_type_split(types, type, &split);
    m->room->shape[m->length] = (int8_t)(-1 - (int)types->list[type].op);
    m->length++;
    next[split.count] = at;
    left[split.count] = split.total;
    for (uint32_t i = 0; i < split.count; i++) {
        uint32_t from = split.parent[i] < 0 ? split.count : (uint32_t)split.parent[i];
        uint32_t family = split.family[i];
        uint32_t size = split.size[i];

        start[i] = next[from];
        if (family < left[from]) {
            make_cut(m, start[i], left[from], family, false);
        }
        next[from] += family;
        left[from] -= family;
        if (size < family && size > 1) {
            make_cut(m, start[i], family, size, true);
        } else if (size < family) {
            m->room->check[m->checks] =
                (idsi_check){.at = (uint8_t)start[i], .family = (uint8_t)family};
            m->checks++;
        }
        next[i] = start[i] + size;
        left[i] = family - size;
    }
    for (uint32_t i = 0; i < split.count; i++) {
        make_subtree(m, children[i], start[i]);
    }
}

static void finish_plan(const maker *m, idsi_plan *plan)
{
    plan->cuts = m->cuts;
    plan->checks = m->checks;
    plan->length = m->length;
    plan->cut = m->room->cut;
    plan->check = m->room->check;
    plan->leaf = m->room->leaf;
    plan->shape = m->room->shape;
}

void idsi_plan_make(const ids_basis *basis, uint32_t type, idsi_plan_room *room, idsi_plan *plan)
{
    maker m = {.basis = basis, .room = room};

    make_subtree(&m, basis->types->first[basis->degree] + type, 0);
    finish_plan(&m, plan);
}

/* ---- stored plans -------------------------------------------------------------------------- */

void idsi_plan_get(const ids_basis *basis, uint32_t type, idsi_plan_room *room, idsi_plan *plan)
{
    if (basis->plans.start == NULL) {
        idsi_plan_make(basis, type, room, plan);
        return;
    }
    const uint8_t *at = basis->plans.bytes + basis->plans.start[type];
    plan->cuts = at[0];
    plan->checks = at[1];
    plan->length = at[2];
    at += HEADER_BYTES;
    plan->cut = (const idsi_cut *)(const void *)at;
    at += plan->cuts * sizeof(idsi_cut);
    plan->check = (const idsi_check *)(const void *)at;
    at += plan->checks * sizeof(idsi_check);
    plan->leaf = at;
    plan->shape = (const int8_t *)(at + basis->degree);
}

static ids_status store_plan(ids_ctx *ctx, ids_basis *basis, uint32_t type, const idsi_plan *plan)
{
    ids_status st = IDS_OK;
    idsi_plans *plans = &basis->plans;
    size_t need = HEADER_BYTES + plan->cuts * sizeof(idsi_cut) + plan->checks * sizeof(idsi_check) +
                  basis->degree + plan->length;

    need = (need + 3) / 4 * 4;
    if (plans->count + need > plans->capacity) {
        size_t capacity = 2 * plans->capacity + need;

        IDSI_TRY(idsi_resize_array(ctx, capacity, 1, &plans->bytes));
        plans->capacity = capacity;
    }
    uint8_t *at = plans->bytes + plans->count;
    plans->start[type] = (uint32_t)plans->count;
    plans->count += need;
    at[0] = (uint8_t)plan->cuts;
    at[1] = (uint8_t)plan->checks;
    at[2] = (uint8_t)plan->length;
    at += HEADER_BYTES;
    memcpy(at, plan->cut, plan->cuts * sizeof(idsi_cut));
    at += plan->cuts * sizeof(idsi_cut);
    memcpy(at, plan->check, plan->checks * sizeof(idsi_check));
    at += plan->checks * sizeof(idsi_check);
    memcpy(at, plan->leaf, basis->degree);
    memcpy(at + basis->degree, plan->shape, plan->length);
done:
    return st;
}

static void drop_plans(ids_ctx *ctx, idsi_plans *plans)
{
    idsi_free(ctx, plans->start);
    idsi_free(ctx, plans->bytes);
    memset(plans, 0, sizeof *plans);
}

static uint64_t hash_shape(const idsi_shape *shape, size_t length)
{
    uint64_t hash = length;

    for (size_t i = 0; i < (length + 7) / 8; i++) {
        hash = idsi_hash_add(hash, shape->word[i]);
    }
    return hash;
}

static ids_status fill_slots(ids_ctx *ctx, ids_basis *basis)
{
    ids_status st = IDS_OK;
    idsi_plans *plans = &basis->plans;
    size_t slots = 4;

    while (slots / 2 < basis->type_count) {
        slots *= 2;
    }
    IDSI_TRY(idsi_alloc_array(ctx, slots, sizeof *plans->slots, &plans->slots));
    plans->slot_mask = slots - 1;
    for (uint32_t t = 0; t < basis->type_count; t++) {
        idsi_shape shape = {0};
        idsi_plan plan;

        idsi_plan_get(basis, t, NULL, &plan);
        memcpy(shape.word, plan.shape, plan.length);
        uint64_t hash = hash_shape(&shape, plan.length);
        while (plans->slots[hash & plans->slot_mask] != 0) {
            hash++;
        }
        plans->slots[hash & plans->slot_mask] = t + 1;
    }
done:
    return st;
}

bool idsi_plan_find(const ids_basis *basis, const idsi_shape *shape, size_t length, uint32_t *type,
                    idsi_plan *plan)
{
    const idsi_plans *plans = &basis->plans;

    if (plans->start == NULL) {
        return false;
    }
    for (uint64_t hash = hash_shape(shape, length);; hash++) {
        uint32_t slot = plans->slots[hash & plans->slot_mask];

        if (slot == 0) {
            return false;
        }
        idsi_plan_get(basis, slot - 1, NULL, plan);
        if (plan->length == length && memcmp(shape->word, plan->shape, length) == 0) {
            *type = slot - 1;
            return true;
        }
    }
}

ids_status idsi_plans_create(ids_ctx *ctx, ids_basis *basis)
{
    ids_status st = IDS_OK;
    idsi_plan_room room;
    idsi_plan plan;

    IDSI_TRY(idsi_decks_init(ctx, basis->degree, &basis->decks));
    IDSI_TRY(
        idsi_alloc_array(ctx, basis->type_count, sizeof *basis->plans.start, &basis->plans.start));
    for (uint32_t t = 0; t < basis->type_count; t++) {
        maker m = {.basis = basis, .decks = &basis->decks, .room = &room};

        make_subtree(&m, basis->types->first[basis->degree] + t, 0);
        IDSI_TRY(m.status);
        if (basis->plans.start != NULL) {
            finish_plan(&m, &plan);
            IDSI_TRY(store_plan(ctx, basis, t, &plan));
            if (basis->plans.count > STORED_BYTES) {
                drop_plans(ctx, &basis->plans);
            }
        }
        if ((t & 0xfffu) == 0xfffu) {
            IDSI_TRY(idsi_poll(ctx, NULL));
        }
    }
    if (basis->plans.start != NULL) {
        IDSI_TRY(fill_slots(ctx, basis));
    }
    IDSI_TRY(idsi_decks_fill(ctx, &basis->decks));
done:
    return st;
}

/* ---- dealing ------------------------------------------------------------------------------- */

void idsi_plan_deal(const ids_basis *basis, const idsi_plan *plan, const uint64_t *digit,
                    uint8_t *label)
{
    uint8_t sorted[IDS_MAX_DEGREE];
    uint8_t computed[IDS_MAX_DEGREE];

    for (uint32_t i = 0; i < basis->degree; i++) {
        label[i] = (uint8_t)(i + 1);
    }
    for (uint32_t c = 0; c < plan->cuts; c++) {
        const idsi_deck *deck = &basis->decks.deck[plan->cut[c].deck];
        uint8_t *place = label + plan->cut[c].at;
        const uint8_t *row = computed;

        if (deck->rows != SIZE_MAX) {
            row = basis->decks.rows + deck->rows + digit[c] * deck->size;
        } else {
            idsi_deck_row(&basis->decks, deck, digit[c], computed);
        }
        for (uint32_t i = 0; i < deck->size; i++) {
            sorted[i] = place[i];
        }
        for (uint32_t i = 0; i < deck->size; i++) {
            place[i] = sorted[row[i]];
        }
    }
}

ids_status idsi_plan_gather(const ids_basis *basis, const idsi_plan *plan, const int32_t *code,
                            uint64_t *digit)
{
    uint64_t before[IDS_MAX_DEGREE + 1]; /* set of the labels in the places 0 .. i-1 */
    bool proper = true;
    bool canonical = true;

    before[0] = 0;
    for (uint32_t i = 0; i < basis->degree; i++) {
        uint32_t label = (uint32_t)code[plan->leaf[i]] - 1;

        proper = proper && label < basis->degree;
        before[i + 1] = before[i] | UINT64_C(1) << (label & 63);
    }
    if (!proper || before[basis->degree] != idsi_labels_all(basis->degree)) {
        return IDS_ERR_ARG;
    }
    for (uint32_t i = 0; i < plan->checks; i++) {
        uint32_t at = plan->check[i].at;
        uint64_t family = before[at + plan->check[i].family] ^ before[at];
        uint64_t first = before[at + 1] ^ before[at];

        canonical = canonical && first == (family & (~family + 1));
    }
    for (uint32_t c = 0; canonical && c < plan->cuts; c++) {
        const idsi_deck *deck = &basis->decks.deck[plan->cut[c].deck];
        uint32_t at = plan->cut[c].at;
        uint64_t all = before[at + deck->size] ^ before[at];
        uint64_t taken = before[at + deck->taken] ^ before[at];

        canonical = idsi_deck_find(&basis->decks, deck, all, taken, &digit[c]);
    }
    return canonical ? IDS_OK : IDS_ERR_NOT_CANONICAL;
}

/* Quotient and remainder without a division: the estimate is at most one too small, because
 * x/r - x * inverse / 2^64 <= x / 2^64 < 1. */
static inline uint64_t divide(uint64_t x, const idsi_deck *deck, uint64_t *rest)
{
#ifdef __SIZEOF_INT128__
    uint64_t quotient = (uint64_t)(((unsigned __int128)x * deck->inverse) >> 64);
    uint64_t left = x - quotient * deck->radix;
    bool more = left >= deck->radix;

    *rest = more ? left - deck->radix : left;
    return quotient + more;
#else
    *rest = x % deck->radix;
    return x / deck->radix;
#endif
}

void idsi_plan_digits(const ids_basis *basis, const idsi_plan *plan, uint64_t index,
                      uint64_t *digit)
{
    for (uint32_t c = plan->cuts; c-- > 0;) {
        index = divide(index, &basis->decks.deck[plan->cut[c].deck], &digit[c]);
    }
}

void idsi_plan_write(const ids_basis *basis, const idsi_plan *plan, const uint8_t *label,
                     int32_t *code)
{
    for (uint32_t i = 0; i < plan->length; i++) {
        code[i] = (int32_t)plan->shape[i];
    }
    for (uint32_t i = 0; i < basis->degree; i++) {
        code[plan->leaf[i]] = label[i];
    }
}
