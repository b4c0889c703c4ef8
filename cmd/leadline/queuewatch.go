package main

import (
	"encoding/json"
	"fmt"
	"time"

	"github.com/spf13/cobra"

	"leadline/jobs"
	"leadline/render"
)

// watchEvery is how often a watched print is looked at.
const watchEvery = time.Second

func queueWatchCommand() *cobra.Command {
	var asJSON bool
	var progress string
	c := &cobra.Command{
		Use: "watch NUMBER", Short: "follow a print to its end",
		Long: `Follows a print until it is done, failed or cancelled. Exit code 0 says that it
is done. Leaving off (Ctrl-C) does nothing to the print.`,
		Args: cobra.ArbitraryArgs, ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, args []string) error {
			ids, err := printNumbers(cmd, args)
			if err != nil {
				return err
			}
			if len(ids) > 1 {
				return usage(fmt.Errorf("watch takes one number, not %d", len(ids)), "")
			}
			m, err := newMeter(cmd.ErrOrStderr(), progress)
			if err != nil {
				return err
			}
			return withQueue(cmd, jobs.Options{}, func(q *jobs.Queue) error {
				p, err := watch(cmd, q, ids[0], m, asJSON)
				m.end()
				if err != nil || asJSON {
					return err
				}
				return showPrint(cmd.OutOrStdout(), p, false)
			})
		},
	}
	c.Flags().BoolVar(&asJSON, "json", false, "a line of JSON whenever something changed")
	progressFlag(c, &progress)
	return c
}

// printError says how a watched print ended, if not well.
type printError struct{ p *jobs.Print }

func (e *printError) Error() string {
	if e.p.Reason == "" {
		return fmt.Sprintf("print %d is %s", e.p.ID, e.p.State)
	}
	return fmt.Sprintf("print %d %s: %s", e.p.ID, e.p.State, e.p.Reason)
}

// Hint is the cure recorded with the print.
func (e *printError) Hint() string {
	if e.p.Hint != "" {
		return e.p.Hint
	}
	return fmt.Sprintf("leadline queue again %d goes on from what is kept", e.p.ID)
}

// phase is where a print is, for the meter.
func phase(p *jobs.Print) render.Progress {
	if p.State == jobs.Planning || p.State == jobs.Assembling {
		return render.Progress{Phase: string(p.State), Total: 1} // no figures come of these two
	}
	return render.Progress{Phase: render.PhasePixels, Done: p.Pixel, Total: p.Pixels}
}

// watch looks at a print until it is done, which it returns then.
func watch(cmd *cobra.Command, q *jobs.Queue, id int64, m *meter, asJSON bool) (*jobs.Print, error) {
	ctx := cmd.Context()
	last := ""
	for {
		p, err := q.Show(ctx, id)
		if err != nil {
			return nil, err
		}
		if now := fmt.Sprint(p.State, p.Paused, p.Done); asJSON && now != last {
			last = now
			if err := json.NewEncoder(cmd.OutOrStdout()).Encode(p); err != nil {
				return nil, err
			}
		}
		m.tell(phase(p))
		switch p.State {
		case jobs.Done:
			return p, nil
		case jobs.Failed, jobs.Cancelled:
			return nil, &printError{p}
		}
		select {
		case <-ctx.Done():
			return nil, ctx.Err()
		case <-time.After(watchEvery):
		}
	}
}
