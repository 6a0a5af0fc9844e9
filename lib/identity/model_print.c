/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Models as part of a presentation: access, equality, printing, freeing.
 */
#include <string.h>

#include "identity_private.h"

void idsi_model_clear(ids_ctx *ctx, idsi_model *model)
{
    for (size_t i = 0; i < model->count; i++) {
        idsi_realization *made = &model->list[i];
        for (size_t w = 0; w < made->count; w++) {
            mpq_clear(made->words[w].coefficient);
        }
        for (uint32_t k = 0; k < made->arity; k++) {
            idsi_free(ctx, made->letters[k]);
        }
        idsi_free(ctx, made->words);
        idsi_free(ctx, made->text);
    }
    idsi_free(ctx, model->list);
    idsi_free(ctx, model->name);
    idsi_free(ctx, model->file);
}

const idsi_realization *idsi_model_realization(const idsi_model *model, uint32_t op)
{
    for (size_t i = 0; i < model->count; i++) {
        if (model->list[i].op == op) {
            return &model->list[i];
        }
    }
    return NULL;
}

static bool same_realization(const idsi_realization *a, const idsi_realization *b)
{
    if (a->op != b->op || a->count != b->count || (a->text == NULL) != (b->text == NULL)) {
        return false;
    }
    for (size_t i = 0; i < a->count; i++) {
        if (memcmp(a->words[i].letter, b->words[i].letter, sizeof a->words[i].letter) != 0 ||
            mpq_equal(a->words[i].coefficient, b->words[i].coefficient) == 0) {
            return false;
        }
    }
    if (a->text == NULL) {
        return true;
    }
    for (uint32_t k = 0; k < a->arity; k++) {
        if (strcmp(a->letters[k], b->letters[k]) != 0) {
            return false;
        }
    }
    return strcmp(a->text, b->text) == 0;
}

bool idsi_model_equal(const idsi_model *a, const idsi_model *b)
{
    if (strcmp(a->name, b->name) != 0 || a->kind != b->kind || a->count != b->count ||
        (a->file != NULL && strcmp(a->file, b->file) != 0)) {
        return false;
    }
    for (size_t i = 0; i < a->count; i++) {
        if (!same_realization(&a->list[i], &b->list[i])) {
            return false;
        }
    }
    return true;
}

static ids_status print_words(const idsi_realization *made, idsi_text *text)
{
    ids_status st = IDS_OK;
    if (made->count == 0) {
        return idsi_text_puts(text, "0");
    }
    for (size_t i = 0; i < made->count; i++) {
        const idsi_word *word = &made->words[i];
        const bool negative = mpq_sgn(word->coefficient) < 0;
        if (i > 0) {
            IDSI_TRY(idsi_text_puts(text, negative ? " - " : " + "));
        } else if (negative) {
            IDSI_TRY(idsi_text_puts(text, "-"));
        }
        IDSI_TRY(idsi_coefficient_print(text, word->coefficient));
        for (uint32_t k = 0; k < made->arity; k++) {
            const uint8_t letter = word->letter[k];
            IDSI_TRY(idsi_text_printf(text, "%s%s%s", k > 0 ? " " : "",
                                      made->letters[letter & ~IDSI_STARRED],
                                      (letter & IDSI_STARRED) != 0 ? "'" : ""));
        }
    }
done:
    return st;
}

ids_status idsi_model_print(const ids_signature *sig, const idsi_model *model, idsi_text *text)
{
    ids_status st = IDS_OK;
    if (model->kind == IDS_MODEL_ALGEBRA) {
        return idsi_text_printf(text, "model %s algebra \"%s\"\n", model->name, model->file);
    }
    for (size_t i = 0; i < model->count; i++) {
        const idsi_realization *made = &model->list[i];
        idsi_token tree[IDS_MAX_ARITY + 1] = {idsi_node(made->op)};
        for (uint32_t k = 0; k < made->arity; k++) {
            tree[k + 1] = k + 1;
        }
        IDSI_TRY(idsi_text_printf(text, "model %s ", model->name));
        if (model->kind == IDS_MODEL_OVER) {
            IDSI_TRY(idsi_text_printf(text, "over \"%s\": ", model->file));
        } else {
            IDSI_TRY(idsi_text_puts(text, "associative: "));
        }
        IDSI_TRY(idsi_tree_print(sig, tree, (const char *const *)made->letters, text));
        IDSI_TRY(idsi_text_puts(text, " = "));
        if (model->kind == IDS_MODEL_OVER) {
            IDSI_TRY(idsi_text_puts(text, made->text));
        } else {
            IDSI_TRY(print_words(made, text));
        }
        IDSI_TRY(idsi_text_puts(text, "\n"));
    }
done:
    return st;
}
