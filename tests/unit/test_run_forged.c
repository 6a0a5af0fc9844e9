/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * lib/run: files with right checksums that do not say what they should, as another version, another
 * run or somebody's editor may leave them.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "run/run_private.h"
#include "run_support.h"
#include "support.h"

static const char jordan[] = "operation a*b commutative\nidentity ((x*x)*y)*x = (x*x)*(y*x)\n";
static const char nil[] = "operation a*b commutative\nidentity (x*x)*x = 0\n";

/* A run with its cells all stored; what they came to plays no part here. */
static void make_run(ids_ctx *ctx, const char *text, ids_run_options options)
{
    ids_run *run = NULL;
    ids_cell_result result = {.free = 1, .quotient = 1};

    run_make_folder();
    TEST_OK(ctx, run_start(ctx, text, options, IDS_RUN_ALONE, &run));
    for (size_t i = 0; i < ids_run_cell_count(run); i++) {
        TEST_OK(ctx, ids_run_store(run, i, &result));
    }
    ids_run_free(run);
}

static size_t count_done(const ids_run *run)
{
    ids_run_info info;

    ck_assert_int_eq(ids_run_describe(run, &info), IDS_OK);
    return info.done;
}

/* ---- forging --------------------------------------------------------------------------------- */

static size_t read_file(const char *name, char *bytes, size_t most)
{
    char path[128];
    snprintf(path, sizeof path, "%s/%s", run_folder, name);
    FILE *file = fopen(path, "rb");
    ck_assert_ptr_nonnull(file);
    size_t length = fread(bytes, 1, most - 1, file);
    ck_assert_int_eq(fclose(file), 0);
    bytes[length] = '\0';
    return length;
}

static void write_file(const char *name, const char *bytes, size_t length)
{
    char path[128];
    snprintf(path, sizeof path, "%s/%s", run_folder, name);
    FILE *file = fopen(path, "wb");
    ck_assert_ptr_nonnull(file);
    ck_assert_uint_eq(fwrite(bytes, 1, length, file), length);
    ck_assert_int_eq(fclose(file), 0);
}

/* Gives a key of a record another value, and the record its checksum. */
static void forge(const char *name, const char *key, const char *value)
{
    char old[4096];
    char made[4096];
    char start_of_line[64];
    char sum[IDSI_SHA256_HEX];

    read_file(name, old, sizeof old);
    snprintf(start_of_line, sizeof start_of_line, "\n%s: ", key);
    char *at = strstr(old, start_of_line);
    char *end = strstr(old, "sha256: ");
    ck_assert(at != NULL && end != NULL);
    char *rest = strchr(at + 1, '\n');
    int length = snprintf(made, sizeof made, "%.*s%s%s%.*s", (int)(at - old), old, start_of_line,
                          value, (int)(end - rest), rest);
    ck_assert(length > 0 && length + 80 < (int)sizeof made);
    idsi_sha256(made, (size_t)length, sum);
    length += snprintf(made + length, sizeof made - (size_t)length, "sha256: %s\n", sum);
    write_file(name, made, (size_t)length);
}

/* Another presentation, of which run.txt knows. */
static void forge_presentation(const char *text)
{
    char sum[IDSI_SHA256_HEX];

    idsi_sha256(text, strlen(text), sum);
    write_file("presentation.pres", text, strlen(text));
    forge("run.txt", "text", sum);
}

/* ---- another version ------------------------------------------------------------------------- */

/* What a later version writes may make no sense to this one: the version is what it is told. */
START_TEST(test_other_version)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;

    make_run(ctx, jordan, run_question(1, 3));
    forge("run.txt", "version", "9.9");
    TEST_OK(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run));
    ids_run_free(run);
    for (int round = 0; round < 2; round++) {
        if (round == 0) {
            forge_presentation("operation a*b of a kind that comes later\n");
        } else {
            forge("run.txt", "by", "something new");
        }
        TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_SHARED, &run), IDS_ERR_ARG);
        ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "is one of idspan 9.9, this is"));
        TEST_STATUS(ctx, run_start(ctx, jordan, run_question(1, 3), IDS_RUN_ALONE, &run),
                    IDS_ERR_ARG);
        ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "is one of idspan 9.9, this is"));
        TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    }
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* ---- a question that is damaged -------------------------------------------------------------- */

/* Spoils or removes what says which question the cells belong to. */
static void spoil(int how)
{
    char bytes[4096];
    char path[64];
    size_t length = read_file(how == 2 ? "presentation.pres" : "run.txt", bytes, sizeof bytes);

    bytes[length / 2] ^= 1;
    if (how == 0) {
        snprintf(path, sizeof path, "%s/run.txt", run_folder);
        ck_assert_int_eq(remove(path), 0);
    } else {
        write_file(how == 2 ? "presentation.pres" : "run.txt", bytes, length);
    }
}

