/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * lib/young/seminormal.c and its inner loops.
 *
 * The exchanges must satisfy the relations of the symmetric group (Coxeter and Moore), and their
 * traces must be the characters that character.c computes by border strips: directly for straight
 * shapes, and for skew shapes by the branching rule
 *
 *     chi^lambda(u v) = sum over mu of chi^mu(u) chi^(lambda/mu)(v)     u in S_m, v in S_(n-m).
 */
#include <stdlib.h>
#include <string.h>

#include "support.h"
#include "young/mix.h"
#include "young/skew_private.h"
#include "young/young_private.h"

#define ROWS IDSI_SHAPE_MAX
#define LARGE 1073741789u /* the largest prime below 2^30 */
#define SMALL 37u         /* the least that the engine takes */

typedef struct form {
    idsi_skews skews;
    uint32_t p;
    idsi_seminormal seminormal;
} form;

static void open_form(form *f, ids_ctx *ctx, uint32_t p)
{
    uint32_t inverse_of[IDSI_DISTANCE_MAX + 1] = {0};

    memset(f, 0, sizeof *f);
    idsi_skews_init(&f->skews, ctx);
    f->p = p;
    for (uint32_t d = 1; d <= IDSI_DISTANCE_MAX; d++) {
        uint64_t inverse = 1; /* d^(p-2) */
        uint64_t base = d;
        for (uint32_t e = p - 2; e > 0; e /= 2, base = base * base % p) {
            inverse = e % 2 == 1 ? inverse * base % p : inverse;
        }
        inverse_of[d] = (uint32_t)inverse;
    }
    idsi_seminormal_init(&f->seminormal, p, inverse_of);
}

/* Matrix of a word in exchanges, transposed: f x f. */
static uint32_t *word_matrix(form *f, const idsi_skew *skew, const uint8_t *word, size_t length)
{
    size_t count = skew->count;
    uint32_t *matrix = calloc(count * count, sizeof *matrix);

    ck_assert_ptr_nonnull(matrix);
    for (size_t t = 0; t < count; t++) {
        matrix[t * count + t] = 1;
    }
    idsi_seminormal_apply(&f->seminormal, skew, word, length, matrix, count);
    return matrix;
}

/* ---- relations ----------------------------------------------------------------------- */

static void check_equal(form *f, const idsi_skew *skew, const uint8_t *a, size_t a_length,
                        const uint8_t *b, size_t b_length)
{
    uint32_t *x = word_matrix(f, skew, a, a_length);
    uint32_t *y = word_matrix(f, skew, b, b_length);
    size_t bytes = (size_t)skew->count * skew->count * sizeof *x;

    ck_assert_mem_eq(x, y, bytes);
    free(x);
    free(y);
}

static void check_relations(form *f, const uint8_t *outer, const uint8_t *inner, uint32_t rows)
{
    uint32_t number = 0;

    TEST_OK(f->skews.ctx, idsi_skews_get(&f->skews, outer, inner, rows, &number));
    const idsi_skew *skew = f->skews.list[number];
    for (uint8_t i = 0; i + 1 < skew->shape.cells; i++) {
        check_equal(f, skew, (const uint8_t[]){i, i}, 2, NULL, 0);
        for (uint8_t j = (uint8_t)(i + 1); j + 1 < skew->shape.cells; j++) {
            if (j == i + 1) {
                check_equal(f, skew, (const uint8_t[]){i, j, i}, 3, (const uint8_t[]){j, i, j}, 3);
            } else {
                check_equal(f, skew, (const uint8_t[]){i, j}, 2, (const uint8_t[]){j, i}, 2);
            }
        }
    }
}

/* All shapes outer/inner with the given outer shape. */
static void check_inners(form *f, const ids_partition *outer, uint32_t cells)
{
    for (uint32_t size = outer->degree > cells ? outer->degree - cells : 0; size < outer->degree;
         size++) {
        for (uint64_t i = 0; i < ids_partition_count(size); i++) {
            ids_partition inner = {0};
            bool inside = true;
            ck_assert_int_eq(ids_partition_unrank(size, i, &inner), IDS_OK);
            for (uint32_t r = 0; r < inner.length; r++) {
                inside = inside && inner.part[r] <= outer->part[r];
            }
            if (inside) {
                check_relations(f, outer->part, inner.part, outer->length);
            }
        }
    }
}

