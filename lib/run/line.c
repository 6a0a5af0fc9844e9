/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The table of a run: its cells in order, with the totals of degrees that are split by partition.
 *
 * A total sums up as lib/answer/partition_table.c does, in the same order, so that a table that was
 * computed in pieces is the same to the last bit of its error bounds.
 */
#include "../field/field_private.h"
#include "run_private.h"

size_t ids_run_line_count(const ids_run *run)
{
    if (run == NULL) {
        return 0;
    }
    uint32_t totals = run->options.by_partition ? run->options.to - run->options.from + 1 : 0;
    return run->cell_count + totals;
}

static void put_cell(const ids_run *run, size_t index, ids_run_line *line)
{
    const idsi_cell *cell = &run->cells[index];

    line->state = cell->state;
    line->cell = index;
    line->row.degree = cell->degree;
    line->row.total = cell->whole;
    line->row.partition = cell->partition;
    line->row.dimension = cell->whole ? 0 : cell->dimension;
    if (cell->state == IDS_CELL_DONE) {
        line->row.free = cell->result.free;
        line->row.quotient = cell->result.quotient;
        line->row.consequences = cell->result.free - cell->result.quotient;
        line->row.certainty = cell->result.certainty;
        line->row.bits = cell->result.bits;
    }
}

/* The total of the cells from .. end-1, of one degree. */
static ids_status put_total(const ids_run *run, size_t from, size_t end, ids_run_line *line)
{
    ids_partition_row *sum = &line->row;
    double error = 0;

    line->state = IDS_CELL_DONE;
    line->cell = SIZE_MAX;
    sum->degree = run->cells[from].degree;
    sum->total = true;
    for (size_t i = from; i < end; i++) {
        if (run->cells[i].state != IDS_CELL_DONE) {
            line->state = IDS_CELL_MISSING;
            return IDS_OK;
        }
    }
    for (size_t i = from; i < end; i++) {
        const idsi_cell *cell = &run->cells[i];
        uint64_t product = 0;
        if (!idsi_mul_u64(cell->result.free, cell->dimension, &product) ||
            !idsi_add_u64(sum->free, product, &sum->free)) {
            return idsi_fail(run->ctx, IDS_ERR_LIMIT,
                             "degree %u has more than 2^64-1 monomials", (unsigned)sum->degree);
        }
        sum->quotient += cell->result.quotient * cell->dimension;
        error += cell->result.error;
        if (cell->result.certainty == IDS_CERTAINTY_MODULAR) {
            sum->certainty = IDS_CERTAINTY_MODULAR;
        }
    }
    sum->consequences = sum->free - sum->quotient;
    sum->bits = sum->certainty == IDS_CERTAINTY_MODULAR ? idsi_error_bits(error) : 0;
    return IDS_OK;
}

ids_status ids_run_line_get(const ids_run *run, size_t index, ids_run_line *line)
{
    ids_status st = IDS_OK;
    ids_run_line made = {0};
    size_t at = index;
    size_t from = 0;

    if (run == NULL || line == NULL || index >= ids_run_line_count(run)) {
        return IDS_ERR_ARG;
    }
    if (!run->options.by_partition) {
        put_cell(run, index, &made);
    } else {
        uint32_t degree = run->options.from;
        while (at > ids_partition_count(degree)) {
            at -= (size_t)ids_partition_count(degree) + 1;
            from += (size_t)ids_partition_count(degree);
            degree++;
        }
        if (at < ids_partition_count(degree)) {
            put_cell(run, from + at, &made);
        } else {
            IDSI_TRY(put_total(run, from, from + at, &made));
        }
    }
    *line = made;
done:
    return st;
}
