/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Derivations and witnesses as files; the format is in certificate_private.h. The file carries
 * its own presentation, reduced to the identities and the one candidate.
 */
#include <inttypes.h>
#include <string.h>

#include "certificate_private.h"
#include "follows_private.h"

static bool means_something(const ids_signature *sig, const idsi_identity *claim, const char *name)
{
    for (size_t i = 0; i < sig->count; i++) {
        if (strcmp(sig->ops[i].open, name) == 0) {
            return true;
        }
    }
    for (uint32_t i = 0; i < claim->written.variables; i++) {
        if (strcmp(claim->letters[i], name) == 0) {
            return true;
        }
    }
    return false;
}

void idsi_certificate_names(const ids_signature *sig, const idsi_identity *claim,
                            char hole[IDSI_HOLE_CHARS], const char **names)
{
    memset(hole, 0, IDSI_HOLE_CHARS);
    for (size_t i = 0; i + 1 < IDSI_HOLE_CHARS; i++) {
        hole[i] = '_';
        if (!means_something(sig, claim, hole)) {
            break;
        }
    }
    for (uint32_t i = 0; i < claim->written.variables; i++) {
        names[i] = claim->letters[i];
    }
    names[claim->written.variables] = hole;
}

ids_status idsi_write_presentation(ids_ctx *ctx, const ids_presentation *pres,
                                   const idsi_identity *claim, char **text)
{
    ids_status st = IDS_OK;
    ids_presentation reduced = *pres;

    reduced.list = NULL;
    reduced.count = 0;
    IDSI_TRY(idsi_alloc_array(ctx, pres->count, sizeof *reduced.list, &reduced.list));
    for (size_t i = 0; i < pres->count; i++) {
        const idsi_identity *identity = &pres->list[i];
        if (identity->role == IDS_ROLE_IDENTITY || identity == claim) {
            reduced.list[reduced.count++] = *identity;
        }
    }
    IDSI_TRY(ids_presentation_print(ctx, &reduced, text));
done:
    idsi_free(ctx, reduced.list);
    return st;
}

/* The lines before the terms or values. */
static ids_status write_head(const idsi_component *c, const char *header, const char *what,
                             size_t count, idsi_text *text)
{
    ids_status st = IDS_OK;
    char *presentation = NULL;

    IDSI_TRY(idsi_write_presentation(text->ctx, c->pres, c->claim, &presentation));
    IDSI_TRY(idsi_text_printf(text, "%s\n%s\n%s%s\nclaim%s%s\ndegree %u\n%s %zu\n", header,
                              IDSI_BEGIN_PRESENTATION, presentation, IDSI_END_PRESENTATION,
                              c->claim->name[0] == '\0' ? "" : " ", c->claim->name, c->degree, what,
                              count));
done:
    ids_string_free(text->ctx, presentation);
    return st;
}

static ids_status write_number(idsi_text *text, mpq_srcptr number)
{
    ids_status st = IDS_OK;
    void *room = NULL;
    size_t digits =
        mpz_sizeinbase(mpq_numref(number), 10) + mpz_sizeinbase(mpq_denref(number), 10) + 3;

    IDSI_TRY(idsi_alloc(text->ctx, digits, &room));
    IDSI_TRY(idsi_text_puts(text, mpq_get_str(room, 10, number)));
done:
    idsi_free(text->ctx, room);
    return st;
}

/* The identity that a law of the component was made from. */
static ids_status write_law(const idsi_component *c, uint32_t law, idsi_text *text)
{
    size_t number = 0;
    const idsi_identity *identity = NULL;

    do {
        identity = idsi_presentation_get(c->pres, IDS_ROLE_IDENTITY, number);
        number++;
    } while (identity != NULL && &identity->linear != c->laws->law[law].poly);
    if (identity == NULL) {
        return idsi_fail(text->ctx, IDS_ERR_INTERNAL, "an identity is lost");
    }
    return identity->name[0] != '\0' ? idsi_text_puts(text, identity->name)
                                     : idsi_text_printf(text, "#%zu", number);
}

ids_status idsi_write_end(idsi_text *text, const char *prefix, ids_sink_fn sink, void *sink_user)
{
    ids_status st = IDS_OK;
    uint64_t mark = idsi_certificate_mark(text->data, text->length);

    IDSI_TRY(idsi_text_printf(text, "%send %016" PRIx64 "\n", prefix, mark));
    if (sink(sink_user, text->data, text->length) != 0) {
        st = idsi_fail(text->ctx, IDS_ERR_IO, "the output was refused");
    }
done:
    return st;
}

