package inking

import (
	"math"
	"slices"
	"strconv"

	"leadline/render/frame"
	"leadline/render/ink"
	"leadline/render/kernel"
	"leadline/tui/engine"
)

// What can be done to a drive. A fit that rendering has frozen is of the drive
// it was made for, so every change of these drops it.

// counts are smooth counts of a picture's escaped samples, a few thousand spread
// over it: enough to lay a ramp by.
func counts(p *engine.Picture) []float64 {
	if p == nil {
		return nil
	}
	const most = 4096
	step := max(1, len(p.Fields)/most) | 1
	var out []float64
	for i := 0; i < len(p.Fields); i += step {
		if p.From[i] != engine.Nowhere && p.Fields[i].State == kernel.Escaped {
			out = append(out, p.Fields[i].Smooth)
		}
	}
	return out
}

// repeat makes a fitted drive one with a period that shows the same picture
// between the fit's ends.
func repeat(d *frame.Drive, f frame.Fitted) {
	span := figures(f.High-f.Low, 4)
	*d = frame.Drive{Scale: d.Scale, Exponent: d.Exponent, Base: new(f.Base), Period: span, Offset: new(figures(-f.Low/span, 4))}
	if f.Low == 0 {
		d.Offset = nil
	}
}

// fitAgain makes a drive with a period a fitted one.
func fitAgain(d *frame.Drive) {
	*d = frame.Drive{Scale: d.Scale, Exponent: d.Exponent}
}

// rescale changes the scale. A period keeps its number of turns over the
// picture: it is stretched as the scaled counts are.
func rescale(k *frame.Ink, r *frame.Resolved, to frame.Scale, p *engine.Picture) {
	d := &k.Drive
	from := r.Drive
	d.Scale, d.Fitted = to, nil
	if to != frame.Power {
		d.Exponent = 0
	}
	if d.Period == 0 {
		return
	}
	c := counts(p)
	if len(c) < 2 {
		return
	}
	old := ink.Scale{Kind: from.Scale, Exponent: from.Exponent, Base: from.Base}
	now := ink.Scale{Kind: to, Exponent: 1, Base: from.Base}
	if to == frame.Power {
		now.Exponent = frame.DefaultExponent
	}
	slices.Sort(c)
	low, high := c[len(c)/100], c[len(c)-1-len(c)/100]
	if a, b := old.Of(high)-old.Of(low), now.Of(high)-now.Of(low); a > 0 && b > 0 {
		d.Period = min(figures(d.Period*b/a, 4), frame.MaxCount)
	}
}

// nextScale is the scale before or after one, round.
func nextScale(s frame.Scale, by int) frame.Scale {
	all := []frame.Scale{frame.Linear, frame.Log, frame.Power}
	i := slices.Index(all, s)
	return all[(i+by+len(all))%len(all)]
}

// figures rounds to n significant figures.
func figures(v float64, n int) float64 {
	f, err := strconv.ParseFloat(strconv.FormatFloat(v, 'e', n-1, 64), 64)
	if err != nil || math.IsNaN(f) {
		return v
	}
	return f
}

// grown is v, times 1 + share for every step up and divided by it for every
// step down, to three figures, and changed by at least one unit of the third.
func grown(v, share float64, by int) float64 {
	if v == 0 {
		return v
	}
	w := figures(v*math.Pow(1+share, float64(by)), 3)
	if w == v {
		unit := math.Pow(10, math.Floor(math.Log10(math.Abs(v)))-2)
		w = figures(v+float64(by)*unit, 3)
	}
	return w
}
