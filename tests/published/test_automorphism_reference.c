/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Writes the automorphism groups of many association types as a GAP program, which
 * test_automorphism_reference.sh runs. For each type GAP is given
 *
 *     the generators, and compares the order of the group they generate with the order we say;
 *     the structure, put together again from GAP's own groups and products: its order must
 *     agree too, and for small groups the two must be isomorphic.
 *
 * A semidirect product and a group G<order>(<degree>) do not say enough to build them: for those
 * only the orders are compared. The orders of the named groups come from GAP, those of the
 * unnamed ones from the name.
 */
#include <inttypes.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/idspan.h>

typedef struct family {
    const char *name;
    uint32_t degree;
    const char *text;
} family;

#define BINARY "operation a*b commutative\n"

static const family families[] = {
    {"commutative binary", 10, BINARY},
    {"binary without symmetry", 5, "operation a*b\n"},
    {"alternating binary and commutative ternary", 8,
     "operation [a,b] alternating\noperation (a,b,c) commutative\n"},
    {"commutative ternary", 13, "operation (a,b,c) commutative\n"},
    {"alternating quaternary", 13, "operation [a,b,c,d] alternating\n"},
    {"reversal", 7, BINARY "operation {a,b,c} = {c,b,a}\n"},
    {"three turned", 8, BINARY "operation (a,b,c) = (b,c,a)\n"},
    {"four turned", 8, BINARY "operation (a,b,c,d) = (b,c,d,a)\n"},
    {"square", 8, BINARY "operation (a,b,c,d) = (b,c,d,a) = (d,c,b,a)\n"},
    {"even of four", 8, BINARY "operation (a,b,c,d) = (b,c,a,d) = (b,a,d,c)\n"},
    {"Klein", 8, BINARY "operation (a,b,c,d) = (b,a,d,c) = (c,d,a,b)\n"},
    {"two swaps at once", 9, BINARY "operation (a,b,c,d) = -(b,a,d,c)\n"},
    {"swap and turn at once", 8, BINARY "operation (a,b,c,d,e,f) = (b,c,d,a,f,e)\n"},
    {"two permuted alike", 9, BINARY "operation (a,b,c,d,e,f) = (b,c,a,e,f,d) = (b,a,c,e,d,f)\n"},
    {"affine over 5", 7, BINARY "operation (a,b,c,d,e) = (b,c,d,e,a) = (a,c,e,b,d)\n"},
    {"pentagon", 7, BINARY "operation (a,b,c,d,e) = (b,c,d,e,a) = (e,d,c,b,a)\n"},
    {"even of five", 7, BINARY "operation (a,b,c,d,e) = (b,c,d,e,a) = (b,c,a,d,e)\n"},
    {"pairs of three", 8,
     BINARY "operation (a,b,c,d,e,f) = (b,a,c,d,e,f) = (c,d,e,f,a,b) = (c,d,a,b,e,f)\n"},
    {"three pairs turned", 8, BINARY "operation (a,b,c,d,e,f) = (b,a,c,d,e,f) = (c,d,e,f,a,b)\n"},
    {"cube", 8, BINARY "operation (a,b,c,d,e,f) = (b,c,d,a,e,f) = (e,b,f,d,c,a)\n"},
    {"PSL(2,5)", 7, BINARY "operation (a,b,c,d,e,f) = (b,c,d,e,a,f) = (f,e,c,d,b,a)\n"},
    {"PGL(2,5)", 7,
     BINARY "operation (a,b,c,d,e,f) = (b,c,d,e,a,f) = (f,e,c,d,b,a) = (a,c,e,b,d,f)\n"},
    {"affine over 7", 9, BINARY "operation (a,b,c,d,e,f,g) = (b,c,d,e,f,g,a) = (a,d,g,c,f,b,e)\n"},
    {"half of it", 9, BINARY "operation (a,b,c,d,e,f,g) = (b,c,d,e,f,g,a) = (a,c,e,g,b,d,f)\n"},
    {"Fano plane", 9, BINARY "operation (a,b,c,d,e,f,g) = (a,b,c,f,g,d,e) = (b,d,f,a,c,e,g)\n"},
    {"eight turned", 9, BINARY "operation (a,b,c,d,e,f,g,h) = (b,c,d,e,f,g,h,a)\n"},
    {"two fours", 9,
     BINARY "operation (a,b,c,d,e,f,g,h) = (b,c,d,a,e,f,g,h) = (e,f,g,h,a,b,c,d)\n"},
    {"tree of eight", 9,
     BINARY "operation (a,b,c,d,e,f,g,h) = (b,a,c,d,e,f,g,h) = (c,d,a,b,e,f,g,h) = "
            "(e,f,g,h,a,b,c,d)\n"},
};

