package kernel

import (
	"fmt"
	"math"
	"math/big"
	"testing"

	"leadline/precision"
)

// Closed forms. With G = ln|w| where the set's conformal map is known, a point
// has |z_n| = |w|^(p^n) (up to 1/|z_n|²), so the smooth count is
//
//	n + 1 - log_p(p^n·G/ln B) = 1 - log_p(G/ln B)
//
// and the distance estimate is G/|∇G| (Milnor, Dynamics in One Complex
// Variable, §9: the Böttcher map; Julia sets of c = 0 and c = -2 §5).

// form is a set whose potential is known.
type form struct {
	// of returns G and G/|∇G| at z, given to many more bits than the pixels
	// need, in the plane's units.
	of func(z point) (g, distance precision.Ext)
	// rest bounds what the form leaves out of the smooth count and, relative,
	// of the distance.
	rest float64
}

// circle is c = 0: w = z, G = ln|z|, |∇G| = 1/|z|. Nothing is left out.
func circle(z point) (g, d precision.Ext) {
	g = precision.ExtOfBig(z.lnAbs())
	return g, g.Mul(precision.ExtOfBig(z.abs()))
}

// interval is c = -2: z = w + 1/w, G = ln|w|, |∇G| = 1/|w - 1/w|. Beyond the
// bailout B = 10⁶ the term 1/w is 10⁻¹² of w.
func interval(z point) (g, d precision.Ext) {
	four := newPoint(4, 0, z.re.Prec())
	root := z.mul(z).sub(four).sqrt() // w - 1/w
	w := z.add(root)
	if w.norm().Cmp(big.NewFloat(4)) < 0 { // |z + root| = 2|w|
		w = z.sub(root)
	}
	w.re.SetMantExp(w.re, -1)
	w.im.SetMantExp(w.im, -1)
	g = precision.ExtOfBig(w.lnAbs())
	return g, g.Mul(precision.ExtOfBig(root.abs()))
}

// smooth turns a potential into a smooth count.
func (f form) smooth(g precision.Ext, power int, bailout float64) float64 {
	lnB := precision.ExtOf(math.Log(bailout))
	return 1 - g.Quo(lnB).Log2()/math.Log2(float64(power))
}

// TestClosedForms holds three Julia sets against their closed forms in every
// regime: far outside, at a glance, and deep at points of the Julia set: 1 and
// 3/5 + 4i/5 lie on the unit circle (the latter at an angle that is not a
// rational part of the circle: Niven 1956), 2 is the tip of [-2, 2], where the
// orbit of 1.2 is dense.
func TestClosedForms(t *testing.T) {
	exactly, nearly := form{circle, 0}, form{interval, 2e-13}
	views := []struct {
		form
		power          int
		param          string
		re, im, height string
		regime         string
		samples        int
	}{
		{exactly, 2, "0", "0", "0", "3", "direct", 400},
		{exactly, 2, "0", "30", "400", "1000", "direct", 100},
		{exactly, 2, "0", "1", "0", "1e-20", "double", 100},
		{exactly, 2, "0", "0.6", "0.8", "1e-9", "double", 100},
		{exactly, 2, "0", "0.6", "0.8", "3e-90", "double", 100},
		{exactly, 2, "0", "3", "-4", "1e-60", "double", 20},
		{exactly, 2, "0", "1", "0", "1e-400", "deep", 40},
		{exactly, 2, "0", "0.6", "0.8", "1e-150", "deep", 40},
		{exactly, 2, "0", "0.6", "0.8", "1e-400", "deep", 40},
		{exactly, 2, "0", "-0.6", "0.8", "1e-1100", "deep", 20},
		{exactly, 2, "0", "3", "-4", "1e-500", "deep", 20},
		{exactly, 3, "0", "0", "0", "3", "direct", 400},
		{exactly, 3, "0", "0.6", "0.8", "1e-9", "double", 100},
		{exactly, 3, "0", "1", "0", "1e-50", "double", 100},
		{exactly, 3, "0", "0.6", "0.8", "1e-400", "deep", 40},
		{exactly, 3, "0", "-1", "0", "1e-1100", "deep", 20},
		{nearly, 2, "-2", "0", "0", "5", "direct", 400},
		{nearly, 2, "-2", "2", "0", "1e-7", "double", 100},
		{nearly, 2, "-2", "1.2", "0", "1e-30", "double", 100},
		{nearly, 2, "-2", "2", "0", "1e-300", "deep", 40},
		{nearly, 2, "-2", "1.2", "0", "1e-400", "deep", 40},
		{nearly, 2, "-2", "2", "0", "1e-1100", "deep", 20},
	}
	for _, v := range views {
		s := &scene{re: v.re, im: v.im, height: v.height, power: v.power, limit: 20000,
			julia: true, paramRe: v.param, bailout: 1e6}
		s.name = fmt.Sprintf("z^%d + %s at %s + %si, %s", v.power, v.param, v.re, v.im, v.height)
		if s.build(t); s.regime() != v.regime {
			t.Fatalf("%s: %s, not %s", s.name, s.regime(), v.regime)
		}
		holdClosed(t, s, v.form, v.samples)
	}
}

