/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Character data of XML, which is that of HTML too: markup escaped, what XML forbids replaced.
 */
#include <string.h>

#include "render_private.h"

ids_status idsi_xml_words(idsi_text *out, const char *text, size_t bytes, const char *kept)
{
    ids_status st = IDS_OK;
    const char *end = text + bytes;

    while (text < end) {
        uint32_t character = idsi_utf8_next(&text);
        const char *entity = character == '<'    ? "&lt;"
                             : character == '>'  ? "&gt;"
                             : character == '&'  ? "&amp;"
                             : character == '"'  ? "&quot;"
                             : character == '\'' ? "&#39;"
                                                 : NULL;
        if (entity != NULL) {
            IDSI_TRY(idsi_text_puts(out, entity));
        } else {
            bool control = character < 0x20 && strchr(kept, (int)character) == NULL;
            bool forbidden = control || character == 0xFFFE || character == 0xFFFF;
            IDSI_TRY(idsi_utf8_append(out, forbidden ? IDSI_BAD_CHARACTER : character));
        }
    }
done:
    return st;
}

ids_status idsi_xml_string(idsi_text *out, const char *text)
{
    return idsi_xml_words(out, text, strlen(text), "");
}
