#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# idspan matrix and idspan rank --field. Numbers from outside:
#   Lie algebras, degree 4       (5!! =) 15 monomials, quotient 3! = 6 (Witt)
#   dual alternative, 3 elements 2^n - n: 1, 2, 5, 12, 27, 58 (Dotsenko, arXiv 1111.2289)
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

varieties=$source_dir/data/varieties

# ---- files -------------------------------------------------------------------------------

run 0 matrix "$varieties/lie.pres" --degree 4 --plain --output all.mtx
is_empty err
has out 'Degree 4: 10 rows, 15 columns, 30 entries.'
has out 'all.mtx'
has out 'all.cols'
has all.mtx '%%MatrixMarket matrix coordinate integer general'
has all.mtx '10 15 30'
[ "$(grep -c '' all.cols)" = 15 ] || complain "$last: $(grep -c '' all.cols) names of columns"
[ "$(grep -vc '^%' all.mtx)" = 31 ] || complain "$last: $(grep -vc '^%' all.mtx) lines"
run 0 basis "$varieties/lie.pres" --degree 4 --format csv
tail -n +2 out | cut -d , -f 3- | tr -d '"' | cmp -s - all.cols ||
    complain "the columns are not the basis"

run 0 matrix jordan.pres --degree 5 --output step --seed 3
has out ' modulo '
has step 'modulo the prime '
[ -s step.cols ] || complain "$last: no step.cols"
cp step first
run 0 matrix jordan.pres --degree 5 --output step --seed 3
cmp -s step first || complain "$last: the same seed gave another file"
run 0 matrix jordan.pres --degree 5 --output three.mtx --field 3
has three.mtx 'modulo the prime 3'
! grep -v '^%' three.mtx | tail -n +2 | grep -qvE ' -?1$' || complain "$last: entries beyond 1"

# ---- refusals ----------------------------------------------------------------------------

run 2 matrix jordan.pres --degree 4
has err '--output M.mtx'
run 2 matrix jordan.pres --degree 4 --output -
has err '--output M.mtx'
run 2 matrix jordan.pres --output m.mtx
has err 'wants a degree'
run 2 matrix jordan.pres --degree 4 --output m.mtx --plain --field 3
has err '--plain and --field exclude each other'
run 2 matrix jordan.pres --degree 4 --output m.mtx --field 6
has err 'prime number of elements'
run 2 matrix jordan.pres --degree 4 --output no/such/folder/m.mtx
has err 'cannot write "no/such/folder/m.mtx"'
mkdir m.cols
run 2 matrix jordan.pres --degree 4 --output m.mtx
has err 'cannot write "m.cols"'
cp jordan.pres names.cols
run 2 matrix names.cols --degree 4 --output names.mtx
has err 'would overwrite'
run 3 matrix jordan.pres --degree 9 --output m.mtx --memory 1M
has err 'raise it with --memory'

# ---- fields ------------------------------------------------------------------------------

run 0 rank "$varieties/dual-alternative.pres" --degrees 1..6 --field 3 --format csv
expected="1 2 5 12 27 58"
got=$(tail -n +2 out | cut -d , -f 4 | paste -s -d ' ')
[ "$got" = "$expected" ] || complain "$last: $got, not $expected"
[ "$(grep -c ',exact$' out)" = 6 ] || complain "$last: not all exact"
run 0 rank "$varieties/dual-alternative.pres" --degrees 1..6 --field 3
has out 'over GF(3)'
has out 'field: '
lacks out 'warning'
run 0 rank jordan.pres --degrees 1..4 --field 3
has out 'warning: '
run 0 rank jordan.pres --degrees 1..4 --field 5
lacks out 'warning'
run 2 rank jordan.pres --degree 4 --field 9
has err 'prime number of elements'
run 2 rank jordan.pres --degree 4 --field 1
has err '--field wants'
run 2 rank jordan.pres --degree 4 --field 7 --exact
has err '--field and --exact exclude each other'
run 2 rank jordan.pres --degree 4 --field 7 --primes 2
has err '--field and --primes exclude each other'

finish
