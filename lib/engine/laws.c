/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Linearised identities, compiled for evaluation.
 *
 * A law's terms share their common products, so that (x1*x2) is multiplied once however many terms
 * it stands in. The symmetry classes say in which variables the law is symmetric or antisymmetric:
 * i and j are in one class when exchanging them multiplies the law by +1 or -1. (Exchanges that do
 * so generate the full symmetric group on each class, so testing pairs is enough.) Arguments of one
 * class need to be put in only in one order.
 */
#include <math.h>
#include <string.h>

#include "engine_private.h"

/* A law at work, with a table of its nodes: slots of number + 1, or 0; at most half are taken. */
typedef struct compiler {
    ids_ctx *ctx;
    idsi_law *law;
    size_t capacity;
    uint32_t *slots;
    size_t slot_count; /* 0 or a power of 2 */
} compiler;

/* The slot of an equal node, or the empty one that it would have. */
static uint32_t *find_slot(const compiler *c, const idsi_law_node *node)
{
    uint64_t hash = node->op;

    IDSI_ASSERT(c->slots != NULL);
    for (uint32_t i = 0; i < node->arity; i++) {
        hash = idsi_hash_add(hash, (uint32_t)node->arg[i]);
    }
    for (;; hash++) {
        uint32_t *slot = &c->slots[hash & (c->slot_count - 1)];
        if (*slot == 0) {
            return slot;
        }
        const idsi_law_node *known = &c->law->nodes[*slot - 1];
        if (known->op == node->op && memcmp(known->arg, node->arg, sizeof node->arg) == 0) {
            return slot;
        }
    }
}

static ids_status grow_slots(compiler *c)
{
    ids_status st = IDS_OK;
    const size_t wanted = c->slot_count == 0 ? 64 : 2 * c->slot_count;

    idsi_free(c->ctx, c->slots);
    c->slots = NULL;
    c->slot_count = 0;
    IDSI_TRY(idsi_alloc_array(c->ctx, wanted, sizeof *c->slots, &c->slots));
    c->slot_count = wanted;
    for (size_t i = 0; i < c->law->node_count; i++) {
        *find_slot(c, &c->law->nodes[i]) = (uint32_t)i + 1;
    }
done:
    return st;
}

/* Number of a node equal to *node, adding it when there is none. */
static ids_status intern_node(compiler *c, const idsi_law_node *node, uint32_t *number)
{
    ids_status st = IDS_OK;
    idsi_law *law = c->law;

    if (2 * (law->node_count + 1) > c->slot_count) {
        IDSI_TRY(grow_slots(c));
    }
    uint32_t *slot = find_slot(c, node);
    if (*slot == 0) {
        IDSI_TRY(idsi_grow(c->ctx, law->node_count, &c->capacity, sizeof *law->nodes, &law->nodes));
        law->nodes[law->node_count] = *node;
        law->node_count++;
        *slot = (uint32_t)law->node_count;
    }
    *number = *slot - 1;
done:
    return st;
}

static ids_status compile_tree(compiler *c, const idsi_token **at, int32_t *arg,
                               uint32_t *variables)
{
    ids_status st = IDS_OK;
    idsi_law_node node = {0};
    uint32_t number = 0;
    idsi_token token = *(*at)++;

    if (!idsi_is_node(token)) {
        *arg = (int32_t)token - 1;
        *variables |= UINT32_C(1) << (token - 1);
        return IDS_OK;
    }
    node.op = idsi_node_op(token);
    node.arity = c->law->poly->sig->ops[node.op].arity;
    for (uint32_t i = 0; i < node.arity; i++) {
        IDSI_TRY(compile_tree(c, at, &node.arg[i], &node.variables));
    }
    IDSI_TRY(intern_node(c, &node, &number));
    *arg = -1 - (int32_t)number;
    *variables |= node.variables;
done:
    return st;
}

/* Whether exchanging variables i and j (labels) multiplies the polynomial by +1 or -1. */
static ids_status exchange_keeps(ids_ctx *ctx, const idsi_poly *poly, idsi_token i, idsi_token j,
                                 bool *keeps)
{
    ids_status st = IDS_OK;
    idsi_poly image;
    mpq_t negative;

    mpq_init(negative);
    idsi_poly_init(&image, ctx, poly->sig);
    image.variables = poly->variables;
    for (size_t t = 0; t < poly->count; t++) {
        size_t length = poly->start[t + 1] - poly->start[t];
        IDSI_TRY(
            idsi_poly_append(&image, poly->coefficients[t], poly->tokens + poly->start[t], length));
    }
    for (size_t k = 0; k < poly->start[poly->count]; k++) {
        idsi_token token = image.tokens[k];
        image.tokens[k] = token == i ? j : token == j ? i : token;
    }
    IDSI_TRY(idsi_poly_normalize(&image));
    *keeps = idsi_poly_equal(&image, poly);
    if (!*keeps && image.count == poly->count) {
        for (size_t t = 0; t < image.count; t++) {
            mpq_neg(negative, image.coefficients[t]);
            mpq_set(image.coefficients[t], negative);
        }
        *keeps = idsi_poly_equal(&image, poly);
    }
done:
    idsi_poly_clear(&image);
    mpq_clear(negative);
    return st;
}

