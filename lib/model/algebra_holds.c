/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Whether an identity holds in an algebra: its linearisation on all tuples of basis elements.
 *
 * Exactness. Let D be the product of the common denominators of the tables, each as often as its
 * operation occurs in a term at most. D times the value of the identity on a tuple has integer
 * coordinates, and they are bounded by sums of absolute values; so a value that is 0 mod primes
 * whose product is larger than the bound, and which do not divide D, is 0. For tables with
 * small entries that is one prime or two.
 *
 * Order. Variables are filled from first to last. A product of the law is evaluated as soon as its
 * last variable is there, which serves all tuples that begin alike. A term with a product that is 0
 * is dead for all of these; when all terms are, they are skipped. In nilpotent and graded algebras
 * that leaves little of the dimension^degree tuples. Variables that the law is symmetric or
 * antisymmetric in are filled in increasing order only.
 */
#include <math.h>
#include <string.h>

#include "algebra_private.h"

/* Most bits of a common denominator: far beyond any table that a person writes. */
#define MOST_BITS 4096u

/* A product `node` of the tree of term `term`. */
typedef struct part {
    uint32_t term;
    uint32_t node;
} part;

typedef struct tester {
    ids_ctx *ctx;
    const ids_algebra *algebra;
    const uint32_t *operation;
    const idsi_law *law;
    idsi_residues *residues;
    uint32_t dimension;
    size_t terms;
    uint32_t *coefficient; /* of each term, mod the prime */
    uint32_t *unit;        /* basis element i is unit[i * dimension ..] */
    uint32_t *value;       /* of node i: value[i * dimension ..] */
    bool *zero;            /* of each node */
    size_t part_count;
    size_t part_capacity;
    part *parts; /* those with last variable v: part_start[v] .. part_start[v+1] */
    size_t part_start[IDSI_MAX_IDENTITY_DEGREE + 1];
    bool *alive[IDSI_MAX_IDENTITY_DEGREE + 1]; /* terms, when so many variables are filled */
    uint8_t tuple[IDSI_MAX_IDENTITY_DEGREE];
    uint32_t *sum;
    bool fails;
} tester;

/* ---- the bound ------------------------------------------------------------------------------- */

/* Bits of the common denominator of a table, and of the largest sum of absolute values in a product
 * when multiplied by it. */
static ids_status measure(ids_ctx *ctx, const idsi_table *table, size_t *bottom, size_t *top)
{
    ids_status st = IDS_OK;
    mpz_t common;
    mpz_t sum;
    mpz_t term;

    mpz_init_set_ui(common, 1);
    mpz_init(sum);
    mpz_init(term);
    for (size_t i = 0; i < table->count; i++) {
        mpz_lcm_ui(common, common, (mp_limb_t)table->list[i].denominator);
        if (mpz_sizeinbase(common, 2) > MOST_BITS) {
            st = idsi_fail(ctx, IDS_ERR_LIMIT,
                           "the common denominator of the structure constants has more than %u "
                           "bits",
                           MOST_BITS);
            goto done;
        }
    }
    *bottom = mpz_sizeinbase(common, 2);
    *top = 1;
    for (size_t i = 0; i < table->count; i++) {
        const idsi_constant *at = &table->list[i];
        if (i == 0 || memcmp(at->argument, table->list[i - 1].argument, IDS_MAX_ARITY) != 0) {
            mpz_set_ui(sum, 0);
        }
        mpz_divexact_ui(term, common, (mp_limb_t)at->denominator);
        mpz_mul_si(term, term, at->numerator);
        mpz_abs(term, term);
        mpz_add(sum, sum, term);
        const size_t bits = mpz_sizeinbase(sum, 2);
        *top = bits > *top ? bits : *top;
    }
done:
    mpz_clear(common);
    mpz_clear(sum);
    mpz_clear(term);
    return st;
}

/* How many primes over 2^29 make sure that a value is 0. */
static ids_status count_primes(const tester *t, size_t *primes)
{
    ids_status st = IDS_OK;
    const idsi_poly *poly = t->law->poly;
    size_t bottom[IDS_MAX_OPERATIONS] = {0};
    size_t top[IDS_MAX_OPERATIONS] = {0};
    size_t most[IDS_MAX_OPERATIONS] = {0};
    size_t largest = 0;
    /* One bit more, for the rounding of the logarithm. */
    size_t bits = (size_t)ceil(idsi_sum_bits(poly->coefficients, poly->count)) + 1;

    for (size_t op = 0; op < poly->sig->count; op++) {
        IDSI_TRY(measure(t->ctx, &t->algebra->tables[t->operation[op]], &bottom[op], &top[op]));
    }
    for (size_t k = 0; k < poly->count; k++) {
        size_t uses[IDS_MAX_OPERATIONS] = {0};
        size_t all = 0;
        for (size_t i = poly->start[k]; i < poly->start[k + 1]; i++) {
            if (idsi_is_node(poly->tokens[i])) {
                const uint32_t op = idsi_node_op(poly->tokens[i]);
                uses[op]++;
                all += top[op];
                most[op] = uses[op] > most[op] ? uses[op] : most[op];
            }
        }
        largest = all > largest ? all : largest;
    }
    bits += largest;
    for (size_t op = 0; op < poly->sig->count; op++) {
        bits += most[op] * bottom[op];
    }
    *primes = bits / 29 + 1;
done:
    return st;
}

