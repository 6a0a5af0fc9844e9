/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What stands in the files of a run.
 *
 * A cell's file repeats the question (digest, version, primes, seed, whether it is proved, field),
 * so that it can be believed on its own, wherever it was computed; one of another question counts
 * as damaged. Whether it is a partition or a whole degree shows in its ID.
 * Error probabilities are kept exactly, as mantissa and exponent, so that the totals of a table
 * come out the same as in one piece. Numbers are integers throughout: a locale plays no part.
 */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "../field/field_private.h"
#include "../young/skew_private.h"
#include "run_private.h"

#define MANTISSA_BITS 53
#define WRONG_ENTRY "an entry is missing or impossible"

/* ---- the question ------------------------------------------------------------------------ */

ids_status idsi_run_digest(ids_ctx *ctx, const ids_presentation *pres,
                           char digest[IDSI_SHA256_HEX])
{
    ids_status st = IDS_OK;
    const ids_signature *sig = ids_presentation_signature(pres);
    idsi_text text;
    char *line = NULL;

    idsi_text_init(&text, ctx);
    for (size_t i = 0; i < sig->count; i++) {
        IDSI_TRY(ids_signature_print_operation(ctx, sig, i, &line));
        IDSI_TRY(idsi_text_printf(&text, "operation %s\n", line));
        ids_string_free(ctx, line);
        line = NULL;
    }
    for (size_t i = 0; i < ids_presentation_count(pres, IDS_ROLE_IDENTITY); i++) {
        IDSI_TRY(ids_presentation_print_identity(ctx, pres, IDS_ROLE_IDENTITY, i,
                                                 IDS_FORM_WRITTEN, &line));
        IDSI_TRY(idsi_text_printf(&text, "identity %s\n", line));
        ids_string_free(ctx, line);
        line = NULL;
    }
    idsi_sha256(text.data, text.length, digest);
done:
    ids_string_free(ctx, line);
    idsi_text_clear(&text);
    return st;
}

/* The primes with blanks between; "none" over a field of its own. */
static ids_status put_primes(const ids_run *run, idsi_text *text)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_text_puts(text, run->prime_count > 0 ? "primes:" : "primes: none"));
    for (size_t i = 0; i < run->prime_count; i++) {
        IDSI_TRY(idsi_text_printf(text, " %u", (unsigned)run->primes[i]));
    }
    IDSI_TRY(idsi_text_puts(text, "\n"));
done:
    return st;
}

static ids_status put_question(const ids_run *run, idsi_text *text)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_record_put(text, "presentation", run->digest));
    IDSI_TRY(idsi_record_put(text, "version", run->version));
    IDSI_TRY(put_primes(run, text));
    IDSI_TRY(idsi_record_put_number(text, "seed", run->options.seed));
    IDSI_TRY(idsi_record_put_number(text, "exact", run->options.exact));
    IDSI_TRY(idsi_record_put_number(text, "field", run->options.field));
done:
    return st;
}

/* What follows that number and the blank behind it; NULL when something else stands there. */
static const char *pass_prime(const char *at, uint32_t prime)
{
    char *end = NULL;

    if (*at < '1' || *at > '9' || strtoull(at, &end, 10) != prime) {
        return NULL;
    }
    if (*end == ' ' && end[1] != '\0') {
        return end + 1;
    }
    return *end == '\0' ? end : NULL;
}

/* Whether a list of primes in a file is that of the run. */
static bool same_primes(const ids_run *run, const char *at)
{
    if (run->prime_count == 0) {
        return strcmp(at, "none") == 0;
    }
    for (size_t i = 0; at != NULL && i < run->prime_count; i++) {
        at = pass_prime(at, run->primes[i]);
    }
    return at != NULL && *at == '\0';
}

static bool same_number(const idsi_record *record, const char *key, uint64_t expected)
{
    uint64_t number = 0;
    return idsi_record_get_number(record, key, UINT64_MAX, &number) && number == expected;
}

static bool same_text(const idsi_record *record, const char *key, const char *expected)
{
    const char *value = idsi_record_get(record, key);
    return value != NULL && strcmp(value, expected) == 0;
}

static bool same_question(const ids_run *run, const idsi_record *record)
{
    const char *primes = idsi_record_get(record, "primes");

    return same_text(record, "presentation", run->digest) &&
           same_text(record, "version", run->version) && primes != NULL &&
           same_primes(run, primes) && same_number(record, "seed", run->options.seed) &&
           same_number(record, "exact", run->options.exact) &&
           same_number(record, "field", run->options.field);
}

