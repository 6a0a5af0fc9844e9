#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# rank --by partition. Numbers from outside:
#   dimensions of the modules           hook lengths, by hand
#   free commutative, multiplicities    recomputed once, total 105 = 7!! (OEIS A001147)
#   Jordan, multiplicities of degree 5  recomputed once, total 55 (Glennie 1970, OEIS A001776)
#   Jordan, 3+3+2 of degree 8: 19       recomputed once, total 19089 (V. Dotsenko, OEIS A001776)
#   Filippov, degree 5: 2+2+1           Friedmann, Hanlon, Stanley, Wachs, arXiv 1710.00376
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

python=$(command -v python3 || true)
varieties=$source_dir/data/varieties

is_json() {
    [ -z "$python" ] || "$python" -m json.tool <out >json || complain "$last: not JSON"
}

column() { # NUMBER: the cells of a column of ./out without its heading, in a line
    tail -n +2 out | cut -d , -f "$1" | paste -s -d ' '
}

expect() { # WHAT GOT EXPECTED
    [ "$2" = "$3" ] || complain "$last: $1 is \"$2\", not \"$3\""
}

# ---- numbers ---------------------------------------------------------------------------

run 0 rank jordan.pres --degree 5 --by partition --format csv
is_empty err
expect heading "$(head -n 1 out)" \
    "degree,partition,dimension,free,consequences,quotient,certainty"
expect degrees "$(column 1)" "5 5 5 5 5 5 5 5"
expect partitions "$(column 2)" "5 4+1 3+2 3+1+1 2+2+1 2+1+1+1 1+1+1+1+1 total"
expect dimensions "$(column 3)" "1 4 5 6 5 4 1 "
expect free "$(column 4)" "3 6 6 4 4 1 0 105"
expect consequences "$(column 5)" "2 4 3 2 1 0 0 50"
expect quotient "$(column 6)" "1 2 3 2 3 1 0 55"
grep -q '^5,1+1+1+1+1,1,0,0,0,exact$' out || complain "$last: $(tail -n 2 out)"
grep -qE '^5,total,,105,50,55,2\^-[0-9]+$' out || complain "$last: $(tail -n 1 out)"

run 0 rank jordan.pres --degrees 1..8 --by partition --format csv --seed 3 --threads 1
cp out expected
expect totals "$(grep ,total, out | cut -d , -f 6 | paste -s -d ' ')" "1 1 3 11 55 330 2345 19089"
grep '^8,3+3+2,' out >row
run 0 rank jordan.pres --degrees 1..8 --by partition --format csv --seed 3 --threads 4
cmp -s out expected || complain "rank --by partition: the output depends on the threads"

run 0 rank jordan.pres --partition 3+3+2 --format csv --seed 3
expect row "$(cut -d , -f 1-6 <out | tail -n +2)" "$(cut -d , -f 1-6 <row)"
grep -qE '^8,3\+3\+2,42,147,128,19,' out || complain "$last: $(tail -n 1 out)"
run 0 rank jordan.pres --partition 3+3+2 --degree 8
has out 'Partition 3+3+2 of degree 8: multiplicity 19 in the quotient, 147 in the free algebra (too'

run 0 rank "$varieties/filippov-3.pres" --degrees 4..5 --by partition --format csv
expect degree-4 "$(grep '^4,' out | cut -d , -f 4-7 | sort -u)" "0,0,0,exact"
expect degree-5 "$(grep '^5,' out | grep -v ',0,[^,]*$' | cut -d , -f 2,6)" "2+2+1,1
total,5"

# ---- words -----------------------------------------------------------------------------

run 0 rank jordan.pres --degrees 3..5 --by partition
has out 'Degrees 3 to 5: quotients of dimension 3, 11, 55 (each too large with probability at'
run 0 rank jordan.pres --degree 3 --by partition
has out 'Degree 3: a quotient of dimension 3 (proved).'
run 0 rank jordan.pres --degrees 3..5 --by=partition --cross-check --primes 2 --seed 9
has out 'cross-check: the monomial engine gives the same totals'
has out 'seed:        9'
run 0 rank jordan.pres --degree 4 --by partition --cross-check --format json
is_json
has out '"degree": 4, "partition": "2+1+1", "dimension": 3, "free": 1, "consequences": 0, '
has out '"partition": "total", "dimension": null, "free": 15, "consequences": 4, "quotient": 11, '
has out '"cross-check": "'
run 0 rank jordan.pres --degree 4 --by partition --format latex
has out 'degree & partition & dimension & free & consequences & quotient & certainty'
has out '4 & total &  & 15 & 4 & 11 & '

# ---- ends early ------------------------------------------------------------------------

run 3 rank jordan.pres --degrees 1..12 --by partition --memory 40M --format json
is_json
has out '"partition": "4", "dimension": 1, '
has out '"stopped": "degree '
has err 'raise it with --memory'

set -m
got=0
last="idspan rank --by partition (INT)"
timeout 60 "$tool" rank jordan.pres --degrees 1..12 --by partition --memory none >out 2>err &
job=$!
sleep 8
kill -INT "$job" 2>/dev/null
wait "$job" || got=$?
expect "exit status" "$got" 4
has out '5  total '
has out 'stopped: interrupted before degree '
is err "idspan: $(sed -n 's/^stopped: //p' out)"

finish
