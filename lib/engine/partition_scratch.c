/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Working memory of one thread, taken and given back as from a stack.
 *
 * Contractions take many blocks, most of them small, and give them back in opposite order. So they
 * come from a few chunks, each twice as large as the one before, that stay until the work ends:
 *
 *     chunk 0   [ block | block | ...        ]
 *     chunk 1   [ block |     free           ]   <- chunk, used
 *     chunk 2   [            free            ]
 */
#include <string.h>

#include "partition_private.h"

#define FIRST_BYTES (UINT64_C(1) << 18)
#define ALIGNMENT 64u

ids_status idsi_scratch_init(idsi_scratch *scratch, idsi_partition_engine *engine)
{
    *scratch = (idsi_scratch){.ctx = engine->ctx, .engine = engine};
    return idsi_workspace_init(&scratch->work, engine->ctx);
}

void idsi_scratch_clear(idsi_scratch *scratch)
{
    if (scratch->ctx == NULL) {
        return;
    }
    for (size_t i = 0; i < IDSI_SCRATCH_CHUNKS; i++) {
        idsi_free(scratch->ctx, scratch->chunks[i].room);
    }
    if (scratch->work.ctx != NULL) {
        idsi_workspace_clear(&scratch->work);
    }
    memset(scratch, 0, sizeof *scratch);
}

/* Makes a chunk for `bytes` at least, in a place that has none. */
static ids_status make_chunk(idsi_scratch *s, uint32_t place, size_t bytes)
{
    ids_status st = IDS_OK;
    size_t size = FIRST_BYTES << place;
    void *room = NULL;

    size = size < bytes ? bytes : size;
    IDSI_TRY(idsi_alloc(s->ctx, size + ALIGNMENT, &room));
    s->chunks[place].room = room;
    s->chunks[place].start = (char *)room + (ALIGNMENT - (uintptr_t)room % ALIGNMENT);
    s->chunks[place].size = size;
done:
    return st;
}

ids_status idsi_scratch_take(idsi_scratch *s, size_t entries, uint32_t **block)
{
    ids_status st = IDS_OK;

    if (entries > (SIZE_MAX - ALIGNMENT) / sizeof **block / 2) {
        return idsi_fail(s->ctx, IDS_ERR_LIMIT, "a block of %llu residues is too large",
                         (unsigned long long)entries);
    }
    size_t bytes = (entries * sizeof **block + ALIGNMENT - 1) / ALIGNMENT * ALIGNMENT;
    idsi_scratch_mark top = s->top;
    while (s->chunks[top.chunk].size - top.used < bytes) {
        if (s->chunks[top.chunk].room != NULL) {
            if (top.chunk + 1 == IDSI_SCRATCH_CHUNKS) {
                return idsi_fail(s->ctx, IDS_ERR_LIMIT, "too many blocks of working memory");
            }
            top.chunk++;
            top.used = 0;
        }
        if (s->chunks[top.chunk].room == NULL) {
            IDSI_TRY(make_chunk(s, top.chunk, bytes));
        }
    }
    *block = (uint32_t *)(void *)(s->chunks[top.chunk].start + top.used);
    top.used += bytes;
    s->top = top;
done:
    return st;
}

ids_status idsi_scratch_take_zero(idsi_scratch *s, size_t entries, uint32_t **block)
{
    ids_status st = idsi_scratch_take(s, entries, block);

    if (st == IDS_OK) {
        memset(*block, 0, entries * sizeof **block);
    }
    return st;
}