/* Cells are not given up for another question because their own cannot be read. */
START_TEST(test_cells_without_question)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_run_options seeded = run_question(1, 3);
    ids_run_options whole = run_question(1, 3);
    ids_run_access access = _i % 2 == 0 ? IDS_RUN_SHARED : IDS_RUN_ALONE;

    seeded.seed = 1;
    whole.by_partition = false;
    make_run(ctx, jordan, run_question(1, 3));
    spoil(_i / 2);
    TEST_STATUS(ctx, run_start(ctx, nil, run_question(1, 3), access, &run), IDS_ERR_ARG);
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "none of the cells"));
    TEST_STATUS(ctx, run_start(ctx, jordan, seeded, access, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, run_start(ctx, jordan, whole, access, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, run_start(ctx, jordan, run_question(4, 5), access, &run), IDS_ERR_ARG);
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run),
                _i / 2 == 0 ? IDS_ERR_IO : IDS_ERR_PARSE);
    TEST_OK(ctx, run_start(ctx, jordan, run_question(2, 5), access, &run));
    ck_assert_uint_eq(count_done(run), 5);
    ids_run_free(run);
    TEST_OK(ctx, ids_run_open(ctx, run_folder, access, &run));
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* One cell that fits is enough; the others are to be computed again. */
START_TEST(test_one_cell_fits)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_cell cell;

    make_run(ctx, jordan, run_question(1, 3));
    spoil(1);
    for (int k = 0; k < 5; k++) {
        static const char *const names[] = {"cell-1.1.txt", "cell-2.2.txt", "cell-2.1+1.txt",
                                            "cell-3.3.txt", "cell-3.2+1.txt"};
        forge(names[k], "seed", "1");
    }
    TEST_OK(ctx, run_start(ctx, jordan, run_question(1, 3), IDS_RUN_ALONE, &run));
    ck_assert_uint_eq(count_done(run), 1);
    TEST_OK(ctx, ids_run_cell(run, 0, &cell));
    ck_assert_int_eq(cell.state, IDS_CELL_DAMAGED);
    ck_assert_ptr_nonnull(strstr(cell.message, "another run"));
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* Where there are no cells there is nothing to lose. */
START_TEST(test_no_cells)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;

    run_make_folder();
    TEST_OK(ctx, run_start(ctx, jordan, run_question(1, 3), IDS_RUN_ALONE, &run));
    ids_run_free(run);
    spoil(1);
    TEST_OK(ctx, run_start(ctx, nil, run_question(1, 4), IDS_RUN_SHARED, &run));
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* ---- primes ---------------------------------------------------------------------------------- */

/* Primes are what count and seed give, or the certainty that goes with them is none. 1000000005 is
 * divisible by 3; 1000000007 is prime (both are common practice, no source). */
START_TEST(test_primes)
{
    static const char *const forged[] = {"1000000005", "1000000007", "7",          "none",
                                         "0",          "",           "4294967297", "junk"};
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    char own[32];
    char twice[64];

    make_run(ctx, jordan, run_question(1, 1));
    TEST_OK(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run));
    snprintf(own, sizeof own, "%u", (unsigned)ids_run_prime(run, 0));
    ids_run_free(run);
    for (size_t i = 0; i < sizeof forged / sizeof *forged; i++) {
        forge("run.txt", "primes", forged[i]);
        forge("cell-1.1.txt", "primes", forged[i]);
        TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_ALONE, &run), IDS_ERR_PARSE);
        ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "is damaged"));
    }
    ck_assert_ptr_nonnull(strstr(ids_ctx_message(ctx), "primes are not those"));
    snprintf(twice, sizeof twice, "%s %s", own, own);
    forge("run.txt", "primes", twice);
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    snprintf(twice, sizeof twice, "%s ", own);
    forge("run.txt", "primes", twice);
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    forge("run.txt", "primes", own);
    TEST_OK(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run));
    ids_run_free(run);
    forge("run.txt", "seed", "1");
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* The same for the field of a run over one, and for what excludes it. */
START_TEST(test_field)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_run_options options = run_question(1, 2);

    options.by_partition = false;
    options.field = 5;
    make_run(ctx, jordan, options);
    forge("run.txt", "field", "6");
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    forge("run.txt", "field", "1073741827"); /* a prime above 2^30, from memory */
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    forge("run.txt", "field", "5");
    forge("run.txt", "exact", "1");
    TEST_STATUS(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run), IDS_ERR_PARSE);
    forge("run.txt", "exact", "0");
    TEST_OK(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run));
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

/* ---- the question of an open run ------------------------------------------------------------- */

/* What a run says that it was asked can be asked again. */
START_TEST(test_options_again)
{
    ids_ctx *ctx = test_ctx();
    ids_run *run = NULL;
    ids_run_info info;

    make_run(ctx, jordan, run_question(1, 3));
    TEST_OK(ctx, ids_run_open(ctx, run_folder, IDS_RUN_READ, &run));
    TEST_OK(ctx, ids_run_describe(run, &info));
    ids_run_options options = info.options;
    ids_run_free(run);
    TEST_OK(ctx, run_start(ctx, jordan, options, IDS_RUN_ALONE, &run));
    ck_assert_uint_eq(count_done(run), ids_run_cell_count(run));
    ids_run_free(run);
    run_remove_folder();
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("run: forged");
    TCase *tcase = tcase_create("forged");

    tcase_add_test(tcase, test_other_version);
    tcase_add_loop_test(tcase, test_cells_without_question, 0, 6);
    tcase_add_test(tcase, test_one_cell_fits);
    tcase_add_test(tcase, test_no_cells);
    tcase_add_test(tcase, test_primes);
    tcase_add_test(tcase, test_field);
    tcase_add_test(tcase, test_options_again);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
