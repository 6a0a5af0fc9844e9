/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Going through the canonical monomials of a degree in the order of the basis.
 *
 * An odometer over the cuts of the current type (basis_plan.c), one wheel a cut, the last one
 * turning fastest. A wheel keeps the sorted labels that it deals, so that its next row is one
 * pass over its own labels; the wheels behind it go back to their first row, which is the sorted
 * order, and nothing in front of it is touched. The prefix code that the caller sees is changed
 * in the same places.
 *
 *     wheel     0: take 4 of 5      1: take 2 of 4 with the least
 *     sorted    1 2 3 4 5           1 3 4 5
 *     row       0 2 3 4 | 1         0 2 | 1 3
 *     label     1 4 3 5 2
 *     code      * * * 1 4 * 3 5 2
 *
 * When a wheel goes back to its first row, its sorted labels are new if the wheel within whose
 * labels they lie has turned or gone back too: then they are taken from `label`. Otherwise they
 * are the old ones, and `label` is put back from them.
 */
#include <string.h>

#include "basis_private.h"

typedef struct wheel {
    const uint8_t *row; /* current row, in a table or in ids_iter.computed */
    const idsi_deck *deck;
    uint64_t left; /* rows behind the current one */
    uint8_t at;
    uint8_t size;
    uint8_t within;
    bool table;
    uint8_t from; /* places that this wheel and those behind it can change */
    uint8_t to;
} wheel;

struct ids_iter {
    ids_ctx *ctx;
    const ids_basis *basis;
    uint64_t remaining; /* monomials still to give */
    bool placed;        /* the next monomial is the current one */
    uint32_t wheels;
    ids_mono_view view;
    uint8_t label[IDS_MAX_DEGREE];
    uint8_t place[IDS_MAX_DEGREE]; /* where in the code the label of a place stands */
    uint8_t leaf[IDS_MAX_DEGREE];  /* where in the code the leaves stand, from left to right */
    int32_t code[IDSI_MAX_TOKENS];
    wheel wheel[IDS_MAX_DEGREE];
    uint8_t sorted[IDS_MAX_DEGREE][IDS_MAX_DEGREE];
    uint8_t computed[IDS_MAX_DEGREE][IDS_MAX_DEGREE]; /* rows of wheels without table */
};

ids_status idsi_iter_make(ids_ctx *ctx, const ids_basis *basis, ids_iter **iter)
{
    ids_status st = IDS_OK;
    ids_iter *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->basis = basis;
    made->view.degree = basis->degree;
    made->view.code = made->code;
    made->view.leaf = made->leaf;
    *iter = made;
done:
    return st;
}

const ids_basis *idsi_iter_basis(const ids_iter *iter)
{
    return iter == NULL ? NULL : iter->basis;
}

static void copy_bytes(uint8_t *to, const uint8_t *from, uint32_t count)
{
    for (uint32_t i = 0; i < count; i++) {
        to[i] = from[i];
    }
}

/* Deals the labels of a wheel by its row. */
static inline void deal(ids_iter *iter, uint32_t w)
{
    const wheel *turned = &iter->wheel[w];
    const uint8_t *sorted = iter->sorted[w];
    uint8_t *label = iter->label + turned->at;

    for (uint32_t i = 0; i < turned->size; i++) {
        label[i] = sorted[turned->row[i]];
    }
}

static void set_row(ids_iter *iter, uint32_t w, uint64_t r)
{
    const idsi_decks *decks = &iter->basis->decks;
    wheel *set = &iter->wheel[w];

    set->left = set->deck->radix - 1 - r;
    if (set->table) {
        set->row = decks->rows + set->deck->rows + r * set->size;
    } else {
        set->row = iter->computed[w];
        idsi_deck_row(decks, set->deck, r, iter->computed[w]);
    }
}

/* The wheels of a type, in the rows `digit`, or in their first rows (NULL). */
static void load_type(ids_iter *iter, uint32_t type, const uint64_t *digit)
{
    idsi_plan_room room;
    idsi_plan plan;
    uint32_t from = iter->basis->degree;
    uint32_t to = 0;
    uint32_t leaves = 0;

    idsi_plan_get(iter->basis, type, &room, &plan);
    iter->view.type = type;
    iter->view.length = plan.length;
    iter->wheels = plan.cuts;
    copy_bytes(iter->place, plan.leaf, iter->basis->degree);
    for (uint32_t i = 0; i < iter->basis->degree; i++) {
        iter->label[i] = (uint8_t)(i + 1);
    }
    for (uint32_t w = 0; w < plan.cuts; w++) {
        wheel *made = &iter->wheel[w];

        made->deck = &iter->basis->decks.deck[plan.cut[w].deck];
        made->at = plan.cut[w].at;
        made->size = made->deck->size;
        made->within = plan.cut[w].within;
        made->table = made->deck->rows != SIZE_MAX;
        copy_bytes(iter->sorted[w], iter->label + made->at, made->size);
        set_row(iter, w, digit == NULL ? 0 : digit[w]);
        deal(iter, w);
    }
    for (uint32_t w = plan.cuts; w-- > 0;) {
        wheel *made = &iter->wheel[w];

        from = made->at < from ? made->at : from;
        to = (uint32_t)made->at + made->size > to ? (uint32_t)made->at + made->size : to;
        made->from = (uint8_t)from;
        made->to = (uint8_t)to;
    }
    idsi_plan_write(iter->basis, &plan, iter->label, iter->code);
    for (uint32_t i = 0; i < plan.length; i++) {
        if (plan.shape[i] == 0) {
            iter->leaf[leaves] = (uint8_t)i;
            leaves++;
        }
    }
}

