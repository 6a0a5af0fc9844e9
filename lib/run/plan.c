/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the cells of a run will cost, before any is computed.
 *
 * The monomial engine computes the lowest degrees, as far as that is quick, and the dimensions of
 * the others are extrapolated (lib/answer/forecast.c). By partition the unknowns of a partition are
 * the products of normal forms, of which the partition gets its share: an S_n-module that is nearly
 * free has the module of a partition with f tableaux f times for every n! dimensions. Time is
 * then fitted to measurements, and good to a factor of a few.
 */
#include <math.h>

#include "../answer/forecast_private.h"
#include "run_private.h"

/* As far as the lowest degrees go: columns of the monomial engine. */
#define QUICK_COLUMNS 3000.0
/* Entries of an elimination by the partition engine, and of words and contractions, per second. */
#define ELIMINATION_RATE 2e10
#define CONTRACTION_RATE 1e7
/* Products of the monomial engine's cost per second. */
#define MONOMIAL_RATE 3e7
/* Covectors in a block of the partition engine. */
#define BLOCK 192.0

double idsi_cell_seconds(const ids_run *run, double unknowns, double tableaux)
{
    double primes = (double)run->prime_count;
    double elimination = unknowns * unknowns * unknowns / 2;

    return primes * (elimination / ELIMINATION_RATE + unknowns * tableaux / CONTRACTION_RATE);
}

double idsi_cell_memory(double unknowns, double tableaux)
{
    return 4 * (unknowns * unknowns + 2 * BLOCK * (unknowns + tableaux));
}

static double factorial(uint32_t n)
{
    return tgamma(n + 1.0);
}

static void plan_partition(const ids_run *run, const idsi_forecast_degree *degree,
                           idsi_cell *cell)
{
    double tableaux = (double)cell->dimension;
    double unknowns = degree->columns * tableaux / factorial(cell->degree);

    cell->seconds = idsi_cell_seconds(run, unknowns, tableaux);
    cell->memory = (uint64_t)idsi_cell_memory(unknowns, tableaux);
}

static void plan_degree(const ids_run *run, const idsi_forecast_degree *degrees, idsi_cell *cell)
{
    double primes = run->prime_count > 0 ? (double)run->prime_count : 1;
    double cost = 0;
    double bytes = 0;

    for (uint32_t n = 1; n <= cell->degree; n++) {
        const idsi_forecast_degree *d = &degrees[n];
        bool last = n == cell->degree;
        cost += d->cost;
        bytes += last ? 4 * d->dimension * (d->columns - d->dimension) / 16
                      : 8 * d->dimension * d->columns / 16;
    }
    cell->seconds = primes * cost / MONOMIAL_RATE;
    cell->memory = (uint64_t)(primes * bytes);
}

/* The bases that the last degree needs. Skew shapes add to them, and the extrapolation is high. */
static double lower_bytes(const ids_run *run, const idsi_forecast_degree *degrees)
{
    double bytes = 0;

    for (uint32_t n = 2; n < run->options.to; n++) {
        bytes += 4 * degrees[n].dimension * degrees[n].columns / factorial(n);
    }
    return bytes / 2 * (double)run->prime_count;
}

ids_status ids_run_plan(ids_run *run)
{
    ids_status st = IDS_OK;
    idsi_laws *laws = NULL;
    idsi_tower tower = {0};
    idsi_forecast_degree degrees[IDS_MAX_DEGREE + 1] = {{0}};
    uint32_t known = 0;
    ids_status limit = IDS_OK;

    if (run == NULL) {
        return IDS_ERR_ARG;
    }
    uint32_t prime = run->prime_count > 0 ? run->primes[0] : run->options.field;
    tower.ctx = run->ctx;
    IDSI_TRY(idsi_laws_create(run->ctx, run->pres, &laws));
    idsi_tower_init(&tower, run->ctx, laws, prime);
    while (known + 1 < run->options.to) {
        idsi_forecast_degrees(&tower, known, known + 1, degrees);
        if (degrees[known + 1].columns > QUICK_COLUMNS) {
            break;
        }
        limit = idsi_tower_grow(&tower, true);
        if (limit == IDS_ERR_LIMIT) {
            break; /* less is known then */
        }
        IDSI_TRY(limit);
        known++;
    }
    idsi_forecast_degrees(&tower, known, run->options.to, degrees);
    for (size_t i = 0; i < run->cell_count; i++) {
        idsi_cell *cell = &run->cells[i];
        if (cell->whole) {
            plan_degree(run, degrees, cell);
        } else {
            plan_partition(run, &degrees[cell->degree], cell);
        }
    }
    run->lower_memory = run->options.by_partition ? (uint64_t)lower_bytes(run, degrees) : 0;
done:
    idsi_tower_clear(&tower);
    idsi_laws_free(laws);
    return st != IDS_OK ? st : limit;
}
