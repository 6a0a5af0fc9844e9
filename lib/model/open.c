/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Opening models: their files are brought by the caller, piece by piece.
 */
#include <string.h>

#include "realize_private.h"

void ids_model_free(ids_model *model)
{
    if (model != NULL) {
        for (size_t op = 0; model->value != NULL && op < model->pres->sig->count; op++) {
            idsi_poly_clear(&model->value[op]);
        }
        idsi_free(model->ctx, model->value);
        ids_algebra_free(model->algebra);
        ids_presentation_free(model->base);
        idsi_free(model->ctx, model);
    }
}

typedef struct arrival {
    idsi_text text;
    ids_status st;
} arrival;

static int take(void *user, const char *bytes, size_t length)
{
    arrival *a = user;
    a->st = a->st == IDS_OK ? idsi_text_append(&a->text, bytes, length) : a->st;
    return a->st == IDS_OK ? 0 : 1;
}

static ids_status load_file(ids_model *model, ids_load_fn load, void *load_user)
{
    ids_status st = IDS_OK;
    arrival a = {.st = IDS_OK};
    const char *file = model->decl->file;

    idsi_text_init(&a.text, model->ctx);
    IDSI_TRY(idsi_text_append(&a.text, "", 0));
    int refused = load == NULL ? 1 : load(load_user, file, take, &a);
    const ids_place place = {model->decl->line, model->decl->column};
    IDSI_TRY(a.st);
    if (refused != 0) {
        st = idsi_presentation_fail(model->ctx, model->pres, IDS_ERR_IO, place,
                                    "the file \"%.200s\" of the model %s cannot be read", file,
                                    model->decl->name);
        goto done;
    }
    if (model->decl->kind == IDS_MODEL_ALGEBRA) {
        IDSI_TRY(ids_algebra_read(model->ctx, a.text.data, a.text.length, file, &model->algebra));
        st = ids_algebra_match(model->ctx, model->algebra, model->pres->sig, model->operation);
        IDSI_TRY(idsi_presentation_place(model->ctx, model->pres, st, place));
    } else {
        IDSI_TRY(ids_presentation_read(model->ctx, a.text.data, a.text.length, file, &model->base));
        st = idsi_over_open(model);
    }
done:
    idsi_text_clear(&a.text);
    return st;
}

ids_status ids_model_open(ids_ctx *ctx, const ids_presentation *presentation, size_t index,
                          ids_load_fn load, void *load_user, ids_model **model)
{
    ids_status st = IDS_OK;
    ids_model *made = NULL;

    if (ctx == NULL || presentation == NULL || model == NULL) {
        return idsi_fail_arg(ctx, "context, presentation or result");
    }
    IDSI_TRY(idsi_check_index(ctx, "model", index, presentation->model_count));
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->pres = presentation;
    made->decl = &presentation->models[index];
    if (made->decl->kind != IDS_MODEL_ASSOCIATIVE) {
        IDSI_TRY(load_file(made, load, load_user));
    }
    *model = made;
    made = NULL;
done:
    ids_model_free(made);
    return st;
}
