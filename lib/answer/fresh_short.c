/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Short identities.
 *
 * A new identity can be changed by known ones, and by other new ones. Candidates come from several
 * sides: orders of the monomials, each of which lets the consequences rewrite other monomials away;
 * the lattice of the new identities, or of all identities of the model where these are few,
 * reduced; and each one is made shorter by adding multiples of single consequences as long as that
 * helps. The shortest ones that are independent modulo the consequences are taken.
 */
#include <string.h>

#include "fresh_private.h"

#define MOST_TRIALS 40u
#define TRIAL_WORK 4000000u
/* Largest lattice of all identities: reducing it takes a second. */
#define MOST_LATTICE 130u
#define MOST_STEPS 4000u

typedef struct pool {
    idsi_space_search *s;
    size_t count;
    size_t capacity;
    mpz_t **rows; /* monomials entries each */
    uint64_t *length;
    size_t length_capacity;
} pool;

uint64_t idsi_short_length(mpz_t *row, size_t count)
{
    uint64_t length = 0;
    for (size_t m = 0; m < count; m++) {
        length += mpz_sgn(row[m]) != 0 ? 1 + mpz_sizeinbase(row[m], 2) : 0;
    }
    return length;
}

static void clear_pool(pool *p)
{
    for (size_t i = 0; i < p->count; i++) {
        idsi_rows_clear(p->s->ctx, p->rows[i], p->s->monomials);
    }
    idsi_free(p->s->ctx, p->rows);
    idsi_free(p->s->ctx, p->length);
}

/* Divides by the content, and makes the first coefficient positive. */
static void make_primitive(mpz_t *row, size_t count)
{
    mpz_t content;
    bool first = true;

    mpz_init(content);
    for (size_t m = 0; m < count; m++) {
        mpz_gcd(content, content, row[m]);
    }
    for (size_t m = 0; m < count && mpz_sgn(content) != 0; m++) {
        if (first && mpz_sgn(row[m]) != 0) {
            first = false;
            if (mpz_sgn(row[m]) < 0) {
                mpz_neg(content, content);
            }
        }
        mpz_divexact(row[m], row[m], content);
    }
    mpz_clear(content);
}

/* Copies rows into the pool. */
static ids_status add_rows(pool *p, mpz_t *rows, size_t count)
{
    ids_status st = IDS_OK;
    const size_t n = p->s->monomials;

    for (size_t i = 0; i < count; i++) {
        mpz_t *copy = NULL;
        IDSI_TRY(idsi_grow(p->s->ctx, p->count, &p->capacity, sizeof *p->rows, &p->rows));
        IDSI_TRY(
            idsi_grow(p->s->ctx, p->count, &p->length_capacity, sizeof *p->length, &p->length));
        IDSI_TRY(idsi_alloc_array(p->s->ctx, n, sizeof *copy, &copy));
        for (size_t m = 0; m < n; m++) {
            mpz_init_set(copy[m], rows[i * n + m]);
        }
        make_primitive(copy, n);
        p->length[p->count] = idsi_short_length(copy, n);
        p->rows[p->count++] = copy;
    }
done:
    return st;
}

/* ---- orders ---------------------------------------------------------------------------------- */

static void shuffle(idsi_space_search *s)
{
    for (size_t i = s->monomials; i > 1; i--) {
        const size_t j = (size_t)idsi_random_below(&s->random, i);
        const uint32_t other = s->place[i - 1];
        s->place[i - 1] = s->place[j];
        s->place[j] = other;
    }
}

static size_t count_entries(const idsi_space_search *s)
{
    size_t count = 0;
    for (size_t i = 0; i < s->row_count * s->monomials; i++) {
        count += s->rows[i] != 0;
    }
    return count;
}

