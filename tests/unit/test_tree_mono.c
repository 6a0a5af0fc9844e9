/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Monomials as objects: what is taken as prefix code, and what is refused.
 */
#include "tree_samples.h"

typedef struct bad_code {
    const char *why;
    size_t length;
    int32_t code[8];
} bad_code;

/* for the signature "c2 m3" */
static const bad_code bad_codes[] = {
    {"nothing", 0, {1}},
    {"label 0", 1, {0}},
    {"label 65", 1, {65}},
    {"huge label", 1, {INT32_MAX}},
    {"unknown operation", 3, {-3, 1, 2}},
    {"least number", 3, {INT32_MIN, 1, 2}},
    {"argument missing", 2, {-1, 1}},
    {"arguments missing", 4, {-2, 1, -1, 2}},
    {"operation alone", 1, {-1}},
    {"goes on", 2, {1, 2}},
    {"goes on after a product", 4, {-1, 1, 2, 3}},
    {"goes on with an operation", 4, {-1, 1, 2, -1}},
};

typedef struct fixture {
    ids_ctx *ctx;
    sample_ops ops;
    ids_signature *sig;
} fixture;

static void open_fixture(fixture *f)
{
    f->ctx = test_ctx();
    sample_read("c2 m3", &f->ops);
    f->sig = sample_make(f->ctx, &f->ops);
}

static void close_fixture(fixture *f)
{
    ids_signature_free(f->sig);
    test_ctx_free(f->ctx);
}

START_TEST(test_bad_codes)
{
    const bad_code *bad = &bad_codes[_i];
    ids_mono *mono = NULL;
    fixture f;

    open_fixture(&f);
    ck_assert_msg(ids_mono_create(f.ctx, f.sig, bad->code, bad->length, &mono) == IDS_ERR_ARG,
                  "%s is taken", bad->why);
    ck_assert_str_ne(ids_ctx_message(f.ctx), "");
    ck_assert_ptr_null(mono);
    close_fixture(&f);
}
END_TEST

START_TEST(test_code)
{
    const int32_t code[] = {-2, 64, -1, 3, 3, -1, 2, -1, 1, 9};
    const size_t length = sizeof code / sizeof code[0];
    int32_t copy[16] = {0};
    size_t copied = 99;
    ids_mono *mono = NULL;
    fixture f;

    open_fixture(&f);
    TEST_OK(f.ctx, ids_mono_create(f.ctx, f.sig, code, length, &mono));
    ck_assert_uint_eq(ids_mono_degree(mono), 6);
    ck_assert_int_eq(ids_mono_code(mono, copy, length - 1, &copied), IDS_ERR_ARG);
    ck_assert_uint_eq(copied, 99);
    ck_assert_int_eq(ids_mono_code(mono, copy, length, &copied), IDS_OK);
    ck_assert_uint_eq(copied, length);
    ck_assert_mem_eq(copy, code, sizeof code);
    ids_mono_free(mono);
    close_fixture(&f);
}
END_TEST

/* The deepest and the longest trees that fit, and one leaf more. */
START_TEST(test_degree_64)
{
    int32_t code[2 * 65];
    size_t length = 0;
    ids_mono *mono = NULL;
    ids_mono *canonical = NULL;
    int sign = 0;
    fixture f;

    open_fixture(&f);
    for (int32_t i = 0; i < 63; i++) {
        code[length++] = -1;
        code[length++] = 64 - i;
    }
    code[length++] = 1;
    TEST_OK(f.ctx, ids_mono_create(f.ctx, f.sig, code, length, &mono));
    ck_assert_uint_eq(ids_mono_degree(mono), 64);
    TEST_OK(f.ctx, ids_mono_canonicalize(f.ctx, mono, &canonical, &sign));
    ck_assert_int_eq(sign, 1);
    ck_assert_uint_eq(ids_mono_degree(canonical), 64);
    TEST_OK(f.ctx, ids_mono_code(canonical, code, length, &length));
    for (int32_t i = 0; i < 63; i++) {
        ck_assert_int_eq(code[i], -1);
        ck_assert_int_eq(code[63 + i], i + 1);
    }
    ids_mono_free(mono);
    ids_mono_free(canonical);
    mono = NULL;
    memmove(code + 2, code, length * sizeof *code);
    code[0] = -1;
    code[1] = 1;
    TEST_STATUS(f.ctx, ids_mono_create(f.ctx, f.sig, code, length + 2, &mono), IDS_ERR_ARG);
    ck_assert_ptr_null(mono);
    close_fixture(&f);
}
END_TEST

START_TEST(test_arguments)
{
    const int32_t code[] = {-1, 1, 2};
    int32_t copy[3];
    size_t length = 0;
    int sign = 0;
    ids_mono *mono = NULL;
    ids_mono *other = NULL;
    fixture f;

    open_fixture(&f);
    TEST_STATUS(f.ctx, ids_mono_create(f.ctx, NULL, code, 3, &mono), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_mono_create(f.ctx, f.sig, NULL, 3, &mono), IDS_ERR_ARG);
    TEST_STATUS(f.ctx, ids_mono_create(f.ctx, f.sig, code, 3, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_mono_create(NULL, f.sig, code, 3, &mono), IDS_ERR_ARG);
    TEST_OK(f.ctx, ids_mono_create(f.ctx, f.sig, code, 3, &mono));
    ck_assert_int_eq(ids_mono_code(NULL, copy, 3, &length), IDS_ERR_ARG);
    ck_assert_int_eq(ids_mono_code(mono, NULL, 3, &length), IDS_ERR_ARG);
    ck_assert_int_eq(ids_mono_code(mono, copy, 3, NULL), IDS_ERR_ARG);
    ck_assert_int_eq(ids_mono_canonicalize(NULL, mono, &other, &sign), IDS_ERR_ARG);
    ck_assert_int_eq(ids_mono_canonicalize(f.ctx, NULL, &other, &sign), IDS_ERR_ARG);
    ck_assert_int_eq(ids_mono_canonicalize(f.ctx, mono, NULL, &sign), IDS_ERR_ARG);
    ck_assert_int_eq(ids_mono_canonicalize(f.ctx, mono, &other, NULL), IDS_ERR_ARG);
    ck_assert_ptr_null(other);
    ck_assert_uint_eq(ids_mono_degree(NULL), 0);
    ids_mono_free(NULL);
    ids_mono_free(mono);
    close_fixture(&f);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: mono");
    TCase *tcase = tcase_create("mono");

    tcase_add_loop_test(tcase, test_bad_codes, 0, (int)(sizeof bad_codes / sizeof bad_codes[0]));
    tcase_add_test(tcase, test_code);
    tcase_add_test(tcase, test_degree_64);
    tcase_add_test(tcase, test_arguments);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
