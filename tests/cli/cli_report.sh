#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# Rank tables as pictures and pages: that they are there, well-formed, and say what the CSV says.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

well_formed() {
    ! command -v xmllint >/dev/null || xmllint --noout "$1" || complain "$last: not well-formed"
}

# Rows of the tables of a page, as CSV without the column of certainty: markup away, cells split.
rows_of_page() {
    sed -n '/id="modules"/,/id="certainty"/p' "$1" | grep -E '<tr><th scope="row">|<tfoot>' |
        sed -E 's,<(/?)(span|sup|tfoot|tr)>,,g; s,</t[hd]><t[hd][^>]*>,\,,g; s,<[^>]*>,,g' |
        cut -d, -f1-5
}

# ---- by partition ------------------------------------------------------------------------------

run 0 rank jordan.pres --degrees 2..6 --by partition --format csv --output table.csv
run 0 rank jordan.pres --degrees 2..6 --by partition --format html --output page.html
is_empty out
well_formed page.html
rows_of_page page.html >rows
tail -n +2 table.csv | cut -d, -f2-6 | diff - rows >/dev/null ||
    complain "$last: the page has other rows than the CSV: $(head -c 300 rows)"
run 0 rank jordan.pres --degrees 2..6 --by partition --format html --threads 1
cmp -s out page.html || complain "$last: two pages of one table differ"
has out "identity jordan: ((x*x)*y)*x = (x*x)*(y*x)"
has out "<h1>jordan.pres</h1>"
has out "quotients of dimension 1, 3, 11, 55, 330."
has out "<dt>primes</dt><dd>733541183</dd>"
has out "<dt>seed</dt><dd>0</dd>"

run 0 rank jordan.pres --degrees 2..6 --by partition --format svg --output table.svg
well_formed table.svg
[ "$(grep -c '<g class="module">' table.svg)" -eq 28 ] || complain "$last: not 28 partitions"
[ "$(grep -c '<g class="point">' table.svg)" -eq 15 ] || complain "$last: not 15 points"
run 0 rank jordan.pres --partition 3+1 --format svg
well_formed out
[ "$(grep -c '<g class="module">' out)" -eq 1 ] || complain "$last: not one partition"

# The picture in README.md is what the tool writes today.
programme=$source_dir/data/crosses/programme
run 0 rank "$programme.pres" --degrees 1..8 --by partition --format svg
cmp -s out "$programme.svg" || complain "programme.svg is out of date"
run 0 rank "$programme.pres" --degrees 1..8 --by partition --run night --format svg
cmp -s out "$programme.svg" || complain "$last: the picture of the run is another one"

# ---- by degree -----------------------------------------------------------------------------------

run 0 rank jordan.pres --degrees 1..5 --exact --format html
well_formed out
has out "All numbers are <em>exact</em>"
lacks out 'id="modules"'
run 0 rank jordan.pres --degrees 3..5 --field 2 --format html
has out "<dt>field</dt><dd>2</dd>"
has out "<dt>warning</dt>"

# A table that ends early is a page all the same, and says what is missing.
run 3 rank jordan.pres --degrees 2..9 --memory 1M --format html
well_formed out
has out "Not finished:"
has out "not yet computed"
has out "budget"

# ---- runs ------------------------------------------------------------------------------------

run 0 rank jordan.pres --degrees 2..6 --by partition --run folder --jobs 2 --format html \
    --output run.html
well_formed run.html
rows_of_page run.html >rows
tail -n +2 table.csv | cut -d, -f2-6 | diff - rows >/dev/null ||
    complain "$last: the page of the run has other rows than the CSV: $(head -c 300 rows)"
run 0 rank --run folder --format html
for text in ">Complete.<" "<dd>28 of 28 finished, 0 failed, 0 damaged</dd>" "<dt>libraries</dt>" \
    "identity jordan:" "<dt>seed</dt><dd>0</dd>" "<dt>most memory of a process</dt>" \
    ">memory</th>"; do
    has out "$text"
done

# One cell lost, one damaged: the page says which, and all other numbers are there.
rm folder/cell-6.4+2.txt
truncate -s -1 folder/cell-5.3+2.txt
run 0 rank --run folder --format html --output run.html
well_formed run.html
grep -q "26 of 28 cells are computed" run.html || complain "$last: not 26 cells"
grep -qE '<td>5</td>|>5</td><td>3\+2</td><td>not yet computed</td><td class="w">.' run.html ||
    complain "$last: damage without a reason"
[ "$(rows_of_page run.html | wc -l)" -eq 31 ] || complain "$last: not all rows but two totals"
run 0 rank --run folder --format svg
well_formed out
[ "$(grep -c '>not yet computed</text>' out)" -eq 2 ] || complain "$last: not two gaps"
run 2 rank --run folder --plan --format html
has err "a plan is a table"

# ---- refusals ------------------------------------------------------------------------------

run 2 rank jordan.pres --degree 4 --format hmtl
has err "did you mean html"
run 2 types jordan.pres --degree 4 --format html
has err "text, csv, json or latex"
finish
