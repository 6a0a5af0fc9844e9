/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The character of the multilinear monomials, degree by degree.
 *
 * A class function c of degree n stands for the symmetric function sum of c(mu) p_mu / z_mu over
 * the cycle types mu. With x_i = p_i / i this is the sum of c(mu) product of x_i^m_i / m_i!, an
 * exponential series in many variables, so all numbers stay whole:
 *   - a product of c of degree a and d of degree b has at mu + nu the sum of c(mu) d(nu) times the
 *     binomials (m_i + n_i over m_i), for all ways to write a cycle type as mu + nu;
 *   - p_j[c] has at j mu, all parts j times as long, the value j^(number of parts) c(mu).
 * M = h1 + (sum of weight * product) / divisor then determines M in degree n from the smaller
 * degrees, because every product but M itself has two factors or j > 1 (cycle_index.c).
 *
 * Bounds. Let T be the series of plane trees, T = x + sum of T^k over the operations. No value of
 * M in degree n is larger than n! T_n, and no value of a product of total arity k than n! times
 * the coefficient of x^n in T^k: for a product this follows from the sum of the binomials with
 * given degrees, and for p_j because T(x^j) <= T(x)^j. That coefficient is at most T_(n+7), since T
 * begins with x and some T^k, k <= 8, is in T. Sums with weights add a factor divisor.
 * cocharacter.c multiplies by n! and by characters, which are at most sqrt(n!).
 */
#include "cocharacter_private.h"

#include <math.h>

#define MAX IDS_MAX_PARTITION_DEGREE

/* ---- wide numbers -------------------------------------------------------------------------- */

bool idsi_wide_scale(mp_limb_t *value, size_t width, mp_limb_t a, mp_limb_t b)
{
    const bool negative = idsi_wide_is_negative(value, width);
    const mp_size_t limbs = (mp_size_t)width;

    if (negative) {
        mpn_neg(value, value, limbs);
    }
    mpn_mul_1(value, value, limbs, a);
    const mp_limb_t rest = mpn_divrem_1(value, 0, value, limbs, b);
    if (negative) {
        mpn_neg(value, value, limbs);
    }
    return rest == 0;
}

/* sum += a * b */
static void add_product(mp_limb_t *sum, const mp_limb_t *a, const mp_limb_t *b, size_t width)
{
    for (size_t i = 0; i < width; i++) {
        if (b[i] != 0) {
            mpn_addmul_1(sum + i, a, (mp_size_t)(width - i), b[i]);
        }
    }
}

/* Limbs that hold everything up to a degree. */
static size_t find_width(const ids_signature *sig, uint64_t divisor, uint32_t degree)
{
    double power[IDS_MAX_ARITY + 1][MAX + 8] = {{0}}; /* of T */
    double factorial = 0;                             /* its logarithm */

    for (uint32_t n = 1; n < degree + 8; n++) {
        power[1][n] = n == 1 ? 1 : 0;
        for (uint32_t k = 2; k <= IDS_MAX_ARITY; k++) {
            for (uint32_t i = 1; i < n; i++) {
                power[k][n] += power[k - 1][i] * power[1][n - i];
            }
        }
        for (size_t i = 0; i < sig->count; i++) {
            power[1][n] += power[sig->ops[i].arity][n];
        }
        factorial += n <= degree ? log2((double)n) : 0;
    }
    double most = 1;
    for (uint32_t n = 1; n < degree + 8; n++) {
        most = power[1][n] > most ? power[1][n] : most;
    }
    const double sums = log2(most) + factorial + log2((double)divisor);
    const double expansion = log2(most) + 2.5 * factorial;
    return (size_t)((fmax(sums, expansion) + 2) / 64) + 1;
}

/* ---- creation ------------------------------------------------------------------------------ */

static void read_runs(const ids_partition *partition, idsi_runs *runs)
{
    *runs = (idsi_runs){0};
    for (uint32_t i = 0; i < partition->length; i++) {
        if (i == 0 || partition->part[i] != partition->part[i - 1]) {
            runs->part[runs->count++] = partition->part[i];
        }
        runs->times[runs->count - 1]++;
    }
}

