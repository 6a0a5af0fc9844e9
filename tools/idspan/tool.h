/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the files of the tool share. The tool is a user of the library like any other: it
 * includes the public headers only.
 */
#ifndef TOOL_H
#define TOOL_H

#include <stdbool.h>
#include <stdint.h>
#include <stdio.h>

#include <idspan/idspan.h>

#if defined(__GNUC__) || defined(__clang__)
#define PRINTF_LIKE(text, first) __attribute__((format(printf, text, first)))
#else
#define PRINTF_LIKE(text, first)
#endif

/* Exit status. */
enum { EXIT_DONE = 0, EXIT_NO = 1, EXIT_INPUT = 2, EXIT_LIMIT = 3, EXIT_INTERRUPTED = 4 };

/* ---- options ------------------------------------------------------------------------- */

typedef enum option_id {
    OPTION_DEGREE,
    OPTION_DEGREES,
    OPTION_FROM,
    OPTION_COUNT,
    OPTION_INDEX,
    OPTION_MONOMIALS,
    OPTION_SPLIT,
    OPTION_EXACT,
    OPTION_PRIMES,
    OPTION_SEED,
    OPTION_FIELD,
    OPTION_BY,
    OPTION_PARTITION,
    OPTION_CROSS_CHECK,
    OPTION_RUN,
    OPTION_JOBS,
    OPTION_PLAN,
    OPTION_LIST_CELLS,
    OPTION_CELL,
    OPTION_PLAIN,
    OPTION_CANDIDATE,
    OPTION_ALL,
    OPTION_PROOF,
    OPTION_WITNESS,
    OPTION_MODEL,
    OPTION_TABLE,
    OPTION_SAVE,
    OPTION_ALGEBRA,
    OPTION_DIMENSION,
    OPTION_ENTRIES,
    OPTION_STEPS,
    OPTION_FORMAT,
    OPTION_OUTPUT,
    OPTION_MEMORY,
    OPTION_THREADS,
    OPTION_HELP,
    OPTION_VERSION,
    OPTION_END
} option_id;

#define BIT(id) (UINT64_C(1) << (unsigned)(id))
#define COMMON_OPTIONS                                                                    \
    (BIT(OPTION_FORMAT) | BIT(OPTION_OUTPUT) | BIT(OPTION_MEMORY) | BIT(OPTION_THREADS) | \
     BIT(OPTION_HELP) | BIT(OPTION_VERSION))

/* One option: `value` names its argument, NULL when it has none. `help` may have several lines. */
typedef struct option {
    const char *name;
    const char *value;
    const char *help;
} option;

extern const option option_list[OPTION_END];

struct task;

/* The command line, read and checked. Strings are borrowed from argv. */
typedef struct settings {
    const struct task *task; /* NULL for `idspan --help` and `idspan --version` */
    const char *file;        /* "-": standard input */
    uint64_t seen;           /* BIT() of the options that were given */
    const char *degrees;     /* value of --degree or --degrees, as written */
    uint32_t first_degree;
    uint32_t last_degree;
    uint64_t from;
    uint64_t count;
    uint64_t index;
    uint32_t primes;
    uint64_t seed;
    uint32_t field;
    const char *by;             /* value of --by, as written */
    const char *partition_text; /* value of --partition, as written */
    ids_partition partition;    /* and as read by rank_check() */
    const char *run;            /* value of --run, NULL: none */
    uint32_t jobs;              /* value of --jobs, 0: not given */
    const char *cells;          /* value of --cell, NULL: none */
    const char *candidate;      /* value of --candidate, NULL: none */
    const char *proof;          /* value of --proof, NULL: none */
    const char *witness;        /* value of --witness, NULL: none */
    const char *model;          /* value of --model, NULL: none */
    const char *save;           /* value of --save, NULL: none */
    const char *algebra;        /* value of --algebra, NULL: none */
    uint32_t dimension;         /* of --algebra; 0: the default */
    uint64_t entries;           /* likewise */
    uint64_t steps;             /* likewise */
    const char *format_name; /* value of --format, as written */
    ids_format format;       /* its place in the list of formats of the task */
    const char *output; /* NULL: standard output */
    uint64_t memory;    /* bytes, 0: no limit */
    uint32_t threads;
} settings;

/* Reads the command line; false after a message on standard error. */
bool settings_read(int argc, char **argv, settings *read);
/* False after a message when an option would write to a file that is in use otherwise. */
bool files_check(const settings *read);

