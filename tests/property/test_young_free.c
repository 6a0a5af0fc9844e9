/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The cocharacter of free algebras of random signatures against slow routes.
 *
 * Small degrees: the character by its definition. Permute the labels of every canonical monomial,
 * bring it to canonical form, and add the sign when it is the monomial itself; the characters of
 * the partitions, weighted with the multiplicities, must add up to that at every cycle type.
 * Larger degrees: the multiplicities, weighted with the dimensions, add up to the number of
 * monomials, and without signs the trivial module occurs once for each association type.
 */
#include <idspan/gmp.h>

#include "tree_samples.h"
#include "young/young_private.h"

#define MOST_MONOMIALS 3000u

/* A random symmetry for one operation, and sometimes a second operation. */
static ids_status random_signature(ids_ctx *ctx, idsi_random *random, sample_ops *ops,
                                   ids_signature **sig)
{
    static const ids_symmetry kinds[] = {IDS_SYMMETRY_NONE, IDS_SYMMETRY_COMMUTATIVE,
                                         IDS_SYMMETRY_ALTERNATING};

    sample_random_group(random, 2 + (uint32_t)idsi_random_below(random, 4), ops);
    if (idsi_random_below(random, 2) == 0) {
        ops->op[1] = (ids_operation){.notation = IDS_NOTATION_PREFIX,
                                     .open = "g",
                                     .arity = 2 + (uint32_t)idsi_random_below(random, 3),
                                     .symmetry = kinds[idsi_random_below(random, 3)]};
        ops->count = 2;
    }
    return ids_signature_create(ctx, ops->op, ops->count, sig);
}

/* A permutation of 1 .. degree with the given cycles: image[l] of label l. */
static void permutation_of(const ids_partition *type, int32_t *image)
{
    int32_t first = 1;

    for (uint32_t c = 0; c < type->length; c++) {
        int32_t length = type->part[c];

        for (int32_t i = 0; i < length; i++) {
            image[first + i] = first + (i + 1) % length;
        }
        first += length;
    }
}

static int64_t trace(ids_ctx *ctx, const ids_signature *sig, const ids_basis *basis,
                     const int32_t *image)
{
    int64_t sum = 0;

    for (uint64_t i = 0; i < ids_basis_size(basis); i++) {
        int32_t code[IDSI_MAX_TOKENS];
        size_t length = 0;
        ids_mono *moved = NULL;
        ids_mono *canonical = NULL;
        uint64_t index = 0;
        int sign = 0;

        SURE(ids_basis_unrank_code(basis, i, code, IDSI_MAX_TOKENS, &length) == IDS_OK);
        for (size_t t = 0; t < length; t++) {
            code[t] = code[t] > 0 ? image[code[t]] : code[t];
        }
        SURE(ids_mono_create(ctx, sig, code, length, &moved) == IDS_OK);
        SURE(ids_mono_canonicalize(ctx, moved, &canonical, &sign) == IDS_OK);
        SURE(ids_basis_rank(basis, canonical, &index) == IDS_OK);
        sum += index == i ? sign : 0;
        ids_mono_free(canonical);
        ids_mono_free(moved);
    }
    return sum;
}

/* All cycle types of a degree. */
static void check_degree(ids_ctx *ctx, const ids_signature *sig, const ids_basis *basis,
                         const idsi_strips *strips, const ids_cocharacter *cocharacter,
                         uint32_t degree)
{
    const uint32_t count = idsi_partition_number(&strips->counts, degree);
    ids_partition type;

    idsi_partition_first(degree, &type);
    do {
        int64_t value[32];
        int64_t sum = 0;
        int32_t image[IDS_MAX_DEGREE + 1];

        SURE(count <= 32);
        SURE(idsi_character_column(strips, &type, value) == IDS_OK);
        for (uint32_t i = 0; i < count; i++) {
            uint64_t multiplicity = 0;
            SURE(ids_cocharacter_multiplicity(cocharacter, degree, i, &multiplicity) == IDS_OK);
            sum += (int64_t)multiplicity * value[i];
        }
        permutation_of(&type, image);
        int64_t expected = trace(ctx, sig, basis, image);
        ck_assert_msg(sum == expected, "degree %u: character %lld, not %lld", degree,
                      (long long)sum, (long long)expected);
    } while (idsi_partition_next(&type));
}

