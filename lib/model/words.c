/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Sums of words in associative letters, mod a prime.
 *
 * An operation puts the words of its arguments one after the other, in the orders that the model
 * says; a starred argument is reversed, with the stars of its letters changed. With odd letters
 * there are signs: a word stands for its letters numbered from left to right within each kind,
 * alternated. So moving a piece with c letters of a kind past one with d changes the sign c * d
 * times, and reversing c of them c (c-1) / 2 times.
 */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "realize_private.h"

ids_status idsi_words_init(idsi_word_operations *words, ids_ctx *ctx, const ids_model *model,
                           uint32_t prime, bool odd, bool *good)
{
    ids_status st = IDS_OK;

    *words = (idsi_word_operations){.ctx = ctx, .model = model, .prime = prime, .odd = odd};
    *good = true;
    for (size_t i = 0; i < model->decl->count; i++) {
        const idsi_realization *made = &model->decl->list[i];
        IDSI_TRY(
            idsi_alloc_array(ctx, made->count, sizeof(uint32_t), &words->coefficient[made->op]));
        for (size_t w = 0; w < made->count; w++) {
            *good = *good && idsi_mod_rational(made->words[w].coefficient, prime,
                                               &words->coefficient[made->op][w]);
        }
    }
done:
    if (st != IDS_OK || !*good) {
        idsi_words_clear(words);
    }
    return st;
}

void idsi_words_clear(idsi_word_operations *words)
{
    for (size_t op = 0; op < IDS_MAX_OPERATIONS; op++) {
        idsi_free(words->ctx, words->coefficient[op]);
        words->coefficient[op] = NULL;
    }
}

void idsi_wordsum_clear(ids_ctx *ctx, idsi_wordsum *sum)
{
    idsi_free(ctx, sum->keys);
    idsi_free(ctx, sum->values);
    *sum = (idsi_wordsum){0};
}

ids_status idsi_wordsum_letter(ids_ctx *ctx, uint32_t letter, idsi_wordsum *sum)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *sum->keys, &sum->keys));
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *sum->values, &sum->values));
    sum->keys[0] = letter;
    sum->values[0] = 1;
    sum->count = 1;
done:
    return st;
}

/* ---- single words ---------------------------------------------------------------------------- */

static uint32_t letter_at(idsi_key key, uint32_t place)
{
    return (uint32_t)(key >> (IDSI_KEY_BITS * place)) & (2 * IDSI_KEY_STAR - 1);
}

void idsi_key_content(idsi_key key, uint32_t length, uint8_t content[IDSI_KEY_LETTERS])
{
    memset(content, 0, IDSI_KEY_LETTERS);
    for (uint32_t i = 0; i < length; i++) {
        content[letter_at(key, i) & (IDSI_KEY_STAR - 1)]++;
    }
}

static idsi_key reverse(idsi_key key, uint32_t length)
{
    idsi_key out = 0;
    for (uint32_t i = 0; i < length; i++) {
        out = out << IDSI_KEY_BITS | (letter_at(key, i) ^ IDSI_KEY_STAR);
    }
    return out;
}

/* ---- collecting ------------------------------------------------------------------------------ */

typedef struct entry {
    idsi_key key;
    uint32_t value;
} entry;

static int compare_entries(const void *a, const void *b)
{
    const entry *x = a;
    const entry *y = b;
    return (x->key > y->key) - (x->key < y->key);
}

/* Sorts and collects into a new sum. */
static ids_status collect(ids_ctx *ctx, uint32_t p, entry *list, size_t count, idsi_wordsum *sum)
{
    ids_status st = IDS_OK;
    size_t kept = 0;

    if (count > 1) {
        qsort(list, count, sizeof *list, compare_entries);
    }
    for (size_t i = 0; i < count; i++) {
        if (kept > 0 && list[kept - 1].key == list[i].key) {
            list[kept - 1].value = (list[kept - 1].value + list[i].value) % p;
        } else {
            list[kept++] = list[i];
        }
        if (list[kept - 1].value == 0 &&
            (i + 1 == count || list[i + 1].key != list[kept - 1].key)) {
            kept--;
        }
    }
    IDSI_TRY(idsi_alloc_array(ctx, kept, sizeof *sum->keys, &sum->keys));
    IDSI_TRY(idsi_alloc_array(ctx, kept, sizeof *sum->values, &sum->values));
    for (size_t i = 0; i < kept; i++) {
        sum->keys[i] = list[i].key;
        sum->values[i] = list[i].value;
    }
    sum->count = kept;
done:
    return st;
}

/* ---- products -------------------------------------------------------------------------------- */

typedef struct product {
    const idsi_word_operations *words;
    uint32_t arity;
    const idsi_wordsum *const *arguments;
    const uint32_t *length;
    uint8_t content[IDS_MAX_ARITY][IDSI_KEY_LETTERS];
    const idsi_word *word;
    entry *list;
    size_t used;
} product;

/* Sign of bringing the arguments into the order of the word. */
static int word_sign(const product *t)
{
    uint32_t parity = 0;

    for (uint32_t i = 0; i < t->arity; i++) {
        const uint32_t a = t->word->letter[i] & ~IDSI_STARRED;
        for (uint32_t k = 0; k < IDSI_KEY_LETTERS; k++) {
            const uint32_t c = t->content[a][k];
            parity += (t->word->letter[i] & IDSI_STARRED) != 0 ? c * (c - (c > 0)) / 2 : 0;
            for (uint32_t j = 0; j < i; j++) {
                const uint32_t b = t->word->letter[j] & ~IDSI_STARRED;
                parity += b > a ? c * t->content[b][k] : 0;
            }
        }
    }
    return parity % 2 == 0 ? 1 : -1;
}

