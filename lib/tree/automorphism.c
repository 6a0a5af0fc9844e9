/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The automorphism group of an association type: order, generators, structure.
 *
 * A type is walked from the root. Each block of places (see automorphism_place.c) describes the
 * argument that stands first in each of its orbits; the other places of the orbit hold equal
 * arguments, which the generators of the block carry there. So the group of a type of degree n
 * has fewer than 2n generators, whatever its order.
 *
 * The structure is kept as a stack of direct factors, each with its text and its order:
 *
 *     ... [S2 wr S2][S3]      a fixed place leaves the factors of its argument where they are;
 *     ... [A wr S2]           the other blocks join theirs to one, by a wreath product or
 *     ... [(A x B) : Z2]      a semidirect one.
 *
 * In a direct product the factors stand by order, then by text, so that types with the same
 * factors have the same structure text.
 */
#include <string.h>

#include <idspan/gmp.h>

#include "automorphism_private.h"

typedef enum factor_kind { FACTOR_NAME = 0, FACTOR_WREATH, FACTOR_SEMIDIRECT } factor_kind;

typedef struct factor {
    factor_kind kind;
    char *text;
    idsi_order order;
} factor;

typedef struct builder {
    ids_ctx *ctx;
    const ids_types *types;
    factor *stack;
    size_t height;
    size_t capacity;
    ids_automorphisms *group;
    size_t generator_capacity;
} builder;

/* ---- orders ------------------------------------------------------------------------------- */

static void order_set(idsi_order *order, uint64_t value)
{
    *order = (idsi_order){{value}};
}

static size_t order_length(const idsi_order *order)
{
    size_t length = IDSI_ORDER_LIMBS;
    while (length > 1 && order->limb[length - 1] == 0) {
        length--;
    }
    return length;
}

static void order_multiply(idsi_order *order, const idsi_order *by)
{
    mp_limb_t product[2 * IDSI_ORDER_LIMBS] = {0};

    mpn_mul_n(product, order->limb, by->limb, IDSI_ORDER_LIMBS);
    memcpy(order->limb, product, sizeof order->limb);
}

static void order_multiply_small(idsi_order *order, uint64_t by)
{
    (void)mpn_mul_1(order->limb, order->limb, IDSI_ORDER_LIMBS, by);
}

static uint64_t order_u64(const idsi_order *order)
{
    return order_length(order) > 1 ? 0 : order->limb[0];
}

static void order_digits(const idsi_order *order, char text[IDSI_ORDER_CHARS])
{
    unsigned char digits[IDSI_ORDER_CHARS] = {0};
    idsi_order copy = *order; /* mpn_get_str() spoils it */
    size_t length = mpn_get_str(digits, 10, copy.limb, (mp_size_t)order_length(order));
    size_t skip = 0;

    while (skip + 1 < length && digits[skip] == 0) {
        skip++;
    }
    for (size_t i = skip; i < length; i++) {
        text[i - skip] = (char)('0' + digits[i]);
    }
    text[length - skip] = '\0';
}

/* degree! / order */
static void order_cofactor(uint32_t degree, const idsi_order *order, idsi_order *quotient)
{
    idsi_order all = {{1}};
    mp_limb_t rest[IDSI_ORDER_LIMBS] = {0};
    size_t length = order_length(order);

    for (uint32_t i = 2; i <= degree; i++) {
        order_multiply_small(&all, i);
    }
    memset(quotient, 0, sizeof *quotient);
    mpn_tdiv_qr(quotient->limb, rest, 0, all.limb, IDSI_ORDER_LIMBS, order->limb,
                (mp_size_t)length);
}

/* ---- the stack of factors ----------------------------------------------------------------- */

/* Pushes a factor and takes the text over, also when it fails. */
static ids_status push(builder *b, factor_kind kind, char *text, const idsi_order *order)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_grow(b->ctx, b->height, &b->capacity, sizeof *b->stack, &b->stack));
    b->stack[b->height++] = (factor){.kind = kind, .text = text, .order = *order};
    text = NULL;
