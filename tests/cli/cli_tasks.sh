#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# What the tasks answer, in each format. Numbers from outside:
#   association types, commutative binary  1,1,1,2,3,6,11      OEIS A001190 (Wedderburn-Etherington)
#   monomials, commutative binary          1,1,3,15,105,945    OEIS A001147 (double factorials)
#   Jordan algebras                        1,1,3,11,55,330     OEIS A001776
#   monomials, commutative ternary         1,0,1,0,10,0,280    OEIS A025035
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

python=$(command -v python3 || true)

is_json() {
    [ -z "$python" ] || "$python" -m json.tool <out >json || complain "$last: not JSON"
}

column() { # NUMBER: the cells of a column of ./out without its heading, in a line
    tail -n +2 out | cut -d , -f "$1" | paste -s -d ' '
}

expect() { # WHAT GOT EXPECTED
    [ "$2" = "$3" ] || complain "$last: $1 is \"$2\", not \"$3\""
}

# ---- rank ------------------------------------------------------------------------------

for way in "" --exact "--primes 3 --seed 5"; do
    # shellcheck disable=SC2086 # words on purpose
    run 0 rank jordan.pres --degrees 1..6 $way --format csv
    is_empty err
    expect heading "$(head -n 1 out)" "degree,free,consequences,quotient,certainty"
    expect degrees "$(column 1)" "1 2 3 4 5 6"
    expect free "$(column 2)" "1 1 3 15 105 945"
    expect quotient "$(column 4)" "1 1 3 11 55 330"
    [ "$way" = --exact ] && expect certainty "$(column 5)" "exact exact exact exact exact exact"
done
grep -qE '^6,945,615,330,2\^-[0-9]+$' out || complain "$last: no bound in $(tail -n 1 out)"

run 0 rank ternary.pres --degrees 1..6 --format csv
expect free "$(column 2)" "1 0 1 0 10 0"
expect consequences "$(column 3)" "0 0 0 0 0 0"
expect quotient "$(column 4)" "1 0 1 0 10 0"
expect certainty "$(column 5)" "exact exact exact exact exact exact"

run 0 rank jordan.pres --degree 4 --format json --seed 9
is_json
has out '"degree": 4, "free": 15, "consequences": 4, "quotient": 11, "certainty": "2^-'
has out '"seed": "9"'
has out '"primes": "'
run 0 rank jordan.pres --degrees 4..5 --exact
has out 'Degrees 4 to 5: quotients of dimension 11, 55 (proved).'
run 0 rank jordan.pres --degree 4
has out 'Degree 4: a quotient of dimension 11 (too large with probability at most 2^-'

# The same seed, the same output, whatever the number of threads.
run 0 rank jordan.pres --degrees 1..6 --seed 3 --threads 1
cp out expected
run 0 rank jordan.pres --degrees 1..6 --seed 3 --threads 4
cmp -s out expected || complain "rank: the output depends on the threads"

# A limit: the degrees that were finished are there, and the exit status tells.
run 3 rank jordan.pres --degrees 1..12 --memory 3M --format json
is_json
has out '{"degree": 4, "free": 15, '
has out '"stopped": "degree '
has err 'raise it with --memory'
run 3 rank jordan.pres --degrees 1..12 --memory 3M
has out 'Degrees 1 to '
has out 'stopped: degree '
has err ' monomials, '
has err ' columns in the quotient '
has err 'the budget is 3145728'

# A list that is too long is refused before it is begun. (Catalan number of 39, OEIS A000108.)
printf 'operation a*b\n' >plain.pres
for task in types basis draw; do
    run 3 "$task" plain.pres --degree 40
    is_empty out
    has err 'degree 40 has 680425371729975800390 association types'
    has err 'raise it with --memory'
done

# ---- types -----------------------------------------------------------------------------

