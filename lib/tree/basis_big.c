/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The basis of a degree whose numbers may pass 64 bits. The same plans as in basis.c; only the
 * offsets of the types and the index are longer: `limbs` words, least significant first. The
 * number of monomials of a type is the product of the numbers of choices at its nodes.
 *
 * All work is done in arrays on the stack with the mpn functions of GMP, which allocate nothing
 * at these sizes; GMP's memory is touched only when a result goes into an mpz_t.
 */
#include <idspan/gmp.h>
#include <string.h>

#include "basis_private.h"

_Static_assert(GMP_NUMB_BITS == 64 && sizeof(mp_limb_t) == sizeof(uint64_t),
               "the basis needs 64-bit GMP limbs without nails");

/* 64! * 2^32 < 2^(6 * 64): at most 2^32 types of at most degree! monomials. */
#define MAX_LIMBS 6u
#define MAX_DIGITS 120u

/* Multiplies by the number of monomials of a type; goes down only where it passes 64 bits. */
static void multiply(const ids_types *types, uint32_t type, mp_limb_t *product)
{
    idsi_split split;
    uint32_t left[IDSI_SPLIT_MAX + 1];

    if (types->list[type].monomials != 0) {
        (void)mpn_mul_1(product, product, MAX_LIMBS, types->list[type].monomials);
        return;
    }
    idsi_type_split(types, type, &split);
    left[split.count] = split.total;
    for (uint32_t i = 0; i < split.count; i++) {
        uint32_t from = split.parent[i] < 0 ? split.count : (uint32_t)split.parent[i];
        uint32_t family = split.family[i];
        uint64_t own = idsi_binomial(family - 1, split.size[i] - 1u);

        (void)mpn_mul_1(product, product, MAX_LIMBS, idsi_binomial(left[from], family));
        (void)mpn_mul_1(product, product, MAX_LIMBS, own);
        left[from] -= family;
        left[i] = family - split.size[i];
        multiply(types, types->children[types->list[type].children + i], product);
    }
}

static void count_type(const ids_basis *basis, uint32_t type, mp_limb_t *monomials)
{
    memset(monomials, 0, MAX_LIMBS * sizeof *monomials);
    monomials[0] = 1;
    multiply(basis->types, basis->types->first[basis->degree] + type, monomials);
}

/* Their sum over all types, in MAX_LIMBS words. */
static void count_all(const ids_basis *basis, mp_limb_t *total)
{
    mp_limb_t monomials[MAX_LIMBS];

    memset(total, 0, MAX_LIMBS * sizeof *total);
    for (uint32_t t = 0; t < basis->type_count; t++) {
        count_type(basis, t, monomials);
        (void)mpn_add_n(total, total, monomials, MAX_LIMBS);
    }
}

static size_t words(const mp_limb_t *number, size_t most)
{
    while (most > 1 && number[most - 1] == 0) {
        most--;
    }
    return most;
}

ids_status idsi_basis_fail_size(ids_ctx *ctx, const ids_basis *basis)
{
    mp_limb_t total[MAX_LIMBS];
    unsigned char digits[MAX_DIGITS];
    char text[MAX_DIGITS + 1];

    count_all(basis, total);
    size_t length = mpn_get_str(digits, 10, total, (mp_size_t)words(total, MAX_LIMBS));
    size_t zeros = 0;
    while (zeros + 1 < length && digits[zeros] == 0) {
        zeros++;
    }
    for (size_t i = zeros; i < length; i++) {
        text[i - zeros] = (char)('0' + digits[i]);
    }
    text[length - zeros] = '\0';
    return idsi_fail(ctx, IDS_ERR_LIMIT,
                     "degree %u has %s monomials, more than 2^64-1: too many for 64-bit numbers",
                     basis->degree, text);
}

/* Number of monomials before a type, as MAX_LIMBS words. */
static void get_offset(const ids_basis *basis, uint32_t type, mp_limb_t *number)
{
    memset(number, 0, MAX_LIMBS * sizeof *number);
    if (basis->offset != NULL) {
        number[0] = basis->offset[type];
        return;
    }
    for (size_t i = 0; i < basis->limbs; i++) {
        number[i] = basis->big[type * basis->limbs + i];
    }
}

