/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan rank: the rank table, one row a degree.
 *
 * When the work stops early (a limit, Ctrl-C) the degrees that were finished are written all the
 * same, with a note that says why there are no more.
 */
#include <stdlib.h>
#include <string.h>

#include "tool.h"

static ids_status write_table(session *s, const ids_rank_table *table, ids_status stopped)
{
    ids_status st = IDS_OK;
    char primes[PRIMES_CHARS] = "";
    size_t count = ids_rank_table_count(table);
    ids_partition_row *rows = calloc(count + 1, sizeof *rows);
    rank_view view = {.count = count,
                      .rows = rows,
                      .verdict = true,
                      .primes = primes,
                      .seed = s->set->seed,
                      .field = ids_rank_table_field(table),
                      .weakened = ids_rank_table_weakened(table),
                      .stopped = stopped != IDS_OK ? s->failure : NULL};

    if (rows == NULL) {
        return IDS_ERR_NOMEM;
    }
    for (size_t i = 0; i < count; i++) {
        ids_rank_row row = {0};
        TRY(ids_rank_table_row(table, i, &row));
        rows[i] = (ids_partition_row){.degree = row.degree,
                                      .total = true,
                                      .free = row.free,
                                      .consequences = row.consequences,
                                      .quotient = row.quotient,
                                      .certainty = row.certainty,
                                      .bits = row.bits};
    }
    for (size_t i = 0; i < ids_rank_table_prime_count(table); i++) {
        primes_append(primes, ids_rank_table_prime(table, i));
    }
    TRY(rank_write(s, &view));
done:
    free(rows);
    return st;
}

/* Keeps the reason why the table ends early, with the degree at which it does. */
static void keep_reason(session *s, const ids_rank_table *table, ids_status st)
{
    size_t next = s->set->first_degree + ids_rank_table_count(table);

    if (st == IDS_ERR_CANCELLED) {
        session_fail(s, st, "interrupted before degree %zu was finished", next);
    } else if (st == IDS_ERR_LIMIT || st == IDS_ERR_NOMEM || st == IDS_ERR_UNABLE) {
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
    if (set->run != NULL) {
        return rank_in_folder(s);
    }
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
        written = write_table(s, table, st);
    }
    ids_rank_table_free(table);
    return written != IDS_OK ? written : st;
}

const task task_rank = {
    .name = "rank",
    .usage = " --degree N | --degrees A..B\n"
             "          [--by partition [--cross-check] | --partition P]\n"
             "          [--exact] [--primes K] [--seed S] [--field P]\n"
             "          [--run DIR [--jobs N] [--plan]]",
    .also = "--run DIR [--list-cells | --plan | --cell ID,... [--jobs N]]",
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
        "With --run DIR the table is kept in a folder, one file for every partition or degree\n"
        "that is finished. However the work ends, the same command goes on where it was left,\n"
        "and `idspan rank --run DIR` shows the table as far as it is. Parts that fail are tried\n"
        "again alone, and reported. --plan shows what is to be done and what it will cost;\n"
        "--list-cells and --cell are for batch schedulers.\n"
        "\n"
        "When a limit is hit, or after Ctrl-C, the degrees that were finished are shown.\n"
        "\n"
        "--format svg draws the growth of the dimensions and, by partition, the multiplicities;\n"
        "--format html writes one page with tables, charts, presentation and provenance, of a\n"
        "run also with time and memory of each part, and with what is missing or failed.\n"
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
                "  idspan rank pair.pres --partition 4+3+1\n"
                "  idspan rank pair.pres --degrees 2..9 --by partition --run pair-run --jobs 2\n"
                "  idspan rank --run pair-run --format latex",
    .options = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES) | BIT(OPTION_EXACT) | BIT(OPTION_PRIMES) |
               BIT(OPTION_SEED) | BIT(OPTION_FIELD) | BIT(OPTION_BY) | BIT(OPTION_PARTITION) |
               BIT(OPTION_CROSS_CHECK) | BIT(OPTION_RUN) | BIT(OPTION_JOBS) | BIT(OPTION_PLAN) |
               BIT(OPTION_LIST_CELLS) | BIT(OPTION_CELL),
    .wanted = BIT(OPTION_DEGREE) | BIT(OPTION_DEGREES) | BIT(OPTION_PARTITION),
    .formats = rank_formats,
    .check = rank_check,
    .run = run,
};
