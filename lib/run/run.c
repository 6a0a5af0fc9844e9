/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Making, opening and describing runs.
 *
 * Who wants to store cells takes the lock before anything is read. To make a run there are two: the
 * one that is asked for, and the one that is found, which opens the folder. One of them goes on.
 * The open folder and its lock have one owner at any time, and a run that is given up closes what
 * it has.
 */
#include "../answer/rank_private.h"
#include "run_private.h"

void ids_run_free(ids_run *run)
{
    if (run == NULL) {
        return;
    }
    ids_ctx *ctx = run->ctx;
    idsi_folder_close(&run->folder);
    ids_presentation_free(run->pres);
    idsi_free(ctx, run->cells);
    idsi_free(ctx, run->primes);
    idsi_free(ctx, run->libraries);
    idsi_free(ctx, run->version);
    idsi_free(ctx, run->text);
    idsi_free(ctx, run->source);
    idsi_free(ctx, run->path);
    idsi_free(ctx, run);
}

static ids_status start_run(ids_ctx *ctx, const char *folder, ids_run_access access, ids_run **run)
{
    ids_status st = IDS_OK;
    ids_run *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->access = access;
    made->folder.fd = -1;
    made->folder.lock = -1;
    IDSI_TRY(idsi_strdup(ctx, folder, &made->path));
    made->folder.path = made->path;
    *run = made;
    made = NULL;
done:
    ids_run_free(made);
    return st;
}

/* ---- folders ----------------------------------------------------------------------------- */

/* Opens the folder, and keeps others out as the run's access wants it. */
static ids_status enter(ids_run *run, bool make)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_folder_open(run->ctx, run->path, make, &run->folder.fd));
    if (run->access != IDS_RUN_READ) {
        IDSI_TRY(idsi_folder_lock(run->ctx, &run->folder, run->access == IDS_RUN_ALONE));
    }
done:
    return st;
}

static void hand_over_folder(ids_run *from, ids_run *to)
{
    to->folder.fd = from->folder.fd;
    to->folder.lock = from->folder.lock;
    from->folder.fd = -1;
    from->folder.lock = -1;
}

/* Reads the cells, once the question is settled. */
static ids_status take_stock(ids_run *run)
{
    ids_status st = IDS_OK;

    if (run->access == IDS_RUN_ALONE) {
        idsi_folder_sweep(&run->folder);
    }
    IDSI_TRY(idsi_cells_list(run));
    IDSI_TRY(idsi_cells_load(run));
done:
    return st;
}

/* ---- opening ----------------------------------------------------------------------------- */

ids_status ids_run_open(ids_ctx *ctx, const char *folder, ids_run_access access, ids_run **run)
{
    ids_status st = IDS_OK;
    ids_run *made = NULL;
    bool there = false;
    const char *wrong = NULL;

    if (ctx == NULL || folder == NULL || run == NULL || access < IDS_RUN_READ ||
        access > IDS_RUN_ALONE) {
        return idsi_fail_arg(ctx, "context, folder, access or result");
    }
    IDSI_TRY(start_run(ctx, folder, access, &made));
    IDSI_TRY(enter(made, false));
    IDSI_TRY(idsi_question_read(made, &there, &wrong));
    if (!there) {
        st = idsi_fail(ctx, IDS_ERR_IO, "there is no run in the folder \"%s\"", folder);
        goto done;
    }
    if (wrong != NULL) {
        st = idsi_fail(ctx, IDS_ERR_PARSE,
                       "\"%s/" IDSI_RUN_FILE "\" is damaged: %s; it is made anew when the run is "
                       "started again with its presentation and degrees",
                       folder, wrong);
        goto done;
    }
    IDSI_TRY(take_stock(made));
    *run = made;
    made = NULL;
done:
    ids_run_free(made);
    return st;
}

ids_status ids_run_refresh(ids_run *run)
{
    if (run == NULL) {
        return IDS_ERR_ARG;
    }
    return idsi_cells_load(run);
}

/* ---- making ------------------------------------------------------------------------------ */

