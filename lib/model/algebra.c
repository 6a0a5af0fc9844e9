/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Algebras by structure constants: making them, and access.
 *
 * All constants of an operation stand in one sorted table, those that the symmetry implies
 * included, so that whoever multiplies vectors goes through the table once and knows nothing of
 * symmetries. What the caller gives is first brought to canonical arguments (those that the
 * canonical form of a monomial with these labels has) and sorted; there, contradictions are
 * neighbours. Then each is copied to its whole orbit.
 */
#include <stdlib.h>
#include <string.h>

#include "algebra_private.h"

void ids_algebra_free(ids_algebra *algebra)
{
    if (algebra == NULL) {
        return;
    }
    ids_ctx *ctx = algebra->ctx;
    for (size_t i = 0; algebra->tables != NULL && i < algebra->sig->count; i++) {
        idsi_free(ctx, algebra->tables[i].list);
        idsi_free(ctx, algebra->tables[i].first);
    }
    for (uint32_t i = 0; algebra->names != NULL && i < algebra->dimension; i++) {
        idsi_free(ctx, algebra->names[i]);
    }
    idsi_free(ctx, algebra->tables);
    idsi_free(ctx, algebra->names);
    ids_signature_free(algebra->sig);
    idsi_free(ctx, algebra);
}

/* ---- signature and names --------------------------------------------------------------------- */

static ids_status copy_signature(ids_ctx *ctx, const ids_signature *from, ids_signature **to)
{
    ids_status st = IDS_OK;
    ids_operation *list = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, from->count, sizeof *list, &list));
    for (size_t i = 0; i < from->count; i++) {
        IDSI_TRY(ids_signature_operation(from, i, &list[i]));
    }
    IDSI_TRY(ids_signature_create(ctx, list, from->count, to));
done:
    idsi_free(ctx, list);
    return st;
}

static bool names_operation(const ids_signature *sig, const char *name)
{
    for (size_t i = 0; i < sig->count; i++) {
        if (sig->ops[i].notation != IDS_NOTATION_FENCE && strcmp(sig->ops[i].open, name) == 0) {
            return true;
        }
    }
    return false;
}

static bool is_name(const char *name)
{
    return strcmp(name, "basis") != 0 && idsi_word_is_name(name, strlen(name));
}

/* e1, e2, ... or another letter, or several, of which no name with a number is an operation. */
static ids_status make_names(ids_algebra *made)
{
    ids_status st = IDS_OK;
    char stem[IDS_MAX_OPERATIONS + 2] = "e";
    char name[IDS_MAX_OPERATIONS + 16];
    bool taken = true;

    for (size_t length = 1; taken && length < sizeof stem - 1; length++) {
        stem[length - 1] = 'e';
        taken = false;
        for (uint32_t i = 0; i < made->dimension; i++) {
            (void)snprintf(name, sizeof name, "%s%u", stem, i + 1);
            taken = taken || names_operation(made->sig, name);
        }
    }
    for (uint32_t i = 0; i < made->dimension; i++) {
        (void)snprintf(name, sizeof name, "%s%u", stem, i + 1);
        IDSI_TRY(idsi_strdup(made->ctx, name, &made->names[i]));
    }
done:
    return st;
}

static ids_status copy_names(ids_algebra *made, const char *const *names)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_alloc_array(made->ctx, made->dimension, sizeof *made->names, &made->names));
    if (names == NULL) {
        return make_names(made);
    }
    for (uint32_t i = 0; i < made->dimension; i++) {
        if (names[i] == NULL || !is_name(names[i]) || names_operation(made->sig, names[i])) {
            return idsi_fail(made->ctx, IDS_ERR_ARG, "\"%.63s\" cannot name a basis element",
                             names[i] == NULL ? "" : names[i]);
        }
        for (uint32_t j = 0; j < i; j++) {
            if (strcmp(names[i], names[j]) == 0) {
                return idsi_fail(made->ctx, IDS_ERR_ARG, "two basis elements are named \"%.63s\"",
                                 names[i]);
            }
        }
        IDSI_TRY(idsi_strdup(made->ctx, names[i], &made->names[i]));
    }
done:
    return st;
}

/* ---- constants ------------------------------------------------------------------------------- */

static uint64_t magnitude(int64_t n)
{
    return n < 0 ? 0 - (uint64_t)n : (uint64_t)n;
}

static uint64_t gcd(uint64_t a, uint64_t b)
{
    while (b != 0) {
        const uint64_t rest = a % b;
        a = b;
        b = rest;
    }
    return a;
}

