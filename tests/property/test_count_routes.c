/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Counts by a second route, for random signatures with arities up to 8. Types: the equation with
 * the cycle index, summed over the group element by element, is iterated with schoolbook
 * products. Monomials: Lagrange's inversion, n b(n) = [x^(n-1)] of the n-th power of
 * 1/(1 - sum of x^(k-1)/|G|), in rational numbers. Split counts: they sum up to the totals, also
 * for many operations and in degrees where slots are wide.
 */
#include <idspan/gmp.h>
#include <string.h>

#include "support.h"
#include "tree/tree_private.h"

#define TYPES_DEGREE 28u
#define MONOMIALS_DEGREE 40u
#define MAX_OPS 4u

/* A random operation; generated groups are cyclic or from two generators. */
static void random_operation(idsi_random *random, size_t index, ids_operation *operation,
                             ids_signed_order *generators)
{
    static const char *const names[MAX_OPS] = {"f", "g", "h", "k"};
    static const ids_symmetry kinds[] = {IDS_SYMMETRY_NONE, IDS_SYMMETRY_COMMUTATIVE,
                                         IDS_SYMMETRY_ALTERNATING, IDS_SYMMETRY_GENERATED};
    uint32_t k = 2 + (uint32_t)idsi_random_below(random, 7);

    *operation = (ids_operation){.notation = IDS_NOTATION_PREFIX,
                                 .open = names[index],
                                 .arity = k,
                                 .symmetry = kinds[idsi_random_below(random, 4)]};
    if (operation->symmetry != IDS_SYMMETRY_GENERATED) {
        return;
    }
    operation->generators = generators;
    operation->generator_count = 1 + (size_t)idsi_random_below(random, 2);
    for (size_t g = 0; g < operation->generator_count; g++) {
        generators[g].sign = 1;
        for (uint32_t i = 0; i < k; i++) {
            uint32_t j = (uint32_t)idsi_random_below(random, i + 1);

            generators[g].image[i] = generators[g].image[j];
            generators[g].image[j] = (uint8_t)i;
        }
    }
}

static ids_signature *random_signature(ids_ctx *ctx, uint64_t salt)
{
    ids_operation operations[MAX_OPS];
    ids_signed_order generators[MAX_OPS][2];
    ids_signature *signature = NULL;
    idsi_random random;
    size_t count = 0;

    memset(generators, 0, sizeof generators);
    test_random(&random, salt);
    count = 1 + (size_t)idsi_random_below(&random, MAX_OPS);
    for (size_t i = 0; i < count; i++) {
        random_operation(&random, i, &operations[i], generators[i]);
    }
    TEST_OK(ctx, ids_signature_create(ctx, operations, count, &signature));
    return signature;
}

/* ---- types --------------------------------------------------------------------------------- */

/* How many elements of a group have each cycle type; the type as a number in base 9. */
typedef struct tally {
    uint32_t type[22];
    uint32_t elements[22];
    size_t count;
} tally;

static void tally_element(tally *table, const uint8_t *image, uint32_t k)
{
    uint32_t type = 0;
    uint32_t seen = 0;
    size_t i = 0;

    for (uint32_t start = 0; start < k; start++) {
        uint32_t place = 0;

        for (uint32_t at = start; (seen >> at & 1u) == 0; at = image[at]) {
            seen |= 1u << at;
            place = place == 0 ? 1 : place * 9;
        }
        type += place;
    }
    while (i < table->count && table->type[i] != type) {
        i++;
    }
    if (i == table->count) {
        ck_assert_uint_lt(table->count, 22);
        table->type[table->count++] = type;
        table->elements[i] = 0;
    }
    table->elements[i]++;
}

/* All permutations of the places from `at` on. */
static void tally_all(tally *table, uint8_t *image, uint32_t at, uint32_t k)
{
    if (at == k) {
        tally_element(table, image, k);
        return;
    }
    for (uint32_t i = at; i < k; i++) {
        uint8_t kept = image[at];

        image[at] = image[i];
        image[i] = kept;
        tally_all(table, image, at + 1, k);
        image[i] = image[at];
        image[at] = kept;
    }
}

static void tally_group(tally *table, const idsi_group *group)
{
    uint8_t image[IDS_MAX_ARITY] = {0, 1, 2, 3, 4, 5, 6, 7};

    table->count = 0;
    if (group->symmetry == IDS_SYMMETRY_NONE) {
        tally_element(table, image, group->arity);
    } else if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        for (uint64_t e = 0; e < group->order; e++) {
            tally_element(table, group->elements[e].image, group->arity);
        }
    } else {
        tally_all(table, image, 0, group->arity);
    }
}

