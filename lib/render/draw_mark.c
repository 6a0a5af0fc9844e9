/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Marks of the operations: twelve that differ in shape and filling, then numbered circles.
 *
 * The order puts marks that differ in both next to each other, so that a sheet with two or three
 * operations is read at a glance, also in small print.
 */
#include "draw_private.h"

typedef enum shape { SHAPE_CIRCLE, SHAPE_SQUARE, SHAPE_TRIANGLE, SHAPE_DIAMOND } shape;

static const struct {
    shape shape;
    idsi_fill fill;
} marks[] = {
    {SHAPE_CIRCLE, IDSI_FILL_SOLID},    {SHAPE_SQUARE, IDSI_FILL_OPEN},
    {SHAPE_TRIANGLE, IDSI_FILL_SOLID},  {SHAPE_DIAMOND, IDSI_FILL_OPEN},
    {SHAPE_SQUARE, IDSI_FILL_SOLID},    {SHAPE_CIRCLE, IDSI_FILL_OPEN},
    {SHAPE_DIAMOND, IDSI_FILL_SOLID},   {SHAPE_TRIANGLE, IDSI_FILL_OPEN},
    {SHAPE_CIRCLE, IDSI_FILL_DOTTED},   {SHAPE_SQUARE, IDSI_FILL_DOTTED},
    {SHAPE_TRIANGLE, IDSI_FILL_DOTTED}, {SHAPE_DIAMOND, IDSI_FILL_DOTTED},
};

/* Corners and radii, chosen so that the marks look equally large. */
idsi_mark idsi_mark_of(uint32_t op)
{
    static const int32_t square[4][2] = {{-43, -43}, {43, -43}, {43, 43}, {-43, 43}};
    static const int32_t triangle[4][2] = {{0, -58}, {56, 40}, {-56, 40}, {0, 0}};
    static const int32_t diamond[4][2] = {{0, -60}, {60, 0}, {0, 60}, {-60, 0}};
    idsi_mark mark = {.radius = 46};
    const int32_t(*corner)[2] = NULL;

    if (op >= sizeof marks / sizeof marks[0]) {
        mark.radius = 75;
        mark.fill = IDSI_FILL_OPEN;
        mark.number = op + 1;
        return mark;
    }
    mark.fill = marks[op].fill;
    switch (marks[op].shape) {
    case SHAPE_CIRCLE:
        break;
    case SHAPE_SQUARE:
        mark.corners = 4;
        corner = square;
        break;
    case SHAPE_TRIANGLE:
        mark.corners = 3;
        corner = triangle;
        break;
    case SHAPE_DIAMOND:
        mark.corners = 4;
        corner = diamond;
        break;
    }
    for (uint32_t i = 0; i < mark.corners; i++) {
        mark.corner[i][0] = corner[i][0];
        mark.corner[i][1] = corner[i][1];
    }
    return mark;
}
