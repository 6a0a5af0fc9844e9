/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The search for new identities of one degree.
 *
 * Partitions are taken one by one. In the weight space of a partition, with even letters, all of
 * what is new belongs to larger partitions or to this one; with odd letters, to smaller ones or
 * this one. The list of partitions, largest first, is cut in two so that the weight spaces are
 * small: the first part is gone through from the largest partition down with even letters, the
 * second from the smallest up with odd ones. What is found becomes known at once. So in each
 * weight space only this partition is new, and every dimension of it is one module.
 *
 * Each identity is read back from its text and verified: it holds in the model, and the
 * multiplicity of its partition in the quotient falls. In the end each is left out once, to see
 * what is lost without it; one that is not missed goes.
 */
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "fresh_private.h"

ids_status idsi_fresh_read(const ids_fresh *fresh, size_t without, ids_presentation **pres)
{
    ids_status st = IDS_OK;
    char *text = NULL;

    IDSI_TRY(idsi_fresh_text(fresh->ctx, fresh, without, false, &text));
    st = ids_presentation_read(fresh->ctx, text, strlen(text), "what is known", pres);
done:
    ids_string_free(fresh->ctx, text);
    return st;
}

static const ids_presentation *known_of(const ids_fresh *fresh)
{
    return fresh->known == NULL ? fresh->model->pres : fresh->known;
}

/* ---- verification ---------------------------------------------------------------------------- */

static ids_status count_quotient(const ids_fresh *fresh, const ids_presentation *pres,
                                 const ids_partition *partition, uint32_t *multiplicity)
{
    ids_status st = IDS_OK;
    idsi_laws *laws = NULL;
    idsi_partition_engine *engine = NULL;

    IDSI_TRY(idsi_laws_create(fresh->ctx, pres, &laws));
    IDSI_TRY(idsi_partition_create(fresh->ctx, laws, fresh->primes[0], partition->degree, &engine));
    st = idsi_partition_multiplicity(engine, partition->part, partition->length, multiplicity);
done:
    idsi_partition_free(engine);
    idsi_laws_free(laws);
    return st;
}

/* The last `count` identities of what is known hold in the model. */
static ids_status verify(ids_fresh *fresh, size_t count)
{
    ids_status st = IDS_OK;
    ids_model model = *fresh->model;
    const size_t all = ids_presentation_count(fresh->known, IDS_ROLE_IDENTITY);

    model.pres = fresh->known;
    for (size_t i = 0; i < count; i++) {
        idsi_found *found = &fresh->found[fresh->found_count - count + i];
        bool holds = false;
        double error = 0;
        IDSI_TRY(idsi_model_holds(fresh->ctx, &model, IDS_ROLE_IDENTITY, all - count + i,
                                  fresh->seed, &holds, &error));
        if (!holds) {
            st = idsi_fail(fresh->ctx, IDS_ERR_INTERNAL,
                           "the identity %s, found modulo primes, does not hold in the model",
                           found->name);
            goto done;
        }
        found->bits = error > 0 ? idsi_error_bits(error) : 0;
        fresh->doubt += error;
    }
done:
    return st;
}

/* Known is what was known and the last `count` identities; they must be `count` modules more. */
static ids_status make_known(ids_fresh *fresh, size_t count)
{
    ids_status st = IDS_OK;
    ids_presentation *more = NULL;
    const ids_partition *partition = &fresh->found[fresh->found_count - 1].partition;
    uint32_t before = 0;
    uint32_t after = 0;

    IDSI_TRY(idsi_fresh_read(fresh, SIZE_MAX, &more));
    IDSI_TRY(count_quotient(fresh, known_of(fresh), partition, &before));
    IDSI_TRY(count_quotient(fresh, more, partition, &after));
    if (after + count != before) {
        st = idsi_fail(fresh->ctx, IDS_ERR_INTERNAL,
                       "%zu identities that look new take a multiplicity from %u to %u", count,
                       before, after);
        goto done;
    }
    ids_presentation *old = fresh->known;
    fresh->known = more;
    more = old;
    st = verify(fresh, count);
done:
    ids_presentation_free(more);
    return st;
}

/* ---- one partition --------------------------------------------------------------------------- */

static bool name_is_taken(const ids_fresh *fresh, const char *name)
{
    for (size_t i = 0; i < fresh->model->pres->count; i++) {
        if (strcmp(fresh->model->pres->list[i].name, name) == 0) {
            return true;
        }
    }
    for (size_t i = 0; i < fresh->found_count; i++) {
        if (fresh->found[i].name != NULL && strcmp(fresh->found[i].name, name) == 0) {
            return true;
        }
    }
    return false;
}

static ids_status choose_name(const ids_fresh *fresh, idsi_found *found)
{
    char name[64];
    uint32_t number = 1;

    do {
        (void)snprintf(name, sizeof name, "%.40s-%u-%u", fresh->model->decl->name, found->degree,
                       number);
        number++;
    } while (name_is_taken(fresh, name));
    return idsi_strdup(fresh->ctx, name, &found->name);
}

