/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Partitions: order, index, text, conjugate, dimension.
 *
 * The order is reverse lexicographic, largest first part first. So the partitions that stand
 * before one with first part p are those with a larger first part, and there are
 * at[n][bound] - at[n][p] of them when no part may pass `bound`; then p is the bound for the rest.
 * The index is the sum of these numbers, and reading it back takes the largest part that still
 * leaves enough partitions.
 *
 * Hook lengths are cancelled against 1 .. n factor by factor before anything is multiplied, so
 * that a dimension passes 64 bits only when it is itself too large.
 */
#include "young_private.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#define MAX IDS_MAX_PARTITION_DEGREE

/* ---- order and index ------------------------------------------------------------------ */

void idsi_partition_counts_fill(idsi_partition_counts *counts)
{
    for (uint32_t n = 0; n <= MAX; n++) {
        counts->at[n][0] = n == 0 ? 1 : 0;
        for (uint32_t k = 1; k <= MAX; k++) {
            counts->at[n][k] = counts->at[n][k - 1] + (n >= k ? counts->at[n - k][k] : 0);
        }
    }
}

bool idsi_partition_is_valid(const ids_partition *partition)
{
    uint32_t sum = 0;

    if (partition == NULL || partition->degree > MAX || partition->length > MAX) {
        return false;
    }
    for (uint32_t i = 0; i < MAX; i++) {
        bool is_part = i < partition->length;
        if (is_part != (partition->part[i] > 0) ||
            (i > 0 && partition->part[i] > partition->part[i - 1])) {
            return false;
        }
        sum += partition->part[i];
    }
    return sum == partition->degree;
}

uint32_t idsi_partition_index(const idsi_partition_counts *counts, const ids_partition *partition)
{
    uint32_t rest = partition->degree;
    uint32_t bound = rest;
    uint32_t index = 0;

    for (uint32_t i = 0; i < partition->length; i++) {
        index += counts->at[rest][bound] - counts->at[rest][partition->part[i]];
        bound = partition->part[i];
        rest -= bound;
    }
    return index;
}

void idsi_partition_at(const idsi_partition_counts *counts, uint32_t degree, uint32_t index,
                       ids_partition *partition)
{
    uint32_t rest = degree;
    uint32_t bound = degree;

    *partition = (ids_partition){.degree = degree};
    while (rest > 0) {
        uint32_t part = bound < rest ? bound : rest;
        while (counts->at[rest][bound] - counts->at[rest][part - 1] <= index) {
            part--;
        }
        index -= counts->at[rest][bound] - counts->at[rest][part];
        partition->part[partition->length++] = (uint8_t)part;
        bound = part;
        rest -= part;
    }
}

void idsi_partition_first(uint32_t degree, ids_partition *partition)
{
    *partition = (ids_partition){.degree = degree, .length = degree > 0 ? 1 : 0};
    partition->part[0] = (uint8_t)degree;
}

bool idsi_partition_next(ids_partition *partition)
{
    uint32_t rest = 0;
    uint32_t at = partition->length;

    while (at > 0 && partition->part[at - 1] == 1) {
        at--;
        rest++;
        partition->part[at] = 0;
    }
    if (at == 0) {
        memset(partition->part, 1, rest);
        return false;
    }
    uint32_t largest = --partition->part[at - 1];
    rest++;
    while (rest > 0) {
        uint32_t part = rest < largest ? rest : largest;
        partition->part[at++] = (uint8_t)part;
        rest -= part;
    }
    partition->length = at;
    return true;
}

uint64_t ids_partition_count(uint32_t degree)
{
    idsi_partition_counts counts;

    if (degree > MAX) {
        return 0;
    }
    idsi_partition_counts_fill(&counts);
    return idsi_partition_number(&counts, degree);
}

ids_status ids_partition_rank(const ids_partition *partition, uint64_t *index)
{
    idsi_partition_counts counts;

    if (index == NULL || !idsi_partition_is_valid(partition)) {
        return IDS_ERR_ARG;
    }
    idsi_partition_counts_fill(&counts);
    *index = idsi_partition_index(&counts, partition);
    return IDS_OK;
}

