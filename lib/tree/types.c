/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The list of association types of degrees 1 .. N.
 *
 *     list      [leaf][degree 2 ...][degree 3 ...] ...     first[d] = where degree d begins
 *     children  [c c][c c c] ...                           list[t].children = where t's begin
 *     parents   [p p][p p p] ...                           what the root's symmetry says of them
 *     slots     [.][t][.][u] ...                           hash table of (operation, arguments)
 *
 * Within a degree the types stand by operation, then by their arguments, larger ones first; so
 * of two types of one degree the one with the smaller number is larger. An argument tuple is
 * listed when no element of the operation's group makes it larger. They are found by choosing
 * the arguments from left to right, largest first, which yields the fixed order at once.
 *
 * The automorphism order of a type is the product of those of its arguments and of the order of
 * the stabiliser of the argument tuple in the operation's group.
 *
 * A tree finds its type by the hash table, node by node from the leaves; a binary search among
 * the types of each degree would do as well, but mispredicted branches make it several times
 * slower, and ranking a monomial is hardly more than this.
 */
#include <string.h>

#include "tree_private.h"

/* A list that reaches this length is checked for its final size; most never do. */
enum { CHECKED_FROM = 4096 };

/* The list while it grows. */
typedef struct builder {
    ids_ctx *ctx;
    ids_types *types;
    size_t count;
    size_t capacity;
    size_t child_count;
    size_t child_capacity;
    size_t parent_capacity;
    uint32_t degree; /* that is being listed */
    uint32_t op;
    uint32_t chosen[IDS_MAX_ARITY];
} builder;

/* Arguments' keys and degrees, as the functions of groups and splits want them. */
static void describe_arguments(const ids_types *types, const uint32_t *children, uint32_t arity,
                               uint64_t *key, uint8_t *size)
{
    for (uint32_t i = 0; i < arity; i++) {
        key[i] = idsi_type_key(types, children[i]);
        size[i] = (uint8_t)types->list[children[i]].degree;
    }
}

static void fill_type(ids_types *types, idsi_type *type)
{
    const idsi_group *group = &types->sig->ops[type->op].group;
    const uint32_t *children = types->children + type->children;
    uint64_t key[IDS_MAX_ARITY];
    uint8_t size[IDS_MAX_ARITY];
    idsi_split split;

    describe_arguments(types, children, group->arity, key, size);
    idsi_split_for_group(group, key, size, &split);
    memcpy(types->parents + type->children, split.parent, group->arity);
    type->automorphisms = split.stabilizer;
    type->monomials = split.ways;
    for (uint32_t i = 0; i < split.count; i++) {
        const idsi_type *child = &types->list[children[i]];

        if (!idsi_mul_u64(type->automorphisms, child->automorphisms, &type->automorphisms)) {
            type->automorphisms = 0;
        }
        if (!idsi_mul_u64(type->monomials, child->monomials, &type->monomials)) {
            type->monomials = 0;
        }
    }
}

static ids_status add_type(builder *b)
{
    ids_status st = IDS_OK;
    ids_types *types = b->types;
    uint32_t arity = types->sig->ops[b->op].arity;

    if (b->count == CHECKED_FROM) {
        IDSI_TRY(idsi_types_check_size(b->ctx, types->sig, types->max_degree, false));
    }
    if (b->child_count + arity > UINT32_MAX) {
        return idsi_fail(b->ctx, IDS_ERR_LIMIT, "degree %u has too many association types to list",
                         b->degree);
    }
    IDSI_TRY(idsi_grow(b->ctx, b->count, &b->capacity, sizeof *types->list, &types->list));
    IDSI_TRY(idsi_grow(b->ctx, b->child_count + arity - 1, &b->child_capacity,
                       sizeof *types->children, &types->children));
    IDSI_TRY(idsi_grow(b->ctx, b->child_count + arity - 1, &b->parent_capacity,
                       sizeof *types->parents, &types->parents));
    memcpy(types->children + b->child_count, b->chosen, arity * sizeof *b->chosen);
    idsi_type *type = &types->list[b->count];
    *type = (idsi_type){.op = b->op, .degree = b->degree, .children = (uint32_t)b->child_count};
    fill_type(types, type);
    b->child_count += arity;
    b->count++;
    if ((b->count & 0xfffu) == 0) {
        IDSI_TRY(idsi_poll(b->ctx, NULL));
    }
done:
    return st;
}

/* Whether no element of the group makes the chosen tuple larger. */
static bool tuple_is_canonical(const builder *b, const idsi_group *group)
{
    uint64_t key[IDS_MAX_ARITY];
    uint8_t image[IDS_MAX_ARITY];

    if (group->symmetry != IDS_SYMMETRY_GENERATED) {
        return true;
    }
    for (uint32_t i = 0; i < group->arity; i++) {
        key[i] = idsi_type_key(b->types, b->chosen[i]);
    }
    (void)idsi_group_canonical(group, key, NULL, image);
    for (uint32_t i = 0; i < group->arity; i++) {
        if (key[image[i]] != key[i]) {
            return false;
        }
    }
    return true;
}

