/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Builds the equations that count association types and multilinear monomials.
 *
 * Types: an operation with group G contributes the cycle index Z(G; t(y), t(y^2), ...) (Polya,
 * Acta Math. 68 (1937)). For all of S_k the permutations are counted by cycle type, for a
 * generated group its elements are read one by one. Everything is brought to one denominator,
 * the least common multiple of the group orders; orders divide k! and so 8! = 40320.
 *
 * Degrees are 1 + gap * m, gap the greatest common divisor of the (arity - 1): t(x) is x times a
 * series in x^gap. Written in that series the equation has t(0) = 1, and an operation of arity k
 * brings h = (k-1)/gap factors of the variable.
 *
 * Monomials: b(n) = (monomials of degree n) / n! satisfies b = x + sum of b^k / |G|. With
 * c(m) = scale^m b(1 + gap m) the operation gets the coefficient scale^h / |G|: an integer, if
 * scale has every prime p at least v/h times that divides |G| v times. Since |G| divides k!, v is
 * at most (k-1)/(p-1) <= gap * h (Legendre), so scale divides 210^gap.
 *
 * Invariants: terms are ordered by their cycles and then by shift, so equal products stand side
 * by side; weights stay below 64 * 210^7 < 2^64.
 */
#include "count_private.h"

#include <string.h>

static int compare_term(const idsi_count_term *a, const idsi_count_term *b)
{
    int order = memcmp(a->cycles, b->cycles, sizeof a->cycles);

    if (order != 0) {
        return order;
    }
    return a->shift < b->shift ? -1 : a->shift > b->shift;
}

/* Adds a term, to an equal one if there is one. */
static ids_status add_term(ids_ctx *ctx, idsi_count_equation *eq, const idsi_count_term *term)
{
    ids_status st = IDS_OK;
    size_t place = 0;

    while (place < eq->count && compare_term(&eq->terms[place], term) < 0) {
        place++;
    }
    if (place < eq->count && compare_term(&eq->terms[place], term) == 0) {
        eq->terms[place].weight += term->weight;
        return IDS_OK;
    }
    IDSI_TRY(idsi_grow(ctx, eq->count, &eq->capacity, sizeof *eq->terms, &eq->terms));
    memmove(&eq->terms[place + 1], &eq->terms[place], (eq->count - place) * sizeof *eq->terms);
    eq->terms[place] = *term;
    eq->count++;
done:
    return st;
}

/* Permutations in S_k with the given cycle type: k! / product of j^c_j c_j!. */
static uint64_t class_size(uint32_t k, const uint8_t *cycles)
{
    uint64_t size = 1;

    for (uint32_t i = 2; i <= k; i++) {
        size *= i;
    }
    for (uint32_t j = 1; j <= k; j++) {
        for (uint32_t c = 1; c <= cycles[j]; c++) {
            size /= (uint64_t)j * c;
        }
    }
    return size;
}

/* Adds the classes of S_k whose cycles of length > part are already chosen; `rest` points left. */
static ids_status add_classes(ids_ctx *ctx, idsi_count_equation *eq, idsi_count_term *term,
                              uint64_t unit, uint32_t k, uint32_t part, uint32_t rest)
{
    ids_status st = IDS_OK;

    if (part == 1) {
        term->cycles[1] = (uint8_t)rest;
        term->weight = unit * class_size(k, term->cycles);
        return add_term(ctx, eq, term);
    }
    for (uint32_t c = 0; c * part <= rest; c++) {
        term->cycles[part] = (uint8_t)c;
        IDSI_TRY(add_classes(ctx, eq, term, unit, k, part - 1, rest - c * part));
    }
done:
    term->cycles[part] = 0;
    return st;
}

static void read_cycles(const ids_signed_order *element, uint32_t k, uint8_t *cycles)
{
    uint32_t seen = 0;

    memset(cycles, 0, IDS_MAX_ARITY + 1);
    for (uint32_t start = 0; start < k; start++) {
        uint32_t length = 0;

        for (uint32_t at = start; (seen >> at & 1u) == 0; at = element->image[at]) {
            seen |= 1u << at;
            length++;
        }
        if (length > 0) {
            cycles[length]++;
        }
    }
}

