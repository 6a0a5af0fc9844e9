/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The numbers of one degree, split by how often each operation is used.
 *
 * Rows are the lists u with sum of u[i] * (arity[i] - 1) = degree - 1, in lexicographic order.
 * ways[i][w] counts the ways to use up weight w with the operations i, i+1, ..; from it a row
 * number gives its list and a list its number, so that no list is stored.
 *
 * Types: for each set of operations that some row uses (its support) the counting equation is
 * solved with marks: a tree of degree 1 + gap * m with uses u stands at exponent
 * m * place + sum of u[i] * mark[i]. The marks are the place values of mixed radix digits, place
 * the highest of them; the most used operation needs no digit, since the degree and the other
 * uses give its own. y -> y^j multiplies all digits by j, as the cycle index asks for, and trees
 * with a digit too large have a degree beyond the one wanted, so their exponents lie beyond the
 * last slot. Set by set, since the digits of all operations at once would need far more slots
 * than there are rows.
 *
 * Monomials: (degree + m - 1)! / product of (u[i]! order[i]^u[i]), m the total of the uses.
 */
#include "count_private.h"

#include <string.h>

#include <idspan/gmp.h>

#define MOST_SLOTS (UINT64_C(1) << 40)

typedef struct part {
    uint32_t weight; /* arity - 1 */
    uint64_t order;
} part;

struct ids_count_split {
    ids_ctx *ctx;
    uint32_t degree;
    size_t count;   /* operations */
    part *parts;    /* count of them */
    uint64_t *ways; /* (count + 1) * degree: ways[i * degree + w] */
    uint64_t rows;
    size_t width;     /* limbs of a number of types */
    mp_limb_t *types; /* rows * width */
};

/* What the walk over the supports carries. */
typedef struct walk {
    ids_count_split *split;
    const ids_signature *sig;
    const idsi_count_equation *total; /* without marks: its bound holds for all supports */
    bool *member;                     /* by operation: in the support */
    uint64_t *mark;                   /* by operation */
    uint64_t place;
    uint64_t filled; /* rows that are done */
    uint32_t *uses;  /* by operation */
    bool *reached;   /* by weight */
    idsi_count_series series;
} walk;

static uint64_t ways_of(const ids_count_split *split, size_t from, uint32_t weight)
{
    return split->ways[from * split->degree + weight];
}

static ids_status count_rows(ids_count_split *split)
{
    uint32_t degree = split->degree;

    split->ways[split->count * degree] = 1;
    for (size_t i = split->count; i-- > 0;) {
        for (uint32_t w = 0; w < degree; w++) {
            uint64_t ways = ways_of(split, i + 1, w);
            uint32_t step = split->parts[i].weight;

            if (w >= step && !idsi_add_u64(ways, ways_of(split, i, w - step), &ways)) {
                return idsi_fail(split->ctx, IDS_ERR_LIMIT,
                                 "degree %u has more than 2^64 rows of uses", degree);
            }
            split->ways[i * degree + w] = ways;
        }
    }
    split->rows = ways_of(split, 0, degree - 1);
    return IDS_OK;
}

/* Number of the row with these uses. */
static uint64_t find_row(const ids_count_split *split, const uint32_t *uses)
{
    uint64_t row = 0;
    uint32_t rest = split->degree - 1;

    for (size_t i = 0; i < split->count; i++) {
        for (uint32_t u = 0; u < uses[i]; u++) {
            row += ways_of(split, i + 1, rest);
            rest -= split->parts[i].weight;
        }
    }
    return row;
}

/* Copies the counts of the rows that use every operation of the support, from operation i on. */
static ids_status read_rows(walk *w, size_t i, uint32_t rest, uint64_t index)
{
    ids_status st = IDS_OK;
    ids_count_split *split = w->split;

    if (i == split->count) {
        if (rest == 0) {
            const mp_limb_t *slot = w->series.limbs + (size_t)index * w->series.width;

            memcpy(split->types + (size_t)find_row(split, w->uses) * split->width, slot,
                   w->series.width * sizeof *slot);
            w->filled++;
        }
        return IDS_OK;
    }
    if (!w->member[i]) {
        w->uses[i] = 0;
        return read_rows(w, i + 1, rest, index);
    }
    IDSI_TRY(idsi_poll(split->ctx, NULL));
    for (uint32_t u = 1; u * split->parts[i].weight <= rest; u++) {
        w->uses[i] = u;
        IDSI_TRY(read_rows(w, i + 1, rest - u * split->parts[i].weight, index + u * w->mark[i]));
    }
done:
    return st;
}

