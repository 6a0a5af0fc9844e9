/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Derivations: the candidate as a combination of few consequences.
 *
 * The unknowns are the coefficients of the consequences, an equation a monomial. They are the
 * columns of a matrix whose column 0 is the candidate:
 *
 *     sum over consequences of (coefficient of the monomial in it) * x  -  (in the candidate) * 1
 *
 * The echelon form takes the largest column of a row for its pivot. So the pivots are a basis of
 * the consequences, chosen greedily from the last column to the first; with the others set to 0 a
 * pivot's unknown is the entry of its rule in column 0. Where column 0 is a pivot itself, there
 * is no solution. The order of the columns decides which basis it is, and how many of its elements
 * occur: columns near the candidate and with few monomials go last, and far ones are left out as
 * long as there is a solution without them. To shorten, one consequence of the best solution
 * goes to the front, the rest of it goes to the end in random order, and a solution that is no
 * longer replaces the best one.
 *
 * The residues are lifted to fractions with up to four primes and the sum is made exactly, or it
 * does not count.
 */
#include <string.h>

#include "derivation_private.h"

#define MOST_PRIMES 4u
#define MOST_TRIALS 400u

static void solver_clear(idsi_solver *s)
{
    idsi_pool_clear(s);
    idsi_free(s->ctx, s->pool);
    idsi_free(s->ctx, s->distance);
    idsi_free(s->ctx, s->cells);
    idsi_echelon_free(s->echelon);
    idsi_system_free(s->system);
}

/* ---- one solution ---------------------------------------------------------------------------- */

static ids_status make_rows(void *user, idsi_row_fn row, void *row_user)
{
    idsi_solver *s = user;
    ids_status st = IDS_OK;

    for (size_t m = 0; m < s->monomials; m++) {
        size_t count = 0;
        for (size_t k = s->row_start[m]; k < s->row_start[m + 1]; k++) {
            uint32_t item = s->row_item[k];
            if (s->place[item] > 0) {
                uint32_t value = idsi_system_value(s->system, s->pool[item], s->row_cell[k]);
                s->row[count++] = (idsi_entry){s->place[item], value};
            }
        }
        if (s->system->goal[m] != 0) {
            s->row[count++] = (idsi_entry){0, idsi_mod_neg(s->system->goal[m], s->system->prime)};
        }
        if (count > 0) {
            IDSI_TRY(row(row_user, s->row, count));
        }
    }
done:
    return st;
}

/* Solves with the places as they are; *found is false when there is no solution. */
static ids_status solve(idsi_solver *s, bool *found)
{
    ids_status st = IDS_OK;
    idsi_result result = {0};
    idsi_matrix matrix = {.ctx = s->ctx,
                          .prime = s->system->prime,
                          .columns = s->columns,
                          .tables = true,
                          .source = make_rows,
                          .source_user = s};

    s->trial_count = 0;
    IDSI_TRY(idsi_eliminate(&matrix, &s->random, &result));
    *found = !idsi_echelon_is_pivot(result.echelon, 0);
    for (uint32_t item = 0; *found && item < s->pool_count; item++) {
        const idsi_entry *entries = NULL;
        uint32_t count = 0;
        if (s->place[item] == 0 ||
            !idsi_echelon_rule(result.echelon, s->place[item], &entries, &count)) {
            continue;
        }
        for (uint32_t k = 0; k < count; k++) {
            if (entries[k].column == 0 && entries[k].value != 0) {
                s->trial[s->trial_count] = item;
                s->trial_value[s->trial_count] = entries[k].value;
                s->trial_count++;
            }
        }
    }
done:
    idsi_echelon_free(result.echelon);
    return st;
}

/* Gives the consequences of `order` their columns. */
static void place_all(idsi_solver *s)
{
    for (size_t i = 0; i < s->pool_count; i++) {
        s->place[s->order[i]] = (uint32_t)i + 1;
    }
    s->columns = (uint32_t)s->pool_count + 1;
}

static void keep_trial(idsi_solver *s)
{
    for (size_t i = 0; i < s->best_count; i++) {
        s->in_best[s->best[i]] = false;
    }
    s->best_count = s->trial_count;
    memcpy(s->best, s->trial, s->trial_count * sizeof *s->best);
    memcpy(s->best_value, s->trial_value, s->trial_count * sizeof *s->best);
    for (size_t i = 0; i < s->best_count; i++) {
        s->in_best[s->best[i]] = true;
    }
}

/* ---- making it short ------------------------------------------------------------------------- */

static void shuffle(idsi_solver *s, size_t from, size_t to)
{
    for (size_t i = to; i > from + 1; i--) {
        size_t j = from + (size_t)idsi_random_below(&s->random, i - from);
        uint32_t swap = s->order[i - 1];
        s->order[i - 1] = s->order[j];
        s->order[j] = swap;
    }
}

