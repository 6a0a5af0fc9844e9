/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Witnesses: linear functionals that vanish on all consequences and not on the candidate.
 *
 * The echelon form of the consequences rewrites pivot monomials to combinations of the others. For
 * a monomial c that is no pivot, "the coefficient of c after rewriting" is a functional that
 * vanishes on all consequences; it is 1 on c and read off the rules of the pivots. It serves when
 * the rewritten candidate has a coefficient there. The order of the monomials decides which are
 * pivots, so a few random orders are tried, and the functional with the fewest values is taken.
 *
 * Its residues are lifted to fractions with up to four primes, multiplied out to integers without
 * common factor, and evaluated exactly on every consequence and the candidate, or it does not
 * count.
 */
#include <string.h>

#include "follows_private.h"

#define MOST_PRIMES 4u
#define MOST_TRIALS 60u
#define TRIAL_WORK 2000000u

typedef struct seeker {
    ids_ctx *ctx;
    const idsi_component *c;
    idsi_system *system;
    idsi_random random;
    size_t monomials;
    size_t most;     /* cells of a consequence */
    uint32_t *place; /* column of each monomial */
    uint32_t *best_place;
    uint32_t best_column;
    size_t best_count;
    idsi_entry *row;
    uint32_t *rest;  /* of the candidate, by column */
    uint32_t *uses;  /* values of the functional of each column */
    uint32_t *value; /* of the functional, by monomial */
} seeker;

static void seeker_clear(seeker *s)
{
    idsi_free(s->ctx, s->place);
    idsi_free(s->ctx, s->best_place);
    idsi_free(s->ctx, s->row);
    idsi_free(s->ctx, s->rest);
    idsi_free(s->ctx, s->uses);
    idsi_free(s->ctx, s->value);
    idsi_system_free(s->system);
}

