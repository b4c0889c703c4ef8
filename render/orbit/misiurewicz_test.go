package orbit

import (
	"context"
	"fmt"
	"math"
	"math/big"
	"testing"

	"leadline/precision"
)

// preperiodicNear finds a Misiurewicz point or ends the test.
func preperiodicNear(t testing.TB, q Target) *MisiurewiczPoint {
	t.Helper()
	p, err := FindMisiurewicz(context.Background(), q)
	if err != nil {
		t.Fatalf("%.20s, %.20s within %v: %v", q.Near[0], q.Near[1], q.Radius, err)
	}
	return p
}

// TestKnownMisiurewicz, by hand from the definition, with z_0 = 0: c = -2 goes
// 0, -2, 2, 2, multiplier f'(2) = 4. c = i goes 0, i, -1+i, -i, -1+i, multiplier
// 2(-1+i)·2(-i) = 4+4i. At the real root of c³ + 2c² + 2c + 2, z_3 = -z_2 is
// fixed, with multiplier -2(c² + c). For z³ + c, z_2 = ωz_1 with ω a cube root of
// unity is fixed where c² = ω - 1, with multiplier 3(1 - ω²).
func TestKnownMisiurewicz(t *testing.T) {
	const m31 = -1.5436890126920763616
	turn, quarter := math.Pi*75/180, math.Sqrt(math.Sqrt(3)) // √(ω-1) = ⁴√3 at 75°
	for _, v := range []struct {
		power          int
		re, im, radius string
		k, p           int
		wantRe, wantIm float64
		mulRe, mulIm   float64
	}{
		{2, "-1.9999", "0.0001", "0.001", 2, 1, -2, 0, 4, 0},
		{2, "0.001", "1.001", "0.01", 2, 2, 0, 1, 4, 4},
		{2, "0.001", "-1.001", "0.01", 2, 2, 0, -1, 4, -4},
		{2, "-1.5437", "0.0001", "0.001", 3, 1, m31, 0, -2 * (m31*m31 + m31), 0},
		{2, "0." + zeros(298) + "7", "1", "1e-298", 2, 2, 0, 1, 4, 4},
		{3, "0.34", "1.2715", "0.002", 2, 1, quarter * math.Cos(turn), quarter * math.Sin(turn), 4.5, 1.5 * math.Sqrt(3)},
		{2, "-1." + nines(300) + "6", "0", "1e-299", 2, 1, -2, 0, 4, 0},
	} {
		q := target(t, v.power, v.re, v.im, v.radius, 10000)
		m := preperiodicNear(t, q)
		re, im := numberOf(m.Re, m.Im, 80).doubles()
		if m.Preperiod != v.k || m.Period != v.p || cabs(re-v.wantRe, im-v.wantIm) > 4e-16 {
			t.Errorf("%.9s + %.9si: (%d, %d) at %.25s + %.25si, want (%d, %d)", v.re, v.im, m.Preperiod, m.Period, m.Re, m.Im, v.k, v.p)
		}
		if re, im := m.Multiplier.Complex(); cabs(re-v.mulRe, im-v.mulIm) > 1e-13 {
			t.Errorf("%.9s + %.9si: multiplier %v + %vi, want %v + %vi", v.re, v.im, re, im, v.mulRe, v.mulIm)
		}
		if off := q.Radius.Mul(q.Radius).Ldexp(-50); closes(q, m, 3000).Cmp(off) > 0 {
			t.Errorf("%.9s + %.9si: misses by %v", v.re, v.im, closes(q, m, 3000))
		}
	}
}

// closes is how far, to first order, a point lies from one at which z_(k+p)
// equals z_k, found in big floats.
func closes(q Target, m *MisiurewiczPoint, bits uint) precision.Ext {
	c := numberOf(m.Re, m.Im, bits)
	z, d := c, one
	var at number
	var dat precision.ExtComplex
	for n := 1; ; n++ {
		if n == m.Preperiod {
			at, dat = z, d
		}
		if n == m.Preperiod+m.Period {
			break
		}
		d = q.Map.Derivative(z.ext()).Mul(d).Add(one)
		z = z.next(q.Map.Power(), c)
	}
	minus := number{new(big.Float).SetPrec(bits).SetInt64(-1), new(big.Float).SetPrec(bits)}
	x, slope := z.add(at.mul(minus)).ext(), d.Sub(dat)
	if x.IsZero() {
		return precision.Ext{}
	}
	return x.Quo(slope).Abs()
}

// countMisiurewicz is the number of Misiurewicz points of z^d + c (Hutz and
// Towsley 2015; k counted from z_0).
func countMisiurewicz(d, k, p int) int {
	pow := func(n int) int { return int(math.Pow(float64(d), float64(n))) }
	nuclei := 0
	for q := 1; q <= p; q++ {
		if p%q == 0 {
			nuclei += moebius(p/q) * pow(q-1)
		}
	}
	each := pow(k) - pow(k-1)
	if (k-1)%p == 0 {
		each -= d - 1
	}
	return each * nuclei
}

