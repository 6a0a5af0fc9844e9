/* SPDX-License-Identifier: BSD-2-Clause */
#include "broken.h"

#define P IDS_ERR_PARSE
#define B "basis e1 e2 e3\n"
#define PLAIN B "operation a*b\n"
#define COM B "operation a*b commutative\n"

const broken broken_algebras[] = {
    /* ---- the text as such ---- */
    {"", 0, P, 1, 1, "no operation is declared"},
    {"basis e1\n", 0, P, 1, 1, "no operation is declared"},
    {"operation a*b\n", 0, P, 1, 1, "no basis is declared; expected a line such as: basis e1 e2"},
    {PLAIN "e1*e\x80\n", 0, P, 3, 5, "the byte 0x80 is not UTF-8"},
    {PLAIN "e1*e2 = e3\xC2\xA0\n", 0, P, 3, 11, "U+00A0"},

    /* ---- basis ---- */
    {"basis\noperation a*b\n", 0, P, 1, 6, "expected the name of a basis element, found the end"},
    {"basis e1 2\noperation a*b\n", 0, P, 1, 10, "the name of a basis element, found '2'"},
    {"basis e1, e2\noperation a*b\n", 0, P, 1, 9, "the name of a basis element, found ','"},
    {"basis e1 e2 e1\noperation a*b\n", 0, P, 1, 13, "the basis element 'e1' stands twice"},
    {PLAIN "basis f\n", 0, P, 3, 1, "a second basis; line 1 has the first one"},
    {"basis e none\noperation a*b\n", 0, P, 1, 9, "'none' is a word of the notation"},
    {"basis e basis\noperation a*b\n", 0, P, 1, 9, "'basis' is a word of the notation"},
    {"basis e o\noperation a o b\n", 0, P, 1, 9, "'o' names the operation of line 2"},
    {"basis t e\noperation t(a,b)\n", 0, P, 1, 7, "'t' names the operation of line 2"},

    /* ---- operation: as in presentations ---- */
    {B "operation a*b comutative\n", 0, P, 2, 15, "did you mean 'commutative'"},
    {B "operation {a,b} = -{a,b}\n", 0, IDS_ERR_DOMAIN, 2, 11, "the signs contradict each other"},
    {PLAIN "operation x*y\n", 0, P, 3, 12, "line 2 declares an operation"},
    {B "operaton a*b\n", 0, P, 1, 1, "no operation is declared"},

    /* ---- lines that are no product ---- */
    {PLAIN "operaton [a,b]\n", 0, P, 3, 1, "did you mean 'operation'"},
    {PLAIN "bases e4\n", 0, P, 3, 1, "did you mean 'basis'"},
    {PLAIN "identity e1*e2\n", 0, P, 3, 1, "expected basis, operation, or a product"},
    {PLAIN "2*e1*e2 = e3\n", 0, P, 3, 1, "found '2'"},
    {PLAIN "-e1*e2 = e3\n", 0, P, 3, 1, "found '-'"},
    {PLAIN "e1 = e2\n", 0, P, 3, 4, "expected an operation and another basis element, found '='"},

    /* ---- the left side ---- */
    {PLAIN "e1*e4 = e1\n", 0, P, 3, 4, "unknown basis element 'e4'; expected one of line 1"},
    {PLAIN "e1*E2 = e1\n", 0, P, 3, 4, "did you mean 'e2'"},
    {PLAIN "f*e2 = e1\n", 0, P, 3, 1, "unknown basis element 'f'"},
    {PLAIN "e1.e2 = e1\n", 0, P, 3, 3, "unknown operation '.'; expected a declaration"},
    {PLAIN "e1*(e2*e3) = e1\n", 0, P, 3, 4, "expected the name of a basis element, found '('"},
    {PLAIN "e1*e2*e3 = e1\n", 0, P, 3, 6, "expected '=' and the value of the product, found '*'"},
    {PLAIN "(e1*e2)*e3 = e1\n", 0, P, 3, 4, "expected ',' or the closing fence, found '*'"},
    {PLAIN "(e1,e2) = e3\n", 0, P, 3, 1, "unknown operation '(' with 2 arguments"},
    {PLAIN "t(e1,e2) = e3\n", 0, P, 3, 1, "unknown operation 't' with 2 arguments"},
    {B "operation [a,b]\n[e1,e2,e3] = e1\n", 0, P, 3, 1,
     "wrong number of arguments: the operation of line 2 takes 2, found 3"},
    {B "operation t(a,b,c)\nt(e1,e2) = e1\n", 0, P, 3, 1, "line 2 takes 3, found 2"},
    {B "operation [a,b]\n[e1,e2,e3,e1,e2,e3,e1,e2,e3] = e1\n", 0, P, 3, 1,
     "wrong number of arguments: more than 8"},
    {B "operation [a,b]\n[e1,e2 = e3\noperation [a,b,c]\n", 0, P, 3, 1,
     "the fence '[' is never closed"},
    {B "operation [a,b]\n[e1,e2) = e3\n", 0, P, 3, 7, "expected ']' to close the '['"},
    {PLAIN "e1*e2\n", 0, P, 3, 6, "expected '=' and the value of the product"},

    /* ---- the right side ---- */
    {PLAIN "e1*e2 =\n", 0, P, 3, 8, "expected the name of a basis element, found the end"},
    {PLAIN "e1*e2 = e4\n", 0, P, 3, 9, "unknown basis element 'e4'"},
    {PLAIN "e1*e2 = e1*e2\n", 0, P, 3, 11, "expected '+', '-' or the end of the line, found '*'"},
    {PLAIN "e1*e2 = e1 e2\n", 0, P, 3, 12, "expected '+', '-' or the end of the line"},
    {PLAIN "e1*e2 = e1 = e2\n", 0, P, 3, 12, "expected '+', '-' or the end of the line"},
    {PLAIN "e1*e2 = 3\n", 0, P, 3, 9, "a number alone (only 0 can stand alone)"},
    {PLAIN "e1*e2 = e1 + 1/2\n", 0, P, 3, 14, "a number alone"},
    {PLAIN "e1*e2 = 1/0 e1\n", 0, P, 3, 11, "denominator 0"},
    {PLAIN "e1*e2 = 0.5 e1\n", 0, P, 3, 10, "a decimal fraction"},
    {PLAIN "e1*e2 = e1 + - e2\n", 0, P, 3, 14, "expected the name of a basis element, found '-'"},
    {PLAIN "e1*e2 = 2(e1 + e2\n", 0, P, 3, 10, "is never closed"},
    {PLAIN "e1*e2 = 2(e1, e2)\n", 0, P, 3, 13, "expected '+', '-' or ')', found ','"},
    {PLAIN "e1*e2 = 2[e1]\n", 0, P, 3, 10, "expected the name of a basis element, found '['"},

    /* ---- contradictions ---- */
    {PLAIN "e1*e2 = e3\ne1*e2 = e1\n", 0, P, 4, 1, "another value than line 3 gives this product"},
    {COM "e1*e2 = e3\n\ne2*e1 = 2 e3\n", 0, P, 5, 1,
     "another value than line 3 gives this product, up to the symmetry"},
    {COM "e2*e1 = 0\ne1*e2 = e3\n", 0, P, 4, 1, "another value than line 3"},
    {B "operation [a,b] alternating\n[e1,e2] = e3\n[e2,e1] = e3\n", 0, P, 4, 1,
     "another value than line 3"},
    {B "operation [a,b] alternating\n[e2,e2] = e3\n", 0, P, 3, 1,
     "the symmetry of the operation makes this product 0"},
    {B "operation {a,b,c} = -{c,b,a}\n{e1,e2,e1} = e3\n", 0, P, 3, 1, "makes this product 0"},

    /* ---- limits ---- */
    {PLAIN "e1*e2 = 9223372036854775808 e1\n", 0, IDS_ERR_LIMIT, 3, 1, "beyond 64 bits"},
    {PLAIN "e1*e2 = 1/9223372036854775808 e1\n", 0, IDS_ERR_LIMIT, 3, 1, "beyond 64 bits"},
};

const size_t broken_algebra_count = sizeof broken_algebras / sizeof broken_algebras[0];
