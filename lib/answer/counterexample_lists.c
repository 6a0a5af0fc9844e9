/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the direct search begins with: the possible values, the products, the checks.
 */
#include <stdlib.h>
#include <string.h>

#include "counterexample_direct.h"

/* Whether there are few enough tuples of basis elements. */
static bool few_tuples(const idsi_direct *s, uint32_t degree)
{
    uint64_t tuples = 1;
    for (uint32_t k = 0; k < degree && tuples <= IDSI_DIRECT_TUPLES; k++) {
        tuples *= s->n;
    }
    return tuples <= IDSI_DIRECT_TUPLES;
}

ids_status idsi_direct_vectors(idsi_direct *s, int most)
{
    ids_status st = IDS_OK;
    uint32_t all = 1;

    for (uint32_t r = 0; r < s->n; r++) {
        all *= 2u * (uint32_t)most + 1u;
    }
    IDSI_TRY(idsi_alloc_array(s->ctx, all, sizeof *s->vectors, &s->vectors));
    for (uint32_t size = 0; s->value_count < all; size++) {
        for (uint32_t code = 0; code < all; code++) {
            int8_t vector[IDSI_DIRECT_DIMENSION] = {0};
            uint32_t rest = code;
            uint32_t sum = 0;
            for (uint32_t r = 0; r < s->n; r++) {
                vector[r] = (int8_t)((int)(rest % (2u * (uint32_t)most + 1u)) - most);
                rest /= 2u * (uint32_t)most + 1u;
                sum += (uint32_t)abs(vector[r]);
            }
            if (sum == size) {
                memcpy(s->vectors[s->value_count], vector, sizeof vector);
                s->value_count++;
            }
        }
    }
done:
    return st;
}

ids_status idsi_direct_products(idsi_direct *s, bool *fits)
{
    ids_status st = IDS_OK;
    const ids_signature *sig = s->hunt->pres->sig;

    *fits = true;
    for (uint32_t op = 0; op < sig->count; op++) {
        const uint32_t arity = sig->ops[op].arity;
        uint32_t all = 1;
        for (uint32_t k = 0; k < arity; k++) {
            all = all > IDSI_DIRECT_PLACES ? all : all * s->n;
        }
        if (all > IDSI_DIRECT_PLACES) {
            *fits = false;
            return IDS_OK;
        }
        IDSI_TRY(idsi_alloc_array(s->ctx, all, sizeof **s->places, &s->places[op]));
        for (uint32_t where = 0; where < all; where++) {
            idsi_token tree[IDS_MAX_ARITY + 1];
            uint32_t rest = where;
            uint32_t number = 0;
            idsi_direct_product next = {.op = op};
            tree[0] = idsi_node(op);
            for (uint32_t k = arity; k > 0; k--) {
                tree[k] = rest % s->n + 1;
                rest /= s->n;
            }
            const int sign = idsi_tree_canonicalize(sig, tree, arity + 1u);
            for (uint32_t k = 0; k < arity; k++) {
                next.argument[k] = (uint8_t)(tree[k + 1] - 1);
            }
            while (number < s->product_count &&
                   (s->products[number].op != op ||
                    memcmp(s->products[number].argument, next.argument, IDS_MAX_ARITY) != 0)) {
                number++;
            }
            s->places[op][where] = (idsi_direct_place){number, sign};
            if (sign != 0 && number == s->product_count) {
                if (s->product_count == IDSI_DIRECT_PRODUCTS) {
                    *fits = false;
                    return IDS_OK;
                }
                s->products[s->product_count++] = next;
            }
        }
    }
done:
    return st;
}

ids_status idsi_direct_checks(idsi_direct *s, bool *fits)
{
    ids_status st = IDS_OK;
    const idsi_laws *laws = s->hunt->laws;

    *fits = true;
    for (uint32_t law = 0; law < laws->count; law++) {
        const uint32_t degree = laws->law[law].degree;
        idsi_direct_check next = {.law = law};
        if (!few_tuples(s, degree)) {
            *fits = false;
            return IDS_OK;
        }
        for (uint32_t k = 0; k < degree;) {
            bool sorted = true;
            for (uint32_t j = 0; sorted && j < degree; j++) {
                const uint8_t class = laws->law[law].class_of[j];
                sorted = class == j || next.tuple[class] <= next.tuple[j];
                for (uint32_t i = class + 1u; sorted && i < j; i++) {
                    sorted = laws->law[law].class_of[i] != class || next.tuple[i] <= next.tuple[j];
                }
            }
            if (sorted) {
                IDSI_TRY(
                    idsi_grow(s->ctx, s->check_count, &s->check_capacity, sizeof next, &s->checks));
                s->checks[s->check_count++] = next;
            }
            for (k = 0; k < degree && ++next.tuple[k] == s->n; k++) {
                next.tuple[k] = 0;
            }
        }
    }
done:
    return st;
}

void idsi_direct_order(idsi_direct *s, uint32_t start)
{
    for (uint32_t i = 0; i < s->product_count; i++) {
        uint32_t *order = s->order + i * s->value_count;
        for (uint32_t k = 0; k < s->value_count; k++) {
            order[k] = k;
        }
        for (uint32_t k = 0; start > 0 && k + 1 < s->value_count; k++) {
            const uint32_t reach = 1 + s->value_count / 2;
            const uint32_t left = s->value_count - k;
            const uint32_t j =
                k + (uint32_t)idsi_random_below(&s->random, reach < left ? reach : left);
            const uint32_t swap = order[k];
            order[k] = order[j];
            order[j] = swap;
        }
    }
}
