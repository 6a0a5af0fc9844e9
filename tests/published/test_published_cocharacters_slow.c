/* SPDX-License-Identifier: BSD-2-Clause */
/* The rows of data/reference that the partition engine needs a minute for. */
#include "cocharacters.h"
#include "support.h"

int main(void)
{
    Suite *suite = suite_create("published cocharacters, slow");
    int result = 0;

    cocharacters_add(suite, "slow", "partition slow", false, 1800);
    result = test_run(suite);
    cocharacters_free();
    return result;
}
