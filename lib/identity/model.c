/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The statement `model`.
 *
 *     model NAME associative: PATTERN = [SIGN] term { SIGN term }     a line for each operation
 *     model NAME algebra "FILE"
 *     model NAME over "FILE": PATTERN = text                          a line for each operation
 *
 *     term   { coefficient } letter letter ...    | 0
 *     letter an argument of PATTERN, or one with ' after it: its image under the involution
 *
 * The lines of a model repeat its name and what it is. A file is not opened here: what a polynomial
 * over another presentation says can only be seen beside that one, so its text is kept, and read
 * when the model is used. Words are complete, so here is also the place to see whether they have
 * the symmetry of the operation.
 */
#include <stdlib.h>
#include <string.h>

#include "notation_private.h"

static ids_status expected(idsi_reader *reader, const char *what)
{
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at, "expected %s, found %s", what,
                            found.text);
}

/* ---- name, kind and file --------------------------------------------------------------------- */

static ids_status copy_bytes(idsi_reader *reader, size_t begin, size_t end, char **out)
{
    void *copy = NULL;
    ids_status st = idsi_alloc_zero(reader->ctx, end - begin + 1, &copy);
    if (st == IDS_OK) {
        memcpy(copy, reader->text + begin, end - begin);
        *out = copy;
    }
    return st;
}

/* A name, perhaps with hyphens inside. */
static ids_status read_name(idsi_reader *reader, char **name)
{
    const idsi_lexeme *first = &reader->lexemes[reader->at];
    if (first->kind != IDSI_LEX_NAME || idsi_lexeme_is_reserved(reader, reader->at)) {
        return expected(reader, "the name of the model");
    }
    const idsi_lexeme *last = NULL;
    do {
        last = &reader->lexemes[reader->at++];
    } while (reader->lexemes[reader->at].glued &&
             (reader->lexemes[reader->at].kind == IDSI_LEX_NAME ||
              reader->lexemes[reader->at].kind == IDSI_LEX_NUMBER ||
              reader->lexemes[reader->at].kind == IDSI_LEX_MINUS));
    if (last->offset + last->length - first->offset > IDSI_MAX_NAME) {
        return idsi_reader_fail(reader, IDS_ERR_LIMIT, reader->at - 1,
                                "a name of more than %u bytes", IDSI_MAX_NAME);
    }
    return copy_bytes(reader, first->offset, last->offset + last->length, name);
}

static ids_status read_kind(idsi_reader *reader, ids_model_kind *kind)
{
    static const char *const words[3] = {"associative", "algebra", "over"};
    for (size_t i = 0; i < 3; i++) {
        if (idsi_lexeme_is(reader, reader->at, words[i])) {
            *kind = (ids_model_kind)i;
            reader->at++;
            return IDS_OK;
        }
    }
    const idsi_shown found = idsi_reader_show(reader, reader->at);
    const char *near = reader->lexemes[reader->at].kind == IDSI_LEX_NAME
                           ? idsi_reader_nearest(reader, reader->at, words, 3)
                           : NULL;
    return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                            "expected what the model is (associative, algebra or over), found "
                            "%s%s%s%s",
                            found.text, near == NULL ? "" : " (did you mean '",
                            near == NULL ? "" : near, near == NULL ? "" : "'?)");
}

/* A file name in quotation marks, taken from the text as it stands. */
static ids_status read_file(idsi_reader *reader, char **file)
{
    const size_t open = reader->at;
    if (reader->lexemes[open].kind != IDSI_LEX_QUOTE) {
        return expected(reader, "a file name in quotation marks");
    }
    do {
        reader->at++;
    } while (reader->lexemes[reader->at].kind != IDSI_LEX_QUOTE &&
             reader->lexemes[reader->at].kind != IDSI_LEX_END);
    if (reader->lexemes[reader->at].kind == IDSI_LEX_END ||
        reader->lexemes[reader->at].line != reader->lexemes[open].line) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, open,
                                "the file name is not closed; expected '\"' on the same line (a "
                                "name with # cannot be written)");
    }
    if (reader->at == open + 1) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, open, "an empty file name");
    }
    reader->at++;
    return copy_bytes(reader, reader->lexemes[open].offset + 1,
                      reader->lexemes[reader->at - 1].offset, file);
}

/* ---- words ----------------------------------------------------------------------------------- */

