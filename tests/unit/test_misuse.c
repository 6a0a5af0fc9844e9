/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Every public function with nothing but NULL and 0, alone and with a context. The calls are
 * written by tests/abi/misuse.sh from the headers, so a new function is here from its first day.
 */
#include "support.h"

/* Refused, and explained where there is a context. */
#define REFUSED(call)                                                                       \
    do {                                                                                    \
        ids_status refused = (call);                                                        \
        ck_assert_msg(refused == IDS_ERR_ARG, "%s is %s", #call, ids_status_name(refused)); \
        ck_assert_msg(context == NULL || strstr(#call, "context") == NULL ||                \
                          ids_ctx_message(context)[0] != '\0',                              \
                      "%s explained nothing", #call);                                       \
    } while (0)

#define NOTHING(call) ck_assert_msg((call) == 0, "%s gave something", #call)

#include <stdio.h>
#include <string.h>

#include "misuse_calls.inc"

START_TEST(test_nothing)
{
    ids_ctx *ctx = test_ctx();
    size_t functions = misuse(ctx);

    ck_assert_uint_gt(functions, 100);
    printf("%zu public functions\n", functions);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("misuse");
    TCase *tcase = tcase_create("misuse");

    tcase_add_test(tcase, test_nothing);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
