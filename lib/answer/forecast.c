/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Estimates what share of the work a degree of a rank table is.
 *
 * The cost of a degree is taken as (rows + 1) * columns of its quotient step. With
 * D(x) = sum of dim F(n)/I(n) x^n/n!, the number of columns of degree n is n! [x^n] of
 * D^arity / (order of the symmetry), summed over the operations, and that of rows of
 * D^degree / (permutations within the classes), summed over the laws: both count distributions of
 * labels, where the exponential formula divides out a symmetry that moves all distributions. The
 * dimensions of degrees that are not known yet are a share of the columns that goes on to fall like
 * the power of the degree by which it fell between the last two degrees that are. (For Jordan
 * algebras it falls as n^-0.7 to n^-0.8 in the degrees 5 to 9.) Only progress and plans depend on
 * it, so double precision will do.
 */
#include <math.h>
#include <string.h>

#include "forecast_private.h"

#define MOST_FALL 0.5 /* from one degree to the next */

/* d[n] = dimension / n!, up to a degree. */
typedef struct series {
    double d[IDS_MAX_DEGREE + 1];
} series;

/* [x^n] of s^power. */
static double power_coefficient(const series *s, uint32_t power, uint32_t n)
{
    double product[IDS_MAX_DEGREE + 1] = {1};

    for (uint32_t i = 0; i < power; i++) {
        for (uint32_t m = n + 1; m-- > 0;) {
            double sum = 0;
            for (uint32_t k = 1; k <= m; k++) {
                sum += s->d[k] * product[m - k];
            }
            product[m] = sum;
        }
    }
    return product[n];
}

static double factorial(uint32_t n)
{
    double f = 1;
    for (uint32_t i = 2; i <= n; i++) {
        f *= i;
    }
    return f;
}

static double columns_of(const idsi_tower *tower, const series *s, uint32_t n)
{
    double sum = 0;
    for (size_t i = 0; i < tower->sig->count; i++) {
        const idsi_op *op = &tower->sig->ops[i];
        if (op->arity <= n) {
            sum += power_coefficient(s, op->arity, n) / (double)op->group.order;
        }
    }
    return sum * factorial(n);
}

static double rows_of(const idsi_tower *tower, const series *s, uint32_t n)
{
    double sum = 0;
    for (size_t i = 0; i < tower->laws->count; i++) {
        const idsi_law *law = &tower->laws->law[i];
        double symmetry = 1;
        uint32_t members[IDSI_MAX_IDENTITY_DEGREE] = {0};
        for (uint32_t v = 0; v < law->degree; v++) {
            members[law->class_of[v]]++;
            symmetry *= members[law->class_of[v]];
        }
        if (law->degree <= n) {
            sum += power_coefficient(s, law->degree, n) / symmetry;
        }
    }
    return sum * factorial(n);
}

void idsi_forecast_degrees(const idsi_tower *tower, uint32_t known, uint32_t to,
                           idsi_forecast_degree *degrees)
{
    series s = {{0}};
    double kept = 1; /* dimension over columns */
    double power = 0; /* it falls as n^-power */

    for (uint32_t n = 1; n <= to; n++) {
        idsi_forecast_degree *d = &degrees[n];
        d->columns = n == 1 ? 1 : columns_of(tower, &s, n);
        d->cost = (rows_of(tower, &s, n) + 1) * d->columns;
        if (n <= known) {
            d->dimension = (double)tower->level[n].dimension;
            if (d->columns > 0) {
                double before = kept;
                kept = d->dimension / d->columns;
                power = before > 0 ? n * fmin(fmax(1 - kept / before, 0), MOST_FALL) : 0;
            }
        } else {
            kept *= d->columns > 0 ? 1 - fmin(power / n, MOST_FALL) : 1;
            d->dimension = n == 1 ? 1 : kept * d->columns;
        }
        s.d[n] = d->dimension / factorial(n);
    }
}

void idsi_forecast(const idsi_tower *tower, uint32_t degree, uint32_t to, double *begin,
                   double *end)
{
    idsi_forecast_degree degrees[IDS_MAX_DEGREE + 1] = {{0}};
    double before = 0;
    double here = 0;
    double all = 0;

    idsi_forecast_degrees(tower, degree - 1, to, degrees);
    for (uint32_t n = 1; n <= to; n++) {
        before += n < degree ? degrees[n].cost : 0;
        here += n == degree ? degrees[n].cost : 0;
        all += degrees[n].cost;
    }
    *begin = all > 0 ? before / all : 0;
    *end = all > 0 ? (before + here) / all : 1;
}