static ids_status make_rows(void *user, idsi_row_fn row, void *row_user)
{
    seeker *s = user;
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

static ids_status eliminate(seeker *s, idsi_echelon **echelon)
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

static void add_rest(seeker *s, uint32_t column, uint32_t value)
{
    uint64_t sum = (uint64_t)s->rest[column] + value;
    s->rest[column] = (uint32_t)(sum % s->system->prime);
}

/* The candidate rewritten, and how many values each functional has. */
static void survey(seeker *s, const idsi_echelon *echelon)
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

/* One order of the monomials; keeps it when some functional has fewer values than the best. */
static ids_status try_order(seeker *s)
{
    ids_status st = IDS_OK;
    idsi_echelon *echelon = NULL;

    IDSI_TRY(eliminate(s, &echelon));
    survey(s, echelon);
    for (uint32_t column = 0; column < s->monomials; column++) {
        if (s->rest[column] != 0 && (s->best_count == 0 || s->uses[column] < s->best_count)) {
            s->best_count = s->uses[column];
            s->best_column = column;
            memcpy(s->best_place, s->place, s->monomials * sizeof *s->place);
        }
    }
done:
    idsi_echelon_free(echelon);
    return st;
}

static void shuffle(seeker *s)
{
    for (size_t i = s->monomials; i > 1; i--) {
        size_t j = (size_t)idsi_random_below(&s->random, i);
        uint32_t swap = s->place[i - 1];
        s->place[i - 1] = s->place[j];
        s->place[j] = swap;
    }
}

static ids_status choose(seeker *s)
{
    ids_status st = IDS_OK;
    size_t trials = TRIAL_WORK / (s->system->start[s->system->count] + s->monomials + 1);

    trials = trials > MOST_TRIALS ? MOST_TRIALS : trials;
    IDSI_TRY(try_order(s));
    if (s->best_count == 0) {
        st = idsi_fail(s->ctx, IDS_ERR_DOMAIN,
                       "there is no witness: the candidate follows (modulo %u)", s->system->prime);
        goto done;
    }
    for (size_t k = 0; k < trials; k++) {
        shuffle(s);
        IDSI_TRY(try_order(s));
    }
    memcpy(s->place, s->best_place, s->monomials * sizeof *s->place);
done:
    return st;
}

/* ---- exact values ---------------------------------------------------------------------------- */

/* Values of the chosen functional mod one prime. */
static ids_status read_values(seeker *s, uint32_t prime, bool *good)
{
    ids_status st = IDS_OK;
    idsi_echelon *echelon = NULL;

    IDSI_TRY(idsi_system_reduce(s->system, prime, good));
    if (!*good) {
        return IDS_OK;
    }
    IDSI_TRY(eliminate(s, &echelon));
    *good = !idsi_echelon_is_pivot(echelon, s->best_column);
    for (size_t m = 0; m < s->monomials; m++) {
        const idsi_entry *entries = NULL;
        uint32_t count = 0;
        s->value[m] = s->place[m] == s->best_column;
        if (idsi_echelon_rule(echelon, s->place[m], &entries, &count)) {
            for (uint32_t k = 0; k < count; k++) {
                s->value[m] = entries[k].column == s->best_column ? entries[k].value : s->value[m];
            }
        }
    }
done:
    idsi_echelon_free(echelon);
    return st;
}

/* sum += value * coefficient, an integer. */
static void add_value(mpq_ptr sum, mpz_srcptr value, mpq_srcptr coefficient, int sign)
{
    mpq_t product;
    mpq_init(product);
    mpq_set_z(product, value);
    mpq_mul(product, product, coefficient);
    if (sign < 0) {
        mpq_sub(sum, sum, product);
    } else {
        mpq_add(sum, sum, product);
    }
    mpq_clear(product);
}

/* Whether the values are a witness, exactly; *negative when the candidate's value is. */
static bool holds(const seeker *s, mpz_t *values, bool *negative)
{
    bool good = true;
    mpq_t sum;

    mpq_init(sum);
    for (size_t i = 0; good && i < s->system->count; i++) {
        mpq_set_ui(sum, 0, 1);
        for (size_t k = s->system->start[i]; k < s->system->start[i + 1]; k++) {
            const idsi_cell *cell = &s->system->cells[k];
            int sign = 1;
            mpq_srcptr coefficient = idsi_system_exact(s->system, i, cell, &sign);
            if (mpz_sgn(values[cell->monomial]) != 0) {
                add_value(sum, values[cell->monomial], coefficient, sign);
            }
        }
        good = mpq_sgn(sum) == 0;
    }
    mpq_set_ui(sum, 0, 1);
    for (size_t t = 0; t < s->c->goal->count; t++) {
        size_t at = idsi_component_find(s->c, s->c->goal->tokens + s->c->goal->start[t]);
        add_value(sum, values[at], s->c->goal->coefficients[t], 1);
    }
    good = good && mpq_sgn(sum) != 0;
    *negative = mpq_sgn(sum) < 0;
    mpq_clear(sum);
    return good;
}

/* Fractions of the residues, as integers without common factor; false when there are none. */
static bool make_integers(mpz_t *residues, size_t count, mpz_srcptr modulus, mpz_t *values)
{
    bool good = true;
    mpq_t fraction;
    mpz_t scale;

    mpq_init(fraction);
    mpz_init_set_ui(scale, 1);
    for (size_t m = 0; good && m < count; m++) {
        good = idsi_border_reconstruct(fraction, residues[m], modulus);
        if (good) {
            mpz_lcm(scale, scale, mpq_denref(fraction));
        }
    }
    for (size_t m = 0; good && m < count; m++) {
        good = idsi_border_reconstruct(fraction, residues[m], modulus);
        mpz_mul(values[m], mpq_numref(fraction), scale);
        mpz_divexact(values[m], values[m], mpq_denref(fraction));
    }
    mpz_set_ui(scale, 0);
    for (size_t m = 0; m < count; m++) {
        mpz_gcd(scale, scale, values[m]);
    }
    for (size_t m = 0; m < count && mpz_sgn(scale) != 0; m++) {
        mpz_divexact(values[m], values[m], scale);
    }
    mpq_clear(fraction);
    mpz_clear(scale);
    return good;
}

static ids_status lift(seeker *s, mpz_t *residues, mpz_ptr modulus, mpz_t *values)
{
    ids_status st = IDS_OK;
    uint32_t primes[MOST_PRIMES] = {0};
    bool proved = false;

    for (uint32_t k = 0; !proved && k < MOST_PRIMES; k++) {
        bool good = true;
        bool negative = false;
        primes[k] = idsi_prime_draw(&s->random, primes, k);
        IDSI_TRY(read_values(s, primes[k], &good));
        if (!good) {
            continue;
        }
        for (size_t m = 0; m < s->monomials; m++) {
            idsi_residue_join(residues[m], modulus, s->value[m], primes[k]);
        }
        mpz_mul_ui(modulus, modulus, primes[k]);
        proved =
            make_integers(residues, s->monomials, modulus, values) && holds(s, values, &negative);
        for (size_t m = 0; negative && m < s->monomials; m++) {
            mpz_neg(values[m], values[m]);
        }
    }
    if (!proved) {
        st = idsi_fail(s->ctx, IDS_ERR_UNABLE,
                       "the values of the witness do not come out of %u primes", MOST_PRIMES);
    }
done:
    return st;
}

static ids_status prove(seeker *s, ids_witness *made)
{
    ids_status st = IDS_OK;
    mpz_t *residues = NULL;
    mpz_t modulus;
    size_t ready = 0;

    mpz_init_set_ui(modulus, 1);
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *residues, &residues));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *made->values, &made->values));
    for (; ready < s->monomials; ready++) {
        mpz_init(residues[ready]);
        mpz_init(made->values[ready]);
    }
    IDSI_TRY(lift(s, residues, modulus, made->values));
    for (size_t m = 0; m < s->monomials; m++) {
        made->count += mpz_sgn(made->values[m]) != 0;
    }
