#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# compare.sh BENCH_DIR VARIETIES_DIR [SECONDS [FILE:DEGREE ...]]
#
# Ranks of the same exported quotient steps by this library, FLINT, PARI and LinBox, one after the
# other on one core each, at most SECONDS (600) for each. Competitors that were not built are
# passed over with a message; a dense matrix that would not fit in half of the memory is not tried.
# Lines with tabs: matrix, rows, columns, entries, method, rank, seconds of the processor.
set -eu

bench=$1
varieties=$2
limit=${3:-600}
shift $(($# < 3 ? $# : 3))
if [ $# -eq 0 ]; then
    set -- jordan.pres:6 jordan.pres:7 binary-ternary-derivation.pres:7 jordan.pres:8
fi
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
room=$(($(getconf _PHYS_PAGES) * $(getconf PAGE_SIZE) / 2))

# run NAME SIZE METHOD COMMAND...
run() {
    local name=$1 size=$2 method=$3 line status=0
    shift 3
    if [ ! -x "$1" ]; then
        echo "compare.sh: $method was not built" >&2
        return
    fi
    line=$(OPENBLAS_NUM_THREADS=1 OMP_NUM_THREADS=1 timeout "$limit" "$@" 2>/dev/null) ||
        status=$?
    case $status in
    0) printf '%s\t%s\t%s\n' "$name" "$size" "$line" ;;
    3) echo "compare.sh: $method was not built in" >&2 ;;
    124) printf '%s\t%s\t%s\t-\t> %s\n' "$name" "$size" "$method" "$limit" ;;
    *) printf '%s\t%s\t%s\t-\tfailed\n' "$name" "$size" "$method" ;;
    esac
}

printf 'matrix\trows\tcolumns\tentries\tmethod\trank\tseconds\n'
for pair in "$@"; do
    file=${pair%:*}
    degree=${pair##*:}
    matrix=$folder/matrix
    "$bench/bench_rank" --export "$varieties/$file" "$degree" "$matrix"
    read -r rows columns _ <"$matrix"
    entries=$(($(wc -l <"$matrix") - 2))
    name="${file%.pres} $degree"
    size=$(printf '%s\t%s\t%s' "$rows" "$columns" "$entries")
    run "$name" "$size" ours "$bench/compare_rank" ours "$matrix"
    for method in flint pari; do
        need=$((rows * columns * 8))
        if [ "$method" = pari ]; then
            need=$((3 * need))
        fi
        if [ "$need" -gt "$room" ]; then
            printf '%s\t%s\t%s\t-\tdoes not fit\n' "$name" "$size" "$method"
        else
            run "$name" "$size" "$method" "$bench/compare_rank" "$method" "$matrix"
        fi
    done
    run "$name" "$size" linbox "$bench/compare_linbox" "$matrix"
    rm -f "$matrix"
done
