/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * All consequences of the laws in the monomials of a degree n.
 *
 * A consequence is a law f(x1, ..., xd) with monomials m1, ..., md put in, on a set S of k labels
 * together, as one leaf of a further monomial, the context, whose other leaves are the n - k
 * labels that are left. So a row is given by
 *
 *     law, k             and a tuple of degrees for m1, ..., md, descending within a class
 *     S                  one of the subsets of 1 .. n with k elements
 *     distribution       of S to m1, ..., md, equal degrees of a class by least labels
 *     m1, ..., md        canonical monomials of their degrees
 *     context            a canonical monomial of degree n - k + 1, whose last label is the hole
 *
 * Different terms of a law stay different: the monomials and the hole can be cut out of a term
 * again, since each is the only subtree with its set of labels. So each row has as many entries
 * as its law has terms, and rows and entries can be counted without making them.
 */
#include <stdlib.h>
#include <string.h>

#include "normal_private.h"

/* An entry of a row. */
typedef struct term {
    uint64_t column;
    size_t number; /* of the term in the law */
    bool negative;
} term;

/* One law with everything that the loops have fixed so far. */
typedef struct walk {
    const idsi_plain *plain;
    idsi_market *market; /* NULL: only count */
    const idsi_law *law;
    char **value; /* coefficient of each term in decimal digits, without sign */
    uint32_t k;
    idsi_split split;
    uint64_t inner; /* the set S */
    uint64_t sets[IDSI_SPLIT_MAX];
    uint64_t number[IDSI_SPLIT_MAX]; /* of each monomial in its basis */
    idsi_token mono[IDSI_SPLIT_MAX][IDSI_MAX_TOKENS];
    size_t mono_length[IDSI_SPLIT_MAX];
    idsi_token context[IDSI_MAX_TOKENS];
    size_t context_length;
    term *terms; /* of the row at work */
    uint64_t rows;
    uint64_t entries;
} walk;

/* ---- one row --------------------------------------------------------------------------------- */

/* The i-th smallest label of a set, i from 0. */
static idsi_token nth_label(uint64_t set, uint32_t i)
{
    for (; i > 0; i--) {
        set &= set - 1;
    }
    return (idsi_token)__builtin_ctzll(set) + 1;
}

/* Tokens of a basis monomial on a set of labels; a label beyond the set is the hole, 0. */
static ids_status take_monomial(const ids_basis *basis, uint64_t index, uint64_t set,
                                idsi_token *tree, size_t *length)
{
    ids_status st = IDS_OK;
    int32_t code[IDSI_MAX_TOKENS];
    uint32_t size = (uint32_t)__builtin_popcountll(set);

    IDSI_TRY(ids_basis_unrank_code(basis, index, code, IDSI_MAX_TOKENS, length));
    for (size_t i = 0; i < *length; i++) {
        if (code[i] < 0) {
            tree[i] = idsi_node((uint32_t)(-1 - code[i]));
        } else {
            tree[i] = (uint32_t)code[i] > size ? 0 : nth_label(set, (uint32_t)code[i] - 1);
        }
    }
done:
    return st;
}

/* A term of the law with the monomials put in, inside of the context. */
static size_t write_tree(const walk *w, size_t t, idsi_token *tree)
{
    const idsi_poly *poly = w->law->poly;
    size_t length = 0;

    for (size_t i = 0; i < w->context_length; i++) {
        if (w->context[i] != 0) {
            tree[length++] = w->context[i];
            continue;
        }
        for (size_t j = poly->start[t]; j < poly->start[t + 1]; j++) {
            idsi_token token = poly->tokens[j];
            if (idsi_is_node(token)) {
                tree[length++] = token;
            } else {
                memcpy(tree + length, w->mono[token - 1], w->mono_length[token - 1] * sizeof *tree);
                length += w->mono_length[token - 1];
            }
        }
    }
    return length;
}

static int compare_terms(const void *a, const void *b)
{
    const term *x = a;
    const term *y = b;
    return (x->column > y->column) - (x->column < y->column);
}

