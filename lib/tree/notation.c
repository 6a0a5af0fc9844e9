/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * How operations can be written: names, symbols of infix operations, fences.
 *
 * The one place that knows: the reader of presentations asks here lexeme by lexeme, signatures
 * ask for whole strings. So what a signature is made of can be printed as a presentation and read
 * back.
 */
#include <string.h>

#include "tree_private.h"

const char *const idsi_statement_words[IDSI_STATEMENT_WORDS] = {"operation", "define", "identity",
                                                                "candidate", "model"};

static bool is_word(const char *text, size_t length, const char *word)
{
    return length == strlen(word) && memcmp(text, word, length) == 0;
}

bool idsi_word_is_reserved(const char *text, size_t length)
{
    for (size_t i = 0; i < IDSI_STATEMENT_WORDS; i++) {
        if (is_word(text, length, idsi_statement_words[i])) {
            return true;
        }
    }
    return is_word(text, length, "commutative") || is_word(text, length, "alternating") ||
           is_word(text, length, "none");
}

/* Whether all characters are of class `head` or one of the two others, and the first is `head`. */
static bool is_run(const char *text, size_t length, idsi_char_class head, idsi_char_class second,
                   idsi_char_class third)
{
    if (length == 0 || length > IDSI_MAX_NAME) {
        return false;
    }
    for (size_t at = 0; at < length;) {
        uint32_t code = 0;
        const size_t bytes = idsi_utf8_decode(text + at, length - at, &code);
        const idsi_char_class class = idsi_char_classify(code);
        if (bytes == 0 || (class != head && (at == 0 || (class != second && class != third)))) {
            return false;
        }
        at += bytes;
    }
    return true;
}

bool idsi_word_is_name(const char *text, size_t length)
{
    return is_run(text, length, IDSI_CHAR_LETTER, IDSI_CHAR_DIGIT, IDSI_CHAR_CONTINUE) &&
           !idsi_word_is_reserved(text, length);
}

bool idsi_word_is_infix(const char *text, size_t length)
{
    return is_run(text, length, IDSI_CHAR_SYMBOL, IDSI_CHAR_SYMBOL, IDSI_CHAR_SYMBOL) ||
           idsi_word_is_name(text, length);
}

char idsi_fence_close(char open)
{
    switch (open) {
    case '(':
        return ')';
    case '[':
        return ']';
    case '{':
        return '}';
    case '<':
        return '>';
    default:
        return '\0';
    }
}

const char *idsi_notation_fault(ids_notation notation, const char *open, const char *close)
{
    switch (notation) {
    case IDS_NOTATION_FENCE:
        if (close == NULL) {
            return "a fence needs a closing symbol too";
        }
        if (open[0] == '\0' || open[1] != '\0' || close[0] == '\0' || close[1] != '\0' ||
            idsi_fence_close(open[0]) != close[0]) {
            return "the fences are ( and ), [ and ], { and }, < and >";
        }
        return NULL;
    case IDS_NOTATION_INFIX:
    case IDS_NOTATION_PREFIX:
        if (close != NULL) {
            return "only a fence has a closing symbol";
        }
        if (notation == IDS_NOTATION_PREFIX) {
            return idsi_word_is_name(open, strlen(open))
                       ? NULL
                       : "a name is a letter, then letters and digits, at most 63 bytes of UTF-8, "
                         "and no word of the notation";
        }
        return idsi_word_is_infix(open, strlen(open))
                   ? NULL
                   : "the symbol of an infix operation is a name or made of marks other than "
                     "( ) [ ] { } < > , : + - = # \", at most 63 bytes of UTF-8";
    }
    return "there is no such notation";
}

_Static_assert(IDSI_MAX_NAME == 63, "messages name the largest length");
