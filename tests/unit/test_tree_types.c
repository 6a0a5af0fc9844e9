/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The list of association types: order, completeness, automorphism orders.
 *
 * Two routes to what is checked: the number of multilinear monomials comes from the equation of
 * the exponential generating function, T = x + sum of T^k / |G|, with |G| from the table of
 * samples; the automorphism order of each type from the number of ways to draw it, which times
 * the order is the product of |G| over its nodes (orbit and stabiliser).
 */
#include "tree_samples.h"

#define LAST_DEGREE 9u

typedef struct fixture {
    ids_ctx *ctx;
    sample_ops ops;
    ids_signature *sig;
    ids_types *types;
} fixture;

static void open_fixture(fixture *f, const char *text, uint32_t degree)
{
    memset(f, 0, sizeof *f);
    f->ctx = test_ctx();
    sample_read(text, &f->ops);
    f->sig = sample_make(f->ctx, &f->ops);
    TEST_OK(f->ctx, ids_types_create(f->ctx, f->sig, degree, &f->types));
}

static void close_fixture(fixture *f)
{
    ids_types_free(f->types);
    ids_signature_free(f->sig);
    test_ctx_free(f->ctx);
}

static void spell(const ids_types *types, uint32_t type, idsi_token *tokens, size_t *length)
{
    const idsi_type *entry = &types->list[type];

    if (type == 0) {
        tokens[(*length)++] = 1;
        return;
    }
    tokens[(*length)++] = idsi_node(entry->op);
    for (uint32_t i = 0; i < types->sig->ops[entry->op].arity; i++) {
        spell(types, types->children[entry->children + i], tokens, length);
    }
}

/* count[n] = multilinear monomials of degree n. */
static void count_labelled(const sample_ops *ops, const uint64_t *order, double *count)
{
    double series[LAST_DEGREE + 1] = {0}; /* count / n! */
    double factorial = 1;

    series[1] = 1;
    for (uint32_t n = 2; n <= LAST_DEGREE; n++) {
        for (size_t o = 0; o < ops->count; o++) {
            double power[LAST_DEGREE + 1] = {1};

            for (uint32_t k = 0; k < ops->op[o].arity; k++) {
                double next[LAST_DEGREE + 1] = {0};

                for (uint32_t i = 0; i <= n; i++) {
                    for (uint32_t j = 0; i + j <= n; j++) {
                        next[i + j] += power[i] * series[j];
                    }
                }
                memcpy(power, next, sizeof power);
            }
            series[n] += power[n] / (double)order[o];
        }
    }
    for (uint32_t n = 1; n <= LAST_DEGREE; n++) {
        factorial *= n;
        count[n] = series[n] * factorial;
    }
}

START_TEST(test_labelled)
{
    const sample_signature *sample = &sample_signatures[_i];
    double expected[LAST_DEGREE + 1];
    uint64_t factorial = 1;
    fixture f;

    open_fixture(&f, sample->text, LAST_DEGREE);
    count_labelled(&f.ops, sample->order, expected);
    for (uint32_t degree = 1; degree <= LAST_DEGREE; degree++) {
        uint64_t sum = 0;

        factorial *= degree;
        for (uint64_t t = 0; t < ids_types_count(f.types, degree); t++) {
            ids_type_info info;

            ck_assert_int_eq(ids_types_info(f.types, degree, t, &info), IDS_OK);
            ck_assert_uint_eq(info.automorphisms * info.monomials, factorial);
            sum += info.monomials;
        }
        /* below 2^53 and sums of some hundred roundings: the nearest integer is exact */
        ck_assert_uint_eq(sum, (uint64_t)(expected[degree] + 0.5));
    }
    close_fixture(&f);
}
END_TEST

/* Every type is canonical, listed once, in falling order, and found again. */
START_TEST(test_order)
{
    fixture f;

    open_fixture(&f, sample_signatures[_i].text, 8);
    for (uint32_t degree = 1; degree <= 8; degree++) {
        idsi_token before[IDSI_MAX_TOKENS];

        for (uint64_t t = 0; t < ids_types_count(f.types, degree); t++) {
            uint32_t number = f.types->first[degree] + (uint32_t)t;
            idsi_token tokens[IDSI_MAX_TOKENS];
            idsi_token same[IDSI_MAX_TOKENS];
            size_t length = 0;

            spell(f.types, number, tokens, &length);
            ck_assert_uint_eq(idsi_tree_degree(f.sig, tokens), degree);
            ck_assert_uint_eq(idsi_tree_length(f.sig, tokens), length);
            ck_assert_uint_eq(idsi_types_find(f.types, tokens), number);
            memcpy(same, tokens, sizeof same);
            (void)idsi_tree_canonicalize(f.sig, same, length);
            ck_assert_mem_eq(same, tokens, length * sizeof *tokens);
            if (t > 0) {
                ck_assert_int_gt(idsi_tree_compare_shape(f.sig, before, tokens), 0);
                ck_assert_int_lt(idsi_tree_compare_shape(f.sig, tokens, before), 0);
            }
            ck_assert_int_eq(idsi_tree_compare_shape(f.sig, tokens, same), 0);
            memcpy(before, tokens, sizeof before);
        }
    }
    close_fixture(&f);
}
END_TEST

