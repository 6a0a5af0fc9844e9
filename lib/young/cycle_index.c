/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The products of power sums that the symmetries of a signature bring.
 *
 * An operation with the group G and the sign character e gives to the multilinear monomials the
 * modules induced from G with e on M x .. x M, whose characteristic is
 *
 *     (1/|G|) sum over g in G of e(g) product over the cycles of g of p_length[M]
 *
 * (Macdonald, Symmetric Functions and Hall Polynomials, I.8 and I.A.6). All operations come to one
 * denominator, the least common multiple of the group orders, and equal products to one weight:
 * |weight| <= 64 * 40320. For all of S_k the permutations are counted by cycle type, k! / order of
 * the centraliser; the elements of other groups are read one by one.
 *
 * Products share their beginnings: p_1 p_1 p_2 is that of p_1 p_1 and p_2. Small cycles come first
 * because M has many non-zero values and p_j[M] few: so a long product is made of one power of M
 * and sparse factors.
 */
#include "cocharacter_private.h"

static uint64_t gcd(uint64_t a, uint64_t b)
{
    while (b != 0) {
        uint64_t rest = a % b;

        a = b;
        b = rest;
    }
    return a;
}

/* Number of the product parent * p_cycle[M], adding it. */
static ids_status find_product(ids_ctx *ctx, idsi_cycle_sum *sum, uint32_t parent, uint32_t cycle,
                               uint32_t *number)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < sum->count; i++) {
        if (sum->products[i].parent == parent && sum->products[i].cycle == cycle) {
            *number = (uint32_t)i;
            return IDS_OK;
        }
    }
    IDSI_TRY(idsi_grow(ctx, sum->count, &sum->capacity, sizeof *sum->products, &sum->products));
    sum->products[sum->count] = (idsi_cycle_product){.parent = parent, .cycle = cycle};
    *number = (uint32_t)sum->count;
    sum->count++;
done:
    return st;
}

/* Adds weight * the product for a cycle type, its largest cycle first. */
static ids_status add_cycle_type(ids_ctx *ctx, idsi_cycle_sum *sum, const ids_partition *type,
                                 int64_t weight)
{
    ids_status st = IDS_OK;
    uint32_t product = IDSI_NO_PRODUCT;

    for (uint32_t i = type->length; i > 0; i--) {
        uint32_t cycle = type->part[i - 1];

        IDSI_TRY(find_product(ctx, sum, IDSI_NO_PRODUCT, cycle, &sum->single[cycle]));
        IDSI_TRY(find_product(ctx, sum, product, cycle, &product));
    }
    sum->products[product].weight += weight;
done:
    return st;
}

/* The lengths of the cycles of an argument order, largest first. */
static void read_cycles(const ids_signed_order *element, uint32_t k, ids_partition *type)
{
    uint32_t times[IDS_MAX_ARITY + 1] = {0};
    uint32_t seen = 0;

    for (uint32_t start = 0; start < k; start++) {
        uint32_t length = 0;

        for (uint32_t at = start; (seen >> at & 1u) == 0; at = element->image[at]) {
            seen |= 1u << at;
            length++;
        }
        times[length]++;
    }
    *type = (ids_partition){.degree = k};
    for (uint32_t length = k; length > 0; length--) {
        for (; times[length] > 0; times[length]--) {
            type->part[type->length++] = (uint8_t)length;
        }
    }
}

/* All of S_k, as it is or with the sign of the permutation. */
static ids_status add_symmetric(ids_ctx *ctx, idsi_cycle_sum *sum, const idsi_group *group,
                                uint64_t unit)
{
    ids_status st = IDS_OK;
    ids_partition type;

    idsi_partition_first(group->arity, &type);
    do {
        bool odd = (type.degree - type.length) % 2 != 0;
        uint64_t centralizer = 1;

        IDSI_TRY(idsi_partition_centralizer(&type, &centralizer));
        IDSI_ASSERT(centralizer > 0);
        int64_t weight = (int64_t)(unit * (group->order / centralizer));
        bool negative = odd && group->symmetry == IDS_SYMMETRY_ALTERNATING;
        IDSI_TRY(add_cycle_type(ctx, sum, &type, negative ? -weight : weight));
    } while (idsi_partition_next(&type));
done:
    return st;
}

static ids_status add_operation(ids_ctx *ctx, idsi_cycle_sum *sum, const idsi_group *group)
{
    const uint64_t unit = sum->divisor / group->order;
    ids_status st = IDS_OK;
    ids_partition type = {.degree = group->arity, .length = group->arity};

    if (group->symmetry == IDS_SYMMETRY_NONE) {
        for (uint32_t i = 0; i < group->arity; i++) {
            type.part[i] = 1;
        }
        IDSI_TRY(add_cycle_type(ctx, sum, &type, (int64_t)unit));
    } else if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        for (uint64_t i = 0; i < group->order; i++) {
            read_cycles(&group->elements[i], group->arity, &type);
            IDSI_TRY(add_cycle_type(ctx, sum, &type, (int64_t)unit * group->elements[i].sign));
        }
    } else {
        IDSI_TRY(add_symmetric(ctx, sum, group, unit));
    }
done:
    return st;
}

ids_status idsi_cycle_sum_create(ids_ctx *ctx, const ids_signature *sig, idsi_cycle_sum *sum)
{
    ids_status st = IDS_OK;

    *sum = (idsi_cycle_sum){.divisor = 1};
    IDSI_TRY(find_product(ctx, sum, IDSI_NO_PRODUCT, 1, &sum->single[1]));
    for (size_t i = 0; i < sig->count; i++) {
        const uint64_t order = sig->ops[i].group.order;
        const uint64_t common = gcd(sum->divisor, order);

        IDSI_ASSERT(common > 0);
        sum->divisor = sum->divisor / common * order;
    }
    for (size_t i = 0; i < sig->count; i++) {
        IDSI_TRY(add_operation(ctx, sum, &sig->ops[i].group));
    }
done:
    if (st != IDS_OK) {
        idsi_cycle_sum_clear(ctx, sum);
    }
    return st;
}

void idsi_cycle_sum_clear(ids_ctx *ctx, idsi_cycle_sum *sum)
{
    for (size_t i = 0; i < sum->count; i++) {
        idsi_free(ctx, sum->products[i].values);
    }
    idsi_free(ctx, sum->products);
    *sum = (idsi_cycle_sum){0};
}
