/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory while tables by partition are made; support.h tells what TEST_OOM does. */
#include <string.h>

#include <idspan/answer.h>

#include "support.h"

typedef struct job {
    const char *text;
    uint32_t degree;
    ids_partition_options options;
} job;

static const char jordan[] = "operation a*b commutative\nidentity ((x*x)*y)*x = (x*x)*(y*x)\n";
/* Operations of two arities and every kind of symmetry, and laws of two degrees. */
static const char mixed[] = "operation a*b commutative\n"
                            "operation [a,b] alternating\n"
                            "operation {a,b,c} = -{c,b,a}\n"
                            "identity (a*a)*b = a*(a*b)\n"
                            "identity {x,y,z*z} = [x,y]*(z*z) + {z,x,y}*z\n";

static ids_status by_partition(ids_ctx *ctx, void *data)
{
    const job *j = data;
    ids_presentation *pres = NULL;
    ids_partition_table *table = NULL;
    ids_partition_row row = {0};
    uint32_t from = j->options.partition != NULL ? j->degree : 1;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_presentation_read(ctx, j->text, strlen(j->text), "job", &pres));
    st = ids_partition_table_create(ctx, pres, from, j->degree, &j->options, &table);
    /* A limit leaves the finished degrees; no memory leaves nothing. */
    ck_assert(st == IDS_OK || st == IDS_ERR_LIMIT || table == NULL);
    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ck_assert_int_eq(ids_partition_table_row(table, i, &row), IDS_OK);
        ck_assert_uint_eq(row.free, row.consequences + row.quotient);
    }
done:
    ids_partition_table_free(table);
    ids_presentation_free(pres);
    return st;
}

START_TEST(test_all)
{
    job j = {.text = jordan, .degree = 5, .options = {.struct_size = sizeof j.options}};
    TEST_OOM(by_partition, &j);
}
END_TEST

START_TEST(test_mixed)
{
    job j = {.text = mixed,
             .degree = 3,
             .options = {.struct_size = sizeof j.options, .primes = 2, .seed = 5}};
    TEST_OOM(by_partition, &j);
}
END_TEST

START_TEST(test_alone)
{
    static const ids_partition partition = {.degree = 5, .length = 2, .part = {3, 2}};
    job j = {.text = jordan,
             .degree = 5,
             .options = {.struct_size = sizeof j.options, .partition = &partition}};
    TEST_OOM(by_partition, &j);
}
END_TEST

START_TEST(test_cross_check)
{
    job j = {.text = jordan,
             .degree = 4,
             .options = {.struct_size = sizeof j.options, .cross_check = true}};
    TEST_OOM(by_partition, &j);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("oom: by partition");
    TCase *tcase = tcase_create("partition");

    tcase_set_timeout(tcase, 100);
    tcase_add_test(tcase, test_all);
    tcase_add_test(tcase, test_mixed);
    tcase_add_test(tcase, test_alone);
    tcase_add_test(tcase, test_cross_check);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
