/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Status codes. The values are frozen by the interface, so they are written out here a second
 * time: a changed number breaks programs that were compiled before.
 */
#include "support.h"

#include <stdio.h>
#include <string.h>

static const struct {
    ids_status status;
    int value;
    const char *name;
} frozen[] = {
    {IDS_OK, 0, "IDS_OK"},
    {IDS_ERR_NOMEM, 1, "IDS_ERR_NOMEM"},
    {IDS_ERR_LIMIT, 2, "IDS_ERR_LIMIT"},
    {IDS_ERR_ARG, 3, "IDS_ERR_ARG"},
    {IDS_ERR_PARSE, 4, "IDS_ERR_PARSE"},
    {IDS_ERR_DOMAIN, 5, "IDS_ERR_DOMAIN"},
    {IDS_ERR_UNABLE, 6, "IDS_ERR_UNABLE"},
    {IDS_ERR_NOT_CANONICAL, 7, "IDS_ERR_NOT_CANONICAL"},
    {IDS_ERR_CANCELLED, 8, "IDS_ERR_CANCELLED"},
    {IDS_ERR_IO, 9, "IDS_ERR_IO"},
    {IDS_ERR_INTERNAL, 10, "IDS_ERR_INTERNAL"},
};
#define FROZEN_COUNT ((int)(sizeof frozen / sizeof frozen[0]))

START_TEST(test_value_name_text)
{
    const char *text = ids_status_text(frozen[_i].status);

    ck_assert_int_eq((int)frozen[_i].status, frozen[_i].value);
    ck_assert_str_eq(ids_status_name(frozen[_i].status), frozen[_i].name);
    ck_assert_uint_gt(strlen(text), 0);
    ck_assert_ptr_null(strchr(text, '\n'));
}
END_TEST

START_TEST(test_unknown)
{
    ck_assert_str_eq(ids_status_name((ids_status)11), "IDS_ERR_UNKNOWN");
    ck_assert_str_eq(ids_status_name((ids_status)4000), "IDS_ERR_UNKNOWN");
    ck_assert_str_eq(ids_status_text((ids_status)4000), "unknown status code");
}
END_TEST

/* The program and the library are of one build here. */
START_TEST(test_version)
{
    char numbers[40];

    snprintf(numbers, sizeof numbers, "%d.%d.%d", IDS_VERSION_MAJOR, IDS_VERSION_MINOR,
             IDS_VERSION_PATCH);
    ck_assert_str_eq(ids_version(), numbers);
    ck_assert_str_eq(ids_version(), IDS_VERSION_STRING);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("core: status");
    TCase *tcase = tcase_create("status");

    tcase_add_loop_test(tcase, test_value_name_text, 0, FROZEN_COUNT);
    tcase_add_test(tcase, test_unknown);
    tcase_add_test(tcase, test_version);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
