/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Derivations as LaTeX.
 *
 * A term is its context with NAME(arguments) in the place of the hole. To the printer of trees
 * that is a leaf with a long name, to the writer of formulas a function and its arguments. The
 * lines are an eqnarray, so no package is needed.
 *
 * Long lines are broken, so that they fit the text of a plain article: before the sign of a term,
 * or behind a comma. The width of a formula is estimated, rather too large, from its characters.
 */
#include <string.h>

#include <idspan/follows.h>

#include "../answer/follows_private.h"
#include "render_private.h"

/* The identity behind a law of the component, and its number from 0. */
static const idsi_identity *find_identity(const idsi_component *c, uint32_t law, size_t *number)
{
    const idsi_identity *identity = NULL;
    size_t i = 0;

    do {
        identity = idsi_presentation_get(c->pres, IDS_ROLE_IDENTITY, i);
        *number = i;
        i++;
    } while (identity != NULL && &identity->linear != c->laws->law[law].poly);
    return identity;
}

static ids_status put_law_name(const idsi_component *c, uint32_t law, idsi_text *text)
{
    size_t number = 0;
    const idsi_identity *identity = find_identity(c, law, &number);

    if (identity != NULL && identity->name[0] != '\0') {
        return idsi_text_puts(text, identity->name);
    }
    return idsi_text_printf(text, "f%zu", number + 1);
}

static ids_status put_formula(idsi_text *out, idsi_text *formula)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_append(formula, "", 0));
    IDSI_TRY(idsi_latex_formula(out, formula->data));
    idsi_text_clear(formula);
done:
    return st;
}

/* ---- long lines ------------------------------------------------------------------------------ */

/* Points: an article has 345, of which the sign = and the space around it take some. */
#define LINE_WIDTH 290u

/* Width of a character in a formula of ten points, in points. */
static uint32_t width_of(char c)
{
    if ((uint8_t)c >= 0x80) {
        return 4; /* of two to four bytes */
    }
    if (c == '(' || c == ')' || c == ' ' || c == '[' || c == ']') {
        return 4;
    }
    const bool name = (c >= 'a' && c <= 'z') || (c >= '0' && c <= '9') || c == ',' || c == '_';
    return name ? 6 : 9;
}

static uint32_t width(const char *text, size_t length)
{
    uint32_t sum = 0;
    for (size_t i = 0; i < length; i++) {
        sum += width_of(text[i]);
    }
    return sum;
}

/* Bytes up to the next place where a line may end: before " + " or " - ", or behind a comma. */
static size_t piece_length(const char *text)
{
    for (size_t i = 0; text[i] != '\0'; i++) {
        if (i > 0 && text[i] == ' ' && (text[i + 1] == '+' || text[i + 1] == '-') &&
            text[i + 2] == ' ') {
            return i;
        }
        if (text[i] == ',' && text[i + 1] != '\0') {
            return i + 1;
        }
    }
    return strlen(text);
}

/* A formula, broken where it is too long; *used is the width of the line so far. */
static ids_status put_broken(idsi_text *out, idsi_text *formula, uint32_t *used)
{
    ids_status st = IDS_OK;
    idsi_text line;
    const char *text = NULL;

    idsi_text_init(&line, out->ctx);
    IDSI_TRY(idsi_text_append(formula, "", 0));
    for (text = formula->data; *text != '\0';) {
        const size_t length = piece_length(text);
        const uint32_t more = width(text, length);
        if (*used > 0 && *used + more > LINE_WIDTH) {
            IDSI_TRY(put_formula(out, &line));
            IDSI_TRY(idsi_text_puts(out, " \\\\\n & & {}"));
            /* What goes on behind a comma is moved to the right. */
            IDSI_TRY(idsi_text_puts(out, text[0] == ' ' && text[1] != '(' && text[2] == ' '
                                             ? ""
                                             : "\\quad "));
            *used = 20;
        }
        IDSI_TRY(idsi_text_append(&line, text, length));
        *used += more;
        text += length;
    }
    IDSI_TRY(put_formula(out, &line));
    idsi_text_clear(formula);
done:
    idsi_text_clear(&line);
    return st;
}

/* " + 1/2 " and the like: the sign always, the number unless it is 1. */
static ids_status put_coefficient(idsi_text *out, mpq_srcptr number, bool first, uint32_t *used)
{
    ids_status st = IDS_OK;
    void *room = NULL;
    size_t digits =
        mpz_sizeinbase(mpq_numref(number), 10) + mpz_sizeinbase(mpq_denref(number), 10) + 3;
    idsi_text text;

    idsi_text_init(&text, out->ctx);
    IDSI_TRY(idsi_text_puts(out, mpq_sgn(number) < 0 ? "{}-" : first ? "" : "{}+"));
    if (mpz_cmpabs_ui(mpq_numref(number), 1) != 0 || mpz_cmp_ui(mpq_denref(number), 1) != 0) {
        IDSI_TRY(idsi_alloc(out->ctx, digits, &room));
        const char *shown = mpq_get_str(room, 10, number);
        IDSI_TRY(idsi_text_puts(&text, shown[0] == '-' ? shown + 1 : shown));
        *used += width(text.data, text.length);
        IDSI_TRY(put_formula(out, &text));
        IDSI_TRY(idsi_text_puts(out, "\\,"));
    }
done:
    idsi_free(out->ctx, room);
    idsi_text_clear(&text);
    return st;
}

