/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Cocharacters by the partition engine: the tables of data/reference as far as they take seconds,
 * and varieties of which a theorem gives every multiplicity:
 *
 *   Lie          tableaux of major index 1 mod n: Kraskiewicz and Weyman, Bayreuth. Math. Schr. 63
 *                (2001), as quoted at http://eprints.maths.manchester.ac.uk/201/
 *   Grassmann    all hooks once: Olsson and Regev 1976 (from memory)
 *   Poisson      the regular representation (classical, from memory); Leibniz: Loday 1993
 *   metabelian   (n-1,1) once (classical, from memory)
 *   Filippov     of k arguments: 2^(k-1)1 with two brackets, 3^(k-1)1 + 3^(k-2)211 with three:
 *                Friedmann, Hanlon, Stanley and Wachs, arXiv 1710.00376
 */
#include "cocharacters.h"

#include <string.h>

#include "published.h"

typedef uint64_t (*theorem_fn)(const ids_partition *partition, uint64_t dimension);

/* ---- theorems -------------------------------------------------------------------------------- */

/* Tableaux with the entries from `next` on, by major index mod n: descents i, i+1 below i. */
static uint64_t count_major(const ids_partition *shape, uint8_t *filled, uint32_t next,
                            uint32_t last_row, uint32_t major)
{
    const uint32_t n = shape->degree;
    uint64_t count = 0;

    if (next > n) {
        return major % n == 1 % n ? 1 : 0;
    }
    for (uint32_t r = 0; r < shape->length; r++) {
        if (filled[r] < shape->part[r] && (r == 0 || filled[r - 1] > filled[r])) {
            filled[r]++;
            count += count_major(shape, filled, next + 1, r,
                                 next > 1 && r > last_row ? major + next - 1 : major);
            filled[r]--;
        }
    }
    return count;
}

static uint64_t lie(const ids_partition *partition, uint64_t dimension)
{
    uint8_t filled[IDS_MAX_PARTITION_DEGREE] = {0};

    (void)dimension;
    return count_major(partition, filled, 1, 0, 0);
}

static uint64_t hooks(const ids_partition *partition, uint64_t dimension)
{
    (void)dimension;
    return partition->part[1] <= 1 ? 1 : 0;
}

static uint64_t regular(const ids_partition *partition, uint64_t dimension)
{
    (void)partition;
    return dimension;
}

static uint64_t metabelian(const ids_partition *partition, uint64_t dimension)
{
    (void)dimension;
    /* degree 1: one; degree 2: 1+1 */
    return partition->degree == 1 || (partition->length == 2 && partition->part[1] == 1) ? 1 : 0;
}

/* Whether these are the parts: so many 3, 2 and 1. */
static bool has_parts(const ids_partition *partition, uint32_t threes, uint32_t twos, uint32_t ones)
{
    bool same = partition->length == threes + twos + ones;

    for (uint32_t i = 0; same && i < partition->length; i++) {
        same = partition->part[i] == (i < threes ? 3 : i < threes + twos ? 2 : 1);
    }
    return same;
}

static uint64_t filippov(const ids_partition *partition, uint64_t dimension)
{
    (void)dimension;
    switch (partition->degree) {
    case 1:
        return 1;
    case 3: /* one bracket */
        return partition->length == 3 ? 1 : 0;
    case 5: /* two brackets of three: 2^2 1 */
        return has_parts(partition, 0, 2, 1) ? 1 : 0;
    case 7: /* three: 3^2 1 and 3 2 1 1 */
        return has_parts(partition, 2, 0, 1) || has_parts(partition, 1, 1, 2) ? 1 : 0;
    default:
        return 0; /* an even degree: no monomials */
    }
}

static const struct {
    const char *file;
    uint32_t degree;
    theorem_fn expected;
} theorems[] = {
    {"varieties/lie.pres", 9, lie},
    {"varieties/grassmann.pres", 7, hooks},
    {"varieties/poisson.pres", 7, regular},
    {"varieties/leibniz.pres", 6, regular},
    {"varieties/metabelian-lie.pres", 8, metabelian},
    {"varieties/filippov-3.pres", 7, filippov},
};

START_TEST(test_theorem)
{
    const uint32_t degree = theorems[_i].degree;
    ids_ctx *ctx = test_ctx();
    ids_presentation *presentation = published_presentation(ctx, theorems[_i].file);
    ids_partition_table *table = NULL;
    size_t compared = 0;

    TEST_OK(ctx, ids_partition_table_create(ctx, presentation, 1, degree, NULL, &table));
    for (size_t i = 0; i < ids_partition_table_count(table); i++) {
        ids_partition_row row = {0};
        ck_assert_int_eq(ids_partition_table_row(table, i, &row), IDS_OK);
        if (!row.total) {
            char *text = NULL;
            uint64_t expected = theorems[_i].expected(&row.partition, row.dimension);
            TEST_OK(ctx, ids_partition_print(ctx, &row.partition, &text));
            ck_assert_msg(row.quotient == expected,
                          "%s, %s: multiplicity %" PRIu64 ", but by the theorem %" PRIu64,
                          theorems[_i].file, text, row.quotient, expected);
            ids_string_free(ctx, text);
            compared++;
        }
    }
    ck_assert_uint_gt(compared, degree);
    ids_partition_table_free(table);
    ids_presentation_free(presentation);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("published cocharacters");
    TCase *tcase = tcase_create("theorems");
    int result = 0;

    tcase_set_timeout(tcase, 60);
    tcase_add_loop_test(tcase, test_theorem, 0, sizeof theorems / sizeof *theorems);
    suite_add_tcase(suite, tcase);
    cocharacters_add(suite, "normal", "partition", true, 60);
    cocharacters_add_far(suite, "varieties/ternary-cube-exchange.pres", 11, 60);
    cocharacters_add_far(suite, "varieties/binary-ternary-derivation.pres", 8, 60);
    result = test_run(suite);
    cocharacters_free();
    return result;
}
