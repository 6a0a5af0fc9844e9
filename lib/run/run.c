/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Making, opening and describing runs.
 *
 * Who wants to store cells takes the lock before anything is read. What is in the folder is read
 * into a run of its own; a run that is made is compared with it and then given up for it, unless
 * nothing usable is there.
 */
#include <gmp.h>
#include <stdio.h>
#include <string.h>

#include "../answer/rank_private.h"
#include "../field/field_private.h"
#include "../young/skew_private.h"
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

/* ---- what is in the folder --------------------------------------------------------------- */

/* Reads the question and the presentation; *wrong says why they cannot be used, if so. */
static ids_status read_question(ids_run *run, bool *there, const char **wrong)
{
    ids_status st = IDS_OK;
    char *bytes = NULL;
    size_t length = 0;
    char digest[IDSI_SHA256_HEX] = "";

    *wrong = NULL;
    IDSI_TRY(idsi_folder_read(run->ctx, &run->folder, IDSI_RUN_FILE, &bytes, &length));
    *there = bytes != NULL;
    if (!*there) {
        goto done;
    }
    IDSI_TRY(idsi_folder_read(run->ctx, &run->folder, IDSI_PRESENTATION_FILE, &run->text,
                              &run->length));
    IDSI_TRY(idsi_run_read(run, bytes, length, wrong));
    if (*wrong == NULL && run->text == NULL) {
        *wrong = "its presentation is not there";
    }
    if (*wrong != NULL) {
        goto done;
    }
    IDSI_TRY(ids_presentation_read(run->ctx, run->text, run->length, run->source, &run->pres));
    IDSI_TRY(idsi_run_digest(run->ctx, run->pres, digest));
    if (strcmp(digest, run->digest) != 0) {
        *wrong = "the digest does not fit the presentation";
    }
done:
    idsi_free(run->ctx, bytes);
    return st;
}

static ids_status refuse_version(const ids_run *run)
{
    if (strcmp(run->version, IDS_VERSION_STRING) == 0) {
        return IDS_OK;
    }
    return idsi_fail(run->ctx, IDS_ERR_ARG,
                     "the run in \"%s\" is one of idspan %s, this is %s; it can be read, but not "
                     "gone on with: take another folder",
                     run->path, run->version, IDS_VERSION_STRING);
}

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
    IDSI_TRY(idsi_folder_open(ctx, folder, false, &made->folder.fd));
    if (access != IDS_RUN_READ) {
        IDSI_TRY(idsi_folder_lock(ctx, &made->folder, access == IDS_RUN_ALONE));
    }
    IDSI_TRY(read_question(made, &there, &wrong));
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
    if (access != IDS_RUN_READ) {
        IDSI_TRY(refuse_version(made));
    }
    if (access == IDS_RUN_ALONE) {
        idsi_folder_sweep(&made->folder);
    }
    IDSI_TRY(idsi_cells_list(made));
    IDSI_TRY(idsi_cells_load(made));
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

/* ---- a question that is asked ------------------------------------------------------------ */

static ids_status check_options(ids_ctx *ctx, const ids_run_options *options)
{
    uint32_t most = IDS_MAX_DEGREE;

    if (options->struct_size != sizeof *options) {
        return idsi_fail_arg(ctx, "struct_size");
    }
    most = options->by_partition ? IDSI_SHAPE_MAX : IDS_MAX_DEGREE;
    if (options->from == 0 || options->from > options->to || options->to > most) {
        return idsi_fail(ctx, IDS_ERR_ARG, "degrees %u to %u: possible are 1 to %u, upwards",
                         (unsigned)options->from, (unsigned)options->to, (unsigned)most);
    }
    if (options->by_partition && (options->exact || options->field != 0)) {
        return idsi_fail(ctx, IDS_ERR_ARG,
                         "by partition ranks are neither proved nor over a field of one's own");
    }
    if (options->field != 0) {
        if (options->exact || options->primes > 1) {
            return idsi_fail(ctx, IDS_ERR_ARG,
                             "a proof over the rational numbers and several primes exclude the "
                             "ranks over the field of %u elements",
                             (unsigned)options->field);
        }
        return idsi_prime_check(ctx, options->field);
    }
    return IDS_OK;
}

static ids_status draw_primes(ids_run *run)
{
    ids_status st = IDS_OK;
    idsi_random random;

    run->options.primes = run->options.primes == 0 ? 1 : run->options.primes;
    if (run->options.field != 0) {
        run->options.primes = 0;
    }
    idsi_random_seed(&random, run->options.seed);
    IDSI_TRY(idsi_alloc_array(run->ctx, run->options.primes, sizeof *run->primes, &run->primes));
    for (uint32_t k = 0; k < run->options.primes; k++) {
        run->primes[k] = idsi_prime_draw(&random, run->primes, k);
        run->prime_count = k + 1;
    }
done:
    return st;
}

static ids_status ask(ids_run *run, const char *text, size_t length, const char *source,
                      const ids_run_options *options)
{
    ids_status st = IDS_OK;
    ids_ctx *ctx = run->ctx;
    char libraries[128] = "";
    void *copy = NULL;

    IDSI_TRY(check_options(ctx, options));
    IDSI_TRY(idsi_strdup(ctx, source != NULL ? source : "input", &run->source));
    IDSI_TRY(idsi_alloc(ctx, length + 1, &copy));
    run->text = copy;
    memcpy(run->text, text, length);
    run->text[length] = '\0';
    run->length = length;
    IDSI_TRY(ids_presentation_read(ctx, run->text, length, run->source, &run->pres));
    IDSI_TRY(idsi_run_digest(ctx, run->pres, run->digest));
    run->options = *options;
    IDSI_TRY(draw_primes(run));
    snprintf(libraries, sizeof libraries, "GMP %s, FLINT %s", gmp_version, idsi_border_version());
    IDSI_TRY(idsi_strdup(ctx, libraries, &run->libraries));
    IDSI_TRY(idsi_strdup(ctx, IDS_VERSION_STRING, &run->version));
    idsi_now(run->created);
done:
    return st;
}

