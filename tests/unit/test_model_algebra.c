/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Algebras: made from constants, read, printed, compared, matched. Expected constants are worked
 * out by hand beside each check.
 */
#include <dirent.h>
#include <stdio.h>
#include <string.h>

#include <idspan/algebra.h>

#include "support.h"

static ids_algebra *read_text(ids_ctx *ctx, const char *text)
{
    ids_algebra *algebra = NULL;
    TEST_OK(ctx, ids_algebra_read(ctx, text, strlen(text), "t.alg", &algebra));
    return algebra;
}

/* The constant of a product and a result, as a fraction in lowest terms; "0" when there is none. */
static void has_constant(const ids_algebra *algebra, size_t op, const char *arguments,
                         uint32_t result, int64_t numerator, int64_t denominator)
{
    ids_constant c = {0};
    for (size_t i = 0; i < ids_algebra_count(algebra, op); i++) {
        bool same = true;
        ck_assert_int_eq(ids_algebra_constant(algebra, op, i, &c), IDS_OK);
        for (size_t k = 0; arguments[k] != '\0'; k++) {
            same = same && c.argument[k] == (uint32_t)(arguments[k] - '0');
        }
        if (same && c.result == result) {
            ck_assert_int_eq(c.operation, (uint32_t)op);
            ck_assert_int_eq(c.numerator, numerator);
            ck_assert_int_eq(c.denominator, denominator);
            return;
        }
    }
    ck_assert_msg(numerator == 0, "%s has no result %u", arguments, result);
}

/* 1/2 y + 2/3 z - 3 x + y = -3 x + 3/2 y + 2/3 z. */
START_TEST(test_values)
{
    ids_ctx *ctx = test_ctx();
    ids_algebra *a = read_text(ctx, "# by hand\n"
                                    "operation a*b commutative\noperation [a,b,c] alternating\n"
                                    "basis x y z\n"
                                    "x*y = 1/2 y + 4/6*z -\n  3(x - 1/3 y)\n"
                                    "z*z = x - x\n[y,x,z] = z\n");
    ck_assert_uint_eq(ids_algebra_dimension(a), 3);
    ck_assert_uint_eq(ids_signature_count(ids_algebra_signature(a)), 2);
    ck_assert_str_eq(ids_algebra_basis_name(a, 2), "z");
    ck_assert_ptr_null(ids_algebra_basis_name(a, 3));
    ck_assert_uint_eq(ids_algebra_count(a, 0), 6);
    ck_assert_uint_eq(ids_algebra_count(a, 1), 6);
    ck_assert_uint_eq(ids_algebra_count(a, 2), 0);
    has_constant(a, 0, "01", 0, -3, 1);
    has_constant(a, 0, "10", 1, 3, 2);
    has_constant(a, 0, "10", 2, 2, 3);
    has_constant(a, 0, "22", 0, 0, 1);
    has_constant(a, 1, "102", 2, 1, 1);
    has_constant(a, 1, "012", 2, -1, 1);
    has_constant(a, 1, "120", 2, -1, 1); /* an even permutation of 012 */
    ids_algebra_free(a);
    test_ctx_free(ctx);
}
END_TEST

/* {a,b,c} = {c,b,a}: x y z gives z y x and nothing else; x y x stands alone. */
START_TEST(test_generated)
{
    ids_ctx *ctx = test_ctx();
    ids_algebra *a = read_text(ctx, "basis x y z\noperation {a,b,c} = {c,b,a}\n"
                                    "{z,y,x} = 2 y\n{x,y,x} = z\n");
    ck_assert_uint_eq(ids_algebra_count(a, 0), 3);
    has_constant(a, 0, "012", 1, 2, 1);
    has_constant(a, 0, "210", 1, 2, 1);
    has_constant(a, 0, "010", 2, 1, 1);
    ids_algebra_free(a);
    test_ctx_free(ctx);
}
END_TEST

/* Five different arguments of a commutative operation can stand in 120 orders; two pairs and one
 * in 5!/(2! 2!) = 30. */