START_TEST(test_definition)
{
    const uint32_t most = 7;
    ids_ctx *ctx = test_ctx();
    static idsi_strips strips;
    idsi_random random;
    uint64_t checked = 0;

    test_random(&random, 700 + (uint64_t)_i);
    TEST_OK(ctx, idsi_strips_create(ctx, most, &strips));
    while (checked < 12 * test_scale()) {
        ids_signature *sig = NULL;
        ids_types *types = NULL;
        ids_cocharacter *cocharacter = NULL;
        sample_ops ops;

        ids_status st = random_signature(ctx, &random, &ops, &sig);
        if (st != IDS_OK) {
            ck_assert_int_eq(st, IDS_ERR_DOMAIN);
            continue;
        }
        TEST_OK(ctx, ids_types_create(ctx, sig, most, &types));
        TEST_OK(ctx, ids_cocharacter_create(ctx, sig, most, &cocharacter));
        for (uint32_t degree = 1; degree <= most; degree++) {
            ids_basis *basis = NULL;

            TEST_OK(ctx, ids_basis_create(ctx, types, degree, &basis));
            if (ids_basis_size(basis) <= MOST_MONOMIALS) {
                check_degree(ctx, sig, basis, &strips, cocharacter, degree);
            }
            ids_basis_free(basis);
        }
        ids_cocharacter_free(cocharacter);
        ids_types_free(types);
        ids_signature_free(sig);
        checked++;
    }
    idsi_strips_clear(&strips);
    test_ctx_free(ctx);
}
END_TEST

/* Sum of multiplicity * dimension; false when a number does not fit. */
static bool add_dimensions(const ids_cocharacter *cocharacter, uint32_t degree, mpz_t sum)
{
    ids_partition partition;
    uint64_t index = 0;
    mpz_t product;

    mpz_init(product);
    mpz_set_ui(sum, 0);
    idsi_partition_first(degree, &partition);
    do {
        uint64_t multiplicity = 0;
        uint64_t dimension = 0;

        if (ids_cocharacter_multiplicity(cocharacter, degree, index++, &multiplicity) != IDS_OK) {
            mpz_clear(product);
            return false;
        }
        SURE(ids_partition_dimension(&partition, &dimension) == IDS_OK);
        mpz_set_ui(product, multiplicity);
        mpz_addmul_ui(sum, product, dimension);
    } while (idsi_partition_next(&partition));
    mpz_clear(product);
    return true;
}

static void check_numbers(const ids_counts *counts, const ids_cocharacter *cocharacter,
                          bool no_signs)
{
    mpz_t sum;
    mpz_t expected;

    mpz_inits(sum, expected, NULL);
    for (uint32_t degree = 1; degree <= ids_cocharacter_max_degree(cocharacter); degree++) {
        if (!add_dimensions(cocharacter, degree, sum)) {
            break;
        }
        SURE(ids_counts_monomials(counts, degree, expected) == IDS_OK);
        ck_assert_msg(mpz_cmp(sum, expected) == 0, "degree %u: monomials", degree);
        uint64_t trivial = 0;
        SURE(ids_cocharacter_multiplicity(cocharacter, degree, 0, &trivial) == IDS_OK);
        SURE(ids_counts_types(counts, degree, expected) == IDS_OK);
        ck_assert_msg(no_signs ? mpz_cmp_ui(expected, trivial) == 0
                               : mpz_cmp_ui(expected, trivial) >= 0,
                      "degree %u: types", degree);
    }
    mpz_clears(sum, expected, NULL);
}

START_TEST(test_numbers)
{
    const uint32_t most = 18;
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    uint64_t checked = 0;

    test_random(&random, 750 + (uint64_t)_i);
    while (checked < 10 * test_scale()) {
        ids_signature *sig = NULL;
        ids_counts *counts = NULL;
        ids_cocharacter *cocharacter = NULL;
        bool no_signs = checked % 2 == 0;
        sample_ops ops;

        if (random_signature(ctx, &random, &ops, &sig) != IDS_OK) {
            continue;
        }
        for (size_t g = 0; no_signs && g < ops.op[0].generator_count; g++) {
            ops.generator[0][g].sign = 1;
        }
        if (no_signs && ops.op[1].symmetry == IDS_SYMMETRY_ALTERNATING) {
            ops.op[1].symmetry = IDS_SYMMETRY_COMMUTATIVE;
        }
        ids_signature_free(sig);
        sig = NULL;
        TEST_OK(ctx, ids_signature_create(ctx, ops.op, ops.count, &sig));
        TEST_OK(ctx, ids_counts_create(ctx, sig, most, &counts));
        TEST_OK(ctx, ids_cocharacter_create(ctx, sig, most, &cocharacter));
        check_numbers(counts, cocharacter, no_signs);
        ids_cocharacter_free(cocharacter);
        ids_counts_free(counts);
        ids_signature_free(sig);
        checked++;
    }
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("young: free algebras");
    TCase *tcase = tcase_create("random signatures");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_definition, 0, 6);
    tcase_add_loop_test(tcase, test_numbers, 0, 4);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
