/* SPDX-License-Identifier: BSD-2-Clause */
/* Refused memory while rank tables are made; support.h tells what TEST_OOM does. */
#include <string.h>

#include <idspan/answer.h>

#include "field/field_private.h"
#include "support.h"

typedef struct job {
    const char *text;
    uint32_t degree;
    ids_rank_options options;
} job;

static const char jordan[] = "operation a*b commutative\nidentity ((x*x)*y)*x = (x*x)*(y*x)\n";
/* Two operations and laws of two degrees. */
static const char poisson[] = "operation a*b commutative\noperation [a,b] alternating\n"
                              "identity (a*b)*c = a*(b*c)\n"
                              "identity [[a,b],c] + [[b,c],a] + [[c,a],b]\n"
                              "identity [a*b,c] = a*[b,c] + [a,c]*b\n";

static ids_status rank(ids_ctx *ctx, void *data)
{
    const job *j = data;
    ids_presentation *pres = NULL;
    ids_rank_table *table = NULL;
    ids_rank_row row = {0};
    ids_status st = IDS_OK;

    IDSI_TRY(ids_presentation_read(ctx, j->text, strlen(j->text), "job", &pres));
    st = ids_rank_table_create(ctx, pres, 1, j->degree, &j->options, &table);
    /* A limit leaves the finished degrees; no memory leaves nothing. */
    ck_assert(st == IDS_OK || st == IDS_ERR_LIMIT || table == NULL);
    for (size_t i = 0; i < ids_rank_table_count(table); i++) {
        ck_assert_int_eq(ids_rank_table_row(table, i, &row), IDS_OK);
        ck_assert_uint_eq(row.degree, i + 1);
    }
done:
    ids_rank_table_free(table);
    ids_presentation_free(pres);
    return st;
}

START_TEST(test_rank)
{
    job j = {.text = jordan, .degree = 5, .options = {.struct_size = sizeof j.options}};
    TEST_OOM(rank, &j);
}
END_TEST

START_TEST(test_primes)
{
    job j = {.text = poisson,
             .degree = 4,
             .options = {.struct_size = sizeof j.options, .primes = 2, .seed = 5}};
    TEST_OOM(rank, &j);
}
END_TEST

START_TEST(test_exact)
{
    job j = {
        .text = jordan, .degree = 5, .options = {.struct_size = sizeof j.options, .exact = true}};
    TEST_OOM(rank, &j);
}
END_TEST

/* 230 random dense rows in 220 columns: more than the sparse stage takes on. */
static ids_status random_rows(void *user, idsi_row_fn row, void *row_user)
{
    idsi_entry entries[220];
    idsi_random random;
    ids_status st = IDS_OK;

    (void)user;
    test_random(&random, 900);
    for (uint32_t i = 0; st == IDS_OK && i < 230; i++) {
        for (uint32_t j = 0; j < 220; j++) {
            entries[j] = (idsi_entry){j, (uint32_t)idsi_random_below(&random, 1073741789)};
        }
        st = row(row_user, entries, 220);
    }
    return st;
}

static ids_status eliminate(ids_ctx *ctx, void *data)
{
    idsi_random random;
    idsi_result result = {0};
    idsi_matrix matrix = {
        .ctx = ctx, .prime = 1073741789, .columns = 220, .tables = true, .source = random_rows};
    (void)data;
    test_random(&random, 901);
    ids_status st = idsi_eliminate(&matrix, &random, &result);
    ck_assert(st != IDS_OK || result.rank == 220);
    ck_assert(st != IDS_OK || result.dense_rank > 0);
    idsi_echelon_free(result.echelon);
    return st;
}

/* Not TEST_OOM: under a small budget the elimination does without the dense stage. */
START_TEST(test_dense)
{
    bool refused = true;

    for (uint64_t k = 0; refused; k++) {
        test_allocator allocator;
        ids_ctx_options options = {
            .struct_size = sizeof options, .resize = test_resize, .resize_user = &allocator};
        ids_ctx *ctx = NULL;

        test_allocator_init(&allocator);
        allocator.refuse_at = k;
        ids_status st = ids_ctx_create(&options, &ctx);
        if (st == IDS_OK) {
            st = eliminate(ctx, NULL);
        }
        refused = allocator.refused > 0;
        ck_assert_int_eq(st, refused ? IDS_ERR_NOMEM : IDS_OK);
        ids_ctx_free(ctx);
        ck_assert_uint_eq(allocator.live_blocks, 0);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("oom: rank");
    TCase *tcase = tcase_create("rank");

    tcase_set_timeout(tcase, 100);
    tcase_add_test(tcase, test_rank);
    tcase_add_test(tcase, test_primes);
    tcase_add_test(tcase, test_exact);
    tcase_add_test(tcase, test_dense);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
