/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The operations of a signature in an algebra: the same notation, the same symbols, the same
 * number of arguments. What counts for symmetry is the table, not the declaration: for every
 * generator of the symmetry that is asked for, the table must be mapped to itself.
 */
#include <stdlib.h>
#include <string.h>

#include "algebra_private.h"

static bool written_alike(const idsi_op *a, const idsi_op *b)
{
    return a->notation == b->notation && a->arity == b->arity && strcmp(a->open, b->open) == 0 &&
           (a->notation != IDS_NOTATION_FENCE || strcmp(a->close, b->close) == 0);
}

/* Whether op(a[0], ..) = sign * op(a[image[0]], ..) for all constants; *bad: one for which not. */
static bool has_symmetry(const idsi_table *table, uint32_t arity, const ids_signed_order *order,
                         const idsi_constant **bad)
{
    for (size_t i = 0; i < table->count; i++) {
        const idsi_constant *at = &table->list[i];
        idsi_constant image = *at;
        for (uint32_t k = 0; k < arity; k++) {
            image.argument[k] = at->argument[order->image[k]];
        }
        const idsi_constant *other =
            bsearch(&image, table->list, table->count, sizeof image, idsi_constant_compare);
        *bad = at;
        if (other == NULL || other->denominator != at->denominator ||
            other->numerator != order->sign * at->numerator) {
            return false;
        }
    }
    return true;
}

static ids_status fail_symmetry(ids_ctx *ctx, const ids_algebra *algebra, uint32_t op,
                                const ids_signature *sig, size_t asked, const idsi_constant *bad)
{
    ids_status st = IDS_OK;
    char *declared = NULL;
    idsi_text product;

    idsi_text_init(&product, ctx);
    IDSI_TRY(ids_signature_print_operation(ctx, sig, asked, &declared));
    IDSI_TRY(idsi_product_print(algebra, op, bad->argument, &product));
    st = idsi_fail(ctx, IDS_ERR_DOMAIN,
                   "the presentation declares %.200s, but the algebra's product %.200s does not "
                   "have that symmetry",
                   declared, product.data);
done:
    ids_string_free(ctx, declared);
    idsi_text_clear(&product);
    return st;
}

/* Generators of the symmetry that operation `asked` of the signature declares, on the table. */
static ids_status check_symmetry(ids_ctx *ctx, const ids_algebra *algebra, uint32_t op,
                                 const ids_signature *sig, size_t asked)
{
    const idsi_op *want = &sig->ops[asked];
    const idsi_table *table = &algebra->tables[op];
    const idsi_constant *bad = NULL;
    const bool full = want->group.symmetry == IDS_SYMMETRY_COMMUTATIVE ||
                      want->group.symmetry == IDS_SYMMETRY_ALTERNATING;
    const size_t count = full ? want->arity - 1u : want->generator_count;

    for (size_t g = 0; g < count; g++) {
        ids_signed_order order = {.sign = 1};
        if (full) {
            for (uint32_t i = 0; i < want->arity; i++) {
                order.image[i] = (uint8_t)i;
            }
            order.image[g] = (uint8_t)(g + 1);
            order.image[g + 1] = (uint8_t)g;
            order.sign = want->group.symmetry == IDS_SYMMETRY_ALTERNATING ? -1 : 1;
        } else {
            order = want->generators[g];
        }
        if (!has_symmetry(table, want->arity, &order, &bad)) {
            return fail_symmetry(ctx, algebra, op, sig, asked, bad);
        }
    }
    return IDS_OK;
}

/* The operation with names for its arguments, without the symmetry, which is not what lacks. */
static ids_status fail_missing(ids_ctx *ctx, const ids_signature *sig, size_t asked)
{
    static const char *const names[IDS_MAX_ARITY] = {"a", "b", "c", "d", "e", "f", "g", "h"};
    ids_status st = IDS_OK;
    idsi_text operation;
    idsi_token tree[IDS_MAX_ARITY + 1] = {idsi_node((uint32_t)asked)};

    idsi_text_init(&operation, ctx);
    for (uint32_t i = 0; i < sig->ops[asked].arity; i++) {
        tree[i + 1] = i + 1u;
    }
    IDSI_TRY(idsi_tree_print(sig, tree, names, &operation));
    st = idsi_fail(ctx, IDS_ERR_DOMAIN,
                   "the algebra has no operation that is written %.200s, as the presentation has",
                   operation.data);
done:
    idsi_text_clear(&operation);
    return st;
}

ids_status ids_algebra_match(ids_ctx *ctx, const ids_algebra *algebra,
                             const ids_signature *signature, uint32_t *operation)
{
    ids_status st = IDS_OK;
    uint32_t found[IDS_MAX_OPERATIONS];

    if (ctx == NULL || algebra == NULL || signature == NULL || operation == NULL) {
        return idsi_fail_arg(ctx, "context, algebra, signature or result");
    }
    for (size_t i = 0; i < signature->count; i++) {
        uint32_t op = 0;
        while (op < algebra->sig->count &&
               !written_alike(&algebra->sig->ops[op], &signature->ops[i])) {
            op++;
        }
        if (op == algebra->sig->count) {
            return fail_missing(ctx, signature, i);
        }
        IDSI_TRY(check_symmetry(ctx, algebra, op, signature, i));
        found[i] = op;
    }
    memcpy(operation, found, signature->count * sizeof *operation);
done:
    return st;
}
