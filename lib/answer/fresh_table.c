/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The table of one degree: what holds in the model, and what follows from what is known.
 *
 * With q the multiplicity of a partition in F/I and r that in the image of F in the model, both mod
 * p, `holding` is free - r and `consequences` is free - q. A rank mod p is at most the one over the
 * rational numbers. So the consequences are at least free - q, and as they hold in the model,
 *
 *     free - q  <=  consequences  <=  holding  <=  free - r
 *
 * over the rational numbers. Where q = r, all of that is equal and proved. Elsewhere q may be too
 * large, or r too small, with probabilities that add up.
 *
 * In a model over another presentation r is less sure. It is the rank of a matrix whose columns are
 * the maps from the quotient there, and mod p there may be too many of these: r can be too large as
 * well, and q = r proves nothing. So the primes with the fewest maps count, and among these the
 * largest r. That is right when one prime divides neither a minor of the identities there nor one
 * of these identities and the image together. Where q = r, the first alone is enough, since r is
 * at most q. That the identities hold in such a model is not certain either.
 */
#include <math.h>
#include <string.h>

#include "fresh_private.h"
#include "rank_private.h"

typedef struct job {
    ids_fresh *fresh;
    ids_ctx *ctx;
    uint32_t degree;
    idsi_laws *laws;
    ids_cocharacter *free;
    size_t count;        /* partitions */
    ids_fresh_row *rows; /* and the total */
    uint64_t *blocks; /* of random covectors behind each quotient, mod the prime that took most */
    double *image_error;   /* of each row mod one prime, the largest */
    idsi_base_value *base; /* over a presentation: what the primes with the fewest maps say */
    double *sure;          /* of each row the probability that the consequences are wrong */
    double image_bits;
} job;

static ids_status lay_out(job *j)
{
    ids_status st = IDS_OK;

    j->count = (size_t)ids_partition_count(j->degree);
    IDSI_TRY(idsi_alloc_array(j->ctx, j->count + 1, sizeof *j->rows, &j->rows));
    IDSI_TRY(idsi_alloc_array(j->ctx, j->count, sizeof *j->blocks, &j->blocks));
    IDSI_TRY(idsi_alloc_array(j->ctx, j->count, sizeof(double), &j->image_error));
    IDSI_TRY(idsi_alloc_array(j->ctx, j->count, sizeof *j->base, &j->base));
    IDSI_TRY(idsi_alloc_array(j->ctx, j->count + 1, sizeof(double), &j->sure));
    for (size_t i = 0; i < j->count; i++) {
        ids_fresh_row *row = &j->rows[i];
        row->degree = j->degree;
        IDSI_TRY(ids_partition_unrank(j->degree, i, &row->partition));
        IDSI_TRY(ids_partition_dimension(&row->partition, &row->dimension));
        IDSI_TRY(ids_cocharacter_multiplicity(j->free, j->degree, i, &row->free));
        row->holding = row->free;
        j->base[i].multiplicity = UINT32_MAX;
    }
    j->rows[j->count] = (ids_fresh_row){.degree = j->degree, .total = true};
done:
    return st;
}

static ids_status fill_row(job *j, idsi_partition_engine *engine, idsi_image *image, size_t i)
{
    ids_status st = IDS_OK;
    ids_fresh_row *row = &j->rows[i];
    uint32_t quotient = 0;
    uint32_t rank = 0;
    idsi_account account = {0};

    IDSI_TRY(
        idsi_partition_multiplicity(engine, row->partition.part, row->partition.length, &quotient));
    if (quotient > row->free) {
        st = idsi_fail(j->ctx, IDS_ERR_INTERNAL,
                       "degree %u: a multiplicity is %u in the quotient, %llu in the free algebra",
                       row->degree, quotient, (unsigned long long)row->free);
        goto done;
    }
    IDSI_TRY(idsi_image_rank(image, &row->partition, quotient, &rank));
    if (row->free - quotient > row->consequences) {
        row->consequences = row->free - quotient;
    }
    if (image->base_value.multiplicity < j->base[i].multiplicity) {
        j->base[i] = image->base_value;
        row->holding = row->free - rank;
    } else if (image->base_value.multiplicity == j->base[i].multiplicity) {
        j->base[i].error = fmax(j->base[i].error, image->base_value.error);
        row->holding = row->free - rank < row->holding ? row->free - rank : row->holding;
    }
    IDSI_TRY(idsi_partition_account(engine, row->partition.part, row->partition.length, &account));
    j->blocks[i] = account.blocks > j->blocks[i] ? account.blocks : j->blocks[i];
    j->image_error[i] = image->error > j->image_error[i] ? image->error : j->image_error[i];
done:
    return st;
}

/* All rows mod one prime; *good is false when it divides a denominator of the model. */
static ids_status fill_rows(job *j, uint32_t prime, bool *good)
{
    ids_status st = IDS_OK;
    idsi_partition_engine *engine = NULL;
    idsi_image *image = NULL;

    IDSI_TRY(idsi_partition_create(j->ctx, j->laws, prime, j->degree, &engine));
    IDSI_TRY(idsi_partition_solve(engine, j->degree));
    IDSI_TRY(idsi_image_create(j->ctx, j->fresh->model, engine, j->degree, good, &image));
    if (*good) {
        image->exact = j->fresh->exact;
    }
    for (size_t i = 0; *good && i < j->count; i++) {
        IDSI_TRY(fill_row(j, engine, image, i));
        IDSI_TRY(idsi_poll(j->ctx, NULL));
    }
    if (*good) {
        j->image_bits = idsi_image_bits(image);
    }
done:
    idsi_image_free(image);
    idsi_partition_free(engine);
    return st;
}

