/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Evaluates a witness on all consequences.
 *
 * Let the claim have n leaves. Number them so that equal variables stand together. A consequence
 * with the claim's variables comes from one with n different labels: every label goes to a place,
 * place 0 the context or place i the monomial for variable i of the law; then each place gets any
 * monomial on its labels, the context's with the hole as one label more. Labels of one variable may
 * be put in increasing order of places, since exchanging them changes nothing. The monomials are
 * those that the bases of lib/tree list. Symmetry of the laws is not used: this is slower than
 * what found the witness, and nothing can be left out by a wrong guess of a symmetry.
 */
#include <string.h>

#include "certificate_private.h"

#define PLACES (IDSI_MAX_IDENTITY_DEGREE + 1u)

/* All canonical multilinear monomials of one degree, end to end. */
typedef struct shelf {
    size_t count;
    size_t length; /* tokens of the longest */
    idsi_token *tokens;
    uint8_t *lengths;
} shelf;

typedef struct evaluation {
    ids_ctx *ctx;
    const idsi_certificate *made;
    const idsi_value_list *values;
    shelf shelves[IDSI_MAX_IDENTITY_DEGREE + 1];
    uint32_t variable[IDSI_MAX_IDENTITY_DEGREE]; /* of each of the n labels, from 1 */
    const idsi_identity *law;
    uint8_t place[IDSI_MAX_IDENTITY_DEGREE]; /* of each label */
    uint32_t size[PLACES];                   /* labels of each place */
    idsi_token tree[PLACES][2u * IDSI_MAX_IDENTITY_DEGREE];
    size_t length[PLACES];
    mpq_t sum;
    mpq_t product;
    uint64_t consequences;
} evaluation;

/* ---- monomials ------------------------------------------------------------------------------- */

static ids_status fill_shelf(ids_ctx *ctx, const ids_types *types, uint32_t degree, shelf *made)
{
    ids_status st = IDS_OK;
    ids_basis *basis = NULL;
    ids_iter *iter = NULL;
    const ids_mono_view *view = NULL;

    IDSI_TRY(ids_basis_create(ctx, types, degree, &basis));
    made->count = (size_t)ids_basis_size(basis);
    made->length = 2 * (size_t)degree - 1;
    IDSI_TRY(
        idsi_alloc_array(ctx, made->count, made->length * sizeof *made->tokens, &made->tokens));
    IDSI_TRY(idsi_alloc_array(ctx, made->count, 1, &made->lengths));
    IDSI_TRY(ids_iter_create(ctx, basis, 0, made->count, &iter));
    for (size_t i = 0; (view = ids_iter_next(iter)) != NULL; i++) {
        for (uint32_t k = 0; k < view->length; k++) {
            int32_t code = view->code[k];
            made->tokens[i * made->length + k] =
                code < 0 ? idsi_node((uint32_t)(-1 - code)) : (uint32_t)code;
        }
        made->lengths[i] = (uint8_t)view->length;
    }
done:
    ids_iter_free(iter);
    ids_basis_free(basis);
    return st;
}

static ids_status fill_shelves(evaluation *e)
{
    ids_status st = IDS_OK;
    ids_types *types = NULL;
    uint32_t least = IDSI_MAX_IDENTITY_DEGREE + 1;

    for (size_t i = 0; i < e->made->pres->count; i++) {
        const idsi_identity *law = &e->made->pres->list[i];
        if (law->role == IDS_ROLE_IDENTITY && law->linear.count > 0 && law->degree < least) {
            least = law->degree;
        }
    }
    if (least > e->made->degree) {
        return IDS_OK;
    }
    /* The largest monomial in a consequence, context or argument. */
    uint32_t most = e->made->degree - least + 1;
    IDSI_TRY(ids_types_create(e->ctx, e->made->pres->sig, most, &types));
    for (uint32_t degree = 1; degree <= most; degree++) {
        IDSI_TRY(fill_shelf(e->ctx, types, degree, &e->shelves[degree]));
    }
done:
    ids_types_free(types);
    return st;
}

/* ---- values ---------------------------------------------------------------------------------- */

/* Adds coefficient * value of a tree to the sum. */
static void add_value(evaluation *e, mpq_srcptr coefficient, idsi_token *tree, size_t length)
{
    const ids_signature *sig = e->made->pres->sig;
    int sign = idsi_tree_canonicalize(sig, tree, length);
    size_t low = 0;
    size_t high = e->values->count;

    while (sign != 0 && low < high) {
        size_t middle = low + (high - low) / 2;
        int order = idsi_tree_compare(sig, e->values->tree[middle], tree);
        if (order == 0) {
            mpq_set_z(e->product, e->values->value[middle]);
            mpq_mul(e->product, e->product, coefficient);
            if (sign < 0) {
                mpq_neg(e->product, e->product);
            }
            mpq_add(e->sum, e->sum, e->product);
            return;
        }
        low = order < 0 ? middle + 1 : low;
        high = order < 0 ? high : middle;
    }
}

