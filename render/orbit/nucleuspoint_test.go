package orbit

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/big"
	"testing"

	"leadline/precision"
)

// misses is how far c lies from a zero of z_period to first order, found in
// big floats at the given bits.
func misses(q Target, p *NucleusPoint, bits uint) precision.Ext {
	c := numberOf(p.Re, p.Im, bits)
	z, d := c, one
	for range p.Period - 1 {
		d = q.Map.Derivative(z.ext()).Mul(d).Add(one)
		z = z.next(q.Map.Power(), c)
	}
	if x := z.ext(); !x.IsZero() {
		return x.Quo(d).Abs()
	}
	return precision.Ext{}
}

// ext is a rounded to 53 bits.
func (a number) ext() precision.ExtComplex {
	return precision.ExtComplexOf(precision.ExtOfBig(a.re), precision.ExtOfBig(a.im))
}

// holdsTo fails the test unless a nucleus lies within 2^-20 of its size.
func holdsTo(t *testing.T, q Target, p *NucleusPoint) {
	t.Helper()
	size := p.Size.Abs()
	bits := uint(2*(64-min(size.E, 0))) + 64
	if off := misses(q, p, bits); off.Cmp(size.Ldexp(-20)) > 0 {
		t.Errorf("%.30s + %.30si, period %d: off by %v, its size is %v", p.Re, p.Im, p.Period, off, size)
	}
}

// TestKnownNuclei: z² + c: c = 0; c² + c = 0 gives -1; the cubic c³+2c²+c+1 has
// by Cardano the roots below. z³ + c: c³ + c = 0 gives ±i. All by hand; digits
// of the cubic's roots from its closed form, c = -(2 + s + 1/s)/3 with
// s³ = (25 + 3√69)/2 for the real one.
func TestKnownNuclei(t *testing.T) {
	s := math.Cbrt((25 + 3*math.Sqrt(69)) / 2)
	if c := -(2 + s + 1/s) / 3; math.Abs(c+1.75487766624669276) > 1e-15 {
		t.Errorf("Cardano's root is %.17g", c)
	}
	for _, v := range []struct {
		power, period  int
		re, im, radius string
		wantRe, wantIm float64
		size           float64 // 0: not known by hand
		shape          Shape
	}{
		{2, 1, "0.1", "0.05", "0.2", 0, 0, 1, Cardioid},
		{2, 2, "-1.05", "0.03", "0.1", -1, 0, 0.5, Disc},
		{2, 3, "-1.75", "0.01", "0.02", -1.75487766624669276, 0, 0, Cardioid},
		{2, 3, "-0.12", "0.75", "0.02", -0.12256116687665362, 0.74486176661974424, 0, Disc},
		{2, 3, "-0.12", "-0.75", "0.02", -0.12256116687665362, -0.74486176661974424, 0, Disc},
		{3, 1, "0.1", "-0.1", "0.2", 0, 0, 1, ""},
		{3, 2, "0.05", "1.02", "0.1", 0, 1, 1 / (2 * math.Sqrt(3)), ""},
		{3, 2, "0.05", "-1.02", "0.1", 0, -1, 1 / (2 * math.Sqrt(3)), ""},
	} {
		for _, period := range []int{0, v.period} {
			q := target(t, v.power, v.re, v.im, v.radius, 100)
			q.Tolerance = precision.ExtOf(1e-17)
			p := nucleusNear(t, q, period)
			re, im := numberOf(p.Re, p.Im, 80).doubles()
			if p.Period != v.period || p.Shape != v.shape || cabs(re-v.wantRe, im-v.wantIm) > 4e-16 {
				t.Errorf("power %d: %s + %si, period %d, %q, want %v + %vi, %d, %q", v.power, p.Re, p.Im, p.Period, p.Shape, v.wantRe, v.wantIm, v.period, v.shape)
			}
			if got := p.Size.Abs().Float64(); v.size != 0 && math.Abs(got-v.size) > 1e-14 {
				t.Errorf("power %d, period %d: size %v, want %v", v.power, v.period, got, v.size)
			}
			holdsTo(t, q, p)
		}
	}
}

