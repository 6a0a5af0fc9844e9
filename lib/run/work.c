/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Computing the cells of a run.
 *
 * By partition there is one partition engine a prime, all with the same degrees solved. A cell asks
 * each for its multiplicity and takes the smallest. Nothing that an engine says of a partition
 * depends on what else it was asked for, or on how far it goes (partition_plan.c). A whole degree
 * is a rank table of one row.
 */
#include <math.h>
#include <time.h>

#include "../answer/rank_private.h"
#include "../engine/partition_private.h"
#include "run_private.h"

struct ids_run_work {
    ids_ctx *ctx;
    ids_run *run;
    uint32_t top;
    idsi_laws *laws;
    ids_cocharacter *free;
    size_t engine_count;
    idsi_partition_engine **engines;
};

void ids_run_work_free(ids_run_work *work)
{
    if (work == NULL) {
        return;
    }
    for (size_t k = 0; k < work->engine_count; k++) {
        idsi_partition_free(work->engines[k]);
    }
    idsi_free(work->ctx, work->engines);
    ids_cocharacter_free(work->free);
    idsi_laws_free(work->laws);
    idsi_free(work->ctx, work);
}

static ids_status open_engines(ids_run_work *work)
{
    ids_status st = IDS_OK;
    const ids_run *run = work->run;

    IDSI_TRY(idsi_laws_create(work->ctx, run->pres, &work->laws));
    IDSI_TRY(ids_cocharacter_create(work->ctx, ids_presentation_signature(run->pres), work->top,
                                    &work->free));
    IDSI_TRY(idsi_alloc_array(work->ctx, run->prime_count, sizeof *work->engines,
                              &work->engines));
    for (size_t k = 0; k < run->prime_count; k++) {
        IDSI_TRY(idsi_partition_create(work->ctx, work->laws, run->primes[k], work->top,
                                       &work->engines[k]));
        work->engine_count++;
        work->engines[k]->share_part = 1.0 / (double)run->prime_count;
        work->engines[k]->share_from = (double)k / (double)run->prime_count;
    }
done:
    return st;
}

ids_status ids_run_work_create(ids_run *run, uint32_t top, ids_run_work **work)
{
    ids_status st = IDS_OK;
    ids_run_work *made = NULL;

    if (run == NULL || work == NULL || top < run->options.from || top > run->options.to) {
        return idsi_fail_arg(run == NULL ? NULL : run->ctx, "run, degree or result");
    }
    IDSI_TRY(idsi_alloc_array(run->ctx, 1, sizeof *made, &made));
    made->ctx = run->ctx;
    made->run = run;
    made->top = top;
    if (run->options.by_partition) {
        IDSI_TRY(open_engines(made));
    }
    *work = made;
    made = NULL;
done:
    ids_run_work_free(made);
    return st;
}

ids_status ids_run_work_grow(ids_run_work *work, uint32_t degree)
{
    ids_status st = IDS_OK;

    if (work == NULL || degree == 0 || degree > work->top) {
        return idsi_fail_arg(work == NULL ? NULL : work->ctx, "work or degree");
    }
    for (size_t k = 0; k < work->engine_count; k++) {
        IDSI_TRY(idsi_partition_prepare(work->engines[k], degree));
    }
done:
    return st;
}

static ids_status check_cell(const ids_run_work *work, size_t cell, const void *out)
{
    if (work == NULL || out == NULL || cell >= work->run->cell_count ||
        work->run->cells[cell].degree > work->top) {
        return idsi_fail_arg(work == NULL ? NULL : work->ctx, "work, cell or result");
    }
    return IDS_OK;
}

ids_status ids_run_work_estimate(ids_run_work *work, size_t cell, double *seconds,
                                 uint64_t *memory)
{
    ids_status st = check_cell(work, cell, memory);

    if (st != IDS_OK || seconds == NULL) {
        return st != IDS_OK ? st : idsi_fail_arg(work->ctx, "seconds");
    }
    const idsi_cell *c = &work->run->cells[cell];
    double unknowns = 0;
    double tableaux = 0;
    for (size_t k = 0; k < work->engine_count; k++) {
        idsi_account account = {0};
        IDSI_TRY(idsi_partition_account(work->engines[k], c->partition.part, c->partition.length,
                                        &account));
        unknowns = (double)account.unknowns;
        tableaux = (double)account.tableaux;
    }
    bool known = unknowns > 0;
    *seconds = known ? idsi_cell_seconds(work->run, unknowns, tableaux) : c->seconds;
    *memory = known ? (uint64_t)idsi_cell_memory(unknowns, tableaux) : c->memory;
done:
    return st;
}

