#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# What README.md shows is what the tool says: every command "    $ idspan ..." or "    $ cat ...",
# and every one that ends in "| idspan ...", is run in a copy of data/crosses. Its output and
# messages must be the indented lines that follow. A line "..." stands for any lines.
here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
# shellcheck source-path=SCRIPTDIR source=common.sh
. "$here/common.sh"

# One file a command in ./shown: the command, then what should come.
mkdir shown
awk '
    function finish() { if (file != "") close(file); file = "" }
    /^    \$ / {
        finish()
        if ($0 ~ /^    \$ (idspan|cat) / || $0 ~ /\| idspan /) {
            file = sprintf("shown/%03d", ++count)
            print substr($0, 7) > file
        }
        next
    }
    /^    / { if (file != "") print substr($0, 5) > file; next }
    /^$/ { if (file != "") print "" > file; next }
    { finish() }
' "$source_dir/README.md"

# matches SHOWN GOT: the lines are the same; "..." at the beginning, inside or at the end is a gap.
matches() {
    awk '
        NR == FNR { shown[++n] = $0; next }
        { got[++m] = $0 }
        function fits(i, j) {
            for (; i <= n; i++) {
                if (shown[i] == "...") {
                    for (; j <= m + 1; j++) {
                        if (fits(i + 1, j)) return 1
                    }
                    return 0
                }
                if (j > m || shown[i] != got[j]) return 0
                j++
            }
            return j > m
        }
        END { exit fits(1, 1) ? 0 : 1 }
    ' "$1" "$2"
}

cp -r "$source_dir/data" data
mkdir bin
ln -s "$tool" bin/idspan
PATH=$PWD/bin:$PATH
count=0
for file in shown/*; do
    count=$((count + 1))
    command=$(head -n 1 "$file")
    # Empty lines at the end belong to the text around.
    expected=$(tail -n +2 "$file")
    printf '%s' "${expected:+$expected$'\n'}" >expected
    (cd data/crosses && eval "$command") >got 2>&1
    matches expected got || complain "README.md: $command gives: $(cat got)"
done
[ "$count" -ge 8 ] || complain "only $count commands were found in README.md"
finish
