/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The partition engine against data/reference: every row of cocharacters.csv that belongs to a
 * presentation, and the dimensions of ranks.csv.
 */
#ifndef IDSPAN_TEST_PUBLISHED_COCHARACTERS_H
#define IDSPAN_TEST_PUBLISHED_COCHARACTERS_H

#include <check.h>
#include <stdbool.h>
#include <stdint.h>

/*
 * Adds a test for each file that has rows of ranks.csv whose column `reach` is `first` or
 * `second`, or with `multiplicities` rows in cocharacters.csv, each with `seconds` to finish.
 */
void cocharacters_add(Suite *suite, const char *first, const char *second, bool multiplicities,
                      double seconds);
/*
 * Adds a test that a presentation's table to a degree, for which no published values are known,
 * comes out the same with two primes, and that its free dimensions are the numbers of monomials.
 * `file` and `seconds` are kept.
 */
void cocharacters_add_far(Suite *suite, const char *file, uint32_t degree, double seconds);
/* Frees what the tests used. */
void cocharacters_free(void);

#endif