/* Chooses the arguments from `place` on, with `left` leaves to share among them. */
static ids_status choose(builder *b, uint32_t place, uint32_t left)
{
    ids_status st = IDS_OK;
    const idsi_group *group = &b->types->sig->ops[b->op].group;
    uint32_t places = group->arity - place;
    bool sorted =
        group->symmetry == IDS_SYMMETRY_COMMUTATIVE || group->symmetry == IDS_SYMMETRY_ALTERNATING;

    if (places == 0) {
        return tuple_is_canonical(b, group) ? add_type(b) : IDS_OK;
    }
    uint32_t most = left - (places - 1);
    uint32_t least = places == 1 ? left : sorted ? (left + places - 1) / places : 1;
    uint32_t before = place > 0 ? b->chosen[place - 1] : 0;
    if (sorted && place > 0 && b->types->list[before].degree < most) {
        most = b->types->list[before].degree;
    }
    for (uint32_t degree = most; degree >= least && degree > 0; degree--) {
        uint32_t number = b->types->first[degree];
        if (sorted && place > 0 && degree == b->types->list[before].degree) {
            number = before;
        }
        for (; number < b->types->first[degree + 1]; number++) {
            b->chosen[place] = number;
            IDSI_TRY(choose(b, place + 1, left - degree));
        }
    }
done:
    return st;
}

static ids_status fill_slots(ids_ctx *ctx, ids_types *types, uint32_t count);

ids_status ids_types_create(ids_ctx *ctx, const ids_signature *signature, uint32_t max_degree,
                            ids_types **types)
{
    ids_status st = IDS_OK;
    builder b = {.ctx = ctx};

    if (ctx == NULL || signature == NULL || types == NULL) {
        return idsi_fail_arg(ctx, "context, signature or result");
    }
    if (max_degree == 0 || max_degree > IDS_MAX_DEGREE) {
        return idsi_fail(ctx, IDS_ERR_ARG, "the degree is %u; 1 to %u are possible", max_degree,
                         IDS_MAX_DEGREE);
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *b.types, &b.types));
    b.types->ctx = ctx;
    b.types->sig = signature;
    b.types->max_degree = max_degree;
    IDSI_TRY(idsi_alloc_array(ctx, max_degree + 2u, sizeof *b.types->first, &b.types->first));
    IDSI_TRY(idsi_grow(ctx, 0, &b.capacity, sizeof *b.types->list, &b.types->list));
    b.types->list[0] =
        (idsi_type){.op = UINT32_MAX, .degree = 1, .automorphisms = 1, .monomials = 1};
    b.count = 1;
    b.types->first[2] = 1;
    for (b.degree = 2; b.degree <= max_degree; b.degree++) {
        for (b.op = 0; b.op < signature->count; b.op++) {
            if (signature->ops[b.op].arity <= b.degree) {
                IDSI_TRY(choose(&b, 0, b.degree));
            }
        }
        b.types->first[b.degree + 1] = (uint32_t)b.count;
    }
    IDSI_TRY(fill_slots(ctx, b.types, (uint32_t)b.count));
    *types = b.types;
    b.types = NULL;
done:
    ids_types_free(b.types);
    if (st == IDS_ERR_LIMIT && b.count > CHECKED_FROM) {
        st = idsi_types_check_size(ctx, signature, max_degree, true);
    }
    return st;
}

void ids_types_free(ids_types *types)
{
    if (types != NULL) {
        ids_ctx *ctx = types->ctx;
        idsi_free(ctx, types->list);
        idsi_free(ctx, types->children);
        idsi_free(ctx, types->parents);
        idsi_free(ctx, types->first);
        idsi_free(ctx, types->slots);
        idsi_free(ctx, types);
    }
}

uint64_t ids_types_count(const ids_types *types, uint32_t degree)
{
    if (types == NULL || degree == 0 || degree > types->max_degree) {
        return 0;
    }
    return types->first[degree + 1] - types->first[degree];
}

ids_status ids_types_info(const ids_types *types, uint32_t degree, uint64_t index,
                          ids_type_info *info)
{
    if (info == NULL || index >= ids_types_count(types, degree)) {
        return IDS_ERR_ARG;
    }
    const idsi_type *type = &types->list[types->first[degree] + index];
    *info = (ids_type_info){
        .operation = type->op, .automorphisms = type->automorphisms, .monomials = type->monomials};
    return IDS_OK;
}

void idsi_type_split(const ids_types *types, uint32_t type, idsi_split *split)
{
    const idsi_type *entry = &types->list[type];

    memset(split, 0, sizeof *split);
    split->count = types->sig->ops[entry->op].arity;
    for (uint32_t i = 0; i < split->count; i++) {
        uint32_t child = types->children[entry->children + i];

        split->size[i] = (uint8_t)types->list[child].degree;
        split->parent[i] = types->parents[entry->children + i];
    }
    idsi_split_prepare(split);
}