/* ---- evaluation ------------------------------------------------------------------------------ */

static uint32_t last_variable(uint32_t variables)
{
    uint32_t last = 0;
    while (variables >> (last + 1u) != 0) {
        last++;
    }
    return last;
}

static ids_status list_parts(tester *t, uint32_t term, uint32_t node, uint32_t last)
{
    ids_status st = IDS_OK;
    const idsi_law_node *at = &t->law->nodes[node];

    for (uint32_t i = 0; i < at->arity; i++) {
        if (at->arg[i] < 0) {
            IDSI_TRY(list_parts(t, term, (uint32_t)(-1 - at->arg[i]), last));
        }
    }
    if (last_variable(at->variables) == last) {
        IDSI_TRY(idsi_grow(t->ctx, t->part_count, &t->part_capacity, sizeof *t->parts, &t->parts));
        t->parts[t->part_count++] = (part){term, node};
    }
done:
    return st;
}

static ids_status prepare(tester *t)
{
    ids_status st = IDS_OK;
    const idsi_law *law = t->law;
    const size_t n = t->dimension;

    IDSI_TRY(idsi_alloc_array(t->ctx, t->terms, sizeof *t->coefficient, &t->coefficient));
    IDSI_TRY(idsi_alloc_array(t->ctx, n * n, sizeof *t->unit, &t->unit));
    for (size_t i = 0; i < n; i++) {
        t->unit[i * n + i] = 1;
    }
    IDSI_TRY(idsi_alloc_array(t->ctx, law->node_count * n, sizeof *t->value, &t->value));
    IDSI_TRY(idsi_alloc_array(t->ctx, law->node_count, sizeof *t->zero, &t->zero));
    IDSI_TRY(idsi_alloc_array(t->ctx, n, sizeof *t->sum, &t->sum));
    for (uint32_t v = 0; v <= law->degree; v++) {
        IDSI_TRY(idsi_alloc_array(t->ctx, t->terms, sizeof **t->alive, &t->alive[v]));
        t->part_start[v] = t->part_count;
        for (uint32_t k = 0; v < law->degree && k < t->terms; k++) {
            IDSI_TRY(list_parts(t, k, law->root[k], v));
        }
    }
    memset(t->alive[0], true, t->terms);
done:
    return st;
}

static const uint32_t *argument_of(const tester *t, int32_t arg, bool *zero)
{
    const size_t n = t->dimension;
    if (arg >= 0) {
        return t->unit + t->tuple[arg] * n;
    }
    *zero = *zero || t->zero[-1 - arg];
    return t->value + (size_t)(-1 - arg) * n;
}

/* Evaluates the nodes whose last variable was just filled. */
static void evaluate_nodes(tester *t, uint32_t last)
{
    const idsi_law *law = t->law;

    for (size_t i = 0; i < law->node_count; i++) {
        const idsi_law_node *node = &law->nodes[i];
        const uint32_t *arguments[IDS_MAX_ARITY];
        bool zero = false;
        if (last_variable(node->variables) != last) {
            continue;
        }
        for (uint32_t k = 0; k < node->arity; k++) {
            arguments[k] = argument_of(t, node->arg[k], &zero);
        }
        t->zero[i] = zero || !idsi_residues_product(t->residues, t->operation[node->op], arguments,
                                                    t->value + i * t->dimension);
    }
}

/* Whether the sum of the terms that are alive is other than 0. */
static bool sum_up(tester *t)
{
    const uint32_t p = t->residues->prime;
    const size_t n = t->dimension;
    bool any = false;

    memset(t->sum, 0, n * sizeof *t->sum);
    for (size_t k = 0; k < t->terms; k++) {
        if (!t->alive[t->law->degree][k]) {
            continue;
        }
        const uint32_t *value = t->value + t->law->root[k] * n;
        for (size_t r = 0; r < n; r++) {
            t->sum[r] = (uint32_t)((t->sum[r] + (uint64_t)t->coefficient[k] * value[r]) % p);
        }
    }
    for (size_t r = 0; r < n; r++) {
        any = any || t->sum[r] != 0;
    }
    return any;
}