static ids_status write_row(walk *w)
{
    ids_status st = IDS_OK;
    const idsi_poly *poly = w->law->poly;
    const idsi_plain *plain = w->plain;

    for (size_t t = 0; t < poly->count; t++) {
        idsi_token tree[IDSI_MAX_TOKENS];
        int32_t code[IDSI_MAX_TOKENS];
        size_t length = write_tree(w, t, tree);
        int sign = idsi_tree_canonicalize(plain->laws->pres->sig, tree, length);
        for (size_t i = 0; i < length; i++) {
            code[i] =
                idsi_is_node(tree[i]) ? -1 - (int32_t)idsi_node_op(tree[i]) : (int32_t)tree[i];
        }
        w->terms[t].number = t;
        w->terms[t].negative = (mpq_sgn(poly->coefficients[t]) < 0) != (sign < 0);
        IDSI_TRY(
            ids_basis_rank_code(plain->basis[plain->degree], code, length, &w->terms[t].column));
    }
    qsort(w->terms, poly->count, sizeof *w->terms, compare_terms);
    w->rows++;
    for (size_t t = 0; t < poly->count; t++) {
        const term *entry = &w->terms[t];
        IDSI_TRY(idsi_text_printf(&w->market->text, "%llu %llu %s%s\n", (unsigned long long)w->rows,
                                  (unsigned long long)entry->column + 1, entry->negative ? "-" : "",
                                  w->value[entry->number]));
        IDSI_TRY(idsi_market_flush(w->market, false));
    }
done:
    return st;
}

/* ---- loops ----------------------------------------------------------------------------------- */

static ids_status each_context(walk *w)
{
    ids_status st = IDS_OK;
    const idsi_plain *plain = w->plain;
    const ids_basis *basis = plain->basis[plain->degree - w->k + 1];
    uint64_t all = idsi_labels_all(plain->degree);

    for (uint64_t c = 0; c < ids_basis_size(basis); c++) {
        IDSI_TRY(take_monomial(basis, c, all & ~w->inner, w->context, &w->context_length));
        IDSI_TRY(write_row(w));
    }
done:
    return st;
}

/* All tuples of monomials on the label sets at hand. */
static ids_status each_tuple(walk *w)
{
    ids_status st = IDS_OK;
    uint32_t degree = w->law->degree;
    ids_progress progress = {
        .stage = "rows", .degree = w->plain->degree, .done = w->rows, .total = w->plain->rows};

    memset(w->number, 0, sizeof w->number);
    IDSI_TRY(idsi_poll(w->plain->ctx, &progress));
    for (;;) {
        for (uint32_t v = 0; v < degree; v++) {
            IDSI_TRY(take_monomial(w->plain->basis[w->split.size[v]], w->number[v], w->sets[v],
                                   w->mono[v], &w->mono_length[v]));
        }
        IDSI_TRY(each_context(w));
        uint32_t v = degree;
        while (v > 0) {
            v--;
            w->number[v]++;
            if (w->number[v] < ids_basis_size(w->plain->basis[w->split.size[v]])) {
                break;
            }
            w->number[v] = 0;
            if (v == 0) {
                return IDS_OK;
            }
        }
    }
done:
    return st;
}

static ids_status each_set(walk *w)
{
    ids_status st = IDS_OK;
    uint32_t degree = w->plain->degree;
    uint64_t all = idsi_labels_all(degree);

    for (uint64_t s = 0; s < idsi_binomial(degree, w->k); s++) {
        w->inner = idsi_subset_unrank(all, w->k, s);
        for (uint64_t rank = 0; rank < w->split.ways; rank++) {
            idsi_split_unrank(&w->split, w->inner, rank, w->sets);
            IDSI_TRY(each_tuple(w));
        }
    }
done:
    return st;
}

/* The degrees are chosen: counts the rows that they give, and writes them. */
static ids_status take_degrees(walk *w)
{
    const idsi_plain *plain = w->plain;
    uint64_t rows = ids_basis_size(plain->basis[plain->degree - w->k + 1]);
    uint64_t entries = 0;

    idsi_split_prepare(&w->split);
    bool fits = w->split.ways != 0 && idsi_mul_u64(rows, w->split.ways, &rows) &&
                idsi_mul_u64(rows, idsi_binomial(plain->degree, w->k), &rows);
    for (uint32_t v = 0; v < w->law->degree; v++) {
        uint64_t size = ids_basis_size(plain->basis[w->split.size[v]]);
        fits = fits && idsi_mul_u64(rows, size, &rows);
    }
    if (w->market != NULL) {
        return rows == 0 ? IDS_OK : each_set(w);
    }
    if (!fits || !idsi_mul_u64(rows, w->law->poly->count, &entries) ||
        !idsi_add_u64(w->rows, rows, &w->rows) || !idsi_add_u64(w->entries, entries, &w->entries)) {
        return idsi_fail(plain->ctx, IDS_ERR_LIMIT,
                         "degree %u has more consequences than 64 bits can count", plain->degree);
    }
    return IDS_OK;
}

