/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Progress for people who watch, and Ctrl-C.
 *
 * One line on standard error, rewritten in place, only when standard error is a terminal, and
 * only after the first second, so that short work shows nothing. The process has one terminal
 * and one set of signal handlers, so this file is the one place of the tool with static data.
 * The first Ctrl-C asks the library to stop; the handler is then gone, so a second one kills.
 */
#include <signal.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

#include "tool.h"

#define QUIET_SECONDS 1.0

static struct {
    bool on;
    bool shown;
    const char *task;
    struct timespec start;
    uint32_t degree; /* of the stage that is shown, which began at stage_start */
    struct timespec stage_start;
} line;

static struct {
    ids_progress_fn fn; /* NULL: the line above */
    void *user;
} diverted;

static ids_ctx *volatile watched;
static volatile sig_atomic_t caught;
static const char *volatile unfinished; /* file to be removed when a signal ends the program */

/* ---- progress ------------------------------------------------------------------------ */

static double seconds_since(const struct timespec *start)
{
    struct timespec now = {0};

    clock_gettime(CLOCK_MONOTONIC, &now);
    return (double)(now.tv_sec - start->tv_sec) + 1e-9 * (double)(now.tv_nsec - start->tv_nsec);
}

void progress_start(const char *name)
{
    line.on = isatty(STDERR_FILENO) == 1;
    line.task = name;
    clock_gettime(CLOCK_MONOTONIC, &line.start);
}

void duration_print(double seconds, char text[DURATION_CHARS])
{
    if (seconds < 1) {
        snprintf(text, DURATION_CHARS, "less than 1 s");
    } else if (seconds < 90) {
        snprintf(text, DURATION_CHARS, "about %.0f s", seconds + 0.5);
    } else if (seconds < 5400) {
        snprintf(text, DURATION_CHARS, "about %.0f min", seconds / 60);
    } else {
        snprintf(text, DURATION_CHARS, "about %.1f h", seconds < 3.6e9 ? seconds / 3600 : 1e6);
    }
}

/* "  35 %, about 40 s left" and the like; the time only once the share says enough. */
static void print_share(double elapsed, double share, const char *of)
{
    double left = share > 0.001 ? elapsed / share - elapsed : -1;
    char text[DURATION_CHARS] = "";

    fprintf(stderr, "  %.0f %%%s", 100 * share, of);
    if (left >= 0 && left <= 1e7) {
        duration_print(left, text);
        fprintf(stderr, ", %s left", text);
    }
}

/* The share of the whole work where it is known, else that of the degree. */
static void print_how_far(const ids_progress *progress, double elapsed)
{
    if (progress->share > 0 && progress->share <= 1) {
        print_share(elapsed, progress->share, "");
    } else if (progress->total > 0 && progress->done <= progress->total) {
        print_share(seconds_since(&line.stage_start),
                    (double)progress->done / (double)progress->total, " of this degree");
    }
}

int progress_hook(void *user, const ids_progress *progress)
{
    double elapsed = 0;

    (void)user;
    if (diverted.fn != NULL) {
        return diverted.fn(diverted.user, progress);
    }
    if (!line.on || progress->stage[0] == '\0') {
        return 0;
    }
    if (progress->degree != line.degree) {
        line.degree = progress->degree;
        clock_gettime(CLOCK_MONOTONIC, &line.stage_start);
    }
    elapsed = seconds_since(&line.start);
    if (elapsed < QUIET_SECONDS) {
        return 0;
    }
    fprintf(stderr, "\r\033[K%s", line.task);
    if (progress->degree > 0) {
        fprintf(stderr, "  degree %u", (unsigned)progress->degree);
    }
    print_how_far(progress, elapsed);
    fflush(stderr);
    line.shown = true;
    return 0;
}

void progress_divert(ids_progress_fn fn, void *user)
{
    diverted.fn = fn;
    diverted.user = user;
}

bool progress_is_shown(void)
{
    return line.on;
}

void progress_print(const char *text)
{
    fprintf(stderr, "\r\033[K%s", text);
    fflush(stderr);
    line.shown = true;
}

void progress_clear(void)
{
    if (line.shown) {
        fputs("\r\033[K", stderr);
        fflush(stderr);
        line.shown = false;
    }
}

/* ---- interruption -------------------------------------------------------------------- */

/*
 * The first signal asks for a clean stop; one that comes a second or more later ends the program at
 * once. In between they are one signal: timeout(1) and terminals send it twice, to the program and
 * to its group.
 */
static void on_signal(int number)
{
    static struct timespec first;
    struct timespec now;

    clock_gettime(CLOCK_MONOTONIC, &now);
    if (caught == 0) {
        first = now;
        caught = number;
        ids_ctx_cancel(watched);
    } else if (now.tv_sec - first.tv_sec > 1) {
        if (unfinished != NULL) {
            unlink(unfinished);
        }
        signal(number, SIG_DFL);
        raise(number);
    }
}

/* A signal that is ignored already, as in a job of a script in the background, stays ignored. */
static void catch_signal(int number)
{
    struct sigaction action;
    struct sigaction old;

    memset(&action, 0, sizeof action);
    memset(&old, 0, sizeof old);
    action.sa_handler = on_signal;
    action.sa_flags = SA_RESTART;
    sigemptyset(&action.sa_mask);
    if (sigaction(number, NULL, &old) == 0 && old.sa_handler != SIG_IGN) {
        sigaction(number, &action, NULL);
    }
}

void interrupt_watch(ids_ctx *ctx)
{
    watched = ctx;
    if (ctx != NULL) {
        catch_signal(SIGINT);
        catch_signal(SIGTERM);
    }
}

void interrupt_removes(const char *name)
{
    unfinished = name;
}

bool interrupted(void)
{
    return caught != 0;
}
