/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Rank tables by partition: arguments, rows, primes, threads, cross-check, what a changed sign
 * does, progress, cancel, budget. The comparison with published values is in tests/published, that
 * with the monomial engine on many presentations in tests/ref.
 */
#include <stdio.h>
#include <string.h>

#include <idspan/answer.h>

#include "support.h"

static const char jordan[] = "operation a*b commutative\nidentity ((x*x)*y)*x = (x*x)*(y*x)\n";
/* Operations of every kind of symmetry, and laws of two degrees. */
static const char mixed[] = "operation a*b commutative\n"
                            "operation [a,b] alternating\n"
                            "operation {a,b,c} = -{c,b,a}\n"
                            "identity (a*a)*b = a*(a*b)\n"
                            "identity {x,y,z*z} = [x,y]*(z*z) + {z,x,y}*z\n";
/* Jordan algebras: Glennie 1970; degree 8 V. Dotsenko; OEIS A001776. */
static const uint64_t dimensions[] = {1, 1, 3, 11, 55, 330, 2345, 19089};

static ids_presentation *read(ids_ctx *ctx, const char *text)
{
    ids_presentation *pres = NULL;
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), "test", &pres));
    return pres;
}

static ids_partition_table *table_of(ids_ctx *ctx, const char *text, uint32_t from, uint32_t to,
                                     const ids_partition_options *options)
{
    ids_presentation *pres = read(ctx, text);
    ids_partition_table *table = NULL;

    TEST_OK(ctx, ids_partition_table_create(ctx, pres, from, to, options, &table));
    ids_presentation_free(pres);
    return table;
}

static ids_partition_row row_of(const ids_partition_table *table, size_t index)
{
    ids_partition_row row = {0};

    ck_assert_int_eq(ids_partition_table_row(table, index, &row), IDS_OK);
    ck_assert_uint_eq(row.free, row.consequences + row.quotient);
    return row;
}

static void check_same(const ids_partition_table *a, const ids_partition_table *b)
{
    ck_assert_uint_eq(ids_partition_table_count(a), ids_partition_table_count(b));
    for (size_t i = 0; i < ids_partition_table_count(a); i++) {
        ids_partition_row x = row_of(a, i);
        ids_partition_row y = row_of(b, i);
        ck_assert_uint_eq(x.degree, y.degree);
        ck_assert_mem_eq(&x.partition, &y.partition, sizeof x.partition);
        ck_assert_uint_eq(x.free, y.free);
        ck_assert_uint_eq(x.quotient, y.quotient);
        ck_assert_int_eq(x.certainty, y.certainty);
        ck_assert_uint_eq(x.bits, y.bits);
    }
}

/* ---- rows ---------------------------------------------------------------------------- */

START_TEST(test_rows)
{
    ids_ctx *ctx = test_ctx();
    ids_partition_table *table = table_of(ctx, jordan, 2, 7, NULL);
    size_t i = 0;

    for (uint32_t degree = 2; degree <= 7; degree++) {
        uint64_t free = 0;
        uint64_t quotient = 0;
        for (uint64_t k = 0; k < ids_partition_count(degree); k++, i++) {
            ids_partition_row row = row_of(table, i);
            uint64_t index = 0;
            uint64_t dimension = 0;
            ck_assert(!row.total && row.degree == degree);
            ck_assert_int_eq(ids_partition_rank(&row.partition, &index), IDS_OK);
            ck_assert_uint_eq(index, k);
            ck_assert_int_eq(ids_partition_dimension(&row.partition, &dimension), IDS_OK);
            ck_assert_uint_eq(row.dimension, dimension);
            free += row.free * dimension;
            quotient += row.quotient * dimension;
            ck_assert(row.quotient == 0 || degree < 4 || row.bits >= 15);
            ck_assert_int_eq(row.certainty, row.quotient == 0 || degree < 4
                                                ? IDS_CERTAINTY_EXACT
                                                : IDS_CERTAINTY_MODULAR);
        }
        ids_partition_row total = row_of(table, i++);
        ck_assert(total.total && total.degree == degree);
        ck_assert_uint_eq(total.partition.degree, 0);
        ck_assert_uint_eq(total.dimension, 0);
        ck_assert_uint_eq(total.free, free);
        ck_assert_uint_eq(total.quotient, quotient);
        ck_assert_uint_eq(total.quotient, dimensions[degree - 1]);
    }
    ck_assert_uint_eq(ids_partition_table_count(table), i);
    ids_partition_row row = {0};
    ck_assert_int_eq(ids_partition_table_row(table, i, &row), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_table_row(table, 0, NULL), IDS_ERR_ARG);
    ck_assert_uint_eq(ids_partition_table_prime_count(table), 1);
    ck_assert_uint_gt(ids_partition_table_prime(table, 0), 1u << 29);
    ck_assert_uint_eq(ids_partition_table_prime(table, 1), 0);
    ids_partition_table_free(table);
    test_ctx_free(ctx);
}
END_TEST

