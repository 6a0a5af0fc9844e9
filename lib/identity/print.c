/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Polynomials, operations and presentations as text that reads back to the same thing.
 *
 * A coefficient other than 1 stands before its monomial with a "*", which the reader takes for
 * a coefficient whatever operations there are. A trivial identity is written as an equation of
 * a monomial with itself, so that it keeps its degree.
 */
#include "identity_private.h"

static ids_status print_integer(idsi_text *text, mpz_srcptr number)
{
    char *digits = NULL;
    void *room = NULL;
    ids_status st = IDS_OK;
    IDSI_TRY(idsi_alloc(text->ctx, mpz_sizeinbase(number, 10) + 2, &room));
    digits = mpz_get_str(room, 10, number);
    IDSI_TRY(idsi_text_puts(text, digits[0] == '-' ? digits + 1 : digits));
done:
    idsi_free(text->ctx, room);
    return st;
}

ids_status idsi_coefficient_print(idsi_text *text, mpq_srcptr value)
{
    ids_status st = IDS_OK;
    mpz_srcptr numerator = mpq_numref(value);
    mpz_srcptr denominator = mpq_denref(value);
    if (mpz_cmpabs_ui(numerator, 1) == 0 && mpz_cmp_ui(denominator, 1) == 0) {
        return IDS_OK;
    }
    IDSI_TRY(print_integer(text, numerator));
    if (mpz_cmp_ui(denominator, 1) != 0) {
        IDSI_TRY(idsi_text_puts(text, "/"));
        IDSI_TRY(print_integer(text, denominator));
    }
    IDSI_TRY(idsi_text_puts(text, "*"));
done:
    return st;
}

ids_status idsi_poly_print(const idsi_poly *poly, const char *const *names, idsi_text *text)
{
    ids_status st = IDS_OK;
    if (poly->count == 0) {
        return idsi_text_puts(text, "0");
    }
    for (size_t i = 0; i < poly->count; i++) {
        const bool negative = mpq_sgn(poly->coefficients[i]) < 0;
        if (i > 0) {
            IDSI_TRY(idsi_text_puts(text, negative ? " - " : " + "));
        } else if (negative) {
            IDSI_TRY(idsi_text_puts(text, "-"));
        }
        IDSI_TRY(idsi_coefficient_print(text, poly->coefficients[i]));
        IDSI_TRY(idsi_tree_print(poly->sig, poly->tokens + poly->start[i], names, text));
    }
done:
    return st;
}

/* ---- operations ------------------------------------------------------------------------------ */

static ids_status print_pattern(const ids_signature *sig, uint32_t index,
                                const ids_signed_order *order, idsi_text *text)
{
    idsi_token tree[IDS_MAX_ARITY + 1];
    tree[0] = idsi_node(index);
    for (uint32_t i = 0; i < sig->ops[index].arity; i++) {
        tree[i + 1] = order == NULL ? i + 1 : order->image[i] + 1u;
    }
    return idsi_tree_print(sig, tree, NULL, text);
}

static ids_status print_operation(const ids_signature *sig, uint32_t index, idsi_text *text)
{
    const idsi_op *op = &sig->ops[index];
    ids_status st = IDS_OK;
    IDSI_TRY(print_pattern(sig, index, NULL, text));
    switch (op->group.symmetry) {
    case IDS_SYMMETRY_NONE:
        break;
    case IDS_SYMMETRY_COMMUTATIVE:
        IDSI_TRY(idsi_text_puts(text, " commutative"));
        break;
    case IDS_SYMMETRY_ALTERNATING:
        IDSI_TRY(idsi_text_puts(text, " alternating"));
        break;
    case IDS_SYMMETRY_GENERATED:
        for (size_t i = 0; i < op->generator_count; i++) {
            IDSI_TRY(idsi_text_puts(text, op->generators[i].sign < 0 ? " = -" : " = "));
            IDSI_TRY(print_pattern(sig, index, &op->generators[i], text));
        }
        break;
    }
done:
    return st;
}