typedef mpz_t polynomial[TYPES_DEGREE + 1];

static void poly_init(polynomial p)
{
    for (uint32_t d = 0; d <= TYPES_DEGREE; d++) {
        mpz_init(p[d]);
    }
}

static void poly_clear(polynomial p)
{
    for (uint32_t d = 0; d <= TYPES_DEGREE; d++) {
        mpz_clear(p[d]);
    }
}

/* p *= t(x^j), through x^top */
static void poly_multiply(polynomial p, const polynomial t, uint32_t j, uint32_t top)
{
    for (uint32_t d = top + 1; d-- > 0;) {
        mpz_t sum;

        mpz_init(sum);
        for (uint32_t i = 1; i * j <= d; i++) {
            mpz_addmul(sum, p[d - i * j], t[i]);
        }
        mpz_swap(p[d], sum);
        mpz_clear(sum);
    }
}

/* out[top] of Z(G; t(x), t(x^2), ...) */
static void cycle_index(const idsi_group *group, const tally *table, const polynomial t,
                        uint32_t top, mpz_t out)
{
    polynomial product;

    poly_init(product);
    mpz_set_ui(out, 0);
    for (size_t i = 0; i < table->count; i++) {
        uint32_t type = table->type[i];

        for (uint32_t d = 0; d <= top; d++) {
            mpz_set_ui(product[d], d == 0);
        }
        for (uint32_t j = 1; type > 0; j++, type /= 9) {
            for (uint32_t c = 0; c < type % 9; c++) {
                poly_multiply(product, t, j, top);
            }
        }
        mpz_addmul_ui(out, product[top], table->elements[i]);
    }
    ck_assert(mpz_divisible_ui_p(out, group->order) != 0);
    mpz_divexact_ui(out, out, group->order);
    poly_clear(product);
}

START_TEST(test_types)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = random_signature(ctx, (uint64_t)_i);
    ids_counts *counts = NULL;
    tally tables[MAX_OPS];
    polynomial t;
    mpz_t part;

    poly_init(t);
    mpz_init(part);
    for (size_t op = 0; op < signature->count; op++) {
        tally_group(&tables[op], &signature->ops[op].group);
    }
    TEST_OK(ctx, ids_counts_create(ctx, signature, TYPES_DEGREE, &counts));
    for (uint32_t d = 1; d <= TYPES_DEGREE; d++) {
        mpz_t sum;

        mpz_init_set_ui(sum, d == 1);
        for (size_t op = 0; op < signature->count; op++) {
            cycle_index(&signature->ops[op].group, &tables[op], t, d, part);
            mpz_add(sum, sum, part);
        }
        mpz_set(t[d], sum);
        TEST_OK(ctx, ids_counts_types(counts, d, part));
        ck_assert_msg(mpz_cmp(part, sum) == 0, "degree %u", d);
        mpz_clear(sum);
    }
    mpz_clear(part);
    poly_clear(t);
    ids_counts_free(counts);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

/* ---- monomials ----------------------------------------------------------------------------- */

/* n! b(n) by Lagrange. The power of the inverse of q = 1 - sum of c_k x^(k-1) comes from
 * q p' = -n q' p: i p_i = sum over j of c_(j+1) (i - j + n j) p_(i-j). */
static void lagrange(const ids_signature *signature, uint32_t n, mpq_t out)
{
    mpq_t p[MONOMIALS_DEGREE + 1];
    mpq_t c[IDS_MAX_ARITY + 1];
    mpq_t term;

    mpq_init(term);
    for (uint32_t k = 0; k <= IDS_MAX_ARITY; k++) {
        mpq_init(c[k]);
    }
    for (size_t op = 0; op < signature->count; op++) {
        mpq_set_ui(term, 1, signature->ops[op].group.order);
        mpq_add(c[signature->ops[op].arity], c[signature->ops[op].arity], term);
    }
    for (uint32_t i = 0; i < n; i++) {
        mpq_init(p[i]);
        if (i == 0) {
            mpq_set_ui(p[i], 1, 1);
            continue;
        }
        for (uint32_t j = 1; j < IDS_MAX_ARITY && j <= i; j++) {
            mpq_set_ui(term, i - j + n * j, i);
            mpq_canonicalize(term);
            mpq_mul(term, term, c[j + 1]);
            mpq_mul(term, term, p[i - j]);
            mpq_add(p[i], p[i], term);
        }
    }
    mpq_set_ui(out, 1, n);
    mpq_mul(out, out, p[n - 1]);
    for (uint32_t i = 0; i < n; i++) {
        mpq_set_ui(term, i + 1, 1);
        mpq_mul(out, out, term);
        mpq_clear(p[i]);
    }
    for (uint32_t k = 0; k <= IDS_MAX_ARITY; k++) {
        mpq_clear(c[k]);
    }
    mpq_clear(term);
}

