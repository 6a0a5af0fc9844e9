/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Proof that the dimensions found mod p are those over Q.
 *
 * One half is free: rank mod p <= rank over Q, so dim over Q <= dim mod p. For the other half the
 * tables of the tower (every column as a combination of normal forms) are lifted to rational
 * numbers, and it is shown that with them every row of every degree vanishes over Q. Then the
 * normal forms, with the lifted tables as multiplication, are an algebra in which the identities
 * hold up to this degree; it is a quotient of F/I, so dim over Q >= number of normal forms.
 *
 * That the rows vanish is shown by residues. A row's value is a vector of rationals. It is
 * computed mod primes q from the lifted tables. Let
 *     k    be the largest number of products below the root in a term of a law,
 *     L    the least common denominator of the tables below degree n, D that of degree n,
 *     rho  the largest sum of absolute values of a column's entries, below n and in degree n.
 * Every product below the root multiplies the sum of absolute values by at most rho(< n) and the
 * denominator by a divisor of L; the final reduction by rho(n) and D. So a coordinate times
 * L^k * D is an integer of absolute value at most
 *     sum |coefficients of the law| * rho(< n)^k * rho(n) * L^k * D,
 * and it is zero when it vanishes mod primes whose product is larger. The primes that the tables
 * were lifted from count: there the rows vanish because the echelon form says so.
 *
 * Lifting is by Chinese remaindering over 1 to 4 primes and rational reconstruction; entries must
 * fit 62 bits above and below. A prime whose elimination combined rows at random does not count,
 * since a row may have been missed there; nor does one whose pivots differ in a lower degree. Such
 * a prime is exceptional, or the caller's is: the one with the larger dimension. A prime that is
 * exceptional for its caller can only be replaced by him.
 */
#include <math.h>
#include <string.h>

#include "lift_private.h"

#define MOST_CHECKS 512u
#define MOST_DROPPED 4u

struct idsi_proof {
    ids_ctx *ctx;
    const idsi_laws *laws;
    uint32_t degree; /* proved so far */
    size_t extra;    /* towers besides the caller's, for lifting */
    size_t dropped;  /* towers that were no help */
    idsi_tower *towers[IDSI_LIFT_PRIMES - 1];
    idsi_lifted table[IDS_MAX_DEGREE + 1];
    mpz_t below; /* L: common denominator of the proved degrees */
};

ids_status idsi_proof_create(ids_ctx *ctx, const idsi_laws *laws, idsi_proof **proof)
{
    ids_status st = IDS_OK;
    idsi_proof *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->laws = laws;
    mpz_init_set_ui(made->below, 1);
    *proof = made;
done:
    return st;
}

void idsi_proof_free(idsi_proof *proof)
{
    if (proof == NULL) {
        return;
    }
    for (size_t i = 0; i < proof->extra; i++) {
        idsi_tower_clear(proof->towers[i]);
        idsi_free(proof->ctx, proof->towers[i]);
    }
    for (uint32_t d = 0; d <= IDS_MAX_DEGREE; d++) {
        idsi_lifted_clear(proof->ctx, &proof->table[d]);
    }
    mpz_clear(proof->below);
    idsi_free(proof->ctx, proof);
}

const idsi_lifted *idsi_proof_table(const idsi_proof *proof, uint32_t degree)
{
    return &proof->table[degree];
}

/* ---- checking -------------------------------------------------------------------------------- */

/* Products below the root, at most, in a term of a law that reaches the degree. */
static uint32_t products_below_root(const idsi_law *law)
{
    uint32_t most = 0;
    for (size_t t = 0; t < law->poly->count; t++) {
        size_t tokens = law->poly->start[t + 1] - law->poly->start[t];
        uint32_t products = (uint32_t)tokens - law->degree;
        most = products > most ? products : most;
    }
    return most == 0 ? 0 : most - 1;
}

static double coefficient_bits(const idsi_law *law)
{
    return idsi_sum_bits(law->poly->coefficients, law->poly->count) + 1e-6;
}

/* log2 of the bound at the top of this file, for all laws together. */
static double value_bits(const idsi_proof *proof, uint32_t degree, const idsi_lifted *table)
{
    double rho = 0;
    double bits = 0;

    for (uint32_t d = 2; d < degree; d++) {
        rho = fmax(rho, proof->table[d].rho_bits);
    }
    for (size_t i = 0; i < proof->laws->count; i++) {
        const idsi_law *law = &proof->laws->law[i];
        if (law->degree <= degree) {
            double k = products_below_root(law);
            double below = (double)mpz_sizeinbase(proof->below, 2);
            bits = fmax(bits, coefficient_bits(law) + k * (rho + below) + table->rho_bits +
                                  table->den_bits);
        }
    }
    return bits + 1;
}

