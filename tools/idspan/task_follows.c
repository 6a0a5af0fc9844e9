/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * idspan follows: which candidates of the file follow from its identities.
 *
 * The answer comes from ranks by partition. A proof or witness that was asked for makes it exact;
 * when none can be found, the answer is written all the same, and then the reason.
 */
#include <stdlib.h>
#include <string.h>

#include "tool.h"

enum { CANDIDATE, DEGREE, FOLLOWS, CERTAINTY, COLUMNS };

#define NAME_CHARS 72u

/* What has been found so far. */
typedef struct tally {
    ids_writer *writer;
    size_t count;
    size_t following;
    char name[NAME_CHARS]; /* of the last candidate */
    char certainty[80];    /* of its answer, for the verdict */
    ids_status failed;     /* what kept a proof or witness from being made */
} tally;

/* The name of a candidate, or # and its number from 1. */
static void name_candidate(const ids_identity_info *info, size_t index, char name[NAME_CHARS])
{
    if (info->name[0] != '\0') {
        snprintf(name, NAME_CHARS, "%s", info->name);
    } else {
        snprintf(name, NAME_CHARS, "#%zu", index + 1);
    }
}

/* The candidate of --candidate, or the only one. */
static ids_status find_candidate(session *s, size_t *index)
{
    const char *wanted = s->set->candidate;
    size_t count = ids_presentation_count(s->pres, IDS_ROLE_CANDIDATE);
    char kept[64][NAME_CHARS] = {{0}};
    const char *names[65] = {0};
    const char *near = NULL;
    char list[1024] = "";
    size_t used = 0;

    for (size_t i = 0; i < count; i++) {
        ids_identity_info info = {0};
        char name[NAME_CHARS];
        ids_status st = ids_presentation_info(s->pres, IDS_ROLE_CANDIDATE, i, &info);
        if (st != IDS_OK) {
            return st;
        }
        name_candidate(&info, i, name);
        if (wanted == NULL ? count == 1 : strcmp(name, wanted) == 0) {
            *index = i;
            return IDS_OK;
        }
        if (i < 64) {
            names[i] = memcpy(kept[i], name, sizeof name);
        }
        if (used + NAME_CHARS + 8 < sizeof list) {
            used += (size_t)snprintf(list + used, sizeof list - used, "%s%s", i > 0 ? ", " : "",
                                     name);
        }
    }
    if (count == 0) {
        return session_fail(s, IDS_ERR_ARG,
                            "%s has no candidates: write one as \"candidate NAME: ...\"",
                            session_source(s));
    }
    if (wanted == NULL) {
        return session_fail(s, IDS_ERR_ARG,
                            "%s has %zu candidates: ask for --all, or choose one with --candidate, "
                            "of %s",
                            session_source(s), count, list);
    }
    near = help_nearest(wanted, names);
    if (near != NULL) {
        return session_fail(s, IDS_ERR_ARG, "%s has no candidate \"%s\"; did you mean \"%s\"?",
                            session_source(s), wanted, near);
    }
    return session_fail(s, IDS_ERR_ARG, "%s has no candidate \"%s\"; it has %s",
                        session_source(s), wanted, list);
}

/* ---- proofs and witnesses -------------------------------------------------------------------- */

static ids_status write_proof(session *s, size_t index, const ids_follows_options *options)
{
    ids_status st = IDS_OK;
    ids_derivation *derivation = NULL;
    output out = {0};

    TRY(ids_derivation_find(s->ctx, s->pres, index, options, &derivation));
    if (!output_open(&out, s->set->proof)) {
        st = IDS_ERR_IO;
        goto done;
    }
    if (s->set->format == IDS_FORMAT_LATEX) {
        st = ids_derivation_latex(s->ctx, derivation, output_sink, &out);
    } else {
        st = ids_derivation_write(s->ctx, derivation, output_sink, &out);
    }
    if (!output_close(&out, st == IDS_OK)) {
        st = IDS_ERR_IO;
    }
done:
    ids_derivation_free(derivation);
    return st;
}

static ids_status write_witness(session *s, size_t index, const ids_follows_options *options)
{
    ids_status st = IDS_OK;
    ids_witness *witness = NULL;
    output out = {0};

    TRY(ids_witness_find(s->ctx, s->pres, index, options, &witness));
    if (!output_open(&out, s->set->witness)) {
        st = IDS_ERR_IO;
        goto done;
    }
    st = ids_witness_write(s->ctx, witness, output_sink, &out);
    if (!output_close(&out, st == IDS_OK)) {
        st = IDS_ERR_IO;
    }
done:
    ids_witness_free(witness);
    return st;
}

