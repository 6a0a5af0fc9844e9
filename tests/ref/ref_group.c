/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Symmetry groups as complete lists of signed argument orders.
 *
 * Closure: start with the identity, multiply everything by every generator until nothing is new.
 * A permutation that is met with both signs forces the operation to be zero.
 */
#include "ref.h"

#include <string.h>

static ref_order identity_order(int arity)
{
    ref_order order = {.sign = 1};
    for (int i = 0; i < arity; i++)
        order.image[i] = i;
    return order;
}

/* op(a) = s op(a.f) and op(b) = t op(b.g) for all b, so with b = a.f: op(a) = s t op(a.f.g). */
static ref_order product(const ref_order *f, const ref_order *g, int arity)
{
    ref_order order = {.sign = f->sign * g->sign};
    for (int i = 0; i < arity; i++)
        order.image[i] = f->image[g->image[i]];
    return order;
}

/* Adds an order unless it is there. */
static void insert(ref_group *group, const ref_order *order, const char *place)
{
    for (size_t i = 0; i < group->order; i++) {
        const ref_order *old = &group->elements[i];
        if (memcmp(old->image, order->image, sizeof old->image) != 0)
            continue;
        if (old->sign != order->sign)
            ref_die(2, "%s: the signs force the operation to be zero", place);
        return;
    }
    group->elements = ref_grow(group->elements, group->order + 1, sizeof *group->elements);
    group->elements[group->order++] = *order;
}

void ref_group_close(ref_group *group, int arity, const ref_order *generators, size_t count,
                     const char *place)
{
    *group = (ref_group){.arity = arity};
    ref_order one = identity_order(arity);
    insert(group, &one, place);
    for (size_t i = 0; i < group->order; i++) {
        for (size_t g = 0; g < count; g++) {
            ref_order next = product(&group->elements[i], &generators[g], arity);
            insert(group, &next, place);
        }
    }
}

void ref_group_full(ref_group *group, int arity, bool alternating)
{
    ref_order swaps[REF_ARITY];
    for (int i = 0; i + 1 < arity; i++) {
        swaps[i] = identity_order(arity);
        swaps[i].image[i] = i + 1;
        swaps[i].image[i + 1] = i;
        swaps[i].sign = alternating ? -1 : 1;
    }
    ref_group_close(group, arity, swaps, (size_t)(arity - 1), "");
}
