#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# exports.sh CC SOURCE_INCLUDE BUILD_INCLUDE LIBRARY   compares with exports.txt
# exports.sh CC SOURCE_INCLUDE BUILD_INCLUDE           writes exports.txt anew from the headers
#
# The headers, the list and the shared library must name the same functions: a function that is
# declared and not exported, exported by accident, or dropped, is found here.
here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
# shellcheck source-path=SCRIPTDIR source=common.sh
. "$here/common.sh"

compiler=$1
source_include=$2
build_include=$3
library=${4:-}

declared=$(declared_exports "$compiler" "$source_include" "$build_include")
if [ -z "$library" ]; then
    printf '%s\n' "$declared" >"$here/exports.txt"
    exit 0
fi

listed=$(sort -u "$here/exports.txt")
exported=$(nm -D --defined-only "$library" | awk '{ sub(/@.*/, "", $3); print $3 }' | sort -u)

# differences NAME LIST NAME LIST
differences() {
    local name
    for name in $(comm -23 <(printf '%s\n' "$2") <(printf '%s\n' "$4")); do
        complain "$name is in $1 and not in $3"
    done
    for name in $(comm -13 <(printf '%s\n' "$2") <(printf '%s\n' "$4")); do
        complain "$name is in $3 and not in $1"
    done
}

differences "the headers" "$declared" "tests/abi/exports.txt" "$listed"
differences "tests/abi/exports.txt" "$listed" "the shared library" "$exported"
finish