static ids_status compute_partition(ids_run_work *work, const idsi_cell *cell,
                                    ids_cell_result *result)
{
    ids_status st = IDS_OK;
    ids_partition_row row = {.degree = cell->degree, .partition = cell->partition};
    uint64_t index = 0;
    uint64_t blocks = 0;

    IDSI_TRY(ids_partition_rank(&cell->partition, &index));
    IDSI_TRY(ids_cocharacter_multiplicity(work->free, cell->degree, index, &row.free));
    row.quotient = row.free;
    for (size_t k = 0; k < work->engine_count; k++) {
        idsi_partition_engine *engine = work->engines[k];
        idsi_account account = {0};
        uint32_t multiplicity = 0;
        IDSI_TRY(idsi_partition_multiplicity(engine, cell->partition.part, cell->partition.length,
                                             &multiplicity));
        IDSI_TRY(idsi_partition_account(engine, cell->partition.part, cell->partition.length,
                                        &account));
        if (multiplicity > row.free) {
            st = idsi_fail(work->ctx, IDS_ERR_INTERNAL,
                           "cell %s: the multiplicity is %u in the quotient, %llu in the free "
                           "algebra",
                           cell->id, multiplicity, (unsigned long long)row.free);
            goto done;
        }
        row.quotient = multiplicity < row.quotient ? multiplicity : row.quotient;
        blocks = account.blocks > blocks ? account.blocks : blocks;
        result->seconds += account.seconds;
    }
    idsi_partition_certify(work->laws, blocks, (uint32_t)work->engine_count, &row,
                           &result->error);
    result->free = row.free;
    result->quotient = row.quotient;
    result->certainty = row.certainty;
    result->bits = row.bits;
done:
    return st;
}

static double process_seconds(void)
{
    struct timespec now = {0};

    if (clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now) != 0) {
        return 0;
    }
    return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

/* A rank table draws its primes itself, and the cell's certainty says that they were the run's.
 * What is exact has no need of that: a proof may have replaced a prime. */
static ids_status check_primes(const ids_run *run, const ids_rank_table *table,
                               const ids_rank_row *row)
{
    if (row->certainty == IDS_CERTAINTY_EXACT) {
        return IDS_OK;
    }
    for (size_t k = 0; k < run->prime_count; k++) {
        if (ids_rank_table_prime(table, k) != run->primes[k]) {
            return idsi_fail(run->ctx, IDS_ERR_INTERNAL,
                             "the rank table worked modulo other primes than the run's");
        }
    }
    return IDS_OK;
}

static ids_status compute_degree(ids_run_work *work, const idsi_cell *cell,
                                 ids_cell_result *result)
{
    ids_status st = IDS_OK;
    const ids_run_options *set = &work->run->options;
    ids_rank_options options = {.struct_size = sizeof options,
                                .exact = set->exact,
                                .primes = set->primes,
                                .seed = set->seed,
                                .field = set->field};
    ids_rank_table *table = NULL;
    ids_rank_row row = {0};
    double start = process_seconds();

    IDSI_TRY(ids_rank_table_create(work->ctx, work->run->pres, cell->degree, cell->degree,
                                   &options, &table));
    IDSI_TRY(ids_rank_table_row(table, 0, &row));
    IDSI_TRY(check_primes(work->run, table, &row));
    result->free = row.free;
    result->quotient = row.quotient;
    result->certainty = row.certainty;
    result->bits = row.bits;
    result->error = row.certainty == IDS_CERTAINTY_MODULAR ? ldexp(1, -(int)row.bits) : 0;
    result->seconds = process_seconds() - start;
done:
    ids_rank_table_free(table);
    return st;
}

ids_status ids_run_work_cell(ids_run_work *work, size_t cell, ids_cell_result *result)
{
    ids_status st = check_cell(work, cell, result);
    ids_cell_result made = {0};

    if (st != IDS_OK) {
        return st;
    }
    const idsi_cell *c = &work->run->cells[cell];
    if (c->whole) {
        IDSI_TRY(compute_degree(work, c, &made));
    } else {
        IDSI_TRY(compute_partition(work, c, &made));
    }
    made.memory = ids_ctx_memory(work->ctx).peak;
    *result = made;
done:
    return st;
}
