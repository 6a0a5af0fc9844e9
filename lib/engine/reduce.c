/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Reduction of polynomials to normal forms.
 *
 * A tree is evaluated from its leaves: the product of two combinations of normal forms is, term by
 * term, a column of the tower's tables times a coefficient, and the table gives the column as a
 * combination of normal forms again. Terms gather in a vector with a place for each normal form of
 * the degree, residues in words, rational numbers in GMP's.
 */
#include <string.h>

#include "normal_private.h"

/* ---- combinations ---------------------------------------------------------------------------- */

static ids_status combination_create(ids_ctx *ctx, const ids_normal_forms *forms, uint32_t degree,
                                     size_t count, ids_combination **combination)
{
    ids_status st = IDS_OK;
    ids_combination *made = NULL;

    IDSI_TRY(idsi_alloc_array(ctx, 1, sizeof *made, &made));
    made->ctx = ctx;
    made->forms = forms;
    made->degree = degree;
    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *made->index, &made->index));
    IDSI_TRY(idsi_alloc_array(ctx, count, sizeof *made->coefficient, &made->coefficient));
    for (; made->count < count; made->count++) {
        mpq_init(made->coefficient[made->count]);
    }
    *combination = made;
    made = NULL;
done:
    ids_combination_free(made);
    return st;
}

void ids_combination_free(ids_combination *combination)
{
    if (combination != NULL) {
        for (size_t i = 0; i < combination->count; i++) {
            mpq_clear(combination->coefficient[i]);
        }
        idsi_free(combination->ctx, combination->coefficient);
        idsi_free(combination->ctx, combination->index);
        idsi_free(combination->ctx, combination);
    }
}

ids_status idsi_combination_unit(ids_ctx *ctx, const ids_normal_forms *forms, uint32_t degree,
                                 uint32_t index, ids_combination **combination)
{
    ids_status st = combination_create(ctx, forms, degree, 1, combination);
    if (st == IDS_OK) {
        (*combination)->index[0] = index;
        mpq_set_ui((*combination)->coefficient[0], 1, 1);
    }
    return st;
}

/* ---- sums ------------------------------------------------------------------------------------ */

ids_status idsi_sum_init(idsi_sum *sum, ids_ctx *ctx, const ids_normal_forms *forms,
                         uint32_t degree)
{
    ids_status st = IDS_OK;

    *sum = (idsi_sum){.forms = forms, .ctx = ctx, .degree = degree};
    uint64_t size = forms->tower.level[degree].dimension;
    if (forms->prime != 0) {
        IDSI_TRY(idsi_alloc_array(ctx, size, sizeof *sum->residue, &sum->residue));
        sum->size = size;
    } else {
        IDSI_TRY(idsi_alloc_array(ctx, size, sizeof *sum->exact, &sum->exact));
        for (; sum->size < size; sum->size++) {
            mpq_init(sum->exact[sum->size]);
        }
    }
done:
    return st;
}

void idsi_sum_clear(idsi_sum *sum)
{
    for (uint64_t i = 0; sum->exact != NULL && i < sum->size; i++) {
        mpq_clear(sum->exact[i]);
    }
    idsi_free(sum->ctx, sum->exact);
    idsi_free(sum->ctx, sum->residue);
}

static bool is_nonzero(const idsi_sum *sum, uint64_t i)
{
    return sum->exact != NULL ? mpq_sgn(sum->exact[i]) != 0
                              : sum->residue[i] % sum->forms->prime != 0;
}

ids_status idsi_sum_take(const idsi_sum *sum, ids_combination **combination)
{
    ids_status st = IDS_OK;
    uint32_t prime = sum->forms->prime;
    size_t count = 0;

    for (uint64_t i = 0; i < sum->size; i++) {
        count += is_nonzero(sum, i);
    }
    IDSI_TRY(combination_create(sum->ctx, sum->forms, sum->degree, count, combination));
    count = 0;
    for (uint64_t i = 0; i < sum->size; i++) {
        if (!is_nonzero(sum, i)) {
            continue;
        }
        (*combination)->index[count] = (uint32_t)i;
        if (sum->exact != NULL) {
            mpq_set((*combination)->coefficient[count], sum->exact[i]);
        } else {
            int64_t residue = (int64_t)(sum->residue[i] % prime);
            residue = residue > prime / 2 ? residue - (int64_t)prime : residue;
            mpq_set_si((*combination)->coefficient[count], residue, 1);
        }
        count++;
    }
done:
    return st;
}

