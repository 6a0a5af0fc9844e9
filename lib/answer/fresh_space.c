/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The identities of a model in one weight space of the free algebra.
 *
 *     [ 1 | sample ]     a row a monomial that the consequences do not rewrite
 *
 * is brought to echelon form from the right. Rows that have become 0 in the sample are identities
 * of the model in these monomials. The form is the reduced one, which depends on the space alone;
 * so residues mod several primes belong to the same fractions, and are lifted to them.
 */
#include <string.h>

#include "fresh_private.h"

#define SPARE 8u
#define MOST_PRIMES 40u

/* ---- opening --------------------------------------------------------------------------------- */

static void set_content(idsi_space_search *s, const ids_partition *partition)
{
    ids_partition shape = *partition;

    if (s->odd && ids_partition_conjugate(partition, &shape) != IDS_OK) {
        return;
    }
    s->variables = shape.length;
    memcpy(s->power, shape.part, sizeof s->power);
}

/* Rank of the consequences, and with it the size of everything. */
static ids_status measure(idsi_space_search *s, uint64_t seed)
{
    ids_status st = IDS_OK;
    idsi_echelon *echelon = NULL;
    bool good = true;

    do {
        s->prime = idsi_prime_draw(&s->random, NULL, 0);
        IDSI_TRY(idsi_system_reduce(s->system, s->prime, &good));
    } while (!good);
    IDSI_TRY(idsi_fresh_eliminate(s->system, NULL, seed, &echelon));
    s->quotient = s->monomials - idsi_echelon_rank(echelon);
    s->width = s->quotient + SPARE;
done:
    idsi_echelon_free(echelon);
    return st;
}

ids_status idsi_space_open(idsi_space_search *s, ids_ctx *ctx, const ids_model *model,
                           const ids_presentation *known, const ids_partition *partition, bool odd,
                           size_t want, uint64_t seed)
{
    ids_status st = IDS_OK;

    memset(s, 0, sizeof *s);
    s->ctx = ctx;
    s->model = model;
    s->odd = odd;
    s->degree = partition->degree;
    s->want = want;
    set_content(s, partition);
    idsi_random_seed(&s->random, seed);
    IDSI_TRY(idsi_component_create_content(ctx, known, s->power, s->variables, odd, &s->component));
    s->monomials = idsi_component_monomials(s->component)->count;
    IDSI_TRY(idsi_system_create(s->component, &s->system));
    IDSI_TRY(measure(s, seed));
    IDSI_TRY(idsi_alloc_array(ctx, s->monomials, sizeof *s->place, &s->place));
    for (size_t m = 0; m < s->monomials; m++) {
        s->place[m] = (uint32_t)m;
    }
    IDSI_TRY(idsi_alloc_array(ctx, s->monomials * s->width, sizeof *s->sample, &s->sample));
    IDSI_TRY(idsi_space_draw(s));
done:
    return st;
}

void idsi_space_close(idsi_space_search *s)
{
    idsi_system_free(s->system);
    idsi_component_free(s->component);
    idsi_free(s->ctx, s->sample);
    idsi_free(s->ctx, s->place);
    idsi_free(s->ctx, s->rows);
}

/* ---- one prime ------------------------------------------------------------------------------- */

typedef struct feeder {
    const idsi_system *system;
    const uint32_t *place;
    idsi_entry *row;
} feeder;

static ids_status make_rows(void *user, idsi_row_fn row, void *row_user)
{
    const feeder *f = user;
    ids_status st = IDS_OK;

    for (size_t i = 0; i < f->system->count; i++) {
        const size_t start = f->system->start[i];
        const size_t count = f->system->start[i + 1] - start;
        for (size_t k = 0; k < count; k++) {
            const idsi_cell *cell = &f->system->cells[start + k];
            f->row[k] = (idsi_entry){f->place == NULL ? cell->monomial : f->place[cell->monomial],
                                     idsi_system_value(f->system, i, cell)};
        }
        IDSI_TRY(row(row_user, f->row, count));
    }
done:
    return st;
}

ids_status idsi_fresh_eliminate(const idsi_system *system, const uint32_t *place, uint64_t seed,
                                idsi_echelon **echelon)
{
    ids_status st = IDS_OK;
    feeder f = {.system = system, .place = place};
    idsi_result result = {0};
    idsi_random random;
    size_t most = 1;
    idsi_matrix matrix = {.ctx = system->ctx,
                          .prime = system->prime,
                          .columns = (uint32_t)idsi_component_monomials(system->component)->count,
                          .tables = true,
                          .source = make_rows,
                          .source_user = &f};

    for (size_t i = 0; i < system->count; i++) {
        const size_t cells = system->start[i + 1] - system->start[i];
        most = cells > most ? cells : most;
    }
    IDSI_TRY(idsi_alloc_array(system->ctx, most, sizeof *f.row, &f.row));
    idsi_random_seed(&random, seed);
    IDSI_TRY(idsi_eliminate(&matrix, &random, &result));
    *echelon = result.echelon;
done:
    idsi_free(system->ctx, f.row);
    return st;
}

