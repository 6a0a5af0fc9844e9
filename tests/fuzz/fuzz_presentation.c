/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The reader of presentations. Whatever is read must print as text that reads back to the same;
 * whatever is refused must be explained, and leave nothing behind.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/identity.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static void wrong(const char *what)
{
    fprintf(stderr, "%s\n", what);
    abort();
}

/* Expansions of long sums are not what is looked for: a call is stopped after some time. */
static int stop(void *user, const ids_progress *progress)
{
    unsigned *calls = user;

    (void)progress;
    return ++*calls > 20;
}

static void print_identities(ids_ctx *ctx, const ids_presentation *pres, ids_role role)
{
    for (size_t i = 0; i < ids_presentation_count(pres, role); i++) {
        ids_identity_info info;
        if (ids_presentation_info(pres, role, i, &info) != IDS_OK) {
            wrong("an identity without information");
        }
        for (ids_form form = IDS_FORM_WRITTEN; form <= IDS_FORM_LINEAR; form++) {
            char *text = NULL;
            ids_status st = ids_presentation_print_identity(ctx, pres, role, i, form, &text);
            if (st == IDS_OK && (info.linear_terms == 0) != (strcmp(text, "0") == 0) &&
                form == IDS_FORM_LINEAR) {
                wrong("terms of 0, or none of another polynomial");
            }
            ids_string_free(ctx, text);
        }
    }
}

static void read_again(ids_ctx *ctx, const ids_presentation *pres)
{
    char *text = NULL;
    ids_presentation *again = NULL;
    ids_status st = ids_presentation_print(ctx, pres, &text);

    if (st == IDS_OK) {
        st = ids_presentation_read(ctx, text, strlen(text), "again", &again);
        if (st != IDS_OK && st != IDS_ERR_LIMIT && st != IDS_ERR_CANCELLED) {
            fprintf(stderr, "%s\n%s\n", text, ids_ctx_message(ctx));
            wrong("what was printed is not read");
        }
        if (st == IDS_OK && !ids_presentation_equal(pres, again)) {
            fprintf(stderr, "%s\n", text);
            wrong("what was printed reads as something else");
        }
    } else if (st != IDS_ERR_LIMIT) {
        wrong("a presentation is not printed");
    }
    ids_presentation_free(again);
    ids_string_free(ctx, text);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    unsigned calls = 0;
    ids_ctx_options options = {.struct_size = sizeof options,
                               .byte_budget = 16u << 20,
                               .progress = stop,
                               .progress_user = &calls};
    ids_ctx *ctx = NULL;
    ids_presentation *pres = NULL;

    if (ids_ctx_create(&options, &ctx) != IDS_OK) {
        return 0;
    }
    if (ids_presentation_read(ctx, (const char *)data, size, NULL, &pres) == IDS_OK) {
        print_identities(ctx, pres, IDS_ROLE_IDENTITY);
        print_identities(ctx, pres, IDS_ROLE_CANDIDATE);
        read_again(ctx, pres);
    } else if (ids_ctx_message(ctx)[0] == '\0' || pres != NULL) {
        wrong("refused without a word, or with an output");
    }
    ids_presentation_free(pres);
    if (ids_ctx_memory(ctx).live != 0) {
        wrong("memory is left");
    }
    ids_ctx_free(ctx);
    return 0;
}
