/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Models over another presentation: operations as polynomials in its operations.
 *
 * The polynomial of an operation was kept as text. It is read as a candidate of a small
 * presentation that has the operations of the other one, with messages about the place where it
 * stands.
 */
#include <string.h>

#include "realize_private.h"

/* The text that is read: empty lines, the candidate in its line, the operations behind it. */
static ids_status compose(const ids_model *model, const idsi_realization *made, idsi_text *text)
{
    ids_status st = IDS_OK;
    char *operation = NULL;

    for (uint32_t i = 1; i < made->place.line; i++) {
        IDSI_TRY(idsi_text_puts(text, "\n"));
    }
    IDSI_TRY(idsi_text_puts(text, IDSI_PIECE_PREFIX));
    IDSI_TRY(idsi_text_append(text, model->pres->text + made->begin, made->end - made->begin));
    IDSI_TRY(idsi_text_puts(text, "\n"));
    for (size_t op = 0; op < model->base->sig->count; op++) {
        IDSI_TRY(ids_signature_print_operation(model->ctx, model->base->sig, op, &operation));
        IDSI_TRY(idsi_text_printf(text, "operation %s\n", operation));
        ids_string_free(model->ctx, operation);
        operation = NULL;
    }
done:
    ids_string_free(model->ctx, operation);
    return st;
}

static ids_status fail_letters(const ids_model *model, const idsi_realization *made)
{
    return idsi_presentation_fail(model->ctx, model->pres, IDS_ERR_DOMAIN, made->place,
                                  "each of the %u arguments of the operation must stand once in "
                                  "each term, and nothing else",
                                  made->arity);
}

/* Takes over a polynomial whose variables are numbered by name. */
static ids_status take_poly(const ids_model *model, const idsi_realization *made,
                            const idsi_identity *identity, idsi_poly *value)
{
    ids_status st = IDS_OK;
    idsi_token label[IDS_MAX_ARITY] = {0};
    const idsi_poly *poly = &identity->written;

    if (!identity->multilinear || identity->degree != made->arity) {
        return fail_letters(model, made);
    }
    for (uint32_t v = 0; v < made->arity; v++) {
        for (uint32_t i = 0; i < made->arity; i++) {
            label[v] = strcmp(identity->letters[v], made->letters[i]) == 0 ? i + 1 : label[v];
        }
        if (label[v] == 0) {
            return fail_letters(model, made);
        }
    }
    for (size_t t = 0; t < poly->count; t++) {
        IDSI_TRY(idsi_poly_append(value, poly->coefficients[t], poly->tokens + poly->start[t],
                                  poly->start[t + 1] - poly->start[t]));
    }
    for (size_t k = 0; poly->count > 0 && k < poly->start[poly->count]; k++) {
        if (!idsi_is_node(poly->tokens[k])) {
            value->tokens[k] = label[poly->tokens[k] - 1];
        }
    }
    /* Signatures are compared by address, and the text's own one ends here. */
    value->sig = model->base->sig;
    value->variables = made->arity;
    IDSI_TRY(idsi_poly_normalize(value));
done:
    return st;
}

static ids_status read_value(const ids_model *model, const idsi_realization *made, idsi_poly *value)
{
    ids_status st = IDS_OK;
    ids_presentation *small = NULL;
    const idsi_origin origin = {
        .pres = model->pres, .file = model->decl->file, .place = made->place};
    idsi_text text;

    if (strcmp(made->text, "0") == 0) {
        return IDS_OK;
    }
    idsi_text_init(&text, model->ctx);
    IDSI_TRY(compose(model, made, &text));
    IDSI_TRY(idsi_presentation_read_piece(model->ctx, text.data, text.length, &origin, &small));
    st = take_poly(model, made, &small->list[0], value);
done:
    ids_presentation_free(small);
    idsi_text_clear(&text);
    return st;
}

/* ---- symmetry -------------------------------------------------------------------------------- */

/* Adds sign times the polynomial with its arguments exchanged. */
static ids_status add_moved(const idsi_poly *value, const uint8_t *image, int sign, idsi_poly *sum)
{
    ids_status st = IDS_OK;
    idsi_token tree[2u * IDSI_MAX_IDENTITY_DEGREE];
    mpq_t coefficient;

    mpq_init(coefficient);
    for (size_t t = 0; t < value->count; t++) {
        const size_t begin = value->start[t];
        const size_t length = value->start[t + 1] - begin;
        for (size_t k = 0; k < length; k++) {
            const idsi_token token = value->tokens[begin + k];
            tree[k] = idsi_is_node(token) ? token : image[token - 1] + 1u;
        }
        mpq_set(coefficient, value->coefficients[t]);
        if (sign < 0) {
            mpq_neg(coefficient, coefficient);
        }
        IDSI_TRY(idsi_poly_append(sum, coefficient, tree, length));
    }
done:
    mpq_clear(coefficient);
    return st;
}

