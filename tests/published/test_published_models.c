/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What holds in well-known models, against what is known of them. Each row of a table names its
 * source; "recomputed" means that throw-away code gave the same numbers, "from memory" that the
 * source was recalled and not seen.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "published.h"

typedef struct expected {
    const char *file;
    uint32_t degree;
    uint64_t image;   /* dimension of the image: free - holding */
    const char *news; /* partitions of what is new, once for each time */
    const char *source;
} expected;

/* clang-format off */
static const expected images[] = {
    {"models/special-jordan.pres", 5, 55, "", "D20, recomputed"},
    {"models/special-jordan.pres", 6, 330, "", "Glennie 1966: no s-identity below degree 8"},
    {"models/special-jordan.pres", 7, 2345, "", "Glennie 1966"},
    {"models/special-jordan.pres", 8, 19047, "3+3+2",
     "Glennie 1966, 1970: one in degree 8, of weight (3,3,2); 19089 - 42, recomputed"},
    {"models/octonions.pres", 4, 32, "", "alternative up to degree 4, recomputed"},
    {"models/octonions.pres", 5, 150, "3+2 3+1+1 2+2+1 2+1+1+1 2+1+1+1 1+1+1+1+1",
     "Racine 1988, recomputed"},
    {"models/ternary-sum.pres", 5, 10, "", "from memory: first identity in degree 7"},
    {"models/ternary-sum.pres", 7, 273, "7 6+1", "Bremner, Hentzel 2000, recomputed"},
    {"models/ternary-alternating-sum.pres", 5, 10, "", "Bremner 1998, from memory"},
    {"models/ternary-alternating-sum.pres", 7, 273, "2+1+1+1+1+1 1+1+1+1+1+1+1",
     "Bremner 1998, recomputed"},
    {"models/symmetrised-pre-lie.pres", 4, 15, "", "Bergeron, Loday 2011: (2n-3)!!"},
    {"models/symmetrised-pre-lie.pres", 5, 105, "", "Bergeron, Loday"},
    {"models/symmetrised-pre-lie.pres", 6, 945, "", "Bergeron, Loday"},
    {"models/matrices-2.pres", 4, 23, "1+1+1+1",
     "Amitsur, Levitzki 1950: the standard identity; Procesi 1984, from memory"},
    {"models/matrices-2.pres", 5, 91, NULL, "Procesi, J. Algebra 87 (1984), from memory"},
    {"models/matrices-2.pres", 6, 346, NULL, "Procesi 1984"},
    {"models/matrices-2.pres", 7, 1268, NULL, "Procesi 1984"},
    {"models/sl-2.pres", 4, 6, "", "Drensky 1981, from memory"},
    {"models/sl-2.pres", 5, 14, NULL, "Drensky 1981"},
    {"models/sl-2.pres", 6, 36, NULL, "Drensky 1981"},
    {"models/sl-2.pres", 7, 90, NULL, "Drensky 1981"},
    {"models/lie-words.pres", 6, 120, "", "Poincare, Birkhoff, Witt: (n-1)!"},
    {"models/lie-words.pres", 7, 720, "", "(n-1)!"},
    {"models/transposed.pres", 3, 12, "", "own: multiplied out by throw-away code"},
    {"models/transposed.pres", 4, 104, NULL, "own: multiplied out by throw-away code"},
};
/* clang-format on */

static int load(void *user, const char *name, ids_sink_fn sink, void *sink_user)
{
    char path[256];
    size_t length = 0;

    snprintf(path, sizeof path, "%s/%s", (const char *)user, name);
    char *text = published_read(path, &length);
    int result = sink(sink_user, text, length);
    free(text);
    return result;
}

/* The table of a model in one degree. */
static ids_fresh *find(ids_ctx *ctx, const char *file, uint32_t degree, ids_presentation **pres,
                       ids_model **model)
{
    char folder[] = "models";
    ids_fresh_options options = {.struct_size = sizeof options, .table_only = true};
    ids_fresh *fresh = NULL;

    *pres = published_presentation(ctx, file);
    TEST_OK(ctx, ids_model_open(ctx, *pres, 0, load, folder, model));
    TEST_OK(ctx, ids_fresh_create(ctx, *model, degree, degree, &options, &fresh));
    return fresh;
}

static void list_news(ids_ctx *ctx, const ids_fresh *fresh, char *news, size_t size)
{
    size_t used = 0;

    news[0] = '\0';
    for (size_t i = 0; i + 1 < ids_fresh_count(fresh); i++) {
        ids_fresh_row row = {0};
        char *text = NULL;
        TEST_OK(ctx, ids_fresh_row_get(fresh, i, &row));
        TEST_OK(ctx, ids_partition_print(ctx, &row.partition, &text));
        for (uint64_t k = 0; k < row.fresh; k++) {
            used += (size_t)snprintf(news + used, size - used, "%s%s", used > 0 ? " " : "", text);
        }
        ids_string_free(ctx, text);
    }
}

