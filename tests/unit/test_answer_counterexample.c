/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Counterexample algebras: found for every candidate of certificates.c that does not follow,
 * verified by the checker and by ids_algebra_holds(); files by hand, right and wrong; limits.
 */
#include <stdio.h>
#include <string.h>

#include <idspan/idspan.h>

#include "certificates.h"

static ids_presentation *read(ids_ctx *ctx, const char *text)
{
    ids_presentation *pres = NULL;
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), "test", &pres));
    return pres;
}

/* Both routes to what a counterexample claims. */
START_TEST(test_theorems)
{
    const theorem *about = &theorem_list[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read(ctx, about->text);
    ids_algebra *algebra = NULL;
    ids_check_report report = {0};
    bool holds = false;
    idsi_text file;

    idsi_text_init(&file, ctx);
    if (about->follows) {
        ids_status st = certificate_algebra(ctx, about, &file);
        ck_assert_msg(st == IDS_ERR_LIMIT || st == IDS_ERR_DOMAIN, "%s", about->name);
        ck_assert_uint_eq(file.length, 0);
        ids_presentation_free(pres);
        test_ctx_free(ctx);
        return;
    }
    TEST_OK(ctx, certificate_algebra(ctx, about, &file));
    TEST_OK(ctx, ids_certificate_check(ctx, file.data, file.length, "file", &report));
    ck_assert(!report.follows);
    ck_assert_str_eq(report.claim, "c");
    ck_assert_uint_gt(report.dimension, 0);
    ck_assert_uint_le(report.dimension, 30);
    TEST_OK(ctx, ids_algebra_read(ctx, file.data, file.length, "file", &algebra));
    ck_assert_uint_eq(ids_algebra_dimension(algebra), report.dimension);
    for (size_t i = 0; i < ids_presentation_count(pres, IDS_ROLE_IDENTITY); i++) {
        TEST_OK(ctx, ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_IDENTITY, i, &holds, NULL, 0));
        ck_assert_msg(holds, "%s", about->name);
    }
    TEST_OK(ctx, ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_CANDIDATE, 0, &holds, NULL, 0));
    ck_assert_msg(!holds, "%s", about->name);
    ids_algebra_free(algebra);
    idsi_text_clear(&file);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/*
 * Dimensions that are known or easily seen. By hand: a product is not commutative in dimension 2
 * (x*y = x; in dimension 1 every product is); not associative in dimension 1 never; a commutative
 * product is not associative in dimension 2 (x*x = y, x*y = x: (x x) y = y y = 0, x (x y) = y), and
 * an algebra of dimension 1 is. x*x = x has (x*x)*x not 0 in dimension 1.
 */
START_TEST(test_smallest)
{
    static const struct {
        const char *text;
        uint32_t dimension;
    } list[] = {
        {"operation a*b\ncandidate c: a*b = b*a\n", 2},
        {"operation a*b\ncandidate c: (a*b)*c = a*(b*c)\n", 2},
        {"operation a*b commutative\ncandidate c: (a*b)*c = a*(b*c)\n", 2},
        {"operation a*b\nidentity (a*b)*c = a*(b*c)\ncandidate c: (a*b)*c = 0\n", 1},
        {"operation (a,b,c) commutative\ncandidate c: (a,b,c) = 0\n", 1},
        {"operation [a,b] alternating\ncandidate c: [a,b] = 0\n", 2},
        {"operation a*b\noperation [a,b] alternating\nidentity [a,b] = a*b - b*a\n"
         "candidate c: [a,b] = 0\n", 2},
    };
    ids_ctx *ctx = test_ctx();

    for (size_t i = 0; i < sizeof list / sizeof *list; i++) {
        ids_presentation *pres = read(ctx, list[i].text);
        ids_counterexample *found = NULL;
        int64_t values[30] = {0};
        bool any = false;
        TEST_OK(ctx, ids_counterexample_find(ctx, pres, 0, NULL, &found));
        const uint32_t n = ids_algebra_dimension(ids_counterexample_algebra(found));
        ck_assert_msg(n == list[i].dimension, "%s: %u", list[i].text, n);
        ck_assert_int_eq(ids_counterexample_value(found, 0, values, 30), IDS_OK);
        for (uint32_t k = 0; k < n; k++) {
            any = any || values[k] != 0;
        }
        ck_assert(any);
        ck_assert_int_eq(ids_counterexample_value(found, 0, values, n - 1), IDS_ERR_ARG);
        ck_assert_int_eq(ids_counterexample_value(found, 9, values, 30), IDS_ERR_ARG);
        ids_counterexample_free(found);
        ids_presentation_free(pres);
    }
    test_ctx_free(ctx);
}
END_TEST

/* ---- files ----------------------------------------------------------------------------------- */