run 0 types commutative.pres --degrees 1..7 --format csv
expect heading "$(head -n 1 out)" "degree,index,type,automorphisms,monomials"
counts=$(tail -n +2 out | awk -F, '{ n[$1]++ } END { for (d = 1; d <= 7; d++) print n[d] }')
expect "types a degree" "$(paste -s -d ' ' <<<"$counts")" "1 1 1 2 3 6 11"
expect indices "$(column 2 | cut -d ' ' -f 1-8)" "0 0 0 0 1 0 1 2"
sums=$(tail -n +2 out | awk -F, '{ n[$1] += $5 } END { for (d = 1; d <= 7; d++) print n[d] }')
expect "sums of monomials" "$(paste -s -d ' ' <<<"$sums")" "1 1 3 15 105 945 10395"
run 0 types commutative.pres --degree 4
has out 'Degree 4: 2 association types, 15 multilinear monomials.'
run 0 types ternary.pres --degree 4
is out 'Degree 4: no product of these operations has that many arguments.'
run 0 types ternary.pres --degree 4 --format csv
is out 'degree,index,type,automorphisms,monomials'
# 22! = 1124000727777607680000, beyond 64 bits: a tree without symmetry has every labelling. The
# number of types is that of trees with three nodes of eight branches, binomial(24,3)/22 = 92
# (Fuss-Catalan); 92 * 22! by hand.
printf 'operation t(a,b,c,d,e,f,g,h)\n' >eight.pres
run 0 types eight.pres --degree 22 --format csv
expect rows "$(grep -c ',1,1124000727777607680000$' out)" 92
run 0 types eight.pres --degree 22
has out 'Degree 22: 92 association types, 103408066955539906560000 multilinear monomials.'
# Nine nodes with eight commuting arguments: 8!^8 passes 2^64, so an order does not fit.
printf 'operation t(a,b,c,d,e,f,g,h) commutative\n' >eight.pres
run 0 types eight.pres --degree 64 --format csv
grep -qE ',,$' out || complain "$last: no empty cells"
run 0 types eight.pres --degree 64 --format json
is_json
has out '"automorphisms": null, "monomials": null}'

# ---- basis -----------------------------------------------------------------------------

run 0 basis commutative.pres --degree 4 --format csv
expect heading "$(head -n 1 out)" "degree,index,monomial"
expect indices "$(column 2)" "0 1 2 3 4 5 6 7 8 9 10 11 12 13 14"
expect "different monomials" "$(column 3 | tr ' ' '\n' | sort -u | wc -l)" 15
cp out whole
run 0 basis commutative.pres --degree 4 --format csv --from 12 --count 2
expect rows "$(tail -n +2 out)" "$(sed -n 14,15p whole)"
run 0 basis commutative.pres --degree 4 --from 12
has out '3 of the 15 multilinear monomials of degree 4.'
run 0 basis commutative.pres --degree 4 --count 0 --format csv
is out 'degree,index,monomial'
run 0 basis ternary.pres --degree 7 --format csv
expect monomials "$(tail -n +2 out | wc -l)" 280
has out ',"(('
run 0 basis ternary.pres --degree 6
has out 'Degree 6 has no monomials'
# (2*12-3)!! = 13749310575
run 0 basis commutative.pres --degree 12 --from 13749310574 --format json
is_json
has out '"index": 13749310574, '
expect rows "$(grep -c '"degree": 12' out)" 1

# ---- show ------------------------------------------------------------------------------

run 0 show "$source_dir/data/crosses/programme.pres"
has out 'a*b commutative'
has out 'symmetry group of order 6'
has out 'backcross (degree 4, line '
has out '2 operations, 2 identities, '
run 0 show jordan.pres --format csv
expect heading "$(head -n 1 out)" \
    "kind,index,name,line,degree,order,terms,written,linear_terms,linear"
has out 'operation,0,,,2,2,,a*b commutative,,'
has out 'identity,0,jordan,2,4,,2,'
run 0 show ternary.pres --format csv
has out 'operation,0,,,3,6,,"(a,b,c) commutative",,'

# ---- every format reads back --------------------------------------------------------------

for arguments in "show" "types --degrees 1..5" "basis --degree 5" "rank --degrees 1..4"; do
    for file in "$source_dir"/data/crosses/programme.pres ternary.pres; do
        # shellcheck disable=SC2086 # words on purpose
        run 0 $arguments "$file" --format json
        is_json
        # shellcheck disable=SC2086
        run 0 $arguments "$file" --format latex
        ends=$(grep -c '^\\end{tabular}' out)
        expect "begin and end" "$(grep -c '^\\begin{tabular}' out)" "$ends"
        lacks out '\\textbackslash'
        # shellcheck disable=SC2086
        run 0 $arguments "$file" --format csv
        if [ -n "$python" ]; then
            "$python" -c '
import csv, sys
rows = list(csv.reader(sys.stdin, strict=True))
sys.exit(0 if all(len(row) == len(rows[0]) for row in rows) else 1)' <out ||
                complain "$last: not CSV"
        fi
        # shellcheck disable=SC2086
        run 0 $arguments "$file"
        ! grep -q ' $' out || complain "$last: blanks at the end of a line"
    done
done

finish
