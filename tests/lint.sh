#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# lint.sh BUILD_DIR [FILE...]
#
# clang-tidy (with .clang-tidy) and cppcheck over lib and tools, shellcheck over the scripts, groff
# over the manual pages: whatever of these is installed. No complaint is accepted.
set -uo pipefail

root=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd -P)
build=$(cd "$1" && pwd -P)
shift
cd "$root" || exit 1
failed=0

files=("$@")
if [ ${#files[@]} -eq 0 ]; then
    mapfile -t files < <(find lib tools -name '*.c' | sort)
fi
if command -v clang-tidy >/dev/null; then
    printf '%s\n' "${files[@]}" | xargs -P "$(nproc)" -n 8 clang-tidy --quiet \
        --warnings-as-errors='*' -p "$build" 2>/dev/null || failed=1
fi
if command -v cppcheck >/dev/null; then
    cppcheck --quiet --std=c11 --language=c --error-exitcode=1 --inline-suppr \
        --enable=warning,performance,portability --suppress=missingIncludeSystem \
        --suppress=legacyUninitvar --suppress=duplicateAssignExpression \
        -D_POSIX_C_SOURCE=200809L -DNDEBUG -I lib -I include -I "$build/include" \
        "${files[@]}" || failed=1
fi
if command -v shellcheck >/dev/null; then
    shellcheck -S warning -x tests/run tests/*.sh tests/*/*.sh tools/start tools/packages.sh ||
        failed=1
fi
if command -v groff >/dev/null; then
    for page in tools/idspan/idspan.[0-9]; do
        complaints=$(groff -ww -man -Tutf8 "$page" 2>&1 >/dev/null)
        [ -z "$complaints" ] || { printf '%s\n' "$complaints" && failed=1; }
    done
fi
exit "$failed"
