/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Verifies a counterexample: multiplies everything out, with fractions.
 *
 * The table is read by the reader of algebra files, and used through the public calls only. A tree
 * is evaluated as it stands: vectors for its arguments, then all constants of the operation. The
 * complete linearisation of every identity is tried on all tuples of basis elements; where the
 * first elements of a tuple make a subtree of every term 0, the tuples that begin with them need
 * no further look. The candidate, as written, is evaluated at the values that the file gives.
 */
#include <string.h>

#include <idspan/algebra.h>

#include "certificate_private.h"

typedef struct trial {
    ids_ctx *ctx;
    ids_algebra *algebra;
    const ids_signature *sig;
    uint32_t n;
    mpq_t *values;         /* of the candidate's variables, n for each */
    const idsi_poly *poly; /* that is evaluated */
    const mpq_t *points;   /* of its labels, n for each; unless a tuple is tried */
    uint32_t tuple[IDSI_MAX_IDENTITY_DEGREE];
    uint32_t filled; /* labels of the tuple that are chosen */
    mpq_t *vectors;  /* 2 * IDSI_MAX_IDENTITY_DEGREE of them, for trees */
    mpq_t *sum;
    mpq_t product;
    uint64_t tuples;
} trial;

/* ---- evaluation ------------------------------------------------------------------------------ */

/* What an evaluation comes to: a vector, 0, or not known, when labels are not chosen. */
typedef enum known { KNOWN_ZERO, KNOWN, NOT_KNOWN } known;

static known evaluate_leaf(trial *t, uint32_t label, mpq_t *out)
{
    bool any = false;

    if (t->points == NULL && label > t->filled) {
        return NOT_KNOWN;
    }
    for (uint32_t i = 0; i < t->n; i++) {
        if (t->points == NULL) {
            mpq_set_ui(out[i], t->tuple[label - 1] == i, 1);
        } else {
            mpq_set(out[i], t->points[(size_t)(label - 1) * t->n + i]);
        }
        any = any || mpq_sgn(out[i]) != 0;
    }
    return any ? KNOWN : KNOWN_ZERO;
}

/* The value of an operation on vectors level + 1, ...; `out` is vector `level`. */
static ids_status multiply(trial *t, uint32_t op, uint32_t arity, size_t level, bool *zero)
{
    ids_status st = IDS_OK;
    mpq_t *out = t->vectors + level * t->n;
    const size_t count = ids_algebra_count(t->algebra, op);
    ids_constant constant = {0};

    for (uint32_t i = 0; i < t->n; i++) {
        mpq_set_ui(out[i], 0, 1);
    }
    for (size_t k = 0; k < count; k++) {
        bool any = true;
        IDSI_TRY(ids_algebra_constant(t->algebra, op, k, &constant));
        for (uint32_t i = 0; any && i < arity; i++) {
            any = mpq_sgn(t->vectors[(level + 1 + i) * t->n + constant.argument[i]]) != 0;
        }
        if (!any) {
            continue;
        }
        mpq_set_si(t->product, (mp_limb_signed_t)constant.numerator,
                   (mp_limb_t)constant.denominator);
        for (uint32_t i = 0; i < arity; i++) {
            mpq_mul(t->product, t->product,
                    t->vectors[(level + 1 + i) * t->n + constant.argument[i]]);
        }
        mpq_add(out[constant.result], out[constant.result], t->product);
    }
    *zero = true;
    for (uint32_t i = 0; i < t->n; i++) {
        *zero = *zero && mpq_sgn(out[i]) == 0;
    }
done:
    return st;
}

static ids_status evaluate_tree(trial *t, const idsi_token **at, size_t level, known *result)
{
    ids_status st = IDS_OK;
    const idsi_token token = *(*at)++;
    bool zero = false;
    bool missing = false;

    if (!idsi_is_node(token)) {
        *result = evaluate_leaf(t, token, t->vectors + level * t->n);
        return IDS_OK;
    }
    const uint32_t op = idsi_node_op(token);
    const uint32_t arity = t->sig->ops[op].arity;
    for (uint32_t i = 0; i < arity; i++) {
        known argument = KNOWN;
        IDSI_TRY(evaluate_tree(t, at, level + 1 + i, &argument));
        zero = zero || argument == KNOWN_ZERO;
        missing = missing || argument == NOT_KNOWN;
    }
    if (!zero && !missing) {
        IDSI_TRY(multiply(t, op, arity, level, &zero));
    }
    *result = zero ? KNOWN_ZERO : missing ? NOT_KNOWN : KNOWN;
done:
    return st;
}