/* Adds divisor * y^shift * Z(G). */
static ids_status add_operation(ids_ctx *ctx, idsi_count_equation *eq, const idsi_group *group,
                                uint64_t shift)
{
    ids_status st = IDS_OK;
    uint64_t unit = eq->divisor / group->order;
    idsi_count_term term = {.weight = unit, .shift = shift};

    if (group->symmetry == IDS_SYMMETRY_NONE) {
        term.cycles[1] = (uint8_t)group->arity;
        IDSI_TRY(add_term(ctx, eq, &term));
    } else if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        for (uint64_t i = 0; i < group->order; i++) {
            read_cycles(&group->elements[i], group->arity, term.cycles);
            IDSI_TRY(add_term(ctx, eq, &term));
        }
    } else {
        IDSI_TRY(add_classes(ctx, eq, &term, unit, group->arity, group->arity, group->arity));
    }
done:
    return st;
}

static uint64_t gcd(uint64_t a, uint64_t b)
{
    while (b != 0) {
        uint64_t rest = a % b;

        a = b;
        b = rest;
    }
    return a;
}

static bool left_out(const uint64_t *mark, size_t i)
{
    return mark != NULL && mark[i] == IDSI_COUNT_LEAVE_OUT;
}

/* An equation without terms yet: divisor, gap, place. */
static void start_equation(const ids_signature *sig, const uint64_t *mark, uint64_t place,
                           idsi_count_equation *eq)
{
    uint64_t gap = 0;

    *eq = (idsi_count_equation){.divisor = 1, .place = place};
    for (size_t i = 0; i < sig->count; i++) {
        if (!left_out(mark, i)) {
            uint64_t order = sig->ops[i].group.order;
            uint64_t common = gcd(eq->divisor, order);

            IDSI_ASSERT(common > 0);
            gap = gcd(gap, sig->ops[i].arity - 1);
            eq->divisor = eq->divisor / common * order;
        }
    }
    eq->gap = gap == 0 ? 1 : (uint32_t)gap;
}

ids_status idsi_count_types_equation(ids_ctx *ctx, const ids_signature *sig, const uint64_t *mark,
                                     uint64_t place, idsi_count_equation *eq)
{
    ids_status st = IDS_OK;

    start_equation(sig, mark, place, eq);
    for (size_t i = 0; i < sig->count; i++) {
        if (!left_out(mark, i)) {
            uint64_t shift = (sig->ops[i].arity - 1) / eq->gap * place;

            shift += mark == NULL ? 0 : mark[i];
            IDSI_TRY(add_operation(ctx, eq, &sig->ops[i].group, shift));
        }
    }
done:
    if (st != IDS_OK) {
        idsi_count_equation_clear(ctx, eq);
    }
    return st;
}

/* The least number whose h-th powers the group orders divide, h = (arity - 1) / gap. */
static uint64_t find_scale(const ids_signature *sig, uint32_t gap)
{
    static const uint32_t primes[] = {2, 3, 5, 7};
    uint64_t scale = 1;

    for (size_t p = 0; p < sizeof primes / sizeof primes[0]; p++) {
        uint32_t most = 0;

        for (size_t i = 0; i < sig->count; i++) {
            uint32_t h = (sig->ops[i].arity - 1) / gap;
            uint32_t times = 0;

            IDSI_ASSERT(h > 0);
            for (uint64_t order = sig->ops[i].group.order; order % primes[p] == 0;
                 order /= primes[p]) {
                times++;
            }
            most = (times + h - 1) / h > most ? (times + h - 1) / h : most;
        }
        for (; most > 0; most--) {
            scale *= primes[p];
        }
    }
    return scale;
}

ids_status idsi_count_monomials_equation(ids_ctx *ctx, const ids_signature *sig,
                                         idsi_count_equation *eq, uint64_t *scale)
{
    ids_status st = IDS_OK;

    start_equation(sig, NULL, 1, eq);
    eq->divisor = 1;
    *scale = find_scale(sig, eq->gap);
    for (size_t i = 0; i < sig->count; i++) {
        const idsi_group *group = &sig->ops[i].group;
        idsi_count_term term = {.weight = 1, .shift = (group->arity - 1) / eq->gap};

        term.cycles[1] = (uint8_t)group->arity;
        for (uint64_t h = 0; h < term.shift; h++) {
            term.weight *= *scale;
        }
        term.weight /= group->order;
        IDSI_TRY(add_term(ctx, eq, &term));
    }
done:
    if (st != IDS_OK) {
        idsi_count_equation_clear(ctx, eq);
    }
    return st;
}

uint64_t idsi_count_last(const idsi_count_equation *eq, uint32_t degree)
{
    return ((degree - 1) / eq->gap + 1) * eq->place - 1;
}

void idsi_count_equation_clear(ids_ctx *ctx, idsi_count_equation *eq)
{
    idsi_free(ctx, eq->terms);
    *eq = (idsi_count_equation){0};
}