/* Whether an argument order multiplies the polynomial by its sign, modulo the identities. */
static ids_status check_order(ids_model *model, const idsi_realization *made, const uint8_t *image,
                              int sign)
{
    ids_status st = IDS_OK;
    static const uint8_t same[IDS_MAX_ARITY] = {0, 1, 2, 3, 4, 5, 6, 7};
    idsi_poly sum;
    bool zero = true;
    double error = 0;

    idsi_poly_init(&sum, model->ctx, model->base->sig);
    sum.variables = made->arity;
    IDSI_TRY(add_moved(&model->value[made->op], same, 1, &sum));
    IDSI_TRY(add_moved(&model->value[made->op], image, -sign, &sum));
    IDSI_TRY(idsi_poly_normalize(&sum));
    IDSI_TRY(idsi_base_is_zero(model->ctx, model->base, &sum, 0, &zero, &error));
    model->doubt += error;
    if (!zero) {
        st = idsi_presentation_fail(model->ctx, model->pres, IDS_ERR_DOMAIN, made->place,
                                    "the polynomial does not have the symmetry that the operation "
                                    "is declared with, not even by the identities of \"%.120s\"",
                                    model->decl->file);
    }
done:
    idsi_poly_clear(&sum);
    return st;
}

static ids_status check_symmetry(ids_model *model, const idsi_realization *made)
{
    ids_status st = IDS_OK;
    const idsi_group *group = &model->pres->sig->ops[made->op].group;
    uint8_t image[IDS_MAX_ARITY];

    if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        for (uint64_t e = 1; e < group->order; e++) {
            IDSI_TRY(check_order(model, made, group->elements[e].image, group->elements[e].sign));
        }
    } else if (group->symmetry != IDS_SYMMETRY_NONE) {
        for (uint32_t k = 0; k + 1 < made->arity; k++) {
            for (uint32_t i = 0; i < made->arity; i++) {
                image[i] = (uint8_t)(i == k ? k + 1 : i == k + 1 ? k : i);
            }
            IDSI_TRY(check_order(model, made, image,
                                 group->symmetry == IDS_SYMMETRY_ALTERNATING ? -1 : 1));
        }
    }
done:
    return st;
}

ids_status idsi_over_open(ids_model *model)
{
    ids_status st = IDS_OK;
    void *room = NULL;
    const size_t count = model->pres->sig->count;

    IDSI_TRY(idsi_alloc_zero(model->ctx, count * sizeof *model->value, &room));
    model->value = room;
    for (size_t op = 0; op < count; op++) {
        idsi_poly_init(&model->value[op], model->ctx, model->base->sig);
    }
    for (size_t i = 0; i < model->decl->count; i++) {
        const idsi_realization *made = &model->decl->list[i];
        IDSI_TRY(read_value(model, made, &model->value[made->op]));
        IDSI_TRY(check_symmetry(model, made));
    }
done:
    return st;
}

/* ---- trees ----------------------------------------------------------------------------------- */

static ids_status put_letter(idsi_poly *value, idsi_token label)
{
    mpq_t one;

    mpq_init(one);
    mpq_set_ui(one, 1, 1);
    ids_status st = idsi_poly_append(value, one, &label, 1);
    value->degree = 1;
    mpq_clear(one);
    return st;
}

static ids_status expand(const ids_model *model, const idsi_token **at, idsi_poly *value)
{
    ids_status st = IDS_OK;
    const idsi_token token = *(*at)++;
    idsi_poly arguments[IDS_MAX_ARITY];
    uint32_t begun = 0;

    if (!idsi_is_node(token)) {
        return put_letter(value, token);
    }
    const uint32_t op = idsi_node_op(token);
    const uint32_t arity = model->pres->sig->ops[op].arity;
    while (begun < arity) {
        idsi_poly_init(&arguments[begun++], model->ctx, model->base->sig);
        IDSI_TRY(expand(model, at, &arguments[begun - 1]));
    }
    st = idsi_poly_substitute(value, &model->value[op], arity, arguments);
done:
    for (uint32_t i = 0; i < begun; i++) {
        idsi_poly_clear(&arguments[i]);
    }
    return st;
}

ids_status idsi_over_tree(const ids_model *model, const idsi_token *tree, idsi_poly *value)
{
    const idsi_token *at = tree;
    return expand(model, &at, value);
}