/* The consequence that is laid out: context and arguments are in tree[]. */
static ids_status evaluate(evaluation *e)
{
    ids_status st = IDS_OK;
    const idsi_poly *law = &e->law->linear;
    uint32_t variables = e->made->spelling.count;
    const idsi_token *inside[PLACES] = {0};
    const idsi_token *hole[PLACES] = {0};
    size_t hole_length[PLACES] = {0};
    idsi_token inner[IDSI_MAX_TOKENS];
    idsi_token outer[IDSI_MAX_TOKENS];

    IDSI_TRY(idsi_poll(e->ctx, NULL));
    for (uint32_t i = 0; i < e->law->degree; i++) {
        inside[i] = e->tree[i + 1];
    }
    hole[variables] = inner;
    mpq_set_ui(e->sum, 0, 1);
    for (size_t t = 0; t < law->count; t++) {
        hole_length[variables] =
            idsi_check_substitute(law->tokens + law->start[t], law->start[t + 1] - law->start[t],
                                  inside, &e->length[1], e->law->degree, inner);
        size_t used = idsi_check_substitute(e->tree[0], e->length[0], hole, hole_length,
                                            variables + 1u, outer);
        add_value(e, law->coefficients[t], outer, used);
    }
    e->consequences++;
    if (mpq_sgn(e->sum) != 0) {
        st = idsi_fail(e->ctx, IDS_ERR_DOMAIN,
                       "the witness does not vanish on a consequence of the identity%s%s%s",
                       e->law->name[0] == '\0' ? "" : " \"", e->law->name,
                       e->law->name[0] == '\0' ? "" : "\"");
    }
done:
    return st;
}

/* ---- all consequences ------------------------------------------------------------------------ */

/* Every monomial for the places from `place` on, on the labels that these have. */
static ids_status choose_trees(evaluation *e, uint32_t place)
{
    ids_status st = IDS_OK;
    uint32_t label[IDSI_MAX_IDENTITY_DEGREE + 1];
    uint32_t count = 0;

    if (place > e->law->degree) {
        return evaluate(e);
    }
    for (uint32_t i = 0; i < e->made->degree; i++) {
        if (e->place[i] == place) {
            label[count++] = e->variable[i];
        }
    }
    if (place == 0) {
        label[count++] = e->made->spelling.count + 1;
    }
    const shelf *from = &e->shelves[count];
    for (size_t i = 0; i < from->count; i++) {
        const idsi_token *tree = from->tokens + i * from->length;
        e->length[place] = from->lengths[i];
        for (size_t k = 0; k < from->lengths[i]; k++) {
            e->tree[place][k] = idsi_is_node(tree[k]) ? tree[k] : label[tree[k] - 1];
        }
        IDSI_TRY(choose_trees(e, place + 1));
    }
done:
    return st;
}

/* Every place for the labels from number `at` on. */
static ids_status choose_places(evaluation *e, uint32_t at)
{
    ids_status st = IDS_OK;
    uint32_t empty = 0;
    uint8_t from = 0;

    for (uint32_t i = 1; i <= e->law->degree; i++) {
        empty += e->size[i] == 0;
    }
    if (at == e->made->degree) {
        return empty == 0 ? choose_trees(e, 0) : IDS_OK;
    }
    if (empty > e->made->degree - at) {
        return IDS_OK;
    }
    /* cppcheck-suppress arrayIndexOutOfBoundsCond ; `at` is below the degree here */
    if (at > 0 && e->variable[at] == e->variable[at - 1]) {
        from = e->place[at - 1];
    }
    for (uint8_t place = from; place <= e->law->degree; place++) {
        e->place[at] = place;
        e->size[place]++;
        st = choose_places(e, at + 1);
        e->size[place]--;
        if (st != IDS_OK) {
            return st;
        }
    }
    return st;
}

static ids_status check_claim(evaluation *e)
{
    const idsi_poly *claim = &e->made->claim->written;
    idsi_token tree[IDSI_MAX_TOKENS];

    mpq_set_ui(e->sum, 0, 1);
    for (size_t t = 0; t < claim->count; t++) {
        size_t length = claim->start[t + 1] - claim->start[t];
        memcpy(tree, claim->tokens + claim->start[t], length * sizeof *tree);
        add_value(e, claim->coefficients[t], tree, length);
    }
    if (mpq_sgn(e->sum) == 0) {
        return idsi_fail(e->ctx, IDS_ERR_DOMAIN, "the witness vanishes on the claim too");
    }
    return IDS_OK;
}

static void number_labels(evaluation *e)
{
    const idsi_poly *claim = &e->made->claim->written;
    uint32_t count = 0;

    for (uint32_t v = 1; claim->count > 0 && v <= e->made->spelling.count; v++) {
        for (size_t i = 0; i < claim->start[1]; i++) {
            if (claim->tokens[i] == v) {
                e->variable[count++] = v;
            }
        }
    }
}

ids_status idsi_check_witness(const idsi_certificate *certificate, const idsi_value_list *values,
                              uint64_t *consequences)
{
    ids_status st = IDS_OK;
    evaluation *e = NULL;

    IDSI_TRY(idsi_alloc_array(certificate->ctx, 1, sizeof *e, &e));
    e->ctx = certificate->ctx;
    e->made = certificate;
    e->values = values;
    mpq_init(e->sum);
    mpq_init(e->product);
    number_labels(e);
    IDSI_TRY(check_claim(e));
    IDSI_TRY(fill_shelves(e));
    for (size_t i = 0; i < certificate->pres->count; i++) {
        e->law = &certificate->pres->list[i];
        if (e->law->role == IDS_ROLE_IDENTITY && e->law->linear.count > 0 &&
            e->law->degree <= certificate->degree) {
            IDSI_TRY(choose_places(e, 0));
        }
    }
    *consequences = e->consequences;
done:
    if (e != NULL) {
        mpq_clear(e->sum);
        mpq_clear(e->product);
        for (uint32_t d = 0; d <= IDSI_MAX_IDENTITY_DEGREE; d++) {
            idsi_free(e->ctx, e->shelves[d].tokens);
            idsi_free(e->ctx, e->shelves[d].lengths);
        }
        idsi_free(e->ctx, e);
    }
    return st;
}
