/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * A growing text. Invariant: whenever `data` is not NULL, length < capacity and
 * data[length] == 0, so that the text can be read as a string at any time.
 */
#include "core_private.h"

#include <stdio.h>
#include <string.h>

void idsi_text_init(idsi_text *text, ids_ctx *ctx)
{
    memset(text, 0, sizeof *text);
    text->ctx = ctx;
}

void idsi_text_clear(idsi_text *text)
{
    idsi_free(text->ctx, text->data);
    idsi_text_init(text, text->ctx);
}

/* Makes room for n more bytes and the final NUL. */
static ids_status reserve(idsi_text *text, size_t n)
{
    size_t needed = 0;
    size_t wanted = text->capacity < 32 ? 64 : text->capacity;
    ids_status st = IDS_OK;

    if (__builtin_add_overflow(text->length, n, &needed) || needed == SIZE_MAX) {
        return idsi_fail(text->ctx, IDS_ERR_LIMIT, "a text of that size cannot be addressed");
    }
    needed++;
    if (needed <= text->capacity) {
        return IDS_OK;
    }
    while (wanted < needed) {
        wanted = wanted > SIZE_MAX / 2 ? needed : 2 * wanted;
    }
    st = idsi_resize_array(text->ctx, wanted, 1, &text->data);
    if (st == IDS_OK) {
        text->capacity = wanted;
    }
    return st;
}

ids_status idsi_text_append(idsi_text *text, const char *bytes, size_t n)
{
    ids_status st = reserve(text, n);

    if (st == IDS_OK) {
        IDSI_ASSERT(text->data != NULL);
        if (n > 0) {
            memcpy(text->data + text->length, bytes, n);
        }
        text->length += n;
        text->data[text->length] = '\0';
    }
    return st;
}

ids_status idsi_text_puts(idsi_text *text, const char *string)
{
    return idsi_text_append(text, string, strlen(string));
}

ids_status idsi_text_printf(idsi_text *text, const char *format, ...)
{
    ids_status st = IDS_OK;
    va_list arguments;
    int needed = 0;

    va_start(arguments, format);
    needed = vsnprintf(NULL, 0, format, arguments);
    va_end(arguments);
    if (needed < 0) {
        return idsi_fail(text->ctx, IDS_ERR_INTERNAL, "a text could not be formatted");
    }
    IDSI_TRY(reserve(text, (size_t)needed));
    IDSI_ASSERT(text->data != NULL);
    va_start(arguments, format);
    (void)vsnprintf(text->data + text->length, (size_t)needed + 1, format, arguments);
    va_end(arguments);
    text->length += (size_t)needed;
done:
    return st;
}

ids_status idsi_text_take(idsi_text *text, char **out)
{
    ids_status st = IDS_OK;

    if (text->data == NULL) {
        IDSI_TRY(idsi_text_append(text, "", 0));
    }
    *out = text->data;
    idsi_text_init(text, text->ctx);
done:
    return st;
}
