/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The board that the processes of a run share, and what people see of it.
 *
 * On a terminal it is one line that is rewritten; otherwise a plain line every minute. The share of
 * the work and the time left come from the estimates of the cells; that the lower degrees take
 * about a tenth of the time of the highest one is a fact of the growth of dimensions.
 */
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <sys/mman.h>
#include <time.h>

#include "run_tool.h"

#define MINUTE 60.0
#define QUIET_SECONDS 1.0
#define LOWER_SHARE 0.1
#define MOST_OF_CELL 0.9 /* of a running cell counts as done, at most */

board *board_create(size_t cells)
{
    size_t bytes = sizeof(board) + cells * sizeof(board_cell);
    board *b = mmap(NULL, bytes, PROT_READ | PROT_WRITE, MAP_SHARED | MAP_ANONYMOUS, -1, 0);

    if (b == MAP_FAILED) {
        return NULL;
    }
    b->bytes = bytes;
    b->count = cells;
    return b;
}

void board_free(board *b)
{
    if (b != NULL) {
        munmap(b, b->bytes);
    }
}

double now_seconds(void)
{
    struct timespec now = {0};

    clock_gettime(CLOCK_MONOTONIC, &now);
    return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

/* ---- figures ------------------------------------------------------------------------- */

typedef struct figures {
    uint32_t degree; /* at work */
    size_t done;     /* cells of it */
    size_t total;
    size_t all_done;
    size_t all;
    double share;
    uint64_t memory;
} figures;

/* The highest degree that has a running cell, else that of the grower, else the last. */
static uint32_t degree_at_work(const monitor *m)
{
    uint32_t degree = atomic_load(&m->b->growing);

    for (size_t i = 0; i < m->b->count; i++) {
        ids_cell cell = {0};
        if (atomic_load(&m->b->cells[i].mark) == MARK_RUNNING &&
            ids_run_cell(m->run, i, &cell) == IDS_OK && cell.degree > degree) {
            degree = cell.degree;
        }
    }
    return degree;
}

static figures take_figures(const monitor *m)
{
    figures f = {.degree = degree_at_work(m), .memory = atomic_load(&m->b->base)};
    double work = 0;
    double done = 0;
    double lower = 0;

    for (size_t i = 0; i < m->b->count; i++) {
        const board_cell *c = &m->b->cells[i];
        ids_cell cell = {0};
        int mark = atomic_load(&c->mark);
        if (ids_run_cell(m->run, i, &cell) != IDS_OK) {
            continue;
        }
        bool finished = mark == MARK_DONE || cell.state == IDS_CELL_DONE;
        f.total += cell.degree == f.degree;
        f.done += cell.degree == f.degree && finished;
        f.all_done += finished;
        f.memory += mark == MARK_RUNNING ? c->memory : 0;
        if (mark != MARK_UNWANTED) {
            work += c->seconds;
            done += mark == MARK_DONE || mark == MARK_FAILED ? c->seconds : 0;
            done += mark == MARK_RUNNING
                        ? fmin(now_seconds() - c->started, MOST_OF_CELL * c->seconds)
                        : 0;
        }
    }
    f.all = m->b->count;
    lower = m->by_partition ? LOWER_SHARE * work : 0;
    done += atomic_load(&m->b->grown) * lower;
    f.share = work + lower > 0 ? fmin(done / (work + lower), 1) : 0;
    return f;
}

/* ---- lines --------------------------------------------------------------------------- */

static void print_size(uint64_t bytes, char text[16])
{
    if (bytes < (uint64_t)10 << 30) {
        snprintf(text, 16, "%uM", (unsigned)(bytes >> 20) + 1);
    } else {
        snprintf(text, 16, "%uG", (unsigned)(bytes >> 30) + 1);
    }
}

static void make_line(const monitor *m, char *text, size_t size)
{
    figures f = take_figures(m);
    double elapsed = now_seconds() - m->start;
    char memory[16] = "";
    char left[DURATION_CHARS + 8] = "";

    print_size(f.memory, memory);
    if (f.share > 0.005) {
        char about[DURATION_CHARS] = "";
        duration_print(elapsed / f.share - elapsed, about);
        snprintf(left, sizeof left, ", %s left", about);
    }
    if (m->by_partition && f.total > 0) {
        snprintf(text, size,
                 "rank  degree %u: %zu of %zu partitions; all: %zu of %zu, %.0f %% of the "
                 "work%s, %s",
                 (unsigned)f.degree, f.done, f.total, f.all_done, f.all, 100 * f.share, left,
                 memory);
    } else {
        snprintf(text, size, "rank  %zu of %zu cells, %.0f %% of the work%s, %s", f.all_done,
                 f.all, 100 * f.share, left, memory);
    }
}

static void print_state(const monitor *m)
{
    char text[256] = "";
    unsigned growing = atomic_load(&m->b->growing);

    make_line(m, text, sizeof text);
    complain("%s", text);
    if (growing > 0) {
        complain("degree %u is computed, for the degrees above it", growing);
    }
    for (size_t i = 0; i < m->b->count; i++) {
        const board_cell *c = &m->b->cells[i];
        ids_cell cell = {0};
        if (atomic_load(&c->mark) == MARK_RUNNING && ids_run_cell(m->run, i, &cell) == IDS_OK) {
            complain("cell %s for %.0f s", cell.id, now_seconds() - c->started);
        }
    }
}

/* Says of each failure when it is new. */
static void report_failures(monitor *m)
{
    for (size_t i = 0; i < m->b->count; i++) {
        const board_cell *c = &m->b->cells[i];
        ids_cell cell = {0};
        int failures = atomic_load(&c->failures);
        if (failures > m->seen[i] && ids_run_cell(m->run, i, &cell) == IDS_OK) {
            complain("cell %s: %s; %s", cell.id, c->message,
                     failures == 1 ? "it is tried again, alone, at the end"
                                   : "it is given up");
            m->seen[i] = failures;
        }
    }
}

/* ---- the monitor --------------------------------------------------------------------- */

bool monitor_open(monitor *m, const board *b, const ids_run *run)
{
    ids_run_info info = {0};

    *m = (monitor){.b = b, .run = run, .start = now_seconds()};
    m->spoken = m->start;
    m->seen = calloc(b->count + 1, sizeof *m->seen);
    m->by_partition = ids_run_describe(run, &info) == IDS_OK && info.options.by_partition;
    return m->seen != NULL;
}

void monitor_close(monitor *m)
{
    report_failures(m);
    progress_clear();
    free(m->seen);
    m->seen = NULL;
}

void monitor_show(monitor *m, bool asked)
{
    char text[256] = "";
    double now = now_seconds();

    report_failures(m);
    if (asked) {
        print_state(m);
    }
    if (progress_is_shown() && now - m->start >= QUIET_SECONDS) {
        make_line(m, text, sizeof text);
        progress_print(text);
    } else if (!progress_is_shown() && now - m->spoken >= MINUTE) {
        m->spoken = now;
        make_line(m, text, sizeof text);
        complain("%s", text);
    }
}
