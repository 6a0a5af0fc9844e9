/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Rows from the source, a block at a time.
 *
 * A matrix in pieces is made by the team, a few pieces at a time, each into a buffer of its own;
 * then the rows are handed out in their order. Other matrices are copied into one buffer until it
 * is full. So rows are handed out by the calling thread, never more than a block of them is held,
 * and their order does not depend on the team.
 *
 * Pieces with short rows come first: a sample of the pieces is made beforehand to find them. So
 * more of the short rows become rules, and the rules have fewer entries. A row's number tells its
 * place in this order. The number of a piece's first row is known from the first pass on; later
 * passes leave out pieces without rows that are wanted.
 */
#include <stdlib.h>
#include <string.h>

#include "eliminate_private.h"

/* A block of rows that is not made in pieces ends after so many entries. */
#define BLOCK_ENTRIES 65536u
/* Pieces made at a time, for each member of the team. */
#define PIECES_EACH 2u
/* Pieces in a group, of which the first is made as a sample; fewer groups are not sorted. */
#define GROUP 8u
#define LEAST_GROUPS 4u

typedef struct buffer {
    ids_ctx *ctx;
    const idsi_deferred *only;
    uint64_t number; /* of the next row that comes, counted from `first` */
    uint64_t first;
    idsi_entry *entries;
    size_t entry_count;
    size_t entry_capacity;
    struct kept {
        uint64_t number;
        size_t end;
    } * rows;
    size_t row_count;
    size_t row_capacity;
    ids_status status;
} buffer;

/* A group of pieces, and what its sample was like. */
typedef struct group {
    size_t first;
    uint64_t rows;
    uint64_t entries;
    ids_status status;
} group;

struct idsi_feed {
    const idsi_matrix *matrix;
    ids_ctx *ctx;
    idsi_team *team;
    size_t buffer_count;
    buffer *buffers;
    group *groups;         /* while pieces are sorted */
    size_t *order;         /* piece at each place */
    uint64_t *piece_first; /* number of the first row of the piece at each place */
    bool numbered;         /* from the first pass on */
    bool stopped;          /* no more rows are wanted in this pass */
    /* of the pass at work */
    size_t *place_of; /* each buffer: place of its piece */
    idsi_feed_fn row;
    idsi_feed_block_fn block;
    void *user;
};

bool idsi_is_deferred(const idsi_deferred *deferred, uint64_t number)
{
    size_t word = number / 64;
    return word < deferred->capacity && ((deferred->bits[word] >> (number % 64)) & 1u) != 0;
}

void idsi_feed_free(idsi_feed *feed)
{
    if (feed == NULL) {
        return;
    }
    for (size_t i = 0; feed->buffers != NULL && i < feed->buffer_count; i++) {
        idsi_free(feed->ctx, feed->buffers[i].entries);
        idsi_free(feed->ctx, feed->buffers[i].rows);
    }
    idsi_free(feed->ctx, feed->buffers);
    idsi_free(feed->ctx, feed->groups);
    idsi_free(feed->ctx, feed->order);
    idsi_free(feed->ctx, feed->piece_first);
    idsi_free(feed->ctx, feed->place_of);
    idsi_free(feed->ctx, feed);
}

/* ---- the order of pieces --------------------------------------------------------------------- */

static ids_status count_row(void *user, const idsi_entry *row, size_t count)
{
    group *g = user;

    (void)row;
    g->rows++;
    g->entries += count;
    return IDS_OK;
}

static void sample_group(void *user, uint32_t member, size_t task)
{
    idsi_feed *feed = user;
    const idsi_matrix *matrix = feed->matrix;
    group *g = &feed->groups[task];

    (void)member;
    g->status = matrix->piece(matrix->source_user, g->first, count_row, g);
}

static int compare_groups(const void *a, const void *b)
{
    const group *x = a;
    const group *y = b;
    double left = (double)x->entries / (double)(x->rows + 1);
    double right = (double)y->entries / (double)(y->rows + 1);

    if (left != right) {
        return left < right ? -1 : 1;
    }
    return x->first < y->first ? -1 : 1;
}

