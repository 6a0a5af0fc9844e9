/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan rank --run: a rank table that is kept in a folder.
 *
 *     rank FILE --degrees A..B --run DIR           computes what is missing, then shows the table
 *     rank FILE --degrees A..B --run DIR --plan    makes the folder and shows what is to be done
 *     rank --run DIR                               shows the table, finished or not
 *     rank --run DIR --list-cells                  names the cells that are missing
 *     rank --run DIR --cell ID,...                 computes some cells, beside others who do
 */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "run_tool.h"

static bool is_given(const settings *read, option_id id)
{
    return (read->seen & BIT(id)) != 0;
}

/* ---- command line -------------------------------------------------------------------- */

bool rank_check_run(const settings *read)
{
    static const option_id of_file[] = {OPTION_DEGREE, OPTION_DEGREES, OPTION_BY,   OPTION_EXACT,
                                        OPTION_PRIMES, OPTION_SEED,    OPTION_FIELD};
    static const option_id of_run[] = {OPTION_JOBS, OPTION_PLAN, OPTION_LIST_CELLS, OPTION_CELL};
    size_t count = sizeof of_file / sizeof *of_file;

    if (read->run == NULL) {
        for (size_t i = 0; i < sizeof of_run / sizeof *of_run; i++) {
            if (is_given(read, of_run[i])) {
                complain("--%s goes with --run", option_list[of_run[i]].name);
                return false;
            }
        }
        return true;
    }
    if (read->run[0] == '\0') {
        complain("--run wants the name of a folder");
        return false;
    }
    for (size_t i = 0; read->file == NULL && i < count; i++) {
        if (is_given(read, of_file[i])) {
            complain("--%s goes with a presentation file; without one, --run %s takes everything "
                     "from the folder",
                     option_list[of_file[i]].name, read->run);
            return false;
        }
    }
    if (read->file == NULL && is_given(read, OPTION_JOBS) && !is_given(read, OPTION_CELL)) {
        complain("--jobs is for computing: give the presentation file and the degrees too");
        return false;
    }
    return true;
}

/* ---- plan ---------------------------------------------------------------------------- */

static const char *state_name(ids_cell_state state)
{
    static const char *const names[] = {[IDS_CELL_MISSING] = "missing",
                                        [IDS_CELL_DONE] = "done",
                                        [IDS_CELL_DAMAGED] = "damaged",
                                        [IDS_CELL_FAILED] = "failed"};
    return names[state];
}

typedef struct sums {
    size_t cells;
    size_t left;
    double seconds;
    uint64_t memory; /* of the largest */
} sums;

/* What is left to do, in all. */
static ids_status add_up(const ids_run *run, sums *all)
{
    ids_status st = IDS_OK;

    *all = (sums){.cells = ids_run_cell_count(run)};
    for (size_t i = 0; i < all->cells; i++) {
        ids_cell cell = {0};
        TRY(ids_run_cell(run, i, &cell));
        if (cell.state != IDS_CELL_DONE) {
            all->left++;
            all->seconds += cell.seconds;
            all->memory = cell.memory > all->memory ? cell.memory : all->memory;
        }
    }
done:
    return st;
}

/* Estimates from as many degrees as memory allows. */
static ids_status make_plan(ids_run *run)
{
    ids_status st = ids_run_plan(run);
    return st == IDS_ERR_LIMIT ? IDS_OK : st;
}

/* "12 of 42 cells are left, about 40 s on one processor; ...". */
static ids_status describe_plan(const ids_run *run, char *text, size_t size)
{
    ids_status st = IDS_OK;
    sums all;
    ids_run_info info = {0};
    char about[DURATION_CHARS] = "";

    TRY(add_up(run, &all));
    TRY(ids_run_describe(run, &info));
    duration_print(all.seconds, about);
    snprintf(text, size,
             "%zu of %zu cells are left: %s on one processor; up to %llu MB a cell%s", all.left,
             all.cells, about, (unsigned long long)(all.memory >> 20) + 1,
             info.options.by_partition ? "" : " (estimates)");
    if (info.options.by_partition) {
        size_t used = strlen(text);
        snprintf(text + used, size - used, " and %llu MB for the lower degrees (estimates)",
                 (unsigned long long)(info.lower_memory >> 20) + 1);
    }
done:
    return st;
}

