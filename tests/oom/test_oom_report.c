/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory while a report is filled and written; support.h tells what TEST_OOM does. */
#include <string.h>

#include <idspan/report.h>

#include "support.h"

static int forget(void *user, const char *bytes, size_t length)
{
    (void)user;
    (void)bytes;
    (void)length;
    return 0;
}

static ids_status fill(ids_ctx *ctx, ids_report *report)
{
    ids_report_row row = {.struct_size = sizeof row};
    ids_status st = IDS_OK;

    IDSI_TRY(ids_report_set_presentation(report, "operation a*b\n", 14));
    IDSI_TRY(ids_report_note(report, "seed", "17"));
    for (uint32_t degree = 1; degree <= 4; degree++) {
        for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
            row.state = (ids_report_state)(i % 3);
            row.reason = row.state == IDS_REPORT_FAILED ? "no memory" : NULL;
            row.numbers = (ids_partition_row){
                .degree = degree, .dimension = 1, .free = 100000, .quotient = 100000};
            IDSI_TRY(ids_partition_unrank(degree, i, &row.numbers.partition));
            IDSI_TRY(ids_report_add(report, &row));
        }
        row.state = IDS_REPORT_DONE;
        row.numbers = (ids_partition_row){.degree = degree, .total = true};
        IDSI_TRY(ids_report_add(report, &row));
    }
    (void)ctx;
done:
    return st;
}

static ids_status report(ids_ctx *ctx, void *data)
{
    const ids_report_form *form = data;
    ids_report *made = NULL;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_report_create(ctx, "oom", &made));
    IDSI_TRY(fill(ctx, made));
    IDSI_TRY(ids_report_write(made, *form, forget, NULL));
done:
    ids_report_free(made);
    return st;
}

START_TEST(test_forms)
{
    ids_report_form form = _i == 0 ? IDS_REPORT_HTML : IDS_REPORT_SVG;
    TEST_OOM(report, &form);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("oom: report");
    TCase *tcase = tcase_create("report");

    tcase_add_loop_test(tcase, test_forms, 0, 2);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
