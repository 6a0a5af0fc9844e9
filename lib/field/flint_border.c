/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The only file that sees FLINT.
 *
 * FLINT aborts the process when memory runs out or an argument is outside its domain. So each
 * function here checks what FLINT would throw on before it calls, and bounds the size of what
 * FLINT allocates. No process-wide setting of FLINT or GMP is touched.
 */
#include <flint/flint.h>
#include <flint/fmpq.h>
#include <flint/fmpz.h>
#include <flint/fmpz_lll.h>
#include <flint/fmpz_mat.h>
#include <flint/ulong_extras.h>

#include "field_private.h"

bool idsi_border_is_prime(uint64_t n)
{
    return n_is_prime((mp_limb_t)n) != 0;
}

const char *idsi_border_version(void)
{
    return flint_version;
}

bool idsi_border_reconstruct(mpq_ptr fraction, mpz_srcptr residue, mpz_srcptr modulus)
{
    fmpz_t a;
    fmpz_t m;
    fmpq_t found;

    if (mpz_cmp_ui(modulus, 1) <= 0) {
        return false;
    }
    fmpz_init(a);
    fmpz_init(m);
    fmpq_init(found);
    fmpz_set_mpz(a, residue);
    fmpz_set_mpz(m, modulus);
    fmpz_mod(a, a, m);
    bool ok = fmpq_reconstruct_fmpz(found, a, m) != 0;
    if (ok) {
        fmpq_get_mpq(fraction, found);
    }
    fmpq_clear(found);
    fmpz_clear(m);
    fmpz_clear(a);
    return ok;
}

#define MOST_ROWS 512u
#define MOST_COLUMNS 65536u
#define MOST_BITS 4096u

/* What the matrix, the transformations of its rows and their floating-point images take. */
static ids_status check_lattice(ids_ctx *ctx, mpz_t *rows, size_t count, size_t columns)
{
    size_t bits = 64;

    if (count == 0 || count > MOST_ROWS || columns == 0 || columns > MOST_COLUMNS) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "a lattice of %zu vectors with %zu entries", count,
                         columns);
    }
    for (size_t i = 0; i < count * columns; i++) {
        const size_t size = mpz_sizeinbase(rows[i], 2);
        bits = size > bits ? size : bits;
    }
    if (bits > MOST_BITS) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "a lattice whose entries have more than %u bits",
                         MOST_BITS);
    }
    return idsi_budget_check(ctx, (uint64_t)count * (columns + 4 * count) * (bits / 8 + 32),
                             "a lattice");
}

ids_status idsi_border_shorten(ids_ctx *ctx, mpz_t *rows, size_t count, size_t columns)
{
    fmpz_mat_t basis;
    fmpz_lll_t how;
    ids_status st = check_lattice(ctx, rows, count, columns);

    if (st != IDS_OK) {
        return st;
    }
    fmpz_mat_init(basis, (slong)count, (slong)columns);
    fmpz_lll_context_init_default(how);
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < columns; j++) {
            fmpz_set_mpz(fmpz_mat_entry(basis, (slong)i, (slong)j), rows[i * columns + j]);
        }
    }
    fmpz_lll(basis, NULL, how);
    for (size_t i = 0; i < count; i++) {
        for (size_t j = 0; j < columns; j++) {
            fmpz_get_mpz(rows[i * columns + j], fmpz_mat_entry(basis, (slong)i, (slong)j));
        }
    }
    fmpz_mat_clear(basis);
    return IDS_OK;
}
