/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Sparse echelon form mod a prime, as rewriting rules, for rows that come one by one.
 *
 *     rule_of[c]   0, or 1 + number of the rule whose pivot is column c
 *     rule         pivot, then its entries: pivot = sum of value * column, columns < pivot
 *     sum[c]       the row at work, a full-length accumulator, each < 2 p^2 < 2^63
 *     marks        which sum[c] may be nonzero (marks.h)
 *
 * A row is rewritten from its largest column down until that column is no pivot; the rest of it
 * stays as it is, so a rule costs no more than it must. The entries of rules lie in chunks that
 * are never moved.
 */
#include <string.h>

#include "field_private.h"
#include "marks.h"

#define CHUNK_ENTRIES (UINT32_C(1) << 18)

typedef struct rule {
    uint32_t pivot;
    uint32_t count;
    idsi_entry *entries;
} rule;

typedef struct chunk {
    struct chunk *next;
    size_t used;
    size_t capacity;
    idsi_entry entries[];
} chunk;

struct idsi_echelon {
    ids_ctx *ctx;
    uint32_t prime;
    uint32_t columns;
    uint64_t square; /* prime^2 */
    uint32_t *rule_of;
    uint64_t *sum;
    idsi_marks marks;
    size_t rule_count;
    size_t rule_capacity;
    rule *rules;
    chunk *chunks;
    idsi_entry *gathered; /* a row after rewriting */
    size_t gathered_capacity;
    uint64_t fill;
    uint64_t work; /* entries of rules applied so far */
};

uint64_t idsi_echelon_base_bytes(uint64_t columns)
{
    return columns * (sizeof(uint64_t) + sizeof(uint32_t)) + columns / 7 + 4096;
}

ids_status idsi_echelon_create(ids_ctx *ctx, uint32_t prime, uint32_t columns,
                               idsi_echelon **echelon)
{
    ids_status st = IDS_OK;
    idsi_echelon *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->prime = prime;
    made->columns = columns;
    made->square = (uint64_t)prime * prime;
    IDSI_TRY(idsi_alloc_array(ctx, columns, sizeof *made->rule_of, &made->rule_of));
    IDSI_TRY(idsi_alloc_array(ctx, columns, sizeof *made->sum, &made->sum));
    IDSI_TRY(idsi_marks_init(ctx, &made->marks, columns));
    *echelon = made;
    made = NULL;
done:
    idsi_echelon_free(made);
    return st;
}

void idsi_echelon_free(idsi_echelon *echelon)
{
    if (echelon == NULL) {
        return;
    }
    ids_ctx *ctx = echelon->ctx;
    while (echelon->chunks != NULL) {
        chunk *next = echelon->chunks->next;
        idsi_free(ctx, echelon->chunks);
        echelon->chunks = next;
    }
    idsi_marks_clear(ctx, &echelon->marks);
    idsi_free(ctx, echelon->gathered);
    idsi_free(ctx, echelon->rules);
    idsi_free(ctx, echelon->sum);
    idsi_free(ctx, echelon->rule_of);
    idsi_free(ctx, echelon);
}

static inline void accumulate(idsi_echelon *e, uint32_t column, uint64_t product)
{
    uint64_t sum = e->sum[column] + product;
    e->sum[column] = sum >= e->square ? sum - e->square : sum;
    idsi_marks_add(&e->marks, column);
}

static void apply_rule(idsi_echelon *e, const rule *r, uint32_t factor)
{
    for (uint32_t i = 0; i < r->count; i++) {
        accumulate(e, r->entries[i].column, (uint64_t)factor * r->entries[i].value);
    }
}

/* Clears the row at work. */
static void drop_row(idsi_echelon *e)
{
    size_t top = e->marks.top_words - 1;
    size_t low = 0;
    uint64_t word = 0;

    while (idsi_marks_pop_word(&e->marks, &top, &low, &word)) {
        for (; word != 0; word &= word - 1) {
            e->sum[low * 64 + (size_t)__builtin_ctzll(word)] = 0;
        }
    }
}

/* Takes the residue at a column of the row at work. */
static inline uint32_t take_residue(idsi_echelon *e, uint32_t column)
{
    uint64_t sum = e->sum[column];
    e->sum[column] = 0;
    return (uint32_t)(sum < e->prime ? sum : sum % e->prime);
}

static ids_status keep_entry(idsi_echelon *e, size_t *count, uint32_t column, uint32_t value)
{
    ids_status st = IDS_OK;
    IDSI_TRY(idsi_grow(e->ctx, *count, &e->gathered_capacity, sizeof *e->gathered, &e->gathered));
    e->gathered[*count] = (idsi_entry){column, value};
    (*count)++;
done:
    return st;
}

/* Gathers what is left below the top column, which is no pivot; nothing of it is rewritten. */
static ids_status gather_rest(idsi_echelon *e, size_t *top, size_t *count)
{
    ids_status st = IDS_OK;
    size_t low = 0;
    uint64_t word = 0;

    while (idsi_marks_pop_word(&e->marks, top, &low, &word)) {
        while (word != 0) {
            uint32_t bit = idsi_marks_top_bit(word);
            uint32_t column = (uint32_t)(low * 64 + bit);
            uint32_t value = take_residue(e, column);
            word ^= UINT64_C(1) << bit;
            if (value != 0) {
                IDSI_TRY(keep_entry(e, count, column, value));
            }
        }
    }
done:
    return st;
}

/*
 * Rewrites the row at work from the top. When `all`, every pivot column is rewritten, else only
 * until the top column is no pivot. What remains is gathered, largest column first, and cleared.
 * When more than `work` entries of rules would be applied, *over is set and the row is dropped.
 */
