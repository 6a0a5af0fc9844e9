#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# headers.sh CC CXX SOURCE_INCLUDE BUILD_INCLUDE   (CXX empty: no C++ compiler is there)
#
# Each public header alone, and twice, is clean C11 and C++17; it defines no macro outside our
# prefix.
here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
# shellcheck source-path=SCRIPTDIR source=common.sh
. "$here/common.sh"

c_compiler=$1
cxx_compiler=$2
includes=("-I$3" "-I$4")
warnings=(-Wall -Wextra -Wpedantic -Wconversion -Wshadow -Werror)

if [ -z "$cxx_compiler" ]; then
    printf 'no C++ compiler: headers are tried as C only\n'
fi
for path in "$3"/idspan/*.h "$4"/idspan/*.h; do
    name=idspan/$(basename "$path")
    program="#include <$name>"$'\n'"#include <$name>"$'\n''int main(void) { return 0; }'
    for define in -DIDS_DYNAMIC -DIDS_STATIC_DEFINE; do
        "$c_compiler" -std=c11 "${warnings[@]}" $define "${includes[@]}" -fsyntax-only -x c - \
            <<<"$program" || complain "$name is not clean C11 ($define)"
        if [ -n "$cxx_compiler" ]; then
            "$cxx_compiler" -std=c++17 "${warnings[@]}" $define "${includes[@]}" -fsyntax-only \
                -x c++ - <<<"$program" || complain "$name is not clean C++17 ($define)"
        fi
    done
done

# Macros that are there with our headers and not with the ones that those include.
foreign=$(cat "$3"/idspan/*.h | sed -nE 's/^#include (<[a-z]+\.h>).*/#include \1/p' | sort -u)
macros() {
    "$c_compiler" -std=c11 -dM -E "${includes[@]}" -x c - |
        awk '{ sub(/\(.*/, "", $2); print $2 }' | sort -u
}
ours=$(for path in "$3"/idspan/*.h; do
    printf '#include <idspan/%s>\n' "$(basename "$path")"
done | macros)
for name in $(comm -23 <(printf '%s\n' "$ours") <(macros <<<"$foreign")); do
    case $name in
    IDS_* | IDSPAN_*) ;;
    *) complain "the headers define the macro $name" ;;
    esac
done
finish
