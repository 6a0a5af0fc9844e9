/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Canonical forms. The first byte chooses a signature, the others are the prefix code of a
 * monomial: the canonical form of a canonical form is itself, its sign +1 (or 0 where the monomial
 * is zero), and a multilinear one is the monomial of its index. Code that is no tree is refused.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/basis.h>

#define LONGEST 127u /* entries of a tree of degree 64 */
#define BASIS_DEGREE 6u

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static void wrong(const char *what)
{
    fprintf(stderr, "%s\n", what);
    abort();
}

static const ids_signed_order reversed[] = {{{2, 1, 0}, -1}};
static const ids_signed_order square[] = {{{1, 0, 3, 2}, 1}, {{2, 3, 0, 1}, -1}};
static const ids_signed_order cycle[] = {{{1, 2, 3, 4, 0}, 1}};

#define PREFIX(name, n, kind)                                          \
    {                                                                  \
        .notation = IDS_NOTATION_PREFIX, .open = (name), .arity = (n), \
        .symmetry = IDS_SYMMETRY_##kind                                \
    }
#define GENERATED(name, n, list)                                       \
    {                                                                  \
        .notation = IDS_NOTATION_PREFIX, .open = (name), .arity = (n), \
        .symmetry = IDS_SYMMETRY_GENERATED, .generators = (list),      \
        .generator_count = sizeof(list) / sizeof *(list)               \
    }

/* Signature number i has the operations i, i+1 and i+2 of these, in a circle. */
static const ids_operation operations[] = {
    PREFIX("c", 2, COMMUTATIVE), PREFIX("a", 2, ALTERNATING), PREFIX("m", 2, NONE),
    PREFIX("d", 3, COMMUTATIVE), PREFIX("b", 4, ALTERNATING), GENERATED("r", 3, reversed),
    GENERATED("q", 4, square),   GENERATED("z", 5, cycle),    PREFIX("e", 8, COMMUTATIVE),
};
#define COUNT (sizeof operations / sizeof *operations)

/* Signatures with the bases of small degrees: made once, as they are needed. */
typedef struct shelf {
    ids_signature *sig;
    ids_types *types;
    ids_basis *basis[BASIS_DEGREE + 1];
} shelf;

static ids_ctx *shelf_ctx;
static shelf shelves[COUNT];

/* At the end, for those who look for leaks. */
static void clear_shelves(void)
{
    for (size_t i = 0; i < COUNT; i++) {
        for (size_t degree = 0; degree <= BASIS_DEGREE; degree++) {
            ids_basis_free(shelves[i].basis[degree]);
        }
        ids_types_free(shelves[i].types);
        ids_signature_free(shelves[i].sig);
    }
    ids_ctx_free(shelf_ctx);
}

static shelf *shelf_of(uint8_t number)
{
    shelf *s = &shelves[number % COUNT];
    ids_operation chosen[3];

    if (s->sig != NULL) {
        return s;
    }
    for (size_t i = 0; i < 3; i++) {
        chosen[i] = operations[(number + i) % COUNT];
    }
    if (shelf_ctx == NULL) {
        atexit(clear_shelves);
    }
    if ((shelf_ctx == NULL && ids_ctx_create(NULL, &shelf_ctx) != IDS_OK) ||
        ids_signature_create(shelf_ctx, chosen, 3, &s->sig) != IDS_OK ||
        ids_types_create(shelf_ctx, s->sig, BASIS_DEGREE, &s->types) != IDS_OK) {
        wrong("no signature");
    }
    for (uint32_t degree = 1; degree <= BASIS_DEGREE; degree++) {
        if (ids_basis_create(shelf_ctx, s->types, degree, &s->basis[degree]) != IDS_OK) {
            wrong("no basis");
        }
    }
    return s;
}

/* Where a multilinear canonical monomial stands in its basis, there it is. */
static void look_up(const ids_basis *basis, const ids_mono *mono, const int32_t *code,
                    size_t length)
{
    int32_t again[LONGEST] = {0};
    size_t again_length = 0;
    uint64_t index = 0;
    ids_status st = ids_basis_rank(basis, mono, &index);

    if (st == IDS_OK) {
        if (ids_basis_unrank_code(basis, index, again, LONGEST, &again_length) != IDS_OK ||
            again_length != length || memcmp(again, code, length * sizeof *code) != 0) {
            wrong("another monomial has its index");
        }
    } else if (st != IDS_ERR_ARG) { /* not multilinear */
        wrong("a canonical monomial is not in the basis");
    }
}

static void canonicalize(ids_ctx *ctx, const shelf *s, const ids_mono *mono)
{
    ids_mono *once = NULL;
    ids_mono *twice = NULL;
    int32_t code[2][LONGEST] = {{0}};
    size_t length[2] = {0};
    int sign[2] = {7, 7};

    if (ids_mono_canonicalize(ctx, mono, &once, &sign[0]) != IDS_OK ||
        ids_mono_canonicalize(ctx, once, &twice, &sign[1]) != IDS_OK ||
        ids_mono_code(once, code[0], LONGEST, &length[0]) != IDS_OK ||
        ids_mono_code(twice, code[1], LONGEST, &length[1]) != IDS_OK) {
        wrong("no canonical form");
    }
    if (length[0] != length[1] || memcmp(code[0], code[1], sizeof code[0]) != 0) {
        wrong("the canonical form has another canonical form");
    }
    if (sign[0] < -1 || sign[0] > 1 || sign[1] != (sign[0] != 0)) {
        wrong("wrong signs");
    }
    if (ids_mono_degree(once) <= BASIS_DEGREE) {
        look_up(s->basis[ids_mono_degree(once)], once, code[0], length[0]);
    }
    ids_mono_free(once);
    ids_mono_free(twice);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    int32_t code[LONGEST + 2] = {0};
    size_t length = 0;
    ids_ctx *ctx = NULL;
    ids_mono *mono = NULL;
    char *text = NULL;

    if (size == 0 || ids_ctx_create(NULL, &ctx) != IDS_OK) {
        return 0;
    }
    for (length = 0; length + 1 < size && length < LONGEST + 2; length++) {
        code[length] = (int8_t)data[length + 1];
    }
    const shelf *s = shelf_of(data[0]);
    if (ids_mono_create(ctx, s->sig, code, length, &mono) == IDS_OK) {
        if (ids_mono_print(ctx, mono, &text) != IDS_OK) {
            wrong("a monomial is not printed");
        }
        canonicalize(ctx, s, mono);
    }
    ids_string_free(ctx, text);
    ids_mono_free(mono);
    if (ids_ctx_memory(ctx).live != 0) {
        wrong("memory is left");
    }
    ids_ctx_free(ctx);
    return 0;
}
