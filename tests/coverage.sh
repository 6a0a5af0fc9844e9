#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# coverage.sh BUILD_DIR
#
# After the tests of a build with IDSPAN_COVERAGE: how many lines of each room of lib have run, and
# of each file that is below 95 %, which have not. `tests/run coverage` does all of it.
set -euo pipefail
export LC_ALL=C

objects=$1/lib/CMakeFiles/idspan_objects.dir
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
root=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd -P)

mapfile -t notes < <(cd "$objects" && find "$PWD" -name '*.gcno' | sort)
(cd "$work" && gcov --preserve-paths --source-prefix "$root" --relative-only "${notes[@]}" >log)

# Lines "count: number: text"; - is no code, ##### and ===== have not run.
awk -F: -v folder="$work/" '
    FNR == 1 {
        name = FILENAME
        sub(/\.gcov$/, "", name)
        sub(".*" "lib#", "lib#", name)
        gsub("#", "/", name)
    }
    name !~ /^lib\// { next }
    { count = $1; gsub(/[ *]/, "", count) }
    count == "-" { next }
    {
        split(name, part, "/")
        room = part[2]
        lines[room]++
        lines[name]++
        files[name] = 1
        rooms[room] = 1
        total++
    }
    count ~ /^[#=]/ {
        missed[room]++
        missed[name]++
        misses++
        number = $2
        gsub(/ /, "", number)
        list[name] = list[name] " " number
    }
    END {
        for (room in rooms)
            printf "%-10s %6d lines %6.2f %%\n", room, lines[room],
                100 - 100 * missed[room] / lines[room] | "sort"
        close("sort")
        printf "%-10s %6d lines %6.2f %%\n", "lib", total, 100 - 100 * misses / total
        for (name in files)
            if (missed[name] > 0.05 * lines[name])
                printf "%s %.1f %%, not:%s\n", name, 100 - 100 * missed[name] / lines[name],
                    list[name] | "sort"
    }' "$work"/*.gcov
