/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Several rows rewritten side by side.
 *
 *     sums[c * IDSI_LANES + lane]   row `lane` at column c, < 4 p^2
 *     marks                         columns at which some lane may be nonzero
 *
 * A rule that one row needs is mostly needed by the others too. It is fetched once and applied to
 * all lanes by the vector unit, which makes a rewritten row several times cheaper than alone.
 */
#include <string.h>

#include "kernels.h"
#include "marks.h"

struct idsi_lanes {
    ids_ctx *ctx;
    uint32_t prime;
    idsi_marks marks;
    uint64_t *sums;
};

uint32_t idsi_lanes_count(void)
{
    return IDSI_LANES;
}

uint64_t idsi_lanes_bytes(uint64_t columns)
{
    return columns * IDSI_LANES * sizeof(uint64_t) + columns / 7;
}

ids_status idsi_lanes_create(ids_ctx *ctx, uint32_t prime, uint32_t columns, idsi_lanes **lanes)
{
    ids_status st = IDS_OK;
    idsi_lanes *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->prime = prime;
    IDSI_TRY(idsi_marks_init(ctx, &made->marks, columns));
    IDSI_TRY(idsi_alloc_array(ctx, (size_t)columns * IDSI_LANES, sizeof *made->sums,
                              &made->sums));
    *lanes = made;
    made = NULL;
done:
    idsi_lanes_free(made);
    return st;
}

void idsi_lanes_free(idsi_lanes *lanes)
{
    if (lanes != NULL) {
        idsi_marks_clear(lanes->ctx, &lanes->marks);
        idsi_free(lanes->ctx, lanes->sums);
        idsi_free(lanes->ctx, lanes);
    }
}

void idsi_lanes_load(idsi_lanes *lanes, uint32_t lane, const idsi_entry *row, size_t count,
                     uint32_t factor)
{
    uint64_t back = 4 * (uint64_t)lanes->prime * lanes->prime;

    for (size_t i = 0; i < count; i++) {
        uint64_t *sum = &lanes->sums[(size_t)row[i].column * IDSI_LANES + lane];
        *sum += (uint64_t)factor * row[i].value;
        *sum = *sum >= back ? *sum - back : *sum;
        idsi_marks_add(&lanes->marks, row[i].column);
    }
}

/* Reduces and clears the sums of one column; false when all lanes are zero there. */
static bool take_column(idsi_lanes *lanes, uint32_t column, uint32_t *residues)
{
    uint64_t *sum = &lanes->sums[(size_t)column * IDSI_LANES];
    uint32_t any = 0;
    for (size_t lane = 0; lane < IDSI_LANES; lane++) {
        residues[lane] = (uint32_t)(sum[lane] % lanes->prime);
        any |= residues[lane];
    }
    memset(sum, 0, IDSI_LANES * sizeof *sum);
    return any != 0;
}

void idsi_lanes_rewrite(idsi_lanes *lanes, const idsi_echelon *echelon, const uint32_t *place,
                        uint32_t *out, size_t stride)
{
    const idsi_kernel *kernel = idsi_kernel_choose();
    size_t top = lanes->marks.top_words - 1;
    uint32_t column = 0;
    uint32_t residues[IDSI_LANES];
    const idsi_entry *rule = NULL;
    uint32_t count = 0;

    while (idsi_marks_pop(&lanes->marks, &top, &column)) {
        if (!take_column(lanes, column, residues)) {
            continue;
        }
        if (idsi_echelon_rule(echelon, column, &rule, &count)) {
            kernel->lanes(lanes->prime, rule, count, residues, lanes->sums);
            for (uint32_t i = 0; i < count; i++) {
                idsi_marks_add(&lanes->marks, rule[i].column);
            }
            continue;
        }
        for (size_t lane = 0; lane < IDSI_LANES; lane++) {
            if (residues[lane] != 0) {
                out[lane * stride + place[column]] = residues[lane];
            }
        }
    }
}
