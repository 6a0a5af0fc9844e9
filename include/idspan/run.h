/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file run.h
 * Runs: a rank table in progress, kept in a folder so that it survives the process.
 *
 * A run is one question (a presentation, degrees, by partition or not, primes, seed) cut into
 * cells that can be computed independently: a partition of a degree, or a whole degree. The folder
 * has
 *
 *     run.txt             the question: digest of the presentation, version, degrees, primes, seed
 *     presentation.pres   the presentation, as it was given
 *     cell-ID.txt         a finished cell: result, time, memory, place
 *     failed-ID.txt       a cell that could not be computed, and why
 *     lock                who works in it
 *
 * All but the lock are text files that end in a line with the SHA-256 of what stands before (the
 * presentation's is in run.txt). They are written under another name, synced, and renamed, so
 * that a file is either complete or damaged by something else than an interruption; damage is
 * found by the checksum. Clocks play no part but for people to read.
 *
 * The ID of a cell is its degree, or its degree, a dot and the partition: "7", "7.4+2+1".
 *
 * The library never starts a process. One process can prepare a degree with ids_run_work_grow()
 * and then be copied, with fork(), for the cells of that degree; tools/idspan does that.
 */
#ifndef IDSPAN_RUN_H
#define IDSPAN_RUN_H

#include <idspan/answer.h>

#ifdef __cplusplus
extern "C" {
#endif

/** An open run folder. One thread at a time. */
typedef struct ids_run ids_run;

/** What somebody who opens a run may do, and who else may be there. */
typedef enum ids_run_access {
    IDS_RUN_READ = 0,   /**< look only; needs no right to write and keeps nobody out */
    IDS_RUN_SHARED = 1, /**< store cells, beside others who do the same */
    IDS_RUN_ALONE = 2   /**< store cells, with nobody else storing any */
} ids_run_access;

/** The question; set struct_size, the rest to 0 for the defaults. */
typedef struct ids_run_options {
    size_t struct_size; /**< sizeof(ids_run_options) */
    uint32_t from;      /**< first degree, at least 1 */
    uint32_t to;        /**< last degree, at most IDS_MAX_DEGREE, by partition at most 16 */
    bool by_partition;  /**< a cell a partition; else a cell a degree */
    uint32_t primes;    /**< number of random primes, at most IDS_MAX_PRIMES; 0: one */
    uint64_t seed;      /**< seed that the primes are drawn from */
    bool exact;         /**< prove the ranks; not by partition */
    uint32_t field;     /**< a prime: ranks over GF(p); not by partition, nor with `exact`; 0: Q */
} ids_run_options;

/**
 * Makes a run in a folder, or takes one up again.
 *
 * A folder that does not exist is made (one level). If it holds a run already, that must be of the
 * same presentation (operations and identities; names, comments and candidates do not count),
 * version of the library, primes and seed, and of the same degrees; with IDS_RUN_ALONE the degrees
 * can also be more than before, and are then added. A run.txt or presentation.pres that is damaged
 * or not there is written again, unless there are cells of which none belongs to the run that is
 * asked for. What interrupted processes left behind is taken away.
 *
 * @param ctx      borrowed now, kept.
 * @param folder   borrowed.
 * @param text     borrowed: the presentation, `length` bytes.
 * @param length   bytes of text.
 * @param source   borrowed: name of the text for messages; NULL: "input".
 * @param options  borrowed.
 * @param access   IDS_RUN_SHARED or IDS_RUN_ALONE; others are kept out until ids_run_free().
 * @param run      out, owned: ids_run_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degrees, struct_size, options that exclude each other; or the
 *                            folder holds another run: the message says what differs
 *         IDS_ERR_UNABLE     somebody else works in the folder: the message says who
 *         IDS_ERR_IO         the system refused something: the message says what and why
 *         IDS_ERR_PARSE      the presentation, as ids_presentation_read()
 *         IDS_ERR_DOMAIN     likewise
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget, a limit of presentations
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: reads all files of the folder. Threads: one a ctx.
 * Cancel: polled while the presentation is read. Border: GMP (numbers as they are read).
 * Source: SHA-256, FIPS 180-4. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_create(ids_ctx *ctx, const char *folder, const char *text,
                                               size_t length, const char *source,
                                               const ids_run_options *options,
                                               ids_run_access access, ids_run **run);

/**
 * Opens a run that is there, finished or not.
 *
 * @param ctx     borrowed now, kept.
 * @param folder  borrowed.
 * @param access  what for; IDS_RUN_SHARED and IDS_RUN_ALONE also want the same version.
 * @param run     out, owned: ids_run_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG     NULL, another version
 *         IDS_ERR_PARSE   run.txt or presentation.pres is damaged; among that, the primes are not
 *                         those that the seed gives
 *         IDS_ERR_UNABLE  somebody else works in it
 *         IDS_ERR_IO      no such run, or the system refused something
 *         IDS_ERR_NOMEM   the allocator refused
 *         IDS_ERR_LIMIT   byte budget
 * Cost: reads all files of the folder. Threads: one a ctx. Cancel: not polled.
 * Border: GMP (numbers as they are read). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_open(ids_ctx *ctx, const char *folder,
                                             ids_run_access access, ids_run **run);

/**
 * Closes a run and lets others in.
 *
 * @param run  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `run` any more.
 * Since: 0.1
 */
IDS_API void ids_run_free(ids_run *run);

/**
 * Reads the cells again, which other processes may have stored.
 *
 * @param run  borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_IO     the system refused something
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: reads all files of the folder. Threads: one a run. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_refresh(ids_run *run);

/** What is known of a run. Strings and the presentation are borrowed from it. */
typedef struct ids_run_info {
    const char *folder;                    /**< as it was opened */
    const char *source;                    /**< name of the presentation, as it was given */
    const char *text;                      /**< the presentation as text, NUL at its end */
    size_t length;                         /**< bytes of text */
    const ids_presentation *presentation;  /**< the same, read */
    const char *digest;                    /**< SHA-256 of operations and identities, in hex */
    const char *version;                   /**< of idspan */
    const char *libraries;                 /**< GMP and FLINT with their versions */
    const char *created;                   /**< "2026-03-01T22:15:00Z", for people */
    ids_run_options options;               /**< the question; `primes` is not 0 over Q */
    bool weakened;                         /**< as ids_rank_table_weakened() says */
    uint64_t lower_memory;                 /**< estimated bytes of the lower degrees that the last
                                                one needs, once ids_run_plan() was called */
    size_t done;                           /**< cells that are finished */
    size_t damaged;                        /**< cells whose file is damaged */
    size_t failed;                         /**< cells that could not be computed */
} ids_run_info;

/**
 * Describes a run.
 *
 * @param run   borrowed.
 * @param info  out, written only on IDS_OK; what it points to is borrowed from the run.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL
 * Cost: constant, no allocation. Threads: one a run. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_describe(const ids_run *run, ids_run_info *info);

/**
 * Number of primes that the run works modulo.
 *
 * @param run  borrowed; NULL gives 0.
 * @return how many; 0 over a field of its own.
 * Cost: constant, no allocation. Threads: one a run. Since: 0.1
 */
IDS_API size_t ids_run_prime_count(const ids_run *run);

/**
 * One of the primes that the run works modulo.
 *
 * @param run    borrowed; NULL gives 0.
 * @param index  0 .. ids_run_prime_count()-1.
 * @return the prime; 0 when the index is out of range.
 * Cost: constant, no allocation. Threads: one a run. Since: 0.1
 */
IDS_API uint32_t ids_run_prime(const ids_run *run, size_t index);

/* ---- cells ----------------------------------------------------------------------------------- */

/** How far a cell is. */
typedef enum ids_cell_state {
    IDS_CELL_MISSING = 0, /**< not computed yet */
    IDS_CELL_DONE = 1,    /**< finished, and its file is in order */
    IDS_CELL_DAMAGED = 2, /**< its file is not in order: to be computed again */
    IDS_CELL_FAILED = 3   /**< it was tried and could not be computed; it can be tried again */
} ids_cell_state;

/** Room for the name of a host or a time, with the NUL. */
#define IDS_RUN_NAME 64u

/** What a cell came to. */
typedef struct ids_cell_result {
    uint64_t free;               /**< multiplicity, or dimension, in the free algebra */
    uint64_t quotient;           /**< and in the quotient */
    ids_certainty certainty;     /**< what `quotient` claims */
    double error;                /**< for MODULAR: probability that it is too large, at most this */
    uint32_t bits;               /**< and 2^-bits is at least that */
    double seconds;              /**< processor time that the cell took */
    uint64_t memory;             /**< most bytes that the process had while it was computed */
    char host[IDS_RUN_NAME];     /**< where; written by ids_run_store() */
    char finished[IDS_RUN_NAME]; /**< when, "2026-03-01T22:15:00Z"; written by ids_run_store() */
} ids_cell_result;

/** A cell. Strings are borrowed from the run, until ids_run_refresh(). */
typedef struct ids_cell {
    const char *id;          /**< "7.4+2+1", or "7" for a whole degree */
    uint32_t degree;         /**< n */
    bool whole;              /**< the whole degree; `partition` is then empty */
    ids_partition partition; /**< of n */
    ids_cell_state state;    /**< how far it is */
    const char *message;     /**< DAMAGED: what is wrong; FAILED: why; else "" */
    ids_cell_result result;  /**< DONE: what it came to */
    double seconds;          /**< estimated time, once ids_run_plan() was called; rough */
    uint64_t memory;         /**< estimated bytes beside those of the lower degrees, likewise */
} ids_cell;

/**
 * Number of cells: by degree, and in a degree in the order of ids_partition_rank().
 *
 * @param run  borrowed; NULL gives 0.
 * @return number of cells.
 * Cost: constant, no allocation. Threads: one a run. Since: 0.1
 */
IDS_API size_t ids_run_cell_count(const ids_run *run);

/**
 * Describes a cell.
 *
 * @param run    borrowed.
 * @param index  0 .. ids_run_cell_count()-1.
 * @param cell   out, written only on IDS_OK; its strings are borrowed from the run.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range
 * Cost: constant, no allocation. Threads: one a run. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_cell(const ids_run *run, size_t index, ids_cell *cell);

/**
 * Index of the cell with an ID.
 *
 * @param run    borrowed.
 * @param id     borrowed.
 * @param index  out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, no such cell: the message says so
 * Cost: linear in the cells, no allocation. Threads: one a run. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_cell_find(const ids_run *run, const char *id,
                                                  size_t *index);

/* ---- the table ------------------------------------------------------------------------------- */

/** One row of the table: a cell, or the total of a degree that is split by partition. */
typedef struct ids_run_line {
    ids_partition_row row; /**< as in a finished table; numbers are 0 unless state is DONE */
    ids_cell_state state;  /**< of a total: DONE when all its cells are, else MISSING */
    size_t cell;           /**< index of the cell; SIZE_MAX for a total over several */
} ids_run_line;

/**
 * Number of rows of the table, finished or not: a row a cell and, by partition, a total a degree.
 *
 * A finished one has the rows of ids_partition_table_create(), or of ids_rank_table_create() with
 * `total` set; there `bits` can differ a little, as each degree is the last of its table.
 *
 * @param run  borrowed; NULL gives 0.
 * @return number of rows.
 * Cost: constant, no allocation. Threads: one a run. Since: 0.1
 */
IDS_API size_t ids_run_line_count(const ids_run *run);

/**
 * A row of the table.
 *
 * @param run    borrowed.
 * @param index  0 .. ids_run_line_count()-1.
 * @param line   out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, index out of range
 *         IDS_ERR_LIMIT  a total of more than 64 bits
 * Cost: linear in the cells of the degree, no allocation. Threads: one a run. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_line_get(const ids_run *run, size_t index,
                                                 ids_run_line *line);

/* ---- work ------------------------------------------------------------------------------------ */

/**
 * Estimates time and memory of every cell, for ids_cell.seconds and ids_cell.memory.
 *
 * The lowest degrees are computed, which takes some tenths of a second at most, and
 * the dimensions of the others are extrapolated.
 *
 * @param run  borrowed.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget; if it was reached after some degrees, the estimates are
 *                            there, extrapolated from fewer
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: as a rank table of the lowest degrees. Threads: one a run. Cancel: polled.
 * Border: GMP (coefficients of the identities). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_plan(ids_run *run);

/** What the cells of a run are computed with: by partition, the lower degrees. */
typedef struct ids_run_work ids_run_work;

/**
 * Prepares to compute cells of degrees up to `top`.
 *
 * @param run   kept: must outlive the work; its context serves both.
 * @param top   a degree of the run.
 * @param work  out, owned: ids_run_work_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, `top` out of range
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: the identities are compiled. Threads: one a run. Cancel: polled.
 * Border: GMP (coefficients of the identities). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_work_create(ids_run *run, uint32_t top,
                                                    ids_run_work **work);

/**
 * By partition: computes all that cells of a degree need, which includes the cells of all lower
 * degrees. Otherwise nothing. Calls with growing degrees go on where the last one ended.
 *
 * @param work    borrowed.
 * @param degree  1 .. top.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, degree out of range
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: as ids_partition_table_create() for the lower degrees, once a prime.
 * Threads: up to the context's number. Cancel: polled. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_work_grow(ids_run_work *work, uint32_t degree);

/**
 * As the estimate of ids_run_plan(), for a cell whose lower degrees are there: `memory` is what
 * the elimination takes at most.
 *
 * @param work     borrowed.
 * @param cell     index of a cell whose degree is at most `top`.
 * @param seconds  out, written only on IDS_OK.
 * @param memory   out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, out of range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: no more than the sizes of the spaces. Threads: one a run. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_work_estimate(ids_run_work *work, size_t cell,
                                                      double *seconds, uint64_t *memory);

/**
 * Computes a cell, after the lower degrees if they are not there.
 *
 * The result depends on the question alone: not on the other cells that were computed with `work`,
 * nor on threads. `memory` is the context's peak. The error bound of a whole degree (`error`,
 * `bits`) also depends a little on the byte budget.
 *
 * @param work    borrowed.
 * @param cell    index of a cell whose degree is at most `top`.
 * @param result  out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, out of range
 *         IDS_ERR_UNABLE     `exact`: the coefficients do not fit the proof
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget, as ids_rank_table_create() and
 *                            ids_partition_table_create()
 *         IDS_ERR_CANCELLED  cancelled
 *         IDS_ERR_INTERNAL   the numbers contradict each other: never, please report it
 * Cost: as the cell of ids_rank_table_create() or ids_partition_table_create().
 * Threads: up to the context's number. Cancel: polled.
 * Border: FLINT, GMP, as ids_rank_table_create(). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_work_cell(ids_run_work *work, size_t cell,
                                                  ids_cell_result *result);

/**
 * Frees what cells are computed with.
 *
 * @param work  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `work` any more.
 * Since: 0.1
 */
IDS_API void ids_run_work_free(ids_run_work *work);

/**
 * Puts a finished cell on disk, and takes a note of its failure away. When the call has returned
 * IDS_OK the cell survives a crash of the system.
 *
 * @param run     borrowed; opened with IDS_RUN_SHARED or IDS_RUN_ALONE.
 * @param cell    index of the cell.
 * @param result  borrowed; host and time are filled in anew.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, index out of range, a run that is open for reading
 *         IDS_ERR_IO     the message says why; if the folder could not be synced, the cell is there
 *                        and DONE, but may not survive a crash
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: a file is written, and it and the folder are synced. Threads: one a run. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_store(ids_run *run, size_t cell,
                                              const ids_cell_result *result);

/**
 * Notes on disk that a cell could not be computed.
 *
 * @param run     borrowed; opened with IDS_RUN_SHARED or IDS_RUN_ALONE.
 * @param cell    index of the cell.
 * @param reason  borrowed; one line; a longer one is cut.
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, index out of range, a run that is open for reading
 *         IDS_ERR_IO     the message says why
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: a file is written and synced. Threads: one a run. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_run_store_failure(ids_run *run, size_t cell,
                                                      const char *reason);

#ifdef __cplusplus
}
#endif

#endif
