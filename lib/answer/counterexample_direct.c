/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Counterexamples of small dimension, product by product.
 *
 * The products of basis elements, up to symmetry, get values one after the other, from a list of
 * vectors with small entries, simple ones first. A check is an identity on a tuple of basis
 * elements. Its value can be known before all products are: it waits on the first product that its
 * evaluation misses, and is looked at again when that product has got its value (the idea of
 * watched literals in satisfiability solvers). A check that is not 0 ends the branch. When all
 * products have values, all identities hold, and the candidate is tried.
 *
 * Dimension 1 and 2 are small enough to be searched to the end in many cases. Beyond, the search is
 * restarted with the values in other orders, each time with a part of the steps.
 */
#include <stdlib.h>
#include <string.h>

#include "counterexample_direct.h"

#define RESTARTS 12u

/* ---- evaluation ------------------------------------------------------------------------------ */

/* Adds weight * the product of basis elements to a vector; false when it has no value yet. */
static bool add_product(idsi_direct *s, uint32_t op, uint32_t where, uint32_t weight, uint32_t *sum)
{
    const idsi_direct_place at = s->places[op][where];
    if (at.sign == 0) {
        return true;
    }
    if (at.number >= s->assigned) {
        s->missing = at.number < s->missing ? at.number : s->missing;
        return false;
    }
    const int8_t *vector = s->vectors[s->products[at.number].choice];
    for (uint32_t r = 0; r < s->n; r++) {
        const int entry = at.sign * vector[r];
        const uint32_t residue = entry < 0 ? s->prime - (uint32_t)-entry : (uint32_t)entry;
        sum[r] = (uint32_t)((sum[r] + (uint64_t)weight * residue) % s->prime);
    }
    return true;
}

/* Value of a node from its arguments; false when a product is missing. */
static bool evaluate_node(idsi_direct *s, const idsi_law *law, size_t i, const uint8_t *tuple)
{
    const idsi_law_node *node = &law->nodes[i];
    uint32_t *sum = s->value + i * s->n;
    uint32_t digit[IDS_MAX_ARITY] = {0};
    bool known = true;

    memset(sum, 0, s->n * sizeof *sum);
    for (;;) {
        uint32_t weight = 1;
        uint32_t where = 0;
        for (uint32_t k = 0; weight != 0 && k < node->arity; k++) {
            where = where * s->n + digit[k];
            if (node->arg[k] >= 0) {
                weight = tuple[node->arg[k]] == digit[k] ? weight : 0;
            } else {
                const uint32_t *argument = s->value + (size_t)(-1 - node->arg[k]) * s->n;
                weight = idsi_mod_mul(weight, argument[digit[k]], s->prime);
            }
        }
        if (weight != 0 && !add_product(s, node->op, where, weight, sum)) {
            known = false;
        }
        uint32_t k = node->arity;
        while (k > 0 && ++digit[k - 1] == s->n) {
            digit[k - 1] = 0;
            k--;
        }
        if (k == 0) {
            return known;
        }
    }
}

typedef enum verdict { ZERO, NOT_ZERO, UNKNOWN } verdict;

static verdict evaluate(idsi_direct *s, const idsi_law *law, const uint8_t *tuple)
{
    uint32_t sum[IDSI_DIRECT_DIMENSION] = {0};
    bool any = false;

    s->missing = IDSI_DIRECT_PRODUCTS;
    for (size_t i = 0; i < law->node_count; i++) {
        if (!evaluate_node(s, law, i, tuple)) {
            return UNKNOWN;
        }
    }
    for (size_t t = 0; t < law->poly->count; t++) {
        const uint32_t *value = s->value + law->root[t] * s->n;
        const uint32_t c = (uint32_t)mpz_fdiv_ui(mpq_numref(law->poly->coefficients[t]), s->prime);
        for (uint32_t r = 0; r < s->n; r++) {
            sum[r] = (uint32_t)((sum[r] + (uint64_t)c * value[r]) % s->prime);
        }
    }
    for (uint32_t r = 0; r < s->n; r++) {
        any = any || sum[r] != 0;
    }
    return any ? NOT_ZERO : ZERO;
}

/* ---- what is found --------------------------------------------------------------------------- */

static ids_status make_algebra(const idsi_direct *s, ids_algebra **algebra)
{
    ids_status st = IDS_OK;
    ids_constant *list = NULL;
    size_t count = 0;

    IDSI_TRY(idsi_alloc_array(s->ctx, (size_t)s->product_count * s->n, sizeof *list, &list));
    for (uint32_t i = 0; i < s->product_count; i++) {
        const idsi_direct_product *from = &s->products[i];
        for (uint32_t r = 0; r < s->n; r++) {
            if (s->vectors[from->choice][r] != 0) {
                ids_constant *next = &list[count++];
                *next = (ids_constant){.operation = from->op,
                                       .result = r,
                                       .numerator = s->vectors[from->choice][r],
                                       .denominator = 1};
                for (uint32_t k = 0; k < IDS_MAX_ARITY; k++) {
                    next->argument[k] = from->argument[k];
                }
            }
        }
    }
    IDSI_TRY(ids_algebra_create(s->ctx, s->hunt->pres->sig, s->n, NULL, list, count, algebra));
done:
    idsi_free(s->ctx, list);
    return st;
}

