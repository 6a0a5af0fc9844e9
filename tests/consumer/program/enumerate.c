/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Counts and lists: how many association types and monomials a commutative product has, exactly,
 * and the monomials of degree 4 one by one.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/gmp.h>
#include <idspan/idspan.h>

static ids_status print_counts(ids_ctx *ctx, const ids_signature *signature, uint32_t last)
{
    ids_counts *counts = NULL;
    mpz_t types, monomials;
    ids_status st = IDS_OK;

    mpz_init(types);
    mpz_init(monomials);
    st = ids_counts_create(ctx, signature, last, &counts);
    for (uint32_t degree = 1; st == IDS_OK && degree <= last; degree++) {
        st = ids_counts_types(counts, degree, types);
        if (st == IDS_OK) {
            st = ids_counts_monomials(counts, degree, monomials);
        }
        if (st == IDS_OK) {
            gmp_printf("degree %u: %Zd types, %Zd monomials\n", (unsigned)degree, types, monomials);
        }
    }
    ids_counts_free(counts);
    mpz_clear(types);
    mpz_clear(monomials);
    return st;
}

static ids_status print_monomials(ids_ctx *ctx, const ids_signature *signature, uint32_t degree)
{
    ids_types *types = NULL;
    ids_basis *basis = NULL;
    ids_iter *iter = NULL;
    const ids_mono_view *view = NULL;
    ids_status st = ids_types_create(ctx, signature, degree, &types);

    if (st == IDS_OK) {
        st = ids_basis_create(ctx, types, degree, &basis);
    }
    if (st == IDS_OK) {
        st = ids_iter_create(ctx, basis, 0, ids_basis_size(basis), &iter);
    }
    while (st == IDS_OK && (view = ids_iter_next(iter)) != NULL) {
        ids_mono *mono = NULL;
        char *text = NULL;
        st = ids_mono_create(ctx, signature, view->code, view->length, &mono);
        if (st == IDS_OK) {
            st = ids_mono_print(ctx, mono, &text);
        }
        if (st == IDS_OK) {
            printf("%2u  %s\n", (unsigned)view->index, text);
        }
        ids_string_free(ctx, text);
        ids_mono_free(mono);
    }
    ids_iter_free(iter);
    ids_basis_free(basis);
    ids_types_free(types);
    return st;
}

int main(void)
{
    ids_operation product;
    ids_ctx *ctx = NULL;
    ids_signature *signature = NULL;
    ids_status st = ids_ctx_create(NULL, &ctx);

    memset(&product, 0, sizeof product);
    product.notation = IDS_NOTATION_INFIX;
    product.open = "*";
    product.arity = 2;
    product.symmetry = IDS_SYMMETRY_COMMUTATIVE;
    if (st == IDS_OK) {
        st = ids_signature_create(ctx, &product, 1, &signature);
    }
    if (st == IDS_OK) {
        st = print_counts(ctx, signature, 10);
    }
    if (st == IDS_OK) {
        st = print_monomials(ctx, signature, 4);
    }
    if (st != IDS_OK) {
        fprintf(stderr, "%s: %s\n", ids_status_name(st), ids_ctx_message(ctx));
    }
    ids_signature_free(signature);
    ids_ctx_free(ctx);
    return st == IDS_OK ? EXIT_SUCCESS : EXIT_FAILURE;
}
