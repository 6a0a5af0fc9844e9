#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# cli_run_kill.sh TOOL SOURCE_DIR KILLS DEGREES
#
# A table is computed in a run folder while its processes are killed with signal 9 at random times:
# all of them, or only the one that was started, which must take the others with it. What was
# finished must still be there, and must never be written again; the table must be the one that is
# computed in one piece.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

kills=$3
degrees=$4
RANDOM=${IDS_TEST_SEED:-17}
command -v setsid >/dev/null || { echo "no setsid" && exit 0; }

start=$(date +%s%N)
run 0 rank jordan.pres --degrees "$degrees" --by partition --run whole --jobs 2 --format csv
span=$((($(date +%s%N) - start) / 1000000)) # milliseconds
mv out expected
run 0 rank jordan.pres --degrees "$degrees" --by partition --format csv
cmp -s out expected || complain "the table of a run differs from that without one"

# Processes of a session.
members() {
    # pid (name) state parent group session ...; a name can have blanks, a zombie does not count
    cat /proc/[0-9]*/stat 2>/dev/null |
        sed -nE "s/^([0-9]+) \(.*\) [^Z] [0-9]+ [0-9]+ $session .*/\1/p"
}

# finished: a line "name inode time" for every file of a cell that is in order.
finished() {
    "$tool" rank --run table --list-cells 2>/dev/null | sed 's/.*/cell-&.txt/' | sort >missing
    # shellcheck disable=SC2012 # names of ours
    (cd table && stat -c '%n %i %.Y' cell-*.txt 2>/dev/null) | sort | join -v 1 - missing
}

killed=0
tables=0
: >kept
while [ "$killed" -lt "$kills" ]; do
    setsid "$tool" rank jordan.pres --degrees "$degrees" --by partition --run table --jobs 2 \
        --format csv >out 2>err &
    session=$!
    pause=$((RANDOM % (span * 2 / 3 + 10)))
    sleep "$(printf '%d.%03d' $((pause / 1000)) $((pause % 1000)))"
    if kill -9 "$session" 2>/dev/null; then
        killed=$((killed + 1))
    fi
    got=0
    wait "$session" 2>/dev/null || got=$?
    if [ $((RANDOM % 2)) = 0 ]; then
        # shellcheck disable=SC2046 # a list of numbers
        kill -9 $(members) 2>/dev/null
    fi
    for _ in {1..100}; do # those that are left end by themselves
        [ -z "$(members)" ] && break
        sleep 0.02
    done
    [ -z "$(members)" ] || complain "processes are left after the first one was killed"
    [ -f table/run.txt ] && finished >now || : >now
    comm -13 now kept >lost
    [ ! -s lost ] || complain "cells were lost or written again: $(head -c 300 lost)"
    mv now kept
    if [ "$got" -eq 0 ]; then
        cmp -s out expected || complain "another table: $(diff out expected | head -5)"
        tables=$((tables + 1))
        rm -rf table
        : >kept
    elif [ "$got" -ne 137 ]; then
        complain "exit status $got: $(head -c 300 err)"
    fi
done
run 0 rank jordan.pres --degrees "$degrees" --by partition --run table --jobs 2 --format csv
cmp -s out expected || complain "another table: $(diff out expected | head -5)"
finished >now
comm -13 now kept >lost
[ ! -s lost ] || complain "cells were lost or written again: $(head -c 300 lost)"
left=$(find table -name 'idspan-tmp-*')
[ -z "$left" ] || complain "temporary files are left: $left"
echo "$killed kills in $((tables + 1)) tables"
finish
