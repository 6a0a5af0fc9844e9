/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory while candidates are decided, proved, refuted and checked. */
#include <string.h>

#include <idspan/follows.h>

#include "support.h"

#define JORDAN "operation a*b commutative\nidentity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n"

/* A derivation of one term: shortening longer ones repeats the same calls some hundred times. */
static char fourth[] = JORDAN "candidate c: ((x*x)*x)*x = (x*x)*(x*x)\n";
static char wrong[] = "operation a*b commutative\nidentity (a*b)*c = 0\n"
                      "candidate c: a*b = 0\n";

static char square[] = "operation a*b commutative\nidentity ((a*a)*a)*a = (a*a)*(a*a)\n"
                       "candidate c: a*b = 0\n";

/* A sink that needs no memory. */
typedef struct sheet {
    size_t length;
    char text[2048];
} sheet;

static int receive(void *user, const char *bytes, size_t length)
{
    sheet *out = user;

    ck_assert_uint_lt(out->length + length, sizeof out->text);
    memcpy(out->text + out->length, bytes, length);
    out->length += length;
    return 0;
}

static ids_status decide(ids_ctx *ctx, void *data)
{
    ids_status st = IDS_OK;
    ids_presentation *pres = NULL;
    ids_follows *follows = NULL;

    IDSI_TRY(ids_presentation_read(ctx, data, strlen(data), "job", &pres));
    IDSI_TRY(ids_follows_decide(ctx, pres, 0, NULL, &follows));
done:
    ids_follows_free(follows);
    ids_presentation_free(pres);
    return st;
}

static ids_status derive(ids_ctx *ctx, void *data)
{
    ids_status st = IDS_OK;
    ids_presentation *pres = NULL;
    ids_derivation *derivation = NULL;
    ids_check_report report = {0};
    sheet file = {0};
    sheet latex = {0};

    IDSI_TRY(ids_presentation_read(ctx, data, strlen(data), "job", &pres));
    IDSI_TRY(ids_derivation_find(ctx, pres, 0, NULL, &derivation));
    IDSI_TRY(ids_derivation_latex(ctx, derivation, receive, &latex));
    IDSI_TRY(ids_derivation_write(ctx, derivation, receive, &file));
    IDSI_TRY(ids_certificate_check(ctx, file.text, file.length, "file", &report));
done:
    ids_derivation_free(derivation);
    ids_presentation_free(pres);
    return st;
}

static ids_status refute(ids_ctx *ctx, void *data)
{
    ids_status st = IDS_OK;
    ids_presentation *pres = NULL;
    ids_witness *witness = NULL;
    ids_check_report report = {0};
    sheet file = {0};

    IDSI_TRY(ids_presentation_read(ctx, data, strlen(data), "job", &pres));
    IDSI_TRY(ids_witness_find(ctx, pres, 0, NULL, &witness));
    IDSI_TRY(ids_witness_write(ctx, witness, receive, &file));
    IDSI_TRY(ids_certificate_check(ctx, file.text, file.length, "file", &report));
done:
    ids_witness_free(witness);
    ids_presentation_free(pres);
    return st;
}

/* Both searches find something: the nilpotent one dimension 2, the direct one 1. */
static ids_status counter(ids_ctx *ctx, void *data)
{
    ids_status st = IDS_OK;
    ids_presentation *pres = NULL;
    ids_counterexample *found = NULL;
    ids_check_report report = {0};
    const ids_counterexample_options limits = {.struct_size = sizeof limits, .steps = 500};
    sheet file = {0};
    sheet latex = {0};

    IDSI_TRY(ids_presentation_read(ctx, data, strlen(data), "job", &pres));
    IDSI_TRY(ids_counterexample_find(ctx, pres, 0, &limits, &found));
    ck_assert_uint_eq(ids_algebra_dimension(ids_counterexample_algebra(found)), 1);
    IDSI_TRY(ids_counterexample_latex(ctx, found, receive, &latex));
    IDSI_TRY(ids_counterexample_write(ctx, found, receive, &file));
    IDSI_TRY(ids_certificate_check(ctx, file.text, file.length, "file", &report));
done:
    ids_counterexample_free(found);
    ids_presentation_free(pres);
    return st;
}

START_TEST(test_counter)
{
    TEST_OOM(counter, square);
}
END_TEST

START_TEST(test_decide)
{
    TEST_OOM(decide, wrong);
}
END_TEST

START_TEST(test_derive)
{
    TEST_OOM(derive, fourth);
}
END_TEST

START_TEST(test_refute)
{
    TEST_OOM(refute, wrong);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("oom: follows");
    TCase *tcase = tcase_create("follows");

    tcase_set_timeout(tcase, 100);
    tcase_add_test(tcase, test_counter);
    tcase_add_test(tcase, test_decide);
    tcase_add_test(tcase, test_derive);
    tcase_add_test(tcase, test_refute);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
