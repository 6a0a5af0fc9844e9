/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan matrix: the matrix of consequences of a degree as a file, the names of its columns as
 * another one beside it.
 */
#include <string.h>

#include "tool.h"

#define LONGEST_NAME 4096u

/* M.cols for M.mtx, and for any other name with .cols added. False when it is too long. */
static bool name_columns(const char *matrix, char name[LONGEST_NAME])
{
    size_t length = strlen(matrix);
    int used = 0;

    if (length > 4 && strcmp(matrix + length - 4, ".mtx") == 0) {
        length -= 4;
    }
    used = snprintf(name, LONGEST_NAME, "%.*s.cols", (int)length, matrix);
    return used > 0 && (size_t)used < LONGEST_NAME;
}

static ids_status write_columns(session *s, const ids_matrix *matrix, const char *name)
{
    output side = {0};
    ids_status st = IDS_OK;

    if (output_is_file(name, s->set->file)) {
        complain("the names of the columns would overwrite \"%s\", the file that is read", name);
        return IDS_ERR_IO;
    }
    if (!output_open(&side, name)) {
        return IDS_ERR_IO;
    }
    st = ids_matrix_write_columns(s->ctx, matrix, output_sink, &side);
    if (!output_close(&side, st == IDS_OK)) {
        st = IDS_ERR_IO;
    }
    return st;
}

static ids_status write_summary(const session *s, const ids_matrix *matrix, const char *name)
{
    output screen = {.file = stdout, .name = "standard output"};
    ids_status st = IDS_OK;

    TRY(output_printf(&screen, "Degree %u: %s row%s, %s column%s, %s entr%s",
                      (unsigned)s->set->first_degree, digits_of(ids_matrix_rows(matrix)).text,
                      plural(ids_matrix_rows(matrix)), digits_of(ids_matrix_columns(matrix)).text,
                      plural(ids_matrix_columns(matrix)),
                      digits_of(ids_matrix_entries(matrix)).text,
                      ids_matrix_entries(matrix) == 1 ? "y" : "ies"));
    if (ids_matrix_prime(matrix) > 0) {
        TRY(output_printf(&screen, " modulo %u", (unsigned)ids_matrix_prime(matrix)));
    }
    TRY(output_printf(&screen, ".\nThe matrix is in %s, the names of its columns in %s.\n",
                      s->set->output, name));
done:
    return output_close(&screen, true) ? st : IDS_ERR_IO;
}

static ids_status run(session *s)
{
    const settings *set = s->set;
    ids_matrix_options options = {.struct_size = sizeof options,
                                  .plain = (set->seen & BIT(OPTION_PLAIN)) != 0,
                                  .field = set->field,
                                  .seed = set->seed};
    ids_matrix *matrix = NULL;
    char name[LONGEST_NAME] = "";
    ids_status st = IDS_OK;

    if (set->output == NULL || strcmp(set->output, "-") == 0 || !name_columns(set->output, name)) {
        return session_fail(s, IDS_ERR_ARG,
                            "\"matrix\" writes two files: name the first with --output M.mtx; the "
                            "names of the columns go to M.cols");
    }
    TRY(ids_matrix_create(s->ctx, s->pres, set->first_degree, &options, &matrix));
    TRY(ids_matrix_write(s->ctx, matrix, output_sink, &s->out));
    TRY(write_columns(s, matrix, name));
    TRY(write_summary(s, matrix, name));
done:
    ids_matrix_free(matrix);
    return st;
}

static const char *const formats[] = {"mtx", NULL};

const task task_matrix = {
    .name = "matrix",
    .usage = " --degree N --output M.mtx\n"
             "          [--plain | --field P | --seed S]",
    .summary = "write the matrix of the consequences of a degree",
    .details =
        "Writes a matrix whose rows span the consequences of the identities in one degree, in\n"
        "Matrix Market coordinate form, and the names of its columns, one a line, to the file\n"
        "M.cols beside it.\n"
        "\n"
        "The matrix is that of the quotient step: a column for each product of normal forms of\n"
        "lower degrees, a row for each identity in normal forms. Its entries are residues of\n"
        "least absolute value modulo a prime, which a comment in the file names: one drawn at\n"
        "random, or that of --field. With --plain there is a column for each monomial and a row\n"
        "for each consequence, an identity in monomials as a part of any product; its entries\n"
        "are integers. In degree 1 both are the same.",
    .examples = "  idspan matrix pair.pres --degree 6 --output step.mtx\n"
                "  idspan matrix pair.pres --degree 5 --plain --output all.mtx",
    .options = BIT(OPTION_DEGREE) | BIT(OPTION_PLAIN) | BIT(OPTION_FIELD) | BIT(OPTION_SEED),
    .wanted = BIT(OPTION_DEGREE),
    .formats = formats,
    .run = run,
};
