/* SPDX-License-Identifier: BSD-2-Clause */
/* The rows of data/reference/ranks.csv that take seconds. */
#include "ranks.h"

int main(void)
{
    return ranks_run("normal", 300.0);
}
