/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Automorphism groups: orders and structures known from outside, generators tried on labelled
 * monomials, groups multiplied out element by element, memory.
 */
#include <string.h>

#include <idspan/gmp.h>
#include <idspan/idspan.h>

#include "support.h"
#include "tree/tree_private.h"

#define BINARY "operation a*b commutative\n"

typedef struct fixture {
    ids_ctx *ctx;
    ids_presentation *pres;
    ids_types *types;
} fixture;

static fixture open_types(const char *text, uint32_t degree)
{
    fixture f = {.ctx = test_ctx()};
    TEST_OK(f.ctx, ids_presentation_read(f.ctx, text, strlen(text), "test", &f.pres));
    TEST_OK(f.ctx, ids_types_create(f.ctx, ids_presentation_signature(f.pres), degree, &f.types));
    return f;
}

static void close_types(fixture *f)
{
    ids_types_free(f->types);
    ids_presentation_free(f->pres);
    test_ctx_free(f->ctx);
}

/* ---- known groups ------------------------------------------------------------------------- */

typedef struct known {
    const char *text;
    uint32_t degree;
    const char *type;
    uint64_t order;
    const char *structure;
} known;

/*
 * By hand from the definition: equal arguments are permuted by the operation, different ones go
 * their own ways. The orders of all types of a degree are checked in sum elsewhere (n!/order adds
 * up to the labelled count); the perfect binary tree has the Sylow 2-subgroup of S8, of order
 * 2^7, an iterated wreath product (Kaloujnine, Ann. Sci. Ec. Norm. Sup. 65 (1948)), which is from
 * memory.
 */
static const known groups[] = {
    {BINARY, 1, "x", 1, "1"},
    {BINARY, 3, "(x*x)*x", 2, "S2"},
    {BINARY, 4, "(x*x)*(x*x)", 8, "S2 wr S2"},
    {BINARY, 8, "((x*x)*(x*x))*((x*x)*(x*x))", 128, "S2 wr S2 wr S2"},
    {BINARY, 6, "((x*x)*(x*x))*(x*x)", 16, "S2 x (S2 wr S2)"},
    {BINARY, 6, "((x*x)*x)*((x*x)*x)", 8, "S2 wr S2"},
    {BINARY, 10, "(((x*x)*x)*(x*x))*(((x*x)*x)*(x*x))", 32, "(S2 x S2) wr S2"},
    {"operation (a,b,c) commutative\n", 9, "((x,x,x),(x,x,x),(x,x,x))", 1296, "S3 wr S3"},
    {BINARY "operation (a,b,c) commutative\n", 7, "((x,x,x),x*x,x*x)", 48, "S3 x (S2 wr S2)"},
    {"operation a*b\n", 4, "(x*x)*(x*x)", 1, "1"},
    {BINARY "operation (a,b,c) = (b,c,a)\n", 3, "(x,x,x)", 3, "Z3"},
    {BINARY "operation (a,b,c) = (b,c,a)\n", 6, "(x*x,x*x,x*x)", 24, "S2 wr Z3"},
    {BINARY "operation (a,b,c) = (b,c,a)\n", 4, "(x*x,x,x)", 2, "S2"},
    {"operation (a,b,c,d) = (b,c,d,a) = (d,c,b,a)\n", 4, "(x,x,x,x)", 8, "D4"},
    {"operation (a,b,c,d) = (b,c,a,d) = (b,a,d,c)\n", 4, "(x,x,x,x)", 12, "A4"},
    {BINARY "operation (a,b,c,d) = (b,a,d,c)\n", 4, "(x,x,x,x)", 2, "Z2"},
    {BINARY "operation (a,b,c,d) = (b,a,d,c)\n", 6, "(x*x,x*x,x,x)", 8, "S2 wr S2"},
    {BINARY "operation (a,b,c,d) = (b,a,d,c)\n", 10, "((x*x)*(x*x),(x*x)*(x*x),x,x)", 128,
     "S2 wr S2 wr S2"},
    {BINARY "operation [a,b,c] commutative\noperation (a,b,c,d) = (b,a,d,c)\n", 10,
     "([x,x,x],[x,x,x],x*x,x*x)", 288, "(S2 x S2 x S3 x S3) : Z2"},
};