/* The trees of all monomials, evaluated in the model. */
static ids_status sample_all(idsi_space_search *s, bool *good)
{
    ids_status st = IDS_OK;
    const idsi_forest *forest = idsi_component_monomials(s->component);
    const idsi_token **trees = NULL;

    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *trees, &trees));
    for (size_t m = 0; m < s->monomials; m++) {
        trees[m] = forest->tokens + forest->list[m].start;
    }
    const idsi_sample sample = {.ctx = s->ctx,
                                .model = s->model,
                                .prime = s->prime,
                                .odd = s->odd,
                                .degree = s->degree,
                                .variables = s->variables,
                                .power = s->power,
                                .count = s->monomials,
                                .trees = trees,
                                .width = s->width,
                                .seed = idsi_random_next(&s->random),
                                .out = s->sample};
    memset(s->sample, 0, s->monomials * s->width * sizeof *s->sample);
    switch (s->model->decl->kind) {
    case IDS_MODEL_ASSOCIATIVE:
        IDSI_TRY(idsi_sample_words(&sample, good));
        break;
    case IDS_MODEL_ALGEBRA:
        IDSI_TRY(idsi_sample_algebra(&sample, good));
        break;
    case IDS_MODEL_OVER:
        IDSI_TRY(idsi_sample_over(&sample, good));
        break;
    }
done:
    idsi_free(s->ctx, trees);
    return st;
}

ids_status idsi_space_draw(idsi_space_search *s)
{
    ids_status st = IDS_OK;
    bool good = false;

    for (uint32_t k = 0; !good && k < MOST_PRIMES; k++) {
        s->prime = idsi_prime_draw(&s->random, NULL, 0);
        IDSI_TRY(idsi_system_reduce(s->system, s->prime, &good));
        if (good) {
            IDSI_TRY(sample_all(s, &good));
        }
    }
    if (!good) {
        st = idsi_fail(s->ctx, IDS_ERR_UNABLE, "%u primes divide denominators", MOST_PRIMES);
    }
done:
    return st;
}

/* ---- kernel ---------------------------------------------------------------------------------- */

/* Monomials that are not rewritten, by increasing column; returns their number. */
static size_t list_normal(const idsi_space_search *s, const idsi_echelon *echelon, uint32_t *list)
{
    size_t count = 0;
    uint32_t *at = list + s->monomials; /* monomial of each column */

    for (size_t m = 0; m < s->monomials; m++) {
        at[s->place[m]] = (uint32_t)m;
    }
    for (uint32_t column = 0; column < s->monomials; column++) {
        if (echelon == NULL || !idsi_echelon_is_pivot(echelon, column)) {
            list[count++] = at[column];
        }
    }
    return count;
}

static ids_status keep_row(idsi_space_search *s, const uint32_t *list, size_t normal,
                           const uint32_t *row)
{
    ids_status st = IDS_OK;

    while (s->row_capacity <= s->row_count) {
        const size_t capacity = s->row_capacity == 0 ? 4 : 2 * s->row_capacity;
        IDSI_TRY(idsi_resize_array(s->ctx, capacity * s->monomials, sizeof *s->rows, &s->rows));
        s->row_capacity = capacity;
    }
    uint32_t *kept = s->rows + s->row_count * s->monomials;
    memset(kept, 0, s->monomials * sizeof *kept);
    for (size_t i = 0; i < normal; i++) {
        kept[list[i]] = row[i];
    }
    s->row_count++;
done:
    return st;
}

static ids_status eliminate_sample(idsi_space_search *s, const uint32_t *list, size_t normal)
{
    ids_status st = IDS_OK;
    const size_t columns = normal + s->width;
    idsi_dense_echelon *echelon = NULL;
    uint32_t *rows = NULL;

    IDSI_TRY(idsi_dense_echelon_create(s->ctx, s->prime, columns, &echelon));
    IDSI_TRY(idsi_alloc_array(s->ctx, normal * columns, sizeof *rows, &rows));
    for (size_t i = 0; i < normal; i++) {
        rows[i * columns + i] = 1;
        memcpy(rows + i * columns + normal, s->sample + list[i] * s->width,
               s->width * sizeof *rows);
    }
    IDSI_TRY(idsi_dense_echelon_add(echelon, rows, normal, NULL));
    IDSI_TRY(idsi_dense_echelon_complete(echelon));
    s->row_count = 0;
    for (size_t i = 0; i < idsi_dense_echelon_rank(echelon); i++) {
        if (idsi_dense_echelon_pivot(echelon, i) < normal) {
            IDSI_TRY(keep_row(s, list, normal, idsi_dense_echelon_row(echelon, i)));
        }
    }
done:
    idsi_dense_echelon_free(echelon);
    idsi_free(s->ctx, rows);
    return st;
}

