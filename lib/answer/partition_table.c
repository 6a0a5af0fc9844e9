/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The rank table by partition.
 *
 * The rows are laid out first, with the multiplicities of the free algebra from characters. Then
 * one partition engine a prime fills in the quotients, degree by degree; a later prime can only
 * make one smaller. `ready` rows have been through the first prime, which is what a table that
 * ends early shows.
 */
#include <math.h>
#include <string.h>

#include <idspan/answer.h>

#include "../engine/partition_private.h"
#include "../young/young_private.h"
#include "fresh_private.h"
#include "rank_private.h"

struct ids_partition_table {
    ids_ctx *ctx;
    size_t count; /* rows laid out */
    size_t ready;
    ids_partition_row *rows;
    size_t prime_count;
    uint32_t *primes;
};

void ids_partition_table_free(ids_partition_table *table)
{
    if (table != NULL) {
        ids_ctx *ctx = table->ctx;
        idsi_free(ctx, table->rows);
        idsi_free(ctx, table->primes);
        idsi_free(ctx, table);
    }
}

size_t ids_partition_table_count(const ids_partition_table *table)
{
    return table == NULL ? 0 : table->ready;
}

ids_status ids_partition_table_row(const ids_partition_table *table, size_t index,
                                   ids_partition_row *row)
{
    if (table == NULL || row == NULL || index >= table->ready) {
        return IDS_ERR_ARG;
    }
    *row = table->rows[index];
    return IDS_OK;
}

size_t ids_partition_table_prime_count(const ids_partition_table *table)
{
    return table == NULL ? 0 : table->prime_count;
}

uint64_t ids_partition_table_prime(const ids_partition_table *table, size_t index)
{
    return table == NULL || index >= table->prime_count ? 0 : table->primes[index];
}

/* Everything one table needs while it is made. */
typedef struct job {
    ids_ctx *ctx;
    const ids_presentation *pres;
    uint32_t from;
    uint32_t to;
    ids_partition_options options;
    idsi_laws *laws;
    ids_cocharacter *free;
    idsi_random random;
    ids_partition_table *table;
    uint64_t *blocks; /* of random covectors behind each row, mod the prime that took the most */
} job;

/* ---- rows -------------------------------------------------------------------------------- */

static ids_status lay_out_row(job *j, uint32_t degree, uint64_t index, ids_partition_row *row)
{
    ids_status st = IDS_OK;
    const ids_partition *only = j->options.partition;

    *row = (ids_partition_row){.degree = degree};
    IDSI_TRY(ids_partition_unrank(degree, index, &row->partition));
    if (only != NULL && memcmp(only, &row->partition, sizeof *only) != 0) {
        return IDS_OK;
    }
    IDSI_TRY(ids_partition_dimension(&row->partition, &row->dimension));
    IDSI_TRY(ids_cocharacter_multiplicity(j->free, degree, index, &row->free));
    row->quotient = row->free;
    j->table->count++;
done:
    return st;
}

static ids_status lay_out(job *j)
{
    ids_status st = IDS_OK;
    size_t room = 0;

    for (uint32_t d = j->from; d <= j->to; d++) {
        room += (size_t)ids_partition_count(d) + 1;
    }
    IDSI_TRY(idsi_alloc_array(j->ctx, room, sizeof *j->table->rows, &j->table->rows));
    IDSI_TRY(idsi_alloc_array(j->ctx, room, sizeof *j->blocks, &j->blocks));
    for (uint32_t d = j->from; d <= j->to; d++) {
        for (uint64_t i = 0; i < ids_partition_count(d); i++) {
            IDSI_TRY(lay_out_row(j, d, i, &j->table->rows[j->table->count]));
        }
        if (j->options.partition == NULL) {
            j->table->rows[j->table->count] = (ids_partition_row){.degree = d, .total = true};
            j->table->count++;
        }
    }
done:
    return st;
}

void idsi_partition_certify(const idsi_laws *laws, uint64_t blocks, uint32_t primes,
                            ids_partition_row *row, double *error)
{
    double bits = idsi_laws_norm_bits(laws, row->degree);

    row->consequences = row->free - row->quotient;
    row->certainty = IDS_CERTAINTY_EXACT;
    row->bits = 0;
    *error = 0;
    if (bits >= 0 && row->quotient > 0) {
        double minor = (double)row->free * (idsi_partition_group_bits(&row->partition) + bits);
        *error = idsi_prime_error(minor, idsi_blocks_error(blocks), primes);
        row->certainty = IDS_CERTAINTY_MODULAR;
        row->bits = idsi_error_bits(*error);
    }
}

