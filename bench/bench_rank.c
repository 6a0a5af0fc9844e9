/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * bench_rank [SECONDS [FILE.pres DEGREE] ...]
 * bench_rank --export FILE.pres DEGREE MATRIX
 *
 * The rank table of the monomial engine, degrees 1 to DEGREE with one prime, on one thread and on
 * two: lines as in timing.h (`cpu` for the time of the processor, `wall` for that of the clock),
 * then what the last degree's elimination was like: most bytes held, rows, columns, rank, deferred
 * rows, entries of the sparse rules, and pivots of the dense finish with their share of all. Both
 * take turns until the times are narrow or SECONDS (10) are over, at least once.
 *
 * --export writes the matrix of the last degree's quotient step mod the same prime as text: a line
 * "rows columns M", a line "row column value" for each entry, counted from 1, and "0 0 0".
 */
#include <stdint.h>
#include <string.h>

#include <idspan/idspan.h>

#include "engine/engine_private.h"
#include "timing.h"

#define PRIME 1073741789u

static void fail(ids_ctx *ctx, const char *what)
{
    fprintf(stderr, "bench_rank: %s: %s\n", what, ids_ctx_message(ctx));
    exit(EXIT_FAILURE);
}

static ids_presentation *read_presentation(ids_ctx *ctx, const char *path)
{
    static char text[1u << 20];
    ids_presentation *presentation = NULL;
    FILE *file = fopen(path, "rb");
    size_t length = file == NULL ? 0 : fread(text, 1, sizeof text, file);

    if (file == NULL || fclose(file) != 0) {
        fprintf(stderr, "bench_rank: %s cannot be read\n", path);
        exit(EXIT_FAILURE);
    }
    if (ids_presentation_read(ctx, text, length, path, &presentation) != IDS_OK) {
        fail(ctx, path);
    }
    return presentation;
}

/* ---- times ----------------------------------------------------------------------------------- */

/* The tower up to a degree; returns what the last elimination was like. */
static idsi_result grow(ids_ctx *ctx, const ids_presentation *presentation, uint32_t degree)
{
    static idsi_tower tower;
    idsi_laws *laws = NULL;
    idsi_level level = {0};
    idsi_rows *rows = NULL;
    idsi_result result = {0};
    ids_status st = idsi_laws_create(ctx, presentation, &laws);

    if (st == IDS_OK) {
        idsi_tower_init(&tower, ctx, laws, PRIME);
    }
    while (st == IDS_OK && tower.height + 1 < degree) {
        st = idsi_tower_grow(&tower, true);
    }
    if (st == IDS_OK) {
        st = idsi_level_plan(&tower, &level);
    }
    if (st == IDS_OK) {
        st = idsi_rows_create(&tower, &level, &rows);
    }
    if (st == IDS_OK) {
        idsi_matrix matrix = {.ctx = ctx,
                              .prime = PRIME,
                              .columns = (uint32_t)level.columns,
                              .pieces = idsi_rows_pieces(rows),
                              .piece = idsi_rows_piece,
                              .source_user = rows};
        st = idsi_eliminate(&matrix, &tower.random, &result);
        result.echelon = NULL;
    }
    if (st != IDS_OK) {
        fail(ctx, "rank");
    }
    idsi_rows_free(rows);
    idsi_level_clear(ctx, &level);
    idsi_tower_clear(&tower);
    idsi_laws_free(laws);
    return result;
}

static idsi_result run(const char *path, uint32_t degree, uint32_t threads, timing *cpu,
                       timing *wall, uint64_t *peak)
{
    ids_ctx_options options = {.struct_size = sizeof options, .threads = threads};
    double cpu_begin = timing_now(CLOCK_PROCESS_CPUTIME_ID);
    double wall_begin = timing_now(CLOCK_MONOTONIC);
    ids_ctx *ctx = NULL;

    if (ids_ctx_create(&options, &ctx) != IDS_OK) {
        exit(EXIT_FAILURE);
    }
    ids_presentation *presentation = read_presentation(ctx, path);
    idsi_result result = grow(ctx, presentation, degree);
    timing_add(cpu, timing_now(CLOCK_PROCESS_CPUTIME_ID) - cpu_begin);
    timing_add(wall, timing_now(CLOCK_MONOTONIC) - wall_begin);
    *peak = ids_ctx_memory(ctx).peak;
    ids_presentation_free(presentation);
    ids_ctx_free(ctx);
    return result;
}

static void report(const char *name, const char *way, timing *t)
{
    char line[256];

    (void)snprintf(line, sizeof line, "%s_%s", name, way);
    (void)timing_print(line, t);
}

