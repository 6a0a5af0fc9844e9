/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan rank: the rank table, one row a degree.
 *
 * When the work stops early (a limit, Ctrl-C) the degrees that were finished are written all the
 * same, with a note that says why there are no more.
 */
#include <string.h>

#include "tool.h"

enum { DEGREE, FREE, CONSEQUENCES, QUOTIENT, CERTAINTY, COLUMNS };

const char *const rank_formats[] = {"text", "csv", "json", "latex", "svg", "html", NULL};

static ids_status write_row(const ids_rank_table *table, size_t index, ids_writer *writer)
{
    ids_status st = IDS_OK;
    ids_rank_row row = {0};
    digits numbers[CERTAINTY] = {{{0}}};
    char certainty[24] = "exact";
    const char *cells[COLUMNS] = {0};

    TRY(ids_rank_table_row(table, index, &row));
    if (row.certainty == IDS_CERTAINTY_MODULAR) {
        snprintf(certainty, sizeof certainty, "2^-%u", (unsigned)row.bits);
    }
    numbers[DEGREE] = digits_of(row.degree);
    numbers[FREE] = digits_of(row.free);
    numbers[CONSEQUENCES] = digits_of(row.consequences);
    numbers[QUOTIENT] = digits_of(row.quotient);
    for (size_t i = 0; i < CERTAINTY; i++) {
        cells[i] = numbers[i].text;
    }
    cells[CERTAINTY] = certainty;
    TRY(ids_writer_row(writer, cells));
done:
    return st;
}

void primes_append(char *text, uint64_t prime)
{
    size_t used = strlen(text);
    digits next = digits_of(prime);

    if (used > 0 && text[used - 1] == '.') {
        return;
    }
    if (used + strlen(next.text) + 6 > PRIMES_CHARS) {
        snprintf(text + used, PRIMES_CHARS - used, " ...");
    } else {
        snprintf(text + used, PRIMES_CHARS - used, "%s%s", used > 0 ? " " : "", next.text);
    }
}

static ids_status write_notes(session *s, const ids_rank_table *table, ids_status stopped,
                              ids_writer *writer)
{
    ids_status st = IDS_OK;
    char primes[PRIMES_CHARS] = "";

    if (ids_rank_table_field(table) > 0) {
        TRY(ids_writer_note(writer, "field", digits_of(ids_rank_table_field(table)).text));
    } else if (ids_rank_table_prime_count(table) > 0) {
        for (size_t i = 0; i < ids_rank_table_prime_count(table); i++) {
            primes_append(primes, ids_rank_table_prime(table, i));
        }
        TRY(ids_writer_note(writer, "primes", primes));
        TRY(ids_writer_note(writer, "seed", digits_of(s->set->seed).text));
    }
    if (ids_rank_table_weakened(table)) {
        TRY(ids_writer_note(writer, "warning", WEAKENED_WARNING));
    }
    if (stopped != IDS_OK) {
        TRY(ids_writer_note(writer, "stopped", s->failure));
    }
done:
    return st;
}

/* How sure the numbers are, for the end of the verdict. */
static ids_status write_certainty(session *s, const ids_rank_table *table)
{
    size_t count = ids_rank_table_count(table);
    uint32_t bits = UINT32_MAX;
    bool proved = true;

    for (size_t i = 0; i < count; i++) {
        ids_rank_row row = {0};
        ids_status st = ids_rank_table_row(table, i, &row);
        if (st != IDS_OK) {
            return st;
        }
        if (row.certainty == IDS_CERTAINTY_MODULAR) {
            proved = false;
            bits = row.bits < bits ? row.bits : bits;
        }
    }
    if (proved) {
        return output_printf(&s->out, " (proved).\n");
    }
    return output_printf(&s->out, " (%stoo large with probability at most 2^-%u).\n",
                         count == 1 ? "" : "each ", (unsigned)bits);
}

static ids_status write_verdict(session *s, const ids_rank_table *table)
{
    size_t count = ids_rank_table_count(table);
    uint32_t field = ids_rank_table_field(table);
    char over[32] = "";
    ids_rank_row first = {0};
    ids_rank_row row = {0};
    ids_status st = IDS_OK;

    TRY(ids_rank_table_row(table, 0, &first));
    TRY(ids_rank_table_row(table, count - 1, &row));
    if (field > 0) {
        snprintf(over, sizeof over, " over GF(%u)", (unsigned)field);
    }
    if (count == 1) {
        TRY(output_printf(&s->out, "\nDegree %u%s: a quotient of dimension %s",
                          (unsigned)row.degree, over, digits_of(row.quotient).text));
    } else {
        TRY(output_printf(&s->out, "\nDegrees %u to %u%s: quotients of dimension ",
                          (unsigned)first.degree, (unsigned)row.degree, over));
        for (size_t i = 0; i < count; i++) {
            TRY(ids_rank_table_row(table, i, &row));
            TRY(output_printf(&s->out, "%s%s", i > 0 ? ", " : "", digits_of(row.quotient).text));
        }
    }
    TRY(write_certainty(s, table));
done:
    return st;
}

