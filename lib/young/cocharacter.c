/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * From the character of the multilinear monomials to multiplicities.
 *
 * n! times the characteristic is the sum of c(mu) (n!/z_mu) p_mu. It is written in Schur functions
 * by Horner's rule on the parts, smallest first: what has the parts nu in front and a sum of
 * products of parts >= b behind is
 *
 *     S(nu, rest, b) = sum over k >= b of p_k S(nu + k, rest - k, k),
 *
 * and p_k adds border strips (character.c). So products with equal large parts are expanded
 * together, no character table is needed, and S is sparse where b is large. On the stack of the
 * recursion every degree `rest` stands once, so one vector for each degree is enough.
 *
 * The result is n! times the multiplicities; a remainder or a negative number would show that
 * something went wrong before.
 */
#include "cocharacter_private.h"

#include <string.h>

#define MAX IDS_MAX_PARTITION_DEGREE

typedef struct expansion {
    ids_ctx *ctx;
    const ids_progress *progress;
    const idsi_strips *strips;
    size_t width;
    uint32_t degree;
    mp_limb_t *coefficient; /* c(mu) n!/z_mu */
    mp_limb_t *schur[MAX + 1];
    uint8_t times[MAX + 1]; /* the parts in front */
} expansion;

static void clear_expansion(expansion *e)
{
    idsi_free(e->ctx, e->coefficient);
    for (uint32_t n = 0; n <= MAX; n++) {
        idsi_free(e->ctx, e->schur[n]);
    }
}

/* Room for a degree; e->degree is the one before, whose vectors of smaller degrees stay. */
static ids_status enter_degree(expansion *e, uint32_t degree)
{
    const size_t count = idsi_partition_number(&e->strips->counts, degree);
    ids_status st = IDS_OK;

    e->degree = degree;
    IDSI_TRY(idsi_resize_array(e->ctx, count * e->width, sizeof(mp_limb_t), &e->coefficient));
    IDSI_TRY(idsi_alloc_array(e->ctx, count * e->width, sizeof(mp_limb_t), &e->schur[degree]));
done:
    return st;
}

/* value *= n!/z_mu. With s the sum of the parts so far, s!/z of these parts is always whole. */
static bool scale_by_class(mp_limb_t *value, size_t width, const idsi_runs *runs)
{
    uint32_t sum = 0;

    for (uint32_t i = 0; i < runs->count; i++) {
        for (uint32_t t = 1; t <= runs->times[i]; t++) {
            for (uint32_t k = 1; k <= runs->part[i]; k++) {
                sum++;
                if (!idsi_wide_scale(value, width, sum,
                                     k == runs->part[i] ? (mp_limb_t)runs->part[i] * t : 1)) {
                    return false;
                }
            }
        }
    }
    return true;
}

static ids_status fill_coefficients(expansion *e, const idsi_plethysm *plethysm)
{
    const size_t count = idsi_partition_number(&e->strips->counts, e->degree);
    const idsi_runs *runs = plethysm->runs + plethysm->first[e->degree];

    memcpy(e->coefficient, idsi_plethysm_values(plethysm, e->degree),
           count * e->width * sizeof *e->coefficient);
    for (size_t i = 0; i < count; i++) {
        if (!scale_by_class(e->coefficient + i * e->width, e->width, &runs[i])) {
            return idsi_fail(e->ctx, IDS_ERR_INTERNAL,
                             "degree %u: the size of a class is not whole", e->degree);
        }
    }
    return IDS_OK;
}

/* to += p_k from, `from` of degree m. */
static void add_strips(const expansion *e, uint32_t m, uint32_t k, const mp_limb_t *from,
                       mp_limb_t *to)
{
    const idsi_strips *strips = e->strips;
    const uint32_t *start = strips->start + strips->first[m][k];
    const mp_size_t limbs = (mp_size_t)e->width;

    for (uint32_t i = 0; i < idsi_partition_number(&strips->counts, m); i++, from += e->width) {
        if (idsi_wide_is_zero(from, e->width)) {
            continue;
        }
        for (uint32_t at = start[i]; at < start[i + 1]; at++) {
            const uint32_t entry = strips->entry[at];
            mp_limb_t *place = to + (entry >> 1) * e->width;

            if ((entry & 1u) != 0) {
                mpn_sub_n(place, place, from, limbs);
            } else {
                mpn_add_n(place, place, from, limbs);
            }
        }
    }
}

/* Index of the partition whose parts are all in front. */
static uint32_t front_index(const expansion *e)
{
    const idsi_partition_counts *counts = &e->strips->counts;
    uint32_t rest = e->degree;
    uint32_t bound = rest;
    uint32_t index = 0;

    for (uint32_t part = bound; part > 0; part--) {
        if (e->times[part] > 0) {
            index += counts->at[rest][bound] - counts->at[rest][part];
            bound = part;
            rest -= part * e->times[part];
        }
    }
    return index;
}

/* Writes S(front, rest, least) to e->schur[rest]. */
static ids_status expand(expansion *e, uint32_t rest, uint32_t least)
{
    const size_t count = idsi_partition_number(&e->strips->counts, rest);
    ids_status st = IDS_OK;

    if (rest == 0) {
        memcpy(e->schur[0], e->coefficient + front_index(e) * e->width,
               e->width * sizeof *e->coefficient);
        return IDS_OK;
    }
    IDSI_TRY(idsi_poll(e->ctx, e->progress));
    memset(e->schur[rest], 0, count * e->width * sizeof *e->coefficient);
    for (uint32_t k = least; k <= rest; k++) {
        if (k < rest && rest - k < k) {
            continue; /* nothing of at least k fits behind k */
        }
        e->times[k]++;
        st = expand(e, rest - k, k);
        e->times[k]--;
        if (st != IDS_OK) {
            goto done;
        }
        add_strips(e, rest - k, k, e->schur[rest - k], e->schur[rest]);
    }
done:
    return st;
}

