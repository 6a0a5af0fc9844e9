/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The supervisor of a run: starts growers until nothing waits, watches them, and answers signals.
 *
 * A clean stop is to end the grower and its workers at once: what is finished is on disk, and the
 * rest could not be kept anyway. A grower that breaks is tried once more, alone; when it breaks
 * again over a degree, the cells above that degree are given up, and those of the degree itself are
 * computed one by one.
 */
#include <errno.h>
#include <signal.h>
#include <string.h>
#include <sys/select.h>
#include <sys/wait.h>
#include <unistd.h>

#include "run_tool.h"

#define TICK_NS 100000000

static volatile sig_atomic_t asked; /* SIGUSR1 came */

static void on_signal(int number)
{
    if (number == SIGUSR1) {
        asked = 1;
    }
}

typedef struct supervisor {
    session *s;
    ids_run *run;
    board *b;
    uint32_t jobs;
    monitor m;
    sigset_t mask; /* while it sleeps */
} supervisor;

/* ---- one grower ---------------------------------------------------------------------- */

static pid_t start_grower(supervisor *v, uint32_t top, uint32_t jobs)
{
    crew_orders orders = {.s = v->s, .run = v->run, .b = v->b, .top = top, .jobs = jobs};
    pid_t parent = getpid();
    pid_t pid = 0;

    fflush(NULL);
    pid = fork();
    if (pid == 0) {
        setpgid(0, 0);
        sigprocmask(SIG_SETMASK, &v->mask, NULL);
        crew_settle(v->s, parent);
        _exit(crew_main(&orders));
    }
    if (pid > 0) {
        setpgid(pid, pid);
    }
    return pid;
}

/* Waits for a grower; *status is what waitpid() says. IDS_ERR_CANCELLED after it was stopped. */
static ids_status watch(supervisor *v, pid_t grower, int *status)
{
    struct timespec tick = {0, TICK_NS};
    pid_t ended = 0;

    while ((ended = waitpid(grower, status, WNOHANG)) == 0 && !interrupted()) {
        monitor_show(&v->m, asked != 0);
        asked = 0;
        pselect(0, NULL, NULL, NULL, &tick, &v->mask);
    }
    kill(-grower, SIGKILL); /* its workers, if it left any */
    if (ended == 0) {
        waitpid(grower, status, 0);
    }
    /* A scheduler ends all processes at once, in any order. */
    bool stopped = WIFSIGNALED(*status) &&
                   (WTERMSIG(*status) == SIGTERM || WTERMSIG(*status) == SIGINT);
    return interrupted() || stopped ? IDS_ERR_CANCELLED : IDS_OK;
}

/* ---- after a grower ------------------------------------------------------------------ */

/* Marks what is on disk as done; what was being computed waits again, or has failed for good. */
static ids_status take_stock(supervisor *v, bool last, const char *reason)
{
    ids_status st = ids_run_refresh(v->run);

    for (size_t i = 0; st == IDS_OK && i < v->b->count; i++) {
        board_cell *c = &v->b->cells[i];
        ids_cell cell = {0};
        int mark = atomic_load(&c->mark);
        if (mark != MARK_RUNNING && mark != MARK_WAITING && mark != MARK_AGAIN) {
            continue;
        }
        st = ids_run_cell(v->run, i, &cell);
        if (st == IDS_OK && cell.state == IDS_CELL_DONE) {
            atomic_store(&c->mark, MARK_DONE);
        } else if (mark == MARK_RUNNING && last) {
            snprintf(c->message, BOARD_TEXT, "%s", reason);
            atomic_store(&c->mark, MARK_FAILED);
            atomic_fetch_add(&c->failures, 1);
            note_failure(v->run, i, reason);
        } else {
            atomic_store(&c->mark, MARK_WAITING);
        }
    }
    return st;
}

/* Gives up the cells above a degree, or with 0 all. */
static ids_status give_up_above(supervisor *v, uint32_t degree, const char *reason)
{
    ids_status st = IDS_OK;
    char text[BOARD_TEXT + 80] = "";
    size_t count = 0;

    if (degree > 0) {
        snprintf(text, sizeof text, "degree %u, which it needs, could not be computed: %s",
                 (unsigned)degree, reason);
    } else {
        snprintf(text, sizeof text, "%s", reason);
    }
    for (size_t i = 0; st == IDS_OK && i < v->b->count; i++) {
        ids_cell cell = {0};
        st = ids_run_cell(v->run, i, &cell);
        if (st == IDS_OK && cell.degree > degree &&
            atomic_load(&v->b->cells[i].mark) == MARK_WAITING) {
            snprintf(v->b->cells[i].message, BOARD_TEXT, "%.*s", (int)BOARD_TEXT - 1, text);
            atomic_store(&v->b->cells[i].mark, MARK_FAILED);
            note_failure(v->run, i, text);
            count++;
        }
    }
    if (count > 0 && degree == 0) {
        complain("%zu cells are given up: %s", count, reason);
    } else if (count > 0) {
        complain("degree %u, which %zu cells of higher degrees need, could not be computed: %s",
                 (unsigned)degree, count, reason);
    }
    return st;
}