static ids_status write_algebra(session *s, size_t index, const ids_follows_options *options)
{
    ids_status st = IDS_OK;
    ids_counterexample *found = NULL;
    output out = {0};
    const ids_counterexample_options limits = {.struct_size = sizeof limits,
                                               .dimension = s->set->dimension,
                                               .entries = s->set->entries,
                                               .steps = s->set->steps,
                                               .seed = options->seed};

    TRY(ids_counterexample_find(s->ctx, s->pres, index, &limits, &found));
    if (!output_open(&out, s->set->algebra)) {
        st = IDS_ERR_IO;
        goto done;
    }
    if (s->set->format == IDS_FORMAT_LATEX) {
        st = ids_counterexample_latex(s->ctx, found, output_sink, &out);
    } else {
        st = ids_counterexample_write(s->ctx, found, output_sink, &out);
    }
    if (!output_close(&out, st == IDS_OK)) {
        st = IDS_ERR_IO;
    }
done:
    ids_counterexample_free(found);
    return st;
}

/* Explains why something was not written. */
static ids_status explain(session *s, ids_status st, const char *what)
{
    if (st != IDS_OK && st != IDS_ERR_IO) {
        session_fail(s, st, "no %s was written: %s", what, ids_ctx_message(s->ctx));
    }
    return st;
}

/* Says that a file was not written since the answer is another one. */
static void say_unwritten(option_id id, const char *file, const char *name, bool follows)
{
    if (file != NULL) {
        complain("no file for --%s was written: %s %s", option_list[id].name, name,
                 follows ? "follows" : "does not follow");
    }
}

/* Writes what was asked for and fits the answer; *proved when the answer is exact by it. */
static ids_status write_certificate(session *s, size_t index, const ids_follows_options *options,
                                    bool follows, bool *proved)
{
    ids_status st = IDS_OK;

    if (follows && s->set->proof != NULL) {
        TRY(explain(s, write_proof(s, index, options), "proof"));
        *proved = true;
    }
    if (!follows && s->set->witness != NULL) {
        TRY(explain(s, write_witness(s, index, options), "witness"));
        *proved = true;
    }
    if (!follows && s->set->algebra != NULL) {
        TRY(explain(s, write_algebra(s, index, options), "algebra"));
        *proved = true;
    }
done:
    return st;
}

/* ---- answers --------------------------------------------------------------------------------- */

/* A note with the partitions for which a candidate fails. */
static ids_status write_failures(session *s, const ids_follows *follows, tally *t)
{
    ids_status st = IDS_OK;
    char name[NAME_CHARS + 16];
    size_t count = ids_follows_count(follows);
    char **list = calloc(count + 1, sizeof *list);

    if (list == NULL) {
        return session_fail(s, IDS_ERR_NOMEM, "%s", ids_status_text(IDS_ERR_NOMEM));
    }
    for (size_t i = 0; i < count; i++) {
        ids_partition partition = {0};
        uint64_t more = 0;
        TRY(ids_follows_partition(follows, i, &partition, &more));
        TRY(ids_partition_print(s->ctx, &partition, &list[i]));
    }
    snprintf(name, sizeof name, "%s fails for", t->name);
    TRY(ids_writer_note_list(t->writer, name, (const char *const *)list, count));
done:
    for (size_t i = 0; i < count; i++) {
        ids_string_free(s->ctx, list[i]);
    }
    free(list);
    return st;
}

static ids_status answer_one(session *s, size_t index, tally *t)
{
    ids_status st = IDS_OK;
    ids_follows_options options = {
        .struct_size = sizeof options, .primes = s->set->primes, .seed = s->set->seed};
    ids_identity_info info = {0};
    ids_follows *follows = NULL;
    uint32_t bits = 0;
    bool proved = false;
    char certainty[24] = "exact";

    TRY(ids_presentation_info(s->pres, IDS_ROLE_CANDIDATE, index, &info));
    name_candidate(&info, index, t->name);
    TRY(ids_follows_decide(s->ctx, s->pres, index, &options, &follows));
    bool yes = ids_follows_answer(follows);
    t->failed = write_certificate(s, index, &options, yes, &proved);
    snprintf(t->certainty, sizeof t->certainty, "proved");
    if (!proved && ids_follows_certainty(follows, &bits) == IDS_CERTAINTY_MODULAR) {
        snprintf(certainty, sizeof certainty, "2^-%u", (unsigned)bits);
        snprintf(t->certainty, sizeof t->certainty, "wrong with probability at most 2^-%u",
                 (unsigned)bits);
    }
    digits degree = digits_of(info.degree);
    const char *cells[COLUMNS] = {t->name, degree.text, yes ? "yes" : "no", certainty};
    TRY(ids_writer_row(t->writer, cells));
    if (yes) {
        say_unwritten(OPTION_WITNESS, s->set->witness, t->name, true);
        say_unwritten(OPTION_ALGEBRA, s->set->algebra, t->name, true);
    } else {
        say_unwritten(OPTION_PROOF, s->set->proof, t->name, false);
    }
    t->count++;
    t->following += yes;
    if (!yes) {
        TRY(write_failures(s, follows, t));
    }
done:
    ids_follows_free(follows);
    return st;
}