/* The run that was found goes on, with the degrees that are asked for. */
static ids_status go_on(ids_run *found, const ids_run *asked)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_question_compare(found, asked));
    if (found->options.from != asked->options.from || found->options.to != asked->options.to) {
        found->options.from = asked->options.from;
        found->options.to = asked->options.to;
        IDSI_TRY(idsi_question_write(found));
    }
    IDSI_TRY(take_stock(found));
done:
    return st;
}

/* Refuses when there are cells but none is the run's: the work of another run is not overwritten
 * because its question cannot be read. */
static ids_status check_cells(const ids_run *run, const char *wrong)
{
    ids_status st = IDS_OK;
    bool any = false;

    for (size_t i = 0; i < run->cell_count; i++) {
        if (run->cells[i].state == IDS_CELL_DONE) {
            return IDS_OK;
        }
    }
    IDSI_TRY(idsi_folder_holds(run->ctx, &run->folder, IDSI_CELL_FILES, &any));
    if (any) {
        st = idsi_fail(run->ctx, IDS_ERR_ARG,
                       "\"%s/" IDSI_RUN_FILE "\" is damaged: %s; and none of the cells in the "
                       "folder is one of the run that is asked for: ask for the one that they "
                       "belong to, or take another folder",
                       run->path, wrong);
    }
done:
    return st;
}

/* The run that is asked for begins in the folder of the other, where, as `wrong` says, there is no
 * question that can be read. */
static ids_status begin(ids_run *asked, ids_run *found, const char *wrong)
{
    ids_status st = IDS_OK;

    hand_over_folder(found, asked);
    IDSI_TRY(take_stock(asked));
    IDSI_TRY(check_cells(asked, wrong));
    IDSI_TRY(idsi_question_write(asked));
done:
    return st;
}

ids_status ids_run_create(ids_ctx *ctx, const char *folder, const char *text, size_t length,
                          const char *source, const ids_run_options *options, ids_run_access access,
                          ids_run **run)
{
    ids_status st = IDS_OK;
    ids_run *asked = NULL;
    ids_run *found = NULL;
    bool there = false;
    const char *wrong = NULL;

    if (ctx == NULL || folder == NULL || text == NULL || options == NULL || run == NULL ||
        (access != IDS_RUN_SHARED && access != IDS_RUN_ALONE)) {
        return idsi_fail_arg(ctx, "context, folder, text, options, access or result");
    }
    IDSI_TRY(start_run(ctx, folder, access, &asked));
    IDSI_TRY(start_run(ctx, folder, access, &found));
    IDSI_TRY(idsi_question_ask(asked, text, length, source, options));
    IDSI_TRY(enter(found, true));
    IDSI_TRY(idsi_question_read(found, &there, &wrong));
    if (there && wrong == NULL) {
        IDSI_TRY(go_on(found, asked));
        *run = found;
        found = NULL;
    } else {
        IDSI_TRY(begin(asked, found, there ? wrong : "it is not there"));
        *run = asked;
        asked = NULL;
    }
done:
    ids_run_free(asked);
    ids_run_free(found);
    return st;
}

/* ---- description ------------------------------------------------------------------------- */

ids_status ids_run_describe(const ids_run *run, ids_run_info *info)
{
    if (run == NULL || info == NULL) {
        return IDS_ERR_ARG;
    }
    *info = (ids_run_info){.folder = run->path,
                           .source = run->source,
                           .text = run->text,
                           .length = run->length,
                           .presentation = run->pres,
                           .digest = run->digest,
                           .version = run->version,
                           .libraries = run->libraries,
                           .created = run->created,
                           .options = run->options};
    info->lower_memory = run->lower_memory;
    info->weakened = idsi_rank_weakened(run->pres, run->options.field, run->options.to);
    for (size_t i = 0; i < run->cell_count; i++) {
        ids_cell_state state = run->cells[i].state;
        info->done += state == IDS_CELL_DONE;
        info->damaged += state == IDS_CELL_DAMAGED;
        info->failed += state == IDS_CELL_FAILED;
    }
    return IDS_OK;
}

size_t ids_run_prime_count(const ids_run *run)
{
    return run == NULL ? 0 : run->prime_count;
}

uint32_t ids_run_prime(const ids_run *run, size_t index)
{
    return run == NULL || index >= run->prime_count ? 0 : run->primes[index];
}