static ids_status add_big_offsets(ids_ctx *ctx, ids_basis *basis)
{
    ids_status st = IDS_OK;
    mp_limb_t number[MAX_LIMBS];
    mp_limb_t sum[MAX_LIMBS];

    count_all(basis, number);
    basis->limbs = words(number, MAX_LIMBS);
    IDSI_TRY(idsi_alloc_array(ctx, basis->type_count + (size_t)1, basis->limbs * sizeof *basis->big,
                              &basis->big));
    for (uint32_t t = 0; t < basis->type_count; t++) {
        uint64_t *before = basis->big + t * basis->limbs;

        count_type(basis, t, number);
        get_offset(basis, t, sum);
        (void)mpn_add_n(sum, sum, number, MAX_LIMBS);
        for (size_t i = 0; i < basis->limbs; i++) {
            before[basis->limbs + i] = sum[i];
        }
        if ((t & 0xfffu) == 0xfffu) {
            IDSI_TRY(idsi_poll(ctx, NULL));
        }
    }
done:
    return st;
}

ids_status ids_basis_create_exact(ids_ctx *ctx, const ids_types *types, uint32_t degree,
                                  ids_basis **basis)
{
    ids_status st = IDS_OK;
    ids_basis *made = NULL;

    if (basis == NULL) {
        return idsi_fail_arg(ctx, "result");
    }
    IDSI_TRY(idsi_basis_prepare(ctx, types, degree, &made));
    if (made->offset == NULL) {
        IDSI_TRY(add_big_offsets(ctx, made));
    }
    IDSI_TRY(idsi_plans_create(ctx, made));
    *basis = made;
    made = NULL;
done:
    ids_basis_free(made);
    return st;
}

/* ---- numbers of any size ------------------------------------------------------------------- */

static void set_mpz(mpz_t out, const mp_limb_t *number)
{
    mpz_import(out, MAX_LIMBS, -1, sizeof *number, 0, 0, number);
}

/* False when the number is negative or has more than MAX_LIMBS words. */
static bool get_mpz(const mpz_t in, mp_limb_t *number)
{
    if (mpz_sgn(in) < 0 || mpz_size(in) > MAX_LIMBS) {
        return false;
    }
    for (size_t i = 0; i < MAX_LIMBS; i++) {
        number[i] = mpz_getlimbn(in, (mp_size_t)i);
    }
    return true;
}

ids_status ids_basis_size_exact(const ids_basis *basis, mpz_t size)
{
    mp_limb_t number[MAX_LIMBS];

    if (basis == NULL || size == NULL) {
        return IDS_ERR_ARG;
    }
    get_offset(basis, basis->type_count, number);
    set_mpz(size, number);
    return IDS_OK;
}

ids_status ids_basis_type_range_exact(const ids_basis *basis, uint64_t type, mpz_t begin, mpz_t end)
{
    mp_limb_t number[MAX_LIMBS];

    if (basis == NULL || begin == NULL || end == NULL || type >= basis->type_count) {
        return IDS_ERR_ARG;
    }
    get_offset(basis, (uint32_t)type, number);
    set_mpz(begin, number);
    get_offset(basis, (uint32_t)type + 1, number);
    set_mpz(end, number);
    return IDS_OK;
}

ids_status ids_basis_rank_code_exact(const ids_basis *basis, const int32_t *code, size_t length,
                                     mpz_t index)
{
    ids_status st = IDS_OK;
    uint64_t digit[IDS_MAX_DEGREE];
    mp_limb_t number[MAX_LIMBS] = {0};
    mp_limb_t offset[MAX_LIMBS];
    uint32_t type = 0;
    idsi_plan_room room;
    idsi_plan plan;

    if (basis == NULL || code == NULL || index == NULL) {
        return IDS_ERR_ARG;
    }
    IDSI_TRY(idsi_basis_read(basis, code, length, &type, digit, &room, &plan));
    for (uint32_t c = 0; c < plan.cuts; c++) {
        (void)mpn_mul_1(number, number, MAX_LIMBS, basis->decks.deck[plan.cut[c].deck].radix);
        (void)mpn_add_1(number, number, MAX_LIMBS, digit[c]);
    }
    get_offset(basis, type, offset);
    (void)mpn_add_n(number, number, offset, MAX_LIMBS);
    set_mpz(index, number);
done:
    return st;
}

ids_status ids_basis_rank_exact(const ids_basis *basis, const ids_mono *mono, mpz_t index)
{
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;

    if (basis == NULL || mono == NULL || index == NULL || mono->sig != basis->types->sig ||
        ids_mono_code(mono, code, IDSI_MAX_TOKENS, &length) != IDS_OK) {
        return IDS_ERR_ARG;
    }
    return ids_basis_rank_code_exact(basis, code, length, index);
}

