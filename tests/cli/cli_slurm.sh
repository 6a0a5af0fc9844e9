#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# A rank table as a job array of a real Slurm of one node, with a task that is killed and requeued:
# the table is that of a single process, byte for byte, and no finished cell is computed again.
# Ends with status 77 (skipped) where Slurm is not installed or we are not root.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"
# shellcheck source=tests/cli/slurm_node.sh
. "$here/slurm_node.sh"

slurm_possible || exit 77
trap 'slurm_stop; rm -rf "$work"' EXIT
if ! slurm_start "$work/slurm"; then
    exit 1
fi

sbatch_file=$source_dir/tools/slurm/rank-table.sbatch
tasks=6
killed=2
stamp=

# wait_for SECONDS COMMAND...: until the command succeeds; complains when it does not.
wait_for() {
    local i
    for ((i = 0; i < 5 * $1; i++)); do
        "${@:2}" && return 0
        sleep 0.2
    done
    complain "waited $1 s in vain for: ${*:2}; $(squeue 2>&1)"
    return 1
}

is_running() {
    [ -n "$(squeue --noheader --states=RUNNING --jobs "$1" 2>/dev/null)" ]
}

is_over() {
    ! is_running "$1"
}

queue_is_empty() {
    [ -z "$(squeue --noheader)" ]
}

# The program of the jobs. On its first start, the task to be killed computes its first cell and
# then hangs, as one does that has a long way to go.
cat >worker <<END
#!/bin/bash
if [ "\$SLURM_ARRAY_TASK_ID" -eq $killed ] && [ "\${SLURM_RESTART_COUNT:-0}" -eq 0 ]; then
    "$tool" rank --run run --cell 2.1+1
    touch hangs
    sleep 1000
fi
exec "$tool" "\$@"
END
chmod +x worker
export IDSPAN=$work/worker

# ---- the same table, without and with a cluster ----------------------------------------------

run 0 rank jordan.pres --degrees 2..9 --by partition --format csv --output alone.csv
run 0 rank jordan.pres --degrees 2..9 --by partition --run run --plan
run 0 rank --run run --list-cells --output cells
[ "$(wc -l <cells)" -eq 95 ] || complain "not 95 cells: $(wc -l <cells)"
[ "$(sed -n "${killed}p" cells)" = 2.1+1 ] || complain "the second cell is not 2.1+1"

job=$(sbatch --parsable --array=1-$tasks --mem=0 "$sbatch_file" run cells) || complain "no sbatch"
if wait_for 120 test -e hangs; then
    stamp=$(stat -c '%i %Y %Z' run/cell-2.1+1.txt)
    is_running "${job}_$killed" || complain "task $killed does not run"
    scancel --signal=KILL --full "${job}_$killed"
    wait_for 60 is_over "${job}_$killed"
    run 0 rank --run run --format csv
    has out "missing"
    scontrol requeue "${job}_$killed" || complain "task $killed could not be requeued"
fi
wait_for 300 queue_is_empty

run 0 rank --run run --format csv --output together.csv
cmp alone.csv together.csv || complain "the tables differ: $(cat rank-table-*.log)"
[ "$(stat -c '%i %Y %Z' run/cell-2.1+1.txt)" = "$stamp" ] ||
    complain "a cell that was on disk was computed again"
[ "$(find run -name 'cell-*' | wc -l)" -eq 95 ] || complain "not 95 files of cells"
run 0 rank --run run --list-cells
is_empty out

# ---- more tasks than cells; a command line that is wrong ----------------------------------------

rm -f rank-table-*.log
head -n 1 cells >one
sbatch --parsable --wait --array=3-7:2 --mem=0 "$sbatch_file" run one >id ||
    complain "tasks without cells fail"
has rank-table-"$(cat id)"_3.log "2.2 on"
has rank-table-"$(cat id)"_7.log "more tasks than cells"
if sbatch --parsable --wait --array=1 --mem=0 --output=wrong.log "$sbatch_file" run >/dev/null; then
    complain "a missing argument is no failure"
fi
has wrong.log "usage:"
finish
