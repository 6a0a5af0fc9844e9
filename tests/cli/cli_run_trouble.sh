#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# cli_run_trouble.sh TOOL SOURCE_DIR SHIM
#
# Trouble that comes at night: a full disk, a folder that cannot be written, workers that die, too
# little memory, a clock that jumps (SHIM is preloaded for that). Each is told clearly and costs no
# cell that was finished; afterwards the table is the right one.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"
shim=$3

run 0 rank jordan.pres --degrees 2..8 --by partition --format csv
mv out expected

# go_on: the same command again gives the right table.
go_on() {
    run 0 rank jordan.pres --degrees 2..8 --by partition --run table --jobs 2 --format csv
    is out "$(cat expected)"
    [ -z "$(find table/ -name 'idspan-tmp-*' -o -name 'failed-*')" ] ||
        complain "$last: files are left: $(ls table)"
}

# ---- a full disk, and one that cannot be written ---------------------------------------------

# A file system of 200 kB, in a name space of its own where that can be had.
if unshare -m true 2>/dev/null && mkdir table &&
    unshare -m sh -c 'mount -t tmpfs -o size=200k none table' 2>/dev/null; then
    cat >full.sh <<'END'
mount -t tmpfs -o size=200k none table || exit 99
"$1" rank jordan.pres --degrees 2..8 --by partition --run table --jobs 2 --format csv >out 2>err
echo $? >status
"$1" rank --run table --format csv >out2 2>err2 || echo "unreadable" >>status
mount -o remount,size=2m table
"$1" rank jordan.pres --degrees 2..8 --by partition --run table --jobs 2 --format csv >out3 2>err3
echo $? >>status
mount -o remount,ro table
"$1" rank jordan.pres --degrees 2..8 --by partition --run table --format csv >out4 2>err4
echo $? >>status
"$1" rank --run table --format csv >out5 2>err5
echo $? >>status
END
    unshare -m bash full.sh "$tool"
    [ "$(paste -sd' ' status)" = "2 0 2 0" ] || complain "full disk: exit status $(cat status)"
    last="full disk"
    has err 'No space left on device; what is finished is kept'
    has out 'missing'
    cmp -s out3 expected || complain "full disk: another table: $(head -c 300 err3)"
    has err4 'cannot write in the folder "table": Read-only file system'
    cmp -s out5 expected || complain "read-only: another table: $(head -c 300 err5)"
    rm -rf table
else
    echo "no file systems can be mounted here: full disk and read-only folder are left out"
    rm -rf table
fi

# ---- workers that die --------------------------------------------------------------------------

# children PID: processes whose parent it is.
children() {
    cat /proc/[0-9]*/stat 2>/dev/null | sed -nE "s/^([0-9]+) \(.*\) [^Z] $1 .*/\1/p"
}

# strike SIGNAL TIMES DEPTH: the signal for a worker (DEPTH 2) or the process above it (DEPTH 1), as
# the system does when it is out of memory, so often.
strike() {
    local signal=$1 times=$2 depth=$3 struck=0 got=0 victim
    rm -rf table
    "$tool" rank jordan.pres --degrees 2..10 --by partition --run table --jobs 2 --format csv \
        >out 2>err &
    local job=$!
    while [ "$struck" -lt "$times" ] && kill -0 "$job" 2>/dev/null; do
        victim=$(children "$job" | head -n 1)
        if [ "$depth" -eq 2 ] && [ -n "$victim" ]; then
            victim=$(children "$victim" | tail -n 1)
        fi
        if [ -n "$victim" ] && kill "-$signal" "$victim" 2>/dev/null; then
            struck=$((struck + 1))
            sleep 0.05
        fi
    done
    wait "$job" || got=$?
    last="strike $*"
    echo "$got"
}

run 0 rank jordan.pres --degrees 2..10 --by partition --format csv
mv out expected10
[ "$(strike KILL 1 2)" = 0 ] || complain "a worker was killed: $(cat err)"
last="a worker was killed"
has err 'it is tried again, alone, at the end'
has err 'ended by signal 9, as when the system is out of memory'
is out "$(cat expected10)"
[ "$(strike ABRT 1 2)" = 0 ] || complain "a worker was aborted: $(cat err)"
last="a worker was aborted"
has err 'ended by signal 6, as when a library is out of memory'
is out "$(cat expected10)"
[ "$(strike KILL 1 1)" = 0 ] || complain "the grower was killed: $(cat err)"
last="the grower was killed"
has err 'it is tried again, alone'
is out "$(cat expected10)"

# ---- too little memory -------------------------------------------------------------------------

rm -rf table
run 3 rank jordan.pres --degrees 2..8 --by partition --run table --jobs 2 --memory 1500K \
    --format csv
has err 'could not be computed'
has err 'budget'
has out 'failed'
run 0 rank --run table --format csv
has out '2,2,1,1,0,1,exact'
go_on

# ---- a clock that jumps ------------------------------------------------------------------------

rm -rf table
if [ -n "$shim" ]; then
    export IDSPAN_TEST_CLOCK=4000000000
    LD_PRELOAD=$shim "$tool" rank jordan.pres --degrees 2..7 --by partition --run table \
        >out 2>err || complain "a clock ahead: $(cat err)"
    grep -q '^finished: 21' table/cell-7.4+3.txt ||
        complain "the clock did not jump: $(cat table/cell-7.4+3.txt)"
    export IDSPAN_TEST_CLOCK=-1000000000
    LD_PRELOAD=$shim "$tool" rank jordan.pres --degrees 2..8 --by partition --run table --jobs 2 \
        --format csv >out 2>err || complain "a clock behind: $(cat err)"
    last="a clock behind"
    has err "22 of 65 cells are left"
    is out "$(cat expected)"
    unset IDSPAN_TEST_CLOCK
    go_on
fi

finish
