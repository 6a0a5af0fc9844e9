/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * All monomials of a degree of commutative operations: that they are given in strictly rising
 * order, so that no two are the same, and that they have the indices they should.
 *
 * The order is checked without the library's numbering. Within a type: node by node in the prefix
 * code, argument by argument, first the labels of the arguments from this one to the last of the
 * same shape, then its own; of two label sets the one with the least label in which they differ
 * comes first. With commutative operations all these sets are those of leaves side by side.
 */
#ifndef IDSPAN_TEST_TREE_ENUMERATE_H
#define IDSPAN_TEST_TREE_ENUMERATE_H

#include "tree_samples.h"

typedef struct enumerate_case {
    const char *text;
    uint32_t degree;
    uint64_t size;
} enumerate_case;

static const enumerate_case enumerate_cases[] = {
    {"c2", 10, 34459425},   /* OEIS A001147 */
    {"c2 c3", 9, 10525900}, /* OEIS A268163 */
};

typedef struct enumerate_range {
    uint8_t from;
    uint8_t to;
} enumerate_range;

typedef struct enumerator {
    const sample_ops *ops;
    uint64_t type;
    uint32_t ranges;
    enumerate_range range[4 * IDS_MAX_DEGREE];
    uint64_t before[2][IDS_MAX_DEGREE + 1]; /* labels of the leaves 0 .. i-1; now and before */
    int now;
    int32_t shape[IDSI_MAX_TOKENS]; /* labels as 1 */
} enumerator;

static inline uint32_t enumerate_add(enumerator *e, uint32_t at, uint32_t leaf)
{
    uint32_t arity = 0;
    uint32_t start[IDS_MAX_ARITY + 1];
    uint32_t first[IDS_MAX_ARITY + 1];

    if (e->shape[at] > 0) {
        return leaf + 1;
    }
    arity = e->ops->op[-1 - e->shape[at]].arity;
    start[0] = at + 1;
    first[0] = leaf;
    for (uint32_t i = 0; i < arity; i++) {
        start[i + 1] = start[i] + sample_subtree(e->ops, e->shape + start[i]);
        first[i + 1] = first[i];
        for (uint32_t j = start[i]; j < start[i + 1]; j++) {
            first[i + 1] += e->shape[j] > 0;
        }
    }
    for (uint32_t i = 0; i + 1 < arity; i++) {
        uint32_t end = i + 1;

        while (end < arity && start[end + 1] - start[end] == start[i + 1] - start[i] &&
               memcmp(e->shape + start[end], e->shape + start[i],
                      (start[i + 1] - start[i]) * sizeof *e->shape) == 0) {
            end++;
        }
        if (end < arity) {
            e->range[e->ranges++] =
                (enumerate_range){.from = (uint8_t)first[i], .to = (uint8_t)first[end]};
        }
        if (end > i + 1) {
            e->range[e->ranges++] =
                (enumerate_range){.from = (uint8_t)first[i], .to = (uint8_t)first[i + 1]};
        }
    }
    for (uint32_t i = 0; i < arity; i++) {
        (void)enumerate_add(e, start[i], first[i]);
    }
    return first[arity];
}

/* Whether the monomial comes after the one that was looked at before. */
static inline bool enumerate_rises(enumerator *e, const ids_mono_view *view, bool first)
{
    uint64_t *now = e->before[e->now];
    const uint64_t *last = e->before[1 - e->now];

    e->now = 1 - e->now;
    now[0] = 0;
    for (uint32_t i = 0; i < view->degree; i++) {
        now[i + 1] = now[i] | UINT64_C(1) << view->code[view->leaf[i]];
    }
    if (first || view->type != e->type) {
        bool rises = first || view->type == e->type + 1;

        e->type = view->type;
        e->ranges = 0;
        for (uint32_t i = 0; i < view->length; i++) {
            e->shape[i] = view->code[i] > 0 ? 1 : view->code[i];
        }
        (void)enumerate_add(e, 0, 0);
        return rises;
    }
    for (uint32_t r = 0; r < e->ranges; r++) {
        uint64_t old = last[e->range[r].to] ^ last[e->range[r].from];
        uint64_t new = now[e->range[r].to] ^ now[e->range[r].from];
        uint64_t differ = old ^ new;

        if (differ != 0) {
            return (old & differ & (~differ + 1)) != 0;
        }
    }
    return false;
}

typedef struct enumerate_world {
    ids_ctx *ctx;
    sample_ops ops;
    ids_signature *sig;
    ids_types *types;
    ids_basis *basis;
} enumerate_world;

static inline void enumerate_open(enumerate_world *w, const enumerate_case *which)
{
    memset(w, 0, sizeof *w);
    w->ctx = test_ctx();
    sample_read(which->text, &w->ops);
    w->sig = sample_make(w->ctx, &w->ops);
    TEST_OK(w->ctx, ids_types_create(w->ctx, w->sig, which->degree, &w->types));
    TEST_OK(w->ctx, ids_basis_create(w->ctx, w->types, which->degree, &w->basis));
    ck_assert_uint_eq(ids_basis_size(w->basis), which->size);
}

static inline void enumerate_close(enumerate_world *w)
{
    ids_basis_free(w->basis);
    ids_types_free(w->types);
    ids_signature_free(w->sig);
    test_ctx_free(w->ctx);
}

/* Goes through all; every `step`-th monomial must be what its index gives, and the other way. */
static inline void enumerate_check(const enumerate_case *which, uint64_t step)
{
    static enumerator e;
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;
    uint64_t index = 0;
    uint64_t given = 0;
    uint64_t type = 0;
    const ids_mono_view *view = NULL;
    ids_iter *iter = NULL;
    enumerate_world w;

    enumerate_open(&w, which);
    memset(&e, 0, sizeof e);
    e.ops = &w.ops;
    TEST_OK(w.ctx, ids_iter_create(w.ctx, w.basis, 0, which->size, &iter));
    while ((view = ids_iter_next(iter)) != NULL) {
        SURE(enumerate_rises(&e, view, given == 0));
        SURE(view->index == given);
        if (given % step == 0) {
            SURE(ids_basis_rank_code(w.basis, view->code, view->length, &index) == IDS_OK);
            SURE(index == given);
            SURE(ids_basis_unrank_code(w.basis, given, code, IDSI_MAX_TOKENS, &length) == IDS_OK);
            SURE(length == view->length && memcmp(code, view->code, length * sizeof *code) == 0);
        }
        type = view->type;
        given++;
    }
    ck_assert_uint_eq(given, which->size);
    ck_assert_uint_eq(type + 1, ids_types_count(w.types, which->degree));
    ids_iter_free(iter);
    enumerate_close(&w);
}

#endif
