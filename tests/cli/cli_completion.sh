#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# The completion for bash offers the tasks, the options of each task and the formats that the tool
# itself lists, and files where a file is wanted.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

# shellcheck source=tools/idspan/idspan.bash
. "$source_dir/tools/idspan/idspan.bash"

# complete_words WORD...: what is offered for the last of the words, one a line.
complete_words() {
    COMP_WORDS=("$@")
    COMP_CWORD=$(($# - 1))
    COMPREPLY=()
    _idspan 2>/dev/null
    printf '%s\n' "${COMPREPLY[@]}" | sort -u
}

# same WHAT EXPECTED GOT
same() {
    if [ "$2" != "$3" ]; then
        complain "$1: the tool and the completion differ:"
        diff <(printf '%s\n' "$2") <(printf '%s\n' "$3") >&2
    fi
}

run 0 --help
tasks=$(sed -n 's/^  \([a-z][a-z]*\) *FILE.*/\1/p' out | sort -u)
[ "$(wc -l <<<"$tasks")" -ge 9 ] || complain "--help lists too few tasks: $tasks"
same tasks "$tasks" "$(complete_words idspan '')"

for task in $tasks; do
    run 0 "$task" --help
    options=$(sed -nE 's/^  (--[a-z-]+).*/\1/p' out | sort -u)
    same "options of $task" "$options" "$(complete_words idspan "$task" --)"
    # Options that take a value do not offer options as the value.
    for option in $(sed -nE 's/^  (--[a-z-]+) [A-Z].*/\1/p' out); do
        offered=$(complete_words idspan "$task" file.pres "$option" --)
        [ -z "$offered" ] || complain "$task $option offers $offered"
    done
    grep -q '^Examples:' out || complain "$task --help has no examples"
    grep -q "^  .*idspan $task " out || complain "$task --help has no example of $task"
done

mkdir folder
for task in $tasks; do
    offered=$(complete_words idspan "$task" '')
    grep -qx folder <<<"$offered" || complain "$task does not offer folders"
    [ "$task" = check ] || grep -qx jordan.pres <<<"$offered" || complain "$task offers no file"
done
finish
