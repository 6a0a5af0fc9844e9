/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * UTF-8: reading characters one by one, and how wide a terminal shows them.
 *
 * Knows nothing of tables. The reader never fails: a byte that cannot be part of a character
 * (stray continuation, overlong form, surrogate, beyond U+10FFFF, cut off) counts as one
 * replacement character, so that every output is valid UTF-8 whatever comes in.
 * The width table lists ranges, not single characters; it follows the wide and combining
 * blocks of Unicode Standard Annex 11 closely enough for aligned columns.
 */
#include "render_private.h"

typedef struct range {
    uint32_t first;
    uint32_t last;
} range;

static const range combining[] = {
    {0x0300, 0x036F}, {0x0483, 0x0489}, {0x0591, 0x05BD}, {0x064B, 0x065F}, {0x1AB0, 0x1AFF},
    {0x1DC0, 0x1DFF}, {0x200B, 0x200F}, {0x20D0, 0x20FF}, {0xFE00, 0xFE0F}, {0xFE20, 0xFE2F},
};

static const range wide[] = {
    {0x1100, 0x115F},   {0x2E80, 0x303E},   {0x3041, 0xA4CF},   {0xAC00, 0xD7A3},
    {0xF900, 0xFAFF},   {0xFE30, 0xFE6F},   {0xFF00, 0xFF60},   {0xFFE0, 0xFFE6},
    {0x1F300, 0x1F64F}, {0x1F900, 0x1F9FF}, {0x20000, 0x3FFFD},
};

static bool in_ranges(const range *list, size_t count, uint32_t character)
{
    for (size_t i = 0; i < count; i++) {
        if (character >= list[i].first && character <= list[i].last) {
            return true;
        }
    }
    return false;
}

uint32_t idsi_utf8_next(const char **text)
{
    static const uint32_t least[4] = {0, 0x80, 0x800, 0x10000};
    const unsigned char *at = (const unsigned char *)*text;
    uint32_t character = at[0];
    size_t more = 0;

    IDSI_ASSERT(at[0] != 0);
    if (character >= 0xF0 && character < 0xF8) {
        more = 3;
        character &= 0x07;
    } else if (character >= 0xE0 && character < 0xF0) {
        more = 2;
        character &= 0x0F;
    } else if (character >= 0xC0 && character < 0xE0) {
        more = 1;
        character &= 0x1F;
    } else if (character >= 0x80) {
        *text += 1;
        return IDSI_BAD_CHARACTER;
    }
    for (size_t i = 1; i <= more; i++) {
        /* The final NUL is no continuation byte, so this never reads past it. */
        if ((at[i] & 0xC0) != 0x80) {
            *text += 1;
            return IDSI_BAD_CHARACTER;
        }
        character = (character << 6) | (at[i] & 0x3Fu);
    }
    if (character < least[more] || character > 0x10FFFF ||
        (character >= 0xD800 && character <= 0xDFFF)) {
        *text += 1;
        return IDSI_BAD_CHARACTER;
    }
    *text += more + 1;
    return character;
}

ids_status idsi_utf8_append(idsi_text *text, uint32_t character)
{
    char bytes[4] = {0};
    size_t n = 0;

    if (character < 0x80) {
        bytes[n++] = (char)character;
    } else if (character < 0x800) {
        bytes[n++] = (char)(0xC0 | (character >> 6));
        bytes[n++] = (char)(0x80 | (character & 0x3F));
    } else if (character < 0x10000) {
        bytes[n++] = (char)(0xE0 | (character >> 12));
        bytes[n++] = (char)(0x80 | ((character >> 6) & 0x3F));
        bytes[n++] = (char)(0x80 | (character & 0x3F));
    } else {
        bytes[n++] = (char)(0xF0 | (character >> 18));
        bytes[n++] = (char)(0x80 | ((character >> 12) & 0x3F));
        bytes[n++] = (char)(0x80 | ((character >> 6) & 0x3F));
        bytes[n++] = (char)(0x80 | (character & 0x3F));
    }
    return idsi_text_append(text, bytes, n);
}

size_t idsi_utf8_width(const char *text)
{
    size_t width = 0;

    while (*text != '\0') {
        uint32_t character = idsi_utf8_next(&text);
        if (in_ranges(wide, sizeof wide / sizeof wide[0], character)) {
            width += 2;
        } else if (!in_ranges(combining, sizeof combining / sizeof combining[0], character)) {
            width += 1;
        }
    }
    return width;
}
