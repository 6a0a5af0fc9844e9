#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# layers.sh SOURCE_DIR
#
# A room of lib includes only itself and rooms above it in the list; only the border includes
# FLINT; the tool includes public headers only. Licence line in every source file, lines of at
# most 100 characters, files of at most 500 lines, and nothing unknown at the top of the tree.
here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
# shellcheck source-path=SCRIPTDIR source=common.sh
. "$here/common.sh"

cd "$1"
rooms=(core tree identity young field engine model answer run render)

# Place of a room in the list; a public header carries the name of its room. The generated
# headers stand before all rooms; basis.h and gmp.h belong to tree, algebra.h to model, draw.h and
# report.h to render, follows.h and fresh.h to answer.
declare -A place=([export]=0 [version]=0)
for number in "${!rooms[@]}"; do
    place[${rooms[number]}]=$number
done
place[gmp]=${place[tree]}
place[algebra]=${place[model]}
place[draw]=${place[render]}
place[report]=${place[render]}
place[follows]=${place[answer]}
place[basis]=${place[tree]}
place[fresh]=${place[answer]}

# Lines "file <header>" or "file "header"" of the files given.
includes_of() {
    grep -HoE '^[[:space:]]*#[[:space:]]*include[[:space:]]+[<"][^>"]+[>"]' "$@" |
        sed -E 's/^([^:]*):[^<"]*/\1 /' || true
}

# check_room ROOM FILE...
check_room() {
    local room=$1 file header other
    shift
    if [ -z "${place[$room]:-}" ]; then
        complain "$1: $room is not in the list of rooms"
        return
    fi
    while read -r file header; do
        other=${header:1:-1}
        case $header in
        '<idspan/'*) other=${other#idspan/} && other=${other%.h} ;;
        '<'*) continue ;;
        '"../'*/*) other=${other#../} && other=${other%%/*} ;;
        */*) other=${other%%/*} ;;
        *) other=$room ;;
        esac
        if [ -z "${place[$other]:-}" ]; then
            complain "$file includes $header, which belongs to no room"
        elif [ "${place[$other]}" -gt "${place[$room]}" ]; then
            complain "$file includes $header, which is below it in the list of rooms"
        fi
    done < <(includes_of "$@")
}

for directory in lib/*/; do
    room=${directory#lib/}
    mapfile -t files < <(find "$directory" -name '*.[ch]' | sort)
    if [ "${#files[@]}" -gt 0 ]; then
        check_room "${room%/}" "${files[@]}"
    fi
done
for path in include/idspan/*.h; do
    room=${path#include/idspan/}
    if [ "$room" != idspan.h ]; then
        check_room "${room%.h}" "$path"
    fi
done

mapfile -t files < <(find lib include tools -name '*.[ch]' | sort)
while read -r file header; do
    if [[ $header == *flint* && $file != lib/field/flint_border.c ]]; then
        complain "$file includes $header"
    fi
    if [[ $file == tools/* ]]; then
        case $header in
        '<idspan/'* | '<sys/'*) ;;
        '<'*/* | '"'*/*) complain "$file includes $header; the tool sees public headers only" ;;
        esac
    fi
done < <(includes_of "${files[@]}")

# ---- every source file -----------------------------------------------------------------------

folders=(lib include tools tests)
[ ! -d bench ] || folders+=(bench)
mapfile -t files < <(
    find "${folders[@]}" -type f \( -name '*.[ch]' -o -name '*.cc' -o -name '*.sh' \
        -o -name '*.cmake' -o -name '*.h.in' -o -name '*.cmake.in' -o -name CMakeLists.txt \
        -o -perm -u+x ! -name '*.*' \) | sort
)
while IFS= read -r line; do
    complain "$line"
done < <(
    # Bytes that continue a UTF-8 character do not count for the width of a line.
    awk '
        function close_file() {
            if (name != "" && !licensed) print name " does not begin with its licence line"
            if (name != "" && lines > 500) print name " has " lines " lines"
        }
        FNR == 1 { close_file(); name = FILENAME; licensed = 0 }
        FNR <= 2 && /SPDX-License-Identifier: BSD-2-Clause/ { licensed = 1 }
        { lines = FNR; text = $0; gsub(/[\200-\277]/, "", text) }
        length(text) > 100 { print name ":" FNR " has " length(text) " characters" }
        END { close_file() }
    ' CMakeLists.txt .ci/run "${files[@]}"
)

# ---- top of the tree -------------------------------------------------------------------------

for entry in *; do
    case $entry in
    README.md | DEVELOPERS.md | CMakeLists.txt | lib | include | tools | tests | bench | data) ;;
    build | build-*) ;;
    *) complain "$entry does not belong at the top of the tree" ;;
    esac
done
finish
