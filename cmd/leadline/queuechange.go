package main

import (
	"context"
	"fmt"

	"github.com/spf13/cobra"

	"leadline/jobs"
)

// change is an action on prints by their numbers.
type change struct {
	name, short, long, done string
	do                      func(*jobs.Queue, context.Context, int64) error
}

var changes = []change{
	{"pause", "hold prints; finished tiles are kept",
		"Holds prints. Tiles being rendered are dropped within a second and begun again\nafter leadline queue resume; finished ones are kept.", "paused", (*jobs.Queue).Pause},
	{"resume", "go on with paused prints",
		"Goes on with paused prints.", "resumed", (*jobs.Queue).Resume},
	{"cancel", "give prints up; finished tiles are kept",
		"Gives prints up. Finished tiles are kept, so that leadline queue again can go on.", "cancelled", (*jobs.Queue).Cancel},
	{"again", "go on with failed or cancelled prints",
		"Goes on with failed or cancelled prints from the tiles that are kept.", "queued again", (*jobs.Queue).Again},
	{"remove", "take prints that are over off the list",
		"Takes done, failed and cancelled prints off the list, with the tiles kept for\nleadline queue again. Delivered files stay.", "removed", (*jobs.Queue).Remove},
}

// changeCommands are the actions on prints by their numbers.
func changeCommands() []*cobra.Command {
	var all []*cobra.Command
	for _, g := range changes {
		all = append(all, &cobra.Command{
			Use: g.name + " NUMBER…", Short: g.short, Long: g.long,
			Args: cobra.ArbitraryArgs, ValidArgsFunction: cobra.NoFileCompletions,
			RunE: func(cmd *cobra.Command, args []string) error { return runChange(cmd, args, g.done, g.do) },
		})
	}
	return append(all, moveCommand())
}

func moveCommand() *cobra.Command {
	priority := 0
	c := &cobra.Command{
		Use: "move NUMBER… --priority P", Short: "give prints another priority",
		Long: `Gives prints another priority, 1 first … 4 last; prints of one priority share the
workers.`,
		Example: "  leadline queue move 3 --priority 1",
		Args:    cobra.ArbitraryArgs, ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, args []string) error {
			if !cmd.Flags().Changed("priority") {
				return usage(fmt.Errorf("move takes --priority"), "1 (first) to 4 (last)")
			}
			return runChange(cmd, args, fmt.Sprintf("moved to priority %d", priority),
				func(q *jobs.Queue, ctx context.Context, id int64) error { return q.Move(ctx, id, priority) })
		},
	}
	c.Flags().IntVar(&priority, "priority", 0, "`1` first … 4 last")
	completeFlag(c, "priority", "1", "2", "3", "4")
	return c
}

func runChange(cmd *cobra.Command, args []string, done string, do func(*jobs.Queue, context.Context, int64) error) error {
	ids, err := printNumbers(cmd, args)
	if err != nil {
		return err
	}
	return withQueue(cmd, jobs.Options{}, func(q *jobs.Queue) error {
		for _, id := range ids {
			if err := do(q, cmd.Context(), id); err != nil {
				return err
			}
			if _, err := fmt.Fprintf(cmd.OutOrStdout(), "print %d %s\n", id, done); err != nil {
				return err
			}
		}
		return nil
	})
}
