/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The numbering of the canonical multilinear monomials of one degree.
 *
 * Monomials stand by association type, in the order of the types. Within a type the index is the
 * mixed-radix number (distribution of the labels among the root's arguments, index of the first
 * argument among the monomials of its type on its labels, of the second, ...), where the
 * distribution is numbered as in split.c. All these numbers are choices of labels out of others,
 * listed once for each type in its plan (basis_plan.c); offset[i] is the number of monomials of
 * the types before the i-th. Where offsets pass 64 bits basis_big.c takes over.
 */
#include <string.h>

#include "basis_private.h"

/* Offsets; they stay NULL when they pass 64 bits. */
static ids_status add_offsets(ids_ctx *ctx, ids_basis *basis)
{
    ids_status st = IDS_OK;
    const idsi_type *type = &basis->types->list[basis->types->first[basis->degree]];

    IDSI_TRY(idsi_alloc_array(ctx, basis->type_count + 1u, sizeof *basis->offset, &basis->offset));
    for (uint32_t i = 0; i < basis->type_count; i++) {
        if (type[i].monomials == 0 ||
            !idsi_add_u64(basis->offset[i], type[i].monomials, &basis->offset[i + 1])) {
            idsi_free(ctx, basis->offset);
            basis->offset = NULL;
            break;
        }
    }
done:
    return st;
}

ids_status idsi_basis_prepare(ids_ctx *ctx, const ids_types *types, uint32_t degree,
                              ids_basis **basis)
{
    ids_status st = IDS_OK;
    ids_basis *made = NULL;

    if (ctx == NULL || types == NULL || basis == NULL) {
        return idsi_fail_arg(ctx, "context, types or result");
    }
    IDSI_TRY(idsi_types_check_degree(ctx, types, degree));
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->types = types;
    made->degree = degree;
    made->type_count = (uint32_t)ids_types_count(types, degree);
    IDSI_TRY(add_offsets(ctx, made));
    *basis = made;
    made = NULL;
done:
    ids_basis_free(made);
    return st;
}

ids_status ids_basis_create(ids_ctx *ctx, const ids_types *types, uint32_t degree,
                            ids_basis **basis)
{
    ids_status st = IDS_OK;
    ids_basis *made = NULL;

    if (basis == NULL) {
        return idsi_fail_arg(ctx, "result");
    }
    IDSI_TRY(idsi_basis_prepare(ctx, types, degree, &made));
    IDSI_ASSERT(made != NULL);
    if (made->offset == NULL) {
        st = idsi_basis_fail_size(ctx, made);
        goto done;
    }
    IDSI_TRY(idsi_plans_create(ctx, made));
    *basis = made;
    made = NULL;
done:
    ids_basis_free(made);
    return st;
}

void ids_basis_free(ids_basis *basis)
{
    if (basis != NULL) {
        ids_ctx *ctx = basis->ctx;

        idsi_decks_clear(ctx, &basis->decks);
        idsi_free(ctx, basis->plans.start);
        idsi_free(ctx, basis->plans.bytes);
        idsi_free(ctx, basis->plans.slots);
        idsi_free(ctx, basis->offset);
        idsi_free(ctx, basis->big);
        idsi_free(ctx, basis);
    }
}

uint64_t ids_basis_size(const ids_basis *basis)
{
    return basis == NULL || basis->offset == NULL ? 0 : basis->offset[basis->type_count];
}

ids_status ids_basis_type_range(const ids_basis *basis, uint64_t type, uint64_t *begin,
                                uint64_t *end)
{
    if (basis == NULL || begin == NULL || end == NULL || type >= basis->type_count) {
        return IDS_ERR_ARG;
    }
    if (basis->offset == NULL) {
        return IDS_ERR_LIMIT;
    }
    *begin = basis->offset[type];
    *end = basis->offset[type + 1];
    return IDS_OK;
}

ids_status ids_basis_part(const ids_basis *basis, uint64_t part, uint64_t parts, uint64_t *begin,
                          uint64_t *end)
{
    if (basis == NULL || begin == NULL || end == NULL || part >= parts) {
        return IDS_ERR_ARG;
    }
    if (basis->offset == NULL) {
        return IDS_ERR_LIMIT;
    }
    /* The first `longer` parts have one monomial more than the others. */
    uint64_t size = ids_basis_size(basis);
    uint64_t longer = size % parts;
    *begin = size / parts * part + (part < longer ? part : longer);
    *end = *begin + size / parts + (part < longer);
    return IDS_OK;
}

/* ---- from monomials to indices ------------------------------------------------------------- */

/* Packs the shape of a code; false when an entry is no operation that can be. */
static bool pack_shape(const int32_t *code, size_t length, idsi_shape *shape)
{
    int8_t bytes[8 * IDSI_SHAPE_WORDS] = {0};
    int32_t strange = 0;

    for (size_t i = 0; i < length; i++) {
        strange |= code[i] < -(int32_t)IDS_MAX_OPERATIONS;
        bytes[i] = (int8_t)(code[i] < 0 ? code[i] : 0);
    }
    memcpy(shape->word, bytes, sizeof bytes);
    return strange == 0;
}

