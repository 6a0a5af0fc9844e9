/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Drawings: every tree is there once, the three languages are well-formed, foreign characters are
 * escaped, memory and sinks may fail. How a tree is laid out is in test_render_layout.c.
 */
#include <inttypes.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/draw.h>
#include <idspan/gmp.h>
#include <idspan/idspan.h>

#include "render/draw_private.h"
#include "support.h"
#include "xml_check.h"

#define BINARY "operation a*b commutative\n"

typedef struct drawing {
    ids_ctx *ctx;
    ids_presentation *pres;
    ids_types *types;
    ids_basis *basis;
    char *text; /* what the sink got */
    size_t length;
    size_t capacity;
    uint64_t calls;
    uint64_t fail_at; /* number of the call of the sink that fails, from 1; 0: none */
    size_t longest;   /* bytes of the longest piece */
} drawing;

static int keep(void *user, const char *bytes, size_t length)
{
    drawing *d = user;

    d->calls++;
    if (d->calls == d->fail_at) {
        return 1;
    }
    if (d->length + length + 1 > d->capacity) {
        d->capacity = 2 * (d->length + length + 1);
        d->text = realloc(d->text, d->capacity);
        ck_assert_ptr_nonnull(d->text);
    }
    memcpy(d->text + d->length, bytes, length);
    d->length += length;
    d->text[d->length] = '\0';
    d->longest = length > d->longest ? length : d->longest;
    return 0;
}

static drawing open_drawing(const char *text, uint32_t degree)
{
    drawing d = {.ctx = test_ctx()};
    TEST_OK(d.ctx, ids_presentation_read(d.ctx, text, strlen(text), "test", &d.pres));
    TEST_OK(d.ctx, ids_types_create(d.ctx, ids_presentation_signature(d.pres), degree, &d.types));
    TEST_OK(d.ctx, ids_basis_create(d.ctx, d.types, degree, &d.basis));
    return d;
}

static void close_drawing(drawing *d)
{
    free(d->text);
    ids_basis_free(d->basis);
    ids_types_free(d->types);
    ids_presentation_free(d->pres);
    test_ctx_free(d->ctx);
}

static ids_draw_options as(ids_picture picture)
{
    return (ids_draw_options){.struct_size = sizeof(ids_draw_options), .picture = picture};
}

static void draw_types(drawing *d, uint32_t degree, ids_picture picture)
{
    ids_draw_options options = as(picture);
    d->length = 0;
    d->longest = 0;
    TEST_OK(d->ctx, ids_types_draw(d->ctx, d->types, degree, 0, UINT64_MAX, &options, keep, d));
}

