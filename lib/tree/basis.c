/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The numbering of the canonical multilinear monomials of one degree.
 *
 * Monomials stand by association type, in the order of the types. Within a type the index is the
 * mixed-radix number (distribution of the labels among the root's arguments, index of the first
 * argument among the monomials of its type on its labels, of the second, ...). Only the offsets
 * of the types are stored: offset[i] = number of monomials of the types before the i-th.
 */
#include "tree_private.h"

struct ids_basis {
    ids_ctx *ctx;
    const ids_types *types;
    uint32_t degree;
    uint64_t type_count;
    uint64_t *offset; /* type_count + 1 entries */
};

ids_status ids_basis_create(ids_ctx *ctx, const ids_types *types, uint32_t degree,
                            ids_basis **basis)
{
    ids_status st = IDS_OK;
    ids_basis *made = NULL;

    if (ctx == NULL || types == NULL || basis == NULL || degree == 0 ||
        degree > types->max_degree) {
        return idsi_fail_arg(ctx, "context, types, degree or result");
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->types = types;
    made->degree = degree;
    made->type_count = ids_types_count(types, degree);
    IDSI_TRY(idsi_alloc_array(ctx, made->type_count + 1, sizeof *made->offset, &made->offset));
    for (uint64_t i = 0; i < made->type_count; i++) {
        uint64_t monomials = types->list[types->first[degree] + i].monomials;
        if (monomials == 0 ||
            !idsi_add_u64(made->offset[i], monomials, &made->offset[i + 1])) {
            st = idsi_fail(ctx, IDS_ERR_LIMIT,
                           "degree %u has more than 2^64-1 monomials, too many to number", degree);
            goto done;
        }
    }
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
        idsi_free(ctx, basis->offset);
        idsi_free(ctx, basis);
    }
}

uint64_t ids_basis_size(const ids_basis *basis)
{
    return basis == NULL ? 0 : basis->offset[basis->type_count];
}

static uint64_t label_set(const idsi_token *tree, size_t length)
{
    uint64_t set = 0;
    for (size_t i = 0; i < length; i++) {
        if (!idsi_is_node(tree[i])) {
            set |= UINT64_C(1) << (tree[i] - 1);
        }
    }
    return set;
}

/* Index of a tree of the given type on the labels `all`; false when it is not canonical. */
static bool rank_tree(const ids_types *types, uint32_t type, uint64_t all, const idsi_token *tree,
                      uint64_t *index)
{
    idsi_split split;
    uint64_t sets[IDSI_SPLIT_MAX];
    const idsi_token *at = tree + 1;

    *index = 0;
    if (type == 0) {
        return true;
    }
    idsi_type_split(types, type, &split);
    for (uint32_t i = 0; i < split.count; i++) {
        size_t length = idsi_tree_length(types->sig, at);
        sets[i] = label_set(at, length);
        at += length;
    }
    if (!idsi_split_is_canonical(&split, sets)) {
        return false;
    }
    *index = idsi_split_rank(&split, all, sets);
    at = tree + 1;
    for (uint32_t i = 0; i < split.count; i++) {
        uint32_t child = types->children[types->list[type].children + i];
        uint64_t below = 0;
        if (!rank_tree(types, child, sets[i], at, &below)) {
            return false;
        }
        *index = *index * types->list[child].monomials + below;
        at += idsi_tree_length(types->sig, at);
    }
    return true;
}

ids_status ids_basis_rank(const ids_basis *basis, const ids_mono *mono, uint64_t *index)
{
    uint64_t within = 0;

    if (basis == NULL || mono == NULL || index == NULL || mono->sig != basis->types->sig ||
        mono->degree != basis->degree) {
        return IDS_ERR_ARG;
    }
    uint64_t all = label_set(mono->tokens, mono->length);
    uint64_t expected = UINT64_MAX >> (64 - basis->degree);
    if (all != expected) {
        return IDS_ERR_ARG;
    }
    uint32_t type = idsi_types_find(basis->types, mono->tokens);
    if (type == UINT32_MAX || !rank_tree(basis->types, type, all, mono->tokens, &within)) {
        return IDS_ERR_NOT_CANONICAL;
    }
    *index = basis->offset[type - basis->types->first[basis->degree]] + within;
    return IDS_OK;
}

static void unrank_tree(const ids_types *types, uint32_t type, uint64_t all, uint64_t index,
                        idsi_token **at)
{
    idsi_split split;
    uint64_t sets[IDSI_SPLIT_MAX];
    uint64_t below[IDSI_SPLIT_MAX];
    const uint32_t *children = types->children + types->list[type].children;

    if (type == 0) {
        *(*at)++ = (idsi_token)__builtin_ctzll(all) + 1;
        return;
    }
    idsi_type_split(types, type, &split);
    for (uint32_t i = split.count; i-- > 0;) {
        uint64_t radix = types->list[children[i]].monomials;
        below[i] = index % radix;
        index /= radix;
    }
    idsi_split_unrank(&split, all, index, sets);
    *(*at)++ = idsi_node(types->list[type].op);
    for (uint32_t i = 0; i < split.count; i++) {
        unrank_tree(types, children[i], sets[i], below[i], at);
    }
}

ids_status ids_basis_unrank(ids_ctx *ctx, const ids_basis *basis, uint64_t index, ids_mono **mono)
{
    idsi_token tokens[IDSI_MAX_TOKENS];
    idsi_token *end = tokens;

    if (ctx == NULL || basis == NULL || mono == NULL) {
        return idsi_fail_arg(ctx, "context, basis or result");
    }
    if (index >= ids_basis_size(basis)) {
        return idsi_fail(ctx, IDS_ERR_ARG, "monomial %llu was asked for, degree %u has %llu",
                         (unsigned long long)index, basis->degree,
                         (unsigned long long)ids_basis_size(basis));
    }
    uint64_t low = 0;
    uint64_t high = basis->type_count;
    while (high - low > 1) {
        uint64_t middle = low + (high - low) / 2;
        if (basis->offset[middle] <= index) {
            low = middle;
        } else {
            high = middle;
        }
    }
    unrank_tree(basis->types, basis->types->first[basis->degree] + (uint32_t)low,
                UINT64_MAX >> (64 - basis->degree), index - basis->offset[low], &end);
    return idsi_mono_from_tokens(ctx, basis->types->sig, tokens, (size_t)(end - tokens), mono);
}
