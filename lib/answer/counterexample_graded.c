/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Nilpotent counterexamples, from functionals that vanish on all consequences.
 *
 * One functional gives one algebra (counterexample_quotient.c). Its dimension depends on the
 * functional, so many are tried: those of several orders of the monomials, the ones with few
 * values first, as long as there are steps. Fewer generators make smaller algebras, so variables of
 * the candidate are also set equal, in all ways; where the candidate then follows, no functional is
 * found.
 */
#include <stdlib.h>
#include <string.h>

#include "counterexample_private.h"
#include "witness_private.h"

/* Candidates with more variables are tried as they are only: there are too many ways. */
#define MOST_VARIABLES 5u
#define MOST_ORDERS 24u
#define MOST_COLUMNS 40u
/* Orders, one after the other, in which no smaller algebra was found. */
#define PATIENCE 8u

/* The candidate with some variables set equal: variable v becomes block[v], from 0. */
typedef struct merged {
    uint32_t block[IDSI_MAX_IDENTITY_DEGREE];
    uint32_t blocks;
    ids_presentation pres; /* a shallow copy with one candidate, `claim` */
    idsi_identity *list;   /* of pres */
    idsi_poly poly;
} merged;

typedef struct usable {
    uint32_t column;
    uint32_t uses;
} usable;

static void merged_clear(idsi_hunt *hunt, merged *m)
{
    idsi_poly_clear(&m->poly);
    idsi_free(hunt->ctx, m->list);
}

static ids_status merge(idsi_hunt *hunt, merged *m)
{
    ids_status st = IDS_OK;
    const idsi_poly *written = &hunt->claim->written;
    const size_t index = (size_t)(hunt->claim - hunt->pres->list);

    m->pres = *hunt->pres;
    idsi_poly_init(&m->poly, hunt->ctx, hunt->pres->sig);
    IDSI_TRY(idsi_alloc_array(hunt->ctx, hunt->pres->count, sizeof *m->list, &m->list));
    memcpy(m->list, hunt->pres->list, hunt->pres->count * sizeof *m->list);
    m->pres.list = m->list;
    for (size_t i = 0; i < m->pres.count; i++) {
        /* Other candidates are out of the way, so that this one is number 0. */
        if (m->list[i].role == IDS_ROLE_CANDIDATE && i != index) {
            m->list[i].role = IDS_ROLE_IDENTITY;
            m->list[i].linear.count = 0;
        }
    }
    for (size_t t = 0; t < written->count; t++) {
        idsi_token tree[2u * IDSI_MAX_IDENTITY_DEGREE];
        const size_t length = written->start[t + 1] - written->start[t];
        for (size_t i = 0; i < length; i++) {
            const idsi_token token = written->tokens[written->start[t] + i];
            tree[i] = idsi_is_node(token) ? token : m->block[token - 1] + 1;
        }
        IDSI_TRY(idsi_poly_append(&m->poly, written->coefficients[t], tree, length));
    }
    m->poly.variables = m->blocks;
    IDSI_TRY(idsi_poly_normalize(&m->poly));
    m->list[index].written = m->poly;
done:
    return st;
}

/* The values of the candidate's own variables: generators, which are basis elements. */
static ids_status offer(idsi_hunt *hunt, const merged *m, ids_algebra *algebra,
                        const uint32_t *generator)
{
    ids_status st = IDS_OK;
    const uint32_t variables = hunt->claim->written.variables;
    const size_t n = algebra->dimension;
    int64_t *values = NULL;

    st = idsi_alloc_array(hunt->ctx, variables * n, sizeof *values, &values);
    if (st != IDS_OK) {
        ids_algebra_free(algebra);
        return st;
    }
    for (uint32_t v = 0; v < variables; v++) {
        values[v * n + generator[m->block[v]]] = 1;
    }
    return idsi_hunt_offer(hunt, algebra, values);
}

static int compare_uses(const void *a, const void *b)
{
    const usable *x = a;
    const usable *y = b;
    if (x->uses != y->uses) {
        return x->uses < y->uses ? -1 : 1;
    }
    return x->column < y->column ? -1 : x->column > y->column;
}