/* Writes the prefix code of a type, every leaf as label 0. */
static void spell_type(const ids_types *types, uint32_t type, idsi_token **at)
{
    const idsi_type *entry = &types->list[type];
    if (type == 0) {
        *(*at)++ = 0;
        return;
    }
    *(*at)++ = idsi_node(entry->op);
    for (uint32_t i = 0; i < types->sig->ops[entry->op].arity; i++) {
        spell_type(types, types->children[entry->children + i], at);
    }
}

ids_status idsi_types_check_degree(ids_ctx *ctx, const ids_types *types, uint32_t degree)
{
    if (degree == 0 || degree > types->max_degree) {
        return idsi_fail(ctx, IDS_ERR_ARG, "degree %u: the association types go from 1 to %u",
                         degree, types->max_degree);
    }
    return IDS_OK;
}

ids_status idsi_types_check_index(ids_ctx *ctx, const ids_types *types, uint32_t degree,
                                  uint64_t index)
{
    ids_status st = idsi_types_check_degree(ctx, types, degree);

    return st != IDS_OK
               ? st
               : idsi_check_index(ctx, "association type", index, ids_types_count(types, degree));
}

ids_status ids_types_print(ids_ctx *ctx, const ids_types *types, uint32_t degree, uint64_t index,
                           char **text)
{
    ids_status st = IDS_OK;
    idsi_text buffer;
    idsi_token tokens[IDSI_MAX_TOKENS];
    idsi_token *end = tokens;

    if (ctx == NULL || types == NULL || text == NULL) {
        return idsi_fail_arg(ctx, "context, types or result");
    }
    idsi_text_init(&buffer, ctx);
    IDSI_TRY(idsi_types_check_index(ctx, types, degree, index));
    spell_type(types, types->first[degree] + (uint32_t)index, &end);
    IDSI_TRY(idsi_tree_print(types->sig, tokens, NULL, &buffer));
    IDSI_TRY(idsi_text_take(&buffer, text));
done:
    idsi_text_clear(&buffer);
    return st;
}

/* ---- from a tree to its type ----------------------------------------------------------------- */

/* The slot of the type with this operation and these arguments, or the empty one it would have.
 * Argument i is children[i * step]. */
static uint32_t *find_slot(const ids_types *types, uint32_t op, const uint32_t *children,
                           ptrdiff_t step)
{
    uint32_t arity = types->sig->ops[op].arity;
    uint64_t hash = op;

    for (uint32_t i = 0; i < arity; i++) {
        hash = idsi_hash_add(hash, children[(ptrdiff_t)i * step]);
    }
    for (;; hash++) {
        uint32_t *slot = &types->slots[hash & types->slot_mask];
        const idsi_type *type = &types->list[*slot];
        bool same = type->op == op;

        for (uint32_t i = 0; same && i < arity; i++) {
            same = types->children[type->children + i] == children[(ptrdiff_t)i * step];
        }
        if (*slot == 0 || same) {
            return slot;
        }
    }
}

static ids_status fill_slots(ids_ctx *ctx, ids_types *types, uint32_t count)
{
    ids_status st = IDS_OK;
    size_t slots = 4;

    while (slots / 2 < count) {
        slots *= 2;
    }
    IDSI_TRY(idsi_alloc_array(ctx, slots, sizeof *types->slots, &types->slots));
    types->slot_mask = slots - 1;
    for (uint32_t t = 1; t < count; t++) {
        const idsi_type *type = &types->list[t];

        *find_slot(types, type->op, types->children + type->children, 1) = t;
    }
done:
    return st;
}

uint32_t idsi_types_find_code(const ids_types *types, const idsi_token *code, size_t length)
{
    uint32_t stack[IDSI_MAX_TOKENS]; /* types of the subtrees to the right, leftmost on top */
    size_t top = 0;

    for (size_t i = length; i-- > 0;) {
        if (!idsi_is_node(code[i])) {
            stack[top] = 0;
            top++;
            continue;
        }
        uint32_t op = idsi_node_op(code[i]);
        uint32_t arity = types->sig->ops[op].arity;
        IDSI_ASSERT(arity >= 2 && top >= arity);
        uint32_t found = *find_slot(types, op, &stack[top - 1], -1);

        if (found == 0) {
            return UINT32_MAX;
        }
        top -= arity - 1;
        stack[top - 1] = found;
    }
    IDSI_ASSERT(top == 1);
    /* cppcheck-suppress uninitvar ; a code has at least one token */
    return stack[0];
}

uint32_t idsi_types_find(const ids_types *types, const idsi_token *tree)
{
    return idsi_types_find_code(types, tree, idsi_tree_length(types->sig, tree));
}