static ids_status print_number(ids_ctx *ctx, mpz_srcptr number, char **out)
{
    ids_status st = IDS_OK;
    void *room = NULL;

    IDSI_TRY(idsi_alloc(ctx, mpz_sizeinbase(number, 10) + 2, &room));
    (void)mpz_get_str(room, 10, number);
    *out = room;
done:
    return st;
}

static ids_status add_found(ids_fresh *fresh, const idsi_space_search *s,
                            const ids_partition *partition, mpz_t *row, const idsi_first *first)
{
    ids_status st = IDS_OK;
    idsi_found found = {.degree = s->degree, .partition = *partition};

    IDSI_TRY(choose_name(fresh, &found));
    IDSI_TRY(idsi_found_write(s, row, &found));
    found.first_terms = first->terms;
    IDSI_TRY(print_number(fresh->ctx, first->largest, &found.first_largest));
    IDSI_TRY(idsi_grow(fresh->ctx, fresh->found_count, &fresh->found_capacity, sizeof *fresh->found,
                       &fresh->found));
    fresh->found[fresh->found_count++] = found;
    found = (idsi_found){0};
done:
    idsi_found_clear(fresh->ctx, &found);
    return st;
}

static ids_status search_partition(ids_fresh *fresh, const ids_fresh_row *row, bool odd)
{
    ids_status st = IDS_OK;
    idsi_space_search s;
    mpz_t *rows = NULL;
    idsi_first *first = NULL;
    const size_t want = (size_t)row->fresh;

    IDSI_TRY(idsi_space_open(&s, fresh->ctx, fresh->model, known_of(fresh), &row->partition, odd,
                             want, fresh->seed + row->degree));
    IDSI_TRY(idsi_alloc_array(fresh->ctx, want, sizeof *first, &first));
    for (size_t i = 0; i < want; i++) {
        mpz_init(first[i].largest);
    }
    IDSI_TRY(idsi_short_choose(&s, &rows, first));
    for (size_t i = 0; i < want; i++) {
        IDSI_TRY(add_found(fresh, &s, &row->partition, rows + i * s.monomials, &first[i]));
    }
    st = make_known(fresh, want);
done:
    for (size_t i = 0; first != NULL && i < want; i++) {
        mpz_clear(first[i].largest);
    }
    idsi_rows_clear(fresh->ctx, rows, want * s.monomials);
    idsi_free(fresh->ctx, first);
    idsi_space_close(&s);
    return st;
}

/* ---- all partitions -------------------------------------------------------------------------- */

/* log2 of the ways to put the letters of a partition, or of its conjugate, into places. */
static double content_bits(const ids_partition *partition, bool odd)
{
    double bits = idsi_factorial_bits(partition->degree);
    ids_partition shape = *partition;

    if (odd && ids_partition_conjugate(partition, &shape) != IDS_OK) {
        return INFINITY;
    }
    for (uint32_t i = 0; i < shape.length; i++) {
        bits -= idsi_factorial_bits(shape.part[i]);
    }
    return bits;
}

/* How many rows are taken with even letters, so that the weight spaces are smallest. Letters that
 * are to be alternated are a little harder to read. */
static size_t choose_cut(const ids_fresh_row *rows, size_t count)
{
    size_t best = count;
    double least = INFINITY;

    for (size_t cut = 0; cut <= count; cut++) {
        double sum = 0;
        for (size_t i = 0; i < count; i++) {
            if (rows[i].fresh > 0) {
                sum += exp2(content_bits(&rows[i].partition, i >= cut) + (i >= cut));
            }
        }
        if (sum < least) {
            least = sum;
            best = cut;
        }
    }
    return best;
}

/* Multiplicities in the quotient of all partitions in which something is new. */
static ids_status count_all(const ids_fresh *fresh, const ids_presentation *pres,
                            const ids_fresh_row *rows, size_t count, uint32_t *multiplicity)
{
    ids_status st = IDS_OK;
    idsi_laws *laws = NULL;
    idsi_partition_engine *engine = NULL;

    IDSI_TRY(idsi_laws_create(fresh->ctx, pres, &laws));
    IDSI_TRY(idsi_partition_create(fresh->ctx, laws, fresh->primes[0], rows[0].degree, &engine));
    for (size_t i = 0; i < count; i++) {
        if (rows[i].fresh > 0) {
            IDSI_TRY(idsi_partition_multiplicity(engine, rows[i].partition.part,
                                                 rows[i].partition.length, &multiplicity[i]));
        }
    }
done:
    idsi_partition_free(engine);
    idsi_laws_free(laws);
    return st;
}

/* "7, 6+1": the modules that are lost without an identity, "" when there are none. */
static ids_status print_lost(ids_ctx *ctx, const ids_fresh_row *rows, size_t count,
                             const uint32_t *all, const uint32_t *left, char **out)
{
    ids_status st = IDS_OK;
    bool any = false;
    idsi_text text;

    idsi_text_init(&text, ctx);
    IDSI_TRY(idsi_text_append(&text, "", 0));
    for (size_t i = 0; i < count; i++) {
        for (uint32_t k = all[i]; rows[i].fresh > 0 && k < left[i]; k++) {
            char partition[IDSI_PARTITION_TEXT];
            idsi_partition_write(&rows[i].partition, partition);
            IDSI_TRY(idsi_text_printf(&text, "%s%s", any ? ", " : "", partition));
            any = true;
        }
    }
    IDSI_TRY(idsi_text_take(&text, out));
done:
    idsi_text_clear(&text);
    return st;
}

