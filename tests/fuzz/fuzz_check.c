/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The checker on any bytes: once as they are, and once with the last line replaced by one with the
 * right mark, so that what lies behind the mark is reached. Whatever it says, it must be safe; work
 * is bounded by cancelling after a number of polls.
 */
#include <inttypes.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "answer/certificate_private.h"

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static void require(int condition)
{
    if (!condition) {
        abort();
    }
}

static int stop(void *user, const ids_progress *progress)
{
    unsigned *left = user;

    (void)progress;
    if (*left > 0) {
        *left -= 1;
    }
    return *left == 0;
}

static void check(const char *text, size_t size)
{
    unsigned left = 20; /* calls of the hook, about ten a second */
    const ids_ctx_options options = {.struct_size = sizeof options,
                                     .byte_budget = 64u << 20,
                                     .progress = stop,
                                     .progress_user = &left};
    ids_check_report report = {0};
    ids_ctx *ctx = NULL;

    if (ids_ctx_create(&options, &ctx) != IDS_OK) {
        return;
    }
    const ids_status st = ids_certificate_check(ctx, text, size, "fuzz", &report);
    require(st != IDS_ERR_INTERNAL && st != IDS_ERR_ARG);
    require(st == IDS_OK || ids_ctx_message(ctx)[0] != '\0');
    require(ids_ctx_memory(ctx).live == 0);
    ids_ctx_free(ctx);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    const char *text = (const char *)data;
    const char *prefix =
        size > 2 && memcmp(text, IDSI_COMMENT, strlen(IDSI_COMMENT)) == 0 ? IDSI_COMMENT : "";
    size_t length = size;
    char mark[32];

    check(text, size);
    while (length > 0 && text[length - 1] == '\n') {
        length--;
    }
    while (length > 0 && text[length - 1] != '\n') {
        length--;
    }
    (void)snprintf(mark, sizeof mark, "%send %016" PRIx64 "\n", prefix,
                   idsi_certificate_mark(text, length));
    char *whole = malloc(length + strlen(mark));
    if (whole != NULL) {
        memcpy(whole, text, length);
        memcpy(whole + length, mark, strlen(mark));
        check(whole, length + strlen(mark));
        free(whole);
    }
    return 0;
}
