#!/bin/sh
#SBATCH --cpus-per-task=4
#SBATCH --requeue
#SBATCH --open-mode=append
#SBATCH --output=%x-%A-%a.log
#
# One print as a Slurm array. Run it by hand, not through sbatch:
#
#     FRAME=tide.frame.json PARTS=40 DIR=/shared/tide sh slurm.sh
#
# It submits itself as an array of PARTS tasks, and a join that starts when all
# of them have succeeded. DIR must be a folder that every node sees. OPTIONS
# are passed to leadline render, such as OPTIONS="--scale 1/4"; every task gets
# the same. SBATCH_… variables (partition, account, time limit) work as usual.
# To render only some parts again, as leadline join lists them:
#
#     FRAME=tide.frame.json PARTS=40 DIR=/shared/tide ARRAY=3,7-12 sh slurm.sh
set -eu
: "${FRAME:?the frame to print}" "${PARTS:?how many parts}" "${DIR:?the folder of parts}"
OUT=${OUT:-$(basename "${FRAME%.frame.json}").png}
export FRAME PARTS DIR OUT

if [ -z "${SLURM_ARRAY_TASK_ID:-}" ]; then
	array=$(sbatch --parsable --array="${ARRAY:-1-$PARTS}" "$0")
	sbatch --dependency="afterok:${array%%;*}" --kill-on-invalid-dep=yes --cpus-per-task=4 --output=%x-%j.log \
		--job-name=join --wrap='exec leadline join "$DIR" --out "$OUT" --workers "$SLURM_CPUS_PER_TASK"'
	exit
fi

code=0
# shellcheck disable=SC2086 # OPTIONS are words
leadline render "$FRAME" --parts "$DIR" --part "$SLURM_ARRAY_TASK_ID/$PARTS" \
	--workers "${SLURM_CPUS_PER_TASK:-1}" ${OPTIONS:-} || code=$?

# 1 is a failure of disk or network: the task goes back into the queue, three
# times at most. 2, 3 and 4 would come out the same again.
if [ "$code" = 1 ] && [ "${SLURM_RESTART_COUNT:-0}" -lt 3 ]; then
	scontrol requeue "${SLURM_ARRAY_JOB_ID}_$SLURM_ARRAY_TASK_ID"
fi
exit "$code"
