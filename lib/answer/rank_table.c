/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The rank table: one tower a prime, grown side by side, degree by degree.
 *
 * A rank mod p never exceeds the rank over Q, so the largest rank over the primes is a lower
 * bound for `consequences`. It is exact without more work when no identity reaches the degree
 * (rank 0) and when nothing is left (rank = dim F(n)); otherwise it is proved on request
 * (lib/engine/exact.c), or stands with the error bound of lib/field/prime.c. The matrix that the
 * bound is about is that of all consequences in the monomials of degree n: a row is a law with
 * its monomials renamed, so its norm is the law's norm, and the rank is at most dim F(n).
 *
 * Over GF(p) there is one tower, mod p, and nothing to lift; only random combinations of rows,
 * which the elimination keeps to large p, leave a doubt.
 */
#include <math.h>
#include <string.h>

#include <idspan/answer.h>

#include "forecast_private.h"
#include "rank_private.h"

struct ids_rank_table {
    ids_ctx *ctx;
    size_t count;
    ids_rank_row *rows;
    size_t prime_count;
    uint32_t *primes;
    uint32_t field;
    bool weakened;
};

void ids_rank_table_free(ids_rank_table *table)
{
    if (table != NULL) {
        ids_ctx *ctx = table->ctx;
        idsi_free(ctx, table->rows);
        idsi_free(ctx, table->primes);
        idsi_free(ctx, table);
    }
}

size_t ids_rank_table_count(const ids_rank_table *table)
{
    return table == NULL ? 0 : table->count;
}

ids_status ids_rank_table_row(const ids_rank_table *table, size_t index, ids_rank_row *row)
{
    if (table == NULL || row == NULL || index >= table->count) {
        return IDS_ERR_ARG;
    }
    *row = table->rows[index];
    return IDS_OK;
}

size_t ids_rank_table_prime_count(const ids_rank_table *table)
{
    return table == NULL ? 0 : table->prime_count;
}

uint64_t ids_rank_table_prime(const ids_rank_table *table, size_t index)
{
    return table == NULL || index >= table->prime_count ? 0 : table->primes[index];
}

uint32_t ids_rank_table_field(const ids_rank_table *table)
{
    return table == NULL ? 0 : table->field;
}

bool ids_rank_table_weakened(const ids_rank_table *table)
{
    return table != NULL && table->weakened;
}

/* Everything one table needs while it is made. */
typedef struct job {
    ids_ctx *ctx;
    uint32_t from;
    uint32_t to;
    idsi_proof *proof; /* NULL unless exact ranks are asked for */
    idsi_random random;
    idsi_laws *laws;
    size_t tower_count;
    idsi_tower *towers;
    ids_rank_table *table;
    double share;    /* of the estimated cost, at the end of the degree at work */
    uint32_t starts; /* how often a prime was replaced */
} job;

static void make_row(const job *j, uint32_t degree, ids_rank_row *row)
{
    const idsi_level *level = &j->towers[0].level[degree];
    double bits = idsi_laws_norm_bits(j->laws, degree);
    bool proved = false;

    *row = (ids_rank_row){.degree = degree, .free = level->free, .quotient = level->dimension};
    for (size_t k = 1; k < j->tower_count; k++) {
        uint64_t dimension = j->towers[k].level[degree].dimension;
        row->quotient = dimension < row->quotient ? dimension : row->quotient;
    }
    row->consequences = row->free - row->quotient;
    if (bits < 0 || row->quotient == 0) {
        proved = true;
    } else if (j->proof != NULL) {
        proved = level->dimension == row->quotient;
    } else if (j->table->field != 0) {
        proved = level->error == 0;
    }
    row->certainty = proved ? IDS_CERTAINTY_EXACT : IDS_CERTAINTY_MODULAR;
    if (!proved) {
        double error = 0;
        for (size_t k = 0; k < j->tower_count; k++) {
            error = fmax(error, j->towers[k].level[degree].error);
        }
        row->bits = j->table->field != 0 ? (uint32_t)fmax(0, floor(-log2(error)))
                                         : idsi_prime_error_bits((double)row->free * bits, error,
                                                                 (uint32_t)j->tower_count);
    }
}

static void draw_towers(job *j)
{
    ids_rank_table *table = j->table;

    for (uint32_t k = 0; k < j->tower_count; k++) {
        table->primes[k] =
            table->field != 0 ? table->field : idsi_prime_draw(&j->random, table->primes, k);
        idsi_tower_init(&j->towers[k], j->ctx, j->laws, table->primes[k]);
        j->towers[k].count_only = j->laws->count == 0;
    }
}

static ids_status start_towers(job *j, uint32_t primes)
{
    ids_status st = IDS_OK;
    ids_rank_table *table = j->table;

    IDSI_TRY(idsi_alloc_array(j->ctx, primes, sizeof *table->primes, &table->primes));
    IDSI_TRY(idsi_alloc_array(j->ctx, primes, sizeof *j->towers, &j->towers));
    table->prime_count = primes;
    j->tower_count = primes;
    draw_towers(j);
done:
    return st;
}

/* Spreads the share of a degree over the towers; it never falls, though estimates change. */
static void plan_shares(job *j, uint32_t degree)
{
    double begin = 0;
    double end = 0;

    idsi_forecast(&j->towers[0], degree, j->to, &begin, &end);
    begin = fmax(begin, j->share);
    end = fmax(end, begin);
    for (size_t k = 0; k < j->tower_count; k++) {
        double part = (end - begin) / (double)j->tower_count;
        j->towers[k].share_begin = begin + (double)k * part;
        j->towers[k].share_end = begin + ((double)k + 1) * part;
    }
    j->share = end;
}

