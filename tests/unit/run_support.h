/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Runs in a temporary folder of a test.
 */
#ifndef IDSI_RUN_SUPPORT_H
#define IDSI_RUN_SUPPORT_H

#include <idspan/idspan.h>

extern char run_folder[32];

void run_make_folder(void);
void run_remove_folder(void);
/* By partition, with the default of all else. */
ids_run_options run_question(uint32_t from, uint32_t to);
/* ids_run_create() in the folder, with the source "a.pres". */
ids_status run_start(ids_ctx *ctx, const char *text, ids_run_options options, ids_run_access access,
                     ids_run **run);

#endif
