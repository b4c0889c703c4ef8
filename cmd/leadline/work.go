package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"leadline/jobs"
)

// workFlags are the flags of work.
type workFlags struct {
	slots, nice, iterations int
	pixels, memory          int64
	drain                   bool
	name, spool             string
}

func workCommand() *cobra.Command {
	var g workFlags
	c := &cobra.Command{
		Use: "work", Short: "make the prints of a queue",
		Long: `Works on a queue's prints until it is interrupted, or with --drain until nothing
is left to do. What is in hand then goes back to the queue; a worker that is
killed loses nothing but the tiles in its hands, which others take over within
fifteen seconds. --most-… refuse prints that claim more than this machine's
owner allows.`,
		Example: `  leadline work
  leadline work --drain --slots 2 --nice 10
  leadline work --queue postgres://farm@db.example/leadline`,
		Args: noArguments, ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, _ []string) error { return runWork(cmd, g) },
	}
	f := c.Flags()
	f.SortFlags = false
	f.String("queue", "", "the queue's `ADDRESS`: a file, or postgres://… (default $"+queueVariable+", else the desk's own)")
	f.BoolVar(&g.drain, "drain", false, "stop when nothing is left to do")
	f.IntVar(&g.slots, "slots", 0, "work on `N` tasks at a time (by default one a core)")
	f.IntVar(&g.nice, "nice", 0, "leave the cores to others by `N`, 0 to 19")
	f.StringVar(&g.name, "name", "", "be called `NAME` in lists (by default host and process)")
	f.StringVar(&g.spool, "spool", "", "keep finished tiles in the folder `DIR`, the same for all workers of a farm")
	f.Int64Var(&g.pixels, "most-pixels", 0, "refuse prints of more than `N` pixels")
	f.IntVar(&g.iterations, "most-iterations", 0, "refuse frames with a limit above `N`")
	f.Int64Var(&g.memory, "most-memory", 0, "refuse prints estimated to take more than `N` bytes")
	completeFolder(c, "spool")
	return c
}

func (g workFlags) check() error {
	switch {
	case g.slots < 0 || g.slots > maxWorkers:
		return usage(fmt.Errorf("--slots %d is out of range", g.slots), fmt.Sprintf("a number from 1 to %d", maxWorkers))
	case g.nice < 0 || g.nice > 19:
		return usage(fmt.Errorf("--nice %d is out of range", g.nice), "a number from 0 to 19")
	case g.pixels < 0 || g.iterations < 0 || g.memory < 0:
		return usage(errors.New("a limit is below 0"), "0 is no limit")
	}
	return nil
}

func runWork(cmd *cobra.Command, g workFlags) error {
	if err := g.check(); err != nil {
		return err
	}
	if g.nice > 0 {
		if err := beNice(g.nice); err != nil {
			return fmt.Errorf("--nice: %w", err)
		}
	}
	return withQueue(cmd, jobs.Options{Spool: g.spool}, func(q *jobs.Queue) error {
		err := q.Work(cmd.Context(), jobs.WorkOptions{Slots: g.slots, Drain: g.drain, Name: g.name,
			Say:    func(s string) { fmt.Fprintln(cmd.ErrOrStderr(), "leadline:", s) },
			Limits: jobs.Limits{Pixels: g.pixels, Iterations: g.iterations, Memory: g.memory}})
		if interrupted(cmd.Context(), err) {
			return fmt.Errorf("%w; what was in hand is back in the queue", errInterrupted)
		}
		if err == nil && g.drain {
			fmt.Fprintln(cmd.ErrOrStderr(), "leadline: nothing is left to do")
		}
		return err
	})
}
