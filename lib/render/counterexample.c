/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Multiplication tables of counterexamples as LaTeX: an eqnarray, a line a product that is not 0
 * (of those that a symmetry relates, one), after a sentence with the values of the variables. The
 * lines are those of the algebra file.
 */
#include <string.h>

#include <idspan/follows.h>

#include "../answer/counterexample_private.h"
#include "render_private.h"

/* One part of a line as a formula. */
static ids_status put_part(idsi_text *out, const char *begin, size_t length)
{
    ids_status st = IDS_OK;
    idsi_text part;

    idsi_text_init(&part, out->ctx);
    IDSI_TRY(idsi_text_append(&part, begin, length));
    IDSI_TRY(idsi_latex_formula(out, part.data));
done:
    idsi_text_clear(&part);
    return st;
}

/* "A = B" as "A &=& B"; *lines counts them. */
static ids_status put_product(idsi_text *out, const char *line, size_t length, size_t *lines)
{
    ids_status st = IDS_OK;
    const char *equal = memchr(line, '=', length);
    const size_t left = (size_t)(equal - line);

    IDSI_TRY(idsi_text_puts(out, *lines == 0 ? "\\begin{eqnarray*}\n  " : " \\\\\n  "));
    IDSI_TRY(put_part(out, line, left - 1));
    IDSI_TRY(idsi_text_puts(out, " &=& "));
    IDSI_TRY(put_part(out, equal + 2, length - left - 2));
    (*lines)++;
done:
    return st;
}

static bool begins(const char *line, size_t length, const char *text)
{
    return length >= strlen(text) && memcmp(line, text, strlen(text)) == 0;
}

/* The file, line by line. */
static ids_status put_file(idsi_text *out, const char *file)
{
    static const char values[] = "# fails at ";
    ids_status st = IDS_OK;
    size_t lines = 0;

    for (const char *line = file; *line != '\0';) {
        const size_t length = strcspn(line, "\n");
        if (begins(line, length, values)) {
            IDSI_TRY(idsi_text_puts(out, "% the candidate fails at\n$"));
            IDSI_TRY(put_part(out, line + strlen(values), length - strlen(values)));
            IDSI_TRY(idsi_text_puts(out, "$\n% in the algebra with the products\n"));
        } else if (line[0] != '#' && !begins(line, length, "basis ") &&
                   !begins(line, length, "operation ")) {
            IDSI_TRY(put_product(out, line, length, &lines));
        }
        line += length + (line[length] == '\n');
    }
    IDSI_TRY(idsi_text_puts(out, lines > 0 ? "\n\\end{eqnarray*}\n" : ""));
done:
    return st;
}

ids_status ids_counterexample_latex(ids_ctx *ctx, const ids_counterexample *counterexample,
                                    ids_sink_fn sink, void *sink_user)
{
    ids_status st = IDS_OK;
    idsi_text file;
    idsi_text out;

    if (ctx == NULL || counterexample == NULL || sink == NULL) {
        return idsi_fail_arg(ctx, "context, counterexample or sink");
    }
    idsi_text_init(&file, ctx);
    idsi_text_init(&out, ctx);
    IDSI_TRY(idsi_counterexample_text(counterexample, &file));
    IDSI_TRY(put_file(&out, file.data));
    if (sink(sink_user, out.data, out.length) != 0) {
        st = idsi_fail(ctx, IDS_ERR_IO, "the output was refused");
    }
done:
    idsi_text_clear(&file);
    idsi_text_clear(&out);
    return st;
}