/* The best solution but for one of it at the end; every other time the rest is shuffled too. */
static void order_trial(idsi_solver *s, size_t number)
{
    size_t rest = 0;
    size_t end = s->pool_count - s->best_count;
    size_t dropped = (size_t)idsi_random_below(&s->random, s->best_count);

    s->order[rest++] = s->best[dropped];
    /* The pool begins with the short ones, which come last here. */
    for (size_t j = s->pool_count; j-- > 0;) {
        if (!s->in_best[j]) {
            s->order[rest++] = (uint32_t)j;
        }
    }
    for (size_t i = 0; i < s->best_count; i++) {
        if (i != dropped) {
            s->order[++end] = s->best[i];
        }
    }
    if (number % 2 == 0) {
        shuffle(s, 1, rest);
    }
    shuffle(s, rest, s->pool_count);
    place_all(s);
}

static ids_status run_trials(idsi_solver *s)
{
    ids_status st = IDS_OK;
    size_t entries = s->row_start[s->monomials] + s->monomials + 10;
    size_t trials = IDSI_TRIAL_WORK / 10 / entries;

    trials = trials > MOST_TRIALS ? MOST_TRIALS : trials;
    for (size_t k = 0; k < trials && s->best_count > 1; k++) {
        bool found = false;
        IDSI_TRY(idsi_poll(s->ctx, NULL));
        order_trial(s, k);
        IDSI_TRY(solve(s, &found));
        if (found && s->trial_count <= s->best_count) {
            keep_trial(s);
        }
    }
done:
    return st;
}

/* Near the solution, far away where that is possible, and near the new one. */
static ids_status shorten(idsi_solver *s)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_pool_renew(s, false));
    IDSI_TRY(run_trials(s));
    if (s->system->count <= s->spare) {
        IDSI_TRY(idsi_pool_renew(s, true));
        IDSI_TRY(run_trials(s));
        IDSI_TRY(idsi_pool_renew(s, false));
        IDSI_TRY(run_trials(s));
    }
done:
    return st;
}

/* ---- exact coefficients ---------------------------------------------------------------------- */

/* Whether the coefficients of the best solution give the candidate, exactly. */
static ids_status adds_up(const idsi_solver *s, mpq_t *coefficients, bool *good)
{
    ids_status st = IDS_OK;
    mpq_t *sums = NULL;
    mpq_t product;
    size_t ready = 0;

    mpq_init(product);
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *sums, &sums));
    for (; ready < s->monomials; ready++) {
        mpq_init(sums[ready]);
    }
    for (size_t j = 0; j < s->best_count; j++) {
        size_t i = s->pool[s->best[j]];
        for (size_t k = s->system->start[i]; k < s->system->start[i + 1]; k++) {
            const idsi_cell *cell = &s->system->cells[k];
            int sign = 1;
            mpq_mul(product, coefficients[j], idsi_system_exact(s->system, i, cell, &sign));
            if (sign < 0) {
                mpq_neg(product, product);
            }
            mpq_add(sums[cell->monomial], sums[cell->monomial], product);
        }
    }
    for (size_t t = 0; t < s->c->goal->count; t++) {
        size_t at = idsi_component_find(s->c, s->c->goal->tokens + s->c->goal->start[t]);
        mpq_sub(sums[at], sums[at], s->c->goal->coefficients[t]);
    }
    *good = true;
    for (size_t m = 0; m < s->monomials; m++) {
        *good = *good && mpq_sgn(sums[m]) == 0;
    }
done:
    for (size_t m = 0; m < ready; m++) {
        mpq_clear(sums[m]);
    }
    idsi_free(s->ctx, sums);
    mpq_clear(product);
    return st;
}

/* Solves with the best solution's consequences alone; their order is kept. */
static ids_status solve_again(idsi_solver *s, uint32_t prime, bool *good)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_system_reduce(s->system, prime, good));
    memset(s->place, 0, s->pool_count * sizeof *s->place);
    for (size_t j = 0; j < s->best_count; j++) {
        s->place[s->best[j]] = (uint32_t)j + 1;
    }
    s->columns = (uint32_t)s->best_count + 1;
    if (*good) {
        IDSI_TRY(solve(s, good));
    }
    memset(s->best_value, 0, s->best_count * sizeof *s->best_value);
    for (size_t k = 0; *good && k < s->trial_count; k++) {
        s->best_value[s->place[s->trial[k]] - 1] = s->trial_value[k];
    }
done:
    return st;
}

static bool reconstruct_all(mpz_t *residues, size_t count, mpz_srcptr modulus, mpq_t *coefficients)
{
    for (size_t j = 0; j < count; j++) {
        if (!idsi_border_reconstruct(coefficients[j], residues[j], modulus)) {
            return false;
        }
    }
    return true;
}

