/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The cells of a run: their list, their files, and what is known of them.
 */
#include <stdio.h>
#include <string.h>

#include "../young/skew_private.h"
#include "run_private.h"

#define FILE_NAME (sizeof((idsi_cell *)0)->id + 24)

/* ---- the list ---------------------------------------------------------------------------- */

static void name_cell(idsi_cell *cell)
{
    size_t used = (size_t)snprintf(cell->id, sizeof cell->id, "%u", (unsigned)cell->degree);

    for (uint32_t i = 0; i < cell->partition.length; i++) {
        used += (size_t)snprintf(cell->id + used, sizeof cell->id - used, "%c%u",
                                 i == 0 ? '.' : '+', (unsigned)cell->partition.part[i]);
    }
}

ids_status idsi_cells_list(ids_run *run)
{
    ids_status st = IDS_OK;
    size_t count = 0;

    idsi_free(run->ctx, run->cells);
    run->cells = NULL;
    run->cell_count = 0;
    for (uint32_t d = run->options.from; d <= run->options.to; d++) {
        count += run->options.by_partition ? (size_t)ids_partition_count(d) : 1;
    }
    IDSI_TRY(idsi_alloc_array(run->ctx, count, sizeof *run->cells, &run->cells));
    for (uint32_t d = run->options.from; d <= run->options.to; d++) {
        size_t parts = run->options.by_partition ? (size_t)ids_partition_count(d) : 1;
        for (size_t i = 0; i < parts; i++) {
            idsi_cell *cell = &run->cells[run->cell_count];
            cell->degree = d;
            cell->whole = !run->options.by_partition;
            cell->dimension = 1;
            if (!cell->whole) {
                IDSI_TRY(ids_partition_unrank(d, i, &cell->partition));
                IDSI_TRY(ids_partition_dimension(&cell->partition, &cell->dimension));
            }
            name_cell(cell);
            run->cell_count++;
        }
    }
done:
    return st;
}

size_t ids_run_cell_count(const ids_run *run)
{
    return run == NULL ? 0 : run->cell_count;
}

ids_status ids_run_cell(const ids_run *run, size_t index, ids_cell *cell)
{
    if (run == NULL || cell == NULL || index >= run->cell_count) {
        return IDS_ERR_ARG;
    }
    const idsi_cell *c = &run->cells[index];
    *cell = (ids_cell){.id = c->id,
                       .degree = c->degree,
                       .whole = c->whole,
                       .partition = c->partition,
                       .state = c->state,
                       .message = c->message,
                       .seconds = c->seconds,
                       .memory = c->memory};
    if (c->state == IDS_CELL_DONE) {
        cell->result = c->result;
    }
    return IDS_OK;
}

ids_status ids_run_cell_find(const ids_run *run, const char *id, size_t *index)
{
    if (run == NULL || id == NULL || index == NULL) {
        return IDS_ERR_ARG;
    }
    for (size_t i = 0; i < run->cell_count; i++) {
        if (strcmp(run->cells[i].id, id) == 0) {
            *index = i;
            return IDS_OK;
        }
    }
    const char *form = run->options.by_partition ? "7.4+2+1" : "7";
    return idsi_fail(run->ctx, IDS_ERR_ARG,
                     "the run has no cell \"%s\"; its cells are written like %s, of the degrees "
                     "%u to %u",
                     id, form, (unsigned)run->options.from, (unsigned)run->options.to);
}

/* ---- their files ------------------------------------------------------------------------- */

static ids_status load_cell(const ids_run *run, idsi_cell *cell)
{
    ids_status st = IDS_OK;
    char name[FILE_NAME] = "";
    char *bytes = NULL;
    size_t length = 0;

    cell->state = IDS_CELL_MISSING;
    cell->message[0] = '\0';
    snprintf(name, sizeof name, IDSI_CELL_FILES "%s.txt", cell->id);
    IDSI_TRY(idsi_folder_read(run->ctx, &run->folder, name, &bytes, &length));
    if (bytes != NULL) {
        IDSI_TRY(idsi_cell_read(run, cell, bytes, length));
        goto done;
    }
    snprintf(name, sizeof name, "failed-%s.txt", cell->id);
    IDSI_TRY(idsi_folder_read(run->ctx, &run->folder, name, &bytes, &length));
    if (bytes != NULL) {
        IDSI_TRY(idsi_failure_read(run, cell, bytes, length));
    }
done:
    idsi_free(run->ctx, bytes);
    return st;
}

ids_status idsi_cells_load(ids_run *run)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < run->cell_count; i++) {
        IDSI_TRY(load_cell(run, &run->cells[i]));
    }
done:
    return st;
}

static ids_status check_store(const ids_run *run, size_t cell, const void *what)
{
    if (run == NULL || what == NULL || cell >= run->cell_count) {
        return idsi_fail_arg(run == NULL ? NULL : run->ctx, "run, cell or result");
    }
    if (run->access == IDS_RUN_READ) {
        return idsi_fail(run->ctx, IDS_ERR_ARG, "the run was opened to be read only");
    }
    return IDS_OK;
}

ids_status ids_run_store(ids_run *run, size_t cell, const ids_cell_result *result)
{
    ids_status st = check_store(run, cell, result);
    idsi_cell made = {0};
    char name[FILE_NAME] = "";
    idsi_text text;

    if (st != IDS_OK) {
        return st;
    }
    idsi_text_init(&text, run->ctx);
    made = run->cells[cell];
    made.result = *result;
    made.state = IDS_CELL_DONE;
    made.message[0] = '\0';
    idsi_host(made.result.host);
    idsi_now(made.result.finished);
    IDSI_TRY(idsi_cell_write(run, &made, &text));
    snprintf(name, sizeof name, IDSI_CELL_FILES "%s.txt", made.id);
    IDSI_TRY(idsi_folder_write(run->ctx, &run->folder, name, text.data, text.length));
    snprintf(name, sizeof name, "failed-%s.txt", made.id);
    idsi_folder_remove(&run->folder, name);
    run->cells[cell] = made;
    IDSI_TRY(idsi_folder_sync(run->ctx, &run->folder));
done:
    idsi_text_clear(&text);
    return st;
}

ids_status ids_run_store_failure(ids_run *run, size_t cell, const char *reason)
{
    ids_status st = check_store(run, cell, reason);
    idsi_cell made = {0};
    char name[FILE_NAME] = "";
    idsi_text text;

    if (st != IDS_OK) {
        return st;
    }
    idsi_text_init(&text, run->ctx);
    made = run->cells[cell];
    made.state = IDS_CELL_FAILED;
    snprintf(made.message, sizeof made.message, "%.*s", (int)strcspn(reason, "\n"), reason);
    IDSI_TRY(idsi_failure_write(run, &made, &text));
    snprintf(name, sizeof name, "failed-%s.txt", made.id);
    IDSI_TRY(idsi_folder_write(run->ctx, &run->folder, name, text.data, text.length));
    run->cells[cell] = made;
    IDSI_TRY(idsi_folder_sync(run->ctx, &run->folder));
done:
    idsi_text_clear(&text);
    return st;
}