ids_status idsi_plethysm_create(ids_ctx *ctx, const ids_signature *sig, uint32_t max_degree,
                                idsi_plethysm *plethysm)
{
    ids_status st = IDS_OK;
    size_t total = 0;

    *plethysm = (idsi_plethysm){.ctx = ctx, .max_degree = max_degree};
    idsi_partition_counts_fill(&plethysm->counts);
    for (uint32_t n = 0; n <= max_degree; n++) {
        plethysm->first[n] = total;
        total += idsi_partition_number(&plethysm->counts, n);
    }
    plethysm->first[max_degree + 1] = total;
    IDSI_TRY(idsi_alloc_array(ctx, total, sizeof *plethysm->runs, &plethysm->runs));
    for (uint32_t n = 0; n <= max_degree; n++) {
        idsi_runs *runs = plethysm->runs + plethysm->first[n];
        ids_partition partition;

        idsi_partition_first(n, &partition);
        do {
            read_runs(&partition, runs++);
        } while (idsi_partition_next(&partition));
    }
    IDSI_TRY(idsi_cycle_sum_create(ctx, sig, &plethysm->sum));
    plethysm->width = find_width(sig, plethysm->sum.divisor, max_degree);
    IDSI_ASSERT(plethysm->width <= IDSI_MAX_WIDTH);
    for (size_t i = 0; i < plethysm->sum.count; i++) {
        IDSI_TRY(idsi_alloc_array(ctx, total * plethysm->width, sizeof(mp_limb_t),
                                  &plethysm->sum.products[i].values));
    }
done:
    if (st != IDS_OK) {
        idsi_plethysm_clear(plethysm);
    }
    return st;
}

void idsi_plethysm_clear(idsi_plethysm *plethysm)
{
    idsi_cycle_sum_clear(plethysm->ctx, &plethysm->sum);
    idsi_free(plethysm->ctx, plethysm->runs);
    *plethysm = (idsi_plethysm){0};
}

/* ---- one degree ---------------------------------------------------------------------------- */

/* Index of the cycle type a + b; *ways = product of the binomials. */
static uint32_t join(const idsi_partition_counts *counts, uint32_t degree, const idsi_runs *a,
                     const idsi_runs *b, uint64_t *ways)
{
    uint32_t rest = degree;
    uint32_t bound = degree;
    uint32_t index = 0;
    uint32_t i = 0;
    uint32_t j = 0;

    *ways = 1;
    while (i < a->count || j < b->count) {
        uint32_t part_a = i < a->count ? a->part[i] : 0;
        uint32_t part_b = j < b->count ? b->part[j] : 0;
        uint32_t part = part_a > part_b ? part_a : part_b;
        uint32_t times = 0;

        if (part_a == part) {
            times += a->times[i++];
        }
        if (part_b == part) {
            times += b->times[j++];
        }
        if (part_a == part_b) {
            *ways *= idsi_binomial(times, a->times[i - 1]);
        }
        index += counts->at[rest][bound] - counts->at[rest][part];
        bound = part;
        rest -= part * times;
    }
    return index;
}

/* to += scale * from * other, where from is of degree a and other of degree n - a. */
static ids_status multiply(const idsi_plethysm *plethysm, const mp_limb_t *from, uint32_t a,
                           const mp_limb_t *other, uint32_t n, uint64_t scale, mp_limb_t *to)
{
    const size_t width = plethysm->width;
    const uint32_t count_a = idsi_partition_number(&plethysm->counts, a);
    const uint32_t count_b = idsi_partition_number(&plethysm->counts, n - a);
    const idsi_runs *runs_a = plethysm->runs + plethysm->first[a];
    const idsi_runs *runs_b = plethysm->runs + plethysm->first[n - a];
    mp_limb_t scaled[IDSI_MAX_WIDTH];
    ids_status st = IDS_OK;

    for (uint32_t i = 0; i < count_a; i++) {
        if (idsi_wide_is_zero(from + i * width, width)) {
            continue;
        }
        for (uint32_t j = 0; j < count_b; j++) {
            const mp_limb_t *factor = other + j * width;
            uint64_t ways = 0;

            if (idsi_wide_is_zero(factor, width)) {
                continue;
            }
            uint32_t index = join(&plethysm->counts, n, &runs_a[i], &runs_b[j], &ways);
            mpn_mul_1(scaled, from + i * width, (mp_size_t)width, ways * scale);
            add_product(to + index * width, scaled, factor, width);
        }
        IDSI_TRY(idsi_poll(plethysm->ctx, NULL));
    }
done:
    return st;
}

