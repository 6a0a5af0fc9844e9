/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Formulas in math mode: what the notation of monomials and polynomials becomes in LaTeX.
 *
 * Reads the text from left to right and knows two things of what came before: whether an operand
 * has just ended, and whether blanks followed it. The mapping:
 *
 *     number                 as it is; 1/3 -> \frac{1}{3}; 2^-61 -> 2^{-61}
 *     number * factor        a coefficient: 2\,(...)
 *     name                   one letter as it is, more in \mathrm; digits at the end are an index
 *     name between operands  an infix operation: o -> \circ, others \mathbin{\mathrm{...}}
 *     * . ^ ~ \ ...          see symbols: * -> \cdot, the rest as it looks
 *     { }                    \{ \}
 *     < >                    \langle \rangle as fences, as they are between operands
 *     beyond ASCII           Greek letters and the usual operation signs have their commands,
 *                            Latin letters stay, subscript digits are an index; any other
 *                            character is named by its code point, since a font may lack it
 *
 * Nothing outside LaTeX's own commands is used, so no package is needed.
 */
#include <string.h>

#include "render_private.h"

#define DIGITS "0123456789"
#define LETTERS "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ"
#define WORD LETTERS DIGITS "_'"

typedef struct reader {
    const char *at;
    idsi_text *line;
    bool operand;  /* the last thing was an operand or a closing fence */
    bool blank;    /* and blanks came after it */
    size_t angles; /* open < fences */
} reader;

typedef struct entry {
    uint32_t character;
    const char *command;
} entry;

/* clang-format off */
static const entry symbols[] = {
    {'*', "\\cdot "}, {'.', "\\mathbin{.}"}, {'^', "\\wedge "}, {'~', "\\sim "},
    {'\\', "\\setminus "}, {'&', "\\mathbin{\\&}"}, {'%', "\\mathbin{\\%}"},
    {'#', "\\mathbin{\\#}"}, {'$', "\\mathbin{\\$}"}, {'_', "\\mathbin{\\_}"},
    {'@', "\\mathbin{@}"}, {'!', "\\mathbin{!}"}, {'?', "\\mathbin{?}"},
    {'|', "\\mathbin{|}"}, {':', "\\mathbin{:}"}, {';', "\\mathbin{;}"},
    {'/', "\\mathbin{/}"}, {'"', "\\mathbin{\\mbox{\"}}"}, {'`', "\\mathbin{\\mbox{`}}"},
    {'\'', "\\mathbin{\\mbox{'}}"}, {'{', "\\{"}, {'}', "\\}"},
    {0xB1, "\\pm "}, {0xB7, "\\cdot "}, {0xD7, "\\times "}, {0xF7, "\\div "},
    {0x2022, "\\bullet "}, {0x2217, "\\ast "}, {0x2218, "\\circ "}, {0x2219, "\\bullet "},
    {0x2227, "\\wedge "}, {0x2228, "\\vee "}, {0x2229, "\\cap "}, {0x222A, "\\cup "},
    {0x2293, "\\sqcap "}, {0x2294, "\\sqcup "}, {0x2295, "\\oplus "}, {0x2296, "\\ominus "},
    {0x2297, "\\otimes "}, {0x2298, "\\oslash "}, {0x2299, "\\odot "}, {0x22C4, "\\diamond "},
    {0x22C5, "\\cdot "}, {0x22C6, "\\star "}, {0x25CB, "\\bigcirc "}, {0x25E6, "\\circ "},
    {0x2605, "\\star "},
};