static ids_status write_verdict(session *s, const tally *t)
{
    if (t->count == 1) {
        return output_printf(&s->out, "\n%s %s (%s).\n", t->name,
                             t->following == 1 ? "follows" : "does not follow", t->certainty);
    }
    return output_printf(&s->out, "\n%s of %s candidates follow.\n", digits_of(t->following).text,
                         digits_of(t->count).text);
}

static ids_status run(session *s)
{
    static const ids_column columns[COLUMNS] = {
        [CANDIDATE] = {"candidate", IDS_COLUMN_TEXT, 0},
        [DEGREE] = {"degree", IDS_COLUMN_NUMBER, 0},
        [FOLLOWS] = {"follows", IDS_COLUMN_TEXT, 0},
        [CERTAINTY] = {"certainty", IDS_COLUMN_MATH, 0},
    };
    ids_status st = IDS_OK;
    tally t = {0};
    size_t from = 0;
    size_t count = ids_presentation_count(s->pres, IDS_ROLE_CANDIDATE);

    if ((s->set->seen & BIT(OPTION_ALL)) == 0 || count == 0) {
        TRY(find_candidate(s, &from));
        count = from + 1;
    }
    TRY(ids_writer_create(s->ctx, s->set->format, "follows", columns, COLUMNS, output_sink, &s->out,
                          &t.writer));
    for (size_t i = from; i < count; i++) {
        TRY(answer_one(s, i, &t));
    }
    TRY(ids_writer_end(t.writer));
    if (s->set->format == IDS_FORMAT_TEXT) {
        TRY(write_verdict(s, &t));
    }
    s->no = t.following < t.count;
    s->keep = true;
    st = t.failed;
done:
    ids_writer_free(t.writer);
    return st;
}

static bool check(settings *read)
{
    const uint64_t limits = BIT(OPTION_DIMENSION) | BIT(OPTION_ENTRIES) | BIT(OPTION_STEPS);

    if (read->algebra == NULL && (read->seen & limits) != 0) {
        complain("--dimension, --entries and --steps are limits of --algebra FILE");
        return false;
    }
    return true;
}

const task task_follows = {
    .name = "follows",
    .usage = " [--candidate NAME] [--proof FILE] [--witness FILE]\n"
             "          [--algebra FILE [--dimension N] [--entries K] [--steps K]]\n"
             "          [--primes K] [--seed S]",
    .also = "FILE --all [--primes K] [--seed S]",
    .summary = "decide whether a candidate follows from the identities",
    .details =
        "A candidate is a statement `candidate NAME: ...` of the file. It follows when it is a\n"
        "consequence of the identities over the rational numbers. That is decided by ranks, a\n"
        "partition at a time; when it does not follow, a note lists the partitions for which it\n"
        "fails. `certainty` bounds the probability that the answer is wrong: 2^-k, or exact.\n"
        "\n"
        "--proof writes a derivation: the candidate as a sum of consequences, a line a term, with\n"
        "coefficient, identity, what its variables stand for, and the monomial around it; `_` is\n"
        "where the consequence stands. With --format latex it is a LaTeX formula. --witness\n"
        "writes a refutation: an integer for each monomial, such that all consequences get 0\n"
        "and the candidate does not. --algebra looks for a small algebra in which the\n"
        "identities hold and the candidate does not, and writes its multiplication table, as\n"
        "LaTeX with --format latex. All of them make the answer exact, and \"check\" verifies\n"
        "them.\n"
        "\n"
        "Exit status: 0 it follows, all of them with --all; 1 it does not.\n"
        "Columns: candidate,degree,follows,certainty",
    .examples = "  idspan follows pair.pres --all\n"
                "  idspan follows pair.pres --candidate exchange --proof exchange.proof\n"
                "  idspan follows pair.pres --candidate hybrid --witness hybrid.witness\n"
                "  idspan follows pair.pres --candidate hybrid --algebra hybrid.alg",
    .options = BIT(OPTION_CANDIDATE) | BIT(OPTION_ALL) | BIT(OPTION_PROOF) | BIT(OPTION_WITNESS) |
               BIT(OPTION_ALGEBRA) | BIT(OPTION_DIMENSION) | BIT(OPTION_ENTRIES) |
               BIT(OPTION_STEPS) | BIT(OPTION_PRIMES) | BIT(OPTION_SEED),
    .check = check,
    .run = run,
};