ids_status ids_partition_unrank(uint32_t degree, uint64_t index, ids_partition *partition)
{
    idsi_partition_counts counts;

    if (partition == NULL || degree > MAX) {
        return IDS_ERR_ARG;
    }
    idsi_partition_counts_fill(&counts);
    if (index >= idsi_partition_number(&counts, degree)) {
        return IDS_ERR_ARG;
    }
    idsi_partition_at(&counts, degree, (uint32_t)index, partition);
    return IDS_OK;
}

/* ---- text ------------------------------------------------------------------------------- */

static ids_status fail_at(ids_ctx *ctx, const char *text, size_t at, const char *reason)
{
    const ids_place place = {.line = 1, .column = (uint32_t)at + 1};

    return idsi_fail_at(ctx, IDS_ERR_PARSE, place, "partition \"%.100s\": %s", text, reason);
}

/* Reads one part from text[*at] on and adds it to the partition. */
static ids_status read_part(ids_ctx *ctx, const char *text, size_t *at, ids_partition *partition)
{
    const size_t start = *at;
    uint32_t part = 0;

    while (text[*at] >= '0' && text[*at] <= '9' && part <= MAX) {
        part = 10 * part + (uint32_t)(text[*at] - '0');
        (*at)++;
    }
    if (*at == start) {
        return fail_at(ctx, text, start,
                       "expected parts joined by +, largest first, such as 4+3+1");
    }
    if (text[start] == '0') {
        return fail_at(ctx, text, start,
                       *at == start + 1 ? "a part is at least 1"
                                        : "a part is written without zeros in front");
    }
    if (part > MAX - partition->degree) {
        return fail_at(ctx, text, start, "the sum of the parts passes the largest degree, 40");
    }
    if (partition->length > 0 && part > partition->part[partition->length - 1]) {
        return fail_at(ctx, text, start,
                       "this part is larger than the one before it; write the largest part first");
    }
    partition->part[partition->length++] = (uint8_t)part;
    partition->degree += part;
    return IDS_OK;
}

ids_status ids_partition_parse(ids_ctx *ctx, const char *text, ids_partition *partition)
{
    ids_status st = IDS_OK;
    ids_partition read = {0};
    size_t at = 0;

    if (text == NULL || partition == NULL) {
        return idsi_fail_arg(ctx, text == NULL ? "text" : "partition");
    }
    if (strcmp(text, "0") == 0) {
        *partition = read; /* no parts at all */
        return IDS_OK;
    }
    IDSI_TRY(read_part(ctx, text, &at, &read));
    while (text[at] == '+') {
        at++;
        IDSI_TRY(read_part(ctx, text, &at, &read));
    }
    if (text[at] != '\0') {
        st = fail_at(ctx, text, at, "expected parts joined by +, largest first, such as 4+3+1");
        goto done;
    }
    *partition = read;
done:
    return st;
}

_Static_assert(MAX == 40, "a message names the largest degree");

void idsi_partition_write(const ids_partition *partition, char text[IDSI_PARTITION_TEXT])
{
    size_t at = 0;

    for (uint32_t i = 0; i < partition->length; i++) {
        uint32_t part = partition->part[i];
        if (i > 0) {
            text[at++] = '+';
        }
        if (part >= 10) {
            text[at++] = (char)('0' + part / 10);
        }
        text[at++] = (char)('0' + part % 10);
    }
    if (at == 0) {
        text[at++] = '0';
    }
    text[at] = '\0';
}

ids_status ids_partition_print(ids_ctx *ctx, const ids_partition *partition, char **text)
{
    char buffer[IDSI_PARTITION_TEXT];

    if (text == NULL || !idsi_partition_is_valid(partition)) {
        return idsi_fail_arg(ctx, text == NULL ? "text" : "partition");
    }
    idsi_partition_write(partition, buffer);
    return idsi_strdup(ctx, buffer, text);
}

/* ---- diagram ---------------------------------------------------------------------------- */

ids_status ids_partition_conjugate(const ids_partition *partition, ids_partition *conjugate)
{
    ids_partition columns = {0};

    if (conjugate == NULL || !idsi_partition_is_valid(partition)) {
        return IDS_ERR_ARG;
    }
    columns.degree = partition->degree;
    columns.length = partition->part[0];
    for (uint32_t i = 0; i < partition->length; i++) {
        for (uint32_t j = 0; j < partition->part[i]; j++) {
            columns.part[j]++;
        }
    }
    *conjugate = columns;
    return IDS_OK;
}

