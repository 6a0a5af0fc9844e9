/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Presentation files: lines are joined to statements, statements fill the presentation.
 *
 * A line goes on in the next one while a fence is open or when it ends in an operator. Candidates
 * and models do not belong to the ideal of identities and are passed over.
 */
#include "ref_parse.h"

#include <ctype.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* Reads how an operation is written, "a*b", "(a,b,c)" or "t(a,b)"; names its arguments. */
static void pattern(ref_parser *parser, ref_form *form, char names[REF_ARITY][REF_NAME])
{
    char first[REF_NAME] = "";
    char close = '\0';
    *form = (ref_form){.kind = REF_FENCE};
    ref_blanks(parser);
    if (ref_closing(*parser->at) != '\0') {
        form->open[0] = *parser->at;
        close = ref_closing(*parser->at++);
    } else {
        ref_word(parser, first);
        if (ref_take(parser, '(')) {
            form->kind = REF_PREFIX;
            strcpy(form->open, first);
            close = ')';
        }
    }
    if (close != '\0') {
        do {
            if (form->arity == REF_ARITY)
                ref_fail(parser, "fewer arguments");
            ref_word(parser, names[form->arity++]);
        } while (ref_take(parser, ','));
        if (!ref_take(parser, close))
            ref_fail(parser, "a comma or the closing fence");
        return;
    }
    form->kind = REF_INFIX;
    form->arity = 2;
    strcpy(names[0], first);
    ref_blanks(parser);
    if (isalpha((unsigned char)*parser->at)) {
        ref_word(parser, form->open);
    } else {
        size_t length = 0;
        while (*parser->at != '\0' && *parser->at != ' ' && !ref_is_word(*parser->at) &&
               length + 1 < sizeof form->open)
            form->open[length++] = *parser->at++;
        if (length == 0)
            ref_fail(parser, "an operation symbol");
    }
    ref_word(parser, names[1]);
}

static bool same_writing(const ref_form *a, const ref_form *b)
{
    return a->kind == b->kind && a->arity == b->arity && strcmp(a->open, b->open) == 0;
}

/* Reads "-{c,b,a}": one signed argument order of the operation being declared. */
static void signed_order(ref_parser *parser, const ref_form *form, char names[REF_ARITY][REF_NAME],
                         ref_order *order)
{
    char images[REF_ARITY][REF_NAME] = {{0}};
    bool seen[REF_ARITY] = {false};
    ref_form image;
    *order = (ref_order){.sign = ref_take(parser, '-') ? -1 : 1};
    if (order->sign == 1)
        ref_take(parser, '+');
    pattern(parser, &image, images);
    if (!same_writing(form, &image))
        ref_fail(parser, "the operation with its arguments in another order before here");
    for (int i = 0; i < form->arity; i++) {
        int j = 0;
        while (j < form->arity && strcmp(images[i], names[j]) != 0)
            j++;
        if (j == form->arity || seen[j])
            ref_fail(parser, "each argument once before here");
        seen[j] = true;
        order->image[i] = j;
    }
}

static ref_form *new_form(ref_parser *parser, const ref_form *form)
{
    ref_pres *pres = parser->pres;
    if (ref_find_form(pres, form->kind, form->open, form->arity) != NULL)
        ref_fail(parser, "a new operation before here");
    if (pres->form_count == 2 * REF_FORMS)
        ref_die(3, "%s:%d: too many operations and definitions", parser->path, parser->line);
    pres->forms[pres->form_count] = *form;
    return &pres->forms[pres->form_count++];
}

static void read_operation(ref_parser *parser)
{
    char names[REF_ARITY][REF_NAME] = {{0}};
    char place[512] = "";
    char word[REF_NAME] = "";
    ref_form form;
    ref_order *generators = NULL;
    size_t count = 0;
    snprintf(place, sizeof place, "%s:%d", parser->path, parser->line);
    pattern(parser, &form, names);
    if (form.arity < 2)
        ref_fail(parser, "at least two arguments before here");
    ref_blanks(parser);
    if (isalpha((unsigned char)*parser->at)) {
        ref_word(parser, word);
        if (strcmp(word, "commutative") != 0 && strcmp(word, "alternating") != 0)
            ref_fail(parser, "commutative or alternating before here");
        ref_group_full(&form.group, form.arity, word[0] == 'a');
    } else {
        while (ref_take(parser, '=')) {
            generators = ref_grow(generators, count + 1, sizeof *generators);
            signed_order(parser, &form, names, &generators[count++]);
        }
        ref_group_close(&form.group, form.arity, generators, count, place);
        free(generators);
    }
    ref_pres *pres = parser->pres;
    if (pres->operation_count == REF_FORMS)
        ref_die(3, "%s: too many operations", place);
    form.letter = (char)('A' + pres->operation_count);
    pres->operation[pres->operation_count++] = new_form(parser, &form);
}

