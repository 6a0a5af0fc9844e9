/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * From a functional to a nilpotent algebra.
 *
 * Let w be a functional on the monomials of one content (x1 as often as in the candidate, ...) that
 * vanishes on all consequences and not on the candidate. In the free algebra, let J be spanned by
 * the elements u of one content with w(C[u]) = 0 for all contexts C that complete it, and by all
 * monomials that no context completes. J is the largest homogeneous ideal on which w vanishes; it
 * contains all consequences. So the identities hold in F/J, and the candidate does not, at the
 * generators: only the values of w count, and F/J is as small as an algebra with them can be. The
 * same construction makes a Frobenius algebra of a form in the commutative associative case
 * (F. S. Macaulay's inverse systems).
 *
 * Content by content, an element is known by its row: the values w(C[u]). Products of basis
 * elements of smaller contents span; their rows are eliminated, and those that are independent
 * become basis elements. Then each basis element is scaled by the content of what it occurs with,
 * so that the constants are integers. All of this is mod a prime, with coefficients lifted to
 * fractions: whether the result is right is tested later.
 */
#include <stdlib.h>
#include <string.h>

#include "counterexample_private.h"

typedef struct element {
    uint32_t content;
    size_t length;
    idsi_token tree[2u * IDSI_MAX_IDENTITY_DEGREE];
} element;

/* A product and one of its coordinates, with respect to basis elements that are monomials. */
typedef struct coordinate {
    uint32_t op;
    uint8_t argument[IDS_MAX_ARITY];
    uint8_t result;
    uint32_t value;
} coordinate;

/* A reduced row of the content at work; combination[i] of basis element first + i. */
typedef struct pivot_row {
    size_t pivot;
    uint32_t *row;
    uint32_t *combination;
} pivot_row;

typedef struct builder {
    ids_ctx *ctx;
    idsi_hunt *hunt;
    const idsi_component *c;
    uint32_t prime;
    const uint32_t *value;
    bool failed; /* too large */
    uint32_t count;
    element *elements; /* room for most_dimension */
    size_t coordinate_count;
    size_t coordinate_capacity;
    coordinate *coordinates;
    /* the content at work */
    const idsi_forest *contexts;
    uint32_t first; /* its first basis element */
    size_t row_count;
    pivot_row *rows; /* room for most_dimension */
    uint32_t *row;
    uint32_t *combination;
    uint8_t argument[IDS_MAX_ARITY];
} builder;

/* ---- rows ------------------------------------------------------------------------------------ */

/* The row of a canonical tree; false when it is 0. */
static bool make_row(builder *b, const idsi_token *tree, size_t length)
{
    const idsi_component *c = b->c;
    bool any = false;

    for (size_t k = 0; k < b->contexts->count; k++) {
        const idsi_planted at = b->contexts->list[k];
        const idsi_token *context = b->contexts->tokens + at.start;
        idsi_token whole[IDSI_MAX_TOKENS];
        size_t used = 0;
        for (size_t i = 0; i < at.length; i++) {
            if (idsi_is_node(context[i]) || context[i] <= c->variables) {
                whole[used++] = context[i];
            } else {
                memcpy(whole + used, tree, length * sizeof *tree);
                used += length;
            }
        }
        const int sign = idsi_tree_canonicalize(c->sig, whole, used);
        uint32_t value = sign == 0 ? 0 : b->value[idsi_component_find(c, whole)];
        b->row[k] = sign < 0 ? idsi_mod_neg(value, b->prime) : value;
        any = any || value != 0;
    }
    return any;
}

/* Takes the rows of the content off the row; its coordinates so far go to combination. */
static void reduce_row(builder *b)
{
    const uint32_t p = b->prime;

    memset(b->combination, 0, b->hunt->most_dimension * sizeof *b->combination);
    for (size_t i = 0; i < b->row_count; i++) {
        const pivot_row *by = &b->rows[i];
        const uint32_t factor = b->row[by->pivot];
        if (factor == 0) {
            continue;
        }
        const uint32_t minus = idsi_mod_neg(factor, p);
        for (size_t k = 0; k < b->contexts->count; k++) {
            b->row[k] = (uint32_t)((b->row[k] + (uint64_t)minus * by->row[k]) % p);
        }
        for (size_t k = 0; k < b->row_count; k++) {
            b->combination[k] =
                (uint32_t)((b->combination[k] + (uint64_t)factor * by->combination[k]) % p);
        }
    }
}

/* Keeps the reduced row, which is not 0, as that of the basis element that is added now. */
static ids_status keep_row(builder *b, size_t pivot)
{
    ids_status st = IDS_OK;
    const uint32_t p = b->prime;
    pivot_row *next = &b->rows[b->row_count];
    const uint32_t inverse = idsi_mod_inverse(b->row[pivot], p);

    next->pivot = pivot;
    IDSI_TRY(idsi_alloc_array(b->ctx, b->contexts->count, sizeof *next->row, &next->row));
    IDSI_TRY(idsi_alloc_array(b->ctx, b->hunt->most_dimension, sizeof *next->combination,
                              &next->combination));
    /* row = new element - combination of the earlier ones */
    for (size_t k = 0; k < b->contexts->count; k++) {
        next->row[k] = idsi_mod_mul(b->row[k], inverse, p);
    }
    for (size_t k = 0; k < b->row_count; k++) {
        next->combination[k] = idsi_mod_neg(idsi_mod_mul(b->combination[k], inverse, p), p);
    }
    next->combination[b->row_count] = inverse;
    b->row_count++;
done:
    return st;
}

static void clear_rows(builder *b)
{
    for (size_t i = 0; b->rows != NULL && i < b->hunt->most_dimension; i++) {
        idsi_free(b->ctx, b->rows[i].row);
        idsi_free(b->ctx, b->rows[i].combination);
        b->rows[i] = (pivot_row){0};
    }
    b->row_count = 0;
}

/* ---- elements -------------------------------------------------------------------------------- */

static ids_status add_coordinate(builder *b, uint32_t op, uint32_t result, uint32_t value, int sign)
{
    ids_status st = IDS_OK;

    if (value == 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_grow(b->ctx, b->coordinate_count, &b->coordinate_capacity, sizeof *b->coordinates,
                       &b->coordinates));
    coordinate *next = &b->coordinates[b->coordinate_count++];
    *next = (coordinate){.op = op,
                         .result = (uint8_t)result,
                         .value = sign < 0 ? idsi_mod_neg(value, b->prime) : value};
    memcpy(next->argument, b->argument, sizeof next->argument);
done:
    return st;
}

/* The element of a tree of the content at work: a new one, or a combination. `op` is UINT32_MAX
 * for a generator. */
static ids_status settle(builder *b, uint32_t content, uint32_t op, const idsi_token *tree,
                         size_t length, int sign)
{
    ids_status st = IDS_OK;
    size_t pivot = 0;

    IDSI_TRY(idsi_poll(b->ctx, NULL));
    b->failed = b->failed || !idsi_hunt_step(b->hunt, b->contexts->count + 1);
    if (b->failed || !make_row(b, tree, length)) {
        return IDS_OK;
    }
    reduce_row(b);
    while (pivot < b->contexts->count && b->row[pivot] == 0) {
        pivot++;
    }
    if (pivot == b->contexts->count) {
        for (uint32_t k = 0; k < b->row_count; k++) {
            IDSI_TRY(add_coordinate(b, op, b->first + k, b->combination[k], sign));
        }
        return IDS_OK;
    }
    if (b->count == b->hunt->most_dimension) {
        b->failed = true;
        return IDS_OK;
    }
    IDSI_TRY(keep_row(b, pivot));
    element *next = &b->elements[b->count];
    *next = (element){.content = content, .length = length};
    memcpy(next->tree, tree, length * sizeof *tree);
    b->count++;
    if (op != UINT32_MAX) {
        st = add_coordinate(b, op, b->count - 1, 1, sign);
    }
done:
    return st;
}

/* Products with arguments from `place` on, of content `rest` together. */
static ids_status multiply(builder *b, uint32_t content, uint32_t op, uint32_t place, uint32_t rest)
{
    ids_status st = IDS_OK;
    const idsi_group *group = &b->c->sig->ops[op].group;
    const bool ordered =
        group->symmetry == IDS_SYMMETRY_COMMUTATIVE || group->symmetry == IDS_SYMMETRY_ALTERNATING;
    idsi_token tree[IDSI_MAX_TOKENS];
    size_t used = 1;

    if (place == group->arity) {
        if (rest != 0) {
            return IDS_OK;
        }
        tree[0] = idsi_node(op);
        for (uint32_t i = 0; i < group->arity; i++) {
            const element *e = &b->elements[b->argument[i]];
            memcpy(tree + used, e->tree, e->length * sizeof *tree);
            used += e->length;
        }
        const int sign = idsi_tree_canonicalize(b->c->sig, tree, used);
        return sign == 0 ? IDS_OK : settle(b, content, op, tree, used, sign);
    }
    /* Elements of the content at work, too large by themselves, stand behind b->first. */
    for (uint32_t i = ordered && place > 0 ? b->argument[place - 1] : 0; i < b->first; i++) {
        if (b->failed) {
            return IDS_OK;
        }
        if (idsi_content_within(b->c, b->elements[i].content, rest)) {
            b->argument[place] = (uint8_t)i;
            IDSI_TRY(multiply(b, content, op, place + 1, rest - b->elements[i].content));
        }
    }
done:
    return st;
}

static ids_status build_content(builder *b, uint32_t content)
{
    ids_status st = IDS_OK;
    const idsi_component *c = b->c;

    b->contexts = &c->trees[c->top - content + c->stride[c->variables]];
    b->first = b->count;
    IDSI_TRY(idsi_alloc_array(b->ctx, b->contexts->count, sizeof *b->row, &b->row));
    memset(b->argument, 0, sizeof b->argument);
    if (idsi_content_degree(c, content) == 1) {
        const idsi_forest *leaf = &c->trees[content];
        IDSI_TRY(settle(b, content, UINT32_MAX, leaf->tokens, 1, 1));
        goto done;
    }
    for (uint32_t op = 0; op < c->sig->count; op++) {
        memset(b->argument, 0, sizeof b->argument);
        IDSI_TRY(multiply(b, content, op, 0, content));
    }
done:
    idsi_free(b->ctx, b->row);
    b->row = NULL;
    clear_rows(b);
    return st;
}

/* ---- constants ------------------------------------------------------------------------------- */

/* gcd of two fractions: the largest of which both are integer multiples. */
static void join_gcd(mpq_ptr gcd, mpq_srcptr other)
{
    mpz_t denominator;

    mpz_init(denominator);
    if (mpq_sgn(gcd) == 0) {
        mpq_abs(gcd, other);
    } else {
        mpz_lcm(denominator, mpq_denref(gcd), mpq_denref(other));
        mpz_divexact(mpq_denref(gcd), denominator, mpq_denref(gcd));
        mpz_mul(mpq_numref(gcd), mpq_numref(gcd), mpq_denref(gcd));
        mpz_divexact(mpq_denref(gcd), denominator, mpq_denref(other));
        mpz_mul(mpq_denref(gcd), mpq_denref(gcd), mpq_numref(other));
        mpz_gcd(mpq_numref(gcd), mpq_numref(gcd), mpq_denref(gcd));
        mpz_set(mpq_denref(gcd), denominator);
        mpq_canonicalize(gcd);
    }
    mpz_clear(denominator);
}

/* The coefficient of a coordinate when its arguments are scaled; false when it is no fraction. */
static bool scaled(const builder *b, const coordinate *at, mpq_t *scale, mpq_ptr out)
{
    mpz_t residue;
    mpz_t modulus;
    const uint32_t arity = b->c->sig->ops[at->op].arity;

    mpz_init_set_ui(residue, at->value);
    mpz_init_set_ui(modulus, b->prime);
    const bool good = idsi_border_reconstruct(out, residue, modulus);
    for (uint32_t i = 0; good && i < arity; i++) {
        mpq_mul(out, out, scale[at->argument[i]]);
    }
    mpz_clear(residue);
    mpz_clear(modulus);
    return good;
}

/* Chooses scale[k], from the smaller elements to the larger ones. */
static bool choose_scales(const builder *b, mpq_t *scale)
{
    mpq_t value;
    bool good = true;

    mpq_init(value);
    for (uint32_t k = 0; good && k < b->count; k++) {
        mpq_set_ui(scale[k], 0, 1);
        for (size_t i = 0; good && i < b->coordinate_count; i++) {
            if (b->coordinates[i].result == k) {
                good = scaled(b, &b->coordinates[i], scale, value);
                if (good) {
                    join_gcd(scale[k], value);
                }
            }
        }
        if (mpq_sgn(scale[k]) == 0) {
            mpq_set_ui(scale[k], 1, 1);
        }
    }
    mpq_clear(value);
    return good;
}

static ids_status make_algebra(const builder *b, ids_constant *list, mpq_t *scale,
                               ids_algebra **algebra)
{
    ids_status st = IDS_OK;
    bool good = choose_scales(b, scale);
    mpq_t value;

    mpq_init(value);
    for (size_t i = 0; good && i < b->coordinate_count; i++) {
        const coordinate *at = &b->coordinates[i];
        good = scaled(b, at, scale, value);
        mpq_div(value, value, scale[at->result]);
        good = good && mpz_cmpabs_ui(mpq_numref(value), b->hunt->most_entry) <= 0 &&
               mpz_cmp_ui(mpq_denref(value), b->hunt->most_entry) <= 0;
        if (!good) {
            break;
        }
        list[i] = (ids_constant){.operation = at->op,
                                 .result = at->result,
                                 .numerator = (int64_t)mpz_get_si(mpq_numref(value)),
                                 .denominator = (int64_t)mpz_get_si(mpq_denref(value))};
        for (uint32_t k = 0; k < IDS_MAX_ARITY; k++) {
            list[i].argument[k] = at->argument[k];
        }
    }
    if (good) {
        st = ids_algebra_create(b->ctx, b->c->sig, b->count, NULL, list, b->coordinate_count,
                                algebra);
    }
    mpq_clear(value);
    return st;
}

static ids_status finish(const builder *b, ids_algebra **algebra, uint32_t *generator)
{
    ids_status st = IDS_OK;
    ids_constant *list = NULL;
    mpq_t *scale = NULL;
    uint32_t ready = 0;

    IDSI_TRY(idsi_alloc_array(b->ctx, b->coordinate_count, sizeof *list, &list));
    IDSI_TRY(idsi_alloc_array(b->ctx, b->count, sizeof *scale, &scale));
    for (; ready < b->count; ready++) {
        mpq_init(scale[ready]);
    }
    IDSI_TRY(make_algebra(b, list, scale, algebra));
    for (uint32_t v = 0; v < b->c->variables; v++) {
        for (uint32_t i = 0; i < b->count; i++) {
            generator[v] = b->elements[i].content == b->c->stride[v] ? i : generator[v];
        }
    }
done:
    for (uint32_t i = 0; i < ready; i++) {
        mpq_clear(scale[i]);
    }
    idsi_free(b->ctx, scale);
    idsi_free(b->ctx, list);
    return st;
}

ids_status idsi_hunt_quotient(idsi_hunt *hunt, const idsi_component *component, uint32_t prime,
                              const uint32_t *value, ids_algebra **algebra, uint32_t *generator)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = hunt->ctx;
    const size_t room = hunt->most_dimension;
    builder b = {.ctx = ctx, .hunt = hunt, .c = component, .prime = prime, .value = value};

    *algebra = NULL;
    IDSI_TRY(idsi_alloc_array(ctx, room, sizeof *b.elements, &b.elements));
    IDSI_TRY(idsi_alloc_array(ctx, room, sizeof *b.rows, &b.rows));
    IDSI_TRY(idsi_alloc_array(ctx, room, sizeof *b.combination, &b.combination));
    for (uint32_t degree = 1; degree <= component->degree; degree++) {
        for (uint32_t content = 1; content <= component->top && !b.failed; content++) {
            if (idsi_content_degree(component, content) == degree) {
                IDSI_TRY(build_content(&b, content));
            }
        }
    }
    if (!b.failed) {
        IDSI_TRY(finish(&b, algebra, generator));
    }
done:
    clear_rows(&b);
    idsi_free(ctx, b.elements);
    idsi_free(ctx, b.rows);
    idsi_free(ctx, b.combination);
    idsi_free(ctx, b.coordinates);
    return st;
}
