/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * How a dense echelon form stands in memory; dense.c explains it.
 *
 * A full panel does not change any more and is multiplied by again and again. It is kept in the
 * form in which the kernels read a right factor: centred, strip by strip of the kernel's columns,
 * in a strip row by row.
 */
#ifndef IDSI_DENSE_FORM_H
#define IDSI_DENSE_FORM_H

#include "dense_private.h"
#include "kernels.h"

#define IDSI_PANEL 128u

typedef struct idsi_panel {
    size_t used;
    size_t width;                 /* number of its columns */
    uint32_t *column;             /* its columns, ascending */
    uint32_t *rows;               /* IDSI_PANEL x width; NULL when it is packed */
    int32_t *packed;              /* full: the rows in strips; NULL before, and when complete */
    int32_t *packed_room;         /* the memory of `packed`, which is aligned */
    uint32_t pivot[IDSI_PANEL];   /* of each row: a place among its columns */
    uint32_t dropped[IDSI_PANEL]; /* the pivots, ascending, when it is full */
} idsi_panel;

struct idsi_dense_echelon {
    ids_ctx *ctx;
    const idsi_kernel *kernel;
    uint32_t p;
    size_t columns;
    size_t count;
    size_t capacity;
    idsi_panel **panels;
    uint32_t *factor; /* IDSI_PANEL x IDSI_PANEL: entries of rows at pivots */
    idsi_workspace work;
    idsi_team *team;
    bool complete;
    size_t width;     /* complete: columns that are no pivots */
    uint32_t *column; /* complete: which, ascending */
    uint32_t *whole;  /* the row that is looked at, all columns */
};

/* What products need is made when the first one is: many forms are so small that none is. */
ids_status idsi_dense_prepare_products(idsi_dense_echelon *echelon);

/* Entry of a row of a panel. */
static inline uint32_t idsi_panel_entry(const idsi_dense_echelon *e, const idsi_panel *panel,
                                        size_t row, size_t place)
{
    if (panel->packed == NULL) {
        return panel->rows[row * panel->width + place];
    }
    size_t strip = e->kernel->columns;
    int32_t value = panel->packed[(place / strip * IDSI_PANEL + row) * strip + place % strip];
    return value < 0 ? (uint32_t)(value + (int32_t)e->p) : (uint32_t)value;
}

#endif
