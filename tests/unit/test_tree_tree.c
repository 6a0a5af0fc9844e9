/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Order and canonical form of trees, by hand. The comparison with orbits by brute force is in the
 * property tests.
 */
#include "tree_classes.h"

/* "f(f(a,b),c)" as "ffabc": f g h k are operations, a .. e labels 1 .. 5. */
static void read_tree(const char *text, sample_tree *tree)
{
    memset(tree, 0, sizeof *tree);
    for (; *text != '\0'; text++) {
        const char *names = "fghk";
        const char *found = strchr(names, *text);

        tree->code[tree->length++] =
            found != NULL ? -1 - (int32_t)(found - names) : 1 + (*text - 'a');
    }
}

static size_t read_tokens(const char *text, idsi_token *tokens)
{
    sample_tree tree;

    read_tree(text, &tree);
    for (uint32_t i = 0; i < tree.length; i++) {
        tokens[i] =
            tree.code[i] < 0 ? idsi_node((uint32_t)~tree.code[i]) : (idsi_token)tree.code[i];
    }
    return tree.length;
}

typedef struct form {
    const char *signature;
    const char *tree;
    const char *canonical;
    int sign;
} form;

static const form forms[] = {
    {"c2", "a", "a", 1},
    {"c2", "fba", "fab", 1},
    {"c2", "faa", "faa", 1},
    {"c2", "fcfba", "ffabc", 1},     /* the larger argument first */
    {"c2", "ffdcfba", "ffabfcd", 1}, /* of equal shapes the one with the least label */
    {"c2", "ffbcfad", "ffadfbc", 1},
    {"a2", "fba", "fab", -1},
    {"a2", "faa", "faa", 0},
    {"a2", "fcfba", "ffabc", 1}, /* two swaps */
    {"a2", "fcfab", "ffabc", -1},
    {"a2", "ffabfab", "ffabfab", 0}, /* equal arguments */
    {"a2", "ffabfba", "ffabfab", 0}, /* equal up to the sign */
    {"a2", "ffaab", "ffaab", 0},     /* a zero inside */
    {"a2", "ffacfab", "ffabfac", -1},
    {"m2", "fba", "fba", 1},
    {"m2", "faa", "faa", 1},
    {"m2", "fcfba", "fcfba", 1},
    {"a3", "fcab", "fabc", 1}, /* an even permutation */
    {"a3", "fcba", "fabc", -1},
    {"a3", "faba", "faab", 0},
    {"a3", "ffabcde", "ffabcde", 1},
    {"a3", "fdfcbae", "ffabcde", 1}, /* -1 for the order inside and -1 for d */
    {"c2 c3", "gafbcd", "gfbcad", 1},
    {"c2 c3", "ffgabcde", "ffgabcde", 1},
    {"a2 m2", "ggbafcd", "ggbafcd", 1},
    {"a2 m2", "fgbafcd", "ffcdgba", -1}, /* f was declared first, so it is larger */
    {"g3:120+", "fbca", "fabc", 1},
    {"g3:120+", "fbac", "facb", 1}, /* no rotation gives abc */
    {"g3:210-", "fcba", "fabc", -1},
    {"g3:210-", "faba", "faba", 0},
    {"g3:210-", "faab", "faab", 1},
    {"g4:1230-", "fbcda", "fabcd", -1},
    {"g4:1230-", "fabab", "fabab", 1}, /* half a turn has the sign +1 */
    {"g4:1230-", "faaaa", "faaaa", 0},
    {"g4:1023-,2301+ a2", "fcdba", "fabcd", -1},
};

START_TEST(test_forms)
{
    const form *expected = &forms[_i];
    ids_ctx *ctx = test_ctx();
    sample_ops ops;
    sample_tree tree;
    sample_tree wanted;
    sample_tree got;

    sample_read(expected->signature, &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    read_tree(expected->tree, &tree);
    read_tree(expected->canonical, &wanted);
    ck_assert_int_eq(class_canonical(ctx, sig, &tree, &got), expected->sign);
    ck_assert_mem_eq(got.code, wanted.code, sizeof got.code);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_shapes)
{
    /* from larger to smaller: operation as declared, then the arguments from the left, larger
     * ones first; written out by hand, f binary, g ternary */
    static const char *const degree_four[] = {"fffaaaa", "ffafaaa", "fgaaaa", "ffaafaa", "faffaaa",
                                              "fafafaa", "fagaaa",  "gfaaaa", "gafaaa",  "gaafaa"};
    ids_ctx *ctx = test_ctx();
    sample_ops ops;
    idsi_token a[IDSI_MAX_TOKENS];
    idsi_token b[IDSI_MAX_TOKENS];

    sample_read("m2 m3", &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    for (size_t i = 0; i < sizeof degree_four / sizeof degree_four[0]; i++) {
        for (size_t j = 0; j < sizeof degree_four / sizeof degree_four[0]; j++) {
            size_t length = read_tokens(degree_four[i], a);

            (void)read_tokens(degree_four[j], b);
            ck_assert_uint_eq(idsi_tree_length(sig, a), length);
            ck_assert_uint_eq(idsi_tree_degree(sig, a), 4);
            int order = idsi_tree_compare_shape(sig, a, b);
            ck_assert_int_eq((order > 0) - (order < 0), (i < j) - (i > j));
        }
    }
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

START_TEST(test_compare)
{
    /* rising: larger shape first, then the least label, then the labels from the left */
    static const char *const rising[] = {"fffabcd", "ffabc", "ffacb", "ffbac", "ffcab", "ffbcd",
                                         "fab",     "fba",   "fbb",   "a",     "b"};
    ids_ctx *ctx = test_ctx();
    sample_ops ops;
    idsi_token a[IDSI_MAX_TOKENS];
    idsi_token b[IDSI_MAX_TOKENS];

    sample_read("m2", &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    for (size_t i = 0; i < sizeof rising / sizeof rising[0]; i++) {
        for (size_t j = 0; j < sizeof rising / sizeof rising[0]; j++) {
            (void)read_tokens(rising[i], a);
            (void)read_tokens(rising[j], b);
            int order = idsi_tree_compare(sig, a, b);
            ck_assert_int_eq((order > 0) - (order < 0), (i > j) - (i < j));
        }
    }
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: tree");
    TCase *tcase = tcase_create("tree");

    tcase_add_loop_test(tcase, test_forms, 0, (int)(sizeof forms / sizeof forms[0]));
    tcase_add_test(tcase, test_shapes);
    tcase_add_test(tcase, test_compare);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
