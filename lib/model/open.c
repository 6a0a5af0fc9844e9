/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Opening models.
 */
#include <string.h>

#include "realize_private.h"

void ids_model_free(ids_model *model)
{
    if (model != NULL) {
        idsi_free(model->ctx, model);
    }
}

ids_status ids_model_open(ids_ctx *ctx, const ids_presentation *presentation, size_t index,
                          ids_load_fn load, void *load_user, ids_model **model)
{
    ids_status st = IDS_OK;
    ids_model *made = NULL;

    if (ctx == NULL || presentation == NULL || model == NULL ||
        index >= presentation->model_count) {
        return idsi_fail_arg(ctx, "context, presentation, model or result");
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    *made = (ids_model){.ctx = ctx, .pres = presentation, .decl = &presentation->models[index]};
    if (made->decl->kind != IDS_MODEL_ASSOCIATIVE) {
        (void)load;
        (void)load_user;
        st = idsi_fail(ctx, IDS_ERR_UNABLE, "this version opens models in associative words only");
        goto done;
    }
    *model = made;
    made = NULL;
done:
    ids_model_free(made);
    return st;
}
