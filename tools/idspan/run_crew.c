/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The grower of a run and its workers; run_tool.h tells who is who.
 *
 * The cells of lower degrees are by-products of growing. For those of the top degree the grower is
 * copied: a worker sees the lower degrees without computing or copying them (copy on write), and
 * works on until it is told that there is nothing left, so that what it has worked out for one cell
 * serves the next. Cells are given out largest first, as far as their memory goes together.
 *
 * What counts is the disk and the board, never a message: the pipe on which workers report only
 * wakes the grower up.
 */
#include <errno.h>
#include <fcntl.h>
#include <math.h>
#include <signal.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/select.h>
#include <sys/wait.h>
#include <unistd.h>

#include "run_tool.h"

typedef struct slot {
    pid_t pid; /* 0: no worker */
    int orders; /* where it reads the numbers of cells */
    bool busy;
    size_t cell;
} slot;

typedef struct crew {
    const crew_orders *o;
    ids_run_work *work;
    size_t slot_count;
    slot *slots;
    size_t *queue; /* cells of the top degree, largest first */
    size_t queue_count;
    int wake[2]; /* workers write here when a cell is done */
    bool alone;  /* cells that failed are tried again */
} crew;

/* ---- workers ------------------------------------------------------------------------- */

static void say(board_cell *c, const char *message)
{
    snprintf(c->message, sizeof c->message, "%s", message);
}

/* One cell, in a worker. Never returns after a failure. */
static void compute_cell(crew *w, size_t cell)
{
    const crew_orders *o = w->o;
    board_cell *c = &o->b->cells[cell];
    ids_cell_result result;
    struct rusage usage = {0};
    ids_status st = ids_run_work_cell(w->work, cell, &result);

    if (st == IDS_OK) {
        if (getrusage(RUSAGE_SELF, &usage) == 0) {
            result.memory = (uint64_t)usage.ru_maxrss * 1024;
        }
        st = ids_run_store(o->run, cell, &result);
    }
    if (st != IDS_OK) {
        say(c, ids_ctx_message(o->s->ctx));
        _exit(st == IDS_ERR_IO ? GROWER_NO_DISK : WORKER_FAILED);
    }
    atomic_store(&c->mark, MARK_DONE);
}

static void be_worker(crew *w, int orders, pid_t parent)
{
    size_t cell = 0;
    char done = 0;

    crew_settle(w->o->s, parent);
    if (ids_run_cell_count(w->o->run) > 0 && w->slot_count > 1) {
        ids_ctx_set_threads(w->o->s->ctx, 1);
    }
    while (read(orders, &cell, sizeof cell) == (ssize_t)sizeof cell) {
        compute_cell(w, cell);
        if (write(w->wake[1], &done, 1) != 1) {
            break;
        }
    }
    _exit(0);
}

static bool start_worker(crew *w, slot *at)
{
    int ends[2] = {-1, -1};
    pid_t parent = getpid();

    if (pipe(ends) != 0) {
        return false;
    }
    at->pid = fork();
    if (at->pid == 0) {
        close(ends[1]);
        for (size_t i = 0; i < w->slot_count; i++) {
            if (&w->slots[i] != at && w->slots[i].pid > 0) {
                close(w->slots[i].orders); /* so that it ends when the grower closes it */
            }
        }
        be_worker(w, ends[0], parent);
    }
    close(ends[0]);
    if (at->pid < 0) {
        at->pid = 0;
        close(ends[1]);
        return false;
    }
    at->orders = ends[1];
    at->busy = false;
    return true;
}

/* Why a process ended. */
static void explain_end(int status, char text[BOARD_TEXT])
{
    if (WIFSIGNALED(status)) {
        int number = WTERMSIG(status);
        const char *why = number == SIGKILL   ? ", as when the system is out of memory"
                          : number == SIGABRT ? ", as when a library is out of memory"
                                              : "";
        snprintf(text, BOARD_TEXT, "its process was ended by signal %d%s", number, why);
    } else {
        snprintf(text, BOARD_TEXT, "its process ended with status %d", WEXITSTATUS(status));
    }
}

