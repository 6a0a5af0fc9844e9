/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan rank --by partition: the rank table split by partition, and the multiplicity of one
 * partition (--partition, which needs no --by and brings its degree along).
 *
 * The degrees that were finished when the work stops early are written all the same.
 */
#include <stdlib.h>
#include <string.h>

#include "tool.h"

/* The limit of ids_partition_table_create(). */
#define MOST_DEGREE 16u

/* ---- command line -------------------------------------------------------------------- */

static bool is_given(const settings *read, option_id id)
{
    return (read->seen & BIT(id)) != 0;
}

/* Reads --partition; a context of its own, since there is none yet. */
static bool read_partition(settings *read)
{
    ids_ctx *ctx = NULL;
    ids_status st = ids_ctx_create(NULL, &ctx);

    if (st == IDS_OK) {
        st = ids_partition_parse(ctx, read->partition_text, &read->partition);
    }
    if (st == IDS_ERR_PARSE) {
        complain("--%s", ids_ctx_message(ctx)); /* it begins with the word "partition" */
    } else if (st != IDS_OK) {
        complain("%s", ids_status_text(st));
    }
    ids_ctx_free(ctx);
    return st == IDS_OK;
}

/* The degree of a partition is the one that is asked for, or is asked for by it. */
static bool check_partition(settings *read)
{
    uint32_t degree = 0;

    if (!read_partition(read)) {
        return false;
    }
    degree = read->partition.degree;
    if (degree < 1 || degree > MOST_DEGREE) {
        complain("--partition %s is one of %u; by partition degrees go from 1 to %u",
                 read->partition_text, (unsigned)degree, MOST_DEGREE);
        return false;
    }
    if (read->degrees != NULL && (read->first_degree != degree || read->last_degree != degree)) {
        complain("--partition %s belongs to degree %u, which need not be given; %s is another",
                 read->partition_text, (unsigned)degree, read->degrees);
        return false;
    }
    read->first_degree = degree;
    read->last_degree = degree;
    return true;
}

bool rank_check(settings *read)
{
    bool by_partition = is_given(read, OPTION_BY) || is_given(read, OPTION_PARTITION);

    if (is_given(read, OPTION_BY) && strcmp(read->by, "partition") != 0) {
        complain("--by can be partition, not \"%s\"", read->by);
        return false;
    }
    if (is_given(read, OPTION_PLAN) && is_report_format(read)) {
        complain("a plan is a table: --format can be text, csv, json or latex");
        return false;
    }
    if (!by_partition) {
        if (is_given(read, OPTION_CROSS_CHECK)) {
            complain("--cross-check is for --by partition: the totals are compared with those of "
                     "the usual rank table");
            return false;
        }
        return true;
    }
    if (is_given(read, OPTION_EXACT)) {
        complain("--exact does not go with --by partition, which computes modulo primes; "
                 "--primes makes the numbers surer");
        return false;
    }
    if (is_given(read, OPTION_FIELD)) {
        complain("--field does not go with --by partition: it is about the rational numbers, by "
                 "way of random primes larger than the degree");
        return false;
    }
    if (is_given(read, OPTION_PARTITION)) {
        return check_partition(read);
    }
    if (read->last_degree > MOST_DEGREE) {
        complain("degree %u: by partition degrees go from 1 to %u", (unsigned)read->last_degree,
                 MOST_DEGREE);
        return false;
    }
    return true;
}

/* ---- run ----------------------------------------------------------------------------- */

/* What was not finished: a degree, or with all degrees in the table a later prime. */
static void name_unfinished(const session *s, const ids_partition_table *table, char *text,
                            size_t size)
{
    size_t count = ids_partition_table_count(table);
    uint32_t last = s->set->first_degree - 1;
    ids_partition_row row = {0};

    if (count > 0 && ids_partition_table_row(table, count - 1, &row) == IDS_OK) {
        last = row.degree;
    }
    if (last == s->set->last_degree) {
        snprintf(text, size, "prime %zu of %u", ids_partition_table_prime_count(table),
                 (unsigned)s->set->primes);
    } else {
        snprintf(text, size, "degree %u", (unsigned)last + 1);
    }
}

/* Keeps the reason why the table ends early, with the place where it does. */
static void keep_reason(session *s, const ids_partition_table *table, ids_status st)
{
    char what[64] = "";

    name_unfinished(s, table, what, sizeof what);
    if (st == IDS_ERR_CANCELLED) {
        session_fail(s, st, "interrupted before %s was finished", what);
    } else if (st == IDS_ERR_LIMIT || st == IDS_ERR_NOMEM) {
        session_fail(s, st, "%s was not finished: %s", what, ids_ctx_message(s->ctx));
    }
}

static ids_status write_table(session *s, const ids_partition_table *table, ids_status stopped)
{
    ids_status st = IDS_OK;
    char primes[PRIMES_CHARS] = "";
    size_t count = ids_partition_table_count(table);
    ids_partition_row *rows = calloc(count + 1, sizeof *rows);
    rank_view view = {.count = count,
                      .rows = rows,
                      .by_partition = true,
                      .verdict = true,
                      .primes = primes,
                      .seed = s->set->seed,
                      .cross_checked = is_given(s->set, OPTION_CROSS_CHECK) && stopped == IDS_OK,
                      .stopped = stopped != IDS_OK ? s->failure : NULL};

    if (rows == NULL) {
        return IDS_ERR_NOMEM;
    }
    for (size_t i = 0; i < count; i++) {
        TRY(ids_partition_table_row(table, i, &rows[i]));
    }
    for (size_t i = 0; i < ids_partition_table_prime_count(table); i++) {
        primes_append(primes, ids_partition_table_prime(table, i));
    }
    TRY(rank_write(s, &view));
done:
    free(rows);
    return st;
}

ids_status rank_by_partition(session *s)
{
    const settings *set = s->set;
    ids_partition_options options = {
        .struct_size = sizeof options,
        .primes = set->primes,
        .seed = set->seed,
        .partition = is_given(set, OPTION_PARTITION) ? &set->partition : NULL,
        .cross_check = is_given(set, OPTION_CROSS_CHECK)};
    ids_partition_table *table = NULL;
    ids_status written = IDS_OK;
    ids_status st = ids_partition_table_create(s->ctx, s->pres, set->first_degree,
                                               set->last_degree, &options, &table);

    keep_reason(s, table, st);
    if (table != NULL) {
        written = write_table(s, table, st);
    }
    ids_partition_table_free(table);
    return written != IDS_OK ? written : st;
}