/* The argument a letter stands for, perhaps starred; UINT8_MAX when it is none. */
static uint8_t find_letter(const idsi_reader *reader, const idsi_pattern *pattern, size_t lexeme)
{
    const idsi_lexeme *at = &reader->lexemes[lexeme];
    for (uint32_t i = 0; i < pattern->count; i++) {
        const idsi_lexeme *argument = &reader->lexemes[pattern->argument[i]];
        if (idsi_lexeme_same(reader, lexeme, pattern->argument[i])) {
            return (uint8_t)i;
        }
        if (at->length == argument->length + 1 &&
            memcmp(reader->text + at->offset, reader->text + argument->offset, argument->length) ==
                0 &&
            reader->text[at->offset + argument->length] == '\'') {
            return (uint8_t)(i | IDSI_STARRED);
        }
    }
    return UINT8_MAX;
}

static ids_status read_letters(idsi_reader *reader, const idsi_pattern *pattern, idsi_word *word)
{
    const size_t begin = reader->at;
    uint32_t used = 0;
    for (uint32_t i = 0; i < pattern->count; i++) {
        const idsi_shown found = idsi_reader_show(reader, reader->at);
        if (reader->lexemes[reader->at].kind != IDSI_LEX_NAME) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, i == 0 ? reader->at : begin,
                                    "expected a word in which each of the %u arguments of the "
                                    "operation stands once, separated by blanks, found %s",
                                    pattern->count, i == 0 ? found.text : "fewer letters");
        }
        word->letter[i] = find_letter(reader, pattern, reader->at);
        if (word->letter[i] == UINT8_MAX) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                    "%s is not an argument of the operation on the left; expected "
                                    "one of them, or one with ' for its image under the involution",
                                    found.text);
        }
        const uint32_t bit = 1u << (word->letter[i] & ~IDSI_STARRED);
        if ((used & bit) != 0) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, reader->at,
                                    "%s stands twice in a word; expected each argument once",
                                    found.text);
        }
        used |= bit;
        reader->at++;
    }
    return IDS_OK;
}

static ids_status read_word(idsi_reader *reader, const idsi_pattern *pattern, int sign,
                            idsi_realization *made)
{
    ids_status st = IDS_OK;
    bool number = false;
    idsi_word word = {0};
    mpq_init(word.coefficient);
    IDSI_TRY(idsi_reader_coefficient(reader, word.coefficient, &number));
    if (number && mpq_sgn(word.coefficient) == 0 &&
        reader->lexemes[reader->at].kind != IDSI_LEX_NAME) {
        goto done;
    }
    IDSI_TRY(read_letters(reader, pattern, &word));
    if (sign < 0) {
        mpq_neg(word.coefficient, word.coefficient);
    }
    IDSI_TRY(idsi_grow(reader->ctx, made->count, &made->capacity, sizeof word, &made->words));
    /* The number moves with the word. */
    made->words[made->count++] = word;
    return IDS_OK;
done:
    mpq_clear(word.coefficient);
    return st;
}

static int compare_words(const void *a, const void *b)
{
    return memcmp(((const idsi_word *)a)->letter, ((const idsi_word *)b)->letter, IDS_MAX_ARITY);
}

/* Sorts the words, collects equal ones, drops zeros. */
static void collect_words(idsi_realization *made)
{
    size_t kept = 0;
    if (made->count > 1) {
        qsort(made->words, made->count, sizeof *made->words, compare_words);
    }
    for (size_t i = 0; i < made->count; i++) {
        idsi_word *word = &made->words[i];
        if (kept > 0 && compare_words(word, &made->words[kept - 1]) == 0) {
            mpq_add(made->words[kept - 1].coefficient, made->words[kept - 1].coefficient,
                    word->coefficient);
            mpq_clear(word->coefficient);
        } else {
            made->words[kept++] = *word;
        }
        if (mpq_sgn(made->words[kept - 1].coefficient) == 0 &&
            (i + 1 == made->count ||
             compare_words(&made->words[i + 1], &made->words[kept - 1]) != 0)) {
            mpq_clear(made->words[--kept].coefficient);
        }
    }
    made->count = kept;
}

static ids_status read_words(idsi_reader *reader, const idsi_pattern *pattern,
                             idsi_realization *made)
{
    ids_status st = IDS_OK;
    bool first = true;
    for (;;) {
        const idsi_lexeme_kind kind = reader->lexemes[reader->at].kind;
        const bool sign = kind == IDSI_LEX_PLUS || kind == IDSI_LEX_MINUS;
        if (!sign && !first) {
            break;
        }
        reader->at += sign;
        first = false;
        IDSI_TRY(read_word(reader, pattern, kind == IDSI_LEX_MINUS ? -1 : 1, made));
    }
    IDSI_TRY(idsi_reader_end(reader, "'+', '-' or the end of the line after a word"));
    collect_words(made);
done:
    return st;
}

