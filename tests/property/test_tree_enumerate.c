/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Full enumeration of commutative binary degree 10 and binary + ternary degree 9: number, order,
 * so that all are distinct, indices of a sample; and the same in parts on several threads.
 */
#include <pthread.h>

#include "tree_enumerate.h"

START_TEST(test_full)
{
    enumerate_check(&enumerate_cases[_i], 997);
}
END_TEST

#define PARTS 5u

typedef struct part {
    ids_iter *iter;
    uint64_t count;
    uint64_t sum; /* of a hash of the monomials with their indices */
} part;

static uint64_t hash_view(const ids_mono_view *view)
{
    uint64_t hash = view->index;

    for (uint32_t i = 0; i < view->degree; i++) {
        hash = hash * 31 + (uint64_t)view->code[view->leaf[i]];
    }
    return hash * UINT64_C(0x9E3779B97F4A7C15);
}

static void *walk(void *data)
{
    part *p = data;
    const ids_mono_view *view = NULL;

    while ((view = ids_iter_next(p->iter)) != NULL) {
        p->sum += hash_view(view);
        p->count++;
    }
    return NULL;
}

START_TEST(test_threads)
{
    const enumerate_case which = {"c2 c3", 8, 559405}; /* OEIS A268163 */
    pthread_t thread[PARTS];
    part parts[PARTS + 1] = {0}; /* the last one goes through all */
    enumerate_world w;
    uint64_t sum = 0;
    uint64_t count = 0;

    enumerate_open(&w, &which);
    for (uint32_t p = 0; p <= PARTS; p++) {
        uint64_t begin = 0;
        uint64_t end = which.size;

        if (p < PARTS) {
            TEST_OK(w.ctx, ids_basis_part(w.basis, p, PARTS, &begin, &end));
        }
        TEST_OK(w.ctx, ids_iter_create(w.ctx, w.basis, begin, end, &parts[p].iter));
    }
    for (uint32_t p = 0; p < PARTS; p++) {
        ck_assert_int_eq(pthread_create(&thread[p], NULL, walk, &parts[p]), 0);
    }
    (void)walk(&parts[PARTS]);
    for (uint32_t p = 0; p < PARTS; p++) {
        ck_assert_int_eq(pthread_join(thread[p], NULL), 0);
        sum += parts[p].sum;
        count += parts[p].count;
    }
    ck_assert_uint_eq(count, which.size);
    ck_assert_uint_eq(sum, parts[PARTS].sum);
    for (uint32_t p = 0; p <= PARTS; p++) {
        ids_iter_free(parts[p].iter);
    }
    enumerate_close(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("tree: full enumeration");
    TCase *tcase = tcase_create("enumerate");

    tcase_set_timeout(tcase, 50);
    tcase_add_loop_test(tcase, test_full, 0, 2);
    tcase_add_test(tcase, test_threads);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