done:
    idsi_free(b->ctx, text);
    return st;
}

static void drop(builder *b, size_t height)
{
    while (b->height > height) {
        idsi_free(b->ctx, b->stack[--b->height].text);
    }
}

static bool stands_before(const factor *a, const factor *b)
{
    int order = mpn_cmp(a->order.limb, b->order.limb, IDSI_ORDER_LIMBS);
    return order != 0 ? order < 0 : strcmp(a->text, b->text) < 0;
}

static void sort_factors(factor *list, size_t count)
{
    for (size_t i = 1; i < count; i++) {
        factor moved = list[i];
        size_t at = i;
        for (; at > 0 && stands_before(&moved, &list[at - 1]); at--) {
            list[at] = list[at - 1];
        }
        list[at] = moved;
    }
}

/* Appends the product of the factors from `base` on and gives its order. */
static ids_status join(builder *b, size_t base, idsi_text *text, idsi_order *order)
{
    ids_status st = IDS_OK;
    size_t count = b->height - base;

    order_set(order, 1);
    if (count == 0) {
        return IDS_OK; /* there may be no stack yet */
    }
    sort_factors(b->stack + base, count);
    for (size_t i = 0; i < count; i++) {
        const factor *f = &b->stack[base + i];
        bool fenced = count > 1 && f->kind != FACTOR_NAME;
        IDSI_TRY(idsi_text_printf(text, "%s%s%s%s", i > 0 ? " x " : "", fenced ? "(" : "", f->text,
                                  fenced ? ")" : ""));
        order_multiply(order, &f->order);
    }
done:
    return st;
}

/* Joins the factors from `base` on, one argument's group, to one wreath product. */
static ids_status join_wreath(builder *b, size_t base, const idsi_block *block)
{
    ids_status st = IDS_OK;
    idsi_text text;
    char *taken = NULL;
    idsi_order inner = {{0}};
    idsi_order order = {{block->order}};
    size_t count = b->height - base;
    bool fenced = count > 1 || (count == 1 && b->stack[base].kind == FACTOR_SEMIDIRECT);
    bool wreath = count > 0 || strstr(block->name, " wr ") != NULL;

    idsi_text_init(&text, b->ctx);
    IDSI_TRY(idsi_text_puts(&text, fenced ? "(" : ""));
    IDSI_TRY(join(b, base, &text, &inner));
    IDSI_TRY(
        idsi_text_printf(&text, "%s%s%s", fenced ? ")" : "", count > 0 ? " wr " : "", block->name));
    IDSI_TRY(idsi_text_take(&text, &taken));
    for (int i = 0; count > 0 && i < __builtin_popcount(block->orbit[0]); i++) {
        order_multiply(&order, &inner);
    }
    drop(b, base);
    IDSI_TRY(push(b, wreath ? FACTOR_WREATH : FACTOR_NAME, taken, &order));
done:
    idsi_text_clear(&text);
    return st;
}

/* Joins the factors from `base` on, those of all places, to one semidirect product. */
static ids_status join_semidirect(builder *b, size_t base, const idsi_block *block)
{
    ids_status st = IDS_OK;
    idsi_text text;
    char *taken = NULL;
    idsi_order order = {{0}};
    bool fenced = strstr(block->name, " wr ") != NULL;

    idsi_text_init(&text, b->ctx);
    IDSI_TRY(idsi_text_puts(&text, "("));
    IDSI_TRY(join(b, base, &text, &order));
    IDSI_TRY(idsi_text_printf(&text, fenced ? ") : (%s)" : ") : %s", block->name));
    IDSI_TRY(idsi_text_take(&text, &taken));
    order_multiply_small(&order, block->order);
    drop(b, base);
    IDSI_TRY(push(b, FACTOR_SEMIDIRECT, taken, &order));
done:
    idsi_text_clear(&text);
    return st;
}