static ids_status reduce(ids_ctx *ctx, const ids_constant *given, idsi_given *out)
{
    const uint64_t common = gcd(magnitude(given->numerator), magnitude(given->denominator));
    const uint64_t top = magnitude(given->numerator) / common;
    const uint64_t bottom = magnitude(given->denominator) / common;

    if (top > INT64_MAX || bottom > INT64_MAX) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "a structure constant beyond 64 bits");
    }
    out->constant.numerator =
        (given->numerator < 0) != (given->denominator < 0) ? -(int64_t)top : (int64_t)top;
    out->constant.denominator = (int64_t)bottom;
    return IDS_OK;
}

/* IDS_ERR_DOMAIN, "<product> <what>" with the product as it is written. */
static ids_status fail_product(const ids_algebra *made, const idsi_given *given, const char *what)
{
    ids_status st = IDS_OK;
    idsi_text text;

    idsi_text_init(&text, made->ctx);
    IDSI_TRY(idsi_product_print(made, given->op, given->constant.argument, &text));
    st = idsi_fail(made->ctx, IDS_ERR_DOMAIN, "%.200s %s", text.data, what);
done:
    idsi_text_clear(&text);
    return st;
}

/* Brings a constant to canonical arguments. */
static ids_status normalize(const ids_algebra *made, const ids_constant *given, idsi_given *out)
{
    ids_ctx *ctx = made->ctx;
    ids_status st = IDS_OK;
    uint8_t argument[IDS_MAX_ARITY] = {0};

    *out = (idsi_given){.op = given->operation};
    if (given->operation >= made->sig->count || given->result >= made->dimension ||
        given->denominator == 0) {
        return idsi_fail_arg(ctx, "operation, result or denominator of a constant");
    }
    for (uint32_t i = 0; i < made->sig->ops[out->op].arity; i++) {
        if (given->argument[i] >= made->dimension) {
            return idsi_fail_arg(ctx, "argument of a constant");
        }
        argument[i] = (uint8_t)given->argument[i];
    }
    out->constant.result = (uint8_t)given->result;
    IDSI_TRY(reduce(ctx, given, out));
    const int sign = idsi_arguments_canonical(made->sig, out->op, argument, out->constant.argument);
    if (sign == 0 && out->constant.numerator != 0) {
        return fail_product(made, out, "is 0 by the symmetry; a constant of it is not");
    }
    if (sign < 0) {
        out->constant.numerator = -out->constant.numerator;
    }
done:
    return st;
}

int idsi_constant_compare(const void *a, const void *b)
{
    const idsi_constant *x = a;
    const idsi_constant *y = b;
    const int order = memcmp(x->argument, y->argument, sizeof x->argument);
    return order != 0 ? order : (int)x->result - (int)y->result;
}

static int compare_given(const void *a, const void *b)
{
    const idsi_given *x = a;
    const idsi_given *y = b;
    if (x->op != y->op) {
        return x->op < y->op ? -1 : 1;
    }
    return idsi_constant_compare(&x->constant, &y->constant);
}

/* Drops what was given twice and what is 0; *count is what is left. */
static ids_status join(const ids_algebra *made, idsi_given *list, size_t *count)
{
    size_t kept = 0;

    qsort(list, *count, sizeof *list, compare_given);
    for (size_t i = 0; i < *count; i++) {
        const idsi_given *before = kept == 0 ? NULL : &list[kept - 1];
        if (before == NULL || compare_given(before, &list[i]) != 0) {
            list[kept++] = list[i];
            continue;
        }
        if (before->constant.numerator != list[i].constant.numerator ||
            before->constant.denominator != list[i].constant.denominator) {
            return fail_product(made, &list[i], "has two constants that contradict each other");
        }
    }
    *count = kept;
    kept = 0;
    for (size_t i = 0; i < *count; i++) {
        if (list[i].constant.numerator != 0) {
            list[kept++] = list[i];
        }
    }
    *count = kept;
    return IDS_OK;
}