done:
    for (size_t m = 0; m < ready; m++) {
        mpz_clear(residues[m]);
    }
    /* A witness that is not handed out has no component by which to count its values. */
    for (size_t m = 0; st != IDS_OK && m < ready; m++) {
        mpz_clear(made->values[m]);
    }
    if (st != IDS_OK) {
        idsi_free(s->ctx, made->values);
        made->values = NULL;
    }
    idsi_free(s->ctx, residues);
    mpz_clear(modulus);
    return st;
}

static ids_status seek(seeker *s, ids_witness *made)
{
    ids_status st = IDS_OK;
    bool good = true;

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
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *s->best_place, &s->best_place));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *s->rest, &s->rest));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *s->uses, &s->uses));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *s->value, &s->value));
    for (size_t m = 0; m < s->monomials; m++) {
        s->place[m] = (uint32_t)m;
    }
    IDSI_TRY(choose(s));
    IDSI_TRY(prove(s, made));
done:
    return st;
}

ids_status ids_witness_find(ids_ctx *ctx, const ids_presentation *presentation, size_t index,
                            const ids_follows_options *options, ids_witness **witness)
{
    ids_status st = IDS_OK;
    ids_witness *made = NULL;
    seeker s = {.ctx = ctx};

    if (ctx == NULL || witness == NULL || presentation == NULL ||
        idsi_presentation_get(presentation, IDS_ROLE_CANDIDATE, index) == NULL) {
        return idsi_fail_arg(ctx, "context, presentation, candidate or result");
    }
    if (options != NULL && options->struct_size != sizeof *options) {
        return idsi_fail_arg(ctx, "struct_size");
    }
    idsi_random_seed(&s.random, options == NULL ? 0 : options->seed);
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    IDSI_TRY(idsi_component_create(ctx, presentation, index, &made->component));
    s.c = made->component;
    if (s.c->goal->count == 0) {
        st = idsi_fail(ctx, IDS_ERR_DOMAIN, "there is no witness: the candidate is 0");
        goto done;
    }
    IDSI_TRY(seek(&s, made));
    *witness = made;
    made = NULL;
done:
    seeker_clear(&s);
    ids_witness_free(made);
    return st;
}

void ids_witness_free(ids_witness *witness)
{
    if (witness == NULL) {
        return;
    }
    ids_ctx *ctx = witness->ctx;
    size_t count = 0;
    if (witness->values != NULL) {
        count = idsi_component_monomials(witness->component)->count;
    }
    for (size_t m = 0; m < count; m++) {
        mpz_clear(witness->values[m]);
    }
    idsi_free(ctx, witness->values);
    idsi_component_free(witness->component);
    idsi_free(ctx, witness);
}

size_t ids_witness_count(const ids_witness *witness)
{
    return witness == NULL ? 0 : witness->count;
}
