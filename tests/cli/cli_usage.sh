#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# The command line: help, version, what is refused and what is said about it.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

tasks="show types basis count rank follows check draw"

# ---- help and version ------------------------------------------------------------------

run 0 --version
grep -qE '^idspan [0-9]+\.[0-9]+\.[0-9]+$' out || complain "--version: $(cat out)"
is_empty err
run 2
has err "idspan TASK FILE"
is_empty out
run 0 --help
is_empty err
has out "Examples:"
for task in $tasks; do
    has out "  $task "
done
for option in degree degrees from count index monomials split by partition cross-check run \
    jobs plan list-cells cell exact primes seed field format output memory threads help version; do
    has out "--$option"
done
run 0 -h
has out "idspan TASK FILE"

common="format output memory threads help version"
# shellcheck disable=SC2034 # by indirection, below
{
    own_show=""
    own_types="degree degrees"
    own_basis="degree from count"
    own_count="degree degrees split"
    own_rank="degree degrees by partition cross-check exact primes seed field"
    own_rank+=" run jobs plan list-cells cell"
    own_follows="candidate all proof witness primes seed"
    own_check=""
    own_draw="degree monomials index from count"
}
for task in $tasks; do
    run 0 "$task" --help
    is_empty err
    own=own_$task
    for option in ${!own} $common; do
        has out "  --$option"
        grep -qF -e "--$option" "$source_dir/tools/idspan/idspan.bash" ||
            complain "the completion lacks --$option"
        grep -qE -e "\\\\-\\\\-${option//-/\\\\-}( |\$)" "$source_dir/tools/idspan/idspan.1" ||
            complain "the manual lacks --$option"
    done
    has out "  idspan $task "
    grep -q "^\.SS $task\$" "$source_dir/tools/idspan/idspan.1" || complain "the manual lacks $task"
done
run 0 types --help
has out "degree,index,type,automorphisms,monomials"
has out "count from 0"
run 0 basis --help
has out "degree,index,monomial"
has out "count from 0"
run 0 rank --help
has out "degree,free,consequences,quotient,certainty"
has out "degree,partition,dimension,free,consequences,quotient,certainty"

# What a task says of its options is about this task, and its examples work as they stand.
run 0 rank --help
has out 'from 1 to 64'
has out 'text, csv, json, latex, svg or html; the first'
lacks out 'basis elements'
run 0 fresh --help
has out 'from 1 to 16'
has out 'all tuples of basis elements'
run 0 count --help
has out 'from 1 to 1000000'
run 0 matrix --help
has out 'mtx; the first is the default'
lacks out 'latex'
cp -r "$source_dir/data/crosses" examples
for task in $tasks fresh matrix; do
    "$tool" "$task" --help | sed -n '/^Examples:/,$s/^  //p' >commands
    [ -s commands ] || complain "$task --help: no examples"
    while read -r command; do
        got=0
        (cd examples && PATH=$(dirname "$tool"):$PATH && eval "$command") \
            >out 2>err || got=$?
        [ "$got" -le 1 ] || complain "$task --help: $command: status $got: $(head -c 300 err)"
    done <commands
done

# ---- refusals -------------------------------------------------------------------------

refuse() { # MESSAGE ARGUMENT...
    local message=$1
    shift
    run 2 "$@"
    is_empty out
    has err "idspan: "
    has err "$message"
}

refuse 'no task "rnak"; did you mean "rank"?' rnak jordan.pres
refuse 'no task "xyzzy"; idspan --help' xyzzy jordan.pres
refuse 'the task comes first: idspan show jordan.pres' jordan.pres show
refuse 'say what to do' --format csv
refuse 'wants a presentation file, or -' show
refuse 'wants a degree' rank jordan.pres
refuse 'wants a degree' basis jordan.pres
refuse 'wants a degree' types jordan.pres
refuse 'one file at a time' show jordan.pres ternary.pres
refuse 'no option --degre; did you mean --degree?' rank jordan.pres --degre 3
refuse 'no option --fromat; did you mean --format?' show jordan.pres --fromat csv
refuse 'no option --xyzzy; idspan --help' show jordan.pres --xyzzy
refuse 'no option -x' show jordan.pres -x
refuse '--exact takes no value' rank jordan.pres --degree 3 --exact=yes
refuse '--degree wants a value: --degree N' rank jordan.pres --degree
refuse '--format is given twice' show jordan.pres --format csv --format csv
refuse '--exact is an option of "rank", not of "types"' types jordan.pres --degree 3 --exact
refuse '--from is an option of "basis", not of "rank"' rank jordan.pres --degree 3 --from 0
refuse 'exclude each other' rank jordan.pres --degree 3 --degrees 1..3
refuse '--degree wants a whole number from 1 to 64, not "0"' rank jordan.pres --degree 0
refuse '--degree wants a whole number from 1 to 64, not "65"' rank jordan.pres --degree 65
refuse 'not "-1"' rank jordan.pres --degree -1
refuse 'not "3x"' rank jordan.pres --degree 3x
refuse 'not ""' rank jordan.pres --degree=
refuse '--degrees wants a range such as 1..7, not "1-3"' rank jordan.pres --degrees 1-3
refuse '--degrees wants a range such as 1..7, not "1.."' rank jordan.pres --degrees 1..
refuse 'is empty; did you mean 2..5?' rank jordan.pres --degrees 5..2
refuse 'degrees go from 1 to 64' rank jordan.pres --degrees 1..65
refuse 'degrees go from 1 to 64' rank jordan.pres --degrees 0..5
refuse 'not "json5"; did you mean json?' show jordan.pres --format json5
refuse '--memory wants a size' show jordan.pres --memory 4X
refuse '--memory wants a size' show jordan.pres --memory 0
refuse '--memory wants a size' show jordan.pres --memory 99999999999G
refuse '--threads wants' show jordan.pres --threads 0
refuse '--primes wants' rank jordan.pres --degree 3 --primes 0
refuse '--by can be partition, not "degree"' rank jordan.pres --degree 3 --by degree
refuse 'wants a degree' rank jordan.pres --by partition
refuse '--cross-check is for --by partition' rank jordan.pres --degree 3 --cross-check
refuse '--partition and --cross-check exclude' rank jordan.pres --partition 2+1 --cross-check
refuse '--exact does not go with --by partition' rank jordan.pres --degree 3 --by partition --exact
refuse '--field does not go with --by partition' rank jordan.pres --partition 2+1 --field 101
refuse 'primes larger than the degree' rank jordan.pres --degree 3 --by partition --field 7
refuse 'degree 17: by partition degrees go from 1 to 16' \
    rank jordan.pres --degrees 1..17 --by partition
