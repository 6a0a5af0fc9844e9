#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# rank --run: a table in a folder, its plan, its cells, its table at any time, and what is refused.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

# ---- a table, in every format, is that of rank without a folder ------------------------------

for by in "--by partition" ""; do
    rm -rf table
    # shellcheck disable=SC2086 # two words or none
    for format in text csv json latex; do
        run 0 rank jordan.pres --degrees 2..6 $by --format $format
        mv out expected
        run 0 rank jordan.pres --degrees 2..6 $by --run table --jobs 2 --format $format
        is out "$(cat expected)"
        run 0 rank --run table --format $format
        is out "$(cat expected)"
        is_empty err
    done
done
printf 'operation a*b commutative\nidentity (x*x)*x = 0\n' >nil.pres
for options in "--exact" "--field 2" "--primes 2 --seed 5"; do
    rm -rf table
    # shellcheck disable=SC2086
    run 0 rank nil.pres --degrees 1..5 $options
    mv out expected
    # shellcheck disable=SC2086
    run 0 rank nil.pres --degrees 1..5 $options --run table
    is out "$(cat expected)"
    run 0 rank --run table
    is out "$(cat expected)"
done
# A presentation from standard input, and degrees without monomials.
rm -rf table
run 0 rank ternary.pres --degrees 1..6 --by partition --format csv
mv out expected
"$tool" rank - --degrees 1..6 --by partition --run table --format csv <ternary.pres >out 2>err
is out "$(cat expected)"

# ---- plan, cells, unfinished tables ----------------------------------------------------------

rm -rf table
run 0 rank jordan.pres --degrees 3..5 --by partition --run table --plan
has out "15 of 15 cells are left"
has out "5.3+1+1"
is_empty err
run 0 rank --run table --list-cells
[ "$(wc -l <out)" -eq 15 ] || complain "$last: $(cat out)"
run 0 rank --run table --cell 4.3+1,5.2+2+1
is_empty out
run 0 rank --run table --list-cells
[ "$(wc -l <out)" -eq 13 ] || complain "$last: $(cat out)"
lacks out "4.3+1"
# As published for the Jordan identity: 1 + 1 + 0 + 1 + 1 of the module 3+1 (data/reference).
run 0 rank --run table --format csv
has out "4,3+1,3,2,1,1,2^-"
has out "4,4,1,,,,missing"
has out "4,total,,,,,missing"
run 0 rank --run table --format json
has out '"free": null'
has out '"stopped": "13 of 15 cells are not there"'
run 0 rank --run table --format latex
has out '\toprule'
run 0 rank --run table --plan --format csv
has out "cell,state,milliseconds,kilobytes"
has out "4.3+1,done,"
run 0 rank jordan.pres --degrees 3..5 --by partition --run table --cell 3.3
run 0 rank jordan.pres --degrees 2..6 --by partition --run table
has out "Degrees 2 to 6: quotients of dimension 1, 3, 11, 55, 330"
has err "25 of 28 cells are left"
run 0 rank jordan.pres --degrees 2..6 --by partition --run table
is_empty err
run 0 rank --run table --list-cells
is_empty out

# ---- damage ----------------------------------------------------------------------------------

mv out before
run 0 rank --run table --format csv
mv out expected
truncate -s 100 table/cell-5.3+2.txt
sed -i 's/^quotient: /quotient: 1/' table/cell-6.4+2.txt
: >table/cell-2.2.txt
run 0 rank --run table --format csv
has out "5,3+2,5,,,,damaged"
run 0 rank --run table --list-cells
is out "2.2
5.3+2
6.4+2"
run 0 rank jordan.pres --degrees 2..6 --by partition --run table --format csv
has err "cell 6.4+2 is computed again: the checksum does not fit the contents"
has err "cell 5.3+2 is computed again: the file is cut short"
is out "$(cat expected)"
printf 'x' >>table/presentation.pres
run 2 rank --run table
has err "run.txt\" is damaged: its presentation is not the one in the folder"
run 0 rank jordan.pres --degrees 2..6 --by partition --run table --format csv
is_empty err
is out "$(cat expected)"

# ---- what is refused -------------------------------------------------------------------------

