/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Whether a candidate follows, decided partition by partition.
 *
 * The candidate f generates an S_n-module; it lies in the consequences I(n) exactly when adding
 * it does not make I(n) larger. So two tables by partition are compared: without f and with f
 * among the identities. The second presentation is a shallow copy of the first in which f has
 * another role; it borrows all else.
 *
 * Ranks mod p never exceed those over Q. If f follows over Q, a difference mod p means that the
 * first table has a rank too small; if it does not, equality means that the second one has. So
 * the error of "no" is that of the first table, the error of "yes" that of the second.
 */
#include <string.h>

#include "follows_private.h"
#include "rank_private.h"

typedef struct failure {
    ids_partition partition;
    uint64_t multiplicity;
} failure;

struct ids_follows {
    ids_ctx *ctx;
    uint32_t degree;
    ids_certainty certainty;
    uint32_t bits;
    size_t count;
    failure *list;
};

void ids_follows_free(ids_follows *follows)
{
    if (follows != NULL) {
        ids_ctx *ctx = follows->ctx;
        idsi_free(ctx, follows->list);
        idsi_free(ctx, follows);
    }
}

bool ids_follows_answer(const ids_follows *follows)
{
    return follows != NULL && follows->count == 0;
}

uint32_t ids_follows_degree(const ids_follows *follows)
{
    return follows == NULL ? 0 : follows->degree;
}

ids_certainty ids_follows_certainty(const ids_follows *follows, uint32_t *bits)
{
    if (bits != NULL) {
        *bits = follows == NULL ? 0 : follows->bits;
    }
    return follows == NULL ? IDS_CERTAINTY_MODULAR : follows->certainty;
}

size_t ids_follows_count(const ids_follows *follows)
{
    return follows == NULL ? 0 : follows->count;
}

ids_status ids_follows_partition(const ids_follows *follows, size_t index, ids_partition *partition,
                                 uint64_t *multiplicity)
{
    if (follows == NULL || partition == NULL || multiplicity == NULL || index >= follows->count) {
        return IDS_ERR_ARG;
    }
    *partition = follows->list[index].partition;
    *multiplicity = follows->list[index].multiplicity;
    return IDS_OK;
}

/* Compares the tables without and with the candidate. */
static ids_status compare(ids_follows *made, const ids_partition_table *without,
                          const ids_partition_table *with)
{
    ids_status st = IDS_OK;
    size_t rows = ids_partition_table_count(without);
    ids_partition_row a = {0};
    ids_partition_row b = {0};

    IDSI_TRY(idsi_alloc_array(made->ctx, rows, sizeof *made->list, &made->list));
    for (size_t i = 0; i < rows; i++) {
        IDSI_TRY(ids_partition_table_row(without, i, &a));
        IDSI_TRY(ids_partition_table_row(with, i, &b));
        if (!a.total && b.consequences > a.consequences) {
            made->list[made->count] = (failure){a.partition, b.consequences - a.consequences};
            made->count++;
        }
    }
    /* The last row is the total of the degree. */
    made->certainty = made->count == 0 ? b.certainty : a.certainty;
    made->bits = made->count == 0 ? b.bits : a.bits;
done:
    return st;
}

static ids_status decide(const ids_presentation *pres, const idsi_identity *candidate,
                         const ids_follows_options *options, ids_follows *made)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = made->ctx;
    ids_presentation imposed = *pres;
    ids_partition_table *without = NULL;
    ids_partition_table *with = NULL;
    ids_partition_options table = {.struct_size = sizeof table};

    imposed.list = NULL;
    if (options != NULL) {
        table.primes = options->primes;
        table.seed = options->seed;
    }
    IDSI_TRY(idsi_alloc_array(ctx, pres->count, sizeof *imposed.list, &imposed.list));
    memcpy(imposed.list, pres->list, pres->count * sizeof *imposed.list);
    imposed.list[candidate - pres->list].role = IDS_ROLE_IDENTITY;
    IDSI_TRY(ids_partition_table_create(ctx, pres, made->degree, made->degree, &table, &without));
    IDSI_TRY(ids_partition_table_create(ctx, &imposed, made->degree, made->degree, &table, &with));
    IDSI_TRY(compare(made, without, with));
done:
    ids_partition_table_free(without);
    ids_partition_table_free(with);
    idsi_free(ctx, imposed.list);
    return st;
}

ids_status idsi_candidate_check(ids_ctx *ctx, const ids_presentation *pres, size_t index,
                                const void *result)
{
    if (ctx == NULL || pres == NULL || result == NULL) {
        return idsi_fail_arg(ctx, "context, presentation or result");
    }
    return idsi_check_index(ctx, "candidate", index,
                            ids_presentation_count(pres, IDS_ROLE_CANDIDATE));
}

ids_status idsi_follows_check(ids_ctx *ctx, const ids_follows_options *options)
{
    ids_status st = IDS_OK;
    if (options != NULL) {
        IDSI_TRY(
            idsi_check_struct(ctx, "ids_follows_options", options->struct_size, sizeof *options));
        IDSI_TRY(idsi_check_primes(ctx, options->primes));
    }
done:
    return st;
}

ids_status ids_follows_decide(ids_ctx *ctx, const ids_presentation *presentation, size_t index,
                              const ids_follows_options *options, ids_follows **follows)
{
    ids_status st = IDS_OK;
    ids_follows *made = NULL;

    IDSI_TRY(idsi_candidate_check(ctx, presentation, index, follows));
    IDSI_TRY(idsi_follows_check(ctx, options));
    const idsi_identity *candidate = idsi_presentation_get(presentation, IDS_ROLE_CANDIDATE, index);
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    *made =
        (ids_follows){.ctx = ctx, .degree = candidate->degree, .certainty = IDS_CERTAINTY_EXACT};
    if (candidate->linear.count > 0) {
        IDSI_TRY(decide(presentation, candidate, options, made));
    }
    *follows = made;
    made = NULL;
done:
    ids_follows_free(made);
    return st;
}
