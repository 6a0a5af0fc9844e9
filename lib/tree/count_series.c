/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Solves a counting equation t = 1 + F(t(y), t(y^2), ...) by Newton's iteration on power
 * series, every series held as one big number (Kronecker substitution).
 *
 * Memory picture, `width` limbs a slot, value = sum of t_i * 2^(64 * width * i):
 *
 *     limbs:  | t_0 ........ | t_1 ........ | t_2 ........ | ... | t_last ..... |
 *               low     high
 *
 * All coefficients are non-negative and fit their slots with all sums on the way
 * (count_bound.c), so one mpn_mul() multiplies two series, one mpn_divexact_1() divides all
 * coefficients, and y -> y^j moves slot i to slot i*j.
 *
 * One step goes from t exact through y^m to t exact through y^n, n <= 2m+1. Let t0 be t cut at
 * y^m and p_j = t0(y^j), which is exact through y^n for j >= 2. With F' the derivative by p_1,
 *
 *     t = t0 + (1 + F(t0) - t0) / (1 - F'(t0))    through y^n.
 *
 * F(t0) and F'(t0) are integral: a cycle index at a series with non-negative integer
 * coefficients counts orbits (Polya), and its derivative is the sum of the cycle indices of
 * point stabilisers. The numerator starts at y^(m+1), so 1/(1 - F') is needed through y^m only;
 * one Newton step takes it there from where the step before left it. No term is ever negative:
 * the numerator is F(t0) above y^m, and the new part of the inverse B is B times the part of
 * F' B above the old precision.
 *
 * Invariants between steps: t is exact through y^known, the inverse through y^half, and half is
 * the `known` of the step before.
 * Source: R. P. Brent, H. T. Kung, J. ACM 25 (1978) for Newton's iteration on series; the
 * iteration for trees with cycle indices is worked out above.
 */
#include "count_private.h"

#include <string.h>

typedef struct solver {
    ids_ctx *ctx;
    const idsi_count_equation *eq;
    size_t width;
    uint64_t known;
    uint64_t half;
    uint64_t last;          /* target of this step */
    mp_limb_t *t;           /* slots 0 .. last */
    mp_limb_t *inverse;     /* 1/(1 - F'), slots 0 .. known */
    mp_limb_t *value;       /* 1 + F, slots 0 .. last */
    mp_limb_t *slope;       /* F', slots 0 .. known */
    mp_limb_t *coefficient; /* of a power of p_1 in F, slots 0 .. last */
    mp_limb_t *product;     /* of p_2, p_3, ..., slots 0 .. last */
    mp_limb_t *spread;      /* one p_j, slots 0 .. last */
    mp_limb_t *wide;        /* a whole product, 2 * (last + 1) slots */
} solver;

/* Buffers of last+1 slots: t, value, coefficient, product, spread, two of wide, half of each of
 * inverse and slope. */
#define BUFFERS 8u
/* GMP's scratch memory for a product, in such buffers: up to 6 are seen (GMP 6.2,
 * tests/property/test_count_memory.c). */
#define SCRATCH 10u

static size_t significant(const mp_limb_t *limbs, size_t n)
{
    while (n > 0 && limbs[n - 1] == 0) {
        n--;
    }
    return n;
}

static void clear_slots(const solver *s, mp_limb_t *out, uint64_t slots)
{
    memset(out, 0, (size_t)slots * s->width * sizeof *out);
}

/* out = low out_slots slots of a * b; out may be a or b. */
static ids_status multiply(solver *s, const mp_limb_t *a, uint64_t a_slots, const mp_limb_t *b,
                           uint64_t b_slots, mp_limb_t *out, uint64_t out_slots)
{
    ids_status st = IDS_OK;
    size_t room = (size_t)out_slots * s->width;
    size_t na = significant(a, (size_t)(a_slots < out_slots ? a_slots : out_slots) * s->width);
    size_t nb = significant(b, (size_t)(b_slots < out_slots ? b_slots : out_slots) * s->width);
    size_t n = na + nb < room ? na + nb : room;

    IDSI_TRY(idsi_poll(s->ctx, NULL));
    if (na == 0 || nb == 0) {
        clear_slots(s, out, out_slots);
        goto done;
    }
    if (na >= nb) {
        (void)mpn_mul(s->wide, a, (mp_size_t)na, b, (mp_size_t)nb);
    } else {
        (void)mpn_mul(s->wide, b, (mp_size_t)nb, a, (mp_size_t)na);
    }
    memcpy(out, s->wide, n * sizeof *out);
    memset(out + n, 0, (room - n) * sizeof *out);
done:
    return st;
}

/* out += weight * y^shift * a, through y^(slots-1). */
static void accumulate(const solver *s, mp_limb_t *out, uint64_t slots, const mp_limb_t *a,
                       uint64_t shift, uint64_t weight)
{
    if (shift < slots) {
        (void)mpn_addmul_1(out + (size_t)shift * s->width, a,
                           (mp_size_t)((size_t)(slots - shift) * s->width), weight);
    }
}

/* out = t(y^j) */
static void spread_power(const solver *s, uint32_t j, mp_limb_t *out)
{
    clear_slots(s, out, s->last + 1);
    for (uint64_t i = 0; i <= s->known && i * j <= s->last; i++) {
        memcpy(out + (size_t)(i * j) * s->width, s->t + (size_t)i * s->width,
               s->width * sizeof *out);
    }
}

/* product = product of p_j^cycles[j] over j >= 2; *any tells whether there is a factor. */
static ids_status multiply_powers(solver *s, const uint8_t *cycles, bool *any)
{
    ids_status st = IDS_OK;

    *any = false;
    for (uint32_t j = 2; j <= IDS_MAX_ARITY; j++) {
        for (uint32_t c = 0; c < cycles[j]; c++) {
            if (!*any) {
                spread_power(s, j, s->product);
                *any = true;
                continue;
            }
            spread_power(s, j, s->spread);
            IDSI_TRY(multiply(s, s->product, s->last + 1, s->spread, s->last + 1, s->product,
                              s->last + 1));
        }
    }
done:
    return st;
}

/* coefficient = what multiplies p_1^power in divisor * F. */
static ids_status collect(solver *s, uint32_t power)
{
    ids_status st = IDS_OK;
    const idsi_count_term *before = NULL;
    bool any = false;

    clear_slots(s, s->coefficient, s->last + 1);
    for (size_t i = 0; i < s->eq->count; i++) {
        const idsi_count_term *term = &s->eq->terms[i];

        if (term->cycles[1] != power || term->shift > s->last) {
            continue;
        }
        if (before == NULL || memcmp(before->cycles, term->cycles, sizeof term->cycles) != 0) {
            IDSI_TRY(multiply_powers(s, term->cycles, &any));
        }
        before = term;
        if (any) {
            accumulate(s, s->coefficient, s->last + 1, s->product, term->shift, term->weight);
        } else {
            mp_limb_t *slot = s->coefficient + (size_t)term->shift * s->width;

            (void)mpn_add_1(slot, slot, (mp_size_t)s->width, term->weight);
        }
    }
done:
    return st;
}

/* value = 1 + F through y^last, slope = F' through y^known, by Horner's rule in p_1. */
static ids_status evaluate(solver *s)
{
    ids_status st = IDS_OK;
    uint64_t all = s->last + 1;
    uint64_t low = s->known + 1;

    clear_slots(s, s->value, all);
    clear_slots(s, s->slope, low);
    for (uint32_t power = IDS_MAX_ARITY + 1; power-- > 0;) {
        IDSI_TRY(collect(s, power));
        IDSI_TRY(multiply(s, s->value, all, s->t, low, s->value, all));
        accumulate(s, s->value, all, s->coefficient, 0, 1);
        if (power > 0) {
            IDSI_TRY(multiply(s, s->slope, low, s->t, low, s->slope, low));
            accumulate(s, s->slope, low, s->coefficient, 0, power);
        }
    }
    if (s->eq->divisor > 1) {
        mpn_divexact_1(s->value, s->value, (mp_size_t)((size_t)all * s->width), s->eq->divisor);
        mpn_divexact_1(s->slope, s->slope, (mp_size_t)((size_t)low * s->width), s->eq->divisor);
    }
    s->value[0] += 1;
    IDSI_ASSERT(memcmp(s->value, s->t, (size_t)low * s->width * sizeof *s->t) == 0);
done:
    return st;
}

/* Takes the inverse from y^half to y^known, then t from y^known to y^last. */
static ids_status improve(solver *s)
{
    ids_status st = IDS_OK;
    uint64_t low = s->known + 1;
    uint64_t fresh = s->known - s->half;
    size_t from = (size_t)(s->half + 1) * s->width;

    if (fresh > 0) {
        IDSI_TRY(multiply(s, s->slope, low, s->inverse, s->half + 1, s->product, low));
        IDSI_TRY(multiply(s, s->product + from, fresh, s->inverse, s->half + 1, s->inverse + from,
                          fresh));
    }
    from = (size_t)low * s->width;
    fresh = s->last - s->known;
    IDSI_TRY(multiply(s, s->value + from, fresh, s->inverse, low, s->t + from, fresh));
    s->half = s->known;
    s->known = s->last;
done:
    return st;
}

/* Gives slots 0 .. count-1 a larger width, in place, last one first. */
static void widen(mp_limb_t *limbs, uint64_t count, size_t width, size_t new_width)
{
    for (size_t i = (size_t)count; i-- > 0;) {
        memmove(limbs + i * new_width, limbs + i * width, width * sizeof *limbs);
        memset(limbs + i * new_width + width, 0, (new_width - width) * sizeof *limbs);
    }
}

/* Width for the exponents up to `last`. */
static size_t slot_width(const idsi_count_equation *eq, uint64_t last)
{
    uint64_t m = last / eq->place;

    return idsi_count_width(eq, (double)(m * eq->gap + 1));
}

uint64_t idsi_count_bytes(const idsi_count_equation *eq, uint64_t last)
{
    uint64_t slots = 0;
    uint64_t bytes = 0;

    if (!idsi_add_u64(last, 1, &slots) || !idsi_mul_u64(slots, slot_width(eq, last), &bytes) ||
        !idsi_mul_u64(bytes, (BUFFERS + SCRATCH) * sizeof(mp_limb_t), &bytes) ||
        bytes > SIZE_MAX / 2) {
        return UINT64_MAX;
    }
    return bytes;
}

static ids_status allocate(solver *s, uint64_t last)
{
    ids_status st = IDS_OK;
    size_t width = slot_width(s->eq, last);
    size_t all = (size_t)(last + 1) * width;
    size_t low = (size_t)(last / 2 + 1) * width;

    IDSI_TRY(idsi_alloc_array(s->ctx, all, sizeof(mp_limb_t), &s->t));
    IDSI_TRY(idsi_alloc_array(s->ctx, low, sizeof(mp_limb_t), &s->inverse));
    IDSI_TRY(idsi_alloc_array(s->ctx, all, sizeof(mp_limb_t), &s->value));
    IDSI_TRY(idsi_alloc_array(s->ctx, low, sizeof(mp_limb_t), &s->slope));
    IDSI_TRY(idsi_alloc_array(s->ctx, all, sizeof(mp_limb_t), &s->coefficient));
    IDSI_TRY(idsi_alloc_array(s->ctx, all, sizeof(mp_limb_t), &s->product));
    IDSI_TRY(idsi_alloc_array(s->ctx, all, sizeof(mp_limb_t), &s->spread));
    IDSI_TRY(idsi_alloc_array(s->ctx, all, 2 * sizeof(mp_limb_t), &s->wide));
done:
    return st;
}

static void release(solver *s)
{
    idsi_free(s->ctx, s->t);
    idsi_free(s->ctx, s->inverse);
    idsi_free(s->ctx, s->value);
    idsi_free(s->ctx, s->slope);
    idsi_free(s->ctx, s->coefficient);
    idsi_free(s->ctx, s->product);
    idsi_free(s->ctx, s->spread);
    idsi_free(s->ctx, s->wide);
}

ids_status idsi_count_solve(ids_ctx *ctx, const idsi_count_equation *eq, uint64_t last, double from,
                            double to, idsi_count_series *series)
{
    ids_status st = IDS_OK;
    solver s = {.ctx = ctx, .eq = eq, .width = 1};
    ids_progress progress = {.stage = "counting"};
    uint32_t steps = 0;

    IDSI_TRY(idsi_budget_check(ctx, idsi_count_bytes(eq, last), "counting"));
    IDSI_TRY(allocate(&s, last));
    s.t[0] = 1;
    s.inverse[0] = 1;
    while (last >> steps > 0) {
        steps++;
    }
    /* The targets last >> steps, .., last >> 1, last: each at most twice the one before, plus 1. */
    for (progress.total = steps; steps-- > 0; progress.done++) {
        size_t width = 0;

        s.last = last >> steps;
        width = slot_width(eq, s.last);
        widen(s.t, s.known + 1, s.width, width);
        widen(s.inverse, s.half + 1, s.width, width);
        s.width = width;
        progress.degree = (uint32_t)(s.last / eq->place * eq->gap + 1);
        /* a step costs about four times the one before */
        progress.share = from + (to - from) / (double)(UINT64_C(1) << 2 * (steps + 1));
        IDSI_TRY(idsi_poll(ctx, &progress));
        IDSI_TRY(evaluate(&s));
        IDSI_TRY(improve(&s));
    }
    *series = (idsi_count_series){.last = last, .width = s.width, .limbs = s.t};
    s.t = NULL;
done:
    release(&s);
    return st;
}

void idsi_count_series_clear(ids_ctx *ctx, idsi_count_series *series)
{
    idsi_free(ctx, series->limbs);
    *series = (idsi_count_series){0};
}

void idsi_count_series_get(const idsi_count_series *series, uint64_t index, mpz_t out)
{
    mpz_t view;

    mpz_set(out, mpz_roinit_n(view, series->limbs + (size_t)index * series->width,
                              (mp_size_t)series->width));
}