static ids_status gather(idsi_echelon *e, bool all, uint64_t work, size_t *count, bool *over)
{
    ids_status st = IDS_OK;
    size_t top = e->marks.top_words - 1;
    uint32_t column = 0;

    *count = 0;
    *over = false;
    while (idsi_marks_pop(&e->marks, &top, &column)) {
        uint32_t value = take_residue(e, column);
        uint32_t number = e->rule_of[column];
        if (value == 0) {
            continue;
        }
        if (number == 0) {
            IDSI_TRY(keep_entry(e, count, column, value));
            if (!all) {
                IDSI_TRY(gather_rest(e, &top, count));
                break;
            }
            continue;
        }
        const rule *r = &e->rules[number - 1];
        if (r->count > work) {
            *over = true;
            break;
        }
        work -= r->count;
        e->work += r->count;
        apply_rule(e, r, value);
    }
done:
    if (st != IDS_OK || *over) {
        drop_row(e);
    }
    return st;
}

/* Room for `count` entries that will not move. */
static ids_status chunk_take(idsi_echelon *e, size_t count, idsi_entry **entries)
{
    ids_status st = IDS_OK;
    void *block = NULL;

    if (e->chunks == NULL || e->chunks->capacity - e->chunks->used < count) {
        size_t capacity = count > CHUNK_ENTRIES ? count : CHUNK_ENTRIES;
        if (e->chunks == NULL && capacity > e->columns * (size_t)16 && count < 4096) {
            capacity = 4096;
        }
        IDSI_TRY(idsi_alloc(e->ctx, sizeof(chunk) + capacity * sizeof(idsi_entry), &block));
        chunk *made = block;
        made->next = e->chunks;
        made->used = 0;
        made->capacity = capacity;
        e->chunks = made;
    }
    *entries = e->chunks->entries + e->chunks->used;
    e->chunks->used += count;
done:
    return st;
}

ids_status idsi_echelon_store(idsi_echelon *echelon, const idsi_entry *row, size_t count)
{
    ids_status st = IDS_OK;
    idsi_echelon *e = echelon;
    idsi_entry *entries = NULL;

    IDSI_TRY(idsi_grow(e->ctx, e->rule_count, &e->rule_capacity, sizeof *e->rules, &e->rules));
    IDSI_TRY(chunk_take(e, count - 1, &entries));
    uint32_t factor = idsi_mod_neg(idsi_mod_inverse(row[0].value, e->prime), e->prime);
    for (size_t i = 1; i < count; i++) {
        entries[i - 1] = (idsi_entry){row[i].column, idsi_mod_mul(row[i].value, factor, e->prime)};
    }
    e->rules[e->rule_count] = (rule){row[0].column, (uint32_t)(count - 1), entries};
    e->rule_count++;
    e->rule_of[row[0].column] = (uint32_t)e->rule_count;
    e->fill += count - 1;
done:
    return st;
}

void idsi_echelon_load(idsi_echelon *echelon, const idsi_entry *row, size_t count, uint32_t factor)
{
    for (size_t i = 0; i < count; i++) {
        accumulate(echelon, row[i].column, (uint64_t)row[i].value * factor);
    }
}

ids_status idsi_echelon_settle(idsi_echelon *echelon, uint64_t work, idsi_verdict *verdict)
{
    ids_status st = IDS_OK;
    size_t left = 0;
    bool over = false;

    IDSI_TRY(gather(echelon, false, work, &left, &over));
    if (left > 0 && !over) {
        IDSI_TRY(idsi_echelon_store(echelon, echelon->gathered, left));
    }
    *verdict = over ? IDSI_DEFERRED : left > 0 ? IDSI_INDEPENDENT : IDSI_DEPENDENT;
done:
    return st;
}

bool idsi_echelon_is_pivot(const idsi_echelon *echelon, uint32_t column)
{
    return echelon->rule_of[column] != 0;
}

uint32_t idsi_echelon_rank(const idsi_echelon *echelon)
{
    return (uint32_t)echelon->rule_count;
}

uint64_t idsi_echelon_fill(const idsi_echelon *echelon)
{
    return echelon->fill;
}

uint64_t idsi_echelon_work(const idsi_echelon *echelon)
{
    return echelon->work;
}

ids_status idsi_echelon_complete(idsi_echelon *echelon)
{
    ids_status st = IDS_OK;
    idsi_echelon *e = echelon;

    /* Upwards: the rules that a rule is rewritten with are complete by then. */
    for (uint32_t column = 0; column < e->columns; column++) {
        size_t count = 0;
        bool over = false;
        if (e->rule_of[column] == 0) {
            continue;
        }
        rule *r = &e->rules[e->rule_of[column] - 1];
        bool complete = true;
        for (uint32_t i = 0; complete && i < r->count; i++) {
            complete = e->rule_of[r->entries[i].column] == 0;
        }
        if (complete) {
            continue;
        }
        for (uint32_t i = 0; i < r->count; i++) {
            accumulate(e, r->entries[i].column, r->entries[i].value);
        }
        IDSI_TRY(gather(e, true, UINT64_MAX, &count, &over));
        if (count > r->count) {
            IDSI_TRY(chunk_take(e, count, &r->entries));
        }
        memcpy(r->entries, e->gathered, count * sizeof *r->entries);
        e->fill = e->fill - r->count + count;
        r->count = (uint32_t)count;
    }
done:
    return st;
}

bool idsi_echelon_rule(const idsi_echelon *echelon, uint32_t column, const idsi_entry **entries,
                       uint32_t *count)
{
    uint32_t number = echelon->rule_of[column];
    if (number == 0) {
        return false;
    }
    *entries = echelon->rules[number - 1].entries;
    *count = echelon->rules[number - 1].count;
    return true;
}
