/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The checker: reads a derivation, a witness or a counterexample and verifies it from what the file
 * itself says.
 *
 * It includes nothing of the solvers. With them it shares the reader of presentations and the
 * collecting of polynomials (lib/identity), the canonical form (lib/tree), and the form of the
 * file (certificate_private.h). A derivation is multiplied out term by term, the candidate is
 * subtracted, and nothing may be left. All arithmetic is exact.
 */
#include <inttypes.h>
#include <stdio.h>
#include <string.h>

#include <idspan/follows.h>

#include "certificate_private.h"

/* Terms that are collected before equal ones are joined. */
#define JOIN_AFTER 16384u

size_t idsi_check_substitute(const idsi_token *tree, size_t length, const idsi_token *const *inside,
                             const size_t *inside_length, size_t insides, idsi_token *out)
{
    size_t used = 0;

    for (size_t i = 0; i < length; i++) {
        size_t label = idsi_is_node(tree[i]) ? 0 : tree[i];
        if (label == 0 || label > insides || inside[label - 1] == NULL) {
            out[used++] = tree[i];
        } else {
            memcpy(out + used, inside[label - 1], inside_length[label - 1] * sizeof *out);
            used += inside_length[label - 1];
        }
    }
    return used;
}

/* ---- head and end ---------------------------------------------------------------------------- */

/* The last line is a mark of all before it; *end becomes the begin of that line. */
static ids_status check_mark(idsi_cursor *cursor, const char *prefix)
{
    const char *last = cursor->end;
    char mark[32];

    if (last > cursor->text && last[-1] == '\n') {
        last--;
        while (last > cursor->text && last[-1] != '\n') {
            last--;
        }
        /* Without such a line the mark is that of the whole, to be written behind it. */
        (void)snprintf(mark, sizeof mark, "%send", prefix);
        last = strncmp(last, mark, strlen(mark)) == 0 ? last : cursor->end;
    }
    (void)snprintf(mark, sizeof mark, "%send %016" PRIx64 "\n", prefix,
                   idsi_certificate_mark(cursor->text, (size_t)(last - cursor->text)));
    if ((size_t)(cursor->end - last) != strlen(mark) || memcmp(last, mark, strlen(mark)) != 0) {
        for (const char *at = cursor->text; at < last; at++) {
            cursor->number += *at == '\n';
        }
        cursor->line = cursor->text;
        cursor->at = cursor->text;
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE,
                                "the mark at the end does not fit the file: it was damaged or "
                                "changed, or is not whole; a file that is as it should be ends in "
                                "the line \"%.*s\"",
                                (int)strlen(mark) - 1, mark);
    }
    cursor->end = last;
    return IDS_OK;
}

/* Blanks in the place of the comment signs before the lines. */
static void strip_comments(char *text, size_t length)
{
    for (size_t i = 0; i + 1 < length; i++) {
        if ((i == 0 || text[i - 1] == '\n') && text[i] == IDSI_COMMENT[0]) {
            text[i] = ' ';
        }
    }
}

/* Reads the presentation, behind empty lines, so that its messages have the right numbers. */
static ids_status read_presentation(idsi_cursor *cursor, const char *prefix,
                                    idsi_certificate *made)
{
    ids_status st = IDS_OK;
    char *text = NULL;
    const char *begin = NULL;
    size_t before = 0;
    size_t length = 0;

    IDSI_TRY(idsi_cursor_next(cursor));
    IDSI_TRY(idsi_cursor_expect(cursor, prefix));
    IDSI_TRY(idsi_cursor_expect(cursor, IDSI_BEGIN_PRESENTATION));
    IDSI_TRY(idsi_cursor_expect_end(cursor));
    before = cursor->number;
    begin = cursor->line_end + 1;
    do {
        IDSI_TRY(idsi_cursor_next(cursor));
        IDSI_TRY(idsi_cursor_expect(cursor, prefix));
        length = (size_t)(cursor->line - begin);
    } while (idsi_cursor_expect(cursor, IDSI_END_PRESENTATION) != IDS_OK);
    IDSI_TRY(idsi_cursor_expect_end(cursor));
    IDSI_TRY(idsi_alloc_array(cursor->ctx, before + length, 1, &text));
    memset(text, '\n', before);
    memcpy(text + before, begin, length);
    if (prefix[0] != '\0') {
        strip_comments(text + before, length);
    }
    IDSI_TRY(
        ids_presentation_read(cursor->ctx, text, before + length, cursor->source, &made->pres));
    made->claim = idsi_presentation_get(made->pres, IDS_ROLE_CANDIDATE, 0);
    if (made->claim == NULL || ids_presentation_count(made->pres, IDS_ROLE_CANDIDATE) != 1) {
        st = idsi_cursor_fail(cursor, IDS_ERR_PARSE,
                              "the presentation has %zu candidates; expected one, the claim",
                              ids_presentation_count(made->pres, IDS_ROLE_CANDIDATE));
    }
done:
    idsi_free(cursor->ctx, text);
    return st;
}

