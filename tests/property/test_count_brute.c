/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Counts for random signatures with random signed permutation groups, against a list of all
 * trees made from the definitions: every product of smaller canonical trees is written out,
 * the least of its images under the group (closed here, by itself) is kept, and duplicates are
 * removed. Slow, and shares nothing with the library.
 *
 * A tree is a string in prefix order, an operation as 'A', 'B', .., a leaf as '0' + label (all
 * leaves '0' when labels are forgotten).
 */
#include <idspan/gmp.h>
#include <stdlib.h>
#include <string.h>

#include "support.h"

#define MAX_DEGREE 6u
#define MAX_OPS 3u
#define MAX_K 5u
#define MAX_GROUP 120u
#define MAX_TREES 400000u
#define TEXT 16u

typedef struct tree {
    char text[TEXT];
} tree;

typedef struct list {
    tree *items;
    size_t count;
} list;

typedef struct group {
    uint32_t k;
    size_t order;
    uint8_t image[MAX_GROUP][MAX_K];
} group;

typedef struct brute {
    size_t ops;
    group groups[MAX_OPS];
    list lists[MAX_DEGREE + 1]; /* labels 1 .. degree, or none */
    bool labelled;
    bool full; /* too many trees */
} brute;

/* ---- groups -------------------------------------------------------------------------------- */

static void add_element(group *g, const uint8_t *image)
{
    for (size_t i = 0; i < g->order; i++) {
        if (memcmp(g->image[i], image, g->k) == 0) {
            return;
        }
    }
    ck_assert_uint_lt(g->order, MAX_GROUP);
    memcpy(g->image[g->order++], image, g->k);
}

static void close_group(group *g, const ids_operation *operation)
{
    uint8_t start[MAX_K] = {0, 1, 2, 3, 4};

    g->k = operation->arity;
    g->order = 0;
    add_element(g, start);
    for (size_t i = 0; i < g->order; i++) {
        for (size_t j = 0; j < operation->generator_count; j++) {
            uint8_t next[MAX_K] = {0};

            for (uint32_t a = 0; a < g->k; a++) {
                next[a] = g->image[i][operation->generators[j].image[a]];
            }
            add_element(g, next);
        }
    }
}

static int parity(const uint8_t *image, uint32_t k)
{
    int sign = 1;

    for (uint32_t i = 0; i < k; i++) {
        for (uint32_t j = i + 1; j < k; j++) {
            sign = image[j] < image[i] ? -sign : sign;
        }
    }
    return sign;
}

/* A group by 0 .. 2 random generators, with the trivial or the alternating character. */
static void random_operation(idsi_random *random, size_t index, ids_operation *operation,
                             ids_signed_order *generators)
{
    static const char *const names[MAX_OPS] = {"f", "g", "h"};
    bool alternating = idsi_random_below(random, 2) == 1;
    uint32_t k = 2 + (uint32_t)idsi_random_below(random, MAX_K - 1);

    *operation = (ids_operation){.notation = IDS_NOTATION_PREFIX,
                                 .open = names[index],
                                 .arity = k,
                                 .symmetry = IDS_SYMMETRY_GENERATED,
                                 .generators = generators,
                                 .generator_count = (size_t)idsi_random_below(random, 3)};
    if (operation->generator_count == 0) {
        operation->symmetry = IDS_SYMMETRY_NONE;
        operation->generators = NULL;
    }
    for (size_t g = 0; g < operation->generator_count; g++) {
        for (uint32_t i = 0; i < k; i++) {
            uint32_t j = (uint32_t)idsi_random_below(random, i + 1);

            generators[g].image[i] = generators[g].image[j];
            generators[g].image[j] = (uint8_t)i;
        }
        generators[g].sign = (int8_t)(alternating ? parity(generators[g].image, k) : 1);
    }
}

/* ---- all trees ----------------------------------------------------------------------------- */

static int compare_trees(const void *a, const void *b)
{
    return strcmp(((const tree *)a)->text, ((const tree *)b)->text);
}

static void add_tree(brute *b, list *out, const tree *t)
{
    if (out->count == MAX_TREES) {
        b->full = true;
        return;
    }
    out->items[out->count++] = *t;
}

/* The least image of op(arguments). */
static void add_product(brute *b, list *out, size_t op, const tree *arguments)
{
    const group *g = &b->groups[op];
    tree best = {{0}};

    for (size_t e = 0; e < g->order; e++) {
        tree t = {{(char)('A' + (char)op), 0}};

        for (uint32_t i = 0; i < g->k; i++) {
            strcat(t.text, arguments[g->image[e][i]].text);
        }
        if (e == 0 || strcmp(t.text, best.text) < 0) {
            best = t;
        }
    }
    add_tree(b, out, &best);
}

/* Puts the i-th label of `labels` for label i; order is kept, so the tree stays canonical. */
static void relabel(tree *t, uint32_t labels)
{
    char names[MAX_DEGREE + 1] = {'0'};
    uint32_t count = 0;

    for (uint32_t l = 1; l <= MAX_DEGREE; l++) {
        if ((labels >> l & 1u) != 0) {
            names[++count] = (char)('0' + (char)l);
        }
    }
    for (char *c = t->text; *c != '\0'; c++) {
        if (*c < 'A') {
            *c = names[*c - '0'];
        }
    }
}

