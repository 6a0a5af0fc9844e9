/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Proofs over the rational numbers: they refuse none of the presentations of the data folder, agree
 * with the ranks mod p, and are not fooled by a table that is wrong in one entry. That the proved
 * numbers are right is shown by test_engine_matrix.c, against FLINT's rank over the integers.
 */
#include <stdio.h>
#include <string.h>

#include <idspan/answer.h>

#include "engine/engine_private.h"
#include "engine_support.h"

START_TEST(test_varieties)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_variety(ctx, engine_varieties[_i]);
    ids_rank_options options = {.struct_size = sizeof options, .exact = true};
    ids_rank_table *proved = NULL;
    ids_rank_table *modular = NULL;

    TEST_OK(ctx, ids_rank_table_create(ctx, pres, 1, 5, &options, &proved));
    TEST_OK(ctx, ids_rank_table_create(ctx, pres, 1, 5, NULL, &modular));
    for (size_t i = 0; i < 5; i++) {
        ids_rank_row a = {0};
        ids_rank_row b = {0};
        ck_assert_int_eq(ids_rank_table_row(proved, i, &a), IDS_OK);
        ck_assert_int_eq(ids_rank_table_row(modular, i, &b), IDS_OK);
        ck_assert_int_eq(a.certainty, IDS_CERTAINTY_EXACT);
        ck_assert_uint_eq(a.quotient, b.quotient);
    }
    ids_rank_table_free(proved);
    ids_rank_table_free(modular);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/*
 * The table of degree 5, as it could be after random rows have missed one: one entry is changed,
 * and `error` tells that rows were combined. Without the change the proof succeeds.
 */
START_TEST(test_wrong_table)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = engine_variety(ctx, "jordan.pres");
    idsi_laws *laws = NULL;
    idsi_proof *proof = NULL;
    idsi_tower tower;
    idsi_random random;
    ids_status st = IDS_OK;

    test_random(&random, 1200);
    TEST_OK(ctx, idsi_laws_create(ctx, pres, &laws));
    TEST_OK(ctx, idsi_proof_create(ctx, laws, &proof));
    idsi_tower_init(&tower, ctx, laws, idsi_prime_draw(&random, NULL, 0));
    for (uint32_t degree = 1; degree <= 5; degree++) {
        TEST_OK(ctx, idsi_tower_grow(&tower, true));
        idsi_level *level = &tower.level[degree];
        if (degree == 5) {
            level->error = 0x1p-29;
            for (size_t c = 0; _i == 1 && c < level->columns; c++) {
                size_t count = level->start[c + 1] - level->start[c];
                if (count > 1) { /* no normal form */
                    idsi_entry *entry = &level->entries[level->start[c]];
                    entry->value = entry->value == 1 ? 2 : 1;
                    break;
                }
            }
        }
        bool exceptional = false;
        st = idsi_proof_degree(proof, &tower, &random, &exceptional);
        ck_assert(!exceptional);
        ck_assert_int_eq(st, degree == 5 && _i == 1 ? IDS_ERR_UNABLE : IDS_OK);
    }
    idsi_tower_clear(&tower);
    idsi_proof_free(proof);
    idsi_laws_free(laws);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* (1000003 x) y = x (1000033 y) and the like: fractions that one prime of 30 bits cannot tell. */
START_TEST(test_large_fractions)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres =
        engine_presentation(ctx, "operation a*b\nidentity 1000003*(a*b)*c = 1000033*a*(b*c)\n");
    ids_rank_options options = {.struct_size = sizeof options, .exact = true};
    ids_rank_table *table = NULL;
    ids_rank_row row = {0};

    /* By hand: degree 3 keeps the 6 orders. In degree 4 the five ways to bracket give a pentagon
     * with factors q, q, q on one side and q, q on the other, so everything vanishes. */
    TEST_OK(ctx, ids_rank_table_create(ctx, pres, 3, 4, &options, &table));
    ck_assert_int_eq(ids_rank_table_row(table, 0, &row), IDS_OK);
    ck_assert_uint_eq(row.quotient, 6);
    ck_assert_int_eq(row.certainty, IDS_CERTAINTY_EXACT);
    ck_assert_int_eq(ids_rank_table_row(table, 1, &row), IDS_OK);
    ck_assert_uint_eq(row.quotient, 0);
    ids_rank_table_free(table);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* Degrees 1 to 5 are proved, with these quotients. */
