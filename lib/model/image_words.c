/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Images in associative words.
 *
 * A multilinear word in n letters is a permutation, place -> letter, and renaming letters acts from
 * the left; so the words are the group algebra of S_n, and the image of F(n) is the left ideal of
 * the elements x(g) that the generators g multiply out to. Its multiplicity at a partition is the
 * rank of the matrices of all x(g) together, one below the other: of the covectors v x(g).
 *
 * x(g) need not be multiplied out. An operation moves its arguments as blocks, and places are moved
 * from the right, so x(g) is a product: first the elements of the arguments, each on its own
 * places, then the sum of the block permutations of the operation. A block of covectors goes
 * through these factors in turn, an exchange of neighbours at a time.
 *
 * With an involution there is one copy of the group algebra for each set of starred places, and the
 * state is a block of covectors for each set that occurs.
 */
#include <string.h>

#include "realize_private.h"

typedef struct state {
    idsi_image *image;
    const idsi_skew *skew;
    size_t width;
    size_t size;      /* residues of a block: tableaux x width */
    size_t sets;      /* of starred places: 1 without an involution */
    uint32_t **block; /* for each set; NULL where it is 0 */
    uint32_t **next;
    uint32_t *moved;
} state;

static bool has_stars(const idsi_model *decl)
{
    for (size_t i = 0; i < decl->count; i++) {
        for (size_t w = 0; w < decl->list[i].count; w++) {
            for (uint32_t k = 0; k < decl->list[i].arity; k++) {
                if ((decl->list[i].words[w].letter[k] & IDSI_STARRED) != 0) {
                    return true;
                }
            }
        }
    }
    return false;
}

static void clear_blocks(ids_ctx *ctx, uint32_t **list, size_t count)
{
    for (size_t i = 0; list != NULL && i < count; i++) {
        idsi_free(ctx, list[i]);
        list[i] = NULL;
    }
}

/* next[to] += value * moved */
static ids_status add_moved(state *s, size_t to, uint32_t value)
{
    ids_status st = IDS_OK;
    const uint32_t p = s->image->prime;

    if (s->next[to] == NULL) {
        IDSI_TRY(idsi_alloc_array(s->image->ctx, s->size, sizeof(uint32_t), &s->next[to]));
    }
    for (size_t i = 0; i < s->size; i++) {
        s->next[to][i] = (uint32_t)((s->next[to][i] + (uint64_t)value * s->moved[i]) % p);
    }
done:
    return st;
}

/* One word of an operation whose arguments have their places from `start[i]` on. */
static ids_status apply_word(state *s, const idsi_word *word, uint32_t arity, uint32_t value,
                             const uint32_t *start)
{
    ids_status st = IDS_OK;
    uint8_t label[IDSI_SHAPE_MAX];
    uint8_t from[IDSI_SHAPE_MAX];
    uint8_t exchanges[IDSI_SHAPE_MAX * IDSI_SHAPE_MAX];
    size_t flipped = 0;
    const uint32_t n = s->image->degree;
    uint32_t place = start[0];

    for (uint32_t j = 0; j < n; j++) {
        from[j] = (uint8_t)j;
    }
    for (uint32_t i = 0; i < arity; i++) {
        const uint32_t a = word->letter[i] & ~IDSI_STARRED;
        const bool starred = (word->letter[i] & IDSI_STARRED) != 0;
        for (uint32_t k = start[a]; k < start[a + 1]; k++) {
            from[place] = (uint8_t)(starred ? start[a] + start[a + 1] - 1 - k : k);
            flipped |= (size_t)starred << place;
            place++;
        }
    }
    memcpy(label, from, sizeof label);
    const size_t length = idsi_seminormal_word(label, n, exchanges);
    for (size_t set = 0; set < s->sets; set++) {
        size_t to = flipped;
        if (s->block[set] == NULL) {
            continue;
        }
        for (uint32_t j = 0; s->sets > 1 && j < n; j++) {
            to ^= (set >> from[j] & 1u) << j;
        }
        memcpy(s->moved, s->block[set], s->size * sizeof *s->moved);
        idsi_seminormal_apply(&s->image->engine->seminormal, s->skew, exchanges, length, s->moved,
                              s->width);
        IDSI_TRY(add_moved(s, to, value));
    }
done:
    return st;
}