/* Whether argument i going to place image[i] multiplies the words by sign. */
static bool has_symmetry(const idsi_realization *made, const uint8_t *image, int sign)
{
    for (size_t w = 0; w < made->count; w++) {
        idsi_word moved = {0};
        bool found = false;
        for (uint32_t i = 0; i < made->arity; i++) {
            const uint8_t letter = made->words[w].letter[i];
            moved.letter[i] = (uint8_t)(image[letter & ~IDSI_STARRED] | (letter & IDSI_STARRED));
        }
        for (size_t v = 0; !found && v < made->count; v++) {
            mpq_srcptr a = made->words[w].coefficient;
            mpq_srcptr b = made->words[v].coefficient;
            found = compare_words(&moved, &made->words[v]) == 0 &&
                    (mpq_sgn(a) == mpq_sgn(b)) == (sign > 0) &&
                    mpz_cmpabs(mpq_numref(a), mpq_numref(b)) == 0 &&
                    mpz_cmp(mpq_denref(a), mpq_denref(b)) == 0;
        }
        if (!found) {
            return false;
        }
    }
    return true;
}

/* Whether the words have the symmetry of the operation. */
static bool is_symmetric(const idsi_group *group, const idsi_realization *made)
{
    uint8_t image[IDS_MAX_ARITY];
    if (group->symmetry == IDS_SYMMETRY_GENERATED) {
        for (uint64_t e = 0; e < group->order; e++) {
            if (!has_symmetry(made, group->elements[e].image, group->elements[e].sign)) {
                return false;
            }
        }
        return true;
    }
    for (uint32_t k = 0; group->symmetry != IDS_SYMMETRY_NONE && k + 1 < made->arity; k++) {
        for (uint32_t i = 0; i < made->arity; i++) {
            image[i] = (uint8_t)(i == k ? k + 1 : i == k + 1 ? k : i);
        }
        if (!has_symmetry(made, image, group->symmetry == IDS_SYMMETRY_ALTERNATING ? -1 : 1)) {
            return false;
        }
    }
    return true;
}

/* ---- polynomials over another presentation --------------------------------------------------- */

/* Keeps the rest of the statement as text, one blank where there were any. */
static ids_status keep_text(idsi_reader *reader, idsi_realization *made)
{
    ids_status st = IDS_OK;
    const size_t begin = reader->at;
    idsi_text text;
    idsi_text_init(&text, reader->ctx);
    if (reader->lexemes[reader->at].kind == IDSI_LEX_END) {
        st = expected(reader, "a polynomial in the operations of the other presentation");
        goto done;
    }
    for (; reader->lexemes[reader->at].kind != IDSI_LEX_END; reader->at++) {
        const idsi_lexeme *at = &reader->lexemes[reader->at];
        if (at->kind == IDSI_LEX_EQUAL || at->kind == IDSI_LEX_COLON) {
            st = expected(reader, "one polynomial, up to the end of the line");
            goto done;
        }
        if (reader->at > begin && (!at->glued || at->first)) {
            IDSI_TRY(idsi_text_puts(&text, " "));
        }
        IDSI_TRY(idsi_text_append(&text, reader->text + at->offset, at->length));
    }
    const idsi_lexeme *last = &reader->lexemes[reader->at++ - 1];
    made->end = last->offset + last->length;
    IDSI_TRY(idsi_text_take(&text, &made->text));
done:
    idsi_text_clear(&text);
    return st;
}

/* ---- one line -------------------------------------------------------------------------------- */

static ids_status find_operation(idsi_reader *reader, const idsi_pattern *pattern, uint32_t *op)
{
    const size_t found =
        idsi_reader_operation(reader, pattern->notation, pattern->open, pattern->count);
    if (found == SIZE_MAX) {
        return idsi_reader_fail(reader, IDS_ERR_PARSE, pattern->first,
                                "no operation with %u arguments is written like this; expected "
                                "one that is declared above",
                                pattern->count);
    }
    *op = (uint32_t)found;
    return idsi_reader_check_declared(reader, found, pattern->open);
}

