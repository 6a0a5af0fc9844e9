/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * New identities that are written down: with them nothing is new any more, each of them is missed
 * when it is left out, they hold, and they are short. The numbers of modules have their sources in
 * test_published_models.c; the lengths are what this program reaches, so that it is not worse
 * later.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/idspan.h>

#include "field/field_private.h"
#include "support.h"

typedef struct example {
    const char *file; /* in data/models */
    uint32_t from;
    uint32_t to;
    size_t identities;
    uint64_t most_terms; /* of one */
    int64_t largest;     /* coefficient */
} example;

static const example examples[] = {
    {"ternary-sum.pres", 7, 7, 1, 2, 1},
    {"ternary-alternating-sum.pres", 7, 7, 1, 2, 1},
    {"octonions.pres", 5, 6, 4, 6, 5},
    {"matrices-2.pres", 4, 5, 2, 6, 1},
    {"sl-2.pres", 5, 6, 2, 1, 1},
    {"transposed.pres", 4, 4, 4, 11, 2},
    {"symmetrised-pre-lie.pres", 2, 5, 0, 0, 0},
};

/* ---- files ----------------------------------------------------------------------------------- */

static char *read_file(const char *name)
{
    char path[512];
    char *text = calloc(1, 1 << 20);

    snprintf(path, sizeof path, "%s/models/%s", IDSPAN_DATA_DIR, name);
    FILE *file = fopen(path, "rb");
    ck_assert_msg(file != NULL && text != NULL, "%s", path);
    ck_assert(fread(text, 1, (1 << 20) - 1, file) > 0);
    fclose(file);
    return text;
}

static int load(void *user, const char *name, ids_sink_fn sink, void *sink_user)
{
    char *text = read_file(name);
    int result = sink(sink_user, text, strlen(text));
    (void)user;
    free(text);
    return result;
}

/* What is new in the first model of a presentation. */
static void find(ids_ctx *ctx, const char *text, uint32_t from, uint32_t to, bool table_only,
                 ids_presentation **pres, ids_model **model, ids_fresh **fresh)
{
    ids_fresh_options options = {.struct_size = sizeof options, .table_only = table_only};

    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, pres));
    TEST_OK(ctx, ids_model_open(ctx, *pres, 0, load, NULL, model));
    TEST_OK(ctx, ids_fresh_create(ctx, *model, from, to, &options, fresh));
}

/* Dimension of what is new in a degree. */
static uint64_t count_new(ids_ctx *ctx, const char *text, uint32_t degree)
{
    ids_presentation *pres = NULL;
    ids_model *model = NULL;
    ids_fresh *fresh = NULL;
    ids_fresh_row row = {0};

    find(ctx, text, degree, degree, true, &pres, &model, &fresh);
    TEST_OK(ctx, ids_fresh_row_get(fresh, ids_fresh_count(fresh) - 1, &row));
    ids_fresh_free(fresh);
    ids_model_free(model);
    ids_presentation_free(pres);
    return row.fresh;
}

/* A copy of a text without the line that begins like a statement. */
static char *without(const char *text, const char *statement)
{
    char *copy = malloc(strlen(text) + 1);
    const char *at = strstr(text, statement);
    const char *end = NULL;

    ck_assert(copy != NULL && at != NULL);
    end = strchr(at, '\n');
    memcpy(copy, text, (size_t)(at - text));
    strcpy(copy + (at - text), end);
    return copy;
}

/* ---- examples -------------------------------------------------------------------------------- */

static void check_identity(ids_ctx *ctx, const ids_fresh *fresh, size_t index, const char *saved,
                           const example *e)
{
    ids_fresh_identity found = {0};
    char *less = NULL;

    TEST_OK(ctx, ids_fresh_identity_get(fresh, index, &found));
    ck_assert_uint_le(found.terms, e->most_terms);
    ck_assert_int_le(atoi(found.largest), e->largest);
    ck_assert_uint_eq(found.bits, 0);
    less = without(saved, found.statement);
    ck_assert_uint_gt(count_new(ctx, less, found.degree), 0);
    free(less);
}

