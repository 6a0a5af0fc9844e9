/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Counterexamples: algebras in which the identities hold and the candidate does not.
 *
 * Two searches offer algebras, and the smallest is kept: nilpotent ones made of functionals
 * (counterexample_graded.c), then algebras of dimension up to 4 with small constants
 * (counterexample_direct.c), of smaller dimension only. What is offered is tested here, exactly,
 * before it counts; the searches need not be trusted. Their work is counted in steps, not in
 * seconds, so that the same limits give the same algebra on every machine.
 */
#include <string.h>

#include "counterexample_private.h"

#define DEFAULT_DIMENSION 30u
#define DEFAULT_ENTRY 100u
#define DEFAULT_STEPS UINT64_C(10000000)

/* ---- values of polynomials ------------------------------------------------------------------- */

/* The tree at *at, mod the prime, into vectors[level]; deeper levels are for its arguments. */
static void evaluate_tree(const idsi_residues *residues, const idsi_token **at,
                          const int64_t *values, uint32_t *vectors, size_t level)
{
    const uint32_t n = residues->algebra->dimension;
    const idsi_token token = *(*at)++;
    const uint32_t *arguments[IDS_MAX_ARITY];
    uint32_t *out = vectors + level * n;

    if (!idsi_is_node(token)) {
        for (uint32_t i = 0; i < n; i++) {
            const int64_t rest = values[(token - 1) * (size_t)n + i] % residues->prime;
            out[i] = (uint32_t)(rest < 0 ? rest + residues->prime : rest);
        }
        return;
    }
    const uint32_t arity = residues->algebra->sig->ops[idsi_node_op(token)].arity;
    for (uint32_t k = 0; k < arity; k++) {
        evaluate_tree(residues, at, values, vectors, level + 1 + k);
        arguments[k] = vectors + (level + 1 + k) * n;
    }
    (void)idsi_residues_product(residues, idsi_node_op(token), arguments, out);
}

ids_status idsi_hunt_is_zero(const idsi_hunt *hunt, const idsi_residues *residues,
                             const idsi_poly *poly, const int64_t *values, bool *zero)
{
    ids_status st = IDS_OK;
    const uint32_t p = residues->prime;
    const uint32_t n = residues->algebra->dimension;
    uint32_t *vectors = NULL; /* a level a leaf to the left, and one an inner node above */
    uint32_t *sum = NULL;
    uint32_t c = 0;

    IDSI_TRY(
        idsi_alloc_array(hunt->ctx, 2u * IDSI_MAX_IDENTITY_DEGREE * n, sizeof *vectors, &vectors));
    IDSI_TRY(idsi_alloc_array(hunt->ctx, n, sizeof *sum, &sum));
    for (size_t t = 0; t < poly->count; t++) {
        const idsi_token *at = poly->tokens + poly->start[t];
        if (!idsi_mod_rational(poly->coefficients[t], p, &c)) {
            st = idsi_fail(hunt->ctx, IDS_ERR_UNABLE, "a coefficient has the denominator %u", p);
            goto done;
        }
        evaluate_tree(residues, &at, values, vectors, 0);
        for (uint32_t i = 0; i < n; i++) {
            sum[i] = (uint32_t)((sum[i] + (uint64_t)c * vectors[i]) % p);
        }
    }
    *zero = true;
    for (uint32_t i = 0; i < n; i++) {
        *zero = *zero && sum[i] == 0;
    }
done:
    idsi_free(hunt->ctx, vectors);
    idsi_free(hunt->ctx, sum);
    return st;
}

/* ---- the hunt -------------------------------------------------------------------------------- */

/* Whether all identities hold and the candidate is not 0 at the values. */
static ids_status is_counterexample(const idsi_hunt *hunt, const ids_algebra *algebra,
                                    const int64_t *values, bool *good)
{
    ids_status st = IDS_OK;
    uint32_t operation[IDS_MAX_OPERATIONS] = {0};
    uint8_t tuple[IDSI_MAX_IDENTITY_DEGREE] = {0};
    idsi_residues *residues = NULL;
    bool zero = true;

    /* Not 0 modulo a prime that divides no denominator is not 0. */
    IDSI_TRY(idsi_residues_create(hunt->ctx, algebra, IDSI_PRIME_HIGH - 35u, good, &residues));
    if (*good) {
        IDSI_TRY(idsi_hunt_is_zero(hunt, residues, &hunt->claim->written, values, &zero));
        *good = !zero;
    }
    for (uint32_t op = 0; op < algebra->sig->count; op++) {
        operation[op] = op;
    }
    for (size_t i = 0; *good && i < hunt->laws->count; i++) {
        IDSI_TRY(
            idsi_algebra_test(hunt->ctx, algebra, operation, &hunt->laws->law[i], good, tuple));
    }
done:
    idsi_residues_free(residues);
    return st;
}

