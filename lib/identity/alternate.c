/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What can stand behind an equation: alternating a,b,c
 *
 * The polynomial is replaced by the sum over all ways to permute the named variables, with the sign
 * of the permutation. That is short for many terms, and expanded here.
 */
#include "notation_private.h"

typedef struct permutation {
    uint32_t count;
    idsi_token label[IDSI_MAX_VARIABLES]; /* the variables that are permuted */
    uint32_t at[IDSI_MAX_VARIABLES];      /* label[i] becomes label[at[i]] */
    int sign;
} permutation;

/* The next one in lexicographic order; false after the last. */
static bool next_permutation(permutation *p)
{
    uint32_t i = p->count - 1;
    uint32_t j = p->count - 1;
    while (i > 0 && p->at[i - 1] > p->at[i]) {
        i--;
    }
    if (i == 0) {
        return false;
    }
    while (p->at[j] < p->at[i - 1]) {
        j--;
    }
    uint32_t low = i - 1;
    uint32_t high = j;
    for (;;) {
        const uint32_t other = p->at[low];
        p->at[low] = p->at[high];
        p->at[high] = other;
        p->sign = -p->sign;
        if (low == i - 1) {
            low = i;
            high = p->count - 1;
        } else {
            low++;
            high--;
        }
        if (low >= high) {
            return true;
        }
    }
}

/* Appends the polynomial with its variables permuted. */
static ids_status append_image(const idsi_poly *poly, const permutation *p, idsi_poly *out)
{
    ids_status st = IDS_OK;
    idsi_token tree[IDSI_IDENTITY_TOKENS];
    mpq_t coefficient;
    mpq_init(coefficient);
    for (size_t t = 0; t < poly->count; t++) {
        const size_t begin = poly->start[t];
        const size_t length = poly->start[t + 1] - begin;
        for (size_t k = 0; k < length; k++) {
            tree[k] = poly->tokens[begin + k];
            for (uint32_t i = 0; i < p->count; i++) {
                if (poly->tokens[begin + k] == p->label[i]) {
                    tree[k] = p->label[p->at[i]];
                }
            }
        }
        mpq_set(coefficient, poly->coefficients[t]);
        if (p->sign < 0) {
            mpq_neg(coefficient, coefficient);
        }
        IDSI_TRY(idsi_poly_append(out, coefficient, tree, length));
        IDSI_TRY(idsi_poll(out->ctx, NULL));
    }
done:
    mpq_clear(coefficient);
    return st;
}

static ids_status alternate(idsi_reader *reader, permutation *p, idsi_poly *poly)
{
    ids_status st = IDS_OK;
    idsi_poly sum;
    idsi_poly_init(&sum, reader->ctx, poly->sig);
    sum.variables = poly->variables;
    for (uint32_t i = 0; i < p->count; i++) {
        p->at[i] = i;
    }
    p->sign = 1;
    do {
        IDSI_TRY(append_image(poly, p, &sum));
    } while (next_permutation(p));
    IDSI_TRY(idsi_poly_normalize(&sum));
    const idsi_poly old = *poly;
    *poly = sum;
    sum = old;
done:
    idsi_poly_clear(&sum);
    return st;
}

/* Reads a variable of the statement into the permutation. */
static ids_status read_variable(idsi_reader *reader, permutation *p)
{
    const idsi_shown name = idsi_reader_show(reader, reader->at);
    idsi_token label = 0;
    for (uint32_t i = 0; i < reader->variable_count; i++) {
        if (idsi_lexeme_same(reader, reader->variables[i], reader->at)) {
            label = i + 1;
        }
    }
    if (label == 0 || reader->lexemes[reader->at].kind != IDSI_LEX_NAME) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                "expected a variable of the identity after alternating, found %s",
                                name.text);
    }
    for (uint32_t i = 0; i < p->count; i++) {
        if (p->label[i] == label) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                    "the variable %s stands twice; expected different ones",
                                    name.text);
        }
    }
    p->label[p->count++] = label;
    reader->at++;
    return IDS_OK;
}

/* Permuting variables that occur a different number of times would make unlike terms. */
static ids_status check_balance(idsi_reader *reader, const permutation *p, const idsi_poly *poly,
                                size_t word)
{
    for (size_t t = 0; t < poly->count; t++) {
        uint32_t uses[IDSI_MAX_VARIABLES] = {0};
        for (size_t k = poly->start[t]; k < poly->start[t + 1]; k++) {
            for (uint32_t i = 0; i < p->count; i++) {
                uses[i] += poly->tokens[k] == p->label[i];
            }
        }
        for (uint32_t i = 1; i < p->count; i++) {
            if (uses[i] != uses[0]) {
                const idsi_shown a = idsi_reader_show(reader, reader->variables[p->label[0] - 1]);
                const idsi_shown b = idsi_reader_show(reader, reader->variables[p->label[i] - 1]);
                return idsi_reader_fail(
                    reader, IDS_ERR_PARSE, word,
                    "not homogeneous: some term has %s %u time%s and %s %u time%s; expected the "
                    "variables behind alternating equally often in each term",
                    a.text, uses[0], uses[0] == 1 ? "" : "s", b.text, uses[i],
                    uses[i] == 1 ? "" : "s");
            }
        }
    }
    return IDS_OK;
}

ids_status idsi_reader_alternate(idsi_reader *reader, idsi_poly *poly)
{
    ids_status st = IDS_OK;
    while (idsi_lexeme_is(reader, reader->at, "alternating")) {
        const size_t word = reader->at;
        permutation p = {.count = 0};
        do {
            reader->at++;
            IDSI_TRY(read_variable(reader, &p));
        } while (reader->lexemes[reader->at].kind == IDSI_LEX_COMMA);
        IDSI_TRY(check_balance(reader, &p, poly, word));
        IDSI_TRY(idsi_reader_place(reader, alternate(reader, &p, poly), word));
    }
done:
    return st;
}
