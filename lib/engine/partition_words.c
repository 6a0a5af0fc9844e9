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

static uint64_t block_entries(const idsi_words *words)
{
    return (uint64_t)words->skew->count * words->most_width;
}

ids_status idsi_words_init(idsi_words *words, idsi_scratch *scratch, uint32_t shape,
                           size_t most_width)
{
    ids_status st = IDS_OK;
    void *room = NULL;

    *words = (idsi_words){.ctx = scratch->ctx,
                          .engine = scratch->engine,
                          .skew = scratch->engine->skews.list[shape],
                          .most_width = most_width};
    uint64_t fits = WORDS_BYTES / (block_entries(words) * sizeof(uint32_t) + 1);
    words->limit = fits > MOST_BLOCKS ? MOST_BLOCKS : fits < LEAST_BLOCKS ? LEAST_BLOCKS : fits;
    IDSI_TRY(idsi_alloc_array(words->ctx, words->limit, sizeof *words->moved, &words->moved));
    IDSI_TRY(idsi_alloc(words->ctx, block_entries(words) * sizeof *words->start, &room));
    words->start = room;
done:
    if (st != IDS_OK) {
        idsi_words_clear(words);
    }
    return st;
}

void idsi_words_clear(idsi_words *words)
{
    for (size_t i = 0; i < words->made; i++) {
        idsi_free(words->ctx, words->moved[i].block);
    }
    idsi_free(words->ctx, words->moved);
    idsi_free(words->ctx, words->start);
    memset(words, 0, sizeof *words);
}

void idsi_words_draw(idsi_words *words, idsi_random *random, size_t width)
{
    size_t entries = (size_t)words->skew->count * width;

    words->width = width;
    words->count = 0;
    words->next = 0;
    for (size_t i = 0; i < entries; i++) {
        words->start[i] = idsi_random_residue(random, words->engine->prime);
    }
}

/* The place of the kept block whose word is the longest beginning of a word; `count` if none. */
static size_t longest_beginning(const idsi_words *words, const idsi_term *term, size_t *length)
{
    size_t best = words->count;

    *length = 0;
    for (size_t i = 0; i < words->count; i++) {
        size_t known = words->moved[i].term->word_length;
        if (known > *length && known <= term->word_length &&
            memcmp(words->moved[i].term->word, term->word, known) == 0) {
            best = i;
            *length = known;
        }
    }
    return best;
}

/* A place for a new block: a fresh one, or that of the block whose turn it is. */
static ids_status make_room(idsi_words *words, size_t *place)
{
    ids_status st = IDS_OK;
    void *room = NULL;

    if (words->count == words->limit) {
        *place = words->next;
        words->next = (words->next + 1) % words->limit;
        return IDS_OK;
    }
    if (words->count == words->made) {
        IDSI_TRY(idsi_alloc(words->ctx, block_entries(words) * sizeof(uint32_t), &room));
        words->moved[words->made].block = room;
        words->made++;
    }
    *place = words->count;
    words->count++;
done:
    return st;
}

ids_status idsi_words_get(idsi_words *words, const idsi_term *term, const uint32_t **block)
{
    ids_status st = IDS_OK;
    size_t length = 0;
    size_t place = 0;
    size_t source = longest_beginning(words, term, &length);
    const uint32_t *from = length == 0 ? words->start : words->moved[source].block;

    if (length == term->word_length) {
        *block = from;
        return IDS_OK;
    }
    IDSI_TRY(make_room(words, &place));
    uint32_t *to = words->moved[place].block;
    if (to != from) {
        memcpy(to, from, (size_t)words->skew->count * words->width * sizeof *to);
    }
    idsi_seminormal_apply(&words->engine->seminormal, words->skew, term->word + length,
                          term->word_length - length, to, words->width);
    words->moved[place].term = term;
    *block = to;
done:
    return st;
}
