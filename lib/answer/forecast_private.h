/* SPDX-License-Identifier: BSD-2-Clause */
/* How the cost of a rank table is spread over its degrees. */
#ifndef IDSI_FORECAST_PRIVATE_H
#define IDSI_FORECAST_PRIVATE_H

#include "../engine/engine_private.h"

/* What a degree is expected to be like. */
typedef struct idsi_forecast_degree {
    double columns;
    double dimension; /* of F(n)/I(n) */
    double cost;
} idsi_forecast_degree;

/* Fills degrees[1 .. to], from a tower that has the degrees 1 .. known. */
void idsi_forecast_degrees(const idsi_tower *tower, uint32_t known, uint32_t to,
                           idsi_forecast_degree *degrees);
/*
 * The shares of the estimated cost of the degrees 1 .. to that are below `degree` and below
 * degree + 1, where the tower has the degrees below `degree`.
 */
void idsi_forecast(const idsi_tower *tower, uint32_t degree, uint32_t to, double *begin,
                   double *end);

#endif
