package main

import (
	"encoding/json"
	"fmt"
	"path/filepath"

	"github.com/spf13/cobra"

	"leadline/jobs"
	"leadline/render"
	"leadline/render/sheet"
)

// addFlags are the flags of queue add.
type addFlags struct {
	renderFlags
	priority int
	replace  bool
}

func queueAddCommand() *cobra.Command {
	var g addFlags
	c := &cobra.Command{
		Use: "add FRAME…", Short: "queue frames",
		Long: `Queues each frame as a print. Of several frames --out is the folder. The number
printed for each is what the other actions take.`,
		Example: `  leadline queue add tide.frame.json --out prints/tide.png --priority 1
  leadline queue add *.frame.json --out prints`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) == 0 {
				return usage(fmt.Errorf("add takes one frame or more"), seeHelp(cmd))
			}
			return nil
		},
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return []string{"json", "png"}, cobra.ShellCompDirectiveFilterFileExt
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runAdd(cmd, args, g) },
	}
	f := c.Flags()
	f.SortFlags = false
	f.StringVarP(&g.out, "out", "o", "", "write this `PNG`; of several frames the folder (by default named after the frame, here)")
	f.IntVar(&g.priority, "priority", jobs.DefaultPriority, "`1` first … 4 last")
	f.BoolVar(&g.replace, "replace", false, "write over what is there")
	f.StringVar(&g.crop, "crop", "", "only the part `X,Y,W,H`, in pixels from the trim's top left")
	f.StringVar(&g.scale, "scale", "1", "at `1/k` of the size, k a whole number")
	f.IntVar(&g.audit, "audit", 32, "audit `N` random pixels")
	f.BoolVar(&g.json, "json", false, "a line of JSON a print")
	completePNG(c, "out")
	completeFlag(c, "priority", "1", "2", "3", "4")
	return c
}

func runAdd(cmd *cobra.Command, paths []string, g addFlags) error {
	if err := checkAudit(g.audit); err != nil {
		return err
	}
	k, err := sheet.ParseScale(g.scale)
	if err != nil {
		return usage(fmt.Errorf("--scale: %w", err), "")
	}
	// Every frame is read before the first is queued.
	frames := make([]loaded, len(paths))
	orders := make([]jobs.AddOptions, len(paths))
	for i, path := range paths {
		if frames[i], err = loadFrame(path, cmd.ErrOrStderr()); err != nil {
			return err
		}
		if orders[i], err = g.order(cmd, path, frames[i], k, len(paths) > 1); err != nil {
			return err
		}
	}
	return withQueue(cmd, jobs.Options{}, func(q *jobs.Queue) error {
		for i := range frames {
			id, err := q.Add(cmd.Context(), frames[i].Frame, orders[i])
			if err != nil {
				return fmt.Errorf("%s: %w", paths[i], err)
			}
			if err := sayAdded(cmd, id, orders[i].Out, g.json); err != nil {
				return err
			}
		}
		return nil
	})
}

// order is what is asked of the queue for one frame.
func (g addFlags) order(cmd *cobra.Command, path string, f loaded, k int, several bool) (jobs.AddOptions, error) {
	o := render.PrintOptions{Out: g.out, Scale: k, Audit: g.audit}
	folder := ""
	if several && g.out != "" {
		folder = g.out
		o.Out = filepath.Join(folder, defaultName(path, f, o))
	}
	r := g.renderFlags
	r.out = o.Out
	if err := r.place(cmd, path, f, &o); err != nil {
		return jobs.AddOptions{}, err
	}
	out, err := filepath.Abs(o.Out)
	return jobs.AddOptions{Out: out, Priority: g.priority, Scale: o.Scale, Crop: o.Crop, Audit: o.Audit, Replace: g.replace}, err
}

func sayAdded(cmd *cobra.Command, id int64, out string, asJSON bool) error {
	if asJSON {
		return json.NewEncoder(cmd.OutOrStdout()).Encode(struct {
			ID  int64  `json:"id"`
			Out string `json:"out"`
		}{id, out})
	}
	_, err := fmt.Fprintf(cmd.OutOrStdout(), "%d  %s\n", id, out)
	return err
}