static ids_status read_claim(idsi_cursor *cursor, const char *prefix, idsi_certificate *made)
{
    ids_status st = IDS_OK;
    const idsi_identity *claim = made->claim;
    uint64_t degree = 0;

    IDSI_TRY(idsi_cursor_next(cursor));
    IDSI_TRY(idsi_cursor_expect(cursor, prefix));
    IDSI_TRY(idsi_cursor_expect(cursor, "claim"));
    if (claim->name[0] != '\0') {
        IDSI_TRY(idsi_cursor_expect(cursor, " "));
        IDSI_TRY(idsi_cursor_expect(cursor, claim->name));
    }
    IDSI_TRY(idsi_cursor_expect_end(cursor));
    IDSI_TRY(idsi_cursor_next(cursor));
    IDSI_TRY(idsi_cursor_expect(cursor, prefix));
    IDSI_TRY(idsi_cursor_expect(cursor, "degree "));
    IDSI_TRY(idsi_cursor_count(cursor, IDSI_MAX_IDENTITY_DEGREE, &degree));
    IDSI_TRY(idsi_cursor_expect_end(cursor));
    if (degree != claim->degree) {
        st = idsi_cursor_fail(cursor, IDS_ERR_DOMAIN, "the claim has degree %u", claim->degree);
        goto done;
    }
    made->degree = claim->degree;
    idsi_certificate_names(made->pres->sig, claim, made->hole, made->names);
    made->spelling = (idsi_spelling){made->pres->sig, made->names, claim->written.variables};
done:
    return st;
}

/* ---- derivations ----------------------------------------------------------------------------- */

typedef struct term {
    mpq_t coefficient;
    const idsi_identity *law;
    size_t used; /* tokens of all arguments */
    idsi_token argument[IDSI_MAX_IDENTITY_DEGREE][2u * IDSI_MAX_IDENTITY_DEGREE];
    const idsi_token *inside[IDSI_MAX_IDENTITY_DEGREE];
    size_t length[IDSI_MAX_IDENTITY_DEGREE];
    idsi_token context[2u * IDSI_MAX_IDENTITY_DEGREE];
    size_t context_length;
} term;

/* "NAME : " or "#number : ". */
static ids_status read_law(idsi_cursor *cursor, const idsi_certificate *made, term *t)
{
    ids_status st = IDS_OK;
    uint64_t number = 0;
    size_t left = (size_t)(cursor->line_end - cursor->at);

    if (left > 0 && *cursor->at == '#') {
        cursor->at++;
        IDSI_TRY(idsi_cursor_count(cursor, UINT32_MAX, &number));
        t->law = idsi_presentation_get(made->pres, IDS_ROLE_IDENTITY, (size_t)number - 1);
        if (number == 0 || t->law == NULL || t->law->name[0] != '\0') {
            return idsi_cursor_fail(cursor, IDS_ERR_PARSE, "there is no such identity");
        }
        return idsi_cursor_expect(cursor, " : ");
    }
    t->law = NULL;
    for (size_t i = 0; t->law == NULL; i++) {
        const idsi_identity *known = idsi_presentation_get(made->pres, IDS_ROLE_IDENTITY, i);
        if (known == NULL) {
            return idsi_cursor_fail(cursor, IDS_ERR_PARSE, "there is no identity of that name");
        }
        size_t length = strlen(known->name);
        if (length > 0 && left >= length + 3 && memcmp(cursor->at, known->name, length) == 0 &&
            memcmp(cursor->at + length, " : ", 3) == 0) {
            t->law = known;
            cursor->at += length + 3;
        }
    }
done:
    return st;
}

