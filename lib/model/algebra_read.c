/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Reading algebra files.
 *
 *     basis      NAME NAME ...
 *     operation  as in presentations
 *     PRODUCT = SUM
 *     PRODUCT    NAME SYMBOL NAME  |  FENCE NAME , ... FENCE  |  NAME ( NAME , ... )
 *     SUM        [SIGN] TERM { SIGN TERM }
 *     TERM       { coefficient } NAME  |  { coefficient } ( SUM )  |  0
 *
 * Lexemes, statements, operations and coefficients are read by lib/identity. The basis and all
 * operations are read first, so their order in the file is free. Products are compared, up to
 * symmetry, when all of them are there; a constant that a product does not name is 0 in it.
 */
#include <stdlib.h>
#include <string.h>

#include "algebra_private.h"

/* ---- the basis ------------------------------------------------------------------------------- */

static ids_status check_element(idsi_draft *d, size_t lexeme)
{
    idsi_reader *reader = &d->reader;
    const idsi_shown name = idsi_reader_show(reader, lexeme);

    if (reader->lexemes[lexeme].kind != IDSI_LEX_NAME) {
        return idsi_draft_expected(d, "the name of a basis element");
    }
    if (idsi_lexeme_is(reader, lexeme, "basis")) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, lexeme,
                                "%s is a word of the notation; expected the name of a basis "
                                "element",
                                name.text);
    }
    for (uint32_t i = 0; i < d->dimension; i++) {
        if (idsi_lexeme_same(reader, d->element[i], lexeme)) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, lexeme,
                                    "the basis element %s stands twice; expected different names",
                                    name.text);
        }
    }
    if (d->dimension == IDS_MAX_DIMENSION) {
        return idsi_reader_fail(reader, IDS_ERR_LIMIT, lexeme, "more than %u basis elements",
                                IDS_MAX_DIMENSION);
    }
    return idsi_reader_check_variable(reader, lexeme);
}

static ids_status read_basis(idsi_draft *d)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;
    const size_t word = reader->at++;

    if (d->basis != SIZE_MAX) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, word,
                                "a second basis; line %u has the first one",
                                reader->lexemes[d->basis].line);
    }
    d->basis = word;
    do {
        IDSI_TRY(check_element(d, reader->at));
        IDSI_TRY(idsi_lexeme_copy(reader, reader->at, &d->name[d->dimension]));
        d->element[d->dimension] = reader->at;
        d->dimension++;
        reader->at++;
    } while (reader->lexemes[reader->at].kind != IDSI_LEX_END);
    reader->at++;
done:
    return st;
}

/* ---- the whole file -------------------------------------------------------------------------- */

static int compare_products(const void *a, const void *b)
{
    const idsi_given_product *x = a;
    const idsi_given_product *y = b;
    int order = x->op < y->op ? -1 : x->op > y->op;

    if (order == 0) {
        order = memcmp(x->argument, y->argument, sizeof x->argument);
    }
    return order != 0 ? order : x->lexeme < y->lexeme ? -1 : 1;
}

/* Whether two products that the symmetry relates have the values that it asks for. */
static bool agree(const idsi_draft *d, const idsi_given_product *a, const idsi_given_product *b)
{
    if (a->end - a->begin != b->end - b->begin) {
        return false;
    }
    for (size_t i = 0; i < a->end - a->begin; i++) {
        const ids_constant *x = &d->list[a->begin + i];
        const ids_constant *y = &d->list[b->begin + i];
        if (x->result != y->result || x->denominator != y->denominator ||
            a->sign * x->numerator != b->sign * y->numerator) {
            return false;
        }
    }
    return true;
}

static ids_status check_products(idsi_draft *d)
{
    if (d->product_count > 0) {
        qsort(d->products, d->product_count, sizeof *d->products, compare_products);
    }
    for (size_t i = 1; i < d->product_count; i++) {
        const idsi_given_product *a = &d->products[i - 1];
        const idsi_given_product *b = &d->products[i];
        if (a->op == b->op && memcmp(a->argument, b->argument, sizeof a->argument) == 0 &&
            !agree(d, a, b)) {
            return idsi_reader_fail(&d->reader, IDS_ERR_PARSE, b->lexeme,
                                    "another value than line %u gives this product%s",
                                    d->reader.lexemes[a->lexeme].line,
                                    d->sig->ops[a->op].group.symmetry == IDS_SYMMETRY_NONE
                                        ? ""
                                        : ", up to the symmetry of the operation");
        }
    }
    return IDS_OK;
}

/* Goes through the statements: the basis, or everything else. */
static ids_status read_statements(idsi_draft *d, bool basis)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;

    for (reader->at = 0; reader->at < reader->lexeme_count;) {
        const bool is_basis = idsi_lexeme_is(reader, reader->at, "basis");
        if (is_basis == basis && !idsi_lexeme_is(reader, reader->at, "operation")) {
            IDSI_TRY(basis ? read_basis(d) : idsi_draft_product(d));
            IDSI_TRY(idsi_poll(reader->ctx, NULL));
            continue;
        }
        while (reader->lexemes[reader->at].kind != IDSI_LEX_END) {
            reader->at++;
        }
        reader->at++;
    }
    if (d->dimension == 0) {
        reader->at = 0;
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, 0,
                              "no basis is declared; expected a line such as: basis e1 e2 e3");
    }
done:
    return st;
}

static ids_status read_all(idsi_draft *d)
{
    ids_status st = IDS_OK;
    idsi_reader *reader = &d->reader;

    IDSI_TRY(idsi_reader_lex(reader));
    IDSI_TRY(idsi_reader_group(reader));
    IDSI_TRY(idsi_reader_signature(reader, &d->sig));
    IDSI_TRY(read_statements(d, true));
    for (; d->ready < d->dimension; d->ready++) {
        mpq_init(d->sum[d->ready]);
    }
    IDSI_TRY(read_statements(d, false));
    IDSI_TRY(check_products(d));
done:
    return st;
}

static void draft_clear(idsi_draft *d)
{
    ids_ctx *ctx = d->reader.ctx;

    for (uint32_t i = 0; i < d->dimension; i++) {
        idsi_free(ctx, d->name[i]);
    }
    for (size_t i = 0; i < d->ready; i++) {
        mpq_clear(d->sum[i]);
    }
    idsi_free(ctx, d->list);
    idsi_free(ctx, d->products);
    ids_signature_free(d->sig);
    idsi_reader_clear(&d->reader);
    idsi_free(ctx, d);
}

ids_status ids_algebra_read(ids_ctx *ctx, const char *text, size_t length, const char *source,
                            ids_algebra **algebra)
{
    ids_status st = IDS_OK;
    idsi_draft *d = NULL;

    if (ctx == NULL || text == NULL || algebra == NULL) {
        return idsi_fail_arg(ctx, "context, text or result");
    }
    if (length >= UINT32_MAX) {
        return idsi_fail(ctx, IDS_ERR_LIMIT, "an algebra file of more than 4 GiB");
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *d, &d));
    d->reader = (idsi_reader){.ctx = ctx,
                              .text = text,
                              .length = length,
                              .source = source == NULL ? "input" : source,
                              .defining = SIZE_MAX};
    d->basis = SIZE_MAX;
    IDSI_TRY(read_all(d));
    IDSI_TRY(ids_algebra_create(ctx, d->sig, d->dimension, (const char *const *)d->name, d->list,
                                d->count, algebra));
done:
    if (d != NULL) {
        draft_clear(d);
    }
    return st;
}
