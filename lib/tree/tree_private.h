/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Signatures, prefix-code trees, association types and label distributions, as the other
 * rooms see them.
 */
#ifndef IDSI_TREE_PRIVATE_H
#define IDSI_TREE_PRIVATE_H

#include <idspan/basis.h>

#include "../core/core_private.h"

/* ---- prefix code ------------------------------------------------------------------------
 * A tree is an array of tokens in prefix order: a node is its operation, then its arguments;
 * a leaf is its label (>= 1). A tree of degree n has at most 2n-1 tokens.
 */
typedef uint32_t idsi_token;

#define IDSI_NODE_BIT 0x80000000u
#define IDSI_MAX_TOKENS (2u * IDS_MAX_DEGREE - 1u)

static inline bool idsi_is_node(idsi_token token)
{
    return (token & IDSI_NODE_BIT) != 0;
}

static inline idsi_token idsi_node(uint32_t op)
{
    return IDSI_NODE_BIT | op;
}

static inline uint32_t idsi_node_op(idsi_token token)
{
    return token & ~IDSI_NODE_BIT;
}

/* The set of the labels 1..degree; label i is bit i - 1. */
static inline uint64_t idsi_labels_all(uint32_t degree)
{
    return degree == 0 ? 0 : UINT64_MAX >> (64 - degree);
}

/* ---- characters (chars.c) -------------------------------------------------------------------- */

typedef enum idsi_char_class {
    IDSI_CHAR_BLANK,    /* space, tab */
    IDSI_CHAR_LINE_END, /* line feed, or carriage return (before a line feed) */
    IDSI_CHAR_ODD,      /* control, invisible and unusual blank characters */
    IDSI_CHAR_LETTER,
    IDSI_CHAR_DIGIT,    /* 0 .. 9 */
    IDSI_CHAR_CONTINUE, /* goes on in a name but cannot begin one: ' and subscripts */
    IDSI_CHAR_MARK,     /* a character that is a lexeme by itself: fences , : + - = # " */
    IDSI_CHAR_SYMBOL    /* any other printable character */
} idsi_char_class;

/* Decodes the character at text[0 .. length); its bytes (1 .. 4), or 0 when it is not UTF-8. */
size_t idsi_utf8_decode(const char *text, size_t length, uint32_t *code);
idsi_char_class idsi_char_classify(uint32_t code);

/* ---- the notation of operations (notation.c) ------------------------------------------------ */

/* Longest name or symbol, in bytes. */
#define IDSI_MAX_NAME 63u

/* The words that begin a statement of a presentation. */
#define IDSI_STATEMENT_WORDS 5u
extern const char *const idsi_statement_words[IDSI_STATEMENT_WORDS];

/* What text[0 .. length) is as a whole, for readers of presentations and for signatures. */
bool idsi_word_is_reserved(const char *text, size_t length); /* has a meaning in presentations */
bool idsi_word_is_name(const char *text, size_t length);     /* letters, digits; not reserved */
bool idsi_word_is_infix(const char *text, size_t length);    /* a name, or symbol characters */
/* The fence that closes `open`; '\0' when that opens nothing. */
char idsi_fence_close(char open);
/* NULL when an operation can be written so; else what is expected instead. */
const char *idsi_notation_fault(ids_notation notation, const char *open, const char *close);

/* ---- groups of signed argument orders ------------------------------------------------------- */

/* order of arguments: result[i] = argument[image[i]] */
typedef struct idsi_group {
    uint32_t arity;
    ids_symmetry symmetry;      /* elements are listed for GENERATED only */
    uint64_t order;
    ids_signed_order *elements; /* `order` of them, identity first */
} idsi_group;

/* The group that `count` signed orders generate. IDS_ERR_DOMAIN when the signs contradict. */
ids_status idsi_group_close(ids_ctx *ctx, uint32_t arity, const ids_signed_order *generators,
                            size_t count, idsi_group *group);
void idsi_group_clear(ids_ctx *ctx, idsi_group *group);

/*
 * Chooses the canonical argument order. `key[i]` is the size of argument i (larger first) and
 * `label[i]` breaks ties (smaller first); pass label = NULL for none. Writes image with
 * canonical[i] = argument[image[i]] and returns the sign, op(arguments) = sign * op(canonical).
 */
int idsi_group_canonical(const idsi_group *group, const uint64_t *key, const uint64_t *label,
                         uint8_t *image);

/* ---- signature ------------------------------------------------------------------------------- */

typedef struct idsi_op {
    ids_notation notation;
    char *open;
    char *close; /* NULL unless a fence */
    uint32_t arity;
    idsi_group group;
    ids_signed_order *generators; /* as declared, for printing; NULL unless GENERATED */
    size_t generator_count;
} idsi_op;

struct ids_signature {
    ids_ctx *ctx;
    size_t count;
    idsi_op *ops;
};

/* ---- trees ----------------------------------------------------------------------------------- */

/* Number of tokens of the subtree that starts at `tree`. */
size_t idsi_tree_length(const ids_signature *sig, const idsi_token *tree);
/* Number of its leaves. */
uint32_t idsi_tree_degree(const ids_signature *sig, const idsi_token *tree);
/*
 * Size order of the shapes: degree, then operation (declared earlier = larger), then arguments
 * from left to right. < 0, 0, > 0; labels do not count.
 */
int idsi_tree_compare_shape(const ids_signature *sig, const idsi_token *a, const idsi_token *b);
/* Total order of labelled trees: larger shape first, then least label, then labels in turn. */
int idsi_tree_compare(const ids_signature *sig, const idsi_token *a, const idsi_token *b);
/*
 * Makes a tree canonical in place (labels may repeat); returns the sign, 0 when the tree is zero.
 * `length` tokens; no allocation.
 */