static void measure(const char *path, uint32_t degree, double seconds)
{
    static timing cpu;
    static timing one;
    static timing two;
    static timing unused;
    char name[160];
    const char *base = strrchr(path, '/');
    double end = timing_now(CLOCK_MONOTONIC) + seconds;
    idsi_result result = {0};
    idsi_result shared = {0};
    uint64_t peak = 0;
    uint64_t shared_peak = 0;

    cpu.runs = one.runs = two.runs = 0;
    base = base == NULL ? path : base + 1;
    (void)snprintf(name, sizeof name, "rank_%.100s_%u", base, (unsigned)degree);
    while (timing_goes_on(&cpu, end)) {
        unused.runs = 0;
        result = run(path, degree, 1, &cpu, &one, &peak);
        shared = run(path, degree, 2, &unused, &two, &shared_peak);
    }
    report(name, "one_thread_cpu", &cpu);
    report(name, "one_thread_wall", &one);
    report(name, "two_threads_wall", &two);
    printf("%s_one_to_two_threads\t%.2f\n", name, one.times[0] / two.times[0]);
    printf("%s_peak_bytes\t%llu\n", name, (unsigned long long)peak);
    printf("%s_rows\t%llu\n", name, (unsigned long long)result.rows);
    printf("%s_rank\t%llu\n", name, (unsigned long long)result.rank);
    printf("%s_deferred_rows\t%llu\n", name, (unsigned long long)result.deferred);
    printf("%s_fill\t%llu\n", name, (unsigned long long)result.fill);
    printf("%s_dense_pivots\t%llu\n", name, (unsigned long long)result.dense_rank);
    printf("%s_dense_share\t%.3f\n", name,
           result.rank == 0 ? 0 : (double)result.dense_rank / (double)result.rank);
    printf("%s_dense_rows_and_width\t%llu\t%llu\n", name, (unsigned long long)result.dense_rows,
           (unsigned long long)result.dense_width);
    if (result.rank != shared.rank) {
        fprintf(stderr, "bench_rank: two threads give another rank\n");
        exit(EXIT_FAILURE);
    }
}

/* ---- export ---------------------------------------------------------------------------------- */

typedef struct export
{
    FILE *file; /* NULL: rows are only counted */
    uint64_t rows;
}
export;

static ids_status export_row(void *user, const idsi_entry *row, size_t count)
{
    export *to = user;

    to->rows++;
    for (size_t i = 0; to->file != NULL && i < count; i++) {
        fprintf(to->file, "%llu %lu %lu\n", (unsigned long long)to->rows,
                (unsigned long)row[i].column + 1, (unsigned long)row[i].value);
    }
    return IDS_OK;
}

static int export_matrix(const char *path, uint32_t degree, const char *target)
{
    static idsi_tower tower;
    ids_ctx *ctx = NULL;
    idsi_laws *laws = NULL;
    idsi_level level = {0};
    export to = {0};

    if (ids_ctx_create(NULL, &ctx) != IDS_OK) {
        return EXIT_FAILURE;
    }
    ids_presentation *presentation = read_presentation(ctx, path);
    ids_status st = idsi_laws_create(ctx, presentation, &laws);
    if (st == IDS_OK) {
        idsi_tower_init(&tower, ctx, laws, PRIME);
    }
    while (st == IDS_OK && tower.height + 1 < degree) {
        st = idsi_tower_grow(&tower, true);
    }
    if (st == IDS_OK) {
        st = idsi_level_plan(&tower, &level);
    }
    if (st == IDS_OK) {
        st = idsi_rows_each(&tower, &level, export_row, &to);
    }
    FILE *file = st == IDS_OK ? fopen(target, "w") : NULL;
    if (file == NULL) {
        fail(ctx, target);
    }
    fprintf(file, "%llu %llu M\n", (unsigned long long)to.rows, (unsigned long long)level.columns);
    to = (export){file, 0};
    st = idsi_rows_each(&tower, &level, export_row, &to);
    fprintf(file, "0 0 0\n");
    if (fclose(file) != 0 || st != IDS_OK) {
        fail(ctx, target);
    }
    idsi_level_clear(ctx, &level);
    idsi_tower_clear(&tower);
    idsi_laws_free(laws);
    ids_presentation_free(presentation);
    ids_ctx_free(ctx);
    return EXIT_SUCCESS;
}

int main(int argc, char **argv)
{
    double seconds = argc > 1 ? strtod(argv[1], NULL) : 10;

    if (argc == 5 && strcmp(argv[1], "--export") == 0) {
        return export_matrix(argv[2], (uint32_t)strtoul(argv[3], NULL, 10), argv[4]);
    }
    if (argc < 4) {
        measure(BENCH_VARIETIES "/jordan.pres", 7, seconds);
        measure(BENCH_VARIETIES "/jordan.pres", 8, seconds);
        measure(BENCH_VARIETIES "/square-zero-squares.pres", 8, seconds);
        measure(BENCH_VARIETIES "/square-zero-squares.pres", 9, seconds);
    }
    for (int i = 2; i + 1 < argc; i += 2) {
        measure(argv[i], (uint32_t)strtoul(argv[i + 1], NULL, 10), seconds);
    }
    return EXIT_SUCCESS;
}