/* The sum of the terms of t->poly, to t->sum; not known when one of them is not. */
static ids_status evaluate(trial *t, known *result)
{
    ids_status st = IDS_OK;

    *result = KNOWN_ZERO;
    for (uint32_t i = 0; i < t->n; i++) {
        mpq_set_ui(t->sum[i], 0, 1);
    }
    for (size_t k = 0; k < t->poly->count && *result != NOT_KNOWN; k++) {
        const idsi_token *at = t->poly->tokens + t->poly->start[k];
        known term = KNOWN;
        IDSI_TRY(evaluate_tree(t, &at, 0, &term));
        if (term == NOT_KNOWN) {
            *result = NOT_KNOWN;
        }
        for (uint32_t i = 0; term == KNOWN && i < t->n; i++) {
            mpq_mul(t->product, t->vectors[i], t->poly->coefficients[k]);
            mpq_add(t->sum[i], t->sum[i], t->product);
        }
    }
    for (uint32_t i = 0; *result == KNOWN_ZERO && i < t->n; i++) {
        if (mpq_sgn(t->sum[i]) != 0) {
            *result = KNOWN;
        }
    }
done:
    return st;
}

/* ---- tuples ---------------------------------------------------------------------------------- */

/* n^rest, or the largest number. */
static uint64_t power(uint64_t n, uint32_t rest)
{
    uint64_t all = 1;
    for (uint32_t i = 0; i < rest; i++) {
        if (!idsi_mul_u64(all, n, &all)) {
            return UINT64_MAX;
        }
    }
    return all;
}

static ids_status try_tuples(trial *t, const idsi_identity *law)
{
    ids_status st = IDS_OK;
    known result = NOT_KNOWN;
    const uint32_t filled = t->filled;

    IDSI_TRY(idsi_poll(t->ctx, NULL));
    if (filled > 1) {
        IDSI_TRY(evaluate(t, &result));
    }
    if (result == KNOWN_ZERO) {
        if (!idsi_add_u64(t->tuples, power(t->n, law->degree - filled), &t->tuples)) {
            t->tuples = UINT64_MAX;
        }
        return IDS_OK;
    }
    if (result == KNOWN || filled == law->degree) {
        return idsi_fail(
            t->ctx, IDS_ERR_DOMAIN, "the identity%s%s%s does not hold in the algebra%s%s",
            law->name[0] == '\0' ? "" : " \"", law->name, law->name[0] == '\0' ? "" : "\"",
            filled > 0 ? ": its linearisation is "
                         "not 0 when the first variable is "
                       : "",
            filled > 0 ? ids_algebra_basis_name(t->algebra, t->tuple[0]) : "");
    }
    for (uint32_t b = 0; b < t->n; b++) {
        t->tuple[filled] = b;
        t->filled = filled + 1;
        IDSI_TRY(try_tuples(t, law));
    }
done:
    t->filled = filled;
    return st;
}

static ids_status try_identities(trial *t, const idsi_certificate *made)
{
    ids_status st = IDS_OK;

    t->points = NULL;
    for (size_t i = 0; i < made->pres->count; i++) {
        const idsi_identity *law = &made->pres->list[i];
        if (law->role != IDS_ROLE_IDENTITY || law->linear.count == 0) {
            continue;
        }
        t->poly = &law->linear;
        if (law->degree == 1) {
            return idsi_fail(t->ctx, IDS_ERR_DOMAIN, "an identity says that all elements are 0");
        }
        IDSI_TRY(try_tuples(t, law));
    }
done:
    return st;
}

static ids_status try_candidate(idsi_cursor *cursor, trial *t, const idsi_certificate *made)
{
    ids_status st = IDS_OK;
    known result = KNOWN;

    t->points = (const mpq_t *)t->values;
    t->poly = &made->claim->written;
    IDSI_TRY(evaluate(t, &result));
    if (result != KNOWN) {
        st = idsi_cursor_fail(cursor, IDS_ERR_DOMAIN, "the claim is 0 at these values");
    }
done:
    return st;
}

/* ---- the values ------------------------------------------------------------------------------ */

/* The basis element whose name stands at the cursor; the longest name counts. */
static ids_status read_element(idsi_cursor *cursor, const trial *t, uint32_t *element)
{
    const size_t left = (size_t)(cursor->line_end - cursor->at);
    size_t longest = 0;

    for (uint32_t i = 0; i < t->n; i++) {
        const char *name = ids_algebra_basis_name(t->algebra, i);
        const size_t length = strlen(name);
        if (length > longest && length <= left && memcmp(cursor->at, name, length) == 0) {
            longest = length;
            *element = i;
        }
    }
    if (longest == 0) {
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE, "expected a basis element");
    }
    cursor->at += longest;
    return IDS_OK;
}

