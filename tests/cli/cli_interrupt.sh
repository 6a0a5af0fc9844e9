#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# Ctrl-C and TERM: the tool writes what it has and says so with exit status 4. With a terminal on
# standard error it shows progress, without one it is silent.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

# Jobs of their own process groups: in a script a job in the background ignores Ctrl-C otherwise.
set -m

# interrupt SIGNAL ARGUMENT...: sends the signal after two seconds of work without an end.
interrupt() {
    local signal=$1 got=0
    shift
    last="idspan $* ($signal)"
    timeout 60 "$tool" "$@" >out 2>err &
    local job=$!
    sleep 2
    kill -"$signal" "$job" 2>/dev/null
    wait "$job" || got=$?
    [ "$got" -eq 4 ] || complain "$last: exit status $got, not 4"
    has err 'idspan: interrupted'
    [ "$(wc -l <err)" -eq 1 ] || complain "$last: more than one line: $(cat err)"
}

interrupt INT rank jordan.pres --degrees 1..11 --format csv --memory none
has out '5,105,50,55,'
interrupt TERM rank jordan.pres --degrees 1..11 --format json --memory none
has out '"stopped": "interrupted before degree '
if command -v python3 >/dev/null; then
    python3 -m json.tool <out >/dev/null || complain "$last: not JSON"
fi
interrupt INT fresh "$source_dir/data/models/special-jordan.pres" --model special \
    --degrees 3..16 --table --format csv --memory none
has err 'idspan: interrupted before degree '
has out '3,3,'
interrupt TERM basis commutative.pres --degree 12 --format csv --output /dev/null

# A terminal, if there is a program that makes one, and the system has one to give.
if command -v script >/dev/null && script -q -c true /dev/null </dev/null >/dev/null 2>&1; then
    last="idspan basis on a terminal"
    timeout 30 script -q -e -c \
        "timeout -s TERM 3 '$tool' basis commutative.pres --degree 12 --format csv >/dev/null" \
        typescript </dev/null >/dev/null 2>&1
    grep -q 'degree 12' typescript || complain "$last: no progress: $(head -c 300 typescript)"
fi

finish
