/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Printing: exact texts. The order of terms and arguments follows from the order of trees (larger
 * shapes first, an earlier operation is larger, then smaller labels) by hand.
 */
#include <string.h>

#include <idspan/identity.h>

#include "support.h"

typedef struct printed {
    const char *text;
    const char *expected;
} printed;

static const printed presentations[] = {
    {"operation a*b commutative\nidentity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n",
     "operation a*b commutative\nidentity jordan: ((x*x)*y)*x - (x*x)*(x*y) = 0\n"},
    {"operation [x,y] alternating # Lie\ncandidate [[x,y],z] + [[y,z],x]\n",
     "operation [a,b] alternating\ncandidate [[x,y],z] + [[y,z],x] = 0\n"},
    {"operation {x,y,z} = {z,y,x}\nidentity -1/2*{z,y,x} + 3{y,x,z}\n",
     "operation {a,b,c} = {c,b,a}\nidentity -1/2*{x,y,z} + 3*{y,x,z} = 0\n"},
    {"operation t(x,y,z,w) = -t(y,x,z,w) = t(y,x,w,z)\n",
     "operation t(a,b,c,d) = -t(b,a,c,d) = t(b,a,d,c)\n"},
    {"operation u o v\noperation a(x,y)\nidentity (x o a(y,z)) o w\n",
     "operation b o c\noperation a(b,c)\nidentity (x o a(y,z)) o w = 0\n"},
    {"operation p q r\noperation p.r\nidentity (x q y).z - x q (y.z)\n",
     "operation a q b\noperation a.b\nidentity -x q (y.z) + (x q y).z = 0\n"},
    {"operation x*y none\nidentity trivial: y*x - y*x\n",
     "operation a*b\nidentity trivial: y*x = y*x\n"},
    {"operation x*y commutative\nmodel m-1 associative: u*v = 2/4 u v + v u - 1/2*v u\n",
     "operation a*b commutative\nmodel m-1 associative: u*v = 1/2*u v + 1/2*v u\n"},
    {"operation {x,y,z} = {z,y,x}\noperation x*y\nmodel m associative: {x,y,z} = x y' z + z y' x\n"
     "model n algebra \"../a b.alg\"\nmodel m associative: x*y = 0\n",
     "operation {a,b,c} = {c,b,a}\noperation a*b\n"
     "model m associative: {x,y,z} = x y' z + z y' x\nmodel m associative: x*y = 0\n"
     "model n algebra \"../a b.alg\"\n"},
    {"operation x*y\nmodel m over \"o.pres\": x*y = [x,  y] - # so\n 2 {x,y,y}\n",
     "operation a*b\nmodel m over \"o.pres\": x*y = [x, y] - 2 {x,y,y}\n"},
    {"operation (x,y)\noperation <x,y>\nidentity (<x,y>,x) - 10/4*<(y,x),x>\n",
     "operation (a,b)\noperation <a,b>\nidentity (<x,y>,x) - 5/2*<(y,x),x> = 0\n"},
};

START_TEST(test_presentations)
{
    const printed *p = &presentations[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_presentation *again = NULL;
    char *text = NULL;
    TEST_OK(ctx, ids_presentation_read(ctx, p->text, strlen(p->text), NULL, &pres));
    TEST_OK(ctx, ids_presentation_print(ctx, pres, &text));
    ck_assert_str_eq(text, p->expected);
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &again));
    ck_assert(ids_presentation_equal(pres, again));
    ids_string_free(ctx, text);
    ids_presentation_free(pres);
    ids_presentation_free(again);
    test_ctx_free(ctx);
}
END_TEST

typedef struct forms {
    const char *operations;
    const char *identity;
    const char *written;
    const char *linear;
} forms;

/* The linearised Jordan identity is as in the textbooks, from memory. */
static const forms identities[] = {
    {"operation a*b commutative\n", "((x*x)*y)*x = (x*x)*(y*x)", "((x*x)*y)*x - (x*x)*(x*y)",
     "((a*b)*d)*c + ((a*c)*d)*b + ((b*c)*d)*a - (a*b)*(c*d) - (a*c)*(b*d) - (a*d)*(b*c)"},
    {"operation a*b\n", "(x*x)*y = x*(x*y)", "(x*x)*y - x*(x*y)",
     "(a*b)*c + (b*a)*c - a*(b*c) - b*(a*c)"},
    {"operation a*b\n", "1/2*x*y + 1/3*y*x", "1/2*x*y + 1/3*y*x", "3*a*b + 2*b*a"},
    {"operation a*b\n", "-4*x*y + 6*y*x", "-4*x*y + 6*y*x", "2*a*b - 3*b*a"},
    {"operation [a,b] alternating\n", "[x,x]", "0", "0"},
    {"operation [a,b] alternating\n", "[[x,y],x]", "[[x,y],x]", "[[a,c],b] + [[b,c],a]"},
    {"operation a(b,c)\n", "a(x,x)", "a(x,x)", "a(b,c) + a(c,b)"},
};

START_TEST(test_forms)
{
    const forms *f = &identities[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    char text[400];
    char *out = NULL;
    strcpy(text, f->operations);
    strcat(text, "candidate ");
    strcat(text, f->identity);
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    TEST_OK(ctx, ids_presentation_print_identity(ctx, pres, IDS_ROLE_CANDIDATE, 0, IDS_FORM_WRITTEN,
                                                 &out));
    ck_assert_str_eq(out, f->written);
    ids_string_free(ctx, out);
    TEST_OK(ctx, ids_presentation_print_identity(ctx, pres, IDS_ROLE_CANDIDATE, 0, IDS_FORM_LINEAR,
                                                 &out));
    ck_assert_str_eq(out, f->linear);
    ids_string_free(ctx, out);
    out = NULL;
    ck_assert_int_eq(
        ids_presentation_print_identity(ctx, pres, IDS_ROLE_IDENTITY, 0, IDS_FORM_LINEAR, &out),
        IDS_ERR_ARG);
    ck_assert_int_eq(
        ids_presentation_print_identity(ctx, pres, IDS_ROLE_CANDIDATE, 0, (ids_form)7, &out),
        IDS_ERR_ARG);
    ck_assert_ptr_null(out);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_operation)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    char *out = NULL;
    const char *text = "operation a*b commutative\noperation <x,y,z>\n";
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    const ids_signature *sig = ids_presentation_signature(pres);
    TEST_OK(ctx, ids_signature_print_operation(ctx, sig, 0, &out));
    ck_assert_str_eq(out, "a*b commutative");
    ids_string_free(ctx, out);
    TEST_OK(ctx, ids_signature_print_operation(ctx, sig, 1, &out));
    ck_assert_str_eq(out, "<a,b,c>");
    ids_string_free(ctx, out);
    out = NULL;
    ck_assert_int_eq(ids_signature_print_operation(ctx, sig, 2, &out), IDS_ERR_ARG);
    ck_assert_int_eq(ids_signature_print_operation(ctx, NULL, 0, &out), IDS_ERR_ARG);
    ck_assert_int_eq(ids_presentation_print(ctx, NULL, &out), IDS_ERR_ARG);
    ck_assert_int_eq(ids_presentation_print(ctx, pres, NULL), IDS_ERR_ARG);
    ck_assert_ptr_null(out);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("identity_print");
    TCase *tc = tcase_create("print");
    tcase_add_loop_test(tc, test_presentations, 0,
                        (int)(sizeof presentations / sizeof presentations[0]));
    tcase_add_loop_test(tc, test_forms, 0, (int)(sizeof identities / sizeof identities[0]));
    tcase_add_test(tc, test_operation);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
