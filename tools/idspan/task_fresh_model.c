/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The model of idspan fresh: which one, and its file.
 *
 * The library asks for the file that a model names through a function; here it is opened, relative
 * to the folder of the presentation.
 */
#include <errno.h>
#include <stdlib.h>
#include <string.h>

#include "tool.h"

/* "a, b, c" of the names of models, as many as there is room for. */
static ids_status list_models(const session *s, char *list, size_t size)
{
    size_t used = 0;

    list[0] = '\0';
    for (size_t i = 0; i < ids_presentation_model_count(s->pres) && used + 80 < size; i++) {
        ids_model_info info = {0};
        ids_status st = ids_presentation_model(s->pres, i, &info);
        if (st != IDS_OK) {
            return st;
        }
        used += (size_t)snprintf(list + used, size - used, "%s%s", i > 0 ? ", " : "", info.name);
    }
    return IDS_OK;
}

/* The model of --model, or the only one. */
static ids_status find_model(session *s, size_t *index, const char **name)
{
    const size_t count = ids_presentation_model_count(s->pres);
    const char *names[64] = {0};
    const char *near = NULL;
    char list[1024] = "";

    for (size_t i = 0; i < count; i++) {
        ids_model_info info = {0};
        ids_status st = ids_presentation_model(s->pres, i, &info);
        if (st != IDS_OK) {
            return st;
        }
        if (s->set->model == NULL ? count == 1 : strcmp(info.name, s->set->model) == 0) {
            *index = i;
            *name = info.name;
            return IDS_OK;
        }
        if (i < 63) {
            names[i] = info.name;
        }
    }
    if (count == 0) {
        return session_fail(s, IDS_ERR_ARG,
                            "%s has no models: write one as \"model NAME associative: ...\"",
                            session_source(s));
    }
    ids_status st = list_models(s, list, sizeof list);
    if (st != IDS_OK) {
        return st;
    }
    if (s->set->model == NULL) {
        return session_fail(s, IDS_ERR_ARG, "%s has %zu models: choose one with --model, of %s",
                            session_source(s), count, list);
    }
    near = help_nearest(s->set->model, names);
    if (near != NULL) {
        return session_fail(s, IDS_ERR_ARG, "%s has no model \"%s\"; did you mean \"%s\"?",
                            session_source(s), s->set->model, near);
    }
    return session_fail(s, IDS_ERR_ARG, "%s has no model \"%s\"; it has %s", session_source(s),
                        s->set->model, list);
}

/* Path of a file that is named in the presentation; the caller frees it. */
static char *path_of(const session *s, const char *name)
{
    const char *slash = strcmp(s->set->file, "-") == 0 ? NULL : strrchr(s->set->file, '/');
    size_t folder = slash == NULL || name[0] == '/' ? 0 : (size_t)(slash + 1 - s->set->file);
    size_t length = strlen(name) + 1;
    char *path = malloc(folder + length);

    if (path != NULL) {
        memcpy(path, s->set->file, folder);
        memcpy(path + folder, name, length);
    }
    return path;
}

/* An ids_load_fn; what went wrong is left in s->failure. */
static int load(void *user, const char *name, ids_sink_fn sink, void *sink_user)
{
    session *s = user;
    char *path = path_of(s, name);
    FILE *file = path == NULL ? NULL : fopen(path, "rb");
    char bytes[4096];
    size_t got = 0;
    int result = 0;

    if (file == NULL) {
        session_fail(s, IDS_ERR_IO, "%s", strerror(errno));
        free(path);
        return -1;
    }
    while (result == 0 && (got = fread(bytes, 1, sizeof bytes, file)) > 0) {
        result = sink(sink_user, bytes, got);
    }
    if (ferror(file)) {
        session_fail(s, IDS_ERR_IO, "%s", strerror(errno));
        result = -1;
    }
    fclose(file);
    free(path);
    return result;
}

/* The reason why the file of a model cannot be read goes into the library's message. */
ids_status fresh_model_open(session *s, const char **name, ids_model **model)
{
    ids_status st = IDS_OK;
    size_t index = 0;
    char reason[256] = "";

    TRY(find_model(s, &index, name));
    st = ids_model_open(s->ctx, s->pres, index, load, s, model);
    if (st == IDS_ERR_IO) {
        const char *message = ids_ctx_message(s->ctx);
        const int line = (int)strcspn(message, "\n");
        snprintf(reason, sizeof reason, "%.255s", s->failure);
        session_fail(s, st, "%.*s: %s%s", line, message, reason, message + line);
    }
done:
    return st;
}
