/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Trees as strings: canonical form, all monomials of a degree, and the spreading of labels.
 *
 * Canonical form by brute force: make the arguments canonical, write the node in every order that
 * the symmetry group allows, and take the least string. It depends on the orbit only, because the
 * group carries the set of these strings onto itself.
 */
#include "ref.h"

#include <ctype.h>
#include <stdlib.h>
#include <string.h>

int ref_degree(const char *mono)
{
    int degree = 0;
    for (; *mono != '\0'; mono++)
        degree += islower((unsigned char)*mono) != 0;
    return degree;
}

/* The end of the tree that starts at `mono`. */
const char *ref_skip(const ref_pres *pres, const char *mono)
{
    if (islower((unsigned char)*mono))
        return mono + 1;
    int arity = pres->operation[*mono - 'A']->arity;
    mono++;
    for (int i = 0; i < arity; i++)
        mono = ref_skip(pres, mono);
    return mono;
}

/* Returns the sign, or 0 when repeated labels make the monomial equal to its negative. */
int ref_canon(const ref_pres *pres, const char *mono, ref_mono *canonical)
{
    memset(canonical, 0, sizeof *canonical);
    if (islower((unsigned char)*mono)) {
        canonical->s[0] = *mono;
        return 1;
    }
    const ref_group *group = &pres->operation[*mono - 'A']->group;
    ref_mono args[REF_ARITY];
    int sign = 1;
    const char *rest = mono + 1;
    for (int i = 0; i < group->arity; i++) {
        sign *= ref_canon(pres, rest, &args[i]);
        rest = ref_skip(pres, rest);
    }
    int best = 0;
    for (size_t g = 0; g < group->order; g++) {
        ref_mono image = {{*mono}};
        for (int i = 0; i < group->arity; i++)
            strcat(image.s, args[group->elements[g].image[i]].s);
        int order = best == 0 ? -1 : strcmp(image.s, canonical->s);
        if (order < 0) {
            *canonical = image;
            best = group->elements[g].sign;
        } else if (order == 0 && best != group->elements[g].sign) {
            sign = 0;
        }
    }
    return sign * best;
}

/* Appends `mono` with leaf 'a' + i written as labels[i]. */
void ref_append_relabelled(char *out, const char *mono, const char *labels)
{
    out += strlen(out);
    for (; *mono != '\0'; mono++)
        *out++ = islower((unsigned char)*mono) ? labels[*mono - 'a'] : *mono;
    *out = '\0';
}

/* All choices of items for places whose labels are fixed; count[place][size] items to choose. */
static void choose(ref_filling *filling, int place, const size_t *count[], ref_visit visit,
                   void *user)
{
    if (place == filling->places) {
        visit(user, filling);
        return;
    }
    size_t items = count[place][filling->size[place]];
    for (size_t i = 0; i < items; i++) {
        filling->choice[place] = i;
        choose(filling, place + 1, count, visit, user);
    }
}

/* Puts label number `label` at every place in turn, then the labels after it. */
static void spread(ref_filling *filling, int label, int degree, const size_t *count[],
                   ref_visit visit, void *user)
{
    if (label == degree) {
        for (int place = 0; place < filling->places; place++) {
            if (filling->size[place] == 0)
                return;
        }
        choose(filling, 0, count, visit, user);
        return;
    }
    for (int place = 0; place < filling->places; place++) {
        filling->labels[place][filling->size[place]++] = (char)('a' + label);
        spread(filling, label + 1, degree, count, visit, user);
        filling->labels[place][--filling->size[place]] = '\0';
    }
}

/* Visits every map of the labels onto the places with every choice of items. */
void ref_fillings(int degree, int places, const size_t *count[], ref_visit visit, void *user)
{
    if (places > degree)
        return;
    ref_filling filling = {.places = places};
    spread(&filling, 0, degree, count, visit, user);
}

void ref_list_push(ref_list *list, const ref_mono *mono)
{
    if (list->count == list->room) {
        list->room = 2 * list->room + 64;
        list->items = ref_grow(list->items, list->room, sizeof *list->items);
    }
    list->items[list->count++] = *mono;
}

static int compare_monos(const void *a, const void *b)
{
    return strcmp(((const ref_mono *)a)->s, ((const ref_mono *)b)->s);
}

/* Sorts and sorts out what is there twice. */
void ref_list_sort(ref_list *list)
{
    size_t kept = 0;
    if (list->count > 0)
        qsort(list->items, list->count, sizeof *list->items, compare_monos);
    for (size_t i = 0; i < list->count; i++) {
        if (kept == 0 || strcmp(list->items[kept - 1].s, list->items[i].s) != 0)
            list->items[kept++] = list->items[i];
    }
    list->count = kept;
}

size_t ref_column(const ref_list *basis, const ref_mono *mono)
{
    const ref_mono *found = NULL;
    if (basis->count > 0)
        found = bsearch(mono, basis->items, basis->count, sizeof *mono, compare_monos);
    if (found == NULL)
        ref_die(70, "%s is not in the list of monomials", mono->s);
    return (size_t)(found - basis->items);
}

typedef struct basis_job {
    const ref_pres *pres;
    const ref_list *lower;
    const ref_form *form;
    size_t limit;
    size_t sort_at; /* sort when the list is as long as this */
    bool full;
    ref_list *basis;
} basis_job;

static void visit_basis(void *user, const ref_filling *filling)
{
    basis_job *job = user;
    if (job->full)
        return;
    ref_mono mono = {{job->form->letter}};
    ref_mono canonical = {{0}};
    for (int i = 0; i < filling->places; i++) {
        const ref_mono *arg = &job->lower[filling->size[i]].items[filling->choice[i]];
        ref_append_relabelled(mono.s, arg->s, filling->labels[i]);
    }
    if (ref_canon(job->pres, mono.s, &canonical) == 0)
        ref_die(70, "the multilinear monomial %s is zero", mono.s);
    ref_list_push(job->basis, &canonical);
    if (job->basis->count >= job->sort_at) {
        ref_list_sort(job->basis);
        job->sort_at = 2 * job->basis->count + 4096;
        job->full = job->basis->count > job->limit;
    }
}

/*
 * Lists all monomials of a degree; lower[k] lists those of degree k < degree. Returns false, with
 * an incomplete list, when there are more than `limit`.
 */
bool ref_basis(const ref_pres *pres, int degree, const ref_list *lower, size_t limit,
               ref_list *basis)
{
    *basis = (ref_list){0};
    if (degree == 1) {
        ref_mono leaf = {"a"};
        ref_list_push(basis, &leaf);
        return limit >= 1;
    }
    size_t sizes[REF_DEGREE + 1] = {0};
    const size_t *count[REF_DEGREE];
    for (int k = 1; k < degree; k++)
        sizes[k] = lower[k].count;
    for (int i = 0; i < REF_DEGREE; i++)
        count[i] = sizes;
    basis_job job = {.pres = pres, .lower = lower, .limit = limit, .basis = basis, .sort_at = 4096};
    for (int i = 0; i < pres->operation_count; i++) {
        job.form = pres->operation[i];
        ref_fillings(degree, job.form->arity, count, visit_basis, &job);
    }
    ref_list_sort(basis);
    return !job.full && basis->count <= limit;
}
