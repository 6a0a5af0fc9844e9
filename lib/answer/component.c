/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * One multihomogeneous component: all canonical monomials in which each variable of a candidate
 * occurs as often as in the candidate, and all consequences there.
 *
 * Over the rational numbers a candidate follows when it is a combination of these consequences:
 * putting equal variables into a combination for the linearised candidate gives one for m1!...mk!
 * times the candidate as written, and linearising leads back.
 *
 * A consequence is C[f(m1, ..., md)]: f a linearised identity, mi monomials, C a monomial in which
 * a further label, the hole, stands once. So contexts are monomials of a content with a hole, and
 * one recursion lists both. Every list of a content is made from lists of smaller numbers.
 */
#include <string.h>

#include "follows_private.h"

/* ---- contents -------------------------------------------------------------------------------- */

bool idsi_content_within(const idsi_component *c, uint32_t part, uint32_t whole)
{
    for (uint32_t i = 0; i < c->variables; i++) {
        uint32_t radix = c->power[i] + 1;
        if (part % radix > whole % radix) {
            return false;
        }
        part /= radix;
        whole /= radix;
    }
    return part <= whole;
}

uint32_t idsi_content_degree(const idsi_component *c, uint32_t content)
{
    uint32_t degree = 0;
    for (uint32_t i = 0; i < c->variables; i++) {
        degree += content % (c->power[i] + 1);
        content /= c->power[i] + 1;
    }
    return degree + content;
}

/* ---- monomials ------------------------------------------------------------------------------- */

static ids_status forest_add(ids_ctx *ctx, idsi_forest *forest, const idsi_token *tree,
                             size_t length)
{
    ids_status st = IDS_OK;

    while (forest->used + length > forest->token_capacity) {
        IDSI_TRY(idsi_grow(ctx, forest->token_capacity, &forest->token_capacity,
                           sizeof *forest->tokens, &forest->tokens));
    }
    IDSI_TRY(idsi_grow(ctx, forest->count, &forest->capacity, sizeof *forest->list, &forest->list));
    memcpy(forest->tokens + forest->used, tree, length * sizeof *tree);
    forest->list[forest->count] = (idsi_planted){forest->used, length};
    forest->used += length;
    forest->count++;
done:
    return st;
}

static const idsi_token *forest_tree(const idsi_forest *forest, size_t index)
{
    return forest->tokens + forest->list[index].start;
}

/* Keeps a product when it is the canonical one of its class and not zero. */
static ids_status keep_canonical(idsi_component *c, uint32_t content, const idsi_token *tree,
                                 size_t length)
{
    idsi_token copy[IDSI_MAX_TOKENS];
    ids_status st = IDS_OK;

    memcpy(copy, tree, length * sizeof *tree);
    if (idsi_component_canonicalize(c, copy, length) == 0 ||
        memcmp(copy, tree, length * sizeof *tree) != 0) {
        return IDS_OK;
    }
    IDSI_TRY(idsi_poll(c->ctx, NULL));
    IDSI_TRY(forest_add(c->ctx, &c->trees[content], tree, length));
done:
    return st;
}

/* Fills the places from `place` on of a product with trees of content `rest` in all. */
static ids_status fill_product(idsi_component *c, uint32_t content, uint32_t rest, uint32_t place,
                               idsi_token *tree, size_t length)
{
    ids_status st = IDS_OK;
    uint32_t arity = c->sig->ops[idsi_node_op(tree[0])].group.arity;

    if (place == arity) {
        return keep_canonical(c, content, tree, length);
    }
    for (uint32_t part = place + 1 == arity ? rest : 1; part <= rest; part++) {
        if (part == content || !idsi_content_within(c, part, rest) ||
            (part == rest && place + 1 < arity)) {
            continue;
        }
        for (size_t i = 0; i < c->trees[part].count; i++) {
            idsi_planted at = c->trees[part].list[i];
            memcpy(tree + length, forest_tree(&c->trees[part], i), at.length * sizeof *tree);
            IDSI_TRY(fill_product(c, content, rest - part, place + 1, tree, length + at.length));
        }
    }
done:
    return st;
}

