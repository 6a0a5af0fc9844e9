/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Counterexamples as algebra files; the comments are described in certificate_private.h.
 */
#include <inttypes.h>
#include <string.h>

#include "certificate_private.h"
#include "counterexample_private.h"

/* Every line of a text behind the comment sign. */
static ids_status put_comment(idsi_text *out, const char *text)
{
    ids_status st = IDS_OK;

    while (*text != '\0') {
        const size_t length = strcspn(text, "\n");
        IDSI_TRY(idsi_text_puts(out, IDSI_COMMENT));
        IDSI_TRY(idsi_text_append(out, text, length));
        IDSI_TRY(idsi_text_puts(out, "\n"));
        text += length + (text[length] == '\n');
    }
done:
    return st;
}

/* x = e1 + 2*e2 - e3 */
static ids_status put_value(const ids_counterexample *made, uint32_t v, idsi_text *out)
{
    ids_status st = IDS_OK;
    const uint32_t n = made->algebra->dimension;
    const int64_t *value = made->values + (size_t)v * n;
    bool any = false;

    IDSI_TRY(idsi_text_printf(out, "%s = ", made->claim->letters[v]));
    for (uint32_t i = 0; i < n; i++) {
        if (value[i] == 0) {
            continue;
        }
        const int64_t size = value[i] < 0 ? -value[i] : value[i];
        IDSI_TRY(idsi_text_puts(out, value[i] < 0 ? (any ? " - " : "-") : any ? " + " : ""));
        if (size != 1) {
            IDSI_TRY(idsi_text_printf(out, "%" PRId64 "*", size));
        }
        IDSI_TRY(idsi_text_puts(out, made->algebra->names[i]));
        any = true;
    }
    if (!any) {
        st = idsi_text_puts(out, "0");
    }
done:
    return st;
}

static ids_status put_head(const ids_counterexample *made, idsi_text *out)
{
    ids_status st = IDS_OK;
    char *presentation = NULL;
    const char *name = made->claim->name;

    IDSI_TRY(idsi_write_presentation(out->ctx, made->pres, made->claim, &presentation));
    IDSI_TRY(idsi_text_puts(out, IDSI_COUNTEREXAMPLE_HEADER "\n"));
    IDSI_TRY(put_comment(out, IDSI_BEGIN_PRESENTATION));
    IDSI_TRY(put_comment(out, presentation));
    IDSI_TRY(put_comment(out, IDSI_END_PRESENTATION));
    IDSI_TRY(idsi_text_printf(out, IDSI_COMMENT "claim%s%s\n" IDSI_COMMENT "degree %u\n",
                              name[0] == '\0' ? "" : " ", name, made->claim->degree));
    IDSI_TRY(idsi_text_puts(out, IDSI_COMMENT IDSI_FAILS_AT));
    for (uint32_t v = 0; v < made->claim->written.variables; v++) {
        IDSI_TRY(idsi_text_puts(out, v == 0 ? "" : ", "));
        IDSI_TRY(put_value(made, v, out));
    }
    IDSI_TRY(idsi_text_puts(out, "\n"));
done:
    ids_string_free(out->ctx, presentation);
    return st;
}

ids_status idsi_counterexample_text(const ids_counterexample *made, idsi_text *out)
{
    ids_status st = IDS_OK;
    char *table = NULL;

    IDSI_TRY(put_head(made, out));
    IDSI_TRY(ids_algebra_print(out->ctx, made->algebra, &table));
    IDSI_TRY(idsi_text_puts(out, table));
done:
    ids_string_free(out->ctx, table);
    return st;
}

ids_status ids_counterexample_write(ids_ctx *ctx, const ids_counterexample *counterexample,
                                    ids_sink_fn sink, void *sink_user)
{
    ids_status st = IDS_OK;
    idsi_text out;

    if (ctx == NULL || counterexample == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, counterexample or sink");
    }
    idsi_text_init(&out, ctx);
    IDSI_TRY(idsi_counterexample_text(counterexample, &out));
    IDSI_TRY(idsi_write_end(&out, IDSI_COMMENT, sink, sink_user));
done:
    idsi_text_clear(&out);
    return st;
}
