/* SPDX-License-Identifier: BSD-2-Clause */
/* Threads that share signatures, types, bases, automorphism groups, counts and cocharacters. */
#include <idspan/gmp.h>
#include <idspan/idspan.h>

#include "thread_team.h"

#define DEGREE 6u
#define LONGEST 11u /* entries of a tree of that degree */

typedef struct world {
    ids_signature *sig;
    ids_types *types;
    ids_basis *basis;
    ids_basis *exact;
    ids_mono *mono;
    ids_automorphisms *group;
    ids_counts *counts;
    ids_count_split *split;
    ids_cocharacter *cocharacter;
} world;

static const ids_signed_order reversed[] = {{{2, 1, 0}, -1}};
static const ids_operation operations[] = {
    {.notation = IDS_NOTATION_INFIX, .open = "*", .arity = 2, .symmetry = IDS_SYMMETRY_COMMUTATIVE},
    {.notation = IDS_NOTATION_FENCE,
     .open = "{",
     .close = "}",
     .arity = 3,
     .symmetry = IDS_SYMMETRY_GENERATED,
     .generators = reversed,
     .generator_count = 1},
};

static const int32_t code[] = {-2, 3, -1, 2, 1, 4};

static void make_world(ids_ctx *ctx, world *w)
{
    MUST(ids_signature_create(ctx, operations, 2, &w->sig));
    MUST(ids_types_create(ctx, w->sig, DEGREE, &w->types));
    MUST(ids_basis_create(ctx, w->types, DEGREE, &w->basis));
    MUST(ids_basis_create_exact(ctx, w->types, DEGREE, &w->exact));
    MUST(ids_mono_create(ctx, w->sig, code, sizeof code / sizeof *code, &w->mono));
    MUST(ids_automorphisms_create(ctx, w->types, DEGREE, 0, &w->group));
    MUST(ids_counts_create(ctx, w->sig, 12, &w->counts));
    MUST(ids_count_split_create(ctx, w->sig, DEGREE, &w->split));
    MUST(ids_cocharacter_create(ctx, w->sig, DEGREE, &w->cocharacter));
}

static void free_world(world *w)
{
    ids_cocharacter_free(w->cocharacter);
    ids_count_split_free(w->split);
    ids_counts_free(w->counts);
    ids_automorphisms_free(w->group);
    ids_mono_free(w->mono);
    ids_basis_free(w->exact);
    ids_basis_free(w->basis);
    ids_types_free(w->types);
    ids_signature_free(w->sig);
}

static void sum_code(uint64_t *sum, const int32_t *entries, size_t length)
{
    for (size_t i = 0; i < length; i++) {
        sum_number(sum, (uint64_t)entries[i]);
    }
}

static void use_types(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    for (size_t i = 0; i < ids_signature_count(w->sig); i++) {
        ids_operation operation;
        char *text = NULL;
        MUST(ids_signature_operation(w->sig, i, &operation));
        sum_text(sum, operation.open);
        MUST(ids_signature_print_operation(ctx, w->sig, i, &text));
        sum_owned(sum, ctx, text);
    }
    for (uint64_t i = 0; i < ids_types_count(w->types, DEGREE); i++) {
        ids_type_info info;
        char *text = NULL;
        MUST(ids_types_info(w->types, DEGREE, i, &info));
        sum_number(sum, info.automorphisms);
        MUST(ids_types_print(ctx, w->types, DEGREE, i, &text));
        sum_owned(sum, ctx, text);
    }
    sum_number(sum, ids_automorphisms_order(w->group));
    sum_text(sum, ids_automorphisms_structure(w->group));
    for (size_t i = 0; i < ids_automorphisms_count(w->group); i++) {
        uint32_t image[DEGREE] = {0};
        int sign = 0;
        MUST(ids_automorphisms_generator(w->group, i, image, DEGREE, &sign));
        sum_number(sum, image[0] + (uint64_t)sign);
    }
    MUST(ids_types_draw(ctx, w->types, DEGREE, 0, 10, NULL, sum_sink, sum));
}

static void use_mono(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    ids_mono *canonical = NULL;
    int32_t entries[LONGEST] = {0};
    size_t length = 0;
    char *text = NULL;
    int sign = 0;

    MUST(ids_mono_canonicalize(ctx, w->mono, &canonical, &sign));
    sum_number(sum, (uint64_t)sign);
    sum_number(sum, ids_mono_degree(canonical));
    MUST(ids_mono_code(canonical, entries, LONGEST, &length));
    sum_code(sum, entries, length);
    MUST(ids_mono_print(ctx, canonical, &text));
    sum_owned(sum, ctx, text);
    ids_mono_free(canonical);
}

