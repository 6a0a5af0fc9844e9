/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The tower of quotients: numbers of columns, and tables under which every row vanishes. The
 * dimensions themselves are compared with published ones in tests/published.
 */
#include <stdlib.h>

#include "engine/engine_private.h"
#include "engine_support.h"

#define PRIME 1073741789u

typedef struct tower {
    ids_ctx *ctx;
    ids_presentation *pres;
    idsi_laws *laws;
    idsi_tower tower;
} tower;

static void open_tower(tower *t, const char *name, uint32_t prime)
{
    t->ctx = test_ctx();
    t->pres = engine_variety(t->ctx, name);
    t->laws = NULL;
    TEST_OK(t->ctx, idsi_laws_create(t->ctx, t->pres, &t->laws));
    idsi_tower_init(&t->tower, t->ctx, t->laws, prime);
}

static void close_tower(tower *t)
{
    idsi_tower_clear(&t->tower);
    idsi_laws_free(t->laws);
    ids_presentation_free(t->pres);
    test_ctx_free(t->ctx);
}

/* A commutative binary product: arguments of unequal degrees, or equal ones in one order. */
static uint64_t commutative_columns(const idsi_tower *t, uint32_t degree)
{
    uint64_t columns = 0;

    for (uint32_t a = degree - 1; 2 * a >= degree; a--) {
        uint64_t ways = idsi_binomial(degree, a);
        ways = 2 * a == degree ? ways / 2 : ways;
        columns += ways * t->level[a].dimension * t->level[degree - a].dimension;
    }
    return columns;
}

START_TEST(test_jordan)
{
    tower t;
    idsi_level level;
    /* OEIS A001776 and A001147 */
    static const uint64_t quotient[] = {1, 1, 3, 11, 55, 330, 2345};
    static const uint64_t free_dimension[] = {1, 1, 3, 15, 105, 945, 10395, 135135};

    open_tower(&t, "jordan.pres", PRIME);
    for (uint32_t d = 1; d <= 7; d++) {
        TEST_OK(t.ctx, idsi_tower_grow(&t.tower, true));
        ck_assert_uint_eq(t.tower.height, d);
        ck_assert_uint_eq(t.tower.level[d].dimension, quotient[d - 1]);
        ck_assert_uint_eq(t.tower.level[d].free, free_dimension[d - 1]);
        ck_assert_uint_eq(t.tower.level[d].columns, d == 1 ? 0 : commutative_columns(&t.tower, d));
    }
    TEST_OK(t.ctx, idsi_level_plan(&t.tower, &level));
    ck_assert_uint_eq(level.free, free_dimension[7]);
    ck_assert_uint_eq(level.columns, commutative_columns(&t.tower, 8));
    /* 8*2345 + 28*330 + 56*3*55 + 35*11*11 */
    ck_assert_uint_eq(level.columns, 41475);
    idsi_level_clear(t.ctx, &level);
    close_tower(&t);
}
END_TEST

/*
 * Commutative with x^2 x^2 = 0: the columns by the formula above. Both numbers were given before
 * this engine was written, and are not its output; no published source.
 */
START_TEST(test_squares)
{
    tower t;
    idsi_level level;

    open_tower(&t, "square-zero-squares.pres", PRIME);
    for (uint32_t d = 1; d <= 8; d++) {
        TEST_OK(t.ctx, idsi_tower_grow(&t.tower, true));
    }
    TEST_OK(t.ctx, idsi_level_plan(&t.tower, &level));
    ck_assert_uint_eq(level.columns, commutative_columns(&t.tower, 9));
    ck_assert_uint_eq(level.columns, 1371132);
    idsi_level_clear(t.ctx, &level);
    TEST_OK(t.ctx, idsi_tower_grow(&t.tower, false));
    ck_assert_uint_eq(t.tower.level[9].dimension, 1139670);
    close_tower(&t);
}
END_TEST

/* ---- tables ------------------------------------------------------------------------------ */

typedef struct check {
    const idsi_tower *tower;
    const idsi_level *level;
    uint64_t *sum;
} check;

