/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Signatures: copies of the declared operations with their closed symmetry groups.
 *
 * Invariants: every operation can be written in a presentation (notation.c); no two are written
 * the same way (same notation and symbol, and for fences and names the same number of arguments);
 * a group that is trivial or full is known by its kind alone.
 */
#include <string.h>

#include "tree_private.h"

static bool same_text(const char *a, const char *b)
{
    return (a == NULL && b == NULL) || (a != NULL && b != NULL && strcmp(a, b) == 0);
}

static bool written_alike(const idsi_op *op, const ids_operation *other)
{
    return op->notation == other->notation && op->arity == other->arity &&
           same_text(op->open, other->open) && same_text(op->close, other->close);
}

/* Whether a message can show a symbol. */
static bool is_visible(const char *symbol)
{
    const size_t length = strlen(symbol);
    uint32_t code = 0;
    for (size_t at = 0; at < length;) {
        const size_t bytes = idsi_utf8_decode(symbol + at, length - at, &code);
        const idsi_char_class class = idsi_char_classify(code);
        if (bytes == 0 || class == IDSI_CHAR_ODD || class == IDSI_CHAR_LINE_END) {
            return false;
        }
        at += bytes;
    }
    return true;
}

static ids_status check_operation(ids_ctx *ctx, const ids_operation *operation)
{
    if (operation->open == NULL || operation->open[0] == '\0') {
        return idsi_fail(ctx, IDS_ERR_ARG, "an operation has no symbol");
    }
    const char *fault = idsi_notation_fault(operation->notation, operation->open, operation->close);
    if (fault != NULL) {
        const bool visible = is_visible(operation->open);
        return idsi_fail(ctx, IDS_ERR_ARG, "an operation cannot be written with %s%.70s%s: %s",
                         visible ? "\"" : "",
                         visible ? operation->open : "what is no visible UTF-8",
                         visible ? "\"" : "", fault);
    }
    if (operation->arity < IDS_MIN_ARITY || operation->arity > IDS_MAX_ARITY) {
        return idsi_fail(ctx, IDS_ERR_ARG, "operation %s has %u arguments; %u to %u are possible",
                         operation->open, operation->arity, IDS_MIN_ARITY, IDS_MAX_ARITY);
    }
    if (operation->notation == IDS_NOTATION_INFIX && operation->arity != 2) {
        return idsi_fail(ctx, IDS_ERR_ARG, "infix operation %s must have two arguments",
                         operation->open);
    }
    if (operation->symmetry == IDS_SYMMETRY_GENERATED && operation->generator_count > 0 &&
        operation->generators == NULL) {
        return idsi_fail_arg(ctx, "generators");
    }
    return IDS_OK;
}

static uint64_t factorial(uint32_t n)
{
    uint64_t f = 1;
    for (uint32_t i = 2; i <= n; i++) {
        f *= i;
    }
    return f;
}

static ids_status copy_operation(ids_ctx *ctx, const ids_operation *from, idsi_op *to)
{
    ids_status st = IDS_OK;

    to->notation = from->notation;
    to->arity = from->arity;
    to->group.arity = from->arity;
    to->group.symmetry = from->symmetry;
    IDSI_TRY(idsi_strdup(ctx, from->open, &to->open));
    if (from->close != NULL) {
        IDSI_TRY(idsi_strdup(ctx, from->close, &to->close));
    }
    switch (from->symmetry) {
    case IDS_SYMMETRY_NONE:
        to->group.order = 1;
        break;
    case IDS_SYMMETRY_COMMUTATIVE:
    case IDS_SYMMETRY_ALTERNATING:
        to->group.order = factorial(from->arity);
        break;
    case IDS_SYMMETRY_GENERATED:
        IDSI_TRY(idsi_group_close(ctx, from->arity, from->generators, from->generator_count,
                                  &to->group));
        if (to->group.symmetry == IDS_SYMMETRY_GENERATED) {
            IDSI_TRY(idsi_alloc_array(ctx, from->generator_count, sizeof *to->generators,
                                      &to->generators));
            memcpy(to->generators, from->generators,
                   from->generator_count * sizeof *to->generators);
            to->generator_count = from->generator_count;
        }
        break;
    default:
        st = idsi_fail(ctx, IDS_ERR_ARG, "unknown kind of symmetry");
        break;
    }
done:
    return st;
}

ids_status ids_signature_create(ids_ctx *ctx, const ids_operation *operations, size_t count,
                                ids_signature **signature)
{
    ids_status st = IDS_OK;
    ids_signature *sig = NULL;

    if (ctx == NULL || signature == NULL || operations == NULL) {
        return idsi_fail_arg(ctx, "context, operations or result");
    }
    if (count == 0 || count > IDS_MAX_OPERATIONS) {
        return idsi_fail(ctx, IDS_ERR_ARG, "a signature has 1 to %u operations, not %zu",
                         IDS_MAX_OPERATIONS, count);
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *sig, &sig));
    sig->ctx = ctx;
    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *sig->ops, &sig->ops));
    for (size_t i = 0; i < count; i++) {
        IDSI_TRY(check_operation(ctx, &operations[i]));
        for (size_t j = 0; j < i; j++) {
            if (written_alike(&sig->ops[j], &operations[i])) {
                st = idsi_fail(ctx, IDS_ERR_ARG, "two operations are written the same way: %s",
                               operations[i].open);
                goto done;
            }
        }
        sig->count = i + 1;
        IDSI_TRY(copy_operation(ctx, &operations[i], &sig->ops[i]));
    }
    *signature = sig;
    sig = NULL;
done:
    ids_signature_free(sig);
    return st;
}

void ids_signature_free(ids_signature *signature)
{
    if (signature == NULL) {
        return;
    }
    ids_ctx *ctx = signature->ctx;
    for (size_t i = 0; i < signature->count; i++) {
        idsi_op *op = &signature->ops[i];
        idsi_free(ctx, op->open);
        idsi_free(ctx, op->close);
        idsi_free(ctx, op->generators);
        idsi_group_clear(ctx, &op->group);
    }
    idsi_free(ctx, signature->ops);
    idsi_free(ctx, signature);
}

size_t ids_signature_count(const ids_signature *signature)
{
    return signature == NULL ? 0 : signature->count;
}

ids_status ids_signature_operation(const ids_signature *signature, size_t index,
                                   ids_operation *operation)
{
    if (signature == NULL || operation == NULL || index >= signature->count) {
        return IDS_ERR_ARG;
    }
    const idsi_op *op = &signature->ops[index];
    *operation = (ids_operation){.notation = op->notation,
                                 .open = op->open,
                                 .close = op->close,
                                 .arity = op->arity,
                                 .symmetry = op->group.symmetry,
                                 .generators = op->generators,
                                 .generator_count = op->generator_count,
                                 .group_order = op->group.order};
    return IDS_OK;
}