ids_status ids_signature_print_operation(ids_ctx *ctx, const ids_signature *signature, size_t index,
                                         char **text)
{
    idsi_text out;
    ids_status st = IDS_OK;
    if (ctx == NULL || signature == NULL || text == NULL) {
        return idsi_fail_arg(ctx, "context, signature or result");
    }
    idsi_text_init(&out, ctx);
    IDSI_TRY(idsi_check_index(ctx, "operation", index, signature->count));
    IDSI_TRY(print_operation(signature, (uint32_t)index, &out));
    IDSI_TRY(idsi_text_take(&out, text));
done:
    idsi_text_clear(&out);
    return st;
}

/* ---- presentations --------------------------------------------------------------------------- */

static ids_status print_identity(const ids_presentation *pres, const idsi_identity *identity,
                                 idsi_text *text)
{
    const char *const *letters = (const char *const *)identity->letters;
    ids_status st = IDS_OK;
    IDSI_TRY(idsi_text_puts(text, identity->role == IDS_ROLE_IDENTITY ? "identity" : "candidate"));
    IDSI_TRY(idsi_text_printf(text, identity->name[0] == '\0' ? "%s " : " %s: ", identity->name));
    if (identity->written.count > 0) {
        IDSI_TRY(idsi_poly_print(&identity->written, letters, text));
    } else {
        IDSI_TRY(idsi_tree_print(pres->sig, identity->trivial, letters, text));
    }
    IDSI_TRY(idsi_text_puts(text, " = "));
    if (identity->written.count > 0) {
        IDSI_TRY(idsi_text_puts(text, "0"));
    } else {
        IDSI_TRY(idsi_tree_print(pres->sig, identity->trivial, letters, text));
    }
    IDSI_TRY(idsi_text_puts(text, "\n"));
done:
    return st;
}

ids_status ids_presentation_print(ids_ctx *ctx, const ids_presentation *presentation, char **text)
{
    idsi_text out;
    ids_status st = IDS_OK;
    if (ctx == NULL || presentation == NULL || text == NULL) {
        return idsi_fail_arg(ctx, "context, presentation or result");
    }
    idsi_text_init(&out, ctx);
    for (size_t i = 0; i < presentation->sig->count; i++) {
        IDSI_TRY(idsi_text_puts(&out, "operation "));
        IDSI_TRY(print_operation(presentation->sig, (uint32_t)i, &out));
        IDSI_TRY(idsi_text_puts(&out, "\n"));
    }
    for (size_t i = 0; i < presentation->count; i++) {
        IDSI_TRY(print_identity(presentation, &presentation->list[i], &out));
    }
    for (size_t i = 0; i < presentation->model_count; i++) {
        IDSI_TRY(idsi_model_print(presentation->sig, &presentation->models[i], &out));
    }
    IDSI_TRY(idsi_text_take(&out, text));
done:
    idsi_text_clear(&out);
    return st;
}

ids_status ids_presentation_print_identity(ids_ctx *ctx, const ids_presentation *presentation,
                                           ids_role role, size_t index, ids_form form, char **text)
{
    const idsi_identity *identity = idsi_presentation_get(presentation, role, index);
    idsi_text out;
    ids_status st = IDS_OK;
    if (ctx == NULL || text == NULL || presentation == NULL ||
        (form != IDS_FORM_WRITTEN && form != IDS_FORM_LINEAR)) {
        return idsi_fail_arg(ctx, "context, presentation, form or result");
    }
    idsi_text_init(&out, ctx);
    IDSI_TRY(idsi_check_index(ctx, role == IDS_ROLE_CANDIDATE ? "candidate" : "identity", index,
                              ids_presentation_count(presentation, role)));
    if (form == IDS_FORM_WRITTEN) {
        IDSI_TRY(idsi_poly_print(&identity->written, (const char *const *)identity->letters, &out));
    } else {
        IDSI_TRY(idsi_poly_print(&identity->linear, NULL, &out));
    }
    IDSI_TRY(idsi_text_take(&out, text));
done:
    idsi_text_clear(&out);
    return st;
}