static size_t count_label(const idsi_token *tree, size_t length, idsi_token label)
{
    size_t count = 0;
    for (size_t i = 0; i < length; i++) {
        count += tree[i] == label;
    }
    return count;
}

static ids_status read_term(idsi_cursor *cursor, const idsi_certificate *made, term *t)
{
    ids_status st = IDS_OK;
    const ids_signature *sig = made->pres->sig;
    idsi_spelling with_hole = made->spelling;
    uint32_t degree = 0;

    IDSI_TRY(idsi_cursor_rational(cursor, true, t->coefficient));
    IDSI_TRY(idsi_cursor_expect(cursor, " : "));
    IDSI_TRY(read_law(cursor, made, t));
    for (uint32_t i = 0; i < t->law->degree; i++) {
        IDSI_TRY(idsi_cursor_expect(cursor, i == 0 ? "" : ", "));
        IDSI_TRY(idsi_cursor_tree(cursor, &made->spelling, t->argument[i], &t->length[i]));
        t->inside[i] = t->argument[i];
        degree += idsi_tree_degree(sig, t->argument[i]);
    }
    IDSI_TRY(idsi_cursor_expect(cursor, " : "));
    with_hole.count++;
    IDSI_TRY(idsi_cursor_tree(cursor, &with_hole, t->context, &t->context_length));
    IDSI_TRY(idsi_cursor_expect_end(cursor));
    if (count_label(t->context, t->context_length, with_hole.count) != 1) {
        st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "expected %s once, for the consequence",
                              made->hole);
        goto done;
    }
    degree += idsi_tree_degree(sig, t->context) - 1;
    if (degree != made->degree) {
        st = idsi_cursor_fail(cursor, IDS_ERR_DOMAIN, "the term has degree %u, the claim %u",
                              degree, made->degree);
    }
done:
    return st;
}

/* Adds coefficient * context[law(arguments)] to a sum. */
static ids_status multiply_out(const idsi_certificate *made, const term *t, idsi_poly *sum)
{
    ids_status st = IDS_OK;
    const idsi_poly *law = &t->law->linear;
    idsi_token inner[IDSI_MAX_TOKENS];
    idsi_token outer[IDSI_MAX_TOKENS];
    const idsi_token *hole[IDSI_MAX_IDENTITY_DEGREE + 1] = {0};
    size_t hole_length[IDSI_MAX_IDENTITY_DEGREE + 1] = {0};
    mpq_t product;

    mpq_init(product);
    hole[made->spelling.count] = inner;
    for (size_t i = 0; i < law->count; i++) {
        hole_length[made->spelling.count] =
            idsi_check_substitute(law->tokens + law->start[i], law->start[i + 1] - law->start[i],
                                  t->inside, t->length, t->law->degree, inner);
        size_t used = idsi_check_substitute(t->context, t->context_length, hole, hole_length,
                                            made->spelling.count + 1u, outer);
        mpq_mul(product, t->coefficient, law->coefficients[i]);
        IDSI_TRY(idsi_poly_append(sum, product, outer, used));
    }
done:
    mpq_clear(product);
    return st;
}

static ids_status subtract_claim(const idsi_certificate *made, idsi_poly *sum)
{
    ids_status st = IDS_OK;
    const idsi_poly *claim = &made->claim->written;
    mpq_t negative;

    mpq_init(negative);
    for (size_t i = 0; i < claim->count; i++) {
        mpq_neg(negative, claim->coefficients[i]);
        IDSI_TRY(idsi_poly_append(sum, negative, claim->tokens + claim->start[i],
                                  claim->start[i + 1] - claim->start[i]));
    }
    IDSI_TRY(idsi_poly_normalize(sum));
done:
    mpq_clear(negative);
    return st;
}