// holdClosed compares samples of a scene with a closed form. The bound is
// rounding: an iteration changes δ by a few units of 2^-53 of itself and leaps
// leave out 2^-48, which moves the point by that share of its distance r from
// the centre, and the smooth count's slope is 1/(ln p · distance).
func holdClosed(t *testing.T, s *scene, f form, samples int) {
	t.Helper()
	if testing.Short() {
		samples = (samples + 4) / 5
	}
	var escaped int
	var worst, worstD float64
	for _, p := range s.spread(samples, 3) {
		g, d := f.of(s.at(p[0], p[1]).prec(2*s.bits + 64))
		got := s.kernel.Sample(p[0], p[1])
		// A potential so small belongs to a point of the filled set, where the
		// arithmetic leaves a last digit.
		if g.Sign() <= 0 || g.Log2() < -1.5*float64(s.bits) {
			if got.State == Escaped {
				t.Errorf("%s %v: inside, yet escaped at %d", s.name, p, got.N)
			}
			continue
		}
		if got.State != Escaped {
			t.Errorf("%s %v: %v, but its potential is %v", s.name, p, got.State, g)
			continue
		}
		escaped++
		want, distance := f.smooth(g, s.power, s.bailout), d.Quo(s.pixel).Float64()
		r := math.Hypot(p[0]-s.kernel.cfg.View.MidX, p[1]-s.kernel.cfg.View.MidY)
		bound := f.rest + (float64(got.N+1)*0x1p-52+0x1p-47)*(1+r/(s.lnPower()*distance))
		worst = math.Max(worst, math.Abs(got.Smooth-want)/bound)
		if math.Abs(got.Smooth-want) > bound {
			t.Errorf("%s %v: smooth %.15g, want %.15g", s.name, p, got.Smooth, want)
		}
		whole := math.Abs(want-math.Round(want)) < 1e-9
		if n := int(math.Max(math.Ceil(want)-1, 0)); !whole && got.N != n {
			t.Errorf("%s %v: n = %d, want %d", s.name, p, got.N, n)
		}
		if got.Distance == distance {
			continue // both may be beyond the doubles
		}
		off := math.Abs(got.Distance/distance - 1)
		worstD = math.Max(worstD, off)
		if !(off < 4*bound+10*f.rest) {
			t.Errorf("%s %v: distance %v, want %v", s.name, p, got.Distance, distance)
		}
	}
	if escaped < samples/4 {
		t.Errorf("%s: only %d of %d samples escaped", s.name, escaped, samples)
	}
	t.Logf("%-32s %-6s %3d samples, smooth within %.2f of the bound, distance within %.1e",
		s.name, s.regime(), escaped, worst, worstD)
}