/* Whether a cell came to disk before its worker died. */
static bool is_on_disk(crew *w, size_t cell)
{
    ids_cell c = {0};

    return ids_run_refresh(w->o->run) == IDS_OK && ids_run_cell(w->o->run, cell, &c) == IDS_OK &&
           c.state == IDS_CELL_DONE;
}

/* A cell whose worker died: it is on disk all the same, or will be tried again, or has failed. */
static void take_failure(crew *w, size_t cell, int status)
{
    board_cell *c = &w->o->b->cells[cell];

    if (atomic_load(&c->mark) == MARK_DONE || is_on_disk(w, cell)) {
        atomic_store(&c->mark, MARK_DONE);
        return;
    }
    if (!WIFEXITED(status) || WEXITSTATUS(status) != WORKER_FAILED || c->message[0] == '\0') {
        explain_end(status, c->message);
    }
    if (!w->alone) {
        atomic_store(&c->mark, MARK_AGAIN);
    } else {
        atomic_store(&c->mark, MARK_FAILED);
        note_failure(w->o->run, cell, c->message);
    }
    atomic_fetch_add(&c->failures, 1);
}

/* ---- giving out ---------------------------------------------------------------------- */

/* Reaps workers that ended; GROWER_NO_DISK when one could not write. */
static int reap(crew *w)
{
    int status = 0;
    pid_t pid = 0;

    while ((pid = waitpid(-1, &status, WNOHANG)) > 0) {
        for (size_t i = 0; i < w->slot_count; i++) {
            slot *at = &w->slots[i];
            if (at->pid != pid) {
                continue;
            }
            close(at->orders);
            at->pid = 0;
            if (at->busy && WIFEXITED(status) && WEXITSTATUS(status) == GROWER_NO_DISK) {
                snprintf(w->o->b->message, BOARD_TEXT, "%s", w->o->b->cells[at->cell].message);
                return GROWER_NO_DISK;
            }
            if (at->busy) {
                at->busy = false;
                take_failure(w, at->cell, status);
            }
        }
    }
    return GROWER_DONE;
}

/* The next cell for which there is memory beside those that run; SIZE_MAX: none. */
static size_t next_cell(const crew *w, cell_mark wanted)
{
    const board *b = w->o->b;
    uint64_t budget = ids_ctx_memory(w->o->s->ctx).budget;
    uint64_t used = atomic_load(&b->base);
    bool running = false;

    for (size_t i = 0; i < w->queue_count; i++) {
        const board_cell *c = &b->cells[w->queue[i]];
        if (atomic_load(&c->mark) == MARK_RUNNING) {
            used += c->memory;
            running = true;
        }
    }
    for (size_t i = 0; i < w->queue_count; i++) {
        const board_cell *c = &b->cells[w->queue[i]];
        bool fits = budget == 0 || !running || used + c->memory <= budget;
        if (atomic_load(&c->mark) == (int)wanted && fits) {
            return w->queue[i];
        }
    }
    return SIZE_MAX;
}

/* Gives a cell to every worker that has none; false when no process could be started. */
static bool give_out(crew *w, size_t slots, cell_mark wanted)
{
    for (size_t i = 0; i < slots; i++) {
        slot *at = &w->slots[i];
        if (at->busy) {
            continue;
        }
        size_t cell = next_cell(w, wanted);
        if (cell == SIZE_MAX) {
            return true;
        }
        if (at->pid == 0 && !start_worker(w, at)) {
            return false;
        }
        at->cell = cell;
        at->busy = true;
        w->o->b->cells[cell].started = now_seconds();
        atomic_store(&w->o->b->cells[cell].mark, MARK_RUNNING);
        if (write(at->orders, &cell, sizeof cell) != (ssize_t)sizeof cell) {
            kill(at->pid, SIGKILL); /* it is gone already: reap() sees to the cell */
        }
    }
    return true;
}