static size_t occurrences(const char *text, const char *piece)
{
    size_t count = 0;
    for (const char *at = strstr(text, piece); at != NULL; at = strstr(at + 1, piece)) {
        count++;
    }
    return count;
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

/* ---- the languages ------------------------------------------------------------------------ */

/* Every type once, with the caption that the list of types gives it. */
START_TEST(svg_has_every_type_once)
{
    drawing d = open_drawing(families[_i].text, families[_i].degree);

    for (uint32_t degree = 1; degree <= families[_i].degree && degree <= 8; degree++) {
        uint64_t count = ids_types_count(d.types, degree);
        draw_types(&d, degree, IDS_PICTURE_SVG);
        check_xml(d.text);
        ck_assert_uint_eq(occurrences(d.text, "<g class=\"tree\""), count);
        for (uint64_t i = 0; i < count; i++) {
            char *written = NULL;
            char piece[256] = "";
            TEST_OK(d.ctx, ids_types_print(d.ctx, d.types, degree, i, &written));
            if (strlen(written) <= 36) { /* longer ones take several lines */
                snprintf(piece, sizeof piece, ">%s</text>", written);
                ck_assert_msg(occurrences(d.text, piece) == 1, "degree %u: %s", degree, piece);
            }
            ids_string_free(d.ctx, written);
            snprintf(piece, sizeof piece, "id=\"tree%" PRIu64 "\"", i);
            ck_assert_uint_eq(occurrences(d.text, piece), 1);
        }
    }
    check_xmllint(d.text, d.length);
    close_drawing(&d);
}
END_TEST

START_TEST(svg_escapes)
{
    drawing d = open_drawing("operation <a,b>\noperation a&b\n", 4);
    ids_draw_options options = as(IDS_PICTURE_SVG);

    draw_types(&d, 3, IDS_PICTURE_SVG);
    check_xml(d.text);
    check_xmllint(d.text, d.length);
    ck_assert_uint_eq(occurrences(d.text, ">&lt;&lt;x,x&gt;,x&gt;</text>"), 1);
    ck_assert_uint_eq(occurrences(d.text, ">(x&amp;x)&amp;x</text>"), 1);
    d.length = 0;
    TEST_OK(d.ctx, ids_basis_draw(d.ctx, d.basis, 0, 50, &options, keep, &d));
    check_xml(d.text);
    close_drawing(&d);
}
END_TEST

START_TEST(tikz_is_balanced)
{
    drawing d = open_drawing(families[_i].text, 7);
    uint64_t count = ids_types_count(d.types, 7);
    int32_t depth = 0;
    int32_t least = 0; /* Check writes a note at every assertion: none a character */

    draw_types(&d, 7, IDS_PICTURE_TIKZ);
    ck_assert_uint_eq(occurrences(d.text, "\\begin{minipage}"), count);
    ck_assert_uint_eq(occurrences(d.text, "\\end{minipage}"), count);
    ck_assert_uint_eq(occurrences(d.text, "\\begin{tikzpicture}"),
                      occurrences(d.text, "\\end{tikzpicture}"));
    ck_assert_uint_eq(occurrences(d.text, "\\begingroup"), 1);
    ck_assert_uint_eq(occurrences(d.text, "\\endgroup"), 1);
    ck_assert_uint_eq(occurrences(d.text, "$") % 2, 0);
    for (size_t i = 0; i < d.length; i++) {
        bool escaped = i > 0 && d.text[i - 1] == '\\';
        depth += !escaped && d.text[i] == '{' ? 1 : !escaped && d.text[i] == '}' ? -1 : 0;
        least = depth < least ? depth : least;
    }
    ck_assert_int_eq(depth, 0);
    ck_assert_int_eq(least, 0);
    close_drawing(&d);
}
END_TEST

START_TEST(ascii_is_ascii)
{
    drawing d = open_drawing(families[_i].text, 7);
    size_t column = 0;
    size_t widest = 0;
    size_t foreign = 0;

    draw_types(&d, 7, IDS_PICTURE_ASCII);
    for (size_t i = 0; i < d.length; i++) {
        foreign += (unsigned char)d.text[i] >= 0x80;
        column = d.text[i] == '\n' ? 0 : column + 1;
        widest = column > widest ? column : widest;
    }
    ck_assert_uint_eq(foreign, 0);
    ck_assert_uint_le(widest, 80);
    ck_assert_uint_eq(occurrences(d.text, " \n"), 0);
    close_drawing(&d);
}
END_TEST

/* Drawn by hand: a rule reaches from the first argument to the last. */
START_TEST(text_by_hand)
{
    drawing d = open_drawing("operation a*b alternating\noperation (a,b,c) = (c,b,a)\n", 4);
    ids_draw_options options = as(IDS_PICTURE_TEXT);

    draw_types(&d, 3, IDS_PICTURE_TEXT);
    ck_assert_str_eq(d.text, "Association types of degree 3: 2 types, 6 multilinear monomials\n"
                             "\n"
                             "  *  a*b alternating\n"
                             "  ()  (a,b,c) = (c,b,a)\n"
                             "\n"
                             "  ┌──*──┐      ┌───()───┐\n"
                             "┌─*─┐   x      x   x    x\n"
                             "x   x\n"
                             "\n"
                             "0  (x*x)*x     1  (x,x,x)\n"
                             "S2, order 2    S2, order 2\n"
                             "3 monomials    3 monomials\n");
    d.length = 0;
    options.width = 20;
    TEST_OK(d.ctx, ids_types_draw(d.ctx, d.types, 1, 0, 1, &options, keep, &d));
    ck_assert_uint_eq(occurrences(d.text, "\nx\n\n0  x\norder 1\n1 monomial\n"), 1);
    close_drawing(&d);
}
END_TEST

START_TEST(lines_break_well)
{
    ck_assert_uint_eq(idsi_line_break("", 10), 0);
    ck_assert_uint_eq(idsi_line_break("abc", 3), 3);
    ck_assert_uint_eq(idsi_line_break("abcd", 3), 3);
    ck_assert_uint_eq(idsi_line_break("ab,cd", 4), 3);
    ck_assert_uint_eq(idsi_line_break("(a)bcdefgh", 8), 8);
    ck_assert_uint_eq(idsi_line_break("a\xE2\x88\x98"
                                      "b",
                                      2),
                      4);
    ck_assert_uint_eq(idsi_line_break("abc", 0), 1);
}
END_TEST

/* ---- what can fail ------------------------------------------------------------------------ */

typedef struct job {
    const char *text;
    uint32_t degree;
    ids_picture picture;
    bool monomials;
} job;

static int swallow(void *user, const char *bytes, size_t length)
{
    (void)user;
    (void)bytes;
    (void)length;
    return 0;
}

static ids_status whole_job(ids_ctx *ctx, void *data)
{
    const job *j = data;
    ids_draw_options options = as(j->picture);
    ids_presentation *pres = NULL;
    ids_types *types = NULL;
    ids_basis *basis = NULL;
    ids_status st = IDS_OK;

    IDSI_TRY(ids_presentation_read(ctx, j->text, strlen(j->text), "test", &pres));
    IDSI_TRY(ids_types_create(ctx, ids_presentation_signature(pres), j->degree, &types));
    if (j->monomials) {
        IDSI_TRY(ids_basis_create(ctx, types, j->degree, &basis));
        IDSI_TRY(ids_basis_draw(ctx, basis, 0, 4, &options, swallow, NULL));
    } else {
        IDSI_TRY(ids_types_draw(ctx, types, j->degree, 0, 4, &options, swallow, NULL));
    }
done:
    ids_basis_free(basis);
    ids_types_free(types);
    ids_presentation_free(pres);
    return st;
}

START_TEST(memory)
{
    job j = {BINARY "operation (a,b,c,d) = (b,a,d,c)\n", 4, (ids_picture)(_i / 2), _i % 2 == 1};
    TEST_OOM(whole_job, &j);
}
END_TEST

START_TEST(sinks_may_fail)
{
    drawing d = open_drawing(BINARY, 5);
    ids_draw_options options = as((ids_picture)_i);

    draw_types(&d, 5, options.picture);
    uint64_t calls = d.calls;
    ck_assert_uint_gt(calls, 2);
    for (uint64_t k = 1; k <= calls; k++) {
        d.calls = 0;
        d.length = 0;
        d.fail_at = k;
        TEST_STATUS(d.ctx, ids_types_draw(d.ctx, d.types, 5, 0, 9, &options, keep, &d), IDS_ERR_IO);
        ck_assert_uint_eq(d.calls, k);
    }
    close_drawing(&d);
}
END_TEST

/* The sheet goes out in pieces, and memory hardly depends on the number of trees. */
START_TEST(streaming)
{
    drawing d = open_drawing(BINARY, 8);
    ids_draw_options options = as((ids_picture)_i);
    uint64_t peak[2] = {0};

    for (int i = 0; i < 2; i++) {
        d.length = 0;
        TEST_OK(d.ctx, ids_basis_draw(d.ctx, d.basis, 0, i == 0 ? 100 : 2000, &options, keep, &d));
        peak[i] = ids_ctx_memory(d.ctx).peak;
    }
    ck_assert_uint_le(peak[1], peak[0] + 2000 * 4);
    ck_assert_uint_lt(d.longest, 8192);
    close_drawing(&d);
}
END_TEST

START_TEST(arguments)
{
    drawing d = open_drawing(BINARY, 9);
    ids_draw_options options = as(IDS_PICTURE_SVG);

    TEST_STATUS(d.ctx, ids_types_draw(d.ctx, NULL, 4, 0, 1, NULL, keep, &d), IDS_ERR_ARG);
    TEST_STATUS(d.ctx, ids_types_draw(d.ctx, d.types, 10, 0, 1, NULL, keep, &d), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(d.ctx), "degree 10: the association types go"));
    TEST_STATUS(d.ctx, ids_types_draw(d.ctx, d.types, 4, 2, 1, NULL, keep, &d), IDS_ERR_ARG);
    TEST_STATUS(d.ctx, ids_types_draw(d.ctx, d.types, 4, 0, 1, NULL, NULL, &d), IDS_ERR_ARG);
    TEST_STATUS(d.ctx, ids_basis_draw(d.ctx, NULL, 0, 1, NULL, keep, &d), IDS_ERR_ARG);
    TEST_STATUS(d.ctx, ids_basis_draw(d.ctx, d.basis, 0, 100001, NULL, keep, &d), IDS_ERR_LIMIT);
    options.struct_size = 1;
    TEST_STATUS(d.ctx, ids_types_draw(d.ctx, d.types, 4, 0, 1, &options, keep, &d), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(d.ctx), "must be sizeof(ids_draw_options)"));
    options = as((ids_picture)4);
    TEST_STATUS(d.ctx, ids_types_draw(d.ctx, d.types, 4, 0, 1, &options, keep, &d), IDS_ERR_ARG);
    ck_assert_uint_eq(d.calls, 0);
    ids_ctx_cancel(d.ctx);
    TEST_STATUS(d.ctx, ids_types_draw(d.ctx, d.types, 4, 0, 1, NULL, keep, &d), IDS_ERR_CANCELLED);
    close_drawing(&d);
}
END_TEST