/* Divides by n! and stores. */
static ids_status store(const expansion *e, uint64_t *multiplicity)
{
    const size_t count = idsi_partition_number(&e->strips->counts, e->degree);

    for (size_t i = 0; i < count; i++) {
        mp_limb_t *value = e->schur[e->degree] + i * e->width;
        bool whole = !idsi_wide_is_negative(value, e->width);

        for (uint32_t k = 2; k <= e->degree && whole; k++) {
            whole = idsi_wide_scale(value, e->width, 1, k);
        }
        if (!whole) {
            return idsi_fail(e->ctx, IDS_ERR_INTERNAL,
                             "degree %u: a multiplicity of the free algebra is no natural number",
                             e->degree);
        }
        bool fits = e->width == 1 || idsi_wide_is_zero(value + 1, e->width - 1);
        multiplicity[i] = fits ? value[0] : UINT64_MAX;
    }
    return IDS_OK;
}

/* All degrees, the cost of each about the number of pairs of partitions that add up to it. */
static ids_status fill(idsi_plethysm *plethysm, expansion *e, ids_cocharacter *made)
{
    const uint32_t max_degree = made->max_degree;
    double cost[MAX + 1] = {0};
    ids_status st = IDS_OK;

    for (uint32_t n = 1; n <= max_degree; n++) {
        cost[n] = cost[n - 1];
        for (uint32_t a = 0; a <= n; a++) {
            cost[n] += (double)idsi_partition_number(&plethysm->counts, a) *
                       idsi_partition_number(&plethysm->counts, n - a);
        }
    }
    IDSI_TRY(enter_degree(e, 0));
    for (uint32_t n = 1; n <= max_degree; n++) {
        const ids_progress progress = {.stage = "free cocharacter",
                                       .degree = n,
                                       .done = n - 1,
                                       .total = max_degree,
                                       .share = cost[n - 1] / cost[max_degree]};

        e->progress = &progress;
        IDSI_TRY(idsi_plethysm_extend(plethysm, n, &progress));
        IDSI_TRY(enter_degree(e, n));
        IDSI_TRY(fill_coefficients(e, plethysm));
        IDSI_TRY(expand(e, n, 1));
        IDSI_TRY(store(e, made->multiplicity + made->first[n]));
    }
done:
    e->progress = NULL; /* it was on the stack of the loop */
    return st;
}

ids_status ids_cocharacter_create(ids_ctx *ctx, const ids_signature *signature, uint32_t max_degree,
                                  ids_cocharacter **cocharacter)
{
    ids_status st = IDS_OK;
    ids_cocharacter *made = NULL;
    idsi_plethysm plethysm = {0};
    idsi_strips strips = {0};
    expansion e = {.ctx = ctx, .strips = &strips};

    if (ctx == NULL || signature == NULL || cocharacter == NULL) {
        return idsi_fail_arg(ctx, ctx == NULL         ? "ctx"
                                  : signature == NULL ? "signature"
                                                      : "cocharacter");
    }
    if (max_degree < 1 || max_degree > MAX) {
        return idsi_fail(ctx, IDS_ERR_ARG, "cocharacters: the largest degree is 1 .. %u, not %u",
                         MAX, max_degree);
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->max_degree = max_degree;
    IDSI_TRY(idsi_plethysm_create(ctx, signature, max_degree, &plethysm));
    memcpy(made->first, plethysm.first, sizeof made->first);
    IDSI_TRY(idsi_alloc_array(ctx, made->first[max_degree + 1], sizeof *made->multiplicity,
                              &made->multiplicity));
    IDSI_TRY(idsi_strips_create(ctx, max_degree, &strips));
    e.width = plethysm.width;
    IDSI_TRY(fill(&plethysm, &e, made));
    *cocharacter = made;
    made = NULL;
done:
    clear_expansion(&e);
    idsi_strips_clear(&strips);
    idsi_plethysm_clear(&plethysm);
    ids_cocharacter_free(made);
    return st;
}

void ids_cocharacter_free(ids_cocharacter *cocharacter)
{
    if (cocharacter != NULL) {
        ids_ctx *ctx = cocharacter->ctx;

        idsi_free(ctx, cocharacter->multiplicity);
        idsi_free(ctx, cocharacter);
    }
}

uint32_t ids_cocharacter_max_degree(const ids_cocharacter *cocharacter)
{
    return cocharacter == NULL ? 0 : cocharacter->max_degree;
}

ids_status ids_cocharacter_multiplicity(const ids_cocharacter *cocharacter, uint32_t degree,
                                        uint64_t index, uint64_t *multiplicity)
{
    if (cocharacter == NULL || multiplicity == NULL || degree < 1 ||
        degree > cocharacter->max_degree ||
        index >= cocharacter->first[degree + 1] - cocharacter->first[degree]) {
        return IDS_ERR_ARG;
    }
    const uint64_t stored = cocharacter->multiplicity[cocharacter->first[degree] + index];
    if (stored == UINT64_MAX) {
        return IDS_ERR_LIMIT;
    }
    *multiplicity = stored;
    return IDS_OK;
}