static ids_status write_term(const ids_derivation *derivation, size_t i, const char *const *names,
                             idsi_text *text)
{
    ids_status st = IDS_OK;
    const idsi_component *c = derivation->component;
    const idsi_instance *instance = &derivation->instances[i];

    IDSI_TRY(write_number(text, derivation->coefficients[i]));
    IDSI_TRY(idsi_text_puts(text, " : "));
    IDSI_TRY(write_law(c, instance->law, text));
    for (uint32_t k = 0; k < c->laws->law[instance->law].degree; k++) {
        IDSI_TRY(idsi_text_puts(text, k == 0 ? " : " : ", "));
        IDSI_TRY(idsi_tree_print(c->sig, idsi_component_argument(c, instance, k), names, text));
    }
    IDSI_TRY(idsi_text_puts(text, " : "));
    IDSI_TRY(idsi_tree_print(c->sig, idsi_component_context(c, instance), names, text));
    IDSI_TRY(idsi_text_puts(text, "\n"));
done:
    return st;
}

ids_status ids_derivation_write(ids_ctx *ctx, const ids_derivation *derivation, ids_sink_fn sink,
                                void *sink_user)
{
    ids_status st = IDS_OK;
    char hole[IDSI_HOLE_CHARS];
    const char *names[IDSI_MAX_IDENTITY_DEGREE + 1] = {0};
    idsi_text text;

    if (ctx == NULL || derivation == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, derivation or sink");
    }
    idsi_text_init(&text, ctx);
    idsi_certificate_names(derivation->component->sig, derivation->component->claim, hole, names);
    IDSI_TRY(
        write_head(derivation->component, IDSI_PROOF_HEADER, "terms", derivation->count, &text));
    for (size_t i = 0; i < derivation->count; i++) {
        IDSI_TRY(write_term(derivation, i, names, &text));
    }
    IDSI_TRY(idsi_write_end(&text, "", sink, sink_user));
done:
    idsi_text_clear(&text);
    return st;
}

/* ---- witnesses ------------------------------------------------------------------------------- */

typedef struct valued {
    const idsi_token *tree;
    mpz_srcptr value;
} valued;

/* Insertion into a list sorted by monomials; witnesses are small. */
static void insert_sorted(const ids_signature *sig, valued *list, size_t count, valued added)
{
    size_t low = 0;
    size_t high = count;

    while (low < high) {
        size_t middle = low + (high - low) / 2;
        if (idsi_tree_compare(sig, list[middle].tree, added.tree) < 0) {
            low = middle + 1;
        } else {
            high = middle;
        }
    }
    memmove(list + low + 1, list + low, (count - low) * sizeof *list);
    list[low] = added;
}

ids_status ids_witness_write(ids_ctx *ctx, const ids_witness *witness, ids_sink_fn sink,
                             void *sink_user)
{
    ids_status st = IDS_OK;
    char hole[IDSI_HOLE_CHARS];
    const char *names[IDSI_MAX_IDENTITY_DEGREE + 1] = {0};
    valued *list = NULL;
    size_t count = 0;
    idsi_text text;
    mpq_t number;

    if (ctx == NULL || witness == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, witness or sink");
    }
    mpq_init(number);
    idsi_text_init(&text, ctx);
    const idsi_component *c = witness->component;
    const idsi_forest *monomials = idsi_component_monomials(c);
    IDSI_TRY(idsi_alloc_array(ctx, witness->count + 1, sizeof *list, &list));
    for (size_t m = 0; m < monomials->count; m++) {
        if (mpz_sgn(witness->values[m]) != 0) {
            valued added = {monomials->tokens + monomials->list[m].start, witness->values[m]};
            insert_sorted(c->sig, list, count, added);
            count++;
        }
    }
    idsi_certificate_names(c->sig, c->claim, hole, names);
    IDSI_TRY(write_head(c, IDSI_WITNESS_HEADER, "values", count, &text));
    for (size_t i = 0; i < count; i++) {
        mpq_set_z(number, list[i].value);
        IDSI_TRY(write_number(&text, number));
        IDSI_TRY(idsi_text_puts(&text, " : "));
        IDSI_TRY(idsi_tree_print(c->sig, list[i].tree, names, &text));
        IDSI_TRY(idsi_text_puts(&text, "\n"));
    }
    IDSI_TRY(idsi_write_end(&text, "", sink, sink_user));
done:
    mpq_clear(number);
    idsi_text_clear(&text);
    idsi_free(ctx, list);
    return st;
}