static ids_status find_classes(ids_ctx *ctx, idsi_law *law)
{
    ids_status st = IDS_OK;

    for (uint32_t j = 0; j < law->degree; j++) {
        law->class_of[j] = (uint8_t)j;
        for (uint32_t i = 0; i < j; i++) {
            bool keeps = false;
            if (law->class_of[i] != i) {
                continue;
            }
            IDSI_TRY(exchange_keeps(ctx, law->poly, i + 1, j + 1, &keeps));
            if (keeps) {
                law->class_of[j] = (uint8_t)i;
                break;
            }
        }
    }
done:
    return st;
}

static double norm_bits(const idsi_poly *poly)
{
    double squares = -INFINITY;
    for (size_t t = 0; t < poly->count; t++) {
        squares = idsi_bits_add(squares, 2 * idsi_mpq_bits(poly->coefficients[t]));
    }
    /* Rounded up, so that it stays an upper bound in floating point. */
    return 0.5 * squares * (1 + 1e-9) + 1e-9;
}

ids_status idsi_law_compile(ids_ctx *ctx, const idsi_poly *poly, idsi_law *law)
{
    ids_status st = IDS_OK;
    compiler c = {.ctx = ctx, .law = law};

    law->poly = poly;
    law->degree = poly->degree;
    law->norm_bits = norm_bits(poly);
    IDSI_TRY(idsi_alloc_array(ctx, poly->count, sizeof *law->root, &law->root));
    for (size_t t = 0; t < poly->count; t++) {
        const idsi_token *at = poly->tokens + poly->start[t];
        int32_t arg = 0;
        uint32_t variables = 0;
        IDSI_TRY(compile_tree(&c, &at, &arg, &variables));
        law->root[t] = arg < 0 ? (uint32_t)(-1 - arg) : 0;
        if ((t & 0xfffu) == 0xfffu) {
            IDSI_TRY(idsi_poll(ctx, NULL));
        }
    }
    IDSI_TRY(find_classes(ctx, law));
done:
    idsi_free(ctx, c.slots);
    return st;
}

/* Whether an identity says anything over a field. */
static ids_status is_law(ids_ctx *ctx, const ids_presentation *pres, size_t index, uint32_t field,
                         bool *law)
{
    ids_status st = IDS_OK;
    const idsi_identity *identity = &pres->list[index];
    int order = 0;

    *law = identity->role == IDS_ROLE_IDENTITY && identity->linear.count > 0;
    if (!*law || field == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_poly_linear_mod(ctx, &identity->written, field, &order));
    if (order < 0) {
        st = idsi_fail(ctx, IDS_ERR_DOMAIN,
                       "the identity of line %u has a denominator that is 0 in the field of %u "
                       "elements",
                       identity->line, field);
    }
    *law = order == 0;
done:
    return st;
}

ids_status idsi_laws_create(ids_ctx *ctx, const ids_presentation *pres, idsi_laws **laws)
{
    return idsi_laws_create_over(ctx, pres, 0, laws);
}

ids_status idsi_laws_create_over(ids_ctx *ctx, const ids_presentation *pres, uint32_t field,
                                 idsi_laws **laws)
{
    ids_status st = IDS_OK;
    idsi_laws *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->pres = pres;
    IDSI_TRY(idsi_alloc_array(ctx, pres->count, sizeof *made->law, &made->law));
    for (size_t i = 0; i < pres->count; i++) {
        bool law = false;
        IDSI_TRY(is_law(ctx, pres, i, field, &law));
        if (law) {
            made->count++;
            IDSI_TRY(idsi_law_compile(ctx, &pres->list[i].linear, &made->law[made->count - 1]));
        }
    }
    *laws = made;
    made = NULL;
done:
    idsi_laws_free(made);
    return st;
}

void idsi_law_clear(ids_ctx *ctx, idsi_law *law)
{
    idsi_free(ctx, law->nodes);
    idsi_free(ctx, law->root);
}

void idsi_laws_free(idsi_laws *laws)
{
    if (laws != NULL) {
        for (size_t i = 0; i < laws->count; i++) {
            idsi_law_clear(laws->ctx, &laws->law[i]);
        }
        idsi_free(laws->ctx, laws->law);
        idsi_free(laws->ctx, laws);
    }
}

bool idsi_laws_trivial(const idsi_laws *laws)
{
    for (size_t i = 0; i < laws->count; i++) {
        if (laws->law[i].degree == 1) {
            return true;
        }
    }
    return false;
}

double idsi_laws_norm_bits(const idsi_laws *laws, uint32_t degree)
{
    double bits = -1;
    for (size_t i = 0; i < laws->count; i++) {
        if (laws->law[i].degree <= degree) {
            bits = fmax(bits, laws->law[i].norm_bits);
        }
    }
    return bits;
}
