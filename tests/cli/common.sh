# SPDX-License-Identifier: BSD-2-Clause
# shellcheck shell=bash
#
# Sourced by the scripts beside it: SCRIPT TOOL SOURCE_DIR. They run the tool, look at its exit
# status, output and messages, and end with the number of complaints.
set -uo pipefail
export LC_ALL=C

tool=$1
# shellcheck disable=SC2034 # used by the scripts
source_dir=$2
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
cd "$work" || exit 1

complaints=0

complain() {
    printf '%s\n' "$*" >&2
    complaints=$((complaints + 1))
}

finish() {
    if [ "$complaints" -gt 0 ]; then
        printf '%s: %d complaints\n' "$(basename "$0")" "$complaints" >&2
        exit 1
    fi
}

# run STATUS ARGUMENT...: output to ./out, messages to ./err; complains of another status.
run() {
    local expected=$1 got=0
    shift
    last="idspan $*"
    "$tool" "$@" >out 2>err || got=$?
    if [ "$got" -ne "$expected" ]; then
        complain "$last: exit status $got, not $expected; $(head -c 300 err)"
    fi
}

# FILE (out or err) of the last run has a line with TEXT / is empty / is exactly TEXT.
has() {
    grep -qF -e "$2" "$1" || complain "$last: $1 lacks \"$2\"; it is: $(head -c 500 "$1")"
}

lacks() {
    ! grep -qF -e "$2" "$1" || complain "$last: $1 has \"$2\""
}

is_empty() {
    [ ! -s "$1" ] || complain "$last: $1 is not empty: $(head -c 300 "$1")"
}

is() {
    [ "$(cat "$1")" = "$2" ] || complain "$last: $1 is not as expected: $(head -c 800 "$1")"
}

printf 'operation a*b commutative\n' >commutative.pres
printf 'operation (a,b,c) commutative\n' >ternary.pres
printf 'operation a*b commutative\nidentity jordan: ((x*x)*y)*x = (x*x)*(y*x)\n' >jordan.pres
