package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"leadline/render"
	"leadline/render/sheet"
)

// renderFlags are the flags of render.
type renderFlags struct {
	out, crop, scale, progress string
	part, parts                string
	workers, audit             int
	json                       bool
}

// maxAudit bounds the pixels audited; each takes a line's worth of memory.
const maxAudit = 1_000_000

func renderCommand() *cobra.Command {
	var g renderFlags
	c := &cobra.Command{
		Use: "render FRAME", Short: "render a frame to a 16-bit PNG and its sidecar",
		Long: `Renders a frame to a 16-bit PNG, audits random pixels of it by direct iteration
at full precision, and writes the sidecar beside it. FRAME may be a sidecar or
an earlier print too: their frame is printed again. PNG and sidecar appear under
their names only when they are whole; an interrupted render leaves neither.

With --part and --parts only one stripe of the print is rendered, into a folder
that the tasks of a batch system share; leadline join makes the print of it. See
leadline help farm.`,
		Example: `  leadline render tide.frame.json --out prints/tide.png
  leadline render tide.sidecar.json --crop 1200,800,600,400
  leadline render tide.frame.json --part 7/40 --parts /shared/tide`,
		Args: oneFile("frame"), ValidArgsFunction: completeFiles,
		RunE: func(cmd *cobra.Command, args []string) error { return runRender(cmd, args[0], g) },
	}
	f := c.Flags()
	f.SortFlags = false
	f.StringVarP(&g.out, "out", "o", "", "write this `PNG` and its sidecar (by default named after the frame, in the current folder)")
	f.StringVar(&g.crop, "crop", "", "only the part `X,Y,W,H`, in pixels from the trim's top left")
	f.StringVar(&g.scale, "scale", "1", "at `1/k` of the size, k a whole number")
	f.IntVar(&g.audit, "audit", 32, "audit `N` random pixels")
	f.IntVar(&g.workers, "workers", 0, "compute on `N` cores (by default all); no pixel depends on it")
	f.StringVar(&g.part, "part", "", "only stripe `i/n` of the print, i from 1 to n; needs --parts")
	f.StringVar(&g.parts, "parts", "", "the folder `DIR` that holds the stripes")
	f.BoolVar(&g.json, "json", false, "end with one line of JSON instead of words")
	progressFlag(c, &g.progress)
	completePNG(c, "out")
	completeFolder(c, "parts")
	completeFlag(c, "scale", "1/2", "1/4", "1/8", "1/16")
	for _, flag := range []string{"crop", "audit", "workers", "part"} {
		completeFlag(c, flag)
	}
	return c
}

func checkAudit(n int) error {
	if n < 0 || n > maxAudit {
		return usage(fmt.Errorf("--audit %d is out of range", n), fmt.Sprintf("a number from 0 to %d", maxAudit))
	}
	return nil
}

func runRender(cmd *cobra.Command, path string, g renderFlags) error {
	if err := checkAudit(g.audit); err != nil {
		return err
	}
	if err := checkWorkers(g.workers); err != nil {
		return err
	}
	k, err := sheet.ParseScale(g.scale)
	if err != nil {
		return usage(fmt.Errorf("--scale: %w", err), "")
	}
	which, err := g.which(cmd)
	if err != nil {
		return err
	}
	meter, err := newMeter(cmd.ErrOrStderr(), g.progress)
	if err != nil {
		return err
	}
	f, err := loadFrame(path, cmd.ErrOrStderr())
	if err != nil {
		return err
	}
	o := render.PrintOptions{Out: g.out, Scale: k, Audit: g.audit,
		Options: render.Options{Workers: g.workers, Progress: meter.tell}}
	if err := g.place(cmd, path, f, &o); err != nil {
		return err
	}
	if g.part != "" {
		return runPart(cmd, f, o, which, g, meter)
	}
	r, err := render.Print(cmd.Context(), f.Frame, o)
	meter.end()
	if err != nil {
		return untouched(cmd.Context(), err, o.Out)
	}
	return report(cmd.OutOrStdout(), r, g.json)
}

// place reads --crop against the frame's own sheet, and --out.
func (g renderFlags) place(cmd *cobra.Command, path string, f loaded, o *render.PrintOptions) error {
	if g.crop != "" {
		r, err := f.Resolve()
		if err != nil {
			return err
		}
		rect, err := r.Sheet.Scaled(o.Scale).ParseCrop(g.crop)
		if err != nil {
			return fmt.Errorf("--%w", err)
		}
		o.Crop = &rect
	}
	name := defaultName(path, f, *o)
	if !cmd.Flags().Changed("out") {
		o.Out = name
		return nil
	}
	return checkOut(o.Out, name)
}