static ids_status order_pieces(idsi_feed *feed)
{
    ids_status st = IDS_OK;
    size_t pieces = feed->matrix->pieces;
    size_t count = (pieces + GROUP - 1) / GROUP;
    size_t place = 0;

    IDSI_TRY(idsi_alloc_array(feed->ctx, pieces, sizeof *feed->order, &feed->order));
    IDSI_TRY(idsi_alloc_array(feed->ctx, count, sizeof *feed->groups, &feed->groups));
    for (size_t i = 0; i < count; i++) {
        feed->groups[i].first = i * GROUP;
    }
    if (count >= LEAST_GROUPS) {
        idsi_team_run(feed->team, count, sample_group, feed);
        for (size_t i = 0; i < count; i++) {
            IDSI_TRY(feed->groups[i].status);
        }
        qsort(feed->groups, count, sizeof *feed->groups, compare_groups);
    }
    for (size_t i = 0; i < count; i++) {
        size_t first = feed->groups[i].first;
        for (size_t k = first; k < first + GROUP && k < pieces; k++) {
            feed->order[place] = k;
            place++;
        }
    }
    idsi_free(feed->ctx, feed->groups);
    feed->groups = NULL;
done:
    return st;
}

ids_status idsi_feed_create(const idsi_matrix *matrix, idsi_team *team, idsi_feed **feed)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = matrix->ctx;
    idsi_feed *made = NULL;
    uint32_t members = idsi_team_size(team);

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->matrix = matrix;
    made->ctx = ctx;
    made->team = team;
    made->buffer_count = matrix->pieces > 0 && members > 1 ? (size_t)members * PIECES_EACH : 1;
    IDSI_TRY(idsi_alloc_array(ctx, made->buffer_count, sizeof *made->buffers, &made->buffers));
    IDSI_TRY(idsi_alloc_array(ctx, made->buffer_count, sizeof *made->place_of, &made->place_of));
    for (size_t i = 0; i < made->buffer_count; i++) {
        made->buffers[i].ctx = ctx;
    }
    if (matrix->pieces > 0) {
        IDSI_TRY(idsi_alloc_array(ctx, matrix->pieces + 1, sizeof *made->piece_first,
                                  &made->piece_first));
        IDSI_TRY(order_pieces(made));
    }
    *feed = made;
    made = NULL;
done:
    idsi_feed_free(made);
    return st;
}

/* ---- buffers --------------------------------------------------------------------------------- */

static ids_status keep_row(void *user, const idsi_entry *row, size_t count)
{
    ids_status st = IDS_OK;
    buffer *b = user;
    uint64_t number = b->first + b->number++;

    if (b->only != NULL && !idsi_is_deferred(b->only, number)) {
        return IDS_OK;
    }
    if (count > b->entry_capacity - b->entry_count) {
        size_t capacity = 2 * (b->entry_count + count);
        IDSI_TRY(idsi_resize_array(b->ctx, capacity, sizeof *b->entries, &b->entries));
        b->entry_capacity = capacity;
    }
    IDSI_TRY(idsi_grow(b->ctx, b->row_count, &b->row_capacity, sizeof *b->rows, &b->rows));
    if (count > 0) { /* before the first entry there is no memory */
        memcpy(b->entries + b->entry_count, row, count * sizeof *row);
    }
    b->entry_count += count;
    b->rows[b->row_count] = (struct kept){b->number - 1, b->entry_count};
    b->row_count++;
done:
    return st;
}

static void empty_buffer(buffer *b, const idsi_deferred *only, uint64_t first)
{
    b->only = only;
    b->first = first;
    b->number = 0;
    b->entry_count = 0;
    b->row_count = 0;
    b->status = IDS_OK;
}

/* Hands out the rows of a buffer; `first` is the number of row 0 of it. */
static ids_status hand_out(const idsi_feed *feed, const buffer *b, uint64_t first)
{
    ids_status st = IDS_OK;
    size_t at = 0;

    for (size_t i = 0; i < b->row_count; i++) {
        IDSI_TRY(
            feed->row(feed->user, first + b->rows[i].number, b->entries + at, b->rows[i].end - at));
        at = b->rows[i].end;
    }
done:
    return st;
}

