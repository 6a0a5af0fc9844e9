/* SPDX-License-Identifier: BSD-2-Clause */
/* Threads that share presentations, normal forms, tables, answers, derivations and witnesses. */
#include <string.h>

#include <idspan/idspan.h>

#include "thread_team.h"

static const char text[] = "operation a*b commutative\n"
                           "identity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n"
                           "candidate powers: ((x*x)*x)*x = (x*x)*(x*x)\n"
                           "candidate associative: (x*y)*z = x*(y*z)\n";

typedef struct world {
    ids_presentation *pres;
    ids_normal_forms *forms;
    ids_combination *sum;
    ids_rank_table *ranks;
    ids_partition_table *table;
    ids_follows *yes;
    ids_follows *no;
    ids_derivation *derivation;
    ids_witness *witness;
    ids_counterexample *counterexample;
} world;

static void make_world(ids_ctx *ctx, world *w)
{
    static const char polynomial[] = "3*((a*b)*c)*d - 1/2*(a*b)*(c*d)";
    const ids_counterexample_options few = {.struct_size = sizeof few, .steps = 10000};
    const ids_normal_options exact = {.struct_size = sizeof exact, .exact = true};

    MUST(ids_presentation_read(ctx, text, sizeof text - 1, "text", &w->pres));
    MUST(ids_normal_forms_create(ctx, w->pres, 4, &exact, &w->forms));
    MUST(ids_normal_forms_reduce_text(ctx, w->forms, polynomial, sizeof polynomial - 1, NULL,
                                      &w->sum));
    MUST(ids_rank_table_create(ctx, w->pres, 1, 5, NULL, &w->ranks));
    MUST(ids_partition_table_create(ctx, w->pres, 1, 5, NULL, &w->table));
    MUST(ids_follows_decide(ctx, w->pres, 0, NULL, &w->yes));
    MUST(ids_follows_decide(ctx, w->pres, 1, NULL, &w->no));
    MUST(ids_derivation_find(ctx, w->pres, 0, NULL, &w->derivation));
    MUST(ids_witness_find(ctx, w->pres, 1, NULL, &w->witness));
    MUST(ids_counterexample_find(ctx, w->pres, 1, &few, &w->counterexample));
}

static void free_world(world *w)
{
    ids_counterexample_free(w->counterexample);
    ids_witness_free(w->witness);
    ids_derivation_free(w->derivation);
    ids_follows_free(w->no);
    ids_follows_free(w->yes);
    ids_partition_table_free(w->table);
    ids_rank_table_free(w->ranks);
    ids_combination_free(w->sum);
    ids_normal_forms_free(w->forms);
    ids_presentation_free(w->pres);
}

static void use_presentation(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    char *whole = NULL;

    sum_number(sum, ids_signature_count(ids_presentation_signature(w->pres)));
    for (size_t i = 0; i < ids_presentation_count(w->pres, IDS_ROLE_CANDIDATE); i++) {
        ids_identity_info info;
        char *linear = NULL;
        MUST(ids_presentation_info(w->pres, IDS_ROLE_CANDIDATE, i, &info));
        sum_text(sum, info.name);
        MUST(ids_presentation_print_identity(ctx, w->pres, IDS_ROLE_CANDIDATE, i, IDS_FORM_LINEAR,
                                             &linear));
        sum_owned(sum, ctx, linear);
    }
    MUST(ids_presentation_print(ctx, w->pres, &whole));
    sum_number(sum, ids_presentation_equal(w->pres, w->pres));
    sum_owned(sum, ctx, whole);
}

static void use_combination(ids_ctx *ctx, const ids_combination *c, uint64_t *sum)
{
    char *whole = NULL;

    sum_number(sum, ids_combination_degree(c));
    for (size_t i = 0; i < ids_combination_count(c); i++) {
        uint64_t index = 0;
        int64_t numerator = 0;
        int64_t denominator = 0;
        char *number = NULL;
        MUST(ids_combination_term(c, i, &index, &numerator, &denominator));
        MUST(ids_combination_coefficient(ctx, c, i, &number));
        sum_number(sum, index + (uint64_t)numerator + (uint64_t)denominator);
        sum_owned(sum, ctx, number);
    }
    MUST(ids_combination_print(ctx, c, &whole));
    sum_owned(sum, ctx, whole);
}

static void use_forms(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    const uint32_t labels[] = {1, 3, 2, 4};
    const ids_factor factors[] = {{0, 2, labels}, {0, 2, labels + 2}};
    uint32_t degree = ids_normal_forms_max_degree(w->forms);
    ids_combination *product = NULL;

    sum_number(sum, ids_normal_forms_prime(w->forms));
    for (uint64_t i = 0; i < ids_normal_forms_count(w->forms, degree); i++) {
        ids_mono *mono = NULL;
        ids_combination *same = NULL;
        char *name = NULL;
        MUST(ids_normal_forms_mono(ctx, w->forms, degree, i, &mono));
        MUST(ids_normal_forms_print(ctx, w->forms, degree, i, &name));
        sum_owned(sum, ctx, name);
        MUST(
            ids_normal_forms_reduce(ctx, w->forms, (const ids_mono *const *)&mono, NULL, 1, &same));
        use_combination(ctx, same, sum);
        ids_combination_free(same);
        ids_mono_free(mono);
    }
    MUST(ids_normal_forms_product(ctx, w->forms, 0, factors, 2, &product));
    use_combination(ctx, product, sum);
    use_combination(ctx, w->sum, sum);
    ids_combination_free(product);
}