// TestAllMisiurewicz finds all points of some preperiods and periods by Newton's
// method from a grid, and holds their number against the published formula,
// and each against the search that starts beside it.
func TestAllMisiurewicz(t *testing.T) {
	if n := countMisiurewicz(2, 2, 1) + countMisiurewicz(2, 2, 2); n != 3 { // -2, i, -i
		t.Fatalf("%d points of preperiod 2", n)
	}
	for _, v := range []struct{ power, k, p int }{{2, 2, 1}, {2, 2, 2}, {2, 2, 3}, {2, 3, 1}, {2, 3, 2}, {2, 4, 1}, {2, 4, 3}, {3, 2, 1}, {3, 2, 2}, {3, 3, 1}, {3, 3, 2}} {
		w := walkerFor(t, v.power, 96)
		step := w.preperiodic(pair{v.k, v.p})
		found := map[string]bool{}
		for i := range 40 * 40 {
			c, err := w.settle(fixed(-2.05+0.1037*float64(i%40), -2.03+0.1013*float64(i/40), 96), step)
			if err != nil {
				t.Fatal(err)
			}
			if c == nil {
				continue
			}
			a, b := c.Complex()
			key := fmt.Sprintf("%.0f %.0f", math.Round(a*1e7+0.317), math.Round(b*1e7+0.271))
			if !found[key] {
				found[key] = true
				beside(t, v.power, pair{v.k, v.p}, a, b)
			}
		}
		if want := countMisiurewicz(v.power, v.k, v.p); len(found) != want {
			t.Errorf("power %d: %d points of preperiod %d and period %d, want %d", v.power, len(found), v.k, v.p, want)
		}
	}
}

// beside starts the search a little off a point.
func beside(t *testing.T, power int, r pair, re, im float64) {
	t.Helper()
	q := target(t, power, fmt.Sprintf("%.17f", re+3e-7), fmt.Sprintf("%.17f", im-5e-7), "1e-6", 1000)
	m := preperiodicNear(t, q)
	a, b := numberOf(m.Re, m.Im, 80).doubles()
	if m.Preperiod != r.k || m.Period != r.p || cabs(a-re, b-im) > 1e-14 {
		t.Errorf("power %d, (%d, %d) at %v + %vi: found (%d, %d) at %v + %vi", power, r.k, r.p, re, im, m.Preperiod, m.Period, a, b)
	}
	if off := closes(q, m, 400); off.Cmp(precision.ExtOf(1e-28)) > 0 {
		t.Errorf("power %d, %s + %si misses by %v", power, m.Re, m.Im, off)
	}
	// Cycles that a critical orbit falls on from outside repel (Fatou).
	if m.Multiplier.Abs().Float64() <= 1 {
		t.Errorf("power %d, %s + %si: multiplier %v", power, m.Re, m.Im, m.Multiplier)
	}
}

// TestMultiplierIsScale: Tan Lei's similarity (1990): magnified about c = i by
// the multiplier, the set looks the same, so nuclei of periods two apart lie at
// distances whose ratio approaches it.
func TestMultiplierIsScale(t *testing.T) {
	m := preperiodicNear(t, target(t, 2, "0.001", "1.001", "0.01", 100))
	at := precision.NewFixed(m.Re, m.Im, 300)
	one := nucleusNear(t, target(t, 2, "1e-20", "1", "2e-20", 1000), 0)
	d := precision.NewFixed(one.Re, one.Im, 300)
	d.Sub(d, at)
	step := d.Ext().Quo(m.Multiplier)
	c := new(precision.Fixed).Set(at)
	c.AddExt(step)
	q := target(t, 2, "0", "0", "1", 1000)
	q.Near[0], q.Near[1] = written(c, step.Abs().Ldexp(-30))
	q.Radius = step.Abs().Ldexp(-6)
	next := nucleusNear(t, q, one.Period+m.Period)
	c = precision.NewFixed(next.Re, next.Im, 300)
	c.Sub(c, at)
	if off := d.Ext().Quo(c.Ext()).Sub(m.Multiplier).Abs().Float64(); off > 1e-12 {
		t.Errorf("nuclei of periods %d and %d: distances differ by %v, the multiplier is %v", one.Period, next.Period, d.Ext().Quo(c.Ext()), m.Multiplier)
	}
}

// TestMisiurewiczEnds: searches that find nothing end: beside a parabolic point
// the image of the ball grows very slowly.
func TestMisiurewiczEnds(t *testing.T) {
	for _, v := range [][2]string{{"0.25", "1e-12"}, {"-0.75", "1e-10"}, {"-0.1", "1e-20"}} {
		q := target(t, 2, v[0], "0", v[1], 20000)
		if m, err := FindMisiurewicz(context.Background(), q); err == nil {
			if off := closes(q, m, 200); off.Cmp(q.Radius.Ldexp(-20)) > 0 {
				t.Errorf("%s: found (%d, %d), which misses by %v", v[0], m.Preperiod, m.Period, off)
			}
		} else {
			holdRefusal(t, v[0], err, ErrNone)
		}
	}
}

// BenchmarkFindMisiurewicz finds c = i from views of several depths.
func BenchmarkFindMisiurewicz(b *testing.B) {
	for _, depth := range []string{"1e-50", "1e-300", "1e-1000"} {
		q := target(b, 2, depth, "1", "2"+depth[1:], 1<<20)
		b.Run(depth, func(b *testing.B) {
			for b.Loop() {
				preperiodicNear(b, q)
			}
		})
	}
}
