/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Whether an identity holds in a model.
 *
 * In words: the linearisation is multiplied out modulo as many primes as the size of its
 * coefficients asks for; a sum that is 0 modulo all of them is 0.
 */
#include <math.h>
#include <string.h>

#include "realize_private.h"

/* ---- words ----------------------------------------------------------------------------------- */

typedef struct slot {
    idsi_key key;
    uint32_t value;
    bool used;
} slot;

typedef struct table {
    size_t mask;
    size_t count;
    slot *slots;
} table;

static size_t find_slot(const table *t, idsi_key key)
{
    uint64_t hash = ((uint64_t)key ^ (uint64_t)(key >> 64) * 31) * UINT64_C(0x9E3779B97F4A7C15);
    size_t at = (size_t)(hash >> 20) & t->mask;
    while (t->slots[at].used && t->slots[at].key != key) {
        at = (at + 1) & t->mask;
    }
    return at;
}

static ids_status grow_table(ids_ctx *ctx, table *t)
{
    ids_status st = IDS_OK;
    const table old = *t;
    slot *slots = NULL;
    size_t size = old.slots == NULL ? 1024 : 2 * (old.mask + 1);

    IDSI_TRY(idsi_alloc_array(ctx, size, sizeof *slots, &slots));
    t->slots = slots;
    t->mask = size - 1;
    for (size_t i = 0; old.slots != NULL && i <= old.mask; i++) {
        if (old.slots[i].used) {
            t->slots[find_slot(t, old.slots[i].key)] = old.slots[i];
        }
    }
    idsi_free(ctx, old.slots);
done:
    return st;
}

static ids_status add_sum(ids_ctx *ctx, table *t, const idsi_wordsum *sum, uint32_t factor,
                          uint32_t p)
{
    ids_status st = IDS_OK;
    for (size_t i = 0; i < sum->count; i++) {
        if (t->slots == NULL || 2 * t->count > t->mask) {
            IDSI_TRY(grow_table(ctx, t));
        }
        slot *at = &t->slots[find_slot(t, sum->keys[i])];
        t->count += !at->used;
        at->used = true;
        at->key = sum->keys[i];
        at->value = (uint32_t)((at->value + (uint64_t)factor * sum->values[i]) % p);
    }
done:
    return st;
}

/* Whether a polynomial is 0 in words, mod a prime; *good as in idsi_words_init(). */
static ids_status vanishes_in_words(ids_ctx *ctx, const ids_model *model, const idsi_poly *poly,
                                    uint32_t prime, bool *good, bool *zero)
{
    ids_status st = IDS_OK;
    idsi_word_operations words = {0};
    idsi_wordsum sum = {0};
    table t = {0};

    IDSI_TRY(idsi_words_init(&words, ctx, model, prime, false, good));
    for (size_t i = 0; *good && i < poly->count; i++) {
        uint32_t factor = 0;
        *good = idsi_mod_rational(poly->coefficients[i], prime, &factor);
        IDSI_TRY(idsi_words_tree(&words, poly->tokens + poly->start[i], &sum));
        IDSI_TRY(add_sum(ctx, &t, &sum, factor, prime));
        idsi_wordsum_clear(ctx, &sum);
        IDSI_TRY(idsi_poll(ctx, NULL));
    }
    *zero = true;
    for (size_t i = 0; t.slots != NULL && i <= t.mask; i++) {
        *zero = *zero && (!t.slots[i].used || t.slots[i].value == 0);
    }
done:
    idsi_words_clear(&words);
    idsi_wordsum_clear(ctx, &sum);
    idsi_free(ctx, t.slots);
    return st;
}

static ids_status holds_in_words(ids_ctx *ctx, const ids_model *model, const idsi_poly *poly,
                                 bool *holds)
{
    ids_status st = IDS_OK;
    double known = 0;
    uint32_t prime = IDSI_PRIME_HIGH - 1;
    const double size = idsi_sum_bits(poly->coefficients, poly->count);
    /* One bit more for the sign. */
    const double bits = 1 + idsi_words_bits(model, poly->degree, fmax(size, 0));

    *holds = true;
    while (*holds && known < bits) {
        bool good = true;
        do {
            prime -= 2;
        } while (!idsi_is_prime(prime));
        IDSI_TRY(vanishes_in_words(ctx, model, poly, prime, &good, holds));
        /* Where the prime divides a denominator nothing is learnt. */
        *holds = *holds || !good;
        known += good ? 29 : 0;
    }
done:
    return st;
}

