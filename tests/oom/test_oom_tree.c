/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Refused memory in the tree room: every public call that allocates.
 */
#include <idspan/gmp.h>

#include "tree_samples.h"

static ids_status signatures(ids_ctx *ctx, void *data)
{
    const ids_operation *operations = data;
    ids_signature *sig = NULL;
    ids_status st = ids_signature_create(ctx, operations, 3, &sig);

    ck_assert_int_eq(sig != NULL, st == IDS_OK);
    ids_signature_free(sig);
    return st;
}

/* What the other calls work on; made with a context of its own. */
typedef struct world {
    ids_ctx *ctx;
    sample_ops ops;
    ids_signature *sig;
    ids_types *types;
    ids_basis *basis;
} world;

static void open_world(world *w, const char *text, uint32_t degree)
{
    memset(w, 0, sizeof *w);
    w->ctx = test_ctx();
    sample_read(text, &w->ops);
    w->sig = sample_make(w->ctx, &w->ops);
    TEST_OK(w->ctx, ids_types_create(w->ctx, w->sig, degree, &w->types));
    TEST_OK(w->ctx, ids_basis_create_exact(w->ctx, w->types, degree, &w->basis));
}

static void close_world(world *w)
{
    ids_basis_free(w->basis);
    ids_types_free(w->types);
    ids_signature_free(w->sig);
    test_ctx_free(w->ctx);
}

static ids_status types(ids_ctx *ctx, void *data)
{
    world *w = data;
    ids_types *made = NULL;
    ids_status st = ids_types_create(ctx, w->sig, 7, &made);

    ck_assert_int_eq(made != NULL, st == IDS_OK);
    ids_types_free(made);
    return st;
}

static ids_status bases(ids_ctx *ctx, void *data)
{
    world *w = data;
    ids_basis *made = NULL;
    ids_status st = ids_basis_create(ctx, w->types, 6, &made);

    ck_assert_int_eq(made != NULL, st == IDS_OK);
    ids_basis_free(made);
    return st;
}

static ids_status big_bases(ids_ctx *ctx, void *data)
{
    world *w = data;
    ids_basis *made = NULL;
    ids_status st = ids_basis_create_exact(ctx, w->types, 36, &made);

    ck_assert_int_eq(made != NULL, st == IDS_OK);
    ids_basis_free(made);
    return st;
}

static ids_status iterators(ids_ctx *ctx, void *data)
{
    world *w = data;
    ids_iter *made = NULL;
    ids_status st = ids_iter_create(ctx, w->basis, 3, 100, &made);

    ck_assert_int_eq(made != NULL, st == IDS_OK);
    ids_iter_free(made);
    return st;
}

static ids_status exact_iterators(ids_ctx *ctx, void *data)
{
    world *w = data;
    ids_iter *made = NULL;
    mpz_t begin;

    mpz_init_set_ui(begin, 12345);
    ids_status st = ids_iter_create_exact(ctx, w->basis, begin, 100, &made);
    ck_assert_int_eq(made != NULL, st == IDS_OK);
    ids_iter_free(made);
    mpz_clear(begin);
    return st;
}

static ids_status monomials(ids_ctx *ctx, void *data)
{
    const int32_t code[] = {-1, 3, -1, 2, 1};
    world *w = data;
    ids_mono *mono = NULL;
    ids_mono *canonical = NULL;
    ids_mono *unranked = NULL;
    ids_mono *exact = NULL;
    char *text = NULL;
    char *type = NULL;
    int sign = 7;
    mpz_t index;
    ids_status st = IDS_OK;

    mpz_init_set_ui(index, 77);
    IDSI_TRY(ids_mono_create(ctx, w->sig, code, 5, &mono));
    st = ids_mono_canonicalize(ctx, mono, &canonical, &sign);
    ck_assert_int_eq(canonical != NULL, st == IDS_OK);
    ck_assert_int_eq(sign == 7, st != IDS_OK);
    IDSI_TRY(st);
    IDSI_TRY(ids_basis_unrank(ctx, w->basis, 77, &unranked));
    IDSI_TRY(ids_basis_unrank_exact(ctx, w->basis, index, &exact));
    IDSI_TRY(ids_mono_print(ctx, unranked, &text));
    IDSI_TRY(ids_types_print(ctx, w->types, 5, 0, &type));
done:
    mpz_clear(index);
    ids_mono_free(mono);
    ids_mono_free(canonical);
    ids_mono_free(unranked);
    ids_mono_free(exact);
    ids_string_free(ctx, text);
    ids_string_free(ctx, type);
    return st;
}

START_TEST(test_signatures)
{
    sample_ops ops;

    sample_read("c2 g4:1230-,1032+ a3", &ops);
    ops.op[2].notation = IDS_NOTATION_FENCE;
    ops.op[2].open = "[";
    ops.op[2].close = "]";
    TEST_OOM(signatures, ops.op);
}
END_TEST

START_TEST(test_objects)
{
    world w;

    open_world(&w, "c2 g3:210-", 7);
    TEST_OOM(types, &w);
    TEST_OOM(bases, &w);
    TEST_OOM(iterators, &w);
    TEST_OOM(monomials, &w);
    close_world(&w);
}
END_TEST

START_TEST(test_big_objects)
{
    world w;

    open_world(&w, "m8", 36);
    TEST_OOM(big_bases, &w);
    TEST_OOM(exact_iterators, &w);
    close_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("refused memory: tree");
    TCase *tcase = tcase_create("tree");

    tcase_set_timeout(tcase, 20);
    tcase_add_test(tcase, test_signatures);
    tcase_add_test(tcase, test_objects);
    tcase_add_test(tcase, test_big_objects);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
