/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Help texts, made from the tables of tasks and options, and the guess at mistyped words.
 */
#include <string.h>

#include "tool.h"

#define LONGEST_WORD 32u

/* ---- mistyped words ------------------------------------------------------------------ */

static size_t least(size_t a, size_t b)
{
    return a < b ? a : b;
}

/*
 * Number of letters to insert, leave out, replace or swap with the next that turn one word into
 * the other: the usual table, row by row (optimal string alignment).
 */
static size_t distance(const char *from, const char *to)
{
    size_t rows[3][LONGEST_WORD + 1] = {{0}};
    size_t *before = rows[0];
    size_t *above = rows[1];
    size_t *row = rows[2];
    size_t n = strlen(from);
    size_t m = strlen(to);

    if (n > LONGEST_WORD || m > LONGEST_WORD) {
        return LONGEST_WORD;
    }
    for (size_t j = 0; j <= m; j++) {
        row[j] = j;
    }
    for (size_t i = 1; i <= n; i++) {
        size_t *free_row = before;
        before = above;
        above = row;
        row = free_row;
        row[0] = i;
        for (size_t j = 1; j <= m; j++) {
            size_t other = from[i - 1] != to[j - 1];
            row[j] = least(least(above[j], row[j - 1]) + 1, above[j - 1] + other);
            if (i > 1 && j > 1 && from[i - 1] == to[j - 2] && from[i - 2] == to[j - 1]) {
                row[j] = least(row[j], before[j - 2] + 1);
            }
        }
    }
    return row[m];
}

const char *help_nearest(const char *word, const char *const *names)
{
    const char *best = NULL;
    size_t best_distance = strlen(word) / 3 + 1; /* at most every third letter is wrong */

    for (size_t i = 0; names[i] != NULL; i++) {
        size_t d = distance(word, names[i]);
        /* A word of which nothing is right was not meant. */
        if (d < best_distance && d < strlen(names[i])) {
            best = names[i];
            best_distance = d;
        }
    }
    return best;
}

/* ---- help texts ---------------------------------------------------------------------- */

const char *const table_formats[] = {"text", "csv", "json", "latex", NULL};

void help_formats(const task *about, char list[FORMATS_CHARS])
{
    const char *const *names =
        about != NULL && about->formats != NULL ? about->formats : table_formats;
    size_t used = 0;

    list[0] = '\0';
    for (unsigned i = 0; names[i] != NULL && used < FORMATS_CHARS; i++) {
        const char *before = i == 0 ? "" : names[i + 1] != NULL ? ", " : " or ";
        used += (size_t)snprintf(list + used, FORMATS_CHARS - used, "%s%s", before, names[i]);
    }
}

/* What a % in the help of an option stands for. */
static void print_variable(FILE *to, option_id id, const task *about)
{
    char list[FORMATS_CHARS];

    if (id == OPTION_FORMAT) {
        help_formats(about, list);
        fputs(list, to);
    } else {
        fprintf(to, "%u", about != NULL && about->most_degree > 0 ? (unsigned)about->most_degree
                                                                  : (unsigned)IDS_MAX_DEGREE);
    }
}

/* Options of a task; NULL: of all of them. */
static void print_options(FILE *to, uint64_t which, const task *about)
{
    for (unsigned id = 0; id < OPTION_END; id++) {
        const option *shown = &option_list[id];
        const char *exact = id == OPTION_EXACT && about != NULL ? about->exact : NULL;
        const char *text = exact != NULL ? exact : shown->help;
        int used = 0;
        if ((which & BIT(id)) == 0) {
            continue;
        }
        used = fprintf(to, "  --%s%s%s", shown->name, shown->value != NULL ? " " : "",
                       shown->value != NULL ? shown->value : "");
        fprintf(to, "%*s", 20 - used, "");
        for (; *text != '\0'; text++) {
            if (*text == '%') {
                print_variable(to, (option_id)id, about);
                continue;
            }
            fputc(*text, to);
            if (*text == '\n') {
                fprintf(to, "%20s", "");
            }
        }
        fputc('\n', to);
    }
}

void help_general(FILE *to)
{
    fputs("idspan: consequences and ranks for identities of nonassociative algebras\n"
          "\n"
          "Usage:\n"
          "  idspan TASK FILE [options]\n"
          "  idspan TASK --help\n"
          "\n"
          "FILE is a presentation: operations and identities, as idspan(5) describes them.\n"
          "- reads it from standard input.\n"
          "\n"
          "Tasks:\n",
          to);
    for (size_t i = 0; task_list[i] != NULL; i++) {
        fprintf(to, "  %-7s FILE%s\n", task_list[i]->name, task_list[i]->usage);
        if (task_list[i]->also != NULL) {
            fprintf(to, "  %-7s %s\n", task_list[i]->name, task_list[i]->also);
        }
        fprintf(to, "          %s\n", task_list[i]->summary);
    }
    fputs("\nOptions of every task:\n", to);
    print_options(to, COMMON_OPTIONS, NULL);
    fputs("\n"
          "rank, draw and matrix have formats of their own; the help of a task lists them.\n"
          "\n"
          "Exit status: 0 done, 1 does not follow, 2 the command line, the input or the\n"
          "output is not in order, 3 a limit was hit, 4 interrupted.\n"
          "\n"
          "Examples:\n"
          "  idspan show pair.pres\n"
          "  idspan rank pair.pres --degrees 1..6\n"
          "  echo 'operation a*b commutative' | idspan types - --degree 5\n",
          to);
}

void help_task(FILE *to, const task *about)
{
    fprintf(to, "Usage: idspan %s FILE%s\n", about->name, about->usage);
    if (about->also != NULL) {
        fprintf(to, "       idspan %s %s\n", about->name, about->also);
    }
    fprintf(to, "\n%s\n\n", about->details);
    if (about->options != 0) {
        fprintf(to, "Options of %s:\n", about->name);
        print_options(to, about->options, about);
        fputc('\n', to);
    }
    fputs("Options of every task:\n", to);
    print_options(to, COMMON_OPTIONS, about);
    fprintf(to, "\nExamples: (the files are in share/idspan/crosses)\n%s\n", about->examples);
}
