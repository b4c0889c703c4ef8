package precision

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

func randomFixed(r *rand.Rand, frac uint) *Fixed {
	part := func() *big.Int {
		x := new(big.Int)
		for range frac/62 + 1 {
			x.Lsh(x, 62).Or(x, big.NewInt(r.Int64N(1<<62)))
		}
		x.Rsh(x, uint(r.IntN(int(frac))))
		if r.IntN(2) == 0 {
			x.Neg(x)
		}
		return x
	}
	z := &Fixed{Frac: frac}
	z.Re.Set(part())
	z.Im.Set(part())
	return z
}

// TestFixedAgainstRat holds squares and products against exact rationals: each
// part is the exact one, floored at the last fractional bit.
func TestFixedAgainstRat(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 9))
	var s FixedScratch
	for range 500 {
		frac := uint(r.IntN(700) + 64)
		x, y := randomFixed(r, frac), randomFixed(r, frac)
		floor := func(a, b, c, d *big.Int, sign int) *big.Int {
			p, q := new(big.Int).Mul(a, b), new(big.Int).Mul(c, d)
			if sign < 0 {
				q.Neg(q)
			}
			p.Add(p, q)
			return p.Rsh(p, frac) // an arithmetic shift floors
		}
		var p, q Fixed
		p.Mul(x, y, &s)
		if p.Re.Cmp(floor(&x.Re, &y.Re, &x.Im, &y.Im, -1)) != 0 || p.Im.Cmp(floor(&x.Re, &y.Im, &x.Im, &y.Re, 1)) != 0 {
			t.Fatalf("product of %v bits is off", frac)
		}
		q.Sqr(x, &s)
		p.Mul(x, x, &s)
		if !p.Equal(&q) {
			t.Fatalf("square of %v bits is not the product", frac)
		}
		alias := new(Fixed).Set(x)
		if alias.Mul(alias, y, &s); !alias.Equal(p.Mul(x, y, &s)) {
			t.Fatal("an aliased product differs")
		}
	}
}

// TestFixedRoundsToNearest compares the doubles of fixed-point numbers with
// math/big's own rounding, over sizes, shifts and ties.
func TestFixedRoundsToNearest(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 4))
	check := func(x *big.Int, frac uint) {
		t.Helper()
		z := &Fixed{Frac: frac}
		z.Re.Set(x)
		f := new(big.Float).SetPrec(uint(x.BitLen()) + 1).SetInt(x)
		f.SetMantExp(f, -int(frac))
		want, _ := new(big.Float).SetPrec(53).SetMode(big.ToNearestEven).Set(f).Float64()
		if got, _ := z.Complex(); got != want {
			t.Fatalf("%v / 2^%d is %v, want %v", x, frac, got, want)
		}
		e := z.Ext()
		if got := math.Ldexp(e.Re, int(e.E)); want != 0 && got != want {
			t.Fatalf("%v / 2^%d is %v in extended range, want %v", x, frac, got, want)
		}
	}
	for range 3000 {
		frac := uint(r.IntN(900) + 1)
		check(&randomFixed(r, frac+60).Re, frac)
	}
	for _, low := range []int64{0x3ff, 0x400, 0x401, 0xc00, 0x7ff} { // around ties of 64 bits
		for _, shift := range []uint{0, 1, 63, 64, 65, 130} {
			x := new(big.Int).Lsh(big.NewInt(1<<62|low), shift)
			check(x, 90)
			check(x.Or(x, big.NewInt(1)), 90)
			check(x.Neg(x), 90)
		}
	}
}

// TestAddExt adds numbers far below, around and above the last bit.
func TestAddExt(t *testing.T) {
	z := &Fixed{Frac: 200}
	z.AddExt(NewExtComplex(1.5, -0.25, 0))
	if re, im := z.Complex(); re != 1.5 || im != -0.25 {
		t.Errorf("1.5 - 0.25i became %v, %v", re, im)
	}
	z = &Fixed{Frac: 200}
	z.AddExt(NewExtComplex(0x1.8p-200, 0x1p-300, 0)) // one and a half last bits; far below
	if z.Re.Int64() != 2 || z.Im.Sign() != 0 {
		t.Errorf("rounded to %v, %v last bits", &z.Re, &z.Im)
	}
}

func BenchmarkFixedSqr(b *testing.B) {
	for _, frac := range []uint{128, 512, 1100, 3400, 10000, 33000} {
		b.Run(big.NewInt(int64(frac)).String(), func(b *testing.B) {
			x := randomFixed(rand.New(rand.NewPCG(1, 1)), frac)
			var s FixedScratch
			var z Fixed
			for b.Loop() {
				z.Sqr(x, &s)
			}
		})
	}
}