/* Chooses the degrees of the variables from `place` on, descending within a class. */
static ids_status each_degrees(walk *w, uint32_t place, uint32_t left)
{
    ids_status st = IDS_OK;
    uint32_t places = w->law->degree - place;
    int8_t before = -1;

    if (places == 0) {
        return left == 0 ? take_degrees(w) : IDS_OK;
    }
    for (uint32_t v = 0; v < place; v++) {
        if (w->law->class_of[v] == w->law->class_of[place]) {
            before = (int8_t)v;
        }
    }
    uint32_t most = left - (places - 1);
    if (before >= 0 && w->split.size[before] < most) {
        most = w->split.size[before];
    }
    for (uint32_t degree = most; degree > 0; degree--) {
        bool tied = before >= 0 && w->split.size[before] == degree;
        w->split.size[place] = (uint8_t)degree;
        w->split.parent[place] = (int8_t)(tied ? before : -1);
        IDSI_TRY(each_degrees(w, place + 1, left - degree));
    }
done:
    return st;
}

/* Coefficients as text; they are integers. */
static ids_status write_values(walk *w)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = w->plain->ctx;
    const idsi_poly *poly = w->law->poly;

    IDSI_TRY(idsi_alloc_array(ctx, poly->count, sizeof *w->value, &w->value));
    IDSI_TRY(idsi_alloc_array(ctx, poly->count, sizeof *w->terms, &w->terms));
    for (size_t t = 0; t < poly->count; t++) {
        mpz_srcptr number = mpq_numref(poly->coefficients[t]);
        void *block = NULL;
        IDSI_TRY(idsi_alloc(ctx, mpz_sizeinbase(number, 10) + 2, &block));
        w->value[t] = block;
        mpz_get_str(block, 10, number);
        if (w->value[t][0] == '-') {
            memmove(w->value[t], w->value[t] + 1, strlen(w->value[t]));
        }
    }
done:
    return st;
}

static void clear_values(walk *w)
{
    for (size_t t = 0; w->value != NULL && t < w->law->poly->count; t++) {
        idsi_free(w->plain->ctx, w->value[t]);
    }
    idsi_free(w->plain->ctx, w->value);
    idsi_free(w->plain->ctx, w->terms);
    w->value = NULL;
    w->terms = NULL;
}

static ids_status each_law(walk *w)
{
    ids_status st = IDS_OK;
    const idsi_plain *plain = w->plain;

    for (size_t i = 0; i < plain->laws->count; i++) {
        w->law = &plain->laws->law[i];
        if (w->market != NULL) {
            IDSI_TRY(write_values(w));
        }
        w->split.count = w->law->degree;
        for (w->k = w->law->degree; w->k <= plain->degree; w->k++) {
            IDSI_TRY(each_degrees(w, 0, w->k));
        }
        clear_values(w);
    }
done:
    clear_values(w);
    return st;
}

/* ---- all of it ------------------------------------------------------------------------------- */

ids_status idsi_plain_init(idsi_plain *plain, ids_ctx *ctx, const idsi_laws *laws, uint32_t degree)
{
    ids_status st = IDS_OK;
    walk *w = NULL;

    *plain = (idsi_plain){.ctx = ctx, .laws = laws, .degree = degree};
    IDSI_TRY(ids_types_create(ctx, laws->pres->sig, degree, &plain->types));
    for (uint32_t d = 1; d <= degree; d++) {
        IDSI_TRY(ids_basis_create(ctx, plain->types, d, &plain->basis[d]));
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *w, &w));
    w->plain = plain;
    IDSI_TRY(each_law(w));
    plain->rows = w->rows;
    plain->entries = w->entries;
done:
    idsi_free(ctx, w);
    return st;
}

void idsi_plain_clear(idsi_plain *plain)
{
    for (uint32_t d = 1; d <= plain->degree; d++) {
        ids_basis_free(plain->basis[d]);
    }
    ids_types_free(plain->types);
    memset(plain, 0, sizeof *plain);
}

ids_status idsi_plain_write(const idsi_plain *plain, idsi_market *market)
{
    ids_status st = IDS_OK;
    walk *w = NULL;

    IDSI_TRY(idsi_alloc_array(plain->ctx, 1, sizeof *w, &w));
    w->plain = plain;
    w->market = market;
    IDSI_TRY(each_law(w));
done:
    idsi_free(plain->ctx, w);
    return st;
}
