/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file identity.h
 * Presentations: a signature with polynomial identities, read from and written to text.
 *
 * The text format is in idspan(5) and in README.md, "The presentation file". Limits: degree 16,
 * 16 variables a statement, 64 operations, 4,000,000 terms a polynomial, numbers of 10,000
 * digits, names of 63 bytes, fences nested 250 deep.
 */
#ifndef IDSPAN_IDENTITY_H
#define IDSPAN_IDENTITY_H

#include <idspan/basis.h>

#ifdef __cplusplus
extern "C" {
#endif

/** A signature, its identities, candidates and models. Immutable once read, shareable. */
typedef struct ids_presentation ids_presentation;

/** Whether an identity is imposed or only to be tested. */
typedef enum ids_role {
    IDS_ROLE_IDENTITY = 0, /**< imposed */
    IDS_ROLE_CANDIDATE = 1 /**< to be tested */
} ids_role;

/**
 * Reads a presentation.
 *
 * Every identity and candidate must have each variable equally often in each term. Its variables
 * are numbered in the order of their names (x2 before x10), and it is linearised completely. An
 * identity that cancels to 0 is kept, with no terms and the degree that was written.
 *
 * @param ctx           borrowed now, kept.
 * @param text          borrowed; UTF-8; need not end in NUL.
 * @param length        bytes of text.
 * @param source        borrowed: name of the text for messages (a file name); NULL: "input".
 * @param presentation  out, owned: ids_presentation_free(); written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_PARSE      ids_ctx_message() names source, line and column, shows the line with
 *                            a caret and says what was expected; ids_ctx_last_place() gives the
 *                            place
 *         IDS_ERR_DOMAIN     a sign character that forces an operation to be zero; a model that
 *                            writes an operation as words without its symmetry; with place
 *         IDS_ERR_LIMIT      degree, number of terms or byte budget; with place where there is one
 *         IDS_ERR_CANCELLED  cancelled
 *         IDS_ERR_ARG        NULL
 *         IDS_ERR_NOMEM      the allocator refused
 * Cost: linear in the text and, up to a logarithm for sorting, in the terms of expanded products
 * and of linearisations.
 * Threads: one a ctx. Cancel: polled.
 * Border: coefficients are GMP numbers of bounded size, outside of the byte budget; when the
 * system refuses GMP memory, the process ends.
 * Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_presentation_read(ids_ctx *ctx, const char *text, size_t length,
                                                      const char *source,
                                                      ids_presentation **presentation);

/**
 * Frees a presentation.
 *
 * @param presentation  owned; NULL is fine.
 * Cost: the memory goes back to the allocator.
 * Threads: one; nobody may use `presentation` any more. Since: 0.1
 */
IDS_API void ids_presentation_free(ids_presentation *presentation);

/**
 * Signature of a presentation.
 *
 * @param presentation  borrowed; NULL gives NULL.
 * @return borrowed from the presentation, lives as long.
 * Cost: constant, no allocation. Threads: any number may share `presentation`. Since: 0.1
 */
IDS_API const ids_signature *ids_presentation_signature(const ids_presentation *presentation);

/**
 * Number of identities, or of candidates.
 *
 * @param presentation  borrowed; NULL gives 0.
 * @param role          which of them.
 * @return how many; 0 for an unknown role.
 * Cost: constant, no allocation. Threads: any number may share `presentation`. Since: 0.1
 */
IDS_API size_t ids_presentation_count(const ids_presentation *presentation, ids_role role);

/** What is known of one identity or candidate. */
typedef struct ids_identity_info {
    const char *name;      /**< borrowed; "" when it has none */
    uint32_t degree;       /**< degree of the identity */
    uint32_t line;         /**< line of the text it was read from */
    uint64_t terms;        /**< terms as written, definitions expanded and equal ones collected */
    uint64_t linear_terms; /**< terms of its complete linearisation */
    bool multilinear;      /**< every variable once in each term */
} ids_identity_info;

/**
 * Describes an identity or candidate, in the order of the text.
 *
 * @param presentation  borrowed.
 * @param role          identity or candidate.
 * @param index         0 .. ids_presentation_count()-1.
 * @param info          out, written only on IDS_OK; its name is borrowed from the presentation.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, unknown role, index out of range
 * Cost: constant, no allocation. Threads: any number may share `presentation`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_presentation_info(const ids_presentation *presentation,
                                                      ids_role role, size_t index,
                                                      ids_identity_info *info);

/** What the operations of a model are realised in. */
typedef enum ids_model_kind {
    IDS_MODEL_ASSOCIATIVE = 0, /**< words in associative letters, perhaps with an involution */
    IDS_MODEL_ALGEBRA = 1,     /**< an algebra given by structure constants, in a file */
    IDS_MODEL_OVER = 2         /**< polynomials in the operations of another presentation */
} ids_model_kind;

/** What is known of one model before its files are read. */
typedef struct ids_model_info {
    const char *name;    /**< borrowed */
    ids_model_kind kind; /**< kind */
    const char *file;    /**< borrowed; the file as written, "" when there is none */
    uint32_t line;       /**< line of the text where it begins */
} ids_model_info;

/**
 * Number of models.
 *
 * @param presentation  borrowed; NULL gives 0.
 * @return how many.
 * Cost: constant, no allocation. Threads: any number may share `presentation`. Since: 0.1
 */
IDS_API size_t ids_presentation_model_count(const ids_presentation *presentation);

/**
 * Describes a model, in the order of the text.
 *
 * @param presentation  borrowed.
 * @param index         0 .. ids_presentation_model_count()-1.
 * @param info          out, written only on IDS_OK.
 * @return IDS_OK
 *         IDS_ERR_ARG  NULL, index out of range
 * Cost: constant, no allocation. Threads: any number may share `presentation`. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_presentation_model(const ids_presentation *presentation,
                                                       size_t index, ids_model_info *info);

/** Which form of an identity ids_presentation_print_identity() writes. */
typedef enum ids_form {
    IDS_FORM_WRITTEN = 0, /**< as written, in its own letters, definitions expanded, monomials
                               canonical */
    IDS_FORM_LINEAR = 1   /**< complete linearisation in the letters a, b, c, ... that name no
                               operation; integer coefficients with content 1, the first positive */
} ids_form;

/**
 * Writes the polynomial of an identity or candidate as text, "0" when it is zero.
 *
 * @param ctx           borrowed.
 * @param presentation  borrowed.
 * @param role          identity or candidate.
 * @param index         0 .. ids_presentation_count()-1.
 * @param form          as written or linear.
 * @param text          out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, unknown role or form, index out of range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `presentation`, with a ctx each.
 * Cancel: not polled. Border: GMP (digits of coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_presentation_print_identity(
    ids_ctx *ctx, const ids_presentation *presentation, ids_role role, size_t index, ids_form form,
    char **text);

/**
 * Writes a whole presentation as text that reads back to the same presentation.
 *
 * Definitions are expanded; comments are not kept. An identity that is zero is written as 0 times
 * a monomial of its degree.
 *
 * @param ctx           borrowed.
 * @param presentation  borrowed.
 * @param text          out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `presentation`, with a ctx each.
 * Cancel: not polled. Border: GMP (digits of coefficients). Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_presentation_print(ids_ctx *ctx,
                                                       const ids_presentation *presentation,
                                                       char **text);

/**
 * Whether two presentations have the same operations, identities, candidates and models, in the
 * same order. The names of identities count, those of variables only in so far as they order them.
 *
 * @param a  borrowed, or NULL.
 * @param b  borrowed, or NULL.
 * @return true when they are the same; NULL is the same as NULL only.
 * Cost: linear, for generated groups times their order. Threads: any. Since: 0.1
 */
IDS_API bool ids_presentation_equal(const ids_presentation *a, const ids_presentation *b);

/**
 * Writes one operation as it is declared, for instance "a*b commutative".
 *
 * @param ctx        borrowed.
 * @param signature  borrowed.
 * @param index      0 .. ids_signature_count()-1.
 * @param text       out, owned: ids_string_free().
 * @return IDS_OK
 *         IDS_ERR_ARG    NULL, index out of range
 *         IDS_ERR_NOMEM  the allocator refused
 *         IDS_ERR_LIMIT  byte budget
 * Cost: proportional to the text. Threads: any number may share `signature`, with a ctx each.
 * Cancel: not polled. Border: none. Since: 0.1
 */
IDS_API IDS_MUST_USE ids_status ids_signature_print_operation(ids_ctx *ctx,
                                                              const ids_signature *signature,
                                                              size_t index, char **text);

#ifdef __cplusplus
}
#endif

#endif
