/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Expressions, read by recursive descent:
 *
 *   expression  [sign] term { sign term }
 *   term        factor [ infix-symbol factor ]
 *   factor      number ['*'] factor | 0 | ( expression ) | fenced arguments | name(arguments)
 *               | variable
 *   number      digits [ / digits ]
 */
#include "ref_parse.h"

#include <ctype.h>
#include <stdlib.h>
#include <string.h>

void ref_fail(const ref_parser *parser, const char *expected)
{
    ref_die(2, "%s:%d: expected %s at \"%s\"", parser->path, parser->line, expected, parser->at);
}

void ref_blanks(ref_parser *parser)
{
    while (*parser->at == ' ' || *parser->at == '\t')
        parser->at++;
}

bool ref_take(ref_parser *parser, char c)
{
    ref_blanks(parser);
    if (*parser->at != c)
        return false;
    parser->at++;
    return true;
}

bool ref_is_word(char c)
{
    return isalnum((unsigned char)c) || c == '_' || c == '\'';
}

/* Reads a name: a letter, then letters, digits, '_' and primes. */
void ref_word(ref_parser *parser, char name[REF_NAME])
{
    size_t length = 0;
    ref_blanks(parser);
    if (!isalpha((unsigned char)*parser->at) && *parser->at != '_')
        ref_fail(parser, "a name");
    while (ref_is_word(*parser->at)) {
        if (length + 1 == REF_NAME)
            ref_fail(parser, "a shorter name");
        name[length++] = *parser->at++;
    }
    name[length] = '\0';
}

char ref_closing(char open)
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

/* The form written like this; arity 0: any arity. NULL when there is none. */
const ref_form *ref_find_form(const ref_pres *pres, ref_kind kind, const char *open, int arity)
{
    for (size_t i = 0; i < pres->form_count; i++) {
        const ref_form *form = &pres->forms[i];
        if (form->kind == kind && strcmp(form->open, open) == 0 &&
            (arity == 0 || form->arity == arity))
            return form;
    }
    return NULL;
}

static void factor(ref_parser *parser, ref_poly *result);

static int64_t digits(ref_parser *parser)
{
    int64_t value = 0;
    for (; isdigit((unsigned char)*parser->at); parser->at++)
        value = ref_add(ref_mul(value, 10), *parser->at - '0');
    return value;
}

static void numbered_factor(ref_parser *parser, ref_poly *result)
{
    int64_t num = digits(parser);
    int64_t den = 1;
    ref_blanks(parser);
    if (*parser->at == '/') {
        const char *slash = parser->at++;
        ref_blanks(parser);
        if (isdigit((unsigned char)*parser->at)) {
            den = digits(parser);
            if (den == 0)
                ref_fail(parser, "a denominator that is not zero before here");
        } else {
            parser->at = slash;
        }
    }
    ref_blanks(parser);
    bool starred = ref_take(parser, '*');
    ref_blanks(parser);
    char next = *parser->at;
    if (num == 0 && !starred && !ref_is_word(next) && ref_closing(next) == '\0')
        return;
    ref_poly value = {0};
    factor(parser, &value);
    ref_poly_add(result, &value, num, den);
    free(value.terms);
}

/* Reads "a, b, c)" into args; returns how many. */
static int arguments(ref_parser *parser, char close, ref_poly args[REF_ARITY])
{
    for (int count = 0; count < REF_ARITY; count++) {
        ref_expression(parser, &args[count]);
        if (ref_take(parser, close))
            return count + 1;
        if (!ref_take(parser, ','))
            ref_fail(parser, "a comma or the closing fence");
    }
    ref_fail(parser, "fewer arguments before here");
}

static void fenced(ref_parser *parser, ref_kind kind, const char *open, ref_poly *result)
{
    ref_poly args[REF_ARITY] = {{0}};
    char close = kind == REF_PREFIX ? ')' : ref_closing(open[0]);
    int count = arguments(parser, close, args);
    const ref_form *form = ref_find_form(parser->pres, kind, open, count);
    if (form != NULL)
        ref_poly_apply(parser->pres, form, args, result);
    else if (kind == REF_FENCE && open[0] == '(' && count == 1)
        ref_poly_add(result, &args[0], 1, 1);
    else
        ref_fail(parser, "an operation with this number of arguments before here");
    for (int i = 0; i < count; i++)
        free(args[i].terms);
}

static void variable(ref_parser *parser, const char *name, ref_poly *result)
{
    int v = 0;
    while (v < parser->name_count && strcmp(parser->names[v], name) != 0)
        v++;
    if (v == parser->name_count) {
        if (parser->names_fixed || v == REF_DEGREE)
            ref_fail(parser, "a known variable before here");
        strcpy(parser->names[v], name);
        parser->name_count++;
    }
    const char leaf[2] = {(char)('a' + v), '\0'};
    ref_poly_push(result, leaf, 1, 1);
}

static void factor(ref_parser *parser, ref_poly *result)
{
    char name[REF_NAME] = "";
    ref_blanks(parser);
    char c = *parser->at;
    if (isdigit((unsigned char)c)) {
        numbered_factor(parser, result);
        return;
    }
    if (ref_closing(c) != '\0') {
        const char open[2] = {c, '\0'};
        parser->at++;
        fenced(parser, REF_FENCE, open, result);
        return;
    }
    ref_word(parser, name);
    if (ref_find_form(parser->pres, REF_PREFIX, name, 0) != NULL && ref_take(parser, '('))
        fenced(parser, REF_PREFIX, name, result);
    else
        variable(parser, name, result);
}

/* The infix operation whose symbol stands here, the longest one; moves behind it. */
static const ref_form *infix(ref_parser *parser)
{
    const ref_form *best = NULL;
    size_t longest = 0;
    ref_blanks(parser);
    for (size_t i = 0; i < parser->pres->form_count; i++) {
        const ref_form *form = &parser->pres->forms[i];
        size_t length = strlen(form->open);
        if (form->kind != REF_INFIX || strncmp(parser->at, form->open, length) != 0)
            continue;
        if (isalpha((unsigned char)form->open[0]) && ref_is_word(parser->at[length]))
            continue;
        if (length > longest) {
            best = form;
            longest = length;
        }
    }
    parser->at += longest;
    return best;
}

static void term(ref_parser *parser, int sign, ref_poly *sum)
{
    ref_poly args[2] = {{0}};
    ref_poly value = {0};
    factor(parser, &args[0]);
    const ref_form *form = infix(parser);
    if (form == NULL) {
        ref_poly_add(sum, &args[0], sign, 1);
    } else {
        factor(parser, &args[1]);
        ref_poly_apply(parser->pres, form, args, &value);
        ref_poly_add(sum, &value, sign, 1);
        if (infix(parser) != NULL)
            ref_fail(parser, "parentheses around one of the products before here");
    }
    free(args[0].terms);
    free(args[1].terms);
    free(value.terms);
}

/* Adds the value of an expression to `sum`. */
void ref_expression(ref_parser *parser, ref_poly *sum)
{
    int sign = ref_take(parser, '-') ? -1 : 1;
    if (sign == 1)
        ref_take(parser, '+');
    for (;;) {
        term(parser, sign, sum);
        if (ref_take(parser, '+'))
            sign = 1;
        else if (ref_take(parser, '-'))
            sign = -1;
        else
            return;
    }
}