/* How often each variable of the candidate occurs. */
static void count_occurrences(const idsi_poly *poly, uint32_t *count)
{
    for (size_t i = 0; i < poly->start[1]; i++) {
        if (!idsi_is_node(poly->tokens[i])) {
            count[poly->tokens[i] - 1]++;
        }
    }
}

/*
 * The linearisation fails on a tuple. It is a sum, with signs, of values of the candidate where
 * each variable is a sum of some of the tuple's elements that stand for it; so one of these is not
 * 0. The one with the fewest summands is taken.
 */
static ids_status choose_values(const idsi_direct *s, const ids_algebra *algebra,
                                const uint8_t *tuple, int64_t **values)
{
    ids_status st = IDS_OK;
    const idsi_poly *poly = &s->hunt->claim->written;
    const uint32_t degree = s->hunt->claim->degree;
    uint32_t occurrences[IDSI_MAX_IDENTITY_DEGREE] = {0};
    idsi_residues *residues = NULL;
    int64_t *trial = NULL;
    int64_t *best = NULL;
    uint32_t fewest = UINT32_MAX;
    bool good = true;
    const size_t room = (size_t)poly->variables * s->n;

    count_occurrences(poly, occurrences);
    IDSI_TRY(idsi_alloc_array(s->ctx, room, sizeof *trial, &trial));
    IDSI_TRY(idsi_alloc_array(s->ctx, room, sizeof *best, &best));
    IDSI_TRY(idsi_residues_create(s->ctx, algebra, s->prime, &good, &residues));
    for (uint32_t mask = 1; mask >> degree == 0; mask++) {
        uint32_t at = 0;
        uint32_t summands = 0;
        bool zero = true;
        memset(trial, 0, room * sizeof *trial);
        for (uint32_t v = 0; v < poly->variables; v++) {
            for (uint32_t k = 0; k < occurrences[v]; k++, at++) {
                if (mask >> at & 1u) {
                    trial[v * s->n + tuple[at]]++;
                    summands++;
                }
            }
        }
        if (summands < fewest) {
            IDSI_TRY(idsi_hunt_is_zero(s->hunt, residues, poly, trial, &zero));
        }
        if (!zero) {
            fewest = summands;
            memcpy(best, trial, room * sizeof *best);
        }
    }
    *values = best;
    best = NULL;
done:
    idsi_residues_free(residues);
    idsi_free(s->ctx, trial);
    idsi_free(s->ctx, best);
    return st;
}

/* All identities hold: whether the candidate does not. */
static ids_status try_candidate(idsi_direct *s, const idsi_law *claim)
{
    ids_status st = IDS_OK;
    ids_algebra *algebra = NULL;
    int64_t *values = NULL;
    uint8_t tuple[IDSI_MAX_IDENTITY_DEGREE] = {0};
    bool fails = false;

    for (uint32_t k = 0; !fails;) {
        s->quota -= s->quota > 0;
        fails = evaluate(s, claim, tuple) == NOT_ZERO;
        for (k = 0; !fails && k < claim->degree && ++tuple[k] == s->n; k++) {
            tuple[k] = 0;
        }
        if (k == claim->degree) {
            return IDS_OK;
        }
    }
    IDSI_TRY(make_algebra(s, &algebra));
    IDSI_TRY(choose_values(s, algebra, tuple, &values));
    const uint32_t before = s->hunt->most_dimension;
    st = idsi_hunt_offer(s->hunt, algebra, values);
    algebra = NULL;
    s->found = s->hunt->most_dimension < before;
done:
    ids_algebra_free(algebra);
    return st;
}

/* ---- backtracking ---------------------------------------------------------------------------- */

static ids_status wait_on(idsi_direct *s, uint32_t number, uint32_t which)
{
    idsi_direct_pending *on = &s->waiting[number];
    ids_status st = idsi_grow(s->ctx, on->count, &on->capacity, sizeof *on->list, &on->list);
    if (st == IDS_OK) {
        on->list[on->count++] = which;
    }
    return st;
}

/* Looks at the checks that waited on the product that was assigned last. */
static ids_status look_again(idsi_direct *s, bool *good)
{
    ids_status st = IDS_OK;
    const idsi_direct_pending *on = &s->waiting[s->assigned - 1];

    *good = true;
    for (size_t i = 0; *good && i < on->count; i++) {
        const idsi_direct_check *at = &s->checks[on->list[i]];
        const verdict v = evaluate(s, &s->hunt->laws->law[at->law], at->tuple);
        s->quota -= s->quota > 0;
        *good = v != NOT_ZERO;
        if (v == UNKNOWN) {
            IDSI_TRY(wait_on(s, s->missing, on->list[i]));
        }
    }
done:
    return st;
}

