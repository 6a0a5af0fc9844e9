/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The need that counting states in advance covers what it takes: the context's peak and GMP's
 * own memory, which this test sees through GMP's memory functions. Slots are as wide as the
 * numbers need, and not much wider.
 */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "support.h"
#include "tree/count_private.h"

static size_t gmp_live;
static size_t gmp_peak;

static void *gmp_allocate(size_t size)
{
    gmp_live += size;
    gmp_peak = gmp_live > gmp_peak ? gmp_live : gmp_peak;
    return malloc(size);
}

static void *gmp_reallocate(void *block, size_t old_size, size_t new_size)
{
    gmp_live += new_size;
    gmp_peak = gmp_live > gmp_peak ? gmp_live : gmp_peak;
    gmp_live -= old_size;
    return realloc(block, new_size);
}

static void gmp_free(void *block, size_t size)
{
    gmp_live -= size;
    free(block);
}

typedef struct sample {
    const char *name;
    uint32_t arity[2];
    ids_symmetry symmetry[2];
    size_t count;
    uint32_t degree;
} sample;

static const sample samples[] = {
    {"commutative binary, small", {2, 0}, {IDS_SYMMETRY_COMMUTATIVE, 0}, 1, 30},
    {"commutative binary", {2, 0}, {IDS_SYMMETRY_COMMUTATIVE, 0}, 1, 700},
    {"commutative binary and ternary",
     {2, 3},
     {IDS_SYMMETRY_COMMUTATIVE, IDS_SYMMETRY_COMMUTATIVE},
     2,
     1200},
    {"plain binary and 8-ary", {2, 8}, {IDS_SYMMETRY_NONE, IDS_SYMMETRY_NONE}, 2, 300},
    {"commutative 8-ary", {8, 0}, {IDS_SYMMETRY_COMMUTATIVE, 0}, 1, 600},
    {"plain binary and commutative 6-ary",
     {2, 6},
     {IDS_SYMMETRY_NONE, IDS_SYMMETRY_COMMUTATIVE},
     2,
     450},
};

static void check_need(ids_ctx *ctx, const idsi_count_equation *eq, const sample *s)
{
    idsi_count_series series = {0};
    uint64_t base = ids_ctx_memory(ctx).live;
    uint64_t end = idsi_count_last(eq, s->degree);
    double bits = 0;
    double room = 0;
    mpz_t last;

    mpz_init(last);
    gmp_peak = gmp_live;
    TEST_OK(ctx, idsi_count_solve(ctx, eq, end, 0, 1, &series));
    ck_assert_msg(ids_ctx_memory(ctx).peak - base + gmp_peak <= idsi_count_bytes(eq, end),
                  "%s: takes %u and %u, says %u", s->name,
                  (unsigned)(ids_ctx_memory(ctx).peak - base), (unsigned)gmp_peak,
                  (unsigned)idsi_count_bytes(eq, end));
    /* One limb of rounding, and what count_bound.c leaves room for: divisor, degree, 8 degrees;
     * the bound itself lacks the factor n^(-3/2) of the true growth, and its rate is not the true
     * one where that is small (arity 8): hence half as much again. */
    room = 64 + log2(64 * (double)eq->divisor * (s->degree + 9)) + 8 * eq->log2_rate +
           2 * log2(s->degree) + 8;
    for (uint64_t m = end - 5; m <= end; m++) {
        idsi_count_series_get(&series, m, last);
        bits = (double)mpz_sizeinbase(last, 2);
        ck_assert_double_lt(bits, 64 * (double)series.width);
        ck_assert_msg(64 * (double)series.width < room + 1.5 * bits, "%s: %.0f bits in %u limbs",
                      s->name, bits, (unsigned)series.width);
    }
    mpz_clear(last);
    idsi_count_series_clear(ctx, &series);
}

START_TEST(test_need)
{
    static const char *const names[] = {"f", "g"};
    const sample *s = &samples[_i];
    ids_operation operations[2] = {{0}};
    idsi_count_equation types = {0};
    idsi_count_equation monomials = {0};
    ids_signature *signature = NULL;
    ids_ctx *ctx = test_ctx();
    uint64_t scale = 0;

    mp_set_memory_functions(gmp_allocate, gmp_reallocate, gmp_free);
    for (size_t i = 0; i < s->count; i++) {
        operations[i].notation = IDS_NOTATION_PREFIX;
        operations[i].open = names[i];
        operations[i].arity = s->arity[i];
        operations[i].symmetry = s->symmetry[i];
    }
    TEST_OK(ctx, ids_signature_create(ctx, operations, s->count, &signature));
    TEST_OK(ctx, idsi_count_types_equation(ctx, signature, NULL, 1, &types));
    TEST_OK(ctx, idsi_count_monomials_equation(ctx, signature, &monomials, &scale));
    idsi_count_bound(&types);
    idsi_count_bound(&monomials);
    check_need(ctx, &types, s);
    check_need(ctx, &monomials, s);
    ck_assert_uint_eq(gmp_live, 0);
    idsi_count_equation_clear(ctx, &types);
    idsi_count_equation_clear(ctx, &monomials);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("count_memory");
    TCase *t = tcase_create("need");

    tcase_add_loop_test(t, test_need, 0, (int)(sizeof samples / sizeof samples[0]));
    tcase_set_timeout(t, 20);
    suite_add_tcase(s, t);
    return s;
}

int main(void)
{
    return test_run(suite());
}