/* ---- a structure as GAP's groups ---------------------------------------------------------- */

/* What a piece of a structure is in GAP: its group, "" when there is none, and its order. */
typedef struct piece {
    char group[4096];
    char order[4096];
} piece;

static const char *at; /* where the structure is read */

static void fail(const char *what)
{
    fprintf(stderr, "test_automorphism_reference: %s\n", what);
    exit(2);
}

static void *checked(void *block)
{
    if (block == NULL) {
        fail("no memory");
    }
    return block;
}

static bool skip(const char *word)
{
    size_t length = strlen(word);
    if (strncmp(at, word, length) != 0) {
        return false;
    }
    at += length;
    return true;
}

static uint32_t number(void)
{
    char *end = NULL;
    uint64_t value = strtoull(at, &end, 10);
    if (end == at) {
        fail("a number is missing in a structure");
    }
    at = end;
    return (uint32_t)value;
}

/* Reads the name of a group; returns the degree of its action. */
static uint32_t read_name(piece *p)
{
    static const struct {
        const char *name;
        uint32_t degree;
        const char *group;
    } named[] = {
        {"V4", 4, "Group((1,2)(3,4),(1,3)(2,4))"},
        {"F20", 5, "Group((1,2,3,4,5),(2,3,5,4))"},
        {"F21", 7, "Group((1,2,3,4,5,6,7),(2,3,5)(4,7,6))"},
        {"F42", 7, "Group((1,2,3,4,5,6,7),(2,4,3,7,5,6))"},
        {"PSL(2,5)", 6, "PSL(2,5)"},
        {"PGL(2,5)", 6, "PGL(2,5)"},
        {"PSL(3,2)", 7, "PSL(3,2)"},
    };
    uint32_t degree = 0;
    char letter = 0;

    for (size_t i = 0; i < sizeof named / sizeof named[0]; i++) {
        if (skip(named[i].name)) {
            snprintf(p->group, sizeof p->group, "%s", named[i].group);
            snprintf(p->order, sizeof p->order, "Size(%s)", named[i].group);
            return named[i].degree;
        }
    }
    letter = *at++;
    degree = number();
    switch (letter) {
    case 'S':
        snprintf(p->group, sizeof p->group, "SymmetricGroup(%u)", degree);
        break;
    case 'A':
        snprintf(p->group, sizeof p->group, "AlternatingGroup(%u)", degree);
        break;
    case 'Z':
        snprintf(p->group, sizeof p->group, "CyclicGroup(IsPermGroup,%u)", degree);
        break;
    case 'D':
        snprintf(p->group, sizeof p->group, "DihedralGroup(IsPermGroup,%u)", 2 * degree);
        break;
    case 'G':
        p->group[0] = '\0';
        snprintf(p->order, sizeof p->order, "%u", degree);
        if (!skip("(")) {
            fail("G without a degree");
        }
        degree = number();
        if (!skip(")")) {
            fail("a degree without end");
        }
        return degree;
    default:
        fail("an unknown name in a structure");
    }
    snprintf(p->order, sizeof p->order, "Size(%.80s)", p->group);
    return degree;
}

static void combine(piece *left, const piece *right, const char *product, const char *order)
{
    piece *made = checked(calloc(1, sizeof *made));
    int used = 0;

    if (left->group[0] != '\0' && right->group[0] != '\0' && product != NULL) {
        used = snprintf(made->group, sizeof made->group, "%s(%s,%s)", product, left->group,
                        right->group);
    }
    if (used < 0 || (size_t)used >= sizeof made->group) {
        fail("a structure is too long");
    }
    used = snprintf(made->order, sizeof made->order, "(%s)%s*%s", left->order, order, right->order);
    if (used < 0 || (size_t)used >= sizeof made->order) {
        fail("an order is too long");
    }
    *left = *made;
    free(made);
}

static void read_product(piece *p);

/* name, or ( product ) or ( product : name ); then any number of "wr name". */
static void read_power(piece *p)
{
    piece *right = checked(calloc(1, sizeof *right));
    char power[16] = "";

    if (skip("(")) {
        read_product(p);
        if (!skip(")")) {
            fail("a parenthesis is open");
        }
    } else {
        (void)read_name(p);
    }
    while (skip(" wr ")) {
        snprintf(power, sizeof power, "^%u", read_name(right));
        combine(p, right, "WreathProduct", power);
    }
    free(right);
}

static void read_product(piece *p)
{
    piece *right = checked(calloc(1, sizeof *right));

    read_power(p);
    for (;;) {
        if (skip(" x ")) {
            read_power(right);
            combine(p, right, "DirectProduct", "");
        } else if (skip(" : ")) {
            read_power(right);
            combine(p, right, NULL, "");
        } else {
            break;
        }
    }
    free(right);
}