static uint64_t find_type(const fixture *f, uint32_t degree, const char *written)
{
    for (uint64_t i = 0; i < ids_types_count(f->types, degree); i++) {
        char *text = NULL;
        bool same = false;
        TEST_OK(f->ctx, ids_types_print(f->ctx, f->types, degree, i, &text));
        same = strcmp(text, written) == 0;
        ids_string_free(f->ctx, text);
        if (same) {
            return i;
        }
    }
    ck_abort_msg("no type %s", written);
    return 0;
}

START_TEST(known_groups)
{
    const known *k = &groups[_i];
    fixture f = open_types(k->text, k->degree);
    ids_automorphisms *group = NULL;

    TEST_OK(f.ctx, ids_automorphisms_create(f.ctx, f.types, k->degree,
                                            find_type(&f, k->degree, k->type), &group));
    ck_assert_str_eq(ids_automorphisms_structure(group), k->structure);
    ck_assert_uint_eq(ids_automorphisms_order(group), k->order);
    ids_automorphisms_free(group);
    close_types(&f);
}
END_TEST

/* 64 leaves in 8 bunches of 8: the types are the set partitions of 64 points into 8 blocks of 8,
 * 64! / (8!^8 8!) of them (Stanley, Enumerative Combinatorics 1, section 1.9). */
START_TEST(beyond_64_bits)
{
    fixture f = open_types("operation t(a,b,c,d,e,f,g,h) commutative\n", 64);
    ids_automorphisms *group = NULL;
    mpz_t order;
    mpz_t monomials;
    mpz_t expected;
    uint64_t index = 0;
    bool found = false;

    mpz_inits(order, monomials, expected, NULL);
    for (; !found && index < ids_types_count(f.types, 64); index++) {
        ids_automorphisms_free(group);
        group = NULL;
        TEST_OK(f.ctx, ids_automorphisms_create(f.ctx, f.types, 64, index, &group));
        found = strcmp(ids_automorphisms_structure(group), "S8 wr S8") == 0;
    }
    ck_assert(found);
    ck_assert_uint_eq(ids_automorphisms_order(group), 0);
    TEST_OK(f.ctx, ids_automorphisms_exact(group, order, monomials));
    mpz_fac_ui(expected, 8);
    mpz_pow_ui(expected, expected, 9);
    ck_assert_int_eq(mpz_cmp(order, expected), 0);
    mpz_fac_ui(expected, 64);
    mpz_divexact(expected, expected, order);
    ck_assert_int_eq(mpz_cmp(monomials, expected), 0);
    mpz_clears(order, monomials, expected, NULL);
    ids_automorphisms_free(group);
    close_types(&f);
}
END_TEST

/* ---- every type of some signatures -------------------------------------------------------- */

typedef struct family {
    const char *text;
    uint32_t degree;
} family;

static const family families[] = {
    {BINARY, 8},
    {"operation a*b alternating\n", 8},
    {"operation a*b\n", 6},
    {"operation a*b alternating\noperation (a,b,c) commutative\n", 7},
    {"operation a*b alternating\noperation (a,b,c) alternating\n", 7},
    {BINARY "operation (a,b,c) = -(c,b,a)\n", 7},
    {"operation a*b alternating\noperation (a,b,c,d) = -(b,a,d,c)\n", 8},
    {"operation a*b alternating\noperation (a,b,c,d) = -(b,c,d,a)\n", 7},
    {BINARY "operation (a,b,c,d,e,f) = (b,c,d,a,f,e) = -(a,b,c,d,f,e)\n", 7},
};

