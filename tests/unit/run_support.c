/* SPDX-License-Identifier: BSD-2-Clause */
#include "run_support.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "support.h"

char run_folder[32];

void run_make_folder(void)
{
    snprintf(run_folder, sizeof run_folder, "run-XXXXXX");
    ck_assert_ptr_nonnull(mkdtemp(run_folder));
}

void run_remove_folder(void)
{
    char command[64];
    snprintf(command, sizeof command, "rm -rf '%s'", run_folder);
    ck_assert_int_eq(system(command), 0);
}

ids_run_options run_question(uint32_t from, uint32_t to)
{
    return (ids_run_options){
        .struct_size = sizeof(ids_run_options), .from = from, .to = to, .by_partition = true};
}

ids_status run_start(ids_ctx *ctx, const char *text, ids_run_options options, ids_run_access access,
                     ids_run **run)
{
    *run = NULL;
    return ids_run_create(ctx, run_folder, text, strlen(text), "a.pres", &options, access, run);
}
