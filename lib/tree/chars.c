/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Characters: UTF-8 and the few classes the notation tells apart.
 *
 * The classes are ranges of code points, not the whole Unicode database: a presentation needs
 * letters for names and marks for operations, and any printable character is one or the other.
 * Characters that a reader of the file could not see, or could mistake for another blank, are
 * refused.
 */
#include "tree_private.h"

typedef struct range {
    uint32_t first;
    uint32_t last;
} range;

static bool in_ranges(const range *ranges, size_t count, uint32_t code)
{
    for (size_t i = 0; i < count; i++) {
        if (code >= ranges[i].first && code <= ranges[i].last) {
            return true;
        }
    }
    return false;
}

/* Controls, blanks other than space and tab, invisible and direction marks, private use,
 * noncharacters. */
static const range odd_ranges[] = {
    {0x0000, 0x0008}, {0x000B, 0x000C},    {0x000E, 0x001F}, {0x007F, 0x00A0}, {0x00AD, 0x00AD},
    {0x061C, 0x061C}, {0x115F, 0x1160},    {0x1680, 0x1680}, {0x180B, 0x180F}, {0x2000, 0x200F},
    {0x2028, 0x202F}, {0x205F, 0x206F},    {0x3000, 0x3000}, {0x3164, 0x3164}, {0xE000, 0xF8FF},
    {0xFDD0, 0xFDEF}, {0xFE00, 0xFE0F},    {0xFEFF, 0xFEFF}, {0xFFA0, 0xFFA0}, {0xFFF0, 0xFFFB},
    {0xFFFE, 0xFFFF}, {0xE0000, 0x10FFFF},
};

static const range letter_ranges[] = {
    {0x0041, 0x005A},   {0x005F, 0x005F},   {0x0061, 0x007A}, {0x00AA, 0x00AA}, {0x00B5, 0x00B5},
    {0x00BA, 0x00BA},   {0x00C0, 0x00D6},   {0x00D8, 0x00F6}, {0x00F8, 0x02AF}, {0x0370, 0x037D},
    {0x037F, 0x0386},   {0x0388, 0x03F5},   {0x03F7, 0x0481}, {0x048A, 0x0559}, {0x0560, 0x0588},
    {0x05D0, 0x05EA},   {0x0620, 0x064A},   {0x0671, 0x06D3}, {0x0700, 0x1CFF}, {0x1D00, 0x1DBF},
    {0x1E00, 0x1FBC},   {0x1FC2, 0x1FCC},   {0x1FD0, 0x1FDB}, {0x1FE0, 0x1FEC}, {0x1FF2, 0x1FFC},
    {0x2100, 0x214F},   {0x2C00, 0x2DFF},   {0x3041, 0x3096}, {0x30A1, 0x30FA}, {0x3105, 0x318E},
    {0x3400, 0x4DBF},   {0x4E00, 0xA48C},   {0xA4D0, 0xD7FF}, {0xF900, 0xFB06}, {0x10000, 0x1CFFF},
    {0x1D400, 0x1D7CB}, {0x20000, 0x3FFFF},
};

/* Apostrophe and primes, combining marks, subscripts, and superscripts, which the lexer refuses. */
static const range continue_ranges[] = {
    {0x0027, 0x0027}, {0x00B2, 0x00B3}, {0x00B9, 0x00B9}, {0x02B0, 0x036F},
    {0x0483, 0x0489}, {0x1DC0, 0x1DFF}, {0x2032, 0x2034}, {0x2070, 0x2079},
    {0x207F, 0x2089}, {0x2090, 0x209C}, {0x20D0, 0x20F0}, {0x3099, 0x309A},
};

#define IN(ranges, code) in_ranges(ranges, sizeof(ranges) / sizeof((ranges)[0]), code)

/* U+2212 is the minus sign that word processors write. */
static bool is_mark(uint32_t code)
{
    switch (code) {
    case '(':
    case ')':
    case '[':
    case ']':
    case '{':
    case '}':
    case '<':
    case '>':
    case ',':
    case ':':
    case '+':
    case '-':
    case '=':
    case '#':
    case '"':
    case 0x2212:
        return true;
    default:
        return false;
    }
}

idsi_char_class idsi_char_classify(uint32_t code)
{
    if (code == ' ' || code == '\t') {
        return IDSI_CHAR_BLANK;
    }
    if (code == '\n' || code == '\r') {
        return IDSI_CHAR_LINE_END;
    }
    if (code >= '0' && code <= '9') {
        return IDSI_CHAR_DIGIT;
    }
    if (is_mark(code)) {
        return IDSI_CHAR_MARK;
    }
    if (IN(odd_ranges, code)) {
        return IDSI_CHAR_ODD;
    }
    if (IN(continue_ranges, code)) {
        return IDSI_CHAR_CONTINUE;
    }
    return IN(letter_ranges, code) ? IDSI_CHAR_LETTER : IDSI_CHAR_SYMBOL;
}

size_t idsi_utf8_decode(const char *text, size_t length, uint32_t *code)
{
    static const uint32_t least[5] = {0, 0, 0x80, 0x800, 0x10000};
    const uint8_t *byte = (const uint8_t *)text;
    if (length == 0) {
        return 0;
    }
    if (byte[0] < 0x80) {
        *code = byte[0];
        return 1;
    }
    size_t n = byte[0] >= 0xF0 ? 4 : byte[0] >= 0xE0 ? 3 : 2;
    if (byte[0] < 0xC2 || byte[0] > 0xF4 || n > length) {
        return 0;
    }
    uint32_t value = byte[0] & (0x7Fu >> n);
    for (size_t i = 1; i < n; i++) {
        if ((byte[i] & 0xC0u) != 0x80u) {
            return 0;
        }
        value = value << 6 | (byte[i] & 0x3Fu);
    }
    if (value < least[n] || value > 0x10FFFF || (value >= 0xD800 && value <= 0xDFFF)) {
        return 0;
    }
    *code = value;
    return n;
}
