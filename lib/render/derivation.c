/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Derivations as LaTeX.
 *
 * A term is its context with NAME(arguments) in the place of the hole. To the printer of trees
 * that is a leaf with a long name, to the writer of formulas a function and its arguments. The
 * lines are an eqnarray, so no package is needed.
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

/* " + 1/2 " and the like: the sign always, the number unless it is 1. */
static ids_status put_coefficient(idsi_text *out, mpq_srcptr number, bool first)
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
    IDSI_TRY(put_coefficient(out, derivation->coefficients[i], i == 0));
    IDSI_TRY(put_formula(out, &outer));
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
        IDSI_TRY(put_formula(out, &text));
        IDSI_TRY(idsi_text_puts(out, " & = & "));
        IDSI_TRY(idsi_poly_print(c->laws->law[law].poly, NULL, &text));
        IDSI_TRY(put_formula(out, &text));
        IDSI_TRY(idsi_text_puts(out, " \\\\\n"));
    }
done:
    idsi_text_clear(&text);
    return st;
}

ids_status ids_derivation_latex(ids_ctx *ctx, const ids_derivation *derivation, ids_sink_fn sink,
                                void *sink_user)
{
    ids_status st = IDS_OK;
    idsi_text out;
    idsi_text text;

    if (ctx == NULL || derivation == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, derivation or sink");
    }
    idsi_text_init(&out, ctx);
    idsi_text_init(&text, ctx);
    const idsi_component *c = derivation->component;
    IDSI_TRY(idsi_text_printf(&out,
                              "%% idspan: a derivation of degree %u, %zu terms\n"
                              "\\begin{eqnarray*}\n",
                              c->degree, derivation->count));
    IDSI_TRY(put_laws(derivation, &out));
    IDSI_TRY(idsi_poly_print(c->goal, (const char *const *)c->claim->letters, &text));
    IDSI_TRY(put_formula(&out, &text));
    for (size_t i = 0; i < derivation->count; i++) {
        IDSI_TRY(idsi_text_puts(&out, i == 0 ? "\n & = & " : " \\\\\n & & "));
        IDSI_TRY(put_term(derivation, i, &out));
    }
    if (derivation->count == 0) {
        IDSI_TRY(idsi_text_puts(&out, " & = & 0"));
    }
    IDSI_TRY(idsi_text_puts(&out, "\n\\end{eqnarray*}\n"));
    if (sink(sink_user, out.data, out.length) != 0) {
        st = idsi_fail(ctx, IDS_ERR_IO, "the output was refused");
    }
done:
    idsi_text_clear(&out);
    idsi_text_clear(&text);
    return st;
}
