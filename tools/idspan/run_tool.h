/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * How `rank --run` spreads its cells over processes.
 *
 *     supervisor   holds the lock, shows progress, answers signals, writes the table; it computes
 *         |        nothing but the plan, so little can break it
 *       grower     computes the lower degrees, once, then gives out the cells of the top degree
 *       /    \
 *  worker    worker   copies of the grower, each computing one cell after the other
 *
 * A worker that breaks costs its cell: the grower marks it, starts another worker, and tries the
 * cell again at the end, alone. A grower that breaks is started again, alone. All of them share a
 * board, which is memory that survives any of them.
 */
#ifndef RUN_TOOL_H
#define RUN_TOOL_H

#include <stdatomic.h>
#include <sys/types.h>

#include "tool.h"

#define BOARD_TEXT 400u

typedef enum cell_mark {
    MARK_UNWANTED = 0, /* there already, or not asked for */
    MARK_WAITING,
    MARK_RUNNING,
    MARK_AGAIN, /* failed once */
    MARK_DONE,
    MARK_FAILED
} cell_mark;

typedef struct board_cell {
    atomic_int mark;
    atomic_int failures;
    double seconds; /* estimate */
    uint64_t memory;
    double started; /* on the clock of now_seconds() */
    char message[BOARD_TEXT]; /* of the last failure; complete before `failures` says so */
} board_cell;

typedef struct board {
    size_t bytes;
    atomic_uint growing;  /* the degree that the grower computes; 0: none */
    _Atomic double grown; /* share of all lower degrees */
    _Atomic uint64_t base; /* bytes of the lower degrees */
    char message[BOARD_TEXT]; /* why the grower gave up */
    size_t count;
    board_cell cells[];
} board;

/* What a grower comes to, as its exit status. */
enum { GROWER_DONE = 0, GROWER_STUCK = 10, GROWER_NO_DISK = 11 };
/* What a worker comes to when a cell fails; GROWER_NO_DISK when it cannot be stored. */
enum { WORKER_FAILED = 20 };

/* ---- run_board.c --------------------------------------------------------------------- */

board *board_create(size_t cells);
void board_free(board *b);
double now_seconds(void);
/* "60 cells ..." for people, while the work goes on or when SIGUSR1 asks. */
typedef struct monitor {
    const board *b;
    const ids_run *run;
    bool by_partition;
    double start;
    double spoken; /* when the last plain line was printed */
    int *seen;     /* failures of each cell that were reported */
} monitor;

bool monitor_open(monitor *m, const board *b, const ids_run *run);
void monitor_close(monitor *m);
/* Shows how far it is, now and then; `asked`: at once and in full. */
void monitor_show(monitor *m, bool asked);

/* ---- run_process.c ------------------------------------------------------------------- */

/* Limits the memory of this process to what the budget leaves, and ties its life to its parent. */
void crew_settle(const session *s, pid_t parent);
/* Notes a failure for those who look at the run later. */
void note_failure(ids_run *run, size_t cell, const char *reason);

/* ---- run_crew.c ---------------------------------------------------------------------- */

/* What a grower is told. */
typedef struct crew_orders {
    session *s;
    ids_run *run;
    board *b;
    uint32_t top;  /* the largest degree with a cell that waits */
    uint32_t jobs; /* workers at a time */
} crew_orders;

/* The life of a grower, in its own process. @return its exit status. */
int crew_main(const crew_orders *orders);
/* Limits the memory of this process to what the budget leaves, and ties its life to its parent. */
void crew_settle(const session *s, pid_t parent);

void note_failure(ids_run *run, size_t cell, const char *reason);

/* ---- run_work.c ---------------------------------------------------------------------- */

/* Does all cells that wait on the board. IDS_OK also when some have failed. */
ids_status run_work(session *s, ids_run *run, board *b, uint32_t jobs);

#endif
