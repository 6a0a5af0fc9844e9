/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Functionals that vanish on all consequences, one after the other.
 *
 * The echelon form of the consequences rewrites pivot monomials to combinations of the others. For
 * a monomial c that is no pivot, "the coefficient of c after rewriting" is a functional that
 * vanishes on all consequences; it is 1 on c and read off the rules of the pivots. It serves when
 * the rewritten candidate has a coefficient there. No other such functional vanishes on more
 * monomials than it does and also on others that it does not vanish on; so few values are a matter
 * of the order of the monomials, which decides what the pivots are.
 */
#include <string.h>

#include "witness_private.h"

void idsi_seeker_clear(idsi_seeker *s)
{
    idsi_free(s->ctx, s->place);
    idsi_free(s->ctx, s->row);
    idsi_free(s->ctx, s->rest);
    idsi_free(s->ctx, s->uses);
    idsi_system_free(s->system);
}

static ids_status make_rows(void *user, idsi_row_fn row, void *row_user)
{
    idsi_seeker *s = user;
    ids_status st = IDS_OK;

    for (size_t i = 0; i < s->system->count; i++) {
        size_t start = s->system->start[i];
        size_t count = s->system->start[i + 1] - start;
        for (size_t k = 0; k < count; k++) {
            const idsi_cell *cell = &s->system->cells[start + k];
            s->row[k] =
                (idsi_entry){s->place[cell->monomial], idsi_system_value(s->system, i, cell)};
        }
        IDSI_TRY(row(row_user, s->row, count));
    }
done:
    return st;
}

ids_status idsi_seeker_eliminate(idsi_seeker *s, idsi_echelon **echelon)
{
    idsi_result result = {0};
    idsi_matrix matrix = {.ctx = s->ctx,
                          .prime = s->system->prime,
                          .columns = (uint32_t)s->monomials,
                          .tables = true,
                          .source = make_rows,
                          .source_user = s};
    ids_status st = idsi_eliminate(&matrix, &s->random, &result);
    *echelon = result.echelon;
    return st;
}

static void add_rest(idsi_seeker *s, uint32_t column, uint32_t value)
{
    uint64_t sum = (uint64_t)s->rest[column] + value;
    s->rest[column] = (uint32_t)(sum % s->system->prime);
}

/* The candidate rewritten, and how many values each functional has. */
void idsi_seeker_survey(idsi_seeker *s, const idsi_echelon *echelon)
{
    memset(s->rest, 0, s->monomials * sizeof *s->rest);
    memset(s->uses, 0, s->monomials * sizeof *s->uses);
    for (size_t m = 0; m < s->monomials; m++) {
        const idsi_entry *entries = NULL;
        uint32_t count = 0;
        if (!idsi_echelon_rule(echelon, s->place[m], &entries, &count)) {
            s->uses[s->place[m]]++;
            add_rest(s, s->place[m], s->system->goal[m]);
            continue;
        }
        for (uint32_t k = 0; k < count; k++) {
            s->uses[entries[k].column] += entries[k].value != 0;
            add_rest(s, entries[k].column,
                     idsi_mod_mul(entries[k].value, s->system->goal[m], s->system->prime));
        }
    }
}

void idsi_seeker_values(const idsi_seeker *s, const idsi_echelon *echelon, uint32_t column,
                        uint32_t *value)
{
    for (size_t m = 0; m < s->monomials; m++) {
        const idsi_entry *entries = NULL;
        uint32_t count = 0;
        value[m] = s->place[m] == column;
        if (idsi_echelon_rule(echelon, s->place[m], &entries, &count)) {
            for (uint32_t k = 0; k < count; k++) {
                value[m] = entries[k].column == column ? entries[k].value : value[m];
            }
        }
    }
}

void idsi_seeker_shuffle(idsi_seeker *s)
{
    for (size_t i = s->monomials; i > 1; i--) {
        size_t j = (size_t)idsi_random_below(&s->random, i);
        uint32_t swap = s->place[i - 1];
        s->place[i - 1] = s->place[j];
        s->place[j] = swap;
    }
}

void idsi_seeker_focus(idsi_seeker *s, const uint32_t *value)
{
    uint32_t used = 0;
    uint32_t at[2] = {0};

    idsi_seeker_shuffle(s);
    for (size_t m = 0; m < s->monomials; m++) {
        used += value[m] != 0;
    }
    at[1] = used;
    /* place[] holds a random permutation p; monomial p[i] comes to the next place of its kind. */
    for (size_t i = 0; i < s->monomials; i++) {
        s->uses[s->place[i]] = at[value[s->place[i]] == 0]++;
    }
    memcpy(s->place, s->uses, s->monomials * sizeof *s->place);
}

ids_status idsi_seeker_init(idsi_seeker *s, const idsi_component *component, uint64_t seed)
{
    ids_status st = IDS_OK;
    bool good = true;

    *s = (idsi_seeker){.ctx = component->ctx, .c = component};
    idsi_random_seed(&s->random, seed);
    s->monomials = idsi_component_monomials(s->c)->count;
    IDSI_TRY(idsi_system_create(s->c, &s->system));
    do {
        IDSI_TRY(idsi_system_reduce(s->system, idsi_prime_draw(&s->random, NULL, 0), &good));
    } while (!good);
    for (size_t i = 0; i < s->system->count; i++) {
        size_t cells = s->system->start[i + 1] - s->system->start[i];
        s->most = cells > s->most ? cells : s->most;
    }
    IDSI_TRY(idsi_alloc_array(s->ctx, s->most, sizeof *s->row, &s->row));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *s->place, &s->place));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *s->rest, &s->rest));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *s->uses, &s->uses));
    for (size_t m = 0; m < s->monomials; m++) {
        s->place[m] = (uint32_t)m;
    }
done:
    return st;
}
