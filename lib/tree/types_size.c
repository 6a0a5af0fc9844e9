/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Whether a list of association types fits memory, told before the memory is taken: counting the
 * types of all degrees takes milliseconds (count.c), whatever their number.
 */
#include <idspan/gmp.h>

#include "tree_private.h"

/* What a type takes at least: its entry, two arguments and what the symmetry says of them, and
 * its place in the hash table. */
#define LEAST_BYTES (sizeof(idsi_type) + 2 * (sizeof(uint32_t) + sizeof(int8_t)) + sizeof(uint32_t))

/* Room for every number: of degree 64 there are fewer than 6^64 plane trees without nodes of one
 * argument (their growth is 3 + sqrt 8), so with 64 operations and labels there are fewer than
 * 6^64 * 64^63 * 64! monomials, a number of 253 digits. */
enum { LONGEST_NUMBER = 256 };

static ids_status refuse(ids_ctx *ctx, const ids_counts *counts, mpz_srcptr size)
{
    ids_status st = IDS_OK;
    uint32_t degree = ids_counts_max_degree(counts);
    uint64_t budget = ids_ctx_memory(ctx).budget;
    char types[LONGEST_NUMBER] = "";
    char monomials[LONGEST_NUMBER] = "";
    char bytes[LONGEST_NUMBER] = "";
    mpz_t number;

    mpz_init(number);
    IDSI_TRY(ids_counts_types(counts, degree, number));
    (void)mpz_get_str(types, 10, number);
    IDSI_TRY(ids_counts_monomials(counts, degree, number));
    (void)mpz_get_str(monomials, 10, number);
    mpz_mul_ui(number, size, LEAST_BYTES);
    (void)mpz_get_str(bytes, 10, number);
    if (budget > 0) {
        st = idsi_fail(ctx, IDS_ERR_LIMIT,
                       "degree %u has %s association types and %s multilinear monomials; listing "
                       "the types takes more than %s bytes, the budget is %llu bytes",
                       degree, types, monomials, bytes, (unsigned long long)budget);
    } else {
        st = idsi_fail(ctx, IDS_ERR_LIMIT,
                       "degree %u has %s association types and %s multilinear monomials; at most "
                       "%u types can be listed",
                       degree, types, monomials, UINT32_MAX);
    }
done:
    mpz_clear(number);
    return st;
}

ids_status idsi_types_check_size(ids_ctx *ctx, const ids_signature *sig, uint32_t max_degree,
                                 bool too_large)
{
    ids_status st = IDS_OK;
    uint64_t budget = ids_ctx_memory(ctx).budget;
    ids_counts *counts = NULL;
    mpz_t size; /* number of types of all degrees */
    mpz_t number;

    mpz_init(size);
    mpz_init(number);
    IDSI_TRY(ids_counts_create(ctx, sig, max_degree, &counts));
    for (uint32_t degree = 1; degree <= max_degree; degree++) {
        IDSI_TRY(ids_counts_types(counts, degree, number));
        mpz_add(size, size, number);
    }
    if (too_large || mpz_cmp_ui(size, UINT32_MAX) > 0 ||
        (budget > 0 && mpz_cmp_ui(size, budget / LEAST_BYTES) > 0)) {
        st = refuse(ctx, counts, size);
    }
done:
    mpz_clear(size);
    mpz_clear(number);
    ids_counts_free(counts);
    return st;
}