/* Straight shapes to 7 cells, skew ones to 6 in partitions to 8. */
START_TEST(test_relations)
{
    static const uint32_t primes[] = {LARGE, SMALL};
    static const uint8_t steps[] = {5, 4, 3, 2, 1};
    static const uint8_t below[] = {4, 3, 2, 1, 0};
    ids_ctx *ctx = test_ctx();
    form f;

    open_form(&f, ctx, primes[_i % 2]);
    const uint32_t degree = (uint32_t)_i / 2 + 2;
    for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
        ids_partition outer = {0};
        ck_assert_int_eq(ids_partition_unrank(degree, i, &outer), IDS_OK);
        check_inners(&f, &outer, degree <= 6 ? degree : 6);
        if (degree <= 7) {
            static const uint8_t none[ROWS] = {0};
            check_relations(&f, outer.part, none, outer.length);
        }
    }
    check_relations(&f, steps, below, 5); /* the regular representation of S_5 */
    idsi_skews_clear(&f.skews);
    test_ctx_free(ctx);
}
END_TEST

/* ---- characters ---------------------------------------------------------------------- */

/* A permutation of a cycle type, 1, 2, .. in turn; a cycle of k is a product of k-1 exchanges. */
static size_t cycle_word(const ids_partition *type, uint8_t *word)
{
    size_t length = 0;
    uint32_t start = 0;

    for (uint32_t c = 0; c < type->length; c++) {
        for (uint32_t k = 0; k + 1 < type->part[c]; k++) {
            word[length++] = (uint8_t)(start + k);
        }
        start += type->part[c];
    }
    return length;
}

static int64_t trace(form *f, const uint8_t *outer, const uint8_t *inner, uint32_t rows,
                     const ids_partition *type)
{
    uint8_t word[ROWS];
    uint32_t number = 0;
    uint64_t sum = 0;
    size_t length = cycle_word(type, word);

    TEST_OK(f->skews.ctx, idsi_skews_get(&f->skews, outer, inner, rows, &number));
    const idsi_skew *skew = f->skews.list[number];
    ck_assert_uint_eq(skew->shape.cells, type->degree);
    uint32_t *matrix = word_matrix(f, skew, word, length);
    for (size_t t = 0; t < skew->count; t++) {
        sum += matrix[t * skew->count + t];
    }
    free(matrix);
    sum %= f->p;
    return sum > f->p / 2 ? (int64_t)sum - (int64_t)f->p : (int64_t)sum;
}

START_TEST(test_characters)
{
    static const uint8_t none[ROWS] = {0};
    const uint32_t degree = (uint32_t)_i;
    ids_ctx *ctx = test_ctx();
    idsi_strips strips;
    int64_t value[64];
    form f;

    open_form(&f, ctx, LARGE);
    TEST_OK(ctx, idsi_strips_create(ctx, degree, &strips));
    for (uint64_t j = 0; j < ids_partition_count(degree); j++) {
        ids_partition type = {0};
        ck_assert_int_eq(ids_partition_unrank(degree, j, &type), IDS_OK);
        TEST_OK(ctx, idsi_character_column(&strips, &type, value));
        for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
            ids_partition shape = {0};
            ck_assert_int_eq(ids_partition_unrank(degree, i, &shape), IDS_OK);
            ck_assert_int_eq(trace(&f, shape.part, none, shape.length, &type), value[i]);
        }
    }
    idsi_strips_clear(&strips);
    idsi_skews_clear(&f.skews);
    test_ctx_free(ctx);
}
END_TEST

/* sum over mu of chi^mu(u) chi^(lambda/mu)(v) for the lambda of the given index */
static int64_t branch(form *f, const idsi_strips *strips, const ids_partition *lambda,
                      const ids_partition *u, const ids_partition *v)
{
    int64_t value[64];
    int64_t sum = 0;

    TEST_OK(f->skews.ctx, idsi_character_column(strips, u, value));
    for (uint64_t k = 0; k < ids_partition_count(u->degree); k++) {
        ids_partition mu = {0};
        bool inside = true;
        ck_assert_int_eq(ids_partition_unrank(u->degree, k, &mu), IDS_OK);
        for (uint32_t r = 0; r < mu.length; r++) {
            inside = inside && mu.part[r] <= lambda->part[r];
        }
        if (inside && value[k] != 0) {
            sum += value[k] * trace(f, lambda->part, mu.part, lambda->length, v);
        }
    }
    return sum;
}

/* The cycle type of u v. */
static ids_partition join(const ids_partition *u, const ids_partition *v)
{
    ids_partition both = {.degree = u->degree + v->degree};
    uint32_t i = 0;
    uint32_t j = 0;

    while (i < u->length || j < v->length) {
        bool first = j == v->length || (i < u->length && u->part[i] >= v->part[j]);
        both.part[both.length++] = first ? u->part[i++] : v->part[j++];
    }
    return both;
}

