/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Weight spaces with even and odd letters. Their dimensions follow from the cocharacter of the free
 * algebra, which comes from characters: with m the multiplicities and K the Kostka numbers,
 *
 *     even letters, content c:  sum of K(l, c) m(l)        odd letters:  sum of K(l', c) m(l)
 */
#include <string.h>

#include <idspan/idspan.h>

#include "answer/fresh_private.h"
#include "support.h"

static const char *const signatures[] = {
    "operation a*b\n",
    "operation a*b commutative\n",
    "operation [a,b] alternating\n",
    "operation a*b commutative\noperation (a,b,c) commutative\n",
    "operation [a,b] alternating\noperation [a,b,c] alternating\n",
    "operation {a,b,c} = {c,b,a}\n",
    "operation t(a,b,c) = -t(b,a,c)\noperation a*b alternating\n",
    "operation <a,b,c> = <b,c,a>\n",
};

/* Semistandard tableaux: horizontal strips of content[k] cells are put on, letter by letter. */
static uint64_t kostka(const uint8_t *shape, uint32_t rows, const uint8_t *content,
                       uint32_t letters)
{
    uint64_t count = 0;
    uint8_t inner[IDS_MAX_PARTITION_DEGREE] = {0};
    uint32_t left = letters > 0 ? content[letters - 1] : 0;

    if (letters == 0) {
        return shape[0] == 0;
    }
    /* All inner shapes such that shape/inner has no two cells in a column, by a counter. */
    for (uint32_t i = 0; i < rows; i++) {
        inner[i] = i + 1 < rows ? shape[i + 1] : 0;
    }
    for (bool more = true; more;) {
        uint32_t strip = 0;
        for (uint32_t i = 0; i < rows; i++) {
            strip += (uint32_t)shape[i] - inner[i];
        }
        if (strip == left) {
            count += kostka(inner, rows, content, letters - 1);
        }
        more = false;
        for (uint32_t i = 0; !more && i < rows; i++) {
            more = inner[i] < shape[i];
            inner[i] = more ? (uint8_t)(inner[i] + 1) : (i + 1 < rows ? shape[i + 1] : 0);
        }
    }
    return count;
}

static void check_content(ids_ctx *ctx, const ids_presentation *pres, const ids_cocharacter *free,
                          const ids_partition *content, bool odd)
{
    idsi_component *component = NULL;
    uint64_t expected = 0;

    for (uint64_t i = 0; i < ids_partition_count(content->degree); i++) {
        ids_partition shape;
        uint64_t multiplicity = 0;
        TEST_OK(ctx, ids_partition_unrank(content->degree, i, &shape));
        TEST_OK(ctx, ids_cocharacter_multiplicity(free, content->degree, i, &multiplicity));
        if (odd) {
            TEST_OK(ctx, ids_partition_conjugate(&shape, &shape));
        }
        expected += multiplicity * kostka(shape.part, shape.length, content->part, content->length);
    }
    TEST_OK(ctx, idsi_component_create_content(ctx, pres, content->part, content->length, odd,
                                               &component));
    ck_assert_uint_eq(idsi_component_monomials(component)->count, expected);
    idsi_component_free(component);
}

START_TEST(test_dimensions)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_cocharacter *free = NULL;
    const uint32_t top = _i == 0 ? 5 : 6;

    TEST_OK(ctx, ids_presentation_read(ctx, signatures[_i], strlen(signatures[_i]), NULL, &pres));
    TEST_OK(ctx, ids_cocharacter_create(ctx, ids_presentation_signature(pres), top, &free));
    for (uint32_t degree = 2; degree <= top; degree++) {
        for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
            ids_partition content;
            TEST_OK(ctx, ids_partition_unrank(degree, i, &content));
            check_content(ctx, pres, free, &content, false);
            check_content(ctx, pres, free, &content, true);
        }
    }
    ids_cocharacter_free(free);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

/* Ranks of consequences in weight spaces, against the partition engine. */
START_TEST(test_consequences)
{
    static const char text[] = "operation a*b\n"
                               "define ass(a,b,c) = (a*b)*c - a*(b*c)\n"
                               "identity ass(a,a,b)\n"
                               "identity ass(a,b,b)\n";
    ids_ctx *ctx = test_ctx();
    ids_presentation *pres = NULL;
    ids_partition_table *table = NULL;
    const uint32_t degree = 5;

    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), NULL, &pres));
    TEST_OK(ctx, ids_partition_table_create(ctx, pres, degree, degree, NULL, &table));
    for (uint64_t i = 0; i < 2 * ids_partition_count(degree); i++) {
        const bool odd = i % 2 == 1;
        ids_partition content;
        idsi_component *component = NULL;
        idsi_system *system = NULL;
        idsi_echelon *echelon = NULL;
        bool good = false;
        uint64_t expected = 0;
        TEST_OK(ctx, ids_partition_unrank(degree, i / 2, &content));
        for (size_t k = 0; k < ids_partition_count(degree); k++) {
            ids_partition_row row = {0};
            ids_partition shape;
            TEST_OK(ctx, ids_partition_table_row(table, k, &row));
            shape = row.partition;
            if (odd) {
                TEST_OK(ctx, ids_partition_conjugate(&shape, &shape));
            }
            expected +=
                row.consequences * kostka(shape.part, shape.length, content.part, content.length);
        }
        TEST_OK(ctx, idsi_component_create_content(ctx, pres, content.part, content.length, odd,
                                                   &component));
        TEST_OK(ctx, idsi_system_create(component, &system));
        TEST_OK(ctx, idsi_system_reduce(system, 998244353, &good));
        ck_assert(good);
        TEST_OK(ctx, idsi_fresh_eliminate(system, NULL, 1, &echelon));
        ck_assert_uint_eq(idsi_echelon_rank(echelon), expected);
        idsi_echelon_free(echelon);
        idsi_system_free(system);
        idsi_component_free(component);
    }
    ids_partition_table_free(table);
    ids_presentation_free(pres);
    test_ctx_free(ctx);
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("answer_component");
    TCase *tc = tcase_create("component");
    tcase_set_timeout(tc, 60);
    tcase_add_loop_test(tc, test_dimensions, 0, (int)(sizeof signatures / sizeof *signatures));
    tcase_add_test(tc, test_consequences);
    suite_add_tcase(s, tc);
    return s;
}

int main(void)
{
    return test_run(suite());
}
