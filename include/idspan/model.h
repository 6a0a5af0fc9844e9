/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file model.h
 * Models: something in which the operations of a presentation are realised.
 *
 * A model is declared by `model` statements of the presentation: in associative words, perhaps with
 * an involution; in an algebra given by structure constants; or by polynomials in the operations of
 * another presentation.
 */
#ifndef IDSPAN_MODEL_H
#define IDSPAN_MODEL_H

#include <idspan/algebra.h>

#ifdef __cplusplus
extern "C" {
#endif

/**
 * Brings a file that a model names: hands its bytes to `sink`, in pieces, with sink_user.
 *
 * @param user       what was given to ids_model_open().
 * @param name       borrowed: the name as it stands in the presentation.
 * @param sink       takes the bytes; what it returns ends the call, unless it is 0.
 * @param sink_user  passed to `sink`.
 * @return 0; anything else when there is no such file, or when the sink returned it.
 */
typedef int (*ids_load_fn)(void *user, const char *name, ids_sink_fn sink, void *sink_user);

/** A model, with the files that it names. Immutable, shareable. */
typedef struct ids_model ids_model;

/**
 * Opens a model of a presentation: reads its file, if it has one, and sees that it can realise the
 * operations with their symmetries.
 *
 * @param ctx           borrowed now, kept.
 * @param presentation  kept: must outlive the model.
 * @param index         0 .. ids_presentation_model_count()-1.
 * @param load          brings files; NULL: there are none, and models that need one are refused.
 * @param load_user     borrowed: passed to load.
 * @param model         out, owned: ids_model_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, index out of range
 *         IDS_ERR_IO         the file was not brought
 *         IDS_ERR_PARSE      the file, or a polynomial over its presentation, is not in order; the
 *                            message says where
 *         IDS_ERR_DOMAIN     the model lacks an operation, or its symmetry
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget, or a limit of the file's reader
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: linear in the file; over a presentation, its tables by partition in the degrees of the
 * operations.
 * Threads: one a ctx. Cancel: polled. Border: GMP (coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_model_open(ids_ctx *ctx, const ids_presentation *presentation,
                                               size_t index, ids_load_fn load, void *load_user,
                                               ids_model **model);

/**
 * Frees a model.
 *
 * @param model  owned; NULL is fine.
 * Cost: the memory goes back to the allocator. Threads: one; nobody may use `model` any more.
 * Since: 0.1
 */
IDS_API void ids_model_free(ids_model *model);

/**
 * Whether an identity or candidate of the model's presentation holds in the model.
 *
 * Words are multiplied out, and algebras evaluated on all tuples of basis elements; that is exact.
 * Over another presentation it is decided modulo two primes; then the answer, whichever it is, is
 * wrong with probability 2^-bits at most.
 *
 * @param ctx    borrowed.
 * @param model  borrowed.
 * @param role   whether `index` counts identities or candidates.
 * @param index  0 .. ids_presentation_count()-1.
 * @param holds  out.
 * @param bits   out, may be NULL: 0 when that is exact, else as above.
 * @return IDS_OK
 *         IDS_ERR_ARG        NULL, no such identity
 *         IDS_ERR_NOMEM      the allocator refused
 *         IDS_ERR_LIMIT      byte budget
 *         IDS_ERR_CANCELLED  cancelled
 * Cost: the terms of the linearisation times the words of each; dimension^degree products; a table
 * by partition of the other presentation.
 * Threads: any number may share `model`, each with a ctx of its own. Cancel: polled.
 * Border: GMP (coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_model_holds(ids_ctx *ctx, const ids_model *model, ids_role role,
                                                size_t index, bool *holds, uint32_t *bits);

#ifdef __cplusplus
}
#endif

#endif