/* Gives the members of the support their place values; IDS_ERR_LIMIT beyond 2^40 slots. */
static ids_status place_digits(walk *w)
{
    const ids_count_split *split = w->split;
    size_t most = SIZE_MAX;
    uint64_t place = 1;

    for (size_t i = 0; i < split->count; i++) {
        if (w->member[i] &&
            (most == SIZE_MAX || split->parts[i].weight < split->parts[most].weight)) {
            most = i;
        }
    }
    for (size_t i = 0; i < split->count; i++) {
        w->mark[i] = IDSI_COUNT_LEAVE_OUT;
        if (i == most) {
            w->mark[i] = 0;
        } else if (w->member[i]) {
            w->mark[i] = place;
            place *= (split->degree - 1) / split->parts[i].weight + 1;
        }
        if (place > MOST_SLOTS / (split->degree + 1)) {
            return idsi_fail(split->ctx, IDS_ERR_LIMIT,
                             "degree %u is too large to split the counts by operation",
                             split->degree);
        }
    }
    w->place = place;
    return IDS_OK;
}

static ids_status solve_support(walk *w)
{
    ids_status st = IDS_OK;
    ids_count_split *split = w->split;
    ids_ctx *ctx = split->ctx;
    idsi_count_equation eq = {0};
    double from = (double)w->filled / (double)split->rows;

    IDSI_TRY(place_digits(w));
    IDSI_TRY(idsi_count_types_equation(ctx, w->sig, w->mark, w->place, &eq));
    eq.log2_head = w->total->log2_head;
    eq.log2_rate = w->total->log2_rate;
    IDSI_TRY(
        idsi_count_solve(ctx, &eq, idsi_count_last(&eq, split->degree), from, from, &w->series));
    IDSI_TRY(read_rows(w, 0, split->degree - 1, (split->degree - 1) / eq.gap * w->place));
done:
    idsi_count_series_clear(ctx, &w->series);
    idsi_count_equation_clear(ctx, &eq);
    return st;
}

/* Whether multiples of the members' weights sum up to `rest`. */
static bool can_fill(const walk *w, uint32_t rest)
{
    const ids_count_split *split = w->split;

    for (uint32_t at = 0; at <= rest; at++) {
        w->reached[at] = at == 0;
        for (size_t i = 0; i < split->count && !w->reached[at]; i++) {
            uint32_t weight = split->parts[i].weight;

            w->reached[at] = w->member[i] && weight <= at && w->reached[at - weight];
        }
    }
    return w->reached[rest];
}

/*
 * Tries operation i in the support, then not; `rest` is the weight that is not yet used. The
 * largest supports come first, so that one that is too large is found before any work.
 */
static ids_status walk_supports(walk *w, size_t i, uint32_t rest)
{
    ids_status st = IDS_OK;

    if (i == w->split->count) {
        return can_fill(w, rest) ? solve_support(w) : IDS_OK;
    }
    if (w->split->parts[i].weight <= rest) {
        w->member[i] = true;
        IDSI_TRY(walk_supports(w, i + 1, rest - w->split->parts[i].weight));
    }
    w->member[i] = false;
    IDSI_TRY(walk_supports(w, i + 1, rest));
done:
    return st;
}

static ids_status count_types(ids_count_split *split, const ids_signature *sig)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = split->ctx;
    idsi_count_equation total = {0};
    walk w = {.split = split, .sig = sig, .total = &total};
    uint64_t limbs = 0;

    IDSI_TRY(idsi_count_types_equation(ctx, sig, NULL, 1, &total));
    idsi_count_bound(&total);
    split->width = idsi_count_width(&total, split->degree);
    if (!idsi_mul_u64(split->rows, split->width, &limbs) || limbs > SIZE_MAX / sizeof(mp_limb_t)) {
        st = idsi_fail(ctx, IDS_ERR_LIMIT, "degree %u has too many rows of uses", split->degree);
        goto done;
    }
    IDSI_TRY(idsi_alloc_array(ctx, (size_t)limbs, sizeof *split->types, &split->types));
    IDSI_TRY(idsi_alloc_array(ctx, split->count, sizeof *w.member, &w.member));
    IDSI_TRY(idsi_alloc_array(ctx, split->count, sizeof *w.mark, &w.mark));
    IDSI_TRY(idsi_alloc_array(ctx, split->count, sizeof *w.uses, &w.uses));
    IDSI_TRY(idsi_alloc_array(ctx, split->degree, sizeof *w.reached, &w.reached));
    IDSI_TRY(walk_supports(&w, 0, split->degree - 1));
    IDSI_ASSERT(w.filled == split->rows);