/* All choices of words for the places from `place` on. */
static void choose_words(product *t, uint32_t place, idsi_key key, uint32_t shift, uint32_t value)
{
    if (place == t->arity) {
        t->list[t->used++] = (entry){key, value};
        return;
    }
    const uint32_t a = t->word->letter[place] & ~IDSI_STARRED;
    const idsi_wordsum *sum = t->arguments[a];
    for (size_t i = 0; i < sum->count; i++) {
        idsi_key piece = sum->keys[i];
        if ((t->word->letter[place] & IDSI_STARRED) != 0) {
            piece = reverse(piece, t->length[a]);
        }
        choose_words(t, place + 1, key | piece << (IDSI_KEY_BITS * shift), shift + t->length[a],
                     idsi_mod_mul(value, sum->values[i], t->words->prime));
    }
}

ids_status idsi_words_product(const idsi_word_operations *words, uint32_t op,
                              const idsi_wordsum *const *arguments, const uint32_t *length,
                              idsi_wordsum *sum)
{
    ids_status st = IDS_OK;
    const idsi_realization *made = idsi_model_realization(words->model->decl, op);
    product t = {.words = words, .arity = made->arity, .arguments = arguments, .length = length};
    uint64_t room = made->count;

    for (uint32_t i = 0; i < t.arity; i++) {
        IDSI_ASSERT(arguments[i] != NULL);
        if (!idsi_mul_u64(room, arguments[i]->count, &room)) {
            return idsi_fail(words->ctx, IDS_ERR_LIMIT, "a product of more than 2^64 words");
        }
        if (arguments[i]->count > 0) {
            idsi_key_content(arguments[i]->keys[0], length[i], t.content[i]);
        }
    }
    IDSI_TRY(idsi_alloc_array(words->ctx, room, sizeof *t.list, &t.list));
    for (size_t w = 0; w < made->count; w++) {
        uint32_t value = words->coefficient[op][w];
        t.word = &made->words[w];
        if (words->odd && word_sign(&t) < 0) {
            value = idsi_mod_neg(value, words->prime);
        }
        choose_words(&t, 0, 0, 0, value);
    }
    IDSI_TRY(collect(words->ctx, words->prime, t.list, t.used, sum));
done:
    idsi_free(words->ctx, t.list);
    return st;
}

static ids_status expand_tree(const idsi_word_operations *words, const idsi_token **at,
                              uint32_t *degree, idsi_wordsum *sum)
{
    ids_status st = IDS_OK;
    const idsi_token token = *(*at)++;
    idsi_wordsum parts[IDS_MAX_ARITY] = {{0}};
    const idsi_wordsum *arguments[IDS_MAX_ARITY] = {NULL};
    uint32_t length[IDS_MAX_ARITY] = {0};

    if (!idsi_is_node(token)) {
        *degree = 1;
        return idsi_wordsum_letter(words->ctx, token - 1, sum);
    }
    const uint32_t op = idsi_node_op(token);
    const uint32_t arity = words->model->pres->sig->ops[op].arity;
    *degree = 0;
    for (uint32_t i = 0; i < arity; i++) {
        IDSI_TRY(expand_tree(words, at, &length[i], &parts[i]));
        arguments[i] = &parts[i];
        *degree += length[i];
    }
    IDSI_TRY(idsi_words_product(words, op, arguments, length, sum));
done:
    for (uint32_t i = 0; i < IDS_MAX_ARITY; i++) {
        idsi_wordsum_clear(words->ctx, &parts[i]);
    }
    return st;
}

ids_status idsi_words_tree(const idsi_word_operations *words, const idsi_token *tree,
                           idsi_wordsum *sum)
{
    const idsi_token *at = tree;
    uint32_t degree = 0;
    return expand_tree(words, &at, &degree, sum);
}

/* ---- size of the numbers --------------------------------------------------------------------- */

/*
 * A tree has at most degree - 1 nodes, and an operation of arity k stands in it at most
 * (degree - 1) / (k - 1) times. Multiplied by the common denominator of an operation once for each
 * of these, and by 1 where it stands less often, every coefficient is whole; it is at most the
 * product of the sums of the absolute values, or of 1 where these are smaller.
 */
double idsi_words_bits(const ids_model *model, uint32_t degree, double terms)
{
    double bits = terms;

    for (size_t i = 0; i < model->decl->count; i++) {
        const idsi_realization *made = &model->decl->list[i];
        double sum = -INFINITY;
        double denominators = 0;
        for (size_t w = 0; w < made->count; w++) {
            sum = idsi_bits_add(sum, idsi_mpq_bits(made->words[w].coefficient));
            denominators += idsi_mpz_bits(mpq_denref(made->words[w].coefficient));
        }
        double uses = degree == 0 ? 0 : floor((degree - 1.0) / (made->arity - 1.0));
        bits += uses * (denominators + fmax(0, sum) + 1e-6);
    }
    return bits + 1e-6;
}