/* Chooses argument i and those after it: `degree` leaves or the label set `labels` are left. */
static void choose(brute *b, list *out, size_t op, uint32_t i, tree *arguments, uint32_t degree,
                   uint32_t labels)
{
    uint32_t after = b->groups[op].k - i - 1;

    if (i == b->groups[op].k) {
        add_product(b, out, op, arguments);
        return;
    }
    for (uint32_t d = after == 0 ? degree : 1; d + after <= degree && !b->full; d++) {
        uint32_t set = labels;

        do { /* all subsets of `labels` with d elements; only the empty one without labels */
            if (b->labelled && (uint32_t)__builtin_popcount(set) != d) {
                continue;
            }
            for (size_t t = 0; t < b->lists[d].count; t++) {
                arguments[i] = b->lists[d].items[t];
                relabel(&arguments[i], set);
                choose(b, out, op, i + 1, arguments, degree - d, labels & ~set);
            }
        } while (set != 0 && (set = (set - 1) & labels, true));
    }
}

/* Lists degree after degree; returns the number of degrees done. */
static uint32_t list_trees(brute *b)
{
    tree arguments[MAX_K];
    list out = {calloc(MAX_TREES, sizeof(tree)), 0};
    uint32_t degree = 1;

    b->full = false;
    for (; degree <= MAX_DEGREE && !b->full; degree++) {
        size_t kept = 0;

        out.count = 0;
        if (degree == 1) {
            add_tree(b, &out, &(tree){{b->labelled ? '1' : '0', 0}});
        }
        for (size_t op = 0; op < b->ops; op++) {
            if (b->groups[op].k <= degree) {
                choose(b, &out, op, 0, arguments, degree,
                       b->labelled ? ((1u << degree) - 1) << 1 : 0);
            }
        }
        qsort(out.items, out.count, sizeof(tree), compare_trees);
        for (size_t i = 0; i < out.count; i++) {
            if (kept == 0 || strcmp(out.items[kept - 1].text, out.items[i].text) != 0) {
                out.items[kept++] = out.items[i];
            }
        }
        b->lists[degree].count = b->full ? 0 : kept;
        b->lists[degree].items = calloc(kept + 1, sizeof(tree));
        memcpy(b->lists[degree].items, out.items, kept * sizeof(tree));
    }
    free(out.items);
    return b->full ? degree - 2 : degree - 1;
}

static void free_lists(brute *b)
{
    for (uint32_t d = 1; d <= MAX_DEGREE; d++) {
        free(b->lists[d].items);
        b->lists[d] = (list){NULL, 0};
    }
}

/* ---- the comparison ------------------------------------------------------------------------ */

/* The trees of a degree that use the operations as the row says. */
static size_t count_uses(const brute *b, uint32_t degree, const uint32_t *uses)
{
    size_t count = 0;

    for (size_t i = 0; i < b->lists[degree].count; i++) {
        uint32_t got[MAX_OPS] = {0};

        for (const char *c = b->lists[degree].items[i].text; *c != '\0'; c++) {
            if (*c >= 'A') {
                got[*c - 'A']++;
            }
        }
        count += memcmp(got, uses, b->ops * sizeof *uses) == 0;
    }
    return count;
}

static void compare_degree(ids_ctx *ctx, const brute *b, const ids_signature *signature,
                           const ids_counts *counts, uint32_t degree)
{
    ids_count_split *split = NULL;
    size_t sum = 0;
    mpz_t got;

    mpz_init(got);
    TEST_OK(ctx, b->labelled ? ids_counts_monomials(counts, degree, got)
                             : ids_counts_types(counts, degree, got));
    ck_assert_msg(mpz_cmp_ui(got, b->lists[degree].count) == 0, "degree %u", degree);
    TEST_OK(ctx, ids_count_split_create(ctx, signature, degree, &split));
    for (uint64_t row = 0; row < ids_count_split_rows(split); row++) {
        uint32_t uses[MAX_OPS] = {0};
        size_t want = 0;

        TEST_OK(ctx, ids_count_split_uses(split, row, uses, MAX_OPS));
        TEST_OK(ctx, b->labelled ? ids_count_split_monomials(split, row, got)
                                 : ids_count_split_types(split, row, got));
        want = count_uses(b, degree, uses);
        ck_assert_msg(mpz_cmp_ui(got, want) == 0, "degree %u, row %u", degree, (unsigned)row);
        sum += want;
    }
    ck_assert_uint_eq(sum, b->lists[degree].count);
    ids_count_split_free(split);
    mpz_clear(got);
}

START_TEST(test_random_groups)
{
    ids_ctx *ctx = test_ctx();
    ids_signature *signature = NULL;
    ids_counts *counts = NULL;
    ids_operation operations[MAX_OPS];
    ids_signed_order generators[MAX_OPS][2];
    brute b = {0};
    idsi_random random;

    test_random(&random, (uint64_t)_i);
    memset(generators, 0, sizeof generators);
    b.ops = 1 + (size_t)idsi_random_below(&random, MAX_OPS);
    for (size_t i = 0; i < b.ops; i++) {
        random_operation(&random, i, &operations[i], generators[i]);
        close_group(&b.groups[i], &operations[i]);
    }
    TEST_OK(ctx, ids_signature_create(ctx, operations, b.ops, &signature));
    TEST_OK(ctx, ids_counts_create(ctx, signature, MAX_DEGREE, &counts));
    for (int labelled = 0; labelled < 2; labelled++) {
        uint32_t done = 0;

        b.labelled = labelled == 1;
        done = list_trees(&b);
        ck_assert_uint_ge(done, 3);
        for (uint32_t degree = 1; degree <= done; degree++) {
            compare_degree(ctx, &b, signature, counts, degree);
        }
        free_lists(&b);
    }
    ids_counts_free(counts);
    ids_signature_free(signature);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("count_brute");
    TCase *t = tcase_create("random");

    tcase_add_loop_test(t, test_random_groups, 0, (int)(20 * test_scale()));
    tcase_set_timeout(t, 20);
    suite_add_tcase(s, t);
    return s;
}

int main(void)
{
    return test_run(suite());
}
