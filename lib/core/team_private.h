/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * A team of threads that shares out the tasks of one loop at a time.
 *
 * Which member does which task is left to chance, so a task writes only what is its own, and
 * results do not depend on the number of members.
 */
#ifndef IDSI_TEAM_PRIVATE_H
#define IDSI_TEAM_PRIVATE_H

#include "core_private.h"

typedef struct idsi_team idsi_team;

/* Task number `task`, done by member `member` < idsi_team_size(). */
typedef void (*idsi_task_fn)(void *user, uint32_t member, size_t task);

/*
 * Threads for `work` pieces of work, the calling one among them: as many as the context allows and
 * there are pieces, at most IDS_MAX_THREADS, at least 1.
 */
uint32_t idsi_team_members(const ids_ctx *ctx, uint64_t work);

/*
 * A team of at most `members`, the caller among them. The system may refuse threads: then the
 * team is smaller. *team is NULL for a team of one.
 */
ids_status idsi_team_create(ids_ctx *ctx, uint32_t members, idsi_team **team);
void idsi_team_free(idsi_team *team);
uint32_t idsi_team_size(const idsi_team *team); /* NULL: 1 */
/* Does tasks 0 .. tasks-1 and returns when all are done. Not to be called from a task. */
void idsi_team_run(idsi_team *team, size_t tasks, idsi_task_fn fn, void *user);

#endif