/* ---- run.txt ----------------------------------------------------------------------------- */

ids_status idsi_run_write(const ids_run *run, idsi_text *text)
{
    ids_status st = IDS_OK;
    char sum[IDSI_SHA256_HEX];

    idsi_sha256(run->text, run->length, sum);
    IDSI_TRY(idsi_record_begin(run->ctx, "run", text));
    IDSI_TRY(put_question(run, text));
    IDSI_TRY(idsi_record_put(text, "by", run->options.by_partition ? "partition" : "degree"));
    IDSI_TRY(idsi_record_put_number(text, "from", run->options.from));
    IDSI_TRY(idsi_record_put_number(text, "to", run->options.to));
    IDSI_TRY(idsi_record_put(text, "source", run->source));
    IDSI_TRY(idsi_record_put(text, "text", sum));
    IDSI_TRY(idsi_record_put(text, "libraries", run->libraries));
    IDSI_TRY(idsi_record_put(text, "created", run->created));
    IDSI_TRY(idsi_record_end(text));
done:
    return st;
}

/*
 * The primes are drawn again, and those in the file must be the same: a certainty is only one for
 * primes that came by chance, and a number that is no prime breaks what is computed with it. So how
 * primes are drawn is part of the form of the file.
 */
static ids_status read_primes(ids_run *run, const char *at, const char **wrong)
{
    ids_status st = IDS_OK;
    idsi_random random;

    if (strcmp(at, "none") == 0) {
        return IDS_OK;
    }
    idsi_random_seed(&random, run->options.seed);
    IDSI_TRY(idsi_alloc_array(run->ctx, strlen(at) / 2 + 1, sizeof *run->primes, &run->primes));
    do {
        uint32_t prime = idsi_prime_draw(&random, run->primes, run->prime_count);
        run->primes[run->prime_count] = prime;
        run->prime_count++;
        at = pass_prime(at, prime);
    } while (at != NULL && *at != '\0');
    if (at == NULL) {
        *wrong = "its primes are not those that its seed gives";
    }
    run->options.primes = (uint32_t)run->prime_count;
done:
    return st;
}

/* What read_numbers() leaves. */
static ids_status read_strings(ids_run *run, const idsi_record *record, const char **wrong)
{
    ids_status st = IDS_OK;
    const char *primes = idsi_record_get(record, "primes");
    const char *digest = idsi_record_get(record, "presentation");
    const char *source = idsi_record_get(record, "source");
    const char *libraries = idsi_record_get(record, "libraries");
    const char *created = idsi_record_get(record, "created");

    if (primes == NULL || (strcmp(primes, "none") == 0) != (run->options.field > 0) ||
        digest == NULL || strlen(digest) >= sizeof run->digest || source == NULL ||
        libraries == NULL || created == NULL) {
        *wrong = WRONG_ENTRY;
        return IDS_OK;
    }
    IDSI_TRY(read_primes(run, primes, wrong));
    snprintf(run->digest, sizeof run->digest, "%s", digest);
    snprintf(run->created, sizeof run->created, "%s", created);
    IDSI_TRY(idsi_strdup(run->ctx, source, &run->source));
    IDSI_TRY(idsi_strdup(run->ctx, libraries, &run->libraries));
done:
    return st;
}

static bool read_numbers(ids_run *run, const idsi_record *record)
{
    const char *by = idsi_record_get(record, "by");
    uint64_t from = 0;
    uint64_t to = 0;
    uint64_t exact = 0;
    uint64_t field = 0;
    bool partition = by != NULL && strcmp(by, "partition") == 0;

    if (by == NULL || (!partition && strcmp(by, "degree") != 0) ||
        !idsi_record_get_number(record, "to", partition ? IDSI_SHAPE_MAX : IDS_MAX_DEGREE, &to) ||
        !idsi_record_get_number(record, "from", to, &from) || from == 0 ||
        !idsi_record_get_number(record, "seed", UINT64_MAX, &run->options.seed) ||
        !idsi_record_get_number(record, "exact", 1, &exact) ||
        !idsi_record_get_number(record, "field", IDSI_PRIME_HIGH - 1, &field)) {
        return false;
    }
    run->options.struct_size = sizeof run->options;
    run->options.by_partition = partition;
    run->options.from = (uint32_t)from;
    run->options.to = (uint32_t)to;
    run->options.exact = exact == 1;
    run->options.field = (uint32_t)field;
    if (field == 0) {
        return !(partition && exact == 1);
    }
    return !partition && exact == 0 && idsi_is_prime((uint32_t)field);
}

