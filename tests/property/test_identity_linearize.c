/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Linearisation against its definition: all m! ways to put the labels of a variable on its
 * leaves, one by one, without a thought for symmetry.
 */
#include <string.h>

#include "random_identity.h"

typedef struct slow {
    idsi_poly *out;
    mpq_ptr coefficient;
    const idsi_token *tree;
    size_t length;
    uint32_t first[IDS_MAX_DEGREE + 2]; /* labels of variable v: first[v] .. first[v+1]-1 */
    uint32_t used;                      /* bit l: label l is on a leaf */
    idsi_token built[IDSI_MAX_TOKENS];
} slow;

static void put(slow *s, size_t at)
{
    if (at == s->length) {
        TEST_OK(s->out->ctx, idsi_poly_append(s->out, s->coefficient, s->built, s->length));
        return;
    }
    if (idsi_is_node(s->tree[at])) {
        s->built[at] = s->tree[at];
        put(s, at + 1);
        return;
    }
    const uint32_t variable = s->tree[at];
    for (uint32_t label = s->first[variable]; label < s->first[variable + 1]; label++) {
        if ((s->used >> label & 1u) == 0) {
            s->used |= 1u << label;
            s->built[at] = label;
            put(s, at + 1);
            s->used &= ~(1u << label);
        }
    }
}

static void linearize_slowly(const idsi_poly *poly, idsi_poly *out)
{
    slow s = {.out = out};
    uint32_t count[IDS_MAX_DEGREE + 2] = {0};
    for (size_t i = 0; poly->count > 0 && i < poly->start[1]; i++) {
        if (!idsi_is_node(poly->tokens[i])) {
            count[poly->tokens[i]]++;
        }
    }
    s.first[1] = 1;
    for (uint32_t v = 1; v <= poly->variables; v++) {
        s.first[v + 1] = s.first[v] + count[v];
    }
    for (size_t i = 0; i < poly->count; i++) {
        s.coefficient = poly->coefficients[i];
        s.tree = poly->tokens + poly->start[i];
        s.length = poly->start[i + 1] - poly->start[i];
        put(&s, 0);
    }
    TEST_OK(out->ctx, idsi_poly_normalize(out));
    TEST_OK(out->ctx, idsi_poly_primitive(out));
}

static void compare(const idsi_poly *poly)
{
    idsi_poly fast;
    idsi_poly slowly;
    idsi_poly_init(&fast, poly->ctx, poly->sig);
    idsi_poly_init(&slowly, poly->ctx, poly->sig);
    TEST_OK(poly->ctx, idsi_poly_linearize(poly, &fast));
    linearize_slowly(poly, &slowly);
    if (!idsi_poly_equal(&fast, &slowly)) {
        idsi_text text;
        idsi_text_init(&text, poly->ctx);
        TEST_OK(poly->ctx, idsi_poly_print(poly, NULL, &text));
        ck_abort_msg("linearised otherwise: %s", text.data);
    }
    idsi_poly_clear(&fast);
    idsi_poly_clear(&slowly);
}

START_TEST(test_random_polynomials)
{
    idsi_random random;
    test_random(&random, 21);
    for (uint64_t round = 0; round < 300 * test_scale(); round++) {
        ids_ctx *ctx = test_ctx();
        ids_signature *sig = random_signature(ctx, &random);
        idsi_poly poly;
        idsi_poly_init(&poly, ctx, sig);
        random_poly(&random, 6, &poly);
        TEST_OK(ctx, idsi_poly_normalize(&poly));
        compare(&poly);
        idsi_poly_clear(&poly);
        ids_signature_free(sig);
        test_ctx_free(ctx);
    }
}
END_TEST

/* Powers of one variable have the largest automorphism groups: all leaves are the same. */
START_TEST(test_random_powers)
{
    idsi_random random;
    mpq_t one;
    test_random(&random, 22);
    mpq_init(one);
    mpq_set_ui(one, 1, 1);
    for (uint64_t round = 0; round < 200 * test_scale(); round++) {
        ids_ctx *ctx = test_ctx();
        ids_signature *sig = random_signature(ctx, &random);
        idsi_token tree[IDSI_MAX_TOKENS];
        idsi_poly poly;
        idsi_poly_init(&poly, ctx, sig);
        poly.variables = 1;
        const size_t length = random_tree(&random, sig, 7, tree);
        TEST_OK(ctx, idsi_poly_append(&poly, one, tree, length));
        TEST_OK(ctx, idsi_poly_normalize(&poly));
        compare(&poly);
        idsi_poly_clear(&poly);
        ids_signature_free(sig);
        test_ctx_free(ctx);
    }
    mpq_clear(one);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("identity_linearize");
    TCase *tc = tcase_create("linearize");
    tcase_set_timeout(tc, 20);
    tcase_add_test(tc, test_random_polynomials);
    tcase_add_test(tc, test_random_powers);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