// TestSizes holds the size estimate against components whose ends on the real
// axis are known. Period 1 reaches from -3/4 to 1/4 and period 2 from -5/4 to
// -3/4, both exactly their sizes 1 and 1/2. For period 3 the multiplier μ obeys
// c³ + 2c² + (1 - μ/8)c + (1 - μ/8)² = 0 (Giarrusso and Fisher 1995), so the
// component on the real axis ends at -7/4 and at the root for μ = -1. An estimate to
// first order must come within a twentieth of the width.
func TestSizes(t *testing.T) {
	f := func(c float64) float64 { return ((c+2)*c+1.125)*c + 1.125*1.125 }
	lo, hi := -1.78, -1.76
	if f(lo)*f(hi) > 0 {
		t.Fatal("no root between")
	}
	for range 60 {
		if mid := (lo + hi) / 2; f(mid)*f(lo) > 0 {
			lo = mid
		} else {
			hi = mid
		}
	}
	p := nucleusNear(t, target(t, 2, "-1.755", "0", "0.01", 100), 3)
	width := -1.75 - lo
	if got := p.Size.Abs().Float64() / width; math.Abs(got-1) > 0.05 {
		t.Errorf("period 3 is %v wide, %v times the estimate", width, 1/got)
	} else {
		t.Logf("period 3: estimate over width %.4f", got)
	}
	if p.Size.Im != 0 || p.Size.Re <= 0 {
		t.Errorf("the copy on the real axis is not turned, its size is %v", p.Size)
	}
}

// TestAllNuclei finds every nucleus of periods up to 6 by asking for the period
// around the points of a grid. Their numbers are 1, 1, 3, 6, 15, 27 (OEIS
// A000740; for z³ + c 1, 2, 8, see TestNucleiCount). Of those of period n the
// discs are attached to components of the divisors m, φ(n/m) each, so 0, 1, 2,
// 3, 4, 7 (from the definition).
func TestAllNuclei(t *testing.T) {
	discs := []int{0, 1, 2, 3, 4, 7}
	for power, counts := range map[int][]int{2: {1, 1, 3, 6, 15, 27}, 3: {1, 2, 8}} {
		if testing.Short() {
			counts = counts[:3]
		}
		for i, want := range counts {
			found, disc := map[string]bool{}, 0
			for k := range 41 * 29 {
				x, y := 0.1*float64(k%41)-2.05, 0.1*float64(k/41)-1.4
				q := target(t, power, fmt.Sprintf("%.2f", x), fmt.Sprintf("%.2f", y), "0.1", 100)
				p, err := FindNucleus(context.Background(), q, i+1)
				if errors.Is(err, ErrNone) {
					continue
				} else if err != nil {
					t.Fatal(err)
				}
				a, b := numberOf(p.Re, p.Im, 80).doubles()
				key := fmt.Sprintf("%.0f %.0f", math.Round(a*1e5+0.317), math.Round(b*1e5+0.271))
				if !found[key] && p.Shape == Disc {
					disc++
				}
				if !found[key] {
					holdsTo(t, q, p)
				}
				found[key] = true
				if p.Period != i+1 {
					t.Errorf("asked for period %d, got %d", i+1, p.Period)
				}
			}
			if len(found) != want {
				t.Errorf("power %d: %d nuclei of period %d, want %d", power, len(found), i+1, want)
			}
			if power == 2 && disc != discs[i] {
				t.Errorf("%d discs of period %d, want %d", disc, i+1, discs[i])
			}
		}
	}
}

// TestSizesFeigenbaum: along the period doublings the components shrink by
// Feigenbaum's δ, as their distances do (see TestFeigenbaum).
func TestSizesFeigenbaum(t *testing.T) {
	const delta = 4.669201609102990671853
	at, gap, size := -1.0, -1.0, 0.5
	ratio := 0.0
	for n := 2; n <= 7; n++ {
		gap /= delta
		q := target(t, 2, fmt.Sprintf("%.12f", at+gap), "0", fmt.Sprintf("%.12f", -gap/2), 1000)
		p := nucleusNear(t, q, 1<<n)
		re, im := numberOf(p.Re, p.Im, 80).doubles()
		if im != 0 || p.Shape != Disc {
			t.Errorf("period %d: %s + %si, %s", 1<<n, p.Re, p.Im, p.Shape)
		}
		s := p.Size.Abs().Float64()
		ratio, size = size/s, s
		at, gap = re, re-at
	}
	if math.Abs(ratio-delta) > 1e-3 {
		t.Errorf("sizes shrink by %v, want %v", ratio, delta)
	}
}