static ids_status lift(idsi_solver *s, mpq_t *coefficients)
{
    ids_status st = IDS_OK;
    mpz_t modulus;
    mpz_t *residues = NULL;
    size_t ready = 0;
    uint32_t primes[MOST_PRIMES] = {0};
    bool proved = s->best_count == 0;

    mpz_init_set_ui(modulus, 1);
    IDSI_TRY(idsi_alloc_array(s->ctx, s->best_count, sizeof *residues, &residues));
    for (; ready < s->best_count; ready++) {
        mpz_init(residues[ready]);
    }
    for (uint32_t k = 0; !proved && k < MOST_PRIMES; k++) {
        bool good = true;
        primes[k] = idsi_prime_draw(&s->random, primes, k);
        IDSI_TRY(solve_again(s, primes[k], &good));
        if (!good) {
            continue;
        }
        for (size_t j = 0; j < s->best_count; j++) {
            idsi_residue_join(residues[j], modulus, s->best_value[j], primes[k]);
        }
        mpz_mul_ui(modulus, modulus, primes[k]);
        if (reconstruct_all(residues, s->best_count, modulus, coefficients)) {
            IDSI_TRY(adds_up(s, coefficients, &proved));
        }
    }
    if (!proved) {
        st = idsi_fail(s->ctx, IDS_ERR_UNABLE,
                       "the coefficients of the derivation do not come out of %u primes",
                       MOST_PRIMES);
    }
done:
    for (size_t j = 0; j < ready; j++) {
        mpz_clear(residues[j]);
    }
    idsi_free(s->ctx, residues);
    mpz_clear(modulus);
    return st;
}

/* ---- the derivation -------------------------------------------------------------------------- */

/* Consequences are numbered by law, larger ones inside first, which is the order for reading. */
static void sort_best(idsi_solver *s)
{
    for (size_t i = 1; i < s->best_count; i++) {
        for (size_t j = i; j > 0 && s->pool[s->best[j]] < s->pool[s->best[j - 1]]; j--) {
            uint32_t swap = s->best[j];
            s->best[j] = s->best[j - 1];
            s->best[j - 1] = swap;
        }
    }
}

static ids_status take_solution(idsi_solver *s, ids_derivation *made)
{
    ids_status st = IDS_OK;

    sort_best(s);
    IDSI_TRY(idsi_alloc_array(s->ctx, s->best_count, sizeof *made->instances, &made->instances));
    IDSI_TRY(
        idsi_alloc_array(s->ctx, s->best_count, sizeof *made->coefficients, &made->coefficients));
    for (; made->count < s->best_count; made->count++) {
        mpq_init(made->coefficients[made->count]);
        made->instances[made->count] = s->system->instances[s->pool[s->best[made->count]]];
    }
    IDSI_TRY(lift(s, made->coefficients));
done:
    return st;
}

static ids_status find(idsi_solver *s, ids_derivation *made)
{
    ids_status st = IDS_OK;
    bool good = true;

    s->monomials = idsi_component_monomials(s->c)->count;
    IDSI_TRY(idsi_system_create(s->c, &s->system));
    do {
        s->prime = idsi_prime_draw(&s->random, NULL, 0);
        IDSI_TRY(idsi_system_reduce(s->system, s->prime, &good));
    } while (!good);
    IDSI_TRY(idsi_pool_prepare(s));
    good = false;
    for (uint32_t distance = 1; !good && distance <= s->farthest; distance++) {
        IDSI_TRY(idsi_pool_extend(s, distance));
        IDSI_TRY(idsi_pool_index(s));
        for (size_t j = 0; j < s->pool_count; j++) {
            s->order[j] = (uint32_t)(s->pool_count - 1 - j);
        }
        place_all(s);
        IDSI_TRY(solve(s, &good));
    }
    if (!good) {
        st = idsi_fail(s->ctx, IDS_ERR_DOMAIN,
                       "there is no derivation: the candidate does not follow (modulo %u)",
                       s->prime);
        goto done;
    }
    keep_trial(s);
    made->first_count = s->best_count;
    IDSI_TRY(shorten(s));
    IDSI_TRY(take_solution(s, made));
done:
    return st;
}

ids_status ids_derivation_find(ids_ctx *ctx, const ids_presentation *presentation, size_t index,
                               const ids_follows_options *options, ids_derivation **derivation)
{
    ids_status st = IDS_OK;
    ids_derivation *made = NULL;
    idsi_solver s = {.ctx = ctx};

    IDSI_TRY(idsi_candidate_check(ctx, presentation, index, derivation));
    IDSI_TRY(idsi_follows_check(ctx, options));
    idsi_random_seed(&s.random, options == NULL ? 0 : options->seed);
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    IDSI_TRY(idsi_component_create(ctx, presentation, index, &made->component));
    s.c = made->component;
    if (s.c->goal->count > 0) {
        IDSI_TRY(find(&s, made));
    }
    *derivation = made;
    made = NULL;
done:
    solver_clear(&s);
    ids_derivation_free(made);
    return st;
}

void ids_derivation_free(ids_derivation *derivation)
{
    if (derivation == NULL) {
        return;
    }
    ids_ctx *ctx = derivation->ctx;
    for (size_t i = 0; i < derivation->count; i++) {
        mpq_clear(derivation->coefficients[i]);
    }
    idsi_free(ctx, derivation->coefficients);
    idsi_free(ctx, derivation->instances);
    idsi_component_free(derivation->component);
    idsi_free(ctx, derivation);
}

size_t ids_derivation_count(const ids_derivation *derivation)
{
    return derivation == NULL ? 0 : derivation->count;
}

size_t ids_derivation_first_count(const ids_derivation *derivation)
{
    return derivation == NULL ? 0 : derivation->first_count;
}
