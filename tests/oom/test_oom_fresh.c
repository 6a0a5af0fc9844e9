/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory while models are opened and used; support.h tells what TEST_OOM does. */
#include <string.h>

#include <idspan/idspan.h>

#include "support.h"

static const char algebra[] = "basis e f\n"
                              "operation a*b commutative\n"
                              "e*e = e\n"
                              "e*f = 1/2 f\n";
static const char base[] = "operation a*b\n"
                           "identity (a*b)*c = a*(b*c)\n";

static int load(void *user, const char *name, ids_sink_fn sink, void *sink_user)
{
    const char *text = strcmp(name, "a.alg") == 0 ? algebra : base;
    (void)user;
    return sink(sink_user, text, strlen(text));
}

/* What is done with the first model of a presentation. */
static ids_status use_model(ids_ctx *ctx, void *data)
{
    ids_presentation *pres = NULL;
    ids_model *model = NULL;
    ids_fresh *fresh = NULL;
    char *saved = NULL;
    bool holds = false;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_presentation_read(ctx, data, strlen(data), NULL, &pres));
    IDSI_TRY(ids_model_open(ctx, pres, 0, load, NULL, &model));
    IDSI_TRY(ids_model_holds(ctx, model, IDS_ROLE_CANDIDATE, 0, &holds, NULL));
    IDSI_TRY(ids_fresh_create(ctx, model, 2, 3, NULL, &fresh));
    IDSI_TRY(ids_fresh_presentation(ctx, fresh, &saved));
done:
    ids_string_free(ctx, saved);
    ids_fresh_free(fresh);
    ids_model_free(model);
    ids_presentation_free(pres);
    return st;
}

START_TEST(test_words)
{
    char text[] = "operation a*b\n"
                  "candidate a*b = b*a\n"
                  "model m associative: a*b = a b + b a'\n";
    TEST_OOM(use_model, text);
}
END_TEST

START_TEST(test_algebra)
{
    char text[] = "operation a*b commutative\n"
                  "candidate (a*b)*c = a*(b*c)\n"
                  "model m algebra \"a.alg\"\n";
    TEST_OOM(use_model, text);
}
END_TEST

START_TEST(test_over)
{
    char text[] = "operation a*b commutative\n"
                  "candidate (a*b)*c = a*(b*c)\n"
                  "model m over \"b.pres\": a*b = a*b + b*a\n";
    TEST_OOM(use_model, text);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("oom_fresh");
    TCase *tc = tcase_create("model");
    tcase_set_timeout(tc, 60);
    tcase_add_test(tc, test_words);
    tcase_add_test(tc, test_algebra);
    tcase_add_test(tc, test_over);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
