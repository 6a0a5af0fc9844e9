/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * compare_rank ours|flint|pari MATRIX
 *
 * Rank mod the prime of bench_rank of a matrix that bench_rank --export wrote: by the elimination
 * of this library (one thread), by FLINT's nmod_mat_rank, or by the dense Flm_rank of PARI, which
 * is what matrank calls mod a small prime. Prints method, rank, seconds of the processor without
 * reading, with tabs.
 */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#include <flint/nmod_mat.h>
#ifdef BENCH_HAVE_PARI
#include <pari/pari.h>
#undef evaluate
#endif

#include "compare_rank.h"

static double now(void)
{
    struct timespec time = {0};

    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

static void stop(const char *what)
{
    fprintf(stderr, "compare_rank: %s\n", what);
    exit(EXIT_FAILURE);
}

static void *take(size_t count, size_t size)
{
    void *block = calloc(count > 0 ? count : 1, size);

    if (block == NULL) {
        stop("no memory");
    }
    return block;
}

/* Reads all entries; start[r] .. start[r+1] are those of row r. */
static void read_matrix(const char *path, compare_matrix *m)
{
    FILE *file = fopen(path, "r");
    unsigned long long row = 0;
    unsigned long column = 0;
    unsigned long value = 0;
    size_t capacity = 0;

    if (file == NULL || fscanf(file, "%zu %zu M", &m->rows, &m->columns) != 2) {
        stop("the matrix cannot be read");
    }
    m->start = take(m->rows + 1, sizeof *m->start);
    while (fscanf(file, "%llu %lu %lu", &row, &column, &value) == 3 && row > 0) {
        if (m->count == capacity) {
            capacity = 2 * capacity + 1024;
            m->column = realloc(m->column, capacity * sizeof *m->column);
            m->value = realloc(m->value, capacity * sizeof *m->value);
            if (m->column == NULL || m->value == NULL) {
                stop("no memory");
            }
        }
        m->column[m->count] = (uint32_t)(column - 1);
        m->value[m->count] = (uint32_t)value;
        m->count++;
        m->start[row] = m->count; /* rows come in order */
    }
    for (size_t r = 1; r <= m->rows; r++) {
        m->start[r] = m->start[r] < m->start[r - 1] ? m->start[r - 1] : m->start[r];
    }
    fclose(file);
}

static size_t rank_by_flint(const compare_matrix *m, double *seconds)
{
    nmod_mat_t dense;

    nmod_mat_init(dense, (slong)m->rows, (slong)m->columns, COMPARE_PRIME);
    for (size_t r = 0; r < m->rows; r++) {
        for (size_t i = m->start[r]; i < m->start[r + 1]; i++) {
            mp_limb_t *at = &nmod_mat_entry(dense, r, m->column[i]);
            *at = (*at + m->value[i]) % COMPARE_PRIME;
        }
    }
    double begin = now();
    size_t rank = (size_t)nmod_mat_rank(dense);
    *seconds = now() - begin;
    nmod_mat_clear(dense);
    return rank;
}

#ifdef BENCH_HAVE_PARI
static size_t rank_by_pari(const compare_matrix *m, double *seconds)
{
    size_t bytes = (m->rows + 2) * (m->columns + 2) * sizeof(long);
    pari_init_opts((size_t)64000000, 2, INIT_DFTm);
    paristack_setsize(2 * bytes + 64000000, 16 * bytes + 64000000);
    GEN dense = cgetg((long)m->columns + 1, t_MAT);
    for (size_t j = 1; j <= m->columns; j++) {
        gel(dense, j) = zero_Flv((long)m->rows);
    }
    for (size_t r = 0; r < m->rows; r++) {
        for (size_t i = m->start[r]; i < m->start[r + 1]; i++) {
            unsigned long *column = (unsigned long *)gel(dense, m->column[i] + 1);
            column[r + 1] = (column[r + 1] + m->value[i]) % COMPARE_PRIME;
        }
    }
    double begin = now();
    size_t rank = (size_t)Flm_rank(dense, COMPARE_PRIME);
    *seconds = now() - begin;
    pari_close();
    return rank;
}
#endif

int main(int argc, char **argv)
{
    compare_matrix m = {0};
    double seconds = 0;
    size_t rank = 0;

    if (argc != 3) {
        stop("usage: compare_rank ours|flint|pari MATRIX");
    }
    read_matrix(argv[2], &m);
    if (strcmp(argv[1], "ours") == 0) {
        double begin = now();
        rank = compare_rank_ours(&m);
        seconds = now() - begin;
    } else if (strcmp(argv[1], "flint") == 0) {
        rank = rank_by_flint(&m, &seconds);
#ifdef BENCH_HAVE_PARI
    } else if (strcmp(argv[1], "pari") == 0) {
        rank = rank_by_pari(&m, &seconds);
#endif
    } else {
        fprintf(stderr, "compare_rank: %s was not built in\n", argv[1]);
        return 3;
    }
    printf("%s\t%zu\t%.4f\n", argv[1], rank, seconds);
    free(m.start);
    free(m.column);
    free(m.value);
    return EXIT_SUCCESS;
}
