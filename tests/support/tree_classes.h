/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * A tree against its class (tree_samples.h): canonical form, sign, zero, index.
 */
#ifndef IDSPAN_TEST_TREE_CLASSES_H
#define IDSPAN_TEST_TREE_CLASSES_H

#include "tree_samples.h"

static inline ids_mono *class_mono(ids_ctx *ctx, const ids_signature *sig, const sample_tree *tree)
{
    ids_mono *mono = NULL;

    SURE(ids_mono_create(ctx, sig, tree->code, tree->length, &mono) == IDS_OK);
    return mono;
}

/* Canonical form of a tree; returns the sign. */
static inline int class_canonical(ids_ctx *ctx, const ids_signature *sig, const sample_tree *tree,
                                  sample_tree *canonical)
{
    ids_mono *mono = class_mono(ctx, sig, tree);
    ids_mono *form = NULL;
    size_t length = 0;
    int sign = 77;

    SURE(ids_mono_canonicalize(ctx, mono, &form, &sign) == IDS_OK);
    memset(canonical, 0, sizeof *canonical);
    SURE(ids_mono_code(form, canonical->code, IDSI_MAX_TOKENS, &length) == IDS_OK);
    canonical->length = (uint32_t)length;
    ids_mono_free(form);
    ids_mono_free(mono);
    return sign;
}

/* All members of the class have one canonical form, which is a member, and the right signs.
 * With a basis (for multilinear trees): only that member has an index. */
static inline void class_check(ids_ctx *ctx, const sample_ops *ops, const ids_signature *sig,
                               const sample_tree *tree, const ids_basis *basis, size_t capacity)
{
    sample_class class;
    sample_tree form;
    sample_tree other;
    uint64_t index = 0;

    sample_class_make(ops, tree, capacity, &class);
    int sign = class_canonical(ctx, sig, tree, &form);
    ck_assert_int_eq(sign == 0, class.zero);
    ck_assert_uint_eq(form.length, tree->length);
    ck_assert_msg(*sample_class_slot(&class, &form) != 0, "the canonical form is in another class");
    ck_assert_int_eq(class_canonical(ctx, sig, &form, &other), sign == 0 ? 0 : 1);
    ck_assert_mem_eq(other.code, form.code, sizeof form.code);
    for (size_t i = 0; i < class.count; i++) {
        int again = class_canonical(ctx, sig, &class.tree[i], &other);

        SURE(memcmp(other.code, form.code, sizeof form.code) == 0);
        SURE(again * class.sign[i] == sign);
        if (basis != NULL) {
            bool canonical = memcmp(class.tree[i].code, form.code, sizeof form.code) == 0;

            SURE(ids_basis_rank_code(basis, class.tree[i].code, tree->length, &index) ==
                 (canonical ? IDS_OK : IDS_ERR_NOT_CANONICAL));
        }
    }
    sample_class_free(&class);
}

#endif