ids_status idsi_hunt_offer(idsi_hunt *hunt, ids_algebra *algebra, int64_t *values)
{
    ids_status st = IDS_OK;
    bool good = false;

    IDSI_TRY(is_counterexample(hunt, algebra, values, &good));
    if (good) {
        ids_algebra *old = hunt->algebra;
        int64_t *old_values = hunt->values;
        hunt->algebra = algebra;
        hunt->values = values;
        hunt->most_dimension = algebra->dimension - 1;
        algebra = old;
        values = old_values;
    }
done:
    ids_algebra_free(algebra);
    idsi_free(hunt->ctx, values);
    return st;
}

static ids_status hunt_all(idsi_hunt *hunt)
{
    ids_status st = IDS_OK;
    const uint32_t most_dimension = hunt->most_dimension;
    const uint64_t most_steps = hunt->steps;

    IDSI_TRY(idsi_laws_create(hunt->ctx, hunt->pres, &hunt->laws));
    /* Half of the steps for each search; what the first one leaves, the second one has. */
    hunt->steps = most_steps / 2;
    IDSI_TRY(idsi_hunt_graded(hunt));
    hunt->steps += most_steps - most_steps / 2;
    IDSI_TRY(idsi_hunt_direct(hunt));
    if (hunt->algebra == NULL) {
        st = idsi_fail(hunt->ctx, IDS_ERR_LIMIT,
                       "no counterexample of dimension at most %u with entries up to %llu was "
                       "found in %llu steps",
                       most_dimension, (unsigned long long)hunt->most_entry,
                       (unsigned long long)most_steps);
    }
done:
    idsi_laws_free(hunt->laws);
    return st;
}

static ids_status read_options(ids_ctx *ctx, const ids_counterexample_options *options,
                               idsi_hunt *hunt)
{
    const ids_counterexample_options none = {.struct_size = sizeof none};

    options = options == NULL ? &none : options;
    ids_status st =
        idsi_check_struct(ctx, "ids_counterexample_options", options->struct_size, sizeof *options);
    if (st != IDS_OK) {
        return st;
    }
    if (options->dimension > IDS_MAX_DIMENSION) {
        return idsi_fail(ctx, IDS_ERR_ARG, "an algebra has dimension at most %u, not %u",
                         IDS_MAX_DIMENSION, options->dimension);
    }
    hunt->most_dimension = options->dimension == 0 ? DEFAULT_DIMENSION : options->dimension;
    hunt->most_entry = options->entries == 0 ? DEFAULT_ENTRY : options->entries;
    hunt->steps = options->steps == 0 ? DEFAULT_STEPS : options->steps;
    hunt->seed = options->seed;
    return IDS_OK;
}

ids_status ids_counterexample_find(ids_ctx *ctx, const ids_presentation *presentation, size_t index,
                                   const ids_counterexample_options *options,
                                   ids_counterexample **counterexample)
{
    ids_status st = IDS_OK;
    ids_counterexample *made = NULL;
    idsi_hunt hunt = {.ctx = ctx, .pres = presentation};

    IDSI_TRY(idsi_candidate_check(ctx, presentation, index, counterexample));
    IDSI_TRY(read_options(ctx, options, &hunt));
    hunt.claim = idsi_presentation_get(presentation, IDS_ROLE_CANDIDATE, index);
    if (hunt.claim->linear.count == 0) {
        st = idsi_fail(ctx, IDS_ERR_DOMAIN, "there is no counterexample: the candidate is 0");
        goto done;
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    IDSI_TRY(hunt_all(&hunt));
    *made = (ids_counterexample){.ctx = ctx,
                                 .pres = presentation,
                                 .claim = hunt.claim,
                                 .algebra = hunt.algebra,
                                 .values = hunt.values};
    hunt.algebra = NULL;
    hunt.values = NULL;
    *counterexample = made;
    made = NULL;
done:
    ids_algebra_free(hunt.algebra);
    idsi_free(ctx, hunt.values);
    idsi_free(ctx, made);
    return st;
}

void ids_counterexample_free(ids_counterexample *counterexample)
{
    if (counterexample != NULL) {
        ids_ctx *ctx = counterexample->ctx;
        ids_algebra_free(counterexample->algebra);
        idsi_free(ctx, counterexample->values);
        idsi_free(ctx, counterexample);
    }
}

const ids_algebra *ids_counterexample_algebra(const ids_counterexample *counterexample)
{
    return counterexample == NULL ? NULL : counterexample->algebra;
}

ids_status ids_counterexample_value(const ids_counterexample *counterexample, uint32_t variable,
                                    int64_t *coordinates, size_t capacity)
{
    if (counterexample == NULL || coordinates == NULL ||
        variable >= counterexample->claim->written.variables ||
        capacity < counterexample->algebra->dimension) {
        return IDS_ERR_ARG;
    }
    const size_t n = counterexample->algebra->dimension;
    memcpy(coordinates, counterexample->values + variable * n, n * sizeof *coordinates);
    return IDS_OK;
}