/* At most `most` types of a degree, evenly spread. */
START_TEST(test_automorphisms)
{
    const sample_signature *sample = &sample_signatures[_i];
    const uint64_t most = 60 * test_scale();
    fixture f;

    open_fixture(&f, sample->text, LAST_DEGREE);
    for (uint32_t degree = 1; degree <= LAST_DEGREE; degree++) {
        uint64_t count = ids_types_count(f.types, degree);

        for (uint64_t t = 0; t < count; t += 1 + count / most) {
            idsi_token tokens[IDSI_MAX_TOKENS];
            size_t length = 0;
            sample_tree tree = {0};
            sample_class class;
            ids_type_info info;
            uint64_t product = 1;

            spell(f.types, f.types->first[degree] + (uint32_t)t, tokens, &length);
            tree.length = (uint32_t)length;
            for (size_t i = 0; i < length; i++) {
                bool node = idsi_is_node(tokens[i]);

                tree.code[i] = node ? -1 - (int32_t)idsi_node_op(tokens[i]) : 1;
                product *= node ? sample->order[idsi_node_op(tokens[i])] : 1;
            }
            sample_class_make(&f.ops, &tree, 5000, &class);
            ck_assert_int_eq(ids_types_info(f.types, degree, t, &info), IDS_OK);
            ck_assert_uint_eq(info.automorphisms * class.count, product);
            ck_assert_uint_eq(info.operation, length == 1 ? UINT32_MAX : idsi_node_op(tokens[0]));
            sample_class_free(&class);
        }
    }
    close_fixture(&f);
}
END_TEST

/* Automorphism orders by degree, as many times as types have them. */
typedef struct worked {
    const char *text;
    uint32_t degree;
    const char *orders; /* sorted */
} worked;

/* recomputed by hand for the project; their sums are OEIS A001147 and A268163 */
static const worked worked_orders[] = {
    {"c2", 4, "2 8 "},
    {"c2", 5, "2 4 8 "},
    {"c2", 6, "2 4 4 8 8 16 "},
    {"c2", 8, "2 4 4 4 4 4 4 8 8 8 8 8 8 8 16 16 16 16 16 16 16 32 128 "},
    {"c2 c3", 3, "2 6 "},
    {"c2 c3", 4, "2 4 6 8 "},
    {"c2 c3", 5, "2 4 4 4 6 8 8 12 12 "},
    {"c3", 7, "24 72 "},
    {"c3", 9, "48 72 144 1296 "},
    {"c4", 7, "144 "},
};

static int compare_orders(const void *a, const void *b)
{
    uint64_t x = *(const uint64_t *)a;
    uint64_t y = *(const uint64_t *)b;

    return (x > y) - (x < y);
}

START_TEST(test_worked)
{
    const worked *expected = &worked_orders[_i];
    uint64_t order[64];
    char text[256] = "";
    fixture f;

    open_fixture(&f, expected->text, expected->degree);
    uint64_t count = ids_types_count(f.types, expected->degree);
    ck_assert_uint_le(count, 64);
    for (uint64_t t = 0; t < count; t++) {
        ids_type_info info;

        ck_assert_int_eq(ids_types_info(f.types, expected->degree, t, &info), IDS_OK);
        order[t] = info.automorphisms;
    }
    qsort(order, count, sizeof *order, compare_orders);
    for (uint64_t t = 0; t < count; t++) {
        size_t end = strlen(text);

        snprintf(text + end, sizeof text - end, "%llu ", (unsigned long long)order[t]);
    }
    ck_assert_str_eq(text, expected->orders);
    close_fixture(&f);
}
END_TEST

