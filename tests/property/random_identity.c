/* SPDX-License-Identifier: BSD-2-Clause */
#include "random_identity.h"

#include <string.h>

static uint32_t below(idsi_random *random, uint32_t bound)
{
    return (uint32_t)idsi_random_below(random, bound);
}

static void shuffle(idsi_random *random, uint8_t *items, uint32_t n)
{
    for (uint32_t i = n; i > 1; i--) {
        const uint32_t j = below(random, i);
        const uint8_t swap = items[i - 1];
        items[i - 1] = items[j];
        items[j] = swap;
    }
}

static void random_generators(idsi_random *random, ids_operation *op, ids_signed_order orders[2])
{
    op->generators = orders;
    op->generator_count = 1 + below(random, 2);
    for (size_t g = 0; g < op->generator_count; g++) {
        for (uint32_t i = 0; i < op->arity; i++) {
            orders[g].image[i] = (uint8_t)i;
        }
        shuffle(random, orders[g].image, op->arity);
        orders[g].sign = below(random, 2) == 0 ? 1 : -1;
    }
}

static void random_notation(idsi_random *random, ids_operation *op)
{
    static const char *const infix[] = {"*", ".", "o", "/", "**", "\xE2\x88\x98", "\xCF\x86", "|"};
    static const char *const fence[] = {"()", "[]", "{}", "<>"};
    static const char *const open[] = {"(", "[", "{", "<"};
    static const char *const close[] = {")", "]", "}", ">"};
    static const char *const prefix[] = {"t", "a", "o", "f2", "mul"};
    op->notation = (ids_notation)below(random, 3);
    op->arity = 2 + below(random, 3);
    op->close = NULL;
    switch (op->notation) {
    case IDS_NOTATION_INFIX:
        op->arity = 2;
        op->open = infix[below(random, sizeof infix / sizeof infix[0])];
        break;
    case IDS_NOTATION_FENCE: {
        const uint32_t kind = below(random, sizeof fence / sizeof fence[0]);
        op->open = open[kind];
        op->close = close[kind];
        break;
    }
    case IDS_NOTATION_PREFIX:
        op->open = prefix[below(random, sizeof prefix / sizeof prefix[0])];
        break;
    }
}

/* Draws again when two operations are written alike or the signs contradict. */
ids_signature *random_signature(ids_ctx *ctx, idsi_random *random)
{
    ids_operation ops[4];
    ids_signed_order orders[4][2];
    ids_signature *sig = NULL;
    for (;;) {
        const uint32_t count = 1 + below(random, 4);
        memset(ops, 0, sizeof ops);
        memset(orders, 0, sizeof orders);
        for (uint32_t i = 0; i < count; i++) {
            random_notation(random, &ops[i]);
            ops[i].symmetry = (ids_symmetry)below(random, 4);
            if (ops[i].symmetry == IDS_SYMMETRY_GENERATED) {
                random_generators(random, &ops[i], orders[i]);
            }
        }
        if (ids_signature_create(ctx, ops, count, &sig) == IDS_OK) {
            return sig;
        }
    }
}

static size_t grow(idsi_random *random, const ids_signature *sig, uint32_t *leaves,
                   idsi_token *tree)
{
    size_t length = 1;
    if (below(random, 4) == 0) {
        tree[0] = 1;
        return 1;
    }
    const uint32_t op = below(random, (uint32_t)sig->count);
    const uint32_t arity = sig->ops[op].arity;
    if (*leaves + 1 < arity) {
        tree[0] = 1;
        return 1;
    }
    *leaves -= arity - 1;
    tree[0] = idsi_node(op);
    for (uint32_t i = 0; i < arity; i++) {
        length += grow(random, sig, leaves, tree + length);
    }
    return length;
}

size_t random_tree(idsi_random *random, const ids_signature *sig, uint32_t most,
                   idsi_token tree[IDSI_MAX_TOKENS])
{
    uint32_t more = most - 1;
    return grow(random, sig, &more, tree);
}

static void put_labels(idsi_token *tree, size_t length, const uint8_t *labels)
{
    for (size_t i = 0; i < length; i++) {
        if (!idsi_is_node(tree[i])) {
            tree[i] = *labels++;
        }
    }
}

void random_poly(idsi_random *random, uint32_t most, idsi_poly *poly)
{
    idsi_token tree[IDSI_MAX_TOKENS];
    uint8_t labels[IDS_MAX_DEGREE];
    mpq_t q;
    const uint32_t terms = 1 + below(random, 5);
    size_t length = random_tree(random, poly->sig, most, tree);
    const uint32_t degree = idsi_tree_degree(poly->sig, tree);
    poly->variables = 1 + below(random, degree);
    for (uint32_t i = 0; i < degree; i++) {
        labels[i] = (uint8_t)(i < poly->variables ? i + 1 : 1 + below(random, poly->variables));
    }
    mpq_init(q);
    for (uint32_t term = 0; term < terms; term++) {
        for (uint32_t tries = 0; term > 0 && tries < 20; tries++) {
            idsi_token other[IDSI_MAX_TOKENS];
            const size_t n = random_tree(random, poly->sig, most, other);
            if (idsi_tree_degree(poly->sig, other) == degree) {
                memcpy(tree, other, n * sizeof *tree);
                length = n;
                break;
            }
        }
        shuffle(random, labels, degree);
        put_labels(tree, length, labels);
        mpz_set_ui(mpq_numref(q), 1 + below(random, 12));
        mpz_set_ui(mpq_denref(q), 1 + below(random, 3));
        mpq_canonicalize(q);
        if (below(random, 2) == 0) {
            mpq_neg(q, q);
        }
        TEST_OK(poly->ctx, idsi_poly_append(poly, q, tree, length));
    }
    mpq_clear(q);
}
