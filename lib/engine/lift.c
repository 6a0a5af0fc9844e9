/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Lifts the tables of towers mod a few primes to one table of rational numbers.
 *
 * The columns of all towers are read side by side. Residues are joined in 128 bits (Garner's
 * form of Chinese remaindering), and FLINT reconstructs the fraction; a small cache helps, since
 * the same few numbers come again and again.
 */
#include <math.h>
#include <string.h>

#include "lift_private.h"

#define CACHE_SIZE 1024u

__extension__ typedef unsigned __int128 wide;

void idsi_lifted_clear(ids_ctx *ctx, idsi_lifted *table)
{
    idsi_free(ctx, table->start);
    idsi_free(ctx, table->normal);
    idsi_free(ctx, table->num);
    idsi_free(ctx, table->den);
    memset(table, 0, sizeof *table);
}

static void set_wide(mpz_ptr z, wide value)
{
    mpz_set_ui(z, (uint64_t)(value >> 64));
    mpz_mul_2exp(z, z, 64);
    mpz_add_ui(z, z, (uint64_t)value);
}

/* Reconstructs fractions; the same few residues come again and again, so some are remembered. */
typedef struct lifter {
    mpz_t residue;
    mpz_t modulus_z;
    mpq_t fraction;
    wide modulus;
    wide key[CACHE_SIZE];
    int64_t num[CACHE_SIZE];
    int64_t den[CACHE_SIZE]; /* 0: empty */
} lifter;

static bool fits(mpz_srcptr z)
{
    return mpz_sizeinbase(z, 2) <= 62;
}

static bool lift(lifter *l, wide residue, int64_t *num, int64_t *den)
{
    size_t slot = (size_t)((uint64_t)residue * UINT64_C(0x9E3779B97F4A7C15) >> 54) % CACHE_SIZE;
    if (l->den[slot] == 0 || l->key[slot] != residue) {
        set_wide(l->residue, residue);
        if (!idsi_border_reconstruct(l->fraction, l->residue, l->modulus_z) ||
            !fits(mpq_numref(l->fraction)) || !fits(mpq_denref(l->fraction))) {
            return false;
        }
        l->key[slot] = residue;
        l->num[slot] = mpz_get_si(mpq_numref(l->fraction));
        l->den[slot] = mpz_get_si(mpq_denref(l->fraction));
    }
    *num = l->num[slot];
    *den = l->den[slot];
    return true;
}

static uint32_t wide_mod(wide value, uint32_t p)
{
    return (uint32_t)(value % p);
}

/* Next entry of a column that any of the towers has; false at the end of the column. */
static bool next_entry(const idsi_lift_sources *src, uint64_t column, size_t *at, uint32_t *normal,
                       wide *residue)
{
    bool any = false;
    uint32_t largest = 0;

    for (size_t k = 0; k < src->count; k++) {
        if (at[k] < src->level[k]->start[column + 1]) {
            uint32_t n = src->level[k]->entries[at[k]].column;
            largest = n > largest ? n : largest;
            any = true;
        }
    }
    if (!any) {
        return false;
    }
    *normal = largest;
    wide modulus = 1;
    *residue = 0;
    for (size_t k = 0; k < src->count; k++) {
        uint32_t p = src->prime[k];
        uint32_t value = 0;
        if (at[k] < src->level[k]->start[column + 1] &&
            src->level[k]->entries[at[k]].column == largest) {
            value = src->level[k]->entries[at[k]].value;
            at[k]++;
        }
        uint32_t gap = (value + p - wide_mod(*residue, p)) % p;
        uint32_t step = idsi_mod_mul(gap, idsi_mod_inverse(wide_mod(modulus, p), p), p);
        *residue += modulus * step;
        modulus *= p;
    }
    return true;
}

/* Lifts a whole table; *ok is false when some entry has no small fraction. */
static ids_status lift_entries(ids_ctx *ctx, const idsi_lift_sources *src, lifter *l,
                               idsi_lifted *table, bool *ok)
{
    ids_status st = IDS_OK;
    uint64_t columns = src->level[0]->columns;
    size_t room = 0;
    size_t used = 0;

    for (size_t k = 0; k < src->count; k++) {
        room += src->level[k]->start[columns];
    }
    IDSI_TRY(idsi_alloc_array(ctx, columns + 1, sizeof *table->start, &table->start));
    IDSI_TRY(idsi_alloc_array(ctx, room, sizeof *table->normal, &table->normal));
    IDSI_TRY(idsi_alloc_array(ctx, room, sizeof *table->num, &table->num));
    IDSI_TRY(idsi_alloc_array(ctx, room, sizeof *table->den, &table->den));
    *ok = true;
    for (uint64_t c = 0; *ok && c < columns; c++) {
        size_t at[IDSI_LIFT_PRIMES];
        wide residue = 0;
        table->start[c] = used;
        for (size_t k = 0; k < src->count; k++) {
            at[k] = src->level[k]->start[c];
        }
        while (*ok && next_entry(src, c, at, &table->normal[used], &residue)) {
            *ok = lift(l, residue, &table->num[used], &table->den[used]);
            used++;
        }
    }
    table->start[columns] = used;
done:
    return st;
}

/* Common denominator and largest column sum of a lifted table. */
static void measure(idsi_lifted *table, uint64_t columns, mpz_ptr denominator)
{
    int64_t last = 1;
    double rho = 1;

    mpz_set_ui(denominator, 1);
    for (uint64_t c = 0; c < columns; c++) {
        double sum = 0;
        for (size_t i = table->start[c]; i < table->start[c + 1]; i++) {
            sum += fabs((double)table->num[i] / (double)table->den[i]);
            if (table->den[i] != last) {
                last = table->den[i];
                mpz_lcm_ui(denominator, denominator, (uint64_t)last);
            }
        }
        rho = fmax(rho, sum);
    }
    /* Rounded up: sums of a few million terms lose far less than one part in a million. */
    table->rho_bits = log2(rho) + 1e-6;
    table->den_bits = (double)mpz_sizeinbase(denominator, 2);
}

ids_status idsi_lift_table(ids_ctx *ctx, const idsi_lift_sources *src, idsi_lifted *table,
                           mpz_ptr denominator, bool *ok)
{
    ids_status st = IDS_OK;
    lifter *l = NULL;

    idsi_lifted_clear(ctx, table);
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *l, &l));
    mpz_init(l->residue);
    mpz_init(l->modulus_z);
    mpq_init(l->fraction);
    l->modulus = 1;
    for (size_t k = 0; k < src->count; k++) {
        l->modulus *= src->prime[k];
    }
    set_wide(l->modulus_z, l->modulus);
    st = lift_entries(ctx, src, l, table, ok);
    mpq_clear(l->fraction);
    mpz_clear(l->modulus_z);
    mpz_clear(l->residue);
    IDSI_TRY(st);
    if (*ok) {
        measure(table, src->level[0]->columns, denominator);
    }
done:
    idsi_free(ctx, l);
    return st;
}