static ids_status read_realization(idsi_reader *reader, idsi_model *model)
{
    ids_status st = IDS_OK;
    idsi_pattern pattern = {0};
    uint32_t op = 0;
    IDSI_TRY(idsi_reader_pattern(reader, &pattern));
    IDSI_TRY(find_operation(reader, &pattern, &op));
    const idsi_realization *other = idsi_model_realization(model, op);
    if (other != NULL) {
        st = idsi_reader_fail(reader, IDS_ERR_PARSE, pattern.first,
                              "the model %s realises this operation in line %u already",
                              model->name, other->place.line);
        goto done;
    }
    if (reader->lexemes[reader->at].kind != IDSI_LEX_EQUAL) {
        st = expected(reader, "'=' and what the operation is in the model");
        goto done;
    }
    reader->at++;
    IDSI_TRY(
        idsi_grow(reader->ctx, model->count, &model->capacity, sizeof *model->list, &model->list));
    idsi_realization *made = &model->list[model->count++];
    *made = (idsi_realization){.op = op,
                               .arity = pattern.count,
                               .place = {reader->lexemes[reader->at].line,
                                         reader->lexemes[reader->at].column},
                               .begin = reader->lexemes[reader->at].offset};
    for (uint32_t i = 0; i < pattern.count; i++) {
        IDSI_TRY(idsi_lexeme_copy(reader, pattern.argument[i], &made->letters[i]));
    }
    if (model->kind == IDS_MODEL_OVER) {
        IDSI_TRY(keep_text(reader, made));
    } else {
        IDSI_TRY(read_words(reader, &pattern, made));
        if (!is_symmetric(&reader->presentation->sig->ops[op].group, made)) {
            st = idsi_reader_fail(reader, IDS_ERR_DOMAIN, pattern.first,
                                  "the words do not have the symmetry that this operation is "
                                  "declared with: changing its arguments accordingly gives "
                                  "something else");
        }
    }
done:
    return st;
}

/* The model of this name, which must be of this kind and file; a new one when there is none. */
static ids_status get_model(idsi_reader *reader, size_t lexeme, idsi_model *head,
                            idsi_model **model)
{
    ids_presentation *pres = reader->presentation;
    ids_status st = IDS_OK;
    IDSI_ASSERT(head->name != NULL);
    for (size_t i = 0; i < pres->model_count; i++) {
        idsi_model *known = &pres->models[i];
        if (strcmp(known->name, head->name) != 0) {
            continue;
        }
        if (known->kind == IDS_MODEL_ALGEBRA || known->kind != head->kind ||
            (head->file != NULL && strcmp(known->file, head->file) != 0)) {
            return idsi_reader_fail(reader, IDS_ERR_PARSE, lexeme,
                                    "the name %s is that of the model in line %u, which is not "
                                    "the same; expected another name",
                                    known->name, known->line);
        }
        *model = known;
        return IDS_OK;
    }
    IDSI_TRY(idsi_grow(reader->ctx, pres->model_count, &reader->model_capacity,
                       sizeof *pres->models, &pres->models));
    *model = &pres->models[pres->model_count++];
    **model = *head;
    *head = (idsi_model){0};
done:
    return st;
}

ids_status idsi_reader_model(idsi_reader *reader)
{
    const size_t begin = reader->at;
    idsi_model head = {.line = reader->lexemes[begin].line,
                       .column = reader->lexemes[begin].column,
                       .lexeme = begin};
    idsi_model *model = NULL;
    ids_status st = IDS_OK;
    IDSI_TRY(read_name(reader, &head.name));
    IDSI_TRY(read_kind(reader, &head.kind));
    const bool complete = head.kind == IDS_MODEL_ALGEBRA;
    if (head.kind != IDS_MODEL_ASSOCIATIVE) {
        IDSI_TRY(read_file(reader, &head.file));
    }
    IDSI_TRY(get_model(reader, begin, &head, &model));
    IDSI_ASSERT(model != NULL);
    if (complete) {
        st = idsi_reader_end(reader, "the end of the line after the file of an algebra");
        goto done;
    }
    if (reader->lexemes[reader->at].kind != IDSI_LEX_COLON) {
        st = expected(reader, "':' and an operation, as in: model special associative: "
                              "a*b = a b + b a");
        goto done;
    }
    reader->at++;
    IDSI_TRY(read_realization(reader, model));
done:
    idsi_model_clear(reader->ctx, &head);
    return st;
}

ids_status idsi_reader_check_models(idsi_reader *reader)
{
    const ids_presentation *pres = reader->presentation;
    ids_status st = IDS_OK;
    char *name = NULL;
    for (size_t i = 0; i < pres->model_count; i++) {
        const idsi_model *model = &pres->models[i];
        for (uint32_t op = 0; op < pres->sig->count; op++) {
            if (model->kind == IDS_MODEL_ALGEBRA || idsi_model_realization(model, op) != NULL) {
                continue;
            }
            IDSI_TRY(ids_signature_print_operation(reader->ctx, pres->sig, op, &name));
            st = idsi_reader_fail(reader, IDS_ERR_PARSE, model->lexeme,
                                  "the model %s does not realise the operation %s; expected a "
                                  "further line of this model for it",
                                  model->name, name);
            goto done;
        }
    }
done:
    idsi_free(reader->ctx, name);
    return st;
}