static void use_tables(const world *w, uint64_t *sum)
{
    for (size_t i = 0; i < ids_rank_table_count(w->ranks); i++) {
        ids_rank_row row;
        MUST(ids_rank_table_row(w->ranks, i, &row));
        sum_number(sum, row.quotient + row.bits);
    }
    for (size_t i = 0; i < ids_rank_table_prime_count(w->ranks); i++) {
        sum_number(sum, ids_rank_table_prime(w->ranks, i));
    }
    sum_number(sum, ids_rank_table_field(w->ranks) + ids_rank_table_weakened(w->ranks));
    for (size_t i = 0; i < ids_partition_table_count(w->table); i++) {
        ids_partition_row row;
        MUST(ids_partition_table_row(w->table, i, &row));
        sum_number(sum, row.quotient + row.bits);
    }
    for (size_t i = 0; i < ids_partition_table_prime_count(w->table); i++) {
        sum_number(sum, ids_partition_table_prime(w->table, i));
    }
}

static void use_follows(const ids_follows *follows, uint64_t *sum)
{
    uint32_t bits = 0;

    sum_number(sum, ids_follows_answer(follows) + 2u * ids_follows_degree(follows));
    sum_number(sum, ids_follows_certainty(follows, &bits));
    sum_number(sum, bits);
    for (size_t i = 0; i < ids_follows_count(follows); i++) {
        ids_partition partition;
        uint64_t multiplicity = 0;
        MUST(ids_follows_partition(follows, i, &partition, &multiplicity));
        sum_number(sum, partition.length + multiplicity);
    }
}

typedef struct sheet {
    size_t length;
    char bytes[4096];
} sheet;

static int keep(void *user, const char *bytes, size_t length)
{
    sheet *s = user;

    if (length > sizeof s->bytes - s->length) {
        return 1;
    }
    memcpy(s->bytes + s->length, bytes, length);
    s->length += length;
    return 0;
}

static void use_certificates(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    int64_t value[IDS_MAX_DIMENSION] = {0};
    sheet files[3] = {{0}};

    sum_number(sum, ids_derivation_count(w->derivation));
    sum_number(sum, ids_derivation_first_count(w->derivation));
    sum_number(sum, ids_witness_count(w->witness));
    MUST(ids_derivation_latex(ctx, w->derivation, sum_sink, sum));
    MUST(ids_derivation_write(ctx, w->derivation, keep, &files[0]));
    MUST(ids_witness_write(ctx, w->witness, keep, &files[1]));
    MUST(ids_counterexample_write(ctx, w->counterexample, keep, &files[2]));
    MUST(ids_counterexample_latex(ctx, w->counterexample, sum_sink, sum));
    MUST(ids_counterexample_value(w->counterexample, 0, value, IDS_MAX_DIMENSION));
    sum_number(sum, (uint64_t)value[0]);
    sum_number(sum, ids_algebra_dimension(ids_counterexample_algebra(w->counterexample)));
    for (size_t i = 0; i < 3; i++) {
        ids_check_report report;
        MUST(ids_certificate_check(ctx, files[i].bytes, files[i].length, NULL, &report));
        sum_number(sum, report.terms);
        (void)sum_sink(sum, files[i].bytes, files[i].length);
    }
}

/* Matrices belong to the context that they were made with. */
static void use_matrix(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    ids_matrix *matrix = NULL;

    MUST(ids_matrix_create(ctx, w->pres, 5, NULL, &matrix));
    sum_number(sum, ids_matrix_rows(matrix) + ids_matrix_columns(matrix));
    sum_number(sum, ids_matrix_entries(matrix) + ids_matrix_prime(matrix));
    MUST(ids_matrix_write(ctx, matrix, sum_sink, sum));
    MUST(ids_matrix_write_columns(ctx, matrix, sum_sink, sum));
    ids_matrix_free(matrix);
}

static uint64_t use(ids_ctx *ctx, const void *data)
{
    const world *w = data;
    world own = {0};
    uint64_t sum = 0;

    use_presentation(ctx, w, &sum);
    use_forms(ctx, w, &sum);
    use_matrix(ctx, w, &sum);
    make_world(ctx, &own);
    for (const world *each = w; each != NULL; each = each == w ? &own : NULL) {
        use_tables(each, &sum);
        use_follows(each->yes, &sum);
        use_follows(each->no, &sum);
        use_certificates(ctx, each, &sum);
    }
    free_world(&own);
    return sum;
}

START_TEST(test_answer)
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
    Suite *suite = suite_create("threads: answer");
    TCase *tcase = tcase_create("answer");

    tcase_set_timeout(tcase, 60);
    tcase_add_test(tcase, test_answer);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
