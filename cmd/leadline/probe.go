package main

import (
	"context"
	"encoding/json"
	"fmt"
	"image"
	"io"

	"github.com/spf13/cobra"

	"leadline/render"
	"leadline/render/kernel"
)

// probeLine is one line of probe's output. Count and distances are null for a
// sample that does not escape.
type probeLine struct {
	X          int      `json:"x"`
	Y          int      `json:"y"`
	Escaped    bool     `json:"escaped"`
	State      string   `json:"state"`
	N          *int     `json:"n"`
	Smooth     *float64 `json:"smooth"`
	Distance   *float64 `json:"distance"`
	DistanceMM *float64 `json:"distance_mm"`
}

// probeFlags are the flags of probe.
type probeFlags struct {
	at      []string
	grid    string
	exactly bool
}

func probeCommand() *cobra.Command {
	var g probeFlags
	c := &cobra.Command{
		Use: "probe FRAME (--at X,Y … | --grid CxR)", Short: "print the field at single points of the sheet",
		Long: `Prints one line of JSON a point, in the order asked, computed at the centres of
pixels: whether and when it escapes, the smooth count, and the distance to the
set in pixels and in millimetres on paper. --exact iterates directly at full
precision instead, with no reference and no shortcut.`,
		Example: `  leadline probe tide.frame.json --at 100,250 --at 101,250
  leadline probe tide.frame.json --grid 10x10 --exact`,
		Args: oneFile("frame"), ValidArgsFunction: completeFiles,
		RunE: func(cmd *cobra.Command, args []string) error { return runProbe(cmd, args[0], g) },
	}
	f := c.Flags()
	f.SortFlags = false
	f.StringArrayVar(&g.at, "at", nil, "the pixel `X,Y`, counted from the trim's top left; may be repeated")
	f.StringVar(&g.grid, "grid", "", "points spread evenly over the trim, `CxR`: C a row, R rows")
	f.BoolVar(&g.exactly, "exact", false, "iterate directly at full precision")
	completeFlag(c, "at")
	completeFlag(c, "grid")
	return c
}

func runProbe(cmd *cobra.Command, path string, g probeFlags) error {
	if (len(g.at) == 0) == (g.grid == "") {
		return usage(fmt.Errorf("probe takes either --at or --grid"), seeHelp(cmd))
	}
	f, err := loadFrame(path, cmd.ErrOrStderr())
	if err != nil {
		return err
	}
	r, err := f.Resolve()
	if err != nil {
		return err
	}
	points, err := g.points(r.Sheet.Trim(), r.Sheet.Full())
	if err != nil {
		return err
	}
	p, err := render.NewProbe(cmd.Context(), f.Frame, render.Options{})
	if err != nil {
		return err
	}
	return probe(cmd.Context(), cmd.OutOrStdout(), p, points, 25.4/float64(r.Sheet.PPI), g.exactly)
}

// probe writes the lines; mm is a pixel's side.
func probe(ctx context.Context, w io.Writer, p *render.Plan, points []image.Point, mm float64, exactly bool) error {
	out := json.NewEncoder(w)
	for _, pt := range points {
		if ctx.Err() != nil {
			return context.Cause(ctx)
		}
		line := probeLine{X: pt.X, Y: pt.Y}
		x, y := float64(pt.X)+0.5, float64(pt.Y)+0.5
		if exactly {
			e, err := p.Exact(ctx, x, y)
			if err != nil {
				return err
			}
			line.fill(stateOf(e.Escaped), e.N, e.Smooth, e.Distance, mm)
		} else {
			s := p.Field(x, y)
			line.fill(s.State, s.N, s.Smooth, s.Distance, mm)
		}
		if err := out.Encode(line); err != nil {
			return err
		}
	}
	return nil
}

// stateOf is the state after direct iteration, which never proves a point to
// be inside.
func stateOf(escaped bool) kernel.State {
	if escaped {
		return kernel.Escaped
	}
	return kernel.Undecided
}

func (l *probeLine) fill(s kernel.State, n int, smooth, distance, mm float64) {
	l.State, l.Escaped = s.String(), s == kernel.Escaped
	if l.Escaped {
		inMM := distance * mm
		l.N, l.Smooth, l.Distance, l.DistanceMM = &n, &smooth, &distance, &inMM
	}
}