/* Residues of a lifted table mod q; *ok is false when q divides a denominator. */
static ids_status reduce_table(ids_ctx *ctx, const idsi_lifted *table, uint64_t columns, uint32_t q,
                               idsi_level *level, bool *ok)
{
    ids_status st = IDS_OK;
    size_t count = table->start[columns];
    int64_t last_den = 1;
    uint32_t last_inverse = 1;

    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *level->entries, &level->entries));
    for (size_t i = 0; i < count; i++) {
        if (table->den[i] != last_den) {
            last_den = table->den[i];
            uint32_t residue = (uint32_t)((uint64_t)last_den % q);
            if (residue == 0) {
                *ok = false;
                goto done;
            }
            last_inverse = idsi_mod_inverse(residue, q);
        }
        int64_t num = table->num[i] % (int64_t)q;
        uint32_t residue = (uint32_t)(num < 0 ? num + q : num);
        level->entries[i] = (idsi_entry){table->normal[i], idsi_mod_mul(residue, last_inverse, q)};
    }
done:
    return st;
}

/* A tower mod q that borrows everything from `model` but the tables' values. */
static ids_status borrow_tower(const idsi_proof *proof, const idsi_tower *model, uint32_t q,
                               idsi_tower *tower, bool *ok)
{
    ids_status st = IDS_OK;

    *ok = true;
    *tower = *model;
    tower->prime = q;
    tower->share_begin = model->share_end;
    for (uint32_t d = 1; d <= model->height; d++) {
        tower->level[d].entries = NULL;
        tower->level[d].start = proof->table[d].start;
    }
    for (uint32_t d = 2; *ok && d <= model->height; d++) {
        if (proof->table[d].start != NULL) {
            IDSI_TRY(reduce_table(proof->ctx, &proof->table[d], model->level[d].columns, q,
                                  &tower->level[d], ok));
        }
    }
done:
    return st;
}

typedef struct checker {
    const idsi_level *level;
    uint32_t prime;
    uint64_t *sum;
    bool vanishes;
} checker;

static ids_status check_row(void *user, const idsi_entry *row, size_t count)
{
    checker *c = user;
    uint64_t square = (uint64_t)c->prime * c->prime;

    if (!c->vanishes) {
        return IDS_OK;
    }
    for (size_t i = 0; i < count; i++) {
        const size_t *start = &c->level->start[row[i].column];
        for (size_t k = start[0]; k < start[1]; k++) {
            uint64_t *sum = &c->sum[c->level->entries[k].column];
            *sum += (uint64_t)row[i].value * c->level->entries[k].value;
            *sum = *sum >= square ? *sum - square : *sum;
        }
    }
    for (uint64_t j = 0; j < c->level->dimension; j++) {
        if (c->sum[j] % c->prime != 0) {
            c->vanishes = false;
        }
        c->sum[j] = 0;
    }
    return IDS_OK;
}

/* Whether all rows of the model's top degree vanish mod q under the lifted tables. */
static ids_status rows_vanish(const idsi_proof *proof, const idsi_tower *model, uint32_t q,
                              bool *usable, bool *vanish)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = proof->ctx;
    idsi_tower *tower = NULL;
    checker c = {.prime = q, .vanishes = true};

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *tower, &tower));
    IDSI_TRY(borrow_tower(proof, model, q, tower, usable));
    if (*usable) {
        c.level = &tower->level[model->height];
        IDSI_TRY(idsi_alloc_array(ctx, c.level->dimension, sizeof *c.sum, &c.sum));
        IDSI_TRY(idsi_rows_each(tower, c.level, check_row, &c));
        *vanish = c.vanishes;
    }
done:
    for (uint32_t d = 2; tower != NULL && d <= model->height; d++) {
        idsi_free(ctx, tower->level[d].entries);
    }
    idsi_free(ctx, tower);
    idsi_free(ctx, c.sum);
    return st;
}

/* The primes must differ, or their product would not count. */
static ids_status check_table(const idsi_proof *proof, const idsi_tower *model,
                              const idsi_lift_sources *src, idsi_random *random, bool *vanish)
{
    ids_status st = IDS_OK;
    double missing = value_bits(proof, model->height, &proof->table[model->height]);
    uint32_t known[MOST_CHECKS];
    size_t count = 0;

    *vanish = true;
    for (; count < src->count; count++) {
        known[count] = src->prime[count];
        if (src->level[count]->error == 0) {
            missing -= log2(src->prime[count]);
        }
    }
    while (*vanish && missing >= 0) {
        bool usable = true;
        if (count == MOST_CHECKS) {
            *vanish = false;
            break;
        }
        known[count] = idsi_prime_draw(random, known, count);
        IDSI_TRY(rows_vanish(proof, model, known[count], &usable, vanish));
        missing -= usable ? 29 : 0;
        count++;
    }
done:
    return st;
}

/* ---- one degree ------------------------------------------------------------------------------ */

