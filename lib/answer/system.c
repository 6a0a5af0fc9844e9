/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * All consequences of a component with their entries, as the solvers need them: residues mod a
 * prime for elimination, coefficients for the proof that nothing is wrong with the result.
 *
 * An entry points at a term of the law, so that the same list serves every prime.
 */
#include <string.h>

#include "follows_private.h"

static ids_status keep_instance(void *user, const idsi_instance *instance)
{
    idsi_system *s = user;
    ids_status st = IDS_OK;
    size_t parts = 0;
    size_t used = s->start[s->count];

    IDSI_TRY(idsi_poll(s->ctx, NULL));
    idsi_component_expand(s->component, instance, s->parts, &parts);
    if (parts == 0) {
        return IDS_OK;
    }
    IDSI_TRY(
        idsi_grow(s->ctx, s->count, &s->instance_capacity, sizeof *s->instances, &s->instances));
    IDSI_TRY(idsi_grow(s->ctx, s->count + 1, &s->start_capacity, sizeof *s->start, &s->start));
    for (size_t k = 0; k < parts; k++) {
        int32_t code = (int32_t)s->parts[k].term + 1;
        IDSI_TRY(idsi_grow(s->ctx, used, &s->cell_capacity, sizeof *s->cells, &s->cells));
        s->cells[used] =
            (idsi_cell){(uint32_t)s->parts[k].monomial, s->parts[k].sign < 0 ? -code : code};
        used++;
    }
    if (s->count == UINT32_MAX - 8) {
        return idsi_fail(s->ctx, IDS_ERR_LIMIT, "degree %u has more than 2^32 consequences",
                         s->component->degree);
    }
    s->instances[s->count] = *instance;
    s->count++;
    s->start[s->count] = used;
done:
    return st;
}

ids_status idsi_system_create(const idsi_component *component, idsi_system **system)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = component->ctx;
    idsi_system *made = NULL;
    size_t most = 1;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->component = component;
    for (size_t i = 0; i < component->laws->count; i++) {
        size_t terms = component->laws->law[i].poly->count;
        most = terms > most ? terms : most;
    }
    IDSI_TRY(idsi_alloc_array(ctx, most, sizeof *made->parts, &made->parts));
    IDSI_TRY(idsi_grow(ctx, 0, &made->start_capacity, sizeof *made->start, &made->start));
    made->start[0] = 0;
    IDSI_TRY(idsi_component_each(component, keep_instance, made));
    IDSI_TRY(idsi_alloc_array(ctx, component->laws->count, sizeof *made->residue, &made->residue));
    for (size_t i = 0; i < component->laws->count; i++) {
        IDSI_TRY(idsi_alloc_array(ctx, component->laws->law[i].poly->count, sizeof **made->residue,
                                  &made->residue[i]));
    }
    IDSI_TRY(idsi_alloc_array(ctx, idsi_component_monomials(component)->count, sizeof *made->goal,
                              &made->goal));
    *system = made;
    made = NULL;
done:
    idsi_system_free(made);
    return st;
}

void idsi_system_free(idsi_system *system)
{
    if (system == NULL) {
        return;
    }
    ids_ctx *ctx = system->ctx;
    for (size_t i = 0; system->residue != NULL && i < system->component->laws->count; i++) {
        idsi_free(ctx, system->residue[i]);
    }
    idsi_free(ctx, system->residue);
    idsi_free(ctx, system->goal);
    idsi_free(ctx, system->instances);
    idsi_free(ctx, system->start);
    idsi_free(ctx, system->cells);
    idsi_free(ctx, system->parts);
    idsi_free(ctx, system);
}

ids_status idsi_system_reduce(idsi_system *system, uint32_t prime, bool *ok)
{
    const idsi_component *c = system->component;
    const idsi_poly *goal = c->goal;

    *ok = true;
    system->prime = prime;
    for (size_t i = 0; i < c->laws->count; i++) {
        const idsi_poly *poly = c->laws->law[i].poly;
        for (size_t t = 0; t < poly->count; t++) {
            *ok = *ok && idsi_mod_rational(poly->coefficients[t], prime, &system->residue[i][t]);
        }
    }
    for (size_t t = 0; t < goal->count; t++) {
        size_t at = idsi_component_find(c, goal->tokens + goal->start[t]);
        if (at == SIZE_MAX) {
            return idsi_fail(system->ctx, IDS_ERR_INTERNAL, "a monomial of the candidate is lost");
        }
        *ok = *ok && idsi_mod_rational(goal->coefficients[t], prime, &system->goal[at]);
    }
    return IDS_OK;
}

static size_t cell_term(const idsi_cell *cell)
{
    return (size_t)(cell->code < 0 ? -cell->code : cell->code) - 1;
}

uint32_t idsi_system_value(const idsi_system *system, size_t i, const idsi_cell *cell)
{
    uint32_t value = system->residue[system->instances[i].law][cell_term(cell)];
    return cell->code < 0 ? idsi_mod_neg(value, system->prime) : value;
}

mpq_srcptr idsi_system_exact(const idsi_system *system, size_t i, const idsi_cell *cell, int *sign)
{
    const idsi_poly *poly = system->component->laws->law[system->instances[i].law].poly;
    *sign = cell->code < 0 ? -1 : 1;
    return poly->coefficients[cell_term(cell)];
}

void idsi_residue_join(mpz_ptr value, mpz_srcptr modulus, uint32_t residue, uint32_t p)
{
    /* value + modulus * ((residue - value) / modulus mod p) */
    uint32_t have = (uint32_t)mpz_fdiv_ui(value, p);
    uint32_t m = (uint32_t)mpz_fdiv_ui(modulus, p);
    uint32_t lack = residue >= have ? residue - have : residue + p - have;
    mpz_addmul_ui(value, modulus, idsi_mod_mul(lack, idsi_mod_inverse(m, p), p));
}