/* Whether the presentation that was read is the one of the record. */
static const char *check_text(const ids_run *run, const idsi_record *record)
{
    const char *sum = idsi_record_get(record, "text");
    char actual[IDSI_SHA256_HEX];

    if (sum == NULL) {
        return WRONG_ENTRY;
    }
    if (run->text == NULL) {
        return "its presentation is not there";
    }
    idsi_sha256(run->text, run->length, actual);
    return strcmp(sum, actual) == 0 ? NULL : "its presentation is not the one in the folder";
}

ids_status idsi_run_read(ids_run *run, const char *bytes, size_t length, const char **wrong)
{
    ids_status st = IDS_OK;
    idsi_record record;
    const char *version = NULL;

    IDSI_TRY(idsi_record_read(run->ctx, "run", bytes, length, &record, wrong));
    if (*wrong != NULL) {
        goto done;
    }
    version = idsi_record_get(&record, "version");
    if (version != NULL) {
        IDSI_TRY(idsi_strdup(run->ctx, version, &run->version));
    }
    if (version == NULL || !read_numbers(run, &record)) {
        *wrong = WRONG_ENTRY;
        goto done;
    }
    IDSI_TRY(read_strings(run, &record, wrong));
    if (*wrong == NULL) {
        *wrong = check_text(run, &record);
    }
done:
    idsi_record_clear(&record);
    return st;
}

/* ---- cells ------------------------------------------------------------------------------- */

static ids_status put_error(double error, idsi_text *text)
{
    ids_status st = IDS_OK;
    int exponent = 0;
    double fraction = frexp(fmin(error, 1), &exponent);

    IDSI_TRY(idsi_record_put_number(text, "error-mantissa",
                                    (uint64_t)ldexp(fraction, MANTISSA_BITS)));
    IDSI_TRY(idsi_record_put_number(text, "error-shift", (uint64_t)(MANTISSA_BITS - exponent)));
done:
    return st;
}

ids_status idsi_cell_write(const ids_run *run, const idsi_cell *cell, idsi_text *text)
{
    ids_status st = IDS_OK;
    const ids_cell_result *result = &cell->result;
    char certainty[32] = "exact";
    uint64_t micros = (uint64_t)(fmax(result->seconds, 0) * 1e6);

    if (result->certainty == IDS_CERTAINTY_MODULAR) {
        snprintf(certainty, sizeof certainty, "2^-%u", (unsigned)result->bits);
    }
    IDSI_TRY(idsi_record_begin(run->ctx, "cell", text));
    IDSI_TRY(idsi_record_put(text, "id", cell->id));
    IDSI_TRY(put_question(run, text));
    IDSI_TRY(idsi_record_put_number(text, "free", result->free));
    IDSI_TRY(idsi_record_put_number(text, "quotient", result->quotient));
    IDSI_TRY(idsi_record_put(text, "certainty", certainty));
    IDSI_TRY(put_error(result->error, text));
    IDSI_TRY(idsi_text_printf(text, "seconds: %llu.%06u\n",
                              (unsigned long long)(micros / 1000000),
                              (unsigned)(micros % 1000000)));
    IDSI_TRY(idsi_record_put_number(text, "memory", result->memory));
    IDSI_TRY(idsi_record_put(text, "host", result->host));
    IDSI_TRY(idsi_record_put(text, "finished", result->finished));
    IDSI_TRY(idsi_record_end(text));
done:
    return st;
}

static bool read_seconds(const char *at, double *seconds)
{
    uint64_t micros = 0;
    unsigned places = 0;
    bool point = false;

    for (; at != NULL && *at != '\0' && places < 6; at++) {
        if (*at == '.' && !point) {
            point = true;
        } else if (*at < '0' || *at > '9' || micros > UINT64_MAX / 100) {
            return false;
        } else {
            micros = 10 * micros + (uint64_t)(*at - '0');
            places += point;
        }
    }
    *seconds = (double)micros / 1e6;
    return at != NULL && *at == '\0' && places == 6;
}