static ids_status list_content(idsi_component *c, uint32_t content)
{
    ids_status st = IDS_OK;
    idsi_token tree[IDSI_MAX_TOKENS];

    if (idsi_content_degree(c, content) == 1) {
        for (uint32_t i = 0; i <= c->variables; i++) {
            if (c->stride[i] == content) {
                tree[0] = i + 1;
            }
        }
        return forest_add(c->ctx, &c->trees[content], tree, 1);
    }
    for (uint32_t op = 0; op < c->sig->count; op++) {
        tree[0] = idsi_node(op);
        IDSI_TRY(fill_product(c, content, content, 0, tree, 1));
    }
done:
    return st;
}

static uint64_t hash_tree(const idsi_token *tree, size_t length)
{
    uint64_t hash = length;
    for (size_t i = 0; i < length; i++) {
        hash = idsi_hash_add(hash, tree[i]);
    }
    return hash;
}

static ids_status make_slots(idsi_component *c)
{
    ids_status st = IDS_OK;
    const idsi_forest *top = &c->trees[c->top];
    size_t size = 16;

    while (size < 2 * top->count) {
        size *= 2;
    }
    IDSI_TRY(idsi_alloc_array(c->ctx, size, sizeof *c->slots, &c->slots));
    c->slot_mask = size - 1;
    for (size_t i = 0; i < top->count; i++) {
        size_t at = (size_t)hash_tree(forest_tree(top, i), top->list[i].length) & c->slot_mask;
        while (c->slots[at] != 0) {
            at = (at + 1) & c->slot_mask;
        }
        c->slots[at] = (uint32_t)i + 1;
    }
done:
    return st;
}

const idsi_forest *idsi_component_monomials(const idsi_component *component)
{
    return &component->trees[component->top];
}

size_t idsi_component_find(const idsi_component *component, const idsi_token *tree)
{
    const idsi_forest *top = &component->trees[component->top];
    size_t length = idsi_tree_length(component->sig, tree);
    size_t at = (size_t)hash_tree(tree, length) & component->slot_mask;

    while (component->slots[at] != 0) {
        size_t i = component->slots[at] - 1;
        if (top->list[i].length == length &&
            memcmp(forest_tree(top, i), tree, length * sizeof *tree) == 0) {
            return i;
        }
        at = (at + 1) & component->slot_mask;
    }
    return SIZE_MAX;
}

/* ---- the component --------------------------------------------------------------------------- */

/* Counts the letters of the candidate. */
static void measure(idsi_component *c)
{
    const idsi_token *tree = c->goal->tokens;

    for (size_t i = 0; i < c->goal->start[1]; i++) {
        if (!idsi_is_node(tree[i])) {
            c->power[tree[i] - 1]++;
        }
    }
}

static ids_status list_all(idsi_component *c)
{
    ids_status st = IDS_OK;

    c->contents = 1;
    for (uint32_t i = 0; i < c->variables; i++) {
        c->stride[i] = c->contents;
        c->top += c->contents * c->power[i];
        c->contents *= c->power[i] + 1;
    }
    c->stride[c->variables] = c->contents;
    IDSI_TRY(idsi_alloc_array(c->ctx, 2 * (size_t)c->contents, sizeof *c->trees, &c->trees));
    for (uint32_t content = 1; content <= c->top + c->contents; content++) {
        /* The whole content beside a hole would be a degree too high. */
        if (idsi_content_degree(c, content) <= c->degree) {
            IDSI_TRY(list_content(c, content));
        }
    }
    IDSI_TRY(make_slots(c));
done:
    return st;
}

static ids_status begin(ids_ctx *ctx, const ids_presentation *pres, idsi_component **component)
{
    ids_status st = IDS_OK;
    idsi_component *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->pres = pres;
    made->sig = pres->sig;
    idsi_poly_init(&made->none, ctx, pres->sig);
    made->goal = &made->none;
    *component = made;
    IDSI_TRY(idsi_laws_create(ctx, pres, &made->laws));
done:
    return st;
}

