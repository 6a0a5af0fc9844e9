# SPDX-License-Identifier: BSD-2-Clause
# shellcheck shell=bash
#
# Sourced by the scripts beside it: they collect complaints and end with the count of them.
set -euo pipefail
export LC_ALL=C

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

# Names of the functions that the public headers mark IDS_API: declared_exports CC INCLUDE...
# The preprocessor takes the comments away; export.h leaves an IDS_API alone that it meets.
declared_exports() {
    local compiler=$1 header flags=()
    shift
    for header in "$@"; do
        flags+=("-I$header")
    done
    for header in "$1"/idspan/*.h; do
        printf '#include <idspan/%s>\n' "$(basename "$header")"
    done |
        "$compiler" -std=c11 -E -P -DIDS_API=IDS_API_MARK "${flags[@]}" -x c - |
        tr '\n' ' ' | tr ';' '\n' |
        sed -nE 's/.*IDS_API_MARK[^;]*[^a-zA-Z0-9_](ids_[a-zA-Z0-9_]+) *\(.*/\1/p' | sort -u
}
