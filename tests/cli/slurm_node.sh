# SPDX-License-Identifier: BSD-2-Clause
# shellcheck shell=bash
#
# Sourced: a Slurm of one node on this machine, of Debian's packages, for as long as the script
# that sources this runs. Everything it writes is below the folder given to slurm_start; nothing
# of the system's own configuration is read or changed. It is for root, and needs neither systemd
# nor control groups: processes are tracked by process groups, tasks are bound to nothing.

slurm_pids=()

slurm_possible() {
    local program
    for program in munged slurmctld slurmd sbatch squeue scontrol scancel sinfo; do
        command -v "$program" >/dev/null || {
            printf 'no %s: Slurm is not installed\n' "$program"
            return 1
        }
    done
    [ "$(id -u)" -eq 0 ] || {
        printf 'not root\n'
        return 1
    }
}

# A port that nobody listens on, from the number given on.
slurm_free_port() {
    local port=$1
    while (exec 3<>"/dev/tcp/127.0.0.1/$port") 2>/dev/null; do
        port=$((port + 1))
    done
    printf '%d' "$port"
}

slurm_write_config() {
    local folder=$1 name port
    name=$(hostname -s)
    port=$(slurm_free_port $((20000 + RANDOM % 20000)))
    cat >"$folder/slurm.conf" <<END
ClusterName=test
SlurmctldHost=$name(127.0.0.1)
SlurmctldPort=$port
SlurmdPort=$(slurm_free_port $((port + 1)))
SlurmUser=root
SlurmdUser=root
AuthType=auth/munge
# A task that is requeued waits until the credential of its first start has run out.
AuthInfo=socket=$folder/munge/socket,cred_expire=5
CredType=cred/munge
ProctrackType=proctrack/pgid
TaskPlugin=task/none
JobAcctGatherType=jobacct_gather/none
AccountingStorageType=accounting_storage/none
SelectType=select/cons_tres
SelectTypeParameters=CR_Core
SwitchType=switch/none
MpiDefault=none
ReturnToService=2
SlurmdParameters=config_overrides
SchedulerParameters=sched_interval=1,sched_min_interval=0,batch_sched_delay=0
MessageTimeout=30
KillWait=2
StateSaveLocation=$folder/state
SlurmdSpoolDir=$folder/spool
SlurmctldPidFile=$folder/slurmctld.pid
SlurmdPidFile=$folder/slurmd.pid
SlurmctldLogFile=$folder/slurmctld.log
SlurmdLogFile=$folder/slurmd.log
NodeName=$name NodeAddr=127.0.0.1 CPUs=2 State=UNKNOWN
PartitionName=all Nodes=ALL Default=YES MaxTime=INFINITE State=UP
END
}

# slurm_start FOLDER: false after a message when the node does not come up within a minute.
slurm_start() {
    local folder=$1 i
    mkdir -p "$folder"/{munge,state,spool}
    chmod 700 "$folder/munge"
    head -c 128 /dev/urandom >"$folder/munge/key"
    chmod 600 "$folder/munge/key"
    slurm_write_config "$folder"
    export SLURM_CONF=$folder/slurm.conf

    munged --foreground --force --key-file "$folder/munge/key" --socket "$folder/munge/socket" \
        --pid-file "$folder/munge/pid" --log-file "$folder/munge/log" \
        --seed-file "$folder/munge/seed" >/dev/null 2>"$folder/munge/errors" &
    slurm_pids+=($!)
    for ((i = 0; i < 100; i++)); do
        [ -S "$folder/munge/socket" ] && break
        sleep 0.1
    done
    slurmctld -D -i >/dev/null 2>"$folder/slurmctld.errors" &
    slurm_pids+=($!)
    slurmd -D -N "$(hostname -s)" >/dev/null 2>"$folder/slurmd.errors" &
    slurm_pids+=($!)
    for ((i = 0; i < 120; i++)); do
        [ "$(sinfo --noheader --format %T 2>/dev/null)" = idle ] && return 0
        sleep 0.5
    done
    printf 'the node does not come up:\n'
    tail -n 5 "$folder"/slurmctld.log "$folder"/slurmd.log "$folder"/*.errors \
        "$folder"/munge/errors 2>/dev/null
    return 1
}

# Ends what slurm_start started, and nothing else, the last first.
slurm_stop() {
    local i
    for ((i = ${#slurm_pids[@]} - 1; i >= 0; i--)); do
        kill "${slurm_pids[i]}" 2>/dev/null && wait "${slurm_pids[i]}" 2>/dev/null
    done
    slurm_pids=()
}
