/* SPDX-License-Identifier: BSD-2-Clause */
#include "broken.h"

#define P IDS_ERR_PARSE
#define OP "operation a*b\n"
#define TWO "operation a*b\noperation a.b\n"

const broken broken_table[] = {
    /* ---- the text as such ---- */
    {"", 0, P, 1, 1, "no operation is declared"},
    {"# only a comment\n", 0, P, 1, 1, "no operation is declared"},
    {"operaton a*b\n", 0, P, 1, 1, "did you mean 'operation'"},
    {"identity x = 0\n", 0, P, 1, 1, "no operation is declared"},
    {OP "identity x\x80y\n", 0, P, 2, 11, "the byte 0x80 is not UTF-8"},
    {OP "identity \xC3\xA4\xC3\n", 0, P, 2, 11, "the byte 0xC3 is not UTF-8"},
    {OP "identity \xC0\xAF\n", 0, P, 2, 10, "the byte 0xC0 is not UTF-8"},       /* overlong */
    {OP "identity \xED\xA0\x80\n", 0, P, 2, 10, "the byte 0xED is not UTF-8"},   /* surrogate */
    {OP "identity \xF4\x90\x80\x80\n", 0, P, 2, 10, "the byte 0xF4 is not UTF-8"}, /* > 10FFFF */
    {OP "identity \xE2\x88", 0, P, 2, 10, "the byte 0xE2 is not UTF-8"},         /* cut off */
    {OP "# caf\xE9\n", 0, P, 2, 6, "the byte 0xE9 is not UTF-8"},
    {OP "identity x\x01*y\n", 0, P, 2, 11, "control, invisible or unusual blank character U+0001"},
    {OP "identity x*y\x00\n", 28, P, 2, 13, "U+0000"},
    {OP "identity x\xC2\xA0* y\n", 0, P, 2, 11, "U+00A0"},
    {OP "identity x\xE2\x80\x8B*y\n", 0, P, 2, 11, "U+200B"},
    {OP "identity x*y\r\r\n", 0, P, 2, 13, "carriage return"},
    {OP "# bell \x07\n", 0, P, 2, 8, "control character U+0007 in a comment"},
    {OP "identity 'x*y\n", 0, P, 2, 10, "U+0027 can only go on in a name"},

    /* ---- statements ---- */
    {OP "identiti x*y\n", 0, P, 2, 1, "unknown statement 'identiti'"},
    {OP "identiti x*y\n", 0, P, 2, 1, "did you mean 'identity'"},
    {OP "opperation [a,b]\n", 0, P, 2, 1, "did you mean 'operation'"},
    {OP "law x*y = y*x\n", 0, P, 2, 1, "unknown statement 'law'"},
    {OP "identity x*y\n  + y*x\n", 0, P, 3, 3, "expected a statement word"},
    {OP "(x*y)*z\n", 0, P, 2, 1, "expected a statement word"},
    {OP "model m: a*b = a b\n", 0, IDS_ERR_UNABLE, 2, 1, "this version does not read models"},

    /* ---- operation ---- */
    {"operation\n", 0, P, 1, 10, "expected an operation such as a*b"},
    {"operation 3*b\n", 0, P, 1, 11, "expected an operation such as a*b"},
    {"operation a\n", 0, P, 1, 12, "expected the symbol of an infix operation"},
    {"operation a*\n", 0, P, 1, 13, "missing operand"},
    {"operation a* commutative\n", 0, P, 1, 14, "'commutative' is a word of the notation"},
    {"operation a+b\n", 0, P, 1, 12, "'+' belongs to the notation"},
    {"operation a - b\n", 0, P, 1, 13, "'-' belongs to the notation"},
    {"operation a=b\n", 0, P, 1, 12, "'=' belongs to the notation"},
    {"operation a*b*c\n", 0, P, 1, 14, "an infix operation has two arguments"},
    {"operation a*a\n", 0, P, 1, 13, "the argument 'a' stands twice"},
    {"operation [a,b,a]\n", 0, P, 1, 16, "the argument 'a' stands twice"},
    {"operation [a]\n", 0, P, 1, 11, "an operation has 2 to 8 arguments; found 1"},
    {"operation t()\n", 0, P, 1, 13, "expected the name of an argument, found ')'"},
    {"operation t(a,b,c,d,e,f,g,h,i)\n", 0, IDS_ERR_LIMIT, 1, 29, "2 to 8 arguments"},
    {"operation [a,b)\n", 0, P, 1, 15, "expected ']' to close the '[' of line 1, column 11"},
    {"operation [a,2]\n", 0, P, 1, 14, "expected the name of an argument, found '2'"},
    {"operation [a b]\n", 0, P, 1, 14, "expected ',' or the closing fence, found 'b'"},
    {"operation t(t,b)\n", 0, P, 1, 13, "the argument has the name of the operation"},
    {"operation a*b comutative\n", 0, P, 1, 15, "did you mean 'commutative'"},
    {"operation a*b symmetric\n", 0, P, 1, 15, "unknown symmetry 'symmetric'"},
    {"operation a*b commutative alternating\n", 0, P, 1, 27, "expected the end of the line"},
    {"operation a*b [x]\n", 0, P, 1, 15, "expected commutative, alternating, none, '='"},
    {OP "operation x*y commutative\n", 0, P, 2, 12, "line 1 declares an operation"},
    {"operation [a,b]\noperation [x,y]\n", 0, P, 2, 11, "this symbol is in use"},
    {"operation {a,b} = {b,c}\n", 0, P, 1, 22, "'c' is not among the arguments on the left"},
    {"operation {a,b} = [b,a]\n", 0, P, 1, 19, "expected the same operation on both sides"},
    {"operation {a,b,c} = {b,a}\n", 0, P, 1, 21, "expected the same operation on both sides"},
    {"operation {a,b} =\n", 0, P, 1, 18, "expected an operation such as a*b"},
    {"operation {a,b} = {b,a} commutative\n", 0, P, 1, 25, "expected '=' and another argument"},
    {"operation {a,b} = -{a,b}\n", 0, IDS_ERR_DOMAIN, 1, 11, "the signs contradict each other"},
    {OP "operation {a,b,c} = -{b,c,a}\n", 0, IDS_ERR_DOMAIN, 2, 11, "operation is zero"},

    /* ---- fences ---- */
    {OP "identity (x*y\nidentity x*y\n", 0, P, 2, 10, "the fence '(' is never closed"},
    {OP "identity ((x*y) = 0\n", 0, P, 2, 10, "is never closed; expected ')'"},
    {OP "identity x*y)\n", 0, P, 2, 13, "')' closes nothing"},
    {OP "identity (x*y]\n", 0, P, 2, 14, "expected ')' to close the '(' of line 2, column 10"},
    {OP "identity [x,y]\n", 0, P, 2, 10, "unknown operation [] with 2 arguments"},
    {OP "identity <x,y,z>\n", 0, P, 2, 10, "unknown operation <> with 3 arguments"},
    {OP "identity [x]*y\n", 0, P, 2, 10, "expected ( ) for grouping"},
    {OP "identity ()*x\n", 0, P, 2, 11, "missing operand"},
    {"operation [a,b]\nidentity [x,y,z]\n", 0, P, 2, 10, "wrong number of arguments: the"},
    {"operation [a,b]\nidentity [x,]\n", 0, P, 2, 13, "missing operand"},
    {"operation [a,b]\nidentity [x=y]\n", 0, P, 2, 12, "expected an operation, ','"},

    /* ---- names ---- */
    {OP "identity t(x,y)\n", 0, P, 2, 10, "unknown operation 't'"},
    {"operation t(a,b,c)\nidentity t(x,y)\n", 0, P, 2, 10, "'t' takes 3, found 2"},
    {"operation t(a,b)\nidentity t (x,y)\n", 0, P, 2, 10, "takes 2 arguments in ( ) directly"},
    {"operation a o b\nidentity o o x\n", 0, P, 2, 10, "'o' names the operation of line 1"},
    {OP "identity none*x\n", 0, P, 2, 10, "'none' is a word of the notation"},
    {OP "identity x.y\n", 0, P, 2, 11, "unknown operation '.'"},
    {OP "identity x*y + y\xE2\x88\x98x\n", 0, P, 2, 17, "unknown operation"},
    {OP "identity x*y\noperation a.b\nidentity x.y\nidentity x;y\n", 0, P, 5, 11, "';'"},
    {OP "identity x.y\noperation a.b\n", 0, P, 2, 11, "'.' is declared only in line 3"},
    {OP "identity [x,y]\noperation [a,b]\n", 0, P, 2, 10, "is declared only in line 3"},
    {OP "identity t*x\noperation t(a,b)\n", 0, P, 2, 10, "'t' names the operation of line 3"},
    {OP "identity a*b*c*d*e*f*g*h*i*j*k*l*m*n*p*q*r = 0\n", 0, P, 2, 13, "write (a*b)*c or"},

    /* ---- products ---- */
    {TWO "identity x*(y*z).x\n", 0, P, 3, 17, "write (x*(y*z)).x or x*((y*z).x)"},
    {TWO "identity 2*x * y . z\n", 0, P, 3, 18, "write (x * y) . z or x * (y . z)"},
    {OP "identity (a+b+c+d)*(a+b+c+d)*(a+b+c+d)\n", 0, P, 2, 29, "write ((a+b+c+d)*(a+b+c+d))*"},
    {OP "identity x*y*\n", 0, P, 2, 13, "write (a*b)*c or a*(b*c)"},
    {OP "identity x y\n", 0, P, 2, 12, "missing operation"},
    {OP "identity x(y)\n", 0, P, 2, 10, "unknown operation 'x'"},
    {OP "identity (x)(y)\n", 0, P, 2, 13, "missing operation"},
    {OP "identity x*\n", 0, P, 2, 12, "missing operand"},
    {OP "identity x* = y\n", 0, P, 2, 13, "missing operand"},
    {OP "identity x*-y\n", 0, P, 2, 12, "a factor with a sign needs parentheses"},
    {OP "identity x + - y\n", 0, P, 2, 14, "missing operand"},
    {OP "identity *x\n", 0, P, 2, 10, "missing operand"},
    {OP "identity\n", 0, P, 2, 9, "missing operand"},
    {OP "identity x*y = \n\n# end\n", 0, P, 2, 16, "missing operand"},

    /* ---- coefficients ---- */
    {OP "identity 1/0*x\n", 0, P, 2, 12, "denominator 0"},
    {OP "identity 1/x\n", 0, P, 2, 12, "expected a number after '/'"},
    {OP "identity 3\n", 0, P, 2, 10, "a number alone"},
    {OP "identity x*y + 1/2\n", 0, P, 2, 16, "a number alone"},
    {OP "identity x*2\n", 0, P, 2, 12, "a number alone"},
    {OP "identity 2 3*x\n", 0, P, 2, 12, "two numbers side by side"},
    {OP "identity 2*\n", 0, P, 2, 12, "missing operand"},
    {OP "identity 1.5*x\n", 0, P, 2, 11, "expected a fraction such as 3/2"},
    {TWO "identity 2.x\n", 0, P, 3, 11, "'2' is a coefficient, not an operand"},
    {"operation a o b\nidentity 2 o x\n", 0, P, 2, 12, "'2' is a coefficient, not an operand"},

    /* ---- identities ---- */
    {OP "identity x*y = y*x = 0\n", 0, P, 2, 20, "a second '='"},
    {OP "identity 0\n", 0, P, 2, 10, "no monomial in this identity"},
    {OP "identity 0 = 0\n", 0, P, 2, 10, "no monomial in this identity"},
    {OP "identity x*y = x\n", 0, P, 2, 10, "not homogeneous: 'y' stands 1 time in x*y but 0 times"},
    {OP "identity n: x*x = y*y\n", 0, P, 2, 13, "'x' stands 2 times in x*x but 0 times in y*y"},
    {OP "identity n: x*y\nidentity n: y*x\n", 0, P, 3, 10, "the name 'n' is in use, in line 2"},
    {OP "identity n: x*y\ncandidate n: y*x\n", 0, P, 3, 11, "the name 'n' is in use"},
    {OP "identity n : m : x\n", 0, P, 2, 16, "expected an operation, '=' or the end"},
    {OP "identity x*y, y*x\n", 0, P, 2, 13, "expected an operation, '=' or the end"},
    {OP "identity \"x\"\n", 0, P, 2, 10, "missing operand"},

    /* ---- definitions ---- */
    {OP "define f\n", 0, P, 2, 9, "expected '(' directly after the name"},
    {OP "define f (x) = x\n", 0, P, 2, 10, "expected '(' directly after the name"},
    {OP "define (x) = x\n", 0, P, 2, 8, "expected the name that is defined"},
    {OP "define f() = 0\n", 0, P, 2, 10, "expected the name of an argument"},
    {OP "define f(x,x) = x*x\n", 0, P, 2, 12, "the name stands twice"},
    {OP "define f(f) = f*f\n", 0, P, 2, 10, "the name stands twice"},
    {OP "define f(x y) = x*y\n", 0, P, 2, 12, "expected ',' or ')'"},
    {OP "define f(x) x*x\n", 0, P, 2, 13, "expected '=' and the polynomial"},
    {OP "define f(x) = x*y\n", 0, P, 2, 17, "'y' is not an argument of the definition 'f'"},
    {OP "define f(x) = x*x = x\n", 0, P, 2, 19, "expected an operation or the end of the def"},
    {OP "define f(x) = f(x)*x\n", 0, P, 2, 15, "the definition of 'f' uses itself"},
    {OP "define f(x) = g(x)\ndefine g(x) = x*x\n", 0, P, 2, 15, "'g' is defined only in line 3"},
    {OP "define f(x) = x*x\ndefine f(x) = x\n", 0, P, 3, 8, "'f' is defined already, in line 2"},
    {"operation t(a,b)\ndefine t(x) = x\n", 0, P, 2, 8, "'t' names the operation of line 1"},
    {"operation a o b\ndefine o(x) = x\n", 0, P, 2, 8, "'o' names the operation of line 1"},
    {OP "define f(x) = x*x\noperation f(a,b)\n", 0, P, 2, 8, "'f' names the operation of line 3"},
    {OP "define identity(x) = x\n", 0, P, 2, 8, "'identity' is a word of the notation"},
    {OP "define f(x) = x*x\nidentity f(x,y)\n", 0, P, 3, 10, "'f' takes 1, found 2"},
    {OP "define f(x) = x*x\nidentity f*x\n", 0, P, 3, 10, "'f' is defined in line 2 and takes 1"},
    {OP "define f(x,y) = x*y\nidentity f(x,\n", 0, P, 3, 11, "is never closed"},

    /* ---- limits ---- */
    {OP "define f(x) = (x*x)*(x*x)\ndefine g(x) = f(f(x))\nidentity g(x)*x\n", 0, IDS_ERR_LIMIT, 4,
     14, "a monomial of degree over 16"},
    {OP "define f(x) = (x*x)*(x*x)\nidentity f(f(f(x)))\n", 0, IDS_ERR_LIMIT, 3, 10,
     "a monomial of degree over 16"},
    {OP "identity a+b+c+d+e+f+g+h+i+j+k+l+m+n+o+p+q\n", 0, IDS_ERR_LIMIT, 2, 42,
     "more than 16 different variables"},
    {OP "define f(a,b,c,d,e,f1,g,h,i,j,k,l,m,n,o,p,q) = a\n", 0, IDS_ERR_LIMIT, 2, 43,
     "more than 16 arguments"},
};

const size_t broken_count = sizeof broken_table / sizeof broken_table[0];
