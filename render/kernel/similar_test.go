package kernel

import (
	"fmt"
	"math"
	"testing"

	"leadline/precision"
)

// Tan Lei, Similarity between the Mandelbrot set and Julia sets (1990): where
// the critical orbit of a parameter falls onto a repelling cycle of multiplier
// ρ, the Mandelbrot set around it repeats, in the limit, when multiplied by ρ.
// One turn of the cycle takes as many iterations as it has points, and so the
// counts shift by its period: μ(c + ρδ) = μ(c + δ) - period.
//
// The theorem leaves an error of the order of |δ|, far below rounding here.
//
//	c = i:  i → i-1 → -i → i-1: period 2, ρ = 2(i-1)·2(-i) = 4(1+i)
//	c = -2: -2 → 2 → 2:         period 1, ρ = 2·2 = 4

// similarity is one such point and its multiplier.
type similarity struct {
	re, im   string
	rhoR     float64
	rhoI     float64
	period   int
	cos, sin float64 // ρ/|ρ|
	modulus  string  // |ρ|, to more digits than doubles hold
}

var (
	atI   = similarity{"0", "1", 4, 4, 2, math.Sqrt2 / 2, math.Sqrt2 / 2, "5.65685424949238019520675489683879"}
	atTip = similarity{"-2", "0", 4, 0, 1, 1, 0, "4"}
)

// agreement is how far two smooth counts of similar points may part: every
// iteration rounds δ by a few units of 2^-53 and so moves the point by that
// share of its distance r from the centre, in units of the estimate d to the
// set (both in pixels).
func agreement(n int, r, d float64) float64 {
	return (float64(n)*0x1p-51 + 0x1p-46) * (1 + r/(math.Ln2*d))
}

// TestSimilarity compares points with their images under ρ, once by their
// coordinates in one view and once in a view that is larger by |ρ| and turned
// by arg ρ.
func TestSimilarity(t *testing.T) {
	for _, m := range []similarity{atI, atTip} {
		for _, depth := range []int{30, 300, 1000} {
			h := fmt.Sprintf("1e-%d", depth)
			s := (&scene{re: m.re, im: m.im, height: h, width: 400, rows: 300, limit: 30000}).build(t)
			b := (&scene{re: m.re, im: m.im, height: m.modulus + h[1:], width: 400, rows: 300, limit: 30000}).build(t)
			// A view turned counter-clockwise shows a plane point at
			// plane offset = paper offset turned back.
			v := b.kernel.cfg.View
			v.Cos, v.Sin = m.cos, -m.sin
			b.kernel.cfg.View = v
			holdSimilar(t, m, s, b)
		}
	}
}

func holdSimilar(t *testing.T, m similarity, s, turned *scene) {
	t.Helper()
	points := 60
	if testing.Short() {
		points = 15
	}
	var worst float64
	escaped := 0
	for _, p := range s.spread(points, 4) {
		// Half of all points are close to the centre.
		u, w := (p[0]-200)/6, (150-p[1])/6
		a := s.kernel.Sample(200+u, 150-w)
		b := s.kernel.Sample(200+m.rhoR*u-m.rhoI*w, 150-(m.rhoR*w+m.rhoI*u))
		c := turned.kernel.Sample(200+u, 150-w)
		if a.State != Escaped || b.State != Escaped || c.State != Escaped {
			if a.State == Escaped || b.State == Escaped {
				t.Errorf("%s %s (%g, %g): %v and %v", m.re, s.height, u, w, a.State, b.State)
			}
			continue
		}
		escaped++
		bound := agreement(a.N, math.Hypot(u, w), a.Distance)
		for i, f := range []Field{b, c} {
			off := math.Abs(a.Smooth - f.Smooth - float64(m.period))
			worst = math.Max(worst, off/bound)
			if off > bound {
				t.Errorf("%s + %si, %s (%g, %g): μ = %.12f, %.12f at the image %d", m.re, m.im, s.height, u, w, a.Smooth, f.Smooth, i)
			}
			whole := math.Abs(a.Smooth-math.Round(a.Smooth)) < 1e-8
			if !whole && a.N-f.N != m.period {
				t.Errorf("%s + %si, %s (%g, %g): n = %d, %d at the image %d", m.re, m.im, s.height, u, w, a.N, f.N, i)
			}
		}
	}
	if escaped < points*9/10 {
		t.Errorf("%s, %s: %d of %d samples escaped", m.re, s.height, escaped, points)
	}
	t.Logf("%s + %si, %s: %d points, within %.2f of the bound", m.re, m.im, s.height, escaped, worst)
}

// TestTip holds the deepest views against a closed form for the Mandelbrot set
// itself. At c = -2 + δ the critical orbit is, to first order in δ,
// z_n = 2 - (8/3)·4^(n-2)·δ (dz/dc runs 1, -3, -11, …, 4d+1), and near 2 the
// map z² - 2 doubles φ where z = 2cosh φ. So with φ = √(-8δ/3),
//
//	z_n = 2 cosh(2^(n-2)·φ),  μ = 3 - log2(Re φ/ln B),  distance = 2|δ| Re φ/|φ|
//
// the first up to the share 1/|z_n|² of ln|z_n| (B = 10⁶).
func TestTip(t *testing.T) {
	samples := 60
	if testing.Short() {
		samples = 15
	}
	for _, h := range []string{"1e-30", "1e-300", "1e-1000", "1e-3000"} {
		s := (&scene{re: "-2", height: h, limit: 30000, bailout: 1e6}).build(t)
		lnB := precision.ExtOf(math.Log(s.bailout))
		var worst float64
		for _, p := range s.spread(samples, 5) {
			u, w := p[0]-24, 16-p[1] // δ in pixels
			delta := newPoint(-u*8/3, -w*8/3, 64)
			phi := delta.sqrt()
			re, _ := phi.re.Float64()
			abs, _ := phi.abs().Float64()
			scale := s.pixel.Sqrt()
			want := 3 - scale.Mul(precision.ExtOf(re)).Quo(lnB).Log2()
			d := 2 * math.Hypot(u, w) * re / abs
			f := s.kernel.Sample(p[0], p[1])
			if f.State != Escaped {
				t.Errorf("%s %v: %v", h, p, f.State)
				continue
			}
			bound := agreement(f.N, math.Hypot(u, w), d) + 2e-13
			worst = math.Max(worst, math.Abs(f.Smooth-want)/bound)
			if math.Abs(f.Smooth-want) > bound {
				t.Errorf("%s %v: μ = %.12f, want %.12f", h, p, f.Smooth, want)
			}
			if math.Abs(f.Distance/d-1) > 4*bound+3e-12 { // its share is 2/abs(z_n)²
				t.Errorf("%s %v: distance %v, want %v", h, p, f.Distance, d)
			}
		}
		t.Logf("-2, %s: %d points, within %.2f of the bound", h, samples, worst)
	}
}
