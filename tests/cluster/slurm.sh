# A Slurm of one node, as root and without systemd; sourced by run.sh. Everything lives in the folder $1.
slurm_pids=()

slurm_start() {
  local folder=$1 host
  host=$(hostname -s)
  mkdir -p "$folder"/{munge,state,spool}
  chmod 755 "$folder" "$folder/munge"
  head -c 128 /dev/urandom >"$folder/munge/key"
  chmod 400 "$folder/munge/key"
  munged --force --foreground --key-file="$folder/munge/key" --socket="$folder/munge/socket" \
    --pid-file="$folder/munge/pid" --log-file="$folder/munge/log" --seed-file="$folder/munge/seed" &
  slurm_pids+=($!)
  cat >"$folder/slurm.conf" <<CONF
ClusterName=folkmote
SlurmctldHost=$host(127.0.0.1)
SlurmUser=root
AuthType=auth/munge
AuthInfo=socket=$folder/munge/socket
CredType=cred/munge
SlurmctldPort=$((20000 + RANDOM % 10000))
SlurmdPort=$((30000 + RANDOM % 10000))
CommunicationParameters=NoInAddrAny,NoCtldInAddrAny
StateSaveLocation=$folder/state
SlurmdSpoolDir=$folder/spool
SlurmctldPidFile=$folder/slurmctld.pid
SlurmdPidFile=$folder/slurmd.pid
SlurmctldLogFile=$folder/slurmctld.log
SlurmdLogFile=$folder/slurmd.log
ProctrackType=proctrack/linuxproc
TaskPlugin=task/none
SelectType=select/cons_tres
SelectTypeParameters=CR_Core
MpiDefault=none
ReturnToService=2
KillWait=2
NodeName=$host NodeAddr=127.0.0.1 CPUs=$(nproc) State=UNKNOWN
PartitionName=local Nodes=ALL Default=YES State=UP
CONF
  export SLURM_CONF=$folder/slurm.conf
  local n
  for n in $(seq 50); do [ -S "$folder/munge/socket" ] && break; sleep 0.1; done
  slurmctld -D -c -f "$SLURM_CONF" >/dev/null 2>&1 &
  slurm_pids+=($!)
  slurmd -D -f "$SLURM_CONF" >/dev/null 2>&1 &
  slurm_pids+=($!)
  for n in $(seq 100); do
    [ "$(sinfo -h -o %T 2>/dev/null)" = idle ] && return 0
    sleep 0.2
  done
  tail -n 20 "$folder"/*.log >&2
  return 1
}

# Waits until no job is left; states prove nothing, the files do.
slurm_wait() {
  local n
  for n in $(seq 600); do
    [ -z "$(squeue -h 2>/dev/null)" ] && return 0
    sleep 0.2
  done
  return 1
}

slurm_stop() {
  local k
  for ((k = ${#slurm_pids[@]} - 1; k >= 0; --k)); do
    kill "${slurm_pids[k]}" 2>/dev/null
    wait "${slurm_pids[k]}" 2>/dev/null
  done
  slurm_pids=()
}