// deeper goes down as a maker does: half way to a nucleus, a step aside, the
// nearest nucleus there, until atoms are smaller than size.
func deeper(t testing.TB, size precision.Ext) (Target, *NucleusPoint) {
	t.Helper()
	q := target(t, 2, "-1.76", "0.02", "0.02", 1<<20)
	p, height := nucleusNear(t, q, 0), q.Radius
	for p.Size.Abs().Cmp(size) > 0 {
		height = HalfWay(height, p.Size.Abs(), 4)
		c := precision.NewFixed(p.Re, p.Im, uint(100-2*height.E))
		c.AddExt(precision.NewExtComplex(math.Cos(1), math.Sin(1), 0).MulReal(height.Ldexp(-1)))
		q.Near[0], q.Near[1] = written(c, height.Ldexp(-30))
		q.Radius = height.Ldexp(-2)
		p = nucleusNear(t, q, 0)
	}
	return q, p
}

// TestDeepNuclei: nuclei far down, each held in big floats at twice the bits.
func TestDeepNuclei(t *testing.T) {
	sizes := []string{"1e-50", "1e-300"}
	if testing.Short() {
		sizes = sizes[:1]
	}
	for _, size := range sizes {
		q, p := deeper(t, decimal(t, size).Ext())
		t.Logf("period %d, size %.3g, %d digits", p.Period, p.Size.Abs().Big(53), len(p.Re.String()))
		holdsTo(t, q, p)
		again, ok, err := PeriodAt(context.Background(), q)
		if err != nil || !ok || again > p.Period {
			t.Errorf("PeriodAt says %d, %t, %v, FindNucleus %d", again, ok, err, p.Period)
		}
	}
	// Beside c = i, at a thousandth of the period for the same depth.
	q := target(t, 2, "1e-1000", "1", "2e-1000", 1<<20)
	holdsTo(t, q, nucleusNear(t, q, 0))
}

// TestPolish: √2 - 1, the root of c² + 2c - 1, to 10,000 bits, against the root
// of math/big; the secant method's order is the golden ratio (handbooks), so from
// 40 bits twelve steps and the first two values are enough.
func TestPolish(t *testing.T) {
	w := walkerFor(t, 2, 100)
	w.q.Radius = precision.ExtOf(1)
	calls := 0
	f := func(c *precision.Fixed) (*precision.Fixed, bool, error) {
		calls++
		v := new(precision.Fixed).Sqr(c, &w.scratch)
		v.Add(v, c).Add(v, c)
		v.Re.Sub(&v.Re, new(big.Int).Lsh(big.NewInt(1), c.Frac))
		return v, true, nil
	}
	c, err := w.polish(fixed(math.Sqrt2-1+0x1p-42, 0x1p-45, 100), precision.ExtOf(0x1p-40), precision.ExtOf(1).Ldexp(-10000), f)
	if c == nil || err != nil {
		t.Fatalf("no root: %v", err)
	}
	want := new(big.Float).SetPrec(10100).SetInt64(2)
	want.Sqrt(want).Sub(want, big.NewFloat(1))
	off := want.Sub(want, float(c))
	if off.Sign() != 0 && off.MantExp(nil) > -10000 || c.Im.BitLen() > 64 {
		t.Errorf("off by %.3g, imaginary part of %d bits", off, c.Im.BitLen())
	}
	if calls > 14 {
		t.Errorf("took %d values", calls)
	}
}

// BenchmarkFindNucleus finds nuclei beside c = i, where periods are short, from
// views of several depths, and one of a long period.
func BenchmarkFindNucleus(b *testing.B) {
	for _, depth := range []string{"1e-50", "1e-300", "1e-1000"} {
		q := target(b, 2, depth, "1", "2"+depth[1:], 1<<20)
		b.Run(fmt.Sprintf("%s, period %d", depth, nucleusNear(b, q, 0).Period), func(b *testing.B) {
			for b.Loop() {
				nucleusNear(b, q, 0)
			}
		})
	}
	q, p := deeper(b, decimal(b, "1e-200").Ext())
	b.Run(fmt.Sprintf("1e-200, period %d", p.Period), func(b *testing.B) {
		for b.Loop() {
			nucleusNear(b, q, 0)
		}
	})
}
