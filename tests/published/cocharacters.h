/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The partition engine against data/reference: every row of cocharacters.csv that belongs to a
 * presentation, and the dimensions of ranks.csv.
 */
#ifndef IDSPAN_TEST_PUBLISHED_COCHARACTERS_H
#define IDSPAN_TEST_PUBLISHED_COCHARACTERS_H

#include <check.h>
#include <stdbool.h>

/*
 * Adds a test for each file that has rows of ranks.csv whose column `reach` is `first` or
 * `second`, or with `multiplicities` rows in cocharacters.csv, each with `seconds` to finish.
 */
void cocharacters_add(Suite *suite, const char *first, const char *second, bool multiplicities,
                      double seconds);
/* Frees what the tests used. */
void cocharacters_free(void);

#endif