/* "Associative does not imply commutative", by hand: e*f = e, e*e = e and so on is left projection,
 * where x*y = x. */
#define HEAD                                                                       \
    "# idspan counterexample 1\n# begin presentation\n# operation a*b\n"           \
    "# identity assoc: (a*b)*c - a*(b*c)\n# candidate c: a*b - b*a\n"              \
    "# end presentation\n# claim c\n# degree 2\n"
#define TABLE "basis e f\noperation a*b\ne*e = e\ne*f = e\nf*e = f\nf*f = f\n"

static const struct {
    const char *body;
    ids_status status;
    const char *message;
} hand_files[] = {
    {HEAD "# fails at a = e, b = f\n" TABLE, IDS_OK, ""},
    {HEAD "# fails at a = 2*e, b = f - 3*e\n# a remark\n" TABLE, IDS_OK, ""},
    {HEAD "# fails at a = e, b = e\n" TABLE, IDS_ERR_DOMAIN, "the claim is 0 at these values"},
    {HEAD "# fails at a = 0, b = f\n" TABLE, IDS_ERR_DOMAIN, "the claim is 0"},
    {HEAD "# fails at a = e, b = -f\n" TABLE "\n\n", IDS_OK, ""},
    {HEAD "# fails at a = e, b = f\nbasis e f\noperation a*b\ne*e = f\ne*f = e\n", IDS_ERR_DOMAIN,
     "the identity \"assoc\" does not hold"},
    {HEAD "# fails at a = e, b = f\nbasis e f\noperation a*b commutative\ne*f = e\n",
     IDS_ERR_DOMAIN, "not those of the presentation"},
    {HEAD "# fails at a = e\n" TABLE, IDS_ERR_PARSE, "expected \", \""},
    {HEAD "# fails at a = e, b = f, c = e\n" TABLE, IDS_ERR_PARSE, "expected the end of the line"},
    {HEAD "# fails at b = e, a = f\n" TABLE, IDS_ERR_PARSE, "expected \"a\""},
    {HEAD "# fails at a = g, b = f\n" TABLE, IDS_ERR_PARSE, "expected a basis element"},
    {HEAD "# fails at a = 1/2*e, b = f\n" TABLE, IDS_ERR_PARSE, "expected \"*\""},
    {HEAD "# fails at a = e + e, b = f\n" TABLE, IDS_ERR_PARSE, "stands twice"},
    {HEAD "# fails at a = 0*e, b = f\n" TABLE, IDS_ERR_PARSE, "expected \", \""},
    {HEAD "fails at a = e, b = f\n" TABLE, IDS_ERR_PARSE, "expected basis, operation"},
    {HEAD TABLE, IDS_ERR_PARSE, "expected \"# fails at \""},
    {HEAD "# fails at a = e, b = f\nbasis e f\noperation a*b\ne*g = e\n", IDS_ERR_PARSE,
     "unknown basis element 'g'"},
    {"# idspan counterexample 1\n# begin presentation\noperation a*b\n", IDS_ERR_PARSE,
     "expected \"# \""},
    {"# idspan counterexample 1\n# begin presentation\n# operation a*b\n# candidate c: a*\n"
     "# end presentation\n", IDS_ERR_PARSE, "missing operand"},
};

START_TEST(test_hand_files)
{
    ids_ctx *ctx = test_ctx();
    ids_check_report report = {0};
    idsi_text file;

    idsi_text_init(&file, ctx);
    TEST_OK(ctx, idsi_text_printf(&file, "%s# end 0123456789abcdef\n", hand_files[_i].body));
    TEST_STATUS(ctx, ids_certificate_check(ctx, file.data, file.length, "f", &report),
                IDS_ERR_PARSE);
    certificate_mark(&file);
    TEST_STATUS(ctx, ids_certificate_check(ctx, file.data, file.length, "f", &report),
                hand_files[_i].status);
    if (hand_files[_i].status == IDS_OK) {
        ck_assert_uint_eq(report.dimension, 2);
        ck_assert_uint_eq(report.terms, 4);
        ck_assert_uint_eq(report.tuples, 8);
        ck_assert_uint_eq(report.identities, 1);
    } else {
        ck_assert_msg(strstr(ids_ctx_message(ctx), hand_files[_i].message) != NULL, "%s",
                      ids_ctx_message(ctx));
    }
    idsi_text_clear(&file);
    test_ctx_free(ctx);
}
END_TEST