/* A partition alone has the row that it has among all. */
START_TEST(test_alone)
{
    ids_ctx *ctx = test_ctx();
    ids_partition_table *table = table_of(ctx, mixed, 5, 5, NULL);

    for (size_t i = 0; i + 1 < ids_partition_table_count(table); i++) {
        ids_partition_row all = row_of(table, i);
        ids_partition_options options = {.struct_size = sizeof options,
                                         .partition = &all.partition};
        ids_partition_table *one = table_of(ctx, mixed, 5, 5, &options);
        ck_assert_uint_eq(ids_partition_table_count(one), 1);
        ids_partition_row row = row_of(one, 0);
        ck_assert_mem_eq(&row.partition, &all.partition, sizeof row.partition);
        ck_assert_uint_eq(row.free, all.free);
        ck_assert_uint_eq(row.quotient, all.quotient);
        ids_partition_table_free(one);
    }
    ids_partition_table_free(table);
    test_ctx_free(ctx);
}
END_TEST

/* No monomials: rows of zeros. A law x = 0: nothing is left. No law: nothing is lost, all exact. */
START_TEST(test_borders)
{
    ids_ctx *ctx = test_ctx();
    ids_partition_table *table = table_of(ctx, "operation (a,b,c) commutative\n", 1, 4, NULL);

    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ids_partition_row row = row_of(table, i);
        ck_assert_uint_eq(row.consequences, 0);
        ck_assert(row.degree % 2 == 1 || row.free == 0);
        ck_assert_int_eq(row.certainty, IDS_CERTAINTY_EXACT);
    }
    ids_partition_table_free(table);
    table = table_of(ctx, "operation a*b\nidentity x = 0\n", 1, 4, NULL);
    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ck_assert_uint_eq(row_of(table, i).quotient, 0);
        ck_assert_int_eq(row_of(table, i).certainty, IDS_CERTAINTY_EXACT);
    }
    ids_partition_table_free(table);
    table = table_of(ctx, "operation a*b\noperation {a,b,c}\n", 1, 5, NULL);
    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ck_assert_uint_eq(row_of(table, i).consequences, 0);
        ck_assert_int_eq(row_of(table, i).certainty, IDS_CERTAINTY_EXACT);
    }
    ids_partition_table_free(table);
    ck_assert_uint_eq(ids_partition_table_count(NULL), 0);
    ck_assert_uint_eq(ids_partition_table_prime_count(NULL), 0);
    ck_assert_uint_eq(ids_partition_table_prime(NULL, 0), 0);
    ids_partition_table_free(NULL);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_bad_arguments)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = read(ctx, jordan);
    ids_partition_table *table = table_of(ctx, jordan, 1, 3, NULL);
    ids_partition_table *const before = table; /* it is still there after a refusal */
    ids_partition four = {.degree = 4, .length = 2, .part = {3, 1}};
    ids_partition broken = {.degree = 4, .length = 2, .part = {1, 3}};
    const struct {
        uint32_t from;
        uint32_t to;
        ids_partition_options options;
        const char *message; /* a part of it */
    } cases[] = {
        {0, 3, {.struct_size = sizeof cases->options}, "degrees 0 to 3"},
        {4, 3, {.struct_size = sizeof cases->options}, "degrees 4 to 3"},
        {1, 17, {.struct_size = sizeof cases->options}, "1 to 16 are possible"},
        {1, 3, {.struct_size = 8}, "must be sizeof(ids_partition_options)"},
        {1, 3, {.struct_size = sizeof cases->options, .primes = UINT32_MAX}, "at most 1000"},
        {3, 4, {.struct_size = sizeof cases->options, .partition = &four}, "one of 4"},
        {5, 5, {.struct_size = sizeof cases->options, .partition = &four}, "one of 4"},
        {4, 4, {.struct_size = sizeof cases->options, .partition = &broken}, "malformed"},
        {4, 4,
         {.struct_size = sizeof cases->options, .partition = &four, .cross_check = true},
         "cross-check"},
    };

    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        TEST_STATUS(ctx,
                    ids_partition_table_create(ctx, pres, cases[i].from, cases[i].to,
                                               &cases[i].options, &table),
                    IDS_ERR_ARG);
        ck_assert_ptr_eq(table, before);
        ck_assert_msg(strstr(ids_ctx_message(ctx), cases[i].message) != NULL, "%s",
                      ids_ctx_message(ctx));
    }
    TEST_STATUS(ctx, ids_partition_table_create(ctx, NULL, 1, 2, NULL, &table), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_partition_table_create(ctx, pres, 1, 2, NULL, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_partition_table_create(NULL, pres, 1, 2, NULL, &table), IDS_ERR_ARG);
    ck_assert_ptr_eq(table, before);
    ids_partition_table_free(table);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* ---- primes, threads, cross-check ---------------------------------------------------- */

START_TEST(test_primes)
{
    ids_ctx *ctx = test_ctx();
    ids_partition_options options = {.struct_size = sizeof options, .primes = 3, .seed = 11};
    ids_partition_table *one = table_of(ctx, jordan, 1, 6, NULL);
    ids_partition_table *three = table_of(ctx, jordan, 1, 6, &options);
    ids_partition_table *again = table_of(ctx, jordan, 1, 6, &options);

    check_same(three, again);
    ck_assert_uint_eq(ids_partition_table_prime_count(three), 3);
    for (size_t k = 0; k < 3; k++) {
        uint64_t prime = ids_partition_table_prime(three, k);
        ck_assert_uint_eq(prime, ids_partition_table_prime(again, k));
        ck_assert(k == 0 || prime != ids_partition_table_prime(three, k - 1));
    }
    for (size_t i = 0; i < ids_partition_table_count(one); i++) {
        ids_partition_row a = row_of(one, i);
        ids_partition_row b = row_of(three, i);
        ck_assert_uint_eq(a.quotient, b.quotient);
        ck_assert_int_eq(a.certainty, b.certainty);
        ck_assert(a.certainty == IDS_CERTAINTY_EXACT || b.bits > 2 * a.bits);
    }
    ids_partition_table_free(one);
    ids_partition_table_free(three);
    ids_partition_table_free(again);
    test_ctx_free(ctx);
}
END_TEST

static ids_ctx *threaded_ctx(uint32_t threads)
{
    ids_ctx_options options = {.struct_size = sizeof options, .threads = threads};
    ids_ctx *ctx = NULL;

    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    return ctx;
}

START_TEST(test_threads)
{
    static const struct {
        const char *text;
        uint32_t degree;
    } cases[] = {{jordan, 8}, {mixed, 6}};
    ids_ctx *ctx = threaded_ctx(1);
    ids_partition_table *expected = table_of(ctx, cases[_i].text, 1, cases[_i].degree, NULL);

    static const uint32_t threads[] = {2, 4, UINT32_MAX};
    for (size_t i = 0; i < sizeof threads / sizeof *threads; i++) {
        ids_ctx *other = threaded_ctx(threads[i]);
        ids_partition_table *table = table_of(other, cases[_i].text, 1, cases[_i].degree, NULL);
        check_same(expected, table);
        ids_partition_table_free(table);
        test_ctx_free(other);
    }
    ids_partition_table_free(expected);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_cross_check)
{
    static const char *const texts[] = {jordan, mixed};
    ids_ctx *ctx = test_ctx();
    ids_partition_options options = {.struct_size = sizeof options, .cross_check = true};

    for (size_t i = 0; i < 2; i++) {
        ids_partition_table *table = table_of(ctx, texts[i], 1, 5, &options);
        ids_partition_table *plain = table_of(ctx, texts[i], 1, 5, NULL);
        check_same(table, plain);
        ids_partition_table_free(table);
        ids_partition_table_free(plain);
    }
    test_ctx_free(ctx);
}
END_TEST

/* ---- mutations ----------------------------------------------------------------------- */

/* A law, and the same with a sign or a term broken: the cocharacters to the degree differ. */
typedef struct mutation {
    const char *law;
    const char *broken;
    uint32_t degree;
} mutation;

#define COMMUTATIVE "operation a*b commutative\nidentity "
#define ALTERNATING "operation [a,b] alternating\nidentity "
#define PLAIN "operation a*b\nidentity "
#define TERNARY "operation (a,b,c) commutative\nidentity "

static const mutation mutations[] = {
    {COMMUTATIVE "((x*x)*y)*x = (x*x)*(y*x)\n", COMMUTATIVE "((x*x)*y)*x = -(x*x)*(y*x)\n", 5},
    {COMMUTATIVE "((x*x)*x)*x = (x*x)*(x*x)\n", COMMUTATIVE "((x*x)*x)*y = (x*x)*(x*y)\n", 5},
    {ALTERNATING "[[a,b],c] + [[b,c],a] + [[c,a],b]\n",
     ALTERNATING "[[a,b],c] + [[b,c],a] - [[c,a],b]\n", 4},
    {PLAIN "(x*x)*y = x*(x*y)\nidentity (y*x)*x = y*(x*x)\n",
     PLAIN "(x*x)*y = -x*(x*y)\nidentity (y*x)*x = y*(x*x)\n", 4},
    {PLAIN "(a*b)*c - a*(b*c) - (b*a)*c + b*(a*c)\n",
     PLAIN "(a*b)*c - a*(b*c) - (b*a)*c - b*(a*c)\n", 4},
    {TERNARY "((x,x,x),x,y) = ((x,x,y),x,x)\n", TERNARY "((x,x,x),x,y) = -((x,x,y),x,x)\n", 5},
};

static bool differs(const ids_partition_table *a, const ids_partition_table *b)
{
    for (size_t i = 0; i < ids_partition_table_count(a); i++) {
        if (row_of(a, i).quotient != row_of(b, i).quotient) {
            return true;
        }
    }
    return false;
}

START_TEST(test_mutations)
{
    const mutation *m = &mutations[_i];
    ids_ctx *ctx = test_ctx();
    ids_partition_table *law = table_of(ctx, m->law, 1, m->degree, NULL);
    ids_partition_table *broken = table_of(ctx, m->broken, 1, m->degree, NULL);

    ck_assert_msg(differs(law, broken), "no difference between %sand %s", m->law, m->broken);
    ids_partition_table_free(law);
    ids_partition_table_free(broken);
    test_ctx_free(ctx);
}
END_TEST

/* ---- stopping early ------------------------------------------------------------------ */

typedef struct watch {
    uint32_t cancel_at; /* degree, 0: never */
    double share;       /* the last one */
    uint32_t calls;
} watch;

static int hook(void *user, const ids_progress *progress)
{
    watch *w = user;

    if (strcmp(progress->stage, "free cocharacter") == 0 || progress->stage[0] == '\0') {
        return 0; /* some milliseconds before all else; and work that is not counted */
    }
    ck_assert_str_eq(progress->stage, "partitions");
    ck_assert_uint_le(progress->done, progress->total);
    ck_assert_double_le(progress->share, 1);
    ck_assert_msg(progress->share >= w->share, "the share falls from %f to %f in degree %u",
                  w->share, progress->share, progress->degree);
    w->share = progress->share;
    w->calls++;
    return progress->degree >= w->cancel_at && w->cancel_at > 0;
}

static ids_ctx *watched_ctx(watch *w, uint64_t budget)
{
    ids_ctx_options options = {.struct_size = sizeof options,
                               .progress = hook,
                               .progress_user = w,
                               .byte_budget = budget,
                               .threads = 2};
    ids_ctx *ctx = NULL;

    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    return ctx;
}

/* The finished degrees of a table that was stopped are right and complete. */
static size_t check_finished(const ids_partition_table *table)
{
    size_t degrees = 0;

    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ids_partition_row row = row_of(table, i);
        ck_assert_uint_eq(row.degree, degrees + 1);
        if (row.total) {
            ck_assert(degrees >= 8 || row.quotient == dimensions[degrees]);
            degrees++;
        }
    }
    return degrees;
}