/* Puts the wheels behind the one that has turned into their first rows. */
static void reset_behind(ids_iter *iter, uint32_t turned)
{
    for (uint32_t w = turned + 1; w < iter->wheels; w++) {
        wheel *reset = &iter->wheel[w];

        set_row(iter, w, 0);
        if (reset->within != IDSI_NO_CUT && reset->within >= turned) {
            copy_bytes(iter->sorted[w], iter->label + reset->at, reset->size);
        } else {
            copy_bytes(iter->label + reset->at, iter->sorted[w], reset->size);
        }
    }
}

static inline void next_row(ids_iter *iter, uint32_t w)
{
    wheel *turned = &iter->wheel[w];

    turned->left--;
    if (turned->table) {
        turned->row += turned->size;
    } else {
        idsi_deck_next_row(turned->deck, iter->computed[w]);
    }
}

/* Turns the last wheel that has a row left, and puts those behind it into their first rows. */
static void advance(ids_iter *iter)
{
    uint32_t w = iter->wheels;

    while (w > 0 && iter->wheel[w - 1].left == 0) {
        w--;
    }
    if (w == 0) {
        load_type(iter, (uint32_t)iter->view.type + 1, NULL);
        return;
    }
    w--;
    next_row(iter, w);
    deal(iter, w);
    reset_behind(iter, w);
    for (uint32_t i = iter->wheel[w].from; i < iter->wheel[w].to; i++) {
        iter->code[iter->place[i]] = iter->label[i];
    }
}

/* The same when the last wheel of all has a row left, which is so most of the time. Nobody reads
 * its part of `label` before it is put back to the sorted order, so only the code is changed. */
static inline void advance_last(ids_iter *iter)
{
    wheel *last = &iter->wheel[iter->wheels - 1];
    const uint8_t *sorted = iter->sorted[iter->wheels - 1];
    const uint8_t *place = iter->place + last->at;

    next_row(iter, iter->wheels - 1);
    for (uint32_t i = 0; i < last->size; i++) {
        iter->code[place[i]] = sorted[last->row[i]];
    }
}

const ids_mono_view *ids_iter_next(ids_iter *iter)
{
    if (iter == NULL || iter->remaining == 0) {
        return NULL;
    }
    iter->remaining--;
    if (iter->placed) {
        iter->placed = false;
        return &iter->view;
    }
    iter->view.index++;
    if (iter->wheels > 0 && iter->wheel[iter->wheels - 1].left > 0) {
        advance_last(iter);
    } else {
        advance(iter);
    }
    return &iter->view;
}

void idsi_iter_place(ids_iter *iter, uint32_t type, const uint64_t *digit, uint64_t index,
                     uint64_t count)
{
    iter->remaining = count;
    iter->placed = true;
    iter->view.index = index;
    if (count > 0) {
        load_type(iter, type, digit);
    }
}

ids_status ids_iter_seek(ids_iter *iter, uint64_t begin, uint64_t end)
{
    uint64_t digit[IDS_MAX_DEGREE];
    uint32_t type = 0;
    idsi_plan_room room;
    idsi_plan plan;

    if (iter == NULL) {
        return IDS_ERR_ARG;
    }
    if (iter->basis->offset == NULL) {
        return IDS_ERR_LIMIT;
    }
    if (begin > end || end > ids_basis_size(iter->basis)) {
        return IDS_ERR_ARG;
    }
    if (begin == end) {
        idsi_iter_place(iter, 0, NULL, begin, 0);
        return IDS_OK;
    }
    type = idsi_basis_type_of(iter->basis, begin);
    idsi_plan_get(iter->basis, type, &room, &plan);
    idsi_plan_digits(iter->basis, &plan, begin - iter->basis->offset[type], digit);
    idsi_iter_place(iter, type, digit, begin, end - begin);
    return IDS_OK;
}

ids_status ids_iter_create(ids_ctx *ctx, const ids_basis *basis, uint64_t begin, uint64_t end,
                           ids_iter **iter)
{
    ids_status st = IDS_OK;
    ids_iter *made = NULL;

    if (ctx == NULL || basis == NULL || iter == NULL) {
        return idsi_fail_arg(ctx, "context, basis or result");
    }
    IDSI_TRY(idsi_iter_make(ctx, basis, &made));
    st = ids_iter_seek(made, begin, end);
    if (st == IDS_ERR_LIMIT) {
        (void)idsi_fail(ctx, st, "the indices of degree %u do not fit 64 bits", basis->degree);
    } else if (st != IDS_OK) {
        (void)idsi_fail(ctx, st, "the range %llu .. %llu is not within 0 .. %llu",
                        (unsigned long long)begin, (unsigned long long)end,
                        (unsigned long long)ids_basis_size(basis));
    } else {
        *iter = made;
        made = NULL;
    }
done:
    ids_iter_free(made);
    return st;
}

void ids_iter_free(ids_iter *iter)
{
    if (iter != NULL) {
        idsi_free(iter->ctx, iter);
    }
}
