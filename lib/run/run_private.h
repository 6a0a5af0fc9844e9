/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Runs: cells, their files, and the folder that holds them.
 */
#ifndef IDSI_RUN_PRIVATE_H
#define IDSI_RUN_PRIVATE_H

#include <idspan/run.h>

#include "../identity/identity_private.h"

#define IDSI_RUN_FILE "run.txt"
#define IDSI_PRESENTATION_FILE "presentation.pres"
#define IDSI_LOCK_FILE "lock"
#define IDSI_CELL_FILES "cell-" /* then the ID */
#define IDSI_FILE_MAX ((size_t)1 << 26) /* of what is read */

/* ---- checksums (sha256.c) ---------------------------------------------------------------- */

#define IDSI_SHA256_HEX 65u /* with the NUL */

void idsi_sha256(const char *bytes, size_t length, char hex[IDSI_SHA256_HEX]);

/* ---- records (record.c) ------------------------------------------------------------------ */

#define IDSI_RECORD_LINES 32u

typedef struct idsi_record {
    ids_ctx *ctx;
    char *text; /* what keys and values point into */
    size_t count;
    const char *key[IDSI_RECORD_LINES];
    const char *value[IDSI_RECORD_LINES];
} idsi_record;

ids_status idsi_record_begin(ids_ctx *ctx, const char *kind, idsi_text *text);
ids_status idsi_record_put(idsi_text *text, const char *key, const char *value);
ids_status idsi_record_put_number(idsi_text *text, const char *key, uint64_t value);
ids_status idsi_record_end(idsi_text *text);
/* On IDS_OK *wrong is NULL, or says what is wrong with the record. To be cleared in any case. */
ids_status idsi_record_read(ids_ctx *ctx, const char *kind, const char *text, size_t length,
                            idsi_record *record, const char **wrong);
void idsi_record_clear(idsi_record *record);
const char *idsi_record_get(const idsi_record *record, const char *key); /* NULL: not there */
bool idsi_record_get_number(const idsi_record *record, const char *key, uint64_t most,
                            uint64_t *number);

/* ---- the folder (folder.c, lock.c) ------------------------------------------------------- */

typedef struct idsi_folder {
    const char *path; /* for messages */
    int fd;           /* -1: closed */
    int lock;         /* -1: none */
} idsi_folder;

/* Opens a folder; with `make` it is made if it is not there, and is sure to stay. */
ids_status idsi_folder_open(ids_ctx *ctx, const char *folder, bool make, int *fd);
/* IDS_ERR_UNABLE when somebody else holds it, with the explanation. */
ids_status idsi_folder_lock(ids_ctx *ctx, idsi_folder *folder, bool alone);
void idsi_folder_close(idsi_folder *folder);
/* *bytes is NULL when there is no such file; else owned, with a NUL after it. */
ids_status idsi_folder_read(ids_ctx *ctx, const idsi_folder *folder, const char *name,
                            char **bytes, size_t *length);
/* The file is as it was or, on IDS_OK, the new one, which is sure to stay once the folder is
 * synced. */
ids_status idsi_folder_write(ids_ctx *ctx, const idsi_folder *folder, const char *name,
                             const char *bytes, size_t length);
ids_status idsi_folder_sync(ids_ctx *ctx, const idsi_folder *folder);
void idsi_folder_remove(const idsi_folder *folder, const char *name);
/* Whether some file has a name that begins so. */
ids_status idsi_folder_holds(ids_ctx *ctx, const idsi_folder *folder, const char *beginning,
                             bool *holds);
/* Takes away what processes that died were writing. */
void idsi_folder_sweep(const idsi_folder *folder);

/* Name of this machine, with letters, digits, dots and dashes only. */
void idsi_host(char host[IDS_RUN_NAME]);
/* The time, for people: UTC, as 2026-03-01T22:15:00Z. */
void idsi_now(char text[IDS_RUN_NAME]);

/* ---- the run ----------------------------------------------------------------------------- */

typedef struct idsi_cell {
    char id[2 * IDS_MAX_PARTITION_DEGREE + 8];
    uint32_t degree;
    bool whole;
    ids_partition partition;
    uint64_t dimension; /* of its module; 1 for a whole degree */
    ids_cell_state state;
    char message[256];
    ids_cell_result result;
    double seconds; /* estimated */
    uint64_t memory;
} idsi_cell;

struct ids_run {
    ids_ctx *ctx;
    idsi_folder folder;
    ids_run_access access;
    char *path;
    char *source;
    char *text;
    size_t length;
    ids_presentation *pres;
    ids_run_options options;
    char digest[IDSI_SHA256_HEX];
    char *version;
    char *libraries;
    char created[IDS_RUN_NAME];
    size_t prime_count;
    uint32_t *primes;
    uint64_t lower_memory; /* estimated */
    size_t cell_count;
    idsi_cell *cells;
};

/* ---- files (files.c) --------------------------------------------------------------------- */

/* SHA-256 of the operations and identities, as they are printed. */
ids_status idsi_run_digest(ids_ctx *ctx, const ids_presentation *pres,
                           char digest[IDSI_SHA256_HEX]);
/* The contents of run.txt. */
ids_status idsi_run_write(const ids_run *run, idsi_text *text);
/* Reads them into a run that is otherwise empty; *wrong as for records. The version is there if the
 * record has one, whatever else may be wrong. */
ids_status idsi_run_read(ids_run *run, const char *bytes, size_t length, const char **wrong);
/* The contents of a cell's file. */
ids_status idsi_cell_write(const ids_run *run, const idsi_cell *cell, idsi_text *text);
/* Reads them into the cell: its state becomes DONE or DAMAGED, with a message. */
ids_status idsi_cell_read(const ids_run *run, idsi_cell *cell, const char *bytes, size_t length);
ids_status idsi_failure_write(const ids_run *run, const idsi_cell *cell, idsi_text *text);
ids_status idsi_failure_read(const ids_run *run, idsi_cell *cell, const char *bytes,
                             size_t length);

/* ---- the question (question.c) ------------------------------------------------------------ */

/* Fills a run that is otherwise empty with what is asked. */
ids_status idsi_question_ask(ids_run *run, const char *text, size_t length, const char *source,
                             const ids_run_options *options);
/* Reads question and presentation from the run's folder; *wrong says why they are of no use.
 * Refuses a run of another version, unless it is only to be read. */
ids_status idsi_question_read(ids_run *run, bool *there, const char **wrong);
ids_status idsi_question_write(const ids_run *run);
/* Refuses unless the run that was found may go on as the one that is asked for. */
ids_status idsi_question_compare(const ids_run *found, const ids_run *asked);

/* ---- estimates (plan.c) ------------------------------------------------------------------ */

/* Time and memory for a partition with so many unknowns and tableaux, mod all primes. */
double idsi_cell_seconds(const ids_run *run, double unknowns, double tableaux);
double idsi_cell_memory(double unknowns, double tableaux);

/* ---- cells (cells.c) --------------------------------------------------------------------- */

/* Lists the cells of the run's degrees, all missing. */
ids_status idsi_cells_list(ids_run *run);
/* Reads the files of all cells. */
ids_status idsi_cells_load(ids_run *run);

#endif
