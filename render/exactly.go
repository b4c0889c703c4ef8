package render

import (
	"context"
	"math"
	"math/big"

	"leadline/precision"
	"leadline/render/exact"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// exactGuard is how many bits direct iteration has beyond the reference.
const exactGuard = 64

// Field computes the field at a point of the unscaled lattice.
func (p *Plan) Field(x, y float64) kernel.Field { return p.kernel.Sample(x, y) }

// Exact iterates a point of the unscaled lattice directly at full precision.
func (p *Plan) Exact(ctx context.Context, x, y float64) (exact.Result, error) {
	bits := precision.BitsFor(p.pixel) + exactGuard
	s := exact.Set{Power: p.r.Power, Julia: p.r.Kind == frame.Julia}
	if s.Julia {
		s.Parameter = [2]precision.Decimal{p.r.Parameter.Re, p.r.Parameter.Im}
	}
	return exact.Iterate(ctx, s, p.exactPoint(x, y, bits), p.r.Limit, p.r.Bailout, bits)
}

// exactPoint places a point of the lattice in the plane with bits of
// precision: centre + height/rows · turned back offset.
func (p *Plan) exactPoint(x, y float64, bits uint) exact.Point {
	f := func(v float64) *big.Float { return new(big.Float).SetPrec(bits).SetFloat64(v) }
	mul := func(a, b *big.Float) *big.Float { return new(big.Float).SetPrec(bits).Mul(a, b) }
	v := p.view()
	u := f(x)
	u.Sub(u, f(v.MidX))
	w := f(v.MidY)
	w.Sub(w, f(y))
	px := p.r.Height.Float(bits)
	px.Quo(px, f(float64(p.Geometry.TrimH)))
	cos, sin := f(v.Cos), f(v.Sin)
	re := mul(u, cos)
	re.Add(re, mul(w, sin))
	im := mul(w, cos)
	im.Sub(im, mul(u, sin))
	re.Mul(re, px)
	im.Mul(im, px)
	return exact.Point{Re: re.Add(re, p.r.Centre.Re.Float(bits)),
		Im: im.Add(im, p.r.Centre.Im.Float(bits)), Pixel: p.pixel}
}

// Agreement says how a sample stands against direct iteration.
type Agreement uint8

// A sample is equal if its state, count and smooth count are those of direct
// iteration. One so near a step of the count that a shift of 1e-8 of a pixel
// would change it need only have its smooth count within that of a shift of
// 1e-9. Anything else is wrong.
const (
	Equal Agreement = iota
	Within
	Wrong
)

// Shifts, in pixels, that define a robust sample and the accuracy asked.
const (
	robustShift = 1e-8
	askedShift  = 1e-9
)

// Compare judges a field against direct iteration, and says whether the sample
// is robust. A shift of s pixels changes the smooth count by s/(ln p · distance).
func (p *Plan) Compare(f kernel.Field, e exact.Result) (a Agreement, robust bool) {
	if !e.Escaped {
		if f.State != kernel.Escaped {
			return Equal, true
		}
		near := f.N == p.r.Limit && !p.robust(f.N, f.Smooth, f.Distance)
		return pick(near, Within, Wrong), !near
	}
	robust = p.robust(e.N, e.Smooth, e.Distance)
	if f.State != kernel.Escaped {
		near := f.State == kernel.Undecided && e.N == p.r.Limit && !robust
		return pick(near, Within, Wrong), robust
	}
	bound := math.Max(askedShift/float64(p.lnPower()*e.Distance), float64(e.Smooth*0x1p-44))
	switch {
	case math.Abs(f.Smooth-e.Smooth) > bound:
		return Wrong, robust
	case f.N == e.N:
		return Equal, robust
	}
	return pick(!robust, Within, Wrong), robust
}

func pick(b bool, yes, no Agreement) Agreement {
	if b {
		return yes
	}
	return no
}

func (p *Plan) lnPower() float64 { return precision.Log(float64(p.r.Power)) }

// robust reports whether a count stays the same under a shift of 1e-8 px: its
// smooth count lies far enough from both whole numbers beside it.
func (p *Plan) robust(n int, smooth, distance float64) bool {
	margin := math.Min(smooth-float64(n), float64(n+1)-smooth)
	return margin > robustShift/float64(p.lnPower()*distance)
}