/* Pushes the factors from `from` on once more. */
static ids_status repeat_factors(builder *b, size_t from)
{
    ids_status st = IDS_OK;
    size_t end = b->height;

    for (size_t i = from; i < end; i++) {
        char *text = NULL;
        idsi_order order = b->stack[i].order;
        IDSI_TRY(idsi_strdup(b->ctx, b->stack[i].text, &text));
        IDSI_TRY(push(b, b->stack[i].kind, text, &order));
    }
done:
    return st;
}

/* ---- the walk ----------------------------------------------------------------------------- */

/* Adds an argument order as a permutation of the leaves: whole arguments change places. */
static ids_status add_generator(builder *b, const ids_signed_order *e, const uint32_t *first,
                                uint32_t arity)
{
    ids_status st = IDS_OK;
    ids_automorphisms *group = b->group;

    IDSI_TRY(idsi_grow(b->ctx, group->count, &b->generator_capacity, sizeof *group->generators,
                       &group->generators));
    idsi_leaf_order *made = &group->generators[group->count++];
    for (uint32_t i = 0; i < IDS_MAX_DEGREE; i++) {
        made->image[i] = (uint8_t)i;
    }
    made->sign = e->sign;
    for (uint32_t i = 0; i < arity; i++) {
        for (uint32_t leaf = first[i]; leaf < first[i + 1]; leaf++) {
            made->image[leaf] = (uint8_t)(first[e->image[i]] + (leaf - first[i]));
        }
    }
done:
    return st;
}

static ids_status walk(builder *b, uint32_t type, uint32_t first_leaf);

/* first[i] is the first leaf of argument i. */
static ids_status walk_block(builder *b, const uint32_t *child, const uint32_t *first,
                             const idsi_block *block)
{
    ids_status st = IDS_OK;
    size_t base = b->height;

    for (uint32_t i = 0; i < block->orbit_count; i++) {
        uint32_t place = (uint32_t)__builtin_ctz(block->orbit[i]);
        size_t from = b->height;
        IDSI_TRY(walk(b, child[place], first[place]));
        size_t end = b->height;
        for (int more = __builtin_popcount(block->orbit[i]) - 1;
             block->kind == IDSI_BLOCK_SEMIDIRECT && more > 0; more--) {
            /* Each round repeats one copy, not all that are there by then. */
            IDSI_TRY(repeat_factors(b, b->height - (end - from)));
        }
    }
    if (block->kind == IDSI_BLOCK_WREATH) {
        IDSI_TRY(join_wreath(b, base, block));
    } else if (block->kind == IDSI_BLOCK_SEMIDIRECT) {
        IDSI_TRY(join_semidirect(b, base, block));
    }
done:
    return st;
}

/* Pushes the factors of a type whose leaves begin at first_leaf, and adds its generators. */
static ids_status walk(builder *b, uint32_t type, uint32_t first_leaf)
{
    ids_status st = IDS_OK;
    const idsi_type *entry = &b->types->list[type];
    uint32_t first[IDS_MAX_ARITY + 1] = {first_leaf};
    idsi_stabilizer stabilizer;

    if (entry->automorphisms == 1) {
        return IDS_OK;
    }
    const uint32_t *child = b->types->children + entry->children;
    uint32_t arity = b->types->sig->ops[entry->op].arity;
    for (uint32_t i = 0; i < arity; i++) {
        first[i + 1] = first[i] + b->types->list[child[i]].degree;
    }
    IDSI_TRY(idsi_stabilizer_find(b->ctx, b->types, type, &stabilizer));
    for (uint32_t i = 0; i < stabilizer.block_count; i++) {
        IDSI_TRY(walk_block(b, child, first, &stabilizer.block[i]));
    }
    for (uint32_t i = 0; i < stabilizer.generator_count; i++) {
        IDSI_TRY(add_generator(b, &stabilizer.generator[i], first, arity));
    }
done:
    return st;
}

