/* SPDX-License-Identifier: BSD-2-Clause */
/* follows.h: theorems both ways, files that check, files that do not. Sources: certificates.c. */
#include <stdio.h>
#include <string.h>

#include "certificates.h"

static ids_presentation *read(ids_ctx *ctx, const char *text)
{
    ids_presentation *pres = NULL;
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), "test", &pres));
    return pres;
}

START_TEST(test_theorems)
{
    const theorem *about = &theorem_list[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read(ctx, about->text);
    ids_follows *follows = NULL;
    ids_partition partition = {0};
    uint64_t more = 0;
    uint32_t bits = 0;

    TEST_OK(ctx, ids_follows_decide(ctx, pres, 0, NULL, &follows));
    ck_assert_msg(ids_follows_answer(follows) == about->follows, "%s", about->name);
    ck_assert_uint_eq(ids_follows_count(follows) > 0, !about->follows);
    for (size_t i = 0; i < ids_follows_count(follows); i++) {
        ck_assert_int_eq(ids_follows_partition(follows, i, &partition, &more), IDS_OK);
        ck_assert_uint_eq(partition.degree, ids_follows_degree(follows));
        ck_assert_uint_ge(more, 1);
    }
    ck_assert_int_eq(ids_follows_partition(follows, ids_follows_count(follows), &partition, &more),
                     IDS_ERR_ARG);
    ck_assert(ids_follows_certainty(follows, &bits) == IDS_CERTAINTY_EXACT || bits >= 10);
    ids_follows_free(follows);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_certificates)
{
    const theorem *about = &theorem_list[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read(ctx, about->text);
    ids_derivation *derivation = NULL;
    ids_witness *witness = NULL;
    ids_check_report report = {0};
    idsi_text file;

    idsi_text_init(&file, ctx);
    TEST_OK(ctx, certificate_make(ctx, about, &file));
    TEST_OK(ctx, ids_certificate_check(ctx, file.data, file.length, "file", &report));
    ck_assert_int_eq(report.follows, about->follows);
    ck_assert_str_eq(report.claim, "c");
    /* What is not there is not found. */
    if (about->follows) {
        TEST_STATUS(ctx, ids_witness_find(ctx, pres, 0, NULL, &witness), IDS_ERR_DOMAIN);
        TEST_OK(ctx, ids_derivation_find(ctx, pres, 0, NULL, &derivation));
        ck_assert_uint_eq(ids_derivation_count(derivation), report.terms);
        ck_assert_uint_le(ids_derivation_count(derivation), ids_derivation_first_count(derivation));
        idsi_text_clear(&file);
        TEST_OK(ctx, ids_derivation_latex(ctx, derivation, receive, &file));
        ck_assert_ptr_nonnull(strstr(file.data, "\\begin{eqnarray*}\n"));
        ck_assert_ptr_nonnull(strstr(file.data, "\n\\end{eqnarray*}\n"));
        ids_derivation_free(derivation);
    } else {
        TEST_STATUS(ctx, ids_derivation_find(ctx, pres, 0, NULL, &derivation), IDS_ERR_DOMAIN);
    }
    idsi_text_clear(&file);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_glennie)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read(ctx, theorem_glennie.text);
    ids_follows *follows = NULL;
    ids_partition partition = {0};
    uint64_t more = 0;
    char *text = NULL;

    TEST_OK(ctx, ids_follows_decide(ctx, pres, 0, NULL, &follows));
    ck_assert_uint_eq(ids_follows_count(follows), 1);
    TEST_OK(ctx, ids_follows_partition(follows, 0, &partition, &more));
    TEST_OK(ctx, ids_partition_print(ctx, &partition, &text));
    ck_assert_str_eq(text, "3+3+2");
    ck_assert_uint_eq(more, 1);
    ids_string_free(ctx, text);
    ids_follows_free(follows);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* Another coefficient in any term of a derivation, under a right mark: the sum must fail. */
START_TEST(test_wrong_sum)
{
    ids_ctx *ctx = test_ctx();
    size_t tried = 0;

    for (size_t i = 0; i < theorem_count; i++) {
        idsi_text file;
        ids_check_report report = {0};
        if (!theorem_list[i].follows) {
            continue;
        }
        idsi_text_init(&file, ctx);
        TEST_OK(ctx, certificate_make(ctx, &theorem_list[i], &file));
        char *line = strchr(strstr(file.data, "\nterms ") + 1, '\n') + 1;
        for (; strncmp(line, "end ", 4) != 0; line = strchr(line, '\n') + 1) {
            char *digit = line + (*line == '-');
            char old = *digit;
            *digit = old == '9' ? '7' : (char)(old + 1);
            certificate_mark(&file);
            ids_status st = ids_certificate_check(ctx, file.data, file.length, "x", &report);
            /* 1/2 becomes 2/2, which is no fraction in lowest terms. */
            ck_assert(st == IDS_ERR_DOMAIN || (st == IDS_ERR_PARSE && digit[1] != ' '));
            *digit = old;
            tried++;
        }
        idsi_text_clear(&file);
    }
    ck_assert_uint_gt(tried, 20);
    test_ctx_free(ctx);
}
END_TEST

/* Files by hand: what must be refused, with status and place. */
typedef struct bad_file {
    const char *body; /* what stands between the presentation and the mark */
    ids_status status;
    ids_place place;
    const char *message;
} bad_file;

static const bad_file bad_files[] = {
    {"claim c\ndegree 3\nterms 0\n", IDS_ERR_DOMAIN, {9, 8}, "do not add up"},
    {"claim d\ndegree 3\nterms 0\n", IDS_ERR_PARSE, {7, 7}, "expected \"c\""},
    {"claim c\ndegree 4\nterms 0\n", IDS_ERR_DOMAIN, {8, 9}, "degree 3"},
    {"claim c\ndegree 3\nterms 2\n1 : left : a, b, c : _\n",
     IDS_ERR_PARSE,
     {11, 1},
     "ends too early"},
    {"claim c\ndegree 3\nterms 0\n1 : left : a, b, c : _\n",
     IDS_ERR_DOMAIN,
     {9, 8},
     "do not add up"},
    {"claim c\ndegree 3\nterms 1\n0 : left : a, b, c : _\n", IDS_ERR_PARSE, {10, 2}, "of 0"},
    {"claim c\ndegree 3\nterms 1\n2/4 : left : a, b, c : _\n",
     IDS_ERR_PARSE,
     {10, 4},
     "lowest terms"},
    {"claim c\ndegree 3\nterms 1\n1 : left : a, b, a*b : _\n",
     IDS_ERR_DOMAIN,
     {10, 25},
     "the term has degree 4"},
    {"claim c\ndegree 3\nterms 1\n1 : left : a, b, c : a\n",
     IDS_ERR_PARSE,
     {10, 23},
     "expected _ once"},
    {"claim c\ndegree 3\nterms 1\n1 : left : a, b : _\n",
     IDS_ERR_PARSE,
     {10, 16},
     "expected \", \""},
    {"claim c\ndegree 3\nterms 1\n1 : right : a, b, c : _\n",
     IDS_ERR_PARSE,
     {10, 5},
     "no identity of that name"},
    {"claim c\ndegree 3\nterms 1\n1 : #1 : a, b, c : _\n",
     IDS_ERR_PARSE,
     {10, 7},
     "no such identity"},
    {"claim c\ndegree 3\nterms 1\n1 : left : a, b, x : _\n",
     IDS_ERR_PARSE,
     {10, 18},
     "no variable of the claim"},
};

START_TEST(test_bad_files)
{
    static const char head[] = "idspan proof 1\nbegin presentation\noperation a*b\n"
                               "identity left: (a*a)*b - a*(a*b)\n"
                               "candidate c: (a*b)*c - a*(b*c)\nend presentation\n";
    const bad_file *bad = &bad_files[_i];
    ids_ctx *ctx = test_ctx();
    ids_check_report report = {0};
    idsi_text file;

    idsi_text_init(&file, ctx);
    TEST_OK(ctx, idsi_text_printf(&file, "%s%send 0123456789abcdef\n", head, bad->body));
    TEST_STATUS(ctx, ids_certificate_check(ctx, file.data, file.length, "f", &report),
                IDS_ERR_PARSE);
    certificate_mark(&file);
    TEST_STATUS(ctx, ids_certificate_check(ctx, file.data, file.length, "f", &report), bad->status);
    ck_assert_msg(strstr(ids_ctx_message(ctx), bad->message) != NULL, "%s", ids_ctx_message(ctx));
    ck_assert_msg(ids_ctx_last_place(ctx).line == bad->place.line &&
                      ids_ctx_last_place(ctx).column == bad->place.column,
                  "%s", ids_ctx_message(ctx));
    idsi_text_clear(&file);
    test_ctx_free(ctx);
}
END_TEST

/* Witnesses by hand for "associative does not imply commutative": values on a*b and b*a. */
START_TEST(test_hand_witness)
{
    static const struct {
        const char *values;
        ids_status status;
    } list[] = {
        {"values 1\n1 : a*b\n", IDS_OK},
        {"values 2\n1 : a*b\n2 : b*a\n", IDS_OK},
        {"values 2\n1 : a*b\n1 : b*a\n", IDS_ERR_DOMAIN}, /* vanishes on the claim */
        {"values 2\n1 : b*a\n2 : a*b\n", IDS_ERR_PARSE},  /* out of order */
        {"values 1\n1 : a*a\n", IDS_ERR_DOMAIN},          /* other variables */
        {"values 1\n1/2 : a*b\n", IDS_ERR_PARSE},
        {"values 0\n", IDS_ERR_DOMAIN},
    };
    ids_ctx *ctx = test_ctx();

    for (size_t i = 0; i < sizeof list / sizeof *list; i++) {
        ids_check_report report = {0};
        idsi_text file;
        idsi_text_init(&file, ctx);
        TEST_OK(ctx, idsi_text_printf(&file,
                                      "idspan witness 1\nbegin presentation\noperation a*b\n"
                                      "identity (a*b)*c - a*(b*c)\ncandidate a*b - b*a\n"
                                      "end presentation\nclaim\ndegree 2\n%s"
                                      "end 0123456789abcdef\n",
                                      list[i].values));
        certificate_mark(&file);
        TEST_STATUS(ctx, ids_certificate_check(ctx, file.data, file.length, "f", &report),
                    list[i].status);
        idsi_text_clear(&file);
    }
    test_ctx_free(ctx);
}
END_TEST

/* 3 x1 - 1 on the monomials does not vanish on the consequences of associativity. */
START_TEST(test_wrong_witness)
{
    static const char text[] = "idspan witness 1\nbegin presentation\noperation a*b\n"
                               "identity assoc: (a*b)*c - a*(b*c)\n"
                               "candidate c: (a*b)*c - (b*a)*c\nend presentation\n"
                               "claim c\ndegree 3\nvalues 1\n3 : (a*b)*c\n"
                               "end 0123456789abcdef\n";
    ids_ctx *ctx = test_ctx();
    ids_check_report report = {0};
    idsi_text file;

    idsi_text_init(&file, ctx);
    TEST_OK(ctx, idsi_text_puts(&file, text));
    certificate_mark(&file);
    TEST_STATUS(ctx, ids_certificate_check(ctx, file.data, file.length, "f", &report),
                IDS_ERR_DOMAIN);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "identity \"assoc\""));
    idsi_text_clear(&file);
    test_ctx_free(ctx);
}
END_TEST

