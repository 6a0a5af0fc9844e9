/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The canonical tuples of argument degrees of an operation: those that no argument order of its
 * symmetry group makes larger. They come in decreasing lexicographic order.
 */
#include "engine_private.h"

typedef struct walk {
    const idsi_group *group;
    idsi_degrees_fn fn;
    void *user;
    uint8_t degree[IDS_MAX_ARITY];
} walk;

static bool is_canonical(const walk *w)
{
    uint64_t key[IDS_MAX_ARITY];
    uint8_t image[IDS_MAX_ARITY];

    for (uint32_t i = 0; i < w->group->arity; i++) {
        key[i] = w->degree[i];
    }
    (void)idsi_group_canonical(w->group, key, NULL, image);
    for (uint32_t i = 0; i < w->group->arity; i++) {
        if (w->degree[image[i]] != w->degree[i]) {
            return false;
        }
    }
    return true;
}

static ids_status choose(walk *w, uint32_t place, uint32_t left)
{
    ids_status st = IDS_OK;
    uint32_t places = w->group->arity - place;

    if (places == 0) {
        return is_canonical(w) ? w->fn(w->user, w->degree) : IDS_OK;
    }
    uint32_t most = left - (places - 1);
    uint32_t least = places == 1 ? left : 1;
    for (uint32_t degree = most; degree >= least && degree > 0; degree--) {
        w->degree[place] = (uint8_t)degree;
        IDSI_TRY(choose(w, place + 1, left - degree));
    }
done:
    return st;
}

ids_status idsi_degrees_each(const idsi_group *group, uint32_t total, idsi_degrees_fn fn,
                             void *user)
{
    walk w = {.group = group, .fn = fn, .user = user};
    return group->arity > total ? IDS_OK : choose(&w, 0, total);
}
