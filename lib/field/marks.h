/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * A set of column numbers that gives its largest element in three steps, whatever its size: a bit
 * set with two levels of summaries above it.
 *
 *     bits[0]   a bit a column
 *     bits[1]   a bit a word of bits[0]: set when that word is not zero
 *     bits[2]   a bit a word of bits[1]
 */
#ifndef IDSI_MARKS_H
#define IDSI_MARKS_H

#include "../core/core_private.h"

typedef struct idsi_marks {
    uint64_t *bits[3];
    size_t top_words; /* words of bits[2] */
} idsi_marks;

static inline void idsi_marks_clear(ids_ctx *ctx, idsi_marks *marks)
{
    for (int level = 0; level < 3; level++) {
        idsi_free(ctx, marks->bits[level]);
        marks->bits[level] = NULL;
    }
}

static inline ids_status idsi_marks_init(ids_ctx *ctx, idsi_marks *marks, size_t columns)
{
    ids_status st = IDS_OK;
    size_t words = columns;

    for (int level = 0; level < 3; level++) {
        words = words / 64 + 1;
        IDSI_TRY(idsi_alloc_array(ctx, words, sizeof *marks->bits[level], &marks->bits[level]));
    }
    marks->top_words = words;
done:
    return st;
}

static inline void idsi_marks_add(idsi_marks *marks, uint32_t column)
{
    uint64_t *word = &marks->bits[0][column >> 6];
    if (*word == 0) {
        marks->bits[1][column >> 12] |= UINT64_C(1) << ((column >> 6) & 63);
        marks->bits[2][column >> 18] |= UINT64_C(1) << ((column >> 12) & 63);
    }
    *word |= UINT64_C(1) << (column & 63);
}

static inline uint32_t idsi_marks_top_bit(uint64_t word)
{
    return 63u - (uint32_t)__builtin_clzll(word);
}

/*
 * Takes the largest element out; false when the set is empty. *top starts as top_words - 1 and
 * may be kept between calls as long as no element above the one taken last is added.
 */
static inline bool idsi_marks_pop(idsi_marks *marks, size_t *top, uint32_t *column)
{
    while (marks->bits[2][*top] == 0) {
        if (*top == 0) {
            return false;
        }
        (*top)--;
    }
    size_t middle = *top * 64 + idsi_marks_top_bit(marks->bits[2][*top]);
    size_t low = middle * 64 + idsi_marks_top_bit(marks->bits[1][middle]);
    uint32_t bit = idsi_marks_top_bit(marks->bits[0][low]);
    *column = (uint32_t)(low * 64 + bit);
    marks->bits[0][low] &= ~(UINT64_C(1) << bit);
    if (marks->bits[0][low] == 0) {
        marks->bits[1][middle] &= ~(UINT64_C(1) << (low & 63));
        if (marks->bits[1][middle] == 0) {
            marks->bits[2][*top] &= ~(UINT64_C(1) << (middle & 63));
        }
    }
    return true;
}

/*
 * Takes out all elements of the last word that has some: *low times 64 is added to the numbers of
 * the bits. *top as above.
 */
static inline bool idsi_marks_pop_word(idsi_marks *marks, size_t *top, size_t *low, uint64_t *word)
{
    while (marks->bits[2][*top] == 0) {
        if (*top == 0) {
            return false;
        }
        (*top)--;
    }
    size_t middle = *top * 64 + idsi_marks_top_bit(marks->bits[2][*top]);
    *low = middle * 64 + idsi_marks_top_bit(marks->bits[1][middle]);
    *word = marks->bits[0][*low];
    marks->bits[0][*low] = 0;
    marks->bits[1][middle] &= ~(UINT64_C(1) << (*low & 63));
    if (marks->bits[1][middle] == 0) {
        marks->bits[2][*top] &= ~(UINT64_C(1) << (middle & 63));
    }
    return true;
}

#endif