/* All kinds of notation, names that look like others, and an underscore that is taken. */
START_TEST(test_notations)
{
    static const theorem list[] = {
        {"prefix and fence",
         "operation t(a,b,c)\noperation (a,b,c) commutative\noperation a o b\noperation <a,b>\n"
         "identity t(a,b,c) = (a,b,c)\nidentity two_words: <a,b> = a o b\n"
         "candidate c: t(<_,y'>,_,y') = (y',_ o y',_)\n",
         true},
        {"witness in words",
         "operation a o b\nidentity a o b = b o a\n"
         "candidate c: (x o x') o x = x o (x o x')\n",
         true},
        {"signs", "operation [a,b] alternating\ncandidate c: [[a,b],[a,c]] = 0\n", false},
    };
    ids_ctx *ctx = test_ctx();

    for (size_t i = 0; i < sizeof list / sizeof *list; i++) {
        ids_check_report report = {0};
        idsi_text file;
        idsi_text_init(&file, ctx);
        TEST_OK(ctx, certificate_make(ctx, &list[i], &file));
        TEST_OK(ctx, ids_certificate_check(ctx, file.data, file.length, "file", &report));
        ck_assert_int_eq(report.follows, list[i].follows);
        idsi_text_clear(&file);
    }
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_damage)
{
    certificate_damage(6100, 500 / theorem_count + 1);
}
END_TEST