/* The first prime was exceptional: all begins anew, with others. */
static ids_status start_again(job *j)
{
    ids_status st = IDS_OK;

    if (++j->starts == IDSI_PROOF_STARTS) {
        return idsi_proof_give_up(j->ctx);
    }
    for (size_t k = 0; k < j->tower_count; k++) {
        idsi_tower_clear(&j->towers[k]);
    }
    draw_towers(j);
    idsi_proof_free(j->proof);
    j->proof = NULL;
    IDSI_TRY(idsi_proof_create(j->ctx, j->laws, &j->proof));
    j->table->count = 0;
done:
    return st;
}

static ids_status fill_table(job *j)
{
    ids_status st = IDS_OK;

    for (uint32_t degree = 1; degree <= j->to; degree++) {
        bool exceptional = false;
        plan_shares(j, degree);
        for (size_t k = 0; k < j->tower_count; k++) {
            IDSI_TRY(idsi_tower_grow(&j->towers[k], degree < j->to || j->proof != NULL));
        }
        if (j->proof != NULL && j->laws->count > 0) {
            IDSI_TRY(idsi_proof_degree(j->proof, &j->towers[0], &j->random, &exceptional));
        }
        if (exceptional) {
            IDSI_TRY(start_again(j));
            degree = 0;
            continue;
        }
        if (degree >= j->from) {
            make_row(j, degree, &j->table->rows[j->table->count]);
            j->table->count++;
        }
    }
done:
    return st;
}

/* Most times that a variable occurs in a term of an identity. */
static uint32_t multiplicity(const idsi_identity *identity)
{
    uint32_t times[IDSI_MAX_IDENTITY_DEGREE + 1] = {0};
    uint32_t most = 0;
    const idsi_poly *poly = &identity->written;

    for (size_t i = 0; poly->count > 0 && i < poly->start[1]; i++) {
        if (!idsi_is_node(poly->tokens[i])) {
            uint32_t *seen = &times[poly->tokens[i]];
            (*seen)++;
            most = *seen > most ? *seen : most;
        }
    }
    return most;
}

bool idsi_rank_weakened(const ids_presentation *pres, uint32_t field, uint32_t degree)
{
    for (size_t i = 0; field > 0 && i < ids_presentation_count(pres, IDS_ROLE_IDENTITY); i++) {
        const idsi_identity *identity = idsi_presentation_get(pres, IDS_ROLE_IDENTITY, i);
        if (!identity->multilinear && identity->degree <= degree &&
            field <= multiplicity(identity)) {
            return true;
        }
    }
    return false;
}

ids_status idsi_check_primes(ids_ctx *ctx, uint32_t primes)
{
    if (primes <= IDS_MAX_PRIMES) {
        return IDS_OK;
    }
    return idsi_fail(ctx, IDS_ERR_ARG, "%u primes: at most %u are possible", primes,
                     IDS_MAX_PRIMES);
}

ids_status idsi_check_field(ids_ctx *ctx, uint32_t field, bool exact, uint32_t primes)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_check_primes(ctx, primes));
    if (field == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_prime_check(ctx, field));
    if (exact || primes > 1) {
        st = idsi_fail(ctx, IDS_ERR_ARG,
                       "a proof over the rational numbers and several primes exclude the ranks "
                       "over the field of %u elements",
                       field);
    }
done:
    return st;
}

static ids_status check_options(ids_ctx *ctx, const ids_rank_options *options)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_check_struct(ctx, "ids_rank_options", options->struct_size, sizeof *options));
    st = idsi_check_field(ctx, options->field, options->exact, options->primes);
done:
    return st;
}

ids_status ids_rank_table_create(ids_ctx *ctx, const ids_presentation *presentation, uint32_t from,
                                 uint32_t to, const ids_rank_options *options,
                                 ids_rank_table **table)
{
    ids_status st = IDS_OK;
    ids_rank_options chosen = {0};
    job j = {.ctx = ctx, .from = from, .to = to};

    if (ctx == NULL || presentation == NULL || table == NULL) {
        return idsi_fail_arg(ctx, "context, presentation or result");
    }
    if (from == 0 || from > to || to > IDS_MAX_DEGREE) {
        return idsi_fail(ctx, IDS_ERR_ARG, "degrees %u to %u: possible are 1 to %u, upwards", from,
                         to, IDS_MAX_DEGREE);
    }
    if (options != NULL) {
        IDSI_TRY(check_options(ctx, options));
        chosen = *options;
    }
    idsi_random_seed(&j.random, chosen.seed);
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *j.table, &j.table));
    j.table->ctx = ctx;
    j.table->field = chosen.field;
    j.table->weakened = idsi_rank_weakened(presentation, chosen.field, to);
    IDSI_TRY(idsi_alloc_array(ctx, to - from + 1u, sizeof *j.table->rows, &j.table->rows));
    IDSI_TRY(idsi_laws_create_over(ctx, presentation, chosen.field, &j.laws));
    if (chosen.exact) {
        IDSI_TRY(idsi_proof_create(ctx, j.laws, &j.proof));
    }
    IDSI_TRY(start_towers(&j, chosen.primes == 0 ? 1 : chosen.primes));
    IDSI_TRY(fill_table(&j));
done:
    for (size_t k = 0; k < j.tower_count; k++) {
        idsi_tower_clear(&j.towers[k]);
    }
    idsi_free(ctx, j.towers);
    idsi_proof_free(j.proof);
    idsi_laws_free(j.laws);
    if (st == IDS_OK || st == IDS_ERR_LIMIT || st == IDS_ERR_CANCELLED || st == IDS_ERR_UNABLE) {
        *table = j.table;
    } else {
        ids_rank_table_free(j.table);
        if (st == IDS_ERR_NOMEM) {
            *table = NULL;
        }
    }
    return st;
}
