/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Checks of arguments that many calls have: sizes of structs, indices.
 *
 * A struct that callers fill in begins with its size, which says what version of it the caller was
 * compiled with. There is one version of each so far. When one grows at its end, the sizes of its
 * older versions are accepted too, and what they do not have is 0.
 */
#include "core_private.h"

ids_status idsi_check_struct(ids_ctx *ctx, const char *name, size_t given, size_t size)
{
    if (given == size) {
        return IDS_OK;
    }
    return idsi_fail(ctx, IDS_ERR_ARG,
                     "struct_size of %s is %zu; it must be sizeof(%s), which is %zu in this "
                     "version of the library",
                     name, given, name, size);
}

ids_status idsi_check_index(ids_ctx *ctx, const char *what, uint64_t index, uint64_t count)
{
    if (index < count) {
        return IDS_OK;
    }
    return idsi_fail(ctx, IDS_ERR_ARG, "%s %llu does not exist: there are %llu, numbered from 0",
                     what, (unsigned long long)index, (unsigned long long)count);
}
