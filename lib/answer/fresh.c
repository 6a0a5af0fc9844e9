/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The new identities of a model, degree by degree.
 */
#include <string.h>

#include "fresh_private.h"
#include "rank_private.h"

void ids_fresh_free(ids_fresh *fresh)
{
    if (fresh != NULL) {
        ids_ctx *ctx = fresh->ctx;
        for (size_t i = 0; i < fresh->found_count; i++) {
            idsi_found_clear(ctx, &fresh->found[i]);
        }
        idsi_free(ctx, fresh->found);
        ids_presentation_free(fresh->known);
        idsi_free(ctx, fresh->rows);
        idsi_free(ctx, fresh->sure);
        idsi_free(ctx, fresh->primes);
        idsi_free(ctx, fresh);
    }
}

size_t ids_fresh_count(const ids_fresh *fresh)
{
    return fresh == NULL ? 0 : fresh->count;
}

ids_status ids_fresh_row_get(const ids_fresh *fresh, size_t index, ids_fresh_row *row)
{
    if (fresh == NULL || row == NULL || index >= fresh->count) {
        return IDS_ERR_ARG;
    }
    *row = fresh->rows[index];
    return IDS_OK;
}

size_t ids_fresh_prime_count(const ids_fresh *fresh)
{
    return fresh == NULL ? 0 : fresh->prime_count;
}

uint64_t ids_fresh_prime(const ids_fresh *fresh, size_t index)
{
    return fresh == NULL || index >= fresh->prime_count ? 0 : fresh->primes[index];
}

size_t ids_fresh_identity_count(const ids_fresh *fresh)
{
    return fresh == NULL ? 0 : fresh->found_count;
}

ids_status ids_fresh_identity_get(const ids_fresh *fresh, size_t index,
                                  ids_fresh_identity *identity)
{
    if (fresh == NULL || identity == NULL || index >= fresh->found_count) {
        return IDS_ERR_ARG;
    }
    const idsi_found *found = &fresh->found[index];
    *identity = (ids_fresh_identity){.name = found->name,
                                     .statement = found->statement,
                                     .polynomial = found->polynomial,
                                     .alternating = found->alternating,
                                     .degree = found->degree,
                                     .partition = found->partition,
                                     .modules = found->modules,
                                     .terms = found->terms,
                                     .first_terms = found->first_terms,
                                     .largest = found->largest,
                                     .first_largest = found->first_largest,
                                     .bits = found->bits};
    return IDS_OK;
}

ids_status ids_fresh_presentation(ids_ctx *ctx, const ids_fresh *fresh, char **text)
{
    if (ctx == NULL || fresh == NULL || text == NULL) {
        return idsi_fail_arg(ctx, "context, result or text");
    }
    return idsi_fresh_text(ctx, fresh, SIZE_MAX, true, text);
}

/* The identities of the presentation must hold, or nothing that is computed means anything. */
static ids_status check_identities(ids_fresh *fresh, uint32_t to)
{
    ids_status st = IDS_OK;
    const ids_model *model = fresh->model;
    const size_t count = ids_presentation_count(model->pres, IDS_ROLE_IDENTITY);

    for (size_t i = 0; i < count; i++) {
        const idsi_identity *identity = idsi_presentation_get(model->pres, IDS_ROLE_IDENTITY, i);
        bool holds = true;
        double error = 0;
        if (identity->degree > to) {
            continue;
        }
        IDSI_TRY(
            idsi_model_holds(fresh->ctx, model, IDS_ROLE_IDENTITY, i, fresh->seed, &holds, &error));
        if (!holds) {
            st = idsi_presentation_fail(
                fresh->ctx, model->pres, IDS_ERR_DOMAIN, (ids_place){identity->line, 1},
                "the identity%s%s does not hold in the model %s; new identities can only be told "
                "from identities that hold",
                identity->name[0] == '\0' ? "" : " ", identity->name, model->decl->name);
            goto done;
        }
        fresh->doubt += error;
    }
done:
    return st;
}

static ids_status draw_primes(ids_fresh *made, const ids_fresh_options *options)
{
    ids_status st = IDS_OK;
    idsi_random random;
    const uint32_t count = options->primes == 0 ? 1 : options->primes;

    made->seed = options->seed;
    made->exact = options->exact;
    idsi_random_seed(&random, options->seed);
    IDSI_TRY(idsi_alloc_array(made->ctx, count, sizeof *made->primes, &made->primes));
    for (uint32_t k = 0; k < count; k++) {
        made->primes[k] = idsi_prime_draw(&random, made->primes, k);
        made->prime_count = k + 1;
    }
done:
    return st;
}

/* One degree. When it ends early, nothing of it is left. */
static ids_status add_degree(ids_fresh *made, uint32_t degree, bool table_only)
{
    ids_status st = IDS_OK;
    const size_t rows = made->count;
    const size_t found = made->found_count;

    IDSI_TRY(
        idsi_fresh_degree(made, made->known == NULL ? made->model->pres : made->known, degree));
    if (!table_only && made->rows[made->count - 1].fresh > 0) {
        IDSI_TRY(idsi_fresh_search(made, degree));
    }
done:
    if (st != IDS_OK) {
        made->count = rows;
        while (made->found_count > found) {
            idsi_found_clear(made->ctx, &made->found[--made->found_count]);
        }
    }
    return st;
}

ids_status ids_fresh_create(ids_ctx *ctx, const ids_model *model, uint32_t from, uint32_t to,
                            const ids_fresh_options *options, ids_fresh **fresh)
{
    ids_status st = IDS_OK;
    ids_fresh *made = NULL;
    ids_fresh_options chosen = {.struct_size = sizeof chosen};

    if (ctx == NULL || model == NULL || fresh == NULL || from == 0 || from > to ||
        to > IDSI_SHAPE_MAX) {
        return idsi_fail_arg(ctx, "context, model, degree or result");
    }
    if (options != NULL) {
        IDSI_TRY(
            idsi_check_struct(ctx, "ids_fresh_options", options->struct_size, sizeof *options));
        IDSI_TRY(idsi_check_primes(ctx, options->primes));
        chosen = *options;
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->model = model;
    made->doubt = model->doubt;
    IDSI_TRY(draw_primes(made, &chosen));
    IDSI_TRY(check_identities(made, to));
    for (uint32_t d = from; d <= to; d++) {
        IDSI_TRY(add_degree(made, d, chosen.table_only));
    }
done:
    if (st == IDS_OK || st == IDS_ERR_LIMIT || st == IDS_ERR_CANCELLED) {
        *fresh = made;
    } else {
        ids_fresh_free(made);
    }
    return st;
}