static bool read_certainty(const idsi_record *record, ids_cell_result *result)
{
    const char *text = idsi_record_get(record, "certainty");
    uint64_t mantissa = 0;
    uint64_t shift = 0;
    char expected[32] = "exact";

    if (text == NULL ||
        !idsi_record_get_number(record, "error-mantissa", UINT64_C(1) << MANTISSA_BITS,
                                &mantissa) ||
        !idsi_record_get_number(record, "error-shift", 2000, &shift)) {
        return false;
    }
    result->error = ldexp((double)mantissa, -(int)shift);
    result->certainty = IDS_CERTAINTY_EXACT;
    if (strcmp(text, "exact") != 0) {
        unsigned long long bits = strncmp(text, "2^-", 3) == 0 ? strtoull(text + 3, NULL, 10) : 0;
        result->certainty = IDS_CERTAINTY_MODULAR;
        result->bits = bits <= 100000 ? (uint32_t)bits : 0;
        snprintf(expected, sizeof expected, "2^-%u", (unsigned)result->bits);
    }
    return strcmp(text, expected) == 0;
}

static bool copy_name(const idsi_record *record, const char *key, char name[IDS_RUN_NAME])
{
    const char *value = idsi_record_get(record, key);

    if (value == NULL || strlen(value) >= IDS_RUN_NAME) {
        return false;
    }
    snprintf(name, IDS_RUN_NAME, "%s", value);
    return true;
}

static bool read_result(const idsi_record *record, ids_cell_result *result)
{
    return idsi_record_get_number(record, "free", UINT64_MAX, &result->free) &&
           idsi_record_get_number(record, "quotient", result->free, &result->quotient) &&
           read_certainty(record, result) &&
           read_seconds(idsi_record_get(record, "seconds"), &result->seconds) &&
           idsi_record_get_number(record, "memory", UINT64_MAX, &result->memory) &&
           copy_name(record, "host", result->host) &&
           copy_name(record, "finished", result->finished);
}

static void set_state(idsi_cell *cell, ids_cell_state state, const char *message)
{
    cell->state = state;
    snprintf(cell->message, sizeof cell->message, "%s", message);
}

ids_status idsi_cell_read(const ids_run *run, idsi_cell *cell, const char *bytes, size_t length)
{
    ids_status st = IDS_OK;
    idsi_record record;
    ids_cell_result result = {0};
    const char *wrong = NULL;

    IDSI_TRY(idsi_record_read(run->ctx, "cell", bytes, length, &record, &wrong));
    if (wrong == NULL && !same_text(&record, "id", cell->id)) {
        wrong = "it is the file of another cell";
    }
    if (wrong == NULL && !same_question(run, &record)) {
        wrong = "it belongs to another run";
    }
    if (wrong == NULL && !read_result(&record, &result)) {
        wrong = WRONG_ENTRY;
    }
    set_state(cell, wrong == NULL ? IDS_CELL_DONE : IDS_CELL_DAMAGED, wrong == NULL ? "" : wrong);
    cell->result = result;
done:
    idsi_record_clear(&record);
    return st;
}

/* ---- failures ---------------------------------------------------------------------------- */

ids_status idsi_failure_write(const ids_run *run, const idsi_cell *cell, idsi_text *text)
{
    ids_status st = IDS_OK;

    IDSI_TRY(idsi_record_begin(run->ctx, "failure", text));
    IDSI_TRY(idsi_record_put(text, "id", cell->id));
    IDSI_TRY(put_question(run, text));
    IDSI_TRY(idsi_record_put(text, "reason", cell->message));
    IDSI_TRY(idsi_record_end(text));
done:
    return st;
}

/* A note that is not in order is no note. */
ids_status idsi_failure_read(const ids_run *run, idsi_cell *cell, const char *bytes, size_t length)
{
    ids_status st = IDS_OK;
    idsi_record record;
    const char *wrong = NULL;

    IDSI_TRY(idsi_record_read(run->ctx, "failure", bytes, length, &record, &wrong));
    if (wrong == NULL && same_text(&record, "id", cell->id) && same_question(run, &record) &&
        idsi_record_get(&record, "reason") != NULL) {
        set_state(cell, IDS_CELL_FAILED, idsi_record_get(&record, "reason"));
    }
done:
    idsi_record_clear(&record);
    return st;
}