/* The three calls look at their options alike. */
static void check_options(ids_ctx *ctx)
{
    static const char text[] = "operation a*b\ncandidate a*b = b*a\n";
    ids_follows_options options[2] = {{.struct_size = 4},
                                      {.struct_size = sizeof *options, .primes = 1001}};
    static const char *const message[2] = {"sizeof(ids_follows_options)", "at most 1000"};
    ids_presentation *pres = NULL;
    ids_follows *follows = NULL;
    ids_derivation *derivation = NULL;
    ids_witness *witness = NULL;

    TEST_OK(ctx, ids_presentation_read(ctx, text, sizeof text - 1, NULL, &pres));
    for (size_t i = 0; i < 2; i++) {
        TEST_STATUS(ctx, ids_follows_decide(ctx, pres, 0, &options[i], &follows), IDS_ERR_ARG);
        ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), message[i]));
        TEST_STATUS(ctx, ids_derivation_find(ctx, pres, 0, &options[i], &derivation), IDS_ERR_ARG);
        ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), message[i]));
        TEST_STATUS(ctx, ids_witness_find(ctx, pres, 0, &options[i], &witness), IDS_ERR_ARG);
        ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), message[i]));
    }
    TEST_STATUS(ctx, ids_witness_find(ctx, pres, 1, NULL, &witness), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "candidate 1 does not exist"));
    ids_presentation_free(pres);
}