/* Adds coefficient * (a column's combination of normal forms), over the rational numbers. */
static void add_column_exact(idsi_sum *sum, uint64_t column, mpq_srcptr coefficient)
{
    const idsi_lifted *table = idsi_proof_table(sum->forms->proof, sum->degree);
    mpq_t entry;

    if (table->start == NULL) {
        return; /* nothing is left of this degree, which needs no table */
    }
    mpq_init(entry);
    for (size_t i = table->start[column]; i < table->start[column + 1]; i++) {
        mpq_ptr place = sum->exact[table->normal[i]];
        mpq_set_si(entry, table->num[i], (uint64_t)table->den[i]);
        mpq_mul(entry, entry, coefficient);
        mpq_add(place, place, entry);
    }
    mpq_clear(entry);
}

static void add_column_mod(idsi_sum *sum, uint64_t column, uint32_t coefficient)
{
    const idsi_level *level = &sum->forms->tower.level[sum->degree];
    uint64_t square = (uint64_t)sum->forms->prime * sum->forms->prime;

    for (size_t i = level->start[column]; i < level->start[column + 1]; i++) {
        uint64_t *place = &sum->residue[level->entries[i].column];
        *place += (uint64_t)coefficient * level->entries[i].value;
        *place = *place >= square ? *place - square : *place;
    }
}

/* ---- products -------------------------------------------------------------------------------- */

/* A product of combinations that is being multiplied out. */
typedef struct product {
    idsi_sum *sum;
    uint32_t arity;
    const ids_combination *value[IDS_MAX_ARITY];
    uint32_t stride[IDS_MAX_ARITY];
    mpq_t partial[IDS_MAX_ARITY + 1]; /* coefficient of the factors before each place */
} product;

static ids_status multiply(product *pr, uint32_t place, uint64_t column)
{
    ids_status st = IDS_OK;
    const ids_combination *value = pr->value[place];

    if (place == pr->arity) {
        uint32_t residue = 0;
        if (pr->sum->forms->prime == 0) {
            add_column_exact(pr->sum, column, pr->partial[place]);
        } else if (idsi_mod_rational(pr->partial[place], pr->sum->forms->prime, &residue)) {
            add_column_mod(pr->sum, column, residue);
        } else {
            return idsi_fail(pr->sum->ctx, IDS_ERR_DOMAIN,
                             "a coefficient has no residue modulo %u: its denominator is divisible",
                             pr->sum->forms->prime);
        }
        return idsi_poll(pr->sum->ctx, NULL);
    }
    for (size_t i = 0; i < value->count; i++) {
        mpq_mul(pr->partial[place + 1], pr->partial[place], value->coefficient[i]);
        IDSI_TRY(multiply(pr, place + 1, column + (uint64_t)pr->stride[place] * value->index[i]));
    }
done:
    return st;
}