static ids_status write_plan(session *s, ids_run *run)
{
    enum { CELL, STATE, TIME, MEMORY, COLUMNS };
    static const ids_column columns[COLUMNS] = {[CELL] = {"cell", IDS_COLUMN_TEXT, 0},
                                                [STATE] = {"state", IDS_COLUMN_TEXT, 0},
                                                [TIME] = {"milliseconds", IDS_COLUMN_NUMBER, 0},
                                                [MEMORY] = {"kilobytes", IDS_COLUMN_NUMBER, 0}};
    ids_status st = IDS_OK;
    ids_writer *writer = NULL;
    char text[256] = "";

    TRY(make_plan(run));
    TRY(ids_writer_create(s->ctx, s->set->format, "plan", columns, COLUMNS, output_sink, &s->out,
                          &writer));
    for (size_t i = 0; i < ids_run_cell_count(run); i++) {
        ids_cell cell = {0};
        TRY(ids_run_cell(run, i, &cell));
        digits time = digits_of((uint64_t)(fmin(cell.seconds, 1e15) * 1e3 + 0.5));
        digits memory = digits_of((cell.memory + 1023) >> 10);
        const char *cells[COLUMNS] = {cell.id, state_name(cell.state), time.text, memory.text};
        TRY(ids_writer_row(writer, cells));
    }
    TRY(describe_plan(run, text, sizeof text));
    TRY(ids_writer_note(writer, "plan", text));
    TRY(ids_writer_end(writer));
done:
    ids_writer_free(writer);
    return st;
}

/* ---- table --------------------------------------------------------------------------- */

/* Why a row has no numbers; NULL when it has. */
static const char *missing_text(const ids_run *run, const ids_run_line *line)
{
    ids_cell cell = {0};

    if (line->state == IDS_CELL_DONE) {
        return NULL;
    }
    if (line->cell == SIZE_MAX || ids_run_cell(run, line->cell, &cell) != IDS_OK) {
        return state_name(IDS_CELL_MISSING);
    }
    return state_name(cell.state);
}

static ids_status write_table(session *s, ids_run *run)
{
    ids_status st = IDS_OK;
    size_t count = ids_run_line_count(run);
    ids_partition_row *rows = calloc(count, sizeof *rows);
    const char **missing = calloc(count, sizeof *missing);
    char primes[PRIMES_CHARS] = "";
    char stopped[160] = "";
    ids_run_info info = {0};
    size_t cells = ids_run_cell_count(run);

    if (rows == NULL || missing == NULL) {
        st = IDS_ERR_NOMEM;
        goto done;
    }
    TRY(ids_run_describe(run, &info));
    for (size_t i = 0; i < count; i++) {
        ids_run_line line;
        TRY(ids_run_line_get(run, i, &line));
        rows[i] = line.row;
        missing[i] = missing_text(run, &line);
    }
    for (size_t i = 0; i < ids_run_prime_count(run); i++) {
        primes_append(primes, ids_run_prime(run, i));
    }
    snprintf(stopped, sizeof stopped, "%zu of %zu cells are not there", cells - info.done, cells);
    rank_view view = {.count = count,
                      .rows = rows,
                      .missing = missing,
                      .by_partition = info.options.by_partition,
                      .verdict = info.done == cells,
                      .primes = primes,
                      .seed = info.options.seed,
                      .field = info.options.field,
                      .weakened = info.weakened,
                      .stopped = info.done == cells ? NULL : stopped};
    TRY(rank_write(s, &view));
done:
    free(rows);
    free(missing);
    return st;
}

/* ---- work ---------------------------------------------------------------------------- */

/* Marks a cell of --cell as wanted; the text of the list is cut up. */
static ids_status want_cells(const ids_run *run, char *list, bool *wanted)
{
    ids_status st = IDS_OK;
    char *rest = list;

    for (char *id = strtok_r(list, ",", &rest); id != NULL; id = strtok_r(NULL, ",", &rest)) {
        size_t index = 0;
        TRY(ids_run_cell_find(run, id, &index));
        wanted[index] = true;
    }
done:
    return st;
}

/* Puts the cells on the board that are wanted (NULL: all) and not there. */
static ids_status fill_board(const ids_run *run, board *b, const bool *wanted, size_t *waiting)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < b->count; i++) {
        ids_cell cell = {0};
        TRY(ids_run_cell(run, i, &cell));
        b->cells[i].seconds = cell.seconds;
        b->cells[i].memory = cell.memory;
        if (cell.state != IDS_CELL_DONE && (wanted == NULL || wanted[i])) {
            atomic_store(&b->cells[i].mark, MARK_WAITING);
            *waiting += 1;
        }
        if (cell.state == IDS_CELL_DAMAGED) {
            complain("cell %s is computed again: %s", cell.id, cell.message);
        }
    }
done:
    return st;
}

/* How many cells have failed; *budget: some of them because of the byte budget. */
static size_t count_failed(const board *b, bool *budget)
{
    size_t failed = 0;

    *budget = false;
    for (size_t i = 0; i < b->count; i++) {
        if (atomic_load(&b->cells[i].mark) == MARK_FAILED) {
            failed++;
            *budget = *budget || strstr(b->cells[i].message, "budget") != NULL;
        }
    }
    return failed;
}