static const entry greek[] = {
    {0x393, "\\Gamma "}, {0x394, "\\Delta "}, {0x398, "\\Theta "}, {0x39B, "\\Lambda "},
    {0x39E, "\\Xi "}, {0x3A0, "\\Pi "}, {0x3A3, "\\Sigma "}, {0x3A6, "\\Phi "},
    {0x3A8, "\\Psi "}, {0x3A9, "\\Omega "},
    {0x3B1, "\\alpha "}, {0x3B2, "\\beta "}, {0x3B3, "\\gamma "}, {0x3B4, "\\delta "},
    {0x3B5, "\\varepsilon "}, {0x3B6, "\\zeta "}, {0x3B7, "\\eta "}, {0x3B8, "\\theta "},
    {0x3B9, "\\iota "}, {0x3BA, "\\kappa "}, {0x3BB, "\\lambda "}, {0x3BC, "\\mu "},
    {0x3BD, "\\nu "}, {0x3BE, "\\xi "}, {0x3C0, "\\pi "}, {0x3C1, "\\rho "},
    {0x3C3, "\\sigma "}, {0x3C4, "\\tau "}, {0x3C5, "\\upsilon "}, {0x3C6, "\\varphi "},
    {0x3C7, "\\chi "}, {0x3C8, "\\psi "}, {0x3C9, "\\omega "}, {0x3D5, "\\phi "},
};
/* clang-format on */

/* The command for a character, NULL when the list has none. */
static const char *find(const entry *list, size_t count, uint32_t character)
{
    for (size_t i = 0; i < count; i++) {
        if (list[i].character == character) {
            return list[i].command;
        }
    }
    return NULL;
}

static ids_status read_number(reader *in)
{
    ids_status st = IDS_OK;
    size_t n = strspn(in->at, DIGITS);
    const char *after = in->at + n;
    size_t sign = after[0] == '^' && after[1] == '-' ? 1 : 0;
    size_t power = after[0] == '^' ? strspn(after + 1 + sign, DIGITS) : 0;
    size_t below = after[0] == '/' ? strspn(after + 1, DIGITS) : 0;

    if (below > 0) {
        IDSI_TRY(idsi_text_printf(in->line, "\\frac{%.*s}{%.*s}", (int)n, in->at, (int)below,
                                  after + 1));
        after += 1 + below;
    } else if (power > 0) {
        IDSI_TRY(idsi_text_printf(in->line, "%.*s^{%.*s}", (int)n, in->at, (int)(sign + power),
                                  after + 1));
        after += 1 + sign + power;
    } else {
        IDSI_TRY(idsi_text_append(in->line, in->at, n));
    }
    /* A number before a product sign is a coefficient, whatever the operations are called. */
    if (after[0] == '*') {
        IDSI_TRY(idsi_text_puts(in->line, "\\,"));
        after++;
    }
    in->at = after;
    in->operand = false;
done:
    return st;
}

/* Writes the stem of a name: one letter in italics, more letters upright. */
static ids_status append_stem(idsi_text *line, const char *stem, size_t length)
{
    ids_status st = IDS_OK;

    if (length == 1) {
        return idsi_text_append(line, stem, 1);
    }
    IDSI_TRY(idsi_text_puts(line, "\\mathrm{"));
    for (size_t i = 0; i < length; i++) {
        if (stem[i] == '_') {
            IDSI_TRY(idsi_text_puts(line, "\\"));
        }
        IDSI_TRY(idsi_text_append(line, stem + i, 1));
    }
    IDSI_TRY(idsi_text_puts(line, "}"));
done:
    return st;
}

static ids_status append_name(idsi_text *line, const char *name, size_t length)
{
    ids_status st = IDS_OK;
    size_t primes = 0;
    size_t digits = 0;
    size_t stem = 0;

    while (primes < length && name[length - 1 - primes] == '\'') {
        primes++;
    }
    while (primes + digits < length && strchr(DIGITS, name[length - 1 - primes - digits])) {
        digits++;
    }
    stem = length - primes - digits;
    IDSI_TRY(
        append_stem(line, name, digits > 0 && stem > 1 && name[stem - 1] == '_' ? stem - 1 : stem));
    if (digits > 0) {
        IDSI_TRY(idsi_text_printf(line, "_{%.*s}", (int)digits, name + stem));
    }
    IDSI_TRY(idsi_text_append(line, name + length - primes, primes));
done:
    return st;
}

