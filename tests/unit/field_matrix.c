/* SPDX-License-Identifier: BSD-2-Clause */
#include "field_matrix.h"

#include <stdlib.h>
#include <string.h>

/* The largest primes below 2^20 and 2^30 and the least above 2^20 and 2^29 (FLINT agrees, see
 * test_field_prime.c). */
const uint32_t field_primes[] = {2, 3, 101, 1048573, 1048583, 536870923, 1073741789};
const size_t field_prime_count = sizeof field_primes / sizeof *field_primes;

static void *take(size_t count, size_t size)
{
    void *block = calloc(count > 0 ? count : 1, size);
    ck_assert_ptr_nonnull(block);
    return block;
}

void field_matrix_init(field_matrix *matrix, uint32_t p, size_t rows, size_t columns)
{
    *matrix = (field_matrix){.p = p, .rows = rows, .columns = columns};
    matrix->entries = take(rows * columns, sizeof *matrix->entries);
}

void field_matrix_clear(field_matrix *matrix)
{
    free(matrix->entries);
    matrix->entries = NULL;
}

uint32_t *field_matrix_row(const field_matrix *matrix, size_t row)
{
    return matrix->entries + row * matrix->columns;
}

static uint32_t random_entry(uint32_t p, idsi_random *random)
{
    return (uint32_t)idsi_random_below(random, p);
}

static void fill_low(field_matrix *m, idsi_random *random)
{
    size_t rank = (m->rows < m->columns ? m->rows : m->columns) / 3 + 1;
    field_matrix left;
    field_matrix right;

    field_matrix_init(&left, m->p, m->rows, rank);
    field_matrix_init(&right, m->p, rank, m->columns);
    field_matrix_random(&left, FIELD_DENSE, random);
    field_matrix_random(&right, FIELD_DENSE, random);
    for (size_t i = 0; i < m->rows; i++) {
        for (size_t j = 0; j < m->columns; j++) {
            uint32_t sum = 0;
            for (size_t k = 0; k < rank; k++) {
                sum = (sum + idsi_mod_mul(left.entries[i * rank + k],
                                          right.entries[k * m->columns + j], m->p)) %
                      m->p;
            }
            m->entries[i * m->columns + j] = sum;
        }
    }
    field_matrix_clear(&left);
    field_matrix_clear(&right);
}

static void fill_extreme(field_matrix *m, idsi_random *random)
{
    const uint32_t p = m->p;
    const uint32_t values[] = {0, 1 % p, p - 1, (p - 1) / 2, (p + 1) / 2 % p};

    for (size_t i = 0; i < m->rows * m->columns; i++) {
        m->entries[i] = values[idsi_random_below(random, 5)];
    }
}

void field_matrix_random(field_matrix *matrix, field_kind kind, idsi_random *random)
{
    field_matrix *m = matrix;
    size_t size = m->rows * m->columns;

    memset(m->entries, 0, size * sizeof *m->entries);
    if (kind == FIELD_LOW || kind == FIELD_GAPS) {
        fill_low(m, random);
    } else if (kind == FIELD_EXTREME) {
        fill_extreme(m, random);
    }
    for (size_t i = 0; kind == FIELD_DENSE && i < size; i++) {
        m->entries[i] = random_entry(m->p, random);
    }
    for (size_t i = 0; kind == FIELD_SPARSE && m->columns > 0 && i < m->rows; i++) {
        for (uint64_t k = 1 + idsi_random_below(random, 4); k > 0; k--) {
            field_matrix_row(m, i)[idsi_random_below(random, m->columns)] =
                random_entry(m->p, random);
        }
    }
    for (size_t i = 1; kind == FIELD_GAPS && i < m->rows; i++) {
        if (idsi_random_below(random, 3) == 0) {
            memset(field_matrix_row(m, i), 0, m->columns * sizeof *m->entries);
        } else if (idsi_random_below(random, 3) == 0) {
            memcpy(field_matrix_row(m, i), field_matrix_row(m, i - 1),
                   m->columns * sizeof *m->entries);
        }
    }
}

void field_matrix_shuffle(field_matrix *matrix, idsi_random *random)
{
    for (size_t i = matrix->rows; i > 1; i--) {
        uint32_t *a = field_matrix_row(matrix, i - 1);
        uint32_t *b = field_matrix_row(matrix, idsi_random_below(random, i));
        for (size_t j = 0; j < matrix->columns; j++) {
            uint32_t t = a[j];
            a[j] = b[j];
            b[j] = t;
        }
    }
}

