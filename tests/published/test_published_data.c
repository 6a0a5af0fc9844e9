/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The published data agree with themselves: every value has a status word and a source, every
 * presentation of data/ can be read and printed and read again, and the cocharacters add up to
 * the dimensions of ranks.csv with the dimensions of the partitions by the hook rule.
 */
#include "published.h"

#include <dirent.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define CHARACTERS_HEADER "id,file,space,degree,partition,multiplicity,status,source"
enum { CHAR_ID, CHAR_FILE, CHAR_SPACE, CHAR_DEGREE, CHAR_PARTITION, CHAR_MULTIPLICITY };

#define RANKS_HEADER "id,file,degree,quotient,status,reach,source"
enum { RANK_ID, RANK_FILE, RANK_DEGREE, RANK_QUOTIENT };

static const struct {
    const char *name;
    const char *header;
    size_t status;
    size_t source;
} tables[] = {
    {"counting.csv", "id,signature,file,counted,place,degree,value,status,reach,source", 7, 9},
    {"automorphisms.csv", "signature,file,degree,order,types,monomials,labelled,status,source", 7,
     8},
    {"ranks.csv", RANKS_HEADER, 4, 6},
    {"cocharacters.csv", CHARACTERS_HEADER, 6, 7},
    {"young.csv", "what,degree,partition,value,status,source", 4, 5},
    {"candidates.csv", "file,candidate,degree,follows,status,source", 4, 5},
};

START_TEST(test_sources)
{
    published_table table = {0};

    published_load(tables[_i].name, tables[_i].header, &table);
    ck_assert_uint_gt(table.rows, 0);
    for (size_t row = 0; row < table.rows; row++) {
        ck_assert_msg(published_is(&table, row, tables[_i].status, "confirmed") ||
                          published_is(&table, row, tables[_i].status, "from memory") ||
                          published_is(&table, row, tables[_i].status, "recomputed only"),
                      "%s, line %zu: unknown status word", table.name, row + 2);
        ck_assert_msg(*published_cell(&table, row, tables[_i].source) != '\0',
                      "%s, line %zu: no source", table.name, row + 2);
    }
    published_free(&table);
}
END_TEST

/* Parts of a partition written 4+3+1. */
static size_t read_partition(const char *text, unsigned parts[64])
{
    size_t count = 0;

    for (const char *at = text; count < 64; at++) {
        char *end = NULL;
        parts[count++] = (unsigned)strtoul(at, &end, 10);
        ck_assert_msg(end != at && (*end == '+' || *end == '\0'), "\"%s\" is no partition", text);
        if (*end == '\0') {
            break;
        }
        at = end;
    }
    return count;
}

/* n! divided by the product of the hook lengths; n <= 20 keeps n! below 2^64. */
static uint64_t hook_dimension(const char *text)
{
    unsigned parts[64] = {0};
    const size_t count = read_partition(text, parts);
    uint64_t hooks = 1;
    uint64_t factorial = 1;
    unsigned n = 0;

    for (size_t i = 0; i < count; i++) {
        for (unsigned j = 0; j < parts[i]; j++) {
            unsigned below = 0;
            for (size_t k = i + 1; k < count; k++) {
                below += parts[k] > j ? 1 : 0;
            }
            hooks *= parts[i] - j + below;
            factorial *= ++n;
        }
    }
    ck_assert_uint_le(n, 20);
    return factorial / hooks;
}

START_TEST(test_hook_rule)
{
    published_table young = {0};
    size_t compared = 0;

    published_load("young.csv", tables[4].header, &young);
    for (size_t row = 0; row < young.rows; row++) {
        if (published_is(&young, row, 0, "dimension")) {
            ck_assert_msg(hook_dimension(published_cell(&young, row, 2)) ==
                              published_number(&young, row, 3),
                          "young.csv, line %zu (%s)", row + 2, published_cell(&young, row, 5));
            compared++;
        }
    }
    ck_assert_uint_gt(compared, 0);
    published_free(&young);
}
END_TEST

