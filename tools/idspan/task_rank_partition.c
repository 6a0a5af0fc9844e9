/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan rank --by partition: the rank table split by partition, and the multiplicity of one
 * partition (--partition, which needs no --by and brings its degree along).
 *
 * The degrees that were finished when the work stops early are written all the same.
 */
#include <string.h>

#include "tool.h"

/* The limit of ids_partition_table_create(). */
#define MOST_DEGREE 16u

enum { DEGREE, PARTITION, DIMENSION, FREE, CONSEQUENCES, QUOTIENT, CERTAINTY, COLUMNS };

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

/* ---- table --------------------------------------------------------------------------- */

static ids_status write_row(session *s, const ids_partition_row *row, ids_writer *writer)
{
    ids_status st = IDS_OK;
    digits numbers[COLUMNS] = {{{0}}};
    char certainty[24] = "exact";
    char *partition = NULL;
    const char *cells[COLUMNS] = {0};

    if (row->certainty == IDS_CERTAINTY_MODULAR) {
        snprintf(certainty, sizeof certainty, "2^-%u", (unsigned)row->bits);
    }
    numbers[DEGREE] = digits_of(row->degree);
    numbers[FREE] = digits_of(row->free);
    numbers[CONSEQUENCES] = digits_of(row->consequences);
    numbers[QUOTIENT] = digits_of(row->quotient);
    if (!row->total) {
        numbers[DIMENSION] = digits_of(row->dimension);
        TRY(ids_partition_print(s->ctx, &row->partition, &partition));
    }
    for (size_t i = 0; i < COLUMNS; i++) {
        cells[i] = numbers[i].text;
    }
    cells[PARTITION] = row->total ? "total" : partition;
    cells[CERTAINTY] = certainty;
    TRY(ids_writer_row(writer, cells));
done:
    ids_string_free(s->ctx, partition);
    return st;
}

static ids_status write_notes(session *s, const ids_partition_table *table, ids_status stopped,
                              ids_writer *writer)
{
    ids_status st = IDS_OK;
    char primes[PRIMES_CHARS] = "";
    size_t count = ids_partition_table_prime_count(table);

    for (size_t i = 0; i < count; i++) {
        primes_append(primes, ids_partition_table_prime(table, i));
    }
    if (count > 0) {
        TRY(ids_writer_note(writer, "primes", primes));
        TRY(ids_writer_note(writer, "seed", digits_of(s->set->seed).text));
    }
    if (is_given(s->set, OPTION_CROSS_CHECK) && stopped == IDS_OK) {
        TRY(ids_writer_note(writer, "cross-check", "the monomial engine gives the same totals"));
    }
    if (stopped != IDS_OK) {
        TRY(ids_writer_note(writer, "stopped", s->failure));
    }
done:
    return st;
}

/* How sure the numbers of the verdict are: the totals, or the one partition. */
static ids_status write_certainty(session *s, const ids_partition_table *table, size_t numbers)
{
    size_t count = ids_partition_table_count(table);
    uint32_t bits = UINT32_MAX;

    for (size_t i = 0; i < count; i++) {
        ids_partition_row row = {0};
        ids_status st = ids_partition_table_row(table, i, &row);
        if (st != IDS_OK) {
            return st;
        }
        if ((row.total || count == 1) && row.certainty == IDS_CERTAINTY_MODULAR) {
            bits = row.bits < bits ? row.bits : bits;
        }
    }
    if (bits == UINT32_MAX) {
        return output_printf(&s->out, " (proved).\n");
    }
    return output_printf(&s->out, " (%stoo large with probability at most 2^-%u).\n",
                         numbers == 1 ? "" : "each ", (unsigned)bits);
}