static ids_status check_derivation(idsi_cursor *cursor, const idsi_certificate *made,
                                   uint64_t *monomials)
{
    ids_status st = IDS_OK;
    idsi_poly sum;
    term *t = NULL;
    size_t join = JOIN_AFTER;

    idsi_poly_init(&sum, made->ctx, made->pres->sig);
    IDSI_TRY(idsi_alloc_array(made->ctx, 1, sizeof *t, &t));
    mpq_init(t->coefficient);
    for (uint64_t k = 0; k < made->count; k++) {
        IDSI_TRY(idsi_poll(made->ctx, NULL));
        IDSI_TRY(idsi_cursor_next(cursor));
        IDSI_TRY(read_term(cursor, made, t));
        *monomials += t->law->linear.count;
        IDSI_TRY(multiply_out(made, t, &sum));
        if (sum.count > join) {
            IDSI_TRY(idsi_poly_normalize(&sum));
            join = 2 * sum.count + JOIN_AFTER;
        }
    }
    IDSI_TRY(subtract_claim(made, &sum));
    if (sum.count > 0) {
        st = idsi_cursor_fail(cursor, IDS_ERR_DOMAIN,
                              "the terms do not add up to the claim: %zu monomial%s left over",
                              sum.count, sum.count == 1 ? " is" : "s are");
    }
done:
    if (t != NULL) {
        mpq_clear(t->coefficient);
    }
    idsi_free(made->ctx, t);
    idsi_poly_clear(&sum);
    return st;
}

/* ---- witnesses ------------------------------------------------------------------------------- */

/* Each variable as often as in the claim. */
static bool has_content(const idsi_certificate *made, const idsi_token *tree, size_t length)
{
    const idsi_poly *claim = &made->claim->written;

    for (uint32_t v = 1; v <= made->spelling.count; v++) {
        if (count_label(tree, length, v) != count_label(claim->tokens, claim->start[1], v)) {
            return false;
        }
    }
    return true;
}

static ids_status read_value(idsi_cursor *cursor, const idsi_certificate *made,
                             idsi_value_list *list)
{
    ids_status st = IDS_OK;
    const ids_signature *sig = made->pres->sig;
    idsi_token *tree = list->tree[list->count];
    idsi_token canonical[2u * IDSI_MAX_IDENTITY_DEGREE];
    size_t length = 0;
    mpq_t number;

    mpq_init(number);
    IDSI_TRY(idsi_cursor_next(cursor));
    IDSI_TRY(idsi_cursor_rational(cursor, false, number));
    mpz_set(list->value[list->count], mpq_numref(number));
    IDSI_TRY(idsi_cursor_expect(cursor, " : "));
    IDSI_TRY(idsi_cursor_tree(cursor, &made->spelling, tree, &length));
    IDSI_TRY(idsi_cursor_expect_end(cursor));
    memcpy(canonical, tree, length * sizeof *tree);
    if (idsi_tree_canonicalize(sig, canonical, length) == 0 ||
        memcmp(canonical, tree, length * sizeof *tree) != 0) {
        st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "the monomial is not in canonical form");
        goto done;
    }
    if (made->claim->written.count == 0 || !has_content(made, tree, length)) {
        st = idsi_cursor_fail(cursor, IDS_ERR_DOMAIN,
                              "the monomial has other variables than the claim");
        goto done;
    }
    if (list->count > 0 && idsi_tree_compare(sig, list->tree[list->count - 1], tree) >= 0) {
        st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "the monomials are not in increasing order");
        goto done;
    }
    list->count++;
done:
    mpq_clear(number);
    return st;
}