/* The order whose kernel has the fewest entries becomes that of the search. */
static ids_status choose_order(idsi_space_search *s)
{
    ids_status st = IDS_OK;
    uint32_t *best = NULL;
    size_t fewest = 0;
    const uint64_t work = s->system->start[s->system->count] + s->monomials +
                          (uint64_t)s->quotient * s->quotient * s->quotient / 64;
    uint64_t trials = TRIAL_WORK / (work + 1);

    trials = trials > MOST_TRIALS ? MOST_TRIALS : trials;
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *best, &best));
    IDSI_TRY(idsi_space_kernel(s, true));
    fewest = count_entries(s);
    memcpy(best, s->place, s->monomials * sizeof *best);
    for (uint64_t k = 0; k < trials; k++) {
        if (k == 0) {
            for (size_t m = 0; m < s->monomials; m++) {
                s->place[m] = (uint32_t)(s->monomials - 1 - m);
            }
        } else {
            shuffle(s);
        }
        IDSI_TRY(idsi_space_kernel(s, true));
        if (count_entries(s) < fewest) {
            fewest = count_entries(s);
            memcpy(best, s->place, s->monomials * sizeof *best);
        }
        IDSI_TRY(idsi_poll(s->ctx, NULL));
    }
    memcpy(s->place, best, s->monomials * sizeof *best);
done:
    idsi_free(s->ctx, best);
    return st;
}

/* ---- consequences ---------------------------------------------------------------------------- */

/* row += factor * consequence, or taken back. Entries of one monomial in several cells add up. */
static void add_consequence(const idsi_space_search *s, size_t i, int64_t factor, mpz_t *row)
{
    for (size_t k = s->system->start[i]; k < s->system->start[i + 1]; k++) {
        const idsi_cell *cell = &s->system->cells[k];
        int sign = 1;
        mpq_srcptr value = idsi_system_exact(s->system, i, cell, &sign);
        const int64_t f = sign < 0 ? -factor : factor;
        if (f >= 0) {
            mpz_addmul_ui(row[cell->monomial], mpq_numref(value), (uint32_t)f);
        } else {
            mpz_submul_ui(row[cell->monomial], mpq_numref(value), (uint32_t)-f);
        }
    }
}

static uint64_t touched_length(const idsi_space_search *s, size_t i, mpz_t *row, bool *meets)
{
    uint64_t length = 0;
    *meets = false;
    for (size_t k = s->system->start[i]; k < s->system->start[i + 1]; k++) {
        const uint32_t m = s->system->cells[k].monomial;
        if (mpz_sgn(row[m]) != 0) {
            *meets = true;
            length += 1 + mpz_sizeinbase(row[m], 2);
        }
    }
    return length;
}

/* One pass over all consequences; whether something was gained. */
static ids_status improve(const idsi_space_search *s, mpz_t *row, bool *gained)
{
    ids_status st = IDS_OK;
    static const int64_t factors[] = {1, -1, 2, -2};

    *gained = false;
    for (size_t i = 0; i < s->system->count; i++) {
        bool meets = false;
        const uint64_t before = touched_length(s, i, row, &meets);
        for (size_t k = 0; meets && k < sizeof factors / sizeof *factors; k++) {
            bool other = false;
            add_consequence(s, i, factors[k], row);
            if (touched_length(s, i, row, &other) < before) {
                *gained = true;
                break;
            }
            add_consequence(s, i, -factors[k], row);
        }
        IDSI_TRY(idsi_poll(s->ctx, NULL));
    }
done:
    return st;
}

static ids_status improve_all(pool *p)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < p->count; i++) {
        bool gained = true;
        for (uint32_t k = 0; gained && k < MOST_STEPS; k++) {
            IDSI_TRY(improve(p->s, p->rows[i], &gained));
        }
        make_primitive(p->rows[i], p->s->monomials);
        p->length[i] = idsi_short_length(p->rows[i], p->s->monomials);
    }
done:
    return st;
}

/* ---- choosing -------------------------------------------------------------------------------- */

/* A row mod the prime with the consequences taken out, by column. */
static void rewrite(const idsi_space_search *s, const idsi_echelon *echelon, mpz_t *row,
                    uint32_t *out)
{
    const uint32_t p = s->prime;

    memset(out, 0, s->monomials * sizeof *out);
    for (size_t m = 0; m < s->monomials; m++) {
        const idsi_entry *entries = NULL;
        uint32_t count = 0;
        const uint32_t value = (uint32_t)mpz_fdiv_ui(row[m], p);
        if (value == 0) {
            continue;
        }
        if (!idsi_echelon_rule(echelon, (uint32_t)m, &entries, &count)) {
            out[m] = (uint32_t)(((uint64_t)out[m] + value) % p);
        }
        for (uint32_t k = 0; k < count; k++) {
            uint32_t *sum = &out[entries[k].column];
            *sum = (uint32_t)((*sum + (uint64_t)entries[k].value * value) % p);
        }
    }
}

