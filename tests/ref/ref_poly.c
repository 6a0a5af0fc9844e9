/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Polynomials with rational coefficients, and complete linearisation.
 *
 * The linearisation of a polynomial in which the variable v stands m times in every term: replace
 * the m places of v by m different labels in all m! ways, and add everything up; so for each
 * variable.
 */
#include "ref.h"

#include <ctype.h>
#include <stdlib.h>
#include <string.h>

void ref_poly_push(ref_poly *poly, const char *mono, int64_t num, int64_t den)
{
    if (num == 0)
        return;
    if (poly->count == poly->room) {
        if (poly->room > 4000000)
            ref_die(3, "a polynomial has too many terms");
        poly->room = 2 * poly->room + 16;
        poly->terms = ref_grow(poly->terms, poly->room, sizeof *poly->terms);
    }
    int64_t common = ref_gcd(num, den);
    ref_term *term = &poly->terms[poly->count++];
    *term = (ref_term){.num = num / common, .den = den / common};
    if (strlen(mono) >= sizeof term->mono.s)
        ref_die(3, "a monomial has more than %d leaves", REF_DEGREE);
    strcpy(term->mono.s, mono);
}

void ref_poly_add(ref_poly *sum, const ref_poly *poly, int64_t num, int64_t den)
{
    for (size_t i = 0; i < poly->count; i++) {
        const ref_term *term = &poly->terms[i];
        ref_poly_push(sum, term->mono.s, ref_mul(term->num, num), ref_mul(term->den, den));
    }
}

static int compare_terms(const void *a, const void *b)
{
    return strcmp(((const ref_term *)a)->mono.s, ((const ref_term *)b)->mono.s);
}

/* Adds up terms with the same string and drops those that are zero. */
void ref_poly_collect(ref_poly *poly)
{
    size_t kept = 0;
    if (poly->count > 0)
        qsort(poly->terms, poly->count, sizeof *poly->terms, compare_terms);
    for (size_t i = 0; i < poly->count;) {
        ref_term sum = poly->terms[i];
        for (i++; i < poly->count && compare_terms(&sum, &poly->terms[i]) == 0; i++) {
            const ref_term *next = &poly->terms[i];
            int64_t num = ref_add(ref_mul(sum.num, next->den), ref_mul(next->num, sum.den));
            int64_t den = ref_mul(sum.den, next->den);
            int64_t common = ref_gcd(num, den);
            sum.num = num / common;
            sum.den = den / common;
        }
        if (sum.num != 0)
            poly->terms[kept++] = sum;
    }
    poly->count = kept;
}

/* The operation `letter` with one term of each argument from `place` on; `head` is what stands
   before them. */
static void multiply(const ref_poly *args, int place, int arity, const char *head, int64_t num,
                     int64_t den, ref_poly *result)
{
    if (place == arity) {
        ref_poly_push(result, head, num, den);
        return;
    }
    for (size_t i = 0; i < args[place].count; i++) {
        const ref_term *term = &args[place].terms[i];
        char longer[2 * REF_MONO] = "";
        if (strlen(head) + strlen(term->mono.s) >= REF_MONO)
            ref_die(3, "a monomial has more than %d leaves", REF_DEGREE);
        strcpy(longer, head);
        strcat(longer, term->mono.s);
        multiply(args, place + 1, arity, longer, ref_mul(num, term->num), ref_mul(den, term->den),
                 result);
    }
}

/* The value of a tree over the arguments of a definition. */
static void evaluate(const ref_pres *pres, const char *mono, const ref_poly *args, ref_poly *result)
{
    if (islower((unsigned char)*mono)) {
        ref_poly_add(result, &args[*mono - 'a'], 1, 1);
        return;
    }
    const ref_form *form = pres->operation[*mono - 'A'];
    ref_poly values[REF_ARITY] = {{0}};
    const char *rest = mono + 1;
    for (int i = 0; i < form->arity; i++) {
        evaluate(pres, rest, args, &values[i]);
        rest = ref_skip(pres, rest);
    }
    ref_poly_apply(pres, form, values, result);
    for (int i = 0; i < form->arity; i++)
        free(values[i].terms);
}

/* Adds the value of an operation or a definition at polynomials to `result`. */
void ref_poly_apply(const ref_pres *pres, const ref_form *form, const ref_poly *args,
                    ref_poly *result)
{
    if (!form->defined) {
        const char head[2] = {form->letter, '\0'};
        multiply(args, 0, form->arity, head, 1, 1, result);
        return;
    }
    for (size_t i = 0; i < form->body.count; i++) {
        const ref_term *term = &form->body.terms[i];
        ref_poly value = {0};
        evaluate(pres, term->mono.s, args, &value);
        ref_poly_add(result, &value, term->num, term->den);
        free(value.terms);
    }
}

static void count_letters(const char *mono, int times[REF_DEGREE])
{
    memset(times, 0, REF_DEGREE * sizeof *times);
    for (; *mono != '\0'; mono++) {
        if (islower((unsigned char)*mono))
            times[*mono - 'a']++;
    }
}

/* From position `at` on, gives each leaf of variable v any unused label of those that belong to
   v: first[v] .. first[v] + times[v] - 1. */
static void assign(const ref_pres *pres, char *mono, size_t at, const int *first, const int *times,
                   bool *used, int64_t value, ref_poly *linear)
{
    while (isupper((unsigned char)mono[at]))
        at++;
    if (mono[at] == '\0') {
        ref_mono canonical = {{0}};
        int sign = ref_canon(pres, mono, &canonical);
        ref_poly_push(linear, canonical.s, sign * value, 1);
        return;
    }
    char variable = mono[at];
    int v = variable - 'a';
    for (int label = first[v]; label < first[v] + times[v]; label++) {
        if (used[label])
            continue;
        used[label] = true;
        mono[at] = (char)('a' + label);
        assign(pres, mono, at + 1, first, times, used, value, linear);
        used[label] = false;
    }
    mono[at] = variable;
}

/* Collects `poly`, clears denominators and linearises; degree 0 when nothing is left. */
void ref_linearise(const ref_pres *pres, ref_poly *poly, ref_identity *identity, const char *place)
{
    int times[REF_DEGREE];
    int other[REF_DEGREE];
    int first[REF_DEGREE] = {0};
    bool used[REF_DEGREE] = {false};
    *identity = (ref_identity){.divisor = 1};
    ref_poly_collect(poly);
    if (poly->count == 0)
        return;
    count_letters(poly->terms[0].mono.s, times);
    for (size_t i = 0; i < poly->count; i++) {
        int64_t den = poly->terms[i].den;
        count_letters(poly->terms[i].mono.s, other);
        if (memcmp(times, other, sizeof times) != 0)
            ref_die(2, "%s: the identity is not homogeneous", place);
        identity->divisor = ref_mul(identity->divisor, den / ref_gcd(identity->divisor, den));
    }
    identity->degree = ref_degree(poly->terms[0].mono.s);
    for (int v = 1; v < REF_DEGREE; v++)
        first[v] = first[v - 1] + times[v - 1];
    for (size_t i = 0; i < poly->count; i++) {
        const ref_term *term = &poly->terms[i];
        ref_mono mono = term->mono;
        int64_t value = ref_mul(term->num, identity->divisor / term->den);
        assign(pres, mono.s, 0, first, times, used, value, &identity->linear);
    }
    ref_poly_collect(&identity->linear);
}