static void check_proved(ids_ctx *ctx, const ids_presentation *pres, uint32_t primes,
                         const uint64_t quotient[5])
{
    ids_rank_options options = {.struct_size = sizeof options, .exact = true, .primes = primes};
    ids_rank_table *table = NULL;

    TEST_OK(ctx, ids_rank_table_create(ctx, pres, 1, 5, &options, &table));
    for (size_t i = 0; i < 5; i++) {
        ids_rank_row row = {0};
        ck_assert_int_eq(ids_rank_table_row(table, i, &row), IDS_OK);
        ck_assert_uint_eq(row.quotient, quotient[i]);
        ck_assert_int_eq(row.certainty, IDS_CERTAINTY_EXACT);
    }
    ids_rank_table_free(table);
}

/*
 * p (xy)z + (p+1) x(yz), p being the prime that is drawn first: modulo p it is nilpotency, with
 * 4! products of degree 4 left; over Q nothing is, by the pentagon again. The proof takes other
 * primes and starts again.
 */
START_TEST(test_exceptional_prime)
{
    static const uint64_t quotient[] = {1, 2, 6, 0, 0};
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    char text[200];
    ids_normal_options exact = {.struct_size = sizeof exact, .exact = true};
    ids_normal_forms *forms = NULL;

    idsi_random_seed(&random, 0);
    const uint32_t prime = idsi_prime_draw(&random, NULL, 0);
    (void)snprintf(text, sizeof text, "operation a*b\nidentity %u (x*y)*z + %u x*(y*z)\n",
                   (unsigned)prime, (unsigned)prime + 1);
    ids_presentation *pres = engine_presentation(ctx, text);
    for (uint32_t primes = 1; primes <= 3; primes++) {
        check_proved(ctx, pres, primes, quotient);
    }
    TEST_OK(ctx, ids_normal_forms_create(ctx, pres, 5, &exact, &forms));
    ck_assert_uint_eq(ids_normal_forms_count(forms, 3), 6);
    ck_assert_uint_eq(ids_normal_forms_count(forms, 4), 0);
    ids_normal_forms_free(forms);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/*
 * A degree of which nothing is left, below one where the rows must be made again: with t = 2^40 u
 * one prime does not tell that they vanish. By hand: t alone remains; degree 4 has t in 24 orders,
 * degree 5 has t * e for 5 * 24 of them, and t with a product in one of 4 places, 4 * 5!/2.
 */
START_TEST(test_empty_degree)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres =
        engine_presentation(ctx, "operation a*b commutative\noperation t(a,b,c,d)\n"
                                 "operation u(a,b,c,d)\nidentity (a*b)*c = 0\n"
                                 "identity t(a,b,c,d) = 1099511627776 u(a,b,c,d)\n");
    static const uint64_t quotient[] = {1, 1, 0, 24, 360};
    const char *const product = "((a*b)*c)*t(d,e,f,g)";
    ids_normal_options exact = {.struct_size = sizeof exact, .exact = true};
    ids_normal_forms *forms = NULL;
    ids_combination *zero = NULL;

    check_proved(ctx, pres, 1, quotient);
    TEST_OK(ctx, ids_normal_forms_create(ctx, pres, 7, &exact, &forms));
    TEST_OK(ctx, ids_normal_forms_reduce_text(ctx, forms, product, strlen(product), NULL, &zero));
    ck_assert_uint_eq(ids_combination_count(zero), 0);
    ids_combination_free(zero);
    ids_normal_forms_free(forms);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("engine: proofs");
    TCase *tcase = tcase_create("proofs");

    tcase_set_timeout(tcase, 30);
    tcase_add_loop_test(tcase, test_varieties, 0, (int)engine_variety_count);
    tcase_add_loop_test(tcase, test_wrong_table, 0, 2);
    tcase_add_test(tcase, test_large_fractions);
    tcase_add_test(tcase, test_exceptional_prime);
    tcase_add_test(tcase, test_empty_degree);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
