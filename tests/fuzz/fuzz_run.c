/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The reader of run folders: each input is read as a file run.txt, as a cell and as a note of a
 * failure, as it is and with the right checksum put at its end, since without one the readers
 * look no further. What is read must be in order, and be the same after writing it again.
 */
#include <string.h>

#include "run/run_private.h"

static void require(bool truth)
{
    if (!truth) {
        __builtin_trap();
    }
}

static ids_run *make_run(ids_ctx *ctx)
{
    void *made = NULL;

    require(idsi_alloc_zero(ctx, sizeof(ids_run), &made) == IDS_OK);
    ids_run *run = made;
    run->ctx = ctx;
    run->folder.fd = -1;
    run->folder.lock = -1;
    return run;
}

static void read_cell(const ids_run *run, const char *text, size_t length)
{
    idsi_cell cell = {.id = "5.3+2", .degree = 5, .dimension = 5};
    idsi_cell again = cell;
    idsi_text written;

    require(idsi_cell_read(run, &cell, text, length) == IDS_OK);
    if (cell.state != IDS_CELL_DONE) {
        require(cell.state == IDS_CELL_DAMAGED && cell.message[0] != '\0');
    } else {
        require(cell.result.quotient <= cell.result.free);
        require(idsi_cell_write(run, &cell, &written) == IDS_OK);
        require(idsi_cell_read(run, &again, written.data, written.length) == IDS_OK);
        require(again.state == IDS_CELL_DONE && again.result.quotient == cell.result.quotient);
        require(again.result.error == cell.result.error || cell.result.error > 1);
        idsi_text_clear(&written);
    }
    cell.state = IDS_CELL_MISSING;
    require(idsi_failure_read(run, &cell, text, length) == IDS_OK);
    require(cell.state == IDS_CELL_MISSING || cell.state == IDS_CELL_FAILED);
}

static void read_all(ids_ctx *ctx, const char *text, size_t length)
{
    ids_run *run = make_run(ctx);
    const char *wrong = NULL;

    require(idsi_run_read(run, text, length, &wrong) == IDS_OK);
    if (wrong == NULL) {
        require(run->options.from >= 1 && run->options.from <= run->options.to);
        require(idsi_cells_list(run) == IDS_OK);
    }
    ids_run_free(run);
    /* The question that the seeds of cells belong to. */
    run = make_run(ctx);
    require(idsi_strdup(ctx, "0.1.0", &run->version) == IDS_OK);
    require(idsi_alloc_array(ctx, 2, sizeof *run->primes, &run->primes) == IDS_OK);
    memset(run->digest, '0', IDSI_SHA256_HEX - 1);
    run->primes[0] = 733541183;
    run->primes[1] = 536870923;
    run->prime_count = 2;
    read_cell(run, text, length);
    ids_run_free(run);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    ids_ctx *ctx = NULL;
    idsi_text text;

    require(ids_ctx_create(NULL, &ctx) == IDS_OK);
    read_all(ctx, (const char *)data, size);
    idsi_text_init(&text, ctx);
    require(idsi_text_append(&text, (const char *)data, size) == IDS_OK);
    require(idsi_text_puts(&text, "") == IDS_OK);
    if (text.length > 0) {
        require(idsi_record_end(&text) == IDS_OK);
        read_all(ctx, text.data, text.length);
    }
    idsi_text_clear(&text);
    require(ids_ctx_memory(ctx).live == 0);
    ids_ctx_free(ctx);
    return 0;
}