/* What a row claims, and the probability that it is wrong. */
static double certify(const job *j, size_t i, uint32_t primes)
{
    ids_fresh_row *row = &j->rows[i];
    ids_partition_row quotient = {.degree = row->degree,
                                  .partition = row->partition,
                                  .free = row->free,
                                  .quotient = row->free - row->consequences};
    const idsi_base_value *base = &j->base[i];
    const uint64_t rank = row->free - row->holding;
    const double image =
        (double)rank * (idsi_partition_group_bits(&row->partition) + j->image_bits);
    double error = 0;

    row->fresh = row->holding - row->consequences;
    row->certainty = IDS_CERTAINTY_EXACT;
    row->bits = 0;
    if (row->fresh > 0) {
        idsi_partition_certify(j->laws, j->blocks[i], primes, &quotient, &error);
        j->sure[i] = error;
        j->sure[j->count] += error;
        error += idsi_prime_error(2 * base->bits + image, base->error + j->image_error[i], primes);
    } else if (rank > 0 && base->bits > 0) {
        error = idsi_prime_error(base->bits, base->error, primes);
    }
    if (row->free > 0) {
        error += j->fresh->doubt;
    }
    if (row->fresh > 0 || error > 0) {
        row->certainty = IDS_CERTAINTY_MODULAR;
        row->bits = idsi_error_bits(error);
    }
    return error;
}

static ids_status sum_up(job *j, uint32_t primes)
{
    ids_status st = IDS_OK;
    ids_fresh_row *sum = &j->rows[j->count];
    double error = 0;

    for (size_t i = 0; i < j->count; i++) {
        const ids_fresh_row *row = &j->rows[i];
        uint64_t product = 0;
        if (row->holding < row->consequences) {
            st = idsi_fail(j->ctx, IDS_ERR_UNABLE,
                           "degree %u: the primes contradict each other; another seed gives others",
                           j->degree);
            goto done;
        }
        error += certify(j, i, primes);
        if (!idsi_mul_u64(row->free, row->dimension, &product) ||
            !idsi_add_u64(sum->free, product, &sum->free)) {
            st = idsi_fail(j->ctx, IDS_ERR_LIMIT, "degree %u has more than 2^64-1 monomials",
                           j->degree);
            goto done;
        }
        sum->holding += row->holding * row->dimension;
        sum->consequences += row->consequences * row->dimension;
        sum->fresh += row->fresh * row->dimension;
        if (row->certainty == IDS_CERTAINTY_MODULAR) {
            sum->certainty = IDS_CERTAINTY_MODULAR;
        }
    }
    sum->bits = sum->certainty == IDS_CERTAINTY_MODULAR ? idsi_error_bits(error) : 0;
done:
    return st;
}

static ids_status hand_over(job *j)
{
    ids_status st = IDS_OK;
    ids_fresh *fresh = j->fresh;

    for (size_t i = 0; i <= j->count; i++) {
        IDSI_TRY(
            idsi_grow(j->ctx, fresh->count, &fresh->capacity, sizeof *fresh->rows, &fresh->rows));
        IDSI_TRY(idsi_grow(j->ctx, fresh->count, &fresh->sure_capacity, sizeof *fresh->sure,
                           &fresh->sure));
        fresh->sure[fresh->count] = j->sure[i];
        fresh->rows[fresh->count++] = j->rows[i];
    }
done:
    return st;
}

ids_status idsi_fresh_degree(ids_fresh *fresh, const ids_presentation *known, uint32_t degree)
{
    ids_status st = IDS_OK;
    job j = {.fresh = fresh, .ctx = fresh->ctx, .degree = degree};
    const size_t before = fresh->count;
    uint32_t used = 0;

    IDSI_TRY(idsi_laws_create(j.ctx, known, &j.laws));
    IDSI_TRY(ids_cocharacter_create(j.ctx, known->sig, degree, &j.free));
    IDSI_TRY(lay_out(&j));
    for (size_t k = 0; k < fresh->prime_count; k++) {
        bool good = true;
        IDSI_TRY(fill_rows(&j, fresh->primes[k], &good));
        used += good;
    }
    if (used == 0) {
        st = idsi_fail(j.ctx, IDS_ERR_UNABLE,
                       "all primes that were drawn divide denominators of the model; another seed "
                       "gives others");
        goto done;
    }
    IDSI_TRY(sum_up(&j, used));
    st = hand_over(&j);
done:
    if (st != IDS_OK) {
        fresh->count = before;
    }
    ids_cocharacter_free(j.free);
    idsi_laws_free(j.laws);
    idsi_free(j.ctx, j.rows);
    idsi_free(j.ctx, j.blocks);
    idsi_free(j.ctx, j.image_error);
    idsi_free(j.ctx, j.base);
    idsi_free(j.ctx, j.sure);
    return st;
}
