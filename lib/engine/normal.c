/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Normal forms as the public calls give them: a tower with tables in all its degrees, mod a prime
 * or with the proved rational tables beside it.
 *
 * A polynomial that comes as text is read as the candidate of a presentation with the same
 * operations. They are written behind it, and the word before it is hidden from messages, so that
 * places in messages are those of the text.
 */
#include <string.h>

#include "normal_private.h"

void ids_normal_forms_free(ids_normal_forms *forms)
{
    if (forms != NULL) {
        idsi_tower_clear(&forms->tower);
        idsi_proof_free(forms->proof);
        idsi_laws_free(forms->laws);
        idsi_free(forms->ctx, forms);
    }
}

static ids_status choose_options(ids_ctx *ctx, const ids_normal_options *options,
                                 ids_normal_options *chosen)
{
    ids_status st = IDS_OK;

    memset(chosen, 0, sizeof *chosen);
    if (options != NULL) {
        IDSI_TRY(
            idsi_check_struct(ctx, "ids_normal_options", options->struct_size, sizeof *options));
        *chosen = *options;
    }
    if (chosen->field != 0) {
        IDSI_TRY(idsi_prime_check(ctx, chosen->field));
        if (chosen->exact) {
            st = idsi_fail(ctx, IDS_ERR_ARG,
                           "normal forms over the rational numbers and over the field of %u "
                           "elements exclude each other",
                           chosen->field);
        }
    }
done:
    return st;
}

/* All degrees; with a proof, the prime is replaced when it is exceptional. */
static ids_status grow(ids_normal_forms *forms, uint32_t max_degree, idsi_random *random)
{
    ids_status st = IDS_OK;
    uint32_t starts = 0;

    for (uint32_t degree = 1; degree <= max_degree; degree++) {
        bool exceptional = false;
        IDSI_TRY(idsi_tower_grow(&forms->tower, true));
        if (forms->proof != NULL) {
            IDSI_TRY(idsi_proof_degree(forms->proof, &forms->tower, random, &exceptional));
        }
        if (!exceptional) {
            continue;
        }
        if (++starts == IDSI_PROOF_STARTS) {
            return idsi_proof_give_up(forms->ctx);
        }
        const uint32_t prime = idsi_prime_draw(random, &forms->tower.prime, 1);
        idsi_tower_clear(&forms->tower);
        idsi_tower_init(&forms->tower, forms->ctx, forms->laws, prime);
        idsi_proof_free(forms->proof);
        forms->proof = NULL;
        IDSI_TRY(idsi_proof_create(forms->ctx, forms->laws, &forms->proof));
        degree = 0;
    }
done:
    return st;
}

ids_status ids_normal_forms_create(ids_ctx *ctx, const ids_presentation *presentation,
                                   uint32_t max_degree, const ids_normal_options *options,
                                   ids_normal_forms **forms)
{
    ids_status st = IDS_OK;
    ids_normal_options chosen = {0};
    idsi_random random;
    ids_normal_forms *made = NULL;

    if (ctx == NULL || presentation == NULL || forms == NULL) {
        return idsi_fail_arg(ctx, "context, presentation or result");
    }
    if (max_degree == 0 || max_degree > IDS_MAX_DEGREE) {
        return idsi_fail(ctx, IDS_ERR_ARG, "degree %u: possible are 1 to %u", max_degree,
                         IDS_MAX_DEGREE);
    }
    IDSI_TRY(choose_options(ctx, options, &chosen));
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->pres = presentation;
    idsi_random_seed(&random, chosen.seed);
    uint32_t prime = chosen.field != 0 ? chosen.field : idsi_prime_draw(&random, NULL, 0);
    made->prime = chosen.exact ? 0 : prime;
    IDSI_TRY(idsi_laws_create_over(ctx, presentation, chosen.field, &made->laws));
    idsi_tower_init(&made->tower, ctx, made->laws, prime);
    if (chosen.exact) {
        IDSI_TRY(idsi_proof_create(ctx, made->laws, &made->proof));
    }
    IDSI_TRY(grow(made, max_degree, &random));
    *forms = made;
    made = NULL;
done:
    ids_normal_forms_free(made);
    return st;
}

uint32_t ids_normal_forms_max_degree(const ids_normal_forms *forms)
{
    return forms == NULL ? 0 : forms->tower.height;
}

uint32_t ids_normal_forms_prime(const ids_normal_forms *forms)
{
    return forms == NULL ? 0 : forms->prime;
}

uint64_t ids_normal_forms_count(const ids_normal_forms *forms, uint32_t degree)
{
    return degree == 0 || degree > ids_normal_forms_max_degree(forms)
               ? 0
               : forms->tower.level[degree].dimension;
}

/* ---- monomials ------------------------------------------------------------------------------- */

static ids_status check_index(ids_ctx *ctx, const ids_normal_forms *forms, uint32_t degree,
                              uint64_t index)
{
    uint64_t count = ids_normal_forms_count(forms, degree);
    if (index < count) {
        return IDS_OK;
    }
    return idsi_fail(ctx, IDS_ERR_ARG, "normal form %llu: degree %u has %llu of them here",
                     (unsigned long long)index, degree, (unsigned long long)count);
}