static ids_status fill_tables(ids_algebra *made, const idsi_given *list, size_t count)
{
    ids_status st = IDS_OK;
    size_t at = 0;
    size_t all = 0;

    for (uint32_t op = 0; op < made->sig->count; op++) {
        idsi_table *table = &made->tables[op];
        size_t capacity = 0;
        for (; at < count && list[at].op == op; at++) {
            IDSI_TRY(idsi_orbit_add(made, op, &list[at].constant, &capacity));
            if (all + table->count > IDSI_MAX_CONSTANTS) {
                return idsi_fail(made->ctx, IDS_ERR_LIMIT,
                                 "more than %u structure constants, those included that the "
                                 "symmetry gives",
                                 IDSI_MAX_CONSTANTS);
            }
        }
        all += table->count;
        if (table->count > 0) {
            qsort(table->list, table->count, sizeof *table->list, idsi_constant_compare);
        }
        IDSI_TRY(
            idsi_alloc_array(made->ctx, made->dimension + 1u, sizeof *table->first, &table->first));
        for (size_t i = 0; i < table->count; i++) {
            table->first[table->list[i].argument[0] + 1u]++;
        }
        for (uint32_t i = 0; i < made->dimension; i++) {
            table->first[i + 1] += table->first[i];
        }
    }
done:
    return st;
}

ids_status ids_algebra_create(ids_ctx *ctx, const ids_signature *signature, uint32_t dimension,
                              const char *const *names, const ids_constant *constants, size_t count,
                              ids_algebra **algebra)
{
    ids_status st = IDS_OK;
    ids_algebra *made = NULL;
    idsi_given *given = NULL;

    if (ctx == NULL || signature == NULL || algebra == NULL || (constants == NULL && count > 0)) {
        return idsi_fail_arg(ctx, "context, signature, constants or result");
    }
    if (dimension == 0 || dimension > IDS_MAX_DIMENSION) {
        return idsi_fail(ctx, IDS_ERR_ARG, "an algebra has dimension 1 to %u, not %u",
                         IDS_MAX_DIMENSION, dimension);
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    IDSI_TRY(copy_signature(ctx, signature, &made->sig));
    made->dimension = dimension;
    IDSI_TRY(copy_names(made, names));
    IDSI_TRY(idsi_alloc_array(ctx, made->sig->count, sizeof *made->tables, &made->tables));
    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *given, &given));
    for (size_t i = 0; i < count; i++) {
        IDSI_TRY(normalize(made, &constants[i], &given[i]));
    }
    IDSI_TRY(join(made, given, &count));
    IDSI_TRY(fill_tables(made, given, count));
    *algebra = made;
    made = NULL;
done:
    idsi_free(ctx, given);
    ids_algebra_free(made);
    return st;
}

/* ---- access ---------------------------------------------------------------------------------- */

const ids_signature *ids_algebra_signature(const ids_algebra *algebra)
{
    return algebra == NULL ? NULL : algebra->sig;
}

uint32_t ids_algebra_dimension(const ids_algebra *algebra)
{
    return algebra == NULL ? 0 : algebra->dimension;
}

const char *ids_algebra_basis_name(const ids_algebra *algebra, uint32_t index)
{
    return algebra == NULL || index >= algebra->dimension ? NULL : algebra->names[index];
}

size_t ids_algebra_count(const ids_algebra *algebra, size_t operation)
{
    return algebra == NULL || operation >= algebra->sig->count ? 0
                                                               : algebra->tables[operation].count;
}

ids_status ids_algebra_constant(const ids_algebra *algebra, size_t operation, size_t index,
                                ids_constant *constant)
{
    if (constant == NULL || index >= ids_algebra_count(algebra, operation)) {
        return IDS_ERR_ARG;
    }
    const idsi_constant *at = &algebra->tables[operation].list[index];
    *constant = (ids_constant){.operation = (uint32_t)operation,
                               .result = at->result,
                               .numerator = at->numerator,
                               .denominator = at->denominator};
    for (uint32_t i = 0; i < IDS_MAX_ARITY; i++) {
        constant->argument[i] = at->argument[i];
    }
    return IDS_OK;
}

static bool same_constant(const idsi_constant *a, const idsi_constant *b)
{
    return idsi_constant_compare(a, b) == 0 && a->numerator == b->numerator &&
           a->denominator == b->denominator;
}

bool ids_algebra_equal(const ids_algebra *a, const ids_algebra *b)
{
    if (a == NULL || b == NULL) {
        return a == b;
    }
    if (a->dimension != b->dimension || !idsi_signature_equal(a->sig, b->sig)) {
        return false;
    }
    for (uint32_t i = 0; i < a->dimension; i++) {
        if (strcmp(a->names[i], b->names[i]) != 0) {
            return false;
        }
    }
    for (size_t op = 0; op < a->sig->count; op++) {
        const idsi_table *x = &a->tables[op];
        const idsi_table *y = &b->tables[op];
        if (x->count != y->count) {
            return false;
        }
        for (size_t i = 0; i < x->count; i++) {
            if (!same_constant(&x->list[i], &y->list[i])) {
                return false;
            }
        }
    }
    return true;
}