START_TEST(test_examples)
{
    const example *e = &examples[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_model *model = NULL;
    ids_fresh *fresh = NULL;
    char *text = read_file(e->file);
    char *saved = NULL;

    find(ctx, text, e->from, e->to, false, &pres, &model, &fresh);
    ck_assert_uint_eq(ids_fresh_identity_count(fresh), e->identities);
    TEST_OK(ctx, ids_fresh_presentation(ctx, fresh, &saved));
    for (uint32_t degree = e->from; degree <= e->to; degree++) {
        ck_assert_uint_eq(count_new(ctx, saved, degree), 0);
    }
    for (size_t i = 0; i < e->identities; i++) {
        check_identity(ctx, fresh, i, saved, e);
    }
    ids_string_free(ctx, saved);
    ids_fresh_free(fresh);
    ids_model_free(model);
    ids_presentation_free(pres);
    free(text);
    test_ctx_free(ctx);
}
END_TEST

/* Over a presentation: Lie triple systems in Lie algebras (Jacobson: the three laws are all), and
 * two identities that do not hold. */
START_TEST(test_over)
{
    static const char text[] = "operation {a,b,c}\n"
                               "identity {a,a,b}\n"
                               "identity {a,b,c} + {b,c,a} + {c,a,b}\n"
                               "identity {a,b,{c,d,e}} = {{a,b,c},d,e} + {c,{a,b,d},e} + "
                               "{c,d,{a,b,e}}\n"
                               "candidate {a,b,a}\n"
                               "candidate {a,a,b}\n"
                               "model lts over \"../varieties/lie.pres\": {a,b,c} = [[a,b],c]\n";
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_model *model = NULL;
    bool holds = true;
    uint32_t bits = 0;

    ck_assert_uint_eq(count_new(ctx, text, 3), 0);
    ck_assert_uint_eq(count_new(ctx, text, 5), 0);
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    TEST_OK(ctx, ids_model_open(ctx, pres, 0, load, NULL, &model));
    TEST_OK(ctx, ids_model_holds(ctx, model, IDS_ROLE_CANDIDATE, 0, &holds, &bits));
    ck_assert(!holds);
    TEST_OK(ctx, ids_model_holds(ctx, model, IDS_ROLE_CANDIDATE, 1, &holds, &bits));
    ck_assert(holds);
    ids_model_free(model);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* The exchange of random points for all basis tuples changes nothing. */
START_TEST(test_exact)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_model *model = NULL;
    ids_fresh *fresh[2] = {NULL};
    char *text = read_file("octonions.pres");

    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    TEST_OK(ctx, ids_model_open(ctx, pres, 0, load, NULL, &model));
    for (int k = 0; k < 2; k++) {
        ids_fresh_options options = {
            .struct_size = sizeof options, .table_only = true, .exact = k == 1};
        TEST_OK(ctx, ids_fresh_create(ctx, model, 2, 4, &options, &fresh[k]));
    }
    ck_assert_uint_eq(ids_fresh_count(fresh[0]), ids_fresh_count(fresh[1]));
    for (size_t i = 0; i < ids_fresh_count(fresh[0]); i++) {
        ids_fresh_row a = {0};
        ids_fresh_row b = {0};
        TEST_OK(ctx, ids_fresh_row_get(fresh[0], i, &a));
        TEST_OK(ctx, ids_fresh_row_get(fresh[1], i, &b));
        ck_assert_uint_eq(a.holding, b.holding);
        ck_assert_uint_eq(a.fresh, b.fresh);
    }
    ids_fresh_free(fresh[0]);
    ids_fresh_free(fresh[1]);
    ids_model_free(model);
    ids_presentation_free(pres);
    free(text);
    test_ctx_free(ctx);
}
END_TEST

/* ---- misuse ---------------------------------------------------------------------------------- */

START_TEST(test_misuse)
{
    static const char text[] = "operation a*b\nmodel m associative: a*b = a b\n"
                               "model n algebra \"none\"\n";
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_model *model = NULL;
    ids_fresh *fresh = NULL;
    ids_fresh_options options = {.struct_size = 1};
    ids_model_info info = {0};
    ids_fresh_identity found = {0};
    ids_fresh_row row = {0};
    char *saved = NULL;
    bool holds = false;

    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    ck_assert_uint_eq(ids_presentation_model_count(pres), 2);
    ck_assert_uint_eq(ids_presentation_model_count(NULL), 0);
    ck_assert_int_eq(ids_presentation_model(pres, 2, &info), IDS_ERR_ARG);
    ck_assert_int_eq(ids_presentation_model(NULL, 0, &info), IDS_ERR_ARG);
    TEST_OK(ctx, ids_presentation_model(pres, 1, &info));
    ck_assert_str_eq(info.file, "none");
    TEST_STATUS(ctx, ids_model_open(ctx, pres, 2, NULL, NULL, &model), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_model_open(ctx, NULL, 0, NULL, NULL, &model), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_model_open(ctx, pres, 1, NULL, NULL, &model), IDS_ERR_IO);
    ck_assert_ptr_null(model);
    TEST_OK(ctx, ids_model_open(ctx, pres, 0, NULL, NULL, &model));
    TEST_STATUS(ctx, ids_model_holds(ctx, model, IDS_ROLE_IDENTITY, 0, &holds, NULL), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_fresh_create(ctx, model, 0, 3, NULL, &fresh), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_fresh_create(ctx, model, 3, 2, NULL, &fresh), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_fresh_create(ctx, model, 2, 17, NULL, &fresh), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_fresh_create(ctx, NULL, 2, 3, NULL, &fresh), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_fresh_create(ctx, model, 2, 3, &options, &fresh), IDS_ERR_ARG);
    options = (ids_fresh_options){.struct_size = sizeof options, .primes = 1001};
    TEST_STATUS(ctx, ids_fresh_create(ctx, model, 2, 3, &options, &fresh), IDS_ERR_ARG);
    TEST_OK(ctx, ids_fresh_create(ctx, model, 2, 3, NULL, &fresh));
    /* Associativity: by partition 3, 2+1 twice, 1+1+1. */
    ck_assert_uint_eq(ids_fresh_identity_count(fresh), 3);
    ck_assert_int_eq(ids_fresh_identity_get(fresh, 3, &found), IDS_ERR_ARG);
    ck_assert_int_eq(ids_fresh_row_get(fresh, ids_fresh_count(fresh), &row), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_fresh_presentation(ctx, NULL, &saved), IDS_ERR_ARG);
    ck_assert_uint_eq(ids_fresh_prime(fresh, ids_fresh_prime_count(fresh)), 0);
    ck_assert_uint_eq(ids_fresh_count(NULL) + ids_fresh_prime_count(NULL), 0);
    ck_assert_uint_eq(ids_fresh_identity_count(NULL), 0);
    ids_fresh_free(fresh);
    ids_fresh_free(NULL);
    ids_model_free(model);
    ids_model_free(NULL);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* ---- alternating statements ------------------------------------------------------------------ */

START_TEST(test_alternating)
{
    static const char a[] = "operation a*b\nidentity j: (x*y)*z = 0 alternating x,y,z\n";
    static const char b[] = "operation a*b\nidentity j: (x*y)*z - (y*x)*z + (y*z)*x - (z*y)*x "
                            "+ (z*x)*y - (x*z)*y\n";
    static const char c[] = "operation a*b\n"
                            "identity j: (x*y)*(z*t) alternating x,y alternating z,t\n";
    static const char d[] = "operation a*b\nidentity j: (x*y)*(z*t) - (y*x)*(z*t) - (x*y)*(t*z) "
                            "+ (y*x)*(t*z)\n";
    ids_ctx *ctx = test_ctx();
    ids_presentation *one = NULL;
    ids_presentation *two = NULL;

    TEST_OK(ctx, ids_presentation_read(ctx, a, strlen(a), NULL, &one));
    TEST_OK(ctx, ids_presentation_read(ctx, b, strlen(b), NULL, &two));
    ck_assert(ids_presentation_equal(one, two));
    ids_presentation_free(one);
    ids_presentation_free(two);
    TEST_OK(ctx, ids_presentation_read(ctx, c, strlen(c), NULL, &one));
    TEST_OK(ctx, ids_presentation_read(ctx, d, strlen(d), NULL, &two));
    ck_assert(ids_presentation_equal(one, two));
    ids_presentation_free(one);
    ids_presentation_free(two);
    test_ctx_free(ctx);
}
END_TEST

/* ---- lattices -------------------------------------------------------------------------------- */

/* The lattice of (1, 0, 1000) and (0, 1, 1001) has the vectors (1, -1, -1) and, beside it, none of
 * norm below 20: by hand. */
START_TEST(test_lattice)
{
    static const int64_t entries[6] = {1, 0, 1000, 0, 1, 1001};
    ids_ctx *ctx = test_ctx();
    mpz_t rows[6];
    int64_t sum = 0;

    for (size_t i = 0; i < 6; i++) {
        mpz_init_set_si(rows[i], (int)entries[i]);
    }
    TEST_OK(ctx, idsi_border_shorten(ctx, rows, 2, 3));
    for (size_t j = 0; j < 3; j++) {
        ck_assert_int_eq(mpz_cmpabs_ui(rows[j], 1), 0);
        sum += mpz_sgn(rows[j]) * mpz_sgn(rows[0]);
    }
    ck_assert_int_eq(sum, -1);
    TEST_STATUS(ctx, idsi_border_shorten(ctx, rows, 0, 3), IDS_ERR_LIMIT);
    mpz_mul_2exp(rows[0], rows[0], 5000);
    TEST_STATUS(ctx, idsi_border_shorten(ctx, rows, 2, 3), IDS_ERR_LIMIT);
    for (size_t i = 0; i < 6; i++) {
        mpz_clear(rows[i]);
    }
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("answer_fresh");
    TCase *tc = tcase_create("fresh");
    tcase_set_timeout(tc, 60);
    tcase_add_loop_test(tc, test_examples, 0, (int)(sizeof examples / sizeof *examples));
    tcase_add_test(tc, test_over);
    tcase_add_test(tc, test_exact);
    tcase_add_test(tc, test_misuse);
    tcase_add_test(tc, test_alternating);
    tcase_add_test(tc, test_lattice);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