ids_status idsi_component_create(ids_ctx *ctx, const ids_presentation *pres, size_t index,
                                 idsi_component **component)
{
    ids_status st = IDS_OK;
    idsi_component *made = NULL;

    IDSI_TRY(begin(ctx, pres, &made));
    made->claim = idsi_presentation_get(pres, IDS_ROLE_CANDIDATE, index);
    made->goal = &made->claim->written;
    made->degree = made->claim->degree;
    made->variables = made->goal->variables;
    if (made->goal->count > 0) {
        measure(made);
        IDSI_TRY(list_all(made));
    }
    *component = made;
    made = NULL;
done:
    idsi_component_free(made);
    return st;
}

ids_status idsi_component_create_content(ids_ctx *ctx, const ids_presentation *pres,
                                         const uint8_t *power, uint32_t variables, bool odd,
                                         idsi_component **component)
{
    ids_status st = IDS_OK;
    idsi_component *made = NULL;

    IDSI_TRY(begin(ctx, pres, &made));
    made->odd = odd;
    made->variables = variables;
    for (uint32_t i = 0; i < variables; i++) {
        made->power[i] = power[i];
        made->degree += power[i];
    }
    IDSI_TRY(list_all(made));
    *component = made;
    made = NULL;
done:
    idsi_component_free(made);
    return st;
}

int idsi_component_canonicalize(const idsi_component *component, idsi_token *tree, size_t length)
{
    return component->odd ? idsi_odd_canonicalize(component->sig, component->variables, tree)
                          : idsi_tree_canonicalize(component->sig, tree, length);
}

void idsi_component_free(idsi_component *component)
{
    if (component == NULL) {
        return;
    }
    ids_ctx *ctx = component->ctx;
    for (size_t i = 0; component->trees != NULL && i < 2 * (size_t)component->contents; i++) {
        idsi_free(ctx, component->trees[i].list);
        idsi_free(ctx, component->trees[i].tokens);
    }
    idsi_free(ctx, component->trees);
    idsi_free(ctx, component->slots);
    idsi_laws_free(component->laws);
    idsi_free(ctx, component);
}

/* ---- consequences ---------------------------------------------------------------------------- */

typedef struct walk {
    const idsi_component *c;
    const idsi_law *law;
    idsi_instance at;
    idsi_instance_fn fn;
    void *user;
} walk;

/* Of arguments that may be exchanged, later ones are not larger. */
static bool in_order(const walk *w, uint32_t place)
{
    for (uint32_t i = place; i-- > 0;) {
        if (w->law->class_of[i] == w->law->class_of[place]) {
            return w->at.content[place] < w->at.content[i] ||
                   (w->at.content[place] == w->at.content[i] &&
                    w->at.argument[place] <= w->at.argument[i]);
        }
    }
    return true;
}

static ids_status walk_contexts(walk *w)
{
    ids_status st = IDS_OK;
    const idsi_component *c = w->c;
    uint32_t around = c->top - w->at.hole + c->stride[c->variables];

    for (uint32_t k = 0; k < c->trees[around].count; k++) {
        w->at.context = k;
        IDSI_TRY(w->fn(w->user, &w->at));
    }
done:
    return st;
}

static ids_status walk_arguments(walk *w, uint32_t place, uint32_t rest)
{
    ids_status st = IDS_OK;
    bool last = place + 1 == w->law->degree;

    if (place == w->law->degree) {
        return walk_contexts(w);
    }
    for (uint32_t part = last ? rest : 1; part <= rest; part++) {
        if (!idsi_content_within(w->c, part, rest) || (!last && part == rest)) {
            continue;
        }
        w->at.content[place] = part;
        for (uint32_t i = 0; i < w->c->trees[part].count; i++) {
            w->at.argument[place] = i;
            if (in_order(w, place)) {
                IDSI_TRY(walk_arguments(w, place + 1, rest - part));
            }
        }
    }
done:
    return st;
}

