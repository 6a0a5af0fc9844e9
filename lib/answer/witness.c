/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Witnesses: linear functionals that vanish on all consequences and not on the candidate.
 *
 * A number of random orders of the monomials are tried, then orders that prefer the monomials of
 * the best functional so far, and the functional with the fewest values is taken, of these the one
 * with the smallest. Its residues are lifted to fractions with up to four primes, multiplied out
 * to integers without common factor, and evaluated exactly on every consequence and the candidate,
 * or it does not count.
 */
#include <string.h>

#include "witness_private.h"

#define MOST_PRIMES 4u
#define MOST_TRIALS 60u
#define TRIAL_WORK 2000000u

typedef struct choice {
    idsi_seeker s;
    uint32_t *best_place;
    uint32_t best_column;
    size_t best_count; /* 0: none yet */
    uint64_t best_size;
    uint32_t *best_value; /* mod the first prime */
    uint32_t *value;      /* by monomial */
} choice;

static void choice_clear(choice *f)
{
    idsi_free(f->s.ctx, f->best_place);
    idsi_free(f->s.ctx, f->best_value);
    idsi_free(f->s.ctx, f->value);
    idsi_seeker_clear(&f->s);
}

/* How large the values are, as integers next to 0 mod p; fractions count as large. */
static uint64_t size_of(const choice *f)
{
    uint64_t size = 0;
    for (size_t m = 0; m < f->s.monomials; m++) {
        uint32_t other = f->s.system->prime - f->value[m];
        size += f->value[m] < other ? f->value[m] : other;
    }
    return size;
}

/* One order of the monomials; keeps it when some functional is better than the best. */
static ids_status try_order(choice *f)
{
    ids_status st = IDS_OK;
    idsi_seeker *s = &f->s;
    idsi_echelon *echelon = NULL;

    IDSI_TRY(idsi_seeker_eliminate(s, &echelon));
    idsi_seeker_survey(s, echelon);
    for (uint32_t column = 0; column < s->monomials; column++) {
        if (s->rest[column] == 0 || (f->best_count > 0 && s->uses[column] > f->best_count)) {
            continue;
        }
        idsi_seeker_values(s, echelon, column, f->value);
        const uint64_t size = size_of(f);
        if (f->best_count == 0 || s->uses[column] < f->best_count || size < f->best_size) {
            f->best_count = s->uses[column];
            f->best_size = size;
            f->best_column = column;
            memcpy(f->best_place, s->place, s->monomials * sizeof *s->place);
            memcpy(f->best_value, f->value, s->monomials * sizeof *f->value);
        }
    }
done:
    idsi_echelon_free(echelon);
    return st;
}

static ids_status choose(choice *f)
{
    ids_status st = IDS_OK;
    idsi_seeker *s = &f->s;
    size_t trials = TRIAL_WORK / (s->system->start[s->system->count] + s->monomials + 1);

    trials = trials > MOST_TRIALS ? MOST_TRIALS : trials;
    IDSI_TRY(try_order(f));
    if (f->best_count == 0) {
        st = idsi_fail(s->ctx, IDS_ERR_DOMAIN,
                       "there is no witness: the candidate follows (modulo %u)", s->system->prime);
        goto done;
    }
    for (size_t k = 0; k < 2 * trials; k++) {
        if (k < trials) {
            idsi_seeker_shuffle(s);
        } else {
            idsi_seeker_focus(s, f->best_value);
        }
        IDSI_TRY(try_order(f));
    }
    memcpy(s->place, f->best_place, s->monomials * sizeof *s->place);
done:
    return st;
}

/* ---- exact values ---------------------------------------------------------------------------- */

/* Values of the chosen functional mod one prime. */
static ids_status read_values(choice *f, uint32_t prime, bool *good)
{
    ids_status st = IDS_OK;
    idsi_echelon *echelon = NULL;

    IDSI_TRY(idsi_system_reduce(f->s.system, prime, good));
    if (!*good) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_seeker_eliminate(&f->s, &echelon));
    *good = !idsi_echelon_is_pivot(echelon, f->best_column);
    idsi_seeker_values(&f->s, echelon, f->best_column, f->value);
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
static bool holds(const idsi_seeker *s, mpz_t *values, bool *negative)
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

