package main

import "github.com/spf13/cobra"

const farmHelp = `On a farm with a scheduler, one print is an array of n tasks and a join.

Each task renders one stripe into a folder that all of them see:
  leadline render tide.frame.json --part 7/40 --parts /shared/tide
and when all are done:
  leadline join /shared/tide --out tide.png

The tasks need nothing but the folder. They run in any order, on any machines
and with any number of cores; n, and all options, must be the same for all. The
first computes what they share, others wait for it. A part that is there, whole,
is not rendered again, so a task can be killed and run again at any moment, and
an array can be submitted again as it is. Nothing broken is ever left under a
final name; hidden files of killed tasks go when the part is next rendered.

Exit codes, for the scheduler:
  0        done, or was done already
  1        failed on the disk or the network: run it again
  2, 3, 4  called wrongly, bad frame, or a folder of another print, of other
           options or of another release: running it again will not help
  5        join: parts are missing or damaged; the message has them in the form
           that sbatch --array takes
  130      interrupted (SIGINT, SIGTERM): run it again

A Slurm script and a Kubernetes manifest are in testdata/farm of the source. A
batch system that counts from 0, as Kubernetes does, needs 1 added to the index.`

// farmTopic is help without a command.
func farmTopic() *cobra.Command {
	return &cobra.Command{Use: "farm", Short: "one print as an array of tasks, under a scheduler", Long: farmHelp}
}