static ids_status assign(idsi_direct *s, const idsi_law *claim)
{
    ids_status st = IDS_OK;
    const uint32_t at = s->assigned;
    size_t before[IDSI_DIRECT_PRODUCTS + 1];

    IDSI_TRY(idsi_poll(s->ctx, NULL));
    if (at == s->product_count) {
        return try_candidate(s, claim);
    }
    for (uint32_t i = 0; i <= IDSI_DIRECT_PRODUCTS; i++) {
        before[i] = s->waiting[i].count;
    }
    for (uint32_t i = 0; i < s->value_count && !s->found && s->quota > 0; i++) {
        bool good = true;
        s->products[at].choice = s->order[at * s->value_count + i];
        s->assigned = at + 1;
        s->quota--;
        IDSI_TRY(look_again(s, &good));
        if (good) {
            IDSI_TRY(assign(s, claim));
        }
        s->assigned = at;
        for (uint32_t k = at + 1; k <= IDSI_DIRECT_PRODUCTS; k++) {
            s->waiting[k].count = before[k];
        }
    }
done:
    return st;
}

/* ---- all of it ------------------------------------------------------------------------------- */

static ids_status run(idsi_direct *s, const idsi_law *claim)
{
    ids_status st = IDS_OK;
    const uint64_t all = s->hunt->steps / 2;
    size_t nodes = claim->node_count;

    for (size_t i = 0; i < s->hunt->laws->count; i++) {
        const size_t more = s->hunt->laws->law[i].node_count;
        nodes = more > nodes ? more : nodes;
    }
    IDSI_TRY(idsi_alloc_array(s->ctx, nodes * s->n, sizeof *s->value, &s->value));
    IDSI_TRY(idsi_alloc_array(s->ctx, (size_t)s->product_count * s->value_count, sizeof *s->order,
                              &s->order));
    for (uint32_t start = 0; start < RESTARTS && !s->found; start++) {
        const uint64_t share = all / RESTARTS + 1;
        bool good = true;
        idsi_direct_order(s, start);
        for (uint32_t i = 0; i <= IDSI_DIRECT_PRODUCTS; i++) {
            s->waiting[i].count = 0;
        }
        s->assigned = 0;
        for (uint32_t i = 0; good && i < s->check_count; i++) {
            const verdict v =
                evaluate(s, &s->hunt->laws->law[s->checks[i].law], s->checks[i].tuple);
            good = v != NOT_ZERO;
            if (v == UNKNOWN) {
                IDSI_TRY(wait_on(s, s->missing, i));
            }
        }
        s->quota = share;
        IDSI_TRY(assign(s, claim));
        (void)idsi_hunt_step(s->hunt, share - s->quota);
        if (s->quota > 0) {
            break; /* searched to the end */
        }
    }
done:
    return st;
}

static void search_free(idsi_direct *s)
{
    for (uint32_t i = 0; i <= IDSI_DIRECT_PRODUCTS; i++) {
        idsi_free(s->ctx, s->waiting[i].list);
    }
    for (uint32_t i = 0; i < IDS_MAX_OPERATIONS; i++) {
        idsi_free(s->ctx, s->places[i]);
    }
    idsi_free(s->ctx, s->vectors);
    idsi_free(s->ctx, s->order);
    idsi_free(s->ctx, s->checks);
    idsi_free(s->ctx, s->value);
    idsi_free(s->ctx, s);
}

static ids_status search_dimension(idsi_hunt *hunt, uint32_t n, const idsi_law *claim)
{
    ids_status st = IDS_OK;
    idsi_direct *s = NULL;
    bool fits = false;

    IDSI_TRY(idsi_alloc_array(hunt->ctx, 1, sizeof *s, &s));
    s->ctx = hunt->ctx;
    s->hunt = hunt;
    s->n = n;
    s->prime = IDSI_PRIME_HIGH - 35u; /* the largest prime below 2^30 */
    idsi_random_seed(&s->random, hunt->seed + n);
    IDSI_TRY(idsi_direct_products(s, &fits));
    if (fits) {
        IDSI_TRY(idsi_direct_checks(s, &fits));
    }
    if (fits) {
        IDSI_TRY(idsi_direct_vectors(s, n <= 2 && hunt->most_entry > 1 ? 2 : 1));
        IDSI_TRY(run(s, claim));
    }
done:
    if (s != NULL) {
        search_free(s);
    }
    return st;
}

ids_status idsi_hunt_direct(idsi_hunt *hunt)
{
    ids_status st = IDS_OK;
    idsi_law claim = {0};

    if (hunt->claim->degree < 2 || idsi_laws_trivial(hunt->laws)) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_law_compile(hunt->ctx, &hunt->claim->linear, &claim));
    for (uint32_t n = 1; n <= IDSI_DIRECT_DIMENSION && n <= hunt->most_dimension && hunt->steps > 0;
         n++) {
        IDSI_TRY(search_dimension(hunt, n, &claim));
    }
done:
    idsi_law_clear(hunt->ctx, &claim);
    return st;
}