void field_reduce(const field_matrix *matrix, field_reduced *reduced)
{
    nmod_mat_t form;
    size_t columns = matrix->columns;

    nmod_mat_init(form, (slong)matrix->rows, (slong)columns, matrix->p);
    for (size_t i = 0; i < matrix->rows; i++) {
        for (size_t j = 0; j < columns; j++) {
            nmod_mat_entry(form, i, columns - 1 - j) = field_matrix_row(matrix, i)[j];
        }
    }
    *reduced = (field_reduced){.columns = columns};
    reduced->rank = columns > 0 ? (size_t)nmod_mat_rref(form) : 0;
    reduced->pivot = take(reduced->rank, sizeof *reduced->pivot);
    reduced->entries = take(reduced->rank * columns, sizeof *reduced->entries);
    reduced->is_pivot = take(columns, sizeof *reduced->is_pivot);
    for (size_t i = 0; i < reduced->rank; i++) {
        bool found = false;
        for (size_t j = columns; j-- > 0;) {
            uint32_t entry = (uint32_t)nmod_mat_entry(form, i, columns - 1 - j);
            reduced->entries[i * columns + j] = entry;
            if (entry != 0 && !found) {
                found = true;
                reduced->pivot[i] = (uint32_t)j;
                reduced->is_pivot[j] = true;
            }
        }
    }
    nmod_mat_clear(form);
}

void field_reduced_clear(field_reduced *reduced)
{
    free(reduced->pivot);
    free(reduced->entries);
    free(reduced->is_pivot);
}

size_t field_reduced_find(const field_reduced *reduced, uint32_t pivot)
{
    for (size_t i = 0; i < reduced->rank; i++) {
        if (reduced->pivot[i] == pivot) {
            return i;
        }
    }
    ck_abort_msg("column %u is no pivot of FLINT's form", pivot);
    return 0;
}

void field_reduced_rest(const field_reduced *reduced, uint32_t p, const uint32_t *row,
                        uint32_t *rest)
{
    memcpy(rest, row, reduced->columns * sizeof *rest);
    for (size_t i = 0; i < reduced->rank; i++) {
        const uint32_t *rule = reduced->entries + i * reduced->columns;
        uint32_t factor = rest[reduced->pivot[i]];
        for (size_t j = 0; j < reduced->columns; j++) {
            rest[j] = (rest[j] + idsi_mod_mul(p - factor, rule[j], p)) % p;
        }
    }
}

const idsi_kernel *field_kernel(size_t number)
{
    if (number == 0) {
        return &idsi_kernel_portable;
    }
#if defined(__x86_64__)
    if (number == 1 && __builtin_cpu_supports("avx2")) {
        return &idsi_kernel_avx2;
    }
    if (number == 2 && __builtin_cpu_supports("avx512f") && __builtin_cpu_supports("avx512dq")) {
        return &idsi_kernel_avx512;
    }
#endif
    return NULL;
}

void field_matrix_expect(const field_matrix *a, const field_matrix *b, field_matrix *c)
{
    const uint32_t p = c->p;
    nmod_mat_t left;
    nmod_mat_t right;
    nmod_mat_t product;

    nmod_mat_init(left, (slong)a->rows, (slong)a->columns, p);
    nmod_mat_init(right, (slong)b->rows, (slong)b->columns, p);
    nmod_mat_init(product, (slong)c->rows, (slong)c->columns, p);
    for (size_t i = 0; i < a->rows * a->columns; i++) {
        left->entries[i] = a->entries[i];
    }
    for (size_t i = 0; i < b->rows * b->columns; i++) {
        right->entries[i] = b->entries[i];
    }
    nmod_mat_mul(product, left, right);
    for (size_t i = 0; i < c->rows * c->columns; i++) {
        c->entries[i] = (uint32_t)((c->entries[i] + p - product->entries[i]) % p);
    }
    nmod_mat_clear(left);
    nmod_mat_clear(right);
    nmod_mat_clear(product);
}

void field_matrix_compare(const char *name, const field_matrix *got, const field_matrix *wanted)
{
    for (size_t i = 0; i < got->rows * got->columns; i++) {
        if (got->entries[i] != wanted->entries[i]) { /* an assertion each would take long */
            ck_abort_msg("%s: entry %zu of a %zu x %zu product mod %u is %u, not %u", name, i,
                         got->rows, got->columns, got->p, got->entries[i], wanted->entries[i]);
        }
    }
}