/* p_j[M] in degree n, j > 1. */
static void stretch(const idsi_plethysm *plethysm, uint32_t j, uint32_t n, mp_limb_t *to)
{
    const size_t width = plethysm->width;
    const mp_limb_t *from = idsi_plethysm_values(plethysm, n / j);
    ids_partition partition;

    idsi_partition_first(n / j, &partition);
    do {
        ids_partition long_parts = {.degree = n, .length = partition.length};
        uint64_t scale = 1;

        for (uint32_t i = 0; i < partition.length; i++) {
            long_parts.part[i] = (uint8_t)(j * partition.part[i]);
            scale *= j;
        }
        mpn_mul_1(to + idsi_partition_index(&plethysm->counts, &long_parts) * width, from,
                  (mp_size_t)width, scale);
        from += width;
    } while (idsi_partition_next(&partition));
}

/* One product in degree n. */
static ids_status extend_product(const idsi_plethysm *plethysm, const idsi_cycle_product *product,
                                 uint32_t n)
{
    const idsi_cycle_sum *sum = &plethysm->sum;
    const size_t width = plethysm->width;
    mp_limb_t *to = product->values + plethysm->first[n] * width;
    ids_status st = IDS_OK;

    if (product->parent == IDSI_NO_PRODUCT) {
        if (n % product->cycle == 0) {
            stretch(plethysm, product->cycle, n, to);
        }
        return IDS_OK;
    }
    const mp_limb_t *parent = sum->products[product->parent].values;
    const mp_limb_t *single = sum->products[sum->single[product->cycle]].values;
    const bool square = parent == single;
    for (uint32_t a = 1; a < n; a++) {
        uint32_t b = n - a;

        /* M M: degrees a, b give what b, a give. */
        if (b % product->cycle == 0 && !(square && a > b)) {
            IDSI_TRY(multiply(plethysm, parent + plethysm->first[a] * width, a,
                              single + plethysm->first[b] * width, n, square && a < b ? 2 : 1, to));
        }
    }
done:
    return st;
}

/* M in degree n > 1 from the products. */
static ids_status add_up(const idsi_plethysm *plethysm, uint32_t n)
{
    const idsi_cycle_sum *sum = &plethysm->sum;
    const size_t width = plethysm->width;
    const mp_size_t limbs = (mp_size_t)width;

    for (size_t at = plethysm->first[n]; at < plethysm->first[n + 1]; at++) {
        mp_limb_t *to = sum->products[0].values + at * width;

        for (size_t i = 1; i < sum->count; i++) {
            const int64_t weight = sum->products[i].weight;
            const mp_limb_t *from = sum->products[i].values + at * width;

            if (weight > 0) {
                mpn_addmul_1(to, from, limbs, (mp_limb_t)weight);
            } else if (weight < 0) {
                mpn_submul_1(to, from, limbs, (mp_limb_t)-weight);
            }
        }
        if (!idsi_wide_scale(to, width, 1, sum->divisor)) {
            return idsi_fail(plethysm->ctx, IDS_ERR_INTERNAL,
                             "degree %u: a value of the free character is not whole", n);
        }
    }
    return IDS_OK;
}

ids_status idsi_plethysm_extend(idsi_plethysm *plethysm, uint32_t n, const ids_progress *progress)
{
    const idsi_cycle_sum *sum = &plethysm->sum;
    ids_status st = IDS_OK;

    if (n == 1) {
        sum->products[0].values[plethysm->first[1] * plethysm->width] = 1;
        return IDS_OK;
    }
    for (size_t i = 1; i < sum->count; i++) {
        IDSI_TRY(idsi_poll(plethysm->ctx, progress));
        IDSI_TRY(extend_product(plethysm, &sum->products[i], n));
    }
    IDSI_TRY(add_up(plethysm, n));
done:
    return st;
}
