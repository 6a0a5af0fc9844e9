/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Layout of trees and marks of operations: nothing touches or crosses, parents stand over the
 * middle of their arguments, no two operations look the same.
 */
#include <string.h>

#include <idspan/idspan.h>

#include "render/draw_private.h"
#include "support.h"

#define BINARY "operation a*b commutative\n"

typedef struct fixture {
    ids_ctx *ctx;
    ids_presentation *pres;
    ids_types *types;
} fixture;

static fixture open_types(const char *text, uint32_t degree)
{
    fixture f = {.ctx = test_ctx()};
    TEST_OK(f.ctx, ids_presentation_read(f.ctx, text, strlen(text), "test", &f.pres));
    TEST_OK(f.ctx, ids_types_create(f.ctx, ids_presentation_signature(f.pres), degree, &f.types));
    return f;
}

static void close_types(fixture *f)
{
    ids_types_free(f->types);
    ids_presentation_free(f->pres);
    test_ctx_free(f->ctx);
}

typedef struct family {
    const char *text;
    uint32_t degree;
} family;

static const family families[] = {
    {BINARY, 10},
    {"operation a*b\n", 7},
    {BINARY "operation (a,b,c) commutative\n", 7},
    {"operation t(a,b,c,d)\noperation a*b alternating\n", 7},
    {"operation long_name(a,b,c)\noperation a*b\n", 6},
    {"operation u(a,b,c,d,e,f,g,h) commutative\n" BINARY, 10},
};

/*
 * On each depth the nodes stand in the order of the tree and keep their distance; so neither nodes
 * nor the straight edges between neighbouring depths can meet. Parents stand over the middle.
 */
static bool is_tidy(const ids_signature *sig, const idsi_token *tokens, size_t length,
                    const idsi_layout *l)
{
    int32_t last_end[IDS_MAX_DEGREE] = {0};
    bool seen[IDS_MAX_DEGREE] = {false};
    bool tidy = true;

    for (size_t i = 0; i < length; i++) {
        uint8_t depth = l->depth[i];
        int32_t left = l->x[i] - (l->width[i] - 1) / 2;
        int32_t right = l->x[i] + l->width[i] / 2;
        if (idsi_is_node(tokens[i])) {
            int32_t first = INT32_MAX;
            int32_t last = 0;
            uint32_t children = 0;
            for (size_t j = i + 1; j < length; j++) {
                if (l->parent[j] == i) {
                    first = children == 0 ? l->x[j] : first;
                    last = l->x[j];
                    children++;
                    tidy = tidy && l->depth[j] == depth + 1u;
                }
            }
            tidy = tidy && children == sig->ops[idsi_node_op(tokens[i])].arity &&
                   l->x[i] == (first + last) / 2;
            if (l->ruled) {
                tidy = tidy && first < left && last > right;
                left = first;
                right = last;
            }
        }
        tidy = tidy && left >= 0 && right < l->total &&
               (!seen[depth] || left >= last_end[depth] + l->gap);
        seen[depth] = true;
        last_end[depth] = right;
    }
    return tidy;
}

static size_t spell(const ids_types *types, uint32_t root, idsi_token *tokens)
{
    uint32_t stack[IDSI_MAX_TOKENS] = {root};
    size_t height = 1;
    size_t length = 0;

    while (height > 0) {
        uint32_t type = stack[--height];
        if (type == 0) {
            tokens[length++] = 0;
            continue;
        }
        tokens[length++] = idsi_node(types->list[type].op);
        for (uint32_t i = types->sig->ops[types->list[type].op].arity; i-- > 0;) {
            stack[height++] = types->children[types->list[type].children + i];
        }
    }
    return length;
}

START_TEST(layout_is_tidy)
{
    static const struct {
        int32_t node, leaf, gap;
        bool ruled;
    } measures[] = {
        {17, 17, 6, false}, {21, 13, 5, false}, {1, 1, 4, true}, {2, 1, 4, true}, {9, 3, 2, true}};
    static idsi_layout layout;
    fixture f = open_types(families[_i].text, families[_i].degree);
    const ids_types *types = f.types;
    idsi_token tokens[IDSI_MAX_TOKENS];

    for (uint32_t type = 0; type < types->first[families[_i].degree + 1]; type++) {
        size_t length = spell(types, type, tokens);
        for (size_t m = 0; m < sizeof measures / sizeof measures[0]; m++) {
            layout.gap = measures[m].gap;
            layout.ruled = measures[m].ruled;
            for (size_t i = 0; i < length; i++) {
                layout.width[i] = idsi_is_node(tokens[i]) ? measures[m].node : measures[m].leaf;
            }
            idsi_layout_tree(types->sig, tokens, length, &layout);
            ck_assert_msg(is_tidy(types->sig, tokens, length, &layout), "type %u", type);
        }
    }
    close_types(&f);
}
END_TEST

/* By hand: leaves 22 apart, parents in the middle, both subtrees 44 apart. */
START_TEST(layout_by_hand)
{
    static idsi_layout layout = {.gap = 6};
    fixture f = open_types(BINARY, 4);
    const idsi_token star = idsi_node(0);
    const idsi_token tokens[] = {star, star, 0, 0, star, 0, 0};
    const int32_t expected[] = {41, 19, 8, 30, 63, 52, 74};

    for (size_t i = 0; i < 7; i++) {
        layout.width[i] = 17;
    }
    idsi_layout_tree(f.types->sig, tokens, 7, &layout);
    for (size_t i = 0; i < 7; i++) {
        ck_assert_int_eq(layout.x[i], expected[i]);
    }
    ck_assert_int_eq(layout.total, 83);
    ck_assert_uint_eq(layout.deepest, 2);
    close_types(&f);
}
END_TEST

START_TEST(marks_differ)
{
    for (uint32_t a = 0; a < IDS_MAX_OPERATIONS; a++) {
        for (uint32_t b = 0; b < a; b++) {
            idsi_mark one = idsi_mark_of(a);
            idsi_mark other = idsi_mark_of(b);
            ck_assert(one.corners != other.corners || one.fill != other.fill ||
                      one.number != other.number ||
                      memcmp(one.corner, other.corner, sizeof one.corner) != 0);
        }
    }
}
END_TEST

static Suite *suite(void)
{
    Suite *s = suite_create("render_layout");
    TCase *tcase = tcase_create("layout");

    tcase_set_timeout(tcase, 30);
    tcase_add_loop_test(tcase, layout_is_tidy, 0, (int)(sizeof families / sizeof families[0]));
    tcase_add_test(tcase, layout_by_hand);
    tcase_add_test(tcase, marks_differ);
    suite_add_tcase(s, tcase);
    return s;
}

int main(void)
{
    return test_run(suite());
}