static ids_status read_name(reader *in)
{
    ids_status st = IDS_OK;
    size_t n = strspn(in->at, WORD);
    bool infix = in->operand && in->blank && in->at[n] == ' ';

    if (infix && n == 1 && in->at[0] == 'o') {
        IDSI_TRY(idsi_text_puts(in->line, "\\circ "));
    } else if (infix) {
        IDSI_TRY(idsi_text_puts(in->line, "\\mathbin{"));
        IDSI_TRY(append_name(in->line, in->at, n));
        IDSI_TRY(idsi_text_puts(in->line, "}"));
    } else {
        IDSI_TRY(append_name(in->line, in->at, n));
    }
    in->at += n;
    in->operand = !infix;
done:
    return st;
}

/* Subscript digits, one index however many there are. */
static ids_status read_subscript(reader *in, uint32_t character)
{
    ids_status st = IDS_OK;
    const char *next = in->at;

    IDSI_TRY(idsi_text_puts(in->line, "_{"));
    while (character >= 0x2080 && character <= 0x2089) {
        IDSI_TRY(idsi_text_printf(in->line, "%u", (unsigned)(character - 0x2080)));
        in->at = next;
        character = *next != '\0' ? idsi_utf8_next(&next) : 0;
    }
    IDSI_TRY(idsi_text_puts(in->line, "}"));
done:
    return st;
}

/* Any other character beyond ASCII: a letter or a sign. */
static ids_status append_beyond(reader *in, uint32_t character)
{
    const char *command = find(greek, sizeof greek / sizeof greek[0], character);

    in->operand = true;
    if (command != NULL) {
        return idsi_text_puts(in->line, command);
    }
    if (character >= 0xC0 && character <= 0x17F) {
        ids_status st = idsi_text_puts(in->line, "\\mbox{");
        st = st == IDS_OK ? idsi_utf8_append(in->line, character) : st;
        return st == IDS_OK ? idsi_text_puts(in->line, "}") : st;
    }
    in->operand = false;
    return idsi_text_printf(in->line, "\\mathbin{\\mathrm{U{+}%04X}}", (unsigned)character);
}

static ids_status read_symbol(reader *in)
{
    uint32_t character = idsi_utf8_next(&in->at);
    const char *command = find(symbols, sizeof symbols / sizeof symbols[0], character);
    bool operand = in->operand;

    in->operand = character == ')' || character == ']' || character == '}';
    if (character == '<' && !operand) {
        in->angles++;
        command = "\\langle ";
    } else if (character == '>' && operand && in->angles > 0) {
        in->angles--;
        in->operand = true;
        command = "\\rangle ";
    }
    if (command != NULL) {
        return idsi_text_puts(in->line, command);
    }
    if (character >= 0x2080 && character <= 0x2089) {
        in->operand = true;
        return read_subscript(in, character);
    }
    if (character >= 0x80) {
        return append_beyond(in, character);
    }
    return idsi_utf8_append(in->line, character < 0x20 || character == 0x7F ? ' ' : character);
}

ids_status idsi_latex_formula(idsi_text *line, const char *text)
{
    ids_status st = IDS_OK;
    reader in = {.at = text, .line = line};

    /* A sum that goes on from another cell: an empty operand gives the sign its usual space. */
    if ((text[0] == '+' || text[0] == '-') && text[1] == ' ') {
        IDSI_TRY(idsi_text_puts(line, "{}"));
    }
    while (*in.at != '\0') {
        if (*in.at == ' ') {
            in.blank = true;
            in.at++;
            if (line->length > 0 && line->data[line->length - 1] != ' ') {
                IDSI_TRY(idsi_text_puts(line, " "));
            }
            continue;
        }
        if (strchr(DIGITS, *in.at) != NULL) {
            IDSI_TRY(read_number(&in));
        } else if (strchr(LETTERS, *in.at) != NULL) {
            IDSI_TRY(read_name(&in));
        } else {
            IDSI_TRY(read_symbol(&in));
        }
        in.blank = false;
    }
done:
    return st;
}
