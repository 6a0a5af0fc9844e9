/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Preloaded before a program, this moves its clock of the day by IDSPAN_TEST_CLOCK seconds; clocks
 * that measure spans of time go on as they are.
 */
#include <stdlib.h>
#include <time.h>

time_t time(time_t *result)
{
    struct timespec now = {0};
    const char *shift = getenv("IDSPAN_TEST_CLOCK");

    clock_gettime(CLOCK_REALTIME, &now);
    now.tv_sec += shift != NULL ? (time_t)strtoll(shift, NULL, 10) : 0;
    if (result != NULL) {
        *result = now.tv_sec;
    }
    return now.tv_sec;
}
