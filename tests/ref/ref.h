/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The slow reference program: what its files share.
 *
 * Everything here follows the definitions word for word and shares no code with the library, so
 * that agreement of the two means something. It is a test program: on any trouble it prints one
 * line and exits (2: input, 3: too large).
 *
 * A monomial is a string in prefix form: a capital letter is an operation, followed by its
 * arguments; a small letter is a leaf. "AAabc" is (x1*x2)*x3 for the first operation. No such
 * string is the beginning of another one, so strings compare argument by argument.
 */
#ifndef IDSPAN_TESTS_REF_H
#define IDSPAN_TESTS_REF_H

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

#define REF_ARITY 8   /* most arguments of an operation */
#define REF_DEGREE 26 /* small letters */
#define REF_FORMS 26  /* capital letters: most operations, and most definitions */
#define REF_MONO 52   /* 2 * REF_DEGREE - 1 letters and a NUL */

typedef struct ref_mono {
    char s[REF_MONO];
} ref_mono;

/* Element of a symmetry group: op(a[0], a[1], ...) = sign * op(a[image[0]], a[image[1]], ...) */
typedef struct ref_order {
    int image[REF_ARITY];
    int sign;
} ref_order;

typedef struct ref_group {
    int arity;
    size_t order;
    ref_order *elements; /* owned */
} ref_group;

/* num/den times a monomial; den > 0, lowest terms. */
typedef struct ref_term {
    ref_mono mono;
    int64_t num;
    int64_t den;
} ref_term;

typedef struct ref_poly {
    size_t count;
    size_t room;
    ref_term *terms; /* owned */
} ref_poly;

typedef enum ref_kind { REF_INFIX, REF_FENCE, REF_PREFIX } ref_kind;

/* How an operation or a definition is written, and what it is. */
typedef struct ref_form {
    ref_kind kind;
    char open[32]; /* symbol, opening fence, or name */
    int arity;
    bool defined;    /* a definition: `body` counts; else an operation: `group` counts */
    char letter;     /* capital letter of the operation */
    ref_group group; /* of an operation */
    ref_poly body;   /* of a definition: leaf 'a' + i is argument i */
} ref_form;

/* A linearised identity: integer coefficients, leaves 'a' .. 'a' + degree - 1 once each. */
typedef struct ref_identity {
    int degree;
    int64_t divisor; /* product by which denominators were cleared */
    ref_poly linear;
} ref_identity;

typedef struct ref_pres {
    size_t form_count;
    ref_form forms[2 * REF_FORMS];
    int operation_count;
    ref_form *operation[REF_FORMS]; /* by capital letter, borrowed from forms */
    size_t identity_count;
    ref_identity *identities; /* owned */
} ref_pres;

/* A growing list of monomials. */
typedef struct ref_list {
    size_t count;
    size_t room;
    ref_mono *items; /* owned */
} ref_list;

typedef struct ref_entry {
    size_t column;
    int64_t value;
} ref_entry;

/* A row of the consequence matrix: `count` nonzero entries, columns increasing, first one > 0. */
typedef struct ref_row {
    size_t count;
    ref_entry *entries; /* owned */
} ref_row;

typedef struct ref_rows {
    size_t count;
    size_t room;
    ref_row *rows; /* owned */
} ref_rows;

/* One way to spread the labels over some places and to choose an item for each place. */
typedef struct ref_filling {
    int places;
    int size[REF_DEGREE];                    /* number of labels at each place, at least 1 */
    char labels[REF_DEGREE][REF_DEGREE + 1]; /* the labels at each place, increasing */
    size_t choice[REF_DEGREE];               /* which item at each place */
} ref_filling;

typedef void (*ref_visit)(void *user, const ref_filling *filling);

/* ref_util.c */
_Noreturn void ref_die(int status, const char *format, ...);
void *ref_grow(void *old, size_t count, size_t size);
int64_t ref_add(int64_t a, int64_t b);
int64_t ref_mul(int64_t a, int64_t b);
int64_t ref_gcd(int64_t a, int64_t b);

/* ref_group.c */
void ref_group_close(ref_group *group, int arity, const ref_order *generators, size_t count,
                     const char *place);
void ref_group_full(ref_group *group, int arity, bool alternating);

/* ref_tree.c */
int ref_degree(const char *mono);
const char *ref_skip(const ref_pres *pres, const char *mono);
int ref_canon(const ref_pres *pres, const char *mono, ref_mono *canonical);
void ref_append_relabelled(char *out, const char *mono, const char *labels);
void ref_fillings(int degree, int places, const size_t *count[], ref_visit visit, void *user);
bool ref_basis(const ref_pres *pres, int degree, const ref_list *lower, size_t limit,
               ref_list *basis);
size_t ref_column(const ref_list *basis, const ref_mono *mono);
void ref_list_push(ref_list *list, const ref_mono *mono);
void ref_list_sort(ref_list *list);

/* ref_poly.c */
void ref_poly_push(ref_poly *poly, const char *mono, int64_t num, int64_t den);
void ref_poly_add(ref_poly *sum, const ref_poly *poly, int64_t num, int64_t den);
void ref_poly_collect(ref_poly *poly);
void ref_poly_apply(const ref_pres *pres, const ref_form *form, const ref_poly *args,
                    ref_poly *result);
void ref_linearise(const ref_pres *pres, ref_poly *poly, ref_identity *identity, const char *place);

/* ref_read.c, ref_expr.c */
void ref_read(ref_pres *pres, const char *path);
void ref_free(ref_pres *pres);

/* ref_ideal.c */
void ref_ideal(const ref_pres *pres, int degree, const ref_list *basis, const ref_rows *lower,
               ref_rows *rows);
void ref_rows_free(ref_rows *rows);

/* ref_rank.c; prime 0: over the rational numbers */
size_t ref_rank(const ref_rows *rows, size_t columns, uint64_t prime);

#endif
