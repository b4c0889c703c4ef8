package precision

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

// bigComplex is a complex number of 200 bits, the judge of ExtComplex.
type bigComplex struct{ re, im *big.Float }

func (z ExtComplex) big() bigComplex {
	part := func(x float64) *big.Float {
		f := new(big.Float).SetPrec(200).SetFloat64(x)
		return f.SetMantExp(f, int(z.E))
	}
	return bigComplex{part(z.Re), part(z.Im)}
}

func newBig() *big.Float { return new(big.Float).SetPrec(200) }

func (a bigComplex) mul(b bigComplex) bigComplex {
	re := newBig().Sub(newBig().Mul(a.re, b.re), newBig().Mul(a.im, b.im))
	im := newBig().Add(newBig().Mul(a.re, b.im), newBig().Mul(a.im, b.re))
	return bigComplex{re, im}
}

func (a bigComplex) add(b bigComplex) bigComplex {
	return bigComplex{newBig().Add(a.re, b.re), newBig().Add(a.im, b.im)}
}

func (a bigComplex) abs() *big.Float {
	s := newBig().Add(newBig().Mul(a.re, a.re), newBig().Mul(a.im, a.im))
	return s.Sqrt(s)
}

// withinModulus reports whether |z - want| <= bound·scale.
func withinModulus(z ExtComplex, want bigComplex, scale *big.Float, bound float64) bool {
	d := z.big()
	d.re.Sub(d.re, want.re)
	d.im.Sub(d.im, want.im)
	return d.abs().Cmp(newBig().Mul(scale, big.NewFloat(bound))) <= 0
}

func randomExtComplex(r *rand.Rand) ExtComplex {
	e := r.Int64N(40000) - 20000
	if r.IntN(3) == 0 {
		e = r.Int64N(200) - 100
	}
	return NewExtComplex(r.NormFloat64(), r.NormFloat64()*math.Ldexp(1, -r.IntN(80)), e)
}

// TestExtComplexAgainstBig holds products, quotients and sums against 200-bit
// arithmetic, and the normal form's invariant.
func TestExtComplexAgainstBig(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 11))
	for range 20000 {
		x, y := randomExtComplex(r), randomExtComplex(r)
		if r.IntN(2) == 0 {
			y.E = x.E + r.Int64N(260) - 130
		}
		bx, by := x.big(), y.big()
		p := bx.mul(by)
		if !withinModulus(x.Mul(y), p, p.abs(), 0x1p-51) {
			t.Fatalf("%v * %v = %v", x, y, x.Mul(y))
		}
		if q := x.Quo(y); !withinModulus(q.Mul(y), bx, bx.abs(), 0x1p-50) {
			t.Fatalf("%v / %v = %v", x, y, q)
		}
		larger := bx.abs()
		if o := by.abs(); o.Cmp(larger) > 0 {
			larger = o
		}
		if !withinModulus(x.Add(y), bx.add(by), larger, 0x1p-52) {
			t.Fatalf("%v + %v = %v", x, y, x.Add(y))
		}
		for _, z := range []ExtComplex{x.Mul(y), x.Add(y), x.Quo(y), x.Scale(3)} {
			if m := math.Max(math.Abs(z.Re), math.Abs(z.Im)); m < 0.5 || m >= 1 {
				t.Fatalf("%v is not in normal form", z)
			}
		}
	}
}

// TestKeyOrders: keys order moduli as their values do, in either form.
func TestKeyOrders(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 5))
	for range 20000 {
		x, y := randomExtComplex(r), randomExtComplex(r)
		if r.IntN(2) == 0 {
			y = x.Scale(1 + r.Float64()*1e-9)
		}
		kx, ky := x.Key(), y.Key()
		switch x.Abs().Cmp(y.Abs()) {
		case -1:
			if kx > ky {
				t.Fatalf("|%v| < |%v| but keys %d > %d", x, y, kx, ky)
			}
		case 1:
			if kx < ky {
				t.Fatalf("|%v| > |%v| but keys %d < %d", x, y, kx, ky)
			}
		}
		if d := KeyOfSquare(x.Abs()) - kx; d < -1 || d > 1 {
			t.Fatalf("key of |%v| by its modulus is off by %d", x, d)
		}
	}
	z := NewExtComplex(3e-50, -4e-50, 0)
	re, im := z.Complex()
	if k := KeyOf(re*re + im*im); k != z.Key() {
		t.Errorf("the key of a double's square is %d, of the same in extended range %d", k, z.Key())
	}
	if (ExtComplex{}).Key() >= NewExtComplex(1, 0, -1<<20).Key() {
		t.Error("zero does not come first")
	}
}

// TestComplexRange checks the ends of the doubles' range.
func TestComplexRange(t *testing.T) {
	for _, c := range []struct {
		z      ExtComplex
		re, im float64
	}{
		{NewExtComplex(0.75, -0.5, 1023), 0x1.8p1022, -0x1p1022},
		{NewExtComplex(0.75, -0.5, 1030), math.Inf(1), math.Inf(-1)},
		{NewExtComplex(0.75, 0, 2000), math.Inf(1), 0},
		{NewExtComplex(0.5, -0.5, -1073), 0x1p-1074, -0x1p-1074},
		{NewExtComplex(0.5, 0.5, -3000), 0, 0},
		{ExtComplex{}, 0, 0},
	} {
		if re, im := c.z.Complex(); re != c.re || im != c.im {
			t.Errorf("%v is %v, %v, want %v, %v", c.z, re, im, c.re, c.im)
		}
	}
}

func BenchmarkExtComplexMulAdd(b *testing.B) {
	x, y := NewExtComplex(0.6, 0.7, -1500), NewExtComplex(0.9, -0.3, 1)
	z := x
	for b.Loop() {
		z = z.Mul(y).Add(x)
	}
}
