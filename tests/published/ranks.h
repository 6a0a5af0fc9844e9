/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Dimensions of quotients against data/reference/ranks.csv. test_published_ranks.c takes the rows
 * whose column `reach` says "normal", test_published_ranks_slow.c those that say "slow".
 */
#ifndef IDSPAN_TEST_PUBLISHED_RANKS_H
#define IDSPAN_TEST_PUBLISHED_RANKS_H

/* Runs one test for each file that has rows of this reach, each with `seconds` to finish; the
 * value for main() to return. */
int ranks_run(const char *reach, double seconds);

#endif