/* Computes what waits; afterwards the run knows what is on disk. */
static ids_status compute(session *s, ids_run *run, const bool *wanted)
{
    ids_status st = IDS_OK;
    ids_status seen = IDS_OK;
    size_t waiting = 0;
    bool budget = false;
    uint32_t jobs = s->set->jobs > 0 ? s->set->jobs : s->set->threads;
    char plan[256] = "";
    board *b = NULL;

    TRY(make_plan(run));
    b = board_create(ids_run_cell_count(run));
    if (b == NULL) {
        st = IDS_ERR_NOMEM;
        goto done;
    }
    TRY(fill_board(run, b, wanted, &waiting));
    if (waiting > 0 && wanted == NULL) {
        TRY(describe_plan(run, plan, sizeof plan));
        complain("%s; %u job%s", plan, (unsigned)jobs, jobs == 1 ? "" : "s");
    }
    st = run_work(s, run, b, jobs);
    if (st == IDS_ERR_CANCELLED) {
        session_fail(s, st, "interrupted; what is finished is kept in \"%s\", and the same "
                            "command goes on from there",
                     s->set->run);
    }
    size_t failed = count_failed(b, &budget);
    if (st == IDS_OK && failed > 0) {
        st = session_fail(s, IDS_ERR_LIMIT,
                          "%zu cells could not be computed%s; the next start tries them again",
                          failed, budget ? ", some within the memory budget" : "");
    }
    seen = ids_run_refresh(run);
    st = st == IDS_OK ? seen : st;
done:
    board_free(b);
    return st;
}

/* ---- what is asked for --------------------------------------------------------------- */

static ids_status list_cells(session *s, const ids_run *run)
{
    ids_status st = IDS_OK;

    for (size_t i = 0; i < ids_run_cell_count(run); i++) {
        ids_cell cell = {0};
        TRY(ids_run_cell(run, i, &cell));
        if (cell.state != IDS_CELL_DONE) {
            TRY(output_printf(&s->out, "%s\n", cell.id));
        }
    }
done:
    return st;
}

static ids_status compute_some(session *s, ids_run *run)
{
    ids_status st = IDS_OK;
    bool *wanted = calloc(ids_run_cell_count(run), sizeof *wanted);
    char *list = malloc(strlen(s->set->cells) + 1);

    if (wanted == NULL || list == NULL) {
        st = IDS_ERR_NOMEM;
        goto done;
    }
    memcpy(list, s->set->cells, strlen(s->set->cells) + 1);
    TRY(want_cells(run, list, wanted));
    TRY(compute(s, run, wanted));
done:
    free(list);
    free(wanted);
    return st;
}

static ids_status open_run(session *s, ids_run **run)
{
    const settings *set = s->set;
    bool some = is_given(set, OPTION_CELL);
    ids_run_options options = {.struct_size = sizeof options,
                               .from = set->first_degree,
                               .to = set->last_degree,
                               .by_partition = is_given(set, OPTION_BY),
                               .primes = set->primes,
                               .seed = set->seed,
                               .exact = is_given(set, OPTION_EXACT),
                               .field = set->field};

    if (set->file == NULL) {
        return ids_run_open(s->ctx, set->run, some ? IDS_RUN_SHARED : IDS_RUN_READ, run);
    }
    return ids_run_create(s->ctx, set->run, s->text, s->length, session_source(s), &options,
                          some ? IDS_RUN_SHARED : IDS_RUN_ALONE, run);
}

/* A failure of the library inside is told in its words, whatever comes after. */
static ids_status keep_message(session *s, ids_status st)
{
    if (st != IDS_OK && s->failure[0] == '\0' && ids_ctx_message(s->ctx)[0] != '\0') {
        session_fail(s, st, "%s", ids_ctx_message(s->ctx));
    }
    return st;
}

ids_status rank_in_folder(session *s)
{
    ids_status st = IDS_OK;
    ids_status written = IDS_OK;
    ids_run *run = NULL;

    TRY(keep_message(s, open_run(s, &run)));
    if (is_given(s->set, OPTION_PLAN)) {
        st = write_plan(s, run);
    } else if (is_given(s->set, OPTION_LIST_CELLS)) {
        st = list_cells(s, run);
    } else if (is_given(s->set, OPTION_CELL)) {
        st = keep_message(s, compute_some(s, run));
    } else {
        st = s->set->file != NULL ? keep_message(s, compute(s, run, NULL)) : IDS_OK;
        written = is_report_format(s->set) ? report_run(s, run) : write_table(s, run);
    }
done:
    ids_run_free(run);
    return st != IDS_OK ? st : written;
}
