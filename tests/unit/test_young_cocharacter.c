/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The cocharacter of a free algebra: signatures where it is known in closed form, limits,
 * arguments, cancel. Published tables are in test_published_young.c, random signatures in
 * test_young_free.c of the property tests.
 */
#include <string.h>

#include "tree_samples.h"
#include "young/young_private.h"

static ids_cocharacter *make_cocharacter(ids_ctx *ctx, const char *text, uint32_t max_degree)
{
    ids_cocharacter *cocharacter = NULL;
    sample_ops ops;

    sample_read(text, &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    TEST_OK(ctx, ids_cocharacter_create(ctx, sig, max_degree, &cocharacter));
    ids_signature_free(sig);
    return cocharacter;
}

/*
 * A binary operation without symmetry: each of the Catalan(n-1) ways to nest gives the regular
 * module, so a multiplicity is Catalan(n-1) times a dimension. (Catalan numbers: (2m over m) /
 * (m+1).) Beyond 64 bits that is told.
 */
START_TEST(test_plain_binary)
{
    const uint32_t max_degree = 36;
    ids_ctx *ctx = test_ctx();
    ids_cocharacter *cocharacter = make_cocharacter(ctx, "m2", max_degree);
    uint64_t beyond = 0;

    ck_assert_uint_eq(ids_cocharacter_max_degree(cocharacter), max_degree);
    for (uint32_t degree = 1; degree < max_degree; degree++) {
        const uint64_t catalan = idsi_binomial(2 * degree - 2, degree - 1) / degree;
        ids_partition partition;
        uint64_t index = 0;

        idsi_partition_first(degree, &partition);
        do {
            uint64_t dimension = 0;
            uint64_t expected = 0;
            uint64_t multiplicity = 0;

            SURE(ids_partition_dimension(&partition, &dimension) == IDS_OK);
            ids_status st =
                ids_cocharacter_multiplicity(cocharacter, degree, index++, &multiplicity);
            if (degree > 33) {
                continue; /* the binomial does not fit */
            }
            bool fits = idsi_mul_u64(catalan, dimension, &expected);
            beyond += !fits;
            SURE(st == (fits ? IDS_OK : IDS_ERR_LIMIT));
            SURE(multiplicity == (fits ? expected : 0));
        } while (idsi_partition_next(&partition));
    }
    ck_assert_uint_gt(beyond, 1000);
    ids_cocharacter_free(cocharacter);
    test_ctx_free(ctx);
}
END_TEST

/* A degree-k operation in degree k: the module is induced from the sign character of G. */
typedef struct induced {
    const char *text;
    uint32_t degree;
    const char *partitions; /* with multiplicities 1 */
} induced;

static const induced induced_modules[] = {
    {"c2", 2, "2"},
    {"a2", 2, "1+1"},
    {"m2", 2, "2 1+1"},
    {"c8", 8, "8"},
    {"a8", 8, "1+1+1+1+1+1+1+1"},
    /* cyclic group of order 3 with the trivial character: Frobenius reciprocity, by hand */
    {"g3:120+", 3, "3 1+1+1"},
    /* [a,b,c] = -[c,b,a]: Pieri's rule, e2 h1 */
    {"g3:210-", 3, "2+1 1+1+1"},
    /* h2[h2], h2[e2]: two pairs that may be swapped, both pairs symmetric or both alternating;
     * classical, from memory */
    {"g4:1023+,2301+", 4, "4 2+2"},
    {"g4:1023-,2301+", 4, "2+2 1+1+1+1"},
    /* e2[h2] and e2[e2]: the swap changes the sign; classical, from memory */
    {"g4:1023+,2301-", 4, "3+1"},
    {"g4:1023-,2301-", 4, "2+1+1"},
    /* h2[h3] and h3[h2]; classical, from memory */
    {"g6:102345+,120345+,345012+", 6, "6 4+2"},
    {"g6:102345+,230145+,234501+", 6, "6 4+2 2+2+2"},
};

START_TEST(test_induced)
{
    const induced *module = &induced_modules[_i];
    ids_ctx *ctx = test_ctx();
    ids_cocharacter *cocharacter = make_cocharacter(ctx, module->text, module->degree);
    char list[64];
    uint64_t expected[64] = {0};

    snprintf(list, sizeof list, "%s", module->partitions);
    for (char *word = strtok(list, " "); word != NULL; word = strtok(NULL, " ")) {
        ids_partition partition = {0};
        uint64_t index = 0;

        TEST_OK(ctx, ids_partition_parse(ctx, word, &partition));
        ck_assert_int_eq(ids_partition_rank(&partition, &index), IDS_OK);
        expected[index] = 1;
    }
    for (uint64_t i = 0; i < ids_partition_count(module->degree); i++) {
        uint64_t multiplicity = 0;

        TEST_OK(ctx, ids_cocharacter_multiplicity(cocharacter, module->degree, i, &multiplicity));
        ck_assert_uint_eq(multiplicity, expected[i]);
    }
    ids_cocharacter_free(cocharacter);
    test_ctx_free(ctx);
}
END_TEST

/* 64 operations, where numbers are widest. In degree 3 by hand: with 63 binary operations there
 * are 63 * 63 * 2 ways to nest two of them, and each gives the regular module. */
START_TEST(test_many_operations)
{
    ids_ctx *ctx = test_ctx();
    ids_operation operations[64];
    char names[64][4];
    ids_signature *sig = NULL;
    ids_cocharacter *cocharacter = NULL;
    uint64_t multiplicity = 0;

    for (size_t i = 0; i < 64; i++) {
        names[i][0] = (char)('f' + i / 16);
        names[i][1] = (char)('a' + i % 16);
        names[i][2] = '\0';
        operations[i] = (ids_operation){
            .notation = IDS_NOTATION_PREFIX, .open = names[i], .arity = i == 0 ? 8 : 2};
    }
    TEST_OK(ctx, ids_signature_create(ctx, operations, 64, &sig));
    TEST_OK(ctx, ids_cocharacter_create(ctx, sig, 24, &cocharacter));
    TEST_OK(ctx, ids_cocharacter_multiplicity(cocharacter, 3, 0, &multiplicity));
    ck_assert_uint_eq(multiplicity, 63 * 63 * 2);
    TEST_OK(ctx, ids_cocharacter_multiplicity(cocharacter, 3, 1, &multiplicity));
    ck_assert_uint_eq(multiplicity, 63 * 63 * 2 * 2);
    ck_assert_int_eq(ids_cocharacter_multiplicity(cocharacter, 24, 0, &multiplicity),
                     IDS_ERR_LIMIT);
    ids_cocharacter_free(cocharacter);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* Asked for several degrees or for one, the answer is the same. */
START_TEST(test_largest_degree)
{
    ids_ctx *ctx = test_ctx();
    ids_cocharacter *all = make_cocharacter(ctx, "c2 a3", 20);

    for (uint32_t max_degree = 1; max_degree <= 13; max_degree++) {
        ids_cocharacter *some = make_cocharacter(ctx, "c2 a3", max_degree);

        for (uint32_t degree = 1; degree <= max_degree; degree++) {
            for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
                uint64_t a = 1;
                uint64_t b = 2;

                SURE(ids_cocharacter_multiplicity(all, degree, i, &a) == IDS_OK);
                SURE(ids_cocharacter_multiplicity(some, degree, i, &b) == IDS_OK);
                SURE(a == b);
            }
        }
        ids_cocharacter_free(some);
    }
    ids_cocharacter_free(all);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_arguments)
{
    ids_ctx *ctx = test_ctx();
    ids_cocharacter *cocharacter = NULL;
    uint64_t multiplicity = 7;
    sample_ops ops;

    sample_read("c2", &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    ck_assert_int_eq(ids_cocharacter_create(NULL, sig, 4, &cocharacter), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_cocharacter_create(ctx, NULL, 4, &cocharacter), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_cocharacter_create(ctx, sig, 4, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_cocharacter_create(ctx, sig, 0, &cocharacter), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_cocharacter_create(ctx, sig, 41, &cocharacter), IDS_ERR_ARG);
    ck_assert_ptr_null(cocharacter);
    TEST_OK(ctx, ids_cocharacter_create(ctx, sig, 4, &cocharacter));
    ck_assert_int_eq(ids_cocharacter_multiplicity(NULL, 4, 0, &multiplicity), IDS_ERR_ARG);
    ck_assert_int_eq(ids_cocharacter_multiplicity(cocharacter, 4, 0, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_cocharacter_multiplicity(cocharacter, 0, 0, &multiplicity), IDS_ERR_ARG);
    ck_assert_int_eq(ids_cocharacter_multiplicity(cocharacter, 5, 0, &multiplicity), IDS_ERR_ARG);
    ck_assert_int_eq(ids_cocharacter_multiplicity(cocharacter, 4, 5, &multiplicity), IDS_ERR_ARG);
    ck_assert_uint_eq(multiplicity, 7);
    ck_assert_uint_eq(ids_cocharacter_max_degree(NULL), 0);
    ids_cocharacter_free(NULL);
    ids_cocharacter_free(cocharacter);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* Stops at the first call and counts what it was told. */
static int stop(void *user, const ids_progress *progress)
{
    int *calls = user;

    ck_assert_str_eq(progress->stage, "free cocharacter");
    ck_assert(progress->share >= 0 && progress->share <= 1);
    (*calls)++;
    return 1;
}

START_TEST(test_cancel)
{
    int calls = 0;
    ids_ctx_options options = {
        .struct_size = sizeof options, .progress = stop, .progress_user = &calls};
    ids_ctx *ctx = NULL;
    ids_cocharacter *cocharacter = NULL;
    sample_ops ops;

    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    sample_read("c2", &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    TEST_STATUS(ctx, ids_cocharacter_create(ctx, sig, 40, &cocharacter), IDS_ERR_CANCELLED);
    ck_assert_int_eq(calls, 1);
    ids_ctx_cancel(ctx);
    TEST_STATUS(ctx, ids_cocharacter_create(ctx, sig, 4, &cocharacter), IDS_ERR_CANCELLED);
    ck_assert_ptr_null(cocharacter);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("young: free cocharacters");
    TCase *tcase = tcase_create("cocharacters");

    tcase_add_test(tcase, test_plain_binary);
    tcase_add_loop_test(tcase, test_induced, 0,
                        (int)(sizeof induced_modules / sizeof induced_modules[0]));
    tcase_add_test(tcase, test_many_operations);
    tcase_add_test(tcase, test_largest_degree);
    tcase_add_test(tcase, test_arguments);
    tcase_add_test(tcase, test_cancel);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
