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

/* Number of a node equal to *node, adding it when there is none. */
static ids_status intern_node(ids_ctx *ctx, idsi_law *law, size_t *capacity,
                              const idsi_law_node *node, uint32_t *number)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < law->node_count; i++) {
        const idsi_law_node *known = &law->nodes[i];
        if (known->op == node->op && known->variables == node->variables &&
            memcmp(known->arg, node->arg, sizeof node->arg) == 0) {
            *number = (uint32_t)i;
            return IDS_OK;
        }
    }
    IDSI_TRY(idsi_grow(ctx, law->node_count, capacity, sizeof *law->nodes, &law->nodes));
    law->nodes[law->node_count] = *node;
    *number = (uint32_t)law->node_count;
    law->node_count++;
done:
    return st;
}

static ids_status compile_tree(ids_ctx *ctx, idsi_law *law, size_t *capacity, const idsi_token **at,
                               int32_t *arg, uint32_t *variables)
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
    node.arity = law->poly->sig->ops[node.op].arity;
    for (uint32_t i = 0; i < node.arity; i++) {
        IDSI_TRY(compile_tree(ctx, law, capacity, at, &node.arg[i], &node.variables));
    }
    IDSI_TRY(intern_node(ctx, law, capacity, &node, &number));
    *arg = -1 - (int32_t)number;
    *variables |= node.variables;
done:
    return st;
}

/* Whether exchanging variables i and j (labels) multiplies the polynomial by +1 or -1. */
static ids_status exchange_keeps(const idsi_poly *poly, idsi_token i, idsi_token j, bool *keeps)
{
    ids_status st = IDS_OK;
    idsi_poly image;
    mpq_t negative;

    mpq_init(negative);
    idsi_poly_init(&image, poly->ctx, poly->sig);
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

static ids_status find_classes(idsi_law *law)
{
    ids_status st = IDS_OK;

    for (uint32_t j = 0; j < law->degree; j++) {
        law->class_of[j] = (uint8_t)j;
        for (uint32_t i = 0; i < j; i++) {
            bool keeps = false;
            if (law->class_of[i] != i) {
                continue;
            }
            IDSI_TRY(exchange_keeps(law->poly, i + 1, j + 1, &keeps));
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
    size_t capacity = 0;

    law->poly = poly;
    law->degree = poly->degree;
    law->norm_bits = norm_bits(poly);
    IDSI_TRY(idsi_alloc_array(ctx, poly->count, sizeof *law->root, &law->root));
    for (size_t t = 0; t < poly->count; t++) {
        const idsi_token *at = poly->tokens + poly->start[t];
        int32_t arg = 0;
        uint32_t variables = 0;
        IDSI_TRY(compile_tree(ctx, law, &capacity, &at, &arg, &variables));
        law->root[t] = arg < 0 ? (uint32_t)(-1 - arg) : 0;
    }
    IDSI_TRY(find_classes(law));
done:
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