START_TEST(test_image)
{
    const expected *e = &images[_i];
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_model *model = NULL;
    ids_fresh *fresh = find(ctx, e->file, e->degree, &pres, &model);
    ids_fresh_row total = {0};
    ids_model_info info = {0};
    static char news[32768];

    TEST_OK(ctx, ids_fresh_row_get(fresh, ids_fresh_count(fresh) - 1, &total));
    TEST_OK(ctx, ids_presentation_model(pres, 0, &info));
    ck_assert(total.total);
    ck_assert_msg(total.free - total.holding == e->image,
                  "%s, degree %u: %" PRIu64 ", not %" PRIu64 " (%s)", e->file, e->degree,
                  total.free - total.holding, e->image, e->source);
    list_news(ctx, fresh, news, sizeof news);
    if (e->news != NULL) {
        ck_assert_msg(strcmp(news, e->news) == 0, "%s, degree %u: new are %s (%s)", e->file,
                      e->degree, news, e->source);
        /* Over another presentation even that nothing is new is only known modulo a prime. */
        ck_assert_int_eq(total.certainty == IDS_CERTAINTY_EXACT,
                         news[0] == '\0' && info.kind != IDS_MODEL_OVER);
    }
    ids_fresh_free(fresh);
    ids_model_free(model);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* ---- rules for cocharacters ------------------------------------------------------------------ */

typedef uint64_t (*rule)(const ids_partition *partition);

static uint32_t part(const ids_partition *partition, uint32_t i)
{
    return i < partition->length ? partition->part[i] : 0;
}

/* Drensky 1981, from memory: 1 for at most three rows, the second not empty, and l1 - l2 or
 * l2 - l3 odd. */
static uint64_t sl2(const ids_partition *p)
{
    const bool odd = (part(p, 0) - part(p, 1)) % 2 == 1 || (part(p, 1) - part(p, 2)) % 2 == 1;
    return p->length <= 3 && p->length >= 2 && odd;
}

/* Drensky 1984 and Formanek 1984, from memory. */
static uint64_t matrices(const ids_partition *p)
{
    const uint64_t a = part(p, 0);
    const uint64_t b = part(p, 1);
    const uint64_t c = part(p, 2);
    const uint64_t d = part(p, 3);
    if (p->length > 4) {
        return 0;
    }
    if (p->length == 1) {
        return 1;
    }
    if (p->length == 2) {
        return (a - b + 1) * b;
    }
    if (b == 1) {
        return a * (2 - d) - 1;
    }
    return (a - b + 1) * (b - c + 1) * (c - d + 1);
}

/* Fills the tableau with n, n-1, .., and adds the places i whose i+1 stands lower. */
static uint64_t major(uint8_t *rows_left, uint32_t rows, uint32_t n, uint32_t last, uint64_t sum,
                      uint64_t modulus)
{
    uint64_t count = 0;
    if (n == 0) {
        return sum % modulus == 1;
    }
    for (uint32_t i = 0; i < rows; i++) {
        if (rows_left[i] > (i + 1 < rows ? rows_left[i + 1] : 0)) {
            rows_left[i]--;
            count +=
                major(rows_left, rows, n - 1, i, sum + (n < modulus && last > i ? n : 0), modulus);
            rows_left[i]++;
        }
    }
    return count;
}

/* Kraskiewicz, Weyman, Bayreuth. Math. Schr. 63 (2001): standard tableaux with major index 1
 * modulo n. */
static uint64_t lie(const ids_partition *p)
{
    uint8_t left[IDS_MAX_PARTITION_DEGREE];
    memcpy(left, p->part, sizeof left);
    return major(left, p->length, p->degree, 0, 0, p->degree);
}

static void check_rule(const char *file, uint32_t degree, rule multiplicity)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_model *model = NULL;
    ids_fresh *fresh = find(ctx, file, degree, &pres, &model);

    for (size_t i = 0; i + 1 < ids_fresh_count(fresh); i++) {
        ids_fresh_row row = {0};
        TEST_OK(ctx, ids_fresh_row_get(fresh, i, &row));
        ck_assert_msg(row.free - row.holding == multiplicity(&row.partition),
                      "%s, degree %u, row %zu: %" PRIu64 ", not %" PRIu64, file, degree, i,
                      row.free - row.holding, multiplicity(&row.partition));
    }
    ids_fresh_free(fresh);
    ids_model_free(model);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}

START_TEST(test_sl2)
{
    check_rule("models/sl-2.pres", (uint32_t)_i, sl2);
}
END_TEST

START_TEST(test_matrices)
{
    check_rule("models/matrices-2.pres", (uint32_t)_i, matrices);
}
END_TEST

START_TEST(test_lie)
{
    check_rule("models/lie-words.pres", (uint32_t)_i, lie);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("published_models");
    TCase *tc = tcase_create("models");
    tcase_set_timeout(tc, 60);
    tcase_add_loop_test(tc, test_image, 0, (int)(sizeof images / sizeof *images));
    tcase_add_loop_test(tc, test_sl2, 2, 8);
    tcase_add_loop_test(tc, test_matrices, 1, 8);
    tcase_add_loop_test(tc, test_lie, 2, 9);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