static size_t count_busy(crew *w)
{
    size_t busy = 0;

    for (size_t i = 0; i < w->slot_count; i++) {
        slot *at = &w->slots[i];
        if (at->busy && atomic_load(&w->o->b->cells[at->cell].mark) == MARK_DONE) {
            at->busy = false;
        }
        busy += at->busy;
    }
    return busy;
}

/* Sleeps until a worker reports or ends. */
static void doze(crew *w, const sigset_t *mask)
{
    char bytes[64];
    struct timespec most = {1, 0};
    fd_set set;

    FD_ZERO(&set);
    FD_SET(w->wake[0], &set);
    if (pselect(w->wake[0] + 1, &set, NULL, NULL, &most, mask) > 0) {
        while (read(w->wake[0], bytes, sizeof bytes) > 0) {
        }
    }
}

static void on_child(int number)
{
    (void)number; /* to end a pselect() */
}

/* Ends the workers, which have nothing left to do. */
static void dismiss(crew *w)
{
    for (size_t i = 0; i < w->slot_count; i++) {
        if (w->slots[i].pid > 0) {
            close(w->slots[i].orders);
            waitpid(w->slots[i].pid, NULL, 0);
            w->slots[i].pid = 0;
        }
    }
}

/* All cells with a mark, on so many workers. */
static int do_cells(crew *w, size_t slots, cell_mark wanted)
{
    sigset_t block;
    sigset_t before;
    int result = GROWER_DONE;

    sigemptyset(&block);
    sigaddset(&block, SIGCHLD);
    sigprocmask(SIG_BLOCK, &block, &before);
    for (;;) {
        result = reap(w);
        if (result != GROWER_DONE) {
            break;
        }
        size_t busy = count_busy(w);
        if (busy == 0 && next_cell(w, wanted) == SIZE_MAX) {
            break;
        }
        if (!give_out(w, slots, wanted) && count_busy(w) == 0) {
            snprintf(w->o->b->message, BOARD_TEXT, "no process can be started: %s",
                     strerror(errno));
            result = GROWER_STUCK;
            break;
        }
        doze(w, &before);
    }
    sigprocmask(SIG_SETMASK, &before, NULL);
    return result;
}

/* ---- growing ------------------------------------------------------------------------- */

/* A degree takes about ten times as long as the one before. */
static int note_growth(void *user, const ids_progress *progress)
{
    const crew_orders *o = user;

    if (progress->stage[0] == '\0') {
        return 0;
    }
    double part = progress->total > 0 ? (double)progress->done / (double)progress->total : 0;

    atomic_store(&o->b->growing, progress->degree);
    atomic_store(&o->b->grown,
                 fmin(pow(10, (double)progress->degree + 1 - (double)o->top) * part, 1));
    return 0;
}

/* Stores the cells of a degree that growing has brought along. */
static ids_status store_degree(crew *w, uint32_t degree)
{
    const crew_orders *o = w->o;
    ids_status st = IDS_OK;

    for (size_t i = 0; i < o->b->count; i++) {
        ids_cell cell = {0};
        ids_cell_result result;
        TRY(ids_run_cell(o->run, i, &cell));
        if (cell.degree == degree && atomic_load(&o->b->cells[i].mark) == MARK_WAITING) {
            TRY(ids_run_work_cell(w->work, i, &result));
            TRY(ids_run_store(o->run, i, &result));
            atomic_store(&o->b->cells[i].mark, MARK_DONE);
        }
    }
done:
    return st;
}