/* ---- the run of a task --------------------------------------------------------------- */

/* Where the results go. */
typedef struct output {
    FILE *file;
    const char *name;
    int error;       /* errno of the first write that failed, else 0 */
    char *target;    /* the file to be replaced, and the temporary one that will replace it; */
    char *temporary; /* NULL when it is written to directly */
} output;

/* What a task works with; made and closed by main.c. */
typedef struct session {
    const settings *set;
    ids_ctx *ctx;
    ids_presentation *pres; /* NULL for a task that wants text, and without a file */
    char *text;             /* the file; NULL when there is none */
    size_t length;
    bool no;   /* the answer is "does not follow" */
    bool keep; /* what was written is a result, even if the task fails later */
    output out;
    char failure[2048]; /* explanation of a failure, "" to use the library's */
} session;

/* One task of the tool. It writes its results and returns IDS_OK, or what stopped it. */
typedef struct task {
    const char *name;
    const char *usage;   /* what follows `idspan NAME FILE`, with a blank before it, or "" */
    const char *also;    /* what can follow `idspan NAME` instead, or NULL */
    const char *summary; /* one line */
    const char *details; /* for --help */
    const char *examples;
    uint64_t options;     /* BIT() of its own options, without the common ones */
    uint64_t wanted;      /* of these, at least one must be given; 0: none need be */
    uint32_t most_degree; /* 0: IDS_MAX_DEGREE */
    bool wants_text;      /* the file is no presentation: the task reads it itself */
    const char *const *formats; /* NULL at the end; NULL: those of tables */
    const char *exact;          /* help of --exact, NULL: that of the list of options */
    bool (*check)(settings *read); /* what else the options must be, with a message; or NULL */
    ids_status (*run)(session *s);
} task;

extern const task task_show;
extern const task task_types;
extern const task task_basis;
extern const task task_count;
extern const task task_rank;
extern const task task_draw;
extern const task task_matrix;
extern const task task_follows;
extern const task task_check;
extern const task task_fresh;

/* All tasks, NULL at the end. */
extern const task *const task_list[];
const task *task_find(const char *name);

/* The model that `fresh` is about, opened; the caller frees it. The name is the presentation's. */
ids_status fresh_model_open(session *s, const char **name, ids_model **model);

/* The part of `rank` that works by partition. */
bool rank_check(settings *read);
ids_status rank_by_partition(session *s);
/* The part that keeps a table in a folder (--run). */
bool rank_check_run(const settings *read);
ids_status rank_in_folder(session *s);

/*
 * A rank table to be written. Of rows whose text in `missing` is not NULL there are no numbers, and
 * the text stands for their certainty.
 */
typedef struct rank_view {
    size_t count;
    const ids_partition_row *rows;
    const char *const *missing; /* NULL: all are there */
    bool by_partition;
    bool verdict;       /* text: a sentence at the end */
    const char *primes; /* for the notes; "" without */
    uint64_t seed;
    uint32_t field;     /* 0: the rational numbers */
    bool weakened;
    bool cross_checked;
    const char *stopped; /* why there is no more; NULL: there is */
} rank_view;

/* In the format of --format, pictures and pages included. */
ids_status rank_write(session *s, const rank_view *view);

/* Appends a prime to a list with blanks between; a long list is cut, since the seed tells the
 * rest. The text has PRIMES_CHARS characters. */
#define PRIMES_CHARS 4096u
void primes_append(char *text, uint64_t prime);

/* The formats of `rank` beyond those of tables: numbers that go on from ids_format,
 * in the order of their names in rank_formats. */
enum { FORMAT_SVG = IDS_FORMAT_LATEX + 1, FORMAT_HTML };
extern const char *const rank_formats[];
/* Whether --format asks for a picture or a page. */
bool is_report_format(const settings *set);
/* Makes a report about the presentation `text` (NULL: not shown) from `source`; the caller frees
 * it. The second writes it in the format of --format. */
ids_status report_start(session *s, const char *source, const char *text, size_t length,
                        ids_report **report);
ids_status report_finish(session *s, ids_report *report);
/* Writes a table, or a run, as picture or page; what is not there is shown as missing. */
ids_status report_view(session *s, const rank_view *view);
ids_status report_run(session *s, const ids_run *run);