static uint32_t gcd(uint32_t a, uint32_t b)
{
    while (b != 0) {
        uint32_t rest = a % b;

        a = b;
        b = rest;
    }
    return a;
}

/* Takes `divisor` out of the product of factor[0..count-1], which it divides. */
static void cancel(uint32_t *factor, uint32_t count, uint32_t divisor)
{
    for (uint32_t i = 0; i < count && divisor > 1; i++) {
        uint32_t common = gcd(factor[i], divisor);

        factor[i] /= common;
        divisor /= common;
    }
}

ids_status ids_partition_dimension(const ids_partition *partition, uint64_t *dimension)
{
    ids_partition columns = {0};
    uint32_t factor[MAX];
    uint64_t product = 1;

    if (dimension == NULL || ids_partition_conjugate(partition, &columns) != IDS_OK) {
        return IDS_ERR_ARG;
    }
    for (uint32_t i = 0; i < partition->degree; i++) {
        factor[i] = i + 1;
    }
    for (uint32_t i = 0; i < partition->length; i++) {
        for (uint32_t j = 0; j < partition->part[i]; j++) {
            uint32_t arm = partition->part[i] - j - 1;
            uint32_t leg = columns.part[j] - i - 1;

            cancel(factor, partition->degree, arm + leg + 1);
        }
    }
    for (uint32_t i = 0; i < partition->degree; i++) {
        if (!idsi_mul_u64(product, factor[i], &product)) {
            return IDS_ERR_LIMIT;
        }
    }
    *dimension = product;
    return IDS_OK;
}

ids_status idsi_partition_centralizer(const ids_partition *partition, uint64_t *order)
{
    uint64_t product = 1;
    uint32_t equal = 0;

    for (uint32_t i = 0; i < partition->length; i++) {
        equal = i > 0 && partition->part[i] == partition->part[i - 1] ? equal + 1 : 1;
        if (!idsi_mul_u64(product, (uint64_t)partition->part[i] * equal, &product)) {
            return IDS_ERR_LIMIT;
        }
    }
    *order = product;
    return IDS_OK;
}

uint64_t idsi_partition_beads(const ids_partition *partition, uint32_t count)
{
    uint64_t beads = 0;

    IDSI_ASSERT(count >= partition->length && partition->part[0] + count <= 64);
    for (uint32_t i = 0; i < count; i++) {
        uint32_t part = i < partition->length ? partition->part[i] : 0;

        beads |= UINT64_C(1) << (part + count - 1 - i);
    }
    return beads;
}

void idsi_partition_from_beads(uint64_t beads, ids_partition *partition)
{
    uint32_t below = (uint32_t)__builtin_popcountll(beads);

    *partition = (ids_partition){0};
    while (beads != 0) {
        uint32_t top = 63u - (uint32_t)__builtin_clzll(beads);

        below--;
        if (top == below) {
            return; /* only beads without a gap: parts that are 0 */
        }
        partition->part[partition->length++] = (uint8_t)(top - below);
        partition->degree += top - below;
        beads &= ~(UINT64_C(1) << top);
    }
}

/* ---- sizes --------------------------------------------------------------------------- */

/* Not lgamma(), which writes a variable of the whole process. */
double idsi_factorial_bits(uint32_t n)
{
    double bits = 0;

    for (uint32_t i = 2; i <= n; i++) {
        bits += log2(i);
    }
    return bits;
}

double idsi_partition_group_bits(const ids_partition *partition)
{
    double bits = 0;
    ids_partition conjugate = *partition;

    if (ids_partition_conjugate(partition, &conjugate) != IDS_OK) {
        return INFINITY;
    }
    for (uint32_t i = 0; i < partition->length; i++) {
        bits += idsi_factorial_bits(partition->part[i]);
    }
    for (uint32_t i = 0; i < conjugate.length; i++) {
        bits += idsi_factorial_bits(conjugate.part[i]);
    }
    return bits + 1e-6;
}