/* IDS_OK for one whole tree of the degree with labels 1 .. degree once each, as tokens. */
static ids_status check_code(const ids_basis *basis, const int32_t *code, size_t length,
                             idsi_token *tokens)
{
    const ids_signature *sig = basis->types->sig;
    uint64_t labels = 0;
    uint32_t leaves = 0;
    size_t open = 1;

    for (size_t i = 0; i < length; i++) {
        if (open == 0) {
            return IDS_ERR_ARG;
        }
        open--;
        if (code[i] > 0 && code[i] <= (int32_t)basis->degree) {
            tokens[i] = (idsi_token)code[i];
            labels |= UINT64_C(1) << (code[i] - 1);
            leaves++;
        } else if (code[i] < 0 && (uint32_t)~code[i] < sig->count) {
            tokens[i] = idsi_node((uint32_t)~code[i]);
            open += sig->ops[~code[i]].arity;
        } else {
            return IDS_ERR_ARG;
        }
    }
    bool multilinear = leaves == basis->degree && labels == idsi_labels_all(basis->degree);
    return open == 0 && multilinear ? IDS_OK : IDS_ERR_ARG;
}

/*
 * A code of a canonical shape is found by its shape as a whole, without a branch on its entries;
 * it is then known to be a whole tree. What is not found there is looked at token by token, to
 * tell an improper code from one that is not canonical.
 */
ids_status idsi_basis_read(const ids_basis *basis, const int32_t *code, size_t length,
                           uint32_t *type, uint64_t *digit, idsi_plan_room *room, idsi_plan *plan)
{
    ids_status st = IDS_OK;
    idsi_token tokens[IDSI_MAX_TOKENS];
    idsi_shape shape;

    if (length == 0 || length > 2u * basis->degree - 1) {
        return IDS_ERR_ARG;
    }
    if (!pack_shape(code, length, &shape)) {
        return IDS_ERR_ARG;
    }
    if (!idsi_plan_find(basis, &shape, length, type, plan)) {
        IDSI_TRY(check_code(basis, code, length, tokens));
        uint32_t number = idsi_types_find_code(basis->types, tokens, length);
        if (number == UINT32_MAX) {
            return IDS_ERR_NOT_CANONICAL;
        }
        *type = number - basis->types->first[basis->degree];
        idsi_plan_get(basis, *type, room, plan);
    }
    IDSI_TRY(idsi_plan_gather(basis, plan, code, digit));
done:
    return st;
}

ids_status ids_basis_rank_code(const ids_basis *basis, const int32_t *code, size_t length,
                               uint64_t *index)
{
    ids_status st = IDS_OK;
    uint64_t digit[IDS_MAX_DEGREE];
    uint64_t within = 0;
    uint32_t type = 0;
    idsi_plan_room room;
    idsi_plan plan;

    if (basis == NULL || code == NULL || index == NULL) {
        return IDS_ERR_ARG;
    }
    if (basis->offset == NULL) {
        return IDS_ERR_LIMIT;
    }
    IDSI_TRY(idsi_basis_read(basis, code, length, &type, digit, &room, &plan));
    for (uint32_t c = 0; c < plan.cuts; c++) {
        within = within * basis->decks.deck[plan.cut[c].deck].radix + digit[c];
    }
    *index = basis->offset[type] + within;
done:
    return st;
}

ids_status ids_basis_rank(const ids_basis *basis, const ids_mono *mono, uint64_t *index)
{
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;

    if (basis == NULL || mono == NULL || index == NULL || mono->sig != basis->types->sig ||
        ids_mono_code(mono, code, IDSI_MAX_TOKENS, &length) != IDS_OK) {
        return IDS_ERR_ARG;
    }
    return ids_basis_rank_code(basis, code, length, index);
}

/* ---- from indices to monomials ------------------------------------------------------------- */

uint32_t idsi_basis_type_of(const ids_basis *basis, uint64_t index)
{
    const uint64_t *low = basis->offset;
    size_t count = basis->type_count;

    /* Halves without a branch on the data: *low <= index, and the type is among `count`. */
    while (count > 1) {
        size_t half = count / 2;

        low += low[half] <= index ? half : 0;
        count -= half;
    }
    return (uint32_t)(low - basis->offset);
}

ids_status ids_basis_unrank_code(const ids_basis *basis, uint64_t index, int32_t *code,
                                 size_t capacity, size_t *length)
{
    uint64_t digit[IDS_MAX_DEGREE];
    uint8_t label[IDS_MAX_DEGREE];
    idsi_plan_room room;
    idsi_plan plan;

    if (basis == NULL || code == NULL || length == NULL) {
        return IDS_ERR_ARG;
    }
    if (basis->offset == NULL) {
        return IDS_ERR_LIMIT;
    }
    if (index >= ids_basis_size(basis)) {
        return IDS_ERR_ARG;
    }
    uint32_t type = idsi_basis_type_of(basis, index);
    idsi_plan_get(basis, type, &room, &plan);
    if (capacity < plan.length) {
        return IDS_ERR_ARG;
    }
    idsi_plan_digits(basis, &plan, index - basis->offset[type], digit);
    idsi_plan_deal(basis, &plan, digit, label);
    idsi_plan_write(basis, &plan, label, code);
    *length = plan.length;
    return IDS_OK;
}

ids_status ids_basis_unrank(ids_ctx *ctx, const ids_basis *basis, uint64_t index, ids_mono **mono)
{
    ids_status st = IDS_OK;
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;

    if (ctx == NULL || basis == NULL || mono == NULL) {
        return idsi_fail_arg(ctx, "context, basis or result");
    }
    if (basis->offset == NULL) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "the indices of degree %u do not fit 64 bits",
                         basis->degree);
    }
    if (index >= ids_basis_size(basis)) {
        return idsi_fail(ctx, IDS_ERR_ARG, "monomial %llu was asked for, degree %u has %llu",
                         (unsigned long long)index, basis->degree,
                         (unsigned long long)ids_basis_size(basis));
    }
    IDSI_TRY(ids_basis_unrank_code(basis, index, code, IDSI_MAX_TOKENS, &length));
    IDSI_TRY(ids_mono_create(ctx, basis->types->sig, code, length, mono));
done:
    return st;
}