int idsi_tree_canonicalize(const ids_signature *sig, idsi_token *tree, size_t length);

struct ids_mono {
    ids_ctx *ctx;
    const ids_signature *sig;
    uint32_t degree;
    uint32_t length;
    idsi_token tokens[]; /* length */
};

ids_status idsi_mono_from_tokens(ids_ctx *ctx, const ids_signature *sig, const idsi_token *tokens,
                                 size_t length, ids_mono **mono);
/*
 * Appends a tree in the signature's notation. names[i] is written for label i+1; names == NULL
 * gives the standard letters a, b, c, ... without those that name an operation.
 * An infix product inside another product gets parentheses.
 */
ids_status idsi_tree_print(const ids_signature *sig, const idsi_token *tree,
                           const char *const *names, idsi_text *text);
/* The standard name of label 1, 2, ...: letters that are not operations, then x1, x2, ...;
 * label 0 gives the letter for a leaf without label. At most 15 bytes and the NUL. */
void idsi_label_name(const ids_signature *sig, uint32_t label, char name[16]);

/* ---- label distributions ------------------------------------------------------------------------
 * How a set of labels is dealt to the arguments of a node, with the symmetries divided out
 * (lib/tree/split.c). Argument i takes size[i] labels. parent[i] < i says that argument i is
 * one of those that a symmetry can bring to place parent[i], so that argument parent[i] must
 * hold the least label of its whole family (i's and its descendants' sets included).
 */
#define IDSI_SPLIT_MAX 16u

typedef struct idsi_split {
    uint32_t count;                  /* arguments */
    uint32_t total;                  /* labels in all */
    uint8_t size[IDSI_SPLIT_MAX];    /* labels of each argument */
    int8_t parent[IDSI_SPLIT_MAX];   /* -1: a root of the forest */
    uint8_t family[IDSI_SPLIT_MAX];  /* labels of the argument and all its descendants */
    uint64_t ways;                   /* number of distributions; 0 when beyond 64 bits */
    uint64_t stabilizer;             /* order of the group that was divided out */
} idsi_split;

/* Fills everything from count, size and parent. On overflow of ways the rest is still right. */
void idsi_split_prepare(idsi_split *split);
/* The distributions for a group and canonical keys: arguments with equal keys may be swapped. */
void idsi_split_for_group(const idsi_group *group, const uint64_t *key, const uint8_t *size,
                          idsi_split *split);
/*
 * Rank of the distribution sets[0..count-1] of the label set `all` (bit l-1: label l), 0 .. ways-1.
 * The order is lexicographic, argument by argument: first the labels of the argument's whole
 * family, then its own. The sets must be canonical (see idsi_split_is_canonical).
 */
uint64_t idsi_split_rank(const idsi_split *split, uint64_t all, const uint64_t *sets);
void idsi_split_unrank(const idsi_split *split, uint64_t all, uint64_t rank, uint64_t *sets);
bool idsi_split_is_canonical(const idsi_split *split, const uint64_t *sets);
/* Rank of `subset` among the subsets of `pool` of its size, in lexicographic order; and back. */
uint64_t idsi_subset_rank(uint64_t pool, uint64_t subset);
uint64_t idsi_subset_unrank(uint64_t pool, uint32_t size, uint64_t rank);

/* ---- association types ----------------------------------------------------------------------- */

typedef struct idsi_type {
    uint32_t op;          /* UINT32_MAX for the leaf */
    uint32_t degree;
    uint32_t children;    /* first child in ids_types.children */
    uint64_t automorphisms; /* 0: beyond 64 bits */
    uint64_t monomials;     /* 0: beyond 64 bits */
} idsi_type;

/*
 * Type number 0 is the leaf; then degree by degree, largest first. first[d] is the number of the
 * first type of degree d, first[max_degree+1] the number of all. Within a degree a smaller number
 * is a larger type.
 */
struct ids_types {
    ids_ctx *ctx;
    const ids_signature *sig;
    uint32_t max_degree;
    idsi_type *list;
    uint32_t *children;
    int8_t *parents; /* idsi_split.parent of each child, in step with children */
    uint32_t *first;
    uint32_t *slots; /* slot_mask + 1 types by (operation, children), 0: empty */
    uint64_t slot_mask;
};

/* Key that orders types by size: larger key, larger type. */
static inline uint64_t idsi_type_key(const ids_types *types, uint32_t type)
{
    return ((uint64_t)types->list[type].degree << 32) | (UINT32_MAX - type);
}

/* IDS_ERR_ARG unless there is such a degree, and such a type of it. */
ids_status idsi_types_check_degree(ids_ctx *ctx, const ids_types *types, uint32_t degree);
ids_status idsi_types_check_index(ids_ctx *ctx, const ids_types *types, uint32_t degree,
                                  uint64_t index);

/*
 * IDS_ERR_LIMIT when the types of degrees 1 .. max_degree are too many for the budget or for their
 * 32-bit numbers, or when that is known to the caller (`too_large`): the message has the numbers.
 */
ids_status idsi_types_check_size(ids_ctx *ctx, const ids_signature *sig, uint32_t max_degree,
                                 bool too_large);
/* The label distributions of a type's root. */
void idsi_type_split(const ids_types *types, uint32_t type, idsi_split *split);
/* Number of the type of a canonical tree; UINT32_MAX when the degree is not listed. */
uint32_t idsi_types_find(const ids_types *types, const idsi_token *tree);
/* The same for a whole prefix code of `length` tokens. */
uint32_t idsi_types_find_code(const ids_types *types, const idsi_token *code, size_t length);

#endif