/* ---- over another presentation --------------------------------------------------------------- */

/* The polynomial that an identity is there. */
static ids_status expand_over(const ids_model *model, const idsi_poly *poly, idsi_poly *sum)
{
    ids_status st = IDS_OK;
    idsi_poly value;
    mpq_t product;

    mpq_init(product);
    idsi_poly_init(&value, model->ctx, model->base->sig);
    for (size_t i = 0; i < poly->count; i++) {
        IDSI_TRY(idsi_over_tree(model, poly->tokens + poly->start[i], &value));
        for (size_t t = 0; t < value.count; t++) {
            const size_t begin = value.start[t];
            mpq_mul(product, poly->coefficients[i], value.coefficients[t]);
            IDSI_TRY(
                idsi_poly_append(sum, product, value.tokens + begin, value.start[t + 1] - begin));
        }
        idsi_poly_clear(&value);
        IDSI_TRY(idsi_poll(model->ctx, NULL));
    }
    sum->variables = poly->degree;
    IDSI_TRY(idsi_poly_normalize(sum));
done:
    idsi_poly_clear(&value);
    mpq_clear(product);
    return st;
}

static ids_status holds_over(ids_ctx *ctx, const ids_model *model, const idsi_poly *poly,
                             uint64_t seed, bool *holds, double *error)
{
    ids_status st = IDS_OK;
    idsi_poly sum;

    idsi_poly_init(&sum, ctx, model->base->sig);
    IDSI_TRY(expand_over(model, poly, &sum));
    st = idsi_base_is_zero(ctx, model->base, &sum, seed, holds, error);
done:
    idsi_poly_clear(&sum);
    return st;
}

/* ---- in an algebra --------------------------------------------------------------------------- */

static ids_status holds_in_algebra(ids_ctx *ctx, const ids_model *model, ids_role role,
                                   size_t index, bool *holds)
{
    return ids_algebra_holds(ctx, model->algebra, model->pres, role, index, holds, NULL, 0);
}

/* ---- all kinds ------------------------------------------------------------------------------- */

ids_status idsi_model_holds(ids_ctx *ctx, const ids_model *model, ids_role role, size_t index,
                            uint64_t seed, bool *holds, double *error)
{
    ids_status st = IDS_OK;
    const idsi_poly *linear = &idsi_presentation_get(model->pres, role, index)->linear;

    *holds = true;
    *error = 0;
    if (linear->count > 0) {
        switch (model->decl->kind) {
        case IDS_MODEL_ASSOCIATIVE:
            IDSI_TRY(holds_in_words(ctx, model, linear, holds));
            break;
        case IDS_MODEL_ALGEBRA:
            IDSI_TRY(holds_in_algebra(ctx, model, role, index, holds));
            break;
        case IDS_MODEL_OVER:
            IDSI_TRY(holds_over(ctx, model, linear, seed, holds, error));
            break;
        }
    }
done:
    return st;
}

ids_status ids_model_holds(ids_ctx *ctx, const ids_model *model, ids_role role, size_t index,
                           bool *holds, uint32_t *bits)
{
    ids_status st = IDS_OK;
    bool found = true;
    double error = 0;

    if (ctx == NULL || model == NULL || holds == NULL ||
        idsi_presentation_get(model->pres, role, index) == NULL) {
        return idsi_fail_arg(ctx, "context, model, identity or result");
    }
    IDSI_TRY(idsi_model_holds(ctx, model, role, index, 0, &found, &error));
    *holds = found;
    error += model->doubt;
    if (bits != NULL) {
        *bits = error > 0 ? idsi_error_bits(error) : 0;
    }
done:
    return st;
}
