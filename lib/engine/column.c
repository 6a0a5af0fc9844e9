/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * From column numbers back to monomials: the block gives operation and degrees, the label part the
 * sets of labels, the rest the normal forms of the arguments, which are columns of lower degrees.
 */
#include "normal_private.h"

size_t idsi_normal_tree(const idsi_tower *tower, uint32_t degree, uint64_t index, uint64_t labels,
                        idsi_token *out)
{
    if (degree == 1) {
        out[0] = (idsi_token)__builtin_ctzll(labels) + 1;
        return 1;
    }
    const idsi_level *level = &tower->level[degree];
    return idsi_column_tree(tower, level, level->normal[index], labels, out);
}

size_t idsi_column_tree(const idsi_tower *tower, const idsi_level *level, uint64_t column,
                        uint64_t labels, idsi_token *out)
{
    size_t last = level->block_count - 1;
    uint64_t sets[IDSI_SPLIT_MAX];
    size_t length = 1;

    while (level->blocks[last].offset > column) {
        last--;
    }
    const idsi_block *block = &level->blocks[last];
    uint64_t rest = column - block->offset;
    idsi_split_unrank(&block->split, labels, rest / block->inner, sets);
    rest %= block->inner;
    out[0] = idsi_node(block->op);
    for (uint32_t i = 0; i < block->split.count; i++) {
        uint64_t index = rest / block->stride[i];
        rest %= block->stride[i];
        length += idsi_normal_tree(tower, block->degree[i], index, sets[i], out + length);
    }
    return length;
}