static ids_status write_table(session *s, const ids_rank_table *table, ids_status stopped)
{
    static const ids_column columns[COLUMNS] = {
        [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
        [FREE] = {"free", IDS_COLUMN_NUMBER, 0},
        [CONSEQUENCES] = {"consequences", IDS_COLUMN_NUMBER, 0},
        [QUOTIENT] = {"quotient", IDS_COLUMN_NUMBER, 0},
        [CERTAINTY] = {"certainty", IDS_COLUMN_MATH, 0},
    };
    bool text = s->set->format == IDS_FORMAT_TEXT;
    size_t count = ids_rank_table_count(table);
    ids_writer *writer = NULL;
    ids_status st = IDS_OK;

    if (text && count == 0) {
        return IDS_OK;
    }
    TRY(ids_writer_create(s->ctx, s->set->format, "rank", columns, COLUMNS, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < count; i++) {
        TRY(write_row(table, i, writer));
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

/* Keeps the reason why the table ends early, with the degree at which it does. */
static void keep_reason(session *s, const ids_rank_table *table, ids_status st)
{
    size_t next = s->set->first_degree + ids_rank_table_count(table);

    if (st == IDS_ERR_CANCELLED) {
        session_fail(s, st, "interrupted before degree %zu was finished", next);
    } else if (st == IDS_ERR_LIMIT || st == IDS_ERR_NOMEM) {
        const char *reason = ids_ctx_message(s->ctx);

        /* Mostly the library names the degree, which can be a lower one. */
        if (strncmp(reason, "degree ", 7) == 0) {
            session_fail(s, st, "%s", reason);
        } else {
            session_fail(s, st, "degree %zu was not finished: %s", next, reason);
        }
    }
}

static ids_status run(session *s)
{
    const settings *set = s->set;
    if ((set->seen & (BIT(OPTION_BY) | BIT(OPTION_PARTITION))) != 0) {
        return rank_by_partition(s);
    }
    ids_rank_options options = {.struct_size = sizeof options,
                                .exact = (set->seen & BIT(OPTION_EXACT)) != 0,
                                .primes = set->primes,
                                .seed = set->seed,
                                .field = set->field};
    ids_rank_table *table = NULL;
    ids_status written = IDS_OK;
    ids_status st = ids_rank_table_create(s->ctx, s->pres, set->first_degree, set->last_degree,
                                          &options, &table);

    keep_reason(s, table, st);
    if (table != NULL) {
        written = is_report_format(set) ? report_ranks(s, table) : write_table(s, table, st);
    }
    ids_rank_table_free(table);
    return written != IDS_OK ? written : st;
}

const task task_rank = {
    .name = "rank",
    .usage = " --degree N | --degrees A..B [--by partition [--cross-check] | --partition P]\n"
             "          [--exact] [--primes K] [--seed S] [--field P]",
    .summary = "count how many monomials the identities leave independent",
    .details =
        "For each degree, dimensions of spaces of multilinear polynomials: `free` without the\n"
        "identities, `consequences` of what follows from the identities, and `quotient`, the\n"
        "difference. A degree without monomials has a row of zeros.\n"
        "\n"
        "Without --exact the ranks are computed modulo a random prime. `consequences` is then a\n"
        "lower bound for the true number, and the column `certainty` bounds the probability\n"
        "that it is too small: 2^-k. With --exact the numbers are proved and it says `exact`.\n"
        "With --field P they are the ranks over the field of P elements, of the linearised\n"
        "identities. Linearising can weaken an identity when a variable occurs in it P times or\n"
        "more; a note then warns of it.\n"
        "\n"
        "With --by partition each degree is split into the irreducible modules of the symmetric\n"
        "group: the numbers are multiplicities, and a row `total` has the dimensions. It goes to\n"
        "degree 16, much further than the usual table in the same time. --partition 4+3+1 asks\n"
        "for one row and needs no degree. --exact and --field do not go with it.\n"
        "\n"
        "When a limit is hit, or after Ctrl-C, the degrees that were finished are shown.\n"
        "\n"
        "--format svg draws the growth of the dimensions and, by partition, the multiplicities;\n"
        "--format html writes one page with tables, charts, presentation and provenance.\n"
        "\n"
        "Columns: degree,free,consequences,quotient,certainty\n"
        "by partition: degree,partition,dimension,free,consequences,quotient,certainty",
    .examples = "  idspan rank pair.pres --degrees 1..6\n"
                "  idspan rank pair.pres --degree 5 --exact\n"
                "  idspan rank pair.pres --degrees 1..7 --primes 2 --seed 17 --format json\n"
                "  idspan rank pair.pres --degrees 1..6 --field 3\n"
                "  idspan rank pair.pres --degree 8 --by partition\n"
                "  idspan rank pair.pres --degrees 1..8 --by partition --format html "
                "--output pair.html\n"
                "  idspan rank pair.pres --partition 4+3+1",
    .options = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES) | BIT(OPTION_EXACT) | BIT(OPTION_PRIMES) |
               BIT(OPTION_SEED) | BIT(OPTION_FIELD) | BIT(OPTION_BY) | BIT(OPTION_PARTITION) |
               BIT(OPTION_CROSS_CHECK),
    .wanted = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES) | BIT(OPTION_PARTITION),
    .formats = rank_formats,
    .check = rank_check,
    .run = run,
};
