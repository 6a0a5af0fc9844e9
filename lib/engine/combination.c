/* SPDX-License-Identifier: BSD-2-Clause */
/* Combinations of normal forms, as the public calls give them; reduce.c makes them. */
#include "normal_private.h"

uint32_t ids_combination_degree(const ids_combination *combination)
{
    return combination == NULL ? 0 : combination->degree;
}

size_t ids_combination_count(const ids_combination *combination)
{
    return combination == NULL ? 0 : combination->count;
}

static bool fits(mpz_srcptr z)
{
    return mpz_sizeinbase(z, 2) <= 63;
}

static int64_t value_of(mpz_srcptr z)
{
    int64_t size = (int64_t)mpz_getlimbn(z, 0);
    return mpz_sgn(z) < 0 ? -size : size;
}

ids_status ids_combination_term(const ids_combination *combination, size_t term, uint64_t *index,
                                int64_t *numerator, int64_t *denominator)
{
    if (index == NULL || numerator == NULL || denominator == NULL ||
        term >= ids_combination_count(combination)) {
        return IDS_ERR_ARG;
    }
    mpq_srcptr value = combination->coefficient[term];
    if (!fits(mpq_numref(value)) || !fits(mpq_denref(value))) {
        return IDS_ERR_LIMIT;
    }
    *index = combination->index[term];
    *numerator = value_of(mpq_numref(value));
    *denominator = value_of(mpq_denref(value));
    return IDS_OK;
}

ids_status ids_combination_coefficient(ids_ctx *ctx, const ids_combination *combination,
                                       size_t term, char **text)
{
    ids_status st = IDS_OK;
    void *block = NULL;

    if (ctx == NULL || text == NULL || combination == NULL) {
        return idsi_fail_arg(ctx, "context, combination or result");
    }
    IDSI_TRY(idsi_check_index(ctx, "term", term, combination->count));
    mpq_srcptr value = combination->coefficient[term];
    size_t size = mpz_sizeinbase(mpq_numref(value), 10) + mpz_sizeinbase(mpq_denref(value), 10) + 3;
    IDSI_TRY(idsi_alloc(ctx, size, &block));
    *text = mpq_get_str(block, 10, value);
done:
    return st;
}

ids_status ids_combination_print(ids_ctx *ctx, const ids_combination *combination, char **text)
{
    ids_status st = IDS_OK;
    idsi_poly poly;
    idsi_text out;

    if (ctx == NULL || combination == NULL || text == NULL) {
        return idsi_fail_arg(ctx, "context, combination or result");
    }
    uint32_t degree = combination->degree;
    const ids_normal_forms *forms = combination->forms;
    idsi_text_init(&out, ctx);
    idsi_poly_init(&poly, ctx, forms->pres->sig);
    poly.variables = degree;
    for (size_t i = 0; i < combination->count; i++) {
        idsi_token tree[IDSI_MAX_TOKENS];
        size_t length = idsi_normal_tree(&forms->tower, degree, combination->index[i],
                                         idsi_labels_all(degree), tree);
        IDSI_TRY(idsi_poly_append(&poly, combination->coefficient[i], tree, length));
    }
    IDSI_TRY(idsi_poly_normalize(&poly));
    IDSI_TRY(idsi_poly_print(&poly, NULL, &out));
    IDSI_TRY(idsi_text_take(&out, text));
done:
    idsi_poly_clear(&poly);
    idsi_text_clear(&out);
    return st;
}