/* Writes the prefix code of a type with letters in the order given. */
static size_t spell(const fixture *f, uint32_t degree, uint64_t index, const uint32_t *letter,
                    int32_t *code)
{
    const ids_types *types = f->types;
    uint32_t stack[IDSI_MAX_TOKENS] = {types->first[degree] + (uint32_t)index};
    size_t height = 1;
    size_t length = 0;
    uint32_t leaf = 0;

    while (height > 0) {
        uint32_t type = stack[--height];
        const idsi_type *entry = &types->list[type];
        if (type == 0) {
            code[length++] = (int32_t)letter[leaf++];
            continue;
        }
        code[length++] = -1 - (int32_t)entry->op;
        for (uint32_t i = types->sig->ops[entry->op].arity; i-- > 0;) {
            stack[height++] = types->children[entry->children + i];
        }
    }
    return length;
}

/* Sign by which a type with the letters differs from its canonical monomial, whose code is kept. */
static int canonical_code(const fixture *f, uint32_t degree, uint64_t index, const uint32_t *letter,
                          int32_t *code)
{
    ids_mono *mono = NULL;
    ids_mono *canonical = NULL;
    size_t length = spell(f, degree, index, letter, code);
    int sign = 0;

    TEST_OK(f->ctx, ids_mono_create(f->ctx, f->types->sig, code, length, &mono));
    TEST_OK(f->ctx, ids_mono_canonicalize(f->ctx, mono, &canonical, &sign));
    TEST_OK(f->ctx, ids_mono_code(canonical, code, IDSI_MAX_TOKENS, &length));
    ids_mono_free(canonical);
    ids_mono_free(mono);
    return sign;
}

/* The group that the generators generate, multiplied out; its order. */
static uint64_t closure_order(const ids_automorphisms *group, uint32_t degree)
{
    static uint8_t elements[50000][16];
    size_t order = 1;
    uint32_t image[IDS_MAX_DEGREE] = {0};
    int sign = 0;

    memset(elements[0], 0, sizeof elements[0]);
    for (uint32_t i = 0; i < degree; i++) {
        elements[0][i] = (uint8_t)i;
    }
    for (size_t e = 0; e < order; e++) {
        for (size_t g = 0; g < ids_automorphisms_count(group); g++) {
            uint8_t product[16] = {0};
            bool known_one = false;
            ck_assert_int_eq(ids_automorphisms_generator(group, g, image, IDS_MAX_DEGREE, &sign),
                             IDS_OK);
            for (uint32_t i = 0; i < degree; i++) {
                product[i] = elements[e][image[i] - 1];
            }
            for (size_t i = 0; i < order && !known_one; i++) {
                known_one = memcmp(elements[i], product, sizeof product) == 0;
            }
            if (!known_one) {
                ck_assert_uint_lt(order, 50000);
                memcpy(elements[order++], product, sizeof product);
            }
        }
    }
    return order;
}

static void check_type(const fixture *f, uint32_t degree, uint64_t index)
{
    ids_automorphisms *group = NULL;
    ids_type_info info = {0};
    uint32_t letter[IDS_MAX_DEGREE] = {0};
    int32_t code[IDSI_MAX_TOKENS] = {0};
    int32_t moved[IDSI_MAX_TOKENS] = {0};
    int sign = 0;

    TEST_OK(f->ctx, ids_types_info(f->types, degree, index, &info));
    TEST_OK(f->ctx, ids_automorphisms_create(f->ctx, f->types, degree, index, &group));
    ck_assert_uint_eq(ids_automorphisms_order(group), info.automorphisms);
    for (uint32_t i = 0; i < degree; i++) {
        letter[i] = i + 1;
    }
    int before = canonical_code(f, degree, index, letter, code);
    for (size_t g = 0; g < ids_automorphisms_count(group); g++) {
        TEST_OK(f->ctx, ids_automorphisms_generator(group, g, letter, IDS_MAX_DEGREE, &sign));
        ck_assert_int_eq(before, sign * canonical_code(f, degree, index, letter, moved));
        ck_assert_mem_eq(code, moved, sizeof code);
    }
    ck_assert_uint_lt(ids_automorphisms_count(group), 2 * degree);
    if (info.automorphisms <= 1500) {
        ck_assert_uint_eq(closure_order(group, degree), info.automorphisms);
    }
    ids_automorphisms_free(group);
}