START_TEST(test_arguments)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read(ctx, "operation a*b\nidentity a*b = b*a\n");
    ids_follows *follows = NULL;
    ids_derivation *derivation = NULL;
    ids_witness *witness = NULL;
    ids_check_report report = {0};

    TEST_STATUS(ctx, ids_follows_decide(ctx, pres, 0, NULL, &follows), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_derivation_find(ctx, pres, 0, NULL, &derivation), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_witness_find(ctx, pres, 0, NULL, &witness), IDS_ERR_ARG);
    check_options(ctx);
    TEST_STATUS(ctx, ids_certificate_check(ctx, NULL, 0, NULL, &report), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_certificate_check(ctx, "", 0, NULL, &report), IDS_ERR_PARSE);
    ck_assert(!ids_follows_answer(NULL));
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("follows");
    TCase *tcase = tcase_create("follows");
    int bad = (int)(sizeof bad_files / sizeof *bad_files);

    tcase_set_timeout(tcase, 60);
    tcase_add_loop_test(tcase, test_theorems, 0, (int)theorem_count);
    tcase_add_loop_test(tcase, test_certificates, 0, (int)theorem_count);
    tcase_add_loop_test(tcase, test_bad_files, 0, bad);
    tcase_add_test(tcase, test_glennie);
    tcase_add_test(tcase, test_wrong_sum);
    tcase_add_test(tcase, test_hand_witness);
    tcase_add_test(tcase, test_wrong_witness);
    tcase_add_test(tcase, test_notations);
    tcase_add_test(tcase, test_damage);
    tcase_add_test(tcase, test_arguments);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