START_TEST(test_orbits)
{
    ids_ctx *ctx = test_ctx();
    ids_algebra *a = read_text(ctx, "basis a b c d e\noperation t(p,q,r,s,u) commutative\n"
                                    "t(e,b,c,d,a) = a\nt(a,b,b,a,c) = b\n");
    ck_assert_uint_eq(ids_algebra_count(a, 0), 150);
    has_constant(a, 0, "43210", 0, 1, 1);
    has_constant(a, 0, "21010", 1, 1, 1);
    ids_algebra_free(a);
    test_ctx_free(ctx);
}
END_TEST

static const char *const printed[] = {
    "basis e1 e2 e3\noperation a*b commutative\ne1*e1 = e1\ne1*e2 = 1/2*e2 + e3\n",
    "basis x y\noperation a o b\noperation {a,b,c} = -{c,b,a}\nx o y = -x - 7/3*y\n"
    "{x,x,y} = 9223372036854775807*x\n",
    "basis \xCE\xB1 \xCE\xB2'\noperation t(a,b)\noperation <a,b> alternating\n"
    "t(\xCE\xB2',\xCE\xB1) = -1/9223372036854775807*\xCE\xB1\n",
    "basis n\noperation a*b\n",
};

/* The canonical text comes back as it was, and as the same algebra. */
START_TEST(test_print)
{
    ids_ctx *ctx = test_ctx();
    char *text = NULL;
    ids_algebra *a = read_text(ctx, printed[_i]);
    TEST_OK(ctx, ids_algebra_print(ctx, a, &text));
    ck_assert_str_eq(text, printed[_i]);
    ids_algebra *b = read_text(ctx, text);
    ck_assert(ids_algebra_equal(a, b));
    for (size_t other = 0; other < sizeof printed / sizeof *printed; other++) {
        ids_algebra *c = read_text(ctx, printed[other]);
        ck_assert_int_eq(ids_algebra_equal(a, c), other == (size_t)_i);
        ids_algebra_free(c);
    }
    ids_string_free(ctx, text);
    ids_algebra_free(a);
    ids_algebra_free(b);
    test_ctx_free(ctx);
}
END_TEST

/* The same algebra from constants, read, and with everything given twice. */
START_TEST(test_create)
{
    ids_ctx *ctx = test_ctx();
    const ids_operation op = {.notation = IDS_NOTATION_INFIX,
                              .open = "*",
                              .arity = 2,
                              .symmetry = IDS_SYMMETRY_ALTERNATING};
    const ids_constant list[] = {
        {0, {1, 0}, 2, -6, 4}, {0, {0, 1}, 2, 3, 2}, {0, {2, 0}, 0, 0, 5}, {0, {0, 2}, 1, 2, -4}};
    static const char text[] =
        "basis e1 e2 e3\noperation a*b alternating\ne1*e2 = 3/2*e3\ne1*e3 = -1/2*e2\n";
    ids_signature *sig = NULL;
    ids_algebra *made = NULL;
    char *out = NULL;

    TEST_OK(ctx, ids_signature_create(ctx, &op, 1, &sig));
    TEST_OK(ctx, ids_algebra_create(ctx, sig, 3, NULL, list, 4, &made));
    ids_signature_free(sig);
    TEST_OK(ctx, ids_algebra_print(ctx, made, &out));
    ck_assert_str_eq(out, text);
    ids_algebra *read = read_text(ctx, text);
    ck_assert(ids_algebra_equal(made, read));
    ids_string_free(ctx, out);
    ids_algebra_free(read);
    ids_algebra_free(made);
    test_ctx_free(ctx);
}
END_TEST