refuse '--partition 9+8 is one of 17; by partition degrees' rank jordan.pres --partition 9+8
refuse '--partition "3+4": ' rank jordan.pres --partition 3+4
refuse '--partition "": ' rank jordan.pres --partition=
refuse 'belongs to degree 8, which need not be given; 7 is another' \
    rank jordan.pres --partition 4+3+1 --degree 7
refuse 'belongs to degree 8' rank jordan.pres --partition 4+3+1 --degrees 7..8
refuse '--by is an option of "rank", not of "types"' types jordan.pres --degree 3 --by partition
refuse '--seed wants' rank jordan.pres --degree 3 --seed 18446744073709551616
refuse '--count wants' basis jordan.pres --degree 3 --count all
refuse '--from 3: degree 3 has 3 monomials' basis jordan.pres --degree 3 --from 3

refuse 'not "3..5"; did you mean --degrees 3..5?' rank jordan.pres --degree 3..5
refuse '--field wants a prime, not "4"' rank jordan.pres --degree 3 --field 4
refuse '--from wants a whole number from 0 to 2^64 - 1' \
    basis jordan.pres --degree 3 --from 18446744073709551616
# Words that are not near are not suggested.
refuse 'no task "ranks"; did you mean "rank"?' ranks jordan.pres
refuse 'no task "tip"; idspan --help' tip jordan.pres
run 2 show - <<<$'operatoin a*b'
has err "did you mean 'operation'"
run 2 show - <<<$'odd a*b'
lacks err 'did you mean'

# No line of the usage is wider than a terminal, and alternatives stand below each other.
run 0 --help
[ -z "$(awk 'length > 80' out)" ] || complain "--help: $(awk 'length > 80' out)"
has out '  rank    --run DIR ['
for task in $tasks fresh matrix; do
    run 0 "$task" --help
    [ -z "$(sed '/^$/q' out | awk 'length > 80')" ] || complain "$task --help: a wide usage"
done
run 0 rank --help
has out '       idspan rank --run DIR ['

# Beyond the range of an option: 2. A limit of what a file says, or of the work: 3.
refuse 'from 1 to 16, not "17"' fresh jordan.pres --model m --degree 17
refuse 'degrees go from 1 to 16' fresh jordan.pres --model m --degrees 1..17
printf 'operation t(a,b,c,d,e,f,g,h,i)\n' >nine.pres
run 3 show nine.pres
printf 'operation a*b\nidentity (a*b)*c = 12345678901234567890123 a*(b*c)\n' >large.pres
run 3 rank large.pres --degrees 1..4 --exact
has err 'coefficients too large for the proof'

# ---- what is the same ---------------------------------------------------------------------

run 0 rank jordan.pres --degrees 1..4 --format csv
cp out expected
for arguments in "--format csv rank jordan.pres --degrees 1..4" \
    "rank --degrees=1..4 jordan.pres --format=csv" \
    "rank --format csv --degrees 1..4 -- jordan.pres" \
    "rank jordan.pres --degrees 1..4 --format csv --memory 64MiB --threads 1" \
    "rank jordan.pres --degrees 1..4 --format csv --memory none" \
    "rank jordan.pres --degrees 1..4 --format csv --output -"; do
    # shellcheck disable=SC2086 # words on purpose
    run 0 $arguments
    cmp -s out expected || complain "$last: another output"
done

finish