done:
    idsi_free(ctx, w.member);
    idsi_free(ctx, w.mark);
    idsi_free(ctx, w.uses);
    idsi_free(ctx, w.reached);
    idsi_count_equation_clear(ctx, &total);
    return st;
}

ids_status ids_count_split_create(ids_ctx *ctx, const ids_signature *signature, uint32_t degree,
                                  ids_count_split **split)
{
    ids_status st = IDS_OK;
    ids_count_split *made = NULL;

    if (ctx == NULL || signature == NULL || split == NULL) {
        return idsi_fail_arg(ctx, "context, signature or split");
    }
    if (degree == 0 || degree > IDS_MAX_COUNT_DEGREE) {
        return idsi_fail(ctx, IDS_ERR_ARG, "degree %u: counts can be split in degrees 1 to %u",
                         degree, IDS_MAX_COUNT_DEGREE);
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->degree = degree;
    made->count = signature->count;
    IDSI_TRY(idsi_alloc_array(ctx, made->count, sizeof *made->parts, &made->parts));
    for (size_t i = 0; i < made->count; i++) {
        made->parts[i] =
            (part){.weight = signature->ops[i].arity - 1, .order = signature->ops[i].group.order};
    }
    IDSI_TRY(idsi_alloc_array(ctx, (made->count + 1) * degree, sizeof *made->ways, &made->ways));
    IDSI_TRY(count_rows(made));
    if (made->rows > 0) {
        IDSI_TRY(count_types(made, signature));
    }
    *split = made;
    made = NULL;
done:
    ids_count_split_free(made);
    return st;
}

void ids_count_split_free(ids_count_split *split)
{
    if (split != NULL) {
        idsi_free(split->ctx, split->parts);
        idsi_free(split->ctx, split->ways);
        idsi_free(split->ctx, split->types);
        idsi_free(split->ctx, split);
    }
}

uint64_t ids_count_split_rows(const ids_count_split *split)
{
    return split == NULL ? 0 : split->rows;
}

ids_status ids_count_split_uses(const ids_count_split *split, uint64_t row, uint32_t *uses,
                                size_t capacity)
{
    uint32_t rest = 0;

    if (split == NULL || uses == NULL || row >= split->rows || capacity < split->count) {
        return IDS_ERR_ARG;
    }
    rest = split->degree - 1;
    for (size_t i = 0; i < split->count; i++) {
        uses[i] = 0;
        while (row >= ways_of(split, i + 1, rest)) {
            row -= ways_of(split, i + 1, rest);
            rest -= split->parts[i].weight;
            uses[i]++;
        }
    }
    return IDS_OK;
}

ids_status ids_count_split_types(const ids_count_split *split, uint64_t row, mpz_t types)
{
    mpz_t view;

    if (split == NULL || types == NULL || row >= split->rows) {
        return IDS_ERR_ARG;
    }
    mpz_set(types,
            mpz_roinit_n(view, split->types + (size_t)row * split->width, (mp_size_t)split->width));
    return IDS_OK;
}

ids_status ids_count_split_monomials(const ids_count_split *split, uint64_t row, mpz_t monomials)
{
    uint32_t uses[IDS_MAX_OPERATIONS] = {0};
    uint32_t nodes = 0;
    mpz_t factor;

    if (monomials == NULL || ids_count_split_uses(split, row, uses, IDS_MAX_OPERATIONS) != IDS_OK) {
        return IDS_ERR_ARG;
    }
    for (size_t i = 0; i < split->count; i++) {
        nodes += uses[i];
    }
    mpz_fac_ui(monomials, split->degree + nodes - 1);
    mpz_init(factor);
    for (size_t i = 0; i < split->count; i++) {
        mpz_fac_ui(factor, uses[i]);
        mpz_divexact(monomials, monomials, factor);
        mpz_ui_pow_ui(factor, split->parts[i].order, uses[i]);
        mpz_divexact(monomials, monomials, factor);
    }
    mpz_clear(factor);
    return IDS_OK;
}
