/* SPDX-License-Identifier: BSD-2-Clause */
/* The rows of data/reference/ranks.csv that take minutes. */
#include "ranks.h"

int main(void)
{
    return ranks_run("slow", 1800.0);
}