/* The sum over the rows that belong to the same space and degree as `row`. */
static uint64_t dimension_of_rows(const published_table *characters, size_t row)
{
    static const size_t same[] = {CHAR_ID, CHAR_FILE, CHAR_SPACE, CHAR_DEGREE};
    uint64_t sum = 0;

    for (size_t i = 0; i < characters->rows; i++) {
        bool belongs = true;
        for (size_t k = 0; k < sizeof same / sizeof *same; k++) {
            belongs = belongs && published_is(characters, i, same[k],
                                              published_cell(characters, row, same[k]));
        }
        if (belongs) {
            sum += published_number(characters, i, CHAR_MULTIPLICITY) *
                   hook_dimension(published_cell(characters, i, CHAR_PARTITION));
        }
    }
    return sum;
}

START_TEST(test_cocharacters_add_up)
{
    published_table characters = {0};
    published_table ranks = {0};
    size_t compared = 0;

    published_load("cocharacters.csv", CHARACTERS_HEADER, &characters);
    published_load("ranks.csv", RANKS_HEADER, &ranks);
    for (size_t row = 0; row < ranks.rows; row++) {
        for (size_t i = 0; i < characters.rows; i++) {
            /* The first row of each list of partitions is that of (n). */
            if (strchr(published_cell(&characters, i, CHAR_PARTITION), '+') != NULL ||
                *published_cell(&ranks, row, RANK_FILE) == '\0' ||
                !published_is(&characters, i, CHAR_SPACE, "quotient") ||
                !published_is(&characters, i, CHAR_FILE, published_cell(&ranks, row, RANK_FILE)) ||
                !published_is(&characters, i, CHAR_DEGREE,
                              published_cell(&ranks, row, RANK_DEGREE))) {
                continue;
            }
            ck_assert_msg(
                dimension_of_rows(&characters, i) == published_number(&ranks, row, RANK_QUOTIENT),
                "%s, degree %s: cocharacter %s does not add up to %s",
                published_cell(&ranks, row, RANK_FILE), published_cell(&ranks, row, RANK_DEGREE),
                published_cell(&characters, i, CHAR_ID),
                published_cell(&ranks, row, RANK_QUOTIENT));
            compared++;
        }
    }
    ck_assert_uint_gt(compared, 0);
    published_free(&ranks);
    published_free(&characters);
}
END_TEST

static const char *const folders[] = {"varieties", "signatures", "crosses", "models"};

static void check_round_trip(const char *path)
{
    ids_ctx *ctx = test_ctx();
    ids_presentation *presentation = published_presentation(ctx, path);
    ids_presentation *again = NULL;
    char *text = NULL;

    TEST_OK(ctx, ids_presentation_print(ctx, presentation, &text));
    TEST_OK(ctx, ids_presentation_read(ctx, text, strlen(text), "printed", &again));
    ck_assert_msg(ids_presentation_equal(presentation, again), "%s is not read back from:\n%s",
                  path, text);
    ids_string_free(ctx, text);
    ids_presentation_free(again);
    ids_presentation_free(presentation);
    test_ctx_free(ctx);
}

START_TEST(test_presentations)
{
    char path[1024];
    DIR *folder = NULL;
    size_t count = 0;

    snprintf(path, sizeof path, "%s/%s", IDSPAN_DATA_DIR, folders[_i]);
    folder = opendir(path);
    ck_assert_msg(folder != NULL, "%s cannot be opened", path);
    for (struct dirent *entry = readdir(folder); entry != NULL; entry = readdir(folder)) {
        const char *ending = strrchr(entry->d_name, '.');
        if (ending != NULL && strcmp(ending, ".pres") == 0) {
            snprintf(path, sizeof path, "%s/%s", folders[_i], entry->d_name);
            check_round_trip(path);
            count++;
        }
    }
    closedir(folder);
    ck_assert_uint_gt(count, 0);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("published data");
    TCase *tcase = tcase_create("data");

    tcase_set_timeout(tcase, 20);
    tcase_add_loop_test(tcase, test_sources, 0, sizeof tables / sizeof *tables);
    tcase_add_test(tcase, test_hook_rule);
    tcase_add_test(tcase, test_cocharacters_add_up);
    tcase_add_loop_test(tcase, test_presentations, 0, sizeof folders / sizeof *folders);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