/* The generators keep the type with the sign they say, by the code that makes monomials
 * canonical; and they generate a group of the order said. */
START_TEST(generators)
{
    fixture f = open_types(families[_i].text, families[_i].degree);

    for (uint32_t degree = 1; degree <= families[_i].degree; degree++) {
        for (uint64_t index = 0; index < ids_types_count(f.types, degree); index++) {
            check_type(&f, degree, index);
        }
    }
    close_types(&f);
}
END_TEST

/* ---- arguments and memory ----------------------------------------------------------------- */

START_TEST(arguments)
{
    fixture f = open_types(BINARY, 4);
    ids_automorphisms *group = NULL;
    uint32_t image[4] = {0};
    int sign = 0;

    TEST_STATUS(f.ctx, ids_automorphisms_create(f.ctx, f.types, 4, 2, &group), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_automorphisms_create(f.ctx, f.types, 5, 0, &group), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_automorphisms_create(f.ctx, NULL, 4, 0, &group), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_automorphisms_create(f.ctx, f.types, 4, 0, NULL), IDS_ERR_ARG);
    TEST_OK(f.ctx, ids_automorphisms_create(f.ctx, f.types, 4, 1, &group));
    ck_assert_uint_eq(ids_automorphisms_count(group), 2);
    TEST_STATUS(f.ctx, ids_automorphisms_generator(group, 2, image, 4, &sign), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_automorphisms_generator(group, 0, image, 3, &sign), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_automorphisms_generator(group, 0, NULL, 4, &sign), IDS_ERR_ARG);
    ids_automorphisms_free(group);
    ids_automorphisms_free(NULL);
    ck_assert_uint_eq(ids_automorphisms_order(NULL), 0);
    ck_assert_uint_eq(ids_automorphisms_count(NULL), 0);
    ck_assert_str_eq(ids_automorphisms_structure(NULL), "");
    close_types(&f);
}
END_TEST

static ids_status all_groups(ids_ctx *ctx, void *data)
{
    const family *of = data;
    ids_presentation *pres = NULL;
    ids_types *types = NULL;
    ids_automorphisms *group = NULL;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_presentation_read(ctx, of->text, strlen(of->text), "test", &pres));
    IDSI_TRY(ids_types_create(ctx, ids_presentation_signature(pres), of->degree, &types));
    for (uint64_t index = 0; index < ids_types_count(types, of->degree); index++) {
        IDSI_TRY(ids_automorphisms_create(ctx, types, of->degree, index, &group));
        ids_automorphisms_free(group);
        group = NULL;
    }
done:
    ids_types_free(types);
    ids_presentation_free(pres);
    return st;
}

START_TEST(memory)
{
    family small = {BINARY, 6};
    family listed = {"operation (a,b,c,d) = (b,a,d,c) = (c,d,a,b)\n", 7};

    TEST_OOM(all_groups, &small);
    TEST_OOM(all_groups, &listed);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("tree_automorphism");
    TCase *tcase = tcase_create("automorphism");

    tcase_set_timeout(tcase, 30);
    tcase_add_loop_test(tcase, known_groups, 0, (int)(sizeof groups / sizeof groups[0]));
    tcase_add_test(tcase, beyond_64_bits);
    tcase_add_loop_test(tcase, generators, 0, (int)(sizeof families / sizeof families[0]));
    tcase_add_test(tcase, arguments);
    tcase_add_test(tcase, memory);
    suite_add_tcase(s, tcase);
    return s;
}

int main(void)
{
    return test_run(suite());
}