static ids_status write_multiplicity(session *s, const ids_partition_table *table)
{
    ids_status st = IDS_OK;
    ids_partition_row row = {0};

    TRY(ids_partition_table_row(table, 0, &row));
    TRY(output_printf(&s->out,
                      "\nPartition %s of degree %u: multiplicity %s in the quotient, %s in the "
                      "free algebra",
                      s->set->partition_text, (unsigned)row.degree, digits_of(row.quotient).text,
                      digits_of(row.free).text));
    TRY(write_certainty(s, table, 1));
done:
    return st;
}

static ids_status write_verdict(session *s, const ids_partition_table *table)
{
    ids_status st = IDS_OK;
    size_t count = ids_partition_table_count(table);
    ids_partition_row last = {0};
    size_t numbers = 0;

    if (is_given(s->set, OPTION_PARTITION)) {
        return write_multiplicity(s, table);
    }
    TRY(ids_partition_table_row(table, count - 1, &last));
    if (last.degree == s->set->first_degree) {
        TRY(output_printf(&s->out, "\nDegree %u: a quotient of dimension ",
                          (unsigned)last.degree));
    } else {
        TRY(output_printf(&s->out, "\nDegrees %u to %u: quotients of dimension ",
                          (unsigned)s->set->first_degree, (unsigned)last.degree));
    }
    for (size_t i = 0; i < count; i++) {
        ids_partition_row row = {0};
        TRY(ids_partition_table_row(table, i, &row));
        if (row.total) {
            TRY(output_printf(&s->out, "%s%s", numbers > 0 ? ", " : "",
                              digits_of(row.quotient).text));
            numbers++;
        }
    }
    TRY(write_certainty(s, table, numbers));
done:
    return st;
}

static ids_status write_table(session *s, const ids_partition_table *table, ids_status stopped)
{
    static const ids_column columns[COLUMNS] = {
        [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
        [PARTITION] = {"partition", IDS_COLUMN_TEXT, 0},
        [DIMENSION] = {"dimension", IDS_COLUMN_NUMBER, 0},
        [FREE] = {"free", IDS_COLUMN_NUMBER, 0},
        [CONSEQUENCES] = {"consequences", IDS_COLUMN_NUMBER, 0},
        [QUOTIENT] = {"quotient", IDS_COLUMN_NUMBER, 0},
        [CERTAINTY] = {"certainty", IDS_COLUMN_MATH, 0},
    };
    bool text = s->set->format == IDS_FORMAT_TEXT;
    size_t count = ids_partition_table_count(table);
    ids_writer *writer = NULL;
    ids_status st = IDS_OK;

    if (text && count == 0) {
        return IDS_OK;
    }
    TRY(ids_writer_create(s->ctx, s->set->format, "rank", columns, COLUMNS, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < count; i++) {
        ids_partition_row row = {0};
        TRY(ids_partition_table_row(table, i, &row));
        TRY(write_row(s, &row, writer));
    }
    TRY(write_notes(s, table, stopped, writer));
    TRY(ids_writer_end(writer));
    if (text) {
        TRY(write_verdict(s, table));
    }
done:
    ids_writer_free(writer);
    return st;
}

/* ---- run ----------------------------------------------------------------------------- */

/* What was not finished: a degree, or with all degrees in the table a later prime. */
static void name_unfinished(const session *s, const ids_partition_table *table, char *text,
                            size_t size)
{
    size_t count = ids_partition_table_count(table);
    ids_partition_row last = {.degree = s->set->first_degree - 1};

    if (count > 0 && ids_partition_table_row(table, count - 1, &last) != IDS_OK) {
        count = 0;
    }
    if (last.degree == s->set->last_degree) {
        snprintf(text, size, "prime %zu of %u", ids_partition_table_prime_count(table),
                 (unsigned)s->set->primes);
    } else {
        snprintf(text, size, "degree %u", (unsigned)last.degree + 1);
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
        written = is_report_format(set) ? report_partitions(s, table) : write_table(s, table, st);
    }
    ids_partition_table_free(table);
    return written != IDS_OK ? written : st;
}
