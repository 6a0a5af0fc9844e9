/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * A block of covectors, and what the words of an equation's terms make of it.
 *
 * Many terms have one word, within an equation and among equations whose arguments have the same
 * degrees, and many words begin alike. So the moved blocks are kept, and a new one is made from the
 * one whose word is the longest beginning of its own. When there is no room for more they are
 * replaced in turn.
 */
#include <string.h>

#include "partition_private.h"

/* Room for the moved blocks: as many as fit the second cache, about, and a few in any case. */
#define WORDS_BYTES (UINT64_C(1) << 20)
#define LEAST_BLOCKS 6u
#define MOST_BLOCKS 64u

static uint64_t block_entries(const idsi_covectors *covectors)
{
    return (uint64_t)covectors->skew->count * covectors->most_width;
}

ids_status idsi_covectors_init(idsi_covectors *covectors, idsi_scratch *scratch, uint32_t shape,
                               size_t most_width)
{
    ids_status st = IDS_OK;
    void *room = NULL;

    *covectors = (idsi_covectors){.ctx = scratch->ctx,
                                  .engine = scratch->engine,
                                  .skew = scratch->engine->skews.list[shape],
                                  .most_width = most_width};
    uint64_t fits = WORDS_BYTES / (block_entries(covectors) * sizeof(uint32_t) + 1);
    covectors->limit = fits > MOST_BLOCKS ? MOST_BLOCKS : fits < LEAST_BLOCKS ? LEAST_BLOCKS : fits;
    IDSI_TRY(idsi_alloc_array(covectors->ctx, covectors->limit, sizeof *covectors->moved,
                              &covectors->moved));
    IDSI_TRY(
        idsi_alloc(covectors->ctx, block_entries(covectors) * sizeof *covectors->start, &room));
    covectors->start = room;
done:
    if (st != IDS_OK) {
        idsi_covectors_clear(covectors);
    }
    return st;
}

void idsi_covectors_clear(idsi_covectors *covectors)
{
    for (size_t i = 0; i < covectors->made; i++) {
        idsi_free(covectors->ctx, covectors->moved[i].block);
    }
    idsi_free(covectors->ctx, covectors->moved);
    idsi_free(covectors->ctx, covectors->start);
    memset(covectors, 0, sizeof *covectors);
}

void idsi_covectors_draw(idsi_covectors *covectors, idsi_random *random, size_t width)
{
    size_t entries = (size_t)covectors->skew->count * width;

    covectors->width = width;
    covectors->count = 0;
    covectors->next = 0;
    for (size_t i = 0; i < entries; i++) {
        covectors->start[i] = idsi_random_residue(random, covectors->engine->prime);
    }
}

/* The place of the kept block whose word is the longest beginning of a word; `count` if none. */
static size_t longest_beginning(const idsi_covectors *covectors, const idsi_term *term,
                                size_t *length)
{
    size_t best = covectors->count;

    *length = 0;
    for (size_t i = 0; i < covectors->count; i++) {
        size_t known = covectors->moved[i].term->word_length;
        if (known > *length && known <= term->word_length &&
            memcmp(covectors->moved[i].term->word, term->word, known) == 0) {
            best = i;
            *length = known;
        }
    }
    return best;
}

/* A place for a new block: a fresh one, or that of the block whose turn it is. */
static ids_status make_room(idsi_covectors *covectors, size_t *place)
{
    ids_status st = IDS_OK;
    void *room = NULL;

    IDSI_ASSERT(covectors->limit > 0);
    if (covectors->count == covectors->limit) {
        *place = covectors->next;
        covectors->next = (covectors->next + 1) % covectors->limit;
        return IDS_OK;
    }
    if (covectors->count == covectors->made) {
        IDSI_TRY(idsi_alloc(covectors->ctx, block_entries(covectors) * sizeof(uint32_t), &room));
        covectors->moved[covectors->made].block = room;
        covectors->made++;
    }
    *place = covectors->count;
    covectors->count++;
done:
    return st;
}

ids_status idsi_covectors_get(idsi_covectors *covectors, const idsi_term *term,
                              const uint32_t **block)
{
    ids_status st = IDS_OK;
    size_t length = 0;
    size_t place = 0;
    size_t source = longest_beginning(covectors, term, &length);
    const uint32_t *from = length == 0 ? covectors->start : covectors->moved[source].block;

    if (length == term->word_length) {
        *block = from;
        return IDS_OK;
    }
    IDSI_TRY(make_room(covectors, &place));
    uint32_t *to = covectors->moved[place].block;
    if (to != from) {
        memcpy(to, from, (size_t)covectors->skew->count * covectors->width * sizeof *to);
    }
    idsi_seminormal_apply(&covectors->engine->seminormal, covectors->skew, term->word + length,
                          term->word_length - length, to, covectors->width);
    covectors->moved[place].term = term;
    *block = to;
done:
    return st;
}