START_TEST(test_cancel)
{
    watch w = {.cancel_at = 9};
    ids_ctx *ctx = watched_ctx(&w, 0);
    ids_presentation *pres = read(ctx, jordan);
    ids_partition_table *table = NULL;

    TEST_STATUS(ctx, ids_partition_table_create(ctx, pres, 1, 11, NULL, &table),
                IDS_ERR_CANCELLED);
    size_t degrees = check_finished(table);
    ck_assert(degrees >= 8 && degrees < 11);
    ids_partition_table_free(table);
    ck_assert_uint_gt(w.calls, 0);
    /* Cancelled from outside, and usable again. */
    ids_ctx_cancel(ctx);
    TEST_STATUS(ctx, ids_partition_table_create(ctx, pres, 1, 5, NULL, &table), IDS_ERR_CANCELLED);
    ids_partition_table_free(table);
    w = (watch){0};
    TEST_OK(ctx, ids_partition_table_create(ctx, pres, 1, 5, NULL, &table));
    ck_assert_uint_eq(check_finished(table), 5);
    ids_partition_table_free(table);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* The share never falls, not between degrees and not between primes; the hook sees to it. It is
 * called ten times a second, so on a fast machine there may be nothing to see. */
START_TEST(test_progress)
{
    watch w = {0};
    ids_ctx *ctx = watched_ctx(&w, 0);
    ids_partition_options options = {.struct_size = sizeof options, .primes = 2};
    ids_partition_table *table = table_of(ctx, jordan, 1, 9, &options);

    ck_assert(w.calls == 0 || w.share > 0);
    ids_partition_table_free(table);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_budget)
{
    size_t before = 0;

    for (uint64_t budget = 1; budget <= 16; budget *= 4) {
        watch w = {0};
        ids_ctx *ctx = watched_ctx(&w, budget << 20);
        ids_presentation *pres = read(ctx, jordan);
        ids_partition_table *table = NULL;

        TEST_STATUS(ctx, ids_partition_table_create(ctx, pres, 1, 11, NULL, &table),
                    IDS_ERR_LIMIT);
        size_t degrees = check_finished(table);
        ck_assert_uint_ge(degrees, before);
        before = degrees;
        ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "budget"));
        ck_assert_uint_le(ids_ctx_memory(ctx).peak, budget << 20);
        ids_partition_table_free(table);
        ids_presentation_free(pres);
        test_ctx_free(ctx);
    }
    ck_assert_uint_ge(before, 4);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("answer: by partition");
    TCase *tcase = tcase_create("partition");

    tcase_set_timeout(tcase, 30);
    tcase_add_test(tcase, test_rows);
    tcase_add_test(tcase, test_alone);
    tcase_add_test(tcase, test_borders);
    tcase_add_test(tcase, test_bad_arguments);
    tcase_add_test(tcase, test_primes);
    tcase_add_loop_test(tcase, test_threads, 0, 2);
    tcase_add_test(tcase, test_cross_check);
    tcase_add_loop_test(tcase, test_mutations, 0, (int)(sizeof mutations / sizeof *mutations));
    tcase_add_test(tcase, test_cancel);
    tcase_add_test(tcase, test_progress);
    tcase_add_test(tcase, test_budget);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