static size_t count_waiting(const supervisor *v)
{
    size_t waiting = 0;

    for (size_t i = 0; i < v->b->count; i++) {
        waiting += atomic_load(&v->b->cells[i].mark) == MARK_WAITING;
    }
    return waiting;
}

/* The largest degree with a cell that waits; 0: none does. */
static uint32_t top_degree(const supervisor *v)
{
    uint32_t top = 0;

    for (size_t i = 0; i < v->b->count; i++) {
        ids_cell cell = {0};
        if (atomic_load(&v->b->cells[i].mark) == MARK_WAITING &&
            ids_run_cell(v->run, i, &cell) == IDS_OK && cell.degree > top) {
            top = cell.degree;
        }
    }
    return top;
}

static void explain_end(const supervisor *v, int status, char text[BOARD_TEXT])
{
    if (WIFSIGNALED(status)) {
        snprintf(text, BOARD_TEXT, "the process was ended by signal %d", WTERMSIG(status));
    } else if (v->b->message[0] != '\0') {
        snprintf(text, BOARD_TEXT, "%s", v->b->message);
    } else {
        snprintf(text, BOARD_TEXT, "the process ended with status %d", WEXITSTATUS(status));
    }
}

/* ---- all of them --------------------------------------------------------------------- */

/* One grower after the other, until nothing waits. */
static ids_status supervise(supervisor *v)
{
    ids_status st = IDS_OK;
    bool alone = false; /* the last one broke */
    uint32_t top = 0;

    while ((top = top_degree(v)) > 0) {
        int status = 0;
        char reason[BOARD_TEXT] = "";
        size_t waiting = count_waiting(v);
        v->b->message[0] = '\0';
        pid_t grower = start_grower(v, top, alone ? 1 : v->jobs);
        if (grower < 0) {
            return session_fail(v->s, IDS_ERR_NOMEM, "no process can be started: %s",
                                strerror(errno));
        }
        TRY(watch(v, grower, &status));
        bool ended_well = WIFEXITED(status) && WEXITSTATUS(status) == GROWER_DONE;
        if (WIFEXITED(status) && WEXITSTATUS(status) == GROWER_NO_DISK) {
            return session_fail(v->s, IDS_ERR_IO, "%s; what is finished is kept", v->b->message);
        }
        explain_end(v, status, reason);
        uint32_t growing = atomic_load(&v->b->growing);
        TRY(take_stock(v, alone || ended_well, reason));
        if (!ended_well && !alone) {
            if (growing > 0) {
                complain("degree %u: %s; it is tried again, alone", (unsigned)growing, reason);
            } else {
                complain("%s; what was at work is tried again, alone", reason);
            }
        } else if (!ended_well && growing > 0) {
            TRY(give_up_above(v, growing < top ? growing : 0, reason));
        } else if (count_waiting(v) == waiting) {
            TRY(give_up_above(v, 0, reason)); /* not one cell was as much as begun */
        }
        alone = !ended_well && !alone;
    }
done:
    return st;
}

ids_status run_work(session *s, ids_run *run, board *b, uint32_t jobs)
{
    supervisor v = {.s = s, .run = run, .b = b, .jobs = jobs};
    struct sigaction action;
    sigset_t block;
    ids_status st = IDS_OK;

    if (!monitor_open(&v.m, b, run)) {
        return IDS_ERR_NOMEM;
    }
    memset(&action, 0, sizeof action);
    action.sa_handler = on_signal;
    sigemptyset(&action.sa_mask);
    sigaction(SIGUSR1, &action, NULL);
    sigaction(SIGCHLD, &action, NULL);
    /* These come only while it sleeps, so none is overlooked before it does. */
    sigemptyset(&block);
    sigaddset(&block, SIGCHLD);
    sigaddset(&block, SIGUSR1);
    sigaddset(&block, SIGINT);
    sigaddset(&block, SIGTERM);
    sigprocmask(SIG_BLOCK, &block, &v.mask);
    st = supervise(&v);
    sigprocmask(SIG_SETMASK, &v.mask, NULL);
    monitor_close(&v.m);
    return st;
}