static bool steps_over(idsi_cursor *cursor, const char *text)
{
    const size_t length = strlen(text);
    const bool there =
        (size_t)(cursor->line_end - cursor->at) >= length && memcmp(cursor->at, text, length) == 0;
    cursor->at += there ? length : 0;
    return there;
}

/* [-] [NUMBER *] NAME, then more with " + " or " - " between; or 0. */
static ids_status read_value(idsi_cursor *cursor, const trial *t, mpq_t *value)
{
    ids_status st = IDS_OK;
    bool negative = steps_over(cursor, "-");
    mpq_t number;

    mpq_init(number);
    if (!negative && steps_over(cursor, "0")) {
        goto done;
    }
    do {
        uint32_t element = 0;
        mpq_set_si(number, 1, 1);
        if (cursor->at < cursor->line_end && *cursor->at >= '0' && *cursor->at <= '9') {
            IDSI_TRY(idsi_cursor_rational(cursor, false, number));
            IDSI_TRY(idsi_cursor_expect(cursor, "*"));
        }
        IDSI_TRY(read_element(cursor, t, &element));
        if (negative) {
            mpq_neg(number, number);
        }
        if (mpq_sgn(value[element]) != 0) {
            st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "the basis element stands twice");
            goto done;
        }
        mpq_set(value[element], number);
        negative = steps_over(cursor, " - ");
    } while (negative || steps_over(cursor, " + "));
done:
    mpq_clear(number);
    return st;
}

static ids_status read_values(idsi_cursor *cursor, const trial *t, const idsi_certificate *made)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_cursor_expect(cursor, IDSI_COMMENT IDSI_FAILS_AT));
    for (uint32_t v = 0; v < made->spelling.count; v++) {
        IDSI_TRY(idsi_cursor_expect(cursor, v == 0 ? "" : ", "));
        IDSI_TRY(idsi_cursor_expect(cursor, made->names[v]));
        IDSI_TRY(idsi_cursor_expect(cursor, " = "));
        IDSI_TRY(read_value(cursor, t, t->values + (size_t)v * t->n));
    }
    IDSI_TRY(idsi_cursor_expect_end(cursor));
done:
    return st;
}

/* ---- all of it ------------------------------------------------------------------------------- */

static ids_status allocate(trial *t, size_t count, mpq_t **out)
{
    ids_status st = idsi_alloc_array(t->ctx, count, sizeof **out, out);
    for (size_t i = 0; st == IDS_OK && i < count; i++) {
        mpq_init((*out)[i]);
    }
    return st;
}

static void release(trial *t, size_t count, mpq_t *list)
{
    for (size_t i = 0; list != NULL && i < count; i++) {
        mpq_clear(list[i]);
    }
    idsi_free(t->ctx, list);
}

/* The table: the whole text is an algebra file, comments included. */
static ids_status read_algebra(idsi_cursor *cursor, trial *t, const idsi_certificate *made)
{
    ids_status st = IDS_OK;

    IDSI_TRY(ids_algebra_read(t->ctx, cursor->text, (size_t)(cursor->end - cursor->text),
                              cursor->source, &t->algebra));
    t->sig = ids_algebra_signature(t->algebra);
    t->n = ids_algebra_dimension(t->algebra);
    if (!idsi_signature_equal(t->sig, made->pres->sig)) {
        st = idsi_cursor_fail(cursor, IDS_ERR_DOMAIN,
                              "the operations of the algebra are not those of the presentation");
    }
done:
    return st;
}

ids_status idsi_check_algebra(idsi_cursor *cursor, const idsi_certificate *certificate,
                              ids_check_report *report)
{
    ids_status st = IDS_OK;
    trial t = {.ctx = certificate->ctx};
    const size_t vectors = 2u * (size_t)IDSI_MAX_IDENTITY_DEGREE;

    mpq_init(t.product);
    IDSI_TRY(idsi_cursor_next(cursor));
    IDSI_TRY(read_algebra(cursor, &t, certificate));
    IDSI_TRY(allocate(&t, (size_t)certificate->spelling.count * t.n, &t.values));
    IDSI_TRY(allocate(&t, vectors * t.n, &t.vectors));
    IDSI_TRY(allocate(&t, t.n, &t.sum));
    IDSI_TRY(read_values(cursor, &t, certificate));
    IDSI_TRY(try_candidate(cursor, &t, certificate));
    IDSI_TRY(try_identities(&t, certificate));
    report->dimension = t.n;
    report->tuples = t.tuples;
    for (size_t op = 0; op < t.sig->count; op++) {
        report->terms += ids_algebra_count(t.algebra, op);
    }
done:
    release(&t, (size_t)certificate->spelling.count * t.n, t.values);
    release(&t, vectors * t.n, t.vectors);
    release(&t, t.n, t.sum);
    mpq_clear(t.product);
    ids_algebra_free(t.algebra);
    return st;
}
