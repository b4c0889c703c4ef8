package main

import (
	"encoding/json"
	"fmt"
	"io"
	"text/tabwriter"
	"time"

	"github.com/spf13/cobra"

	"leadline/jobs"
	"leadline/render/words"
)

func queueListCommand() *cobra.Command {
	var asJSON bool
	c := &cobra.Command{
		Use: "list", Short: "all prints and how they stand",
		Long: `Lists the prints in the order of work: by priority, then by age.`,
		Args: noArguments, ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return withQueue(cmd, jobs.Options{}, func(q *jobs.Queue) error {
				all, err := q.List(cmd.Context())
				if err != nil {
					return err
				}
				if asJSON {
					return eachJSON(cmd.OutOrStdout(), all)
				}
				return printTable(cmd.OutOrStdout(), all)
			})
		},
	}
	c.Flags().BoolVar(&asJSON, "json", false, "a line of JSON a print")
	return c
}

func eachJSON[T any](w io.Writer, all []T) error {
	e := json.NewEncoder(w)
	for i := range all {
		if err := e.Encode(all[i]); err != nil {
			return err
		}
	}
	return nil
}

// printTable lists prints in columns.
func printTable(w io.Writer, all []jobs.Print) error {
	if len(all) == 0 {
		_, err := fmt.Fprintln(w, "the queue is empty")
		return err
	}
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintln(t, "no\tprio\tstate\ttiles\tleft\tprint")
	for i := range all {
		p := &all[i]
		fmt.Fprintf(t, "%d\t%d\t%s\t%d/%d\t%s\t%s\n", p.ID, p.Priority, p.Word(), p.Done, p.Tiles, leftWords(p), p.Out)
	}
	return t.Flush()
}

// leftWords is the time to go with its range.
func leftWords(p *jobs.Print) string {
	left, between := p.LeftWords()
	switch {
	case left == "":
		return "-"
	case between == "":
		return left
	}
	return left + ", " + between
}

func queueShowCommand() *cobra.Command {
	var asJSON, workers bool
	c := &cobra.Command{
		Use: "show NUMBER… | show --workers", Short: "one print, or who works",
		Long:    `Shows everything about prints, or the workers that are alive.`,
		Example: "  leadline queue show 3\n  leadline queue show --workers",
		Args:    cobra.ArbitraryArgs, ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, args []string) error {
			if workers {
				return showWorkers(cmd, asJSON)
			}
			ids, err := printNumbers(cmd, args)
			if err != nil {
				return err
			}
			return withQueue(cmd, jobs.Options{}, func(q *jobs.Queue) error {
				for _, id := range ids {
					p, err := q.Show(cmd.Context(), id)
					if err != nil {
						return err
					}
					if err := showPrint(cmd.OutOrStdout(), p, asJSON); err != nil {
						return err
					}
				}
				return nil
			})
		},
	}
	c.Flags().BoolVar(&workers, "workers", false, "the workers that are alive")
	c.Flags().BoolVar(&asJSON, "json", false, "a line of JSON each")
	return c
}

func showPrint(w io.Writer, p *jobs.Print, asJSON bool) error {
	if asJSON {
		return json.NewEncoder(w).Encode(p)
	}
	fmt.Fprintf(w, "print %d  %s\n", p.ID, p.Title)
	row := func(name, format string, a ...any) { fmt.Fprintf(w, "  %-9s %s\n", name, fmt.Sprintf(format, a...)) }
	row("state", "%s", p.Word())
	if p.Reason != "" {
		row("reason", "%s", p.Reason)
	}
	if p.Hint != "" {
		row("hint", "%s", p.Hint)
	}
	row("out", "%s", p.Out)
	row("size", "%d x %d px at 1/%d, priority %d", p.Width, p.Height, p.Scale, p.Priority)
	row("tiles", "%d of %d; %d tasks begun, with plan and assembly, %d taken over from silent workers", p.Done, p.Tiles, p.Attempts, p.Rescued)
	if p.Rate > 0 {
		row("rate", "%s/s, %s left", words.Amount(p.Rate, "px"), leftWords(p))
	}
	if p.Ended.IsZero() {
		row("workers", "%d that could work on it (release %s, numerics %d)", p.Progress.Workers, p.Release, p.Numerics)
	}
	row("added", "%s", p.Added.Local().Format(time.DateTime))
	if !p.Ended.IsZero() {
		row("ended", "%s", p.Ended.Local().Format(time.DateTime))
	}
	if p.File != "" {
		row("file", "%s, %s", p.File, words.Size(p.Bytes))
		row("sidecar", "%s", p.Sidecar)
		row("pixels", "sha256 %s", p.SHA256)
	}
	return nil
}

func showWorkers(cmd *cobra.Command, asJSON bool) error {
	return withQueue(cmd, jobs.Options{}, func(q *jobs.Queue) error {
		all, err := q.Workers(cmd.Context())
		if err != nil {
			return err
		}
		if asJSON {
			return eachJSON(cmd.OutOrStdout(), all)
		}
		if len(all) == 0 {
			_, err := fmt.Fprintln(cmd.OutOrStdout(), "nobody works on this queue; leadline work begins to")
			return err
		}
		t := tabwriter.NewWriter(cmd.OutOrStdout(), 0, 0, 2, ' ', 0)
		fmt.Fprintln(t, "worker\ttasks\tslots\trelease\tseen")
		for _, w := range all {
			fmt.Fprintf(t, "%s\t%d\t%d\t%s\t%s ago\n", w.Name, w.Running, w.Slots, w.Release, words.Clock(max(0, time.Since(w.Seen).Seconds())))
		}
		return t.Flush()
	})
}
