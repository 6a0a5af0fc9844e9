/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Trees as text, in the notation that the signature declares.
 *
 * An infix product that is an argument of an infix product stands in parentheses; a symbol that
 * begins or ends with a letter or digit has blanks around it.
 */
#include <stdio.h>
#include <string.h>

#include "tree_private.h"

/* Letters beyond ASCII count as well, and symbols there do no harm with blanks around them. */
static bool is_word_byte(char c)
{
    return (uint8_t)c >= 0x80 || (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') ||
           (c >= '0' && c <= '9') || c == '_' || c == '\'';
}

static bool names_operation(const ids_signature *sig, const char *name)
{
    for (size_t i = 0; i < sig->count; i++) {
        if (sig->ops[i].notation != IDS_NOTATION_FENCE && strcmp(sig->ops[i].open, name) == 0) {
            return true;
        }
    }
    return false;
}

/* The letter of a leaf without label: the first of x, y, z, a, b, ... that is not an operation. */
static void blank_name(const ids_signature *sig, char name[16])
{
    static const char letters[] = "xyzabcdefghijklmnopqrstuvw";
    for (size_t i = 0; i < sizeof letters - 1; i++) {
        snprintf(name, 16, "%c", letters[i]);
        if (!names_operation(sig, name)) {
            return;
        }
    }
    snprintf(name, 16, "x0");
}

void idsi_label_name(const ids_signature *sig, uint32_t label, char name[16])
{
    uint32_t free_letters = 0;

    if (label == 0) {
        blank_name(sig, name);
        return;
    }
    for (int letter = 'a'; letter <= 'z'; letter++) {
        snprintf(name, 16, "%c", letter);
        if (!names_operation(sig, name)) {
            free_letters++;
            if (free_letters == label) {
                return;
            }
        }
    }
    for (uint32_t number = 1, found = free_letters;; number++) {
        snprintf(name, 16, "x%u", number);
        found += !names_operation(sig, name);
        if (found == label) {
            return;
        }
    }
}

static ids_status print_leaf(const ids_signature *sig, idsi_token label, const char *const *names,
                             idsi_text *text)
{
    char name[16];
    if (names != NULL && label > 0) {
        return idsi_text_puts(text, names[label - 1]);
    }
    idsi_label_name(sig, label, name);
    return idsi_text_puts(text, name);
}

static const char *separator(const idsi_op *op)
{
    return op->notation == IDS_NOTATION_INFIX ? op->open : ",";
}

/* Blanks around symbols such as `o`, so that they do not run into a letter. */
static bool needs_blanks(const idsi_op *op)
{
    return op->notation == IDS_NOTATION_INFIX &&
           (is_word_byte(op->open[0]) || is_word_byte(op->open[strlen(op->open) - 1]));
}

static ids_status print_node(const ids_signature *sig, const idsi_token **at, bool inside_infix,
                             const char *const *names, idsi_text *text)
{
    ids_status st = IDS_OK;
    idsi_token token = *(*at)++;

    if (!idsi_is_node(token)) {
        return print_leaf(sig, token, names, text);
    }
    const idsi_op *op = &sig->ops[idsi_node_op(token)];
    bool infix = op->notation == IDS_NOTATION_INFIX;
    const char *blank = needs_blanks(op) ? " " : "";
    if (op->notation == IDS_NOTATION_PREFIX) {
        IDSI_TRY(idsi_text_printf(text, "%s(", op->open));
    } else if (!infix) {
        IDSI_TRY(idsi_text_puts(text, op->open));
    } else if (inside_infix) {
        IDSI_TRY(idsi_text_puts(text, "("));
    }
    for (uint32_t i = 0; i < op->arity; i++) {
        if (i > 0) {
            IDSI_TRY(idsi_text_printf(text, "%s%s%s", blank, separator(op), blank));
        }
        IDSI_TRY(print_node(sig, at, infix, names, text));
    }
    if (op->notation == IDS_NOTATION_FENCE) {
        IDSI_TRY(idsi_text_puts(text, op->close));
    } else if (!infix || inside_infix) {
        IDSI_TRY(idsi_text_puts(text, ")"));
    }
done:
    return st;
}

ids_status idsi_tree_print(const ids_signature *sig, const idsi_token *tree,
                           const char *const *names, idsi_text *text)
{
    const idsi_token *at = tree;
    return print_node(sig, &at, false, names, text);
}