/* Names that are made up stay clear of operations. */
START_TEST(test_names)
{
    ids_ctx *ctx = test_ctx();
    const ids_operation op = {
        .notation = IDS_NOTATION_PREFIX, .open = "e2", .arity = 3, .symmetry = 0};
    ids_signature *sig = NULL;
    ids_algebra *made = NULL;

    TEST_OK(ctx, ids_signature_create(ctx, &op, 1, &sig));
    TEST_OK(ctx, ids_algebra_create(ctx, sig, 2, NULL, NULL, 0, &made));
    ck_assert_str_ne(ids_algebra_basis_name(made, 1), "e2");
    ids_algebra_free(made);
    TEST_OK(ctx, ids_algebra_create(ctx, sig, 1, NULL, NULL, 0, &made));
    ck_assert_str_eq(ids_algebra_basis_name(made, 0), "e1");
    ids_algebra_free(made);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_refuse)
{
    ids_ctx *ctx = test_ctx();
    const ids_operation op = {.notation = IDS_NOTATION_INFIX,
                              .open = "*",
                              .arity = 2,
                              .symmetry = IDS_SYMMETRY_ALTERNATING};
    static const struct {
        ids_constant list[2];
        ids_status status;
        const char *message; /* a part of it */
    } bad[] = {
        {{{1, {0, 1}, 0, 1, 1}, {0}}, IDS_ERR_ARG, "operation"},
        {{{0, {0, 2}, 0, 1, 1}, {0}}, IDS_ERR_ARG, "argument"},
        {{{0, {0, 1}, 2, 1, 1}, {0}}, IDS_ERR_ARG, "result"},
        {{{0, {0, 1}, 0, 1, 0}, {0}}, IDS_ERR_ARG, "denominator"},
        {{{0, {0, 0}, 0, 1, 1}, {0, {0, 1}, 0, 1, 1}}, IDS_ERR_DOMAIN, "e1*e1 is 0"},
        {{{0, {1, 0}, 0, 1, 1}, {0, {0, 1}, 0, 1, 1}}, IDS_ERR_DOMAIN, "e1*e2 has two"},
        {{{0, {1, 0}, 0, 0, 1}, {0, {0, 1}, 0, 1, 1}}, IDS_ERR_DOMAIN, "e1*e2 has two"},
        {{{0, {1, 0}, 0, INT64_MIN, 1}, {0, {0, 1}, 1, 1, 1}}, IDS_ERR_LIMIT, "64 bits"},
    };
    static const char *const names[][2] = {
        {"a", "a"}, {"a", NULL}, {"a", "2b"}, {"a", ""}, {"basis", "b"}, {"a", "b c"}, {"*", "b"}};
    ids_signature *sig = NULL;
    ids_algebra *made = NULL;

    TEST_OK(ctx, ids_signature_create(ctx, &op, 1, &sig));
    for (size_t i = 0; i < sizeof bad / sizeof *bad; i++) {
        const size_t count = bad[i].list[1].denominator == 0 ? 1 : 2;
        TEST_STATUS(ctx, ids_algebra_create(ctx, sig, 2, NULL, bad[i].list, count, &made),
                    bad[i].status);
        ck_assert_msg(strstr(ids_ctx_message(ctx), bad[i].message) != NULL, "%s",
                      ids_ctx_message(ctx));
    }
    for (size_t i = 0; i < sizeof names / sizeof *names; i++) {
        TEST_STATUS(ctx, ids_algebra_create(ctx, sig, 2, names[i], NULL, 0, &made), IDS_ERR_ARG);
    }
    TEST_STATUS(ctx, ids_algebra_create(ctx, sig, 0, NULL, NULL, 0, &made), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_create(ctx, sig, 256, NULL, NULL, 0, &made), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_create(ctx, sig, 1, NULL, NULL, 1, &made), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_create(ctx, NULL, 1, NULL, NULL, 0, &made), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_create(ctx, sig, 1, NULL, NULL, 0, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_read(ctx, NULL, 0, NULL, &made), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_read(ctx, "", 0, NULL, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_algebra_print(ctx, NULL, NULL), IDS_ERR_ARG);
    ck_assert_ptr_null(made);
    ck_assert(ids_algebra_equal(NULL, NULL));
    ck_assert_uint_eq(ids_algebra_dimension(NULL), 0);
    ck_assert_ptr_null(ids_algebra_signature(NULL));
    ck_assert_int_eq(ids_algebra_constant(NULL, 0, 0, NULL), IDS_ERR_ARG);
    ids_algebra_free(NULL);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* Operations found by notation; a declared symmetry need not be repeated when the table has it. */
START_TEST(test_match)
{
    static const struct {
        const char *algebra;
        ids_status status;
        const char *part;
    } list[] = {
        {"basis x y\noperation [a,b]\noperation a*b\nx*y = x\ny*x = x\n[x,y] = y\n[y,x] = -y\n",
         IDS_OK, ""},
        {"basis x y\noperation [a,b] alternating\noperation a*b\nx*y = x\n", IDS_ERR_DOMAIN,
         "declares a*b commutative, but the algebra's product x*y does not"},
        {"basis x y\noperation [a,b] commutative\noperation a*b\n[x,y] = x\n", IDS_ERR_DOMAIN,
         "declares [a,b] alternating"},
        {"basis x y\noperation a*b commutative\noperation (a,b)\n", IDS_ERR_DOMAIN,
         "the algebra has no operation that is written [a,b]"},
        {"basis x y\noperation a*b\noperation [a,b,c]\n", IDS_ERR_DOMAIN,
         "no operation that is written [a,b], as"},
    };
    static const char text[] = "operation a*b commutative\noperation [a,b] alternating\n";
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    uint32_t operation[2];

    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    const ids_signature *sig = ids_presentation_signature(pres);
    for (size_t i = 0; i < sizeof list / sizeof *list; i++) {
        ids_algebra *a = read_text(ctx, list[i].algebra);
        operation[0] = operation[1] = 9;
        TEST_STATUS(ctx, ids_algebra_match(ctx, a, sig, operation), list[i].status);
        if (list[i].status != IDS_OK) {
            ck_assert_msg(strstr(ids_ctx_message(ctx), list[i].part) != NULL, "%s",
                          ids_ctx_message(ctx));
            ck_assert_uint_eq(operation[0], 9);
            ck_assert_uint_eq(operation[1], 9);
        } else {
            ck_assert_uint_eq(operation[0], 1);
            ck_assert_uint_eq(operation[1], 0);
        }
        ids_algebra_free(a);
    }
    TEST_STATUS(ctx, ids_algebra_match(ctx, NULL, sig, operation), IDS_ERR_ARG);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* Every file of data/ can be read, printed and read again. */
START_TEST(test_files)
{
    static const char *const folders[] = {IDSPAN_DATA_DIR "/algebras", IDSPAN_DATA_DIR "/crosses"};
    ids_ctx *ctx = test_ctx();
    unsigned count = 0;

    for (size_t i = 0; i < 2; i++) {
        DIR *folder = opendir(folders[i]);
        ck_assert_ptr_nonnull(folder);
        for (struct dirent *at = readdir(folder); at != NULL; at = readdir(folder)) {
            char path[4096];
            static char text[1u << 16];
            char *out = NULL;
            if (strstr(at->d_name, ".alg") == NULL) {
                continue;
            }
            (void)snprintf(path, sizeof path, "%s/%s", folders[i], at->d_name);
            FILE *file = fopen(path, "rb");
            ck_assert_ptr_nonnull(file);
            text[fread(text, 1, sizeof text - 1, file)] = '\0';
            fclose(file);
            ids_algebra *a = read_text(ctx, text);
            TEST_OK(ctx, ids_algebra_print(ctx, a, &out));
            ids_algebra *b = read_text(ctx, out);
            ck_assert_msg(ids_algebra_equal(a, b), "%s", path);
            ids_algebra_free(a);
            ids_algebra_free(b);
            ids_string_free(ctx, out);
            count++;
        }
        closedir(folder);
    }
    ck_assert_uint_ge(count, 12);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("algebra");
    TCase *tcase = tcase_create("algebra");

    tcase_add_test(tcase, test_values);
    tcase_add_test(tcase, test_generated);
    tcase_add_test(tcase, test_orbits);
    tcase_add_loop_test(tcase, test_print, 0, (int)(sizeof printed / sizeof *printed));
    tcase_add_test(tcase, test_create);
    tcase_add_test(tcase, test_names);
    tcase_add_test(tcase, test_refuse);
    tcase_add_test(tcase, test_match);
    tcase_add_test(tcase, test_files);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