/* ---- the two together -------------------------------------------------------------------- */

static ids_status refuse(const ids_run *found, const char *what)
{
    return idsi_fail(found->ctx, IDS_ERR_ARG,
                     "the folder \"%s\" holds another run, of \"%s\", begun %s: %s; take another "
                     "folder, or remove this one",
                     found->path, found->source, found->created, what);
}

/* Whether the run that was found may go on as the one that is asked for. */
static ids_status compare(const ids_run *found, const ids_run *asked)
{
    const ids_run_options *a = &found->options;
    const ids_run_options *b = &asked->options;
    char what[160] = "";
    ids_status st = refuse_version(found);

    if (st != IDS_OK) {
        return st;
    }
    if (strcmp(found->digest, asked->digest) != 0) {
        return refuse(found, "its operations or identities are others");
    }
    if (a->by_partition != b->by_partition) {
        return refuse(found, a->by_partition ? "it is by partition" : "it is not by partition");
    }
    if (a->exact != b->exact || a->field != b->field) {
        return refuse(found, "its ranks are over another field, or proved and these not");
    }
    if (found->prime_count != asked->prime_count || a->seed != b->seed ||
        (found->prime_count > 0 && memcmp(found->primes, asked->primes,
                                          found->prime_count * sizeof *found->primes) != 0)) {
        snprintf(what, sizeof what, "it works modulo %zu primes from the seed %llu",
                 found->prime_count, (unsigned long long)a->seed);
        return refuse(found, what);
    }
    if (b->from > a->from || b->to < a->to ||
        ((b->from < a->from || b->to > a->to) && asked->access != IDS_RUN_ALONE)) {
        snprintf(what, sizeof what,
                 "it is about the degrees %u..%u, to which others can be added",
                 (unsigned)a->from, (unsigned)a->to);
        return refuse(found, what);
    }
    return IDS_OK;
}

static ids_status write_question(const ids_run *run)
{
    ids_status st = IDS_OK;
    idsi_text text;

    idsi_text_init(&text, run->ctx);
    IDSI_TRY(idsi_folder_write(run->ctx, &run->folder, IDSI_PRESENTATION_FILE, run->text,
                               run->length));
    IDSI_TRY(idsi_folder_sync(run->ctx, &run->folder));
    IDSI_TRY(idsi_run_write(run, &text));
    IDSI_TRY(idsi_folder_write(run->ctx, &run->folder, IDSI_RUN_FILE, text.data, text.length));
    IDSI_TRY(idsi_folder_sync(run->ctx, &run->folder));
done:
    idsi_text_clear(&text);
    return st;
}

/* Takes up what is in the folder of `asked`, or begins; *run is what goes on. */
static ids_status settle(ids_run *asked, ids_run *found, ids_run **run)
{
    ids_status st = IDS_OK;
    bool there = false;
    const char *wrong = NULL;

    found->folder.fd = asked->folder.fd;
    IDSI_TRY(read_question(found, &there, &wrong));
    if (!there || wrong != NULL) {
        *run = asked;
        IDSI_TRY(write_question(asked));
        goto done;
    }
    IDSI_TRY(compare(found, asked));
    *run = found;
    found->folder.lock = asked->folder.lock;
    asked->folder.fd = -1;
    asked->folder.lock = -1;
    if (found->options.from != asked->options.from || found->options.to != asked->options.to) {
        found->options.from = asked->options.from;
        found->options.to = asked->options.to;
        IDSI_TRY(write_question(found));
    }
done:
    if (*run != found) {
        found->folder.fd = -1; /* it is the other one's */
    }
    return st;
}

ids_status ids_run_create(ids_ctx *ctx, const char *folder, const char *text, size_t length,
                          const char *source, const ids_run_options *options,
                          ids_run_access access, ids_run **run)
{
    ids_status st = IDS_OK;
    ids_run *asked = NULL;
    ids_run *found = NULL;
    ids_run *chosen = NULL;

    if (ctx == NULL || folder == NULL || text == NULL || options == NULL || run == NULL ||
        (access != IDS_RUN_SHARED && access != IDS_RUN_ALONE)) {
        return idsi_fail_arg(ctx, "context, folder, text, options, access or result");
    }
    IDSI_TRY(start_run(ctx, folder, access, &asked));
    IDSI_TRY(start_run(ctx, folder, access, &found));
    IDSI_TRY(ask(asked, text, length, source, options));
    IDSI_TRY(idsi_folder_open(ctx, folder, true, &asked->folder.fd));
    IDSI_TRY(idsi_folder_lock(ctx, &asked->folder, access == IDS_RUN_ALONE));
    IDSI_TRY(settle(asked, found, &chosen));
    if (access == IDS_RUN_ALONE) {
        idsi_folder_sweep(&chosen->folder);
    }
    IDSI_TRY(idsi_cells_list(chosen));
    IDSI_TRY(idsi_cells_load(chosen));
    *run = chosen;
    if (chosen == asked) {
        asked = NULL;
    } else {
        found = NULL;
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