ids_status ids_normal_forms_mono(ids_ctx *ctx, const ids_normal_forms *forms, uint32_t degree,
                                 uint64_t index, ids_mono **mono)
{
    ids_status st = IDS_OK;
    idsi_token tree[IDSI_MAX_TOKENS];

    if (ctx == NULL || forms == NULL || mono == NULL) {
        return idsi_fail_arg(ctx, "context, normal forms or result");
    }
    IDSI_TRY(check_index(ctx, forms, degree, index));
    size_t length = idsi_normal_tree(&forms->tower, degree, index, idsi_labels_all(degree), tree);
    IDSI_TRY(idsi_mono_from_tokens(ctx, forms->pres->sig, tree, length, mono));
done:
    return st;
}

ids_status ids_normal_forms_print(ids_ctx *ctx, const ids_normal_forms *forms, uint32_t degree,
                                  uint64_t index, char **text)
{
    ids_status st = IDS_OK;
    ids_mono *mono = NULL;

    if (ctx == NULL || forms == NULL || text == NULL) {
        return idsi_fail_arg(ctx, "context, normal forms or result");
    }
    IDSI_TRY(ids_normal_forms_mono(ctx, forms, degree, index, &mono));
    IDSI_TRY(ids_mono_print(ctx, mono, text));
done:
    ids_mono_free(mono);
    return st;
}

/* ---- reduction ------------------------------------------------------------------------------- */

static ids_status check_degree(ids_ctx *ctx, const ids_normal_forms *forms, uint32_t degree)
{
    if (degree <= forms->tower.height) {
        return IDS_OK;
    }
    return idsi_fail(ctx, IDS_ERR_ARG, "degree %u: the normal forms go to degree %u", degree,
                     forms->tower.height);
}

/* Sum of terms of a polynomial that is multilinear in 1 .. degree. */
static ids_status reduce_poly(ids_ctx *ctx, const ids_normal_forms *forms, const idsi_poly *poly,
                              uint32_t degree, ids_combination **combination)
{
    ids_status st = IDS_OK;
    idsi_sum sum = {0};

    IDSI_TRY(check_degree(ctx, forms, degree));
    IDSI_TRY(idsi_sum_init(&sum, ctx, forms, degree));
    for (size_t t = 0; t < poly->count; t++) {
        IDSI_TRY(idsi_sum_tree(&sum, poly->tokens + poly->start[t], poly->coefficients[t]));
    }
    IDSI_TRY(idsi_sum_take(&sum, combination));
done:
    idsi_sum_clear(&sum);
    return st;
}

/* A presentation with one candidate and the operations of `sig`. */
static ids_status read_candidate(ids_ctx *ctx, const ids_signature *sig, const char *text,
                                 size_t length, const char *source, ids_presentation **pres)
{
    static const char before[] = "candidate ";
    ids_status st = IDS_OK;
    idsi_text whole;
    char *operation = NULL;

    idsi_text_init(&whole, ctx);
    IDSI_TRY(idsi_text_puts(&whole, before));
    IDSI_TRY(idsi_text_append(&whole, text, length));
    for (size_t i = 0; i < sig->count; i++) {
        IDSI_TRY(ids_signature_print_operation(ctx, sig, i, &operation));
        IDSI_TRY(idsi_text_printf(&whole, "\noperation %s", operation));
        ids_string_free(ctx, operation);
        operation = NULL;
    }
    IDSI_TRY(idsi_text_puts(&whole, "\n"));
    IDSI_TRY(idsi_presentation_read(ctx, whole.data, whole.length, source, true, sizeof before - 1,
                                    pres));
    if ((*pres)->count != 1 || (*pres)->sig->count != sig->count) {
        st = idsi_fail(ctx, IDS_ERR_PARSE, "%s: expected one polynomial and nothing else", source);
    }
done:
    ids_string_free(ctx, operation);
    idsi_text_clear(&whole);
    return st;
}

ids_status ids_normal_forms_reduce_text(ids_ctx *ctx, const ids_normal_forms *forms,
                                        const char *text, size_t length, const char *source,
                                        ids_combination **combination)
{
    ids_status st = IDS_OK;
    ids_presentation *pres = NULL;

    if (ctx == NULL || forms == NULL || text == NULL || combination == NULL) {
        return idsi_fail_arg(ctx, "context, normal forms, text or result");
    }
    source = source == NULL ? "polynomial" : source;
    IDSI_TRY(read_candidate(ctx, forms->pres->sig, text, length, source, &pres));
    const idsi_identity *identity = &pres->list[0];
    if (!identity->multilinear && identity->written.count > 0) {
        st = idsi_fail(ctx, IDS_ERR_DOMAIN,
                       "%s: a variable stands more than once in a term; a multilinear polynomial "
                       "is expected",
                       source);
        goto done;
    }
    IDSI_TRY(reduce_poly(ctx, forms, &identity->written, identity->degree, combination));
done:
    ids_presentation_free(pres);
    return st;
}

