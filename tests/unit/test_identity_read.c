/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Reading: texts that must come to the same presentation, texts that must not, and what is known
 * of each identity. The expected values follow from the format by hand.
 */
#include <string.h>

#include <idspan/identity.h>

#include "support.h"

static ids_presentation *read_text(ids_ctx *ctx, const char *text)
{
    ids_presentation *pres = NULL;
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    return pres;
}

typedef struct pair {
    const char *a;
    const char *b;
    bool equal;
} pair;

#define C "operation a*b commutative\n"
#define N "operation a*b\n"
#define T "operation {a,b,c} = {c,b,a}\n"
#define A "operation [a,b] alternating\n"

static const pair pairs[] = {
    /* blanks, comments, line ends, byte order mark */
    {N "identity x*y = y*x\n", "\xEF\xBB\xBF operation a * b # c\r\n\r\nidentity x*y=y*x", true},
    {N "identity x*y + y*x\n", N "identity x*y +\n\n # and\n  y*x\n", true},
    {N "identity x*y + y*x\n", N "identity (x*y\n + y*x\n)\n", true},
    {N "identity n: x*y\n", N "identity n:\nx *\ny\n", true},
    {"operation a o b\nidentity x o y\n", "operation a o b\nidentity x o\n y\n", true},
    /* coefficients */
    {N "identity 2*x*y - 1/3*y*x\n", N "identity 2x*y - 1/3 y*x\n", true},
    {N "identity 2*x*y - 1/3*y*x\n", N "identity 2*(x*y) - 2/6(y*x) + 0\n", true},
    {N "identity 6*x*y - y*x\n", N "identity 2*3*x*y - 1*y*x\n", true},
    {N "identity x*y\n", N "identity 2*x*y - x*y\n", true},
    {N "identity 2*x*y\n", N "identity x*2*y\n", true},
    {N "identity 2*x*y\n", N "identity x*y\n", false},
    {"operation a/b\nidentity 1/2*x/y\n", "operation a/b\nidentity 1/2*(x/y)\n", true},
    {"operation a.b\nidentity 2*x.y\n", "operation a.b\nidentity 2 x.y\n", true},
    {N "identity x*y \xE2\x88\x92 y*x\n", N "identity x*y - y*x\n", true}, /* U+2212 */
    {N "identity - x*y\n", N "identity 0 = x*y\n", true},
    {N "identity + x*y\n", N "identity x*y\n", true},
    {N "identity (-x)*y\n", N "identity -x*y\n", true},
    {N "identity x*(-2*y)\n", N "identity -2*x*y\n", true},
    /* equations and products of sums */
    {N "identity x*y = y*x\n", N "identity x*y - y*x\n", true},
    {N "identity x*y = y*x\n", N "identity y*x = x*y\n", false}, /* the sign is kept */
    {N "identity (x+y)*(x-y) = x*x - y*y\n", N "identity y*x - x*y\n", true},
    {N "identity (2*x+x)*y\n", N "identity 3*x*y\n", true},
    {N "identity ((x))*(((y)))\n", N "identity x*y\n", true},
    {C "identity x*(y*z) = (z*y)*x + x*(z*z) - x*(z*z)\n", C "identity 0*x*(y*z)\n", true},
    /* symmetry */
    {C "identity y*x\n", C "identity x*y\n", true},
    {A "identity [y,x]\n", A "identity -[x,y]\n", true},
    {T "identity {x,y,z}\n", T "identity {z,y,x}\n", true},
    {T "identity {x,y,z}\n", T "identity {y,x,z}\n", false},
    {"operation <a,b,c> = -<b,a,c> = -<a,c,b>\n", "operation <x,y,z> alternating\n", true},
    {"operation <a,b,c> = <b,c,a>\n", "operation <a,b,c> = <c,a,b>\n", true},
    {"operation <a,b,c> = <b,c,a>\n", "operation <a,b,c> = -<c,b,a>\n", false},
    {"operation {a,b} = {a,b}\n", "operation {a,b} none\n", true},
    {"operation {a,b}\n", "operation {a,b} commutative\n", false},
    {"operation {a,b} = + {b,a}\n", "operation {a,b} commutative\n", true},
    {"operation t(a,b,c,d) = t(b,a,d,c) = t(c,d,a,b)\n",
     "operation t(a,b,c,d) = t(c,d,a,b) = t(d,c,b,a)\n", true}, /* Klein's four-group */
    /* operations */
    {N, "operation a.b\n", false},
    {N A, A N, false},
    {"operation (a,b)\nidentity (x,y)\n", "operation (a,b)\nidentity ((x),(y))\n", true},
    {"operation [a,b]\noperation [a,b,c]\nidentity [[x,y],y,x]\n",
     "operation [a,b]\noperation [a,b,c]\nidentity [[x,y],(y),x]\n", true},
    {"operation o(a,b)\noperation a o b\nidentity o(x,y) o z\n",
     "operation o(a,b)\noperation a o b\nidentity (o(x,y)) o(z)\n", true},
    {N "identity x*y\noperation [a,b]\n", N "operation [a,b]\nidentity x*y\n", true},
    {"operation a\xE2\x88\x98"
     "b\nidentity x\xE2\x88\x98y\n",
     "operation a \xE2\x88\x98 b\nidentity x \xE2\x88\x98 y\n", true},
    {"operation a**b\nidentity x**y\n", "operation a ** b\nidentity 1*x**y\n", true},
    /* definitions */
    {N "define ass(a,b,c) = (a*b)*c - a*(b*c)\nidentity ass(x,x,y)\n",
     N "identity (x*x)*y = x*(x*y)\n", true},
    {N "define ass(a,b,c) = (a*b)*c - a*(b*c)\nidentity ass(x,z,2*z)\n",
     N "identity 2*(x*z)*z - 2*x*(z*z) + 0*x\n", true},
    {N "define f(x) = x*x\ndefine g(x,y) = f(x+y) - f(x) - f(y)\nidentity g(x,y)\n",
     N "identity x*y + y*x\n", true},
    {N "define f(x) = x*x\nidentity f(f(x))\n", N "identity (x*x)*(x*x)\n", true},
    {N "define f(x,y) = y*x\nidentity f(y,x)\n", N "identity x*y\n", true},
    {N "define f(x) = 0\nidentity f(x*x) + x\n", N "identity x\n", true},
    {A "define j(a,b,c) = [[a,b],c] + [[b,c],a] + [[c,a],b]\nidentity j(x,y,y)\n",
     A "identity 0*[[x,y],y]\n", true},
    /* names of identities and of variables */
    {N "identity n: x*y\n", N "identity x*y\n", false},
    {N "identity n: x*y\n", N "candidate n: x*y\n", false},
    {N "identity left-alternative-2: x*y\n", N "identity left-alternative-2 : x*y\n", true},
    {N "identity x*y\nidentity y*x\n", N "identity y*x\nidentity x*y\n", false},
    {N "identity x2*x10 - x10*x2\n", N "identity a*b - b*a\n", true}, /* order of the names */
    {N "identity x'*x\n", N "identity b*a\n", true},
    {N "identity x\xE2\x82\x81*x\xE2\x82\x82\n", N "identity a*b\n", true}, /* subscripts */
    {N "identity \xCE\xB1*\xCE\xB2\n", N "identity a*b\n", true},           /* Greek letters */
};

