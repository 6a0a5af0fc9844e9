/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory while algebras are read, printed, compared with presentations, and tested. */
#include <string.h>

#include <idspan/algebra.h>

#include "support.h"

static char algebra_text[] =
    "basis x y z\noperation a*b commutative\noperation {a,b,c} = -{c,b,a}\noperation [a,b]\n"
    "x*y = 1/2 y + z\n{x,x,y} = 3(x - y)\n[x,y] = z\n[y,x] = -z\n";
static char pres_text[] = "operation [a,b] alternating\noperation a*b commutative\n"
                          "candidate [x*y,z] = [x,z]*y\n";

static ids_status use(ids_ctx *ctx, void *data)
{
    ids_status st = IDS_OK;
    ids_algebra *algebra = NULL;
    ids_algebra *made = NULL;
    ids_presentation *pres = NULL;
    char *text = NULL;
    bool holds = true;
    uint32_t tuple[3];
    const ids_constant square = {.result = 1, .numerator = 2, .denominator = 3};

    (void)data;
    IDSI_TRY(ids_algebra_read(ctx, algebra_text, strlen(algebra_text), "a", &algebra));
    IDSI_TRY(ids_algebra_create(ctx, ids_algebra_signature(algebra), 2, NULL, &square, 1, &made));
    IDSI_TRY(ids_algebra_print(ctx, algebra, &text));
    IDSI_TRY(ids_presentation_read(ctx, pres_text, strlen(pres_text), "p", &pres));
    IDSI_TRY(ids_algebra_holds(ctx, algebra, pres, IDS_ROLE_CANDIDATE, 0, &holds, tuple, 3));
    ck_assert(!holds);
done:
    ids_string_free(ctx, text);
    ids_presentation_free(pres);
    ids_algebra_free(made);
    ids_algebra_free(algebra);
    return st;
}

/* The message about a product that lacks the symmetry. */
static ids_status refuse(ids_ctx *ctx, void *data)
{
    ids_status st = IDS_OK;
    ids_algebra *algebra = NULL;
    ids_presentation *pres = NULL;
    uint32_t operation[1];

    (void)data;
    IDSI_TRY(ids_algebra_read(ctx, algebra_text, strlen(algebra_text), "a", &algebra));
    IDSI_TRY(ids_presentation_read(ctx, "operation [a,b] commutative", 27, "p", &pres));
    st = ids_algebra_match(ctx, algebra, ids_presentation_signature(pres), operation);
    st = st == IDS_ERR_DOMAIN ? IDS_OK : st;
done:
    ids_presentation_free(pres);
    ids_algebra_free(algebra);
    return st;
}

START_TEST(test_use)
{
    TEST_OOM(use, NULL);
}
END_TEST

START_TEST(test_refuse)
{
    TEST_OOM(refuse, NULL);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("oom: model");
    TCase *tcase = tcase_create("model");

    tcase_set_timeout(tcase, 60);
    tcase_add_test(tcase, test_use);
    tcase_add_test(tcase, test_refuse);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
