/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan-ref: dimensions of an ideal of identities, slowly, from the definitions.
 *
 *   idspan-ref FILE.pres N [--prime P | --exact] [--limit M]
 *       degree,free,consequences,quotient for the degrees 1 .. N; stops before the first degree
 *       with more than M monomials
 *   idspan-ref FILE.pres --types N    association types of degree N with automorphism orders
 *   idspan-ref FILE.pres --basis N    number of monomials of each degree 1 .. N
 *   idspan-ref FILE.pres --group      symmetry groups
 *
 * The default prime is 2^31 - 1 (the eighth Mersenne prime).
 */
#include "ref.h"

#include <ctype.h>
#include <errno.h>
#include <flint/flint.h>
#include <flint/ulong_extras.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

typedef struct options {
    const char *path;
    uint64_t degree;
    uint64_t types;
    uint64_t basis;
    uint64_t limit;
    uint64_t prime;
    bool exact;
    bool group;
} options;

/* The bases and ideals of the degrees computed so far. */
typedef struct tables {
    ref_list basis[REF_DEGREE + 1];
    ref_rows ideal[REF_DEGREE + 1];
} tables;

static void tables_free(tables *all)
{
    for (int k = 0; k <= REF_DEGREE; k++) {
        free(all->basis[k].items);
        ref_rows_free(&all->ideal[k]);
    }
}

static uint64_t number(const char *text, uint64_t most)
{
    char *end = NULL;
    errno = 0;
    unsigned long long value = text == NULL ? 0 : strtoull(text, &end, 10);
    if (text == NULL || !isdigit((unsigned char)*text) || *end != '\0' || errno != 0 ||
        value > most)
        ref_die(2, "%s is not a number up to %llu", text == NULL ? "(nothing)" : text,
                (unsigned long long)most);
    return value;
}

static void read_options(options *opts, int argc, char **argv)
{
    *opts = (options){.limit = SIZE_MAX, .prime = 2147483647u};
    for (int i = 1; i < argc; i++) {
        const char *arg = argv[i];
        const char *value = argv[i + 1];
        if (strcmp(arg, "--exact") == 0)
            opts->exact = true;
        else if (strcmp(arg, "--group") == 0)
            opts->group = true;
        else if (strcmp(arg, "--prime") == 0 && ++i)
            opts->prime = number(value, (uint64_t)1 << 63);
        else if (strcmp(arg, "--limit") == 0 && ++i)
            opts->limit = number(value, SIZE_MAX);
        else if (strcmp(arg, "--types") == 0 && ++i)
            opts->types = number(value, REF_DEGREE);
        else if (strcmp(arg, "--basis") == 0 && ++i)
            opts->basis = number(value, REF_DEGREE);
        else if (opts->path == NULL)
            opts->path = arg;
        else
            opts->degree = number(arg, REF_DEGREE);
    }
    if (opts->path == NULL || (!opts->group && !opts->degree && !opts->types && !opts->basis))
        ref_die(2, "usage: idspan-ref FILE.pres N [--prime P | --exact] [--limit M]\n"
                   "       idspan-ref FILE.pres --types N | --basis N | --group");
    if (!n_is_prime(opts->prime))
        ref_die(2, "%llu is not a prime", (unsigned long long)opts->prime);
}

static void print_rank(const ref_pres *pres, const options *opts, tables *all)
{
    uint64_t prime = opts->exact ? 0 : opts->prime;
    for (size_t i = 0; i < pres->identity_count; i++) {
        if (prime != 0 && (uint64_t)pres->identities[i].divisor % prime == 0)
            ref_die(2, "the prime divides a denominator");
    }
    puts("degree,free,consequences,quotient");
    for (int n = 1; n <= (int)opts->degree; n++) {
        ref_list *basis = &all->basis[n];
        if (!ref_basis(pres, n, all->basis, opts->limit, basis))
            return;
        ref_ideal(pres, n, all->basis, all->ideal, &all->ideal[n]);
        size_t rank = ref_rank(&all->ideal[n], basis->count, prime);
        printf("%d,%zu,%zu,%zu\n", n, basis->count, rank, basis->count - rank);
        fflush(stdout);
    }
}

