/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Algebras as text that reads back to the same thing: basis, operations, then the products whose
 * arguments are canonical.
 */
#include <inttypes.h>
#include <string.h>

#include "algebra_private.h"

static ids_status print_head(const ids_algebra *algebra, idsi_text *text)
{
    ids_status st = IDS_OK;
    char *operation = NULL;

    IDSI_TRY(idsi_text_puts(text, "basis"));
    for (uint32_t i = 0; i < algebra->dimension; i++) {
        IDSI_TRY(idsi_text_printf(text, " %s", algebra->names[i]));
    }
    IDSI_TRY(idsi_text_puts(text, "\n"));
    for (size_t op = 0; op < algebra->sig->count; op++) {
        IDSI_TRY(ids_signature_print_operation(text->ctx, algebra->sig, op, &operation));
        IDSI_TRY(idsi_text_printf(text, "operation %s\n", operation));
        ids_string_free(text->ctx, operation);
        operation = NULL;
    }
done:
    ids_string_free(text->ctx, operation);
    return st;
}

ids_status idsi_product_print(const ids_algebra *algebra, uint32_t op, const uint8_t *argument,
                              idsi_text *text)
{
    idsi_token tree[IDS_MAX_ARITY + 1];

    tree[0] = idsi_node(op);
    for (uint32_t i = 0; i < algebra->sig->ops[op].arity; i++) {
        tree[i + 1] = argument[i] + 1u;
    }
    return idsi_tree_print(algebra->sig, tree, (const char *const *)algebra->names, text);
}

/* One term of a value; `first` in its sum. */
static ids_status print_term(const ids_algebra *algebra, const idsi_constant *constant, bool first,
                             idsi_text *text)
{
    ids_status st = IDS_OK;
    const bool negative = constant->numerator < 0;
    const int64_t top = negative ? -constant->numerator : constant->numerator;

    IDSI_TRY(idsi_text_puts(text, first ? (negative ? "-" : "") : negative ? " - " : " + "));
    if (constant->denominator != 1) {
        IDSI_TRY(idsi_text_printf(text, "%" PRId64 "/%" PRId64 "*", top, constant->denominator));
    } else if (top != 1) {
        IDSI_TRY(idsi_text_printf(text, "%" PRId64 "*", top));
    }
    IDSI_TRY(idsi_text_puts(text, algebra->names[constant->result]));
done:
    return st;
}

static ids_status print_table(const ids_algebra *algebra, uint32_t op, idsi_text *text)
{
    ids_status st = IDS_OK;
    const idsi_table *table = &algebra->tables[op];
    uint8_t canonical[IDS_MAX_ARITY];
    size_t end = 0;

    for (size_t i = 0; i < table->count; i = end) {
        const uint8_t *argument = table->list[i].argument;
        end = i + 1;
        while (end < table->count &&
               memcmp(table->list[end].argument, argument, IDS_MAX_ARITY) == 0) {
            end++;
        }
        (void)idsi_arguments_canonical(algebra->sig, op, argument, canonical);
        if (memcmp(canonical, argument, sizeof canonical) != 0) {
            continue;
        }
        IDSI_TRY(idsi_product_print(algebra, op, argument, text));
        IDSI_TRY(idsi_text_puts(text, " = "));
        for (size_t k = i; k < end; k++) {
            IDSI_TRY(print_term(algebra, &table->list[k], k == i, text));
        }
        IDSI_TRY(idsi_text_puts(text, "\n"));
    }
done:
    return st;
}

ids_status ids_algebra_print(ids_ctx *ctx, const ids_algebra *algebra, char **text)
{
    ids_status st = IDS_OK;
    idsi_text out;

    if (ctx == NULL || algebra == NULL || text == NULL) {
        return idsi_fail_arg(ctx, "context, algebra or result");
    }
    idsi_text_init(&out, ctx);
    IDSI_TRY(print_head(algebra, &out));
    for (uint32_t op = 0; op < algebra->sig->count; op++) {
        IDSI_TRY(print_table(algebra, op, &out));
    }
    IDSI_TRY(idsi_text_take(&out, text));
done:
    idsi_text_clear(&out);
    return st;
}