run 2 rank nil.pres --degrees 2..6 --by partition --run table
has err "holds another run, of \"jordan.pres\""
has err "identities are others"
run 2 rank jordan.pres --degrees 2..6 --by partition --run table --seed 1
has err "from the seed 0"
run 2 rank jordan.pres --degrees 2..5 --by partition --run table
has err "degrees 2..6"
run 2 rank jordan.pres --degrees 2..6 --run table
has err "it is by partition"
# forge FILE KEY VALUE: gives the file another value, and the checksum of that.
forge() {
    sed -e "s/^$2: .*/$2: $3/" -e '/^sha256/d' "$1" >other
    echo "sha256: $(sha256sum <other | cut -d' ' -f1)" >>other
    cp other "$1"
}
cp table/run.txt kept
forge table/run.txt version 0.0.9
run 2 rank jordan.pres --degrees 2..6 --by partition --run table
has err "is one of idspan 0.0.9, this is"
run 0 rank --run table # it can be read
# 1000000005 is divisible by 3.
cp -r table composite
cp kept composite/run.txt
rm composite/cell-6.6.txt
for file in composite/run.txt composite/cell-*; do
    forge "$file" primes 1000000005
done
run 2 rank --run composite --cell 6.6
has err "is damaged: its primes are not those that its seed gives"
run 2 rank jordan.pres --degrees 2..6 --by partition --run composite
has err "none of the cells in the folder is one of the run that is asked for"
truncate -s 50 table/run.txt
run 2 rank nil.pres --degrees 2..6 --by partition --run table
has err "none of the cells in the folder is one of the run that is asked for"
run 0 rank jordan.pres --degrees 2..6 --by partition --run table --format csv
is_empty err
is out "$(cat expected)"
run 2 rank --run nowhere
has err 'cannot open the folder "nowhere": No such file or directory'
mkdir empty
run 2 rank --run empty
has err 'there is no run in the folder "empty"'
run 2 rank --run table --cell 9.9
has err 'no cell "9.9"'
run 2 rank --run table --degrees 1..3
has err "--degrees goes with a presentation file"
run 2 rank --run table --jobs 2
has err "--jobs is for computing"
run 2 rank jordan.pres --run table
has err "wants a degree"
run 2 rank --run ''
run 2 rank jordan.pres --partition 3+1 --run table
run 2 rank jordan.pres --degrees 1..3 --plan
has err "--plan goes with --run"
run 2 rank jordan.pres --degrees 1..3 --run a/b/c
has err 'cannot make the folder "a/b/c": No such file or directory'
run 2 rank nowhere.pres --degrees 1..3 --run table

# ---- two at a time ---------------------------------------------------------------------------

# The first one works until it is stopped: there is enough to do.
rm -rf long
"$tool" rank jordan.pres --degrees 2..12 --by partition --run long --jobs 2 >first.out 2>first.err &
first=$!
for _ in {1..100}; do
    [ -s long/run.txt ] && [ -s long/lock ] && break
    sleep 0.1
done
sleep 0.5
run 2 rank jordan.pres --degrees 2..12 --by partition --run long
has err "somebody else works in \"long\": process $first on"
run 2 rank --run long --cell 2.2
has err "somebody else works"
run 0 rank --run long
has out "missing"
kill -USR1 "$first"
sleep 0.7
grep -q 'degree .* partitions; all: ' first.err || complain "no answer to SIGUSR1: $(cat first.err)"
begun=$(date +%s%N)
kill -TERM "$first"
got=0
wait "$first" || got=$?
took=$((($(date +%s%N) - begun) / 1000000))
[ "$got" -eq 4 ] || complain "SIGTERM: exit status $got, not 4"
[ "$took" -lt 3000 ] || complain "SIGTERM: the end took $took ms"
grep -q 'interrupted; what is finished is kept in "long"' first.err ||
    complain "SIGTERM: $(cat first.err)"
# When the first process is killed the others end too, and the folder is free.
"$tool" rank jordan.pres --degrees 2..12 --by partition --run long --jobs 2 >first.out 2>first.err &
first=$!
sleep 1
kill -9 "$first"
wait "$first" 2>/dev/null
run 0 rank jordan.pres --degrees 2..12 --by partition --run long --plan
# Several at a time that do some cells each are welcome.
rm -rf table
run 0 rank jordan.pres --degrees 2..6 --by partition --run table --plan
"$tool" rank --run table --list-cells >cells
jobs=()
for k in 0 1 2; do
    "$tool" rank --run table --cell "$(awk "NR % 3 == $k" cells | paste -sd,)" 2>err.$k &
    jobs+=($!)
done
for job in "${jobs[@]}"; do
    wait "$job" || complain "a share of the cells: exit status $?: $(cat err.?)"
done
run 0 rank --run table --format csv
is out "$(cat expected)"

finish