START_TEST(test_branching)
{
    const uint32_t degree = 6;
    const uint32_t lower = (uint32_t)_i;
    ids_ctx *ctx = test_ctx();
    idsi_strips strips;
    int64_t value[64];
    form f;

    open_form(&f, ctx, LARGE);
    TEST_OK(ctx, idsi_strips_create(ctx, degree, &strips));
    for (uint64_t a = 0; a < ids_partition_count(lower); a++) {
        for (uint64_t b = 0; b < ids_partition_count(degree - lower); b++) {
            ids_partition u = {0};
            ids_partition v = {0};
            ck_assert_int_eq(ids_partition_unrank(lower, a, &u), IDS_OK);
            ck_assert_int_eq(ids_partition_unrank(degree - lower, b, &v), IDS_OK);
            ids_partition both = join(&u, &v);
            TEST_OK(ctx, idsi_character_column(&strips, &both, value));
            for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
                ids_partition lambda = {0};
                ck_assert_int_eq(ids_partition_unrank(degree, i, &lambda), IDS_OK);
                ck_assert_int_eq(branch(&f, &strips, &lambda, &u, &v), value[i]);
            }
        }
    }
    idsi_strips_clear(&strips);
    idsi_skews_clear(&f.skews);
    test_ctx_free(ctx);
}
END_TEST

/* ---- inner loops --------------------------------------------------------------------- */

#define MOST_WIDTH 70u

static void check_exchange(idsi_exchange_fn run, const idsi_mix *mix, const uint32_t *x,
                           const uint32_t *y, size_t width)
{
    /* a pair, one that is kept, one that changes its sign, and what must not be touched */
    static const uint32_t partner[4] = {3, 1, 2, 0};
    static const int8_t distance[4] = {2, 1, -1, -2};
    idsi_mix by_distance[5] = {{0}};
    idsi_exchange exchange = {.p = mix->p,
                              .count = 4,
                              .partner = partner,
                              .distance = distance,
                              .mix = by_distance,
                              .centre = 2};
    uint32_t block[4 * MOST_WIDTH + 1];

    by_distance[4] = *mix;
    for (size_t t = 0; t < 4; t++) {
        memcpy(block + t * width, t < 2 ? x : y, width * sizeof *x);
    }
    block[4 * width] = 12345;
    run(&exchange, block, width, width);
    for (size_t j = 0; j < width; j++) {
        uint64_t u = x[j];
        uint64_t v = y[j];
        ck_assert_uint_eq(block[j], (mix->a * u + v) % mix->p);
        ck_assert_uint_eq(block[width + j], u);
        ck_assert_uint_eq(block[2 * width + j], (mix->p - v) % mix->p);
        ck_assert_uint_eq(block[3 * width + j],
                          ((mix->p + 1 - (uint64_t)mix->a * mix->a % mix->p) % mix->p * u +
                           (uint64_t)(mix->p - mix->a) * v) % mix->p);
    }
    ck_assert_uint_eq(block[4 * width], 12345);
}

static void check_widths(idsi_random *random, idsi_exchange_fn run, uint32_t p)
{
    uint32_t x[MOST_WIDTH + 1];
    uint32_t y[MOST_WIDTH + 1];

    for (size_t width = 0; width <= MOST_WIDTH; width++) {
        idsi_mix mix = {.p = p,
                        .a = width % 3 == 0 ? p - 1 : (uint32_t)idsi_random_below(random, p)};
        mix.shoup = (uint32_t)(((uint64_t)mix.a << 32) / p);
        for (size_t j = 0; j <= MOST_WIDTH; j++) {
            /* often the borders */
            uint64_t kind = idsi_random_below(random, 8);
            x[j] = kind == 0 ? p - 1 : kind == 1 ? 0 : (uint32_t)idsi_random_below(random, p);
            kind = idsi_random_below(random, 8);
            y[j] = kind == 0 ? p - 1 : kind == 1 ? 0 : (uint32_t)idsi_random_below(random, p);
        }
        check_exchange(run, &mix, x, y, width);
    }
}

START_TEST(test_mix)
{
    static const uint32_t primes[] = {2, 3, SMALL, 65537, 536870923, LARGE};
    idsi_exchange_fn functions[3] = {idsi_exchange_portable, NULL, NULL};
    idsi_random random;

#if defined(__x86_64__)
    if (__builtin_cpu_supports("avx2")) {
        functions[1] = idsi_exchange_avx2;
    }
    if (__builtin_cpu_supports("avx512f")) {
        functions[2] = idsi_exchange_avx512;
    }
#endif
    test_random(&random, 77);
    for (uint64_t round = 0; round < 20 * test_scale(); round++) {
        for (size_t k = 0; k < 3; k++) {
            if (functions[k] != NULL) {
                check_widths(&random, functions[k], primes[round % 6]);
            }
        }
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("young: seminormal form");
    TCase *tcase = tcase_create("seminormal");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_relations, 0, 14);
    tcase_add_loop_test(tcase, test_characters, 1, 8);
    tcase_add_loop_test(tcase, test_branching, 1, 6);
    tcase_add_test(tcase, test_mix);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