/* Type and digits of an index; false when it is out of range. */
static bool locate(const ids_basis *basis, const mpz_t index, uint32_t *type, uint64_t *digit,
                   idsi_plan_room *room, idsi_plan *plan)
{
    mp_limb_t number[MAX_LIMBS];
    mp_limb_t offset[MAX_LIMBS];
    uint32_t low = 0;
    uint32_t high = basis->type_count;

    get_offset(basis, basis->type_count, offset);
    if (!get_mpz(index, number) || mpn_cmp(number, offset, MAX_LIMBS) >= 0) {
        return false;
    }
    while (high - low > 1) {
        uint32_t middle = low + (high - low) / 2;

        get_offset(basis, middle, offset);
        if (mpn_cmp(offset, number, MAX_LIMBS) <= 0) {
            low = middle;
        } else {
            high = middle;
        }
    }
    get_offset(basis, low, offset);
    (void)mpn_sub_n(number, number, offset, MAX_LIMBS);
    idsi_plan_get(basis, low, room, plan);
    for (uint32_t c = plan->cuts; c-- > 0;) {
        digit[c] =
            mpn_divrem_1(number, 0, number, MAX_LIMBS, basis->decks.deck[plan->cut[c].deck].radix);
    }
    *type = low;
    return true;
}

ids_status ids_basis_unrank_code_exact(const ids_basis *basis, const mpz_t index, int32_t *code,
                                       size_t capacity, size_t *length)
{
    uint64_t digit[IDS_MAX_DEGREE];
    uint8_t label[IDS_MAX_DEGREE];
    idsi_plan_room room;
    idsi_plan plan;
    uint32_t type = 0;

    if (basis == NULL || index == NULL || code == NULL || length == NULL ||
        !locate(basis, index, &type, digit, &room, &plan) || capacity < plan.length) {
        return IDS_ERR_ARG;
    }
    idsi_plan_deal(basis, &plan, digit, label);
    idsi_plan_write(basis, &plan, label, code);
    *length = plan.length;
    return IDS_OK;
}

ids_status ids_basis_unrank_exact(ids_ctx *ctx, const ids_basis *basis, const mpz_t index,
                                  ids_mono **mono)
{
    ids_status st = IDS_OK;
    int32_t code[IDSI_MAX_TOKENS];
    size_t length = 0;

    if (ctx == NULL || basis == NULL || index == NULL || mono == NULL) {
        return idsi_fail_arg(ctx, "context, basis, index or result");
    }
    st = ids_basis_unrank_code_exact(basis, index, code, IDSI_MAX_TOKENS, &length);
    if (st != IDS_OK) {
        return idsi_fail(ctx, st, "a monomial was asked for that degree %u does not have",
                         basis->degree);
    }
    IDSI_TRY(ids_mono_create(ctx, basis->types->sig, code, length, mono));
done:
    return st;
}

ids_status ids_iter_seek_exact(ids_iter *iter, const mpz_t begin, uint64_t count)
{
    const ids_basis *basis = idsi_iter_basis(iter);
    uint64_t digit[IDS_MAX_DEGREE];
    mp_limb_t last[MAX_LIMBS];
    mp_limb_t size[MAX_LIMBS];
    idsi_plan_room room;
    idsi_plan plan;
    uint32_t type = 0;

    if (basis == NULL || begin == NULL || !get_mpz(begin, last)) {
        return IDS_ERR_ARG;
    }
    uint64_t low = last[0];
    get_offset(basis, basis->type_count, size);
    if (mpn_add_1(last, last, MAX_LIMBS, count) != 0 || mpn_cmp(last, size, MAX_LIMBS) > 0) {
        return IDS_ERR_ARG;
    }
    if (count > 0) {
        (void)locate(basis, begin, &type, digit, &room, &plan);
    }
    idsi_iter_place(iter, type, digit, low, count);
    return IDS_OK;
}

ids_status ids_iter_create_exact(ids_ctx *ctx, const ids_basis *basis, const mpz_t begin,
                                 uint64_t count, ids_iter **iter)
{
    ids_status st = IDS_OK;
    ids_iter *made = NULL;

    if (ctx == NULL || basis == NULL || begin == NULL || iter == NULL) {
        return idsi_fail_arg(ctx, "context, basis, index or result");
    }
    IDSI_TRY(idsi_iter_make(ctx, basis, &made));
    if (ids_iter_seek_exact(made, begin, count) != IDS_OK) {
        st = idsi_fail(ctx, IDS_ERR_ARG, "the range is not within the monomials of degree %u",
                       basis->degree);
        goto done;
    }
    *iter = made;
    made = NULL;
done:
    ids_iter_free(made);
    return st;
}