ids_status idsi_space_kernel(idsi_space_search *s, bool modulo)
{
    ids_status st = IDS_OK;
    idsi_echelon *echelon = NULL;
    uint32_t *list = NULL;

    if (modulo) {
        IDSI_TRY(idsi_fresh_eliminate(s->system, s->place, s->prime, &echelon));
    }
    IDSI_TRY(idsi_alloc_array(s->ctx, 2 * s->monomials, sizeof *list, &list));
    const size_t normal = list_normal(s, echelon, list);
    IDSI_TRY(eliminate_sample(s, list, normal));
    if (modulo && s->row_count != s->want) {
        st = idsi_fail(s->ctx, IDS_ERR_INTERNAL,
                       "degree %u: %zu new modules by partition, %zu new identities in a weight "
                       "space",
                       s->degree, s->want, s->row_count);
    }
done:
    idsi_echelon_free(echelon);
    idsi_free(s->ctx, list);
    return st;
}

/* ---- over the integers ----------------------------------------------------------------------- */

void idsi_rows_clear(ids_ctx *ctx, mpz_t *rows, size_t count)
{
    for (size_t i = 0; rows != NULL && i < count; i++) {
        mpz_clear(rows[i]);
    }
    idsi_free(ctx, rows);
}

static ids_status rows_create(ids_ctx *ctx, size_t count, mpz_t **rows)
{
    ids_status st = idsi_alloc_array(ctx, count, sizeof **rows, rows);
    for (size_t i = 0; st == IDS_OK && i < count; i++) {
        mpz_init((*rows)[i]);
    }
    return st;
}

/* Whether integer rows are multiples of the kernel mod a prime that did not go into them. */
static bool agree(const idsi_space_search *s, mpz_t *rows)
{
    for (size_t i = 0; i < s->row_count; i++) {
        const uint32_t *row = s->rows + i * s->monomials;
        uint32_t factor = 0;
        for (size_t m = 0; m < s->monomials; m++) {
            const uint32_t value = (uint32_t)mpz_fdiv_ui(rows[i * s->monomials + m], s->prime);
            if (factor == 0 && row[m] != 0) {
                factor = idsi_mod_mul(value, idsi_mod_inverse(row[m], s->prime), s->prime);
            }
            if (idsi_mod_mul(factor, row[m], s->prime) != value) {
                return false;
            }
        }
        if (factor == 0) {
            return false;
        }
    }
    return true;
}

ids_status idsi_space_lift(idsi_space_search *s, bool modulo, mpz_t **rows, size_t *count)
{
    ids_status st = IDS_OK;
    mpz_t *residues = NULL;
    mpz_t *made = NULL;
    mpz_t modulus;
    bool ready = false;
    size_t size = 0;

    mpz_init_set_ui(modulus, 1);
    for (uint32_t k = 0; k < MOST_PRIMES; k++) {
        IDSI_TRY(idsi_space_kernel(s, modulo));
        if (ready && s->row_count * s->monomials == size && agree(s, made)) {
            *rows = made;
            *count = s->row_count;
            made = NULL;
            goto done;
        }
        if (residues == NULL) {
            size = s->row_count * s->monomials;
            IDSI_TRY(rows_create(s->ctx, size, &residues));
            IDSI_TRY(rows_create(s->ctx, size, &made));
        }
        if (s->row_count * s->monomials == size) {
            for (size_t i = 0; i < size; i++) {
                idsi_residue_join(residues[i], modulus, s->rows[i], s->prime);
            }
            mpz_mul_ui(modulus, modulus, s->prime);
            ready = true;
            for (size_t i = 0; ready && i < s->row_count; i++) {
                ready = idsi_residues_to_integers(residues + i * s->monomials, s->monomials,
                                                  modulus, mpz_sizeinbase(modulus, 2) - 1,
                                                  made + i * s->monomials);
            }
        }
        IDSI_TRY(idsi_space_draw(s));
    }
    st = idsi_fail(s->ctx, IDS_ERR_UNABLE,
                   "degree %u: coefficients of new identities do not come out of %u primes",
                   s->degree, MOST_PRIMES);
done:
    mpz_clear(modulus);
    idsi_rows_clear(s->ctx, residues, size);
    idsi_rows_clear(s->ctx, made, size);
    return st;
}