/* One more tower to lift from, grown to the model's height. */
static ids_status add_tower(idsi_proof *proof, const idsi_tower *model, idsi_random *random)
{
    ids_status st = IDS_OK;
    uint32_t known[IDSI_LIFT_PRIMES] = {model->prime};
    idsi_tower **slot = &proof->towers[proof->extra];

    for (size_t k = 0; k < proof->extra; k++) {
        known[k + 1] = proof->towers[k]->prime;
    }
    IDSI_TRY(idsi_alloc_array(proof->ctx, 1, sizeof **slot, slot));
    idsi_tower_init(*slot, proof->ctx, proof->laws,
                    idsi_prime_draw(random, known, proof->extra + 1));
    proof->extra++;
done:
    return st;
}

/*
 * SAME normal forms in all degrees: then the tables of a proved degree have those of the other
 * tower as residues. Take a column minus its combination of normal forms over Q, times the common
 * denominator D: an integral consequence of content 1. Dimensions being equal, its residue is a
 * consequence mod p. If p divided D it would be one of normal forms alone, but these are
 * independent; so p does not, and the residue is what the other table says, which is unique.
 */
typedef enum likeness { SAME, WORSE, BETTER } likeness;

static likeness compare_towers(const idsi_tower *tower, const idsi_tower *model, uint32_t degree)
{
    for (uint32_t d = 2; d <= degree; d++) {
        const idsi_level *x = &tower->level[d];
        const idsi_level *y = &model->level[d];
        if (x->dimension < y->dimension) {
            return BETTER;
        }
        if (x->dimension > y->dimension || x->columns != y->columns ||
            (x->dimension > 0 &&
             memcmp(x->normal, y->normal, x->dimension * sizeof *x->normal) != 0)) {
            return WORSE;
        }
    }
    return SAME;
}

static void drop_tower(idsi_proof *proof, size_t k)
{
    idsi_tower_clear(proof->towers[k]);
    idsi_free(proof->ctx, proof->towers[k]);
    proof->extra--;
    proof->towers[k] = proof->towers[proof->extra];
    proof->towers[proof->extra] = NULL;
    proof->dropped++;
}

static ids_status unable(const idsi_proof *proof, uint32_t degree)
{
    return idsi_fail(proof->ctx, IDS_ERR_UNABLE,
                     "degree %u: the normal forms have coefficients too large for the proof over "
                     "the rational numbers; without a proof there are ranks mod primes",
                     degree);
}

/* Levels of all towers; grows those that lag behind, and drops those that differ. */
static ids_status gather_sources(idsi_proof *proof, const idsi_tower *model, idsi_lift_sources *src,
                                 bool *exceptional)
{
    ids_status st = IDS_OK;
    uint32_t degree = model->height;

    *src =
        (idsi_lift_sources){.count = 1, .level = {&model->level[degree]}, .prime = {model->prime}};
    for (size_t k = 0; !*exceptional && k < proof->extra;) {
        idsi_tower *tower = proof->towers[k];
        tower->share_begin = model->share_end;
        tower->share_end = model->share_end;
        while (tower->height < degree) {
            IDSI_TRY(idsi_tower_grow(tower, true));
        }
        likeness like = compare_towers(tower, model, degree);
        if (like != SAME) {
            drop_tower(proof, k);
            *exceptional = like == BETTER || proof->dropped > MOST_DROPPED;
            continue;
        }
        src->level[src->count] = &tower->level[degree];
        src->prime[src->count] = tower->prime;
        src->count++;
        k++;
    }
done:
    return st;
}

ids_status idsi_proof_give_up(ids_ctx *ctx)
{
    return idsi_fail(ctx, IDS_ERR_UNABLE,
                     "all of %u primes are exceptional for these identities; another seed gives "
                     "others",
                     IDSI_PROOF_STARTS);
}

ids_status idsi_proof_degree(idsi_proof *proof, const idsi_tower *tower, idsi_random *random,
                             bool *exceptional)
{
    ids_status st = IDS_OK;
    uint32_t degree = tower->height;
    const idsi_level *level = &tower->level[degree];
    mpz_t denominator;
    bool proved = level->dimension == 0 || level->columns == 0;

    *exceptional = false;
    mpz_init(denominator);
    IDSI_ASSERT(degree == proof->degree + 1);
    while (!proved) {
        idsi_lift_sources src;
        bool good = true;
        IDSI_TRY(gather_sources(proof, tower, &src, exceptional));
        if (*exceptional) {
            goto done;
        }
        IDSI_TRY(idsi_lift_table(proof->ctx, &src, &proof->table[degree], denominator, &good));
        if (good) {
            IDSI_TRY(check_table(proof, tower, &src, random, &proved));
        }
        if (!proved) {
            if (proof->extra == IDSI_LIFT_PRIMES - 1) {
                st = unable(proof, degree);
                goto done;
            }
            IDSI_TRY(add_tower(proof, tower, random));
        }
    }
    if (level->dimension > 0 && level->columns > 0) {
        mpz_lcm(proof->below, proof->below, denominator);
    }
    proof->degree = degree;
done:
    mpz_clear(denominator);
    return st;
}
