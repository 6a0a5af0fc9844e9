/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The reader of algebra files on any bytes. What is read must be printed, read again as the same
 * algebra, and printed the same.
 */
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/algebra.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static void require(int condition)
{
    if (!condition) {
        abort();
    }
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    const ids_ctx_options options = {.struct_size = sizeof options, .byte_budget = 64u << 20};
    ids_ctx *ctx = NULL;
    ids_algebra *algebra = NULL;
    ids_algebra *again = NULL;
    char *text = NULL;
    char *second = NULL;

    if (ids_ctx_create(&options, &ctx) != IDS_OK) {
        return 0;
    }
    const ids_status st = ids_algebra_read(ctx, (const char *)data, size, "fuzz", &algebra);
    if (st == IDS_OK) {
        if (ids_algebra_print(ctx, algebra, &text) == IDS_OK) {
            require(ids_algebra_read(ctx, text, strlen(text), "printed", &again) == IDS_OK);
            require(ids_algebra_equal(algebra, again));
            require(ids_algebra_print(ctx, again, &second) == IDS_OK);
            require(strcmp(text, second) == 0);
        }
    } else {
        require(st != IDS_ERR_INTERNAL && algebra == NULL);
        require(ids_ctx_message(ctx)[0] != '\0');
    }
    ids_string_free(ctx, text);
    ids_string_free(ctx, second);
    ids_algebra_free(algebra);
    ids_algebra_free(again);
    require(ids_ctx_memory(ctx).live == 0);
    ids_ctx_free(ctx);
    return 0;
}
