/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Decks: the ways to take a few of some sorted labels, numbered in lexicographic order.
 *
 *     size 4, taken 2, radix 6:   01|23  02|13  03|12  12|03  13|02  23|01
 *     the same with least:        01|23  02|13  03|12
 *
 * A deck with the least label always taken is the deck one smaller, behind a 0. Decks of up to
 * TABLE_BYTES bytes have all their rows in a table (all with 12 labels or less do); rows of the
 * others are computed. Source: Knuth, TAOCP 4A, 7.2.1.3.
 */
#include <string.h>

#include "basis_private.h"

#define TABLE_BYTES (UINT64_C(1) << 14)

ids_status idsi_decks_init(ids_ctx *ctx, uint32_t degree, idsi_decks *decks)
{
    ids_status st = IDS_OK;
    size_t numbers = idsi_deck_key(degree, degree, degree, true) + 1u;
    size_t stride = degree + 2u;

    decks->degree = degree;
    IDSI_TRY(idsi_alloc_array(ctx, numbers, sizeof *decks->number, &decks->number));
    memset(decks->number, 0xff, numbers * sizeof *decks->number);
    IDSI_TRY(idsi_alloc_array(ctx, (degree + 1u) * stride, sizeof *decks->choose, &decks->choose));
    for (uint32_t n = 0; n <= degree; n++) {
        for (uint32_t k = 1; k <= n + 1; k++) {
            decks->choose[n * stride + k] = idsi_binomial(n, k - 1);
        }
    }
done:
    return st;
}

void idsi_decks_clear(ids_ctx *ctx, idsi_decks *decks)
{
    idsi_free(ctx, decks->deck);
    idsi_free(ctx, decks->number);
    idsi_free(ctx, decks->rows);
    idsi_free(ctx, decks->choose);
}

ids_status idsi_decks_add(ids_ctx *ctx, idsi_decks *decks, uint32_t size, uint32_t taken,
                          bool least, uint16_t *deck)
{
    ids_status st = IDS_OK;
    uint16_t *number = &decks->number[idsi_deck_key(decks->degree, size, taken, least)];

    if (*number == IDSI_NO_DECK) {
        uint32_t free = least ? 1 : 0;

        IDSI_TRY(idsi_grow(ctx, decks->count, &decks->capacity, sizeof *decks->deck, &decks->deck));
        idsi_deck *made = &decks->deck[decks->count];
        memset(made, 0, sizeof *made);
        made->radix = idsi_binomial(size - free, taken - free);
        made->inverse = UINT64_MAX / made->radix;
        made->rows = SIZE_MAX;
        made->size = (uint8_t)size;
        made->taken = (uint8_t)taken;
        made->least = least;
        *number = (uint16_t)decks->count;
        decks->count++;
    }
    *deck = *number;
done:
    return st;
}

ids_status idsi_decks_fill(ids_ctx *ctx, idsi_decks *decks)
{
    ids_status st = IDS_OK;
    size_t bytes = 0;

    for (uint32_t d = 0; d < decks->count; d++) {
        idsi_deck *deck = &decks->deck[d];

        if (deck->radix <= TABLE_BYTES / deck->size) {
            deck->rows = bytes;
            bytes += (size_t)deck->radix * deck->size;
        }
    }
    IDSI_TRY(idsi_alloc_array(ctx, bytes, 1, &decks->rows));
    for (uint32_t d = 0; d < decks->count; d++) {
        const idsi_deck *deck = &decks->deck[d];

        if (deck->rows == SIZE_MAX) {
            continue;
        }
        uint8_t *row = decks->rows + deck->rows;
        idsi_deck_row(decks, deck, 0, row);
        for (uint64_t r = 1; r < deck->radix; r++) {
            memcpy(row + deck->size, row, deck->size);
            row += deck->size;
            idsi_deck_next_row(deck, row);
        }
    }
done:
    return st;
}

void idsi_deck_row(const idsi_decks *decks, const idsi_deck *deck, uint64_t r, uint8_t *row)
{
    uint32_t stride = decks->degree + 2;
    uint8_t *taken = row;
    uint8_t *other = row + deck->taken;
    uint32_t missing = deck->taken;
    uint32_t i = 0;

    if (deck->least) {
        *taken++ = 0;
        missing--;
        i = 1;
    }
    for (; i < deck->size; i++) {
        uint64_t with = decks->choose[(deck->size - 1u - i) * stride + missing];

        if (r < with) {
            *taken++ = (uint8_t)i;
            missing--;
        } else {
            r -= with;
            *other++ = (uint8_t)i;
        }
    }
}

void idsi_deck_next_row(const idsi_deck *deck, uint8_t *row)
{
    uint32_t size = deck->size;
    uint32_t last = deck->taken;
    uint32_t other = deck->taken;

    /* The last position that can move: the ones behind it stand at the end. */
    do {
        last--;
    } while (row[last] == size - deck->taken + last);
    uint32_t position = row[last] + 1u;
    for (uint32_t i = last; i < deck->taken; i++) {
        row[i] = (uint8_t)position;
        position++;
    }
    for (uint32_t i = 0, next = 0; i < size; i++) {
        if (next < deck->taken && row[next] == i) {
            next++;
        } else {
            row[other] = (uint8_t)i;
            other++;
        }
    }
}

bool idsi_deck_find(const idsi_decks *decks, const idsi_deck *deck, uint64_t all, uint64_t taken,
                    uint64_t *r)
{
    uint32_t stride = decks->degree + 2;
    uint32_t missing = deck->taken;
    uint32_t left = deck->size;
    uint64_t rank = 0;

    if (deck->least) {
        uint64_t least = all & (~all + 1);

        if ((taken & least) == 0) {
            return false;
        }
        all ^= least;
        missing--;
        left--;
    }
    /* Without branches on the labels: choose[.][0] is 0 once none is missing. */
    while (left > 0) {
        uint64_t least = all & (~all + 1);
        uint32_t hit = (taken & least) != 0;

        left--;
        rank += decks->choose[left * stride + missing] & (hit - UINT64_C(1));
        missing -= hit;
        all ^= least;
    }
    *r = rank;
    return true;
}
