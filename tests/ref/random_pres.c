/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * random_pres SEED: writes a small random presentation, the same one for the same seed.
 *
 * One to three operations of two to four arguments in random notations and with random symmetry
 * groups, and one to three random homogeneous identities. A comment tells how far the slow
 * reference program can go in about a second, judged by the number of monomials: an operation
 * with group G contributes 1/|G| times the number of ways to fill its places.
 *
 * Shapes of monomials are strings in prefix form: 'A' + operation, '.' for a leaf.
 * Random numbers: splitmix64 (Steele, Lea and Flood, OOPSLA 2014).
 */
#include <stdbool.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define ARITY 4
#define DEGREE 7      /* highest degree of the comparison */
#define MONOMIALS 400 /* most monomials for about a second */

typedef enum kind { INFIX, FENCE, PREFIX } kind;

typedef struct order {
    int image[ARITY];
    int sign;
} order;

typedef struct operation {
    kind kind;
    const char *open;
    const char *close;
    int arity;
    const char *word;    /* commutative, alternating or "" */
    order generators[2]; /* when there is no word */
    int generator_count;
    double group_order;
} operation;

typedef struct source {
    uint64_t state;
    operation ops[3];
    int op_count;
    double monomials[DEGREE + 1];
    int top; /* degree to which the slow program goes */
} source;

static uint64_t next(source *src)
{
    src->state += 0x9e3779b97f4a7c15u;
    uint64_t z = src->state;
    z = (z ^ (z >> 30)) * 0xbf58476d1ce4e5b9u;
    z = (z ^ (z >> 27)) * 0x94d049bb133111ebu;
    return z ^ (z >> 31);
}

static int below(source *src, int bound)
{
    return (int)(next(src) % (uint64_t)bound);
}

static bool chance(source *src, int percent)
{
    return below(src, 100) < percent;
}

static void shuffle(source *src, int *items, int count)
{
    for (int i = count - 1; i > 0; i--) {
        int j = below(src, i + 1);
        int held = items[i];
        items[i] = items[j];
        items[j] = held;
    }
}

/* Order of the group, 0 when a permutation has both signs. */
static int close_group(const order *generators, int count, int arity)
{
    order all[48];
    int size = 1;
    all[0] = (order){.image = {0, 1, 2, 3}, .sign = 1};
    for (int i = 0; i < size; i++) {
        for (int g = 0; g < count; g++) {
            order made = {.image = {0, 1, 2, 3}, .sign = all[i].sign * generators[g].sign};
            int j = 0;
            for (int k = 0; k < arity; k++)
                made.image[k] = all[i].image[generators[g].image[k]];
            while (j < size && memcmp(all[j].image, made.image, sizeof made.image) != 0)
                j++;
            if (j == size)
                all[size++] = made;
            else if (all[j].sign != made.sign)
                return 0;
        }
    }
    return size;
}

static void make_symmetry(source *src, operation *op)
{
    int pick = below(src, 10);
    int full = op->arity == 2 ? 2 : op->arity == 3 ? 6 : 24;
    op->word = pick < 3 ? "commutative" : pick < 5 ? "alternating" : "";
    op->group_order = pick < 5 ? full : 1;
    if (pick < 7)
        return;
    int size = 0;
    while (size == 0) {
        op->generator_count = 1 + chance(src, 30);
        for (int g = 0; g < op->generator_count; g++) {
            order *made = &op->generators[g];
            *made = (order){.image = {0, 1, 2, 3}, .sign = chance(src, 50) ? -1 : 1};
            shuffle(src, made->image, op->arity);
        }
        size = close_group(op->generators, op->generator_count, op->arity);
    }
    op->group_order = size;
}

