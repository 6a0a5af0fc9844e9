/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Samples in words: a tree is multiplied out, and each word stands for a row of numbers that look
 * random (a projection of the words to fewer coordinates).
 */
#include "realize_private.h"

ids_status idsi_sample_words(const idsi_sample *s, bool *good)
{
    ids_status st = IDS_OK;
    idsi_word_operations words = {0};
    idsi_wordsum sum = {0};

    if (s->degree > 24) {
        return idsi_fail(s->ctx, IDS_ERR_LIMIT, "words of more than 24 letters");
    }
    IDSI_TRY(idsi_words_init(&words, s->ctx, s->model, s->prime, s->odd, good));
    for (size_t i = 0; *good && i < s->count; i++) {
        uint32_t *row = s->out + i * s->width;
        IDSI_TRY(idsi_words_tree(&words, s->trees[i], &sum));
        for (size_t k = 0; k < sum.count; k++) {
            const uint64_t key = (uint64_t)sum.keys[k] + (uint64_t)(sum.keys[k] >> 64) * 31;
            for (size_t j = 0; j < s->width; j++) {
                const uint32_t value = idsi_sample_mix(s->seed, key, j, s->prime);
                row[j] = (uint32_t)((row[j] + (uint64_t)sum.values[k] * value) % s->prime);
            }
        }
        idsi_wordsum_clear(s->ctx, &sum);
        IDSI_TRY(idsi_poll(s->ctx, NULL));
    }
done:
    idsi_words_clear(&words);
    idsi_wordsum_clear(s->ctx, &sum);
    return st;
}
