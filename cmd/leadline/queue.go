package main

import (
	"errors"
	"fmt"
	"os"
	"strconv"

	"github.com/spf13/cobra"

	"leadline/jobs"
)

// queueVariable names the queue where --queue does not.
const queueVariable = "LEADLINE_QUEUE"

func queueCommand() *cobra.Command {
	c := &cobra.Command{
		Use: "queue ACTION", Short: "queue prints, and see how they stand",
		Long: `Keeps prints to be made by leadline work, here or elsewhere. The desk's own
queue needs no set-up; any number of processes use it at once. A farm shares one
in a PostgreSQL database, named by --queue postgres://… or LEADLINE_QUEUE.

Actions (leadline help queue ACTION says more)
  add      queue frames
  list     all prints and how they stand
  show     one print, or --workers for who works
  watch    follow a print to its end
  pause    hold prints; finished tiles are kept
  resume   go on with paused prints
  cancel   give prints up; finished tiles are kept
  again    go on with failed or cancelled prints
  remove   take prints that are over off the list
  move     give prints another priority
  migrate  make or update a farm database's tables`,
		Example: `  leadline queue add tide.frame.json reef.frame.json
  leadline work --drain
  leadline queue list`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) == 0 {
				return usage(errors.New("queue takes an action"), seeHelp(cmd))
			}
			return usage(fmt.Errorf("queue knows no action %q", args[0]), seeHelp(cmd))
		},
		RunE: func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
	}
	c.PersistentFlags().String("queue", "", "the queue's `ADDRESS`: a file, or postgres://… (default $"+queueVariable+", else the desk's own)")
	c.AddCommand(queueAddCommand(), queueListCommand(), queueShowCommand(), queueWatchCommand(), queueMigrateCommand())
	c.AddCommand(changeCommands()...)
	return c
}

// address is where the queue is: --queue, the environment's, or the desk's own.
func address(cmd *cobra.Command) string {
	if f := cmd.Flags().Lookup("queue"); f != nil && f.Changed {
		return f.Value.String()
	}
	return os.Getenv(queueVariable)
}

// withQueue opens the queue for the time of f.
func withQueue(cmd *cobra.Command, o jobs.Options, f func(*jobs.Queue) error) error {
	q, err := jobs.Open(cmd.Context(), address(cmd), o)
	if err != nil {
		return err
	}
	defer q.Close()
	return f(q)
}

// printNumbers reads the arguments of a command that takes prints' numbers.
func printNumbers(cmd *cobra.Command, args []string) ([]int64, error) {
	if len(args) == 0 {
		return nil, usage(fmt.Errorf("%s takes the number of a print", cmd.Name()), "leadline queue list shows the numbers")
	}
	ids := make([]int64, len(args))
	for i, a := range args {
		n, err := strconv.ParseInt(a, 10, 64)
		if err != nil || n < 1 {
			return nil, usage(fmt.Errorf("%q is not the number of a print", a), "leadline queue list shows the numbers")
		}
		ids[i] = n
	}
	return ids, nil
}

func queueMigrateCommand() *cobra.Command {
	return &cobra.Command{
		Use: "migrate", Short: "make or update a farm database's tables",
		Long: `Makes the queue's tables in a PostgreSQL database, or brings them up to this
release. It may be run twice at once. The desk's own queue does this by itself.`,
		Example: `  leadline queue migrate --queue postgres://farm@db.example/leadline`,
		Args:    noArguments, ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, _ []string) error {
			if err := jobs.Migrate(cmd.Context(), address(cmd)); err != nil {
				return err
			}
			_, err := fmt.Fprintln(cmd.OutOrStdout(), "the queue's tables are there and up to date")
			return err
		},
	}
}

func noArguments(cmd *cobra.Command, args []string) error {
	if len(args) > 0 {
		return usage(fmt.Errorf("%s takes no arguments", cmd.Name()), seeHelp(cmd))
	}
	return nil
}
