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
