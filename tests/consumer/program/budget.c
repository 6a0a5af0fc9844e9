/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * An allocator of the program's own, and a byte budget. What does not fit is refused with a
 * message, the program goes on, and afterwards not one block is left. The allocator may be entered
 * by several threads at once, so its counters are guarded.
 */
#include <pthread.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/idspan.h>

typedef struct heap {
    pthread_mutex_t lock;
    size_t live;  /* bytes that the library has now */
    size_t calls; /* how often it got or freed some */
} heap;

/* One function allocates, resizes and frees; it is told the old size. */
static void *resize(void *user, void *ptr, size_t old_size, size_t new_size)
{
    heap *h = (heap *)user;
    void *block = NULL;

    if (new_size > 0) {
        block = realloc(ptr, new_size);
        if (block == NULL) {
            return NULL; /* the old block is as it was */
        }
    } else {
        free(ptr);
    }
    pthread_mutex_lock(&h->lock);
    h->calls++;
    h->live = h->live - old_size + new_size;
    pthread_mutex_unlock(&h->lock);
    return block;
}

/* All types of a degree, under a budget; the status is the answer. */
static ids_status count_types(heap *h, uint64_t budget, uint32_t degree)
{
    ids_operation product;
    ids_ctx_options options;
    ids_ctx *ctx = NULL;
    ids_signature *signature = NULL;
    ids_types *types = NULL;
    ids_status st = IDS_OK;

    memset(&product, 0, sizeof product);
    product.notation = IDS_NOTATION_INFIX;
    product.open = "*";
    product.arity = 2;
    product.symmetry = IDS_SYMMETRY_COMMUTATIVE;
    memset(&options, 0, sizeof options);
    options.struct_size = sizeof options;
    options.resize = resize;
    options.resize_user = h;
    options.byte_budget = budget;
    options.threads = 2;

    st = ids_ctx_create(&options, &ctx);
    if (st == IDS_OK) {
        st = ids_signature_create(ctx, &product, 1, &signature);
    }
    if (st == IDS_OK) {
        st = ids_types_create(ctx, signature, degree, &types);
    }
    if (st == IDS_OK) {
        printf("degree %u: %llu types\n", (unsigned)degree,
               (unsigned long long)ids_types_count(types, degree));
    } else if (st == IDS_ERR_LIMIT) {
        printf("degree %u: refused by the budget\n", (unsigned)degree);
        fprintf(stderr, "%s\n", ids_ctx_message(ctx));
    }
    ids_types_free(types);
    ids_signature_free(signature);
    ids_ctx_free(ctx);
    return st;
}

int main(void)
{
    heap h;

    memset(&h, 0, sizeof h);
    pthread_mutex_init(&h.lock, NULL);
    if (count_types(&h, 1u << 20, 10) != IDS_OK || count_types(&h, 1u << 20, 20) != IDS_ERR_LIMIT ||
        count_types(&h, 1u << 28, 20) != IDS_OK) {
        return EXIT_FAILURE;
    }
    pthread_mutex_destroy(&h.lock);
    printf("%u bytes left\n", (unsigned)h.live);
    return h.live == 0 && h.calls > 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
