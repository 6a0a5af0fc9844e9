/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Presentations: reading as a whole, access, equality.
 *
 * A presentation is complete and immutable once ids_presentation_read() has handed it out; until
 * then its list grows, and an identity that is half built is in the list so that one function
 * frees everything.
 */
#include <string.h>

#include "notation_private.h"

static void identity_clear(ids_ctx *ctx, idsi_identity *identity)
{
    for (uint32_t i = 0; identity->letters != NULL && i < identity->written.variables; i++) {
        idsi_free(ctx, identity->letters[i]);
    }
    idsi_free(ctx, identity->letters);
    idsi_free(ctx, identity->name);
    idsi_poly_clear(&identity->written);
    idsi_poly_clear(&identity->linear);
}

void ids_presentation_free(ids_presentation *presentation)
{
    if (presentation == NULL) {
        return;
    }
    ids_ctx *ctx = presentation->ctx;
    for (size_t i = 0; i < presentation->count; i++) {
        identity_clear(ctx, &presentation->list[i]);
    }
    for (size_t i = 0; i < presentation->model_count; i++) {
        idsi_model_clear(ctx, &presentation->models[i]);
    }
    idsi_free(ctx, presentation->source);
    idsi_free(ctx, presentation->text);
    idsi_free(ctx, presentation->models);
    idsi_free(ctx, presentation->list);
    ids_signature_free(presentation->sig);
    idsi_free(ctx, presentation);
}

/* ---- reading --------------------------------------------------------------------------------- */

void idsi_reader_clear(idsi_reader *reader)
{
    for (size_t i = 0; i < reader->operation_count; i++) {
        idsi_declared_clear(reader->ctx, &reader->operations[i]);
    }
    for (size_t i = 0; i < reader->definition_count; i++) {
        idsi_value_clear(&reader->definitions[i].body);
    }
    idsi_free(reader->ctx, reader->operations);
    idsi_free(reader->ctx, reader->definitions);
    idsi_free(reader->ctx, reader->lexemes);
    ids_presentation_free(reader->presentation);
}

ids_status idsi_reader_signature(idsi_reader *reader, ids_signature **sig)
{
    ids_operation *list = NULL;
    ids_status st = IDS_OK;
    if (reader->operation_count == 0) {
        if (reader->lexeme_count == 0) {
            reader->lexemes[0] = (idsi_lexeme){.kind = IDSI_LEX_END, .line = 1, .column = 1};
        }
        const bool mistyped = idsi_reader_nearest(reader, 0, idsi_statement_words, 1) != NULL;
        return idsi_reader_fail(reader, IDS_ERR_PARSE, 0,
                                "no operation is declared; expected a line such as: "
                                "operation a*b commutative%s",
                                mistyped ? " (did you mean 'operation'?)" : "");
    }
    IDSI_TRY(idsi_alloc_array(reader->ctx, reader->operation_count, sizeof *list, &list));
    for (size_t i = 0; i < reader->operation_count; i++) {
        list[i] = reader->operations[i].operation;
    }
    IDSI_TRY(ids_signature_create(reader->ctx, list, reader->operation_count, sig));
done:
    idsi_free(reader->ctx, list);
    return st;
}

ids_status ids_presentation_read(ids_ctx *ctx, const char *text, size_t length, const char *source,
                                 ids_presentation **presentation)
{
    return idsi_presentation_read(ctx, text, length, source, false, 0, presentation);
}

/* Keeps what later messages about the presentation show. */
static ids_status keep_source(const idsi_reader *reader, ids_presentation *pres)
{
    ids_status st = IDS_OK;
    const size_t length = strlen(reader->source);
    IDSI_TRY(idsi_alloc_array(reader->ctx, length + 1, 1, &pres->source));
    memcpy(pres->source, reader->source, length + 1);
    IDSI_TRY(idsi_alloc_array(reader->ctx, reader->length + 1, 1, &pres->text));
    memcpy(pres->text, reader->text, reader->length);
    pres->length = reader->length;
done:
    return st;
}

static ids_status read_text(idsi_reader *reader, ids_presentation **presentation)
{
    ids_ctx *ctx = reader->ctx;
    ids_status st = IDS_OK;
    if (ctx == NULL || reader->text == NULL || presentation == NULL) {
        return idsi_fail_arg(ctx, "context, text or result");
    }
    if (reader->length >= UINT32_MAX) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "a presentation of more than 4 GiB");
    }
    reader->defining = SIZE_MAX;
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *reader->presentation, &reader->presentation));
    reader->presentation->ctx = ctx;
    IDSI_TRY(idsi_reader_lex(reader));
    IDSI_TRY(idsi_reader_group(reader));
    IDSI_TRY(idsi_reader_signature(reader, &reader->presentation->sig));
    IDSI_TRY(idsi_reader_statements(reader));
    IDSI_TRY(keep_source(reader, reader->presentation));
    *presentation = reader->presentation;
    reader->presentation = NULL;