/* Said of ranks over a small field. */
#define WEAKENED_WARNING                                                                \
    "some variable occurs in a term at least as often as the field has elements; the "  \
    "linearised identities, which are what counts here, can be weaker than the identities " \
    "as written"

/* Sends a function to its `done:` label when a call fails. */
#define TRY(call)           \
    do {                    \
        st = (call);        \
        if (st != IDS_OK) { \
            goto done;      \
        }                   \
    } while (0)

/* Explains a failure in the tool's own words, in place of the library's; returns status. */
ids_status session_fail(session *s, ids_status status, const char *format, ...) PRINTF_LIKE(3, 4);
/* Name of the input for messages. */
const char *session_source(const session *s);
/* IDS_ERR_CANCELLED after Ctrl-C, for loops that the library does not see. */
ids_status session_poll(void);

/* ---- help ---------------------------------------------------------------------------- */

void help_general(FILE *to);
void help_task(FILE *to, const task *about);
/* "text, csv or json" of the formats of a task; NULL: those of tables. */
#define FORMATS_CHARS 80u
void help_formats(const task *about, char list[FORMATS_CHARS]);
extern const char *const table_formats[];
/* The entry of `names` (NULL at the end) that a mistyped word most likely meant, or NULL. */
const char *help_nearest(const char *word, const char *const *names);

/* ---- messages and results ------------------------------------------------------------ */

/* "idspan: ..." on standard error. */
void complain(const char *format, ...) PRINTF_LIKE(1, 2);

/* Reads a whole file, "-" for standard input; the caller frees *text. False after a message. */
bool input_read(const char *name, char **text, size_t *length);

/* Whether both names are there and are those of one regular file. */
bool output_is_file(const char *name, const char *other);
/* Opens a file, or standard output for NULL and "-". False after a message. */
bool output_open(output *out, const char *name);
/* An ids_sink_fn for an output. */
int output_sink(void *user, const char *bytes, size_t length);
ids_status output_printf(output *out, const char *format, ...) PRINTF_LIKE(2, 3);
/* With `keep` the file replaces an older one, else it is forgotten and the older one stays, where
 * that can be. False after a message when any write has failed. */
bool output_close(output *out, bool keep);

/* ---- progress and interruption ------------------------------------------------------- */

/* Shows progress from now on if standard error is a terminal. */
void progress_start(const char *name);
/* An ids_progress_fn. */
int progress_hook(void *user, const ids_progress *progress);
/* From now on another function is told, in this process. */
void progress_divert(ids_progress_fn fn, void *user);
/* Whether there is somebody to see a line, and a line in place of the usual one. */
bool progress_is_shown(void);
void progress_print(const char *text);
/* "about 40 s", "about 3 min", "about 2.5 h". */
#define DURATION_CHARS 32u
void duration_print(double seconds, char text[DURATION_CHARS]);
/* Takes the progress line away; called before anything else is written. */
void progress_clear(void);
/* Ctrl-C and SIGTERM cancel what runs with ctx from now on; NULL: they are only noted. */
void interrupt_watch(ids_ctx *ctx);
bool interrupted(void);
/* A second signal, which ends the program at once, removes this file; NULL: none. */
void interrupt_removes(const char *name);

/* ---- numbers of any size that the tool needs ----------------------------------------- */

#define DECIMAL_LIMBS 12u
#define DECIMAL_CHARS (9u * DECIMAL_LIMBS + 1u)

/* Not negative, below 10^108; limbs to base 10^9, the lowest first. 64! has 90 digits. */
typedef struct decimal {
    uint32_t limb[DECIMAL_LIMBS];
} decimal;

void decimal_set(decimal *number, uint64_t value);
void decimal_add(decimal *number, const decimal *more);
void decimal_multiply(decimal *number, uint32_t factor);
/* n! / divisor for n <= 64; the divisor must divide n!. */
void decimal_factorial_over(decimal *number, uint32_t n, uint64_t divisor);
bool decimal_is_one(const decimal *number);
void decimal_print(const decimal *number, char text[DECIMAL_CHARS]);

/* Digits of a 64-bit number, for cells. */
typedef struct digits {
    char text[24];
} digits;

digits digits_of(uint64_t number);
/* "s" for all numbers but 1. */
const char *plural(uint64_t number);
/* Number of decimal digits. */
uint32_t digits_count(uint64_t number);

#endif
