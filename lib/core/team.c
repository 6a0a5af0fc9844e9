/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Teams of threads.
 *
 * A loop is announced by a new round number under the lock. Members take task numbers from one
 * atomic counter until it runs out; the caller is member 0. Waiting members spin for a moment
 * before they sleep, since one loop mostly follows another at once.
 *
 * Members block all signals: a handler of the caller's runs in the caller's thread.
 */
#include "team_private.h"

#include <pthread.h>
#include <signal.h>
#include <stdatomic.h>

#define SPINS 4000u

typedef struct member {
    idsi_team *team;
    uint32_t number;
    pthread_t thread;
} member;

struct idsi_team {
    ids_ctx *ctx;
    uint32_t size; /* with the caller */
    member *members;

    pthread_mutex_t lock;
    pthread_cond_t begin;
    pthread_cond_t end;
    _Atomic uint64_t round; /* changes under the lock, is read outside of it too */
    _Atomic uint32_t busy;  /* members that have not finished the round */
    bool closing;

    _Atomic size_t next;
    size_t tasks;
    idsi_task_fn fn;
    void *user;
};

static void relax(void)
{
#if defined(__x86_64__)
    __builtin_ia32_pause();
#endif
}

static void take_tasks(idsi_team *team, uint32_t number)
{
    for (;;) {
        size_t task = atomic_fetch_add(&team->next, 1);
        if (task >= team->tasks) {
            return;
        }
        team->fn(team->user, number, task);
    }
}

static void *work(void *user)
{
    member *self = user;
    idsi_team *team = self->team;
    uint64_t seen = 0;

    for (;;) {
        for (uint32_t i = 0; i < SPINS && atomic_load(&team->round) == seen; i++) {
            relax();
        }
        pthread_mutex_lock(&team->lock);
        while (atomic_load(&team->round) == seen) {
            pthread_cond_wait(&team->begin, &team->lock);
        }
        seen = atomic_load(&team->round);
        bool closing = team->closing;
        pthread_mutex_unlock(&team->lock);
        if (closing) {
            return NULL;
        }
        take_tasks(team, self->number);
        if (atomic_fetch_sub(&team->busy, 1) == 1) {
            pthread_mutex_lock(&team->lock);
            pthread_cond_signal(&team->end);
            pthread_mutex_unlock(&team->lock);
        }
    }
}

uint32_t idsi_team_members(const ids_ctx *ctx, uint64_t work)
{
    uint64_t members = idsi_threads(ctx);

    members = members < work ? members : work;
    members = members < IDS_MAX_THREADS ? members : IDS_MAX_THREADS;
    return members == 0 ? 1 : (uint32_t)members;
}

/* Starts threads until one is refused. */
static void start(idsi_team *team, uint32_t members)
{
    sigset_t all;
    sigset_t before;

    sigfillset(&all);
    bool masked = pthread_sigmask(SIG_SETMASK, &all, &before) == 0;
    team->size = 1;
    while (team->size < members) {
        member *next = &team->members[team->size];
        next->team = team;
        next->number = team->size;
        if (pthread_create(&next->thread, NULL, work, next) != 0) {
            break;
        }
        team->size++;
    }
    if (masked) {
        pthread_sigmask(SIG_SETMASK, &before, NULL);
    }
}

ids_status idsi_team_create(ids_ctx *ctx, uint32_t members, idsi_team **team)
{
    ids_status st = IDS_OK;
    idsi_team *made = NULL;

    *team = NULL;
    if (members <= 1) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    IDSI_TRY(idsi_alloc_array(ctx, members, sizeof *made->members, &made->members));
    pthread_mutex_init(&made->lock, NULL);
    pthread_cond_init(&made->begin, NULL);
    pthread_cond_init(&made->end, NULL);
    start(made, members);
    *team = made;
    made = NULL;
done:
    idsi_free(ctx, made);
    return st;
}

static void announce(idsi_team *team, bool closing)
{
    pthread_mutex_lock(&team->lock);
    team->closing = closing;
    atomic_store(&team->busy, team->size - 1);
    atomic_fetch_add(&team->round, 1);
    pthread_cond_broadcast(&team->begin);
    pthread_mutex_unlock(&team->lock);
}

void idsi_team_free(idsi_team *team)
{
    if (team == NULL) {
        return;
    }
    announce(team, true);
    for (uint32_t i = 1; i < team->size; i++) {
        pthread_join(team->members[i].thread, NULL);
    }
    pthread_cond_destroy(&team->end);
    pthread_cond_destroy(&team->begin);
    pthread_mutex_destroy(&team->lock);
    idsi_free(team->ctx, team->members);
    idsi_free(team->ctx, team);
}

uint32_t idsi_team_size(const idsi_team *team)
{
    return team == NULL ? 1 : team->size;
}

void idsi_team_run(idsi_team *team, size_t tasks, idsi_task_fn fn, void *user)
{
    if (team == NULL || team->size == 1 || tasks <= 1) {
        for (size_t i = 0; i < tasks; i++) {
            fn(user, 0, i);
        }
        return;
    }
    team->fn = fn;
    team->user = user;
    team->tasks = tasks;
    atomic_store(&team->next, 0);
    announce(team, false);
    take_tasks(team, 0);
    for (uint32_t i = 0; i < SPINS && atomic_load(&team->busy) > 0; i++) {
        relax();
    }
    pthread_mutex_lock(&team->lock);
    while (atomic_load(&team->busy) > 0) {
        pthread_cond_wait(&team->end, &team->lock);
    }
    pthread_mutex_unlock(&team->lock);
}