/* A type in the notation of its file with x at every leaf; returns what follows it. */
static const char *print_type(const ref_pres *pres, const char *type, bool inside)
{
    if (islower((unsigned char)*type)) {
        putchar('x');
        return type + 1;
    }
    const ref_form *form = pres->operation[*type++ - 'A'];
    if (form->kind == REF_INFIX) {
        const char *blank = isalpha((unsigned char)form->open[0]) ? " " : "";
        fputs(inside ? "(" : "", stdout);
        type = print_type(pres, type, true);
        printf("%s%s%s", blank, form->open, blank);
        type = print_type(pres, type, true);
        fputs(inside ? ")" : "", stdout);
        return type;
    }
    printf("%s%s", form->open, form->kind == REF_PREFIX ? "(" : "");
    for (int i = 0; i < form->arity; i++) {
        fputs(i > 0 ? "," : "", stdout);
        type = print_type(pres, type, false);
    }
    switch (form->kind == REF_PREFIX ? '(' : form->open[0]) {
    case '(':
        putchar(')');
        break;
    case '[':
        putchar(']');
        break;
    case '{':
        putchar('}');
        break;
    default:
        putchar('>');
    }
    return type;
}

static uint64_t factorial(int n)
{
    int64_t product = 1;
    for (int i = 2; i <= n; i++)
        product = ref_mul(product, i);
    return (uint64_t)product;
}

/* The types are the canonical forms of the monomials with all labels made equal; the monomials of
   a type are one orbit of the symmetric group, so its stabiliser has order n! / their number. */
static void print_types(const ref_pres *pres, int degree, const ref_list *basis)
{
    ref_list types = {0};
    ref_list different = {0};
    for (size_t i = 0; i < basis->count; i++) {
        ref_mono type = basis->items[i];
        ref_mono canonical = {{0}};
        for (char *c = type.s; *c != '\0'; c++)
            *c = islower((unsigned char)*c) ? 'a' : *c;
        ref_canon(pres, type.s, &canonical);
        ref_list_push(&types, &canonical);
        ref_list_push(&different, &canonical);
    }
    ref_list_sort(&different);
    puts("degree,index,type,automorphisms,monomials");
    for (size_t i = 0; i < different.count; i++) {
        uint64_t count = 0;
        for (size_t j = 0; j < types.count; j++)
            count += strcmp(types.items[j].s, different.items[i].s) == 0;
        printf("%d,%zu,\"", degree, i);
        print_type(pres, different.items[i].s, false);
        printf("\",%llu,%llu\n", (unsigned long long)(factorial(degree) / count),
               (unsigned long long)count);
    }
    free(types.items);
    free(different.items);
}

static void print_basis(const ref_pres *pres, const options *opts, tables *all)
{
    puts("degree,monomials");
    for (int n = 1; n <= (int)opts->basis; n++) {
        if (!ref_basis(pres, n, all->basis, opts->limit, &all->basis[n]))
            return;
        printf("%d,%zu\n", n, all->basis[n].count);
    }
}

static void print_groups(const ref_pres *pres)
{
    puts("operation,arity,order,positive");
    for (int i = 0; i < pres->operation_count; i++) {
        const ref_group *group = &pres->operation[i]->group;
        size_t positive = 0;
        for (size_t g = 0; g < group->order; g++)
            positive += group->elements[g].sign > 0;
        printf("%s,%d,%zu,%zu\n", pres->operation[i]->open, group->arity, group->order, positive);
    }
}

int main(int argc, char **argv)
{
    static ref_pres pres;
    static tables all;
    options opts;
    read_options(&opts, argc, argv);
    ref_read(&pres, opts.path);
    if (opts.group)
        print_groups(&pres);
    if (opts.basis > 0)
        print_basis(&pres, &opts, &all);
    if (opts.types > 0) {
        for (int n = 1; n <= (int)opts.types; n++) {
            free(all.basis[n].items);
            if (!ref_basis(&pres, n, all.basis, SIZE_MAX, &all.basis[n]))
                ref_die(3, "too many monomials");
        }
        print_types(&pres, (int)opts.types, &all.basis[opts.types]);
    }
    if (opts.degree > 0 && opts.types == 0 && opts.basis == 0)
        print_rank(&pres, &opts, &all);
    tables_free(&all);
    ref_free(&pres);
    flint_cleanup();
    return 0;
}