static ids_status put_term(const ids_derivation *derivation, size_t i, idsi_text *out)
{
    ids_status st = IDS_OK;
    const idsi_component *c = derivation->component;
    const idsi_instance *instance = &derivation->instances[i];
    const char *names[IDSI_MAX_IDENTITY_DEGREE + 1] = {0};
    uint32_t degree = c->laws->law[instance->law].degree;
    uint32_t used = 15;
    idsi_text inner;
    idsi_text outer;

    idsi_text_init(&inner, out->ctx);
    idsi_text_init(&outer, out->ctx);
    for (uint32_t v = 0; v < c->variables; v++) {
        names[v] = c->claim->letters[v];
    }
    IDSI_TRY(put_law_name(c, instance->law, &inner));
    for (uint32_t k = 0; k < degree; k++) {
        IDSI_TRY(idsi_text_puts(&inner, k == 0 ? "(" : ", "));
        IDSI_TRY(idsi_tree_print(c->sig, idsi_component_argument(c, instance, k), names, &inner));
    }
    IDSI_TRY(idsi_text_puts(&inner, ")"));
    names[c->variables] = inner.data;
    IDSI_TRY(idsi_tree_print(c->sig, idsi_component_context(c, instance), names, &outer));
    IDSI_TRY(put_coefficient(out, derivation->coefficients[i], i == 0, &used));
    IDSI_TRY(put_broken(out, &outer, &used));
done:
    idsi_text_clear(&inner);
    idsi_text_clear(&outer);
    return st;
}

/* The identities that occur, in the letters of their linearisations. */
static ids_status put_laws(const ids_derivation *derivation, idsi_text *out)
{
    ids_status st = IDS_OK;
    const idsi_component *c = derivation->component;
    idsi_text text;
    uint32_t line = 0;

    idsi_text_init(&text, out->ctx);
    for (uint32_t law = 0; law < c->laws->count; law++) {
        bool used = false;
        for (size_t i = 0; i < derivation->count; i++) {
            used = used || derivation->instances[i].law == law;
        }
        if (!used) {
            continue;
        }
        IDSI_TRY(put_law_name(c, law, &text));
        for (uint32_t k = 1; k <= c->laws->law[law].degree; k++) {
            char letter[16];
            idsi_label_name(c->sig, k, letter);
            IDSI_TRY(idsi_text_printf(&text, "%s%s", k == 1 ? "(" : ", ", letter));
        }
        IDSI_TRY(idsi_text_puts(&text, ")"));
        IDSI_TRY(idsi_text_puts(out, "\\lefteqn{"));
        IDSI_TRY(put_formula(out, &text));
        IDSI_TRY(idsi_text_puts(out, "} \\\\\n & = & "));
        IDSI_TRY(idsi_poly_print(c->laws->law[law].poly, NULL, &text));
        line = 0;
        IDSI_TRY(put_broken(out, &text, &line));
        IDSI_TRY(idsi_text_puts(out, " \\\\\n"));
    }
done:
    idsi_text_clear(&text);
    return st;
}

/* The candidate, from the left margin on. */
static ids_status put_goal(const idsi_component *c, idsi_text *out)
{
    ids_status st = IDS_OK;
    const char *const *letters = (const char *const *)c->claim->letters;
    idsi_text text;
    idsi_text whole;
    uint32_t used = 0;

    idsi_text_init(&text, out->ctx);
    idsi_text_init(&whole, out->ctx);
    IDSI_TRY(idsi_poly_print(c->goal, letters, &text));
    IDSI_TRY(put_broken(&whole, &text, &used));
    const char *rest = strstr(whole.data, " \\\\\n");
    const size_t first = rest == NULL ? whole.length : (size_t)(rest - whole.data);
    IDSI_TRY(idsi_text_puts(out, "\\lefteqn{"));
    IDSI_TRY(idsi_text_append(out, whole.data, first));
    IDSI_TRY(idsi_text_puts(out, "}"));
    IDSI_TRY(idsi_text_puts(out, whole.data + first));
done:
    idsi_text_clear(&text);
    idsi_text_clear(&whole);
    return st;
}

ids_status ids_derivation_latex(ids_ctx *ctx, const ids_derivation *derivation, ids_sink_fn sink,
                                void *sink_user)
{
    ids_status st = IDS_OK;
    idsi_text out;

    if (ctx == NULL || derivation == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, derivation or sink");
    }
    idsi_text_init(&out, ctx);
    const idsi_component *c = derivation->component;
    IDSI_TRY(idsi_text_printf(&out,
                              "%% idspan: a derivation of degree %u, %zu terms\n"
                              "{\\interdisplaylinepenalty=0 %% page breaks are allowed\n"
                              "\\begin{eqnarray*}\n",
                              c->degree, derivation->count));
    IDSI_TRY(put_laws(derivation, &out));
    IDSI_TRY(put_goal(c, &out));
    for (size_t i = 0; i < derivation->count; i++) {
        IDSI_TRY(idsi_text_puts(&out, i == 0 ? " \\\\\n & = & " : " \\\\\n & & "));
        IDSI_TRY(put_term(derivation, i, &out));
    }
    if (derivation->count == 0) {
        IDSI_TRY(idsi_text_puts(&out, " \\\\\n & = & 0"));
    }
    IDSI_TRY(idsi_text_puts(&out, "\n\\end{eqnarray*}\n}\n"));
    if (sink(sink_user, out.data, out.length) != 0) {
        st = idsi_fail(ctx, IDS_ERR_IO, "the output was refused");
    }
done:
    idsi_text_clear(&out);
    return st;
}
