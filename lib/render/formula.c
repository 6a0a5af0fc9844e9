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
 *     * . ^ ~ \ ...          see symbol(): * -> \cdot, the rest as it looks
 *     { }                    \{ \}
 *     < >                    \langle \rangle as fences, as they are between operands
 *     beyond ASCII           the usual operation signs have their commands; any other character
 *                            is named by its code point, since a font may lack it
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

/* The command for a symbol, NULL when the character stands for itself. */
static const char *symbol(uint32_t character)
{
    static const struct {
        uint32_t character;
        const char *command;
    } table[] = {
        {'*', "\\cdot "},
        {'.', "\\mathbin{.}"},
        {'^', "\\wedge "},
        {'~', "\\sim "},
        {'\\', "\\setminus "},
        {'&', "\\mathbin{\\&}"},
        {'%', "\\mathbin{\\%}"},
        {'#', "\\mathbin{\\#}"},
        {'$', "\\mathbin{\\$}"},
        {'_', "\\mathbin{\\_}"},
        {'@', "\\mathbin{@}"},
        {'!', "\\mathbin{!}"},
        {'?', "\\mathbin{?}"},
        {'|', "\\mathbin{|}"},
        {':', "\\mathbin{:}"},
        {';', "\\mathbin{;}"},
        {'/', "\\mathbin{/}"},
        {'"', "\\mathbin{\\mbox{\"}}"},
        {'`', "\\mathbin{\\mbox{`}}"},
        {'\'', "\\mathbin{\\mbox{'}}"},
        {'{', "\\{"},
        {'}', "\\}"},
        {0xB7, "\\cdot "},
        {0xD7, "\\times "},
        {0xF7, "\\div "},
        {0xB1, "\\pm "},
        {0x2022, "\\bullet "},
        {0x2217, "\\ast "},
        {0x2218, "\\circ "},
        {0x2219, "\\bullet "},
        {0x2227, "\\wedge "},
        {0x2228, "\\vee "},
        {0x2229, "\\cap "},
        {0x222A, "\\cup "},
        {0x2293, "\\sqcap "},
        {0x2294, "\\sqcup "},
        {0x2295, "\\oplus "},
        {0x2296, "\\ominus "},
        {0x2297, "\\otimes "},
        {0x2298, "\\oslash "},
        {0x2299, "\\odot "},
        {0x22C4, "\\diamond "},
        {0x22C5, "\\cdot "},
        {0x22C6, "\\star "},
        {0x25CB, "\\bigcirc "},
        {0x25E6, "\\circ "},
        {0x2605, "\\star "},
    };

    for (size_t i = 0; i < sizeof table / sizeof table[0]; i++) {
        if (table[i].character == character) {
            return table[i].command;
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

static ids_status read_symbol(reader *in)
{
    ids_status st = IDS_OK;
    uint32_t character = idsi_utf8_next(&in->at);
    const char *command = symbol(character);
    bool closing = strchr(")]}", (int)(character < 0x80 ? character : 'x')) != NULL;

    if (character == '<' && !in->operand) {
        in->angles++;
        command = "\\langle ";
    } else if (character == '>' && in->operand && in->angles > 0) {
        in->angles--;
        command = "\\rangle ";
        closing = true;
    }
    if (command != NULL) {
        IDSI_TRY(idsi_text_puts(in->line, command));
    } else if (character >= 0x80) {
        IDSI_TRY(idsi_text_printf(in->line, "\\mathbin{\\mathrm{U{+}%04X}}", (unsigned)character));
    } else {
        IDSI_TRY(
            idsi_utf8_append(in->line, character < 0x20 || character == 0x7F ? ' ' : character));
    }
    in->operand = closing;
done:
    return st;
}

ids_status idsi_latex_formula(idsi_text *line, const char *text)
{
    ids_status st = IDS_OK;
    reader in = {.at = text, .line = line};

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
