#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# The task count, in each format. Numbers from outside:
#   types, commutative binary and ternary      1,1,2,4,9,23,58   OEIS A268172
#   monomials, commutative binary and ternary  1,1,4,25,220,2485 OEIS A268163
#   monomials, commutative ternary             1,0,1,0,10        OEIS A025035
# and, for the split of degree 4, the list of 25 monomials in OEIS A268163: the types [[ab]c]d and
# [ab][cd] with 12 + 3 monomials, [[ab]cd] and [abc]d with 6 + 4.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

printf 'operation a*b commutative\noperation (a,b,c) commutative\n' >both.pres

run 0 count both.pres --degrees 1..6 --format csv
is_empty err
is out 'degree,types,monomials
1,1,1
2,1,1
3,2,4
4,4,25
5,9,220
6,23,2485'
run 0 count both.pres --degree 5
has out 'Degree 5: 9 association types, 220 multilinear monomials.'
run 0 count both.pres --degrees 1..2
has out 'Degrees 1 to 2: 2 association types, 2 multilinear monomials.'
run 0 count ternary.pres --degrees 1..5 --format csv
is out 'degree,types,monomials
1,1,1
2,0,0
3,1,1
4,0,0
5,1,10'

# --split: a column for each operation, as it is written.
run 0 count both.pres --degree 4 --split --format csv
is out 'degree,a*b,"(a,b,c)",types,monomials
4,1,1,2,10
4,3,0,2,15'
run 0 count both.pres --degree 4 --split --format json
has out '{"degree": 4, "a*b": 1, "(a,b,c)": 1, "types": 2, "monomials": 10}'
run 0 count ternary.pres --degrees 4..5 --split --format csv
is out 'degree,"(a,b,c)",types,monomials
5,2,1,10'
printf 'operation {a,b,c} = {c,b,a}\noperation [a,b] alternating\noperation t(a,b)\n' >mixed.pres
run 0 count mixed.pres --degree 2 --split --format csv
has out 'degree,"{a,b,c}","[a,b]","t(a,b)",types,monomials'
run 0 count mixed.pres --degrees 1..4 --split --format latex
has out '\begin{tabular}'

# Degrees beyond those that can be listed.
run 0 count both.pres --degree 1000 --format csv
tail -n 1 out | grep -qE '^1000,[0-9]{500,},[0-9]{2900,}$' || complain "$last: $(head -c 300 out)"
run 0 count both.pres --degrees 999..1000
has out '(a number of '
run 2 count both.pres --degree 1000001
has err '--degree wants a whole number from 1 to 1000000, not "1000001"'
run 2 count both.pres --degrees 1..1000001
has err 'degrees go from 1 to 1000000'
run 3 count both.pres --degree 1000 --memory 1M
has err 'raise it with --memory'
is_empty out
run 3 count both.pres --degree 1000000 --split
is_empty out

finish
