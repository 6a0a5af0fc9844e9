/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Symmetry of products of basis elements.
 *
 * A product of basis elements is a monomial with the elements as labels, so its canonical form is
 * the one that lib/tree knows. An orbit is listed as the argument orders that differ: for full
 * symmetric groups in lexicographic order, for listed groups element by element, leaving out those
 * that come again.
 */
#include <stdlib.h>
#include <string.h>

#include "algebra_private.h"

int idsi_arguments_canonical(const ids_signature *sig, uint32_t op, const uint8_t *argument,
                             uint8_t canonical[IDS_MAX_ARITY])
{
    const uint32_t arity = sig->ops[op].arity;
    idsi_token tree[IDS_MAX_ARITY + 1];

    tree[0] = idsi_node(op);
    for (uint32_t i = 0; i < arity; i++) {
        tree[i + 1] = argument[i] + 1u;
    }
    const int sign = idsi_tree_canonicalize(sig, tree, arity + 1u);
    memset(canonical, 0, IDS_MAX_ARITY);
    for (uint32_t i = 0; i < arity; i++) {
        canonical[i] = (uint8_t)(tree[i + 1] - 1u);
    }
    return sign;
}

static ids_status add(ids_algebra *algebra, uint32_t op, const idsi_constant *constant,
                      const uint8_t *argument, int sign, size_t *capacity)
{
    idsi_table *table = &algebra->tables[op];
    ids_status st =
        idsi_grow(algebra->ctx, table->count, capacity, sizeof *table->list, &table->list);

    if (st == IDS_OK) {
        idsi_constant *next = &table->list[table->count++];
        *next = *constant;
        memcpy(next->argument, argument, IDS_MAX_ARITY);
        next->numerator = sign < 0 ? -constant->numerator : constant->numerator;
    }
    return st;
}

/* The next arrangement of the arguments in lexicographic order (Narayana Pandita). */
static bool next_arrangement(uint8_t *a, uint32_t n)
{
    uint32_t i = n - 1;
    uint32_t j = n - 1;

    while (i > 0 && a[i - 1] >= a[i]) {
        i--;
    }
    if (i == 0) {
        return false;
    }
    while (a[j] <= a[i - 1]) {
        j--;
    }
    const uint8_t swap = a[i - 1];
    a[i - 1] = a[j];
    a[j] = swap;
    for (j = n - 1; i < j; i++, j--) {
        const uint8_t other = a[i];
        a[i] = a[j];
        a[j] = other;
    }
    return true;
}

static void sort_bytes(uint8_t *a, uint32_t n)
{
    for (uint32_t i = 1; i < n; i++) {
        for (uint32_t j = i; j > 0 && a[j] < a[j - 1]; j--) {
            const uint8_t swap = a[j];
            a[j] = a[j - 1];
            a[j - 1] = swap;
        }
    }
}

/* Commutative and alternating operations. */
static ids_status add_arrangements(ids_algebra *algebra, uint32_t op, const idsi_constant *constant,
                                   size_t *capacity)
{
    ids_status st = IDS_OK;
    uint8_t argument[IDS_MAX_ARITY];
    uint8_t canonical[IDS_MAX_ARITY];
    const uint32_t arity = algebra->sig->ops[op].arity;

    memcpy(argument, constant->argument, sizeof argument);
    sort_bytes(argument, arity);
    do {
        const int sign = idsi_arguments_canonical(algebra->sig, op, argument, canonical);
        IDSI_TRY(add(algebra, op, constant, argument, sign, capacity));
    } while (next_arrangement(argument, arity));
done:
    return st;
}

static int compare_arguments(const void *a, const void *b)
{
    return memcmp(((const idsi_constant *)a)->argument, ((const idsi_constant *)b)->argument,
                  IDS_MAX_ARITY);
}

/* Keeps one of the constants from `begin` on that have the same arguments. */
static void join_orbit(idsi_table *table, size_t begin)
{
    size_t kept = begin;

    qsort(table->list + begin, table->count - begin, sizeof *table->list, compare_arguments);
    for (size_t i = begin; i < table->count; i++) {
        if (kept == begin || compare_arguments(&table->list[kept - 1], &table->list[i]) != 0) {
            table->list[kept++] = table->list[i];
        }
    }
    table->count = kept;
}

ids_status idsi_orbit_add(ids_algebra *algebra, uint32_t op, const idsi_constant *constant,
                          size_t *capacity)
{
    ids_status st = IDS_OK;
    const idsi_group *group = &algebra->sig->ops[op].group;
    const size_t begin = algebra->tables[op].count;
    uint8_t argument[IDS_MAX_ARITY] = {0};

    if (group->symmetry == IDS_SYMMETRY_NONE) {
        return add(algebra, op, constant, constant->argument, 1, capacity);
    }
    if (group->symmetry != IDS_SYMMETRY_GENERATED) {
        return add_arrangements(algebra, op, constant, capacity);
    }
    for (uint64_t e = 0; e < group->order; e++) {
        const ids_signed_order *element = &group->elements[e];
        for (uint32_t i = 0; i < group->arity; i++) {
            argument[i] = constant->argument[element->image[i]];
        }
        IDSI_TRY(add(algebra, op, constant, argument, element->sign, capacity));
    }
    join_orbit(&algebra->tables[op], begin);
done:
    return st;
}