bool idsi_residues_to_integers(mpz_t *residues, size_t count, mpz_srcptr modulus, size_t most_bits,
                               mpz_t *values)
{
    bool good = true;
    mpq_t fraction;
    mpz_t scale;

    mpq_init(fraction);
    mpz_init_set_ui(scale, 1);
    for (size_t m = 0; good && m < count; m++) {
        good = idsi_border_reconstruct(fraction, residues[m], modulus);
        mpz_lcm(scale, scale, mpq_denref(fraction));
        good = good && mpz_sizeinbase(scale, 2) <= most_bits;
    }
    for (size_t m = 0; good && m < count; m++) {
        good = idsi_border_reconstruct(fraction, residues[m], modulus);
        mpz_mul(values[m], mpq_numref(fraction), scale);
        mpz_divexact(values[m], values[m], mpq_denref(fraction));
    }
    mpz_set_ui(scale, 0);
    for (size_t m = 0; good && m < count; m++) {
        mpz_gcd(scale, scale, values[m]);
    }
    for (size_t m = 0; good && m < count && mpz_cmp_ui(scale, 1) > 0; m++) {
        mpz_divexact(values[m], values[m], scale);
    }
    mpq_clear(fraction);
    mpz_clear(scale);
    return good;
}

static ids_status lift(choice *f, mpz_t *residues, mpz_ptr modulus, mpz_t *values)
{
    ids_status st = IDS_OK;
    idsi_seeker *s = &f->s;
    uint32_t primes[MOST_PRIMES] = {0};
    bool proved = false;

    for (uint32_t k = 0; !proved && k < MOST_PRIMES; k++) {
        bool good = true;
        bool negative = false;
        primes[k] = idsi_prime_draw(&s->random, primes, k);
        IDSI_TRY(read_values(f, primes[k], &good));
        if (!good) {
            continue;
        }
        for (size_t m = 0; m < s->monomials; m++) {
            idsi_residue_join(residues[m], modulus, f->value[m], primes[k]);
        }
        mpz_mul_ui(modulus, modulus, primes[k]);
        proved = idsi_residues_to_integers(residues, s->monomials, modulus, SIZE_MAX, values) &&
                 holds(s, values, &negative);
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

static ids_status prove(choice *f, ids_witness *made)
{
    ids_status st = IDS_OK;
    const idsi_seeker *s = &f->s;
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
    IDSI_TRY(lift(f, residues, modulus, made->values));
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

static ids_status seek(choice *f, ids_witness *made, uint64_t seed)
{
    ids_status st = IDS_OK;
    idsi_seeker *s = &f->s;

    IDSI_TRY(idsi_seeker_init(s, made->component, seed));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *f->best_place, &f->best_place));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *f->best_value, &f->best_value));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *f->value, &f->value));
    IDSI_TRY(choose(f));
    IDSI_TRY(prove(f, made));
done:
    return st;
}

ids_status ids_witness_find(ids_ctx *ctx, const ids_presentation *presentation, size_t index,
                            const ids_follows_options *options, ids_witness **witness)
{
    ids_status st = IDS_OK;
    ids_witness *made = NULL;
    choice f = {.s.ctx = ctx};

    IDSI_TRY(idsi_candidate_check(ctx, presentation, index, witness));
    IDSI_TRY(idsi_follows_check(ctx, options));
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    IDSI_TRY(idsi_component_create(ctx, presentation, index, &made->component));
    if (made->component->goal->count == 0) {
        st = idsi_fail(ctx, IDS_ERR_DOMAIN, "there is no witness: the candidate is 0");
        goto done;
    }
    IDSI_TRY(seek(&f, made, options == NULL ? 0 : options->seed));
    *witness = made;
    made = NULL;
done:
    choice_clear(&f);
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
