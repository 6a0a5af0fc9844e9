#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# tested.sh SOURCE_DIR MISUSE_CALLS
#
# Every public function that can run out of memory (its comment says so) is called in tests/oom, or
# in another test that uses TEST_OOM; every one is called in tests/thread; and every one is in the
# calls that misuse.sh has written. Prints how many of each there are.
here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
# shellcheck source-path=SCRIPTDIR source=common.sh
. "$here/common.sh"

cd "$1"
misuse_calls=$2

# Functions whose comment names IDS_ERR_NOMEM.
allocating=$(awk '
    /^\/\*\*/ { allocates = 0 }
    /IDS_ERR_NOMEM/ { allocates = 1 }
    /^IDS_API/ { declaration = "" ; inside = 1 }
    inside { declaration = declaration " " $0 }
    inside && /;/ {
        inside = 0
        if (allocates && match(declaration, /ids_[a-z0-9_]+\(/))
            print substr(declaration, RSTART, RLENGTH - 1)
    }' include/idspan/*.h | sort -u)

# called FILE...: the names of public functions that are called there.
called() {
    grep -ohE '\bids_[a-z0-9_]+ *\(' "$@" | tr -d ' (' | sort -u
}

# demand WHAT NAMES CALLED
demand() {
    local name number
    number=$(comm -12 <(printf '%s\n' "$2") <(printf '%s\n' "$3") | wc -l)
    printf '%s: %d of %d\n' "$1" "$number" "$(wc -l <<<"$2")"
    for name in $(comm -23 <(printf '%s\n' "$2") <(printf '%s\n' "$3")); do
        complain "$name is not called in $1"
    done
}

all=$(sort -u tests/abi/exports.txt)
mapfile -t refusing < <(grep -lE '^    TEST_OOM\(' tests/*/*.c)
demand "tests with TEST_OOM, of those that allocate" "$allocating" "$(called "${refusing[@]}")"
demand "tests/thread" "$all" "$(called tests/thread/*.c)"
demand "the calls of tests/abi/misuse.sh" "$all" "$(called "$misuse_calls")"
finish