START_TEST(test_borders)
{
    fixture f;
    ids_types *types = NULL;
    ids_type_info info;

    open_fixture(&f, "c8", 64);
    ck_assert_uint_eq(ids_types_count(f.types, 0), 0);
    ck_assert_uint_eq(ids_types_count(f.types, 1), 1);
    ck_assert_uint_eq(ids_types_count(f.types, 2), 0);
    ck_assert_uint_eq(ids_types_count(f.types, 8), 1);
    ck_assert_uint_eq(ids_types_count(f.types, 65), 0);
    ck_assert_uint_eq(ids_types_count(NULL, 1), 0);
    /* the largest type of degree 64 is the deepest: 7! at eight nodes, 8! at the ninth */
    uint64_t last = ids_types_count(f.types, 64) - 1;
    ck_assert_int_eq(ids_types_info(f.types, 64, last, &info), IDS_OK);
    ck_assert_uint_eq(info.automorphisms, 0); /* 8!^9 does not fit */
    ck_assert_int_eq(ids_types_info(f.types, 64, last + 1, &info), IDS_ERR_ARG);
    ck_assert_int_eq(ids_types_info(f.types, 1, 0, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_types_info(f.types, 1, 0, &info), IDS_OK);
    ck_assert_uint_eq(info.automorphisms, 1);
    ck_assert_uint_eq(info.monomials, 1);
    TEST_STATUS(f.ctx, ids_types_create(f.ctx, f.sig, 0, &types), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_types_create(f.ctx, f.sig, 65, &types), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_types_create(f.ctx, NULL, 3, &types), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_types_create(f.ctx, f.sig, 3, NULL), IDS_ERR_ARG);
    ck_assert_ptr_null(types);
    ids_types_free(NULL);
    close_fixture(&f);
}
END_TEST

START_TEST(test_not_listed)
{
    const idsi_token other_order[] = {idsi_node(0), 3, idsi_node(0), 1, 2};
    const idsi_token large[] = {idsi_node(0), idsi_node(0), idsi_node(0), 1, 2, 3, 4};
    fixture f;

    open_fixture(&f, "c2", 3);
    ck_assert_uint_eq(idsi_types_find(f.types, other_order), UINT32_MAX);
    ck_assert_uint_eq(idsi_types_find(f.types, large), UINT32_MAX);
    ck_assert_uint_eq(idsi_types_find(f.types, large + 1), f.types->first[3]);
    close_fixture(&f);
}
END_TEST

static int cancel(void *user, const ids_progress *progress)
{
    (void)user;
    (void)progress;
    return 1;
}

START_TEST(test_cancel)
{
    ids_ctx_options options = {.struct_size = sizeof options, .progress = cancel};
    ids_ctx *ctx = NULL;
    ids_types *types = NULL;
    sample_ops ops;

    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    sample_read("m2 m3", &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    ids_ctx_cancel(ctx);
    TEST_STATUS(ctx, ids_types_create(ctx, sig, 20, &types), IDS_ERR_CANCELLED);
    ck_assert_ptr_null(types);
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

/* What a list that is too long would hold is known before much memory is taken. */
START_TEST(test_too_many)
{
    ids_ctx_options options = {.struct_size = sizeof options, .byte_budget = 1u << 24};
    ids_ctx *ctx = NULL;
    ids_types *types = NULL;
    sample_ops ops;

    ck_assert_int_eq(ids_ctx_create(&options, &ctx), IDS_OK);
    sample_read("m2", &ops);
    ids_signature *sig = sample_make(ctx, &ops);
    TEST_STATUS(ctx, ids_types_create(ctx, sig, 40, &types), IDS_ERR_LIMIT);
    ck_assert_ptr_null(types);
    /* Catalan number binomial(78, 39) / 40, and 40! times that */
    const char *message = ids_ctx_message(ctx);
    ck_assert_ptr_nonnull(strstr(message, "degree 40 has 680425371729975800390 association types"));
    ck_assert_ptr_nonnull(strstr(message, " and 555169459904119312801489697750523356926251146868403"
                                          "816366080000000000 multilinear monomials"));
    ck_assert_ptr_nonnull(strstr(message, "budget is 16777216 bytes"));
    ck_assert_uint_lt(ids_ctx_memory(ctx).peak, 1u << 20);
    /* These fit by the estimate, but not while the list grows. (Catalan number of 12.) */
    TEST_STATUS(ctx, ids_types_create(ctx, sig, 13, &types), IDS_ERR_LIMIT);
    ck_assert_ptr_null(types);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "degree 13 has 208012 association types"));
    ids_signature_free(sig);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: types");
    TCase *tcase = tcase_create("types");

    tcase_add_loop_test(tcase, test_labelled, 0, SAMPLE_COUNT);
    tcase_add_loop_test(tcase, test_order, 0, SAMPLE_COUNT);
    tcase_add_loop_test(tcase, test_automorphisms, 0, SAMPLE_COUNT);
    tcase_add_loop_test(tcase, test_worked, 0,
                        (int)(sizeof worked_orders / sizeof worked_orders[0]));
    tcase_add_test(tcase, test_borders);
    tcase_add_test(tcase, test_not_listed);
    tcase_add_test(tcase, test_cancel);
    tcase_add_test(tcase, test_too_many);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