/* The functionals of the order at hand, those with few values first. */
static ids_status try_order(idsi_hunt *hunt, const merged *m, idsi_seeker *s, usable *list,
                            uint32_t *value)
{
    ids_status st = IDS_OK;
    idsi_echelon *echelon = NULL;
    size_t count = 0;

    IDSI_TRY(idsi_seeker_eliminate(s, &echelon));
    idsi_seeker_survey(s, echelon);
    for (uint32_t column = 0; column < s->monomials; column++) {
        if (s->rest[column] != 0) {
            list[count++] = (usable){column, s->uses[column]};
        }
    }
    if (count > 0) {
        qsort(list, count, sizeof *list, compare_uses);
    }
    for (size_t i = 0; i < count && i < MOST_COLUMNS && hunt->most_dimension > 0; i++) {
        ids_algebra *algebra = NULL;
        uint32_t generator[IDSI_MAX_IDENTITY_DEGREE] = {0};
        idsi_seeker_values(s, echelon, list[i].column, value);
        IDSI_TRY(idsi_hunt_quotient(hunt, s->c, s->system->prime, value, &algebra, generator));
        if (algebra != NULL) {
            IDSI_TRY(offer(hunt, m, algebra, generator));
        }
        if (hunt->steps == 0) {
            break;
        }
    }
done:
    idsi_echelon_free(echelon);
    return st;
}

static ids_status try_component(idsi_hunt *hunt, const merged *m, const idsi_component *c)
{
    ids_status st = IDS_OK;
    idsi_seeker s = {.ctx = hunt->ctx};
    usable *list = NULL;
    uint32_t *value = NULL;
    uint32_t waited = 0;

    IDSI_TRY(idsi_seeker_init(&s, c, hunt->seed));
    IDSI_TRY(idsi_alloc_array(hunt->ctx, s.monomials, sizeof *list, &list));
    IDSI_TRY(idsi_alloc_array(hunt->ctx, s.monomials, sizeof *value, &value));
    for (uint32_t k = 0; k < MOST_ORDERS && waited < PATIENCE; k++) {
        const uint32_t before = hunt->most_dimension;
        if (!idsi_hunt_step(hunt, s.system->start[s.system->count] + 1) || before == 0) {
            break;
        }
        IDSI_TRY(try_order(hunt, m, &s, list, value));
        waited = hunt->most_dimension < before ? 0 : waited + 1;
        idsi_seeker_shuffle(&s);
    }
done:
    idsi_seeker_clear(&s);
    idsi_free(hunt->ctx, list);
    idsi_free(hunt->ctx, value);
    return st;
}

static ids_status try_merged(idsi_hunt *hunt, merged *m)
{
    ids_status st = IDS_OK;
    idsi_component *c = NULL;

    IDSI_TRY(merge(hunt, m));
    if (m->poly.count > 0) {
        IDSI_TRY(idsi_component_create(hunt->ctx, &m->pres, 0, &c));
        IDSI_TRY(try_component(hunt, m, c));
    }
done:
    idsi_component_free(c);
    merged_clear(hunt, m);
    return st;
}

/* All ways to put variables from v on into blocks, `want` of them in all: the block of a variable
 * is an earlier one or the next new one. */
static ids_status try_blocks(idsi_hunt *hunt, merged *m, uint32_t v, uint32_t want)
{
    ids_status st = IDS_OK;
    const uint32_t variables = hunt->claim->written.variables;
    const uint32_t used = m->blocks;

    if (used > want || want - used > variables - v || hunt->steps == 0) {
        return IDS_OK;
    }
    if (v == variables) {
        return try_merged(hunt, m);
    }
    for (uint32_t block = 0; block <= used; block++) {
        m->block[v] = block;
        m->blocks = block == used ? used + 1 : used;
        IDSI_TRY(try_blocks(hunt, m, v + 1, want));
    }
done:
    m->blocks = used;
    return st;
}

ids_status idsi_hunt_graded(idsi_hunt *hunt)
{
    ids_status st = IDS_OK;
    const uint32_t variables = hunt->claim->written.variables;
    const uint32_t fewest = variables > MOST_VARIABLES ? variables : 1;

    for (uint32_t want = fewest; want <= variables; want++) {
        merged m = {0};
        IDSI_TRY(try_blocks(hunt, &m, 0, want));
    }
done:
    return st;
}
