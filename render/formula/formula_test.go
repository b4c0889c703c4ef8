package formula

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"leadline/precision"
)

// maps are all maps there are.
func maps(t *testing.T) []Map {
	t.Helper()
	var all []Map
	for p := 2; p <= 3; p++ {
		m, err := ForPower(p)
		if err != nil {
			t.Fatal(err)
		}
		if m.Power() != p {
			t.Errorf("power %d answers to %d", m.Power(), p)
		}
		all = append(all, m)
	}
	return all
}

func TestForPower(t *testing.T) {
	maps(t)
	for _, p := range []int{-1, 0, 1, 4} {
		if m, err := ForPower(p); err == nil {
			t.Errorf("power %d: %T", p, m)
		}
	}
}

const bits = 400

// number is a complex big.Float; power multiplies it out.
type number struct{ re, im *big.Float }

func numberOf(z precision.ExtComplex) number {
	f := func(x float64) *big.Float {
		b := new(big.Float).SetPrec(bits).SetFloat64(x)
		return b.SetMantExp(b, int(z.E))
	}
	return number{f(z.Re), f(z.Im)}
}

func (a number) add(b number) number {
	return number{new(big.Float).Add(a.re, b.re), new(big.Float).Add(a.im, b.im)}
}

func (a number) sub(b number) number {
	return number{new(big.Float).Sub(a.re, b.re), new(big.Float).Sub(a.im, b.im)}
}

func (a number) mul(b number) number {
	m := func(x, y *big.Float) *big.Float { return new(big.Float).Mul(x, y) }
	re, im := m(a.re, b.re), m(a.re, b.im)
	return number{re.Sub(re, m(a.im, b.im)), im.Add(im, m(a.im, b.re))}
}

func (a number) power(p int) number {
	z := a
	for range p - 1 {
		z = z.mul(a)
	}
	return z
}

func (a number) ext() precision.ExtComplex {
	return precision.ExtComplexOf(precision.ExtOfBig(a.re), precision.ExtOfBig(a.im))
}

// near reports whether a and b agree to a few units of 2^-53 of their modulus.
func near(a, b precision.ExtComplex) bool {
	return a.Sub(b).Abs().Cmp(b.Abs().Ldexp(-49)) <= 0
}

// TestAlgebra holds every form of a map against its definition f(z) = z^p,
// multiplied out in 400 bits: f(Z+d) - f(Z) without cancellation for d far
// below Z, as large, and far above; the derivative p·z^(p-1); values in doubles
// and in fixed point.
func TestAlgebra(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	random := func(e int64) precision.ExtComplex {
		return precision.NewExtComplex(2*r.Float64()-1, 2*r.Float64()-1, e)
	}
	for _, m := range maps(t) {
		p := m.Power()
		for range 2000 {
			z, d := random(2), random(-int64(r.IntN(100))+5)
			Z, D := numberOf(z), numberOf(d)
			want := Z.add(D).power(p).sub(Z.power(p)).ext()
			// The step is a product of factors; only their own sums can cancel.
			got := m.Step(z, d)
			slack := z.Abs().Add(d.Abs())
			for range p - 2 {
				slack = slack.Mul(z.Abs().Add(d.Abs()))
			}
			if got.Sub(want).Abs().Cmp(slack.Mul(d.Abs()).Ldexp(-48)) > 0 {
				t.Fatalf("z^%d: step of %v by %v is %v, want %v", p, z, d, got, want)
			}
			slope := Z.power(max(p-1, 1))
			scale := numberOf(precision.NewExtComplex(float64(p), 0, 0))
			if want := slope.mul(scale).ext(); !near(m.Derivative(z), want) {
				t.Fatalf("z^%d: derivative at %v is %v, want %v", p, z, m.Derivative(z), want)
			}
			re, im := z.Complex()
			vr, vi := m.Value(re, im)
			if want := Z.power(p).ext(); !near(precision.NewExtComplex(vr, vi, 0), want) {
				t.Fatalf("z^%d: value at %v is (%v, %v), want %v", p, z, vr, vi, want)
			}
			sr, si := m.Slope(re, im)
			if !near(precision.NewExtComplex(sr, si, 0), m.Derivative(z)) {
				t.Fatalf("z^%d: slope at %v is (%v, %v)", p, z, sr, si)
			}
			holdAdvance(t, m, z, Z)
		}
	}
}

// holdAdvance: fixed point keeps its last bit but for one rounding down.
func holdAdvance(t *testing.T, m Map, z precision.ExtComplex, Z number) {
	t.Helper()
	const frac = 200
	x := &precision.Fixed{Frac: frac}
	x.AddExt(z)
	m.Advance(x, new(precision.FixedScratch))
	want := Z.power(m.Power())
	for _, part := range []struct {
		got  *big.Int
		want *big.Float
	}{{&x.Re, want.re}, {&x.Im, want.im}} {
		got := new(big.Float).SetPrec(bits).SetInt(part.got)
		got.SetMantExp(got, -frac)
		if d := got.Sub(got, part.want); d.Sign() != 0 && d.MantExp(nil) > -frac+8 {
			t.Fatalf("z^%d: advancing %v is off by %v", m.Power(), z, d)
		}
	}
}

// TestReach: at |d| = reach the nonlinear part is as large as the linear one,
// to first order in d (the next term of (Z+d)^p): d²·p(p-1)/2·Z^(p-2) beside
// p·Z^(p-1)·d.
func TestReach(t *testing.T) {
	for _, m := range maps(t) {
		z := precision.NewExtComplex(0.3, -0.4, -5)
		p := float64(m.Power())
		want := 0.5 * math.Ldexp(1, -5) * 2 / (p - 1)
		if got := m.LinearReach(z).Float64(); math.Abs(got/want-1) > 1e-15 {
			t.Errorf("z^%g: reach %v, want %v", p, got, want)
		}
	}
}