ids_status idsi_component_each(const idsi_component *component, idsi_instance_fn fn, void *user)
{
    ids_status st = IDS_OK;
    walk w = {.c = component, .fn = fn, .user = user};

    for (uint32_t law = 0; law < component->laws->count; law++) {
        w.law = &component->laws->law[law];
        w.at.law = law;
        for (uint32_t hole = component->top; hole > 0; hole--) {
            if (idsi_content_within(component, hole, component->top) &&
                idsi_content_degree(component, hole) >= w.law->degree) {
                w.at.hole = hole;
                IDSI_TRY(walk_arguments(&w, 0, hole));
            }
        }
    }
done:
    return st;
}

const idsi_token *idsi_component_argument(const idsi_component *component,
                                          const idsi_instance *instance, uint32_t place)
{
    return forest_tree(&component->trees[instance->content[place]], instance->argument[place]);
}

const idsi_token *idsi_component_context(const idsi_component *component,
                                         const idsi_instance *instance)
{
    uint32_t around = component->top - instance->hole + component->stride[component->variables];
    return forest_tree(&component->trees[around], instance->context);
}

/* Copies `term` with the arguments of the instance for its labels; returns the tokens. */
static size_t put_arguments(const idsi_component *c, const idsi_instance *instance,
                            const idsi_token *term, size_t length, idsi_token *out)
{
    size_t used = 0;
    for (size_t i = 0; i < length; i++) {
        if (idsi_is_node(term[i])) {
            out[used++] = term[i];
            continue;
        }
        uint32_t place = term[i] - 1;
        idsi_planted at = c->trees[instance->content[place]].list[instance->argument[place]];
        memcpy(out + used, idsi_component_argument(c, instance, place), at.length * sizeof *out);
        used += at.length;
    }
    return used;
}

/* With odd letters: sign of the order in which a term of the law has its variables. */
static int order_sign(const idsi_component *c, const idsi_instance *instance,
                      const idsi_token *term, size_t length)
{
    uint8_t content[IDSI_MAX_IDENTITY_DEGREE][IDSI_MAX_IDENTITY_DEGREE] = {{0}};
    uint8_t order[IDSI_MAX_IDENTITY_DEGREE] = {0};
    uint32_t count = 0;

    for (size_t i = 0; i < length; i++) {
        if (idsi_is_node(term[i])) {
            continue;
        }
        const uint32_t place = term[i] - 1;
        uint32_t rest = instance->content[place];
        for (uint32_t k = 0; k < c->variables; k++) {
            content[place][k] = (uint8_t)(rest % (c->power[k] + 1));
            rest /= c->power[k] + 1;
        }
        order[count++] = (uint8_t)place;
    }
    return idsi_odd_sign((const uint8_t(*)[IDSI_MAX_IDENTITY_DEGREE])content, order, count);
}

void idsi_component_expand(const idsi_component *component, const idsi_instance *instance,
                           idsi_part *parts, size_t *count)
{
    const idsi_poly *poly = component->laws->law[instance->law].poly;
    const idsi_token *context = idsi_component_context(component, instance);
    size_t context_length = idsi_tree_length(component->sig, context);
    idsi_token tree[IDSI_MAX_TOKENS];

    *count = 0;
    for (size_t t = 0; t < poly->count; t++) {
        size_t used = 0;
        for (size_t i = 0; i < context_length; i++) {
            if (idsi_is_node(context[i]) || context[i] <= component->variables) {
                tree[used++] = context[i];
            } else {
                used += put_arguments(component, instance, poly->tokens + poly->start[t],
                                      poly->start[t + 1] - poly->start[t], tree + used);
            }
        }
        int sign = idsi_component_canonicalize(component, tree, used);
        if (component->odd) {
            sign *= order_sign(component, instance, poly->tokens + poly->start[t],
                               poly->start[t + 1] - poly->start[t]);
        }
        if (sign != 0) {
            parts[*count] = (idsi_part){idsi_component_find(component, tree), sign, t};
            (*count)++;
        }
    }
}