START_TEST(test_monomials)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = random_signature(ctx, (uint64_t)_i);
    ids_counts *counts = NULL;
    mpq_t want;
    mpz_t got;

    mpq_init(want);
    mpz_init(got);
    TEST_OK(ctx, ids_counts_create(ctx, signature, MONOMIALS_DEGREE, &counts));
    for (uint32_t d = 1; d <= MONOMIALS_DEGREE; d++) {
        lagrange(signature, d, want);
        TEST_OK(ctx, ids_counts_monomials(counts, d, got));
        ck_assert_msg(mpq_cmp_z(want, got) == 0, "degree %u", d);
    }
    mpq_clear(want);
    mpz_clear(got);
    ids_counts_free(counts);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

/* ---- split sums ---------------------------------------------------------------------------- */

static void check_split(ids_ctx *ctx, const ids_signature *signature, uint32_t degree)
{
    ids_counts *counts = NULL;
    ids_count_split *split = NULL;
    mpz_t types, monomials, part;

    mpz_inits(types, monomials, part, NULL);
    TEST_OK(ctx, ids_counts_create(ctx, signature, degree, &counts));
    TEST_OK(ctx, ids_count_split_create(ctx, signature, degree, &split));
    for (uint64_t row = 0; row < ids_count_split_rows(split); row++) {
        TEST_OK(ctx, ids_count_split_types(split, row, part));
        ck_assert(mpz_sgn(part) > 0);
        mpz_add(types, types, part);
        TEST_OK(ctx, ids_count_split_monomials(split, row, part));
        mpz_add(monomials, monomials, part);
    }
    TEST_OK(ctx, ids_counts_types(counts, degree, part));
    ck_assert(mpz_cmp(part, types) == 0);
    TEST_OK(ctx, ids_counts_monomials(counts, degree, part));
    ck_assert(mpz_cmp(part, monomials) == 0);
    mpz_clears(types, monomials, part, NULL);
    ids_count_split_free(split);
    ids_counts_free(counts);
}

START_TEST(test_split_sums)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = random_signature(ctx, (uint64_t)_i);

    for (uint32_t degree = 1; degree <= 13; degree++) {
        check_split(ctx, signature, degree);
    }
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_split_wide)
{
    ids_operation operations[] = {
        {.open = "f", .arity = 2, .symmetry = IDS_SYMMETRY_COMMUTATIVE},
        {.open = "g", .arity = 3, .symmetry = IDS_SYMMETRY_COMMUTATIVE},
    };
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = NULL;

    operations[0].notation = IDS_NOTATION_PREFIX;
    operations[1].notation = IDS_NOTATION_PREFIX;
    TEST_OK(ctx, ids_signature_create(ctx, operations, 2, &signature));
    check_split(ctx, signature, 63);
    check_split(ctx, signature, 64);
    check_split(ctx, signature, 65);
    check_split(ctx, signature, 150);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

/* 2 * IDS_MAX_ARITY operations: far more sets of operations than one could give digits to. */
START_TEST(test_split_many)
{
    ids_operation operations[16];
    char names[16][2] = {{0}};
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = NULL;

    for (size_t i = 0; i < 16; i++) {
        names[i][0] = (char)('a' + (char)i);
        operations[i] = (ids_operation){.notation = IDS_NOTATION_PREFIX, .open = names[i]};
        operations[i].arity = 2 + (uint32_t)i % 3;
        operations[i].symmetry = i % 2 == 0 ? IDS_SYMMETRY_COMMUTATIVE : IDS_SYMMETRY_NONE;
    }
    TEST_OK(ctx, ids_signature_create(ctx, operations, 16, &signature));
    check_split(ctx, signature, 4);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("count_routes");
    TCase *t = tcase_create("routes");
    int rounds = (int)(12 * test_scale());

    tcase_add_loop_test(t, test_types, 0, rounds);
    tcase_add_loop_test(t, test_monomials, 0, rounds);
    tcase_add_loop_test(t, test_split_sums, 0, rounds);
    tcase_add_test(t, test_split_wide);
    tcase_add_test(t, test_split_many);
    tcase_set_timeout(t, 20);
    suite_add_tcase(s, t);
    return s;
}

int main(void)
{
    return test_run(suite());
}