/* A degree without trees is no error, in any format. */
START_TEST(nothing_to_draw)
{
    drawing d = open_drawing("operation (a,b,c) commutative\n", 4);
    ids_draw_options options = as((ids_picture)_i);

    draw_types(&d, 4, options.picture);
    ck_assert_uint_eq(occurrences(d.text, "no products have that many arguments"), 1);
    d.length = 0;
    TEST_OK(d.ctx, ids_basis_draw(d.ctx, d.basis, 0, 1, &options, keep, &d));
    ck_assert_uint_eq(occurrences(d.text, "no products have that many arguments"), 1);
    close_drawing(&d);
}
END_TEST

/* A basis whose indices pass 64 bits is not an empty one. */
START_TEST(too_many_to_number)
{
    ids_basis *basis = NULL;
    drawing d = open_drawing("operation t(a,b,c,d,e,f,g,h) commutative\n", 1);

    ids_basis_free(d.basis);
    ids_types_free(d.types);
    d.basis = NULL;
    TEST_OK(d.ctx, ids_types_create(d.ctx, ids_presentation_signature(d.pres), 57, &d.types));
    TEST_OK(d.ctx, ids_basis_create_exact(d.ctx, d.types, 57, &basis));
    ck_assert_uint_eq(ids_basis_size(basis), 0);
    TEST_STATUS(d.ctx, ids_basis_draw(d.ctx, basis, 0, 1, NULL, keep, &d), IDS_ERR_LIMIT);
    TEST_STATUS(d.ctx, ids_basis_draw(d.ctx, basis, 1, 1, NULL, keep, &d), IDS_ERR_LIMIT);
    ck_assert_uint_eq(d.length, 0);
    ids_basis_free(basis);
    close_drawing(&d);
}
END_TEST

static Suite *suite(void)
{
    const int count = (int)(sizeof families / sizeof families[0]);
    Suite *s = suite_create("render_draw");
    TCase *tcase = tcase_create("draw");

    tcase_set_timeout(tcase, 30);
    tcase_add_loop_test(tcase, svg_has_every_type_once, 0, count);
    tcase_add_test(tcase, svg_escapes);
    tcase_add_loop_test(tcase, tikz_is_balanced, 0, count);
    tcase_add_loop_test(tcase, ascii_is_ascii, 0, count);
    tcase_add_test(tcase, text_by_hand);
    tcase_add_test(tcase, lines_break_well);
    tcase_add_loop_test(tcase, memory, 0, 8);
    tcase_add_loop_test(tcase, sinks_may_fail, 0, 4);
    tcase_add_loop_test(tcase, streaming, 0, 4);
    tcase_add_test(tcase, arguments);
    tcase_add_loop_test(tcase, nothing_to_draw, 0, 4);
    tcase_add_test(tcase, too_many_to_number);
    suite_add_tcase(s, tcase);
    return s;
}

int main(void)
{
    return test_run(suite());
}
