/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Numbers of association types and multilinear monomials, degree by degree.
 *
 * Both come from one solver (count_series.c): the types from the equation with cycle indices,
 * the monomials from that of scale^m * monomials(n) / n!, n = 1 + gap * m, so that only
 * geometrically growing numbers are held; a number of monomials is put together when it is asked
 * for.
 *
 * Invariant: both series reach max_degree, and types(n) is slot m of the one,
 * n! * slot m / scale^m the number of monomials from the other.
 */
#include "count_private.h"

#include <idspan/gmp.h>

struct ids_counts {
    ids_ctx *ctx;
    uint32_t max_degree;
    uint32_t gap;
    uint64_t scale;
    idsi_count_series types;
    idsi_count_series scaled; /* scale^m * monomials(1 + gap * m) / (1 + gap * m)! */
};

ids_status ids_counts_create(ids_ctx *ctx, const ids_signature *signature, uint32_t max_degree,
                             ids_counts **counts)
{
    ids_status st = IDS_OK;
    idsi_count_equation types = {0};
    idsi_count_equation scaled = {0};
    ids_counts *made = NULL;
    uint64_t last = 0;
    uint64_t need = 0;

    if (ctx == NULL || signature == NULL || counts == NULL) {
        return idsi_fail_arg(ctx, "context, signature or counts");
    }
    if (max_degree > IDS_MAX_COUNT_DEGREE) {
        return idsi_fail(ctx, IDS_ERR_ARG, "degree %u: counting goes up to degree %u", max_degree,
                         IDS_MAX_COUNT_DEGREE);
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->max_degree = max_degree;
    IDSI_TRY(idsi_count_types_equation(ctx, signature, NULL, 1, &types));
    IDSI_TRY(idsi_count_monomials_equation(ctx, signature, &scaled, &made->scale));
    idsi_count_bound(&types);
    idsi_count_bound(&scaled);
    made->gap = types.gap;
    last = idsi_count_last(&types, max_degree > 0 ? max_degree : 1);
    if (!idsi_add_u64(idsi_count_bytes(&types, last), idsi_count_bytes(&scaled, last), &need)) {
        need = UINT64_MAX;
    }
    IDSI_TRY(idsi_budget_check(ctx, need, "counting"));
    IDSI_TRY(idsi_count_solve(ctx, &types, last, 0, 0.3, &made->types));
    IDSI_TRY(idsi_count_solve(ctx, &scaled, last, 0.3, 1, &made->scaled));
    *counts = made;
    made = NULL;
done:
    idsi_count_equation_clear(ctx, &types);
    idsi_count_equation_clear(ctx, &scaled);
    ids_counts_free(made);
    return st;
}

void ids_counts_free(ids_counts *counts)
{
    if (counts != NULL) {
        idsi_count_series_clear(counts->ctx, &counts->types);
        idsi_count_series_clear(counts->ctx, &counts->scaled);
        idsi_free(counts->ctx, counts);
    }
}

/* Copies the slot of a degree, 0 where there is no tree; false there. */
static bool read_slot(const ids_counts *counts, const idsi_count_series *series, uint32_t degree,
                      mpz_t out)
{
    if (degree == 0 || (degree - 1) % counts->gap != 0) {
        mpz_set_ui(out, 0);
        return false;
    }
    idsi_count_series_get(series, (degree - 1) / counts->gap, out);
    return true;
}

uint32_t ids_counts_max_degree(const ids_counts *counts)
{
    return counts == NULL ? 0 : counts->max_degree;
}

ids_status ids_counts_types(const ids_counts *counts, uint32_t degree, mpz_t types)
{
    if (counts == NULL || types == NULL || degree > counts->max_degree) {
        return IDS_ERR_ARG;
    }
    (void)read_slot(counts, &counts->types, degree, types);
    return IDS_OK;
}

ids_status ids_counts_monomials(const ids_counts *counts, uint32_t degree, mpz_t monomials)
{
    mpz_t factor;

    if (counts == NULL || monomials == NULL || degree > counts->max_degree) {
        return IDS_ERR_ARG;
    }
    if (read_slot(counts, &counts->scaled, degree, monomials)) {
        mpz_init(factor);
        mpz_fac_ui(factor, degree);
        mpz_mul(monomials, monomials, factor);
        mpz_ui_pow_ui(factor, counts->scale, (degree - 1) / counts->gap);
        mpz_divexact(monomials, monomials, factor);
        mpz_clear(factor);
    }
    return IDS_OK;
}