static ids_status walk(tester *t, uint32_t place)
{
    ids_status st = IDS_OK;
    uint32_t from = 0;

    IDSI_TRY(idsi_poll(t->ctx, NULL));
    if (place == t->law->degree) {
        t->fails = sum_up(t);
        return IDS_OK;
    }
    for (uint32_t i = 0; i < place; i++) {
        if (t->law->class_of[i] == t->law->class_of[place]) {
            from = t->tuple[i];
        }
    }
    for (uint32_t b = from; b < t->dimension && !t->fails; b++) {
        bool any = false;
        t->tuple[place] = (uint8_t)b;
        evaluate_nodes(t, place);
        memcpy(t->alive[place + 1], t->alive[place], t->terms);
        for (size_t i = t->part_start[place]; i < t->part_start[place + 1]; i++) {
            if (t->zero[t->parts[i].node]) {
                t->alive[place + 1][t->parts[i].term] = false;
            }
        }
        for (size_t k = 0; !any && k < t->terms; k++) {
            any = t->alive[place + 1][k];
        }
        if (any) {
            IDSI_TRY(walk(t, place + 1));
        }
    }
done:
    return st;
}

/* ---- all primes ------------------------------------------------------------------------------ */

static ids_status reduce(tester *t, uint32_t prime, bool *good)
{
    ids_status st = IDS_OK;

    idsi_residues_free(t->residues);
    t->residues = NULL;
    IDSI_TRY(idsi_residues_create(t->ctx, t->algebra, prime, good, &t->residues));
    for (size_t k = 0; *good && k < t->terms; k++) {
        *good = idsi_mod_rational(t->law->poly->coefficients[k], prime, &t->coefficient[k]);
    }
done:
    return st;
}

static ids_status test_all(tester *t)
{
    ids_status st = IDS_OK;
    uint32_t prime = IDSI_PRIME_HIGH;
    size_t primes = 0;

    IDSI_TRY(count_primes(t, &primes));
    IDSI_TRY(prepare(t));
    while (primes > 0 && !t->fails) {
        bool good = false;
        do {
            prime--;
        } while (!idsi_is_prime(prime));
        IDSI_TRY(reduce(t, prime, &good));
        if (good) {
            IDSI_TRY(walk(t, 0));
            primes--;
        }
    }
done:
    return st;
}

ids_status idsi_algebra_test(ids_ctx *ctx, const ids_algebra *algebra, const uint32_t *operation,
                             const idsi_law *law, bool *holds, uint8_t *tuple)
{
    ids_status st = IDS_OK;
    tester *t = NULL;

    if (law->degree == 1) { /* a multiple of x */
        *holds = false;
        tuple[0] = 0;
        return IDS_OK;
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *t, &t));
    t->ctx = ctx;
    t->algebra = algebra;
    t->operation = operation;
    t->law = law;
    t->dimension = algebra->dimension;
    t->terms = law->poly->count;
    IDSI_TRY(test_all(t));
    *holds = !t->fails;
    memcpy(tuple, t->tuple, law->degree);
done:
    if (t != NULL) {
        idsi_residues_free(t->residues);
        for (uint32_t v = 0; v <= IDSI_MAX_IDENTITY_DEGREE; v++) {
            idsi_free(ctx, t->alive[v]);
        }
        idsi_free(ctx, t->coefficient);
        idsi_free(ctx, t->unit);
        idsi_free(ctx, t->value);
        idsi_free(ctx, t->zero);
        idsi_free(ctx, t->parts);
        idsi_free(ctx, t->sum);
        idsi_free(ctx, t);
    }
    return st;
}

ids_status ids_algebra_holds(ids_ctx *ctx, const ids_algebra *algebra,
                             const ids_presentation *presentation, ids_role role, size_t index,
                             bool *holds, uint32_t *tuple, size_t capacity)
{
    ids_status st = IDS_OK;
    const idsi_identity *identity = idsi_presentation_get(presentation, role, index);
    uint32_t operation[IDS_MAX_OPERATIONS] = {0};
    uint8_t found[IDSI_MAX_IDENTITY_DEGREE] = {0};
    bool good = true;
    idsi_law law = {0};

    if (ctx == NULL || algebra == NULL || identity == NULL || holds == NULL ||
        (tuple != NULL && capacity < identity->degree)) {
        return idsi_fail_arg(ctx, "context, algebra, presentation, index, capacity or result");
    }
    IDSI_TRY(ids_algebra_match(ctx, algebra, presentation->sig, operation));
    if (identity->linear.count > 0) {
        IDSI_TRY(idsi_law_compile(ctx, &identity->linear, &law));
        IDSI_TRY(idsi_algebra_test(ctx, algebra, operation, &law, &good, found));
    }
    for (uint32_t i = 0; tuple != NULL && !good && i < identity->degree; i++) {
        tuple[i] = found[i];
    }
    *holds = good;
done:
    idsi_law_clear(ctx, &law);
    return st;
}