static ids_status end_block(const idsi_feed *feed)
{
    return feed->block != NULL ? feed->block(feed->user) : IDS_OK;
}

/* ---- a source without pieces ----------------------------------------------------------------- */

static ids_status flush_source(idsi_feed *feed)
{
    ids_status st = IDS_OK;
    buffer *b = &feed->buffers[0];

    IDSI_TRY(hand_out(feed, b, b->first));
    IDSI_TRY(end_block(feed));
    b->entry_count = 0;
    b->row_count = 0;
done:
    return st;
}

static ids_status source_row(void *user, const idsi_entry *row, size_t count)
{
    ids_status st = IDS_OK;
    idsi_feed *feed = user;
    buffer *b = &feed->buffers[0];

    if (feed->stopped) {
        return IDS_OK;
    }
    IDSI_TRY(keep_row(b, row, count));
    if (b->entry_count >= BLOCK_ENTRIES || b->row_count >= BLOCK_ENTRIES) {
        IDSI_TRY(flush_source(feed));
    }
done:
    return st;
}

static ids_status run_source(idsi_feed *feed, const idsi_deferred *only, uint64_t *rows)
{
    ids_status st = IDS_OK;
    const idsi_matrix *matrix = feed->matrix;

    empty_buffer(&feed->buffers[0], only, 0);
    if (matrix->source != NULL) {
        IDSI_TRY(matrix->source(matrix->source_user, source_row, feed));
    }
    IDSI_TRY(flush_source(feed));
    *rows = feed->buffers[0].number;
done:
    return st;
}

/* ---- pieces ---------------------------------------------------------------------------------- */

static void make_piece(void *user, uint32_t member, size_t task)
{
    idsi_feed *feed = user;
    const idsi_matrix *matrix = feed->matrix;
    buffer *b = &feed->buffers[task];

    (void)member;
    b->status = matrix->piece(matrix->source_user, feed->order[feed->place_of[task]], keep_row, b);
}

static bool piece_is_wanted(const idsi_feed *feed, size_t place, const idsi_deferred *only)
{
    if (only == NULL) {
        return true;
    }
    for (uint64_t i = feed->piece_first[place]; i < feed->piece_first[place + 1]; i++) {
        if (idsi_is_deferred(only, i)) {
            return true;
        }
    }
    return false;
}

static ids_status run_pieces(idsi_feed *feed, const idsi_deferred *only, uint64_t *rows)
{
    ids_status st = IDS_OK;
    size_t place = 0;

    while (place < feed->matrix->pieces && !feed->stopped) {
        size_t count = 0;
        while (place < feed->matrix->pieces && count < feed->buffer_count) {
            if (piece_is_wanted(feed, place, only)) {
                feed->place_of[count] = place;
                empty_buffer(&feed->buffers[count], only, feed->piece_first[place]);
                count++;
            }
            place++;
        }
        idsi_team_run(feed->team, count, make_piece, feed);
        for (size_t i = 0; i < count; i++) {
            const buffer *b = &feed->buffers[i];
            size_t at = feed->place_of[i];
            IDSI_TRY(b->status);
            if (!feed->numbered) {
                feed->piece_first[at + 1] = feed->piece_first[at] + b->number;
            }
            IDSI_TRY(hand_out(feed, b, feed->piece_first[at]));
        }
        IDSI_TRY(end_block(feed));
    }
    feed->numbered = feed->numbered || !feed->stopped;
    *rows = feed->piece_first[feed->matrix->pieces];
done:
    return st;
}

ids_status idsi_feed_run(idsi_feed *feed, const idsi_deferred *only, idsi_feed_fn row,
                         idsi_feed_block_fn block, void *user, uint64_t *rows)
{
    feed->row = row;
    feed->block = block;
    feed->user = user;
    feed->stopped = false;
    return feed->matrix->pieces > 0 ? run_pieces(feed, only, rows) : run_source(feed, only, rows);
}

void idsi_feed_stop(idsi_feed *feed)
{
    feed->stopped = true;
}