static void use_basis(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    ids_iter *iter = NULL;
    const ids_mono_view *view = NULL;
    uint64_t begin = 0;
    uint64_t end = 0;

    MUST(ids_basis_part(w->basis, 3, 8, &begin, &end));
    MUST(ids_iter_create(ctx, w->basis, 0, ids_basis_size(w->basis), &iter));
    MUST(ids_iter_seek(iter, begin, end));
    while ((view = ids_iter_next(iter)) != NULL) {
        int32_t entries[LONGEST] = {0};
        size_t length = 0;
        uint64_t index = 0;
        MUST(ids_basis_rank_code(w->basis, view->code, view->length, &index));
        MUST(ids_basis_unrank_code(w->basis, index, entries, LONGEST, &length));
        sum_number(sum, index);
        sum_code(sum, entries, length);
        if (index % 64 == 0) {
            ids_mono *mono = NULL;
            MUST(ids_basis_unrank(ctx, w->basis, index, &mono));
            MUST(ids_basis_rank(w->basis, mono, &index));
            sum_number(sum, index);
            ids_mono_free(mono);
        }
    }
    ids_iter_free(iter);
    MUST(ids_basis_type_range(w->basis, 1, &begin, &end));
    sum_number(sum, end - begin);
    MUST(ids_basis_draw(ctx, w->basis, begin, 3, NULL, sum_sink, sum));
}

static void use_exact(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    ids_iter *iter = NULL;
    ids_mono *mono = NULL;
    int32_t entries[LONGEST] = {0};
    size_t length = 0;
    mpz_t a;
    mpz_t b;

    mpz_init(a);
    mpz_init(b);
    MUST(ids_basis_size_exact(w->exact, a));
    MUST(ids_basis_type_range_exact(w->exact, 1, a, b));
    MUST(ids_iter_create_exact(ctx, w->exact, a, 5, &iter));
    MUST(ids_iter_seek_exact(iter, a, 3));
    sum_number(sum, ids_iter_next(iter)->index);
    ids_iter_free(iter);
    MUST(ids_basis_unrank_exact(ctx, w->exact, a, &mono));
    MUST(ids_basis_rank_exact(w->exact, mono, b));
    sum_number(sum, mpz_get_ui(b));
    ids_mono_free(mono);
    MUST(ids_basis_unrank_code_exact(w->exact, a, entries, LONGEST, &length));
    MUST(ids_basis_rank_code_exact(w->exact, entries, length, b));
    sum_number(sum, mpz_get_ui(b));
    MUST(ids_automorphisms_exact(w->group, a, b));
    sum_number(sum, mpz_get_ui(b));
    for (uint32_t degree = 0; degree <= ids_counts_max_degree(w->counts); degree++) {
        MUST(ids_counts_types(w->counts, degree, a));
        MUST(ids_counts_monomials(w->counts, degree, b));
        sum_number(sum, mpz_get_ui(a) + mpz_get_ui(b));
    }
    for (uint64_t row = 0; row < ids_count_split_rows(w->split); row++) {
        uint32_t uses[2] = {0};
        MUST(ids_count_split_uses(w->split, row, uses, 2));
        MUST(ids_count_split_types(w->split, row, a));
        MUST(ids_count_split_monomials(w->split, row, b));
        sum_number(sum, uses[0] + mpz_get_ui(a) + mpz_get_ui(b));
    }
    mpz_clear(a);
    mpz_clear(b);
}

static void use_partitions(ids_ctx *ctx, const world *w, uint64_t *sum)
{
    uint32_t degree = ids_cocharacter_max_degree(w->cocharacter);

    for (uint64_t i = 0; i < ids_partition_count(degree); i++) {
        ids_partition partition;
        ids_partition again;
        char *text = NULL;
        uint64_t number = 0;
        MUST(ids_partition_unrank(degree, i, &partition));
        MUST(ids_partition_print(ctx, &partition, &text));
        MUST(ids_partition_parse(ctx, text, &again));
        sum_owned(sum, ctx, text);
        MUST(ids_partition_conjugate(&again, &again));
        MUST(ids_partition_rank(&again, &number));
        sum_number(sum, number);
        MUST(ids_partition_dimension(&again, &number));
        sum_number(sum, number);
        MUST(ids_cocharacter_multiplicity(w->cocharacter, degree, i, &number));
        sum_number(sum, number);
    }
}

static uint64_t use(ids_ctx *ctx, const void *data)
{
    const world *w = data;
    world own = {0};
    uint64_t sum = 0;

    use_types(ctx, w, &sum);
    use_mono(ctx, w, &sum);
    use_basis(ctx, w, &sum);
    use_exact(ctx, w, &sum);
    use_partitions(ctx, w, &sum);
    make_world(ctx, &own);
    use_types(ctx, &own, &sum);
    use_exact(ctx, &own, &sum);
    free_world(&own);
    return sum;
}

START_TEST(test_tree)
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
    Suite *suite = suite_create("threads: tree");
    TCase *tcase = tcase_create("tree");

    tcase_set_timeout(tcase, 60);
    tcase_add_test(tcase, test_tree);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