static void remove_found(ids_fresh *fresh, size_t i)
{
    idsi_found_clear(fresh->ctx, &fresh->found[i]);
    memmove(&fresh->found[i], &fresh->found[i + 1],
            (fresh->found_count - i - 1) * sizeof *fresh->found);
    fresh->found_count--;
}

/* What is lost without each identity of a degree. One that is not missed goes: end of pass. */
static ids_status pass(ids_fresh *fresh, const ids_fresh_row *rows, size_t count,
                       const uint32_t *all, uint32_t *left, bool *dropped)
{
    ids_status st = IDS_OK;
    ids_presentation *without = NULL;

    *dropped = false;
    for (size_t i = fresh->found_count;
         !*dropped && i-- > 0 && fresh->found[i].degree == rows[0].degree;) {
        idsi_found *found = &fresh->found[i];
        idsi_free(fresh->ctx, found->modules);
        found->modules = NULL;
        IDSI_TRY(idsi_fresh_read(fresh, i, &without));
        IDSI_TRY(count_all(fresh, without, rows, count, left));
        IDSI_TRY(print_lost(fresh->ctx, rows, count, all, left, &found->modules));
        *dropped = found->modules[0] == '\0';
        if (*dropped) {
            remove_found(fresh, i);
        }
        ids_presentation_free(without);
        without = NULL;
        IDSI_TRY(idsi_poll(fresh->ctx, NULL));
    }
done:
    ids_presentation_free(without);
    return st;
}

/* Drops identities until each is missed when it is left out. */
static ids_status drop_needless(ids_fresh *fresh, const ids_fresh_row *rows, size_t count)
{
    ids_status st = IDS_OK;
    uint32_t *all = NULL;
    uint32_t *left = NULL;
    bool dropped = true;

    IDSI_TRY(idsi_alloc_array(fresh->ctx, count, sizeof *all, &all));
    IDSI_TRY(idsi_alloc_array(fresh->ctx, count, sizeof *left, &left));
    IDSI_TRY(count_all(fresh, known_of(fresh), rows, count, all));
    while (dropped) {
        IDSI_TRY(pass(fresh, rows, count, all, left, &dropped));
    }
done:
    idsi_free(fresh->ctx, all);
    idsi_free(fresh->ctx, left);
    return st;
}

/* Numbers the identities of a degree without gaps. */
static ids_status rename_found(ids_fresh *fresh, uint32_t degree)
{
    ids_status st = IDS_OK;
    ids_presentation *known = NULL;

    for (size_t i = 0; i < fresh->found_count; i++) {
        idsi_found *found = &fresh->found[i];
        if (found->degree == degree) {
            idsi_free(fresh->ctx, found->name);
            found->name = NULL;
            IDSI_TRY(choose_name(fresh, found));
            IDSI_TRY(idsi_found_state(fresh->ctx, found));
        }
    }
    IDSI_TRY(idsi_fresh_read(fresh, SIZE_MAX, &known));
    ids_presentation_free(fresh->known);
    fresh->known = known;
done:
    return st;
}

/*
 * What is found holds in the model, exactly, and with it the consequences are all that holds, so
 * only the consequences of what was known can be wrong in the table.
 */
static void make_sure(ids_fresh *fresh, uint32_t degree, size_t count)
{
    for (size_t i = 0; i < fresh->found_count; i++) {
        if (fresh->found[i].degree == degree && fresh->found[i].bits > 0) {
            return;
        }
    }
    for (size_t i = fresh->count - 1 - count; i < fresh->count; i++) {
        ids_fresh_row *row = &fresh->rows[i];
        if (row->certainty == IDS_CERTAINTY_MODULAR) {
            row->bits = idsi_error_bits(fresh->sure[i]);
            if (fresh->sure[i] <= 0) {
                row->certainty = IDS_CERTAINTY_EXACT;
                row->bits = 0;
            }
        }
    }
}

ids_status idsi_fresh_search(ids_fresh *fresh, uint32_t degree)
{
    ids_status st = IDS_OK;
    const size_t count = (size_t)ids_partition_count(degree);
    const ids_fresh_row *rows = fresh->rows + fresh->count - 1 - count;
    const size_t cut = choose_cut(rows, count);

    for (size_t i = 0; i < cut; i++) {
        if (rows[i].fresh > 0) {
            IDSI_TRY(search_partition(fresh, &rows[i], false));
        }
    }
    for (size_t i = count; i-- > cut;) {
        if (rows[i].fresh > 0) {
            IDSI_TRY(search_partition(fresh, &rows[i], true));
        }
    }
    IDSI_TRY(drop_needless(fresh, rows, count));
    IDSI_TRY(rename_found(fresh, degree));
    make_sure(fresh, degree, count);
done:
    return st;
}