/* The element of a tree whose places begin at *place; it is stepped over. */
static ids_status apply_tree(state *s, const idsi_token **at, uint32_t *place)
{
    ids_status st = IDS_OK;
    const idsi_token token = *(*at)++;
    uint32_t start[IDS_MAX_ARITY + 1];

    if (!idsi_is_node(token)) {
        (*place)++;
        return IDS_OK;
    }
    const uint32_t op = idsi_node_op(token);
    const idsi_realization *made = idsi_model_realization(s->image->model->decl, op);
    for (uint32_t i = 0; i < made->arity; i++) {
        start[i] = *place;
        IDSI_TRY(apply_tree(s, at, place));
    }
    start[made->arity] = *place;
    for (size_t w = 0; w < made->count; w++) {
        IDSI_TRY(
            apply_word(s, &made->words[w], made->arity, s->image->words.coefficient[op][w], start));
    }
    clear_blocks(s->image->ctx, s->block, s->sets);
    uint32_t **swap = s->block;
    s->block = s->next;
    s->next = swap;
    IDSI_TRY(idsi_poll(s->image->ctx, NULL));
done:
    return st;
}

/* sum (width x width) += random projection of the blocks, one matrix for each set. */
static ids_status project(state *s, uint32_t **projection, uint32_t *sum)
{
    ids_status st = IDS_OK;
    const size_t tableaux = s->skew->count;

    for (size_t set = 0; set < s->sets; set++) {
        if (s->block[set] == NULL) {
            continue;
        }
        if (projection[set] == NULL) {
            IDSI_TRY(idsi_alloc_array(s->image->ctx, s->size, sizeof(uint32_t), &projection[set]));
            for (size_t i = 0; i < s->size; i++) {
                projection[set][i] = idsi_random_residue(&s->image->random, s->image->prime);
            }
        }
        idsi_dense_mul_sub(&s->image->work, s->image->prime, s->width, s->width, tableaux,
                           projection[set], tableaux, s->block[set], s->width, sum, s->width);
    }
done:
    return st;
}

static ids_status open_state(state *s)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = s->image->ctx;

    if (has_stars(s->image->model->decl)) {
        s->sets = (size_t)1 << s->image->degree;
    }
    s->size = s->skew->count * s->width;
    IDSI_TRY(idsi_alloc_array(ctx, s->sets, sizeof *s->block, &s->block));
    IDSI_TRY(idsi_alloc_array(ctx, s->sets, sizeof *s->next, &s->next));
    IDSI_TRY(idsi_alloc_array(ctx, s->size, sizeof *s->moved, &s->moved));
done:
    return st;
}

/*
 * All generators are started from independent random covectors, and the results added up: the rank
 * of `width` random combinations of the rows is theirs, unless it is larger.
 */
ids_status idsi_image_words(idsi_image *image, const idsi_skew *skew, uint32_t bound,
                            uint32_t *rank)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = image->ctx;
    state s = {.image = image, .skew = skew, .width = (size_t)bound + 4, .sets = 1};
    uint32_t **projection = NULL;
    uint32_t *sum = NULL;

    IDSI_TRY(open_state(&s));
    IDSI_TRY(idsi_alloc_array(ctx, s.sets, sizeof *projection, &projection));
    IDSI_TRY(idsi_alloc_array(ctx, s.width * s.width, sizeof *sum, &sum));
    for (size_t g = 0; g < image->count; g++) {
        const idsi_token *at = image->trees[g];
        uint32_t place = 0;
        IDSI_TRY(idsi_alloc_array(ctx, s.size, sizeof(uint32_t), &s.block[0]));
        for (size_t i = 0; i < s.size; i++) {
            s.block[0][i] = idsi_random_residue(&image->random, image->prime);
        }
        IDSI_TRY(apply_tree(&s, &at, &place));
        IDSI_TRY(project(&s, projection, sum));
        clear_blocks(ctx, s.block, s.sets);
    }
    IDSI_TRY(idsi_image_eliminate(image, sum, s.width, s.width, rank));
    /* Four covectors and four projections more than the rank can need. */
    image->error = 4.0 / ((double)image->prime * image->prime);
done:
    clear_blocks(ctx, projection, s.sets);
    clear_blocks(ctx, s.block, s.sets);
    clear_blocks(ctx, s.next, s.sets);
    idsi_free(ctx, projection);
    idsi_free(ctx, s.block);
    idsi_free(ctx, s.next);
    idsi_free(ctx, s.moved);
    idsi_free(ctx, sum);
    return st;
}
