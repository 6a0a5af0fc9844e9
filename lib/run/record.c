/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Records: the form of the files in a run folder.
 *
 *     idspan cell 1
 *     id: 5.3+2
 *     free: 10
 *     ...
 *     sha256: (of all bytes before this line, in hex)
 *
 * Lines "key: value" with printable ASCII in them, or UTF-8 in values; each key once. A record is
 * read as a whole into its own copy, in which keys and values become strings.
 */
#include <stdio.h>
#include <string.h>

#include "run_private.h"

#define SUM_KEY "sha256: "
#define SUM_LINE (sizeof SUM_KEY - 1 + IDSI_SHA256_HEX) /* with the line end for the NUL */

/* ---- writing ----------------------------------------------------------------------------- */

ids_status idsi_record_begin(ids_ctx *ctx, const char *kind, idsi_text *text)
{
    idsi_text_init(text, ctx);
    return idsi_text_printf(text, "idspan %s 1\n", kind);
}

/* A value is one line of text: what would break the form becomes a blank. */
ids_status idsi_record_put(idsi_text *text, const char *key, const char *value)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_printf(text, "%s: ", key));
    for (const char *at = value; *at != '\0'; at++) {
        bool plain = (unsigned char)*at >= 0x20 && *at != 0x7f;
        IDSI_TRY(idsi_text_append(text, plain ? at : " ", 1));
    }
    IDSI_TRY(idsi_text_puts(text, "\n"));
done:
    return st;
}

ids_status idsi_record_put_number(idsi_text *text, const char *key, uint64_t value)
{
    return idsi_text_printf(text, "%s: %llu\n", key, (unsigned long long)value);
}

ids_status idsi_record_end(idsi_text *text)
{
    char sum[IDSI_SHA256_HEX];

    idsi_sha256(text->data, text->length, sum);
    return idsi_text_printf(text, SUM_KEY "%s\n", sum);
}

/* ---- reading ----------------------------------------------------------------------------- */

void idsi_record_clear(idsi_record *record)
{
    idsi_free(record->ctx, record->text);
    record->text = NULL;
    record->count = 0;
}

/* The checksum is asked for first: what it vouches for was written by this file. */
static const char *check_sum(const char *text, size_t length)
{
    char sum[IDSI_SHA256_HEX];

    if (length < SUM_LINE || text[length - 1] != '\n' ||
        memcmp(text + length - SUM_LINE, SUM_KEY, sizeof SUM_KEY - 1) != 0) {
        return "the file is cut short";
    }
    idsi_sha256(text, length - SUM_LINE, sum);
    if (memcmp(text + length - IDSI_SHA256_HEX, sum, IDSI_SHA256_HEX - 1) != 0) {
        return "the checksum does not fit the contents";
    }
    return NULL;
}

/* Cuts "key: value" at `line` into two strings; false when it is not in that form. */
static bool cut_line(idsi_record *record, char *line)
{
    char *colon = strstr(line, ": ");

    if (colon == NULL || colon == line || record->count == IDSI_RECORD_LINES) {
        return false;
    }
    *colon = '\0';
    if (idsi_record_get(record, line) != NULL) {
        return false;
    }
    record->key[record->count] = line;
    record->value[record->count] = colon + 2;
    record->count++;
    return true;
}

ids_status idsi_record_read(ids_ctx *ctx, const char *kind, const char *text, size_t length,
                            idsi_record *record, const char **wrong)
{
    ids_status st = IDS_OK;
    char head[64] = "";
    void *copy = NULL;
    char *line = NULL;

    *record = (idsi_record){.ctx = ctx};
    *wrong = check_sum(text, length);
    if (*wrong != NULL) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_alloc(ctx, length + 1, &copy));
    record->text = copy;
    memcpy(record->text, text, length);
    record->text[length - SUM_LINE] = '\0';
    snprintf(head, sizeof head, "idspan %s 1\n", kind);
    if (memchr(text, '\0', length) != NULL || strncmp(text, head, strlen(head)) != 0) {
        *wrong = "it is not such a file, or of another version";
        return IDS_OK;
    }
    line = record->text + strlen(head);
    while (*line != '\0') {
        char *end = strchr(line, '\n');
        if (end != NULL) {
            *end = '\0';
        }
        if (end == NULL || !cut_line(record, line)) {
            *wrong = "a line is not in the form \"key: value\"";
            return IDS_OK;
        }
        line = end + 1;
    }
done:
    return st;
}

const char *idsi_record_get(const idsi_record *record, const char *key)
{
    for (size_t i = 0; i < record->count; i++) {
        if (strcmp(record->key[i], key) == 0) {
            return record->value[i];
        }
    }
    return NULL;
}

bool idsi_record_get_number(const idsi_record *record, const char *key, uint64_t most,
                            uint64_t *number)
{
    const char *at = idsi_record_get(record, key);
    uint64_t value = 0;

    if (at == NULL || *at == '\0') {
        return false;
    }
    for (; *at != '\0'; at++) {
        uint64_t digit = (uint64_t)(*at - '0');
        if (*at < '0' || *at > '9' || !idsi_mul_u64(value, 10, &value) ||
            !idsi_add_u64(value, digit, &value)) {
            return false;
        }
    }
    *number = value;
    return value <= most;
}