static bool is_multilinear(const ids_mono *mono)
{
    uint64_t labels = 0;
    for (uint32_t i = 0; i < mono->length; i++) {
        if (!idsi_is_node(mono->tokens[i])) {
            labels |= UINT64_C(1) << (mono->tokens[i] - 1);
        }
    }
    return labels == idsi_labels_all(mono->degree);
}

ids_status ids_normal_forms_reduce(ids_ctx *ctx, const ids_normal_forms *forms,
                                   const ids_mono *const *monomials, const int64_t *coefficients,
                                   size_t count, ids_combination **combination)
{
    ids_status st = IDS_OK;
    idsi_sum sum = {0};
    mpq_t coefficient;

    if (ctx == NULL || forms == NULL || monomials == NULL || combination == NULL || count == 0) {
        return idsi_fail_arg(ctx, "context, normal forms, monomials, count or result");
    }
    mpq_init(coefficient);
    for (size_t i = 0; i < count; i++) {
        const ids_mono *mono = monomials[i];
        if (mono == NULL || mono->sig != forms->pres->sig || mono->degree != monomials[0]->degree ||
            !is_multilinear(mono)) {
            st = idsi_fail(ctx, IDS_ERR_ARG,
                           "monomial %zu is NULL, of another signature or degree, or not "
                           "multilinear in 1, 2, ...",
                           i);
            goto done;
        }
        if (i == 0) {
            IDSI_TRY(check_degree(ctx, forms, mono->degree));
            IDSI_TRY(idsi_sum_init(&sum, ctx, forms, mono->degree));
        }
        mpq_set_si(coefficient, coefficients == NULL ? 1 : coefficients[i], 1);
        IDSI_TRY(idsi_sum_tree(&sum, mono->tokens, coefficient));
    }
    IDSI_TRY(idsi_sum_take(&sum, combination));
done:
    idsi_sum_clear(&sum);
    mpq_clear(coefficient);
    return st;
}

/* ---- products -------------------------------------------------------------------------------- */

static ids_status make_element(ids_ctx *ctx, const ids_normal_forms *forms,
                               const ids_factor *factor, idsi_element *element)
{
    ids_status st = IDS_OK;

    IDSI_TRY(check_index(ctx, forms, factor->degree, factor->index));
    element->degree = factor->degree;
    for (uint32_t i = 0; i < factor->degree; i++) {
        uint32_t label = factor->labels == NULL ? 0 : factor->labels[i];
        if (label == 0 || label > IDS_MAX_DEGREE ||
            (element->labels >> (label - 1) & UINT64_C(1)) != 0) {
            return idsi_fail(ctx, IDS_ERR_ARG,
                             "label %u of a factor: possible are different ones "
                             "from 1 on",
                             label);
        }
        element->labels |= UINT64_C(1) << (label - 1);
    }
    IDSI_TRY(idsi_combination_unit(ctx, forms, factor->degree, (uint32_t)factor->index,
                                   &element->value));
done:
    return st;
}

ids_status ids_normal_forms_product(ids_ctx *ctx, const ids_normal_forms *forms, size_t operation,
                                    const ids_factor *factors, size_t count,
                                    ids_combination **combination)
{
    ids_status st = IDS_OK;
    idsi_element args[IDS_MAX_ARITY] = {{0}};
    idsi_sum sum = {0};
    mpq_t one;
    uint64_t labels = 0;
    uint32_t degree = 0;

    if (ctx == NULL || forms == NULL || factors == NULL || combination == NULL) {
        return idsi_fail_arg(ctx, "context, normal forms, factors or result");
    }
    st = idsi_check_index(ctx, "operation", operation, forms->pres->sig->count);
    if (st != IDS_OK) {
        return st;
    }
    if (count != forms->pres->sig->ops[operation].arity) {
        return idsi_fail(ctx, IDS_ERR_ARG, "%zu factors: operation %zu has %u arguments", count,
                         operation, forms->pres->sig->ops[operation].arity);
    }
    mpq_init(one);
    mpq_set_ui(one, 1, 1);
    for (size_t i = 0; i < count; i++) {
        IDSI_TRY(make_element(ctx, forms, &factors[i], &args[i]));
        labels |= args[i].labels;
        degree += args[i].degree;
    }
    if (degree > IDS_MAX_DEGREE || labels != idsi_labels_all(degree)) {
        st = idsi_fail(ctx, IDS_ERR_ARG,
                       "the labels of all factors are 1 to the sum of their degrees, each once");
        goto done;
    }
    IDSI_TRY(check_degree(ctx, forms, degree));
    IDSI_TRY(idsi_sum_init(&sum, ctx, forms, degree));
    IDSI_TRY(idsi_sum_product(&sum, (uint32_t)operation, args, one));
    IDSI_TRY(idsi_sum_take(&sum, combination));
done:
    for (size_t i = 0; i < count; i++) {
        ids_combination_free(args[i].value);
    }
    idsi_sum_clear(&sum);
    mpq_clear(one);
    return st;
}