static size_t shortest(const pool *p, const bool *used)
{
    size_t best = SIZE_MAX;
    for (size_t i = 0; i < p->count; i++) {
        if (!used[i] && (best == SIZE_MAX || p->length[i] < p->length[best])) {
            best = i;
        }
    }
    return best;
}

/* The shortest independent ones, into `out` (want x monomials). */
static ids_status choose(pool *p, mpz_t *out)
{
    ids_status st = IDS_OK;
    idsi_space_search *s = p->s;
    idsi_echelon *echelon = NULL;
    idsi_dense_echelon *seen = NULL;
    uint32_t *row = NULL;
    bool *used = NULL;
    size_t chosen = 0;

    IDSI_TRY(idsi_fresh_eliminate(s->system, NULL, s->prime, &echelon));
    IDSI_TRY(idsi_dense_echelon_create(s->ctx, s->prime, s->monomials, &seen));
    IDSI_TRY(idsi_alloc_array(s->ctx, s->monomials, sizeof *row, &row));
    IDSI_TRY(idsi_alloc_array(s->ctx, p->count, sizeof *used, &used));
    while (chosen < s->want) {
        const size_t next = shortest(p, used);
        bool independent = false;
        if (next == SIZE_MAX) {
            st = idsi_fail(s->ctx, IDS_ERR_INTERNAL, "new identities were lost on the way");
            goto done;
        }
        used[next] = true;
        rewrite(s, echelon, p->rows[next], row);
        IDSI_TRY(idsi_dense_echelon_add(seen, row, 1, &independent));
        for (size_t m = 0; independent && m < s->monomials; m++) {
            mpz_set(out[chosen * s->monomials + m], p->rows[next][m]);
        }
        chosen += independent;
    }
done:
    idsi_echelon_free(echelon);
    idsi_dense_echelon_free(seen);
    idsi_free(s->ctx, row);
    idsi_free(s->ctx, used);
    return st;
}

/* ---- all together ---------------------------------------------------------------------------- */

/* A lifted kernel goes into the pool, as it is and reduced. */
static ids_status add_kernel(pool *p, bool modulo, idsi_first *first)
{
    ids_status st = IDS_OK;
    mpz_t *rows = NULL;
    size_t count = 0;
    const size_t n = p->s->monomials;

    IDSI_TRY(idsi_space_lift(p->s, modulo, &rows, &count));
    for (size_t i = 0; first != NULL && i < count; i++) {
        for (size_t m = 0; m < n; m++) {
            first[i].terms += mpz_sgn(rows[i * n + m]) != 0;
            if (mpz_cmpabs(rows[i * n + m], first[i].largest) > 0) {
                mpz_abs(first[i].largest, rows[i * n + m]);
            }
        }
    }
    if (modulo) {
        IDSI_TRY(add_rows(p, rows, count));
    }
    if (count > 1 || !modulo) {
        st = idsi_border_shorten(p->s->ctx, rows, count, n);
        if (st == IDS_ERR_LIMIT) {
            st = IDS_OK; /* it would only have been shorter */
            goto done;
        }
        IDSI_TRY(st);
        IDSI_TRY(add_rows(p, rows, count));
    }
done:
    idsi_rows_clear(p->s->ctx, rows, count * n);
    return st;
}

ids_status idsi_short_choose(idsi_space_search *s, mpz_t **rows, idsi_first *first)
{
    ids_status st = IDS_OK;
    pool p = {.s = s};
    mpz_t *out = NULL;
    const size_t size = s->want * s->monomials;

    IDSI_TRY(add_kernel(&p, true, first));
    IDSI_TRY(choose_order(s));
    IDSI_TRY(add_kernel(&p, true, NULL));
    if (s->monomials <= MOST_LATTICE) {
        IDSI_TRY(add_kernel(&p, false, NULL));
    }
    IDSI_TRY(improve_all(&p));
    IDSI_TRY(idsi_alloc_array(s->ctx, size, sizeof *out, &out));
    for (size_t i = 0; i < size; i++) {
        mpz_init(out[i]);
    }
    IDSI_TRY(choose(&p, out));
    *rows = out;
    out = NULL;
done:
    idsi_rows_clear(s->ctx, out, size);
    clear_pool(&p);
    return st;
}
