/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * All consequences of the identities in one degree, from the definition of an ideal:
 *
 *   f(m1, ..., md)            every identity f, every way to spread the labels 1..n over its d
 *                             arguments, every choice of monomials on these labels;
 *   op(m1, ..., g, ..., mk)   every operation, every place for g, every way to spread the labels,
 *                             every generator g of the ideal in the degree of its place, and
 *                             every choice of monomials in the other places.
 *
 * The list of generators of a degree is closed under permutations of the labels up to sign (the
 * spreading goes through all of them), so writing g with its labels in increasing order is enough.
 * Rows that are there twice, or with the other sign, are sorted out; nothing else is.
 */
#include "ref.h"

#include <stdlib.h>
#include <string.h>

typedef struct ideal_job {
    const ref_pres *pres;
    const ref_list *basis; /* by degree */
    const ref_rows *lower; /* by degree: rows of the ideal */
    int degree;
    const ref_identity *identity;
    const ref_form *form;
    int place; /* of the ideal's element in form */
    ref_rows *rows;
} ideal_job;

static int compare_entries(const void *a, const void *b)
{
    size_t x = ((const ref_entry *)a)->column;
    size_t y = ((const ref_entry *)b)->column;
    return (x > y) - (x < y);
}

static int compare_rows(const void *a, const void *b)
{
    const ref_row *x = a;
    const ref_row *y = b;
    if (x->count != y->count)
        return x->count < y->count ? -1 : 1;
    for (size_t i = 0; i < x->count; i++) {
        if (x->entries[i].column != y->entries[i].column)
            return x->entries[i].column < y->entries[i].column ? -1 : 1;
        if (x->entries[i].value != y->entries[i].value)
            return x->entries[i].value < y->entries[i].value ? -1 : 1;
    }
    return 0;
}

static void sort_out(ref_rows *rows)
{
    size_t kept = 0;
    if (rows->count > 0)
        qsort(rows->rows, rows->count, sizeof *rows->rows, compare_rows);
    for (size_t i = 0; i < rows->count; i++) {
        if (kept > 0 && compare_rows(&rows->rows[kept - 1], &rows->rows[i]) == 0)
            free(rows->rows[i].entries);
        else
            rows->rows[kept++] = rows->rows[i];
    }
    rows->count = kept;
}

/* Adds up equal columns, makes the first value positive, and stores the row. */
static void push_row(ref_rows *rows, ref_entry *entries, size_t count)
{
    size_t kept = 0;
    if (count > 0)
        qsort(entries, count, sizeof *entries, compare_entries);
    for (size_t i = 0; i < count;) {
        ref_entry sum = entries[i];
        for (i++; i < count && entries[i].column == sum.column; i++)
            sum.value = ref_add(sum.value, entries[i].value);
        if (sum.value != 0)
            entries[kept++] = sum;
    }
    if (kept == 0)
        return;
    ref_row row = {.count = kept, .entries = ref_grow(NULL, kept, sizeof *entries)};
    for (size_t i = 0; i < kept; i++) {
        row.entries[i] = entries[i];
        if (entries[0].value < 0)
            row.entries[i].value = -row.entries[i].value;
    }
    if (rows->count == rows->room) {
        sort_out(rows);
        rows->room = 2 * rows->count + 4096;
        rows->rows = ref_grow(rows->rows, rows->room, sizeof *rows->rows);
    }
    rows->rows[rows->count++] = row;
}

static ref_entry entry_of(const ideal_job *job, const char *mono, int64_t value)
{
    ref_mono canonical = {{0}};
    int sign = ref_canon(job->pres, mono, &canonical);
    return (ref_entry){.column = ref_column(&job->basis[job->degree], &canonical),
                       .value = sign * value};
}

/* f(m1, ..., md). */
static void visit_substitution(void *user, const ref_filling *filling)
{
    ideal_job *job = user;
    const ref_poly *linear = &job->identity->linear;
    ref_entry *entries = ref_grow(NULL, linear->count, sizeof *entries);
    for (size_t t = 0; t < linear->count; t++) {
        ref_mono mono = {{0}};
        size_t length = 0;
        for (const char *c = linear->terms[t].mono.s; *c != '\0'; c++) {
            if (*c < 'a') {
                mono.s[length++] = *c;
                continue;
            }
            int i = *c - 'a';
            const ref_list *basis = &job->basis[filling->size[i]];
            ref_append_relabelled(mono.s, basis->items[filling->choice[i]].s, filling->labels[i]);
            length = strlen(mono.s);
        }
        entries[t] = entry_of(job, mono.s, linear->terms[t].num);
    }
    push_row(job->rows, entries, linear->count);
    free(entries);
}

/* op(m1, ..., g, ..., mk). */
static void visit_context(void *user, const ref_filling *filling)
{
    ideal_job *job = user;
    const ref_row *g = &job->lower[filling->size[job->place]].rows[filling->choice[job->place]];
    ref_entry *entries = ref_grow(NULL, g->count, sizeof *entries);
    for (size_t t = 0; t < g->count; t++) {
        ref_mono mono = {{job->form->letter}};
        for (int i = 0; i < filling->places; i++) {
            size_t item = i == job->place ? g->entries[t].column : filling->choice[i];
            const ref_list *basis = &job->basis[filling->size[i]];
            ref_append_relabelled(mono.s, basis->items[item].s, filling->labels[i]);
        }
        entries[t] = entry_of(job, mono.s, g->entries[t].value);
    }
    push_row(job->rows, entries, g->count);
    free(entries);
}

/* Lists the consequences; basis[k] for k <= degree, lower[k] for k < degree are given. */
void ref_ideal(const ref_pres *pres, int degree, const ref_list *basis, const ref_rows *lower,
               ref_rows *rows)
{
    ideal_job job = {.pres = pres, .basis = basis, .lower = lower, .degree = degree, .rows = rows};
    size_t monos[REF_DEGREE + 1] = {0};
    size_t generators[REF_DEGREE + 1] = {0};
    const size_t *count[REF_DEGREE];
    *rows = (ref_rows){0};
    for (int k = 1; k <= degree; k++)
        monos[k] = basis[k].count;
    for (int k = 1; k < degree; k++)
        generators[k] = lower[k].count;
    for (int i = 0; i < REF_DEGREE; i++)
        count[i] = monos;
    for (size_t i = 0; i < pres->identity_count; i++) {
        job.identity = &pres->identities[i];
        if (job.identity->degree > 0)
            ref_fillings(degree, job.identity->degree, count, visit_substitution, &job);
    }
    for (int i = 0; i < pres->operation_count; i++) {
        job.form = pres->operation[i];
        for (job.place = 0; job.place < job.form->arity; job.place++) {
            count[job.place] = generators;
            ref_fillings(degree, job.form->arity, count, visit_context, &job);
            count[job.place] = monos;
        }
    }
    sort_out(rows);
}

void ref_rows_free(ref_rows *rows)
{
    for (size_t i = 0; i < rows->count; i++)
        free(rows->rows[i].entries);
    free(rows->rows);
    *rows = (ref_rows){0};
}