static ids_status check_values(idsi_cursor *cursor, const idsi_certificate *made,
                               uint64_t *consequences)
{
    ids_status st = IDS_OK;
    idsi_value_list list = {0};
    size_t ready = 0;

    /* Every line has some bytes, so a wrong count cannot ask for much memory. */
    if (made->count > (uint64_t)(cursor->end - cursor->text)) {
        return idsi_cursor_fail(cursor, IDS_ERR_PARSE, "the file is too short for so many values");
    }
    IDSI_TRY(idsi_alloc_array(made->ctx, (size_t)made->count, sizeof *list.tree, &list.tree));
    IDSI_TRY(idsi_alloc_array(made->ctx, (size_t)made->count, sizeof *list.value, &list.value));
    for (; ready < made->count; ready++) {
        mpz_init(list.value[ready]);
    }
    while (list.count < made->count) {
        IDSI_TRY(read_value(cursor, made, &list));
    }
    IDSI_TRY(idsi_check_witness(made, &list, consequences));
done:
    for (size_t i = 0; i < ready; i++) {
        mpz_clear(list.value[i]);
    }
    idsi_free(made->ctx, list.tree);
    idsi_free(made->ctx, list.value);
    return st;
}

/* ---- the whole file -------------------------------------------------------------------------- */

/* The terms or values, and nothing behind them. */
static ids_status check_lines(idsi_cursor *cursor, idsi_certificate *made, bool proof,
                              ids_check_report *report)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_cursor_next(cursor));
    IDSI_TRY(idsi_cursor_expect(cursor, proof ? "terms " : "values "));
    IDSI_TRY(idsi_cursor_count(cursor, UINT32_MAX, &made->count));
    IDSI_TRY(idsi_cursor_expect_end(cursor));
    if (proof) {
        IDSI_TRY(check_derivation(cursor, made, &report->monomials));
    } else {
        IDSI_TRY(check_values(cursor, made, &report->consequences));
    }
    if (cursor->line_end + 1 < cursor->end) {
        cursor->number++;
        cursor->at = cursor->line;
        st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "more lines than the %llu that were counted",
                              (unsigned long long)made->count);
        goto done;
    }
    report->follows = proof;
    report->terms = made->count;
done:
    return st;
}

static ids_status check_file(idsi_cursor *cursor, idsi_certificate *made, ids_check_report *report)
{
    static const char *const headers[3] = {IDSI_PROOF_HEADER, IDSI_WITNESS_HEADER,
                                           IDSI_COUNTEREXAMPLE_HEADER};
    ids_status st = IDS_OK;
    size_t kind = 0;

    IDSI_TRY(idsi_cursor_next(cursor));
    while (kind < 3 && idsi_cursor_expect(cursor, headers[kind]) != IDS_OK) {
        kind++;
    }
    if (kind == 3) {
        st = idsi_cursor_fail(cursor, IDS_ERR_PARSE, "expected \"%s\", \"%s\" or \"%s\"",
                              headers[0], headers[1], headers[2]);
        goto done;
    }
    const char *prefix = kind == 2 ? IDSI_COMMENT : "";
    IDSI_TRY(idsi_cursor_expect_end(cursor));
    IDSI_TRY(check_mark(cursor, prefix));
    IDSI_TRY(read_presentation(cursor, prefix, made));
    IDSI_TRY(read_claim(cursor, prefix, made));
    if (kind == 2) {
        IDSI_TRY(idsi_check_algebra(cursor, made, report));
    } else {
        IDSI_TRY(check_lines(cursor, made, kind == 0, report));
    }
    report->degree = made->degree;
    report->identities = ids_presentation_count(made->pres, IDS_ROLE_IDENTITY);
    (void)snprintf(report->claim, sizeof report->claim, "%s", made->claim->name);
done:
    return st;
}

ids_status ids_certificate_check(ids_ctx *ctx, const char *text, size_t length, const char *source,
                                 ids_check_report *report)
{
    ids_status st = IDS_OK;
    ids_check_report found = {0};
    idsi_certificate made = {.ctx = ctx};
    idsi_cursor cursor = {.ctx = ctx, .source = source == NULL ? "input" : source, .text = text};
    char *copy = NULL;

    if (ctx == NULL || text == NULL || report == NULL) {
        return idsi_fail_arg(ctx, "context, text or report");
    }
    cursor.end = text + length;
    IDSI_TRY(idsi_cursor_unify(&cursor, &copy));
    IDSI_TRY(check_file(&cursor, &made, &found));
    *report = found;
done:
    ids_presentation_free(made.pres);
    idsi_free(ctx, copy);
    return st;
}
