/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Products of vectors in an algebra, mod a prime.
 *
 * The table of an operation is sorted by arguments, so those with a first argument that counts in
 * the vector are one run, and the constants of one product stand together: the product of the
 * coordinates is made once for them.
 */
#include <string.h>

#include "algebra_private.h"

static uint32_t residue_of(int64_t n, uint32_t p)
{
    const int64_t rest = n % (int64_t)p;
    return (uint32_t)(rest < 0 ? rest + (int64_t)p : rest);
}

ids_status idsi_residues_create(ids_ctx *ctx, const ids_algebra *algebra, uint32_t prime,
                                bool *good, idsi_residues **residues)
{
    ids_status st = IDS_OK;
    idsi_residues *made = NULL;

    *good = true;
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    *made = (idsi_residues){.ctx = ctx, .algebra = algebra, .prime = prime};
    IDSI_TRY(idsi_alloc_array(ctx, algebra->sig->count, sizeof *made->value, &made->value));
    for (size_t op = 0; op < algebra->sig->count; op++) {
        const idsi_table *table = &algebra->tables[op];
        IDSI_TRY(idsi_alloc_array(ctx, table->count, sizeof **made->value, &made->value[op]));
        for (size_t i = 0; i < table->count; i++) {
            const uint32_t bottom = residue_of(table->list[i].denominator, prime);
            if (bottom == 0) {
                *good = false;
                goto done;
            }
            made->value[op][i] = residue_of(table->list[i].numerator, prime);
            if (bottom != 1) {
                made->value[op][i] =
                    idsi_mod_mul(made->value[op][i], idsi_mod_inverse(bottom, prime), prime);
            }
        }
    }
    *residues = made;
    made = NULL;
done:
    idsi_residues_free(made);
    return st;
}

void idsi_residues_free(idsi_residues *residues)
{
    if (residues == NULL) {
        return;
    }
    ids_ctx *ctx = residues->ctx;
    for (size_t op = 0; residues->value != NULL && op < residues->algebra->sig->count; op++) {
        idsi_free(ctx, residues->value[op]);
    }
    idsi_free(ctx, residues->value);
    idsi_free(ctx, residues);
}

bool idsi_residues_product(const idsi_residues *residues, uint32_t op,
                           const uint32_t *const *arguments, uint32_t *result)
{
    const ids_algebra *algebra = residues->algebra;
    const idsi_table *table = &algebra->tables[op];
    const uint32_t *value = residues->value[op];
    const uint32_t arity = algebra->sig->ops[op].arity;
    const uint32_t p = residues->prime;
    bool any = false;

    memset(result, 0, algebra->dimension * sizeof *result);
    for (uint32_t a = 0; a < algebra->dimension; a++) {
        const uint8_t *known = NULL; /* the arguments that `weight` belongs to */
        uint32_t weight = 0;
        if (arguments[0][a] == 0) {
            continue;
        }
        for (size_t i = table->first[a]; i < table->first[a + 1]; i++) {
            const idsi_constant *at = &table->list[i];
            if (known == NULL || memcmp(known, at->argument, IDS_MAX_ARITY) != 0) {
                known = at->argument;
                weight = arguments[0][a];
                for (uint32_t k = 1; weight != 0 && k < arity; k++) {
                    weight = idsi_mod_mul(weight, arguments[k][at->argument[k]], p);
                }
            }
            if (weight != 0) {
                result[at->result] =
                    (uint32_t)((result[at->result] + (uint64_t)weight * value[i]) % p);
            }
        }
    }
    for (uint32_t r = 0; r < algebra->dimension; r++) {
        any = any || result[r] != 0;
    }
    return any;
}
