/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Groups of signed argument orders.
 *
 * An element says op(a[0], .., a[k-1]) = sign * op(a[image[0]], .., a[image[k-1]]). Applying e and
 * then f to the arguments composes the images as e.image[f.image[i]].
 *
 * The closure walks the Cayley graph breadth first: every element times every generator. A product
 * that was met before with the other sign shows that the signs are no character, so that the
 * operation would be zero. Full symmetric groups are recognised and kept without their elements:
 * sorting finds their canonical argument order, all other groups try each element.
 */
#include <string.h>

#include "tree_private.h"

#define LARGEST_ORDER 40320u /* 8! */

static uint32_t factorial_small(uint32_t n)
{
    uint32_t f = 1;
    for (uint32_t i = 2; i <= n; i++) {
        f *= i;
    }
    return f;
}

/* Number of a permutation of 0 .. arity-1 among all of them (Lehmer code). */
static uint32_t permutation_number(const uint8_t *image, uint32_t arity)
{
    uint32_t number = 0;
    for (uint32_t i = 0; i < arity; i++) {
        uint32_t smaller = 0;
        for (uint32_t j = i + 1; j < arity; j++) {
            smaller += image[j] < image[i];
        }
        number = number * (arity - i) + smaller;
    }
    return number;
}

static bool is_permutation(const uint8_t *image, uint32_t arity)
{
    uint32_t seen = 0;
    for (uint32_t i = 0; i < arity; i++) {
        if (image[i] >= arity || ((seen >> image[i]) & 1u)) {
            return false;
        }
        seen |= 1u << image[i];
    }
    return true;
}

static ids_signed_order compose(const ids_signed_order *e, const ids_signed_order *f,
                                uint32_t arity)
{
    ids_signed_order product = {0};
    for (uint32_t i = 0; i < arity; i++) {
        product.image[i] = e->image[f->image[i]];
    }
    product.sign = (int8_t)(e->sign * f->sign);
    return product;
}

static int permutation_sign(const uint8_t *image, uint32_t arity)
{
    int sign = 1;
    for (uint32_t i = 0; i < arity; i++) {
        for (uint32_t j = i + 1; j < arity; j++) {
            if (image[j] < image[i]) {
                sign = -sign;
            }
        }
    }
    return sign;
}

/* Keeps full and trivial groups by name instead of by elements. */
static void name_group(ids_ctx *ctx, idsi_group *group)
{
    if (group->order != 1 && group->order != factorial_small(group->arity)) {
        group->symmetry = IDS_SYMMETRY_GENERATED;
        return;
    }
    group->symmetry = IDS_SYMMETRY_NONE;
    for (uint64_t i = 0; i < group->order; i++) {
        const ids_signed_order *e = &group->elements[i];
        if (permutation_sign(e->image, group->arity) < 0) {
            group->symmetry = e->sign < 0 ? IDS_SYMMETRY_ALTERNATING : IDS_SYMMETRY_COMMUTATIVE;
            break;
        }
    }
    idsi_free(ctx, group->elements);
    group->elements = NULL;
}

ids_status idsi_group_close(ids_ctx *ctx, uint32_t arity, const ids_signed_order *generators,
                            size_t count, idsi_group *group)
{
    ids_status st = IDS_OK;
    int32_t *place = NULL; /* element with a given permutation number, plus one; 0: none */
    ids_signed_order *elements = NULL;
    size_t capacity = 0;
    size_t order = 0;

    for (size_t g = 0; g < count; g++) {
        if (!is_permutation(generators[g].image, arity) ||
            (generators[g].sign != 1 && generators[g].sign != -1)) {
            return idsi_fail(ctx, IDS_ERR_ARG, "a symmetry is not a signed permutation");
        }
    }
    IDSI_TRY(idsi_alloc_array(ctx, LARGEST_ORDER, sizeof *place, &place));
    IDSI_TRY(idsi_grow(ctx, order, &capacity, sizeof *elements, &elements));
    memset(&elements[0], 0, sizeof elements[0]);
    for (uint32_t i = 0; i < arity; i++) {
        elements[0].image[i] = (uint8_t)i;
    }
    elements[0].sign = 1;
    order = 1;
    place[permutation_number(elements[0].image, arity)] = 1;
    for (size_t e = 0; e < order; e++) {
        for (size_t g = 0; g < count; g++) {
            ids_signed_order product = compose(&elements[e], &generators[g], arity);
            int32_t *known = &place[permutation_number(product.image, arity)];
            if (*known == 0) {
                IDSI_TRY(idsi_grow(ctx, order, &capacity, sizeof *elements, &elements));
                elements[order] = product;
                order++;
                *known = (int32_t)order;
            } else if (elements[*known - 1].sign != product.sign) {
                st = idsi_fail(ctx, IDS_ERR_DOMAIN,
                               "the signs contradict each other, so the operation is zero");
                goto done;
            }
        }
    }
    group->arity = arity;
    group->order = order;
    group->elements = elements;
    elements = NULL;
    name_group(ctx, group);
done:
    idsi_free(ctx, place);
    idsi_free(ctx, elements);
    return st;
}

void idsi_group_clear(ids_ctx *ctx, idsi_group *group)
{
    idsi_free(ctx, group->elements);
    group->elements = NULL;
}

/* Insertion sort by key (larger first), then label (smaller first); returns the parity's sign. */
static int sort_arguments(uint32_t arity, const uint64_t *key, const uint64_t *label,
                          uint8_t *image)
{
    int sign = 1;
    for (uint32_t i = 0; i < arity; i++) {
        uint32_t at = i;
        while (at > 0) {
            uint32_t other = image[at - 1];
            bool before = key[i] > key[other] ||
                          (key[i] == key[other] && label != NULL && label[i] < label[other]);
            if (!before) {
                break;
            }
            image[at] = image[at - 1];
            at--;
            sign = -sign;
        }
        image[at] = (uint8_t)i;
    }
    return sign;
}

/* < 0 when arrangement p is to be preferred to q: keys decide first, then labels. */
static int compare_arrangements(uint32_t arity, const uint64_t *key, const uint64_t *label,
                                const uint8_t *p, const uint8_t *q)
{
    for (uint32_t i = 0; i < arity; i++) {
        if (key[p[i]] != key[q[i]]) {
            return key[p[i]] > key[q[i]] ? -1 : 1;
        }
    }
    for (uint32_t i = 0; label != NULL && i < arity; i++) {
        if (label[p[i]] != label[q[i]]) {
            return label[p[i]] < label[q[i]] ? -1 : 1;
        }
    }
    return 0;
}

int idsi_group_canonical(const idsi_group *group, const uint64_t *key, const uint64_t *label,
                         uint8_t *image)
{
    uint32_t arity = group->arity;
    if (group->symmetry == IDS_SYMMETRY_COMMUTATIVE ||
        group->symmetry == IDS_SYMMETRY_ALTERNATING) {
        int sign = sort_arguments(arity, key, label, image);
        return group->symmetry == IDS_SYMMETRY_ALTERNATING ? sign : 1;
    }
    if (group->symmetry == IDS_SYMMETRY_NONE) {
        for (uint32_t i = 0; i < arity; i++) {
            image[i] = (uint8_t)i;
        }
        return 1;
    }
    const ids_signed_order *best = &group->elements[0];
    for (uint64_t e = 1; e < group->order; e++) {
        const ids_signed_order *element = &group->elements[e];
        if (compare_arrangements(arity, key, label, element->image, best->image) < 0) {
            best = element;
        }
    }
    memcpy(image, best->image, arity);
    return best->sign;
}
