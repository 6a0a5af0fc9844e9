/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The tool `idspan`: reads the command line and a presentation, runs one task, and turns what
 * came of it into messages and an exit status.
 *
 * The tasks stand in a table; each has its own file and knows nothing of the others.
 */
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>

#include "tool.h"

const task *const task_list[] = {&task_show, &task_types,   &task_basis, &task_count,  &task_rank,
                                 &task_draw, &task_follows, &task_check, &task_fresh,
                                 &task_matrix, NULL};

const task *task_find(const char *name)
{
    for (size_t i = 0; task_list[i] != NULL; i++) {
        if (strcmp(task_list[i]->name, name) == 0) {
            return task_list[i];
        }
    }
    return NULL;
}

ids_status session_fail(session *s, ids_status status, const char *format, ...)
{
    va_list args;

    va_start(args, format);
    vsnprintf(s->failure, sizeof s->failure, format, args);
    va_end(args);
    return status;
}

ids_status session_poll(void)
{
    return interrupted() ? IDS_ERR_CANCELLED : IDS_OK;
}

static int exit_status(ids_status status, const settings *set)
{
    switch (status) {
    case IDS_OK:
        return EXIT_DONE;
    case IDS_ERR_NOMEM:
    case IDS_ERR_LIMIT:
        return EXIT_LIMIT;
    case IDS_ERR_UNABLE: /* a method at its end; of a folder: somebody else is in it */
        return set->run == NULL ? EXIT_LIMIT : EXIT_INPUT;
    case IDS_ERR_CANCELLED:
        return EXIT_INTERRUPTED;
    default:
        return EXIT_INPUT;
    }
}

/* Explains a failure; the library's message is the text where it has one. */
static void explain(const session *s, ids_status status)
{
    const char *message = s->failure[0] != '\0' ? s->failure : ids_ctx_message(s->ctx);

    if (status == IDS_ERR_IO && s->failure[0] == '\0') {
        return; /* output_close() knows the reason */
    }
    if (status == IDS_ERR_CANCELLED && s->failure[0] == '\0') {
        message = "interrupted";
    } else if (message[0] == '\0') {
        message = ids_status_text(status);
    }
    /* Other limits (degree, 64 bits) do not depend on the budget, which this one names. */
    if (status == IDS_ERR_LIMIT && strstr(message, "budget") != NULL) {
        complain("%s; raise it with --memory", message);
    } else {
        complain("%s", message);
    }
}

const char *session_source(const session *s)
{
    if (s->set->file == NULL) {
        return "";
    }
    return strcmp(s->set->file, "-") == 0 ? "standard input" : s->set->file;
}

static ids_status read_file(session *s)
{
    if (s->set->file == NULL) {
        interrupt_watch(s->ctx);
        return IDS_OK; /* the task knows where to look */
    }
    if (!input_read(s->set->file, &s->text, &s->length)) {
        return IDS_ERR_IO;
    }
    interrupt_watch(s->ctx);
    if (s->set->task->wants_text) {
        return IDS_OK;
    }
    return ids_presentation_read(s->ctx, s->text, s->length, session_source(s), &s->pres);
}

/* An identity x = 0 is hardly what anybody meant. */
static void warn_of_degree_one(const session *s)
{
    for (size_t i = 0; i < ids_presentation_count(s->pres, IDS_ROLE_IDENTITY); i++) {
        ids_identity_info info = {0};
        if (ids_presentation_info(s->pres, IDS_ROLE_IDENTITY, i, &info) == IDS_OK &&
            info.degree == 1 && info.linear_terms > 0) {
            complain("warning: %s:%u: an identity of degree 1 makes everything 0",
                     session_source(s), (unsigned)info.line);
        }
    }
}

static int run(const settings *set)
{
    session s = {.set = set};
    ids_ctx_options options = {.struct_size = sizeof options,
                               .byte_budget = set->memory,
                               .progress = progress_hook,
                               .threads = set->threads};
    int result = EXIT_INPUT;
    ids_status st = ids_ctx_create(&options, &s.ctx);

    if (st != IDS_OK) {
        complain("%s", ids_status_text(st));
        return exit_status(st, set);
    }
    st = read_file(&s);
    if (st != IDS_OK) {
        explain(&s, st);
        result = exit_status(st, set);
        goto done;
    }
    warn_of_degree_one(&s);
    if (!output_open(&s.out, set->output)) {
        goto done;
    }
    progress_start(set->task->name);
    st = set->task->run(&s);
    result = st == IDS_OK && s.no ? EXIT_NO : exit_status(st, set);
    progress_clear();
    if (st != IDS_OK) {
        explain(&s, st);
    }
    if (!output_close(&s.out, st == IDS_OK || s.keep)) {
        result = EXIT_INPUT;
    }
done:
    interrupt_watch(NULL);
    ids_presentation_free(s.pres);
    free(s.text);
    ids_ctx_free(s.ctx);
    return result;
}

/* Help and version are results too: a full disk must not pass for success. */
static int answer(const settings *set)
{
    output out = {.file = stdout, .name = "standard output"};

    if ((set->seen & BIT(OPTION_VERSION)) != 0) {
        fputs("idspan " IDS_VERSION_STRING "\n", stdout);
    } else if (set->task != NULL) {
        help_task(stdout, set->task);
    } else {
        help_general(stdout);
    }
    return output_close(&out, true) ? EXIT_DONE : EXIT_INPUT;
}

int main(int argc, char **argv)
{
    settings set;

    if (argc < 2) {
        help_general(stderr);
        return EXIT_INPUT;
    }
    if (!settings_read(argc, argv, &set)) {
        return EXIT_INPUT;
    }
    if ((set.seen & (BIT(OPTION_HELP) | BIT(OPTION_VERSION))) != 0) {
        return answer(&set);
    }
    return run(&set);
}
