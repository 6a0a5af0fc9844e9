/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * What the processes of a run have in common: the memory they may take, and that none outlives the
 * one that started it.
 *
 * The library keeps to its budget by itself. The limit of the system is there for GMP and FLINT,
 * which are not counted in it, and end the process when memory is refused.
 */
#include <signal.h>
#include <stdlib.h>
#include <sys/resource.h>
#include <unistd.h>

#ifdef __linux__
#include <sys/prctl.h>
#endif

#include "run_tool.h"

#define SLACK_BYTES ((uint64_t)64 << 20) /* for stacks and what the libraries below take */

/* The sanitizers take terabytes of addresses, so no limit can be set under them. */
#if !defined(__SANITIZE_ADDRESS__) && !defined(__SANITIZE_THREAD__)

/* Address space of this process; 0 when the system does not tell. */
static uint64_t address_space(void)
{
    char line[256] = "";
    FILE *file = fopen("/proc/self/statm", "r");

    if (file != NULL) {
        if (fgets(line, sizeof line, file) == NULL) {
            line[0] = '\0';
        }
        fclose(file);
    }
    return (uint64_t)strtoull(line, NULL, 10) * (uint64_t)sysconf(_SC_PAGESIZE);
}

static void limit_memory(const session *s)
{
    ids_memory memory = ids_ctx_memory(s->ctx);
    uint64_t have = address_space();
    struct rlimit limit = {0};

    if (memory.budget == 0 || have == 0 || getrlimit(RLIMIT_AS, &limit) != 0) {
        return;
    }
    uint64_t left = memory.budget > memory.live ? memory.budget - memory.live : 0;
    rlim_t wanted = (rlim_t)(have + left + SLACK_BYTES);
    if (limit.rlim_max == RLIM_INFINITY || wanted < limit.rlim_max) {
        limit.rlim_cur = wanted;
        setrlimit(RLIMIT_AS, &limit);
    }
}

#else

static void limit_memory(const session *s)
{
    (void)s;
}

#endif

void crew_settle(const session *s, pid_t parent)
{
    signal(SIGINT, SIG_DFL);
    signal(SIGTERM, SIG_DFL);
    signal(SIGUSR1, SIG_IGN);
#ifdef __linux__
    prctl(PR_SET_PDEATHSIG, SIGKILL);
#endif
    if (getppid() != parent) {
        _exit(WORKER_FAILED); /* it died before it could be noticed */
    }
    limit_memory(s);
}

/* Notes a failure for those who look at the run later. That it cannot be noted is no harm. */
void note_failure(ids_run *run, size_t cell, const char *reason)
{
    ids_status st = ids_run_store_failure(run, cell, reason);
    (void)st;
}