static ids_status finish(builder *b)
{
    ids_status st = IDS_OK;
    idsi_text text;

    idsi_text_init(&text, b->ctx);
    if (b->height == 0) {
        order_set(&b->group->order, 1);
        IDSI_TRY(idsi_text_puts(&text, "1"));
    } else {
        IDSI_TRY(join(b, 0, &text, &b->group->order));
    }
    IDSI_TRY(idsi_text_take(&text, &b->group->structure));
done:
    idsi_text_clear(&text);
    return st;
}

/* ---- the public calls --------------------------------------------------------------------- */

ids_status ids_automorphisms_create(ids_ctx *ctx, const ids_types *types, uint32_t degree,
                                    uint64_t index, ids_automorphisms **automorphisms)
{
    ids_status st = IDS_OK;
    builder b = {.ctx = ctx, .types = types};

    if (ctx == NULL || automorphisms == NULL || types == NULL) {
        return idsi_fail_arg(ctx, "context, types or result");
    }
    IDSI_TRY(idsi_types_check_index(ctx, types, degree, index));
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *b.group, &b.group));
    b.group->ctx = ctx;
    b.group->degree = degree;
    IDSI_TRY(walk(&b, types->first[degree] + (uint32_t)index, 0));
    IDSI_TRY(finish(&b));
    *automorphisms = b.group;
    b.group = NULL;
done:
    drop(&b, 0);
    idsi_free(ctx, b.stack);
    ids_automorphisms_free(b.group);
    return st;
}

void ids_automorphisms_free(ids_automorphisms *automorphisms)
{
    if (automorphisms != NULL) {
        ids_ctx *ctx = automorphisms->ctx;
        idsi_free(ctx, automorphisms->structure);
        idsi_free(ctx, automorphisms->generators);
        idsi_free(ctx, automorphisms);
    }
}

uint64_t ids_automorphisms_order(const ids_automorphisms *automorphisms)
{
    return automorphisms == NULL ? 0 : order_u64(&automorphisms->order);
}

const char *ids_automorphisms_structure(const ids_automorphisms *automorphisms)
{
    return automorphisms == NULL ? "" : automorphisms->structure;
}

size_t ids_automorphisms_count(const ids_automorphisms *automorphisms)
{
    return automorphisms == NULL ? 0 : automorphisms->count;
}

ids_status ids_automorphisms_generator(const ids_automorphisms *automorphisms, size_t index,
                                       uint32_t *image, size_t capacity, int *sign)
{
    if (automorphisms == NULL || index >= automorphisms->count || image == NULL || sign == NULL ||
        capacity < automorphisms->degree) {
        return IDS_ERR_ARG;
    }
    const idsi_leaf_order *generator = &automorphisms->generators[index];
    for (uint32_t i = 0; i < automorphisms->degree; i++) {
        image[i] = generator->image[i] + 1u;
    }
    *sign = generator->sign < 0 ? -1 : 1;
    return IDS_OK;
}

ids_status ids_automorphisms_exact(const ids_automorphisms *automorphisms, mpz_t order,
                                   mpz_t monomials)
{
    idsi_order quotient = {{0}};

    if (automorphisms == NULL || order == NULL || monomials == NULL) {
        return IDS_ERR_ARG;
    }
    order_cofactor(automorphisms->degree, &automorphisms->order, &quotient);
    mpz_import(order, IDSI_ORDER_LIMBS, -1, sizeof(mp_limb_t), 0, 0, automorphisms->order.limb);
    mpz_import(monomials, IDSI_ORDER_LIMBS, -1, sizeof(mp_limb_t), 0, 0, quotient.limb);
    return IDS_OK;
}

void idsi_automorphisms_digits(const ids_automorphisms *group, char order[IDSI_ORDER_CHARS],
                               char monomials[IDSI_ORDER_CHARS])
{
    idsi_order quotient = {{0}};

    order_digits(&group->order, order);
    order_cofactor(group->degree, &group->order, &quotient);
    order_digits(&quotient, monomials);
}
