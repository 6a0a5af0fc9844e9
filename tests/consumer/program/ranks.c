/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Rank tables with a progress hook. The first runs to its end. The second is cancelled by the hook
 * once a degree beyond 6 is being worked on, and keeps the degrees that were finished; the context
 * is as good as before.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/idspan.h>

static const char text[] = "operation a*b commutative\n"
                           "identity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n";

typedef struct watch {
    uint32_t last_degree; /* cancel beyond it */
    unsigned calls;
} watch;

/* The library calls this about ten times a second; whatever is not 0 cancels. */
static int look(void *user, const ids_progress *progress)
{
    watch *w = (watch *)user;

    w->calls++;
    return progress->degree > w->last_degree;
}

static void print_rows(const ids_rank_table *table)
{
    for (size_t i = 0; i < ids_rank_table_count(table); i++) {
        ids_rank_row row;
        if (ids_rank_table_row(table, i, &row) == IDS_OK) {
            printf("degree %u: %llu of %llu\n", (unsigned)row.degree,
                   (unsigned long long)row.quotient, (unsigned long long)row.free);
        }
    }
}

static ids_status work(ids_ctx *ctx, watch *w)
{
    ids_presentation *pres = NULL;
    ids_rank_table *whole = NULL;
    ids_rank_table *part = NULL;
    ids_rank_options options;
    ids_status st = ids_presentation_read(ctx, text, sizeof text - 1, "jordan", &pres);

    memset(&options, 0, sizeof options);
    options.struct_size = sizeof options;
    options.primes = 2;
    if (st == IDS_OK) {
        st = ids_rank_table_create(ctx, pres, 1, 6, &options, &whole);
    }
    if (st == IDS_OK) {
        print_rows(whole);
        w->last_degree = 6;
        st = ids_rank_table_create(ctx, pres, 4, 12, NULL, &part);
        if (st == IDS_ERR_CANCELLED && w->calls > 0) {
            printf("cancelled, after\n");
            print_rows(part);
            st = IDS_OK;
        } else if (st == IDS_OK) {
            st = IDS_ERR_INTERNAL;
        }
    }
    ids_rank_table_free(part);
    ids_rank_table_free(whole);
    ids_presentation_free(pres);
    return st;
}

int main(void)
{
    watch w = {64, 0};
    ids_ctx_options options;
    ids_ctx *ctx = NULL;
    ids_status st = IDS_OK;

    memset(&options, 0, sizeof options);
    options.struct_size = sizeof options;
    options.progress = look;
    options.progress_user = &w;
    options.threads = 2;
    st = ids_ctx_create(&options, &ctx);
    if (st == IDS_OK) {
        st = work(ctx, &w);
    }
    if (st != IDS_OK) {
        fprintf(stderr, "%s: %s\n", ids_status_name(st), ids_ctx_message(ctx));
    }
    ids_ctx_free(ctx);
    return st == IDS_OK ? EXIT_SUCCESS : EXIT_FAILURE;
}