static void make_operations(source *src)
{
    static const char *const symbols[] = {"*", ".", "o"};
    static const char *const opens[] = {"(", "[", "{", "<"};
    static const char *const closes[] = {")", "]", "}", ">"};
    static const char *const names[] = {"t", "br", "f1"};
    int symbol = below(src, 3);
    int fence = below(src, 4);
    src->op_count = 1 + (chance(src, 55) ? chance(src, 70) + chance(src, 25) : 0);
    for (int i = 0; i < src->op_count; i++) {
        operation *op = &src->ops[i];
        int size = below(src, 20);
        op->arity = size < 11 ? 2 : size < 18 ? 3 : 4;
        op->kind = op->arity == 2 && chance(src, 60) ? INFIX : chance(src, 70) ? FENCE : PREFIX;
        op->open = op->kind == INFIX   ? symbols[(symbol + i) % 3]
                   : op->kind == FENCE ? opens[(fence + i) % 4]
                                       : names[i];
        op->close = op->kind == FENCE ? closes[(fence + i) % 4] : ")";
        make_symmetry(src, op);
    }
}

static double binomial(int n, int k)
{
    double value = 1;
    for (int i = 1; i <= k; i++)
        value = value * (n - k + i) / i;
    return value;
}

/* Ways to fill an ordered row of places with monomials on n labels. */
static double fillings(const source *src, int places, int n)
{
    if (places == 0)
        return n == 0;
    double sum = 0;
    for (int k = 1; k <= n - places + 1; k++)
        sum += binomial(n, k) * src->monomials[k] * fillings(src, places - 1, n - k);
    return sum;
}

static void count_monomials(source *src)
{
    src->monomials[1] = 1;
    src->top = 1;
    for (int n = 2; n <= DEGREE; n++) {
        for (int i = 0; i < src->op_count; i++) {
            const operation *op = &src->ops[i];
            src->monomials[n] += fillings(src, op->arity, n) / op->group_order;
        }
        if (src->monomials[n] <= MONOMIALS && src->top == n - 1)
            src->top = n;
    }
}

/* Appends a random shape of a degree that has monomials. */
static void make_shape(source *src, int degree, char *shape)
{
    shape += strlen(shape);
    if (degree == 1) {
        strcpy(shape, ".");
        return;
    }
    for (;;) {
        int pick = below(src, src->op_count);
        int arity = src->ops[pick].arity;
        int size[ARITY] = {1, 1, 1, 1};
        bool fits = arity <= degree;
        for (int rest = degree - arity; fits && rest > 0; rest--)
            size[below(src, arity)]++;
        for (int i = 0; fits && i < arity; i++)
            fits = src->monomials[size[i]] > 0;
        if (!fits)
            continue;
        *shape++ = (char)('A' + pick);
        *shape = '\0';
        for (int i = 0; i < arity; i++)
            make_shape(src, size[i], shape);
        return;
    }
}

/* Prints a shape with *leaves, *leaves + 1, ... as indices into `names`. */
static const char *print_shape(const source *src, const char *shape, const int **leaves,
                               const char *names, bool inside)
{
    if (*shape == '.') {
        putchar(names[*(*leaves)++]);
        return shape + 1;
    }
    const operation *op = &src->ops[*shape++ - 'A'];
    if (op->kind == INFIX) {
        const char *blank = op->open[0] == 'o' ? " " : "";
        fputs(inside ? "(" : "", stdout);
        shape = print_shape(src, shape, leaves, names, true);
        printf("%s%s%s", blank, op->open, blank);
        shape = print_shape(src, shape, leaves, names, true);
        fputs(inside ? ")" : "", stdout);
        return shape;
    }
    printf("%s%s", op->open, op->kind == PREFIX ? "(" : "");
    for (int i = 0; i < op->arity; i++) {
        fputs(i > 0 ? "," : "", stdout);
        shape = print_shape(src, shape, leaves, names, false);
    }
    fputs(op->close, stdout);
    return shape;
}

static void print_operation(const source *src, int index)
{
    const operation *op = &src->ops[index];
    static const int plain[ARITY] = {0, 1, 2, 3};
    char shape[] = "A....";
    shape[0] = (char)('A' + index);
    shape[1 + op->arity] = '\0';
    const int *leaves = plain;
    printf("operation ");
    print_shape(src, shape, &leaves, "abcd", false);
    for (int g = 0; g < op->generator_count; g++) {
        printf(" = %s", op->generators[g].sign < 0 ? "-" : "");
        leaves = op->generators[g].image;
        print_shape(src, shape, &leaves, "abcd", false);
    }
    printf("%s%s\n", op->word[0] != '\0' ? " " : "", op->word);
}

