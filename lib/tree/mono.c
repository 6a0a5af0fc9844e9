/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Monomials as objects that callers hold: checked prefix code in one block.
 */
#include <string.h>

#include "tree_private.h"

ids_status idsi_mono_from_tokens(ids_ctx *ctx, const ids_signature *sig, const idsi_token *tokens,
                                 size_t length, ids_mono **mono)
{
    ids_status st = IDS_OK;
    void *block = NULL;

    IDSI_TRY(idsi_alloc(ctx, sizeof(ids_mono) + length * sizeof *tokens, &block));
    ids_mono *made = block;
    made->ctx = ctx;
    made->sig = sig;
    made->length = (uint32_t)length;
    memcpy(made->tokens, tokens, length * sizeof *tokens);
    made->degree = idsi_tree_degree(sig, tokens);
    *mono = made;
done:
    return st;
}

ids_status ids_mono_create(ids_ctx *ctx, const ids_signature *signature, const int32_t *code,
                           size_t length, ids_mono **mono)
{
    idsi_token tokens[IDSI_MAX_TOKENS];
    size_t open = 1;

    if (ctx == NULL || signature == NULL || code == NULL || mono == NULL) {
        return idsi_fail_arg(ctx, "context, signature, code or result");
    }
    if (length == 0 || length > IDSI_MAX_TOKENS) {
        return idsi_fail(ctx, IDS_ERR_ARG, "a prefix code has 1 to %u entries, not %zu",
                         IDSI_MAX_TOKENS, length);
    }
    for (size_t i = 0; i < length; i++) {
        if (open == 0) {
            return idsi_fail(ctx, IDS_ERR_ARG, "the prefix code goes on after entry %zu, where "
                             "the tree is complete", i);
        }
        open--;
        if (code[i] > 0 && code[i] <= (int32_t)IDS_MAX_DEGREE) {
            tokens[i] = (idsi_token)code[i];
        } else if (code[i] < 0 && (uint64_t)(-1 - (int64_t)code[i]) < signature->count) {
            uint32_t op = (uint32_t)(-1 - code[i]);
            tokens[i] = idsi_node(op);
            open += signature->ops[op].arity;
        } else {
            return idsi_fail(ctx, IDS_ERR_ARG,
                             "entry %zu of the prefix code is %d: neither a label 1 .. %u nor "
                             "-1-index of one of %zu operations",
                             i, (int)code[i], IDS_MAX_DEGREE, signature->count);
        }
    }
    if (open != 0) {
        return idsi_fail(ctx, IDS_ERR_ARG, "the prefix code ends where %zu arguments are missing",
                         open);
    }
    return idsi_mono_from_tokens(ctx, signature, tokens, length, mono);
}

void ids_mono_free(ids_mono *mono)
{
    if (mono != NULL) {
        idsi_free(mono->ctx, mono);
    }
}

uint32_t ids_mono_degree(const ids_mono *mono)
{
    return mono == NULL ? 0 : mono->degree;
}

ids_status ids_mono_code(const ids_mono *mono, int32_t *code, size_t capacity, size_t *length)
{
    if (mono == NULL || code == NULL || length == NULL || capacity < mono->length) {
        return IDS_ERR_ARG;
    }
    for (uint32_t i = 0; i < mono->length; i++) {
        idsi_token token = mono->tokens[i];
        code[i] = idsi_is_node(token) ? -1 - (int32_t)idsi_node_op(token) : (int32_t)token;
    }
    *length = mono->length;
    return IDS_OK;
}

ids_status ids_mono_canonicalize(ids_ctx *ctx, const ids_mono *mono, ids_mono **canonical,
                                 int *sign)
{
    ids_status st = IDS_OK;
    ids_mono *made = NULL;

    if (ctx == NULL || mono == NULL || canonical == NULL || sign == NULL) {
        return idsi_fail_arg(ctx, "context, monomial or result");
    }
    IDSI_TRY(idsi_mono_from_tokens(ctx, mono->sig, mono->tokens, mono->length, &made));
    *sign = idsi_tree_canonicalize(made->sig, made->tokens, made->length);
    *canonical = made;
done:
    return st;
}

ids_status ids_mono_print(ids_ctx *ctx, const ids_mono *mono, char **text)
{
    ids_status st = IDS_OK;
    idsi_text buffer;

    if (ctx == NULL || mono == NULL || text == NULL) {
        return idsi_fail_arg(ctx, "context, monomial or result");
    }
    idsi_text_init(&buffer, ctx);
    IDSI_TRY(idsi_tree_print(mono->sig, mono->tokens, NULL, &buffer));
    IDSI_TRY(idsi_text_take(&buffer, text));
done:
    idsi_text_clear(&buffer);
    return st;
}
