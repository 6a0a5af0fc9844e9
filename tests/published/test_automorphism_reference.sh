#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# test_automorphism_reference.sh PROGRAM
#
# Lets GAP, a general system for group theory (Debian: gap-core), check the automorphism groups
# that PROGRAM writes. Exit status 77, which ctest shows as skipped, when GAP is not installed.
set -euo pipefail

if ! command -v gap >/dev/null; then
    printf 'skipped: GAP is not installed (Debian: apt-get install gap-core)\n'
    exit 77
fi
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
"$1" >"$folder/groups.g"
gap -q -A "$folder/groups.g" </dev/null >"$folder/answer" || {
    cat "$folder/answer"
    exit 1
}
cat "$folder/answer"
read -r word count _ < <(tail -n 1 "$folder/answer")
if [ "$word" != checked ] || [ "$count" -lt 300 ]; then
    printf 'fewer than 300 types were checked\n'
    exit 1
fi
