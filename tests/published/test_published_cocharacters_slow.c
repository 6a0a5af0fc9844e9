/* SPDX-License-Identifier: BSD-2-Clause */
/* The rows of data/reference that the partition engine needs a minute for. */
#include "cocharacters.h"
#include "support.h"

int main(void)
{
    Suite *suite = suite_create("published cocharacters, slow");
    int result = 0;

    cocharacters_add(suite, "slow", "partition slow", false, 1800);
    cocharacters_add_far(suite, "varieties/power-associative-commutative.pres", 10, 1800);
    cocharacters_add_far(suite, "varieties/binary-ternary-derivation.pres", 9, 1800);
    result = test_run(suite);
    cocharacters_free();
    return result;
}
