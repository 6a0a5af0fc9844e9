/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Does an identity follow? For each candidate the answer, and a file that proves it: a derivation
 * or a witness. The file is read back and checked, by code that shares nothing with the search.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <idspan/idspan.h>

static const char text[] = "operation a*b commutative\n"
                           "identity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n"
                           "candidate powers: ((x*x)*x)*x = (x*x)*(x*x)\n"
                           "candidate associative: (x*y)*z = x*(y*z)\n";

/* Receives a file piece by piece; non-zero stops the writer. */
typedef struct file {
    char bytes[4096];
    size_t length;
} file;

static int append(void *user, const char *bytes, size_t length)
{
    file *to = (file *)user;

    if (length > sizeof to->bytes - to->length) {
        return 1;
    }
    memcpy(to->bytes + to->length, bytes, length);
    to->length += length;
    return 0;
}

static ids_status derive(ids_ctx *ctx, const ids_presentation *pres, size_t index, file *to)
{
    ids_derivation *derivation = NULL;
    ids_status st = ids_derivation_find(ctx, pres, index, NULL, &derivation);

    if (st == IDS_OK) {
        st = ids_derivation_write(ctx, derivation, append, to);
    }
    ids_derivation_free(derivation);
    return st;
}

static ids_status refute(ids_ctx *ctx, const ids_presentation *pres, size_t index, file *to)
{
    ids_witness *witness = NULL;
    ids_status st = ids_witness_find(ctx, pres, index, NULL, &witness);

    if (st == IDS_OK) {
        st = ids_witness_write(ctx, witness, append, to);
    }
    ids_witness_free(witness);
    return st;
}

static ids_status answer(ids_ctx *ctx, const ids_presentation *pres, size_t index)
{
    ids_follows *follows = NULL;
    ids_check_report report;
    file proof;
    ids_status st = ids_follows_decide(ctx, pres, index, NULL, &follows);

    proof.length = 0;
    if (st == IDS_OK) {
        st = (ids_follows_answer(follows) ? derive : refute)(ctx, pres, index, &proof);
    }
    if (st == IDS_OK) {
        st = ids_certificate_check(ctx, proof.bytes, proof.length, "proof", &report);
    }
    if (st == IDS_OK) {
        printf("%s %s; the proof has been checked\n", report.claim,
               report.follows ? "follows" : "does not follow");
    }
    ids_follows_free(follows);
    return st;
}

int main(void)
{
    ids_ctx *ctx = NULL;
    ids_presentation *pres = NULL;
    ids_status st = ids_ctx_create(NULL, &ctx);

    if (st == IDS_OK) {
        st = ids_presentation_read(ctx, text, sizeof text - 1, "example", &pres);
    }
    for (size_t i = 0; st == IDS_OK && i < ids_presentation_count(pres, IDS_ROLE_CANDIDATE); i++) {
        st = answer(ctx, pres, i);
    }
    if (st != IDS_OK) {
        fprintf(stderr, "%s: %s\n", ids_status_name(st), ids_ctx_message(ctx));
    }
    ids_presentation_free(pres);
    ids_ctx_free(ctx);
    return st == IDS_OK ? EXIT_SUCCESS : EXIT_FAILURE;
}
