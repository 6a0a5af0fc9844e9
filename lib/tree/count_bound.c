/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * How large the coefficients of a counting series can get, before it is computed: the solver
 * keeps every coefficient in a slot of fixed width, and no carry may ever pass a slot.
 *
 * For r > 0 put T(r) = sum of t_d r^d, t_d = trees of degree d. Then t_d <= T(r) / r^d, so any
 * r with a finite bound for T(r) gives a bound for all degrees; the largest such r gives the
 * true rate of growth, or nearly, where only bounds for T(r^2), .. are at hand. Two facts bound
 * T(r):
 *   - Where numbers q_j >= T(r^j), j >= 2, are known, any y with r + F(y, q_2, q_3, ...) <= y is
 *     at least T(r): by induction on the height the trees of bounded height sum up to at most y.
 *     y - F is concave, so the y with the largest y - F decides whether there is such a y.
 *   - t(x^j) <= t(x)^j coefficient by coefficient. With that F becomes a polynomial in y alone
 *     (plane trees), whose solution bounds T(r^j) for the small arguments r^j. (Trees of large
 *     arity grow so slowly that r^2 can be too large for that; r then stays smaller than it
 *     could be, and slots are wider, but the numbers are small.)
 * Every quantity is monotone, so a safety margin of 1e-9 covers the rounding of doubles.
 *
 * The solver's intermediate results are non-negative parts of divisor * F, of its derivative
 * (at most 8 times as large) or of 1/(1 - F'), where factors p_j = 1 + .. and a factor y^shift
 * can be missing, which stands for at most 7 degrees. So they are at most 8 * divisor * t_{d+7},
 * and 1/(1 - F') is at most the derivative of t(x), with coefficients (d+1) t_{d+1}.
 */
#include "count_private.h"

#include <math.h>

/* sum of the terms / divisor at p_j = p[j], or its derivative by p_1; marks count as 1 */
static double evaluate(const idsi_count_equation *eq, const double *p, bool derivative)
{
    double sum = 0;

    for (size_t i = 0; i < eq->count; i++) {
        const idsi_count_term *term = &eq->terms[i];
        double value = (double)term->weight;
        int ones = term->cycles[1];

        if (derivative) {
            value *= ones;
            ones--;
        }
        for (; ones > 0; ones--) {
            value *= p[1];
        }
        for (uint32_t j = 2; j <= IDS_MAX_ARITY; j++) {
            for (uint32_t c = 0; c < term->cycles[j]; c++) {
                value *= p[j];
            }
        }
        sum += value;
    }
    return sum / (double)eq->divisor;
}

/* The same with p_j = y^j: plane trees. */
static double evaluate_plane(const idsi_count_equation *eq, double y)
{
    double p[IDS_MAX_ARITY + 1] = {0, y};

    for (uint32_t j = 2; j <= IDS_MAX_ARITY; j++) {
        p[j] = p[j - 1] * y;
    }
    return evaluate(eq, p, false);
}

/* Where y - F(y, p_2, ...) is largest: F' = 1. In [0, 8] F' passes 1 for every arity and group. */
static double find_top(const idsi_count_equation *eq, double *p)
{
    double low = 0;
    double high = 8;

    for (int step = 0; step < 60; step++) {
        p[1] = (low + high) / 2;
        if (evaluate(eq, p, true) < 1) {
            low = p[1];
        } else {
            high = p[1];
        }
    }
    return low;
}

/* Where y - F(y, y^2, ...) is largest; below 1, since there F' >= k >= 2. */
static double find_plane_top(const idsi_count_equation *eq)
{
    double low = 0;
    double high = 1;

    for (int step = 0; step < 100; step++) {
        double a = low + (high - low) / 3;
        double b = high - (high - low) / 3;

        if (a - evaluate_plane(eq, a) < b - evaluate_plane(eq, b)) {
            low = a;
        } else {
            high = b;
        }
    }
    return low;
}

/* A bound for T(r) by plane trees; `top` from find_plane_top(). Negative when there is none. */
static double plane_value(const idsi_count_equation *eq, double top, double r)
{
    double low = 0;
    double high = top;

    if (top - evaluate_plane(eq, top) < r) {
        return -1;
    }
    for (int step = 0; step < 60; step++) {
        double y = (low + high) / 2;

        if (y - evaluate_plane(eq, y) < r) {
            low = y;
        } else {
            high = y;
        }
    }
    return high * (1 + 1e-9);
}

/* A bound for T(r); negative when none is found. */
static double value_bound(const idsi_count_equation *eq, double top, double r)
{
    double p[IDS_MAX_ARITY + 1] = {0};
    double power = r;

    for (uint32_t j = 2; j <= IDS_MAX_ARITY; j++) {
        power *= r;
        p[j] = plane_value(eq, top, power);
        if (p[j] < 0) {
            return -1;
        }
    }
    p[1] = find_top(eq, p);
    return p[1] - evaluate(eq, p, false) >= r * (1 + 1e-9) ? p[1] : -1;
}

void idsi_count_bound(idsi_count_equation *eq)
{
    double top = find_plane_top(eq);
    double low = (top - evaluate_plane(eq, top)) * (1 - 1e-9);
    double value = top;
    double high = 1;

    for (int step = 0; step < 40; step++) {
        double r = (low + high) / 2;
        double y = value_bound(eq, top, r);

        if (y >= 0) {
            low = r;
            value = y;
        } else {
            high = r;
        }
    }
    eq->log2_head = log2(value);
    eq->log2_rate = -log2(low);
}

size_t idsi_count_width(const idsi_count_equation *eq, double degree)
{
    double bits = eq->log2_head + (degree + 8) * eq->log2_rate * (1 + 1e-9);

    bits += 3 + log2(8 * (double)eq->divisor * (degree + 9));
    return bits < 64 ? 1 : (size_t)(bits / 64) + 1;
}