static void read_definition(ref_parser *parser)
{
    char names[REF_ARITY][REF_NAME] = {{0}};
    ref_form form;
    pattern(parser, &form, names);
    form.defined = true;
    for (int i = 0; i < form.arity; i++)
        strcpy(parser->names[i], names[i]);
    parser->name_count = form.arity;
    parser->names_fixed = true;
    if (!ref_take(parser, '='))
        ref_fail(parser, "=");
    ref_expression(parser, &form.body);
    new_form(parser, &form);
}

/* Passes over "name:". */
static void skip_name(ref_parser *parser)
{
    const char *end = NULL;
    ref_blanks(parser);
    end = parser->at;
    while (ref_is_word(*end) || *end == '-' || *end == '.')
        end++;
    while (end > parser->at && *end == ' ')
        end++;
    if (*end == ':')
        parser->at = end + 1;
}

static void read_identity(ref_parser *parser)
{
    ref_pres *pres = parser->pres;
    ref_poly left = {0};
    ref_poly right = {0};
    char place[512] = "";
    skip_name(parser);
    ref_expression(parser, &left);
    if (ref_take(parser, '='))
        ref_expression(parser, &right);
    ref_poly_add(&left, &right, -1, 1);
    snprintf(place, sizeof place, "%s:%d", parser->path, parser->line);
    pres->identities =
        ref_grow(pres->identities, pres->identity_count + 1, sizeof *pres->identities);
    ref_linearise(pres, &left, &pres->identities[pres->identity_count++], place);
    free(left.terms);
    free(right.terms);
}

static void read_statement(ref_pres *pres, const char *path, int line, const char *text)
{
    ref_parser parser = {.path = path, .line = line, .at = text, .pres = pres};
    char word[REF_NAME] = "";
    ref_word(&parser, word);
    if (strcmp(word, "operation") == 0)
        read_operation(&parser);
    else if (strcmp(word, "define") == 0)
        read_definition(&parser);
    else if (strcmp(word, "identity") == 0)
        read_identity(&parser);
    else if (strcmp(word, "candidate") == 0 || strcmp(word, "model") == 0)
        return;
    else
        ref_fail(&parser, "operation, define, identity, candidate or model before here");
    ref_blanks(&parser);
    if (*parser.at != '\0')
        ref_fail(&parser, "the end of the statement");
}

/* Whether a statement wants another line. */
static bool goes_on(const ref_pres *pres, const char *text)
{
    int depth = 0;
    size_t length = strlen(text);
    bool angles = ref_find_form(pres, REF_FENCE, "<", 0) != NULL;
    for (size_t i = 0; i < length; i++) {
        if (strchr("([{", text[i]) != NULL || (angles && text[i] == '<'))
            depth++;
        if (strchr(")]}", text[i]) != NULL || (angles && text[i] == '>'))
            depth--;
    }
    if (depth > 0)
        return true;
    while (length > 0 && text[length - 1] == ' ')
        length--;
    if (length == 0)
        return false;
    if (!ref_is_word(text[length - 1]))
        return strchr(")]}>\"", text[length - 1]) == NULL;
    size_t start = length;
    char word[REF_NAME] = "";
    while (start > 0 && ref_is_word(text[start - 1]))
        start--;
    if (length - start >= sizeof word)
        return false;
    memcpy(word, text + start, length - start);
    return ref_find_form(pres, REF_INFIX, word, 0) != NULL;
}

static char *read_file(const char *path)
{
    char *text = NULL;
    size_t length = 0;
    size_t got = 0;
    FILE *file = fopen(path, "rb");
    if (file == NULL)
        ref_die(2, "cannot open %s", path);
    do {
        text = ref_grow(text, length + 65537, 1);
        got = fread(text + length, 1, 65536, file);
        length += got;
    } while (got > 0);
    fclose(file);
    text[length] = '\0';
    return text;
}

void ref_read(ref_pres *pres, const char *path)
{
    char *text = read_file(path);
    char *statement = ref_grow(NULL, strlen(text) + 2, 1);
    int line = 0;
    int start = 1;
    *pres = (ref_pres){0};
    statement[0] = '\0';
    for (char *at = text; *at != '\0';) {
        size_t length = strcspn(at, "\n");
        size_t visible = strcspn(at, "#\n");
        char *end = statement + strlen(statement);
        line++;
        for (size_t i = 0; i < visible; i++)
            *end++ = isspace((unsigned char)at[i]) ? ' ' : at[i];
        *end = '\0';
        at += length + (at[length] == '\n');
        bool empty = strspn(statement, " ") == strlen(statement);
        if (!empty && *at != '\0' && goes_on(pres, statement)) {
            strcat(statement, " ");
            continue;
        }
        if (!empty)
            read_statement(pres, path, start, statement);
        statement[0] = '\0';
        start = line + 1;
    }
    free(statement);
    free(text);
}

void ref_free(ref_pres *pres)
{
    for (size_t i = 0; i < pres->form_count; i++) {
        free(pres->forms[i].group.elements);
        free(pres->forms[i].body.terms);
    }
    for (size_t i = 0; i < pres->identity_count; i++)
        free(pres->identities[i].linear.terms);
    free(pres->identities);
}
