package render

import (
	"leadline/render/frame"
	"leadline/render/sheet"
)

// frozen is f with every default that decides a pixel written out, so that a
// later release with other defaults still prints the same. The baked ink and
// the fitted numbers follow once they are known.
func frozen(f *frame.Frame, r *frame.Resolved) *frame.Frame {
	g := f.Clone()
	g.Format = frame.Format
	g.Set.Power = r.Power
	g.View.Turn = r.Turn
	g.Iteration.Bailout = r.Bailout
	g.Sampling = frame.Sampling{Least: r.Least, Most: r.Most, Tolerance: &r.Tolerance, Filter: r.Filter}
	g.Sheet.PPI = r.Sheet.PPI
	g.Sheet.Space = r.Space.String()
	if g.Sheet.Bleed.IsZero() {
		g.Sheet.Bleed = sheet.MustLength(frame.DefaultBleed)
	}
	freezeInk(&g.Ink, r)
	return g
}

func freezeInk(k *frame.Ink, r *frame.Resolved) {
	if k.Ramp == nil {
		k.Ramp = &frame.Ramp{}
		for _, s := range r.Ramp.Stops {
			k.Ramp.Stops = append(k.Ramp.Stops, frame.Stop(s))
		}
	}
	k.Ramp.Smooth = &r.Ramp.Smooth
	k.Inside = &r.Inside
	d := &k.Drive
	d.Scale = r.Drive.Scale
	if d.Scale == frame.Power {
		d.Exponent = r.Drive.Exponent
	}
	d.Offset = &r.Drive.Offset
	if d.Period == 0 {
		d.Fit = &r.Drive.Fit
	}
}