/* What the number in a row claims after `primes` primes; *error is its error probability. */
static void certify(const job *j, size_t i, uint32_t primes, double *error)
{
    idsi_partition_certify(j->laws, j->blocks[i], primes, &j->table->rows[i], error);
}

/* Sums up the rows of a degree, which end with the total. */
static ids_status sum_up(const job *j, size_t from, size_t total, uint32_t primes)
{
    ids_status st = IDS_OK;
    ids_partition_row *sum = &j->table->rows[total];
    double error_sum = 0;

    sum->free = 0;
    sum->quotient = 0;
    sum->certainty = IDS_CERTAINTY_EXACT;
    for (size_t i = from; i < total; i++) {
        const ids_partition_row *row = &j->table->rows[i];
        uint64_t product = 0;
        double error = 0;
        certify(j, i, primes, &error);
        error_sum += error;
        if (row->certainty == IDS_CERTAINTY_MODULAR) {
            sum->certainty = IDS_CERTAINTY_MODULAR;
        }
        if (!idsi_mul_u64(row->free, row->dimension, &product) ||
            !idsi_add_u64(sum->free, product, &sum->free)) {
            st = idsi_fail(j->ctx, IDS_ERR_LIMIT, "degree %u has more than 2^64-1 monomials",
                           sum->degree);
            goto done;
        }
        sum->quotient += row->quotient * row->dimension;
    }
    sum->consequences = sum->free - sum->quotient;
    sum->bits = sum->certainty == IDS_CERTAINTY_MODULAR ? idsi_error_bits(error_sum) : 0;
done:
    return st;
}

/* ---- filling in -------------------------------------------------------------------------- */

static ids_status fill_row(job *j, idsi_partition_engine *engine, size_t i)
{
    ids_status st = IDS_OK;
    ids_partition_row *row = &j->table->rows[i];
    uint32_t multiplicity = 0;
    idsi_account account = {0};

    IDSI_TRY(idsi_partition_multiplicity(engine, row->partition.part, row->partition.length,
                                         &multiplicity));
    IDSI_TRY(idsi_partition_account(engine, row->partition.part, row->partition.length, &account));
    if (multiplicity > row->free) {
        st = idsi_fail(j->ctx, IDS_ERR_INTERNAL,
                       "degree %u: a multiplicity is %u in the quotient, %llu in the free "
                       "algebra",
                       row->degree, multiplicity, (unsigned long long)row->free);
        goto done;
    }
    row->quotient = multiplicity < row->quotient ? multiplicity : row->quotient;
    j->blocks[i] = account.blocks > j->blocks[i] ? account.blocks : j->blocks[i];
done:
    return st;
}

/* Compares the total of a degree with the monomial engine's. */
static ids_status cross_check(const job *j, idsi_tower *tower, const ids_partition_row *total)
{
    ids_status st = IDS_OK;

    while (tower->height < total->degree) {
        IDSI_TRY(idsi_tower_grow(tower, tower->height + 1 < j->to));
    }
    const idsi_level *level = &tower->level[total->degree];
    if (level->dimension != total->quotient || level->free != total->free) {
        st = idsi_fail(j->ctx, IDS_ERR_INTERNAL,
                       "degree %u: the partition engine gives a quotient of dimension %llu of "
                       "%llu, the monomial engine %llu of %llu",
                       total->degree, (unsigned long long)total->quotient,
                       (unsigned long long)total->free, (unsigned long long)level->dimension,
                       (unsigned long long)level->free);
    }
done:
    return st;
}

/* All rows mod one prime; number says which prime it is, from 0. */
static ids_status fill_table(job *j, uint32_t number)
{
    ids_status st = IDS_OK;
    ids_partition_table *table = j->table;
    idsi_partition_engine *engine = NULL;
    idsi_tower tower;
    size_t i = 0;

    idsi_tower_init(&tower, j->ctx, j->laws, table->primes[number]);
    IDSI_TRY(idsi_partition_create(j->ctx, j->laws, table->primes[number], j->to, &engine));
    engine->share_part = 1.0 / (j->options.primes == 0 ? 1 : j->options.primes);
    engine->share_from = number * engine->share_part;
    for (uint32_t d = j->from; d <= j->to; d++) {
        size_t from = i;
        double error = 0;
        if (j->options.partition == NULL) {
            IDSI_TRY(idsi_partition_solve(engine, d));
        }
        for (; i < table->count && table->rows[i].degree == d && !table->rows[i].total; i++) {
            IDSI_TRY(fill_row(j, engine, i));
            certify(j, i, number + 1, &error);
        }
        if (i < table->count && table->rows[i].total) {
            IDSI_TRY(sum_up(j, from, i, number + 1));
            if (j->options.cross_check && number == 0) {
                IDSI_TRY(cross_check(j, &tower, &table->rows[i]));
            }
            i++;
        }
        table->ready = i > table->ready ? i : table->ready;
    }
done:
    idsi_tower_clear(&tower);
    idsi_partition_free(engine);
    return st;
}

