/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the tests of the writer share: a sink that keeps all it gets, and tables in one call.
 */
#ifndef IDSPAN_RENDER_CAPTURE_H
#define IDSPAN_RENDER_CAPTURE_H

#include <string.h>

#include "render/render_private.h"
#include "support.h"

#define CAPTURE_BYTES 65536u

typedef struct capture {
    char text[CAPTURE_BYTES];
    size_t length;
    uint64_t calls;
    uint64_t fail_at; /* number of the call that fails, from 1; 0: none */
} capture;

static inline int capture_sink(void *user, const char *bytes, size_t length)
{
    capture *seen = user;

    seen->calls++;
    if (seen->calls == seen->fail_at) {
        return 1;
    }
    ck_assert_uint_lt(seen->length + length, CAPTURE_BYTES);
    memcpy(seen->text + seen->length, bytes, length);
    seen->length += length;
    seen->text[seen->length] = '\0';
    return 0;
}

/* Writes a table of `rows` rows, cells one after the other, and compares the whole of it. */
static inline void expect_table(ids_format format, const ids_column *columns, size_t count,
                                const char *const *cells, size_t rows, const char *const *notes,
                                const char *expected)
{
    static capture seen;
    ids_ctx *ctx = test_ctx();
    ids_writer *writer = NULL;

    memset(&seen, 0, sizeof seen);
    TEST_OK(ctx,
            ids_writer_create(ctx, format, "rank", columns, count, capture_sink, &seen, &writer));
    for (size_t i = 0; i < rows; i++) {
        TEST_OK(ctx, ids_writer_row(writer, cells + i * count));
    }
    for (size_t i = 0; notes != NULL && notes[i] != NULL; i += 2) {
        TEST_OK(ctx, ids_writer_note(writer, notes[i], notes[i + 1]));
    }
    TEST_OK(ctx, ids_writer_end(writer));
    ck_assert_str_eq(seen.text, expected);
    ids_writer_free(writer);
    test_ctx_free(ctx);
}

#endif
