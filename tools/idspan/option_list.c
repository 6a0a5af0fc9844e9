/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The options of all tasks, with their help. A % stands for what depends on the task: its largest
 * degree, its formats.
 */
#include "tool.h"

const option option_list[OPTION_END] = {
    [OPTION_DEGREE] = {"degree", "N", "the degree N, from 1 to %"},
    [OPTION_DEGREES] = {"degrees", "A..B", "all degrees from A to B"},
    [OPTION_FROM] = {"from", "I", "begin with index I; indices count from 0"},
    [OPTION_COUNT] = {"count", "K", "list at most K of them"},
    [OPTION_INDEX] = {"index", "I", "only the one of index I; indices count from 0"},
    [OPTION_MONOMIALS] = {"monomials", NULL, "the multilinear monomials, with their labels"},
    [OPTION_SPLIT] = {"split", NULL, "split the numbers by the uses of each operation"},
    [OPTION_EXACT] = {"exact", NULL,
                      "prove the ranks over the rational numbers"},
    [OPTION_PRIMES] = {"primes", "K", "compute modulo K random primes (default 1)"},
    [OPTION_SEED] = {"seed", "S",
                     "draw the primes from seed S (default 0); the same seed\n"
                     "gives the same primes on every machine, so an independent\n"
                     "check wants another seed"},
    [OPTION_FIELD] = {"field", "P", "work over the field of P elements, P a prime below 2^30"},
    [OPTION_BY] = {"by", "partition", "one row a partition and a total, up to degree 16"},
    [OPTION_PARTITION] = {"partition", "P", "only the partition P, written as 4+3+1"},
    [OPTION_CROSS_CHECK] = {"cross-check", NULL,
                            "compute the totals by monomials too and compare"},
    [OPTION_RUN] = {"run", "DIR",
                    "keep the table in the folder DIR, a file for every part\n"
                    "that is finished, and go on where it was left"},
    [OPTION_JOBS] = {"jobs", "N", "with --run, N processes (default: one a processor)"},
    [OPTION_PLAN] = {"plan", NULL, "with --run, only list the cells and what they will cost"},
    [OPTION_LIST_CELLS] = {"list-cells", NULL, "with --run, only name the cells that are missing"},
    [OPTION_CELL] = {"cell", "ID,...",
                     "with --run, compute these cells only, beside others who\n"
                     "do the same in the same folder"},
    [OPTION_PLAIN] = {"plain", NULL, "all consequences in all monomials, with integers"},
    [OPTION_CANDIDATE] = {"candidate", "NAME",
                          "the candidate NAME of the file; the only one if not given"},
    [OPTION_ALL] = {"all", NULL, "all candidates of the file"},
    [OPTION_PROOF] = {"proof", "FILE", "if it follows, write a derivation to FILE"},
    [OPTION_WITNESS] = {"witness", "FILE", "if it does not, write a witness to FILE"},
    [OPTION_MODEL] = {"model", "NAME", "the model NAME of the file; the only one if not given"},
    [OPTION_TABLE] = {"table", NULL, "only count, and write no identities down"},
    [OPTION_SAVE] = {"save", "FILE", "write a presentation with what is found to FILE"},
    [OPTION_ALGEBRA] = {"algebra", "FILE",
                        "if it does not, look for an algebra in which the identities\n"
                        "hold and the candidate does not, and write it to FILE"},
    [OPTION_DIMENSION] = {"dimension", "N", "of --algebra: at most dimension N (default 30)"},
    [OPTION_ENTRIES] = {"entries", "K",
                        "of --algebra: products with coefficients up to K (default 100)"},
    [OPTION_STEPS] = {"steps", "K", "of --algebra: stop after K steps (default 10000000)"},
    [OPTION_FORMAT] = {"format", "F",
                       "%; the first is the default"},
    [OPTION_OUTPUT] = {"output", "FILE", "write the result to FILE, once it is complete"},
    [OPTION_MEMORY] = {"memory", "SIZE",
                       "use at most SIZE, such as 500M or 8G (default 4G);\n"
                       "none for no limit"},
    [OPTION_THREADS] = {"threads", "N",
                        "use at most N threads (default: one a processor);\n"
                        "results do not depend on it"},
    [OPTION_HELP] = {"help", NULL, "show this help"},
    [OPTION_VERSION] = {"version", NULL, "show the version"},
};