static void print_coefficient(source *src, bool first)
{
    int num = 1 + (chance(src, 40) ? below(src, 4) : 0);
    int den = chance(src, 12) ? 2 + below(src, 3) : 1;
    bool minus = chance(src, 50);
    fputs(first ? (minus ? "-" : "") : (minus ? " - " : " + "), stdout);
    if (den > 1)
        printf("%d/%d%s", num, den, chance(src, 50) ? "*" : " ");
    else if (num > 1)
        printf("%d%s", num, chance(src, 50) ? "*" : " ");
}

/* Variables of an identity: sometimes all different, sometimes with repetitions. */
static void make_variables(source *src, int degree, int *variables)
{
    bool repeat = chance(src, 45);
    int used = 0;
    for (int i = 0; i < degree; i++)
        variables[i] = repeat && used > 0 && chance(src, 50) ? below(src, used) : used++;
}

static void print_polynomial(source *src, int degree, int *variables, const char *names)
{
    char shape[4 * DEGREE] = "";
    bool one_type = chance(src, 35);
    int terms = 1 + (chance(src, 85) ? 1 + below(src, 3) : 0);
    if (chance(src, 10))
        terms += 4;
    make_shape(src, degree, shape);
    for (int i = 0; i < terms; i++) {
        if (i > 0)
            shuffle(src, variables, degree);
        if (i > 0 && !one_type) {
            shape[0] = '\0';
            make_shape(src, degree, shape);
        }
        const int *leaves = variables;
        print_coefficient(src, i == 0);
        print_shape(src, shape, &leaves, names, false);
    }
}

static void print_identity(source *src, const char *keyword, int number, int degree)
{
    int variables[DEGREE] = {0};
    make_variables(src, degree, variables);
    printf("%s ", keyword);
    if (keyword[0] == 'c' || chance(src, 50))
        printf("law%d: ", number);
    print_polynomial(src, degree, variables, "xyzuvwp");
    if (chance(src, 25)) {
        printf(" = ");
        print_polynomial(src, degree, variables, "xyzuvwp");
    } else if (chance(src, 60)) {
        printf(" = 0");
    }
    putchar('\n');
}

/* Degree of an identity, up to 5; seldom the least possible one, which mostly kills everything. */
static int pick_degree(source *src)
{
    int possible[DEGREE] = {0};
    int count = 0;
    for (int n = 2; n <= 5 && n <= src->top; n++) {
        if (src->monomials[n] > 0)
            possible[count++] = n;
    }
    if (count > 1 && chance(src, 85))
        return possible[1 + below(src, count - 1)];
    return possible[0];
}

/* A definition of degree 3 and an identity that uses it. */
static void print_definition(source *src)
{
    int arguments[3] = {0, 1, 2};
    printf("define d3(a,b,c) = ");
    print_polynomial(src, 3, arguments, "abc");
    printf("\nidentity defined: d3(x,y,z) %s d3(%s)%s\n", chance(src, 50) ? "+" : "-",
           chance(src, 50) ? "y,x,z" : "y,z,x", chance(src, 50) ? " = 0" : "");
}

int main(int argc, char **argv)
{
    source src = {0};
    if (argc != 2) {
        fputs("usage: random_pres SEED\n", stderr);
        return 2;
    }
    src.state = strtoull(argv[1], NULL, 10);
    make_operations(&src);
    count_monomials(&src);
    printf("# random presentation, seed %s\n# reference degree: %d\n# monomials:", argv[1],
           src.top);
    for (int n = 1; n <= src.top; n++)
        printf(" %.0f", src.monomials[n]);
    putchar('\n');
    for (int i = 0; i < src.op_count; i++)
        print_operation(&src, i);
    if (src.monomials[3] > 0 && chance(&src, 15))
        print_definition(&src);
    int identities = 1 + (chance(&src, 40) ? 1 + below(&src, 2) : 0);
    for (int i = 0; i < identities; i++) {
        print_identity(&src, "identity", i + 1, pick_degree(&src));
    }
    if (chance(&src, 10))
        print_identity(&src, "candidate", 9, pick_degree(&src));
    return 0;
}
