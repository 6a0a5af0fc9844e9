#!/bin/sh
# SPDX-License-Identifier: BSD-2-Clause
#
# compare_partition.sh IDSPAN RANDOM_PRES DIR...
#
# Compares the partition engine with the monomial engine: the totals of every degree that has not
# too many monomials. Presentations: all .pres files of the given folders, and random ones.
# No folders: random ones only; RANDOM_PRES "-": none.
#
# IDS_TEST_SEED    seed of the first random presentation (default 1), the others follow it
# IDS_TEST_SCALE   multiplies the number of random presentations (default 1: 100 of them)
# IDS_TEST_LIMIT   most monomials of a degree (default 31000 for files, 2000 for random ones)
# IDS_TEST_DEGREE  highest degree (default 9)
set -u
tool=$1
random=$2
shift 2
seed=${IDS_TEST_SEED:-1}
scale=${IDS_TEST_SCALE:-1}
degree=${IDS_TEST_DEGREE:-9}
compared=0
failures=0

work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

# reach FILE LIMIT: the last degree before the first that has more than LIMIT monomials
reach()
{
    "$tool" count "$1" --degrees "1..$degree" --format csv |
        awk -F, -v limit="$2" \
            'NR > 1 { if ($3 + 0 > limit) exit; last = $1 } END { print last + 0 }'
}

# compare FILE LIMIT LABEL
compare()
{
    last=$(reach "$1" "$2")
    if [ "$last" -lt 1 ] ||
        ! "$tool" rank "$1" --degrees "1..$last" --by partition --cross-check --format csv \
            > "$work/table" 2> "$work/errors"; then
        failures=$((failures + 1))
        echo "FAILED $3, degrees 1..$last: $(head -n 1 "$work/errors")"
        return 1
    fi
    compared=$((compared + 1))
}

for dir in "$@"; do
    for file in "$dir"/*.pres; do
        compare "$file" "${IDS_TEST_LIMIT:-31000}" "$file"
    done
done

if [ "$random" != - ]; then
    last_seed=$((seed + 100 * scale - 1))
    echo "random presentations: seeds $seed to $last_seed"
    while [ "$seed" -le "$last_seed" ]; do
        "$random" "$seed" > "$work/random.pres" || exit 1
        compare "$work/random.pres" "${IDS_TEST_LIMIT:-2000}" "seed $seed" ||
            cat "$work/random.pres"
        seed=$((seed + 1))
    done
fi

echo "$compared presentations compared, $failures failures"
[ "$failures" -eq 0 ] && [ "$compared" -gt 0 ]