ids_status idsi_sum_product(idsi_sum *sum, uint32_t op, const idsi_element *args,
                            mpq_srcptr coefficient)
{
    ids_status st = IDS_OK;
    const idsi_tower *tower = &sum->forms->tower;
    const idsi_group *group = &tower->sig->ops[op].group;
    product pr = {.sum = sum, .arity = group->arity};
    uint64_t key[IDS_MAX_ARITY];
    uint64_t label[IDS_MAX_ARITY];
    uint64_t ordered[IDS_MAX_ARITY];
    uint8_t degree[IDS_MAX_ARITY];
    uint8_t image[IDS_MAX_ARITY];
    uint64_t all = 0;

    for (uint32_t i = 0; i < group->arity; i++) {
        key[i] = args[i].degree;
        label[i] = (uint64_t)__builtin_ctzll(args[i].labels);
        all |= args[i].labels;
    }
    int sign = idsi_group_canonical(group, key, label, image);
    for (uint32_t i = 0; i < group->arity; i++) {
        degree[i] = (uint8_t)key[image[i]];
        ordered[i] = args[image[i]].labels;
    }
    const idsi_block *block = idsi_level_block(&tower->level[sum->degree], op, degree);
    if (block == NULL || sum->size == 0) {
        return IDS_OK;
    }
    for (uint32_t i = 0; i < group->arity; i++) {
        pr.value[image[i]] = args[image[i]].value;
        pr.stride[image[i]] = block->stride[i];
    }
    for (uint32_t i = 0; i <= group->arity; i++) {
        mpq_init(pr.partial[i]);
    }
    mpq_set(pr.partial[0], coefficient);
    if (sign < 0) {
        mpq_neg(pr.partial[0], pr.partial[0]);
    }
    st = multiply(&pr, 0,
                  block->offset + idsi_split_rank(&block->split, all, ordered) * block->inner);
    for (uint32_t i = 0; i <= group->arity; i++) {
        mpq_clear(pr.partial[i]);
    }
    return st;
}

/* ---- trees ----------------------------------------------------------------------------------- */

static ids_status add_node(idsi_sum *sum, const idsi_token **at, mpq_srcptr coefficient,
                           uint64_t *labels);

/* Reads a subtree and evaluates it. */
static ids_status read_element(const idsi_sum *above, const idsi_token **at, idsi_element *element)
{
    ids_status st = IDS_OK;
    idsi_sum sum = {0};
    mpq_t one;

    mpq_init(one);
    mpq_set_ui(one, 1, 1);
    element->degree = idsi_tree_degree(above->forms->tower.sig, *at);
    IDSI_TRY(idsi_sum_init(&sum, above->ctx, above->forms, element->degree));
    IDSI_TRY(add_node(&sum, at, one, &element->labels));
    IDSI_TRY(idsi_sum_take(&sum, &element->value));
done:
    idsi_sum_clear(&sum);
    mpq_clear(one);
    return st;
}

/* Adds coefficient * (the subtree that *at begins), and steps over it. */
static ids_status add_node(idsi_sum *sum, const idsi_token **at, mpq_srcptr coefficient,
                           uint64_t *labels)
{
    ids_status st = IDS_OK;
    idsi_element args[IDS_MAX_ARITY] = {{0}};
    uint32_t arity = 0;
    idsi_token token = *(*at)++;

    if (!idsi_is_node(token)) {
        uint32_t residue = 0;
        *labels |= UINT64_C(1) << (token - 1);
        if (sum->size > 0 && sum->exact != NULL) {
            mpq_add(sum->exact[0], sum->exact[0], coefficient);
        } else if (sum->size > 0) {
            if (!idsi_mod_rational(coefficient, sum->forms->prime, &residue)) {
                return idsi_fail(sum->ctx, IDS_ERR_DOMAIN, "a coefficient has no residue modulo %u",
                                 sum->forms->prime);
            }
            sum->residue[0] = (sum->residue[0] + residue) % sum->forms->prime;
        }
        return IDS_OK;
    }
    arity = sum->forms->tower.sig->ops[idsi_node_op(token)].arity;
    for (uint32_t i = 0; i < arity; i++) {
        IDSI_TRY(read_element(sum, at, &args[i]));
        *labels |= args[i].labels;
    }
    IDSI_TRY(idsi_sum_product(sum, idsi_node_op(token), args, coefficient));
done:
    for (uint32_t i = 0; i < arity; i++) {
        ids_combination_free(args[i].value);
    }
    return st;
}

ids_status idsi_sum_tree(idsi_sum *sum, const idsi_token *tree, mpq_srcptr coefficient)
{
    uint64_t labels = 0;
    return add_node(sum, &tree, coefficient, &labels);
}