/* ---- the program -------------------------------------------------------------------------- */

static void print_type(ids_ctx *ctx, const ids_types *types, const char *family_name,
                       uint32_t degree, uint64_t index)
{
    ids_automorphisms *group = NULL;
    piece *p = checked(calloc(1, sizeof *p));
    uint32_t image[IDS_MAX_DEGREE] = {0};
    ids_type_info info = {0};
    int sign = 0;

    if (ids_automorphisms_create(ctx, types, degree, index, &group) != IDS_OK ||
        ids_types_info(types, degree, index, &info) != IDS_OK) {
        fail(ids_ctx_message(ctx));
    }
    if (info.automorphisms != ids_automorphisms_order(group)) {
        fail("the order is not the one of the list of types");
    }
    printf("check(\"%s, degree %u, type %" PRIu64 ": %s\",[", family_name, degree, index,
           ids_automorphisms_structure(group));
    for (size_t i = 0; i < ids_automorphisms_count(group); i++) {
        if (ids_automorphisms_generator(group, i, image, IDS_MAX_DEGREE, &sign) != IDS_OK) {
            fail("no generator");
        }
        printf("%s[", i > 0 ? "," : "");
        for (uint32_t leaf = 0; leaf < degree; leaf++) {
            printf("%s%u", leaf > 0 ? "," : "", image[leaf]);
        }
        printf("]");
    }
    at = ids_automorphisms_structure(group);
    if (strcmp(at, "1") == 0) {
        printf("],%" PRIu64 ",1,Group(()));\n", ids_automorphisms_order(group));
    } else {
        read_product(p);
        if (*at != '\0') {
            fail("a structure is not read to its end");
        }
        printf("],%" PRIu64 ",%s,%s);\n", ids_automorphisms_order(group), p->order,
               p->group[0] != '\0' ? p->group : "fail");
    }
    ids_automorphisms_free(group);
    free(p);
}

static void print_family(ids_ctx *ctx, const family *f)
{
    ids_presentation *pres = NULL;
    ids_types *types = NULL;

    if (ids_presentation_read(ctx, f->text, strlen(f->text), f->name, &pres) != IDS_OK ||
        ids_types_create(ctx, ids_presentation_signature(pres), f->degree, &types) != IDS_OK) {
        fail(ids_ctx_message(ctx));
    }
    for (uint32_t degree = 1; degree <= f->degree; degree++) {
        uint64_t count = ids_types_count(types, degree);
        /* Of a long list some, spread over it: the larger degrees are much alike. */
        uint64_t step = count / 10 + 1;
        for (uint64_t index = 0; index < count; index += step) {
            print_type(ctx, types, f->name, degree, index);
        }
    }
    ids_types_free(types);
    ids_presentation_free(pres);
}

int main(void)
{
    ids_ctx *ctx = NULL;

    if (ids_ctx_create(NULL, &ctx) != IDS_OK) {
        fail("no context");
    }
    fputs("checked := 0;; isomorphic := 0;; wrong := 0;;\n"
          "complain := function(text, what)\n"
          "  Print(\"wrong \", what, \": \", text, \"\\n\"); wrong := wrong + 1; end;;\n"
          "alike := function(g, h)\n" /* one simple group an order below 20160 */
          "  if IsSimpleGroup(g) then return IsSimpleGroup(h); fi;\n"
          "  return IsomorphismGroups(g, h) <> fail; end;;\n"
          "check := function(text, images, order, written, structure)\n"
          "  local g;\n"
          "  g := Group(Concatenation([()], List(images, PermList))); checked := checked + 1;\n"
          "  if Size(g) <> order then complain(text, \"order of the generators\"); fi;\n"
          "  if written <> order then complain(text, \"order of the names\"); fi;\n"
          "  if structure = fail then return; fi;\n"
          "  if Size(structure) <> order then complain(text, \"order of the structure\"); fi;\n"
          "  if order <= 300 then\n"
          "    isomorphic := isomorphic + 1;\n"
          "    if not alike(g, structure) then\n"
          "      complain(text, \"structure\");\n"
          "    fi;\n"
          "  fi; end;;\n",
          stdout);
    for (size_t i = 0; i < sizeof families / sizeof families[0]; i++) {
        print_family(ctx, &families[i]);
    }
    fputs(
        "Print(\"checked \", checked, \" isomorphic \", isomorphic, \" wrong \", wrong, \"\\n\");\n"
        "if wrong > 0 then QUIT_GAP(1); fi;\nQUIT_GAP(0);\n",
        stdout);
    ids_ctx_free(ctx);
    return 0;
}
