#!/bin/sh
# SPDX-License-Identifier: BSD-2-Clause
#
# compare.sh IDSPAN IDSPAN_REF RANDOM_PRES DIR...
#
# Compares the tool with the slow reference program, row by row: ranks, and the automorphism orders
# of the association types. Presentations: all .pres files of the given folders, as far as the
# number of monomials allows, and random ones. No folders: random ones only; RANDOM_PRES "-": none.
#
# IDS_TEST_SEED    seed of the first random presentation (default 1), the others follow it
# IDS_TEST_SCALE   multiplies the number of random presentations (default 1: 200 of them)
# IDS_TEST_LIMIT   most monomials of a degree (default 1700)
# IDS_TEST_DEGREE  highest degree for files (default 7)
set -u
tool=$1
ref=$2
random=$3
shift 3
seed=${IDS_TEST_SEED:-1}
scale=${IDS_TEST_SCALE:-1}
limit=${IDS_TEST_LIMIT:-1700}
degree=${IDS_TEST_DEGREE:-7}
compared=0
skipped=0
failures=0

work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

# failed LABEL: the two files got and expected differ
failed()
{
    failures=$((failures + 1))
    echo "FAILED $1: expected (<) and got (>)"
    diff "$work/expected" "$work/got" | head -n 20
    head -n 5 "$work/errors"
}

# same_rank FILE DEGREE LABEL
same_rank()
{
    "$ref" "$1" "$2" --limit "$limit" > "$work/expected" 2> "$work/errors"
    status=$?
    if [ "$status" -eq 3 ]; then
        skipped=$((skipped + 1))
        return
    fi
    rows=$(($(wc -l < "$work/expected") - 1))
    if [ "$status" -ne 0 ] || [ "$rows" -lt 1 ]; then
        failures=$((failures + 1))
        echo "FAILED $3: the reference program ended with status $status"
        head -n 5 "$work/errors"
        return
    fi
    "$tool" rank "$1" --degrees "1..$rows" --format csv > "$work/full" 2> "$work/errors"
    status=$?
    compared=$((compared + 1))
    cut -d, -f1-4 "$work/full" > "$work/got"
    if [ "$status" -ne 0 ]; then
        echo "exit status $status" >> "$work/got"
    fi
    cmp -s "$work/expected" "$work/got" || failed "$3, ranks of degree 1..$rows"
}

# same_types FILE LABEL: all types of the last degree of the rank table
same_types()
{
    [ "$rows" -ge 1 ] || return
    # The type itself is quoted when it has commas; the two numbers stand behind it.
    for program in ref tool; do
        if [ "$program" = ref ]; then
            "$ref" "$1" --types "$rows"
        else
            "$tool" types "$1" --degree "$rows" --format csv
        fi 2> "$work/errors" | tail -n +2 | awk -F, '{ print $(NF - 1) "," $NF }' |
            sort -t, -k1,1n -k2,2n > "$work/$program"
    done
    mv "$work/ref" "$work/expected"
    mv "$work/tool" "$work/got"
    cmp -s "$work/expected" "$work/got" || failed "$2, automorphism orders of degree $rows"
}

for dir in "$@"; do
    for file in "$dir"/*.pres; do
        rows=0
        same_rank "$file" "$degree" "$file"
        same_types "$file" "$file"
    done
done

if [ "$random" != - ]; then
    last=$((seed + 200 * scale - 1))
    echo "random presentations: seeds $seed to $last"
    while [ "$seed" -le "$last" ]; do
        "$random" "$seed" > "$work/random.pres" || exit 1
        before=$failures
        rows=0
        same_rank "$work/random.pres" \
            "$(sed -n 's/^# reference degree: //p' "$work/random.pres")" "seed $seed"
        same_types "$work/random.pres" "seed $seed"
        [ "$failures" -eq "$before" ] || cat "$work/random.pres"
        seed=$((seed + 1))
    done
fi

echo "$compared presentations compared, $skipped too large, $failures failures"
[ "$failures" -eq 0 ] && [ "$compared" -gt 0 ]
