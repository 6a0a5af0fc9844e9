/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory while presentations are read and printed; support.h tells what TEST_OOM does. */
#include <string.h>

#include <idspan/identity.h>

#include "support.h"

static const char good[] = "operation a*b commutative\n"
                           "operation {a,b,c} = -{c,b,a}\n"
                           "operation t(a,b)\n"
                           "define f(x,y) = (x*x)*y - 1/2*x*(x*y) + {x,y,x}\n"
                           "identity long-name: f(x,y+z)*x - f(x,z)*x = (x+y)*t(x,x*(y - x))\n"
                           "candidate 0*(x*y)\n";

/* The equation above is not homogeneous: its message prints two terms. */
static ids_status fail_to_read(ids_ctx *ctx, void *data)
{
    ids_presentation *pres = NULL;
    (void)data;
    ids_status st = ids_presentation_read(ctx, good, strlen(good), "name", &pres);
    ck_assert_ptr_null(pres);
    if (st == IDS_ERR_PARSE) {
        ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "not homogeneous"));
        return IDS_OK;
    }
    return st;
}

static ids_status read_and_print(ids_ctx *ctx, void *data)
{
    ids_presentation *pres = NULL;
    char *whole = NULL;
    char *written = NULL;
    char *linear = NULL;
    char *operation = NULL;
    ids_status st = IDS_OK;
    IDSI_TRY(ids_presentation_read(ctx, data, strlen(data), "name", &pres));
    IDSI_TRY(ids_presentation_print(ctx, pres, &whole));
    IDSI_TRY(ids_presentation_print_identity(ctx, pres, IDS_ROLE_IDENTITY, 0, IDS_FORM_WRITTEN,
                                             &written));
    IDSI_TRY(
        ids_presentation_print_identity(ctx, pres, IDS_ROLE_IDENTITY, 0, IDS_FORM_LINEAR, &linear));
    IDSI_TRY(ids_signature_print_operation(ctx, ids_presentation_signature(pres), 1, &operation));
done:
    ids_string_free(ctx, whole);
    ids_string_free(ctx, written);
    ids_string_free(ctx, linear);
    ids_string_free(ctx, operation);
    ids_presentation_free(pres);
    return st;
}

START_TEST(test_fail)
{
    TEST_OOM(fail_to_read, NULL);
}
END_TEST

START_TEST(test_read)
{
    char text[] = "operation a*b commutative\n"
                  "operation {a,b,c} = -{c,b,a}\n"
                  "operation t(a,b)\n"
                  "define f(x,y) = (x*x)*y - 1/2*x*(x*y) + {x,x,y}\n"
                  "identity long-name: f(x,y+z)*x - f(x,z)*x = (x*x)*t(x,y)\n"
                  "candidate 0*(x*y)\n"
                  "model w associative: a*b = 1/2 a b + 1/2 b a\n"
                  "model w associative: {a,b,c} = a b c - c b a\n"
                  "model w associative: t(a,b) = a b'\n"
                  "model g algebra \"g.alg\"\n"
                  "model o over \"o.pres\": a*b = [a,b]\n"
                  "model o over \"o.pres\": {a,b,c} = 0\n"
                  "model o over \"o.pres\": t(a,b) = [b,a] - 1/3 [a,b]\n";
    TEST_OOM(read_and_print, text);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("oom_identity");
    TCase *tc = tcase_create("identity");
    tcase_set_timeout(tc, 30);
    tcase_add_test(tc, test_fail);
    tcase_add_test(tc, test_read);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
