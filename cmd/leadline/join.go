package main

import (
	"github.com/spf13/cobra"

	"leadline/jobs/parts"
	"leadline/render"
)

// joinFlags are the flags of join.
type joinFlags struct {
	out, progress  string
	workers, audit int
	clean, json    bool
}

func joinCommand() *cobra.Command {
	var g joinFlags
	c := &cobra.Command{
		Use: "join DIR", Short: "make a print of the parts rendered into a folder",
		Long: `Joins the parts that leadline render --part made in the folder DIR: PNG and
sidecar are those that leadline render makes of the same frame and options, to
the last bit, audit included. Exit code 5 says that parts are missing or
damaged, which ones, and how to render just those.`,
		Example: `  leadline join /shared/tide --out prints/tide.png
  leadline join /shared/tide --clean`,
		Args:              oneFile("folder of parts"),
		ValidArgsFunction: cobra.FixedCompletions(nil, cobra.ShellCompDirectiveFilterDirs),
		RunE:              func(cmd *cobra.Command, args []string) error { return runJoin(cmd, args[0], g) },
	}
	f := c.Flags()
	f.SortFlags = false
	f.StringVarP(&g.out, "out", "o", "", "write this `PNG` and its sidecar (by default named as render does, in the current folder)")
	f.IntVar(&g.audit, "audit", 0, "audit `N` random pixels (by default as many as the tasks were told)")
	f.IntVar(&g.workers, "workers", 0, "compute on `N` cores (by default all); no pixel depends on it")
	f.BoolVar(&g.clean, "clean", false, "remove the parts once the print is whole")
	f.BoolVar(&g.json, "json", false, "end with one line of JSON instead of words")
	progressFlag(c, &g.progress)
	completePNG(c, "out")
	completeFlag(c, "audit")
	completeFlag(c, "workers")
	return c
}

func runJoin(cmd *cobra.Command, dir string, g joinFlags) error {
	if err := checkAudit(g.audit); err != nil {
		return err
	}
	if err := checkWorkers(g.workers); err != nil {
		return err
	}
	if cmd.Flags().Changed("out") {
		if err := checkOut(g.out, "the print's own name"); err != nil {
			return err
		}
	}
	if !cmd.Flags().Changed("audit") {
		g.audit = -1
	}
	meter, err := newMeter(cmd.ErrOrStderr(), g.progress)
	if err != nil {
		return err
	}
	r, err := parts.Join(cmd.Context(), dir, parts.JoinOptions{Out: g.out, Audit: g.audit, Clean: g.clean,
		Options: render.Options{Workers: g.workers, Progress: meter.tell}})
	meter.end()
	if err != nil {
		return err
	}
	return report(cmd.OutOrStdout(), r, g.json)
}