/* A message about the presentation in the comments has the place in the file. */
START_TEST(test_place)
{
    ids_ctx *ctx = test_ctx();
    ids_check_report report = {0};
    idsi_text file;

    idsi_text_init(&file, ctx);
    TEST_OK(ctx, idsi_text_puts(&file, "# idspan counterexample 1\n# begin presentation\n"
                                       "# operation a*b\n# candidate c: a.b\n"
                                       "# end presentation\n# end 0123456789abcdef\n"));
    certificate_mark(&file);
    TEST_STATUS(ctx, ids_certificate_check(ctx, file.data, file.length, "f", &report),
                IDS_ERR_PARSE);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).line, 4);
    ck_assert_uint_eq(ids_ctx_last_place(ctx).column, 17);
    idsi_text_clear(&file);
    test_ctx_free(ctx);
}
END_TEST

/* ---- limits and refusals --------------------------------------------------------------------- */

START_TEST(test_limits)
{
    static const char text[] = "operation a*b\ndefine ass(a,b,c) = (a*b)*c - a*(b*c)\n"
                               "identity left: ass(a,a,b) = 0\nidentity right: ass(a,b,b) = 0\n"
                               "candidate c: ass(a,b,c) = 0\ncandidate zero: a*b = a*b\n";
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read(ctx, text);
    ids_counterexample *found = NULL;
    ids_counterexample_options limits = {
        .struct_size = sizeof limits, .dimension = 3, .steps = 100000};

    /* No source: the search finds none of dimension 3. */
    TEST_STATUS(ctx, ids_counterexample_find(ctx, pres, 0, &limits, &found), IDS_ERR_LIMIT);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "dimension at most 3"));
    limits.dimension = 0;
    limits.steps = 1;
    TEST_STATUS(ctx, ids_counterexample_find(ctx, pres, 0, &limits, &found), IDS_ERR_LIMIT);
    limits.dimension = IDS_MAX_DIMENSION + 1;
    TEST_STATUS(ctx, ids_counterexample_find(ctx, pres, 0, &limits, &found), IDS_ERR_ARG);
    limits.dimension = 0;
    limits.struct_size--;
    TEST_STATUS(ctx, ids_counterexample_find(ctx, pres, 0, &limits, &found), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "sizeof(ids_counterexample_options)"));
    TEST_STATUS(ctx, ids_counterexample_find(ctx, pres, 1, NULL, &found), IDS_ERR_DOMAIN);
    TEST_STATUS(ctx, ids_counterexample_find(ctx, pres, 2, NULL, &found), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "candidate 2 does not exist: there are 2"));
    TEST_STATUS(ctx, ids_counterexample_find(ctx, NULL, 0, NULL, &found), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_counterexample_find(ctx, pres, 0, NULL, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_counterexample_write(ctx, NULL, receive, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_counterexample_latex(ctx, NULL, receive, NULL), IDS_ERR_ARG);
    ck_assert_ptr_null(found);
    ck_assert_ptr_null(ids_counterexample_algebra(NULL));
    ids_counterexample_free(NULL);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* The same options, the same file; the LaTeX form has a line a product. */
START_TEST(test_output)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read(ctx, "operation a*b commutative\noperation (a,b,c) commutative\n"
                                       "identity (a*b)*c = 0\ncandidate c: (a*b,a,b) = 0\n");
    idsi_text file[2];
    idsi_text latex;
    size_t products = 0;

    idsi_text_init(&latex, ctx);
    for (size_t i = 0; i < 2; i++) {
        ids_counterexample *found = NULL;
        idsi_text_init(&file[i], ctx);
        TEST_OK(ctx, ids_counterexample_find(ctx, pres, 0, NULL, &found));
        TEST_OK(ctx, ids_counterexample_write(ctx, found, receive, &file[i]));
        if (i == 1) {
            TEST_OK(ctx, ids_counterexample_latex(ctx, found, receive, &latex));
        }
        ids_counterexample_free(found);
    }
    ck_assert_str_eq(file[0].data, file[1].data);
    for (const char *line = file[0].data; line != NULL; line = strchr(line, '\n')) {
        line += *line == '\n';
        products += line[0] != '#' && line[0] != '\0' && strncmp(line, "basis", 5) != 0 &&
                    strncmp(line, "operation", 9) != 0;
    }
    for (const char *at = latex.data; (at = strstr(at, "&=&")) != NULL; at++) {
        products--;
    }
    ck_assert_uint_eq(products, 0);
    ck_assert_ptr_nonnull(strstr(latex.data, "\\end{eqnarray*}"));
    idsi_text_clear(&file[0]);
    idsi_text_clear(&file[1]);
    idsi_text_clear(&latex);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("counterexamples");
    TCase *tcase = tcase_create("counterexamples");

    tcase_set_timeout(tcase, 60);
    tcase_add_loop_test(tcase, test_theorems, 0, (int)theorem_count);
    tcase_add_test(tcase, test_smallest);
    tcase_add_loop_test(tcase, test_hand_files, 0, (int)(sizeof hand_files / sizeof *hand_files));
    tcase_add_test(tcase, test_place);
    tcase_add_test(tcase, test_limits);
    tcase_add_test(tcase, test_output);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