static ids_status grow(crew *w)
{
    const crew_orders *o = w->o;
    ids_status st = IDS_OK;

    progress_divert(note_growth, (void *)w->o);
    ids_ctx_set_threads(o->s->ctx, o->jobs);
    atomic_store(&o->b->growing, 1);
    TRY(ids_run_work_create(o->run, o->top, &w->work));
    for (uint32_t degree = 1; degree < o->top; degree++) {
        atomic_store(&o->b->growing, degree);
        TRY(ids_run_work_grow(w->work, degree + 1));
        TRY(store_degree(w, degree));
    }
    atomic_store(&o->b->base, ids_ctx_memory(o->s->ctx).live);
    atomic_store(&o->b->growing, 0);
    atomic_store(&o->b->grown, 1);
done:
    return st;
}

/*
 * Puts a cell in its place among the others, the largest first, so that the workers end together.
 * One worker takes them in the order of the table: of whole degrees, the lowest first.
 */
static void queue_cell(crew *w, size_t cell)
{
    const board_cell *cells = w->o->b->cells;
    size_t at = w->queue_count;

    while (w->slot_count > 1 && at > 0 && cells[w->queue[at - 1]].seconds < cells[cell].seconds) {
        w->queue[at] = w->queue[at - 1];
        at--;
    }
    w->queue[at] = cell;
    w->queue_count++;
}

/* Lists the cells that the workers are to do. Whole degrees have no lower ones to wait for. */
static ids_status make_queue(crew *w)
{
    const crew_orders *o = w->o;
    ids_status st = IDS_OK;

    w->queue = calloc(o->b->count + 1, sizeof *w->queue);
    if (w->queue == NULL) {
        return IDS_ERR_NOMEM;
    }
    for (size_t i = 0; i < o->b->count; i++) {
        ids_cell cell = {0};
        TRY(ids_run_cell(o->run, i, &cell));
        if (atomic_load(&o->b->cells[i].mark) == MARK_WAITING && cell.degree <= o->top) {
            TRY(ids_run_work_estimate(w->work, i, &o->b->cells[i].seconds,
                                      &o->b->cells[i].memory));
            queue_cell(w, i);
        }
    }
done:
    return st;
}

static int give_up(const crew_orders *o, ids_status st)
{
    snprintf(o->b->message, BOARD_TEXT, "%s", ids_ctx_message(o->s->ctx));
    return st == IDS_ERR_IO ? GROWER_NO_DISK : GROWER_STUCK;
}

int crew_main(const crew_orders *o)
{
    crew w = {.o = o, .wake = {-1, -1}};
    ids_run_info info = {0};
    struct sigaction action;
    int result = GROWER_STUCK;
    ids_status st = ids_run_describe(o->run, &info);

    memset(&action, 0, sizeof action);
    action.sa_handler = on_child;
    sigemptyset(&action.sa_mask);
    sigaction(SIGCHLD, &action, NULL);
    signal(SIGPIPE, SIG_IGN);
    /* A whole degree has no other cells beside it worth the name: it gets all threads. */
    w.slot_count = info.options.by_partition ? o->jobs : 1;
    w.slots = calloc(w.slot_count, sizeof *w.slots);
    if (st == IDS_OK && w.slots == NULL) {
        st = IDS_ERR_NOMEM;
    }
    TRY(st);
    TRY(info.options.by_partition ? grow(&w) : ids_run_work_create(o->run, o->top, &w.work));
    ids_ctx_set_threads(o->s->ctx, o->jobs);
    TRY(make_queue(&w));
    if (pipe(w.wake) != 0 || fcntl(w.wake[0], F_SETFL, O_NONBLOCK) != 0) {
        snprintf(o->b->message, BOARD_TEXT, "no pipe can be made: %s", strerror(errno));
        goto done;
    }
    result = do_cells(&w, w.slot_count, MARK_WAITING);
    if (result == GROWER_DONE) {
        dismiss(&w);
        w.alone = true;
        result = do_cells(&w, 1, MARK_AGAIN);
    }
done:
    ids_run_work_free(w.work);
    free(w.queue);
    free(w.slots);
    return st != IDS_OK ? give_up(o, st) : result;
}