static ids_status row_vanishes(void *user, const idsi_entry *row, size_t count)
{
    check *c = user;
    uint32_t p = c->tower->prime;

    for (size_t i = 0; i < count; i++) {
        ck_assert_uint_lt(row[i].column, c->level->columns);
        ck_assert_uint_lt(row[i].value, p);
        for (size_t k = c->level->start[row[i].column]; k < c->level->start[row[i].column + 1];
             k++) {
            const idsi_entry *entry = &c->level->entries[k];
            ck_assert_uint_lt(entry->column, c->level->dimension);
            c->sum[entry->column] =
                (c->sum[entry->column] + idsi_mod_mul(row[i].value, entry->value, p)) % p;
        }
    }
    for (uint64_t j = 0; j < c->level->dimension; j++) {
        ck_assert_uint_eq(c->sum[j], 0);
    }
    return IDS_OK;
}

static void check_level(const tower *t, uint32_t degree)
{
    const idsi_level *level = &t->tower.level[degree];
    check c = {.tower = &t->tower, .level = level};

    for (uint64_t j = 0; j < level->dimension; j++) {
        /* A normal form is its own reduction; they stand in order. */
        uint32_t column = level->normal[j];
        ck_assert(j == 0 || column > level->normal[j - 1]);
        ck_assert_uint_eq(level->start[column + 1], level->start[column] + 1);
        ck_assert_uint_eq(level->entries[level->start[column]].column, j);
        ck_assert_uint_eq(level->entries[level->start[column]].value, 1);
    }
    for (uint64_t column = 0; column < level->columns; column++) {
        /* Others are made of normal forms that stand before them. */
        for (size_t k = level->start[column]; k < level->start[column + 1]; k++) {
            ck_assert_uint_le(level->normal[level->entries[k].column], column);
        }
    }
    c.sum = calloc(level->dimension + 1, sizeof *c.sum);
    ck_assert_ptr_nonnull(c.sum);
    TEST_OK(t->ctx, idsi_rows_each(&t->tower, level, row_vanishes, &c));
    free(c.sum);
}

START_TEST(test_tables)
{
    static const uint32_t primes[] = {PRIME, 101, 3, 2};

    for (size_t i = 0; i < 4; i++) {
        tower t;
        open_tower(&t, engine_varieties[_i], primes[i]);
        for (uint32_t d = 1; d <= 5; d++) {
            idsi_level plan;
            TEST_OK(t.ctx, idsi_level_plan(&t.tower, &plan));
            bool small = plan.columns <= 500;
            idsi_level_clear(t.ctx, &plan);
            if (!small) {
                break;
            }
            TEST_OK(t.ctx, idsi_tower_grow(&t.tower, true));
            if (t.tower.level[d].columns > 0) {
                check_level(&t, d);
            }
        }
        close_tower(&t);
    }
}
END_TEST

/* Which columns are normal does not depend on a large prime, nor on the order of the laws. */
START_TEST(test_same_normal_forms)
{
    static const char *const texts[2] = {
        "operation a*b\nidentity (x*x)*y = x*(x*y)\nidentity (x*y)*y = x*(y*y)\n",
        "operation a*b\nidentity (x*y)*y = x*(y*y)\nidentity (x*x)*y = x*(x*y)\n"};
    static const uint32_t primes[2] = {PRIME, 536870923};
    tower t[4];

    for (int i = 0; i < 4; i++) {
        t[i].ctx = test_ctx();
        t[i].pres = engine_presentation(t[i].ctx, texts[i / 2]);
        t[i].laws = NULL;
        TEST_OK(t[i].ctx, idsi_laws_create(t[i].ctx, t[i].pres, &t[i].laws));
        idsi_tower_init(&t[i].tower, t[i].ctx, t[i].laws, primes[i % 2]);
        for (uint32_t d = 1; d <= 5; d++) {
            TEST_OK(t[i].ctx, idsi_tower_grow(&t[i].tower, true));
            const idsi_level *a = &t[0].tower.level[d];
            const idsi_level *b = &t[i].tower.level[d];
            ck_assert_uint_eq(a->dimension, b->dimension);
            for (uint64_t j = 0; d > 1 && j < a->dimension; j++) {
                ck_assert_uint_eq(a->normal[j], b->normal[j]);
            }
        }
    }
    for (int i = 0; i < 4; i++) {
        close_tower(&t[i]);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("engine: tower");
    TCase *tcase = tcase_create("tower");

    tcase_set_timeout(tcase, 30);
    tcase_add_test(tcase, test_jordan);
    tcase_add_test(tcase, test_squares);
    tcase_add_loop_test(tcase, test_tables, 0, (int)engine_variety_count);
    tcase_add_test(tcase, test_same_normal_forms);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