static ids_status fill_all(job *j)
{
    ids_status st = IDS_OK;
    ids_partition_table *table = j->table;
    uint32_t primes = j->options.primes == 0 ? 1 : j->options.primes;

    IDSI_TRY(idsi_laws_create(j->ctx, j->pres, &j->laws));
    IDSI_TRY(ids_cocharacter_create(j->ctx, j->pres->sig, j->to, &j->free));
    IDSI_TRY(lay_out(j));
    IDSI_TRY(idsi_alloc_array(j->ctx, primes, sizeof *table->primes, &table->primes));
    for (uint32_t k = 0; k < primes; k++) {
        table->primes[k] = idsi_prime_draw(&j->random, table->primes, k);
        table->prime_count = k + 1;
        IDSI_TRY(fill_table(j, k));
    }
done:
    return st;
}

static ids_status check_partition(ids_ctx *ctx, uint32_t from, uint32_t to,
                                  const ids_partition_options *options)
{
    const ids_partition *partition = options->partition;

    if (!idsi_partition_is_valid(partition)) {
        return idsi_fail(ctx, IDS_ERR_ARG,
                         "the partition is malformed: %u parts of degree %u; its first `length` "
                         "parts must fall from left to right and add up to `degree`, the others "
                         "must be 0",
                         (unsigned)partition->length, (unsigned)partition->degree);
    }
    if (partition->degree != from || from != to) {
        return idsi_fail(ctx, IDS_ERR_ARG,
                         "the partition is one of %u, the degrees are %u to %u; one degree, its "
                         "own, is possible",
                         partition->degree, from, to);
    }
    if (options->cross_check) {
        return idsi_fail(ctx, IDS_ERR_ARG,
                         "a cross-check compares totals; one partition alone has none");
    }
    return IDS_OK;
}

static ids_status check_arguments(ids_ctx *ctx, uint32_t from, uint32_t to,
                                  const ids_partition_options *options)
{
    if (from == 0 || from > to || to > IDSI_SHAPE_MAX) {
        return idsi_fail(ctx, IDS_ERR_ARG,
                         "degrees %u to %u: by partition 1 to %u are possible, upwards", from, to,
                         IDSI_SHAPE_MAX);
    }
    ids_status st = IDS_OK;
    if (options == NULL) {
        return st;
    }
    IDSI_TRY(
        idsi_check_struct(ctx, "ids_partition_options", options->struct_size, sizeof *options));
    IDSI_TRY(idsi_check_primes(ctx, options->primes));
    if (options->partition != NULL) {
        IDSI_TRY(check_partition(ctx, from, to, options));
    }
done:
    return st;
}

ids_status ids_partition_table_create(ids_ctx *ctx, const ids_presentation *presentation,
                                      uint32_t from, uint32_t to,
                                      const ids_partition_options *options,
                                      ids_partition_table **table)
{
    ids_status st = IDS_OK;
    job j = {.ctx = ctx, .pres = presentation, .from = from, .to = to};

    if (ctx == NULL || presentation == NULL || table == NULL) {
        return idsi_fail_arg(ctx, "context, presentation or result");
    }
    IDSI_TRY(check_arguments(ctx, from, to, options));
    if (options != NULL) {
        j.options = *options;
    }
    idsi_random_seed(&j.random, j.options.seed);
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *j.table, &j.table));
    j.table->ctx = ctx;
    IDSI_TRY(fill_all(&j));
done:
    ids_cocharacter_free(j.free);
    idsi_laws_free(j.laws);
    idsi_free(ctx, j.blocks);
    if (st == IDS_OK || st == IDS_ERR_LIMIT || st == IDS_ERR_CANCELLED) {
        *table = j.table;
    } else {
        ids_partition_table_free(j.table);
        if (st == IDS_ERR_NOMEM) {
            *table = NULL;
        }
    }
    return st;
}
