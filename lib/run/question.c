/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The question of a run: as it is asked, as it stands in a folder, and whether the two agree.
 */
#include <gmp.h>
#include <stdio.h>
#include <string.h>

#include "../answer/rank_private.h"
#include "../field/field_private.h"
#include "../young/skew_private.h"
#include "run_private.h"

/* ---- as it is asked ---------------------------------------------------------------------- */

static ids_status check_options(ids_ctx *ctx, const ids_run_options *options)
{
    ids_status st = IDS_OK;
    uint32_t most = IDS_MAX_DEGREE;

    st = idsi_check_struct(ctx, "ids_run_options", options->struct_size, sizeof *options);
    if (st != IDS_OK) {
        return st;
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
    return idsi_check_field(ctx, options->field, options->exact, options->primes);
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

ids_status idsi_question_ask(ids_run *run, const char *text, size_t length, const char *source,
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

/* ---- as it stands in a folder ------------------------------------------------------------ */

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

static ids_status read_presentation(ids_run *run, const char **wrong)
{
    ids_status st = IDS_OK;
    char digest[IDSI_SHA256_HEX] = "";

    IDSI_TRY(ids_presentation_read(run->ctx, run->text, run->length, run->source, &run->pres));
    IDSI_TRY(idsi_run_digest(run->ctx, run->pres, digest));
    if (strcmp(digest, run->digest) != 0) {
        *wrong = "the digest does not fit the presentation";
    }
done:
    return st;
}

ids_status idsi_question_read(ids_run *run, bool *there, const char **wrong)
{
    ids_status st = IDS_OK;
    char *bytes = NULL;
    size_t length = 0;

    *wrong = NULL;
    IDSI_TRY(idsi_folder_read(run->ctx, &run->folder, IDSI_RUN_FILE, &bytes, &length));
    *there = bytes != NULL;
    if (!*there) {
        goto done;
    }
    IDSI_TRY(
        idsi_folder_read(run->ctx, &run->folder, IDSI_PRESENTATION_FILE, &run->text, &run->length));
    IDSI_TRY(idsi_run_read(run, bytes, length, wrong));
    /* Before anything is blamed on the files: another version may write them in another way. */
    if (run->version != NULL && run->access != IDS_RUN_READ) {
        IDSI_TRY(refuse_version(run));
    }
    if (*wrong == NULL) {
        IDSI_TRY(read_presentation(run, wrong));
    }
done:
    idsi_free(run->ctx, bytes);
    return st;
}

ids_status idsi_question_write(const ids_run *run)
{
    ids_status st = IDS_OK;
    idsi_text text;

    idsi_text_init(&text, run->ctx);
    IDSI_TRY(
        idsi_folder_write(run->ctx, &run->folder, IDSI_PRESENTATION_FILE, run->text, run->length));
    IDSI_TRY(idsi_folder_sync(run->ctx, &run->folder));
    IDSI_TRY(idsi_run_write(run, &text));
    IDSI_TRY(idsi_folder_write(run->ctx, &run->folder, IDSI_RUN_FILE, text.data, text.length));
    IDSI_TRY(idsi_folder_sync(run->ctx, &run->folder));
done:
    idsi_text_clear(&text);
    return st;
}

/* ---- whether they agree ------------------------------------------------------------------ */

static ids_status refuse(const ids_run *found, const char *what)
{
    return idsi_fail(found->ctx, IDS_ERR_ARG,
                     "the folder \"%s\" holds another run, of \"%s\", begun %s: %s; take another "
                     "folder, or remove this one",
                     found->path, found->source, found->created, what);
}

ids_status idsi_question_compare(const ids_run *found, const ids_run *asked)
{
    const ids_run_options *a = &found->options;
    const ids_run_options *b = &asked->options;
    char what[160] = "";

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
        (found->prime_count > 0 &&
         memcmp(found->primes, asked->primes, found->prime_count * sizeof *found->primes) != 0)) {
        snprintf(what, sizeof what, "it works modulo %zu primes from the seed %llu",
                 found->prime_count, (unsigned long long)a->seed);
        return refuse(found, what);
    }
    if (b->from > a->from || b->to < a->to ||
        ((b->from < a->from || b->to > a->to) && asked->access != IDS_RUN_ALONE)) {
        snprintf(what, sizeof what, "it is about the degrees %u..%u, to which others can be added",
                 (unsigned)a->from, (unsigned)a->to);
        return refuse(found, what);
    }
    return IDS_OK;
}