done:
    idsi_reader_clear(reader);
    return st;
}

ids_status idsi_presentation_read(ids_ctx *ctx, const char *text, size_t length, const char *source,
                                  bool operations_follow, size_t hidden,
                                  ids_presentation **presentation)
{
    idsi_reader reader = {.ctx = ctx,
                          .text = text,
                          .length = length,
                          .source = source == NULL ? "input" : source,
                          .operations_follow = operations_follow,
                          .hidden = hidden};
    return read_text(&reader, presentation);
}

ids_status idsi_presentation_read_piece(ids_ctx *ctx, const char *text, size_t length,
                                        const idsi_origin *origin, ids_presentation **piece)
{
    idsi_reader reader = {.ctx = ctx,
                          .text = text,
                          .length = length,
                          .source = origin->pres->source,
                          .operations_follow = true,
                          .origin = origin};
    return read_text(&reader, piece);
}

/* ---- access ---------------------------------------------------------------------------------- */

const ids_signature *ids_presentation_signature(const ids_presentation *presentation)
{
    return presentation == NULL ? NULL : presentation->sig;
}

size_t ids_presentation_count(const ids_presentation *presentation, ids_role role)
{
    size_t count = 0;
    for (size_t i = 0; presentation != NULL && i < presentation->count; i++) {
        count += presentation->list[i].role == role;
    }
    return count;
}

const idsi_identity *idsi_presentation_get(const ids_presentation *pres, ids_role role,
                                           size_t index)
{
    for (size_t i = 0; pres != NULL && i < pres->count; i++) {
        if (pres->list[i].role != role) {
            continue;
        }
        if (index == 0) {
            return &pres->list[i];
        }
        index--;
    }
    return NULL;
}

ids_status ids_presentation_info(const ids_presentation *presentation, ids_role role, size_t index,
                                 ids_identity_info *info)
{
    const idsi_identity *identity = idsi_presentation_get(presentation, role, index);
    if (identity == NULL || info == NULL) {
        return IDS_ERR_ARG;
    }
    *info = (ids_identity_info){.name = identity->name,
                                .degree = identity->degree,
                                .line = identity->line,
                                .terms = identity->written.count,
                                .linear_terms = identity->linear.count,
                                .multilinear = identity->multilinear};
    return IDS_OK;
}

size_t ids_presentation_model_count(const ids_presentation *presentation)
{
    return presentation == NULL ? 0 : presentation->model_count;
}

ids_status ids_presentation_model(const ids_presentation *presentation, size_t index,
                                  ids_model_info *info)
{
    if (presentation == NULL || info == NULL || index >= presentation->model_count) {
        return IDS_ERR_ARG;
    }
    const idsi_model *model = &presentation->models[index];
    *info = (ids_model_info){.name = model->name,
                             .kind = model->kind,
                             .file = model->file == NULL ? "" : model->file,
                             .line = model->line};
    return IDS_OK;
}

/* ---- equality -------------------------------------------------------------------------------- */

static bool has_element(const idsi_group *group, const ids_signed_order *order)
{
    for (uint64_t e = 0; e < group->order; e++) {
        if (group->elements[e].sign == order->sign &&
            memcmp(group->elements[e].image, order->image, group->arity) == 0) {
            return true;
        }
    }
    return false;
}

/* Groups of the same order are the same when one has the generators of the other. */
static bool same_operation(const idsi_op *a, const idsi_op *b)
{
    if (a->notation != b->notation || a->arity != b->arity || strcmp(a->open, b->open) != 0 ||
        a->group.symmetry != b->group.symmetry || a->group.order != b->group.order) {
        return false;
    }
    for (size_t i = 0; i < a->generator_count; i++) {
        if (!has_element(&b->group, &a->generators[i])) {
            return false;
        }
    }
    return true;
}

static bool same_identity(const idsi_identity *a, const idsi_identity *b)
{
    return a->role == b->role && a->degree == b->degree && strcmp(a->name, b->name) == 0 &&
           idsi_poly_equal(&a->written, &b->written);
}

bool idsi_signature_equal(const ids_signature *a, const ids_signature *b)
{
    if (a->count != b->count) {
        return false;
    }
    for (size_t i = 0; i < a->count; i++) {
        if (!same_operation(&a->ops[i], &b->ops[i])) {
            return false;
        }
    }
    return true;
}

bool ids_presentation_equal(const ids_presentation *a, const ids_presentation *b)
{
    if (a == NULL || b == NULL) {
        return a == b;
    }
    if (a->count != b->count || a->model_count != b->model_count ||
        !idsi_signature_equal(a->sig, b->sig)) {
        return false;
    }
    for (size_t i = 0; i < a->count; i++) {
        if (!same_identity(&a->list[i], &b->list[i])) {
            return false;
        }
    }
    for (size_t i = 0; i < a->model_count; i++) {
        if (!idsi_model_equal(&a->models[i], &b->models[i])) {
            return false;
        }
    }
    return true;
}
