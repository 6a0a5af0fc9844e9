/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * From the value of an equation to an identity: the variables that are left after cancellation
 * are numbered in the order of their names, and the identity is linearised.
 */
#include <string.h>

#include "notation_private.h"

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

static size_t digit_run(const char *text, size_t length)
{
    size_t n = 0;
    while (n < length && is_digit(text[n])) {
        n++;
    }
    return n;
}

/* Order of names: byte by byte, but runs of digits without leading zeros as numbers. */
static int compare_names(const char *a, size_t n, const char *b, size_t m)
{
    size_t i = 0;
    while (i < n && i < m) {
        const size_t run_a = digit_run(a + i, n - i);
        const size_t run_b = digit_run(b + i, m - i);
        if (run_a != run_b && run_a > 0 && run_b > 0 && a[i] != '0' && b[i] != '0') {
            return run_a < run_b ? -1 : 1;
        }
        if (a[i] != b[i]) {
            return (uint8_t)a[i] < (uint8_t)b[i] ? -1 : 1;
        }
        i++;
    }
    return (n > m) - (n < m);
}

static int compare_variables(const idsi_reader *reader, uint32_t a, uint32_t b)
{
    const idsi_lexeme *x = &reader->lexemes[reader->variables[a]];
    const idsi_lexeme *y = &reader->lexemes[reader->variables[b]];
    return compare_names(reader->text + x->offset, x->length, reader->text + y->offset, y->length);
}

/* The variables of a tree, by name: order[new label - 1] = old label - 1. Returns their number. */
static uint32_t order_variables(const idsi_reader *reader, const idsi_token *tree, size_t length,
                                uint32_t order[IDSI_MAX_VARIABLES])
{
    bool used[IDSI_MAX_VARIABLES] = {false};
    uint32_t count = 0;
    for (size_t i = 0; i < length; i++) {
        if (!idsi_is_node(tree[i])) {
            used[tree[i] - 1] = true;
        }
    }
    for (uint32_t v = 0; v < IDSI_MAX_VARIABLES; v++) {
        if (!used[v]) {
            continue;
        }
        uint32_t at = count++;
        while (at > 0 && compare_variables(reader, v, order[at - 1]) < 0) {
            order[at] = order[at - 1];
            at--;
        }
        order[at] = v;
    }
    return count;
}

static void relabel(idsi_token *tokens, size_t count, const uint32_t *order, uint32_t variables)
{
    idsi_token label[IDSI_MAX_VARIABLES] = {0};
    for (uint32_t i = 0; i < variables; i++) {
        label[order[i]] = i + 1;
    }
    for (size_t i = 0; i < count; i++) {
        if (!idsi_is_node(tokens[i])) {
            tokens[i] = label[tokens[i] - 1];
        }
    }
}

static ids_status copy_letters(idsi_reader *reader, const uint32_t *order, idsi_identity *identity)
{
    ids_status st = IDS_OK;
    IDSI_TRY(idsi_alloc_array(reader->ctx, identity->written.variables, sizeof *identity->letters,
                              &identity->letters));
    for (uint32_t i = 0; i < identity->written.variables; i++) {
        IDSI_TRY(idsi_lexeme_copy(reader, reader->variables[order[i]], &identity->letters[i]));
    }
done:
    return st;
}

ids_status idsi_identity_finish(idsi_reader *reader, idsi_identity *identity, idsi_value *value)
{
    const bool is_trivial = value->poly.count == 0;
    uint32_t order[IDSI_MAX_VARIABLES] = {0};
    ids_status st = IDS_OK;
    const uint32_t variables =
        is_trivial ? order_variables(reader, value->nominal, value->nominal_length, order)
                   : order_variables(reader, value->poly.tokens, value->poly.start[1], order);
    identity->written = value->poly;
    idsi_poly_init(&value->poly, reader->ctx, identity->written.sig);
    identity->written.variables = variables;
    if (is_trivial) {
        relabel(value->nominal, value->nominal_length, order, variables);
        memcpy(identity->trivial, value->nominal, value->nominal_length * sizeof *value->nominal);
        identity->degree = value->nominal_degree;
    } else {
        relabel(identity->written.tokens, identity->written.start[identity->written.count], order,
                variables);
        identity->degree = identity->written.degree;
    }
    identity->multilinear = identity->degree == variables;
    IDSI_TRY(copy_letters(reader, order, identity));
    IDSI_TRY(idsi_poly_normalize(&identity->written));
    IDSI_TRY(idsi_poly_linearize(&identity->written, &identity->linear));
    if (is_trivial) {
        identity->linear.variables = identity->degree;
    }
done:
    return st;
}