START_TEST(test_pairs)
{
    const pair *p = &pairs[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *a = read_text(ctx, p->a);
    ids_presentation *b = read_text(ctx, p->b);
    ck_assert_msg(ids_presentation_equal(a, b) == p->equal, "%s\nand\n%s", p->a, p->b);
    ck_assert_msg(ids_presentation_equal(b, a) == p->equal, "%s\nand\n%s", p->b, p->a);
    ck_assert(ids_presentation_equal(a, a));
    ids_presentation_free(a);
    ids_presentation_free(b);
    test_ctx_free(ctx);
}
END_TEST

typedef struct known {
    const char *identity;
    uint32_t degree;
    uint64_t terms;
    uint64_t linear_terms;
    bool multilinear;
} known;

/*
 * Numbers of linear terms by hand: m! orders of the labels, divided by those that the symmetry
 * identifies. Jordan: ((a*b)*c)*d with {a,b,d} cyclic and (a*b)*(c*d), three each (the linearised
 * Jordan identity, common knowledge). x^8 balanced: 8! / 2^7.
 */
static const known commutative[] = {
    {"x", 1, 1, 1, true},
    {"x*y", 2, 1, 1, true},
    {"x*x", 2, 1, 1, false},
    {"(x*x)*x", 3, 1, 3, false},
    {"((x*x)*y)*x = (x*x)*(y*x)", 4, 2, 6, false},
    {"((x*x)*(x*x))*((x*x)*(x*x))", 8, 1, 315, false},
    {"((x*x)*x)*x", 4, 1, 12, false},
    {"x*y - y*x", 2, 0, 0, true},
    {"0*(x*x)*y", 3, 0, 0, false},
    {"((((((x*x)*x)*x)*x)*x)*x)*x", 8, 1, 20160, false},
    {"(x*y)*z + x*(y*z) - 2*y*(z*x)", 3, 3, 3, true},
};

START_TEST(test_info)
{
    const known *k = &commutative[_i];
    ids_ctx *ctx = test_ctx();
    char text[200] = C "# line 2\nidentity name: ";
    strcat(text, k->identity);
    ids_presentation *pres = read_text(ctx, text);
    ids_identity_info info;
    TEST_OK(ctx, ids_presentation_info(pres, IDS_ROLE_IDENTITY, 0, &info));
    ck_assert_str_eq(info.name, "name");
    ck_assert_uint_eq(info.line, 3);
    ck_assert_uint_eq(info.degree, k->degree);
    ck_assert_uint_eq(info.terms, k->terms);
    ck_assert_uint_eq(info.linear_terms, k->linear_terms);
    ck_assert_int_eq(info.multilinear, k->multilinear);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_access)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read_text(ctx, N T "identity i: x*y\ncandidate c: y*x\n"
                                                "identity {x,y,z}\n");
    ids_identity_info info;
    ids_operation op;
    const ids_signature *sig = ids_presentation_signature(pres);
    ck_assert_uint_eq(ids_signature_count(sig), 2);
    TEST_OK(ctx, ids_signature_operation(sig, 1, &op));
    ck_assert_str_eq(op.open, "{");
    ck_assert_str_eq(op.close, "}");
    ck_assert_uint_eq(op.group_order, 2);
    ck_assert_uint_eq(ids_presentation_count(pres, IDS_ROLE_IDENTITY), 2);
    ck_assert_uint_eq(ids_presentation_count(pres, IDS_ROLE_CANDIDATE), 1);
    TEST_OK(ctx, ids_presentation_info(pres, IDS_ROLE_CANDIDATE, 0, &info));
    ck_assert_str_eq(info.name, "c");
    TEST_OK(ctx, ids_presentation_info(pres, IDS_ROLE_IDENTITY, 1, &info));
    ck_assert_str_eq(info.name, "");
    ck_assert_uint_eq(info.line, 5);
    ck_assert_int_eq(ids_presentation_info(pres, IDS_ROLE_IDENTITY, 2, &info), IDS_ERR_ARG);
    ck_assert_int_eq(ids_presentation_info(pres, IDS_ROLE_IDENTITY, 0, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_presentation_info(NULL, IDS_ROLE_IDENTITY, 0, &info), IDS_ERR_ARG);
    ck_assert_uint_eq(ids_presentation_count(NULL, IDS_ROLE_IDENTITY), 0);
    ck_assert_ptr_null(ids_presentation_signature(NULL));
    ck_assert(ids_presentation_equal(NULL, NULL));
    ck_assert(!ids_presentation_equal(pres, NULL));
    ids_presentation_free(pres);
    ids_presentation_free(NULL);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_arguments)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ck_assert_int_eq(ids_presentation_read(ctx, NULL, 0, NULL, &pres), IDS_ERR_ARG);
    ck_assert_int_eq(ids_presentation_read(ctx, N, 5, NULL, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_presentation_read(NULL, N, 5, NULL, &pres), IDS_ERR_ARG);
    ck_assert_ptr_null(pres);
    ck_assert_int_eq(ids_presentation_read(ctx, "x", 1, NULL, &pres), IDS_ERR_PARSE);
    ck_assert_int_eq(strncmp(ids_ctx_message(ctx), "input:1:1: ", 11), 0);
    test_ctx_free(ctx);
}
END_TEST

/* A text need not end in NUL or line feed: what follows is not read. */
START_TEST(test_length)
{
    ids_ctx *ctx = test_ctx();
    static const char text[] = "operation a*b\nidentity x*yz;;;";
    ids_presentation *pres = NULL;
    ids_presentation *other = read_text(ctx, N "identity x*y\n");
    TEST_OK(ctx, ids_presentation_read(ctx, text, sizeof text - 5, NULL, &pres));
    ck_assert(ids_presentation_equal(pres, other));
    ids_presentation_free(pres);
    ids_presentation_free(other);
    test_ctx_free(ctx);
}
END_TEST

/* A cancelled call says so and leaves nothing. */
START_TEST(test_cancel)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    const char *text = N "identity x*y\n";
    ids_ctx_cancel(ctx);
    TEST_STATUS(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres),
                IDS_ERR_CANCELLED);
    ck_assert_ptr_null(pres);
    pres = read_text(ctx, text);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("identity_read");
    TCase *tc = tcase_create("read");
    tcase_add_loop_test(tc, test_pairs, 0, (int)(sizeof pairs / sizeof pairs[0]));
    tcase_add_loop_test(tc, test_info, 0, (int)(sizeof commutative / sizeof commutative[0]));
    tcase_add_test(tc, test_access);
    tcase_add_test(tc, test_arguments);
    tcase_add_test(tc, test_length);
    tcase_add_test(tc, test_cancel);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
