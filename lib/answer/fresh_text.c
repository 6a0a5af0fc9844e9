/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * New identities as text, and the presentation that has them.
 *
 * With even letters the polynomial is printed in its letters, each as often as it occurs. With odd
 * ones every letter becomes as many variables as it occurs, from left to right in each term, and
 * the statement says that the polynomial is to be alternated in them.
 */
#include <stdio.h>
#include <string.h>

#include "fresh_private.h"

void idsi_found_clear(ids_ctx *ctx, idsi_found *found)
{
    idsi_free(ctx, found->name);
    idsi_free(ctx, found->statement);
    idsi_free(ctx, found->polynomial);
    idsi_free(ctx, found->alternating);
    idsi_free(ctx, found->modules);
    idsi_free(ctx, found->largest);
    idsi_free(ctx, found->first_largest);
}

/* First variable of each letter, from 1. */
static void set_first(const idsi_space_search *s, uint32_t first[IDSI_MAX_IDENTITY_DEGREE + 1])
{
    uint32_t label = 1;
    for (uint32_t k = 0; k < s->variables; k++) {
        first[k] = label;
        label += s->odd ? s->power[k] : 1;
    }
    first[s->variables] = label;
}

static ids_status make_poly(const idsi_space_search *s, mpz_t *row, idsi_poly *poly)
{
    ids_status st = IDS_OK;
    const idsi_forest *forest = idsi_component_monomials(s->component);
    uint32_t first[IDSI_MAX_IDENTITY_DEGREE + 1] = {0};
    idsi_token tree[2u * IDSI_MAX_IDENTITY_DEGREE];
    mpq_t coefficient;

    mpq_init(coefficient);
    set_first(s, first);
    for (size_t m = 0; m < s->monomials; m++) {
        uint32_t used[IDSI_MAX_IDENTITY_DEGREE] = {0};
        const idsi_token *from = forest->tokens + forest->list[m].start;
        if (mpz_sgn(row[m]) == 0) {
            continue;
        }
        for (size_t i = 0; i < forest->list[m].length; i++) {
            const uint32_t letter = from[i] - 1;
            tree[i] = from[i];
            if (!idsi_is_node(from[i])) {
                tree[i] = first[letter] + used[letter];
                used[letter] += s->odd;
            }
        }
        mpq_set_z(coefficient, row[m]);
        IDSI_TRY(idsi_poly_append(poly, coefficient, tree, forest->list[m].length));
    }
done:
    mpq_clear(coefficient);
    return st;
}

/* "a,b,c d,e": the groups of variables that are alternated. */
static ids_status print_alternating(const idsi_space_search *s, idsi_text *text)
{
    ids_status st = IDS_OK;
    uint32_t first[IDSI_MAX_IDENTITY_DEGREE + 1] = {0};
    bool any = false;

    set_first(s, first);
    IDSI_TRY(idsi_text_append(text, "", 0));
    for (uint32_t k = 0; s->odd && k < s->variables; k++) {
        if (s->power[k] < 2) {
            continue;
        }
        for (uint32_t v = first[k]; v < first[k + 1]; v++) {
            char name[16];
            idsi_label_name(s->component->sig, v, name);
            IDSI_TRY(idsi_text_printf(text, "%s%s", v > first[k] ? "," : any ? " " : "", name));
        }
        any = true;
    }
done:
    return st;
}

static ids_status print_largest(ids_ctx *ctx, mpz_t *row, size_t count, char **out)
{
    ids_status st = IDS_OK;
    size_t at = 0;
    void *room = NULL;
    idsi_text text;

    idsi_text_init(&text, ctx);
    for (size_t m = 0; m < count; m++) {
        at = mpz_cmpabs(row[m], row[at]) > 0 ? m : at;
    }
    IDSI_TRY(idsi_alloc(ctx, mpz_sizeinbase(row[at], 10) + 2, &room));
    const char *digits = mpz_get_str(room, 10, row[at]);
    IDSI_TRY(idsi_text_puts(&text, digits[0] == '-' ? digits + 1 : digits));
    IDSI_TRY(idsi_text_take(&text, out));
done:
    idsi_free(ctx, room);
    idsi_text_clear(&text);
    return st;
}

ids_status idsi_found_state(ids_ctx *ctx, idsi_found *found)
{
    ids_status st = IDS_OK;
    const char *at = found->alternating;
    idsi_text text;

    idsi_text_init(&text, ctx);
    IDSI_TRY(idsi_text_printf(&text, "identity %s: %s = 0", found->name, found->polynomial));
    while (at[0] != '\0') {
        const size_t length = strcspn(at, " ");
        IDSI_TRY(idsi_text_puts(&text, " alternating "));
        IDSI_TRY(idsi_text_append(&text, at, length));
        at += length + (at[length] == ' ');
    }
    idsi_free(ctx, found->statement);
    found->statement = NULL;
    IDSI_TRY(idsi_text_take(&text, &found->statement));
done:
    idsi_text_clear(&text);
    return st;
}

ids_status idsi_found_write(const idsi_space_search *s, mpz_t *row, idsi_found *found)
{
    ids_status st = IDS_OK;
    idsi_text text;
    idsi_poly poly;

    idsi_text_init(&text, s->ctx);
    idsi_poly_init(&poly, s->ctx, s->component->sig);
    IDSI_TRY(make_poly(s, row, &poly));
    found->terms = poly.count;
    IDSI_TRY(idsi_poly_print(&poly, NULL, &text));
    IDSI_TRY(idsi_text_take(&text, &found->polynomial));
    IDSI_TRY(print_alternating(s, &text));
    IDSI_TRY(idsi_text_take(&text, &found->alternating));
    IDSI_TRY(print_largest(s->ctx, row, s->monomials, &found->largest));
    IDSI_TRY(idsi_found_state(s->ctx, found));
done:
    idsi_poly_clear(&poly);
    idsi_text_clear(&text);
    return st;
}

/* ---- presentations --------------------------------------------------------------------------- */

static ids_status print_comment(const ids_fresh *fresh, const idsi_found *found, idsi_text *text)
{
    return idsi_text_printf(text, "# degree %u; holds in the model %s; adds %s\n", found->degree,
                            fresh->model->decl->name, found->modules);
}

ids_status idsi_fresh_text(ids_ctx *ctx, const ids_fresh *fresh, size_t without, bool comments,
                           char **text)
{
    ids_status st = IDS_OK;
    char *known = NULL;
    idsi_text out;

    idsi_text_init(&out, ctx);
    IDSI_TRY(ids_presentation_print(ctx, fresh->model->pres, &known));
    IDSI_TRY(idsi_text_puts(&out, known));
    for (size_t i = 0; i < fresh->found_count; i++) {
        if (i == without) {
            continue;
        }
        if (comments) {
            IDSI_TRY(print_comment(fresh, &fresh->found[i], &out));
        }
        IDSI_TRY(idsi_text_printf(&out, "%s\n", fresh->found[i].statement));
    }
    IDSI_TRY(idsi_text_take(&out, text));
done:
    ids_string_free(ctx, known);
    idsi_text_clear(&out);
    return st;
}
