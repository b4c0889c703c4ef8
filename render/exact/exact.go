// Package exact iterates single samples at full precision with math/big and
// nothing else: no reference, no perturbation, no leaps. It is the truth that
// an audit and `probe --exact` compare with, so it shares no code with the
// regimes it judges beyond the numbers themselves.
package exact

import (
	"context"
	"math"
	"math/big"

	"leadline/precision"
)

// Set says what is iterated: z → z^Power + c.
type Set struct {
	Power     int
	Julia     bool
	Parameter [2]precision.Decimal // Julia sets: c
}

// Point is a sample to be iterated.
type Point struct {
	Re, Im *big.Float    // position in the plane, with all its bits
	Pixel  precision.Ext // pixel spacing, for the distance
}

// Result is what direct iteration yields. Escaped false means that the limit
// was reached.
type Result struct {
	Escaped  bool
	N        int
	Smooth   float64
	Distance float64 // pixels
}

// Iterate follows p until |z_n| > bailout or n reaches limit, at bits of
// precision. It returns the context's error as soon as that is done.
func Iterate(ctx context.Context, s Set, p Point, limit int, bailout float64, bits uint) (Result, error) {
	w := newWalk(s, p, bits)
	bail2 := bailout * bailout
	for {
		re, _ := w.re.Float64()
		im, _ := w.im.Float64()
		if z2 := math.FMA(re, re, float64(im*im)); z2 > bail2 {
			return w.result(s, p, z2, bailout), nil
		}
		if w.n >= limit {
			return Result{}, nil
		}
		if w.n&255 == 0 && ctx.Err() != nil {
			return Result{}, ctx.Err()
		}
		w.step(s.Power, re, im)
	}
}

// walk is one orbit under way.
type walk struct {
	re, im, cr, ci *big.Float
	x, y, t        *big.Float // scratch
	g              precision.ExtComplex
	add            precision.ExtComplex
	n              int
}

func newWalk(s Set, p Point, bits uint) *walk {
	f := func() *big.Float { return new(big.Float).SetPrec(bits) }
	w := &walk{re: f(), im: f(), cr: f(), ci: f(), x: f(), y: f(), t: f()}
	px := precision.NewExtComplex(p.Pixel.M, 0, p.Pixel.E)
	w.re.Set(p.Re)
	w.im.Set(p.Im)
	w.g = px
	if s.Julia {
		w.cr.Set(s.Parameter[0].Float(bits))
		w.ci.Set(s.Parameter[1].Float(bits))
		return w
	}
	w.cr.Set(p.Re)
	w.ci.Set(p.Im)
	w.add, w.n = px, 1
	return w
}

// step sets z = z^p + c and carries the derivative along in 53 bits, whose
// factors are taken from the rounded z.
func (w *walk) step(power int, re, im float64) {
	z := precision.NewExtComplex(re, im, 0)
	if re == 0 || im == 0 || math.Abs(re) < 0x1p-900 || math.Abs(im) < 0x1p-900 {
		z = precision.ExtComplexOf(precision.ExtOfBig(w.re), precision.ExtOfBig(w.im))
	}
	slope := precision.NewExtComplex(float64(power), 0, 0)
	for range power - 1 {
		slope = slope.Mul(z)
	}
	w.g = slope.Mul(w.g).Add(w.add)
	r0, i0 := w.re, w.im
	if power == 2 {
		w.square(r0, i0)
	} else {
		w.power(power)
	}
	w.re.Add(w.re, w.cr)
	w.im.Add(w.im, w.ci)
	w.n++
}

// square sets z = z², (x+y)(x-y) + 2xy i.
func (w *walk) square(re, im *big.Float) {
	w.x.Add(re, im)
	w.y.Sub(re, im)
	w.t.Mul(re, im)
	w.re.Mul(w.x, w.y)
	w.im.Add(w.t, w.t)
}

// power sets z = z^p by repeated products.
func (w *walk) power(p int) {
	br := new(big.Float).Set(w.re)
	bi := new(big.Float).Set(w.im)
	for range p - 1 {
		w.x.Mul(w.re, bi)
		w.y.Mul(w.im, br)
		w.t.Mul(w.im, bi)
		w.re.Mul(w.re, br)
		w.re.Sub(w.re, w.t)
		w.im.Add(w.x, w.y)
	}
}

// result applies the conventions: smooth count n + 1 - log_p(ln|z|/ln bailout)
// and distance |z| ln|z| / |dz|.
func (w *walk) result(s Set, p Point, z2, bailout float64) Result {
	lnz := math.Log(z2) / 2          //leadline:exact a judge of pixels, not a maker of them
	ratio := lnz / math.Log(bailout) //leadline:exact as above
	r := Result{Escaped: true, N: w.n}
	r.Smooth = float64(w.n+1) - math.Log(ratio)/math.Log(float64(s.Power)) //leadline:exact as above
	d := precision.ExtOf(float64(math.Sqrt(z2) * lnz)).Quo(w.g.Abs())
	r.Distance = d.Float64()
	return r
}
