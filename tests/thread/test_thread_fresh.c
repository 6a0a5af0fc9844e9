/* SPDX-License-Identifier: BSD-2-Clause */
/* Threads that share models and what is new in them. */
#include <string.h>

#include <idspan/idspan.h>

#include "thread_team.h"

static const char text[] = "operation a*b commutative\n"
                           "identity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n"
                           "candidate associative: (x*y)*z = x*(y*z)\n"
                           "model special associative: a*b = a b + b a\n"
                           "model spin algebra \"spin.alg\"\n";
/* The Jordan algebra of a bilinear form on two vectors. */
static const char spin[] = "basis e u v\noperation a*b commutative\n"
                           "e*e = e\ne*u = u\ne*v = v\nu*u = e\nv*v = e\n";

typedef struct world {
    ids_presentation *pres;
    ids_model *model[2];
    ids_fresh *fresh[2];
} world;

static int load(void *user, const char *name, ids_sink_fn sink, void *sink_user)
{
    (void)user;
    return strcmp(name, "spin.alg") == 0 ? sink(sink_user, spin, sizeof spin - 1) : 1;
}

static void make_world(ids_ctx *ctx, world *w)
{
    MUST(ids_presentation_read(ctx, text, sizeof text - 1, NULL, &w->pres));
    for (size_t i = 0; i < 2; i++) {
        MUST(ids_model_open(ctx, w->pres, i, load, NULL, &w->model[i]));
        MUST(ids_fresh_create(ctx, w->model[i], 2, 4, NULL, &w->fresh[i]));
    }
}

static void free_world(world *w)
{
    for (size_t i = 0; i < 2; i++) {
        ids_fresh_free(w->fresh[i]);
        ids_model_free(w->model[i]);
    }
    ids_presentation_free(w->pres);
}

static void use_world(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    for (size_t i = 0; i < ids_presentation_model_count(w->pres); i++) {
        ids_model_info info;
        bool holds = true;
        MUST(ids_presentation_model(w->pres, i, &info));
        sum_text(sum, info.name);
        MUST(ids_model_holds(ctx, w->model[i], IDS_ROLE_CANDIDATE, 0, &holds, NULL));
        sum_number(sum, holds);
        for (size_t k = 0; k < ids_fresh_count(w->fresh[i]); k++) {
            ids_fresh_row row;
            MUST(ids_fresh_row_get(w->fresh[i], k, &row));
            sum_number(sum, row.holding + 64u * row.fresh + row.bits);
        }
        for (size_t k = 0; k < ids_fresh_identity_count(w->fresh[i]); k++) {
            ids_fresh_identity found;
            MUST(ids_fresh_identity_get(w->fresh[i], k, &found));
            sum_text(sum, found.statement);
        }
        char *saved = NULL;
        MUST(ids_fresh_presentation(ctx, w->fresh[i], &saved));
        sum_text(sum, saved);
        ids_string_free(ctx, saved);
        for (size_t k = 0; k < ids_fresh_prime_count(w->fresh[i]); k++) {
            sum_number(sum, ids_fresh_prime(w->fresh[i], k));
        }
    }
}

static uint64_t use(ids_ctx *ctx, const void *data)
{
    world own = {0};
    uint64_t sum = 0;

    use_world(ctx, data, &sum);
    make_world(ctx, &own);
    use_world(ctx, &own, &sum);
    free_world(&own);
    return sum;
}

START_TEST(test_fresh)
{
    ids_ctx *ctx = test_ctx();
    world w = {0};

    make_world(ctx, &w);
    thread_compare(use, &w);
    free_world(&w);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("threads: fresh");
    TCase *tcase = tcase_create("fresh");

    tcase_set_timeout(tcase, 60);
    tcase_add_test(tcase, test_fresh);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
